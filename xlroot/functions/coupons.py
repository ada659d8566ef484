"""Coupon dates of a security: the period around the settlement, its days, the coupons to come.

Coupon dates are counted back from the maturity by 12/frequency months; when the maturity is the
last day of a month, so is every coupon date. Sources: Excel's documentation of each function;
OpenFormula section 6.12.
"""

from __future__ import annotations

import math
from calendar import monthrange
from datetime import date
from typing import NamedTuple

from xlroot.errors import Unsupported
from xlroot.functions.daycount import (
    Basis,
    basis_of,
    date_of,
    days_between,
    february_end,
    serial_of,
)
from xlroot.functions.entry import Gives, Takes, Trait, worksheet
from xlroot.values import Fault

CALENDAR = frozenset({Trait.CALENDAR})
_N = Takes.NUMBER


class Period(NamedTuple):
    """The coupon period that holds the settlement."""

    settlement: date
    previous: date
    """The last coupon date up to the settlement."""
    following: date
    """The first coupon date after it."""
    coupons: int
    """Coupons from `following` to the maturity."""
    frequency: int
    basis: Basis

    @property
    def length(self) -> float:
        """The days in the period."""
        if self.basis is Basis.ACTUAL:
            return float((self.following - self.previous).days)
        return (365.0 if self.basis is Basis.ACTUAL_365 else 360.0) / self.frequency

    @property
    def accrued(self) -> float:
        """The days from the period's start to the settlement."""
        self._refuse_february()
        return float(days_between(self.previous, self.settlement, self.basis))

    @property
    def left(self) -> float:
        """The days from the settlement to the next coupon."""
        if self.basis is Basis.THIRTY_US:
            return self.length - self.accrued
        return float(days_between(self.settlement, self.following, self.basis))

    def _refuse_february(self) -> None:
        ends = february_end(self.previous) or february_end(self.settlement)
        if self.basis is Basis.THIRTY_US and ends:
            raise Unsupported(
                "the end of February is counted differently by hosts in basis 0; use another basis"
            )


def months_before(day: date, months: int) -> date:
    """The date some months earlier; the end of a month stays one."""
    year, month = divmod(day.year * 12 + day.month - 1 - months, 12)
    last = monthrange(year, month + 1)[1]
    at_end = day.day == monthrange(day.year, day.month)[1]
    return date(year, month + 1, last if at_end else min(day.day, last))


def frequency_of(number: float) -> int | Fault:
    """Coupons a year: 1, 2 or 4, cut to a whole number; #NUM! for any other."""
    frequency = math.trunc(number)
    return frequency if frequency in (1, 2, 4) else Fault.NUM


def period_of(settlement: float, maturity: float, frequency: float, basis: float) -> Period | Fault:
    """The coupon period of a settlement; #NUM! for a wrong date, order, frequency or basis."""
    bought, due = date_of(settlement), date_of(maturity)
    times, way = frequency_of(frequency), basis_of(basis)
    if isinstance(bought, Fault) or isinstance(due, Fault) or bought >= due:
        return Fault.NUM
    if isinstance(times, Fault) or isinstance(way, Fault):
        return Fault.NUM
    step = 12 // times
    months = (due.year - bought.year) * 12 + due.month - bought.month
    count = max(months // step - 1, 0)
    while months_before(due, count * step) > bought:
        count += 1
    previous, following = months_before(due, count * step), months_before(due, count * step - step)
    return Period(bought, previous, following, count, times, way)


@worksheet("COUPDAYBS", _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def coupdaybs(
    settlement: float, maturity: float, frequency: float, basis: float = 0.0
) -> float | Fault:
    """The days from the start of the coupon period to the settlement."""
    period = period_of(settlement, maturity, frequency, basis)
    return period if isinstance(period, Fault) else period.accrued


@worksheet("COUPDAYS", _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def coupdays(
    settlement: float, maturity: float, frequency: float, basis: float = 0.0
) -> float | Fault:
    """The days in the coupon period that holds the settlement."""
    period = period_of(settlement, maturity, frequency, basis)
    return period if isinstance(period, Fault) else period.length


@worksheet("COUPDAYSNC", _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def coupdaysnc(
    settlement: float, maturity: float, frequency: float, basis: float = 0.0
) -> float | Fault:
    """The days from the settlement to the next coupon."""
    period = period_of(settlement, maturity, frequency, basis)
    return period if isinstance(period, Fault) else period.left


@worksheet("COUPNCD", _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def coupncd(
    settlement: float, maturity: float, frequency: float, basis: float = 0.0
) -> float | Fault:
    """The next coupon date after the settlement, as a serial."""
    period = period_of(settlement, maturity, frequency, basis)
    return period if isinstance(period, Fault) else serial_of(period.following)


@worksheet("COUPPCD", _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def couppcd(
    settlement: float, maturity: float, frequency: float, basis: float = 0.0
) -> float | Fault:
    """The last coupon date up to the settlement, as a serial."""
    period = period_of(settlement, maturity, frequency, basis)
    return period if isinstance(period, Fault) else serial_of(period.previous)


@worksheet("COUPNUM", _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def coupnum(
    settlement: float, maturity: float, frequency: float, basis: float = 0.0
) -> float | Fault:
    """How many coupons are paid after the settlement."""
    period = period_of(settlement, maturity, frequency, basis)
    return period if isinstance(period, Fault) else float(period.coupons)
