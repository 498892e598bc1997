"""Area, perimeter and centroid of a section from its outline: straight edges, each corner sharp or rounded. Rank 2.

One method serves every rolled shape, tapered flanges included: the polygon of sharp corners by the shoelace formula,
then for each rounded corner the piece between its two tangents and the arc, taken off at an outward corner and added at
an inward one. With the edge turning by phi at a corner of radius r that piece has area r² (tan(phi/2) - phi/2) and
changes the perimeter by r (phi - 2 tan(phi/2)); its centroid is that of the kite of tangents less the sector.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import NamedTuple

#: x, y and the radius of the corner there, mm. Counter-clockwise.
Corner = tuple[float, float, float]
#: a corner of a smaller radius is sharp: its piece would be lost in rounding
_LEAST_RADIUS_MM = 1e-6


class Measures(NamedTuple):
    """area mm², perimeter mm, centroid (x, y) mm."""

    area: float
    perimeter: float
    x: float
    y: float


def measure(corners: Sequence[Corner]) -> Measures:
    """Exact area, perimeter and centroid of an outline, counter-clockwise, in mm."""
    area = moment_x = moment_y = perimeter = 0.0
    count = len(corners)
    for index in range(count):
        x0, y0, radius = corners[index]
        x1, y1, _ = corners[(index + 1) % count]
        cross = x0 * y1 - x1 * y0
        area += cross / 2
        moment_x += (x0 + x1) * cross / 6
        moment_y += (y0 + y1) * cross / 6
        perimeter += math.hypot(x1 - x0, y1 - y0)
        if radius < _LEAST_RADIUS_MM:
            continue
        xp, yp, _ = corners[index - 1]
        in_x, in_y = x0 - xp, y0 - yp
        out_x, out_y = x1 - x0, y1 - y0
        turn = math.atan2(in_x * out_y - in_y * out_x, in_x * out_x + in_y * out_y)
        half = abs(turn) / 2
        if half < 1e-12:
            continue
        kite, sector = radius * radius * math.tan(half), radius * radius * half
        piece = kite - sector
        # Distances along the corner's bisector, from the arc's centre toward the corner.
        kite_at = radius * (1 / math.cos(half) + math.cos(half)) / 3
        sector_at = 2 * radius * math.sin(half) / (3 * half)
        from_corner = radius / math.cos(half) - (kite * kite_at - sector * sector_at) / piece
        long_in, long_out = math.hypot(in_x, in_y), math.hypot(out_x, out_y)
        bis_x, bis_y = out_x / long_out - in_x / long_in, out_y / long_out - in_y / long_in
        scale = from_corner / math.hypot(bis_x, bis_y)
        sign = -1.0 if turn > 0 else 1.0
        area += sign * piece
        moment_x += sign * piece * (x0 + bis_x * scale)
        moment_y += sign * piece * (y0 + bis_y * scale)
        perimeter += 2 * radius * (half - math.tan(half))
    return Measures(area, perimeter, moment_x / area, moment_y / area)


def points(corners: Sequence[Corner], steps: int = 8) -> list[tuple[float, float]]:
    """The outline as plain points, arcs in `steps` chords, for drawing."""
    found: list[tuple[float, float]] = []
    count = len(corners)
    for index in range(count):
        x0, y0, radius = corners[index]
        xp, yp, _ = corners[index - 1]
        x1, y1, _ = corners[(index + 1) % count]
        long_in, long_out = math.hypot(x0 - xp, y0 - yp), math.hypot(x1 - x0, y1 - y0)
        ix, iy, ox, oy = (x0 - xp) / long_in, (y0 - yp) / long_in, (x1 - x0) / long_out, (y1 - y0) / long_out
        turn = math.atan2(ix * oy - iy * ox, ix * ox + iy * oy)
        if radius < _LEAST_RADIUS_MM or abs(turn) < 1e-12:
            found.append((x0, y0))
            continue
        tangent = radius * math.tan(abs(turn) / 2)
        sx, sy = x0 - ix * tangent, y0 - iy * tangent
        side = 1.0 if turn > 0 else -1.0
        cx, cy = sx - iy * radius * side, sy + ix * radius * side
        start = math.atan2(sy - cy, sx - cx)
        found += [
            (cx + radius * math.cos(start + turn * k / steps), cy + radius * math.sin(start + turn * k / steps)) for k in range(steps + 1)
        ]
    return found


def circle(diameter: float, at: tuple[float, float], steps: int = 48) -> list[tuple[float, float]]:
    """A circle as points, for drawing."""
    r = diameter / 2
    return [(at[0] + r * math.cos(2 * math.pi * k / steps), at[1] + r * math.sin(2 * math.pi * k / steps)) for k in range(steps)]


def i_shape(
    h: float, b: float, tw: float, tf: float, r1: float, r2: float = 0.0, slope: float = 0.0, from_toe: float = 0.0
) -> list[Corner]:
    """I or H. `slope` is the inner flange face's rise per mm, `tf` holds at `from_toe` mm from the toe."""
    out = (b - tw) / 2
    toe, root = tf - slope * from_toe, tf + slope * (out - from_toe)
    left, right = out, out + tw
    return [
        (0, 0, 0),
        (b, 0, 0),
        (b, toe, r2),
        (right, root, r1),
        (right, h - root, r1),
        (b, h - toe, r2),
        (b, h, 0),
        (0, h, 0),
        (0, h - toe, r2),
        (left, h - root, r1),
        (left, root, r1),
        (0, toe, r2),
    ]


