"""Dates and times as serial numbers of the 1900 system.

Serial 1 is 1 January 1900; the system counts a 29 February 1900 (serial 60) that never was, as
Excel does. OpenFormula (OASIS ODF 1.3 part 4), section 6.10; day counts after its section 4.11.7.
"""

from __future__ import annotations

import math
from calendar import isleap, monthrange
from datetime import date, datetime, timedelta

from xlroot.functions.entry import Entry, Gives, Takes, Trait, worksheet
from xlroot.texts import FIRST_SERIAL, read_date, read_time, serial_of
from xlroot.values import Fault, Grid, Operand, to_number

CALENDAR = frozenset((Trait.CALENDAR,))
CHANGING = frozenset((Trait.CALENDAR, Trait.VOLATILE))
LAST_SERIAL = 2_958_465.0
"""31 December 9999."""


def day_of(serial: float) -> date | Fault:
    """The calendar date of a serial; #NUM! outside the calendar, and for the day that never was."""
    whole = math.floor(serial)
    if not 1 <= whole <= LAST_SERIAL or whole == 60:
        return Fault.NUM
    return FIRST_SERIAL + timedelta(days=whole + (whole < 60))


def serial(day: date) -> float:
    """The serial of a calendar date from 1900 on."""
    found = serial_of(day.year, day.month, day.day)
    assert isinstance(found, float)
    return found


