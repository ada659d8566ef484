"""Desk: what the solves of one book share, and a chain made ready to be trusted."""

from __future__ import annotations

from dataclasses import dataclass

from xlroot import baseline
from xlroot.book import Book, Unsaved
from xlroot.cells import Cell
from xlroot.chain import trace
from xlroot.depend import Bindings
from xlroot.errors import Unsupported
from xlroot.ledger import Ledger, Policy
from xlroot.program import Program


@dataclass(frozen=True, slots=True)
class Desk:
    """What the solves of one book share: its bound formulas and its values.

    `saved` reads the book as the host left it; `present` has the roots of earlier solves in
    place, where they differ from what was saved.
    """

    bindings: Bindings
    saved: Ledger
    present: Ledger

    @classmethod
    def of(cls, book: Book) -> Desk:
        """A desk with the book as it was saved."""
        bindings = Bindings(book)
        ledger = Ledger(bindings)
        return cls(bindings, ledger, ledger)

    @property
    def book(self) -> Book:
        return self.bindings.book


@dataclass(frozen=True, slots=True)
class Prepared:
    """A compiled chain, what has to be said of it, and why it may not be trusted, if so."""

    program: Program
    warnings: tuple[str, ...]
    refusal: Unsupported | None


def prepare(desk: Desk, residual: Cell, unknown: Cell, *, recalculate: bool = False) -> Prepared:
    """The compiled chain between two cells, held against the sheet's saved values.

    Raises IndependentError where no formulas run between them, Unsupported, with the cell, where
    the chain cannot be evaluated faithfully.
    """
    if desk.book.rounds_as_shown:
        raise Unsupported(
            "the workbook is set to calculate with the precision that cells display, which xlroot "
            "does not follow; set it to full precision, recalculate and save"
        )
    held = Ledger(desk.bindings, Policy.COMPUTED) if recalculate else desk.present
    chain = trace(desk.bindings, held, residual, unknown)
    program = Program(chain, held)
    warnings = []
    refusal = None
    if recalculate:
        warnings.append("No saved value of a formula was used: all were computed by xlroot.")
    else:
        checked = _held_against_host(desk, program)
        if checked.difference is not None:
            refusal = Unsupported(str(checked.difference), str(checked.difference.cell))
        elif checked.unsaved:
            warnings.append(
                f"{checked.unsaved} of {len(chain.steps)} chain cells were saved without a value; "
                "there the formulas could not be held against the host."
            )
    if chain.circular:
        named = ", ".join(str(cell) for cell in chain.circular[:4])
        warnings.append(
            f"Held cells lie in a circular reference ({named}); their saved values are used."
        )
    return Prepared(program, tuple(warnings), refusal)


def _held_against_host(desk: Desk, program: Program) -> baseline.Baseline:
    """The baseline check, on what the host saved alone.

    A held root that was never saved leaves the host's own values unknown: then no cell counts as
    checked.
    """
    present = desk.book.saved(program.chain.unknown)
    assert not isinstance(present, Unsaved)
    if desk.saved is desk.present:
        return baseline.check(program, present)
    try:
        return baseline.check(Program(program.chain, desk.saved), present)
    except Unsupported:
        return baseline.Baseline(None, len(program.chain.steps))
