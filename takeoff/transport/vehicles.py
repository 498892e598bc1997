"""The vehicles of the job file, with what each may carry, and what is not known of it.

A figure that is absent leaves unknown what rests on it, and says so; figures that contradict each other are refused.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from pathlib import Path

from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.job import Job, VehiclePart
from takeoff.names import first_twice
from takeoff.transport.axles import Statics, Support, Tractor, most_payload_kg, rigid, semitrailer
from takeoff.transport.rules import rule
from takeoff.transport.words import Said, down

_RIGID = ("wheelbase_mm", "deck_front_mm", "front_empty_kg", "rear_empty_kg")
_SEMITRAILER = ("kingpin_to_axles_mm", "deck_ahead_of_kingpin_mm", "kingpin_empty_kg", "axles_empty_kg")
_LIMITS = {
    "front": "front_limit_kg",
    "rear": "rear_limit_kg",
    "kingpin": "kingpin_limit_kg",
    "trailer": "axles_limit_kg",
    "steer": "tractor.front_limit_kg",
    "drive": "tractor.drive_limit_kg",
}


@dataclass(frozen=True, slots=True)
class Vehicle:
    """One kind of vehicle. `deck` is (length, width, load height) in mm, None where it is not given; `most_kg` is the payload
    that limits and axles leave at the best place of its centre, and never above `payload_kg`.
    """

    name: str
    kind: str
    count: int | None
    payload_kg: float
    most_kg: float
    empty_kg: float | None
    gross_limit_kg: float | None
    deck: tuple[float, float, float] | None
    layers: bool
    deck_height_mm: float | None
    rear_overhang_mm: float
    line_load_kg_per_m: float | None
    statics: Statics | None
    part: VehiclePart
    findings: tuple[Finding, ...]

    def with_loose(self, mass_kg: float) -> Vehicle:
        """The same with its axles' limits drawn in, so that they hold wherever on the deck a mass lies that counts in its middle."""
        if self.statics is None or self.deck is None:
            return self
        length = self.deck[0]
        supports = []
        for s in self.statics.supports:
            middle, ends = s.share_of(length / 2), (s.share_of(0.0), s.share_of(length))
            less, more = mass_kg * (middle - min(ends)), mass_kg * (max(ends) - middle)
            supports.append(replace(s, empty_kg=s.empty_kg - less, limit_kg=None if s.limit_kg is None else s.limit_kg - less - more))
        return replace(self, statics=replace(self.statics, supports=tuple(supports)))


def vehicles_of(job: Job) -> list[Vehicle]:
    """The job's vehicles in its order. Raises JobError on an empty fleet, a name twice, or figures that contradict each other."""
    if not any(part.count != 0 for part in job.vehicles):
        raise JobError(
            "the job file names no vehicle to load", file=job.path, right="[[vehicles]] with a name and payload_kg, and their count"
        )
    twice = first_twice([part.name for part in job.vehicles])
    if twice is not None:
        raise JobError(
            f"vehicles.{twice}.name: two vehicles have one name", file=job.path, read=job.vehicles[twice].name,
            right="each kind once, with its count",
        )
    return [_vehicle(part, number, job) for number, part in enumerate(job.vehicles) if part.count != 0]


def _vehicle(part: VehiclePart, number: int, job: Job) -> Vehicle:
    findings: list[Finding] = []
    statics = _statics(part, number, job, findings)
    empty = statics.empty_kg if statics else _empty(part)
    payload = part.payload_kg
    if payload is not None and payload <= 0:
        raise JobError(f"vehicles.{number}.payload_kg is 0: the vehicle carries nothing", file=job.path, right="its payload in kg")
    if part.gross_limit_kg is not None and empty is not None:
        room = part.gross_limit_kg - empty
        if room <= 0:
            _contradict(job.path, number, "gross_limit_kg", part.gross_limit_kg, f"the empty vehicle has {empty:g} kg")
        if payload is not None and payload > room * (1 + 1e-9):
            findings.append(
                Finding(
                    "note",
                    "vehicle-limits",
                    Said(f"{part.name}: its payload of ", down(payload), " would exceed its gross limit: ", down(room), " are used"),
                    read=f"{payload:g}",
                    right=Said("at most ", down(room)),
                )
            )
        payload = room if payload is None else min(payload, room)
    elif part.gross_limit_kg is not None:
        findings.append(Finding("note", "vehicle-limits", f"{part.name}: its empty mass is not known, so its gross limit is not looked at"))
    if payload is None:
        raise JobError(
            f"vehicles.{number}: what {part.name} may carry is not given",
            file=job.path,
            right="payload_kg, or gross_limit_kg and the empty axle loads",
        )
    deck = _deck(part, job, findings)
    length = deck[0] + part.rear_overhang_mm if deck else 0.0
    most = most_payload_kg(statics, payload, length) if statics and deck else payload
    return Vehicle(
        name=part.name,
        kind=part.kind,
        count=part.count,
        payload_kg=payload,
        most_kg=min(payload, most),
        empty_kg=empty,
        gross_limit_kg=part.gross_limit_kg,
        deck=deck,
        layers=part.load_height_mm is not None or part.deck_height_mm is not None,
        deck_height_mm=part.deck_height_mm,
        rear_overhang_mm=part.rear_overhang_mm,
        line_load_kg_per_m=part.deck_line_load_kg_per_m,
        statics=statics if deck else None,
        part=part,
        findings=tuple(findings),
    )


