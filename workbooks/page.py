"""How a demo sheet is laid out: a title block, then lines of label, value, unit and note."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from openpyxl import Workbook
from openpyxl.chart import Reference, ScatterChart, Series
from openpyxl.chart.axis import ChartLines
from openpyxl.chart.layout import Layout, ManualLayout
from openpyxl.chart.shapes import GraphicalProperties
from openpyxl.chart.text import RichText, Text
from openpyxl.chart.title import Title
from openpyxl.drawing.line import LineProperties
from openpyxl.drawing.spreadsheet_drawing import AnchorMarker, OneCellAnchor
from openpyxl.drawing.text import (
    CharacterProperties,
    Paragraph,
    ParagraphProperties,
    RegularTextRun,
)
from openpyxl.drawing.xdr import XDRPositiveSize2D
from openpyxl.styles import Alignment, Border, Font, PatternFill, Side
from openpyxl.utils.cell import column_index_from_string, coordinate_from_string
from openpyxl.utils.units import cm_to_EMU
from openpyxl.workbook.defined_name import DefinedName
from openpyxl.worksheet.worksheet import Worksheet

PROJECT = "Lindra Vann og Avløp IKS"
INK = "1F3A4D"
QUIET = "5B6B75"
FACE = "Arial"
PLAIN = Font(name=FACE, size=10)
NOTE = Font(name=FACE, size=9, italic=True, color=QUIET)
COLUMNS = "ABCDEFGH"
WIDTHS = (32, 16, 16, 12, 12, 12, 14, 12)
GIVEN = PatternFill("solid", fgColor="FFF7E0")
TRIAL = PatternFill("solid", fgColor="E3EEF6")
FOUND = PatternFill("solid", fgColor="E6F1E3")
THIN = Side(style="thin", color="9FB2BF")
HAIR = Side(style="hair", color="B9C6CE")

Content = str | float | int | bool | None


@dataclass(frozen=True, slots=True)
class Ask:
    """A cell that asks xlroot: the formula as the host writes it, and where its result goes.

    `filled` is the range of an array formula, as A1:B9; empty for a single value.
    """

    formula: str
    filled: str = ""


@dataclass(slots=True)
class Page:
    """One sheet under construction; `asks` are the cells that ask xlroot."""

    sheet: Worksheet
    row: int = 1
    asks: dict[str, Ask] = field(default_factory=dict)

    @classmethod
    def begun(
        cls,
        book: Workbook,
        name: str,
        title: str,
        number: str,
        *,
        prepared: str,
        revision: str,
        widths: Sequence[int] = WIDTHS,
    ) -> Page:
        """A sheet with its title block."""
        book.properties.creator = PROJECT
        sheet = book.create_sheet(name)
        for column, width in zip(COLUMNS, widths, strict=True):
            sheet.column_dimensions[column].width = width
        sheet.sheet_view.showGridLines = False
        page = cls(sheet)
        lines = (PROJECT, title, f"Calculation {number}, revision {revision}")
        signed = f"Prepared: {prepared}        Checked: ……………………        Approved: ……………………"
        for row, text in enumerate((*lines, signed), start=1):
            sheet[f"A{row}"] = text
            sheet[f"A{row}"].font = Font(name=FACE, size=9, color=QUIET)
        sheet["A2"].font = Font(name=FACE, size=14, bold=True, color=INK)
        sheet.row_dimensions[2].height = 21
        sheet.row_dimensions[4].height = 18
        for column in COLUMNS:
            sheet[f"{column}4"].border = Border(bottom=THIN)
        page.row = 6
        _print_setup(sheet, number)
        return page

    def heading(self, text: str) -> None:
        """A section's heading."""
        self.row += 1
        cell = self.sheet[f"A{self.row}"]
        cell.value = text
        cell.font = Font(name=FACE, size=10, bold=True, color=INK)
        for column in COLUMNS:
            self.sheet[f"{column}{self.row}"].border = Border(bottom=HAIR)
        self.row += 1

    def line(
        self,
        label: str,
        content: Content | Ask,
        unit: str = "",
        note: str = "",
        *,
        shown: str = "General",
        fill: PatternFill | None = None,
        name: str = "",
    ) -> str:
        """A line of label, value, unit and note; gives the value's address."""
        address = f"B{self.row}"
        self.sheet[f"A{self.row}"] = label
        self.sheet[f"A{self.row}"].font = PLAIN
        self.put(address, content, shown=shown, fill=fill)
        self.sheet[f"C{self.row}"] = unit
        self.sheet[f"C{self.row}"].font = PLAIN
        self.sheet[f"C{self.row}"].alignment = Alignment(horizontal="left", indent=1)
        if note:
            self.sheet[f"D{self.row}"] = note
            self.sheet[f"D{self.row}"].font = NOTE
        if name:
            quoted = f"'{self.sheet.title}'!$B${self.row}"
            self.sheet.parent.defined_names[name] = DefinedName(name, attr_text=quoted)
        self.row += 1
        return address

    def sentence(self, label: str, content: Content | Ask, *, lines: int = 1) -> str:
        """A line whose value is a text over the rest of the page."""
        row = self.row
        address = self.line(label, content)
        self.sheet[address].alignment = Alignment(wrap_text=True, vertical="top")
        self.sheet[f"A{row}"].alignment = Alignment(vertical="top")
        self.sheet.merge_cells(f"B{row}:H{row}")
        self.sheet.row_dimensions[row].height = 1 + 13 * lines
        return address

    def put(
        self,
        address: str,
        content: Content | Ask,
        *,
        shown: str = "General",
        fill: PatternFill | None = None,
    ) -> None:
        """A value, a formula or an ask in a cell."""
        cell = self.sheet[address]
        if isinstance(content, Ask):
            self.asks[address] = content
            fill = fill or FOUND
        else:
            cell.value = content
        cell.font = PLAIN
        cell.number_format = shown
        if address.startswith("A"):
            cell.alignment = Alignment(horizontal="left")
        if fill is not None:
            cell.fill = fill

    def table(self, ask: str, *, rows: int, shown: Sequence[str], head: Sequence[str] = ()) -> str:
        """A table that xlroot answers, from column A on; gives its range.

        `head` is written above it, for a table that comes without one; `shown` is a number
        format for each column.
        """
        if head:
            self.row_of(list(head))
        first, last = self.row, self.row + rows - 1
        filled = f"A{first}:{COLUMNS[len(shown) - 1]}{last}"
        for row in range(first, last + 1):
            for column, each in zip(COLUMNS, shown, strict=False):
                self.put(f"{column}{row}", None, shown=each, fill=FOUND)
                if row == first and not head:
                    cell = self.sheet[f"{column}{row}"]
                    cell.font = Font(name=FACE, size=9, bold=True, color=INK)
                    if column != "A":
                        cell.alignment = Alignment(horizontal="right")
        self.put(f"A{first}", Ask(ask, filled), shown=shown[0])
        self.row = last + 1
        return filled

    def plot(self, filled: str, anchor: str, *, title: str, across: str, up: str) -> None:
        """A chart of a table's second column against its first."""
        first, last = (int(end[1:]) for end in filled.split(":"))
        chart = ScatterChart()
        chart.title, chart.legend, chart.style = _lettered(title, 1100), None, 2
        chart.scatterStyle = "lineMarker"
        chart.layout = Layout(manualLayout=ManualLayout(x=0.12, y=0.14, w=0.82, h=0.68))
        chart.x_axis.title, chart.y_axis.title = _lettered(across, 900), _lettered(up, 900)
        chart.x_axis.delete = chart.y_axis.delete = False
        chart.x_axis.tickLblPos = "low"
        chart.x_axis.majorGridlines = None
        chart.y_axis.majorGridlines = ChartLines(
            spPr=GraphicalProperties(ln=LineProperties(solidFill="D5DDE2", w=6350))
        )
        chart.x_axis.number_format = chart.y_axis.number_format = "General"
        line = Series(
            Reference(self.sheet, min_col=2, min_row=first, max_row=last),
            Reference(self.sheet, min_col=1, min_row=first, max_row=last),
        )
        line.marker.symbol = "none"
        line.smooth = False
        line.graphicalProperties.line.solidFill = INK
        line.graphicalProperties.line.width = 19050
        chart.series.append(line)
        column, row = coordinate_from_string(anchor)
        corner = AnchorMarker(
            col=column_index_from_string(column) - 1, colOff=cm_to_EMU(0.4), row=row - 1
        )
        size = XDRPositiveSize2D(cm_to_EMU(14.0), cm_to_EMU(8.5))
        chart.anchor = OneCellAnchor(_from=corner, ext=size)
        self.sheet.add_chart(chart)

    def row_of(self, texts: list[str]) -> None:
        """A table's heading."""
        for column, text in zip(COLUMNS, texts, strict=False):
            cell = self.sheet[f"{column}{self.row}"]
            cell.value = text
            cell.font = Font(name=FACE, size=9, bold=True, color=INK)
            cell.border = Border(bottom=HAIR)
            cell.alignment = Alignment(
                wrap_text=True, horizontal="left" if column == "A" else "right"
            )
        self.row += 1

    def remark(self, text: str) -> None:
        """A sentence over the width of the page."""
        cell = self.sheet[f"A{self.row}"]
        cell.value = text
        cell.font = NOTE
        cell.alignment = Alignment(wrap_text=True, vertical="top")
        self.sheet.merge_cells(f"A{self.row}:H{self.row}")
        self.sheet.row_dimensions[self.row].height = 13 * (1 + len(text) // 120)
        self.row += 1


def _lettered(text: str, size: int) -> Title:
    """A chart's title in the sheet's ink; `size` in hundredths of a point."""
    ink = CharacterProperties(sz=size, b=False, solidFill=INK)
    line = Paragraph(pPr=ParagraphProperties(defRPr=ink), r=[RegularTextRun(rPr=ink, t=text)])
    return Title(tx=Text(rich=RichText(p=[line])), overlay=False)


def _print_setup(sheet: Worksheet, number: str) -> None:
    sheet.page_setup.orientation = "portrait"
    sheet.page_setup.paperSize = sheet.PAPERSIZE_A4
    sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight = 1, 0
    sheet.sheet_properties.pageSetUpPr.fitToPage = True
    sheet.page_margins.left = sheet.page_margins.right = 0.6
    sheet.page_margins.top = sheet.page_margins.bottom = 0.7
    sheet.print_options.horizontalCentered = True
    sheet.oddFooter.left.text = f"{number} &A"
    sheet.oddFooter.right.text = "&P/&N"
