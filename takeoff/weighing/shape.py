"""Surfaces, lengths and thicknesses of the members, as coatings, contents and holes need them. Rank 4."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from takeoff.weighing.work import Work

if TYPE_CHECKING:
    from takeoff.sections import Section
    from takeoff.weighing.work import Flags, Floats

#: forms of which only a mass is known
BY_MASS = ("each", "length mass", "area mass")
#: a solid is this thick: beyond the last band of every coating table
_SOLID_MM = 1e6


class Shape:
    """Flags and measures of all members.

    by_mass : only a mass is known of it. prismatic : a cross-section over a length. length_m : of one piece.
    outside_m2 : the painting surface and the ends of one piece; NaN where it is known by its mass alone.
    """

    def __init__(self, work: Work) -> None:
        import numpy as np

        self.work = work
        self.by_mass: Flags = work.stated_used | has_form(work, *BY_MASS)
        self.prismatic: Flags = has_form(work, "prismatic")
        self.length_m: Floats = work.sizes["length"] / 1000
        with np.errstate(invalid="ignore", divide="ignore"):
            ends = np.where(self.prismatic, 2 * work.volume_mm3 / work.sizes["length"], 0.0)
        self.outside_m2: Floats = np.where(self.by_mass, np.nan, (work.surface_mm2 + ends) * 1e-6)

    def bore_m2(self) -> Floats:
        """The inside surface of hollow sections; 0 for others."""
        import numpy as np

        inner = self.work.of_section([s.inner_surface_m2_per_m or 0.0 for s in self.work.sections]) * self.length_m
        filled: Floats = np.where(np.isnan(inner), 0.0, inner)
        return filled


def has_form(work: Work, *forms: str) -> Flags:
    """Members whose section has one of these forms."""
    import numpy as np

    flags = np.array([*(s.form in forms for s in work.sections), False], dtype=bool)
    laid: Flags = flags[work.section_of]
    return laid


def thickness_mm(work: Work) -> tuple[Floats, Floats]:
    """The thinnest and the thickest part of each member, mm."""
    import numpy as np

    parts = [_parts(s) for s in work.sections]
    thin = work.of_section([min(p) if p else math.nan for p in parts])
    thick = work.of_section([max(p) if p else math.nan for p in parts])
    for name in ("thickness", "height", "diameter", "width"):
        typed = work.sizes[name]
        thin, thick = (np.where(np.isnan(t), typed, t) for t in (thin, thick))
    return np.where(np.isnan(thin), _SOLID_MM, thin), np.where(np.isnan(thick), _SOLID_MM, thick)


def _parts(section: Section) -> list[float]:
    """The thicknesses of a section's parts in mm; none where the rows' own sizes decide."""
    sizes = section.dimensions_mm
    walls = [sizes[name] for name in ("tw", "tf", "tf2") if sizes.get(name)]
    if walls:
        return walls
    if section.form == "solid":
        return [sizes.get("thickness") or _SOLID_MM]
    own = section.thickness_mm or sizes.get("thickness") or sizes.get("diameter") or sizes.get("width")
    return [own] if own else []
