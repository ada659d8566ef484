"""The programs that a solve rests on, and their versions."""

from __future__ import annotations

import platform
from functools import cache

VERSION = "0.1.0"
"""xlroot's own version; a test holds it against the package's metadata."""


@cache
def versions() -> tuple[tuple[str, str], ...]:
    """Program and version, xlroot first; asked for by reports only, since it takes a while."""
    from importlib.metadata import version

    return (
        ("xlroot", VERSION),
        ("Python", platform.python_version()),
        ("formualizer", version("formualizer")),
    )
