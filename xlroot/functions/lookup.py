"""Looking values up in tables. OpenFormula (OASIS ODF 1.3 part 4), section 6.14; Excel's
documentation where it is more exact. An approximate match in an unsorted range is refused, since
hosts answer differently there.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence
from itertools import pairwise

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.matching import at_most, exact
from xlroot.kinds.real import compare
from xlroot.values import Fault, Grid, Operand, Value, to_number


class _Line(tuple[Value, ...]):
    """A row or column of a table; `rising` where it holds nothing but rising numbers."""

    rising: bool


_LINES: dict[tuple[int, int, bool], tuple[Grid, _Line]] = {}
_MOST_LINES = 256


def _line(grid: Grid, number: int, *, column: bool) -> _Line:
    """A line of a grid, kept while the grid lives: tables are looked up again and again."""
    key = (id(grid), number, column)
    known = _LINES.get(key)
    if known is not None and known[0] is grid:
        return known[1]
    line = _Line(row[number] for row in grid.rows) if column else _Line(grid.rows[number])
    numbers = [value for value in line if type(value) is float]
    line.rising = len(numbers) == len(line) and all(a <= b for a, b in pairwise(numbers))
    if len(_LINES) >= _MOST_LINES:
        _LINES.clear()
    _LINES[key] = (grid, line)
    return line


def _position(wanted: Value, line: _Line, *, approximate: bool) -> int | None:
    if not approximate:
        return exact(wanted, line)
    if line.rising:
        if type(wanted) is not float:
            return None
        found = bisect_right(line, wanted) - 1  # type: ignore[type-var]
        return found if found >= 0 else None
    return at_most(wanted, line)


def _grid(operand: Operand) -> Grid:
    return operand if isinstance(operand, Grid) else Grid(((operand,),))


def _searched(grid: Grid) -> _Line | None:
    """The single row or column that is searched, or None for a rectangle."""
    if grid.width == 1:
        return _line(grid, 0, column=True)
    return _line(grid, 0, column=False) if grid.height == 1 else None


@worksheet("MATCH", Takes.SCALAR, Takes.RAW, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def match(wanted: Value, operand: Operand, kind: float = 1.0) -> float | Fault:
    """The position of a value in one row or column: exact (0), at most (1), at least (-1)."""
    line = _searched(_grid(operand))
    if line is None or wanted is None:
        return Fault.NA
    if kind < 0.0:
        found = at_most(wanted, line, descending=True)
    else:
        found = _position(wanted, line, approximate=kind > 0.0)
    return Fault.NA if found is None else found + 1.0


def _part(grid: Grid, row: int, column: int) -> Operand:
    """One value of a grid, or the row or column where the other number is 0."""
    block = grid.block
    if row and column:
        value = grid.rows[row - 1][column - 1]
        if block is None:
            return value
        top, left = block.top + row - 1, block.left + column - 1
        return Grid(((value,),), block._replace(top=top, left=left, bottom=top, right=left))
    if row:
        place = None if block is None else block.top + row - 1
        own = None if block is None or place is None else block._replace(top=place, bottom=place)
        return Grid((grid.rows[row - 1],), own)
    if column:
        place = None if block is None else block.left + column - 1
        own = None if block is None or place is None else block._replace(left=place, right=place)
        return Grid(tuple((each[column - 1],) for each in grid.rows), own)
    return grid


@worksheet("INDEX", Takes.RAW, Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, optional=3)
def index(
    operand: Operand, row: float = 0.0, column: float | None = None, area: float = 1.0
) -> Operand:
    """The value at a row and column, counted from 1; 0 means all. In one row or column one number
    is enough."""
    if area != 1.0:
        return Fault.REF
    if isinstance(operand, Fault):
        return operand
    grid = _grid(operand)
    height, width = grid.extent
    down, right = int(row), 0 if column is None else int(column)
    if column is None and height == 1 and width > 1:
        down, right = 1 if down else 0, down
    elif column is None and width == 1:
        right = 1
    if down < 0 or right < 0:
        return Fault.VALUE
    if down > height or right > width:
        return Fault.REF
    if grid.is_cut:
        if not (down and right):
            raise Unsupported(
                "takes a line out of a range that reaches beyond its sheet's used part"
            )
        if down > grid.height or right > grid.width:
            return None
    return _part(grid, down, right)


def _table_lookup(
    wanted: Value, operand: Operand, number: float, approximate: Value, *, columns: bool
) -> Operand:
    grid = _grid(operand)
    flag = to_number(approximate) if not isinstance(approximate, bool) else float(approximate)
    if isinstance(flag, Fault):
        return flag
    place = int(number)
    if place < 1:
        return Fault.VALUE
    if place > (grid.width if columns else grid.height):
        return Fault.REF
    if wanted is None:
        wanted = 0.0
    found = _position(wanted, _line(grid, 0, column=columns), approximate=flag != 0.0)
    if found is None:
        return Fault.NA
    value = grid.rows[found][place - 1] if columns else grid.rows[place - 1][found]
    return 0.0 if value is None else value


@worksheet("VLOOKUP", Takes.SCALAR, Takes.RAW, Takes.NUMBER, Takes.SCALAR, optional=1)
def vlookup(wanted: Value, table: Operand, column: float, approximate: Value = True) -> Operand:  # noqa: FBT002
    """The value in a column of the row whose first value matches."""
    return _table_lookup(wanted, table, column, approximate, columns=True)


@worksheet("HLOOKUP", Takes.SCALAR, Takes.RAW, Takes.NUMBER, Takes.SCALAR, optional=1)
def hlookup(wanted: Value, table: Operand, row: float, approximate: Value = True) -> Operand:  # noqa: FBT002
    """The value in a row of the column whose first value matches."""
    return _table_lookup(wanted, table, row, approximate, columns=False)


@worksheet("LOOKUP", Takes.SCALAR, Takes.RAW, Takes.RAW, optional=1)
def lookup(wanted: Value, operand: Operand, results: Operand | None = None) -> Operand:
    """The result beside the last value not above the wanted one, in a sorted line."""
    grid = _grid(operand)
    wide = grid.width > grid.height
    found = _position(wanted, _line(grid, 0, column=not wide), approximate=True)
    if found is None:
        return Fault.NA
    if results is None:
        return grid.rows[-1][found] if wide else grid.rows[found][-1]
    line = _searched(_grid(results))
    if line is None or found >= len(line):
        return Fault.NA
    return line[found]


def _best(wanted: Value, values: Sequence[Value], mode: int, order: Sequence[int]) -> int | None:
    """XLOOKUP's match: exact, or the next smaller (-1) or larger (1), in the order of search."""
    if mode == 2 or not isinstance(wanted, str):
        for position in order:
            if exact(wanted, (values[position],)) is not None:
                return position
    else:
        for position in order:
            value = values[position]
            if isinstance(value, str) and value.casefold() == wanted.casefold():
                return position
    if mode not in (-1, 1):
        return None
    found = None
    for position in order:
        value = values[position]
        if type(value) is not type(wanted):
            continue
        side = compare(value, wanted)
        if isinstance(side, Fault) or side * mode < 0:
            continue
        if found is None:
            found = position
            continue
        nearer = compare(value, values[found])
        if isinstance(nearer, int) and nearer * mode < 0:
            found = position
    return found


