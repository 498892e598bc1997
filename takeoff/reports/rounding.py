"""How a figure is printed: never rounded toward danger, in SI or in US customary units. Rank 9.

Heavy masses and hook loads round up, light masses down, nominal ones to the nearest. Every printed figure goes through
here, so the rule is kept in one place. Numbers are grouped by blanks, since a comma or a point between thousands is a
decimal sign to half the readers. US print uses lb, kip and feet-inches, never a bare ton.
"""

from __future__ import annotations

import math
from decimal import ROUND_CEILING, ROUND_FLOOR, ROUND_HALF_EVEN, Decimal
from fractions import Fraction
from typing import Literal

from takeoff.bounds import Bounds
from takeoff.quantities import EVERYDAY

Way = Literal["up", "down", "nearest"]
Units = Literal["si", "us"]

KG_PER_LB = EVERYDAY["lb"][1]
MM_PER_IN = EVERYDAY["in"][1]
MM_PER_FT = EVERYDAY["ft"][1]
#: 1 kip is 1,000 pounds-force: 1000 x 0.45359237 kg x 9.80665 m/s², in kN
KN_PER_KIP = 4.4482216152605
#: what stands where there is no figure
NO_FIGURE = "–"
#: keeps a number and its unit together until a line is broken; `plain_blanks` turns it back
NO_BREAK = "\u00a0"

_ROUNDING = {"up": ROUND_CEILING, "down": ROUND_FLOOR, "nearest": ROUND_HALF_EVEN}
#: Sums of floats end in noise (3 x 0.1 = 0.30000000000000004); what lies this close to a printable figure is that figure.
_NOISE = Decimal("1e-9")


def rounded(value: float, decimals: int, way: Way) -> Decimal:
    """`value` to so many decimals, never past it the wrong way by more than a billionth part of it.

    Raises ValueError on a value that is not finite.
    """
    if not math.isfinite(value):
        raise ValueError(f"{value} cannot be printed as a figure")
    exact = Decimal(value)
    step = Decimal(1).scaleb(-decimals)
    nearest = exact.quantize(step, ROUND_HALF_EVEN)
    if abs(nearest - exact) <= abs(exact) * _NOISE:
        return nearest
    return exact.quantize(step, _ROUNDING[way])


def number(value: float | None, decimals: int, way: Way = "nearest", gap: str = " ") -> str:
    """A figure as text, thousands set apart by `gap`; an absent figure (None, NaN) is a dash."""
    if value is None or math.isnan(value):
        return NO_FIGURE
    figure = rounded(value, decimals, way)
    return ("−" if figure < 0 else "") + f"{abs(figure):,.{decimals}f}".replace(",", gap)


def decimals_for(value: float | None) -> int:
    """Decimals that suit a mass in kg or lb: three below 1, two below 10, one below 1,000, none above.

    That keeps at least three figures, and never claims a precision that the tolerances behind a mass cannot carry.
    """
    if value is None or not math.isfinite(value):
        return 0
    size = abs(value)
    return 3 if size < 1 else 2 if size < 10 else 1 if size < 1000 else 0


def in_mass_unit(kg: float, units: Units) -> float:
    """kg as kg, or as lb."""
    return kg if units == "si" else kg / KG_PER_LB


def mass_unit(units: Units) -> str:
    """What masses are printed in: kg or lb."""
    return "kg" if units == "si" else "lb"


def mass(kg: float | None, way: Way, units: Units = "si", decimals: int | None = None, gap: str = " ") -> str:
    """A mass without its unit, rounded the way it must go; a dash where it is not known."""
    if kg is None or math.isnan(kg):
        return NO_FIGURE
    value = in_mass_unit(kg, units)
    return number(value, decimals_for(value) if decimals is None else decimals, way, gap)


def mass_with_unit(kg: float | None, way: Way, units: Units = "si", decimals: int | None = None, gap: str = " ") -> str:
    """A mass with its unit, ``1450 kg`` or ``3197 lb``."""
    text = mass(kg, way, units, decimals, gap)
    return text if text == NO_FIGURE else f"{text}{gap}{mass_unit(units)}"


