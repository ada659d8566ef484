"""Texts: parts, joins, searches, conversions. OpenFormula (OASIS ODF 1.3 part 4), section 6.20."""

from __future__ import annotations

import re
from decimal import ROUND_HALF_UP, Decimal

from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.matching import pattern
from xlroot.functions.numberformat import formatted
from xlroot.texts import read_number
from xlroot.values import Fault, Grid, Operand, Value, to_text

LONGEST = 32_767
"""Letters that a cell holds; a longer text is #VALUE!."""


def _fits(text: str) -> str | Fault:
    return text if len(text) <= LONGEST else Fault.VALUE


@worksheet(("CONCATENATE", "CONCAT"), Takes.RAW, repeats=1, gives=Gives.TEXT)
def concatenate(*operands: Operand) -> str | Fault:
    """All texts joined."""
    out = []
    for operand in operands:
        for value in operand.flat() if isinstance(operand, Grid) else (operand,):
            text = to_text(value)
            if isinstance(text, Fault):
                return text
            out.append(text)
    return _fits("".join(out))


@worksheet("TEXTJOIN", Takes.TEXT, Takes.LOGICAL, Takes.RAW, repeats=1, gives=Gives.TEXT)
def textjoin(between: str, skip: bool, *operands: Operand) -> str | Fault:  # noqa: FBT001
    """All texts joined with another between them, empty ones skipped or not."""
    out = []
    for operand in operands:
        for value in operand.flat() if isinstance(operand, Grid) else (operand,):
            text = to_text(value)
            if isinstance(text, Fault):
                return text
            if text or not skip:
                out.append(text)
    return _fits(between.join(out))


@worksheet("LEFT", Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.TEXT)
def left(text: str, count: float = 1.0) -> str | Fault:
    """The first letters."""
    return text[: int(count)] if count >= 0.0 else Fault.VALUE


@worksheet("RIGHT", Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.TEXT)
def right(text: str, count: float = 1.0) -> str | Fault:
    """The last letters."""
    if count < 0.0:
        return Fault.VALUE
    return text[max(0, len(text) - int(count)) :]


@worksheet("MID", Takes.TEXT, Takes.NUMBER, Takes.NUMBER, gives=Gives.TEXT)
def mid(text: str, start: float, count: float) -> str | Fault:
    """Letters from a place on, counted from 1."""
    if start < 1.0 or count < 0.0:
        return Fault.VALUE
    first = int(start) - 1
    return text[first : first + int(count)]


@worksheet("LEN", Takes.TEXT, gives=Gives.NUMBER)
def len_(text: str) -> float:
    """How many letters."""
    return float(len(text))


@worksheet("UPPER", Takes.TEXT, gives=Gives.TEXT)
def upper(text: str) -> str:
    """In capitals."""
    return text.upper()


@worksheet("LOWER", Takes.TEXT, gives=Gives.TEXT)
def lower(text: str) -> str:
    """In small letters."""
    return text.lower()


@worksheet("PROPER", Takes.TEXT, gives=Gives.TEXT)
def proper(text: str) -> str:
    """A capital at the beginning of every word."""
    return re.sub(r"[^\W\d_]+", lambda found: found[0][0].upper() + found[0][1:].lower(), text)


@worksheet("TRIM", Takes.TEXT, gives=Gives.TEXT)
def trim(text: str) -> str:
    """Without spaces around it and with single ones inside."""
    return " ".join(part for part in text.split(" ") if part)


@worksheet("CLEAN", Takes.TEXT, gives=Gives.TEXT)
def clean(text: str) -> str:
    """Without control characters."""
    return "".join(letter for letter in text if ord(letter) >= 32)


@worksheet("REPT", Takes.TEXT, Takes.NUMBER, gives=Gives.TEXT)
def rept(text: str, count: float) -> str | Fault:
    """Repeated."""
    if count < 0.0 or count * max(1, len(text)) > LONGEST:
        return Fault.VALUE
    return text * int(count)


@worksheet("REPLACE", Takes.TEXT, Takes.NUMBER, Takes.NUMBER, Takes.TEXT, gives=Gives.TEXT)
def replace(text: str, start: float, count: float, new: str) -> str | Fault:
    """With letters from a place on replaced."""
    if start < 1.0 or count < 0.0:
        return Fault.VALUE
    first = int(start) - 1
    return _fits(text[:first] + new + text[first + int(count) :])


@worksheet(
    "SUBSTITUTE", Takes.TEXT, Takes.TEXT, Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.TEXT
)
def substitute(text: str, old: str, new: str, which: float | None = None) -> str | Fault:
    """With every occurrence, or one of them, replaced."""
    if which is not None and which < 1.0:
        return Fault.VALUE
    if not old:
        return text
    if which is None:
        return _fits(text.replace(old, new))
    place = -1
    for _ in range(int(which)):
        place = text.find(old, place + 1)
        if place < 0:
            return text
    return _fits(text[:place] + new + text[place + len(old) :])


