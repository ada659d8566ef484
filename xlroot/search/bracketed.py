"""The loop of a bracketing method: opposite signs kept until the bracket is within the tolerance.

A method that brings only one end to the root gets help: once its steps are below the tolerance,
the driver tries a point just beyond, so that every such search ends with opposite signs within
the tolerance. What the sign change is (a root, a pole, a jump) is looked at afterwards.
"""

from __future__ import annotations

import math

from xlroot.methods import Method, Start, opposite
from xlroot.nature import Crossing, Nature, Point, evident, examine
from xlroot.search.trail import Residual, Run
from xlroot.stopping import Outcome, Tolerance
from xlroot.values import Fault

SMALL_STEP = 0.45
"""Steps below this part of the tolerance call for a closing point: less than the half tolerance
that methods which close the bracket themselves keep."""

# Looked up once: finding an enum's member costs as much as a step of the loop.
_ENCLOSED, _EXACT, _EXHAUSTED = Outcome.ENCLOSED, Outcome.EXACT, Outcome.EXHAUSTED
_ROOT = Nature.ROOT

# A named tuple made without its Python-level constructor, which takes three times as long.
_new = tuple.__new__


def bracketing(
    method: Method, f: Residual, low: float, high: float, tolerance: Tolerance, limit: int
) -> Run:
    """The search between two ends, or the reason why there is none: a fault at an end, a root at
    an end, equal signs."""
    f_low = f(low)
    if type(f_low) is not float:
        return _at_a_fault(method, low, high, tolerance, (), (low, f_low))
    f_high = f(high)
    if type(f_high) is not float:
        return _at_a_fault(method, low, high, tolerance, ((low, f_low),), (high, f_high))
    predicted = None if method.predict is None else method.predict(low, high, tolerance)
    if opposite(f_low, f_high):
        start = _new(Start, (low, high, f_low, f_high, tolerance, low))
        return _converge(method, f, start, limit, predicted)
    ends = ((low, f_low), (high, f_high))
    if f_low == 0.0 or f_high == 0.0:
        return _at_an_end(method, f, low, high, tolerance, ends, predicted)
    return Run(method, low, high, tolerance, Outcome.UNBRACKETED, (), ends, predicted=predicted)


def _at_a_fault(
    method: Method,
    low: float,
    high: float,
    tolerance: Tolerance,
    ends: tuple[tuple[float, float], ...],
    found: tuple[float, float | Fault],
) -> Run:
    end, fault = found
    assert isinstance(fault, Fault)
    return Run(method, low, high, tolerance, Outcome.FAULTED, (), ends, fault=(end, fault))


def _at_an_end(
    method: Method,
    f: Residual,
    low: float,
    high: float,
    tolerance: Tolerance,
    ends: tuple[tuple[float, float], tuple[float, float]],
    predicted: int | None,
) -> Run:
    end = low if ends[0][1] == 0.0 else high
    crossing = Crossing(end, end, 0.0, 0.0)
    nature, checks = examine(f, crossing, ends, (), tolerance)
    return Run(
        method,
        low,
        high,
        tolerance,
        Outcome.EXACT,
        (),
        ends,
        root=end,
        residual=0.0,
        enclosure=crossing,
        nature=nature,
        checks=checks,
        predicted=predicted,
    )


def _converge(method: Method, f: Residual, start: Start, limit: int, predicted: int | None) -> Run:
    # The hot loop: what it costs beside f is most of a short chain's solve, so it is plain.
    a, b, fa, fb, tolerance, _ = start
    # The samples at the present ends of the bracket, and those next to them outside.
    left, right = low_end, high_end = ends = ((a, fa), (b, fb))
    trials = method.trials(start)
    send = trials.send
    low_is_negative = fa < 0.0
    permitted, relative = tolerance
    finest = math.ulp(a) if -b < a else math.ulp(b)
    if relative or permitted < finest:
        permitted = finest
    small = SMALL_STEP * permitted
    samples: list[Point] = []
    keep = samples.append
    reach, before = permitted, math.inf
    fault: tuple[float, Fault] | None = None
    outcome = _EXHAUSTED
    # Where the count is known beforehand, it decides; otherwise the width of the bracket, held
    # against the widest that a relative tolerance can permit before the exact comparison.
    counted = predicted is not None and predicted <= limit
    stop = permitted if not relative else tolerance.at(max(-a, b))
    if counted:
        stop = -1.0
    x = next(trials) if limit else a
    for _ in range(predicted if counted and predicted is not None else limit):
        y = f(x)
        if type(y) is not float:
            assert isinstance(y, Fault)
            fault, outcome = (x, y), Outcome.FAULTED
            break
        sample = (x, y)
        keep(sample)
        if a < x < b:
            if y < 0.0:
                if low_is_negative:
                    left, low_end, a = low_end, sample, x
                else:
                    right, high_end, b = high_end, sample, x
            elif y == 0.0:
                low_end = high_end = sample
                outcome = _EXACT
                break
            elif low_is_negative:
                right, high_end, b = high_end, sample, x
            else:
                left, low_end, a = low_end, sample, x
            if b - a <= stop and (
                not relative or b - a <= tolerance.at(_better(low_end, high_end)[0])
            ):
                outcome = _ENCLOSED
                break
        if -small < x - before < small:
            # The method's steps have ended; a point just beyond the better end closes in.
            before = math.inf
            x = _beyond(low_end, high_end, reach)
            reach *= 4.0
            continue
        before = x
        x = send(y)
    else:
        if counted:
            outcome = _ENCLOSED
    (a, fa), (b, fb) = low_end, high_end
    crossing = _new(Crossing, (a, b, fa, fb))
    root = residual = nature = None
    checks = 0
    if outcome is _ENCLOSED or outcome is _EXACT:
        if a < b and evident(crossing, left, right):
            nature = _ROOT
        else:
            nature, checks = examine(f, crossing, ends, samples, tolerance)
        root, residual = _better(low_end, high_end)
    return Run(
        method,
        start.low,
        start.high,
        tolerance,
        outcome,
        tuple(samples),
        ends,
        (),
        root,
        residual,
        crossing,
        nature,
        checks,
        0,
        fault,
        predicted,
    )


def _better(low_end: Point, high_end: Point) -> Point:
    """The end with the smaller residual."""
    return low_end if abs(low_end[1]) <= abs(high_end[1]) else high_end


def _beyond(low_end: Point, high_end: Point, reach: float) -> float:
    """A point a little inside the bracket from its better end."""
    a, b = low_end[0], high_end[0]
    x = a + 0.9 * reach if _better(low_end, high_end) is low_end else b - 0.9 * reach
    return x if a < x < b else a + (b - a) / 2.0
