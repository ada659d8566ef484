"""The normal and lognormal distribution: documented values, mpmath at 40 digits, properties."""

from __future__ import annotations

import math

import mpmath
import pytest
from hypothesis import given
from hypothesis import strategies as st
from mpmath import mpf

from tests.functions.calls import fault, number
from xlroot.values import Value

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED: list[tuple[str, tuple[Value, ...], float, float]] = [
    ("NORM.DIST", (42.0, 40.0, 1.5, True), 0.9087888, 5e-8),
    ("NORM.DIST", (42.0, 40.0, 1.5, False), 0.10934, 5e-6),
    ("NORM.INV", (0.908789, 40.0, 1.5), 42.000002, 5e-7),
    ("NORM.S.DIST", (1.333333, True), 0.908788726, 5e-10),
    ("NORM.S.DIST", (1.333333, False), 0.164010148, 5e-10),
    ("NORM.S.INV", (0.908789,), 1.3333347, 5e-7),
    ("PHI", (0.75,), 0.301137432, 5e-10),
    ("GAUSS", (2.0,), 0.47725, 5e-6),
    ("LOGNORM.DIST", (4.0, 3.5, 1.2, True), 0.0390836, 5e-8),
    ("LOGNORM.DIST", (4.0, 3.5, 1.2, False), 0.0176176, 5e-8),
    ("LOGNORMDIST", (4.0, 3.5, 1.2), 0.0390836, 5e-8),
    ("LOGNORM.INV", (0.039084, 3.5, 1.2), 4.0000252, 5e-7),
]

# Abramowitz and Stegun, table 26.1: P(x) to 15 decimals.
TABLE = [(0.5, 0.691462461274013), (1.0, 0.841344746068543), (2.0, 0.977249868051821)]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Value, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


@pytest.mark.parametrize(("z", "p"), TABLE)
def test_table(z: float, p: float) -> None:
    assert number("NORMSDIST", z) == pytest.approx(p, abs=6e-16)


@given(st.floats(-20.0, 8.0))
def test_distribution_function_keeps_its_digits_in_the_tail(z: float) -> None:
    with mpmath.workdps(40):
        exact = mpmath.erfc(-mpf(z) / mpmath.sqrt(2)) / 2
        assert abs(mpf(number("NORM.S.DIST", z, True)) - exact) <= 1e-13 * exact
    assert number("NORM.S.DIST", z, True) == number("NORMSDIST", z)


@given(st.floats(-300.0, -0.001).map(lambda power: 10.0**power))
def test_inverse_against_mpmath(p: float) -> None:
    z = number("NORM.S.INV", p)
    with mpmath.workdps(40):
        # One Newton step from the answer tells its error.
        off = mpmath.erfc(-mpf(z) / mpmath.sqrt(2)) / 2 - mpf(p)
        slope = mpmath.exp(-(mpf(z) ** 2) / 2) / mpmath.sqrt(2 * mpmath.pi)
        assert abs(off / slope) <= 2e-15 * max(1.0, abs(z))


@given(st.floats(0.0, 8.0))
def test_symmetry(z: float) -> None:
    both = number("NORMSDIST", z) + number("NORMSDIST", -z)
    assert both == pytest.approx(1.0, abs=3e-16)
    assert number("GAUSS", -z) == -number("GAUSS", z)
    assert number("PHI", z) == number("PHI", -z)


@given(st.floats(1e-9, 1 - 1e-9), st.floats(-10.0, 10.0), st.floats(0.01, 5.0))
def test_scaled_inverse_pairs(p: float, mean: float, deviation: float) -> None:
    x = number("NORM.INV", p, mean, deviation)
    # The value keeps 1e-16 of itself, which a small deviation magnifies.
    slack = 1e-13 + 1e-15 * abs(mean) / deviation
    assert number("NORM.DIST", x, mean, deviation, True) == pytest.approx(p, rel=30 * slack)
    grown = number("LOGNORM.INV", p, mean, deviation)
    again = number("LOGNORM.DIST", grown, mean, deviation, True)
    assert again == pytest.approx(p, rel=30 * slack)
    assert math.log(grown) == pytest.approx(x, rel=1e-13, abs=1e-13)


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("NORM.DIST", (0.0, 0.0, 0.0, True)),
        ("NORMDIST", (0.0, 0.0, -1.0, False)),
        ("NORM.INV", (0.0, 0.0, 1.0)),
        ("NORM.INV", (0.5, 0.0, 0.0)),
        ("NORMSINV", (1.0,)),
        ("NORMSINV", (-0.1,)),
        ("LOGNORM.DIST", (0.0, 0.0, 1.0, True)),
        ("LOGNORMDIST", (1.0, 0.0, 0.0)),
        ("LOGINV", (1.0, 0.0, 1.0)),
        ("LOGINV", (0.5, 800.0, 1.0)),
    ],
)
def test_outside_the_domain(name: str, arguments: tuple[Value, ...]) -> None:
    assert fault(name, *arguments) == "#NUM!"
