"""Addresses: a cell, a rectangle of cells, and their A1 text both ways.

Rows and columns count from 1. A sheet is 1,048,576 rows by 16,384 columns (ECMA-376 part 1,
section 18.3.1.73 and 18.18.61), the limits of the file format.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from functools import cache
from typing import NamedTuple

from xlroot.errors import AddressError

LAST_ROW = 1_048_576
LAST_COLUMN = 16_384

_CELL = re.compile(r"\$?([A-Za-z]{1,3})\$?([1-9][0-9]{0,6})")
_PLAIN_SHEET = re.compile(r"[^\W\d][\w.]*")
_LOOKS_LIKE_CELL = re.compile(r"(?i)[a-z]{1,3}[0-9]+|r[0-9]*c[0-9]*|r|c|true|false")


@cache
def column_name(column: int) -> str:
    """The letters of a column: 1 is A, 27 is AA."""
    name = ""
    while column:
        column, digit = divmod(column - 1, 26)
        name = chr(65 + digit) + name
    return name


@cache
def column_number(name: str) -> int:
    """The number of a column's letters: A is 1, XFD is 16,384."""
    number = 0
    for letter in name.upper():
        number = number * 26 + ord(letter) - 64
    return number


@cache
def quoted(sheet: str) -> str:
    """A sheet's name as a formula writes it, in quotes where it needs them."""
    if _PLAIN_SHEET.fullmatch(sheet) and not _LOOKS_LIKE_CELL.fullmatch(sheet):
        return sheet
    return "'" + sheet.replace("'", "''") + "'"


class Cell(NamedTuple):
    """One cell of a book; `str` writes it as `Sheet!B6`."""

    sheet: str
    row: int
    column: int

    @property
    def address(self) -> str:
        """The address within the sheet: `B6`."""
        return f"{column_name(self.column)}{self.row}"

    def __str__(self) -> str:
        return f"{quoted(self.sheet)}!{self.address}"


class Block(NamedTuple):
    """A rectangle of cells in one sheet, its corners included."""

    sheet: str
    top: int
    left: int
    bottom: int
    right: int

    @classmethod
    def of(cls, cell: Cell) -> Block:
        """The block of one cell."""
        return cls(cell.sheet, cell.row, cell.column, cell.row, cell.column)

    @property
    def height(self) -> int:
        return self.bottom - self.top + 1

    @property
    def width(self) -> int:
        return self.right - self.left + 1

    @property
    def first(self) -> Cell:
        """The cell in the top left corner."""
        return Cell(self.sheet, self.top, self.left)

    @property
    def is_cell(self) -> bool:
        return self.top == self.bottom and self.left == self.right

    def cells(self) -> Iterator[Cell]:
        """All cells, row by row."""
        for row in range(self.top, self.bottom + 1):
            for column in range(self.left, self.right + 1):
                yield Cell(self.sheet, row, column)

    def holds(self, cell: Cell) -> bool:
        """Whether the cell lies in the block."""
        return (
            self.top <= cell.row <= self.bottom
            and self.left <= cell.column <= self.right
            and self.sheet == cell.sheet
        )

    @property
    def address(self) -> str:
        """The address within the sheet: `B6`, `A1:C3`, `A:A` for whole columns, `1:3` for rows."""
        if self.is_cell:
            return self.first.address
        if self.top == 1 and self.bottom == LAST_ROW:
            return f"{column_name(self.left)}:{column_name(self.right)}"
        if self.left == 1 and self.right == LAST_COLUMN:
            return f"{self.top}:{self.bottom}"
        last = Cell(self.sheet, self.bottom, self.right)
        return f"{self.first.address}:{last.address}"

    def __str__(self) -> str:
        return f"{quoted(self.sheet)}!{self.address}"


def parse_address(text: str) -> tuple[int, int]:
    """Row and column of an A1 address, dollar signs allowed; AddressError otherwise."""
    match = _CELL.fullmatch(text.strip())
    if match is None:
        raise AddressError(f"{text!r} is no cell address; write it like B6")
    row, column = int(match[2]), column_number(match[1])
    if row > LAST_ROW or column > LAST_COLUMN:
        raise AddressError(f"{text!r} lies outside a sheet, which ends at XFD1048576")
    return row, column


def split_sheet(text: str) -> tuple[str | None, str]:
    """The sheet's name, unquoted, or None, and the rest of a reference such as `'My sheet'!B6`."""
    stripped = text.strip()
    if stripped.startswith("'"):
        end = 1
        while True:
            end = stripped.find("'", end)
            if end < 0:
                raise AddressError(f"{text!r} opens a quote and does not close it")
            if stripped[end + 1 : end + 2] != "'":
                break
            end += 2
        if stripped[end + 1 : end + 2] != "!":
            raise AddressError(f"{text!r} needs an exclamation mark after the sheet's name")
        return stripped[1:end].replace("''", "'"), stripped[end + 2 :]
    sheet, mark, rest = stripped.rpartition("!")
    return (sheet, rest) if mark else (None, stripped)
