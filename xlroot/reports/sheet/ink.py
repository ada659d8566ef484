"""How the pages look: one family of letters, thin rules, one accent.

Sizes are in points, colours in RGB. The styles are made on first use and shared by all pages.
"""

from __future__ import annotations

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


@cache
def font(letter: Letter) -> Font:
    from openpyxl.styles import Font

    return Font(name=FAMILY, size=letter.size, color=letter.colour, bold=letter.weight == "bold")


@cache
def link_font() -> Font:
    from openpyxl.styles import Font

    return Font(name=FAMILY, size=SMALL, color=ACCENT, underline="single")


@cache
def aligned(side: str, *, wrap: bool = False, down: str = "top") -> Alignment:
    """Numbers that do not fit are shrunk: a row of # signs would hide a result."""
    from openpyxl.styles import Alignment

    return Alignment(horizontal=side, vertical=down, wrap_text=wrap, shrink_to_fit=not wrap or None)


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

    book._named_styles["Normal"].font = Font(name=FAMILY, size=10, family=2)  # type: ignore[attr-defined]
