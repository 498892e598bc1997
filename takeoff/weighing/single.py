"""One piece weighed at the terminal, in plain floats: a look-up loads no array library."""

from __future__ import annotations

from dataclasses import dataclass

from takeoff import materials, sections
from takeoff.bounds import Bounds
from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.weighing.basis import Basis
from takeoff.weighing.rule import basis_of_mass, rule_for
from takeoff.weighing.wood import THICK_MM, says_wet, wood_spread


@dataclass(frozen=True, slots=True)
class Weighing:
    """One line of a takeoff: a section, a material, a length in mm, a quantity, and what they weigh in kg."""

    section: sections.Section
    material: materials.Material | None
    length_mm: float | None
    quantity: int
    volume_m3: float | None
    surface_m2: float | None
    each_kg: Bounds
    basis: Basis
    findings: tuple[Finding, ...]

    @property
    def total_kg(self) -> Bounds:
        return self.each_kg * self.quantity


def weigh_one(section_text: str, length_mm: float | None, material_text: str | None, quantity: int) -> Weighing:
    """Weigh `quantity` pieces of a section. Without a material, a steel standard's section is taken as carbon steel.

    Raises InputError where the section or material is not surely known, or a size is missing.
    """
    findings: list[Finding] = []
    match = sections.read(section_text)
    hint = match.section.material_hint if match.section else None
    material = _material(material_text, hint)
    if material is not None:
        match = sections.read(section_text, material_kind=material.kind)
    section = match.section
    if section is None:
        near = ", ".join(c.designation for c in match.candidates[:4])
        raise InputError(match.reason or "the section is not known", read=section_text, right=f"one of {near}" if near else None)
    if match.match in ("similar", "ambiguous"):
        kind = f"{match.match}-section"
        findings.append(Finding("assumed", kind, f"taken as {section.designation}" + (f": {match.reason}" if match.reason else "")))
    if section.hollow_standard_assumed:
        findings.append(Finding("note", "hollow-standard-assumed", "no standard named: hot finished (EN 10210-2) is nominal, light "
                                "reaches down to cold formed"))
    findings += [Finding("note", "section-note", note) for note in match.notes]
    length = length_mm if length_mm is not None else match.length_mm
    if material is None and section.form in ("prismatic", "sheet", "solid"):
        if not section.is_steel_standard:
            raise InputError("this section needs a material", read=section_text, right="--material, such as --material S355")
        material = materials.by_key(materials.DEFAULT_STEEL)
        findings.append(Finding("assumed", "material-absent", "no material named: taken as carbon steel", right="--material"))
    return _weigh(section, material, length, quantity, tuple(findings), (section_text, material_text))


def _material(text: str | None, hint: str | None) -> materials.Material | None:
    if text is None:
        return None
    match = materials.lookup(text, hint=hint)
    if match.material is None or match.match == "similar":
        near = ", ".join(c.name for c in match.candidates[:4])
        raise InputError(match.reason or "the material is not surely known", read=text, right=f"one of {near}" if near else None)
    if match.material.density.nominal is None:
        raise InputError("no source gives this material one density", read=text, right="another material")
    return match.material


def _weigh(
    section: sections.Section, material: materials.Material | None, length_mm: float | None, quantity: int,
    findings: tuple[Finding, ...], texts: tuple[str | None, ...],
) -> Weighing:
    missing = [name for name in section.needs if name != "length" or length_mm is None]
    if missing:
        sizes = "a length" if missing == ["length"] else "all sizes in the section text"
        raise InputError(f"the {missing[0]} is missing", read=section.designation, right=sizes)
    if section.form in ("each", "length mass"):
        figure = section.kg_each if section.form == "each" else (section.published_kg_per_m or 0.0) * (length_mm or 0.0) / 1000.0
        each = section.factor * (figure or 0.0)
        return Weighing(section, material, length_mm, quantity, None, None, each, basis_of_mass(section), findings)
    factor = section.factor
    if section.volume_m3 is not None:
        volume_mm3, surface = section.volume_m3 * 1e9, section.surface_m2
    elif section.area_mm2 is not None and length_mm is not None:
        volume_mm3 = section.area_mm2 * length_mm
        surface = None if section.surface_m2_per_m is None else section.surface_m2_per_m * length_mm / 1000.0
    elif section.form == "sheet" and section.thickness_mm and length_mm is not None:
        thick, width = section.thickness_mm, section.dimensions_mm["width"]
        volume_mm3 = thick * width * length_mm
        surface = 2e-6 * (width * length_mm + thick * (width + length_mm))
        limits = section.thickness_bounds_mm or Bounds.exact(thick)
        factor = limits * (1 / thick)
    else:
        raise InputError("the sizes of the piece are not all known", read=section.designation, right="all sizes in the section text")
    assert material is not None
    across = [section.dimensions_mm[name] for name in ("thickness", "width") if name in section.dimensions_mm]
    thick = bool(across) and min(across) > THICK_MM
    wood = wood_spread(material, wet_text=says_wet(*texts), thick=thick, moisture_percent=None)
    if wood is not None:
        findings = (*findings, Finding("note", "moisture-unknown", wood.why))
    rule = rule_for(section, material, wood)
    nominal = volume_mm3 * rule.kg_per_mm3
    each = Bounds(nominal * factor.light * rule.low_share, nominal, nominal * factor.heavy * rule.high_share)
    return Weighing(section, material, length_mm, quantity, volume_mm3 * 1e-9, surface, each, rule.basis, findings)
