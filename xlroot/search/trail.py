"""Run: what a search leaves behind, every sample of it."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import NamedTuple

from xlroot.methods import Family, Method
from xlroot.nature import Crossing, Nature
from xlroot.stopping import Outcome, SafeSide, Tolerance
from xlroot.values import Fault

Residual = Callable[[float], "float | Fault"]
"""f(x), or what the residual shows where it cannot be evaluated."""


class Iterate(NamedTuple):
    """One evaluation of the search: its number, x, residual, slope where one was taken, and the
    bracket after it (None for an open method). Both ends of a bracket count as number 0."""

    n: int
    x: float
    f: float
    slope: float | None
    low: float | None
    high: float | None


class Run(NamedTuple):
    """A search that ended: every sample, how it ended, and what is known of the root.

    `enclosure` is the final interval with opposite signs at its ends, if there is one. `checks`
    counts evaluations that were spent on telling a root from a pole or a jump.
    """

    method: Method
    low: float
    high: float
    tolerance: Tolerance
    outcome: Outcome
    samples: tuple[tuple[float, float], ...]
    ends: tuple[tuple[float, float], ...] = ()
    slopes: tuple[float | None, ...] = ()
    root: float | None = None
    residual: float | None = None
    enclosure: Crossing | None = None
    nature: Nature | None = None
    checks: int = 0
    differences: int = 0
    """Evaluations for slopes and curvatures by differences."""
    fault: tuple[float, Fault] | None = None
    predicted: int | None = None
    contraction: float | None = None
    notes: tuple[str, ...] = ()

    @property
    def iterations(self) -> int:
        return len(self.samples)

    @property
    def evaluations(self) -> int:
        faulty = self.fault is not None
        return len(self.ends) + len(self.samples) + self.differences + self.checks + faulty

    @property
    def iterates(self) -> tuple[Iterate, ...]:
        """Every sample with the bracket after it."""
        if self.method.family is Family.OPEN:
            slopes = self.slopes or (None,) * len(self.samples)
            pairs = zip(self.samples, slopes, strict=True)
            return tuple(
                Iterate(n, x, f, slope, None, None) for n, ((x, f), slope) in enumerate(pairs, 1)
            )
        found = [Iterate(0, x, f, None, self.low, self.high) for x, f in self.ends]
        low, high = self.low, self.high
        low_is_negative = bool(self.ends) and self.ends[0][1] < 0.0
        for n, (x, f) in enumerate(self.samples, 1):
            if f == 0.0:
                low = high = x
            elif low < x < high:
                low, high = (x, high) if (f < 0.0) == low_is_negative else (low, x)
            found.append(Iterate(n, x, f, None, low, high))
        return tuple(found)

    @property
    def order(self) -> float | None:
        """The order of convergence seen in the last iterates of an open method: log of the ratio
        of successive errors; None where they are too few or already at the last digits."""
        if self.method.family is Family.BRACKETING or self.root is None:
            return None
        floor = 64.0 * math.ulp(self.root)
        errors = [abs(x - self.root) for x, _ in self.samples]
        errors = [error for error in errors if error > floor][-3:]
        if len(errors) < 3 or not errors[0] > errors[1] > errors[2]:
            return None
        return math.log(errors[2] / errors[1]) / math.log(errors[1] / errors[0])

    def root_on(self, side: SafeSide) -> float | None:
        """The end of the enclosure on which the residual has the acceptable sign; the root itself
        where either is, or where the residual is exactly zero."""
        if side is SafeSide.NONE or self.enclosure is None or self.residual == 0.0:
            return self.root
        low_fits = (self.enclosure.f_low > 0.0) == (side is SafeSide.POSITIVE)
        return self.enclosure.low if low_fits else self.enclosure.high
