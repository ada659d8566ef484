"""Computed references: OFFSET, INDIRECT, a colon between computed ends, INDEX.

`evaluate` is the interpreter itself, handed down by it.
"""

from __future__ import annotations

from xlroot.cells import Block
from xlroot.formula import Area, Binary, Call, Literal, Local, Node, Omitted
from xlroot.interpret.scope import Evaluate, Scope, single
from xlroot.values import Fault, Grid, to_logical, to_number, to_text

REFERENCE_MAKERS = frozenset(("OFFSET", "INDIRECT"))
"""Functions that compute a reference."""


def referred(node: Node, scope: Scope, evaluate: Evaluate) -> Block | Fault:
    """The block that a node means as a reference, or the fault that it gives."""
    if isinstance(node, Area):
        return node.block
    if isinstance(node, Literal) and isinstance(node.value, Fault):
        return node.value
    if isinstance(node, Binary) and node.operator == ":":
        return _spanned(_end(node.left, scope, evaluate), _end(node.right, scope, evaluate))
    if isinstance(node, Call) and node.name == "OFFSET":
        return _offset(node, scope, evaluate)
    if isinstance(node, Call) and node.name == "INDIRECT":
        return _indirect(node, scope, evaluate)
    if isinstance(node, (Call, Local)):
        result = evaluate(node, scope)
        if isinstance(result, Grid) and result.block is not None:
            return result.block
        if isinstance(result, Fault):
            return result
    raise scope.refuse("a range is expected where the formula computes a value")


def _end(node: Node, scope: Scope, evaluate: Evaluate) -> Block:
    block = referred(node, scope, evaluate)
    if isinstance(block, Fault):
        raise scope.refuse(f"a computed reference gives {block}")
    return block


def _spanned(a: Block, b: Block) -> Block | Fault:
    if a.sheet != b.sheet:
        return Fault.VALUE
    top, left = min(a.top, b.top), min(a.left, b.left)
    return Block(a.sheet, top, left, max(a.bottom, b.bottom), max(a.right, b.right))


def _offset(node: Call, scope: Scope, evaluate: Evaluate) -> Block | Fault:
    if not 3 <= len(node.arguments) <= 5:
        raise scope.refuse("OFFSET takes 3 to 5 arguments")
    base = referred(node.arguments[0], scope, evaluate)
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


def _indirect(node: Call, scope: Scope, evaluate: Evaluate) -> Block | Fault:
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
