"""Days of the week, weeks of the year, and working days.

OpenFormula (OASIS ODF 1.3 part 4), section 6.10; ISO 8601 for ISO weeks. Before 1 March 1900,
where the system's weekdays are not the calendar's, weeks and working days are refused.
"""

from __future__ import annotations

import math
from datetime import date, timedelta

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.serials import CALENDAR, LAST_SERIAL, sure_day, sure_serial
from xlroot.values import Fault, Grid, Operand, to_number

_FIRST_WEEKDAY = {1: 6, 2: 0, 11: 0, 12: 1, 13: 2, 14: 3, 15: 4, 16: 5, 17: 6}
"""On which day weeks begin, from Monday 0, by WEEKNUM's kind."""


@worksheet("WEEKDAY", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def weekday(number: float, kind: float = 1.0) -> float | Fault:
    """The day of the week: from Sunday 1 (kind 1), Monday 1 (2), Monday 0 (3), or from 1 on other
    days (11 Monday to 17 Sunday). Serial 1 counts as a Sunday."""
    if not 0.0 <= number < LAST_SERIAL + 1.0 or not 1.0 <= kind < 18.0:
        return Fault.NUM
    from_sunday, form = (math.floor(number) - 1) % 7, int(kind)
    if form == 3:
        return float((from_sunday - 1) % 7)
    if form in (1, 2):
        return float((from_sunday - form + 1) % 7 + 1)
    return float((from_sunday - form + 10) % 7 + 1) if form >= 11 else Fault.NUM


@worksheet("ISOWEEKNUM", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def isoweeknum(number: float) -> float | Fault:
    """The week of the year by ISO 8601."""
    day = sure_day(number)
    return day if isinstance(day, Fault) else float(day.isocalendar().week)


@worksheet("WEEKNUM", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def weeknum(number: float, kind: float = 1.0) -> float | Fault:
    """The week of the year; the first holds 1 January; weeks begin on Sunday (kind 1), Monday (2)
    or other days (11 Monday to 17 Sunday); 21 is ISO 8601."""
    day = sure_day(number)
    if isinstance(day, Fault):
        return day
    if 21.0 <= kind < 22.0:
        return float(day.isocalendar().week)
    start = _FIRST_WEEKDAY.get(int(kind)) if 1.0 <= kind < 18.0 else None
    if start is None:
        return Fault.NUM
    if day.year == 1900:
        raise Unsupported("counts weeks from 1 January 1900, whose weekday hosts differ in")
    first = date(day.year, 1, 1)
    return float(((day - first).days + (first.weekday() - start) % 7) // 7 + 1)


def _holidays(operand: Operand | None) -> set[date] | Fault:
    found: set[date] = set()
    if operand is None:
        return found
    for value in operand.flat() if isinstance(operand, Grid) else (operand,):
        if value is None:
            continue
        number = to_number(value)
        day = number if isinstance(number, Fault) else sure_day(number)
        if isinstance(day, Fault):
            return day
        found.add(day)
    return found


def _weekdays_before(day: date) -> int:
    """Days from Monday to Friday before a date, from 1 January of year 1, a Monday."""
    weeks, rest = divmod(day.toordinal() - 1, 7)
    return 5 * weeks + min(rest, 5)


def _working(day: date) -> bool:
    return day.weekday() < 5


@worksheet(
    "NETWORKDAYS",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.RAW,
    optional=1,
    gives=Gives.NUMBER,
    traits=CALENDAR,
)
def networkdays(start: float, end: float, holidays: Operand | None = None) -> float | Fault:
    """Days from Monday to Friday that are no holidays, both ends counted; negative backwards."""
    first, last, free = sure_day(min(start, end)), sure_day(max(start, end)), _holidays(holidays)
    if isinstance(first, Fault):
        return first
    if isinstance(last, Fault):
        return last
    if isinstance(free, Fault):
        return free
    count = _weekdays_before(last) + _working(last) - _weekdays_before(first)
    count -= sum(_working(day) and first <= day <= last for day in free)
    return float(count if start <= end else -count)


@worksheet(
    "WORKDAY",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.RAW,
    optional=1,
    gives=Gives.NUMBER,
    traits=CALENDAR,
)
def workday(start: float, count: float, holidays: Operand | None = None) -> float | Fault:
    """The date some working days on, or back; holidays do not count."""
    day, free = sure_day(start), _holidays(holidays)
    if isinstance(day, Fault):
        return day
    if isinstance(free, Fault):
        return free
    if abs(count) > LAST_SERIAL:
        return Fault.NUM
    left, forward = abs(int(count)), count > 0.0
    step = timedelta(days=1 if forward else -1)
    try:
        while left:
            day += step
            if _working(day) and day not in free:
                left -= 1
    except OverflowError:
        return Fault.NUM
    return sure_serial(day) if day.year >= 1900 else Fault.NUM
