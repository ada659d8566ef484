"""Numbers as text and text as numbers.

A text reads as a number where no reader could take it otherwise: decimals, exponents, percents,
thousands separated by commas, mixed fractions, times of day, ISO 8601 dates, dates with the
month's English name. A text that some readers take for a number and others do not, or for another
number (1/2/2005, 1,5, $5, (5), 3-4), is refused rather than guessed. Any other text is no number.
"""

from __future__ import annotations

import math
import re
from datetime import date

from xlroot.errors import Unsupported
from xlroot.faults import Fault

_DECIMAL = re.compile(r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?", re.ASCII)
_PERCENT = re.compile(r"([+-]?(?:\d+\.?\d*|\.\d+)) *%", re.ASCII)
_THOUSANDS = re.compile(r"[+-]?\d{1,3}(?:,\d{3})+(?:\.\d*)?", re.ASCII)
_FRACTION = re.compile(r"([+-]?)(\d+) (\d+)/(\d+)", re.ASCII)
_CLOCK = re.compile(r"(\d{1,4}):(\d{1,2})(?::(\d{1,2}(?:\.\d+)?))?(?: +([AaPp][Mm]))?", re.ASCII)
_MOMENT = re.compile(r"(.*[^T ])(?:T| +)(\d{1,2}:\d.*)")
_ISO = re.compile(r"(\d{4})-(\d{1,2})-(\d{1,2})", re.ASCII)
_DAY_FIRST = re.compile(r"(\d{1,2})[ -]([A-Za-z]+)[ -](\d{4})", re.ASCII)
_MONTH_FIRST = re.compile(r"([A-Za-z]+) (\d{1,2}), ?(\d{4})", re.ASCII)
_THREE_PARTS = re.compile(r"(\d{1,4})[/.-](\d{1,4})[/.-](\d{1,4})", re.ASCII)

_MONTHS = (
    "january february march april may june july august september october november december".split()
)
_MONTH_NUMBER = {name: number for number, name in enumerate(_MONTHS, start=1)}
_MONTH_NUMBER |= {name[:3]: number for name, number in _MONTH_NUMBER.items()}
_DATE_WORDS = {*_MONTH_NUMBER, "sept", "am", "pm"}
_WORD = re.compile(r"[^\W\d_]+")
_NUMERIC_SIGNS = re.compile(r"[\s\d.,:/'()+\-%$€£¥\xa0]*\d[\s\d.,:/'()+\-%$€£¥\xa0]*", re.ASCII)

FIRST_SERIAL = date(1899, 12, 30)
"""Serial 0 of the 1900 system, for dates from 1 March 1900 on."""

DAY = 86_400.0
"""Seconds of a day."""


def general_format(number: float) -> str:
    """A number in the general format: 15 significant digits, an exponent where it is shorter."""
    mantissa, _, exponent = f"{number:.15g}".partition("e")
    if mantissa == "-0":
        return "0"
    return f"{mantissa}E{exponent}" if exponent else mantissa


def serial_of(year: int, month: int, day: int) -> float | Fault:
    """The serial of a calendar date in the 1900 system, from 1 January 1900; #VALUE! otherwise.

    The system counts a 29 February 1900 (serial 60), which never was; earlier dates are one less.
    """
    try:
        days = (date(year, month, day) - FIRST_SERIAL).days
    except ValueError:
        return Fault.VALUE
    if days < 61:
        days -= 1
    return float(days) if days >= 1 else Fault.VALUE


def decimal(text: str) -> float | None:
    """The number of a text that is a plain decimal, with or without an exponent."""
    if not _DECIMAL.fullmatch(text):
        return None
    number = float(text)
    return number if math.isfinite(number) else None


def read_number(text: str) -> float | Fault:
    """The number that a text reads as, or #VALUE!; Unsupported where readers differ."""
    stripped = text.strip(" ")
    for read in (decimal, _percent, _grouped, _mixed, _clock):
        number = read(stripped)
        if number is not None:
            return number
    return read_date(stripped)


def read_time(text: str) -> float | Fault:
    """The time of day in a text, with or without a date, as a fraction of a day."""
    stripped = text.strip(" ")
    clock = _clock(stripped)
    found = read_date(stripped) if clock is None else clock
    return found if isinstance(found, Fault) else found % 1.0


def read_date(text: str) -> float | Fault:
    """The date in a text, with the time behind it if there is one, as a serial of the 1900
    system; #VALUE! where there is none, Unsupported where readers differ."""
    stripped = text.strip(" ")
    if decimal(stripped) is not None:
        return Fault.VALUE
    whole, clock = stripped, 0.0
    behind = _MOMENT.fullmatch(stripped)
    if behind:
        time = _clock(behind[2])
        if time is None:
            return _no_number(stripped)
        whole, clock = behind[1], time
    day = _day(whole)
    if day is None:
        return _no_number(stripped)
    return day if isinstance(day, Fault) else day + clock


def _percent(text: str) -> float | None:
    match = _PERCENT.fullmatch(text)
    return float(match[1]) / 100.0 if match else None


def _grouped(text: str) -> float | None:
    return float(text.replace(",", "")) if _THOUSANDS.fullmatch(text) else None


def _mixed(text: str) -> float | None:
    match = _FRACTION.fullmatch(text)
    if match is None or not int(match[4]):
        return None
    number = float(match[2]) + float(match[3]) / float(match[4])
    return -number if match[1] == "-" else number


def _clock(text: str) -> float | None:
    match = _CLOCK.fullmatch(text)
    if match is None:
        return None
    hour, minute, second = float(match[1]), float(match[2]), float(match[3] or 0.0)
    if minute >= 60.0 or second >= 60.0:
        return None
    if match[4]:
        if not 1.0 <= hour <= 12.0:
            return None
        hour = hour % 12.0 + (12.0 if match[4].upper() == "PM" else 0.0)
    return (hour * 3600.0 + minute * 60.0 + second) / DAY


def _day(text: str) -> float | Fault | None:
    match = _ISO.fullmatch(text)
    if match:
        return serial_of(int(match[1]), int(match[2]), int(match[3]))
    for shape, order in ((_DAY_FIRST, (3, 2, 1)), (_MONTH_FIRST, (3, 1, 2))):
        match = shape.fullmatch(text)
        if match:
            year, name, number = (match[each] for each in order)
            month = _MONTH_NUMBER.get(name.casefold())
            if month:
                return serial_of(int(year), month, int(number))
    return None


def _no_number(text: str) -> Fault:
    """#VALUE!, or a refusal where some readers would find a number."""
    words = {word.casefold() for word in _WORD.findall(text)}
    parts = _THREE_PARTS.fullmatch(text)
    if parts and not _any_date(*(int(part) for part in parts.groups())):
        return Fault.VALUE
    if words <= _DATE_WORDS and _NUMERIC_SIGNS.fullmatch(_WORD.sub("", text)):
        raise Unsupported(
            f'reads the text "{text}" as a number, which depends on the reader and the country; '
            "write it as a number, or as a date such as 2005-01-31"
        )
    return Fault.VALUE


def _any_date(a: int, b: int, c: int) -> bool:
    """Whether three numbers are a date in some country's order."""
    for year, month, day in ((a, b, c), (c, a, b), (c, b, a)):
        full = year + 2000 if year < 100 else year
        if not isinstance(serial_of(full, month, day), Fault):
            return True
    return False
