"""Chain formulas as the text of one Python function.

The text is straight-line code over plain numbers: constant parts are folded, spreadsheet types
are settled while compiling, and operations that a kind of number provides are called by name, so
that the same text serves every kind. Three devices keep it faithful:

- What is no number where one is needed, and every fault, raises; the caller then lets the
  interpreter decide (`xlroot.program`).
- A value that may have overflowed and would vanish (a divisor, an argument of EXP, a comparison)
  is kept in a guard variable, whose finiteness is checked at the end.
- What is not worth compiling (array formulas, IFERROR, text functions of chain values) becomes a
  call of the interpreter for that part alone.
"""

from __future__ import annotations

import math
import re
from collections.abc import Callable
from dataclasses import dataclass, field
from enum import Enum
from itertools import pairwise
from typing import NamedTuple

from xlroot import functions
from xlroot.bind import walk
from xlroot.cells import Block, Cell
from xlroot.chain import Chain
from xlroot.formula import Area, Array, Binary, Call, Literal, Local, Node, Omitted, Unary
from xlroot.functions.entry import Entry, Fold, Gives, Takes
from xlroot.interpret import ARRAY_TAKERS, Mode, Scope, by_element, evaluate, single
from xlroot.kinds import array as array_kind
from xlroot.ledger import Ledger
from xlroot.values import Fault, Value, to_logical, to_number

LONGEST_SUM = 40
"""Sums of more terms are computed in a loop instead of being written out."""

LONGEST_MATCH = 1024
"""Lookups in longer lines are two steps."""

LARGEST_GRID = 20_000
"""Ranges of more cells with chain cells among them are left to the interpreter."""


class Sort(Enum):
    """What is known of an expression's value while compiling."""

    NUMBER = "number"
    LOGICAL = "logical"
    TEXT = "text"
    ANY = "any"


class Level(Enum):
    """How tightly an expression's text binds."""

    ATOM = 0
    PRODUCT = 1
    SUM = 2


class Expr(NamedTuple):
    """The text of an expression; `grows` where it may overflow to infinity without raising."""

    text: str
    sort: Sort
    level: Level = Level.ATOM
    grows: bool = False
    fixed: bool = False
    value: Value = None


class Opaque(Exception):
    """This node cannot be written as code of this kind."""


class Whole(Exception):
    """An array stands within this formula: only the interpreter computes it as a whole."""


class Dialect(NamedTuple):
    """How a kind spells what differs between kinds."""

    choose: str
    """A number chosen by a condition: {0} the condition, {1} and {2} the branches."""
    vector: bool
    """Whether variables hold many values, so that nothing may branch on them."""
    guards: bool
    """Whether guard variables can be checked at the end; otherwise they are checked at once."""


REAL = Dialect("({1} if {0} else {2})", vector=False, guards=True)
ARRAY = Dialect("choose({0}, {1}, {2})", vector=True, guards=True)
ELEMENT = Dialect("({1} if {0} else {2})", vector=False, guards=False)
"""The real kind within an array: one element of the vectors at a time."""

_GIVEN = {Gives.NUMBER: Sort.NUMBER, Gives.TEXT: Sort.TEXT, Gives.LOGICAL: Sort.LOGICAL}
_COMPARISONS = {"=": "==", "<>": "!=", "<": "<", "<=": "<=", ">": ">", ">=": ">="}
_NAMED = {"=": "equal", "<>": "differ", "<": "less", "<=": "most", ">": "more", ">=": "least_of"}
_FOLDS = {
    Fold.SUM: "total",
    Fold.PRODUCT: "product",
    Fold.MINIMUM: "least",
    Fold.MAXIMUM: "most_of",
}
_VARIABLE = re.compile(r"\b[vlg]\d+\b")
_KEEPS_INFINITY = re.compile(r"(?:sqrt|ln|log10|absolute)\(\{0\}\)")


_NOWHERE = Cell("", 1, 1)


