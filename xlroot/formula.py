"""The text of a formula as a tree of nodes; the only module that touches the parser library.

The grammar is that of spreadsheets: -2^2 is (-2)^2, percent binds tighter than the power, powers
associate to the left. References keep which of their parts are absolute, so that a formula that
is shared by many cells is parsed once and moved.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import formualizer

from xlroot.cells import LAST_COLUMN, LAST_ROW, Block, column_number, split_sheet
from xlroot.errors import AddressError, FormulaError
from xlroot.values import FAULTS, Fault, Value


@dataclass(frozen=True, slots=True)
class Literal:
    """A number, text, logical or fault written in the formula."""

    value: Value


@dataclass(frozen=True, slots=True)
class Omitted:
    """An argument left empty between commas."""


@dataclass(frozen=True, slots=True)
class Corner:
    """One corner of a reference; absolute parts do not move with the formula."""

    row: int
    column: int
    row_fixed: bool
    column_fixed: bool


@dataclass(frozen=True, slots=True)
class Reference:
    """A cell or a range; `sheet` is None for the formula's own sheet."""

    sheet: str | None
    first: Corner
    last: Corner


@dataclass(frozen=True, slots=True)
class NameUse:
    """A defined name, or a variable of LET or LAMBDA."""

    sheet: str | None
    name: str


@dataclass(frozen=True, slots=True)
class TableUse:
    """A structured reference: the table's name, empty within the table, and what is in brackets."""

    table: str
    inside: str


@dataclass(frozen=True, slots=True)
class Unary:
    """A sign, a percent, or the operators @ and #."""

    operator: str
    operand: Node


@dataclass(frozen=True, slots=True)
class Binary:
    """Arithmetic, comparison, &, and the reference operators colon, space and comma."""

    operator: str
    left: Node
    right: Node


@dataclass(frozen=True, slots=True)
class Call:
    """A worksheet function; the name is upper case, without the prefixes that files add."""

    name: str
    arguments: tuple[Node, ...]


@dataclass(frozen=True, slots=True)
class Apply:
    """A function value called in place: LAMBDA(…)(…)."""

    function: Node
    arguments: tuple[Node, ...]


@dataclass(frozen=True, slots=True)
class Array:
    """An array written in braces."""

    rows: tuple[tuple[Value, ...], ...]


@dataclass(frozen=True, slots=True)
class Area:
    """A bound reference (`xlroot.bind`)."""

    block: Block


@dataclass(frozen=True, slots=True)
class Local:
    """A bound variable of LET or LAMBDA."""

    name: str


@dataclass(frozen=True, slots=True)
class Union:
    """Several bound areas as one argument: (A1:A3,C1)."""

    parts: tuple[Node, ...]


Node = (
    Literal
    | Omitted
    | Reference
    | NameUse
    | TableUse
    | Unary
    | Binary
    | Call
    | Apply
    | Array
    | Area
    | Local
    | Union
)
"""A formula as parsed; after binding, without Reference, NameUse and TableUse."""

_AREA = re.compile(
    r"(\$?)([A-Za-z]{1,3})(\$?)([1-9]\d{0,6})(?::(\$?)([A-Za-z]{1,3})(\$?)([1-9]\d{0,6}))?"
)
_COLUMNS = re.compile(r"(\$?)([A-Za-z]{1,3}):(\$?)([A-Za-z]{1,3})")
_ROWS = re.compile(r"(\$?)([1-9]\d{0,6}):(\$?)([1-9]\d{0,6})")
_TABLE = re.compile(r"([^\[\]!']*)\[(.*)\]", re.DOTALL)
_NAME = re.compile(r"[^\W\d]|[\\_]")
_FUNCTION_PREFIX = re.compile(r"(?i)(?:_xlfn\.|_xlws\.|_xludf\.|_xll\.)+")
_OWN_FUNCTION = re.compile(r"(?i)(?:.*[.!])?(XLROOT(?:_[A-Z]+)?)")
_SHIELD = "\x01"


@lru_cache(maxsize=65536)
def parse(text: str) -> Node:
    """The tree of a formula's text, without or with its leading `=`.

    Raises FormulaError with what the parser found; the caller knows the cell.
    """
    body = text.removeprefix("=")
    # The parser gives the text "#N/A" and the fault #N/A alike; a shield keeps them apart.
    shielded = body.replace('"#', f'"{_SHIELD}#') if '"#' in body else body
    try:
        tree = formualizer.parse("=" + shielded).to_dict()
    except (formualizer.ParserError, formualizer.TokenizerError, ValueError) as error:
        shown = body if len(body) <= 120 else body[:117] + "..."
        raise FormulaError(f"cannot read the formula ={shown} ({error})") from None
    return _node(tree)


