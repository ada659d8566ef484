"""Newton: the tangent's zero."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Sample, Start, Trials


def trials(start: Start) -> Trials:
    """x - f / f'; ends where the slope is zero."""
    x = start.guess
    while True:
        sample: Sample = yield x
        if sample.slope == 0.0:
            return
        x -= sample.f / sample.slope


NEWTON = Method(
    "Newton",
    Family.OPEN,
    Need.SLOPE,
    "2",
    "classical; J. Raphson, Analysis aequationum universalis (1690); Burden and Faires, "
    "Numerical Analysis, section 2.3",
    "a good first iterate and a smooth residual",
    trials,
)
