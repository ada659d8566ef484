"""A plain solve stays light: no numpy, scipy or openpyxl."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

SCRIPT = """
import sys
import xlroot
book = xlroot.open(sys.argv[1])
record = xlroot.solve(book, residual="B3", unknown="B1", low=1, high=2)
assert abs(record.root - 2 ** 0.5) < 1e-11, record.root
records = xlroot.solve_book(book)
assert len(records) == 1 and abs(records[0].root - 2 ** 0.5) < 1e-11
heavy = {"numpy", "scipy", "openpyxl", "pandas", "rich"} & set(sys.modules)
assert not heavy, heavy
"""


@pytest.fixture(scope="module")
def book(tmp_path_factory: pytest.TempPathFactory) -> Path:
    import openpyxl

    made = openpyxl.Workbook()
    sheet = made.active
    cells = {"B1": 1, "B2": "=B1^2", "B3": "=B2-2", "B4": "=XLROOT(B3,B1,1,2)"}
    for address, content in cells.items():
        sheet[address] = content
    path = tmp_path_factory.mktemp("startup") / "root.xlsx"
    made.save(path)
    return path


def test_a_plain_solve_imports_no_heavy_library(book: Path) -> None:
    done = subprocess.run(
        [sys.executable, "-c", SCRIPT, str(book)], capture_output=True, text=True, check=False
    )
    assert done.returncode == 0, done.stderr


def test_importing_the_package_imports_little() -> None:
    code = "import sys, xlroot; print(len([m for m in sys.modules if m.startswith('xlroot')]))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert int(done.stdout) == 1


def test_the_version_is_the_package_s() -> None:
    from importlib.metadata import version

    import xlroot

    assert xlroot.__version__ == version("xlroot")
