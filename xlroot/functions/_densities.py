"""Probability masses and densities to nearly full precision, by the saddle-point expansion.

C. Loader, "Fast and Accurate Computation of Binomial Probabilities" (2000): a binomial or Poisson
probability is written as exp(-deviance) times a ratio of Stirling errors, so that the large
logarithms of factorials never cancel. All counts may be fractions; gamma, beta, Student and
F densities are such masses times a power. Nothing here raises for arguments in its domain.
"""

from __future__ import annotations

import math

TWO_PI = 2.0 * math.pi
ROOT_TWO_PI = math.sqrt(TWO_PI)
LN_ROOT_TWO_PI = 0.5 * math.log(TWO_PI)

_STIRLING = (1 / 12, -1 / 360, 1 / 1260, -1 / 1680, 1 / 1188, -691 / 360360, 1 / 156)
"""Stirling's series of ln n!, from the Bernoulli numbers (DLMF 5.11.1)."""

_SERIES_FROM = 15.0


def stirling_error(n: float) -> float:
    """ln n! minus ln of sqrt(2 pi n) (n/e)^n, for n > 0; absolute error a few 1e-16."""
    shift = 0.0
    while n < _SERIES_FROM:
        # The error at n exceeds the error at n + 1 by (n + 1/2) ln(1 + 1/n) - 1.
        shift += _step(n)
        n += 1.0
    inverse_square = 1.0 / (n * n)
    series = 0.0
    for coefficient in reversed(_STIRLING):
        series = series * inverse_square + coefficient
    return series / n + shift


def _step(n: float) -> float:
    if n < 1.0:
        return (n + 0.5) * math.log1p(1.0 / n) - 1.0
    # (n + 1/2) ln(1 + 1/n) = artanh(v) / v with v = 1 / (2 n + 1), without its leading 1.
    square = 1.0 / ((2.0 * n + 1.0) * (2.0 * n + 1.0))
    power, total, order = square, 0.0, 3.0
    while power > 1e-18:
        total += power / order
        power *= square
        order += 2.0
    return total


def deviance(x: float, mean: float) -> float:
    """x ln(x / mean) + mean - x, at least 0, without cancellation (Loader's D0 times the mean)."""
    if x == 0.0:
        return mean
    ratio = (x - mean) / (x + mean)
    if abs(ratio) > 0.6:
        return x * (math.log(x) - math.log(mean)) + mean - x
    square = ratio * ratio
    total, power, order = (x - mean) * ratio, 2.0 * x * ratio * square, 3.0
    while abs(power) > 1e-18 * total:
        total += power / order
        power *= square
        order += 2.0
    return total


def poisson_mass(x: float, mean: float) -> float:
    """exp(-mean) mean^x / x!, for x >= 0 and mean >= 0."""
    if mean == 0.0:
        return 1.0 if x == 0.0 else 0.0
    if x == 0.0:
        return math.exp(-mean)
    if x < 1e-290:
        return math.exp(-mean + x * math.log(mean))
    # Factors apart, so that a small mass keeps its digits and a large count does not overflow.
    return math.exp(-stirling_error(x) - deviance(x, mean)) / (ROOT_TWO_PI * math.sqrt(x))


def binomial_mass(x: float, rest: float, p: float, q: float) -> float:
    """(x + rest)! / (x! rest!) p^x q^rest, for x, rest >= 0 and p + q = 1, both given."""
    if p == 0.0:
        return 1.0 if x == 0.0 else 0.0
    if q == 0.0:
        return 1.0 if rest == 0.0 else 0.0
    n = x + rest
    if x == 0.0 or rest == 0.0:
        return math.exp(_times_log(n, q, p) if x == 0.0 else _times_log(n, p, q))
    exponent = (
        stirling_error(n)
        - stirling_error(x)
        - stirling_error(rest)
        - deviance(x, n * p)
        - deviance(rest, n * q)
    )
    return math.exp(exponent) * math.sqrt(n / rest) / math.sqrt(TWO_PI * x)


def _times_log(n: float, p: float, q: float) -> float:
    """n ln p with p = 1 - q."""
    return n * (math.log1p(-q) if q < 0.5 else math.log(p))


def gamma_density(x: float, shape: float) -> float:
    """x^(shape-1) exp(-x) / Gamma(shape) at x > 0."""
    if shape < 1.0:
        return poisson_mass(shape, x) * shape / x
    return poisson_mass(shape - 1.0, x)


def beta_kernel(a: float, b: float, y: float, z: float) -> float:
    """y^a z^b / B(a, b) with y + z = 1, both given and positive."""
    return binomial_mass(a, b, y, z) * (a * b / (a + b))


def gamma_half_ratio(a: float) -> float:
    """Gamma(a + 1/2) / Gamma(a) for a > 0."""
    change = stirling_error(a + 0.5) - stirling_error(a)
    return math.sqrt(a) * math.exp(a * math.log1p(0.5 / a) - 0.5 + change)
