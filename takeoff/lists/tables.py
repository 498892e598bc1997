"""Where the lists stand on a sheet, and what each row is: member, heading, total, blank or other. Every row gets one kind.

A heading row is one that names at least two fields and mostly fields. The same headings again are a repeat; other
headings start another list below the first.
"""

from __future__ import annotations

import itertools
import re
from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import Literal

from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lists import rowwords, settling
from takeoff.lists.captions import Caption, read_caption, warns
from takeoff.lists.cellformats import Shown
from takeoff.lists.headings import FIELDS, TOLD, Heading, read_heading
from takeoff.lists.openxml import column_number, letters
from takeoff.lists.sheets import Cell, Sheet, cell_name
from takeoff.names import NormalName, normal_name, suggest
from takeoff.quantities import EVERYDAY, number_readings, unit_of

RowKind = Literal["member", "heading", "total", "blank", "other"]

#: fields that make a row a member when at least two of them are filled (remarks and finishes alone do not)
_KEY_FIELDS = frozenset(
    (
        "mark",
        "name",
        "section",
        "material",
        "quantity",
        "quantity_per",
        "quantity_total",
        "quantity_and_length",
        "size",
        "length",
        "inches",
        "total_length",
        "width",
        "thickness",
        "height",
        "diameter",
        "unit_mass",
        "total_mass",
        "mass",
        "mass_per_length",
        "mass_per_area",
        "volume",
        "area",
        "weighed_mass",
    )
)
_COUNTS = frozenset(("quantity", "quantity_per", "quantity_total", "quantity_and_length"))
_NAMES = frozenset(("mark", "name", "section", "material"))
_SIZES = _KEY_FIELDS - _NAMES - _COUNTS
#: first the one that nearly every row fills
_WHAT_IT_IS = ("section", "material", *sorted(_SIZES))
#: headings of the levels of assemblies, accents off
_LEVELS = frozenset(("level", "lvl", "bom level", "niveau", "ebene", "livello", "nivel", "poziom", "niva", "stufe"))
#: fields of masses, and what kg/m or kg/m² below such a heading makes of them
_MASSES = ("mass", "unit_mass", "total_mass")
_BY_DIMENSION = {"mass per length": "mass_per_length", "mass per area": "mass_per_area"}
#: a list needs at least one of these, or there is nothing to weigh by
_WEIGHABLE = frozenset(
    (
        "section",
        "name",
        "size",
        "length",
        "quantity_and_length",
        "unit_mass",
        "total_mass",
        "mass",
        "mass_per_length",
        "mass_per_area",
        "volume",
        "weighed_mass",
    )
)
#: what stands in a row of units over columns that have none
_NO_UNIT = re.compile(
    r"[-–—/#.]|[(\[]?\s*(?:pcs?|pce|ea|each|nos?|off|qty|stk|stck?|st|stück|anz|nb|pz|ud|uds|"
    r"szt|un|text|ges|gesamt|tot|total)\.?\s*[)\]]?", re.IGNORECASE)
#: so many known headings are a row of headings, however many others stand beside them
_PLENTY = 4
_GROSS = re.compile(r"\b(?:gross|brutto\w*|brut|bruto|lordo|total)\b")
_NET = re.compile(r"\b(?:net|nett|netto\w*|neto|liquido)\b")
_CUT = re.compile(r"\b(?:cut|zuschnitt|debit|coupe|corte|taglio|zaag|ciecia|kap)")


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
    """One list on a sheet: its heading rows, columns, and the rows of its members (sheet row numbers, from 1).

    rivals : field -> further columns that claim it; their rows are refused where both are filled and differ.
    caption : what the title rows above say of the whole list. `group_of` : member row -> the group title above it.
    row_findings : member row -> what its words say of it (optional, contained in another row ...).
    in_feet : whether the list is in feet and inches, once that was asked (see `columns`).
    """

    sheet: Sheet
    heading_rows: list[int]
    columns: dict[str, Column]
    all_columns: list[Column]
    rivals: dict[str, list[Column]] = field(default_factory=dict)
    units_below: dict[int, str] = field(default_factory=dict)
    member_rows: list[int] = field(default_factory=list)
    total_rows: list[int] = field(default_factory=list)
    caption: Caption = field(default_factory=Caption)
    group_of: dict[int, str] = field(default_factory=dict)
    row_findings: dict[int, list[Finding]] = field(default_factory=dict)
    in_feet: bool | None = None
    _key_places: list[tuple[str, int]] = field(default_factory=list, repr=False)

    def key_places(self) -> list[tuple[str, int]]:
        """The columns that can make a row a member, with their places in a row (from 0)."""
        if not self._key_places:
            self._key_places = [(name, column.number - 1) for name, column in self.columns.items() if name in _KEY_FIELDS]
        return self._key_places

    @property
    def unit_note(self) -> str | None:
        return self.caption.unit

    @property
    def range(self) -> str:
        first = min(c.number for c in self.all_columns)
        last = max(c.number for c in self.all_columns)
        end = max([*self.heading_rows, *self.member_rows, *self.total_rows])
        return f"{cell_name(self.heading_rows[0], first)}:{cell_name(end, last)}"

    def cell(self, row: int, field_name: str) -> Cell:
        """The cell of a field in a sheet row; None where the list has no such column."""
        column = self.columns.get(field_name)
        if column is None or row > len(self.sheet.rows):
            return None
        cells = self.sheet.rows[row - 1]
        return cells[column.number - 1] if column.number <= len(cells) else None


