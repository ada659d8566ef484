"""Ledger: what every cell of a book holds, as the host saved it or as its formula gives it.

Held cells keep the values that the host last computed. A value is computed here, by the same
rules, where none was saved, where the question asks to recalculate, or where the cell depends on
a cell whose value is given (the root of an earlier solve).
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from enum import Enum

from xlroot import functions
from xlroot.bind import bind_node, walk
from xlroot.book import Book, Formula, Unsaved
from xlroot.cells import Block, Cell
from xlroot.depend import Bindings, Dependence
from xlroot.errors import CircularReference, FormulaError, Unsupported
from xlroot.formula import Area, Call, Node, read_reference
from xlroot.functions.entry import Trait
from xlroot.interpret import Mode, Scope, evaluate, formula_value, reference
from xlroot.values import Fault, Grid, Operand, Value


class Volatile(Enum):
    """Whether a formula that changes by itself (NOW, TODAY) may be computed."""

    REFUSED = "refused"
    PRESENT = "computed as of now"


class Policy(Enum):
    """Which saved values are used."""

    SAVED = "saved values where there are any"
    COMPUTED = "no saved value of a formula is used"


OwnFunction = Callable[[Call, Cell], Operand]


def _refuse_own(node: Call, cell: Cell) -> Operand:
    raise Unsupported(
        f"holds {node.name}, which is not solved within another calculation", str(cell)
    )


@dataclass(slots=True)
class Ledger:
    """The values of a book's cells; every value is found once and kept.

    `given` replaces the content of cells; what depends on them is computed afresh. `own` answers
    for xlroot's own functions.
    """

    bindings: Bindings
    policy: Policy = Policy.SAVED
    given: Mapping[Cell, Value] = field(default_factory=dict)
    own_function: OwnFunction = _refuse_own
    volatile: Volatile = Volatile.REFUSED
    _values: dict[Cell, Value] = field(default_factory=dict)
    _failed: dict[Cell, Unsupported] = field(default_factory=dict)
    _grids: dict[Block, Grid] = field(default_factory=dict)
    _arrays: dict[Cell, Grid] = field(default_factory=dict)
    _active: set[Cell] = field(default_factory=set)
    _touched: Dependence | None = None

    def __post_init__(self) -> None:
        if self.given:
            self._touched = Dependence(self.bindings, frozenset(self.given), self.resolve)

    @property
    def book(self) -> Book:
        return self.bindings.book

    def value(self, cell: Cell) -> Value:
        """What the cell holds; Unsupported where that cannot be known faithfully."""
        if cell in self._values:
            return self._values[cell]
        if cell in self.given:
            return self.given[cell]
        if cell in self._active:
            raise CircularReference(
                "depends on itself, so no value follows from the formulas", str(cell)
            )
        saved = self.book.saved(cell)
        if not self._must_compute(cell, saved):
            assert not isinstance(saved, Unsaved)
            self._values[cell] = saved
            return saved
        self._settle(cell)
        if cell in self._failed:
            raise self._failed[cell]
        return self._values[cell]

    def grid(self, block: Block) -> Grid:
        """The contents of a block."""
        found = self._grids.get(block)
        if found is None:
            used = self.book.clipped(block)
            rows = tuple(
                tuple(
                    self.value(Cell(block.sheet, row, column))
                    for column in range(used.left, used.right + 1)
                )
                for row in range(used.top, used.bottom + 1)
            )
            found = self._grids[block] = Grid(rows, block)
        return found

    def locate(self, text: str, home: Cell) -> Block | None:
        """The block that a text means as a reference in the cell's sheet, or None."""
        try:
            bound = bind_node(self.book, read_reference(text), home)
        except (FormulaError, Unsupported):
            return None
        return bound.block if isinstance(bound, Area) else None

    def own(self, node: Call, cell: Cell) -> Operand:
        """What one of xlroot's own functions gives in a cell."""
        return self.own_function(node, cell)

    def resolve(self, node: Node, cell: Cell) -> Block | None:
        """The block of a computed reference with the present values."""
        return reference(node, Scope(cell, self))

    def _must_compute(self, cell: Cell, saved: Value | Unsaved) -> bool:
        if isinstance(saved, Unsaved):
            return True
        computed = self.policy is Policy.COMPUTED or (
            self._touched is not None and self._touched.depends(cell)
        )
        if not computed:
            return False
        return self.book.formula(cell) is not None or self.bindings.master(cell) is not None

    def _settle(self, cell: Cell) -> None:
        """Computes the cell after everything that it reads, without deep recursion."""
        stack, entered = [cell], {cell}
        while stack:
            current = stack[-1]
            waiting = [each for each in self._needed(current) if each not in entered]
            if waiting:
                entered.update(waiting)
                stack.extend(waiting)
                continue
            stack.pop()
            if current in self._values or current in self._failed:
                continue
            try:
                self._values[current] = self._computed(current)
            except Unsupported as error:
                self._failed[current] = error

    def _needed(self, cell: Cell) -> list[Cell]:
        try:
            blocks = self.bindings.areas(cell)
        except Unsupported:
            return []
        needed = []
        for block in blocks:
            for each in self.bindings.formulas_in(block):
                known = each in self._values or each in self._failed or each in self.given
                if not known and self._must_compute(each, self.book.saved(each)):
                    needed.append(each)
        return needed

    def _computed(self, cell: Cell) -> Value:
        formula = self.book.formula(cell)
        if formula is None:
            master = self.bindings.master(cell)
            if master is None:
                raise Unsupported(
                    "lies in another workbook, and its value was not saved with the link; open "
                    "both, recalculate and save",
                    str(cell),
                )
            down, right = cell.row - master.row, cell.column - master.column
            return grid_part(self._array(master), down, right)
        if formula.block is not None:
            return grid_part(self._array(cell), 0, 0)
        node = self._entered(cell, formula)
        try:
            return formula_value(node, Scope(cell, self))
        finally:
            self._active.discard(cell)

    def _array(self, master: Cell) -> Grid:
        found = self._arrays.get(master)
        if found is None:
            formula = self.book.formula(master)
            assert formula is not None
            node = self._entered(master, formula)
            try:
                found = array_result(evaluate(node, Scope(master, self, Mode.ARRAY)))
            finally:
                self._active.discard(master)
            self._arrays[master] = found
        return found

    def _entered(self, cell: Cell, formula: Formula) -> Node:
        node = self.bindings.node(cell, formula)
        if self.volatile is Volatile.REFUSED:
            refuse_volatile(node, cell)
        refuse_calendar(node, cell, self.book)
        self._active.add(cell)
        return node


