"""Functions that change without any input changing; on a chain they are refused."""

from __future__ import annotations

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, Trait, worksheet

CHANGING = frozenset((Trait.VOLATILE,))


@worksheet("RAND", gives=Gives.NUMBER, traits=CHANGING)
def rand() -> float:
    """A random number; no evaluation can repeat it."""
    raise Unsupported("draws a random number, which cannot be repeated")


@worksheet("RANDBETWEEN", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER, traits=CHANGING)
def randbetween(low: float, high: float) -> float:
    """A random whole number; no evaluation can repeat it."""
    raise Unsupported(f"draws a random number from {low:g} to {high:g}, which cannot be repeated")
