"""Means, spreads, ranks and percentiles. OpenFormula (OASIS ODF 1.3 part 4), section 6.18.

In a range texts, logicals and blanks do not count (see `totals`). Variances are computed in two
passes, mean first.
"""

from __future__ import annotations

import math
from collections.abc import Callable

from xlroot.functions.entry import Entry, Gives, Takes, by_form, worksheet
from xlroot.functions.totals import added, all_numbers, finite, numbers
from xlroot.values import Fault, Operand

FISHER = by_form("FISHER", "atanh({0})")
FISHERINV = by_form("FISHERINV", "tanh({0})")


def mean(values: list[float]) -> float:
    """The mean."""
    return added(values) / len(values)


def squares(values: list[float]) -> float:
    """The sum of squared deviations from the mean."""
    middle = mean(values)
    return added((value - middle) ** 2 for value in values)


def _spread(
    names: str | tuple[str, ...],
    least: int,
    measure: Callable[[list[float]], float],
    read: Callable[[tuple[Operand, ...]], list[float] | Fault] = numbers,
) -> Entry:
    """A measure over all numbers; #DIV/0! for fewer than `least`."""

    @worksheet(names, Takes.RAW, repeats=1, gives=Gives.NUMBER)
    def rule(*operands: Operand) -> float | Fault:
        found = read(operands)
        if isinstance(found, Fault):
            return found
        if len(found) < least:
            return Fault.DIV0
        try:
            return finite(measure(found))
        except ZeroDivisionError:
            return Fault.DIV0
        except (OverflowError, ValueError):
            return Fault.NUM

    return rule


def _sample(values: list[float]) -> float:
    return squares(values) / (len(values) - 1)


def _population(values: list[float]) -> float:
    return squares(values) / len(values)


def _skew(values: list[float]) -> float:
    n, middle, spread = len(values), mean(values), math.sqrt(_sample(values))
    cubes = added(((value - middle) / spread) ** 3 for value in values)
    return cubes * n / ((n - 1) * (n - 2))


def _skew_population(values: list[float]) -> float:
    middle, spread = mean(values), math.sqrt(_population(values))
    return added(((value - middle) / spread) ** 3 for value in values) / len(values)


def _kurtosis(values: list[float]) -> float:
    n, middle, spread = len(values), mean(values), math.sqrt(_sample(values))
    fourths = added(((value - middle) / spread) ** 4 for value in values)
    first = fourths * n * (n + 1) / ((n - 1) * (n - 2) * (n - 3))
    return first - 3 * (n - 1) ** 2 / ((n - 2) * (n - 3))


VAR = _spread(("VAR", "VAR.S"), 2, _sample)
VARP = _spread(("VARP", "VAR.P"), 1, _population)
VARA = _spread("VARA", 2, _sample, all_numbers)
VARPA = _spread("VARPA", 1, _population, all_numbers)
STDEV = _spread(("STDEV", "STDEV.S"), 2, lambda values: math.sqrt(_sample(values)))
STDEVP = _spread(("STDEVP", "STDEV.P"), 1, lambda values: math.sqrt(_population(values)))
STDEVA = _spread("STDEVA", 2, lambda values: math.sqrt(_sample(values)), all_numbers)
STDEVPA = _spread("STDEVPA", 1, lambda values: math.sqrt(_population(values)), all_numbers)
SKEW = _spread("SKEW", 3, _skew)
SKEWP = _spread(("SKEW.P", "SKEWP"), 3, _skew_population)
KURT = _spread("KURT", 4, _kurtosis)


def _over(names: str | tuple[str, ...], measure: Callable[[list[float]], float | Fault]) -> Entry:
    """A measure over all numbers; #NUM! for none."""

    @worksheet(names, Takes.RAW, repeats=1, gives=Gives.NUMBER)
    def rule(*operands: Operand) -> float | Fault:
        found = numbers(operands)
        if isinstance(found, Fault):
            return found
        return measure(found) if found else Fault.NUM

    return rule


def median_of(values: list[float]) -> float:
    """The middle of the sorted values."""
    ordered, half = sorted(values), len(values) // 2
    return ordered[half] if len(values) % 2 else (ordered[half - 1] + ordered[half]) / 2.0


def _mode(values: list[float]) -> float | Fault:
    counts = {value: values.count(value) for value in dict.fromkeys(values)}
    best = max(counts, key=lambda value: counts[value])
    return best if counts[best] > 1 else Fault.NA


def _geometric(values: list[float]) -> float | Fault:
    if min(values) <= 0.0:
        return Fault.NUM
    return math.exp(added(map(math.log, values)) / len(values))


def _harmonic(values: list[float]) -> float | Fault:
    if min(values) <= 0.0:
        return Fault.NUM
    return len(values) / added(1.0 / value for value in values)


MEDIAN = _over("MEDIAN", median_of)
MODE = _over(("MODE", "MODE.SNGL"), _mode)
GEOMEAN = _over("GEOMEAN", _geometric)
HARMEAN = _over("HARMEAN", _harmonic)
DEVSQ = _over("DEVSQ", squares)
AVEDEV = _over("AVEDEV", lambda values: mean([abs(each - mean(values)) for each in values]))


