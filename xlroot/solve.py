"""The whole story of one solve: trace, compile, check, search, bound, record.

A question that cannot be asked raises; one that can be asked but not answered gives a refused
record, whose root is None.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from datetime import UTC, datetime

from xlroot import baseline, methods, search, stopping
from xlroot.book import Book, Unsaved
from xlroot.cells import Cell
from xlroot.chain import Chain, trace
from xlroot.depend import Bindings
from xlroot.errors import QuestionError, Unsupported
from xlroot.fingerprint import fingerprint
from xlroot.labels import label_of, unit_of
from xlroot.ledger import Ledger, Policy
from xlroot.methods import Family, Method
from xlroot.program import Program
from xlroot.provenance import provenance
from xlroot.question import Question
from xlroot.record import Line, Record, SecondOpinion
from xlroot.scan import Look, look
from xlroot.search import Run
from xlroot.stopping import SafeSide, Tolerance
from xlroot.values import Fault, Value
from xlroot.verdict import Status, Verdict, judge

LOOK_POINTS = 101
"""Trial values of the look over the bracket that every record keeps."""


@dataclass(frozen=True, slots=True)
class Desk:
    """What the solves of one book share: its bound formulas and its values.

    `saved` reads the book as the host left it; `present` has the roots of earlier solves in
    place, where they differ from what was saved.
    """

    bindings: Bindings
    saved: Ledger
    present: Ledger

    @classmethod
    def of(cls, book: Book) -> Desk:
        """A desk with the book as it was saved."""
        bindings = Bindings(book)
        ledger = Ledger(bindings)
        return cls(bindings, ledger, ledger)

    @property
    def book(self) -> Book:
        return self.bindings.book


def solve(desk: Desk, question: Question, *, cell: Cell | None = None) -> Record:
    """The record of one question; `cell` is the worksheet cell that asked it, if one did.

    Raises QuestionError, or MethodError, where the question cannot be asked.
    """
    present = _ask(desk.book, question)
    story = _Story(desk, question, cell, present, datetime.now(UTC))
    held = Ledger(desk.bindings, Policy.COMPUTED) if question.recalculate else desk.present
    try:
        chain = trace(desk.bindings, held, question.residual, question.unknown)
    except Unsupported as refusal:
        return story.refused(refusal.reason, refusal.cell)
    try:
        program = Program(chain, held)
        checked = _baseline(desk, program, question, present)
        if checked is not None and checked.difference is not None:
            return story.refused(str(checked.difference), str(checked.difference.cell), program)
        return story.solved(program, _warnings(chain, checked, question))
    except Unsupported as refusal:
        return story.refused(refusal.reason, refusal.cell)


def _ask(book: Book, question: Question) -> Value:
    """The unknown's present value, once the question makes sense; QuestionError otherwise."""
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
    present = book.saved(unknown)
    if isinstance(present, (str, bool, Fault, Unsaved)):
        raise QuestionError(f"the unknown {unknown} holds no number")
    return present


def _baseline(
    desk: Desk, program: Program, question: Question, present: Value
) -> baseline.Baseline | None:
    if question.recalculate:
        return None
    if desk.saved is desk.present:
        return baseline.check(program, present)
    return baseline.check(Program(program.chain, desk.saved), present)


def _warnings(
    chain: Chain, checked: baseline.Baseline | None, question: Question
) -> tuple[str, ...]:
    warnings = []
    if question.recalculate:
        warnings.append("No saved value of a formula was used: all were computed by xlroot.")
    elif checked is not None and checked.unsaved:
        warnings.append(
            f"{checked.unsaved} of {len(chain.steps)} chain cells were saved without a value, so "
            "the formulas could not be held against the host there."
        )
    if chain.circular:
        named = ", ".join(str(cell) for cell in chain.circular[:4])
        warnings.append(
            f"Held cells lie in a circular reference ({named}); their saved values are used."
        )
    return tuple(warnings)


@dataclass(frozen=True, slots=True)
class _Story:
    """One question on its way to a record."""

    desk: Desk
    question: Question
    cell: Cell | None
    present: Value
    time: datetime

    def solved(self, program: Program, warnings: tuple[str, ...]) -> Record:
        question = self.question
        shape = look(lambda xs: [program.real(x) for x in xs], question.low, question.high,
                     points=LOOK_POINTS)
        method, note = methods.choose(question.method, shape.first_value, shape.last_value)
        tolerance = self.tolerance
        run = search.run(
            method,
            program.real,
            question.low,
            question.high,
            Tolerance(tolerance),
            guess=question.start,
        )
        verdict = judge(run, shape)
        if verdict.status is Status.REFUSED:
            return self.refused(verdict.reason, _fault_cell(program, run), program, run, shape)
        root = run.root_on(question.safe_side)
        return self._record(program, warnings, method, note, run, shape, verdict, root)
