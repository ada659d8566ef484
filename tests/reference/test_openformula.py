"""Every published OpenFormula case whose functions are entered.

Source: OASIS OpenDocument TC, OpenFormula draft of 2010-01-19 (see the JSON file). Where Excel is
documented to answer otherwise, xlroot follows Excel; every such case is listed with its reason.
"""

from __future__ import annotations

import math
from typing import NamedTuple

import pytest

from tests.reference.deviations import DEVIATIONS, NOT_ENTERED
from tests.reference.openformula import Case, cases, data
from xlroot import functions
from xlroot.bind import bind, walk
from xlroot.book import Formula
from xlroot.cells import Cell
from xlroot.depend import Bindings
from xlroot.errors import FormulaError, Unsupported
from xlroot.formula import Call, parse
from xlroot.interpret import REFERENCE_MAKERS, Scope, evaluate, single
from xlroot.ledger import Ledger, Policy, Volatile
from xlroot.values import Fault, Value

HERE = Cell("Sheet1", 200, 20)
KNOWN = {"LET", "LAMBDA", "ROW", "COLUMN"} | REFERENCE_MAKERS


def unknown_functions(case: Case) -> list[str]:
    node = bind(data(), Formula(case.formula[1:], HERE), HERE)
    calls = [each.name for each in walk(node) if isinstance(each, Call)]
    return [name for name in calls if name not in KNOWN and functions.find(name) is None]


def shown(case: Case) -> Value:
    ledger = Ledger(Bindings(data()), Policy.COMPUTED, volatile=Volatile.PRESENT)
    scope = Scope(HERE, ledger)
    return single(evaluate(bind(data(), Formula(case.formula[1:], HERE), HERE), scope), scope)


def agrees(value: Value, result: str) -> bool:
    """Whether a value is the published one, to the digits that are printed."""
    text = result.replace("“", '"').replace("”", '"').strip()
    if text in ("Error", "NA", "#N/A"):
        return isinstance(value, Fault) if text == "Error" else value is Fault.NA
    text = {"FALSE": "False", "TRUE": "True", "Ture": "True"}.get(text, text)
    if text in ("True", "False"):
        return value == (text == "True") and not isinstance(value, (str, Fault))
    if text.startswith('"'):
        return value == text.strip('"')
    number = text.replace("±ε", "").replace("ε", "").replace(",", ".").strip()
    if value is None:
        value = 0.0
    if not isinstance(value, float):
        return False
    expected = float(number.rstrip("%")) / (100.0 if number.endswith("%") else 1.0)
    mantissa, _, exponent = number.rstrip("%").lower().partition("e")
    decimals = len(mantissa.partition(".")[2]) - int(exponent or 0)
    if "ε" in result:
        # The last printed digit may be rounded or cut off.
        return abs(value - expected) <= 1.01 * 10.0**-decimals
    return math.isclose(value, expected, rel_tol=1e-12, abs_tol=1e-12)


def every() -> list[Case]:
    return list(cases())


@pytest.mark.parametrize("case", every(), ids=lambda case: f"{case.number} {case.section}")
def test_published_case(case: Case) -> None:
    outcome = answer(case)
    if isinstance(outcome, NotEntered):
        assert set(outcome.names) <= NOT_ENTERED, f"{case.formula}: {outcome.names} not listed"
    elif case.number in DEVIATIONS:
        agreed = not isinstance(outcome, Unsupported) and agrees(outcome, case.result)
        assert not agreed, "listed as a deviation, but it agrees"
    else:
        assert not isinstance(outcome, Unsupported), f"{case.formula}: {outcome}"
        assert agrees(outcome, case.result), f"{case.formula} gives {outcome}, not {case.result}"


class NotEntered(NamedTuple):
    """Functions of a case that are not entered."""

    names: tuple[str, ...]


def answer(case: Case) -> Value | Unsupported | NotEntered:
    """What xlroot makes of a case."""
    try:
        missing = unknown_functions(case)
        return NotEntered(tuple(missing)) if missing else shown(case)
    except Unsupported as refusal:
        return refusal


def test_the_small_group_is_entered() -> None:
    import json
    from pathlib import Path

    groups = json.loads(
        Path(__file__).with_name("openformula_groups.json").read_text(encoding="utf-8")
    )["groups"]["13"]
    database = {"DAVERAGE", "DCOUNT", "DCOUNTA", "DGET", "DMAX", "DMIN", "DPRODUCT", "DSTDEV"}
    database |= {"DSTDEVP", "DSUM", "DVAR", "DVARP"}
    missing = [
        name
        for name in groups["small"]
        if name not in database | KNOWN and functions.find(name) is None
    ]
    assert missing == []


def test_most_cases_are_run() -> None:
    run = [case for case in cases() if _runs(case)]
    assert len(run) >= 1200


def _runs(case: Case) -> bool:
    try:
        parse(case.formula)
    except FormulaError:
        return False
    try:
        return not unknown_functions(case)
    except Unsupported:
        return False
