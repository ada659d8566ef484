"""Program: the chain as one function of the unknown, run over any kind of number.

`real` takes a trial value and gives the residual as a float, or the Fault that the residual's
cell would show. `array` does the same for a vector. Both run generated straight-line code
(`xlroot.emit`); wherever that code meets anything but plain finite numbers, the interpreter
computes the chain again for that trial value, so the answer is always the interpreter's.
"""

from __future__ import annotations

import re
import sys
from collections.abc import Callable, Iterable
from functools import cached_property
from typing import TYPE_CHECKING, Any

from xlroot.cells import Block, Cell
from xlroot.chain import Chain
from xlroot.emit import ARRAY, ELEMENT, REAL, Emitter, Expr, Opaque, Sort
from xlroot.formula import Node
from xlroot.frame import Frame
from xlroot.interpret import Mode, Scope, by_element, evaluate, formula_value, single
from xlroot.kinds import array as array_kind
from xlroot.kinds.real import PRIMITIVES
from xlroot.ledger import Ledger, array_result, grid_part
from xlroot.runtime import CAUGHT, HELPERS, NotPlain
from xlroot.values import Fault, Grid, Value, to_number

if TYPE_CHECKING:
    import numpy as np

BLOCK = 2048
"""Trial values that the array kind computes at a time: vectors that stay in the cache."""


