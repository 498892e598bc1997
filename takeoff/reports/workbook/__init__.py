"""The workbook that is sent on: the schedule, what it rests on, and what it lacks. Rank 9.

Totals are live formulas down to the rows, each stored with its computed result, so a viewer that never recalculates
shows the same figures. Nothing in the file depends on the clock: two runs over one list are equal cell by cell.
"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

from takeoff.reports.workbook import basis, lists, picks, schedule, summary, temperatures
from takeoff.reports.workbook.sheet import PICKS, SHEETS, Book

if TYPE_CHECKING:
    from takeoff.pipeline import Result

#: Above this many rows each row goes to disk as soon as it is written; below, repeated texts are shared.
MANY_ROWS = 20_000


def write_workbook(result: Result, path: str | Path) -> None:
    """Write the schedule of `result` to `path` (xlsx), in the units of its job.

    Raises OSError where the file cannot be written.
    """
    with Book(path, result, many=len(result.members) > MANY_ROWS) as book:
        for name in SHEETS:
            book.add(name)
            if name == PICKS and result.temperatures is not None:
                book.add(temperatures.TEMPERATURES)
        # The summary refers to all others and is written last; the schedule refers to bases that are only laid out yet.
        plan = schedule.plan_for(result)
        bases = basis.lay_out(book, result, plan)
        schedule.write(book, result, plan, bases.basis_rows)
        pick_cells = picks.write(book, result, plan)
        if result.temperatures is not None:
            temperatures.write(book, result)
        lists.write_not_weighed(book, result)
        lists.write_assumptions(book, result)
        bases.write()
        summary.write(book, result, plan, pick_cells)
