"""xlroot from Python: open a book, solve a question, solve a book's own questions, evaluate.

Every function takes a path or an open Book; cells are written `"Sheet!B6"`, or `"B6"` in a book
of one sheet, or as a defined name. Every error derives from `XlrootError`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from pathlib import Path

from xlroot.book import Book
from xlroot.cells import Cell
from xlroot.depend import Bindings
from xlroot.desk import Desk, prepare
from xlroot.docket import Docket
from xlroot.hosts.saved import read_book
from xlroot.ledger import Ledger, Policy, Volatile
from xlroot.question import Question
from xlroot.record import Record
from xlroot.scan import Look, look
from xlroot.solving import ask
from xlroot.solving import solve as solve_question
from xlroot.stopping import SafeSide
from xlroot.values import Value

Source = Book | str | Path
Progress = Callable[[int, int], None]


def open_book(path: str | Path) -> Book:
    """The saved workbook at a path; BookError where it cannot be read."""
    return read_book(path)


def _book(source: Source) -> Book:
    return source if isinstance(source, Book) else read_book(source)


def question(
    book: Book,
    *,
    residual: str,
    unknown: str,
    low: float,
    high: float,
    method: str = "auto",
    tolerance: float | None = None,
    safe_side: SafeSide | str = SafeSide.NONE,
    start: float | None = None,
    recalculate: bool = False,
) -> Question:
    """A question with its cells looked up in the book.

    The unknown is looked for in the residual's sheet where it names none. Raises AddressError,
    with the nearest sheet or name, or QuestionError.
    """
    goal = book.cell(residual)
    side = safe_side if isinstance(safe_side, SafeSide) else SafeSide.read(safe_side)
    return Question(
        goal,
        book.cell(unknown, goal.sheet),
        float(low),
        float(high),
        method,
        tolerance,
        side,
        start,
        recalculate,
    )


def solve(
    source: Source,
    *,
    residual: str,
    unknown: str,
    low: float,
    high: float,
    method: str = "auto",
    tolerance: float | None = None,
    safe_side: SafeSide | str = SafeSide.NONE,
    start: float | None = None,
    recalculate: bool = False,
) -> Record:
    """The record of one question.

    A question that can be asked but not answered gives a refused record, whose root is None; one
    that cannot be asked raises QuestionError or AddressError.
    """
    book = _book(source)
    asked = question(
        book,
        residual=residual,
        unknown=unknown,
        low=low,
        high=high,
        method=method,
        tolerance=tolerance,
        safe_side=safe_side,
        start=start,
        recalculate=recalculate,
    )
    return solve_question(Desk.of(book), asked)


def solve_book(source: Source, *, progress: Progress | None = None) -> tuple[Record, ...]:
    """The records of all solves that the workbook's own formulas ask for.

    One record for every question: cells that ask the same (the bounds of a root beside the root)
    share it, and it carries the cell of the XLROOT formula where there is one. In the order in
    which the solves depend on each other.
    """
    docket = Docket.of(_book(source))
    docket.settle(progress)
    return docket.records()


def scan(
    source: Source, *, residual: str, unknown: str, low: float, high: float, points: int = 201
) -> Look:
    """The look: where the residual changes sign, faults, jumps, over the bracket."""
    book = _book(source)
    asked = question(book, residual=residual, unknown=unknown, low=low, high=high)
    ask(book, asked)
    prepared = prepare(Desk.of(book), asked.residual, asked.unknown)
    if prepared.refusal is not None:
        raise prepared.refusal
    real = prepared.program.real
    return look(lambda xs: [real(x) for x in xs], low, high, points=points)


def evaluate(source: Source, cell: str, given: Mapping[str, Value | int] | None = None) -> Value:
    """A cell's value computed from its formulas, with the content of some cells replaced.

    Saved values are used for neither the cell nor its precedents. Gives a float, a text, a bool,
    None for a blank cell, or a Fault whose `str` is what the cell shows; raises Unsupported
    rather than guess.
    """
    book = _book(source)
    target = book.cell(cell)
    contents: dict[Cell, Value] = {}
    for address, value in (given or {}).items():
        whole = isinstance(value, int) and not isinstance(value, bool)
        contents[book.cell(address, target.sheet)] = float(value) if whole else value  # type: ignore[arg-type]
    ledger = Ledger(Bindings(book), Policy.COMPUTED, given=contents, volatile=Volatile.PRESENT)
    return ledger.value(target)
