"""What a text with wildcards matches, and what a criterion means.

Types never match across, except that a criterion's number also finds the text of that number.
Texts compare without case. `*` and `?` stand for any letters and any one, `~` takes a following
`*`, `?` or `~` literally. Source: Excel's documentation of MATCH and COUNTIF.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from functools import lru_cache

from xlroot.errors import Unsupported
from xlroot.kinds.real import compare
from xlroot.texts import decimal
from xlroot.values import FAULTS, Fault, Value, read_number

_WILD = re.compile(r"~([*?~])|([*?])|(~)|([^*?~]+)")


@lru_cache(maxsize=1024)
def pattern(text: str) -> re.Pattern[str] | None:
    """The pattern of a text with wildcards, or None where it has none.

    Unsupported for a `~` before any other letter: hosts keep it or drop it.
    """
    if not any(sign in text for sign in "*?~"):
        return None
    out = ""
    for literal, wild, lone, plain in _WILD.findall(text):
        if lone:
            raise Unsupported(f'looks for "{text}", where hosts read the ~ differently; write ~~')
        out += {"*": ".*", "?": "."}.get(wild, "") + re.escape(literal + plain)
    return re.compile(out, re.IGNORECASE | re.DOTALL)


def same(wanted: Value, value: Value) -> bool:
    """Whether two values of one type are equal."""
    if type(wanted) is not type(value):
        return False
    if isinstance(wanted, str) and isinstance(value, str):
        return wanted.casefold() == value.casefold()
    return wanted == value


_OPERATORS = ("<=", ">=", "<>", "<", ">", "=")


def criterion(condition: Value) -> Callable[[Value], bool]:
    """The test that a criterion such as `">=5"`, `"pump*"` or 7 stands for."""
    if isinstance(condition, Fault):
        return lambda value: value is condition
    if not isinstance(condition, str):
        return _equal(0.0 if condition is None else condition)
    operator = next((each for each in _OPERATORS if condition.startswith(each)), "")
    rest = condition[len(operator) :]
    operand = _operand(rest)
    if operator in ("", "="):
        if rest == "" and operator == "=":
            return lambda value: value is None
        return _equal(operand)
    if operator == "<>":
        if rest == "":
            return lambda value: value is not None
        equal = _equal(operand)
        return lambda value: not equal(value)
    return _ordered(operator, operand)


def _operand(text: str) -> Value:
    upper = text.upper()
    if upper in ("TRUE", "FALSE"):
        return upper == "TRUE"
    if upper in FAULTS:
        return FAULTS[upper]
    number = read_number(text) if text.strip(" ") else Fault.VALUE
    return text if isinstance(number, Fault) else number


def _equal(operand: Value) -> Callable[[Value], bool]:
    if isinstance(operand, str):
        wild = pattern(operand)
        if wild is not None:
            return lambda value: isinstance(value, str) and wild.fullmatch(value) is not None
        if operand == "":
            return lambda value: value is None or value == ""
    if type(operand) is float:
        return lambda value: (
            value == operand
            if type(value) is float
            else isinstance(value, str) and decimal(value.strip(" ")) == operand
        )
    return lambda value: same(operand, value)


def _ordered(operator: str, operand: Value) -> Callable[[Value], bool]:
    def test(value: Value) -> bool:
        if value is None or type(value) is not type(operand):
            return False
        order = compare(value, operand)
        if isinstance(order, Fault):
            return False
        if operator == "<":
            return order < 0
        if operator == "<=":
            return order <= 0
        return order > 0 if operator == ">" else order >= 0

    return test
