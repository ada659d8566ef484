"""Serial numbers of the 1900 system and the calendar dates that they stand for.

Serial 1 is 1 January 1900. The system counts a 29 February 1900 (serial 60) that never was; from
1 March 1900 (serial 61) on every serial is the calendar's day. Earlier serials follow Excel, from
its documentation of DATE; other hosts show other days for them.
"""

from __future__ import annotations

import math
from calendar import monthrange
from datetime import date, timedelta

from xlroot.errors import Unsupported
from xlroot.functions.entry import Trait
from xlroot.texts import FIRST_SERIAL, serial_of
from xlroot.values import Fault

CALENDAR = frozenset((Trait.CALENDAR,))
CHANGING = frozenset((Trait.CALENDAR, Trait.VOLATILE))

FIRST_SURE = 61
"""The serial of 1 March 1900."""

NEVER = 60
"""The serial of the day that never was."""

LAST_SERIAL = 2_958_465
"""31 December 9999."""


def day_of(number: float) -> date | Fault:
    """The calendar date of a serial; #NUM! outside the calendar, and for the day that never was."""
    if not 1.0 <= number < LAST_SERIAL + 1.0:
        return Fault.NUM
    whole = math.floor(number)
    if whole == NEVER:
        return Fault.NUM
    return FIRST_SERIAL + timedelta(days=whole + (whole < NEVER))


def serial(day: date) -> float:
    """The serial of a calendar date from 1900 on."""
    found = serial_of(day.year, day.month, day.day)
    assert isinstance(found, float)
    return found


def sure_day(number: float) -> date | Fault:
    """The date of a serial; Unsupported before 1 March 1900, where hosts count differently."""
    if 0.0 <= number < FIRST_SURE:
        raise _too_early()
    return day_of(number)


def sure_serial(day: date) -> float:
    """The serial of a date; Unsupported before 1 March 1900."""
    number = (day - FIRST_SERIAL).days
    if number < FIRST_SURE:
        raise _too_early()
    return float(number)


def _too_early() -> Unsupported:
    return Unsupported("a date lies before 1 March 1900, where hosts count days differently")


def moved(day: date, months: int) -> date | Fault:
    """The same day some months on, or that month's last day; #NUM! outside 1900 to 9999."""
    year, month = divmod(day.year * 12 + day.month - 1 + months, 12)
    if not 1900 <= year <= 9999:
        return Fault.NUM
    return date(year, month + 1, min(day.day, monthrange(year, month + 1)[1]))


def month_end(day: date) -> bool:
    """Whether the date is the last of its month."""
    return day.day == monthrange(day.year, day.month)[1]