@dataclass(slots=True)
class Emitter:
    """Writes the formulas of one chain as code of one dialect.

    `variables` and `sorts` say how chain cells are called and what they hold; `namespace`
    collects the constants and functions that the text refers to.
    """

    chain: Chain
    ledger: Ledger
    dialect: Dialect
    namespace: dict[str, object]
    variables: dict[Cell, str]
    sorts: dict[str, Sort]
    growing: set[str]
    part: Callable[[Node, Cell, tuple[Cell, ...]], Callable[..., Value]]
    """Makes a function of some chain cells' values that lets the interpreter find a node."""
    element: Emitter | None = None
    """For a vector dialect: the emitter of what has to go element by element."""
    vectorised: Callable[[str, tuple[str, ...]], Callable[..., object]] | None = None
    """For a vector dialect: makes a function over vectors of an element's text."""
    guards: list[str] = field(default_factory=list)
    variables_in_scope: dict[str, Expr] = field(default_factory=dict)
    cell: Cell = _NOWHERE
    _moving: dict[Block, tuple[Cell, ...]] = field(default_factory=dict)

    def formula(self, node: Node, cell: Cell) -> Expr:
        """The formula of a plain chain cell; a reference is what its cell holds, a blank is 0."""
        self.cell = cell
        try:
            expr = self.emit(node)
        except Whole:
            expr = self._by_part(node)
        if expr.sort is Sort.ANY and not expr.fixed and not self.dialect.vector:
            return Expr(f"shown({expr.text})", Sort.ANY)
        return expr

    def plain(self, node: Node, cell: Cell) -> Expr:
        """For a vector dialect: the formula as a vector of numbers or logicals; what is neither
        becomes NaN and is noticed at the end."""
        self.cell = cell
        try:
            expr = self.emit(node)
            if expr.fixed or expr.sort in (Sort.NUMBER, Sort.LOGICAL):
                return self.number(expr) if expr.fixed else expr
        except (Opaque, Whole):
            pass
        assert self.element is not None
        inner = self.element.formula(node, cell)
        vector = self._over_vectors(f"plain({inner.text})")
        return Expr(self.kept(vector), Sort.NUMBER)

    # -- what moves ---------------------------------------------------------------------------

    def moving(self, block: Block) -> tuple[Cell, ...]:
        """The chain cells, the unknown among them, that lie in the block."""
        found = self._moving.get(block)
        if found is None:
            if block.height * block.width <= len(self.variables):
                found = tuple(cell for cell in block.cells() if cell in self.variables)
            else:
                found = tuple(cell for cell in self.variables if block.holds(cell))
            self._moving[block] = found
        return found

    def moves(self, node: Node) -> bool:
        """Whether the node's value changes with the unknown (or with a local variable)."""
        return any(
            (isinstance(each, Area) and bool(self.moving(each.block))) or isinstance(each, Local)
            for each in walk(node)
        )

    # -- nodes --------------------------------------------------------------------------------

    def emit(self, node: Node) -> Expr:
        """The node's text; Opaque only where it holds a local variable it cannot pass on."""
        if not self.moves(node):
            return self.fixed(self.constant(node))
        try:
            return self._emit(node)
        except Opaque:
            return self._by_part(node)

    def constant(self, node: Node) -> Value:
        """The value of a node that does not move."""
        scope = Scope(self.cell, self.ledger)
        value = evaluate(node, scope)
        if by_element(value, scope):
            raise Whole
        return single(value, scope)

    def fixed(self, value: Value) -> Expr:
        """A constant."""
        sort = Sort.ANY
        if isinstance(value, bool):
            sort = Sort.LOGICAL
        elif isinstance(value, float):
            sort = Sort.NUMBER
        elif isinstance(value, str):
            sort = Sort.TEXT
        return Expr(self.spelled(value), sort, fixed=True, value=value)

    def spelled(self, value: Value) -> str:
        """A constant's text."""
        if isinstance(value, float):
            return repr(value) if math.copysign(1.0, value) > 0 else f"({value!r})"
        return repr(value) if value is None or isinstance(value, bool) else self.name("k", value)

    def name(self, prefix: str, value: object) -> str:
        """A new name for an object that the text refers to."""
        name = f"{prefix}{len(self.namespace)}"
        self.namespace[name] = value
        return name

    def constants(self, line: tuple[float, ...]) -> str:
        """A new name for a line of numbers, as the dialect's kind holds one."""
        return self.name("k", array_kind.line(line) if self.dialect.vector else line)

    def _emit(self, node: Node) -> Expr:
        if isinstance(node, Area):
            return self._area(node)
        if isinstance(node, Binary):
            return self._binary(node)
        if isinstance(node, Call):
            return self._call(node)
        if isinstance(node, Unary):
            return self._unary(node)
        if isinstance(node, Local) and node.name in self.variables_in_scope:
            return self.variables_in_scope[node.name]
        raise Opaque

    def _by_part(self, node: Node) -> Expr:
        if self.dialect.vector:
            return self._by_element(node)
        free = [each for each in walk(node) if isinstance(each, Local)]
        if any(each.name in self.variables_in_scope for each in free):
            raise Opaque
        blocks = [each.block for each in walk(node) if isinstance(each, Area)]
        cells = tuple(dict.fromkeys(cell for block in blocks for cell in self.moving(block)))
        name = self.name("s", self.part(node, self.cell, cells))
        return Expr(f"{name}({', '.join(self.variables[cell] for cell in cells)})", Sort.ANY)

    def _by_element(self, node: Node) -> Expr:
        assert self.element is not None
        self.element.cell = self.cell
        self.element.variables_in_scope = dict(self.variables_in_scope)
        expr = self.element.emit(node)
        if expr.sort is not Sort.NUMBER:
            raise Opaque
        return self._over_vectors(expr.text)

    def _over_vectors(self, text: str) -> Expr:
        """An element's text as a function over vectors; NaN where it raises."""
        assert self.vectorised is not None
        uses = tuple(dict.fromkeys(_VARIABLE.findall(text)))
        free = tuple(each for each in uses if f"{each} :=" not in text)
        name = self.name("e", self.vectorised(text, free))
        return Expr(f"{name}({', '.join(free)})", Sort.NUMBER, grows=True)

    def _area(self, node: Area) -> Expr:
        block = node.block
        if not block.is_cell:
            lined_up = _lined_up(block, self.cell)
            if lined_up is None:
                return self.fixed(Fault.VALUE)
            return self.emit(Area(Block.of(lined_up)))
        name = self.variables[block.first]
        return Expr(name, self.sorts[name], grows=name in self.growing)

    def _unary(self, node: Unary) -> Expr:
        if node.operator in "@+":
            return self.emit(node.operand)
        operand = self.emit(node.operand)
        number = self.number(operand)
        if node.operator == "%":
            return Expr(f"{self.enclosed(number)}/100.0", Sort.NUMBER, Level.PRODUCT, operand.grows)
        return Expr(f"(-{self.enclosed(number)})", Sort.NUMBER, grows=operand.grows)

    def _binary(self, node: Binary) -> Expr:
        pending: list[tuple[str, Node]] = []
        left: Node = node
        while isinstance(left, Binary):
            pending.append((left.operator, left.right))
            left = left.left
            if not self.moves(left):
                break
        result = self.emit(left)
        for operator, right in reversed(pending):
            result = self._operation(operator, result, self.emit(right))
        return result

    def _operation(self, operator: str, left: Expr, right: Expr) -> Expr:
        if operator in "+-*/^":
            return self._arithmetic(operator, left, right)
        if operator in _COMPARISONS:
            return self._comparison(operator, left, right)
        if operator == "&" and not self.dialect.vector:
            return Expr(f"text_of(join({left.text}, {right.text}))", Sort.TEXT)
        raise Opaque

    def _arithmetic(self, operator: str, left: Expr, right: Expr) -> Expr:
        a, b = self.number(left), self.number(right)
        if operator in "+-":
            other = f"({b.text})" if b.level is Level.SUM else b.text
            return Expr(f"{a.text} {operator} {other}", Sort.NUMBER, Level.SUM, grows=True)
        if operator == "^":
            return self._power(a, b)
        head = f"({a.text})" if a.level is Level.SUM else a.text
        if operator == "*":
            return Expr(f"{head}*{self.enclosed(b)}", Sort.NUMBER, Level.PRODUCT, grows=True)
        return Expr(f"{head}/{self.kept(b)}", Sort.NUMBER, Level.PRODUCT, grows=True)

    def _power(self, base: Expr, exponent: Expr) -> Expr:
        if exponent.fixed and exponent.value == 2.0 and _VARIABLE.fullmatch(base.text):
            return Expr(f"{base.text}*{base.text}", Sort.NUMBER, Level.PRODUCT, grows=True)
        if exponent.fixed and isinstance(exponent.value, float) and exponent.value > 0.0:
            return Expr(f"raised({base.text}, {exponent.text})", Sort.NUMBER, grows=True)
        return Expr(f"power({self.kept(base)}, {self.kept(exponent)})", Sort.NUMBER, grows=True)

    def _comparison(self, operator: str, left: Expr, right: Expr) -> Expr:
        plain = (Sort.NUMBER, Sort.NUMBER)
        if left.fixed and left.value is None and right.sort is Sort.NUMBER:
            left = self.fixed(0.0)
        if right.fixed and right.value is None and left.sort is Sort.NUMBER:
            right = self.fixed(0.0)
        if (left.sort, right.sort) == plain:
            sign = _COMPARISONS[operator]
            return Expr(f"({self.kept(left)} {sign} {self.kept(right)})", Sort.LOGICAL)
        if self.dialect.vector:
            raise Opaque
        return Expr(f"truth({_NAMED[operator]}({left.text}, {right.text}))", Sort.LOGICAL)

    # -- conversions --------------------------------------------------------------------------

    def number(self, expr: Expr) -> Expr:
        """The expression as a number; code that raises where it is none."""
        if expr.fixed:
            number = to_number(expr.value)
            if isinstance(number, Fault):
                return Expr("fail()", Sort.NUMBER, grows=self.dialect.vector)
            return self.fixed(number)
        if expr.sort is Sort.NUMBER:
            return expr
        if expr.sort is Sort.LOGICAL:
            return Expr(f"1.0*{expr.text}", Sort.NUMBER, Level.PRODUCT)
        if self.dialect.vector:
            raise Opaque
        return Expr(f"number_of({expr.text})", Sort.NUMBER)

    def condition(self, expr: Expr) -> str:
        """The expression as the text of a truth value."""
        if expr.fixed:
            logical = to_logical(expr.value)
            return "fail()" if isinstance(logical, Fault) else repr(logical)
        if expr.sort is Sort.LOGICAL:
            return expr.text
        if expr.sort is Sort.NUMBER:
            return f"({self.kept(expr)} != 0.0)"
        if self.dialect.vector:
            raise Opaque
        return f"truth({expr.text})"

    def enclosed(self, expr: Expr) -> str:
        """The text, in parentheses unless it is an atom."""
        return expr.text if expr.level is Level.ATOM else f"({expr.text})"

    def kept(self, expr: Expr) -> str:
        """The text as an atom whose overflow will be noticed at the end."""
        if not expr.grows:
            return self.enclosed(expr)
        if not self.dialect.guards:
            return f"finite({expr.text})"
        if _VARIABLE.fullmatch(expr.text):
            if expr.text not in self.guards:
                self.guards.append(expr.text)
            return expr.text
        guard = f"g{len(self.guards)}"
        self.guards.append(guard)
        return f"({guard} := {expr.text})"

    # -- functions ----------------------------------------------------------------------------

    def _call(self, node: Call) -> Expr:
        special = _SPECIAL.get(node.name)
        found = None if special is None else special(self, node)
        if found is not None:
            return found
        entry = functions.find(node.name)
        if entry is None or entry.wrong_count(len(node.arguments)):
            raise Opaque
        if entry.fold is not None:
            return self._fold(entry, node)
        if entry.form is not None and len(node.arguments) == entry.form.count("{"):
            return self._formed(entry.form, node)
        return self._ruled(entry, node)

    def _formed(self, form: str, node: Call) -> Expr:
        numbers = [self.number(self.emit(each)) for each in node.arguments]
        if _KEEPS_INFINITY.fullmatch(form):
            texts = [each.text for each in numbers]
        else:
            texts = [self.kept(each) for each in numbers]
        # Over vectors a function does not raise outside its domain: its NaN has to be noticed.
        grows = self.dialect.vector or any(sign in form for sign in "+-*/")
        return Expr(f"({form.format(*texts)})", Sort.NUMBER, grows=grows)

    def _fold(self, entry: Entry, node: Call) -> Expr:
        terms: list[Expr] = []
        for argument in node.arguments:
            if isinstance(argument, Area):
                terms.extend(self._terms(argument.block))
            elif isinstance(argument, (Omitted, Array)):
                raise Opaque
            else:
                terms.append(self._term(argument))
        assert entry.fold is not None
        if entry.fold in (Fold.MINIMUM, Fold.MAXIMUM):
            texts = [self.kept(each) for each in terms]
        else:
            texts = [self.enclosed(each) for each in terms]
        if not texts:
            raise Opaque
        if entry.fold is Fold.SUM and len(texts) <= LONGEST_SUM:
            return Expr(" + ".join(texts), Sort.NUMBER, Level.SUM, grows=True)
        if len(texts) == 1:
            return terms[0]
        packed = "".join(f"{text}, " for text in texts)
        return Expr(f"{_FOLDS[entry.fold]}(({packed}))", Sort.NUMBER, grows=True)

    def _term(self, argument: Node) -> Expr:
        """A computed argument among many numbers. It may be a reference, whose texts, logicals
        and blanks do not count, so only a plain number is settled here."""
        expr = self.emit(argument)
        if expr.sort is not Sort.ANY and (expr.sort is Sort.NUMBER or not expr.fixed):
            return self.number(expr)
        if isinstance(argument, Literal):
            return self.number(expr)
        if expr.fixed or self.dialect.vector:
            raise Opaque
        return Expr(f"plain({expr.text})", Sort.NUMBER)

    def _terms(self, block: Block) -> list[Expr]:
        """The numbers of a range; texts, logicals and blanks in a range do not count."""
        terms = []
        for cell in self.ledger.book.clipped(block).cells():
            name = self.variables.get(cell)
            if name is None:
                value = self.ledger.value(cell)
                if isinstance(value, (float, Fault)):
                    terms.append(self.number(self.fixed(value)))
            elif self.sorts[name] is Sort.NUMBER:
                terms.append(Expr(name, Sort.NUMBER, grows=name in self.growing))
            elif self.sorts[name] is Sort.ANY:
                raise Opaque
        return terms

    def _ruled(self, entry: Entry, node: Call) -> Expr:
        """A call of the function's rule for single values."""
        if self.dialect.vector:
            raise Opaque
        areas_only = all(isinstance(each, Area) or not self.moves(each) for each in node.arguments)
        if node.name in ARRAY_TAKERS and not areas_only:
            raise Opaque
        areas = [each.block for each in node.arguments if isinstance(each, Area)]
        if len(areas) > 1 and any(self.ledger.book.clipped(each) != each for each in areas):
            raise Opaque
        texts = []
        for position, argument in enumerate(node.arguments):
            take = entry.parameter(position)
            forced = Mode.ARRAY if node.name in ARRAY_TAKERS else Mode.PLAIN
            texts.append(self._argument(take, argument, forced))
        rule = self.name("f", entry.rule)
        text = f"{rule}({', '.join(texts)})"
        if entry.gives is Gives.ANY:
            return Expr(text, Sort.ANY)
        check = {Gives.NUMBER: "number_of", Gives.TEXT: "text_of", Gives.LOGICAL: "truth"}
        return Expr(f"{check[entry.gives]}({text})", _GIVEN[entry.gives])

    def _argument(self, take: Takes, node: Node, forced: Mode) -> str:
        """An argument's text as the rule takes it."""
        if isinstance(node, Omitted):
            return _EMPTY.get(take, "None")
        if take is Takes.RAW:
            return self._raw(node, forced)
        if take is Takes.LAZY:
            raise Opaque
        expr = self.emit(node)
        if take is Takes.NUMBER:
            return self.kept(self.number(expr))
        if take is Takes.LOGICAL:
            return self.condition(expr)
        if take is Takes.TEXT:
            return f"text_of({expr.text})"
        if expr.sort is not Sort.ANY:
            return self.kept(expr)
        return f"{'one' if take is Takes.SCALAR else 'flat'}({expr.text})"

    def _raw(self, node: Node, forced: Mode) -> str:
        if not self.moves(node):
            if isinstance(node, Area):
                return self.name("k", self.ledger.grid(node.block))
            return self.name("k", evaluate(node, Scope(self.cell, self.ledger, forced)))
        if not isinstance(node, Area):
            return self.kept(self.emit(node))
        block, used = node.block, self.ledger.book.clipped(node.block)
        if used.height * used.width > LARGEST_GRID:
            raise Opaque
        rows = []
        for row in range(used.top, used.bottom + 1):
            texts = []
            for column in range(used.left, used.right + 1):
                cell = Cell(block.sheet, row, column)
                name = self.variables.get(cell)
                texts.append(name or self.spelled(self.ledger.value(cell)))
            rows.append(f"({', '.join(texts)},)")
        return f"Grid(({', '.join(rows)},), {self.name('k', block)})"


