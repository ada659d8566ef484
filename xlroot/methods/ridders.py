"""Ridders: an exponential factor turns the residual into a straight line through three points."""

from __future__ import annotations

import math
from itertools import pairwise

from xlroot.methods.method import Family, Method, Need, Start, Trials, opposite


def trials(start: Start) -> Trials:
    """The middle, then the zero of the straightened residual: two evaluations a step.

    With m the middle, x = m + (m - a) sign(fa - fb) fm / sqrt(fm^2 - fa fb), paper equation (2);
    the residuals are scaled by the largest, so that their products cannot overflow.
    """
    a, b, fa, fb = start.low, start.high, start.f_low, start.f_high
    while True:
        middle = a + (b - a) / 2.0
        fm = yield middle
        scale = max(abs(fa), abs(fm), abs(fb))
        ra, rm, rb = fa / scale, fm / scale, fb / scale
        root = math.sqrt(rm * rm - ra * rb)
        x = middle
        if root:
            x = middle + (middle - a) * (math.copysign(1.0, ra - rb) * rm / root)
        if x != middle and a < x < b:
            f = yield x
        else:
            f = fm
        first, second = sorted(((middle, fm), (x, f)))
        points = ((a, fa), first, second, (b, fb))
        for left, right in pairwise(points):
            if opposite(left[1], right[1]):
                (a, fa), (b, fb) = left, right
                break


RIDDERS = Method(
    "Ridders",
    Family.BRACKETING,
    Need.VALUE,
    "2 in two evaluations",
    "C. Ridders, A new algorithm for computing a single root of a real continuous function, "
    "IEEE Trans. Circuits and Systems 26 (1979) 979-980",
    "a residual that grows exponentially on one side",
    trials,
)
