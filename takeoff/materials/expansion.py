"""Elongation and density at temperature: one law a row, so that movements stay additive. Rank 2; owns both questions.

A law is a chain of pieces: the row's own constant coefficient about room temperature, published curves beyond it, each
shifted to meet its neighbour, zero at 20 °C. The law is the row's, never the call's. A published curve, the row's
printed mean coefficients (`means`) or its bare coefficient (`constant`) can be asked for alone, by name.
Beyond its ends the last slope is held, and said; above the melting point there is no answer. Mass is conserved: density
falls as volume grows, by the cube of the elongation, or by the product of the three directions where they differ.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache

from takeoff.bounds import Spread
from takeoff.errors import TakeoffError
from takeoff.materials.curves import curves
from takeoff.materials.directions import directional_coefficients
from takeoff.materials.laws import PRACTICE_C, laws, row_range
from takeoff.materials.liquids import Points, density_ratio, liquid_points
from takeoff.materials.material import Material
from takeoff.materials.means import mean_points
from takeoff.materials.water import WATERS
from takeoff.provenance import Source

REFERENCE_C = 20.0
_STEP = 0.01
_STATED_C = re.compile(r"(-?\d+(?:\.\d+)?) ?°C")

Function = Callable[[float], float]


@dataclass(frozen=True, slots=True)
class Piece:
    """One stretch of a law, °C, and the source of its figures."""

    from_C: float
    to_C: float
    source: Source
    curve: str


@dataclass(frozen=True, slots=True)
class Law:
    """A law's name and pieces, coldest first; empty where the row has no coefficient."""

    name: str
    pieces: tuple[Piece, ...]


@dataclass(frozen=True, slots=True)
class Elongation:
    """ΔL/L from 20 °C to a temperature, along the grain where it matters.

    `value` is None above the melting point and where no coefficient is known. `by_direction` holds the directions where
    they differ (`along`, `across`, `radial`, `tangential`, `in plane`, `through`). `reason` says in words why the answer
    is None or outside the published range.
    """

    value: float | None
    by_direction: dict[str, float]
    within_validity: bool
    reason: str
    law: str


@dataclass(frozen=True, slots=True)
class DensityAt:
    """Density in kg/m³ at a temperature; None above the melting point and where no expansion is known."""

    density: Spread | None
    within_validity: bool
    reason: str


@dataclass(frozen=True, slots=True)
class _Link:
    """A piece with its function of temperature (°C), shifted to meet the chain."""

    piece: Piece
    function: Function
    shift: float

    def value(self, t: float) -> float:
        return self.function(t) + self.shift


def law_of(material: Material, law: str | None = None) -> Law:
    """The row's law, or the one asked for by name: its pieces with their sources.

    Raises TakeoffError where a name asked for is no law, curve, `means` or `constant`.
    """
    return Law(law or material.law, tuple(link.piece for link in _chain(material, law)))


def elongation(material: Material, temperature_C: float, *, law: str | None = None) -> Elongation:
    """ΔL/L from 20 °C by the row's law, or by the curve that `law` names.

    Raises TakeoffError on an unknown law name, ValueError below absolute zero.
    """
    if temperature_C < -273.15:
        raise ValueError("below absolute zero")
    name = law or material.law
    if material.kind == "liquid":
        return Elongation(None, {}, False, "a liquid has no length", name)
    if material.alpha_per_K is None and law is None:
        at_reference = temperature_C == REFERENCE_C
        reason = "" if at_reference else "no coefficient of expansion is known for this material"
        return Elongation(0.0 if at_reference else None, {}, at_reference, reason, name)
    if material.melting_C is not None and temperature_C > material.melting_C:
        return Elongation(None, {}, False, f"above the melting point, {material.melting_C:g} °C", name)
    chain = _chain(material, law)
    value, within = _evaluate(chain, temperature_C)
    reason = "" if within else _outside(chain, temperature_C)
    return Elongation(value, _by_direction(material, value, temperature_C), within, reason, name)


