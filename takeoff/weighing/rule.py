"""How a piece's mass follows from its volume: the nominal kg for each mm³, the density's share of the bounds, the basis.

Nominal of a tabulated section is its published kg/m for the material that table rests on; another material in that
shape is area × its density. Product standards fix the mass of steel on one density, so there the tolerance alone bounds
it; any other material's density spread widens the bounds.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff.bounds import Spread
from takeoff.provenance import Source
from takeoff.weighing.basis import Basis
from takeoff.weighing.wood import WoodSpread

if TYPE_CHECKING:
    from takeoff.materials import Material
    from takeoff.sections import Section


@dataclass(frozen=True, slots=True)
class MassRule:
    """mass = volume × `kg_per_mm3`; light and heavy also take the section's own factors."""

    kg_per_mm3: float
    low_share: float
    high_share: float
    basis: Basis


def uses_published(section: Section, material: Material) -> bool:
    """Whether the section's published kg/m is the nominal mass in this material: the one its table rests on."""
    return (
        section.published_kg_per_m is not None and material.is_carbon_steel
        and material.density.nominal == section.published_density_kg_m3
    )


def rule_for(section: Section, material: Material, wood: WoodSpread | None = None) -> MassRule:
    """The rule for one section in one material; `wood` replaces its density spread and says why.

    Raises ValueError where the material has no nominal density.
    """
    density = wood.spread if wood else material.density
    if density.nominal is None:
        raise ValueError(f"{material.key} has no nominal density")
    if uses_published(section, material):
        assert section.published_kg_per_m is not None
        per_mm3 = section.published_kg_per_m / 1000.0 / (section.area_mm2 or float("nan"))
    else:
        per_mm3 = density.nominal * 1e-9
    if material.is_carbon_steel:
        return MassRule(per_mm3, 1.0, 1.0, _basis(section, material, density, ""))
    basis = _basis(section, material, density, f" ({wood.why})" if wood else "")
    return MassRule(per_mm3, density.low / density.nominal, density.high / density.nominal, basis)


def basis_of_mass(section: Section) -> Basis:
    """The basis of a form that is only a mass (kg each, kg/m, kg/m²)."""
    figure = section.kg_each or section.kg_per_m2 or section.published_kg_per_m or float("nan")
    unit = {"each": "kg each", "area mass": "kg/m² × area", "length mass": "kg/m × length"}.get(section.form, "kg")
    text, source = _tolerance(section)
    return Basis(f"{figure:g} {unit}", section.source, text, source)


def _basis(section: Section, material: Material, density: Spread, remark: str) -> Basis:
    text, source = _tolerance(section)
    if uses_published(section, material):
        rule = f"{section.published_kg_per_m:g} kg/m × length ({section.designation})"
        return Basis(rule, section.source, text, source)
    shape = {
        "prismatic": f"area {section.area_mm2:,.6g} mm² × length" if section.area_mm2 else "cross-section × length",
        "sheet": "thickness × width × length",
    }.get(section.form, "volume")
    if not material.is_carbon_steel:
        spread = f"density {density.low:.4g} to {density.high:.4g} kg/m³{remark}"
        text = f"{text}; {spread}" if section.tolerance else spread
        source = source if section.tolerance else material.density_source
    rule = f"{shape} × {density.nominal:.5g} kg/m³ ({material.name})"
    return Basis(rule, material.density_source, text, source, own=material.own)


def _tolerance(section: Section) -> tuple[str, Source]:
    tolerance = section.tolerance
    if tolerance is None:
        return "no tolerance known: bounds equal nominal", section.source
    return tolerance.text, Source(tolerance.title, tolerance.clause, tolerance.evidence)
