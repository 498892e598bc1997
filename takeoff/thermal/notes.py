"""What must be said beside a movement: what is not in it, how far the law reaches, what holding it would mean. Rank 5."""

from __future__ import annotations

from collections.abc import Iterable

from takeoff.findings import Finding
from takeoff.materials import Material
from takeoff.thermal.lengths import Length, grown
from takeoff.thermal.spread import modulus

#: a smaller movement can neither be marked nor read on a tape
LEAST_READ_MM = 0.1

_NOT_IN_IT = {
    "wood": (
        "moisture-outweighs", "moisture usually moves wood more than temperature does, and is not in these figures; along the grain both "
        "are small",
    ),
    "concrete": ("shrinkage-not-included", "shrinkage and creep of concrete are not in these figures"),
    "masonry": (
        "shrinkage-not-included", "shrinkage, creep and moisture movement of masonry are not in these figures, and usually outweigh them",
    ),
}


def about_material(material: Material) -> list[Finding]:
    """What is not in the movement of this kind of material."""
    known = _NOT_IN_IT.get(material.kind)
    return [Finding("note", known[0], f"{material.name}: {known[1]}")] if known else []


def about_temperature(material: Material, temperature_C: float, law: str | None = None) -> Finding | None:
    """Why there is no length at a temperature (refused), or how the law was carried past its ends (note)."""
    there = grown(material, temperature_C, law)
    if there.value is None and material.alpha_per_K is None and law is None:
        return Finding("refused", "no-coefficient", f"{material.name}: {there.reason}", right="another material, or one of your own table")
    if there.value is None:
        return Finding("refused", "above-melting", f"{material.name} at {temperature_C:g} °C: {there.reason}", read=f"{temperature_C:g} °C")
    if not there.within_validity and there.reason:
        return Finding("note", "outside-validity", f"{material.name} at {temperature_C:g} °C: {there.reason}", read=f"{temperature_C:g} °C")
    return None


def about_temperatures(material: Material, temperatures_C: Iterable[float], law: str | None = None) -> list[Finding]:
    """The findings of several temperatures, each said once."""
    found = [about_temperature(material, t, law) for t in dict.fromkeys(temperatures_C)]
    return list(dict.fromkeys(f for f in found if f is not None))


def about_range(material: Material, shortest: Length, longest: Length, movement_mm: float, strain: float) -> list[Finding]:
    """A movement too small to mark, and the stress where both ends are held, over the range from `shortest` to `longest`."""
    found: list[Finding] = []
    if 0 < abs(movement_mm) < LEAST_READ_MM:
        found.append(Finding("note", "movement-small", f"a movement under {LEAST_READ_MM:g} mm can neither be marked nor read on a tape"))
    stiff = modulus(material)
    if stiff is not None and movement_mm:
        found.append(Finding(
            "note", "movement-restrained", f"held at both ends it does not move, but pushes or pulls: about "
            f"{stiff.value * abs(strain):.0f} N/mm² between {shortest.temperature_C:g} and {longest.temperature_C:g} °C while it stays "
            f"elastic (modulus {stiff.value:,.0f} N/mm²: {stiff.source})".replace(",000 N", " 000 N"),
        ))
    return found
