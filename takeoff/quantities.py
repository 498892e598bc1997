"""Text with units to plain floats, in the house's inside units. The only user of pint. Rank 1.

Inside: mm, kg, kg/m, kg/m², m², m³, °C. The everyday spellings are one small table here, so that look-ups need not load
pint; a test checks every entry of the table against pint. Other units are read by `convert`, which does load it.
Nothing here evaluates an expression: a text is a number and a unit, or it is refused.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from typing import TYPE_CHECKING, Any, Literal

from takeoff.errors import UnitError

if TYPE_CHECKING:
    import pint

Dimension = Literal[
    "length", "mass", "mass per length", "mass per area", "area", "volume", "density", "force", "temperature"
]
DecimalSign = Literal["point", "comma"]

#: dimension -> unit inside -> what pint calls it (for the test and for `convert`)
INSIDE: dict[str, tuple[str, str]] = {
    "length": ("mm", "millimeter"),
    "mass": ("kg", "kilogram"),
    "mass per length": ("kg/m", "kilogram / meter"),
    "mass per area": ("kg/m2", "kilogram / meter ** 2"),
    "area": ("m2", "meter ** 2"),
    "volume": ("m3", "meter ** 3"),
    "density": ("kg/m3", "kilogram / meter ** 3"),
    "force": ("kN", "kilonewton"),
}

_LB = 0.45359237
_FT = 304.8
_IN = 25.4

#: spelling -> (dimension, factor to the inside unit, pint's name). Lower case; `unit_of` folds the text before looking.
EVERYDAY: dict[str, tuple[Dimension, float, str]] = {
    "mm": ("length", 1.0, "millimeter"),
    "cm": ("length", 10.0, "centimeter"),
    "dm": ("length", 100.0, "decimeter"),
    "m": ("length", 1000.0, "meter"),
    "in": ("length", _IN, "inch"),
    "ft": ("length", _FT, "foot"),
    "yd": ("length", 914.4, "yard"),
    "g": ("mass", 0.001, "gram"),
    "kg": ("mass", 1.0, "kilogram"),
    "t": ("mass", 1000.0, "metric_ton"),
    "lb": ("mass", _LB, "pound"),
    "kip": ("mass", 1000 * _LB, "kilopound_mass"),
    "kg/m": ("mass per length", 1.0, "kilogram / meter"),
    "g/m": ("mass per length", 0.001, "gram / meter"),
    "lb/ft": ("mass per length", _LB / 0.3048, "pound / foot"),
    "kg/m2": ("mass per area", 1.0, "kilogram / meter ** 2"),
    "g/m2": ("mass per area", 0.001, "gram / meter ** 2"),
    "lb/ft2": ("mass per area", _LB / 0.3048**2, "pound / foot ** 2"),
    "mm2": ("area", 1e-6, "millimeter ** 2"),
    "cm2": ("area", 1e-4, "centimeter ** 2"),
    "m2": ("area", 1.0, "meter ** 2"),
    "in2": ("area", 0.0254**2, "inch ** 2"),
    "ft2": ("area", 0.3048**2, "foot ** 2"),
    "mm3": ("volume", 1e-9, "millimeter ** 3"),
    "cm3": ("volume", 1e-6, "centimeter ** 3"),
    "l": ("volume", 1e-3, "liter"),
    "m3": ("volume", 1.0, "meter ** 3"),
    "in3": ("volume", 0.0254**3, "inch ** 3"),
    "ft3": ("volume", 0.3048**3, "foot ** 3"),
    "kg/m3": ("density", 1.0, "kilogram / meter ** 3"),
    "g/cm3": ("density", 1000.0, "gram / centimeter ** 3"),
    "t/m3": ("density", 1000.0, "metric_ton / meter ** 3"),
    "lb/ft3": ("density", _LB / 0.3048**3, "pound / foot ** 3"),
    "kn": ("force", 1.0, "kilonewton"),
    "n": ("force", 0.001, "newton"),
}

#: other ways to write an everyday unit
SPELLINGS: dict[str, str] = {
    "millimeter": "mm", "millimetre": "mm", "millimeters": "mm", "millimetres": "mm", "mms": "mm",
    "centimeter": "cm", "centimetre": "cm", "centimeters": "cm", "centimetres": "cm",
    "meter": "m", "metre": "m", "meters": "m", "metres": "m", "mtr": "m", "lm": "m", "mb": "m",
    '"': "in", "inch": "in", "inches": "in", "ins": "in", "zoll": "in",
    "'": "ft", "foot": "ft", "feet": "ft", "ft-in": "ft", "ftin": "ft", "ft'-in": "ft", "feet-inches": "ft", "yard": "yd", "yards": "yd",
    "gram": "g", "grams": "g", "kgs": "kg", "kilo": "kg", "kilos": "kg", "kilogram": "kg", "kilograms": "kg",
    "kilogramme": "kg", "kilogrammes": "kg", "tonne": "t", "tonnes": "t", "to": "t",
    "tonnen": "t", "tonn": "t", "toneladas": "t", "tonnellate": "t", "ton": "t", "tons": "t",
    "lbs": "lb", "pound": "lb", "pounds": "lb", "kips": "kip",
    "kg/lm": "kg/m", "kg/mtr": "kg/m", "kgm": "kg/m", "lbs/ft": "lb/ft", "lb/lf": "lb/ft", "plf": "lb/ft",
    "kg/sqm": "kg/m2", "kg/qm": "kg/m2", "lbs/ft2": "lb/ft2", "lb/sqft": "lb/ft2", "lb/sf": "lb/ft2", "psf": "lb/ft2",
    "sqmm": "mm2", "sqcm": "cm2", "sqm": "m2", "qm": "m2", "sqin": "in2", "sqft": "ft2", "sf": "ft2",
    "cum": "m3", "cbm": "m3", "litre": "l", "liter": "l", "litres": "l", "liters": "l", "cuin": "in3", "cuft": "ft3",
    "cf": "ft3", "pcf": "lb/ft3", "kg/cum": "kg/m3", "kg/cbm": "kg/m3", "g/cc": "g/cm3", "kg/l": "g/cm3",
    "kg/dm3": "g/cm3",
}

#: longer than any honest size cell; a number of thousands of digits is refused before it is converted
MAX_TEXT = 80

_FRACTIONS = {"¼": "1/4", "½": "1/2", "¾": "3/4", "⅛": "1/8", "⅜": "3/8", "⅝": "5/8", "⅞": "7/8", "⅓": "1/3", "⅔": "2/3"}
_SPACES = re.compile(r"[\s\u00a0\u2000-\u200a\u202f\u205f\u3000]+")
_PLAIN = re.compile(r"[+-]?\d+")
_ONE_SIGN = re.compile(r"([+-]?)(\d+)([.,])(\d+)")
_GROUPED = re.compile(r"([+-]?)(\d{1,3}(?:([.,' ])\d{3})(?:\3\d{3}){0,5})(?:([.,])(\d+))?")
_NUMBER_THEN_UNIT = re.compile(r"([+-]?[\d.,' ]*\d)\s*(\D.*)?")
_MIXED = re.compile(r"(?:(\d{1,6})(?:\s*-\s*|\s+))?(\d{1,4})/(\d{1,4})")


@dataclass(frozen=True, slots=True)
class Reading:
    """One way to read a text as a number, and the decimal sign that reading implies (None: no sign decides)."""

    value: float
    sign: DecimalSign | None


@dataclass(frozen=True, slots=True)
class Measure:
    """A number with the everyday unit that stood beside it; `value` is in the inside unit where `unit` is not None."""

    value: float
    unit: str | None
    sign: DecimalSign | None = None


def tidy(text: str) -> str:
    """Blanks of every width made plain, primes and quotes to ' and ", minus signs to -, vulgar fractions spelt out."""
    text = _SPACES.sub(" ", text).strip()
    for sign, spelt in _FRACTIONS.items():
        if sign in text:
            text = text.replace(sign, " " + spelt)
    return (
        text.replace("′", "'").replace("’", "'").replace("‘", "'").replace("″", '"').replace("”", '"').replace("“", '"')
        .replace("''", '"').replace("−", "-").replace("⁄", "/").strip()
    )


