"""The rooms import only from lower ranks, and only the command line prints."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parent.parent / "takeoff"
#: room -> rank; a module of the package's top level is a room of its own
RANKS = {
    "errors": 0, "findings": 0, "progress": 0,
    "quantities": 1, "bounds": 1, "names": 1, "provenance": 1, "datafiles": 1,
    "job": 2, "jobwriter": 2, "materials": 2, "sections": 2,
    "lists": 3, "weighing": 4, "bundles": 5, "thermal": 5, "lifting": 6, "transport": 7, "pipeline": 8, "reports": 9,
    "cli": 10, "__main__": 11,
}
#: heavy packages -> the rooms that may use them (design: numpy from rank 2 up; pandas where members are columns)
HEAVY = {
    "pint": {"quantities"}, "rapidfuzz": {"names"}, "openpyxl": {"lists"}, "python_calamine": {"lists"},
    "xlsxwriter": {"reports"}, "jinja2": {"reports"},
    "highspy": {"transport"},
    "pandas": {"lists", "weighing", "lifting", "transport", "pipeline", "reports", "__init__"},
    "numpy": {room for room, rank in RANKS.items() if rank >= 2},
}
FILES = sorted(PACKAGE.rglob("*.py"))


def room_of(path: Path) -> str:
    first = path.relative_to(PACKAGE).parts[0]
    return first.removesuffix(".py")


def imports(path: Path) -> list[tuple[str, int, bool]]:
    """(module, line, inside a function or a TYPE_CHECKING block) of every import statement."""
    tree = ast.parse(path.read_text(encoding="utf-8"))
    sheltered = {
        id(child)
        for node in ast.walk(tree)
        if isinstance(node, (ast.FunctionDef, ast.AsyncFunctionDef))
        or (isinstance(node, ast.If) and "TYPE_CHECKING" in ast.dump(node.test))
        for child in ast.walk(node)
    }
    found = []
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            found += [(alias.name, node.lineno, id(node) in sheltered) for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}: relative import"
            found.append((node.module or "", node.lineno, id(node) in sheltered))
            found += [(f"{node.module}.{alias.name}", node.lineno, id(node) in sheltered) for alias in node.names]
    return found


def test_every_room_has_a_rank() -> None:
    """A new room is given its rank here, or the walk below would pass over it."""
    assert {room_of(p) for p in FILES} <= {*RANKS, "__init__"}


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_imports_go_down(path: Path) -> None:
    """A room imports from lower ranks only, never from another room of its own rank."""
    room = room_of(path)
    if room == "__init__":
        return
    for module, line, _ in imports(path):
        parts = module.split(".")
        if parts[0] != "takeoff" or len(parts) == 1 or parts[1] == room or parts[1] not in RANKS:
            continue
        assert RANKS[parts[1]] < RANKS[room], f"{path}:{line}: {room} may not import {parts[1]}"


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_heavy_packages_stay_in_their_rooms_and_functions(path: Path) -> None:
    """A heavy package is imported inside the function that needs it, and only in the rooms that may use it."""
    room = room_of(path)
    for module, line, sheltered in imports(path):
        package = module.split(".")[0]
        if package in HEAVY:
            assert room in HEAVY[package], f"{path}:{line}: {room} may not use {package}"
            assert sheltered, f"{path}:{line}: {package} is imported at the top"


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_only_the_command_line_prints(path: Path) -> None:
    """`print` is called in one file of the command line."""
    calls = [
        node.lineno
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8")))
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id == "print"
    ]
    assert not calls or path.name == "console.py", f"{path}: prints at lines {calls}"
