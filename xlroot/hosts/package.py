"""The package of a saved workbook: a zip of parts, and the relations between them.

ECMA-376 part 2 (Open Packaging Conventions). Parts are found by relations, names compare without
case, both the transitional and the strict namespaces are known (ISO/IEC 29500-1 and -4).
"""

from __future__ import annotations

import hashlib
import posixpath
import zipfile
import zlib
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any
from xml.parsers import expat

from xlroot.errors import BookError

LARGEST_PART = 2 << 30
"""Bytes of one part after unpacking; a larger one is refused as damaged or hostile."""

_OLE = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"


@dataclass(frozen=True, slots=True)
class Package:
    """An open package; its bytes are read once, so that later changes of the file do not show."""

    path: Path
    archive: zipfile.ZipFile
    digest: str
    names: dict[str, str]
    """Names as stored, by their lower-case form without a leading slash."""

    def has(self, part: str) -> bool:
        return part.lstrip("/").casefold() in self.names

    def read(self, part: str) -> bytes:
        """A part's bytes; BookError where it is missing or damaged."""
        stored = self.names.get(part.lstrip("/").casefold())
        if stored is None:
            raise BookError(f"{self.path.name} is damaged: it has no part {part}")
        try:
            if self.archive.getinfo(stored).file_size > LARGEST_PART:
                raise BookError(f"{self.path.name}: the part {part} is too large to be a sheet")
            return self.archive.read(stored)
        except (zipfile.BadZipFile, zlib.error, EOFError, NotImplementedError, OSError) as error:
            raise BookError(f"{self.path.name} is damaged in {part}: {error}") from None
        except RuntimeError:
            raise BookError(f"{self.path.name} is protected by a password") from None

    def relations(self, part: str) -> list[tuple[str, str, str]]:
        """Identifier, type (its last word) and target part of every relation of a part."""
        folder, name = posixpath.split(part)
        rels = posixpath.join(folder, "_rels", f"{name}.rels")
        if not self.has(rels):
            return []
        found: list[tuple[str, str, str]] = []

        def start(tag: str, attributes: dict[str, str]) -> None:
            if local(tag) == "Relationship" and attributes.get("TargetMode") != "External":
                target = attributes.get("Target", "").replace("\\", "/")
                whole = target if target.startswith("/") else posixpath.join(folder, target)
                kind = attributes.get("Type", "").rpartition("/")[2]
                where = posixpath.normpath(whole).lstrip("/")
                found.append((attributes.get("Id", ""), kind, where))

        self.parse(rels, start)
        return found

    def parse(
        self,
        part: str,
        start: Callable[[str, dict[str, str]], None],
        end: Callable[[str], None] | None = None,
        text: Callable[[str], None] | None = None,
    ) -> None:
        """Runs a part through expat; BookError names the part and the line of damage."""
        self.parse_bytes(part, self.read(part), start, end, text)

    def parse_bytes(
        self,
        part: str,
        content: bytes,
        start: Callable[[str, dict[str, str]], None],
        end: Callable[[str], None] | None = None,
        text: Callable[[str], None] | None = None,
    ) -> None:
        """Runs bytes through expat; entity declarations are refused."""
        parser = expat.ParserCreate()
        parser.buffer_text = True
        parser.buffer_size = 1 << 16
        parser.StartElementHandler = start
        if end is not None:
            parser.EndElementHandler = end
        if text is not None:
            parser.CharacterDataHandler = text
        parser.EntityDeclHandler = self._refuse_entity
        try:
            parser.Parse(content, True)  # noqa: FBT003 - expat's own signature
        except expat.ExpatError as error:
            raise BookError(
                f"{self.path.name} is damaged: {part}, line {error.lineno}: "
                f"{expat.errors.messages.get(error.code, 'not well-formed')}"
            ) from None

    def _refuse_entity(self, *_: Any) -> None:
        raise BookError(f"{self.path.name} declares XML entities, which no workbook needs")


def local(tag: str) -> str:
    """A tag without its prefix."""
    return tag.rpartition(":")[2]


def open_package(path: Path) -> Package:
    """The package at a path; BookError, with what to do, where there is none."""
    try:
        content = path.read_bytes()
    except FileNotFoundError:
        raise BookError(f"there is no file {path}") from None
    except IsADirectoryError:
        raise BookError(f"{path} is a folder; name a workbook in it") from None
    except OSError as error:
        raise BookError(f"{path} cannot be read: {error.strerror or error}") from None
    if content.startswith(_OLE):
        raise BookError(
            f"{path.name} is protected by a password or in the old binary format; "
            "save it as .xlsx without a password"
        )
    import io

    try:
        archive = zipfile.ZipFile(io.BytesIO(content))
        names = {
            each.lstrip("/").replace("\\", "/").casefold(): each for each in archive.namelist()
        }
    except (zipfile.BadZipFile, ValueError, OSError):
        raise BookError(
            f"{path.name} is no .xlsx or .xlsm workbook, or it is cut off; save it as .xlsx"
        ) from None
    if "mimetype" in names and "content.xml" in names:
        raise BookError(f"{path.name} is an OpenDocument sheet; save it as .xlsx")
    return Package(path, archive, hashlib.sha256(content).hexdigest(), names)
