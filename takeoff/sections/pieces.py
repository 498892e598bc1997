"""Volume, surface and bounds of many pieces of one section at once, from the sizes of their rows. Rank 2.

The list room reads each distinct section text once and hands the rows' sizes here as columns. Which size plays which
part:

* prismatic of known cross-section: `length`;
* flat: `width` × `thickness`; round bar: `diameter`, else `thickness`; square bar and hexagon: `width`, else
  `diameter`, else `thickness`; board: `thickness` × `width` (else `height`), each along `length`;
* sheet: `thickness` (else `height`) over `width` × `length`;
* block: `length` × `width` × `height`, a missing height taken from `thickness`;
* cylinder: `diameter` × `length` (else `height`, `thickness`); sphere: `diameter`; triangle: half of `length` × `width` (else
  `height`) × `thickness`;
* ring sector and wedge: the face through `width` (else `length`, for a wedge or stone whose width column is so named).

A size that the section text gave wins over the column. Surfaces are the painting surface: sheets and solids all round,
prismatic pieces without their ends.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from takeoff.sections import bodies, made, solids, tolerances
from takeoff.sections.section import Section

if TYPE_CHECKING:
    import numpy as np

    Floats = np.ndarray[Any, Any]

#: Names of the columns, in the order in which a missing one is told.
FIELDS = ("thickness", "width", "height", "diameter", "length")


class _Columns:
    """The sizes of the rows, a size of the section's own taking the place of the column."""

    def __init__(self, section: Section, n: int, given: dict[str, Floats | None]) -> None:
        import numpy as np

        self.np = np
        self.section = section
        self.n = n
        self.given = {k: np.full(n, np.nan) if v is None else np.asarray(v, dtype=float) for k, v in given.items()}
        self.missing = np.full(n, "", dtype=object)

    def size(self, name: str, *otherwise: str) -> Floats:
        """A column of sizes in mm; where it and its stand-ins are blank or not above zero, NaN, and `missing` says so."""
        np = self.np
        own = self.section.dimensions_mm.get(name)
        if own is not None and self.section.area_mm2 is None:
            whole: Floats = np.full(self.n, own)
            return whole
        found: Floats = self.given[name].copy()
        for other in otherwise:
            blank = np.isnan(found)
            found[blank] = self.given[other][blank]
        found[~(np.isfinite(found) & (found > 0))] = np.nan
        absent = np.isnan(found) & (self.missing == "")
        self.missing[absent] = name
        return found

    def limits(self, rule: str, beyond: str, size: Floats) -> tuple[Floats, Floats]:
        """Light and heavy shares of one size by a dimension rule."""
        np = self.np
        low, high = tolerances.thickness_limits(rule, size)
        if beyond != rule:
            untouched = (low == size) & (high == size) & ~np.isnan(size)
            if untouched.any():
                low[untouched], high[untouched] = tolerances.thickness_limits(beyond, size[untouched])
        with np.errstate(invalid="ignore", divide="ignore"):
            return low / size, high / size


def columns(
    section: Section,
    n: int,
    length_mm: Floats | None = None,
    width_mm: Floats | None = None,
    thickness_mm: Floats | None = None,
    height_mm: Floats | None = None,
    diameter_mm: Floats | None = None,
    material_kind: str | None = None,
) -> dict[str, Any]:
    """Volumes and bounds of `n` pieces of one section; sizes in mm as float arrays with NaN where a row has none.

    Returns arrays of length `n`: ``volume_mm3``, ``surface_mm2`` (NaN where unknown), ``light_factor``,
    ``heavy_factor`` (on the volume, or on the mass), ``missing`` (name of the size a row lacks, else ""), and for forms
    that are only a mass ``mass_kg`` (NaN for the others).
    """
    import numpy as np

    c = _Columns(
        section, n, {"length": length_mm, "width": width_mm, "thickness": thickness_mm, "height": height_mm, "diameter": diameter_mm}
    )
    light, heavy = np.full(n, section.factor.light), np.full(n, section.factor.heavy)
    volume, surface, mass = np.full(n, np.nan), np.full(n, np.nan), np.full(n, np.nan)
    if section.form == "each":
        mass[:] = section.kg_each if section.kg_each is not None else np.nan
    elif section.form == "length mass":
        mass = c.size("length") / 1000 * (section.published_kg_per_m or np.nan)
    elif section.form == "area mass":
        width, length = c.size("width"), c.size("length")
        # The surface of a grating or a fabric is not told by its plan.
        mass = width * length * 1e-6 * (section.kg_per_m2 or np.nan)
    elif section.form == "sheet":
        volume, surface, light, heavy = _sheet(c, section, material_kind)
    elif section.form == "solid":
        volume, surface, light, heavy = _solid(c, section)
    elif section.area_mm2 is not None:
        length = c.size("length")
        volume = section.area_mm2 * length
        surface = (section.surface_m2_per_m or 0.0) * 1000 * length
    else:
        volume, surface, light, heavy = _bar(c, section, material_kind)
    return {
        "volume_mm3": volume,
        "surface_mm2": surface,
        "light_factor": light,
        "heavy_factor": heavy,
        "missing": c.missing,
        "mass_kg": mass,
    }


def _sheet(c: _Columns, section: Section, kind: str | None) -> tuple[Floats, Floats, Floats, Floats]:
    rule = section.tolerance.rule if section.tolerance is not None else made.SHEET_RULES.get(kind, "sheet-planning")
    thickness = c.size("thickness", "height")
    width, length = c.size("width"), c.size("length")
    light, heavy = c.limits(rule, rule, thickness)
    light, heavy = light * section.factor.light, heavy * section.factor.heavy
    return thickness * width * length, 2 * (width * length + thickness * (width + length)), light, heavy


