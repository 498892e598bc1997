"""Wind on the piece and the load under an outrigger, by the simple published methods. Rank 6."""

from __future__ import annotations

import math
from collections.abc import Sequence

from takeoff.lifting.factors import factor
from takeoff.lifting.statics import upright_shares

#: air of 1.226 kg/m³ (EN 1991-1-4 and FEM, recalled): half of it, in N per m² and (m/s)²
_WIND = 0.613


def wind_force_kN(speed_m_s: float, area_m2: float, area_factor: float = 1.0) -> float:
    """0.613 v² c A."""
    return _WIND * speed_m_s**2 * area_factor * area_m2 / 1000.0


def wind_speed_share(mass_kg: float, area_m2: float, area_factor: float = 1.0) -> float:
    """Share of the chart's wind speed that a large sail leaves, at most 1: √(1.2 m² a tonne × m / (c A)) (FEM 5.016, recalled)."""
    return min(1.0, math.sqrt(factor("sail area", "per tonne").value * mass_kg / 1000.0 / (area_factor * area_m2)))


def pad(crane_kg: float, load_kg: float, allowable_kpa: float, share: float) -> tuple[float, float, float]:
    """Load on one outrigger in kg, the pad's area in m² and the side of a square pad in m."""
    load = share * (crane_kg + load_kg)
    area = load * 9.80665 / 1000.0 / allowable_kpa
    return load, area, math.sqrt(area)


def corner_loads(total: float, moment_x: float, moment_y: float, spread_x: float, spread_y: float) -> Sequence[float] | None:
    """Loads under four outriggers of a stiff chassis, in the unit of `total`, at (+,+), (−,+), (−,−), (+,−).

    R = V/4 ± Mx/(2 bx) ± My/(2 by), the moments about the middle of the spread (unit × mm). Where one would lift off the
    other three carry the load; None where the crane stands on no three of them. Statics.
    """
    corners = [(sx * spread_x / 2, sy * spread_y / 2, 0.0) for sx, sy in ((1, 1), (-1, 1), (-1, -1), (1, -1))]
    found = upright_shares(corners, (moment_x / total, moment_y / total, -1.0))
    return None if found is None else [share * total for share in found.shares]
