"""Distributions of counts: binomial, negative binomial, Poisson.

Abramowitz and Stegun, chapter 26.1. Counts are cut to whole numbers, as Excel documents. Masses
come from C. Loader's expansion, distribution functions from the incomplete integrals, so both
keep their digits in the tails.
"""

from __future__ import annotations

import math
from fractions import Fraction

from xlroot.errors import Unsupported
from xlroot.functions._densities import binomial_mass, poisson_mass
from xlroot.functions._settled import settled
from xlroot.functions._tails import beta_above, beta_below, gamma_above
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault


@worksheet(
    ("POISSON.DIST", "POISSON"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def poisson_dist(
    count: float,
    mean: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The probability of at most, or of exactly, a count of rare events."""
    k = float(math.trunc(count))
    if count < 0.0 or mean < 0.0:
        return Fault.NUM
    if not cumulative:
        return poisson_mass(k, mean)
    return gamma_above(k + 1.0, mean)


def _binomial(trials: float, p: float) -> int | Fault:
    if not 0.0 <= p <= 1.0 or trials < 0.0:
        return Fault.NUM
    return math.trunc(trials)


def _at_most(k: int, n: int, p: float) -> float:
    """The probability of at most k successes; 0 for k = -1."""
    if k < 0:
        return 0.0
    return 1.0 if k >= n else beta_above(k + 1.0, float(n - k), p)


def _at_least(k: int, n: int, p: float) -> float:
    if k > n:
        return 0.0
    return 1.0 if k <= 0 else beta_below(float(k), n - k + 1.0, p)


@worksheet(
    ("BINOM.DIST", "BINOMDIST"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def binom_dist(
    successes: float,
    trials: float,
    p: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The probability of at most, or of exactly, a number of successes."""
    n, k = _binomial(trials, p), math.trunc(successes)
    if isinstance(n, Fault) or successes < 0.0 or k > n:
        return Fault.NUM
    if cumulative:
        return _at_most(k, n, p)
    return binomial_mass(float(k), float(n - k), p, 1.0 - p)


MOST_TERMS = 1000
"""A range of counts up to this long is added mass by mass."""


@worksheet(
    "BINOM.DIST.RANGE",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=1,
    gives=Gives.NUMBER,
)
@settled
def binom_dist_range(
    trials: float, p: float, first: float, last: float | None = None
) -> float | Fault:
    """The probability of a number of successes from first to last."""
    n, low = _binomial(trials, p), math.trunc(first)
    high = low if last is None else math.trunc(last)
    if isinstance(n, Fault) or first < 0.0 or not low <= high <= n:
        return Fault.NUM
    if high - low < MOST_TERMS:
        counts = range(low, high + 1)
        return math.fsum(binomial_mass(float(k), float(n - k), p, 1.0 - p) for k in counts)
    if low > n * p:
        return _at_least(low, n, p) - _at_least(high + 1, n, p)
    return _at_most(high, n, p) - _at_most(low - 1, n, p)


@worksheet(("BINOM.INV", "CRITBINOM"), Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def binom_inv(trials: float, p: float, criterion: float) -> float | Fault:
    """The smallest count whose distribution function is at least the criterion."""
    n = _binomial(trials, p)
    if isinstance(n, Fault) or not 0.0 <= criterion <= 1.0:
        return Fault.NUM
    if p == 0.0 or criterion == 0.0:
        return 0.0
    if p == 1.0 or criterion == 1.0:
        return float(n)
    low, high = -1, n
    while high - low > 1:
        middle = (low + high) // 2
        if _at_most(middle, n, p) >= criterion:
            high = middle
        else:
            low = middle
    if _is_tie(_at_most(low, n, p), criterion) or _is_tie(_at_most(high, n, p), criterion):
        return float(_exact_quantile(n, p, criterion))
    return float(high)


MOST_EXACT_TRIALS = 2000


def _is_tie(probability: float, criterion: float) -> bool:
    return abs(probability - criterion) <= 1e-12 * criterion


def _exact_quantile(n: int, p: float, criterion: float) -> int:
    """The smallest count in exact arithmetic, where rounding alone would decide.

    The probabilities count as the decimals that their shortest text shows, as they were typed.
    """
    if n > MOST_EXACT_TRIALS:
        raise Unsupported("the criterion equals a probability to all digits; rounding decides")
    chance = Fraction(repr(p))
    wins, losses = chance.numerator, chance.denominator - chance.numerator
    wanted = Fraction(repr(criterion)) * chance.denominator**n
    term, total = losses**n, 0
    for k in range(n):
        total += term
        if total >= wanted:
            return k
        term = term * (n - k) * wins // ((k + 1) * losses)
    return n


def _negative_binomial(failures: float, successes: float, p: float) -> tuple[float, float] | Fault:
    f, s = float(math.trunc(failures)), float(math.trunc(successes))
    if f < 0.0 or failures < 0.0 or s < 1.0 or not 0.0 <= p <= 1.0:
        return Fault.NUM
    return f, s


def _negative_binomial_mass(f: float, s: float, p: float) -> float:
    return binomial_mass(s, f, p, 1.0 - p) * (s / (s + f))


@worksheet(
    "NEGBINOM.DIST",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def negbinom_dist(
    failures: float,
    successes: float,
    p: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The probability of at most, or of exactly, some failures before a number of successes."""
    counts = _negative_binomial(failures, successes, p)
    if isinstance(counts, Fault):
        return counts
    f, s = counts
    return beta_below(s, f + 1.0, p) if cumulative else _negative_binomial_mass(f, s, p)


@worksheet("NEGBINOMDIST", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def negbinomdist(failures: float, successes: float, p: float) -> float | Fault:
    """The probability of exactly some failures before a number of successes."""
    counts = _negative_binomial(failures, successes, p)
    return counts if isinstance(counts, Fault) else _negative_binomial_mass(*counts, p)
