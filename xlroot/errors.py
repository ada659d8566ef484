"""Every error that xlroot raises, in one tree.

    XlrootError
    ├── BookError            the file cannot be read as a workbook
    ├── AddressError         no such sheet, cell, name or table
    ├── FormulaError         a formula's text cannot be read
    ├── QuestionError        the question cannot be asked as it stands
    │   ├── MethodError      no method of that name
    │   └── IndependentError the residual does not depend on the unknown
    ├── Unsupported          a cell cannot be evaluated faithfully
    │   └── CircularReference
    └── OutputError          a result cannot be written where it was asked for

Each message says what is wrong, where (sheet and address), and what to do.
"""

from __future__ import annotations


class XlrootError(Exception):
    """Something a person can read and act on: the root of the tree."""


class BookError(XlrootError):
    """The file is missing, protected, damaged, or no workbook."""


class AddressError(XlrootError):
    """A sheet, cell, name or table that was asked for is not in the book."""


class FormulaError(XlrootError):
    """The text of a formula does not follow the grammar of formulas."""


class QuestionError(XlrootError):
    """The question cannot be asked: its parts contradict the book or each other."""


class MethodError(QuestionError):
    """No root-finding method has that name."""


class IndependentError(QuestionError):
    """The residual does not depend on the unknown: no formulas run between them."""


class Unsupported(XlrootError):
    """A cell that cannot be evaluated faithfully; `cell` is its address, `reason` says why."""

    def __init__(self, reason: str, cell: str | None = None) -> None:
        self.reason = reason
        self.cell = cell
        super().__init__(f"{cell}: {reason}" if cell else reason)


class CircularReference(Unsupported):
    """A cell that depends on itself."""


class OutputError(XlrootError):
    """A result cannot be written where it was asked for."""
