"""Net present value and internal rate of return against published examples and numpy-financial."""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy_financial
import pytest
from hypothesis import given
from hypothesis import strategies as st

from xlroot.cells import Block
from xlroot.errors import Unsupported
from xlroot.functions.cashflow import irr, mirr, npv, xirr, xnpv
from xlroot.values import Fault, Grid, Value


def column(*values: Value) -> Grid:
    return Grid(tuple((value,) for value in values), Block("Sheet1", 1, 1, len(values), 1))


def flows(*values: float) -> Grid:
    return column(*map(float, values))


PLANT = flows(-70000, 12000, 15000, 18000, 21000, 26000)
DATED = flows(-10000, 2750, 4250, 3250, 2750)
# 2008-01-01, 2008-03-01, 2008-10-30, 2009-02-15, 2009-04-01
DATES = flows(39448, 39508, 39751, 39859, 39904)


def test_documented_examples() -> None:
    """Excel's documentation, from memory, to the digits that it prints."""
    assert npv.rule(0.1, -10000.0, 3000.0, 4200.0, 6800.0) == pytest.approx(1188.44, abs=5e-3)
    later = flows(8000, 9200, 10000, 12000, 14500)
    assert npv.rule(0.08, later) == pytest.approx(41922.06, abs=5e-3)
    assert irr.rule(Grid(PLANT.rows[:5])) == pytest.approx(-0.021, abs=5e-4)
    assert irr.rule(PLANT) == pytest.approx(0.0866, abs=5e-5)
    assert irr.rule(Grid(PLANT.rows[:3]), -0.1) == pytest.approx(-0.444, abs=5e-4)
    boats = flows(-120000, 39000, 30000, 21000, 37000, 46000)
    assert mirr.rule(boats, 0.1, 0.12) == pytest.approx(0.1261, abs=5e-5)
    assert mirr.rule(boats, 0.1, 0.14) == pytest.approx(0.1348, abs=5e-5)
    assert mirr.rule(Grid(boats.rows[:4]), 0.1, 0.12) == pytest.approx(-0.0480, abs=5e-5)
    assert xnpv.rule(0.09, DATED, DATES) == pytest.approx(2086.647602, abs=5e-6)
    assert xirr.rule(DATED, DATES, 0.1) == pytest.approx(0.373362535, abs=5e-9)


def test_published_by_openformula() -> None:
    """OASIS, draft of 2010-01-19."""
    assert npv.rule(1.0, 4.0, 5.0, 7.0) == 4.125


INCOME = st.lists(st.floats(0.0, 1e5), min_size=1, max_size=40).filter(lambda x: max(x) > 100.0)


@given(st.floats(100.0, 1e5), INCOME)
def test_irr_is_the_zero_of_npv(outlay: float, income: list[float]) -> None:
    values = [-outlay, *income]
    rate = irr.rule(flows(*values))
    assert isinstance(rate, float)
    worth = math.fsum(v * (1.0 + rate) ** -k for k, v in enumerate(values))
    size = math.fsum(abs(v) * (k + 1) * (1.0 + rate) ** -k for k, v in enumerate(values))
    assert abs(worth) <= 1e-12 * size


@given(st.floats(0.001, 0.3), st.floats(0.001, 0.3), INCOME)
def test_mirr_matches_numpy_financial(finance: float, reinvest: float, income: list[float]) -> None:
    values = [-1000.0, *income, -20.0]
    expected = float(numpy_financial.mirr(values, finance, reinvest))
    assert mirr.rule(flows(*values), finance, reinvest) == pytest.approx(expected, abs=1e-11)


@given(st.floats(-0.5, 2.0), st.integers(1, 30))
def test_a_single_payment_gives_its_rate(rate: float, years: int) -> None:
    grown = 1000.0 * (1.0 + rate) ** years
    found = irr.rule(flows(-1000.0, *[0.0] * (years - 1), grown))
    assert found == pytest.approx(rate, rel=1e-12, abs=1e-13)


@given(st.floats(-0.5, 2.0), st.integers(40, 4000))
def test_a_single_dated_payment_gives_its_rate(rate: float, days: int) -> None:
    grown = 1000.0 * (1.0 + rate) ** (days / 365.0)
    found = xirr.rule(flows(-1000.0, grown), flows(40000.25, 40000.75 + days))
    assert found == pytest.approx(rate, rel=1e-11, abs=1e-12)


def test_of_several_rates_the_guess_decides() -> None:
    """-1000 + 2500/(1+r) - 1540/(1+r)²: rates of 10 and 40 per cent (own example)."""
    values = flows(-1000, 2500, -1540)
    assert irr.rule(values, 0.05) == pytest.approx(0.1, abs=1e-12)
    assert irr.rule(values, 0.5) == pytest.approx(0.4, abs=1e-12)


def test_a_guess_from_which_tangents_lead_astray() -> None:
    values = flows(-1, 0, 0, 0, 0, 0, 0, 1e6)
    assert irr.rule(values) == pytest.approx(1e6 ** (1 / 7) - 1, rel=1e-13)
    assert irr.rule(values, -0.99) == pytest.approx(1e6 ** (1 / 7) - 1, rel=1e-13)


def test_what_does_not_count() -> None:
    mixed = column(-100.0, "text", None, True, 110.0)
    assert irr.rule(mixed) == pytest.approx(0.1, abs=1e-14)
    assert npv.rule(0.1, mixed) == pytest.approx(-100 / 1.1 + 110 / 1.21)
    assert irr.rule(column(-100.0, Fault.REF, 110.0)) is Fault.REF


def test_what_has_no_rate() -> None:
    assert irr.rule(flows(100, 110)) is Fault.NUM
    assert irr.rule(flows(-100, -110)) is Fault.NUM
    assert irr.rule(column("x")) is Fault.NUM
    assert irr.rule(flows(1000, -1500, 1000)) is Fault.NUM
    assert irr.rule(PLANT, -2.0) is Fault.NUM
    assert mirr.rule(flows(100, 110), 0.1, 0.1) is Fault.DIV0
    assert npv.rule(-1.0, 5.0) is Fault.DIV0


def test_dated_flows_that_do_not_fit() -> None:
    assert xnpv.rule(0.1, DATED, flows(39448, 39508)) is Fault.NUM
    assert xnpv.rule(0.1, flows(-5, 7), flows(39448, 39000)) is Fault.NUM
    assert xnpv.rule(0.1, flows(-5, 7), column(39448.0, "soon")) is Fault.VALUE
    assert xnpv.rule(0.1, flows(-5, 7), column(39448.0, Fault.NA)) is Fault.NA
    assert xirr.rule(flows(5, 7), flows(39448, 39500)) is Fault.NUM
    refusals: list[Callable[[], object]] = [
        lambda: xnpv.rule(-0.1, DATED, DATES),
        lambda: xnpv.rule(0.1, flows(-5, 7), column(39448.0, None)),
        lambda: xirr.rule(flows(0, -5, 7), flows(1000, 1001, 1002)),
        lambda: npv.rule(0.1, "5"),
    ]
    for refused in refusals:
        with pytest.raises(Unsupported):
            refused()
