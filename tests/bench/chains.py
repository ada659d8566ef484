"""Three chains, as books and as Python written by hand from the same formulas.

short   5 formulas on one sheet: friction factor of a pipe.
middle  60 formulas over three sheets with IF, SUM and INDEX/MATCH in a property table.
long    a chain of 300 formulas in a book of 5,000.
"""

from __future__ import annotations

import math
from bisect import bisect_right
from collections.abc import Callable
from typing import Any, NamedTuple

from xlroot.book import Book
from xlroot.hosts.memory import Content, book_of


class Bench(NamedTuple):
    """One chain with what it is measured against."""

    name: str
    contents: dict[str, Content]
    residual: str
    unknown: str
    low: float
    high: float
    by_hand: Callable[[float], float]
    by_numpy: Callable[[Any], Any]

    @property
    def book(self) -> Book:
        return book_of(self.contents)


def _short() -> Bench:
    contents: dict[str, Content] = {
        "Pipe!B1": 0.0001,
        "Pipe!B2": 0.2,
        "Pipe!B3": 400000,
        "Pipe!B6": 0.02,
        "Pipe!B7": "=SQRT(B6)",
        "Pipe!B8": "=B1/B2/3.7+2.51/(B3*B7)",
        "Pipe!B9": "=-2*LOG10(B8)",
        "Pipe!B10": "=1/B7",
        "Pipe!B11": "=B10-B9",
    }

    def by_hand(f: float) -> float:
        root = math.sqrt(f)
        inside = 0.0001 / 0.2 / 3.7 + 2.51 / (400000.0 * root)
        right = -2.0 * math.log10(inside)
        left = 1.0 / root
        return left - right

    def by_numpy(f: Any) -> Any:
        import numpy as np

        root = np.sqrt(f)
        inside = 0.0001 / 0.2 / 3.7 + 2.51 / (400000.0 * root)
        right = -2.0 * np.log10(inside)
        left = 1.0 / root
        return left - right

    return Bench("short", contents, "Pipe!B11", "Pipe!B6", 0.005, 0.1, by_hand, by_numpy)


STAGES = 9
TEMPERATURES = [20.0, 40.0, 60.0, 80.0, 100.0, 120.0, 140.0, 160.0]
CAPACITIES = [4.184, 4.179, 4.185, 4.197, 4.216, 4.245, 4.285, 4.339]


def _middle() -> Bench:
    """A train of nine coolers: outlet of one is inlet of the next; the flow is sought."""
    contents: dict[str, Content] = {"Input!B1": 2.5, "Input!B2": 150.0, "Input!B3": 15.0}
    for row, (t, c) in enumerate(zip(TEMPERATURES, CAPACITIES, strict=True), start=1):
        contents |= {f"Props!A{row}": t, f"Props!B{row}": c}
    for stage in range(1, STAGES + 1):
        before = "Input!$B$2" if stage == 1 else f"F{stage + 1}"
        row = stage + 2
        contents |= {
            f"Calc!A{row}": f"={before}",
            f"Calc!B{row}": f"=INDEX(Props!$B$1:$B$8,MATCH(A{row},Props!$A$1:$A$8,1))",
            f"Calc!C{row}": f"=Input!$B$1*B{row}",
            f"Calc!D{row}": f"=IF(A{row}>80,0.9+0.01*{stage},0.7+0.01*{stage})",
            f"Calc!E{row}": f"=1-EXP(-D{row}/C{row})",
            f"Calc!F{row}": f"=A{row}-E{row}*(A{row}-Input!$B$3)",
        }
    last = STAGES + 2
    contents |= {
        "Out!B1": f"=SUM(Calc!E3:E{last})",
        "Out!B2": f"=Calc!F{last}",
        "Out!B3": "=B2+0.1*B1",
        "Out!B4": "=IF(B3>0,B3,0)",
        "Out!B5": "=B4*1.02",
        "Out!B6": "=B5-65",
    }

    def by_hand(flow: float) -> float:
        t = 150.0
        total = 0.0
        for stage in range(1, STAGES + 1):
            capacity = CAPACITIES[bisect_right(TEMPERATURES, t) - 1]
            stream = flow * capacity
            size = 0.9 + 0.01 * stage if t > 80.0 else 0.7 + 0.01 * stage
            effect = 1.0 - math.exp(-size / stream)
            total += effect
            t = t - effect * (t - 15.0)
        with_total = t + 0.1 * total
        kept = with_total if with_total > 0.0 else 0.0
        return kept * 1.02 - 65.0

    def by_numpy(flow: Any) -> Any:
        import numpy as np

        temperatures, capacities = np.array(TEMPERATURES), np.array(CAPACITIES)
        t = np.full(flow.shape, 150.0)
        total = np.zeros(flow.shape)
        for stage in range(1, STAGES + 1):
            capacity = capacities[np.searchsorted(temperatures, t, side="right") - 1]
            stream = flow * capacity
            size = np.where(t > 80.0, 0.9 + 0.01 * stage, 0.7 + 0.01 * stage)
            effect = 1.0 - np.exp(-size / stream)
            total += effect
            t = t - effect * (t - 15.0)
        with_total = t + 0.1 * total
        kept = np.where(with_total > 0.0, with_total, 0.0)
        return kept * 1.02 - 65.0

    return Bench("middle", contents, "Out!B6", "Input!B1", 0.5, 20.0, by_hand, by_numpy)


LENGTH = 100


def _long() -> Bench:
    """A relaxation marched in a hundred steps of three formulas; 4,700 other formulas beside."""
    contents: dict[str, Content] = {"March!A1": 0.4, "March!B1": 0.05, "March!C1": 1.0}
    for row in range(2, LENGTH + 2):
        before = "$C$1" if row == 2 else f"C{row - 1}"
        contents |= {
            f"March!A{row}": f"={before}*$A$1",
            f"March!B{row}": f"=SQRT(1+A{row}^2)-1",
            f"March!C{row}": f"={before}-$B$1*(B{row}+0.2*A{row})",
        }
    for row in range(1, 4701):
        contents[f"Other!A{row}"] = f"=ROW()*2+{row}"
    contents[f"March!C{LENGTH + 1}"] = str(contents[f"March!C{LENGTH + 1}"]) + "-0.3"

    def by_hand(rate: float) -> float:
        level = 1.0
        for _ in range(LENGTH):
            drive = level * rate
            bend = math.sqrt(1.0 + drive**2) - 1.0
            level = level - 0.05 * (bend + 0.2 * drive)
        return level - 0.3

    def by_numpy(rate: Any) -> Any:
        import numpy as np

        level = np.ones(rate.shape)
        for _ in range(LENGTH):
            drive = level * rate
            bend = np.sqrt(1.0 + drive**2) - 1.0
            level = level - 0.05 * (bend + 0.2 * drive)
        return level - 0.3

    residual = f"March!C{LENGTH + 1}"
    return Bench("long", contents, residual, "March!A1", 0.05, 5.0, by_hand, by_numpy)


def chains() -> tuple[Bench, ...]:
    """The three chains."""
    return _short(), _middle(), _long()
