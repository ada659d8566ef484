"""Sheets of linked workbooks: the values that a host saved of them.

ECMA-376 part 1, section 18.14: an external link part lists sheets and, for the cells that formulas
use, their last values. A cell that is not listed has no known value.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from xlroot.book import UNSAVED, Formula, Unsaved
from xlroot.cells import parse_address
from xlroot.errors import AddressError
from xlroot.hosts.cellxml import Place, unescaped
from xlroot.hosts.package import Package, local
from xlroot.values import FAULTS, Fault, Value


class LinkedValues(Mapping[Place, "Value | Unsaved"]):
    """Saved values of a linked sheet; every other cell is unsaved rather than blank."""

    def __init__(self, known: dict[Place, Value]) -> None:
        self._known = known

    def __getitem__(self, place: Place) -> Value | Unsaved:
        return self._known.get(place, UNSAVED)

    def __contains__(self, place: object) -> bool:
        return True

    def __iter__(self) -> Iterator[Place]:
        return iter(self._known)

    def __len__(self) -> int:
        return len(self._known)


class LinkedSheet:
    """A sheet of another workbook, as far as its values were saved."""

    formulas: Mapping[Place, Formula] = {}
    arrays: tuple[Formula, ...] = ()

    def __init__(self, known: dict[Place, Value]) -> None:
        self.values = LinkedValues(known)
        rows = [row for row, _ in known] or [1]
        self.used = max(rows), max([column for _, column in known] or [1])

    def mentions(self, text: str) -> bool:
        del text
        return False

    def mentioning(self, text: str) -> tuple[Place, ...]:
        del text
        return ()


def linked_sheets(package: Package, part: str, number: int) -> dict[str, LinkedSheet]:
    """The sheets of one linked workbook under names such as `[1]Data`."""
    names: list[str] = []
    cells: dict[int, dict[Place, Value]] = {}
    sheet, place, kind, text = 0, "", "n", [""]

    def start(tag: str, attributes: dict[str, str]) -> None:
        nonlocal sheet, place, kind
        tag = local(tag)
        if tag == "sheetName":
            names.append(attributes.get("val", ""))
        elif tag == "sheetData":
            sheet = int(attributes.get("sheetId", "0"))
        elif tag == "cell":
            place, kind = attributes.get("r", ""), attributes.get("t", "n")
            text[0] = ""

    def end(tag: str) -> None:
        if local(tag) == "cell":
            try:
                address = parse_address(place)
            except AddressError:
                return
            cells.setdefault(sheet, {})[address] = _value(kind, text[0])

    def characters(data: str) -> None:
        text[0] += data.strip() if kind != "str" else data

    package.parse(part, start, end, characters)
    return {
        f"[{number}]{name}": LinkedSheet(cells.get(position, {}))
        for position, name in enumerate(names)
    }


def _value(kind: str, text: str) -> Value:
    if kind == "str":
        return unescaped(text)
    if kind == "b":
        return text in ("1", "true")
    if kind == "e":
        return FAULTS.get(text, Fault.UNKNOWN)
    try:
        return float(text)
    except ValueError:
        return None
