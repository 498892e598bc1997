"""A pin in a bore at two temperatures: clearance or interference, and the temperature that gives a wanted clearance. Rank 5.

A bore grows as the ring around it would if it were solid: d(T) = d20 (1 + e(T)).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.materials import Law, Material, law_of
from takeoff.thermal import notes
from takeoff.thermal.lengths import REFERENCE_C, factor

#: how finely a temperature is looked for, and how closely it is found, in K
_STEP, _CLOSE = 1.0, 1e-9


@dataclass(frozen=True, slots=True)
class Fit:
    """Diameters in mm at their temperatures; `clearance_mm` below zero is interference; None where a material gives no answer.

    temperature_for_clearance_C : of the part that is brought to it (`part`), the other left at its temperature.
    heat_bore_to_C, cool_pin_to_C, both_at_C : the three ways to the wanted clearance, each None where it is out of reach.
    """

    bore_material: Material
    pin_material: Material
    bore_law: Law
    pin_law: Law
    bore_nominal_mm: float
    pin_nominal_mm: float
    bore_C: float
    pin_C: float
    bore_mm: float | None
    pin_mm: float | None
    clearance_mm: float | None
    wanted_mm: float | None
    part: str
    temperature_for_clearance_C: float | None
    heat_bore_to_C: float | None
    cool_pin_to_C: float | None
    both_at_C: float | None
    findings: tuple[Finding, ...]

    @property
    def answered(self) -> bool:
        """Whether everything that was asked has an answer."""
        return not any(f.level == "refused" for f in self.findings)


def fit(
    bore_material: Material, bore_mm: float, pin_material: Material, pin_mm: float, *, bore_C: float | None = None,
    pin_C: float | None = None, clearance_mm: float | None = None,
) -> Fit:
    """The fit of two diameters given at 20 °C; a temperature left out is 20 °C.

    The temperature that gives `clearance_mm` is the bore's; the pin's where only the bore's temperature is given.
    Raises InputError on a diameter that is none or a temperature below absolute zero.
    """
    for name, size in (("bore", bore_mm), ("pin", pin_mm)):
        if not 0 < size < math.inf:
            raise InputError(f"the {name} is no diameter", read=f"{size:g} mm", right="a diameter above zero")
    bore_at, pin_at = (REFERENCE_C if t is None else t for t in (bore_C, pin_C))

    def bore(t: float) -> float | None:
        return _size(bore_material, bore_mm, t)

    def pin(t: float) -> float | None:
        return _size(pin_material, pin_mm, t)

    findings = [f for m, t in ((bore_material, bore_at), (pin_material, pin_at)) for f in notes.about_temperatures(m, (t,))]
    for material in dict.fromkeys((bore_material, pin_material)):
        findings += notes.about_material(material)
    big, small = bore(bore_at), pin(pin_at)
    gap = None if big is None or small is None else big - small
    heat = cool = both = None
    part = "pin" if bore_C is not None and pin_C is None else "bore"
    if clearance_mm is not None and gap is not None and big is not None and small is not None:
        still_big, still_small = big, small
        heat = _find(lambda t: _less(bore(t), still_small + clearance_mm), bore_at, _reach(bore_material))
        cool = _find(lambda t: _less(still_big - clearance_mm, pin(t)), pin_at, _reach(pin_material))
        ends = [_reach(m) for m in (bore_material, pin_material)]
        both = _find(
            lambda t: _less(_less(bore(t), pin(t)), clearance_mm), REFERENCE_C, (max(e[0] for e in ends), min(e[1] for e in ends))
        )
        found = cool if part == "pin" else heat
        if found is None:
            findings.append(Finding(
                "refused", "not-reached", f"no temperature of the {part} within the range of its law gives the wanted clearance",
                read=f"{clearance_mm:g} mm", right="a smaller clearance, or another temperature of the other part",
            ))
    return Fit(
        bore_material, pin_material, law_of(bore_material), law_of(pin_material), bore_mm, pin_mm, bore_at, pin_at, big, small, gap,
        clearance_mm, part, cool if part == "pin" else heat, heat, cool, both, tuple(dict.fromkeys(findings)),
    )


def _size(material: Material, size_mm: float, temperature_C: float) -> float | None:
    times = factor(material, temperature_C, size="diameter")
    return None if times is None else size_mm * times


def _less(a: float | None, b: float | None) -> float | None:
    return None if a is None or b is None else a - b


def _reach(material: Material) -> tuple[float, float]:
    """The range of the row's law, short of its melting point."""
    pieces = law_of(material).pieces
    if not pieces:
        return (REFERENCE_C, REFERENCE_C)
    high = pieces[-1].to_C if material.melting_C is None else min(pieces[-1].to_C, material.melting_C)
    return (pieces[0].from_C, high)


def _find(function: Callable[[float], float | None], start: float, ends: tuple[float, float]) -> float | None:
    """The zero of a function of temperature nearest to `start`, looked for step by step both ways; None where there is none."""
    here = function(start)
    if here is None:
        return None
    if here == 0:
        return start
    found = [t for direction in (1, -1) if (t := _walk(function, start, here, direction, ends)) is not None]
    return min(found, key=lambda t: abs(t - start)) if found else None


def _walk(
    function: Callable[[float], float | None], start: float, here: float, direction: int, ends: tuple[float, float]
) -> float | None:
    end = ends[1] if direction > 0 else ends[0]
    t, value = start, here
    while (end - t) * direction > 0:
        further = t + direction * min(_STEP, abs(end - t))
        ahead = function(further)
        if ahead is None:
            return None
        if (ahead > 0) != (value > 0):
            return _halve(function, t, further, value)
        t, value = further, ahead
    return None


def _halve(function: Callable[[float], float | None], a: float, b: float, at_a: float) -> float:
    while abs(b - a) > _CLOSE:
        middle = (a + b) / 2
        value = function(middle)
        if value is None or (value > 0) == (at_a > 0):
            a = middle
        else:
            b = middle
    return (a + b) / 2
