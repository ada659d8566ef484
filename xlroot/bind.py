"""A formula bound to its cell: every reference absolute, every name and table resolved.

Binding turns `Reference`, `NameUse` and `TableUse` into `Area`, a block of a named sheet, or into
what a name stands for. References that are computed (OFFSET, INDIRECT, `A1:INDEX(…)`) stay calls;
the interpreter, or the chain for constant arguments, resolves them. What cannot be bound
faithfully raises Unsupported with the formula's cell.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from xlroot.book import Book, Formula, is_linked
from xlroot.catalogue import did_you_mean
from xlroot.cells import LAST_COLUMN, LAST_ROW, Block, Cell
from xlroot.errors import AddressError, FormulaError, Unsupported
from xlroot.formula import (
    Apply,
    Area,
    Binary,
    Call,
    Literal,
    Local,
    NameUse,
    Node,
    Reference,
    TableUse,
    Unary,
    Union,
    parse,
)
from xlroot.tables import table_block
from xlroot.values import Fault

_DEEPEST_NAME = 32


@dataclass(frozen=True, slots=True)
class _Place:
    """Where a formula is bound: the book, its cell, how far it moved, and local variables."""

    book: Book
    cell: Cell
    down: int
    right: int
    sheet: str
    variables: frozenset[str] = frozenset()
    depth: int = 0

    def refuse(self, reason: str) -> Unsupported:
        return Unsupported(reason, str(self.cell))


def bind(book: Book, formula: Formula, cell: Cell) -> Node:
    """The formula's tree as it reads in `cell`; Unsupported, with the cell, if it cannot be."""
    try:
        tree = parse(formula.text)
    except FormulaError as error:
        raise Unsupported(str(error), str(cell)) from None
    down, right = cell.row - formula.home.row, cell.column - formula.home.column
    return _bind(tree, _Place(book, cell, down, right, cell.sheet))


def bind_node(book: Book, node: Node, cell: Cell) -> Node:
    """A single node, for example a reference read at run time, bound as it reads in `cell`."""
    return _bind(node, _Place(book, cell, 0, 0, cell.sheet))


def walk(node: Node) -> Iterator[Node]:
    """The node and all nodes below it."""
    pending = [node]
    while pending:
        each = pending.pop()
        yield each
        if isinstance(each, Binary):
            pending += (each.right, each.left)
        elif isinstance(each, Call):
            pending += reversed(each.arguments)
        elif isinstance(each, Unary):
            pending.append(each.operand)
        elif isinstance(each, Union):
            pending += each.parts
        elif isinstance(each, Apply):
            pending += (*each.arguments, each.function)


def _bind(node: Node, place: _Place) -> Node:
    if isinstance(node, Reference):
        return _area(node, place)
    if isinstance(node, Binary):
        return _binary(node, place)
    if isinstance(node, Call):
        return _call(node, place)
    if isinstance(node, NameUse):
        return _name(node, place)
    if isinstance(node, Unary):
        return _unary(node, place)
    if isinstance(node, TableUse):
        return _table(node, place)
    if isinstance(node, Apply):
        arguments = tuple(_bind(each, place) for each in node.arguments)
        return Apply(_bind(node.function, place), arguments)
    return node


def _area(node: Reference, place: _Place) -> Node:
    sheet = place.sheet if node.sheet is None else _sheet(node.sheet, place)
    rows, columns = [], []
    for corner in (node.first, node.last):
        rows.append(corner.row if corner.row_fixed else corner.row + place.down)
        columns.append(corner.column if corner.column_fixed else corner.column + place.right)
    top, bottom = min(rows), max(rows)
    left, right = min(columns), max(columns)
    if top < 1 or left < 1 or bottom > LAST_ROW or right > LAST_COLUMN:
        return Literal(Fault.REF)
    return Area(Block(sheet, top, left, bottom, right))


def _sheet(name: str, place: _Place) -> str:
    if is_linked(name) and place.book.has_sheet(name):
        return place.book.sheet_name(name)
    if "[" in name or "|" in name or "/" in name or "\\" in name:
        raise place.refuse(
            f"refers to another workbook ({name}); copy the value into this workbook"
        )
    if ":" in name and not place.book.has_sheet(name):
        raise place.refuse(f"refers to a cell through several sheets ({name}); name one sheet")
    try:
        return place.book.sheet_name(name)
    except AddressError as error:
        raise place.refuse(str(error)) from None


def _name(node: NameUse, place: _Place) -> Node:
    name = _variable(node.name)
    if node.sheet is None and name in place.variables:
        return Local(name)
    scope = place.sheet
    if node.sheet is not None and place.book.has_sheet(node.sheet):
        scope = place.book.sheet_name(node.sheet)
    elif node.sheet is not None:
        _sheet(node.sheet, place)
    defined = place.book.name(node.name, scope)
    if defined is None:
        table = place.book.table(node.name)
        if table is not None:
            block = table_block(table, "", place.cell)
            return Literal(Fault.REF) if block is None else Area(block)
        hint = did_you_mean(node.name, [each.name for each in place.book.names])
        raise place.refuse(f"uses the name {node.name}, which the workbook does not define{hint}")
    if place.depth >= _DEEPEST_NAME:
        raise place.refuse(f"the name {node.name} is defined through itself")
    try:
        tree = parse(defined.text)
    except FormulaError as error:
        raise place.refuse(f"the name {node.name} cannot be read: {error}") from None
    # A name's relative references are written as seen from A1 (ECMA-376 part 1, 18.2.5).
    inner = _Place(
        place.book,
        place.cell,
        place.cell.row - 1,
        place.cell.column - 1,
        defined.sheet or place.sheet,
        depth=place.depth + 1,
    )
    return _bind(tree, inner)


