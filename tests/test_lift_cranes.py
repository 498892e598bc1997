"""Charts, verdicts, several cranes, upending, bending and bundles, through the main path; what is not fully known is never within."""

from __future__ import annotations

import itertools
import json
import math
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import openpyxl
import pytest
from conftest import WriteList

from takeoff import bundles, pipeline
from takeoff.errors import InputError, JobError
from takeoff.job import Job, job_from
from takeoff.lifting import own_weight
from takeoff.lifting.pick import Pick

Run = Callable[..., "CompletedProcess[str]"]
HEADINGS = ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)", *(f"{n}{k} (mm)" for k in "12" for n in "XYZ")]
BEAM = ["B1", "A", 1, "UB 305x165x40", "S275", 6000, 0, 0, 0, 6000, 0, 0]
CHART = "radius_m,12,18\n3,20000,\n4,15000,12000\n6,900,850\n8,600,580\n10,420,410\n"
POINTS = [{"name": "A", "position": [1000, 0, 200]}, {"name": "B", "position": [5000, 0, 200]}]


@pytest.fixture
def lifted(write_list: WriteList, tmp_path: Path) -> Callable[..., list[Pick]]:
    """The picks of a list and a job: `lifted(rows, pick={...}, crane={...}, chart=text)`."""

    def lift(
        rows: list[list[Any]] | None = None,
        *,
        pick: dict[str, Any] | None = None,
        crane: Any = None,
        chart: str | None = CHART,
        lift: dict[str, Any] | None = None,
        **more: Any,
    ) -> list[Pick]:
        path = write_list([BEAM] if rows is None else rows, headings=HEADINGS)
        if chart is not None:
            (tmp_path / "chart.csv").write_text(chart, encoding="utf-8")
        raw: dict[str, Any] = {"lift": {**(lift or {}), **({"picks": [{"name": "A", **pick}]} if pick is not None else {})}, **more}
        if crane is not None:
            raw["crane"] = crane if isinstance(crane, list) else {"chart": "chart.csv", "configuration": "as hired", **crane}
        return pipeline.schedule([path], job_from(raw, tmp_path / "job.toml")).picks

    return lift


# The beam: 40.3 kg/m x 6 m = 241.8 kg, heavy x 1.04 = 251.472 kg, design x 1.05 = 264.0456 kg, hook load x 1.10 = 290.45 kg.
DESIGN = 40.3 * 6 * 1.04 * 1.05


def kinds(pick: Pick) -> set[str]:
    return {f.kind for f in pick.findings}


@pytest.mark.parametrize(
    ("radius", "set_down", "boom", "rating"),
    [
        (5.0, None, 12.0, 900),
        (6.0, None, 12.0, 900),
        (6.01, None, 12.0, 600),
        (2.0, None, 12.0, 20000),
        (6.0, 7.5, 12.0, 600),
        (8.0, 4.0, 15.0, 580),
        (3.0, None, 18.0, None),
        (10.1, None, 12.0, None),
        (6.0, None, 20.0, None),
        (6.0, None, 11.0, None),
        (6.0, None, None, None),
        (2.5, None, 15.0, None),
    ],
)
def test_the_chart_is_read_at_the_next_longer_radius_and_the_lesser_boom(
    radius: float, set_down: float | None, boom: float | None, rating: float | None, lifted: Callable[..., list[Pick]]
) -> None:
    """Never between rows; between booms the smaller; under the first row the first; a hole or beyond the end is no rating."""
    asked = {k: v for k, v in (("radius_m", radius), ("radius_set_down_m", set_down), ("boom_m", boom)) if v is not None}
    [pick] = lifted(pick=asked, crane={})
    assert pick.crane is not None
    assert pick.crane.rating_kg == rating
    if rating is None:
        assert (pick.crane.verdict, pick.verdict) == ("unknown", "unknown")
        assert "crane-rating-unknown" in kinds(pick)


