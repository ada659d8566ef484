"""The demo workbooks: solved as a user would, against scipy with the equations written by hand."""

from __future__ import annotations

from pathlib import Path

import openpyxl
import pytest
from CoolProp.CoolProp import PropsSI

import xlroot
from workbooks.build import WORKS, pages_of
from workbooks.independent import ROOTS, Place
from workbooks.works import exchanger
from xlroot.cells import Cell
from xlroot.depend import Bindings
from xlroot.docket import Docket
from xlroot.values import Grid

FOLDER = Path(__file__).parents[2] / "workbooks"
FILES = [work.FILE for work in WORKS]


@pytest.fixture(scope="module")
def settled() -> dict[str, Docket]:
    dockets = {}
    for file in FILES:
        dockets[file] = Docket.of(xlroot.open(FOLDER / file))
        dockets[file].settle()
    return dockets


@pytest.mark.parametrize("place", ROOTS, ids=lambda place: " ".join(place))
def test_root_agrees_with_the_independent_script(place: Place, settled: dict[str, Docket]) -> None:
    file, sheet, address = place
    case = next(
        each
        for each in settled[file].cases
        if (each.cell.sheet, each.cell.address) == (sheet, address)
    )
    expected = ROOTS[place]()
    # A stated tolerance bounds the root; the others are good to the last digits.
    assert case.value == pytest.approx(expected, rel=1e-10)


@pytest.mark.parametrize("place", ROOTS, ids=lambda place: " ".join(place))
def test_the_files_carry_the_roots_as_saved_values(place: Place) -> None:
    file, sheet, address = place
    book = xlroot.open(FOLDER / file)
    assert book.saved(book.cell(address, sheet)) == pytest.approx(ROOTS[place](), rel=1e-14)


@pytest.mark.parametrize("file", FILES)
def test_records_of_every_demo(file: str, settled: dict[str, Docket]) -> None:
    records = settled[file].records()
    assert records
    for record in records:
        assert record.label
        assert record.fingerprint
        if file == "bioreactor.xlsx" and record.cell and record.cell.address == "B23":
            assert record.refused
            assert "crosses zero near 0.174595; crosses zero near 1.51207" in record.verdict.reason
        else:
            assert record.verdict.status is xlroot.Status.BRACKETED, record.verdict.reason
            assert record.second is not None
            if record.second.difference is not None:
                assert abs(record.second.difference) <= 2.0 * record.tolerance


@pytest.mark.parametrize("file", FILES)
def test_a_root_feeds_another_calculation(file: str) -> None:
    book = xlroot.open(FOLDER / file)
    bindings = Bindings(book)
    asking = {cell for cell, _ in book.formulas_mentioning("XLROOT")}
    readers = [
        Cell(name, *place)
        for name, sheet in book.sheet_by_name.items()
        for place in sheet.formulas
        if Cell(name, *place) not in asking
    ]
    assert any(
        block.holds(cell)
        for reader in readers
        for block in bindings.areas(reader)
        for cell in asking
    )


@pytest.mark.parametrize("file", FILES)
def test_saved_texts_and_tables_are_what_xlroot_answers(
    file: str, settled: dict[str, Docket]
) -> None:
    book = xlroot.open(FOLDER / file)
    for case in settled[file].cases:
        grid = case.value if isinstance(case.value, Grid) else Grid(((case.value,),))
        for down, row in enumerate(grid.rows):
            for right, value in enumerate(row):
                place = case.cell._replace(
                    row=case.cell.row + down, column=case.cell.column + right
                )
                saved = book.saved(place)
                if isinstance(value, float):
                    assert saved == pytest.approx(value, rel=1e-10, abs=1e-12)
                else:
                    assert saved == value


def test_table_of_the_heat_exchanger_is_iapws_95() -> None:
    """CoolProp's liquid water (Wagner and Pruss 2002) at saturation, at 0 °C the triple point."""
    for celsius, listed in exchanger.TABLE:
        kelvin = max(celsius, 0.01) + 273.15
        assert listed == round(PropsSI("C", "T", kelvin, "Q", 0, "Water") / 1000, 3)


def test_density_of_the_tank_is_that_of_methanol() -> None:
    """CoolProp at 20 °C and 101325 Pa (de Reuck and Craven 1993), in whole kg/m3."""
    book = xlroot.open(FOLDER / "vessel_level.xlsx")
    density = PropsSI("D", "T", 293.15, "P", 101325, "Methanol")
    assert book.saved(book.cell("B12", "Tank")) == round(density)


@pytest.mark.parametrize("work", WORKS, ids=lambda work: work.FILE)
def test_the_files_are_what_the_script_builds(work: object) -> None:
    built, pages = pages_of(work)  # type: ignore[arg-type]
    saved = openpyxl.load_workbook(FOLDER / work.FILE)  # type: ignore[attr-defined]
    assert saved.sheetnames == built.sheetnames
    for page in pages:
        sheet = saved[page.sheet.title]
        for row in page.sheet.iter_rows():
            for cell in row:
                if cell.coordinate in page.asks or cell.value in (None, ""):
                    continue
                kept = sheet[cell.coordinate].value
                if isinstance(cell.value, str) and cell.value.startswith("="):
                    assert _bare(kept) == _bare(cell.value), cell.coordinate
                else:
                    assert kept == cell.value, cell.coordinate
        for address, ask in page.asks.items():
            kept = sheet[address].value
            text = kept.text if hasattr(kept, "text") else kept
            assert text.lstrip("=") == ask.formula


def _bare(text: object) -> str:
    """A formula without what hosts write otherwise: spaces, quotes around names, exponents."""
    bare = str(text).replace(" ", "").replace("'", "").replace("$", "")
    return bare.upper().replace("E-0", "E-").replace("0.000000001", "1E-9").replace("+0.0", "+0")
