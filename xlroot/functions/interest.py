"""Rates and their conversions: effective and nominal, equivalent growth, fractions of a dollar.

Excel's documentation of each function; OpenFormula section 6.12.
"""

from __future__ import annotations

import math

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.totals import finite
from xlroot.values import Fault, Grid, Operand, to_number

_N = Takes.NUMBER


@worksheet("EFFECT", _N, _N, gives=Gives.NUMBER)
def effect(nominal: float, times: float) -> float | Fault:
    """(1 + nominal/times)^times - 1: the yearly rate; times is cut to a whole number."""
    count = math.trunc(times)
    if nominal <= 0.0 or count < 1:
        return Fault.NUM
    try:
        return math.expm1(count * math.log1p(nominal / count))
    except OverflowError:
        return Fault.NUM


@worksheet("NOMINAL", _N, _N, gives=Gives.NUMBER)
def nominal(effective: float, times: float) -> float | Fault:
    """times ((1 + effective)^(1/times) - 1): the rate that EFFECT turns into `effective`."""
    count = math.trunc(times)
    if effective <= 0.0 or count < 1:
        return Fault.NUM
    return count * math.expm1(math.log1p(effective) / count)


@worksheet("RRI", _N, _N, _N, gives=Gives.NUMBER)
def rri(periods: float, pv: float, fv: float) -> float | Fault:
    """(fv/pv)^(1/periods) - 1: the rate of growth from pv to fv."""
    if periods <= 0.0 or pv == 0.0:
        return Fault.NUM
    ratio = fv / pv
    if ratio < 0.0:
        return Fault.NUM
    if ratio == 0.0:
        return -1.0
    try:
        return finite(math.expm1(math.log(ratio) / periods))
    except OverflowError:
        return Fault.NUM


@worksheet("PDURATION", _N, _N, _N, gives=Gives.NUMBER)
def pduration(rate: float, pv: float, fv: float) -> float | Fault:
    """ln(fv/pv) / ln(1 + rate): the periods that pv needs to grow to fv."""
    if rate <= 0.0 or pv <= 0.0 or fv <= 0.0:
        return Fault.NUM
    return finite((math.log(fv) - math.log(pv)) / math.log1p(rate))


@worksheet("FVSCHEDULE", _N, Takes.RAW, gives=Gives.NUMBER)
def fvschedule(principal: float, schedule: Operand) -> float | Fault:
    """The principal after growth at each rate in turn; a blank cell is a rate of 0."""
    total = principal
    for value in schedule.flat() if isinstance(schedule, Grid) else (schedule,):
        if isinstance(value, (str, bool)):
            return Fault.VALUE
        rate = to_number(value)
        if isinstance(rate, Fault):
            return rate
        total *= 1.0 + rate
    return finite(total)


def _places(fraction: int) -> float:
    """The power of ten that a numerator below `fraction` needs behind the point."""
    return 10.0 ** len(str(fraction - 1)) if fraction > 1 else 1.0


def _fraction(number: float) -> int | Fault:
    if number < 0.0:
        return Fault.NUM
    if number >= 1e15:
        raise Unsupported("the fraction is beyond what a cell counts exactly")
    return int(number) if number >= 1.0 else Fault.DIV0


@worksheet("DOLLARDE", _N, _N, gives=Gives.NUMBER)
def dollarde(price: float, fraction: float) -> float | Fault:
    """A price written as whole.numerator as a decimal: 1.1 in quarters is 1.25."""
    parts = _fraction(fraction)
    if isinstance(parts, Fault):
        return parts
    part, whole = math.modf(price)
    return finite(whole + part * _places(parts) / parts)


@worksheet("DOLLARFR", _N, _N, gives=Gives.NUMBER)
def dollarfr(price: float, fraction: float) -> float | Fault:
    """A decimal price as whole.numerator: 1.25 in quarters is 1.1."""
    parts = _fraction(fraction)
    if isinstance(parts, Fault):
        return parts
    part, whole = math.modf(price)
    return finite(whole + part * parts / _places(parts))
