"""Loads: units to vehicles with real places, axles and securing; an independent checker looks over every plan."""

from __future__ import annotations

import csv
import json
import random
import re
import time
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import pytest
from conftest import WriteList
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff.bounds import Bounds
from takeoff.errors import JobError
from takeoff.job import Job, job_from
from takeoff.reports.loadsheet import vehicles_words
from takeoff.transport import plan_units, room_record
from takeoff.transport.axles import Support, extreme_share, most_payload_kg, permissible_kg, rigid, semitrailer
from takeoff.transport.checking import faults
from takeoff.transport.load import LoadUnit, Plan
from takeoff.transport.rules import friction_of, frictions
from takeoff.transport.units import natural, strapped
from takeoff.transport.vehicles import vehicles_of

Run = Callable[..., "CompletedProcess[str]"]
ARTIC: dict[str, Any] = {
    "name": "artic",
    "kind": "semitrailer",
    "gross_limit_kg": 40000,
    "deck_length_mm": 13600,
    "deck_width_mm": 2480,
    "load_height_mm": 2600,
    "kingpin_to_axles_mm": 7700,
    "deck_ahead_of_kingpin_mm": 1600,
    "kingpin_empty_kg": 2000,
    "axles_empty_kg": 4500,
    "kingpin_limit_kg": 12000,
    "axles_limit_kg": 24000,
    "tractor": {
        "wheelbase_mm": 3800,
        "fifth_wheel_ahead_mm": 600,
        "front_empty_kg": 5200,
        "drive_empty_kg": 2300,
        "front_limit_kg": 8000,
        "drive_limit_kg": 11500,
    },
}
LORRY: dict[str, Any] = {
    "name": "lorry",
    "kind": "rigid",
    "payload_kg": 9000,
    "deck_length_mm": 6500,
    "deck_width_mm": 2450,
    "load_height_mm": 2400,
    "wheelbase_mm": 4800,
    "deck_front_mm": 900,
    "front_empty_kg": 4600,
    "rear_empty_kg": 3400,
    "front_limit_kg": 7500,
    "rear_limit_kg": 11500,
}
FLAT: dict[str, Any] = {"name": "flat", "payload_kg": 10000, "deck_length_mm": 6000, "deck_width_mm": 2400, "load_height_mm": 2000}


def floats(value: Any) -> Any:
    """Numbers as TOML gives them where a float is wanted."""
    if isinstance(value, dict):
        return {k: v if k == "count" else floats(v) for k, v in value.items()}
    return float(value) if isinstance(value, int) and not isinstance(value, bool) else value


def job_of(*vehicles: dict[str, Any], **transport: Any) -> Job:
    return job_from({"vehicles": [floats(v) for v in vehicles], "transport": floats(transport)})


def unit(name: str, kg: float, size: tuple[float, float, float] | None, **more: Any) -> LoadUnit:
    return LoadUnit(name, "piece", Bounds(0.95 * kg, 0.98 * kg, kg), size, **more)


def planned(units: list[LoadUnit], job: Job) -> Plan:
    """The plan, looked over once more by the checker from its records alone."""
    vehicles = vehicles_of(job)
    plan = plan_units(units, [], vehicles, job)
    room = {v.name: room_record(v, job) for v in vehicles}
    record = json.loads(json.dumps(plan.as_record()))
    assert faults(record["vehicles"], record["not_loaded"], [u.name for u in units], room) == []
    return plan


