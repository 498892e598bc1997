"""What is over-size, by planning thresholds: 96/53/EC, US federal rules, or the job's own. Always to be confirmed locally."""

from __future__ import annotations

import itertools
from collections.abc import Sequence

from takeoff.findings import Finding
from takeoff.job import LimitsPart
from takeoff.transport.bridge import group_lb
from takeoff.transport.load import AxleLoad, OverSize, Placed
from takeoff.transport.rules import Rule, has_rule, rule
from takeoff.transport.vehicles import Vehicle
from takeoff.transport.words import Said, down, up

_KG_PER_LB, _MM_PER_FT = 0.45359237, 304.8
_CONFIRM = "confirm locally"


def over_size(
    name: str, vehicle: Vehicle, pieces: Sequence[Placed], payload_kg: float, envelope: str, limits: LimitsPart
) -> list[OverSize]:
    """Pieces and vehicle beyond the thresholds; what is not known is not compared."""
    found: list[OverSize] = []
    width = _limit("width", limits.width_mm, envelope, "any")
    if width is not None:
        for p in pieces:
            if p.unit.size is not None and p.unit.on_deck(p.turned)[1] > width[0] + 1e-6:
                found.append(OverSize(p.unit.name, "width", p.unit.on_deck(p.turned)[1], *width))
        if vehicle.deck is not None and vehicle.deck[1] > width[0] + 1e-6:
            found.append(OverSize(name, "width", vehicle.deck[1], *width))
    height = _limit("height", limits.height_mm, envelope, "any")
    if height is not None and vehicle.deck_height_mm is not None:
        for p in pieces:
            if p.unit.size is not None and vehicle.deck_height_mm + p.z + p.unit.size[2] > height[0] + 1e-6:
                found.append(OverSize(p.unit.name, "height", vehicle.deck_height_mm + p.z + p.unit.size[2], *height))
    length = _limit("length", limits.length_mm, envelope, vehicle.kind)
    if length is not None:
        for p in pieces:
            if p.unit.size is not None and p.unit.on_deck(p.turned)[0] > length[0] + 1e-6:
                found.append(OverSize(p.unit.name, "length", p.unit.on_deck(p.turned)[0], *length))
        whole = overall_length_mm(vehicle, pieces)
        if whole is not None and whole > length[0] + 1e-6:
            known = vehicle.part.front_overhang_mm is not None
            how = "from the vehicle's front to the end of deck or load" if known else "the vehicle is at least so long"
            found.append(OverSize(name, "length", whole, length[0], f"{length[1]}; {how}"))
    gross = _gross(vehicle, envelope, limits)
    if gross is not None and vehicle.empty_kg is not None and vehicle.empty_kg + payload_kg > gross[0] * (1 + 1e-9):
        found.append(OverSize(name, "gross", vehicle.empty_kg + payload_kg, *gross))
    return found


def _limit(item: str, own: float | None, envelope: str, applies: str) -> tuple[float, str] | None:
    if own is not None:
        return own, f"[limits] of the job file; {_CONFIRM}"
    if envelope != "own" and has_rule(item, envelope, applies):
        return _said(rule(item, envelope, applies))
    return None


def _said(found: Rule) -> tuple[float, str]:
    return found.value, f"{found.source}; {_CONFIRM}"


def _gross(vehicle: Vehicle, envelope: str, limits: LimitsPart) -> tuple[float, str] | None:
    if limits.gross_kg is not None:
        return limits.gross_kg, f"[limits] of the job file; {_CONFIRM}"
    if envelope == "23 CFR 658":
        return _said(rule("gross", envelope, "any"))
    if envelope != "96/53/EC":
        return None
    number = len(vehicle.part.axles)
    # Where the number of axles is not given, the most that any number may have.
    if vehicle.kind == "rigid":
        return _said(rule("gross", envelope, f"rigid {min(max(number or 4, 2), 4)}"))
    return _said(rule("gross", envelope, "semitrailer 4" if number == 4 else "semitrailer 5"))


