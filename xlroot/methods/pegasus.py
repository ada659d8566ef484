"""Pegasus: regula falsi that scales the residual at an end that stays by f/(f + f_new)."""

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
            fa *= fb / (fb + f)
        b, fb = x, f


PEGASUS = Method(
    "Pegasus",
    Family.BRACKETING,
    Need.VALUE,
    "1.642",
    "M. Dowell and P. Jarratt, The Pegasus method, BIT 12 (1972) 503-508",
    "a smooth residual; usually a little faster than Illinois",
    trials,
)
