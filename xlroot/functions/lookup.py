"""Looking values up in tables: MATCH, VLOOKUP, HLOOKUP, LOOKUP, XLOOKUP, XMATCH.

Types never match across: the text "5" is not found among numbers. An approximate match in values
that are not sorted, and a lookup of a blank cell, are refused, since hosts answer differently.
Sources: OpenFormula (OASIS ODF 1.3 part 4), section 6.14; Excel's documentation where it says
more.
"""

from __future__ import annotations

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.lines import Line, first_column, first_row, only_line
from xlroot.functions.references import grid_of, part
from xlroot.values import Fault, Grid, Operand, Value

LONGEST_TEXT = 255
"""Letters of a text that can be looked up; a longer one is #VALUE!."""


def _refused(wanted: Value) -> Fault:
    """The fault of a value that cannot be looked up at all."""
    if wanted is None:
        raise Unsupported("looks up a blank cell, which hosts take as 0 or do not find")
    return Fault.VALUE


def _findable(wanted: Value) -> bool:
    return wanted is not None and (type(wanted) is not str or len(wanted) <= LONGEST_TEXT)


@worksheet("MATCH", Takes.SCALAR, Takes.RAW, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def match(wanted: Value, operand: Operand, kind: float = 1.0) -> float | Fault:
    """The position of a value in one row or column: exact (0), at most (above 0, in rising
    values), at least (below 0, in falling ones)."""
    if type(wanted) is not float and not _findable(wanted):
        return _refused(wanted)
    if type(operand) is not Grid:
        if isinstance(operand, Fault):
            return operand
        operand = grid_of(operand)
    line = only_line(operand)
    if line is None:
        return Fault.NA
    if kind == 0.0:
        found = line.matched(wanted)
    else:
        found = line.at_most(wanted) if kind > 0.0 else line.at_least(wanted)
    return Fault.NA if found is None else found + 1.0


@worksheet("VLOOKUP", Takes.SCALAR, Takes.RAW, Takes.NUMBER, Takes.LOGICAL, optional=1)
def vlookup(
    wanted: Value,
    table: Operand,
    column: float,
    approximate: bool = True,  # noqa: FBT001, FBT002
) -> Operand:
    """The value in a column of the row whose first value matches."""
    if not _findable(wanted):
        return _refused(wanted)
    if isinstance(table, Fault):
        return table
    grid = grid_of(table)
    place = int(column) - 1
    if not 0 <= place < grid.extent[1]:
        return Fault.VALUE if place < 0 else Fault.REF
    line = first_column(grid)
    found = line.at_most(wanted) if approximate else line.matched(wanted)
    if found is None:
        return Fault.NA
    return grid.rows[found][place] if place < grid.width else None


@worksheet("HLOOKUP", Takes.SCALAR, Takes.RAW, Takes.NUMBER, Takes.LOGICAL, optional=1)
def hlookup(
    wanted: Value,
    table: Operand,
    row: float,
    approximate: bool = True,  # noqa: FBT001, FBT002
) -> Operand:
    """The value in a row of the column whose first value matches."""
    if not _findable(wanted):
        return _refused(wanted)
    if isinstance(table, Fault):
        return table
    grid = grid_of(table)
    place = int(row) - 1
    if not 0 <= place < grid.extent[0]:
        return Fault.VALUE if place < 0 else Fault.REF
    line = first_row(grid)
    found = line.at_most(wanted) if approximate else line.matched(wanted)
    if found is None:
        return Fault.NA
    return grid.rows[place][found] if place < grid.height else None


@worksheet("LOOKUP", Takes.SCALAR, Takes.RAW, Takes.RAW, optional=1)
def lookup(wanted: Value, operand: Operand, results: Operand | None = None) -> Operand:
    """The result beside the last value not above the wanted one, in rising values.

    Without results, the last column beside the first one, or the last row under the first one
    where the grid is wider than high.
    """
    if not _findable(wanted):
        return _refused(wanted)
    for each in (operand, results):
        if isinstance(each, Fault):
            return each
    grid = grid_of(operand)
    height, width = grid.extent
    across = width > height
    if results is not None and height > 1 and width > 1:
        return Fault.NA
    found = (first_row(grid) if across else first_column(grid)).at_most(wanted)
    if found is None:
        return Fault.NA
    if results is None:
        if grid.is_cut:
            raise Unsupported("takes the last line of a range that reaches beyond the used cells")
        return grid.rows[-1][found] if across else grid.rows[found][-1]
    answers = grid_of(results)
    line = only_line(answers)
    if line is None:
        return Fault.NA
    if max(answers.extent) != max(height, width):
        raise Unsupported("has results of another length than the values it searches")
    return line.values[found] if found < len(line.values) else None


def _position(
    wanted: Value, operand: Operand, match_mode: float, search_mode: float
) -> int | Fault | None:
    """XLOOKUP's position. Match modes: 0 exact, -1 or the next smaller, 1 or the next larger, 2
    wildcards. Search modes: 1 from the first, -1 from the last, 2 and -2 in sorted values."""
    if not _findable(wanted):
        return _refused(wanted)
    if isinstance(operand, Fault):
        return operand
    line = only_line(grid_of(operand))
    if line is None:
        return Fault.VALUE
    mode, search = int(match_mode), int(search_mode)
    if mode not in (-1, 0, 1, 2) or search not in (-2, -1, 1, 2):
        raise Unsupported("asks for a match or search mode that is not defined")
    if abs(search) == 2:
        _must_be_sorted(line, wanted, search)
    if mode == 2:
        if search != 1:
            raise Unsupported("asks for a wildcard match from the last value on")
        return line.matched(wanted)
    found = line.last(wanted) if search == -1 else line.exact(wanted)
    if found is None and mode:
        found = line.nearest(wanted, above=mode == 1, last=search == -1)
    return found


def _must_be_sorted(line: Line, wanted: Value, search: int) -> None:
    """Refuses a search in sorted values whose answer hangs on how the search runs."""
    ordered = line.ordered(type(wanted))
    sorted_so = ordered.rising if search == 2 else ordered.falling
    if not sorted_so or len(set(ordered.keys)) < len(line.values):
        raise Unsupported("asks for a binary search among values that are not sorted and unlike")


@worksheet(
    "XLOOKUP",
    Takes.SCALAR,
    Takes.RAW,
    Takes.RAW,
    Takes.RAW,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=3,
)
def xlookup(
    wanted: Value,
    operand: Operand,
    results: Operand,
    missing: Operand = None,
    match_mode: float = 0.0,
    search_mode: float = 1.0,
) -> Operand:
    """The row or column of the results where the value matches, or what stands for a missing
    one, #N/A unless stated."""
    found = _position(wanted, operand, match_mode, search_mode)
    if isinstance(found, Fault):
        return found
    if isinstance(results, Fault):
        return results
    searched, answers = grid_of(operand).extent, grid_of(results).extent
    upright = searched[1] == 1 and (searched[0] > 1 or answers[0] == 1)
    if searched[0 if upright else 1] != answers[0 if upright else 1]:
        return Fault.VALUE
    if found is None:
        return Fault.NA if missing is None else missing
    grid = grid_of(results)
    return part(grid, found + 1, 0) if upright else part(grid, 0, found + 1)


@worksheet(
    "XMATCH",
    Takes.SCALAR,
    Takes.RAW,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=2,
    gives=Gives.NUMBER,
)
def xmatch(
    wanted: Value, operand: Operand, match_mode: float = 0.0, search_mode: float = 1.0
) -> float | Fault:
    """The position of a value, by XLOOKUP's rules."""
    found = _position(wanted, operand, match_mode, search_mode)
    if isinstance(found, Fault):
        return found
    return Fault.NA if found is None else found + 1.0
