"""The demos' roots by scipy, with the equations written by hand: nothing is read from a sheet."""

from __future__ import annotations

import math
from collections.abc import Callable

from scipy.optimize import brentq

Place = tuple[str, str, str]
Root = Callable[[], float | str]


def root(f: Callable[[float], float], low: float, high: float) -> float:
    """The root to the last digits."""
    return float(brentq(f, low, high, xtol=1e-300, rtol=8.9e-16, maxiter=500))


# -- rising main ------------------------------------------------------------------------------

LIFT, LENGTH, BORE, ROUGH, NU, LOSSES = 38.0, 1850.0, 0.2545, 5e-5, 1.31e-6, 8.5
HEAD, CURVE, G = 62.0, 3800.0, 9.81
AREA = math.pi / 4.0 * BORE**2


def flow_at(f: float) -> float:
    """Where the pump's head meets lift and losses."""
    return math.sqrt((HEAD - LIFT) / (CURVE + (f * LENGTH / BORE + LOSSES) / (2 * G * AREA**2)))


def friction(rough: float) -> float:
    """Colebrook-White along the pump's curve."""

    def residual(f: float) -> float:
        reynolds = flow_at(f) / AREA * BORE / NU
        inside = rough / (3.7 * BORE) + 2.51 / (reynolds * math.sqrt(f))
        return 1 / math.sqrt(f) + 2 * math.log10(inside)

    return root(residual, 0.008, 0.1)


def speed_ratio() -> float:
    """The affinity law, in closed form."""
    f, q = friction(ROUGH), 0.035
    need = LIFT + (f * LENGTH / BORE + LOSSES) * (q / AREA) ** 2 / (2 * G)
    return math.sqrt((need + CURVE * q**2) / HEAD)


# -- day tank ---------------------------------------------------------------------------------


def level(volume: float) -> float:
    """Cylinder of radius 1 m and 5.2 m, heads of depth 0.5 m."""
    r, depth, length = 1.0, 0.5, 5.2

    def residual(h: float) -> float:
        segment = r * r * math.acos((r - h) / r) - (r - h) * math.sqrt(2 * r * h - h * h)
        return length * segment + math.pi * depth * h * h * (1 - h / (3 * r)) - volume

    return root(residual, 0.0, 2.0)


# -- phenol reactor: mu S = D (K + S + S^2/I) is a quadratic ---------------------------------------


def substrate(sign: float) -> float:
    """The smaller (-1) or the larger (+1) root."""
    mu, k, i, d = 0.53, 0.12, 2.2, 0.3
    a, b, c = d / i, d - mu, d * k
    q = -(b + math.copysign(math.sqrt(b * b - 4 * a * c), b)) / 2
    return max(q / a, c / q) if sign > 0 else min(q / a, c / q)


# -- sludge heater ----------------------------------------------------------------------------

TABLE = {0: 4.220, 10: 4.196, 20: 4.184, 30: 4.180, 40: 4.180, 50: 4.182, 60: 4.185}
TABLE |= {70: 4.190, 80: 4.197, 90: 4.205, 100: 4.216}


def heat_at(outlet: float) -> tuple[float, float]:
    """Heat and hot stream for an outlet temperature that sets the mean."""
    mean = (88.0 + outlet) / 2
    below = int(mean // 10) * 10
    capacity = TABLE[below] + (mean - below) / 10 * (TABLE[below + 10] - TABLE[below])
    hot, cold = 3.2 * capacity, 5.1 * 4.08
    least = min(hot, cold)
    ratio, units = least / max(hot, cold), 46 * 0.42 / least
    fall = math.exp(-units * (1 - ratio))
    return (1 - fall) / (1 - ratio * fall) * least * (88.0 - 12.5), hot


def outlet() -> float:
    """The hot water's outlet temperature."""

    def residual(t: float) -> float:
        heat, hot = heat_at(t)
        return 88.0 - heat / hot - t

    return root(residual, 15.0, 80.0)


def sludge_outlet() -> float:
    """The sludge's outlet temperature at the root."""
    return 12.5 + heat_at(outlet())[0] / (5.1 * 4.08)


# -- skin plate -------------------------------------------------------------------------------


def thickness(width: float) -> float:
    """Utilisation one under the three ranges of the rule."""
    force = 780.0 * width / 600.0

    def residual(t: float) -> float:
        slender = width / t / (56.8 * math.sqrt(235 / 355))
        if slender <= 0.6:
            reduction = 1.0
        elif slender <= 1.2:
            reduction = 1.36 - 0.6 * slender
        else:
            reduction = 0.9216 / slender**2
        return force / (reduction * width * t * 355 / 1.1 / 1000) - 1

    return root(residual, 3.0, 40.0)


# -- biogas -----------------------------------------------------------------------------------


def flows(price: float) -> list[float]:
    """Yearly flows."""
    return [-3.85e6] + [640000 * price * 1.015 ** (n - 1) - 165000 for n in range(1, 13)]


def worth(rate: float, values: list[float]) -> float:
    """Net present value."""
    return sum(value / (1 + rate) ** n for n, value in enumerate(values))


def internal_rate() -> float:
    """The rate at which the project is worth nothing."""
    return root(lambda r: worth(r, flows(1.12)), 0.001, 0.5)


def break_even() -> float:
    """Linear in the price: closed form."""
    sold = sum(640000 * 1.015 ** (n - 1) / 1.06**n for n in range(1, 13))
    upkeep = sum(165000 / 1.06**n for n in range(1, 13))
    return (3.85e6 + upkeep) / sold


ROOTS: dict[Place, Root] = {
    ("pump_main.xlsx", "Main", "B27"): lambda: friction(ROUGH),
    ("pump_main.xlsx", "Main", "B32"): lambda: flow_at(friction(ROUGH)),
    ("pump_main.xlsx", "Main", "B43"): speed_ratio,
    ("pump_main.xlsx", "Main", "B45"): lambda: math.ceil(100 * speed_ratio()) / 2,
    **{
        ("pump_main.xlsx", "Main", f"G{row}"): lambda age=age: friction(ROUGH + age * 1e-5)  # type: ignore[misc]
        for row, age in enumerate([0, 5, 10, 15, 20, 30, 40, 50], start=49)
    },
    ("vessel_level.xlsx", "Tank", "B22"): lambda: level(12.0),
    **{
        ("vessel_level.xlsx", "Tank", f"G{row}"): lambda v=v: level(v)  # type: ignore[misc]
        for row, v in enumerate([2, 4, 6, 8, 10, 12, 14, 16], start=30)
    },
    ("bioreactor.xlsx", "Balance", "B21"): lambda: substrate(-1.0),
    ("bioreactor.xlsx", "Balance", "B22"): lambda: substrate(1.0),
    ("heat_exchanger.xlsx", "Exchanger", "B28"): outlet,
    ("heat_exchanger.xlsx", "Exchanger", "B29"): outlet,
    ("heat_exchanger.xlsx", "Exchanger", "B30"): outlet,
    ("heat_exchanger.xlsx", "Exchanger", "B32"): sludge_outlet,
    ("skin_plate.xlsx", "Plate", "B20"): lambda: thickness(600.0),
    **{
        ("skin_plate.xlsx", "Plate", f"G{row}"): lambda w=w: thickness(w)  # type: ignore[misc]
        for row, w in enumerate([400.0, 450.0, 500.0, 550.0, 600.0, 650.0], start=28)
    },
    ("biogas_return.xlsx", "Return", "B18"): internal_rate,
    ("biogas_return.xlsx", "Return", "B44"): break_even,
}
"""Every root by file, sheet and cell."""
