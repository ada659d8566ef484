"""Calls of worksheet functions as text: by form, written out, or by their rule."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

from xlroot import functions
from xlroot.cells import Block, Cell
from xlroot.emit.choices import CHOICES
from xlroot.emit.expression import LARGEST, Expr, Level, Opaque, Sort
from xlroot.emit.lookups import LOOKUPS
from xlroot.formula import Area, Array, Call, Literal, Node, Omitted
from xlroot.functions.entry import Entry, Fold, Gives, Takes
from xlroot.interpret import ARRAY_TAKERS, Mode, Scope, evaluate
from xlroot.values import Fault

if TYPE_CHECKING:
    from xlroot.emit.emitter import Emitter

LONGEST_SUM = 40
"""Sums of more terms are computed in a loop instead of being written out."""

LARGEST_GRID = 20_000
"""Ranges of more cells with chain cells among them are left to the interpreter."""

SPECIAL = CHOICES | LOOKUPS
"""Functions that are code rather than calls, where their arguments permit it."""

_GIVEN = {Gives.NUMBER: Sort.NUMBER, Gives.TEXT: Sort.TEXT, Gives.LOGICAL: Sort.LOGICAL}
_FOLDS = {
    Fold.SUM: "total",
    Fold.PRODUCT: "product",
    Fold.MINIMUM: "least",
    Fold.MAXIMUM: "most_of",
}
_LIMITS = {
    "sin({0})": 1.0,
    "cos({0})": 1.0,
    "tanh({0})": 1.0,
    "atan({0})": 1.6,
    "asin({0})": 1.6,
    "acos({0})": 3.2,
    "ln({0})": 750.0,
    "log10({0})": 330.0,
}
_KEEPS_INFINITY = re.compile(r"(?:sqrt|ln|log10|absolute)\(\{0\}\)")
_EMPTY = {Takes.NUMBER: "0.0", Takes.TEXT: '""', Takes.LOGICAL: "False"}


def call(emitter: Emitter, node: Call) -> Expr:
    special = SPECIAL.get(node.name)
    found = None if special is None else special(emitter, node)
    if found is not None:
        return found
    entry = functions.find(node.name)
    if entry is None or entry.wrong_count(len(node.arguments)):
        raise Opaque
    if entry.fold is not None:
        return _fold(emitter, entry, node)
    if entry.form is not None and len(node.arguments) == entry.form.count("{"):
        return _formed(emitter, entry.form, node)
    return _ruled(emitter, entry, node)


def _formed(emitter: Emitter, form: str, node: Call) -> Expr:
    numbers = [emitter.number(emitter.emit(each)) for each in node.arguments]
    if _KEEPS_INFINITY.fullmatch(form):
        texts = [each.text for each in numbers]
    else:
        texts = [emitter.kept(each) for each in numbers]
    # Over vectors a function does not raise outside its domain: its NaN has to be noticed.
    grows = emitter.dialect.vector or any(sign in form for sign in "+-*/")
    bound = math.inf if grows else _LIMITS.get(form, LARGEST)
    if form == "sqrt({0})" and not grows:
        bound = math.sqrt(numbers[0].bound)
    grows = grows or (bool(_KEEPS_INFINITY.fullmatch(form)) and numbers[0].grows)
    return Expr(f"({form.format(*texts)})", Sort.NUMBER, grows=grows, bound=bound)


def _fold(emitter: Emitter, entry: Entry, node: Call) -> Expr:
    terms: list[Expr] = []
    for argument in node.arguments:
        if isinstance(argument, Area):
            terms.extend(_terms(emitter, argument.block))
        elif isinstance(argument, (Omitted, Array)):
            raise Opaque
        else:
            terms.append(_term(emitter, argument))
    assert entry.fold is not None
    if entry.fold in (Fold.MINIMUM, Fold.MAXIMUM):
        texts = [emitter.kept(each) for each in terms]
    else:
        texts = [emitter.enclosed(each) for each in terms]
    if not texts:
        raise Opaque
    if entry.fold is Fold.SUM and len(texts) <= LONGEST_SUM:
        return Expr(" + ".join(texts), Sort.NUMBER, Level.SUM, grows=True)
    if len(texts) == 1:
        return terms[0]
    packed = "".join(f"{text}, " for text in texts)
    return Expr(f"{_FOLDS[entry.fold]}(({packed}))", Sort.NUMBER, grows=True)


def _term(emitter: Emitter, argument: Node) -> Expr:
    """A computed argument among many numbers. It may be a reference, whose texts, logicals
    and blanks do not count, so only a plain number is settled here."""
    expr = emitter.emit(argument)
    if expr.sort is not Sort.ANY and (expr.sort is Sort.NUMBER or not expr.fixed):
        return emitter.number(expr)
    if isinstance(argument, Literal):
        return emitter.number(expr)
    if expr.fixed or emitter.dialect.vector:
        raise Opaque
    return Expr(f"plain({expr.text})", Sort.NUMBER)


def _terms(emitter: Emitter, block: Block) -> list[Expr]:
    """The numbers of a range; texts, logicals and blanks in a range do not count."""
    terms = []
    for cell in emitter.ledger.book.clipped(block).cells():
        name = emitter.variables.get(cell)
        if name is None:
            value = emitter.ledger.value(cell)
            if isinstance(value, (float, Fault)):
                terms.append(emitter.number(emitter.fixed(value)))
        elif emitter.sorts[name] is Sort.NUMBER:
            terms.append(emitter.emit(Area(Block.of(cell))))
        elif emitter.sorts[name] is Sort.ANY:
            raise Opaque
    return terms


def _ruled(emitter: Emitter, entry: Entry, node: Call) -> Expr:
    """A call of the function's rule for single values."""
    if emitter.dialect.vector:
        raise Opaque
    areas_only = all(isinstance(each, Area) or not emitter.moves(each) for each in node.arguments)
    if node.name in ARRAY_TAKERS and not areas_only:
        raise Opaque
    areas = [each.block for each in node.arguments if isinstance(each, Area)]
    if len(areas) > 1 and any(emitter.ledger.book.clipped(each) != each for each in areas):
        raise Opaque
    texts = []
    for position, argument in enumerate(node.arguments):
        take = entry.parameter(position)
        forced = Mode.ARRAY if node.name in ARRAY_TAKERS else Mode.PLAIN
        texts.append(_argument(emitter, take, argument, forced))
    rule = emitter.name("f", entry.rule)
    text = f"{rule}({', '.join(texts)})"
    if entry.gives is Gives.ANY:
        return Expr(text, Sort.ANY)
    check = {Gives.NUMBER: "number_of", Gives.TEXT: "text_of", Gives.LOGICAL: "truth"}
    return Expr(f"{check[entry.gives]}({text})", _GIVEN[entry.gives])