def number_readings(text: str) -> list[Reading]:
    """Every way to read `text` as one plain number: ``1,500`` is 1500 (decimal point) or 1.5 (decimal comma).

    An empty list means that it is no number. Blank and apostrophe group thousands and decide nothing.
    """
    text = tidy(text)
    if not text or len(text) > MAX_TEXT or not text.isascii():
        return []
    if _PLAIN.fullmatch(text):
        return [Reading(float(text), None)]
    readings: list[Reading] = []
    one = _ONE_SIGN.fullmatch(text)
    if one:
        minus, whole, sign, part = one.groups()
        readings.append(Reading(float(f"{minus}{whole}.{part}"), "point" if sign == "." else "comma"))
    grouped = _GROUPED.fullmatch(text)
    if grouped:
        minus, body, group, sign, part = grouped.groups()
        if sign != group and not (body.startswith("0") and len(body) > 1):
            value = float(f"{minus}{re.sub(r'[^0-9]', '', body)}.{part or 0}")
            if sign:
                implied: DecimalSign | None = "point" if sign == "." else "comma"
            elif group in ".,":
                implied = "comma" if group == "." else "point"
            else:
                implied = None
            readings.append(Reading(value, implied))
    return readings


def choose(readings: list[Reading], decimal: DecimalSign | None) -> Reading | None:
    """The one reading that a file's decimal sign leaves; None where several stay open or there is none.

    A text that can only be read against the file's sign (``82,5`` among decimal points) is read as it must be.
    """
    if len(readings) > 1 and decimal is not None:
        readings = [r for r in readings if r.sign in (decimal, None)]
    return readings[0] if len(readings) == 1 else None


