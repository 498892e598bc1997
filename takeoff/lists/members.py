"""Rows of the lists become members: one frame with a column for each field, texts kept, numbers in inside units.

A column is read as a whole: each distinct text once, bare numbers by the column's unit. What cannot be read is left
blank and said, never guessed.
"""

from __future__ import annotations

import math
import re
from collections import Counter
from collections.abc import Callable
from dataclasses import dataclass
from datetime import date, datetime, time, timedelta
from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding, Level
from takeoff.job import Job
from takeoff.lists.headings import MEASURES, NOT_ACTED_ON, TEXT_FIELDS
from takeoff.lists.log import FindingLog
from takeoff.lists.sheets import Cell
from takeoff.lists.tables import SheetReading, Table, is_blank
from takeoff.quantities import EVERYDAY, DecimalSign, choose, measure_readings, number_readings, tidy

if TYPE_CHECKING:
    import pandas as pd

#: measure fields that become frame columns, with the column's name
NUMBER_COLUMNS = {
    "length": "length_mm", "width": "width_mm", "thickness": "thickness_mm", "height": "height_mm",
    "diameter": "diameter_mm", "unit_mass": "stated_each_kg", "total_mass": "stated_total_kg",
    "mass_per_length": "stated_kg_per_m", "mass_per_area": "stated_kg_per_m2", "volume": "stated_volume_m3",
    "area": "stated_area_m2",
}
_TEXT_COLUMNS = ("mark", "assembly", "pick", "phase", "run", "bundle", "finish", "contents", "remarks")
#: what a length can be before it is refused as a slip of the unit, in mm
PLAUSIBLE_MM = {
    "length": (1.0, 100_000.0), "width": (0.5, 30_000.0), "thickness": (0.05, 5_000.0), "height": (0.5, 30_000.0),
    "diameter": (0.5, 10_000.0),
}
#: dimension -> the unit of a bare number in a metric list, and in one in inches or feet
_BARE_UNITS = {
    "mass": ("kg", "lb"), "mass per length": ("kg/m", "lb/ft"), "mass per area": ("kg/m2", "lb/ft2"), "area": ("m2", "ft2"),
    "volume": ("m3", "ft3"),
}
#: a length column whose bare numbers sit below this under mm was meant in another unit
_SMALLEST_USUAL_LENGTH_MM = 20.0
MOST_PIECES = 1_000_000

_COUNT = re.compile(
    r"(\d{1,7})\s*(?:x|×|off|no\.?|nos\.?|pcs\.?|pc\.?|pieces?|ea\.?|each|stk\.?|stck\.?|st\.?|szt\.?|uds?\.?|pz\.?)?", re.IGNORECASE
)


@dataclass(slots=True)
class Members:
    """The members of all lists of a run.

    frame : one row a member, in reading order. Texts: file, sheet, mark, assembly, pick, phase, run, bundle,
        section_text, section_heading, material_text, finish, contents, remarks. Numbers: row, quantity, length_mm, width_mm,
        thickness_mm, height_mm, diameter_mm, stated_each_kg, stated_total_kg, stated_kg_per_m, stated_kg_per_m2,
        stated_volume_m3, stated_area_m2; NaN where blank or unreadable.
    refused : member -> why its row cannot be weighed whatever else it says (the first reason).
    unread : member -> fields whose cell is filled but could not be read -> why.
    assumed : member -> the fields of which something was inferred ("quantity", "length", ...). A mass field counts
        only where the mass is used; weighing says so then.
    """

    frame: pd.DataFrame
    tables: list[Table]
    log: FindingLog
    refused: dict[int, str]
    unread: dict[int, dict[str, str]]
    assumed: dict[int, set[str]]


