"""Coefficients in the other directions, for wood and composites, which grow differently across than along. Rank 2."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials.table import source_titles
from takeoff.provenance import Source


@dataclass(frozen=True, slots=True)
class Directional:
    """A coefficient per K in one direction, with its source."""

    alpha_per_K: float
    source: Source


@cache
def directional_coefficients() -> dict[str, dict[str, Directional]]:
    """Key of the material -> direction (`across`, `radial`, `tangential`, `through`) -> coefficient."""
    path = data_folder() / "directions.csv"
    found: dict[str, dict[str, Directional]] = {}
    for line, row in read_table(path):
        title = source_titles().get(row["source"])
        if title is None:
            raise DataError(f"line {line}: no such source", file=path, read=row["source"])
        figure = Directional(float(row["alpha_1e-6_per_K"]) * 1e-6, Source(title, row["clause"], row["evidence"]))
        found.setdefault(row["key"], {})[row["direction"]] = figure
    return found
