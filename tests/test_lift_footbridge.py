"""The sample's lift, end to end through the installed command, against a hand calculation written out line by line."""

from __future__ import annotations

import csv
import json
import math
import shutil
from collections.abc import Callable
from functools import reduce
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import pytest
from conftest import SAMPLES

Run = Callable[..., "CompletedProcess[str]"]
HAND = Path(__file__).parent / "published" / "weir_footbridge_lift_hand_check.csv"
FILES = ("span_lift.csv", "span_lift.toml", "crane_chart.csv")


@pytest.fixture
def hand() -> list[dict[str, str]]:
    with HAND.open(encoding="utf-8") as handle:
        return list(csv.DictReader(handle))


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    for name in FILES:
        shutil.copy(SAMPLES / "weir_footbridge" / name, tmp_path / name)
    return tmp_path


def decimals(text: str) -> int:
    return len(text.partition(".")[2])


def test_the_hand_calculation_adds_up_by_itself(hand: list[dict[str, str]]) -> None:
    """Each line's arithmetic gives its value to the last digit, from the lines above it and nothing else."""
    known: dict[str, Any] = {"sqrt": math.sqrt, "degrees": math.degrees, "acos": math.acos, "min": min}
    for line in hand:
        known[line["line"]] = eval(line["arithmetic"], {"__builtins__": {}}, known)  # our own sheet, four functions
        assert f"{known[line['line']]:.{decimals(line['value'])}f}" == line["value"], line


def test_the_lift_agrees_with_the_hand_calculation_to_the_last_digit(run: Run, folder: Path, hand: list[dict[str, str]]) -> None:
    """List, chart and job file go in; every line of the hand sheet that names a figure of the record is that figure."""
    done = run("schedule", "span_lift.csv", "--job", "span_lift.toml", "--json", "out.json", cwd=folder)
    assert done.returncode == 0, done.stderr
    record = json.loads((folder / "out.json").read_text(encoding="utf-8"))
    compared = 0
    for line in hand:
        if not line["in the record"]:
            continue
        found = reduce(lambda at, key: at[int(key) if key.isdigit() else key], line["in the record"].split("."), record)
        assert f"{found:.{decimals(line['value'])}f}" == line["value"], line
        compared += 1
    assert compared == 30
    [pick] = record["picks"]
    assert pick["verdict"] == "within"
    assert pick["crane"]["largest_radius_m"] == 14
    chosen = {(c["tackle"], c["method"]): c["size"] for c in pick["points"][1]["chosen"]}
    assert chosen["wire rope", "trigonometric"] == "13 mm"


def test_one_job_goes_from_the_list_to_the_vehicle(run: Run, folder: Path) -> None:
    """What hangs on the hook rides on the trailer: one unit of the pick's heavy mass, nothing left behind, its overhang marked."""
    done = run("schedule", "span_lift.csv", "--job", "span_lift.toml", "--json", "out.json", cwd=folder)
    assert done.returncode == 0, done.stderr
    record = json.loads((folder / "out.json").read_text(encoding="utf-8"))
    [pick], [vehicle] = record["picks"], record["vehicles"]
    assert record["account"]["weighed"] == pick["members"] == 7
    [piece] = vehicle["pieces"]
    assert (piece["name"], piece["kg"]) == (pick["name"], pytest.approx(pick["mass_kg"]["heavy"]))
    assert record["not_loaded"] == []
    assert all(axle["kg"] < axle["limit_kg"] for axle in vehicle["axles"])
    assert any("600 mm beyond" in f["message"] for f in vehicle["findings"])


def test_the_sheet_prints_it(run: Run, folder: Path) -> None:
    """`takeoff lift` prints the figures rounded toward safety."""
    done = run("lift", "span_lift.csv", "--job", "span_lift.toml", cwd=folder, env={"COLUMNS": "100"})
    assert done.returncode == 0, done.stderr
    for text in ("HOOK LOAD 3 285 kg (32.3 kN)", "utilisation at rest: 43.3 %", "head room: 12.31 m", "Verdict: within"):
        assert text in done.stdout, text


def test_a_row_that_cannot_be_weighed_takes_the_verdict_away(run: Run, folder: Path) -> None:
    """The same lift with one section misspelt is unknown, and its status 3."""
    text = (folder / "span_lift.csv").read_text(encoding="utf-8")
    (folder / "span_lift.csv").write_text(text.replace("UB 203x133x25", "UB 203x133x26", 1), encoding="utf-8")
    done = run("lift", "span_lift.csv", "--job", "span_lift.toml", "--json", cwd=folder)
    assert done.returncode == 3
    [pick] = json.loads(done.stdout)["picks"]
    assert (pick["verdict"], pick["crane"]["verdict"], pick["centre_of_gravity_mm"]) == ("unknown", "unknown", None)