def _modern(wanted: Value, line: _Line, match_mode: float, search_mode: float) -> int | None:
    if int(match_mode) not in (-1, 0, 1, 2) or int(search_mode) not in (-2, -1, 1, 2):
        raise Unsupported("asks for a match or search mode that is not defined")
    order = range(len(line)) if search_mode > 0 else range(len(line) - 1, -1, -1)
    return _best(wanted, line, int(match_mode), order)


@worksheet(
    "XLOOKUP",
    Takes.SCALAR,
    Takes.RAW,
    Takes.RAW,
    Takes.VALUE,
    Takes.NUMBER,
    Takes.NUMBER,
    optional=3,
)
def xlookup(
    wanted: Value,
    operand: Operand,
    results: Operand,
    missing: Value = Fault.NA,
    match_mode: float = 0.0,
    search_mode: float = 1.0,
) -> Operand:
    """The result in the line of the value that matches, or what stands for a missing one."""
    grid, answer = _grid(operand), _grid(results)
    line = _searched(grid)
    if line is None:
        return Fault.VALUE
    tall = grid.width == 1
    if len(line) != (answer.height if tall else answer.width):
        return Fault.VALUE
    found = _modern(wanted, line, match_mode, search_mode)
    if found is None:
        return missing
    part = _part(answer, found + 1, 0) if tall else _part(answer, 0, found + 1)
    assert isinstance(part, Grid)
    if part.height == part.width == 1:
        return part.rows[0][0]
    return part


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
    line = _searched(_grid(operand))
    if line is None:
        return Fault.VALUE
    found = _modern(wanted, line, match_mode, search_mode)
    return Fault.NA if found is None else found + 1.0


