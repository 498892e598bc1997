"""Findings about members, kept by the group: one finding, the members it is about, the column it stands in."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from takeoff.findings import Finding

if TYPE_CHECKING:
    from takeoff.lists.tables import Table


@dataclass(slots=True)
class Entry:
    finding: Finding
    members: Sequence[int]
    field: str | None


@dataclass(slots=True)
class FindingLog:
    """Findings by group. `tables`, `table_of` and `row_of` tell where a member stands.

    tables : the lists that were read; table_of, row_of : for each member its table's index and its sheet row.
    """

    tables: list[Table]
    table_of: Sequence[int]
    row_of: Sequence[int]
    entries: list[Entry] = field(default_factory=list)

    def add(self, finding: Finding, members: Iterable[int], field_name: str | None = None) -> None:
        """Say `finding` of these members, at the column of `field_name` (else at the row's first column)."""
        listed = [int(m) for m in members]
        if listed:
            self.entries.append(Entry(finding, listed, field_name))

    def cell(self, member: int, field_name: str | None) -> str:
        """The cell of a field in a member's row, such as ``D14``; the first column where the list has no such field."""
        table = self.tables[self.table_of[member]]
        column = table.columns.get(field_name or "")
        if column is None:
            column = min(table.all_columns, key=lambda c: c.number)
        return f"{column.letter}{self.row_of[member]}"

    def by_member(self) -> dict[int, tuple[Finding, ...]]:
        """Each member's findings with their cells, in the order they were made."""
        found: dict[int, list[Finding]] = defaultdict(list)
        for entry in self.entries:
            for member in entry.members:
                sheet = self.tables[self.table_of[member]].sheet
                found[member].append(entry.finding.at(sheet.file, sheet.name, self.cell(member, entry.field)))
        return {member: tuple(found[member]) for member in sorted(found)}

    def gathered(self) -> list[Finding]:
        """The same finding on many rows once, with its count and cells; refused first, then assumed, then notes."""
        groups: dict[tuple[str | None, ...], tuple[Finding, list[str]]] = {}
        for entry in self.entries:
            for member in entry.members:
                sheet = self.tables[self.table_of[member]].sheet
                f = entry.finding
                key = (f.level, f.kind, f.message, f.read, f.right, sheet.file, sheet.name)
                cells = groups.setdefault(key, (replace(f, file=sheet.file, sheet=sheet.name), []))[1]
                cells.append(self.cell(member, entry.field))
        order = {"refused": 0, "assumed": 1, "note": 2}
        return [
            replace(f, cell=cells[0], cells=tuple(cells), count=len(cells))
            for f, cells in sorted(groups.values(), key=lambda pair: order[pair[0].level])
        ]
