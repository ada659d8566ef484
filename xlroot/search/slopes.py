"""Slopes and curvatures for the methods that need them: given, or by differences."""

from __future__ import annotations

from xlroot.methods import Need, Sample
from xlroot.search.trail import Residual
from xlroot.values import Fault


class Slopes:
    """Slopes and curvatures by differences; counts what they cost."""

    def __init__(
        self, f: Residual, low: float, high: float, need: Need, slope: Residual | None
    ) -> None:
        self.f, self.low, self.high, self.need, self.slope = f, low, high, need, slope
        self.count = 0

    @property
    def note(self) -> str | None:
        """How slopes and curvatures were taken, where a method asked for them."""
        if self.need is Need.VALUE:
            return None
        if self.slope is None:
            wanted = "slope" if self.need is Need.SLOPE else "slope and curvature"
            return f"{wanted} by central difference"
        return None if self.need is Need.SLOPE else "curvature by central difference"

    def at(self, x: float, y: float) -> Sample | None:
        """The slope that was given, or central differences, moved inside the limits near an end;
        None at a fault.

        The step balances truncation against rounding: eps^(1/3) for a slope, eps^(1/4) where a
        curvature is wanted as well (R. J. LeVeque, Finite Difference Methods, section 1.2, from
        memory).
        """
        scale = max(abs(x), 1e-3 * (self.high - self.low))
        step = scale * (6e-6 if self.need is Need.SLOPE else 1.2e-4)
        step = min(step, 0.25 * (self.high - self.low))
        middle = min(max(x, self.low + step), self.high - step)
        if self.slope is not None:
            return self._exact(self.slope, x, y, middle, step)
        left, right = self.f(middle - step), self.f(middle + step)
        self.count += 2
        if isinstance(left, Fault) or isinstance(right, Fault):
            return None
        slope = (right - left) / (2.0 * step)
        curvature = 0.0
        if self.need is Need.CURVATURE:
            center: float | Fault = y
            if middle != x:
                center = self.f(middle)
                self.count += 1
            if isinstance(center, Fault):
                return None
            curvature = (right - 2.0 * center + left) / (step * step)
        return Sample(y, slope + curvature * (x - middle), curvature)

    def _exact(
        self, slope: Residual, x: float, y: float, middle: float, step: float
    ) -> Sample | None:
        here = slope(x)
        if isinstance(here, Fault):
            return None
        if self.need is Need.SLOPE:
            return Sample(y, here)
        left, right = slope(middle - step), slope(middle + step)
        if isinstance(left, Fault) or isinstance(right, Fault):
            return None
        return Sample(y, here, (right - left) / (2.0 * step))
