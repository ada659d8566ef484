"""Sums, products, extremes, counts and means over many values.

In a range or an array, texts, logicals and blanks do not count; among the arguments themselves,
logicals and texts that read as numbers do (Excel's documentation of each; OpenFormula section
6.16.61). Sums run from left to right, row by row, in plain floating point, as compiled chains do.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator

from xlroot.errors import Unsupported
from xlroot.functions.entry import Fold, Gives, Takes, worksheet
from xlroot.values import Fault, Grid, Operand, Value, to_number


def numbers(operands: Iterable[Operand]) -> list[float] | Fault:
    """The numbers among the operands, or the first fault."""
    found: list[float] = []
    for operand in operands:
        if isinstance(operand, Grid):
            for row in operand.rows:
                for value in row:
                    if type(value) is float:
                        found.append(value)
                    elif isinstance(value, Fault):
                        return value
            continue
        number = to_number(operand)
        if isinstance(number, Fault):
            return number
        found.append(number)
    return found


def all_numbers(operands: Iterable[Operand]) -> list[float] | Fault:
    """Like `numbers`, but in a range texts count as 0 and logicals as 0 and 1 (the …A forms)."""
    found: list[float] = []
    for operand in operands:
        for value in operand.flat() if isinstance(operand, Grid) else (operand,):
            if isinstance(value, Fault):
                return value
            if isinstance(operand, Grid):
                if value is not None:
                    found.append(0.0 if isinstance(value, str) else float(value))
                continue
            number = to_number(value)
            if isinstance(number, Fault):
                return number
            found.append(number)
    return found


def added(values: Iterable[float]) -> float:
    """The sum from left to right."""
    total = 0.0
    for value in values:
        total += value
    return total


def finite(value: float) -> float | Fault:
    """The value, or #NUM! where it is beyond what a cell holds."""
    return value if math.isfinite(value) else Fault.NUM


@worksheet("SUM", Takes.RAW, repeats=1, gives=Gives.NUMBER, fold=Fold.SUM)
def sum_(*operands: Operand) -> float | Fault:
    """The sum of the numbers; 0 for none."""
    found = numbers(operands)
    return found if isinstance(found, Fault) else finite(added(found))


@worksheet("PRODUCT", Takes.RAW, repeats=1, gives=Gives.NUMBER, fold=Fold.PRODUCT)
def product(*operands: Operand) -> float | Fault:
    """The product of the numbers; 0 for none."""
    found = numbers(operands)
    if isinstance(found, Fault):
        return found
    return finite(math.prod(found)) if found else 0.0


