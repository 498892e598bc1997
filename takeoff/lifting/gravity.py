"""Where a pick's centre of gravity lies, how far it may stray, and how large the pick is. Rank 6.

A piece's position is the line of its axis (start and end) or its centre. The section stands in its own plane as it is
drawn in `takeoff.sections`: x across, y up, seen from the axis' start to its end, x to the right. Roll 0 puts y into the
vertical plane through the axis (an upright axis: y along the list's x); roll turns right-handed about the axis. Plates,
flats and boards are drawn lying: thickness is y. Arch stones and wedges are a face carried along their width, and their
axis runs along that width. Method: sum of mass x position over sum of mass.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, NamedTuple

from takeoff.bounds import Bounds

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.sections import Section

Vector = tuple[float, float, float]

#: a start-to-end line and a centre given beside it may differ by this much, mm
SAME_PLACE_MM = 10.0
#: an axis that leans by less than this (3 mm a metre) is upright
_UPRIGHT = 0.003


class Face(NamedTuple):
    """A section's enclosing box, and where the centroid lies from its left and bottom, mm."""

    width: float
    height: float
    x: float
    y: float


@dataclass(frozen=True, slots=True)
class Place:
    """Where one row's piece (or group of pieces) has its centre of gravity, mm; `corners` enclose it.

    `whole` is False where the corners are only what it surely reaches: its axis, or its centre and half its least size.
    `length_mm` is the axis' length, `axis` its direction.
    """

    centre: Vector
    corners: tuple[Vector, ...]
    whole: bool = False
    length_mm: float | None = None
    axis: Vector | None = None


@dataclass(frozen=True, slots=True)
class Centre:
    """Centre of gravity at nominal masses; its extremes along each axis while every mass moves within its bounds; size.

    `box` is (lows, highs) of the centre. `low`, `high` enclose the pick; `at_least` says that some piece's reach is not known.
    """

    centre: Vector
    box: tuple[Vector, Vector]
    low: Vector
    high: Vector
    at_least: bool

    @property
    def size(self) -> Vector:
        return (self.high[0] - self.low[0], self.high[1] - self.low[1], self.high[2] - self.low[2])


def centre_of(places: Sequence[Place], masses: Sequence[Bounds]) -> Centre:
    """The centre of pieces of which every one has a place. Masses in kg, at least one above zero."""
    total = math.fsum(m.nominal for m in masses)
    middle = [math.fsum(m.nominal * p.centre[k] for p, m in zip(places, masses, strict=True)) / total for k in range(3)]
    extremes = [extreme_centres([p.centre[k] for p in places], masses) for k in range(3)]
    points = [c for p in places for c in p.corners]
    low, high = (tuple(pick(c[k] for c in points) for k in range(3)) for pick in (min, max))
    lows, highs = zip(*extremes, strict=True)
    return Centre(_vector(middle), (_vector(lows), _vector(highs)), _vector(low), _vector(high), not all(p.whole for p in places))


