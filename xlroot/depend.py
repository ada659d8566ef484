"""Which cells a formula reads, and whether a cell depends on given ones.

Everything here walks iteratively: chains of thousands of cells are ordinary. Only formulas that
are reached are read and bound.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field

from xlroot.bind import bind, walk
from xlroot.book import Book, Formula
from xlroot.cells import Block, Cell
from xlroot.errors import Unsupported
from xlroot.formula import Area, Binary, Call, Node
from xlroot.interpret import REFERENCE_MAKERS


@dataclass(slots=True)
class Bindings:
    """The bound formulas of one book, each bound once; a memory, never a second truth."""

    book: Book
    _bound: dict[Cell, Node] = field(default_factory=dict)
    _areas: dict[Cell, tuple[Block, ...]] = field(default_factory=dict)
    _formulas: dict[Block, tuple[Cell, ...]] = field(default_factory=dict)

    def node(self, cell: Cell, formula: Formula) -> Node:
        """The formula bound to the cell; Unsupported if it cannot be."""
        found = self._bound.get(cell)
        if found is None:
            found = self._bound[cell] = bind(self.book, formula, cell)
        return found

    def master(self, cell: Cell) -> Cell | None:
        """The cell whose array formula fills this one, or None."""
        if not self.book.sheet_by_name[cell.sheet].arrays:
            return None
        formula = self.book.array_over(cell)
        if formula is None or formula.block is None or formula.block.first == cell:
            return None
        return formula.block.first

    def areas(self, cell: Cell) -> tuple[Block, ...]:
        """The blocks that the cell's formula names, computed references aside."""
        found = self._areas.get(cell)
        if found is None:
            formula = self.book.formula(cell)
            if formula is None:
                master = self.master(cell)
                found = () if master is None else (Block.of(master),)
            else:
                nodes = walk(self.node(cell, formula))
                found = tuple(dict.fromkeys(n.block for n in nodes if isinstance(n, Area)))
            self._areas[cell] = found
        return found

    def computed(self, cell: Cell) -> tuple[Node, ...]:
        """The parts of the cell's formula that compute a reference: OFFSET, INDIRECT, a colon."""
        formula = self.book.formula(cell)
        if formula is None:
            return ()
        return tuple(each for each in walk(self.node(cell, formula)) if computes_reference(each))

    def formulas_in(self, block: Block) -> tuple[Cell, ...]:
        """The cells of the block that hold or receive a formula's value."""
        found = self._formulas.get(block)
        if found is None:
            found = self._formulas[block] = tuple(self._find_formulas(block))
        return found

    def _find_formulas(self, block: Block) -> Iterator[Cell]:
        sheet = self.book.sheet_by_name[block.sheet]
        formulas = sheet.formulas
        if block.height * block.width <= len(formulas):
            for cell in block.cells():
                if (cell.row, cell.column) in formulas:
                    yield cell
        else:
            for row, column in formulas:
                if block.top <= row <= block.bottom and block.left <= column <= block.right:
                    yield Cell(block.sheet, row, column)
        for array in sheet.arrays:
            if array.block is not None:
                for cell in array.block.cells():
                    if cell != array.block.first and block.holds(cell):
                        yield cell


def computes_reference(node: Node) -> bool:
    """Whether the node's reference is known only once its arguments are."""
    if isinstance(node, Call):
        return node.name in REFERENCE_MAKERS
    return isinstance(node, Binary) and node.operator == ":"


@dataclass(slots=True)
class Dependence:
    """Whether cells depend on any of the targets.

    `resolve` gives the block of a computed reference as it stands with the present values.
    `order` lists the dependent cells found so far, each after those that it reads; `cycles` the
    circles of cells that were met.
    """

    bindings: Bindings
    targets: frozenset[Cell]
    resolve: Callable[[Node, Cell], Block | None]
    order: list[Cell] = field(default_factory=list)
    cycles: list[tuple[Cell, ...]] = field(default_factory=list)
    _known: dict[Cell, bool] = field(default_factory=dict)

    def depends(self, cell: Cell) -> bool:
        """Whether the cell depends on a target; a target itself does."""
        if cell in self.targets:
            return True
        known = self._known.get(cell)
        return self._search(cell) if known is None else known

    def _search(self, cell: Cell) -> bool:
        path: dict[Cell, Iterator[Cell]] = {cell: self._precedents(cell)}
        found: dict[Cell, bool] = {cell: False}
        stack = [cell]
        while stack:
            current = stack[-1]
            for precedent in path[current]:
                if precedent in self.targets or self._known.get(precedent):
                    found[current] = True
                elif precedent in path:
                    start = stack.index(precedent)
                    self.cycles.append(tuple(stack[start:]))
                elif precedent not in self._known:
                    path[precedent] = self._precedents(precedent)
                    found[precedent] = False
                    stack.append(precedent)
                    break
            else:
                stack.pop()
                del path[current]
                depends = self._known[current] = found.pop(current)
                if depends:
                    self.order.append(current)
                    if stack:
                        found[stack[-1]] = True
        return self._known[cell]

    def _precedents(self, cell: Cell) -> Iterator[Cell]:
        for block in self.blocks(cell):
            if block.is_cell:
                if block.first in self.targets:
                    yield block.first
            else:
                yield from filter(block.holds, self.targets)
            yield from self.bindings.formulas_in(block)

    def blocks(self, cell: Cell) -> tuple[Block, ...]:
        """All blocks that the cell reads, computed references as they stand."""
        blocks = list(self.bindings.areas(cell))
        for node in self.bindings.computed(cell):
            try:
                block = self.resolve(node, cell)
            except Unsupported:
                # The chain resolves it again and then refuses for a stated reason.
                block = None
            if block is not None:
                blocks.append(self.bindings.book.clipped(block))
        return tuple(dict.fromkeys(blocks))
