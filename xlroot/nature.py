"""What a change of sign is: a root, a pole, or a jump.

Opposite signs alone do not make a root. Towards a root of a continuous residual its magnitude
shrinks; towards a pole it grows; across a jump it stays. Where the samples of the search already
show it shrinking, no more is spent. Otherwise the interval is narrowed: by chords, which settle a
smooth residual in a few evaluations, then by halving down to neighbouring doubles, where the last
halvings decide. The criterion is our own; it can refuse a continuous residual that is steeper than
doubles resolve, and says jump then.
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

COARSE = 1e-8
"""An interval wider than this part of the unknown's size asks for a closer look: a jump could hide
in it."""

CHORDS = 4
"""The most chords that a closer look tries before it halves."""

HALVINGS = 80
"""The most halvings that a closer look takes."""

LAST = 4
"""The halvings that decide: the width shrinks by 2^4 over them."""

SHRINKS = 0.8
GROWS = 1.5
"""Factors of the magnitude over the last halvings: x^(1/9) shrinks by 0.79 at most, a simple root
by 0.13; a pole grows by 16; a jump stays."""

STEP = 1e-6
"""A step below this part of the residual nearby is no jump, if the tolerance spans it."""

ROUNDING = 1e-12
"""A step below this part of the largest sample can be rounding: it is neither called a root nor
a jump."""

SPREAD = 1e-3
"""Rounding that hides the sign over more than this part of the bracket is not put down to
rounding."""


class Nature(Enum):
    """What lies between opposite signs."""

    ROOT = "root"
    FLAT = "flat"
    """The residual is exactly zero there and beside it: a stretch of roots."""
    ROUNDING = "rounding"
    """The residual is too small there for its sign to be trusted: an estimate of a root."""
    POLE = "pole"
    JUMP = "jump"
    FAULT = "fault"


class Crossing(NamedTuple):
    """An interval with opposite signs at its ends (or one point with an exact zero)."""

    low: float
    high: float
    f_low: float
    f_high: float

    @property
    def size(self) -> float:
        """The larger magnitude of the residual at the ends."""
        return max(abs(self.f_low), abs(self.f_high))

    def cut(self, x: float, y: float) -> Crossing:
        """The part with opposite signs after a sample inside."""
        if (y < 0.0) == (self.f_low < 0.0):
            return Crossing(x, self.high, y, self.f_high)
        return Crossing(self.low, x, self.f_low, y)


Evaluate = Callable[[float], "float | Fault"]
Point = tuple[float, float]
Bracket = tuple[float, float]


def evident(crossing: Crossing, left: Point, right: Point) -> bool:
    """Whether an interval is a root's without another evaluation.

    It is narrow beside the unknown's size, and the nearest samples on both sides, `left` and
    `right` (the ends themselves where there are none), show the residual falling steadily to it.
    """
    low, high = crossing.low, crossing.high
    width = high - low
    if width > COARSE * high and width > COARSE * -low:
        return False
    return _falls(crossing, left, right)


def _falls(crossing: Crossing, left: Point, right: Point) -> bool:
    """Whether the residual falls to an interval from both sides, at least half as steeply as it
    crosses it."""
    low, high, f_low, f_high = crossing
    low_size, high_size = abs(f_low), abs(f_high)
    steepest = 0.0
    x, y = left
    if x < low:
        fall = abs(y) - low_size
        if fall <= 0.0:
            return False
        steepest = fall / (low - x)
    x, y = right
    if x > high:
        fall = abs(y) - high_size
        if fall <= 0.0:
            return False
        slope = fall / (x - high)
        if slope > steepest:
            steepest = slope
    return (low_size + high_size) / (high - low) <= STEEPER * steepest < math.inf


def examine(
    f: Evaluate,
    crossing: Crossing,
    ends: tuple[Point, Point],
    samples: Sequence[Point],
    tolerance: Tolerance,
) -> tuple[Nature, int]:
    """What the sign change is, and how many evaluations it took to tell.

    `ends` are the ends of the whole bracket with their residuals, `samples` what was tried
    between them.
    """
    low, high = crossing.low, crossing.high
    if low == high:
        return _beside(f, low, ends, tolerance.at(low))
    left, right = _neighbours(low, high, ends, samples)
    if evident(crossing, left, right):
        return Nature.ROOT, 0
    look = _CloserLook(f, crossing, left, right)
    nature = look.by_chords(COARSE * max(abs(low), abs(high))) or look.by_halving()
    if nature is Nature.JUMP:
        largest = max(abs(y) for _, y in (*ends, *samples) if math.isfinite(y))
        bracket = (ends[0][0], ends[1][0])
        nature = look.step_or_rounding(largest, tolerance.at(low), bracket)
    return nature, look.count


def _beside(
    f: Evaluate, x: float, ends: tuple[Point, Point], distance: float
) -> tuple[Nature, int]:
    """Whether an exact zero stands alone, from one more value beside it."""
    beside = x + distance if x + distance <= ends[1][0] else x - distance
    return (Nature.FLAT if f(beside) == 0.0 else Nature.ROOT), 1


def _neighbours(
    low: float, high: float, ends: tuple[Point, Point], samples: Sequence[Point]
) -> tuple[Point, Point]:
    """The nearest samples outside the interval."""
    left, right = ends
    for sample in samples:
        x = sample[0]
        if left[0] < x < low:
            left = sample
        elif high < x < right[0]:
            right = sample
    return left, right


class _CloserLook:
    """An interval with opposite signs that is narrowed until it shows what it is."""

    def __init__(self, f: Evaluate, crossing: Crossing, left: Point, right: Point) -> None:
        self.f, self.crossing, self.left, self.right = f, crossing, left, right
        self.count = 0

    def _take(self, x: float) -> Nature | None:
        """One more sample inside; a nature where it settles the matter at once."""
        y = self.f(x)
        self.count += 1
        if isinstance(y, Fault):
            return Nature.FAULT
        if y == 0.0:
            return Nature.ROOT
        before = self.crossing
        self.crossing = before.cut(x, y)
        if self.crossing.low != before.low:
            self.left = (before.low, before.f_low)
        else:
            self.right = (before.high, before.f_high)
        return None

    def by_chords(self, fine: float) -> Nature | None:
        """ROOT where chords lead to an interval below `fine` towards which the residual falls."""
        for _ in range(CHORDS):
            low, high, f_low, f_high = self.crossing
            share = abs(f_low) / (abs(f_low) + abs(f_high))
            x = low + (high - low) * share
            beside = max(1e-3 * (high - low), 0.5 * fine)
            if not low < x < high:
                return None
            found = self._take(x)
            if found is not None:
                return found
            # The point beside the chord's zero, on the side where the sign is the other.
            x = x + beside if self.crossing.low == x else x - beside
            if self.crossing.low < x < self.crossing.high:
                found = self._take(x)
                if found is not None:
                    return found
            width = self.crossing.high - self.crossing.low
            if width <= fine and _falls(self.crossing, self.left, self.right):
                return Nature.ROOT
        return None

    def by_halving(self) -> Nature:
        """What the last halvings before neighbouring doubles show."""
        sizes = [self.crossing.size]
        for _ in range(HALVINGS):
            low, high = self.crossing.low, self.crossing.high
            x = low + (high - low) / 2.0
            if not low < x < high:
                break
            found = self._take(x)
            if found is not None:
                return found
            sizes.append(self.crossing.size)
        past = sizes[-min(LAST, len(sizes) - 1) - 1]
        factor = sizes[-1] / past if past and math.isfinite(past) else math.inf
        if factor <= SHRINKS:
            return Nature.ROOT
        return Nature.POLE if factor >= GROWS else Nature.JUMP

    def step_or_rounding(self, largest: float, permitted: float, bracket: Bracket) -> Nature:
        """A step that stays between neighbouring doubles: small enough to be none, or rounding.

        Samples further and further out tell over which distance the residual is no larger than a
        few such steps. Where the tolerance spans that distance, and the step is small beside the
        residual in the bracket, the unknown is as well known as was asked.
        """
        step, distance = 4.0 * self.crossing.size, permitted
        spread = SPREAD * (bracket[1] - bracket[0])
        while distance == permitted or distance <= spread:
            near = self._grown(distance, bracket)
            if near is None:
                return Nature.JUMP
            if near >= step:
                if distance == permitted and step <= STEP * largest:
                    return Nature.ROOT
                return Nature.ROUNDING if step <= ROUNDING * largest else Nature.JUMP
            distance *= 4.0
        return Nature.JUMP

    def _grown(self, distance: float, bracket: Bracket) -> float | None:
        """The smaller magnitude of the residual at a distance on both sides; None at a fault.

        A sign that differs from the nearer one is rounding still: it counts as no growth.
        """
        low, high, f_low, f_high = self.crossing
        left = self.f(max(bracket[0], low - distance))
        right = self.f(min(bracket[1], high + distance))
        self.count += 2
        if isinstance(left, Fault) or isinstance(right, Fault):
            return None
        if (left < 0.0) != (f_low < 0.0) or (right < 0.0) != (f_high < 0.0):
            return 0.0
        return min(abs(left), abs(right))
