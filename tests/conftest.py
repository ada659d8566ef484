"""What tests share: a host that recalculates, where there is one."""

from __future__ import annotations

import os
import shutil
import subprocess
from collections.abc import Callable
from pathlib import Path

import pytest

Recalculate = Callable[[Path], Path]


@pytest.fixture(scope="session")
def host(tmp_path_factory: pytest.TempPathFactory) -> Recalculate:
    """Has LibreOffice open a workbook, recalculate and save it as .xlsx elsewhere.

    Where it is not installed, tests that need it fail under CI and are skipped, saying so, on a
    developer's machine.
    """
    program = shutil.which("soffice")
    if program is None:
        if os.environ.get("CI"):
            pytest.fail("soffice is not installed, and CI has to run the host tests")
        pytest.skip("soffice is not installed: this test did not run")
    profile = tmp_path_factory.mktemp("profile")
    folder = tmp_path_factory.mktemp("recalculated")

    def recalculate(path: Path) -> Path:
        command = [
            program,
            "--headless",
            "--norestore",
            f"-env:UserInstallation={profile.as_uri()}",
            "--convert-to",
            "xlsx:Calc MS Excel 2007 XML",
            "--outdir",
            str(folder),
            str(path),
        ]
        done = subprocess.run(
            command, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, timeout=300, check=False
        )
        made = folder / f"{path.stem}.xlsx"
        assert made.exists(), done.stdout.decode(errors="replace")
        return made

    return recalculate
