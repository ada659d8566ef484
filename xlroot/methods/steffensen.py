"""Steffensen: Newton's step with the slope taken over a step as long as the residual."""

from __future__ import annotations

from xlroot.methods.method import Aside, Family, Method, Need, Start, Trials


def trials(start: Start) -> Trials:
    """x - f^2 / (f(x + f) - f): two evaluations a step; ends where the slope is zero."""
    x = start.guess
    f = yield x
    while True:
        # A long residual would carry the second point out of the limits: it is shortened.
        step = f
        room = 0.5 * (start.high - start.low)
        if abs(step) > room:
            step = room if step > 0.0 else -room
        if not start.low <= x + step <= start.high:
            step = -step
        if x + step == x:
            return
        slope = ((yield Aside(x + step)) - f) / step
        if slope == 0.0:
            return
        x -= f / slope
        f = yield x


STEFFENSEN = Method(
    "Steffensen",
    Family.OPEN,
    Need.VALUE,
    "2 in two evaluations",
    "J. F. Steffensen, Remarks on iteration, Skandinavisk Aktuarietidskrift 16 (1933) 64-72",
    "a good first iterate, a residual of about the unknown's size, and no slope",
    trials,
)