def mixed_job(seed: int, count: int = 120) -> list[LoadUnit]:
    """Beams, plates, crates and pallets of a made-up job, several alike of each."""
    shake = random.Random(seed)
    units: list[LoadUnit] = []
    number = 0
    while len(units) < count:
        number += 1
        kind, times = shake.random(), shake.choice([1, 2, 4, 6, 8, 10])
        if kind < 0.55:
            width, height, per_m = shake.choice([(200, 190, 42.3), (190, 453, 67.1), (150, 300, 42.2), (100, 100, 14.7), (300, 300, 117.0)])
            size = (float(shake.choice([3000, 4500, 6000, 7500, 9000, 12000])), float(width), float(height))
            kg = per_m * size[0] / 1000
        elif kind < 0.7:
            size = (shake.choice([2000.0, 3000.0, 6000.0]), shake.choice([1000.0, 1500.0, 2000.0]), shake.choice([10.0, 20.0, 30.0]))
            kg = size[0] * size[1] * size[2] * 7.85e-6
        elif kind < 0.85:
            size = (shake.choice([3000.0, 4000.0, 6000.0]), shake.choice([1200.0, 2000.0, 2400.0]), shake.choice([800.0, 1200.0, 2000.0]))
            kg = size[0] * size[1] * size[2] * 1e-9 * shake.uniform(80, 250)
        else:
            size = (1200.0, 800.0, shake.choice([600.0, 1000.0]))
            kg = shake.uniform(200, 900)
        for copy in range(min(times, count - len(units))):
            units.append(unit(f"M{number}" + (f" #{copy + 1}" if copy else ""), kg, size))
    return units


def bulky_job(seed: int, count: int = 120) -> list[LoadUnit]:
    """Crates that hardly fit beside each other, beams and pallets of a made-up job in three phases."""
    shake = random.Random(seed)
    units: list[LoadUnit] = []
    number = 0
    while len(units) < count:
        number += 1
        times, phase = shake.choice([1, 2, 3, 4, 6]), shake.randrange(3)
        if shake.random() < 0.5:
            size = (
                shake.choice([2500.0, 4000.0, 5500.0, 7000.0]),
                shake.choice([1400.0, 1800.0, 2200.0, 2400.0]),
                shake.choice([700.0, 1100.0, 1500.0, 2200.0]),
            )
            kg = size[0] * size[1] * size[2] * 1e-9 * shake.uniform(60, 220)
        elif shake.random() < 0.6:
            sides = [float(shake.choice(c)) for c in ([3000, 4500, 6000, 7500, 9000, 12000], [100, 150, 200, 300], [100, 190, 300, 450])]
            size = (sides[0], sides[1], sides[2])
            kg = size[0] / 1000 * shake.choice([14.7, 42.3, 67.1, 117.0])
        else:
            size = (1200.0, 800.0, shake.choice([600.0, 1000.0]))
            kg = shake.uniform(200, 900)
        for copy in range(min(times, count - len(units))):
            units.append(unit(f"B{number}" + (f" #{copy + 1}" if copy else ""), kg, size, phase=str(phase), drop=phase))
    return units


# --- plans -----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("seed", [1, 2, 7])
def test_a_mixed_job_of_120_units(seed: int) -> None:
    """Everything stands on a vehicle, within 30 s and within one vehicle of the bound; the same again gives the same."""
    job = job_of(ARTIC, LORRY, dunnage_mm=75, dunnage_kg=250)
    units = mixed_job(seed)
    start = time.monotonic()
    plan = planned(units, job)
    assert time.monotonic() - start < 30
    assert not plan.not_loaded
    assert plan.gap <= 1
    assert plan.as_record() == planned(list(units), job).as_record()


@pytest.mark.long
def test_twenty_jobs_are_within_one_vehicle_of_the_bound() -> None:
    """Twelve mixed jobs and eight bulky ones of three phases, four of these with the phases apart: at most one vehicle more each."""
    plans = [planned(mixed_job(seed), job_of(ARTIC, LORRY, dunnage_mm=75, dunnage_kg=250)) for seed in range(1, 13)]
    for seed in range(1, 9):
        apart = "phase" if seed > 4 else "none"
        plans.append(planned(bulky_job(seed), job_of(ARTIC, LORRY, dunnage_mm=75, dunnage_kg=250, separate=apart)))
    assert not any(plan.not_loaded for plan in plans)
    assert max(plan.gap for plan in plans) <= 1
    with (Path(__file__).parent / "published" / "packing_results.csv").open(encoding="utf-8", newline="") as handle:
        written = {r["set"]: r for r in csv.DictReader(handle)}
    assert sum(plan.proven for plan in plans) >= int(written["mixed_and_bulky_jobs"]["proven"])