@dataclass(slots=True)
class SheetReading:
    """A sheet with the lists found on it and the kind of every row from its first with content to its last.

    refusals : why a list that stands here was not read.
    """

    sheet: Sheet
    tables: list[Table]
    kinds: dict[int, RowKind]
    findings: list[Finding]
    refusals: list[Finding] = field(default_factory=list)


def is_blank(cell: Cell) -> bool:
    return cell is None or cell == "" or (type(cell) is str and cell.isspace())


def _is_blank_row(cells: list[Cell]) -> bool:
    return all(map(is_blank, cells))


def read_sheet(sheet: Sheet, job: Job) -> SheetReading:
    """Find the lists of a sheet and give every row its kind. Raises JobError on a range of `[reading] tables` that is none."""
    return _Walk(sheet, job).reading()


class _Walk:
    """One walk down a sheet. `mode` says what the rows now stand under: nothing, a list, an example, a table of sums."""

    def __init__(self, sheet: Sheet, job: Job) -> None:
        self.sheet, self.job = sheet, job
        self.findings: list[Finding] = list(sheet.findings)
        self.refusals: list[Finding] = []
        self.kinds: dict[int, RowKind] = {}
        self.tables: list[Table] = []
        self.current: Table | None = None
        self.mode: Literal["titles", "list", "example", "sums", "refused"] = "titles"
        self.caption = Caption()
        self.group: str | None = None
        self.pending: tuple[int, str] | None = None
        self.multiplier: int | None = None
        self.ranges = _ranges(sheet, job)
        self.skip = _skipped_rows(sheet, job)

    def reading(self) -> SheetReading:
        troubled = {row for row, _ in self.sheet.errors} | {row for row, _ in self.sheet.unsaved}
        filled = [n for n, cells in enumerate(self.sheet.rows, 1) if not _is_blank_row(cells)]
        if filled or troubled:
            joined = 0
            for number in range(min([*filled, *troubled]), max([*filled, *troubled]) + 1):
                if number <= joined:
                    self.kinds[number] = "heading"
                    continue
                joined = self._row(number, number in troubled)
            self._say_what_was_found()
        return SheetReading(self.sheet, self.tables, self.kinds, self.findings, self.refusals)

    def cells(self, number: int) -> list[Cell]:
        """A row's cells, those outside the ranges the job file chose left out."""
        cells = self.sheet.rows[number - 1] if number <= len(self.sheet.rows) else []
        if self.ranges is None:
            return cells
        chosen = next(((left, right) for top, left, bottom, right in self.ranges if top <= number <= bottom), None)
        if chosen is None:
            return []
        left, right = chosen
        return [cell if left <= column <= right else None for column, cell in enumerate(cells, 1)]

    def _row(self, number: int, troubled: bool) -> int:
        """Give one row its kind; returns the last row that belongs to it (two-line headings), else 0."""
        cells = self.cells(number)
        if number in self.skip:
            self._is(number, "other")
            self._note(number, "row-skipped", "skipped, since the job file says so")
            return 0
        if not troubled and _is_blank_row(cells):
            outside = (
                self.ranges is not None and number <= len(self.sheet.rows) and not all(is_blank(c) for c in self.sheet.rows[number - 1])
            )
            self._is(number, "other" if outside else "blank")
            if self.mode == "sums":
                self.mode = "titles"
            return 0
        if number in self.sheet.broken:
            self._is(number, "member" if self.current is not None and self.mode == "list" else "other")
            return 0
        if self._is_units_of_list(number, cells):
            self._row_of_list(self.current, number, cells)  # type: ignore[arg-type]
            return 0
        columns, last = self._headings(number, cells)
        if columns is not None:
            self._heading(number, last, columns)
            return last
        if self.mode == "list" and self.current is not None:
            self._row_of_list(self.current, number, cells)
        elif self.mode == "sums":
            sums = any(isinstance(c, (int, float, Shown)) or number_readings(str(c or "")) for c in cells)
            self._is(number, "total" if sums else "other")
        else:
            self._is(number, "other")
            if self.mode != "example":
                self._title(number, cells)
        return 0

    def _is_units_of_list(self, number: int, cells: list[Cell]) -> bool:
        """Whether a row right below headings holds their units; some of those (kg, kg/m) could be headings themselves."""
        return self.mode == "list" and self.current is not None and number - 1 in self.current.heading_rows and _is_unit_row(cells)

    def _is(self, number: int, kind: RowKind) -> None:
        self.kinds[number] = kind
        if kind == "member" and self.current is not None:
            self.current.member_rows.append(number)
            if self.group is not None:
                self.current.group_of[number] = self.group
        elif kind == "total" and self.current is not None and self.mode == "list":
            self.current.total_rows.append(number)
            self.group, self.multiplier = None, None

    def _note(self, number: int, kind: str, message: str, read: str | None = None) -> None:
        self.findings.append(self._at(Finding("note", kind, message, read=read), number))

    def _at(self, finding: Finding, row: int, column: int = 1) -> Finding:
        return finding.at(self.sheet.file, self.sheet.name, cell_name(row, column))

    # --- headings ----------------------------------------------------------------------------------------------------

    def _headings(self, number: int, cells: list[Cell]) -> tuple[list[Column] | None, int]:
        """The columns that a row, or it and the next, name as headings; and the last row of those headings."""
        if not _may_be_headings(cells):
            return None, number
        columns = _heading_columns(cells, self.job)
        below = self.cells(number + 1) if number < len(self.sheet.rows) else []
        texts = [c for c in (*cells, *below) if not is_blank(c)]
        if (
            not texts
            or not below
            or not all(isinstance(c, str) and not any(ch.isdigit() for ch in c) for c in texts)
            or _is_unit_row(below)
        ):
            return columns, number
        joined = _heading_columns([self._in_two_lines(*pair) for pair in _zip(cells, below)], self.job)
        known = sum(1 for c in columns or [] if c.heading)
        alone = sum(1 for c in _heading_columns(below, self.job) or [] if c.heading)
        if joined is not None and sum(1 for c in joined if c.heading) > max(known, alone):
            return joined, number + 1
        return columns, number

    def _in_two_lines(self, above: Cell, below: Cell) -> str | None:
        """A heading in two lines: both together where that is known, else the lower where it is, which a wider one may stand above."""
        texts = [str(c).strip() for c in (above, below) if not is_blank(c)]
        both = " ".join(texts)
        if len(texts) < 2 or _told(0, both, self.job) or read_heading(both):
            return both or None
        return next((text for text in texts[::-1] if read_heading(text)), both)

    def _heading(self, number: int, last: int, columns: list[Column]) -> None:
        self.kinds[number] = "heading"
        if self.mode == "example":
            self.kinds[number] = "other"
            return
        fields = [c.heading.field for c in columns if c.heading]
        known = set(fields)
        same = self.current is not None and [(c.number, normal_name(c.text)) for c in columns] == [
            (c.number, normal_name(c.text)) for c in self.current.all_columns
        ]
        if same and self.current is not None:
            self.current.heading_rows += range(number, last + 1)
            self.mode = "list"
            return
        self.group, self.pending, self.multiplier = None, None, None
        twice = {name for name in known - {"not_used", "remarks"} if fields.count(name) > 1}
        if len(twice) > 1 and twice & _COUNTS:
            self.kinds[number] = "other"
            self.current, self.mode = None, "refused"
            self.refusals.append(
                self._at(
                    Finding(
                        "refused",
                        "side-by-side",
                        "lists stand side by side, and adding them all may count a thing twice",
                        right='the one to read, such as [reading] tables = ["Sheet!A3:F40"] in the job file',
                    ),
                    number,
                    columns[0].number,
                )
            )
            self.findings.append(self.refusals[-1])
            return
        weighable = len(known) > 1 and (known & _WEIGHABLE or {"area", "thickness"} <= known)
        if not weighable:
            self.kinds[number] = "other"
            self.mode = "sums" if self.current is not None else "titles"
            self.current = None
            return
        self.current = self._new_table(list(range(number, last + 1)), columns)
        self.tables.append(self.current)
        self.mode, self.caption = "list", Caption(unit=self.caption.unit)

    def _new_table(self, heading_rows: list[int], columns: list[Column]) -> Table:
        table = Table(self.sheet, heading_rows, {}, columns, caption=self.caption)
        fields = {c.heading.field for c in columns if c.heading}
        for column in columns:
            if (
                column.heading is not None
                and "quantity_per" in fields
                and re.fullmatch(r"total( qty| quantity)?", normal_name(column.text))
            ) or (column.heading is None and "quantity_per" in fields and normal_name(column.text) == "total"):
                column.heading = Heading(column.text, "quantity_total", None, "the total beside a quantity per piece")
        settling.settle(columns, {column.number: self._below(column, heading_rows[-1]) for column in columns if column.heading})
        for column in columns:
            if column.heading is None:
                message = f"the column {column.text!r} is left alone"
                self.findings.append(
                    self._at(Finding("note", "heading-not-used", message, read=column.text), heading_rows[0], column.number)
                )
                continue
            name = column.heading.field
            first = table.columns.setdefault(name, column)
            if first is column or name in ("not_used", "remarks"):
                continue
            if name == "length" and _CUT.search(normal_name(column.text)) and not _CUT.search(normal_name(first.text)):
                first, column = column, first  # noqa: PLW2901 - the cut length is the piece's length, wherever it stands
                table.columns[name] = first
                self._note(heading_rows[0], "heading-twice", f"the cut length {first.text!r} is used, {column.text!r} is left alone")
            elif name == "mass" and _GROSS.search(normal_name(column.text)) and _NET.search(normal_name(first.text)):
                first, column = column, first  # noqa: PLW2901 - what hangs on the hook is the gross mass, wherever it stands
                table.columns[name] = first
                self._note(heading_rows[0], "heading-twice", f"the gross mass {first.text!r} is used, {column.text!r} is left alone")
            elif name == "mass" and _GROSS.search(normal_name(first.text)) and _NET.search(normal_name(column.text)):
                self._note(heading_rows[0], "heading-twice", f"the gross mass {first.text!r} is used, {column.text!r} is left alone")
            elif name == "length" and _CUT.search(normal_name(first.text)):
                self._note(heading_rows[0], "heading-twice", f"the cut length {first.text!r} is used, {column.text!r} is left alone")
            else:
                table.rivals.setdefault(name, []).append(column)
                self.findings.append(
                    self._at(
                        Finding(
                            "note",
                            "heading-twice",
                            f"two columns claim {name.replace('_', ' ')!r}: {first.text!r} and {column.text!r}; rows "
                            "that fill both differently are not weighed",
                            read=column.text,
                            right="one of them named in [reading.columns] of the job file",
                        ),
                        heading_rows[0],
                        column.number,
                    )
                )
        return table

    def _below(self, column: Column, heading_row: int) -> list[Cell]:
        """The filled cells of a column in the first rows below its heading."""
        below = [self.cells(n) for n in range(heading_row + 1, min(heading_row + 41, len(self.sheet.rows) + 1))]
        return [row[column.number - 1] for row in below if column.number <= len(row) and not is_blank(row[column.number - 1])]

    # --- rows --------------------------------------------------------------------------------------------------------

    def _title(self, number: int, cells: list[Cell]) -> None:
        read_caption(self.caption, cells)
        warning = warns(cells)
        if warning:
            self._note(number, "list-warning", f"the list warns: {warning}", warning)

    def _row_of_list(self, table: Table, number: int, cells: list[Cell]) -> None:
        if number - 1 in table.heading_rows and _is_unit_row(cells):
            self.kinds[number] = "heading"
            table.units_below = {column: unit for column, cell in enumerate(cells, 1) if isinstance(cell, str) and (unit := unit_of(cell))}
            _masses_by_their_units(table)
            table.heading_rows.append(number)
            return
        heard = [rowwords.heard(c) for c in cells if type(c) is str or type(c) is Shown]
        # Where no pattern of words fits any text, as in nearly every row, there is nothing to look at.
        labels = [label for label, _ in heard if label is not None] if any(tells for _, tells in heard) else []
        kind = _kind_of(table, cells, number, self.sheet, labels)
        if kind == "other" and len(labels) == 1 and rowwords.EXAMPLE.match(labels[0]) and table.member_rows:
            self._is(number, "other")
            self.current, self.mode = None, "example"
            self._note(number, "example-block", "an example stands below the list: it is not read")
            return
        if labels and rowwords.EXAMPLE_ROW.match(labels[0]):
            self._is(number, "other")
            self._note(number, "example-block", "the row says that it is an example, not counted: it is not read", labels[0])
            return
        if (
            kind == "member"
            and any(rowwords.MONEY.match(label) for label in labels)
            and not _has(table, number, _WHAT_IT_IS)
        ):
            self._is(number, "other")
            self._note(number, "row-of-money", "a row of money or work weighs nothing", labels[0])
            return
        self._is(number, kind)
        if kind == "other":
            warning = warns(cells)
            if warning:
                self._note(number, "list-warning", f"the list warns: {warning}", warning)
            texts = [c.strip() for c in cells if isinstance(c, str) and c.strip()]
            self.pending = (number, texts[0]) if len(texts) == 1 and len([c for c in cells if not is_blank(c)]) == 1 else None
            if self.pending:
                read_caption(self.caption, cells)
        elif kind == "member":
            self._member(table, number, labels)

    def _member(self, table: Table, number: int, labels: list[str]) -> None:
        """Group titles, and what a member row's words say of it."""
        if self.pending is not None and len(self.pending[1]) <= 60 and not self.pending[1].endswith("."):
            between = range(self.pending[0] + 1, number)
            if all(self.kinds.get(n) == "blank" for n in between) and not any(ch.isdigit() for ch in self.pending[1][:1]):
                self.group = self.pending[1]
                table.group_of[number] = self.group
        self.pending = None
        if not labels and self.multiplier is None:
            return
        said = table.row_findings.setdefault(number, [])
        if any(rowwords.ELSEWHERE.search(label) for label in labels):
            said.append(
                Finding("refused", "row-elsewhere", "the row says it is contained in another one", right="the row left out or made plain")
            )
        if any(rowwords.ALTERNATIVE.match(label) for label in labels):
            said.append(
                Finding(
                    "refused",
                    "alternative-row",
                    "the row is an alternative to another: only one of them is built",
                    right="the one that is built",
                )
            )
        if any(rowwords.OPTIONAL.search(label) for label in labels):
            said.append(Finding("note", "optional-row", "the row says it is optional; it is in the totals"))
        is_assembly = any(rowwords.ASSEMBLY_ROW.search(label) for label in labels[:2])
        bare = not _has(table, number, _WHAT_IT_IS)
        if is_assembly and _has(table, number, {"unit_mass", "total_mass", "mass"}) and not _has(table, number, {"section", "length"}):
            said.append(
                Finding("note", "may-count-twice", "an assembly with a mass of its own: its parts, if they are listed too, count twice")
            )
        if is_assembly and bare and "assembly" not in table.columns:
            pieces = table.cell(number, "quantity")
            self.multiplier = number if number_readings(str(pieces)) not in ([], number_readings("1")) else None
        elif self.multiplier is not None:
            said.append(
                Finding(
                    "refused",
                    "multiplier-above",
                    f"row {self.multiplier} above counts an assembly: are these pieces in all, or for each of them?",
                    right="quantities in all, and an Assembly column",
                )
            )
        if not said:
            del table.row_findings[number]

    def _set_assemblies_apart(self, table: Table) -> None:
        """An assembly's own row beside those of its parts names no piece: no section, no size, no mass, once."""
        if not {"mark", "assembly"} <= set(table.columns):
            return
        # Most rows say what they are: only the others are compared with the names of the assemblies.
        bare = [n for n in table.member_rows if not _has(table, n, _WHAT_IT_IS) and not is_blank(table.cell(n, "mark"))]
        if not bare:
            return
        typed = {str(cell) for cell in (table.cell(n, "assembly") for n in table.member_rows) if not is_blank(cell)}
        named = {normal_name(name) for name in typed}
        apart = set()
        for n in bare:
            mark = str(table.cell(n, "mark"))
            counts = [str(table.cell(n, name)).strip() for name in _COUNTS if not is_blank(table.cell(n, name))]
            if normal_name(mark) in named and all(count in ("1", "1.0", "-") for count in counts):
                apart.add(n)
                table.row_findings.pop(n, None)
                table.group_of.pop(n, None)
                self.kinds[n] = "other"
                self._note(n, "assembly-row", "the row is the assembly of others, and no piece", mark)
        table.member_rows[:] = [n for n in table.member_rows if n not in apart]

    def _set_levels_apart(self, table: Table) -> None:
        """Where a column numbers the levels of assemblies, a row above deeper ones is their assembly: without a mass it is no
        piece, with one it may count twice, which is said."""
        column = next((c for c in table.all_columns if normal_name(c.text) in _LEVELS), None)
        if column is None:
            return
        depths = {n: _depth(cells[column.number - 1] if column.number <= len(cells := self.cells(n)) else None) for n in table.member_rows}
        for n, following in itertools.pairwise(list(table.member_rows)):
            depth, deeper = depths[n], depths[following]
            if depth is None or deeper is None or deeper <= depth or _has(table, n, {"section", "length", "size"}):
                continue
            if _has(table, n, {"unit_mass", "total_mass", "mass"}):
                said = table.row_findings.setdefault(n, [])
                if not any(finding.kind == "may-count-twice" for finding in said):
                    message = "an assembly with a mass of its own: its parts, if they are listed too, count twice"
                    said.append(Finding("note", "may-count-twice", message))
            elif not _has(table, n, {"material", *_SIZES}):
                table.member_rows.remove(n)
                table.row_findings.pop(n, None)
                table.group_of.pop(n, None)
                self.kinds[n] = "other"
                self._note(n, "assembly-row", "the row is the assembly of those on the level below it, and no piece")
            else:
                continue
            if any(str(table.cell(n, name)).strip() not in ("1", "1.0", "-") for name in _COUNTS if not is_blank(table.cell(n, name))):
                after = [row for row in depths if row > n]
                end = next((row for row in after if (depths[row] or depth + 1) <= depth), None)
                self._multiply(table, n, [row for row in after if end is None or row < end])

    def _multiply(self, table: Table, above: int, rows: Iterable[int]) -> None:
        """Refuse the pieces below an assembly that is counted more than once, unless that is said already."""
        message = f"row {above} above counts an assembly: are these pieces in all, or for each of them?"
        for n in rows:
            said = table.row_findings.setdefault(n, [])
            if not any(finding.kind == "multiplier-above" for finding in said):
                said.append(Finding("refused", "multiplier-above", message, right="quantities in all, and an Assembly column"))

    def _say_what_was_found(self) -> None:
        sheet = self.sheet
        for table in self.tables:
            self._set_assemblies_apart(table)
            self._set_levels_apart(table)
        if not self.tables and not self.refusals:
            self.findings.append(
                Finding(
                    "note",
                    "sheet-without-list",
                    "no member list was found here",
                    file=sheet.file,
                    sheet=sheet.name,
                    right="a row of headings such as Mark, Quantity, Section, Material, Length (mm)",
                )
            )
        if sheet.blind and self.tables:
            message = (f"in an {sheet.blind} file errors, number formats (such as 0.0 \"m\"), struck-out cells, hidden rows and comments "
                       "cannot be seen: numbers were read as the file holds them")
            self.findings.append(Finding("note", "not-looked-at", message, sheet.file, sheet.name, right="the list saved as .xlsx or .ods"))
        if sheet.hidden and self.tables:
            self.findings.append(Finding("note", "hidden-rows", "the sheet is hidden; it was read all the same", sheet.file, sheet.name))
        for table in self.tables:
            fields = {column.number: column for column in table.columns.values() if column.heading and column.heading.field != "not_used"}
            for number in sorted(n for n in fields if any(first <= n <= last for first, last in sheet.hidden_columns)):
                message = f"the hidden column {fields[number].text!r} was read like the others"
                self.findings.append(self._at(Finding("note", "hidden-rows", message), table.heading_rows[0], number))
        hidden = tuple(f"A{n}" for n in sorted(sheet.hidden_rows) if self.kinds.get(n) == "member")
        if hidden:
            self.findings.append(
                Finding(
                    "note",
                    "hidden-rows",
                    f"{len(hidden)} hidden rows were read like the others",
                    sheet.file,
                    sheet.name,
                    hidden[0],
                    count=len(hidden),
                    cells=hidden,
                )
            )


