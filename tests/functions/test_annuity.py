"""Level payments against published examples, numpy-financial, and mpmath."""

from __future__ import annotations

import math

import mpmath
import numpy_financial
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from xlroot.functions import annuity
from xlroot.functions.entry import entries_of
from xlroot.values import Fault, Operand

ENTRIES = {entry.name: entry for entry in entries_of(annuity)}


def call(name: str, *arguments: float) -> Operand:
    return ENTRIES[name].rule(*(float(each) for each in arguments))


def number(name: str, *arguments: float) -> float:
    found = call(name, *arguments)
    assert isinstance(found, float), f"{name}{arguments} gives {found}"
    return found


# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED = [
    ("PMT", (0.08 / 12, 10, 10000), -1037.03, 5e-3),
    ("PMT", (0.08 / 12, 10, 10000, 0, 1), -1030.16, 5e-3),
    ("PMT", (0.06 / 12, 216, 0, 50000), -129.08, 5e-3),
    ("PV", (0.08 / 12, 240, 500, 0, 0), -59777.15, 5e-3),
    ("FV", (0.06 / 12, 10, -200, -500, 1), 2581.40, 5e-3),
    ("FV", (0.12 / 12, 12, -1000), 12682.50, 5e-3),
    ("FV", (0.11 / 12, 35, -2000, 0, 1), 82846.25, 5e-3),
    ("NPER", (0.01, -100, -1000, 10000, 1), 59.6738657, 5e-8),
    ("NPER", (0.01, -100, -1000, 10000), 60.0821229, 5e-8),
    ("NPER", (0.01, -100, -1000), -9.57859404, 5e-9),
    ("RATE", (48, -200, 8000), 0.0077, 5e-5),
    ("IPMT", (0.1 / 12, 1, 36, 8000), -66.67, 5e-3),
    ("IPMT", (0.1, 3, 3, 8000), -292.45, 5e-3),
    ("PPMT", (0.1 / 12, 1, 24, 2000), -75.62, 5e-3),
    ("PPMT", (0.08, 10, 10, 200000), -27598.05, 5e-3),
    ("CUMIPMT", (0.09 / 12, 360, 125000, 13, 24, 0), -11135.23213, 5e-6),
    ("CUMIPMT", (0.09 / 12, 360, 125000, 1, 1, 0), -937.5, 5e-9),
    ("CUMPRINC", (0.09 / 12, 360, 125000, 13, 24, 0), -934.1071234, 5e-8),
    ("CUMPRINC", (0.09 / 12, 360, 125000, 1, 1, 0), -68.27827118, 5e-9),
    ("ISPMT", (0.1 / 12, 1, 36, 8000000), -64814.8, 5e-2),
]


@pytest.mark.parametrize(("name", "arguments", "expected", "within"), DOCUMENTED)
def test_documented(
    name: str, arguments: tuple[float, ...], expected: float, within: float
) -> None:
    assert number(name, *arguments) == pytest.approx(expected, abs=within, rel=0)


# OpenFormula (OASIS, draft of 2010-01-19), published expressions and results.
@pytest.mark.parametrize(
    ("name", "arguments", "expected"),
    [
        ("IPMT", (0.05 / 12, 10, 360, 100000, 0, 1), -410.375128),
        ("PPMT", (0.03, 1, 12, 100), -7.046208547),
        ("PPMT", (0.08, 10, 24, 10000, 2000), -359.292174601),
        ("PPMT", (0.08, 10, 24, 10000, 2000, 1), -332.677939445),
        ("CUMPRINC", (0.06 / 12, 60, 100000, 5, 12, 0), -11904.054201),
        ("CUMPRINC", (0.06 / 12, 60, 100000, 5, 12, 1), -11844.830051),
    ],
)
def test_published(name: str, arguments: tuple[float, ...], expected: float) -> None:
    assert number(name, *arguments) == pytest.approx(expected, abs=2e-6)


RATES = st.floats(1e-6, 0.3)
PERIODS = st.integers(1, 480)
MONEY = st.floats(-1e6, 1e6).filter(lambda x: abs(x) > 1.0)
DUE = st.sampled_from([0.0, 1.0])


@given(RATES, PERIODS, MONEY, MONEY, DUE)
def test_payment_matches_numpy_financial(
    rate: float, periods: int, pv: float, fv: float, due: float
) -> None:
    expected = float(numpy_financial.pmt(rate, periods, pv, fv, due))
    scale = abs(float(numpy_financial.pmt(rate, periods, abs(pv), abs(fv), due)))
    assert number("PMT", rate, periods, pv, fv, due) == pytest.approx(
        expected, rel=1e-8, abs=1e-8 * scale
    )


@given(st.floats(1e-4, 0.3), st.integers(2, 360), st.floats(1.0, 1e6), st.data())
def test_interest_and_principal_match_numpy_financial(
    rate: float, periods: int, pv: float, data: st.DataObject
) -> None:
    period = data.draw(st.integers(1, periods))
    level = abs(number("PMT", rate, periods, pv))
    for name, theirs in (("IPMT", numpy_financial.ipmt), ("PPMT", numpy_financial.ppmt)):
        expected = float(theirs(rate, period, periods, pv))
        # A balance left over is a difference of sums of this size.
        scale = level * max(1.0, rate) + pv * (1.0 + rate) ** period * rate
        assert number(name, rate, period, periods, pv) == pytest.approx(
            expected, rel=1e-9, abs=1e-9 * scale
        )


