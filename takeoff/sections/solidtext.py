"""Solids, bent members and hanging cables read from a text. Rank 2."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace

from takeoff.sections import bodies, made, solids
from takeoff.sections.answers import Answer, Given, Refused, material_of, no_open, one_chain, sizes_of, stated_mass, take_size
from takeoff.sections.parse import Parsed


def read_arch(p: Parsed, given: Given) -> Answer:
    """``Arch stone R3500 D450 A6 W600``."""
    no_open(p)
    if p.chains:
        one_chain(p, "arch stone")
        raise Refused("an arch stone is told by R (inner radius), D (depth), A (angle) or C (chord), W (width)", "unknown-section")
    radius, depth = take_size(p, "radius"), take_size(p, "depth", "height", "thickness")
    angle = p.labels.pop("angle").value if "angle" in p.labels else None
    chord, width = take_size(p, "chord"), take_size(p, "width", "length")
    if radius is None or depth is None or (angle is None and chord is None):
        raise Refused("an arch stone needs R (inner radius), D (depth) and A (angle) or C (chord)", "impossible-geometry")
    if angle is not None and chord is not None:
        raise Refused("an arch stone takes its angle or its chord, not both", "ambiguous-section")
    return Answer(solids.arch_stone(radius, depth, angle_deg=angle, chord=chord, width=width if width is not None else given.width))


def read_wedge(p: Parsed, given: Given) -> Answer:
    """``Wedge 600x300/240x400``: length × thick end / thin end × width."""
    no_open(p)
    chain = one_chain(p, "wedge")
    if len(chain.numbers) not in (3, 4) or chain.joins[1] != "/" or "/" in (chain.joins[0], *chain.joins[2:]):
        raise Refused("a wedge is told as length x thick end / thin end x width", "unknown-section")
    width = chain.mm[3] if len(chain.numbers) == 4 else given.width
    length, thick, thin = chain.mm[:3]
    return Answer(solids.wedge(length, thick, thin, width))


def read_cylinder(p: Parsed, given: Given) -> Answer:
    """``Cylinder Ø300x1200``, ``Disc Ø300x20``, ``Cylinder D300 H1200``: diameter × height."""
    no_open(p)
    values = sizes_of(one_chain(p, "cylinder"), 2, "cylinder")
    diameter, height = take_size(p, "diameter", "outer diameter", "depth"), take_size(p, "height", "length", "thickness")
    radius = take_size(p, "radius")
    if radius is not None and diameter is None:
        diameter = 2 * radius
    if diameter is None and values:
        diameter = values.pop(0)
    if height is None and values:
        height = values.pop(0)
    if values:
        raise Refused("too many sizes for a cylinder", "impossible-geometry")
    diameter = diameter if diameter is not None else given.diameter
    height = height if height is not None else given.length or given.height or given.thickness
    if diameter is None and height is None:
        return Answer(bodies.open_body("cylinder", material_of(p, given)))
    if diameter is None or height is None:
        raise Refused("a cylinder needs its diameter and its height", "impossible-geometry")
    return Answer(bodies.cylinder(diameter, height, material_of(p, given), "Disc" if "disc" in p.kinds else "Cylinder"))


def read_ring(p: Parsed, given: Given) -> Answer:
    """``Ring Ø600/400x50``, ``Ring OD600 ID400 T50``: outer / inner diameter × height."""
    no_open(p)
    chain = one_chain(p, "ring")
    outer, inner = take_size(p, "outer diameter", "diameter"), take_size(p, "inner diameter")
    height = take_size(p, "thickness", "height", "length")
    if len(chain.numbers) == 3 and chain.joins == ["/", "x"] and outer is None and inner is None and height is None:
        outer, inner, height = chain.mm
    elif chain.numbers:
        raise Refused("a ring is told as outer / inner diameter x height", "unknown-section")
    height = height if height is not None else given.thickness or given.height or given.length
    if outer is None or inner is None or height is None:
        raise Refused("a ring needs its outer and inner diameter and its height", "impossible-geometry")
    return Answer(bodies.ring(outer, inner, height, material_of(p, given)))


def read_cone(p: Parsed, given: Given) -> Answer:
    """``Cone Ø600x900``, ``Cone Ø600/400x900``: base / top diameter × height."""
    no_open(p)
    chain = one_chain(p, "cone")
    if len(chain.numbers) == 3 and chain.joins == ["/", "x"]:
        base, top, height = chain.mm
    elif len(chain.numbers) == 2 and chain.joins != ["/"]:
        (base, height), top = chain.mm, 0.0
    else:
        raise Refused("a cone is told as base / top diameter x height", "unknown-section")
    return Answer(bodies.cone(base, top, height, material_of(p, given)))


def read_pyramid(p: Parsed, given: Given) -> Answer:
    """``Pyramid 600x600x900``, ``Pyramid 600x600/400x400x900``: base / top × height."""
    no_open(p)
    chain = one_chain(p, "pyramid")
    if len(chain.numbers) == 3 and "/" not in chain.joins:
        a, b, height = chain.mm
        return Answer(bodies.pyramid((a, b), (0.0, 0.0), height, material_of(p, given)))
    if len(chain.numbers) == 5 and [j == "/" for j in chain.joins] == [False, True, False, False]:
        a, b, c, d, height = chain.mm
        return Answer(bodies.pyramid((a, b), (c, d), height, material_of(p, given)))
    raise Refused("a pyramid is told as base / top x height, the base as two sizes", "unknown-section")


def read_sphere(p: Parsed, given: Given) -> Answer:
    """``Sphere Ø500``; with a cap's height, ``Sphere cap R500 H100``."""
    no_open(p)
    values = sizes_of(one_chain(p, "sphere"), 1, "sphere")
    radius, height = take_size(p, "radius"), take_size(p, "height", "depth")
    diameter = take_size(p, "diameter", "outer diameter")
    if diameter is None and values:
        diameter = values[0]
    if diameter is None and radius is not None:
        diameter = 2 * radius
    diameter = diameter if diameter is not None else given.diameter
    if "cap" in p.kinds or height is not None or "cap" in p.named:
        if diameter is None or height is None:
            raise Refused("a cap needs the sphere's radius (R) and its own height (H)", "impossible-geometry")
        return Answer(bodies.cap(diameter / 2, height, material_of(p, given)))
    if diameter is None:
        return Answer(bodies.open_body("sphere", material_of(p, given)))
    return Answer(bodies.sphere(diameter, material_of(p, given)))


