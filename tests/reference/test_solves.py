"""Published engineering solves, each set up as a sheet and solved through the whole story.

Sources stand in solves.json, beside every case; `published_from_memory` marks values that were
not looked up. Inputs become named cells, the residual a formula of them.
"""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest

import xlroot
from tests.reference.sheets import WRITTEN_OUT
from xlroot.hosts.memory import book_of

CASES: list[dict[str, Any]] = json.loads(
    Path(__file__).with_name("solves.json").read_text(encoding="utf-8")
)["checks"]


def book_for(case: dict[str, Any]) -> xlroot.Book:
    """The case as a sheet: the unknown in B1, the residual in B2, inputs from B3."""
    cells, names = WRITTEN_OUT[case["id"]](case["inputs"])
    return book_of(cells, names=names)


def test_every_case_has_a_sheet() -> None:
    assert {case["id"] for case in CASES} == set(WRITTEN_OUT)
    assert len(CASES) == 55


@pytest.mark.parametrize("case", CASES, ids=lambda case: case["id"])
@pytest.mark.parametrize("method", ["auto", "bisection"])
def test_the_root_is_the_published_one(case: dict[str, Any], method: str) -> None:
    low, high = case.get("bracket") or WRITTEN_OUT[case["id"]].bracket  # type: ignore[attr-defined]
    record = xlroot.solve(
        book_for(case), residual="B2", unknown="B1", low=low, high=high, method=method
    )
    assert record.root is not None, record.verdict.reason
    digits = case.get("root_50digit") or case["published"]
    assert record.root == pytest.approx(float(digits), rel=2e-11)
    assert record.verdict.low is not None
    assert record.verdict.high is not None
    slack = 1e-9 * abs(record.root)
    assert record.verdict.low - slack <= float(digits) <= record.verdict.high + slack
