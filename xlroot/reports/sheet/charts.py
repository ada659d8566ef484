"""Two native charts and the numbers behind them.

The numbers stand to the right of what is printed, so that a checker finds and can change them.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING, NamedTuple

from xlroot.record import Record
from xlroot.reports import contents
from xlroot.reports.curve import Curve, Narrowing
from xlroot.reports.sheet import ink
from xlroot.reports.sheet.entries import as_number
from xlroot.reports.sheet.names import printable

if TYPE_CHECKING:
    from openpyxl.chart import Reference, ScatterChart
    from openpyxl.chart.axis import NumericAxis
    from openpyxl.chart.series import XYSeries
    from openpyxl.chart.text import RichText
    from openpyxl.worksheet.worksheet import Worksheet

DATA_COLUMN = 9
"""Where the numbers begin, two columns right of the page."""

EMUS = 12_700
"""Length units of a drawing in a point (ECMA-376 part 1, section 20.1.10.16)."""


class Place(NamedTuple):
    """Where a chart stands: top left cell, and its size in points."""

    column: int
    row: int
    width: float
    height: float


Pair = tuple[float | None, float | None]


class Charts:
    """Adds charts to a sheet and writes their numbers side by side."""

    def __init__(self, sheet: Worksheet) -> None:
        self.sheet = sheet
        self.column = DATA_COLUMN

    def residual(self, curve: Curve, record: Record, place: Place) -> None:
        """The residual over the bracket, with the iterates and the root marked."""
        chart = self._chart()
        label = printable(contents.varied(record), 60)
        _axis(chart.x_axis, _titled(label, record.unit), curve.left, curve.right)
        bottom, top = (curve.bottom, curve.top) if curve.clipped else (None, None)
        _axis(chart.y_axis, _titled("residual", record.residual_unit), bottom, top)
        line = self._series("residual", _gapped(curve.pieces))
        line.marker.symbol = "none"
        _stroke(line, ink.ACCENT, 1.25)
        chart.series.append(line)
        if curve.iterates:
            dots = self._series("iterates", curve.iterates)
            _dots(dots, "circle", 5, ink.IRON, ink.IRON)
            chart.series.append(dots)
        if curve.root is not None:
            root = self._series("root", ((curve.root[0], 0.0),))
            _dots(root, "diamond", 9, ink.STOP, ink.STOP)
            chart.series.append(root)
        self._stand(chart, place)

    def narrowing(self, narrowing: Narrowing, record: Record, place: Place) -> None:
        """A length by iteration on a logarithmic axis."""
        chart = self._chart()
        chart.legend = None
        last = narrowing.points[-1][0]
        _axis(chart.x_axis, "iteration", 0.0, float(last))
        lengths = [length for _, length in narrowing.points]
        low = 10.0 ** math.floor(math.log10(min(lengths)))
        high = 10.0 ** math.ceil(math.log10(max(lengths)))
        _axis(chart.y_axis, _titled(narrowing.what, record.unit), low, high)
        chart.y_axis.scaling.logBase = 10
        chart.y_axis.number_format = "0E+00"
        chart.x_axis.number_format = "0"
        chart.x_axis.crosses = "min"
        decades = math.log10(high) - math.log10(low)
        chart.y_axis.majorUnit = 10.0 ** max(1, round(decades / 5))
        line = self._series(
            narrowing.what, [(float(n), length) for n, length in narrowing.points], "n"
        )
        _dots(line, "circle", 4, ink.ACCENT, ink.ACCENT)
        _stroke(line, ink.ACCENT, 1.0)
        chart.series.append(line)
        self._stand(chart, place)

    # -- parts ---------------------------------------------------------------------------------

    def _chart(self) -> ScatterChart:
        from openpyxl.chart import ScatterChart
        from openpyxl.chart.layout import Layout
        from openpyxl.chart.shapes import GraphicalProperties

        chart = ScatterChart()
        chart.style = None
        chart.scatterStyle = "lineMarker"
        chart.display_blanks = "gap"
        chart.roundedCorners = False
        chart.legend.position = "b"
        chart.legend.txPr = _small()
        chart.layout = Layout()
        chart.graphical_properties = GraphicalProperties()
        chart.graphical_properties.line.noFill = True
        return chart

    def _series(self, title: str, points: Sequence[Pair], heading: str = "x") -> XYSeries:
        from openpyxl.chart import Series

        first = self.column
        for column, text in ((first, heading), (first + 1, title)):
            cell = self.sheet.cell(1, column, text)
            cell.font = ink.font(ink.COLUMN)
        for row, (x, y) in enumerate(points, 2):
            for column, number in ((first, x), (first + 1, y)):
                if number is not None:
                    as_number(self.sheet.cell(row, column), number)
        self.column += 3
        last = len(points) + 1
        series = Series(self._reference(first + 1, last), self._reference(first, last), title=title)
        series.smooth = False
        return series

    def _reference(self, column: int, last: int) -> Reference:
        from openpyxl.chart import Reference

        return Reference(self.sheet, min_col=column, min_row=2, max_row=last)

    def _stand(self, chart: ScatterChart, place: Place) -> None:
        from openpyxl.drawing.spreadsheet_drawing import AnchorMarker, OneCellAnchor
        from openpyxl.drawing.xdr import XDRPositiveSize2D

        size = XDRPositiveSize2D(round(place.width * EMUS), round(place.height * EMUS))
        corner = AnchorMarker(col=place.column - 1, row=place.row - 1, colOff=0, rowOff=0)
        chart.anchor = OneCellAnchor(_from=corner, ext=size)
        self.sheet.add_chart(chart)


def _gapped(pieces: Sequence[Sequence[tuple[float, float]]]) -> list[Pair]:
    """The pieces one below the other, with an empty row where the line is to break."""
    rows: list[Pair] = []
    for piece in pieces:
        if rows:
            rows.append((None, None))
        rows.extend(piece)
    return rows


def _titled(text: str, unit: str) -> str:
    return f"{text} [{printable(unit, 30)}]" if unit.strip() else text


def _axis(axis: NumericAxis, title: str, low: float | None, high: float | None) -> None:
    from openpyxl.chart.shapes import GraphicalProperties

    axis.title = _title(title)
    axis.title.overlay = False
    axis.delete = False
    axis.scaling.min, axis.scaling.max = low, high
    axis.tickLblPos = "low"
    axis.number_format = "General"
    axis.txPr = _small()
    axis.majorTickMark = "out"
    axis.graphicalProperties = GraphicalProperties()
    axis.graphicalProperties.line.solidFill = ink.GREY
    axis.graphicalProperties.line.width = EMUS // 2
    axis.majorGridlines.spPr = GraphicalProperties()
    axis.majorGridlines.spPr.line.solidFill = "E3E7E8"
    axis.majorGridlines.spPr.line.width = EMUS // 2


def _stroke(series: XYSeries, colour: str, width: float) -> None:
    series.graphicalProperties.line.solidFill = colour
    series.graphicalProperties.line.width = round(width * EMUS)


def _dots(series: XYSeries, symbol: str, size: int, fill: str, edge: str) -> None:
    series.marker.symbol = symbol
    series.marker.size = size
    series.marker.graphicalProperties.solidFill = fill
    series.marker.graphicalProperties.line.solidFill = edge
    series.graphicalProperties.line.noFill = True


def _small() -> RichText:
    from openpyxl.chart.text import RichText
    from openpyxl.drawing.text import Paragraph, ParagraphProperties, RichTextProperties

    properties = ParagraphProperties(defRPr=_letters())
    return RichText(
        bodyPr=RichTextProperties(), p=[Paragraph(pPr=properties, endParaRPr=_letters())]
    )


def _letters() -> object:
    from openpyxl.drawing.text import CharacterProperties, Font

    return CharacterProperties(sz=750, b=False, solidFill=ink.GREY, latin=Font(typeface=ink.FAMILY))


def _title(text: str) -> object:
    from openpyxl.chart.text import RichText, Text
    from openpyxl.chart.title import Title
    from openpyxl.drawing.text import (
        Paragraph,
        ParagraphProperties,
        RegularTextRun,
        RichTextProperties,
    )

    run = RegularTextRun(rPr=_letters(), t=text)
    paragraph = Paragraph(pPr=ParagraphProperties(defRPr=_letters()), r=[run])
    return Title(tx=Text(rich=RichText(bodyPr=RichTextProperties(), p=[paragraph])))
