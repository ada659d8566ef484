"""A worksheet function called by its name, as the interpreter would call its rule."""

from __future__ import annotations

from xlroot import functions
from xlroot.cells import Block
from xlroot.values import Fault, Grid, Operand, Value


def call(name: str, *arguments: Operand) -> Operand:
    """The answer of a function; whole numbers may be written as such."""
    entry = functions.find(name)
    assert entry is not None, f"{name} is not entered"
    assert entry.wrong_count(len(arguments)) is None
    return entry.rule(*(float(each) if type(each) is int else each for each in arguments))


def number(name: str, *arguments: Operand) -> float:
    """The answer of a function that gives a number."""
    found = call(name, *arguments)
    assert type(found) is float, f"{name}{arguments} gives {found}"
    return found


def fault(name: str, *arguments: Operand) -> str:
    """The fault that a function answers with."""
    found = call(name, *arguments)
    assert isinstance(found, Fault), f"{name}{arguments} gives {found}"
    return str(found)


def row(*values: Value | int) -> Grid:
    """An array of one row."""
    return Grid((tuple(float(each) if type(each) is int else each for each in values),))


def cells(*values: Value | int) -> Grid:
    """The content of a range, one column wide."""
    column = row(*values).rows[0]
    return Grid(tuple((each,) for each in column), Block("Sheet1", 1, 1, len(column), 1))
