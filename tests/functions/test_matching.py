"""Criteria and wildcards. Source: Excel's documentation of COUNTIF, from memory."""

from __future__ import annotations

import pytest

from xlroot.errors import Unsupported
from xlroot.functions.matching import criterion, pattern
from xlroot.values import Fault, Value

CELLS: tuple[Value, ...] = (32.0, 54.0, 75.0, "75", "apples", "Apples!", "", None, True, Fault.NA)


@pytest.mark.parametrize(
    ("condition", "chosen"),
    [
        (75.0, (75.0, "75")),
        ("75", (75.0, "75")),
        ("=75", (75.0, "75")),
        (">55", (75.0,)),
        (">=54", (54.0, 75.0)),
        ("<54", (32.0,)),
        ("<=3.2E1", (32.0,)),
        ("APPLES", ("apples",)),
        ("apples?", ("Apples!",)),
        ("*es*", ("apples", "Apples!")),
        ("<>75", (32.0, 54.0, "apples", "Apples!", "", None, True, Fault.NA)),
        ("=", (None,)),
        ("<>", (32.0, 54.0, 75.0, "75", "apples", "Apples!", "", True, Fault.NA)),
        ("", ("", None)),
        (True, (True,)),
        ("TRUE", (True,)),
        ("#N/A", (Fault.NA,)),
        (">a", ("apples", "Apples!")),
    ],
)
def test_what_a_criterion_chooses(condition: Value, chosen: tuple[Value, ...]) -> None:
    test = criterion(condition)
    assert tuple(value for value in CELLS if test(value)) == chosen


@pytest.mark.parametrize("condition", ["1/2", ">3-4", "1/2/2005"])
def test_a_criterion_that_is_a_date_in_some_countries_is_refused(condition: str) -> None:
    with pytest.raises(Unsupported):
        criterion(condition)


def test_patterns() -> None:
    assert pattern("plain (1+1)") is None
    wild = pattern("a.c*~*~~?")
    assert wild is not None
    assert wild.fullmatch("A.Cxx*~!")
    assert not wild.fullmatch("abcxx*~!")
    with pytest.raises(Unsupported):
        pattern("a~b")
