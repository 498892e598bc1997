"""Whether a crane's own chart carries a pick: rating, utilisation at rest and moving, head room, sail, and a verdict. Rank 6.

The rating is read at the larger of pick-up and set-down radius, at the next longer listed one; the smaller of chart and
hook rating counts, less the deductions. The planning limit is the threshold at which 29 CFR 1926.751, as quoted, asks for
critical-lift planning. Nothing is within a chart that is not sound, or within anything while the mass is not complete.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any, Literal

from takeoff.findings import Finding
from takeoff.job import CranePart
from takeoff.lifting import ground
from takeoff.lifting.chart import Chart
from takeoff.lifting.factors import Factor, factor
from takeoff.lifting.figures import down_to, up_to

CraneVerdict = Literal["within", "over planning limit", "over rating", "unknown"]
#: utilisations this close to a limit are at it, not over it
_HAIR = 1e-12


@dataclass(frozen=True, slots=True)
class Piece:
    """What of the pick the crane's surroundings feel: light mass (kg) and size (mm), and the hook's height above its lowest part."""

    light_kg: float
    size_mm: tuple[float, float, float] | None
    hook_above_low_mm: float | None
    at_least: bool
    set_down_mm: float


@dataclass(frozen=True, slots=True)
class Stand:
    """Load and pad of one outrigger by each simple method: what, share or direction, kg, m² and side in m of a square pad."""

    method: str
    load_kg: float
    area_m2: float
    side_m: float
    factor: Factor | None

    def as_record(self) -> dict[str, Any]:
        return {
            "method": self.method,
            "load_kg": self.load_kg,
            "area_m2": self.area_m2,
            "side_m": self.side_m,
            "source": self.factor.source.as_record() if self.factor else None,
        }


@dataclass(frozen=True, slots=True)
class Wind:
    """The greatest wind the lift may see, m/s, and how hard it then pushes on the piece, kN; `at_least`: its size is not fully known."""

    speed_m_s: float
    force_kN: float
    at_least: bool


@dataclass(frozen=True, slots=True)
class CraneCheck:
    """One crane against one pick. Masses kg, radii m, utilisations and limit shares; None where the chart gives nothing.

    `rating_kg` is the smaller of chart and hook rating, `capacity_kg` net of deductions. For several cranes `share` is this
    one's, and its loads are times `share_factor`.
    """

    name: str
    configuration: str | None
    radius_m: float | None
    boom_m: float | None
    chart_radius_m: float | None
    rating_kg: float | None
    capacity_kg: float | None
    static_kg: float | None
    load_kg: float | None
    utilisation_static: float | None
    utilisation: float | None
    limit: Factor
    largest_radius_m: float | None
    head_room_m: float | None
    sail_m2_per_t: float | None
    stands: tuple[Stand, ...]
    verdict: CraneVerdict
    share: float | None = None
    share_factor: Factor | None = None
    points: tuple[str, ...] = ()
    wind: Wind | None = None

    def as_record(self) -> dict[str, Any]:
        return {
            "name": self.name,
            "configuration": self.configuration,
            "radius_m": self.radius_m,
            "boom_m": self.boom_m,
            "chart_radius_m": self.chart_radius_m,
            "rating_kg": self.rating_kg,
            "capacity_kg": self.capacity_kg,
            "static_kg": self.static_kg,
            "load_kg": self.load_kg,
            "utilisation_static": self.utilisation_static,
            "utilisation": self.utilisation,
            "limit": self.limit.value,
            "limit_source": self.limit.source.as_record(),
            "largest_radius_m": self.largest_radius_m,
            "head_room_m": self.head_room_m,
            "sail_m2_per_t": self.sail_m2_per_t,
            "wind_m_s": self.wind.speed_m_s if self.wind else None,
            "wind_force_kN": self.wind.force_kN if self.wind else None,
            "outriggers": [s.as_record() for s in self.stands],
            "share": self.share,
            "share_factor": self.share_factor.value if self.share_factor else None,
            "points": list(self.points),
            "verdict": self.verdict,
        }


@dataclass(frozen=True, slots=True)
class Asked:
    """What the crane is asked to do. `static_kg` and `load_kg` are None where its share is not known."""

    static_kg: float | None
    load_kg: float | None
    pick_up_m: float | None
    set_down_m: float | None
    boom_m: float | None
    limit: Factor
    complete: bool
    block_kg: float
    piece: Piece
    share: float | None = None
    share_factor: Factor | None = None
    points: tuple[str, ...] = ()


def check(crane: CranePart, chart: Chart | None, asked: Asked) -> tuple[CraneCheck, list[Finding]]:
    """The crane's record and what there is to say of it."""
    name = crane.name or "crane"
    findings: list[Finding] = []

    def say(kind: str, message: str, read: str | None = None, right: str | None = None) -> None:
        findings.append(Finding("note", kind, f"{name}: {message}", read=read, right=right))

    radius = max((r for r in (asked.pick_up_m, asked.set_down_m) if r is not None), default=None)
    if crane.configuration is None:
        say(
            "chart-configuration-missing",
            "the configuration that the chart is for is not named",
            right="configuration of the crane in the job file",
        )
    rating = row_radius = None
    if chart is None:
        say("crane-rating-unknown", "no chart is given", right="chart of the crane in the job file")
    elif radius is None:
        say("crane-rating-unknown", "no radius is given", right="radius_m of the pick")
    else:
        findings += chart.findings
        rating = chart.rating(radius, asked.boom_m)
        row = chart.row_for(radius)
        row_radius = None if row is None else chart.radii_m[row]
        if rating is None:
            say("crane-rating-unknown", _why_none(chart, radius, asked.boom_m), right="a radius and boom that the chart rates")
    if rating is not None and crane.hook_rating_kg is not None:
        rating = min(rating, crane.hook_rating_kg)
    capacity = None if rating is None else rating - crane.deductions_kg
    static_share = _over(asked.static_kg, capacity)
    moving_share = _over(asked.load_kg, capacity)
    verdict: CraneVerdict = "unknown"
    known = asked.complete and capacity is not None and asked.load_kg is not None and chart is not None and chart.sound
    exceeds = capacity is not None and asked.load_kg is not None and (moving_share is None or moving_share > 1 + _HAIR)
    if known:
        over_limit = static_share is None or static_share > asked.limit.value * (1 + _HAIR)
        verdict = "over rating" if exceeds else "over planning limit" if over_limit else "within"
    elif exceeds:
        say("crane-exceeded", "what is known of the load already exceeds the rating")
    if asked.block_kg == 0:
        say("block-not-counted", "no hook block is counted: right only where the chart is net of it")
    elif crane.deductions_kg:
        say("block-counted-twice", "the hook block is in the load and there are deductions: see that the block is not among them")
    head_room = _head_room(crane, asked, radius, say)
    sail, wind = _sail(crane, asked.piece, say)
    largest = _largest_radius(chart, crane, asked) if known else None
    stands = _stands(crane, asked, radius) if asked.load_kg is not None and asked.complete else ()
    return CraneCheck(
        name,
        crane.configuration,
        radius,
        asked.boom_m,
        row_radius,
        rating,
        capacity,
        asked.static_kg,
        asked.load_kg,
        static_share,
        moving_share,
        asked.limit,
        largest,
        head_room,
        sail,
        stands,
        verdict,
        asked.share,
        asked.share_factor,
        asked.points,
        wind,
    ), findings


