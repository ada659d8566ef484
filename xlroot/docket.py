"""Docket: the solves that a workbook itself asks for, found, put in order and settled.

Every formula with one of xlroot's functions is a case. A case that reads another's cell comes
after it, and sees its fresh root wherever that differs from the saved one; so a chain of solves
comes out as a host with the functions would show it.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, replace
from enum import Enum

from xlroot.bind import walk
from xlroot.book import Book, Formula
from xlroot.cells import Cell
from xlroot.depend import Bindings
from xlroot.desk import Desk, prepare
from xlroot.errors import IndependentError, QuestionError, Unsupported, XlrootError
from xlroot.formula import Area, Call, Node, Omitted
from xlroot.interpret import OWN_PREFIX, Mode, Scope, evaluate, single
from xlroot.ledger import Ledger, array_result, grid_part
from xlroot.program import Program
from xlroot.question import Question
from xlroot.record import Record
from xlroot.solving import ask, refused_record, relabelled, solve
from xlroot.values import Fault, Grid, Operand, Value, to_number, to_text
from xlroot.worksheet import BY_NAME, REFUSAL, Argument, Given, Presence, Wants

SAME = 1e-13
"""A fresh value that differs from the saved one by less than this, relatively, is the same."""


class Reads(Enum):
    """Whether a case reads the cell of another."""

    NONE = "none"
    OTHERS = "others"


@dataclass(frozen=True, slots=True)
class Case:
    """A formula of the workbook that asks xlroot something, and what its cell then shows."""

    cell: Cell
    formula: Formula
    value: Operand
    questions: tuple[Question, ...]
    """What the formula asks; empty for a scan."""


@dataclass(slots=True)
class Docket:
    """The cases of one book, settled in the order of their dependence."""

    saved: Desk
    cases: list[Case] = field(default_factory=list)
    _desk: Desk = field(init=False)
    _records: dict[Question, Record] = field(default_factory=dict)
    _settled: dict[Question, Record] = field(default_factory=dict)
    _programs: dict[tuple[Cell, Cell], Program] = field(default_factory=dict)
    _fresh: dict[Cell, Value] = field(default_factory=dict)
    _asked: list[Question] = field(default_factory=list)
    _now: Cell | None = None

    def __post_init__(self) -> None:
        self._desk = self.saved

    @classmethod
    def of(cls, book: Book) -> Docket:
        """The docket of a book, with nothing settled yet."""
        return cls(Desk.of(book))

    def settle(self, progress: Callable[[int, int], None] | None = None) -> tuple[Case, ...]:
        """Solves every case; `progress` is told how many of how many are done."""
        ordered = list(_ordered(self.saved.bindings))
        for done, (cell, reads) in enumerate(ordered):
            if progress is not None:
                progress(done, len(ordered))
            self._settle(cell, reads)
        if progress is not None:
            progress(len(ordered), len(ordered))
        return tuple(self.cases)

    def records(self) -> tuple[Record, ...]:
        """One record for every question settled, under the cell that shows its root if there is
        one, otherwise under the first cell that asks it."""
        askers: dict[Question, Cell] = {}
        for wanted in ("XLROOT(", ""):
            for case in self.cases:
                if wanted in case.formula.text.upper():
                    for question in case.questions:
                        askers.setdefault(question, case.cell)
        order = dict.fromkeys(question for case in self.cases for question in case.questions)
        return tuple(relabelled(self._settled[q], self.saved.book, askers[q]) for q in order)

    def _settle(self, cell: Cell, reads: Reads) -> None:
        formula = self.saved.book.formula(cell)
        assert formula is not None
        self._asked, self._now = [], cell
        self._sit(reads)
        reader = replace(self._desk.present, own_function=self.answer)
        try:
            node = self._desk.bindings.node(cell, formula)
            if formula.block is not None:
                value: Operand = array_result(evaluate(node, Scope(cell, reader, Mode.ARRAY)))
            else:
                value = evaluate(node, Scope(cell, reader))
        except XlrootError as error:
            value = REFUSAL + str(error)
        self.cases.append(Case(cell, formula, value, tuple(dict.fromkeys(self._asked))))
        self._publish(cell, formula, value)

    def _sit(self, reads: Reads) -> None:
        """Takes the desk with fresh roots for a case that reads another's cell, the saved one
        otherwise."""
        desk = self.saved
        if reads is Reads.OTHERS and self._fresh:
            if self._desk is not self.saved and self._desk.present.given == self._fresh:
                return
            present = Ledger(self.saved.bindings, given=dict(self._fresh))
            desk = replace(self.saved, present=present)
        if desk is not self._desk:
            self._desk = desk
            self._records.clear()
            self._programs.clear()

    def _publish(self, cell: Cell, formula: Formula, value: Operand) -> None:
        """Lets later cases see the fresh values where they differ from the saved ones."""
        grid = value if isinstance(value, Grid) else Grid(((value,),))
        cells = [cell] if formula.block is None else list(formula.block.cells())
        for each in cells:
            new = grid_part(grid, each.row - cell.row, each.column - cell.column)
            if not _same(new, self.saved.book.saved(each)):
                self._fresh[each] = new

    # -- what worksheet functions ask ----------------------------------------------------------

    def answer(self, node: Call, cell: Cell) -> Operand:
        """What one of xlroot's functions gives in a cell."""
        function = BY_NAME.get(node.name)
        if function is None:
            raise Unsupported(f"there is no worksheet function {node.name}", str(cell))
        try:
            given = self._read(node, function.arguments, cell)
        except QuestionError as error:
            return REFUSAL + str(error)
        if isinstance(given, Fault):
            return given
        try:
            return function.body(self, given)
        except QuestionError as error:
            return REFUSAL + str(error)

    def _read(self, node: Call, arguments: tuple[Argument, ...], cell: Cell) -> Given | Fault:
        required = sum(each.presence is Presence.REQUIRED for each in arguments)
        if not required <= len(node.arguments) <= len(arguments):
            raise QuestionError(
                f"{node.name} takes {required} to {len(arguments)} arguments "
                f"and has {len(node.arguments)}"
            )
        reader = replace(self._desk.present, own_function=self.answer)
        scope = Scope(cell, reader)
        given: Given = {each.name: None for each in arguments}
        for argument, written in zip(arguments, node.arguments, strict=False):
            if isinstance(written, Omitted):
                if argument.presence is Presence.REQUIRED:
                    raise QuestionError(f"{node.name} needs its argument {argument.name}")
                continue
            if argument.wants is Wants.CELL:
                given[argument.name] = _cell(written, argument, node)
                continue
            value = single(evaluate(written, scope), scope)
            if value is None and argument.presence is Presence.OPTIONAL:
                continue
            read = to_number(value) if argument.wants is Wants.NUMBER else to_text(value)
            if isinstance(read, Fault) and not isinstance(value, Fault):
                raise QuestionError(f"{node.name} needs {argument.wants.value} as {argument.name}")
            if isinstance(read, Fault):
                return read
            given[argument.name] = read
        return given

    def record(self, question: Question) -> Record:
        """The record of a question; asked twice of the same values, it is solved once."""
        found = self._records.get(question)
        if found is None:
            try:
                found = solve(self._desk, question, cell=self._now)
            except QuestionError as error:
                found = refused_record(self._desk, question, str(error), cell=self._now)
            self._records[question] = found
        self._settled[question] = found
        self._asked.append(question)
        return found

    def samples(self, question: Question, points: int) -> tuple[tuple[float, Value], ...]:
        """Trial values evenly across the bracket, and what the residual shows at each."""
        ask(self._desk.book, question)
        program = self._program(question.residual, question.unknown)
        width = question.high - question.low
        xs = [question.low + width * step / (points - 1) for step in range(points - 1)]
        return tuple((x, program.real(x)) for x in (*xs, question.high))

    def content(self, cell: Cell, unknown: Cell, x: float) -> Value:
        """What a cell would show with the unknown at x."""
        if cell == unknown:
            return x
        try:
            return self._program(cell, unknown).values_at(x)[cell]
        except IndependentError:
            return self._desk.present.value(cell)

    def _program(self, residual: Cell, unknown: Cell) -> Program:
        found = self._programs.get((residual, unknown))
        if found is None:
            prepared = prepare(self._desk, residual, unknown)
            if prepared.refusal is not None:
                raise prepared.refusal
            found = self._programs[residual, unknown] = prepared.program
        return found


