"""The one recursion: a node's value from the values of its parts."""

from __future__ import annotations

from dataclasses import replace

from xlroot.cells import Block
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
)
from xlroot.interpret.references import REFERENCE_MAKERS, referred
from xlroot.interpret.scope import (
    Closure,
    Mode,
    Scope,
    by_element,
    lift_within,
    settled,
    single,
)
from xlroot.interpret.serving import ARRAY_TAKERS, entry_of, served
from xlroot.kinds.real import OPERATORS, negate, percent
from xlroot.values import Fault, Grid, Operand, Value

OWN_PREFIX = "XLROOT"
"""How the names of xlroot's own functions begin."""


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


def reference(node: Node, scope: Scope) -> Block:
    """The block that a node means as a reference; Unsupported if it means none."""
    block = reference_or_fault(node, scope)
    if isinstance(block, Fault):
        raise scope.refuse(f"a computed reference gives {block}")
    return block


def reference_or_fault(node: Node, scope: Scope) -> Block | Fault:
    """The block that a node means as a reference, or the fault that it gives."""
    return referred(node, scope, evaluate)


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
        return lift_within(operate, (operand,), scope)
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
            result = lift_within(operate, (settled(result, scope), settled(other, scope)), scope)
        else:
            result = operate(single(result, scope), single(other, scope))
    return result


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
        return served(entry, takes, node.arguments, inner, evaluate)
    except Unsupported as error:
        if error.cell is None:
            raise scope.refuse(f"{node.name}: {error.reason}") from None
        raise
