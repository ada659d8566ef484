"""Root-finding methods: every module here holds one; `find` gives one by name."""

from __future__ import annotations

from functools import cache

from xlroot.catalogue import Catalogue, did_you_mean
from xlroot.errors import MethodError
from xlroot.methods.method import Family, Method, Need, Sample, Start, opposite

AUTOMATIC = "auto"
"""The name that leaves the choice to xlroot."""


@cache
def catalogue() -> Catalogue[Method]:
    """All methods; made on first use."""
    return Catalogue(
        __name__,
        lambda module: [each for each in vars(module).values() if isinstance(each, Method)],
        lambda method: (method.name,),
    )


def find(name: str) -> Method:
    """The method of that name, in any case, with spaces, hyphens or nothing between the words.

    Raises MethodError, with the nearest name.
    """
    found = catalogue().get(name)
    if found is None:
        raise MethodError(f"there is no method {name!r}{did_you_mean(name, catalogue())}")
    return found


def choose(name: str) -> tuple[Method, str]:
    """The method asked for, or the one chosen by `auto`, and a note that says why.

    With opposite signs at the ends of the bracket `auto` takes Chandrupatla's method: it keeps
    the bracket, needs no slope, and is seldom beaten in evaluations. A residual that is zero at an
    end, or has equal signs there, is left to it as well: it then refuses with the reason.
    """
    if name.strip().casefold() != AUTOMATIC:
        return find(name), "as asked"
    return find("Chandrupatla"), (
        "chosen by xlroot: keeps the root bracketed, needs no slope, converges faster than halving"
    )


__all__ = [
    "AUTOMATIC",
    "Family",
    "Method",
    "Need",
    "Sample",
    "Start",
    "catalogue",
    "choose",
    "find",
    "opposite",
]
