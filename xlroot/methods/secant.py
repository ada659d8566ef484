"""Secant: the chord through the last two iterates."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials

FIRST_STEP = 1e-3
"""The second iterate lies this part of the limits' width from the first (own choice)."""


def trials(start: Start) -> Trials:
    """x - f (x - x0)/(f - f0); ends where two residuals are equal."""
    x0 = start.guess
    f0 = yield x0
    step = FIRST_STEP * (start.high - start.low)
    x = x0 + step if x0 + step <= start.high else x0 - step
    f = yield x
    while True:
        if f == f0:
            return
        x0, f0, x = x, f, x - f * ((x - x0) / (f - f0))
        f = yield x


SECANT = Method(
    "secant",
    Family.OPEN,
    Need.VALUE,
    "1.618",
    "classical; A. M. Ostrowski, Solution of Equations and Systems of Equations (1966), chapter 3",
    "a good first iterate and no slope",
    trials,
)
