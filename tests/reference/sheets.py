"""The published solves as sheets: the unknown in B1, the residual in B2, inputs from column C.

Most residuals are published as one formula of named quantities; each name becomes a cell. The
others (a chain of cells, a vector) are written out here, with their equations' source.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Any

from xlroot.hosts.memory import Content

Cells = dict[str, Content]
_NAME = re.compile(r"(?<![\w.\"])[A-Za-z_]\w*(?![\w.(])")


def one_formula(residual: str, inputs: dict[str, Any], unknown: str) -> Cells:
    """A residual of named quantities, with a cell for each."""
    cells: Cells = {"B1": 1.0}
    places = {unknown: "B1"}
    for row, (name, value) in enumerate(inputs.items(), start=1):
        places[name] = f"C{row}"
        cells[f"C{row}"] = float(value)
    constants = {"TRUE", "FALSE"}
    cells["B2"] = _NAME.sub(
        lambda found: found[0] if found[0] in constants else places[found[0]], residual
    )
    return cells


def steam(temperature: str, pressure: str) -> Cells:
    """IAPWS-IF97 (R7-97, 2012), section 8: equations 29 and 30 of region 4, table 34, as cells."""
    n = [
        0.11670521452767e4,
        -0.72421316703206e6,
        -0.17073846940092e2,
        0.12020824702470e5,
        -0.32325550322333e7,
        0.14915108613530e2,
        -0.48232657361591e4,
        0.40511340542057e6,
        -0.23855557567849,
        0.65017534844798e3,
    ]
    cells: Cells = {f"D{row}": value for row, value in enumerate(n, start=1)}
    cells |= {
        "E1": f"={temperature}+D9/({temperature}-D10)",
        "E2": "=E1^2+D1*E1+D2",
        "E3": "=D3*E1^2+D4*E1+D5",
        "E4": "=D6*E1^2+D7*E1+D8",
        "B2": f"=(2*E4/(-E3+SQRT(E3^2-4*E2*E4)))^4-{pressure}",
    }
    return cells


def terminal_velocity(inputs: dict[str, Any]) -> Cells:
    """Settling of a sphere with the drag of Barati, Neyshabouri and Ahmadi, Powder Technol. 257
    (2014) 11-19, equation (22), the form for Reynolds numbers below 2e5 (as in fluids 1.3.1)."""
    return {
        "B1": 0.01,
        "C1": inputs["D"],
        "C2": inputs["rhop"],
        "C3": inputs["rho"],
        "C4": inputs["mu"],
        "D1": "=C3*B1*C1/C4",
        "D2": "=5.4856E9*TANH(4.3774E-9/D1)+0.0709*TANH(700.6574/D1)+0.3894*TANH(74.1539/D1)"
        "-0.1198*TANH(7429.0843/D1)+1.7174*TANH(9.9851/(D1+2.3384))+0.4744",
        "B2": "=B1-SQRT(4/3*9.80665*C1*(C2-C3)/(D2*C3))",
    }


def orifice(inputs: dict[str, Any]) -> Cells:
    """ISO 5167-2:2003 section 5.3.2: Reader-Harris/Gallagher equation (4) with D and D/2 tappings,
    expansibility factor equation (5)."""
    return {
        "B1": 7.0,
        "C1": inputs["D"],
        "C2": inputs["Do"],
        "C3": inputs["P1"],
        "C4": inputs["P2"],
        "C5": inputs["rho"],
        "C6": inputs["mu"],
        "C7": inputs["k"],
        "D1": "=C2/C1",
        "D2": "=4*B1/(PI()*C6*C1)",
        "D3": "=(19000*D1/D2)^0.8",
        "D4": 1.0,
        "D5": 0.47,
        "D6": "=2*D5/(1-D1)",
        "D7": "=D1^4/(1-D1^4)",
        "D8": "=0.5961+0.0261*D1^2-0.216*D1^8+0.000521*(1E6*D1/D2)^0.7"
        "+(0.0188+0.0063*D3)*D1^3.5*(1E6/D2)^0.3"
        "+(0.043+0.08*EXP(-10*D4)-0.123*EXP(-7*D4))*(1-0.11*D3)*D7"
        "-0.031*(D6-0.8*D6^1.1)*D1^1.3+IF(C1<0.07112,0.011*(0.75-D1)*(2.8-C1/0.0254),0)",
        "D9": "=1-(0.351+0.256*D1^4+0.93*D1^8)*(1-(C4/C3)^(1/C7))",
        "B2": "=D8*D9*PI()/4*C2^2*SQRT(2*C5*(C3-C4))/SQRT(1-D1^4)-B1",
    }


def peng_robinson(inputs: dict[str, Any]) -> Cells:
    """D.-Y. Peng and D. B. Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59-64: equal fugacity
    coefficients of both phases; the cubic's outer roots by the trigonometric form."""
    return {
        "B1": 1_000_000.0,
        "C1": inputs["T"],
        "C2": inputs["Tc"],
        "C3": inputs["Pc"],
        "C4": inputs["omega"],
        "C5": 8.31446261815324,
        # The published 0.45724 and 0.07780 to all digits (as in thermo 0.6.1).
        "C6": 0.457235528921382,
        "C7": 0.0777960739038885,
        "D1": "=0.37464+1.54226*C4-0.26992*C4^2",
        "D2": "=C6*C5^2*C2^2/C3*(1+D1*(1-SQRT(C1/C2)))^2",
        "D3": "=C7*C5*C2/C3",
        "E1": "=D2*B1/(C5*C1)^2",
        "E2": "=D3*B1/(C5*C1)",
        "E3": "=E2-1",
        "E4": "=E1-3*E2^2-2*E2",
        "E5": "=-(E1*E2-E2^2-E2^3)",
        "F1": "=(E3^2-3*E4)/9",
        "F2": "=(2*E3^3-9*E3*E4+27*E5)/54",
        "F3": "=ACOS(F2/SQRT(F1^3))",
        "F4": "=-2*SQRT(F1)*COS(F3/3)-E3/3",
        "F5": "=-2*SQRT(F1)*COS((F3+2*PI())/3)-E3/3",
        "G1": "=MIN(F4,F5)",
        "G2": "=MAX(F4,F5)",
        "G3": "=G1-1-LN(G1-E2)-E1/(2*SQRT(2)*E2)*LN((G1+(1+SQRT(2))*E2)/(G1+(1-SQRT(2))*E2))",
        "G4": "=G2-1-LN(G2-E2)-E1/(2*SQRT(2)*E2)*LN((G2+(1+SQRT(2))*E2)/(G2+(1-SQRT(2))*E2))",
        "B2": "=G3-G4",
    }


