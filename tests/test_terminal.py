"""What stands on the terminal: everything that matters, within its width, and no sign that acts on it."""

from __future__ import annotations

import json
import unicodedata

import pytest
from hypothesis import given
from hypothesis import strategies as st
from made_result import SOME_ROWS, make, row
from typer.testing import CliRunner

from takeoff.cli import app
from takeoff.findings import Finding
from takeoff.pipeline import Result
from takeoff.reports.terminal import pick_sheet, summary
from takeoff.reports.wording import shown

JOB = {"job": {"title": "Weir", "reference": "R-1", "revision": "B", "date": "2026-02-03"}}


def printed(*words: str, width: str = "80") -> str:
    """What a command prints on a terminal of this width."""
    return CliRunner().invoke(app, list(words), env={"COLUMNS": width}).stdout


def everything(width: int, result: Result | None = None) -> str:
    result = result or make(job=JOB)
    return summary(result, width) + "\n" + pick_sheet(result.picks, width, cautions=result.cautions)


@pytest.mark.parametrize("width", [24, 40, 60, 80, 120])
def test_nothing_is_wider_than_the_terminal(width: int) -> None:
    """At any width no line runs over, and long texts of a list do not change that."""
    for result in (make(job=JOB), make([row("m" * 200, assembly="assembly " * 30, section="s" * 90), *SOME_ROWS])):
        assert max(map(len, everything(width, result).splitlines())) <= width


def test_summary_says_what_was_read_and_how_it_adds_up() -> None:
    """Input, account, total between bounds, likely range with its purpose, heaviest, missing, assumed, not counted, cautions."""
    text = summary(make(job=JOB))
    flat = " ".join(text.split())
    for part in (
        "Weir (R-1, revision B, 2026-02-03)", "list.xlsx: 1 sheet (Steel)",
        "7 = 3 weighed + 1 assumed + 1 not weighed + 1 heading + 1 total", "for ordering and freight, never for lifting",
        "These totals lack 1 row not weighed", "A2 (lacks 1 row)",
        "Steel row 8, cell D8: the section text names nothing in the tables (read: 'UB 99x')",
        "Right would be: a size of the table", "the section was taken for a similar name (read: 'UB1'); sheet Steel D6",
        "welds, bolts, finish, contents and temporary steel", "An estimate for planning, not a lift plan",
    ):
        assert part in flat


def test_complete_list_says_nothing_of_missing_rows() -> None:
    """Where every row is weighed the words for missing ones do not appear."""
    assert "ot weighed" not in summary(make([row("B1")], {}))
    assert "INCOMPLETE" not in pick_sheet(make([row("B1")], {}).picks)


def test_long_lists_of_findings_are_cut_and_counted() -> None:
    """The first ten reasons are shown and the number of the rest said; the same finding stands once with its count."""
    rows = [row(f"M{i}", status="not weighed", row=i + 5) for i in range(25)]
    text = summary(make(rows, {}, sheet_findings=[
        Finding("assumed", "unit-assumed", "taken as mm", cell="F1", count=40, cells=tuple(f"F{i}" for i in range(1, 41)))]))
    assert text.count("the length is missing") == 10
    assert "and 15 rows more" in text
    assert "40 times: taken as mm; F1, F2, F3, F4, F5, F6, F7, F8 and 32 more" in " ".join(text.split())


def test_pick_sheet_builds_up_to_a_hook_load_that_is_not_below_ours() -> None:
    """Lines, factors with source and evidence, and printed figures that cover the unrounded ones."""
    result = make(job={"lift": {"rigging_kg": 100.0}})
    text = " ".join(pick_sheet(result.picks, 80).split())
    pick = result.picks[0]
    for line in pick.build_up:
        assert line.item in text
    printed = float(text.split("HOOK LOAD ")[1].split(" kg")[0].replace(" ", ""))
    assert pick.hook_load_kg <= printed < pick.hook_load_kg * 1.001
    assert f"({pick.contingency.source.evidence})" in text
    assert "Verdict: unknown" in text
    assert "(recalled)" in text or "(read)" in text
    assert "lacks 1 row not weighed. Every figure below is of the rest only." in text


def test_us_units_print_pounds_and_kips() -> None:
    """Nothing in kg is left, and no ton."""
    result = make(job={"job": {"units": "us"}})
    text = summary(result) + pick_sheet(result.picks, units="us")
    assert "Mass, lb" in text
    assert " kip" in text
    assert " kg" not in text


def test_list_without_assemblies_has_no_picks() -> None:
    """It says so instead of showing nothing."""
    result = make([row("B1", assembly=None)], {})
    assert pick_sheet(result.picks) == "No picks: the list names no assembly."
    assert "hook load" not in summary(result)


def test_text_of_the_list_cannot_act_on_the_terminal() -> None:
    """Colour codes, bells, direction and zero-width signs do not get through, brackets stay as typed."""
    evil = "A\x1b[31m\x07\u202e\u200b[bold]x[/]\r\nB\x9b2J"
    result = make([row(evil, assembly=evil, status="not weighed", reason=evil), row("B", assembly=evil)], {}, job={"job": {"title": evil}})
    text = everything(80, result)
    assert all(c == "\n" or c.isprintable() for c in text)
    assert "[bold]x[/]" in text


@given(st.text())
def test_shown_text_is_one_printable_line(text: str) -> None:
    """Whatever a cell holds, what is shown is one line without control or format signs."""
    line = shown(text)
    assert not [c for c in line if not (c.isprintable() or unicodedata.category(c) == "Zs")]


@pytest.mark.parametrize("width", ["40", "80"])
def test_a_weighed_piece_says_what_is_not_in_its_mass(width: str) -> None:
    """A look-up weighs the bare piece: the table says so, and what is left out is named, in any width and in the JSON."""
    words = ("weigh", "PL 10x200", "1.2 m", "--material", "S355")
    text = " ".join(printed(*words, width=width).split())
    assert "Bare mass, kg" in text
    assert "Not counted: welds, bolts, finish, insulation, contents, water soaked up, temporary steel and rigging." in text
    record = json.loads(printed(*words, "--json"))
    assert record["not_counted"][:4] == ["welds", "bolts", "finish", "insulation"]


@pytest.mark.parametrize("words", [
    ("section",), ("section", "HEB"), ("section", "UB 1x2x3"), ("section", "SHS 100x5", "RHS 100x50x5", "PL 10"), ("material",),
    ("material", "oak", "steel"), ("weigh", "UB 203x133x25", "3 m"), ("fit", "S355", "99.9", "S355", "100", "--clearance", "0.1"),
    ("movement", "oak", "6 m", "--from", "-20", "--to", "45", "--against", "S355"),
])
def test_look_ups_fit_a_narrow_terminal(words: tuple[str, ...]) -> None:
    """No line of a look-up is wider than a terminal of 40 columns."""
    lines = printed(*words, width="40").splitlines()
    assert lines
    assert [line for line in lines if len(line) > 40] == []