sizes = st.tuples(st.integers(200, 7000), st.integers(100, 2600), st.integers(20, 2200))
boxes = st.lists(st.tuples(sizes, st.integers(10, 6000), st.integers(0, 2)), min_size=1, max_size=14)


@settings(deadline=None, max_examples=25)
@given(
    boxes,
    st.sampled_from([(ARTIC,), (LORRY,), (LORRY, ARTIC), (FLAT | {"deck_line_load_kg_per_m": 1500, "rear_overhang_mm": 800},)]),
    st.booleans(),
)
def test_nothing_is_lost_and_every_plan_holds(
    items: list[tuple[tuple[int, int, int], int, int]], fleet: tuple[dict[str, Any], ...], apart: bool
) -> None:
    """Whatever the units: each once on a vehicle or named as left, no overlap, masses, axles and layers as they must be."""
    units = [
        unit(f"U{k}", kg, (float(max(a, b)), float(min(a, b)), float(c)), drop=drop, phase=str(drop))
        for k, ((a, b, c), kg, drop) in enumerate(items)
    ]
    plan = planned(units, job_of(*fleet, dunnage_mm=60, dunnage_kg=120, separate="phase" if apart else "none", time_limit_s=15))
    loaded = sum(p.unit.mass.heavy for load in plan.loads for p in load.pieces)
    left = sum(n.kg or 0.0 for n in plan.not_loaded)
    assert loaded + left == pytest.approx(sum(u.mass.heavy for u in units))
    assert plan.bound <= len(plan.loads) or not plan.loads
    if apart:
        assert all(len({p.unit.phase for p in load.pieces}) == 1 for load in plan.loads)
    for load in plan.loads:
        assert load.payload_kg <= load.vehicle.payload_kg + 1e-6
        ground = [a.kg for a in load.axles if load.vehicle.statics and a.name in load.vehicle.statics.on_ground]
        assert not ground or sum(ground) == pytest.approx((load.vehicle.empty_kg or 0.0) + load.payload_kg)


def test_masses_alone_decide_where_nothing_has_a_size() -> None:
    """Units without size are packed by mass, exactly, and said."""
    job = job_of({"name": "van", "payload_kg": 100})
    plan = planned([unit(f"P{k}", kg, None) for k, kg in enumerate([70, 60, 50, 50, 40, 30])], job)
    assert (len(plan.loads), plan.bound, plan.proven) == (3, 3, True)
    kinds = {f.kind for load in plan.loads for f in load.findings}
    assert "deck-unknown" in kinds
    assert all(p.x is None for load in plan.loads for p in load.pieces)


def test_one_lane_is_packed_exactly_by_mass_and_length() -> None:
    """Units as wide as the deck and half as high as the room stand in one lane: the count is proven."""
    rng = random.Random(4)
    units = [unit(f"L{k}", 1000, (float(rng.choice([1500, 2500, 3500])), 2400.0, 1200.0)) for k in range(24)]
    plan = planned(units, job_of(FLAT))
    assert plan.proven


def test_fewest_then_least_payload_capacity() -> None:
    """Of fleets of one vehicle, the smaller one that takes the load."""
    plan = planned([unit("A", 5000, (3000.0, 1000.0, 500.0))], job_of(ARTIC, LORRY))
    assert [load.vehicle.name for load in plan.loads] == ["lorry"]


def test_loads_are_even() -> None:
    """Ten like pieces on two vehicles: five and five."""
    plan = planned([unit(f"A{k}", 1500, (2000.0, 1000.0, 500.0)) for k in range(10)], job_of(FLAT))
    assert [len(load.pieces) for load in plan.loads] == [5, 5]


def test_the_heavier_lies_below_and_later_deliveries_too() -> None:
    """A light long piece goes on top of a heavy one; nothing stands on what leaves first."""
    units = [unit("heavy", 3000, (6000.0, 2400.0, 400.0), drop=1, phase="2"), unit("light", 500, (6000.0, 2400.0, 400.0), phase="1")]
    (load,) = planned(units, job_of(FLAT)).loads
    assert [(p.unit.name, p.layer) for p in load.pieces] == [("heavy", 1), ("light", 2)]
    units = [replace(units[0], drop=0, phase="1"), replace(units[1], drop=1, phase="2")]
    assert len(planned(units, job_of(FLAT)).loads) == 2


