"""The workbook reader in a process of its own: bytes in on standard input, cells out on standard output.

The fast reader ends the whole process on some broken workbooks (an absurd row number, a count of texts that no memory
holds), which no handler can catch. So it runs apart, started by `takeoff.lists.apart`, under limits of memory and time.
This file is run by its path and imports nothing of ours. Rank 3.
"""

from __future__ import annotations

import marshal
import sys
from collections.abc import Callable, Sequence
from datetime import date, datetime, time, timedelta
from io import BytesIO
from typing import Any

#: cells that go through as they are
_PLAIN = (str, float, int, bool, type(None))
MEGABYTE = 1_000_000
_MADE: dict[str, Callable[[str], Any]] = {"datetime": datetime.fromisoformat, "date": date.fromisoformat, "time": time.fromisoformat}


def read(data: bytes, cells: int) -> dict[str, Any]:
    """All sheets of a workbook, plain enough to be sent: ``sheets`` as (name, hidden, rows, odd cells), or ``error``.

    Blank cells are None. Dates and times stand in `odd`, once `sendable` took them out, as (row, column, kind, value), counted
    from 0. A sheet of more than `cells` cells is not read: its rows are then (rows, columns).
    """
    import python_calamine as calamine

    sheets: list[tuple[str, bool, Any, list[Any]]] = []
    book = calamine.CalamineWorkbook.from_filelike(BytesIO(data))
    for meta in book.sheets_metadata:
        if meta.typ != calamine.SheetTypeEnum.WorkSheet:
            continue
        sheet = book.get_sheet_by_name(meta.name)
        hidden = meta.visible != calamine.SheetVisibleEnum.Visible
        # The last cell's row and column, from 0; None where the sheet is empty. (The reader's own totals are one short.)
        last_row, last_column = sheet.end or (-1, -1)
        if (last_row + 1) * (last_column + 1) > cells:
            sheets.append((meta.name, hidden, (last_row + 1, last_column + 1), []))
            continue
        rows = [[None if cell == "" else cell for cell in row] for row in sheet.to_python(skip_empty_area=False)]
        sheets.append((meta.name, hidden, rows, []))
    return {"sheets": sheets}


def sendable(answer: dict[str, Any]) -> bytes:
    """An answer of `read` as bytes; dates and times, where there are any, taken out of the rows first."""
    try:
        return marshal.dumps(answer)
    except ValueError:
        sheets = [(name, hidden, rows, _take_out_odd(rows)) for name, hidden, rows, _ in answer["sheets"]]
        return marshal.dumps({"sheets": sheets})


def _take_out_odd(rows: Any) -> list[tuple[int, int, str, Any]]:
    """Take cells out of the rows that cannot be sent as they are, and say what they were."""
    odd: list[tuple[int, int, str, Any]] = []
    if isinstance(rows, tuple):
        return odd
    for number, row in enumerate(rows):
        for column, cell in enumerate(row):
            if isinstance(cell, _PLAIN):
                continue
            row[column] = None
            if isinstance(cell, timedelta):
                odd.append((number, column, "timedelta", (cell.days, cell.seconds, cell.microseconds)))
            elif isinstance(cell, datetime | date | time):
                odd.append((number, column, type(cell).__name__, cell.isoformat()))
            else:
                odd.append((number, column, "text", str(cell)))
    return odd


def put_back(rows: list[list[Any]], odd: Sequence[tuple[int, int, str, Any]]) -> None:
    """Put dates and times back where `read` took them out."""
    for number, column, kind, value in odd:
        made: Any = value
        if kind == "timedelta":
            made = timedelta(*value)
        elif kind != "text":
            made = _MADE[kind](value)
        rows[number][column] = made


def _limit(megabytes: int, seconds: int) -> None:
    """Keep this process within its memory and time, where the system can."""
    try:
        import resource
    except ImportError:
        return
    for what, most in ((resource.RLIMIT_AS, megabytes * MEGABYTE), (resource.RLIMIT_CPU, seconds), (resource.RLIMIT_CORE, 0)):
        _, hard = resource.getrlimit(what)
        wanted = most if hard == resource.RLIM_INFINITY else min(most, hard)
        resource.setrlimit(what, (wanted, hard))


def main() -> None:
    """`reader.py MEGABYTES SECONDS CELLS`: one workbook from standard input to standard output."""
    megabytes, seconds, cells = map(int, sys.argv[1:4])
    _limit(megabytes, seconds)
    try:
        sent = sendable(read(sys.stdin.buffer.read(), cells))
    except BaseException as error:  # noqa: BLE001 - a panic of the reader is no Exception; the parent says what it was
        sent = marshal.dumps({"error": str(error) or type(error).__name__})
    sys.stdout.buffer.write(sent)
    sys.stdout.buffer.flush()


if __name__ == "__main__":
    main()
