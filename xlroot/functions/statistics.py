"""Means, spread and shape of a sample.

Excel's documentation of each function; OpenFormula (OASIS ODF 1.3 part 4), section 6.18. Which
values count is told in `xlroot.functions.totals`. Sums are rounded once (Shewchuk's method, the
standard library's fsum) and deviations are taken from the mean, so that large values with a small
spread keep their digits; hosts may carry fewer.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from fractions import Fraction

from xlroot.functions._settled import settled
from xlroot.functions.entry import Entry, Gives, Takes, worksheet
from xlroot.functions.totals import all_numbers, numbers
from xlroot.values import Fault, Operand

Reading = Callable[[tuple[Operand, ...]], "list[float] | Fault"]


def mean_of(sample: Sequence[float]) -> float:
    """The mean of at least one number."""
    return math.fsum(sample) / len(sample)


def deviations(sample: Sequence[float]) -> list[float]:
    """Differences from the mean; exactly 0 where all numbers are equal."""
    if min(sample) == max(sample):
        return [0.0] * len(sample)
    mean = mean_of(sample)
    return [x - mean for x in sample]


def square_sum(sample: Sequence[float]) -> float:
    """The sum of squared deviations, corrected for the rounding of the mean."""
    found = deviations(sample)
    residue = math.fsum(found)
    return math.fsum(d * d for d in found) - residue * residue / len(found)


def variance(sample: Sequence[float], lost: int) -> float | Fault:
    """Squared deviations over the count less `lost`; #DIV/0! where that is not positive."""
    rest = len(sample) - lost
    return square_sum(sample) / rest if rest > 0 else Fault.DIV0


def _spread(name: str | tuple[str, ...], reading: Reading, lost: int, meaning: str) -> Entry:
    def rule(*operands: Operand) -> float | Fault:
        sample = reading(operands)
        return sample if isinstance(sample, Fault) else variance(sample, lost)

    rule.__doc__ = meaning
    return worksheet(name, Takes.RAW, repeats=1, gives=Gives.NUMBER)(settled(rule))


def _root_spread(name: str | tuple[str, ...], reading: Reading, lost: int, meaning: str) -> Entry:
    def rule(*operands: Operand) -> float | Fault:
        sample = reading(operands)
        if isinstance(sample, Fault):
            return sample
        squared = variance(sample, lost)
        return squared if isinstance(squared, Fault) else math.sqrt(squared)

    rule.__doc__ = meaning
    return worksheet(name, Takes.RAW, repeats=1, gives=Gives.NUMBER)(settled(rule))


VAR = _spread(("VAR.S", "VAR"), numbers, 1, "The variance, from a sample.")
VARP = _spread(("VAR.P", "VARP"), numbers, 0, "The variance of a whole population.")
VARA = _spread("VARA", all_numbers, 1, "VAR with texts as 0 and logicals as 0 and 1.")
VARPA = _spread("VARPA", all_numbers, 0, "VARP with texts as 0 and logicals as 0 and 1.")
STDEV = _root_spread(("STDEV.S", "STDEV"), numbers, 1, "The standard deviation, from a sample.")
STDEVP = _root_spread(("STDEV.P", "STDEVP"), numbers, 0, "The deviation of a whole population.")
STDEVA = _root_spread("STDEVA", all_numbers, 1, "STDEV with texts as 0, logicals as 0 and 1.")
STDEVPA = _root_spread("STDEVPA", all_numbers, 0, "STDEVP with texts as 0, logicals as 0 and 1.")


