"""What there is to draw of a record: the residual over the bracket, and how the search narrowed.

Plots share these so that every report shows the same picture.
"""

from __future__ import annotations

import math
from itertools import pairwise
from typing import NamedTuple

from xlroot.record import Record
from xlroot.scan import FeatureKind, Look

Point = tuple[float, float]

SPIKE = 8.0
"""The picture is cut off where the largest residual exceeds this many times the magnitude that
nine of ten trial values stay below (own choice): a pole would press everything else flat."""


class Curve(NamedTuple):
    """The residual over the bracket.

    `pieces` are runs of neighbouring trial values; between them the residual cannot be evaluated
    or runs off the picture. `bottom` and `top` bound the picture and hold 0.
    """

    pieces: tuple[tuple[Point, ...], ...]
    iterates: tuple[Point, ...]
    root: Point | None
    left: float
    right: float
    bottom: float
    top: float
    clipped: bool
    """Whether the residual leaves the picture somewhere."""
    faults: tuple[float, ...]
    """Trial values at which the residual cannot be evaluated."""


class Narrowing(NamedTuple):
    """A positive length by iteration, for a logarithmic axis; `what` says which length."""

    what: str
    points: tuple[tuple[int, float], ...]


def curve(record: Record) -> Curve | None:
    """The residual over the bracket; None where it was looked at nowhere."""
    asked = record.question
    if record.look is None:
        return None
    samples = _samples(record.look)
    values = [f for _, f in samples if f is not None]
    iterates = tuple(
        (row.x, row.f)
        for row in record.iterates
        if math.isfinite(row.f) and asked.low <= row.x <= asked.high
    )
    if not values:
        return None
    bottom, top, clipped = _limits(values)
    root = None
    if record.root is not None:
        root = (record.root, record.residual_at_root or 0.0)
    return Curve(
        pieces=_pieces(samples, _breaks(record.look), bottom, top),
        iterates=tuple(point for point in iterates if bottom <= point[1] <= top),
        root=root,
        left=asked.low,
        right=asked.high,
        bottom=bottom,
        top=top,
        clipped=clipped,
        faults=tuple(x for x, f in samples if f is None),
    )


def _samples(look: Look) -> list[tuple[float, float | None]]:
    """Trial values in order, None where the residual has no finite value."""
    return [(x, f if isinstance(f, float) and math.isfinite(f) else None) for x, f in look.samples]


def _breaks(look: Look) -> list[float]:
    """Where no line may join two trial values: poles and jumps."""
    return [each.low for each in look.features if each.kind in _BREAKS]


_BREAKS = (FeatureKind.POLE, FeatureKind.JUMP)


def _limits(values: list[float]) -> tuple[float, float, bool]:
    sizes = sorted(abs(value) for value in values)
    usual = sizes[len(sizes) * 9 // 10]
    bottom, top = min(*values, 0.0), max(*values, 0.0)
    if bottom == top:
        return -1.0, 1.0, False
    if not usual or sizes[-1] <= SPIKE * usual:
        return bottom, top, False
    limit = _round_up(2.0 * usual)
    # Ends of the axis are round numbers, so that its ticks are.
    below = -_round_up(-bottom) if bottom < 0.0 else 0.0
    above = _round_up(top) if top > 0.0 else 0.0
    return max(below, -limit), min(above, limit), True


def _round_up(number: float) -> float:
    """The number rounded up to one significant digit, for the end of an axis."""
    unit: float = 10.0 ** math.floor(math.log10(number))
    return math.ceil(number / unit) * unit


def _pieces(
    samples: list[tuple[float, float | None]], breaks: list[float], bottom: float, top: float
) -> tuple[tuple[Point, ...], ...]:
    pieces: list[list[Point]] = [[]]
    before = -math.inf
    for x, f in samples:
        if any(before <= each < x for each in breaks):
            pieces.append([])
        before = x
        if f is None or not bottom <= f <= top:
            pieces.append([])
        else:
            pieces[-1].append((x, f))
    return tuple(tuple(piece) for piece in pieces if piece)


def narrowing(record: Record) -> Narrowing | None:
    """The bracket's width by iteration, or the step's length for a method without a bracket."""
    rows = record.iterates
    widths = {
        row.n: row.high - row.low
        for row in rows
        if row.low is not None and row.high is not None and row.high > row.low
    }
    if len(widths) > 1:
        return Narrowing("bracket width", tuple(widths.items()))
    steps = tuple(
        (after.n, abs(after.x - before.x))
        for before, after in pairwise(rows)
        if after.x != before.x
    )
    return Narrowing("step", steps) if len(steps) > 1 else None