@given(st.floats(-0.5, 1.0), st.floats(1.0, 60.0), MONEY, MONEY, DUE)
def test_present_and_future_value_undo_each_other(
    rate: float, periods: float, pmt: float, pv: float, due: float
) -> None:
    fv = number("FV", rate, periods, pmt, pv, due)
    scale = (abs(pmt) * periods + abs(pv)) * max(1.0, (1 + rate) ** periods)
    back = number("PV", rate, periods, pmt, fv, due)
    assert back == pytest.approx(pv, abs=1e-11 * scale * max(1.0, (1 + rate) ** -periods))


@given(st.floats(1e-4, 0.2), st.floats(1.0, 300.0), st.floats(100.0, 1e6), DUE)
def test_periods_undo_payment(rate: float, periods: float, pv: float, due: float) -> None:
    assume((1.0 + rate) ** periods < 1e8)
    level = number("PMT", rate, periods, pv, 0.0, due)
    # Near the perpetuity the number of periods is ill conditioned by (1 + rate)^periods.
    within = 1e-12 * max(1.0, (1.0 + rate) ** periods / (rate * periods))
    assert number("NPER", rate, level, pv, 0.0, due) == pytest.approx(periods, rel=within)


@given(st.floats(-0.02, 0.2), st.integers(2, 360), st.floats(100.0, 1e6), DUE)
def test_rate_undoes_payment(rate: float, periods: int, pv: float, due: float) -> None:
    level = number("PMT", rate, periods, pv, 0.0, due)
    found = number("RATE", periods, level, pv, 0.0, due)
    assert found == pytest.approx(rate, rel=1e-8, abs=1e-12)


@given(st.floats(1e-4, 0.1), st.integers(1, 120), st.floats(1.0, 1e6), DUE, st.data())
def test_cumulated_amounts_are_the_sums(
    rate: float, periods: int, pv: float, due: float, data: st.DataObject
) -> None:
    first = data.draw(st.integers(1, periods))
    last = data.draw(st.integers(first, periods))
    for total, part in (("CUMIPMT", "IPMT"), ("CUMPRINC", "PPMT")):
        summed = math.fsum(
            number(part, rate, each, periods, pv, 0.0, due) for each in range(first, last + 1)
        )
        assert number(total, rate, periods, pv, first, last, due) == pytest.approx(
            summed, rel=1e-9, abs=1e-9 * pv
        )


@pytest.mark.parametrize("rate", [1e-13, 1e-9, 1e-5, 0.004, -1e-10, -0.01])
def test_small_rates_keep_their_digits(rate: float) -> None:
    """Against the equation of value at 40 digits."""
    with mpmath.workdps(40):
        grown = (1 + mpmath.mpf(rate)) ** 360
        exact = -mpmath.mpf(250000) * grown * rate / (grown - 1)
    assert number("PMT", rate, 360, 250000) == pytest.approx(float(exact), rel=1e-14)


def test_no_interest() -> None:
    assert number("PMT", 0, 10, 1000) == -100.0
    assert number("PV", 0, 10, -100) == 1000.0
    assert number("FV", 0, 10, -100) == 1000.0
    assert number("NPER", 0, -100, 1000) == 10.0
    assert number("RATE", 10, -100, 1000) == pytest.approx(0.0, abs=1e-15)
    assert number("IPMT", 0, 3, 10, 1000) == 0.0


def test_a_rate_below_minus_one_is_a_power_of_a_negative_number() -> None:
    assert number("FV", -1.5, 2, 0, 100) == -25.0
    assert call("FV", -1.5, 2.5, 0, 100) is Fault.NUM


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("PMT", (0.05, 0, 1000)),
        ("NPER", (0.1, -50, 1000)),
        ("NPER", (-1, -50, 1000)),
        ("RATE", (0, -100, 1000)),
        ("RATE", (10, 100, 1000)),
        ("RATE", (10, -100, 900, 0, 0, -1)),
        ("IPMT", (0.1, 0, 3, 8000)),
        ("IPMT", (0.1, 4, 3, 8000)),
        ("PPMT", (0.1, 4, 3, 8000)),
        ("CUMIPMT", (0.005, 60, 100000, 0, 0, 0)),
        ("CUMIPMT", (0.005, 60, 100000, 5, 61, 0)),
        ("CUMPRINC", (0.005, 60, 100000, 15, 12, 0)),
        ("CUMPRINC", (0.005, 60, 100000, 1, 12, 2)),
        ("CUMPRINC", (0.0, 60, 100000, 1, 12, 0)),
        ("FV", (1e300, 100, 1)),
    ],
)
def test_what_cannot_be(name: str, arguments: tuple[float, ...]) -> None:
    assert call(name, *arguments) is Fault.NUM


def test_a_rate_far_from_the_guess() -> None:
    level = number("PMT", 4.0, 6, 1000)
    assert number("RATE", 6, level, 1000) == pytest.approx(4.0, rel=1e-12)
    assert number("RATE", 6, level, 1000, 0, 0, -0.9) == pytest.approx(4.0, rel=1e-12)
    expected = float(numpy_financial.rate(48, -200, 8000, 0))
    assert number("RATE", 48, -200, 8000) == pytest.approx(expected, rel=1e-8)
