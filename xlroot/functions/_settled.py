"""A rule whose arithmetic fails answers #NUM!, as a cell does, and never raises."""

from __future__ import annotations

import math
from collections.abc import Callable
from functools import wraps
from typing import ParamSpec

from xlroot.values import Fault

Parameters = ParamSpec("Parameters")


def settled(
    rule: Callable[Parameters, float | Fault],
) -> Callable[Parameters, float | Fault]:
    """The rule with a finite float or a fault as its answer.

    An overflow, a logarithm of what has none or a division by zero inside a distribution is
    #NUM!; where a cell would show another fault the rule itself answers with it.
    """

    @wraps(rule)
    def settle(*arguments: Parameters.args, **named: Parameters.kwargs) -> float | Fault:
        try:
            result = rule(*arguments, **named)
        except (ArithmeticError, ValueError):
            return Fault.NUM
        if isinstance(result, Fault):
            return result
        return float(result) if math.isfinite(result) else Fault.NUM

    return settle
