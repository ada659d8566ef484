"""Records to report on, built without a workbook: an invented pumping station and its troubles."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from datetime import UTC, datetime

from xlroot import methods, search
from xlroot.cells import Cell
from xlroot.question import Question
from xlroot.record import Line, Provenance, Record, SecondOpinion
from xlroot.scan import look
from xlroot.stopping import Tolerance
from xlroot.values import Fault
from xlroot.verdict import Status, Verdict, judge

SHEET = "Rising main"
UNKNOWN, RESIDUAL, ASKED = Cell(SHEET, 6, 2), Cell(SHEET, 11, 2), Cell(SHEET, 13, 2)
HOSTILE = (
    '=HYPERLINK("http://example.org","press")',
    "+1+1",
    "-2+3",
    "@SUM(A1)",
    "\t=1+1",
    "\r=1+1",
    "#DIV/0!",
    "a\x1b[31mred\x07",
    "_x000D_",
    "η = ½ · ρ · w² — 効率",
    "x" * 40_000,
)
"""Labels that a report must show and a spreadsheet must not obey."""

REYNOLDS, ROUGHNESS = 1.2e5, 4.0e-4


def friction(x: float) -> float | Fault:
    """Colebrook and White's relation for pipe friction, as 1/sqrt(f) minus its right side."""
    if x <= 0.0:
        return Fault.NUM
    root = math.sqrt(x)
    return 1.0 / root + 2.0 * math.log10(ROUGHNESS / 3.7 + 2.51 / (REYNOLDS * root))


def solved(
    f: Callable[[float], float | Fault] = friction,
    low: float = 0.005,
    high: float = 0.1,
    *,
    method: str = "bisection",
    tolerance: float = 1e-12,
) -> Record:
    """A record as a solve of f leaves it."""
    question = Question(RESIDUAL, UNKNOWN, low, high, method, tolerance)
    shape = look(lambda xs: [f(x) for x in xs], low, high, points=101)
    found = methods.find(method)
    run = search.run(found, f, low, high, Tolerance(tolerance))
    verdict = judge(run, shape)
    root = run.root if verdict.status is not Status.REFUSED else None
    at = root if root is not None else 0.02
    slope = None
    if root is not None:
        left, right = f(root * (1 - 1e-6)), f(root * (1 + 1e-6))
        if isinstance(left, float) and isinstance(right, float) and root:
            slope = (right - left) / (2e-6 * root)
    return Record(
        cell=ASKED,
        question=question,
        statement=(
            "Find the friction factor (Rising main!B6) between 0.005 and 0.1 such that the "
            "imbalance of the friction law (Rising main!B11) is zero."
        ),
        label="friction factor",
        unknown_label="friction factor, trial",
        unit="",
        residual_label="imbalance of the friction law",
        residual_unit="",
        present=0.02,
        verdict=verdict,
        root=root,
        residual_at_root=None if root is None else run.residual,
        slope_at_root=slope,
        method=found.name,
        method_note="asked for by name",
        tolerance=tolerance,
        predicted_iterations=run.predicted,
        iterations=run.iterations,
        evaluations=run.evaluations,
        iterates=run.iterates,
        contraction=run.contraction,
        order=run.order,
        second=None if root is None else SecondOpinion("chandrupatla", root + 1e-15, 1e-15),
        look=shape,
        steps=steps(at, f(at)),
        held=held(),
        warnings=(),
        fingerprint="3f2a9c" + "0d" * 29,
        provenance=Provenance(
            "/projects/marrow quay/rising main & <wells>.xlsx",
            "ab" * 32,
            datetime(2026, 3, 4, 5, 6, 7, tzinfo=UTC),
        ),
    )


def steps(x: float, residual: float | Fault) -> tuple[Line, ...]:
    return (
        Line(Cell(SHEET, 8, 2), "left side, 1/√f", "", "=1/SQRT(B6)", 1 / math.sqrt(x)),
        Line(
            Cell(SHEET, 9, 2),
            "relative roughness term",
            "",
            "=B3/B2/3.7+2.51/(B5*SQRT(B6))",
            ROUGHNESS / 3.7 + 2.51 / (REYNOLDS * math.sqrt(x)),
        ),
        Line(RESIDUAL, "imbalance of the friction law", "", "=B8+2*LOG10(B9)", residual),
    )


