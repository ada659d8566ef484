"""What a worksheet function is: its names, what it takes, and its rule.

A family module makes entries in one of two ways:

    DEGREES = by_form("DEGREES", "{0}*57.29577951308232")

    @worksheet("FACT", Takes.NUMBER, gives=Gives.NUMBER)
    def fact(n: float) -> float | Fault: ...

A *form* is an expression in the primitives that every kind of number provides
(`xlroot.kinds`); the function then works over all kinds, and its rule for single values follows
from the form. A form names each argument at most once. A *rule* takes single values or grids, as
declared, and answers with a value or a grid; a wrong argument gives the Fault that a cell shows.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from enum import Enum
from typing import Any

from xlroot.kinds import real
from xlroot.values import Operand


class Takes(Enum):
    """How an argument reaches the rule."""

    NUMBER = "number"
    """A float: blank is 0, TRUE is 1, text is read; a fault never reaches the rule."""
    TEXT = "text"
    """A str: numbers in the general format; a fault never reaches the rule."""
    LOGICAL = "logical"
    """A bool; a fault never reaches the rule."""
    SCALAR = "scalar"
    """One value as it is, blank included; a fault never reaches the rule."""
    VALUE = "value"
    """One value as it is, faults included."""
    RAW = "raw"
    """A value or a Grid as it is, faults included; a reference arrives as a Grid with a block,
    a single referenced cell too."""
    LAZY = "lazy"
    """A function without arguments that gives the value or Grid when called: for IF and kin."""


class Gives(Enum):
    """What a rule answers with, apart from faults."""

    NUMBER = "number"
    TEXT = "text"
    LOGICAL = "logical"
    ANY = "any"


class Trait(Enum):
    """What a chain has to know of a function beyond its rule."""

    VOLATILE = "volatile"
    """Changes without any input changing: refused on a chain."""
    CALENDAR = "calendar"
    """Reads or makes date serials of the 1900 system: refused in a book that counts from 1904."""


@dataclass(frozen=True, slots=True)
class Entry:
    """One worksheet function."""

    names: tuple[str, ...]
    takes: tuple[Takes, ...]
    rule: Callable[..., Operand]
    required: int
    repeats: int = 0
    """How many of the last parameters may be repeated together: 1 in SUM, 2 in SUMIFS."""
    gives: Gives = Gives.ANY
    form: str | None = None
    traits: frozenset[Trait] = frozenset()
    module: str = ""
    fold: Fold | None = field(default=None)

    @property
    def name(self) -> str:
        return self.names[0]

    def parameter(self, position: int) -> Takes:
        """What the argument at a position (from 0) is taken as, repeated parameters included."""
        if position < len(self.takes):
            return self.takes[position]
        group = self.takes[len(self.takes) - self.repeats :]
        return group[(position - len(self.takes)) % self.repeats]

    def wrong_count(self, count: int) -> str | None:
        """What is wrong with a number of arguments, or None when it fits."""
        if count < self.required:
            return f"{self.name} needs {self.required} arguments and has {count}"
        if count > len(self.takes):
            if not self.repeats:
                return f"{self.name} takes {len(self.takes)} arguments and has {count}"
            if (count - len(self.takes)) % self.repeats:
                return f"{self.name} takes its last arguments in groups of {self.repeats}"
        return None


class Fold(Enum):
    """Functions over many numbers whose compiled form is written out cell by cell."""

    SUM = "sum"
    PRODUCT = "product"
    MINIMUM = "minimum"
    MAXIMUM = "maximum"


def by_form(name: str | tuple[str, ...], form: str, *, gives: Gives = Gives.NUMBER) -> Entry:
    """A function of numbers that is an expression in the kinds' primitives."""
    names = (name,) if isinstance(name, str) else name
    count = 0
    while "{" + str(count) + "}" in form:
        count += 1
    return Entry(
        names,
        (Takes.NUMBER,) * count,
        real.rule_of(form, count),
        count,
        gives=gives,
        form=form,
        module=_caller(),
    )


def worksheet(
    name: str | tuple[str, ...],
    *takes: Takes,
    optional: int = 0,
    repeats: int = 0,
    gives: Gives = Gives.ANY,
    form: str | None = None,
    traits: frozenset[Trait] = frozenset(),
    fold: Fold | None = None,
) -> Callable[[Callable[..., Operand]], Entry]:
    """Makes the decorated rule an entry; the last `optional` parameters may be left out.

    An argument left out at the end does not reach the rule, whose own default applies; one left
    empty between commas arrives as blank (0, the empty text or FALSE as declared).
    """
    names = (name,) if isinstance(name, str) else name

    def entry(rule: Callable[..., Operand]) -> Entry:
        required = len(takes) - optional
        return Entry(
            names, takes, rule, required, repeats, gives, form, traits, rule.__module__, fold
        )

    return entry


def entries_of(module: Any) -> list[Entry]:
    """The entries that a family module defines itself."""
    found = [each for each in vars(module).values() if isinstance(each, Entry)]
    return [each for each in found if each.module == module.__name__]


def _caller() -> str:
    import sys

    return str(sys._getframe(2).f_globals["__name__"])
