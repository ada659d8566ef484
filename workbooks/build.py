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
from openpyxl.utils.cell import (  # noqa: E402
    column_index_from_string,
    coordinate_from_string,
    get_column_letter,
)

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
_AXIS = re.compile(rb'axId val="(\d+)"')
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
            for place, value in _spread(address, results.get(page.sheet.title, {}).get(address)):
                page.sheet[place] = value
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
                content = _DATES.sub(b"", content)
            if item.filename.startswith("xl/charts/"):
                content = _with_plain_axes(content)
            new.writestr(zipfile.ZipInfo(item.filename, EPOCH), content, zipfile.ZIP_DEFLATED)


def _with_plain_axes(content: bytes) -> bytes:
    """A chart whose axes are numbered from one; the host numbers them at random."""
    for n, axis in enumerate(dict.fromkeys(_AXIS.findall(content)), start=1):
        content = content.replace(b'val="' + axis + b'"', b'val="%d"' % n)
    return content


def _spread(address: str, value: Operand) -> list[tuple[str, Value]]:
    """The cells that an answer fills, with what each shows."""
    if not isinstance(value, Grid):
        return [(address, value)]
    column, row = coordinate_from_string(address)
    left = column_index_from_string(column)
    return [
        (f"{get_column_letter(left + right)}{row + down}", each)
        for down, values in enumerate(value.rows)
        for right, each in enumerate(values)
    ]


def _patched(content: bytes, asks: dict[str, Ask], results: dict[str, Operand]) -> bytes:
    text = content.decode("utf-8")
    for address, ask in asks.items():
        answer = results.get(address)
        cells = _spread(address, answer)
        if answer is not None and ask.filled and ask.filled != f"{address}:{cells[-1][0]}":
            raise SystemExit(
                f"{address} fills to {cells[-1][0]}; its table is laid out {ask.filled}"
            )
        block = f' t="array" ref="{ask.filled}"' if ask.filled else ""
        formula = f"<f{block}>{escape(ask.formula)}</f>"
        for place, value in cells:
            text = _with_cell(text, place, formula if place == address else "", value)
    return text.encode("utf-8")


def _with_cell(text: str, place: str, formula: str, value: Value) -> str:
    """The sheet's XML with one cell's content replaced; the host has written the cell."""
    match = re.search(rf'<c r="{place}"([^>]*?)(?:/>|>.*?</c>)', text, re.DOTALL)
    if match is None:
        raise SystemExit(f"the host wrote no cell {place}: give it a fill")
    style = re.search(r' s="\d+"', match[1])
    opened = f'<c r="{place}"{style[0] if style else ""}'
    if isinstance(value, str):
        content = f'{opened} t="str">{formula}<v>{escape(value)}</v></c>'
    elif isinstance(value, float | int):
        content = f"{opened}>{formula}<v>{float(value)!r}</v></c>"
    else:
        content = f"{opened}>{formula}</c>"
    return text[: match.start()] + content + text[match.end() :]


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
