"""A sheet that is filled from top to bottom and printed on A4: rows, heights, page breaks.

Heights are worked out from the text, since a spreadsheet does not fit them to merged cells.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from copy import copy
from typing import TYPE_CHECKING, Any, NamedTuple

from xlroot.cells import column_name
from xlroot.reports import contents
from xlroot.reports.contents import Content
from xlroot.reports.figures import Figure, number_format
from xlroot.reports.sheet import ink
from xlroot.reports.sheet.entries import as_number, as_text
from xlroot.reports.sheet.ink import Fit, Letter
from xlroot.reports.sheet.letters import lines
from xlroot.reports.sheet.names import printable, unit_suffix

if TYPE_CHECKING:
    from openpyxl.cell import Cell
    from openpyxl.worksheet.worksheet import Worksheet

A4 = 9
"""The code of the paper (ECMA-376 part 1, section 18.3.1.63)."""

PAGE_HEIGHT = 720.0
"""Points of a page that rows may fill: A4 less the margins, and a little for rounding."""

TALLEST_ROW = 409.0
"""Points that a row may be high at most in a spreadsheet."""

PADDING = 6.0
"""Points that a cell leaves free at its sides."""

LINE = 1.32
"""Height of a line of text over its size."""

PIXELS = 7.0
"""Width of a digit in the normal style, which column widths count in (Arial 10 at 96 dpi)."""

SIDES, TOP, BOTTOM = 0.6, 0.75, 0.75
"""Margins in inches."""


class Span(NamedTuple):
    """A run of columns, both ends included, counted from 1."""

    first: int
    last: int


class _Style(NamedTuple):
    """How a cell looks, as far as writing decides it."""

    letter: Letter
    side: str
    fit: Fit
    indent: int
    form: str = "General"


class Paper:
    """The sheet being filled; `row` is the next free one."""

    def __init__(self, sheet: Worksheet, widths: Sequence[float]) -> None:
        self.sheet = sheet
        self.widths = widths
        self.row = 1
        self.used = 0.0
        self._styles: dict[_Style, Any] = {}
        self.head = 0.0
        """Height of the rows that are repeated on every page."""
        for column, width in enumerate(widths, 1):
            sheet.column_dimensions[column_name(column)].width = width
        sheet.sheet_view.showGridLines = False
        sheet.sheet_view.zoomScale = 110

    @property
    def whole(self) -> Span:
        return Span(1, len(self.widths))

    # -- writing -------------------------------------------------------------------------------

    def put(
        self,
        column: int,
        content: Content,
        letter: Letter = ink.PLAIN,
        *,
        side: str = "left",
        unit: str = "",
        indent: int = 0,
        fit: Fit = Fit.OVER,
        row: int | None = None,
    ) -> Cell:
        """Writes a figure as a number and a text as a text that no spreadsheet takes for more."""
        cell = self.sheet.cell(self.row if row is None else row, column)
        if isinstance(content, Figure) and math.isfinite(content.value):
            form = number_format(content.text) + unit_suffix(unit)
            self._dress(cell, _Style(letter, side, Fit.SHRINK, indent, form))
            as_number(cell, content.value)
        else:
            self._dress(cell, _Style(letter, side, fit, indent))
            as_text(cell, printable(contents.text_of(content)))
        return cell

    def _dress(self, cell: Cell, style: _Style) -> None:
        """Gives the cell its style; one that was worked out before is copied, ten times faster."""
        known = self._styles.get(style)
        if known is None:
            cell.font = ink.font(style.letter)
            cell.alignment = ink.aligned(style.side, style.fit, indent=style.indent)
            cell.number_format = style.form
            self._styles[style] = copy(cell._style)
        else:
            cell._style = copy(known)

    def unit(self, column: int, text: str, letter: Letter) -> None:
        """Writes a unit beside its number, smaller if it is long."""
        self.put(column, text, letter, fit=Fit.SHRINK, indent=1)

    def wrap(
        self, span: Span, text: str, letter: Letter = ink.PLAIN, *, row: int | None = None
    ) -> float:
        """Writes a text that is to fill a span in as many lines as it needs; gives their height.

        The span is not merged yet.
        """
        self.put(span.first, text, letter, fit=Fit.WRAP, row=row)
        return self.height_of(text, span, letter)

    def paragraph(self, span: Span, text: str, letter: Letter = ink.PLAIN) -> float:
        """Writes a text over the columns of the current row; gives the height that it needs."""
        height = self.wrap(span, text, letter)
        self.merge(span, self.row, self.row)
        return height

    def written(self, span: Span, parts: Sequence[str], letter: Letter) -> None:
        """Writes lines below each other in one cell over the columns of the current row."""
        as_text(self.put(span.first, "", letter, fit=Fit.WRAP), "\n".join(parts))
        self.merge(span, self.row, self.row)

    def merge(self, span: Span, top: int, bottom: int) -> None:
        if span.first < span.last or top < bottom:
            self.sheet.merge_cells(
                start_row=top, end_row=bottom, start_column=span.first, end_column=span.last
            )

    # -- rows ----------------------------------------------------------------------------------

    def end_row(self, height: float) -> None:
        """Gives the current row its height and goes on to the next."""
        given = min(round(max(height, 3.0) * 4) / 4, TALLEST_ROW)
        self.sheet.row_dimensions[self.row].height = given
        self.used += given
        self.row += 1

    def gap(self, height: float = 6.0) -> None:
        self.end_row(height)

    def heading(self, text: str, span: Span | None = None) -> None:
        """A heading with a thin rule below; the row stays open."""
        span = span or self.whole
        self.put(span.first, text.upper(), ink.HEADING)
        self.rule(span)

    def rule(self, span: Span, *, colour: str = ink.RULE, row: int | None = None) -> None:
        """A thin line below a row."""
        for column in range(span.first, span.last + 1):
            cell = self.sheet.cell(self.row if row is None else row, column)
            cell.border = ink.ruled(below="thin", colour=colour)

    def tint(self, top: int, bottom: int, span: Span) -> None:
        for row in range(top, bottom + 1):
            for column in range(span.first, span.last + 1):
                self.sheet.cell(row, column).fill = ink.filled(ink.TINT)

    def keep(self, height: float) -> bool:
        """Goes to a new page unless so much still fits on this one; whether it did."""
        if self.used + height <= PAGE_HEIGHT:
            return False
        self.new_page()
        return True

    def new_page(self) -> None:
        from openpyxl.worksheet.pagebreak import Break

        self.sheet.row_breaks.append(Break(id=self.row - 1))
        self.used = self.head
        self.gap(4.0)

    # -- measures ------------------------------------------------------------------------------

    def points(self, span: Span) -> float:
        """The width of a span of columns in points."""
        pixels = sum(self.widths[n - 1] * PIXELS + 5.0 for n in range(span.first, span.last + 1))
        return pixels * 0.75

    def height_of(self, text: str, span: Span, letter: Letter) -> float:
        """The height that a text needs in a span."""
        return len(self.lines_of(text, span, letter)) * letter.size * LINE + 2.0

    def lines_of(self, text: str, span: Span, letter: Letter) -> list[str]:
        """The text in the lines that a span breaks it into."""
        return lines(printable(text), self.points(span) - PADDING, letter)

    # -- printing ------------------------------------------------------------------------------

    def set_up(self, last_row: int, repeated: int, *, left: str, right: str, footer: str) -> None:
        """A4 upright, one page wide, with header, footer, and the first rows on every page."""
        from openpyxl.worksheet.properties import PageSetupProperties

        sheet = self.sheet
        sheet.print_area = f"A1:{column_name(len(self.widths))}{last_row}"
        sheet.print_title_rows = f"1:{repeated}"
        sheet.page_setup.paperSize = A4
        sheet.page_setup.orientation = "portrait"
        sheet.page_setup.fitToWidth = 1
        sheet.page_setup.fitToHeight = 0
        sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
        sheet.print_options.horizontalCentered = True
        margins = sheet.page_margins
        margins.left = margins.right = SIDES
        margins.top, margins.bottom = TOP, BOTTOM
        margins.header = margins.footer = 0.35
        parts = (
            (sheet.oddHeader.left, _header(left)),
            (sheet.oddHeader.right, _header(right)),
            (sheet.oddFooter.left, _header(footer)),
            (sheet.oddFooter.right, "page &P of &N"),
        )
        for part, text in parts:
            part.text = text
            part.size = 8
            part.font = f"{ink.FAMILY},Regular"
            part.color = ink.GREY


LONGEST_HEADER = 80


def _header(text: str) -> str:
    """A text in a header, where & begins a code and [ a name for one."""
    shown = printable(text)
    if len(shown) > LONGEST_HEADER:
        shown = "…" + shown[-LONGEST_HEADER:]
    return shown.replace("&", "&&").replace("&[", "& [")
