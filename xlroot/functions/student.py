"""Student's t distribution.

Abramowitz and Stegun, chapter 26.7. Degrees of freedom are cut to a whole number, at least 1, as
Excel documents. A tail is an incomplete beta integral, taken on the side where it is small.
"""

from __future__ import annotations

import math

from xlroot.functions._densities import gamma_half_ratio
from xlroot.functions._settled import settled
from xlroot.functions._tails import (
    beta_above,
    beta_below,
    beta_point_above,
    beta_point_below,
)
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault


def student_above(t: float, freedom: float) -> float:
    """The probability of a value above |t|, freedom any positive number."""
    square = t / freedom * t
    if square <= 1.0:
        return 0.5 * beta_above(0.5, 0.5 * freedom, square / (1.0 + square))
    return 0.5 * beta_below(0.5 * freedom, 0.5, 1.0 / (1.0 + square))


def student_density(t: float, freedom: float) -> float:
    """The density at t."""
    scale = gamma_half_ratio(0.5 * freedom) / math.sqrt(math.pi * freedom)
    return scale * math.exp(-0.5 * (freedom + 1.0) * math.log1p(t / freedom * t))


def student_point(both: float, freedom: float) -> float:
    """The t > 0 whose two tails hold the probability `both`, for 0 < both <= 1."""
    half = 0.5 * freedom
    if both > 0.5:
        y = beta_point_below(0.5, half, 1.0 - both)
        return math.sqrt(freedom * y / (1.0 - y))
    x = beta_point_below(half, 0.5, both)
    if x < 0.5:
        return math.sqrt(freedom * (1.0 - x) / x)
    y = beta_point_above(0.5, half, both)
    return math.sqrt(freedom * y / (1.0 - y))


def _freedom(given: float) -> float | Fault:
    whole = float(math.trunc(given))
    return whole if whole >= 1.0 else Fault.NUM


@worksheet("T.DIST", Takes.NUMBER, Takes.NUMBER, Takes.LOGICAL, gives=Gives.NUMBER)
@settled
def t_dist(
    t: float,
    freedom: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The distribution function, or its density."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault):
        return whole
    if not cumulative:
        return student_density(t, whole)
    above = student_above(t, whole)
    return above if t < 0.0 else 1.0 - above


@worksheet("T.DIST.RT", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def t_dist_rt(t: float, freedom: float) -> float | Fault:
    """The probability of a larger value."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault):
        return whole
    above = student_above(t, whole)
    return 1.0 - above if t < 0.0 else above


@worksheet("T.DIST.2T", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def t_dist_2t(t: float, freedom: float) -> float | Fault:
    """The probability of a value farther from 0 on either side, for t >= 0."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or t < 0.0:
        return Fault.NUM
    return 2.0 * student_above(t, whole)


@worksheet("TDIST", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def tdist(t: float, freedom: float, tails: float) -> float | Fault:
    """One or two tails beyond t >= 0."""
    whole, count = _freedom(freedom), math.trunc(tails)
    if isinstance(whole, Fault) or t < 0.0 or count not in (1, 2):
        return Fault.NUM
    return count * student_above(t, whole)


@worksheet("T.INV", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def t_inv(p: float, freedom: float) -> float | Fault:
    """The value not exceeded with probability p."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or not 0.0 < p < 1.0:
        return Fault.NUM
    if p < 0.5:
        return -student_point(2.0 * p, whole)
    return student_point(2.0 * (1.0 - p), whole)


@worksheet(("T.INV.2T", "TINV"), Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def t_inv_2t(p: float, freedom: float) -> float | Fault:
    """The value exceeded on either side with probability p."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or not 0.0 < p <= 1.0:
        return Fault.NUM
    return student_point(p, whole)
