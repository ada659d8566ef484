"""The straight line through paired data: slope, intercept, forecast, how well it fits.

Pairs of which either part is no number do not count; unequal counts are #N/A; data that fix no
line are #DIV/0!. Sums of squares are taken about the means. Sources: Excel's documentation of
each function; OpenFormula section 6.18.
"""

from __future__ import annotations

import math
from typing import NamedTuple

from xlroot.functions._leastsquares import dot, mean
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.totals import finite
from xlroot.values import Fault, Grid, Operand


class Scatter(NamedTuple):
    """Means and sums of squares about them."""

    pairs: int
    x: float
    y: float
    xx: float
    xy: float
    yy: float
    left: float
    """The sum of squares of y about the line; NaN where x does not vary."""


def scatter(ys: Operand, xs: Operand) -> Scatter | Fault:
    """The sums over all pairs of numbers."""
    left = list(xs.flat()) if isinstance(xs, Grid) else [xs]
    right = list(ys.flat()) if isinstance(ys, Grid) else [ys]
    if len(left) != len(right):
        return Fault.NA
    for value in (*right, *left):
        if isinstance(value, Fault):
            return value
    pairs = [
        (x, y)
        for x, y in zip(left, right, strict=True)
        if isinstance(x, float) and isinstance(y, float)
    ]
    if not pairs:
        return Fault.DIV0
    try:
        x0, y0 = mean([x for x, _ in pairs]), mean([y for _, y in pairs])
        dx, dy = [x - x0 for x, _ in pairs], [y - y0 for _, y in pairs]
        xx, xy = dot(dx, dx), dot(dx, dy)
        off = [v - xy / xx * u for u, v in zip(dx, dy, strict=True)] if xx else [math.nan]
        return Scatter(len(pairs), x0, y0, xx, xy, dot(dy, dy), dot(off, off))
    except (ArithmeticError, ValueError):
        return Fault.NUM


@worksheet("SLOPE", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def slope(ys: Operand, xs: Operand) -> float | Fault:
    """The slope of y over x."""
    data = scatter(ys, xs)
    if isinstance(data, Fault):
        return data
    return finite(data.xy / data.xx) if data.xx else Fault.DIV0


@worksheet("INTERCEPT", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def intercept(ys: Operand, xs: Operand) -> float | Fault:
    """The line's y at x = 0."""
    data = scatter(ys, xs)
    if isinstance(data, Fault):
        return data
    return finite(data.y - data.xy / data.xx * data.x) if data.xx else Fault.DIV0


@worksheet(("FORECAST", "FORECAST.LINEAR"), Takes.NUMBER, Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def forecast(x: float, ys: Operand, xs: Operand) -> float | Fault:
    """The line's y at x."""
    data = scatter(ys, xs)
    if isinstance(data, Fault):
        return data
    return finite(data.y + data.xy / data.xx * (x - data.x)) if data.xx else Fault.DIV0


@worksheet("RSQ", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def rsq(ys: Operand, xs: Operand) -> float | Fault:
    """The square of the coefficient of correlation."""
    data = scatter(ys, xs)
    if isinstance(data, Fault):
        return data
    if not data.xx or not data.yy:
        return Fault.DIV0
    return finite((data.xy / data.xx) * (data.xy / data.yy))


@worksheet("STEYX", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def steyx(ys: Operand, xs: Operand) -> float | Fault:
    """The standard error of y about the line; #DIV/0! for fewer than three pairs."""
    data = scatter(ys, xs)
    if isinstance(data, Fault):
        return data
    if data.pairs < 3 or not data.xx:
        return Fault.DIV0
    return finite(math.sqrt(data.left / (data.pairs - 2)))
