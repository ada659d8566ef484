"""No figure shows a digit that it may not show."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from xlroot.reports.figures import SHEET_DIGITS, known, number_format, plain

reals = st.floats(allow_nan=False, allow_infinity=False, min_value=-1e300, max_value=1e300)
shares = st.floats(min_value=0.0, max_value=1.0)


def exact(text: str) -> Fraction:
    return Fraction(text)


@given(reals, st.floats(min_value=1e-18, max_value=1e3), shares, st.sampled_from([15, 17]))
def test_what_is_written_holds_the_enclosure(
    root: float, width: float, share: float, most: int
) -> None:
    width = max(width * abs(root), math.ulp(root))
    low, high = root - share * width, root + (1.0 - share) * width
    assume(low < high)
    found = known(root, low, high, width, most)
    assert found.low is not None
    assert found.high is not None
    assert found.bound is not None
    assert exact(found.low.text) <= Fraction(low)
    assert exact(found.high.text) >= Fraction(high)
    assert exact(found.root.text) - exact(found.bound.text) <= Fraction(low)
    assert exact(found.root.text) + exact(found.bound.text) >= Fraction(high)
    for figure in (found.root, found.low, found.high):
        digits = figure.text.partition("e")[0].replace(".", "").lstrip("-0")
        assert len(digits) <= max(most + 1, 15), "one more where rounding carries"


@given(reals, st.integers(1, 17))
def test_a_plain_figure_is_the_rounded_number(number: float, digits: int) -> None:
    text = plain(number, digits).text
    assert float(text) == float(f"{number:.{digits}g}")


@pytest.mark.parametrize(
    ("root", "low", "high", "shown", "bound"),
    [
        (0.018513866077, 0.0185138660769, 0.0185138660771, "0.0185138660770", "1.1e-13"),
        (2.0, 2.0, 2.0, "2", "0"),
        (1.0 / 3.0, 0.33, 0.34, "0.333", "0.0070"),
        (1234.5, 1200.0, 1250.0, "1230", "30"),
        (-1.5e-9, -1.6e-9, -1.4e-9, "-1.5e-9", "1.1e-10"),
        (0.0, -1e-12, 1e-12, "0", "1.0e-12"),
        (6.02214076e23, 6.02e23, 6.03e23, "6.022e23", "7.9e20"),
    ],
)
def test_the_root_keeps_the_digits_of_its_enclosure_and_one_more(
    root: float, low: float, high: float, shown: str, bound: str
) -> None:
    found = known(root, low, high, 1e-12)
    assert found.root.text == shown
    assert found.bound is not None
    assert exact(found.bound.text) == pytest.approx(exact(bound), rel=0.2)


@given(reals)
def test_a_root_that_is_known_exactly_is_written_so_that_it_reads_back(root: float) -> None:
    found = known(root, root, root, 1e-12)
    assert found.low == found.high == found.root
    assert float(found.root.text) == root
    assert found.bound == (0.0, "0")


def test_without_an_enclosure_the_estimated_error_decides_and_no_digit_is_added() -> None:
    found = known(0.0200000000009459, None, None, 1e-12)
    assert found.root.text == "0.02000000000"
    assert found.bound is None


@pytest.mark.parametrize(
    ("text", "form"),
    [("0.0194", "0.0000"), ("37", "0"), ("-1.5e-9", "0.0E+00"), ("7e-13", "0E+00")],
)
def test_the_number_format_shows_as_many_digits_as_the_text(text: str, form: str) -> None:
    assert number_format(text) == form


def test_a_sheet_shows_fifteen_digits_at_most() -> None:
    found = known(0.1, 0.1 - 1e-17, 0.1 + 1e-17, 1e-17, SHEET_DIGITS)
    assert len(found.root.text.lstrip("0.")) <= SHEET_DIGITS
