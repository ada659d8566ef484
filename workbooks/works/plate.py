"""The gate's skin plate: thickness at which utilisation reaches one under a ladder of rules."""

from __future__ import annotations

from openpyxl import Workbook

from workbooks.page import FOUND, GIVEN, TRIAL, Ask, Page

FILE = "skin_plate.xlsx"
WIDTHS = [400, 450, 500, 550, 600, 650]


def build(book: Workbook) -> list[Page]:
    """Reduction by slenderness in three ranges; the safe side is a utilisation below one."""
    page = Page.begun(
        book,
        "Plate",
        "Flood gate at Nesbekken: thickness of the skin plate",
        "LVA-C-055",
        prepared="K. Solli",
        revision="A",
    )
    page.heading("Given")
    width = page.line("Width between stiffeners", 600, "mm", fill=GIVEN)
    force = page.line("Compression per panel", 780, "kN", "load case 3", fill=GIVEN)
    strength = page.line("Yield strength", 355, "MPa", fill=GIVEN)
    factor = page.line("Material factor", 1.1, "", fill=GIVEN)
    page.heading("Project design rule PDR-4 (not a code: the owner's own rule)")
    thickness = page.line("Thickness, trial", 8, "mm", "the unknown", fill=TRIAL, shown="0.00")
    slender = page.line(
        "Slenderness", f"={width}/{thickness}/(56.8*SQRT(235/{strength}))", "", shown="0.0000"
    )
    reduction = page.line(
        "Reduction",
        f"=IF({slender}<=0.6,1,IF({slender}<=1.2,1.36-0.6*{slender},0.9216/{slender}^2))",
        "",
        "stocky, linear, slender",
        shown="0.0000",
    )
    resistance = page.line(
        "Resistance",
        f"={reduction}*{width}*{thickness}*{strength}/{factor}/1000",
        "kN",
        shown="0.0",
    )
    use = page.line("Utilisation", f"={force}/{resistance}", "", shown="0.000")
    residual = page.line("Residual", f"={use}-1", "", shown="0.0000")
    ask = f'{residual},{thickness},3,40,"Chandrupatla",1E-10,"negative"'
    found = page.line(
        "Least thickness",
        Ask(f"XLROOT({ask})"),
        "mm",
        "safe side: utilisation at or below one",
        shown="0.0000",
    )
    r = page.row
    page.line(
        "Enclosure, low and high",
        Ask(f"XLROOT_BOUNDS({ask})", f"B{r}:C{r}"),
        note="mm",
        shown="0.0000000000",
    )
    page.put(f"C{r}", None, shown="0.0000000000", fill=FOUND)
    page.sentence("How well known", Ask(f"XLROOT_VERDICT({ask})"))
    order = page.line(
        "Plate to order", f"=CEILING({found}+1,1)", "mm", "1 mm for corrosion, whole millimetres"
    )
    page.line("Mass of plate", f"={order}/1000*7850", "kg/m2", shown="0.0")
    page.heading("Other widths between stiffeners: one solve a row")
    page.row_of(
        [
            "Width mm",
            "Force kN",
            "Trial mm",
            "Slenderness",
            "Reduction",
            "Residual",
            "Thickness mm",
            "Order mm",
        ]
    )
    for each in WIDTHS:
        r = page.row
        page.put(f"A{r}", each)
        page.put(f"B{r}", f"={force}*A{r}/{width}", shown="0.0")
        page.put(f"C{r}", 8, shown="0.00", fill=TRIAL)
        page.put(
            f"D{r}", f"=A{r}/C{r}/(56.8*SQRT(235/${strength[0]}${strength[1:]}))", shown="0.0000"
        )
        page.put(
            f"E{r}", f"=IF(D{r}<=0.6,1,IF(D{r}<=1.2,1.36-0.6*D{r},0.9216/D{r}^2))", shown="0.0000"
        )
        page.put(
            f"F{r}",
            f"=B{r}/(E{r}*A{r}*C{r}*$B${strength[1:]}/$B${factor[1:]}/1000)-1",
            shown="0.0000",
        )
        page.put(f"G{r}", Ask(f'XLROOT(F{r},C{r},3,40,"Pegasus")'), shown="0.0000")
        page.put(f"H{r}", f"=CEILING(G{r}+1,1)")
        page.row += 1
    page.row += 1
    page.remark(
        "A gate protects people: the design rule, the loads and this result need an independent check; local codes and a licensed engineer decide."
    )
    return [page]
