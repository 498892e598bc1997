"""`takeoff start`: what it writes works at once, offers only what is known, and its job file tells the code's own defaults."""

from __future__ import annotations

import json
import re
import shutil
import tomllib
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any, get_args

import openpyxl
import pytest
from pydantic import BaseModel
from pydantic_core import PydanticUndefined

from takeoff import materials, sections
from takeoff.job import Job, job_from, read_job
from takeoff.reports import starter

Run = Callable[..., "CompletedProcess[str]"]

#: keys whose line in the file shows an example, since the code has no default or an empty one
EXAMPLES = {
    "job.title",
    "reading.sheets",
    "reading.columns",
    "names.materials",
    "names.sections",
    "temperatures",
    "runs",
    "lift.picks",
    "crane",
    "vehicles",
    "transport.friction",
    "limits",
}


@pytest.fixture
def folder(run: Run, tmp_path: Path) -> Path:
    done = run("start", tmp_path / "new")
    assert done.returncode == 0, done.stderr
    return tmp_path / "new"


def fill(path: Path, rows: list[list[Any]], *, first: int = 3) -> None:
    book = openpyxl.load_workbook(path)
    for number, cells in enumerate(rows, first):
        for column, value in enumerate(cells, 1):
            book["Members"].cell(number, column, value)
    book.save(path)


THREE = [
    ["B1", "A1", 2, "UB 457x191x67", "S355J2", 7200],
    ["P1", "A1", 4, "PL", "S355J2", 300, 200, 20],
    ["Z1", "A2", 1, "SHS 100x5", "1.4404", "1.2 m"],
]


def test_three_rows_and_a_schedule(run: Run, folder: Path) -> None:
    """Filling three rows and running `schedule` works at once; the example row is in no total, and that is said."""
    fill(folder / "member_list.xlsx", THREE)
    done = run("schedule", folder / "member_list.xlsx", "--json", folder / "out.json")
    assert done.returncode == 0, done.stdout + done.stderr
    record = json.loads((folder / "out.json").read_text(encoding="utf-8"))
    assert [m["mark"] for m in record["members"]] == ["B1", "P1", "Z1"]
    assert record["account"]["other"] == 1
    assert [f["cell"] for f in record["findings"] if f["kind"] == "example-block"] == ["A2"]
    assert "New job" in done.stdout


def test_a_row_typed_over_the_example_counts(run: Run, folder: Path) -> None:
    """Whoever overwrites the example row's mark has a member like any other: nothing is lost."""
    fill(folder / "member_list.xlsx", THREE, first=2)
    done = run("schedule", folder / "member_list.xlsx", "--json", "-", "--out", folder / "o.xlsx")
    assert [m["mark"] for m in json.loads(done.stdout)["members"]] == ["B1", "P1", "Z1"]


def test_without_the_job_file_the_example_still_does_not_count(run: Run, folder: Path, tmp_path: Path) -> None:
    """The list carried off alone reads the same: the row says by itself that it is an example."""
    fill(folder / "member_list.xlsx", THREE)
    alone = shutil.copy(folder / "member_list.xlsx", tmp_path / "alone.xlsx")
    record = json.loads(run("schedule", alone, "--json", "-").stdout)
    assert [m["mark"] for m in record["members"]] == ["B1", "P1", "Z1"]


def test_the_list_has_drop_downs_notes_and_one_marked_example(folder: Path) -> None:
    """Sections and materials offer a list that may be overruled, every heading explains itself, the example says what it is."""
    book = openpyxl.load_workbook(folder / "member_list.xlsx")
    sheet, choices = book["Members"], book["Choices"]
    headings = [c.value for c in sheet[1]]
    assert headings[:6] == ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)"]
    assert all(c.comment and len(c.comment.text) > 15 for c in sheet[1])
    rules = {str(rule.sqref).split(":")[0]: rule for rule in sheet.data_validations.dataValidation}
    for cell, column in (("D2", 1), ("E2", 2)):
        assert rules[cell].type == "list"
        assert not rules[cell].showErrorMessage
        last = int(re.search(r"\$(\d+)$", rules[cell].formula1).group(1))  # type: ignore[union-attr]
        assert choices.cell(last, column).value
        assert choices.cell(last + 1, column).value is None
    assert "not counted" in str(sheet["A2"].value)
    assert [c.value for c in sheet[3] if c.value is not None] == []
    assert sheet.freeze_panes == "B2"


def test_every_choice_is_known() -> None:
    """What a drop-down offers reads as exactly itself."""
    names = starter.materials_offered()
    assert len(names) == len(set(names)) > 500
    assert [name for name in names if materials.lookup(name).match not in ("exact", "alias")] == []
    offered = starter.sections_offered()
    assert len(offered) > 1500
    assert [name for name in offered[4:] if sections.read(name).match not in ("exact", "alias")] == []


