"""What many tests need: small lists written as real files, and the installed command."""

from __future__ import annotations

import csv
import os
import shutil
import subprocess
import sys
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Any

import openpyxl
import pytest
from hypothesis import HealthCheck
from hypothesis import settings as hypothesis_settings

# A law that holds is not broken by a busy machine: no time limit on one example, anywhere in the suite.
hypothesis_settings.register_profile("house", deadline=None, suppress_health_check=[HealthCheck.too_slow])
hypothesis_settings.load_profile("house")

ROOT = Path(__file__).parent.parent
SAMPLES = ROOT / "sample_projects"
HEADINGS = ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)"]

WriteList = Callable[..., Path]


@pytest.fixture
def write_list(tmp_path: Path) -> WriteList:
    """Write rows as a workbook or text file and give its path: `write_list(rows, name="list.xlsx", headings=...)`."""

    def write(rows: Sequence[Sequence[Any]], name: str = "list.xlsx", headings: Sequence[str] | None = HEADINGS,
              above: Sequence[Sequence[Any]] = ()) -> Path:
        path = tmp_path / name
        everything = [*above, *([headings] if headings else []), *rows]
        if path.suffix == ".xlsx":
            book = openpyxl.Workbook()
            sheet = book.active
            assert sheet is not None
            sheet.title = "List"
            for row in everything:
                sheet.append(list(row))
            book.save(path)
        else:
            with path.open("w", encoding="utf-8", newline="") as handle:
                csv.writer(handle, lineterminator="\n").writerows(everything)
        return path

    return write


@pytest.fixture
def run() -> Callable[..., subprocess.CompletedProcess[str]]:
    """Run the installed `takeoff` command with these arguments; output is text."""
    beside = Path(sys.executable).with_name("takeoff")
    command = str(beside) if beside.exists() else shutil.which("takeoff")
    assert command, "the takeoff command is not installed"

    def call(*arguments: object, cwd: Path | None = None, env: dict[str, str] | None = None) -> subprocess.CompletedProcess[str]:
        return subprocess.run(
            [command, *map(str, arguments)], capture_output=True, text=True, cwd=cwd, env={**os.environ, **(env or {})}, timeout=120,
            check=False,
        )

    return call


def need_program(name: str) -> str:
    """The path of a program, or a skip with one line; where TAKEOFF_NEED_PROGRAMS=1 is set its absence is a failure."""
    found = shutil.which(name)
    if found:
        return found
    if os.environ.get("TAKEOFF_NEED_PROGRAMS") == "1":
        pytest.fail(f"{name} is needed here and absent")
    pytest.skip(f"{name} is not installed")
