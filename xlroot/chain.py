"""Chain: the residual traced back to the unknown.

The chain is the formula cells that depend on the unknown and feed the residual, in calculation
order; the held cells are what they read besides. A computed reference on the chain is resolved
once, with the held values: where it would move with the unknown, the chain is refused.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from xlroot.bind import walk
from xlroot.cells import Block, Cell
from xlroot.depend import Bindings, Dependence, computes_reference
from xlroot.errors import CircularReference, IndependentError, Unsupported
from xlroot.formula import Apply, Area, Binary, Call, Literal, Node, Unary, Union
from xlroot.interpret import OWN_PREFIX, Scope, reference_or_fault
from xlroot.ledger import Ledger, refuse_calendar, refuse_volatile
from xlroot.values import Fault


@dataclass(frozen=True, slots=True)
class Step:
    """One chain cell: its bound formula, and the range that it fills if it is an array formula.

    For a cell that an array formula of another chain cell fills, `master` is that cell and
    `node` its formula.
    """

    cell: Cell
    node: Node
    text: str
    block: Block | None = None
    master: Cell | None = None


@dataclass(frozen=True, slots=True)
class Chain:
    """Formula cells from the unknown to the residual, and the cells whose values they hold."""

    unknown: Cell
    residual: Cell
    steps: tuple[Step, ...]
    held: tuple[Cell, ...]
    circular: tuple[Cell, ...] = ()
    """Held cells that lie in a circular reference, whose saved values are used."""


def trace(bindings: Bindings, ledger: Ledger, residual: Cell, unknown: Cell) -> Chain:
    """The chain between two cells.

    Raises IndependentError where the residual does not depend on the unknown, CircularReference
    where a chain cell depends on itself, Unsupported, with the cell, where a chain formula cannot
    be evaluated faithfully.
    """
    dependence = Dependence(bindings, frozenset((unknown,)), ledger.resolve)
    if not dependence.depends(residual):
        raise IndependentError(
            f"the residual {residual} does not depend on the unknown {unknown}; "
            "state cells between which formulas run"
        )
    for cycle in dependence.cycles:
        if any(dependence.depends(cell) for cell in cycle):
            names = " -> ".join(str(cell) for cell in (*cycle[:6], cycle[0]))
            raise CircularReference(
                f"is part of a circular reference on the chain: {names}", str(cycle[0])
            )
    steps = tuple(_step(cell, dependence, ledger) for cell in dependence.order)
    return Chain(
        unknown,
        residual,
        steps,
        tuple(_held(steps, dependence, bindings)),
        tuple(dict.fromkeys(cell for cycle in dependence.cycles for cell in cycle)),
    )


def _step(cell: Cell, dependence: Dependence, ledger: Ledger) -> Step:
    bindings = dependence.bindings
    formula = bindings.book.formula(cell)
    if formula is None:
        master = bindings.master(cell)
        assert master is not None
        return Step(cell, Literal(None), "", master=master)
    node = bindings.node(cell, formula)
    refuse_volatile(node, cell)
    refuse_calendar(node, cell, bindings.book)
    for each in walk(node):
        if isinstance(each, Call) and each.name.startswith(OWN_PREFIX):
            raise Unsupported(
                f"lies on the chain and itself holds {each.name}: a solve inside a solve is not "
                "evaluated; give each solve an unknown of its own",
                str(cell),
            )
    if any(computes_reference(each) for each in walk(node)):
        node = _settled(node, cell, dependence, ledger)
    return Step(cell, node, formula.text, formula.block)


def _settled(node: Node, cell: Cell, dependence: Dependence, ledger: Ledger) -> Node:
    """The node with every computed reference replaced by the range that it gives."""
    if computes_reference(node):
        places = {id(each) for each in _places(node)}
        for each in walk(node):
            read = isinstance(each, Area) and id(each) not in places
            if read and isinstance(each, Area) and _moves(each.block, dependence):
                raise Unsupported(
                    "computes a reference that moves with the unknown; "
                    "use INDEX over a fixed range instead",
                    str(cell),
                )
        found = reference_or_fault(node, Scope(cell, ledger))
        if isinstance(found, Fault):
            return Literal(found)
        return Area(found)
    if isinstance(node, Call):
        inner = tuple(_settled(each, cell, dependence, ledger) for each in node.arguments)
        return replace(node, arguments=inner)
    if isinstance(node, Binary):
        left = _settled(node.left, cell, dependence, ledger)
        return replace(node, left=left, right=_settled(node.right, cell, dependence, ledger))
    if isinstance(node, Unary):
        return replace(node, operand=_settled(node.operand, cell, dependence, ledger))
    if isinstance(node, Union):
        return Union(tuple(_settled(each, cell, dependence, ledger) for each in node.parts))
    if isinstance(node, Apply):
        inner = tuple(_settled(each, cell, dependence, ledger) for each in node.arguments)
        return Apply(_settled(node.function, cell, dependence, ledger), inner)
    return node


def _places(node: Node) -> list[Node]:
    """The areas of a computed reference that count for where they stand, not for what they
    hold: both ends of a colon, the first argument of OFFSET and INDEX."""
    if isinstance(node, Area):
        return [node]
    if isinstance(node, Binary) and node.operator == ":":
        return [*_places(node.left), *_places(node.right)]
    if isinstance(node, Call) and node.name in ("OFFSET", "INDEX"):
        return _places(node.arguments[0])
    return []


def _moves(block: Block, dependence: Dependence) -> bool:
    """Whether anything in the block depends on the unknown."""
    if any(block.holds(target) for target in dependence.targets):
        return True
    return any(map(dependence.depends, dependence.bindings.formulas_in(block)))


def _held(steps: tuple[Step, ...], dependence: Dependence, bindings: Bindings) -> list[Cell]:
    chain = {step.cell for step in steps} | dependence.targets
    held: dict[Cell, None] = {}
    for step in steps:
        blocks = [each.block for each in walk(step.node) if isinstance(each, Area)]
        for block in dict.fromkeys(blocks):
            values = bindings.book.sheet_by_name[block.sheet].values
            for cell in bindings.book.clipped(block).cells():
                if cell not in chain and (cell.row, cell.column) in values:
                    held[cell] = None
    return list(held)
