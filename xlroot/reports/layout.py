"""Text laid out in a fixed width: paragraphs, facts, tables; nothing is ever cut off.

A cell that does not fit takes more lines, and a table that does not fit takes two lines a row.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from enum import Enum
from typing import NamedTuple

from xlroot.reports.characters import width

GAP = "  "


class Side(Enum):
    """Where text stands in its column."""

    LEFT = "left"
    RIGHT = "right"


class Column(NamedTuple):
    """One column of a table; a flexible one may wrap down to `least`, others keep their width.

    `paint` colours a text without changing its width.
    """

    heading: str
    side: Side = Side.LEFT
    least: int | None = None
    paint: Callable[[str], str] = str


_BREAKABLE = frozenset(",;+*/^&=<>)-_:")
"""Signs after which a long word, such as a formula, may be broken."""


Measure = Callable[[str], float]


def wrapped(text: str, room: float, measure: Measure = width) -> list[str]:
    """The text in lines no wider than `room`, broken at spaces, within a word if it must be."""
    lines: list[str] = []
    line = ""
    for word in text.split(" "):
        joined = f"{line} {word}" if line else word
        if measure(joined) <= room:
            line = joined
            continue
        if line:
            lines.append(line)
        *full, line = _chopped(word, room, measure)
        lines.extend(full)
    return [*lines, line]


def _chopped(word: str, room: float, measure: Measure) -> Iterator[str]:
    start = 0
    while True:
        end, used = start, 0.0
        while end < len(word) and (end == start or used + measure(word[end]) <= room):
            used += measure(word[end])
            end += 1
        if end == len(word):
            yield word[start:]
            return
        middle = start + (end - start) // 2
        at = max((n + 1 for n in range(middle, end) if word[n] in _BREAKABLE), default=end)
        yield word[start:at]
        start = at


def hanging(first: str, text: str, columns: int) -> list[str]:
    """The text beside a heading, its further lines indented to stand below the first."""
    indent = width(first)
    body = wrapped(text, max(columns - indent, 20))
    return [first + body[0], *(" " * indent + line for line in body[1:])]


def padded(text: str, columns: int, side: Side) -> str:
    """The text with spaces up to the width of its column."""
    spaces = " " * (columns - width(text))
    return text + spaces if side is Side.LEFT else spaces + text


def table(columns: Sequence[Column], rows: Sequence[Sequence[str]], total: int) -> list[str] | None:
    """The headings in one line, then the rows; None if it cannot fit."""
    widths = _widths(columns, rows, total)
    if widths is None:
        return None
    unpainted = [column._replace(paint=str) for column in columns]
    lines = [_row([column.heading for column in columns], unpainted, widths)]
    for row in rows:
        lines.extend(_folded(row, columns, widths))
    return lines


def _widths(
    columns: Sequence[Column], rows: Sequence[Sequence[str]], total: int
) -> list[int] | None:
    natural = [
        max(width(column.heading), *(width(row[at]) for row in rows), 0)
        for at, column in enumerate(columns)
    ]
    room = total - len(GAP) * (len(columns) - 1)
    widths = [
        wide if column.least is None else min(wide, room)
        for wide, column in zip(natural, columns, strict=True)
    ]
    while sum(widths) > room:
        yielding = [
            at
            for at, column in enumerate(columns)
            if column.least is not None and widths[at] > column.least
        ]
        if not yielding:
            return None
        widths[max(yielding, key=lambda at: widths[at])] -= 1
    return widths


def _folded(row: Sequence[str], columns: Sequence[Column], widths: Sequence[int]) -> Iterator[str]:
    cells = [wrapped(text, wide) for text, wide in zip(row, widths, strict=True)]
    for at in range(max(map(len, cells))):
        yield _row([cell[at] if at < len(cell) else "" for cell in cells], columns, widths)


def _row(texts: Sequence[str], columns: Sequence[Column], widths: Sequence[int]) -> str:
    parts = [
        column.paint(padded(text, wide, column.side))
        for text, column, wide in zip(texts, columns, widths, strict=True)
    ]
    return GAP.join(parts).rstrip()
