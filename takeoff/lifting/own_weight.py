"""A long piece or slab lifted at two points bends under its own weight: where to hold it, and what its outer fibre feels. Rank 6.

Uniform piece on two points: hogging w a²/2 over each point, sagging between them. Legs that lean press the piece along its
axis, and where they are held off the neutral axis bend it further. That pressure is not set against the tension (it may
be less than reckoned), which errs on the heavy side. Section moduli: the section's own outline, corners as drawn.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Literal

from takeoff.sections import shapes

if TYPE_CHECKING:
    from takeoff.lifting.gravity import Face
    from takeoff.sections import Section

#: (√2 − 1)/2: equal hogging and sagging moments
BEST = (math.sqrt(2.0) - 1.0) / 2.0


@dataclass(frozen=True, slots=True)
class Bending:
    """Best points from the start (mm), greatest moment with the dynamic factor (kNm), tension at the outer fibre (MPa)."""

    best_points_mm: tuple[float, float]
    moment_kNm: float | None
    compression_kN: float
    modulus_mm3: float | None
    stress_mpa: float | None
    axis: str

    def as_record(self) -> dict[str, Any]:
        return {
            "best_points_mm": list(self.best_points_mm),
            "moment_kNm": self.moment_kNm,
            "stress_mpa": self.stress_mpa,
            "compression_kN": self.compression_kN,
            "modulus_mm3": self.modulus_mm3,
            "axis": self.axis,
        }


def moduli(section: Section, face: Face) -> dict[str, float] | None:
    """Elastic section moduli in mm³ about the strong and the weak axis, each the lesser of its two fibres; None where not known.

    Axes are those of the drawn section. One whose principal axes lie askew (an angle) is bent askew by a load along them: the
    modulus is then the moment over the stress that this gives, and the weak one no more than about either principal axis.
    """
    d = dict(section.dimensions_mm)
    if section.shape in ("plate", "block", "flat", "board", "square bar"):
        rings = [[(0.0, 0.0), (face.width, 0.0), (face.width, face.height), (0.0, face.height)]]
    elif section.shape in ("round bar", "hexagon"):
        rings = shapes.rings(section.shape, {**d, "b": face.height})
    elif section.shape in shapes.SHAPES:
        rings = _tapered(section, d) if "flange_slope_percent" in d else shapes.rings(section.shape, d)
    else:
        return None
    if not rings:
        return None
    area, cx, cy, about_x, about_y, product = _second_moments(rings)
    if not area > 0:
        return None
    outline = [(x - cx, y - cy) for x, y in rings[0]]
    under = about_x * about_y - product**2
    # Stress of a unit moment about x, then about y, at each corner of the outline: unsymmetrical bending.
    z_x = under / max(abs(about_y * y - product * x) for x, y in outline)
    z_y = under / max(abs(about_x * x - product * y) for x, y in outline)
    weak = min(z_x, z_y)
    if abs(product) > 1e-6 * max(about_x, about_y):
        turn = math.atan2(-2 * product, about_x - about_y) / 2
        for angle in (turn, turn + math.pi / 2):
            cos, sin = math.cos(angle), math.sin(angle)
            second = about_x * cos**2 + about_y * sin**2 - 2 * product * sin * cos
            weak = min(weak, second / max(abs(y * cos - x * sin) for x, y in outline))
    return {"strong": max(z_x, z_y), "weak": weak}


def _tapered(section: Section, d: dict[str, float]) -> list[list[tuple[float, float]]]:
    """The outline with its flanges (and a tee's web) tapered. Where the flange thickness is measured, and whether the web tapers
    too, does not stand in the section: it is what gives the section's own area."""
    slope = d.pop("flange_slope_percent") / 100
    found: list[tuple[float, list[list[tuple[float, float]]]]] = []
    for place, web in itertools.product(shapes.PLACES, (0.0, slope) if section.shape == "tee" else (0.0,)):
        rings = shapes.rings(section.shape, {**d, "slope": slope, "web_slope": web, "from_toe": shapes.from_toe(place, d["b"], d["tw"])})
        if rings:
            found.append((abs(_second_moments(rings)[0] - (section.area_mm2 or 0.0)), rings))
    return min(found, key=lambda pair: pair[0])[1] if found else []


def _second_moments(rings: Sequence[Sequence[tuple[float, float]]]) -> tuple[float, float, float, float, float, float]:
    """Area, centroid, and second moments about it: about x, about y, and their product; mm. The first ring is the outline."""
    area = sx = sy = ixx = iyy = ixy = 0.0
    for number, ring in enumerate(rings):
        sign = 1.0 if number == 0 else -1.0
        for (x0, y0), (x1, y1) in zip(ring, [*ring[1:], ring[0]], strict=True):
            cross = sign * (x0 * y1 - x1 * y0)
            area += cross / 2
            sx += cross * (x0 + x1) / 6
            sy += cross * (y0 + y1) / 6
            ixx += cross * (y0 * y0 + y0 * y1 + y1 * y1) / 12
            iyy += cross * (x0 * x0 + x0 * x1 + x1 * x1) / 12
            ixy += cross * (x0 * y1 + 2 * x0 * y0 + 2 * x1 * y1 + x1 * y0) / 24
    cx, cy = sx / area, sy / area
    return area, cx, cy, ixx - area * cy * cy, iyy - area * cx * cx, ixy - area * cx * cy


def moments(length_mm: float, weight_kN: float, at_mm: Sequence[float]) -> tuple[float, float]:
    """Greatest hogging (over a point) and sagging (between) moment in kNm of a uniform piece on two upright supports."""
    w = weight_kN / length_mm
    first, second = sorted(at_mm)
    over = max(w * first**2, w * (length_mm - second) ** 2) / 2
    span = second - first
    if span <= 0:
        return over / 1e3, 0.0
    left = weight_kN * (second - length_mm / 2) / span
    # Shear is zero where the load from the start equals the left support.
    x = min(max(left / w, first), second)
    sag = left * (x - first) - w * x * x / 2
    return over / 1e3, max(0.0, sag) / 1e3


def bend(
    length_mm: float,
    weight_kN: float,
    at_mm: Sequence[float],
    lean_deg: Sequence[float | None],
    off_axis_mm: Sequence[float],
    modulus: dict[str, float] | None,
    axis: Literal["strong", "weak"] | None,
) -> Bending:
    """`weight_kN` with the dynamic factor; `at_mm` the two points from the start; `lean_deg` the legs' lean; `off_axis_mm` how far
    the points lie above the neutral axis."""
    best = (BEST * length_mm, (1 - BEST) * length_mm)
    hog, sag = moments(length_mm, weight_kN, at_mm)
    first, second = sorted(at_mm)
    span = second - first
    shares = ((second - length_mm / 2) / span, (length_mm / 2 - first) / span) if span > 0 else (0.5, 0.5)
    press = max(weight_kN * s * math.tan(math.radians(a or 0.0)) for s, a in zip(shares, lean_deg, strict=True))
    # The pressure enters off the neutral axis: whichever way it bends the piece, the worse is taken.
    extra = press * max(abs(e) for e in off_axis_mm) / 1e3
    moment = max(hog, sag) + extra
    use = axis or "weak"
    z = modulus[use] if modulus else None
    return Bending(best, moment, press, z, moment * 1e6 / z if z else None, use)
