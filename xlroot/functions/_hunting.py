"""The rate that a financial function asks for: a zero of a present value near a guess.

A rate lies above -1. Newton's steps from the guess come first, as the documentation of RATE, IRR
and XIRR describes; where they do not settle, intervals of ln(1 + rate) are tried outwards from
the guess until the signs at both ends differ, and Chandrupatla's method closes in. Present values
are continuous in the rate above -1, so a change of sign there is a root.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import NamedTuple

from xlroot.methods.chandrupatla import CHANDRUPATLA
from xlroot.methods.method import Sample, Start, opposite
from xlroot.methods.newton import NEWTON
from xlroot.stopping import EPSILON, Tolerance
from xlroot.values import Fault

PresentValue = Callable[[float], Sample]
"""A present value and its slope at a rate above -1; may raise ArithmeticError."""

NEWTON_STEPS = 60
OUTWARD_STEPS = 60
FIRST_STRIDE = 0.01
STRIDE_GROWTH = 1.25
SETTLED = 1e-9
"""A Newton step this small, relative to 1 + rate, counts once steps no longer shrink."""


def rate_near(present_value: PresentValue, guess: float) -> float | Fault:
    """A rate at which the present value is zero, or #NUM! where none is found.

    Accurate to rounding in the present value. With several such rates the answer is the one that
    Newton's steps from the guess reach, otherwise the first met going outwards from the guess.
    """
    if not guess > -1.0:
        return Fault.NUM
    found = _settled(present_value, guess)
    return _enclosed(present_value, guess) if found is None else found


def _settled(present_value: PresentValue, guess: float) -> float | None:
    """Where Newton's steps come to rest, or None."""
    tolerance = Tolerance(0.0, EPSILON)
    trials = NEWTON.trials(Start(-1.0, math.inf, math.nan, math.nan, tolerance, guess))
    x = next(trials)
    last = math.inf
    try:
        for _ in range(NEWTON_STEPS):
            sample = present_value(x)
            if sample.f == 0.0:
                return x
            before, x = x, trials.send(sample)
            step = abs(x - before)
            if not (x > -1.0 and math.isfinite(x)):
                return None
            small = step <= SETTLED * (1.0 + x)
            if step <= EPSILON * (1.0 + x) * 0.5 or (small and step >= last):
                return before if step >= last else x
            last = step
    except (ArithmeticError, ValueError, StopIteration):
        return None
    return None


class _Point(NamedTuple):
    u: float
    f: float


def _enclosed(present_value: PresentValue, guess: float) -> float | Fault:
    """The rate in the first interval outwards from the guess whose ends differ in sign."""

    def at(u: float) -> float:
        try:
            return present_value(math.expm1(u)).f
        except (ArithmeticError, ValueError):
            return math.nan

    middle = math.log1p(guess)
    above = below = _Point(middle, at(middle))
    stride = FIRST_STRIDE
    for _ in range(OUTWARD_STEPS):
        further = _Point(above.u + stride, at(above.u + stride))
        if opposite(above.f, further.f):
            return _closed(at, above, further)
        lower = _Point(below.u - stride, at(below.u - stride))
        if opposite(lower.f, below.f):
            return _closed(at, lower, below)
        for point in (above, further, lower):
            if point.f == 0.0 and math.isfinite(point.u):
                return math.expm1(point.u)
        above, below = further, lower
        stride *= STRIDE_GROWTH
    return Fault.NUM


def _closed(at: Callable[[float], float], low: _Point, high: _Point) -> float | Fault:
    tolerance = Tolerance(0.0, EPSILON)
    middle = 0.5 * (low.u + high.u)
    trials = CHANDRUPATLA.trials(Start(low.u, high.u, low.f, high.f, tolerance, middle))
    x = next(trials)
    while True:
        f = at(x)
        if f == 0.0:
            return math.expm1(x)
        if math.isnan(f):
            return Fault.NUM
        if opposite(low.f, f):
            high = _Point(x, f)
        else:
            low = _Point(x, f)
        if high.u - low.u <= 2.0 * tolerance.at(x):
            return math.expm1((low if abs(low.f) < abs(high.f) else high).u)
        x = trials.send(f)