def bounds(kg: Bounds, units: Units = "si", gap: str = " ") -> tuple[str, str, str]:
    """Light (down), nominal (nearest) and heavy (up) without unit, with the same decimals."""
    decimals = decimals_for(in_mass_unit(kg.heavy, units))
    return (
        mass(kg.light, "down", units, decimals, gap),
        mass(kg.nominal, "nearest", units, decimals, gap),
        mass(kg.heavy, "up", units, decimals, gap),
    )


def force_with_unit(kN: float | None, way: Way, units: Units = "si", gap: str = " ") -> str:
    """A force with its unit: kN, or kip (1,000 pounds-force); one decimal more than a mass of the same weight needs."""
    if kN is None or math.isnan(kN):
        return NO_FIGURE
    value, unit = (kN, "kN") if units == "si" else (kN / KN_PER_KIP, "kip")
    size = abs(value)
    return f"{number(value, 3 if size < 1 else 2 if size < 10 else 1, way, gap)}{gap}{unit}"


def feet_inches(mm: float | None, denominator: int = 16, way: Way = "nearest") -> str:
    """A length the way a US tape shows it, to a sixteenth: ``12'-6 1/2"``, ``0'-0 3/8"``."""
    if mm is None or math.isnan(mm):
        return NO_FIGURE
    exact = Fraction(mm) / Fraction(254, 10) * denominator
    parts = round(exact) if way == "nearest" else int(rounded(float(exact), 0, way))
    sign, parts = ("−", -parts) if parts < 0 else ("", parts)
    feet, rest = divmod(parts, 12 * denominator)
    inches, over = divmod(rest, denominator)
    fraction = f" {Fraction(over, denominator)}" if over else ""
    return f"{sign}{feet}'-{inches}{fraction}\""


def length_with_unit(mm: float | None, units: Units = "si", gap: str = " ", way: Way = "nearest") -> str:
    """A length: whole mm where it is whole, else to a tenth; feet-inches for US print."""
    if units == "us":
        return feet_inches(mm, way=way)
    if mm is None or math.isnan(mm):
        return NO_FIGURE
    return f"{number(mm, 0 if float(mm).is_integer() else 1, way, gap)}{gap}mm"


def metres_with_unit(m: float | None, way: Way, units: Units = "si", gap: str = " ") -> str:
    """A long length: m to a hundredth; feet-inches for US print."""
    if m is None or math.isnan(m):
        return NO_FIGURE
    return feet_inches(m * 1000.0, way=way) if units == "us" else f"{number(m, 2, way, gap)}{gap}m"


def moment_with_unit(kNm: float | None, way: Way, units: Units = "si", gap: str = " ") -> str:
    """A moment: kNm, or kip-ft."""
    if kNm is None or math.isnan(kNm):
        return NO_FIGURE
    value, unit = (kNm, "kNm") if units == "si" else (kNm / KN_PER_KIP / (MM_PER_FT / 1000.0), "kip-ft")
    return f"{number(value, 3 if abs(value) < 1 else 2, way, gap)}{gap}{unit}"


def speed_with_unit(m_s: float, way: Way, units: Units = "si", gap: str = " ") -> str:
    """A wind speed: m/s, or mph."""
    value, unit = (m_s, "m/s") if units == "si" else (m_s * 3.6 / (MM_PER_FT * 5280 / 1e6), "mph")
    return f"{number(value, 1, way, gap)}{gap}{unit}"


def stress_with_unit(mpa: float | None, way: Way, units: Units = "si", gap: str = " ") -> str:
    """A stress: MPa, or psi."""
    if mpa is None or math.isnan(mpa):
        return NO_FIGURE
    if units == "si":
        return f"{number(mpa, 2, way, gap)}{gap}MPa"
    return f"{number(mpa * MM_PER_IN**2 / KN_PER_KIP, 0, way, gap)}{gap}psi"


def plain_blanks(text: str) -> str:
    """Text with its no-break blanks made plain, once its lines are broken."""
    return text.replace(NO_BREAK, " ")
