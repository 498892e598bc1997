"""Water and sea water: density by formula, at atmospheric pressure. Rank 2.

Water after Kell (1975), within 0.02 kg/m³ of IAPWS-95 from 0 to 100 °C; up to 40 °C after Tanaka and others (2001, CIPM),
within 0.002. Sea water after EOS-80 (UNESCO 1983) at practical salinity 35 unless another is given. Copies of Kell's
formula with 16.897850 in the denominator circulate: the digits are swapped, and water would then weigh 997.94 at 20 °C.
"""

from __future__ import annotations

import math
from collections.abc import Callable

Answer = tuple[float | None, bool, str]

_FREEZING = "below 0 °C water freezes: the density of the liquid is not given"
_BOILING = "above 100 °C water boils at atmospheric pressure: the density of the liquid is not given"


def water_density(temperature_C: float) -> float:
    """Density of pure water in kg/m³, 0 to 100 °C. Raises ValueError outside."""
    if not 0.0 <= temperature_C <= 100.0:
        raise ValueError("the formula holds from 0 to 100 °C")
    return _tanaka(temperature_C) if temperature_C <= 40.0 else _kell(temperature_C)


def sea_water_density(temperature_C: float, salinity: float = 35.0) -> float:
    """Density of sea water in kg/m³, -2 to 40 °C, practical salinity 0 to 42. Raises ValueError outside."""
    if not -2.0 <= temperature_C <= 40.0 or not 0.0 <= salinity <= 42.0:
        raise ValueError("the formula holds from -2 to 40 °C and for salinities from 0 to 42")
    t, s = temperature_C * 1.00024, salinity  # EOS-80 is written in the temperature scale of 1968
    pure = 999.842594 + t * (
        6.793952e-2 + t * (-9.095290e-3 + t * (1.001685e-4 + t * (-1.120083e-6 + t * 6.536332e-9)))
    )
    first = 0.824493 + t * (-4.0899e-3 + t * (7.6438e-5 + t * (-8.2467e-7 + t * 5.3875e-9)))
    second = -5.72466e-3 + t * (1.0227e-4 + t * -1.6546e-6)
    return pure + first * s + second * s * math.sqrt(s) + 4.8314e-4 * s * s


def _kell(t: float) -> float:
    top = 999.83952 + t * (
        16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 + t * -280.54253e-12)))
    )
    return top / (1.0 + 16.879850e-3 * t)


def _tanaka(t: float) -> float:
    return 999.974950 * (1.0 - (t - 3.983035) ** 2 * (t + 301.797) / (522528.9 * (t + 69.34881)))


def _fresh(t: float) -> Answer:
    if t < 0.0:
        return None, False, _FREEZING
    if t > 100.0:
        return None, False, _BOILING
    return water_density(t), True, ""


def _sea(t: float) -> Answer:
    if t < -2.0:
        return None, False, "below -2 °C sea water freezes: the density of the liquid is not given"
    if t > 40.0:
        return None, False, "above 40 °C the formula for sea water does not hold"
    return sea_water_density(t), True, ""


#: Rows whose density follows a formula, not a coefficient: key -> function of °C.
WATERS: dict[str, Callable[[float], Answer]] = {"water-fresh": _fresh, "water-sea": _sea}
