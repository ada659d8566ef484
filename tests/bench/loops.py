"""General formula libraries as f(x): set the unknown, recalculate, read the residual.

They are measured only as what a root search would cost with one of them inside its loop.
"""

from __future__ import annotations

import tempfile
from collections.abc import Callable
from pathlib import Path

from tests.bench.chains import Bench

Residual = Callable[[float], float]


def _split(address: str) -> tuple[str, int, int]:
    from xlroot.cells import parse_address

    sheet, _, cell = address.partition("!")
    row, column = parse_address(cell)
    return sheet, row, column


def with_formualizer(bench: Bench) -> Residual:
    import formualizer

    book = formualizer.Workbook()
    for name in dict.fromkeys(address.partition("!")[0] for address in bench.contents):
        book.add_sheet(name)
    for address, content in bench.contents.items():
        sheet, row, column = _split(address)
        if isinstance(content, str) and content.startswith("="):
            book.set_formula(sheet, row, column, content)
        else:
            book.set_value(sheet, row, column, content)
    unknown, residual = _split(bench.unknown), _split(bench.residual)

    def f(x: float) -> float:
        book.set_value(*unknown, x)
        return float(book.evaluate_cell(*residual))

    return f


def with_ironcalc(bench: Bench) -> Residual:
    import ironcalc

    model = ironcalc.create("bench", "en", "UTC", "en")
    sheets = list(dict.fromkeys(address.partition("!")[0] for address in bench.contents))
    for index, name in enumerate(sheets):
        if index:
            model.add_sheet(name)
        else:
            model.rename_sheet(0, name)
    for address, content in bench.contents.items():
        sheet, row, column = _split(address)
        model.set_user_input(sheets.index(sheet), row, column, str(content))
    unknown, residual = _split(bench.unknown), _split(bench.residual)

    def f(x: float) -> float:
        model.set_user_input(sheets.index(unknown[0]), unknown[1], unknown[2], repr(x))
        model.evaluate()
        text = model.get_formatted_cell_value(sheets.index(residual[0]), residual[1], residual[2])
        return float(text)

    return f


def with_formulas(bench: Bench) -> Residual:
    import formulas
    import openpyxl

    book = openpyxl.Workbook()
    book.remove(book.active)
    for name in dict.fromkeys(address.partition("!")[0] for address in bench.contents):
        book.create_sheet(name)
    for address, content in bench.contents.items():
        sheet, _, cell = address.partition("!")
        book[sheet][cell] = content
    folder = Path(tempfile.mkdtemp())
    path = folder / "bench.xlsx"
    book.save(path)
    model = formulas.ExcelModel().loads(str(path)).finish()

    def name(address: str) -> str:
        sheet, _, cell = address.partition("!")
        return f"'[bench.xlsx]{sheet.upper()}'!{cell}"

    def f(x: float) -> float:
        solution = model.calculate(inputs={name(bench.unknown): x}, outputs=[name(bench.residual)])
        return float(solution[name(bench.residual)].value[0, 0])

    return f


LOOPS: dict[str, tuple[Callable[[Bench], Residual], str]] = {
    "ironcalc": (with_ironcalc, "(goal 12)"),
    "formualizer": (with_formualizer, "(goal 80)"),
    "formulas": (with_formulas, "(goal 5,000)"),
}
