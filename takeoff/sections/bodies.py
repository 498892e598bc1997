"""Bodies of elementary geometry: cylinder, ring, cone, pyramid, sphere, cap, triangle, prism, dished heads; arcs and cables. Rank 2.

Volumes, surfaces and centroids by the closed formulae of solid geometry (Pappus for bodies of revolution), checked in
the tests against a general mesh library. Bounds: every size by the rule of the material's kind. Sizes in mm.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import NamedTuple

from takeoff.bounds import Bounds
from takeoff.errors import DataError
from takeoff.sections import made, tolerances
from takeoff.sections.section import Section

#: shapes that may also take their sizes from the row's columns, and the columns they need
BY_COLUMNS: dict[str, tuple[str, ...]] = {
    "cylinder": ("diameter", "length"),
    "sphere": ("diameter",),
    "triangle": ("length", "width", "thickness"),
}


def _body(
    name: str,
    shape: str,
    sizes: dict[str, float],
    volume: float,
    surface: float,
    centroid: tuple[float, float, float],
    kind: str | None,
    powers: tuple[float, ...],
    note: str = "",
    most: float = 1.0,
) -> Section:
    """A solid; `powers` are the sizes that multiply into its volume, `most` widens heavy to another reading of the shape."""
    factor = made.block_factor(powers, kind)
    return Section(
        designation=name,
        family=shape.capitalize(),
        shape=shape,
        form="solid",
        source=made.computed(f"Geometry of a {shape}"),
        dimensions_mm=sizes,
        centroid_mm=centroid,
        volume_m3=volume * 1e-9,
        surface_m2=surface * 1e-6,
        factor=Bounds(factor.light, 1.0, factor.heavy * most),
        tolerance=tolerances.rules()[made.solid_rule(kind)][0].tolerance,
        material_hint="wood" if kind == "wood" else None,
        note=note,
    )


def open_body(shape: str, kind: str | None = None) -> Section:
    """A cylinder, sphere or triangle whose sizes the row gives."""
    most = 2.0 if shape == "triangle" else 1.0
    return Section(
        designation=shape.capitalize(),
        family=shape.capitalize(),
        shape=shape,
        form="solid",
        source=made.computed(f"Geometry of a {shape}"),
        dimensions_mm={},
        needs=BY_COLUMNS[shape],
        factor=Bounds(1.0, 1.0, most),
        tolerance=tolerances.rules()[made.solid_rule(kind)][0].tolerance,
    )


def cylinder(diameter: float, height: float, kind: str | None = None, word: str = "Cylinder") -> Section:
    """A solid cylinder or disc. Centroid from the corner of its enclosing box."""
    made.check_sizes(diameter=diameter, height=height)
    return _body(
        f"{word} Ø{made.number(diameter)}x{made.number(height)}",
        "cylinder",
        {"diameter": diameter, "length": height},
        math.pi * diameter**2 / 4 * height,
        math.pi * diameter * (diameter / 2 + height),
        (diameter / 2, diameter / 2, height / 2),
        kind,
        (diameter, diameter, height),
    )


def ring(outer: float, inner: float, height: float, kind: str | None = None) -> Section:
    """A flat ring or hollow cylinder."""
    made.check_sizes(outer_diameter=outer, inner_diameter=inner, height=height)
    if inner >= outer:
        raise DataError(f"the inner diameter {made.number(inner)} mm is no less than the outer {made.number(outer)} mm")
    rule = made.solid_rule(kind)
    (big, _), (small, _), (tall, _) = (tolerances.size_limits(rule, s, rule) for s in (outer, inner, height))
    nominal = (outer**2 - inner**2) * height
    light = max(big.light**2 - small.heavy**2, 0.0) * tall.light / nominal
    heavy = (big.heavy**2 - small.light**2) * tall.heavy / nominal
    section = _body(
        f"Ring Ø{made.number(outer)}/{made.number(inner)}x{made.number(height)}",
        "ring",
        {"outer_diameter": outer, "inner_diameter": inner, "height": height},
        math.pi / 4 * nominal,
        math.pi * ((outer**2 - inner**2) / 2 + (outer + inner) * height),
        (outer / 2, outer / 2, height / 2),
        kind,
        (),
    )
    return replace(section, factor=Bounds(light, 1.0, heavy))


def cone(base: float, top: float, height: float, kind: str | None = None) -> Section:
    """A cone (top 0) or its frustum, by diameters. The larger diameter is at the bottom."""
    made.check_sizes(base=base, height=height)
    if top < 0:
        raise DataError(f"top {made.number(top)} mm is not a size")
    base, top = max(base, top), min(base, top)
    big, small = base / 2, top / 2
    sides = big**2 + big * small + small**2
    slant = math.hypot(height, big - small)
    name = f"Cone Ø{made.number(base)}" + (f"/{made.number(top)}" if top else "") + f"x{made.number(height)}"
    return _body(
        name,
        "cone",
        {"base_diameter": base, "top_diameter": top, "height": height},
        math.pi * height * sides / 3,
        math.pi * (big**2 + small**2 + (big + small) * slant),
        (big, big, height * (big**2 + 2 * big * small + 3 * small**2) / (4 * sides)),
        kind,
        (base, base, height),
    )


def pyramid(base: tuple[float, float], top: tuple[float, float], height: float, kind: str | None = None) -> Section:
    """A right pyramid (top 0 × 0) or its frustum on a rectangle. Prismatoid formula."""
    made.check_sizes(base_length=base[0], base_width=base[1], height=height)
    a1, b1 = base
    a2, b2 = top
    if a2 < 0 or b2 < 0 or a2 > a1 or b2 > b1:
        raise DataError("the top of a pyramid is no larger than its base")
    middle = (a1 + a2) * (b1 + b2) / 4
    volume = height / 6 * (a1 * b1 + 4 * middle + a2 * b2)
    side_a = (a1 + a2) / 2 * math.hypot(height, (b1 - b2) / 2)
    side_b = (b1 + b2) / 2 * math.hypot(height, (a1 - a2) / 2)
    # First moment of the linear-by-linear area over the height.
    rise = height**2 * (a1 * b1 / 12 + (a1 * b2 + a2 * b1) / 12 + a2 * b2 / 4)
    name = (
        f"Pyramid {made.number(a1)}x{made.number(b1)}"
        + (f"/{made.number(a2)}x{made.number(b2)}" if a2 or b2 else "")
        + f"x{made.number(height)}"
    )
    return _body(
        name,
        "pyramid",
        {"base_length": a1, "base_width": b1, "top_length": a2, "top_width": b2, "height": height},
        volume,
        a1 * b1 + a2 * b2 + 2 * (side_a + side_b),
        (a1 / 2, b1 / 2, rise / volume),
        kind,
        (a1, b1, height),
    )


def sphere(diameter: float, kind: str | None = None) -> Section:
    """A ball."""
    made.check_sizes(diameter=diameter)
    half = diameter / 2
    return _body(
        f"Sphere Ø{made.number(diameter)}",
        "sphere",
        {"diameter": diameter},
        math.pi * diameter**3 / 6,
        math.pi * diameter**2,
        (half, half, half),
        kind,
        (diameter, diameter, diameter),
    )


def cap(radius: float, height: float, kind: str | None = None) -> Section:
    """A cap of a sphere: sphere's radius and the cap's height, base at the bottom."""
    made.check_sizes(radius=radius, height=height)
    if height > 2 * radius:
        raise DataError(f"a cap of {made.number(height)} mm is higher than its sphere")
    base = height * (2 * radius - height)
    volume = math.pi * height**2 * (3 * radius - height) / 3
    from_centre = 3 * (2 * radius - height) ** 2 / (4 * (3 * radius - height))
    half = math.sqrt(base) if height <= radius else radius
    return _body(
        f"Dome R{made.number(radius)} H{made.number(height)}",
        "cap",
        {"radius": radius, "height": height},
        volume,
        math.pi * (2 * radius * height + base),
        (half, half, from_centre - (radius - height)),
        kind,
        (radius, height, height),
    )


def triangle(a: float, b: float, thickness: float, kind: str | None = None) -> Section:
    """A right triangle of plate by its two legs, such as a gusset; heavy covers the full rectangle, since corners are often kept."""
    made.check_sizes(leg_a=a, leg_b=b, thickness=thickness)
    return _body(
        f"Triangle {made.number(a)}x{made.number(b)}x{made.number(thickness)}",
        "triangle",
        {"length": a, "width": b, "thickness": thickness},
        a * b * thickness / 2,
        a * b + thickness * (a + b + math.hypot(a, b)),
        (a / 3, b / 3, thickness / 2),
        kind,
        (a, b, thickness),
        "half the rectangle; heavy is the whole one",
        2.0,
    )


def prism(area_mm2: float, length: float, kind: str | None = None) -> Section:
    """Any prism by the area of its face; its surface and centroid are not told by that."""
    made.check_sizes(area=area_mm2, length=length)
    side = math.sqrt(area_mm2)
    factor = made.block_factor((side, side, length), kind)
    return Section(
        designation=f"Prism {made.number(area_mm2)} mm2 x {made.number(length)}",
        family="Prism",
        shape="prism",
        form="solid",
        source=made.computed("Face area × length"),
        dimensions_mm={"face_area_mm2": area_mm2, "length": length},
        volume_m3=area_mm2 * length * 1e-9,
        factor=factor,
        tolerance=tolerances.rules()[made.solid_rule(kind)][0].tolerance,
    )


def volume(cubic_metres: float) -> Section:
    """A plain volume as stated."""
    made.check_sizes(volume=cubic_metres)
    factor, tolerance = tolerances.mass_factor("stated")
    return Section(
        designation=f"Volume {made.number(cubic_metres)} m3",
        family="Volume",
        shape="volume",
        form="solid",
        source=made.computed("The volume stated"),
        dimensions_mm={},
        volume_m3=cubic_metres,
        factor=factor,
        tolerance=tolerance,
    )


# -- dished heads -----------------------------------------------------------------------------------------------------
class _Profile(NamedTuple):
    """volume enclosed mm³, area of the curved face mm², height of the centroid of the enclosed volume mm."""

    volume: float
    area: float
    moment: float


#: kind -> crown radius and knuckle radius over the outside diameter (DIN 28011 and 28013); ellipses by depth over diameter
TORISPHERICAL = {"torispherical": (1.0, 0.1), "korbbogen": (0.8, 0.154)}


def _torispherical(diameter: float, crown: float, knuckle: float) -> _Profile:
    """Enclosed by a crown of a sphere and a knuckle of a torus, on the tangent plane: discs summed by Simpson's rule."""
    half = diameter / 2
    centre = half - knuckle
    sine = centre / (crown - knuckle)
    if not 0 < sine < 1:
        raise DataError("the head's radii do not meet")
    depth = crown - math.sqrt((crown - knuckle) ** 2 - centre**2)
    join = knuckle * math.sqrt(1 - sine**2)  # height above the tangent plane where knuckle and crown meet

    def radius(z: float) -> float:
        if z <= join:
            return centre + math.sqrt(max(knuckle**2 - z**2, 0.0))
        below = z - (depth - crown)
        return math.sqrt(max(crown**2 - below**2, 0.0))

    def simpson(low: float, high: float, power: int) -> float:
        steps = 400
        width = (high - low) / steps
        total = 0.0
        for k in range(steps + 1):
            z = low + k * width
            total += (1 if k in (0, steps) else 4 if k % 2 else 2) * radius(z) ** 2 * z**power
        return math.pi * total * width / 3

    volume_mm3 = simpson(0, join, 0) + simpson(join, depth, 0)
    moment = simpson(0, join, 1) + simpson(join, depth, 1)
    knuckle_angle = math.acos(sine)
    # Pappus: a torus' quarter about the axis, and a sphere's cap.
    area = 2 * math.pi * knuckle * (centre * knuckle_angle + knuckle * math.sin(knuckle_angle))
    area += 2 * math.pi * crown * crown * (1 - math.sqrt(1 - sine**2))
    return _Profile(volume_mm3, area, moment)