def test_several_level_pieces_carry_one() -> None:
    """Four beams side by side carry a crate that none of them could carry alone."""
    units = [unit(f"B{k}", 900, (6000.0, 300.0, 300.0)) for k in range(8)] + [unit("crate", 600, (3000.0, 2000.0, 1000.0))]
    (load,) = planned(units, job_of(FLAT)).loads
    crate = next(p for p in load.pieces if p.unit.name == "crate")
    assert crate.layer == 2
    assert len(crate.on) > 1


def test_a_piece_beyond_the_tail_is_marked() -> None:
    """Within the overhang allowed, and said; without it the piece is on no vehicle, and named."""
    beam = unit("long", 800, (6500.0, 200.0, 200.0))
    (load,) = planned([beam], job_of(FLAT | {"rear_overhang_mm": 600})).loads
    assert "rear-overhang" in {f.kind for f in load.findings}
    plan = planned([beam], job_of(FLAT))
    assert [n.name for n in plan.not_loaded] == ["long"]
    assert "larger than any deck" in plan.not_loaded[0].reason


def test_axles_hold_after_each_delivery() -> None:
    """What would overload the drive axle once the rear is unloaded is set so that it does not."""
    units = [unit("stays", 14_000, (5000.0, 2400.0, 1000.0), drop=1, phase="2"), unit("goes", 9000, (5000.0, 2400.0, 1000.0), phase="1")]
    (load,) = planned(units, job_of(ARTIC)).loads
    assert [step["stage"] for step in load.stages] == ["full", "after phase 1"]
    for step in load.stages:
        assert step["kg"]["drive"] <= 11_500 + 1e-6
    assert all(a.limit_kg is None or a.worst_kg <= a.limit_kg * (1 + 1e-9) for a in load.axles)


def test_a_limited_fleet_names_what_is_left() -> None:
    """Two lorries for three loads: the rest is named with the reason, and nothing is lost."""
    plan = planned([unit(f"A{k}", 9000, (3000.0, 2000.0, 500.0)) for k in range(3)], job_of(FLAT | {"count": 2}))
    assert len(plan.loads) == 2
    assert [n.reason for n in plan.not_loaded] == ["every vehicle of the job is full"]
    assert vehicles_words(plan) == "2 vehicles, full, and not everything is on them; at least 3 would be needed"


def test_units_that_carry_nothing_are_counted_in_full_columns() -> None:
    """Thirty crates that bear nothing, six to a deck: five vehicles, and that is the bound."""
    plan = planned([unit(f"C{k}", 100, (2000.0, 1000.0, 500.0), carries=False) for k in range(30)], job_of(FLAT))
    assert (len(plan.loads), plan.bound) == (5, 5)


def test_the_checker_finds_what_is_wrong() -> None:
    """Each kind of fault in a record is found: overlap, off the deck, lost, over the payload, an axle told wrongly."""
    job = job_of(LORRY)
    plan = plan_units([unit("A", 2000, (3000.0, 2000.0, 500.0)), unit("B", 2000, (3000.0, 2000.0, 500.0))], [], vehicles_of(job), job)
    room = {v.name: room_record(v, job) for v in vehicles_of(job)}

    def found(change: Callable[[dict[str, Any]], None]) -> str:
        record = json.loads(json.dumps(plan.as_record()))["vehicles"]
        change(record[0])
        return "; ".join(faults(record, [], ["A", "B"], room))

    assert found(lambda _: None) == ""
    assert "overlap" in found(lambda load: load["pieces"][1].update(x_mm=load["pieces"][0]["x_mm"], y_mm=load["pieces"][0]["y_mm"]))
    assert "off the deck" in found(lambda load: load["pieces"][0].update(y_mm=1000.0))
    assert "accounted for" in found(lambda load: load["pieces"].pop())
    assert "over its limit" in found(lambda load: load["pieces"][0].update(kg=9000.0))
    assert "is told as" in found(lambda load: load["axles"][0].update(kg=1.0))
    assert "stands on nothing" in found(lambda load: load["pieces"][0].update(bottom_mm=300.0))


