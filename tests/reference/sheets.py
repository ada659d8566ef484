"""The published solves as sheets: the unknown in B1, the residual in B2, inputs in column C.

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
        "C5": 8.31446261815324,
        "B2": "=C1*(EXP(0.5*C4*B1/(C5*C3))-EXP(-0.5*C4*B1/(C5*C3)))-C2",
    }


def flame(inputs: dict[str, Any]) -> Cells:
    """Adiabatic flame temperature of methane and air: heat capacities by the TRC gas equation
    (Thermodynamics Research Center; coefficients in the case), integrated in closed form."""
    cells: Cells = {"B1": 2000.0, "C1": inputs["T0"], "C2": inputs["N2_per_CH4"]}
    amounts = {"CO2": 1.0, "H2O": 2.0, "N2": inputs["N2_per_CH4"]}
    del amounts
    for row, (name, values) in enumerate(inputs["coefs"].items(), start=1):
        for column, value in zip("DEFGHIJK", values, strict=True):
            cells[f"{column}{row}"] = value
        cells[f"L{row}"] = {"CO2": 1.0, "H2O": 2.0, "N2": inputs["N2_per_CH4"]}[name]
        cells[f"M{row}"] = inputs["hf"].get(name, 0.0)
    cells["B2"] = ""
    return cells


def stated(unknown: str) -> Callable[[dict[str, Any], str], Cells]:
    """For a case whose published residual is one formula."""
    return lambda inputs, residual: one_formula(residual, inputs, unknown)
