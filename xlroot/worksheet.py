"""xlroot's worksheet functions, declared once.

The reader of saved workbooks and every host work from this table: name, arguments with their
help, one line of help, the shape of the result, and the body. A new worksheet function is one
entry in `FUNCTIONS`.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from enum import Enum
from typing import Protocol

from xlroot.cells import Cell
from xlroot.errors import QuestionError
from xlroot.question import Question
from xlroot.record import Record
from xlroot.stopping import SafeSide
from xlroot.values import Grid, Operand, Value


class Wants(Enum):
    """What an argument is."""

    CELL = "a reference to one cell"
    NUMBER = "a number"
    TEXT = "a text"


class Presence(Enum):
    """Whether an argument may be left out; optional ones come last."""

    REQUIRED = "required"
    OPTIONAL = "optional"


class Shape(Enum):
    """How many cells a result fills."""

    VALUE = "one cell"
    ROW = "one row"
    TABLE = "a table"


@dataclass(frozen=True, slots=True)
class Argument:
    """One argument of a worksheet function."""

    name: str
    wants: Wants
    help: str
    presence: Presence = Presence.REQUIRED


class Answers(Protocol):
    """What a body needs of the place where it runs."""

    def record(self, question: Question) -> Record: ...

    def samples(self, question: Question, points: int) -> tuple[tuple[float, Value], ...]: ...

    def content(self, cell: Cell, unknown: Cell, x: float) -> Value: ...


Given = dict[str, Cell | float | str | None]
"""Arguments by name, as read; None for one that was left out."""

Body = Callable[[Answers, Given], Operand]


@dataclass(frozen=True, slots=True)
class WorksheetFunction:
    """One worksheet function."""

    name: str
    help: str
    arguments: tuple[Argument, ...]
    shape: Shape
    body: Body
    solves: bool = True
    """Whether it asks a question that leaves a record."""


CUSTOMARY_POINTS = 41
MOST_POINTS = 10_000
"""Points of a scan, where none are stated and at most."""

REFUSAL = "xlroot: "
"""How the text of a refused solve begins."""

_RESIDUAL = Argument("residual", Wants.CELL, "the formula cell to be driven to zero")
_UNKNOWN = Argument("unknown", Wants.CELL, "the input cell whose value is sought")
_LOW = Argument("low", Wants.NUMBER, "the low end of the bracket, in the unknown's unit")
_HIGH = Argument("high", Wants.NUMBER, "the high end of the bracket, in the unknown's unit")
_METHOD = Argument(
    "method",
    Wants.TEXT,
    'the method by name, for example "bisection"; left out, xlroot chooses and says so',
    Presence.OPTIONAL,
)
_TOLERANCE = Argument(
    "tolerance",
    Wants.NUMBER,
    "how narrow the enclosure has to become, in the unknown's unit",
    Presence.OPTIONAL,
)
_SAFE_SIDE = Argument(
    "safe_side",
    Wants.TEXT,
    'the acceptable sign of the residual, "positive" or "negative": the end of the enclosure '
    "with that sign is returned",
    Presence.OPTIONAL,
)
_QUESTION = (_RESIDUAL, _UNKNOWN, _LOW, _HIGH, _METHOD, _TOLERANCE, _SAFE_SIDE)


def question_of(given: Given) -> Question:
    """The question that a function's arguments ask; QuestionError if they cannot."""
    residual, unknown = given["residual"], given["unknown"]
    low, high = given["low"], given["high"]
    assert isinstance(residual, Cell)
    assert isinstance(unknown, Cell)
    assert isinstance(low, float)
    assert isinstance(high, float)
    tolerance = given.get("tolerance")
    return Question(
        residual,
        unknown,
        low,
        high,
        method=str(given.get("method") or "auto"),
        tolerance=tolerance if isinstance(tolerance, float) else None,
        safe_side=SafeSide.read(str(given.get("safe_side") or "")),
    )


def _root(answers: Answers, given: Given) -> Operand:
    record = answers.record(question_of(given))
    return REFUSAL + record.verdict.reason if record.root is None else record.root


def _bounds(answers: Answers, given: Given) -> Operand:
    verdict = answers.record(question_of(given)).verdict
    if verdict.low is None or verdict.high is None:
        text = REFUSAL + verdict.reason
        return Grid(((text, text),))
    return Grid(((verdict.low, verdict.high),))


