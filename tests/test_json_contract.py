"""The machine-readable output keeps its names: other programs call them."""

from __future__ import annotations

import json
from collections.abc import Callable
from subprocess import CompletedProcess
from typing import Any

import pytest
from conftest import SAMPLES, WriteList

Run = Callable[..., "CompletedProcess[str]"]

BOUNDS = {"light", "nominal", "heavy"}
SOURCE = {"title", "clause", "evidence"}
FINDING = {"level", "kind", "message", "file", "sheet", "cell", "read", "right", "count", "cells"}


def words(text: str) -> set[str]:
    return set(text.split())


def output(run: Run, *arguments: str) -> Any:
    done = run(*arguments, "--json")
    assert done.returncode in (0, 1, 3), done.stderr
    return json.loads(done.stdout)


def test_material(run: Run) -> None:
    """A list, one object a query; what was not found is null."""
    found = output(run, "material", "1.4301", "oak", "C35", "nonsense word", "--at", "60")
    assert [f["match"] for f in found] == ["exact", "alias", "ambiguous", "none"]
    for one in found:
        assert words("query match score candidates material") <= set(one)
        for candidate in one["candidates"]:
            assert {"key", "name", "score"} <= set(candidate)
    steel = found[0]["material"]
    assert words(
        "key name family designations density_kg_m3 density_condition density_source alpha_per_K alpha_interval_C "
        "alpha_direction alpha_source law at "
    ) <= set(steel)
    assert set(steel["density_kg_m3"]) == {"low", "nominal", "high"}
    assert set(steel["density_source"]) >= SOURCE
    assert set(steel["alpha_source"]) >= SOURCE
    assert words("name pieces") <= set(steel["law"])
    assert all(words("from_C to_C source") <= set(piece) for piece in steel["law"]["pieces"])
    assert words("temperature_C elongation elongation_by_direction density_kg_m3 within_validity") <= set(steel["at"][0])
    assert found[3]["material"] is None


def test_section(run: Run) -> None:
    """A list, one object a query."""
    found = output(run, "section", "UB 457x191x67", "SHS 100x100x5", "Block 600x300x200", "IPE 305")
    for one in found:
        assert words(
            "query match designation family standard shape dimensions_mm area_mm2 inner_area_mm2 surface_m2_per_m centroid_mm "
            "kg_per_m kg_per_m2 "
            "kg_each volume_m3 published_kg_per_m material source candidates "
        ) <= set(one)
    assert set(found[0]["kg_per_m"]) == BOUNDS
    assert len(found[0]["centroid_mm"]) == 2
    assert set(found[0]["source"]) >= SOURCE
    assert found[0]["inner_area_mm2"] is None
    assert found[1]["inner_area_mm2"] > 0
    assert found[3]["designation"] is None


def test_weigh(run: Run) -> None:
    """One object."""
    found = output(run, "weigh", "UB 457x191x67", "7200", "--quantity", "3")
    assert words(
        "section material quantity length_mm volume_m3 surface_m2 bare_each_kg mass_each_kg mass_total_kg findings cautions "
    ) <= set(found)
    assert set(found["mass_total_kg"]) == BOUNDS
    assert found["mass_total_kg"]["nominal"] == pytest.approx(3 * 7.2 * 67.1)


def test_movement_and_fit(run: Run) -> None:
    """One object each."""
    found = output(
        run,
        "movement",
        "S355",
        "60 m",
        "--from",
        "-20",
        "--to",
        "45",
        "--set-at",
        "10",
        "--gap-min",
        "5",
        "--gap-max",
        "60",
        "--against",
        "C30/37",
    )
    assert words(
        "material length_mm from_C to_C movement_mm movement_low_mm movement_high_mm mean_alpha_per_K lengths set_at_C "
        "closing_mm opening_mm table law "
        "against findings cautions "
    ) <= set(found)
    assert words("temperature_C length_mm tape_reading_mm") <= set(found["lengths"][0])
    assert words("temperature_C gap_mm") <= set(found["table"][0])
    assert words("material movement_mm difference_mm") <= set(found["against"])
    # 60 m x 12e-6 per K x 65 K (EN 1993-1-1 cl. 3.2.6: 12e-6).
    assert found["movement_mm"] == pytest.approx(60_000 * 12e-6 * 65, rel=2e-3)
    found = output(run, "fit", "S355", "100 mm", "bronze", "99.9 mm", "--bore-at", "20", "--pin-at", "-50")
    assert words("bore_mm pin_mm clearance_mm temperatures_C temperature_for_clearance_C findings cautions") <= set(found)


