"""Time between two dates: days, days of a 360-day year, whole months, parts of a year.

OpenFormula (OASIS ODF 1.3 part 4), sections 4.11.7 and 6.10. YEARFRAC follows D. A. Wheeler's
published analysis of it for the OpenFormula subcommittee, whose results for Excel it reproduced
(from memory). Dates before 1 March 1900 are refused: hosts count days differently there.
"""

from __future__ import annotations

import math
from calendar import isleap
from datetime import date

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.serials import CALENDAR, month_end, sure_day
from xlroot.values import Fault


@worksheet("DAYS", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CALENDAR)
def days(end: float, start: float) -> float | Fault:
    """Whole days between two dates."""
    both = _ordered(start, end)
    return both if isinstance(both, Fault) else float(math.floor(end) - math.floor(start))


def _ordered(start: float, end: float) -> tuple[date, date] | Fault:
    first, last = sure_day(min(start, end)), sure_day(max(start, end))
    if isinstance(first, Fault):
        return first
    return last if isinstance(last, Fault) else (first, last)


def _thirty(first: date, last: date, from_day: int, to_day: int) -> int:
    """Days in months of thirty days, between days of the month that a rule has set."""
    months = 12 * (last.year - first.year) + last.month - first.month
    return 30 * months + to_day - from_day


def thirty_european(first: date, last: date) -> int:
    """Days in months of thirty days: a 31st counts as the 30th."""
    return _thirty(first, last, min(first.day, 30), min(last.day, 30))


def thirty_american(first: date, last: date) -> int:
    """Days in months of thirty days, as YEARFRAC counts them in basis 0: a 31st at the end counts
    as the 30th only if the start is a 30th or 31st; February's end counts as a 30th at the start,
    and at the end only if the start is one too."""
    from_day, to_day = min(first.day, 30), last.day
    if to_day == 31 and first.day >= 30:
        to_day = 30
    if _february_end(first):
        from_day = 30
        if _february_end(last):
            to_day = 30
    return _thirty(first, last, from_day, to_day)


def _february_end(day: date) -> bool:
    return day.month == 2 and month_end(day)


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
    """Days between two dates in months of thirty days; negative backwards.

    Not European: a start on a month's last day counts as a 30th; an end on a 31st counts as a
    30th after such a start, otherwise as the first of the next month (Excel's documentation).
    """
    first, last = sure_day(start), sure_day(end)
    if isinstance(first, Fault):
        return first
    if isinstance(last, Fault):
        return last
    if european:
        return float(thirty_european(first, last))
    from_day = 30 if month_end(first) else first.day
    to_day = 30 if last.day == 31 and from_day == 30 else last.day
    return float(_thirty(first, last, from_day, to_day))


@worksheet("DATEDIF", Takes.NUMBER, Takes.NUMBER, Takes.TEXT, gives=Gives.NUMBER, traits=CALENDAR)
def datedif(start: float, end: float, unit: str) -> float | Fault:
    """Whole years (y), months (m), days (d), or the months beyond whole years (ym)."""
    first, last = sure_day(start), sure_day(end)
    if isinstance(first, Fault) or isinstance(last, Fault) or first > last:
        return Fault.NUM
    months = 12 * (last.year - first.year) + last.month - first.month - (last.day < first.day)
    form = unit.casefold()
    if form in ("md", "yd"):
        raise Unsupported(f'counts remaining days ("{unit}"), where hosts differ')
    counts = {"d": (last - first).days, "m": months, "y": months // 12, "ym": months % 12}
    return float(counts[form]) if form in counts else Fault.NUM


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
    """The part of a year between two dates, in any order: 30/360 American (0), actual/actual (1),
    actual/360 (2), actual/365 (3), 30/360 European (4)."""
    if not 0.0 <= basis < 5.0:
        return Fault.NUM
    both = _ordered(start, end)
    if isinstance(both, Fault):
        return both
    first, last = both
    form, actual = int(basis), (last - first).days
    if form == 1:
        return actual / _year_length(first, last)
    if form == 0:
        return thirty_american(first, last) / 360.0
    return {2: actual / 360.0, 3: actual / 365.0, 4: thirty_european(first, last) / 360.0}[form]


def _year_length(first: date, last: date) -> float:
    """The length of a year in actual/actual: up to a year, 366 with a 29 February between (or in
    the one calendar year); beyond, the mean of the calendar years touched."""
    if first.year == last.year:
        return 366.0 if isleap(first.year) else 365.0
    within = first.year + 1 == last.year and (last.month, last.day) <= (first.month, first.day)
    if within:
        leap_days = [date(year, 2, 29) for year in (first.year, last.year) if isleap(year)]
        return 366.0 if any(first <= day <= last for day in leap_days) else 365.0
    years = last.year - first.year + 1
    return (date(last.year, 12, 31) - date(first.year - 1, 12, 31)).days / years
