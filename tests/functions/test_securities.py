"""Securities against published examples, the price equation and their own inverses."""

from __future__ import annotations

import datetime
from calendar import monthrange

import pytest
from hypothesis import given
from hypothesis import strategies as st

from xlroot.errors import Unsupported
from xlroot.functions import bonds, coupons, discount
from xlroot.functions.entry import entries_of
from xlroot.values import Fault, Operand

ENTRIES = {
    entry.name: entry for module in (bonds, coupons, discount) for entry in entries_of(module)
}


def day(text: str) -> float:
    return float((datetime.date.fromisoformat(text) - datetime.date(1899, 12, 30)).days)


def call(name: str, *arguments: float | str) -> Operand:
    return ENTRIES[name].rule(
        *(day(each) if isinstance(each, str) else float(each) for each in arguments)
    )


# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED = [
    ("DISC", ("2007-01-25", "2007-06-15", 97.975, 100, 1), 0.052420213, 5e-10),
    ("INTRATE", ("2008-02-15", "2008-05-15", 1e6, 1014420, 2), 0.05768, 5e-6),
    ("RECEIVED", ("2008-02-15", "2008-05-15", 1e6, 0.0575, 2), 1014584.65, 5e-3),
    ("PRICEDISC", ("2008-02-16", "2008-03-01", 0.0525, 100, 2), 99.79583, 5e-6),
    ("YIELDDISC", ("2008-02-16", "2008-03-01", 99.795, 100, 2), 0.052822572, 5e-10),
    ("PRICEMAT", ("2008-02-15", "2008-04-13", "2007-11-11", 0.061, 0.061, 0), 99.98449888, 5e-9),
    (
        "YIELDMAT",
        ("2008-03-15", "2008-11-03", "2007-11-08", 0.0625, 100.0123, 0),
        0.060954333,
        1e-9,
    ),
    ("TBILLEQ", ("2008-03-31", "2008-06-01", 0.0914), 0.09415149, 5e-9),
    ("TBILLPRICE", ("2008-03-31", "2008-06-01", 0.09), 98.45, 5e-9),
    ("TBILLYIELD", ("2008-03-31", "2008-06-01", 98.45), 0.09141696, 5e-9),
    ("PRICE", ("2008-02-15", "2017-11-15", 0.0575, 0.065, 100, 2, 0), 94.63436162, 5e-9),
    ("YIELD", ("2008-02-15", "2016-11-15", 0.0575, 95.04287, 100, 2, 0), 0.065, 5e-8),
    ("DURATION", ("2008-01-01", "2016-01-01", 0.08, 0.09, 2, 1), 5.993775, 5e-7),
    ("MDURATION", ("2008-01-01", "2016-01-01", 0.08, 0.09, 2, 1), 5.73567, 5e-6),
    ("COUPDAYBS", ("2011-01-25", "2011-11-15", 2, 1), 71, 0),
    ("COUPDAYS", ("2011-01-25", "2011-11-15", 2, 1), 181, 0),
    ("COUPDAYSNC", ("2011-01-25", "2011-11-15", 2, 1), 110, 0),
    ("COUPNCD", ("2011-01-25", "2011-11-15", 2, 1), day("2011-05-15"), 0),
    ("COUPPCD", ("2011-01-25", "2011-11-15", 2, 1), day("2010-11-15"), 0),
    ("COUPNUM", ("2007-01-25", "2008-11-15", 2, 1), 4, 0),
    ("ACCRINTM", ("2008-04-01", "2008-06-15", 0.1, 1000, 3), 20.54794521, 5e-9),
    ("ACCRINT", ("2008-03-01", "2008-08-31", "2008-05-01", 0.1, 1000, 2, 0), 16.666667, 5e-7),
]

# OpenFormula (OASIS, draft of 2010-01-19), published expressions and results.
PUBLISHED = [
    ("DISC", ("2004-02-29", "2009-01-01", 95000, 100000, 0), 0.010339, 1e-6),
    ("DISC", ("2004-02-29", "2009-01-01", 95000, 100000, 4), 0.010333, 1e-6),
    ("PRICE", ("1990-06-01", "1995-12-31", 0.03, 0.05, 100, 4, 0), 90.312119456, 1e-9),
    ("PRICE", ("1990-06-01", "1995-12-31", 0.02, 0.015, 100, 2, 1), 102.666400550, 1e-9),
    ("PRICE", ("1990-06-01", "1995-12-31", 0.03, 0.05, 1000, 1, 3), 775.822460005, 1e-9),
    ("PRICE", ("1990-06-01", "1995-12-31", 0.02, 0.015, 1000, 4, 4), 930.530797527, 1e-9),
    ("MDURATION", ("2004-02-01", "2004-05-31", 0.08, 0.09, 2, 1), 0.313750098, 1e-9),
    ("MDURATION", ("2004-05-31", "2004-06-01", 0.08, 0.09, 2, 4), 0.002658161, 1e-9),
    ("ACCRINT", ("1992-12-01", "1993-06-01", "1993-07-01", 0.055, 100, 2, 0), 3.208333, 1e-6),
    ("ACCRINT", ("2001-02-28", "2001-08-31", "2001-05-01", 0.1, 1000, 2, 0), 16.944444, 1e-6),
    ("PRICEMAT", ("1990-06-01", "1995-12-31", "1990-01-01", 0.06, 0.05, 4), 103.817732653, 1e-9),
    ("TBILLEQ", ("1996-01-01", "1996-02-01", 0.05), 0.050913656, 1e-9),
]


