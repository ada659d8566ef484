"""The emitter: formulas of one chain as the text of one function, node by node."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field

from xlroot.bind import walk
from xlroot.cells import Block, Cell
from xlroot.chain import Chain
from xlroot.emit.calls import call
from xlroot.emit.expression import LARGEST, VARIABLE, Dialect, Expr, Level, Opaque, Sort, Whole
from xlroot.errors import Unsupported
from xlroot.formula import Area, Binary, Call, Local, Node, Unary
from xlroot.interpret import Scope, by_element, evaluate, single
from xlroot.kinds import array as array_kind
from xlroot.ledger import Ledger
from xlroot.values import Fault, Value, to_logical, to_number

_COMPARISONS = {"=": "==", "<>": "!=", "<": "<", "<=": "<=", ">": ">", ">=": ">="}
_NAMED = {"=": "equal", "<>": "differ", "<": "less", "<=": "most", ">": "more", ">=": "least_of"}

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
    bounds: dict[str, float]
    part: Callable[[Node, Cell, tuple[Cell, ...]], Callable[..., Value]]
    """Makes a function of some chain cells' values that lets the interpreter find a node."""
    element: Emitter | None = None
    """For a vector dialect: the emitter of what has to go element by element."""
    vectorised: Callable[[str, tuple[str, ...]], Callable[..., object]] | None = None
    """For a vector dialect: makes a function over vectors of an element's text."""
    guards: list[str] = field(default_factory=list)
    """Names whose values have to be finite at the end."""
    branching: int = 0
    """How many conditions the text being written stands behind."""
    conditional: set[str] = field(default_factory=set)
    """Guards and locals that are assigned behind a condition, and so perhaps not at all."""
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
            try:
                return self.fixed(self.constant(node))
            except Unsupported:
                # It may stand in a branch that is never taken: it is refused where it is met.
                return self._by_part(node)
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
        bound = abs(value) if isinstance(value, float) else math.inf
        return Expr(self.spelled(value), sort, fixed=True, value=value, bound=bound)

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
            return call(self, node)
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
        uses = tuple(dict.fromkeys(VARIABLE.findall(text)))
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
        bound = self.bounds.get(name, math.inf)
        return Expr(name, self.sorts[name], grows=name in self.growing, bound=bound)

    def _unary(self, node: Unary) -> Expr:
        if node.operator in "@+":
            return self.emit(node.operand)
        operand = self.emit(node.operand)
        number = self.number(operand)
        if node.operator == "%":
            text = f"{self.enclosed(number)}/100.0"
            bound = number.bound / 100.0
            return Expr(text, Sort.NUMBER, Level.PRODUCT, number.grows, bound=bound)
        text = f"(-{self.enclosed(number)})"
        return Expr(text, Sort.NUMBER, grows=number.grows, bound=number.bound)

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
        if operator == "^":
            return self._power(a, b)
        bound = _bound(operator, a, b)
        grows = a.grows or b.grows or not bound < math.inf
        if operator in "+-":
            other = f"({b.text})" if b.level is Level.SUM else b.text
            text = f"{a.text} {operator} {other}"
            return Expr(text, Sort.NUMBER, Level.SUM, grows, bound=bound)
        head = f"({a.text})" if a.level is Level.SUM else a.text
        tail = self.enclosed(b) if operator == "*" else self.kept(b)
        return Expr(f"{head}{operator}{tail}", Sort.NUMBER, Level.PRODUCT, grows, bound=bound)

    def _power(self, base: Expr, exponent: Expr) -> Expr:
        if exponent.fixed and exponent.value == 2.0 and VARIABLE.fullmatch(base.text):
            bound = base.bound * base.bound
            grows = base.grows or not bound < math.inf
            text = f"{base.text}*{base.text}"
            return Expr(text, Sort.NUMBER, Level.PRODUCT, grows, bound=bound)
        # Over floats a power raises where it overflows; over vectors it does not.
        vector = self.dialect.vector
        if exponent.fixed and isinstance(exponent.value, float) and exponent.value > 0.0:
            text, grows = f"raised({base.text}, {exponent.text})", vector or base.grows
        else:
            text, grows = f"power({self.kept(base)}, {self.kept(exponent)})", vector
        return Expr(text, Sort.NUMBER, grows=grows, bound=math.inf if grows else LARGEST)

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
            return Expr(f"1.0*{expr.text}", Sort.NUMBER, Level.PRODUCT, bound=1.0)
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
        if VARIABLE.fullmatch(expr.text):
            if expr.text not in self.guards:
                self.guards.append(expr.text)
            return expr.text
        guard = f"g{len(self.guards)}"
        self.guards.append(guard)
        if self.branching:
            self.conditional.add(guard)
        return f"({guard} := {expr.text})"


def _bound(operator: str, a: Expr, b: Expr) -> float:
    """A magnitude that the operation cannot exceed; infinite or NaN where there is none."""
    if operator == "*":
        return a.bound * b.bound
    if operator == "/":
        return a.bound / b.bound if b.fixed and b.bound else math.inf
    return a.bound + b.bound


def _lined_up(block: Block, cell: Cell) -> Cell | None:
    """The cell of a one-line range that lines up with the formula's cell."""
    if block.width == 1 and block.top <= cell.row <= block.bottom:
        return Cell(block.sheet, cell.row, block.left)
    if block.height == 1 and block.left <= cell.column <= block.right:
        return Cell(block.sheet, block.top, cell.column)
    return None
