"""How the pages look: one family of letters, thin rules, one accent.

Sizes are in points, colours in RGB. The styles are made on first use and shared by all pages.
"""

from __future__ import annotations

from enum import Enum
from functools import cache
from typing import TYPE_CHECKING, NamedTuple

from xlroot.verdict import Status

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.styles import Alignment, Border, Font, PatternFill

FAMILY = "Arial"
TEXT, SMALL, FINE, TITLE, ROOT = 9.0, 8.0, 7.5, 14.0, 15.0

ACCENT = "1D5A62"
BLACK = "1A1A1A"
GREY = "5F6A6D"
IRON = "7C898C"
RULE = "AAB4B6"
TINT = "EDF2F2"
WARN = "9A5B00"
STOP = "9E2A22"

STATUS_COLOURS = {
    Status.PROVED: ACCENT,
    Status.BRACKETED: ACCENT,
    Status.CONVERGED: WARN,
    Status.REFUSED: STOP,
}


class Letter(NamedTuple):
    """A way of writing."""

    size: float = TEXT
    colour: str = BLACK
    weight: str = "normal"


PLAIN = Letter()
FAINT = Letter(SMALL, GREY)
LABEL = Letter(TEXT, GREY)
HEADING = Letter(SMALL, ACCENT, "bold")
COLUMN = Letter(SMALL, GREY, "bold")
CELL = Letter(SMALL, BLACK)


class Fit(Enum):
    """What becomes of content that is wider than its cell."""

    OVER = "it runs over empty cells beside it"
    WRAP = "it takes more lines"
    SHRINK = "it is written smaller: a row of # signs would hide a number"


@cache
def font(letter: Letter) -> Font:
    from openpyxl.styles import Font

    return Font(name=FAMILY, size=letter.size, color=letter.colour, bold=letter.weight == "bold")


@cache
def link_font() -> Font:
    from openpyxl.styles import Font

    return Font(name=FAMILY, size=SMALL, color=ACCENT, underline="single")


@cache
def aligned(side: str, fit: Fit = Fit.OVER, *, down: str = "top", indent: int = 0) -> Alignment:
    """Where a text or a number stands in its cell, and what happens if it does not fit."""
    from openpyxl.styles import Alignment

    return Alignment(
        horizontal=side,
        vertical=down,
        indent=indent,
        wrap_text=True if fit is Fit.WRAP else None,
        shrink_to_fit=True if fit is Fit.SHRINK else None,
    )


@cache
def ruled(*, below: str | None = None, above: str | None = None, colour: str = RULE) -> Border:
    from openpyxl.styles import Border, Side

    return Border(
        bottom=Side(style=below, color=colour) if below else None,
        top=Side(style=above, color=colour) if above else None,
    )


@cache
def filled(colour: str) -> PatternFill:
    from openpyxl.styles import PatternFill

    return PatternFill("solid", fgColor=colour)


def default_font(book: Workbook) -> None:
    """Gives the workbook's normal style our letters, which the widths of columns count in."""
    from openpyxl.styles import Font

    book._named_styles["Normal"].font = Font(name=FAMILY, size=10, family=2)
