"""ITP: interpolate, truncate, project; never worse than bisection by more than one step."""

from __future__ import annotations

import math

from xlroot.methods.method import Family, Method, Need, Start, Trials
from xlroot.methods.regula_falsi import chord

TRUNCATION = 0.2
"""kappa_1, relative to the width of the first interval; kappa_2 is 2 and n_0 is 1: the values
that the paper uses in its experiments."""
SLACK = 1


def trials(start: Start) -> Trials:
    """The chord's zero, pulled towards the middle and then kept within the minmax radius of it."""
    a, b, fa, fb = start.low, start.high, start.f_low, start.f_high
    kappa = TRUNCATION / (b - a)
    epsilon = 0.5 * start.tolerance.at(max(abs(a), abs(b)))
    halvings = max(0, math.ceil(math.log2((b - a) / (2.0 * epsilon))))
    # A little less, so that rounding does not leave the last interval a digit too wide.
    epsilon -= min(0.25 * epsilon, 4.0 * math.ulp(max(abs(a), abs(b))))
    step = 0
    while True:
        middle = a + (b - a) / 2.0
        radius = epsilon * 2.0 ** min(halvings + SLACK - step, 1000) - (b - a) / 2.0
        point = chord(a, fa, b, fb)
        side = math.copysign(1.0, middle - point)
        shift = kappa * (b - a) ** 2
        truncated = point + side * shift if shift <= abs(middle - point) else middle
        if abs(truncated - middle) > radius:
            truncated = middle - side * max(radius, 0.0)
        if not a < truncated < b:
            truncated = middle
        f = yield truncated
        step += 1
        if (f < 0.0) == (fa < 0.0):
            a, fa = truncated, f
        else:
            b, fb = truncated, f


ITP = Method(
    "ITP",
    Family.BRACKETING,
    Need.VALUE,
    "1.618",
    "I. F. D. Oliveira and R. H. C. Takahashi, An enhancement of the bisection method average "
    "performance preserving minmax optimality, ACM Trans. Math. Softw. 47 (2021) article 5",
    "fast on average, with bisection's count as the ceiling",
    trials,
)
