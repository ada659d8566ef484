"""INDEX, ROWS, COLUMNS, ROW, COLUMN, AREAS, ADDRESS, TRANSPOSE, and compiled chains of them.

Published values: Excel's documentation of the functions, from memory.
"""

from __future__ import annotations

import pytest

from tests.functions.test_lookup import call, column, content, row
from tests.test_program import assert_kinds_agree, program_of
from xlroot.cells import Block
from xlroot.errors import Unsupported
from xlroot.hosts.memory import Content
from xlroot.values import Fault, Grid

TABLE = Grid(((1.0, "a"), (2.0, None), (3.0, "c")), Block("S", 5, 2, 7, 3))


def test_index_gives_a_reference_to_a_cell() -> None:
    found = call("INDEX", TABLE, 3.0, 2.0)
    assert found == Grid((("c",),), Block("S", 7, 3, 7, 3))
    assert call("INDEX", TABLE, 3.9, 2.0) == found
    assert content(call("INDEX", TABLE, 2.0, 2.0)) is None


def test_index_gives_lines_where_a_number_is_0() -> None:
    assert call("INDEX", TABLE, 2.0, 0.0) == Grid(((2.0, None),), Block("S", 6, 2, 6, 3))
    assert call("INDEX", TABLE, 0.0, 1.0) == Grid(((1.0,), (2.0,), (3.0,)), Block("S", 5, 2, 7, 2))
    assert call("INDEX", TABLE, 0.0, 0.0) == TABLE
    assert call("INDEX", TABLE) == TABLE


def test_one_number_is_enough_in_a_line() -> None:
    assert content(call("INDEX", column(5.0, 6.0, 7.0), 2.0)) == 6.0
    assert content(call("INDEX", row(5.0, 6.0, 7.0), 2.0)) == 6.0
    assert content(call("INDEX", row(5.0, 6.0, 7.0), 1.0, 3.0)) == 7.0
    with pytest.raises(Unsupported, match="one number"):
        call("INDEX", TABLE, 2.0)


def test_index_in_arrays_and_single_values() -> None:
    array = Grid(((1.0, 2.0), (3.0, 4.0)))
    assert call("INDEX", array, 2.0, 1.0) == 3.0
    assert call("INDEX", array, 0.0, 2.0) == Grid(((2.0,), (4.0,)))
    assert call("INDEX", 8.0, 1.0, 1.0) == 8.0


@pytest.mark.parametrize(
    ("arguments", "fault"),
    [
        ((4.0, 1.0), Fault.REF),
        ((1.0, 3.0), Fault.REF),
        ((-1.0, 1.0), Fault.VALUE),
        ((1.0, 1.0, 2.0), Fault.REF),
        ((1e300, 1.0), Fault.REF),
    ],
)
def test_index_outside(arguments: tuple[float, ...], fault: Fault) -> None:
    assert call("INDEX", TABLE, *arguments) is fault
    assert call("INDEX", Fault.NAME, *arguments) is Fault.NAME


def test_beyond_the_used_cells_all_is_blank() -> None:
    whole = Grid(((1.0,), (2.0,)), Block("S", 1, 1, 1_048_576, 3))
    assert call("INDEX", whole, 500.0, 1.0) == Grid(((None,),), Block("S", 500, 1, 500, 1))
    assert call("INDEX", whole, 0.0, 3.0) == Grid(
        ((None,), (None,)), Block("S", 1, 3, 1_048_576, 3)
    )
    assert call("ROWS", whole) == 1_048_576.0
    assert call("COLUMNS", whole) == 3.0
    for name in ("ROW", "TRANSPOSE"):
        with pytest.raises(Unsupported):
            call(name, whole)


def test_sizes_and_places() -> None:
    assert call("ROWS", TABLE) == 3.0
    assert call("COLUMNS", TABLE) == 2.0
    assert call("ROWS", 5.0) == 1.0
    assert call("ROW", TABLE) == Grid(((5.0,), (6.0,), (7.0,)))
    assert call("COLUMN", TABLE) == Grid(((2.0, 3.0),))
    assert call("ROW", call("INDEX", TABLE, 2.0, 1.0)) == 6.0
    assert call("AREAS", TABLE, TABLE) == 2.0
    assert call("AREAS", 5.0) is Fault.VALUE
    for name in ("ROWS", "COLUMNS", "ROW", "COLUMN", "AREAS", "TRANSPOSE"):
        assert call(name, Fault.REF) is Fault.REF


def test_transpose_turns_rows_into_columns_and_blanks_into_0() -> None:
    assert call("TRANSPOSE", TABLE) == Grid(((1.0, 2.0, 3.0), ("a", 0.0, "c")))


@pytest.mark.parametrize(
    ("arguments", "text"),
    [
        ((2.0, 3.0), "$C$2"),
        ((2.0, 3.0, 2.0), "C$2"),
        ((2.0, 3.0, 3.0), "$C2"),
        ((2.0, 3.0, 4.0), "C2"),
        ((2.0, 3.0, 2.0, False), "R2C[3]"),
        ((2.0, 3.0, 1.0, False, "[Book1]Sheet1"), "'[Book1]Sheet1'!R2C3"),
        ((2.0, 3.0, 1.0, False, "EXCEL SHEET"), "'EXCEL SHEET'!R2C3"),
        ((2.0, 3.0, None, None, "Piping"), "Piping!$C$2"),
        ((0.0, 3.0), Fault.VALUE),
        ((2.0, 16_385.0), Fault.VALUE),
        ((2.0, 3.0, 5.0), Fault.VALUE),
    ],
)
def test_address_as_documented(arguments: tuple[object, ...], text: object) -> None:
    assert call("ADDRESS", *arguments) == text


HELD: dict[str, Content] = {"C1": 1.0, "C3": "5", "C4": True, "C5": 7.0}
CHAINS: list[dict[str, Content]] = [
    {"A3": "=MIN(INDEX(C1:C5,A1),5)"},
    {"A3": "=SUM(INDEX(C1:C5,A1),1)"},
    {"A2": "=INDEX(C1:C5,A1)", "A3": "=SUM(A2,1)"},
    {"A2": "=INDEX(C1:C5,A1)", "A3": "=COUNT(A2:A2)+AVERAGE(A2,1)"},
    {"A2": "=INDEX(C1:C5,A1)", "A3": "=IF(ISBLANK(A2),1,2)"},
    {"A3": "=COUNTA(INDEX(C1:C5,A1))"},
    {"D1": 1.0, "D2": 2.0, "D3": 3.0, "A3": "=XLOOKUP(A1,D1:D3,C1:C3,-9,-1)"},
    {"D1": 1.0, "D2": 2.0, "D3": 3.0, "A3": "=IFERROR(XLOOKUP(A1,D1:D3,C1:C3,,0),-4)"},
    {"D1": "=A1*2", "D2": "=A1*3", "A3": "=INDEX(D1:D2,2)+VLOOKUP(A1*2.5,D1:D2,1)"},
]


@pytest.mark.parametrize("cells", CHAINS, ids=lambda cells: str(cells["A3"]))
def test_what_is_taken_from_a_range_stays_a_reference_when_compiled(
    cells: dict[str, Content],
) -> None:
    """Texts, logicals and blanks of a reference do not count; a blank formula result shows 0."""
    program = program_of({"A1": 2.0, **HELD, **cells}, "A3", "A1")
    assert_kinds_agree(program, [1.0, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0])
