"""Dates, times, weeks, working days and intervals.

Published values: Excel's documentation of each function, from memory. Independent checks: the
standard library's calendar, numpy's business days, LibreOffice 7.4 where marked.
"""

from __future__ import annotations

from datetime import date, timedelta
from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.functions.test_lookup import call, column
from xlroot.errors import Unsupported
from xlroot.functions import find
from xlroot.functions.entry import Trait
from xlroot.values import Fault

ORIGIN = date(1899, 12, 30)


def day(year: int, month: int, number: int) -> float:
    """The serial of a date from 1 March 1900 on, by the standard library's calendar."""
    return float((date(year, month, number) - ORIGIN).days)


DAYS = st.dates(date(1901, 1, 1), date(2999, 12, 31))


@pytest.mark.parametrize(
    ("parts", "serial"),
    [
        ((2008.0, 1.0, 2.0), day(2008, 1, 2)),
        ((108.0, 1.0, 2.0), day(2008, 1, 2)),
        ((2008.0, 14.0, 2.0), day(2009, 2, 2)),
        ((2008.0, -3.0, 2.0), day(2007, 9, 2)),
        ((2008.0, 1.0, 35.0), day(2008, 2, 4)),
        ((2008.0, 1.0, -15.0), day(2007, 12, 16)),
        ((1900.0, 1.0, 1.0), 1.0),
        ((1900.0, 2.0, 29.0), 60.0),
        ((1900.0, 3.0, 0.0), 60.0),
        ((1900.0, 3.0, 1.0), 61.0),
        ((1900.0, 1.0, 0.0), 0.0),
        ((1900.0, 1.0, -1.0), Fault.NUM),
        ((9999.0, 12.0, 31.0), 2_958_465.0),
        ((9999.0, 12.0, 32.0), Fault.NUM),
        ((10_000.0, 1.0, 1.0), Fault.NUM),
        ((-1.0, 1.0, 1.0), Fault.NUM),
    ],
)
def test_date(parts: tuple[float, ...], serial: object) -> None:
    assert call("DATE", *parts) == serial


@given(DAYS)
def test_date_and_its_parts_are_the_calendar(given_day: date) -> None:
    serial = call("DATE", *(float(part) for part in given_day.timetuple()[:3]))
    assert serial == (given_day - ORIGIN).days
    parts = [call(name, serial) for name in ("YEAR", "MONTH", "DAY")]
    assert parts == [given_day.year, given_day.month, given_day.day]
    assert call("WEEKDAY", serial, 2.0) == given_day.isoweekday()
    assert call("WEEKDAY", serial) == given_day.isoweekday() % 7 + 1
    assert call("WEEKDAY", serial, 3.0) == given_day.weekday()
    assert call("ISOWEEKNUM", serial) == given_day.isocalendar().week
    assert call("WEEKNUM", serial, 21.0) == given_day.isocalendar().week
    assert call("WEEKNUM", serial, 2.0) == int(given_day.strftime("%W")) + (
        date(given_day.year, 1, 1).weekday() != 0
    )
    assert call("WEEKNUM", serial) == int(given_day.strftime("%U")) + (
        date(given_day.year, 1, 1).weekday() != 6
    )


@pytest.mark.parametrize("form", range(11, 18))
def test_weekdays_from_any_day(form: int) -> None:
    """Kind 11 begins on Monday, 17 on Sunday: that day is 1."""
    monday = day(2024, 1, 1)
    assert call("WEEKDAY", monday + form - 11, float(form)) == 1.0
    assert call("WEEKDAY", monday + form - 12, float(form)) == 7.0


def test_weekdays_and_weeks_as_documented() -> None:
    assert [call("WEEKDAY", day(2008, 2, 14), kind) for kind in (1.0, 2.0, 3.0)] == [5.0, 4.0, 3.0]
    assert call("WEEKDAY", 1.0) == 1.0
    assert call("WEEKDAY", 5.0, 4.0) is Fault.NUM
    assert call("WEEKNUM", day(2012, 3, 9)) == 10.0
    assert call("WEEKNUM", day(2012, 3, 9), 2.0) == 11.0
    assert call("ISOWEEKNUM", day(2012, 3, 9)) == 10.0
    assert call("WEEKNUM", day(2012, 3, 9), 3.0) is Fault.NUM


def test_days_that_only_the_system_has() -> None:
    assert [call(name, 60.0) for name in ("YEAR", "MONTH", "DAY")] == [1900.0, 2.0, 29.0]
    assert [call(name, 0.0) for name in ("YEAR", "MONTH", "DAY")] == [1900.0, 1.0, 0.0]
    assert call("DAY", 59.0) == 28.0
    assert call("YEAR", -1.0) is Fault.NUM
    assert call("YEAR", 2_958_466.0) is Fault.NUM


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("EDATE", (31.0, 1.0)),
        ("EDATE", (61.0, -1.0)),
        ("EOMONTH", (5.0, 0.0)),
        ("ISOWEEKNUM", (1.0,)),
        ("WEEKNUM", (100.0,)),
        ("DAYS", (61.0, 59.0)),
        ("YEARFRAC", (59.0, 61.0)),
        ("DAYS360", (59.0, 61.0)),
        ("DATEDIF", (1.0, 100.0, "d")),
        ("NETWORKDAYS", (1.0, 100.0)),
        ("WORKDAY", (61.0, -1.0)),
    ],
)
def test_intervals_before_march_1900_are_refused(name: str, arguments: tuple[Any, ...]) -> None:
    with pytest.raises(Unsupported, match="1900"):
        call(name, *arguments)


