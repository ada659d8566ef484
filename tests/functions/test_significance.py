"""Intervals and tests: documented values, scipy.stats, properties."""

from __future__ import annotations

import pytest
import scipy.stats
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from tests.functions.calls import call, cells, fault, number, row
from xlroot.errors import Unsupported
from xlroot.values import Fault, Grid, Operand

FIRST = row(3, 4, 5, 8, 9, 1, 2, 4, 5)
SECOND = row(6, 19, 3, 2, 14, 4, 5, 17, 1)
ACTUAL = Grid(((58.0, 35.0), (11.0, 25.0), (10.0, 23.0)))
EXPECTED = Grid(((45.35, 47.65), (17.56, 18.44), (16.09, 16.91)))
TEN = row(3, 6, 7, 8, 6, 5, 4, 2, 1, 9)

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED: list[tuple[str, tuple[Operand, ...], float, float]] = [
    ("CONFIDENCE.NORM", (0.05, 2.5, 50.0), 0.692951912, 5e-10),
    ("CONFIDENCE", (0.05, 2.5, 50.0), 0.692951912, 5e-10),
    ("CONFIDENCE.T", (0.05, 1.0, 50.0), 0.284196855, 5e-10),
    ("Z.TEST", (TEN, 4.0), 0.090574, 5e-7),
    ("Z.TEST", (TEN, 6.0), 0.863043, 5e-7),
    ("T.TEST", (FIRST, SECOND, 2.0, 1.0), 0.196016, 5e-7),
    ("F.TEST", (row(6, 7, 9, 15, 21), row(20, 28, 31, 38, 40)), 0.64831785, 5e-9),
    ("CHISQ.TEST", (ACTUAL, EXPECTED), 0.000308192, 5e-10),
]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Operand, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


SAMPLES = st.lists(st.integers(-50, 50).map(float), min_size=4, max_size=12)


@settings(deadline=None)
@given(SAMPLES, SAMPLES)
def test_against_scipy(xs: list[float], ys: list[float]) -> None:
    assume(len(set(xs)) > 1 and len(set(ys)) > 1)
    a, b = row(*xs), row(*ys)
    like = float(scipy.stats.ttest_ind(xs, ys).pvalue)
    unlike = float(scipy.stats.ttest_ind(xs, ys, equal_var=False).pvalue)
    assert number("T.TEST", a, b, 2, 2) == pytest.approx(like, rel=1e-9)
    assert number("T.TEST", a, b, 2, 3) == pytest.approx(unlike, rel=1e-9)
    assert number("T.TEST", a, b, 1, 2) == pytest.approx(like / 2, rel=1e-9)
    pairs = min(len(xs), len(ys))
    differences = [x - y for x, y in zip(xs, ys, strict=False)]
    if len(set(differences)) > 1:
        paired = float(scipy.stats.ttest_rel(xs[:pairs], ys[:pairs]).pvalue)
        found = number("T.TEST", row(*xs[:pairs]), row(*ys[:pairs]), 2, 1)
        assert found == pytest.approx(paired, rel=1e-9)
    assert number("F.TEST", a, b) == pytest.approx(number("F.TEST", b, a), rel=1e-12)


def test_chi_square_of_one_line() -> None:
    found = number("CHITEST", row(10, 20, 30), row(15, 15, 30))
    exact = float(scipy.stats.chisquare([10, 20, 30], [15, 15, 30]).pvalue)
    assert found == pytest.approx(exact, rel=1e-12)


def test_z_test_with_a_known_deviation() -> None:
    # z = (5.1 - 4) / (2 / sqrt 10), from the mean of the ten.
    above = 1.0 - number("NORMSDIST", 1.1 * 10**0.5 / 2.0)
    assert number("ZTEST", TEN, 4, 2) == pytest.approx(above, rel=1e-12)


def test_like_variances_are_no_surprise() -> None:
    assert number("FTEST", row(1, 2, 3, 4), row(4, 3, 2, 1)) == pytest.approx(1.0, abs=1e-15)


def test_faults() -> None:
    assert fault("CONFIDENCE", 0, 1, 10) == "#NUM!"
    assert fault("CONFIDENCE", 0.05, 0, 10) == "#NUM!"
    assert fault("CONFIDENCE", 0.05, 1, 0.5) == "#NUM!"
    assert fault("CONFIDENCE.T", 0.05, 1, 1) == "#DIV/0!"
    assert fault("ZTEST", cells("x"), 4) == "#N/A"
    assert fault("ZTEST", row(3), 4) == "#DIV/0!"
    assert fault("ZTEST", row(3, 4), 4, 0) == "#NUM!"
    assert fault("TTEST", FIRST, row(1, 2), 2, 1) == "#N/A"
    assert fault("TTEST", FIRST, SECOND, 3, 1) == "#NUM!"
    assert fault("TTEST", FIRST, SECOND, 1, 4) == "#NUM!"
    assert fault("TTEST", row(1), row(2), 1, 3) == "#DIV/0!"
    assert fault("TTEST", row(1, 2), row(2, 3), 1, 1) == "#DIV/0!"
    assert fault("FTEST", row(1, 1), row(1, 2)) == "#DIV/0!"
    assert fault("FTEST", row(1), row(1, 2)) == "#DIV/0!"
    assert fault("FTEST", cells(1, Fault.NAME), row(1, 2)) == "#NAME?"
    assert fault("CHITEST", row(1), row(1)) == "#N/A"
    assert fault("CHITEST", row(1, 2), row(1, 2, 3)) == "#N/A"
    assert fault("CHITEST", row(1, 2), row(0, 2)) == "#DIV/0!"
    assert fault("CHITEST", row(1, 2), row(-1, 2)) == "#NUM!"
    with pytest.raises(Unsupported, match="no number"):
        call("CHITEST", row(1, "x"), row(1, 2))