def test_check(run: Run, write_list: WriteList) -> None:
    """How a list is read."""
    path = write_list([["A", "F", 1, "UB 203x133x25", "S355", 6000], ["B", "F", 1, "UB 203x133x26", "S355", 6000]])
    found = output(run, "check", str(path))
    assert words("inputs tables sections materials findings job_lines") <= set(found)
    assert words("file sheet range heading_rows columns account") <= set(found["tables"][0])
    assert words("letter heading field why unit unit_from") <= set(found["tables"][0]["columns"][0])
    assert words("text designation match rows") <= set(found["sections"][0])
    assert words("text key match rows") <= set(found["materials"][0])
    assert all(set(f) == FINDING for f in found["findings"])


def test_schedule(run: Run, write_list: WriteList) -> None:
    """The whole record."""
    path = write_list([["A", "F", 2, "UB 203x133x25", "S355", 6000], ["B", "F", 1, "UB 203x133x26", "S355", 6000]])
    found = json.loads(run("schedule", path, "--json", "-").stdout)
    assert words(
        "tool job inputs account complete members totals picks vehicles not_loaded vehicle_count_bound proven movements findings cautions "
    ) <= set(found)
    assert words("name version") <= set(found["tool"])
    assert words("file sha256 sheets job_file") <= set(found["inputs"][0])
    assert words("rows weighed assumed not_weighed heading total blank other") == set(found["account"])
    member = found["members"][0]
    assert words(
        "file sheet row mark assembly pick phase run bundle quantity section material length_mm width_mm thickness_mm finish "
        "contents volume_m3 "
        "surface_m2 bare_each_kg additions mass_each_kg mass_total_kg basis status lengths_mm tape_readings_mm sizes_mm "
        "position_mm findings "
    ) <= set(member)
    assert words("text designation match") <= set(member["section"])
    assert words("text key match") <= set(member["material"])
    assert words("rule title clause evidence") <= set(member["basis"])
    assert words(
        "quantity mass_kg likely_kg volume_m3 surface_m2 not_weighed not_counted by_material by_section by_assembly by_phase by_finish "
    ) <= set(found["totals"])
    assert words("name quantity mass_kg not_weighed") <= set(found["totals"]["by_material"][0])
    assert set(found["totals"]["likely_kg"]) == {"low", "high"}
    assert found["members"][1]["status"] == "not weighed"
    assert all(set(f) == FINDING for m in found["members"] for f in m["findings"])


def test_lift(run: Run) -> None:
    """Picks and cautions; every figure of a full pick."""
    folder = SAMPLES / "weir_footbridge"
    found = output(run, "lift", str(folder / "span_lift.csv"), "--job", str(folder / "span_lift.toml"))
    assert set(found) == {"picks", "cautions"}
    pick = found["picks"][0]
    assert words(
        "name members mass_kg centre_of_gravity_mm centre_of_gravity_box_mm size_mm design_mass_kg build_up "
        "static_hook_load_kg hook_load_kg hook_load_kN "
        "points tilt_deg crane cranes upend own_weight verdict not_counted findings "
    ) <= set(pick)
    assert words(
        "name position_mm share_kN share_heavy_kN case sling_length_mm angle_from_vertical_deg tension_kN required_wll_t chosen "
    ) <= set(pick["points"][0])
    assert words("tackle size wll_t method") <= set(pick["points"][0]["chosen"][0])
    assert words("name configuration radius_m rating_kg capacity_kg utilisation_static utilisation limit verdict") <= set(pick["crane"])
    assert sum(line["kg"] for line in pick["build_up"]) == pytest.approx(pick["hook_load_kg"], rel=1e-12)
