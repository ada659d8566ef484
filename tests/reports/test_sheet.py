"""Pages that print, that no spreadsheet computes in, and that never touch their source."""

from __future__ import annotations

import hashlib
import math
import os
import re
import shutil
import subprocess
import zipfile
from dataclasses import replace
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from openpyxl import Workbook, load_workbook

from tests.reports.samples import EVERY, HOSTILE, hostile, solved, with_long_chain, without_root
from xlroot.errors import OutputError
from xlroot.record import Record
from xlroot.reports.curve import curve
from xlroot.reports.sheet import Existing, write_records
from xlroot.reports.sheet.names import page_names, sheet_name
from xlroot.reports.sheet.paper import PAGE_HEIGHT

MAIN = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"

ORDER = (
    "sheetPr dimension sheetViews sheetFormatPr cols sheetData sheetProtection mergeCells "
    "hyperlinks printOptions pageMargins pageSetup headerFooter rowBreaks drawing"
).split()
"""The order of a worksheet's parts, as far as these pages have them (ECMA-376 part 1, section
18.3.1.99)."""


@pytest.fixture(scope="module")
def written(tmp_path_factory: pytest.TempPathFactory) -> Path:
    target = tmp_path_factory.mktemp("pages") / "records.xlsx"
    return write_records([make() for make in EVERY], target)


@pytest.fixture(scope="module")
def book(written: Path) -> Any:
    return load_workbook(written)


def page_of(book: Any, make: object) -> Any:
    return book.worksheets[1 + [each.__name__ for each in EVERY].index(make.__name__)]  # type: ignore[attr-defined]


def texts_of(sheet: Any) -> list[str]:
    return [cell.value for row in sheet for cell in row if isinstance(cell.value, str)]


def test_no_cell_is_a_formula(written: Path, book: Any) -> None:
    for sheet in book.worksheets:
        for row in sheet:
            for cell in row:
                assert cell.data_type in ("s", "n"), f"{sheet.title} {cell.coordinate}"
    with zipfile.ZipFile(written) as parts:
        for name in parts.namelist():
            if name.startswith("xl/worksheets/sheet"):
                assert b"<f>" not in parts.read(name)
                assert b"<f " not in parts.read(name)


def test_texts_that_look_like_formulas_are_marked_as_text(book: Any) -> None:
    page = page_of(book, hostile)
    found = {cell.value: cell for row in page for cell in row if isinstance(cell.value, str)}
    for text in HOSTILE[:4]:
        assert found[text].quotePrefix
    shown = "\n".join(found)
    assert "a␛[31mred␇" in shown
    assert "_x005F_x000D_" in shown
    assert "39,800 more characters" in shown


def test_parts_of_a_sheet_stand_in_the_order_of_the_standard(written: Path) -> None:
    with zipfile.ZipFile(written) as parts:
        names = [name for name in parts.namelist() if name.startswith("xl/worksheets/sheet")]
        assert len(names) == 1 + len(EVERY)
        for name in names:
            root = ElementTree.fromstring(parts.read(name))
            found = [ORDER.index(part.tag.removeprefix(MAIN)) for part in root]
            assert found == sorted(found)


def test_every_page_is_set_up_for_a4(book: Any) -> None:
    for sheet in book.worksheets:
        assert int(sheet.page_setup.paperSize) == 9
        assert sheet.page_setup.orientation == "portrait"
        assert sheet.page_setup.fitToWidth == 1
        assert sheet.page_setup.fitToHeight == 0
        assert sheet.sheet_properties.pageSetUpPr.fitToPage
        assert sheet.print_title_rows.startswith("$1:")
        assert "&P" in sheet.oddFooter.right.text
    page = page_of(book, solved)
    assert page.print_area.startswith("'1 friction factor'!$A$1:$F$")
    assert "rising main && <wells>.xlsx" in page.oddHeader.left.text
    assert "3f2a9c0d" in page.oddFooter.left.text


def test_the_register_links_to_every_page(book: Any) -> None:
    register = book["Register"]
    links = [cell.hyperlink for row in register for cell in row if cell.hyperlink is not None]
    assert len(links) == len(EVERY)
    for link, sheet in zip(links, book.worksheets[1:], strict=True):
        assert link.location == f"'{sheet.title.replace(chr(39), chr(39) * 2)}'!A1"