# --- statics ---------------------------------------------------------------------------------------------------------

masses = st.lists(st.tuples(st.floats(1, 5000), st.floats(0, 0.2), st.floats(-500, 13_000)), min_size=1, max_size=8)


@given(masses)
def test_axle_reactions_sum_to_the_mass(given_masses: list[tuple[float, float, float]]) -> None:
    """Vertical balance, for a rigid vehicle and for a semitrailer without tractor."""
    on_deck = [(m, x) for m, _, x in given_masses]
    for statics in (rigid(4800, 900, 4600, 3400), semitrailer(7700, 1600, 2000, 4500)):
        loads = statics.loads_kg(on_deck)
        assert sum(loads[k] for k in statics.on_ground) == pytest.approx(statics.empty_kg + sum(m for m, _ in on_deck))


@given(masses)
def test_the_least_share_is_the_least(given_masses: list[tuple[float, float, float]]) -> None:
    """No choice of masses within their bounds gives a smaller share than the one told."""
    support = Support("front", 4600, 0.8, -1 / 4800)
    bounded = [(m * (1 - spread), m, x) for m, spread, x in given_masses]
    least = extreme_share(support, 8000, bounded)
    shake = random.Random(1)
    for _ in range(30):
        chosen = [(shake.choice((light, heavy)), x) for light, heavy, x in bounded]
        assert support.load_kg(chosen) / (8000 + sum(m for m, _ in chosen)) >= least - 1e-9


@given(st.floats(0, 13_000))
def test_the_payload_curve_is_what_the_axles_bear(x: float) -> None:
    """The permissible payload at a place holds every limit there, and a little more does not, or the payload governs."""
    statics = rigid(4800, 900, 4600, 3400, 7500, 11_500, 0.2, 0.25)
    kg, why = permissible_kg(statics, 9000, x)

    def holds(payload: float) -> bool:
        whole = statics.empty_kg + payload
        return all(
            s.limit_kg is not None
            and -1e-6 <= s.load_kg([(payload, x)]) <= s.limit_kg + 1e-6
            and s.load_kg([(payload, x)]) >= s.least_share * whole - 1e-6
            for s in statics.supports
        )

    assert holds(kg)
    assert why == "payload" or not holds(kg * 1.01 + 1)
    assert kg <= most_payload_kg(statics, 9000, 13_000) + 1e-6


# --- the job file and the command -------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("raw", "message"),
    [
        ({}, "names no vehicle"),
        ({"vehicles": [{"name": "a", "count": 0}]}, "names no vehicle"),
        ({"vehicles": [{"name": "a"}]}, "what a may carry is not given"),
        ({"vehicles": [{"name": "a", "payload_kg": 0.0}]}, "carries nothing"),
        ({"vehicles": [{"name": "a", "payload_kg": 9.0}, {"name": "a", "payload_kg": 9.0}]}, "two vehicles have one name"),
        ({"vehicles": [floats(LORRY) | {"front_limit_kg": 4000.0}]}, "front_limit_kg contradicts"),
        ({"vehicles": [floats(LORRY) | {"gross_limit_kg": 7000.0}]}, "gross_limit_kg contradicts"),
        ({"vehicles": [floats(ARTIC) | {"deck_ahead_of_kingpin_mm": 20_000.0}]}, "ends ahead of the kingpin"),
    ],
)
def test_vehicles_that_cannot_be(raw: dict[str, Any], message: str) -> None:
    """An empty fleet, contradictory limits, nothing to carry: one clear message."""
    with pytest.raises(JobError, match=message):
        vehicles_of(job_from(raw))


@pytest.mark.parametrize(
    ("transport", "message"),
    [
        ({"friction": 0.0}, "transport.friction"),
        ({"friction": "butter / butter"}, "no such pair"),
        ({"lashing": {"lc_dan": 300.0, "stf_dan": 500.0}}, "above its strength"),
    ],
)
def test_securing_that_cannot_be(transport: dict[str, Any], message: str) -> None:
    """Zero friction, an unknown pair, a lashing weaker than its tension."""

    def asked() -> Plan:
        job = job_from({"vehicles": [floats(FLAT)], "transport": transport})
        return plan_units([unit("A", 10, None)], [], vehicles_of(job), job)

    with pytest.raises(JobError, match=message):
        asked()


