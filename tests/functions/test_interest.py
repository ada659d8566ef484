"""Conversions of rates and prices against published examples."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from xlroot.cells import Block
from xlroot.functions.interest import (
    dollarde,
    dollarfr,
    effect,
    fvschedule,
    nominal,
    pduration,
    rri,
)
from xlroot.values import Fault, Grid


def test_documented_examples() -> None:
    """Excel's documentation, from memory, to the digits that it prints."""
    assert effect.rule(0.0525, 4.0) == pytest.approx(0.0535427, abs=5e-8)
    assert nominal.rule(0.053543, 4.0) == pytest.approx(0.05250032, abs=5e-9)
    assert rri.rule(96.0, 10000.0, 11000.0) == pytest.approx(0.0009933, abs=5e-8)
    assert pduration.rule(0.025, 2000.0, 2200.0) == pytest.approx(3.86, abs=5e-3)
    assert pduration.rule(0.025 / 12, 1000.0, 1200.0) == pytest.approx(87.6, abs=5e-2)
    assert fvschedule.rule(1.0, Grid(((0.09, 0.11, 0.1),))) == pytest.approx(1.33089)
    assert dollarde.rule(1.02, 16.0) == pytest.approx(1.125)
    assert dollarde.rule(1.1, 32.0) == pytest.approx(1.3125)
    assert dollarfr.rule(1.125, 16.0) == pytest.approx(1.02)
    assert dollarfr.rule(1.125, 32.0) == pytest.approx(1.04)


def test_published_by_openformula() -> None:
    """OASIS, draft of 2010-01-19."""
    assert effect.rule(0.1, 6.0) == pytest.approx(0.104260, abs=1e-6)
    assert nominal.rule(0.125, 12.0) == pytest.approx(0.118362966639, abs=1e-12)
    assert rri.rule(12.0, 10000.0, 5000.0) == pytest.approx(-0.056125687, abs=1e-9)
    assert pduration.rule(0.1, 100.0, 10.0) == pytest.approx(-24.158858, abs=1e-6)
    assert dollarde.rule(-1.1, 10.0) == pytest.approx(-1.1)
    assert dollarde.rule(1.1, 3.0) == pytest.approx(1.333333, abs=1e-6)


@given(st.floats(1e-9, 5.0), st.integers(1, 400))
def test_effective_and_nominal_undo_each_other(rate: float, times: int) -> None:
    turned = effect.rule(rate, float(times))
    assert isinstance(turned, float)
    assert nominal.rule(turned, float(times)) == pytest.approx(rate, rel=1e-13)


@given(st.floats(-1e4, 1e4), st.integers(1, 1000))
def test_fractions_and_decimals_undo_each_other(price: float, fraction: int) -> None:
    turned = dollarfr.rule(price, float(fraction))
    assert dollarde.rule(turned, float(fraction)) == pytest.approx(price, rel=1e-12, abs=1e-12)


@given(st.floats(0.5, 100.0), st.floats(1.0, 1e6), st.floats(1e-4, 2.0))
def test_growth_and_duration_agree(periods: float, pv: float, rate: float) -> None:
    grown = pv * (1.0 + rate) ** periods
    assert rri.rule(periods, pv, grown) == pytest.approx(rate, rel=1e-9)
    assert pduration.rule(rate, pv, grown) == pytest.approx(periods, rel=1e-9)


def test_the_number_of_times_is_cut_to_a_whole_one() -> None:
    assert effect.rule(0.1, 4.9) == effect.rule(0.1, 4.0)
    assert dollarde.rule(1.1, 4.9) == dollarde.rule(1.1, 4.0)


def test_what_cannot_be() -> None:
    assert effect.rule(0.1, 0.0) is Fault.NUM
    assert effect.rule(0.0, 4.0) is Fault.NUM
    assert nominal.rule(-0.1, 4.0) is Fault.NUM
    assert rri.rule(0.0, 100.0, 200.0) is Fault.NUM
    assert pduration.rule(0.0, 10.0, 11.0) is Fault.NUM
    assert dollarde.rule(1.1, 0.0) is Fault.DIV0
    assert dollarfr.rule(1.1, -1.0) is Fault.NUM


def test_a_schedule_of_rates() -> None:
    block = Block("Sheet1", 1, 1, 1, 2)
    assert fvschedule.rule(100.0, Grid(((0.5, None),), block)) == 150.0
    assert fvschedule.rule(100.0, Grid(((0.5, "x"),), block)) is Fault.VALUE
    assert fvschedule.rule(100.0, Grid(((0.5, Fault.NA),), block)) is Fault.NA
    assert fvschedule.rule(100.0, 0.5) == 150.0
