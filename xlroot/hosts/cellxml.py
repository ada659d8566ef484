"""The cells of a sheet's XML, by one of two readers that give the same.

Nearly all producers write cells in one plain form; those are found by a pattern over the bytes and
read one by one when asked for, so that a sheet of 100,000 formulas costs little until its cells
are wanted. Anything unusual (prefixes, comments, CDATA, cells without an address, another
encoding) goes through the XML parser as a whole. ECMA-376 part 1, section 18.3.1.4.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cached_property

from xlroot.cells import column_number
from xlroot.hosts.package import Package

Place = tuple[int, int]

_ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")
_CELL = re.compile(rb'<c r="([A-Z]{1,3})([0-9]{1,7})"([^<>]*?)(?:/>|>(.*?)</c>)', re.DOTALL)
_ANY_CELL = re.compile(rb"<(?:[\w.-]+:)?c[\s/>]")
_UNUSUAL = re.compile(rb"<!|<\?(?!xml )|<[\w.-]+:(?:c|row|sheetData)[\s>]")
_FORMULA = re.compile(rb"<f([^<>]*?)(?:/>|>([^<]*)</f>)")
_VALUE = re.compile(rb"<v(?: xml:space=\"preserve\")?(?:/>|>([^<]*)</v>)")
_ATTRIBUTE = re.compile(rb'([\w:]+)="([^"]*)"')
_ENTITY = re.compile(r"&(?:#x([0-9A-Fa-f]+)|#([0-9]+)|(lt|gt|amp|quot|apos));")
_NAMED = {"lt": "<", "gt": ">", "amp": "&", "quot": '"', "apos": "'"}


def unescaped(text: str) -> str:
    """A saved text with `_x000D_` and its kin as the characters they stand for (22.9.2.19)."""
    return _ESCAPED.sub(lambda found: chr(int(found[1], 16)), text) if "_x" in text else text


@dataclass(slots=True)
class Raw:
    """One cell as it stands in the XML."""

    kind: str
    value: str | None
    formula: str | None
    formula_kind: str
    formula_range: str
    shared: str
    style: str = ""


class Cells(Mapping[Place, Raw]):
    """Cells by row and column, each read when asked for."""

    def __init__(self, found: Mapping[Place, Raw | tuple[bytes, bytes | None]]) -> None:
        self._found = dict(found)

    def __getitem__(self, place: Place) -> Raw:
        found = self._found[place]
        if not isinstance(found, Raw):
            found = self._found[place] = _plain_cell(*found)
        return found

    def __contains__(self, place: object) -> bool:
        return place in self._found

    def __iter__(self) -> Iterator[Place]:
        return iter(self._found)

    def __len__(self) -> int:
        return len(self._found)

    def holds_something(self, place: object) -> bool:
        """Whether the cell has a value or a formula, not only a format."""
        found = self._found.get(place)  # type: ignore[call-overload]
        if found is None:
            return False
        if isinstance(found, Raw):
            return found.value is not None or found.formula is not None
        return bool(found[1])

    @cached_property
    def with_formula(self) -> frozenset[Place]:
        """Cells with a formula element."""
        return frozenset(
            place
            for place, found in self._found.items()
            if (
                found.formula is not None
                if isinstance(found, Raw)
                else found[1] is not None and b"<f" in found[1]
            )
        )

    def with_formula_kind(self, kind: str) -> Iterator[Place]:
        """Cells whose formula is shared, an array, or a data table, in document order."""
        mark = kind.encode()
        for place, found in self._found.items():
            if isinstance(found, Raw):
                if found.formula is not None and found.formula_kind == kind:
                    yield place
            elif found[1] is not None and mark in found[1] and self[place].formula_kind == kind:
                yield place

    def mentioning(self, text: str) -> Iterator[Place]:
        """Cells whose formula may contain the text, ignoring case, or shares one that may."""
        pattern = re.compile(re.escape(text.encode()), re.IGNORECASE)
        for place in self.with_formula:
            found = self._found[place]
            if isinstance(found, Raw) or (
                found[1] is not None and (b"shared" in found[1] or pattern.search(found[1]))
            ):
                yield place


def read_cells(package: Package, part: str, content: bytes) -> Cells:
    """The cells of a sheet; BookError where the XML is damaged."""
    plain = _by_pattern(content)
    return Cells(dict(_by_parser(package, part, content)) if plain is None else plain)


def _by_pattern(content: bytes) -> dict[Place, Raw | tuple[bytes, bytes | None]] | None:
    """Cells in the plain form, unread; None where anything in the sheet is unusual."""
    head = content[:200]
    utf8 = b"encoding=" not in head or b'"UTF-8"' in head or b'"utf-8"' in head
    if not utf8 or head[:2] in (b"\xff\xfe", b"\xfe\xff") or _UNUSUAL.search(content):
        return None
    if not content.rstrip().endswith(b"</worksheet>"):
        return None
    found: dict[Place, Raw | tuple[bytes, bytes | None]] = {}
    columns: dict[bytes, int] = {}
    count = 0
    for letters, row, attributes, inner in _CELL.findall(content):
        column = columns.get(letters)
        if column is None:
            column = columns[letters] = column_number(letters.decode())
        found[int(row), column] = attributes, inner
        count += 1
    if count != len(found) or count != len(_ANY_CELL.findall(content)):
        return None
    return found


def _plain_cell(attributes: bytes, inner: bytes | None) -> Raw:
    about = dict(_ATTRIBUTE.findall(attributes))
    raw = Raw(about.get(b"t", b"").decode(), None, None, "", "", "", about.get(b"s", b"").decode())
    if not inner:
        return raw
    formula, value = _FORMULA.search(inner), _VALUE.search(inner)
    if formula is not None:
        more = dict(_ATTRIBUTE.findall(formula[1]))
        raw.formula = _text(formula[2] or b"")
        raw.formula_kind = more.get(b"t", b"").decode()
        raw.formula_range = more.get(b"ref", b"").decode()
        raw.shared = more.get(b"si", b"").decode()
    if value is not None:
        raw.value = _text(value[1] or b"")
    elif b"<is" in inner:
        raw.value = _inline(inner)
    return raw


_PHONETIC = re.compile(rb"<rPh.*?</rPh>", re.DOTALL)
_RUN = re.compile(rb"<t(?:\s[^<>]*)?>([^<]*)</t>")


def _inline(inner: bytes) -> str:
    return "".join(_text(each) for each in _RUN.findall(_PHONETIC.sub(b"", inner)))


def _text(raw: bytes) -> str:
    text = raw.decode("utf-8")
    if "\r" in text:
        text = text.replace("\r\n", "\n").replace("\r", "\n")
    return _ENTITY.sub(_character, text) if "&" in text else text


def _character(found: re.Match[str]) -> str:
    if found[1]:
        return chr(int(found[1], 16))
    return chr(int(found[2])) if found[2] else _NAMED[found[3]]


def _by_parser(package: Package, part: str, content: bytes) -> Iterator[tuple[Place, Raw]]:
    """All cells of a sheet, in document order."""
    cells: list[tuple[Place, Raw]] = []
    add = cells.append
    row, column = 0, 0
    raw: Raw | None = None
    text: list[str] = []
    collecting = False
    letters: dict[str, int] = {}

    def start(tag: str, attributes: dict[str, str]) -> None:
        nonlocal row, column, raw, collecting
        if ":" in tag:
            tag = tag.rpartition(":")[2]
        if tag == "c":
            address = attributes.get("r")
            if address:
                name = address.rstrip("0123456789")
                number = letters.get(name)
                if number is None:
                    number = letters[name] = column_number(name)
                column = number
                row = int(address[len(name) :])
            else:
                column += 1
            raw = Raw(attributes.get("t", ""), None, None, "", "", "", attributes.get("s", ""))
            add(((row, column), raw))
        elif raw is not None:
            if tag == "v" or tag == "t":
                collecting = True
                text.clear()
            elif tag == "f":
                collecting = True
                text.clear()
                if attributes:
                    raw.formula_kind = attributes.get("t", "")
                    raw.formula_range = attributes.get("ref", "")
                    raw.shared = attributes.get("si", "")
            elif tag == "rPh":
                raw = None
        elif tag == "row":
            row = int(attributes.get("r", row + 1))
            column = 0

    def end(tag: str) -> None:
        nonlocal raw, collecting
        if ":" in tag:
            tag = tag.rpartition(":")[2]
        if tag == "c":
            raw = None
        elif raw is not None and collecting:
            if tag == "v":
                raw.value = "".join(text)
                collecting = False
            elif tag == "f":
                raw.formula = "".join(text)
                collecting = False
            elif tag == "t":
                raw.value = (raw.value or "") + "".join(text)
                collecting = False

    def characters(data: str) -> None:
        if collecting:
            text.append(data)

    package.parse_bytes(part, content, start, end, characters)
    yield from cells
