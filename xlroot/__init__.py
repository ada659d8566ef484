"""xlroot finds a cell's value in a calculation sheet so that a reviewer can sign it.

    import xlroot
    record = xlroot.solve("sheet.xlsx", residual="Pipe!B11", unknown="Pipe!B6", low=0.005, high=0.1)
    record.root, record.verdict

The names below are imported when they are first used, so that importing the package is quick.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from xlroot.api import evaluate, solve, solve_book
    from xlroot.api import open_book as open
    from xlroot.book import Book
    from xlroot.cells import Cell
    from xlroot.errors import (
        AddressError,
        BookError,
        FormulaError,
        MethodError,
        OutputError,
        QuestionError,
        Unsupported,
        XlrootError,
    )
    from xlroot.question import Question
    from xlroot.record import Record
    from xlroot.stopping import SafeSide
    from xlroot.values import Fault
    from xlroot.verdict import Status, Verdict

_HOMES = {
    "evaluate": "api",
    "solve": "api",
    "solve_book": "api",
    "open": "api",
    "Book": "book",
    "Cell": "cells",
    "AddressError": "errors",
    "BookError": "errors",
    "FormulaError": "errors",
    "MethodError": "errors",
    "OutputError": "errors",
    "QuestionError": "errors",
    "Unsupported": "errors",
    "XlrootError": "errors",
    "Question": "question",
    "Record": "record",
    "SafeSide": "stopping",
    "Fault": "values",
    "Status": "verdict",
    "Verdict": "verdict",
    "__version__": "versions",
}
_NAMES = {"open": "open_book", "__version__": "VERSION"}

__all__ = [
    "AddressError",
    "Book",
    "BookError",
    "Cell",
    "Fault",
    "FormulaError",
    "MethodError",
    "OutputError",
    "Question",
    "QuestionError",
    "Record",
    "SafeSide",
    "Status",
    "Unsupported",
    "Verdict",
    "XlrootError",
    "evaluate",
    "open",
    "solve",
    "solve_book",
]


def __getattr__(name: str) -> Any:
    home = _HOMES.get(name)
    if home is None:
        raise AttributeError(f"module 'xlroot' has no attribute {name!r}")
    found = getattr(import_module(f"xlroot.{home}"), _NAMES.get(name, name))
    globals()[name] = found
    return found