def rachford_rice(inputs: dict[str, Any]) -> Cells:
    """H. H. Rachford and J. D. Rice, J. Pet. Technol. 4 (1952) 19: an array inside SUMPRODUCT."""
    cells: Cells = {"B1": 0.5, "B2": "=SUMPRODUCT(C1:C3*(D1:D3-1)/(1+B1*(D1:D3-1)))"}
    for row, (z, k) in enumerate(zip(inputs["zs"], inputs["Ks"], strict=True), start=1):
        cells |= {f"C{row}": z, f"D{row}": k}
    return cells


def butler_volmer(inputs: dict[str, Any]) -> Cells:
    """J. Newman, Electrochemical Systems, equation 8.23; Faraday and gas constants CODATA 2018."""
    return {
        "B1": 0.1,
        "C1": inputs["i0"],
        "C2": inputs["i"],
        "C3": inputs["T"],
        "C4": 96485.33212,
        "C5": 8.314462618,
        "B2": "=C1*(EXP(0.5*C4*B1/(C5*C3))-EXP(-0.5*C4*B1/(C5*C3)))-C2",
    }


def flame(inputs: dict[str, Any]) -> Cells:
    """Adiabatic flame temperature of methane and air: enthalpies of the products by the gas
    equation of G. J. Kabo and G. N. Roganov, Thermodynamics of Organic Compounds in the Gas State
    (1994), integrated in closed form; a0 to a7 stand in D to K, amounts in L, formation in M."""
    cells: Cells = {"B1": 2000.0, "C1": inputs["T0"], "C2": 8.31446261815324}
    for row, (name, values) in enumerate(inputs["coefs"].items(), start=1):
        for column, value in zip("DEFGHIJK", values, strict=True):
            cells[f"{column}{row}"] = value
        amount = {"CO2": 1.0, "H2O": 2.0, "N2": inputs["N2_per_CH4"]}[name]
        cells |= {f"L{row}": amount, f"M{row}": inputs["hf"].get(name, 0.0)}
        for temperature, (y, h) in {"B1": "OP", "C1": "QR"}.items():
            t, a = temperature, {n: f"{column}{row}" for n, column in enumerate("DEFGHIJK")}
            z = f"{y}{row}"
            cells[z] = f"=IF({t}<={a[7]},0,({t}-{a[7]})/({t}+{a[6]}))"
            cells[f"{h}{row}"] = (
                f"=C2*({a[0]}*{t}+{a[1]}*EXP(-{a[2]}/{t})/{a[2]}+({a[6]}+{a[7]})*("
                f"(2*{a[3]}+8*{a[4]})*LN(1-{z})"
                f"+({a[3]}*(1+1/(1-{z}))+{a[4]}*(7+1/(1-{z})))*{z}"
                f"+{a[4]}*(3*{z}^2+5/3*{z}^3+{z}^4+0.6*{z}^5+1/3*{z}^6)"
                f"+1/7*({a[4]}-{a[5]}/({a[6]}+{a[7]})^2)*{z}^7))"
            )
        cells[f"N{row}"] = f"=M{row}+P{row}-R{row}"
    cells["B2"] = f"=SUMPRODUCT(L1:L3,N1:N3)-({inputs['hf']['CH4']})"
    return cells


