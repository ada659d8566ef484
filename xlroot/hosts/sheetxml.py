"""One sheet of a saved workbook, read in a single pass over its XML when first asked.

ECMA-376 part 1, section 18.3.1: cells with formulas and saved values, shared and array formulas.
Producers differ: prefixes on tags, cells without an address, inline strings, empty formulas; all
of that is read. Shared strings are looked up only when a text is asked for.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

from xlroot.book import UNSAVED, Formula, Unsaved
from xlroot.cells import Block, Cell, column_number
from xlroot.errors import BookError
from xlroot.hosts.cellxml import Cells, Place, Raw, read_cells, unescaped
from xlroot.hosts.package import Package, local
from xlroot.values import FAULTS, Fault, Value

_DATE = re.compile(r"(\d{4})-(\d\d)-(\d\d)(?:T(\d\d):(\d\d)(?::(\d\d(?:\.\d+)?))?)?Z?")
_LETTERS = re.compile(r"([A-Za-z]{1,3})(\d+)")


@dataclass(frozen=True)
class SavedSheet:
    """A sheet of a saved workbook; `part` is None for a chart sheet, which holds no cells."""

    name: str
    package: Package
    part: str | None
    strings: Callable[[], Sequence[str]]
    starts_1904: bool = False

    @cached_property
    def _bytes(self) -> bytes:
        return b"" if self.part is None else self.package.read(self.part)

    @cached_property
    def cells(self) -> Cells:
        """Every cell as it stands in the XML."""
        if self.part is None:
            return Cells({})
        return read_cells(self.package, self.part, self._bytes)

    @cached_property
    def formulas(self) -> Mapping[Place, Formula]:
        """Formulas by row and column, bound to their text when asked for."""
        return _Formulas(self)

    @cached_property
    def _masters(self) -> dict[str, Formula]:
        """Shared formulas by their index."""
        found: dict[str, Formula] = {}
        for place in self.cells.with_formula_kind("shared"):
            raw = self.cells[place]
            text = (raw.formula or "").strip()
            if raw.shared and text:
                found.setdefault(raw.shared, Formula(_bare(text), Cell(self.name, *place)))
        return found

    def formula_of(self, place: Place) -> Formula | None:
        """The formula in a cell, or None for an empty formula element."""
        raw = self.cells[place]
        text = (raw.formula or "").strip()
        home = Cell(self.name, *place)
        if raw.formula_kind == "shared" and raw.shared and not text:
            return self._masters.get(raw.shared)
        if raw.formula_kind == "dataTable":
            return Formula("TABLE()", home)
        if not text:
            return None
        block = None
        if raw.formula_kind == "array":
            block = self._block(raw.formula_range or f"{_address(place)}", home)
        return Formula(_bare(text), home, block)

    def _block(self, text: str, home: Cell) -> Block:
        corners = [_LETTERS.fullmatch(each) for each in text.replace("$", "").split(":")]
        first, last = corners[0], corners[-1]
        if first is None or last is None:
            return Block.of(home)
        return Block(
            self.name,
            int(first[2]),
            column_number(first[1]),
            int(last[2]),
            column_number(last[1]),
        )

    @cached_property
    def values(self) -> Mapping[Place, Value | Unsaved]:
        """Saved values by row and column, formula cells included."""
        return _Values(self)

    @cached_property
    def used(self) -> tuple[int, int]:
        """Last row and column that hold anything."""
        rows = max((row for row, _ in self.cells), default=1)
        return rows, max((column for _, column in self.cells), default=1)

    @cached_property
    def arrays(self) -> tuple[Formula, ...]:
        """Array formulas that fill more than one cell."""
        found = (self.formula_of(place) for place in self.cells.with_formula_kind("array"))
        return tuple(
            each for each in found if each and each.block is not None and not each.block.is_cell
        )

    def mentions(self, text: str) -> bool:
        """Whether the sheet's XML contains the text, ignoring case."""
        if self._bytes[:2] in (b"\xff\xfe", b"\xfe\xff"):
            return True
        return re.search(re.escape(text.encode()), self._bytes, re.IGNORECASE) is not None

    def mentioning(self, text: str) -> Iterator[Place]:
        """Cells whose formula, or the formula they share, may contain the text."""
        return self.cells.mentioning(text)

    def value_of(self, raw: Raw) -> Value | Unsaved:
        """A cell's saved value."""
        text = raw.value
        if text is None or (text == "" and raw.kind not in ("str", "inlineStr", "s")):
            if raw.formula and raw.kind == "str":
                return ""
            return UNSAVED if raw.formula is not None else None
        if raw.kind in ("n", ""):
            return _number(text, self)
        if raw.kind == "s":
            return self._shared_string(text)
        if raw.kind in ("str", "inlineStr"):
            return unescaped(text)
        if raw.kind == "b":
            return text.strip() in ("1", "true")
        if raw.kind == "e":
            return FAULTS.get(text.strip(), Fault.UNKNOWN)
        if raw.kind == "d":
            return _serial(text.strip(), 1462.0 if self.starts_1904 else 0.0)
        raise BookError(f"{self.package.path.name}: a cell of {self.name} is of type {raw.kind}")

    def _shared_string(self, text: str) -> str:
        strings = self.strings()
        try:
            return strings[int(text)]
        except (ValueError, IndexError):
            raise BookError(
                f"{self.package.path.name} is damaged: {self.name} refers to a missing text {text}"
            ) from None


