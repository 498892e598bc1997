"""What no figure of a run counts, named on every total, pick and load. Rank 4."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from takeoff.job import Job

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.lists.tables import Table

#: all of it, in the order a checker reads it
EVERYTHING = ("welds", "bolts", "finish", "contents", "temporary steel")


def not_counted(job: Job, tables: Sequence[Table]) -> tuple[str, ...]:
    """Welds, bolts and finish until their key is set, contents until every list has a column for them, temporary steel always."""
    masses = job.masses
    with_members = [t for t in tables if t.member_rows]
    counted = {
        "welds": masses.weld_percent is not None, "bolts": masses.bolt_percent is not None, "finish": masses.finish is not None,
        "contents": bool(with_members) and all("contents" in t.columns for t in with_members),
    }
    return tuple(item for item in EVERYTHING if not counted.get(item, False))


def with_open_rows(items: tuple[str, ...], members: pd.DataFrame) -> tuple[str, ...]:
    """The same, and the rows of `members` whose finish or contents are named but could not be added."""
    more = list(items)
    for word, column in (("finish", "finish_open"), ("contents", "contents_open")):
        if column not in members or word in items:
            continue
        rows = int(members[column].sum())
        if rows:
            more.append(f"{word} of {rows} row{'s' if rows > 1 else ''}")
    return tuple(more)
