"""The rules that set light and heavy: rows of tolerances.csv, each with its source. Rank 2.

Where a product standard limits the mass, that is the bound; where it limits sizes only, the area or thickness at its
least and greatest is. Bands hold the larger sizes at their upper end (``includes`` upper) or at their lower (``lower``).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING, Any

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.provenance import Source
from takeoff.sections.section import Tolerance

if TYPE_CHECKING:
    import numpy as np

INFINITE = float("inf")


@dataclass(frozen=True, slots=True)
class Band:
    """One row: from `over` to `upto` mm, minus and plus in `unit` (percent or mm)."""

    over: float
    upto: float
    includes: str
    minus: float
    plus: float
    unit: str
    tolerance: Tolerance

    def holds(self, size: float) -> bool:
        if self.includes == "lower":
            return self.over <= size < self.upto
        return self.over < size <= self.upto

    def limits(self, size: float) -> tuple[float, float]:
        """Least and greatest mm of a nominal `size`."""
        if self.unit == "mm":
            return max(size - self.minus, 0.0), size + self.plus
        return size * (1 - self.minus / 100), size * (1 + self.plus / 100)


@cache
def rules() -> dict[str, tuple[Band, ...]]:
    """All rules by name. Raises DataError on a row without a source, or with a number that is none."""
    path = data_folder() / "tolerances.csv"
    found: dict[str, list[Band]] = {}
    for line, row in read_table(path):
        try:
            Source(row["title"], row["clause"], row["evidence"])
            band = Band(
                float(row["over"] or 0),
                float(row["upto"] or INFINITE),
                row["includes"],
                float(row["minus"]),
                float(row["plus"]),
                row["unit"],
                Tolerance(
                    row["rule"],
                    row["title"],
                    row["clause"],
                    row["evidence"],
                    row["text"],
                    "mass" if row["kind"] == "mass" else "dimension",
                ),
            )
        except (ValueError, DataError) as error:
            raise DataError(f"line {line}: {error}", file=path, right="numbers, and a source with its evidence") from error
        found.setdefault(row["rule"], []).append(band)
    return {name: tuple(sorted(bands, key=lambda b: b.over)) for name, bands in found.items()}


def band(rule: str, size: float = 1.0) -> Band | None:
    """The band of a rule that holds for this size in mm; None beyond the rule's range."""
    return next((b for b in rules()[rule] if b.holds(size)), None)


def mass_factor(rule: str, size: float = 1.0) -> tuple[Bounds, Tolerance]:
    """Light / 1 / heavy of a mass rule."""
    found = band(rule, size)
    if found is None:
        raise DataError("the tolerance rule has no band for this size", read=f"{rule}, {size:g} mm")
    return Bounds(1 - found.minus / 100, 1.0, 1 + found.plus / 100), found.tolerance


def size_limits(rule: str, size: float, beyond: str) -> tuple[Bounds, Tolerance]:
    """Least, nominal, greatest mm of one size by a dimension rule; `beyond` serves where the rule has no band."""
    found = band(rule, size) or band(beyond, size)
    if found is None:
        raise DataError("the tolerance rule has no band for this size", read=f"{rule}, {size:g} mm")
    low, high = found.limits(size)
    return Bounds(low, size, high), found.tolerance


def thickness_limits(rule: str, size: np.ndarray[Any, Any]) -> tuple[np.ndarray[Any, Any], np.ndarray[Any, Any]]:
    """Least and greatest of a whole column of sizes in mm; NaN stays NaN."""
    import numpy as np

    low, high = np.array(size, dtype=float), np.array(size, dtype=float)
    for b in rules()[rule]:
        inside = (size >= b.over) & (size < b.upto) if b.includes == "lower" else (size > b.over) & (size <= b.upto)
        if not inside.any():
            continue
        here = size[inside]
        if b.unit == "mm":
            low[inside], high[inside] = np.maximum(here - b.minus, 0.0), here + b.plus
        else:
            low[inside], high[inside] = here * (1 - b.minus / 100), here * (1 + b.plus / 100)
    return low, high