def test_a_vehicle_without_axle_figures_says_so() -> None:
    """Axle loads are then unknown, and what would make them known is named."""
    (load,) = planned([unit("A", 100, (1000.0, 500.0, 500.0))], job_of(FLAT)).loads
    assert load.axles == ()
    assert any(f.kind == "axles-unknown" and f.right and "wheelbase_mm" in f.right for f in load.findings)


def test_securing_by_either_rule() -> None:
    """Ten t at friction 0.3: 21 over the top against sliding forward, fewer once blocked; by half the weight otherwise."""
    piece = [unit("A", 10_000, (6000.0, 2400.0, 500.0))]
    lashing = {"lc_dan": 2500, "stf_dan": 500, "angle_deg": 90}
    (load,) = planned(piece, job_of(FLAT, friction=0.3, lashing=lashing)).loads
    assert [(x.method, x.direction, x.number) for x in load.lashings] == [("top-over", "forward", 21)]
    (load,) = planned(piece, job_of(FLAT, friction=0.3, lashing=lashing, blocked_forward=True)).loads
    assert [(x.method, x.number) for x in load.lashings] == [("top-over", 8), ("blocking", 1)]
    (load,) = planned(piece, job_of(FLAT, securing="49 CFR 393", lashing=lashing)).loads
    assert [x.number for x in load.lashings] == [3]  # 19.7 ft: two, and one for what is beyond ten feet
    assert friction_of(None).factor == min(f.factor for f in frictions() if f.factor >= 0.2)


def test_over_size_is_named_with_its_rule() -> None:
    """A wide piece, a high load and a heavy vehicle, against the envelope and against the job's own thresholds."""
    wide = FLAT | {"deck_width_mm": 3000, "deck_height_mm": 1300}
    (load,) = planned([unit("W", 900, (4000.0, 2800.0, 1900.0))], job_of(wide)).loads
    kinds = {(o.kind, o.name) for o in load.over_size}
    assert ("width", "W") in kinds
    assert all("confirm locally" in o.rule for o in load.over_size)
    job = job_of(wide, envelope="own").model_copy(update={"limits": job_from({"limits": {"length_mm": 3500.0}}).limits})
    (load,) = planned([unit("W", 900, (4000.0, 2800.0, 1900.0))], job).loads
    assert {o.kind for o in load.over_size} == {"length"}


def test_the_overall_length_is_known_where_the_front_overhang_is() -> None:
    """Front 1.4 m ahead of the first axle, kingpin 3.2 m behind it, deck from 1.6 m ahead of that, 13.6 m long: 16.6 m, over 16.5 m.

    Without the overhang only 15.2 m are sure, which is within; a load beyond the tail counts.
    """
    piece = [unit("A", 9000, (6000.0, 2000.0, 500.0))]
    (load,) = planned(piece, job_of(ARTIC | {"front_overhang_mm": 1400})).loads
    assert [(o.kind, o.value) for o in load.over_size] == [("length", 16_600)]
    assert "at least" not in load.over_size[0].rule
    (load,) = planned(piece, job_of(ARTIC)).loads
    assert load.over_size == ()
    beam = [unit("B", 3000, (15_000.0, 300.0, 300.0))]
    (load,) = planned(beam, job_of(ARTIC | {"rear_overhang_mm": 1500})).loads
    assert [(o.name, o.value, "at least" in o.rule) for o in load.over_size] == [("artic", 16_600, True)]
    (load,) = planned(beam, job_of(LORRY | {"rear_overhang_mm": 9000, "deck_length_mm": 12_000, "front_overhang_mm": 1300})).loads
    assert [(o.name, o.value) for o in load.over_size] == [("B", 15_000), ("lorry", 1300 + 900 + 15_000)]


def test_small_helpers() -> None:
    """Phases in natural order, and the size of strapped pieces."""
    assert sorted(["10", "2", "phase 10", "phase 9"], key=natural) == ["2", "10", "phase 9", "phase 10"]
    assert strapped([((6000.0, 100.0, 100.0), 9)]) == (6000.0, 300.0, 300.0)


