"""A record as text, for the shell: readable at 80 columns, in a pipe, and in any encoding."""

from __future__ import annotations

import os
import shutil
from collections.abc import Iterable, Iterator, Sequence
from enum import Enum
from typing import NamedTuple, TextIO

from xlroot.record import Record
from xlroot.reports import contents
from xlroot.reports.characters import carries, spelled, width
from xlroot.reports.contents import Content, Fact, Table, text_of
from xlroot.reports.curve import curve
from xlroot.reports.figures import Figure
from xlroot.reports.layout import GAP, Column, Side, hanging, table, wrapped
from xlroot.reports.plot import COARSE, FINE, drawn, legend
from xlroot.verdict import Status

CUSTOMARY_WIDTH = 80
WIDEST = 120
PLOT_ROWS = 12
LABEL_COLUMNS = 24
"""Where the values of facts begin."""

PROVENANCE_COLUMNS = 16
"""The same where a value is a SHA-256 hash, whose 64 digits fit a line of 80 columns then."""

_NOTHING = "—"


class Colour(Enum):
    """Whether text is coloured."""

    NONE = "none"
    ANSI = "ANSI escape sequences (ECMA-48, section 8.3.117)"


class Medium(NamedTuple):
    """What the text is written for."""

    columns: int = CUSTOMARY_WIDTH
    encoding: str = "utf-8"
    colour: Colour = Colour.NONE

    @classmethod
    def of(cls, stream: TextIO) -> Medium:
        """A terminal's own width and colours; 80 columns without colour for anything else.

        COLUMNS sets the width, NO_COLOR or TERM=dumb switches colour off.
        """
        terminal = stream.isatty()
        asked = os.environ.get("COLUMNS", "")
        columns = CUSTOMARY_WIDTH
        if terminal or asked.isdigit():
            columns = shutil.get_terminal_size((CUSTOMARY_WIDTH, 24)).columns
        dull = "NO_COLOR" in os.environ or os.environ.get("TERM") == "dumb"
        return cls(
            min(columns, WIDEST),
            getattr(stream, "encoding", None) or "ascii",
            Colour.ANSI if terminal and not dull else Colour.NONE,
        )

    def say(self, text: str) -> str:
        """The text in characters that the stream can carry."""
        return spelled(text, self.encoding)

    def paint(self, text: str, code: str) -> str:
        return f"\x1b[{code}m{text}\x1b[0m" if self.colour is Colour.ANSI and text else text


PLAIN = Medium()

_BOLD = "1"
_FAINT = "2"
_PAINTS = {
    Status.PROVED: "32",
    Status.BRACKETED: "32",
    Status.CONVERGED: "33",
    Status.REFUSED: "31",
}


def overview(records: Sequence[Record], medium: Medium = PLAIN) -> str:
    """All solves in one table; below it what was refused, and why, and the warnings."""
    if not records:
        return "no solves\n"
    page = _Page(medium)
    page.write(_headline(records))
    page.blank()
    page.extend(_register(records, page))
    refused = [(contents.place(each), contents.reason(each)) for each in records if each.refused]
    page.notes("Refused", refused)
    warnings = [(contents.place(each), text) for each in records for text in each.warnings]
    page.notes("Warnings", warnings)
    return page.text()


def full(record: Record, medium: Medium = PLAIN) -> str:
    """The whole record."""
    page = _Page(medium)
    page.title(f"{contents.place(record)}  {contents.sought(record)}")
    page.write(record.statement)
    page.blank()
    verdict = Fact("Verdict", f"{record.verdict.status.value}: {contents.reason(record)}")
    page.facts((*contents.result(record), verdict))
    page.section("Question", contents.question(record))
    page.section("Search", contents.effort(record))
    page.plot(record)
    page.table(contents.iterates(record))
    page.table(contents.chain(record))
    page.table(contents.held(record))
    page.notes("Warnings", [("", text) for text in record.warnings])
    page.notes("Cautions", [("", text) for text in record.cautions])
    page.section("Provenance", contents.provenance(record), PROVENANCE_COLUMNS)
    return page.text()


def _headline(records: Sequence[Record]) -> str:
    books = dict.fromkeys(contents.book_name(each) for each in records)
    return f"{', '.join(books)}: {contents.tally(records)}"


def _register(records: Sequence[Record], page: _Page) -> Iterator[str]:
    medium = page.medium
    statuses = {each.verdict.status.value: each.verdict.status for each in records}

    def paint(text: str) -> str:
        return medium.paint(text, _PAINTS[statuses[text.strip()]]) if text.strip() else text

    columns = (
        Column("cell"),
        Column("sought", least=12),
        Column("root"),
        Column("bound"),
        Column("verdict", paint=paint),
        Column("iterations", Side.RIGHT),
    )
    rows = [tuple(map(medium.say, _register_row(each))) for each in records]
    short = (*columns[:-1], Column("iter.", Side.RIGHT))
    lines = table(columns, rows, medium.columns) or table(short, rows, medium.columns)
    if lines is not None:
        yield medium.paint(lines[0], _BOLD)
        yield page.rule
        yield from lines[1:]
        return
    for cell, label, *rest in rows:
        yield from hanging(f"{cell}  ", label, medium.columns)
        root, bound, verdict, count = rest
        noun = "iteration" if count == "1" else "iterations"
        told = f"{root}{GAP}{bound}{GAP}" if root != medium.say(_NOTHING) else ""
        if width(told) + 30 > medium.columns:
            yield f"    {told.rstrip()}"
            told = ""
        yield f"    {told}{paint(verdict)}{GAP}{count} {noun}"