@worksheet("DATE", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def date_(year: float, month: float, day: float) -> float | Fault:
    """The serial of a year, month and day; months and days may run over."""
    years, months, days = math.floor(year), math.floor(month), math.floor(day)
    if 0 <= years < 1900:
        years += 1900
    if not 0 <= years <= 9999 or abs(months) > 200_000 or abs(days) > 4_000_000:
        return Fault.NUM
    years, months = years + (months - 1) // 12, (months - 1) % 12 + 1
    if not 1899 <= years <= 9999:
        return Fault.NUM
    first = (date(years, months, 1) - FIRST_SERIAL).days
    found = first + days - 1
    # Days are counted on in the system that has a 29 February 1900.
    if first < 61:
        found -= 1
    return float(found) if 0 <= found <= LAST_SERIAL else Fault.NUM


@worksheet("TIME", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def time_(hour: float, minute: float, second: float) -> float | Fault:
    """The fraction of a day, whole days dropped."""
    seconds = math.floor(hour) * 3600 + math.floor(minute) * 60 + math.floor(second)
    return seconds % 86400 / 86400.0 if seconds >= 0 else Fault.NUM


def _calendar(name: str, part: str) -> Entry:
    @worksheet(name, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
    def rule(number: float) -> float | Fault:
        if 0.0 <= number < 1.0:
            # Serial 0 shows as day 0 of January 1900.
            return {"year": 1900.0, "month": 1.0, "day": 0.0}[part]
        if 60.0 <= number < 61.0:
            return {"year": 1900.0, "month": 2.0, "day": 29.0}[part]
        day = day_of(number)
        return day if isinstance(day, Fault) else float(getattr(day, part))

    return rule


YEAR = _calendar("YEAR", "year")
MONTH = _calendar("MONTH", "month")
DAY = _calendar("DAY", "day")


def _seconds(number: float) -> int | Fault:
    if not 0.0 <= number <= LAST_SERIAL + 1.0:
        return Fault.NUM
    return math.floor(number % 1.0 * 86400.0 + 0.5) % 86400


@worksheet("HOUR", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def hour(number: float) -> float | Fault:
    """The hour, 0 to 23."""
    seconds = _seconds(number)
    return seconds if isinstance(seconds, Fault) else float(seconds // 3600)


@worksheet("MINUTE", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def minute(number: float) -> float | Fault:
    """The minute, 0 to 59."""
    seconds = _seconds(number)
    return seconds if isinstance(seconds, Fault) else float(seconds // 60 % 60)


@worksheet("SECOND", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def second(number: float) -> float | Fault:
    """The second, 0 to 59."""
    seconds = _seconds(number)
    return seconds if isinstance(seconds, Fault) else float(seconds % 60)


@worksheet("WEEKDAY", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def weekday(number: float, kind: float = 1.0) -> float | Fault:
    """The day of the week: from Sunday 1 (kind 1), Monday 1 (2), Monday 0 (3), or 11 to 17."""
    if not 0.0 <= number <= LAST_SERIAL + 1.0:
        return Fault.NUM
    # Serial 1 counts as a Sunday, as the system has it.
    sunday_based = (math.floor(number) - 1) % 7
    form = int(kind)
    if form == 3:
        return float((sunday_based - 1) % 7)
    if form in (1, 2):
        return float((sunday_based - (form - 1)) % 7 + 1)
    if 11 <= form <= 17:
        return float((sunday_based - (form - 10)) % 7 + 1)
    return Fault.NUM


@worksheet("ISOWEEKNUM", Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def isoweeknum(number: float) -> float | Fault:
    """The week of the year by ISO 8601."""
    day = day_of(number)
    return day if isinstance(day, Fault) else float(day.isocalendar().week)


@worksheet("WEEKNUM", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def weeknum(number: float, kind: float = 1.0) -> float | Fault:
    """The week of the year; weeks begin on Sunday (1), Monday (2), others (11 to 17); 21: ISO."""
    day, form = day_of(number), int(kind)
    if isinstance(day, Fault):
        return day
    if form == 21:
        return float(day.isocalendar().week)
    starts = {1: 6, 2: 0, 11: 0, 12: 1, 13: 2, 14: 3, 15: 4, 16: 5, 17: 6}
    if form not in starts:
        return Fault.NUM
    first = date(day.year, 1, 1)
    offset = (first.weekday() - starts[form]) % 7
    return float(((day - first).days + offset) // 7 + 1)


@worksheet("DAYS", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def days(end: float, start: float) -> float:
    """Whole days between two dates."""
    return float(math.floor(end) - math.floor(start))


def moved(day: date, months: int) -> date | Fault:
    """The same day some months on, or the month's last."""
    whole = day.year * 12 + day.month - 1 + months
    year, month = divmod(whole, 12)
    if not 1900 <= year <= 9999:
        return Fault.NUM
    return date(year, month + 1, min(day.day, monthrange(year, month + 1)[1]))


@worksheet("EDATE", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def edate(start: float, months: float) -> float | Fault:
    """The date some months on."""
    day = day_of(start)
    found = day if isinstance(day, Fault) else moved(day, math.trunc(months))
    return found if isinstance(found, Fault) else serial(found)


@worksheet("EOMONTH", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def eomonth(start: float, months: float) -> float | Fault:
    """The last day of the month some months on."""
    day = day_of(start)
    found = day if isinstance(day, Fault) else moved(day.replace(day=1), math.trunc(months))
    if isinstance(found, Fault):
        return found
    return serial(found.replace(day=monthrange(found.year, found.month)[1]))


@worksheet("DATEVALUE", Takes.TEXT, gives=Gives.NUMBER, traits=CALENDAR)
def datevalue(text: str) -> float | Fault:
    """The serial of a date in a text."""
    found = read_date(text)
    return found if isinstance(found, Fault) else float(math.floor(found))


@worksheet("TIMEVALUE", Takes.TEXT, gives=Gives.NUMBER, traits=CALENDAR)
def timevalue(text: str) -> float | Fault:
    """The fraction of a day of a time in a text."""
    found = read_time(text)
    if isinstance(found, Fault):
        found = read_date(text)
    return found if isinstance(found, Fault) else found % 1.0


def days_360(start: date, end: date, *, european: bool = False) -> int:
    """Days of a year of twelve months of thirty days: the US rule (NASD) or the European."""
    first, last = start.day, end.day
    if european:
        first, last = min(first, 30), min(last, 30)
    else:
        if _month_end(start) and start.month == 2:
            if _month_end(end) and end.month == 2:
                last = 30
            first = 30
        if first == 31:
            first = 30
        if last == 31 and first == 30:
            last = 30
    return 360 * (end.year - start.year) + 30 * (end.month - start.month) + last - first


def _month_end(day: date) -> bool:
    return day.day == monthrange(day.year, day.month)[1]


@worksheet(
    "DAYS360",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    optional=1,
    gives=Gives.NUMBER,
    traits=CALENDAR,
)
def days360(start: float, end: float, european: bool = False) -> float | Fault:  # noqa: FBT001, FBT002
    """Days between two dates in a year of 360; February's end counts as any other day here."""
    first, last = day_of(start), day_of(end)
    if isinstance(first, Fault):
        return first
    if isinstance(last, Fault):
        return last
    if european:
        return float(days_360(first, last, european=True))
    begin, finish = first.day, last.day
    extra = 0
    if _month_end(first):
        begin = 30
    if finish == 31:
        if begin < 30:
            finish, extra = 1, 1
        else:
            finish = 30
    months = 12 * (last.year - first.year) + last.month - first.month + extra
    return float(30 * months + finish - begin)


@worksheet("DATEDIF", Takes.NUMBER, Takes.NUMBER, Takes.TEXT, gives=Gives.NUMBER, traits=CALENDAR)
def datedif(start: float, end: float, unit: str) -> float | Fault:
    """Whole years (y), months (m), days (d), or what remains of them (ym, yd, md)."""
    first, last = day_of(start), day_of(end)
    if isinstance(first, Fault):
        return first
    if isinstance(last, Fault):
        return last
    if first > last:
        return Fault.NUM
    months = 12 * (last.year - first.year) + last.month - first.month - (last.day < first.day)
    form = unit.casefold()
    if form == "d":
        return float((last - first).days)
    if form == "m":
        return float(months)
    if form == "y":
        return float(months // 12)
    if form == "ym":
        return float(months % 12)
    if form in ("md", "yd"):
        from xlroot.errors import Unsupported

        raise Unsupported(f'counts remaining days ("{unit}"), where hosts differ')
    return Fault.NUM


@worksheet(
    "YEARFRAC",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=1,
    gives=Gives.NUMBER,
    traits=CALENDAR,
)
def yearfrac(start: float, end: float, basis: float = 0.0) -> float | Fault:
    """The part of a year between two dates: 30/360 (0), actual/actual (1), /360 (2), /365 (3),
    European 30/360 (4)."""
    first, last = day_of(min(start, end)), day_of(max(start, end))
    if isinstance(first, Fault):
        return first
    if isinstance(last, Fault):
        return last
    form = int(basis)
    if form in (0, 4):
        return days_360(first, last, european=form == 4) / 360.0
    actual = float((last - first).days)
    if form == 1:
        return actual / _average_year(first, last)
    return {2: actual / 360.0, 3: actual / 365.0}.get(form, Fault.NUM)


def _average_year(first: date, last: date) -> float:
    """The length of a year for actual/actual: within a year by its own leap day, otherwise the
    mean of the calendar years touched."""
    year_on = moved(first, 12)
    if isinstance(year_on, date) and last <= year_on:
        if first.year == last.year:
            return 366.0 if isleap(first.year) else 365.0
        for year in (first.year, last.year):
            if isleap(year) and first <= date(year, 2, 29) <= last:
                return 366.0
        return 365.0
    span = range(first.year, last.year + 1)
    return sum(366.0 if isleap(year) else 365.0 for year in span) / len(span)


def _holidays(operand: Operand | None) -> set[date] | Fault:
    found: set[date] = set()
    if operand is None:
        return found
    for value in operand.flat() if isinstance(operand, Grid) else (operand,):
        if value is None:
            continue
        number = to_number(value)
        day = number if isinstance(number, Fault) else day_of(number)
        if isinstance(day, Fault):
            return day
        found.add(day)
    return found


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
    """Days from Monday to Friday that are no holidays, both ends counted."""
    first, last, free = day_of(min(start, end)), day_of(max(start, end)), _holidays(holidays)
    if isinstance(first, Fault):
        return first
    if isinstance(last, Fault):
        return last
    if isinstance(free, Fault):
        return free
    span = (first + timedelta(days=each) for each in range((last - first).days + 1))
    count = sum(day.weekday() < 5 and day not in free for day in span)
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
    """The date some working days on."""
    day, free = day_of(start), _holidays(holidays)
    if isinstance(day, Fault):
        return day
    if isinstance(free, Fault):
        return free
    left = math.trunc(count)
    if abs(left) > 1_000_000:
        return Fault.NUM
    step = timedelta(days=1 if left > 0 else -1)
    while left:
        try:
            day += step
        except OverflowError:
            return Fault.NUM
        if day.weekday() < 5 and day not in free:
            left -= 1 if left > 0 else -1
    return serial(day) if day.year >= 1900 else Fault.NUM


@worksheet("NOW", gives=Gives.NUMBER, traits=CHANGING)
def now() -> float:
    """The present moment, in local time."""
    moment = datetime.now()
    return serial(moment.date()) + (moment.hour * 3600 + moment.minute * 60 + moment.second) / 86400


@worksheet("TODAY", gives=Gives.NUMBER, traits=CHANGING)
def today() -> float:
    """The present day, in local time."""
    return serial(datetime.now().date())
