"""Counts, sums and means of what meets criteria. Excel's documentation of each function."""

from __future__ import annotations

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.matching import criterion
from xlroot.functions.totals import added, finite
from xlroot.values import Fault, Grid, Operand, Value


def _grid(operand: Operand) -> Grid:
    return operand if isinstance(operand, Grid) else Grid(((operand,),))


def _selected(pairs: tuple[Operand, ...]) -> list[tuple[int, int]] | Fault:
    """The places that meet every (range, criterion) pair; #VALUE! for ranges of other shapes."""
    shape: tuple[int, int] | None = None
    chosen: list[tuple[int, int]] | None = None
    for operand, condition in zip(pairs[::2], pairs[1::2], strict=True):
        if isinstance(operand, Fault):
            return operand
        grid = _grid(operand)
        if shape is None:
            shape = (grid.height, grid.width)
        elif shape != (grid.height, grid.width):
            return Fault.VALUE
        test = criterion(_grid(condition).rows[0][0])
        if grid.is_cut and test(None):
            raise Unsupported("counts blank cells beyond the used part of a sheet; name the rows")
        places = (
            [(row, column) for row in range(grid.height) for column in range(grid.width)]
            if chosen is None
            else chosen
        )
        chosen = [place for place in places if test(grid.rows[place[0]][place[1]])]
    return chosen or []


def _numbers(grid: Grid, places: list[tuple[int, int]]) -> list[float] | Fault:
    found = []
    for row, column in places:
        value = grid.rows[row][column] if row < grid.height and column < grid.width else None
        if isinstance(value, Fault):
            return value
        if type(value) is float:
            found.append(value)
    return found


def _chosen(grid: Operand, pairs: tuple[Operand, ...]) -> list[float] | Fault:
    places = _selected(pairs)
    if isinstance(places, Fault):
        return places
    target = _grid(grid)
    first = _grid(pairs[0])
    if (target.height, target.width) != (first.height, first.width):
        return Fault.VALUE
    return _numbers(target, places)


def _single(operand: Operand, condition: Value, target: Operand | None) -> list[float] | Fault:
    """For the functions of one criterion: the target is laid out from its first cell."""
    places = _selected((operand, condition))
    if isinstance(places, Fault):
        return places
    grid = _grid(operand)
    if target is None:
        return _numbers(grid, places)
    laid = _grid(target)
    if (laid.height, laid.width) != (grid.height, grid.width):
        raise Unsupported("has a range to add that differs in shape from the range of the test")
    return _numbers(laid, places)


@worksheet("COUNTIF", Takes.RAW, Takes.VALUE, gives=Gives.NUMBER)
def countif(operand: Operand, condition: Value) -> float | Fault:
    """How many cells meet a criterion."""
    places = _selected((operand, condition))
    return places if isinstance(places, Fault) else float(len(places))


@worksheet("COUNTIFS", Takes.RAW, Takes.VALUE, repeats=2, gives=Gives.NUMBER)
def countifs(*pairs: Operand) -> float | Fault:
    """How many places meet all criteria."""
    places = _selected(pairs)
    return places if isinstance(places, Fault) else float(len(places))


@worksheet("SUMIF", Takes.RAW, Takes.VALUE, Takes.RAW, optional=1, gives=Gives.NUMBER)
def sumif(operand: Operand, condition: Value, target: Operand | None = None) -> float | Fault:
    """The sum where a criterion is met."""
    found = _single(operand, condition, target)
    return found if isinstance(found, Fault) else finite(added(found))


@worksheet("SUMIFS", Takes.RAW, Takes.RAW, Takes.VALUE, repeats=2, gives=Gives.NUMBER)
def sumifs(target: Operand, *pairs: Operand) -> float | Fault:
    """The sum where all criteria are met."""
    found = _chosen(target, pairs)
    return found if isinstance(found, Fault) else finite(added(found))


@worksheet("AVERAGEIF", Takes.RAW, Takes.VALUE, Takes.RAW, optional=1, gives=Gives.NUMBER)
def averageif(operand: Operand, condition: Value, target: Operand | None = None) -> float | Fault:
    """The mean where a criterion is met; #DIV/0! for none."""
    found = _single(operand, condition, target)
    return found if isinstance(found, Fault) else _mean(found)


@worksheet("AVERAGEIFS", Takes.RAW, Takes.RAW, Takes.VALUE, repeats=2, gives=Gives.NUMBER)
def averageifs(target: Operand, *pairs: Operand) -> float | Fault:
    """The mean where all criteria are met; #DIV/0! for none."""
    found = _chosen(target, pairs)
    return found if isinstance(found, Fault) else _mean(found)


@worksheet("MINIFS", Takes.RAW, Takes.RAW, Takes.VALUE, repeats=2, gives=Gives.NUMBER)
def minifs(target: Operand, *pairs: Operand) -> float | Fault:
    """The smallest where all criteria are met; 0 for none."""
    found = _chosen(target, pairs)
    return found if isinstance(found, Fault) else min(found, default=0.0)


@worksheet("MAXIFS", Takes.RAW, Takes.RAW, Takes.VALUE, repeats=2, gives=Gives.NUMBER)
def maxifs(target: Operand, *pairs: Operand) -> float | Fault:
    """The largest where all criteria are met; 0 for none."""
    found = _chosen(target, pairs)
    return found if isinstance(found, Fault) else max(found, default=0.0)


def _mean(found: list[float]) -> float | Fault:
    return finite(added(found) / len(found)) if found else Fault.DIV0