@worksheet("ROWS", Takes.RAW, gives=Gives.NUMBER)
def rows(operand: Operand) -> float | Fault:
    """How many rows."""
    return operand if isinstance(operand, Fault) else float(_grid(operand).extent[0])


@worksheet("COLUMNS", Takes.RAW, gives=Gives.NUMBER)
def columns(operand: Operand) -> float | Fault:
    """How many columns."""
    return operand if isinstance(operand, Fault) else float(_grid(operand).extent[1])


@worksheet("ROW", Takes.RAW)
def row(operand: Operand) -> Operand:
    """The row numbers of a reference, one under the other."""
    if not isinstance(operand, Grid) or operand.block is None:
        return operand if isinstance(operand, Fault) else Fault.VALUE
    block = operand.block
    numbers = tuple((float(each),) for each in range(block.top, block.bottom + 1))
    return numbers[0][0] if len(numbers) == 1 else Grid(numbers)


@worksheet("COLUMN", Takes.RAW)
def column(operand: Operand) -> Operand:
    """The column numbers of a reference, side by side."""
    if not isinstance(operand, Grid) or operand.block is None:
        return operand if isinstance(operand, Fault) else Fault.VALUE
    block = operand.block
    numbers = tuple(float(each) for each in range(block.left, block.right + 1))
    return numbers[0] if len(numbers) == 1 else Grid((numbers,))


@worksheet("TRANSPOSE", Takes.RAW)
def transpose(operand: Operand) -> Operand:
    """Rows as columns."""
    return Grid(tuple(zip(*_grid(operand).rows, strict=True)))


@worksheet(
    "ADDRESS",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.LOGICAL,
    Takes.TEXT,
    optional=3,
    gives=Gives.TEXT,
)
def address(
    row: float,
    column: float,
    kind: float = 1.0,
    a1: bool = True,  # noqa: FBT001, FBT002 - a value
    sheet: str | None = None,
) -> str | Fault:
    """The text of a cell's address."""
    from xlroot.cells import LAST_COLUMN, LAST_ROW, column_name, quoted

    down, right, form = int(row), int(column), int(kind)
    if not (1 <= down <= LAST_ROW and 1 <= right <= LAST_COLUMN and 1 <= form <= 4):
        return Fault.VALUE
    fixed_row, fixed_column = form in (1, 2), form in (1, 3)
    if a1:
        name = column_name(right)
        text = f"{'$' if fixed_column else ''}{name}{'$' if fixed_row else ''}{down}"
    else:
        first = f"R{down}" if fixed_row else f"R[{down}]"
        text = first + (f"C{right}" if fixed_column else f"C[{right}]")
    return text if sheet is None else f"{quoted(sheet)}!{text}"
