"""Anderson-Björck: regula falsi that scales the residual at an end that stays by 1 - f_new/f."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials
from xlroot.methods.regula_falsi import chord

LEAST = 0.1
"""The factor is not taken smaller (our safeguard; near the root it is close to 1): where the
residual is flat at one end, a factor near 0 would throw the next chord back to the other end,
over and over."""


def trials(start: Start) -> Trials:
    """The chord; after two steps on the same side the other end counts for less: by
    1 - f_new/f, or by half where that is not positive."""
    a, b, fa, fb = start.low, start.high, start.f_low, start.f_high
    while True:
        # b is the newer end; a the one that may stay.
        x = chord(a, fa, b, fb)
        f = yield x
        if (f < 0.0) != (fb < 0.0):
            a, fa = b, fb
        else:
            factor = 1.0 - f / fb
            fa *= max(factor, LEAST) if factor > 0.0 else 0.5
        b, fb = x, f


ANDERSON_BJORCK = Method(
    "Anderson-Björck",
    Family.BRACKETING,
    Need.VALUE,
    "1.682 to 1.710",
    "N. Anderson and A. Björck, A new high order method of regula falsi type, BIT 13 (1973) "
    "253-264",
    "a smooth residual; the fastest of the modified chords near the root",
    trials,
)
