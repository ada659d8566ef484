"""Every worksheet function against LibreOffice's own recalculation.

A generated sheet of several thousand cells calls every function with ordinary, edge and wrong-type
arguments. Numbers have to agree to 1e-9 (hosts save 15 digits, and compute some special functions
to ten), faults in being faults (hosts save one kind as another). Every function that differs is
listed with the reason; what xlroot refuses to evaluate is no difference.
"""

from __future__ import annotations

from pathlib import Path
from typing import NamedTuple

import openpyxl
import pytest

from tests.conftest import Recalculate
from tests.host.differences import DIFFERENCES
from tests.host.sheet import DATA, calls
from xlroot.cells import Cell
from xlroot.depend import Bindings
from xlroot.errors import Unsupported
from xlroot.hosts.saved import read_book
from xlroot.ledger import Ledger, Policy
from xlroot.values import Fault, Value

AGREEMENT = 1e-9
NOTHING = 1e-14


class Comparison(NamedTuple):
    """One cell: its function and formula, and both answers."""

    name: str
    formula: str
    ours: Value | Unsupported
    theirs: object


@pytest.fixture(scope="module")
def comparisons(host: Recalculate, tmp_path_factory: pytest.TempPathFactory) -> list[Comparison]:
    book = openpyxl.Workbook()
    data = book.active
    data.title = "Data"
    for address, content in DATA.items():
        data[address] = content
    sheet = book.create_sheet("Calc")
    listed = list(calls())
    for row, (name, formula) in enumerate(listed, start=1):
        sheet.cell(row, 1, name)
        sheet.cell(row, 2, formula)
    path: Path = tmp_path_factory.mktemp("functions") / "functions.xlsx"
    book.save(path)
    recalculated = read_book(host(path))
    ledger = Ledger(Bindings(read_book(path)), Policy.COMPUTED)
    found = []
    for row, (name, formula) in enumerate(listed, start=1):
        cell = Cell("Calc", row, 2)
        ours: Value | Unsupported
        try:
            ours = ledger.value(cell)
        except Unsupported as refusal:
            ours = refusal
        found.append(Comparison(name, formula, ours, recalculated.saved(cell)))
    return found


def agree(ours: Value, theirs: object) -> bool:
    if isinstance(ours, Fault) or isinstance(theirs, Fault):
        return isinstance(ours, Fault) and isinstance(theirs, Fault)
    if isinstance(ours, bool) or isinstance(theirs, bool):
        return ours == theirs
    if isinstance(ours, float) and isinstance(theirs, float):
        return abs(ours - theirs) <= max(AGREEMENT * max(abs(ours), abs(theirs)), NOTHING)
    return ours == theirs


@pytest.mark.host
def test_every_difference_is_listed_with_its_reason(comparisons: list[Comparison]) -> None:
    differing = {
        each.name: each
        for each in comparisons
        if not isinstance(each.ours, Unsupported) and not agree(each.ours, each.theirs)
    }
    unlisted = {
        f"{each.formula} gives {each.ours!r} here and {each.theirs!r} there"
        for each in differing.values()
        if each.name not in DIFFERENCES
    }
    assert not unlisted
    assert set(DIFFERENCES) <= set(differing), "listed, but it agrees"


@pytest.mark.host
def test_enough_was_compared(comparisons: list[Comparison]) -> None:
    evaluated = [each for each in comparisons if not isinstance(each.ours, Unsupported)]
    agreeing = [
        each
        for each in evaluated
        if not isinstance(each.ours, Unsupported) and agree(each.ours, each.theirs)
    ]
    assert len(evaluated) >= 4000
    assert len({each.name for each in evaluated}) >= 330
    assert len(agreeing) >= 0.9 * len(evaluated)


@pytest.mark.host
def test_hardly_anything_is_refused(comparisons: list[Comparison]) -> None:
    refused = [each for each in comparisons if isinstance(each.ours, Unsupported)]
    assert len(refused) <= 0.1 * len(comparisons)
