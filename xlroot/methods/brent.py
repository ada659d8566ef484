"""Brent: inverse quadratic interpolation and secant steps, with bisection as the safeguard."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials


def trials(start: Start) -> Trials:
    """The interpolated point where it is safe, otherwise the middle; never a step below the
    tolerance, which closes the bracket at the end."""
    a, b, fa, fb = start.low, start.high, start.f_low, start.f_high
    c, fc = a, fa
    step = before = b - a
    while True:
        if abs(fc) < abs(fb):
            a, b, c = b, c, b
            fa, fb, fc = fb, fc, fb
        least = 0.5 * start.tolerance.at(b)
        half = 0.5 * (c - b)
        if abs(before) < least or abs(fa) <= abs(fb):
            step = before = half
        else:
            s = fb / fa
            if a == c:
                p, q = 2.0 * half * s, 1.0 - s
            else:
                q, r = fa / fc, fb / fc
                p = s * (2.0 * half * q * (q - r) - (b - a) * (r - 1.0))
                q = (q - 1.0) * (r - 1.0) * (s - 1.0)
            if p > 0.0:
                q = -q
            else:
                p = -p
            s, before = before, step
            if 2.0 * p < 3.0 * half * q - abs(least * q) and p < abs(0.5 * s * q):
                step = p / q
            else:
                step = before = half
        a, fa = b, fb
        if abs(step) > least:
            b += step
        else:
            b += least if half > 0.0 else -least
        fb = yield b
        if (fb < 0.0) == (fc < 0.0):
            c, fc = a, fa
            step = before = b - a


BRENT = Method(
    "Brent",
    Family.BRACKETING,
    Need.VALUE,
    "1.618 to 1.839",
    "R. P. Brent, Algorithms for Minimization without Derivatives (1973), chapter 4",
    "the long-proven general choice for a bracketed root",
    trials,
)
