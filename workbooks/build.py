"""Builds the demo workbooks: `python workbooks/build.py`, with LibreOffice's soffice on the path.

Each workbook is written with the roots as plain numbers, recalculated and saved by LibreOffice, so
that it carries saved values as a user's file does; then the cells that ask xlroot get their
formulas back, as a host with the functions would have saved them. Roots come from
`independent.py`, which knows nothing of the sheets; texts and tables (verdict, bounds, iterates,
scan) from xlroot itself, in a second pass.
"""

from __future__ import annotations

import re
import subprocess
import sys
import tempfile
import zipfile
from pathlib import Path
from types import ModuleType
from xml.sax.saxutils import escape

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))

from openpyxl import Workbook  # noqa: E402

from workbooks.independent import ROOTS  # noqa: E402
from workbooks.page import Ask, Page  # noqa: E402
from workbooks.works import (  # noqa: E402
    bioreactor,
    exchanger,
    plate,
    pump_main,
    returns,
    vessel,
)
from xlroot.docket import Docket  # noqa: E402
from xlroot.hosts.saved import read_book  # noqa: E402
from xlroot.values import Grid, Operand, Value  # noqa: E402

WORKS: tuple[ModuleType, ...] = (pump_main, vessel, bioreactor, exchanger, plate, returns)
_DATES = re.compile(rb"<dcterms:(created|modified)[^>]*>[^<]*</dcterms:\1>")
EPOCH = (2026, 12, 1, 0, 0, 0)
Results = dict[str, dict[str, Operand]]
"""What asking cells show, by sheet and address."""


def pages_of(work: ModuleType) -> tuple[Workbook, list[Page]]:
    """A workbook as its definition writes it."""
    book = Workbook()
    assert book.active is not None
    book.remove(book.active)
    pages: list[Page] = work.build(book)
    return book, pages


def recalculated(path: Path, folder: Path) -> Path:
    """The workbook as LibreOffice recalculates and saves it."""
    command = [
        "soffice",
        "--headless",
        "--norestore",
        f"-env:UserInstallation={(folder / 'profile').as_uri()}",
        "--convert-to",
        "xlsx:Calc MS Excel 2007 XML",
        "--outdir",
        str(folder / "saved"),
        str(path),
    ]
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL, timeout=300)
    return folder / "saved" / path.name


def seeded(work: ModuleType) -> Results:
    """The roots that the independent script gives, for every asking cell of one value."""
    found: Results = {}
    for (file, sheet, address), root in ROOTS.items():
        if file == work.FILE:
            found.setdefault(sheet, {})[address] = root() if callable(root) else root
    return found


def written(work: ModuleType, results: Results, folder: Path, target: Path) -> None:
    """One pass: numbers in place, recalculated by the host, formulas put back."""
    book, pages = pages_of(work)
    for page in pages:
        for address in page.asks:
            value = results.get(page.sheet.title, {}).get(address)
            page.sheet[address] = value.rows[0][0] if isinstance(value, Grid) else value
    source = folder / target.name
    book.save(source)
    saved = recalculated(source, folder)
    asks = {page.sheet.title: page.asks for page in pages}
    _with_formulas(saved, target, [page.sheet.title for page in pages], asks, results)


def _with_formulas(
    saved: Path, target: Path, sheets: list[str], asks: dict[str, dict[str, Ask]], results: Results
) -> None:
    parts = {f"xl/worksheets/sheet{n}.xml": name for n, name in enumerate(sheets, start=1)}
    with zipfile.ZipFile(saved) as old, zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as new:
        for item in old.infolist():
            content = old.read(item.filename)
            sheet = parts.get(item.filename)
            if sheet is not None:
                content = _patched(content, asks[sheet], results.get(sheet, {}))
            if item.filename == "docProps/core.xml":
                content = re.sub(
                    rb"<dcterms:(created|modified)[^>]*>[^<]*</dcterms:\1>", b"", content
                )
            new.writestr(zipfile.ZipInfo(item.filename, EPOCH), content, zipfile.ZIP_DEFLATED)


def _patched(content: bytes, asks: dict[str, Ask], results: dict[str, Operand]) -> bytes:
    text = content.decode("utf-8")
    for address, ask in asks.items():
        value = results.get(address)
        grid = value if isinstance(value, Grid) else Grid(((value,),))
        letters = address.rstrip("0123456789")
        row = int(address[len(letters) :])
        block = ""
        if ask.filled and value is not None:
            last = f"{chr(ord(letters) + grid.width - 1)}{row + grid.height - 1}"
            block = f' t="array" ref="{address}:{last}"'
        for down, values in enumerate(grid.rows):
            for right, each in enumerate(values):
                place = f"{chr(ord(letters) + right)}{row + down}"
                formula = ""
                if down == right == 0:
                    formula = f"<f{block}>{escape(ask.formula)}</f>"
                text = _with_cell(text, place, row + down, formula, each)
    return text.encode("utf-8")


def _with_cell(text: str, place: str, row: int, formula: str, value: Value) -> str:
    """The sheet's XML with one cell's content replaced, the cell made if it is not there."""
    pattern = re.compile(rf'<c r="{place}"([^>]*?)(?:/>|>.*?</c>)', re.DOTALL)
    match = pattern.search(text)
    style = re.search(r' s="\d+"', match[1]) if match else None
    kept = style[0] if style else ""
    if isinstance(value, str):
        content = f'<c r="{place}"{kept} t="str">{formula}<v>{escape(value)}</v></c>'
    elif value is None:
        content = f'<c r="{place}"{kept}>{formula}</c>'
    else:
        content = f'<c r="{place}"{kept}>{formula}<v>{float(value)!r}</v></c>'  # type: ignore[arg-type]
    if match:
        return text[: match.start()] + content + text[match.end() :]
    line = re.search(rf'(<row r="{row}"[^>]*?)(/>|>(.*?)</row>)', text, re.DOTALL)
    if line is None:
        following = re.search(r'<row r="(\d+)"', text)
        places = [m for m in re.finditer(r'<row r="(\d+)"', text) if int(m[1]) > row]
        at = places[0].start() if places else text.index("</sheetData>")
        assert following
        return text[:at] + f'<row r="{row}">{content}</row>' + text[at:]
    inside = line[3] or ""
    later = [
        m for m in re.finditer(r'<c r="([A-Z]+)\d+"', inside) if m[1] > place.rstrip("0123456789")
    ]
    at = later[0].start() if later else len(inside)
    whole = f"{line[1]}>{inside[:at]}{content}{inside[at:]}</row>"
    return text[: line.start()] + whole + text[line.end() :]


def completed(path: Path, results: Results) -> Results:
    """The results with what xlroot itself answers for texts and tables."""
    found = {sheet: dict(values) for sheet, values in results.items()}
    for case in Docket.of(read_book(path)).settle():
        mine = found.setdefault(case.cell.sheet, {})
        if case.cell.address not in mine:
            mine[case.cell.address] = case.value
    return found


def main() -> None:
    """Builds every demo beside this script."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        for work in WORKS:
            target = HERE / work.FILE
            results = seeded(work)
            written(work, results, folder, target)
            written(work, completed(target, results), folder, target)
            print(f"built {work.FILE}")


if __name__ == "__main__":
    main()