@pytest.mark.parametrize(("name", "arguments", "expected", "within"), DOCUMENTED + PUBLISHED)
def test_examples(
    name: str, arguments: tuple[float | str, ...], expected: float, within: float
) -> None:
    assert call(name, *arguments) == pytest.approx(expected, abs=within, rel=0)


DAYS = st.integers(int(day("1950-01-01")), int(day("2080-01-01")))
FREQUENCY = st.sampled_from([1.0, 2.0, 4.0])


@given(DAYS, st.integers(1, 12000), FREQUENCY)
def test_coupon_dates_surround_the_settlement(bought: int, ahead: int, frequency: float) -> None:
    settlement, maturity = float(bought), float(bought + ahead)
    previous = call("COUPPCD", settlement, maturity, frequency)
    following = call("COUPNCD", settlement, maturity, frequency)
    assert isinstance(previous, float)
    assert isinstance(following, float)
    assert previous <= settlement < following <= maturity
    origin = datetime.date(1899, 12, 30)
    due = origin + datetime.timedelta(days=int(maturity))
    for serial in (previous, following):
        found = origin + datetime.timedelta(days=int(serial))
        last = monthrange(found.year, found.month)[1]
        at_end = due.day == monthrange(due.year, due.month)[1]
        assert found.day == (last if at_end else min(due.day, last))
        assert (due.month - found.month) % (12 / frequency) == 0
    gone, left = (
        call(name, settlement, maturity, frequency, 1.0) for name in ("COUPDAYBS", "COUPDAYSNC")
    )
    assert gone + left == call("COUPDAYS", settlement, maturity, frequency, 1.0)  # type: ignore[operator]


@given(
    DAYS,
    st.integers(5, 12000),
    st.floats(0.0, 0.2),
    st.floats(1e-5, 0.3),
    FREQUENCY,
    st.sampled_from([1.0, 2.0, 3.0, 4.0]),
)
def test_yield_undoes_price(
    bought: int, ahead: int, coupon: float, yearly: float, frequency: float, basis: float
) -> None:
    dates = float(bought), float(bought + ahead)
    price = call("PRICE", *dates, coupon, yearly, 100.0, frequency, basis)
    assert isinstance(price, float)
    if price <= 0.0:
        return
    found = call("YIELD", *dates, coupon, price, 100.0, frequency, basis)
    if found is not Fault.NUM and found is not Fault.DIV0:
        # Over a few days the yield is ill conditioned: an ulp of the price counts per day.
        assert found == pytest.approx(yearly, rel=1e-9, abs=1e-11 * max(1.0, 365 / ahead))
    else:
        assert ahead < 40
        assert basis == 4.0


def test_a_price_is_the_sum_of_its_flows() -> None:
    """Ten whole half years at 6 % over a yield of 5 %, by the closed form of the annuity."""
    half = 1.025**-10
    expected = 3.0 * (1.0 - half) / 0.025 + 100.0 * half
    price = call("PRICE", "2010-03-15", "2015-03-15", 0.06, 0.05, 100, 2, 1)
    assert price == pytest.approx(expected, rel=1e-14)


def test_dates_are_cut_to_whole_days() -> None:
    assert call("COUPNUM", day("2007-01-25") + 0.9, day("2008-11-15") + 0.2, 2.7, 1.2) == 4.0


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("COUPNCD", ("2007-01-01", "2007-01-01", 1, 1)),
        ("COUPPCD", ("2007-01-01", "2004-01-01", 1, 1)),
        ("COUPNUM", ("2004-01-01", "2007-01-01", 3)),
        ("COUPNUM", ("2004-01-01", "2007-01-01", 2, 5)),
        ("INTRATE", ("2002-06-08", "1995-10-05", 1e5, 2e5, 0)),
        ("INTRATE", ("1995-10-05", "2002-06-08", 1e5, 2e5, 50)),
        ("DISC", ("2006-01-01", "2005-07-01", 95, 100, 3)),
        ("PRICE", ("1990-06-01", "1995-12-31", -0.03, 0.05, 100, 2)),
        ("PRICE", ("1990-06-01", "1995-12-31", 0.03, 0.05, 0, 2)),
        ("RECEIVED", ("2000-01-01", "2020-01-01", 100, 0.06, 3)),
        ("TBILLPRICE", ("1996-01-01", "1997-02-01", 0.05)),
        ("TBILLPRICE", ("1996-01-01", "1996-02-01", 0)),
        ("ACCRINT", ("2004-02-01", "2004-04-01", "2004-01-01", 0.1, 1000, 4, 2)),
    ],
)
def test_what_cannot_be(name: str, arguments: tuple[float | str, ...]) -> None:
    assert call(name, *arguments) is Fault.NUM


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("INTRATE", ("1995-10-05", "2002-06-08", 1e5, 2e5, 1)),
        ("DISC", ("2007-10-01", "2008-04-01", 95, 100, 1)),
        ("TBILLEQ", ("1996-01-01", "1996-12-01", 0.05)),
        ("ACCRINT", ("2004-02-01", "2004-04-01", "2004-05-01", 0.1, 1000, 4, 1)),
        ("ACCRINT", ("2004-02-01", "2004-04-01", "2004-05-01", 0.1, 1000, 4, 2, 0)),
        ("COUPDAYBS", ("2011-03-05", "2013-08-31", 2, 0)),
        ("COUPNUM", (20.0, "2007-01-01", 2)),
    ],
)
def test_where_hosts_differ_it_is_refused(name: str, arguments: tuple[float | str, ...]) -> None:
    with pytest.raises(Unsupported):
        call(name, *arguments)
