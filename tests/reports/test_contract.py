"""What holds for every report of every record."""

from __future__ import annotations

import json
from collections.abc import Callable
from io import BytesIO
from itertools import chain as joined

import pytest
from openpyxl import load_workbook

from tests.reports.samples import EVERY
from xlroot.record import Record
from xlroot.reports import machine, terminal
from xlroot.reports.sheet import workbook


def in_terminal(record: Record) -> str:
    return terminal.full(record)


def in_ascii(record: Record) -> str:
    return terminal.full(record, terminal.Medium(encoding="ascii"))


def in_json(record: Record) -> str:
    return machine.as_json([record])


def in_sheet(record: Record) -> str:
    stream = BytesIO()
    workbook([record]).save(stream)
    cells = joined.from_iterable(joined.from_iterable(load_workbook(stream).worksheets))
    return "\n".join(str(cell.value) for cell in cells if cell.value is not None)


REPORTS: list[Callable[[Record], str]] = [in_terminal, in_ascii, in_json, in_sheet]


@pytest.fixture(params=EVERY, ids=lambda make: str(make.__name__))
def record(request: pytest.FixtureRequest) -> Record:
    made: Record = request.param()
    return made


@pytest.mark.parametrize("report", REPORTS)
def test_a_report_names_cells_verdict_and_fingerprint(
    report: Callable[[Record], str], record: Record
) -> None:
    text = report(record)
    assert str(record.question.unknown) in text
    assert str(record.question.residual) in text
    assert record.verdict.status.value in text
    assert record.fingerprint in text
    assert record.provenance.digest in text


@pytest.mark.parametrize("report", REPORTS)
def test_a_refused_record_shows_no_root(report: Callable[[Record], str], record: Record) -> None:
    text = report(record)
    if record.refused:
        assert "Root" not in text
        flat = " ".join(text.split())
        assert record.verdict.reason.split(";")[0][:40] in flat
    elif report is not in_json:
        assert "Root" in text


def test_json_is_strict_and_complete(record: Record) -> None:
    def no_constant(name: str) -> None:
        raise AssertionError(f"{name} is no JSON")

    (told,) = json.loads(machine.as_json([record]), parse_constant=no_constant)
    wanted = (
        "cell label residual unknown method root low high verdict reason residual_at_root "
        "iterations evaluations predicted_iterations warnings fingerprint"
    ).split()
    assert set(wanted) <= set(told)
    assert told["root"] == record.root
    assert (told["low"], told["high"]) == (record.verdict.low, record.verdict.high)
    assert told["verdict"] in ("proved", "bracketed", "converged", "refused")
    assert len(told["iterates"]) == len(record.iterates)
    assert [row["x"] for row in told["iterates"]] == [row.x for row in record.iterates]
    assert [line["formula"] for line in told["steps"]] == [line.formula for line in record.steps]
