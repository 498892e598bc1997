"""A crane's rating chart, the user's own, read as it must be: the next longer radius, never between two rows. Rank 6.

First column radius, one column a boom length, cells the rated mass. Between two boom lengths the smaller rating counts.
An empty cell gives no rating. A chart that is out of order, holds text or has holes may still show a figure, but no lift
is within it. Practice as quoted: US Army TM 5-3810-305-10 and a British Columbia load-chart guide.
"""

from __future__ import annotations

import itertools
import math
import re
from dataclasses import dataclass
from pathlib import Path

from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.job import CranePart, GuardsPart
from takeoff.lists.sheets import Cell, read_file
from takeoff.quantities import EVERYDAY, number_readings

_KG = {"kg": 1.0, "t": 1000.0, "lb": EVERYDAY["lb"][1]}
_M = {"m": 1.0, "ft": 0.3048}
#: a largest rating below this, with no unit, is tonnes or tons, not kg
_LEAST_LARGEST_KG = 1000.0
_BLANKS = ("", "-", "–", "—")
_BOOM = re.compile(r"(?:boom|main boom|jib|length)?\s*([\d.,' ]*\d)\s*(m|ft|metres?|meters?|feet|')?\s*(?:boom)?", re.IGNORECASE)
_FEET = re.compile(r"\b(?:ft|feet|foot)\b", re.IGNORECASE)
_METRES = re.compile(r"\b(?:m|metres?|meters?)\b", re.IGNORECASE)
_SAME = 1e-9


@dataclass(frozen=True, slots=True)
class Chart:
    """Radii and boom lengths in m, ratings in kg (NaN where the chart gives none). `findings` bar any lift from being within."""

    radii_m: tuple[float, ...]
    booms_m: tuple[float, ...]
    ratings_kg: tuple[tuple[float, ...], ...]
    findings: tuple[Finding, ...] = ()

    @property
    def sound(self) -> bool:
        return not self.findings

    def columns_for(self, boom_m: float | None) -> tuple[int, ...]:
        """The boom columns that count: the one named, or both neighbours of a length between; none where the chart has none."""
        if boom_m is None:
            return (0,) if len(self.booms_m) == 1 else ()
        order = sorted(range(len(self.booms_m)), key=lambda i: self.booms_m[i])
        same = [i for i in order if math.isclose(self.booms_m[i], boom_m, rel_tol=_SAME)]
        if same:
            return tuple(same)
        for shorter, longer in itertools.pairwise(order):
            if self.booms_m[shorter] < boom_m < self.booms_m[longer]:
                return shorter, longer
        return ()

    def row_for(self, radius_m: float) -> int | None:
        """The row of this radius or the next longer one; None where the chart does not reach."""
        reached = [i for i, r in enumerate(self.radii_m) if r >= radius_m * (1 - _SAME)]
        return min(reached, key=lambda i: self.radii_m[i]) if reached else None

    def rating(self, radius_m: float, boom_m: float | None) -> float | None:
        """kg, or None where the chart gives no rating there."""
        row, columns = self.row_for(radius_m), self.columns_for(boom_m)
        if row is None or not columns:
            return None
        cells = [self.ratings_kg[row][c] for c in columns]
        return None if any(map(math.isnan, cells)) else min(cells)


