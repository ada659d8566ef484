"""The driver, what it makes of a change of sign, and the verdicts that follow."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest

from tests.methods.problems import PROBLEMS
from xlroot import methods
from xlroot.nature import Nature
from xlroot.scan import look
from xlroot.search import Run, run
from xlroot.stopping import Outcome, SafeSide, Tolerance, customary
from xlroot.values import Fault
from xlroot.verdict import Status, Verdict, judge

Residual = Callable[[float], "float | Fault"]


def asked(
    f: Residual,
    low: float,
    high: float,
    method: str = "auto",
    tolerance: float | None = None,
    guess: float | None = None,
) -> tuple[Run, Verdict]:
    permitted = customary(low, high) if tolerance is None else tolerance
    found = run(methods.choose(method)[0], f, low, high, Tolerance(permitted), guess=guess)
    return found, judge(found, look(lambda xs: [f(x) for x in xs], low, high, points=101))


def reciprocal(x: float) -> float | Fault:
    return Fault.DIV0 if x == 1.0 else 1.0 / (x - 1.0)


def power(x: float, exponent: float) -> float:
    return math.copysign(abs(x) ** exponent, x)


def rounded(x: float, digits: int) -> float:
    """Half away from zero, as worksheets round."""
    return math.copysign(math.floor(abs(x) * 10.0**digits + 0.5) / 10.0**digits, x)


EVERY_SURE_METHOD = ["bisection", "Illinois", "Brent", "Chandrupatla", "TOMS 748", "ITP", "Ridders"]


@pytest.mark.parametrize("method", EVERY_SURE_METHOD)
@pytest.mark.parametrize("tolerance", [None, 1e-9, 1e-6, 1e-3])
@pytest.mark.parametrize(
    ("f", "low", "high"),
    [
        (math.tan, 1.0, 2.0),
        (reciprocal, 0.0, 2.5),
        (reciprocal, -3.0, 1e6),
        (lambda x: -1e-12 / (x - 1.0) if x != 1.0 else Fault.DIV0, 0.0, 2.5),
        (lambda x: 1.0 / (x - 1.0) ** 3 if x != 1.0 else Fault.DIV0, 0.0, 2.5),
        (lambda x: power(x - 1.0, -0.2) if x != 1.0 else Fault.DIV0, 0.0, 2.5),
    ],
    ids=["tan", "1/(x-1)", "far", "weak", "cubed", "slow"],
)
def test_a_pole_is_no_root(
    f: Residual, low: float, high: float, method: str, tolerance: float | None
) -> None:
    found, verdict = asked(f, low, high, method, tolerance)
    assert verdict.status is Status.REFUSED
    assert found.outcome is Outcome.FAULTED or found.nature is not Nature.ROOT
    assert verdict.low is verdict.high is None


@pytest.mark.parametrize("method", EVERY_SURE_METHOD)
@pytest.mark.parametrize("tolerance", [None, 1e-9, 1e-6, 1e-3])
@pytest.mark.parametrize(
    "f",
    [
        lambda x: -1.0 if x < 1.3 else 2.0,
        lambda x: x - 2.0 if x < 1.3 else x,
        lambda x: x - 1.3 - 0.01 if x < 1.3 else x - 1.3 + 0.01,
        lambda x: -1e-200 if x < 1.3 else 1e-200,
        lambda x: rounded(x - 1.0 / 3.0, 2) - 0.005,
        lambda x: math.floor(x) - 0.5,
    ],
    ids=["step", "broken line", "small step", "tiny step", "rounded", "floor"],
)
def test_a_jump_is_no_root(f: Residual, method: str, tolerance: float | None) -> None:
    found, verdict = asked(f, 0.0, 3.0, method, tolerance)
    assert verdict.status is Status.REFUSED
    assert found.nature is Nature.JUMP
    assert "jumps over zero" in verdict.reason


def test_a_jump_beside_large_values_is_no_root() -> None:
    found, _ = asked(lambda x: x**9 + math.copysign(1e5, x), -10.0, 100.0)
    assert found.nature is Nature.JUMP


@pytest.mark.parametrize("method", EVERY_SURE_METHOD)
@pytest.mark.parametrize("tolerance", [None, 1e-9, 1e-6, 1e-3])
@pytest.mark.parametrize(
    ("f", "low", "high", "root"),
    [
        (lambda x: power(x - 1.0, 1 / 3), 0.0, 3.1, 1.0),
        (lambda x: power(x, 1 / 3), -1.0, 3.1, 0.0),
        (lambda x: power(x - 1.0, 1 / 9), 0.0, 3.1, 1.0),
        (lambda x: x**9, -1.0, 3.1, 0.0),
        (lambda x: power(x - 0.7, 5.0), -1.0, 3.1, 0.7),
        (lambda x: 1e-200 * (x - 0.7), -1.0, 3.1, 0.7),
        (lambda x: 1e300 * (x - 0.7), -1.0, 3.1, 0.7),
        (lambda x: math.atan(1e6 * x), -1.0, 3.1, 0.0),
        (lambda x: math.atan(1e6 * (x - 0.7)), -1.0, 3.1, 0.7),
        (lambda x: math.atan(1e12 * (x - 0.7)), -1.0, 3.1, 0.7),
        (lambda x: 1e12 * (x - 0.7), -1.0, 3.1, 0.7),
        (lambda x: math.expm1(40.0 * (x - 0.7)), -1.0, 3.1, 0.7),
        (lambda x: math.exp(x) - 1.0 - 1e-6, -0.5, 0.7, 9.999995000003333e-07),
        (lambda x: (x - 1.0) / (x - 1.5) if x != 1.5 else Fault.DIV0, 0.0, 1.4, 1.0),
    ],
)
def test_an_honest_root_is_never_refused(
    f: Residual, low: float, high: float, root: float, method: str, tolerance: float | None
) -> None:
    found, verdict = asked(f, low, high, method, tolerance)
    assert verdict.status is Status.BRACKETED, verdict.reason
    permitted = customary(low, high) if tolerance is None else tolerance
    assert found.root == pytest.approx(root, abs=permitted)
    assert verdict.low is not None
    assert verdict.high is not None
    assert verdict.high - verdict.low <= permitted * (1.0 + 1e-3)


def test_rounding_steps_finer_than_the_tolerance_are_no_jump() -> None:
    """A residual rounded at nine digits knows the root to 1e-9, and no better."""

    def f(x: float) -> float:
        return rounded(x - math.pi, 9) - 5e-10

    _, coarse = asked(f, 3.0, 4.0, tolerance=1e-6)
    assert coarse.status is Status.BRACKETED
    assert coarse.low is not None
    assert coarse.low == pytest.approx(math.pi, abs=1e-6)
    _, fine = asked(f, 3.0, 4.0)
    assert fine.status is Status.REFUSED
    assert "wider tolerance" in fine.reason


def test_a_sign_change_at_rounding_level_is_an_estimate_only() -> None:
    """x^3 on [-1, 1.3] with a step of 1e-13 at zero cannot be told from rounding."""
    found, verdict = asked(lambda x: x**3 + math.copysign(1e-13, x), -1.0, 1.3)
    assert found.nature is Nature.ROUNDING
    assert verdict.status is Status.CONVERGED
    assert "estimate" in verdict.reason


# The expected verdicts on the problems that were constructed to mislead.


def test_own_double_root_has_no_bracket_but_newton_converges() -> None:
    problem = PROBLEMS["own.double"]
    _, verdict = asked(problem.f, problem.low, problem.high)
    assert verdict.status is Status.REFUSED
    assert "same sign at both ends" in verdict.reason
    assert "4 at 0 and 9 at 5" in verdict.reason
    assert "touches zero" in verdict.reason
    found, verdict = asked(problem.f, problem.low, problem.high, "newton")
    assert verdict.status is Status.CONVERGED
    assert "estimate" in verdict.reason
    assert found.root == pytest.approx(2.0, abs=1e-6)


@pytest.mark.parametrize("method", ["auto", "newton", "secant", "halley", "steffensen"])
def test_own_residual_without_a_root_is_refused(method: str) -> None:
    problem = PROBLEMS["own.none"]
    found, verdict = asked(problem.f, problem.low, problem.high, method, guess=0.7)
    assert verdict.status is Status.REFUSED
    assert found.root is None


@pytest.mark.parametrize("method", ["auto", "newton", "secant"])
def test_own_pole_of_the_tangent_is_refused(method: str) -> None:
    problem = PROBLEMS["own.tan_pole"]
    _, verdict = asked(problem.f, problem.low, problem.high, method, guess=math.pi / 2.0)
    assert verdict.status is Status.REFUSED


def test_own_even_count_of_roots_is_refused_with_both_places() -> None:
    problem = PROBLEMS["own.two"]
    _, verdict = asked(problem.f, problem.low, problem.high)
    assert verdict.status is Status.REFUSED
    assert "crosses zero near 1" in verdict.reason
    assert "crosses zero near 2" in verdict.reason


def test_own_close_pair_gives_a_true_root() -> None:
    problem = PROBLEMS["own.close_pair"]
    found, verdict = asked(problem.f, problem.low, problem.high)
    assert verdict.status is Status.BRACKETED
    assert "not excluded" in verdict.reason
    assert min(abs((found.root or 0.0) - root) for root in (1.0, 1.000001, 3.0)) < 1e-11


def test_own_domain_names_the_fault_and_the_end() -> None:
    problem = PROBLEMS["own.domain"]
    found, verdict = asked(problem.f, problem.low, problem.high)
    assert found.outcome is Outcome.FAULTED
    assert "#NUM! at the low end of the bracket, x = -1" in verdict.reason


def test_own_root_at_an_end_is_exact() -> None:
    problem = PROBLEMS["own.root_at_end"]
    found, verdict = asked(problem.f, problem.low, problem.high)
    assert (found.root, verdict.low, verdict.high) == (1.0, 1.0, 1.0)
    assert verdict.status is Status.BRACKETED
    assert "exactly zero at an end" in verdict.reason


def test_own_rounded_residual_is_zero_over_a_stretch() -> None:
    problem = PROBLEMS["own.rounded"]
    found, verdict = asked(problem.f, problem.low, problem.high)
    assert found.nature is Nature.FLAT
    assert verdict.status is Status.BRACKETED
    assert "stretch" in verdict.reason
    assert 3.1411 <= (found.root or 0.0) <= 3.1421


def test_own_tiny_residual_is_solved_as_any_other() -> None:
    problem = PROBLEMS["own.flat_tiny"]
    found, verdict = asked(problem.f, problem.low, problem.high)
    assert verdict.status is Status.BRACKETED
    assert found.root == pytest.approx(3.0, abs=1e-11)


def test_own_large_root_is_solved_to_the_unit() -> None:
    problem = PROBLEMS["own.large_x"]
    found, verdict = asked(problem.f, problem.low, problem.high, "bisection", 0.001)
    assert verdict.status is Status.BRACKETED
    assert found.root == pytest.approx(1234567890123.0, abs=0.002)


def test_own_newton_cycle_ends_in_a_refusal() -> None:
    """From 0 Newton's iterates on x^3 - 2x + 2 are 0, 1, 0, 1, … (exact slopes)."""
    problem = PROBLEMS["own.newton_cycle"]
    method = methods.find("newton")

    def slope(x: float) -> float:
        return 3.0 * x * x - 2.0

    found = run(method, problem.f, -3.0, 2.0, Tolerance(1e-9), guess=0.0, slope=slope)
    assert found.outcome is Outcome.EXHAUSTED
    assert [x for x, _ in found.samples[:4]] == [0.0, 1.0, 0.0, 1.0]
    assert asked(problem.f, problem.low, problem.high)[0].root == pytest.approx(-1.7692923542386314)


