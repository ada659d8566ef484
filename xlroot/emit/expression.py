"""What the emitter writes: expressions with what is known of them, and the dialects of kinds."""

from __future__ import annotations

import math
import re
import sys
from enum import Enum
from typing import NamedTuple

from xlroot.values import Value


class Sort(Enum):
    """What is known of an expression's value while compiling."""

    NUMBER = "number"
    LOGICAL = "logical"
    TEXT = "text"
    ANY = "any"


class Level(Enum):
    """How tightly an expression's text binds."""

    ATOM = 0
    PRODUCT = 1
    SUM = 2


class Expr(NamedTuple):
    """The text of an expression; `grows` where it may overflow to infinity without raising, or,
    over vectors, become NaN. `bound` is a magnitude that it cannot exceed."""

    text: str
    sort: Sort
    level: Level = Level.ATOM
    grows: bool = False
    fixed: bool = False
    value: Value = None
    bound: float = math.inf


class Opaque(Exception):
    """This node cannot be written as code of this kind."""


class Whole(Exception):
    """An array stands within this formula: only the interpreter computes it as a whole."""


class Dialect(NamedTuple):
    """How a kind spells what differs between kinds."""

    choose: str
    """A number chosen by a condition: {0} the condition, {1} and {2} the branches."""
    vector: bool
    """Whether variables hold many values, so that nothing may branch on them."""
    guards: bool
    """Whether guard variables can be checked at the end; otherwise they are checked at once."""


REAL = Dialect("({1} if {0} else {2})", vector=False, guards=True)
ARRAY = Dialect("choose({0}, {1}, {2})", vector=True, guards=True)
ELEMENT = Dialect("({1} if {0} else {2})", vector=False, guards=False)
"""The real kind within an array: one element of the vectors at a time."""

LARGEST = sys.float_info.max
"""What a function that raises on overflow cannot exceed."""

VARIABLE = re.compile(r"\b[vlg]\d+\b")
"""The names of chain cells, local variables and guards in the text."""
