"""Where each piece is, from the position columns: x1 to z2 (its axis), x y z (its centre), axis and roll. Rank 3.

A position that is half given, cannot be read or lies absurdly far away is left out and said: a centre of gravity that
rests on a guessed position is worse than none.
"""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING, Any

from takeoff.job import Job
from takeoff.lists.columns import ColumnReader, as_text
from takeoff.lists.tables import is_blank
from takeoff.quantities import number_readings, tidy

if TYPE_CHECKING:
    from takeoff.lists.members import Members

STARTS, ENDS, CENTRES = ("x1", "y1", "z1"), ("x2", "y2", "z2"), ("x", "y", "z")
#: frame columns in mm, in the order of the fields
MM_COLUMNS = {name: f"{name}_mm" for name in (*STARTS, *ENDS, *CENTRES)}
#: what a list may write in its axis column -> the line of the section that the position gives
AXES = {
    "": "centroid", "centroid": "centroid", "centre": "centroid", "center": "centroid", "cog": "centroid", "heel": "heel", "back": "heel",
    "top": "top", "tos": "top", "bottom": "bottom", "bos": "bottom",
}
#: farther than this from the list's origin is a slip, mm
FARTHEST_MM = 1e7
_GROUP = re.compile(r"\b(?:group|groups|group's)\b", re.IGNORECASE)
_DEGREES = re.compile(r"\s*(?:°|deg\.?|degrees?|grad)\s*$", re.IGNORECASE)


def add(members: Members, job: Job) -> None:
    """Add the position columns to the members' frame, if any list has them.

    Columns: x1_mm .. z2_mm, x_mm, y_mm, z_mm (NaN where not given), axis (``centroid``, ``heel``, ``top``, ``bottom``, or
    None where its cell says something else), roll_deg, position_of_group (the heading says it is the group's).
    """
    wanted = {*MM_COLUMNS, "axis", "roll"}
    if not any(wanted & set(table.columns) for table in members.tables):
        return
    columns: dict[str, Any] = {name: [] for name in (*MM_COLUMNS.values(), "axis", "roll_deg", "position_of_group")}
    start = 0
    for table in members.tables:
        reader = ColumnReader(table, start, job, members)
        for name, column in MM_COLUMNS.items():
            columns[column] += _near(reader, name, reader.measures(name))
        columns["axis"] += _axes(reader)
        columns["roll_deg"] += _rolls(reader)
        of_group = any(_GROUP.search(table.columns[name].text) for name in CENTRES if name in table.columns)
        columns["position_of_group"] += [of_group] * reader.count
        start += reader.count
    import pandas as pd

    # As objects: a text column would turn an axis that was not understood into a blank one.
    columns["axis"] = pd.Series(columns["axis"], dtype=object, index=members.frame.index)
    members.frame = members.frame.assign(**columns)


def _near(reader: ColumnReader, field: str, values: list[float]) -> list[float]:
    far = [i for i, value in enumerate(values) if abs(value) > FARTHEST_MM]
    if far:
        reader.say("note", "implausible-size", f"a position {field} farther than 10 km from the origin is left out", far, field)
    return [math.nan if abs(value) > FARTHEST_MM else value for value in values]


def _axes(reader: ColumnReader) -> list[str | None]:
    found: list[str | None] = []
    unknown: dict[str, list[int]] = {}
    for i, text in enumerate(reader.texts("axis")):
        axis = AXES.get((text or "").casefold().strip(". "))
        found.append(axis)
        if axis is None and text is not None:
            unknown.setdefault(text, []).append(i)
    for text, where in unknown.items():
        reader.say("note", "position-unread", "the axis column names no line of a section: the position is left out", where, "axis",
                   read=text, right="centroid, heel, top or bottom")
    return found


def _rolls(reader: ColumnReader) -> list[float]:
    """Degrees; 0 where blank, NaN where the cell is no number of degrees."""
    found: list[float] = []
    unread: dict[str, list[int]] = {}
    for i, cell in enumerate(reader.cells("roll")):
        if is_blank(cell):
            found.append(0.0)
            continue
        value = math.nan
        if isinstance(cell, int | float) and not isinstance(cell, bool):
            value = float(cell)
        elif isinstance(cell, str):
            readings = number_readings(_DEGREES.sub("", tidy(cell)))
            value = readings[0].value if len(readings) == 1 else math.nan
        if not abs(value) <= 3600:
            value = math.nan
            unread.setdefault(as_text(cell), []).append(i)
        found.append(value)
    for text, where in unread.items():
        reader.say("note", "position-unread", "the roll is no number of degrees: the position is left out", where, "roll", read=text,
                   right="degrees, such as 90")
    return found
