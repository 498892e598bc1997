"""What a section is, once read: its sizes, its area and surface, how far its mass may stray, and on what source. Rank 2.

`Section` is what the rest of the house works with; `SectionMatch` is the answer to a text, including the refusals.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Literal

from takeoff.bounds import Bounds
from takeoff.provenance import Source

#: prismatic: needs a length; sheet: a thickness over a width and a length (or an area); solid: a volume by itself;
#: area mass: kg/m²; length mass: kg/m only; each: kg each.
Form = Literal["prismatic", "sheet", "solid", "area mass", "length mass", "each"]
Match = Literal["exact", "alias", "similar", "ambiguous", "none"]

#: kg/m³ behind published section masses (the notes of two section handbooks; 490 lb/ft³ is 7849).
STEEL_DENSITY = 7850.0


EXACT = Bounds.exact(1.0)


@dataclass(frozen=True, slots=True)
class Tolerance:
    """The rule that sets light and heavy: a row of tolerances.csv. `kind` is ``mass`` or ``dimension``."""

    rule: str
    title: str
    clause: str
    evidence: str
    text: str
    kind: Literal["mass", "dimension"]

    def as_record(self) -> dict[str, str]:
        return {
            "rule": self.rule,
            "title": self.title,
            "clause": self.clause,
            "evidence": self.evidence,
            "text": self.text,
            "kind": self.kind,
        }


@dataclass(frozen=True, slots=True)
class Section:
    """One section or shape, in mm.

    designation, family, standard : canonical name, family code and product standard (None where made to size).
    shape : which geometry `dimensions_mm` belongs to, such as ``I parallel``, ``angle``, ``plate``, ``ring sector``.
    form, needs : what kind of piece it makes, and the size fields a row must still give.
    area_mm2, inner_area_mm2 : cross-section of the material, and of the bore of a hollow section.
    design_area_mm2 : the published design-wall area of ASTM A500 sections, where it differs from `area_mm2`, which is
        of the nominal wall that the published mass rests on.
    surface_m2_per_m, inner_surface_m2_per_m : outer (painting) surface without the ends, and the bore's.
    centroid_mm : from the left and bottom of the enclosing box: the heel of an angle and the back of a channel's web
        are at the left, an angle's horizontal leg and a tee's stem end at the bottom. Solids: from the box's low corner.
    volume_m3, surface_m2 : of a solid.
    thickness_mm, thickness_bounds_mm : of a sheet.
    published_kg_per_m, published_density_kg_m3 : the table's mass and the density it rests on.
    kg_per_m2, kg_each : for forms that are only a mass (``kg_per_m`` only: `published_kg_per_m` with form ``length mass``).
    factor, tolerance : multiplies area, volume or mass for light / nominal / heavy, and the rule it comes from. It
        covers the larger of table and area × density, and every reading named in `readings`.
    is_steel_standard : the product standard is itself a steel standard, so a missing material may be taken as steel.
    material_hint : ``metal`` or ``wood``: the kind this section asks of an ambiguous material text.
    hollow_standard_assumed : no standard was named for a hollow section (hot finished was taken).
    note : what a checker should know of this row.
    """

    designation: str
    family: str
    shape: str
    form: Form
    source: Source
    dimensions_mm: Mapping[str, float] = field(hash=False)
    standard: str | None = None
    needs: tuple[str, ...] = ()
    area_mm2: float | None = None
    inner_area_mm2: float | None = None
    design_area_mm2: float | None = None
    surface_m2_per_m: float | None = None
    inner_surface_m2_per_m: float | None = None
    centroid_mm: tuple[float, ...] | None = None
    volume_m3: float | None = None
    surface_m2: float | None = None
    thickness_mm: float | None = None
    thickness_bounds_mm: Bounds | None = None
    published_kg_per_m: float | None = None
    published_density_kg_m3: float | None = None
    kg_per_m2: float | None = None
    kg_each: float | None = None
    factor: Bounds = EXACT
    tolerance: Tolerance | None = None
    is_steel_standard: bool = False
    material_hint: str | None = None
    hollow_standard_assumed: bool = False
    readings: tuple[str, ...] = ()
    note: str = ""

    def kg_per_m(self, density_kg_m3: float = STEEL_DENSITY) -> Bounds | None:
        """Light, nominal, heavy kg/m in a material of exactly this density; None for a form without a kg/m.

        Nominal is the published figure where the density is the one that figure rests on, else area × density.
        """
        if self.form == "length mass":
            nominal = self.published_kg_per_m
        elif self.area_mm2 is None:
            return None
        elif self.published_kg_per_m is not None and density_kg_m3 == self.published_density_kg_m3:
            nominal = self.published_kg_per_m
        else:
            nominal = self.area_mm2 * density_kg_m3 * 1e-6
        return None if nominal is None else self.factor * nominal

    def as_record(self) -> dict[str, Any]:
        """Plain values for the JSON, SI, without masses that depend on a material."""
        return {
            "designation": self.designation,
            "family": self.family,
            "standard": self.standard,
            "shape": self.shape,
            "form": self.form,
            "needs": list(self.needs),
            "dimensions_mm": dict(self.dimensions_mm),
            "area_mm2": self.area_mm2 if self.design_area_mm2 is None else self.design_area_mm2,
            "inner_area_mm2": self.inner_area_mm2,
            "surface_m2_per_m": self.surface_m2_per_m,
            "centroid_mm": None if self.centroid_mm is None else list(self.centroid_mm),
            "volume_m3": self.volume_m3,
            "surface_m2": self.surface_m2,
            "thickness_mm": self.thickness_mm,
            "published_kg_per_m": self.published_kg_per_m,
            "kg_per_m2": self.kg_per_m2,
            "kg_each": self.kg_each,
            "factor": self.factor.as_record(),
            "tolerance": None if self.tolerance is None else self.tolerance.as_record(),
            "source": self.source.as_record(),
            "readings": list(self.readings),
            "note": self.note,
        }


@dataclass(frozen=True, slots=True)
class Candidate:
    """A real designation near what was asked; `score` 0 to 100."""

    designation: str
    score: float


@dataclass(frozen=True, slots=True)
class SectionMatch:
    """The answer to one section text.

    match : ``exact`` or ``alias`` (weighed); ``similar`` with a section (assumed: hidden or look-alike characters were
        read through) or without (a suggestion only); ``ambiguous`` with a section (assumed: nominal is the first
        reading, its factor covers all) or without (refused); ``none`` (refused).
    length_mm : a piece length that the text itself carries.
    reason, kind : why it was refused, and the kind of finding.
    """

    query: str
    match: Match
    section: Section | None = None
    length_mm: float | None = None
    reason: str = ""
    kind: str = ""
    candidates: tuple[Candidate, ...] = ()
    notes: tuple[str, ...] = ()