def _verdict(answers: Answers, given: Given) -> Operand:
    verdict = answers.record(question_of(given)).verdict
    return f"{verdict.status.value}: {verdict.reason}"


def _record(answers: Answers, given: Given) -> Operand:
    record = answers.record(question_of(given))
    rows: list[tuple[str, Value]] = [
        ("statement", record.statement),
        ("unknown", str(record.question.unknown)),
        ("residual", str(record.question.residual)),
        ("low", record.question.low),
        ("high", record.question.high),
        ("method", record.method),
        ("tolerance", record.tolerance),
        ("root", record.root),
        ("unit", record.unit),
        ("enclosure, low", record.verdict.low),
        ("enclosure, high", record.verdict.high),
        ("residual at the root", record.residual_at_root),
        ("slope at the root", record.slope_at_root),
        ("verdict", record.verdict.status.value),
        ("reason", record.verdict.reason),
        ("iterations predicted", _count(record.predicted_iterations)),
        ("iterations used", float(record.iterations)),
        ("evaluations", float(record.evaluations)),
        ("fingerprint", record.fingerprint),
    ]
    return Grid(tuple((text, "" if value is None else value) for text, value in rows))


def _count(number: int | None) -> float | None:
    return None if number is None else float(number)


def _steps(answers: Answers, given: Given) -> Operand:
    record = answers.record(question_of(given))
    if not record.iterates:
        return Grid(((REFUSAL + record.verdict.reason,),))
    header: tuple[Value, ...] = ("n", "x", "residual", "low", "high")
    rows = [
        (float(each.n), each.x, each.f, _shown(each.low), _shown(each.high))
        for each in record.iterates
    ]
    return Grid((header, *rows))


def _shown(number: float | None) -> Value:
    return "" if number is None else number


def _scan(answers: Answers, given: Given) -> Operand:
    points = given.get("points")
    count = CUSTOMARY_POINTS if points is None else points
    if not isinstance(count, float | int) or not 2 <= count <= MOST_POINTS:
        raise QuestionError(f"a scan takes 2 to {MOST_POINTS:,} points")
    return Grid(answers.samples(question_of(given), int(count)))


def _at(answers: Answers, given: Given) -> Operand:
    cell, unknown, x = given["cell"], given["unknown"], given["x"]
    assert isinstance(cell, Cell)
    assert isinstance(unknown, Cell)
    assert isinstance(x, float)
    return answers.content(cell, unknown, x)


FUNCTIONS: tuple[WorksheetFunction, ...] = (
    WorksheetFunction(
        "XLROOT",
        "The value of the unknown at which the residual is zero; no cell is changed",
        _QUESTION,
        Shape.VALUE,
        _root,
    ),
    WorksheetFunction(
        "XLROOT_BOUNDS",
        "The low and the high end of the enclosure of the root, side by side",
        _QUESTION,
        Shape.ROW,
        _bounds,
    ),
    WorksheetFunction(
        "XLROOT_VERDICT",
        "How well the root is known, and why",
        _QUESTION,
        Shape.VALUE,
        _verdict,
    ),
    WorksheetFunction(
        "XLROOT_RECORD",
        "The record of the solve as a table of two columns",
        _QUESTION,
        Shape.TABLE,
        _record,
    ),
    WorksheetFunction(
        "XLROOT_STEPS",
        "The iterates of the search, one a row, under a heading",
        _QUESTION,
        Shape.TABLE,
        _steps,
    ),
    WorksheetFunction(
        "XLROOT_SCAN",
        "Trial values across the bracket and the residual at each, to chart",
        (
            _RESIDUAL,
            _UNKNOWN,
            _LOW,
            _HIGH,
            Argument(
                "points", Wants.NUMBER, "how many trial values, 41 if left out", Presence.OPTIONAL
            ),
        ),
        Shape.TABLE,
        _scan,
        solves=False,
    ),
    WorksheetFunction(
        "XLROOT_AT",
        "What a cell would show with the unknown at x; no cell is changed",
        (
            Argument("cell", Wants.CELL, "the cell whose value is wanted"),
            _UNKNOWN,
            Argument("x", Wants.NUMBER, "the trial value of the unknown"),
        ),
        Shape.VALUE,
        _at,
        solves=False,
    ),
)
"""All worksheet functions, in the order in which they are documented."""

BY_NAME = {function.name: function for function in FUNCTIONS}
"""The worksheet functions by name."""