def cash(inputs: dict[str, Any]) -> Cells:
    """Cash flows in C1 and below."""
    cells: Cells = {f"C{row}": value for row, value in enumerate(inputs["cashflows"], start=1)}
    return {"B1": 0.1, **cells}


def net_worth(inputs: dict[str, Any]) -> Cells:
    """Net present value of cash flows one period apart."""
    return {**cash(inputs), "B2": "=NPV(B1,C2:C5)+C1"}


def two_rates(inputs: dict[str, Any]) -> Cells:
    """Cash flows with two internal rates of return, 10 % and 20 %."""
    return {**cash(inputs), "B2": "=C1+C2/(1+B1)+C3/(1+B1)^2"}


def bond(inputs: dict[str, Any]) -> Cells:
    """The yield at which a bond's price is the one paid."""
    del inputs
    dates = "DATE(2008,2,15),DATE(2016,11,15)"
    return {"B1": 0.05, "B2": f"=PRICE({dates},0.0575,B1,100,2,0)-95.04287"}


def bubble(inputs: dict[str, Any]) -> Cells:
    """Bubble point by Antoine's equation (log10, mmHg, degrees Celsius) and Raoult's law."""
    cells: Cells = {"B1": 90.0, "C1": inputs["x1"], "C2": inputs["P"]}
    for column, name in (("D", "benzene"), ("E", "toluene")):
        cells |= {f"{column}{row}": value for row, value in enumerate(inputs[name], start=1)}
    cells["B2"] = "=C1*10^(D1-D2/(D3+B1))+(1-C1)*10^(E1-E2/(E3+B1))-C2"
    return cells


def weak_acid(inputs: dict[str, Any]) -> Cells:
    """Charge balance of a weak acid."""
    return {
        "B1": 3.0,
        "C1": inputs["Ca"],
        "C2": inputs["pKa"],
        "C3": inputs["Kw"],
        "C4": "=10^-C2",
        "B2": "=10^-B1-C3/10^-B1-C1*C4/(C4+10^-B1)",
    }