def _over(load: float | None, capacity: float | None) -> float | None:
    return None if load is None or capacity is None or capacity <= 0 else load / capacity


def _why_none(chart: Chart, radius: float, boom: float | None) -> str:
    if chart.row_for(radius) is None:
        return f"the chart does not reach a radius of {radius:g} m"
    if boom is None:
        return "the chart has several boom lengths and the pick names none"
    if not chart.columns_for(boom):
        return f"the chart has no boom of {boom:g} m, nor one on either side of it"
    return f"the chart gives no rating at {radius:g} m with {boom:g} m of boom"


def _largest_radius(chart: Chart | None, crane: CranePart, asked: Asked) -> float | None:
    """The largest listed radius at which the lift would still be within."""
    if chart is None or asked.static_kg is None or asked.load_kg is None:
        return None
    served = None
    for radius in chart.radii_m:
        rating = chart.rating(radius, asked.boom_m)
        if rating is None:
            continue
        capacity = min(rating, crane.hook_rating_kg or math.inf) - crane.deductions_kg
        if capacity > 0 and asked.static_kg <= asked.limit.value * capacity * (1 + _HAIR) and asked.load_kg <= capacity * (1 + _HAIR):
            served = radius if served is None else max(served, radius)
    return served


def _head_room(crane: CranePart, asked: Asked, radius: float | None, say: Any) -> float | None:
    """m between the hook block and the boom tip: tip less block, slings, piece and set-down height; None where not known."""
    boom, piece = asked.boom_m, asked.piece
    if crane.boom_foot_m is None or boom is None or radius is None or piece.hook_above_low_mm is None:
        return None
    if radius >= boom:
        say("no-head-room", "the boom is no longer than the radius", read=f"{boom:g} m")
        return None
    block = factor("block", "least length").value if crane.block_m is None else crane.block_m
    tip = crane.boom_foot_m + math.sqrt(boom**2 - radius**2)
    room = tip - block - (piece.hook_above_low_mm + max(0.0, piece.set_down_mm)) / 1000.0
    if room < 0:
        say(
            "no-head-room",
            f"the piece does not go under the boom tip: {up_to(-room, 2)} m short",
            read=f"tip at {down_to(tip, 2)} m",
            right="a longer boom",
        )
    elif piece.at_least:
        say("head-room-at-most", "the height of the piece is not fully known: the head room is at most the figure given")
    return room


