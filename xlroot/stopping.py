"""When a search stops, how it ended, and which side of a root is acceptable."""

from __future__ import annotations

import math
from enum import Enum
from typing import NamedTuple

from xlroot.errors import QuestionError

EPSILON = 2.0**-52
"""The spacing of doubles at 1: a number x is followed by the next at about EPSILON * |x|."""


class Tolerance(NamedTuple):
    """How narrow an interval around the root has to become: `absolute + relative * |x|`.

    `absolute` is in the unknown's unit and is what a question states. `relative` is 0 in every
    solve that xlroot offers; published evaluation counts need it.
    """

    absolute: float
    relative: float = 0.0

    def at(self, x: float) -> float:
        """The permitted width at x, never below the spacing of doubles there."""
        return max(self.absolute + self.relative * abs(x), math.ulp(x))


def finest(low: float, high: float) -> float:
    """The smallest tolerance that doubles resolve everywhere between low and high."""
    return math.ulp(max(abs(low), abs(high)))


def customary(low: float, high: float) -> float:
    """The tolerance of a question that states none: the power of ten at or below 1e-12 of the
    larger end (own choice: three to four digits wider than doubles resolve)."""
    scale = max(abs(low), abs(high))
    return max(10.0 ** math.floor(math.log10(scale) - 12.0), math.ulp(scale))


class Outcome(Enum):
    """How a search ended."""

    EXACT = "the residual is exactly zero there"
    ENCLOSED = "the residual has opposite signs at the ends of an interval within the tolerance"
    SETTLED = "the last step was smaller than the tolerance"
    EXHAUSTED = "the permitted number of iterations was used up"
    ESCAPED = "an iterate left the limits"
    STALLED = "the method could not form its next iterate"
    DIVERGED = "the iterates do not contract"
    FAULTED = "the residual cannot be evaluated at an iterate"
    UNBRACKETED = "the residual has the same sign at both ends"


class SafeSide(Enum):
    """Which sign of the residual is acceptable in the design."""

    NONE = "either"
    POSITIVE = "positive"
    NEGATIVE = "negative"

    @classmethod
    def read(cls, text: str) -> SafeSide:
        """The side that a word means: positive or negative (or + and -); empty for either."""
        word = text.strip().casefold()
        for side, words in _WORDS.items():
            if word in words:
                return side
        raise QuestionError(
            f'the safe side is "positive" or "negative", the acceptable sign of the residual, '
            f"not {text!r}"
        )


_WORDS = {
    SafeSide.NONE: ("", "either", "none"),
    SafeSide.POSITIVE: ("positive", "+", "plus"),
    SafeSide.NEGATIVE: ("negative", "-", "minus"),
}
