"""Chandrupatla: inverse quadratic interpolation exactly where it is safe, otherwise bisection."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials


def trials(start: Start) -> Trials:
    """The paper's algorithm: with three points, interpolate if 1 - sqrt(1 - xi) < phi <
    sqrt(xi); keep at least half the tolerance from both ends."""
    # Names follow the paper: 1 is the newest point, 2 the other end, 3 the one before.
    x2, x1, f2, f1, (absolute, relative), _ = start
    absolute, relative = 0.5 * absolute, 0.5 * relative
    x = x1 + 0.5 * (x2 - x1)
    while True:
        f = yield x
        if (f < 0.0) == (f1 < 0.0):
            x3, f3 = x1, f1
        else:
            x3, f3 = x2, f2
            x2, f2 = x1, f1
        x1, f1 = x, f
        width = x2 - x1
        t = 0.5
        # f2 differs in sign from f1 and from f3: of the differences only f3 - f1 can be zero.
        d21, d32, d31 = f2 - f1, f3 - f2, f3 - f1
        if d31 and width:
            xi, phi = width / (x2 - x3), -d21 / d32
            if phi * phi < xi and (1.0 - phi) * (1.0 - phi) < 1.0 - xi:
                t = (f1 / d31) * (f2 / d32) * ((x3 - x1) / width) - (f1 / d21) * (f3 / d32)
                least = absolute / width if width > 0.0 else -absolute / width
                if relative:
                    least += relative * abs((x1 if abs(f1) < abs(f2) else x2) / width)
                if t < least:
                    t = least
                if t > 1.0 - least:
                    t = 1.0 - least
        x = x1 + t * width


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
