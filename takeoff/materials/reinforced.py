"""Reinforced concrete by its steel content: the steel takes the place of concrete. Rank 2."""

from __future__ import annotations

import re
from dataclasses import replace

from takeoff.bounds import Spread
from takeoff.errors import TakeoffError
from takeoff.materials.material import Material
from takeoff.provenance import Source

STEEL_KG_M3 = 7850.0
#: Plain concrete under the cage, kg/m³: EN 1991-1-1 Table A.1, with the spread of the table's plain row.
PLAIN = Spread(2300.0, 2400.0, 2450.0)
#: Steel per volume of concrete that can still be cast, kg/m³.
STEEL_LIMITS = (0.0, 600.0)
#: `reinforced concrete 150 kg/m3`, as text.
CONTENT = re.compile(r"\b(\d{1,4}(?:[.,]\d+)?)\s*kg\s*/\s*m\s*[3³]", re.IGNORECASE)


def reinforced_density(steel_kg_per_m3: float, plain: Spread = PLAIN) -> Spread:
    """Density with so much steel per m³ of concrete: plain + steel (1 − plain / 7850). Raises TakeoffError outside 0 to 600."""
    low, high = STEEL_LIMITS
    if not low <= steel_kg_per_m3 <= high:
        raise TakeoffError(
            "no concrete is reinforced like that", read=f"{steel_kg_per_m3:g} kg/m³", right=f"{low:g} to {high:g} kg/m³ of steel"
        )

    def mixed(concrete: float) -> float:
        return concrete + steel_kg_per_m3 * (1.0 - concrete / STEEL_KG_M3)

    nominal = None if plain.nominal is None else mixed(plain.nominal)
    return Spread(mixed(plain.low), nominal, mixed(plain.high))


def with_steel(material: Material, steel_kg_per_m3: float) -> Material:
    """Reinforced concrete with a stated steel content, in place of the usual one. Raises TakeoffError as above."""
    return replace(
        material,
        name=f"{material.name.partition(' (')[0]}, {steel_kg_per_m3:g} kg/m³ of steel",
        density=reinforced_density(steel_kg_per_m3),
        density_source=Source(material.density_source.title, "plain 2400, and the steel in its place at 7850", "computed"),
        note="",
        filled=(),
    )
