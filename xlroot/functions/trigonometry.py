"""Angles: circular and hyperbolic functions and their inverses, degrees and radians.

OpenFormula (OASIS ODF 1.3 part 4), section 6.16. All are forms, so they serve every kind.
"""

from __future__ import annotations

import math

from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.values import Fault

SIN = by_form("SIN", "sin({0})")
COS = by_form("COS", "cos({0})")
TAN = by_form("TAN", "tan({0})")
ASIN = by_form("ASIN", "asin({0})")
ACOS = by_form("ACOS", "acos({0})")
ATAN = by_form("ATAN", "atan({0})")
SINH = by_form("SINH", "sinh({0})")
COSH = by_form("COSH", "cosh({0})")
TANH = by_form("TANH", "tanh({0})")
ASINH = by_form("ASINH", "asinh({0})")
ACOSH = by_form("ACOSH", "acosh({0})")
ATANH = by_form("ATANH", "atanh({0})")
SEC = by_form("SEC", "1.0/cos({0})")
CSC = by_form("CSC", "1.0/sin({0})")
COT = by_form("COT", "1.0/tan({0})")
SECH = by_form("SECH", "1.0/cosh({0})")
CSCH = by_form("CSCH", "1.0/sinh({0})")
COTH = by_form("COTH", "1.0/tanh({0})")
ACOT = by_form("ACOT", f"{math.pi / 2!r} - atan({{0}})")
ACOTH = by_form("ACOTH", "atanh(1.0/{0})")
DEGREES = by_form("DEGREES", f"{{0}}*{180.0 / math.pi!r}")
RADIANS = by_form("RADIANS", f"{{0}}*{math.pi / 180.0!r}")


@worksheet("ATAN2", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def atan2(x: float, y: float) -> float | Fault:
    """The angle of the point (x, y); #DIV/0! at the origin."""
    if x == 0.0 and y == 0.0:
        return Fault.DIV0
    return math.atan2(y, x)


@worksheet("PI", gives=Gives.NUMBER)
def pi() -> float:
    """The ratio of a circle's circumference to its diameter."""
    return math.pi
