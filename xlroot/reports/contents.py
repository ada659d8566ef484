"""What a record says: facts and tables in words and figures, in the order in which they are read.

Every report draws on these, so that the terminal, the page and what comes later agree to the
digit.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from itertools import pairwise
from pathlib import PurePath
from typing import NamedTuple

from xlroot.record import Line, Record
from xlroot.reports.figures import (
    INPUT_DIGITS,
    MOST_DIGITS,
    VALUE_DIGITS,
    Figure,
    Known,
    known,
    plain,
)
from xlroot.search import Iterate
from xlroot.stopping import SafeSide
from xlroot.values import Fault, Value
from xlroot.verdict import Status

Content = str | Figure

NOTHING = "none"


class Fact(NamedTuple):
    """One thing that a record says: `label`, what it is, in which unit."""

    label: str
    content: Content
    unit: str = ""


class Table(NamedTuple):
    """Rows under headings."""

    title: str
    headings: tuple[str, ...]
    rows: tuple[tuple[Content, ...], ...]


def content(value: Value, digits: int) -> Content:
    """A cell's value as reports show it."""
    if value is None:
        return "(blank)"
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, Fault | str):
        return str(value)
    return plain(value, digits)


def text_of(content: Content) -> str:
    """The content as text."""
    return content.text if isinstance(content, Figure) else content


def sought(record: Record) -> str:
    """What the solve is called: its label, or the unknown's address where it has none."""
    return record.label.strip() or str(record.question.unknown)


def varied(record: Record) -> str:
    """The words beside the unknown, or its address: what an axis of trial values is called."""
    return record.unknown_label.strip() or str(record.question.unknown)


def place(record: Record) -> str:
    """Where the solve stands: the cell that asked, or else the unknown."""
    return str(record.cell or record.question.unknown)


def figures(record: Record, most: int = MOST_DIGITS) -> Known | None:
    """The root and its enclosure with the digits that are known; None if refused."""
    if record.root is None:
        return None
    verdict = record.verdict
    return known(record.root, verdict.low, verdict.high, _estimate(record), most)


def _estimate(record: Record) -> float:
    """The error of a root without an enclosure: the tolerance or, if larger, the last step."""
    steps = (abs(after.x - before.x) for before, after in pairwise(record.iterates[-2:]))
    return max(record.tolerance, *steps, 0.0)


def result(record: Record, most: int = MOST_DIGITS) -> tuple[Fact, ...]:
    """Root, enclosure, residual and slope there; nothing if refused."""
    found = figures(record, most)
    if found is None:
        return ()
    facts = [Fact("Root", found.root, record.unit)]
    if found.low is not None and found.high is not None and found.bound is not None:
        facts.append(Fact("Enclosure, low end", found.low, record.unit))
        facts.append(Fact("Enclosure, high end", found.high, record.unit))
        facts.append(Fact("Bound, plus or minus", found.bound, record.unit))
    else:
        facts.append(Fact("Enclosure", "none: the error is an estimate"))
    if record.residual_at_root is not None:
        there = plain(record.residual_at_root, 4)
        facts.append(Fact("Residual at the root", there, record.residual_unit))
    if record.slope_at_root is not None:
        slope = plain(record.slope_at_root, 6)
        facts.append(Fact("Slope there", slope, _per(record.residual_unit, record.unit)))
    if record.conditioning is not None:
        moved = plain(record.conditioning, 4)
        facts.append(Fact("Conditioning", moved, _per(record.unit, record.residual_unit)))
    return tuple(facts)


def question(record: Record) -> tuple[Fact, ...]:
    """The question as it was asked."""
    asked = record.question
    facts = [
        Fact("Unknown", str(asked.unknown)),
        Fact("holds in the book", content(record.present, INPUT_DIGITS), record.unit),
        Fact("Residual", str(asked.residual)),
        Fact("", record.residual_label.strip()),
        Fact("Bracket, low end", plain(asked.low, INPUT_DIGITS), record.unit),
        Fact("Bracket, high end", plain(asked.high, INPUT_DIGITS), record.unit),
    ]
    if math.isfinite(record.tolerance):
        facts.append(Fact("Tolerance", plain(record.tolerance, 6), record.unit))
    if asked.start is not None:
        facts.append(Fact("Start", plain(asked.start, INPUT_DIGITS), record.unit))
    if asked.safe_side is not SafeSide.NONE:
        facts.append(Fact("Safe side", f"residual {asked.safe_side.name.lower()}"))
    if asked.recalculate:
        facts.append(Fact("Saved values", "none used, all recalculated"))
    return tuple(fact for fact in facts if fact.label or fact.content)