def _argument(emitter: Emitter, take: Takes, node: Node, forced: Mode) -> str:
    """An argument's text as the rule takes it."""
    if isinstance(node, Omitted):
        return _EMPTY.get(take, "None")
    if take is Takes.RAW:
        return _raw(emitter, node, forced)
    if take is Takes.LAZY:
        raise Opaque
    expr = emitter.emit(node)
    if take is Takes.NUMBER:
        return emitter.kept(emitter.number(expr))
    if take is Takes.LOGICAL:
        return emitter.condition(expr)
    if take is Takes.TEXT:
        return f"text_of({expr.text})"
    if expr.sort is not Sort.ANY:
        return emitter.kept(expr)
    return f"{'one' if take is Takes.SCALAR else 'flat'}({expr.text})"


def _raw(emitter: Emitter, node: Node, forced: Mode) -> str:
    if not emitter.moves(node):
        if isinstance(node, Area):
            return emitter.name("k", emitter.ledger.grid(node.block))
        return emitter.name("k", evaluate(node, Scope(emitter.cell, emitter.ledger, forced)))
    if not isinstance(node, Area):
        return emitter.kept(emitter.emit(node))
    block, used = node.block, emitter.ledger.book.clipped(node.block)
    if used.height * used.width > LARGEST_GRID:
        raise Opaque
    rows = []
    for row in range(used.top, used.bottom + 1):
        texts = []
        for column in range(used.left, used.right + 1):
            cell = Cell(block.sheet, row, column)
            name = emitter.variables.get(cell)
            texts.append(name or emitter.spelled(emitter.ledger.value(cell)))
        rows.append(f"({', '.join(texts)},)")
    return f"Grid(({', '.join(rows)},), {emitter.name('k', block)})"
