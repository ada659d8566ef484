"""Functions that choose, and LET: code that branches or names, instead of a call."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING

from xlroot.emit.expression import Expr, Opaque, Sort
from xlroot.formula import Area, Call, Literal, Local, Node, Omitted
from xlroot.values import Fault, to_logical

if TYPE_CHECKING:
    from xlroot.emit.emitter import Emitter


def _if(emitter: Emitter, node: Call) -> Expr:
    if not 2 <= len(node.arguments) <= 3:
        raise Opaque
    condition = emitter.emit(node.arguments[0])
    branches = (*node.arguments[1:], Literal(value=False))[:2]
    if condition.fixed:
        chosen = to_logical(condition.value)
        if isinstance(chosen, Fault):
            return emitter.fixed(chosen)
        return emitter.emit(branches[0 if chosen else 1])
    return _chosen(emitter, emitter.condition(condition), branches)


def _chosen(emitter: Emitter, condition: str, branches: tuple[Node, ...]) -> Expr:
    emitter.branching += 1
    try:
        yes, no = (emitter.emit(_filled(each)) for each in branches)
    finally:
        emitter.branching -= 1
    sort = yes.sort if yes.sort is no.sort else Sort.ANY
    if emitter.dialect.vector and sort not in (Sort.NUMBER, Sort.LOGICAL):
        raise Opaque
    text = emitter.dialect.choose.format(condition, yes.text, no.text)
    grows = yes.grows or no.grows
    return Expr(text, sort, grows=grows, bound=max(yes.bound, no.bound))


def _filled(node: Node) -> Node:
    return Literal(0.0) if isinstance(node, Omitted) else node


def _ifs(emitter: Emitter, node: Call) -> Expr:
    """IFS as nested IFs; none that holds is #N/A."""
    if len(node.arguments) % 2 or not node.arguments:
        raise Opaque
    nested: Node = Literal(Fault.NA)
    pairs = zip(node.arguments[-2::-2], node.arguments[::-2], strict=True)
    for condition, value in pairs:
        nested = Call("IF", (condition, value, nested))
    return emitter.emit(nested)


def _all_or_any(emitter: Emitter, node: Call) -> Expr:
    texts = []
    for argument in node.arguments:
        expr = emitter.emit(argument)
        if expr.fixed and not isinstance(expr.value, (bool, float)):
            raise Opaque
        if expr.sort not in (Sort.NUMBER, Sort.LOGICAL) or not _single(argument):
            raise Opaque
        texts.append(emitter.condition(expr))
    return Expr(f"({(' & ' if node.name == 'AND' else ' | ').join(texts)})", Sort.LOGICAL)


def _single(node: Node) -> bool:
    return not isinstance(node, Area) or node.block.is_cell


def _not(emitter: Emitter, node: Call) -> Expr:
    if len(node.arguments) != 1:
        raise Opaque
    condition = emitter.condition(emitter.emit(node.arguments[0]))
    return Expr(f"negated({condition})", Sort.LOGICAL)


def _without_fault(emitter: Emitter, node: Call) -> Expr:
    """IFERROR and IFNA where nothing faults; a fault raises, and the interpreter decides."""
    if len(node.arguments) != 2:
        raise Opaque
    expr = emitter.emit(node.arguments[0])
    if expr.fixed or expr.sort is not Sort.NUMBER:
        raise Opaque
    return Expr(emitter.kept(expr), expr.sort)


def _let(emitter: Emitter, node: Call) -> Expr:
    """LET: each name an assignment within the expression."""
    outer = dict(emitter.variables_in_scope)
    parts = []
    try:
        for name, value in zip(node.arguments[:-1:2], node.arguments[1::2], strict=True):
            assert isinstance(name, Local)
            expr = emitter.emit(value)
            if not expr.fixed:
                variable = f"l{len(emitter.namespace)}"
                emitter.namespace[variable] = None
                if emitter.branching:
                    emitter.conditional.add(variable)
                parts.append(f"({variable} := {expr.text})")
                if expr.grows:
                    emitter.growing.add(variable)
                expr = Expr(variable, expr.sort, grows=expr.grows, bound=expr.bound)
            emitter.variables_in_scope[name.name] = expr
        body = emitter.emit(node.arguments[-1])
    finally:
        emitter.variables_in_scope = outer
    if not parts:
        return body
    return Expr(f"({', '.join(parts)}, {body.text})[-1]", body.sort, grows=body.grows)


CHOICES: dict[str, Callable[[Emitter, Call], Expr | None]] = {
    "IF": _if,
    "IFS": _ifs,
    "AND": _all_or_any,
    "OR": _all_or_any,
    "NOT": _not,
    "IFERROR": _without_fault,
    "IFNA": _without_fault,
    "LET": _let,
}
"""By function."""
