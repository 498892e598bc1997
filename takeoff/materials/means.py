"""Mean coefficients by upper temperature, as product standards print them (EN 10088-1 and the like). Rank 2."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass
from functools import cache

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials.material import Material
from takeoff.materials.table import source_titles
from takeoff.provenance import Source

REFERENCE_C = 20.0


@dataclass(frozen=True, slots=True)
class Mean:
    """One printed figure: the mean coefficient per K from `low_C` to `high_C`."""

    low_C: float
    high_C: float
    alpha_per_K: float
    source: Source
    note: str


@dataclass(frozen=True, slots=True)
class MeanPoints:
    """A row's mean coefficients as elongations from 20 °C; between them the mean coefficient is taken as linear."""

    points: tuple[tuple[float, float], ...]
    source: Source

    @property
    def from_C(self) -> float:
        return self.points[0][0]

    @property
    def to_C(self) -> float:
        return self.points[-1][0]

    def elongation(self, temperature_C: float) -> float:
        """ΔL/L from 20 °C; the coefficient of the nearest printed figure is held outside them."""
        coefficients = [(t, e / (t - REFERENCE_C)) for t, e in self.points if t != REFERENCE_C]
        temperatures = [t for t, _ in coefficients]
        i = bisect_right(temperatures, temperature_C)
        if i == 0 or i == len(coefficients):
            alpha = coefficients[0 if i == 0 else -1][1]
        else:
            (t0, a0), (t1, a1) = coefficients[i - 1], coefficients[i]
            alpha = a0 + (a1 - a0) * (temperature_C - t0) / (t1 - t0)
        return alpha * (temperature_C - REFERENCE_C)


@cache
def means() -> dict[str, tuple[Mean, ...]]:
    """Printed mean coefficients by key of the material, coldest upper temperature first."""
    path = data_folder() / "means.csv"
    found: dict[str, list[Mean]] = {}
    for line, row in read_table(path):
        title = source_titles().get(row["source"])
        if title is None:
            raise DataError(f"line {line}: no such source", file=path, read=row["source"])
        found.setdefault(row["key"], []).append(
            Mean(
                float(row["low_C"]), float(row["high_C"]), float(row["alpha_1e-6_per_K"]) * 1e-6,
                Source(title, row["clause"], row["evidence"]), row["note"],
            )
        )  # fmt: skip
    return {key: tuple(sorted(rows, key=lambda mean: mean.high_C)) for key, rows in found.items()}


@cache
def mean_points(material: Material) -> MeanPoints | None:
    """The row's mean coefficients as one function; None where there are none. A second text on an interval is left out."""
    rows = () if material.own else means().get(material.key, ())
    points: dict[float, float] = {}
    source: Source | None = None
    for mean in rows:
        if mean.high_C in points or mean.note == "second text":
            continue
        source = source or mean.source
        if mean.high_C <= REFERENCE_C:
            points[mean.low_C] = mean.alpha_per_K * (mean.low_C - REFERENCE_C)
            continue
        # A mean from 0, 21, 25 or 30 °C: the row's own coefficient carries the few degrees from 20 °C.
        first = (material.alpha_per_K or mean.alpha_per_K) * (mean.low_C - REFERENCE_C)
        points[mean.high_C] = first + mean.alpha_per_K * (mean.high_C - mean.low_C)
    if not points or source is None:
        return None
    points[REFERENCE_C] = 0.0
    return MeanPoints(tuple(sorted(points.items())), source)