JOB = """
[transport]
max_bundle_kg = 1500
friction = "sawn timber / plywood"
[[vehicles]]
name = "flat"
payload_kg = 10000
deck_length_mm = 6000
deck_width_mm = 2400
load_height_mm = 2000
"""


def test_the_command(run: Run, write_list: WriteList, tmp_path: Path) -> None:
    """JSON alone, status 0; with a piece too long, status 3 and the piece named; the schedule holds the same loads."""
    rows = [["B1", None, 12, "HEA200", "S355", 4200], ["C1", None, 30, "SHS 100x5", "S355", 3000]]
    (tmp_path / "job.toml").write_text(JOB, encoding="utf-8")
    path = write_list(rows)
    done = run("loads", path, "--json")
    assert done.returncode == 0, done.stderr
    record = json.loads(done.stdout)
    assert set(record) >= {"vehicles", "not_loaded", "vehicle_count_bound", "proven", "gap", "cautions"}
    assert record["vehicles"][0]["pieces"][0]["name"].startswith("Bundle")
    assert record["cautions"]
    text = run("loads", path).stdout
    assert "no plan does with fewer" in text
    assert "local law and the carrier decide" in " ".join(text.split())
    path = write_list([*rows, ["L1", None, 1, "HEA200", "S355", 9000]])
    done = run("loads", path, "--json")
    assert done.returncode == 3
    assert "9000" in json.loads(done.stdout)["not_loaded"][0]["reason"]
    out = tmp_path / "out.json"
    assert run("schedule", path, "--json", out, "--quiet").returncode == 3
    whole = json.loads(out.read_text(encoding="utf-8"))
    assert whole["vehicles"] == json.loads(done.stdout)["vehicles"]
    assert whole["proven"] is True


def test_the_command_without_vehicles(run: Run, write_list: WriteList) -> None:
    """One message, status 2."""
    done = run("loads", write_list([["B1", None, 1, "HEA200", "S355", 4200]]))
    assert done.returncode == 2
    assert "names no vehicle" in done.stderr
    assert "Traceback" not in done.stderr


def test_us_print_has_us_figures_throughout(run: Run, write_list: WriteList, tmp_path: Path) -> None:
    """Reasons and findings in feet, pounds and pounds-force on the terminal, the page and in the workbook; the JSON stays SI."""
    import openpyxl

    text = JOB.replace("max_bundle_kg = 1500\n", "").replace(
        "[[vehicles]]", 'lashing = {method = "direct", lc_dan = 300, stf_dan = 100}\n[[vehicles]]'
    )
    (tmp_path / "job.toml").write_text(text.replace("load_height_mm = 2000", "load_height_mm = 2000\nanchor_dan = 250"), encoding="utf-8")
    path = write_list(
        [
            ["B1", None, 1, "HEA200", "S355", 4200],
            ["L1", None, 1, "HEA200", "S355", 9000],
            ["H1", None, 1, "Block 3000x2000x300", "S355", None],
        ]
    )
    shown = run("loads", path, "--units", "us", "--page", tmp_path / "p.html")
    assert shown.returncode == 3, shown.stderr
    assert run("schedule", path, "--units", "us", "--out", tmp_path / "o.xlsx").returncode == 3
    record = json.loads(run("loads", path, "--units", "us", "--json").stdout)
    assert all(" mm" in n["reason"] or " kg" in n["reason"] for n in record["not_loaded"])
    assert len(record["not_loaded"]) == 2
    cells = [str(c.value) for row in openpyxl.load_workbook(tmp_path / "o.xlsx")["Loads"].iter_rows() for c in row if c.value]
    page = (tmp_path / "p.html").read_text(encoding="utf-8").replace("&#39;", "'").replace("&#34;", '"')
    body = page[page.index("<body") :]
    for text in (" ".join(shown.stdout.split()), " ".join(cells), body):
        printed = text.replace("\u00a0", " ")
        assert "29'-6 5/16\" x 0'-7 7/8\" x 0'-7 1/2\" against 19'-8 1/4\"" in printed
        assert "against 22,046 lb on flat" in printed.replace("22 046", "22,046")
        assert "lbf" in printed
        assert not re.search(r"\d (mm|daN|kg|kN)\b", printed)


