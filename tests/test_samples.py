"""Every sample project, end to end through the installed command: its expected output, and a hand calculation of every row."""

from __future__ import annotations

import csv
import json
import shutil
import tomllib
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import openpyxl
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


# --- the weir footbridge, in more detail -------------------------------------------------------------------------------

FOOTBRIDGE = SAMPLES / "weir_footbridge"


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    shutil.copytree(FOOTBRIDGE, tmp_path / "job", ignore=shutil.ignore_patterns("expected", "*.schedule.xlsx"))
    return tmp_path / "job"


@pytest.fixture(scope="module")
def record() -> dict[str, Any]:
    """The expected JSON of the footbridge, which `test_the_expected_output_comes_out` holds the command to."""
    loaded: dict[str, Any] = json.loads((FOOTBRIDGE / "expected" / "schedule.json").read_text(encoding="utf-8"))
    return loaded


def test_the_totals_of_the_footbridge_agree_with_the_hand_calculation(record: dict[str, Any]) -> None:
    """Each assembly's bare nominal mass and the whole list's are the hand sums, to one part in 100,000; no row is assumed."""
    with (PUBLISHED / "weir_footbridge_hand_check.csv").open(encoding="utf-8") as handle:
        hand = list(csv.DictReader(handle))
    members = {m["row"]: m for m in record["members"]}
    for h in hand:
        if h["row"] and h["nominal_mass_each_kg"]:
            member = members[int(h["row"])]
            assert (member["mark"], member["status"]) == (h["mark"], "weighed")
            assert member["bare_each_kg"]["nominal"] == pytest.approx(float(h["nominal_mass_each_kg"]), rel=1e-5, abs=1e-3), h
    totals = {h["mark"]: float(h["nominal_total_kg"]) for h in hand if not h["row"]}
    for group in record["totals"]["by_assembly"]:
        of_it = [m for m in record["members"] if m["assembly"] == group["name"] and m["status"] != "not weighed"]
        bare = sum(m["quantity"] * m["bare_each_kg"]["nominal"] for m in of_it)
        assert bare == pytest.approx(totals[f"TOTAL {group['name']}"], rel=1e-5)
    assert record["totals"]["bare_kg"]["nominal"] == pytest.approx(totals["GRAND TOTAL"], rel=1e-5)
    assert record["complete"] is False


def test_the_two_cells_of_the_footbridge_are_named(record: dict[str, Any]) -> None:
    """The refusals name the cells D22 and D45."""
    lacking = {m["row"]: m for m in record["members"] if m["status"] == "not weighed"}
    cells = {row: [f["cell"] for f in m["findings"] if f["level"] == "refused"] for row, m in lacking.items()}
    assert cells == {22: ["D22"], 45: ["D45"]}
    assert record["totals"]["not_weighed"] == 2


def test_the_zinc_of_a_row_worked_by_hand(record: dict[str, Any]) -> None:
    """PB1, a plate of 200 x 150 x 12: 0.0684 m² at 610 g/m² (EN ISO 1461, over 6 mm), nominal 1.2 and heavy 1.7 times."""
    [member] = [m for m in record["members"] if m["mark"] == "PB1"]
    [addition] = member["additions"]
    assert addition["kind"] == "finish"
    assert addition["title"] == "EN ISO 1461:2009, as quoted"
    surface = 2 * (0.2 * 0.15 + 0.012 * (0.2 + 0.15))
    for word, share in (("light", 1.0), ("nominal", 1.2), ("heavy", 1.7)):
        assert addition["mass_kg"][word] == pytest.approx(surface * 0.61 * share, rel=1e-9)
        assert member["mass_each_kg"][word] == pytest.approx(member["bare_each_kg"][word] + addition["mass_kg"][word], rel=1e-12)


def test_every_row_of_the_sheet_is_accounted_for(record: dict[str, Any]) -> None:
    """88 rows, counted in the workbook by another reader, and the parts add up to them."""
    sheet = openpyxl.load_workbook(FOOTBRIDGE / "cutting_list.xlsx").active
    assert sheet is not None
    account = dict(record["account"])
    assert account.pop("rows") == sheet.max_row == 88
    assert sum(account.values()) == 88
    assert account == {"weighed": 68, "assumed": 0, "not_weighed": 2, "heading": 2, "total": 4, "blank": 6, "other": 6}


def test_the_readme_of_the_sample_keeps_its_word(run: Run, folder: Path) -> None:
    """With the two missing sizes typed in, as its readme says, the status becomes 0; and the input is not touched."""
    book = openpyxl.load_workbook(folder / "cutting_list.xlsx")
    sheet = book.active
    assert sheet is not None
    sheet["D22"] = "Block 300x250x45"
    sheet["D45"] = "CHS 114.3x5"
    book.save(folder / "cutting_list.xlsx")
    before = (folder / "cutting_list.xlsx").read_bytes()
    done = run("schedule", "cutting_list.xlsx", cwd=folder)
    assert done.returncode == 0, done.stdout + done.stderr
    assert (folder / "cutting_list.xlsx").read_bytes() == before


