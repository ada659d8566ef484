"""Discrete distributions. Excel's documentation; NIST/SEMATECH e-Handbook, section 1.3.6.6."""

from __future__ import annotations

import math

from xlroot.functions.distributions import made, special
from xlroot.functions.entry import Takes
from xlroot.values import Fault

N, L = Takes.NUMBER, Takes.LOGICAL


def _log_choose(n: int, k: int) -> float:
    return math.lgamma(n + 1) - math.lgamma(k + 1) - math.lgamma(n - k + 1)


def _choose(n: int, k: int) -> float:
    return float(math.comb(n, k)) if n <= 1000 else math.exp(_log_choose(n, k))


def _mass(k: int, n: int, p: float) -> float:
    if p in (0.0, 1.0):
        return 1.0 if k == (n if p else 0) else 0.0
    if n <= 1000:
        return math.comb(n, k) * p**k * (1.0 - p) ** (n - k)
    return math.exp(_log_choose(n, k) + k * math.log(p) + (n - k) * math.log1p(-p))


def _binomial(k: float, n: float, p: float, cumulative: float) -> float | Fault:
    hits, trials = math.trunc(k), math.trunc(n)
    if not 0 <= hits <= trials or not 0.0 <= p <= 1.0:
        return Fault.NUM
    return float(special().bdtr(hits, trials, p)) if cumulative else _mass(hits, trials, p)


def _binomial_inv(n: float, p: float, alpha: float) -> float | Fault:
    trials = math.trunc(n)
    if trials < 0 or not 0.0 < p < 1.0 or not 0.0 < alpha < 1.0 or trials > 1_000_000:
        return Fault.NUM
    low, high = 0, trials
    while low < high:
        middle = (low + high) // 2
        if float(special().bdtr(middle, trials, p)) >= alpha:
            high = middle
        else:
            low = middle + 1
    return float(low)


def _binomial_range(n: float, p: float, low: float, high: float | None = None) -> float | Fault:
    trials, first = math.trunc(n), math.trunc(low)
    last = first if high is None else math.trunc(high)
    if not 0 <= first <= last <= trials or not 0.0 <= p <= 1.0:
        return Fault.NUM
    if last - first > 100_000:
        return Fault.NUM
    return math.fsum(_mass(k, trials, p) for k in range(first, last + 1))


def _negative(k: float, r: float, p: float, cumulative: float = 0.0) -> float | Fault:
    fails, hits = math.trunc(k), math.trunc(r)
    if fails < 0 or hits < 1 or not 0.0 < p < 1.0:
        return Fault.NUM
    if cumulative:
        return float(special().nbdtr(fails, hits, p))
    return _choose(fails + hits - 1, hits - 1) * p**hits * (1.0 - p) ** fails


def _poisson(k: float, rate: float, cumulative: float) -> float | Fault:
    count = math.trunc(k)
    if count < 0 or rate < 0.0:
        return Fault.NUM
    if cumulative:
        return float(special().pdtr(count, rate)) if rate else 1.0
    if rate == 0.0:
        return 1.0 if count == 0 else 0.0
    return math.exp(count * math.log(rate) - rate - math.lgamma(count + 1))


def _hypergeometric(
    k: float, draws: float, marked: float, size: float, cumulative: float = 0.0
) -> float | Fault:
    hits, n, good, total = (math.trunc(each) for each in (k, draws, marked, size))
    if not (0 <= n <= total and 0 <= good <= total and 0 <= hits <= min(n, good)):
        return Fault.NUM
    least = max(0, n - (total - good))
    if hits < least or total > 100_000:
        return Fault.NUM

    def mass(j: int) -> float:
        return math.comb(good, j) * math.comb(total - good, n - j) / math.comb(total, n)

    return math.fsum(map(mass, range(least, hits + 1))) if cumulative else mass(hits)


BINOM_DIST = made(("BINOM.DIST", "BINOMDIST"), (N, N, N, L), _binomial)
BINOM_INV = made(("BINOM.INV", "CRITBINOM"), (N, N, N), _binomial_inv)
BINOM_RANGE = made("BINOM.DIST.RANGE", (N, N, N, N), _binomial_range, optional=1)
NEGBINOM_DIST = made("NEGBINOM.DIST", (N, N, N, L), _negative)
NEGBINOMDIST = made("NEGBINOMDIST", (N, N, N), _negative)
POISSON_DIST = made(("POISSON.DIST", "POISSON"), (N, N, L), _poisson)
HYPGEOM_DIST = made("HYPGEOM.DIST", (N, N, N, N, L), _hypergeometric)
HYPGEOMDIST = made("HYPGEOMDIST", (N, N, N, N), _hypergeometric)
