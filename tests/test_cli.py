"""The command line, run as a person runs it."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

WORKBOOKS = Path(__file__).parents[1] / "workbooks"


def run(*arguments: str, width: int = 80) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "xlroot", *arguments],
        capture_output=True,
        text=True,
        encoding="utf-8",
        check=False,
        env={**os.environ, "COLUMNS": str(width), "PYTHONIOENCODING": "utf-8"},
    )


def test_a_workbook_s_own_solves() -> None:
    done = run("solve", str(WORKBOOKS / "pump_main.xlsx"))
    assert done.returncode == 0, done.stderr
    assert "12 solves: 12 bracketed" in done.stdout
    assert "Main!B27" in done.stdout
    assert "0.016718808938" in done.stdout
    assert all(len(line) <= 80 for line in done.stdout.splitlines())


def test_a_refusal_is_exit_code_1() -> None:
    done = run("solve", str(WORKBOOKS / "bioreactor.xlsx"))
    assert done.returncode == 1
    assert "crosses zero near 0.174595" in " ".join(done.stdout.split())


QUESTION = ("--residual", "Balance!B20", "--unknown", "Balance!B18", "--between", "0.01", "0.5")


def test_one_question_as_json() -> None:
    done = run("solve", str(WORKBOOKS / "bioreactor.xlsx"), *QUESTION, "--json")
    assert done.returncode == 0, done.stderr
    (record,) = json.loads(done.stdout)
    needed = {"cell", "label", "residual", "unknown", "method", "root", "low", "high", "verdict"}
    needed |= {"reason", "residual_at_root", "iterations", "evaluations", "predicted_iterations"}
    needed |= {"warnings", "fingerprint"}
    assert needed <= record.keys()
    assert record["verdict"] == "bracketed"
    assert record["root"] == pytest.approx(0.1745948858750, rel=1e-11)


def test_one_question_prints_the_whole_record() -> None:
    done = run("solve", str(WORKBOOKS / "bioreactor.xlsx"), *QUESTION, "--method", "bisection")
    assert done.returncode == 0
    for words in ("Find ", "Iterations predicted", "Iterates", "Held cells", "Cautions"):
        assert words in done.stdout


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("solve", "nowhere.xlsx"), "there is no file"),
        (("solve", str(WORKBOOKS / "build.py")), "no .xlsx"),
        (("solve", str(WORKBOOKS / "bioreactor.xlsx"), *QUESTION[:2]), "--unknown"),
        (
            (
                "solve",
                str(WORKBOOKS / "bioreactor.xlsx"),
                "--residual",
                "Balence!B20",
                *QUESTION[2:],
            ),
            "did you mean Balance?",
        ),
        (
            ("solve", str(WORKBOOKS / "bioreactor.xlsx"), *QUESTION, "--method", "newtn"),
            "did you mean Newton?",
        ),
    ],
)
def test_what_cannot_be_asked_is_exit_code_2_and_one_line(
    arguments: tuple[str, ...], words: str
) -> None:
    done = run(*arguments)
    assert done.returncode == 2
    assert words in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1
    assert "Traceback" not in done.stderr
    assert done.stdout == ""


def test_the_record_workbook_is_written_and_never_over_the_source(tmp_path: Path) -> None:
    source = WORKBOOKS / "skin_plate.xlsx"
    before = source.read_bytes()
    target = tmp_path / "records.xlsx"
    done = run("solve", str(source), "--out", str(target))
    assert done.returncode == 0, done.stderr
    assert target.exists()
    again = run("solve", str(source), "--out", str(source))
    assert again.returncode == 2
    assert source.read_bytes() == before


def test_the_look_suggests_brackets() -> None:
    done = run("scan", str(WORKBOOKS / "bioreactor.xlsx"), *QUESTION[:4], "--between", "0.01", "6")
    assert done.returncode == 0
    assert "crosses zero near 0.174595" in done.stdout
    assert done.stdout.count("suggested bracket") == 2
