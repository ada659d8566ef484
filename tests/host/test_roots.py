"""Roots put into their unknowns: the host's own recalculation has to agree with the record.

For every solve of the demo workbooks LibreOffice gets the sheet with the root in the unknown's
cell; each chain cell has to come out as the record says, and the residual as nothing.
"""

from __future__ import annotations

from pathlib import Path

import openpyxl
import pytest

import xlroot
from tests.conftest import Recalculate
from workbooks.build import WORKS, pages_of
from xlroot.docket import Docket
from xlroot.hosts.saved import read_book
from xlroot.values import Grid

FOLDER = Path(__file__).parents[2] / "workbooks"


def with_roots(work: object, docket: Docket, path: Path) -> None:
    """The demo with every root in its unknown, and plain numbers where xlroot was asked."""
    book, pages = pages_of(work)  # type: ignore[arg-type]
    values = {str(case.cell): case.value for case in docket.cases}
    for page in pages:
        for address in page.asks:
            value = values[f"{page.sheet.title}!{address}"]
            page.sheet[address] = value.rows[0][0] if isinstance(value, Grid) else value
    seen = set()
    for record in docket.records():
        unknown = record.question.unknown
        if record.root is not None and unknown not in seen:
            seen.add(unknown)
            book[unknown.sheet][unknown.address] = record.root
    book.save(path)


@pytest.mark.host
@pytest.mark.parametrize("work", WORKS, ids=lambda work: work.FILE)
def test_the_host_agrees_at_the_root(work: object, host: Recalculate, tmp_path: Path) -> None:
    file: str = work.FILE  # type: ignore[attr-defined]
    docket = Docket.of(xlroot.open(FOLDER / file))
    docket.settle()
    path = tmp_path / file
    with_roots(work, docket, path)
    host_s = read_book(host(path))
    compared = 0
    first: dict[object, float] = {}
    for record in docket.records():
        if record.root is None:
            continue
        if first.setdefault(record.question.unknown, record.root) != record.root:
            continue
        # Terms cancel in a residual, and hosts snap what is left to zero.
        lines = (*record.steps, *record.held)
        largest = max(abs(line.value) for line in lines if isinstance(line.value, float))
        for line in record.steps:
            saved = host_s.saved(line.cell)
            assert isinstance(line.value, float)
            assert saved == pytest.approx(line.value, rel=1e-9, abs=1e-9 * max(1.0, largest))
            compared += 1
    assert compared >= 1


def test_openpyxl_opens_every_demo() -> None:
    for work in WORKS:
        assert openpyxl.load_workbook(FOLDER / work.FILE).sheetnames
