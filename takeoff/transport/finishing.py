"""A filled vehicle becomes a load to hand over: loading order, axles at every stage, over-size, securing, and what to say."""

from __future__ import annotations

import math
from collections.abc import Sequence

from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.transport import envelope
from takeoff.transport.arranging import Arranged, masses_of, numbered, stages, worst_kg
from takeoff.transport.axles import curve, extreme_share
from takeoff.transport.holding import lashings_of
from takeoff.transport.load import AxleLoad, Load, Placed
from takeoff.transport.rules import Friction, rule
from takeoff.transport.vehicles import Vehicle
from takeoff.transport.words import Said, down, up


def load_of(name: str, vehicle: Vehicle, arranged: Arranged, job: Job, friction: Friction) -> Load:
    """The load as it is handed over."""
    pieces = numbered(arranged.pieces)
    dunnage = job.transport.dunnage_kg
    findings = list(vehicle.findings)
    findings += [f for p in pieces for f in p.unit.findings]
    placed = any(p.x is not None for p in pieces)
    axles: list[AxleLoad] = []
    steps: list[dict[str, object]] = []
    payload = math.fsum(p.unit.mass.heavy for p in pieces) + dunnage
    if vehicle.statics is not None and (placed or not pieces) and vehicle.deck is not None:
        axles, steps = _axles(pieces, vehicle, dunnage, name, findings)
        findings += envelope.axle_findings(name, vehicle, axles, job.transport.envelope)
    elif vehicle.statics is not None:
        findings.append(Finding("note", "axles-unknown", f"{name}: its axle loads are unknown, since no unit on it has a place"))
    _say_places(name, vehicle, arranged, pieces, findings)
    return Load(
        name=name,
        vehicle=vehicle,
        pieces=tuple(pieces),
        dunnage_kg=dunnage,
        axles=tuple(axles),
        lashings=tuple(lashings_of(pieces, vehicle, job, friction, findings)),
        over_size=tuple(envelope.over_size(name, vehicle, pieces, payload, job.transport.envelope, job.limits)),
        curve=tuple(curve(vehicle.statics, vehicle.payload_kg, vehicle.deck[0])) if vehicle.statics and vehicle.deck else (),
        stages=tuple(steps),
        findings=tuple(dict.fromkeys(findings)),
    )


def _axles(
    pieces: Sequence[Placed],
    vehicle: Vehicle,
    dunnage: float,
    name: str,
    findings: list[Finding],
) -> tuple[list[AxleLoad], list[dict[str, object]]]:
    """Axles full, at their worst and at every stage. A unit without a place counts in the middle of the deck, and at the worst
    at the end of the deck that is worse for the support in question, or no longer aboard.
    """
    statics = vehicle.statics
    assert statics is not None
    assert vehicle.deck is not None
    loose = [p.unit.mass for p in pieces if p.x is None]
    middle = [(mass.light, mass.heavy, vehicle.deck[0] / 2) for mass in loose]
    states = [(label, masses_of([p for p in aboard if p.x is not None], vehicle, dunnage)) for label, aboard in stages(pieces)]
    full = states[0][1] + middle
    ends = (0.0, vehicle.deck[0])
    heavy_all = statics.empty_kg + math.fsum(heavy for _, heavy, _ in full)
    found = []
    for s in statics.supports:
        heavy = s.load_kg([(m, x) for _, m, x in full])
        low, high = sorted(ends, key=s.share_of)
        at_low, at_high = ([(0.0, mass.heavy, end) for mass in loose] for end in (low, high))
        least = min(extreme_share(s, statics.empty_kg, masses + at_low) for _, masses in states) if s.least_share else None
        if least is not None and least < s.least_share * (1 - 1e-9):
            which = "steering" if s.name == "front" else "driving"
            source = rule(f"least {which} share", "", "rigid" if which == "steering" else "any").source
            findings.append(
                Finding(
                    "note",
                    "axle-share-low",
                    f"{name}: {s.name} may carry as little as {100 * least:.1f} % of the mass, under the {100 * s.least_share:g} % "
                    f"asked of the {which} axle ({source}); confirm locally",
                    read=f"{100 * least:.1f} %",
                    right=f"{100 * s.least_share:g} % or more",
                )
            )
        found.append(
            AxleLoad(
                s.name,
                heavy,
                s.load_kg([(m, x) for m, _, x in full]),
                s.limit_kg,
                heavy / heavy_all if heavy_all else 0.0,
                max(worst_kg(s, masses + at_high) for _, masses in states),
                least,
            )
        )
    steps: list[dict[str, object]] = [
        {"stage": label, "kg": {s.name: s.load_kg([(m, x) for _, m, x in masses + middle]) for s in statics.supports}}
        for label, masses in states
    ]
    if loose:
        _say_loose(name, [p.unit.name for p in pieces if p.x is None], found, findings)
    return found, steps


def _say_loose(name: str, units: Sequence[str], axles: Sequence[AxleLoad], findings: list[Finding]) -> None:
    """How units without a place were counted, and which axle would be over its limit with them at its end of the deck."""
    which, mass = (units[0], "its mass counts") if len(units) == 1 else (f"{len(units)} units", "their masses count")
    over = [a.name for a in axles if a.limit_kg is not None and a.worst_kg > a.limit_kg * (1 + 1e-9)]
    at_end = f"; at an end of the deck the limit of {' and '.join(over)} would be passed: keep it in the middle" if over else ""
    findings.append(
        Finding(
            "note",
            "axles-loose",
            f"{name}: {which} without a size: {mass} in the middle of the deck, in the worst axle loads at the worse end{at_end}",
            right="sizes for every unit",
        )
    )


def _say_places(name: str, vehicle: Vehicle, arranged: Arranged, pieces: Sequence[Placed], findings: list[Finding]) -> None:
    if arranged.out_of_order:
        findings.append(
            Finding(
                "note",
                "unloading-order",
                f"{name}: a later delivery stands behind or beside an earlier one: unload from above or from the side",
            )
        )
    if vehicle.deck is None:
        return
    allowed, source = rule("lateral eccentricity", "", "any")
    if arranged.beside_mm > allowed * vehicle.deck[1]:
        findings.append(
            Finding(
                "note",
                "lateral-balance",
                Said(
                    f"{name}: its load lies ",
                    up(arranged.beside_mm, "mm"),
                    f" beside the middle, more than {100 * allowed:g} % of the deck's width ({source})",
                ),
                read=Said(up(arranged.beside_mm, "mm")),
                right=Said("at most ", down(allowed * vehicle.deck[1], "mm")),
            )
        )
    for p in pieces:
        if p.x is not None:
            beyond = p.x + p.unit.on_deck(p.turned)[0] - vehicle.deck[0]
            if beyond > 1e-3:
                findings.append(
                    Finding(
                        "note",
                        "rear-overhang",
                        Said(f"{name}: {p.unit.name} reaches ", up(beyond, "mm"), " beyond the deck's tail: mark it"),
                    )
                )
