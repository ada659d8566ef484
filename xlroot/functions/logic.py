"""Choices and logical values.

OpenFormula (OASIS ODF 1.3 part 4), section 6.15. Branches arrive as functions that are called
only when they are chosen, so that a fault in the other branch does not show.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator

from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.kinds.real import compare
from xlroot.values import Fault, Grid, Operand, Value, to_logical

Later = Callable[[], Operand]


@worksheet("IF", Takes.LOGICAL, Takes.LAZY, Takes.LAZY, optional=1)
def if_(condition: bool, yes: Later, no: Later | None = None) -> Operand:  # noqa: FBT001 - a value
    """The second argument where the first is TRUE, otherwise the third, FALSE if left out."""
    if condition:
        return yes()
    return False if no is None else no()


@worksheet("IFS", Takes.LAZY, Takes.LAZY, repeats=2)
def ifs(*pairs: Later) -> Operand:
    """The value behind the first condition that holds; #N/A if none does."""
    for condition, value in zip(pairs[::2], pairs[1::2], strict=True):
        holds = _truth(condition())
        if isinstance(holds, Fault):
            return holds
        if holds:
            return value()
    return Fault.NA


@worksheet("SWITCH", Takes.SCALAR, Takes.LAZY, Takes.LAZY, Takes.LAZY, optional=1, repeats=1)
def switch(value: Value, *rest: Later) -> Operand:
    """The result behind the first equal value; the default behind the pairs, or #N/A."""
    pairs = len(rest) // 2
    for candidate, result in zip(rest[: 2 * pairs : 2], rest[1::2], strict=False):
        other = _first(candidate())
        order = compare(value, other)
        if isinstance(order, Fault):
            return order
        if order == 0:
            return result()
    return rest[-1]() if len(rest) % 2 else Fault.NA


@worksheet("CHOOSE", Takes.NUMBER, Takes.LAZY, repeats=1)
def choose(position: float, *values: Later) -> Operand:
    """The value at a position, counted from 1; #VALUE! outside."""
    index = int(position) if abs(position) < 1e6 else 0
    return values[index - 1]() if 1 <= index <= len(values) else Fault.VALUE


@worksheet("IFERROR", Takes.LAZY, Takes.LAZY)
def iferror(value: Later, otherwise: Later) -> Operand:
    """The first argument, or the second where it is a fault."""
    found = value()
    return otherwise() if isinstance(_first(found), Fault) else found


@worksheet("IFNA", Takes.LAZY, Takes.LAZY)
def ifna(value: Later, otherwise: Later) -> Operand:
    """The first argument, or the second where it is #N/A."""
    found = value()
    return otherwise() if _first(found) is Fault.NA else found


def _first(operand: Operand) -> Value:
    return operand.rows[0][0] if isinstance(operand, Grid) else operand


def _truth(operand: Operand) -> bool | Fault:
    return to_logical(_first(operand))


def _logicals(operands: tuple[Operand, ...]) -> Iterator[bool | Fault]:
    """Logicals and numbers; texts and blanks in a range do not count."""
    for operand in operands:
        if not isinstance(operand, Grid):
            yield to_logical(operand)
            continue
        for value in operand.flat():
            if isinstance(value, (bool, float)):
                yield bool(value)
            elif isinstance(value, Fault):
                yield value


def _combined(operands: tuple[Operand, ...]) -> list[bool] | Fault:
    found = []
    for logical in _logicals(operands):
        if isinstance(logical, Fault):
            return logical
        found.append(logical)
    return found or Fault.VALUE


@worksheet("AND", Takes.RAW, repeats=1, gives=Gives.LOGICAL)
def and_(*operands: Operand) -> bool | Fault:
    """Whether all are TRUE; #VALUE! where there is no logical at all."""
    found = _combined(operands)
    return found if isinstance(found, Fault) else all(found)


@worksheet("OR", Takes.RAW, repeats=1, gives=Gives.LOGICAL)
def or_(*operands: Operand) -> bool | Fault:
    """Whether any is TRUE; #VALUE! where there is no logical at all."""
    found = _combined(operands)
    return found if isinstance(found, Fault) else any(found)


@worksheet("XOR", Takes.RAW, repeats=1, gives=Gives.LOGICAL)
def xor(*operands: Operand) -> bool | Fault:
    """Whether an odd number of them is TRUE."""
    found = _combined(operands)
    return found if isinstance(found, Fault) else sum(found) % 2 == 1


@worksheet("NOT", Takes.LOGICAL, gives=Gives.LOGICAL)
def not_(value: bool) -> bool:  # noqa: FBT001 - a value
    """The opposite."""
    return not value


@worksheet("TRUE", gives=Gives.LOGICAL)
def true() -> bool:
    """TRUE."""
    return True


@worksheet("FALSE", gives=Gives.LOGICAL)
def false() -> bool:
    """FALSE."""
    return False
