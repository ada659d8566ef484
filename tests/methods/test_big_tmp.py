"""What every method owes the driver, whatever the residual."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xlroot import methods
from xlroot.methods import Family, Method
from xlroot.nature import Nature
from xlroot.search import LIMIT, LIMIT_OPEN, Run, run
from xlroot.stopping import Outcome, Tolerance
from xlroot.values import Fault

ALL = sorted(set(methods.catalogue().values()), key=lambda method: method.name)
BRACKETING = [each for each in ALL if each.family is Family.BRACKETING]
OPEN = [each for each in ALL if each.family is Family.OPEN]

named = pytest.mark.parametrize("method", ALL, ids=lambda method: method.name)
bracketing = pytest.mark.parametrize("method", BRACKETING, ids=lambda method: method.name)
open_ones = pytest.mark.parametrize("method", OPEN, ids=lambda method: method.name)


class Counted:
    """A residual that keeps every x that it is asked for."""

    def __init__(self, f: Callable[[float], float]) -> None:
        self.f = f
        self.asked: list[float] = []

    def __call__(self, x: float) -> float | Fault:
        self.asked.append(x)
        try:
            y = self.f(x)
        except (ArithmeticError, ValueError):
            return Fault.NUM
        return y if math.isfinite(y) else Fault.NUM


def searched(method: Method, f: Callable[[float], float], low: float, high: float) -> Run:
    counted = Counted(f)
    found = run(method, counted, low, high, Tolerance(1e-9))
    assert found.evaluations == len(counted.asked)
    assert all(low <= x <= high for x in counted.asked)
    limit = LIMIT if method.family is Family.BRACKETING else LIMIT_OPEN
    assert found.iterations <= limit
    assert len(found.iterates) == len(found.samples) + len(found.ends)
    return found


@named
def test_a_contracting_residual_is_solved(method: Method) -> None:
    """g(x) - x with g = cos; the root is 0.7390851332151607 (the Dottie number, OEIS A003957)."""
    found = searched(method, lambda x: math.cos(x) - x, 0.0, 1.0)
    assert found.root == pytest.approx(0.7390851332151607, abs=1e-9)
    assert found.nature is Nature.ROOT
    assert found.enclosure is not None
    low, high, f_low, f_high = found.enclosure
    assert low <= 0.7390851332151607 <= high
    assert high - low <= 1e-9 * (1.0 + 1e-6)
    assert low == high or (f_low < 0.0) != (f_high < 0.0)


@bracketing
@pytest.mark.parametrize("scale", [1e-300, 1e-200, 1.0, 1e200, 1e300])
def test_the_size_of_the_residual_does_not_matter(method: Method, scale: float) -> None:
    found = searched(method, lambda x: scale * (math.exp(x) - 3.0), 0.0, 4.0)
    if method.name == "regula falsi" and found.outcome is Outcome.EXHAUSTED:
        return
    assert found.root == pytest.approx(math.log(3.0), abs=1e-9)
    assert found.nature is Nature.ROOT


@bracketing
@pytest.mark.parametrize("turn", [1.0, -1.0])
def test_the_direction_of_the_residual_does_not_matter(method: Method, turn: float) -> None:
    found = searched(method, lambda x: turn * (x**3 - 2.0), 0.0, 2.0)
    assert found.root == pytest.approx(2.0 ** (1.0 / 3.0), abs=1e-9)


@bracketing
def test_the_bracket_only_shrinks_and_always_holds_the_root(method: Method) -> None:
    found = searched(method, lambda x: math.tanh(x - 0.3) + 0.1 * x - 0.03, -2.0, 5.0)
    low, high = found.low, found.high
    for each in found.iterates:
        assert each.low is not None
        assert each.high is not None
        assert low <= each.low <= 0.3 <= each.high <= high
        low, high = each.low, each.high


@bracketing
def test_equal_signs_at_the_ends_end_the_search_before_it_begins(method: Method) -> None:
    found = searched(method, lambda x: x * x + 1.0, -1.0, 2.0)
    assert found.outcome is Outcome.UNBRACKETED
    assert found.evaluations == 2
    assert found.root is None


@bracketing
def test_a_root_at_an_end_is_the_answer(method: Method) -> None:
    for f in (lambda x: x - 1.0, lambda x: 4.0 - x):
        found = searched(method, f, 1.0, 4.0)
        assert found.outcome is Outcome.EXACT
        assert found.root in (1.0, 4.0)
        assert found.iterations == 0


@named
def test_a_fault_ends_the_search_and_is_kept(method: Method) -> None:
    def f(x: float) -> float:
        if 0.2 < x < 2.9:
            raise ZeroDivisionError
        return x - 1.5

    found = searched(method, f, 0.0, 3.0)
    assert found.outcome is Outcome.FAULTED
    assert found.fault is not None
    assert 0.2 < found.fault[0] < 2.9
    assert found.fault[1] is Fault.NUM
    assert found.root is None


@open_ones
def test_no_iterate_leaves_the_limits(method: Method) -> None:
    """The residual pushes every open method out of [0, 1]."""
    found = searched(method, lambda x: math.exp(x) + 1.0, 0.0, 1.0)
    assert found.outcome in (Outcome.ESCAPED, Outcome.STALLED, Outcome.DIVERGED)
    assert found.root is None


@open_ones
def test_a_double_root_has_no_sign_change_to_show(method: Method) -> None:
    found = searched(method, lambda x: -((x - 0.5) ** 2), 0.0, 1.2)
    if found.root is None:
        assert found.outcome in (Outcome.EXHAUSTED, Outcome.STALLED, Outcome.ESCAPED)
    else:
        assert found.enclosure is None
        assert found.root == pytest.approx(0.5, abs=1e-4)


def test_fixed_point_reports_the_contraction() -> None:
    found = searched(methods.find("fixed point"), lambda x: 0.5 * x + 1.0 - x, 0.0, 5.0)
    assert found.contraction == pytest.approx(0.5)
    assert found.root == pytest.approx(2.0, abs=1e-9)


@pytest.mark.parametrize("slope", [-1.0, -1.2, 1.05, -3.0])
def test_fixed_point_is_refused_where_it_does_not_contract(slope: float) -> None:
    """g(x) = 2 + slope (x - 2), whose fixed point is 2."""
    found = searched(
        methods.find("fixed point"), lambda x: 2.0 + slope * (x - 2.0) - x, -50.0, 51.0
    )
    assert found.outcome in (Outcome.DIVERGED, Outcome.ESCAPED, Outcome.EXHAUSTED)
    assert found.root is None
    assert found.contraction is not None
    assert found.contraction >= 1.0 - 1e-9


def test_newton_uses_the_slope_that_it_is_given() -> None:
    asked = []

    def slope(x: float) -> float:
        asked.append(x)
        return 2.0 * x

    given_slope = run(
        methods.find("Newton"), lambda x: x * x - 2.0, 0.0, 3.0, Tolerance(1e-12), slope=slope
    )
    assert [x for x, _ in given_slope.samples] == asked
    assert given_slope.notes == ()
    assert given_slope.differences == 0
    differenced = run(methods.find("Newton"), lambda x: x * x - 2.0, 0.0, 3.0, Tolerance(1e-12))
    assert differenced.notes == ("slope by central difference",)
    assert differenced.root == pytest.approx(given_slope.root, abs=1e-12)


# Roots on a grid of dyadic fractions, so that the cubic's own root is known exactly.
grid = st.integers(-512, 512).map(lambda n: n / 64.0)


@settings(max_examples=1500, deadline=None)
@given(
    root=grid, others=st.tuples(grid, st.floats(0.0625, 64.0)), lead=st.sampled_from([-1.0, 1.0])
)
@bracketing
def test_the_enclosure_of_a_cubic_holds_a_true_root(
    method: Method, root: float, others: tuple[float, float], lead: float
) -> None:
    """(x - r) ((x - s)^2 + t^2) has r as its only real root, factored so that its sign is exact."""
    center, spread = others

    def f(x: float) -> float:
        return lead * (x - root) * ((x - center) ** 2 + spread**2)

    found = searched(method, f, -9.3, 9.7)
    if method.name == "regula falsi" and found.outcome is Outcome.EXHAUSTED:
        return
    assert found.nature is Nature.ROOT
    assert found.enclosure is not None
    assert found.enclosure.low <= root <= found.enclosure.high
    assert found.enclosure.high - found.enclosure.low <= 1e-9 * (1.0 + 1e-5)


@settings(max_examples=1500, deadline=None)
@given(
    root=st.floats(-1e3, 1e3),
    power=st.sampled_from([1 / 3, 1.0, 3.0, 5.0]),
    weight=st.floats(1e-6, 1e6),
)
@bracketing
def test_the_enclosure_of_a_monotone_residual_holds_the_root(
    method: Method, root: float, power: float, weight: float
) -> None:
    def f(x: float) -> float:
        return weight * math.copysign(abs(x - root) ** power, x - root)

    found = searched(method, f, -1.7e3, 2.1e3)
    if method.name == "regula falsi" and found.outcome is Outcome.EXHAUSTED:
        return
    assert found.nature in (Nature.ROOT, Nature.FLAT)
    assert found.enclosure is not None
    assert found.enclosure.low <= root <= found.enclosure.high or f(found.enclosure.low) == 0.0


@settings(max_examples=1500, deadline=None)
@given(guess=st.floats(-3.0, 3.0), shift=st.floats(-2.0, 2.0))
@open_ones
def test_an_open_method_never_reports_what_is_no_root(
    method: Method, guess: float, shift: float
) -> None:
    """atan(x - s) + sin(3 x)/4 - s/7 has steep and flat parts; whatever is reported is checked."""

    def f(x: float) -> float:
        return math.atan(x - shift) + 0.25 * math.sin(3.0 * x) - shift / 7.0

    counted = Counted(f)
    found = run(method, counted, -4.0, 4.0, Tolerance(1e-9), guess=guess)
    assert all(-4.0 <= x <= 4.0 for x in counted.asked)
    assert found.evaluations == len(counted.asked)
    if found.root is not None:
        assert abs(f(found.root)) < 1e-6
