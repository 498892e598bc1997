"""What is added, stated, weighed and how it is handled, in every output alike."""

from __future__ import annotations

import csv
import io
import json
from pathlib import Path
from typing import Any

import openpyxl
import pytest
from conftest import WriteList

from takeoff import pipeline
from takeoff.job import job_from
from takeoff.reports.checking import check_record, check_text
from takeoff.reports.records import to_csv, to_json
from takeoff.reports.terminal import summary
from takeoff.reports.workbook import write_workbook

HEADINGS = [
    "Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)", "Finish", "Contents", "Phase", "Unit mass (kg)",
    "Weighed mass (kg)",
]
ROWS = [
    ["A1", "F1", 2, "UB 203x133x25", "S355", 6000, "galvanized", None, "1", 150.6, None],
    ["A2", "F1", 1, "SHS 100x100x5", "S355", 4000, "paint 240 um", "water", "1", None, None],
    ["A3", "F2", 3, "UC 152x152x30", "S355", 3000, "sparkle", None, "2", 120, None],
    ["A4", "F2", 1, "UC 152x152x30", "S355", 3000, None, None, "2", None, 91.5],
    ["A5", "F2", 1, "UC 1x2x3", "S355", 3000, "galvanized", None, "2", None, None],
]
WORDS = ("light", "nominal", "heavy")


@pytest.fixture
def result(write_list: WriteList) -> pipeline.Result:
    path = write_list(ROWS, headings=HEADINGS)
    return pipeline.schedule([path], job_from({"masses": {"weld_percent": 1.5, "bolt_percent": 0.0, "finish": "none"}}))


def test_json_members_add_up(result: pipeline.Result) -> None:
    """bare + additions = each, bound by bound; each addition says its kind, rule and source; a row not weighed has none."""
    record = json.loads(to_json(result))
    for member in record["members"][:4]:
        for word in WORDS:
            added = sum(a["mass_kg"][word] for a in member["additions"])
            assert member["bare_each_kg"][word] + added == pytest.approx(member["mass_each_kg"][word], rel=1e-12)
        assert all(set(a) >= {"kind", "mass_kg", "rule", "title", "clause", "evidence"} for a in member["additions"])
    kinds = [[a["kind"] for a in m["additions"]] for m in record["members"]]
    assert kinds == [["finish", "weld"], ["finish", "weld", "contents"], ["weld"], [], []]
    totals = record["totals"]
    for word in WORDS:
        parts = totals["bare_kg"][word] + sum(a["mass_kg"][word] for a in totals["additions"])
        assert parts == pytest.approx(totals["mass_kg"][word], rel=1e-12)
    assert {g["name"] for g in totals["by_phase"]} == {"1", "2"}
    assert {g["name"] for g in totals["by_finish"]} == {"galvanized", "paint 240 um", "sparkle", "(no finish named)"}
    weighed = record["members"][3]
    assert (weighed["weighed_each_kg"], weighed["mass_each_kg"]["heavy"], weighed["basis"]["weighed"]) == (91.5, 91.5, True)
    assert weighed["calculated_each_kg"]["nominal"] == pytest.approx(90 * 1.015)
    assert [m["handling"] for m in record["members"]] == ["lifting aid"] * 4 + [None]
    assert record["members"][0]["stated_each_kg"] == 150.6


def test_totals_and_picks_say_what_is_not_counted(result: pipeline.Result) -> None:
    """Finish and contents of rows that could not be added are named, on the total and on the pick they belong to."""
    assert result.totals.not_counted == ("temporary steel", "finish of 1 row")
    first, second = result.picks
    assert "finish of 1 row" not in first.not_counted
    assert "finish of 1 row" in second.not_counted
    assert "temporary steel" in first.not_counted


def test_csv_has_the_parts(result: pipeline.Result) -> None:
    """Bare and each addition in columns of their own."""
    read = list(csv.DictReader(io.StringIO(to_csv(result), newline="")))
    for row in read[:4]:
        for word in WORDS:
            parts = [float(row[f"mass_{part}_each_{word}_kg"]) for part in ("bare", "finish", "weld", "contents")]
            assert sum(parts) == pytest.approx(float(row[f"mass_each_{word}_kg"]), rel=1e-12)
    assert read[3]["weighed_each_kg"] == "91.5"
    assert read[4]["mass_finish_each_heavy_kg"] == ""


def test_the_workbook_adds_the_parts_live(result: pipeline.Result, tmp_path: Path) -> None:
    """Each mass of a piece is a formula over its parts, and the stored results add up."""
    path = tmp_path / "out.xlsx"
    write_workbook(result, path)
    live, stored = openpyxl.load_workbook(path)["Weight schedule"], openpyxl.load_workbook(path, data_only=True)["Weight schedule"]
    headings = [c.value for c in live[6]]
    at = {str(h): i for i, h in enumerate(headings)}
    for number in range(7, 11):
        formulas: list[Any] = [c.value for c in live[number]]
        values: list[Any] = [c.value for c in stored[number]]
        for word in WORDS:
            assert str(formulas[at[f"One piece, {word} (kg)"]]).startswith("=")
            parts = [values[i] for h, i in at.items() if h.endswith(f", {word} (kg)") and h.startswith(("Bare", "+"))]
            assert len(parts) == 4
            assert sum(parts) == pytest.approx(values[at[f"One piece, {word} (kg)"]], rel=1e-9)
    assert stored.cell(10, at["Weighed, one piece (kg)"] + 1).value == 91.5
    assert stored.cell(7, at["Handling"] + 1).value == "lifting aid"
    assert "sets the heavy mass" in str(stored.cell(9, at["What to know"] + 1).value)
    assert stored.cell(9, at["Stated against bare (%)"] + 1).value == pytest.approx(100 * (120 / 90 - 1))
    names = [str(c.value) for row in openpyxl.load_workbook(path)["Basis and sources"].iter_rows(max_col=2) for c in row]
    assert any("hot-dip zinc by EN ISO 1461" in name for name in names)
    summary_cells = {str(c.value) for row in openpyxl.load_workbook(path)["Summary"].iter_rows(max_col=1) for c in row}
    assert {"By phase", "By finish"} <= summary_cells


def test_the_terminal_shows_the_parts(result: pipeline.Result) -> None:
    """Bare pieces, each kind of addition, total; and what is not counted."""
    text = summary(result, 100)
    wanted = ["bare", "finish", "welds", "contents", "total"]
    assert [word for line in text.splitlines() if line[:1].isalpha() and (word := line.split()[0]) in wanted] == wanted
    assert "finish of 1 row" in text


def test_check_lists_what_is_not_counted_first(write_list: WriteList) -> None:
    """Before the tables, as the first thing."""
    reading = pipeline.read([write_list(ROWS, headings=HEADINGS)])
    record = check_record(reading, pipeline.weigh_reading(reading))
    assert record["not_counted"][:3] == ["welds", "bolts", "finish"]
    assert check_text(record, 100).startswith("Not counted: welds, bolts")