def build(readings: list[SheetReading], job: Job) -> Members:
    """The members of all tables of all sheets, in reading order."""
    import numpy as np
    import pandas as pd

    tables = [table for reading in readings for table in reading.tables]
    table_of = [number for number, table in enumerate(tables) for _ in table.member_rows]
    row_of = [row for table in tables for row in table.member_rows]
    members = Members(pd.DataFrame(), tables, FindingLog(tables, table_of, row_of), {}, {}, {})
    parts = []
    start = 0
    for table in tables:
        parts.append(_read_table(table, start, job, members))
        start += len(table.member_rows)
    names = [
        "file", "sheet", "row", *_TEXT_COLUMNS, "section_text", "section_heading", "material_text", "quantity", *NUMBER_COLUMNS.values(),
    ]
    data = {name: [value for part in parts for value in part[name]] for name in names}
    frame = pd.DataFrame({
        name: np.array(values, dtype=float) if name == "quantity" or name in NUMBER_COLUMNS.values()
        else pd.Series(values, dtype="int64" if name == "row" else object)
        for name, values in data.items()
    })
    members.frame = frame
    return members


def _read_table(table: Table, start: int, job: Job, members: Members) -> dict[str, list[Any]]:
    reader = _ColumnReader(table, start, job, members)
    count = len(table.member_rows)
    part: dict[str, list[Any]] = {
        "file": [table.sheet.file] * count, "sheet": [table.sheet.name] * count, "row": list(table.member_rows),
    }
    for name in _TEXT_COLUMNS:
        part[name] = reader.texts(name)
    names = reader.texts("name")
    part["section_text"] = reader.texts("section") if "section" in table.columns else names
    heading = table.columns.get("section") or table.columns.get("name")
    part["section_heading"] = [heading.text if heading else None] * count
    if "section" not in table.columns and "name" in table.columns:
        reader.say("note", "section-from-name", "read from the description, there being no section column",
                   [i for i, text in enumerate(names) if text], "name")
    part["material_text"] = reader.texts("material")
    part["quantity"] = reader.quantities()
    for name, column in NUMBER_COLUMNS.items():
        part[column] = reader.measures(name)
    reader.refuse_broken_rows()
    for name, why in NOT_ACTED_ON.items():
        cells = reader.cells(name)
        filled = [i for i, cell in enumerate(cells) if not is_blank(cell) and _as_text(cell).casefold() not in ("-", "none", "no", "0")]
        kind = "holes-not-deducted" if name == "holes" else "not-added" if "not added" in why else "heading-not-used"
        reader.say("note", kind, why, filled, name)
    return part


