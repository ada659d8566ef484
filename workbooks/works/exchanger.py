"""The sludge heater: outlet temperature with properties from a table, across three sheets."""

from __future__ import annotations

from functools import partial

from openpyxl import Workbook

from workbooks.page import GIVEN, TRIAL, Ask, Page

FILE = "heat_exchanger.xlsx"
TABLE = [
    (0, 4.220),
    (10, 4.196),
    (20, 4.184),
    (30, 4.180),
    (40, 4.180),
    (50, 4.182),
    (60, 4.185),
    (70, 4.190),
    (80, 4.197),
    (90, 4.205),
    (100, 4.216),
]


def build(book: Workbook) -> list[Page]:
    """Effectiveness and transfer units; heat capacity at the mean temperature of the hot side."""
    begun = partial(Page.begun, prepared="T. Nygård", revision="C")
    duty = begun(book, "Duty", "Sludge heater E-12: duty", "LVA-C-040")
    duty.heading("Given")
    duty.line("Hot water, flow", 3.2, "kg/s", fill=GIVEN, name="Hot_flow")
    duty.line("Hot water, inlet", 88, "°C", fill=GIVEN, name="Hot_in")
    duty.line("Sludge, flow", 5.1, "kg/s", fill=GIVEN, name="Cold_flow")
    duty.line("Sludge, inlet", 12.5, "°C", fill=GIVEN, name="Cold_in")
    duty.line(
        "Sludge, heat capacity",
        4.08,
        "kJ/(kg K)",
        "4 % solids, laboratory",
        fill=GIVEN,
        name="Cold_capacity",
    )
    duty.line("Area", 46, "m2", fill=GIVEN, name="Area")
    duty.line("Overall coefficient", 0.42, "kW/(m2 K)", "fouled", fill=GIVEN, name="Coefficient")
    table = begun(book, "Properties", "Heat capacity of water", "LVA-C-040")
    table.heading("Saturated liquid, IAPWS-95, rounded")
    table.row_of(["Temperature °C", "kJ/(kg K)"])
    first = table.row
    for temperature, listed in TABLE:
        table.put(f"A{table.row}", temperature)
        table.put(f"B{table.row}", listed, shown="0.000")
        table.row += 1
    last = table.row - 1
    ts, cs = f"Properties!$A${first}:$A${last}", f"Properties!$B${first}:$B${last}"
    page = begun(book, "Exchanger", "Sludge heater E-12: outlet temperature", "LVA-C-040")
    page.heading("Trial")
    outlet = page.line(
        "Hot water, outlet, trial", 50, "°C", "the unknown", fill=TRIAL, shown="0.00"
    )
    mean = page.line("Mean temperature", f"=(Hot_in+{outlet})/2", "°C", shown="0.00")
    place = page.line("Row of the table", f"=MATCH({mean},{ts},1)", "")
    below = page.line("Capacity below", f"=INDEX({cs},{place})", "kJ/(kg K)", shown="0.000")
    above = page.line("Capacity above", f"=INDEX({cs},{place}+1)", "kJ/(kg K)", shown="0.000")
    share = page.line(
        "Share of the step",
        f"=({mean}-INDEX({ts},{place}))/(INDEX({ts},{place}+1)-INDEX({ts},{place}))",
        "",
        shown="0.000",
    )
    capacity = page.line(
        "Heat capacity", f"={below}+{share}*({above}-{below})", "kJ/(kg K)", shown="0.0000"
    )
    page.heading("Exchanger, counterflow")
    hot = page.line("Hot stream", f"=Hot_flow*{capacity}", "kW/K", shown="0.000")
    cold = page.line("Cold stream", "=Cold_flow*Cold_capacity", "kW/K", shown="0.000")
    least = page.line("Smaller stream", f"=MIN({hot},{cold})", "kW/K", shown="0.000")
    ratio = page.line("Ratio of streams", f"={least}/MAX({hot},{cold})", "", shown="0.0000")
    units = page.line(
        "Transfer units",
        f"=Area*Coefficient/{least}",
        "",
        "W. M. Kays and A. L. London, Compact Heat Exchangers",
        shown="0.0000",
    )
    effect = page.line(
        "Effectiveness",
        f"=IF(ABS({ratio}-1)<1E-9,{units}/(1+{units}),(1-EXP(-{units}*(1-{ratio})))/(1-{ratio}*EXP(-{units}*(1-{ratio}))))",
        "",
        shown="0.0000",
    )
    heat = page.line("Heat", f"={effect}*{least}*(Hot_in-Cold_in)", "kW", shown="0.0")
    computed = page.line("Outlet that follows", f"=Hot_in-{heat}/{hot}", "°C", shown="0.0000")
    residual = page.line("Residual", f"={computed}-{outlet}", "K", shown="0.0000")
    page.heading("Result")
    found = page.line(
        "Hot water, outlet", Ask(f"XLROOT({residual},{outlet},15,80)"), "°C", shown="0.000000"
    )
    page.line(
        "The same by substitution",
        Ask(f'XLROOT({residual},{outlet},15,80,"fixed point",1E-10)'),
        "°C",
        "the residual is g(x) - x",
        shown="0.000000",
    )
    page.line(
        "The same by Newton's method",
        Ask(f'XLROOT({residual},{outlet},15,80,"newton",1E-9)'),
        "°C",
        shown="0.000000",
    )
    warm = page.line(
        "Sludge, outlet",
        f"=Cold_in+{hot}*(Hot_in-{found})/{cold}",
        "°C",
        "capacity at the trial; see the next line",
        shown="0.00",
    )
    at = page.line(
        "Sludge, outlet, at the root",
        Ask(f"Cold_in+XLROOT_AT({heat},{outlet},{found})/{cold}"),
        "°C",
        shown="0.00",
    )
    page.line("Pasteurising needs", f'=IF({at}>=55,"met","not met: raise the flow of hot water")')
    page.line("Difference of both", f"={warm}-{at}", "K", shown="0.0000")
    return [duty, table, page]
