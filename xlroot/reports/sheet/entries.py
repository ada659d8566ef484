"""What goes into a cell: a number to its last digit, or a text that stays a text."""

from __future__ import annotations

from typing import TYPE_CHECKING

from xlroot.reports.sheet.names import stored

if TYPE_CHECKING:
    from openpyxl.cell import Cell

_SUSPECT = frozenset("=+-@'")
"""First characters that would turn a text into something else when its cell is edited."""


def as_number(cell: Cell, number: float) -> None:
    """Makes the cell hold the finite number with all the digits that tell it from its neighbours.

    openpyxl itself writes sixteen digits, one too few for a double.
    """
    cell.value = repr(number)
    cell.data_type = "n"


def as_text(cell: Cell, text: str) -> None:
    """Makes the cell hold the text as text, whatever a spreadsheet would take it for."""
    if not text:
        return
    cell.value = stored(text)
    cell.data_type = "s"
    cell.quotePrefix = text[0] in _SUSPECT
