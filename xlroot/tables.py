"""Structured references: the block that `Table[[#This Row],[Depth]:[Width]]` stands for.

The grammar of the brackets follows ECMA-376 part 1, section 18.17.2 and the file format's long
forms: items #All, #Data, #Headers, #Totals, #This Row (or @), then columns; an apostrophe
escapes the next character of a column's name.
"""

from __future__ import annotations

from enum import Enum

from xlroot.book import Table
from xlroot.catalogue import did_you_mean
from xlroot.cells import Block, Cell
from xlroot.errors import AddressError


class _Item(Enum):
    ALL = "#all"
    DATA = "#data"
    HEADERS = "#headers"
    TOTALS = "#totals"
    ROW = "#this row"


def table_block(table: Table, inside: str, cell: Cell) -> Block | None:
    """The block that the text between the outer brackets means as seen from `cell`.

    None where it is empty there (#This Row outside the table's rows, #Totals of a table without):
    a host shows #VALUE! or #REF!. AddressError for a column that the table does not have.
    """
    items, columns = _read(table, inside)
    rows = _rows(table, items or {_Item.DATA}, cell)
    if rows is None:
        return None
    left, right = columns or (table.block.left, table.block.right)
    return Block(table.block.sheet, rows[0], left, rows[1], right)


def _rows(table: Table, items: set[_Item], cell: Cell) -> tuple[int, int] | None:
    top, bottom = table.block.top, table.block.bottom
    first, last = top + table.header_rows, bottom - table.totals_rows
    if _Item.ALL in items:
        return top, bottom
    if _Item.ROW in items:
        inside = cell.sheet == table.block.sheet and first <= cell.row <= last
        return (cell.row, cell.row) if inside else None
    spans = []
    if _Item.HEADERS in items and table.header_rows:
        spans.append((top, first - 1))
    if _Item.DATA in items:
        spans.append((first, last))
    if _Item.TOTALS in items and table.totals_rows:
        spans.append((last + 1, bottom))
    if not spans:
        return None
    return min(span[0] for span in spans), max(span[1] for span in spans)


def _read(table: Table, inside: str) -> tuple[set[_Item], tuple[int, int] | None]:
    items: set[_Item] = set()
    columns: list[int] = []
    text = inside.strip()
    if text.startswith("@"):
        items.add(_Item.ROW)
        text = text[1:].strip()
    if not text:
        return items, None
    for part in _parts(text):
        item = _item(part)
        if item is not None:
            items.add(item)
        else:
            columns.append(_column(table, part))
    if not columns:
        return items, None
    return items, (min(columns), max(columns))


def _item(part: str) -> _Item | None:
    try:
        return _Item(part.strip().casefold()) if part.strip().startswith("#") else None
    except ValueError:
        raise AddressError(f"a structured reference holds {part!r}, which is not known") from None


def _parts(text: str) -> list[str]:
    """Column names and items, from `[a]:[b]`, `[#Data],[a]` or a bare name; escapes kept."""
    if not text.startswith("["):
        return [text]
    parts, current, depth, position = [], "", 0, 0
    while position < len(text):
        letter = text[position]
        if letter == "'" and depth:
            current += text[position : position + 2]
            position += 2
            continue
        if letter == "[":
            depth += 1
            current = "" if depth == 1 else current + letter
        elif letter == "]":
            depth -= 1
            if depth == 0:
                parts.append(current)
        elif depth:
            current += letter
        position += 1
    return parts


def _column(table: Table, part: str) -> int:
    name, position = "", 0
    while position < len(part):
        if part[position] == "'":
            position += 1
        name += part[position : position + 1]
        position += 1
    wanted = name.casefold()
    for offset, column in enumerate(table.columns):
        if column.casefold() == wanted:
            return table.block.left + offset
    hint = did_you_mean(name, table.columns)
    raise AddressError(f"the table {table.name} has no column {name}{hint}")
