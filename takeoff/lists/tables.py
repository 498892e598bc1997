"""Where the lists stand on a sheet, and what each row is: member, heading, total, blank or other. Every row gets one kind.

A heading row is one that names at least two fields and mostly fields. The same headings again are a repeat; other
headings start another list below the first.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import Literal

from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lists.headings import Heading, read_heading
from takeoff.lists.sheets import Cell, Sheet, cell_name, column_number, letters
from takeoff.names import normal_name
from takeoff.quantities import EVERYDAY, number_readings, tidy, unit_of

RowKind = Literal["member", "heading", "total", "blank", "other"]

#: fields that make a row a member when at least two of them are filled (remarks and finishes alone do not)
_KEY_FIELDS = frozenset((
    "mark", "name", "section", "material", "quantity", "length", "width", "thickness", "height", "diameter", "unit_mass",
    "total_mass", "mass_per_length", "mass_per_area", "volume", "area", "weighed_mass",
))
_SIZES = _KEY_FIELDS - {"mark", "name", "section", "material", "quantity"}
#: a list needs at least one of these, or there is nothing to weigh by
_WEIGHABLE = frozenset((
    "section", "name", "length", "unit_mass", "total_mass", "mass_per_length", "mass_per_area", "volume", "weighed_mass",
))

_TOTAL = re.compile(
    r"^(?:grand |sub ?|page |overall )?(?:total|sum|subtotal)s?\b|^(?:zwischen|gesamt)?summe\b|^gesamt\b|^(?:sous[ -])?total\b"
    r"|^suma\b|^totale\b|^totaal\b|^razem\b|^summa\b|^carried forward\b|^brought forward\b"
)
_RULE = re.compile(r"[-=_*.–—\s]+")


@dataclass(slots=True)
class Column:
    """One column of a list: its number on the sheet (from 1), its heading and the field it was taken for, if any."""

    number: int
    text: str
    heading: Heading | None

    @property
    def letter(self) -> str:
        return letters(self.number)


@dataclass(slots=True)
class Table:
    """One list on a sheet: its heading rows, columns, and the rows of its members (sheet row numbers, from 1)."""

    sheet: Sheet
    heading_rows: list[int]
    columns: dict[str, Column]
    all_columns: list[Column]
    units_below: dict[int, str] = field(default_factory=dict)
    member_rows: list[int] = field(default_factory=list)
    total_rows: list[int] = field(default_factory=list)
    unit_note: str | None = None

    @property
    def range(self) -> str:
        first = min(c.number for c in self.all_columns)
        last = max(c.number for c in self.all_columns)
        end = max([*self.heading_rows, *self.member_rows, *self.total_rows])
        return f"{cell_name(self.heading_rows[0], first)}:{cell_name(end, last)}"


@dataclass(slots=True)
class SheetReading:
    """A sheet with the lists found on it and the kind of every row from its first with content to its last."""

    sheet: Sheet
    tables: list[Table]
    kinds: dict[int, RowKind]
    findings: list[Finding]


def is_blank(cell: Cell) -> bool:
    return cell is None or (isinstance(cell, str) and not cell.strip())


def read_sheet(sheet: Sheet, job: Job) -> SheetReading:
    """Find the lists of a sheet and give every row its kind."""
    findings: list[Finding] = list(sheet.findings)
    filled = [number for number, cells in enumerate(sheet.rows, 1) if not all(is_blank(c) for c in cells)]
    troubled_rows = {row for row, _ in sheet.errors} | {row for row, _ in sheet.unsaved}
    if not filled and not troubled_rows:
        return SheetReading(sheet, [], {}, findings)
    first, last = min([*filled, *troubled_rows]), max([*filled, *troubled_rows])
    kinds: dict[int, RowKind] = {}
    tables: list[Table] = []
    current: Table | None = None
    skip = _skipped_rows(sheet, job)
    unit_note: str | None = None
    for number in range(first, last + 1):
        cells = sheet.rows[number - 1] if number <= len(sheet.rows) else []
        if number in skip:
            kinds[number] = "other"
            findings.append(_at(sheet, Finding("note", "row-skipped", "skipped, since the job file says so"), number))
            continue
        if all(is_blank(c) for c in cells) and number not in troubled_rows:
            kinds[number] = "blank"
            continue
        columns = _heading_columns(cells, job)
        if columns is not None:
            kinds[number] = "heading"
            known = {c.heading.field for c in columns if c.heading}
            same = current is not None and [(c.number, normal_name(c.text)) for c in columns] == [
                (c.number, normal_name(c.text)) for c in current.all_columns
            ]
            if current is not None and same:
                current.heading_rows.append(number)
            elif known & _WEIGHABLE and (len(known) > 1):
                current = _new_table(sheet, number, columns, unit_note, findings)
                tables.append(current)
            else:
                kinds[number] = "other"
            continue
        if current is None:
            kinds[number] = "other"
            unit_note = _unit_note(cells) or unit_note
            continue
        if number - 1 in current.heading_rows and _is_unit_row(cells):
            kinds[number] = "heading"
            current.units_below = {
                column: unit for column, cell in enumerate(cells, 1) if isinstance(cell, str) and (unit := unit_of(cell))
            }
            current.heading_rows.append(number)
            continue
        kind = _kind_of(current, cells, number, sheet)
        kinds[number] = kind
        if kind == "member":
            current.member_rows.append(number)
        elif kind == "total":
            current.total_rows.append(number)
    if not tables:
        findings.append(
            Finding("note", "sheet-without-list", "no member list was found here", file=sheet.file, sheet=sheet.name,
                    right="a row of headings such as Mark, Quantity, Section, Material, Length (mm)")
        )
    hidden = sorted(n for n in sheet.hidden_rows if kinds.get(n) == "member")
    if sheet.hidden and tables:
        findings.append(Finding("note", "hidden-rows", "the sheet is hidden; it was read all the same", sheet.file, sheet.name))
    if hidden:
        cells_hidden = tuple(f"A{n}" for n in hidden)
        findings.append(
            Finding("note", "hidden-rows", f"{len(hidden)} hidden rows were read like the others", sheet.file, sheet.name,
                    cells_hidden[0], count=len(hidden), cells=cells_hidden)
        )
    return SheetReading(sheet, tables, kinds, findings)


def _at(sheet: Sheet, finding: Finding, row: int, column: int = 1) -> Finding:
    return finding.at(sheet.file, sheet.name, cell_name(row, column))


def _skipped_rows(sheet: Sheet, job: Job) -> set[int]:
    """Row numbers that `[reading] skip` names for this sheet, as ``Sheet!14`` or plain ``14``."""
    rows = set()
    for entry in job.reading.skip:
        name, _, number = entry.rpartition("!")
        if number.isdecimal() and (not name or name == (sheet.name or "")):
            rows.add(int(number))
    return rows


def _heading_columns(cells: list[Cell], job: Job) -> list[Column] | None:
    """The columns a row of headings names, or None where the row is no row of headings."""
    texts = [(number, cell) for number, cell in enumerate(cells, 1) if not is_blank(cell)]
    if len(texts) < 2 or not all(isinstance(cell, str) for _, cell in texts):
        return None
    columns = [Column(number, str(cell), _told(number, str(cell), job) or read_heading(str(cell))) for number, cell in texts]
    known = sum(1 for c in columns if c.heading)
    # A member row may hold a word or two that are also headings (a part called "Plate"); digits tell it apart.
    digits = sum(1 for c in columns if not c.heading and any(ch.isdigit() for ch in c.text))
    if known < 2 or known * 2 < len(columns) or digits > known / 2:
        return None
    return columns


def _told(number: int, text: str, job: Job) -> Heading | None:
    """The field that `[reading.columns]` gives a heading or a column letter."""
    for key, named in job.reading.columns.items():
        by_letter = re.fullmatch(r"[A-Z]{1,3}", key) is not None and column_number(key) == number
        if by_letter or normal_name(key) == normal_name(text):
            found = read_heading(text)
            unit = found.unit if found else None
            return Heading(text, named, unit, "told by the job file")
    return None


def _new_table(sheet: Sheet, number: int, columns: list[Column], unit_note: str | None, findings: list[Finding]) -> Table:
    by_field: dict[str, Column] = {}
    for column in columns:
        if column.heading is None:
            findings.append(
                _at(sheet, Finding("note", "heading-not-used", f"the column {column.text!r} is left alone", read=column.text),
                    number, column.number)
            )
            continue
        field_name = column.heading.field
        if field_name in by_field and field_name not in ("not_used", "remarks"):
            findings.append(
                _at(sheet, Finding("note", "heading-twice",
                                   f"two columns claim {field_name!r}: {by_field[field_name].text!r} is used, "
                                   f"{column.text!r} is left alone",
                                   read=column.text, right="one of them named in [reading.columns] of the job file"),
                    number, column.number)
            )
            continue
        by_field.setdefault(field_name, column)
    return Table(sheet, [number], by_field, columns, unit_note=unit_note)


def _is_unit_row(cells: list[Cell]) -> bool:
    texts = [cell for cell in cells if not is_blank(cell)]
    return len(texts) > 0 and all(isinstance(c, str) and unit_of(c) is not None for c in texts)


_UNITS_NOTE = re.compile(r"\b(?:units?|dimensions|sizes|maße|cotes)\b[^:=]*?(?:[:=]|\bin\b|\bare\b)\s*([A-Za-z]{1,12}|\")", re.IGNORECASE)


def _unit_note(cells: list[Cell]) -> str | None:
    """A title row that states the unit of lengths: ``Units: mm unless stated``, ``All dimensions in mm``."""
    for position, cell in enumerate(cells):
        if not isinstance(cell, str) or len(cell) > 200:
            continue
        found = _UNITS_NOTE.search(cell)
        unit = unit_of(found.group(1)) if found else None
        if unit is None and re.fullmatch(r"\s*units?\s*[:=]?\s*", cell, re.IGNORECASE):
            after = next((c for c in cells[position + 1:] if isinstance(c, str) and c.strip()), None)
            unit = unit_of(after.split()[0]) if after else None
        if unit and EVERYDAY[unit][0] == "length":
            return unit
    return None


def _kind_of(table: Table, cells: list[Cell], number: int, sheet: Sheet) -> RowKind:
    def at(name: str) -> Cell:
        column = table.columns.get(name)
        if column is None:
            return None
        if (number, column.number) in sheet.errors or (number, column.number) in sheet.unsaved:
            return "error"
        return cells[column.number - 1] if column.number <= len(cells) else None

    filled = {name for name in table.columns if name in _KEY_FIELDS and not is_blank(at(name))}
    labels = [tidy(c).casefold() for c in cells if isinstance(c, str) and c.strip()]
    if any(_TOTAL.match(label) for label in labels) and not ({"section", "quantity"} <= filled and filled & _SIZES):
        return "total"
    if all(_RULE.fullmatch(label) for label in labels) and labels and not filled & _SIZES:
        return "other"
    named = filled & {"mark", "name", "section", "material"}
    if not named:
        numbers = [c for c in cells if not is_blank(c)]
        if filled and all(not isinstance(c, str) or number_readings(c) for c in numbers):
            return "total"
        return "member" if len(filled) > 1 else "other"
    if len(filled) > 1:
        return "member"
    # One filled cell: a group title, a note, or a numbered empty row. A section standing alone is a piece with nothing
    # beside it, and is kept in view.
    if filled == {"section"} and any(ch.isdigit() for ch in str(at("section"))) and number not in table.heading_rows:
        first_text = next((n for n, c in enumerate(cells, 1) if not is_blank(c)), 0)
        return "member" if first_text == table.columns["section"].number and first_text > 1 else "other"
    return "other"