@worksheet("SUMSQ", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def sumsq(*operands: Operand) -> float | Fault:
    """The sum of squares."""
    found = numbers(operands)
    return found if isinstance(found, Fault) else finite(added(x * x for x in found))


@worksheet("AVERAGE", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def average(*operands: Operand) -> float | Fault:
    """The mean; #DIV/0! for no numbers."""
    found = numbers(operands)
    if isinstance(found, Fault):
        return found
    return finite(added(found) / len(found)) if found else Fault.DIV0


@worksheet("AVERAGEA", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def averagea(*operands: Operand) -> float | Fault:
    """The mean with texts as 0 and logicals as 0 and 1."""
    found = all_numbers(operands)
    if isinstance(found, Fault):
        return found
    return finite(added(found) / len(found)) if found else Fault.DIV0


@worksheet("MIN", Takes.RAW, repeats=1, gives=Gives.NUMBER, fold=Fold.MINIMUM)
def min_(*operands: Operand) -> float | Fault:
    """The smallest number; 0 for none."""
    found = numbers(operands)
    return found if isinstance(found, Fault) else min(found, default=0.0)


@worksheet("MAX", Takes.RAW, repeats=1, gives=Gives.NUMBER, fold=Fold.MAXIMUM)
def max_(*operands: Operand) -> float | Fault:
    """The largest number; 0 for none."""
    found = numbers(operands)
    return found if isinstance(found, Fault) else max(found, default=0.0)


@worksheet("MINA", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def mina(*operands: Operand) -> float | Fault:
    """The smallest with texts as 0 and logicals as 0 and 1."""
    found = all_numbers(operands)
    return found if isinstance(found, Fault) else min(found, default=0.0)


@worksheet("MAXA", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def maxa(*operands: Operand) -> float | Fault:
    """The largest with texts as 0 and logicals as 0 and 1."""
    found = all_numbers(operands)
    return found if isinstance(found, Fault) else max(found, default=0.0)


def _values(operands: Iterable[Operand]) -> Iterator[tuple[Value, bool]]:
    """Every value, and whether it stands in a range or array."""
    for operand in operands:
        if isinstance(operand, Grid):
            yield from ((value, True) for value in operand.flat())
        else:
            yield operand, False


@worksheet("COUNT", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def count(*operands: Operand) -> float:
    """How many numbers; faults and texts in ranges do not count."""
    total = 0
    for value, inside in _values(operands):
        if inside or value is None:
            total += type(value) is float or (value is None and not inside)
        else:
            total += not isinstance(to_number(value), Fault)
    return float(total)


@worksheet("COUNTA", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def counta(*operands: Operand) -> float:
    """How many cells and arguments hold anything, faults and empty texts included."""
    return float(sum(value is not None or not inside for value, inside in _values(operands)))


@worksheet("COUNTBLANK", Takes.RAW, gives=Gives.NUMBER)
def countblank(operand: Operand) -> float:
    """How many cells are blank or hold an empty text."""
    listed = sum(value is None or value == "" for value, _ in _values((operand,)))
    if isinstance(operand, Grid):
        height, width = operand.extent
        listed += height * width - operand.height * operand.width
    return float(listed)


@worksheet("SUMPRODUCT", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def sumproduct(*operands: Operand) -> float | Fault:
    """The sum of products of elements in the same place; what is no number counts as 0."""
    grids = [each if isinstance(each, Grid) else Grid(((each,),)) for each in operands]
    height, width = grids[0].height, grids[0].width
    if any((grid.height, grid.width) != (height, width) for grid in grids):
        return Fault.VALUE
    total = 0.0
    for values in zip(*(grid.flat() for grid in grids), strict=True):
        term = 1.0
        for value in values:
            if isinstance(value, Fault):
                return value
            term *= value if type(value) is float else 0.0
        total += term
    return finite(total)


def _pairs(a: Operand, b: Operand) -> list[tuple[float, float]] | Fault:
    """Pairs of numbers in the same place; #N/A for different shapes."""
    left = a if isinstance(a, Grid) else Grid(((a,),))
    right = b if isinstance(b, Grid) else Grid(((b,),))
    if left.height * left.width != right.height * right.width:
        return Fault.NA
    found = []
    for x, y in zip(left.flat(), right.flat(), strict=True):
        for value in (x, y):
            if isinstance(value, Fault):
                return value
        if type(x) is float and type(y) is float:
            found.append((x, y))
    return found


@worksheet("SUMX2MY2", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def sumx2my2(a: Operand, b: Operand) -> float | Fault:
    """The sum of x² − y²."""
    pairs = _pairs(a, b)
    return pairs if isinstance(pairs, Fault) else finite(added(x * x - y * y for x, y in pairs))


@worksheet("SUMX2PY2", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def sumx2py2(a: Operand, b: Operand) -> float | Fault:
    """The sum of x² + y²."""
    pairs = _pairs(a, b)
    return pairs if isinstance(pairs, Fault) else finite(added(x * x + y * y for x, y in pairs))


@worksheet("SUMXMY2", Takes.RAW, Takes.RAW, gives=Gives.NUMBER)
def sumxmy2(a: Operand, b: Operand) -> float | Fault:
    """The sum of (x − y)²."""
    pairs = _pairs(a, b)
    if isinstance(pairs, Fault):
        return pairs
    return finite(added((x - y) * (x - y) for x, y in pairs))


@worksheet("SERIESSUM", Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, Takes.RAW, gives=Gives.NUMBER)
def seriessum(x: float, first: float, step: float, coefficients: Operand) -> float | Fault:
    """The sum of a·x^(first + k·step) over the coefficients."""
    found = numbers((coefficients,))
    if isinstance(found, Fault):
        return found
    try:
        terms = [a * math.pow(x, first + k * step) for k, a in enumerate(found)]
    except (ValueError, OverflowError):
        return Fault.NUM
    return finite(added(terms))


@worksheet("SUBTOTAL", Takes.NUMBER, Takes.RAW, repeats=1, gives=Gives.NUMBER)
def subtotal(code: float, *operands: Operand) -> Operand:
    """A total by its code; other subtotals in the range and filtered rows cannot be told here."""
    del code, operands
    raise Unsupported(
        "leaves out filtered rows and other subtotals, which a saved sheet does not tell; "
        "use SUM or AVERAGE over the range"
    )
