"""The US federal bridge formula, with single and tandem caps. Axle places in feet, weights in pounds, as the law has them.

W = 500 (L N/(N - 1) + 12 N + 36) lb to the nearest 500 lb (23 USC 127(a)). The statute does not say how a tie rounds;
published tables go both ways; here a tie goes down, the safe way. L is measured to the nearest foot, half a foot up.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction

SINGLE_LB, TANDEM_LB, GROSS_LB = 20_000, 34_000, 80_000
#: axles no farther apart than this are one tandem, ft (96 in); no farther than 40 in, one axle
_TANDEM_FT, _ONE_FT = 8.0, 40 / 12


def whole_feet(feet: float) -> int:
    """A distance as the table takes it: to the nearest foot, an exact half up."""
    return math.floor(feet + 0.5 + 1e-9)


def formula_lb(distance_ft: int, axles: int) -> int:
    """The formula alone, to the nearest 500 lb, a tie down. Raises ValueError below two axles."""
    if axles < 2:
        raise ValueError("the bridge formula needs two axles or more")
    exact = Fraction(distance_ft * axles, axles - 1) + 12 * axles + 36
    return 500 * math.ceil(exact - Fraction(1, 2))


def group_lb(
    places_ft: Sequence[float], single_lb: Sequence[float] | None = None, tandem_lb: float = TANDEM_LB, gross_lb: float = GROSS_LB
) -> float:
    """The most that consecutive axles at these places may carry: formula, the caps inside the group, and the gross limit.

    `single_lb` gives each axle its own cap (20,000 lb unless given). Two consecutive tandems of 36 ft or more may carry their
    caps in full.
    """
    caps = list(single_lb) if single_lb is not None else [float(SINGLE_LB)] * len(places_ft)
    length = whole_feet(places_ft[-1] - places_ft[0])
    covered, k = 0.0, 0
    tandems = 0
    while k < len(places_ft):
        if k + 1 < len(places_ft) and places_ft[k + 1] - places_ft[k] <= _TANDEM_FT + 1e-9:
            close = places_ft[k + 1] - places_ft[k] <= _ONE_FT + 1e-9
            covered += min(SINGLE_LB if close else tandem_lb, caps[k] + caps[k + 1])
            tandems += 1
            k += 2
        else:
            covered += caps[k]
            k += 1
    if len(places_ft) == 1 or (len(places_ft) == 2 and places_ft[1] - places_ft[0] <= _TANDEM_FT + 1e-9):
        return min(covered, gross_lb)
    if len(places_ft) == 4 and tandems == 2 and length >= 36:
        return min(covered, gross_lb)
    return min(formula_lb(length, len(places_ft)), covered, gross_lb)
