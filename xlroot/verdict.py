"""Verdict: how well a root is known, judged from what a search has shown."""

from __future__ import annotations

from enum import Enum
from typing import NamedTuple

from xlroot.methods import Family
from xlroot.nature import Nature
from xlroot.scan import Look
from xlroot.search import Run
from xlroot.stopping import Outcome


class Status(Enum):
    """What has been shown; the value is the word in a cell and in JSON."""

    PROVED = "proved"
    BRACKETED = "bracketed"
    CONVERGED = "converged"
    REFUSED = "refused"


class Verdict(NamedTuple):
    """The status, the enclosure if there is one, the reason, and the cell that a refusal names."""

    status: Status
    low: float | None
    high: float | None
    reason: str
    cell: str | None = None


def judge(run: Run, shape: Look) -> Verdict:
    """The verdict on a search: the best that its samples show, never what its method promises.

    `shape` is the look over the bracket; it words the refusals.
    """
    if run.outcome in (Outcome.ENCLOSED, Outcome.EXACT, Outcome.SETTLED):
        return _ended_well(run)
    return Verdict(Status.REFUSED, None, None, _refusal(run, shape))


def _ended_well(run: Run) -> Verdict:
    crossing, root = run.enclosure, run.root
    assert root is not None
    if run.nature in (Nature.POLE, Nature.JUMP, Nature.FAULT):
        return Verdict(Status.REFUSED, None, None, _no_root(run))
    if run.nature is Nature.ROUNDING:
        return Verdict(
            Status.CONVERGED,
            None,
            None,
            f"the residual changes sign near {root:.12g}, but is no larger there than its own "
            "rounding: the root may lie further away than the tolerance, and the error is an "
            "estimate",
        )
    if run.outcome is Outcome.EXACT and run.method.family is Family.BRACKETING:
        return Verdict(Status.BRACKETED, root, root, _exact(run))
    if crossing is not None:
        return Verdict(
            Status.BRACKETED,
            crossing.low,
            crossing.high,
            f"opposite signs {_width(crossing.high - crossing.low)} apart, and the residual "
            "shrinks towards them; other roots in the bracket are not excluded",
        )
    zero = "the residual is exactly zero there" if run.outcome is Outcome.EXACT else "it settled"
    return Verdict(
        Status.CONVERGED,
        None,
        None,
        f"{run.method.name} converged inside the limits ({zero}), but the residual does not "
        "change sign around the root: the error is an estimate",
    )


def _exact(run: Run) -> str:
    if run.root == run.low or run.root == run.high:
        where = "at an end of the bracket"
    else:
        where = "at the root, with opposite signs at the ends of the bracket"
    if run.nature is Nature.FLAT:
        return (
            f"the residual is exactly zero {where}, and beside it as well: every value of that "
            "stretch meets it"
        )
    return f"the residual is exactly zero {where}; other roots in the bracket are not excluded"


def _width(width: float) -> str:
    return f"{width:.2g}"


def _no_root(run: Run) -> str:
    crossing = run.enclosure
    assert crossing is not None
    where = f"near {crossing.low:.12g}"
    if run.nature is Nature.FAULT:
        return (
            f"the residual changes sign {where}, but cannot be evaluated in between: "
            "a pole or a gap, no root is shown there"
        )
    if run.nature is Nature.POLE:
        return (
            f"the residual changes sign through a pole {where}, where it grows without bound: "
            "there is no root there"
        )
    return (
        f"the residual jumps over zero {where} (from {crossing.f_low:.6g} to "
        f"{crossing.f_high:.6g}) or is steeper there than numbers resolve: no root is shown. "
        "If rounding in the formulas makes the step, state a wider tolerance"
    )


def _refusal(run: Run, shape: Look) -> str:
    if run.outcome is Outcome.FAULTED:
        assert run.fault is not None
        x, fault = run.fault
        if x in (run.low, run.high) and not run.samples:
            end = "low" if x == run.low else "high"
            return f"the residual shows {fault} at the {end} end of the bracket, x = {x:.12g}"
        return f"the residual shows {fault} at x = {x:.12g}, inside the bracket"
    if run.outcome is Outcome.UNBRACKETED:
        (_, f_low), (_, f_high) = run.ends
        return (
            f"the residual has the same sign at both ends of the bracket: {f_low:.6g} at "
            f"{run.low:.12g} and {f_high:.6g} at {run.high:.12g}; {shape.describe()}"
        )
    last = run.samples[-1][0] if run.samples else run.low
    name = run.method.name
    if run.outcome is Outcome.DIVERGED:
        return (
            f"{name} does not contract here: steps grow by a factor of "
            f"{run.contraction or 1.0:.3g} where it has to be below one; {shape.describe()}"
        )
    if run.outcome is Outcome.ESCAPED:
        factor = "" if run.contraction is None else f" (steps change by {run.contraction:.3g})"
        return f"{name} left the limits after x = {last:.12g}{factor}; {shape.describe()}"
    if run.outcome is Outcome.EXHAUSTED:
        return f"{name} did not finish in {run.iterations} iterations; {shape.describe()}"
    return (
        f"{name} came to a stop at x = {last:.12g} without bringing the residual to zero; "
        f"{shape.describe()}"
    )
