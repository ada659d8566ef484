"""Confidence intervals and tests of significance.

Excel's documentation of each; OpenFormula section 6.18; B. L. Welch, Biometrika 34 (1947) 28-35
for samples of unlike variance, whose degrees of freedom stay a fraction.
"""

from __future__ import annotations

import math

from xlroot.errors import Unsupported
from xlroot.functions._settled import settled
from xlroot.functions._tails import gamma_above
from xlroot.functions.association import paired
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.normal import normal_below, normal_point
from xlroot.functions.proportions import f_above, f_below
from xlroot.functions.statistics import mean_of, square_sum, variance
from xlroot.functions.student import student_above, student_point
from xlroot.functions.totals import numbers
from xlroot.values import Fault, Grid, Operand


def _interval(alpha: float, deviation: float, size: float) -> int | Fault:
    n = math.trunc(size)
    return n if 0.0 < alpha < 1.0 and deviation > 0.0 and n >= 1 else Fault.NUM


@worksheet(
    ("CONFIDENCE.NORM", "CONFIDENCE"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    gives=Gives.NUMBER,
)
@settled
def confidence_norm(alpha: float, deviation: float, size: float) -> float | Fault:
    """Half the width of a mean's confidence interval, the deviation known."""
    n = _interval(alpha, deviation, size)
    if isinstance(n, Fault):
        return n
    return -normal_point(0.5 * alpha) * deviation / math.sqrt(n)


@worksheet("CONFIDENCE.T", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def confidence_t(alpha: float, deviation: float, size: float) -> float | Fault:
    """Half the width of a mean's confidence interval, the deviation from the sample."""
    n = _interval(alpha, deviation, size)
    if isinstance(n, Fault):
        return n
    if n == 1:
        return Fault.DIV0
    return student_point(alpha, n - 1.0) * deviation / math.sqrt(n)


@worksheet(
    ("Z.TEST", "ZTEST"), Takes.RAW, Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER
)
@settled
def z_test(operand: Operand, mean: float, deviation: float | None = None) -> float | Fault:
    """The probability of a sample mean above the one found, were the true mean as given."""
    sample = numbers((operand,))
    if isinstance(sample, Fault):
        return sample
    if not sample:
        return Fault.NA
    if deviation is None:
        squared = variance(sample, 1)
        if isinstance(squared, Fault) or squared <= 0.0:
            return Fault.DIV0
        deviation = math.sqrt(squared)
    if deviation <= 0.0:
        return Fault.NUM
    return normal_below((mean - mean_of(sample)) * math.sqrt(len(sample)) / deviation)


def _two(a: Operand, b: Operand) -> tuple[list[float], list[float]] | Fault:
    first, second = numbers((a,)), numbers((b,))
    if isinstance(first, Fault):
        return first
    return second if isinstance(second, Fault) else (first, second)


Statistic = tuple[float, float]
"""Student's t and its degrees of freedom."""


def _of_differences(xs: list[float], ys: list[float]) -> Statistic | Fault:
    n = len(xs)
    if n < 2:
        return Fault.DIV0
    differences = [x - y for x, y in zip(xs, ys, strict=True)]
    squares = square_sum(differences)
    if squares <= 0.0:
        return Fault.DIV0
    return mean_of(differences) / math.sqrt(squares / (n - 1) / n), n - 1.0


def _of_like_variance(xs: list[float], ys: list[float]) -> Statistic | Fault:
    m, n = len(xs), len(ys)
    if min(m, n) < 2:
        return Fault.DIV0
    pooled = (square_sum(xs) + square_sum(ys)) / (m + n - 2)
    if pooled <= 0.0:
        return Fault.DIV0
    return (mean_of(xs) - mean_of(ys)) / math.sqrt(pooled * (1.0 / m + 1.0 / n)), m + n - 2.0


def _of_unlike_variance(xs: list[float], ys: list[float]) -> Statistic | Fault:
    m, n = len(xs), len(ys)
    if min(m, n) < 2:
        return Fault.DIV0
    a, b = square_sum(xs) / (m - 1) / m, square_sum(ys) / (n - 1) / n
    if a + b <= 0.0:
        return Fault.DIV0
    freedom = (a + b) * (a + b) / (a * a / (m - 1) + b * b / (n - 1))
    return (mean_of(xs) - mean_of(ys)) / math.sqrt(a + b), freedom


@worksheet(
    ("T.TEST", "TTEST"), Takes.RAW, Takes.RAW, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER
)
@settled
def t_test(a: Operand, b: Operand, tails: float, kind: float) -> float | Fault:
    """The probability of means as far apart by chance: pairs (1), like (2), unlike variance (3)."""
    count, which = math.trunc(tails), math.trunc(kind)
    if count not in (1, 2) or which not in (1, 2, 3):
        return Fault.NUM
    found = paired(a, b) if which == 1 else _two(a, b)
    if isinstance(found, Fault):
        return found
    of = (_of_differences, _of_like_variance, _of_unlike_variance)[which - 1]
    statistic = of(*found)
    if isinstance(statistic, Fault):
        return statistic
    return count * student_above(*statistic)


@worksheet(("F.TEST", "FTEST"), Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
@settled
def f_test(a: Operand, b: Operand) -> float | Fault:
    """The probability, on both sides, of variances as far apart by chance."""
    found = _two(a, b)
    if isinstance(found, Fault):
        return found
    first, second = variance(found[0], 1), variance(found[1], 1)
    if isinstance(first, Fault) or isinstance(second, Fault) or first * second <= 0.0:
        return Fault.DIV0
    ratio, m, n = first / second, len(found[0]) - 1.0, len(found[1]) - 1.0
    return min(2.0 * min(f_below(ratio, m, n), f_above(ratio, m, n)), 1.0)


@worksheet(("CHISQ.TEST", "CHITEST"), Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
@settled
def chisq_test(actual: Operand, expected: Operand) -> float | Fault:
    """The probability of counts as far from the expected ones by chance."""
    a = actual if isinstance(actual, Grid) else Grid(((actual,),))
    e = expected if isinstance(expected, Grid) else Grid(((expected,),))
    if (a.height, a.width) != (e.height, e.width) or a.height * a.width < 2:
        return Fault.NA
    terms: list[float] = []
    for observed, mean in zip(a.flat(), e.flat(), strict=True):
        for value in (observed, mean):
            if isinstance(value, Fault):
                return value
        if type(observed) is not float or type(mean) is not float:
            raise Unsupported("a cell of the two ranges holds no number")
        if mean < 0.0:
            return Fault.NUM
        if mean == 0.0:
            return Fault.DIV0
        terms.append((observed - mean) * (observed - mean) / mean)
    if a.height > 1 and a.width > 1:
        freedom = (a.height - 1.0) * (a.width - 1.0)
    else:
        freedom = a.height * a.width - 1.0
    return gamma_above(0.5 * freedom, 0.5 * math.fsum(terms))
