"""Day counts of securities: the days and the parts of a year between two dates, by basis.

Basis 0 is 30/360 by the rule of the NASD, 1 actual/actual, 2 actual/360, 3 actual/365, 4 30/360
as in Europe (Excel's documentation of YEARFRAC; OpenFormula section 4.11.7). Over more than a
year, or over two years of different length, hosts divide by different lengths in basis 1: there
it is refused. Dates are serials of the 1900 system from 1 March 1900 on, cut to whole days.
"""

from __future__ import annotations

import math
from calendar import isleap
from datetime import date
from enum import Enum

from xlroot.errors import Unsupported
from xlroot.functions.intervals import thirty_american, thirty_european
from xlroot.functions.serials import day_of, serial
from xlroot.values import Fault

FIRST_SURE = 61.0
"""1 March 1900: before it the system's days are not the calendar's."""


class Basis(Enum):
    """How days and years are counted."""

    THIRTY_US = 0
    ACTUAL = 1
    ACTUAL_360 = 2
    ACTUAL_365 = 3
    THIRTY_EUROPE = 4


def basis_of(number: float) -> Basis | Fault:
    """The basis of a number, cut to a whole one; #NUM! outside 0 to 4."""
    return Basis(math.trunc(number)) if 0.0 <= number < 5.0 else Fault.NUM


def date_of(number: float) -> date | Fault:
    """The date of a serial; #NUM! outside the calendar."""
    if 0.0 <= number < FIRST_SURE:
        raise _too_early()
    return day_of(number)


def serial_of(day: date) -> float:
    """The serial of a date."""
    number = serial(day) if day.year >= 1900 else 0.0
    if number < FIRST_SURE:
        raise _too_early()
    return number


def _too_early() -> Unsupported:
    return Unsupported("a date lies before 1 March 1900, where hosts count days differently")


def february_end(day: date) -> bool:
    """Whether the date is the last of February."""
    return day.month == 2 and day.day == (29 if isleap(day.year) else 28)


def days_between(start: date, end: date, basis: Basis) -> int:
    """The days from start to end as the basis counts them."""
    if basis is Basis.THIRTY_US:
        return thirty_american(start, end)
    if basis is Basis.THIRTY_EUROPE:
        return thirty_european(start, end)
    return (end - start).days


def year_part(start: date, end: date, basis: Basis) -> float:
    """The part of a year, or years, from start to end."""
    days = days_between(start, end, basis)
    if basis is Basis.ACTUAL:
        return days / _year_length(start, end)
    return days / (365.0 if basis is Basis.ACTUAL_365 else 360.0)


def _year_length(start: date, end: date) -> float:
    length = 366 if isleap(start.year) else 365
    if (end - start).days > length or isleap(start.year) != isleap(end.year):
        raise Unsupported(
            "actual/actual (basis 1) over more than a year, or over years of different length, "
            "is counted differently by hosts; use another basis"
        )
    return float(length)
