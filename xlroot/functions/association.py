"""How two samples go together: covariance and correlation; discrete probabilities.

Excel's documentation of each; OpenFormula section 6.18. A pair counts only where both values are
numbers; samples of different sizes give #N/A.
"""

from __future__ import annotations

import math

from xlroot.errors import Unsupported
from xlroot.functions._settled import settled
from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.functions.statistics import deviations, square_sum
from xlroot.values import Fault, Grid, Operand

FISHER = by_form("FISHER", "atanh({0})")
FISHERINV = by_form("FISHERINV", "tanh({0})")


def paired(a: Operand, b: Operand) -> tuple[list[float], list[float]] | Fault:
    """The numbers of both samples that stand in the same place."""
    left = a if isinstance(a, Grid) else Grid(((a,),))
    right = b if isinstance(b, Grid) else Grid(((b,),))
    if left.height * left.width != right.height * right.width:
        return Fault.NA
    xs: list[float] = []
    ys: list[float] = []
    for x, y in zip(left.flat(), right.flat(), strict=True):
        for value in (x, y):
            if isinstance(value, Fault):
                return value
        if type(x) is float and type(y) is float:
            xs.append(x)
            ys.append(y)
    return xs, ys


def product_sum(xs: list[float], ys: list[float]) -> float:
    """The sum of products of deviations, corrected for the rounding of the means."""
    left, right = deviations(xs), deviations(ys)
    products = math.fsum(x * y for x, y in zip(left, right, strict=True))
    return products - math.fsum(left) * math.fsum(right) / len(xs)


def _covariance(a: Operand, b: Operand, lost: int) -> float | Fault:
    found = paired(a, b)
    if isinstance(found, Fault):
        return found
    xs, ys = found
    return product_sum(xs, ys) / (len(xs) - lost) if len(xs) > lost else Fault.DIV0


@worksheet(("COVARIANCE.P", "COVAR"), Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
@settled
def covariance_p(a: Operand, b: Operand) -> float | Fault:
    """The covariance of whole populations."""
    return _covariance(a, b, 0)


@worksheet("COVARIANCE.S", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
@settled
def covariance_s(a: Operand, b: Operand) -> float | Fault:
    """The covariance, from samples."""
    return _covariance(a, b, 1)


@worksheet(("CORREL", "PEARSON"), Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
@settled
def correl(a: Operand, b: Operand) -> float | Fault:
    """The correlation coefficient; #DIV/0! where a sample does not vary."""
    found = paired(a, b)
    if isinstance(found, Fault):
        return found
    xs, ys = found
    if len(xs) < 2:
        return Fault.DIV0
    x_squares, y_squares = square_sum(xs), square_sum(ys)
    if x_squares <= 0.0 or y_squares <= 0.0:
        return Fault.DIV0
    both = x_squares * y_squares
    if both == 0.0 or math.isinf(both):
        scale = math.sqrt(x_squares) * math.sqrt(y_squares)
    else:
        scale = math.sqrt(both)
    return min(max(product_sum(xs, ys) / scale, -1.0), 1.0)


WHOLE = 1e-10
"""How far the sum of typed probabilities may be from 1."""


@worksheet(
    "PROB",
    Takes.RAW,
    Takes.RAW,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=1,
    gives=Gives.NUMBER,
)
@settled
def prob(values: Operand, chances: Operand, low: float, high: float | None = None) -> float | Fault:
    """The probability of a value from low to high, or of low alone."""
    found = paired(values, chances)
    if isinstance(found, Fault):
        return found
    xs, parts = found
    if not xs or min(parts) < 0.0 or max(parts) > 1.0 or abs(math.fsum(parts) - 1.0) > WHOLE:
        return Fault.NUM
    if min(parts) == 0.0:
        raise Unsupported(
            "one of the probabilities is 0, which spreadsheet programs treat "
            "differently; leave that line out"
        )
    upper = low if high is None else high
    return math.fsum(p for x, p in zip(xs, parts, strict=True) if low <= x <= upper)