@pytest.mark.parametrize(
    ("radius", "deductions", "verdict", "whole"),
    [
        (6, 0, "within", "within"),
        (10, 50, "within", "within"),
        (10, 60, "over planning limit", "over"),
        (10, 140, "over rating", "over"),
        (10, 420, "over rating", "over"),
    ],
)
def test_verdicts_of_the_crane(radius: float, deductions: float, verdict: str, whole: str, lifted: Callable[..., list[Pick]]) -> None:
    """264.05 kg at rest and 290.45 moving, against 900 or 420 kg less deductions: 75 % of 370 is 277.5, 73 % of 360 is 262.8."""
    limit = 0.75 if deductions != 60 else 0.73
    [pick] = lifted(pick={"radius_m": radius, "boom_m": 12}, crane={"deductions_kg": deductions}, lift={"planning_limit": limit})
    assert pick.crane is not None
    assert (pick.crane.verdict, pick.verdict) == (verdict, whole)
    capacity = {6: 900, 10: 420}[radius] - deductions
    assert pick.crane.capacity_kg == capacity
    if capacity > 0:
        assert pick.crane.utilisation_static == pytest.approx(DESIGN / capacity)
        assert pick.crane.utilisation == pytest.approx(DESIGN * 1.1 / capacity)
    record = pick.as_record()["crane"]
    assert record["verdict"] == verdict
    assert json.dumps(record)


def test_a_hook_rating_below_the_chart_counts(lifted: Callable[..., list[Pick]]) -> None:
    """The smaller of chart and hook."""
    [pick] = lifted(pick={"radius_m": 4, "boom_m": 12}, crane={"hook_rating_kg": 300})
    assert pick.crane is not None
    assert (pick.crane.rating_kg, pick.crane.verdict) == (300, "over planning limit")


@pytest.mark.parametrize(
    ("chart", "kind"),
    [
        ("radius_m,12\n6,9000\n4,15000\n8,6000\n", "chart-unsorted"),
        ("radius_m,12\n4,15000\n4,9000\n", "chart-unsorted"),
        ("radius_m,18,12\n4,12000,15000\n6,9000,8000\n", "chart-unsorted"),
        ("radius_m,12\n4,9000\n6,15000\n", "chart-unsorted"),
        ("radius_m,12\n4,15000\n6,see note\n8,6000\n", "chart-text"),
        ("radius_m,12,note\n4,15000,\n8,6000,\n", "chart-text"),
        ("radius_m,12\n4,15000*\n8,6000\n", "chart-text"),
        ('radius_m,12\n4,"15,000"\n8,6000\n', "chart-text"),
        ("radius_m,12,18\n4,15000,14000\n6,,8500\n8,6000,5800\n", "chart-gap"),
        ("radius_m,12\n4,15\n8,6\n", "chart-unit-unknown"),
        ("radius_ft,12\n4,15000\n8,6000\n", "chart-unit-unknown"),
        ("radius_m,12\n4,15000\nx,9000\n8,6000\n", "chart-text"),
        ("radius_m,12\n4,-15000\n8,6000\n", "chart-text"),
    ],
)
def test_no_lift_is_within_a_chart_that_is_not_sound(chart: str, kind: str, lifted: Callable[..., list[Pick]]) -> None:
    """Out of order, text, holes, units unknown: the verdict stays unknown, and the finding says why."""
    [pick] = lifted(pick={"radius_m": 4, "boom_m": 12}, crane={}, chart=chart)
    assert pick.crane is not None
    assert (pick.crane.verdict, pick.verdict) == ("unknown", "unknown")
    assert kind in kinds(pick)


