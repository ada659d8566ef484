"""Chandrupatla: inverse quadratic interpolation exactly where it is safe, otherwise bisection."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials


def trials(start: Start) -> Trials:
    """The paper's algorithm: with three points, interpolate if 1 - sqrt(1 - xi) < phi <
    sqrt(xi); keep at least half the tolerance from both ends."""
    # Names follow the paper: 1 is the newest point, 2 the other end, 3 the one before.
    x1, x2, f1, f2 = start.high, start.low, start.f_high, start.f_low
    absolute, relative = start.tolerance
    t = 0.5
    while True:
        x = x1 + t * (x2 - x1)
        f = yield x
        if (f < 0.0) == (f1 < 0.0):
            x3, f3 = x1, f1
        else:
            x3, f3 = x2, f2
            x2, f2 = x1, f1
        x1, f1 = x, f
        best = x1 if abs(f1) < abs(f2) else x2
        width = abs(x2 - x1)
        least = 0.5 * (absolute + relative * abs(best)) / width if width else 0.5
        t = 0.5
        # f1 and f2 differ in sign and f3 from f2, so no denominator below is zero when safe.
        if f3 != f2 and f3 != f1:
            xi, phi = (x1 - x2) / (x3 - x2), (f1 - f2) / (f3 - f2)
            if phi * phi < xi and (1.0 - phi) * (1.0 - phi) < 1.0 - xi:
                t = (f1 / (f2 - f1)) * (f3 / (f2 - f3)) + (x3 - x1) / (x2 - x1) * (
                    f1 / (f3 - f1)
                ) * (f2 / (f3 - f2))
        t = min(max(t, least), 1.0 - least)


CHANDRUPATLA = Method(
    "Chandrupatla",
    Family.BRACKETING,
    Need.VALUE,
    "1.839",
    "T. R. Chandrupatla, A new hybrid quadratic/bisection algorithm for finding the zero of a "
    "nonlinear function without using derivatives, Adv. Eng. Software 28 (1997) 145-149",
    "the default: seldom beaten in evaluations, robust at multiple roots",
    trials,
)
