"""Saved workbooks (.xlsx, .xlsm) as books; sheets are read only when something asks for them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import cache
from pathlib import Path

from xlroot.book import Book, Name, Table
from xlroot.cells import Block, parse_address
from xlroot.errors import AddressError, BookError
from xlroot.hosts.links import LinkedSheet, linked_sheets
from xlroot.hosts.package import Package, local, open_package
from xlroot.hosts.sheetxml import SavedSheet, shared_strings


def read_book(path: str | Path) -> Book:
    """The book saved at a path.

    Raises BookError where there is no readable workbook: missing, protected by a password, cut
    off, damaged, or of another format; the message says which part and what to do.
    """
    package = open_package(Path(path))
    main = next((part for _, kind, part in package.relations("") if kind == "officeDocument"), None)
    if main is None or not package.has(main):
        raise BookError(f"{package.path.name} is no workbook: it has no main part")
    content = _Workbook()
    package.parse(main, content.start, content.end, content.text)
    relations = package.relations(main)
    targets = {identifier: (kind, part) for identifier, kind, part in relations}
    strings = _strings(package, relations)
    sheets: dict[str, SavedSheet] = {}
    tables: list[Table] = []
    for name, identifier in content.sheets:
        kind, part = targets.get(identifier, ("", ""))
        own = part if kind == "worksheet" else None
        if own is not None and not package.has(own):
            raise BookError(f"{package.path.name} is damaged: the sheet {name} is missing")
        sheets[name] = SavedSheet(name, package, own, strings, content.starts_1904)
        if own is not None:
            tables.extend(_tables(package, own, name))
    if not sheets:
        raise BookError(f"{package.path.name} holds no sheets")
    order = list(sheets)
    linked: dict[str, LinkedSheet] = {}
    for number, identifier in enumerate(content.links, start=1):
        kind, part = targets.get(identifier, ("", ""))
        if kind == "externalLink" and package.has(part):
            linked |= linked_sheets(package, part, number)
    names = tuple(
        Name(name, text.strip().removeprefix("="), None if scope is None else order[scope])
        for name, text, scope in content.names
        if scope is None or 0 <= scope < len(order)
    )
    return Book(
        package.path.name,
        {**sheets, **linked},
        names,
        tuple(tables),
        package.digest,
        content.starts_1904,
        content.rounds_as_shown,
    )


class _Workbook:
    """What the main part says: sheets in order, defined names, the date system."""

    def __init__(self) -> None:
        self.sheets: list[tuple[str, str]] = []
        self.names: list[tuple[str, str, int | None]] = []
        self.links: list[str] = []
        self.starts_1904 = False
        self.rounds_as_shown = False
        self._name: tuple[str, int | None] | None = None
        self._text: list[str] = []

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        tag = local(tag)
        identifier = next(
            (value for key, value in attributes.items() if local(key) == "id" and ":" in key), ""
        )
        if tag == "externalReference":
            self.links.append(identifier)
        elif tag == "sheet":
            self.sheets.append((attributes.get("name", ""), identifier))
        elif tag == "workbookPr":
            self.starts_1904 = attributes.get("date1904", "0") in ("1", "true", "on")
        elif tag == "calcPr":
            self.rounds_as_shown = attributes.get("fullPrecision", "1") in ("0", "false", "off")
        elif tag == "definedName":
            scope = attributes.get("localSheetId")
            self._name = attributes.get("name", ""), None if scope is None else int(scope)
            self._text = []

    def end(self, tag: str) -> None:
        if local(tag) == "definedName" and self._name is not None:
            name, scope = self._name
            self.names.append((name, "".join(self._text), scope))
            self._name = None

    def text(self, data: str) -> None:
        if self._name is not None:
            self._text.append(data)


def _strings(
    package: Package, relations: list[tuple[str, str, str]]
) -> Callable[[], Sequence[str]]:
    part = next((part for _, kind, part in relations if kind == "sharedStrings"), None)

    @cache
    def strings() -> Sequence[str]:
        return [] if part is None or not package.has(part) else shared_strings(package, part)

    return strings


def _tables(package: Package, sheet_part: str, sheet: str) -> list[Table]:
    found = []
    for _, kind, part in package.relations(sheet_part):
        if kind == "table" and package.has(part):
            table = _table(package, part, sheet)
            if table is not None:
                found.append(table)
    return found


def _table(package: Package, part: str, sheet: str) -> Table | None:
    about: dict[str, str] = {}
    columns: list[str] = []

    def start(tag: str, attributes: dict[str, str]) -> None:
        if local(tag) == "table":
            about.update(attributes)
        elif local(tag) == "tableColumn":
            columns.append(_unbroken(attributes.get("name", "")))

    package.parse(part, start)
    first, _, last = about.get("ref", "").replace("$", "").partition(":")
    try:
        top, left = parse_address(first)
        bottom, right = parse_address(last or first)
    except AddressError:
        return None
    return Table(
        about.get("displayName") or about.get("name", ""),
        Block(sheet, top, left, bottom, right),
        tuple(columns),
        int(about.get("headerRowCount", "1")),
        int(about.get("totalsRowCount", "0")),
    )


def _unbroken(name: str) -> str:
    """A column's name as formulas write it: line breaks as plain breaks."""
    return name.replace("_x000a_", "\n").replace("_x000A_", "\n")
