"""Lifts against answers worked out beside the program: force balance, every set of legs, free bodies of bar and piece."""

from __future__ import annotations

import csv
import itertools
import math
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import numpy as np
import openpyxl
import pytest
from conftest import WriteList

from takeoff import pipeline
from takeoff.job import job_from
from takeoff.lifting import own_weight, upend
from takeoff.lifting.figures import down_to, up_to
from takeoff.lifting.gravity import face_of
from takeoff.lifting.pick import Pick
from takeoff.pipeline import Result
from takeoff.reports import picksheet, rounding, terminal
from takeoff.reports.page import to_page
from takeoff.reports.workbook import write_workbook
from takeoff.sections import read

Lift = Callable[..., Pick]
HEADINGS = ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)", *(f"{n}{k} (mm)" for k in "12" for n in "XYZ")]
BEAM = ["B1", "A", 1, "UB 305x165x40", "S275", 6000, 0, 0, 0, 6000, 0, 0]
CENTRE = np.array([3000.0, 0.0, 0.0])
#: 40.3 kg/m x 6 m, heavy x 1.04, design x 1.05, dynamic x 1.10; kN
MASS = 40.3 * 6
DESIGN = MASS * 1.04 * 1.05
REST, HEAVY = MASS * 9.80665 / 1000, DESIGN * 1.1 * 9.80665 / 1000
CHART = "radius_m,12,18,24\n5,20000,15000,12000\n10,900,850,800\n15,,400,380\n"
CRANE = {"chart": "chart.csv", "configuration": "as hired"}


@pytest.fixture
def lifted(write_list: WriteList, tmp_path: Path) -> Lift:
    """The pick of a list and a job, through the main path."""

    def lift(rows: list[list[Any]] | None = None, **keys: Any) -> Pick:
        return result_of(write_list, tmp_path, rows, **keys).picks[0]

    return lift


def result_of(write_list: WriteList, folder: Path, rows: list[list[Any]] | None = None, **keys: Any) -> Result:
    path = write_list([BEAM] if rows is None else rows, headings=HEADINGS)
    (folder / "chart.csv").write_text(CHART, encoding="utf-8")
    pick = {"name": "A", **{k: v for k, v in keys.items() if k not in ("lift", "crane", "job")}}
    raw: dict[str, Any] = {"lift": {**keys.get("lift", {}), "picks": [pick]}, "job": keys.get("job", {})}
    if "crane" in keys:
        raw["crane"] = keys["crane"]
    return pipeline.schedule([path], job_from(raw, folder / "job.toml"))


def named(*points: tuple[float, float, float]) -> list[dict[str, Any]]:
    return [{"name": "ABCDEFGH"[i], "position": list(p)} for i, p in enumerate(points)]


def kinds(pick: Pick) -> set[str]:
    return {f.kind for f in pick.findings}


# --- the reference: one hook ------------------------------------------------------------------------------------------


def balances(points: Any, hook: Any, centre: Any) -> tuple[Any, Any, Any]:
    """All tensions (per unit of weight) with which some set of pulling legs holds the piece, the cosines, and how often: n x sets."""
    p, h, g = (np.array(v, dtype=float) for v in (points, hook, centre))
    up = (h - g) / np.linalg.norm(h - g)
    units = ((p - h) / np.linalg.norm(p - h, axis=1)[:, None]).T
    found = []
    for size in range(1, len(p) + 1):
        for legs in itertools.combinations(range(len(p)), size):
            part = units[:, legs]
            t = np.linalg.pinv(part, rcond=1e-9) @ -up
            if (t < -1e-9).any() or np.linalg.norm(part @ t + up) > 1e-7:
                continue
            whole = np.zeros(len(p))
            whole[list(legs)] = t
            found.append(whole)
    return np.array(found), -(up @ units), up


def expected(points: Any, height: float, skew: float) -> tuple[Any, Any, Any, Any]:
    """Shares at rest, governing shares and tensions (of the weight), angles: least squares, skew, and any legs slack."""
    hook = (CENTRE[0], CENTRE[1], max(p[2] for p in points) + height)
    sets, cosines, _ = balances(points, hook, CENTRE)
    even = min(sets, key=lambda t: t @ t)
    worst = np.maximum(even * skew, sets.max(axis=0) if len(points) > 3 else even)
    if len(points) == 4:  # not less than a share and the smaller of its neighbours'
        middle = np.mean(points, axis=0)
        order = sorted(range(4), key=lambda i: math.atan2(points[i][1] - middle[1], points[i][0] - middle[0]))
        share = even * cosines
        for at, i in enumerate(order):
            worst[i] = max(worst[i], (share[i] + min(share[order[at - 1]], share[order[(at + 1) % 4]])) / cosines[i])
    return even * cosines, worst * cosines, worst, np.degrees(np.arccos(cosines))