@pytest.mark.parametrize(
    ("parts", "fraction"),
    [
        ((12.0, 0.0, 0.0), 0.5),
        ((16.0, 48.0, 10.0), 60_490 / 86_400),
        ((27.0, 0.0, 0.0), 0.125),
        ((0.0, 750.0, 0.0), 45_000 / 86_400),
        ((0.0, 0.0, 2000.0), 2_000 / 86_400),
        ((0.0, 0.0, -1.0), Fault.NUM),
        ((32_768.0, 0.0, 0.0), Fault.NUM),
    ],
)
def test_time(parts: tuple[float, ...], fraction: object) -> None:
    assert call("TIME", *parts) == fraction


@given(st.integers(0, 86_399), st.integers(61, 60_000))
def test_every_second_of_a_day_is_taken_apart(second: int, whole: int) -> None:
    serial = whole + second / 86_400.0
    assert call("HOUR", serial) == second // 3600
    assert call("MINUTE", serial) == second // 60 % 60
    assert call("SECOND", serial) == second % 60


def test_a_time_just_before_the_next_hour_is_refused() -> None:
    almost = (3600.0 - 0.3) / 86_400.0
    assert call("SECOND", almost) == 0.0
    for name in ("HOUR", "MINUTE"):
        with pytest.raises(Unsupported, match="half a second"):
            call(name, almost)
    assert call("HOUR", -0.5) is Fault.NUM


def test_months_on() -> None:
    assert call("EDATE", day(2011, 1, 15), 1.0) == day(2011, 2, 15)
    assert call("EDATE", day(2011, 1, 15), -1.0) == day(2010, 12, 15)
    assert call("EDATE", day(2011, 1, 31), 1.9) == day(2011, 2, 28)
    assert call("EOMONTH", day(2011, 1, 1), 1.0) == day(2011, 2, 28)
    assert call("EOMONTH", day(2011, 1, 1), -3.0) == day(2010, 10, 31)
    assert call("EDATE", -1.0, 1.0) is Fault.NUM
    assert call("EDATE", day(2011, 1, 15), 1e9) is Fault.NUM
    assert call("EOMONTH", day(9999, 12, 1), 1.0) is Fault.NUM


def test_texts() -> None:
    assert call("DATEVALUE", "2011-02-23") == day(2011, 2, 23)
    assert call("DATEVALUE", "22-May-2011") == day(2011, 5, 22)
    assert call("DATEVALUE", "2011-02-23 18:00") == day(2011, 2, 23)
    assert call("DATEVALUE", "pump") is Fault.VALUE
    assert call("TIMEVALUE", "2:24 AM") == 0.1
    assert call("TIMEVALUE", "22-Aug-2011 6:35 AM") == pytest.approx(0.2743056, abs=5e-8)
    for name, text in (("DATEVALUE", "8/22/2011"), ("DATEVALUE", "13:00"), ("TIMEVALUE", "1:75")):
        with pytest.raises(Unsupported):
            call(name, text)


def test_days360_as_documented() -> None:
    """The last three also as LibreOffice 7.4 counts them."""
    assert call("DAYS360", day(2011, 1, 30), day(2011, 2, 1)) == 1.0
    assert call("DAYS360", day(2011, 1, 1), day(2011, 12, 31)) == 360.0
    assert call("DAYS360", day(2011, 1, 1), day(2011, 2, 1)) == 30.0
    assert call("DAYS360", day(2011, 2, 28), day(2011, 3, 31)) == 30.0
    assert call("DAYS360", day(2011, 1, 15), day(2011, 3, 31)) == 76.0
    assert call("DAYS360", day(2011, 3, 31), day(2011, 1, 31), True) == -60.0


def test_datedif_as_documented() -> None:
    assert call("DATEDIF", day(2001, 1, 1), day(2003, 1, 1), "Y") == 2.0
    assert call("DATEDIF", day(2001, 6, 1), day(2002, 8, 15), "D") == 440.0
    assert call("DATEDIF", day(2001, 1, 31), day(2001, 2, 28), "m") == 0.0
    assert call("DATEDIF", day(2001, 6, 1), day(2002, 8, 15), "ym") == 2.0
    assert call("DATEDIF", day(2003, 1, 1), day(2001, 1, 1), "y") is Fault.NUM
    assert call("DATEDIF", day(2001, 1, 1), day(2003, 1, 1), "w") is Fault.NUM
    with pytest.raises(Unsupported, match="md"):
        call("DATEDIF", day(2001, 1, 31), day(2001, 3, 1), "md")


