"""The tree reads as the data flow: a module imports only from those above it."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parent.parent / "xlroot"

ORDER = [
    "errors",
    "catalogue",
    "cells",
    "faults",
    "texts",
    "values",
    "stopping",
    "versions",
    "formula",
    "kinds",
    "methods",
    "nature",
    "functions",
    "book",
    "tables",
    "bind",
    "interpret",
    "depend",
    "ledger",
    "chain",
    "emit",
    "runtime",
    "frame",
    "program",
    "labels",
    "question",
    "fingerprint",
    "baseline",
    "desk",
    "search",
    "scan",
    "verdict",
    "record",
    "solving",
    "reports",
    "hosts",
    "worksheet",
    "docket",
    "api",
    "cli",
    "__init__",
    "__main__",
]
"""The layers from the top of the flow down; DEVELOPERS.md draws the same list."""

ONLY_IN = {
    "formualizer": {"formula"},
    "flint": {"kinds/ball"},
    "xlwings": {"hosts"},
    "uno": {"hosts"},
    "openpyxl": {"hosts", "reports/sheet"},
    "typer": {"cli"},
    "rich": {"cli"},
}
"""Libraries that one place alone may import."""

LAZY = {"numpy", "scipy", "openpyxl"}
"""Libraries that no module may import while it is itself imported."""

MODULES = sorted(PACKAGE.rglob("*.py"))


def name_of(path: Path) -> str:
    return path.relative_to(PACKAGE).with_suffix("").as_posix()


def layer_of(name: str) -> str:
    return name.split("/", maxsplit=1)[0]


def imports(tree: ast.AST) -> list[tuple[str, ast.stmt]]:
    found: list[tuple[str, ast.stmt]] = []
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            found.extend((alias.name, node) for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, "imports are absolute"
            assert node.module is not None
            if node.module == "xlroot":
                found.extend((f"xlroot.{alias.name}", node) for alias in node.names)
            else:
                found.append((node.module, node))
    return found


def for_types_only(tree: ast.AST) -> set[ast.stmt]:
    """Statements under `if TYPE_CHECKING`."""
    guarded: set[ast.stmt] = set()
    for node in ast.walk(tree):
        test = node.test if isinstance(node, ast.If) else None
        if isinstance(test, ast.Name) and test.id == "TYPE_CHECKING":
            guarded.update(each for each in ast.walk(node) if isinstance(each, ast.stmt))
    return guarded


@pytest.mark.parametrize("path", MODULES, ids=name_of)
def test_imports_point_upwards(path: Path) -> None:
    name = name_of(path)
    own = layer_of(name)
    assert own in ORDER, f"{name} has no place in the layers"
    for target, _ in imports(ast.parse(path.read_text(encoding="utf-8"))):
        if target == "xlroot" or not target.startswith("xlroot."):
            continue
        layer = target.split(".")[1]
        if layer != own:
            assert ORDER.index(layer) < ORDER.index(own), f"{name} imports {target}"


@pytest.mark.parametrize("path", MODULES, ids=name_of)
def test_libraries_stay_in_their_place(path: Path) -> None:
    name = name_of(path)
    tree = ast.parse(path.read_text(encoding="utf-8"))
    for target, _ in imports(tree):
        library = target.split(".")[0]
        if library in ONLY_IN:
            allowed = ONLY_IN[library]
            inside = any(name == each or name.startswith(f"{each}/") for each in allowed)
            assert inside, f"{name} imports {library}"


@pytest.mark.parametrize("path", MODULES, ids=name_of)
def test_heavy_libraries_wait_until_they_are_needed(path: Path) -> None:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    top = [each for each in ast.iter_child_nodes(tree) if isinstance(each, ast.stmt)]
    for target, statement in imports(tree):
        if target.split(".")[0] in LAZY:
            assert statement not in top, f"{name_of(path)} imports {target} when imported"


def test_the_order_names_no_module_that_is_gone() -> None:
    present = {layer_of(name_of(path)) for path in MODULES}
    assert present == set(ORDER)
