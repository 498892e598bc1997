"""Sentences with figures in them that print in SI or US units. Rank 7.

A `Said` is a plain text in SI, as the JSON carries it; it remembers its figures, so that a report can print them in other units
and still round each the safe way.
"""

from __future__ import annotations

import math
from typing import Literal, NamedTuple

Unit = Literal["kg", "mm", "daN", "kN"]


class Figure(NamedTuple):
    """A figure in a sentence: its value in its SI unit, and which way it may be rounded: to a whole one, a kN to a tenth."""

    value: float
    unit: Unit
    way: Literal["up", "down"]

    def __str__(self) -> str:
        step = 10 if self.unit == "kN" else 1
        rounded = math.ceil(self.value * step - 1e-6) if self.way == "up" else math.floor(self.value * step + 1e-6)
        return f"{rounded / step:.15g} {self.unit}"


class Said(str):
    """A sentence in SI made of texts and figures; `parts` are they."""

    __slots__ = ("parts",)

    def __new__(cls, *parts: str | Figure) -> Said:
        made = super().__new__(cls, "".join(str(part) for part in parts))
        made.parts = parts
        return made

    parts: tuple[str | Figure, ...]

    def __reduce__(self) -> tuple[type[Said], tuple[str | Figure, ...]]:
        return Said, self.parts


def up(value: float, unit: Unit = "kg") -> Figure:
    """A figure that is rounded up, as a load is."""
    return Figure(value, unit, "up")


def down(value: float, unit: Unit = "kg") -> Figure:
    """A figure that is rounded down, as a limit is."""
    return Figure(value, unit, "down")
