"""Dates and times: making them, taking them apart, moving them by months.

OpenFormula (OASIS ODF 1.3 part 4), section 6.10. Numbers are serials of the 1900 system
(`xlroot.functions.serials`). DATE takes a year below 1900 as counted from 1900, as Excel does;
LibreOffice takes 100 to 1899 as they are.
"""

from __future__ import annotations

import math
from calendar import monthrange
from datetime import date, datetime

from xlroot.errors import Unsupported
from xlroot.functions.entry import Entry, Gives, Takes, worksheet
from xlroot.functions.serials import (
    CALENDAR,
    CHANGING,
    FIRST_SURE,
    LAST_SERIAL,
    NEVER,
    day_of,
    moved,
    serial,
    sure_day,
    sure_serial,
)
from xlroot.texts import FIRST_SERIAL, read_date, read_time
from xlroot.values import Fault

SNAP = 5e-4
"""Seconds: a time this near to a whole second is that second, written as a fraction of a day."""

LARGEST_TIME_PART = 32_768.0


@worksheet("DATE", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def date_(year: float, month: float, day: float) -> float | Fault:
    """The serial of a year, month and day, cut to whole ones; months and days may run over."""
    if not 0.0 <= year < 10_000.0 or abs(month) > 200_000.0 or abs(day) > 4_000_000.0:
        return Fault.NUM
    if (month < 0.0 and month % 1.0) or (day < 0.0 and day % 1.0):
        raise Unsupported("cuts a negative month or day to a whole one, where hosts differ")
    years = int(year) + (1900 if year < 1900.0 else 0)
    years, months = years + (int(month) - 1) // 12, (int(month) - 1) % 12 + 1
    if not 1899 <= years <= 9999:
        return Fault.NUM
    first = (date(years, months, 1) - FIRST_SERIAL).days
    # Days are counted on in a system that has a 29 February 1900.
    found = first - (first < FIRST_SURE) + int(day) - 1
    return float(found) if 0 <= found <= LAST_SERIAL else Fault.NUM


@worksheet("TIME", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def time_(hour: float, minute: float, second: float) -> float | Fault:
    """The fraction of a day, whole days dropped."""
    parts = (hour, minute, second)
    if any(abs(part) >= LARGEST_TIME_PART for part in parts):
        return Fault.NUM
    if any(part < 0.0 and part % 1.0 for part in parts):
        raise Unsupported("cuts a negative part of a time to a whole one, where hosts differ")
    seconds = int(hour) * 3600 + int(minute) * 60 + int(second)
    return seconds % 86_400 / 86_400.0 if seconds >= 0 else Fault.NUM


def _calendar(name: str, part: str, zero: float, never: float) -> Entry:
    @worksheet(name, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
    def rule(number: float) -> float | Fault:
        if 0.0 <= number < 1.0:
            return zero
        if NEVER <= number < FIRST_SURE:
            return never
        day = day_of(number)
        return day if isinstance(day, Fault) else float(getattr(day, part))

    return rule


YEAR = _calendar("YEAR", "year", zero=1900.0, never=1900.0)
"""Serial 0 counts as day 0 of January 1900."""
MONTH = _calendar("MONTH", "month", zero=1.0, never=2.0)
DAY = _calendar("DAY", "day", zero=0.0, never=29.0)


def _seconds(number: float, unit: int) -> int | Fault:
    """The second of the day; a time that only rounding carries into the next `unit` seconds is
    refused."""
    if not 0.0 <= number < LAST_SERIAL + 1.0:
        return Fault.NUM
    exact = number % 1.0 * 86_400.0
    whole = math.floor(exact + 0.5)
    if unit > 1 and abs(exact - whole) > SNAP and whole // unit != math.floor(exact) // unit:
        raise Unsupported("takes apart a time half a second before the next, where hosts differ")
    return whole % 86_400


@worksheet("HOUR", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def hour(number: float) -> float | Fault:
    """The hour, 0 to 23."""
    seconds = _seconds(number, 3600)
    return seconds if isinstance(seconds, Fault) else float(seconds // 3600)


@worksheet("MINUTE", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def minute(number: float) -> float | Fault:
    """The minute, 0 to 59."""
    seconds = _seconds(number, 60)
    return seconds if isinstance(seconds, Fault) else float(seconds // 60 % 60)


@worksheet("SECOND", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def second(number: float) -> float | Fault:
    """The second, 0 to 59, rounded half up."""
    seconds = _seconds(number, 1)
    return seconds if isinstance(seconds, Fault) else float(seconds % 60)


@worksheet("EDATE", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def edate(start: float, months: float) -> float | Fault:
    """The date some months on, cut to whole ones."""
    day = sure_day(start)
    if isinstance(day, Fault) or abs(months) > 200_000.0:
        return Fault.NUM
    found = moved(day, int(months))
    return found if isinstance(found, Fault) else sure_serial(found)


@worksheet("EOMONTH", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def eomonth(start: float, months: float) -> float | Fault:
    """The last day of the month some months on, cut to whole ones."""
    day = sure_day(start)
    if isinstance(day, Fault) or abs(months) > 200_000.0:
        return Fault.NUM
    found = moved(day.replace(day=1), int(months))
    if isinstance(found, Fault):
        return found
    return sure_serial(found.replace(day=monthrange(found.year, found.month)[1]))


@worksheet("DATEVALUE", Takes.TEXT, gives=Gives.NUMBER, traits=CALENDAR)
def datevalue(text: str) -> float | Fault:
    """The serial of a date in a text, without its time."""
    found = read_date(text)
    return found if isinstance(found, Fault) else float(math.floor(found))


@worksheet("TIMEVALUE", Takes.TEXT, gives=Gives.NUMBER, traits=CALENDAR)
def timevalue(text: str) -> float | Fault:
    """The time of day in a text as a fraction of a day, without its date."""
    return read_time(text)


@worksheet("NOW", gives=Gives.NUMBER, traits=CHANGING)
def now() -> float:
    """The present moment, in local time."""
    moment = datetime.now()
    clock = moment.hour * 3600 + moment.minute * 60 + moment.second + moment.microsecond * 1e-6
    return serial(moment.date()) + clock / 86_400.0


@worksheet("TODAY", gives=Gives.NUMBER, traits=CHANGING)
def today() -> float:
    """The present day, in local time."""
    return serial(datetime.now().date())
