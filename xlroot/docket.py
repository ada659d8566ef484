"""Docket: the solves that a workbook itself asks for, found, put in order and settled.

Every formula with one of xlroot's functions is a case. A case that reads another's cell comes
after it, and sees its fresh root wherever that differs from the saved one; so a chain of solves
comes out as a host with the functions would show it.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, replace

from xlroot.bind import walk
from xlroot.book import Book, Formula
from xlroot.cells import Cell
from xlroot.depend import Bindings
from xlroot.errors import IndependentError, QuestionError, Unsupported, XlrootError
from xlroot.formula import Area, Call, Node, Omitted
from xlroot.interpret import OWN_PREFIX, Mode, Scope, evaluate, single
from xlroot.ledger import Ledger, array_result, grid_part
from xlroot.program import Program
from xlroot.question import Question
from xlroot.record import Record
from xlroot.solve import Desk, ask, prepare, refused_record, solve
from xlroot.values import Fault, Grid, Operand, Value, to_number, to_text
from xlroot.worksheet import BY_NAME, REFUSAL, Argument, Given, Presence, Wants

SAME = 1e-13
"""A fresh value that differs from the saved one by less than this, relatively, is the same."""


@dataclass(frozen=True, slots=True)
class Case:
    """A formula of the workbook that asks xlroot something; `record` if it left one."""

    cell: Cell
    formula: Formula
    value: Operand
    record: Record | None


@dataclass(slots=True)
class Docket:
    """The cases of one book, settled in the order of their dependence."""

    desk: Desk
    cases: list[Case] = field(default_factory=list)
    _records: dict[Question, Record] = field(default_factory=dict)
    _programs: dict[tuple[Cell, Cell], Program] = field(default_factory=dict)
    _given: dict[Cell, Value] = field(default_factory=dict)
    _asked: list[Record] = field(default_factory=list)
    _now: Cell | None = None

    @classmethod
    def of(cls, book: Book) -> Docket:
        return cls(Desk.of(book))

    def settle(self, progress: Callable[[int, int], None] | None = None) -> tuple[Case, ...]:
        """Solves every case; `progress` is told how many of how many are done."""
        ordered = list(_ordered(self.desk.bindings))
        for done, cell in enumerate(ordered):
            if progress is not None:
                progress(done, len(ordered))
            self._settle(cell)
        if progress is not None:
            progress(len(ordered), len(ordered))
        return tuple(self.cases)

    def _settle(self, cell: Cell) -> None:
        formula = self.desk.book.formula(cell)
        assert formula is not None
        self._asked, self._now = [], cell
        reader = replace(self.desk.present, own_function=self.answer)
        try:
            node = self.desk.bindings.node(cell, formula)
            if formula.block is not None:
                value: Operand = array_result(evaluate(node, Scope(cell, reader, Mode.ARRAY)))
            else:
                value = evaluate(node, Scope(cell, reader))
        except XlrootError as error:
            value = REFUSAL + str(error)
        record = self._asked[0] if self._asked else None
        self.cases.append(Case(cell, formula, value, record))
        self._publish(cell, formula, value)

    def _publish(self, cell: Cell, formula: Formula, value: Operand) -> None:
        """Lets later cases see the fresh values where they differ from the saved ones."""
        grid = value if isinstance(value, Grid) else Grid(((value,),))
        cells = [cell] if formula.block is None else list(formula.block.cells())
        fresh = {
            each: grid_part(grid, each.row - cell.row, each.column - cell.column) for each in cells
        }
        changed = {
            each: new for each, new in fresh.items() if not _same(new, self.desk.book.saved(each))
        }
        if changed:
            self._given.update(changed)
            present = Ledger(self.desk.bindings, given=dict(self._given))
            self.desk = replace(self.desk, present=present)
            self._records.clear()
            self._programs.clear()

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
        reader = replace(self.desk.present, own_function=self.answer)
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
                found = solve(self.desk, question, cell=self._now)
            except QuestionError as error:
                found = refused_record(self.desk, question, str(error), cell=self._now)
            self._records[question] = found
        self._asked.append(found)
        return found

    def samples(self, question: Question, points: int) -> tuple[tuple[float, Value], ...]:
        """Trial values evenly across the bracket, and what the residual shows at each."""
        ask(self.desk.book, question)
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
            return self.desk.present.value(cell)

    def _program(self, residual: Cell, unknown: Cell) -> Program:
        found = self._programs.get((residual, unknown))
        if found is None:
            prepared = prepare(self.desk, residual, unknown)
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


def _ordered(bindings: Bindings) -> Iterator[Cell]:
    """The cells that hold xlroot's functions, each after those that it reads."""
    cases = {cell: None for cell, _ in bindings.book.formulas_mentioning(OWN_PREFIX)}
    cases = {cell: None for cell in cases if _asks(bindings, cell)}
    reached: dict[Cell, bool] = {}
    for case in cases:
        stack = [(case, iter(_reads(bindings, case)))]
        reached.setdefault(case, False)
        while stack:
            cell, reads = stack[-1]
            for each in reads:
                if each not in reached:
                    reached[each] = False
                    stack.append((each, iter(_reads(bindings, each))))
                    break
            else:
                stack.pop()
                if not reached[cell]:
                    reached[cell] = True
                    if cell in cases:
                        yield cell


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
