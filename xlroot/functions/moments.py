"""Dates and times as number formats show them: the letters y, m, d, h, s and AM/PM.

ECMA-376 part 1, section 18.8.31. An m beside hours or seconds stands for minutes. Month and day
names are English. Dates before 1 March 1900 are refused: hosts show different ones.
"""

from __future__ import annotations

import re
from datetime import date, timedelta
from decimal import ROUND_HALF_UP, Decimal
from typing import NamedTuple

from xlroot.errors import Unsupported
from xlroot.texts import FIRST_SERIAL
from xlroot.values import Fault

_PART = re.compile(r"(y+|m+|d+|h+|s+(?:\.0+)?|AM/PM)", re.IGNORECASE)
_BETWEEN = re.compile(r"[\x00\s\-/:,()]*")
_FRACTION = re.compile(r"s\.(0+)", re.IGNORECASE)
_DAYS = "Monday Tuesday Wednesday Thursday Friday Saturday Sunday".split()
_MONTHS = (
    "January February March April May June July August September October November December".split()
)
LAST = 2_958_466.0
"""The end of 31 December 9999."""


class _Moment(NamedTuple):
    """A date and a time of day; `seconds` counts within the minute."""

    day: date
    hour: int
    minute: int
    seconds: Decimal


def shown_moment(number: float, signs: str, code: str) -> str | Fault:
    """A serial by the signs of a format; #VALUE! for a number that is no moment."""
    if not 0.0 <= number < LAST:
        return Fault.VALUE
    parts = _PART.split(signs)
    if not all(_BETWEEN.fullmatch(between) for between in parts[::2]):
        raise Unsupported(f'shows a moment in the format "{code}", which is not evaluated')
    letters = [part[0].lower() for part in parts[1::2]]
    fraction = _FRACTION.search(signs)
    places = len(fraction[1]) if fraction else 0
    moment = _moment(number, places, to_seconds="s" in letters)
    half = "a" in letters
    out = parts[0]
    for index, part in enumerate(parts[1::2]):
        kind = letters[index]
        beside_hours = index > 0 and letters[index - 1] == "h"
        beside_seconds = index + 1 < len(letters) and letters[index + 1] == "s"
        if kind == "m" and len(part) <= 2 and (beside_hours or beside_seconds):
            out += f"{moment.minute:0{len(part)}d}"
        elif kind in "ymd":
            if number < 61.0:
                raise Unsupported("shows a date before 1 March 1900, where hosts differ")
            out += _date_part(kind, len(part), moment.day)
        else:
            out += _time_part(kind, part, moment, places, half=half)
        out += parts[2 * index + 2]
    return out


def _moment(number: float, places: int, *, to_seconds: bool) -> _Moment:
    day = FIRST_SERIAL + timedelta(days=int(number))
    # Serials carry about a microsecond of rounding; nothing finer is meant.
    clock = (Decimal(repr(number % 1.0)) * 86_400).quantize(Decimal("0.00001"))
    seconds = clock.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_UP)
    if not to_seconds and int(clock) // 60 != int(seconds) // 60:
        raise Unsupported("shows a time half a second before the next minute, where hosts differ")
    if seconds >= 86_400:
        seconds -= 86_400
        day += timedelta(days=1)
    minutes, rest = divmod(seconds, 60)
    return _Moment(day, int(minutes) // 60, int(minutes) % 60, rest)


def _date_part(kind: str, length: int, day: date) -> str:
    if kind == "y":
        return f"{day.year % 100:02d}" if length <= 2 else f"{day.year:04d}"
    number = day.month if kind == "m" else day.day
    if length <= 2:
        return f"{number:0{length}d}"
    name = _MONTHS[day.month - 1] if kind == "m" else _DAYS[day.weekday()]
    if kind == "m" and length == 5:
        return name[0]
    return name[:3] if length == 3 else name


def _time_part(kind: str, part: str, moment: _Moment, places: int, *, half: bool) -> str:
    if kind == "a":
        return "AM" if moment.hour < 12 else "PM"
    whole = min(2, len(part.partition(".")[0]))
    if kind == "h":
        return f"{(moment.hour % 12 or 12) if half else moment.hour:0{whole}d}"
    text = f"{int(moment.seconds):0{whole}d}"
    if "." in part:
        text += "." + f"{moment.seconds % 1:.{places}f}".partition(".")[2]
    return text
