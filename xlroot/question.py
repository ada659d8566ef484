"""Question: one solve as it was asked."""

from __future__ import annotations

from dataclasses import dataclass

from xlroot.cells import Cell
from xlroot.stopping import SafeSide


@dataclass(frozen=True, slots=True)
class Question:
    """Which cell is sought, which cell is to become zero, where, how and how tightly.

    `low` and `high` bound the bracket, in the unknown's unit; for an open method they are the
    limits that no iterate may leave. `tolerance` is absolute, in the unknown's unit; None leaves
    it to `xlroot.stopping.customary`. `start` is the first iterate of an open method, None the
    middle of the limits. `recalculate` asks that no saved value be used at all.
    """

    residual: Cell
    unknown: Cell
    low: float
    high: float
    method: str = "auto"
    tolerance: float | None = None
    safe_side: SafeSide = SafeSide.NONE
    start: float | None = None
    recalculate: bool = False
