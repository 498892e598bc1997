"""A second look at a finished plan that shares nothing with the optimiser: it reads the records only, as a checker would.

Every plan is looked over before it leaves; what is found would be a fault of ours, not of the list.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from itertools import combinations
from typing import Any

_MM = 0.01
_SHARE = 1e-6


def faults(
    loads: Sequence[dict[str, Any]], not_loaded: Sequence[dict[str, Any]], wanted: Sequence[str], room: dict[str, dict[str, Any]]
) -> list[str]:
    """What is wrong with a plan, as sentences; none where it is right.

    `loads` and `not_loaded` are records as in the JSON, `wanted` the names of everything to be loaded. `room` gives for each
    vehicle name its length, width, height, overhang, dunnage (mm), payload_kg, line_kg_per_m (None: no limit) and axles:
    name -> (empty kg, share at the deck's front edge, share a mm, limit kg or None).
    """
    found: list[str] = []
    placed = Counter(p["name"] for load in loads for p in load["pieces"]) + Counter(n["name"] for n in not_loaded)
    expected = Counter(wanted)
    if placed != expected:
        found.append(f"not everything is accounted for once: {dict((placed - expected) + (expected - placed))}")
    for load in loads:
        found += [f"{load['name']}: {text}" for text in _load_faults(load, room[load["vehicle"]])]
    return found


def _load_faults(load: dict[str, Any], room: dict[str, Any]) -> list[str]:
    found = []
    pieces = load["pieces"]
    total = sum(p["kg"] for p in pieces) + load["dunnage_kg"]
    if abs(total - load["payload_kg"]) > _SHARE * max(1.0, total):
        found.append("the payload is not the sum of its pieces and the dunnage")
    if total > room["payload_kg"] * (1 + _SHARE) + _MM:
        found.append("the payload is over its limit")
    sized = [p for p in pieces if p["x_mm"] is not None]
    for p in sized:
        found += _place_faults(p, pieces, room)
    for one, two in combinations(sized, 2):
        if _meet(one, two):
            found.append(f"{one['name']} and {two['name']} overlap")
    if room["line_kg_per_m"] is not None and sized:
        found += _line_faults(pieces, room)
    if sized:
        found += _axle_faults(load, room)
    return found


def _place_faults(p: dict[str, Any], pieces: Sequence[dict[str, Any]], room: dict[str, Any]) -> list[str]:
    found = []
    end = p["x_mm"] + p["length_mm"]
    if p["x_mm"] < -_MM or p["y_mm"] < -_MM or p["y_mm"] + p["width_mm"] > room["width"] + _MM:
        found.append(f"{p['name']} is off the deck")
    if end > room["length"] + room["overhang"] + _MM:
        found.append(f"{p['name']} reaches too far beyond the tail")
    if p["bottom_mm"] + p["height_mm"] > room["height"] + _MM:
        found.append(f"{p['name']} is above the load height")
    if not p["on"]:
        if p["layer"] != 1 or abs(p["bottom_mm"] - room["dunnage"]) > _MM:
            found.append(f"{p['name']} stands on nothing")
        if p["x_mm"] + 0.8 * p["length_mm"] > room["length"] + _MM:
            found.append(f"the last bearer of {p['name']} is off the deck")
        return found
    carriers = [pieces[k] for k in p["on"]]
    if p["layer"] != 1 + max(c["layer"] for c in carriers):
        found.append(f"the layer of {p['name']} does not follow from what carries it")
    gaps = [p["bottom_mm"] - c["bottom_mm"] - c["height_mm"] - room["dunnage"] for c in carriers]
    if min(gaps) < -_MM or min(gaps) > _MM or max(gaps) > 1.0 + _MM:
        found.append(f"{p['name']} does not rest on what carries it")
    for c in carriers:
        if p["kg"] > c["kg"] * (1 + _SHARE):
            found.append(f"{p['name']} is heavier than {c['name']} below it")
    least, quarter = (1.0, 1.0) if len(carriers) == 1 else (0.6, 0.4)
    half = [
        (p["x_mm"] + i * p["length_mm"] / 2, p["y_mm"] + j * p["width_mm"] / 2, p["length_mm"] / 2, p["width_mm"] / 2)
        for i in (0, 1)
        for j in (0, 1)
    ]
    under = [sum(_shared(box, c) for c in carriers) / (box[2] * box[3]) for box in half]
    if sum(under) / 4 < least - 0.001 or min(under) < quarter - 0.001:
        found.append(f"{p['name']} juts out over what carries it")
    return found


def _shared(box: tuple[float, float, float, float], c: dict[str, Any]) -> float:
    """The area of a box (x, y, length, width) that lies over a carrier."""
    along: float = min(box[0] + box[2], c["x_mm"] + c["length_mm"]) - max(box[0], c["x_mm"])
    across: float = min(box[1] + box[3], c["y_mm"] + c["width_mm"]) - max(box[1], c["y_mm"])
    return max(0.0, along) * max(0.0, across)


def _meet(one: dict[str, Any], two: dict[str, Any]) -> bool:
    """Whether two boxes share room."""
    return all(
        one[at] + one[size] > two[at] + _MM and two[at] + two[size] > one[at] + _MM
        for at, size in (("x_mm", "length_mm"), ("y_mm", "width_mm"), ("bottom_mm", "height_mm"))
    )


def _line_faults(pieces: Sequence[dict[str, Any]], room: dict[str, Any]) -> list[str]:
    borne = [0.0] * len(pieces)
    for k in range(len(pieces) - 1, -1, -1):  # in loading order: what is carried comes after what carries it
        p = pieces[k]
        borne[k] += p["kg"]
        if p["on"]:
            areas = [_shared((p["x_mm"], p["y_mm"], p["length_mm"], p["width_mm"]), pieces[j]) for j in p["on"]]
            for j, area in zip(p["on"], areas, strict=True):
                borne[j] += borne[k] * area / sum(areas)
    stacks = [(p["x_mm"], p["length_mm"], kg) for p, kg in zip(pieces, borne, strict=True) if not p["on"] and p["x_mm"] is not None]
    for x, _, _ in stacks:
        here = sum(kg / length * 1000 for at, length, kg in stacks if at <= x + _MM and x + 2 * _MM < at + length)
        if here > room["line_kg_per_m"] * (1 + _SHARE):
            return [f"the deck bears {here:.0f} kg a metre at {x:.0f} mm"]
    return []


def _axle_faults(load: dict[str, Any], room: dict[str, Any]) -> list[str]:
    """Axles full and after each delivery, from the record's own places; what has none counts in the middle, and stays aboard."""
    found = []
    bare = sum(p["kg"] for p in load["pieces"] if p["centre_mm"] is None)
    phases = []
    for p in load["pieces"]:
        if p["phase"] not in phases:
            phases.append(p["phase"])  # loading order: the last delivery comes first
    for k in range(len(phases)):
        aboard = [p for p in load["pieces"] if p["phase"] in phases[: len(phases) - k]]
        for name, (empty, at_front, per_mm, limit) in room["axles"].items():
            kg = empty + (load["dunnage_kg"] + bare) * (at_front + per_mm * room["length"] / 2)
            kg += sum(p["kg"] * (at_front + per_mm * p["centre_mm"][0]) for p in aboard if p["centre_mm"] is not None)
            if limit is not None and kg > limit * (1 + _SHARE):
                found.append(f"{name} carries {kg:.0f} kg, over its limit" + (f", after {k} deliveries" if k else ""))
            if kg < -_MM:
                found.append(f"{name} lifts off" + (f" after {k} deliveries" if k else ""))
            told = next((a["kg"] for a in load["axles"] if a["name"] == name), None)
            if k == 0 and told is not None and abs(told - kg) > 0.01 + _SHARE * abs(kg):
                found.append(f"{name} is told as {told:.1f} kg and comes to {kg:.1f} kg")
    return found
