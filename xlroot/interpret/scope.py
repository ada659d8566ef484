"""Where a formula is evaluated: its cell, the contents of cells, how ranges are taken."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from enum import Enum
from typing import Protocol

from xlroot.cells import Block, Cell
from xlroot.errors import Unsupported
from xlroot.formula import Call, Node
from xlroot.values import Fault, Grid, Operand, Value


class Mode(Enum):
    """How a formula treats a range where one value is expected."""

    PLAIN = "implicit intersection"
    ARRAY = "element by element"


class Reader(Protocol):
    """Where the interpreter gets the content of cells."""

    def value(self, cell: Cell) -> Value: ...

    def grid(self, block: Block) -> Grid: ...

    def locate(self, text: str, home: Cell) -> Block | None:
        """The block that a text means as a reference, for INDIRECT; None if it means none."""
        ...

    def own(self, node: Call, cell: Cell) -> Operand:
        """What one of xlroot's own functions gives in a cell; Unsupported where it may not be
        asked."""
        ...


@dataclass(frozen=True, slots=True)
class Closure:
    """A function value: LAMBDA with the variables around it."""

    parameters: tuple[str, ...]
    body: Node
    variables: Mapping[str, Operand | Closure]


@dataclass(frozen=True, slots=True)
class Scope:
    """Where a formula is evaluated: its cell, its mode, the cells' contents, its variables."""

    cell: Cell
    reader: Reader
    mode: Mode = Mode.PLAIN
    variables: Mapping[str, Operand | Closure] | None = None

    def refuse(self, reason: str) -> Unsupported:
        return Unsupported(reason, str(self.cell))


Evaluate = Callable[[Node, Scope], Operand]
"""The interpreter, for modules that it calls."""


def single(operand: Operand, scope: Scope) -> Value:
    """One value: the operand itself, or the part of a range that the formula's cell lines up
    with, or the first element of an array."""
    if not isinstance(operand, Grid):
        return operand
    block = operand.block
    if block is None or block.is_cell:
        return operand.rows[0][0]
    if block.width == 1 and block.top <= scope.cell.row <= block.bottom:
        return scope.reader.value(Cell(block.sheet, scope.cell.row, block.left))
    if block.height == 1 and block.left <= scope.cell.column <= block.right:
        return scope.reader.value(Cell(block.sheet, block.top, scope.cell.column))
    return Fault.VALUE


def by_element(operand: Operand, scope: Scope) -> bool:
    """Whether an operation goes through the operand element by element: every grid in an array
    formula, and an array, which no cell can line up with, in a plain one."""
    if not isinstance(operand, Grid):
        return False
    return scope.mode is Mode.ARRAY or (operand.block is None and operand.extent != (1, 1))


def settled(operand: Operand, scope: Scope) -> Operand:
    """The operand as an operation by element takes it."""
    return operand if by_element(operand, scope) else single(operand, scope)


def lift(operate: Callable[..., Operand], operands: tuple[Operand, ...]) -> Grid:
    """The operation element by element; a single row, column or value is repeated, and what one
    operand lacks is #N/A."""
    grids = [each if isinstance(each, Grid) else Grid(((each,),)) for each in operands]
    if any(grid.is_cut for grid in grids):
        raise Unsupported("works on a whole column element by element; name the rows meant")
    height = max(grid.height for grid in grids)
    width = max(grid.width for grid in grids)
    rows = []
    for row in range(height):
        values = []
        for column in range(width):
            result = operate(*(_element(grid, row, column) for grid in grids))
            values.append(result.rows[0][0] if isinstance(result, Grid) else result)
        rows.append(tuple(values))
    return Grid(tuple(rows))


def lift_within(
    operate: Callable[..., Operand], operands: tuple[Operand, ...], scope: Scope
) -> Grid:
    try:
        return lift(operate, operands)
    except Unsupported as error:
        raise scope.refuse(error.reason) from None


def _element(grid: Grid, row: int, column: int) -> Value:
    row = 0 if grid.height == 1 else row
    column = 0 if grid.width == 1 else column
    if row >= grid.height or column >= grid.width:
        return Fault.NA
    return grid.rows[row][column]
