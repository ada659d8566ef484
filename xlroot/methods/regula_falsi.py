"""Regula falsi: the chord between the ends of the bracket; one end often stays where it is."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials


def trials(start: Start) -> Trials:
    """Where the chord through both ends crosses zero."""
    a, b, fa, fb = start.low, start.high, start.f_low, start.f_high
    while True:
        x = chord(a, fa, b, fb)
        f = yield x
        if (f < 0.0) == (fa < 0.0):
            a, fa = x, f
        else:
            b, fb = x, f


def chord(a: float, fa: float, b: float, fb: float) -> float:
    """The zero of the chord through (a, fa) and (b, fb), within [a, b] for opposite signs.

    The fraction is formed from the ratio of the residuals, so that neither their difference nor
    a product can overflow.
    """
    if abs(fa) < abs(fb):
        ratio = fa / fb
        return a + (b - a) * (ratio / (ratio - 1.0))
    ratio = fb / fa
    return b + (a - b) * (ratio / (ratio - 1.0))


REGULA_FALSI = Method(
    "regula falsi",
    Family.BRACKETING,
    Need.VALUE,
    "1 (one end may stay)",
    "classical; A. Ralston and P. Rabinowitz, A First Course in Numerical Analysis, section 8.3",
    "a nearly straight residual, or a hand check of the chord construction",
    trials,
)