@pytest.mark.parametrize(
    ("points", "height"),
    [
        ([(1000, 0, 152), (5500, 0, 152)], 4000),
        ([(1000, 0, 900), (5500, 0, 152)], 4000),
        ([(3000, 0, 200)], 1000),
        ([(500, -400, 300), (5500, -400, 300), (2500, 600, 300)], 3500),
        ([(500, -400, 300), (5500, -400, 900), (2500, 600, 100)], 3500),
        ([(500, -3, 300), (5500, -3, 300), (2500, 4, 300)], 3500),
        ([(500, 0, 300), (5500, 0, 300), (2500, 0, 300)], 3500),
        ([(1000, -800, 300), (5200, -800, 300), (5200, 900, 300), (1000, 900, 300)], 4000),
        ([(1000, -800, 300), (5200, -600, 500), (4900, 900, 300), (1400, 700, 700)], 4000),
        ([(1000, -800, 300), (5200, -800, 300), (5200, 900, 300), (1000, 900, 300), (3000, -800, 300), (3000, 900, 300)], 4000),
    ],
    ids=["two", "two heights", "one", "three", "three heights", "nearly in line", "in line", "rectangle", "askew", "six"],
)
def test_one_hook_over_the_centre(points: list[Any], height: float, lifted: Lift) -> None:
    """Shares, the governing share, tension, angle and working load of every point equal the balance of forces."""
    pick = lifted(points=named(*points), hook_height_mm=height)
    rest, worst, tension, angle = expected(points, height, 1.25 if len(points) > 3 else 1.0)
    assert [p.share_kN for p in pick.points] == pytest.approx(rest * REST, rel=1e-6, abs=1e-9)
    assert [p.share_heavy_kN for p in pick.points] == pytest.approx(worst * HEAVY, rel=1e-6)
    assert [p.tension_kN for p in pick.points] == pytest.approx(tension * HEAVY, rel=1e-6)
    assert [p.required_wll_t for p in pick.points] == pytest.approx(tension * HEAVY / 9.80665, rel=1e-6)
    assert [p.angle_from_vertical_deg for p in pick.points] == pytest.approx(angle, abs=1e-4)


def test_a_hook_beside_the_centre_turns_the_piece(lifted: Lift) -> None:
    """Two points 4 m apart, hook 0.3 m aside and 4 m up: the piece turns until its centre is plumb under the hook."""
    pick = lifted(points=named((1000, 0, 300), (5000, 0, 300)), hook_height_mm=4000, hook=[3300, 0])
    turn = math.atan2(300, 4300)
    assert pick.tilt_deg == pytest.approx(math.degrees(turn))
    up = (math.sin(turn), math.cos(turn))
    legs = [((1000 - 3300), -4000), ((5000 - 3300), -4000)]
    units = np.array([[x / math.hypot(x, z), z / math.hypot(x, z)] for x, z in legs]).T
    tension = np.linalg.solve(units, -np.array(up))
    assert [p.tension_kN for p in pick.points] == pytest.approx(tension * HEAVY, rel=1e-6)
    assert [p.sling_length_mm for p in pick.points] == pytest.approx([math.hypot(2300, 4000), math.hypot(1700, 4000)])


def test_slings_go_before_a_hook_that_is_named_too(lifted: Lift) -> None:
    """Both given: the slings decide, and that is said."""
    points = named((1000, 0, 300), (5000, 0, 300))
    pick = lifted(points=points, hook_height_mm=4000, hook=[3300, 0], slings_mm=4000)
    assert pick.hook_mm == pytest.approx((3000, 0, 300 + math.sqrt(4000**2 - 2000**2)))
    assert "hook-not-used" in kinds(pick)


def test_the_centre_at_every_corner_of_its_box(lifted: Lift) -> None:
    """Three members whose masses move by themselves: the centre, its box and the governing shares, every corner tried."""
    rows = [BEAM, ["B2", "A", 1, "UB 203x133x25", "S275", 6000, 0, 2000, 0, 6000, 2000, 0],
            ["B3", "A", 1, "UPN 200", "S275", 2000, 500, 0, 160, 500, 2000, 160]]  # fmt: skip
    points = [(500, 0, 200), (5500, 0, 200), (5500, 2000, 200), (500, 2000, 200)]
    pick = lifted(rows, points=named(*points), hook_height_mm=4000)
    [a, b, c] = [lifted([r]).mass_kg for r in rows]
    at = np.array([(3000, 0, 0), (3000, 2000, 0), (500, 1000, 160)], dtype=float)
    nominal = np.array([m.nominal for m in (a, b, c)])
    centre = nominal @ at / nominal.sum()
    assert pick.centre is not None
    assert pick.centre.centre == pytest.approx(centre)
    every = [np.array(m) @ at / sum(m) for m in itertools.product(*((m.light, m.heavy) for m in (a, b, c)))]
    low, high = np.min(every, axis=0), np.max(every, axis=0)
    assert pick.centre.box[0] == pytest.approx(low)
    assert pick.centre.box[1] == pytest.approx(high)
    hook = (centre[0], centre[1], 4200)
    shares = [min(sets, key=lambda t: t @ t) * cosines for sets, cosines, _ in
              (balances(points, hook, corner) for corner in itertools.product(*zip(low, high, strict=True)))]  # fmt: skip
    weight = pick.design_mass_kg * 1.1 * 9.80665 / 1000
    for k, p in enumerate(pick.points):
        assert p.share_heavy_kN >= max(s[k] for s in shares) * weight * (1 - 1e-9)


