"""Lines and fits against published examples, certified data, scipy and numpy."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence

import numpy as np
import pytest
import scipy.stats
from hypothesis import given
from hypothesis import strategies as st

from xlroot.cells import Block
from xlroot.errors import Unsupported
from xlroot.functions.line import forecast, intercept, rsq, slope, steyx
from xlroot.functions.regression import growth, linest, logest, trend
from xlroot.values import Fault, Grid, Operand, Value


def row(*values: float) -> Grid:
    return Grid((tuple(map(float, values)),))


def column(*values: Value) -> Grid:
    return Grid(tuple((v,) for v in values), Block("Sheet1", 1, 1, len(values), 1))


def table(*columns: Sequence[float]) -> Grid:
    rows = tuple(tuple(map(float, each)) for each in zip(*columns, strict=True))
    return Grid(rows, Block("Sheet1", 1, 3, len(rows), 2 + len(columns)))


def rows(operand: Operand) -> list[list[Value]]:
    assert isinstance(operand, Grid), operand
    return [list(each) for each in operand.rows]


Y7, X7 = row(2, 3, 9, 1, 8, 7, 5), row(6, 5, 11, 7, 5, 4, 4)


def test_documented_lines() -> None:
    """Excel's documentation, from memory, to the digits that it prints."""
    assert slope.rule(Y7, X7) == pytest.approx(0.305556, abs=5e-7)
    assert rsq.rule(Y7, X7) == pytest.approx(0.05795, abs=5e-6)
    assert steyx.rule(Y7, X7) == pytest.approx(3.305719, abs=5e-7)
    assert intercept.rule(row(2, 3, 9, 1, 8), row(6, 5, 11, 7, 5)) == pytest.approx(
        0.0483871, abs=5e-8
    )
    assert forecast.rule(30.0, row(6, 7, 9, 15, 21), row(20, 28, 31, 38, 40)) == pytest.approx(
        10.607253, abs=5e-7
    )


OFFICES: list[list[float]] = [
    [2310, 2333, 2356, 2379, 2402, 2425, 2448, 2471, 2494, 2517, 2540],
    [2, 2, 3, 3, 2, 4, 2, 2, 3, 4, 2],
    [2, 2, 1.5, 2, 3, 2, 1.5, 2, 3, 4, 3],
    [20, 12, 33, 43, 53, 23, 99, 34, 23, 55, 22],
]
VALUES = [142e3, 144e3, 151e3, 150e3, 139e3, 169e3, 126e3, 142.9e3, 163e3, 169e3, 149e3]


def test_documented_fit_of_four_variables() -> None:
    """Excel's documentation of LINEST, from memory."""
    found = rows(linest.rule(column(*VALUES), table(*OFFICES), True, True))
    na = Fault.NA
    expected: list[list[Value]] = [
        [-234.2371645, 2553.21066, 12529.76817, 27.64138737, 52317.83051],
        [13.26801148, 530.6691519, 400.0668382, 5.429374042, 12237.3616],
        [0.996747993, 970.5784629, na, na, na],
        [459.7536742, 6.0, na, na, na],
        [1732393319.0, 5652135.316, na, na, na],
    ]
    for line, wanted in zip(found, expected, strict=True):
        for value, want in zip(line, wanted, strict=True):
            assert value is want if want is na else value == pytest.approx(want, rel=5e-9)
    turned = Grid(tuple(zip(*table(*OFFICES).rows, strict=True)))
    across = rows(linest.rule(row(*VALUES), turned, None, True))
    assert across == found


def test_documented_exponential_fit() -> None:
    """Excel's documentation of LOGEST and GROWTH, from memory."""
    units = column(33100.0, 47300.0, 69000.0, 102000.0, 150000.0, 220000.0)
    months = column(*map(float, range(11, 17)))
    found = rows(logest.rule(units, months, True, True))
    expected = [
        [1.46327563, 495.3047702],
        [0.002633403, 0.035834282],
        [0.99980862, 0.011016315],
        [20896.8011, 4.0],
        [2.53601883, 0.000485437],
    ]
    for line, wanted in zip(found, expected, strict=True):
        assert line == pytest.approx(wanted, rel=2e-6)
    ahead = rows(growth.rule(units, months, column(17.0, 18.0)))
    assert [each[0] for each in ahead] == pytest.approx([320196.718, 468536.054], rel=1e-8)


def test_documented_trend() -> None:
    """Excel's documentation of TREND, from memory."""
    costs = [133890, 135000, 135790, 137300, 138130, 139100, 139900, 141120, 141890, 143230, 144000]
    found = rows(trend.rule(column(*map(float, [*costs, 145290])), None, column(13.0, 14.0, 15.0)))
    assert [round(each[0]) for each in found] == [146172, 147190, 148208]  # type: ignore[arg-type]


