"""The sample project, end to end through the installed command, against its expected output and a hand calculation."""

from __future__ import annotations

import csv
import json
import shutil
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import openpyxl
import pytest
from conftest import SAMPLES

Run = Callable[..., "CompletedProcess[str]"]
PROJECT = SAMPLES / "weir_footbridge"
HAND = Path(__file__).parent / "published" / "weir_footbridge_hand_check.csv"


@pytest.fixture(scope="module")
def hand() -> list[dict[str, str]]:
    with HAND.open(encoding="utf-8") as handle:
        return list(csv.DictReader(handle))


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    shutil.copytree(PROJECT, tmp_path / "job", ignore=shutil.ignore_patterns("expected", "*.schedule.xlsx"))
    return tmp_path / "job"


@pytest.fixture
def record(run: Run, folder: Path) -> dict[str, Any]:
    done = run("schedule", "cutting_list.xlsx", "--json", "out.json", "--csv", "out.csv", cwd=folder)
    assert done.returncode == 3, done.stderr
    loaded: dict[str, Any] = json.loads((folder / "out.json").read_text(encoding="utf-8"))
    return loaded


def test_the_expected_output_comes_out(record: dict[str, Any], folder: Path) -> None:
    """JSON and CSV are those in `expected/`, byte for byte: the same input gives the same output."""
    assert (folder / "out.csv").read_text(encoding="utf-8") == (PROJECT / "expected" / "schedule.csv").read_text(encoding="utf-8")
    assert (folder / "out.json").read_text(encoding="utf-8") == (PROJECT / "expected" / "schedule.json").read_text(encoding="utf-8")
    assert record["complete"] is False


def test_every_row_agrees_with_the_hand_calculation(record: dict[str, Any], hand: list[dict[str, str]]) -> None:
    """Each member's nominal mass is the one worked out by hand from published figures, to a gram or one part in 100,000."""
    members = {m["row"]: m for m in record["members"]}
    rows = [h for h in hand if h["row"]]
    assert sorted(members) == sorted(int(h["row"]) for h in rows)
    for h in rows:
        member = members[int(h["row"])]
        assert member["mark"] == h["mark"]
        if not h["nominal_mass_each_kg"]:
            assert member["status"] == "not weighed"
            continue
        assert member["status"] == "weighed"
        assert member["bare_each_kg"]["nominal"] == pytest.approx(float(h["nominal_mass_each_kg"]), rel=1e-5, abs=1e-3), h
    totals = {h["mark"]: float(h["nominal_total_kg"]) for h in hand if not h["row"]}
    for group in record["totals"]["by_assembly"]:
        of_it = [m for m in record["members"] if m["assembly"] == group["name"] and m["status"] != "not weighed"]
        bare = sum(m["quantity"] * m["bare_each_kg"]["nominal"] for m in of_it)
        assert bare == pytest.approx(totals[f"TOTAL {group['name']}"], rel=1e-5)
    assert record["totals"]["bare_kg"]["nominal"] == pytest.approx(totals["GRAND TOTAL"], rel=1e-5)


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
    sheet = openpyxl.load_workbook(PROJECT / "cutting_list.xlsx").active
    assert sheet is not None
    account = dict(record["account"])
    assert account.pop("rows") == sheet.max_row == 88
    assert sum(account.values()) == 88
    assert account == {"weighed": 68, "assumed": 0, "not_weighed": 2, "heading": 2, "total": 4, "blank": 6, "other": 6}


def test_the_two_rows_that_cannot_be_weighed_say_why(record: dict[str, Any]) -> None:
    """Each names its cell and what would be right."""
    lacking = {m["row"]: m for m in record["members"] if m["status"] == "not weighed"}
    assert sorted(lacking) == [22, 45]
    for row, cell in ((22, "D22"), (45, "D45")):
        [finding] = [f for f in lacking[row]["findings"] if f["level"] == "refused"]
        assert finding["cell"] == cell
        assert finding["right"]
    assert record["totals"]["not_weighed"] == 2


def test_bounds_hold_everywhere(record: dict[str, Any]) -> None:
    """Light <= nominal <= heavy for every member and total; totals are the sums of their rows."""
    for mass in [m["mass_total_kg"] for m in record["members"] if m["status"] != "not weighed"] + [record["totals"]["mass_kg"]]:
        assert mass["light"] <= mass["nominal"] <= mass["heavy"]
    for word in ("light", "nominal", "heavy"):
        rows = sum(m["mass_total_kg"][word] for m in record["members"] if m["status"] != "not weighed")
        assert record["totals"]["mass_kg"][word] == pytest.approx(rows, rel=1e-12)
        for grouping in ("by_material", "by_section", "by_assembly", "by_phase", "by_finish"):
            assert sum(g["mass_kg"][word] for g in record["totals"][grouping]) == pytest.approx(rows, rel=1e-12)


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