# --- one bar over pairs ----------------------------------------------------------------------------------------------

RECTANGLE = [(1000, -500, 200), (5500, -500, 200), (5500, 500, 200), (1000, 500, 200)]


def bar(kind: str = "spreader", length: float = 4500, **more: Any) -> dict[str, Any]:
    return {"spreader": {"kind": kind, "length_mm": length, "mass_kg": 60}, "hook_height_mm": 3000, **more}


def test_a_spreader_over_two_pairs_as_a_free_body(lifted: Lift) -> None:
    """Four legs of 1.5 m below a 4.5 m spreader, two above it: seven forces from twelve equations of piece and bar ends."""
    pick = lifted(points=named(*RECTANGLE), slings_mm=1500, lift={"skew_factor": 1.0}, **bar())
    own = 60 * 1.1 * 9.80665 / 1000
    high = 200 + math.sqrt(1500**2 - 500**2)
    ends = [np.array([1000.0, 0, high]), np.array([5500.0, 0, high])]
    hook = np.array([(HEAVY * 3000 + own * 3250) / (HEAVY + own), 0, high + 3000])
    rows, right = np.zeros((12, 7)), np.zeros(12)
    for column, (leg, end) in enumerate(((0, 0), (1, 1), (2, 1), (3, 0))):
        away = ends[end] - np.array(RECTANGLE[leg])
        unit = away / np.linalg.norm(away)
        rows[0:3, column], rows[3:6, column] = unit, np.cross(np.array(RECTANGLE[leg]) - CENTRE, unit)
        rows[6 + 3 * end : 9 + 3 * end, column] = -unit
    for end in (0, 1):
        rows[6 + 3 * end : 9 + 3 * end, 4 + end] = (hook - ends[end]) / np.linalg.norm(hook - ends[end])
        rows[6 + 3 * end, 6] = (-1, 1)[end]
    right[2], right[8], right[11] = HEAVY, own / 2, own / 2
    forces = np.linalg.lstsq(rows, right, rcond=None)[0]
    assert np.linalg.norm(rows @ forces - right) < 1e-9
    assert [p.tension_kN for p in pick.points] == pytest.approx(forces[:4])
    assert pick.spreader is not None
    assert pick.spreader.top_tensions_kN == pytest.approx(forces[4:6])
    assert pick.spreader.compression_kN == pytest.approx(forces[6])
    assert pick.spreader.over == (("A", "D"), ("B", "C"))
    assert pick.static_hook_load_kg == pytest.approx(DESIGN + 60)
    assert pick.verdict == "within"
    assert "spreader-not-worked-out" not in kinds(pick)


def test_pairs_beside_the_centre_roll_or_hang_level(lifted: Lift) -> None:
    """Legs cut to suit hang it level, 60:40 across; equal legs let it roll until the centre is under the bar."""
    points = [(1000, -400, 200), (5500, -400, 200), (5500, 600, 200), (1000, 600, 200)]
    near, far = math.hypot(400, 1200), math.hypot(600, 1200)
    level = lifted(points=named(*points), slings_mm=[near, near, far, far], lift={"skew_factor": 1.0}, **bar())
    assert level.tilt_deg == pytest.approx(0, abs=1e-6)
    ends = (HEAVY * 2500 / 4500, HEAVY * 2000 / 4500)
    assert [p.share_heavy_kN for p in level.points] == pytest.approx([ends[0] * 0.6, ends[1] * 0.6, ends[1] * 0.4, ends[0] * 0.4])
    rolled = lifted(points=named(*points), slings_mm=1300, lift={"skew_factor": 1.0}, **bar())
    top = np.array([100.0, 200 + math.sqrt(1300**2 - 500**2)])
    assert rolled.tilt_deg == pytest.approx(math.degrees(math.atan2(*top)))
    units = np.array([(top - np.array([y, 200])) / 1300 for y in (-400, 600)]).T
    tensions = np.linalg.solve(units, top / np.linalg.norm(top))
    wanted = [t * e for t, e in zip(tensions[[0, 0, 1, 1]], (*ends, *ends[::-1]), strict=True)]
    assert [p.tension_kN for p in rolled.points] == pytest.approx(wanted)
    assert "tilt" in kinds(rolled)


