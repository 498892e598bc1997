"""What is loaded and how it ends up: units, places on a deck, loads, and the plan, as records every output shares."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from typing import Any, Literal

from takeoff.bounds import Bounds
from takeoff.findings import Finding
from takeoff.transport.vehicles import Vehicle


@dataclass(frozen=True, slots=True)
class LoadUnit:
    """What is loaded as one: a pick, a bundle or a single piece.

    `size` is (length, width, height) in mm as it lies, None where it is not known; `centre` the centre of gravity from the low
    corner, None for the middle. `drop` counts deliveries, 0 the first to be unloaded. Nothing is put on a unit that does not
    `carry`. A block of like pieces has `parts`, so many across and up as `grid` says; it stands for them while a plan is made.
    """

    name: str
    kind: Literal["pick", "bundle", "piece"]
    mass: Bounds
    size: tuple[float, float, float] | None
    centre: tuple[float, float, float] | None = None
    phase: str | None = None
    drop: int = 0
    carries: bool = True
    not_weighed: int = 0
    findings: tuple[Finding, ...] = ()
    parts: tuple[LoadUnit, ...] = ()
    grid: tuple[int, int] = (1, 1)

    @property
    def each_kg(self) -> float:
        """Heavy mass of what rests on what is below: the unit's own, or that of one piece of a block."""
        return self.parts[0].mass.heavy if self.parts else self.mass.heavy

    def on_deck(self, turned: bool) -> tuple[float, float, float]:
        """Length along the deck, width across it, height."""
        assert self.size is not None
        length, width, height = self.size
        return (width, length, height) if turned else (length, width, height)

    def centre_on_deck(self, turned: bool) -> tuple[float, float, float]:
        assert self.size is not None
        if self.centre is None:
            length, width, height = self.on_deck(turned)
            return length / 2, width / 2, height / 2
        x, y, z = self.centre
        return (y, x, z) if turned else (x, y, z)


@dataclass(frozen=True, slots=True)
class Placed:
    """A unit on a deck: the corner nearest the deck's front left and the height of its underside above the deck, mm; its layer
    from 1; whether it is turned by 90°; which placed units carry it (their numbers in the load; none: the deck does).
    x and y are None where a unit is loaded by mass only.
    """

    unit: LoadUnit
    x: float | None
    y: float | None
    z: float
    layer: int
    turned: bool
    on: tuple[int, ...] = ()

    @property
    def centre(self) -> tuple[float, float, float] | None:
        if self.x is None or self.y is None:
            return None
        x, y, z = self.unit.centre_on_deck(self.turned)
        return self.x + x, self.y + y, self.z + z

    def moved(self, dx: float, dy: float) -> Placed:
        return self if self.x is None or self.y is None else replace(self, x=self.x + dx, y=self.y + dy)

    def as_record(self) -> dict[str, Any]:
        length, width, height = self.unit.on_deck(self.turned) if self.unit.size else (None, None, None)
        return {
            "name": self.unit.name,
            "kg": self.unit.mass.heavy,
            "x_mm": self.x,
            "y_mm": self.y,
            "layer": self.layer,
            "length_mm": length,
            "width_mm": width,
            "height_mm": height,
            "kind": self.unit.kind,
            "phase": self.unit.phase,
            "mass_kg": self.unit.mass.as_record(),
            "bottom_mm": self.z,
            "turned": self.turned,
            "on": list(self.on),
            "centre_mm": None if self.centre is None else list(self.centre),
        }


@dataclass(frozen=True, slots=True)
class AxleLoad:
    """One support: heavy and light load, kg; the worst over all stages of unloading; its share of the momentary mass."""

    name: str
    kg: float
    light_kg: float
    limit_kg: float | None
    share: float
    worst_kg: float
    least_share: float | None

    def as_record(self) -> dict[str, Any]:
        return {
            "name": self.name,
            "kg": self.kg,
            "light_kg": self.light_kg,
            "limit_kg": self.limit_kg,
            "share": self.share,
            "worst_kg": self.worst_kg,
            "least_share": self.least_share,
            "utilisation": None if not self.limit_kg else self.worst_kg / self.limit_kg,
        }


