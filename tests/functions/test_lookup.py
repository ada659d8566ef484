"""MATCH, VLOOKUP, HLOOKUP, LOOKUP, XLOOKUP, XMATCH.

Published values: Excel's documentation of the functions, from memory, with its example tables.
"""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from xlroot.cells import Block
from xlroot.errors import Unsupported
from xlroot.functions import find
from xlroot.functions.lines import Line, kept
from xlroot.values import Fault, Grid, Operand, Value


def call(name: str, *arguments: Any) -> Operand:
    entry = find(name)
    assert entry is not None
    return entry.rule(*arguments)


def column(*values: Value) -> Grid:
    return Grid(tuple((value,) for value in values), Block("S", 1, 1, len(values), 1))


def row(*values: Value) -> Grid:
    return Grid((values,), Block("S", 1, 1, 1, len(values)))


def content(operand: Operand) -> Value:
    """The value of a result that is a reference to one cell."""
    if isinstance(operand, Grid):
        assert operand.height == operand.width == 1
        return operand.rows[0][0]
    return operand


COUNTS = column(25.0, 38.0, 40.0, 41.0)
AIR = Grid(
    (
        (0.457, 3.55, 500.0),
        (0.525, 3.25, 400.0),
        (0.616, 2.93, 300.0),
        (0.675, 2.75, 250.0),
        (0.746, 2.57, 200.0),
        (0.835, 2.38, 150.0),
        (0.946, 2.17, 100.0),
        (1.09, 1.95, 50.0),
        (1.29, 1.71, 0.0),
    ),
    Block("S", 2, 1, 10, 3),
)
"""Density, viscosity and temperature of air at one atmosphere."""
FREQUENCIES = column(4.14, 4.19, 5.17, 5.77, 6.39)
COLOURS = column("red", "orange", "yellow", "green", "blue")


@pytest.mark.parametrize(
    ("wanted", "kind", "position"), [(39.0, 1.0, 2.0), (41.0, 0.0, 4.0), (41.0, 1.0, 4.0)]
)
def test_match_as_documented(wanted: float, kind: float, position: float) -> None:
    assert call("MATCH", wanted, COUNTS, kind) == position
    assert call("MATCH", 39.0, COUNTS) == 2.0


@pytest.mark.parametrize(
    ("wanted", "place", "approximate", "value"),
    [
        (1.0, 2.0, True, 2.17),
        (1.0, 3.0, True, 100.0),
        (0.7, 3.0, False, Fault.NA),
        (0.1, 2.0, True, Fault.NA),
        (2.0, 2.0, True, 1.71),
        (0.946, 3.0, False, 100.0),
    ],
)
def test_vlookup_as_documented(
    wanted: float, place: float, approximate: bool, value: Value
) -> None:
    assert call("VLOOKUP", wanted, AIR, place, approximate) == value
    upright = Grid(tuple(zip(*AIR.rows, strict=True)), Block("S", 1, 1, 3, 9))
    assert call("HLOOKUP", wanted, upright, place, approximate) == value


@pytest.mark.parametrize(
    ("wanted", "colour"),
    [(4.19, "orange"), (5.75, "yellow"), (7.66, "blue"), (0.0, Fault.NA)],
)
def test_lookup_as_documented(wanted: float, colour: Value) -> None:
    assert call("LOOKUP", wanted, FREQUENCIES, COLOURS) == colour


def test_lookup_in_an_array_takes_the_longer_side() -> None:
    tall = Grid((("a", 1.0), ("b", 2.0), ("c", 3.0)))
    wide = Grid(((1.0, 2.0, 3.0), (10.0, 20.0, 30.0)))
    assert call("LOOKUP", "bump", tall) == 2.0
    assert call("LOOKUP", 2.5, wide) == 20.0


def test_the_last_number_that_meets_a_condition() -> None:
    """LOOKUP(2, 1/(range>5), results): faults are passed over."""
    tests = Grid(((1.0,), (Fault.DIV0,), (1.0,), (Fault.DIV0,)))
    assert call("LOOKUP", 2.0, tests, column(10.0, 20.0, 30.0, 40.0)) == 30.0


