"""How warm each piece was when it was measured, from the column that says so. Rank 3.

A bare number is °C unless the heading names °F or K. A cell that holds no temperature, or one that cannot be, is said, and
the row's sizes are then taken as they stand: assumed.
"""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

from takeoff.errors import UnitError
from takeoff.job import Job
from takeoff.lists.columns import DASHES, ColumnReader, as_text
from takeoff.lists.tables import is_blank
from takeoff.quantities import temperature_C

if TYPE_CHECKING:
    from takeoff.lists.members import Members

FIELD, COLUMN = "measured_at", "measured_at_C"
#: hotter than anything that is still measured, °C
HOTTEST_C = 4000.0
_HEADING_UNIT = re.compile(r"[(\[,]\s*(?:°|º|deg\.?\s*)?\s*(F|K|fahrenheit|kelvin)\s*[)\]]?\s*$", re.IGNORECASE)


def add(members: Members, job: Job) -> None:
    """Add the column `measured_at_C` to the members' frame (NaN where nobody says), if any list has such a column."""
    if not any(FIELD in table.columns for table in members.tables):
        return
    values: list[float] = []
    start = 0
    for table in members.tables:
        reader = ColumnReader(table, start, job, members)
        values += _temperatures(reader)
        start += reader.count
    members.frame = members.frame.assign(**{COLUMN: values})


def _temperatures(reader: ColumnReader) -> list[float]:
    faults = reader.faults(FIELD)
    column = reader.table.columns.get(FIELD)
    named = _HEADING_UNIT.search(column.text) if column is not None else None
    unit = named.group(1)[0].upper() if named else "C"
    values: list[float] = []
    unread: dict[str, list[int]] = {}
    for i, cell in enumerate(reader.cells(FIELD)):
        value = math.nan
        if i not in faults and not is_blank(cell) and as_text(cell) not in DASHES:
            value = _one(cell, unit)
            if math.isnan(value):
                unread.setdefault(as_text(cell), []).append(i)
        values.append(value)
    for text, where in unread.items():
        reader.say("assumed", "temperature-unread", "this is no temperature: the row's sizes are taken as they stand", where, FIELD,
                   read=text[:80], right="a number with C, F or K, such as 35 or 95 F, not below absolute zero")
        for i in where:
            # The sizes are what is then inferred; a row that gives none rests on no temperature.
            reader.members.assumed.setdefault(reader.start + i, set()).add("length")
    return values


def _one(cell: object, unit: str) -> float:
    if isinstance(cell, bool) or not isinstance(cell, int | float | str):
        return math.nan
    text = cell if isinstance(cell, str) else f"{cell:.10g}"
    try:
        value = temperature_C(text if re.search(r"[A-Za-z]", text) else f"{text}{unit}")
    except UnitError:
        return math.nan
    return value if value <= HOTTEST_C else math.nan