def density_at(material: Material, temperature_C: float, *, law: str | None = None) -> DensityAt:
    """Density at a temperature from the density at 20 °C; water and sea water by formula, other liquids by published points.

    Raises TakeoffError on an unknown law name, ValueError below absolute zero.
    """
    if material.key in WATERS and not material.own:
        value, within, reason = WATERS[material.key](temperature_C)
        return DensityAt(None if value is None else Spread(value, value, value), within, reason)
    grown = elongation(material, temperature_C, law=law)
    if not material.own and (points := liquid_points().get(material.key)):
        return _by_points(material, points, temperature_C)
    if material.kind == "liquid":
        if temperature_C == REFERENCE_C:
            return DensityAt(material.density, True, "")
        return DensityAt(None, False, "how this liquid's density changes with temperature is not in the table")
    if grown.value is None:
        return DensityAt(None, False, grown.reason)
    volume = _volume_ratio(grown) / _volume_at_reference(material, law)
    density = material.density
    nominal = None if density.nominal is None else density.nominal / volume
    return DensityAt(Spread(density.low / volume, nominal, density.high / volume), grown.within_validity, grown.reason)


def _by_points(material: Material, points: Points, temperature_C: float) -> DensityAt:
    """The row's density carried along the points, from the temperature it is stated at (20 °C where none is)."""
    stated = _STATED_C.match(material.density_condition)
    ratio = density_ratio(points, float(stated.group(1)) if stated else REFERENCE_C, temperature_C)
    if ratio is None:
        reason = f"this liquid's density is published from {points[0][0]:g} to {points[-1][0]:g} °C only"
        return DensityAt(None, False, reason)
    low, nominal, high = material.density.low, material.density.nominal, material.density.high
    return DensityAt(Spread(low * ratio, None if nominal is None else nominal * ratio, high * ratio), True, "")


def _volume_at_reference(material: Material, law: str | None) -> float:
    """Volume at the temperature of the table's density: 20 °C, but for a solid that melts below it (ice), its own."""
    if material.melting_C is None or material.melting_C >= REFERENCE_C:
        return 1.0
    stated = _STATED_C.match(material.density_condition)
    temperature = float(stated.group(1)) if stated else material.melting_C
    return _volume_ratio(elongation(material, min(temperature, material.melting_C), law=law))


def _volume_ratio(grown: Elongation) -> float:
    """Volume over volume at 20 °C; a plane, or a direction across the grain, counts twice."""
    assert grown.value is not None
    ways = grown.by_direction
    along = 1.0 + grown.value
    if "radial" in ways and "tangential" in ways:
        return along * (1.0 + ways["radial"]) * (1.0 + ways["tangential"])
    if "across" in ways:
        return along * (1.0 + ways["across"]) ** 2
    if "through" in ways:
        return along**2 * (1.0 + ways["through"])
    return along**3


def _by_direction(material: Material, value: float, temperature_C: float) -> dict[str, float]:
    """Elongation in each direction, where the directions differ: constant coefficients."""
    main = {"along grain": "along", "in-plane": "in plane"}.get(material.alpha_direction)
    if main is None:
        return {}
    others = {} if material.own else directional_coefficients().get(material.key, {})
    rest = {way: figure.alpha_per_K * (temperature_C - REFERENCE_C) for way, figure in others.items()}
    return {main: value, **rest}


# -- chains ------------------------------------------------------------------------------------------------------------


def _evaluate(chain: tuple[_Link, ...], t: float) -> tuple[float, bool]:
    """The chain's value, and whether `t` lies on it; beyond its ends the last slope is held."""
    first, last = chain[0], chain[-1]
    if t < first.piece.from_C - _STEP:
        end = first.piece.from_C
        slope = (first.value(end + _STEP) - first.value(end)) / _STEP
        return first.value(end) + slope * (t - end), False
    if t > last.piece.to_C + _STEP:
        end = last.piece.to_C
        slope = (last.value(end) - last.value(end - _STEP)) / _STEP
        return last.value(end) + slope * (t - end), False
    for link in chain:
        if t <= link.piece.to_C:
            return link.value(max(t, link.piece.from_C)), True
    return last.value(last.piece.to_C), True


