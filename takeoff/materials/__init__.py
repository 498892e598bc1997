"""Material text to `Material`: the table, the look-up, expansion and density at temperature, wood, water. Rank 2.

What other rooms call stands here; nothing heavy is imported.
"""

from __future__ import annotations

from takeoff.materials.expansion import DensityAt, Elongation, Law, Piece, density_at, elongation, law_of
from takeoff.materials.lookup import Candidate, MaterialMatch, lookup
from takeoff.materials.material import FamilySpread, Material
from takeoff.materials.own import OwnTable, load_own
from takeoff.materials.reinforced import reinforced_density
from takeoff.materials.table import all_materials, by_key, families
from takeoff.materials.wood import WoodDensity, green_density, wood_density

__all__ = [
    "Candidate", "DensityAt", "Elongation", "FamilySpread", "Law", "Material", "MaterialMatch", "OwnTable", "Piece",
    "WoodDensity",
    "all_materials", "by_key", "density_at", "elongation", "families", "green_density", "law_of", "load_own", "lookup",
    "reinforced_density", "wood_density",
]  # fmt: skip
