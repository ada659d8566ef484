"""Bisection: the interval halves at every step, so the count is known beforehand."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials
from xlroot.stopping import Tolerance


def trials(start: Start) -> Trials:
    """The middle of the interval, then of the half with opposite signs."""
    low, high, low_is_negative = start.low, start.high, start.f_low < 0.0
    while True:
        x = low + (high - low) / 2.0
        f = yield x
        if (f < 0.0) == low_is_negative:
            low = x
        else:
            high = x


def halvings(low: float, high: float, tolerance: Tolerance) -> int:
    """ceil(log2((high - low)/tolerance)), counted without rounding."""
    width, permitted, count = high - low, tolerance.absolute, 0
    while width > permitted:
        width /= 2.0
        count += 1
    return count


BISECTION = Method(
    "bisection",
    Family.BRACKETING,
    Need.VALUE,
    "1 (the error halves)",
    "classical; R. L. Burden and J. D. Faires, Numerical Analysis, section 2.1",
    "the bound and the number of iterations have to be known beforehand, or the residual is rough",
    trials,
    predict=halvings,
)