def effort(record: Record) -> tuple[Fact, ...]:
    """The method and what it took, and what another method says."""
    facts = [Fact("Method", record.method or record.question.method)]
    if record.method_note:
        facts.append(Fact("", record.method_note))
    if record.predicted_iterations is not None:
        facts.append(Fact("Iterations predicted", _count(record.predicted_iterations)))
    facts.append(Fact("Iterations used", _count(record.iterations)))
    facts.append(Fact("Evaluations", _count(record.evaluations)))
    if record.order is not None:
        facts.append(Fact("Order observed", plain(record.order, 3)))
    if record.contraction is not None:
        facts.append(Fact("Contraction observed", plain(record.contraction, 3)))
    second = record.second
    if second is not None:
        facts.append(Fact("Second method", second.method))
        if second.root is None or second.difference is None:
            facts.append(Fact("found", "no root"))
        else:
            facts.append(Fact("differs by", plain(second.difference, 2), record.unit))
    elif not record.refused:
        facts.append(Fact("Second method", NOTHING))
    return tuple(facts)


def provenance(record: Record) -> tuple[Fact, ...]:
    """The file, the programs, the time and the fingerprint."""
    origin = record.provenance
    versions = ", ".join(f"{program} {version}" for program, version in origin.versions)
    return (
        Fact("Workbook", book_name(record)),
        Fact("SHA-256", origin.digest or "none: not read from a file"),
        Fact("Solved", f"{origin.time:%Y-%m-%d %H:%M:%S} UTC"),
        Fact("With", versions),
        Fact("Fingerprint", record.fingerprint or NOTHING),
    )


def reason(record: Record) -> str:
    """The verdict's reason, with the cell where it does not name it itself."""
    verdict = record.verdict
    if verdict.cell is None or verdict.cell in verdict.reason:
        return verdict.reason
    return f"{verdict.cell}: {verdict.reason}"


def tally(records: Sequence[Record]) -> str:
    """How many solves, and how many of each verdict."""
    statuses = [record.verdict.status for record in records]
    counts = [f"{statuses.count(each)} {each.value}" for each in Status if each in statuses]
    noun = "solve" if len(records) == 1 else "solves"
    return f"{len(records)} {noun}: {', '.join(counts)}"


def made_with(record: Record) -> str:
    """The program and its version."""
    program, version = record.provenance.versions[0]
    return f"{program} {version}"


def day(record: Record) -> str:
    """When the solve was run."""
    return f"{record.provenance.time:%Y-%m-%d %H:%M} UTC"


def book_name(record: Record) -> str:
    """The workbook's file name, without its folders."""
    return PurePath(record.provenance.book).name or "unsaved workbook"


def chain(record: Record) -> Table:
    """The formulas between unknown and residual, in calculation order."""
    where = "value now" if record.refused else "value at the root"
    return Table(
        "Chain",
        ("cell", "label", where, "unit", "formula"),
        tuple((*_row(line, VALUE_DIGITS), line.formula) for line in record.steps),
    )


def held(record: Record) -> Table:
    """The cells that the chain reads and that do not depend on the unknown."""
    return Table(
        "Held cells",
        ("cell", "label", "value", "unit", "formula"),
        tuple((*_row(line, INPUT_DIGITS), line.formula) for line in record.held),
    )


def _row(line: Line, digits: int) -> tuple[Content, ...]:
    return str(line.cell), line.label, content(line.value, digits), line.unit


def iterates(record: Record) -> Table:
    """Every iterate with the residual, the slope and the bracket, as far as the method has them."""
    rows = record.iterates
    sloped = any(row.slope is not None for row in rows)
    enclosed = any(row.low is not None and row.high is not None for row in rows)
    headings = ["n", "x", "residual"]
    headings += ["slope"] if sloped else []
    headings += ["low", "high", "width"] if enclosed else []
    lines: list[tuple[Content, ...]] = []
    for row in rows:
        line: list[Content] = [_count(row.n), plain(row.x, INPUT_DIGITS), plain(row.f, 6)]
        if sloped:
            line.append(_optional(row.slope, 6))
        if enclosed:
            line.extend(_bracket(row))
        lines.append(tuple(line))
    return Table("Iterates", tuple(headings), tuple(lines))


def _bracket(row: Iterate) -> tuple[Content, ...]:
    if row.low is None or row.high is None:
        return "", "", ""
    ends = plain(row.low, INPUT_DIGITS), plain(row.high, INPUT_DIGITS)
    return (*ends, plain(row.high - row.low, 3))


def _optional(number: float | None, digits: int) -> Content:
    return "" if number is None else plain(number, digits)


def _count(number: int) -> Figure:
    return Figure(float(number), str(number))


def _per(above: str, below: str) -> str:
    """The unit of a quotient; empty where neither part has one."""
    above, below = above.strip(), below.strip()
    if not below:
        return above
    below = f"({below})" if any(mark in below for mark in "/·* ") else below
    return f"{above or '1'}/{below}"
