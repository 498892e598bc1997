"""The hook load build-up: default factors, what replaces them, what is named as not counted."""

from __future__ import annotations

import json
import math
from collections.abc import Callable
from subprocess import CompletedProcess

import pytest
from conftest import WriteList

from takeoff import pipeline
from takeoff.job import job_from
from takeoff.lifting import hook

Run = Callable[..., "CompletedProcess[str]"]

#: design mass in t -> dynamic factor. 0027/ND rev 11.2 (guidelines for marine lifting), table 5-1, onshore column, one crane, as
#: quoted in open texts; evidence read. A band's upper end belongs to the band; under 3 t counts as 3 t.
PUBLISHED_DYNAMIC = [
    (0.2, 1.10), (3, 1.10), (50, 1.10), (100, 1.10), (100.001, 1.05), (250, 1.05), (300, 1.05), (700, 1.05), (1000, 1.05),
    (1000.5, 1.03), (2500, 1.03), (4000, 1.03),
]


@pytest.mark.parametrize(("mass_t", "factor"), PUBLISHED_DYNAMIC)
def test_dynamic_factors_as_published(mass_t: float, factor: float) -> None:
    """The factor of each mass band is the table's."""
    found = hook.dynamic(mass_t * 1000)
    assert found.value == factor
    assert found.source.evidence == "read"
    assert "0027/ND" in found.source.title


@pytest.mark.parametrize(("case", "value"), [("weighed", 1.03), ("calculated", 1.05), ("assumed or stated", 1.10)])
def test_contingencies_are_marked_recalled(case: str, value: float) -> None:
    """The weight contingency factors are remembered, and say so."""
    found = hook.contingency(case)
    assert found.value == value
    assert found.source.evidence == "recalled"


def test_a_build_up_worked_by_hand(write_list: WriteList) -> None:
    """Two beams of 25.1 kg/m and 6 m: heavy = 2 x 6 x 25.1 x 1.04 (EN 10034) = 313.248 kg, and on from there line by line."""
    path = write_list([["A1", "F1", 2, "UB 203x133x25", "S355", 6000]])
    job = job_from({"lift": {"rigging_kg": 40.0, "hook_block_kg": 120.0, "rope_kg": 10.0}})
    [pick] = pipeline.schedule([path], job).picks
    heavy = 2 * 6 * 25.1 * 1.04
    design = heavy * 1.05
    static = design + 40 + 120 + 10
    assert pick.mass_kg.heavy == pytest.approx(heavy, rel=1e-12)
    assert pick.design_mass_kg == pytest.approx(design, rel=1e-12)
    assert pick.static_hook_load_kg == pytest.approx(static, rel=1e-12)
    assert pick.hook_load_kg == pytest.approx(static * 1.10, rel=1e-12)
    assert pick.hook_load_kN == pytest.approx(static * 1.10 * 9.80665 / 1000, rel=1e-12)
    assert math.fsum(line.kg for line in pick.build_up) == pytest.approx(pick.hook_load_kg, rel=1e-12)
    assert pick.not_counted == ("welds", "bolts", "finish", "contents", "temporary steel")
    assert pick.verdict == "unknown"


def test_what_is_not_set_is_named(write_list: WriteList) -> None:
    """Rigging, block and rope that nobody gave are not in the hook load, and the pick says so."""
    [pick] = pipeline.schedule([write_list([["A1", "F1", 2, "UB 203x133x25", "S355", 6000]])]).picks
    assert {"rigging", "hook block", "hoist rope", "temporary steel"} <= set(pick.not_counted)
    [pick] = pipeline.schedule([write_list([["A1", "F1", 2, "UB 203x133x25", "S355", 6000]])], job_from({"lift": {"other_kg": 0.0}})).picks
    assert "temporary steel" not in pick.not_counted


def test_an_assumed_or_stated_member_raises_the_contingency(write_list: WriteList) -> None:
    """1.10 where any member of the pick is assumed or rests on a stated mass."""
    headings = ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)", "Unit mass (kg)"]
    rows = [
        ["A1", "F1", 1, "UB 203x133x25", "S355", 6000, None], ["A2", "F2", 1, "UB 203x133x25", None, 6000, None],
        ["A3", "F3", 1, "Winch", None, None, 250],
    ]
    picks = pipeline.schedule([write_list(rows, headings=headings)]).picks
    assert [p.contingency.value for p in picks] == [1.05, 1.10, 1.10]
    assert picks[2].mass_kg.light == pytest.approx(250 * 0.95)
    assert picks[2].mass_kg.heavy == pytest.approx(250 * 1.10)


def test_a_pick_column_goes_before_assemblies(write_list: WriteList) -> None:
    """Picks are what the list calls picks; assemblies only where it names none."""
    headings = ["Mark", "Assembly", "Pick", "Quantity", "Section", "Material", "Length (mm)"]
    rows = [["A1", "F1", "P1", 1, "UB 203x133x25", "S355", 6000], ["A2", "F2", "P1", 1, "UB 203x133x25", "S355", 6000]]
    picks = pipeline.schedule([write_list(rows, headings=headings)]).picks
    assert [(p.name, p.pieces) for p in picks] == [("P1", 2)]


def test_weighed_without_a_weighing_falls_back(write_list: WriteList) -> None:
    """'weighed' takes effect only where there is a weighing: else calculated, with a finding."""
    path = write_list([["A1", "F1", 2, "UB 203x133x25", "S355", 6000]])
    [pick] = pipeline.schedule([path], job_from({"lift": {"weight_known_by": "weighed"}})).picks
    assert pick.contingency.value == 1.05
    assert [f.kind for f in pick.findings] == ["weighed-fell-back"]


def test_lift_prints_and_exits(run: Run, write_list: WriteList) -> None:
    """The command gives the sheet with its cautions; a row not weighed makes status 3 and is said of its pick."""
    rows = [["A1", "F1", 2, "UB 203x133x25", "S355", 6000], ["A2", "F2", 2, "UB 203x133x26", "S355", 6000]]
    path = write_list(rows)
    done = run("lift", path, "--pick", "F1")
    assert done.returncode == 0, done.stderr
    assert "0027/ND" in done.stdout
    assert "not a lift plan" in done.stdout
    done = run("lift", path, "--json")
    assert done.returncode == 3
    record = json.loads(done.stdout)
    assert set(record) == {"picks", "cautions"}
    assert [p["verdict"] for p in record["picks"]] == ["unknown", "unknown"]
    assert [p["not_weighed"] for p in record["picks"]] == [0, 1]
    assert record["picks"][1]["findings"][0]["kind"] == "pick-incomplete"
    assert sum(line["kg"] for line in record["picks"][0]["build_up"]) == pytest.approx(record["picks"][0]["hook_load_kg"])
    assert run("lift", path, "--pick", "nobody").returncode == 2
    assert run("lift", path, "--strict").returncode == 3