def test_pairs_share_even_where_their_slings_are_not_known(lifted: Lift) -> None:
    """60:40 across and 25:20 along need no sling lengths; how the legs lean, and so their tension, does."""
    points = [(1000, -400, 200), (5500, -400, 200), (5500, 600, 200), (1000, 600, 200)]
    pick = lifted(points=named(*points), **bar())
    ends = (REST * 2500 / 4500, REST * 2000 / 4500)
    assert [p.share_kN for p in pick.points] == pytest.approx([ends[0] * 0.6, ends[1] * 0.6, ends[1] * 0.4, ends[0] * 0.4])
    assert [p.tension_kN for p in pick.points] == [None] * 4
    assert pick.spreader is not None
    assert pick.spreader.end_loads_kN == pytest.approx([e * HEAVY / REST for e in ends])


def test_three_points_and_a_beam_under_one_eye(lifted: Lift) -> None:
    """A pair and one point share 1:1:2; four points under a lifting beam bend it by W L / 4."""
    three = [(1000, -300, 200), (1000, 300, 200), (5000, 0, 200)]
    one = math.sqrt(1200**2 - 300**2)
    pick = lifted(points=named(*three), slings_mm=[1200, 1200, one], **bar(length=4000))
    assert [p.share_heavy_kN for p in pick.points] == pytest.approx([HEAVY / 4, HEAVY / 4, HEAVY / 2])
    assert [p.tension_kN for p in pick.points] == pytest.approx([HEAVY / 4 * 1200 / one, HEAVY / 4 * 1200 / one, HEAVY / 2])
    four = [(1000, -300, 200), (1000, 300, 200), (5000, 300, 200), (5000, -300, 200)]
    pick = lifted(points=named(*four), slings_mm=1000, **bar("beam", 4000))
    assert pick.spreader is not None
    assert pick.spreader.moment_kNm == pytest.approx(HEAVY * 4 / 4)
    assert (pick.verdict, pick.points[0].case) == ("within", "skew 1.25 on diagonal A–C")


def test_a_bar_is_checked_with_the_centre_at_either_end_of_its_box(lifted: Lift) -> None:
    """Two members whose masses move apart: each end of the bar and each leg above takes its worst."""
    rows = [["B1", "A", 1, "UB 305x165x40", "S275", 3000, 0, 0, 0, 3000, 0, 0],
            ["B2", "A", 1, "UPN 200", "S275", 3000, 3000, 0, 0, 6000, 0, 0]]  # fmt: skip
    pick = lifted(rows, points=named((1000, 0, 200), (5000, 0, 200)), slings_mm=1500, **bar(length=4000))
    assert pick.centre is not None
    assert pick.spreader is not None
    weight = pick.design_mass_kg * 1.1 * 9.80665 / 1000
    low, high = (pick.centre.box[k][0] for k in (0, 1))
    assert high > low
    assert pick.spreader.end_loads_kN == pytest.approx([weight * (5000 - low) / 4000, weight * (high - 1000) / 4000])


def test_bar_and_slings_are_drawn_as_long_as_they_are(write_list: WriteList, tmp_path: Path) -> None:
    """Slings from points to bar and from bar to hook have the lengths of the sheet; page and workbook draw the bar."""
    result = result_of(write_list, tmp_path, points=named(*RECTANGLE), slings_mm=1500, **bar())
    pick = result.picks[0]
    assert pick.spreader is not None
    assert pick.spreader.ends_mm is not None
    lines = {(name, foot): math.dist(foot, top) for name, foot, top in picksheet.slings(pick)}
    assert [length for (name, _), length in lines.items() if name.startswith("sling from")] == pytest.approx([1500] * 4)
    assert [length for (name, _), length in lines.items() if name.startswith("leg above")] == pytest.approx(pick.spreader.top_lengths_mm)
    assert math.dist(*pick.spreader.ends_mm) == pytest.approx(4500)
    write_workbook(result, tmp_path / "o.xlsx")
    words = [str(c.value) for c in openpyxl.load_workbook(tmp_path / "o.xlsx")["Drawings"]["A"] if c.value]
    assert any(w.startswith("spreader: as a line") for w in words)
    assert words.count("to the bar") == 4
    assert "full line: the spreader" in to_page(result)
    eye = result_of(write_list, tmp_path, points=named(*RECTANGLE), slings_mm=1500, **bar("beam")).picks[0]
    assert [name for name, _, _ in picksheet.slings(eye)][-1] == "from the eye"


