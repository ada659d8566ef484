"""Masses and densities against mpmath at 40 digits."""

from __future__ import annotations

import mpmath
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mpf

from xlroot.functions._densities import (
    beta_kernel,
    binomial_mass,
    deviance,
    gamma_density,
    gamma_half_ratio,
    poisson_mass,
    stirling_error,
)

POSITIVE = st.floats(-2.0, 5.0).map(lambda power: 10.0**power)
MODEST = st.floats(-2.0, 4.0).map(lambda power: 10.0**power)
"""Sizes at which the rounding of n p, magnified by its distance from the count, stays small."""


def near(found: float, exact: mpf, relative: float = 1e-13) -> bool:
    return bool(abs(mpf(found) - exact) <= relative * abs(exact))


@given(POSITIVE)
def test_stirling_error_is_the_logarithm_s_remainder(n: float) -> None:
    with mpmath.workdps(40):
        x = mpf(n)
        leading = mpmath.log(2 * mpmath.pi * x) / 2 + x * mpmath.log(x) - x
        exact = mpmath.loggamma(x + 1) - leading
        assert abs(mpf(stirling_error(n)) - exact) < 4e-15


@given(POSITIVE, st.floats(-3.0, 3.0))
def test_deviance_keeps_its_digits(x: float, shift: float) -> None:
    mean = x * 10.0**shift
    with mpmath.workdps(60):
        exact = mpf(x) * mpmath.log(mpf(x) / mpf(mean)) + mpf(mean) - mpf(x)
        assert near(deviance(x, mean), exact, 4e-15)


@pytest.mark.parametrize(
    ("k", "mean"), [(0.0, 3.0), (1.0, 1e-9), (150.0, 200.0), (1e6, 1e6), (2.5, 0.25)]
)
def test_poisson_mass(k: float, mean: float) -> None:
    with mpmath.workdps(40):
        logarithm = -mpf(mean) + mpf(k) * mpmath.log(mpf(mean)) - mpmath.loggamma(mpf(k) + 1)
        assert near(poisson_mass(k, mean), mpmath.exp(logarithm))


def test_certain_counts() -> None:
    assert poisson_mass(0.0, 0.0) == 1.0
    assert poisson_mass(2.0, 0.0) == 0.0
    assert binomial_mass(0.0, 5.0, 0.0, 1.0) == 1.0
    assert binomial_mass(5.0, 0.0, 1.0, 0.0) == 1.0
    assert binomial_mass(4.0, 1.0, 1.0, 0.0) == 0.0


@settings(max_examples=50)
@given(MODEST, MODEST, st.floats(0.01, 0.99))
def test_beta_kernel(a: float, b: float, y: float) -> None:
    with mpmath.workdps(40):
        p, q, z = mpf(a), mpf(b), 1 - mpf(y)
        logarithm = p * mpmath.log(mpf(y)) + q * mpmath.log(z)
        logarithm -= mpmath.loggamma(p) + mpmath.loggamma(q) - mpmath.loggamma(p + q)
        exact = mpmath.exp(logarithm)
        # The exponent's rounding grows with its size: 1e-13 up to a mass of about 1e-100.
        if logarithm > -230:
            assert near(beta_kernel(a, b, y, 1.0 - y), exact)


@given(st.floats(0.05, 30.0), st.floats(0.05, 100.0))
def test_gamma_density(shape: float, x: float) -> None:
    with mpmath.workdps(40):
        exact = mpf(x) ** (mpf(shape) - 1) * mpmath.exp(-mpf(x)) / mpmath.gamma(mpf(shape))
        assert near(gamma_density(x, shape), exact)


@given(POSITIVE)
def test_ratio_of_gammas_half_a_step_apart(a: float) -> None:
    with mpmath.workdps(40):
        exact = mpmath.exp(mpmath.loggamma(mpf(a) + 0.5) - mpmath.loggamma(mpf(a)))
        assert near(gamma_half_ratio(a), exact, 1e-14)
