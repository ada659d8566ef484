"""Saved workbooks, held against openpyxl's reading of the same files."""

from __future__ import annotations

import site
import warnings
import zipfile
from pathlib import Path

import openpyxl
import pytest
import xlsxwriter
from hypothesis import given, settings
from hypothesis import strategies as st

import xlroot
from tests.conftest import Recalculate
from tests.hosts.reading import (
    differing,
    formulas_by_openpyxl,
    formulas_by_us,
    values_by_openpyxl,
    values_by_us,
)
from xlroot.book import UNSAVED
from xlroot.errors import BookError
from xlroot.hosts.saved import read_book
from xlroot.values import Fault


def shipped() -> list[Path]:
    """Workbooks that installed packages ship, and the demos."""
    folders = [Path(each) for each in site.getsitepackages()]
    found = [path for folder in folders for path in folder.rglob("*.xls[xm]")]
    demos = Path(__file__).parents[2] / "workbooks"
    return sorted([*found, *demos.glob("*.xlsx")])


def assert_same(path: Path) -> None:
    book = read_book(path)
    assert differing(formulas_by_us(book), formulas_by_openpyxl(path)) == {}
    assert differing(values_by_us(book), values_by_openpyxl(path)) == {}


@pytest.mark.parametrize("path", shipped(), ids=lambda path: path.name)
def test_shipped_workbooks_read_as_openpyxl_reads_them(path: Path) -> None:
    assert_same(path)


def test_there_are_workbooks_to_read() -> None:
    assert len(shipped()) >= 6


def written_by_xlsxwriter(path: Path) -> None:
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet("All sorts")
    sheet.write("A1", 1.5)
    sheet.write("A2", "text & <marks>")
    sheet.write("A3", True)
    sheet.write_formula("B1", "=A1*2", None, 3)
    sheet.write_formula("B2", '=A2&"é"', None, "text & <marks>é")
    sheet.write_formula("B3", "=1/0", None, "#DIV/0!")
    sheet.write_formula("B4", "=NOT(A3)", None, "FALSE")
    sheet.write_array_formula("C1:C3", "{=A1:A3*2}", None, 3)
    sheet.write_dynamic_array_formula("E1", "=TRANSPOSE(A1:A3)")
    sheet.write_rich_string("A5", "plain ", book.add_format({"bold": 1}), "bold")
    sheet.add_table("G1:H4", {"name": "Pumps", "columns": [{"header": "Head"}, {"header": "Flow"}]})
    book.define_name("level", "='All sorts'!$A$1")
    book.define_name("'All sorts'!local", "='All sorts'!$A$2")
    book.add_worksheet("Empty")
    book.close()


def test_another_producer(tmp_path: Path) -> None:
    path = tmp_path / "made.xlsx"
    written_by_xlsxwriter(path)
    assert_same(path)
    book = read_book(path)
    assert book.sheets == ("All sorts", "Empty")
    assert [(name.name, name.sheet) for name in book.names] == [
        ("level", None),
        ("local", "All sorts"),
    ]
    table = book.table("pumps")
    assert table is not None
    assert table.columns == ("Head", "Flow")
    assert str(table.block) == "'All sorts'!G1:H4"
    array = book.formula(book.cell("C1", "All sorts"))
    assert array is not None
    assert array.block is not None
    assert array.block.address == "C1:C3"


def openpyxl_book(path: Path) -> None:
    book = openpyxl.Workbook()
    sheet = book.active
    sheet["A1"], sheet["A2"], sheet["A3"] = 2, "=A1*2", "=A2+1"
    sheet["B1"] = "#N/A"
    book.create_sheet("Second")["A1"] = "=Sheet!A3"
    book.save(path)


@pytest.mark.host
def test_a_host_s_own_files(host: Recalculate, tmp_path: Path) -> None:
    path = tmp_path / "mine.xlsx"
    openpyxl_book(path)
    unsaved = read_book(path)
    assert unsaved.saved(unsaved.cell("A2", "Sheet")) is UNSAVED
    saved = host(path)
    assert_same(saved)
    book = read_book(saved)
    assert book.saved(book.cell("A1", "Second")) == 5.0


MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
STRICT = "http://purl.oclc.org/ooxml/spreadsheetml/main"
RELATIONS = "http://schemas.openxmlformats.org/package/2006/relationships"
OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"


