"""Order in a sample: documented values, numpy, properties."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.functions.calls import call, cells, fault, number, row
from xlroot.errors import Unsupported
from xlroot.values import Fault, Grid

RANKED = row(13, 12, 11, 8, 4, 3, 2, 1, 1, 1)
TIED = row(1, 2, 3, 6, 6, 6, 7, 8, 9)
ELEVEN = row(6, 7, 15, 36, 39, 40, 41, 42, 43, 47, 49)
TEMPERATURES = row(89, 88, 92, 101, 94, 97, 95)

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED = [
    ("LARGE", (row(3, 5, 3, 5, 4, 2, 4, 6, 7, 4), 3), 5.0),
    ("LARGE", (row(3, 5, 3, 5, 4, 2, 4, 6, 7, 4), 7), 4.0),
    ("SMALL", (row(3, 4, 5, 2, 3, 4, 6, 4, 7), 4), 4.0),
    ("SMALL", (row(1, 4, 8, 3, 7, 12, 54, 8, 23), 2), 3.0),
    ("MEDIAN", (1, 2, 3, 4, 5), 3.0),
    ("MEDIAN", (1, 2, 3, 4, 5, 6), 3.5),
    ("MODE", (row(5.6, 4, 4, 3, 2, 4),), 4.0),
    ("RANK", (3.5, row(7, 3.5, 3.5, 1, 2), 1), 3.0),
    ("RANK", (7, row(7, 3.5, 3.5, 1, 2), 1), 5.0),
    ("RANK.EQ", (7, row(7, 3.5, 3.5, 1, 2)), 1.0),
    ("RANK.AVG", (94, TEMPERATURES), 4.0),
    ("RANK.AVG", (3.5, row(7, 3.5, 3.5, 1, 2)), 2.5),
    ("PERCENTILE", (row(1, 3, 2, 4), 0.3), 1.9),
    ("PERCENTILE.EXC", (row(1, 2, 3, 6, 6, 6, 7, 8, 9), 0.25), 2.5),
    ("QUARTILE", (row(1, 2, 4, 7, 8, 9, 10, 12), 1), 3.5),
    ("QUARTILE.EXC", (ELEVEN, 1), 15.0),
    ("QUARTILE.EXC", (ELEVEN, 3), 43.0),
    ("PERCENTRANK", (RANKED, 2), 0.333),
    ("PERCENTRANK", (RANKED, 4), 0.555),
    ("PERCENTRANK", (RANKED, 8), 0.666),
    ("PERCENTRANK", (RANKED, 5), 0.583),
    ("PERCENTRANK.EXC", (TIED, 7), 0.7),
    ("PERCENTRANK.EXC", (TIED, 5.43), 0.381),
    ("PERCENTRANK.EXC", (TIED, 5.43, 1), 0.3),
]


@pytest.mark.parametrize(("name", "arguments", "value"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Grid | float, ...], value: float) -> None:
    assert number(name, *arguments) == pytest.approx(value, rel=1e-15)


def test_frequency_documented() -> None:
    # Excel's documentation, from memory.
    scores = cells(79, 85, 78, 85, 50, 81, 95, 88, 97)
    assert call("FREQUENCY", scores, cells(70, 79, 89)) == Grid(((1.0,), (2.0,), (4.0,), (2.0,)))


def test_frequency_of_odd_bins() -> None:
    data = cells(1, 2, 2, 3, "x", None, 7)
    assert call("FREQUENCY", data, cells(3, 1)) == Grid(((3.0,), (1.0,), (1.0,)))
    assert call("FREQUENCY", data, cells(2, 2)) == Grid(((3.0,), (0.0,), (2.0,)))
    assert call("FREQUENCY", data, cells("x", None)) == Grid(((5.0,),))
    assert call("FREQUENCY", cells(1, Fault.DIV0), cells(1)) is Fault.DIV0
    assert call("FREQUENCY", cells(1), cells(Fault.NA)) is Fault.NA


SAMPLES = st.lists(st.integers(-1000, 1000).map(float), min_size=1, max_size=25)


@given(SAMPLES, st.floats(0.0, 1.0))
def test_percentile_against_numpy(sample: list[float], k: float) -> None:
    linear = float(np.percentile(sample, 100 * k, method="linear"))
    assert number("PERCENTILE.INC", row(*sample), k) == pytest.approx(linear, abs=1e-9)
    n = len(sample)
    if 1 / (n + 1) <= k <= n / (n + 1):
        weibull = float(np.percentile(sample, 100 * k, method="weibull"))
        assert number("PERCENTILE.EXC", row(*sample), k) == pytest.approx(weibull, abs=1e-9)
    else:
        assert fault("PERCENTILE.EXC", row(*sample), k) == "#NUM!"


@given(SAMPLES)
def test_ends_middle_and_order_agree(sample: list[float]) -> None:
    values, n = row(*sample), len(sample)
    assert number("PERCENTILE", values, 0) == min(sample) == number("SMALL", values, 1)
    assert number("PERCENTILE", values, 1) == max(sample) == number("LARGE", values, 1)
    assert number("MEDIAN", values) == number("QUARTILE", values, 2)
    assert [number("SMALL", values, k) for k in range(1, n + 1)] == sorted(sample)
    assert number("LARGE", values, n) == min(sample)


@given(SAMPLES)
def test_ranks_of_all_add_up(sample: list[float]) -> None:
    values, n = row(*sample), len(sample)
    ranks = [number("RANK.AVG", x, values) for x in sample]
    assert sum(ranks) == n * (n + 1) / 2
    for x in sample:
        up, down = number("RANK.AVG", x, values, 1), number("RANK.AVG", x, values, 0)
        assert up + down == n + 1


@given(st.lists(st.integers(-1000, 1000), min_size=3, max_size=25, unique=True), st.integers(0, 24))
def test_percent_rank_undoes_percentile(sample: list[int], place: int) -> None:
    values = row(*sample)
    part = (place % len(sample)) / (len(sample) - 1)
    x = number("PERCENTILE", values, part)
    assert number("PERCENTRANK", values, x, 9) == pytest.approx(part, abs=1.1e-9)


def test_percent_rank_cuts_decimals_exactly() -> None:
    # 29/100 has a binary neighbour below it; its two decimals are 0.29 all the same.
    assert number("PERCENTRANK", row(*range(101)), 29, 2) == 0.29
    assert number("PERCENTRANK", row(0.1, 0.2, 0.3), 0.25, 2) == 0.75
    assert number("PERCENTRANK", row(7), 7) == 1.0


def test_outside_the_domain() -> None:
    sample = row(1, 2, 3)
    assert fault("PERCENTILE", sample, 1.01) == "#NUM!"
    assert fault("PERCENTILE", cells("x"), 0.5) == "#NUM!"
    assert fault("QUARTILE", sample, 5) == "#NUM!"
    assert fault("QUARTILE.EXC", sample, 0) == "#NUM!"
    assert fault("QUARTILE.EXC", sample, 4) == "#NUM!"
    assert fault("LARGE", sample, 0) == "#NUM!"
    assert fault("SMALL", sample, 4) == "#NUM!"
    assert fault("PERCENTRANK", sample, 4) == "#N/A"
    assert fault("PERCENTRANK", sample, 2, 0) == "#NUM!"
    assert fault("RANK", 4, sample) == "#N/A"
    assert fault("MEDIAN", cells("x", None)) == "#NUM!"
    assert fault("MODE", sample) == "#N/A"
    assert fault("MODE", cells("x")) == "#N/A"
    assert fault("MEDIAN", cells(1, Fault.REF)) == "#REF!"


def test_quarters_are_cut() -> None:
    assert number("QUARTILE", ELEVEN, 1.9) == number("QUARTILE", ELEVEN, 1)


def test_refused_where_programs_choose_differently() -> None:
    with pytest.raises(Unsupported, match="equally frequent"):
        call("MODE", row(9, 1, 1, 9))
    assert number("MODE", row(1, 9, 9, 1)) == 1.0
    with pytest.raises(Unsupported, match="no whole number"):
        call("LARGE", row(1, 2, 3), 1.5)
