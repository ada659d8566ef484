"""Roots against reference libraries, tables and closed forms, each with its source beside it.

A sheet is set up for every check and solved through the whole story; the expected value comes from
outside: a library's own algorithm, a published table, or a closed form.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import NamedTuple

import fluids
import iapws
import numpy as np
import numpy_financial
import pytest
import scipy.special
import scipy.stats
from CoolProp.CoolProp import PropsSI

import xlroot
from xlroot.hosts.memory import Content, book_of


class Check(NamedTuple):
    """A sheet with the unknown in B1 and the residual in B2, and what has to come out."""

    name: str
    cells: dict[str, Content]
    low: float
    high: float
    expected: Callable[[], float]
    source: str
    agreement: float = 1e-11


def colebrook(reynolds: float, rough: float) -> Check:
    return Check(
        f"friction factor, Re {reynolds:g}, relative roughness {rough:g}",
        {"C1": reynolds, "C2": rough, "B2": "=1/SQRT(B1)+2*LOG10(C2/3.7+2.51/(C1*SQRT(B1)))"},
        0.004,
        0.2,
        lambda: fluids.friction.Colebrook(reynolds, rough),
        "fluids.friction.Colebrook (Lambert W form)",
    )


def normal_depth(width: float, flow: float, slope: float, n: float) -> Check:
    """Rectangular channel: Manning's velocity by fluids, continuity solved in the sheet."""

    def expected() -> float:
        low, high = 1e-3, 50.0
        for _ in range(200):
            y = (low + high) / 2.0
            radius = width * y / (width + 2.0 * y)
            full = fluids.open_flow.V_Manning(radius, slope, n) * width * y
            low, high = (y, high) if full < flow else (low, y)
        return (low + high) / 2.0

    return Check(
        f"normal depth, {width:g} m wide, {flow:g} m3/s",
        {
            "C1": width,
            "C2": flow,
            "C3": slope,
            "C4": n,
            "D1": "=C1*B1",
            "D2": "=D1/(C1+2*B1)",
            "B2": "=D1*D2^(2/3)*SQRT(C3)/C4-C2",
        },
        0.01,
        20.0,
        expected,
        "fluids.open_flow.V_Manning, halved by hand",
    )


def saturation(temperature: float) -> Check:
    """IAPWS-IF97 region 4 (R7-97(2012), section 8.1) solved for pressure, table 35's points."""
    from tests.reference.sheets import steam

    return Check(
        f"saturation pressure of water at {temperature:g} K",
        dict(steam(str(temperature), "B1")),
        1e-4,
        15.0,
        lambda: iapws.iapws97._PSat_T(temperature),
        "iapws 1.5: IAPWS-IF97 equation 30; table 35",
    )


def boiling(pressure: float) -> Check:
    """The same equation solved for temperature, against a Helmholtz equation of state."""
    from tests.reference.sheets import steam

    return Check(
        f"boiling point of water at {pressure:g} MPa",
        dict(steam("B1", str(pressure))),
        280.0,
        640.0,
        lambda: PropsSI("T", "P", pressure * 1e6, "Q", 0, "Water"),
        "CoolProp, IAPWS-95 (the two formulations agree to about 1e-5)",
        3e-5,
    )


def kepler(eccentricity: float, anomaly: float) -> Check:
    """Kepler's equation, against its Bessel series (Watson, Bessel Functions, section 17.2)."""

    def expected() -> float:
        n = np.arange(1, 400)
        series = scipy.special.jv(n, n * eccentricity) * np.sin(n * anomaly) / n
        return float(anomaly + 2.0 * series.sum())

    return Check(
        f"Kepler's equation, e {eccentricity:g}, M {anomaly:g}",
        {"C1": eccentricity, "C2": anomaly, "B2": "=B1-C1*SIN(B1)-C2"},
        0.0,
        math.pi,
        expected,
        "Bessel series by scipy.special.jv",
    )


def quantile(
    name: str, formula: str, expected: Callable[[], float], low: float, high: float
) -> Check:
    return Check(name, {"B2": formula}, low, high, expected, "scipy.stats", 1e-9)


def diode(supply: float, saturation_current: float, resistance: float) -> Check:
    """I = (Vt/R) W(Is R/Vt exp((V + Is R)/Vt)) - Is: T. C. Banwell and A. Jayakumar, Electron.
    Lett. 36 (2000) 291."""
    vt = 0.025852

    def expected() -> float:
        argument = saturation_current * resistance / vt
        argument *= math.exp((supply + saturation_current * resistance) / vt)
        w = float(scipy.special.lambertw(argument).real)
        return vt / resistance * w - saturation_current

    return Check(
        f"diode with {resistance:g} ohm at {supply:g} V",
        {
            "C1": supply,
            "C2": saturation_current,
            "C3": resistance,
            "C4": vt,
            "B2": "=C2*(EXP((C1-B1*C3)/C4)-1)-B1",
        },
        0.0,
        supply / resistance,
        expected,
        "Lambert W closed form by scipy.special",
    )


FLOWS = [-1200.0, 310.0, 420.0, 380.0, 290.0, 160.0]

