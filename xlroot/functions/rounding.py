"""Rounding to digits and to multiples.

Rounding to digits works on the decimal number that a sheet shows: x is first taken to 15
significant digits, so that ROUND(2.675,2) is 2.68 and ROUND(1.005,2) is 1.01, and halves go away
from zero. Sources: Excel's documentation of each function; OpenFormula section 6.17.
"""

from __future__ import annotations

import math
from decimal import ROUND_DOWN, ROUND_HALF_UP, ROUND_UP, Context, Decimal

from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.kinds.real import sign
from xlroot.values import Fault

_WIDE = Context(prec=400)

INT = by_form("INT", "floor({0})")


def _to_digits(x: float, digits: float, mode: str) -> float | Fault:
    places = math.trunc(digits)
    if x == 0.0 or places > 340:
        return x
    if places < -310:
        return 0.0 if mode != ROUND_UP else Fault.NUM
    shown = Decimal(f"{x:.14e}")
    if places >= 15 - shown.adjusted():
        return x
    rounded = float(shown.quantize(Decimal(1).scaleb(-places), rounding=mode, context=_WIDE))
    return rounded if math.isfinite(rounded) else Fault.NUM


@worksheet("ROUND", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def round_(x: float, digits: float) -> float | Fault:
    """x to digits after the point (before it, if negative), halves away from zero."""
    return _to_digits(x, digits, ROUND_HALF_UP)


@worksheet("ROUNDUP", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def roundup(x: float, digits: float = 0.0) -> float | Fault:
    """x to digits, away from zero."""
    return _to_digits(x, digits, ROUND_UP)


@worksheet("ROUNDDOWN", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def rounddown(x: float, digits: float = 0.0) -> float | Fault:
    """x to digits, towards zero."""
    return _to_digits(x, digits, ROUND_DOWN)


@worksheet("TRUNC", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def trunc(x: float, digits: float = 0.0) -> float | Fault:
    """x cut to digits, towards zero."""
    return _to_digits(x, digits, ROUND_DOWN)


def _steps(x: float, step: float) -> float:
    """x/step, taken to the nearest whole number where only rounding keeps it from one."""
    ratio = x / step
    whole = float(round(ratio)) if math.isfinite(ratio) else ratio
    return whole if abs(ratio - whole) <= 1e-15 * max(1.0, abs(ratio)) else ratio


def _multiple(whole: float, step: float) -> float | Fault:
    result = whole * step
    return result + 0.0 if math.isfinite(result) else Fault.NUM


@worksheet("MROUND", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def mround(x: float, step: float) -> float | Fault:
    """The nearest multiple; #NUM! where the signs differ."""
    if x == 0.0 or step == 0.0:
        return 0.0
    if sign(x) != sign(step):
        return Fault.NUM
    return _multiple(math.floor(_steps(x, step) + 0.5), step)


@worksheet("CEILING", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def ceiling(x: float, step: float | None = None) -> float | Fault:
    """The multiple at or above x; both negative: away from zero; x > 0 > step: #NUM!."""
    step = (sign(x) or 1.0) if step is None else step
    if x == 0.0 or step == 0.0:
        return 0.0
    if x > 0.0 > step:
        return Fault.NUM
    return _multiple(math.ceil(_steps(x, step)), step)


@worksheet("FLOOR", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def floor(x: float, step: float | None = None) -> float | Fault:
    """The multiple at or below x; both negative: towards zero; x > 0 > step: #NUM!."""
    step = (sign(x) or 1.0) if step is None else step
    if x == 0.0:
        return 0.0
    if step == 0.0:
        return Fault.DIV0
    if x > 0.0 > step:
        return Fault.NUM
    return _multiple(math.floor(_steps(x, step)), step)


@worksheet("CEILING.MATH", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, optional=2, gives=Gives.NUMBER)
def ceiling_math(x: float, step: float = 1.0, mode: float = 0.0) -> float | Fault:
    """The multiple at or above x; with a mode other than 0, negative x go away from zero."""
    if step == 0.0:
        return 0.0
    size = abs(step)
    ratio = _steps(x, size)
    whole = math.floor(ratio) if x < 0.0 and mode else math.ceil(ratio)
    return _multiple(whole, size)


@worksheet("FLOOR.MATH", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, optional=2, gives=Gives.NUMBER)
def floor_math(x: float, step: float = 1.0, mode: float = 0.0) -> float | Fault:
    """The multiple at or below x; with a mode other than 0, negative x go towards zero."""
    if step == 0.0:
        return 0.0
    size = abs(step)
    ratio = _steps(x, size)
    whole = math.ceil(ratio) if x < 0.0 and mode else math.floor(ratio)
    return _multiple(whole, size)


@worksheet(
    ("CEILING.PRECISE", "ISO.CEILING"),
    Takes.NUMBER,
    Takes.NUMBER,
    optional=1,
    gives=Gives.NUMBER,
)
def ceiling_precise(x: float, step: float = 1.0) -> float | Fault:
    """The multiple of |step| at or above x."""
    return 0.0 if step == 0.0 else _multiple(math.ceil(_steps(x, abs(step))), abs(step))


@worksheet("FLOOR.PRECISE", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def floor_precise(x: float, step: float = 1.0) -> float | Fault:
    """The multiple of |step| at or below x."""
    return 0.0 if step == 0.0 else _multiple(math.floor(_steps(x, abs(step))), abs(step))


@worksheet("EVEN", Takes.NUMBER, gives=Gives.NUMBER)
def even(x: float) -> float | Fault:
    """The even number at or beyond x, away from zero."""
    return _multiple(math.ceil(_steps(abs(x), 2.0)), math.copysign(2.0, x))


@worksheet("ODD", Takes.NUMBER, gives=Gives.NUMBER)
def odd(x: float) -> float:
    """The odd number at or beyond x, away from zero."""
    size = max(0.0, math.ceil((abs(x) - 1.0) / 2.0))
    return math.copysign(2.0 * size + 1.0, x)
