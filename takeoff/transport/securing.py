"""Load securing: top-over and direct lashings, tilting, blocking by EN 12195-1; the US rule of 49 CFR 393 as alternative.

Masses kg, forces kN, angles in degrees to the deck, lengths mm. Formulae (m mass, g 9.81 m/s², c coefficient of the direction,
mu friction, F tension of a lashing, a its angle, f safety factor):

    top-over, sliding   n >= (c - mu) m g f / (2 mu F sin a)                 5.4.2
    top-over, tilting   n >= f m g (c d - b) / (w F sin a)                   5.4.3.1, one row
    direct, sliding     F >= m g (c - 0.75 mu) / (legs (cos a cos b + 0.75 mu sin a))      5.5
    blocking            B >= (c - mu) m g
    stands by itself    b/d >= c

The clauses are those of the German edition of 2011, as quoted; the tilting form and the pairing of coefficients with tensions
are recalled. Earlier editions took a factor k in place of 2 and no f.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

GRAVITY = 9.81
DIRECTIONS = ("forward", "sideways", "rearward")


def top_over(mass_kg: float, c: float, mu: float, tension_kN: float, angle_deg: float, factor: float, legs: float = 2.0) -> float:
    """Lashings over the top against sliding, before rounding up; 0 where friction alone holds.

    `legs` is 2, or the factor k of an earlier edition (1.5 one tensioner, 1.8 VDI 2700 sheet 2). Raises ValueError on a
    friction, tension or angle that is not above zero.
    """
    if not (mu > 0 and tension_kN > 0 and 0 < angle_deg <= 90):
        raise ValueError("friction, tension and angle must be above zero")
    weight = mass_kg * GRAVITY / 1000.0
    return max(0.0, (c - mu) * weight * factor / (legs * mu * tension_kN * math.sin(math.radians(angle_deg))))


def top_over_effect_kN(mu: float, tension_kN: float, angle_deg: float) -> float:
    """What one top-over lashing holds back at the most, its two legs pressing: 2 mu F sin a."""
    return 2 * mu * tension_kN * math.sin(math.radians(angle_deg))


def top_over_tilting(
    mass_kg: float, c: float, across_mm: float, up_mm: float, width_mm: float, tension_kN: float, angle_deg: float, factor: float
) -> float:
    """Lashings over the top against tilting of one row: `across_mm` from the centre of gravity to the edge, `up_mm` its height."""
    weight = mass_kg * GRAVITY / 1000.0
    return max(0.0, factor * weight * (c * up_mm - across_mm) / (width_mm * tension_kN * math.sin(math.radians(angle_deg))))


def stands(c: float, across_mm: float, up_mm: float) -> bool:
    """Whether a piece does not tilt by itself: b/d >= c."""
    return across_mm >= c * up_mm * (1 - 1e-12)


def least_distance_mm(c: float, up_mm: float) -> float:
    """The smallest distance from the centre of gravity to the edge that keeps a piece from tilting."""
    return c * up_mm


def direct_kN(mass_kg: float, c: float, mu: float, angle_deg: float, aside_deg: float, legs: int = 2, share: float = 0.75) -> float:
    """Force in each of the legs of direct lashings that act in a direction; `aside_deg` is the angle in plan to it.

    Compare it with LC. `share` of the friction counts: such lashings work only once the load has moved.
    """
    weight = mass_kg * GRAVITY / 1000.0
    a, b = math.radians(angle_deg), math.radians(aside_deg)
    return max(0.0, weight * (c - share * mu) / (legs * (math.cos(a) * math.cos(b) + share * mu * math.sin(a))))


def direct_sliding_holds(
    mass_kg: float,
    c: float,
    mu: float,
    lashings: Sequence[tuple[float, float, float]],
    share: float = 0.75,
) -> bool:
    """Vector form: each lashing as (force kN, its part in the direction opposed to motion, its part downward), parts of 1."""
    weight = mass_kg * GRAVITY / 1000.0
    held = sum(force * (along + share * mu * down) for force, along, down in lashings)
    return held >= weight * (c - share * mu) * (1 - 1e-12)


def blocking_kN(mass_kg: float, c: float, mu: float, factor: float = 1.0) -> float:
    """What a headboard, bar or chock must hold; `factor` is an extra margin some documents ask for."""
    return max(0.0, (c - mu) * mass_kg * GRAVITY / 1000.0 * factor)


@dataclass(frozen=True, slots=True)
class Held:
    """What a stack needs: the direction that governs, and the number of lashings over the top, rounded up."""

    direction: str
    number: int
    exact: float
    tilts: bool


def lashings_over(
    mass_kg: float,
    mu: float,
    stf_kN: float,
    lc_kN: float,
    angle_deg: float,
    directions: Sequence[tuple[str, float, float]],
    tilting: Sequence[tuple[str, float, float, float, float, float]] = (),
    least: int = 2,
) -> Held:
    """The most lashings over the top that any direction asks for, and at least `least` (2 a piece that stands alone).

    `directions` are (name, c, f); `tilting` are (name, c to stand by itself, c with STF, edge distance, height of the centre,
    width of the row), tried with STF and, at the first c, with half of LC; the worse counts.
    """
    best = Held("all", least, 0.0, False)
    for name, c, factor in directions:
        exact = top_over(mass_kg, c, mu, stf_kN, angle_deg, factor)
        if max(least, _up(exact)) > best.number or (best.exact < exact and _up(exact) == best.number):
            best = Held(name, max(least, _up(exact)), exact, best.tilts)
    factor = next((f for _, _, f in directions if f), 1.1)
    factors = {name: f for name, _, f in directions}
    for name, alone, with_stf, across, up, width in tilting:
        if stands(alone, across, up):
            continue
        f = factors.get(name, factor)
        exact = max(
            top_over_tilting(mass_kg, with_stf, across, up, width, stf_kN, angle_deg, f),
            top_over_tilting(mass_kg, alone, across, up, width, lc_kN / 2, angle_deg, f),
        )
        number = max(best.number, _up(exact))
        best = Held(f"{name}, tilting" if number > best.number else best.direction, number, max(best.exact, exact), True)
    return best


def _up(value: float) -> int:
    """To the next whole number, blind to the noise of the last digits."""
    return math.ceil(value - 1e-9)


# --- 49 CFR 393 ---------------------------------------------------------------------------------------------------------


def tiedowns_by_length(length_mm: float, mass_kg: float, *, blocked: bool, foot_mm: float = 304.8) -> int:
    """49 CFR 393.110. Blocked forward: one for each 10 ft or part; else by length and, up to 5 ft, by weight (1,100 lb)."""
    feet = length_mm / foot_mm
    if blocked:
        return max(1, _up(feet / 10))
    if feet <= 5 + 1e-9:
        return 1 if mass_kg <= 1100 * 0.45359237 + 1e-9 else 2
    return 2 + max(0, _up((feet - 10) / 10))


def tiedowns_by_strength(mass_kg: float, limit_kg: float) -> int:
    """49 CFR 393.106(d): working load limits of lashings that pass over to the other side add up to half the weight."""
    return max(1, _up(mass_kg / 2 / limit_kg))