@worksheet("FIND", Takes.TEXT, Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def find(part: str, text: str, start: float = 1.0) -> float | Fault:
    """The place of a part, case counting."""
    if not 1.0 <= start <= len(text) + 1.0:
        return Fault.VALUE
    place = text.find(part, int(start) - 1)
    return Fault.VALUE if place < 0 else place + 1.0


@worksheet("SEARCH", Takes.TEXT, Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def search(part: str, text: str, start: float = 1.0) -> float | Fault:
    """The place of a part without case, wildcards allowed."""
    if not 1.0 <= start <= len(text) + 1.0:
        return Fault.VALUE
    wild = pattern(part) or re.compile(re.escape(part), re.IGNORECASE)
    found = wild.search(text, int(start) - 1)
    return Fault.VALUE if found is None else found.start() + 1.0


@worksheet("EXACT", Takes.TEXT, Takes.TEXT, gives=Gives.LOGICAL)
def exact(a: str, b: str) -> bool:
    """Whether two texts are the same to the letter."""
    return a == b


@worksheet("CHAR", Takes.NUMBER, gives=Gives.TEXT)
def char(code: float) -> str | Fault:
    """The letter of a code from 1 to 255 (Windows-1252)."""
    if not 1.0 <= code < 256.0:
        return Fault.VALUE
    try:
        return bytes([int(code)]).decode("cp1252")
    except UnicodeDecodeError:
        return Fault.VALUE


@worksheet("CODE", Takes.TEXT, gives=Gives.NUMBER)
def code(text: str) -> float | Fault:
    """The code of the first letter (Windows-1252)."""
    if not text:
        return Fault.VALUE
    try:
        return float(text[0].encode("cp1252")[0])
    except UnicodeEncodeError:
        return 63.0


@worksheet("UNICHAR", Takes.NUMBER, gives=Gives.TEXT)
def unichar(code: float) -> str | Fault:
    """The letter of a Unicode code point."""
    point = int(code)
    if not 1 <= point <= 0x10FFFF or 0xD800 <= point <= 0xDFFF:
        return Fault.VALUE
    return chr(point)


@worksheet("UNICODE", Takes.TEXT, gives=Gives.NUMBER)
def unicode(text: str) -> float | Fault:
    """The Unicode code point of the first letter."""
    return float(ord(text[0])) if text else Fault.VALUE


@worksheet("VALUE", Takes.SCALAR)
def value(given: Value) -> Operand:
    """The number that a text reads as."""
    if isinstance(given, bool):
        return Fault.VALUE
    if isinstance(given, str):
        return read_number(given)
    return 0.0 if given is None else given


@worksheet("NUMBERVALUE", Takes.TEXT, Takes.TEXT, Takes.TEXT, optional=2, gives=Gives.NUMBER)
def numbervalue(text: str, point: str = ".", group: str = ",") -> float | Fault:
    """The number that a text reads as with the separators stated."""
    if not point or not group:
        return Fault.VALUE
    stripped = "".join(text.split())
    whole, mark, rest = stripped.partition(point[0])
    if group[0] in rest:
        return Fault.VALUE
    plain = whole.replace(group[0], "") + ("." + rest if mark else "")
    percents = len(plain) - len(plain.rstrip("%"))
    number = read_number(plain.rstrip("%")) if plain.rstrip("%") else 0.0
    return number if isinstance(number, Fault) else number / 100.0**percents


@worksheet("TEXT", Takes.SCALAR, Takes.TEXT, gives=Gives.TEXT)
def text(given: Value, code: str) -> str | Fault:
    """A number in a number format; a text as it is."""
    if isinstance(given, str):
        number = read_number(given)
        if isinstance(number, Fault):
            return given
        given = number
    if isinstance(given, bool):
        return "TRUE" if given else "FALSE"
    return formatted(0.0 if given is None else float(given), code)  # type: ignore[arg-type]


@worksheet("FIXED", Takes.NUMBER, Takes.NUMBER, Takes.LOGICAL, optional=2, gives=Gives.TEXT)
def fixed(x: float, digits: float = 2.0, plain: bool = False) -> str | Fault:  # noqa: FBT001, FBT002
    """A number with digits after the point, thousands separated by commas unless told not to."""
    places = int(digits)
    if not -127 <= places <= 127:
        return Fault.VALUE
    step = Decimal(1).scaleb(-places)
    rounded = Decimal(f"{x:.14e}").quantize(step, rounding=ROUND_HALF_UP)
    shown = f"{rounded:f}" if plain else f"{rounded:,f}"
    return shown.removeprefix("-") if not rounded else shown


@worksheet("T", Takes.RAW)
def t(operand: Operand) -> Operand:
    """A text as it is, a fault as it is, anything else as the empty text."""
    first = operand.rows[0][0] if isinstance(operand, Grid) else operand
    return first if isinstance(first, (str, Fault)) else ""
