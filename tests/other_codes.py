"""Other codes and rules of thumb that the published examples are worked by, each with its source; the program uses none of them.

Forces daN or kN as named, masses kg or t, lengths m or mm.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

#: shares of the gross mass on the axles of a five-axle tractor and semitrailer, where nothing but the gross is known
#: (US Army FM 55-30, appendix N; read)
FIVE_AXLE_SHARES = (0.14, 0.21, 0.21, 0.22, 0.22)
#: load strength asked of all lashings together, as a multiple of the load (New Zealand Truck Loading Code; read)
STRENGTH_MULTIPLES = {"no headboard": 2.0, "partial headboard": 1.5, "headboard carries the load": 1.0}
#: most of a container's cargo that may stand in one half of its length (CTU Code, annex 7, 3.1.4; read2)
MOST_IN_ONE_HALF = 0.60
#: sliding friction as a share of static friction before 2010 (European guidelines on cargo securing, 2006; read)
DYNAMIC_SHARE = 0.7
#: GB special types order 2003: category -> (kg a metre between outer axles, most kg) (read)
SPECIAL_TYPES = {2: (7_500.0, 80_000.0), 3: (12_500.0, 150_000.0)}


def end_to_end(lengths: Sequence[float]) -> list[float]:
    """Where the middles of pieces lie that stand end to end from the front wall, in the unit of the lengths."""
    return [sum(lengths[:k]) + length / 2 for k, length in enumerate(lengths)]


def moments(masses: Sequence[float], places: Sequence[float]) -> list[float]:
    """Mass times place, piece by piece; their sum over the sum of masses is the centre."""
    return [m * x for m, x in zip(masses, places, strict=True)]


def rough_axle_loads(gross: float) -> list[float]:
    """Axle loads of a five-axle combination by fixed shares: an estimate where only the gross is known."""
    return [gross * share for share in FIVE_AXLE_SHARES]


def kingpin_left(gross_kg: float, axle_limit_kg: float, axles: int) -> float:
    """What a semitrailer must carry on its kingpin once its axles have all they may."""
    return gross_kg - axles * axle_limit_kg


def lashing_strength_each(load: float, lashings: int, case: str) -> float:
    """Rated strength of each lashing by the simple rule of the New Zealand code, in the unit of the load."""
    return load * STRENGTH_MULTIPLES[case] / lashings


def share_past_edge(strap_friction: float, angle_deg: float) -> float:
    """Share of the tension that reaches the far side of a strap over two edges (the belt formula; angle of the legs to the deck)."""
    return math.exp(-strap_friction * 2 * math.radians(angle_deg))


def usable_daN(lashing_daN: float, points: int, point_daN: float) -> float:
    """A lashing counts no more than the points it pulls at."""
    return min(lashing_daN, points * point_daN)


def special_types_kg(category: int, distance_m: float) -> float:
    """Largest gross mass by the distance between outer axles, GB special types order 2003, categories 2 and 3."""
    per_m, most = SPECIAL_TYPES[category]
    return min(most, per_m * distance_m)


def sea_transverse_kN(mass_t: float, acceleration: float, correction: float, wind_kN: float, spray_kN: float) -> float:
    """Transverse force on a unit at sea, IMO CSS Code annex 13: corrected inertia, wind and spray."""
    return mass_t * acceleration * correction + wind_kN + spray_kN


def sea_sliding_kN(mass_t: float, friction: float, strengths_kN: Sequence[float], factors: Sequence[float], gravity: float = 9.81) -> float:
    """Resistance to sliding at sea, IMO CSS Code annex 13: friction of the weight, and lashings with their factors f."""
    return friction * mass_t * gravity + sum(s * f for s, f in zip(strengths_kN, factors, strict=True))