class _Values(Mapping[Place, "Value | Unsaved"]):
    """Saved values, converted when asked for."""

    def __init__(self, sheet: SavedSheet) -> None:
        self._sheet = sheet
        self._known: dict[Place, Value | Unsaved] = {}

    def __getitem__(self, place: Place) -> Value | Unsaved:
        if place not in self._known:
            self._known[place] = self._sheet.value_of(self._sheet.cells[place])
        return self._known[place]

    def __contains__(self, place: object) -> bool:
        return self._sheet.cells.holds_something(place)

    def __iter__(self) -> Iterator[Place]:
        return filter(self._sheet.cells.holds_something, self._sheet.cells)

    def __len__(self) -> int:
        return sum(1 for _ in self)


class _Formulas(Mapping[Place, Formula]):
    """Formulas, read when asked for."""

    def __init__(self, sheet: SavedSheet) -> None:
        self._sheet = sheet
        self._places = sheet.cells.with_formula
        self._known: dict[Place, Formula | None] = {}

    def __getitem__(self, place: Place) -> Formula:
        if place not in self._places:
            raise KeyError(place)
        if place not in self._known:
            self._known[place] = self._sheet.formula_of(place)
        found = self._known[place]
        if found is None:
            raise KeyError(place)
        return found

    def __contains__(self, place: object) -> bool:
        return place in self._places and self.get(place) is not None

    def __iter__(self) -> Iterator[Place]:
        return (place for place in self._places if place in self)

    def __len__(self) -> int:
        return len(self._places)


def _address(place: Place) -> str:
    return Cell("", *place).address


def _bare(text: str) -> str:
    return unescaped(text).lstrip("=") if text.startswith("=") else unescaped(text)


def _number(text: str, sheet: SavedSheet) -> float:
    try:
        return float(text)
    except ValueError:
        raise BookError(
            f"{sheet.package.path.name}: {sheet.name} holds {text!r} where a number is due"
        ) from None


def _serial(text: str, offset: float) -> Value:
    """An ISO 8601 date as the number of days since the end of 1899 (section 18.17.4)."""
    from datetime import datetime

    match = _DATE.fullmatch(text)
    if match is None:
        return text
    year, month, day, hour, minute, second = match.groups()
    days = (datetime(int(year), int(month), int(day)) - datetime(1899, 12, 30)).days
    clock = int(hour or 0) * 3600 + int(minute or 0) * 60 + float(second or 0)
    return float(days) - offset + clock / 86400.0


def shared_strings(package: Package, part: str) -> list[str]:
    """The texts of the shared string table, runs joined, readings in phonetic script left out."""
    strings: list[str] = []
    pieces: list[str] = []
    inside = phonetic = False

    def start(tag: str, _: dict[str, str]) -> None:
        nonlocal inside, phonetic
        tag = local(tag)
        if tag == "si":
            pieces.clear()
        elif tag == "rPh":
            phonetic = True
        elif tag == "t":
            inside = not phonetic

    def end(tag: str) -> None:
        nonlocal inside, phonetic
        tag = local(tag)
        if tag == "si":
            strings.append(unescaped("".join(pieces)))
        elif tag == "rPh":
            phonetic = False
        elif tag == "t":
            inside = False

    def text(data: str) -> None:
        if inside:
            pieces.append(data)

    package.parse(part, start, end, text)
    return strings
