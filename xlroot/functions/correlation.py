"""How two rows of numbers go together. OpenFormula (OASIS ODF 1.3 part 4), section 6.18.

Pairs in which either is no number do not count; unequal lengths are #N/A.
"""

from __future__ import annotations

import math

from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.totals import added
from xlroot.values import Fault, Grid, Operand


def pairs_of(a: Operand, b: Operand) -> list[tuple[float, float]] | Fault:
    """Pairs of numbers in the same place."""
    left = a if isinstance(a, Grid) else Grid(((a,),))
    right = b if isinstance(b, Grid) else Grid(((b,),))
    if left.height * left.width != right.height * right.width:
        return Fault.NA
    found = []
    for x, y in zip(left.flat(), right.flat(), strict=True):
        for value in (x, y):
            if isinstance(value, Fault):
                return value
        if type(x) is float and type(y) is float:
            found.append((x, y))
    return found


def _moments(pairs: list[tuple[float, float]]) -> tuple[float, float, float]:
    """Sums of squared deviations of both, and of their products."""
    n = len(pairs)
    x, y = added(p[0] for p in pairs) / n, added(p[1] for p in pairs) / n
    return (
        added((p[0] - x) ** 2 for p in pairs),
        added((p[1] - y) ** 2 for p in pairs),
        added((p[0] - x) * (p[1] - y) for p in pairs),
    )


@worksheet(("CORREL", "PEARSON"), Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def correl(a: Operand, b: Operand) -> float | Fault:
    """The coefficient of correlation."""
    pairs = pairs_of(a, b)
    if isinstance(pairs, Fault):
        return pairs
    if not pairs:
        return Fault.DIV0
    xx, yy, xy = _moments(pairs)
    return xy / math.sqrt(xx) / math.sqrt(yy) if xx and yy else Fault.DIV0


@worksheet(("COVAR", "COVARIANCE.P"), Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def covar(a: Operand, b: Operand) -> float | Fault:
    """The covariance of a population."""
    pairs = pairs_of(a, b)
    if isinstance(pairs, Fault):
        return pairs
    return _moments(pairs)[2] / len(pairs) if pairs else Fault.DIV0


@worksheet("COVARIANCE.S", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def covariance_s(a: Operand, b: Operand) -> float | Fault:
    """The covariance of a sample."""
    pairs = pairs_of(a, b)
    if isinstance(pairs, Fault):
        return pairs
    return _moments(pairs)[2] / (len(pairs) - 1) if len(pairs) > 1 else Fault.DIV0
