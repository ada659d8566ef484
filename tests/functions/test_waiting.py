"""Exponential, Weibull, gamma, chi-square: documented values, tables, mpmath, properties."""

from __future__ import annotations

import math

import mpmath
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mpf

from tests.functions.calls import fault, number
from xlroot.values import Value

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED: list[tuple[str, tuple[Value, ...], float, float]] = [
    ("EXPON.DIST", (0.2, 10.0, True), 0.86466472, 5e-9),
    ("EXPON.DIST", (0.2, 10.0, False), 1.35335283, 5e-9),
    ("WEIBULL.DIST", (105.0, 20.0, 100.0, True), 0.929581, 5e-7),
    ("WEIBULL.DIST", (105.0, 20.0, 100.0, False), 0.035589, 5e-7),
    ("GAMMA.DIST", (10.00001131, 9.0, 2.0, False), 0.032639, 5e-7),
    ("GAMMA.DIST", (10.00001131, 9.0, 2.0, True), 0.068094, 5e-7),
    ("GAMMA.INV", (0.068094, 9.0, 2.0), 10.0000112, 5e-7),
    ("CHISQ.DIST", (0.5, 1.0, True), 0.52049988, 5e-9),
    ("CHISQ.DIST", (2.0, 3.0, False), 0.20755375, 5e-9),
    ("CHISQ.DIST.RT", (18.307, 10.0), 0.0500006, 5e-7),
    ("CHISQ.INV", (0.93, 1.0), 3.283020287, 5e-9),
    ("CHISQ.INV", (0.6, 2.0), 1.832581464, 5e-9),
    ("CHISQ.INV.RT", (0.050001, 10.0), 18.306973, 5e-6),
]

# NIST/SEMATECH e-Handbook, section 1.3.6.7.4: upper critical values of chi-square at 0.05.
TABLE = [(1.0, 3.841), (4.0, 9.488), (10.0, 18.307), (30.0, 43.773), (100.0, 124.342)]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Value, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


@pytest.mark.parametrize(("freedom", "x"), TABLE)
def test_table(freedom: float, x: float) -> None:
    assert round(number("CHIINV", 0.05, freedom), 3) == x
    assert round(number("CHISQ.INV", 0.95, freedom), 3) == x


@settings(max_examples=60, deadline=None)
@given(st.floats(0.2, 80.0), st.floats(0.05, 3.0))
def test_gamma_against_mpmath(shape: float, ratio: float) -> None:
    x = shape * ratio
    with mpmath.workdps(40):
        below = mpmath.gammainc(mpf(shape), 0, mpf(x), regularized=True)
        assert abs(mpf(number("GAMMA.DIST", x, shape, 1.0, True)) - below) <= 1e-13 * below


@settings(max_examples=40, deadline=None)
@given(st.integers(1, 100), st.floats(0.05, 3.0))
def test_chi_square_tail_against_mpmath(freedom: int, ratio: float) -> None:
    x = freedom * ratio
    with mpmath.workdps(40):
        above = mpmath.gammainc(mpf(freedom) / 2, mpf(x) / 2, mpmath.inf, regularized=True)
        assert abs(mpf(number("CHISQ.DIST.RT", x, freedom)) - above) <= 1e-13 * above


@given(st.floats(1e-12, 0.999), st.integers(1, 300))
def test_chi_square_inverse_pairs(p: float, freedom: int) -> None:
    x = number("CHISQ.INV", p, freedom)
    assert number("CHISQ.DIST", x, freedom, True) == pytest.approx(p, rel=1e-12)
    x = number("CHISQ.INV.RT", p, freedom)
    assert number("CHISQ.DIST.RT", x, freedom) == pytest.approx(p, rel=1e-12)


@given(st.floats(1e-9, 0.999), st.floats(0.2, 50.0), st.floats(0.1, 20.0))
def test_gamma_inverse_pairs(p: float, shape: float, scale: float) -> None:
    x = number("GAMMA.INV", p, shape, scale)
    assert number("GAMMA.DIST", x, shape, scale, True) == pytest.approx(p, rel=1e-12)


@given(st.floats(0.0, 50.0), st.floats(0.1, 5.0))
def test_special_cases_agree(x: float, scale: float) -> None:
    exponential = number("EXPON.DIST", x, 1.0 / scale, True)
    assert number("WEIBULL.DIST", x, 1.0, scale, True) == pytest.approx(exponential, rel=1e-13)
    assert number("GAMMA.DIST", x, 1.0, scale, True) == pytest.approx(exponential, rel=1e-13)
    density = number("EXPON.DIST", x, 1.0 / scale, False)
    assert number("WEIBULL.DIST", x, 1.0, scale, False) == pytest.approx(density, rel=1e-12)
    assert number("GAMMA.DIST", x, 1.0, scale, False) == pytest.approx(density, rel=1e-12)


def test_small_probabilities_keep_their_digits() -> None:
    assert number("EXPON.DIST", 1e-20, 1.0, True) == 1e-20
    assert number("WEIBULL.DIST", 1e-10, 2.0, 1.0, True) == pytest.approx(1e-20, rel=1e-14)
    assert number("CHIDIST", 1000.0, 2.0) == pytest.approx(math.exp(-500.0), rel=1e-13)


def test_densities_at_zero() -> None:
    assert number("WEIBULL", 0.0, 1.0, 4.0, False) == 0.25
    assert number("WEIBULL", 0.0, 2.0, 4.0, False) == 0.0
    assert number("GAMMADIST", 0.0, 1.0, 4.0, False) == 0.25
    assert number("GAMMADIST", 0.0, 3.0, 4.0, False) == 0.0
    assert number("CHISQ.DIST", 0.0, 2.0, False) == 0.5
    assert number("CHISQ.DIST", 0.0, 3.0, False) == 0.0
    assert fault("CHISQ.DIST", 0.0, 1.0, False) == "#NUM!"
    assert fault("WEIBULL", 0.0, 0.5, 1.0, False) == "#NUM!"


def test_far_beyond_everything_is_certain() -> None:
    assert number("WEIBULL", 1e300, 5.0, 1.0, True) == 1.0
    assert number("WEIBULL", 1e300, 5.0, 1.0, False) == 0.0


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("EXPONDIST", (-1.0, 1.0, True)),
        ("EXPONDIST", (1.0, 0.0, True)),
        ("WEIBULL", (-1.0, 1.0, 1.0, True)),
        ("GAMMADIST", (1.0, 0.0, 1.0, True)),
        ("GAMMAINV", (1.0, 2.0, 1.0)),
        ("GAMMAINV", (-0.1, 2.0, 1.0)),
        ("CHIDIST", (-1.0, 2.0)),
        ("CHIDIST", (1.0, 0.5)),
        ("CHISQ.INV", (1.0, 2.0)),
        ("CHIINV", (0.0, 2.0)),
    ],
)
def test_outside_the_domain(name: str, arguments: tuple[Value, ...]) -> None:
    assert fault(name, *arguments) == "#NUM!"
