"""Volume of a piece and mass of what a vessel holds, at a temperature. Mass is conserved: density falls as volume grows. Rank 5."""

from __future__ import annotations

from takeoff.materials import Material, density_at
from takeoff.materials.stretch import stretch
from takeoff.thermal.lengths import REFERENCE_C, grown


def volume_factor(material: Material, temperature_C: float) -> float | None:
    """Volume at a temperature over the volume at 20 °C, each direction once; None where the expansion is not known."""
    there = grown(material, temperature_C)
    along, across, through = (stretch(there, size) for size in ("length", "width", "thickness"))
    return None if along is None or across is None or through is None else along * across * through


def volume_at(material: Material, volume_m3: float, temperature_C: float, *, volume_at_C: float = REFERENCE_C) -> float | None:
    """Volume at a temperature of a piece that has `volume_m3` at `volume_at_C`."""
    before, after = volume_factor(material, volume_at_C), volume_factor(material, temperature_C)
    return None if before is None or after is None else volume_m3 * after / before


def contents_kg(vessel: Material, volume_m3: float, contents: Material, temperature_C: float) -> float | None:
    """Mass of what fills a vessel of `volume_m3` at 20 °C: its inside grows with the vessel, the contents have their own density.

    None where the vessel's expansion or the contents' density is not known (water below 0 or above 100 °C).
    """
    inside = volume_at(vessel, volume_m3, temperature_C)
    density = density_at(contents, temperature_C).density
    return None if inside is None or density is None or density.nominal is None else inside * density.nominal
