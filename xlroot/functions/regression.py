"""Linear and exponential fits to data, with their statistics, and what they predict.

LINEST fits y = b + m1 x1 + m2 x2 + …, LOGEST y = b m1^x1 m2^x2 …, which is LINEST over ln y;
TREND and GROWTH give the fits' values. Data must be numbers throughout (#VALUE!); without x it is
1, 2, 3, …. Of x in the shape of y all is one variable; otherwise each column is one beside a
column of y, each row beside a row. Where variables depend on each other hosts differ: refused.
Sources: Excel's documentation of each function; OpenFormula section 6.18.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from enum import Enum
from typing import NamedTuple

from xlroot.errors import Unsupported
from xlroot.functions._leastsquares import Dependent, Fit, through_origin, with_constant
from xlroot.functions.entry import Takes, worksheet
from xlroot.values import Fault, Grid, Operand, Value, to_logical

_R = Takes.RAW


class Curve(Enum):
    """What is fitted."""

    LINE = "line"
    EXPONENTIAL = "exponential"


class Lie(Enum):
    """How the observations of several variables lie in a range."""

    TOGETHER = "one variable over the whole range"
    DOWN = "a column a variable"
    ACROSS = "a row a variable"


class Data(NamedTuple):
    """Observations: y, and x by variable."""

    y: list[float]
    x: list[list[float]]
    lie: Lie
    shape: tuple[int, int]


def _given(operand: Operand) -> Grid | None:
    """The operand as a grid; None where the argument is left empty."""
    if isinstance(operand, Grid):
        return operand
    return None if operand is None else Grid(((operand,),))


def _floats(values: Sequence[Value]) -> list[float] | Fault:
    found: list[float] = []
    for value in values:
        if isinstance(value, Fault):
            return value
        if not isinstance(value, float):
            return Fault.VALUE
        found.append(value)
    return found


def _flag(operand: Operand, *, default: bool) -> bool | Fault:
    """A logical argument; `default` where it is left empty between commas."""
    if operand is None:
        return default
    return to_logical(operand.rows[0][0] if isinstance(operand, Grid) else operand)


def _variables(grid: Grid, lie: Lie) -> list[list[float]] | Fault:
    if lie is Lie.TOGETHER:
        parts: list[Sequence[Value]] = [list(grid.flat())]
    else:
        parts = list(zip(*grid.rows, strict=True)) if lie is Lie.DOWN else list(grid.rows)
    found: list[list[float]] = []
    for part in parts:
        values = _floats(part)
        if isinstance(values, Fault):
            return values
        found.append(values)
    return found


def _data(ys: Operand, xs: Operand, curve: Curve) -> Data | Fault:
    """The observations; #REF! where x and y do not lie side by side."""
    y_grid, x_grid = _given(ys), _given(xs)
    if y_grid is None:
        return Fault.VALUE
    y = _floats(list(y_grid.flat()))
    if isinstance(y, Fault):
        return y
    if curve is Curve.EXPONENTIAL:
        if min(y) <= 0.0:
            return Fault.NUM
        y = [math.log(value) for value in y]
    shape = y_grid.height, y_grid.width
    if x_grid is None:
        return Data(y, [[float(n) for n in range(1, len(y) + 1)]], Lie.TOGETHER, shape)
    if (x_grid.height, x_grid.width) == shape:
        lie = Lie.TOGETHER
    elif y_grid.width == 1 and x_grid.height == y_grid.height:
        lie = Lie.DOWN
    elif y_grid.height == 1 and x_grid.width == y_grid.width:
        lie = Lie.ACROSS
    else:
        return Fault.REF
    x = _variables(x_grid, lie)
    return x if isinstance(x, Fault) else Data(y, x, lie, shape)


def _fit(data: Data, *, constant: bool) -> Fit | Fault:
    try:
        return (with_constant if constant else through_origin)(data.y, data.x)
    except Dependent:
        raise Unsupported(
            "the data do not determine the fit: too few observations, or one variable depends "
            "on the others"
        ) from None
    except (ArithmeticError, ValueError):
        return Fault.NUM


def _cell(number: float) -> Value:
    return number if math.isfinite(number) else Fault.NUM


