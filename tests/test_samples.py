"""Every sample project, end to end through the installed command: its expected output, and a hand calculation of every row."""

from __future__ import annotations

import csv
import json
import shutil
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import pytest
from conftest import SAMPLES

Run = Callable[..., "CompletedProcess[str]"]
PUBLISHED = Path(__file__).parent / "published"
#: project -> its list, and the rows that cannot be weighed
PROJECTS = {
    "weir_footbridge": ("cutting_list.xlsx", {22, 45}),
    "stage_set": ("cut_list.csv", {33, 41}),
    "plant_skid": ("stueckliste.csv", {38, 44}),
}


@pytest.fixture(scope="module", params=PROJECTS)
def project(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> tuple[str, Path]:
    """A copy of the project, weighed once by the installed command."""
    name = request.param
    folder = tmp_path_factory.mktemp(name) / "job"
    shutil.copytree(SAMPLES / name, folder, ignore=shutil.ignore_patterns("expected", "*.schedule.xlsx"))
    return name, folder


def weigh(run: Run, project: tuple[str, Path]) -> dict[str, Any]:
    name, folder = project
    if not (folder / "out.json").exists():
        done = run("schedule", PROJECTS[name][0], "--json", "out.json", "--csv", "out.csv", cwd=folder)
        assert done.returncode == 3, done.stdout + done.stderr
    record: dict[str, Any] = json.loads((folder / "out.json").read_text(encoding="utf-8"))
    return record


def test_the_expected_output_comes_out(run: Run, project: tuple[str, Path]) -> None:
    """JSON and CSV are those in `expected/`, byte for byte: the same input gives the same output."""
    name, folder = project
    weigh(run, project)
    for kind in ("csv", "json"):
        assert (folder / f"out.{kind}").read_text(encoding="utf-8") == (SAMPLES / name / "expected" / f"schedule.{kind}").read_text(
            encoding="utf-8"
        )


def test_every_row_agrees_with_the_hand_calculation(run: Run, project: tuple[str, Path]) -> None:
    """Each bare nominal mass is the one worked out by hand from published figures, to a gram or two parts in 10,000."""
    name, _ = project
    members = {m["row"]: m for m in weigh(run, project)["members"]}
    with (PUBLISHED / f"{name}_hand_check.csv").open(encoding="utf-8") as handle:
        rows = [row for row in csv.DictReader(handle) if row["row"]]
    assert sorted(members) == sorted(int(row["row"]) for row in rows)
    for row in rows:
        member = members[int(row["row"])]
        if not row["nominal_mass_each_kg"]:
            assert member["status"] == "not weighed"
            continue
        assert member["status"] != "not weighed", row
        assert member["bare_each_kg"]["nominal"] == pytest.approx(float(row["nominal_mass_each_kg"]), rel=2e-4, abs=1e-3), row


def test_what_cannot_be_weighed_names_its_cell(run: Run, project: tuple[str, Path]) -> None:
    """The rows that cannot be weighed are those the project's readme names, each with a cell and what would be right."""
    name, _ = project
    lacking = {m["row"]: m for m in weigh(run, project)["members"] if m["status"] == "not weighed"}
    assert set(lacking) == PROJECTS[name][1]
    for member in lacking.values():
        refusals = [f for f in member["findings"] if f["level"] == "refused"]
        assert refusals
        assert all(f["cell"] and f["right"] for f in refusals)


def test_the_account_and_the_totals_close(run: Run, project: tuple[str, Path]) -> None:
    """Rows add up; totals are the sums of their rows; each grouping adds up to the total."""
    record = weigh(run, project)
    account = dict(record["account"])
    assert account.pop("rows") == sum(account.values())
    counted = [m["mass_total_kg"] for m in record["members"] if m["status"] != "not weighed"]
    for word in ("light", "nominal", "heavy"):
        total = sum(mass[word] for mass in counted)
        assert record["totals"]["mass_kg"][word] == pytest.approx(total, rel=1e-12)
        for grouping in ("by_material", "by_section", "by_assembly", "by_phase", "by_finish"):
            assert sum(group["mass_kg"][word] for group in record["totals"][grouping]) == pytest.approx(total, rel=1e-12)
    for mass in counted:
        assert mass["light"] <= mass["nominal"] <= mass["heavy"]