@worksheet("LARGE", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
def large(operand: Operand, rank: float) -> float | Fault:
    """The k-th largest number."""
    return _ordered(operand, rank, descending=True)


@worksheet("SMALL", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
def small(operand: Operand, rank: float) -> float | Fault:
    """The k-th smallest number."""
    return _ordered(operand, rank, descending=False)


def _ordered(operand: Operand, rank: float, *, descending: bool) -> float | Fault:
    found = numbers((operand,))
    if isinstance(found, Fault):
        return found
    place = math.ceil(rank) if descending else math.floor(rank)
    if not 1 <= place <= len(found):
        return Fault.NUM
    return sorted(found, reverse=descending)[place - 1]


def _rank(value: float, operand: Operand, order: float, *, share: float) -> float | Fault:
    found = numbers((operand,))
    if isinstance(found, Fault):
        return found
    if value not in found:
        return Fault.NA
    before = sum((each < value) if order else (each > value) for each in found)
    return before + 1.0 + share * (found.count(value) - 1)


@worksheet(
    ("RANK", "RANK.EQ"), Takes.NUMBER, Takes.RAW, Takes.NUMBER, optional=1, gives=Gives.NUMBER
)
def rank(value: float, operand: Operand, order: float = 0.0) -> float | Fault:
    """The rank among numbers, the largest first unless told otherwise; equals share the best."""
    return _rank(value, operand, order, share=0.0)


@worksheet("RANK.AVG", Takes.NUMBER, Takes.RAW, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def rank_avg(value: float, operand: Operand, order: float = 0.0) -> float | Fault:
    """The rank among numbers; equals share the mean."""
    return _rank(value, operand, order, share=0.5)


def _at(ordered: list[float], place: float) -> float:
    """The value at a place counted from 0, interpolated."""
    low = math.floor(place)
    part = place - low
    return ordered[low] + (part * (ordered[low + 1] - ordered[low]) if part else 0.0)


def percentile_of(values: list[float], share: float, *, inside: bool) -> float | Fault:
    """The value below which a share lies; `inside` excludes both ends."""
    n = len(values)
    place = share * (n + 1) - 1.0 if inside else share * (n - 1)
    if not n or not 0.0 <= place <= n - 1 or not 0.0 <= share <= 1.0:
        return Fault.NUM
    return _at(sorted(values), place)


def _percentile(names: str | tuple[str, ...], parts: float, *, inside: bool) -> Entry:
    @worksheet(names, Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
    def rule(operand: Operand, share: float) -> float | Fault:
        found = numbers((operand,))
        if isinstance(found, Fault):
            return found
        whole = share if parts == 1.0 else math.trunc(share) / parts
        return percentile_of(found, whole, inside=inside)

    return rule


PERCENTILE = _percentile(("PERCENTILE", "PERCENTILE.INC"), 1.0, inside=False)
PERCENTILE_EXC = _percentile("PERCENTILE.EXC", 1.0, inside=True)
QUARTILE = _percentile(("QUARTILE", "QUARTILE.INC"), 4.0, inside=False)
QUARTILE_EXC = _percentile("QUARTILE.EXC", 4.0, inside=True)


def _percent_rank(names: str | tuple[str, ...], *, inside: bool) -> Entry:
    @worksheet(names, Takes.RAW, Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
    def rule(operand: Operand, value: float, digits: float = 3.0) -> float | Fault:
        found = numbers((operand,))
        if isinstance(found, Fault):
            return found
        if not found or digits < 1.0:
            return Fault.NUM
        ordered = sorted(found)
        if not ordered[0] <= value <= ordered[-1]:
            return Fault.NA
        below = sum(each < value for each in ordered)
        place = float(below)
        if value not in ordered:
            low, high = ordered[below - 1], ordered[below]
            place = below - 1 + (value - low) / (high - low)
        n = len(ordered)
        if n == 1:
            return 1.0
        share = (place + 1.0) / (n + 1) if inside else place / (n - 1)
        scale = 10.0 ** int(digits)
        return math.floor(share * scale * (1.0 + 1e-15)) / scale

    return rule


PERCENTRANK = _percent_rank(("PERCENTRANK", "PERCENTRANK.INC"), inside=False)
PERCENTRANK_EXC = _percent_rank("PERCENTRANK.EXC", inside=True)


@worksheet("TRIMMEAN", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
def trimmean(operand: Operand, share: float) -> float | Fault:
    """The mean without a share of the values, half of it at each end."""
    found = numbers((operand,))
    if isinstance(found, Fault):
        return found
    if not found or not 0.0 <= share < 1.0:
        return Fault.NUM
    drop = int(len(found) * share / 2.0)
    return mean(sorted(found)[drop : len(found) - drop])


@worksheet("STANDARDIZE", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def standardize(x: float, middle: float, spread: float) -> float | Fault:
    """(x − mean)/standard deviation."""
    return finite((x - middle) / spread) if spread > 0.0 else Fault.NUM
