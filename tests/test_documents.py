"""Documents that cannot rot: the commands, options and excerpts the README names are real."""

from __future__ import annotations

import re
import shutil
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import pytest
from conftest import ROOT, SAMPLES

from takeoff.findings import KINDS
from takeoff.lists.headings import FIELDS

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


@pytest.mark.parametrize("command", ["schedule", "check", "material", "section", "weigh", "movement", "fit", "lift", "loads", "start"])
def test_every_command_is_documented_and_has_help(run: Run, command: str) -> None:
    """Each command stands in the README, and its help gives an example."""
    assert f"takeoff {command}" in README
    done = run(command, "--help")
    assert done.returncode == 0
    assert "Example" in done.stdout


def test_the_help_names_every_command(run: Run) -> None:
    """`takeoff --help` lists the commands, and no argument at all shows the same."""
    help_text = run("--help").stdout
    for command in ("schedule", "check", "material", "section", "weigh", "movement", "fit", "lift", "loads", "start"):
        assert re.search(rf"^\s*{command}\b", help_text, re.MULTILINE)


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
