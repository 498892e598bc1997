"""Why a stated mass and ours may disagree: each candidate cause gives the figure it would bring about; the nearest fits. Rank 4.

A slip puts another quantity into the column (a total for each, lb for kg): corrected, it agrees. The other causes are two
opinions of the same quantity (another wall, undressed timber, another metal, holes left in), and stay two.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING

from takeoff import sections
from takeoff.weighing.work import Work

if TYPE_CHECKING:
    from takeoff.sections import Section

#: a cause fits where its figure is this close to the stated one
FITS_SHARE = 0.012
_LB_PER_KG = 1 / 0.45359237
_LB_FT_PER_KG_M = 0.3048 / 0.45359237
_LB_FT2_PER_KG_M2 = 0.3048**2 / 0.45359237
_STEEL, _STAINLESS, _ALUMINIUM = 7850.0, 8000.0, 2700.0
_INCHES = re.compile(r"(?<![\d.,/])(\d{1,2})\s*(?:\"|in\.?)?\s*[x×]\s*(\d{1,2})(?![\d.,/])", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Cause:
    """A likely cause in words; `slip` where another quantity stands in the column."""

    text: str
    slip: bool


def cause_of(work: Work, i: int, field: str, given_kg: float) -> Cause | None:
    """The cause whose figure lies nearest to the stated mass of one piece, or None where none fits."""
    best: tuple[float, Cause] | None = None
    for expected, cause in _candidates(work, i, field):
        if not (expected > 0 and math.isfinite(expected)):
            continue
        off = abs(given_kg - expected) / expected
        if off <= FITS_SHARE and (best is None or off < best[0] - 1e-9):
            best = (off, cause)
    return best[1] if best else None


def _candidates(work: Work, i: int, field: str) -> Iterator[tuple[float, Cause]]:
    """What one piece would be stated as under each cause, kg."""
    ours = float(work.nominal[i])
    quantity = float(work.quantity[i])
    length_m = float(work.sizes["length"][i]) / 1000
    if quantity > 1:
        if field == "total_mass":
            yield ours / quantity, Cause("the mass of one piece in the column of totals", slip=True)
        else:
            yield ours * quantity, Cause("a total in the column of the mass of one", slip=True)
    if field == "unit_mass":
        yield ours / length_m, Cause("kg/m in the column of the mass each", slip=True)
    if field == "mass_per_length":
        yield ours * length_m, Cause("the mass of one piece in the column of kg/m", slip=True)
    to_us, us, si = {
        "mass_per_length": (_LB_FT_PER_KG_M, "lb/ft", "kg/m"), "mass_per_area": (_LB_FT2_PER_KG_M2, "lb/ft²", "kg/m²"),
    }.get(field, (_LB_PER_KG, "lb", "kg"))
    yield ours * to_us, Cause(f"a wrong unit: {us} read as {si}", slip=True)
    yield ours / to_us, Cause(f"a wrong unit: {si} read as {us}", slip=True)
    yield ours * 1000, Cause("a wrong unit: a factor of 1000 too much (g or kg for kg or t)", slip=True)
    yield ours / 1000, Cause("a wrong unit: a factor of 1000 too little (t for kg)", slip=True)
    yield from _opinions(work, i, ours)


def _opinions(work: Work, i: int, ours: float) -> Iterator[tuple[float, Cause]]:
    """Causes that leave two opinions of one mass."""
    taken, cut = float(work.round_share[i] + work.opening_share[i]), float(work.cut_share[i])
    if taken > 0:
        yield ours / (1 - taken), Cause("the holes are not deducted there", slip=False)
    if cut > 0:
        yield ours / (1 - cut), Cause("the bevelled ends are not deducted there", slip=False)
    number, made_of = int(work.section_of[i]), int(work.material_of[i])
    section = work.sections[number] if number >= 0 else None
    if made_of >= 0:
        material = work.materials[made_of]
        volume_m3 = float(work.volume_mm3[i]) * 1e-9 * (1 - taken) * (1 - cut)
        if material.kind == "metal":
            if not material.is_carbon_steel:
                yield volume_m3 * _STEEL, Cause(f"{material.name} weighed there as carbon steel (7850 kg/m³)", slip=False)
            if material.family != "stainless":
                yield volume_m3 * _STAINLESS, Cause("weighed there as stainless steel (8000 kg/m³)", slip=False)
            if material.family != "aluminium":
                yield volume_m3 * _ALUMINIUM, Cause("weighed there as aluminium (2700 kg/m³)", slip=False)
    if section is None:
        return
    for ratio, wall in _other_walls(section):
        yield ours * ratio, Cause(f"a wall of {wall:g} mm, one size off", slip=False)
    if section.shape == "board":
        undressed = _undressed(section, work.text(i, "section_text"))
        if undressed is not None:
            yield ours * undressed, Cause("the nominal timber size weighed there, not the dressed one", slip=False)


@cache
def _other_walls(section: Section) -> tuple[tuple[float, float], ...]:
    """Mass ratio and wall in mm of the next thinner and next thicker of a hollow section's series."""
    sizes = section.dimensions_mm
    wall = sizes.get("tf")
    if section.inner_area_mm2 is None or not wall or section.area_mm2 is None or section.family not in sections.FAMILIES:
        return ()
    series: dict[float, float] = {}
    for row in sections.rows(section.family):
        other = row.section
        theirs = other.dimensions_mm
        if other.standard == section.standard and all(
            math.isclose(theirs.get(n, 0.0), sizes.get(n, 0.0), rel_tol=1e-4) for n in ("h", "b")
        ) and other.area_mm2:
            series[theirs["tf"]] = other.area_mm2
    walls = sorted(series)
    at = next((k for k, t in enumerate(walls) if math.isclose(t, wall, rel_tol=1e-4)), None)
    if at is None:
        return ()
    near = [walls[k] for k in (at - 1, at + 1) if 0 <= k < len(walls)]
    return tuple((series[t] / section.area_mm2, t) for t in near)


def _undressed(section: Section, text: str | None) -> float | None:
    """Nominal over dressed area of a board named in inches, ``2x6``."""
    found = _INCHES.search(text) if text else None
    across = [section.dimensions_mm.get(name) or 0.0 for name in ("thickness", "width")]
    if found is None or not all(across):
        return None
    nominal = float(found.group(1)) * float(found.group(2)) * 25.4**2
    ratio = nominal / (across[0] * across[1])
    return ratio if 1.02 < ratio < 2.0 else None
