"""Beta and F: documented values, tables, mpmath, properties."""

from __future__ import annotations

import mpmath
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mpf

from tests.functions.calls import fault, number
from xlroot.values import Value

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED: list[tuple[str, tuple[Value, ...], float, float]] = [
    ("BETA.DIST", (2.0, 8.0, 10.0, True, 1.0, 3.0), 0.6854706, 5e-8),
    ("BETA.DIST", (2.0, 8.0, 10.0, False, 1.0, 3.0), 1.4837646, 5e-8),
    ("BETADIST", (2.0, 8.0, 10.0, 1.0, 3.0), 0.6854706, 5e-8),
    ("BETA.INV", (0.685470581, 8.0, 10.0, 1.0, 3.0), 2.0, 5e-8),
    ("F.DIST", (15.20686486, 6.0, 4.0, True), 0.99, 5e-9),
    ("F.DIST", (15.20686486, 6.0, 4.0, False), 0.0012238, 5e-8),
    ("F.DIST.RT", (15.20686486, 6.0, 4.0), 0.01, 5e-9),
    ("F.INV", (0.01, 6.0, 4.0), 0.10930991, 5e-9),
    ("F.INV.RT", (0.01, 6.0, 4.0), 15.20686486, 5e-8),
]

# NIST/SEMATECH e-Handbook, section 1.3.6.7.3: upper critical values of F at 0.05.
TABLE = [(1.0, 1.0, 161.448), (3.0, 10.0, 3.708), (10.0, 10.0, 2.978), (5.0, 20.0, 2.711)]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Value, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


@pytest.mark.parametrize(("first", "second", "x"), TABLE)
def test_table(first: float, second: float, x: float) -> None:
    assert round(number("FINV", 0.05, first, second), 3) == x
    assert round(number("F.INV", 0.95, first, second), 3) == x


@settings(max_examples=60, deadline=None)
@given(st.floats(0.3, 60.0), st.floats(0.3, 60.0), st.floats(0.01, 0.99))
def test_beta_against_mpmath(a: float, b: float, x: float) -> None:
    with mpmath.workdps(50):
        below = mpmath.betainc(mpf(a), mpf(b), 0, mpf(x), regularized=True)
        assert abs(mpf(number("BETA.DIST", x, a, b, True)) - below) <= 1e-13 * below


@settings(max_examples=40, deadline=None)
@given(st.integers(1, 80), st.integers(1, 80), st.floats(0.05, 20.0))
def test_f_tail_against_mpmath(first: int, second: int, x: float) -> None:
    with mpmath.workdps(50):
        z = second / (first * mpf(x) + second)
        above = mpmath.betainc(mpf(second) / 2, mpf(first) / 2, 0, z, regularized=True)
        assert abs(mpf(number("F.DIST.RT", x, first, second)) - above) <= 1e-13 * above


@given(st.floats(1e-9, 0.999), st.integers(1, 200), st.integers(1, 200))
def test_f_inverse_pairs(p: float, first: int, second: int) -> None:
    x = number("F.INV", p, first, second)
    assert number("F.DIST", x, first, second, True) == pytest.approx(p, rel=1e-12)
    x = number("F.INV.RT", p, first, second)
    assert number("F.DIST.RT", x, first, second) == pytest.approx(p, rel=1e-12)


@given(st.floats(1e-6, 0.999), st.floats(0.5, 50.0), st.floats(0.5, 50.0))
def test_beta_inverse_pairs(p: float, a: float, b: float) -> None:
    x = number("BETA.INV", p, a, b)
    assert number("BETA.DIST", x, a, b, True) == pytest.approx(p, rel=1e-11)


@given(st.floats(0.01, 100.0), st.integers(1, 50), st.integers(1, 50))
def test_the_reciprocal_ratio_has_the_other_tail(x: float, first: int, second: int) -> None:
    above = number("F.DIST.RT", x, first, second)
    assert number("F.DIST", 1.0 / x, second, first, True) == pytest.approx(above, rel=1e-12)


def test_f_of_two_degrees_in_closed_form() -> None:
    # With 2 degrees above, the tail is (1 + 2 x / n)^(-n / 2).
    assert number("FDIST", 3.0, 2.0, 10.0) == pytest.approx(1.6**-5, rel=1e-14)
    assert number("F.DIST", 0.0, 2.0, 10.0, False) == 1.0
    assert number("F.DIST", 0.0, 3.0, 10.0, False) == 0.0
    assert fault("F.DIST", 0.0, 1.0, 10.0, False) == "#NUM!"


def test_beta_densities_at_the_ends() -> None:
    assert number("BETA.DIST", 0.0, 1.0, 3.0, False) == 3.0
    assert number("BETA.DIST", 1.0, 3.0, 1.0, False) == 3.0
    assert number("BETA.DIST", 0.0, 2.0, 3.0, False) == 0.0
    assert number("BETA.DIST", 1.0, 1.0, 3.0, False, 1.0, 3.0) == 1.5
    assert fault("BETA.DIST", 0.0, 0.5, 3.0, False) == "#NUM!"
    assert number("BETAINV", 1.0, 2.0, 3.0, 1.0, 5.0) == 5.0


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("BETADIST", (-0.1, 2.0, 3.0)),
        ("BETADIST", (1.1, 2.0, 3.0)),
        ("BETADIST", (0.5, 0.0, 3.0)),
        ("BETA.DIST", (1.0, 2.0, 3.0, True, 1.0, 1.0)),
        ("BETAINV", (0.0, 2.0, 3.0)),
        ("BETAINV", (1.1, 2.0, 3.0)),
        ("FDIST", (-1.0, 2.0, 3.0)),
        ("FDIST", (1.0, 0.5, 3.0)),
        ("FDIST", (1.0, 2.0, 1e11)),
        ("FINV", (0.0, 2.0, 3.0)),
        ("F.INV", (1.0, 2.0, 3.0)),
    ],
)
def test_outside_the_domain(name: str, arguments: tuple[Value, ...]) -> None:
    assert fault(name, *arguments) == "#NUM!"
