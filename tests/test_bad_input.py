"""Bad input: status 2, one message naming the file (and the cell where there is one), no traceback, nothing written."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import openpyxl
import pytest
from conftest import WriteList

Run = Callable[..., "CompletedProcess[str]"]
COMMANDS = ("schedule", "check", "lift")


def refused(done: CompletedProcess[str], *words: str) -> None:
    assert done.returncode == 2, done.stdout + done.stderr
    assert done.stdout == ""
    assert "Traceback" not in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    for word in words:
        assert word in done.stderr


@pytest.mark.parametrize("command", COMMANDS)
def test_a_missing_file(run: Run, tmp_path: Path, command: str) -> None:
    """A name that is no file."""
    refused(run(command, tmp_path / "absent.xlsx"), "absent.xlsx", "no such file")
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("command", COMMANDS)
def test_a_folder(run: Run, tmp_path: Path, command: str) -> None:
    """A folder instead of a list."""
    refused(run(command, tmp_path), "is a folder")


@pytest.mark.parametrize("name", ["empty.xlsx", "empty.csv"])
def test_an_empty_file(run: Run, tmp_path: Path, name: str) -> None:
    """A file of no bytes."""
    (tmp_path / name).write_bytes(b"")
    refused(run("schedule", tmp_path / name), name, "empty")
    assert [p.name for p in tmp_path.iterdir()] == [name]


def test_a_workbook_without_a_list(run: Run, write_list: WriteList) -> None:
    """Cells, but no headings that name a list."""
    path = write_list([["Shopping"], ["apples", 3], ["pears", 4]], headings=None)
    refused(run("schedule", path), "list.xlsx", "sheet List", "no member list was found", "Mark, Quantity")
    assert [p.name for p in path.parent.iterdir()] == ["list.xlsx"]


def test_a_list_with_neither_sizes_nor_masses(run: Run, write_list: WriteList) -> None:
    """Marks and quantities alone weigh nothing."""
    path = write_list([["A1", 2, "S355"]], headings=["Mark", "Quantity", "Material"])
    refused(run("schedule", path), "list.xlsx", "no member list was found")


def test_headings_without_rows(run: Run, write_list: WriteList) -> None:
    """A list of headings only names their cell."""
    refused(run("schedule", write_list([])), "list.xlsx", "cell A1", "headings but no rows")


def test_a_renamed_file_and_another_kind(run: Run, tmp_path: Path) -> None:
    """A text called .xlsx, and a kind of file that is not read."""
    (tmp_path / "text.xlsx").write_text("Mark,Quantity\nA,1\n")
    refused(run("schedule", tmp_path / "text.xlsx"), "text.xlsx", "damaged or no workbook")
    (tmp_path / "list.pdf").write_text("x")
    refused(run("schedule", tmp_path / "list.pdf"), "list.pdf", "not read")


def test_the_same_list_twice(run: Run, write_list: WriteList) -> None:
    """One list named twice would count twice."""
    path = write_list([["A1", "F", 2, "UB 203x133x25", "S355", 6000]])
    refused(run("schedule", path, path), "named twice")


@pytest.mark.parametrize(("text", "words"), [
    ("[jobs]\n", ["unknown key 'jobs'", "job"]),
    ("[lift]\nriging_kg = 3\n", ["unknown key 'lift.riging_kg'", "lift.rigging_kg"]),
    ("[lift]\nrigging_kg = true\n", ["lift.rigging_kg"]),
    ("[lift]\ncontingency = inf\n", ["lift.contingency"]),
    ("[lift]\ncontingency = 0\n", ["lift.contingency"]),
    ("[reading]\nsheets = ['Nowhere']\n", ["a sheet that is not there", "Nowhere"]),
    ("[reading]\nthousands = ','\n", ["reading.thousands", "'comma'"]),
    ("not toml", ["not proper TOML"]),
    ("[names.materials]\nx = 3\n", ["names.materials.x"]),
])
def test_a_wrong_job_file(run: Run, write_list: WriteList, text: str, words: list[str]) -> None:
    """The job file's fault names its key; nothing is written."""
    path = write_list([["A1", "F", 2, "UB 203x133x25", "S355", 6000]])
    (path.parent / "job.toml").write_text(text)
    refused(run("schedule", path), *words)
    assert sorted(p.name for p in path.parent.iterdir()) == ["job.toml", "list.xlsx"]


def test_outputs_are_kept_and_inputs_untouched(run: Run, write_list: WriteList) -> None:
    """An existing output stays unless --replace; an input is never an output; the list's bytes never change."""
    path = write_list([["A1", "F", 2, "UB 203x133x25", "S355", 6000]])
    before = path.read_bytes()
    assert run("schedule", path).returncode == 0
    target = path.with_name("list.schedule.xlsx")
    first = target.read_bytes()
    refused(run("schedule", path), "list.schedule.xlsx", "--replace")
    assert target.read_bytes() == first
    assert run("schedule", path, "--replace").returncode == 0
    refused(run("schedule", path, "--out", path, "--replace"), "is an input")
    refused(run("schedule", path, "--out", path.with_name("list.txt")), "list.txt", ".xlsx")
    refused(run("schedule", path, "--replace", "--json", path.parent / "no" / "where.json"), "where.json")
    assert path.read_bytes() == before
    assert openpyxl.load_workbook(target).sheetnames[0] == "Summary"