@pytest.mark.parametrize(
    ("points", "more"),
    [
        (RECTANGLE, {}),
        (RECTANGLE, {"slings_mm": [1500, 1900, 1900, 1500]}),
        (RECTANGLE, {"slings_mm": 400}),
        (RECTANGLE, {"slings_mm": 1500, "hook": [3100, 0]}),
        ([*RECTANGLE, (3000, 0, 200)], {"slings_mm": 1500}),
        ([(1000, 0, 200), (3250, -800, 200), (5500, 0, 200), (3250, 800, 200)], {"slings_mm": 1500}),
        ([(1000, 0, 200), (5500, 0, 200)], {"slings_mm": [1500, 1900]}),
        ([(1000, 0, 200), (5500, 0, 200)], {"hook": [3100, 0]}),
    ],
    ids=["no slings", "ends at two heights", "too short", "hook aside", "five", "diamond", "two falls", "two, hook aside"],
)
def test_what_pairs_do_not_settle_is_never_within(points: list[Any], more: dict[str, Any], lifted: Lift) -> None:
    """The finding stays where statics do not decide."""
    pick = lifted(points=named(*points), **bar(**more))
    assert pick.verdict == "unknown"
    assert {"spreader-not-worked-out", "slings-do-not-meet"} & kinds(pick)


def test_head_room_counts_the_slings_below_the_bar(lifted: Lift) -> None:
    """Tip 2 + √(12² − 6²), block 3 m, 1.5 m falls, 3 m above the bar; without their length the room is said to be at most so much."""
    keys: dict[str, Any] = {"radius_m": 6, "boom_m": 12, "points": named((1000, 0, 200), (5500, 0, 200)), **bar()}
    crane = {**CRANE, "boom_foot_m": 2}
    known = lifted(slings_mm=1500, crane=crane, **keys)
    assert known.crane is not None
    assert known.crane.head_room_m == pytest.approx(2 + math.sqrt(108) - 3 - (1500 + 3000 + 200 + 303.4 / 2) / 1000)
    assert "head-room-at-most" not in kinds(known)
    assert "head-room-at-most" in kinds(lifted(crane=crane, **keys))


# --- what keeps a piece from turning over ----------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("points", "verdict"),
    [
        ([(1000, 0, -100), (5000, 0, -100)], "over"),
        ([(1000, 0, -300), (5000, 0, 200)], "over"),
        ([(1000, 0, -50), (5000, 0, 200)], "within"),
        ([(1000, 0, 0), (5000, 0, 0)], "unknown"),
        ([(3000, 0, 0)], "unknown"),
        ([(1000, -100, -100), (5000, -100, -100), (5000, 100, -100), (1000, 100, -100)], "over"),
        ([(1000, -500, -100), (5000, -500, -100), (5000, 500, -100), (1000, 500, -100)], "within"),
    ],
)
def test_points_below_the_centre(points: list[Any], verdict: str, lifted: Lift) -> None:
    """Two points count by their line over the centre; level with it nothing rights the piece; four by the 1.73 rule."""
    pick = lifted(points=named(*points), hook_height_mm=4000)
    assert pick.verdict == verdict
    assert ("points-below-centre" in kinds(pick)) == (points != [(1000, 0, -50), (5000, 0, 200)])


# --- upending --------------------------------------------------------------------------------------------------------


def test_a_head_that_takes_all_is_chosen_for_all(lifted: Lift) -> None:
    """Upended on two hooks: the head's point, sling and eyebolt carry the whole at 90°, pulled square to the piece."""
    pick = lifted(points=named((200, 0, 0), (5500, 0, 0)), upend={"head": "A", "tail": "B", "step_deg": 30})
    head, tail = pick.points
    assert (head.share_heavy_kN, head.case) == (pytest.approx(HEAVY), "upending, at 90°")
    assert head.tension_kN == pytest.approx(HEAVY)
    assert tail.tension_kN == pytest.approx(HEAVY * 2800 / 5300)
    assert head.share_kN == pytest.approx(REST * 2500 / 5300)
    assert any(c.tackle == "eyebolt" and "90°" in c.method for c in head.chosen)
    assert pick.verdict == "within"
    assert "hook-height-missing" not in kinds(pick)


def test_upending_over_more_points_than_two_leaves_their_tension_open(lifted: Lift) -> None:
    """Two lugs at the head, one named: how the other pulls is not known, and never within."""
    points = named((200, -100, 100), (200, 100, 100), (5500, 0, 100))
    pick = lifted(points=points, upend={"head": "A", "tail": "C", "step_deg": 45})
    assert [p.tension_kN for p in pick.points] == [None] * 3
    assert pick.verdict == "unknown"


