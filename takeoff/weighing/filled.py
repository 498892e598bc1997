"""What fills a vessel, over the temperatures the job names: heavy at the one where it is heaviest, light where lightest. Rank 4.

A liquid's density falls as it warms (water's is greatest at 4 °C), and the inside grows with the vessel: a kilogram figure for
20 °C alone would be too light in winter. Only liquids are looked at; what voids leave of sand does not move with temperature.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff import materials
from takeoff.bounds import Spread
from takeoff.materials.stretch import stretch

if TYPE_CHECKING:
    from takeoff.materials import Material

REFERENCE_C = 20.0
#: names of the job's temperatures that say how sizes are true, not how warm a filled vessel is
_OF_SIZES = ("reference", "measured", "cut")
#: how finely the range is looked through, °C: water a quarter of a degree from its densest is 0.4 millionths lighter
_STEP_C, _MOST_STEPS = 0.5, 800


@dataclass(frozen=True, slots=True)
class Filled:
    """Least and greatest kg/m³ of inside (as it is at 20 °C) over a range of temperatures, and where they are met.

    `reason` says why part of the range has no answer; light and heavy are None where the liquid is known at 20 °C only.
    """

    light: float | None
    heavy: float | None
    lightest_C: float
    heaviest_C: float
    reason: str


def volume_factor(material: Material, temperature_C: float) -> float | None:
    """Volume at a temperature over the volume at 20 °C, each direction once; None where the expansion is not known."""
    there = materials.elongation(material, temperature_C)
    along, across, through = (stretch(there, size) for size in ("length", "width", "thickness"))
    return None if along is None or across is None or through is None else along * across * through


def fill_kg_m3(vessel: Material | None, contents: Material, temperature_C: float) -> Spread | None:
    """Mass in kg of what fills a m³ of inside, measured at 20 °C: the inside grows with the vessel, the contents thin out.

    A vessel whose expansion is not known stays as it is. None where the density of the contents is not known there (water
    below 0 or above 100 °C).
    """
    density = materials.density_at(contents, temperature_C).density
    if density is None:
        return None
    inside = (volume_factor(vessel, temperature_C) if vessel is not None else None) or 1.0
    return Spread(density.low * inside, None if density.nominal is None else density.nominal * inside, density.high * inside)


def range_of(named: Mapping[str, float]) -> tuple[float, float] | None:
    """Coldest and warmest of the job's temperatures that say how warm a filled vessel is; None where it names none."""
    found = [t for name, t in named.items() if name not in _OF_SIZES]
    return (min(found), max(found)) if found else None


def over(vessel: Material | None, contents: Sequence[Material], range_C: tuple[float, float]) -> Filled:
    """The bounds over a range, 20 °C always in it, of what may be any of these `contents`."""
    low, high = min(*range_C, REFERENCE_C), max(*range_C, REFERENCE_C)
    step = max(_STEP_C, (high - low) / _MOST_STEPS)
    grid = [low, *(low + step * n for n in range(1, int((high - low) / step) + 1)), high]
    found = [(t, fill) for liquid in contents for t in grid if (fill := fill_kg_m3(vessel, liquid, t)) is not None]
    ends = [materials.density_at(liquid, t) for liquid in contents for t in (low, high)]
    reason = next((end.reason for end in ends if end.density is None), "")
    # One temperature of several says nothing of the range; a job that is at 20 °C throughout has only the one.
    if len({t for t, _ in found}) < min(2, len(set(grid))):
        return Filled(None, None, REFERENCE_C, REFERENCE_C, reason)
    light = min(found, key=lambda pair: pair[1].low)
    heavy = max(found, key=lambda pair: pair[1].high)
    return Filled(light[1].low, heavy[1].high, light[0], heavy[0], reason)
