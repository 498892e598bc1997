"""The library's face: a list to a schedule in five lines, frames with clear columns, quantities with units on request."""

from __future__ import annotations

import math
import re
import shutil
import subprocess
import sys
from pathlib import Path
from typing import Any

import pytest
import whole_job
from conftest import ROOT, SAMPLES

import takeoff
from takeoff.errors import InputError, OutputError

README = (ROOT / "README.md").read_text(encoding="utf-8")


def tutorial() -> list[str]:
    """The Python blocks of the README, in order."""
    return re.findall(r"^```python\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)


def test_the_tutorial_runs_as_it_stands(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The README's code, block after block in one notebook, does what its remarks say."""
    shutil.copytree(SAMPLES, tmp_path / "sample_projects", ignore=shutil.ignore_patterns("*.schedule.xlsx"))
    monkeypatch.chdir(tmp_path)
    blocks = tutorial()
    assert len(blocks) >= 2
    names: dict[str, Any] = {}
    for block in blocks:
        exec(compile(block, "README.md", "exec"), names)
        for line in block.splitlines():
            shown = re.fullmatch(r"(\w.*?)\s+# → (.+)", line)
            if shown:
                value = eval(shown.group(1), names)
                assert str(value) == shown.group(2), f"{line}: gives {value}"
    assert "→" in "".join(blocks)
    written = {p.suffix for p in tmp_path.iterdir()}
    assert {".xlsx", ".html"} <= written


def test_five_lines_from_list_to_schedule(tmp_path: Path) -> None:
    """Read, weigh, plan, write; the figures agree with each other."""
    path = whole_job.write(tmp_path)
    result = takeoff.weigh(takeoff.read(path))
    plan = takeoff.plan(result)
    written = takeoff.write(result, tmp_path / "s.xlsx", tmp_path / "s.html", tmp_path / "s.json", tmp_path / "s.csv")
    assert [p.name for p in written] == ["s.xlsx", "s.html", "s.json", "s.csv"]
    assert all(p.stat().st_size > 1000 for p in written)
    frame = result.frame()
    weighed = frame[frame["status"] != "not weighed"]
    assert weighed["total_heavy_kg"].sum() == pytest.approx(result.totals.mass_kg.heavy)
    assert takeoff.sums(result, "material")["heavy_kg"].sum() == pytest.approx(result.totals.mass_kg.heavy)
    assert plan.picks.set_index("pick").loc["F1", "hook_load_kg"] == pytest.approx(result.picks[0].hook_load_kg)
    assert list(plan.points["point"]) == ["A", "B", "C", "D"]
    assert plan.loads["heavy_kg"].sum() == pytest.approx(result.totals.mass_kg.heavy)
    assert set(plan.axles["axle"]) == {"front", "rear"}
    assert list(plan.not_loaded["piece"]) == ["2 x Q1"]
    assert plan.cautions == result.cautions


def test_a_plan_of_nothing_has_its_columns(tmp_path: Path) -> None:
    """A list without assemblies or vehicles gives empty frames with the same columns."""
    path = tmp_path / "list.csv"
    path.write_text("Mark,Quantity,Section,Material,Length (mm)\nB,1,UB 203x133x25,S355,1000\n", encoding="utf-8")
    plan = takeoff.plan(takeoff.weigh(path))
    for frame in (plan.picks, plan.points, plan.loads, plan.axles, plan.not_loaded):
        assert len(frame) == 0
        assert len(frame.columns) >= 3


def test_quantities_with_units(tmp_path: Path) -> None:
    """Columns come as quantities on request: they convert, they add, and an absent figure stays absent."""
    result = takeoff.weigh(whole_job.write(tmp_path))
    found = takeoff.with_units(result.frame())
    feet = found["length"].to("ft").magnitude
    assert feet[-1] == pytest.approx(2000 / 304.8)
    assert found["total_heavy"].to("lb").magnitude[-1] == pytest.approx(result.frame()["total_heavy_kg"].iloc[-1] / 0.45359237)
    assert any(math.isnan(v) for v in found["width"].magnitude)
    assert "mark" not in found
    only = takeoff.with_units(takeoff.plan(result).picks, ["hook_load_kN", "heavy_kg"])
    assert set(only) == {"hook_load", "heavy"}
    assert (only["hook_load"] / only["heavy"]).to("m/s**2").magnitude[0] > 9.8
    with pytest.raises(KeyError, match="nothing"):
        takeoff.with_units(result.frame(), ["nothing"])


def test_compare_gives_a_frame(tmp_path: Path) -> None:
    """What changed since an earlier JSON, one row a change."""
    path = whole_job.write(tmp_path)
    takeoff.write(takeoff.weigh(path), tmp_path / "old.json")
    path.write_text(path.read_text(encoding="utf-8").replace("P1,,3,", "P1,,5,"), encoding="utf-8")
    found = takeoff.compare(takeoff.weigh(path), tmp_path / "old.json")
    assert found[["change", "mark", "what"]].to_numpy().tolist() == [["changed", "P1", "pieces 3 → 5"]]


def test_look_ups() -> None:
    """One material, one section, without a list."""
    assert takeoff.material("1.4404").material.density.nominal == pytest.approx(8000, rel=0.01)
    assert takeoff.section("UB 457x191x67").section.designation == "UB 457x191x67"


def test_wrong_use_is_said(tmp_path: Path) -> None:
    """A missing list, another kind of output, an output that is the input: errors of ours, nothing written."""
    path = whole_job.write(tmp_path)
    before = sorted(p.name for p in tmp_path.iterdir())
    result = takeoff.weigh(path)
    with pytest.raises(InputError, match="there is no such file"):
        takeoff.read(tmp_path / "no.csv")
    with pytest.raises(OutputError, match="no such kind of output"):
        takeoff.write(result, tmp_path / "a.xlsx", tmp_path / "b.pdf")
    with pytest.raises(OutputError, match="is an input"):
        takeoff.write(result, path, replace=True)
    with pytest.raises(KeyError, match="colour"):
        takeoff.sums(result, "colour")
    assert sorted(p.name for p in tmp_path.iterdir()) == before


def test_importing_costs_nothing() -> None:
    """`import takeoff` loads none of the heavy packages, nor jinja2."""
    heavy = ("pandas", "numpy", "openpyxl", "pint", "xlsxwriter", "jinja2", "pydantic")
    code = f"import sys, takeoff; print([m for m in {heavy!r} if m in sys.modules])"
    assert subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, timeout=60).stdout.strip() == "[]"


def test_every_function_says_what_it_takes_and_raises() -> None:
    """Each name of the public face is there and has a docstring that says what comes out."""
    assert sorted(takeoff.__all__) == takeoff.__all__
    for name in takeoff.__all__:
        assert len(getattr(takeoff, name).__doc__) > 60
