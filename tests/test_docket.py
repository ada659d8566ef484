"""The solves that a workbook itself asks for."""

from __future__ import annotations

import pytest

import xlroot
from xlroot.docket import Docket
from xlroot.hosts.memory import Content, book_of
from xlroot.values import Grid

SQUARE: dict[str, Content] = {
    "A1": "side",
    "B1": 1,
    "C1": "m",
    "A2": "area wanted",
    "B2": 2,
    "B3": "=B1^2-B2",
}


def settled(contents: dict[str, Content], **saved: Content) -> dict[str, object]:
    docket = Docket.of(book_of(contents, saved=saved))
    return {case.cell.address: case.value for case in docket.settle()}


def test_a_root_is_found_where_a_formula_asks_for_it() -> None:
    values = settled({**SQUARE, "B4": "=XLROOT(B3,B1,0,5)"})
    assert values["B4"] == pytest.approx(2**0.5, rel=1e-12)


def test_arguments_may_be_formulas_and_cells() -> None:
    values = settled({**SQUARE, "B5": 4, "B4": '=XLROOT(B3,B1,B2-2,B5+1,"brent",10^-9)'})
    assert values["B4"] == pytest.approx(2**0.5, abs=1e-9)


def test_a_root_inside_a_larger_formula_keeps_its_record() -> None:
    book = book_of({**SQUARE, "A4": "perimeter", "B4": "=ROUND(4*XLROOT(B3,B1,0,5),3)"})
    docket = Docket.of(book)
    (case,) = docket.settle()
    assert case.value == 5.657
    (record,) = docket.records()
    assert record.root == pytest.approx(2**0.5, rel=1e-12)
    assert record.label == "perimeter"


def test_one_root_feeds_the_next_whatever_was_saved() -> None:
    contents: dict[str, Content] = {
        **SQUARE,
        "B4": "=XLROOT(B3,B1,0,5)",
        "B5": "=B4*10",
        "D1": 1,
        "D2": "=D1-B5",
        "D3": "=XLROOT(D2,D1,0,100)",
    }
    expected = pytest.approx(10 * 2**0.5, rel=1e-11)
    assert settled(contents)["D3"] == expected
    # A host without the functions saved an error; one that did not recalculate an old number.
    from xlroot.values import Fault

    assert settled(contents, B4=Fault.NAME, B5=Fault.NAME)["D3"] == expected
    assert settled(contents, B4=1.5, B5=15.0)["D3"] == expected


def test_the_order_of_cells_does_not_matter() -> None:
    contents: dict[str, Content] = {
        "A1": "=XLROOT(A3,A2,0,100)",
        "A2": 1,
        "A3": "=A2-B4",
        **SQUARE,
        "B4": "=XLROOT(B3,B1,0,5)",
    }
    contents["A1"], contents["A2"] = "=XLROOT(A3,C2,0,100)", "text"
    contents |= {"C2": 1, "A3": "=C2-B4"}
    assert settled(contents)["A1"] == pytest.approx(2**0.5, rel=1e-11)


def test_companions_share_the_record_of_the_root() -> None:
    contents: dict[str, Content] = {
        **SQUARE,
        "D1": "=XLROOT_VERDICT(B3,B1,0,5)",
        "D2": "=INDEX(XLROOT_BOUNDS(B3,B1,0,5),1,2)",
        "D3": "=XLROOT(B3,B1,0,5)",
        "D4": "=XLROOT_RECORD(B3,B1,0,5)",
        "D5": "=XLROOT_STEPS(B3,B1,0,5)",
        "D6": "=XLROOT_SCAN(B3,B1,0,5,11)",
        "D7": "=XLROOT_AT(B3,B1,3)",
    }
    docket = Docket.of(book_of(contents))
    values = {case.cell.address: case.value for case in docket.settle()}
    (record,) = docket.records()
    assert str(record.cell) == "Sheet1!D3"
    assert str(values["D1"]).startswith("bracketed: ")
    assert values["D2"] == record.verdict.high
    steps, scanned = values["D5"], values["D6"]
    assert isinstance(steps, Grid)
    assert isinstance(scanned, Grid)
    assert steps.rows[0][:3] == ("n", "x", "residual")
    assert [row[0] for row in scanned.rows] == [x / 2 for x in range(11)]
    assert scanned.rows[4] == (2.0, 2.0)
    assert values["D7"] == 7.0


