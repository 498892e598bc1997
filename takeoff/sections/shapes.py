"""From a catalogue row's sizes to area, surface, centroid and outline, shape by shape. Rank 2.

Tapered flanges: where the flange thickness is measured (`tf_from_toe`) was settled by the published areas. Hollow
corners: outside and inside radius come from the standard's rule and stand in the row.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import NamedTuple

from takeoff.errors import DataError
from takeoff.sections import outline as o

#: Shapes a catalogue row (ours or the user's own) may have, and the sizes each needs.
SHAPES: dict[str, tuple[str, ...]] = {
    "I parallel": ("h", "b", "tw", "tf"),
    "I tapered": ("h", "b", "tw", "tf"),
    "I unequal": ("h", "b", "b2", "tw", "tf", "tf2"),
    "channel parallel": ("h", "b", "tw", "tf"),
    "channel tapered": ("h", "b", "tw", "tf"),
    "angle": ("h", "b", "tf"),
    "tee": ("h", "b", "tw", "tf"),
    "box hollow": ("h", "b", "tf"),
    "round hollow": ("h", "tf"),
    "flat": ("b", "tf"),
    "square bar": ("b",),
    "round bar": ("b",),
    "hexagon": ("b",),
    "board": ("b", "tf"),
    "mesh": (),
}


class Geometry(NamedTuple):
    """area mm², bore area mm², outer and bore surface m²/m, centroid mm."""

    area: float
    inner_area: float | None
    surface: float
    inner_surface: float | None
    centroid: tuple[float, float]


#: where the thickness of a tapered flange may be measured; empty for the toe itself
PLACES = ("b/4", "b/2", "(b-tw)/2", "(b-tw)/4", "")


def from_toe(rule: str, b: float, tw: float) -> float:
    """mm from the flange toe at which the flange thickness is measured, by the name of the place."""
    places = dict(zip(PLACES, (b / 4, b / 2, (b - tw) / 2, (b - tw) / 4, 0.0), strict=True))
    if rule not in places:
        raise DataError("unknown place of the flange thickness", read=rule, right="one of " + ", ".join(filter(None, places)))
    return places[rule]


def impossible(shape: str, d: Mapping[str, float]) -> str:
    """Why these sizes cannot be this shape; empty where they can."""
    missing = [s for s in SHAPES[shape] if not d.get(s)]
    if missing:
        return "a size is missing or zero: " + ", ".join(missing)
    for name, value in d.items():
        if value < 0 or not math.isfinite(value):
            return f"{name} cannot be {value:g} mm"
    outer = max(d.get("h", 0.0), d.get("b", 0.0))
    for name in ("r1", "r2", "r3"):
        if d.get(name, 0.0) > outer:
            return f"a radius of {d[name]:g} mm is more than the size of {outer:g} mm"
    h, b, tw, tf = d.get("h", 0.0), d.get("b", 0.0), d.get("tw", 0.0), d.get("tf", 0.0)
    if shape in ("box hollow", "round hollow"):
        least = min(h, b) if shape == "box hollow" else h
        if tf >= least / 2:
            return f"a wall of {tf:g} mm is half the size of {least:g} mm or more"
    elif shape == "angle":
        if tf >= min(h, b):
            return f"a thickness of {tf:g} mm is no less than the leg of {min(h, b):g} mm"
    elif shape.startswith(("I", "channel", "tee")):
        flanges = tf if shape == "tee" else tf + d.get("tf2", tf)
        if flanges >= h:
            return f"flanges fill the depth of {h:g} mm"
        if tw >= b:
            return f"a web of {tw:g} mm is no less than the width of {b:g} mm"
    return ""


def corners(shape: str, d: Mapping[str, float]) -> list[o.Corner] | None:
    """The outer outline of a shape with straight edges; None for round ones."""
    h, b, tw, tf = d.get("h", 0.0), d.get("b", 0.0), d.get("tw", 0.0), d.get("tf", 0.0)
    r1, r2, slope, toe = d.get("r1", 0.0), d.get("r2", 0.0), d.get("slope", 0.0), d.get("from_toe", 0.0)
    if shape == "I unequal":
        return o.i_unequal(h, b, d["b2"], tw, tf, d["tf2"])
    if shape.startswith("I "):
        return o.i_shape(h, b, tw, tf, r1, r2, slope, toe)
    if shape.startswith("channel"):
        return o.channel(h, b, tw, tf, r1, r2, slope, toe)
    if shape == "angle":
        return o.angle(h, b, tf, r1, r2)
    if shape == "tee":
        return o.tee(h, b, tw, tf, r1, r2, d.get("r3", 0.0), slope, toe, d.get("web_slope", 0.0))
    if shape == "box hollow":
        return o.box(h, b, r1)
    if shape in ("flat", "board"):
        return o.box(tf, b, 0)
    if shape == "square bar":
        return o.box(b, b, 0)
    if shape == "hexagon":
        side, height = b / math.sqrt(3), b
        return [
            (side / 2, 0, 0),
            (side * 1.5, 0, 0),
            (side * 2, height / 2, 0),
            (side * 1.5, height, 0),
            (side / 2, height, 0),
            (0, height / 2, 0),
        ]
    return None


def geometry(shape: str, d: Mapping[str, float]) -> Geometry:
    """Area, surface and centroid. `d` in mm: h, b, tw, tf, r1, r2, r3, slope, from_toe as the shape needs.

    Raises DataError for sizes that cannot be.
    """
    why = impossible(shape, d)
    if why:
        raise DataError(f"impossible {shape}: {why}")
    if shape == "round hollow":
        outer, wall = d["h"], d["tf"]
        inside = outer - 2 * wall
        return Geometry(
            math.pi * wall * (outer - wall),
            math.pi * inside**2 / 4,
            math.pi * outer / 1000,
            math.pi * inside / 1000,
            (outer / 2, outer / 2),
        )
    if shape == "round bar":
        size = d["b"]
        return Geometry(math.pi * size**2 / 4, None, math.pi * size / 1000, None, (size / 2, size / 2))
    outside = corners(shape, d)
    if outside is None:
        raise DataError("unknown shape", read=shape, right="one of " + ", ".join(SHAPES))
    m = o.measure(outside)
    if shape == "box hollow":
        wall = d["tf"]
        bore = o.measure(o.box(d["h"] - 2 * wall, d["b"] - 2 * wall, d.get("r2", 0.0)))
        return Geometry(m.area - bore.area, bore.area, m.perimeter / 1000, bore.perimeter / 1000, (m.x, m.y))
    return Geometry(m.area, None, m.perimeter / 1000, None, (m.x, m.y))


def rings(shape: str, d: Mapping[str, float]) -> list[list[tuple[float, float]]]:
    """Closed outlines as points (outer first, then the bore), for drawing and for checks."""
    if shape in ("round hollow", "round bar"):
        size = d["h"] if shape == "round hollow" else d["b"]
        found = [o.circle(size, (size / 2, size / 2))]
        if shape == "round hollow":
            found.append(o.circle(size - 2 * d["tf"], (size / 2, size / 2)))
        return found
    outside = corners(shape, d)
    if outside is None:
        return []
    found = [o.points(outside)]
    if shape == "box hollow":
        wall = d["tf"]
        bore = o.points(o.box(d["h"] - 2 * wall, d["b"] - 2 * wall, d.get("r2", 0.0)))
        found.append([(x + wall, y + wall) for x, y in bore])
    return found
