"""Fixed point: x = g(x) by substitution, with the residual written as g(x) - x."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials


def trials(start: Start) -> Trials:
    """x + residual."""
    x = start.guess
    while True:
        x += yield x


FIXED_POINT = Method(
    "fixed point",
    Family.OPEN,
    Need.VALUE,
    "1 (by |g'|)",
    "classical; S. Banach, Fund. Math. 3 (1922) 133-181",
    "the residual is written g(x) - x and |g'| is well below one",
    trials,
    contracts=True,
)