def test_units_of_the_chart(lifted: Callable[..., list[Pick]]) -> None:
    """Tonnes and feet where the job says so; booms by their own unit."""
    [pick] = lifted(
        pick={"radius_m": 3.1, "boom_m": 12}, crane={"rating_unit": "t", "radius_unit": "ft"}, chart="radius ft,12 m\n10,15\n20,6\n"
    )
    assert pick.crane is not None
    assert pick.crane.rating_kg == 6000
    assert pick.crane.chart_radius_m == pytest.approx(20 * 0.3048)
    [pick] = lifted(pick={"radius_m": 3}, crane={"rating_unit": "lb"}, chart="radius_m,12\n4,22046.226218\n")
    assert pick.crane is not None
    assert pick.crane.rating_kg == pytest.approx(10000)


def test_a_chart_workbook_reads_like_the_text(lifted: Callable[..., list[Pick]], tmp_path: Path) -> None:
    """The same figures from a workbook."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    for row in (["Radius (m)", 12, 18], [4, 15000, 12000], [6, 900, 850]):
        sheet.append(row)
    book.save(tmp_path / "chart.xlsx")
    [pick] = lifted(pick={"radius_m": 5, "boom_m": 15}, crane={"chart": "chart.xlsx"})
    assert pick.crane is not None
    assert (pick.crane.rating_kg, pick.crane.verdict) == (850, "within")


def test_a_chart_that_is_missing_or_none_stops_the_run(lifted: Callable[..., list[Pick]]) -> None:
    """One clear message, as for any input."""
    with pytest.raises(InputError, match="no such file"):
        lifted(pick={"radius_m": 5}, crane={"chart": "nowhere.csv"})
    with pytest.raises(InputError, match="no crane chart"):
        lifted(pick={"radius_m": 5}, crane={}, chart="radius_m\n4\n")


@pytest.mark.parametrize("change", ["row", "estimated", "no radius", "no points hold", "no position"])
def test_nothing_that_is_not_known_is_within(change: str, lifted: Callable[..., list[Pick]]) -> None:
    """A row not weighed, an estimate, no radius, points without a hook height or positions: never within."""
    rows, pick = [list(BEAM)], {"radius_m": 4, "boom_m": 12, "points": POINTS, "hook_height_mm": 4000}
    [good] = lifted(rows, pick=pick, crane={})
    assert good.verdict == "within"
    more: dict[str, Any] = {}
    if change == "row":
        rows.append(["B2", "A", 1, "UB 305x165x41", "S275", 6000, 0, 0, 0, 6000, 0, 0])
    elif change == "estimated":
        more["lift"] = {"weight_known_by": "estimated"}
    elif change == "no radius":
        del pick["radius_m"]
    elif change == "no points hold":
        del pick["hook_height_mm"]
    else:
        rows[0][6] = None
    [found] = lifted(rows, pick=pick, crane={}, **more)
    assert found.verdict == "unknown"
    if change == "row":
        assert found.crane is not None
        assert found.crane.verdict == "unknown"
        assert found.centre is None


def test_an_incomplete_pick_that_already_exceeds_the_crane_is_unknown_and_says_so(lifted: Callable[..., list[Pick]]) -> None:
    """The rest would only add to it."""
    rows = [list(BEAM), ["B2", "A", 1, "UB 305x165x41", "S275", 6000, *[None] * 6]]
    [pick] = lifted(rows, pick={"radius_m": 10, "boom_m": 12}, crane={"deductions_kg": 300})
    assert pick.verdict == "unknown"
    assert "crane-exceeded" in kinds(pick)


def test_head_room_largest_radius_and_outriggers(lifted: Callable[..., list[Pick]]) -> None:
    """Tip = 2 + √(12² − 6²); less block 1.5, hook 4 m above points 0.2 above the axis 0.152 above the bottom, set down on 1.2 m."""
    pick = {"radius_m": 6, "boom_m": 12, "points": POINTS, "hook_height_mm": 4000, "set_down_mm": 1200}
    stand = {"spread_x_mm": 5000, "spread_y_mm": 4000, "crane_kg": 20000, "allowable_kpa": 100}
    [found] = lifted(pick=pick, crane={"boom_foot_m": 2, "block_m": 1.5, "outriggers": stand})
    check = found.crane
    assert check is not None
    tip = 2 + math.sqrt(144 - 36)
    assert check.head_room_m == pytest.approx(tip - 1.5 - (4000 + 200 + 303.4 / 2 + 1200) / 1000, abs=1e-6)
    assert check.largest_radius_m == 10
    assert check.stands[0].load_kg == pytest.approx(0.65 * (20000 + DESIGN * 1.1))
    assert check.stands[0].area_m2 == pytest.approx(0.65 * (20000 + DESIGN * 1.1) * 9.80665 / 1000 / 100)
    assert [s.factor is None for s in check.stands] == [False, False, True]
    [short] = lifted(pick={**pick, "set_down_mm": 6000}, crane={"boom_foot_m": 2})
    assert "no-head-room" in kinds(short)


def test_a_missing_configuration_is_said(lifted: Callable[..., list[Pick]]) -> None:
    """So is a block that nobody counted."""
    [pick] = lifted(pick={"radius_m": 4, "boom_m": 12}, crane=[{"name": "C", "chart": "chart.csv"}])
    assert {"chart-configuration-missing", "block-not-counted"} <= kinds(pick)


# --- several cranes --------------------------------------------------------------------------------------------------


def test_two_cranes_share_by_the_centre_tilt_included(lifted: Callable[..., list[Pick]]) -> None:
    """Points 1 and 5 m along, centre at 3 m and 200 mm below: at 3° each hook (200 sin 3° + 2000 cos 3°) / (4000 cos 3°) of it, × 1.20."""
    names = [{"name": n, "chart": "chart.csv", "configuration": "x"} for n in ("one", "two")]
    pick = {
        "points": POINTS,
        "hook_height_mm": 2000,
        "boom_m": 12,
        "radius_m": 6,
        "cranes": [{"crane": "one", "points": ["A"]}, {"crane": "two", "points": ["B"]}],
    }
    [found] = lifted(pick=pick, crane=names, lift={"hook_block_kg": 20, "rigging_kg": 10})
    t = math.radians(3)
    share = (200 * math.sin(t) + 2000 * math.cos(t)) / (4000 * math.cos(t))
    assert [c.share for c in found.cranes] == pytest.approx([share, share])
    assert found.cranes[0].static_kg == pytest.approx(((DESIGN + 10) * share + 20) * 1.2)
    assert found.cranes[0].utilisation_static == pytest.approx(((DESIGN + 10) * share + 20) * 1.2 / 900)
    assert found.static_hook_load_kg == pytest.approx(DESIGN + 10 + 40)
    assert "more-than-one-crane" in kinds(found)
    assert found.points[0].share_heavy_kN == pytest.approx(DESIGN * 1.1 * share * 9.80665 / 1000)
    assert len(found.as_record()["cranes"]) == 2
    outside = [{"name": "A", "position": [1000, 0, 200]}, {"name": "B", "position": [2000, 0, 200]}]
    [found] = lifted(pick={**pick, "points": outside}, crane=names)
    assert found.verdict == "over"
    assert "centre-outside-points" in kinds(found)


def test_upending_goes_from_level_to_upright(lifted: Callable[..., list[Pick]]) -> None:
    """Both lugs on the centre's axis: the share stays until the piece is upright, then the head takes all. Heads and tails add up."""
    points = [{"name": "H", "position": [500, 0, 0]}, {"name": "T", "position": [5000, 0, 0]}]
    [pick] = lifted(pick={"points": points, "hook_height_mm": 5000, "upend": {"head": "H", "tail": "T", "step_deg": 10}})
    weight = DESIGN * 1.1 * 9.80665 / 1000
    assert [s.angle_deg for s in pick.upend] == [0, 10, 20, 30, 40, 50, 60, 70, 80, 90]
    assert [s.tail_kN for s in pick.upend[:-1]] == pytest.approx([weight * 2500 / 4500] * 9)
    assert (pick.upend[-1].head_kN, pick.upend[-1].tail_kN) == pytest.approx((weight, 0.0))
    assert all(s.head_kN + s.tail_kN == pytest.approx(weight) for s in pick.upend)