def test_types_never_match_across() -> None:
    mixed = column("5", True, None, 5.0, "x")
    assert call("MATCH", 5.0, mixed, 0.0) == 4.0
    assert call("MATCH", "5", mixed, 0.0) == 1.0
    assert call("MATCH", True, mixed, 0.0) == 2.0
    assert call("MATCH", 1.0, mixed, 0.0) is Fault.NA
    assert call("MATCH", 0.0, mixed, 0.0) is Fault.NA
    assert call("MATCH", "", mixed, 0.0) is Fault.NA
    assert call("MATCH", 7.0, column("depth", 1.0, 5.0, None, 9.0, "end"), 1.0) == 3.0


def test_texts_match_without_case_and_with_wildcards() -> None:
    pipes = column("DN 80", "DN 100", "dn 150", "what?", "a*b", "a~b")
    assert call("MATCH", "dn 100", pipes, 0.0) == 2.0
    assert call("MATCH", "DN*50", pipes, 0.0) == 3.0
    assert call("MATCH", "DN ??", pipes, 0.0) == 1.0
    assert call("MATCH", "what~?", pipes, 0.0) == 4.0
    assert call("MATCH", "a~*b", pipes, 0.0) == 5.0
    assert call("MATCH", "a~~b", pipes, 0.0) == 6.0
    assert call("XMATCH", "DN*50", pipes) is Fault.NA
    assert call("XMATCH", "DN*50", pipes, 2.0) == 3.0
    with pytest.raises(Unsupported, match="~"):
        call("MATCH", "a~b", pipes, 0.0)


def test_the_last_of_equal_values_in_rising_ones() -> None:
    assert call("MATCH", 2.0, column(1.0, 2.0, 2.0, 2.0, 3.0), 1.0) == 4.0
    assert call("MATCH", 2.0, column(1.0, 2.0, 2.0, 2.0, 3.0), 0.0) == 2.0


def test_falling_values() -> None:
    falling = column(9.0, 7.0, 5.0, 3.0)
    assert call("MATCH", 6.0, falling, -1.0) == 2.0
    assert call("MATCH", 5.0, falling, -1.0) == 3.0
    assert call("MATCH", 9.5, falling, -1.0) is Fault.NA
    assert call("MATCH", 1.0, falling, -1.0) == 4.0


@pytest.mark.parametrize(
    ("wanted", "line", "kind"),
    [
        (2.0, column(3.0, 1.0, 2.0), 1.0),
        (40.0, COUNTS, -1.0),
        (5.0, column(9.0, 5.0, 5.0, 3.0), -1.0),
        ("pump-1", column("pump-1", "pump_2"), 1.0),
        (None, COUNTS, 0.0),
    ],
)
def test_what_hosts_answer_differently_is_refused(wanted: Value, line: Grid, kind: float) -> None:
    with pytest.raises(Unsupported):
        call("MATCH", wanted, line, kind)


def test_faults_and_wrong_places() -> None:
    assert call("MATCH", 1.0, AIR, 0.0) is Fault.NA
    assert call("MATCH", 1.0, Fault.REF, 0.0) is Fault.REF
    assert call("MATCH", "x" * 256, COLOURS, 0.0) is Fault.VALUE
    assert call("VLOOKUP", 1.0, AIR, 0.0) is Fault.VALUE
    assert call("VLOOKUP", 1.0, AIR, 4.0) is Fault.REF
    assert call("VLOOKUP", 1.0, AIR, 3.9) == 100.0
    assert call("VLOOKUP", 1.0, Fault.NAME, 1.0) is Fault.NAME
    with pytest.raises(Unsupported, match="another length"):
        call("LOOKUP", 5.0, FREQUENCIES, column(1.0, 2.0))


def test_a_blank_answer_stays_blank() -> None:
    assert call("VLOOKUP", 1.0, Grid(((1.0, None),)), 2.0, False) is None


def test_whole_columns_are_searched_in_their_used_part() -> None:
    whole = Grid(((1.0,), (2.0,), (4.0,)), Block("S", 1, 1, 1_048_576, 1))
    table = Grid(((1.0, "a"), (2.0, "b")), Block("S", 1, 1, 1_048_576, 5))
    assert call("MATCH", 3.0, whole, 1.0) == 2.0
    assert call("VLOOKUP", 2.0, table, 2.0, False) == "b"
    assert call("VLOOKUP", 2.0, table, 5.0, False) is None
    assert call("VLOOKUP", 2.0, table, 6.0, False) is Fault.REF
    cut_rectangle = Grid(((1.0,),), Block("S", 1, 1, 1, 5))
    assert call("MATCH", 1.0, cut_rectangle, 0.0) == 1.0