def _register_row(record: Record) -> tuple[str, ...]:
    found = contents.figures(record)
    root = bound = _NOTHING
    if found is not None:
        root = f"{found.root.text} {record.unit}".strip()
        bound = f"±{found.bound.text}" if found.bound is not None else "estimate"
    status = record.verdict.status.value
    return (
        contents.place(record),
        contents.sought(record),
        root,
        bound,
        status,
        str(record.iterations),
    )


class _Page:
    """Lines of text as they come."""

    def __init__(self, medium: Medium) -> None:
        self.medium = medium
        self.lines: list[str] = []
        self.fine = carries(medium.encoding, "─◆○×⣿")
        self.rule = medium.paint(("─" if self.fine else "-") * medium.columns, _FAINT)

    def text(self) -> str:
        return "\n".join(self.lines) + "\n"

    def extend(self, lines: Iterable[str]) -> None:
        self.lines.extend(lines)

    def blank(self) -> None:
        self.lines.append("")

    def write(self, text: str) -> None:
        self.extend(wrapped(self.medium.say(text), self.medium.columns))

    def title(self, text: str) -> None:
        for line in wrapped(self.medium.say(text), self.medium.columns):
            self.lines.append(self.medium.paint(line, _BOLD))
        self.lines.append(self.rule)

    def heading(self, text: str) -> None:
        self.blank()
        self.lines.append(self.medium.paint(text, _BOLD))

    def facts(self, facts: Sequence[Fact], indent: int = LABEL_COLUMNS) -> None:
        for fact in facts:
            label = f"  {self.medium.say(fact.label)}"
            value = self.medium.say(f"{text_of(fact.content)} {fact.unit}".strip())
            first = label + " " * max(indent - width(label), 2)
            self.extend(hanging(first, value, self.medium.columns))

    def section(self, title: str, facts: Sequence[Fact], indent: int = LABEL_COLUMNS) -> None:
        self.heading(title)
        self.facts(facts, indent)

    def notes(self, title: str, notes: Sequence[tuple[str, str]]) -> None:
        """Paragraphs under a heading, each with what it is about; nothing where there are none."""
        if not notes:
            return
        self.heading(title)
        for about, text in notes:
            subject = f"  {self.medium.say(about)}  " if about else "  "
            if width(subject) > self.medium.columns // 2:
                self.lines.append(subject.rstrip())
                subject = "    "
            self.extend(hanging(subject, self.medium.say(text), self.medium.columns))

    def plot(self, record: Record) -> None:
        shape = curve(record)
        if shape is None:
            return
        marks = FINE if self.fine else COARSE
        unit = f" [{record.residual_unit}]" if record.residual_unit.strip() else ""
        self.heading(self.medium.say(f"Residual{unit} over the bracket"))
        unit = self.medium.say(record.unit)
        self.extend(drawn(shape, self.medium.columns, PLOT_ROWS, marks, unit))
        self.lines.append(legend(shape, marks))

    def table(self, content: Table) -> None:
        if not content.rows:
            return
        self.heading(content.title)
        rows = [tuple(self.medium.say(text_of(each)) for each in row) for row in content.rows]
        for keep in _choices(content.headings):
            columns = [
                _column(content.headings[at], [row[at] for row in content.rows]) for at in keep
            ]
            lines = table(columns, [[row[at] for at in keep] for row in rows], self._inner)
            if lines is not None:
                self.extend(f"  {line}" for line in lines)
                return
        for first, second, *rest in rows:
            self.extend(hanging(f"  {first}  ", second, self.medium.columns))
            told = GAP.join(filter(None, rest))
            self.extend(hanging("      ", told, self.medium.columns))

    @property
    def _inner(self) -> int:
        return self.medium.columns - 2


_DISPENSABLE = (("low", "high"), ("low", "high", "slope"))
"""Columns that a narrow page may do without, in turn."""


def _choices(headings: Sequence[str]) -> Iterator[list[int]]:
    every = list(range(len(headings)))
    yield every
    if "width" in headings:
        for dropped in _DISPENSABLE:
            yield [at for at in every if headings[at] not in dropped]


_FLEXIBLE: dict[str, int] = {"label": 10, "formula": 16}


def _column(heading: str, cells: Sequence[Content]) -> Column:
    numeric = any(isinstance(each, Figure) for each in cells) and heading != "x"
    return Column(heading, Side.RIGHT if numeric else Side.LEFT, _FLEXIBLE.get(heading))
