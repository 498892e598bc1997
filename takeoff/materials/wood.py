"""Wood by its moisture: density at a moisture content, and green (fresh) density. Rank 2.

Method: Wood Handbook, US Forest Products Laboratory, chapter 4. Moisture content is the mass of water over the oven-dry
mass. Below 30 % (fibre saturation) wood swells as it takes up water, by an estimated 26.5 percent of its gravity in all;
above, only its mass grows, until every pore is full. The estimate is within 3 % for three species in four, and off by up
to 11 % for a few; dense resinous woods do not follow it. Boards glued from strands, chips or fibres are taken to gain
water at constant volume, which errs to the heavy side.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

from takeoff.bounds import Spread
from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError, TakeoffError
from takeoff.materials.material import Material
from takeoff.materials.table import source_titles
from takeoff.provenance import Source

#: The table's own moisture content, percent.
TABLE_MOISTURE = 12.0
FIBRE_SATURATION = 30.0
MOISTURE_LIMITS = (0.0, 200.0)
_SHRINKAGE_PER_GRAVITY = 0.265
_CELL_WALL_GRAVITY = 1.54
_WATER = 1000.0
#: Green moisture where no species is named: heartwood and sapwood of common species lie near it (common practice).
_GREEN_MOISTURE = {"timber softwood": 100.0, "timber hardwood": 80.0}
#: Engineered wood that still swells like the solid wood it is glued from.
_SOLID_LIKE = ("glulam", "clt", "lvl", "parquet")

SOURCE = Source("Wood Handbook, US Forest Products Laboratory (FPL-GTR-190 and 282)", "chapter 4, density and moisture", "recalled")
LIMITS = "estimated from one gravity by the Wood Handbook's relation: within 3 % for most species, off by up to 11 % for some"


@dataclass(frozen=True, slots=True)
class WoodDensity:
    """Density in kg/m³ at a moisture content; `saturated` where the wood can hold no more than less water than asked."""

    density: Spread
    moisture_percent: float
    saturated: bool
    source: Source
    limits: str


def wood_density(material: Material, moisture_percent: float) -> WoodDensity:
    """Low, nominal and high of a wood at a moisture content, from its figures at 12 %.

    Raises TakeoffError where the material is no wood, or the moisture lies outside 0 to 200 %.
    """
    if not material.is_wood:
        raise TakeoffError(f"moisture applies to wood only, not to {material.name}", right="leave the moisture away")
    low, high = MOISTURE_LIMITS
    if not low <= moisture_percent <= high:
        raise TakeoffError(
            "this moisture content cannot be", read=f"{moisture_percent:g} %",
            right=f"percent of the oven-dry mass, {low:g} to {high:g}",
        )  # fmt: skip
    spread = material.density
    nominal = spread.low if spread.nominal is None else spread.nominal
    ratio = _ratio(material, nominal, moisture_percent)
    full = nominal * ratio >= _waterlogged(nominal) - 1e-9 and moisture_percent > FIBRE_SATURATION
    density = Spread(
        spread.low * _ratio(material, spread.low, moisture_percent),
        None if spread.nominal is None else nominal * ratio,
        spread.high * _ratio(material, spread.high, moisture_percent),
    )
    return WoodDensity(density, moisture_percent, full, SOURCE, LIMITS)


def green_density(material: Material) -> WoodDensity | None:
    """Low, nominal and high of freshly felled wood; None for materials that are not sawn from the log.

    From species tables where they have it; for strength classes and unnamed wood computed at 80 % (hardwood) or 100 %
    (softwood) moisture.
    """
    if not material.is_wood or material.family not in _GREEN_MOISTURE:
        return None
    known = None if material.own else _green_table().get(material.key)
    if known is not None:
        spread, source = known
        # A table's fresh wood is never lighter than the dry wood of our own row.
        spread = Spread(spread.low, spread.nominal, max(spread.high, material.density.high))
        return WoodDensity(spread, _moisture_of(material, spread), False, source, "species table")
    moisture = _GREEN_MOISTURE[material.family]
    found = wood_density(material, moisture)
    source = Source(SOURCE.title, f"chapter 4, at {moisture:g} % moisture (common practice)", "computed")
    return WoodDensity(found.density, moisture, found.saturated, source, LIMITS)


def basic_gravity(density_at_12: float) -> float:
    """Oven-dry mass over green volume, relative to water, from the density in kg/m³ at 12 % moisture."""
    gravity_12 = density_at_12 / (_WATER * (1 + TABLE_MOISTURE / 100))
    dryness = (FIBRE_SATURATION - TABLE_MOISTURE) / FIBRE_SATURATION
    return gravity_12 / (1 + _SHRINKAGE_PER_GRAVITY * dryness * gravity_12)


def _at(basic: float, moisture_percent: float) -> float:
    """Density in kg/m³ from the basic gravity."""
    dryness = max(0.0, (FIBRE_SATURATION - moisture_percent) / FIBRE_SATURATION)
    gravity = basic / (1 - _SHRINKAGE_PER_GRAVITY * dryness * basic)
    return _WATER * gravity * (1 + moisture_percent / 100)


def _waterlogged(density_at_12: float) -> float:
    """The heaviest the wood can be, every pore full of water, kg/m³."""
    return _WATER * (1 + basic_gravity(density_at_12) * (1 - 1 / _CELL_WALL_GRAVITY))


def _ratio(material: Material, density_at_12: float, moisture_percent: float) -> float:
    """Density at a moisture over density at 12 %."""
    if material.family == "engineered wood" and not material.key.startswith(_SOLID_LIKE):
        return (100 + moisture_percent) / (100 + TABLE_MOISTURE)
    wet = min(_at(basic_gravity(density_at_12), moisture_percent), _waterlogged(density_at_12)) / density_at_12
    # For very dense woods the estimated shrinkage is too large, and dry wood would come out heavier than moist wood.
    return min(wet, 1.0) if moisture_percent < TABLE_MOISTURE else max(wet, 1.0)


def _moisture_of(material: Material, green: Spread) -> float:
    """The moisture that a green density stands for, by the same relation, percent."""
    nominal = material.density.nominal or material.density.low
    basic = basic_gravity(nominal)
    return round(max(FIBRE_SATURATION, 100 * ((green.nominal or green.high) / (_WATER * basic) - 1)), 0)


@cache
def _green_table() -> dict[str, tuple[Spread, Source]]:
    path = data_folder() / "green.csv"
    found: dict[str, tuple[Spread, Source]] = {}
    for line, row in read_table(path):
        title = source_titles().get(row["source"])
        if title is None:
            raise DataError(f"line {line}: no such source", file=path, read=row["source"])
        spread = Spread(float(row["low_kg_m3"]), float(row["density_kg_m3"]), float(row["high_kg_m3"]))
        found[row["key"]] = (spread, Source(title, row["clause"], row["evidence"]))
    return found