CHECKS = [
    *(colebrook(re, rough) for re in (4e3, 1e5, 1e7) for rough in (0.0, 1e-4, 0.03)),
    normal_depth(3.0, 5.0, 0.001, 0.013),
    normal_depth(10.0, 60.0, 0.0004, 0.025),
    normal_depth(1.2, 0.4, 0.01, 0.012),
    *(saturation(t) for t in (300.0, 500.0, 600.0)),
    *(boiling(p) for p in (0.1, 1.0, 10.0)),
    *(kepler(e, m) for e, m in ((0.0167, 1.0), (0.3, 2.5), (0.7, 0.6))),
    *(diode(v, 1e-12, r) for v, r in ((0.8, 10.0), (5.0, 1000.0), (1.2, 47.0))),
    Check(
        "Wien's displacement",
        {"B2": "=5*(1-EXP(-B1))-B1"},
        1.0,
        10.0,
        lambda: 4.965114231744276,
        "OEIS A094090 (from memory); 5 + W(-5 exp(-5))",
    ),
    Check("cos x = x", {"B2": "=COS(B1)-B1"}, 0.0, 1.0, lambda: 0.7390851332151607, "OEIS A003957"),
    Check(
        "first zero of J0",
        {"B2": "=BESSELJ(B1,0)"},
        1.0,
        4.0,
        lambda: float(scipy.special.jn_zeros(0, 1)[0]),
        "2.404825557695773: Abramowitz and Stegun, table 9.5; scipy.special.jn_zeros",
    ),
    Check(
        "first zero of J1",
        {"B2": "=BESSELJ(B1,1)"},
        2.0,
        5.0,
        lambda: float(scipy.special.jn_zeros(1, 1)[0]),
        "scipy.special.jn_zeros; Abramowitz and Stegun, table 9.5",
    ),
    Check(
        "internal rate of return",
        {**{f"C{n}": f for n, f in enumerate(FLOWS, 1)}, "B2": "=C1+NPV(B1,C2:C6)"},
        0.0,
        1.0,
        lambda: float(numpy_financial.irr(FLOWS)),
        "numpy_financial.irr",
    ),
    Check(
        "rate of a loan",
        {"B2": "=PMT(B1/12,120,100000)+1161.08"},
        0.001,
        0.5,
        lambda: 12.0 * float(numpy_financial.rate(120, -1161.08, 100000.0, 0.0, tol=1e-14)),
        "numpy_financial.rate",
        1e-9,
    ),
    quantile("normal 99 %", "=NORM.S.DIST(B1,TRUE)-0.99", lambda: scipy.stats.norm.ppf(0.99), 0, 5),
    quantile("t, 7 degrees", "=T.DIST(B1,7,TRUE)-0.975", lambda: scipy.stats.t.ppf(0.975, 7), 0, 9),
    quantile(
        "chi-square, 12",
        "=CHISQ.DIST(B1,12,TRUE)-0.95",
        lambda: scipy.stats.chi2.ppf(0.95, 12),
        1,
        60,
    ),
    quantile(
        "F, 4 and 9", "=F.DIST(B1,4,9,TRUE)-0.9", lambda: scipy.stats.f.ppf(0.9, 4, 9), 0.1, 30
    ),
    quantile(
        "gamma",
        "=GAMMA.DIST(B1,2.5,3,TRUE)-0.8",
        lambda: scipy.stats.gamma.ppf(0.8, 2.5, scale=3),
        0,
        60,
    ),
    quantile("beta", "=BETA.DIST(B1,2,5,TRUE)-0.6", lambda: scipy.stats.beta.ppf(0.6, 2, 5), 0, 1),
    quantile(
        "Weibull",
        "=WEIBULL.DIST(B1,1.7,20,TRUE)-0.1",
        lambda: scipy.stats.weibull_min.ppf(0.1, 1.7, scale=20),
        0.01,
        60,
    ),
]


def test_there_are_thirty_checks() -> None:
    assert len(CHECKS) >= 30
    assert len({check.name for check in CHECKS}) == len(CHECKS)


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: check.name)
def test_the_root_is_the_reference_s(check: Check) -> None:
    book = book_of({"B1": (check.low + check.high) / 2.0, **check.cells})
    record = xlroot.solve(book, residual="B2", unknown="B1", low=check.low, high=check.high)
    assert record.root is not None, record.verdict.reason
    assert record.root == pytest.approx(check.expected(), rel=check.agreement), check.source


@pytest.mark.parametrize(
    ("tolerance", "count"),
    # Burden and Faires, Numerical Analysis, section 2.1: x^3 + 4x^2 - 10 on [1, 2] needs at least
    # 10 halvings for 10^-3 and 17 for 10^-5 (from memory); the others follow from the formula.
    [(1e-3, 10), (1e-5, 17), (2.0**-10, 10), (0.5, 1), (0.3, 2)],
)
def test_bisection_takes_the_textbook_s_count(tolerance: float, count: int) -> None:
    record = xlroot.solve(
        book_of({"B1": 1, "B2": "=B1^3+4*B1^2-10"}),
        residual="B2",
        unknown="B1",
        low=1,
        high=2,
        method="bisection",
        tolerance=tolerance,
    )
    assert record.predicted_iterations == count
    assert record.iterations == count
    assert record.root is not None
    assert abs(record.root - 1.365230013414097) <= tolerance