def test_published_by_openformula() -> None:
    """OASIS, draft of 2010-01-19."""
    y, x = column(1.0, 2.0, 4.0, 8.0, 16.0), column(0.0, 5.0, 2.0, 5.0, 3.0)
    assert rows(growth.rule(y, x, 1.0)) == [[pytest.approx(2.51984210, abs=1e-8)]]
    assert rows(growth.rule(y, x, 1.0, False)) == [[pytest.approx(1.48599429, abs=1e-8)]]
    assert rows(trend.rule(y, x, 1.0)) == [[pytest.approx(4.755556, abs=1e-6)]]
    assert rows(trend.rule(y, x, 1.0, 0.0)) == [[pytest.approx(1.682540, abs=1e-6)]]
    assert steyx.rule(x, y) == pytest.approx(2.370953, abs=1e-6)


# NIST Statistical Reference Datasets, Norris (ozone monitors, 36 pairs of y and x), from memory;
# that the certified results come out shows that the memory is right.
NORRIS = """
0.1 0.2 338.8 337.4 118.1 118.2 888.0 884.6 9.2 10.1 228.1 226.5 668.5 666.3 998.5 996.3
449.1 448.6 778.9 777.0 559.2 558.2 0.3 0.4 0.1 0.6 778.1 775.5 668.8 666.9 339.3 338.0
448.9 447.5 10.8 11.6 557.7 556.0 228.3 228.1 998.0 995.8 888.8 887.6 119.6 120.2 0.3 0.3
0.6 0.3 557.6 556.8 339.3 339.1 888.0 887.2 998.5 999.0 778.9 779.0 10.2 11.1 117.6 118.3
228.9 229.2 668.4 669.1 449.2 448.9 0.2 0.5
"""


def test_certified_line() -> None:
    numbers = [float(each) for each in NORRIS.split()]
    y, x = column(*numbers[::2]), column(*numbers[1::2])
    found = rows(linest.rule(y, x, True, True))
    assert found[0] == pytest.approx([1.00211681802045, -0.262323073774029], rel=1e-12)
    assert found[1] == pytest.approx([0.000429796848199937, 0.232818234301152], rel=1e-12)
    assert found[2] == pytest.approx([0.999993745883712, 0.884796396144373], rel=1e-12)
    assert slope.rule(y, x) == pytest.approx(1.00211681802045, rel=1e-13)
    assert intercept.rule(y, x) == pytest.approx(-0.262323073774029, rel=1e-11)
    assert steyx.rule(y, x) == pytest.approx(0.884796396144373, rel=1e-12)


def test_certified_polynomial() -> None:
    """NIST Wampler1: y = 1 + x + x² + … + x⁵ at x = 0 … 20, every coefficient exactly 1."""
    xs = [float(x) for x in range(21)]
    powers = [[x**k for x in xs] for k in range(1, 6)]
    found = rows(linest.rule(column(*[sum(x**k for k in range(6)) for x in xs]), table(*powers)))
    assert found[0] == pytest.approx([1.0] * 6, abs=1e-7)


POINTS = st.lists(
    st.tuples(st.floats(-1e3, 1e3), st.floats(-1e3, 1e3)), min_size=4, max_size=30
).filter(lambda pairs: np.std([x for x, _ in pairs]) > 1.0 and np.std([y for _, y in pairs]) > 1.0)


@given(POINTS)
def test_lines_match_scipy(pairs: list[tuple[float, float]]) -> None:
    xs, ys = [x for x, _ in pairs], [y for _, y in pairs]
    theirs = scipy.stats.linregress(xs, ys)
    y, x = column(*ys), column(*xs)
    assert slope.rule(y, x) == pytest.approx(theirs.slope, rel=1e-9, abs=1e-11)
    assert intercept.rule(y, x) == pytest.approx(theirs.intercept, rel=1e-9, abs=1e-8)
    assert rsq.rule(y, x) == pytest.approx(theirs.rvalue**2, rel=1e-7, abs=1e-12)
    found = rows(linest.rule(y, x, True, True))
    assert found[0][0] == pytest.approx(theirs.slope, rel=1e-9, abs=1e-11)
    # scipy takes the residue as a difference, so that only the root of an ulp is left of it.
    noise = 1e-7 * float(np.std(ys) / np.std(xs))
    assert found[1][0] == pytest.approx(theirs.stderr, rel=1e-6, abs=noise)
    assert found[1][1] == pytest.approx(theirs.intercept_stderr, rel=1e-6, abs=noise * 1e3)
    at = forecast.rule(7.5, y, x)
    assert rows(trend.rule(y, x, 7.5))[0][0] == pytest.approx(at, rel=1e-9, abs=1e-8)