def i_unequal(h: float, b: float, b2: float, tw: float, tf: float, tf2: float) -> list[Corner]:
    """Welded I with two different flanges, no fillets; `b2` and `tf2` at the bottom."""
    middle = max(b, b2) / 2
    x, web = middle - b / 2, middle - tw / 2
    y = middle - b2 / 2
    return [
        (y, 0, 0),
        (y + b2, 0, 0),
        (y + b2, tf2, 0),
        (web + tw, tf2, 0),
        (web + tw, h - tf, 0),
        (x + b, h - tf, 0),
        (x + b, h, 0),
        (x, h, 0),
        (x, h - tf, 0),
        (web, h - tf, 0),
        (web, tf2, 0),
        (y, tf2, 0),
    ]


def channel(
    h: float, b: float, tw: float, tf: float, r1: float, r2: float = 0.0, slope: float = 0.0, from_toe: float = 0.0
) -> list[Corner]:
    """Channel, back of the web at x = 0."""
    toe, root = tf - slope * from_toe, tf + slope * (b - tw - from_toe)
    return [
        (0, 0, 0),
        (b, 0, 0),
        (b, toe, r2),
        (tw, root, r1),
        (tw, h - root, r1),
        (b, h - toe, r2),
        (b, h, 0),
        (0, h, 0),
    ]


def angle(h: float, b: float, t: float, r1: float, r2: float) -> list[Corner]:
    """Angle, heel at (0, 0), leg `b` along x and leg `h` along y."""
    return [(0, 0, 0), (b, 0, 0), (b, t, r2), (t, t, r1), (t, h, r2), (0, h, 0)]


def tee(
    h: float,
    b: float,
    tw: float,
    tf: float,
    r1: float,
    r2: float = 0.0,
    r3: float = 0.0,
    slope: float = 0.0,
    from_toe: float = 0.0,
    web_slope: float = 0.0,
) -> list[Corner]:
    """Tee, flange at the top. A tapered web has `tw` at half its depth, `web_slope` on each face."""

    # The sloping faces meet where the web's half width and the flange's thickness agree: solved by substitution.
    def half_web(y: float) -> float:
        return tw / 2 + web_slope * (y - h / 2)

    def underside(x: float) -> float:
        return h - (tf + slope * (b / 2 - from_toe - x))

    x = tw / 2
    for _ in range(8):
        x = half_web(underside(x))
    root, toe, foot = underside(x), underside(b / 2), half_web(0)
    middle = b / 2
    return [
        (middle - foot, 0, r3),
        (middle + foot, 0, r3),
        (middle + x, root, r1),
        (b, toe, r2),
        (b, h, 0),
        (0, h, 0),
        (0, toe, r2),
        (middle - x, root, r1),
    ]


def box(h: float, b: float, radius: float) -> list[Corner]:
    """A rectangle with four equal corners."""
    return [(0, 0, radius), (b, 0, radius), (b, h, radius), (0, h, radius)]
