"""The value of a bound formula, by the rules of spreadsheets: exact semantics, one formula at
a time.

This is the reference that compiled programs are held to, and what evaluates everything that is
not worth compiling: held cells without saved values, constant parts of a chain, faults. A plain
formula takes one value from a range where one is expected (implicit intersection, OpenFormula
section 3.3); an array formula works element by element. Faults are values; what cannot be
evaluated faithfully raises Unsupported.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from enum import Enum
from functools import partial
from typing import Protocol

from xlroot import functions
from xlroot.catalogue import did_you_mean
from xlroot.cells import Block, Cell
from xlroot.errors import Unsupported
from xlroot.formula import (
    Apply,
    Area,
    Array,
    Binary,
    Call,
    Literal,
    Local,
    Node,
    Omitted,
    Unary,
    Union,
)
from xlroot.functions.entry import Entry, Takes
from xlroot.kinds.real import OPERATORS, negate, percent
from xlroot.values import Fault, Grid, Operand, Value, to_logical, to_number, to_text


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


ARRAY_TAKERS = frozenset(
    {
        "SUMPRODUCT",
        "MMULT",
        "MDETERM",
        "MINVERSE",
        "LOOKUP",
        "LINEST",
        "LOGEST",
        "TREND",
        "GROWTH",
        "CORREL",
        "COVAR",
        "PEARSON",
        "RSQ",
        "SLOPE",
        "INTERCEPT",
        "FORECAST",
        "FORECAST.LINEAR",
        "STEYX",
        "SUMX2MY2",
        "SUMX2PY2",
        "SUMXMY2",
        "FREQUENCY",
        "PROB",
        "TTEST",
        "T.TEST",
        "FTEST",
        "F.TEST",
        "CHITEST",
        "CHISQ.TEST",
        "COVARIANCE.P",
        "COVARIANCE.S",
        "MODE",
        "MODE.SNGL",
        "XLOOKUP",
        "XMATCH",
    }
)
"""Functions whose arguments are computed element by element even in a plain formula."""

OWN_PREFIX = "XLROOT"
"""How the names of xlroot's own functions begin."""

CHOOSERS = frozenset(("IF", "IFS", "SWITCH", "CHOOSE"))
"""Functions that may give a reference as it is."""

SINGLE_LINE = frozenset(("SUM", "PRODUCT", "MIN", "MAX", "AVERAGE", "COUNT", "COUNTA", "SUMSQ"))
"""Functions that take every range by itself, so that unlike extents do no harm."""

REFERENCE_MAKERS = frozenset(("OFFSET", "INDIRECT"))
"""Functions that compute a reference."""


def evaluate(node: Node, scope: Scope) -> Operand:
    """The value or grid of a bound node."""
    result = _evaluate(node, scope)
    if isinstance(result, Closure):
        raise scope.refuse("a LAMBDA that is not called has no value")
    return result


def formula_value(node: Node, scope: Scope) -> Value:
    """The value that a plain formula's cell shows; a blank result shows as 0."""
    result = single(evaluate(node, scope), scope)
    return 0.0 if result is None else result


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


def _evaluate(node: Node, scope: Scope) -> Operand | Closure:
    if isinstance(node, Literal):
        return node.value
    if isinstance(node, Area):
        block = node.block
        return scope.reader.value(block.first) if block.is_cell else scope.reader.grid(block)
    if isinstance(node, Binary):
        return _binary(node, scope)
    if isinstance(node, Call):
        return _call(node, scope)
    if isinstance(node, Unary):
        return _unary(node, scope)
    if isinstance(node, Omitted):
        return None
    if isinstance(node, Array):
        return Grid(node.rows)
    if isinstance(node, Local):
        return (scope.variables or {})[node.name]
    if isinstance(node, Apply):
        arguments = [_evaluate(each, scope) for each in node.arguments]
        return _apply(_evaluate(node.function, scope), arguments, scope)
    raise scope.refuse("a list of several ranges stands where one value is expected")


def _unary(node: Unary, scope: Scope) -> Operand:
    operand = evaluate(node.operand, scope)
    if node.operator == "@":
        return single(operand, scope)
    if node.operator == "+":
        return operand if by_element(operand, scope) else single(operand, scope)
    operate = negate if node.operator == "-" else percent
    if by_element(operand, scope):
        return _lift(operate, (operand,), scope)
    return operate(single(operand, scope))


