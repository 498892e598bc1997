"""A pick: what hangs on the hook at once, as a record every output shares."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any, Literal

from takeoff.bounds import Bounds
from takeoff.findings import Finding
from takeoff.provenance import Source

Verdict = Literal["within", "over", "unknown"]


@dataclass(frozen=True, slots=True)
class Factor:
    """A multiplier of the build-up, with why it has this value and where that comes from."""

    name: str
    value: float
    why: str
    source: Source

    def as_record(self) -> dict[str, Any]:
        return {"name": self.name, "value": self.value, "why": self.why, "source": self.source.as_record()}


@dataclass(frozen=True, slots=True)
class Line:
    """One line of the build-up, in kg; the lines of a pick add up to its hook load."""

    item: str
    kg: float


@dataclass(frozen=True, slots=True)
class Pick:
    """One pick: its mass bounds, the build-up from the heavy mass to the hook load, and what is not in it.

    `pieces` counts pieces, not rows. `not_weighed` counts the rows of the pick that could not be weighed: while it is
    above 0 the figures are of the rest only.
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

    def as_record(self) -> dict[str, Any]:
        """As in the JSON; figures that need positions, points or a crane are null."""
        return {
            "name": self.name, "members": self.pieces, "not_weighed": self.not_weighed,
            "mass_kg": self.mass_kg.as_record(), "centre_of_gravity_mm": None, "centre_of_gravity_box_mm": None,
            "size_mm": None, "design_mass_kg": self.design_mass_kg,
            "build_up": [{"item": line.item, "kg": line.kg} for line in self.build_up],
            "static_hook_load_kg": self.static_hook_load_kg, "hook_load_kg": self.hook_load_kg,
            "hook_load_kN": self.hook_load_kN,
            "factors": [self.contingency.as_record(), self.dynamic.as_record()],
            "points": [], "tilt_deg": None, "crane": None, "cranes": [], "upend": [], "own_weight": None,
            "verdict": self.verdict, "not_counted": list(self.not_counted),
            "findings": [f.as_record() for f in self.findings],
        }
