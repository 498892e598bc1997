"""Sums over weighed members: in all and by material, section, assembly, phase and finish; every sum says what it lacks.

Sums are of unrounded figures. The likely range follows `takeoff.bounds.likely_range` over (section, material) groups.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

from takeoff.bounds import Bounds, likely_range

if TYPE_CHECKING:
    import pandas as pd

#: what no schedule of this version counts, in the order a checker reads it
NOT_COUNTED = ("welds", "bolts", "finish", "contents", "temporary steel")
#: members column -> the name that stands for a blank there
GROUPINGS = {
    "material": "(no material)", "section": "(no section)", "assembly": "(no assembly)", "phase": "(no phase)",
    "finish": "(no finish named)",
}


@dataclass(frozen=True, slots=True)
class GroupTotal:
    """One group's sum: pieces weighed, mass bounds in kg, and how many rows it lacks."""

    name: str
    quantity: int
    mass_kg: Bounds
    not_weighed: int

    def as_record(self) -> dict[str, Any]:
        return {
            "name": self.name, "quantity": self.quantity, "mass_kg": self.mass_kg.as_record(),
            "not_weighed": self.not_weighed,
        }


@dataclass(frozen=True, slots=True)
class Totals:
    """The whole list's sums. `quantity` counts weighed pieces; volume (m³) and surface (m²) are sums over those known."""

    quantity: int
    mass_kg: Bounds
    likely_kg: tuple[float, float]
    volume_m3: float
    surface_m2: float
    not_weighed: int
    not_counted: tuple[str, ...]
    groups: dict[str, list[GroupTotal]] = field(default_factory=dict)

    def as_record(self) -> dict[str, Any]:
        record: dict[str, Any] = {
            "quantity": self.quantity, "mass_kg": self.mass_kg.as_record(),
            "likely_kg": {"low": self.likely_kg[0], "high": self.likely_kg[1]}, "volume_m3": self.volume_m3,
            "surface_m2": self.surface_m2, "not_weighed": self.not_weighed, "not_counted": list(self.not_counted),
        }
        for name in GROUPINGS:
            record[f"by_{name}"] = [g.as_record() for g in self.groups.get(name, [])]
        return record


def total_up(members: pd.DataFrame, not_counted: tuple[str, ...] = NOT_COUNTED) -> Totals:
    """Totals of a weighed members frame (see `takeoff.weighing.masses.weigh` for its columns)."""
    weighed = members["status"].ne("not weighed")
    counted = members[weighed]
    pieces = counted["quantity"]
    return Totals(
        quantity=int(pieces.sum()),
        mass_kg=_bounds(counted),
        likely_kg=likely_range(_groups_for_likely(counted)),
        volume_m3=float((counted["volume_m3"] * pieces).sum()),
        surface_m2=float((counted["surface_m2"] * pieces).sum()),
        not_weighed=int((~weighed).sum()),
        not_counted=not_counted,
        groups={name: by(members, name, blank) for name, blank in GROUPINGS.items()},
    )


def by(members: pd.DataFrame, column: str, blank: str) -> list[GroupTotal]:
    """One GroupTotal for each distinct text of `column`, in the order of first appearance; blanks under `blank`."""
    if members.empty:
        return []
    names = members[column].fillna("").where(members[column].fillna("").ne(""), blank)
    weighed = members["status"].ne("not weighed")
    frame = members.loc[:, ["quantity", "total_light_kg", "total_nominal_kg", "total_heavy_kg"]].where(weighed, 0.0)
    frame["lacking"] = (~weighed).astype(int)
    sums = frame.fillna(0.0).groupby(names, sort=False).sum()
    return [
        GroupTotal(str(name), int(quantity), Bounds(light, nominal, heavy), int(lacking))
        for name, quantity, light, nominal, heavy, lacking in sums.itertuples()
    ]


def _bounds(counted: pd.DataFrame) -> Bounds:
    light, nominal, heavy = (float(counted[f"total_{word}_kg"].sum()) for word in ("light", "nominal", "heavy"))
    return Bounds(light, nominal, heavy)


def _groups_for_likely(counted: pd.DataFrame) -> list[Bounds]:
    if counted.empty:
        return []
    # Rows without a section of ours (stated masses) have nothing that ties them together but their text.
    sums = counted.groupby(["section", "material"], sort=False, dropna=False)[
        ["total_light_kg", "total_nominal_kg", "total_heavy_kg"]
    ].sum()
    return [Bounds(light, nominal, heavy) for light, nominal, heavy in sums.itertuples(index=False)]
