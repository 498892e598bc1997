"""Figures with their units inside a cell of words: ``paint 240 um``, ``60 % water``, ``50 mm at 100 kg/m3``. Rank 4."""

from __future__ import annotations

import re
from dataclasses import dataclass

from takeoff.names import NormalName, normal_name
from takeoff.quantities import EVERYDAY, number_readings, tidy, unit_of

#: units of coatings, in mm; the everyday table has none so small
_THIN = {
    "um": 1e-3, "µm": 1e-3, "μm": 1e-3, "micron": 1e-3, "microns": 1e-3, "mic": 1e-3, "my": 1e-3, "mil": 0.0254, "mils": 0.0254,
}
_AMOUNT = re.compile(
    r"(?<![\w.,])(\d(?:[\d.,']*\d)?)\s*(%|percent\b|[a-zµμ]+(?:\s?/\s?[a-zµμ]+)?[23]?(?![\w]))", re.IGNORECASE
)
MAX_TEXT = 200


@dataclass(frozen=True, slots=True)
class Words:
    """A cell read: figures by dimension in inside units (mm, kg, kg/m, kg/m2, m3, kg/m3, percent), and the words left.

    `clear` is False where a figure can be read two ways, or a dimension stands twice.
    """

    amounts: dict[str, float]
    words: NormalName
    clear: bool


def read(text: str) -> Words:
    """The figures with a unit in a text, and what remains of it as one normal name."""
    plain = tidy(text)[:MAX_TEXT].casefold().replace("²", "2").replace("³", "3").replace("^", "")
    amounts: dict[str, float] = {}
    clear = len(text) <= MAX_TEXT

    def take(found: re.Match[str]) -> str:
        nonlocal clear
        dimension, factor = _unit(found.group(2))
        if dimension is None:
            return found.group(0)
        readings = number_readings(found.group(1))
        if len(readings) != 1 or dimension in amounts:
            clear = False
            return " "
        amounts[dimension] = readings[0].value * factor
        return " "

    rest = _AMOUNT.sub(take, plain)
    return Words(amounts, normal_name(rest), clear)


def _unit(text: str) -> tuple[str | None, float]:
    text = text.replace(" ", "")
    if text in ("%", "percent"):
        return "percent", 1.0
    if text in _THIN:
        return "length", _THIN[text]
    unit = unit_of(text)
    if unit is None:
        return None, 1.0
    dimension, factor, _ = EVERYDAY[unit]
    return dimension, factor


def without(name: NormalName, fillers: re.Pattern[str]) -> NormalName:
    """A name without words that carry nothing here."""
    return NormalName(" ".join(fillers.sub(" ", name).strip(" .,/+%#°").split()))
