"""The loop of an open method: iterates within the limits until they settle.

A search that settles is tried for a change of sign around its answer, so that the verdict can be
the best that is shown, not what the method promises.
"""

from __future__ import annotations

import math
from itertools import pairwise

from xlroot.methods import Method, Need, Start, opposite
from xlroot.methods.method import Aside
from xlroot.nature import Crossing, examine
from xlroot.search.slopes import Slopes
from xlroot.search.trail import Residual, Run
from xlroot.stopping import Outcome
from xlroot.values import Fault

REST = 1e-6
"""Without a sign change, the residual at the answer has to be below this part of the residual
some way off on either side; otherwise the search only came to a stop."""

OFF = 1e-3
"""That way, as a part of the limits' width, or `FAR` tolerances where that is further."""
FAR = 1e4


def unbracketed(f: Residual, start: Start, method: Method, differences: Slopes, limit: int) -> Run:
    """The search from `start.guess`; no iterate outside [start.low, start.high] is evaluated."""
    low, high, tolerance = start.low, start.high, start.tolerance
    trials = method.trials(start)
    samples: list[tuple[float, float]] = []
    slopes: list[float | None] = []
    steps: list[float] = []
    outcome, fault, before = Outcome.EXHAUSTED, None, math.inf
    asides = 0
    try:
        trial = next(trials)
        while len(samples) < limit:
            x = float(trial)
            if not low <= x <= high:
                outcome = Outcome.STALLED if math.isnan(x) else Outcome.ESCAPED
                break
            y = f(x)
            if type(y) is not float:
                assert isinstance(y, Fault)
                fault, outcome = (x, y), Outcome.FAULTED
                break
            if isinstance(trial, Aside):
                asides += 1
                trial = trials.send(y)
                continue
            sample = None if method.need is Need.VALUE else differences.at(x, y)
            samples.append((x, y))
            slopes.append(None if sample is None else sample.slope)
            if y == 0.0:
                outcome = Outcome.EXACT
                break
            if method.need is not Need.VALUE and sample is None:
                outcome = Outcome.STALLED
                break
            steps.append(abs(x - before))
            before = x
            settled = _settled(steps, tolerance.at(x), method.contracts)
            if settled is not None:
                outcome = settled
                break
            trial = trials.send(y if sample is None else sample)
    except StopIteration:
        outcome = Outcome.STALLED
    contraction = _contraction(steps) if method.contracts else None
    if contraction is not None and contraction >= 1.0 and outcome is not Outcome.EXACT:
        outcome = Outcome.DIVERGED
    ended = Run(
        method,
        low,
        high,
        tolerance,
        outcome,
        tuple(samples),
        slopes=tuple(slopes),
        differences=differences.count + asides,
        fault=fault,
        contraction=contraction,
        notes=() if differences.note is None else (differences.note,),
    )
    if outcome not in (Outcome.EXACT, Outcome.SETTLED):
        return ended
    return _enclosed(f, ended)


def _settled(steps: list[float], permitted: float, contracts: bool) -> Outcome | None:  # noqa: FBT001
    """Whether the last step ends the search.

    For a contraction the error may exceed the step: with K the ratio of steps it is at most
    K/(1 - K) times the step (Banach's a posteriori bound).
    """
    if len(steps) < 2:
        return None
    step = steps[-1]
    if not contracts:
        return Outcome.SETTLED if step <= permitted else None
    ratio = _contraction(steps)
    if ratio is None:
        return Outcome.SETTLED if step == 0.0 else None
    if ratio < 1.0 and step * ratio / (1.0 - ratio) <= 0.5 * permitted:
        return Outcome.SETTLED
    recent = steps[-6:]
    growing = len(recent) == 6 and all(b >= a for a, b in pairwise(recent))
    return Outcome.DIVERGED if growing else None


def _contraction(steps: list[float]) -> float | None:
    """The ratio of the last two steps: an estimate of |g'|; the first entry is no step."""
    if len(steps) < 3 or steps[-2] == 0.0 or math.isinf(steps[-2]):
        return None
    return steps[-1] / steps[-2]


def _enclosed(f: Residual, ended: Run) -> Run:
    """A converged open search with a sign change around its answer, where there is one."""
    root, residual = min(ended.samples[-2:], key=lambda sample: abs(sample[1]))
    half = 0.5 * ended.tolerance.at(root)
    left, right = max(ended.low, root - half), min(ended.high, root + half)
    f_left, f_right = f(left), f(right)
    found = ended._replace(root=root, residual=residual, checks=2)
    if isinstance(f_left, float) and isinstance(f_right, float) and opposite(f_left, f_right):
        crossing = Crossing(left, right, f_left, f_right)
        ends = ((ended.low, math.inf), (ended.high, math.inf))
        nature, checks = examine(f, crossing, ends, ended.samples, ended.tolerance)
        return found._replace(enclosure=crossing, nature=nature, checks=2 + checks)
    if not _rests(f, ended, root, residual):
        return ended._replace(outcome=Outcome.STALLED, checks=4)
    notes = found.notes
    if f_left == 0.0 and f_right == 0.0:
        notes = (*notes, "the residual is exactly zero on both sides as well: it is flat there")
    return found._replace(notes=notes, checks=4)


def _rests(f: Residual, ended: Run, root: float, residual: float) -> bool:
    """Whether the residual is all but zero at the root, compared with two values further off."""
    distance = max(OFF * (ended.high - ended.low), FAR * ended.tolerance.at(root))
    off = (max(ended.low, root - distance), min(ended.high, root + distance))
    around = [abs(y) for x in off if isinstance(y := f(x), float) and x != root]
    return (bool(around) and abs(residual) <= REST * min(around)) or residual == 0.0