@given(st.integers(0, 10_000), st.booleans())
def test_many_variables_match_numpy(seed: int, constant: bool) -> None:
    random = np.random.default_rng(seed)
    x = random.normal(size=(15, 3)) * [1.0, 50.0, 0.01] + [0.0, 200.0, 1.0]
    y = random.normal(size=15) + 3.0
    matrix = np.column_stack([x, np.ones(15)]) if constant else x
    theirs = np.linalg.lstsq(matrix, y, rcond=None)[0]
    if not constant:
        theirs = np.append(theirs, 0.0)
    operand = table(*(list(each) for each in x.T))
    target = column(*map(float, y))
    found = rows(linest.rule(target, operand, constant, True))
    assert found[0] == pytest.approx([*theirs[2::-1], theirs[3]], rel=1e-7, abs=1e-9)
    freedom = 15 - matrix.shape[1]
    left = float(np.sum((y - matrix @ theirs[: matrix.shape[1]]) ** 2))
    spread = np.sqrt(np.diag(np.linalg.inv(matrix.T @ matrix)) * left / freedom)
    assert found[1][:3] == pytest.approx(list(spread[2::-1]), rel=1e-6)
    assert found[1][3] is Fault.NA if not constant else found[1][3] == pytest.approx(spread[3])
    assert found[3][1] == float(freedom)
    assert found[4][1] == pytest.approx(left, rel=1e-9)
    total = float(np.sum((y - y.mean()) ** 2 if constant else y**2))
    assert found[4][0] == pytest.approx(total - left, rel=1e-6, abs=1e-9)
    fitted = [each[0] for each in rows(trend.rule(target, operand, operand, constant))]
    assert fitted == pytest.approx(list(matrix @ theirs[: matrix.shape[1]]), rel=1e-8, abs=1e-8)


@given(st.floats(0.5, 2.0), st.floats(0.1, 100.0))
def test_growth_returns_what_grew(base: float, factor: float) -> None:
    xs = [0.0, 1.0, 2.5, 4.0]
    y = column(*[factor * base**x for x in xs])
    assert rows(logest.rule(y, column(*xs)))[0] == pytest.approx([base, factor], rel=1e-12)
    assert rows(growth.rule(y, column(*xs), 6.0))[0][0] == pytest.approx(factor * base**6)


def test_pairs_that_do_not_count() -> None:
    y, x = column(1.0, "x", 3.0, None, 5.0), column(2.0, 9.0, 6.0, 7.0, True)
    assert slope.rule(y, x) == 0.5
    assert slope.rule(column(1.0, Fault.NA), column(1.0, 2.0)) is Fault.NA


def test_data_that_fix_no_line() -> None:
    flat = column(3.0, 3.0, 3.0)
    rising = column(1.0, 2.0, 3.0)
    for rule in (slope, intercept, rsq, steyx):
        assert rule.rule(rising, flat) is Fault.DIV0
        assert rule.rule(rising, column(1.0, 2.0)) is Fault.NA
    assert rsq.rule(flat, rising) is Fault.DIV0
    assert steyx.rule(column(1.0, 2.0), column(1.0, 3.0)) is Fault.DIV0
    assert slope.rule(column("a"), column("b")) is Fault.DIV0
    assert slope.rule(column(1e308, -1e308), column(1e308, -1e308)) is Fault.NUM


def test_fits_that_cannot_be() -> None:
    y = column(1.0, 2.0, 4.0)
    assert linest.rule(column(1.0, "x", 4.0)) is Fault.VALUE
    assert linest.rule(column(1.0, Fault.REF, 4.0)) is Fault.REF
    assert linest.rule(y, column(1.0, 2.0)) is Fault.REF
    assert logest.rule(column(1.0, 0.0, 4.0)) is Fault.NUM
    assert trend.rule(y, table([1, 2, 3], [1, 4, 2]), row(1, 2, 3)) is Fault.REF
    assert linest.rule(y, None, "maybe") is Fault.VALUE
    refusals: list[Callable[[], object]] = [
        lambda: linest.rule(y, column(2.0, 2.0, 2.0)),
        lambda: linest.rule(column(1.0, 2.0, 4.0, 3.0), table([1, 2, 3, 5], [2, 4, 6, 10])),
        lambda: linest.rule(column(1.0, 2.0), None, True, True),
        lambda: linest.rule(column(1.0)),
    ]
    for refused in refusals:
        with pytest.raises(Unsupported):
            refused()


def test_a_constant_left_empty_is_kept_and_a_blank_cell_is_not() -> None:
    y, x = column(1.0, 9.0, 5.0, 7.0), column(0.0, 4.0, 2.0, 3.0)
    assert rows(linest.rule(y, x, None, False))[0] == pytest.approx([2.0, 1.0])
    blank = Grid(((None,),), Block("Sheet1", 9, 9, 9, 9))
    through = rows(linest.rule(y, x, blank))[0]
    assert through == pytest.approx([math.fsum((36, 10, 21)) / 29, 0.0])
