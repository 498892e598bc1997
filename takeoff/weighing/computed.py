"""Volume, surface and mass of every member whose section and material are known, worked on columns. Rank 4.

Nominal of a tabulated section is its published kg/m for the material that table rests on; another material in that
shape is area × its density. Light and heavy come from the product standard's tolerance where one exists, else from the
dimension tolerance together with the material's density spread.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding
from takeoff.lists.recognise import Recognition
from takeoff.weighing.rule import basis_of_mass, rule_for
from takeoff.weighing.soaking import dry_spread, says_soaked
from takeoff.weighing.wood import THICK_MM, WoodSpread, says_wet, wood_spread
from takeoff.weighing.work import SIZES, Work

if TYPE_CHECKING:
    from takeoff.materials import Material
    from takeoff.sections import Section
    from takeoff.weighing.work import Flags, Floats, Ints

#: a size typed twice may differ by this much before the two are two sizes
SAME_SIZE_MM, SAME_SIZE_SHARE = 0.5, 0.005


def compute(work: Work) -> None:
    """Fill volumes, surfaces and masses of what can be computed, and say what was noticed on the way."""
    import numpy as np

    order = np.argsort(work.codes, kind="stable")
    starts = np.searchsorted(work.codes[order], np.arange(len(work.recognised) + 1))
    section_ids: dict[Section, int] = {}
    material_ids: dict[str, int] = {}
    soaked = {row for text, rows in work.texts("contents") if says_soaked(text) for row in rows.tolist()}
    for code, found in enumerate(work.recognised):
        rows = order[starts[code]:starts[code + 1]]
        for finding, field in found.notes:
            work.say(finding, rows, field)
        if found.section is not None:
            number = section_ids.setdefault(found.section, len(section_ids))
            if number == len(work.sections):
                work.sections.append(found.section)
            work.section_of[rows] = number
        if found.material is not None:
            number = material_ids.setdefault(found.material.key, len(material_ids))
            if number == len(work.materials):
                work.materials.append(found.material)
            work.material_of[rows] = number
        if found.section is not None and len(rows):
            _compute_group(work, rows, found, soaked)


def _compute_group(work: Work, rows: Ints, found: Recognition, soaked: set[int]) -> None:
    """One group: all rows with the same section and material texts."""
    import numpy as np

    from takeoff.sections import pieces

    section, material = found.section, found.material
    assert section is not None
    _take_text_length(work, rows, found, section)
    rows = _without_contradictions(work, rows, section)
    if not len(rows):
        return
    sizes = {f"{name}_mm": work.sizes[name][rows] for name in SIZES}
    piece = pieces.columns(section, len(rows), **sizes, material_kind=material.kind if material else None)
    _take_areas(work, rows, section, piece)
    work.measured.bring_back(rows, section, material, work.sizes, piece)
    volume = piece["volume_mm3"]
    work.volume_mm3[rows] = volume
    work.surface_mm2[rows] = piece["surface_mm2"]
    missing = np.asarray(piece["missing"], dtype=object)
    for name in sorted({m for m in set(missing.tolist()) if m}):
        for i in rows[missing == name].tolist():
            work.reasons.setdefault(i, f"the {name} is missing")
    if section.form in ("each", "length mass", "area mass"):
        mass = piece["mass_kg"]
        work.set_mass(rows, (mass * piece["light_factor"], mass, mass * piece["heavy_factor"]), basis_of_mass(section))
        return
    if material is None or material.density.nominal is None:
        return
    for part, wood in _by_wetness(work, rows, section, material, soaked):
        rule = rule_for(section, material, wood)
        chosen = rows[part]
        mass = volume[part] * rule.kg_per_mm3
        light, heavy = piece["light_factor"][part] * rule.low_share, piece["heavy_factor"][part] * rule.high_share
        work.set_mass(chosen, (mass * light, mass, mass * heavy), rule.basis)
        if wood is not None and wood.moisture_open:
            work.say(Finding("note", "moisture-unknown", wood.why, right="[masses] moisture_percent in the job file"),
                     chosen[~np.isnan(mass)], "material")


def _take_areas(work: Work, rows: Ints, section: Section, piece: dict[str, Any]) -> None:
    """A sheet, or what has a mass per m², whose row gives its area in place of a width and a length."""
    import numpy as np

    if section.form not in ("sheet", "area mass"):
        return
    area_mm2 = work.frame["stated_area_m2"].to_numpy(dtype=float)[rows] * 1e6
    blank = np.isnan(work.sizes["width"][rows]) & np.isnan(work.sizes["length"][rows])
    use = blank & (area_mm2 > 0) & np.isin(piece["missing"].astype(str), ("width", "length"))
    if not use.any():
        return
    if section.form == "sheet":
        thickness = np.full(len(rows), section.dimensions_mm.get("thickness") or np.nan)
        for name in ("thickness", "height"):
            thickness = np.where(np.isnan(thickness), work.sizes[name][rows], thickness)
        piece["volume_mm3"][use], piece["surface_mm2"][use] = (area_mm2 * thickness)[use], 2 * area_mm2[use]
    else:
        piece["mass_kg"][use] = (area_mm2 * 1e-6 * (section.kg_per_m2 or np.nan))[use]
    piece["missing"][use] = ""
    work.say(Finding("note", "section-note", "the row's area takes the place of width × length"), rows[use], "area")


def _by_wetness(
    work: Work, rows: Ints, section: Section, material: Material, soaked: set[int]
) -> list[tuple[Flags, WoodSpread | None]]:
    """The rows of a group, parted by how wet their wood may be; one part for anything that is no wood."""
    import numpy as np

    everything = np.ones(len(rows), dtype=bool)
    if not material.is_wood:
        return [(everything, None)]
    across = [section.dimensions_mm.get(name) for name in ("thickness", "width")]
    sizes = [np.full(len(rows), typed) if typed else work.sizes[name][rows]
             for name, typed in zip(("thickness", "width"), across, strict=True)]
    thick = np.nan_to_num(np.fmin(*sizes), nan=0.0) > THICK_MM
    # The rows of a group share their texts.
    first = int(rows[0])
    is_wet = says_wet(*(work.text(first, f"{name}_text") for name in ("material", "section")))
    moisture = work.job.masses.moisture_percent
    under_water = np.array([i in soaked for i in rows.tolist()], dtype=bool) if soaked else ~everything
    parts: list[tuple[Flags, WoodSpread | None]] = []
    if under_water.any():
        # What the water adds stands in a column of its own; the bare wood is then the dry one.
        parts.append((under_water, dry_spread(material)))
    for is_thick in (False, True):
        part = (thick == is_thick) & ~under_water
        if part.any():
            parts.append((part, wood_spread(material, wet_text=is_wet, thick=is_thick, moisture_percent=moisture)))
    return parts


def _take_text_length(work: Work, rows: Ints, found: Recognition, section: Section) -> None:
    """A length that the section text carries serves where the row has none; where the row repeats a size, it is used once."""
    import numpy as np

    if found.text_length_mm is None:
        return
    typed = work.sizes["length"][rows]
    blank = np.isnan(typed)
    work.sizes["length"][rows[blank]] = found.text_length_mm
    given = rows[blank].tolist()
    work.say(Finding("assumed", "size-given-twice", "the length is taken from the section text",
                     read=f"{found.text_length_mm:g} mm"), given, "section")
    for i in given:
        work.members.assumed.setdefault(i, set()).add("length")
    across = [v for k, v in section.dimensions_mm.items() if k in ("width", "thickness")]
    repeats = np.zeros(len(rows), dtype=bool)
    for size in across:
        repeats |= _same(typed, np.full(len(rows), size))
    repeats &= ~_same(typed, np.full(len(rows), found.text_length_mm))
    work.sizes["length"][rows[repeats]] = found.text_length_mm
    clash = ~blank & ~repeats & ~_same(typed, np.full(len(rows), found.text_length_mm))
    _refuse_clash(work, rows[clash], "length", f"{found.text_length_mm:g} mm")


def _without_contradictions(work: Work, rows: Ints, section: Section) -> Ints:
    """Rows whose size columns do not contradict the sizes of a made-to-size section; the others are refused."""
    import numpy as np

    if section.published_kg_per_m is None:
        # (A tabulated section is named whole; a width column beside it may hold anything of it.)
        known = [v for v in section.dimensions_mm.values() if v]
        if section.thickness_mm:
            known.append(section.thickness_mm)
        for name in ("width", "thickness", "height", "diameter"):
            if name in section.needs or not known:
                continue
            typed = work.sizes[name][rows]
            fits = np.isnan(typed)
            if fits.all():
                continue
            for size in known:
                fits |= _same(typed, np.full(len(rows), size))
            _refuse_clash(work, rows[~fits], name, section.designation)
    if not work.reasons:
        return rows
    clear: Ints = rows[np.array([i not in work.reasons for i in rows.tolist()], dtype=bool)]
    return clear


def _refuse_clash(work: Work, rows: Ints, field: str, read: str) -> None:
    if not len(rows):
        return
    message = f"the {field} in its column and the size in the section text differ"
    work.say(Finding("refused", "size-given-twice", message, read=read, right="one of the two"), rows, field)
    for i in rows.tolist():
        work.reasons.setdefault(i, message)


def _same(typed: Floats, size: Floats) -> Flags:
    import numpy as np

    with np.errstate(invalid="ignore"):
        same: Flags = np.abs(typed - size) <= np.maximum(SAME_SIZE_MM, SAME_SIZE_SHARE * size)
    return same