def insulation(inputs: dict[str, Any]) -> Cells:
    """Heat loss of an insulated pipe, per length: conduction and a film in series."""
    return {
        "B1": 0.05,
        "C1": inputs["k"],
        "C2": inputs["h"],
        "C3": inputs["r1"],
        "C4": inputs["dT"],
        "C5": inputs["q_per_m"],
        "B2": "=2*PI()*C4/(LN(B1/C3)/C1+1/(C2*B1))-C5",
    }


def weibull(inputs: dict[str, Any]) -> Cells:
    """The maximum-likelihood equation of a Weibull shape; logarithms in a column beside."""
    cells: Cells = {"B1": 1.0}
    for row, value in enumerate(inputs["data"], start=1):
        cells |= {f"C{row}": value, f"D{row}": f"=LN(C{row})"}
    last = len(inputs["data"])
    x, log = f"C1:C{last}", f"D1:D{last}"
    cells["B2"] = f"=SUMPRODUCT({x}^B1,{log})/SUMPRODUCT({x}^B1)-1/B1-AVERAGE({log})"
    return cells


def psat(inputs: dict[str, Any]) -> Cells:
    """The saturation pressure at a temperature: the root in pressure of region 4."""
    return {"B1": 1.0, **steam(str(inputs["T"]), "B1")}


def tsat(inputs: dict[str, Any]) -> Cells:
    """The saturation temperature at a pressure: the root in temperature of region 4."""
    return {"B1": 400.0, **steam("B1", inputs["p_MPa"])}


_COLEBROOK = "=1/SQRT(f)+2*LOG10(eD/3.7+2.51/(Re*SQRT(f)))"
_SHOCK = (
    "=DEGREES(ATAN(2/TAN(RADIANS(b))*(M^2*SIN(RADIANS(b))^2-1)"
    "/(M^2*(gamma+COS(2*RADIANS(b)))+2)))-theta"
)
_PROJECTILE = "=R*TAN(RADIANS(t))-g*R^2/(2*v^2*COS(RADIANS(t))^2)-h"

