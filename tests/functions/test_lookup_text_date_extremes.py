"""No argument makes a rule raise anything but a refusal, and numbers it gives are finite floats."""

from __future__ import annotations

import math
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.functions.test_lookup import column, row
from xlroot.errors import Unsupported
from xlroot.functions import conversion, dates, intervals, lookup, references, text, weeks
from xlroot.functions.entry import Entry, Takes, entries_of
from xlroot.values import Fault, Grid

MODULES = (conversion, dates, intervals, lookup, references, text, weeks)
ENTRIES = [entry for module in MODULES for entry in entries_of(module)]

NUMBERS = st.sampled_from(
    [
        0.0,
        -0.0,
        0.5,
        1.0,
        2.0,
        3.0,
        -1.0,
        -1.5,
        60.0,
        61.0,
        255.9,
        45_000.25,
        2_958_465.9,
        1e9,
        -1e9,
        1e300,
        -1e300,
        1e-300,
    ]
)
TEXTS = st.sampled_from(
    [
        "",
        "a",
        "~",
        "*",
        "2024-02-29",
        "0.00;-0.00",
        "yyyy-mm-dd hh:mm:ss",
        "12:30",
        "0" * 300,
        "#,##0.0#,",
        "0.0E+00",
        "%",
        "md",
        "\x00",
    ]
)
GRIDS = st.sampled_from(
    [
        column(1.0, 2.0, 3.0),
        row("a", "b"),
        column(3.0, None, "x", Fault.NA),
        Grid(((1.0, 2.0),) * 2),
    ]
)
SINGLE = NUMBERS | TEXTS | st.booleans() | st.none()
GIVEN = {
    Takes.NUMBER: NUMBERS,
    Takes.TEXT: TEXTS,
    Takes.LOGICAL: st.booleans(),
    Takes.SCALAR: SINGLE,
    Takes.VALUE: SINGLE,
    Takes.RAW: GRIDS | SINGLE | st.just(Fault.DIV0),
}


@pytest.mark.parametrize("entry", ENTRIES, ids=lambda entry: entry.name)
@settings(max_examples=60)
@given(data=st.data())
def test_extreme_arguments(entry: Entry, data: Any) -> None:
    count = data.draw(st.integers(entry.required, len(entry.takes)))
    arguments = [data.draw(GIVEN[entry.parameter(position)]) for position in range(count)]
    try:
        found = entry.rule(*arguments)
    except Unsupported:
        return
    values = list(found.flat()) if isinstance(found, Grid) else [found]
    for value in values:
        assert value is None or type(value) in (float, str, bool, Fault)
        assert type(value) is not float or math.isfinite(value)
