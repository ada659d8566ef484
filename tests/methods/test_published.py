"""The methods against published roots and evaluation counts.

Sources stand in rootsets.json beside every problem: G. E. Alefeld, F. A. Potra and Y. Shi, ACM
Trans. Math. Softw. 21 (1995) 327-344, and T. R. Chandrupatla, Adv. Eng. Software 28 (1997)
145-149.
"""

from __future__ import annotations

import math

import pytest
from scipy import optimize

from tests.methods.problems import APS, CHANDRUPATLA, PROBLEMS, Problem, translated
from xlroot import methods
from xlroot.nature import Nature
from xlroot.search import Run, run
from xlroot.stopping import Outcome, Tolerance, customary
from xlroot.values import Fault

SURE = [
    "bisection",
    "Illinois",
    "Pegasus",
    "Anderson-Björck",
    "Ridders",
    "Brent",
    "Chandrupatla",
    "ITP",
    "TOMS 748",
]
"""Bracketing methods that have to find every root; regula falsi may be too slow."""

UNDERFLOWS = {"tomsAPS.13.00", *(f"chandru.{number}" for number in range(30, 35))}
"""x exp(-1/x^2) is exactly zero in doubles for |x| below 0.0367: every value there is a root."""


def solved(problem: Problem, name: str, tolerance: float) -> Run:
    method = methods.find(name)
    return run(method, problem.f, problem.low, problem.high, Tolerance(tolerance))


def test_the_sets_are_complete() -> None:
    assert len(APS) == 154
    assert len(CHANDRUPATLA) == 45
    assert len(PROBLEMS) == 211


def test_a_sign_before_a_power_is_not_translated() -> None:
    with pytest.raises(ValueError, match="x"):
        translated("=-x^2")


@pytest.mark.parametrize("name", [*SURE, "regula falsi"])
@pytest.mark.parametrize("coarser", [1.0, 1e4], ids=["customary", "coarse"])
def test_every_root_is_found_within_the_tolerance(name: str, coarser: float) -> None:
    for problem in APS + CHANDRUPATLA:
        tolerance = coarser * customary(problem.low, problem.high)
        found = solved(problem, name, tolerance)
        if name == "regula falsi" and found.outcome is Outcome.EXHAUSTED:
            continue
        assert found.root is not None, problem.label
        assert problem.root is not None
        if problem.label in UNDERFLOWS:
            assert problem.f(found.root) == 0.0 or abs(found.root) < 0.04, problem.label
            continue
        # Published roots are rounded to doubles, and so is f: a last digit either way.
        slack = 4.0 * math.ulp(found.root)
        error = abs(found.root - problem.root)
        assert error <= tolerance + slack, (problem.label, error)
        assert found.nature is Nature.ROOT or found.outcome is Outcome.EXACT, problem.label
        if found.outcome is Outcome.ENCLOSED:
            low, high, f_low, f_high = found.enclosure or (0.0, 0.0, 0.0, 0.0)
            assert low - slack <= problem.root <= high + slack, problem.label
            assert (f_low < 0.0) != (f_high < 0.0)


@pytest.mark.parametrize("problem", CHANDRUPATLA, ids=lambda problem: problem.label)
def test_chandrupatla_takes_the_published_number_of_evaluations(problem: Problem) -> None:
    """The paper stops at |x2 - x1| < 4e-10 |x| + 1e-5; its counts exclude nothing but our own
    look at the sign change afterwards."""
    found = run(
        methods.find("Chandrupatla"), problem.f, problem.low, problem.high, Tolerance(1e-5, 4e-10)
    )
    assert found.evaluations - found.checks == problem.evaluations


@pytest.mark.parametrize("part", [1e-8, 1e-12, 1e-15])
def test_toms_748_takes_no_more_evaluations_than_the_reference(part: float) -> None:
    """Reference: scipy.optimize.toms748 on the same problems and tolerances. Its xtol counts half
    the width of the final interval."""
    ours = theirs = 0
    for problem in APS:
        tolerance = part * max(abs(problem.low), abs(problem.high))
        _, reference = optimize.toms748(
            problem.f,
            problem.low,
            problem.high,
            xtol=tolerance / 2.0,
            rtol=8.9e-16,
            full_output=True,
        )
        found = solved(problem, "TOMS 748", tolerance)
        ours += found.evaluations - found.checks
        theirs += reference.function_calls
    assert ours <= 1.01 * theirs


