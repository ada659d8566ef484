"""Distributions of positive quantities: exponential, Weibull, gamma, chi-square.

Abramowitz and Stegun, chapter 26.4; W. Weibull, J. Appl. Mech. 18 (1951) 293. A density that is
infinite at 0 is #NUM! there. Degrees of freedom are cut to a whole number from 1 to 10^10, as
Excel documents.
"""

from __future__ import annotations

import math

from xlroot.functions._densities import gamma_density
from xlroot.functions._settled import settled
from xlroot.functions._tails import (
    gamma_above,
    gamma_below,
    gamma_point_above,
    gamma_point_below,
)
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault

MOST_FREEDOM = 1e10


@worksheet(
    ("EXPON.DIST", "EXPONDIST"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def expon_dist(
    x: float,
    rate: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The exponential distribution function, or its density."""
    if x < 0.0 or rate <= 0.0:
        return Fault.NUM
    return -math.expm1(-rate * x) if cumulative else rate * math.exp(-rate * x)


@worksheet(
    ("WEIBULL.DIST", "WEIBULL"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def weibull_dist(
    x: float,
    shape: float,
    scale: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The Weibull distribution function, or its density."""
    if x < 0.0 or shape <= 0.0 or scale <= 0.0:
        return Fault.NUM
    if x == 0.0:
        return 0.0 if cumulative else _at_zero(shape, 1.0 / scale)
    try:
        power = math.pow(x / scale, shape)
    except OverflowError:
        return 1.0 if cumulative else 0.0
    if cumulative:
        return -math.expm1(-power)
    return shape / scale * math.pow(x / scale, shape - 1.0) * math.exp(-power)


def _at_zero(shape: float, value: float) -> float | Fault:
    """A density like x^(shape-1) at 0, with its value for shape 1."""
    if shape < 1.0:
        return Fault.NUM
    return value if shape == 1.0 else 0.0


@worksheet(
    ("GAMMA.DIST", "GAMMADIST"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def gamma_dist(
    x: float,
    shape: float,
    scale: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The gamma distribution function, or its density."""
    if x < 0.0 or shape <= 0.0 or scale <= 0.0:
        return Fault.NUM
    if cumulative:
        return gamma_below(shape, x / scale)
    if x == 0.0:
        return _at_zero(shape, 1.0 / scale)
    return gamma_density(x / scale, shape) / scale


@worksheet(("GAMMA.INV", "GAMMAINV"), Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def gamma_inv(p: float, shape: float, scale: float) -> float | Fault:
    """The gamma value not exceeded with probability p."""
    if not 0.0 <= p < 1.0 or shape <= 0.0 or scale <= 0.0:
        return Fault.NUM
    return scale * gamma_point_below(shape, p)


def _freedom(given: float) -> float | Fault:
    whole = float(math.trunc(given))
    return whole if 1.0 <= whole <= MOST_FREEDOM else Fault.NUM


@worksheet("CHISQ.DIST", Takes.NUMBER, Takes.NUMBER, Takes.LOGICAL, gives=Gives.NUMBER)
@settled
def chisq_dist(
    x: float,
    freedom: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The chi-square distribution function, or its density."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or x < 0.0:
        return Fault.NUM
    if cumulative:
        return gamma_below(0.5 * whole, 0.5 * x)
    if x == 0.0:
        return _at_zero(0.5 * whole, 0.5)
    return 0.5 * gamma_density(0.5 * x, 0.5 * whole)


@worksheet(("CHISQ.DIST.RT", "CHIDIST"), Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def chisq_dist_rt(x: float, freedom: float) -> float | Fault:
    """The probability of a larger chi-square value."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or x < 0.0:
        return Fault.NUM
    return gamma_above(0.5 * whole, 0.5 * x)


@worksheet("CHISQ.INV", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def chisq_inv(p: float, freedom: float) -> float | Fault:
    """The chi-square value not exceeded with probability p."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or not 0.0 <= p < 1.0:
        return Fault.NUM
    return 2.0 * gamma_point_below(0.5 * whole, p)


@worksheet(("CHISQ.INV.RT", "CHIINV"), Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def chisq_inv_rt(p: float, freedom: float) -> float | Fault:
    """The chi-square value exceeded with probability p."""
    whole = _freedom(freedom)
    if isinstance(whole, Fault) or not 0.0 < p <= 1.0:
        return Fault.NUM
    return 2.0 * gamma_point_above(0.5 * whole, p)
