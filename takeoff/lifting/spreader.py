"""What a spreader or a lifting beam above the piece must carry. Rank 6, statics only.

A spreader hangs from two legs to its ends and is pressed together; a lifting beam hangs from one eye and is bent. The
hook stands over the centre of gravity; below the bar the falls are upright. Its own mass is in the legs above it.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from takeoff.lifting.statics import Vector, upright_shares


@dataclass(frozen=True, slots=True)
class Bar:
    """End loads of the bar below it (kN); for a spreader its compression and the legs above; for a beam its greatest moment.

    All for the heavy load: design mass and the bar's own, times the dynamic factor. `over` names the points under either end,
    `ends_mm` says where the ends are with the piece level, where the slings below settle that; `hook_mm` the hook above them.
    """

    kind: str
    end_loads_kN: tuple[float, float]
    compression_kN: float | None = None
    moment_kNm: float | None = None
    self_moment_kNm: float = 0.0
    top_tensions_kN: tuple[float, float] | None = None
    top_angles_deg: tuple[float, float] | None = None
    top_lengths_mm: tuple[float, float] | None = None
    over: tuple[tuple[str, ...], tuple[str, ...]] = ((), ())
    ends_mm: tuple[Vector, Vector] | None = None
    hook_mm: Vector | None = None

    def as_record(self) -> dict[str, Any]:
        return {
            "kind": self.kind,
            "over": [list(names) for names in self.over],
            "ends_mm": None if self.ends_mm is None else [list(end) for end in self.ends_mm],
            "end_loads_kN": list(self.end_loads_kN),
            "compression_kN": self.compression_kN,
            "moment_kNm": self.moment_kNm,
            "self_moment_kNm": self.self_moment_kNm,
            "top_tensions_kN": None if self.top_tensions_kN is None else list(self.top_tensions_kN),
            "top_angles_deg": None if self.top_angles_deg is None else list(self.top_angles_deg),
            "top_lengths_mm": None if self.top_lengths_mm is None else list(self.top_lengths_mm),
        }


def two_legs(weight: float, d1: float, h1: float, d2: float, h2: float) -> tuple[float, float]:
    """Tensions of two legs from one hook over the centre: T1 = W d2 L1 / (h1 d2 + h2 d1), T2 likewise. Unit of `weight`."""
    l1, l2 = math.hypot(d1, h1), math.hypot(d2, h2)
    under = h1 * d2 + h2 * d1
    return weight * d2 * l1 / under, weight * d1 * l2 / under


def spreader(weight_kN: float, bar_kN: float, length_mm: float, from_first_mm: float, height_mm: float) -> Bar:
    """A spreader whose first end is `from_first_mm` from the centre, the hook `height_mm` above the bar. C = T sin(angle)."""
    a, b = from_first_mm, length_mm - from_first_mm
    ends = (weight_kN * b / length_mm, weight_kN * a / length_mm)
    # The bar's own weight hangs at its middle; the hook stands over piece and bar together.
    whole = weight_kN + bar_kN
    at = (weight_kN * a + bar_kN * length_mm / 2) / whole
    tensions = two_legs(whole, at, height_mm, length_mm - at, height_mm)
    angles = tuple(math.degrees(math.atan2(d, height_mm)) for d in (at, length_mm - at))
    lengths = tuple(math.hypot(d, height_mm) for d in (at, length_mm - at))
    return Bar("spreader", ends, compression_kN=tensions[0] * at / lengths[0], self_moment_kNm=bar_kN * length_mm / 8e3,
               top_tensions_kN=tensions, top_angles_deg=(angles[0], angles[1]), top_lengths_mm=(lengths[0], lengths[1]))  # fmt: skip


def beam(weight_kN: float, bar_kN: float, length_mm: float, from_first_mm: float) -> Bar:
    """A lifting beam with one eye over the centre: M = W a b / L (W L / 4 in the middle); its own weight adds w L² / 8."""
    a, b = from_first_mm, length_mm - from_first_mm
    ends = (weight_kN * b / length_mm, weight_kN * a / length_mm)
    longer = max(a, b)
    return Bar("beam", ends, moment_kNm=ends[0] * a / 1e3, self_moment_kNm=bar_kN / length_mm * longer**2 / 2e3)


def worst(bars: Sequence[Bar]) -> Bar:
    """Of the same bar with the centre in several places, the greatest of each figure; legs' lengths are those of the first."""
    first = bars[0]

    def pair(values: Sequence[tuple[float, float] | None]) -> tuple[float, float] | None:
        known = [v for v in values if v is not None]
        return (max(v[0] for v in known), max(v[1] for v in known)) if known else None

    def one(values: Sequence[float | None]) -> float | None:
        return max((v for v in values if v is not None), default=None)

    return Bar(
        first.kind,
        pair([b.end_loads_kN for b in bars]) or first.end_loads_kN,
        one([b.compression_kN for b in bars]),
        one([b.moment_kNm for b in bars]),
        max(b.self_moment_kNm for b in bars),
        pair([b.top_tensions_kN for b in bars]),
        pair([b.top_angles_deg for b in bars]),
        first.top_lengths_mm,
    )


def hook_over(ends: tuple[Vector, Vector], share: float, height_mm: float) -> Vector:
    """Where the hook is: so far along the bar (a share of it, from the first end), so high above it."""
    first, second = ends
    x, y, z = (first[k] + share * (second[k] - first[k]) for k in range(3))
    return x, y, z + height_mm


def along_points(points: Sequence[Vector], centre: Vector, length_mm: float) -> tuple[float, float]:
    """Where the centre stands along a bar over two points: mm from its first end, and the points' own span. Over more points, which
    `takeoff.lifting.falls` did not settle, the bar is taken along their longer direction. Its middle stands over theirs.
    """
    spans = [max(p[k] for p in points) - min(p[k] for p in points) for k in range(2)]
    if len(points) == 2:
        (x0, y0, _), (x1, y1, _) = points
        span = math.hypot(x1 - x0, y1 - y0)
        along = ((centre[0] - x0) * (x1 - x0) + (centre[1] - y0) * (y1 - y0)) / span if span else 0.0
        return along + (length_mm - span) / 2, span
    k = 0 if spans[0] >= spans[1] else 1
    return centre[k] - min(p[k] for p in points) + (length_mm - spans[k]) / 2, spans[k]


def fall_shares(points: Sequence[Vector], centre: Vector) -> tuple[float, ...] | None:
    """Share of each point on upright falls."""
    found = upright_shares(points, centre)
    return None if found is None else found.shares
