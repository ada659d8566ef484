"""Number formats, as TEXT uses them: plain digits, thousands, percent, exponent, dates and times.

The grammar is that of ECMA-376 part 1, section 18.8.31. What depends on the country (currency
signs in brackets, month names of other languages) or on the width of a cell is refused.
"""

from __future__ import annotations

import re
from datetime import timedelta
from decimal import ROUND_HALF_UP, Decimal

from xlroot.errors import Unsupported
from xlroot.texts import FIRST_SERIAL, general_format
from xlroot.values import Fault

_TOKEN = re.compile(r'"([^"]*)"|\\(.)|(\[[^\]]*\])|(AM/PM|A/P)|(.)', re.DOTALL)
_NUMERIC = re.compile(
    r"^(?P<whole>[#0?,]*)(?:\.(?P<part>[#0?]*))?(?:[eE](?P<sign>[+-])(?P<exp>0+))?$"
)
_DATE_PART = re.compile(r"(y+|m+|d+|h+|s+(?:\.0+)?|AM/PM|A/P)", re.IGNORECASE)


def formatted(number: float, code: str) -> str | Fault:
    """The number in the format; Unsupported for what cannot be told faithfully."""
    if code.strip().casefold() in ("general", "@"):
        return general_format(number)
    sections = _sections(code)
    if len(sections) > 1 and number < 0.0:
        return _section(-number, sections[1])
    if len(sections) > 2 and number == 0.0:
        return _section(number, sections[2])
    return _section(number, sections[0])


def _sections(code: str) -> list[str]:
    parts, current, quoted = [], "", False
    for letter in code:
        if letter == '"':
            quoted = not quoted
        if letter == ";" and not quoted:
            parts.append(current)
            current = ""
        else:
            current += letter
    return [*parts, current]


def _refuse(code: str) -> Unsupported:
    return Unsupported(f'formats a number as "{code}", which is not evaluated')


def _section(number: float, code: str) -> str | Fault:
    letters, literal = "", []
    for text, escaped, bracket, _, plain in _TOKEN.findall(code):
        if bracket:
            if bracket.casefold() in ("[h]", "[m]", "[s]", "[hh]", "[mm]", "[ss]"):
                raise _refuse(code)
            raise _refuse(code)
        if text or escaped:
            letters += "\x00"
            literal.append(text or escaped)
        else:
            letters += plain or "AM/PM"
    bare = letters.replace("\x00", "")
    if re.search(r"[ymdhs]", bare, re.IGNORECASE) and not re.search(
        r"[#0?]", bare.replace(".0", "")
    ):
        return _filled(_moment(number, letters, code), literal)
    return _filled(_digits(number, letters, code), literal)


def _filled(text: str | Fault, literal: list[str]) -> str | Fault:
    if isinstance(text, Fault):
        return text
    for each in literal:
        text = text.replace("\x00", each, 1)
    return text


def _digits(number: float, letters: str, code: str) -> str:
    match = re.search(r"[#0?][#0?,.]*(?:[eE][+-]0+)?", letters)
    if match is None:
        if letters.strip("\x00 ()-+%:/") == "":
            return letters
        raise _refuse(code)
    before, core, after = letters[: match.start()], match[0], letters[match.end() :]
    if re.search(r"[^\x00 ()+\-%:$€£/_!]", before + after) or "_" in before + after:
        raise _refuse(code)
    shape = _NUMERIC.match(core)
    if shape is None or "?" in core:
        raise _refuse(code)
    value = Decimal(f"{abs(number):.14e}").scaleb(2 * (before + after).count("%"))
    shown = _scientific(value, shape) if shape["exp"] else _fixed(value, shape)
    negative = number < 0.0 and any(digit in "123456789" for digit in shown)
    return ("-" if negative else "") + before + shown + after


