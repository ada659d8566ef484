"""Covariance, correlation, discrete probabilities: documented values, numpy, properties."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from tests.functions.calls import call, cells, fault, number, row
from xlroot.errors import Unsupported
from xlroot.values import Fault, Operand

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED: list[tuple[str, tuple[Operand, ...], float, float]] = [
    ("COVAR", (row(3, 2, 4, 5, 6), row(9, 7, 12, 15, 17)), 5.2, 1e-15),
    ("COVARIANCE.P", (row(3, 2, 4, 5, 6), row(9, 7, 12, 15, 17)), 5.2, 1e-15),
    ("COVARIANCE.S", (row(2, 4, 8), row(5, 11, 12)), 9.666666667, 5e-10),
    ("CORREL", (row(3, 2, 4, 5, 6), row(9, 7, 12, 15, 17)), 0.997054486, 5e-10),
    ("PEARSON", (row(9, 7, 5, 3, 1), row(10, 6, 1, 5, 3)), 0.699379, 5e-7),
    ("FISHER", (0.75,), 0.9729551, 5e-8),
    ("FISHERINV", (0.972955,), 0.75, 5e-7),
    ("PROB", (row(0, 1, 2, 3), row(0.2, 0.3, 0.1, 0.4), 2.0), 0.1, 1e-15),
    ("PROB", (row(0, 1, 2, 3), row(0.2, 0.3, 0.1, 0.4), 1.0, 3.0), 0.8, 1e-15),
]


@pytest.mark.parametrize(("name", "arguments", "value", "within"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[Operand, ...], value: float, within: float) -> None:
    assert abs(number(name, *arguments) - value) <= within


PAIRS = st.lists(
    st.tuples(st.integers(-1000, 1000), st.integers(-1000, 1000)), min_size=3, max_size=25
)


@given(PAIRS)
def test_against_numpy(pairs: list[tuple[int, int]]) -> None:
    xs, ys = [float(x) for x, _ in pairs], [float(y) for _, y in pairs]
    assume(len(set(xs)) > 1 and len(set(ys)) > 1)
    covariance = float(np.cov(xs, ys)[0, 1])
    assert number("COVARIANCE.S", row(*xs), row(*ys)) == pytest.approx(covariance, abs=1e-7)
    correlation = float(np.corrcoef(xs, ys)[0, 1])
    found = number("CORREL", row(*xs), row(*ys))
    assert found == pytest.approx(correlation, abs=1e-12)
    assert number("CORREL", row(*ys), row(*xs)) == pytest.approx(found, rel=1e-14, abs=1e-16)
    assert number("CORREL", row(*xs), row(*xs)) == 1.0
    assert number("CORREL", row(*xs), row(*(-x for x in xs))) == -1.0


@given(st.floats(-0.999, 0.999))
def test_fisher_pairs(r: float) -> None:
    assert number("FISHERINV", number("FISHER", r)) == pytest.approx(r, rel=1e-13, abs=1e-300)


def test_extreme_sizes() -> None:
    tiny, vast = row(1e-160, 2e-160, 4e-160), row(1e150, 2e150, 4e150)
    assert number("CORREL", vast, vast) == pytest.approx(1.0, rel=1e-14)
    assert number("CORREL", tiny, vast) == pytest.approx(1.0, rel=1e-3)


def test_which_pairs_count() -> None:
    xs, ys = cells(1, 2, "x", 3, None), cells(2, 4, 5, 6, 9)
    assert number("CORREL", xs, ys) == 1.0
    assert fault("CORREL", row(1, 2), row(1, 2, 3)) == "#N/A"
    assert fault("CORREL", row(1, 1), row(1, 2)) == "#DIV/0!"
    assert fault("CORREL", 1, 2) == "#DIV/0!"
    assert fault("COVAR", cells("x"), cells("y")) == "#DIV/0!"
    assert fault("COVARIANCE.S", 1, 2) == "#DIV/0!"
    assert fault("COVAR", cells(1, Fault.REF), cells(1, 2)) == "#REF!"
    assert fault("FISHER", 1.0) == "#NUM!"


def test_probabilities_are_checked() -> None:
    values = row(0, 1, 2)
    assert number("PROB", values, row(0.25, 0.5, 0.25), 5.0) == 0.0
    assert fault("PROB", values, row(0.25, 0.5, 0.2), 1.0) == "#NUM!"
    assert fault("PROB", values, row(-0.25, 1.0, 0.25), 1.0) == "#NUM!"
    assert fault("PROB", values, row(0.5, 0.5), 1.0) == "#N/A"
    with pytest.raises(Unsupported, match="is 0"):
        call("PROB", values, row(0.5, 0.5, 0.0), 1.0)