def _zip(above: list[Cell], below: list[Cell]) -> list[tuple[Cell, Cell]]:
    width = max(len(above), len(below))
    one, two = ([*cells, *[None] * (width - len(cells))] for cells in (above, below))
    return list(zip(one, two, strict=True))


def _depth(cell: Cell) -> int | None:
    """How deep a level is: 2, ``.2``, ``1.1`` and ``..1`` tell it; None where it is no level."""
    text = "" if cell is None else str(cell).strip().removesuffix(".0")
    dots = len(text) - len(text.lstrip("."))
    rest = text.lstrip(". ")
    if re.fullmatch(r"\d{1,3}(?:\.\d{1,3}){1,8}", rest):
        return dots + rest.count(".") + 1
    if not re.fullmatch(r"\d{1,3}", rest):
        return None
    return dots + 1 if dots else int(rest)


def _has(table: Table, number: int, fields: Iterable[str]) -> bool:
    """Whether a row fills any of these fields with more than a dash."""
    return any(
        not is_blank(cell) and str(cell).strip() not in ("-", "–", "—")
        for name in fields
        if name in table.columns
        for cell in (table.cell(number, name),)
    )


def _ranges(sheet: Sheet, job: Job) -> list[tuple[int, int, int, int]] | None:
    """The ranges of `[reading] tables` on this sheet as (top, left, bottom, right); None where none is named for it."""
    found = []
    for entry in job.reading.tables:
        name, _, area = entry.rpartition("!")
        parts = re.fullmatch(r"\$?([A-Za-z]{1,3})\$?(\d{1,7}):\$?([A-Za-z]{1,3})\$?(\d{1,7})", area)
        if not parts:
            raise JobError("reading.tables: this is no range of cells", file=job.path, read=entry, right="Sheet!A3:F40")
        left, top, right, bottom = parts.groups()
        if int(top) > int(bottom) or column_number(left) > column_number(right):
            rows, columns = sorted((int(top), int(bottom))), sorted((left, right), key=column_number)
            area = f"{columns[0]}{rows[0]}:{columns[1]}{rows[1]}"
            message = "reading.tables: the range ends before it begins: its upper left cell stands first"
            raise JobError(message, file=job.path, read=entry, right=f"{name}!{area}" if name else area)
        if not name or name == (sheet.name or ""):
            found.append((int(top), column_number(left), int(bottom), column_number(right)))
    for number, (top, _, bottom, _) in enumerate(found):
        if any(top <= other[2] and other[0] <= bottom for other in found[:number]):
            raise JobError("reading.tables: two ranges share rows of one sheet", file=job.path, right="one range for each row of a sheet")
    return found or None