def _outside(chain: tuple[_Link, ...], t: float) -> str:
    low, high = chain[0].piece.from_C, chain[-1].piece.to_C
    side = f"below {low:g} °C" if t < low else f"above {high:g} °C"
    return f"{side}, outside the range of the law ({low:g} to {high:g} °C): the last slope is held"


@cache
def _chain(material: Material, law: str | None) -> tuple[_Link, ...]:
    """The pieces of a law with their shifts: zero at 20 °C, and no jump where two meet."""
    if law is not None:
        return (_alone(material, law),)
    if material.alpha_per_K is None:
        return ()
    stretches = laws()[material.law]
    pieces = [_piece(material, *stretch) for stretch in stretches]
    base = next(i for i, (piece, _) in enumerate(pieces) if piece.from_C <= REFERENCE_C <= piece.to_C)
    links: list[_Link | None] = [None] * len(pieces)
    piece, function = pieces[base]
    links[base] = _Link(piece, function, -function(REFERENCE_C))
    for i in range(base + 1, len(pieces)):
        before = links[i - 1]
        assert before is not None
        piece, function = pieces[i]
        links[i] = _Link(piece, function, before.value(piece.from_C) - function(piece.from_C))
    for i in range(base - 1, -1, -1):
        after = links[i + 1]
        assert after is not None
        piece, function = pieces[i]
        links[i] = _Link(piece, function, after.value(piece.to_C) - function(piece.to_C))
    return tuple(link for link in links if link is not None)


def _piece(material: Material, from_C: float, to_C: float | None, name: str) -> tuple[Piece, Function]:
    if name == "row":
        assert material.alpha_per_K is not None
        assert material.alpha_source is not None
        alpha = material.alpha_per_K
        end = PRACTICE_C[1] if to_C is None else to_C
        low, high = row_range(material.law, from_C, end, material.alpha_interval_C)
        return Piece(low, high, material.alpha_source, name), lambda t: alpha * (t - REFERENCE_C)
    if name == "means":
        found = mean_points(material)
        assert found is not None, f"{material.key} has no mean coefficients"
        end = found.to_C if to_C is None else min(to_C, found.to_C)
        return Piece(from_C, end, found.source, name), found.elongation
    curve = curves()[name]
    return Piece(from_C, curve.to_C if to_C is None else to_C, curve.source, name), curve.without_jumps


def _alone(material: Material, law: str) -> _Link:
    """A published curve as printed, the row's mean coefficients, or its bare coefficient."""
    if law == "constant" and material.alpha_per_K is not None and material.alpha_source is not None:
        alpha = material.alpha_per_K
        low, high = material.alpha_interval_C or PRACTICE_C
        piece = Piece(min(low, PRACTICE_C[0]), max(high, PRACTICE_C[1]), material.alpha_source, "row")
        return _Link(piece, lambda t: alpha * (t - REFERENCE_C), 0.0)
    if law == "means" and (found := mean_points(material)) is not None:
        return _Link(Piece(found.from_C, found.to_C, found.source, "means"), found.elongation, 0.0)
    curve = curves().get(law)
    if curve is None:
        right = ["constant"] if material.alpha_per_K is not None else []
        right += ["means"] if mean_points(material) is not None else []
        raise TakeoffError(
            f"no law of this name for {material.name}", read=law[:80],
            right="without --law the row's own law; or one of " + ", ".join([*right, *sorted(curves())]),
        )  # fmt: skip
    return _Link(Piece(curve.from_C, curve.to_C, curve.source, law), curve.elongation, 0.0)

