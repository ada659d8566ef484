"""Linear least squares by Householder reflections: coefficients, residue, spread.

`min |y - X b|` for a matrix given by columns, of full rank and not wider than high. Columns are
centred first where there is a constant, which keeps nearly equal values accurate. Source: Golub
and Van Loan, Matrix Computations, sections 5.1 to 5.3.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import NamedTuple

INDEPENDENT = 1e-11
"""A column whose part outside the others is shorter than this, relative to it, depends on them."""


class Fit(NamedTuple):
    """y = constant + sum of coefficients times columns, fitted to data."""

    coefficients: list[float]
    constant: float
    residue: float
    """The sum of squares of the residuals."""
    regression: float
    """The sum of squares that the fit explains."""
    freedom: int
    """Degrees of freedom left: data less fitted numbers."""
    spread: list[float]
    """Diagonal of (XᵀX)⁻¹, the constant's last where there is one."""


class Dependent(ValueError):
    """The columns do not determine the coefficients."""


def mean(values: Sequence[float]) -> float:
    """The arithmetic mean, summed exactly."""
    return math.fsum(values) / len(values)


def dot(a: Sequence[float], b: Sequence[float]) -> float:
    """The scalar product."""
    return math.fsum(x * y for x, y in zip(a, b, strict=True))


def through_origin(y: Sequence[float], columns: Sequence[Sequence[float]]) -> Fit:
    """The fit without a constant."""
    coefficients, inverse, residue = _solved(y, columns)
    total = dot(y, y)
    spread = [dot(row, row) for row in inverse]
    freedom = len(y) - len(columns)
    return Fit(coefficients, 0.0, residue, max(total - residue, 0.0), freedom, spread)


def with_constant(y: Sequence[float], columns: Sequence[Sequence[float]]) -> Fit:
    """The fit with a constant, over centred data."""
    level = mean(y)
    means = [mean(column) for column in columns]
    centred = [[x - m for x in column] for column, m in zip(columns, means, strict=True)]
    for column, own in zip(columns, centred, strict=True):
        if math.hypot(*own) <= INDEPENDENT * math.hypot(*column):
            raise Dependent
    off = [value - level for value in y]
    coefficients, inverse, residue = _solved(off, centred)
    constant = level - dot(coefficients, means)
    total = dot(off, off)
    # With R⁻¹ the inverse triangle, the constant's share is 1/n + |R⁻ᵀ means|².
    tilted = [dot(means, [row[k] for row in inverse]) for k in range(len(columns))]
    spread = [dot(row, row) for row in inverse]
    spread.append(1.0 / len(y) + dot(tilted, tilted))
    freedom = len(y) - len(columns) - 1
    return Fit(coefficients, constant, residue, max(total - residue, 0.0), freedom, spread)


def _solved(
    y: Sequence[float], columns: Sequence[Sequence[float]]
) -> tuple[list[float], list[list[float]], float]:
    """Coefficients, the inverse of the triangle R, and the sum of squares left over."""
    matrix = [list(column) for column in columns]
    right = list(y)
    count = len(matrix)
    if len(right) < count:
        raise Dependent
    for k in range(count):
        whole = math.hypot(*matrix[k])
        tail = math.hypot(*matrix[k][k:])
        if tail <= INDEPENDENT * whole or tail == 0.0:
            raise Dependent
        pivot = -math.copysign(tail, matrix[k][k])
        mirror = matrix[k][k:]
        mirror[0] -= pivot
        length = dot(mirror, mirror)
        for target in [*matrix[k + 1 :], right]:
            share = 2.0 * dot(mirror, target[k:]) / length
            for row, part in enumerate(mirror, start=k):
                target[row] -= share * part
        matrix[k][k] = pivot
    inverse = [[0.0] * count for _ in range(count)]
    for column in range(count):
        for row in range(column, -1, -1):
            known = sum(matrix[j][row] * inverse[j][column] for j in range(row + 1, column + 1))
            inverse[row][column] = ((row == column) - known) / matrix[row][row]
    coefficients = [dot(row, right[:count]) for row in inverse]
    return coefficients, inverse, dot(right[count:], right[count:])
