"""Rows weighed through the real reader, without picks or outputs: for the tests of weighing."""

from __future__ import annotations

import csv
import tempfile
from collections.abc import Sequence
from pathlib import Path
from typing import Any

import openpyxl

from takeoff import pipeline
from takeoff.findings import Finding
from takeoff.job import job_from
from takeoff.weighing.masses import Weighed, weigh

HEADINGS = (
    "Mark", "Quantity", "Section", "Material", "Length (mm)", "Width (mm)", "Thickness (mm)", "Finish", "Contents", "Insulation", "Holes",
    "Cut angle 1", "Cut angle 2",
    "Unit mass (kg)", "Total mass (kg)", "kg/m", "Volume (m3)", "Weighed mass (kg)",
)


class Rows:
    """A weighed list of rows given by heading, read from text, or from a workbook's `numbers`; `findings` are those of one row."""

    def __init__(self, rows: Sequence[dict[str, Any]], job: dict[str, Any] | None = None, headings: Sequence[str] | None = None, *,
                 numbers: bool = False) -> None:
        used = headings or [h for h in HEADINGS if any(h in row for row in rows)]
        with tempfile.TemporaryDirectory() as folder:
            path = Path(folder) / ("list.xlsx" if numbers else "list.csv")
            if numbers:
                book = openpyxl.Workbook()
                sheet = book.active
                assert sheet is not None
                for cells in [list(used), *([row.get(h) for h in used] for row in rows)]:
                    sheet.append(cells)
                book.save(path)
            else:
                with path.open("w", encoding="utf-8", newline="") as handle:
                    writer = csv.writer(handle, lineterminator="\n")
                    writer.writerow(used)
                    writer.writerows([["" if row.get(h) is None else row[h] for h in used] for row in rows])
            reading = pipeline.read([path], job_from(job or {}))
        self.weighed: Weighed = weigh(reading.members, reading.recognised, reading.codes, reading.job)
        self.frame = self.weighed.frame
        self.log = reading.members.log

    def findings(self, row: int = 0) -> list[Finding]:
        return list(self.log.by_member().get(row, ()))

    def kinds(self, row: int = 0) -> set[str]:
        return {f.kind for f in self.findings(row)}

    def mass(self, part: str, row: int = 0) -> tuple[float, float, float]:
        """Light, nominal, heavy of ``bare``, ``each``, ``total`` or ``add_KIND`` in a row; zeros where it has no such addition."""
        names = [f"{part}_{word}_kg" for word in ("light", "nominal", "heavy")]
        if names[0] not in self.frame:
            return 0.0, 0.0, 0.0
        light, nominal, heavy = (float(self.frame[name].iat[row]) for name in names)
        return light, nominal, heavy


BEAM = {"Mark": "A", "Quantity": 1, "Section": "UB 203x133x25", "Material": "S355", "Length (mm)": 6000}
PLATE = {"Mark": "P", "Quantity": 1, "Section": "PL 10", "Material": "S275", "Length (mm)": 1000, "Width (mm)": 500}
TUBE = {"Mark": "T", "Quantity": 1, "Section": "SHS 100x100x5 EN 10219", "Material": "S355", "Length (mm)": 6000}
