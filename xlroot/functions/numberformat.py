"""Number formats, as TEXT uses them: digits, thousands, percent, exponents, dates and times.

The grammar is that of ECMA-376 part 1, section 18.8.31. What depends on the country (brackets,
month names of other languages), on a cell's width, or on the host, is refused. Numbers are shown
from 15 significant digits, rounded half away from zero.
"""

from __future__ import annotations

import re
from decimal import ROUND_HALF_UP, Decimal, localcontext
from typing import NamedTuple

from xlroot.errors import Unsupported
from xlroot.functions.moments import shown_moment
from xlroot.texts import general_format
from xlroot.values import Fault

DIGITS = 700
"""Decimal digits that hold any float with any number of places."""

LONGEST_CODE = 255
"""Signs of a format that a cell can hold."""

_TOKEN = re.compile(r'"([^"]*)"|\\(.)|(;)|(General)|([^"\\;])', re.DOTALL | re.IGNORECASE)
_CORE = re.compile(r"(?:[#0?][#0?,]*)?(?:\.[#0?]*,*)?(?:[eE][+-]0+)?")
_SHAPE = re.compile(
    r"(?P<whole>[#0,]*)(?P<point>\.(?P<part>[#0]*)(?P<scale>,*))?"
    r"(?:[eE](?P<sign>[+-])(?P<exp>0+))?"
)
_AROUND = re.compile(r"[\x00 ()+\-%:$€£/!]*")
_DATE_LETTERS = re.compile(r"[ymdhs]", re.IGNORECASE)
_DIGIT_SIGNS = re.compile(r"[#0?]")


class _Section(NamedTuple):
    """One section of a format: its signs, \\0 for every literal text, and those texts."""

    signs: str
    literals: tuple[str, ...]


def formatted(number: float, code: str) -> str | Fault:
    """The number in the format; Unsupported for what cannot be told faithfully."""
    sections = _sections(code)
    numeric = sections[:3]
    if len(numeric) > 1 and number < 0.0:
        return _shown(-number, numeric[1], code)
    if len(numeric) > 2 and number == 0.0:
        return _shown(number, numeric[2], code)
    return _shown(number, numeric[0], code)


def shown_text(text: str, code: str) -> str:
    """A text in the format: as it is, or as the fourth section says."""
    sections = _sections(code)
    if len(sections) < 4 and all("@" not in each.signs for each in sections):
        return text
    section = sections[-1]
    if section.signs.replace("\x00", "").replace(" ", "").strip("@") or len(sections) not in (1, 4):
        raise _refusal(code)
    return _filled(section.signs, section.literals).replace("@", text)


def _refusal(code: str) -> Unsupported:
    return Unsupported(f'shows a value in the format "{code}", which is not evaluated')


def _sections(code: str) -> list[_Section]:
    if len(code) > LONGEST_CODE or not code.isprintable():
        raise _refusal(f"{code[:20]}…")
    found: list[tuple[str, list[str]]] = [("", [])]
    position = 0
    while position < len(code):
        match = _TOKEN.match(code, position)
        if match is None:
            raise _refusal(code)
        position = match.end()
        quoted, escaped, end, general, sign = match.groups()
        signs, literals = found[-1]
        if end:
            found.append(("", []))
        elif quoted is not None or escaped:
            found[-1] = (signs + "\x00", [*literals, quoted or escaped or ""])
        else:
            found[-1] = (signs + (sign or ("\x01" if general else "")), literals)
    if len(found) > 4:
        raise _refusal(code)
    return [_Section(signs, tuple(literals)) for signs, literals in found]


def _filled(signs: str, literals: tuple[str, ...]) -> str:
    pieces = signs.split("\x00")
    return pieces[0] + "".join(a + b for a, b in zip(literals, pieces[1:], strict=True))


def _shown(number: float, section: _Section, code: str) -> str | Fault:
    signs, literals = section
    if signs.strip() in ("\x01", "@") and not literals:
        return general_format(number)
    if re.search(r"[\[\]_*@\x01]", signs):
        raise _refusal(code)
    bare = signs.replace("\x00", "")
    if not bare and not literals and number == 0.0:
        return ""
    if _DATE_LETTERS.search(bare):
        if _DIGIT_SIGNS.search(re.sub(r"s\.0+", "s", bare)):
            raise _refusal(code)
        moment = shown_moment(number, signs, code)
        return moment if isinstance(moment, Fault) else _filled(moment, literals)
    return _filled(_digits(number, signs, code), literals)


def _digits(number: float, signs: str, code: str) -> str:
    start = re.search(r"[#0?]|\.[#0?]", signs)
    match = _CORE.match(signs, start.start()) if start else None
    if match is None:
        if number >= 0.0 and signs and _AROUND.fullmatch(signs):
            return signs
        raise _refusal(code)
    before, after = signs[: match.start()], signs[match.end() :]
    shape = _SHAPE.fullmatch(match[0])
    if shape is None or not _AROUND.fullmatch(before) or not _AROUND.fullmatch(after):
        raise _refusal(code)
    with localcontext(prec=DIGITS):
        value = Decimal(f"{abs(number):.14e}").scaleb(2 * (before + after).count("%"))
        shown = _scientific(value, shape, code) if shape["exp"] else _plain(value, shape)
    if number < 0.0:
        if not any(digit in "123456789" for digit in shown.partition("E")[0]):
            raise Unsupported("shows a negative number that rounds to 0, with or without its sign")
        return "-" + before + shown + after
    return before + shown + after


def _plain(value: Decimal, shape: re.Match[str]) -> str:
    whole, part = shape["whole"], shape["part"] or ""
    thousands = len(whole) - len(whole.rstrip(",")) + len(shape["scale"] or "")
    whole = whole.rstrip(",")
    scaled = value.scaleb(-3 * thousands)
    rounded = scaled.quantize(Decimal(1).scaleb(-len(part)), rounding=ROUND_HALF_UP)
    digits, _, decimals = f"{rounded:f}".partition(".")
    digits = digits.lstrip("0").rjust(whole.count("0"), "0")
    if "," in whole:
        digits = re.sub(r"(?<=\d)(?=(?:\d{3})+$)", ",", digits)
    while decimals and part[len(decimals) - 1] == "#" and decimals.endswith("0"):
        decimals = decimals[:-1]
    return f"{digits}{'.' if shape['point'] else ''}{decimals}"


def _scientific(value: Decimal, shape: re.Match[str], code: str) -> str:
    part = shape["part"] or ""
    if shape["whole"] not in ("0", "#") or "#" in part or shape["scale"]:
        raise _refusal(code)
    exponent = value.adjusted() if value else 0
    step = Decimal(1).scaleb(-len(part))
    mantissa = value.scaleb(-exponent).quantize(step, rounding=ROUND_HALF_UP)
    if mantissa >= 10:
        exponent += 1
        mantissa = value.scaleb(-exponent).quantize(step, rounding=ROUND_HALF_UP)
    sign = "-" if exponent < 0 else "+" if shape["sign"] == "+" else ""
    return f"{mantissa:f}E{sign}{abs(exponent):0{len(shape['exp'])}d}"
