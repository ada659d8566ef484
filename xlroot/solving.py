"""The whole story of one solve: trace, compile, check, search, bound, record.

A question that cannot be asked raises; one that can be asked but not answered gives a refused
record, whose root is None.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace
from datetime import UTC, datetime

from xlroot import methods, search, stopping
from xlroot.book import Book, Unsaved
from xlroot.cells import Cell
from xlroot.desk import Desk, Prepared, prepare
from xlroot.errors import IndependentError, QuestionError, Unsupported
from xlroot.fingerprint import fingerprint
from xlroot.labels import label_of, unit_of
from xlroot.nature import Nature
from xlroot.program import Program
from xlroot.question import Question
from xlroot.record import Line, Provenance, Record, SecondOpinion
from xlroot.scan import Look, look
from xlroot.search import Run
from xlroot.stopping import SafeSide, Tolerance
from xlroot.values import Fault, Value
from xlroot.verdict import Status, Verdict, judge

LOOK_POINTS = 101
"""Trial values of the look over the bracket that every record keeps."""


def ask(book: Book, question: Question) -> None:
    """Raises QuestionError, or MethodError, where the question makes no sense in this book."""
    low, high, unknown, residual = question.low, question.high, question.unknown, question.residual
    if book.formula(unknown) is not None:
        raise QuestionError(
            f"the unknown {unknown} holds a formula; name the input cell that it comes from"
        )
    if book.formula(residual) is None and book.array_over(residual) is None:
        raise QuestionError(
            f"the residual {residual} holds no formula; name the cell that has to become zero"
        )
    if not (math.isfinite(low) and math.isfinite(high)):
        raise QuestionError("the ends of the bracket have to be finite numbers")
    if not low < high:
        raise QuestionError(
            f"the bracket's low end {low:.15g} is not below its high end {high:.15g}"
        )
    tolerance, finest = question.tolerance, stopping.finest(low, high)
    if tolerance is not None and not tolerance >= finest:
        raise QuestionError(
            f"the tolerance {tolerance:.3g} is finer than floating-point numbers of this size "
            f"resolve; state at least {finest:.2g}"
        )
    if question.start is not None and not low <= question.start <= high:
        raise QuestionError(f"the start {question.start:.15g} lies outside the limits")
    if question.method.strip().casefold() != methods.AUTOMATIC:
        methods.find(question.method)
    present = book.saved(unknown)
    if isinstance(present, (str, bool, Fault, Unsaved)):
        raise QuestionError(f"the unknown {unknown} holds no number")


def solve(desk: Desk, question: Question, *, cell: Cell | None = None) -> Record:
    """The record of one question; `cell` is the worksheet cell that asked it, if one did.

    Raises QuestionError, or MethodError, where the question cannot be asked.
    """
    ask(desk.book, question)
    try:
        prepared = prepare(
            desk, question.residual, question.unknown, recalculate=question.recalculate
        )
    except IndependentError as error:
        return refused_record(desk, question, str(error), cell=cell)
    except Unsupported as refusal:
        return refused_record(desk, question, refusal.reason, refusal.cell, cell=cell)
    if prepared.refusal is not None:
        reason, where = prepared.refusal.reason, prepared.refusal.cell
        return refused_record(desk, question, reason, where, cell=cell, prepared=prepared)
    try:
        return _searched(desk, question, cell, prepared)
    except Unsupported as refusal:
        return refused_record(
            desk, question, refusal.reason, refusal.cell, cell=cell, prepared=prepared
        )


def _searched(desk: Desk, question: Question, cell: Cell | None, prepared: Prepared) -> Record:
    program, low, high = prepared.program, question.low, question.high
    tolerance = tolerance_of(question)
    method, note = methods.choose(question.method)
    run = search.run(method, program.real, low, high, Tolerance(tolerance), guess=question.start)
    shape = look(lambda xs: [program.real(x) for x in xs], low, high, points=LOOK_POINTS)
    verdict = judge(run, shape)
    if verdict.status is Status.REFUSED:
        where = _fault_cell(program, run)
        if where is not None:
            verdict = verdict._replace(cell=where)
        return _record(desk, question, cell, prepared, verdict, (run, shape, note))
    return _record(desk, question, cell, prepared, verdict, (run, shape, note))


def refused_record(
    desk: Desk,
    question: Question,
    reason: str,
    where: str | None = None,
    *,
    cell: Cell | None = None,
    prepared: Prepared | None = None,
) -> Record:
    """A record without a root: the reason, the cell, and the chain as far as it is known."""
    told = f"{where}: {reason}" if where and where not in reason else reason
    verdict = Verdict(Status.REFUSED, None, None, told, where)
    return _record(desk, question, cell, prepared, verdict, None)


def relabelled(record: Record, book: Book, cell: Cell) -> Record:
    """The record under another cell that asks the same question."""
    return replace(record, cell=cell, label=_own_label(book, cell, record.question.unknown))


def _own_label(book: Book, cell: Cell | None, unknown: Cell) -> str:
    return (label_of(book, cell) if cell is not None else "") or label_of(book, unknown)


def tolerance_of(question: Question) -> float:
    """The tolerance stated, or the customary one."""
    if question.tolerance is not None:
        return question.tolerance
    return stopping.customary(question.low, question.high)


def _record(
    desk: Desk,
    question: Question,
    cell: Cell | None,
    prepared: Prepared | None,
    verdict: Verdict,
    searched: tuple[Run, Look, str] | None,
) -> Record:
    book, unknown, residual = desk.book, question.unknown, question.residual
    program = prepared.program if prepared is not None else None
    run, shape, note = searched if searched is not None else (None, None, "")
    solved = run is not None and verdict.status is not Status.REFUSED
    root = run.root_on(question.safe_side) if run is not None and solved else None
    present = book.saved(unknown)
    at: Value = root if root is not None else None if isinstance(present, Unsaved) else present
    values = _values(program, at)
    f_root = values.get(residual)
    method = run.method.name if run is not None else question.method
    if run is not None:
        note = "; ".join(each for each in (note, *run.notes) if each)
    return Record(
        cell=cell,
        question=question,
        statement=_statement(book, question),
        label=_own_label(book, cell, unknown),
        unknown_label=label_of(book, unknown),
        unit=unit_of(book, unknown),
        residual_label=label_of(book, residual),
        residual_unit=unit_of(book, residual),
        present=None if isinstance(present, Unsaved) else present,
        verdict=verdict,
        root=root,
        residual_at_root=f_root if solved and isinstance(f_root, float) else None,
        slope_at_root=_slope(program, question, root),
        method=method,
        method_note=note,
        tolerance=tolerance_of(question) if question.low < question.high else math.nan,
        predicted_iterations=None if run is None else run.predicted,
        iterations=0 if run is None else run.iterations,
        evaluations=0 if run is None else run.evaluations,
        iterates=() if run is None else run.iterates,
        contraction=None if run is None else run.contraction,
        order=None if run is None else run.order,
        second=_second(program, question, run, root),
        look=shape,
        steps=() if program is None else tuple(_steps(book, program, values)),
        held=() if program is None else tuple(_held(book, program)),
        warnings=_warned(prepared, run, question),
        fingerprint=""
        if program is None
        else fingerprint(program.chain, program.ledger, question, method),
        provenance=Provenance(book.title, book.digest, datetime.now(UTC)),
    )


def _statement(book: Book, question: Question) -> str:
    def named(cell: Cell) -> str:
        label = label_of(book, cell)
        return f"{label} ({cell})" if label else str(cell)

    unit = unit_of(book, question.unknown)
    tail = f" {unit}" if unit else ""
    return (
        f"Find {named(question.unknown)} between {question.low:.12g} and "
        f"{question.high:.12g}{tail} so that {named(question.residual)} becomes zero."
    )


def _values(program: Program | None, at: Value) -> dict[Cell, Value]:
    if program is None:
        return {}
    try:
        return program.values_at(at)
    except Unsupported:
        return {}


def _slope(program: Program | None, question: Question, root: float | None) -> float | None:
    """d(residual)/d(unknown) by central difference within the bracket."""
    if program is None or root is None:
        return None
    width = question.high - question.low
    step = 6e-6 * max(abs(root), 1e-3 * width)
    left, right = max(question.low, root - step), min(question.high, root + step)
    f_left, f_right = program.real(left), program.real(right)
    if isinstance(f_left, Fault) or isinstance(f_right, Fault) or left >= right:
        return None
    return (f_right - f_left) / (right - left)


def _second(
    program: Program | None, question: Question, run: Run | None, root: float | None
) -> SecondOpinion | None:
    """The same question by halving, or by Chandrupatla's method where it was halved already."""
    if program is None or run is None or root is None:
        return None
    crossing = run.enclosure
    name = "Chandrupatla" if run.method.name == "bisection" else "bisection"
    other = search.run(
        methods.find(name),
        program.real,
        question.low,
        question.high,
        Tolerance(tolerance_of(question)),
    )
    if crossing is None or other.root is None or other.nature is not Nature.ROOT:
        return SecondOpinion(name, None, None)
    return SecondOpinion(name, other.root, other.root - root)


def _steps(book: Book, program: Program, values: dict[Cell, Value]) -> Iterator[Line]:
    for step in program.chain.steps:
        text = f"={step.text}" if step.text else f"(part of {step.master})"
        value = values.get(step.cell)
        yield Line(step.cell, label_of(book, step.cell), unit_of(book, step.cell), text, value)


def _held(book: Book, program: Program) -> Iterator[Line]:
    for cell in program.chain.held:
        formula = book.formula(cell)
        text = "" if formula is None else f"={formula.text}"
        value = program.ledger.value(cell)
        yield Line(cell, label_of(book, cell), unit_of(book, cell), text, value)


def _warned(prepared: Prepared | None, run: Run | None, question: Question) -> tuple[str, ...]:
    warnings = list(prepared.warnings) if prepared is not None else []
    unchosen = run is not None and run.root is not None and run.enclosure is None
    if unchosen and question.safe_side is not SafeSide.NONE:
        warnings.append("No sign change was found, so the safe side could not be chosen.")
    return tuple(warnings)


def _fault_cell(program: Program, run: Run) -> str | None:
    if run.fault is None:
        return None
    found = program.fault_at(run.fault[0])
    return None if found is None else str(found[0])
