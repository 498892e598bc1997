"""Axle loads by statics, and the payload that the axles permit at each position of its centre. mm and kg.

    rigid        R = R0 + sum(m x)/WB,   F = F0 + sum(m) - sum(m x)/WB        x from the front axle
    semitrailer  T = T0 + sum(m x)/L,    K = K0 + sum(m) - sum(m x)/L         x from the kingpin
    tractor      F = F0 + K e/W,         D = D0 + K (W - e)/W                 fifth wheel e ahead of the drive axle

A group of axles stands as one support at its middle, each axle with an equal share. Every load is a straight line in the
position of the mass, so a `Support` is two numbers. Source: plain statics; minimum shares stand in
`materials/transport_rules.csv`.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Support:
    """One axle, group or the kingpin: what it carries empty, and of a mass at x (mm behind the deck's front edge) the share
    `at_front + per_mm * x`. `limit_kg` is None where none is given; `least_share` of the whole mass, 0 for none.
    """

    name: str
    empty_kg: float
    at_front: float
    per_mm: float
    limit_kg: float | None = None
    least_share: float = 0.0

    def share_of(self, x_mm: float) -> float:
        return self.at_front + self.per_mm * x_mm

    def load_kg(self, masses: Iterable[tuple[float, float]]) -> float:
        """With (mass kg, x mm) pairs on the deck."""
        return self.empty_kg + math.fsum(m * self.share_of(x) for m, x in masses)


@dataclass(frozen=True, slots=True)
class Statics:
    """The supports of one vehicle, and its empty mass. The supports whose names are in `on_ground` carry all of it."""

    supports: tuple[Support, ...]
    empty_kg: float
    on_ground: tuple[str, ...]

    def loads_kg(self, masses: Sequence[tuple[float, float]]) -> dict[str, float]:
        return {s.name: s.load_kg(masses) for s in self.supports}


def rigid(
    wheelbase_mm: float,
    deck_front_mm: float,
    front_empty_kg: float,
    rear_empty_kg: float,
    front_limit_kg: float | None = None,
    rear_limit_kg: float | None = None,
    least_front: float = 0.0,
    least_rear: float = 0.0,
) -> Statics:
    """A rigid vehicle; `deck_front_mm` is the deck's front edge behind the front axle, negative ahead of it."""
    front = Support("front", front_empty_kg, 1 - deck_front_mm / wheelbase_mm, -1 / wheelbase_mm, front_limit_kg, least_front)
    rear = Support("rear", rear_empty_kg, deck_front_mm / wheelbase_mm, 1 / wheelbase_mm, rear_limit_kg, least_rear)
    return Statics((front, rear), front_empty_kg + rear_empty_kg, ("front", "rear"))


@dataclass(frozen=True, slots=True)
class Tractor:
    """A tractor alone: wheelbase and fifth wheel in mm, its own axle loads and their limits in kg."""

    wheelbase_mm: float
    fifth_wheel_ahead_mm: float
    front_empty_kg: float
    drive_empty_kg: float
    front_limit_kg: float | None = None
    drive_limit_kg: float | None = None


def semitrailer(
    kingpin_to_axles_mm: float,
    deck_ahead_of_kingpin_mm: float,
    kingpin_empty_kg: float,
    axles_empty_kg: float,
    kingpin_limit_kg: float | None = None,
    axles_limit_kg: float | None = None,
    tractor: Tractor | None = None,
    least_drive: float = 0.0,
) -> Statics:
    """A semitrailer, with its tractor where there is one; else the kingpin stands as a support of its own."""
    ahead, length = deck_ahead_of_kingpin_mm, kingpin_to_axles_mm
    kingpin = Support("kingpin", kingpin_empty_kg, 1 + ahead / length, -1 / length, kingpin_limit_kg)
    trailer = Support("trailer", axles_empty_kg, -ahead / length, 1 / length, axles_limit_kg)
    if tractor is None:
        return Statics((kingpin, trailer), kingpin_empty_kg + axles_empty_kg, ("kingpin", "trailer"))
    to_steer = tractor.fifth_wheel_ahead_mm / tractor.wheelbase_mm
    steer, drive = (
        Support(name, own + part * kingpin.empty_kg, part * kingpin.at_front, part * kingpin.per_mm, limit, least)
        for name, own, part, limit, least in (
            ("steer", tractor.front_empty_kg, to_steer, tractor.front_limit_kg, 0.0),
            ("drive", tractor.drive_empty_kg, 1 - to_steer, tractor.drive_limit_kg, least_drive),
        )
    )
    empty = tractor.front_empty_kg + tractor.drive_empty_kg + kingpin_empty_kg + axles_empty_kg
    return Statics((kingpin, trailer, steer, drive), empty, ("steer", "drive", "trailer"))


def permissible_kg(statics: Statics, payload_kg: float, x_mm: float) -> tuple[float, str]:
    """The largest payload whose centre lies `x_mm` behind the deck's front edge, and what governs it.

    The smallest of the payload limit, each axle's limit, no lift-off, and each least share of the momentary mass. 0 where the
    empty vehicle fails already.
    """
    best, why = payload_kg, "payload"
    for s in statics.supports:
        share = s.share_of(x_mm)
        if s.limit_kg is not None and share > 0:
            best, why = min((best, why), (max(0.0, (s.limit_kg - s.empty_kg) / share), s.name), key=lambda t: t[0])
        if share < 0:
            best, why = min((best, why), (s.empty_kg / -share, f"{s.name} lifts off"), key=lambda t: t[0])
        if s.least_share > share:
            spare = s.empty_kg - s.least_share * statics.empty_kg
            best, why = min((best, why), (max(0.0, spare / (s.least_share - share)), f"least share of {s.name}"), key=lambda t: t[0])
    return best, why


def curve(statics: Statics, payload_kg: float, deck_length_mm: float, steps: int = 28) -> list[tuple[float, float, str]]:
    """The payload diagram: (centre behind the deck's front edge in mm, permissible kg, what governs) from end to end."""
    points = [deck_length_mm * k / steps for k in range(steps + 1)]
    return [(x, *permissible_kg(statics, payload_kg, x)) for x in points]


def most_payload_kg(statics: Statics, payload_kg: float, deck_length_mm: float) -> float:
    """The largest payload at the best position of its centre, limits and lift-off only (least shares bar nothing).

    Each limit is a line in the moment, so the largest payload stands where two of them meet, or at an end of the deck.
    """
    plain = Statics(
        tuple(Support(s.name, s.empty_kg, s.at_front, s.per_mm, s.limit_kg) for s in statics.supports), statics.empty_kg, statics.on_ground
    )
    # P*at_front + per_mm*M <= room, with M = P*x: rows of a small linear programme in P and M.
    rows = [(s.at_front, s.per_mm, s.limit_kg - s.empty_kg) for s in plain.supports if s.limit_kg is not None]
    rows += [(-s.at_front, -s.per_mm, s.empty_kg) for s in plain.supports]
    rows += [(1.0, 0.0, payload_kg), (0.0, -1.0, 0.0), (-deck_length_mm, 1.0, 0.0), (-1.0, 0.0, 0.0)]
    best = 0.0
    for i, (a, b, c) in enumerate(rows):
        for d, e, f in rows[i + 1 :]:
            det = a * e - b * d
            if abs(det) < 1e-12:
                continue
            p, m = (c * e - b * f) / det, (a * f - c * d) / det
            if p > best and all(u * p + v * m <= w + 1e-6 * (1 + abs(w)) for u, v, w in rows):
                best = p
    return best


def extreme_share(support: Support, empty_kg: float, masses: Sequence[tuple[float, float, float]]) -> float:
    """The least share of the momentary mass on a support while every mass moves within (light, heavy, x): exact.

    A mass whose own share lies below the final one pulls it down when heavy, the others when light; sorted by share, each
    cut between the two is tried.
    """
    order = sorted(masses, key=lambda m: support.share_of(m[2]))
    load, whole = support.empty_kg, empty_kg
    for light, _, x in order:
        load += light * support.share_of(x)
        whole += light
    best = load / whole if whole > 0 else math.inf
    for light, heavy, x in order:
        load += (heavy - light) * support.share_of(x)
        whole += heavy - light
        if whole > 0:
            best = min(best, load / whole)
    return best


def extreme_load_kg(support: Support, masses: Sequence[tuple[float, float, float]], *, most: bool) -> float:
    """The most or least on a support while every mass moves within (light, heavy, x)."""
    total = support.empty_kg
    for light, heavy, x in masses:
        share = support.share_of(x)
        total += share * (heavy if (share > 0) == most else light)
    return total
