"""Chain formulas as the text of one Python function.

The text is straight-line code over plain numbers: constant parts are folded, spreadsheet types
are settled while compiling, and operations that a kind of number provides are called by name, so
that the same text serves every kind. Three devices keep it faithful:

- What is no number where one is needed, and every fault, raises; the caller then lets the
  interpreter decide (`xlroot.program`).
- A value that may have overflowed and would vanish (a divisor, an argument of EXP, a comparison)
  is kept in a guard variable, whose finiteness is checked at the end.
- What is not worth compiling (array formulas, IFERROR, text functions of chain values) becomes a
  call of the interpreter for that part alone.
"""

from __future__ import annotations

from xlroot.emit.emitter import Emitter
from xlroot.emit.expression import ARRAY, ELEMENT, REAL, Dialect, Expr, Opaque, Sort, Whole

__all__ = ["ARRAY", "ELEMENT", "REAL", "Dialect", "Emitter", "Expr", "Opaque", "Sort", "Whole"]