@dataclass(frozen=True, slots=True)
class Lashing:
    """What holds a piece in one direction: the method, how many, at which places along the deck (mm), and with what figures.

    Direct lashings name each anchor as (from the deck's front, from its left) in mm, and the force that each must hold, daN.
    """

    piece: str
    method: str
    direction: str
    number: int
    friction: float | None
    angle_deg: float | None
    positions_mm: tuple[float, ...] = ()
    rule: str = ""
    anchors_mm: tuple[tuple[float, float], ...] = ()
    needed_dan: float | None = None

    def as_record(self) -> dict[str, Any]:
        return {
            "piece": self.piece,
            "method": self.method,
            "direction": self.direction,
            "number": self.number,
            "friction": self.friction,
            "angle_deg": self.angle_deg,
            "positions_mm": list(self.positions_mm),
            "rule": self.rule,
            "anchors_mm": [list(place) for place in self.anchors_mm],
            "needed_dan": self.needed_dan,
        }


@dataclass(frozen=True, slots=True)
class OverSize:
    """A piece or a vehicle beyond a planning threshold: mm, or kg for gross."""

    name: str
    kind: Literal["width", "height", "length", "gross"]
    value: float
    limit: float
    rule: str

    def as_record(self) -> dict[str, Any]:
        return {"name": self.name, "kind": self.kind, "value": self.value, "limit": self.limit, "rule": self.rule}


@dataclass(frozen=True, slots=True)
class Load:
    """What one vehicle carries, in loading order. Payload counts dunnage and gear; `curve` is the payload diagram."""

    name: str
    vehicle: Vehicle
    pieces: tuple[Placed, ...]
    dunnage_kg: float
    axles: tuple[AxleLoad, ...] = ()
    lashings: tuple[Lashing, ...] = ()
    over_size: tuple[OverSize, ...] = ()
    curve: tuple[tuple[float, float, str], ...] = ()
    stages: tuple[dict[str, Any], ...] = ()
    findings: tuple[Finding, ...] = ()

    @property
    def payload_kg(self) -> float:
        return sum(p.unit.mass.heavy for p in self.pieces) + self.dunnage_kg

    @property
    def centre_mm(self) -> tuple[float, float, float] | None:
        """Centre of the pieces' heavy masses, from the deck's front left corner; None where a piece has no place."""
        centres = [(p.unit.mass.heavy, p.centre) for p in self.pieces]
        mass = sum(m for m, _ in centres)
        if mass <= 0 or any(c is None for _, c in centres):
            return None
        x, y, z = (sum(m * c[k] for m, c in centres if c is not None) / mass for k in range(3))
        return x, y, z

    def as_record(self) -> dict[str, Any]:
        """As in the JSON (design of `vehicles[]`), with the stages of unloading and the payload diagram."""
        deck = self.vehicle.deck
        return {
            "name": self.name,
            "kind": self.vehicle.kind,
            "vehicle": self.vehicle.name,
            "pieces": [p.as_record() for p in self.pieces],
            "payload_kg": self.payload_kg,
            "payload_limit_kg": self.vehicle.payload_kg,
            "dunnage_kg": self.dunnage_kg,
            "centre_mm": None if self.centre_mm is None else list(self.centre_mm),
            "deck_mm": None if deck is None else [deck[0], deck[1], deck[2] if deck[2] < 1e6 else None],
            "axles": [a.as_record() for a in self.axles],
            "lashings": [x.as_record() for x in self.lashings],
            "over_size": [o.as_record() for o in self.over_size],
            "payload_curve": [{"centre_mm": x, "payload_kg": kg, "governs": why} for x, kg, why in self.curve],
            "stages": list(self.stages),
            "findings": [f.as_record() for f in self.findings],
        }


@dataclass(frozen=True, slots=True)
class NotLoaded:
    """A unit that stands on no vehicle, and why; `kg` is None where it could not be weighed."""

    name: str
    kg: float | None
    reason: str

    def as_record(self) -> dict[str, Any]:
        return {"name": self.name, "kg": self.kg, "reason": self.reason}


@dataclass(frozen=True, slots=True)
class Plan:
    """All loads, what is on none, the least number of vehicles that any plan needs, and whether ours is that few."""

    loads: tuple[Load, ...]
    not_loaded: tuple[NotLoaded, ...]
    bound: int
    proven: bool
    findings: tuple[Finding, ...] = field(default=())

    @property
    def gap(self) -> int:
        """Vehicles more than the bound; 0 where proven."""
        return max(0, len(self.loads) - self.bound)

    def as_record(self, cautions: Sequence[str] = ()) -> dict[str, Any]:
        """As `loads --json` prints it."""
        return {
            "vehicles": [load.as_record() for load in self.loads],
            "not_loaded": [n.as_record() for n in self.not_loaded],
            "vehicle_count_bound": self.bound,
            "proven": self.proven,
            "gap": self.gap,
            "findings": [f.as_record() for f in self.findings],
            "cautions": list(cautions),
        }
