"""What a root-finding method is, and what it is told.

A method is a generator of trial values: it yields the next x and is sent the sample there. It
knows no cells, counts nothing and does not stop by itself except where it cannot go on: the
driver (`xlroot.search`) evaluates, counts, records, enforces the limits and stops.
"""

from __future__ import annotations

from collections.abc import Callable, Generator
from dataclasses import dataclass
from enum import Enum
from typing import Any, NamedTuple

from xlroot.stopping import Tolerance


class Family(Enum):
    """Whether a method keeps opposite signs at the ends of an interval."""

    BRACKETING = "bracketing"
    OPEN = "open"


class Need(Enum):
    """What a method needs at every trial value."""

    VALUE = "the residual"
    SLOPE = "the residual and its slope"
    CURVATURE = "the residual, its slope and its curvature"


class Sample(NamedTuple):
    """What a method that needs slopes is sent."""

    f: float
    slope: float
    curvature: float = 0.0


class Aside(float):
    """A trial value that only serves to form the next iterate."""


class Start(NamedTuple):
    """Where a search begins.

    Bracketing: `low < high`, `f_low` and `f_high` of opposite signs, neither zero. Open: `low`
    and `high` are limits, their residuals are NaN, and `guess` is the first iterate.
    """

    low: float
    high: float
    f_low: float
    f_high: float
    tolerance: Tolerance
    guess: float


Trials = Generator[float, Any, None]
"""Yields trial values; is sent the residual as a float, or a Sample where it needs slopes."""


@dataclass(frozen=True, slots=True)
class Method:
    """One method: how it goes on, what it guarantees, and where it is published."""

    name: str
    family: Family
    need: Need
    order: str
    """Order of convergence to a simple root."""
    paper: str
    when: str
    """One line of when to use it."""
    trials: Callable[[Start], Trials]
    predict: Callable[[float, float, Tolerance], int] | None = None
    """The number of iterations, where it is known beforehand."""
    contracts: bool = False
    """Whether its steps have to shrink by a steady factor, and only that bounds the error."""


def opposite(a: float, b: float) -> bool:
    """Whether two residuals have opposite signs; compared, since a product may underflow."""
    return (a < 0.0 < b) or (b < 0.0 < a)