_EMPTY = {Takes.NUMBER: "0.0", Takes.TEXT: '""', Takes.LOGICAL: "False"}


def _lined_up(block: Block, cell: Cell) -> Cell | None:
    """The cell of a one-line range that lines up with the formula's cell."""
    if block.width == 1 and block.top <= cell.row <= block.bottom:
        return Cell(block.sheet, cell.row, block.left)
    if block.height == 1 and block.left <= cell.column <= block.right:
        return Cell(block.sheet, block.top, cell.column)
    return None


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
    yes, no = (emitter.emit(_filled(each)) for each in branches)
    sort = yes.sort if yes.sort is no.sort else Sort.ANY
    if emitter.dialect.vector and sort not in (Sort.NUMBER, Sort.LOGICAL):
        raise Opaque
    text = emitter.dialect.choose.format(condition, yes.text, no.text)
    return Expr(text, sort, grows=yes.grows or no.grows)


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
                parts.append(f"({variable} := {expr.text})")
                if expr.grows:
                    emitter.growing.add(variable)
                expr = Expr(variable, expr.sort, grows=expr.grows)
            emitter.variables_in_scope[name.name] = expr
        body = emitter.emit(node.arguments[-1])
    finally:
        emitter.variables_in_scope = outer
    if not parts:
        return body
    return Expr(f"({', '.join(parts)}, {body.text})[-1]", body.sort, grows=body.grows)


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


_SPECIAL: dict[str, Callable[[Emitter, Call], Expr | None]] = {
    "MATCH": _match,
    "INDEX": _index,
    "VLOOKUP": _vlookup,
    "IF": _if,
    "IFS": _ifs,
    "AND": _all_or_any,
    "OR": _all_or_any,
    "NOT": _not,
    "IFERROR": _without_fault,
    "IFNA": _without_fault,
    "LET": _let,
}
"""Functions that are code rather than calls, where their arguments permit it."""
