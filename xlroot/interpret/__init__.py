"""The value of a bound formula, by the rules of spreadsheets: exact semantics, one formula at
a time.

This is the reference that compiled programs are held to, and what evaluates everything that is
not worth compiling: held cells without saved values, constant parts of a chain, faults. A plain
formula takes one value from a range where one is expected (implicit intersection, OpenFormula
section 3.3); an array formula works element by element. Faults are values; what cannot be
evaluated faithfully raises Unsupported.
"""

from __future__ import annotations

from xlroot.interpret.evaluation import (
    OWN_PREFIX,
    evaluate,
    formula_value,
    reference,
    reference_or_fault,
)
from xlroot.interpret.references import REFERENCE_MAKERS
from xlroot.interpret.scope import Mode, Reader, Scope, by_element, single
from xlroot.interpret.serving import ARRAY_TAKERS

__all__ = [
    "ARRAY_TAKERS",
    "OWN_PREFIX",
    "REFERENCE_MAKERS",
    "Mode",
    "Reader",
    "Scope",
    "by_element",
    "evaluate",
    "formula_value",
    "reference",
    "reference_or_fault",
    "single",
]
