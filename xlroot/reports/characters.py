"""Characters: what a stream can carry, how wide it is, and what stands in for the rest.

Text from a workbook is never passed on with its control characters: a label must not move the
cursor or change colours.
"""

from __future__ import annotations

import unicodedata
from functools import cache

_STAND_INS = {
    "±": "+/-",
    "…": "...",
    "·": "*",
    "–": "-",
    "—": "-",
    "−": "-",
    "─": "-",
    "│": "|",
    "×": "x",
    "⋅": "*",
    "°": "deg ",
    "Ω": "Ohm",
    "\N{OHM SIGN}": "Ohm",
    "µ": "u",
    "μ": "u",
    "Å": "Angstrom",
    "√": "sqrt",
    "≤": "<=",
    "≥": ">=",
    "≠": "/=",
    "≈": "~",
    "∞": "inf",
    "“": '"',
    "”": '"',
    "„": '"',
    "‘": "'",
    "’": "'",
    "ß": "ss",
    "ø": "o",
    "Ø": "O",
    "æ": "ae",
    "Æ": "AE",
    "€": "EUR",
    "\N{NO-BREAK SPACE}": " ",
    "\N{NARROW NO-BREAK SPACE}": " ",
}
"""What to write for common signs where the stream's encoding lacks them."""

_CONTROL_PICTURES = 0x2400


def visible(text: str) -> str:
    """The text in one line, with a picture for every control character."""
    if text.isprintable():
        return text
    return "".join(map(_visible, text.replace("\r\n", "\n")))


@cache
def _visible(character: str) -> str:
    if character.isprintable():
        return character
    if character in "\n\r\t" or unicodedata.category(character) == "Zs":
        return " "
    code = ord(character)
    if code < 0x20:
        return chr(_CONTROL_PICTURES + code)
    return "␡" if code == 0x7F else "\N{REPLACEMENT CHARACTER}"


def carries(encoding: str, text: str) -> bool:
    """Whether a stream of that encoding can hold the text."""
    try:
        text.encode(encoding)
    except (UnicodeEncodeError, LookupError):
        return False
    return True


def spelled(text: str, encoding: str) -> str:
    """The text in one line, in characters that the encoding has."""
    shown = visible(text)
    if carries(encoding, shown):
        return shown
    return "".join(_spelled(character, encoding) for character in shown)


@cache
def _spelled(character: str, encoding: str) -> str:
    if carries(encoding, character):
        return character
    known = _STAND_INS.get(character)
    if known is not None:
        return known
    name = unicodedata.name(character, "")
    words = name.split()
    if words[:1] == ["GREEK"] and "LETTER" in words:
        letter = words[words.index("LETTER") + 1].lower()
        return letter.capitalize() if "CAPITAL" in words else letter
    bare = "".join(
        part for part in unicodedata.normalize("NFKD", character) if not unicodedata.combining(part)
    )
    return bare if bare and carries(encoding, bare) else "?"


def width(text: str) -> int:
    """How many columns the text takes in a terminal (Unicode Standard Annex 11)."""
    if text.isascii():
        return len(text)
    return sum(map(_width, text))


@cache
def _width(character: str) -> int:
    if unicodedata.combining(character) or unicodedata.category(character) in ("Cf", "Mn", "Me"):
        return 0
    return 2 if unicodedata.east_asian_width(character) in "WF" else 1
