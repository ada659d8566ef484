"""Depreciation: straight line, sum of years' digits, declining balance and its switch.

Excel's documentation of each function; OpenFormula section 6.12. Hosts part ways over a salvage
above the cost and over fractions of a period where none are documented: both are refused.
"""

from __future__ import annotations

import math

from xlroot.errors import Unsupported
from xlroot.functions.coupons import CALENDAR
from xlroot.functions.daycount import basis_of, date_of, year_part
from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.functions.totals import finite
from xlroot.values import Fault

_N = Takes.NUMBER
MOST_PERIODS = 100_000
"""A declining balance is followed period by period up to this many."""

SLN = by_form("SLN", "({0}-{1})/{2}")
"""Cost less salvage over the life."""


@worksheet("SYD", _N, _N, _N, _N, gives=Gives.NUMBER)
def syd(cost: float, salvage: float, life: float, period: float) -> float | Fault:
    """The depreciable cost times the years left over the sum of the years' digits."""
    if salvage < 0.0 or life <= 0.0 or not 1.0 <= period <= life:
        return Fault.NUM
    return finite((cost - salvage) * (life - period + 1.0) * 2.0 / (life * (life + 1.0)))


def _refuse_unusual(cost: float, salvage: float, *whole: float) -> None:
    if salvage > cost:
        raise Unsupported("the salvage is above the cost, where hosts differ")
    if any(not each.is_integer() for each in whole):
        raise Unsupported("a period is no whole number, which hosts read in different ways")


def _declined(cost: float, salvage: float, rate: float, period: float) -> float:
    """What a declining balance takes off in a period, never below the salvage."""
    kept = max(1.0 - rate, 0.0)
    before = cost * math.pow(kept, period - 1.0)
    after = cost * math.pow(kept, period)
    return max(before - max(after, salvage), 0.0)


@worksheet("DDB", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER)
def ddb(
    cost: float, salvage: float, life: float, period: float, factor: float = 2.0
) -> float | Fault:
    """The declining balance at factor/life of the book value in one period."""
    if cost < 0.0 or salvage < 0.0 or life <= 0.0 or factor <= 0.0:
        return Fault.NUM
    if period <= 0.0 or period > life:
        return Fault.NUM
    _refuse_unusual(cost, salvage, period)
    return finite(_declined(cost, salvage, factor / life, period))


@worksheet("DB", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER)
def db(
    cost: float, salvage: float, life: float, period: float, months: float = 12.0
) -> float | Fault:
    """The declining balance at the rate 1 - (salvage/cost)^(1/life), to three decimals, with a
    first year of `months` months; the rest falls in the year after the life."""
    first = math.trunc(months)
    if cost <= 0.0 or salvage < 0.0 or life <= 0.0 or not 1 <= first <= 12:
        return Fault.NUM
    if period < 1.0 or period > life + 1.0:
        return Fault.NUM
    _refuse_unusual(cost, salvage, life, period)
    rate = _three_decimals(1.0 - math.pow(salvage / cost, 1.0 / life))
    book = cost - cost * rate * first / 12.0
    if period == 1.0:
        return finite(cost - book)
    book *= math.pow(1.0 - rate, period - 2.0)
    share = (12.0 - first) / 12.0 if period == life + 1.0 else 1.0
    return finite(book * rate * share)


def _three_decimals(number: float) -> float:
    """A number from 0 to 1 rounded half up in its third decimal, judged on 15 digits."""
    return math.floor(float(f"{number * 1000.0:.14g}") + 0.5) / 1000.0


@worksheet("VDB", _N, _N, _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def vdb(
    cost: float,
    salvage: float,
    life: float,
    start: float,
    end: float,
    factor: float = 2.0,
    stay: float = 0.0,
) -> float | Fault:
    """The declining balance from start to end, changing to a straight line where that takes off
    more unless told to stay; a part of a period takes its share of that period's amount."""
    if cost < 0.0 or salvage < 0.0 or life <= 0.0 or factor < 0.0:
        return Fault.NUM
    if start < 0.0 or end < start or end > life:
        return Fault.NUM
    _refuse_unusual(cost, salvage, life)
    if end > MOST_PERIODS:
        raise Unsupported(f"there are more than {MOST_PERIODS} periods to follow")
    total, book, straight = 0.0, cost, 0.0
    for period in range(1, math.ceil(end) + 1):
        taken = _declined(cost, salvage, factor / life, float(period))
        if not stay:
            level = (book - salvage) / (life - period + 1.0)
            if straight or level > taken:
                straight = taken = straight or level
        book -= taken
        share = min(end, float(period)) - max(start, period - 1.0)
        total += taken * max(share, 0.0)
    return finite(total)


@worksheet("AMORLINC", _N, _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def amorlinc(
    cost: float,
    bought: float,
    first_end: float,
    salvage: float,
    period: float,
    rate: float,
    basis: float = 0.0,
) -> float | Fault:
    """The straight line at a rate of the cost: period 0 by its part of a year, then whole years,
    then the rest."""
    start, end, way = date_of(bought), date_of(first_end), basis_of(basis)
    if isinstance(start, Fault) or isinstance(end, Fault) or isinstance(way, Fault):
        return Fault.NUM
    if start > end or cost <= 0.0 or salvage < 0.0 or rate <= 0.0 or period < 0.0:
        return Fault.NUM
    _refuse_unusual(cost, salvage, period)
    each = cost * rate
    first = each * year_part(start, end, way)
    left = (cost - salvage - first) / each if each else math.inf
    if not math.isfinite(left):
        return Fault.NUM
    whole = math.floor(left)
    if period == 0.0:
        return finite(first)
    if period <= whole:
        return finite(each)
    return finite(cost - salvage - each * whole - first) if period == whole + 1 else 0.0
