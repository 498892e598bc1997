"""Load securing: top-over and direct lashings, tilting, blocking by EN 12195-1; the US rule of 49 CFR 393 as alternative.

Masses kg, forces kN, angles in degrees to the deck, lengths mm. Formulae (m mass, g 9.81 m/s², c coefficient of the direction,
mu friction, F tension of a lashing, a its angle, f safety factor, d height of the centre of gravity above the tilting edge and b
its distance from it, w from the edge to the lashing's far corner):

    top-over, sliding   n >= (c - mu) m g f / (2 mu F sin a)                                 5.4.2
    top-over, tilting   n >= f m g (c d - b) / (w F sin a)                                   5.4.3.1, one row
    rows, tilting       n >= f sum(m g (c d - b)) / (w F sin a)   all rows lean              statics, see `top_over_rows`
    direct, sliding     sum F (along + 0.75 mu down) >= m g (c - 0.75 mu)                    5.5.2, 5.5.3.1
    direct, tilting     sum F (down x + along h) >= m g (c d - b)                            5.5.3.2
    blocking            B >= (c - mu) m g
    stands by itself    b/d >= c

The clauses are those of the German edition of 2011, as quoted by the German insurers' load-securing handbook, which gives the
forms for sliding and for direct lashings (read). The top-over form against tilting is recalled and follows from moments. The
standard's own formula for rows, 5.4.3.2, was not at hand: rows are reckoned by moments without friction between them, which errs
on the safe side (computed). Earlier editions took a factor k in place of 2 and no f.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

GRAVITY = 9.81
DIRECTIONS = ("forward", "sideways", "rearward")


def weight_kN(mass_kg: float) -> float:
    """The weight of a mass."""
    return mass_kg * GRAVITY / 1000.0


def top_over(mass_kg: float, c: float, mu: float, tension_kN: float, angle_deg: float, factor: float, legs: float = 2.0) -> float:
    """Lashings over the top against sliding, before rounding up; 0 where friction alone holds.

    `legs` is 2, or the factor k of an earlier edition (1.5 one tensioner, 1.8 VDI 2700 sheet 2). Raises ValueError on a
    friction, tension or angle that is not above zero.
    """
    if not (mu > 0 and tension_kN > 0 and 0 < angle_deg <= 90):
        raise ValueError("friction, tension and angle must be above zero")
    return max(0.0, (c - mu) * weight_kN(mass_kg) * factor / top_over_effect_kN(mu, tension_kN, angle_deg, legs))


def top_over_effect_kN(mu: float, tension_kN: float, angle_deg: float, legs: float = 2.0) -> float:
    """What one top-over lashing holds back at the most, its two legs pressing: 2 mu F sin a."""
    return legs * mu * tension_kN * math.sin(math.radians(angle_deg))


@dataclass(frozen=True, slots=True)
class Row:
    """One row as it would tilt over one edge: mass, its centre's distance from the edge (`across_mm`) and height above it
    (`up_mm`), and how far the corners that a lashing over the top bends round lie from the edge: the far and the near one
    (negative beyond the edge).
    """

    mass_kg: float
    across_mm: float
    up_mm: float
    far_mm: float
    near_mm: float = 0.0

    def moment_kNmm(self, c: float) -> float:
        """What turns it over, less what its weight holds: m g (c d - b)."""
        return weight_kN(self.mass_kg) * (c * self.up_mm - self.across_mm)


def top_over_rows(rows: Sequence[Row], height_mm: float, c: float, tension_kN: float, angle_deg: float, factor: float) -> float:
    """Lashings over the tops of rows side by side against tilting, before rounding up; infinite where none would hold.

    `rows` go from the side that lifts to the side they tilt to; `height_mm` is that of the outer rows' tops. Statics: rows lean
    like books, each over its own edge. Where all lean, the first leg draws the first row down. Where only the last rows lean,
    the lashing's flat part holds them back by what its leg on that side does not pull outward. Both are looked at, for every
    number of leaning rows, with no friction between rows. One row is the form of 5.4.3.1.
    """
    down, back = math.sin(math.radians(angle_deg)), 1 - math.cos(math.radians(angle_deg))
    worst = 0.0
    for leaning in range(1, len(rows) + 1):
        moment = factor * math.fsum(row.moment_kNmm(c) for row in rows[len(rows) - leaning :])
        if moment <= 0:
            continue
        lever = down * rows[-1].near_mm + (down * rows[0].far_mm if leaning == len(rows) else back * height_mm)
        worst = max(worst, moment / (lever * tension_kN) if lever > 0 else math.inf)
    return worst


def stands(c: float, across_mm: float, up_mm: float) -> bool:
    """Whether a piece does not tilt by itself: b/d >= c."""
    return across_mm >= least_distance_mm(c, up_mm) * (1 - 1e-12)


def least_distance_mm(c: float, up_mm: float) -> float:
    """The smallest distance from the centre of gravity to the edge that keeps a piece from tilting."""
    return c * up_mm


def direct_sliding_kN(mass_kg: float, c: float, mu: float, legs: Iterable[tuple[float, float, float]], share: float = 0.75) -> float:
    """Force in the hardest pulled of direct lashings that keeps a piece from sliding; infinite where none can. Hold it to LC.

    Each leg is (its force as a part of the largest, its part opposed to motion, its part downward), parts of 1. `share` of
    the friction counts: such lashings work only once the load has moved.
    """
    demand = weight_kN(mass_kg) * (c - share * mu)
    return _shared(demand, math.fsum(part * (along + share * mu * down) for part, along, down in legs))


def direct_tilting_kN(moment_kNmm: float, levers: Iterable[tuple[float, float]]) -> float:
    """Force in the hardest pulled of direct lashings against a tilting moment; each is (part of the largest force, lever in mm)."""
    return _shared(moment_kNmm, math.fsum(part * lever for part, lever in levers))


def _shared(demand: float, held: float) -> float:
    if demand <= 0:
        return 0.0
    return demand / held if held > 0 else math.inf


def blocking_kN(mass_kg: float, c: float, mu: float, factor: float = 1.0) -> float:
    """What a headboard, bar or chock must hold; `factor` is an extra margin some documents ask for."""
    return max(0.0, (c - mu) * weight_kN(mass_kg) * factor)


def whole(value: float) -> int:
    """To the next whole number, blind to the noise of the last digits."""
    return math.ceil(value - 1e-9)


# --- 49 CFR 393 ---------------------------------------------------------------------------------------------------------


def tiedowns_by_length(length_mm: float, mass_kg: float, *, blocked: bool, foot_mm: float = 304.8) -> int:
    """49 CFR 393.110. Blocked forward: one for each 10 ft or part; else by length and, up to 5 ft, by weight (1,100 lb)."""
    feet = length_mm / foot_mm
    if blocked:
        return max(1, whole(feet / 10))
    if feet <= 5 + 1e-9:
        return 1 if mass_kg <= 1100 * 0.45359237 + 1e-9 else 2
    return 2 + max(0, whole((feet - 10) / 10))


def tiedowns_by_strength(mass_kg: float, limit_kg: float) -> int:
    """49 CFR 393.106(d): working load limits of lashings that pass over to the other side add up to half the weight."""
    return max(1, whole(mass_kg / 2 / limit_kg))
