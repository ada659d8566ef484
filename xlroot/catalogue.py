"""Entries found by name in a folder of modules, so that a new entry is one new file.

A catalogue imports every module of a package once, collects the entries that each module lists,
refuses two entries of one name, and answers a misspelt name with the nearest.
"""

from __future__ import annotations

import importlib
import pkgutil
from collections.abc import Callable, Iterable, Iterator, Mapping
from typing import Generic, TypeVar

Entry = TypeVar("Entry")


def folded(name: str) -> str:
    """A name without case, accents, spaces, hyphens, dashes, underscores: what two spellings
    share."""
    if not name.isascii():
        from unicodedata import combining, normalize

        name = "".join(each for each in normalize("NFKD", name) if not combining(each))
    return "".join(letter for letter in name.casefold() if letter not in " -_‐‑–—")


def nearest(name: str, known: Iterable[str]) -> str | None:
    """The known name most like the given one, or None when none comes close."""
    from difflib import get_close_matches

    by_fold = {folded(each): each for each in known}
    found = get_close_matches(folded(name), by_fold, n=1, cutoff=0.6)
    return by_fold[found[0]] if found else None


def did_you_mean(name: str, known: Iterable[str]) -> str:
    """A sentence's tail: `; did you mean X?`, or nothing."""
    found = nearest(name, known)
    return f"; did you mean {found}?" if found else ""


class Catalogue(Mapping[str, Entry], Generic[Entry]):
    """Entries of all modules in a package, by folded name; looked up however it is spelt."""

    def __init__(
        self,
        package: str,
        entries_of: Callable[[object], Iterable[Entry]],
        names_of: Callable[[Entry], Iterable[str]],
    ) -> None:
        self._entries: dict[str, Entry] = {}
        self._names: list[str] = []
        where = importlib.import_module(package)
        for found in sorted(pkgutil.iter_modules(where.__path__), key=lambda each: each.name):
            module = importlib.import_module(f"{package}.{found.name}")
            for entry in entries_of(module):
                for name in names_of(entry):
                    key = folded(name)
                    if key in self._entries:
                        raise ValueError(f"{package}: two entries are named {name}")
                    self._entries[key] = entry
                    self._names.append(name)

    def __getitem__(self, name: str) -> Entry:
        return self._entries[folded(name)]

    def __contains__(self, name: object) -> bool:
        return isinstance(name, str) and folded(name) in self._entries

    def __iter__(self) -> Iterator[str]:
        return iter(self._names)

    def __len__(self) -> int:
        return len(self._names)