def package(path: Path, sheet: str | bytes, *, workbook: str = "", strings: str = "") -> Path:
    """A small package around the XML of one sheet."""
    with zipfile.ZipFile(path, "w") as made:
        made.writestr(
            "_rels/.rels",
            f'<Relationships xmlns="{RELATIONS}"><Relationship Id="r1" '
            f'Type="{OFFICE}/officeDocument" Target="/xl/workbook.xml"/></Relationships>',
        )
        made.writestr(
            "xl/workbook.xml",
            workbook
            or f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets>'
            '<sheet name="S" sheetId="1" r:id="r1"/></sheets></workbook>',
        )
        made.writestr(
            "xl/_rels/workbook.xml.rels",
            f'<Relationships xmlns="{RELATIONS}">'
            f'<Relationship Id="r1" Type="{OFFICE}/worksheet" Target="worksheets\\sheet1.xml"/>'
            f'<Relationship Id="r2" Type="{OFFICE}/sharedStrings" Target="sharedStrings.xml"/>'
            "</Relationships>",
        )
        made.writestr("xl/worksheets/sheet1.xml", sheet)
        if strings:
            made.writestr("xl/sharedStrings.xml", strings)
    return path


def sheet_xml(rows: str, namespace: str = MAIN) -> str:
    body = f'<worksheet xmlns="{namespace}"><sheetData>{rows}</sheetData></worksheet>'
    return f'<?xml version="1.0"?>{body}'


PLAIN = (
    '<row r="1"><c r="A1"><v>1.5</v></c><c r="B1"><f>A1*2</f><v>3</v></c></row>'
    '<row r="2"><c r="A2" t="inlineStr"><is><t>one</t></is></c>'
    '<c r="B2" t="str"><f>A2&amp;"&lt;"</f><v>one&lt;</v></c></row>'
)
ODD = {
    "plain": sheet_xml(PLAIN),
    "strict namespace": sheet_xml(PLAIN, STRICT),
    "prefixes": sheet_xml(PLAIN)
    .replace("<", "<x:")
    .replace("<x:/", "</x:")
    .replace("<x:?", "<?")
    .replace("xmlns=", "xmlns:x="),
    "no addresses": sheet_xml(PLAIN)
    .replace(' r="A1"', "")
    .replace(' r="B1"', "")
    .replace(' r="A2"', "")
    .replace(' r="B2"', "")
    .replace(' r="1"', "")
    .replace(' r="2"', ""),
    "comments": sheet_xml(PLAIN).replace('<c r="B1">', '<!-- c --><c r="B1">'),
    "character data": sheet_xml(PLAIN).replace("<f>A1*2</f>", "<f><![CDATA[A1*2]]></f>"),
    "leading equals": sheet_xml(PLAIN).replace("<f>A1*2", "<f>=A1*2"),
    "white space": sheet_xml(PLAIN).replace("><", ">\n  <"),
    "other encoding": sheet_xml(PLAIN).replace("?>", ' encoding="UTF-16"?>').encode("utf-16"),
    "single quotes": sheet_xml(PLAIN).replace('"', "'").replace("&amp;'&lt;'", '&amp;"&lt;"'),
    "attributes in another order": sheet_xml(PLAIN).replace(
        '<c r="A2" t="inlineStr">', '<c t="inlineStr" r="A2">'
    ),
}


@pytest.mark.parametrize("name", ODD)
def test_odd_producers_read_alike(name: str, tmp_path: Path) -> None:
    book = read_book(package(tmp_path / "odd.xlsx", ODD[name]))
    b1, b2 = book.cell("B1"), book.cell("B2")
    assert [book.saved(book.cell(a)) for a in ("A1", "B1", "A2", "B2")] == [1.5, 3.0, "one", "one<"]
    formula = book.formula(b1)
    assert formula is not None
    assert formula.text == "A1*2"
    assert getattr(book.formula(b2), "text", None) == 'A2&"<"'


def test_shared_formulas_texts_and_faults(tmp_path: Path) -> None:
    rows = (
        '<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1"><f t="shared" ref="B1:B3" si="0">'
        'A1+$C$1</f><v>1</v></c></row><row r="2"><c r="A2" t="b"><v>1</v></c>'
        '<c r="B2"><f t="shared" si="0"/><v>2</v></c></row><row r="3"><c r="A3" t="e">'
        '<v>#GETTING_DATA</v></c><c r="B3"><f t="shared" si="0"/></c><c r="C3" t="d">'
        "<v>2026-12-01</v></c></row>"
    )
    runs = "<r><t>a</t></r><r><t>b_x000D_</t></r><rPh><t>z</t></rPh>"
    strings = f'<sst xmlns="{MAIN}"><si>{runs}</si></sst>'
    book = read_book(package(tmp_path / "shared.xlsx", sheet_xml(rows), strings=strings))
    assert book.saved(book.cell("A1")) == "ab\r"
    assert book.saved(book.cell("A2")) is True
    assert book.saved(book.cell("A3")) is Fault.WAITING
    assert book.saved(book.cell("B3")) is UNSAVED
    assert book.saved(book.cell("C3")) == 46357.0
    follower = book.formula(book.cell("B3"))
    assert follower is not None
    assert (follower.text, follower.home.address) == ("A1+$C$1", "B1")
    assert xlroot.evaluate(book, "B2") == 1.0