#: digits of a row's number
_MOST_DIGITS = 7


def _skipped_rows(sheet: Sheet, job: Job) -> set[int]:
    """Row numbers that `[reading] skip` names for this sheet, as ``Sheet!14`` or plain ``14``."""
    rows = set()
    for entry in job.reading.skip:
        name, _, number = entry.rpartition("!")
        if not (number.isascii() and number.isdecimal() and len(number) <= _MOST_DIGITS):
            raise JobError("reading.skip: this is no row", file=job.path, read=entry, right="14, or Sheet!14")
        if not name or name == (sheet.name or ""):
            rows.add(int(number))
    return rows


def _may_be_headings(cells: list[Cell]) -> bool:
    """Whether a row could be headings at all: texts, and not mostly texts with digits in them."""
    count = digits = 0
    for cell in cells:
        if cell is None:
            continue
        if type(cell) is not str:
            return False
        count += 1
        digits += any(char.isdigit() for char in cell)
    return count > 0 and digits * 2 <= count


def _heading_columns(cells: list[Cell], job: Job) -> list[Column] | None:
    """The columns a row of headings names, or None where the row is no row of headings."""
    texts = [(number, cell) for number, cell in enumerate(cells, 1) if not is_blank(cell)]
    if len(texts) < 2 or not all(isinstance(cell, str) for _, cell in texts):
        return None
    columns = [Column(number, str(cell), _told(number, str(cell), job) or read_heading(str(cell))) for number, cell in texts]
    known = sum(1 for c in columns if c.heading)
    # A member row may hold a word or two that are also headings (a part called "Plate"); digits tell it apart.
    digits = sum(1 for c in columns if not c.heading and any(ch.isdigit() for ch in c.text))
    # So does a bare number (``Frame | 2 | Steel``); and a heading repeated in one row (``Material | Steel``) is a statement.
    if any(number_readings(c.text) for c in columns) or len({c.heading.field for c in columns if c.heading}) < 2:
        return None
    if known < 2 or (known * 2 < len(columns) and known < _PLENTY) or digits > known / 2:
        return None
    return columns


