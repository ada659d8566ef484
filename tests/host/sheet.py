"""A sheet that calls every worksheet function with ordinary, edge and wrong-type arguments.

Arguments are drawn in turn from short lists by what a parameter takes, so the sheet is the same at
every run; a host recalculates it, and its answers are held against xlroot's.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import cycle

from xlroot import functions
from xlroot.functions.entry import Entry, Takes, Trait

DATA: dict[str, object] = {
    **{f"A{row}": value for row, value in enumerate([3.5, -2, 0, 7, 12.25, 5, 1, 9], start=1)},
    **{f"B{row}": value for row, value in enumerate([1, 2, 3, 4, 5, 6, 7, 8], start=1)},
    "C1": 4,
    "C2": "text",
    "C3": True,
    "C5": 2.5,
    "C6": "7",
    "C7": False,
    "C8": -1,
    **{f"D{row}": value for row, value in enumerate([-100, 30, 35, 40, 20, 10, 5, 2], start=1)},
    **{
        f"E{row}": value
        for row, value in enumerate([0.1, 0.2, 0.15, 0.05, 0.2, 0.1, 0.1, 0.1], start=1)
    },
    "F1": "=1/0",
    "F2": "=NA()",
    "F4": "",
}

NUMBERS = ["2", "0.5", "3", "0", "-1", "1.75", "10", "-2.5", "100", "0.25", "7", "1E-3", "1E6"]
SMALL = ["0.4", "3", "2", "5", "0.7", "1", "4", "0.1"]
ODDITIES = ['"3"', '"abc"', "TRUE", "Data!C4", "Data!F1", "Data!C2", "Data!C3", '""', "Data!F2"]
TEXTS = ['"Pump 12"', '"flow"', '"12.5"', "3.25", '""', "TRUE", "Data!C2", '"A-b c"', "Data!F1"]
LOGICALS = ["TRUE", "FALSE", "1", "0", "Data!C3"]
RANGES = ["Data!A1:A8", "Data!B1:B8", "Data!C1:C8", "Data!D1:D8", "{1,2,3;4,5,6}", "Data!E1:E8"]
DATES = ["43831", "44197.75", "36526", "40000", "45000.5", "38718"]

PREFIXED = set(
    """ACOT ACOTH ARABIC BASE BITAND BITLSHIFT BITOR BITRSHIFT BITXOR COMBINA CONCAT COT COTH CSC
    CSCH DAYS DECIMAL GAMMA GAUSS IFNA IFS ISOWEEKNUM MAXIFS MINIFS MUNIT NUMBERVALUE PDURATION
    PERMUTATIONA PHI RRI SEC SECH SWITCH TEXTJOIN UNICHAR UNICODE XOR XLOOKUP XMATCH""".split()
)
UNPREFIXED = {"ERROR.TYPE", "ISO.CEILING"}


def written(name: str) -> str:
    """A function's name as files write it: later additions carry a prefix."""
    later = name in PREFIXED or ("." in name and name not in UNPREFIXED)
    return f"_xlfn.{name}" if later else name


def calls() -> Iterator[tuple[str, str]]:
    """Function and formula of every cell, in the order of names."""
    for name in sorted(functions.catalogue()):
        entry = functions.find(name)
        assert entry is not None
        if Trait.VOLATILE in entry.traits or Takes.LAZY in entry.takes:
            continue
        for arguments in dict.fromkeys(_arguments(entry)):
            yield name, f"={written(name)}({','.join(arguments)})"


def _arguments(entry: Entry) -> Iterator[tuple[str, ...]]:
    counts = sorted({entry.required, len(entry.takes)})
    for count in counts:
        for round_ in range(5 if count else 1):
            yield tuple(_drawn(entry, place, round_, NUMBERS) for place in range(count))
            yield tuple(_drawn(entry, place, round_, SMALL) for place in range(count))
    # Wrong types, one parameter at a time.
    for place in range(min(len(entry.takes), 3)):
        for turn, oddity in zip(range(3), cycle(ODDITIES[place:]), strict=False):
            plain = [
                _drawn(entry, each, turn, SMALL) for each in range(max(entry.required, place + 1))
            ]
            plain[place] = oddity if turn else ODDITIES[(place + len(entry.name)) % len(ODDITIES)]
            yield tuple(plain)


def _drawn(entry: Entry, place: int, round_: int, numbers: list[str]) -> str:
    take = entry.parameter(place)
    turn = round_ * 2 + place * 3 + len(entry.name)
    if take is Takes.NUMBER:
        pool = DATES if Trait.CALENDAR in entry.traits and place < 2 else numbers
    elif take is Takes.TEXT:
        pool = TEXTS
    elif take is Takes.LOGICAL:
        pool = LOGICALS
    elif take is Takes.RAW:
        pool = RANGES
    else:
        pool = numbers + TEXTS
    return pool[turn % len(pool)]
