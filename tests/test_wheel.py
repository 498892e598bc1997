"""The built wheel works by itself: in a clean environment, without development tools, from an empty folder."""

from __future__ import annotations

import os
import shutil
import subprocess
import sys
import zipfile
from pathlib import Path

import openpyxl
from conftest import ROOT, SAMPLES


def test_the_wheel_carries_the_tables_and_does_the_main_job(tmp_path: Path) -> None:
    """Build, install with its run-time needs only, and weigh the sample list from an empty folder."""
    subprocess.run(
        [sys.executable, "-m", "build", "--wheel", "--no-isolation", "--outdir", str(tmp_path / "dist"), str(ROOT)],
        check=True, capture_output=True, timeout=300,
    )
    [wheel] = (tmp_path / "dist").glob("*.whl")
    packed = set(zipfile.ZipFile(wheel).namelist())
    ours = {f"takeoff/data/{p.relative_to(ROOT / 'materials').as_posix()}" for p in (ROOT / "materials").rglob("*.csv")}
    assert ours <= packed
    assert not any(name.startswith(("tests/", "sample_projects/")) for name in packed)
    environment = {k: v for k, v in os.environ.items() if not k.startswith("PYTHON")}
    subprocess.run([sys.executable, "-m", "venv", str(tmp_path / "env")], check=True, capture_output=True, timeout=300)
    programs = tmp_path / "env" / "bin"

    def run(*command: object, cwd: Path = tmp_path, status: int = 0) -> str:
        done = subprocess.run([*map(str, command)], cwd=cwd, capture_output=True, text=True, timeout=900, check=False, env=environment)
        assert done.returncode == status, done.stdout + done.stderr
        return done.stdout

    run(programs / "python", "-m", "pip", "install", "-q", wheel)
    empty = tmp_path / "empty"
    empty.mkdir()
    shutil.copy(SAMPLES / "weir_footbridge" / "cutting_list.xlsx", empty / "list.xlsx")
    run(programs / "takeoff", "schedule", "list.xlsx", cwd=empty, status=3)
    assert sorted(p.name for p in empty.iterdir()) == ["list.schedule.xlsx", "list.xlsx"]
    assert "Weight schedule" in openpyxl.load_workbook(empty / "list.schedule.xlsx").sheetnames
    run(programs / "takeoff", "schedule", "list.xlsx", "--out", "again.xlsx", "--page", "page.html", cwd=empty, status=3)
    assert (empty / "page.html").read_text(encoding="utf-8").count("<script>") == 1
    run(programs / "takeoff", "start", "new", cwd=empty)
    assert sorted(p.name for p in (empty / "new").iterdir()) == ["HOWTO.txt", "job.toml", "member_list.xlsx"]
    assert "19 300" in run(programs / "takeoff", "material", "gold", cwd=empty).replace(",", " ")