def _ellipsoidal(diameter: float, depth: float) -> _Profile:
    """Half of a flattened spheroid."""
    half = diameter / 2
    volume_mm3 = 2 / 3 * math.pi * half**2 * depth
    if math.isclose(half, depth):
        area = 2 * math.pi * half**2
    else:
        e = math.sqrt(1 - (depth / half) ** 2)
        area = math.pi * half**2 * (1 + (1 - e**2) / e * math.atanh(e))
    return _Profile(volume_mm3, area, volume_mm3 * 3 * depth / 8)


def head(kind: str, diameter: float, thickness: float, skirt: float = 0.0) -> Section:
    """A dished tank head by its outside diameter, wall and straight skirt: metal between the outer and the inner face.

    kind: ``torispherical`` (crown D, knuckle 0.1 D), ``korbbogen`` (0.8 D, 0.154 D), ``elliptical`` (2:1),
    ``hemispherical``. Raises DataError on sizes that cannot be.
    """
    made.check_sizes(diameter=diameter, thickness=thickness)
    if thickness >= diameter / 4:
        raise DataError(f"a wall of {made.number(thickness)} mm does not fit a head of {made.number(diameter)} mm")

    def shell(wall: float) -> tuple[_Profile, _Profile]:
        inside = diameter - 2 * wall
        if kind in TORISPHERICAL:
            crown, knuckle = (share * diameter for share in TORISPHERICAL[kind])
            if knuckle <= wall:
                raise DataError("the wall is thicker than the head's knuckle")
            return _torispherical(diameter, crown, knuckle), _torispherical(inside, crown - wall, knuckle - wall)
        depth = diameter / 2 if kind == "hemispherical" else diameter / 4
        return _ellipsoidal(diameter, depth), _ellipsoidal(inside, depth - wall)

    def metal(wall: float) -> float:
        outer, inner = shell(wall)
        return outer.volume - inner.volume + math.pi * wall * (diameter - wall) * skirt

    outer, inner = shell(thickness)
    inside = diameter - 2 * thickness
    whole = metal(thickness)
    limits, tolerance = tolerances.size_limits("head-wall", thickness, "head-wall")
    surface = outer.area + inner.area + math.pi * skirt * (diameter + inside) + math.pi * thickness * (diameter - thickness)
    dished = outer.volume - inner.volume
    height = (outer.moment - inner.moment + dished * skirt + (whole - dished) * skirt / 2) / whole
    return Section(
        designation=f"{kind.capitalize()} head D{made.number(diameter)} T{made.number(thickness)}"
        + (f" S{made.number(skirt)}" if skirt else ""),
        family="Head",
        shape=f"{kind} head",
        form="solid",
        source=made.computed(f"Geometry of a {kind} head"),
        dimensions_mm={"diameter": diameter, "thickness": thickness, "skirt": skirt},
        volume_m3=whole * 1e-9,
        surface_m2=surface * 1e-6,
        centroid_mm=(diameter / 2, diameter / 2, height),
        factor=Bounds(metal(limits.light) * 0.98 / whole, 1.0, metal(limits.heavy) * 1.02 / whole),
        tolerance=tolerance,
        material_hint="metal",
    )


