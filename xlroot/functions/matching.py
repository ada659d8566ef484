"""How lookups compare: exact and approximate matches, wildcards, criteria.

Types never match across: a number is not found among texts. Texts compare without case. `*` and
`?` stand for any letters and any one, `~` takes the next sign literally (Excel's documentation of
MATCH and COUNTIF).
"""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Sequence
from functools import lru_cache

from xlroot.errors import Unsupported
from xlroot.kinds.real import compare
from xlroot.values import FAULTS, Fault, Value, read_number


@lru_cache(maxsize=1024)
def pattern(text: str) -> re.Pattern[str] | None:
    """The pattern of a text with wildcards, or None where it has none."""
    if not any(sign in text for sign in "*?~"):
        return None
    out, position = "", 0
    while position < len(text):
        letter = text[position]
        if letter == "~" and position + 1 < len(text) and text[position + 1] in "*?~":
            position += 1
            out += re.escape(text[position])
        else:
            out += {"*": ".*", "?": "."}.get(letter, re.escape(letter))
        position += 1
    return re.compile(out, re.IGNORECASE | re.DOTALL)


def same(wanted: Value, value: Value) -> bool:
    """Whether two values of one type are equal."""
    if type(wanted) is not type(value):
        return False
    if isinstance(wanted, str) and isinstance(value, str):
        return wanted.casefold() == value.casefold()
    return wanted == value


def exact(wanted: Value, values: Sequence[Value]) -> int | None:
    """The position of the first equal value; texts with wildcards match their pattern."""
    if type(wanted) is float:
        for position, value in enumerate(values):
            if type(value) is float and value == wanted:
                return position
        return None
    if isinstance(wanted, str):
        wild = pattern(wanted)
        if wild is not None:
            for position, value in enumerate(values):
                if isinstance(value, str) and wild.fullmatch(value):
                    return position
            return None
    for position, value in enumerate(values):
        if same(wanted, value):
            return position
    return None


def _kind(value: Value) -> int:
    if type(value) is float:
        return 0
    return 1 if isinstance(value, str) else 2 if isinstance(value, bool) else 3


def at_most(wanted: Value, values: Sequence[Value], *, descending: bool = False) -> int | None:
    """The position of the last value not beyond the wanted one, in a sorted sequence.

    Only values of the wanted type count, as hosts have it. Raises Unsupported where they are not
    sorted: hosts then answer differently.
    """
    kind, found, last = _kind(wanted), None, None
    passed = False
    for position, value in enumerate(values):
        if isinstance(value, Fault) or _kind(value) != kind:
            continue
        if last is not None:
            order = compare(last, value)
            assert isinstance(order, int)
            if (order < 0) if descending else (order > 0):
                raise Unsupported(
                    "looks up an approximate match in a range that is not sorted; sort it, or "
                    "ask for an exact match"
                )
        last = value
        if passed:
            continue
        side = compare(value, wanted)
        assert isinstance(side, int)
        if (side >= 0) if descending else (side <= 0):
            found = position
        else:
            passed = True
    return found


_OPERATORS = ("<=", ">=", "<>", "<", ">", "=")


def criterion(condition: Value) -> Callable[[Value], bool]:
    """The test that a criterion such as `">=5"`, `"pump*"` or 7 stands for."""
    if isinstance(condition, Fault):
        return lambda value: value is condition
    if not isinstance(condition, str):
        wanted: Value = 0.0 if condition is None else condition
        return lambda value: same(wanted, value) or _reads_as(wanted, value)
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


def _reads_as(wanted: Value, value: Value) -> bool:
    """A text that reads as the wanted number counts as it."""
    return type(wanted) is float and isinstance(value, str) and _number(value) == wanted


def _number(text: str) -> float | None:
    try:
        number = float(text)
    except ValueError:
        return None
    return number if math.isfinite(number) else None


def _operand(text: str) -> Value:
    upper = text.upper()
    if upper in ("TRUE", "FALSE"):
        return upper == "TRUE"
    if upper in FAULTS:
        return FAULTS[upper]
    try:
        number = read_number(text) if text.strip() else Fault.VALUE
    except Unsupported:
        return text
    return text if isinstance(number, Fault) else number


def _equal(operand: Value) -> Callable[[Value], bool]:
    if isinstance(operand, str):
        wild = pattern(operand)
        if wild is not None:
            return lambda value: isinstance(value, str) and wild.fullmatch(value) is not None
        if operand == "":
            return lambda value: value is None or value == ""
    return lambda value: same(operand, value) or _reads_as(operand, value)


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
