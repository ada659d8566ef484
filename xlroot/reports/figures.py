"""Figures: numbers with exactly the digits that they may show.

A rounded figure never claims more than is known: the root keeps the digits that its enclosure
supports and one more, the ends of an enclosure are rounded outwards, and a bound is rounded up and
covers the root as it is written. All rounding is decimal and exact.
"""

from __future__ import annotations

from decimal import ROUND_CEILING, ROUND_FLOOR, ROUND_HALF_EVEN, Context, Decimal
from typing import NamedTuple

MOST_DIGITS = 17
"""Significant digits that identify a double (IEEE 754-2019, section 5.12.2)."""

SHEET_DIGITS = 15
"""Significant digits that a worksheet cell shows at most."""

BOUND_DIGITS = 2
VALUE_DIGITS = 10
INPUT_DIGITS = 15

_SMALLEST_PLAIN = -4
_LARGEST_PLAIN = 15
_NEARLY = Decimal("1.05")
"""What is within five percent of a power of ten counts as that: tolerances are stated in them."""

_EXACT = Context(prec=2000)


class Figure(NamedTuple):
    """A number and how it is written; `value` is what the text says or was rounded from."""

    value: float
    text: str


def plain(number: float, digits: int = VALUE_DIGITS) -> Figure:
    """A number with up to so many significant digits, zeros at the end dropped."""
    return Figure(number, _tidy(f"{number:.{digits}g}"))


def scientific(number: float, digits: int = 4) -> Figure:
    """A number with so many significant digits and, unless it is 0, an exponent."""
    return Figure(number, _tidy(f"{number:.{digits - 1}e}") if number else "0")


class Known(NamedTuple):
    """A root as far as it is known: four figures that agree with each other."""

    root: Figure
    low: Figure | None
    high: Figure | None
    bound: Figure | None
    """Root as written, plus or minus this, holds the whole enclosure."""


def known(
    root: float, low: float | None, high: float | None, error: float, most: int = MOST_DIGITS
) -> Known:
    """The figures of a root; without an enclosure, the estimated error decides on the digits, and
    none is added.

    No figure has more than `most` significant digits. Where the ends of the enclosure need more
    than that to be told apart, they are written further apart than they are, never closer. An
    enclosure that is a single double is written as the shortest text that reads back as it.
    """
    if low is None or high is None:
        return Known(_to_place(root, _place(Decimal(repr(error))) + 1, most), None, None, None)
    exact, bottom, top = Decimal(root), Decimal(low), Decimal(high)
    spread = max(_EXACT.subtract(top, exact), _EXACT.subtract(exact, bottom))
    if spread <= 0 and most >= MOST_DIGITS:
        point = Figure(root, _tidy(repr(root)))
        return Known(point, point, point, Figure(0.0, "0"))
    place = _place(spread)
    figure = _to_place(root, place, most)
    return Known(
        figure,
        _outward(bottom, place - 1, ROUND_FLOOR, most),
        _outward(top, place - 1, ROUND_CEILING, most),
        _bound(Decimal(figure.text), bottom, top),
    )


def _place(spread: Decimal) -> int:
    """The power of ten of the last digit worth writing for a root known to within `spread`."""
    return (spread * _NEARLY).adjusted() if spread > 0 else -400


def _to_place(number: float, place: int, most: int) -> Figure:
    """The number rounded to a multiple of ten to the power `place`, halves to even."""
    return Figure(number, _written(_rounded(Decimal(number), place, ROUND_HALF_EVEN, most)))


def _outward(exact: Decimal, place: int, rounding: str, most: int) -> Figure:
    text = _written(_rounded(exact, place, rounding, most))
    return Figure(float(text), text)


def _rounded(exact: Decimal, place: int, rounding: str, most: int) -> Decimal:
    if not exact:
        return exact
    finest = exact.adjusted() - most + 1
    return exact.quantize(Decimal((0, (1,), max(place, finest))), rounding, _EXACT)


def _bound(shown: Decimal, bottom: Decimal, top: Decimal) -> Figure:
    spread = max(_EXACT.subtract(top, shown), _EXACT.subtract(shown, bottom))
    if spread <= 0:
        return Figure(0.0, "0")
    place = spread.adjusted() - BOUND_DIGITS + 1
    rounded = spread.quantize(Decimal((0, (1,), place)), ROUND_CEILING, _EXACT)
    text = _tidy(f"{rounded:.{BOUND_DIGITS - 1}e}")
    return Figure(float(text), _plain_if_short(text))


def _written(number: Decimal) -> str:
    """A rounded number with all its digits, plain where that is short."""
    if not number:
        return "0"
    if number.is_zero() or _SMALLEST_PLAIN <= number.adjusted() < _LARGEST_PLAIN:
        return f"{number:f}"
    return _exponent(f"{number:e}")


def _plain_if_short(text: str) -> str:
    """Bounds from a thousandth up read better without an exponent."""
    number = Decimal(text)
    if -3 <= number.adjusted() <= 3:
        return f"{number:f}"
    return text


def _tidy(text: str) -> str:
    mantissa, mark, exponent = text.partition("e")
    if "." in mantissa:
        mantissa = mantissa.rstrip("0").rstrip(".")
    return _exponent(mantissa + mark + exponent)


def _exponent(text: str) -> str:
    """The exponent without a plus sign or leading zeros: 1e-05 is 1e-5."""
    mantissa, mark, exponent = text.partition("e")
    return f"{mantissa}e{int(exponent)}" if mark else mantissa


def number_format(text: str) -> str:
    """The worksheet number format that shows a number as the figure's text does."""
    mantissa, mark, _ = text.partition("e")
    decimals = len(mantissa.partition(".")[2])
    form = "0" + ("." + "0" * decimals if decimals else "")
    return form + "E+00" if mark else form
