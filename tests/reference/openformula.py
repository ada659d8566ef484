"""The published OpenFormula cases as formulas of a workbook.

The cases are facts from the OASIS OpenDocument TC's OpenFormula draft (source line in the JSON
file); OpenFormula writes `;` between arguments, `[.B3]` for a reference, `|` between the rows of
an array, `~` for a union and `!` for an intersection.
"""

from __future__ import annotations

import json
import re
from functools import cache
from pathlib import Path
from typing import NamedTuple

from xlroot.book import Book
from xlroot.hosts.memory import Content, book_of

FILE = Path(__file__).with_name("openformula_cases.json")

_DATE = re.compile(r"(\d{4})-(\d\d)-(\d\d)(?:T(\d\d):(\d\d):(\d\d))?")
_TIME = re.compile(r"(\d\d):(\d\d):(\d\d)")
_WORDED = re.compile(r"\d{1,2} [A-Z][a-z]{2} \d{4}")


class Case(NamedTuple):
    """One expression, translated, and the result that the draft gives."""

    number: int
    section: str
    formula: str
    result: str


def translated(expression: str) -> str:
    """An OpenFormula expression in a workbook's syntax."""
    out, depth, position = "", 0, 0
    text = expression.replace("“", '"').replace("”", '"')
    while position < len(text):
        letter = text[position]
        if letter == '"':
            end = position + 1
            while end < len(text) and (text[end] != '"' or text[end + 1 : end + 2] == '"'):
                end += 2 if text[end] == '"' else 1
            out += text[position : end + 1]
            position = end + 1
            continue
        if letter == "#":
            end = position + 1
            while end < len(text) and (text[end].isalnum() or text[end] in "/!?"):
                end += 1
            out += text[position:end]
            position = end
            continue
        if letter == "[":
            end = text.index("]", position)
            out += text[position + 1 : end].replace("$Data.", "").replace(".", "")
            position = end + 1
            continue
        depth += (letter == "{") - (letter == "}")
        swaps = {";": ","} if not depth else {";": ",", "|": ";"}
        swaps |= {"~": ",", "!": " "}
        out += swaps.get(letter, letter)
        position += 1
    return re.sub(r"(?<=[A-Za-z0-9]) \(", "(", out)


@cache
def cases() -> tuple[Case, ...]:
    """All published cases."""
    found = json.loads(FILE.read_text(encoding="utf-8"))["cases"]
    return tuple(
        Case(number, each["section"], translated(each["expr"]), each["result"])
        for number, each in enumerate(found)
    )


def content(text: str) -> Content:
    """What a data table's cell holds."""
    from xlroot.functions import find

    stripped = text.strip()
    if not stripped:
        return None
    if stripped.startswith("="):
        return translated(stripped.replace("= ", "="))
    if stripped in ("TRUE", "FALSE"):
        return stripped == "TRUE"
    date, time = _DATE.fullmatch(stripped), _TIME.fullmatch(stripped)
    make_date, make_time = find("DATE"), find("TIME")
    assert make_date is not None
    assert make_time is not None
    if date:
        year, month, day, *clock = (float(part or 0) for part in date.groups())
        serial, fraction = make_date.rule(year, month, day), make_time.rule(*clock)
        assert isinstance(serial, float)
        assert isinstance(fraction, float)
        return serial + fraction
    if time:
        moment = make_time.rule(*(float(part) for part in time.groups()))
        assert isinstance(moment, float)
        return moment
    if _WORDED.fullmatch(stripped):
        value = find("DATEVALUE")
        assert value is not None
        day_number = value.rule(stripped)
        assert isinstance(day_number, float)
        return day_number
    try:
        return float(stripped)
    except ValueError:
        return stripped


@cache
def data() -> Book:
    """The draft's data tables in one sheet."""
    cells: dict[str, Content] = {}
    for table in json.loads(FILE.read_text(encoding="utf-8"))["tables"]:
        columns = table[0][1:]
        for row in table[1:]:
            for column, text in zip(columns, row[1:], strict=False):
                cells[f"{column}{row[0]}"] = content(text)
    return book_of({address: each for address, each in cells.items() if each is not None})
