"""Lookups in held tables as bisections and picks; None where the general rule has to serve."""

from __future__ import annotations

import math
from collections.abc import Callable
from itertools import pairwise
from typing import TYPE_CHECKING

from xlroot.emit.expression import Expr, Sort
from xlroot.formula import Area, Call, Node, Omitted
from xlroot.values import Fault, to_number

if TYPE_CHECKING:
    from xlroot.emit.emitter import Emitter

LONGEST_MATCH = 1024
"""Lookups in longer lines are two steps."""


def _match(emitter: Emitter, node: Call) -> Expr | None:
    """MATCH at most, in a held line of rising numbers: a bisection."""
    if not 2 <= len(node.arguments) <= 3 or not _is_number(emitter, node.arguments[2:], 1.0):
        return None
    line = _held_line(emitter, node.arguments[1])
    return None if line is None else _located(emitter, node.arguments[0], line)


def _index(emitter: Emitter, node: Call) -> Expr | None:
    """INDEX in a held line of numbers by one moving position."""
    if len(node.arguments) != 2:
        return None
    line = _held_line(emitter, node.arguments[0], rising=False)
    if line is None:
        return None
    return _picked(emitter, line, emitter.number(emitter.emit(node.arguments[1])))


def _vlookup(emitter: Emitter, node: Call) -> Expr | None:
    """VLOOKUP at most, in a held table of rising numbers: a bisection and a pick."""
    if not 3 <= len(node.arguments) <= 4 or not _is_number(emitter, node.arguments[3:], 1.0):
        return None
    table, column = node.arguments[1], node.arguments[2]
    if not isinstance(table, Area) or emitter.moves(column):
        return None
    place = to_number(emitter.constant(column))
    block = table.block
    if isinstance(place, Fault) or not 1 <= int(place) <= block.width:
        return None
    first = _held_line(emitter, Area(block._replace(right=block.left)))
    other = block.left + int(place) - 1
    values = _held_line(emitter, Area(block._replace(left=other, right=other)), rising=False)
    if first is None or values is None:
        return None
    return _picked(emitter, values, _located(emitter, node.arguments[0], first))


def _is_number(emitter: Emitter, nodes: tuple[Node, ...], wanted: float) -> bool:
    """Whether an optional argument is left out or is the constant."""
    if not nodes:
        return True
    if isinstance(nodes[0], Omitted) or emitter.moves(nodes[0]):
        return False
    return to_number(emitter.constant(nodes[0])) == wanted


def _held_line(emitter: Emitter, node: Node, *, rising: bool = True) -> tuple[float, ...] | None:
    """The numbers of one held row or column; None where it moves or holds anything else."""
    if not isinstance(node, Area) or emitter.moves(node):
        return None
    grid = emitter.ledger.grid(node.block)
    if grid.is_cut or (grid.width != 1 and grid.height != 1):
        return None
    values = tuple(grid.flat())
    numbers = tuple(value for value in values if type(value) is float)
    if len(numbers) != len(values):
        return None
    if rising and any(a > b for a, b in pairwise(numbers)):
        return None
    return numbers


def _located(emitter: Emitter, wanted: Node, line: tuple[float, ...]) -> Expr | None:
    expr = emitter.emit(wanted)
    if expr.sort is not Sort.NUMBER:
        return None
    text = f"{_FOUND}{emitter.constants(line)}, {emitter.kept(expr)}))"
    return Expr(text, Sort.NUMBER, grows=emitter.dialect.vector)


_FOUND = "located(bisected("


def _picked(emitter: Emitter, line: tuple[float, ...], place: Expr | None) -> Expr | None:
    """The number at a place; straight behind a bisection it is one step, with NaN, which the
    guards notice, where the bisection finds nothing."""
    if place is None:
        return None
    if place.text.startswith(_FOUND) and place.text.endswith("))"):
        searched = place.text[len("located(") : -1]
        padded = (math.nan, *line, *(math.nan,) * LONGEST_MATCH)
        if len(line) <= LONGEST_MATCH:
            return Expr(f"{emitter.constants(padded)}[{searched}]", Sort.NUMBER, grows=True)
    text = f"picked({emitter.constants(line)}, {emitter.kept(place)})"
    return Expr(text, Sort.NUMBER, grows=emitter.dialect.vector)


LOOKUPS: dict[str, Callable[[Emitter, Call], Expr | None]] = {
    "MATCH": _match,
    "INDEX": _index,
    "VLOOKUP": _vlookup,
}
"""By function."""