def test_a_spreader_counts_its_own_mass(lifted: Callable[..., list[Pick]]) -> None:
    """4 m spreader over the points, hook 2 m above: 45° legs; compression half the weight of piece and bar. A beam is bent instead."""
    pick = {"points": POINTS, "hook_height_mm": 2000, "spreader": {"kind": "spreader", "length_mm": 4000, "mass_kg": 60}}
    [found] = lifted(pick=pick)
    k = 1.1 * 9.80665 / 1000
    whole = (DESIGN + 60) * k
    assert found.spreader is not None
    assert found.spreader.compression_kN == pytest.approx(whole / 2)
    assert found.spreader.top_tensions_kN == pytest.approx([whole / 2 * math.sqrt(2)] * 2)
    assert found.static_hook_load_kg == pytest.approx(DESIGN + 60)
    assert found.points[0].tension_kN == pytest.approx(DESIGN * k / 2)
    assert found.verdict == "within"
    [found] = lifted(pick={**pick, "spreader": {"kind": "beam", "length_mm": 4000, "mass_kg": 60}})
    assert found.spreader is not None
    assert found.spreader.moment_kNm == pytest.approx(DESIGN * k * 4 / 4)
    assert found.spreader.self_moment_kNm == pytest.approx(60 * k * 4 / 8)


