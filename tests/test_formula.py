"""The tree of a formula's text."""

from __future__ import annotations

import pytest

from xlroot.errors import FormulaError
from xlroot.formula import (
    Binary,
    Call,
    Corner,
    Literal,
    NameUse,
    Omitted,
    Reference,
    TableUse,
    Unary,
    function_name,
    parse,
)
from xlroot.values import Fault


def cell(row: int, column: int) -> Reference:
    corner = Corner(row, column, row_fixed=False, column_fixed=False)
    return Reference(None, corner, corner)


def test_the_sign_binds_tighter_than_the_power() -> None:
    # OpenFormula section 5.5: prefix operators come before ^.
    assert parse("-A1^2") == Binary("^", Unary("-", cell(1, 1)), Literal(2.0))


def test_powers_lean_to_the_left() -> None:
    assert parse("2^3^2") == Binary("^", Binary("^", Literal(2.0), Literal(3.0)), Literal(2.0))


def test_a_fault_and_a_text_that_looks_like_it_differ() -> None:
    assert parse('="#N/A"') == Literal("#N/A")
    assert parse("=#N/A") == Literal(Fault.NA)


def test_dollar_signs_are_kept() -> None:
    first = Corner(1, 1, row_fixed=True, column_fixed=False)
    last = Corner(2, 2, row_fixed=False, column_fixed=True)
    assert parse("A$1:$B2") == Reference(None, first, last)


@pytest.mark.parametrize(
    "written",
    [
        "XLROOT",
        "xlroot",
        "_xll.XLROOT",
        "[1]!XLROOT",
        r"'C:\sheets and more\roots.xlam'!XLROOT",
        "ORG.EXAMPLE.ROOTS.XLROOT",
    ],
)
def test_own_functions_are_recognised_however_a_host_wrote_them(written: str) -> None:
    assert function_name(written) == "XLROOT"
    assert parse(f"{written}(B11,B6,1,2)") == Call(
        "XLROOT", (cell(11, 2), cell(6, 2), Literal(1.0), Literal(2.0))
    )


def test_file_prefixes_are_dropped() -> None:
    assert function_name("_xlfn._xlws.SORT") == "SORT"
    assert function_name("_xlfn.STDEV.S") == "STDEV.S"


def test_names_tables_and_gaps() -> None:
    assert parse("flow_rate") == NameUse(None, "flow_rate")
    assert parse("Pumps[[#This Row],[Head]]") == TableUse("Pumps", "[#This Row],[Head]")
    assert parse("IF(A1,,2)") == Call("IF", (cell(1, 1), Omitted(), Literal(2.0)))


def test_a_long_sum_is_read() -> None:
    assert isinstance(parse("+".join(["A1"] * 250)), Binary)


@pytest.mark.parametrize("text", ["=(1", "=IF(A1>0;1;2)", "=", "=1 2", "=1E999"])
def test_what_is_no_formula_is_refused(text: str) -> None:
    with pytest.raises(FormulaError):
        parse(text)
