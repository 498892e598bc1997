"""Documents that cannot rot: the commands, options and excerpts the README names are real."""

from __future__ import annotations

import re
import shutil
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import pytest
from conftest import ROOT, SAMPLES
from typer.testing import CliRunner

from takeoff import cli
from takeoff.cli import app
from takeoff.findings import KINDS
from takeoff.lists.headings import FIELDS
from takeoff.reports.workbook import sheet
from takeoff.reports.workbook.temperatures import TEMPERATURES

COMMANDS = ("schedule", "check", "material", "section", "weigh", "movement", "fit", "lift", "loads", "start")
Run = Callable[..., "CompletedProcess[str]"]
README = (ROOT / "README.md").read_text(encoding="utf-8")
DEVELOPERS = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")


def block_after(mark: str) -> str:
    """The fenced block that follows a mark in the README."""
    return README.split(f"<!-- {mark} -->", 1)[1].split("```", 2)[1].partition("\n")[2]


def test_the_excerpt_is_what_the_command_prints(run: Run, tmp_path: Path) -> None:
    """The README's excerpt of the main job is the command's own output."""
    folder = tmp_path / "sample_projects" / "weir_footbridge"
    shutil.copytree(SAMPLES / "weir_footbridge", folder, ignore=shutil.ignore_patterns("*.schedule.xlsx"))
    done = run("schedule", "sample_projects/weir_footbridge/cutting_list.xlsx", cwd=tmp_path, env={"COLUMNS": "80"})
    excerpt = block_after("excerpt: schedule").rstrip().removesuffix("...").rstrip()
    assert excerpt
    assert done.stdout.startswith(excerpt), done.stdout


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_is_documented_and_has_help(command: str) -> None:
    """Each command stands in the README; its help gives a whole example of a line, and names no type of the program's own."""
    assert f"takeoff {command}" in README
    text = help_of(command)
    assert re.search(rf"^  Example: takeoff {command} \S", text, re.MULTILINE)
    assert not re.search(r"<\w", text)
    assert not re.search(r"\w-\n", text)
    assert max(map(len, text.splitlines())) <= 80


def help_of(*command: str) -> str:
    done = CliRunner().invoke(app, [*command, "--help"], env={"COLUMNS": "80"})
    assert done.exit_code == 0, done.output
    return done.stdout


def test_the_help_names_every_command() -> None:
    """`takeoff --help` lists the commands, each in one whole line, and shows where to begin."""
    text = help_of()
    for command in COMMANDS:
        assert re.search(rf"^  {command} .*\.$", text, re.MULTILINE)
    assert "..." not in text.split("Commands:")[1]
    assert "Example: takeoff schedule" in text


def test_every_option_the_readme_names_is_real() -> None:
    """An option in a command line is one of that command; one in the running text is one of some command."""
    known = {command: set(re.findall(r"--[a-z][a-z-]+", help_of(command))) for command in COMMANDS}
    for command, rest in re.findall(r"takeoff (\w+)([^\n`|]*)", README):
        if command in known:
            assert set(re.findall(r"(?<!\w)--[a-z][a-z-]+", rest.split(" # ")[0])) <= known[command], (command, rest)
    named = set(re.findall(r"(?<![\w-])--[a-z][a-z-]+", README))
    assert named <= {"--version"}.union(*known.values())
    left_out = known["schedule"] - named - {"--help"}
    assert not left_out, f"options of schedule that the README does not name: {left_out}"


def test_every_exit_status_is_documented() -> None:
    """The README's table of statuses is the one of the command line's own account."""
    said = set(re.findall(r"^\| (\d+) \|", README, re.MULTILINE))
    meant = set(re.findall(r"(?:Exit status: |; )(\d+) ", (cli.__doc__ or "").replace("\n", " ")))
    assert said == meant == {"0", "1", "2", "3", "4", "130"}


def test_every_sheet_of_the_workbook_is_named() -> None:
    """Each sheet that a workbook may have stands in the README."""
    for name in (*sheet.SHEETS, sheet.LOADS, sheet.CHANGES, sheet.DRAWINGS, TEMPERATURES):
        assert f"**{name}**" in README, name


def test_the_guide_names_only_files_that_exist() -> None:
    """Every path in backquotes in DEVELOPERS.md is there."""
    for path in re.findall(r"`((?:takeoff|materials|tests|\.ci)/[\w./-]+)`", DEVELOPERS):
        if "*" not in path and "<" not in path:
            assert (ROOT / path.rstrip("/")).exists(), path


def test_every_kind_of_finding_and_field_is_explained() -> None:
    """A kind of finding without a meaning, or one that nothing makes, would be noise."""
    sources = "\n".join(p.read_text(encoding="utf-8") for p in (ROOT / "takeoff").rglob("*.py") if p.name != "findings.py")
    for kind, meaning in KINDS.items():
        assert len(meaning) > 20, kind
        assert kind in sources, f"{kind} is made nowhere"
    assert {"mark", "quantity", "section", "material", "length"} <= FIELDS


def test_the_top_level_is_as_fixed() -> None:
    """Only the fixed names stand at the top of the checkout, beside dot-files."""
    fixed = {"README.md", "DEVELOPERS.md", "pyproject.toml", "takeoff", "tests", "materials", "sample_projects"}
    generated = {"dist", "build", "takeoff.egg-info"}
    assert {p.name for p in ROOT.iterdir() if not p.name.startswith(".")} - generated == fixed