def _table(node: TableUse, place: _Place) -> Node:
    if "[" in node.table or node.table.startswith("'"):
        raise place.refuse(f"refers to another workbook ({node.table})")
    table = place.book.table(node.table) if node.table else place.book.table_at(place.cell)
    if table is None:
        hint = did_you_mean(node.table, [each.name for each in place.book.tables])
        raise place.refuse(f"refers to the table {node.table or 'around it'}, which is not{hint}")
    try:
        block = table_block(table, node.inside, place.cell)
    except AddressError as error:
        raise place.refuse(str(error)) from None
    return Literal(Fault.VALUE) if block is None else Area(block)


def _unary(node: Unary, place: _Place) -> Node:
    operand = _bind(node.operand, place)
    if node.operator != "#":
        return Unary(node.operator, operand)
    if isinstance(operand, Area) and operand.block.is_cell:
        formula = place.book.formula(operand.block.first)
        if formula is not None and formula.block is not None:
            return Area(formula.block)
    raise place.refuse("uses # behind a cell that does not hold an array formula")


def _binary(node: Binary, place: _Place) -> Node:
    # Long sums lean to the left; a loop keeps the recursion shallow.
    pending: list[tuple[str, Node]] = []
    left: Node = node
    while isinstance(left, Binary):
        pending.append((left.operator, left.right))
        left = left.left
    bound = _bind(left, place)
    for operator, right in reversed(pending):
        bound = _joined(operator, bound, _bind(right, place), place)
    return bound


def _joined(operator: str, left: Node, right: Node, place: _Place) -> Node:
    if operator == ",":
        parts = left.parts if isinstance(left, Union) else (left,)
        return Union((*parts, right))
    if operator in ": " and isinstance(left, Area) and isinstance(right, Area):
        return _span(left.block, right.block) if operator == ":" else _cut(left.block, right.block)
    if operator == " ":
        raise place.refuse("intersects ranges that are computed; write the range itself")
    return Binary(operator, left, right)


def _span(a: Block, b: Block) -> Node:
    if a.sheet != b.sheet:
        return Literal(Fault.VALUE)
    return Area(
        Block(
            a.sheet,
            min(a.top, b.top),
            min(a.left, b.left),
            max(a.bottom, b.bottom),
            max(a.right, b.right),
        )
    )


def _cut(a: Block, b: Block) -> Node:
    top, bottom = max(a.top, b.top), min(a.bottom, b.bottom)
    left, right = max(a.left, b.left), min(a.right, b.right)
    if a.sheet != b.sheet or top > bottom or left > right:
        return Literal(Fault.NULL)
    return Area(Block(a.sheet, top, left, bottom, right))


def _call(node: Call, place: _Place) -> Node:
    if node.name in ("LET", "LAMBDA"):
        return _scoped(node, place)
    if node.name in ("ROW", "COLUMN") and not node.arguments:
        return Literal(float(place.cell.row if node.name == "ROW" else place.cell.column))
    arguments = tuple(_bind(each, place) for each in node.arguments)
    if _variable(node.name) in place.variables:
        return Apply(Local(_variable(node.name)), arguments)
    return Call(node.name, arguments)


def _scoped(node: Call, place: _Place) -> Node:
    """LET and LAMBDA: names become local variables of what follows them."""
    last = len(node.arguments) - 1
    bound: list[Node] = []
    variables = place.variables
    for position, argument in enumerate(node.arguments):
        is_name = position < last and (node.name == "LAMBDA" or position % 2 == 0)
        if is_name:
            if not isinstance(argument, NameUse) or argument.sheet is not None:
                raise place.refuse(f"{node.name} needs a plain name as argument {position + 1}")
            bound.append(Local(_variable(argument.name)))
            if node.name == "LAMBDA":
                variables |= {_variable(argument.name)}
        else:
            inner = _Place(
                place.book,
                place.cell,
                place.down,
                place.right,
                place.sheet,
                variables,
                place.depth,
            )
            bound.append(_bind(argument, inner))
            if node.name == "LET" and position < last:
                name = bound[position - 1]
                variables |= {name.name} if isinstance(name, Local) else frozenset()
    if not bound or (node.name == "LET" and len(bound) % 2 == 0):
        raise place.refuse(f"{node.name} has the wrong number of arguments")
    return Call(node.name, tuple(bound))


def _variable(name: str) -> str:
    folded = name.casefold()
    return folded.removeprefix("_xlpm.")
