"""Student's t: documented values, closed forms, a table, mpmath, properties."""

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
    ("T.DIST", (60.0, 1.0, True), 0.99469533, 5e-9),
    ("T.DIST", (8.0, 3.0, False), 0.00073691, 5e-9),
    ("T.DIST.2T", (1.959999998, 60.0), 0.054644930, 5e-10),
    ("T.DIST.RT", (1.959999998, 60.0), 0.027322, 5e-7),
    ("TDIST", (1.959999998, 60.0, 2.0), 0.054644930, 5e-10),
    ("TDIST", (1.959999998, 60.0, 1.0), 0.027322465, 5e-10),
    ("T.INV", (0.75, 2.0), 0.8164966, 5e-8),
    ("T.INV.2T", (0.546449, 60.0), 0.606533, 5e-7),
    ("TINV", (0.05464, 60.0), 1.96, 5e-4),
]

# NIST/SEMATECH e-Handbook, section 1.3.6.7.2: upper critical values at 0.025.
TABLE = [(1.0, 12.706), (5.0, 2.571), (10.0, 2.228), (30.0, 2.042), (100.0, 1.984)]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Value, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


@pytest.mark.parametrize(("freedom", "t"), TABLE)
def test_table(freedom: float, t: float) -> None:
    assert round(number("T.INV.2T", 0.05, freedom), 3) == t
    assert round(number("T.INV", 0.975, freedom), 3) == t


@given(st.floats(-100.0, 100.0))
def test_closed_forms(t: float) -> None:
    cauchy = math.atan2(1.0, -t) / math.pi
    assert number("T.DIST", t, 1.0, True) == pytest.approx(cauchy, rel=1e-13)
    assert number("T.DIST", t, 1.0, False) == pytest.approx(
        1.0 / (math.pi * (1.0 + t * t)), rel=1e-14
    )
    two = 0.5 / (1.0 + 0.5 * t * t) ** 1.5 / math.sqrt(2.0)
    assert number("T.DIST", t, 2.0, False) == pytest.approx(two, rel=1e-14)


@settings(max_examples=60, deadline=None)
@given(st.floats(0.0, 30.0), st.sampled_from([1.0, 2.0, 3.0, 7.0, 40.0, 1000.0]))
def test_tail_against_mpmath(t: float, freedom: float) -> None:
    with mpmath.workdps(40):
        v, x = mpf(freedom), mpf(t)
        exact = mpmath.betainc(v / 2, mpf(1) / 2, 0, v / (v + x * x), regularized=True) / 2
        assert abs(mpf(number("T.DIST.RT", t, freedom)) - exact) <= 1e-13 * exact


@given(st.floats(1e-12, 1.0), st.integers(1, 500))
def test_inverse_pairs(p: float, freedom: int) -> None:
    both = number("T.INV.2T", p, freedom)
    assert number("T.DIST.2T", both, freedom) == pytest.approx(p, rel=1e-12, abs=1e-15)
    if p < 1.0:
        one = number("T.INV", p, freedom)
        assert number("T.DIST", one, freedom, True) == pytest.approx(p, rel=1e-12)


@given(st.floats(-40.0, 40.0), st.integers(1, 200))
def test_both_sides_make_a_whole(t: float, freedom: int) -> None:
    below, above = number("T.DIST", t, freedom, True), number("T.DIST.RT", t, freedom)
    assert below + above == pytest.approx(1.0, abs=3e-16)
    assert number("T.DIST", -t, freedom, True) == above


def test_many_degrees_of_freedom_come_close_to_normal() -> None:
    assert number("T.DIST.RT", 3.0, 1e10) == pytest.approx(number("NORMSDIST", -3.0), rel=1e-8)
    assert number("T.INV", 0.9, 1e10) == pytest.approx(number("NORMSINV", 0.9), rel=1e-9)


def test_degrees_of_freedom_are_cut() -> None:
    assert number("T.DIST", 1.5, 4.9, True) == number("T.DIST", 1.5, 4.0, True)
    assert number("TINV", 1.0, 7.0) == 0.0
    assert number("T.INV", 0.5, 7.0) == 0.0


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("T.DIST", (1.0, 0.9, True)),
        ("T.DIST.2T", (-0.1, 5.0)),
        ("TDIST", (-0.1, 5.0, 1.0)),
        ("TDIST", (1.0, 5.0, 3.0)),
        ("T.INV", (0.0, 5.0)),
        ("T.INV", (1.0, 5.0)),
        ("TINV", (0.0, 5.0)),
        ("TINV", (1.1, 5.0)),
        ("T.INV.2T", (0.5, 0.0)),
    ],
)
def test_outside_the_domain(name: str, arguments: tuple[Value, ...]) -> None:
    assert fault(name, *arguments) == "#NUM!"
