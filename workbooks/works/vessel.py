"""The methanol day tank: levels for volumes in a horizontal vessel with elliptical heads."""

from __future__ import annotations

from openpyxl import Workbook

from workbooks.page import GIVEN, TRIAL, Ask, Page

FILE = "vessel_level.xlsx"
VOLUMES = [2, 4, 6, 8, 10, 12, 14, 16]


def build(book: Workbook) -> list[Page]:
    """Cylinder and two heads of depth D/4; the level is the unknown."""
    page = Page.begun(
        book,
        "Tank",
        "Methanol day tank T-204: level for a stated volume",
        "LVA-C-022",
        prepared="S. Brekke",
        revision="A",
    )
    page.heading("Given")
    diameter = page.line("Inside diameter", 2, "m", fill=GIVEN, name="Diameter")
    length = page.line("Length between tangents", 5.2, "m", fill=GIVEN)
    page.line(
        "Depth of a head",
        f"={diameter}/4",
        "m",
        "2:1 elliptical, both ends",
        shown="0.000",
        name="Head_depth",
    )
    page.line("Radius", "=Diameter/2", "m", shown="0.000", name="Radius")
    density = page.line("Density of methanol", 791, "kg/m3", "at 20 °C and 1 atm", fill=GIVEN)
    page.line(
        "Volume of the full vessel",
        f"=PI()*Radius^2*{length}+4/3*PI()*Radius^2*Head_depth",
        "m3",
        shown="0.000",
        name="Full_volume",
    )
    page.heading("Delivery: level that holds one tanker load above the reserve")
    wanted = page.line("Volume wanted", 12, "m3", "reserve 2 m3 and a load of 10 m3", fill=GIVEN)
    level = page.line("Level, trial", 1, "m", "the unknown", fill=TRIAL, shown="0.000")
    cylinder = page.line(
        "Volume in the cylinder",
        f"={length}*(Radius^2*ACOS((Radius-{level})/Radius)-(Radius-{level})*SQRT(2*Radius*{level}-{level}^2))",
        "m3",
        shown="0.0000",
    )
    heads = page.line(
        "Volume in both heads",
        f"=PI()*Head_depth*{level}^2*(1-{level}/(3*Radius))",
        "m3",
        shown="0.0000",
    )
    total = page.line("Volume at this level", f"={cylinder}+{heads}", "m3", shown="0.0000")
    residual = page.line("Residual", f"={total}-{wanted}", "m3", shown="0.0000")
    ask = f'{residual},{level},0,Diameter,"Brent",1E-10'
    found = page.line("Level", Ask(f"XLROOT({ask})"), "m", shown="0.000000")
    page.sentence("How well known", Ask(f"XLROOT_VERDICT({ask})"))
    page.line("Level on the gauge", f"=100*{found}/Diameter", "%", shown="0.0")
    page.line("Mass of contents", f"={wanted}*{density}", "kg", shown="0")
    page.line("Pressure at the bottom", f"={density}*9.81*{found}/1000", "kPa", shown="0.00")
    page.heading("Dip table: one solve a row")
    page.row_of(
        [
            "Share of the full vessel",
            "Volume m3",
            "Trial level m",
            "Cylinder m3",
            "Heads m3",
            "Residual m3",
            "Level m",
            "Gauge %",
        ]
    )
    for volume in VOLUMES:
        r = page.row
        page.put(f"A{r}", f"=B{r}/Full_volume", shown="0.0%")
        page.put(f"B{r}", volume)
        page.put(f"C{r}", 1, shown="0.000", fill=TRIAL)
        page.put(
            f"D{r}",
            f"=$B$9*(Radius^2*ACOS((Radius-C{r})/Radius)-(Radius-C{r})*SQRT(2*Radius*C{r}-C{r}^2))",
            shown="0.0000",
        )
        page.put(f"E{r}", f"=PI()*Head_depth*C{r}^2*(1-C{r}/(3*Radius))", shown="0.0000")
        page.put(f"F{r}", f"=D{r}+E{r}-B{r}", shown="0.0000")
        page.put(f"G{r}", Ask(f'XLROOT(F{r},C{r},0,Diameter,"ITP")'), shown="0.0000")
        page.put(f"H{r}", f"=100*G{r}/Diameter", shown="0.0")
        page.row += 1
    page.row += 1
    page.remark(
        "Methanol is toxic and flammable: alarms and overfill protection follow the owner's procedures and local codes."
    )
    return [page]
