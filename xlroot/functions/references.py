"""Parts, sizes and places of ranges: INDEX, ROWS, COLUMNS, ROW, COLUMN, AREAS, ADDRESS, TRANSPOSE.

What is taken out of a reference is a reference again: a grid with the block where it stands. A
reference that reaches beyond the used cells of its sheet keeps its extent; what is not listed is
blank. Sources: OpenFormula (OASIS ODF 1.3 part 4), section 6.14; Excel's documentation of INDEX.
"""

from __future__ import annotations

from xlroot.cells import LAST_COLUMN, LAST_ROW, Block, column_name, quoted
from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.lines import kept
from xlroot.values import Fault, Grid, Operand, Value, to_logical, to_number

MOST_PARTS = 4096
"""Parts that are kept of one grid."""

MOST_NUMBERS = 100_000
"""Row numbers that are listed; a whole column's are refused."""


def grid_of(operand: Operand) -> Grid:
    """The operand as a grid, a single value as one of one cell."""
    return operand if isinstance(operand, Grid) else Grid(((operand,),))


def part(grid: Grid, row: int, column: int) -> Operand:
    """One cell of a grid, counted from 1, or a whole row or column where the other is 0.

    A reference gives a grid with its place; an array gives a value, or a grid without a place.
    """
    block = grid.block
    if not row and not column:
        return grid
    if row and column:
        listed = row <= grid.height and column <= grid.width
        value = grid.rows[row - 1][column - 1] if listed else None
        if block is None:
            return value
        down, right = block.top + row - 1, block.left + column - 1
        return Grid(((value,),), Block(block.sheet, down, right, down, right))
    if row:
        values = grid.rows[row - 1] if row <= grid.height else (None,) * grid.width
        if block is None:
            return Grid((values,)) if len(values) > 1 else values[0]
        down = block.top + row - 1
        return Grid((values,), Block(block.sheet, down, block.left, down, block.right))
    listed = column <= grid.width
    rows = tuple((each[column - 1] if listed else None,) for each in grid.rows)
    if block is None:
        return Grid(rows) if len(rows) > 1 else rows[0][0]
    right = block.left + column - 1
    return Grid(rows, Block(block.sheet, block.top, right, block.bottom, right))


@kept
def _parts(_: Grid) -> dict[tuple[float, float | None], Operand]:
    """The parts of a grid that were taken before."""
    return {}


@worksheet("INDEX", Takes.RAW, Takes.NUMBER, Takes.NUMBER, Takes.NUMBER, optional=3)
def index(
    operand: Operand, row: float = 0.0, column: float | None = None, area: float = 1.0
) -> Operand:
    """The cell at a row and column, counted from 1; 0 means all of them. In one row or column one
    number is enough."""
    if type(operand) is not Grid:
        if isinstance(operand, Fault):
            return operand
        operand = grid_of(operand)
    if area != 1.0:
        return Fault.REF
    parts = _parts(operand)
    found = parts.get((row, column))
    if found is None:
        found = _found(operand, row, column)
        if len(parts) < MOST_PARTS:
            parts[row, column] = found
    return found


def _found(grid: Grid, row: float, column: float | None) -> Operand:
    height, width = grid.extent
    if max(abs(row), abs(column or 0.0)) > LAST_ROW:
        return Fault.REF if min(row, column or 0.0) >= 0.0 else Fault.VALUE
    down, right = int(row), int(column or 0.0)
    if column is None and down:
        if height > 1 and width > 1:
            raise Unsupported("takes one number for a range of several rows and columns")
        down, right = (1, down) if height == 1 else (down, 1)
    if down < 0 or right < 0:
        return Fault.VALUE
    return Fault.REF if down > height or right > width else part(grid, down, right)


@worksheet("ROWS", Takes.RAW, gives=Gives.NUMBER)
def rows(operand: Operand) -> float | Fault:
    """How many rows."""
    return operand if isinstance(operand, Fault) else float(grid_of(operand).extent[0])


@worksheet("COLUMNS", Takes.RAW, gives=Gives.NUMBER)
def columns(operand: Operand) -> float | Fault:
    """How many columns."""
    return operand if isinstance(operand, Fault) else float(grid_of(operand).extent[1])


@worksheet("ROW", Takes.RAW)
def row(operand: Operand) -> Operand:
    """The row numbers of a reference, one under the other."""
    if not isinstance(operand, Grid) or operand.block is None:
        return operand if isinstance(operand, Fault) else Fault.VALUE
    block = operand.block
    if block.height == 1:
        return float(block.top)
    if block.height > MOST_NUMBERS:
        raise Unsupported("lists the row numbers of a whole column; name the rows meant")
    return Grid(tuple((float(each),) for each in range(block.top, block.bottom + 1)))


@worksheet("COLUMN", Takes.RAW)
def column(operand: Operand) -> Operand:
    """The column numbers of a reference, side by side."""
    if not isinstance(operand, Grid) or operand.block is None:
        return operand if isinstance(operand, Fault) else Fault.VALUE
    block = operand.block
    if block.width == 1:
        return float(block.left)
    return Grid((tuple(float(each) for each in range(block.left, block.right + 1)),))


@worksheet("AREAS", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def areas(*references: Operand) -> float | Fault:
    """How many rectangles a reference consists of."""
    for each in references:
        if not isinstance(each, Grid) or each.block is None:
            return each if isinstance(each, Fault) else Fault.VALUE
    return float(len(references))


@worksheet("TRANSPOSE", Takes.RAW)
def transpose(operand: Operand) -> Operand:
    """Rows as columns; a blank cell gives 0."""
    if isinstance(operand, Fault):
        return operand
    grid = grid_of(operand)
    if grid.is_cut:
        raise Unsupported("turns a range that reaches beyond the used cells; name the cells meant")
    turned = zip(*grid.rows, strict=True)
    return Grid(tuple(tuple(0.0 if each is None else each for each in line) for line in turned))


@worksheet(
    "ADDRESS",
    Takes.NUMBER,
    Takes.NUMBER,
    Takes.SCALAR,
    Takes.SCALAR,
    Takes.TEXT,
    optional=3,
    gives=Gives.TEXT,
)
def address(
    row: float, column: float, kind: Value = None, a1: Value = None, sheet: str | None = None
) -> str | Fault:
    """The text of a cell's address: fixed (1), fixed row (2), fixed column (3), relative (4); in
    the A1 style unless `a1` is FALSE."""
    style = 1.0 if kind is None else to_number(kind)
    letters = True if a1 is None else to_logical(a1)
    for each in (style, letters):
        if isinstance(each, Fault):
            return each
    if not (1.0 <= row < LAST_ROW + 1 and 1.0 <= column < LAST_COLUMN + 1):
        return Fault.VALUE
    down, right = int(row), int(column)
    if style not in (1.0, 2.0, 3.0, 4.0):
        return Fault.VALUE
    fixed_row, fixed_column = style <= 2.0, style in (1.0, 3.0)
    if letters:
        text = f"{'$' * fixed_column}{column_name(right)}{'$' * fixed_row}{down}"
    else:
        text = f"R{down}" if fixed_row else f"R[{down}]"
        text += f"C{right}" if fixed_column else f"C[{right}]"
    return f"{quoted(sheet)}!{text}" if sheet else f"!{text}" if sheet == "" else text
