"""Numbers as text and text as numbers.

A text reads as a number where no reader could take it otherwise: decimals, exponents, percents,
thousands separated by commas, ISO 8601 dates and times, dates with the month's English name. What
depends on the reader's country (1/2/2005, 1.234,5) is refused rather than guessed.
"""

from __future__ import annotations

import math
import re
from datetime import date

from xlroot.errors import Unsupported
from xlroot.faults import Fault

_ISO = re.compile(r"(\d{4})-(\d{1,2})-(\d{1,2})(?:[T ](.+))?")
_TIME = re.compile(r"(\d{1,4}):(\d{1,2})(?::(\d{1,2}(?:\.\d+)?))?\s*([AaPp][Mm])?")
_THOUSANDS = re.compile(r"[+-]?\d{1,3}(?:,\d{3})+(?:\.\d*)?(?:[eE][+-]?\d+)?")
_NUMBER = re.compile(r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?")
_FRACTION = re.compile(r"([+-]?\d+) (\d+)/(\d+)")
_MONTHS = "jan feb mar apr may jun jul aug sep oct nov dec".split()
_DAY_FIRST = re.compile(r"(\d{1,2})[ -]([A-Za-z]{3,9})[ -,]+(\d{4})")
_MONTH_FIRST = re.compile(r"([A-Za-z]{3,9})[ -](\d{1,2}),? +(\d{4})")
_AMBIGUOUS = re.compile(r"\d{1,4}[/.]\d{1,2}[/.]\d{1,4}|\d{1,2}/\d{1,4}")

FIRST_SERIAL = date(1899, 12, 30)
"""Serial 0 of the 1900 system, for dates from 1 March 1900 on."""


def general_format(number: float) -> str:
    """A number in the general format: 15 significant digits, an exponent where it is shorter."""
    mantissa, _, exponent = f"{number:.15g}".partition("e")
    return f"{mantissa}E{exponent}" if exponent else mantissa


def serial_of(year: int, month: int, day: int) -> float | Fault:
    """The serial of a calendar date in the 1900 system, from 1 January 1900.

    The system counts a 29 February 1900 (serial 60), which never was; earlier dates are one less.
    """
    try:
        days = (date(year, month, day) - FIRST_SERIAL).days
    except ValueError:
        return Fault.VALUE
    if days < 61:
        days -= 1
    return float(days) if days >= 1 else Fault.VALUE


def read_number(text: str) -> float | Fault:
    """The number that a text reads as, or #VALUE!; Unsupported where it depends on the country."""
    stripped = text.strip()
    if _NUMBER.fullmatch(stripped):
        number = float(stripped)
        return number if math.isfinite(number) else Fault.VALUE
    if stripped.endswith("%"):
        inner = read_number(stripped[:-1])
        return inner if isinstance(inner, Fault) else inner / 100.0
    if _THOUSANDS.fullmatch(stripped):
        return float(stripped.replace(",", ""))
    fraction = _FRACTION.fullmatch(stripped)
    if fraction and float(fraction[3]):
        whole, part = float(fraction[1]), float(fraction[2]) / float(fraction[3])
        return whole - part if fraction[1].startswith("-") else whole + part
    moment = read_time(stripped)
    if not isinstance(moment, Fault):
        return moment
    return read_date(stripped)


def read_time(text: str) -> float | Fault:
    """A time of day such as 13:45 or 1:45:30 PM as a fraction of a day."""
    match = _TIME.fullmatch(text.strip())
    if match is None:
        return Fault.VALUE
    hour, minute, second = float(match[1]), float(match[2]), float(match[3] or 0.0)
    if minute >= 60.0 or second >= 60.0:
        return Fault.VALUE
    if match[4]:
        if not 0.0 < hour <= 12.0:
            return Fault.VALUE
        hour = hour % 12.0 + (12.0 if match[4].upper() == "PM" else 0.0)
    return (hour * 3600.0 + minute * 60.0 + second) / 86400.0


def read_date(text: str) -> float | Fault:
    """A date, with a time behind it if there is one, as a serial of the 1900 system."""
    stripped = text.strip()
    match = _ISO.fullmatch(stripped)
    if match is not None:
        day = serial_of(int(match[1]), int(match[2]), int(match[3]))
        clock = read_time(match[4]) if match[4] else 0.0
        if isinstance(day, Fault) or isinstance(clock, Fault):
            return Fault.VALUE
        return day + clock
    for found, order in ((_DAY_FIRST, (3, 2, 1)), (_MONTH_FIRST, (3, 1, 2))):
        match = found.fullmatch(stripped)
        if match is not None:
            year, name, number = (match[each] for each in order)
            month = name[:3].casefold()
            if month in _MONTHS:
                return serial_of(int(year), _MONTHS.index(month) + 1, int(number))
    if _AMBIGUOUS.fullmatch(stripped):
        raise Unsupported(
            f'reads the text "{stripped}" as a number, which depends on the reader\'s country; '
            "write it as a number or as an ISO date"
        )
    return Fault.VALUE
