"""The page of one solve: what was asked, what was found, how well it is known, and on what it
rests; then lines to sign, and every cell and iterate in tables."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from xlroot.record import Record
from xlroot.reports import contents
from xlroot.reports.contents import Fact, text_of
from xlroot.reports.curve import curve, narrowing
from xlroot.reports.figures import SHEET_DIGITS, Figure
from xlroot.reports.sheet import ink
from xlroot.reports.sheet.charts import Charts, Place
from xlroot.reports.sheet.ink import Letter
from xlroot.reports.sheet.names import printable
from xlroot.reports.sheet.paper import PAGE_HEIGHT, Paper, Span
from xlroot.reports.sheet.tables import write_cells, write_iterates

if TYPE_CHECKING:
    from openpyxl.worksheet.worksheet import Worksheet

WIDTHS = (15.0, 20.0, 16.5, 9.5, 15.5, 15.5)
LEFT, RIGHT = Span(1, 4), Span(5, 6)
_LABEL, _VALUE, _UNIT, _SECOND, _LAST = 1, 3, 4, 5, 6

CHART_HEIGHTS = 118.0, 190.0
"""The least and the most in points: charts give way to what has to be signed."""

HEADING, FACT, GAP, NAMES, SIGNATURE = 13.0, 12.5, 6.0, 11.0, 20.0
WARNING, CAUTION = Letter(ink.SMALL, ink.WARN), Letter(ink.FINE, ink.GREY)
LONGEST_TITLE = 120
SIGNATURES = ("prepared", "checked", "approved")


def write_page(sheet: Worksheet, record: Record, count: str) -> None:
    """Fills the sheet with a record; `count` says which of how many it is."""
    paper = Paper(sheet, WIDTHS)
    head = _title(paper, record)
    _statement(paper, record)
    _result(paper, record)
    _question(paper, record)
    _charts(paper, record)
    _paragraphs(paper, "Warnings", record.warnings, WARNING)
    _paragraphs(paper, "Cautions", record.cautions, CAUTION)
    _provenance(paper, record)
    _signatures(paper)
    if record.steps or record.iterates:
        paper.new_page()
    write_cells(paper, contents.chain(record), record.steps)
    write_cells(paper, contents.held(record), record.held)
    write_iterates(paper, contents.iterates(record))
    paper.set_up(
        paper.row - 1,
        head,
        left=contents.book_name(record),
        right=f"solve {count}",
        footer=f"{contents.day(record)}   fingerprint {record.fingerprint[:16] or 'none'}",
    )


def _title(paper: Paper, record: Record) -> int:
    """The rows that every printed page repeats; gives the number of the last."""
    paper.put(1, "RECORD OF A SOLVE", ink.HEADING)
    paper.put(_LAST, contents.made_with(record), ink.FAINT, side="right")
    paper.end_row(12.0)
    title = printable(contents.sought(record), LONGEST_TITLE)
    paper.end_row(paper.paragraph(paper.whole, title, Letter(ink.TITLE, ink.BLACK, "bold")))
    paper.paragraph(paper.whole, f"in {contents.place(record)}", ink.LABEL)
    paper.rule(paper.whole, colour=ink.ACCENT)
    paper.end_row(15.0)
    paper.head = paper.used
    return paper.row - 1


def _statement(paper: Paper, record: Record) -> None:
    paper.gap()
    paper.end_row(paper.paragraph(paper.whole, record.statement))
    paper.gap()


def _result(paper: Paper, record: Record) -> None:
    """The box that is read first: root and bound at the left, verdict and reason at the right."""
    status = record.verdict.status
    verdict = Letter(12.0, ink.STATUS_COLOURS[status], "bold")
    if record.refused:
        top = paper.row
        paper.put(1, "Verdict", ink.LABEL)
        paper.put(2, status.value, verdict)
        paper.end_row(20.0)
        span, letter = Span(1, 6), Letter(11.0, ink.STATUS_COLOURS[status])
        paper.end_row(paper.paragraph(span, contents.reason(record), letter) + 4)
        paper.tint(top, paper.row - 1, paper.whole)
        paper.gap(8.0)
        return
    facts = contents.result(record, SHEET_DIGITS)
    top = paper.row
    paper.put(_SECOND, status.value, verdict)
    paper.merge(RIGHT, top, top)
    for n, fact in enumerate(facts):
        paper.put(_LABEL, fact.label, ink.LABEL)
        letter = Letter(ink.ROOT, ink.BLACK, "bold") if n == 0 else ink.PLAIN
        if isinstance(fact.content, Figure):
            column = 2 if n == 0 else _VALUE
            paper.put(column, fact.content, letter, side="right")
            paper.unit(_UNIT, fact.unit, ink.LABEL)
            if n == 0:
                paper.merge(Span(2, _VALUE), paper.row, paper.row)
        else:
            paper.put(_VALUE, fact.content, letter)
        paper.end_row(22.0 if n == 0 else FACT)
    reason = contents.reason(record)
    height = paper.wrap(RIGHT, reason, row=top + 1)
    short = height - FACT * (len(facts) - 1)
    if short > 0:
        paper.end_row(short)
    paper.merge(RIGHT, top + 1, paper.row - 1)
    paper.tint(top, paper.row - 1, paper.whole)
    paper.gap(8.0)


def _question(paper: Paper, record: Record) -> None:
    """The question at the left, the search at the right."""
    paper.heading("Question", LEFT)
    paper.heading("Search", RIGHT)
    paper.end_row(HEADING)
    left, right = contents.question(record), contents.effort(record)
    for n in range(max(len(left), len(right))):
        height = FACT
        if n < len(left):
            _fact(paper, left[n], _LABEL, 2, Span(2, 4))
        if n < len(right):
            fact = right[n]
            if not fact.label and isinstance(fact.content, str):
                height = max(height, paper.paragraph(RIGHT, fact.content, ink.FAINT))
            else:
                _fact(paper, fact, _SECOND, _LAST, Span(_LAST, _LAST))
        paper.end_row(height)
    paper.gap()


def _fact(paper: Paper, fact: Fact, label: int, value: int, span: Span) -> None:
    paper.put(label, fact.label, ink.LABEL)
    paper.put(value, fact.content, unit=fact.unit)
    paper.merge(span, paper.row, paper.row)


def _charts(paper: Paper, record: Record) -> None:
    shape, lengths = curve(record), narrowing(record)
    if shape is None and lengths is None:
        return
    wide = paper.whole if lengths is None else Span(1, 3)
    narrow = paper.whole if shape is None else Span(4, 6)
    if shape is not None:
        cut = ", cut off where it is larger" if shape.clipped else ""
        paper.heading(f"Residual over the bracket{cut}", wide)
    if lengths is not None:
        paper.heading(f"{lengths.what} by iteration", narrow)
    paper.end_row(HEADING)
    charts = Charts(paper.sheet)
    least, most = CHART_HEIGHTS
    height = min(max(PAGE_HEIGHT - paper.used - GAP - 2.0 - _closing(paper, record), least), most)
    if shape is not None:
        charts.residual(shape, record, _place(paper, wide, height))
    if lengths is not None:
        charts.narrowing(lengths, record, _place(paper, narrow, height))
    paper.end_row(height)
    paper.gap(GAP)


def _place(paper: Paper, span: Span, height: float) -> Place:
    return Place(span.first, paper.row, paper.points(span) - 6.0, height)


def _paragraphs(paper: Paper, title: str, texts: Sequence[str], letter: Letter) -> None:
    if not texts:
        return
    paper.keep(HEADING + paper.height_of(texts[0], paper.whole, letter))
    paper.heading(title)
    paper.end_row(HEADING)
    for text in texts:
        paper.keep(paper.height_of(text, paper.whole, letter))
        paper.end_row(paper.paragraph(paper.whole, text, letter))
    paper.gap(GAP)


def _provenance(paper: Paper, record: Record) -> None:
    facts = contents.provenance(record)
    paper.keep(HEADING + FACT * len(facts))
    paper.heading("Provenance")
    paper.end_row(HEADING)
    for fact in facts:
        paper.put(1, fact.label, ink.FAINT)
        height = paper.paragraph(Span(2, 6), text_of(fact.content), ink.CELL)
        paper.end_row(max(height, 11.5))
    paper.gap(4.0)


def _signatures(paper: Paper) -> None:
    """Lines for a name, a date and a signature each."""
    paper.keep(NAMES + SIGNATURE * len(SIGNATURES))
    for column, text in ((2, "name"), (_VALUE, "date"), (_SECOND, "signature")):
        paper.put(column, text, ink.FAINT)
    paper.end_row(NAMES)
    for text in SIGNATURES:
        cell = paper.put(1, text, ink.LABEL)
        cell.alignment = ink.aligned("left", down="bottom")
        for span in (Span(2, 2), Span(3, 4), RIGHT):
            paper.rule(span)
        paper.end_row(SIGNATURE)


def _closing(paper: Paper, record: Record) -> float:
    """The height of what follows the charts, so that they leave room for it on the page."""
    notes = (
        (record.warnings, WARNING),
        (record.cautions, CAUTION),
    )
    height = sum(
        HEADING + GAP + sum(paper.height_of(text, paper.whole, letter) for text in texts)
        for texts, letter in notes
        if texts
    )
    provenance = HEADING + FACT * len(contents.provenance(record)) + 4.0
    return height + provenance + NAMES + SIGNATURE * len(SIGNATURES)
