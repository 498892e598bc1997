"""The workbook that is sent on: the schedule, what it rests on, and what it lacks. Rank 9.

Totals are live formulas down to the rows, each stored with its computed result, so a viewer that never recalculates
shows the same figures. Nothing in the file depends on the clock: two runs over one list are equal cell by cell.
"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

from takeoff.reports.workbook import basis, changes, charts, lists, loads, perlist, pickdrawings, picks, schedule, summary, temperatures
from takeoff.reports.workbook.sheet import CHANGES, DRAWINGS, LOADS, PICKS, SCHEDULE, SHEETS, Book

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.reports.compare import Comparison

#: Above this many rows each row goes to disk as soon as it is written; below, repeated texts are shared.
MANY_ROWS = 20_000


def write_workbook(result: Result, path: str | Path, against: Comparison | None = None) -> None:
    """Write the schedule of `result` to `path` (xlsx), in the units of its job; `against` an earlier run, where there is one.

    Raises OSError where the file cannot be written.
    """
    many = len(result.members) > MANY_ROWS
    with Book(path, result, many=many) as book:
        for name in SHEETS:
            book.add(name)
            for list_name in perlist.names(result) if name == SCHEDULE else ():
                book.add(list_name)
            if name == PICKS and pickdrawings.drawn(result):
                book.add(DRAWINGS)
            if name == PICKS and result.loads is not None:
                book.add(LOADS)
            if name == PICKS and result.temperatures is not None:
                book.add(temperatures.TEMPERATURES)
        if against is not None:
            book.add(CHANGES)
        # The summary refers to all others and is written last; the schedule refers to bases that are only laid out yet.
        plan = schedule.plan_for(result)
        bases = basis.lay_out(book, result, plan)
        schedule.write(book, result, plan, bases.basis_rows)
        pick_cells = picks.write(book, result, plan, pickdrawings.write(book, result))
        if result.temperatures is not None:
            temperatures.write(book, result)
        lists.write_not_weighed(book, result)
        lists.write_assumptions(book, result)
        bases.write()
        perlist.write(book, result, plan, live=not many)
        if result.loads is not None:
            loads.write(book, result)
        if against is not None:
            changes.write(book, against)
        groups = summary.write(book, result, plan, pick_cells)
        charts.write(book, result, groups)
