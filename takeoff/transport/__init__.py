"""From picks, bundles and loose pieces to vehicles: placing, axles, envelope, securing. Rank 7.

`load_up` is the whole of it: units from a weighed frame, vehicles from the job file, a plan, and each load made ready to hand
over. Every plan is looked over by a checker that shares nothing with the optimiser before it leaves.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from takeoff.errors import AccountError
from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lifting.gravity import Place
from takeoff.transport import planning
from takeoff.transport.checking import faults
from takeoff.transport.finishing import load_of
from takeoff.transport.holding import tension_dan
from takeoff.transport.load import Load, LoadUnit, NotLoaded, Plan
from takeoff.transport.rules import friction_of, rule
from takeoff.transport.units import units_of
from takeoff.transport.vehicles import Vehicle, vehicles_of
from takeoff.transport.words import Said, down, up

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.sections import Section

CAUTIONS = (
    "An estimate for planning, not a loading order: weigh before loading, and weigh the loaded vehicle's axles where doubt remains.",
    "Limits and over-size thresholds are planning defaults, to be confirmed locally; local law and the carrier decide.",
    "Whoever loads and the driver answer for securing: the numbers of lashings hold for the friction, angle and tension named only. "
    "Whether a piece bears what stands on it is not looked at.",
)


def load_up(members: pd.DataFrame, sections: Sequence[Section], job: Job, places: dict[int, Place | str] | None = None) -> Plan:
    """The plan of a weighed list; `places` are those of `takeoff.lifting.gravity.places_of`, where known already.

    Raises JobError on vehicles, lashings or friction that cannot be, AccountError on a fault of ours.
    """
    vehicles = vehicles_of(job)
    units, lost = units_of(members, sections, job, places)
    return plan_units(units, lost, vehicles, job)


def plan_units(units: Sequence[LoadUnit], lost: Sequence[NotLoaded], vehicles: Sequence[Vehicle], job: Job) -> Plan:
    """The plan of these units on these vehicles."""
    friction = friction_of(job.transport.friction)
    transport = job.transport
    findings: list[Finding] = []
    if tension_dan(job) < transport.lashing.stf_dan:
        findings.append(
            Finding(
                "note",
                "lashing-tension",
                Said(
                    "the lashings' tension of ",
                    up(transport.lashing.stf_dan, "daN"),
                    " is more than half of their strength: ",
                    down(tension_dan(job), "daN"),
                    " are reckoned with",
                ),
                read=f"{transport.lashing.stf_dan:g}",
                right=Said("at most ", down(transport.lashing.lc_dan / 2, "daN")),
            )
        )
    if transport.lashing.angle_deg < rule("useful angle", "EN 12195-1", "any").value:
        findings.append(
            Finding(
                "note",
                "flat-lashing",
                f"at {transport.lashing.angle_deg:g}° a lashing over the top presses little: use direct lashings",
                right="35° or more",
            )
        )
    if not transport.dunnage_kg:
        findings.append(
            Finding("note", "dunnage-not-counted", "no mass of dunnage and lashing gear is in the payload", right="[transport] dunnage_kg")
        )
    outcome = planning.plan(
        units,
        vehicles,
        dunnage_mm=transport.dunnage_mm,
        dunnage_kg=transport.dunnage_kg,
        apart=transport.separate == "phase",
        seconds=transport.time_limit_s,
    )
    loads = tuple(
        load_of(name, filled.vehicle, filled.arranged, job, friction)
        for name, filled in planning.names_in_order(outcome.filled)
        if filled.arranged is not None
    )
    not_loaded = (*outcome.left, *lost)
    proven = len(loads) <= outcome.bound
    if outcome.stopped_by_clock:
        findings.append(
            Finding(
                "note",
                "stopped-early",
                f"the search was stopped after {transport.time_limit_s:g} s: the best plan found so far is given",
                right="a longer [transport] time_limit_s",
            )
        )
    if not proven:
        findings.append(Finding("note", "not-proven", f"{len(loads)} vehicles were found; whether {outcome.bound} would do is not known"))
    _look_over(loads, not_loaded, units, lost, vehicles, job)
    return Plan(loads, not_loaded, outcome.bound, proven, tuple(findings))


def _look_over(
    loads: Sequence[Load],
    not_loaded: Sequence[NotLoaded],
    units: Sequence[LoadUnit],
    lost: Sequence[NotLoaded],
    vehicles: Sequence[Vehicle],
    job: Job,
) -> None:
    room = {v.name: room_record(v, job) for v in vehicles}
    found = faults(
        [load.as_record() for load in loads], [n.as_record() for n in not_loaded], [u.name for u in units] + [n.name for n in lost], room
    )
    if found:
        raise AccountError("the loading plan does not hold: " + "; ".join(found[:3]))


def room_record(vehicle: Vehicle, job: Job) -> dict[str, object]:
    """A vehicle as the checker takes it."""
    length, width, height = vehicle.deck or (0.0, 0.0, 0.0)
    return {
        "length": length,
        "width": width,
        "height": height,
        "overhang": vehicle.rear_overhang_mm,
        "dunnage": job.transport.dunnage_mm,
        "payload_kg": vehicle.payload_kg,
        "line_kg_per_m": vehicle.line_load_kg_per_m,
        "axles": {s.name: (s.empty_kg, s.at_front, s.per_mm, s.limit_kg) for s in vehicle.statics.supports} if vehicle.statics else {},
    }


__all__ = ["CAUTIONS", "Plan", "load_up", "plan_units"]
