"""Solids by their sizes: arch stones (ring sectors), wedges, and the bodies of elementary geometry. Rank 2.

Arch stones and wedges are a plane face of known area carried through a width: volume = face × width; surface = two faces and the
perimeter × width. Bounds: every size ±10 mm or ±1 %, whichever is larger (the planning figure for precast and stone).
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from takeoff.bounds import Bounds
from takeoff.errors import DataError
from takeoff.sections import made, tolerances
from takeoff.sections.section import Section


def face(shape: str, d: Mapping[str, float]) -> tuple[float, float, tuple[float, float]]:
    """Area mm², perimeter mm of a solid's face, and the two face sizes that its bounds rest on."""
    if shape == "ring sector":
        inner, depth, angle = d["inner_radius"], d["depth"], math.radians(d["angle_deg"])
        outer = inner + depth
        return angle / 2 * (outer**2 - inner**2), angle * (outer + inner) + 2 * depth, (depth, angle * (outer + inner) / 2)
    length, thick, thin = d["length"], d["thick_end"], d["thin_end"]
    return length * (thick + thin) / 2, length + thick + thin + math.hypot(length, thick - thin), (length, (thick + thin) / 2)


def _carried(
    designation: str,
    family: str,
    shape: str,
    dimensions: dict[str, float],
    width_mm: float | None,
    centroid_mm: tuple[float, float],
    source: str,
    kind: str | None,
) -> Section:
    """A face carried through `width_mm` (None: the row must give it)."""
    volume = surface = centroid = None
    needs: tuple[str, ...] = ("width",)
    factor = Bounds.exact(1.0)
    if width_mm is not None:
        area, perimeter, sizes = face(shape, dimensions)
        needs = ()
        volume = area * width_mm * 1e-9
        surface = (2 * area + perimeter * width_mm) * 1e-6
        centroid = (*centroid_mm, width_mm / 2)
        factor = made.block_factor((*sizes, width_mm), kind)
        dimensions["width"] = width_mm
        designation += ("x" if shape == "wedge" else " W") + made.number(width_mm)
    return Section(
        designation=designation,
        family=family,
        shape=shape,
        form="solid",
        source=made.computed(source),
        dimensions_mm=dimensions,
        needs=needs,
        centroid_mm=centroid,
        volume_m3=volume,
        surface_m2=surface,
        factor=factor,
        tolerance=tolerances.rules()[made.solid_rule(kind)][0].tolerance,
    )


def arch_stone(
    inner_radius: float,
    depth: float,
    *,
    angle_deg: float | None = None,
    chord: float | None = None,
    width: float | None = None,
    kind: str | None = None,
) -> Section:
    """A ring sector: inner radius, radial depth, angle or chord of the inner face, width along the barrel; mm and degrees.

    Area = angle/2 × (outer² - inner²); the chord c of the inner face subtends 2 asin(c / 2R). The centroid lies on the
    bisector at 2/3 × (Ro³ - Ri³)/(Ro² - Ri²) × sin(a/2)/(a/2). Raises DataError on sizes that cannot be.
    """
    made.check_sizes(inner_radius=inner_radius, depth=depth, angle=angle_deg, chord=chord, width=width)
    if angle_deg is None:
        if chord is None:
            raise DataError("an arch stone needs its angle (A) or its inner chord (C)")
        if chord > 2 * inner_radius:
            raise DataError(f"a chord of {made.number(chord)} mm does not fit in a radius of {made.number(inner_radius)} mm")
        angle = 2 * math.asin(chord / (2 * inner_radius))
    else:
        if angle_deg > 180:
            raise DataError(f"an arch stone cannot span {made.number(angle_deg)} degrees")
        angle = math.radians(angle_deg)
    outer = inner_radius + depth
    middle = 2 / 3 * (outer**3 - inner_radius**3) / (outer**2 - inner_radius**2) * math.sin(angle / 2) / (angle / 2)
    span = f"A{made.number(angle_deg)}" if angle_deg is not None else f"C{made.number(chord or 0)}"
    return _carried(
        f"Arch stone R{made.number(inner_radius)} D{made.number(depth)} {span}",
        "Arch stone",
        "ring sector",
        {"inner_radius": inner_radius, "depth": depth, "angle_deg": math.degrees(angle)},
        width,
        (outer * math.sin(angle / 2), middle - inner_radius * math.cos(angle / 2)),
        "Geometry of a ring sector",
        kind,
    )


def wedge(length: float, thick: float, thin: float, width: float | None = None, kind: str | None = None) -> Section:
    """A wedge: length × thick end / thin end × width, mm. The face is a right trapezium with the thick end at the left."""
    made.check_sizes(length=length, thick_end=thick, thin_end=thin, width=width)
    thick, thin = max(thick, thin), min(thick, thin)
    x = length * (thick + 2 * thin) / (3 * (thick + thin))
    y = (thick**2 + thick * thin + thin**2) / (3 * (thick + thin))
    return _carried(
        f"Wedge {made.number(length)}x{made.number(thick)}/{made.number(thin)}",
        "Wedge",
        "wedge",
        {"length": length, "thick_end": thick, "thin_end": thin},
        width,
        (x, y),
        "Geometry of a wedge",
        kind,
    )
