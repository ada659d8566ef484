"""What a value is. OpenFormula (OASIS ODF 1.3 part 4), section 6.13."""

from __future__ import annotations

from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault, Grid, Operand, Value, to_number

_CODES = {
    Fault.NULL: 1.0,
    Fault.DIV0: 2.0,
    Fault.VALUE: 3.0,
    Fault.REF: 4.0,
    Fault.NAME: 5.0,
    Fault.NUM: 6.0,
    Fault.NA: 7.0,
    Fault.SPILL: 9.0,
    Fault.CALC: 14.0,
}


@worksheet("ISNUMBER", Takes.VALUE, gives=Gives.LOGICAL)
def isnumber(value: Value) -> bool:
    """Whether it is a number."""
    return type(value) is float


@worksheet("ISTEXT", Takes.VALUE, gives=Gives.LOGICAL)
def istext(value: Value) -> bool:
    """Whether it is a text."""
    return isinstance(value, str)


@worksheet("ISNONTEXT", Takes.VALUE, gives=Gives.LOGICAL)
def isnontext(value: Value) -> bool:
    """Whether it is no text; a blank cell is none."""
    return not isinstance(value, str)


@worksheet("ISLOGICAL", Takes.VALUE, gives=Gives.LOGICAL)
def islogical(value: Value) -> bool:
    """Whether it is TRUE or FALSE."""
    return isinstance(value, bool)


@worksheet("ISBLANK", Takes.VALUE, gives=Gives.LOGICAL)
def isblank(value: Value) -> bool:
    """Whether the cell is blank."""
    return value is None


@worksheet("ISERROR", Takes.VALUE, gives=Gives.LOGICAL)
def iserror(value: Value) -> bool:
    """Whether it is a fault."""
    return isinstance(value, Fault)


@worksheet("ISERR", Takes.VALUE, gives=Gives.LOGICAL)
def iserr(value: Value) -> bool:
    """Whether it is a fault other than #N/A."""
    return isinstance(value, Fault) and value is not Fault.NA


@worksheet("ISNA", Takes.VALUE, gives=Gives.LOGICAL)
def isna(value: Value) -> bool:
    """Whether it is #N/A."""
    return value is Fault.NA


def _parity(value: Value) -> int | Fault:
    if isinstance(value, bool):
        return Fault.VALUE
    number = to_number(value)
    return number if isinstance(number, Fault) else int(number) % 2


@worksheet("ISEVEN", Takes.SCALAR, gives=Gives.LOGICAL)
def iseven(value: Value) -> bool | Fault:
    """Whether the whole part is even."""
    parity = _parity(value)
    return parity if isinstance(parity, Fault) else parity == 0


@worksheet("ISODD", Takes.SCALAR, gives=Gives.LOGICAL)
def isodd(value: Value) -> bool | Fault:
    """Whether the whole part is odd."""
    parity = _parity(value)
    return parity if isinstance(parity, Fault) else parity == 1


@worksheet("ISREF", Takes.RAW, gives=Gives.LOGICAL)
def isref(operand: Operand) -> bool:
    """Whether it is a reference."""
    return isinstance(operand, Grid) and operand.block is not None


@worksheet("N", Takes.RAW)
def n(operand: Operand) -> Operand:
    """A number or date as it is, TRUE as 1, a fault as it is, anything else as 0."""
    value = operand.rows[0][0] if isinstance(operand, Grid) else operand
    if isinstance(value, bool):
        return float(value)
    return value if isinstance(value, (float, Fault)) else 0.0


@worksheet("NA")
def na() -> Fault:
    """#N/A."""
    return Fault.NA


@worksheet("ERROR.TYPE", Takes.VALUE)
def error_type(value: Value) -> float | Fault:
    """The number of a fault; #N/A for anything else."""
    return _CODES.get(value, Fault.NA) if isinstance(value, Fault) else Fault.NA


@worksheet("TYPE", Takes.RAW, gives=Gives.NUMBER)
def type_(operand: Operand) -> float:
    """1 number or blank, 2 text, 4 logical, 16 fault, 64 array."""
    if isinstance(operand, Grid):
        if operand.block is None or not operand.block.is_cell:
            return 64.0
        operand = operand.rows[0][0]
    if isinstance(operand, Fault):
        return 16.0
    if isinstance(operand, bool):
        return 4.0
    return 2.0 if isinstance(operand, str) else 1.0
