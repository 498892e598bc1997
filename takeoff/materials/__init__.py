"""Material text to `Material`: the table, the look-up, expansion and density at temperature, wood, water. Rank 2.

What other rooms call stands here; nothing heavy is imported, and what a plain look-up does not need is imported when it is
first asked for: a card at the terminal is measured in milliseconds.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

from takeoff.materials.lookup import Candidate, MaterialMatch, lookup
from takeoff.materials.material import FamilySpread, Material
from takeoff.materials.table import all_materials, by_key, families

if TYPE_CHECKING:
    from takeoff.materials.expansion import DensityAt, Elongation, Law, Piece, density_at, elongation, law_of
    from takeoff.materials.own import OwnTable, load_own
    from takeoff.materials.reinforced import reinforced_density
    from takeoff.materials.wood import WoodDensity, green_density, wood_density

_LATER = {
    **dict.fromkeys(("DensityAt", "Elongation", "Law", "Piece", "density_at", "elongation", "law_of"), "expansion"),
    **dict.fromkeys(("OwnTable", "load_own"), "own"),
    "reinforced_density": "reinforced",
    **dict.fromkeys(("WoodDensity", "green_density", "wood_density"), "wood"),
}

#: what a section whose standard is itself a steel standard is made of where nothing names a material
DEFAULT_STEEL = "steel-structural"

__all__ = [
    "DEFAULT_STEEL",
    "Candidate", "DensityAt", "Elongation", "FamilySpread", "Law", "Material", "MaterialMatch", "OwnTable", "Piece",
    "WoodDensity",
    "all_materials", "by_key", "density_at", "elongation", "families", "green_density", "law_of", "load_own", "lookup",
    "reinforced_density", "wood_density",
]  # fmt: skip


def __getattr__(name: str) -> Any:
    module = _LATER.get(name)
    if module is None:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    value = getattr(import_module(f"takeoff.materials.{module}"), name)
    globals()[name] = value
    return value