def test_own_arctangent_throws_newton_out_of_the_limits() -> None:
    problem = PROBLEMS["own.atan_newton"]
    near, verdict = asked(problem.f, problem.low, problem.high, "newton", guess=0.8)
    assert verdict.status is Status.BRACKETED
    assert near.root == pytest.approx(0.0, abs=1e-12)
    far, verdict = asked(problem.f, problem.low, problem.high, "newton", guess=1.9)
    assert far.outcome is Outcome.ESCAPED
    assert "left the limits" in verdict.reason


# What else the driver owes.


@pytest.mark.parametrize("method", ["bisection", "brent", "chandrupatla", "secant"])
@pytest.mark.parametrize("turn", [1.0, -1.0])
def test_the_safe_side_is_the_end_with_the_acceptable_sign(method: str, turn: float) -> None:
    def f(x: float) -> float:
        return turn * (math.exp(x) - 2.0)

    found, _ = asked(f, 0.0, 1.0, method, 1e-6)
    positive, negative = found.root_on(SafeSide.POSITIVE), found.root_on(SafeSide.NEGATIVE)
    assert positive is not None
    assert negative is not None
    assert f(positive) >= 0.0 >= f(negative)
    assert abs(positive - negative) <= 1e-6 * (1.0 + 1e-6)
    assert found.root_on(SafeSide.NONE) == found.root