def test_the_tails_hook_goes_slack_where_the_centre_comes_under_the_head(lifted: Lift) -> None:
    """Both lugs 300 mm above the centre's axis: slack at atan(2800/300); printed as slack, and the head never above the whole."""
    pick = lifted(points=named((200, 0, 300), (5500, 0, 300)), upend={"head": "A", "tail": "B", "step_deg": 5})
    assert any("at 83.8° the tail's hook goes slack" in f.message for f in pick.findings)
    assert math.degrees(math.atan2(2800, 300)) == pytest.approx(83.88, abs=0.01)
    assert pick.points[0].share_heavy_kN == pytest.approx(HEAVY)
    assert pick.verdict == "unknown"
    step = pick.upend[-2]
    assert step.tail_kN < 0
    assert step.carried_kN == (pytest.approx(HEAVY), 0.0)
    assert "slack" in dict(picksheet.facts(pick, "si"))["Upending, head / tail"]
    beyond = lifted(points=named((200, 0, 0), (2500, 0, 0)), upend={"head": "A", "tail": "B", "step_deg": 30})
    assert beyond.verdict == "over"
    assert upend.slack_from_deg((200, 0, 0), (5500, 0, 0), (3000, 0, 0)) is None


def test_two_cranes_upend_within_what_each_may_carry(lifted: Lift) -> None:
    """The head's crane carries the whole at upright, never more, and needs no height of its hook."""
    cranes = [{"name": n, **CRANE} for n in ("one", "two")]
    on = [{"crane": "one", "points": ["A"]}, {"crane": "two", "points": ["B"]}]
    pick = lifted(points=named((200, 0, 300), (5500, 0, 300)), radius_m=9, boom_m=18, upend={"head": "A", "tail": "B"}, cranes=on,
                  crane=cranes)  # fmt: skip
    assert pick.cranes[0].share == pytest.approx(1.0)
    assert pick.points[0].tension_kN == pytest.approx(HEAVY)
    assert "hook-height-missing" not in kinds(pick)


def test_the_workbook_draws_the_curve_of_its_table(write_list: WriteList, tmp_path: Path) -> None:
    """A row a step, rounded up, and a chart of head and tail over these rows; in kip for US print."""
    for units, per in (("si", 1.0), ("us", rounding.KN_PER_KIP)):
        result = result_of(write_list, tmp_path, points=named((200, 0, 300), (5500, 0, 300)),
                           upend={"head": "A", "tail": "B", "step_deg": 10}, job={"units": units})  # fmt: skip
        path = tmp_path / f"{units}.xlsx"
        write_workbook(result, path)
        sheet = openpyxl.load_workbook(path, data_only=True)["Drawings"]
        first = next(r for r in range(1, sheet.max_row) if sheet.cell(r, 1).value == "Degrees from level") + 1
        steps = result.picks[0].upend
        for number, step in enumerate(steps):
            angle, head, tail, word = (sheet.cell(first + number, c).value for c in (1, 2, 3, 4))
            assert angle == step.angle_deg
            for value, kN in zip((head, tail), step.carried_kN, strict=True):
                assert 0 <= value - kN / per < 0.01 + 1e-9
            assert (word == "tail slack") == (step.carried_kN[1] == 0)
        with zipfile.ZipFile(path) as archive:
            charts = [archive.read(n).decode() for n in archive.namelist() if n.startswith("xl/charts/chart")]
        [chart] = [c for c in charts if "load at head and tail" in c]
        refs = [e.text for e in ElementTree.fromstring(chart).iter() if e.tag.endswith("}f")]
        last = first + len(steps) - 1
        assert refs == [f"Drawings!${c}${first}:${c}${last}" for c in "ABAC"]


# --- bending under its own weight ------------------------------------------------------------------------------------


def moduli_rows() -> list[dict[str, str]]:
    with (Path(__file__).parent / "published" / "lifting_section_moduli.csv").open(encoding="utf-8") as handle:
        return list(csv.DictReader(handle))


@pytest.mark.parametrize("row", moduli_rows(), ids=lambda r: r["designation"])
def test_section_moduli_are_the_published_ones(row: dict[str, str]) -> None:
    """Tapered flanges as they are: about both axes within 1 % (and half a printed unit) of the table."""
    section = read(row["designation"]).section
    assert section is not None
    found = own_weight.moduli(section, face_of(section, {}))  # type: ignore[arg-type]
    assert found is not None
    for axis in ("strong", "weak"):
        text = row[f"{axis}_cm3"]
        half = 0.5 * 10.0 ** -len(text.partition(".")[2])
        assert found[axis] / 1000 == pytest.approx(float(text), rel=0.01, abs=half), axis


