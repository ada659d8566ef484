"""Worksheet functions by family: every module here lists its entries, `find` gives one by name."""

from __future__ import annotations

from functools import cache

from xlroot.catalogue import Catalogue
from xlroot.functions.entry import Entry, entries_of


@cache
def catalogue() -> Catalogue[Entry]:
    """All entries; made on first use."""
    return Catalogue(__name__, entries_of, lambda entry: entry.names)


def find(name: str) -> Entry | None:
    """The entry of a function, in any case, or None if there is none."""
    return catalogue().get(name)
