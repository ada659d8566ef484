"""Distributions of counts: documented values, exact fractions, mpmath, properties."""

from __future__ import annotations

import math
from fractions import Fraction

import mpmath
import pytest
from hypothesis import given
from hypothesis import strategies as st
from mpmath import mpf

from tests.functions.calls import call, fault, number
from xlroot.errors import Unsupported
from xlroot.values import Value

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED: list[tuple[str, tuple[Value, ...], float, float]] = [
    ("BINOM.DIST", (6.0, 10.0, 0.5, False), 0.2050781, 5e-8),
    ("BINOM.INV", (6.0, 0.5, 0.75), 4.0, 0.0),
    ("CRITBINOM", (6.0, 0.5, 0.75), 4.0, 0.0),
    ("BINOM.DIST.RANGE", (60.0, 0.75, 48.0), 0.083974967, 5e-9),
    ("BINOM.DIST.RANGE", (60.0, 0.75, 45.0, 50.0), 0.523629793, 5e-9),
    ("NEGBINOM.DIST", (10.0, 5.0, 0.25, True), 0.3135141, 5e-8),
    ("NEGBINOM.DIST", (10.0, 5.0, 0.25, False), 0.0550487, 5e-8),
    ("NEGBINOMDIST", (10.0, 5.0, 0.25), 0.0550487, 5e-8),
    ("POISSON.DIST", (2.0, 5.0, True), 0.124652, 5e-7),
    ("POISSON.DIST", (2.0, 5.0, False), 0.084224, 5e-7),
    ("HYPGEOM.DIST", (1.0, 4.0, 8.0, 20.0, True), 0.4654, 5e-5),
    ("HYPGEOM.DIST", (1.0, 4.0, 8.0, 20.0, False), 0.3633, 5e-5),
    ("HYPGEOMDIST", (1.0, 4.0, 8.0, 20.0), 0.3633, 5e-5),
]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Value, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


def exactly(n: int, p: float, k: int) -> Fraction:
    return math.comb(n, k) * Fraction(p) ** k * (1 - Fraction(p)) ** (n - k)


@given(st.integers(1, 80), st.floats(0.01, 0.99), st.data())
def test_binomial_against_fractions(n: int, p: float, data: st.DataObject) -> None:
    k = data.draw(st.integers(0, n))
    last = data.draw(st.integers(k, n))
    masses = [exactly(n, p, each) for each in range(n + 1)]
    assert number("BINOM.DIST", k, n, p, False) == pytest.approx(float(masses[k]), rel=1e-13)
    below = float(sum(masses[: k + 1]))
    assert number("BINOM.DIST", k, n, p, True) == pytest.approx(below, rel=1e-13)
    between = float(sum(masses[k : last + 1]))
    assert number("BINOM.DIST.RANGE", n, p, k, last) == pytest.approx(between, rel=1e-13)


def test_many_trials() -> None:
    with mpmath.workdps(40):
        p = mpf(0.3)
        exact = mpmath.binomial(10**6, 299_000) * p**299_000 * (1 - p) ** 701_000
        found = number("BINOM.DIST", 299_000, 10**6, 0.3, False)
        assert abs(mpf(found) - exact) <= 1e-13 * exact
    part = number("BINOM.DIST.RANGE", 10**6, 0.3, 250_000, 350_000)
    assert part == pytest.approx(1.0, abs=1e-15)


@given(st.integers(1, 200), st.floats(0.02, 0.98), st.floats(0.001, 0.999))
def test_binomial_inverse_is_the_first_count_that_reaches(n: int, p: float, level: float) -> None:
    k = number("BINOM.INV", n, p, level)
    assert number("BINOM.DIST", k, n, p, True) >= level * (1 - 1e-12)
    if k:
        assert number("BINOM.DIST", k - 1.0, n, p, True) <= level * (1 + 1e-12)


def test_binomial_inverse_where_a_probability_equals_the_criterion() -> None:
    assert number("BINOM.INV", 2, 0.5, 0.25) == 0.0
    # 1 - 0.1 is 0.9 as typed; the binary fractions would say just less.
    assert number("BINOM.INV", 1, 0.1, 0.9) == 0.0
    assert number("BINOM.INV", 4, 0.5, 0.3125) == 1.0
    assert number("BINOM.INV", 7, 0.5, 1.0) == 7.0
    assert number("BINOM.INV", 7, 0.5, 0.0) == 0.0
    with pytest.raises(Unsupported, match="rounding decides"):
        call("BINOM.INV", 100_001, 0.5, 0.5)