@pytest.mark.parametrize("designation", ["L100x100x10", "L150x75x10"])
def test_an_angle_is_bent_askew(designation: str) -> None:
    """Its weak modulus is no more than any moment of unit size about a drawn or a principal axis gives, by turning the outline."""
    from takeoff.sections import shapes

    section = read(designation).section
    assert section is not None
    found = own_weight.moduli(section, face_of(section, {}))  # type: ignore[arg-type]
    assert found is not None
    ring = np.array(shapes.rings(section.shape, dict(section.dimensions_mm))[0])
    # Second moments by slicing into triangles from one corner.
    total, tensor, first = 0.0, np.zeros((2, 2)), np.zeros(2)
    for a, b in itertools.pairwise(ring - ring[0]):
        area = (a[0] * b[1] - a[1] * b[0]) / 2
        total, first = total + area, first + area * (a + b) / 3
        tensor += area / 12 * (np.outer(a, a) + np.outer(b, b) + np.outer(a + b, a + b))
    tensor -= np.outer(first, first) / total
    corners = ring - ring[0] - first / total
    flip = np.array([[tensor[1, 1], -tensor[0, 1]], [-tensor[0, 1], tensor[0, 0]]])  # about x, about y
    axes = [np.array([1.0, 0.0]), np.array([0.0, 1.0]), *np.linalg.eigh(flip)[1].T]
    moduli = []
    for axis in axes:  # stress = (bending direction) . tensor^-1 . place
        direction = np.array([-axis[1], axis[0]])
        moduli.append(1 / np.abs(corners @ np.linalg.solve(tensor, direction)).max())
    assert found["weak"] == pytest.approx(min(moduli), rel=1e-6)
    assert found["strong"] == pytest.approx(max(moduli[:2]), rel=1e-6)


def test_a_block_is_as_long_as_its_own_text_says(write_list: WriteList) -> None:
    """A panel with only its centre: its length stands in its section, and the strength given is checked."""
    row = ["S1", "A", 1, "Block 6000x200x1500", "Precast concrete", 3000, 0, 750]
    path = write_list([row], headings=[*HEADINGS[:5], "X (mm)", "Y (mm)", "Z (mm)"])
    points = named((1240, 0, 1500), (4760, 0, 1500))
    asked = {"name": "A", "points": points, "hook_height_mm": 3000, "own_weight": {"strength_mpa": 0.1}}
    [pick] = pipeline.schedule([path], job_from({"lift": {"picks": [asked]}})).picks
    assert pick.own_weight is not None
    assert pick.own_weight.best_points_mm == pytest.approx((6000 * 0.2071068, 6000 * 0.7928932))
    assert "own-weight-over" in kinds(pick)


# --- wind and print --------------------------------------------------------------------------------------------------


def test_the_wind_that_a_sail_leaves_of_the_charts(lifted: Lift) -> None:
    """6 m x 0.3034 m of beam, light 232.128 kg: v √(1.2 m / A), and 0.613 v² A of force."""
    pick = lifted(radius_m=6, boom_m=12, crane={**CRANE, "wind_m_s": 9.8})
    area, light = 6 * 0.3034, MASS * 0.96 / 1000
    speed = 9.8 * math.sqrt(1.2 * light / area)
    assert pick.crane is not None
    assert pick.crane.wind is not None
    assert pick.crane.wind.speed_m_s == pytest.approx(speed)
    assert pick.crane.wind.force_kN == pytest.approx(0.613 * speed**2 * area / 1000)
    assert pick.as_record()["crane"]["wind_m_s"] == pytest.approx(speed)
    [plain] = [lifted(radius_m=6, boom_m=12, crane=CRANE).crane]
    assert plain is not None
    assert plain.wind is None


