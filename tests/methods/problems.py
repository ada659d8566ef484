"""Published root-finding problems, read from rootsets.json with the sources that stand there."""

from __future__ import annotations

import json
import math
import re
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from xlroot.values import Fault

FILE = Path(__file__).parent.parent / "reference" / "rootsets.json"

NAMES: dict[str, Any] = {
    "SIN": math.sin,
    "TAN": math.tan,
    "EXP": math.exp,
    "ATAN": math.atan,
    "SQRT": math.sqrt,
    "ABS": abs,
    "PI": lambda: math.pi,
    # Half away from zero, unlike Python's own round.
    "ROUND": lambda x, n: math.copysign(math.floor(abs(x) * 10**n + 0.5) / 10**n, x),
}


@dataclass(frozen=True)
class Problem:
    """One residual with its bracket; `roots` as texts with the digits that the source gives."""

    label: str
    family: str
    low: float
    high: float
    f: Callable[[float], float | Fault]
    root: float | None
    multiplicity: int
    evaluations: int | None
    """The published count, where there is one."""


def translated(text: str) -> str:
    """A residual of rootsets.json as a Python expression.

    Raises ValueError where a sign stands before a power, which worksheets read otherwise.
    """
    if re.search(r"(^|[(,*/+\-^])-[A-Za-z0-9.]+\^", text.removeprefix("=")):
        raise ValueError(text)
    plain = text.removeprefix("=").replace("^", "**")
    plain = re.sub(r"(?<![<>])=", "==", plain)
    return _without_if(plain)


def _without_if(text: str) -> str:
    found = re.search(r"\bIF\(", text)
    if found is None:
        return text
    depth, parts, start = 1, [], found.end()
    for at in range(found.end(), len(text)):
        letter = text[at]
        depth += (letter == "(") - (letter == ")")
        if depth == 0 or (depth == 1 and letter == ","):
            parts.append(text[start:at])
            start = at + 1
        if depth == 0:
            break
    condition, then, otherwise = map(_without_if, parts)
    inside = f"(({then}) if ({condition}) else ({otherwise}))"
    return text[: found.start()] + inside + _without_if(text[at + 1 :])


def compiled(text: str) -> Callable[[float], float | Fault]:
    """A residual of rootsets.json as f(x)."""
    code = compile(f"lambda x: {translated(text)}", text, "eval")
    f = eval(code, dict(NAMES))

    def residual(x: float) -> float | Fault:
        try:
            value = float(f(x))
        except ZeroDivisionError:
            return Fault.DIV0
        except (ValueError, OverflowError):
            return Fault.NUM
        return value if math.isfinite(value) else Fault.NUM

    return residual


def _problem(case: dict[str, Any]) -> Problem:
    low, high = map(float, case["bracket"])
    root = case.get("root")
    return Problem(
        case["label"],
        case["family"],
        low,
        high,
        compiled(case["worksheet_residual"]),
        None if root is None else float(root),
        case.get("multiplicity", 1),
        case.get("published_nfev"),
    )


PROBLEMS = {case["label"]: _problem(case) for case in json.loads(FILE.read_text(encoding="utf-8"))}
APS = [each for each in PROBLEMS.values() if each.family == "APS/TOMS748"]
CHANDRUPATLA = [each for each in PROBLEMS.values() if each.family == "Chandrupatla"]