def test_json_on_standard_output_is_json_alone(run: Run, folder: Path) -> None:
    """`--json -` prints the record alone; messages go to standard error."""
    done = run("schedule", "cutting_list.xlsx", "--json", "-", cwd=folder)
    assert json.loads(done.stdout)["account"]["rows"] == 88
    assert "Written" in done.stderr


def test_two_runs_agree(run: Run, folder: Path) -> None:
    """Byte-identical JSON and CSV, and a workbook equal cell by cell."""
    for name in ("a", "b"):
        outputs = ("--out", f"{name}.xlsx", "--json", f"{name}.json", "--csv", f"{name}.csv")
        assert run("schedule", "cutting_list.xlsx", *outputs, cwd=folder).returncode == 3
    assert (folder / "a.json").read_bytes() == (folder / "b.json").read_bytes()
    assert (folder / "a.csv").read_bytes() == (folder / "b.csv").read_bytes()
    one, two = openpyxl.load_workbook(folder / "a.xlsx"), openpyxl.load_workbook(folder / "b.xlsx")
    assert one.sheetnames == two.sheetnames
    for first, second in zip(one.worksheets, two.worksheets, strict=True):
        assert [[c.value for c in row] for row in first.iter_rows()] == [[c.value for c in row] for row in second.iter_rows()]


def test_check_shows_the_same_reading(run: Run, folder: Path) -> None:
    """`check` names the table, its columns and what would be refused, and writes nothing."""
    before = sorted(p.name for p in folder.iterdir())
    done = run("check", "cutting_list.xlsx", "--json", cwd=folder)
    assert done.returncode == 3
    found = json.loads(done.stdout)
    assert [t["range"] for t in found["tables"]] == ["A7:M88"]
    assert {c["field"] for c in found["tables"][0]["columns"]} >= {"mark", "quantity", "section", "material", "length", "unit_mass"}
    assert {f["cell"] for f in found["findings"] if f["level"] == "refused"} == {"D22", "D45"}
    text = run("check", "cutting_list.xlsx", cwd=folder)
    assert "88 rows read" in text.stdout.replace("\n", " ")
    assert sorted(p.name for p in folder.iterdir()) == before


def test_the_deliveries_of_the_footbridge(run: Run, folder: Path) -> None:
    """`loads` gives what `expected/` holds, and every axle load is the one worked out here from the job file's figures."""
    done = run("loads", "cutting_list.xlsx", "--job", "deliveries.toml", "--json", cwd=folder)
    assert done.returncode == 3, done.stderr
    assert done.stdout == (FOOTBRIDGE / "expected" / "loads.json").read_text(encoding="utf-8")
    plan = json.loads(done.stdout)
    assert [n["name"] for n in plan["not_loaded"]] == ["4 x BP1", "2 x RP1"]
    assert (len(plan["vehicles"]), plan["proven"]) == (5, True)
    job = tomllib.loads((folder / "deliveries.toml").read_text(encoding="utf-8"))
    kinds = {v["name"]: v for v in job["vehicles"]}
    for load in plan["vehicles"]:
        vehicle = kinds[load["vehicle"]]
        middle = vehicle["deck_length_mm"] / 2
        masses = [(p["kg"], p["centre_mm"][0] if p["centre_mm"] else middle) for p in load["pieces"]] + [(load["dunnage_kg"], middle)]
        whole = sum(kg for kg, _ in masses)
        if vehicle["kind"] == "rigid":
            rear = sum(kg * (x + vehicle["deck_front_mm"]) for kg, x in masses) / vehicle["wheelbase_mm"]
            worked = {"front": vehicle["front_empty_kg"] + whole - rear, "rear": vehicle["rear_empty_kg"] + rear}
        else:
            tractor = vehicle["tractor"]
            moment = sum(kg * (x - vehicle["deck_ahead_of_kingpin_mm"]) for kg, x in masses)
            axles = vehicle["axles_empty_kg"] + moment / vehicle["kingpin_to_axles_mm"]
            kingpin = vehicle["axles_empty_kg"] + vehicle["kingpin_empty_kg"] + whole - axles
            ahead = kingpin * tractor["fifth_wheel_ahead_mm"] / tractor["wheelbase_mm"]
            worked = {
                "kingpin": kingpin,
                "trailer": axles,
                "steer": tractor["front_empty_kg"] + ahead,
                "drive": tractor["drive_empty_kg"] + kingpin - ahead,
            }
        assert {a["name"]: a["kg"] for a in load["axles"]} == pytest.approx(worked)