def uncommented(text: str) -> str:
    """The file with every offered setting taken; a second [[table]] of one name stays one."""
    return "\n".join(re.sub(r'^#(?=[\w"\[])', "", line) for line in text.split("\n"))


def test_the_job_file_reads_as_it_stands(folder: Path) -> None:
    """As written it is valid; nothing is set but the title, the units and the sheet."""
    job = read_job(folder / "job.toml")
    assert job.model_copy(update={"path": None}) == job_from(
        {"job": {"title": "New job", "units": "si"}, "reading": {"sheets": ["Members"]}}
    )


def parts_of(annotation: Any) -> type[BaseModel] | None:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        return annotation
    for inner in get_args(annotation):
        found = parts_of(inner)
        if found is not None:
            return found
    return None


def keys(model: type[BaseModel], prefix: str = "") -> list[tuple[str, Any]]:
    """Every key of the job file with its default."""
    found = []
    for name, field in model.model_fields.items():
        if name == "path":
            continue
        part = parts_of(field.annotation)
        found.append((prefix + name, field.get_default(call_default_factory=True)))
        if part is not None:
            found += keys(part, f"{prefix}{name}.")
    return found


def test_the_job_file_offers_every_key_with_its_default() -> None:
    """No key is missing, none is unknown, and a key that has a default in the code shows that very default."""
    raw = tomllib.loads(uncommented(starter.text("job.toml")))
    job = job_from(raw)
    assert job.vehicles[1].kind == "semitrailer"
    text = starter.text("job.toml")
    for key, default in keys(Job):
        name = key.split(".")[-1]
        assert re.search(rf"\b{re.escape(name)}\b", text), f"{key} is not in the job file"
        if (
            default in (None, (), {}, PydanticUndefined)
            or isinstance(default, BaseModel)
            or any(key == e or key.startswith(e + ".") for e in EXAMPLES)
        ):
            continue
        at: Any = raw
        for part in key.split("."):
            at = at[part]
        assert at == (list(default) if isinstance(default, tuple) else default), f"{key} shows {at!r}, the code has {default!r}"


def test_nothing_that_exists_is_replaced(run: Run, tmp_path: Path) -> None:
    """A second start, a file in the way, a folder nobody may make: one message, status 2, all or nothing."""
    target = tmp_path / "new"
    target.mkdir()
    (target / "job.toml").write_text("# mine\n", encoding="utf-8")
    done = run("start", target)
    assert done.returncode == 2
    assert "exists already and is kept" in done.stderr
    assert [p.name for p in target.iterdir()] == ["job.toml"]
    assert (target / "job.toml").read_text(encoding="utf-8") == "# mine\n"
    for wrong in (target / "job.toml", tmp_path / "no" / "such"):
        done = run("start", wrong)
        assert done.returncode == 2
        assert "Traceback" not in done.stderr


def test_the_how_to_names_commands_that_exist(run: Run, folder: Path) -> None:
    """Each command and option of the how-to is one the program has."""
    text = (folder / "HOWTO.txt").read_text(encoding="utf-8")
    named = set(re.findall(r"takeoff (\w+) member_list", text))
    assert named == {"check", "schedule"}
    helped = run("schedule", "--help").stdout
    assert all(option in helped for option in set(re.findall(r"--\w+", text)))
    assert "not a lift plan" in " ".join(text.split())


def test_units_of_the_new_list(run: Run, tmp_path: Path) -> None:
    """`--units us` asks for inches and pounds, prints in them, and its three rows weigh what they do in mm."""
    done = run("start", tmp_path / "us", "--units", "us", "--quiet")
    assert (done.returncode, done.stdout) == (0, "")
    path = tmp_path / "us" / "member_list.xlsx"
    assert [c.value for c in openpyxl.load_workbook(path)["Members"][1]][5:9] == [
        "Length (in)",
        "Width (in)",
        "Thickness (in)",
        "Unit mass (lb)",
    ]
    fill(path, [["B1", "A1", 2, "W18x40", "ASTM A992", 288], ["P1", "A1", 1, "PL", "A36", 12, 8, 0.5]])
    done = run("schedule", path, "--json", tmp_path / "o.json")
    assert done.returncode == 0, done.stdout
    assert "Mass, lb" in done.stdout
    record = json.loads((tmp_path / "o.json").read_text(encoding="utf-8"))
    assert record["members"][0]["length_mm"] == pytest.approx(288 * 25.4)
    assert record["members"][0]["mass_each_kg"]["nominal"] == pytest.approx(40 * 24 * 0.45359237, rel=0.005)
    assert {m["status"] for m in record["members"]} == {"weighed"}