def _statistics(fit: Fit, *, constant: bool) -> list[list[Value]]:
    """Rows 2 to 5: standard errors; r² and that of y; F and freedom; sums of squares."""
    if fit.freedom == 0:
        raise Unsupported("the fit meets every observation, so that it has no statistics")
    variance = fit.residue / fit.freedom
    errors: list[Value] = [_cell(math.sqrt(variance * part)) for part in fit.spread]
    count = len(fit.coefficients)
    spread = errors[count - 1 :: -1] + (errors[count:] if constant else [Fault.NA])
    total = fit.regression + fit.residue
    square: Value = _cell(fit.regression / total) if total else Fault.NUM
    ratio: Value = _cell(fit.regression / count / variance) if variance else Fault.NUM
    rest: list[Value] = [Fault.NA] * (count - 1)
    return [
        spread,
        [square, _cell(math.sqrt(variance)), *rest],
        [ratio, float(fit.freedom), *rest],
        [_cell(fit.regression), _cell(fit.residue), *rest],
    ]


def _estimate(
    curve: Curve, ys: Operand, xs: Operand, constant: Operand, statistics: Operand
) -> Operand:
    data = _data(ys, xs, curve)
    if isinstance(data, Fault):
        return data
    keep, stats = _flag(constant, default=True), _flag(statistics, default=False)
    if isinstance(keep, Fault):
        return keep
    if isinstance(stats, Fault):
        return stats
    fit = _fit(data, constant=keep)
    if isinstance(fit, Fault):
        return fit
    numbers = [*reversed(fit.coefficients), fit.constant]
    rows = [[_shown(curve, number) for number in numbers]]
    if stats:
        rows += _statistics(fit, constant=keep)
    return Grid(tuple(map(tuple, rows)))


def _shown(curve: Curve, number: float) -> Value:
    try:
        return _cell(number if curve is Curve.LINE else math.exp(number))
    except OverflowError:
        return Fault.NUM


def _predict(curve: Curve, ys: Operand, xs: Operand, news: Operand, constant: Operand) -> Operand:
    data = _data(ys, xs, curve)
    if isinstance(data, Fault):
        return data
    keep = _flag(constant, default=True)
    if isinstance(keep, Fault):
        return keep
    fit = _fit(data, constant=keep)
    if isinstance(fit, Fault):
        return fit
    grid = _given(news)
    if grid is None:
        points, shape = data.x, data.shape
    else:
        found = _variables(grid, data.lie)
        if isinstance(found, Fault):
            return found
        points, shape = found, (grid.height, grid.width)
        if len(points) != len(data.x):
            return Fault.REF
        if data.lie is Lie.DOWN:
            shape = grid.height, 1
        elif data.lie is Lie.ACROSS:
            shape = 1, grid.width
    values = [
        _shown(curve, fit.constant + sum(map(_times, fit.coefficients, point)))
        for point in zip(*points, strict=True)
    ]
    height, width = shape
    return Grid(tuple(tuple(values[row * width : (row + 1) * width]) for row in range(height)))


def _times(coefficient: float, x: float) -> float:
    return coefficient * x


@worksheet("LINEST", _R, _R, _R, _R, optional=3)
def linest(
    ys: Operand, xs: Operand = None, constant: Operand = None, statistics: Operand = None
) -> Operand:
    """Coefficients from the last variable to the first, then the constant; statistics below."""
    return _estimate(Curve.LINE, ys, xs, constant, statistics)


@worksheet("LOGEST", _R, _R, _R, _R, optional=3)
def logest(
    ys: Operand, xs: Operand = None, constant: Operand = None, statistics: Operand = None
) -> Operand:
    """Bases from the last variable to the first, then the factor; statistics of ln y below."""
    return _estimate(Curve.EXPONENTIAL, ys, xs, constant, statistics)


@worksheet("TREND", _R, _R, _R, _R, optional=3)
def trend(
    ys: Operand, xs: Operand = None, news: Operand = None, constant: Operand = None
) -> Operand:
    """The linear fit's values at new x, or at the data."""
    return _predict(Curve.LINE, ys, xs, news, constant)


@worksheet("GROWTH", _R, _R, _R, _R, optional=3)
def growth(
    ys: Operand, xs: Operand = None, news: Operand = None, constant: Operand = None
) -> Operand:
    """The exponential fit's values at new x, or at the data."""
    return _predict(Curve.EXPONENTIAL, ys, xs, news, constant)
