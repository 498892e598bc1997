"""The same list in two places (an older copy on another sheet, the workbook beside its CSV) would count twice: it is read once."""

from __future__ import annotations

from collections import Counter

from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lists.columns import as_text
from takeoff.lists.tables import SheetReading, Table, is_blank

#: two lists are one when this share of the shorter one's rows stands in the other, and it has at least so many rows
SAME_SHARE, FEWEST_ROWS = 0.8, 3
_WHAT = ("mark", "name", "section", "size", "length")

Signature = tuple[str, ...]


def leave_out_doubles(readings: list[SheetReading], job: Job) -> None:
    """Take out each list that repeats an earlier one on another sheet or in another file; its rows become other rows.

    Where the job file names the sheets or tables to read, the user has chosen, and nothing is taken out.
    """
    if job.reading.sheets or job.reading.tables or sum(len(reading.tables) for reading in readings) < 2:
        return
    seen: list[tuple[Table, Counter[Signature]]] = []
    for reading in readings:
        for table in list(reading.tables):
            rows = Counter(_signature(table, n) for n in table.member_rows)
            first = next((other for other, known in seen if other.sheet is not table.sheet and _same(rows, known)), None)
            if first is None:
                seen.append((table, rows))
                continue
            finding = Finding(
                "refused", "list-twice", f"this list repeats the one {_place(first)}: it is not read again", table.sheet.file,
                table.sheet.name, f"A{table.heading_rows[0]}", right="[reading] sheets or tables in the job file, if both are meant",
            )
            reading.tables.remove(table)
            reading.findings.append(finding)
            reading.refusals.append(finding)
            for n in (*table.member_rows, *table.total_rows):
                reading.kinds[n] = "other"


def repeated_rows(tables: list[Table]) -> list[tuple[int, Table]]:
    """Members (numbered over all tables) whose name, section, length and quantity stand in an earlier table too."""
    seen: dict[Signature, Table] = {}
    found: list[tuple[int, Table]] = []
    if len(tables) < 2:
        return found
    number = 0
    for table in tables:
        mine: dict[Signature, Table] = {}
        for n in table.member_rows:
            key = (*_signature(table, n), _text(table, n, "quantity"))
            if any(key[1:4]) and key in seen:
                found.append((number, seen[key]))
            mine.setdefault(key, table)
            number += 1
        seen = {**mine, **seen}
    return found


def _signature(table: Table, row: int) -> Signature:
    return tuple(_text(table, row, name) for name in _WHAT)


def _text(table: Table, row: int, field: str) -> str:
    cell = table.cell(row, field)
    return "" if is_blank(cell) else as_text(cell).casefold()


def _same(rows: Counter[Signature], known: Counter[Signature]) -> bool:
    fewer = min(rows.total(), known.total())
    return fewer >= FEWEST_ROWS and (rows & known).total() >= SAME_SHARE * fewer


def _place(table: Table) -> str:
    return f"on sheet {table.sheet.name}" if table.sheet.name else f"in {table.sheet.file}"
