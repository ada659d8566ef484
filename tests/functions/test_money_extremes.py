"""Financial rules over extreme arguments: a finite number, a fault or a refusal, nothing else."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from xlroot.errors import Unsupported
from xlroot.functions import (
    annuity,
    bonds,
    cashflow,
    coupons,
    depreciation,
    discount,
    interest,
    line,
    regression,
)
from xlroot.functions.entry import Entry, Takes, entries_of
from xlroot.values import Fault, Grid

FAMILIES = (
    annuity,
    bonds,
    cashflow,
    coupons,
    depreciation,
    discount,
    interest,
    line,
    regression,
)
ENTRIES = [entry for family in FAMILIES for entry in entries_of(family)]

NUMBER = st.one_of(
    st.sampled_from(
        [0.0, 1.0, -1.0, 2.0, 4.0, 12.0, 0.1, -0.5, 0.5, 1e-300, 5e-324, 1e308, -1e308, 1e-17, 1e16]
    ),
    st.floats(-10.0, 40.0),
    st.floats(30000.0, 60000.0),
    st.floats(allow_nan=False, allow_infinity=False),
)
GRID = st.lists(NUMBER, min_size=1, max_size=6).map(lambda row: Grid((tuple(row),)))


@pytest.mark.parametrize("entry", ENTRIES, ids=lambda entry: entry.name)
@given(data=st.data())
def test_extreme_arguments(entry: Entry, data: st.DataObject) -> None:
    most = len(entry.takes)
    count = data.draw(st.integers(entry.required, most))
    arguments = [data.draw(GRID if take is Takes.RAW else NUMBER) for take in entry.takes[:count]]
    try:
        found = entry.rule(*arguments)
    except Unsupported:
        return
    for value in found.flat() if isinstance(found, Grid) else (found,):
        assert isinstance(value, Fault) or (type(value) is float and math.isfinite(value))