def test_a_thousand_rows_filled_down() -> None:
    contents: dict[str, Content] = {}
    for row in range(1, 1001):
        contents |= {
            f"A{row}": 1,
            f"B{row}": row,
            f"C{row}": f"=A{row}^2-B{row}",
            f"D{row}": f"=XLROOT(C{row},A{row},0,1000)",
        }
    records = xlroot.solve_book(book_of(contents))
    assert len(records) == 1000
    for row, record in enumerate(records, start=1):
        assert record.root == pytest.approx(row**0.5, abs=1e-9)


REFUSED = [
    ("=XLROOT(B3,B2,0,5)", {"B2": "=1+1"}, "holds a formula"),
    ("=XLROOT(B3,C9,0,5)", {}, "does not depend"),
    ("=XLROOT(B3,B1,2,5)", {}, "same sign at both ends"),
    ("=XLROOT(B3,B1,5,0)", {}, "not below"),
    ('=XLROOT(B3,B1,0,5,"bisektion")', {}, "did you mean bisection"),
    ("=XLROOT(B3,B1,0,5,,1E-30)", {}, "finer than"),
    ("=XLROOT(B9,B1,-1,5)", {"B9": "=1/B1"}, "pole"),
    ("=XLROOT(B9,B1,0,5)", {"B9": "=LN(B1)"}, "low end"),
    ("=XLROOT(B9,B1,0,5)", {"B9": "=B1+B8", "B8": "=B9"}, "circular"),
    ("=XLROOT(B9,B1,0,5)", {"B9": "=CUBEVALUE(B1)"}, "CUBEVALUE"),
    ("=XLROOT(B1:B3,B1,0,5)", {}, "a reference to one cell"),
    ("=XLROOT(B3,B1)", {}, "takes 4 to 7 arguments"),
    ('=XLROOT(B3,B1,0,5,,,"left")', {}, "safe side"),
    ("=XLROOT(B3,A1,0,5)", {}, "holds no number"),
    (
        "=XLROOT(B9,B1,0,5)",
        {"B8": "=XLROOT(B3,C8,0,5)+B1", "C8": 1, "B9": "=B8-B1*2"},
        "a solve inside a solve",
    ),
    ("=XLROOT_SCAN(B3,B1,0,5,1000000)", {}, "2 to 10,000 points"),
    ("=XLROOT_AT(B3,B1:B2,1)", {}, "a reference to one cell"),
    ("=XLROOT_ALL(B3,B1,0,5)", {}, "no worksheet function XLROOT_ALL"),
]


@pytest.mark.parametrize(("formula", "more", "words"), REFUSED)
def test_a_refusal_says_why_in_the_cell(formula: str, more: dict[str, Content], words: str) -> None:
    values = settled({**SQUARE, **more, "F1": formula, "F2": "=F1*2"})
    assert str(values["F1"]).startswith("xlroot: ")
    assert words in str(values["F1"])


def test_the_safe_side_has_the_acceptable_sign() -> None:
    for side, sign in (("positive", 1.0), ("negative", -1.0)):
        book = book_of({**SQUARE, "F1": f'=XLROOT(B3,B1,0,5,"bisection",0.001,"{side}")'})
        (record,) = xlroot.solve_book(book)
        assert record.root is not None
        assert (record.root**2 - 2.0) * sign > 0.0
        assert abs(record.root - 2**0.5) < 0.001


def test_a_table_of_roots_in_an_array_formula_is_read() -> None:
    from xlroot.book import Formula
    from xlroot.cells import Block, Cell
    from xlroot.hosts.memory import MemorySheet

    book = book_of({**SQUARE})
    sheet = book.sheet_by_name["Sheet1"]
    assert isinstance(sheet, MemorySheet)
    home = Cell("Sheet1", 10, 1)
    formula = Formula("XLROOT_BOUNDS(B3,B1,0,5)", home, Block("Sheet1", 10, 1, 10, 2))
    grown = MemorySheet({**sheet.formulas, (10, 1): formula}, sheet.values, (formula,))
    docket = Docket.of(xlroot.Book("memory", {"Sheet1": grown}))
    (case,) = docket.settle()
    assert isinstance(case.value, Grid)
    low, high = case.value.rows[0]
    assert isinstance(low, float)
    assert isinstance(high, float)
    assert low <= 2**0.5 <= high