def check_told(job: Job) -> None:
    """Raises JobError where `[reading.columns]` names a field that there is not, which would else be passed over in silence."""
    for key, named in job.reading.columns.items():
        if named not in FIELDS:
            near = suggest(NormalName(named[:80]), [NormalName(name) for name in sorted(FIELDS)], floor=60, limit=1)
            raise JobError(
                f"reading.columns: {key[:80]!r} is given a field that there is not", file=job.path, read=named,
                right=near[0].name if near else "one of " + ", ".join(sorted(FIELDS)),
            )


def not_met(readings: list[SheetReading], job: Job) -> list[Finding]:
    """What `[reading.columns]`, `tables` and `skip` name and no sheet that was read holds: notes, as it changed nothing."""
    findings = []
    columns = [column for reading in readings for table in reading.tables for column in table.all_columns]
    right = "the heading as it stands in the list, or the letter of its column"
    file = job.path.name if job.path else None
    for key in job.reading.columns:
        if not any(_is_told(key, column.number, column.text) for column in columns):
            message = f"[reading.columns] names {key!r}, and no list that was read has that column"
            findings.append(Finding("note", "job-not-met", message, file=file, read=key, right=right))
    for entry in job.reading.tables:
        name, _, _ = entry.rpartition("!")
        if name and not any(name == (reading.sheet.name or "") for reading in readings):
            message = f"[reading] tables names {entry}, and no sheet of that name was read"
            findings.append(Finding("note", "job-not-met", message, file=file, read=entry, right="the sheet's name before the !"))
    for entry in job.reading.skip:
        name, _, number = entry.rpartition("!")
        if not any((not name or name == (reading.sheet.name or "")) and int(number) in reading.kinds for reading in readings):
            message = f"[reading] skip names row {entry}, and no sheet that was read has it"
            right_row = "the row's number on its sheet, such as Sheet!14"
            findings.append(Finding("note", "job-not-met", message, file=file, read=entry, right=right_row))
    return findings


