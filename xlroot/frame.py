"""Frame: the contents of cells at one trial value."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from xlroot.cells import Block, Cell
from xlroot.formula import Call
from xlroot.ledger import Ledger
from xlroot.values import Grid, Operand, Value


@dataclass(frozen=True, slots=True)
class Frame:
    """The contents of cells at one trial value: chain cells as given, others as held."""

    ledger: Ledger
    values: Mapping[Cell, Value]
    moving: Callable[[Block], bool]

    def value(self, cell: Cell) -> Value:
        found = self.values.get(cell, _ABSENT)
        return self.ledger.value(cell) if isinstance(found, _Absent) else found

    def grid(self, block: Block) -> Grid:
        if not self.moving(block):
            return self.ledger.grid(block)
        used = self.ledger.book.clipped(block)
        columns = range(used.left, used.right + 1)
        rows = tuple(
            tuple(self.value(Cell(block.sheet, row, column)) for column in columns)
            for row in range(used.top, used.bottom + 1)
        )
        return Grid(rows, block)

    def locate(self, text: str, home: Cell) -> Block | None:
        return self.ledger.locate(text, home)

    def own(self, node: Call, cell: Cell) -> Operand:
        return self.ledger.own(node, cell)


class _Absent:
    pass


_ABSENT = _Absent()
