"""Record: everything about one solve, enough to repeat it and to sign it."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime

from xlroot.cells import Cell
from xlroot.question import Question
from xlroot.scan import Look
from xlroot.search import Iterate
from xlroot.values import Value
from xlroot.verdict import Status, Verdict
from xlroot.versions import versions

CAUTIONS = (
    "The held values, the formulas and the choice of bracket are the engineer's; xlroot shows "
    "only that this residual is met within this bracket, as far as the verdict says.",
    "Other roots outside the bracket are not considered; within it, only as far as the verdict "
    "says.",
    "Where a number can hurt someone, local codes and licensed practice decide, and an "
    "independent check is due before use.",
)
"""What every record tells its reader."""


@dataclass(frozen=True, slots=True)
class Line:
    """One cell of a calculation as the record shows it."""

    cell: Cell
    label: str
    unit: str
    formula: str
    """As written, with `=`; empty for a cell that holds a value."""
    value: Value


@dataclass(frozen=True, slots=True)
class SecondOpinion:
    """The same question answered by a method of another kind."""

    method: str
    root: float | None
    difference: float | None
    """Second root minus first, in the unknown's unit."""


@dataclass(frozen=True, slots=True)
class Provenance:
    """Where a record comes from."""

    book: str
    digest: str
    """SHA-256 of the file, in hexadecimal."""
    time: datetime
    """In UTC."""

    @property
    def versions(self) -> tuple[tuple[str, str], ...]:
        """The programs that the solve rests on with their versions, xlroot first."""
        return versions()


@dataclass(frozen=True, slots=True)
class Record:
    """One solve: statement, result, how well it is known, and every cell that it rests on.

    `cell` is the cell of the XLROOT formula that asked, None when asked otherwise. `root` is None
    if and only if the verdict is refused. `steps` are the chain cells with their values at the
    root (at the unknown's present value when refused), in calculation order; `held` the cells
    that the chain reads and that do not depend on the unknown.
    """

    cell: Cell | None
    question: Question
    statement: str
    label: str
    """The words beside the cell that asked, or beside the unknown."""
    unknown_label: str
    unit: str
    residual_label: str
    residual_unit: str
    present: Value
    """What the unknown's cell holds in the book."""
    verdict: Verdict
    root: float | None
    residual_at_root: float | None
    slope_at_root: float | None
    """By central difference: d(residual)/d(unknown)."""
    method: str
    method_note: str
    """Why the method was chosen, and how slopes were taken, where that applies."""
    tolerance: float
    predicted_iterations: int | None
    iterations: int
    evaluations: int
    iterates: tuple[Iterate, ...]
    contraction: float | None
    """|g'| as observed, for a fixed-point search."""
    order: float | None
    """Order of convergence as observed."""
    second: SecondOpinion | None
    look: Look | None
    """The residual over the bracket."""
    steps: tuple[Line, ...]
    held: tuple[Line, ...]
    warnings: tuple[str, ...]
    fingerprint: str
    provenance: Provenance
    cautions: tuple[str, ...] = CAUTIONS

    @property
    def refused(self) -> bool:
        return self.verdict.status is Status.REFUSED

    @property
    def conditioning(self) -> float | None:
        """Change of the root for a unit change of the residual, 1/|slope|; None if unknown."""
        if not self.slope_at_root:
            return None
        return 1.0 / abs(self.slope_at_root)
