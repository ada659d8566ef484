"""What a cell can hold, and how one sort of content reads as another.

A `Value` is a float, a text, a bool, `None` for a blank cell, or a `Fault`. A `Grid` is a
rectangle of values: the content of a range, or an array. Conversions follow the rules that
spreadsheets share (OpenFormula, OASIS ODF 1.3 part 4, section 6.3): blank reads as 0 or as the
empty text, TRUE as 1, a text that looks like a number as that number, anything else as #VALUE!.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import NamedTuple

from xlroot.cells import Block
from xlroot.faults import FAULTS, Fault
from xlroot.texts import general_format, read_number

Value = float | str | bool | None | Fault


class Grid(NamedTuple):
    """A rectangle of values, row by row, never empty; `block` is where it stands, if in a sheet.

    A grid with a block is a reference's content, one without is an array: functions that treat
    the two differently (text and logicals in SUM, COUNT, …) look at `block`. Of a reference that
    reaches beyond the used part of its sheet (a whole column) only the used rows are listed; the
    rest is blank.
    """

    rows: tuple[tuple[Value, ...], ...]
    block: Block | None = None

    @property
    def height(self) -> int:
        return len(self.rows)

    @property
    def width(self) -> int:
        return len(self.rows[0])

    @property
    def extent(self) -> tuple[int, int]:
        """Rows and columns of the reference, the blank ones that are not listed included."""
        if self.block is None:
            return self.height, self.width
        return self.block.height, self.block.width

    @property
    def is_cut(self) -> bool:
        """Whether blank rows or columns of the reference are not listed."""
        return self.extent != (self.height, self.width)

    def flat(self) -> Iterator[Value]:
        """All values, row by row."""
        for row in self.rows:
            yield from row


Operand = Value | Grid


def to_number(value: Value) -> float | Fault:
    """The value as a number; blank is 0, TRUE is 1, text is read, a fault stays."""
    if type(value) is float:
        return value
    if value is None:
        return 0.0
    if isinstance(value, bool):
        return 1.0 if value else 0.0
    if isinstance(value, str):
        return read_number(value)
    return value


def to_text(value: Value) -> str | Fault:
    """The value as text, the way `&` joins it: numbers in the general format."""
    if isinstance(value, str):
        return value
    if value is None:
        return ""
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, Fault):
        return value
    return general_format(value)


def to_logical(value: Value) -> bool | Fault:
    """The value as a logical; blank is FALSE, a number is TRUE unless 0, only the texts TRUE
    and FALSE are read."""
    if isinstance(value, bool):
        return value
    if value is None:
        return False
    if isinstance(value, Fault):
        return value
    if isinstance(value, str):
        upper = value.strip().upper()
        if upper == "TRUE":
            return True
        return False if upper == "FALSE" else Fault.VALUE
    return value != 0.0


__all__ = [
    "FAULTS",
    "Fault",
    "Grid",
    "Operand",
    "Value",
    "read_number",
    "to_logical",
    "to_number",
    "to_text",
]
