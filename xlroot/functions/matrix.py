"""Products, determinants and inverses of matrices: elimination with partial pivoting.

G. H. Golub and C. F. Van Loan, Matrix Computations, section 3.4.
"""

from __future__ import annotations

from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.totals import added, finite
from xlroot.values import Fault, Grid, Operand

Rows = list[list[float]]
LARGEST = 200
"""Rows of the largest matrix."""


def _matrix(operand: Operand) -> Rows | Fault:
    grid = operand if isinstance(operand, Grid) else Grid(((operand,),))
    if max(grid.extent) > LARGEST:
        return Fault.VALUE
    rows: Rows = []
    for row in grid.rows:
        numbers = []
        for value in row:
            if isinstance(value, Fault):
                return value
            if type(value) is not float:
                return Fault.VALUE
            numbers.append(value)
        rows.append(numbers)
    return rows


def _square(operand: Operand) -> Rows | Fault:
    rows = _matrix(operand)
    if isinstance(rows, Fault):
        return rows
    return rows if len(rows) == len(rows[0]) else Fault.VALUE


@worksheet("MMULT", Takes.RAW, Takes.RAW)
def mmult(a: Operand, b: Operand) -> Operand:
    """The product of two matrices."""
    left, right = _matrix(a), _matrix(b)
    if isinstance(left, Fault):
        return left
    if isinstance(right, Fault):
        return right
    if len(left[0]) != len(right):
        return Fault.VALUE
    columns = list(zip(*right, strict=True))
    return Grid(
        tuple(
            tuple(added(x * y for x, y in zip(row, column, strict=True)) for column in columns)
            for row in left
        )
    )


def _eliminated(rows: Rows) -> float:
    """The determinant; the rows, with what stands to their right, become triangular."""
    size, determinant = len(rows), 1.0
    for place in range(size):
        best = max(range(place, size), key=lambda row: abs(rows[row][place]))
        if rows[best][place] == 0.0:
            return 0.0
        if best != place:
            rows[place], rows[best] = rows[best], rows[place]
            determinant = -determinant
        pivot = rows[place]
        determinant *= pivot[place]
        for row in rows[place + 1 :]:
            factor = row[place] / pivot[place]
            if factor:
                for column in range(place, len(row)):
                    row[column] -= factor * pivot[column]
    return determinant


@worksheet("MDETERM", Takes.RAW, gives=Gives.NUMBER)
def mdeterm(operand: Operand) -> float | Fault:
    """The determinant."""
    rows = _square(operand)
    return rows if isinstance(rows, Fault) else finite(_eliminated(rows))


@worksheet("MINVERSE", Takes.RAW)
def minverse(operand: Operand) -> Operand:
    """The inverse; #NUM! for a singular matrix."""
    rows = _square(operand)
    if isinstance(rows, Fault):
        return rows
    size = len(rows)
    for place, row in enumerate(rows):
        row.extend(1.0 if column == place else 0.0 for column in range(size))
    if _eliminated(rows) == 0.0:
        return Fault.NUM
    for place in reversed(range(size)):
        pivot = rows[place]
        scale = pivot[place]
        rows[place] = pivot = [value / scale for value in pivot]
        for row in rows[:place]:
            factor = row[place]
            for column in range(place, 2 * size):
                row[column] -= factor * pivot[column]
    return Grid(tuple(tuple(row[size:]) for row in rows))


@worksheet(("MUNIT",), Takes.NUMBER)
def munit(size: float) -> Operand:
    """The unit matrix."""
    count = int(size)
    if not 1 <= count <= LARGEST:
        return Fault.VALUE
    return Grid(tuple(tuple(float(i == j) for j in range(count)) for i in range(count)))
