"""Baseline: before any search, the chain is held against the sheet's own saved values.

With the unknown at its present value, every chain cell must come out as the host saved it, within
1e-9 of the larger of the cell's value and the largest term that forms it (hosts snap tiny
differences to zero, and some save 15 digits). Otherwise xlroot or the file is not to be trusted,
and the solve is refused, naming the first cell that differs.
"""

from __future__ import annotations

from dataclasses import dataclass

from xlroot.book import Unsaved
from xlroot.cells import Cell
from xlroot.formula import Area, Binary, Call, Node, Unary
from xlroot.frame import Frame
from xlroot.interpret import Scope, evaluate, single
from xlroot.program import Program
from xlroot.values import Fault, Operand, Value

AGREEMENT = 1e-9
"""The largest difference that still counts as agreement, relative to the largest term."""


@dataclass(frozen=True, slots=True)
class Difference:
    """A chain cell whose computed value is not the saved one."""

    cell: Cell
    computed: Value
    saved: Value

    def __str__(self) -> str:
        return (
            f"the formula gives {shown(self.computed)} and the workbook holds "
            f"{shown(self.saved)}; recalculate and save the workbook, or ask to recalculate"
        )


@dataclass(frozen=True, slots=True)
class Baseline:
    """The outcome of the check: the first difference, and how many cells had no saved value."""

    difference: Difference | None
    unsaved: int


def check(program: Program, present: Value) -> Baseline:
    """Holds every chain cell at the unknown's present value against the saved value.

    `program` has to rest on saved values alone. Raises Unsupported where a chain cell cannot be
    evaluated there.
    """
    book = program.ledger.book
    values = program.values_at(present)
    unsaved = 0
    for step in program.chain.steps:
        saved = book.saved(step.cell)
        if isinstance(saved, Unsaved):
            unsaved += 1
            continue
        computed = values[step.cell]
        if not _agree(computed, saved):
            frame = Frame(program.ledger, values, program.moves)
            term = _largest_term(step.node, Scope(step.cell, frame))
            if not _close(computed, saved, term):
                return Baseline(Difference(step.cell, computed, saved), unsaved)
    return Baseline(None, unsaved)


def shown(value: Value) -> str:
    """A value as a message shows it."""
    if value is None:
        return "nothing"
    if isinstance(value, str):
        return f'the text "{value}"'
    if isinstance(value, bool):
        return str(value).upper()
    return str(value) if isinstance(value, Fault) else f"{value:.15g}"


def _agree(computed: Value, saved: Value) -> bool:
    if isinstance(computed, float) and isinstance(saved, float):
        return abs(computed - saved) <= AGREEMENT * max(abs(computed), abs(saved))
    if isinstance(computed, Fault) and isinstance(saved, Fault):
        # Hosts save one kind of fault as another, so kinds are not compared.
        return True
    return computed == saved and type(computed) is type(saved)


def _close(computed: Value, saved: Value, term: float) -> bool:
    if not isinstance(computed, float) or not isinstance(saved, float):
        return False
    return abs(computed - saved) <= AGREEMENT * term


def _largest_term(node: Node, scope: Scope) -> float:
    """The largest magnitude among the terms that are added up to the node's value."""
    if isinstance(node, Binary) and node.operator in "+-":
        return max(_largest_term(node.left, scope), _largest_term(node.right, scope))
    if isinstance(node, Unary):
        return _largest_term(node.operand, scope)
    if isinstance(node, Binary) and node.operator in "*/":
        # A factor's cancellation is carried through the product.
        return _carried(node, scope)
    if isinstance(node, Call) and node.name == "SUM":
        return max((_largest_term(each, scope) for each in node.arguments), default=0.0)
    if isinstance(node, Area) and not node.block.is_cell:
        numbers = scope.reader.grid(node.block).flat()
        return max((abs(each) for each in numbers if isinstance(each, float)), default=0.0)
    return _size(evaluate(node, scope), scope)


def _carried(node: Binary, scope: Scope) -> float:
    left, right = (_size(evaluate(each, scope), scope) for each in (node.left, node.right))
    if node.operator == "/":
        return _largest_term(node.left, scope) / right if right else 0.0
    return max(_largest_term(node.left, scope) * right, left * _largest_term(node.right, scope))


def _size(operand: Operand, scope: Scope) -> float:
    value = single(operand, scope)
    return abs(value) if isinstance(value, float) else 0.0
