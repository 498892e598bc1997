"""The list's own sums as a check: each total row's stated mass against ours, since the last total or of the whole table."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff.findings import Finding
from takeoff.lists.columns import unit_of_column
from takeoff.lists.tables import Table
from takeoff.quantities import EVERYDAY, measure_readings

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.job import Job

#: a list's sum and ours agree within this share
AGREES = 0.02


def compare(members: pd.DataFrame, tables: list[Table], job: Job) -> list[Finding]:
    """A finding for each total row whose stated mass is no sum of ours: not since the last total, not of the table so far.

    Either the bare masses or those with additions may be what the list sums.
    """
    findings: list[Finding] = []
    bare = (members["bare_nominal_kg"] * members["quantity"]).fillna(0.0).tolist()
    whole = members["total_nominal_kg"].fillna(0.0).tolist()
    start = 0
    for table in tables:
        end = start + len(table.member_rows)
        for name in ("total_mass", "mass"):
            if name in table.columns:
                findings += _of_table(table, name, bare[start:end], whole[start:end], job)
        start = end
    return findings


def _of_table(table: Table, field: str, bare: list[float], whole: list[float], job: Job) -> list[Finding]:
    column = table.columns[field]
    factor = EVERYDAY[unit_of_column(table, field, job)[0]][1]
    sums = (_Sums(), _Sums())
    masses = dict(zip(table.member_rows, zip(bare, whole, strict=True), strict=True))
    found = []
    for row in sorted((*table.member_rows, *table.total_rows)):
        if row in masses:
            for one, mass in zip(sums, masses[row], strict=True):
                one.add(mass)
            continue
        stated = _stated(table.cell(row, field), factor)
        ours = [amount for one in sums for amount in one.candidates() if amount]
        if stated is not None and ours and not any(abs(stated - amount) <= AGREES * amount for amount in ours):
            message = f"the list's total is {stated:,.6g} kg; the rows it follows come to {ours[0]:,.6g} kg nominal, bare"
            found.append(Finding("note", "total-differs", message, table.sheet.file, table.sheet.name, f"{column.letter}{row}",
                                 read=f"{stated:g} kg", right=f"{ours[0]:.6g} kg", cells=(f"{column.letter}{row}",)))
        for one in sums:
            one.close()
    return found


@dataclass(slots=True)
class _Sums:
    """What a total row may sum: the rows since the last total, or the whole table so far."""

    since: float = 0.0
    before: float = 0.0

    def add(self, mass: float) -> None:
        self.since += mass

    def candidates(self) -> tuple[float, float]:
        return (self.since, self.before + self.since) if self.since else (self.before, self.before)

    def close(self) -> None:
        self.before, self.since = self.before + self.since, 0.0


def _stated(cell: object, factor: float) -> float | None:
    if isinstance(cell, bool) or cell is None:
        return None
    if isinstance(cell, (int, float)):
        return float(cell) * factor if math.isfinite(cell) and cell > 0 else None
    readings = [m for m in measure_readings(str(cell)) if m.unit is None or EVERYDAY[m.unit][0] == "mass"]
    if len(readings) != 1 or readings[0].value <= 0:
        return None
    return readings[0].value if readings[0].unit else readings[0].value * factor