def test_numbers_are_numbers_with_the_digits_that_are_known(book: Any) -> None:
    record = solved()
    page = page_of(book, solved)
    roots = [cell for row in page for cell in row if cell.value == record.root]
    big = max(roots, key=lambda cell: cell.font.size)
    assert big.number_format == "0.0000000000000"
    low, high = record.verdict.low, record.verdict.high
    assert low is not None
    assert high is not None
    labels = {cell.value: cell.row for row in page for cell in row if cell.column == 1}
    assert page.cell(labels["Enclosure, low end"], 3).value <= low
    assert page.cell(labels["Enclosure, high end"], 3).value >= high


def test_the_curve_and_its_numbers_are_those_of_the_record(book: Any) -> None:
    page = page_of(book, solved)
    shape = curve(solved())
    assert shape is not None
    (piece,) = shape.pieces
    drawn = [(page.cell(row, 9).value, page.cell(row, 10).value) for row in range(2, 103)]
    assert drawn == [(pytest.approx(x), pytest.approx(f)) for x, f in piece]
    residual, width = page._charts
    assert [len(residual.series), len(width.series)] == [3, 1]
    assert width.y_axis.scaling.logBase == 10
    assert all(not series.smooth for series in residual.series)


def test_a_formula_is_shown_whole_however_long(book: Any) -> None:
    page = page_of(book, with_long_chain)
    cells = [page.cell(row, 5).value for row in range(1, page.max_row + 1)]
    parts = [cell for cell in cells if isinstance(cell, str) and cell != "formula"]
    shown = "".join(parts).replace("\n", "")
    for line in with_long_chain().steps:
        assert line.formula in shown
    assert max(dimension.height or 0 for dimension in page.row_dimensions.values()) <= 409


def test_page_breaks_leave_no_page_overfull(book: Any) -> None:
    for sheet in book.worksheets[1:]:
        breaks = [each.id for each in sheet.row_breaks.brk]
        last = int(re.sub(r"\D", "", sheet.print_area.split(":")[-1]))
        repeated = int(sheet.print_title_rows.split("$")[-1])
        head = sum(sheet.row_dimensions[row].height for row in range(1, repeated + 1))
        for start, end in zip([0, *breaks], [*breaks, last], strict=True):
            heights = [sheet.row_dimensions[row].height for row in range(start + 1, end + 1)]
            assert sum(heights) + (head if start else 0.0) <= PAGE_HEIGHT + 1.0


def test_a_refused_page_states_the_reason_and_draws_the_look(book: Any) -> None:
    from tests.reports.samples import refused_at_a_pole

    page = page_of(book, refused_at_a_pole)
    texts = texts_of(page)
    assert "Root" not in texts
    assert any(refused_at_a_pole().verdict.reason == text for text in texts)
    assert len(page._charts) == 2


def test_a_root_without_enclosure_says_so(book: Any) -> None:
    assert any("estimate" in text for text in texts_of(page_of(book, without_root)))


@settings(deadline=None)
@given(st.text(max_size=80), st.text(max_size=80))
def test_sheet_names_are_permitted_and_different(first: str, second: str) -> None:
    records = [replace(solved_once(), label=text) for text in (first, second, first)]
    names = page_names(records, taken=("Register",))
    assert len({name.casefold() for name in names}) == 3
    for name in (*names, sheet_name(first)):
        assert 1 <= len(name.encode("utf-16-le")) // 2 <= 31
        assert not set(name) & set("[]:*?/\\")
        assert not name.startswith("'")
        assert not name.endswith("'")


_ONCE: list[Record] = []


def solved_once() -> Record:
    if not _ONCE:
        _ONCE.append(solved())
    return _ONCE[0]


@settings(deadline=None, max_examples=40)
@given(label=st.text(), unit=st.text(max_size=20), value=st.floats() | st.text() | st.booleans())
def test_any_text_and_value_is_carried(label: str, unit: str, value: float | str | bool) -> None:
    from io import BytesIO

    from xlroot.reports.sheet import workbook

    record = solved_once()
    line = replace(record.steps[0], label=label, unit=unit, value=value, formula=label)
    changed = replace(
        record, label=label, unit=unit, statement=label, steps=(line,), iterates=(), look=None
    )
    stream = BytesIO()
    workbook([changed]).save(stream)
    page = load_workbook(stream).worksheets[1]
    assert all(cell.data_type in ("s", "n") for row in page for cell in row)
    numbers = [cell.value for row in page for cell in row if cell.column == 3]
    if isinstance(value, float) and math.isfinite(value):
        assert any(isinstance(each, int | float) and each == value for each in numbers)


