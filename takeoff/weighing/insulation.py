"""An insulation cell to what it adds: ``50 mm at 100 kg/m3``, ``40 mm mineral wool``, ``6 kg/m2``, ``2.5 kg/m``. Rank 4."""

from __future__ import annotations

import re
from dataclasses import dataclass

from takeoff import materials
from takeoff.bounds import Bounds
from takeoff.names import normal_name
from takeoff.provenance import Source
from takeoff.weighing import amounts

_NONE = re.compile(r"|none|no|nil|n/a|without|ohne|sans|sin|senza|geen|brak|sem|utan")
_FILLERS = re.compile(r"\b(?:at|of|thick|insulation|insulated|with|lagging|in|dick|mit|isolierung|dammung)\b")
_RIGHT = "such as 50 mm at 100 kg/m3"


@dataclass(frozen=True, slots=True)
class Insulation:
    """An insulation cell read: thickness in mm with kg/m³, or kg/m², or kg/m. `problem` says why it cannot be added."""

    thickness_mm: float = 0.0
    density: Bounds | None = None
    kg_m2: Bounds | None = None
    kg_m: Bounds | None = None
    rule: str = ""
    source: Source | None = None
    problem: str | None = None
    right: str = _RIGHT

    @property
    def none(self) -> bool:
        return self.density is None and self.kg_m2 is None and self.kg_m is None and self.problem is None


def read(text: str, stated_percent: tuple[float, float]) -> Insulation:
    """What an insulation cell names. `stated_percent`: minus and plus of a figure that is only stated."""
    if _NONE.fullmatch(normal_name(text)):
        return Insulation()
    cell = amounts.read(text)
    minus, plus = stated_percent
    stated = Source("the member list's own statement", "insulation column", "read")

    def spread(value: float) -> Bounds:
        return Bounds(value * (1 - minus / 100), value, value * (1 + plus / 100))

    if not cell.clear:
        return Insulation(problem="a figure of the insulation can be read two ways")
    areal, linear = cell.amounts.get("mass per area"), cell.amounts.get("mass per length")
    if areal is not None:
        return Insulation(kg_m2=spread(areal), rule=f"{areal:g} kg/m² as stated × outside surface; −{minus:g} % +{plus:g} %", source=stated)
    if linear is not None:
        return Insulation(kg_m=spread(linear), rule=f"{linear:g} kg/m as stated × length; −{minus:g} % +{plus:g} %", source=stated)
    thickness = cell.amounts.get("length")
    if thickness is None:
        return Insulation(problem="the insulation has no thickness")
    around = f"{thickness:g} mm around the outside"
    if "density" in cell.amounts:
        density = cell.amounts["density"]
        rule = f"{around} × {density:g} kg/m³ as stated; −{minus:g} % +{plus:g} %"
        return Insulation(thickness, spread(density), rule=rule, source=stated)
    name = amounts.without(cell.words, _FILLERS)
    found = materials.lookup(name, hint="insulation") if name else None
    material = found.material if found is not None and found.match in ("exact", "alias") else None
    if material is None or material.density.nominal is None:
        return Insulation(problem="the insulation's density is not known")
    density_of = material.density
    bounds = Bounds(density_of.low, material.density.nominal, density_of.high)
    rule = f"{around} × {bounds.nominal:g} kg/m³ ({material.name}; {bounds.light:g} to {bounds.heavy:g})"
    return Insulation(thickness, bounds, rule=rule, source=material.density_source)
