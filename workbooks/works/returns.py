"""The biogas upgrade: the project's internal rate of return and the break-even price."""

from __future__ import annotations

from openpyxl import Workbook

from workbooks.page import GIVEN, TRIAL, Ask, Page

FILE = "biogas_return.xlsx"
YEARS = 12


def build(book: Workbook) -> list[Page]:
    """Yearly flows; the rate at which they are worth nothing, and the price that pays the hurdle."""
    page = Page.begun(
        book,
        "Return",
        "Biogas upgrade at Sandvika plant: return of the project",
        "LVA-C-063",
        prepared="E. Holm",
        revision="B",
    )
    page.heading("Given")
    cost = page.line("Investment", 3850000, "EUR", fill=GIVEN, shown="#,##0")
    amount = page.line("Gas sold, first year", 640000, "m3", fill=GIVEN, shown="#,##0")
    page.line("Price of gas", 1.12, "EUR/m3", fill=GIVEN, shown="0.0000", name="Price")
    rise = page.line("Rise of the price", 0.015, "1/year", fill=GIVEN, shown="0.0%")
    upkeep = page.line("Operation and upkeep", 165000, "EUR/year", fill=GIVEN, shown="#,##0")
    page.line("Hurdle rate", 0.06, "1/year", fill=GIVEN, shown="0.0%", name="Hurdle")
    page.heading("Rate of return")
    rate = page.line("Rate, trial", 0.08, "1/year", "the unknown", fill=TRIAL, shown="0.00%")
    residual_row = page.row
    page.row += 1
    found_row = page.row
    page.row += 4
    page.heading("Flows")
    page.row_of(["Year", "Flow EUR", "Gas m3"])
    first = page.row
    page.put(f"A{first}", 0)
    page.put(f"B{first}", f"=-{cost}", shown="#,##0")
    for year in range(1, YEARS + 1):
        r = first + year
        page.put(f"A{r}", year)
        page.put(
            f"B{r}",
            f"=${amount[0]}${amount[1:]}*Price*(1+$B${rise[1:]})^(A{r}-1)-$B${upkeep[1:]}",
            shown="#,##0",
        )
    last = first + YEARS
    after = last + 1
    page.row = residual_row
    residual = page.line(
        "Residual, net present value",
        f"=B{first}+NPV({rate},B{first + 1}:B{last})",
        "EUR",
        shown="#,##0.00",
    )
    page.row = found_row
    found = page.line(
        "Internal rate of return",
        Ask(f'XLROOT({residual},{rate},0.001,0.5,"Ridders",1E-12)'),
        "1/year",
        shown="0.0000%",
    )
    page.line(
        "The sheet's own IRR",
        f"=IRR(B{first}:B{last})",
        "1/year",
        "for comparison",
        shown="0.0000%",
    )
    page.line("Above the hurdle by", f"=10000*({found}-Hurdle)", "basis points", shown="0.0")
    page.row = after
    page.heading("Price of gas that just pays the hurdle rate")
    trial = page.line("Price, trial", 1, "EUR/m3", "the unknown", fill=TRIAL, shown="0.0000")
    sold = page.line(
        "Gas sold, present worth",
        f"=NPV(Hurdle,C{first + 1}:C{last})",
        "EUR per EUR/m3",
        shown="#,##0",
    )
    for year in range(1, YEARS + 1):
        r = first + year
        page.put(f"C{r}", f"=$B${amount[1:]}*(1+$B${rise[1:]})^(A{r}-1)", shown="#,##0")
    burden = page.line(
        "Upkeep, present worth", f"=-PV(Hurdle,{YEARS},{upkeep})", "EUR", shown="#,##0"
    )
    worth = page.line(
        "Residual, net present value", f"={trial}*{sold}-{burden}-{cost}", "EUR", shown="#,##0.00"
    )
    even = page.line(
        "Break-even price",
        Ask(f'XLROOT({worth},{trial},0.1,5,"secant",1E-10)'),
        "EUR/m3",
        shown="0.000000",
    )
    page.line("Margin of the price", f"=Price/{even}-1", "", shown="0.0%")
    return [page]