@pytest.mark.parametrize("units", ["si", "us"])
def test_nothing_on_the_sheet_rounds_toward_danger(units: rounding.Units, write_list: WriteList, tmp_path: Path) -> None:
    """Every figure of crane, bar, pad and bending, read back from the print, is no kinder than the record's."""
    stand = {"spread_x_mm": 6000, "spread_y_mm": 5000, "crane_kg": 24003.7, "allowable_kpa": 151.3}
    result = result_of(
        write_list, tmp_path, points=named((1003, 0, 201), (5507, 0, 201)), radius_m=6.006, boom_m=12.0, slings_mm=1503.3,
        spreader={"kind": "spreader", "length_mm": 4504, "mass_kg": 61.37}, hook_height_mm=3001.7,
        lift={"rigging_kg": 11.23, "hook_block_kg": 3.3},
        crane={**CRANE, "deductions_kg": 3.337, "boom_foot_m": 2.003, "outriggers": stand, "wind_m_s": 9.8}, job={"units": units},
    )  # fmt: skip
    pick = result.picks[0]
    check, held = pick.crane, pick.spreader
    assert check is not None
    assert held is not None
    facts = dict(picksheet.facts(pick, units))
    text = facts[f"Crane {check.name}"].replace(rounding.NO_BREAK, " ")
    printed = dict(part.split(": ", 1) for part in text.split("; ") if ": " in part)
    kg = (lambda v: number_in(v) * 0.45359237) if units == "us" else number_in
    metres = feet if units == "us" else number_in
    assert check.rating_kg is not None
    assert kg(printed["capacity, deductions off"]) <= check.capacity_kg  # type: ignore[operator]
    assert kg(printed["rating (chart or hook)"]) <= check.rating_kg
    assert kg(printed["load at rest"]) >= check.static_kg  # type: ignore[operator]
    assert number_in(printed["utilisation moving"]) >= check.utilisation * 100  # type: ignore[operator]
    assert number_in(printed["utilisation at rest"]) >= check.utilisation_static * 100  # type: ignore[operator]
    assert metres(printed["head room"]) <= check.head_room_m  # type: ignore[operator]
    assert metres(printed["radius (the larger)"]) >= check.radius_m  # type: ignore[operator]
    assert metres(printed["largest radius that serves"]) <= check.largest_radius_m * (1 + 1e-9)  # type: ignore[operator]
    for stand_, part in zip(check.stands, [part for part in text.split("; ") if part.startswith("outrigger")], strict=True):
        load, _, pad = part.rpartition(": ")[2].partition(", pad ")
        assert kg(load) >= stand_.load_kg
        assert metres(pad.split(" × ")[0]) >= stand_.side_m
    bar_text = facts["Spreader"].replace(rounding.NO_BREAK, " ")
    per_kN = 1 / rounding.KN_PER_KIP if units == "us" else 1.0
    assert number_in(bar_text.split("compression ")[1]) >= held.compression_kN * per_kN  # type: ignore[operator]
    low, high = facts["It may lie between"].replace(rounding.NO_BREAK, " ").split(" and ")
    assert low
    assert high
    bending = facts["Under its own weight"].replace(rounding.NO_BREAK, " ")
    assert pick.own_weight is not None
    stress = pick.own_weight.stress_mpa
    assert stress is not None
    assert number_in(bending.split("tension ")[1]) >= stress * (145.03773 if units == "us" else 1) * (1 - 1e-6)
    # Terminal, page and workbook show the same words.
    sheet = " ".join(terminal.pick_sheet(result.picks, 200, units=units, cautions=[], title=None).replace(rounding.NO_BREAK, " ").split())
    page = to_page(result).replace(rounding.NO_BREAK, " ").replace("&nbsp;", " ")
    write_workbook(result, tmp_path / "o.xlsx")
    cells = " ".join(str(c.value) for row in openpyxl.load_workbook(tmp_path / "o.xlsx")["Picks"].iter_rows() for c in row if c.value)
    for words in (printed["head room"], printed["capacity, deductions off"], printed["load at rest"], printed["wind, at most"]):
        assert words in sheet
        assert words.replace('"', "&#34;").replace("'", "&#39;") in page or words in page
        assert words in cells.replace(rounding.NO_BREAK, " ")
    if units == "us":
        for foreign in (" kN", "MPa", " mm", " m/s", " kg"):
            assert foreign not in facts[f"Crane {check.name}"].replace(rounding.NO_BREAK, " ")
            assert foreign not in bending
            assert foreign not in bar_text


def number_in(text: str) -> float:
    """The first figure of a text."""
    head = text.strip().split(" kg")[0].split(" lb")[0]
    digits = ""
    for char in head:
        if char.isdigit() or char == "." or (char == " " and digits):
            digits += char
        elif digits:
            break
    return float(digits.replace(" ", ""))


def feet(text: str) -> float:
    """m of a length printed in feet and inches."""
    whole, _, inches = text.strip().partition("'-")
    total = 0.0
    for part in inches.rstrip('"').split():
        top, _, below = part.partition("/")
        total += float(top) / float(below or 1)
    return (float(whole) * 12 + total) * 0.0254


@pytest.mark.parametrize(("value", "up", "down"), [(60.01, "60.1", "60.0"), (60.0, "60.0", "60.0"), (0.3 * 3 - 0.9 + 2, "2.0", "2.0")])
def test_figures_of_findings_go_the_safe_way(value: float, up: str, down: str) -> None:
    """Up or down to a tenth; noise of the last place is no tenth."""
    assert (up_to(value, 1), down_to(value, 1)) == (up, down)
