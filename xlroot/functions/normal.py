"""The normal and the lognormal distribution.

Abramowitz and Stegun, chapter 26.2. Both tails keep their digits: the distribution function is
erfc(-z / sqrt 2) / 2 throughout. The inverse is M. J. Wichura's algorithm AS 241, Applied
Statistics 37 (1988) 477-484, as the standard library has it.
"""

from __future__ import annotations

import math

from xlroot.functions._densities import ROOT_TWO_PI
from xlroot.functions._settled import settled
from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.values import Fault

ROOT_HALF = math.sqrt(0.5)

NORMSDIST = by_form("NORMSDIST", f"0.5*erfc({{0}}*-{ROOT_HALF!r})")
GAUSS = by_form("GAUSS", f"0.5*erf({{0}}*{ROOT_HALF!r})")
PHI = by_form("PHI", f"exp(power({{0}}, 2.0)*-0.5)/{ROOT_TWO_PI!r}")


def normal_below(z: float) -> float:
    """The probability that a standard normal value is at most z."""
    return 0.5 * math.erfc(z * -ROOT_HALF)


def normal_density(z: float) -> float:
    """The standard normal density."""
    return math.exp(z * z * -0.5) / ROOT_TWO_PI


def normal_point(p: float) -> float:
    """The z that a standard normal value exceeds with probability 1 - p, for 0 < p < 1."""
    from statistics import NormalDist

    return NormalDist().inv_cdf(p)


@worksheet("NORM.S.DIST", Takes.NUMBER, Takes.LOGICAL, gives=Gives.NUMBER)
@settled
def norm_s_dist(z: float, cumulative: bool) -> float:  # noqa: FBT001 - a worksheet argument
    """The standard normal distribution function, or its density."""
    return normal_below(z) if cumulative else normal_density(z)


@worksheet(
    ("NORM.DIST", "NORMDIST"),
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def norm_dist(
    x: float,
    mean: float,
    deviation: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The normal distribution function, or its density."""
    if deviation <= 0.0:
        return Fault.NUM
    z = (x - mean) / deviation
    return normal_below(z) if cumulative else normal_density(z) / deviation


@worksheet(("NORM.S.INV", "NORMSINV"), Takes.NUMBER, gives=Gives.NUMBER)
@settled
def norm_s_inv(p: float) -> float | Fault:
    """The standard normal value not exceeded with probability p."""
    return normal_point(p) if 0.0 < p < 1.0 else Fault.NUM


@worksheet(("NORM.INV", "NORMINV"), Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def norm_inv(p: float, mean: float, deviation: float) -> float | Fault:
    """The normal value not exceeded with probability p."""
    if not 0.0 < p < 1.0 or deviation <= 0.0:
        return Fault.NUM
    return mean + deviation * normal_point(p)


@worksheet(
    "LOGNORM.DIST",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    gives=Gives.NUMBER,
)
@settled
def lognorm_dist(
    x: float,
    mean: float,
    deviation: float,
    cumulative: bool,  # noqa: FBT001 - a worksheet argument
) -> float | Fault:
    """The distribution function of a value whose logarithm is normal, or its density."""
    if x <= 0.0 or deviation <= 0.0:
        return Fault.NUM
    z = (math.log(x) - mean) / deviation
    return normal_below(z) if cumulative else normal_density(z) / (deviation * x)


@worksheet("LOGNORMDIST", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def lognormdist(x: float, mean: float, deviation: float) -> float | Fault:
    """The lognormal distribution function; OpenFormula's fourth argument is not Excel's."""
    if x <= 0.0 or deviation <= 0.0:
        return Fault.NUM
    return normal_below((math.log(x) - mean) / deviation)


@worksheet(("LOGNORM.INV", "LOGINV"), Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def lognorm_inv(p: float, mean: float, deviation: float) -> float | Fault:
    """The lognormal value not exceeded with probability p."""
    if not 0.0 < p < 1.0 or deviation <= 0.0:
        return Fault.NUM
    return math.exp(mean + deviation * normal_point(p))