def _binary(node: Binary, scope: Scope) -> Operand:
    if node.operator == ":":
        return scope.reader.grid(reference(node, scope))
    pending: list[tuple[str, Node]] = []
    left: Node = node
    while isinstance(left, Binary) and left.operator != ":":
        pending.append((left.operator, left.right))
        left = left.left
    result = evaluate(left, scope)
    for operator, right in reversed(pending):
        operate, other = OPERATORS[operator], evaluate(right, scope)
        if by_element(result, scope) or by_element(other, scope):
            result = _lift(operate, (settled(result, scope), settled(other, scope)), scope)
        else:
            result = operate(single(result, scope), single(other, scope))
    return result


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


def _lift(operate: Callable[..., Operand], operands: tuple[Operand, ...], scope: Scope) -> Grid:
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


def _apply(function: object, arguments: list[Operand | Closure], scope: Scope) -> Operand | Closure:
    if not isinstance(function, Closure):
        raise scope.refuse("something is called that is no function")
    if len(arguments) != len(function.parameters):
        raise scope.refuse(
            f"a LAMBDA takes {len(function.parameters)} arguments and is given {len(arguments)}"
        )
    variables = {**function.variables, **dict(zip(function.parameters, arguments, strict=True))}
    return _evaluate(function.body, replace(scope, variables=variables))


def _call(node: Call, scope: Scope) -> Operand | Closure:
    if node.name == "LET":
        variables = dict(scope.variables or {})
        for name, value in zip(node.arguments[:-1:2], node.arguments[1::2], strict=True):
            assert isinstance(name, Local)
            variables[name.name] = _evaluate(value, replace(scope, variables=dict(variables)))
        return _evaluate(node.arguments[-1], replace(scope, variables=variables))
    if node.name == "LAMBDA":
        parameters = tuple(each.name for each in node.arguments[:-1] if isinstance(each, Local))
        return Closure(parameters, node.arguments[-1], dict(scope.variables or {}))
    if node.name.startswith(OWN_PREFIX):
        return scope.reader.own(node, scope.cell)
    if node.name in REFERENCE_MAKERS:
        block = reference_or_fault(node, scope)
        return block if isinstance(block, Fault) else scope.reader.grid(block)
    entry = entry_of(node, scope)
    takes = [entry.parameter(position) for position in range(len(node.arguments))]
    inner = scope
    if node.name in ARRAY_TAKERS and scope.mode is Mode.PLAIN:
        inner = replace(scope, mode=Mode.ARRAY)
    try:
        return _served(entry, takes, node.arguments, inner)
    except Unsupported as error:
        if error.cell is None:
            raise scope.refuse(f"{node.name}: {error.reason}") from None
        raise


def entry_of(node: Call, scope: Scope) -> Entry:
    """The function's entry, checked against the number of arguments."""
    entry = functions.find(node.name)
    if entry is None:
        hint = did_you_mean(node.name, functions.catalogue())
        raise scope.refuse(f"uses the function {node.name}, which xlroot does not evaluate{hint}")
    wrong = entry.wrong_count(sum(_width(each) for each in node.arguments))
    if wrong:
        raise scope.refuse(wrong)
    return entry


def _width(argument: Node) -> int:
    return len(argument.parts) if isinstance(argument, Union) else 1


def _served(
    entry: Entry, takes: list[Takes], nodes: tuple[Node, ...], scope: Scope
) -> Operand | Closure:
    arguments: list[Operand | Callable[[], Operand]] = []
    lifted = False
    for take, node in zip(takes, nodes, strict=True):
        if take is Takes.LAZY:
            arguments.append(partial(_lazy, node, scope))
        elif take is Takes.RAW:
            arguments.extend(_raw(node, scope))
        else:
            operand = evaluate(node, scope)
            if by_element(operand, scope):
                lifted = True
                arguments.append(operand)
                continue
            value = coerced(take, single(operand, scope))
            if isinstance(value, Fault) and take is not Takes.VALUE and not lifted:
                return value
            arguments.append(value)
    grids = [each for each in arguments if isinstance(each, Grid)]
    shapes = {(grid.height, grid.width) for grid in grids}
    if len(shapes) > 1 and any(grid.is_cut for grid in grids) and entry.name not in SINGLE_LINE:
        raise Unsupported("compares ranges that reach beyond their sheets' used part")
    if not lifted:
        return entry.rule(*arguments)
    return _lifted(entry, takes, arguments)


def _lazy(node: Node, scope: Scope) -> Operand:
    return evaluate(node, scope)


def _raw(node: Node, scope: Scope) -> list[Operand]:
    if isinstance(node, Area):
        return [scope.reader.grid(node.block)]
    if isinstance(node, Union):
        return [each for part in node.parts for each in _raw(part, scope)]
    operand = evaluate(node, scope)
    chooses = isinstance(node, Call) and node.name in CHOOSERS
    if chooses and isinstance(operand, (str, bool)):
        assert isinstance(node, Call)
        if any(isinstance(each, Area) for each in node.arguments):
            # A reference's text would not count, a written one would; which it is, is lost here.
            raise scope.refuse(f"{node.name} chooses a text or logical from cells within a total")
    return [operand]


