"""Lines of tables, made ready for being searched again and again.

A table that a chain looks values up in is searched at every trial of the unknown. What a grid's
line holds is therefore sorted out once and kept beside the grid. Approximate matches are binary
searches among the values of the wanted type; where these are not sorted they are refused, because
hosts then answer differently. Source: Excel's documentation of MATCH and XLOOKUP.
"""

from __future__ import annotations

import re
from bisect import bisect_left, bisect_right
from collections.abc import Callable
from itertools import pairwise
from typing import Any, TypeVar

from xlroot.errors import Unsupported
from xlroot.functions.matching import pattern, same
from xlroot.values import Grid, Value

T = TypeVar("T")

MOST_GRIDS = 256
"""Grids whose lines are kept; constant tables of a chain are far fewer."""

_PLAIN_TEXT = re.compile(r"[A-Za-z0-9 ]*")


def kept(make: Callable[[Grid], T]) -> Callable[[Grid], T]:
    """What `make` gives, made once for every grid object while it is in use."""
    known: dict[int, tuple[Grid, T]] = {}

    def made(grid: Grid) -> T:
        found = known.get(id(grid))
        if found is not None and found[0] is grid:
            return found[1]
        result = make(grid)
        if len(known) >= MOST_GRIDS:
            known.clear()
        known[id(grid)] = (grid, result)
        return result

    return made


class Ordered:
    """The values of one type in a line, in the line's order, and where each stands."""

    __slots__ = ("falling", "keys", "places", "rising")

    def __init__(self, kind: type, values: tuple[Value, ...]) -> None:
        places = [place for place, value in enumerate(values) if type(value) is kind]
        keys: list[Any] = [values[place] for place in places]
        if kind is str:
            keys = [_sortable(key) for key in keys]
        self.keys = keys
        self.places = places
        self.rising = all(a <= b for a, b in pairwise(keys))
        self.falling = all(a >= b for a, b in pairwise(keys))


class Line:
    """A row or column of values to be searched. Positions count from 0; None is not found."""

    __slots__ = ("_first", "_ordered", "values")

    def __init__(self, values: tuple[Value, ...]) -> None:
        self.values = values
        self._first: dict[type, dict[Value, int]] = {}
        self._ordered: dict[type, Ordered] = {}

    def ordered(self, kind: type) -> Ordered:
        """The values of a type; Unsupported for texts that hosts sort differently."""
        found = self._ordered.get(kind)
        if found is None:
            found = self._ordered[kind] = Ordered(kind, self.values)
        return found

    def exact(self, wanted: Value) -> int | None:
        """The first value equal to the wanted one, texts without case and without wildcards."""
        kind = type(wanted)
        first = self._first.get(kind)
        if first is None:
            first = self._first[kind] = {}
            for place, value in enumerate(self.values):
                if type(value) is kind:
                    first.setdefault(_folded(value), place)
        return first.get(wanted if kind is float else _folded(wanted))

    def matched(self, wanted: Value) -> int | None:
        """The first value equal to the wanted one, or to its pattern where it has wildcards."""
        if type(wanted) is str:
            wild = pattern(wanted)
            if wild is not None:
                for place, value in enumerate(self.values):
                    if type(value) is str and wild.fullmatch(value):
                        return place
                return None
        return self.exact(wanted)

    def at_most(self, wanted: Value) -> int | None:
        """The last value not above the wanted one, in a line that rises."""
        kind = type(wanted)
        ordered = self._ordered.get(kind) or self.ordered(kind)
        if not ordered.rising:
            raise _unsorted("rising")
        count = bisect_right(ordered.keys, wanted if kind is float else _sortable(wanted))
        return ordered.places[count - 1] if count else None

    def at_least(self, wanted: Value) -> int | None:
        """The last value not below the wanted one, in a line that falls."""
        ordered = self.ordered(type(wanted))
        if not ordered.falling:
            raise _unsorted("falling")
        keys, key = ordered.keys, _sortable(wanted)
        count = len(keys) - bisect_left(keys[::-1], key)
        if count > 1 and keys[count - 1] == keys[count - 2] == key:
            raise Unsupported("finds equal values side by side, of which hosts choose different")
        return ordered.places[count - 1] if count else None

    def last(self, wanted: Value) -> int | None:
        """The last value equal to the wanted one."""
        for place in range(len(self.values) - 1, -1, -1):
            if same(wanted, self.values[place]):
                return place
        return None

    def nearest(self, wanted: Value, *, above: bool, last: bool) -> int | None:
        """The nearest value below (or above) the wanted one, in any order; of equal ones the
        first or the last."""
        ordered, key = self.ordered(type(wanted)), _sortable(wanted)
        keys = ordered.keys
        best: Any = None
        if ordered.rising:
            place = bisect_left(keys, key) if above else bisect_right(keys, key) - 1
            best = keys[place] if 0 <= place < len(keys) else None
        else:
            beyond = [each for each in keys if (each >= key if above else each <= key)]
            if beyond:
                best = min(beyond) if above else max(beyond)
        if best is None:
            if any(type(each) not in (type(wanted), type(None)) for each in self.values):
                raise Unsupported("looks for a nearest value among values of several types")
            return None
        found = len(keys) - 1 - keys[::-1].index(best) if last else keys.index(best)
        return ordered.places[found]


def _folded(value: Value) -> Value:
    return value.casefold() if isinstance(value, str) else value


def _sortable(value: Any) -> Any:
    """What a value is ordered by; texts of letters, digits and spaces alone, as hosts place other
    signs differently."""
    if type(value) is not str:
        return value
    if not _PLAIN_TEXT.fullmatch(value):
        raise Unsupported(
            f'looks up an approximate match among texts such as "{value}", which hosts sort '
            "differently; ask for an exact match"
        )
    return value.casefold()


def _unsorted(direction: str) -> Unsupported:
    return Unsupported(
        f"looks up an approximate match in values that are not sorted ({direction}); sort them, "
        "or ask for an exact match"
    )


@kept
def only_line(grid: Grid) -> Line | None:
    """The single row or column that a grid consists of, or None for a rectangle."""
    height, width = grid.extent
    if width == 1:
        return Line(tuple(row[0] for row in grid.rows))
    return Line(grid.rows[0]) if height == 1 else None


@kept
def first_column(grid: Grid) -> Line:
    """The leftmost column."""
    return Line(tuple(row[0] for row in grid.rows))


@kept
def first_row(grid: Grid) -> Line:
    """The topmost row."""
    return Line(grid.rows[0])