@pytest.mark.parametrize(
    ("first", "last", "basis", "part"),
    [
        ((2012, 1, 1), (2012, 7, 30), 0.0, 209 / 360),
        ((2012, 1, 1), (2012, 7, 30), 1.0, 211 / 366),
        ((2012, 1, 1), (2012, 7, 30), 3.0, 211 / 365),
        # Also as LibreOffice 7.4 computes them:
        ((2002, 2, 28), (2002, 12, 31), 0.0, 0.836111111111111),
        ((2002, 2, 28), (2003, 2, 28), 0.0, 1.0),
        ((2002, 1, 31), (2002, 3, 31), 0.0, 0.166666666666667),
        ((2002, 1, 29), (2002, 3, 31), 0.0, 0.172222222222222),
        ((2004, 2, 28), (2005, 2, 28), 1.0, 1.0),
        ((1999, 10, 5), (2004, 6, 8), 1.0, 4.67518248175183),
        ((2003, 10, 5), (2004, 2, 29), 1.0, 0.401639344262295),
        ((2003, 10, 5), (2004, 2, 28), 1.0, 0.4),
    ],
)
def test_yearfrac(
    first: tuple[int, int, int], last: tuple[int, int, int], basis: float, part: float
) -> None:
    assert call("YEARFRAC", day(*first), day(*last), basis) == pytest.approx(part, rel=1e-14)
    assert call("YEARFRAC", day(*last), day(*first), basis) == pytest.approx(part, rel=1e-14)
    assert call("YEARFRAC", day(*first), day(*last), 5.0) is Fault.NUM


@given(DAYS, st.integers(0, 4000), st.integers(0, 4))
def test_parts_of_a_year_grow_with_the_end(first: date, length: int, basis: int) -> None:
    start = float((first - ORIGIN).days)
    part = call("YEARFRAC", start, start + length, float(basis))
    assert isinstance(part, float)
    assert part == pytest.approx(length / 365.25, abs=0.06 + 0.02 * length / 365.25)
    assert call("YEARFRAC", start, start, float(basis)) == 0.0


HOLIDAYS = column(day(2012, 11, 22), day(2012, 12, 4), day(2013, 1, 21))


def test_working_days_as_documented() -> None:
    start, end = day(2012, 10, 1), day(2013, 3, 1)
    assert call("NETWORKDAYS", start, end) == 110.0
    assert call("NETWORKDAYS", start, end, day(2012, 11, 22)) == 109.0
    assert call("NETWORKDAYS", start, end, HOLIDAYS) == 107.0
    assert call("NETWORKDAYS", end, start, HOLIDAYS) == -107.0
    assert call("WORKDAY", day(2008, 10, 1), 151.0) == day(2009, 4, 30)
    free = column(day(2008, 11, 26), day(2008, 12, 4), day(2009, 1, 21), None)
    assert call("WORKDAY", day(2008, 10, 1), 151.0, free) == day(2009, 5, 5)
    assert call("NETWORKDAYS", start, end, column("pump")) is Fault.VALUE
    assert call("WORKDAY", day(9999, 12, 1), 100.0) is Fault.NUM


@given(DAYS, st.integers(-400, 400), st.lists(st.integers(-30, 300), max_size=5))
def test_working_days_as_numpy_counts_them(first: date, span: int, free: list[int]) -> None:
    start = (first - ORIGIN).days
    days_off = [first + timedelta(days=each) for each in free]
    off = column(None, *((each - ORIGIN).days + 0.0 for each in days_off))
    low, high = sorted((first, first + timedelta(days=span)))
    expected = int(np.busday_count(low, high + timedelta(days=1), holidays=days_off))
    found = call("NETWORKDAYS", float(start), float(start + span), off)
    assert found == (expected if span >= 0 else -expected)
    roll = "backward" if span > 0 else "forward"
    moved = np.busday_offset(first, span, roll=roll, holidays=days_off)
    if span:
        assert call("WORKDAY", float(start), float(span), off) == (moved.item() - ORIGIN).days


def test_the_clock_changes_by_itself() -> None:
    now, today = call("NOW"), call("TODAY")
    assert isinstance(now, float)
    assert isinstance(today, float)
    assert 0.0 <= now - today < 1.001
    for name in ("NOW", "TODAY"):
        entry = find(name)
        assert entry is not None
        assert entry.traits == {Trait.VOLATILE, Trait.CALENDAR}


@pytest.mark.parametrize(
    "name",
    "DATE TIME YEAR MONTH DAY HOUR MINUTE SECOND WEEKDAY WEEKNUM ISOWEEKNUM DAYS DAYS360 EDATE "
    "EOMONTH DATEDIF DATEVALUE TIMEVALUE YEARFRAC NETWORKDAYS WORKDAY".split(),
)
def test_every_date_function_belongs_to_the_calendar(name: str) -> None:
    entry = find(name)
    assert entry is not None
    assert Trait.CALENDAR in entry.traits