@worksheet("DEVSQ", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def devsq(*operands: Operand) -> float | Fault:
    """The sum of squared deviations from the mean."""
    sample = numbers(operands)
    if isinstance(sample, Fault):
        return sample
    return square_sum(sample) if sample else Fault.NUM


@worksheet("AVEDEV", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def avedev(*operands: Operand) -> float | Fault:
    """The mean distance from the mean."""
    sample = numbers(operands)
    if isinstance(sample, Fault):
        return sample
    return mean_of([abs(d) for d in deviations(sample)]) if sample else Fault.NUM


@worksheet("GEOMEAN", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def geomean(*operands: Operand) -> float | Fault:
    """The nth root of the product of n positive numbers."""
    sample = numbers(operands)
    if isinstance(sample, Fault):
        return sample
    if not sample or min(sample) <= 0.0:
        return Fault.NUM
    # Fractions and exponents of two apart: neither overflows nor loses digits in logarithms.
    product, twos = 1.0, 0
    for x in sample:
        fraction, exponent = math.frexp(x)
        product, shift = math.frexp(product * fraction)
        twos += exponent + shift
    whole, rest = divmod(twos, len(sample))
    root = math.pow(product, 1.0 / len(sample)) * math.pow(2.0, rest / len(sample))
    return math.ldexp(root, whole)


@worksheet("HARMEAN", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def harmean(*operands: Operand) -> float | Fault:
    """The reciprocal of the mean reciprocal of positive numbers."""
    sample = numbers(operands)
    if isinstance(sample, Fault):
        return sample
    if not sample or min(sample) <= 0.0:
        return Fault.NUM
    return len(sample) / math.fsum(1.0 / x for x in sample)


@worksheet("TRIMMEAN", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def trimmean(operand: Operand, part: float) -> float | Fault:
    """The mean without a part of the numbers, half of them at either end.

    How many are left out is cut to an even number, with the part as its decimals are typed.
    """
    sample = numbers((operand,))
    if isinstance(sample, Fault):
        return sample
    if not sample or not 0.0 <= part < 1.0:
        return Fault.NUM
    each_side = math.floor(Fraction(repr(part)) * len(sample) / 2)
    return mean_of(sorted(sample)[each_side : len(sample) - each_side])


def _moments(
    operands: tuple[Operand, ...], least: int, lost: int
) -> tuple[list[float], int] | Fault:
    """Deviations in units of the standard deviation, and their count."""
    sample = numbers(operands)
    if isinstance(sample, Fault):
        return sample
    if len(sample) < least:
        return Fault.DIV0
    squared = variance(sample, lost)
    if isinstance(squared, Fault) or squared <= 0.0:
        return Fault.DIV0
    scale = math.sqrt(squared)
    return [d / scale for d in deviations(sample)], len(sample)


@worksheet("SKEW", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def skew(*operands: Operand) -> float | Fault:
    """The skewness, from a sample of at least three."""
    found = _moments(operands, 3, 1)
    if isinstance(found, Fault):
        return found
    scaled, n = found
    return math.fsum(d * d * d for d in scaled) * n / ((n - 1) * (n - 2))


@worksheet(("SKEW.P", "SKEWP"), Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def skew_p(*operands: Operand) -> float | Fault:
    """The skewness of a whole population of at least three; OpenFormula writes SKEWP."""
    found = _moments(operands, 3, 0)
    if isinstance(found, Fault):
        return found
    scaled, n = found
    return math.fsum(d * d * d for d in scaled) / n


@worksheet("KURT", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def kurt(*operands: Operand) -> float | Fault:
    """The kurtosis beyond a normal distribution's, from a sample of at least four."""
    found = _moments(operands, 4, 1)
    if isinstance(found, Fault):
        return found
    scaled, n = found
    fourth = math.fsum(d * d * d * d for d in scaled)
    pairs = (n - 2) * (n - 3)
    return n * (n + 1) / ((n - 1) * pairs) * fourth - 3.0 * (n - 1) * (n - 1) / pairs


@worksheet("STANDARDIZE", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def standardize(x: float, mean: float, deviation: float) -> float | Fault:
    """The distance from the mean in standard deviations."""
    return (x - mean) / deviation if deviation > 0.0 else Fault.NUM