# --- bending ---------------------------------------------------------------------------------------------------------


def test_best_points_and_moment_under_its_own_weight(lifted: Callable[..., list[Pick]]) -> None:
    """At 0.2071 L hogging and sagging are one, w L² × 0.0214; nowhere else is the greatest moment smaller."""
    length, weight = 10_000.0, 100.0
    at = own_weight.BEST * length
    hog, sag = own_weight.moments(length, weight, (at, length - at))
    assert hog == pytest.approx(sag)
    assert hog == pytest.approx(weight * 10 * own_weight.BEST**2 / 2)
    for other in (0.15, 0.19, 0.2, 0.215, 0.25):
        assert max(own_weight.moments(length, weight, (other * length, (1 - other) * length))) > hog
    [pick] = lifted(pick={"own_weight": {"axis": "strong"}})
    assert pick.own_weight is not None
    assert pick.own_weight.best_points_mm == pytest.approx((6000 * 0.2071068, 6000 * 0.7928932))
    # UB 305x165x40: published elastic modulus about the strong axis 560 cm³, about the weak axis 92.6 cm³.
    assert pick.own_weight.modulus_mm3 == pytest.approx(560e3, rel=0.003)


def test_the_strength_check_is_only_against_what_the_user_gives(lifted: Callable[..., list[Pick]]) -> None:
    """A granite lintel: little tension is said; over a given strength the pick is over, under it not."""
    rows = [["K1", "A", 1, "Block 3000x400x200", "Granite", None, 0, 0, 0, 3000, 0, 0]]
    points = [{"name": "A", "position": [600, 0, 100]}, {"name": "B", "position": [2400, 0, 100]}]
    pick: dict[str, Any] = {"points": points, "hook_height_mm": 3000}
    [found] = lifted(rows, pick=pick)
    assert "little-tension" in kinds(found)
    assert found.own_weight is not None
    assert found.own_weight.stress_mpa is not None
    weak = found.own_weight.stress_mpa
    [over] = lifted(rows, pick={**pick, "own_weight": {"strength_mpa": weak * 0.99}})
    assert (over.verdict, "own-weight-over" in kinds(over)) == ("over", True)
    [under] = lifted(rows, pick={**pick, "own_weight": {"strength_mpa": weak * 1.01}})
    assert under.verdict == "within"
    weight, w = found.design_mass_kg * 1.1 * 9.80665 / 1000, 3000
    press = weight / 2 * 900 / 3000
    hand = max(weight * 600**2 / w / 2, weight * (w / 8 - 600 / 2)) / 1000 + press * 100 / 1000
    assert found.own_weight.moment_kNm == pytest.approx(hand)
    assert weak == pytest.approx(hand * 1e6 / (400 * 200**2 / 6))


