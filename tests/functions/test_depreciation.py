"""Depreciation against published examples and by its own sums."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from xlroot.errors import Unsupported
from xlroot.functions.depreciation import SLN, amorlinc, db, ddb, syd, vdb
from xlroot.values import Fault


# Examples of Excel's documentation, from memory, to the digits that it prints.
def test_straight_line_and_digits() -> None:
    assert SLN.rule(30000.0, 7500.0, 10.0) == 2250.0
    assert syd.rule(30000.0, 7500.0, 10.0, 1.0) == pytest.approx(4090.91, abs=5e-3)
    assert syd.rule(30000.0, 7500.0, 10.0, 10.0) == pytest.approx(409.09, abs=5e-3)


@pytest.mark.parametrize(
    ("arguments", "expected"),
    [
        ((2400, 300, 3650, 1), 1.32),
        ((2400, 300, 120, 1, 2), 40.0),
        ((2400, 300, 10, 1, 2), 480.0),
        ((2400, 300, 10, 2, 1.5), 306.0),
        ((2400, 300, 10, 10), 22.12),
    ],
)
def test_double_declining(arguments: tuple[float, ...], expected: float) -> None:
    assert ddb.rule(*map(float, arguments)) == pytest.approx(expected, abs=5e-3)


@pytest.mark.parametrize(
    ("period", "expected"),
    [
        (1, 186083.33),
        (2, 259639.42),
        (3, 176814.44),
        (4, 120410.64),
        (5, 81999.64),
        (6, 55841.76),
        (7, 15845.10),
    ],
)
def test_fixed_declining(period: int, expected: float) -> None:
    assert db.rule(1e6, 1e5, 6.0, float(period), 7.0) == pytest.approx(expected, abs=5e-3)


@pytest.mark.parametrize(
    ("arguments", "expected"),
    [
        ((2400, 300, 3650, 0, 1), 1.32),
        ((2400, 300, 120, 0, 1), 40.0),
        ((2400, 300, 10, 0, 1), 480.0),
        ((2400, 300, 120, 6, 18), 396.31),
        ((2400, 300, 120, 6, 18, 1.5), 311.81),
        ((2400, 300, 10, 0, 0.875, 1.5), 315.0),
    ],
)
def test_variable_declining(arguments: tuple[float, ...], expected: float) -> None:
    assert vdb.rule(*map(float, arguments)) == pytest.approx(expected, abs=5e-3)


def test_published_by_openformula() -> None:
    """OASIS, draft of 2010-01-19."""
    assert db.rule(4000.0, 500.0, 4.0, 2.0) == pytest.approx(963.90, abs=5e-3)
    assert db.rule(4000.0, 500.0, 4.0, 2.0, 2.0) == pytest.approx(1510.65, abs=5e-3)
    assert db.rule(4000.0, 500.0, 4.0, 5.0) == 0.0
    assert db.rule(0.0, 500.0, 4.0, 2.0) is Fault.NUM
    assert ddb.rule(1100.0, 100.0, 5.0, 5.0, 2.3) == 0.0
    assert vdb.rule(10000.0, 600.0, 10.0, 0.0, 0.875, 1.5) == pytest.approx(1312.5)
    # From 2004-02-01, first period to 2004-12-31.
    wear = [
        amorlinc.rule(1000.0, 38018.0, 38352.0, 10.0, float(n), 0.1, 1.0) for n in (0, 8, 9, 10)
    ]
    assert wear == pytest.approx([91.256831, 100.0, 98.743169, 0.0], abs=1e-6)


COST, LIFE = st.floats(1.0, 1e6), st.integers(1, 60)


@given(COST, st.floats(0.0, 1.0), LIFE)
def test_whole_lives_take_off_cost_less_salvage(cost: float, part: float, life: int) -> None:
    salvage = cost * part
    periods = [float(n) for n in range(1, life + 1)]
    digits = math.fsum(syd.rule(cost, salvage, float(life), n) for n in periods)  # type: ignore[misc]
    assert digits == pytest.approx(cost - salvage, rel=1e-9, abs=1e-9 * cost)
    switched = vdb.rule(cost, salvage, float(life), 0.0, float(life))
    assert switched == pytest.approx(cost - salvage, rel=1e-9, abs=1e-9 * cost)
    stayed = vdb.rule(cost, salvage, float(life), 0.0, float(life), 2.0, 1.0)
    declined = math.fsum(ddb.rule(cost, salvage, float(life), n) for n in periods)  # type: ignore[misc]
    assert stayed == pytest.approx(declined, rel=1e-9, abs=1e-9 * cost)
    assert declined <= (cost - salvage) * (1.0 + 1e-9) + 1e-9 * cost


@given(st.floats(0.0, 10.0), st.floats(0.0, 10.0), st.floats(0.5, 4.0))
def test_spans_add_up(a: float, b: float, factor: float) -> None:
    low, high = min(a, b), max(a, b)
    parts = [vdb.rule(5e4, 4e3, 10.0, *span, factor) for span in ((0.0, low), (low, high))]
    assert sum(parts) == pytest.approx(vdb.rule(5e4, 4e3, 10.0, 0.0, high, factor))  # type: ignore[arg-type]


def test_what_cannot_be() -> None:
    assert SLN.rule(100.0, 10.0, 0.0) is Fault.DIV0
    assert syd.rule(100.0, 10.0, 5.0, 6.0) is Fault.NUM
    assert ddb.rule(100.0, 10.0, 5.0, 6.0) is Fault.NUM
    assert ddb.rule(-100.0, 10.0, 5.0, 1.0) is Fault.NUM
    assert db.rule(4000.0, -500.0, 4.0, 2.0) is Fault.NUM
    assert db.rule(4000.0, 500.0, 2.0, 0.0) is Fault.NUM
    assert db.rule(4000.0, 500.0, 4.0, 2.0, 13.0) is Fault.NUM
    assert vdb.rule(100.0, 10.0, 5.0, 3.0, 2.0) is Fault.NUM
    assert vdb.rule(100.0, 10.0, 5.0, 3.0, 6.0) is Fault.NUM
    refusals: list[Callable[[], object]] = [
        lambda: ddb.rule(100.0, 200.0, 5.0, 1.0),
        lambda: ddb.rule(100.0, 10.0, 5.0, 1.5),
        lambda: db.rule(100.0, 10.0, 4.5, 1.0),
        lambda: vdb.rule(100.0, 10.0, 2e6, 0.0, 1e6),
    ]
    for refused in refusals:
        with pytest.raises(Unsupported):
            refused()