def _solid(c: _Columns, section: Section) -> tuple[Floats, Floats, Floats, Floats]:
    np = c.np
    if section.volume_m3 is not None:
        return (
            np.full(c.n, section.volume_m3 * 1e9),
            np.full(c.n, (section.surface_m2 or np.nan) * 1e6),
            np.full(c.n, section.factor.light),
            np.full(c.n, section.factor.heavy),
        )
    sizes: tuple[Floats, ...]
    if section.shape in bodies.BY_COLUMNS:
        return _body(c, section)
    if section.shape == "block":
        sizes = (c.size("length"), c.size("width"), c.size("height", "thickness"))
        length, width, height = sizes
        volume = length * width * height
        surface = 2 * (length * width + width * height + height * length)
    else:
        area, perimeter, around = solids.face(section.shape, section.dimensions_mm)
        width = c.size("width", "length")
        sizes = (np.full(c.n, around[0]), np.full(c.n, around[1]), width)
        volume, surface = area * width, 2 * area + perimeter * width
    return volume, surface, *_size_limits(c, section, sizes)


def _body(c: _Columns, section: Section) -> tuple[Floats, Floats, Floats, Floats]:
    """Cylinders, spheres and triangles whose sizes stand in the row."""
    np = c.np
    if section.shape == "sphere":
        diameter = c.size("diameter")
        volume, surface, sizes = math.pi * diameter**3 / 6, math.pi * diameter**2, (diameter, diameter, diameter)
    elif section.shape == "cylinder":
        diameter, height = c.size("diameter"), c.size("length", "height", "thickness")
        volume, surface = math.pi * diameter**2 / 4 * height, math.pi * diameter * (diameter / 2 + height)
        sizes = (diameter, diameter, height)
    else:
        a, b, t = c.size("length"), c.size("width", "height"), c.size("thickness")
        volume, surface, sizes = a * b * t / 2, a * b + t * (a + b + np.hypot(a, b)), (a, b, t)
    return volume, surface, *_size_limits(c, section, sizes)


def _size_limits(c: _Columns, section: Section, sizes: tuple[Floats, ...]) -> tuple[Floats, Floats]:
    """Light and heavy shares of a volume with every size at its least and greatest."""
    rule = section.tolerance.rule if section.tolerance is not None else "block"
    light, heavy = c.np.full(c.n, section.factor.light), c.np.full(c.n, section.factor.heavy)
    for size in sizes:
        low, high = c.limits(rule, rule, size)
        light, heavy = light * low, heavy * high
    return light, heavy


def _bar(c: _Columns, section: Section, kind: str | None) -> tuple[Floats, Floats, Floats, Floats]:
    np = c.np
    shape = section.shape
    ones = np.ones(c.n)
    if shape in ("flat", "board"):
        thickness = _board_thickness(c) if shape == "board" else c.size("thickness")
        width = c.size("width", "height") if shape == "board" else c.size("width")
        thickness, width = np.fmin(thickness, width) * (thickness / thickness), np.fmax(thickness, width) * (width / width)
        area, around = thickness * width, 2 * (thickness + width)
        light, heavy = ones, ones
        for name, size in (("width", width), ("thickness", thickness)):
            rule, beyond = made.bar_rule(shape, kind, name)
            low, high = c.limits(rule, beyond, size)
            if shape == "flat" and name == "thickness" and kind in ("metal", None):
                plate_low, plate_high = c.limits("plate", "plate", size)
                wide = width > 150
                low, high = np.where(wide, plate_low, low), np.where(wide, plate_high, high)
            light, heavy = light * low, heavy * high
    else:
        size = c.size("diameter", "thickness") if shape == "round bar" else c.size("width", "diameter", "thickness")
        share = {"round bar": math.pi / 4, "square bar": 1.0, "hexagon": math.sqrt(3) / 2}[shape]
        area = share * size**2
        around = {"round bar": math.pi, "square bar": 4.0, "hexagon": 2 * math.sqrt(3)}[shape] * size
        rule, beyond = made.bar_rule(shape, kind, "width")
        low, high = c.limits(rule, beyond, size)
        light, heavy = low**2, high**2
    length = c.size("length")
    return area * length, around * length, light, heavy


def _board_thickness(c: _Columns) -> Floats:
    """A board's thickness; of timber told by width and height, the height stands in, and the lesser is the thickness."""
    if "thickness" in c.section.dimensions_mm or "width" in c.section.dimensions_mm:
        return c.size("thickness")
    with_width = ~c.np.isnan(c.given["width"])
    filled = c.np.where(c.np.isnan(c.given["thickness"]) & with_width, c.given["height"], c.given["thickness"])
    before, c.given["thickness"] = c.given["thickness"], filled
    thickness = c.size("thickness")
    c.given["thickness"] = before
    return thickness


def cut_depths_mm(section: Section) -> tuple[float, float]:
    """Half the depth that an end cut runs across, and the lesser distance from an edge to the centroid, mm; NaN where not known.

    A bevel at an angle from square, in the plane of the web (of the width, for flats and boards), takes off the axis tan(angle)
    times the distance from the centroid to the long face. Which face is long is not told: of an unsymmetrical section half the
    depth is the mean of the two, the lesser distance the least that can be lost.
    """
    sizes = section.dimensions_mm
    if section.form not in ("prismatic", "sheet"):
        return math.nan, math.nan
    depth = sizes.get("h") or sizes.get("diameter") or sizes.get("width")
    if not depth:
        return math.nan, math.nan
    centre = section.centroid_mm[1] if section.centroid_mm and len(section.centroid_mm) > 1 and sizes.get("h") else depth / 2
    return depth / 2, max(0.0, min(centre, depth - centre))