def _node(tree: dict[str, Any]) -> Node:
    kind = tree["node_type"]
    if kind == "BinaryOp":
        return _binary(tree)
    if kind == "Reference":
        return read_reference(tree["reference"])
    if kind == "Literal":
        return Literal(_literal(tree["value"]))
    if kind == "Function":
        return Call(function_name(tree["name"]), tuple(map(_node, tree["args"])))
    if kind == "UnaryOp":
        return Unary(tree["operator"], _node(tree["operand"]))
    if kind == "Omitted":
        return Omitted()
    if kind == "Array":
        return Array(tuple(tuple(map(_element, row)) for row in tree["rows"]))
    if kind == "Call":
        return Apply(_node(tree["callee"]), tuple(map(_node, tree["args"])))
    raise FormulaError(f"a part of the formula is of an unknown sort: {kind}")


def _binary(tree: dict[str, Any]) -> Node:
    # Long sums lean to the left; walking down them keeps the recursion shallow.
    pending: list[tuple[str, dict[str, Any]]] = []
    while tree["node_type"] == "BinaryOp":
        pending.append((tree["operator"], tree["right"]))
        tree = tree["left"]
    node = _node(tree)
    for operator, right in reversed(pending):
        node = Binary(operator, node, _node(right))
    return node


def _literal(value: object) -> Value:
    if isinstance(value, bool):
        return value
    if isinstance(value, (int, float)):
        number = float(value)
        if number in (float("inf"), float("-inf")):
            raise FormulaError("the formula holds a number beyond 1.8E+308")
        return number
    text = str(value)
    if text in FAULTS:
        return FAULTS[text]
    if text.startswith("#ERROR!"):
        raise FormulaError(f"the formula holds an error value that is not known: {text}")
    return text.replace(_SHIELD, "") if _SHIELD in text else text


def _element(tree: dict[str, Any]) -> Value:
    node = _node(tree)
    if isinstance(node, Literal):
        return node.value
    if isinstance(node, Unary) and isinstance(node.operand, Literal):
        value = node.operand.value
        if isinstance(value, float) and node.operator in "+-":
            return -value if node.operator == "-" else value
    raise FormulaError("an array in braces may hold numbers, texts, logicals and faults only")


def function_name(written: str) -> str:
    """A function's name as it is known: upper case, without the prefixes of files and hosts.

    xlroot's own functions are recognised however a host wrote them: `_xll.XLROOT`,
    `[1]!XLROOT`, `'C:\\…\\file.xlam'!XLROOT`, or with a dotted add-in prefix.
    """
    own = _OWN_FUNCTION.fullmatch(written)
    if own:
        return own[1].upper()
    return _FUNCTION_PREFIX.sub("", written).upper()


def read_reference(text: str) -> Node:
    """The node of a reference's text: a range, a name, a structured reference."""
    if "[" in text and "!" not in text:
        match = _TABLE.fullmatch(text)
        if match is not None:
            return TableUse(match[1], match[2].replace(_SHIELD, ""))
    try:
        sheet, rest = split_sheet(text)
    except AddressError as error:
        raise FormulaError(str(error)) from None
    match = _AREA.fullmatch(rest)
    if match is not None:
        first = _corner(match[4], match[2], match[3], match[1])
        last = first if not match[6] else _corner(match[8], match[6], match[7], match[5])
        if max(first.row, last.row) <= LAST_ROW and max(first.column, last.column) <= LAST_COLUMN:
            return Reference(sheet, first, last)
    match = _COLUMNS.fullmatch(rest)
    if match is not None:
        first = _corner("1", match[2], "$", match[1])
        return Reference(sheet, first, _corner(str(LAST_ROW), match[4], "$", match[3]))
    match = _ROWS.fullmatch(rest)
    if match is not None:
        first = _corner(match[2], "A", match[1], "$")
        return Reference(sheet, first, _corner(match[4], "XFD", match[3], "$"))
    if rest in FAULTS:
        return Literal(Fault.REF)
    if _NAME.match(rest):
        return NameUse(sheet, rest)
    raise FormulaError(f"cannot read the reference {text}")


def _corner(row: str, column: str, row_mark: str, column_mark: str) -> Corner:
    return Corner(
        int(row),
        column_number(column),
        row_fixed=bool(row_mark),
        column_fixed=bool(column_mark),
    )