STATED: dict[str, tuple[str, str]] = {
    "math.wallis_cubic": ("x", "=x^3-2*x-5"),
    "math.leonardo_cubic": ("x", "=x^3+2*x^2+10*x-20"),
    "math.omega": ("x", "=x*EXP(x)-1"),
    "math.cosx_eq_x": ("x", "=COS(x)-x"),
    "math.wien_frequency": ("x", "=3*(1-EXP(-x))-x"),
    "math.wien_wavelength": ("x", "=5*(1-EXP(-x))-x"),
    "struct.clamped_mode1": ("x", "=COS(x)*COSH(x)-1"),
    "struct.secant_column": ("P", "=P/A*(1+e*c/r^2/COS(L/(2*r)*SQRT(P/(E*A))))-sy"),
    "struct.beam_depth": ("d", "=5*w*L^4/(384*E*(b*d^3/12))-L/ratio"),
    "struct.euler_half_yield": ("s", "=PI()^2*E/s^2-sy/2"),
    "struct.catenary_from_sag": ("a", "=a*(COSH(span/(2*a))-1)-sag"),
    "geo.Nq30": ("p", "=EXP(PI()*TAN(RADIANS(p)))*TAN(RADIANS(45+p/2))^2-Nq"),
    "mach.involute20": ("p", "=TAN(RADIANS(p))-RADIANS(p)-inv"),
    "hyd.colebrook_Re1e+08_eD1e-06": ("f", _COLEBROOK),
    "hyd.colebrook_Re4000_eD0.05": ("f", _COLEBROOK),
    "hyd.colebrook_Re50000_eD0": ("f", _COLEBROOK),
    "hyd.pipe_velocity_given_head": (
        "V",
        "=V+2*SQRT(2*g*D*hf/L)*LOG10(eD/3.7+2.51*nu/(D*SQRT(2*g*D*hf/L)))",
    ),
    "hyd.manning_normal_depth": (
        "y",
        "=k/n*((b+z*y)*y)*(((b+z*y)*y)/(b+2*y*SQRT(1+z^2)))^(2/3)*SQRT(S0)-Q",
    ),
    "hyd.alternate_depth_sub": ("y", "=y+q^2/(2*g*y^2)-E"),
    "fluid.isothermal_gas_P2": (
        "P2",
        "=(PI()/4*D^2)^2*rho/P1*(P1^2-P2^2)/(fd*L/D+2*LN(P1/P2))-m^2",
    ),
    "gas.oblique_shock_weak": ("b", _SHOCK),
    "gas.oblique_shock_strong": ("b", _SHOCK),
    "gas.prandtl_meyer": (
        "M",
        "=DEGREES(SQRT((gamma+1)/(gamma-1))*ATAN(SQRT((gamma-1)/(gamma+1)*(M^2-1)))"
        "-ATAN(SQRT(M^2-1)))-nu_deg",
    ),
    "gas.fanno": (
        "M",
        "=(1-M^2)/(gamma*M^2)+(gamma+1)/(2*gamma)*LN((gamma+1)*M^2/(2+(gamma-1)*M^2))-fLD",
    ),
    "thermo.vdw_CO2_100atm": ("v", "=(p+a/v^2)*(v-b)-R*T"),
    "elec.diode_series_R": ("I", "=Is*(EXP((V-I*Rs)/(n*Vt))-1)-I"),
    "heat.eigen_wall10_Bi10": ("z", "=z*TAN(z)-Bi"),
    "heat.eigen_sphere_Bi1": ("z", "=1-z/TAN(z)-Bi"),
    "heat.surface_balance": ("T", "=eps*5.670374419E-8*(T^4-Tsur^4)+h*(T-Tinf)-q"),
    "astro.kepler_high_e": ("E", "=E-e*SIN(E)-M"),
    "astro.kepler_meeus": ("E", "=E-e*SIN(E)-RADIANS(M_deg)"),
    "mech.projectile_low": ("t", _PROJECTILE),
    "mech.projectile_high": ("t", _PROJECTILE),
    "mech.parachutist_c": ("c", "=g*m/c*(1-EXP(-c/m*t))-v"),
    "stat.F_95_5_10": ("x", "=F.DIST(x,d_1,d_2,TRUE)-p"),
    "stat.normal_975": ("z", "=NORM.S.DIST(z,TRUE)-p"),
    "stat.clopper_lower": ("p", "=1-BINOM.DIST(x-1,n,p,TRUE)-(1-conf)/2"),
    "stat.clopper_upper": ("p", "=BINOM.DIST(x,n,p,TRUE)-(1-conf)/2"),
}
"""The unknown and the residual of every case that is one formula."""

WRITTEN_OUT: dict[str, Callable[[dict[str, Any]], Cells]] = {
    "hyd.orifice_iso5167": orifice,
    "fluid.terminal_velocity": terminal_velocity,
    "steam.if97_psat_300": psat,
    "steam.if97_psat_500": psat,
    "steam.if97_Tsat_10MPa": tsat,
    "steam.if97_Tsat_0.1MPa": tsat,
    "thermo.PR_psat_propane_300K": peng_robinson,
    "chem.bubble_benzene_toluene": bubble,
    "chem.weak_acid_pH": weak_acid,
    "chem.rachford_rice": rachford_rice,
    "chem.butler_volmer": butler_volmer,
    "comb.methane_air_flame_T": flame,
    "heat.insulation_radius": insulation,
    "fin.irr": net_worth,
    "fin.irr_two_roots": two_rates,
    "fin.bond_yield": bond,
    "stat.weibull_shape_ball_bearing": weibull,
}
"""The cases that are a chain of cells."""


def sheet(identifier: str, inputs: dict[str, Any]) -> Cells:
    """The sheet of a case."""
    if identifier in STATED:
        unknown, residual = STATED[identifier]
        renamed = {name.replace("d1", "d_1").replace("d2", "d_2"): v for name, v in inputs.items()}
        return one_formula(residual, renamed, unknown)
    return WRITTEN_OUT[identifier](inputs)
