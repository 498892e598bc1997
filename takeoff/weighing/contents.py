"""What a member holds, from its contents cell: ``water``, ``60 % water``, ``500 l diesel``, ``dry sand``. Rank 4.

Each distinct text is read once. The inside volume is the bore of a hollow section over its length, else the volume the
row states for a piece known by its mass (a tank), else the volume in the cell itself.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff import materials
from takeoff.bounds import Bounds
from takeoff.names import normal_name
from takeoff.provenance import Source
from takeoff.weighing import amounts

if TYPE_CHECKING:
    from takeoff.materials import Material

_EMPTY = re.compile(r"|none|no|nil|n/a|empty|dry|air|leer|vide|vacio|vuoto|leeg|pust[aey]|vazio|tom|void|nothing")
_FILLERS = re.compile(
    r"\b(?:full|filled|fill|with|of|at|to|by volume|vol|contents?|inside|ca|approx|about|gefullt|mit|plein|rempli|de|d|llen[oa]|"
    r"pien[oa]|di|gevuld|met)\b"
)
#: how far the inside of a tube may be from its nominal volume: outside size ±1 %, wall ±10 % (the limits of EN 10219-2)
BORE_SHARE = Bounds(0.96, 1.0, 1.04)


@dataclass(frozen=True, slots=True)
class Contents:
    """A contents cell read: kg/m³ of what it names, the part that is filled, or the volume or mass it states.

    `problem` says why it cannot be added, `right` what would be right; `assumed` names the readings of an open name.
    `liquids` are the rows of the table it may be, where they are liquids: their density moves with temperature.
    """

    density: Bounds | None = None
    name: str = ""
    source: Source | None = None
    share: float = 1.0
    volume_m3: float | None = None
    mass_kg: float | None = None
    problem: str | None = None
    right: str | None = None
    assumed: str | None = None
    liquids: tuple[Material, ...] = ()

    @property
    def empty(self) -> bool:
        return self.density is None and self.mass_kg is None and self.problem is None


_RIGHT = "such as water, 60 % water, 500 l diesel or none"


def read(text: str) -> Contents:
    """What a contents cell names. A name that is only similar to a known one is not taken: it is offered."""
    if _EMPTY.fullmatch(normal_name(text)):
        return Contents()
    cell = amounts.read(text)
    if not cell.clear:
        return Contents(problem="a figure in the contents can be read two ways", right=_RIGHT)
    share = cell.amounts.get("percent", 100.0) / 100
    if not 0 <= share <= 1:
        return Contents(problem="the contents cannot fill more than the whole inside", right="0 to 100 %")
    name = amounts.without(cell.words, _FILLERS)
    stated = Source("the member list's own statement", "contents column", "read")
    if "mass" in cell.amounts:
        return Contents(name=name or "contents", source=stated, mass_kg=cell.amounts["mass"])
    volume = cell.amounts.get("volume")
    if "density" in cell.amounts:
        density = Bounds.exact(cell.amounts["density"])
        return Contents(density, name or "contents", stated, share, volume)
    if not name:
        return Contents(problem="the contents name no substance", right=_RIGHT)
    return _named(name, share, volume)


def _named(name: str, share: float, volume: float | None) -> Contents:
    match = materials.lookup(name, hint="liquid")
    if match.match == "ambiguous":
        several = [materials.by_key(c.key) for c in match.candidates]
        known = [m for m in several if m.density.nominal is not None]
        if not known:
            return Contents(problem="the contents are not known", right=_RIGHT)
        low, high = min(m.density.low for m in known), max(m.density.high for m in known)
        first = known[0]
        names = ", ".join(m.name for m in known)
        return Contents(Bounds(low, first.density.nominal or low, high), first.name, first.density_source, share, volume,
                        assumed=f"the contents may be any of: {names}; nominal is the first, heavy covers all",
                        liquids=tuple(m for m in known if m.kind == "liquid"))
    material = match.material
    if match.match not in ("exact", "alias") or material is None or material.density.nominal is None:
        near = ", ".join(c.name for c in match.candidates[:3])
        return Contents(problem="the contents are not known", right=f"one of {near}" if near else _RIGHT)
    liquids = (material,) if material.kind == "liquid" else ()
    return Contents(_spread(material), material.name, material.density_source, share, volume, liquids=liquids)


def _spread(material: Material) -> Bounds:
    density = material.density
    assert density.nominal is not None
    return Bounds(density.low, density.nominal, density.high)