def _is_told(key: str, number: int, text: str) -> bool:
    """Whether a key of `[reading.columns]` is a column's letter or heading."""
    return (re.fullmatch(r"[A-Z]{1,3}", key) is not None and column_number(key) == number) or normal_name(key) == normal_name(text)


def _told(number: int, text: str, job: Job) -> Heading | None:
    """The field that `[reading.columns]` gives a heading or a column letter."""
    for key, named in job.reading.columns.items():
        if _is_told(key, number, text):
            found = read_heading(text)
            unit = found.unit if found else None
            return Heading(text, named, unit, TOLD)
    return None


def _masses_by_their_units(table: Table) -> None:
    """A column of masses over whose cells stands kg/m or kg/m² is one by length or area (``Unit mass`` over ``kg/m``)."""
    for name in _MASSES:
        claims = [*([table.columns[name]] if name in table.columns else []), *table.rivals.get(name, [])]
        by_unit = {}
        for column in claims:
            dimension = EVERYDAY[table.units_below[column.number]][0] if column.number in table.units_below else ""
            wanted = _BY_DIMENSION.get(dimension)
            if wanted is not None and column.heading is not None and column.heading.unit is None and column.heading.why != TOLD:
                by_unit[column.number] = wanted
        left = [column for column in claims if column.number not in by_unit]
        if not by_unit:
            continue
        table.columns.pop(name, None)
        table.rivals.pop(name, None)
        if left:
            table.columns[name] = left[0]
        if left[1:]:
            table.rivals[name] = left[1:]
        for column in claims:
            wanted = by_unit.get(column.number)
            if wanted is None:
                continue
            column.heading = Heading(column.text, wanted, None, "told by the unit below it")
            if table.columns.setdefault(wanted, column) is not column:
                table.rivals.setdefault(wanted, []).append(column)
        table._key_places.clear()


