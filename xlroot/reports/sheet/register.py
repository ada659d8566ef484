"""The first page: every solve in one table, each linked to its page."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from xlroot.cells import quoted
from xlroot.record import Record
from xlroot.reports import contents
from xlroot.reports.figures import SHEET_DIGITS, Figure
from xlroot.reports.sheet import ink
from xlroot.reports.sheet.ink import Letter
from xlroot.reports.sheet.names import printable
from xlroot.reports.sheet.paper import Paper, Span

if TYPE_CHECKING:
    from openpyxl.worksheet.worksheet import Worksheet

REGISTER = "Register"

WIDTHS = (5.0, 20.0, 22.0, 17.5, 8.5, 8.5, 11.0)
_HEADINGS = ("no.", "cell", "sought", "root", "unit", "± bound", "verdict")
_NO, _CELL, _SOUGHT, _ROOT, _UNIT, _BOUND, _VERDICT = range(1, 8)


def write_register(sheet: Worksheet, records: Sequence[Record], pages: Sequence[str]) -> None:
    """Fills the sheet with a line for every record; refusals follow below with their reasons."""
    paper = Paper(sheet, WIDTHS)
    books = ", ".join(dict.fromkeys(contents.book_name(record) for record in records))
    paper.put(1, "REGISTER OF SOLVES", ink.HEADING)
    paper.put(_VERDICT, contents.made_with(records[0]), ink.FAINT, side="right")
    paper.rule(paper.whole, colour=ink.ACCENT)
    paper.end_row(14.0)
    paper.end_row(paper.paragraph(paper.whole, books, Letter(ink.TITLE, ink.BLACK, "bold")) + 3)
    paper.end_row(paper.paragraph(paper.whole, contents.tally(records), ink.LABEL))
    paper.gap()
    for column, text in enumerate(_HEADINGS, 1):
        indent = 1 if column in (_UNIT, _VERDICT) else 0
        paper.put(column, text, ink.COLUMN, side=_side(column), indent=indent)
    paper.rule(paper.whole, colour=ink.ACCENT)
    paper.end_row(13.0)
    head = paper.row - 1
    for number, (record, page) in enumerate(zip(records, pages, strict=True), 1):
        _line(paper, number, record, page)
    _notes(paper, records)
    paper.set_up(
        paper.row - 1, head, left=books, right="register of solves", footer=contents.day(records[0])
    )


def _line(paper: Paper, number: int, record: Record, page: str) -> None:
    from openpyxl.worksheet.hyperlink import Hyperlink

    at = paper.put(_NO, Figure(float(number), str(number)), ink.CELL)
    at.hyperlink = Hyperlink(ref=at.coordinate, location=f"{_linked(page)}!A1", display=str(number))
    at.font = ink.link_font()
    heights = [
        paper.paragraph(Span(_CELL, _CELL), contents.place(record), ink.CELL),
        paper.paragraph(Span(_SOUGHT, _SOUGHT), printable(contents.sought(record), 120), ink.CELL),
    ]
    found = contents.figures(record, SHEET_DIGITS)
    if found is not None:
        paper.put(_ROOT, found.root, ink.CELL, side="right")
        paper.unit(_UNIT, record.unit, ink.CELL)
        if found.bound is not None:
            paper.put(_BOUND, found.bound, ink.CELL, side="right")
        else:
            paper.put(_BOUND, "estimate", ink.CELL, side="right")
    status = record.verdict.status
    letter = Letter(ink.SMALL, ink.STATUS_COLOURS[status], "bold")
    paper.put(_VERDICT, status.value, letter, indent=1)
    paper.rule(paper.whole)
    paper.end_row(max(*heights, 13.0))


def _linked(page: str) -> str:
    """A sheet's name in a link, in quotes whether it needs them or not."""
    name = quoted(page)
    return name if name.startswith("'") else f"'{name}'"


def _notes(paper: Paper, records: Sequence[Record]) -> None:
    notes = [
        (number, text)
        for number, record in enumerate(records, 1)
        for text in (
            *([contents.reason(record)] if record.refused else []),
            *record.warnings,
        )
    ]
    if not notes:
        return
    paper.gap(12.0)
    paper.heading("Refusals and warnings")
    paper.end_row(13.0)
    for number, text in notes:
        paper.put(_NO, Figure(float(number), str(number)), ink.CELL)
        paper.end_row(paper.paragraph(Span(2, len(WIDTHS)), text, ink.CELL))


def _side(column: int) -> str:
    return "right" if column in (_ROOT, _BOUND) else "left"