def read_triangle(p: Parsed, given: Given) -> Answer:
    """``Gusset 100x100x5``: two legs and the thickness, the smallest."""
    no_open(p)
    values = sizes_of(one_chain(p, "triangle"), 3, "triangle")
    thickness = take_size(p, "thickness")
    if len(values) == 3 and thickness is None:
        thickness = min(values)
        values.remove(thickness)
    if not values and thickness is None:
        return Answer(bodies.open_body("triangle", material_of(p, given)))
    thickness = thickness if thickness is not None else given.thickness
    if len(values) != 2 or thickness is None:
        raise Refused("a triangle needs two legs and its thickness", "impossible-geometry")
    return Answer(bodies.triangle(values[0], values[1], thickness, material_of(p, given)))


def read_head(p: Parsed, given: Given) -> Answer:  # noqa: ARG001 (one signature for all solids)
    """``Torispherical head D2000 T10 S40``: outside diameter, wall, straight skirt."""
    no_open(p)
    kind = "torispherical"
    for name, words in (
        ("hemispherical", {"hemispherical"}),
        ("elliptical", {"elliptical", "ellipsoidal"}),
        ("korbbogen", {"korbbogen", "korbbogenboden"}),
    ):
        if p.named & words:
            kind = name
    values = sizes_of(one_chain(p, "head"), 2, "head")
    diameter, thickness = take_size(p, "diameter", "outer diameter", "depth"), take_size(p, "thickness", "wall")
    skirt = take_size(p, "skirt") or 0.0
    if diameter is None and values:
        diameter = values.pop(0)
    if thickness is None and values:
        thickness = values.pop(0)
    if diameter is None or thickness is None or values:
        raise Refused("a head is told by D (outside diameter), T (wall) and S (straight skirt)", "impossible-geometry")
    return Answer(bodies.head(kind, diameter, thickness, skirt))


