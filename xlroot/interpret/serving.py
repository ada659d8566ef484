"""Serving a worksheet function: arguments evaluated and converted as its entry declares, single
values lifted over arrays.

`evaluate` is the interpreter itself, handed down by it.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from xlroot import functions
from xlroot.catalogue import did_you_mean
from xlroot.errors import Unsupported
from xlroot.formula import Area, Call, Node, Union
from xlroot.functions.entry import Entry, Takes
from xlroot.interpret.scope import Evaluate, Scope, by_element, lift, single
from xlroot.values import Fault, Grid, Operand, Value, to_logical, to_number, to_text

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

CHOOSERS = frozenset(("IF", "IFS", "SWITCH", "CHOOSE"))
"""Functions that may give a reference as it is."""

SINGLE_LINE = frozenset(("SUM", "PRODUCT", "MIN", "MAX", "AVERAGE", "COUNT", "COUNTA", "SUMSQ"))
"""Functions that take every range by itself, so that unlike extents do no harm."""


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


def served(
    entry: Entry,
    takes: list[Takes],
    nodes: tuple[Node, ...],
    scope: Scope,
    evaluate: Evaluate,
) -> Operand:
    arguments: list[Operand | Callable[[], Operand]] = []
    lifted = False
    for take, node in zip(takes, nodes, strict=True):
        if take is Takes.LAZY:
            arguments.append(partial(evaluate, node, scope))
        elif take is Takes.RAW:
            arguments.extend(_raw(node, scope, evaluate))
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


def _raw(node: Node, scope: Scope, evaluate: Evaluate) -> list[Operand]:
    if isinstance(node, Area):
        return [scope.reader.grid(node.block)]
    if isinstance(node, Union):
        return [each for part in node.parts for each in _raw(part, scope, evaluate)]
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
