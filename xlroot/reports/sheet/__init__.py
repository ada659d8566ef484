"""Records as pages of a workbook: a register, then a page to print and sign for every solve.

The workbook that was solved is never written to, and nothing in the pages is a formula: figures
are numbers with the digits that they may show, everything else is text.
"""

from __future__ import annotations

import os
import tempfile
from collections.abc import Sequence
from enum import Enum
from pathlib import Path
from typing import TYPE_CHECKING

from xlroot.errors import OutputError
from xlroot.record import Record
from xlroot.reports.sheet.names import page_names
from xlroot.reports.sheet.page import write_page
from xlroot.reports.sheet.register import REGISTER, write_register

if TYPE_CHECKING:
    from openpyxl import Workbook


class Existing(Enum):
    """What happens to a file that stands where the pages are to go."""

    KEEP = "keep it and refuse to write"
    REPLACE = "replace it, unless it is a workbook that was solved"


def write_records(
    records: Sequence[Record], path: str | Path, existing: Existing = Existing.KEEP
) -> Path:
    """Writes the pages of all records to a new .xlsx file and gives its path.

    The file appears complete or not at all. Raises OutputError if there is no record, the name
    does not end in .xlsx, the folder is missing or not writable, the file exists and is to be
    kept, or the file is one of the workbooks that were solved.
    """
    target = Path(path)
    _permit(records, target, existing)
    book = workbook(records)
    try:
        handle, name = tempfile.mkstemp(".xlsx", ".xlroot-", target.parent)
        os.close(handle)
        fresh = Path(name)
        try:
            book.save(fresh)
            fresh.chmod(0o666 & ~_umask())
            fresh.replace(target)
        finally:
            fresh.unlink(missing_ok=True)
    except OSError as error:
        raise OutputError(f"{target} cannot be written: {error.strerror or error}") from error
    return target


def workbook(records: Sequence[Record]) -> Workbook:
    """The pages of all records, in memory."""
    from openpyxl import Workbook

    from xlroot.reports.sheet.ink import default_font

    book = Workbook()
    default_font(book)
    times = [record.provenance.time for record in records]
    book.properties.creator = "xlroot"
    book.properties.title = "Record of solves"
    book.properties.created = book.properties.modified = max(times).replace(tzinfo=None)
    register = book.active
    register.title = REGISTER
    names = page_names(records, taken=(REGISTER,))
    write_register(register, records, names)
    for number, (record, name) in enumerate(zip(records, names, strict=True), 1):
        write_page(book.create_sheet(name), record, f"{number} of {len(records)}")
    return book


def _permit(records: Sequence[Record], target: Path, existing: Existing) -> None:
    if not records:
        raise OutputError("there is no solve to write a page of")
    if target.suffix.lower() != ".xlsx":
        raise OutputError(f"the pages are an .xlsx workbook; {target.name} names another kind")
    if not target.parent.is_dir():
        raise OutputError(f"there is no folder {target.parent}; create it first")
    if not target.exists():
        return
    if target.is_dir():
        raise OutputError(f"{target} is a folder; name a file in it")
    if _is_source(records, target):
        raise OutputError(
            f"{target} is the workbook that was solved and is not written to; name another file"
        )
    if existing is Existing.KEEP:
        raise OutputError(f"{target} exists already; name another file or ask to replace it")


def _is_source(records: Sequence[Record], target: Path) -> bool:
    """Whether the file is a solved workbook, by its place or by its content."""
    import hashlib

    sources = {record.provenance.book for record in records}
    if any(Path(source).exists() and target.samefile(source) for source in sources if source):
        return True
    with target.open("rb") as stream:
        digest = hashlib.file_digest(stream, "sha256").hexdigest()
    return digest in {record.provenance.digest for record in records}


def _umask() -> int:
    """The process's file mode mask, which a temporary file does not follow."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