def _empty(part: VehiclePart) -> float | None:
    if part.kind == "rigid":
        known: tuple[float | None, ...] = (part.front_empty_kg, part.rear_empty_kg)
    else:
        tractor = part.tractor
        known = (part.kingpin_empty_kg, part.axles_empty_kg) + ((tractor.front_empty_kg, tractor.drive_empty_kg) if tractor else ())
    return None if None in known else sum(k for k in known if k is not None)


def _deck(part: VehiclePart, job: Job, findings: list[Finding]) -> tuple[float, float, float] | None:
    if part.deck_length_mm is None or part.deck_width_mm is None:
        findings.append(
            Finding(
                "note",
                "deck-unknown",
                f"{part.name} is loaded by mass only: no place on its deck, no axle load",
                right="deck_length_mm and deck_width_mm",
            )
        )
        return None
    height = part.load_height_mm
    if height is None:
        limit, source = rule("height", "96/53/EC", "any")
        if part.deck_height_mm is not None and part.deck_height_mm < limit:
            height = limit - part.deck_height_mm
            findings.append(
                Finding(
                    "note",
                    "vehicle-limits",
                    Said(
                        f"{part.name}: load height taken as ",
                        down(height, "mm"),
                        ", to ",
                        down(limit, "mm"),
                        f" above the road ({source})",
                    ),
                )
            )
        else:
            height = 1e6
            findings.append(
                Finding(
                    "note",
                    "vehicle-limits",
                    f"{part.name}: no load height is given: one layer, and heights are not looked at",
                    right="load_height_mm",
                )
            )
    if part.deck_ahead_of_kingpin_mm is not None and part.kind == "semitrailer" and part.deck_ahead_of_kingpin_mm > part.deck_length_mm:
        raise JobError(
            f"vehicle {part.name}: its deck ends ahead of the kingpin",
            file=job.path,
            read=f"{part.deck_ahead_of_kingpin_mm:g}",
            right="deck_ahead_of_kingpin_mm below deck_length_mm",
        )
    beyond = [at for at in part.anchors_mm if at > part.deck_length_mm]
    if beyond:
        raise JobError(
            f"vehicle {part.name}: an anchor lies beyond its deck",
            file=job.path,
            read=f"{beyond[0]:g}",
            right=f"anchors_mm up to the deck's length of {part.deck_length_mm:g}",
        )
    return part.deck_length_mm, part.deck_width_mm, height


def _statics(part: VehiclePart, number: int, job: Job, findings: list[Finding]) -> Statics | None:
    names = _RIGID if part.kind == "rigid" else _SEMITRAILER
    missing = [name for name in names if getattr(part, name) is None]
    if missing:
        findings.append(Finding("note", "axles-unknown", f"{part.name}: its axle loads are not known", right="also " + ", ".join(missing)))
        return None
    figures = {name: float(getattr(part, name)) for name in names}
    if part.kind == "rigid":
        made = rigid(
            figures["wheelbase_mm"],
            figures["deck_front_mm"],
            figures["front_empty_kg"],
            figures["rear_empty_kg"],
            part.front_limit_kg,
            part.rear_limit_kg,
            least_front=rule("least steering share", "", "rigid")[0],
            least_rear=rule("least driving share", "", "any")[0],
        )
    else:
        t = part.tractor
        if t is None:
            findings.append(
                Finding(
                    "note",
                    "axles-unknown",
                    f"{part.name}: no tractor is given: only kingpin and trailer axles are known",
                    right="tractor = {...}",
                )
            )
        elif t.fifth_wheel_ahead_mm > t.wheelbase_mm:
            _contradict(job.path, number, "tractor.fifth_wheel_ahead_mm", t.fifth_wheel_ahead_mm, f"the wheelbase is {t.wheelbase_mm:g} mm")
        tractor = (
            None
            if t is None
            else Tractor(
                t.wheelbase_mm,
                t.fifth_wheel_ahead_mm,
                t.front_empty_kg,
                t.drive_empty_kg,
                t.front_limit_kg,
                t.drive_limit_kg,
            )
        )
        made = semitrailer(
            figures["kingpin_to_axles_mm"],
            figures["deck_ahead_of_kingpin_mm"],
            figures["kingpin_empty_kg"],
            figures["axles_empty_kg"],
            part.kingpin_limit_kg,
            part.axles_limit_kg,
            tractor,
            least_drive=rule("least driving share", "", "any")[0],
        )
    supports = tuple(_with_axles(s, part) for s in made.supports)
    for s in supports:
        if s.limit_kg is not None and s.limit_kg < s.empty_kg:
            _contradict(job.path, number, _LIMITS[s.name], s.limit_kg, f"it carries {s.empty_kg:g} kg empty")
    unlimited = [s.name for s in supports if s.limit_kg is None]
    if unlimited:
        findings.append(
            Finding("note", "axles-unknown", f"{part.name}: no limit is given for {', '.join(unlimited)}: its load is not checked")
        )
    return Statics(supports, made.empty_kg, made.on_ground)


def _with_axles(s: Support, part: VehiclePart) -> Support:
    """The group's limit also from its single axles: they share alike, so the weakest times their number governs."""
    single = [a.limit_kg for a in part.axles if a.group == s.name and a.limit_kg is not None]
    among = sum(1 for a in part.axles if a.group == s.name)
    if not single:
        return s
    limit = min(single) * among
    return Support(s.name, s.empty_kg, s.at_front, s.per_mm, limit if s.limit_kg is None else min(limit, s.limit_kg), s.least_share)


def _contradict(path: Path | None, number: int, key: str, value: float, why: str) -> None:
    raise JobError(f"vehicles.{number}.{key} contradicts the other figures: {why}", file=path, read=f"{value:g}")
