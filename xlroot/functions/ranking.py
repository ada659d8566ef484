"""Order in a sample: medians, modes, ranks, percentiles, frequencies.

Excel's documentation of each; OpenFormula section 6.18. INC forms count the ends of the sample
as 0 and 1; EXC forms leave room beyond them (R. J. Hyndman and Y. Fan, Am. Stat. 50 (1996)
361-365, types 7 and 6). Where programs choose differently, the function refuses.
"""

from __future__ import annotations

import math
from bisect import bisect_left, bisect_right
from collections import Counter
from fractions import Fraction

from xlroot.errors import Unsupported
from xlroot.functions._settled import settled
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.totals import numbers
from xlroot.values import Fault, Grid, Operand


def ordered(operands: tuple[Operand, ...]) -> list[float] | Fault:
    """The numbers from the smallest up."""
    sample = numbers(operands)
    return sample if isinstance(sample, Fault) else sorted(sample)


@worksheet("MEDIAN", Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def median(*operands: Operand) -> float | Fault:
    """The middle number, or the mean of the two in the middle."""
    sample = ordered(operands)
    if isinstance(sample, Fault):
        return sample
    if not sample:
        return Fault.NUM
    half = len(sample) // 2
    if len(sample) % 2:
        return sample[half]
    return (sample[half - 1] + sample[half]) / 2.0


@worksheet(("MODE.SNGL", "MODE"), Takes.RAW, repeats=1, gives=Gives.NUMBER)
@settled
def mode(*operands: Operand) -> float | Fault:
    """The most frequent number; #N/A where none occurs twice."""
    sample = numbers(operands)
    if isinstance(sample, Fault):
        return sample
    counts = Counter(sample)
    most = max(counts.values(), default=0)
    if most < 2:
        return Fault.NA
    # Excel takes the first in the data, OpenFormula the smallest.
    found = [x for x, count in counts.items() if count == most]
    if found[0] != min(found):
        raise Unsupported(
            f"{len(found)} numbers are equally frequent; spreadsheet programs choose differently"
        )
    return found[0]


def _nth(rank: float, size: int) -> int | Fault:
    if not 1.0 <= rank <= size:
        return Fault.NUM
    if rank != math.floor(rank):
        raise Unsupported(
            f"the rank {rank!r} is no whole number; spreadsheet programs round it differently"
        )
    return int(rank)


@worksheet("LARGE", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def large(operand: Operand, rank: float) -> float | Fault:
    """The number with a rank counted from the largest."""
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    place = _nth(rank, len(sample))
    return place if isinstance(place, Fault) else sample[-place]


@worksheet("SMALL", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def small(operand: Operand, rank: float) -> float | Fault:
    """The number with a rank counted from the smallest."""
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    place = _nth(rank, len(sample))
    return place if isinstance(place, Fault) else sample[place - 1]


def _rank(x: float, operand: Operand, order: float) -> tuple[int, int] | Fault:
    """How many numbers come before x in the order, and how many equal it."""
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    low, high = bisect_left(sample, x), bisect_right(sample, x)
    if low == high:
        return Fault.NA
    return (low if order else len(sample) - high), high - low


@worksheet(
    ("RANK.EQ", "RANK"), Takes.NUMBER, Takes.RAW, Takes.NUMBER, optional=1, gives=Gives.NUMBER
)
@settled
def rank_eq(x: float, operand: Operand, order: float = 0.0) -> float | Fault:
    """The rank of x among the numbers; equal ones share the best rank."""
    found = _rank(x, operand, order)
    return found if isinstance(found, Fault) else found[0] + 1.0


@worksheet("RANK.AVG", Takes.NUMBER, Takes.RAW, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
@settled
def rank_avg(x: float, operand: Operand, order: float = 0.0) -> float | Fault:
    """The rank of x among the numbers; equal ones share the mean rank."""
    found = _rank(x, operand, order)
    return found if isinstance(found, Fault) else found[0] + (found[1] + 1.0) / 2.0


def _between(sample: list[float], position: float) -> float:
    """The value at a position from 0, linear between neighbours."""
    below = min(int(position), len(sample) - 1)
    rest = position - below
    if rest <= 0.0:
        return sample[below]
    return sample[below] + rest * (sample[below + 1] - sample[below])


def _inclusive(operand: Operand, k: float) -> float | Fault:
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    if not sample or not 0.0 <= k <= 1.0:
        return Fault.NUM
    return _between(sample, min(k * (len(sample) - 1), len(sample) - 1.0))


def _exclusive(operand: Operand, k: float) -> float | Fault:
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    size = len(sample)
    if not sample or not 0.0 < k < 1.0:
        return Fault.NUM
    if k < 1.0 / (size + 1) or k > size / (size + 1):
        return Fault.NUM
    return _between(sample, min(max(k * (size + 1) - 1.0, 0.0), size - 1.0))


@worksheet(("PERCENTILE.INC", "PERCENTILE"), Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def percentile_inc(operand: Operand, k: float) -> float | Fault:
    """The value below which a part k of the sample lies, ends included."""
    return _inclusive(operand, k)


@worksheet("PERCENTILE.EXC", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def percentile_exc(operand: Operand, k: float) -> float | Fault:
    """The value below which a part k of the sample lies, ends excluded."""
    return _exclusive(operand, k)


@worksheet(("QUARTILE.INC", "QUARTILE"), Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def quartile_inc(operand: Operand, quarter: float) -> float | Fault:
    """The percentile at 0 to 4 quarters, ends included."""
    return _inclusive(operand, math.floor(quarter) / 4.0)


@worksheet("QUARTILE.EXC", Takes.RAW, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def quartile_exc(operand: Operand, quarter: float) -> float | Fault:
    """The percentile at 1 to 3 quarters, ends excluded."""
    return _exclusive(operand, math.floor(quarter) / 4.0)


def _place(sample: list[float], x: float) -> Fraction | None:
    """The position of x from 0, between neighbours by exact proportion; None outside."""
    low = bisect_left(sample, x)
    if low < len(sample) and sample[low] == x:
        return Fraction(low)
    if low in (0, len(sample)):
        return None
    before, after = Fraction(repr(sample[low - 1])), Fraction(repr(sample[low]))
    return low - 1 + (Fraction(repr(x)) - before) / (after - before)


def _cut(part: Fraction, digits: float) -> float:
    """The part with its decimals cut off, not rounded."""
    scale = 10 ** min(math.trunc(digits), 17)
    return float(Fraction(math.floor(part * scale), scale))


@worksheet(
    ("PERCENTRANK.INC", "PERCENTRANK"),
    Takes.RAW,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=1,
    gives=Gives.NUMBER,
)
@settled
def percentrank_inc(operand: Operand, x: float, digits: float = 3.0) -> float | Fault:
    """The part of the sample below x, ends included, cut to some decimals."""
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    if not sample or digits < 1.0:
        return Fault.NUM
    place = _place(sample, x)
    if place is None:
        return Fault.NA
    return 1.0 if len(sample) == 1 else _cut(place / (len(sample) - 1), digits)


@worksheet(
    "PERCENTRANK.EXC",
    Takes.RAW,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=1,
    gives=Gives.NUMBER,
)
@settled
def percentrank_exc(operand: Operand, x: float, digits: float = 3.0) -> float | Fault:
    """The part of the sample below x, ends excluded, cut to some decimals."""
    sample = ordered((operand,))
    if isinstance(sample, Fault):
        return sample
    if not sample or digits < 1.0:
        return Fault.NUM
    place = _place(sample, x)
    return Fault.NA if place is None else _cut((place + 1) / (len(sample) + 1), digits)


@worksheet("FREQUENCY", Takes.RAW, Takes.RAW)
def frequency(data: Operand, bins: Operand) -> Grid | Fault:
    """How many numbers lie up to each bin's limit and above the one before, and beyond the last.

    A column in the order in which the limits stand; a limit that stands twice counts once.
    """
    sample, limits = ordered((data,)), numbers((bins,))
    if isinstance(sample, Fault):
        return sample
    if isinstance(limits, Fault):
        return limits
    counts: dict[float, float] = {}
    below = 0
    for limit in sorted(set(limits)):
        upto = bisect_right(sample, limit)
        counts[limit] = float(upto - below)
        below = upto
    column = [counts.pop(limit, 0.0) for limit in limits]
    return Grid(tuple((count,) for count in (*column, float(len(sample) - below))))
