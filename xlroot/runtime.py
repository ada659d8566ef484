"""What compiled text calls besides a kind's primitives, over single values.

Whatever is not a plain number, logical or text raises `NotPlain`: the program then lets the
interpreter decide.
"""

from __future__ import annotations

import math
from bisect import bisect_right

from xlroot.errors import Unsupported
from xlroot.kinds.real import OPERATORS, join
from xlroot.ledger import grid_part
from xlroot.values import Fault, Grid, to_logical, to_number, to_text


class NotPlain(Exception):
    """Compiled code met something that only the interpreter decides."""


CAUGHT = (ArithmeticError, ValueError, NotPlain, Unsupported)
"""What compiled code raises where the interpreter has to decide."""


def _single(value: object) -> object:
    """A reference to one cell, as INDEX gives it, as what the cell holds."""
    if isinstance(value, Grid):
        if value.height == value.width == 1:
            return value.rows[0][0]
        raise NotPlain
    return value


def _number_of(value: object) -> float:
    if type(value) is float:
        return value
    value = _single(value)
    if value is None or isinstance(value, (float, bool, str)):
        number = to_number(value)
        if type(number) is float:
            return number
    raise NotPlain


def _outcome(value: object) -> float:
    """The residual's number; a text is none, whatever it reads as."""
    if isinstance(value, str):
        raise NotPlain
    return _number_of(value)


def _truth(value: object) -> bool:
    value = _single(value)
    if value is None or isinstance(value, (bool, float, str)):
        logical = to_logical(value)
        if isinstance(logical, bool):
            return logical
    raise NotPlain


def _text_of(value: object) -> str:
    value = _single(value)
    if value is None or isinstance(value, (float, bool, str)):
        text = to_text(value)
        if isinstance(text, str):
            return text
    raise NotPlain


def _one(value: object) -> object:
    value = _single(value)
    if isinstance(value, Fault):
        raise NotPlain
    return value


def _shown(value: object) -> object:
    """What a cell shows whose formula gives the value; a blank shows as 0."""
    value = _single(value)
    return 0.0 if value is None else value


def _located(count: int) -> float:
    """The position that a bisection found; none is a fault."""
    if count:
        return float(count)
    raise NotPlain


def _picked(line: tuple[float, ...], place: float) -> float:
    """The number at a position counted from 1."""
    position = int(place)
    if 1 <= position <= len(line):
        return line[position - 1]
    raise NotPlain


def _finite(value: float) -> float:
    if math.isfinite(value):
        return value
    raise NotPlain


def _plain(value: object) -> float:
    value = _single(value)
    if type(value) is float:
        return value
    raise NotPlain


def _fail() -> float:
    raise NotPlain


def _total(terms: tuple[float, ...]) -> float:
    result = 0.0
    for term in terms:
        result += term
    return result


HELPERS: dict[str, object] = {
    "number_of": _number_of,
    "outcome": _outcome,
    "truth": _truth,
    "text_of": _text_of,
    "one": _one,
    "shown": _shown,
    "flat": _single,
    "bisected": bisect_right,
    "located": _located,
    "picked": _picked,
    "finite": _finite,
    "plain": _plain,
    "fail": _fail,
    "total": _total,
    "product": math.prod,
    "least": min,
    "most_of": max,
    "negated": lambda value: not value,
    "raised": math.pow,
    "join": join,
    "Grid": Grid,
    "grid_part": grid_part,
    "equal": OPERATORS["="],
    "differ": OPERATORS["<>"],
    "less": OPERATORS["<"],
    "most": OPERATORS["<="],
    "more": OPERATORS[">"],
    "least_of": OPERATORS[">="],
}
"""What compiled text calls besides the kind's primitives."""
