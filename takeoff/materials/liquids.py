"""Densities of liquids by temperature, from published points; water and sea water have formulae of their own. Rank 2.

A row of the material table gives one density at one temperature. Here stand densities of the same kind of liquid at several
temperatures: their ratio carries the row's density, with its bounds, from one to the other. Between points density is taken as
linear; outside them there is no answer, for the liquid may freeze or boil.
"""

from __future__ import annotations

from bisect import bisect_right
from functools import cache
from pathlib import Path

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError

#: Temperature in °C and density in kg/m³, coldest first.
Points = tuple[tuple[float, float], ...]

_STEP = 0.01


def density_ratio(points: Points, from_C: float, to_C: float) -> float | None:
    """Density at `to_C` over the density at `from_C`; None where either lies outside the points."""
    here, there = _density(points, from_C), _density(points, to_C)
    return None if here is None or there is None else there / here


def _density(points: Points, t: float) -> float | None:
    if not points[0][0] - _STEP <= t <= points[-1][0] + _STEP:
        return None
    i = min(max(bisect_right(points, (t, 0.0)), 1), len(points) - 1)
    (t0, d0), (t1, d1) = points[i - 1], points[i]
    return d0 + (d1 - d0) * (t - t0) / (t1 - t0)


@cache
def liquid_points() -> dict[str, Points]:
    """The points of every liquid of liquid_densities.csv, by key of the material. Raises DataError as `read_points`."""
    return read_points(data_folder() / "liquid_densities.csv")


def read_points(path: Path) -> dict[str, Points]:
    """Points by key. Raises DataError on a figure that is no number, temperatures out of order, and a liquid of one point."""
    found: dict[str, list[tuple[float, float]]] = {}
    for line, row in read_table(path):
        try:
            point = float(row["temperature_C"]), float(row["density_kg_m3"])
        except ValueError:
            raise DataError(f"line {line}: this is no number", file=path, read=row["density_kg_m3"]) from None
        points = found.setdefault(row["key"], [])
        if points and points[-1][0] >= point[0]:
            raise DataError(f"line {line}: temperatures out of order", file=path, read=row["temperature_C"], right="the coldest first")
        points.append(point)
    for key, points in found.items():
        if len(points) < 2:
            raise DataError("a single temperature says nothing of another", file=path, read=key, right="two or more")
    return {key: tuple(points) for key, points in found.items()}