def overall_length_mm(vehicle: Vehicle, pieces: Sequence[Placed]) -> float | None:
    """From the vehicle's front to the end of deck or load, whichever reaches further; None where the figures are missing.

    Where the job file does not say how far the vehicle reaches ahead of its first axle, from that axle: it is then at least so long.
    """
    part = vehicle.part
    if vehicle.deck is None:
        return None
    ahead = part.front_overhang_mm or 0.0
    end = max([vehicle.deck[0], *(p.x + p.unit.on_deck(p.turned)[0] for p in pieces if p.x is not None and p.unit.size is not None)])
    if vehicle.kind == "rigid":
        return None if part.deck_front_mm is None else ahead + part.deck_front_mm + end
    if part.tractor is None or part.deck_ahead_of_kingpin_mm is None:
        return None
    return ahead + part.tractor.wheelbase_mm - part.tractor.fifth_wheel_ahead_mm - part.deck_ahead_of_kingpin_mm + end


def axle_findings(name: str, vehicle: Vehicle, axles: Sequence[AxleLoad], envelope: str) -> list[Finding]:
    """Axles and groups beyond the envelope's planning limits, where the job file tells where each axle is."""
    places = sorted(vehicle.part.axles, key=lambda a: a.at_mm)
    load = {a.name: a.worst_kg for a in axles}
    if not places or envelope == "own" or any(a.group not in load for a in places):
        return []
    if envelope == "23 CFR 658":
        return _bridge(name, vehicle, load)
    found = []
    for group in dict.fromkeys(a.group for a in places):
        at = [a.at_mm for a in places if a.group == group]
        limit = _group_limit(group, at)
        if limit is not None and load[group] > limit.value * (1 + 1e-9):
            found.append(
                Finding(
                    "note",
                    "envelope-axle",
                    Said(
                        f"{name}: {group} carries ",
                        up(load[group]),
                        ", over the planning limit of ",
                        down(limit.value),
                        f" ({limit.source}); {_CONFIRM}",
                    ),
                    read=Said(up(load[group])),
                    right=Said("at most ", down(limit.value)),
                )
            )
    return found


def _group_limit(group: str, at_mm: Sequence[float]) -> Rule | None:
    name = "96/53/EC"
    trailer = group == "trailer"
    if len(at_mm) == 1:
        return rule("axle", name, "driving" if group in {"rear", "drive"} else "single")
    gap = min(b - a for a, b in itertools.pairwise(at_mm))
    if len(at_mm) == 2:
        kind = "trailer tandem" if trailer else "motor tandem"
        for below in (1000, 1300, 1800):
            if gap < below:
                return rule(f"{kind} below {below}", name, "trailer" if trailer else "motor")
        return rule("trailer tandem from 1800", name, "trailer") if trailer else None
    if len(at_mm) == 3 and trailer and gap <= 1400:
        return rule("tri-axle up to 1300" if gap <= 1300 else "tri-axle up to 1400", name, "trailer")
    return None


def _bridge(name: str, vehicle: Vehicle, load: dict[str, float]) -> list[Finding]:
    """Every run of consecutive axles against formula and caps; axles of a group share alike."""
    places = sorted(vehicle.part.axles, key=lambda a: a.at_mm)
    number = {g: sum(1 for a in places if a.group == g) for g in load}
    each = [load[a.group] / number[a.group] / _KG_PER_LB for a in places]
    feet = [a.at_mm / _MM_PER_FT for a in places]
    found = []
    for i in range(len(places)):
        for j in range(i + 1, len(places) + 1):
            limit = group_lb(feet[i:j])
            carried = sum(each[i:j])
            if carried > limit * (1 + 1e-9):
                which = f"axle {i + 1}" if j == i + 1 else f"axles {i + 1} to {j}"
                found.append(
                    Finding(
                        "note",
                        "envelope-axle",
                        f"{name}: {which} carry {carried:.0f} lb, over {limit:.0f} lb (23 USC 127(a), the bridge formula "
                        f"with ties rounded down, and its caps); {_CONFIRM}",
                        read=f"{carried:.0f} lb",
                        right=f"at most {limit:.0f} lb",
                    )
                )
    return found
