"""Halley: the zero of the hyperbola that shares value, slope and curvature."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Sample, Start, Trials


def trials(start: Start) -> Trials:
    """x - 2 f f' / (2 f'^2 - f f''), written with Newton's step to avoid overflow; ends where
    the slope, or the hyperbola's, is zero."""
    x = start.guess
    while True:
        sample: Sample = yield x
        if sample.slope == 0.0:
            return
        newton = sample.f / sample.slope
        divisor = 1.0 - 0.5 * newton * (sample.curvature / sample.slope)
        if divisor == 0.0:
            return
        x -= newton / divisor


HALLEY = Method(
    "Halley",
    Family.OPEN,
    Need.CURVATURE,
    "3",
    "E. Halley, Phil. Trans. Roy. Soc. 18 (1694) 136-148; G. Alefeld, On the convergence of "
    "Halley's method, Amer. Math. Monthly 88 (1981) 530-536",
    "a good first iterate, a strongly curved residual",
    trials,
)
