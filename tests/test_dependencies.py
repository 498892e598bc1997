"""What the package imports is what it declares: nothing undeclared, nothing unused, a lower bound on each."""

from __future__ import annotations

import ast
import re
import sys
import tomllib

from conftest import ROOT

#: name on the index -> name it is imported by, where they differ
IMPORTED_AS = {"python-calamine": "python_calamine"}
#: came with a package that is declared, and is part of its interface
COMES_ALONG = {"pydantic_core": "pydantic"}


def test_imports_and_dependencies_agree() -> None:
    """Every third-party import of the package is declared, and every declared package is imported."""
    imported: set[str] = set()
    for path in (ROOT / "takeoff").rglob("*.py"):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Import):
                imported |= {alias.name.partition(".")[0] for alias in node.names}
            elif isinstance(node, ast.ImportFrom) and node.module and not node.level:
                imported.add(node.module.partition(".")[0])
    imported = {COMES_ALONG.get(name, name) for name in imported} - set(sys.stdlib_module_names) - {"takeoff"}
    declared = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]["dependencies"]
    names = [re.fullmatch(r"([\w-]+)>=[\d.]+", line) for line in declared]
    assert all(names), declared
    assert {IMPORTED_AS.get(found.group(1), found.group(1)) for found in names if found} == imported