def _fixed(value: Decimal, shape: re.Match[str]) -> str:
    whole, part = shape["whole"] or "", shape["part"] or ""
    thousands = len(whole) - len(whole.rstrip(","))
    value = value.scaleb(-3 * thousands)
    whole = whole.rstrip(",")
    rounded = value.quantize(Decimal(1).scaleb(-len(part)), rounding=ROUND_HALF_UP)
    digits, _, decimals = f"{rounded:f}".partition(".")
    least = whole.count("0")
    digits = digits.lstrip("0").rjust(least, "0")
    if "," in whole:
        digits = _grouped(digits)
    while decimals and part[len(decimals) - 1] == "#" and decimals.endswith("0"):
        decimals = decimals[:-1]
    point = "." if shape["part"] is not None else ""
    return f"{digits}{point}{decimals}"


def _grouped(digits: str) -> str:
    return re.sub(r"(?<=\d)(?=(?:\d{3})+$)", ",", digits)


def _scientific(value: Decimal, shape: re.Match[str]) -> str:
    part = shape["part"] or ""
    places = max(1, (shape["whole"] or "").count("0") + (shape["whole"] or "").count("#"))
    if places != 1:
        raise Unsupported("formats a number with several digits before an exponent")
    exponent = value.adjusted() if value else 0
    step = Decimal(1).scaleb(-len(part))
    mantissa = value.scaleb(-exponent).quantize(step, rounding=ROUND_HALF_UP)
    if mantissa >= 10:
        exponent += 1
        mantissa = value.scaleb(-exponent).quantize(step, rounding=ROUND_HALF_UP)
    sign = "-" if exponent < 0 else "+" if shape["sign"] == "+" else ""
    return f"{mantissa:f}E{sign}{abs(exponent):0{len(shape['exp'])}d}"


_DAYS = "Monday Tuesday Wednesday Thursday Friday Saturday Sunday".split()
_MONTHS = (
    "January February March April May June July August September October November December".split()
)


def _moment(number: float, letters: str, code: str) -> str | Fault:
    if number < 0.0 or number >= 2_958_466.0:
        return Fault.VALUE
    if 0.0 < number < 61.0 and re.search(r"[yd]", letters, re.IGNORECASE):
        raise _refuse(code)
    day = FIRST_SERIAL + timedelta(days=int(number))
    fraction = re.search(r"s\.(0+)", letters)
    places = len(fraction[1]) if fraction else 0
    clock = Decimal(repr(number % 1.0)) * 86400
    seconds = clock.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_UP)
    if seconds >= 86400:
        seconds -= 86400
        day += timedelta(days=1)
    half = "AM/PM" in letters.upper()
    hour, rest = divmod(int(seconds), 3600)
    minute, second = divmod(rest, 60)
    parts = _DATE_PART.split(letters)
    out, last = "", ""
    for index, part in enumerate(parts):
        if index % 2 == 0:
            if re.search(r"[^\x00\s\-/:.,()]", part):
                raise _refuse(code)
            out += part
            continue
        kind = part[0].lower()
        following = parts[index + 2][0].lower() if index + 2 < len(parts) else ""
        if kind == "m" and (last == "h" or following == "s") and len(part) <= 2:
            out += f"{minute:0{len(part)}d}"
        elif kind == "m":
            name = _MONTHS[day.month - 1]
            out += (
                f"{day.month:0{len(part)}d}"
                if len(part) <= 2
                else name[:3]
                if len(part) == 3
                else name
                if len(part) == 4
                else name[0]
            )
        elif kind == "y":
            out += f"{day.year % 100:02d}" if len(part) <= 2 else f"{day.year:04d}"
        elif kind == "d":
            name = _DAYS[day.weekday()]
            out += (
                f"{day.day:0{len(part)}d}"
                if len(part) <= 2
                else name[:3]
                if len(part) == 3
                else name
            )
        elif kind == "h":
            shown = (hour % 12 or 12) if half else hour
            out += f"{shown:0{min(2, len(part))}d}"
        elif kind == "s":
            whole = part.partition(".")[0]
            out += f"{second:0{min(2, len(whole))}d}"
            if places:
                out += "." + f"{seconds % 1:.{places}f}".partition(".")[2]
        else:
            out += "AM" if hour < 12 else "PM"
        last = kind
    return out
