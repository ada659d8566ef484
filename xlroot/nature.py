"""What a change of sign is: a root, a pole, or a jump.

Opposite signs alone do not make a root. Towards a root of a continuous residual its magnitude
shrinks; towards a pole it grows; across a jump it stays. Where the samples of the search already
show it shrinking, no more is spent; otherwise the interval is halved down to neighbouring doubles
and the last halvings decide. The criterion is our own; it can refuse a continuous residual that is
steeper than doubles resolve, and says jump then.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from enum import Enum
from typing import NamedTuple

from xlroot.stopping import Tolerance
from xlroot.values import Fault

STEEPER = 2.0
"""A slope across the interval that exceeds its neighbours' by more asks for a closer look."""

COARSE = 1e-9
"""Tolerances wider than this part of the unknown's size ask for a closer look."""

HALVINGS = 80
"""The most halvings that a closer look takes."""

LAST = 4
"""The halvings that decide: the width shrinks by 2^4 over them."""

SHRINKS = 0.8
GROWS = 1.5
"""Factors of the magnitude over the last halvings: x^(1/9) shrinks by 0.73, a simple root by
0.06; a pole grows by 16; a jump stays."""

ROUNDING = 1e-12
"""A residual below this part of the largest sample is rounding, not a jump."""


class Nature(Enum):
    """What lies between opposite signs."""

    ROOT = "root"
    POLE = "pole"
    JUMP = "jump"
    FAULT = "fault"


class Crossing(NamedTuple):
    """An interval with opposite signs at its ends (or one point with an exact zero)."""

    low: float
    high: float
    f_low: float
    f_high: float


def examine(
    f: Callable[[float], float | Fault],
    crossing: Crossing,
    ends: tuple[tuple[float, float], tuple[float, float]],
    samples: Sequence[tuple[float, float]],
    tolerance: Tolerance,
) -> tuple[Nature, int]:
    """What the sign change is, and how many evaluations it took to tell.

    `ends` are the ends of the whole bracket with their residuals, `samples` what was tried
    between them.
    """
    low, high = crossing.low, crossing.high
    if low == high:
        return Nature.ROOT, 0
    scale = max(abs(low), abs(high))
    if tolerance.absolute + tolerance.relative * scale <= COARSE * scale:
        left, right = ends
        for sample in samples:
            x = sample[0]
            if left[0] < x < low:
                left = sample
            elif high < x < right[0]:
                right = sample
        if _shrinks(crossing, left, right):
            return Nature.ROOT, 0
    known = [abs(y) for _, y in (*ends, *samples) if math.isfinite(y)]
    return _closer(f, crossing, max(known))


def _shrinks(crossing: Crossing, left: tuple[float, float], right: tuple[float, float]) -> bool:
    """Whether the nearest samples on both sides show the residual falling steadily to zero."""
    low, high, f_low, f_high = crossing
    slope = (abs(f_low) + abs(f_high)) / (high - low)
    steepest = 0.0
    if left[0] < low:
        fall = abs(left[1]) - abs(f_low)
        if fall <= 0.0:
            return False
        steepest = fall / (low - left[0])
    if right[0] > high:
        fall = abs(right[1]) - abs(f_high)
        if fall <= 0.0:
            return False
        steepest = max(steepest, fall / (right[0] - high))
    return slope <= STEEPER * steepest < math.inf


def _closer(
    f: Callable[[float], float | Fault], crossing: Crossing, largest: float
) -> tuple[Nature, int]:
    low, high, f_low, f_high = crossing
    low_is_negative = f_low < 0.0
    sizes = [max(abs(f_low), abs(f_high))]
    for count in range(HALVINGS):
        x = low + (high - low) / 2.0
        if not low < x < high:
            break
        y = f(x)
        if isinstance(y, Fault):
            return Nature.FAULT, count + 1
        if y == 0.0:
            return Nature.ROOT, count + 1
        if (y < 0.0) == low_is_negative:
            low, f_low = x, y
        else:
            high, f_high = x, y
        sizes.append(max(abs(f_low), abs(f_high)))
    taken = len(sizes) - 1
    if sizes[-1] <= ROUNDING * largest:
        return Nature.ROOT, taken
    past = sizes[-min(LAST, taken) - 1]
    factor = sizes[-1] / past if past and math.isfinite(past) else math.inf
    if factor <= SHRINKS:
        return Nature.ROOT, taken
    return (Nature.POLE if factor >= GROWS else Nature.JUMP), taken
