"""Texts: joins, parts, searches, letter case. OpenFormula (OASIS ODF 1.3 part 4), section 6.20.

Places count from 1 and numbers of letters are cut to whole ones. Letters are Unicode code points;
those beyond the basic plane, which Excel counts twice, are refused where they are counted.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.matching import pattern
from xlroot.values import Fault, Grid, Operand, Value, to_text

LONGEST = 32_767
"""Letters that a cell holds; a longer text is #VALUE!."""


def _fits(text: str) -> str | Fault:
    return text if len(text) <= LONGEST else Fault.VALUE


def counted(text: str) -> str:
    """The text, refused where hosts count its letters differently."""
    if not text.isascii() and any(letter > "\uffff" for letter in text):
        raise Unsupported("counts letters beyond U+FFFF, which hosts count as one or as two")
    return text


def _values(operands: tuple[Operand, ...], *, blanks_count: bool) -> Iterator[Value]:
    for operand in operands:
        if not isinstance(operand, Grid):
            yield operand
            continue
        if blanks_count and operand.is_cut:
            raise Unsupported("joins blank cells beyond the used ones; name the cells meant")
        yield from operand.flat()


@worksheet("CONCATENATE", Takes.TEXT, repeats=1, gives=Gives.TEXT)
def concatenate(*texts: str) -> str | Fault:
    """All texts joined, one of every argument."""
    return _fits("".join(texts))


@worksheet("CONCAT", Takes.RAW, repeats=1, gives=Gives.TEXT)
def concat(*operands: Operand) -> str | Fault:
    """All texts joined, every cell of a range."""
    return _joined("", operands, blanks_count=False)


@worksheet("TEXTJOIN", Takes.TEXT, Takes.LOGICAL, Takes.RAW, repeats=1, gives=Gives.TEXT)
def textjoin(between: str, skip: bool, *operands: Operand) -> str | Fault:  # noqa: FBT001
    """All texts joined with another between them, empty ones skipped or not."""
    return _joined(between, operands, blanks_count=not skip)


def _joined(between: str, operands: tuple[Operand, ...], *, blanks_count: bool) -> str | Fault:
    out = []
    for value in _values(operands, blanks_count=blanks_count):
        text = to_text(value)
        if isinstance(text, Fault):
            return text
        if text or blanks_count:
            out.append(text)
    return _fits(between.join(out))


@worksheet("LEFT", Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.TEXT)
def left(text: str, count: float = 1.0) -> str | Fault:
    """The first letters."""
    return counted(text)[: int(count)] if count >= 0.0 else Fault.VALUE


@worksheet("RIGHT", Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.TEXT)
def right(text: str, count: float = 1.0) -> str | Fault:
    """The last letters."""
    if count < 0.0:
        return Fault.VALUE
    return counted(text)[max(0, len(text) - int(count)) :]


@worksheet("MID", Takes.TEXT, Takes.NUMBER, Takes.NUMBER, gives=Gives.TEXT)
def mid(text: str, start: float, count: float) -> str | Fault:
    """Letters from a place on."""
    if start < 1.0 or count < 0.0:
        return Fault.VALUE
    first = int(start) - 1
    return counted(text)[first : first + int(count)]


@worksheet("LEN", Takes.TEXT, gives=Gives.NUMBER)
def length(text: str) -> float:
    """How many letters."""
    return float(len(counted(text)))


@worksheet("REPLACE", Takes.TEXT, Takes.NUMBER, Takes.NUMBER, Takes.TEXT, gives=Gives.TEXT)
def replace(text: str, start: float, count: float, new: str) -> str | Fault:
    """With letters from a place on replaced."""
    if start < 1.0 or count < 0.0:
        return Fault.VALUE
    first = int(start) - 1
    return _fits(counted(text)[:first] + new + text[first + int(count) :])


@worksheet(
    "SUBSTITUTE", Takes.TEXT, Takes.TEXT, Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.TEXT
)
def substitute(text: str, old: str, new: str, which: float | None = None) -> str | Fault:
    """With every occurrence, or one of them, replaced; case counts."""
    if which is not None and which < 1.0:
        return Fault.VALUE
    if not old:
        return text
    if which is None:
        return _fits(text.replace(old, new))
    pieces = text.split(old)
    number = int(which)
    if number >= len(pieces):
        return text
    return _fits(old.join(pieces[:number]) + new + old.join(pieces[number:]))


@worksheet("FIND", Takes.TEXT, Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def find(part: str, text: str, start: float = 1.0) -> float | Fault:
    """The place of a part, case counting."""
    if not 1.0 <= start < len(counted(text)) + 1.0:
        return _beyond(part, text, start)
    place = text.find(part, int(start) - 1)
    return Fault.VALUE if place < 0 else place + 1.0


@worksheet("SEARCH", Takes.TEXT, Takes.TEXT, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def search(part: str, text: str, start: float = 1.0) -> float | Fault:
    """The place of a part without case, wildcards allowed."""
    if not 1.0 <= start < len(counted(text)) + 1.0:
        return _beyond(part, text, start)
    wild = pattern(part) or re.compile(re.escape(part), re.IGNORECASE)
    found = wild.search(text, int(start) - 1)
    return Fault.VALUE if found is None else found.start() + 1.0


def _beyond(part: str, text: str, start: float) -> Fault:
    if not part.strip("*") and 1.0 <= start < len(text) + 2.0:
        raise Unsupported("looks for the empty text at a text's end, where hosts differ")
    return Fault.VALUE


@worksheet("EXACT", Takes.TEXT, Takes.TEXT, gives=Gives.LOGICAL)
def exact(a: str, b: str) -> bool:
    """Whether two texts are the same to the letter."""
    return a == b


@worksheet("UPPER", Takes.TEXT, gives=Gives.TEXT)
def upper(text: str) -> str:
    """In capitals; letters without a single capital stay."""
    return "".join(map(_capital, text))


@worksheet("LOWER", Takes.TEXT, gives=Gives.TEXT)
def lower(text: str) -> str:
    """In small letters."""
    return "".join(map(_small, text))


@worksheet("PROPER", Takes.TEXT, gives=Gives.TEXT)
def proper(text: str) -> str:
    """A capital wherever letters begin, small letters after it."""
    return re.sub(
        r"([^\W\d_])([^\W\d_]*)",
        lambda found: _capital(found[1]) + "".join(map(_small, found[2])),
        text,
    )


def _capital(letter: str) -> str:
    return letter.upper() if len(letter.upper()) == 1 else letter


def _small(letter: str) -> str:
    return letter.lower() if len(letter.lower()) == 1 else letter


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
    if count < 0.0 or (text and count >= LONGEST + 1.0):
        return Fault.VALUE
    return _fits(text * int(count)) if text else ""


@worksheet("HYPERLINK", Takes.TEXT, Takes.SCALAR, optional=1)
def hyperlink(target: str, shown: Value = None) -> Operand:
    """What the link shows."""
    return target if shown is None else shown
