"""The words beside a number: its label and its unit, as they stand in the sheet.

Calculation sheets put the label to the left of a number and the unit to its right (common
practice), or both above it, at the head of a column. A unit may also stand in brackets at the end
of the label. Nothing is invented: what is not found is empty.
"""

from __future__ import annotations

import re

from xlroot.book import Book
from xlroot.cells import Cell

FARTHEST_LEFT = 8
"""Columns searched to the left of a number."""
FARTHEST_UP = 60
"""Rows searched above a number."""
LONGEST_UNIT = 16
"""A text of more letters beside a number is a remark, not a unit."""

_BRACKETED = re.compile(r"^(.*?)(?:\s+\(|\s*\[)([^\[\]()]{1,16})[\])]\s*[:=]?\s*$")


def label_of(book: Book, cell: Cell) -> str:
    """The label of a number: the longest text to its left in the row, otherwise the nearest
    above it; empty if there is none."""
    found = _left(book, cell) or _above(book, cell)
    match = _BRACKETED.match(found)
    text = match[1] if match and match[1] else found
    return text.strip().rstrip(":=").strip()


def unit_of(book: Book, cell: Cell) -> str:
    """The unit of a number: a short text to its right, or what the label has in brackets."""
    beside = _text(book, Cell(cell.sheet, cell.row, cell.column + 1))
    if beside and len(beside) <= LONGEST_UNIT and not _labels_another(book, cell):
        return "" if beside in ("-", "–", "—") else beside
    match = _BRACKETED.match(_left(book, cell) or _above(book, cell))
    unit = match[2].strip() if match else ""
    return "" if unit in ("-", "–", "—") else unit


def _text(book: Book, cell: Cell) -> str:
    if cell.column < 1 or cell.row < 1:
        return ""
    value = book.saved(cell)
    return value.strip() if isinstance(value, str) else ""


def _left(book: Book, cell: Cell) -> str:
    texts = []
    for column in range(cell.column - 1, max(0, cell.column - 1 - FARTHEST_LEFT), -1):
        other = Cell(cell.sheet, cell.row, column)
        value = book.saved(other)
        if isinstance(value, str) and value.strip() and book.formula(other) is None:
            texts.append(value.strip())
        elif value is not None or book.formula(other) is not None:
            break
    return max(texts, key=len, default="")


def _above(book: Book, cell: Cell) -> str:
    for row in range(cell.row - 1, max(0, cell.row - 1 - FARTHEST_UP), -1):
        found = _text(book, Cell(cell.sheet, row, cell.column))
        if found:
            return found
    return ""


def _labels_another(book: Book, cell: Cell) -> bool:
    """Whether the text to the right is the label of a number further right, not a unit."""
    beyond = Cell(cell.sheet, cell.row, cell.column + 2)
    value = book.saved(beyond)
    return isinstance(value, float) and book.formula(beyond) is None