def read_chart(path: Path, crane: CranePart, guards: GuardsPart) -> Chart:
    """The chart of this crane. Raises InputError on a file that cannot be read or holds no chart at all."""
    sheet = next((s for s in read_file(path, guards).sheets if any(_filled(row) for row in s.rows)), None)
    grid = [row for row in sheet.rows if _filled(row)] if sheet else []
    if len(grid) < 2 or len(grid[0]) < 2:
        raise InputError(
            "holds no crane chart", file=path, right="a first column of radii and one column a boom length, with a heading row"
        )
    findings: list[Finding] = []
    width = max(i + 1 for i, cell in enumerate(grid[0]) if not _blank(cell))
    heading_unit = _heading_unit(str(grid[0][0] or ""))
    if heading_unit is not None and heading_unit != crane.radius_unit:
        findings.append(
            _says(
                "chart-unit-unknown",
                path,
                "the chart's radius heading and the job file's radius_unit differ",
                str(grid[0][0]),
                f'radius_unit = "{heading_unit}"',
            )
        )
    metre = _M[crane.radius_unit]
    booms = [_boom(cell, metre) for cell in grid[0][1:width]]
    for cell, boom in zip(grid[0][1:width], booms, strict=True):
        if math.isnan(boom):
            findings.append(_says("chart-text", path, "a column of the chart names no boom length", str(cell), "a length such as 30.5"))
    radii, ratings = [], []
    for row in grid[1:]:
        cells = [*row[:width], *([None] * (width - len(row)))]
        values = [_number(cell) for cell in cells]
        for cell, value in zip(cells, values, strict=True):
            if math.isnan(value) and not _blank(cell):
                findings.append(_says("chart-text", path, "a cell of the chart holds text", str(cell), "a plain number"))
        if any(not _blank(cell) for cell in row[width:]):
            findings.append(
                _says("chart-text", path, "a row of the chart is longer than its heading", None, "a boom length over each column")
            )
        radii.append(values[0] * metre)
        ratings.append(values[1:])
    factor = _KG[crane.rating_unit or "kg"]
    largest = max((v for row in ratings for v in row if not math.isnan(v)), default=0.0)
    if crane.rating_unit is None and largest < _LEAST_LARGEST_KG:
        findings.append(
            _says(
                "chart-unit-unknown",
                path,
                "the chart's unit is not given, and its largest rating is no kg of a crane",
                f"{largest:g}",
                'rating_unit = "t" for the crane in the job file',
            )
        )
        factor = math.nan
    table = tuple(tuple(v * factor if v > 0 else math.nan for v in row) for row in ratings)
    findings += _order(path, radii, booms, table)
    return Chart(tuple(radii), tuple(booms), table, tuple(dict.fromkeys(findings)))


def _order(path: Path, radii: list[float], booms: list[float], table: tuple[tuple[float, ...], ...]) -> list[Finding]:
    """What is wrong with the order of a chart: unsorted, holes, ratings that grow with the radius."""
    found = []
    for name, values in (("radii", radii), ("boom lengths", booms)):
        if any(not b > a for a, b in itertools.pairwise(values)):
            found.append(_says("chart-unsorted", path, f"the chart's {name} do not grow from one to the next", None, "each once, in order"))
    for column in range(len(booms)):
        cells = [row[column] for row in table]
        filled = [i for i, v in enumerate(cells) if not math.isnan(v)]
        if filled and len(filled) != filled[-1] - filled[0] + 1:
            found.append(
                _says("chart-gap", path, f"the chart has a hole in the column of boom {booms[column]:g} m", None, "a rating in every row")
            )
        rated = [cells[i] for i in filled]
        if any(b > a * (1 + _SAME) for a, b in itertools.pairwise(rated)):
            found.append(
                _says(
                    "chart-unsorted",
                    path,
                    f"a rating grows with the radius in the column of boom {booms[column]:g} m",
                    None,
                    "ratings that fall as the radius grows",
                )
            )
    return found


def _says(kind: str, path: Path, message: str, read: str | None, right: str) -> Finding:
    return Finding("note", kind, f"{message}: no lift is within this chart", file=path.name, read=read, right=right)


def _filled(row: list[Cell]) -> bool:
    return any(not _blank(cell) for cell in row)


def _blank(cell: Cell) -> bool:
    return cell is None or (isinstance(cell, str) and cell.strip() in _BLANKS)


def _number(cell: Cell) -> float:
    """A plain number of one reading; NaN for anything else, blanks too."""
    if isinstance(cell, bool) or cell is None:
        return math.nan
    if isinstance(cell, int | float):
        return float(cell) if math.isfinite(cell) else math.nan
    readings = number_readings(cell) if isinstance(cell, str) else []
    return readings[0].value if len(readings) == 1 and readings[0].value >= 0 else math.nan


def _boom(cell: Cell, metre: float) -> float:
    """A boom length in m, by its own unit or the chart's."""
    if not isinstance(cell, str):
        return _number(cell) * metre
    found = _BOOM.fullmatch(cell.strip())
    if not found:
        return math.nan
    unit = (found.group(2) or "").casefold()
    return _number(found.group(1)) * (metre if not unit else _M["m"] if unit.startswith("m") else _M["ft"])


def _heading_unit(text: str) -> str | None:
    text = text.replace("_", " ")
    feet, metres = _FEET.search(text), _METRES.search(text)
    return "ft" if feet and not metres else "m" if metres and not feet else None
