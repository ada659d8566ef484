"""Error and Bessel functions: documented values, tables, mpmath."""

from __future__ import annotations

import math

import mpmath
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mpf

from tests.functions.calls import call, fault, number
from xlroot import functions
from xlroot.errors import Unsupported

# Examples of Excel's documentation, from memory, to the digits that it prints.
DOCUMENTED = [
    ("ERF", (0.745,), 0.70792892),
    ("ERF", (1.0,), 0.84270079),
    ("ERF.PRECISE", (0.745,), 0.70792892),
    ("ERFC", (1.0,), 0.15729921),
    ("ERFC.PRECISE", (1.0,), 0.15729921),
    ("BESSELI", (1.5, 1.0), 0.981666428),
    ("BESSELK", (1.5, 1.0), 0.277387804),
    ("BESSELY", (2.5, 1.0), 0.145918138),
]


@pytest.mark.parametrize(("name", "arguments", "value"), DOCUMENTED)
def test_documented(name: str, arguments: tuple[float, ...], value: float) -> None:
    assert number(name, *arguments) == pytest.approx(value, abs=6e-9)


def test_a_documented_value_that_is_off_in_the_seventh_digit() -> None:
    # Excel's documentation, from memory, prints 0.329925829 for J_2(1.9). The series says else.
    series = sum(
        (-1) ** k * 0.95 ** (2 * k + 2) / (math.factorial(k) * math.factorial(k + 2))
        for k in range(20)
    )
    assert number("BESSELJ", 1.9, 2) == pytest.approx(series, rel=1e-14)
    assert number("BESSELJ", 1.9, 2) == pytest.approx(0.329925829, abs=2e-7)


@given(st.floats(-4.0, 4.0), st.floats(-4.0, 4.0))
def test_error_function_between_limits(low: float, high: float) -> None:
    found = number("ERF", low, high)
    with mpmath.workdps(60):
        exact = mpmath.erf(mpf(high)) - mpmath.erf(mpf(low))
        scale = max(abs(mpmath.erfc(abs(mpf(low)))), abs(mpmath.erfc(abs(mpf(high)))))
        assert abs(mpf(found) - exact) <= 4e-15 * scale + 2e-16 * (low * high <= 1.0)


def test_error_function_far_out_keeps_its_digits() -> None:
    with mpmath.workdps(40):
        exact = float(mpmath.erf(7) - mpmath.erf(6))
    assert number("ERF", 6, 7) == pytest.approx(exact, rel=1e-14)
    assert number("ERF", -7, -6) == pytest.approx(exact, rel=1e-14)


def test_one_argument_has_a_form() -> None:
    for name in ("ERF", "ERF.PRECISE", "ERFC", "NORMSDIST", "GAUSS", "PHI", "FISHER"):
        entry = functions.find(name)
        assert entry is not None
        assert entry.form is not None
        assert entry.form.count("{") == 1


@settings(max_examples=60, deadline=None)
@given(st.floats(0.05, 50.0), st.integers(0, 10))
def test_bessel_functions_against_mpmath(x: float, order: int) -> None:
    with mpmath.workdps(30):
        for name, exact in [
            ("BESSELI", mpmath.besseli(order, mpf(x))),
            ("BESSELK", mpmath.besselk(order, mpf(x))),
        ]:
            assert abs(mpf(number(name, x, order)) - exact) <= 1e-13 * abs(exact)
        for name, exact in [
            ("BESSELJ", mpmath.besselj(order, mpf(x))),
            ("BESSELY", mpmath.bessely(order, mpf(x))),
        ]:
            # Near a zero only the absolute error can be small.
            assert abs(mpf(number(name, x, order)) - exact) <= 1e-13 * max(1, abs(exact))


def test_orders_are_cut_and_domains_kept() -> None:
    assert number("BESSELJ", 1.9, 2.8) == number("BESSELJ", 1.9, 2.0)
    assert number("BESSELJ", -1.9, 1) == -number("BESSELJ", 1.9, 1)
    assert fault("BESSELJ", 1, -1) == "#NUM!"
    assert fault("BESSELY", 0, 1) == "#NUM!"
    assert fault("BESSELK", -1, 1) == "#NUM!"
    assert fault("BESSELI", 1000, 1) == "#NUM!"
    with pytest.raises(Unsupported, match="too few digits"):
        call("BESSELJ", 1e6, 0)
