"""The real kind: floats with a spreadsheet's arithmetic.

`PRIMITIVES` are the functions that a form may use (see `xlroot.functions.entry`); every other
kind provides the same names. Over floats they raise instead of giving infinities: ValueError and
OverflowError stand for #NUM!, ZeroDivisionError for #DIV/0!. The operators below work on any
values, with faults as values, and follow OpenFormula (OASIS ODF 1.3 part 4, section 6.4) where
Excel's documentation does not differ: 0^0 is #NUM! and 0 to a negative power is #DIV/0!.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

from xlroot.values import Fault, Value, to_number, to_text

FAULT_OF: dict[type[ArithmeticError] | type[ValueError], Fault] = {
    ZeroDivisionError: Fault.DIV0,
    OverflowError: Fault.NUM,
    ValueError: Fault.NUM,
}


def power(base: float, exponent: float) -> float:
    """base ^ exponent for reals; ValueError where it is not real, and for 0^0."""
    if base == 0.0:
        if exponent == 0.0:
            raise ValueError("0^0")
        if exponent < 0.0:
            raise ZeroDivisionError("0 to a negative power")
    return math.pow(base, exponent)


def sign(x: float) -> float:
    """-1, 0 or 1."""
    return (x > 0.0) - (x < 0.0) + 0.0


def modulo(x: float, divisor: float) -> float:
    """x - divisor * floor(x / divisor): the sign of the divisor."""
    if divisor == 0.0:
        raise ZeroDivisionError("MOD by 0")
    rest = math.fmod(x, divisor)
    return rest + divisor if rest and (rest < 0.0) != (divisor < 0.0) else rest


def floor(x: float) -> float:
    """The largest whole number not above x."""
    return float(math.floor(x))


def ceil(x: float) -> float:
    """The smallest whole number not below x."""
    return float(math.ceil(x))


def trunc(x: float) -> float:
    """x without its fraction."""
    return float(math.trunc(x))


def smaller(x: float, y: float) -> float:
    """The smaller of two numbers."""
    return y if y < x else x


def larger(x: float, y: float) -> float:
    """The larger of two numbers."""
    return y if y > x else x


PRIMITIVES: dict[str, Callable[..., float]] = {
    "sqrt": math.sqrt,
    "exp": math.exp,
    "ln": math.log,
    "log10": math.log10,
    "sin": math.sin,
    "cos": math.cos,
    "tan": math.tan,
    "asin": math.asin,
    "acos": math.acos,
    "atan": math.atan,
    "atan2": math.atan2,
    "sinh": math.sinh,
    "cosh": math.cosh,
    "tanh": math.tanh,
    "asinh": math.asinh,
    "acosh": math.acosh,
    "atanh": math.atanh,
    "power": power,
    "absolute": abs,
    "sign": sign,
    "floor": floor,
    "ceil": ceil,
    "trunc": trunc,
    "modulo": modulo,
    "smaller": smaller,
    "larger": larger,
    "erf": math.erf,
    "erfc": math.erfc,
    "gamma": math.gamma,
    "lngamma": math.lgamma,
}
"""`atan2(y, x)` as in mathematics; `lngamma` is the logarithm of |gamma|."""


def rule_of(form: str, count: int) -> Callable[..., float | Fault]:
    """The rule over single numbers that a form describes; faults instead of exceptions."""
    names = [f"a{position}" for position in range(count)]
    source = f"lambda {', '.join(names)}: {form.format(*names)}"
    evaluate: Callable[..., float] = eval(source, dict(PRIMITIVES))

    def rule(*arguments: float) -> float | Fault:
        try:
            result = float(evaluate(*arguments))
        except (ArithmeticError, ValueError) as error:
            return FAULT_OF[type(error)]
        return result if math.isfinite(result) else Fault.NUM

    return rule


def _arithmetic(combine: Callable[[float, float], float]) -> Callable[[Value, Value], Value]:
    def operate(left: Value, right: Value) -> Value:
        a, b = to_number(left), to_number(right)
        if isinstance(a, Fault):
            return a
        if isinstance(b, Fault):
            return b
        try:
            result = combine(a, b)
        except (ArithmeticError, ValueError) as error:
            return FAULT_OF[type(error)]
        return result if math.isfinite(result) else Fault.NUM

    return operate


_RANK: dict[type[Any], int] = {float: 0, str: 1, bool: 2}


def compare(left: Value, right: Value) -> int | Fault:
    """-1, 0 or 1 as left comes before, equals or follows right: numbers before texts before
    logicals, texts without case, a blank as the other side's 0, empty text or FALSE."""
    if isinstance(left, Fault):
        return left
    if isinstance(right, Fault):
        return right
    if left is None:
        left = _blank_like(right)
    if right is None:
        right = _blank_like(left)
    ranks = _RANK[type(left)], _RANK[type(right)]
    if ranks[0] != ranks[1]:
        return -1 if ranks[0] < ranks[1] else 1
    a: Any = left.casefold() if isinstance(left, str) else left
    b: Any = right.casefold() if isinstance(right, str) else right
    return int(a > b) - int(a < b)


def _blank_like(other: Value) -> Value:
    if isinstance(other, str):
        return ""
    return False if isinstance(other, bool) else 0.0


def _comparison(holds: Callable[[int], bool]) -> Callable[[Value, Value], Value]:
    def operate(left: Value, right: Value) -> Value:
        order = compare(left, right)
        return order if isinstance(order, Fault) else holds(order)

    return operate


def join(left: Value, right: Value) -> Value:
    """left & right."""
    a, b = to_text(left), to_text(right)
    if isinstance(a, Fault):
        return a
    return b if isinstance(b, Fault) else a + b


OPERATORS: dict[str, Callable[[Value, Value], Value]] = {
    "+": _arithmetic(lambda a, b: a + b),
    "-": _arithmetic(lambda a, b: a - b),
    "*": _arithmetic(lambda a, b: a * b),
    "/": _arithmetic(lambda a, b: a / b),
    "^": _arithmetic(power),
    "&": join,
    "=": _comparison(lambda order: order == 0),
    "<>": _comparison(lambda order: order != 0),
    "<": _comparison(lambda order: order < 0),
    "<=": _comparison(lambda order: order <= 0),
    ">": _comparison(lambda order: order > 0),
    ">=": _comparison(lambda order: order >= 0),
}
"""The two-sided operators over single values."""


def negate(value: Value) -> Value:
    """-value."""
    number = to_number(value)
    return number if isinstance(number, Fault) else -number


def percent(value: Value) -> Value:
    """value%."""
    number = to_number(value)
    return number if isinstance(number, Fault) else number / 100.0
