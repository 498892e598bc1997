"""`takeoff check`: the reading shown before anyone relies on it, and the lines that settle what was assumed."""

from __future__ import annotations

import json
import tomllib
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import pytest
from conftest import WriteList

from takeoff.errors import JobError
from takeoff.jobwriter import JobLine, with_lines

Run = Callable[..., "CompletedProcess[str]"]
HEADINGS = ["Mark", "Qty", "Section", "Material", "Length"]


def test_a_broken_row_is_shown_with_its_cell(run: Run, write_list: WriteList) -> None:
    """What would be refused stands with cell, what was read, and what would be right."""
    path = write_list([["A", 1, "UB 203x133x25", "S355", "6 m"], ["B", 1, "UB 203x133x26", "S355", "6 m"]], headings=HEADINGS)
    done = run("check", path, env={"COLUMNS": "80"})
    assert done.returncode == 3
    assert "C3" in done.stdout
    assert "UB 203x133x26" in done.stdout
    assert "UB 203x133x25" in done.stdout
    assert max(map(len, done.stdout.splitlines())) <= 80


def test_the_json_holds_every_column_and_name(run: Run, write_list: WriteList) -> None:
    """Each column with the field it was taken for, its unit and where the unit is from; each name with its certainty."""
    path = write_list([["A", 1, "UB 203x133x25", "S355", 6000]], headings=[*HEADINGS, "Colour of the day"])
    found = json.loads(run("check", path, "--json").stdout)
    columns = {c["letter"]: c for c in found["tables"][0]["columns"]}
    assert (columns["E"]["field"], columns["E"]["unit"], columns["E"]["unit_from"]) == ("length", "mm", "assumed")
    assert columns["F"]["field"] is None
    assert found["sections"] == [{"text": "UB 203x133x25", "designation": "UB 203x133x25", "match": "exact", "rows": 1}]
    assert found["materials"][0]["match"] in ("exact", "alias")
    assert found["job_lines"] == ["[reading]", 'length_unit = "mm"  # if that is what bare lengths mean']


def test_the_lines_settle_what_was_assumed(run: Run, write_list: WriteList) -> None:
    """--write-job adds the lines, keeps the comments, and the next run assumes nothing."""
    path = write_list([["A", 1, "UB 203x133x25", "S355", 6000]], headings=HEADINGS)
    job = path.with_name("job.toml")
    job.write_text('# ours, by hand\n[job]\ntitle = "Invented"  # keep me\n')
    assert json.loads(run("check", path, "--json").stdout)["account"]["assumed"] == 1
    done = run("check", path, "--write-job")
    assert done.returncode == 0, done.stderr
    assert "1 lines added" in done.stdout
    text = job.read_text()
    assert "# ours, by hand" in text
    assert "# keep me" in text
    assert tomllib.loads(text)["reading"] == {"length_unit": "mm"}
    assert json.loads(run("check", path, "--json").stdout)["account"]["assumed"] == 0


def test_a_key_that_stands_is_never_changed() -> None:
    """The user's own word goes before ours."""
    lines = [JobLine("reading", "length_unit", "mm", "x"), JobLine("names", "hollow", "hot", "y")]
    text, kept = with_lines('[reading]\nlength_unit = "cm"\n', lines)
    assert tomllib.loads(text) == {"reading": {"length_unit": "cm"}, "names": {"hollow": "hot"}}
    assert kept == ["reading.length_unit"]
    with pytest.raises(JobError, match="not proper TOML"):
        with_lines("= 3", [])
    with pytest.raises(JobError, match="is a value"):
        with_lines("reading = 3", [JobLine("reading", "length_unit", "mm", "x")])


def test_check_writes_nothing_unasked(run: Run, write_list: WriteList) -> None:
    """Looking is free of consequences."""
    path = write_list([["A", 1, "UB 203x133x25", "S355", 6000]], headings=HEADINGS)
    run("check", path)
    assert [p.name for p in Path(path.parent).iterdir()] == ["list.xlsx"]