def coerced(take: Takes, value: Value) -> Value:
    """The value as a parameter takes it, or the fault that it gives."""
    if take is Takes.NUMBER:
        return to_number(value)
    if take is Takes.TEXT:
        return to_text(value)
    return to_logical(value) if take is Takes.LOGICAL else value


def _lifted(
    entry: Entry, takes: list[Takes], arguments: list[Operand | Callable[[], Operand]]
) -> Grid:
    """The rule element by element over the arguments that expect single values."""
    varied: list[Operand] = []
    positions: list[int] = []
    for position, (take, argument) in enumerate(zip(takes, arguments, strict=True)):
        if take is not Takes.RAW:
            varied.append(argument() if callable(argument) else argument)
            positions.append(position)

    def once(*values: Value) -> Operand:
        now = list(arguments)
        for position, value in zip(positions, values, strict=True):
            take = takes[position]
            if take is Takes.LAZY:
                now[position] = partial(_given, value)
                continue
            own = coerced(take, value)
            if isinstance(own, Fault) and take is not Takes.VALUE:
                return own
            now[position] = own
        return entry.rule(*now)

    return lift(once, tuple(varied))


def _given(value: Operand) -> Operand:
    return value


def reference(node: Node, scope: Scope) -> Block:
    """The block that a node means as a reference; Unsupported if it means none."""
    block = reference_or_fault(node, scope)
    if isinstance(block, Fault):
        raise scope.refuse(f"a computed reference gives {block}")
    return block


def reference_or_fault(node: Node, scope: Scope) -> Block | Fault:
    """The block that a node means as a reference, or the fault that it gives."""
    if isinstance(node, Area):
        return node.block
    if isinstance(node, Literal) and isinstance(node.value, Fault):
        return node.value
    if isinstance(node, Binary) and node.operator == ":":
        return _spanned(reference(node.left, scope), reference(node.right, scope))
    if isinstance(node, Call) and node.name == "OFFSET":
        return _offset(node, scope)
    if isinstance(node, Call) and node.name == "INDIRECT":
        return _indirect(node, scope)
    if isinstance(node, (Call, Local)):
        result = evaluate(node, scope)
        if isinstance(result, Grid) and result.block is not None:
            return result.block
        if isinstance(result, Fault):
            return result
    raise scope.refuse("a range is expected where the formula computes a value")


def _spanned(a: Block, b: Block) -> Block | Fault:
    if a.sheet != b.sheet:
        return Fault.VALUE
    top, left = min(a.top, b.top), min(a.left, b.left)
    return Block(a.sheet, top, left, max(a.bottom, b.bottom), max(a.right, b.right))


def _offset(node: Call, scope: Scope) -> Block | Fault:
    if not 3 <= len(node.arguments) <= 5:
        raise scope.refuse("OFFSET takes 3 to 5 arguments")
    base = reference_or_fault(node.arguments[0], scope)
    if isinstance(base, Fault):
        return base
    numbers: list[int | None] = []
    for argument in node.arguments[1:]:
        if isinstance(argument, Omitted):
            numbers.append(None)
            continue
        number = to_number(single(evaluate(argument, scope), scope))
        if isinstance(number, Fault):
            return number
        numbers.append(int(number // 1))
    down, right, height, width = (*numbers, None, None)[:4]
    top, left = base.top + (down or 0), base.left + (right or 0)
    height = base.height if height is None else height
    width = base.width if width is None else width
    if height < 0:
        top, height = top + height + 1, -height
    if width < 0:
        left, width = left + width + 1, -width
    if not height or not width or top < 1 or left < 1:
        return Fault.REF
    return Block(base.sheet, top, left, top + height - 1, left + width - 1)


def _indirect(node: Call, scope: Scope) -> Block | Fault:
    if not 1 <= len(node.arguments) <= 2:
        raise scope.refuse("INDIRECT takes 1 or 2 arguments")
    if len(node.arguments) == 2:
        a1 = to_logical(single(evaluate(node.arguments[1], scope), scope))
        if a1 is not True:
            raise scope.refuse("INDIRECT in the R1C1 style is not evaluated")
    text = to_text(single(evaluate(node.arguments[0], scope), scope))
    if isinstance(text, Fault):
        return text
    return scope.reader.locate(text, scope.cell) or Fault.REF
