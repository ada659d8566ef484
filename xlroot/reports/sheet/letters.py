"""How wide text is in Arial, over its size: what row heights are worked out from.

Widths are those of the metric-compatible Helvetica (Adobe font metrics, from memory), in
thousandths of the size.
"""

from __future__ import annotations

from functools import cache

from xlroot.reports.layout import wrapped
from xlroot.reports.sheet.ink import Letter

_GROUPS = {
    191: "'",
    222: "ijl|`",
    278: " .,:;!/\\[]ftI",
    333: "()-r°",
    355: '"',
    389: "*",
    469: "^",
    500: "ckJsvxyz",
    556: "abdeghnopqu0123456789#$?_L",
    584: "+<=>~±",
    611: "FTZ",
    667: "ABEKPSVXY&",
    722: "CDHNRUw",
    778: "GOQ",
    833: "mM",
    889: "%",
    944: "W",
    1015: "@",
}
_WIDTHS = {character: width for width, group in _GROUPS.items() for character in group}
_OTHER, _IDEOGRAPH = 640, 1000
_BOLD = 1.08
_SPARE = 1.03
"""Hosts lay out text a little wider on some screens and printers."""


@cache
def _width(character: str) -> int:
    return _WIDTHS.get(character, _OTHER if ord(character) < 0x2E80 else _IDEOGRAPH)


def lines(text: str, room: float, letter: Letter) -> list[str]:
    """The text in lines of at most so many points."""
    scale = letter.size / 1000 * _SPARE * (_BOLD if letter.weight == "bold" else 1.0)
    return wrapped(text, room, lambda part: sum(map(_width, part)) * scale)