@given(st.integers(0, 40), st.integers(1, 40), st.floats(0.05, 0.95))
def test_negative_binomial_against_fractions(f: int, s: int, p: float) -> None:
    chance = Fraction(p)
    masses = [math.comb(k + s - 1, k) * chance**s * (1 - chance) ** k for k in range(f + 1)]
    found = number("NEGBINOM.DIST", f, s, p, False)
    assert found == pytest.approx(float(masses[-1]), rel=1e-13)
    assert number("NEGBINOM.DIST", f, s, p, True) == pytest.approx(float(sum(masses)), rel=1e-13)


@given(st.integers(0, 60), st.floats(0.01, 80.0))
def test_poisson_against_mpmath(k: int, mean: float) -> None:
    with mpmath.workdps(40):
        rate = mpf(mean)
        masses = [mpmath.exp(-rate) * rate**i / mpmath.factorial(i) for i in range(k + 1)]
        one, upto = number("POISSON", k, mean, False), number("POISSON", k, mean, True)
        assert abs(mpf(one) - masses[-1]) <= 1e-13 * masses[-1]
        assert abs(mpf(upto) - sum(masses)) <= 1e-13 * sum(masses)


@given(st.data())
def test_hypergeometric_against_fractions(data: st.DataObject) -> None:
    total = data.draw(st.integers(1, 120))
    wanted, drawn = data.draw(st.integers(1, total)), data.draw(st.integers(1, total))
    least, most = max(0, wanted + drawn - total), min(wanted, drawn)
    k = data.draw(st.integers(least, most))
    ways = [
        math.comb(wanted, i) * math.comb(total - wanted, drawn - i) for i in range(least, k + 1)
    ]
    every = math.comb(total, drawn)
    one = number("HYPGEOM.DIST", k, drawn, wanted, total, False)
    assert one == pytest.approx(float(Fraction(ways[-1], every)), rel=1e-13)
    upto = number("HYPGEOM.DIST", k, drawn, wanted, total, True)
    assert upto == pytest.approx(float(Fraction(sum(ways), every)), rel=1e-13)


def test_sure_things() -> None:
    assert number("POISSON", 0, 0, False) == 1.0
    assert number("POISSON", 3, 0, True) == 1.0
    assert number("BINOMDIST", 10, 10, 1, False) == 1.0
    assert number("BINOMDIST", 0, 10, 0, True) == 1.0
    assert number("BINOMDIST", 3, 10, 1, True) == 0.0
    assert number("NEGBINOMDIST", 0, 3, 1) == 1.0
    assert number("NEGBINOMDIST", 2, 3, 0) == 0.0


def test_counts_are_cut() -> None:
    assert number("BINOMDIST", 6.9, 10.9, 0.5, False) == number("BINOMDIST", 6, 10, 0.5, False)
    assert number("POISSON", 2.9, 5, False) == number("POISSON", 2, 5, False)
    assert number("HYPGEOMDIST", 2.8, 3, 3, 6) == pytest.approx(0.45, rel=1e-14)


def test_a_vast_population_is_refused() -> None:
    with pytest.raises(Unsupported, match="too many terms"):
        call("HYPGEOM.DIST", 5, 1e9, 1e9, 1e10, True)


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("POISSON", (-0.5, 1.0, True)),
        ("POISSON", (1.0, -1.0, True)),
        ("BINOMDIST", (11.0, 10.0, 0.5, True)),
        ("BINOMDIST", (-0.5, 10.0, 0.5, True)),
        ("BINOMDIST", (1.0, 10.0, 1.5, True)),
        ("BINOM.DIST.RANGE", (10.0, 0.5, 4.0, 3.0)),
        ("BINOM.INV", (10.0, 0.5, 1.5)),
        ("NEGBINOMDIST", (-1.0, 5.0, 0.5)),
        ("NEGBINOMDIST", (1.0, 0.5, 0.5)),
        ("HYPGEOMDIST", (4.0, 3.0, 3.0, 6.0)),
        ("HYPGEOMDIST", (0.0, 4.0, 4.0, 6.0)),
        ("HYPGEOMDIST", (0.0, 0.0, 1.0, 6.0)),
    ],
)
def test_outside_the_domain(name: str, arguments: tuple[Value, ...]) -> None:
    assert fault(name, *arguments) == "#NUM!"
