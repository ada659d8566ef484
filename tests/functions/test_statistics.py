"""Means, spread and shape: documented values, exact fractions, properties."""

from __future__ import annotations

import math
import statistics as standard
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.functions.calls import cells, fault, number, row
from xlroot.values import Fault, Grid

STRENGTHS = row(1345, 1301, 1368, 1322, 1310, 1370, 1318, 1350, 1303, 1299)
SHAPED = row(3, 4, 5, 2, 3, 4, 5, 6, 4, 7)
SEVEN = row(4, 5, 8, 7, 11, 4, 3)

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED = [
    ("STDEV.S", STRENGTHS, 27.46391572, 5e-9),
    ("STDEV", STRENGTHS, 27.46391572, 5e-9),
    ("STDEV.P", STRENGTHS, 26.05455814, 5e-9),
    ("VAR.S", STRENGTHS, 754.26667, 5e-6),
    ("VAR.P", STRENGTHS, 678.84, 5e-9),
    ("AVEDEV", row(4, 5, 6, 7, 5, 4, 3), 1.020408, 5e-7),
    ("DEVSQ", SEVEN, 48.0, 0.0),
    ("GEOMEAN", SEVEN, 5.476986970, 5e-9),
    ("HARMEAN", SEVEN, 5.028375962, 5e-9),
    ("SKEW", SHAPED, 0.359543071, 5e-10),
    ("SKEW.P", SHAPED, 0.303193339, 5e-9),
    ("KURT", SHAPED, -0.151799637, 5e-10),
]


@pytest.mark.parametrize(("name", "sample", "value", "within"), DOCUMENTED)
def test_documented(name: str, sample: Grid, value: float, within: float) -> None:
    assert abs(number(name, sample) - value) <= within


def test_trimmed_mean_documented() -> None:
    # Excel's documentation, from memory.
    assert number("TRIMMEAN", row(4, 5, 6, 7, 2, 3, 4, 5, 1, 2, 3), 0.2) == pytest.approx(
        3.778, abs=5e-4
    )


def test_trimmed_mean_counts_by_decimals() -> None:
    # 0.58 of 100 is 58, though its binary product is just below.
    sample = row(*(k * k for k in range(100)))
    kept = [float(k * k) for k in range(29, 71)]
    assert number("TRIMMEAN", sample, 0.58) == pytest.approx(math.fsum(kept) / 42, rel=1e-15)
    assert fault("TRIMMEAN", sample, 1.0) == "#NUM!"
    assert fault("TRIMMEAN", sample, -0.1) == "#NUM!"
    assert number("TRIMMEAN", sample, 0.0) == number("AVERAGE", sample)


SAMPLES = st.lists(
    st.floats(-1e6, 1e6, allow_subnormal=False).map(lambda x: round(x, 3)), min_size=4, max_size=30
)


@given(SAMPLES, st.floats(-1e9, 1e9))
def test_variance_against_fractions(sample: list[float], offset: float) -> None:
    moved = [x + offset for x in sample]
    exact = standard.variance([Fraction(x) for x in moved])
    found = number("VAR.S", row(*moved))
    largest = max(abs(x) for x in moved)
    assert found == pytest.approx(float(exact), rel=1e-12, abs=1e-30 * largest * largest)
    assert number("STDEV.S", row(*moved)) == math.sqrt(found)
    n = len(moved)
    assert number("VAR.P", row(*moved)) == pytest.approx(found * (n - 1) / n, rel=1e-14)
    assert number("DEVSQ", row(*moved)) == pytest.approx(found * (n - 1), rel=1e-14)


def test_large_values_with_a_small_spread() -> None:
    # NIST StRD, data set NumAcc4 in miniature: 10000000.1, .2, .3; the exact deviation is 0.1.
    sample = row(10000000.2, *([10000000.1, 10000000.3] * 500))
    exact = standard.pstdev([Fraction(x) for x in sample.rows[0] if isinstance(x, float)])
    assert number("STDEV.P", sample) == pytest.approx(float(exact), rel=1e-14)


@given(st.floats(0.001, 1e6), st.integers(4, 40))
def test_equal_numbers_have_no_spread(x: float, count: int) -> None:
    sample = row(*([x] * count))
    assert number("STDEV", sample) == 0.0
    assert fault("SKEW", sample) == "#DIV/0!"
    assert fault("KURT", sample) == "#DIV/0!"
    assert number("GEOMEAN", sample) == pytest.approx(x, rel=1e-14)


@given(st.lists(st.floats(1e-3, 1e3), min_size=1, max_size=20))
def test_means_lie_in_order(sample: list[float]) -> None:
    values = row(*sample)
    slack = 1 + 1e-13
    assert number("HARMEAN", values) <= number("GEOMEAN", values) * slack
    assert number("GEOMEAN", values) <= number("AVERAGE", values) * slack


def test_geometric_mean_neither_overflows_nor_underflows() -> None:
    assert number("GEOMEAN", row(1e300, 1e300, 1e300)) == pytest.approx(1e300, rel=1e-14)
    assert number("GEOMEAN", row(1e-300, 1e300)) == pytest.approx(1.0, rel=1e-14)
    assert number("GEOMEAN", *([1e-200] * 50)) == pytest.approx(1e-200, rel=1e-14)


def test_which_values_count() -> None:
    mixed = cells(2, "x", True, None, 4)
    assert number("VAR", mixed) == 2.0
    assert number("VARA", mixed) == pytest.approx(standard.variance([2.0, 0.0, 1.0, 4.0]))
    assert number("STDEVPA", mixed) == pytest.approx(standard.pstdev([2.0, 0.0, 1.0, 4.0]))
    assert number("VAR", 2, True, "4") == pytest.approx(standard.variance([2.0, 1.0, 4.0]))
    assert fault("VAR", 2, "x") == "#VALUE!"
    assert fault("STDEV", cells(1, Fault.NA, 3)) == "#N/A"


def test_too_few_numbers() -> None:
    empty = cells("x", None)
    for name in ("VAR", "VARP", "STDEV", "STDEVP", "SKEW", "KURT"):
        assert fault(name, empty) == "#DIV/0!"
    for name in ("DEVSQ", "AVEDEV", "GEOMEAN", "HARMEAN"):
        assert fault(name, empty) == "#NUM!"
    assert fault("VAR", 5) == "#DIV/0!"
    assert number("VARP", 5) == 0.0
    assert fault("SKEW", 1, 2) == "#DIV/0!"
    assert fault("KURT", 1, 2, 4) == "#DIV/0!"
    assert fault("GEOMEAN", 1, 0) == "#NUM!"
    assert fault("HARMEAN", 1, -2) == "#NUM!"
    assert fault("VAR", 1e300, -1e300) == "#NUM!"


def test_standardize() -> None:
    # Excel's documentation, from memory.
    assert number("STANDARDIZE", 42, 40, 1.5) == pytest.approx(1.333333333, abs=5e-10)
    assert fault("STANDARDIZE", 1, 1, 0) == "#NUM!"
