"""A filled vehicle becomes a load to hand over: loading order, axles at every stage, over-size, securing, and what to say."""

from __future__ import annotations

import math
from collections.abc import Sequence

from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.transport import envelope, securing
from takeoff.transport.arranging import Arranged, masses_of, numbered, stages, worst_kg
from takeoff.transport.axles import curve, extreme_share
from takeoff.transport.load import AxleLoad, Lashing, Load, Placed
from takeoff.transport.rules import Friction, rule
from takeoff.transport.vehicles import Vehicle

_MANY_LASHINGS = 12
_DIRECT_ANGLE, _DIRECT_ASIDE = 35.0, 30.0


def load_of(name: str, vehicle: Vehicle, arranged: Arranged, job: Job, friction: Friction) -> Load:
    """The load as it is handed over."""
    pieces = numbered(arranged.pieces)
    dunnage = job.transport.dunnage_kg
    findings = list(vehicle.findings)
    findings += [f for p in pieces for f in p.unit.findings]
    whole = all(p.x is not None for p in pieces)
    axles: list[AxleLoad] = []
    steps: list[dict[str, object]] = []
    payload = math.fsum(p.unit.mass.heavy for p in pieces) + dunnage
    if vehicle.statics is not None and whole:
        axles, steps = _axles(pieces, vehicle, dunnage, name, findings)
        findings += envelope.axle_findings(name, vehicle, axles, job.transport.envelope)
    elif vehicle.statics is not None:
        findings.append(Finding("note", "axles-unknown", f"{name}: its axle loads are unknown, since a unit on it has no place"))
    _say_places(name, vehicle, arranged, pieces, findings)
    return Load(
        name=name,
        vehicle=vehicle,
        pieces=tuple(pieces),
        dunnage_kg=dunnage,
        axles=tuple(axles),
        lashings=tuple(lashings_of(pieces, job, friction, findings)),
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
    statics = vehicle.statics
    assert statics is not None
    states = [(label, masses_of(aboard, vehicle, dunnage)) for label, aboard in stages(pieces)]
    full = states[0][1]
    heavy_all = statics.empty_kg + math.fsum(heavy for _, heavy, _ in full)
    found = []
    for s in statics.supports:
        heavy = s.load_kg([(m, x) for _, m, x in full])
        least = min((extreme_share(s, statics.empty_kg, masses) for _, masses in states), default=0.0) if s.least_share else None
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
                max(worst_kg(s, masses) for _, masses in states),
                least,
            )
        )
    steps: list[dict[str, object]] = [
        {"stage": label, "kg": {s.name: s.load_kg([(m, x) for _, m, x in masses]) for s in statics.supports}} for label, masses in states
    ]
    return found, steps


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
                f"{name}: its load lies {math.ceil(arranged.beside_mm)} mm beside the middle, more than {100 * allowed:g} % of the deck's "
                f"width ({source})",
                read=f"{math.ceil(arranged.beside_mm)} mm",
                right=f"at most {math.floor(allowed * vehicle.deck[1])} mm",
            )
        )
    for p in pieces:
        if p.x is not None:
            beyond = p.x + p.unit.on_deck(p.turned)[0] - vehicle.deck[0]
            if beyond > 1e-3:
                findings.append(
                    Finding(
                        "note", "rear-overhang", f"{name}: {p.unit.name} reaches {math.ceil(beyond)} mm beyond the deck's tail: mark it"
                    )
                )


def lashings_of(pieces: Sequence[Placed], job: Job, friction: Friction, findings: list[Finding]) -> list[Lashing]:
    """What holds each stack on the deck, by the rule the job file chooses. Pieces without a place are held one by one."""
    made: list[Lashing] = []
    base: list[int] = list(range(len(pieces)))
    # What one piece stands on together is one stack; pieces come after those that carry them.
    for k, p in enumerate(pieces):
        ties = {base[j] for j in p.on} | ({k} if not p.on else set())
        first = min(ties)
        base = [first if b in ties or j == k else b for j, b in enumerate(base)]
    for k in sorted(set(base)):
        stack = [p for p, b in zip(pieces, base, strict=True) if b == k]
        mass = math.fsum(p.unit.mass.heavy for p in stack)
        if job.transport.securing == "49 CFR 393":
            made += _by_half_weight(stack, mass, job, findings)
        else:
            made += _by_standard(stack, mass, job, friction, findings)
    return made


def tension_dan(job: Job) -> float:
    """The tension reckoned with, daN: as given, but at most half of LC. Raises JobError where a lashing is weaker than it."""
    lashing = job.transport.lashing
    if lashing.stf_dan > lashing.lc_dan:
        raise JobError(
            "transport.lashing: its tension stf_dan is above its strength lc_dan",
            file=job.path,
            read=f"{lashing.stf_dan:g} and {lashing.lc_dan:g}",
            right="a tension of at most half the strength",
        )
    return min(lashing.stf_dan, lashing.lc_dan * rule("tension of capacity", "EN 12195-1", "any").value)