def held() -> tuple[Line, ...]:
    return (
        Line(Cell(SHEET, 2, 2), "inside diameter", "m", "", 0.3),
        Line(Cell(SHEET, 3, 2), "roughness of the wall", "m", "", 0.00012),
        Line(Cell(SHEET, 5, 2), "Reynolds number", "", "=B4*B2/1.31E-6", REYNOLDS),
        Line(Cell("Wells", 4, 7), "", "", "", None),
        Line(Cell("Wells", 5, 7), "standby pump runs", "", "", True),
        Line(Cell("Wells", 6, 7), "maker's figure", "kW", "", Fault.NA),
    )


def long(count: int = 300) -> tuple[Line, ...]:
    """A chain of so many formulas."""
    return tuple(
        Line(
            Cell("Reach by reach", 4 + n, 3),
            f"level at chainage {20 * n}",
            "m AOD",
            f"=C{3 + n}+$B$2*(D{4 + n}/D{3 + n})^2*IF(E{4 + n}>0,1,0.85)-INDEX(Tables!$B$4:$B$90,"
            f"MATCH(F{4 + n},Tables!$A$4:$A$90,1))",
            12.5 - n / 77,
        )
        for n in range(count)
    )


def pole(x: float) -> float | Fault:
    return Fault.DIV0 if x == 0.04 else 1.0 / (x - 0.04)


def refused_outright() -> Record:
    """A question that was refused before any search: nothing was looked at."""
    reason = (
        "the function RAND on the chain gives another value each time; replace it by the number "
        "that the design is to be made for"
    )
    return replace(
        solved(),
        verdict=Verdict(Status.REFUSED, None, None, reason, "'Rising main'!B9"),
        root=None,
        residual_at_root=None,
        slope_at_root=None,
        second=None,
        look=None,
        iterates=(),
        iterations=0,
        evaluations=0,
        predicted_iterations=None,
        steps=(),
        held=(),
    )


def without_root() -> Record:
    """A double root: an open method converges and no sign changes."""
    return solved(lambda x: (x - 0.02) ** 2, method="newton")


def refused_at_a_pole() -> Record:
    return solved(pole, 0.01, 0.09, method="chandrupatla", tolerance=1e-10)


def hostile() -> Record:
    """Every text that came from the workbook tries something."""
    lines = tuple(
        replace(line, label=text, unit=text[:8])
        for line, text in zip(long(len(HOSTILE)), HOSTILE, strict=True)
    )
    return replace(
        solved(),
        label=HOSTILE[0],
        unknown_label=HOSTILE[0],
        unit=HOSTILE[3],
        statement=HOSTILE[1],
        residual_label=HOSTILE[7],
        residual_unit='%"',
        steps=lines,
        held=(replace(held()[0], label=HOSTILE[2], value=HOSTILE[0]),),
        warnings=(HOSTILE[4], HOSTILE[8]),
    )


def with_long_chain() -> Record:
    """Three hundred formulas, one of them as long as a cell allows."""
    lines = long()
    giant = replace(lines[-1], formula="=" + "+".join(f"A{n}" for n in range(1, 1500)))
    return replace(solved(), steps=(*lines[:-1], giant))


def with_nothing_known() -> Record:
    """Values that are missing, infinite or no numbers."""
    return replace(
        refused_outright(),
        cell=None,
        label="",
        unknown_label="",
        present=None,
        tolerance=math.nan,
        fingerprint="none",
        steps=(replace(steps(0.02, Fault.DIV0)[0], value=math.inf),),
    )


def faulting_in_part() -> Record:
    """A residual that cannot be evaluated over a third of the bracket."""
    return solved(lambda x: Fault.NUM if x > 0.06 else friction(x), 0.005, 0.05, method="brent")


EVERY: tuple[Callable[[], Record], ...] = (
    solved,
    without_root,
    refused_at_a_pole,
    refused_outright,
    hostile,
    with_long_chain,
    with_nothing_known,
    faulting_in_part,
)
"""All the records that every report has to carry."""