def array_result(operand: Operand) -> Grid:
    """An array formula's result as its cells show it; a blank element shows as 0."""
    grid = operand if isinstance(operand, Grid) else Grid(((operand,),))
    rows = tuple(tuple(0.0 if each is None else each for each in row) for row in grid.rows)
    return Grid(rows)


def grid_part(grid: Grid, row: int, column: int) -> Value:
    """What a cell of an array formula's range shows: lines of one element repeat, others end
    in #N/A (OpenFormula, section 3.3)."""
    row = 0 if grid.height == 1 else row
    column = 0 if grid.width == 1 else column
    if row >= grid.height or column >= grid.width:
        return Fault.NA
    return grid.rows[row][column]


def refuse_volatile(node: Node, cell: Cell) -> None:
    """Raises Unsupported where the formula changes without any input changing."""
    name = _first_with(node, Trait.VOLATILE)
    if name:
        raise Unsupported(
            f"uses {name}, which changes by itself; put its value in a cell instead", str(cell)
        )


def refuse_calendar(node: Node, cell: Cell, book: Book) -> None:
    """Raises Unsupported where date functions meet a book that counts from 1904."""
    name = _first_with(node, Trait.CALENDAR) if book.starts_1904 else None
    if name:
        raise Unsupported(
            f"uses {name} in a workbook that counts days from 1904; xlroot evaluates dates only "
            "in workbooks that count from 1900",
            str(cell),
        )


def _first_with(node: Node, trait: Trait) -> str | None:
    for each in walk(node):
        if isinstance(each, Call):
            entry = functions.find(each.name)
            if entry is not None and trait in entry.traits:
                return each.name
    return None
