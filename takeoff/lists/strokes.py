"""What is struck out in a sheet: whole rows are counted and said, single cells that a piece needs are refused. Rank 3.

People strike out a row that was deleted, but also one that is cut already; nobody but they can tell. Left out wrongly it would make
a lift too light, so it counts, and stands among what was assumed: the row deleted, or named in `[reading] skip`, settles it.
A single size struck out was replaced by something, maybe something larger: it is refused.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from takeoff.lists.tables import Table, is_blank

#: what a piece is called, beside what it is weighed by
_CALLED = frozenset(("mark", "name"))


@dataclass(slots=True)
class Strokes:
    """Members (numbered from 0 in their table). rows : struck out as a whole. cells, parts : field -> members of which that cell,
    or a part of its text, is struck out in a row that is not. `needed` : the fields by which pieces are weighed.
    """

    rows: list[int] = field(default_factory=list)
    cells: dict[str, list[int]] = field(default_factory=dict)
    parts: dict[str, list[int]] = field(default_factory=dict)
    needed: frozenset[str] = frozenset()


def of(table: Table) -> Strokes:
    """What is struck out among a table's members."""
    sheet = table.sheet
    found = Strokes()
    if not (sheet.struck or sheet.partly_struck):
        return found
    found.needed = frozenset(name for name, _ in table.key_places())
    found.needed -= _CALLED if {"section", "size"} & set(table.columns) else {"mark"}
    for i, row in enumerate(table.member_rows):
        filled = {name: (row, column.number) for name, column in table.columns.items() if not is_blank(table.cell(row, name))}
        struck = {name for name, place in filled.items() if place in sheet.struck}
        needed = found.needed & set(filled)
        if struck and (needed <= struck or (struck & _CALLED and not struck & needed)):
            found.rows.append(i)
            continue
        for name in sorted(struck):
            found.cells.setdefault(name, []).append(i)
        for name in sorted(name for name, place in filled.items() if place in sheet.partly_struck):
            found.parts.setdefault(name, []).append(i)
    return found