def test_round_pieces_and_arch_stones(run: Run, write_list: WriteList, tmp_path: Path) -> None:
    """A pipe is said to roll, once for all of its row; an arch stone has the size of its box, so the axles are not lost for it."""
    (tmp_path / "job.toml").write_text(JOB.replace("max_bundle_kg = 1500", "max_bundle_kg = 0"), encoding="utf-8")
    rows = [["P1", None, 3, "CHS 219.1x8", "S355", 3000], ["A1", None, 2, "Arch stone R3500 D450 A6 W600", "Granite", None]]
    record = json.loads(run("loads", write_list(rows), "--json").stdout)
    (load,) = record["vehicles"]
    assert [f["message"].split(":")[0] for f in load["findings"] if f["kind"] == "may-roll"] == ["P1 is round"]
    stones = [p for p in load["pieces"] if p["name"].startswith("A1")]
    # Width of the outer arc's chord 2 x 3,950 x sin 3°, height 3,950 - 3,500 x cos 3°, length the stone's width of 600.
    assert sorted((stones[0]["length_mm"], stones[0]["width_mm"])) == pytest.approx([413.45, 600.0], abs=0.01)
    assert stones[0]["height_mm"] == pytest.approx(454.80, abs=0.01)


def test_a_shift_that_holds_is_found_though_the_nearest_does_not() -> None:
    """Two stacks of 12 t on 13.6 m: from about 0.5 m behind the front every axle holds, by trying every 50 mm; so one vehicle does."""
    units = [unit(f"plate {k}", 600, (6000.0, 2000.0, 6.0)) for k in range(40)]
    (load,) = planned(units, job_of(ARTIC)).loads
    statics = load.vehicle.statics
    assert statics is not None

    def holds(shift: float) -> bool:
        worst = [
            s.empty_kg + sum(max(s.share_of(x + shift) * m for m in (11_400, 12_000)) for x in (3000.0, 9000.0)) for s in statics.supports
        ]
        return all(s.limit_kg is None or kg <= s.limit_kg for s, kg in zip(statics.supports, worst, strict=True))

    least = next(shift for shift in range(0, 1600, 50) if holds(shift))
    front = min(p.x for p in load.pieces if p.x is not None)
    assert least - 50 <= front <= least


def test_a_bag_of_bolts_does_not_lift_the_axle_limits() -> None:
    """Twelve stones of 2 t and bolts without a size: the stones still stand where the axles bear them, as without the bolts."""
    stones = [unit(f"S{k}", 2000, (600.0, 1200.0, 1200.0)) for k in range(12)]
    (alone,) = planned(stones, job_of(ARTIC)).loads
    (load,) = planned([*stones, unit("bolts", 2, None)], job_of(ARTIC)).loads
    statics = load.vehicle.statics
    assert statics is not None
    assert "counts in the middle of the deck" in "; ".join(f.message for f in load.findings if f.kind == "axles-loose")
    for told, support in zip(load.axles, statics.supports, strict=True):
        stones_kg = support.load_kg([(p.unit.mass.heavy, p.centre[0]) for p in load.pieces if p.centre] + [(load.dunnage_kg, 6800)])
        assert told.kg == pytest.approx(stones_kg + 2 * support.share_of(6800))
        assert told.worst_kg == pytest.approx(stones_kg + 2 * max(support.share_of(0), support.share_of(13_600)))
        assert told.limit_kg is None or told.worst_kg <= told.limit_kg
    placed = [(p.unit.mass.heavy, p.centre[0]) for p in load.pieces if p.centre is not None] + [(2.0, 6800.0)]
    loads = statics.loads_kg(placed)
    assert all(s.limit_kg is None or loads[s.name] <= s.limit_kg for s in statics.supports)
    assert min(p.x for p in load.pieces if p.x is not None) == pytest.approx(min(p.x or 0.0 for p in alone.pieces), abs=60)