def _is_unit_row(cells: list[Cell]) -> bool:
    """Whether a row holds units, and besides them only dashes and words for pieces (``-``, ``Stk.``, ``mm``, ``kg``)."""
    texts = [cell for cell in cells if not is_blank(cell)]
    if not texts or not all(type(c) is str and len(c) <= 16 for c in texts):
        return False
    units = [unit_of(str(c)) is not None for c in texts]
    return any(units) and all(known or _NO_UNIT.fullmatch(str(c).strip()) for known, c in zip(units, texts, strict=True))


def _kind_of(table: Table, cells: list[Cell], number: int, sheet: Sheet, labels: list[str]) -> RowKind:
    end = len(cells)
    filled = {name for name, at in table.key_places() if at < end and not is_blank(cells[at])}
    if sheet.errors or sheet.unsaved:
        filled |= {name for name, at in table.key_places() if (number, at + 1) in sheet.errors or (number, at + 1) in sheet.unsaved}
    if any(rowwords.TOTAL.match(label) for label in labels) and not ("section" in filled and filled & _COUNTS and filled & _SIZES):
        return "total"
    rules = [c for c in cells if type(c) is str and len(c) > 2 and not c[0].isalnum() and rowwords.RULE.fullmatch(c)]
    if rules and all(type(c) is not str or rowwords.RULE.fullmatch(c) or number_readings(c) for c in cells):
        return "other"
    named = filled & _NAMES
    dashed = [name for name in filled & _COUNTS if str(table.cell(number, name)).strip() in ("-", "–", "—")]
    if dashed and "mark" in table.columns and is_blank(table.cell(number, "mark")):
        return "total"
    if not named:
        numbers = [c for c in cells if not is_blank(c)]
        if (
            filled
            and all(not isinstance(c, str) or type(c) is Shown or number_readings(c) for c in numbers)
            and not (filled & {"quantity_and_length"} or ({"length"} <= filled and filled & _COUNTS))
        ):
            return "total"
        return "member" if len(filled) > 1 else "other"
    if len(filled) > 1:
        return "member"
    # One filled cell: a group title, a note, or a numbered empty row. A section standing alone is a piece with nothing
    # beside it, and is kept in view.
    if filled == {"section"} and any(ch.isdigit() for ch in str(table.cell(number, "section"))):
        first_text = next((n for n, c in enumerate(cells, 1) if not is_blank(c)), 0)
        return "member" if first_text == table.columns["section"].number and first_text > 1 else "other"
    return "other"
