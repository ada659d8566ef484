"""How a demo sheet is laid out: a title block, then lines of label, value, unit and note."""

from __future__ import annotations

from dataclasses import dataclass, field

from openpyxl import Workbook
from openpyxl.styles import Alignment, Border, Font, PatternFill, Side
from openpyxl.workbook.defined_name import DefinedName
from openpyxl.worksheet.worksheet import Worksheet

PROJECT = "Lindra Vann og Avløp IKS"
INK = "1F3A4D"
GIVEN = PatternFill("solid", fgColor="FFF7E0")
TRIAL = PatternFill("solid", fgColor="E3EEF6")
FOUND = PatternFill("solid", fgColor="E6F1E3")
THIN = Side(style="thin", color="9FB2BF")
HAIR = Side(style="hair", color="B9C6CE")

Content = str | float | int | bool | None


@dataclass(frozen=True, slots=True)
class Ask:
    """A cell that asks xlroot: the formula as the host writes it, and where its result goes.

    `filled` is the range of an array formula; empty for a single value.
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
        cls, book: Workbook, name: str, title: str, number: str, *, prepared: str, revision: str
    ) -> Page:
        """A sheet with its title block."""
        sheet = book.create_sheet(name)
        for column, width in zip("ABCDEFGH", (40, 15, 10, 15, 13, 13, 13, 13), strict=True):
            sheet.column_dimensions[column].width = width
        sheet.sheet_view.showGridLines = False
        page = cls(sheet)
        sheet["A1"] = PROJECT
        sheet["A1"].font = Font(size=9, color=INK)
        sheet["A2"] = title
        sheet["A2"].font = Font(size=14, bold=True, color=INK)
        sheet["A3"] = f"Calculation {number}, revision {revision}"
        sheet["A4"] = f"Prepared: {prepared}      Checked:                 Approved:"
        for row in (3, 4):
            sheet[f"A{row}"].font = Font(size=9, color="5B6B75")
        for column in "ABCDEFGH":
            sheet[f"{column}4"].border = Border(bottom=THIN)
        page.row = 6
        _print_setup(sheet, number)
        return page

    def heading(self, text: str) -> None:
        """A section's heading."""
        self.row += 1
        cell = self.sheet[f"A{self.row}"]
        cell.value = text
        cell.font = Font(bold=True, color=INK)
        cell.border = Border(bottom=HAIR)
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
        self.put(address, content, shown=shown, fill=fill)
        self.sheet[f"C{self.row}"] = unit
        if note:
            self.sheet[f"D{self.row}"] = note
            self.sheet[f"D{self.row}"].font = Font(size=9, italic=True, color="5B6B75")
        if name:
            quoted = f"'{self.sheet.title}'!$B${self.row}"
            self.sheet.parent.defined_names[name] = DefinedName(name, attr_text=quoted)
        self.row += 1
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
        cell.number_format = shown
        if fill is not None:
            cell.fill = fill

    def row_of(self, texts: list[str]) -> None:
        """A table's heading."""
        for column, text in zip("ABCDEFGH", texts, strict=False):
            cell = self.sheet[f"{column}{self.row}"]
            cell.value = text
            cell.font = Font(size=9, bold=True, color=INK)
            cell.border = Border(bottom=HAIR)
            cell.alignment = Alignment(
                wrap_text=True, horizontal="left" if column == "A" else "right"
            )
        self.row += 1

    def remark(self, text: str) -> None:
        """A sentence over the width of the page."""
        cell = self.sheet[f"A{self.row}"]
        cell.value = text
        cell.font = Font(size=9, italic=True, color="5B6B75")
        cell.alignment = Alignment(wrap_text=True, vertical="top")
        self.sheet.merge_cells(f"A{self.row}:H{self.row}")
        self.sheet.row_dimensions[self.row].height = 13 * (1 + len(text) // 120)
        self.row += 1


def _print_setup(sheet: Worksheet, number: str) -> None:
    sheet.page_setup.orientation = "portrait"
    sheet.page_setup.paperSize = sheet.PAPERSIZE_A4
    sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight = 1, 0
    sheet.sheet_properties.pageSetUpPr.fitToPage = True
    sheet.print_options.horizontalCentered = True
    sheet.oddFooter.left.text = f"{number} &A"
    sheet.oddFooter.right.text = "&P/&N"