def extreme_centres(positions: Sequence[float], masses: Sequence[Bounds]) -> tuple[float, float]:
    """Least and greatest sum(m x)/sum(m) while every mass lies between its light and heavy: exact.

    The greatest is reached with every piece beyond it heavy and every other light, so the pieces are sorted by position
    and each cut between two neighbours is tried; the least likewise the other way round.
    """
    order = sorted(range(len(positions)), key=lambda i: positions[i])
    # Measured from the middle, so that large coordinates cost no figures.
    origin = positions[order[len(order) // 2]]
    x = [positions[i] - origin for i in order]
    light, heavy = [masses[i].light for i in order], [masses[i].heavy for i in order]
    found = []
    for before, after in ((light, heavy), (heavy, light)):
        mass, moment = math.fsum(after), math.fsum(m * p for m, p in zip(after, x, strict=True))
        best = []
        for m0, m1, p in zip(before, after, x, strict=True):
            if mass > 0:
                best.append(moment / mass)
            mass += m0 - m1
            moment += (m0 - m1) * p
        if mass > 0:
            best.append(moment / mass)
        found.append(best)
    return min(found[1]) + origin, max(found[0]) + origin


def places_of(members: pd.DataFrame, sections: Sequence[Section]) -> dict[int, Place | str]:
    """Row -> its place, or why it has none ("no position", ...). Rows of a frame without position columns are not in it."""
    if "x1_mm" not in members:
        return {}
    import numpy as np

    names = [f"{n}{k}_mm" for n in "xyz" for k in ("1", "2", "")]
    table = members[names].to_numpy(dtype=float)
    given = np.flatnonzero(~np.isnan(table).all(axis=1) | members["axis"].isna().to_numpy()).tolist()
    columns = {
        name: members[name].tolist()
        for name in (
            *names,
            "axis",
            "roll_deg",
            "position_of_group",
            "quantity",
            "section_id",
            "length_mm",
            "width_mm",
            "thickness_mm",
            "height_mm",
            "diameter_mm",
        )
    }
    return {i: _place({name: values[i] for name, values in columns.items()}, sections) for i in given}


def _place(row: dict[str, Any], sections: Sequence[Section]) -> Place | str:
    start, end = (_vector([row[f"{n}{k}_mm"] for n in "xyz"]) for k in "12")
    middle = _vector([row[f"{n}_mm"] for n in "xyz"])
    known = [not any(map(math.isnan, v)) for v in (start, end, middle)]
    begun = [not all(map(math.isnan, v)) for v in (start, end, middle)]
    if not isinstance(row["axis"], str) or math.isnan(row["roll_deg"]):
        return "its axis or roll cannot be read"
    if row["quantity"] > 1 and not (row["position_of_group"] and known[2] and not begun[0] and not begun[1]):
        return f"{row['quantity']:g} pieces have one position"
    if known != begun or known[0] != known[1]:
        return "its position is given in part"
    section = sections[row["section_id"]] if row["section_id"] >= 0 else None
    face = face_of(section, row) if section is not None else None
    half = _least_size(row, face) / 2
    if not known[0]:
        return Place(middle, tuple(_vector(c + sign * half for c in middle) for sign in (-1, 1)))
    along = _less(end, start)
    length = math.hypot(*along)
    if length < 1e-6:
        return "its start and end are one point"
    offset = axis_offset(section, face, row["axis"])
    if offset is None:
        return f"its section has no {row['axis']} that is known"
    across, up = frame_of(along, row["roll_deg"])
    line = _vector((a + b) / 2 for a, b in zip(start, end, strict=True))
    centre = _vector(line[k] + offset[0] * across[k] + offset[1] * up[k] for k in range(3))
    if known[2] and math.dist(centre, middle) > SAME_PLACE_MM:
        return "its axis and its centre are given, and they differ"
    corners: tuple[Vector, ...] = (start, end)
    if face is not None:
        corners = tuple(
            _vector(p[k] + (offset[0] + u) * across[k] + (offset[1] + v) * up[k] for k in range(3))
            for p in (start, end)
            for u in (-face.x, face.width - face.x)
            for v in (-face.y, face.height - face.y)
        )
    return Place(centre, corners, face is not None, length, _vector(a / length for a in along))


def frame_of(along: Vector, roll_deg: float) -> tuple[Vector, Vector]:
    """The section's x and y as unit vectors of the list's axes, for a member along `along` (mm, any length)."""
    length = math.hypot(*along)
    u = _vector(a / length for a in along)
    # Out of plumb by no more than a mason's error is upright: its depth must not turn with the error.
    toward = (1.0, 0.0, 0.0) if math.hypot(u[0], u[1]) < _UPRIGHT else (0.0, 0.0, 1.0)
    share = sum(t * a for t, a in zip(toward, u, strict=True))
    rest = [t - share * a for t, a in zip(toward, u, strict=True)]
    y = _vector(r / math.hypot(*rest) for r in rest)
    x = _cross(u, y)
    cos, sin = math.cos(math.radians(roll_deg)), math.sin(math.radians(roll_deg))
    # Right-handed about the axis: y turns toward u x y = x, and x toward u x x = -y.
    return _vector(x[k] * cos - y[k] * sin for k in range(3)), _vector(y[k] * cos + x[k] * sin for k in range(3))


def axis_offset(section: Section | None, face: Face | None, axis: str) -> tuple[float, float] | None:
    """From the line that the list gives to the section's centroid, in the section's x and y, mm; None where it is not known."""
    if axis == "centroid":
        return 0.0, 0.0
    if face is None or section is None:
        return None
    if axis == "heel":
        if section.shape == "angle":
            return face.x, face.y
        return (face.x, face.y - face.height / 2) if section.shape.startswith("channel") else None
    return face.x - face.width / 2, face.y - (face.height if axis == "top" else 0.0)


def face_of(section: Section, row: dict[str, Any]) -> Face | None:
    """The cross-section's enclosing box and centroid, from the section and the sizes of its row; None where a size is missing."""
    d = section.dimensions_mm

    def size(*names: str) -> float:
        for name in names:
            value = d.get(name) or row.get(f"{name}_mm")
            if value and value > 0:
                return float(value)
        return math.nan

    shape = section.shape
    if shape in ("plate", "flat", "board"):
        width, height = size("width", "height" if shape == "board" else "width", "b"), section.thickness_mm or size("thickness", "tf")
        if shape == "plate" and math.isnan(height):
            height = size("height")
    elif shape == "block":
        width, height = size("width"), size("height", "thickness")
    elif shape == "ring sector":
        outer, half = d["inner_radius"] + d["depth"], math.radians(d["angle_deg"]) / 2
        wide = outer if half > math.pi / 2 else outer * math.sin(half)
        width, height = 2 * wide, outer - d["inner_radius"] * math.cos(half)
    elif shape == "wedge":
        width, height = d["length"], d["thick_end"]
    elif shape == "round bar":
        width = height = size("diameter", "b", "thickness")
    elif shape == "square bar":
        width = height = size("width", "b", "diameter", "thickness")
    elif shape == "hexagon":
        height = size("width", "b", "diameter", "thickness")
        width = height * 2 / math.sqrt(3)
    elif shape == "round hollow":
        width = height = size("h")
    else:
        width, height = max(size("b"), d.get("b2", 0.0)), size("h")
    if math.isnan(width) or math.isnan(height):
        return None
    if section.centroid_mm is not None and shape not in ("block", "plate", "flat", "board"):
        return Face(width, height, section.centroid_mm[0], section.centroid_mm[1])
    if shape in ("ring sector", "wedge"):
        from takeoff.sections import solids

        made = (
            solids.arch_stone(d["inner_radius"], d["depth"], angle_deg=d["angle_deg"], width=1.0)
            if shape == "ring sector"
            else (solids.wedge(d["length"], d["thick_end"], d["thin_end"], 1.0))
        )
        x, y = (made.centroid_mm or (width / 2, height / 2))[:2]
        return Face(width, height, x, y)
    return Face(width, height, width / 2, height / 2)


def _least_size(row: dict[str, Any], face: Face | None) -> float:
    sizes = [row[f"{n}_mm"] for n in ("length", "width", "thickness", "height", "diameter")] + ([face.width, face.height] if face else [])
    return min((s for s in sizes if s > 0), default=0.0)


def _vector(values: Iterable[float]) -> Vector:
    x, y, z = values
    return float(x), float(y), float(z)


def _less(one: Vector, other: Vector) -> Vector:
    return one[0] - other[0], one[1] - other[1], one[2] - other[2]


def _cross(a: Vector, b: Vector) -> Vector:
    return a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]
