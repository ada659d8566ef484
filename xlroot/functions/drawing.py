"""The hypergeometric distribution: draws without replacement.

Abramowitz and Stegun, section 26.1.21. Counts are cut to whole numbers, as Excel documents. A
mass is a ratio of binomial masses (C. Loader 2000); a distribution function adds the shorter tail.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import NamedTuple

from xlroot.errors import Unsupported
from xlroot.functions._densities import binomial_mass
from xlroot.functions._settled import settled
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault

LARGEST_TOTAL = 10**9
"""The largest population whose masses are added."""


class _Draw(NamedTuple):
    """How many wanted ones are found among those drawn, and how many there are in all."""

    found: int
    drawn: int
    wanted: int
    total: int

    def is_possible(self) -> bool:
        return (
            self.total > 0
            and 0 < self.drawn <= self.total
            and 0 < self.wanted <= self.total
            and max(0, self.drawn + self.wanted - self.total) <= self.found
            and self.found <= min(self.drawn, self.wanted)
        )

    def mass(self, k: int) -> float:
        """The probability of exactly k."""
        p, q = self.drawn / self.total, (self.total - self.drawn) / self.total
        unwanted = self.total - self.wanted
        rest = self.drawn - k
        return (
            binomial_mass(float(k), float(self.wanted - k), p, q)
            * binomial_mass(float(rest), float(unwanted - rest), p, q)
            / binomial_mass(float(self.drawn), float(self.total - self.drawn), p, q)
        )

    def downward(self) -> Iterator[float]:
        """Masses of found, found - 1, ... as far as they count."""
        k, term = self.found, self.mass(self.found)
        while term > 0.0:
            yield term
            spare = self.total - self.wanted - self.drawn + k
            term *= k * spare / ((self.wanted - k + 1) * (self.drawn - k + 1))
            k -= 1

    def upward(self) -> Iterator[float]:
        """Masses of found + 1, found + 2, ... as far as they count."""
        k = self.found + 1
        term = self.mass(k) if k <= min(self.drawn, self.wanted) else 0.0
        while term > 0.0:
            yield term
            spare = self.total - self.wanted - self.drawn + k + 1
            term *= (self.wanted - k) * (self.drawn - k) / ((k + 1) * spare)
            k += 1

    def at_most(self) -> float:
        """The probability of at most as many as found, by adding the shorter tail."""
        if self.total > LARGEST_TOTAL:
            raise Unsupported(f"adds too many terms for a population above {LARGEST_TOTAL:,}")
        if self.found * self.total <= self.drawn * self.wanted:
            return _tail(self.downward())
        return 1.0 - _tail(self.upward())


def _tail(falling: Iterator[float]) -> float:
    """The sum of falling masses, ended where they no longer count."""
    total = 0.0
    for term in falling:
        total += term
        if term < 1e-19 * total:
            break
    return total


def _draw(found: float, drawn: float, wanted: float, total: float) -> _Draw | Fault:
    draw = _Draw(math.trunc(found), math.trunc(drawn), math.trunc(wanted), math.trunc(total))
    return draw if found >= 0.0 and draw.is_possible() else Fault.NUM


@worksheet(
    "HYPGEOM.DIST",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def hypgeom_dist(
    found: float,
    drawn: float,
    wanted: float,
    total: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The probability of at most, or of exactly, a number found among those drawn."""
    draw = _draw(found, drawn, wanted, total)
    if isinstance(draw, Fault):
        return draw
    return draw.at_most() if cumulative else draw.mass(draw.found)


@worksheet(
    "HYPGEOMDIST",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    gives=Gives.NUMBER,
)
@settled
def hypgeomdist(found: float, drawn: float, wanted: float, total: float) -> float | Fault:
    """The probability of exactly a number found among those drawn."""
    draw = _draw(found, drawn, wanted, total)
    return draw if isinstance(draw, Fault) else draw.mass(draw.found)
