"""The look: where a residual changes sign, touches zero, faults or jumps over a bracket.

Evenly spaced trial values show the shape; every sign change between two of them is then halved
down to tell a root from a pole or a jump. What lies between two trial values without changing a
sign is not seen: the look suggests, it proves nothing.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from enum import Enum
from itertools import pairwise

from xlroot.methods import opposite
from xlroot.nature import Crossing, Nature, examine
from xlroot.stopping import Tolerance
from xlroot.values import Fault

TOUCHES = 1e-7
"""A minimum of the magnitude below this part of the largest residual counts as touching zero."""

FINE = 1e-6
"""A sign change is looked at down to this part of the spacing of trial values."""

Many = Callable[[Sequence[float]], Sequence["float | Fault"]]


class FeatureKind(Enum):
    """What the look can find."""

    CROSSING = "crosses zero"
    POLE = "changes sign through a pole"
    JUMP = "jumps over zero"
    TOUCH = "touches zero without crossing"
    FAULT = "cannot be evaluated"
    FLAT = "is exactly zero over a stretch"


@dataclass(frozen=True, slots=True)
class Feature:
    """One find, between two trial values; `fault` is what the residual shows in a fault region."""

    kind: FeatureKind
    low: float
    high: float
    fault: Fault | None = None

    def __str__(self) -> str:
        where = (
            f"near {self.low:.6g}"
            if self.kind is not FeatureKind.FAULT
            else f"from {self.low:.6g} to {self.high:.6g}"
        )
        shows = f" ({self.fault})" if self.fault is not None else ""
        return f"{self.kind.value} {where}{shows}"


@dataclass(frozen=True, slots=True)
class Look:
    """The residual at evenly spaced trial values, and what they show, in x order."""

    samples: tuple[tuple[float, float | Fault], ...]
    features: tuple[Feature, ...]

    @property
    def brackets(self) -> tuple[tuple[float, float], ...]:
        """Intervals between trial values that hold a root as far as the look can tell."""
        spacing = self.samples[1][0] - self.samples[0][0] if len(self.samples) > 1 else 0.0
        low, high = self.samples[0][0], self.samples[-1][0]
        return tuple(
            (max(low, each.low - spacing), min(high, each.high + spacing))
            for each in self.features
            if each.kind is FeatureKind.CROSSING
        )

    def describe(self) -> str:
        """What a refusal says of the bracket."""
        if not self.features:
            return f"a look at {len(self.samples)} values over the bracket shows no sign change"
        shown = "; ".join(map(str, self.features[:4]))
        more = len(self.features) - 4
        tail = f"; and {more} more" if more > 0 else ""
        return f"a look over the bracket shows that the residual {shown}{tail}"


def look(values_at: Many, low: float, high: float, *, points: int = 201) -> Look:
    """The look over [low, high] with `points` trial values."""
    width = high - low
    xs = [low + width * step / (points - 1) for step in range(points - 1)]
    xs.append(high)
    samples = tuple(zip(xs, values_at(xs), strict=True))
    numbers = [abs(value) for _, value in samples if isinstance(value, float)]
    largest = max(numbers, default=0.0)

    def one(x: float) -> float | Fault:
        return values_at((x,))[0]

    features = [
        *_faults(samples),
        *_flats(samples),
        *_signs(one, samples, largest),
        *_touches(one, samples, largest),
    ]
    features.sort(key=lambda feature: feature.low)
    return Look(samples, tuple(features))


def _faults(samples: Sequence[tuple[float, float | Fault]]) -> list[Feature]:
    found: list[Feature] = []
    start: float | None = None
    last: tuple[float, Fault] | None = None
    for x, value in samples:
        if isinstance(value, Fault):
            start = x if start is None else start
            last = (x, value)
        elif start is not None and last is not None:
            found.append(Feature(FeatureKind.FAULT, start, last[0], last[1]))
            start = last = None
    if start is not None and last is not None:
        found.append(Feature(FeatureKind.FAULT, start, last[0], last[1]))
    return found


def _flats(samples: Sequence[tuple[float, float | Fault]]) -> list[Feature]:
    """Exact zeros at trial values: two or more together are a stretch; a single one is a
    crossing, unless the residual has the same sign on both sides."""
    found: list[Feature] = []
    start = 0
    while start < len(samples):
        end = start
        while end < len(samples) and _is_zero(samples[end][1]):
            end += 1
        if end - start > 1:
            found.append(Feature(FeatureKind.FLAT, samples[start][0], samples[end - 1][0]))
        elif end - start == 1:
            x = samples[start][0]
            around = [value for _, value in (*samples[start - 1 : start], *samples[end : end + 1])]
            same = len({value > 0.0 for value in around if isinstance(value, float)}) == 1
            touches = same and len(around) == 2
            found.append(Feature(FeatureKind.TOUCH if touches else FeatureKind.CROSSING, x, x))
        start = end + 1
    return found


def _is_zero(value: float | Fault) -> bool:
    return isinstance(value, float) and value == 0.0


_KINDS = {
    Nature.ROOT: FeatureKind.CROSSING,
    Nature.ROUNDING: FeatureKind.CROSSING,
    Nature.POLE: FeatureKind.POLE,
    Nature.JUMP: FeatureKind.JUMP,
    Nature.FAULT: FeatureKind.POLE,
}


def _signs(
    one: Callable[[float], float | Fault],
    samples: Sequence[tuple[float, float | Fault]],
    largest: float,
) -> list[Feature]:
    found = []
    for (x0, y0), (x1, y1) in pairwise(samples):
        if not isinstance(y0, float) or not isinstance(y1, float) or not opposite(y0, y1):
            continue
        crossing = Crossing(x0, x1, y0, y1)
        ends = ((x0, largest), (x1, largest))
        nature, _ = examine(one, crossing, ends, (), Tolerance(FINE * (x1 - x0)))
        found.append(Feature(_KINDS[nature], *_narrowed(one, x0, x1, y0)))
    return found


def _narrowed(
    one: Callable[[float], float | Fault], low: float, high: float, f_low: float
) -> tuple[float, float]:
    """A sign change narrowed by twenty halvings, enough to name the place."""
    for _ in range(20):
        x = low + (high - low) / 2.0
        value = one(x)
        if isinstance(value, Fault) or value == 0.0:
            return x, x
        if (value < 0.0) == (f_low < 0.0):
            low = x
        else:
            high = x
    return low, high


def _touches(
    one: Callable[[float], float | Fault],
    samples: Sequence[tuple[float, float | Fault]],
    largest: float,
) -> list[Feature]:
    """Minima of the magnitude that reach zero without a change of sign, by golden section."""
    found = []
    for (a, fa), (b, fb), (c, fc) in zip(samples, samples[1:], samples[2:], strict=False):
        values = [value for value in (fa, fb, fc) if isinstance(value, float)]
        if len(values) < 3 or not all(value < 0.0 for value in values) ^ all(
            value > 0.0 for value in values
        ):
            continue
        if not abs(values[0]) > abs(values[1]) <= abs(values[2]):
            continue
        x, least = _least(one, a, c, abs(values[1]), b)
        if least <= TOUCHES * largest:
            found.append(Feature(FeatureKind.TOUCH, x, x))
    return found


def _least(
    one: Callable[[float], float | Fault], low: float, high: float, best: float, at: float
) -> tuple[float, float]:
    ratio = (5.0**0.5 - 1.0) / 2.0
    for _ in range(45):
        span = ratio * (high - low)
        left, right = high - span, low + span
        f_left, f_right = one(left), one(right)
        if isinstance(f_left, Fault) or isinstance(f_right, Fault):
            break
        if abs(f_left) < abs(f_right):
            high = right
            if abs(f_left) < best:
                best, at = abs(f_left), left
        else:
            low = left
            if abs(f_right) < best:
                best, at = abs(f_right), right
    return at, best