def _spots(piece: Placed, number: int) -> tuple[float, ...]:
    if piece.x is None or piece.unit.size is None:
        return ()
    length = piece.unit.on_deck(piece.turned)[0]
    return tuple(piece.x + length * (k + 0.5) / number for k in range(number))


def _by_standard(stack: Sequence[Placed], mass: float, job: Job, friction: Friction, findings: list[Finding]) -> list[Lashing]:
    transport, name = job.transport, "EN 12195-1"
    below = stack[0]
    stf, lc = tension_dan(job) / 100.0, transport.lashing.lc_dan / 100.0
    c = {d: rule("coefficient", name, d).value for d in securing.DIRECTIONS}
    factor = {d: rule("safety factor", name, d).value for d in securing.DIRECTIONS}
    blocked = transport.blocked_forward
    directions = [(d, c[d], factor[d]) for d in securing.DIRECTIONS if not (d == "forward" and blocked)]
    tilting = _tilting(stack, mass, c) if below.unit.size is not None and below.x is not None else []
    if blocked:
        tilting = [t for t in tilting if t[0] != "forward"]
    held = securing.lashings_over(mass, friction.factor, stf, lc, transport.lashing.angle_deg, directions, tilting)
    rule_text = f"EN 12195-1:2010, 5.4.2; friction {friction.factor:g}: {friction.pair} ({friction.source})"
    made = [
        Lashing(
            below.unit.name,
            "top-over",
            held.direction,
            held.number,
            friction.factor,
            transport.lashing.angle_deg,
            _spots(below, held.number),
            rule_text,
        )
    ]
    if blocked:
        force = securing.blocking_kN(mass, c["forward"], friction.factor)
        if force > 0:
            made.append(
                Lashing(
                    below.unit.name,
                    "blocking",
                    "forward",
                    1,
                    friction.factor,
                    None,
                    (),
                    f"a block or headboard that holds {math.ceil(force * 10) / 10:g} kN (balance of 5.4.2)",
                )
            )
    if held.tilts:
        findings.append(
            Finding(
                "note",
                "tilting",
                f"{below.unit.name} and what stands on it can tilt by itself: "
                "the lashings are reckoned for one row; neighbours need their own look",
            )
        )
    if held.number > _MANY_LASHINGS:
        leg = securing.direct_kN(mass, c["forward"] if not blocked else c["sideways"], friction.factor, _DIRECT_ANGLE, _DIRECT_ASIDE)
        findings.append(
            Finding(
                "note",
                "many-lashings",
                f"{below.unit.name} would need {held.number} lashings over the top: raise the friction, block it, or lash it directly "
                f"(two diagonals a direction at {_DIRECT_ANGLE:g}° and {_DIRECT_ASIDE:g}° in plan: LC {math.ceil(leg * 100):g} daN each)",
            )
        )
    return made


def _tilting(stack: Sequence[Placed], mass: float, c: dict[str, float]) -> list[tuple[str, float, float, float, float, float]]:
    """For each direction: c to stand by itself, c with the tension, from the centre to the edge, its height, width of the row."""
    x, y, z = (math.fsum(p.unit.mass.heavy * p.centre[k] for p in stack if p.centre) / mass for k in range(3))
    spans = [(p.x, p.y, *p.unit.on_deck(p.turned)) for p in stack if p.x is not None and p.y is not None and not p.on]
    front, left = min(s[0] for s in spans), min(s[1] for s in spans)
    length, width = max(s[0] + s[2] for s in spans) - front, max(s[1] + s[3] for s in spans) - left
    up = z - stack[0].z
    alone = {d: rule("tilting coefficient", "EN 12195-1", d).value for d in securing.DIRECTIONS}
    held = rule("lashing coefficient", "EN 12195-1", "sideways").value
    return [
        ("forward", alone["forward"], c["forward"], x - front, up, length),
        ("rearward", alone["rearward"], c["rearward"], front + length - x, up, length),
        ("sideways", alone["sideways"], held, min(y - left, left + width - y), up, width),
    ]


def _by_half_weight(stack: Sequence[Placed], mass: float, job: Job, findings: list[Finding]) -> list[Lashing]:
    """49 CFR 393.106(d) and 393.110; lashings pass over to the other side, so their full working load limit counts."""
    below = stack[0]
    limit_kg = job.transport.lashing.lc_dan * 10 / 9.80665
    number = securing.tiedowns_by_strength(mass, limit_kg)
    if below.unit.size is not None:
        number = max(number, securing.tiedowns_by_length(below.unit.on_deck(below.turned)[0], mass, blocked=job.transport.blocked_forward))
    if number > _MANY_LASHINGS:
        findings.append(Finding("note", "many-lashings", f"{below.unit.name} would need {number} lashings over the top: use stronger ones"))
    return [
        Lashing(
            below.unit.name,
            "over the top",
            "all",
            number,
            None,
            None,
            _spots(below, number),
            "49 CFR 393.106(d), 393.110: half the weight, number by length",
        )
    ]