class Program:
    """A compiled chain; `source` is the generated code, for anyone who doubts it."""

    def __init__(self, chain: Chain, ledger: Ledger) -> None:
        self.chain = chain
        self.ledger = ledger
        self._chain_cells = frozenset((chain.unknown, *(step.cell for step in chain.steps)))
        self._by_sheet: dict[str, list[Cell]] = {}
        for cell in self._chain_cells:
            self._by_sheet.setdefault(cell.sheet, []).append(cell)
        self.variables = {chain.unknown: "v0"}
        for step in chain.steps:
            self.variables[step.cell] = f"v{len(self.variables)}"
        self.sorts: dict[str, Sort] = {"v0": Sort.NUMBER}
        self.growing: set[str] = set()
        self.source = ""
        self.real: Callable[[float], float | Fault] = self._compile_real()

    # -- exact --------------------------------------------------------------------------------

    def values_at(self, x: Value) -> dict[Cell, Value]:
        """What every chain cell shows with the unknown at x, in calculation order.

        Raises Unsupported, with the cell, where a value cannot be computed faithfully.
        """
        values: dict[Cell, Value] = {self.chain.unknown: x}
        grids: dict[Cell, Grid] = {}
        frame = Frame(self.ledger, values, self.moves)
        for step in self.chain.steps:
            if step.master is not None:
                down, right = step.cell.row - step.master.row, step.cell.column - step.master.column
                values[step.cell] = grid_part(grids[step.master], down, right)
            elif step.block is not None:
                grid = array_result(evaluate(step.node, Scope(step.cell, frame, Mode.ARRAY)))
                grids[step.cell] = grid
                values[step.cell] = grid_part(grid, 0, 0)
            else:
                values[step.cell] = formula_value(step.node, Scope(step.cell, frame))
        return values

    def exact(self, x: float) -> float | Fault:
        """The residual at x by the interpreter."""
        value = self.values_at(float(x))[self.chain.residual]
        return Fault.VALUE if isinstance(value, str) else to_number(value)

    def fault_at(self, x: float) -> tuple[Cell, Fault] | None:
        """The first chain cell, in calculation order, whose fault reaches the residual at x."""
        values = self.values_at(x)
        fault = values[self.chain.residual]
        for cell, value in values.items():
            if isinstance(value, Fault) and value is fault:
                return cell, value
        return None

    def moves(self, block: Block) -> bool:
        """Whether a chain cell, or the unknown, lies in the block."""
        return any(block.holds(cell) for cell in self._by_sheet.get(block.sheet, ()))

    # -- compiled -----------------------------------------------------------------------------

    def _emitter(
        self,
        namespace: dict[str, object],
        *,
        sorts: dict[str, Sort],
        growing: set[str],
        **others: Any,
    ) -> Emitter:
        return Emitter(
            chain=self.chain,
            ledger=self.ledger,
            namespace=namespace,
            variables=self.variables,
            sorts=sorts,
            growing=growing,
            bounds={"v0": sys.float_info.max},
            part=self._part,
            **others,
        )

    def _compile_real(self) -> Callable[[float], float | Fault]:
        namespace = self._real_namespace()
        emitter = self._emitter(namespace, dialect=REAL, sorts=self.sorts, growing=self.growing)
        lines = []
        for step in self.chain.steps:
            name = self.variables[step.cell]
            expr = self._step(emitter, step.cell)
            self.sorts[name] = expr.sort
            if expr.grows:
                self.growing.add(name)
            if expr.sort is Sort.NUMBER:
                emitter.bounds[name] = expr.bound
            lines.append(f"{name} = {expr.text}")
        result = self.variables[self.chain.residual]
        if self.sorts[result] is not Sort.NUMBER:
            lines.append(f"r = outcome({result})")
            result = "r"
        guards = _assigned(emitter.guards, lines)
        starting = [each for each in guards if each in emitter.conditional]
        body = [f"{each} = 0.0" for each in starting] + lines
        # A difference with itself, and a product with zero, are zero for finite numbers alone.
        others = f"*({' + '.join(guards)})" if guards else ""
        body += [f"if {result} - {result} == 0.0{others}:", f"    return {result}"]
        self.source = "\n".join(
            [
                "def residual(v0):",
                "    try:",
                *(f"        {line}" for line in body),
                "    except CAUGHT:",
                "        pass",
                "    return exact(v0)",
            ]
        )
        return self._made(self.source, namespace)

    def _made(self, source: str, namespace: dict[str, object]) -> Callable[..., Any]:
        try:
            exec(compile(source, f"<chain of {self.chain.residual}>", "exec"), namespace)
        except (RecursionError, MemoryError, SyntaxError):
            # Beyond the compiler's own limits on nesting; the interpreter has none.
            return self.exact
        made = namespace["residual"]
        assert callable(made)
        return made

    def _step(self, emitter: Emitter, cell: Cell) -> Expr:
        step = self._steps[cell]
        if step.master is not None:
            down, right = cell.row - step.master.row, cell.column - step.master.column
            return Expr(f"grid_part(grid_{self.variables[step.master]}, {down}, {right})", Sort.ANY)
        if step.block is not None:
            cells = tuple(c for c in self.variables if self._reads(step.node, c))
            name = emitter.name("s", self._array_part(step.node, cell, cells))
            grid = f"grid_{self.variables[cell]}"
            call = f"{name}({', '.join(self.variables[c] for c in cells)})"
            return Expr(f"grid_part({grid} := {call}, 0, 0)", Sort.ANY)
        emitter.cell = cell
        return emitter.formula(step.node, cell)

    @cached_property
    def _steps(self) -> dict[Cell, Any]:
        return {step.cell: step for step in self.chain.steps}

    @staticmethod
    def _reads(node: Node, cell: Cell) -> bool:
        from xlroot.bind import walk
        from xlroot.formula import Area

        return any(isinstance(each, Area) and each.block.holds(cell) for each in walk(node))

    def _part(self, node: Node, cell: Cell, cells: tuple[Cell, ...]) -> Callable[..., Value]:
        def part(*values: Value) -> Value:
            frame = Frame(self.ledger, dict(zip(cells, values, strict=True)), self.moves)
            scope = Scope(cell, frame)
            value = evaluate(node, scope)
            if by_element(value, scope):
                raise NotPlain
            return single(value, scope)

        return part

    def _array_part(self, node: Node, cell: Cell, cells: tuple[Cell, ...]) -> Callable[..., Grid]:
        def part(*values: Value) -> Grid:
            frame = Frame(self.ledger, dict(zip(cells, values, strict=True)), self.moves)
            return array_result(evaluate(node, Scope(cell, frame, Mode.ARRAY)))

        return part

    def _real_namespace(self) -> dict[str, object]:
        return {
            **PRIMITIVES,
            **HELPERS,
            "CAUGHT": CAUGHT,
            "exact": self.exact,
            "__builtins__": {},
        }

    # -- array --------------------------------------------------------------------------------

    @cached_property
    def _vector(self) -> Callable[..., Any] | None:
        """The chain over vectors, giving the residual and a sum that is finite where it is
        sound; None where a step holds no numbers."""
        namespace: dict[str, object] = {**array_kind.primitives(), **array_kind.helpers()}
        scalars = self._real_namespace()

        def vectorised(text: str, names: tuple[str, ...]) -> Callable[..., object]:
            function = eval(f"lambda {', '.join(names)}: {text}", scalars)
            made: Callable[..., object] = array_kind.elementwise(function, CAUGHT)
            return made

        sorts = dict(self.sorts)
        growing: set[str] = set()
        element = self._emitter(scalars, dialect=ELEMENT, sorts=sorts, growing=growing)
        emitter = self._emitter(
            namespace,
            dialect=ARRAY,
            sorts=sorts,
            growing=growing,
            element=element,
            vectorised=vectorised,
        )
        lines = []
        for step in self.chain.steps:
            if step.master is not None or step.block is not None:
                return None
            try:
                expr = emitter.plain(step.node, step.cell)
            except Opaque:
                return None
            name = self.variables[step.cell]
            lines.append(f"{name} = {expr.text}")
            sorts[name] = expr.sort
            if expr.grows:
                growing.add(name)
            if expr.sort is Sort.NUMBER:
                emitter.bounds[name] = expr.bound
        result = self.variables[self.chain.residual]
        guards = _assigned(emitter.guards, lines)
        lines = _freed(lines, keep={result, *guards})
        starting = [f"{each} = 0.0" for each in guards if each in emitter.conditional]
        ending = f"return {result}, {' + '.join([result, *guards])}"
        body = [f"    {line}" for line in (*starting, *lines, ending)]
        exec(
            compile("\n".join(["def residual(v0):", *body]), "<chain over vectors>", "exec"),
            namespace,
        )
        made = namespace["residual"]
        assert callable(made)
        return made

    def array(self, xs: Iterable[float]) -> tuple[np.ndarray[Any, Any], dict[int, Fault]]:
        """The residual at every trial value; NaN, and its fault by position, where it has one."""
        import numpy as np

        trial = np.asarray(xs if isinstance(xs, np.ndarray) else list(xs), dtype=float)
        result = np.full(trial.shape, np.nan)
        sound = np.zeros(trial.shape, dtype=bool)
        vector = self._vector
        if vector is not None:
            with np.errstate(all="ignore"):
                for start in range(0, len(trial), BLOCK):
                    part = slice(start, start + BLOCK)
                    values, checked = vector(trial[part])
                    result[part] = values
                    sound[part] = np.isfinite(checked)
        faults: dict[int, Fault] = {}
        for position in np.flatnonzero(~sound).tolist():
            value = self.real(float(trial[position]))
            if isinstance(value, Fault):
                faults[position] = value
                result[position] = np.nan
            else:
                result[position] = value
        return result, faults


def _assigned(guards: list[str], lines: list[str]) -> list[str]:
    """The guards that the code assigns; attempts that were given up leave others behind."""
    text = "\n".join(lines)
    return [each for each in dict.fromkeys(guards) if each[0] == "v" or f"({each} := " in text]


def _freed(lines: list[str], keep: set[str]) -> list[str]:
    """The lines with every variable deleted after its last use: vectors that are no longer wanted
    give their memory, still in the cache, to the next."""
    last: dict[str, int] = {}
    for number, line in enumerate(lines):
        for name in _VARIABLE.findall(line):
            last[name] = number
    dead: dict[int, list[str]] = {}
    for name, number in last.items():
        if name not in keep:
            dead.setdefault(number, []).append(name)
    return [
        f"{line}; del {', '.join(dead[number])}" if number in dead else line
        for number, line in enumerate(lines)
    ]


_VARIABLE = re.compile(r"\bv\d+\b")