def unit_of(text: str) -> str | None:
    """The everyday unit a text names (``Millimetres``, ``kg / m²``, ``sq. ft``), or None."""
    folded = tidy(text).casefold().replace("²", "2").replace("³", "3").replace("^", "").replace("**", "")
    folded = folded.replace("·", "").replace("per ", "/").replace(" ", "").strip(".[](){}:;")
    folded = folded.replace("sq.", "sq").replace("cu.", "cu").rstrip(".")
    if folded in EVERYDAY:
        return folded
    return SPELLINGS.get(folded)


def measure_readings(text: str) -> list[Measure]:
    """Every way to read a text as a number with or without an everyday unit; feet, inches and fractions too.

    ``14.2 m`` is 14200 mm with unit ``m``; ``12'-6 1/2"`` is 3822.7 mm with unit ``ft``; ``1200`` is 1200 with unit None.
    """
    text = tidy(text)
    if not text or len(text) > MAX_TEXT:
        return []
    imperial = _feet_inches(text)
    if imperial is not None:
        return [imperial]
    split = _NUMBER_THEN_UNIT.fullmatch(text)
    if not split:
        return []
    number, rest = split.groups()
    if rest is None:
        return [Measure(r.value, None, r.sign) for r in number_readings(number)]
    unit = unit_of(rest)
    if unit is None:
        return []
    factor = EVERYDAY[unit][1]
    return [Measure(r.value * factor, unit, r.sign) for r in number_readings(number)]


_FEET = re.compile(r"(\d{1,6}(?:\.\d{1,6})?)\s*(?:'|ft\.?|feet|foot)\s*-?\s*(.*)", re.IGNORECASE)
_INCHES = re.compile(r"(.*?)\s*(?:\"|in\.?|inch|inches|ins)", re.IGNORECASE)


def _feet_inches(text: str) -> Measure | None:
    """Feet and inches with fractions, or inches with a fraction: ``5' 8 1/2"``, ``1-1/4"``, ``¾"``. None when it is neither."""
    feet = _FEET.fullmatch(text)
    if feet:
        whole, rest = feet.groups()
        if not rest:
            return Measure(float(whole) * _FT, "ft", None)
        inches = _INCHES.fullmatch(rest)
        value = _inches(inches.group(1) if inches else rest)
        if value is None or value >= 12 or "." in whole:
            return None
        return Measure(float(whole) * _FT + value * _IN, "ft", None)
    inches = _INCHES.fullmatch(text)
    if inches and "/" in text:
        value = _inches(inches.group(1))
        return None if value is None else Measure(value * _IN, "in", None)
    return None


def _inches(text: str) -> float | None:
    text = text.strip()
    mixed = _MIXED.fullmatch(text)
    if mixed:
        whole, top, bottom = mixed.groups()
        if int(bottom) == 0 or int(top) >= int(bottom):
            return None
        return float(int(whole or 0) + Fraction(int(top), int(bottom)))
    reading = choose(number_readings(text), "point")
    return None if reading is None or reading.value < 0 else reading.value