UNSORTED = column(30.0, 10.0, 20.0, 10.0)


@pytest.mark.parametrize(
    ("wanted", "match_mode", "search_mode", "position"),
    [
        (10.0, 0.0, 1.0, 2.0),
        (10.0, 0.0, -1.0, 4.0),
        (15.0, -1.0, 1.0, 2.0),
        (15.0, -1.0, -1.0, 4.0),
        (15.0, 1.0, 1.0, 3.0),
        (31.0, 1.0, 1.0, Fault.NA),
        (9.0, -1.0, 1.0, Fault.NA),
        (20.0, -1.0, 1.0, 3.0),
    ],
)
def test_xmatch_modes(
    wanted: float, match_mode: float, search_mode: float, position: Value
) -> None:
    assert call("XMATCH", wanted, UNSORTED, match_mode, search_mode) == position


def test_xlookup_gives_a_reference_a_row_or_what_stands_for_a_missing_value() -> None:
    found = call("XLOOKUP", 0.7, column(*(line[0] for line in AIR.rows)), AIR, None, 1.0)
    assert isinstance(found, Grid)
    assert found.rows == ((0.746, 2.57, 200.0),)
    assert found.block == Block("S", 6, 1, 6, 3)
    assert content(call("XLOOKUP", 5.17, FREQUENCIES, COLOURS)) == "yellow"
    assert call("XLOOKUP", 5.0, FREQUENCIES, COLOURS) is Fault.NA
    assert call("XLOOKUP", 5.0, FREQUENCIES, COLOURS, "none") == "none"
    assert call("XLOOKUP", 5.0, FREQUENCIES, column(1.0)) is Fault.VALUE
    across = call("XLOOKUP", 2.0, row(1.0, 2.0), Grid(((5.0, 6.0), (7.0, 8.0))))
    assert across == Grid(((6.0,), (8.0,)))


def test_xlookup_refuses_searches_that_hang_on_how_they_run() -> None:
    assert call("XMATCH", 38.0, COUNTS, 0.0, 2.0) == 2.0
    for line, search in ((UNSORTED, 2.0), (COUNTS, -2.0), (COUNTS, 3.0)):
        with pytest.raises(Unsupported):
            call("XMATCH", 38.0, line, 0.0, search)
    with pytest.raises(Unsupported, match="several types"):
        call("XMATCH", 99.0, column(1.0, "x"), 1.0)


NUMBERS = st.lists(st.integers(-20, 20).map(float), min_size=1, max_size=12)


@given(NUMBERS, st.integers(-25, 25).map(float))
def test_approximate_matches_are_the_definition(numbers: list[float], wanted: float) -> None:
    rising = sorted(numbers)
    below = [place for place, value in enumerate(rising) if value <= wanted]
    assert Line(tuple(rising)).at_most(wanted) == (below[-1] if below else None)
    line = Line(tuple(numbers))
    for above in (False, True):
        beyond = [v for v in numbers if (v >= wanted if above else v <= wanted)]
        best = (min(beyond) if above else max(beyond)) if beyond else None
        found = line.nearest(wanted, above=above, last=False)
        assert found == (None if best is None else numbers.index(best))


@given(NUMBERS, st.integers(-25, 25).map(float))
def test_an_exact_match_is_the_first(numbers: list[float], wanted: float) -> None:
    expected = numbers.index(wanted) if wanted in numbers else None
    assert Line(tuple(numbers)).exact(wanted) == expected


def test_lines_are_kept_for_the_grid_itself_not_for_an_equal_one() -> None:
    made: list[Grid] = []

    @kept
    def line(grid: Grid) -> int:
        made.append(grid)
        return len(made)

    one, other = Grid(((1.0,),)), Grid(((1.0,),))
    assert [line(one), line(one), line(other), line(one)] == [1, 1, 2, 1]
    for number in range(600):
        line(Grid(((float(number),),)))
    assert line(one) > 600
