"""The length of one piece at a temperature, and what a steel tape reads along it there. Rank 5.

A law gives L(T) = L20 (1 + e(T)). A tape is true at 20 °C and grows too, so it reads L(T) / (1 + e_tape(T)): along steel
it shows the nominal at every temperature, along aluminium it does not.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

from takeoff.errors import InputError
from takeoff.materials import Elongation, Material, by_key, elongation
from takeoff.materials.stretch import stretch
from takeoff.quantities import ABSOLUTE_ZERO_C

REFERENCE_C = 20.0
#: what tapes are made of, unless the job file says otherwise
TAPE_KEY = "steel-structural"


@dataclass(frozen=True, slots=True)
class Length:
    """A length at a temperature; None above the melting point and where no coefficient is known, `reason` says which."""

    temperature_C: float
    length_mm: float | None
    tape_reading_mm: float | None
    within_validity: bool
    reason: str


@cache
def grown(material: Material, temperature_C: float, law: str | None = None) -> Elongation:
    """Elongation from 20 °C, worked out once for each temperature. Raises InputError below absolute zero."""
    if not ABSOLUTE_ZERO_C <= temperature_C < float("inf"):
        raise InputError("below absolute zero", read=f"{temperature_C:g} °C", right="-273.15 °C (0 K) or above")
    return elongation(material, temperature_C, law=law)


def factor(material: Material, temperature_C: float, law: str | None = None, size: str = "length") -> float | None:
    """Size at a temperature over the same size at 20 °C, in the direction that size takes; None where it is not known."""
    return stretch(grown(material, temperature_C, law), size)


def ratio(material: Material, from_C: float, to_C: float, law: str | None = None, size: str = "length") -> float | None:
    """Size at `to_C` over the same size at `from_C`; None where either is not known. From and to alike: 1 for anything."""
    if from_C == to_C:
        return 1.0
    before, after = factor(material, from_C, law, size), factor(material, to_C, law, size)
    return None if before is None or after is None else after / before


def tape_factor(temperature_C: float, tape: Material | None = None) -> float | None:
    """The length of a tape's metre at a temperature, over the true one."""
    return factor(tape or by_key(TAPE_KEY), temperature_C)


def tape_reading(length_mm: float | None, temperature_C: float, tape: Material | None = None) -> float | None:
    """What a tape at this temperature reads along a true length."""
    longer = tape_factor(temperature_C, tape)
    return None if length_mm is None or longer is None else length_mm / longer


def length_at(
    material: Material, length_mm: float, temperature_C: float, *, length_at_C: float = REFERENCE_C, law: str | None = None,
    tape: Material | None = None,
) -> Length:
    """The true length, and the tape's reading, at a temperature, of a piece that has `length_mm` at `length_at_C`.

    Raises InputError below absolute zero, TakeoffError on an unknown law.
    """
    there = grown(material, temperature_C, law)
    times = ratio(material, length_at_C, temperature_C, law)
    length = None if times is None else length_mm * times
    return Length(temperature_C, length, tape_reading(length, temperature_C, tape), there.within_validity, there.reason)
