"""The array kind: numpy vectors, thousands of trial values in one pass.

`primitives()` gives the names that forms and compiled chains use, over arrays. Where a function
over floats would raise, the element becomes NaN or infinite; the program computes such elements
again by the real kind, so that every element is what the sheet would show. numpy and scipy are
imported on first use.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from typing import Any


@cache
def primitives() -> dict[str, Callable[..., Any]]:
    """The functions that a form may use, over arrays."""
    import numpy as np

    def power(base: Any, exponent: Any) -> Any:
        undefined = (np.asarray(base) == 0.0) & (np.asarray(exponent) == 0.0)
        return np.where(undefined, np.nan, np.power(base, exponent))

    def special(name: str) -> Callable[..., Any]:
        def late(x: Any) -> Any:
            import scipy.special

            return getattr(scipy.special, name)(x)

        return late

    return {
        "sqrt": np.sqrt,
        "exp": np.exp,
        "ln": np.log,
        "log10": np.log10,
        "sin": np.sin,
        "cos": np.cos,
        "tan": np.tan,
        "asin": np.arcsin,
        "acos": np.arccos,
        "atan": np.arctan,
        "atan2": np.arctan2,
        "sinh": np.sinh,
        "cosh": np.cosh,
        "tanh": np.tanh,
        "asinh": np.arcsinh,
        "acosh": np.arccosh,
        "atanh": np.arctanh,
        "power": power,
        "absolute": np.abs,
        "sign": np.sign,
        "floor": np.floor,
        "ceil": np.ceil,
        "trunc": np.trunc,
        "modulo": np.mod,
        "smaller": np.minimum,
        "larger": np.maximum,
        "erf": special("erf"),
        "erfc": special("erfc"),
        "gamma": special("gamma"),
        "lngamma": special("gammaln"),
    }


def elementwise(function: Callable[..., Any], caught: tuple[type[Exception], ...]) -> Any:
    """A function of single values over arrays; NaN where it raises or gives no number."""
    import numpy as np

    def over(*operands: Any) -> Any:
        shape = np.broadcast_shapes(*(np.shape(each) for each in operands))
        flat = [np.broadcast_to(each, shape).ravel().tolist() for each in operands]
        result = np.empty(int(np.prod(shape)))
        for position, values in enumerate(zip(*flat, strict=True)):
            try:
                result[position] = function(*values)
            except caught:
                result[position] = np.nan
        return result.reshape(shape)

    return over


def line(numbers: tuple[float, ...]) -> Any:
    """A held row or column of numbers."""
    import numpy as np

    return np.asarray(numbers)


@cache
def helpers() -> dict[str, Callable[..., Any]]:
    """What compiled text calls besides the primitives: choices, sums, extremes."""
    import numpy as np

    def fail() -> float:
        return float("nan")

    def total(terms: tuple[Any, ...]) -> Any:
        result: Any = 0.0
        for term in terms:
            result = result + term
        return result

    def product(terms: tuple[Any, ...]) -> Any:
        result: Any = 1.0
        for term in terms:
            result = result * term
        return result

    def least(terms: tuple[Any, ...]) -> Any:
        result = terms[0]
        for term in terms[1:]:
            result = np.minimum(result, term)
        return result

    def most_of(terms: tuple[Any, ...]) -> Any:
        result = terms[0]
        for term in terms[1:]:
            result = np.maximum(result, term)
        return result

    def bisected(line: Any, x: Any) -> Any:
        return np.searchsorted(line, x, side="right")

    def located(count: Any) -> Any:
        return np.where(count > 0, count, np.nan)

    def picked(line: Any, place: Any) -> Any:
        wanted = np.trunc(place)
        inside = (wanted >= 1.0) & (wanted <= len(line))
        position = np.where(inside, wanted, 1.0).astype(np.intp) - 1
        return np.where(inside, line[position], np.nan)

    return {
        "bisected": bisected,
        "located": located,
        "picked": picked,
        "choose": np.where,
        "fail": fail,
        "total": total,
        "product": product,
        "least": least,
        "most_of": most_of,
        "negated": np.logical_not,
        "raised": np.power,
    }
