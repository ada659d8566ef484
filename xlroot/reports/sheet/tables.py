"""Tables that run over as many printed pages as they need, their headings repeated on each."""

from __future__ import annotations

from collections.abc import Sequence

from xlroot.record import Line
from xlroot.reports.characters import visible
from xlroot.reports.contents import Table, text_of
from xlroot.reports.sheet import ink
from xlroot.reports.sheet.ink import Letter
from xlroot.reports.sheet.letters import lines
from xlroot.reports.sheet.names import printable
from xlroot.reports.sheet.paper import LINE, PADDING, Paper, Span

ROW = 11.5
HEADING = 13.0
LONGEST_LABEL = 200
LINES_A_ROW = 30
_FORMULA = Span(5, 6)
_SHEET = Letter(ink.SMALL, ink.ACCENT, "bold")


def write_cells(paper: Paper, table: Table, lines: Sequence[Line]) -> None:
    """Cells with label, value, unit and formula; the sheet is named where it changes."""
    if not table.rows:
        return
    _begin(paper, table, _columns(table))
    sheet = None
    for line, (_, label, value, unit, formula) in zip(lines, table.rows, strict=True):
        named = printable(text_of(label), LONGEST_LABEL)
        first, *further = _parts(paper, text_of(formula))
        height = max(
            paper.height_of(named, Span(2, 2), ink.CELL),
            _height(first),
            ROW,
        )
        fresh = line.cell.sheet != sheet
        moved = _room(paper, table, height + (HEADING if fresh else 0.0))
        if fresh or moved:
            sheet = line.cell.sheet
            paper.paragraph(paper.whole, f"sheet {sheet}", _SHEET)
            paper.end_row(HEADING)
        paper.put(1, line.cell.address, ink.CELL)
        paper.paragraph(Span(2, 2), named, ink.CELL)
        paper.put(3, value, ink.CELL, side="right")
        paper.unit(4, text_of(unit), ink.CELL)
        _formula(paper, first)
        paper.end_row(height)
        for part in further:
            _room(paper, table, _height(part))
            _formula(paper, part)
            paper.end_row(_height(part))
    paper.rule(paper.whole, row=paper.row - 1)
    paper.gap(10.0)


def _parts(paper: Paper, formula: str) -> list[list[str]]:
    """A formula in lines, and these in parts that fit a row each: it is shown whole, however long,
    and broken where we say, not where a host does."""
    rows = lines(visible(formula), paper.points(_FORMULA) - PADDING, ink.CELL)
    return [rows[at : at + LINES_A_ROW] for at in range(0, len(rows), LINES_A_ROW)]


def _height(part: list[str]) -> float:
    return len(part) * ink.SMALL * LINE + 2.0


def _formula(paper: Paper, part: list[str]) -> None:
    paper.written(_FORMULA, part, ink.CELL)


def write_iterates(paper: Paper, table: Table) -> None:
    """Every iterate in a line of numbers."""
    if not table.rows:
        return
    keep = [at for at, heading in enumerate(table.headings) if heading in _PLACES]
    columns = [(_PLACES[table.headings[at]], table.headings[at], "right") for at in keep]
    _begin(paper, table, columns)
    for row in table.rows:
        _room(paper, table, ROW, columns)
        for (column, _, side), at in zip(columns, keep, strict=True):
            paper.put(column, row[at], ink.CELL, side=side)
        paper.end_row(ROW)
    paper.rule(paper.whole, row=paper.row - 1)


_PLACES = {"n": 1, "x": 2, "residual": 3, "slope": 5, "low": 5, "high": 6}
"""Columns of the page; a method that takes slopes keeps no bracket."""

_Columns = Sequence[tuple[int, str, str]]


def _columns(table: Table) -> _Columns:
    sides = ("left", "left", "right", "left", "left")
    return [
        (n, text, side) for n, (text, side) in enumerate(zip(table.headings, sides, strict=True), 1)
    ]


def _begin(paper: Paper, table: Table, columns: _Columns) -> None:
    paper.keep(2 * HEADING + 4 * ROW)
    paper.heading(table.title)
    paper.end_row(HEADING)
    _headings(paper, columns)


def _headings(paper: Paper, columns: _Columns) -> None:
    for column, text, side in columns:
        paper.put(column, text, ink.COLUMN, side=side, indent=1 if text == "unit" else 0)
    paper.rule(paper.whole)
    paper.end_row(HEADING)


def _room(paper: Paper, table: Table, height: float, columns: _Columns | None = None) -> bool:
    """Goes to a new page, with headings, where the next row does not fit; whether it did."""
    if not paper.keep(height):
        return False
    paper.put(1, f"{table.title}, continued".upper(), ink.HEADING)
    paper.end_row(HEADING)
    _headings(paper, columns or _columns(table))
    return True