class _ColumnReader:
    """Reads the columns of one table; member numbers run from `start`."""

    def __init__(self, table: Table, start: int, job: Job, members: Members) -> None:
        self.table, self.start, self.job, self.members = table, start, job, members
        self.decimal = decimal_sign(table, job)
        self._fill_merged_texts()

    def cells(self, field: str) -> list[Cell]:
        """The cells of a field, member by member; None throughout where the list has no such column."""
        column = self.table.columns.get(field)
        if column is None:
            return [None] * len(self.table.member_rows)
        rows, at = self.table.sheet.rows, column.number - 1
        merged = self.merged.get(column.number, {})
        cells = [row[at] if at < len(row) else None for row in (rows[n - 1] if n <= len(rows) else [] for n in self.table.member_rows)]
        if merged:
            cells = [merged.get(n, cell) for n, cell in zip(self.table.member_rows, cells, strict=True)]
        return cells

    def say(self, level: Level, kind: str, message: str, members: list[int], field: str | None, *,
            read: str | None = None, right: str | None = None) -> None:
        """A finding of members of this table (numbered from 0); a refusal also bars their rows from the computation."""
        numbers = [self.start + i for i in members]
        self.members.log.add(Finding(level, kind, message, read=read, right=right), numbers, field)
        if level == "assumed":
            for number in numbers:
                self.members.assumed.setdefault(number, set()).add(field or "quantity")

    def _fill_merged_texts(self) -> None:
        """Merged text cells count for every row of the merge; column -> {row: text}."""
        self.merged: dict[int, dict[int, Cell]] = {}
        text_columns = {c.number for name, c in self.table.columns.items() if name in TEXT_FIELDS}
        wanted = set(self.table.member_rows)
        for top, left, bottom, right in self.table.sheet.merges:
            if bottom > top and left == right and left in text_columns and top in wanted:
                row = self.table.sheet.rows[top - 1]
                value = row[left - 1] if left <= len(row) else None
                self.merged.setdefault(left, {}).update({n: value for n in range(top, bottom + 1) if n in wanted})

    def _faults(self, field: str) -> dict[int, tuple[str, str, str]]:
        """Members whose cell of this field is an error or an unsaved formula -> (kind, message, what stands there)."""
        column = self.table.columns.get(field)
        sheet = self.table.sheet
        if column is None or not (sheet.errors or sheet.unsaved):
            return {}
        faults = {}
        for i, row in enumerate(self.table.member_rows):
            place = (row, column.number)
            if place in sheet.errors:
                faults[i] = ("cell-error", "the cell holds a spreadsheet error", sheet.errors[place])
            elif place in sheet.unsaved:
                faults[i] = ("formula-without-result", "the cell holds a formula without a stored result", "formula")
        return faults

    def _refuse_faults(self, field: str) -> set[int]:
        faults = self._faults(field)
        for kind, message, read in dict.fromkeys(faults.values()):
            where = [i for i, fault in faults.items() if fault == (kind, message, read)]
            right = "open and save it once in a spreadsheet program" if kind == "formula-without-result" else "a value"
            self.say("refused", kind, message, where, field, read=read, right=right)
            for i in where:
                self._bar(i, field, f"{message} ({field})")
        return set(faults)

    def _bar(self, i: int, field: str, reason: str) -> None:
        number = self.start + i
        self.members.unread.setdefault(number, {}).setdefault(field, reason)
        if field in ("section", "material", "quantity"):
            self.members.refused.setdefault(number, reason)

    def refuse_broken_rows(self) -> None:
        """In a text file, a row with more fields than headings holds a stray separator: which field is which is not known."""
        if self.table.sheet.name is not None:
            return
        width = len(self.table.sheet.rows[self.table.heading_rows[0] - 1])
        broken = [
            i for i, n in enumerate(self.table.member_rows)
            if any(not is_blank(cell) for cell in self.table.sheet.rows[n - 1][width:])
        ]
        message = "the row has more fields than there are headings"
        self.say("refused", "broken-row", message, broken, None, right="quotes around a cell that holds the separator")
        for i in broken:
            self.members.refused.setdefault(self.start + i, message)

    def texts(self, field: str) -> list[str | None]:
        faults = self._refuse_faults(field)
        texts = [None if is_blank(cell) else _as_text(cell) for cell in self.cells(field)]
        if not faults:
            return texts
        return [None if i in faults else text for i, text in enumerate(texts)]

    def quantities(self) -> list[float]:
        """Whole counts of 1 and more; NaN where the cell is no such thing, which bars the row."""
        if "quantity" not in self.table.columns:
            self.say("assumed", "quantity-assumed", "there is no quantity column: one each",
                     list(range(len(self.table.member_rows))), None, right="a column of quantities")
            return [1.0] * len(self.table.member_rows)
        faults = self._refuse_faults("quantity")
        values: list[float] = []
        refused: dict[str, list[int]] = {}
        for i, cell in enumerate(self.cells("quantity")):
            value = math.nan if i in faults else _count(cell)
            values.append(value)
            if math.isnan(value) and i not in faults:
                refused.setdefault("" if is_blank(cell) else _as_text(cell), []).append(i)
        for read, where in refused.items():
            message = "the quantity is blank" if not read else "the quantity is no whole count of 1 or more"
            self.say("refused", "missing-quantity", message, where, "quantity", read=read or None, right="a whole number such as 4")
            for i in where:
                self._bar(i, "quantity", message)
        return values

    def measures(self, field: str) -> list[float]:
        """Numbers in the field's inside unit; NaN where blank or unreadable. What could not be read bars that field."""
        count = len(self.table.member_rows)
        if field not in self.table.columns:
            return [math.nan] * count
        faults = self._refuse_faults(field)
        dimension = MEASURES[field]
        unit, unit_from = unit_of_column(self.table, field, self.job)
        values, bare, bad = self._numbers(field, faults, dimension, EVERYDAY[unit][1])
        self._say_unreadable(field, bad, dimension)
        if bare and unit_from in ("assumed", "job"):
            self._say_unit(field, bare, values, unit, unit_from)
        if dimension == "length" and field in PLAUSIBLE_MM:
            self._refuse_implausible(field, values)
        return values

    def _numbers(self, field: str, faults: set[int], dimension: str, factor: float) -> tuple[list[float], list[int], dict[str, list[int]]]:
        """Values, the members whose number stood bare, and what could not be read (text -> members)."""
        read_text = self._text_reader(dimension)
        known: dict[str, tuple[float, bool] | None] = {}
        values: list[float] = []
        bare: list[int] = []
        bad: dict[str, list[int]] = {}
        for i, cell in enumerate(self.cells(field)):
            if isinstance(cell, (int, float)) and not isinstance(cell, bool) and math.isfinite(cell):
                values.append(cell * factor)
                bare.append(i)
                continue
            if i in faults or is_blank(cell):
                values.append(math.nan)
                continue
            text = _as_text(cell)
            if text not in known:
                known[text] = read_text(text) if isinstance(cell, str) else None
            found = known[text]
            if found is None:
                values.append(math.nan)
                if text not in ("-", "–", "—", "n/a", "N/A"):
                    bad.setdefault(text, []).append(i)
                continue
            value, has_unit = found
            values.append(value if has_unit else value * factor)
            if not has_unit:
                bare.append(i)
        return values, bare, bad

    def _text_reader(self, dimension: str) -> Callable[[str], tuple[float, bool] | None]:
        def read(text: str) -> tuple[float, bool] | None:
            found = [m for m in measure_readings(text) if m.unit is None or EVERYDAY[m.unit][0] == dimension]
            if len(found) > 1 and self.decimal is not None:
                found = [m for m in found if m.sign in (self.decimal, None)]
            return (found[0].value, found[0].unit is not None) if len(found) == 1 else None

        return read

    def _say_unit(self, field: str, bare: list[int], values: list[float], unit: str, unit_from: str) -> None:
        dimension = MEASURES[field]
        if field == "length" and unit == "mm":
            middle = sorted(values[i] for i in bare)[len(bare) // 2]
            if middle < _SMALLEST_USUAL_LENGTH_MM:
                self.say("refused", "implausible-size", "lengths without a unit are too small for mm", bare, field,
                         right="the unit in the heading, such as Length (m), or [reading] length_unit in the job file")
                for i in bare:
                    values[i] = math.nan
                    self._bar(i, field, "the unit of the length is not known")
                return
        if unit_from == "job":
            self.say("note", "unit-from-job", f"bare numbers taken in {unit}, as the job file says", bare, field)
            return
        right = f"the unit in the heading, such as {self.table.columns[field].text} ({unit})"
        if dimension == "length":
            self.say("assumed", "unit-assumed", f"bare numbers taken in {unit}: nothing names their unit", bare, field, right=right)
            return
        # A mass that is only compared with ours makes no row assumed; weighing says so where it uses it.
        self.say("note", "mass-unit-assumed", f"bare numbers read in {unit}: nothing names their unit", bare, field, right=right)
        for i in bare:
            self.members.assumed.setdefault(self.start + i, set()).add(field)

    def _say_unreadable(self, field: str, bad: dict[str, list[int]], dimension: str) -> None:
        for read, where in bad.items():
            open_sign = len(number_readings(read)) > 1
            message = (
                f"the {field.replace('_', ' ')} can be read two ways: is the comma or point a decimal sign?" if open_sign
                else f"the {field.replace('_', ' ')} is no number with a unit of {dimension}"
            )
            right = "[reading] decimal in the job file" if open_sign else "a number, with its unit where the heading has none"
            self.say("refused", "unreadable-size", message, where, field, read=read, right=right)
            for i in where:
                self._bar(i, field, message)

    def _refuse_implausible(self, field: str, values: list[float]) -> None:
        low, high = PLAUSIBLE_MM[field]
        where: dict[float, list[int]] = {}
        for i, value in enumerate(values):
            if not (low <= value <= high) and not math.isnan(value):
                where.setdefault(value, []).append(i)
        for value, rows in where.items():
            message = f"a {field} of {value:,.6g} mm is not plausible"
            self.say("refused", "implausible-size", message, rows, field, read=f"{value:g} mm",
                     right=f"between {low:g} and {high:,.0f} mm; check the unit")
            for i in rows:
                values[i] = math.nan
                self._bar(i, field, message)


def unit_of_column(table: Table, field: str, job: Job) -> tuple[str, str]:
    """The unit of a column's bare numbers, and where it is from: heading, unit row, title block, job or assumed."""
    column = table.columns[field]
    dimension = MEASURES[field]
    below = table.units_below.get(column.number)
    if column.heading is not None and column.heading.unit is not None:
        return column.heading.unit, "heading"
    if below is not None and EVERYDAY[below][0] == dimension:
        return below, "unit row"
    if dimension == "length":
        if table.unit_note:
            return table.unit_note, "title block"
        return (job.reading.length_unit, "job") if job.reading.length_unit else ("mm", "assumed")
    imperial = table.unit_note in ("in", "ft") or any(c.heading and c.heading.unit in ("in", "ft") for c in table.all_columns)
    si, us = _BARE_UNITS[dimension]
    return us if imperial else si, "assumed"


def decimal_sign(table: Table, job: Job) -> DecimalSign | None:
    """The file's decimal sign: told by the job file, else the sign of every number text that settles it; None if open."""
    if job.reading.decimal != "auto":
        return job.reading.decimal
    votes: Counter[DecimalSign] = Counter()
    columns = [c.number for name, c in table.columns.items() if name in MEASURES or name == "quantity"]
    seen: set[str] = set()
    for n in table.member_rows:
        row = table.sheet.rows[n - 1] if n <= len(table.sheet.rows) else []
        for number in columns:
            cell = row[number - 1] if number <= len(row) else None
            if not isinstance(cell, str) or cell in seen:
                continue
            seen.add(cell)
            signs = {m.sign for m in measure_readings(cell)}
            if len(signs) == 1 and (sign := signs.pop()) is not None:
                votes[sign] += 1
    if len(votes) == 1:
        return next(iter(votes))
    return None


def _count(cell: Cell) -> float:
    """A whole count from 1 to MOST_PIECES, or NaN."""
    if isinstance(cell, bool) or cell is None:
        return math.nan
    if isinstance(cell, (int, float)):
        return float(cell) if math.isfinite(cell) and cell == int(cell) and 1 <= cell <= MOST_PIECES else math.nan
    if not isinstance(cell, str) or not cell.isascii():
        return math.nan
    text = tidy(cell)
    found = _COUNT.fullmatch(text)
    if found:
        return _count(int(found.group(1)))
    reading = choose(number_readings(text), None)
    return _count(reading.value) if reading else math.nan


def _as_text(cell: Cell) -> str:
    """A cell as the text a person sees: 7.0 is 7, a date its ISO form."""
    if isinstance(cell, str):
        return cell.strip()
    if isinstance(cell, bool):
        return "TRUE" if cell else "FALSE"
    if isinstance(cell, float) and cell.is_integer() and abs(cell) < 1e15:
        return str(int(cell))
    if isinstance(cell, (datetime, date, time)):
        return cell.isoformat()
    if isinstance(cell, timedelta):
        return str(cell)
    return str(cell)
