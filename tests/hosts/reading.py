"""A workbook as openpyxl reads it, in the terms of a Book: the reference for our reader."""

from __future__ import annotations

import datetime
import warnings
from pathlib import Path
from typing import Any

import openpyxl
from openpyxl.formula.translate import Translator
from openpyxl.utils.datetime import to_excel

from xlroot.book import UNSAVED, Book
from xlroot.cells import Cell
from xlroot.values import FAULTS, Fault

Cells = dict[tuple[str, str], Any]


def load(path: Path, *, values: bool) -> Any:
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        return openpyxl.load_workbook(path, data_only=values)


def formulas_by_openpyxl(path: Path) -> Cells:
    """Formula texts without `=`, by sheet and address; arrays by their first cell."""
    found: Cells = {}
    for sheet in load(path, values=False).worksheets:
        for row in sheet.iter_rows():
            for cell in row:
                content = cell.value
                if type(content).__name__ == "ArrayFormula":
                    found[sheet.title, cell.coordinate] = (content.text or "").lstrip("=")
                elif type(content).__name__ == "DataTableFormula":
                    found[sheet.title, cell.coordinate] = "TABLE()"
                elif cell.data_type == "f":
                    found[sheet.title, cell.coordinate] = str(content)[1:]
    return found


def formulas_by_us(book: Book) -> Cells:
    """The same from a Book, shared formulas translated to where they stand."""
    found: Cells = {}
    for name, sheet in book.sheet_by_name.items():
        for (row, column), formula in sheet.formulas.items():
            cell = Cell(name, row, column)
            text = formula.text
            if formula.home != cell:
                home = formula.home.address
                text = Translator(f"={text}", origin=home).translate_formula(cell.address)[1:]
            found[name, cell.address] = text
    return found


def values_by_openpyxl(path: Path) -> Cells:
    """Saved values: numbers as floats, dates as serials, faults by their texts."""
    found: Cells = {}
    workbook = load(path, values=True)
    for sheet in workbook.worksheets:
        for row in sheet.iter_rows():
            for cell in row:
                if cell.value is not None:
                    found[sheet.title, cell.coordinate] = _plain(cell.value, workbook.epoch)
    return found


def _plain(value: Any, epoch: Any) -> Any:
    if isinstance(value, bool):
        return value
    if isinstance(value, (int, float)):
        return float(value)
    if isinstance(value, (datetime.datetime, datetime.date, datetime.time, datetime.timedelta)):
        return float(to_excel(value, epoch))
    return FAULTS.get(value, value)


def values_by_us(book: Book) -> Cells:
    """The same from a Book, cells without a saved value left out."""
    found: Cells = {}
    for name, sheet in book.sheet_by_name.items():
        for (row, column), value in sheet.values.items():
            if value is not None and value is not UNSAVED and value != "":
                found[name, Cell(name, row, column).address] = value
    return found


def differing(ours: Cells, theirs: Cells) -> dict[tuple[str, str], tuple[Any, Any]]:
    """Cells on which both readings differ; dates come through a calendar and lose digits."""
    found = {}
    for key in ours.keys() | theirs.keys():
        a, b = ours.get(key), theirs.get(key)
        if isinstance(a, float) and isinstance(b, float) and abs(a - b) <= 2e-8 * max(1.0, abs(a)):
            continue
        if isinstance(a, str) and isinstance(b, str) and a.strip() == b.strip():
            continue
        if a != b and not (isinstance(a, Fault) and isinstance(b, str)):
            found[key] = (a, b)
    return found