# --- which pieces ----------------------------------------------------------------------------------------------------


def test_picks_of_the_job_file_leave_no_piece_out(lifted: Callable[..., list[Pick]]) -> None:
    """A pick of marks takes its rows; the rest of their assembly is a pick of its own; unknown names stop the run."""
    rows = [[f"B{i}", "F1" if i < 4 else "F2", 1, "UB 305x165x40", "S275", 1000 * i, *[None] * 6] for i in range(1, 6)]
    picks = lifted(rows, lift={"picks": [{"name": "both", "marks": ["B1", "B2"]}, {"name": "F2", "rigging_kg": 5}]}, chart=None)
    assert [(p.name, p.pieces) for p in picks] == [("both", 2), ("F1 (rest)", 1), ("F2", 2)]
    assert [p.build_up[2].item for p in picks] == ["dynamic factor x 1.1", "dynamic factor x 1.1", "rigging"]
    assert math.fsum(p.mass_kg.nominal for p in picks) == pytest.approx(40.3 * 15)
    for bad in ({"name": "p", "marks": ["B9"]}, {"name": "nobody"}, {"name": "p", "assemblies": ["F9"]}):
        with pytest.raises(JobError, match=r"lift\.picks"):
            lifted(rows, lift={"picks": [bad]}, chart=None)


@pytest.mark.parametrize(
    "bad",
    [
        {"points": [*POINTS, POINTS[0]]},
        {"points": POINTS, "slings_mm": [1000, 1000, 1000]},
        {"points": POINTS, "upend": {"head": "A", "tail": "C"}},
        {"points": POINTS, "cranes": [{"crane": "nobody", "points": ["A"]}]},
    ],
)
def test_names_that_do_not_fit_stop_the_run(bad: dict[str, Any], lifted: Callable[..., list[Pick]]) -> None:
    """A point twice, too many slings, a point or crane that is not there."""
    with pytest.raises(JobError, match=r"lift\.picks"):
        lifted(pick=bad)


def test_the_picks_own_weighing_goes_first(lifted: Callable[..., list[Pick]]) -> None:
    """Weighed at 250 kg: × 1.03; outside the members' bounds it is said; the members' own bounds stay."""
    [pick] = lifted(pick={"weighed_kg": 250.0})
    assert pick.design_mass_kg == pytest.approx(257.5)
    assert pick.mass_kg.heavy == pytest.approx(40.3 * 6 * 1.04)
    assert not pick.findings
    [pick] = lifted(pick={"weighed_kg": 200.0})
    assert kinds(pick) == {"weighed-outside-bounds"}


