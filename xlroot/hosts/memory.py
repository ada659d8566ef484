"""Books made in memory from a mapping of addresses to contents: for tests and for programs."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from xlroot.book import UNSAVED, Book, Formula, Name, Table, Unsaved
from xlroot.cells import Cell, parse_address, split_sheet
from xlroot.values import Value

Content = Value | int


@dataclass(frozen=True, slots=True)
class MemorySheet:
    """A sheet whose content is given."""

    formulas: Mapping[tuple[int, int], Formula]
    values: Mapping[tuple[int, int], Value | Unsaved]
    arrays: tuple[Formula, ...] = ()

    @property
    def used(self) -> tuple[int, int]:
        rows = [row for row, _ in self.values] or [1]
        columns = [column for _, column in self.values] or [1]
        return max(rows), max(columns)

    def mentions(self, text: str) -> bool:
        return bool(self.mentioning(text))

    def mentioning(self, text: str) -> tuple[tuple[int, int], ...]:
        wanted = text.casefold()
        return tuple(
            place for place, formula in self.formulas.items() if wanted in formula.text.casefold()
        )


def book_of(
    contents: Mapping[str, Content],
    *,
    saved: Mapping[str, Content] | None = None,
    names: Mapping[str, str] | None = None,
    tables: tuple[Table, ...] = (),
    title: str = "memory",
) -> Book:
    """A book whose cells are given by address: `{"A1": 2, "Sheet2!B6": "=A1*2"}`.

    A text that begins with `=` is a formula; addresses without a sheet lie in `Sheet1`; `saved`
    gives the values saved with formulas. Names map to formula texts without `=`, for example
    `Sheet1!$A$1`.
    """
    formulas: dict[str, dict[tuple[int, int], Formula]] = {}
    values: dict[str, dict[tuple[int, int], Value | Unsaved]] = {}
    for address, content in contents.items():
        where, rest = split_sheet(address)
        sheet = where or "Sheet1"
        row, column = parse_address(rest)
        if isinstance(content, int) and not isinstance(content, bool):
            content = float(content)
        own = values.setdefault(sheet, {})
        if isinstance(content, str) and content.startswith("="):
            home = Cell(sheet, row, column)
            formulas.setdefault(sheet, {})[row, column] = Formula(content[1:], home)
            kept: Content | Unsaved = (saved or {}).get(address, UNSAVED)
            own[row, column] = float(kept) if type(kept) is int else kept
        else:
            own[row, column] = content
    sheets = {name: MemorySheet(formulas.get(name, {}), values[name]) for name in values}
    listed = tuple(Name(name, text) for name, text in (names or {}).items())
    return Book(title, sheets or {"Sheet1": MemorySheet({}, {})}, listed, tables)
