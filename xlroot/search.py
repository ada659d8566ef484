"""The one loop: a method against f(x), every evaluation counted and recorded.

The driver asks the method for trial values, evaluates, keeps the bracket by comparing signs,
enforces the limits and decides when to stop. A bracketing method that brings only one end to the
root gets help: once its steps are below the tolerance, the driver tries a point just beyond, so
that every bracketing search ends with opposite signs within the tolerance. What the sign change
is (a root, a pole, a jump) is looked at afterwards (`xlroot.nature`).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from itertools import pairwise
from typing import NamedTuple

from xlroot.methods import Family, Method, Need, Sample, Start, opposite
from xlroot.methods.method import Aside
from xlroot.nature import Crossing, Nature, examine
from xlroot.stopping import Outcome, SafeSide, Tolerance
from xlroot.values import Fault

LIMIT = 2000
"""Iterations after which a search ends without result; bisection of any bracket of doubles needs
about 1,100."""

LIMIT_OPEN = 200
"""Iterations permitted to an open method, which either converges fast or not at all."""

SMALL_STEP = 0.45
"""Steps below this part of the tolerance call for a closing point: less than the half tolerance
that methods which close the bracket themselves keep."""

REST = 1e-6
"""An open method has to bring the residual below this part of the largest that it met."""

Residual = Callable[[float], "float | Fault"]


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
        return len(self.ends) + len(self.samples) + self.differences + self.checks

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


def run(
    method: Method,
    f: Residual,
    low: float,
    high: float,
    tolerance: Tolerance,
    *,
    guess: float | None = None,
    limit: int | None = None,
) -> Run:
    """The search of f's root in [low, high] by a method.

    `f` gives a float, or a Fault where the residual cannot be evaluated. `guess` is where an open
    method begins, the middle of the limits if None.
    """
    if method.family is Family.OPEN:
        return _open(method, f, low, high, tolerance, guess, limit or LIMIT_OPEN)
    return _bracketing(method, f, low, high, tolerance, limit or LIMIT)


def _bracketing(
    method: Method, f: Residual, low: float, high: float, tolerance: Tolerance, limit: int
) -> Run:
    f_low = f(low)
    if type(f_low) is not float:
        return _at_a_fault(method, low, high, tolerance, (), (low, f_low))
    f_high = f(high)
    if type(f_high) is not float:
        return _at_a_fault(method, low, high, tolerance, ((low, f_low),), (high, f_high))
    predicted = None if method.predict is None else method.predict(low, high, tolerance)
    if opposite(f_low, f_high):
        start = Start(low, high, f_low, f_high, tolerance, low)
        return _converge(method, f, start, limit, predicted)
    ends = ((low, f_low), (high, f_high))
    if f_low == 0.0 or f_high == 0.0:
        return _at_an_end(method, low, high, tolerance, ends, predicted)
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
    low: float,
    high: float,
    tolerance: Tolerance,
    ends: tuple[tuple[float, float], ...],
    predicted: int | None,
) -> Run:
    end = low if ends[0][1] == 0.0 else high
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
        enclosure=Crossing(end, end, 0.0, 0.0),
        nature=Nature.ROOT,
        predicted=predicted,
    )


def _converge(method: Method, f: Residual, start: Start, limit: int, predicted: int | None) -> Run:
    # The hot loop: what it costs beside f is most of a short chain's solve, so it is plain.
    a, b, fa, fb, tolerance, _ = start
    trials = method.trials(start)
    send = trials.send
    low_is_negative = fa < 0.0
    relative = tolerance.relative
    permitted = tolerance.absolute
    finest = math.ulp(a) if -b < a else math.ulp(b)
    if relative or permitted < finest:
        permitted = finest
    small = SMALL_STEP * permitted
    samples: list[tuple[float, float]] = []
    keep = samples.append
    reach, before = permitted, math.inf
    fault: tuple[float, Fault] | None = None
    outcome = Outcome.EXHAUSTED
    # Where the count is known beforehand, it decides; otherwise the width of the bracket.
    counted = predicted is not None and predicted <= limit
    stop = -1.0 if counted else permitted
    x = next(trials) if limit else a
    for _ in range(predicted if counted and predicted is not None else limit):
        y = f(x)
        if type(y) is not float:
            assert isinstance(y, Fault)
            fault, outcome = (x, y), Outcome.FAULTED
            break
        keep((x, y))
        if a < x < b:
            if y < 0.0:
                if low_is_negative:
                    a, fa = x, y
                else:
                    b, fb = x, y
            elif y == 0.0:
                a = b = x
                fa = fb = 0.0
                outcome = Outcome.EXACT
                break
            elif low_is_negative:
                b, fb = x, y
            else:
                a, fa = x, y
            if b - a <= stop:
                outcome = Outcome.ENCLOSED
                break
            if relative and b - a <= tolerance.at(a if abs(fa) < abs(fb) else b):
                outcome = Outcome.ENCLOSED
                break
        if -small < x - before < small:
            # The method's steps have ended; a point just beyond the better end closes in.
            before = math.inf
            x = _beyond(a, b, fa, fb, reach)
            reach *= 4.0
            continue
        before = x
        x = send(y)
    else:
        if counted:
            outcome = Outcome.ENCLOSED
    ends = ((start.low, start.f_low), (start.high, start.f_high))
    root, residual, nature, checks = None, None, None, 0
    crossing = Crossing(a, b, fa, fb)
    if outcome is Outcome.ENCLOSED or outcome is Outcome.EXACT:
        nature, checks = examine(f, crossing, ends, samples, tolerance)
        root, residual = (a, fa) if abs(fa) <= abs(fb) else (b, fb)
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


def _beyond(a: float, b: float, fa: float, fb: float, reach: float) -> float:
    """A point a little inside the bracket from its better end."""
    x = a + 0.9 * reach if abs(fa) <= abs(fb) else b - 0.9 * reach
    return x if a < x < b else a + (b - a) / 2.0


class _Slopes:
    """Slopes and curvatures by differences; counts what they cost."""

    def __init__(self, f: Residual, low: float, high: float, need: Need) -> None:
        self.f, self.low, self.high, self.need = f, low, high, need
        self.count = 0

    def at(self, x: float, y: float) -> Sample | None:
        """Central differences, moved inside the limits near an end; None at a fault.

        The step balances truncation against rounding: eps^(1/3) for a slope, eps^(1/4) where a
        curvature is wanted as well (R. J. LeVeque, Finite Difference Methods, section 1.2, from
        memory).
        """
        scale = max(abs(x), 1e-3 * (self.high - self.low))
        step = scale * (6e-6 if self.need is Need.SLOPE else 1.2e-4)
        step = min(step, 0.25 * (self.high - self.low))
        middle = min(max(x, self.low + step), self.high - step)
        left, right = self.f(middle - step), self.f(middle + step)
        self.count += 2
        if isinstance(left, Fault) or isinstance(right, Fault):
            return None
        slope = (right - left) / (2.0 * step)
        curvature = 0.0
        if self.need is Need.CURVATURE:
            center: float | Fault = y
            if middle != x:
                center = self.f(middle)
                self.count += 1
            if isinstance(center, Fault):
                return None
            curvature = (right - 2.0 * center + left) / (step * step)
        return Sample(y, slope + curvature * (x - middle), curvature)


def _open(
    method: Method,
    f: Residual,
    low: float,
    high: float,
    tolerance: Tolerance,
    guess: float | None,
    limit: int,
) -> Run:
    start = low + (high - low) / 2.0 if guess is None else guess
    nan = math.nan
    trials = method.trials(Start(low, high, nan, nan, tolerance, start))
    samples: list[tuple[float, float]] = []
    slopes: list[float | None] = []
    differences = _Slopes(f, low, high, method.need)
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
    notes = []
    if method.need is not Need.VALUE:
        notes.append("slope by central difference")
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
        notes=tuple(notes),
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
    if residual and abs(residual) > REST * max(abs(y) for _, y in ended.samples):
        return ended._replace(outcome=Outcome.STALLED, checks=2)
    if f_left == 0.0 and f_right == 0.0:
        note = "the residual is exactly zero on both sides as well: it is flat there"
        return found._replace(notes=(*found.notes, note))
    return found
