"""The error function and the Bessel functions of whole order.

Abramowitz and Stegun, chapters 7 and 9 (DLMF 7.2 and 10.2, 10.25). Bessel functions come from
scipy; a host's own may carry fewer digits, which the comparison with its saved values tells.
"""

from __future__ import annotations

import math

from xlroot.errors import Unsupported
from xlroot.functions._settled import settled
from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.values import Fault

ERF_PRECISE = by_form("ERF.PRECISE", "erf({0})")
ERFC = by_form(("ERFC", "ERFC.PRECISE"), "erfc({0})")


@worksheet("ERF", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER, form="erf({0})")
def erf(x: float, upper: float | None = None) -> float:
    """The error function of x, or its integral from x to an upper limit."""
    if upper is None:
        return math.erf(x)
    if min(x, upper) > 0.5:
        return math.erfc(x) - math.erfc(upper)
    if max(x, upper) < -0.5:
        return math.erfc(-upper) - math.erfc(-x)
    return math.erf(upper) - math.erf(x)


LARGEST_ARGUMENT = 1e5
"""Beyond, the phase of an oscillating Bessel function keeps too few digits of the argument."""


def _order(n: float) -> int | Fault:
    return math.trunc(n) if n >= 0.0 else Fault.NUM


def _refuse_beyond(x: float) -> None:
    if abs(x) > LARGEST_ARGUMENT:
        raise Unsupported(f"an argument beyond {LARGEST_ARGUMENT:,.0f} leaves too few digits")


@worksheet("BESSELJ", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def besselj(x: float, n: float) -> float | Fault:
    """J_n(x), n cut to a whole number."""
    from scipy.special import jv

    order = _order(n)
    if isinstance(order, Fault):
        return order
    _refuse_beyond(x)
    return float(jv(order, x))


@worksheet("BESSELY", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def bessely(x: float, n: float) -> float | Fault:
    """Y_n(x) for x > 0."""
    from scipy.special import yv

    order = _order(n)
    if isinstance(order, Fault) or x <= 0.0:
        return Fault.NUM
    _refuse_beyond(x)
    return float(yv(order, x))


@worksheet("BESSELI", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def besseli(x: float, n: float) -> float | Fault:
    """I_n(x), the modified function that grows."""
    from scipy.special import iv

    order = _order(n)
    return order if isinstance(order, Fault) else float(iv(order, x))


@worksheet("BESSELK", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
@settled
def besselk(x: float, n: float) -> float | Fault:
    """K_n(x), the modified function that decays, for x > 0."""
    from scipy.special import kv

    order = _order(n)
    if isinstance(order, Fault) or x <= 0.0:
        return Fault.NUM
    return float(kv(order, x))
