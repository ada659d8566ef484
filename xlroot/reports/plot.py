"""The residual over the bracket, drawn with characters.

Braille cells carry two by four dots each (Unicode block 2800); where a stream has no such
characters, the same picture is drawn with plain ones.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from typing import NamedTuple

from xlroot.reports.curve import Curve, Point
from xlroot.reports.figures import plain

_BRAILLE = 0x2800
_DOTS = ((0x01, 0x08), (0x02, 0x10), (0x04, 0x20), (0x40, 0x80))
"""The bits of a braille cell, by row and column."""


class Marks(NamedTuple):
    """The characters of a picture."""

    root: str
    iterate: str
    fault: str
    axis: str
    line: str | None
    """None for braille dots."""

    @property
    def dots(self) -> tuple[int, int]:
        """Dots across and down in one character."""
        return (1, 1) if self.line else (2, 4)


FINE = Marks("◆", "○", "×", "─", None)
COARSE = Marks("R", "o", "x", "-", ".")


class _Canvas:
    """A grid of characters over a grid of dots; y grows upwards."""

    def __init__(self, curve: Curve, columns: int, rows: int, marks: Marks) -> None:
        self.curve, self.columns, self.rows, self.marks = curve, columns, rows, marks
        self.across, self.down = marks.dots
        self.bits: dict[tuple[int, int], int] = {}
        self.signs: dict[tuple[int, int], str] = {}

    def dot(self, point: Point) -> tuple[int, int]:
        """The dot, counted from the top left corner, that a point falls on."""
        x, y = point
        curve = self.curve
        right, down = self.columns * self.across - 1, self.rows * self.down - 1
        along = _share(x, curve.left, curve.right)
        up = _share(y, curve.bottom, curve.top)
        return round(along * right), round((1.0 - up) * down)

    def spot(self, point: Point) -> tuple[int, int]:
        """The character that a point falls on."""
        column, row = self.dot(point)
        return column // self.across, row // self.down

    def line(self, points: Iterable[Point]) -> None:
        before: tuple[int, int] | None = None
        for point in points:
            now = self.dot(point)
            for column, row in _between(before or now, now):
                spot = column // self.across, row // self.down
                if self.marks.line is None:
                    bit = _DOTS[row % self.down][column % self.across]
                    self.bits[spot] = self.bits.get(spot, 0) | bit
                else:
                    self.signs[spot] = self.marks.line
            before = now

    def sign(self, point: Point, sign: str) -> None:
        self.signs[self.spot(point)] = sign

    def text(self, row: int) -> str:
        zero = self.spot((self.curve.left, 0.0))[1]
        blank = self.marks.axis if row == zero else " "
        return "".join(
            self.signs.get((column, row))
            or (chr(_BRAILLE + self.bits[column, row]) if (column, row) in self.bits else blank)
            for column in range(self.columns)
        )


def drawn(curve: Curve, columns: int, rows: int, marks: Marks, unit: str = "") -> list[str]:
    """The picture as lines no longer than `columns`: a scale at the left, the bracket below."""
    scale = [plain(each, 3).text for each in (curve.top, 0.0, curve.bottom)]
    margin = max(map(len, scale)) + 1
    canvas = _Canvas(curve, max(columns - margin, 10), rows, marks)
    for x in curve.faults:
        canvas.sign((x, 0.0), marks.fault)
    for piece in curve.pieces:
        canvas.line(piece)
    for point in curve.iterates:
        canvas.sign(point, marks.iterate)
    if curve.root is not None:
        canvas.sign((curve.root[0], 0.0), marks.root)
    ticks = {canvas.spot((curve.left, 0.0))[1]: scale[1]}
    ticks.setdefault(0, scale[0])
    ticks.setdefault(rows - 1, scale[2])
    lines = [
        f"{ticks.get(row, ''):>{margin - 1}} {canvas.text(row)}".rstrip() for row in range(rows)
    ]
    ends = plain(curve.left, 6).text, f"{plain(curve.right, 6).text} {unit}".strip()
    gap = max(canvas.columns - len(ends[0]) - len(ends[1]), 1)
    return [*lines, " " * margin + ends[0] + " " * gap + ends[1]]


def legend(curve: Curve, marks: Marks) -> str:
    """What the marks in the picture stand for."""
    parts = []
    if curve.root is not None:
        parts.append(f"{marks.root} root")
    if curve.iterates:
        parts.append(f"{marks.iterate} iterate")
    if curve.faults:
        parts.append(f"{marks.fault} cannot be evaluated")
    if curve.clipped:
        parts.append("cut off where it is larger")
    return "   ".join(parts)


def _share(value: float, low: float, high: float) -> float:
    """How far along from low to high, within 0 and 1; halved first, so that no range overflows."""
    span = high / 2 - low / 2
    share = (value / 2 - low / 2) / span if span else 0.5
    return min(max(share, 0.0), 1.0)


def _between(start: tuple[int, int], end: tuple[int, int]) -> Iterator[tuple[int, int]]:
    """The dots of a straight line, both ends included."""
    across, down = end[0] - start[0], end[1] - start[1]
    steps = max(abs(across), abs(down), 1)
    for step in range(steps + 1):
        yield start[0] + round(across * step / steps), start[1] + round(down * step / steps)