def _cell(written: Node, argument: Argument, node: Call) -> Cell:
    if isinstance(written, Area) and written.block.is_cell:
        return written.block.first
    raise QuestionError(f"{node.name} needs {argument.wants.value} as {argument.name}")


def _same(new: Value, saved: object) -> bool:
    if isinstance(new, float) and isinstance(saved, float):
        return abs(new - saved) <= SAME * max(abs(new), abs(saved))
    return type(new) is type(saved) and new == saved


def _ordered(bindings: Bindings) -> Iterator[tuple[Cell, Reads]]:
    """The cells that hold xlroot's functions, each after those that it reads, and whether it
    reads any."""
    mentioned = [cell for cell, _ in bindings.book.formulas_mentioning(OWN_PREFIX)]
    cases = dict.fromkeys(cell for cell in mentioned if _asks(bindings, cell))
    touches: dict[Cell, bool] = {}
    for case in cases:
        if case in touches:
            continue
        touches[case] = False
        stack = [(case, iter(_reads(bindings, case)))]
        while stack:
            cell, reads = stack[-1]
            for each in reads:
                if each not in touches:
                    touches[each] = False
                    stack.append((each, iter(_reads(bindings, each))))
                    break
                if touches[each] or each in cases:
                    touches[cell] = True
            else:
                stack.pop()
                if stack and (touches[cell] or cell in cases):
                    touches[stack[-1][0]] = True
                if cell in cases:
                    yield cell, Reads.OTHERS if touches[cell] else Reads.NONE


def _asks(bindings: Bindings, cell: Cell) -> bool:
    """Whether the formula calls one of xlroot's functions; one that cannot be read does not."""
    formula = bindings.book.formula(cell)
    assert formula is not None
    try:
        nodes = walk(bindings.node(cell, formula))
        return any(isinstance(each, Call) and each.name.startswith(OWN_PREFIX) for each in nodes)
    except Unsupported:
        return OWN_PREFIX in formula.text.upper()


def _reads(bindings: Bindings, cell: Cell) -> list[Cell]:
    try:
        blocks = bindings.areas(cell)
    except Unsupported:
        return []
    return [each for block in blocks for each in bindings.formulas_in(block)]
