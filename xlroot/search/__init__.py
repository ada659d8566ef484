"""The one driver: a method against f(x), every evaluation counted and recorded.

The driver asks the method for trial values, evaluates, keeps the bracket by comparing signs,
enforces the limits and decides when to stop.
"""

from __future__ import annotations

import math

from xlroot.methods import Family, Method, Start
from xlroot.search.bracketed import bracketing
from xlroot.search.slopes import Slopes
from xlroot.search.trail import Iterate, Residual, Run
from xlroot.search.unbracketed import unbracketed
from xlroot.stopping import Tolerance

LIMIT = 2000
"""Iterations after which a search ends without result; bisection of any bracket of doubles needs
about 1,100."""

LIMIT_OPEN = 200
"""Iterations permitted to an open method, which either converges fast or not at all."""

_OPEN = Family.OPEN


def run(
    method: Method,
    f: Residual,
    low: float,
    high: float,
    tolerance: Tolerance,
    *,
    guess: float | None = None,
    slope: Residual | None = None,
    limit: int | None = None,
) -> Run:
    """The search of f's root in [low, high] by a method.

    `f` gives a float, or a Fault where the residual cannot be evaluated; `slope` its derivative,
    where there is one: otherwise central differences serve, and the run notes it. `guess` is
    where an open method begins, the middle of the limits if None.
    """
    if method.family is _OPEN:
        differences = Slopes(f, low, high, method.need, slope)
        start = low + (high - low) / 2.0 if guess is None else guess
        return unbracketed(
            f,
            Start(low, high, math.nan, math.nan, tolerance, start),
            method,
            differences,
            limit or LIMIT_OPEN,
        )
    return bracketing(method, f, low, high, tolerance, limit or LIMIT)


__all__ = ["LIMIT", "LIMIT_OPEN", "Iterate", "Residual", "Run", "run"]
