"""Illinois: regula falsi that halves the residual at an end that stays."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials
from xlroot.methods.regula_falsi import chord


def trials(start: Start) -> Trials:
    """The chord; after two steps on the same side the other end counts for less."""
    a, b, fa, fb = start.low, start.high, start.f_low, start.f_high
    while True:
        # b is the newer end; a the one that may stay.
        x = chord(a, fa, b, fb)
        f = yield x
        if (f < 0.0) != (fb < 0.0):
            a, fa = b, fb
        else:
            fa *= 0.5
        b, fb = x, f


ILLINOIS = Method(
    "Illinois",
    Family.BRACKETING,
    Need.VALUE,
    "1.442",
    "M. Dowell and P. Jarratt, A modified regula falsi method, BIT 11 (1971) 168-174",
    "a smooth residual, simple and fast with a bracket kept",
    trials,
)