_NUMBER = r"(\d{1,9}(?:[.,]\d{1,6})?)"
_PRISM = re.compile(rf"prism\w{{0,2}}\s(?:area\s)?{_NUMBER}\s?(mm|cm|m)2\s?(?:[x*]\s?{_NUMBER}\s?(mm|cm|m)?)?", re.IGNORECASE)
_VOLUME = re.compile(rf"(?:volume?n?\s)?{_NUMBER}\s?m3\b", re.IGNORECASE)
_MM = {"mm": 1.0, "cm": 10.0, "m": 1000.0}


def read_plain_volume(text: str, p: Parsed, given: Given) -> Answer | None:
    """``Prism 12500 mm2 x 3000`` and ``Volume 0.35 m3``; None where the text is neither."""
    found = _PRISM.fullmatch(text)
    if found is not None:
        area = float(found[1].replace(",", ".")) * _MM[found[2].lower()] ** 2
        length = float(found[3].replace(",", ".")) * _MM[(found[4] or "mm").lower()] if found[3] else given.length
        if length is None:
            raise Refused("a prism needs its length", "impossible-geometry")
        return Answer(bodies.prism(area, length, material_of(p, given)))
    found = _VOLUME.fullmatch(text)
    if found is not None:
        return Answer(bodies.volume(float(found[1].replace(",", "."))))
    return None


def bend(answer: Answer, p: Parsed) -> Answer:
    """A member bent to an arc: its section is the same, its length is the arc's on the axis."""
    angle = p.labels.pop("angle").value if "angle" in p.labels else None
    radius, chord, rise = take_size(p, "radius"), take_size(p, "chord"), take_size(p, "rise")
    if radius is None and chord is None and angle is None and rise is None:
        answer.notes = (*answer.notes, "bent, without its radius: the length is the row's")
        return answer
    if answer.section.form != "prismatic":
        raise Refused("only a member of one section can be bent to an arc")
    answer.length_mm = round(bodies.arc_length(radius=radius, angle_deg=angle, chord=chord, rise=rise), 3)
    answer.notes = (*answer.notes, f"bent: the arc on its axis is {made.number(round(answer.length_mm, 1))} mm long")
    return answer


def read_cable(p: Parsed, given: Given) -> Answer:  # noqa: ARG001 (one signature for all solids)
    """``Catenary span 30 m sag 1.5 m 4.2 kg/m``: length along the curve, and the tension at its ends as a note."""
    span, sag = take_size(p, "span", "skirt"), take_size(p, "sag", "rise")
    if span is None or sag is None or p.mass is None or p.mass[0] != "length mass":
        raise Refused("a hanging cable is told by its span, its sag and its kg/m", "impossible-geometry")
    hung = bodies.catenary(span, sag, p.mass[1])
    answer = stated_mass(p, f"Catenary span {made.number(span)} sag {made.number(sag)} {made.number(p.mass[1])} kg/m")
    answer.section = replace(answer.section, source=made.computed("Geometry of a catenary under the stated kg/m"))
    answer.length_mm = round(hung.length_mm, 3)
    answer.notes = (
        f"length {hung.length_mm:.0f} mm, tension {hung.lowest_kN:.3g} kN at the lowest point and {hung.end_kN:.3g} kN at the ends",
    )
    return answer


#: kind -> how it is read
SOLIDS: dict[str, Callable[[Parsed, Given], Answer]] = {
    "arch": read_arch,
    "wedge": read_wedge,
    "cylinder": read_cylinder,
    "disc": read_cylinder,
    "ring": read_ring,
    "cone": read_cone,
    "pyramid": read_pyramid,
    "sphere": read_sphere,
    "cap": read_sphere,
    "triangle": read_triangle,
    "head": read_head,
    "cable": read_cable,
}
