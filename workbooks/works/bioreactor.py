"""The phenol reactor: steady states under substrate inhibition, two of them."""

from __future__ import annotations

from openpyxl import Workbook

from workbooks.page import GIVEN, TRIAL, Ask, Page

FILE = "bioreactor.xlsx"


def build(book: Workbook) -> list[Page]:
    """Growth after Andrews; the balance has a stable and an unstable root."""
    page = Page.begun(
        book,
        "Balance",
        "Phenol reactor R-3: steady states with substrate inhibition",
        "LVA-C-031",
        prepared="M. Aasen",
        revision="A",
    )
    page.heading("Given")
    growth = page.line("Largest growth rate", 0.53, "1/h", "pilot run 7", fill=GIVEN)
    half = page.line("Half-saturation constant", 0.12, "g/L", fill=GIVEN)
    inhibition = page.line("Inhibition constant", 2.2, "g/L", fill=GIVEN)
    yielded = page.line("Yield", 0.45, "g/g", fill=GIVEN)
    feed = page.line("Substrate in the feed", 6, "g/L", fill=GIVEN)
    dilution = page.line("Dilution rate", 0.3, "1/h", fill=GIVEN)
    turning = page.line(
        "Substrate at the fastest growth",
        f"=SQRT({half}*{inhibition})",
        "g/L",
        "where the two branches meet",
        shown="0.0000",
    )
    fastest = page.line(
        "Fastest growth",
        f"={growth}/(1+2*SQRT({half}/{inhibition}))",
        "1/h",
        "a larger dilution rate washes out",
        shown="0.0000",
    )
    page.heading("Balance: growth equals dilution")
    substrate = page.line("Substrate, trial", 0.2, "g/L", "the unknown", fill=TRIAL, shown="0.000")
    rate = page.line(
        "Growth rate",
        f"={growth}*{substrate}/({half}+{substrate}+{substrate}^2/{inhibition})",
        "1/h",
        "J. F. Andrews, Biotechnol. Bioeng. 10 (1968) 707",
        shown="0.0000",
    )
    residual = page.line("Residual", f"={rate}-{dilution}", "1/h", shown="0.0000")
    lower = page.line(
        "Substrate, stable state",
        Ask(f'XLROOT({residual},{substrate},0.01,{turning},"TOMS 748",1E-11)'),
        "g/L",
        shown="0.000000",
    )
    upper = page.line(
        "Substrate, unstable state",
        Ask(f'XLROOT({residual},{substrate},{turning},{feed},"TOMS 748",1E-11)'),
        "g/L",
        shown="0.000000",
    )
    whole = page.sentence(
        "Over the whole range", Ask(f"XLROOT({residual},{substrate},0.01,{feed})"), lines=2
    )
    page.heading("What follows")
    cells = page.line(
        "Biomass in the stable state", f"={yielded}*({feed}-{lower})", "g/L", shown="0.000"
    )
    page.line("Productivity", f"={dilution}*{cells}", "g/(L h)", shown="0.000")
    page.line("Removal", f"=1-{lower}/{feed}", "", shown="0.0%")
    page.line("Distance to wash-out", f"={fastest}-{dilution}", "1/h", shown="0.0000")
    page.line(
        "Disturbance that tips the reactor",
        f"={upper}-{lower}",
        "g/L",
        "rise of substrate beyond which growth falls behind",
        shown="0.000",
    )
    page.line("Text in the refused cell", f'=IF(ISTEXT({whole}),"no single root","one root")')
    page.heading("The balance over the range")
    scan = page.table(
        f"XLROOT_SCAN({residual},{substrate},0.01,{feed},25)",
        rows=25,
        shown=("0.0000", "0.0000"),
        head=("Substrate g/L", "Residual 1/h"),
    )
    page.plot(
        scan,
        f"C{page.row - 25}",
        title="Growth less dilution: two steady states",
        across="substrate, g/L",
        up="1/h",
    )
    return [page]