# -- where pages may be written ----------------------------------------------------------------


def test_a_file_that_exists_is_kept_unless_asked(tmp_path: Path) -> None:
    target = tmp_path / "records.xlsx"
    target.write_bytes(b"something else")
    with pytest.raises(OutputError, match="exists already"):
        write_records([solved()], target)
    assert target.read_bytes() == b"something else"
    write_records([solved()], target, Existing.REPLACE)
    assert load_workbook(target).sheetnames[0] == "Register"


def test_the_solved_workbook_is_never_written_to(tmp_path: Path) -> None:
    source = tmp_path / "source.xlsx"
    Workbook().save(source)
    content = source.read_bytes()
    digest = hashlib.sha256(content).hexdigest()
    record = solved()
    by_place = replace(record, provenance=replace(record.provenance, book=str(source)))
    by_content = replace(record, provenance=replace(record.provenance, digest=digest))
    other = tmp_path / "link.xlsx"
    other.symlink_to(source)
    for asked in (by_place, by_content):
        for target in (source, other):
            with pytest.raises(OutputError, match="was solved"):
                write_records([asked], target, Existing.REPLACE)
    assert source.read_bytes() == content


@pytest.mark.parametrize(
    ("name", "says"),
    [("records.pdf", "another kind"), ("missing/records.xlsx", "no folder"), ("", "another kind")],
)
def test_other_places_are_refused_with_the_reason(tmp_path: Path, name: str, says: str) -> None:
    with pytest.raises(OutputError, match=says):
        write_records([solved()], tmp_path / name)


def test_no_record_makes_no_workbook(tmp_path: Path) -> None:
    with pytest.raises(OutputError, match="no solve"):
        write_records([], tmp_path / "records.xlsx")
    assert list(tmp_path.iterdir()) == []


def test_nothing_but_the_pages_is_left_behind(tmp_path: Path) -> None:
    write_records([solved()], tmp_path / "records.xlsx")
    assert [each.name for each in tmp_path.iterdir()] == ["records.xlsx"]


# -- what a host makes of them -----------------------------------------------------------------


def program(name: str) -> str:
    """The path of a program that the machine has; skipped without it, but not where CI runs."""
    found = shutil.which(name)
    if found is None:
        if os.environ.get("CI"):
            pytest.fail(f"{name} is not installed")
        pytest.skip(f"{name} is not installed")
    return found


@pytest.mark.host
def test_a_host_prints_the_pages(tmp_path: Path) -> None:
    convert, read = program("soffice"), program("pdftotext")
    source = write_records([solved(), hostile(), with_long_chain()], tmp_path / "records.xlsx")
    profile = (tmp_path / "profile").as_uri()
    subprocess.run(
        [
            convert,
            "--headless",
            f"-env:UserInstallation={profile}",
            "--convert-to",
            "pdf",
            "--outdir",
            str(tmp_path),
            str(source),
        ],
        check=True,
        capture_output=True,
        timeout=180,
    )
    told = subprocess.run(
        [read, "-layout", str(tmp_path / "records.pdf"), "-"],
        check=True,
        capture_output=True,
        timeout=60,
    ).stdout.decode()
    pages = told.split("\f")[:-1]
    book = load_workbook(source)
    wanted = sum(1 + len(sheet.row_breaks.brk) for sheet in book.worksheets)
    assert len(pages) == wanted, "the host breaks pages where we do"
    assert all(f"page {n} of {wanted}" in page for n, page in enumerate(pages, 1))
    first = pages[1]
    for text in ("0.0194190314895", "bracketed", "approved", "fingerprint", "CAUTIONS"):
        assert text in first
    assert '=HYPERLINK("http://' in told
    assert "#NAME?" not in told
    assert "###" not in told
    repeated = [page for page in pages if "CHAIN, CONTINUED" in page]
    assert len(repeated) > 5
    assert all("formula" in page for page in repeated)
