"""Text that is safe in a workbook: names of sheets, labels, units in number formats."""

from __future__ import annotations

import re
from collections.abc import Sequence

from xlroot.record import Record
from xlroot.reports import contents
from xlroot.reports.characters import visible

LONGEST_NAME = 31
"""Characters of a sheet's name, counted as UTF-16 code units as spreadsheets do."""

LONGEST_TEXT = 1500
"""Characters of a text on a page; what is longer is cut, and says so."""

_FORBIDDEN = re.compile(r"[\[\]:*?/\\]")
_ESCAPE = re.compile(r"_(?=x[0-9A-Fa-f]{4}_)")


def page_names(records: Sequence[Record], taken: Sequence[str]) -> list[str]:
    """A name for every record's sheet: its number and what is sought; all different."""
    used = {name.casefold() for name in taken}
    names = []
    for number, record in enumerate(records, 1):
        name = sheet_name(f"{number} {contents.sought(record)}")
        assert name.casefold() not in used, "names begin with different numbers"
        used.add(name.casefold())
        names.append(name)
    return names


def sheet_name(text: str) -> str:
    """The text as a sheet may be called: no []:*?/\\, no quote at an end, at most 31 characters."""
    allowed = " ".join(_FORBIDDEN.sub(" ", visible(text)).split())
    while len(allowed.encode("utf-16-le")) // 2 > LONGEST_NAME:
        allowed = allowed[:-1]
    return allowed.strip(" '") or "page"


def printable(text: str, longest: int = LONGEST_TEXT) -> str:
    """The text in one line without control characters, cut where it is very long."""
    shown = visible(text)
    if len(shown) > longest:
        shown = f"{shown[:longest]} … ({len(shown) - longest:,} more characters)"
    return shown


def stored(text: str) -> str:
    """The text as the file format stores it: `_x000D_` in it is no escape (ECMA-376 part 1,
    section 22.4.2.4)."""
    return _ESCAPE.sub("_x005F_", text)


def unit_suffix(unit: str) -> str:
    """The unit as the tail of a number format, quoted so that no letter in it is a code."""
    shown = printable(unit.strip(), 40).replace('"', "''")
    return f'" {shown}"' if shown else ""
