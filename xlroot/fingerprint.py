"""Fingerprint: a hash that changes if and only if the answer of a solve could.

It covers the chain's formulas, the held values and the question, written without addresses: cells
are numbered in the order in which the chain meets them. So a renamed sheet, an inserted row or a
new format leaves it as it is, and any change of a formula, a held value or a limit does not.
"""

from __future__ import annotations

import hashlib

from xlroot.cells import Block, Cell
from xlroot.chain import Chain
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
    Union,
)
from xlroot.ledger import Ledger
from xlroot.question import Question
from xlroot.values import Value


def fingerprint(chain: Chain, ledger: Ledger, question: Question, method: str) -> str:
    """The fingerprint, as 64 hexadecimal digits (SHA-256)."""
    writer = _Writer(ledger, {chain.unknown: "x"})
    lines = [
        "xlroot 1",
        f"between {question.low!r} {question.high!r}",
        f"method {method}",
        f"tolerance {question.tolerance!r}",
        f"safe side {question.safe_side.name}",
        f"start {question.start!r}",
    ]
    for step in chain.steps:
        where = f" of {step.block.height}x{step.block.width}" if step.block else ""
        if step.master is not None:
            part = f"{step.cell.row - step.master.row},{step.cell.column - step.master.column}"
            text = f"part {part} of {writer.cell(step.master)}"
        else:
            text = writer.node(step.node)
        writer.names[step.cell] = f"s{len(writer.names)}"
        lines.append(f"{writer.names[step.cell]}{where} = {text}")
    lines.append(f"zero {writer.cell(chain.residual)}")
    return hashlib.sha256("\n".join(lines).encode()).hexdigest()


class _Writer:
    """Writes nodes without addresses; a held cell is written as its value."""

    def __init__(self, ledger: Ledger, names: dict[Cell, str]) -> None:
        self.ledger = ledger
        self.names = names

    def cell(self, cell: Cell) -> str:
        return self.names[cell] if cell in self.names else _spelled(self.ledger.value(cell))

    def node(self, node: Node) -> str:
        if isinstance(node, Area):
            return self.block(node.block)
        if isinstance(node, Literal):
            return _spelled(node.value)
        if isinstance(node, Binary):
            return self._binary(node)
        if isinstance(node, Unary):
            return f"({node.operator}{self.node(node.operand)})"
        if isinstance(node, Call):
            return f"{node.name}({','.join(map(self.node, node.arguments))})"
        if isinstance(node, Apply):
            return f"{self.node(node.function)}({','.join(map(self.node, node.arguments))})"
        if isinstance(node, Union):
            return f"({'~'.join(map(self.node, node.parts))})"
        if isinstance(node, Array):
            return "{" + ";".join(",".join(map(_spelled, row)) for row in node.rows) + "}"
        if isinstance(node, Local):
            return f"local {node.name}"
        assert isinstance(node, Omitted)
        return ""

    def _binary(self, node: Binary) -> str:
        tail: list[str] = []
        left: Node = node
        while isinstance(left, Binary):
            tail.append(f"{left.operator}{self.node(left.right)})")
            left = left.left
        return "(" * len(tail) + self.node(left) + "".join(reversed(tail))

    def block(self, block: Block) -> str:
        if block.is_cell:
            return self.cell(block.first)
        contents = ",".join(map(self.cell, self.ledger.book.clipped(block).cells()))
        return f"[{block.height}x{block.width}:{contents}]"


def _spelled(value: Value) -> str:
    return "blank" if value is None else repr(value)