@pytest.mark.parametrize(
    ("low", "high", "tolerance", "count"),
    [
        # Burden and Faires, Numerical Analysis, section 2.1: x^3 + 4x^2 - 10 on [1, 2] to 1e-3
        # takes ceil(log2(1000)) = 10 halvings (from memory).
        (1.0, 2.0, 1e-3, 10),
        (1.0, 2.0, 1e-5, 17),
        # Powers of two: no rounding may add or drop a halving.
        (0.0, 8.0, 2.0**-20, 23),
        (0.1, 1.1, 2.0**-30, 30),
        (0.0, 1.0, 1.0, 0),
        (0.0, 1.0, 1.5, 0),
        (0.005, 0.1, 1e-12, 37),
    ],
)
def test_bisection_states_its_count_and_meets_it(
    low: float, high: float, tolerance: float, count: int
) -> None:
    root = low + 0.3217 * (high - low)
    found = run(
        methods.find("bisection"), lambda x: (x - root) ** 3, low, high, Tolerance(tolerance)
    )
    assert found.predicted == count == max(0, math.ceil(math.log2((high - low) / tolerance)))
    assert found.iterations == count
    assert found.outcome is Outcome.ENCLOSED
    assert found.enclosure is not None
    width = found.enclosure.high - found.enclosure.low
    assert width <= tolerance + math.ulp(high)


def test_the_textbook_cubic_is_halved_as_in_the_textbook() -> None:
    """x^3 + 4x^2 - 10 on [1, 2]: the first midpoints are 1.5, 1.25, 1.375, 1.3125, and the root
    is 1.365230013 (Burden and Faires, Numerical Analysis, table 2.1, from memory)."""
    found = run(
        methods.find("bisection"),
        lambda x: x * x * (x + 4.0) - 10.0,
        1.0,
        2.0,
        Tolerance(1e-9),
    )
    assert [each.x for each in found.iterates[2:6]] == [1.5, 1.25, 1.375, 1.3125]
    assert found.root == pytest.approx(1.365230013, abs=1e-9)


def test_an_exact_zero_ends_bisection_early() -> None:
    found = run(methods.find("bisection"), lambda x: x - 1.5, 1.0, 2.0, Tolerance(1e-6))
    assert found.predicted == 20
    assert found.iterations == 1
    assert found.outcome is Outcome.EXACT


def test_regula_falsi_keeps_one_end_of_a_convex_residual() -> None:
    """The classical weakness: on a convex residual every chord falls on the same side."""
    found = run(
        methods.find("regula falsi"), lambda x: x * x - 2.0, 0.0, 2.0, Tolerance(1e-12), limit=8
    )
    assert {each.high for each in found.iterates} == {2.0}


def test_itp_needs_at_most_one_evaluation_more_than_bisection() -> None:
    """The minmax guarantee of the paper, with n_0 = 1, for the width of 2 epsilon."""
    for problem in APS:
        tolerance = customary(problem.low, problem.high)
        most = math.ceil(math.log2((problem.high - problem.low) / tolerance)) + 1
        found = solved(problem, "ITP", tolerance)
        assert found.iterations <= most, problem.label


@pytest.mark.parametrize(
    ("name", "order"),
    [("Newton", 2.0), ("secant", 1.618), ("Steffensen", 2.0), ("Halley", 3.0)],
)
def test_the_observed_order_is_near_the_published_one(name: str, order: float) -> None:
    found = run(
        methods.find(name),
        lambda x: x**3 - 2.0 * x - 5.0,
        1.9,
        2.3,
        Tolerance(1e-13),
        guess=2.29 if name != "Steffensen" else 2.1,
        slope=lambda x: 3.0 * x * x - 2.0,
    )
    assert found.root == pytest.approx(2.0945514815423265, abs=1e-13)
    if found.order is not None:
        assert found.order == pytest.approx(order, abs=0.45)
    else:
        assert len(found.samples) <= 5


def test_faults_are_what_a_problem_shows_where_it_cannot_be_evaluated() -> None:
    domain = PROBLEMS["own.domain"]
    assert domain.f(-0.5) is Fault.NUM