def linked_book(path: Path) -> Path:
    """A book whose A2 and B2 read another workbook, of which only A1 was saved."""
    rows = (
        '<row r="1"><c r="A1"><v>2</v></c></row><row r="2"><c r="A2"><f>A1-[1]Data!A1</f>'
        '<v>-5</v></c><c r="B2"><f>A1-[1]Data!B7</f><v>1</v></c></row>'
    )
    workbook = (
        f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets><sheet name="S" sheetId="1" '
        'r:id="r1"/></sheets><externalReferences><externalReference r:id="r9"/>'
        "</externalReferences></workbook>"
    )
    made = package(path, sheet_xml(rows), workbook=workbook)
    with zipfile.ZipFile(made) as old:
        parts = {name: old.read(name) for name in old.namelist()}
    relation = f'<Relationship Id="r9" Type="{OFFICE}/externalLink" Target="externalLinks/e1.xml"/>'
    rels = "xl/_rels/workbook.xml.rels"
    closing = "</Relationships>"
    parts[rels] = parts[rels].decode().replace(closing, relation + closing).encode()
    parts["xl/externalLinks/e1.xml"] = (
        f'<externalLink xmlns="{MAIN}"><externalBook><sheetNames><sheetName val="Data"/>'
        '</sheetNames><sheetDataSet><sheetData sheetId="0"><row r="1"><cell r="A1"><v>7</v>'
        "</cell></row></sheetData></sheetDataSet></externalBook></externalLink>"
    ).encode()
    with zipfile.ZipFile(made, "w") as new:
        for name, content in parts.items():
            new.writestr(name, content)
    return made


def test_linked_workbooks_count_where_their_values_were_saved(tmp_path: Path) -> None:
    book = read_book(linked_book(tmp_path / "linked.xlsx"))
    assert book.sheets == ("S",)
    record = xlroot.solve(book, residual="A2", unknown="A1", low=0, high=20)
    assert record.root == 7.0
    assert [str(line.cell) for line in record.held] == ["'[1]Data'!A1"]
    refused = xlroot.solve(book, residual="B2", unknown="A1", low=0, high=20)
    assert refused.refused
    assert "another workbook" in refused.verdict.reason


def test_precision_as_displayed_is_refused(tmp_path: Path) -> None:
    workbook = (
        f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets><sheet name="S" sheetId="1" '
        'r:id="r1"/></sheets><calcPr fullPrecision="0"/></workbook>'
    )
    book = read_book(package(tmp_path / "shown.xlsx", sheet_xml(PLAIN), workbook=workbook))
    record = xlroot.solve(book, residual="B1", unknown="A1", low=-1, high=1)
    assert record.refused
    assert "precision that cells display" in record.verdict.reason


BROKEN = {
    "missing": (None, "there is no file"),
    "text": (b"just text", "is no .xlsx"),
    "password": (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"0" * 600, "password"),
    "cut off": (b"PK\x03\x04 cut", "is no .xlsx"),
}


@pytest.mark.parametrize("name", BROKEN)
def test_what_is_no_workbook_is_refused_in_words(name: str, tmp_path: Path) -> None:
    content, words = BROKEN[name]
    path = tmp_path / "broken.xlsx"
    if content is not None:
        path.write_bytes(content)
    with pytest.raises(BookError, match=words):
        read_book(path)


def test_a_folder_and_damaged_xml_are_refused(tmp_path: Path) -> None:
    with pytest.raises(BookError, match="folder"):
        read_book(tmp_path)
    damaged = package(tmp_path / "damaged.xlsx", sheet_xml(PLAIN)[:-20])
    with pytest.raises(BookError, match="line"):
        read_book(damaged).saved(xlroot.Cell("S", 1, 1))


def test_declared_entities_are_refused(tmp_path: Path) -> None:
    bomb = '<?xml version="1.0"?><!DOCTYPE w [<!ENTITY a "aaaa">]>' + sheet_xml(PLAIN)[21:]
    with pytest.raises(BookError, match="entities"):
        read_book(package(tmp_path / "bomb.xlsx", bomb)).saved(xlroot.Cell("S", 1, 1))


contents = st.one_of(
    st.floats(allow_nan=False, allow_infinity=False, width=64),
    st.booleans(),
    st.text(st.characters(min_codepoint=32, max_codepoint=0x2FFF, exclude_categories=["Cs", "Cn"])),
    st.sampled_from(["=A1+1", "=SUM(A1:B2)", '="x"&"<y>"']),
)


@settings(max_examples=25, deadline=None)
@given(st.dictionaries(st.tuples(st.integers(1, 30), st.integers(1, 30)), contents, max_size=20))
def test_whatever_is_written_is_read(cells: dict[tuple[int, int], object]) -> None:
    import tempfile

    book = openpyxl.Workbook()
    sheet = book.active
    for (row, column), content in cells.items():
        sheet.cell(row, column, content)
    with tempfile.TemporaryDirectory() as folder, warnings.catch_warnings():
        path = Path(folder) / "made.xlsx"
        book.save(path)
        assert_same(path)