def test_bundles_hold_no_more_than_their_limit_and_every_piece_once() -> None:
    """Same section and length together, whole pieces, as even as they go; an overweight piece stands alone."""
    rows = [bundles.Loose(0, "IPE 200", 6000, 23, 140.0), bundles.Loose(1, "IPE 200", 6000, 4, 140.0),
            bundles.Loose(2, "IPE 200", 5000, 1, 117.0),
            bundles.Loose(3, "Slab", math.nan, 2, 1500.0)]  # fmt: skip
    made = bundles.bundle_up(rows, 1000.0)
    counts = {i: sum(n for b in made for m, n in b.pieces if m == i) for i in range(4)}
    assert counts == {0: 23, 1: 4, 2: 1, 3: 2}
    assert [sum(n for _, n in b.pieces) for b in made] == [7, 7, 7, 6, 1, 1, 1]
    assert [b.over_limit for b in made] == [False] * 5 + [True] * 2
    assert all(b.heavy_kg <= 1000 or b.over_limit for b in made)
    assert len({b.name for b in made}) == len(made)
    for limit, pieces in itertools.product((150.0, 500.0, 4000.0), (1, 9, 40)):
        found = bundles.bundle_up([bundles.Loose(0, "x", 1.0, pieces, 137.0)], limit)
        assert len(found) == math.ceil(pieces / (limit // 137.0))
    with pytest.raises(ValueError, match="above 0"):
        bundles.bundle_up(rows, 0.0)


def test_loose_pieces_are_bundled_into_picks(write_list: WriteList) -> None:
    """With a limit in the job file, rows of no assembly become bundles, each a pick."""
    rows = [["B1", None, 10, "UB 203x133x25", "S355", 6000], ["B2", "F1", 1, "UB 203x133x25", "S355", 6000]]
    job: Job = job_from({"transport": {"max_bundle_kg": 800.0}})
    picks = pipeline.schedule([write_list(rows)], job).picks
    assert [(p.name, p.pieces) for p in picks] == [
        ("F1", 1),
        ("Bundle UB 203x133x25, 6000 mm, 1 of 2", 5),
        ("Bundle UB 203x133x25, 6000 mm, 2 of 2", 5),
    ]
    assert picks[1].mass_kg.heavy == pytest.approx(5 * 6 * 25.1 * 1.04)


def test_the_command_prints_the_whole_sheet(run: Run, write_list: WriteList, tmp_path: Path) -> None:
    """Centre, points, tackle, crane and a sketch on the sheet; the schedule's workbook and JSON carry the same; 40 columns hold."""
    write_list([BEAM], headings=HEADINGS)
    (tmp_path / "chart.csv").write_text(CHART, encoding="utf-8")
    (tmp_path / "job.toml").write_text(
        '[lift]\nrigging_kg = 20\n[[lift.picks]]\nname = "A"\nradius_m = 5\nboom_m = 12\nhook_height_mm = 3000\n'
        'points = [{name = "A", position = [1000, 0, 200]}, {name = "B", position = [5000, 0, 200]}]\n'
        '[crane]\nchart = "chart.csv"\nconfiguration = "full outriggers"\n',
        encoding="utf-8",
    )
    done = run("lift", "list.xlsx", cwd=tmp_path, env={"COLUMNS": "100"})
    assert done.returncode == 0, done.stderr
    for text in (
        "centre of gravity",
        "Governing at",
        "The tag on the gear decides",
        "full outriggers",
        "29 CFR 1926.751",
        "not a lift plan",
        "A.",
    ):
        assert text in " ".join(done.stdout.split()), text
    assert run("lift", "list.xlsx", "--strict", cwd=tmp_path).returncode == 0
    assert run("lift", "list.xlsx", "--units", "us", cwd=tmp_path).returncode == 0
    narrow = run("lift", "list.xlsx", cwd=tmp_path, env={"COLUMNS": "40"})
    assert max(map(len, narrow.stdout.splitlines())) <= 40 + 6
    record = json.loads(run("lift", "list.xlsx", "--json", cwd=tmp_path).stdout)["picks"][0]
    assert record["verdict"] == "within"
    assert {
        "centre_of_gravity_mm",
        "centre_of_gravity_box_mm",
        "size_mm",
        "points",
        "tilt_deg",
        "crane",
        "cranes",
        "upend",
        "own_weight",
    } <= set(record)
    done = run("schedule", "list.xlsx", "--json", "o.json", cwd=tmp_path)
    assert done.returncode == 0, done.stderr
    assert json.loads((tmp_path / "o.json").read_text())["picks"][0] == record
    sheet = openpyxl.load_workbook(tmp_path / "list.schedule.xlsx")["Picks"]
    shown = {str(row[0].value): str(row[1].value) for row in sheet.iter_rows() if row[0].value}
    assert shown["Verdict"].startswith("within")
    assert "Point A" in shown
    assert "Crane crane" in shown
    # A chart is an input: no output takes its place.
    assert run("schedule", "list.xlsx", "--csv", "chart.csv", "--replace", cwd=tmp_path).returncode == 2
