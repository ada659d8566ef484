"""Book: a frozen snapshot of a workbook's formulas, saved values, names and tables.

A book holds sheets as `Sheet` views, which may read themselves only when first asked. Nothing in
a book changes after it was opened. Hosts make books (`xlroot.hosts`); this module knows no file
format. Sheet, name and table lookups ignore case, as spreadsheets do.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from enum import Enum
from typing import Protocol

from xlroot.catalogue import did_you_mean
from xlroot.cells import Block, Cell, parse_address, quoted, split_sheet
from xlroot.errors import AddressError
from xlroot.values import Value


class Unsaved(Enum):
    """What stands for the value of a formula that was saved without one."""

    UNSAVED = "no saved value"


UNSAVED = Unsaved.UNSAVED


@dataclass(frozen=True, slots=True)
class Formula:
    """A formula as written, without the leading `=`.

    `home` is the cell for which `text` was written: a cell that shares another's formula has its
    own position, and relative references move with it. `block` is the range of an array formula
    (one cell or more), whose result is a grid, or None for an ordinary formula.
    """

    text: str
    home: Cell
    block: Block | None = None


@dataclass(frozen=True, slots=True)
class Name:
    """A defined name: its text is a formula without `=`; `sheet` is its scope, None the book."""

    name: str
    text: str
    sheet: str | None = None


@dataclass(frozen=True, slots=True)
class Table:
    """A table: `block` with header and totals rows, and its column names from left to right."""

    name: str
    block: Block
    columns: tuple[str, ...]
    header_rows: int = 1
    totals_rows: int = 0


class Sheet(Protocol):
    """One sheet's content by (row, column); may be read on first use, never changes then."""

    @property
    def formulas(self) -> Mapping[tuple[int, int], Formula]: ...

    @property
    def values(self) -> Mapping[tuple[int, int], Value | Unsaved]:
        """Saved values of every cell that holds something, formula cells included."""
        ...

    @property
    def used(self) -> tuple[int, int]:
        """Last row and last column that hold anything; (1, 1) for an empty sheet."""
        ...

    @property
    def arrays(self) -> tuple[Formula, ...]:
        """The array formulas whose block is larger than one cell."""
        ...

    def mentions(self, text: str) -> bool:
        """Whether a formula may contain the text, ignoring case; cheap, may be wrongly true."""
        ...

    def mentioning(self, text: str) -> Iterable[tuple[int, int]]:
        """Cells whose formula contains the text, ignoring case, and perhaps others."""
        ...


def is_linked(sheet: str) -> bool:
    """Whether a sheet's name, such as `[1]Data`, means a sheet of another workbook."""
    return sheet.startswith("[")


@dataclass(frozen=True, slots=True)
class Book:
    """A workbook as it was saved: sheets in order, names, tables, and where it came from.

    Sheets of other workbooks that it links to stand beside its own under names such as `[1]Data`,
    with the values that the host last saved of them.
    """

    title: str
    sheet_by_name: Mapping[str, Sheet]
    names: tuple[Name, ...] = ()
    tables: tuple[Table, ...] = ()
    digest: str = ""
    """SHA-256 of the file, in hexadecimal; empty for a book that is no file."""
    starts_1904: bool = False
    rounds_as_shown: bool = False
    """Whether the host rounds every value to the digits that its format shows."""
    _folded: dict[str, str] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        folded = {name.casefold(): name for name in self.sheet_by_name}
        object.__setattr__(self, "_folded", folded)

    @property
    def sheets(self) -> tuple[str, ...]:
        """The sheets' names, in order; not those of linked workbooks."""
        return tuple(name for name in self.sheet_by_name if not is_linked(name))

    def sheet_name(self, name: str) -> str:
        """The name as the book spells it; AddressError, with the nearest, if there is none."""
        found = self._folded.get(name.casefold())
        if found is None:
            hint = did_you_mean(name, self.sheets)
            raise AddressError(f"{self.title} has no sheet {quoted(name)}{hint}")
        return found

    def has_sheet(self, name: str) -> bool:
        return name.casefold() in self._folded

    def formula(self, cell: Cell) -> Formula | None:
        """The formula in the cell, or None where it holds a value or nothing."""
        return self.sheet_by_name[cell.sheet].formulas.get((cell.row, cell.column))

    def saved(self, cell: Cell) -> Value | Unsaved:
        """The value saved with the cell; None for a blank one."""
        return self.sheet_by_name[cell.sheet].values.get((cell.row, cell.column))

    def array_over(self, cell: Cell) -> Formula | None:
        """The array formula whose block spreads over the cell, if one does."""
        for formula in self.sheet_by_name[cell.sheet].arrays:
            if formula.block is not None and formula.block.holds(cell):
                return formula
        return None

    def clipped(self, block: Block) -> Block:
        """The block cut to the rows and columns in use, at least its first cell."""
        last_row, last_column = self.sheet_by_name[block.sheet].used
        return block._replace(
            bottom=max(block.top, min(block.bottom, last_row)),
            right=max(block.left, min(block.right, last_column)),
        )

    def name(self, name: str, sheet: str | None = None) -> Name | None:
        """The defined name as seen from the sheet: its own scope first, then the book's."""
        wanted = name.casefold()
        found = None
        for each in self.names:
            if each.name.casefold() == wanted:
                if each.sheet is not None and each.sheet == sheet:
                    return each
                if each.sheet is None:
                    found = each
        return found

    def table(self, name: str) -> Table | None:
        """The table of that name, if there is one."""
        wanted = name.casefold()
        return next((each for each in self.tables if each.name.casefold() == wanted), None)

    def table_at(self, cell: Cell) -> Table | None:
        """The table that the cell lies in, if any."""
        return next((each for each in self.tables if each.block.holds(cell)), None)

    def cell(self, text: str, sheet: str | None = None) -> Cell:
        """The cell that a text such as `Sheet!B6`, `B6` or a defined name points at.

        Without a sheet, `sheet` is meant, or the book's only one. AddressError names the nearest
        sheet or name, or asks for the sheet.
        """
        where, rest = split_sheet(text)
        named = self.name(rest, sheet if where is None else where)
        if named is not None:
            target = named.text.replace("$", "")
            where_named, rest_named = split_sheet(target)
            if where_named is not None:
                try:
                    row, column = parse_address(rest_named)
                except AddressError:
                    raise AddressError(
                        f"the name {rest} stands for {named.text}, which is not one cell"
                    ) from None
                return Cell(self.sheet_name(where_named), row, column)
        try:
            row, column = parse_address(rest)
        except AddressError as error:
            hint = did_you_mean(rest, [each.name for each in self.names])
            raise AddressError(f"{error}{hint}") from None
        if where is None:
            where = sheet
        if where is None:
            if len(self.sheets) != 1:
                raise AddressError(
                    f"{text!r} names no sheet and {self.title} has {len(self.sheets)}; "
                    f"write it like {quoted(self.sheets[0])}!{rest}"
                )
            where = self.sheets[0]
        return Cell(self.sheet_name(where), row, column)

    def formulas_mentioning(self, text: str) -> Iterator[tuple[Cell, Formula]]:
        """Cells whose formula contains the text, ignoring case, sheet by sheet, row by row."""
        wanted = text.casefold()
        for name, sheet in self.sheet_by_name.items():
            if sheet.mentions(text):
                for row, column in sorted(sheet.mentioning(text)):
                    formula = sheet.formulas.get((row, column))
                    if formula is not None and wanted in formula.text.casefold():
                        yield Cell(name, row, column), formula
