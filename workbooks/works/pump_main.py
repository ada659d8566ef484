"""The rising main from the Sel wells: operating point of pump and pipe, night flow, ageing."""

from __future__ import annotations

from openpyxl import Workbook

from workbooks.page import FOUND, GIVEN, TRIAL, Ask, Page

FILE = "pump_main.xlsx"
AGES = [0, 5, 10, 15, 20, 30, 40, 50]


def build(book: Workbook) -> list[Page]:
    """One sheet: the friction factor closes pump curve and pipe; roots feed what follows."""
    page = Page.begun(
        book,
        "Main",
        "Rising main Sel wells to Hovde tank: operating point",
        "LVA-C-017",
        prepared="I. Tveit",
        revision="B",
    )
    page.heading("Given")
    page.line("Static lift", 38, "m", "Hovde tank 112.4 m, wells 74.4 m", fill=GIVEN, name="Lift")
    page.line("Length of main", 1850, "m", fill=GIVEN)
    page.line("Inside diameter", 0.2545, "m", "PE 100, OD 315, bore as measured", fill=GIVEN)
    page.line("Roughness", 0.00005, "m", "new pipe", shown="0.0E+00", fill=GIVEN)
    page.line(
        "Kinematic viscosity", 0.00000131, "m2/s", "water at 10 °C", shown="0.00E+00", fill=GIVEN
    )
    page.line("Sum of minor losses", 8.5, "", fill=GIVEN)
    page.line("Gravity", 9.81, "m/s2", fill=GIVEN)
    page.line("Pump head at no flow", 62, "m", "test sheet 44-118", fill=GIVEN)
    page.line(
        "Pump curve coefficient",
        3800,
        "s2/m5",
        "head = no-flow head - coefficient x flow^2",
        fill=GIVEN,
    )
    page.line("Area of pipe", "=PI()/4*B10^2", "m2", shown="0.00000")
    page.heading("Operating point: friction factor that closes Colebrook-White and the pump curve")
    unknown = page.line(
        "Friction factor, trial",
        0.02,
        "",
        "the unknown; any number in the bracket",
        fill=TRIAL,
        shown="0.0000",
    )
    u = unknown
    flow = page.line(
        "Flow where pump meets pipe",
        f"=SQRT((B15-Lift)/(B16+({u}*B9/B10+B13)/(2*B14*B17^2)))",
        "m3/s",
        shown="0.00000",
    )
    speed = page.line("Velocity", f"={flow}/B17", "m/s", shown="0.000")
    reynolds = page.line("Reynolds number", f"={speed}*B10/B12", "", shown="0")
    left = page.line("Left side", f"=1/SQRT({u})", "", shown="0.0000")
    right = page.line(
        "Right side", f"=-2*LOG10(B11/(3.7*B10)+2.51/({reynolds}*SQRT({u})))", "", shown="0.0000"
    )
    residual = page.line("Residual", f"={left}-{right}", "", shown="0.0000")
    ask = f'{residual},{u},0.008,0.1,"bisection",1E-12'
    root = page.line(
        "Friction factor",
        Ask(f"XLROOT({ask})"),
        "",
        "bisection, 1E-12",
        shown="0.000000",
        name="Friction",
    )
    r = page.row
    page.line(
        "Enclosure, low and high",
        Ask(f"XLROOT_BOUNDS({ask})", f"B{r}:C{r}"),
        shown="0.0000000000000",
    )
    page.put(f"C{r}", None, shown="0.0000000000000", fill=FOUND)
    page.sentence("How well known", Ask(f"XLROOT_VERDICT({ask})"))
    page.heading("What follows from it")
    operating = page.line(
        "Operating flow",
        Ask(f"XLROOT_AT({flow},{u},{root})"),
        "m3/s",
        "the flow at the root",
        shown="0.00000",
    )
    page.line("Operating flow", f"={operating}*3600", "m3/h", shown="0.0")
    page.line("Friction loss", f"={root}*B9/B10*({operating}/B17)^2/(2*B14)", "m", shown="0.00")
    page.line("Hydraulic power", f"=9.81*{operating}*(B15-B16*{operating}^2)", "kW", shown="0.00")
    page.heading("Night flow at reduced speed: speed ratio, with the friction factor found above")
    night = page.line("Night flow", 0.035, "m3/s", fill=GIVEN, shown="0.000")
    ratio = page.line("Speed ratio, trial", 0.9, "", "the unknown", fill=TRIAL, shown="0.000")
    pump = page.line("Pump head at this speed", f"=B15*{ratio}^2-B16*{night}^2", "m", shown="0.00")
    need = page.line(
        "Head needed", f"=Lift+(Friction*B9/B10+B13)*({night}/B17)^2/(2*B14)", "m", shown="0.00"
    )
    short = page.line("Residual, head to spare", f"={pump}-{need}", "m", shown="0.00")
    found = page.line(
        "Speed ratio",
        Ask(f'_xll.XLROOT({short},{ratio},0.5,1.2,,1E-11,"positive")'),
        "",
        "safe side: head to spare",
        shown="0.000000",
    )
    page.line("Motor frequency", f"=ROUND(50*{found},1)", "Hz", shown="0.0")
    page.line(
        "Smallest frequency to set",
        Ask(f'CEILING(50*XLROOT({short},{ratio},0.5,1.2,"Brent"),0.5)'),
        "Hz",
        "solved inside the formula",
        shown="0.0",
    )
    page.heading("Ageing of the main: one solve a row")
    page.row_of(
        [
            "Age in years",
            "Roughness m",
            "Trial factor",
            "Flow m3/s",
            "Reynolds",
            "Residual",
            "Factor found",
            "Flow m3/h",
        ]
    )
    for age in AGES:
        r = page.row
        page.put(f"A{r}", age)
        page.put(f"B{r}", f"=$B$11+A{r}*0.00001", shown="0.0E+00")
        page.put(f"C{r}", 0.02, shown="0.000", fill=TRIAL)
        page.put(
            f"D{r}",
            f"=SQRT(($B$15-Lift)/($B$16+(C{r}*$B$9/$B$10+$B$13)/(2*$B$14*$B$17^2)))",
            shown="0.00000",
        )
        page.put(f"E{r}", f"=D{r}/$B$17*$B$10/$B$12", shown="0")
        page.put(
            f"F{r}",
            f"=1/SQRT(C{r})+2*LOG10(B{r}/(3.7*$B$10)+2.51/(E{r}*SQRT(C{r})))",
            shown="0.0000",
        )
        page.put(f"G{r}", Ask(f"XLROOT(F{r},C{r},0.008,0.1)"), shown="0.000000")
        page.put(
            f"H{r}",
            f"=3600*SQRT(($B$15-Lift)/($B$16+(G{r}*$B$9/$B$10+$B$13)/(2*$B$14*$B$17^2)))",
            shown="0.0",
        )
        page.row += 1
    page.row += 1
    page.remark(
        "Friction by Colebrook-White (C. F. Colebrook, J. Inst. Civ. Eng. 11 (1939) 133). Roughness "
        "growth of 0.01 mm a year is the owner's assumption. Local codes and a licensed engineer decide."
    )
    steps = Page.begun(
        book,
        "Iterates",
        "Iterates and scan of the operating point",
        "LVA-C-017",
        prepared="I. Tveit",
        revision="B",
        widths=(12, 22, 22, 22, 22, 4, 4, 4),
    )
    here = f"Main!{residual},Main!{u},0.008,0.1"
    steps.heading("Iterates of a Chandrupatla search")
    steps.table(
        f'XLROOT_STEPS({here},"Chandrupatla")',
        rows=12,
        shown=("0", "0.000000000000000", "0.00E+00", "0.000000000000000", "0.000000000000000"),
    )
    steps.row = 22
    steps.heading("The residual over the bracket")
    scan = steps.table(
        f"XLROOT_SCAN({here},21)",
        rows=21,
        shown=("0.0000", "0.0000"),
        head=("Factor", "Residual"),
    )
    steps.plot(
        scan,
        "C24",
        title="Residual of the operating point",
        across="friction factor",
        up="residual",
    )
    return [page, steps]
