"""Sections made to size: plate, flat, round, square, hexagon, board, block, tube, any size a list may give. Rank 2.

Their area is geometry, their bounds the dimension tolerance of the product standard at its least and greatest, or a
planning figure where no standard speaks. A size that is still unknown is named in `needs`; `pieces.columns` then takes
it from the row.
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from takeoff.bounds import Bounds
from takeoff.errors import DataError
from takeoff.provenance import Source
from takeoff.sections import shapes, tolerances
from takeoff.sections.section import STEEL_DENSITY, Form, Section, Tolerance

#: What thickness rule a sheet follows, by the kind of its material.
SHEET_RULES = {"metal": "plate", None: "plate", "wood": "wood-panel", "board": "wood-panel", "glass": "glass"}

#: shape -> family, prefix of its designation, product standard, sizes of its cross-section
BARS: dict[str, tuple[str, str, str, tuple[str, ...]]] = {
    "flat": ("FL", "FL", "EN 10058", ("width", "thickness")),
    "round bar": ("RD", "RD", "EN 10060", ("diameter",)),
    "square bar": ("SQ", "SQ", "EN 10059", ("width",)),
    "hexagon": ("HEX", "HEX", "EN 10061", ("width",)),
    "board": ("Board", "Board", "EN 336", ("thickness", "width")),
}
#: shape -> where its size stands in a catalogue row's terms
_CATALOGUE_TERMS = {"width": "b", "thickness": "tf", "diameter": "b"}


def number(value: float) -> str:
    """A size as people write it: no trailing zeros, no rounding to a neighbour."""
    text = f"{value:.6f}".rstrip("0").rstrip(".")
    return text or "0"


def check_sizes(**sizes: float | None) -> dict[str, float]:
    """The sizes in mm that are known. Raises DataError naming one that cannot be."""
    known = {name: value for name, value in sizes.items() if value is not None}
    for name, value in known.items():
        if not math.isfinite(value) or value <= 0:
            shown = number(value) if math.isfinite(value) else value
            raise DataError(f"{name.replace('_', ' ')} {shown} mm is not a size")
    return known


def computed(title: str) -> Source:
    return Source(title, "geometry of the sizes given", "computed")


def bar_rule(shape: str, kind: str | None, size: str) -> tuple[str, str]:
    """The tolerance rule of one cross-section size, and the rule beyond its range."""
    if shape == "board" or kind == "wood":
        return "en336-t1", "en336-t1"
    if kind not in ("metal", None):
        return "block", "block"
    if shape == "flat":
        return (f"en10058-{size}", "wide-flat" if size == "width" else "plate")
    return {"round bar": "en10060", "square bar": "en10059", "hexagon": "hexagon"}[shape], "bar-large"


def cross_factor(shape: str, kind: str | None, sizes: Mapping[str, float]) -> tuple[Bounds, Tolerance]:
    """Area at the least and greatest sizes over the nominal area, and the rule that binds most."""
    light = heavy = 1.0
    chosen: Tolerance | None = None
    widest = -1.0
    for name in BARS[shape][3]:
        if shape == "flat" and name == "thickness" and sizes.get("width", 0.0) > 150 and kind in ("metal", None):
            limits, tolerance = tolerances.size_limits("plate", sizes[name], "plate")
        else:
            limits, tolerance = tolerances.size_limits(*_swap(shape, kind, name, sizes[name]))
        power = 1 if len(BARS[shape][3]) == 2 else 2
        light *= (limits.light / limits.nominal) ** power
        heavy *= (limits.heavy / limits.nominal) ** power
        if limits.heavy / limits.nominal > widest:
            widest, chosen = limits.heavy / limits.nominal, tolerance
    if chosen is None:  # every shape in BARS has at least one size
        raise DataError("a bar without sizes", read=shape)
    return Bounds(light, 1.0, heavy), chosen


def _swap(shape: str, kind: str | None, name: str, value: float) -> tuple[str, float, str]:
    rule, beyond = bar_rule(shape, kind, name)
    return rule, value, beyond


def bar(
    shape: str,
    sizes: Mapping[str, float | None],
    kind: str | None = None,
    *,
    name: str | None = None,
    published: float | None = None,
    source: Source | None = None,
    note: str = "",
) -> Section:
    """A flat, round, square, hexagon or board from its sizes in mm; unknown ones None. Raises DataError on sizes that cannot be."""
    family, prefix, standard, terms = BARS[shape]
    given = check_sizes(**sizes)
    values = {t: given[t] for t in terms if t in given}
    designation = name or " ".join([prefix, "x".join(number(values[t]) for t in terms)] if len(values) == len(terms) else [prefix])
    needs = (*(t for t in terms if t not in values), "length")
    source = source or computed("Geometry of a " + shape)
    steel = kind in ("metal", None) and shape != "board"
    if len(values) < len(terms):
        return Section(
            designation=designation,
            family=family,
            shape=shape,
            form="prismatic",
            source=source,
            dimensions_mm=values,
            standard=standard if steel or shape == "board" else None,
            needs=needs,
            note=note,
            material_hint="wood" if shape == "board" else "metal" if kind == "metal" else None,
        )
    d = {_CATALOGUE_TERMS[t]: v for t, v in values.items()}
    g = shapes.geometry("flat" if shape == "board" else shape, d)
    factor, tolerance = cross_factor(shape, kind, values)
    return Section(
        designation=designation,
        family=family,
        shape=shape,
        form="prismatic",
        source=source,
        dimensions_mm=values,
        standard=standard if steel or shape == "board" else None,
        needs=needs,
        area_mm2=g.area,
        surface_m2_per_m=g.surface,
        centroid_mm=g.centroid,
        published_kg_per_m=published,
        published_density_kg_m3=STEEL_DENSITY if published else None,
        factor=factor,
        tolerance=tolerance,
        material_hint="wood" if shape == "board" else "metal" if kind == "metal" else None,
        note=note,
    )


def sheet(
    thickness: float | None,
    width: float | None = None,
    length: float | None = None,
    kind: str | None = None,
    *,
    prefix: str = "PL",
    note: str = "",
) -> Section:
    """Plate, sheet, pane or panel, sizes in mm, unknown ones None. Raises DataError on sizes that cannot be."""
    values = check_sizes(thickness=thickness, width=width, length=length)
    rule = SHEET_RULES.get(kind, "sheet-planning")
    shown = [number(v) for v in values.values()] if thickness is not None else []
    limits, tolerance = None, tolerances.rules()[rule][-1].tolerance
    if thickness is not None:
        limits, tolerance = tolerances.size_limits(rule, thickness, rule)
    volume = surface = None
    if thickness is not None and width is not None and length is not None:
        volume = thickness * width * length * 1e-9
        surface = 2 * (width * length + thickness * (width + length)) * 1e-6
    return Section(
        designation=f"{prefix} {'x'.join(shown)}".strip(),
        family=prefix,
        shape="plate",
        form="sheet",
        source=computed("Geometry of a plate"),
        dimensions_mm=values,
        standard="EN 10029" if rule == "plate" and thickness is not None and thickness >= 3 and prefix == "PL" else None,
        needs=tuple(t for t in ("thickness", "width", "length") if t not in values),
        thickness_mm=thickness,
        thickness_bounds_mm=limits,
        volume_m3=volume,
        surface_m2=surface,
        tolerance=tolerance,
        material_hint={"plate": "metal" if kind == "metal" or prefix == "PL" else None, "wood-panel": "wood"}.get(rule),
        note=note,
    )


def block(
    length: float | None,
    width: float | None,
    height: float | None,
    kind: str | None = None,
    *,
    prefix: str = "Block",
    note: str = "",
) -> Section:
    """A rectangular solid, length × width × height in mm, unknown ones None. Raises DataError on sizes that cannot be."""
    values = check_sizes(length=length, width=width, height=height)
    factor, tolerance = Bounds.exact(1.0), tolerances.rules()[solid_rule(kind)][0].tolerance
    volume = surface = centroid = None
    if length is not None and width is not None and height is not None:
        volume = length * width * height * 1e-9
        surface = 2 * (length * width + width * height + height * length) * 1e-6
        centroid = (length / 2, width / 2, height / 2)
        factor = block_factor((length, width, height), kind)
    shown = "x".join(number(v) for v in values.values()) if len(values) == 3 else ""
    return Section(
        designation=f"{prefix} {shown}".strip(),
        family=prefix,
        shape="block",
        form="solid",
        source=computed("Geometry of a block"),
        dimensions_mm=values,
        needs=tuple(t for t in ("length", "width", "height") if t not in values),
        centroid_mm=centroid,
        volume_m3=volume,
        surface_m2=surface,
        factor=factor,
        tolerance=tolerance,
        material_hint="wood" if kind == "wood" else None,
        note=note,
    )


def solid_rule(kind: str | None) -> str:
    """The dimension rule of a solid by the kind of its material; the widest where it is not known."""
    return {"metal": "solid-metal", "wood": "en336-t1"}.get(kind or "", "block")


def block_factor(sizes: tuple[float, ...], kind: str | None = None) -> Bounds:
    """Volume with every size at its least and greatest over the nominal volume."""
    light = heavy = 1.0
    rule = solid_rule(kind)
    for size in sizes:
        limits, _ = tolerances.size_limits(rule, size, rule)
        light *= limits.light / size
        heavy *= limits.heavy / size
    return Bounds(light, 1.0, heavy)


def tube(outer: tuple[float, float] | float, wall: float, *, note: str = "") -> Section:
    """A round or rectangular tube made to size, no catalogue row. Corners of a box are 2 t outside and t inside (cold formed).

    Bounds: the wall limits of EN 10219-2 with the outside ±1 %; heavy of a box is the sharp-cornered box's.
    Raises DataError on a wall that leaves no bore.
    """
    if isinstance(outer, tuple):
        h, b = max(outer), min(outer)
        d = {"h": h, "b": b, "tf": wall, "r1": 2 * wall, "r2": wall}
        shape, name = "box hollow", f"Tube {number(h)}x{number(b)}x{number(wall)}"
    else:
        h = b = outer
        d = {"h": h, "tf": wall}
        shape, name = "round hollow", f"Tube Ø{number(h)}x{number(wall)}"
    why = shapes.impossible(shape, d)
    if why:
        raise DataError(why)
    if shape == "box hollow" and 4 * wall > b:
        d["r1"] = d["r2"] = 0.0
    g = shapes.geometry(shape, d)
    limits, tolerance = tolerances.size_limits("tube-wall", wall, "tube-wall")

    def area(share: float, thick: float) -> float:
        hh, bb = h * share, b * share
        if shape == "round hollow":
            return math.pi * thick * (hh - thick)
        return 2 * thick * (hh + bb - 2 * thick)

    # Light keeps the rounded corners (cold formed, k = 5 at most), where they fit; heavy has them sharp.
    thin = area(0.99, limits.light)
    rounded = shape == "box hollow" and 4 * wall <= b
    light = (thin - (0.8584 * 5 * limits.light**2 if rounded else 0.0)) / g.area
    heavy = area(1.01, min(limits.heavy, min(h, b) / 2)) / g.area
    form: Form = "prismatic"
    return Section(
        designation=name,
        family="Tube",
        shape=shape,
        form=form,
        source=computed("Geometry of a tube"),
        dimensions_mm=d,
        needs=("length",),
        area_mm2=g.area,
        inner_area_mm2=g.inner_area,
        surface_m2_per_m=g.surface,
        inner_surface_m2_per_m=g.inner_surface,
        centroid_mm=g.centroid,
        factor=Bounds(min(light, 1.0), 1.0, max(heavy, 1.0)),
        tolerance=tolerance,
        note=note,
    )


def glulam(width: float, depth: float) -> Section:
    """Glued laminated timber, width × depth in mm, with the limits of EN 390. Raises DataError on sizes that cannot be."""
    check_sizes(width=width, depth=depth)
    narrow, tolerance = tolerances.size_limits("en390-width", width, "en390-width")
    deep, _ = tolerances.size_limits("en390", depth, "en390")
    g = shapes.geometry("flat", {"b": depth, "tf": width})
    return Section(
        designation=f"GL {number(width)}x{number(depth)}",
        family="GL",
        shape="board",
        form="prismatic",
        source=computed("Geometry of a glulam beam"),
        dimensions_mm={"thickness": width, "width": depth},
        standard="EN 14080",
        needs=("length",),
        area_mm2=g.area,
        surface_m2_per_m=g.surface,
        centroid_mm=(width / 2, depth / 2),
        factor=Bounds(narrow.light * deep.light / g.area, 1.0, narrow.heavy * deep.heavy / g.area),
        tolerance=tolerance,
        material_hint="wood",
    )