def length_mm(text: str, *, bare_unit: str = "mm", decimal: DecimalSign = "point") -> float:
    """A length typed at a terminal, in mm. Raises UnitError on anything else, a negative length included."""
    return _one(text, "length", bare_unit, decimal, "a length such as 6000, 6 m, 12'-6 1/2\"")


def mass_kg(text: str, *, bare_unit: str = "kg", decimal: DecimalSign = "point") -> float:
    """A mass typed at a terminal, in kg. Raises UnitError on anything else."""
    return _one(text, "mass", bare_unit, decimal, "a mass such as 250, 250 kg, 1.2 t, 500 lb")


def _one(text: str, dimension: Dimension, bare_unit: str, decimal: DecimalSign, right: str) -> float:
    readings = [m for m in measure_readings(text) if m.unit is None or EVERYDAY[m.unit][0] == dimension]
    if len(readings) > 1:
        readings = [m for m in readings if m.sign in (decimal, None)]
    if len(readings) != 1 or readings[0].value < 0:
        raise UnitError(f"no {dimension}", read=text[:MAX_TEXT], right=right)
    found = readings[0]
    return found.value if found.unit else found.value * EVERYDAY[bare_unit][1]


_TEMPERATURE = re.compile(r"([+-]?\d{1,6}(?:[.,]\d{1,6})?)\s*(?:°|º|deg\.?)?\s*([CFK]|celsius|fahrenheit|kelvin)?", re.IGNORECASE)
ABSOLUTE_ZERO_C = -273.15


def temperature_C(text: str, *, bare_unit: Literal["C", "F"] = "C") -> float:
    """A temperature in °C: ``60``, ``60C``, ``140 °F``, ``77K``; a bare number is °C unless said otherwise.

    Raises UnitError on other text and below absolute zero.
    """
    found = _TEMPERATURE.fullmatch(tidy(text)) if len(text) <= MAX_TEXT else None
    if not found:
        raise UnitError("no temperature", read=text[:MAX_TEXT], right="a number with C, F or K, such as 60C or 140F")
    value = float(found.group(1).replace(",", "."))
    unit = (found.group(2) or bare_unit)[0].upper()
    celsius = {"C": value, "F": (value - 32) / 1.8, "K": value + ABSOLUTE_ZERO_C}[unit]
    if celsius < ABSOLUTE_ZERO_C - 1e-9:
        raise UnitError("below absolute zero", read=text, right="-273.15 °C (0 K) or above")
    return celsius


def convert(value: float, unit: str, dimension: Dimension) -> float:
    """A value in any unit pint knows, in the inside unit of `dimension`. Raises UnitError on an unknown or unfit unit.

    pint is given the unit's name alone, never a text with numbers or operators to evaluate beyond unit powers.
    """
    everyday = unit_of(unit)
    if everyday is not None and EVERYDAY[everyday][0] == dimension:
        return value * EVERYDAY[everyday][1]
    if len(unit) > MAX_TEXT or not re.fullmatch(r"[A-Za-zµ_]+(?:\s*(?:/|\*\*?|\^)\s*(?:[A-Za-zµ_]+|[1-4]))*", unit):
        raise UnitError(f"no unit of {dimension}", read=unit[:MAX_TEXT], right=f"a unit such as {INSIDE[dimension][0]}")
    import pint

    try:
        return float(_registry().Quantity(value, unit).to(INSIDE[dimension][1]).magnitude)
    except (pint.PintError, AttributeError, TypeError, ValueError, ZeroDivisionError) as error:
        raise UnitError(f"no unit of {dimension}", read=unit, right=f"a unit such as {INSIDE[dimension][0]}") from error


@cache
def _registry() -> pint.UnitRegistry[Any]:
    import pint

    return pint.UnitRegistry()


#: end of a column's name -> the unit its figures are in
_COLUMN_UNITS = {"_mm": "mm", "_kg": "kg", "_m2": "m**2", "_m3": "m**3", "_kN": "kN", "_t": "metric_ton", "_deg": "degree"}


def named_by_unit(name: str) -> tuple[str, str] | None:
    """A column's name (``length_mm``) as its bare name and its unit; None where it ends in no unit."""
    found = ((name.removesuffix(end), unit) for end, unit in _COLUMN_UNITS.items() if name.endswith(end))
    return next(((bare, unit) for bare, unit in found if bare), None)


def quantity(values: Any, unit: str) -> Any:
    """An array of figures as a pint quantity, all from one registry, so that they may be added."""
    return _registry().Quantity(values, unit)
