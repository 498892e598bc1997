"""A pick: what hangs on the hook at once, as a record every output shares. Rank 6."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any, Literal

from takeoff.bounds import Bounds
from takeoff.findings import Finding
from takeoff.lifting.crane import CraneCheck
from takeoff.lifting.factors import Factor
from takeoff.lifting.gravity import Centre, Vector
from takeoff.lifting.own_weight import Bending
from takeoff.lifting.spreader import Bar
from takeoff.lifting.tackle import Choice
from takeoff.lifting.upend import Step

Verdict = Literal["within", "over", "unknown"]


@dataclass(frozen=True, slots=True)
class Line:
    """One line of the build-up, in kg; the lines of a pick add up to its hook load."""

    item: str
    kg: float


@dataclass(frozen=True, slots=True)
class Point:
    """A lifting point. kN, mm, degrees from the vertical, t; None where the hook's height is not known.

    `share_kN` is of the nominal mass at rest, `share_heavy_kN` the governing one of design mass × dynamic factor, with the
    `case` that governs; `level_length_mm` is the sling that hangs the piece level.
    """

    name: str
    position_mm: Vector
    share_kN: float
    share_heavy_kN: float
    case: str
    sling_length_mm: float | None
    level_length_mm: float | None
    angle_from_vertical_deg: float | None
    tension_kN: float | None
    required_wll_t: float | None
    chosen: tuple[Choice, ...] = ()

    def as_record(self) -> dict[str, Any]:
        return {
            "name": self.name,
            "position_mm": list(self.position_mm),
            "share_kN": self.share_kN,
            "share_heavy_kN": self.share_heavy_kN,
            "case": self.case,
            "sling_length_mm": self.sling_length_mm,
            "level_length_mm": self.level_length_mm,
            "angle_from_vertical_deg": self.angle_from_vertical_deg,
            "tension_kN": self.tension_kN,
            "required_wll_t": self.required_wll_t,
            "chosen": [c.as_record() for c in self.chosen],
        }


@dataclass(frozen=True, slots=True)
class Pick:
    """One pick: its mass bounds, the build-up from the heavy mass to the hook load, and what is not in it.

    `pieces` counts pieces, not rows. `not_weighed` counts the rows of the pick that could not be weighed: while it is
    above 0 the figures are of the rest only. `centre` is None, with `centre_unknown` saying why, where a position is
    missing. `listed` is the list's own name for exactly these rows, None where the job file or a bundle put them together.
    """

    name: str
    pieces: int
    mass_kg: Bounds
    not_weighed: int
    contingency: Factor
    dynamic: Factor
    design_mass_kg: float
    static_hook_load_kg: float
    hook_load_kg: float
    hook_load_kN: float
    build_up: tuple[Line, ...]
    verdict: Verdict
    not_counted: tuple[str, ...]
    findings: tuple[Finding, ...] = field(default=())
    listed: str | None = None
    weighed_kg: float | None = None
    centre: Centre | None = None
    centre_unknown: str = ""
    points: tuple[Point, ...] = ()
    hook_mm: Vector | None = None
    tilt_deg: float | None = None
    skew: Factor | None = None
    uniform: tuple[Choice, ...] = ()
    spreader: Bar | None = None
    bar_tackle: tuple[Choice, ...] = ()
    cranes: tuple[CraneCheck, ...] = ()
    upend: tuple[Step, ...] = ()
    own_weight: Bending | None = None

    @property
    def crane(self) -> CraneCheck | None:
        """The crane that governs: the worst verdict, then the highest utilisation."""
        worst = ("within", "unknown", "over planning limit", "over rating")
        return max(self.cranes, key=lambda c: (worst.index(c.verdict), c.utilisation or 0.0), default=None)

    @property
    def factors(self) -> tuple[Factor, ...]:
        """Every factor the figures rest on."""
        limits = (self.crane.limit,) if self.crane else ()
        shares = tuple(c.share_factor for c in self.cranes[:1] if c.share_factor)
        return (self.contingency, self.dynamic, *((self.skew,) if self.skew else ()), *limits, *shares)

    def as_record(self) -> dict[str, Any]:
        """As in the JSON; figures that need positions, points or a crane are null."""
        centre, crane = self.centre, self.crane
        return {
            "name": self.name,
            "members": self.pieces,
            "not_weighed": self.not_weighed,
            "mass_kg": self.mass_kg.as_record(),
            "weighed_kg": self.weighed_kg,
            "centre_of_gravity_mm": list(centre.centre) if centre else None,
            "centre_of_gravity_box_mm": [list(v) for v in centre.box] if centre else None,
            "size_mm": list(centre.size) if centre else None,
            "size_at_least": centre.at_least if centre else None,
            "design_mass_kg": self.design_mass_kg,
            "build_up": [{"item": line.item, "kg": line.kg} for line in self.build_up],
            "static_hook_load_kg": self.static_hook_load_kg,
            "hook_load_kg": self.hook_load_kg,
            "hook_load_kN": self.hook_load_kN,
            "factors": [f.as_record() for f in self.factors],
            "points": [p.as_record() for p in self.points],
            "hook_mm": list(self.hook_mm) if self.hook_mm else None,
            "tilt_deg": self.tilt_deg,
            "uniform_load": [c.as_record() for c in self.uniform],
            "spreader": None
            if self.spreader is None
            else {
                **self.spreader.as_record(),
                "chosen": [c.as_record() for c in self.bar_tackle],
            },
            "crane": crane.as_record() if crane else None,
            "cranes": [c.as_record() for c in self.cranes] if len(self.cranes) > 1 else [],
            "upend": [{"angle_deg": s.angle_deg, "head_kN": s.head_kN, "tail_kN": s.tail_kN} for s in self.upend],
            "own_weight": self.own_weight.as_record() if self.own_weight else None,
            "verdict": self.verdict,
            "not_counted": list(self.not_counted),
            "findings": [f.as_record() for f in self.findings],
        }