# -- bent members and hanging cables ----------------------------------------------------------------------------------
def arc_length(
    *, radius: float | None = None, angle_deg: float | None = None, chord: float | None = None, rise: float | None = None
) -> float:
    """Length in mm along the axis of a member bent to an arc: by radius and angle, or by chord and rise.

    Radius from chord c and rise f: (c²/4 + f²) / 2f; angle 4 atan(2f / c). Raises DataError on sizes that cannot be.
    """
    if radius is not None and angle_deg is not None:
        made.check_sizes(radius=radius, angle=angle_deg)
        if angle_deg > 360:
            raise DataError(f"an arc cannot span {made.number(angle_deg)} degrees")
        return radius * math.radians(angle_deg)
    if chord is None or rise is None:
        raise DataError("a bent member needs its radius (R) and angle (A), or its chord (C) and rise (F)")
    made.check_sizes(chord=chord, rise=rise)
    return (chord**2 / 4 + rise**2) / (2 * rise) * 4 * math.atan(2 * rise / chord)


class Catenary(NamedTuple):
    """length mm, and the tension at the lowest point and at the ends, kN."""

    length_mm: float
    lowest_kN: float
    end_kN: float


def catenary(span: float, sag: float, kg_per_m: float) -> Catenary:
    """A cable hanging between two level ends under its own weight; span and sag in mm.

    The catenary's parameter a solves sag = a (cosh(span / 2a) - 1), by bisection; length 2 a sinh(span / 2a), tension
    w a at the lowest point and w (a + sag) at the ends, with w = kg/m × 9.80665 m/s². Raises DataError on sizes that cannot be.
    """
    made.check_sizes(span=span, sag=sag, mass_per_metre=kg_per_m)
    if sag > 5 * span:
        raise DataError("the sag is more than five spans")
    low, high = 1e-9 / span, 20.0 / span  # 1 / a
    for _ in range(200):
        middle = (low + high) / 2
        if 2 * math.sinh(span * middle / 4) ** 2 / middle < sag:  # cosh u - 1 without loss of digits
            low = middle
        else:
            high = middle
    a = 2 / (low + high)
    weight = kg_per_m * 9.80665 / 1e6  # kN per mm
    return Catenary(2 * a * math.sinh(span / (2 * a)), weight * a, weight * (a + sag))