def _sail(crane: CranePart, piece: Piece, say: Any) -> tuple[float | None, Wind | None]:
    """m² of sail a tonne: the larger upright face of the enclosing box, times the wind area factor, over the light mass; and the wind
    that is left of the chart's, where the job file gives that."""
    if piece.size_mm is None or piece.light_kg <= 0:
        return None, None
    x, y, z = piece.size_mm
    area = max(x, y) * z * 1e-6
    c = crane.wind_area_factor or factor("wind area factor").value
    sail = c * area / (piece.light_kg / 1000.0)
    allowed = factor("sail area", "per tonne")
    share = ground.wind_speed_share(piece.light_kg, area, c) if area > 0 else 1.0
    if sail > allowed.value:
        say(
            "sail-area",
            f"a large sail: at most {down_to(share, 2)} of the chart's wind speed",
            read=f"{up_to(sail, 1)} m² per tonne",
            right=f"{allowed.value:g} m² per tonne ({allowed.source})",
        )
    if crane.wind_m_s is None:
        return sail, None
    speed = crane.wind_m_s * share
    return sail, Wind(speed, ground.wind_force_kN(speed, area, c), piece.at_least)


def _stands(crane: CranePart, asked: Asked, radius: float | None) -> tuple[Stand, ...]:
    """Outrigger loads and pads by the simple methods; the load counts its rigging."""
    o = crane.outriggers
    if o is None or asked.load_kg is None:
        return ()
    found = []
    for case in ("one outrigger", "all on one"):
        f = factor("outrigger share", case)
        found.append(Stand(f"{f.value:g} × (crane + load)", *ground.pad(o.crane_kg, asked.load_kg, o.allowable_kpa, f.value), f))
    if radius is not None:
        total, worst = o.crane_kg + asked.load_kg, 0.0
        for degree in range(0, 360, 5):
            mx, my = (asked.load_kg * radius * 1000.0 * trig(math.radians(degree)) for trig in (math.cos, math.sin))
            corners = ground.corner_loads(total, mx, my, o.spread_x_mm, o.spread_y_mm)
            worst = math.inf if corners is None else max(worst, *corners)
        if math.isfinite(worst):
            load, area, side = ground.pad(worst, 0.0, o.allowable_kpa, 1.0)
            found.append(Stand("stiff chassis, worst slewing, the crane's own mass in the middle", load, area, side, None))
    return tuple(found)
