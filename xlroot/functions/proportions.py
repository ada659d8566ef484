"""The beta distribution, and the F distribution of a ratio of variances.

Abramowitz and Stegun, chapters 26.5 and 26.6. A density that is infinite at an end is #NUM!
there. Degrees of freedom are cut to a whole number from 1 to 10^10, as Excel documents.
"""

from __future__ import annotations

import math

from xlroot.functions._densities import beta_kernel
from xlroot.functions._settled import settled
from xlroot.functions._tails import (
    beta_above,
    beta_below,
    beta_point_above,
    beta_point_below,
)
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault

MOST_FREEDOM = 1e10


def _beta_density(y: float, z: float, a: float, b: float) -> float | Fault:
    """The density on [0, 1] at y = 1 - z."""
    if y == 0.0 or z == 0.0:
        near, far = (a, b) if y == 0.0 else (b, a)
        if near < 1.0:
            return Fault.NUM
        return far if near == 1.0 else 0.0
    return beta_kernel(a, b, y, z) / (y * z)


def _part_below(y: float, z: float, a: float, b: float) -> float:
    return beta_below(a, b, y) if y <= 0.5 else beta_above(b, a, z)


def _part_above(y: float, z: float, a: float, b: float) -> float:
    return beta_above(a, b, y) if y <= 0.5 else beta_below(b, a, z)


@worksheet(
    "BETA.DIST",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=2,
    gives=Gives.NUMBER,
)
@settled
def beta_dist(
    x: float,
    a: float,
    b: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
    low: float = 0.0,
    high: float = 1.0,
) -> float | Fault:
    """The beta distribution function between two limits, or its density."""
    if a <= 0.0 or b <= 0.0 or not low <= x <= high or low == high:
        return Fault.NUM
    y, z = (x - low) / (high - low), (high - x) / (high - low)
    if cumulative:
        return _part_below(y, z, a, b)
    density = _beta_density(y, z, a, b)
    return density if isinstance(density, Fault) else density / (high - low)


@worksheet(
    "BETADIST",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=2,
    gives=Gives.NUMBER,
)
@settled
def betadist(x: float, a: float, b: float, low: float = 0.0, high: float = 1.0) -> float | Fault:
    """The beta distribution function; OpenFormula's sixth argument is not Excel's."""
    if a <= 0.0 or b <= 0.0 or not low <= x <= high or low == high:
        return Fault.NUM
    return _part_below((x - low) / (high - low), (high - x) / (high - low), a, b)


@worksheet(
    ("BETA.INV", "BETAINV"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=2,
    gives=Gives.NUMBER,
)
@settled
def beta_inv(p: float, a: float, b: float, low: float = 0.0, high: float = 1.0) -> float | Fault:
    """The beta value not exceeded with probability p; #NUM! for p = 0, as Excel documents."""
    if a <= 0.0 or b <= 0.0 or not 0.0 < p <= 1.0 or low >= high:
        return Fault.NUM
    return low + (high - low) * beta_point_below(a, b, p)


def _freedoms(first: float, second: float) -> tuple[float, float] | Fault:
    a, b = float(math.trunc(first)), float(math.trunc(second))
    if not (1.0 <= a <= MOST_FREEDOM and 1.0 <= b <= MOST_FREEDOM):
        return Fault.NUM
    return a, b


def f_above(x: float, first: float, second: float) -> float:
    """The probability of an F value above x >= 0."""
    weighed = first * x
    return _part_above(
        weighed / (weighed + second), second / (weighed + second), 0.5 * first, 0.5 * second
    )


def f_below(x: float, first: float, second: float) -> float:
    """The probability of an F value below x >= 0."""
    weighed = first * x
    return _part_below(
        weighed / (weighed + second), second / (weighed + second), 0.5 * first, 0.5 * second
    )


@worksheet("F.DIST", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, Takes.LOGICAL, gives=Gives.NUMBER)
@settled
def f_dist(
    x: float,
    first: float,
    second: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The F distribution function, or its density."""
    freedoms = _freedoms(first, second)
    if isinstance(freedoms, Fault) or x < 0.0:
        return Fault.NUM
    if cumulative:
        return f_below(x, *freedoms)
    a, b = freedoms
    if x == 0.0:
        if a == 1.0:
            return Fault.NUM
        return 1.0 if a == 2.0 else 0.0
    weighed = a * x
    whole = weighed + b
    return beta_kernel(0.5 * a, 0.5 * b, weighed / whole, b / whole) / x


@worksheet(("F.DIST.RT", "FDIST"), Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def f_dist_rt(x: float, first: float, second: float) -> float | Fault:
    """The probability of a larger F value; OpenFormula's FDIST is the other tail."""
    freedoms = _freedoms(first, second)
    if isinstance(freedoms, Fault) or x < 0.0:
        return Fault.NUM
    return f_above(x, *freedoms)


def _ratio(y: float, z: float, a: float, b: float) -> float:
    return b * y / (a * z)


@worksheet("F.INV", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def f_inv(p: float, first: float, second: float) -> float | Fault:
    """The F value not exceeded with probability p."""
    freedoms = _freedoms(first, second)
    if isinstance(freedoms, Fault) or not 0.0 <= p < 1.0:
        return Fault.NUM
    a, b = freedoms
    y = beta_point_below(0.5 * a, 0.5 * b, p)
    if y <= 0.5:
        return _ratio(y, 1.0 - y, a, b)
    z = beta_point_above(0.5 * b, 0.5 * a, p)
    return _ratio(1.0 - z, z, a, b)


@worksheet(("F.INV.RT", "FINV"), Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def f_inv_rt(p: float, first: float, second: float) -> float | Fault:
    """The F value exceeded with probability p; OpenFormula's FINV is the other tail."""
    freedoms = _freedoms(first, second)
    if isinstance(freedoms, Fault) or not 0.0 < p <= 1.0:
        return Fault.NUM
    a, b = freedoms
    y = beta_point_above(0.5 * a, 0.5 * b, p)
    if y <= 0.5:
        return _ratio(y, 1.0 - y, a, b)
    z = beta_point_below(0.5 * b, 0.5 * a, p)
    return _ratio(1.0 - z, z, a, b)