def test_an_exact_zero_is_safe_on_either_side() -> None:
    found, _ = asked(lambda x: x - 0.5, 0.0, 1.0)
    assert found.root_on(SafeSide.POSITIVE) == found.root_on(SafeSide.NEGATIVE) == 0.5


def test_iterates_carry_number_bracket_and_slope() -> None:
    found, _ = asked(lambda x: x * x - 2.0, 0.0, 2.0, "bisection", 0.25)
    assert [(each.n, each.low, each.high) for each in found.iterates] == [
        (0, 0.0, 2.0),
        (0, 0.0, 2.0),
        (1, 1.0, 2.0),
        (2, 1.0, 1.5),
        (3, 1.25, 1.5),
    ]
    newton, _ = asked(lambda x: x * x - 2.0, 0.0, 2.0, "newton")
    assert newton.iterates[0].slope == pytest.approx(2.0)
    assert newton.iterates[0].low is None


def test_equal_signs_are_told_with_both_values_and_the_look() -> None:
    _, verdict = asked(lambda x: x * x + 1.0, -1.0, 2.0)
    assert verdict.reason == (
        "the residual has the same sign at both ends of the bracket: 2 at -1 and 5 at 2; a look "
        "at 101 values over the bracket shows no sign change"
    )


def test_a_fault_at_the_high_end_is_told() -> None:
    _, verdict = asked(lambda x: Fault.DIV0 if x == 2.0 else x, -1.0, 2.0)
    assert "#DIV/0! at the high end of the bracket, x = 2" in verdict.reason


def test_a_fault_inside_is_told_with_its_place() -> None:
    found, verdict = asked(lambda x: Fault.NUM if 0.2 < x < 0.9 else x - 0.5, 0.0, 1.0)
    assert found.fault == (0.5, Fault.NUM)
    assert "#NUM! at x = 0.5, inside the bracket" in verdict.reason


def test_a_fixed_point_that_does_not_contract_is_refused_with_the_number() -> None:
    found, verdict = asked(lambda x: 3.0 - 1.5 * x - x, 0.0, 2.0, "fixed point", guess=1.1)
    assert verdict.status is Status.REFUSED
    assert found.contraction == pytest.approx(1.5)
    assert "1.5" in verdict.reason


def test_too_few_iterations_are_told() -> None:
    found = run(methods.find("bisection"), lambda x: x - 0.3, 0.0, 1.0, Tolerance(1e-9), limit=5)
    assert found.outcome is Outcome.EXHAUSTED
    assert found.iterations == 5
    verdict = judge(found, look(lambda xs: [x - 0.3 for x in xs], 0.0, 1.0))
    assert "did not finish in 5 iterations" in verdict.reason
