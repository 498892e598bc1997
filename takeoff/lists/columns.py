"""One column of a list becomes texts or numbers: each distinct text once, bare numbers by the column's unit.

What cannot be read is left blank and said, never guessed.
"""

from __future__ import annotations

import math
import re
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date, datetime, time, timedelta
from functools import partial
from typing import TYPE_CHECKING

from takeoff.findings import Finding, Level
from takeoff.job import Job
from takeoff.lists import ditto, strokes
from takeoff.lists.counts import ABOUT
from takeoff.lists.headings import MEASURES, TEXT_FIELDS
from takeoff.lists.sheets import Cell
from takeoff.lists.tables import Table, is_blank
from takeoff.quantities import EVERYDAY, DecimalSign, Measure, measure_readings, tidy

if TYPE_CHECKING:
    from takeoff.lists.members import Members

#: what a length can be before it is refused as a slip of the unit, in mm
PLAUSIBLE_MM = {
    "length": (1.0, 100_000.0), "inches": (0.0, 100_000.0), "total_length": (1.0, 1e7),
    "width": (0.5, 30_000.0), "thickness": (0.05, 5_000.0),
    "height": (0.5, 30_000.0), "diameter": (0.5, 10_000.0),
}
#: dimension -> the unit of a bare number in a metric list, and in one in inches or feet
_BARE_UNITS = {
    "mass": ("kg", "lb"), "mass per length": ("kg/m", "lb/ft"), "mass per area": ("kg/m2", "lb/ft2"), "area": ("m2", "ft2"),
    "volume": ("m3", "ft3"),
}
#: a length column whose bare numbers sit below this under mm was meant in another unit
_SMALLEST_USUAL_LENGTH_MM = 20.0
#: where only one of two readings lies in here, that one is taken
_USUAL_MM = (20.0, 30_000.0)
DASHES = ("-", "–", "—", "n/a", "N/A", "NA")

#: fields of text that a disguised number or a date bars, and those where a date is said
_NEEDED_TEXTS = ("section", "material", "size", "unit", "quantity_and_length")
_DATES_SAID = ("mark", "name", "assembly", "pick", "bundle", "run", *_NEEDED_TEXTS)

#: fields of text in which a ditto mark repeats the cell above
_DITTO_FIELDS = ("assembly", "phase", "name", "section", "material", "size", "finish", "schedule")

_ABOUT = re.compile(rf"{ABOUT}\s*(?=[\d.])", re.IGNORECASE)
_TWO_UNITS = re.compile(r"([^()]{1,40}?)\s*[(\[]\s*([^()\[\]]{1,40})\s*[)\]]")
#: so many rows tell whether a list is in feet
_ENOUGH_ROWS = 200
#: a cell may name its size itself: ``L=1200`` for a length, ``t=3`` for a thickness
_NAMED = {
    "length": re.compile(r"(?:l|lg|len|length|länge|lengte|long)\.?\s*[=:]\s*(?=\d)", re.IGNORECASE),
    "width": re.compile(r"(?:b|w|br|la|sz)\.?\s*[=:]\s*(?=\d)", re.IGNORECASE),
    "thickness": re.compile(r"(?:t|s|e|d|th|thk|ep|ép|sp|gr|g)\.?\s*[=:]\s*(?=\d)", re.IGNORECASE),
    "height": re.compile(r"(?:h|ht)\.?\s*[=:]\s*(?=\d)", re.IGNORECASE),
    "diameter": re.compile(r"(?:d|dia|od|da)\.?\s*[=:]\s*(?=\d)", re.IGNORECASE),
}
#: two sides of a sheet in one cell (``2440 x 1220``), and a disc's diameter (``Ø1200``, ``1200 dia``)
_TWO_SIDES = re.compile(r"([\d.,/' \"]{1,16}(?:mm|cm|m|in|ft)?)\s*[x×*]\s*([\d.,/' \"]{1,16}(?:mm|cm|m|in|ft)?)", re.IGNORECASE)
_ROUND = re.compile(
    r"(?:[Øø∅⌀]|dia\.?\s|d\s?=)\s*([\d.,/ ]{1,12}(?:mm|cm|m|in|\")?)|([\d.,/ ]{1,12}(?:mm|cm|m|in|\")?)\s*(?:[Øø∅⌀]|dia\.?)", re.IGNORECASE)
_GAUGE = re.compile(r"#?\s?(\d{1,2})\s*(?:ga|gauge|gage)\.?", re.IGNORECASE)
_GAUGE_HEADING = re.compile(r"(?:gauge|gage|ga)\b", re.IGNORECASE)
_STRAY = "`´*★☆▲●•"
#: two statements of one length may differ by this much and still be one
_SAME_SHARE = 0.005


@dataclass(frozen=True, slots=True)
class Number:
    """A cell's number: in the inside unit where `unit` names the one that stood in the cell, else bare. `said` per cell."""

    value: float
    unit: str | None
    level: Level | None = None
    kind: str = ""
    message: str = ""


class ColumnReader:
    """Reads the columns of one table; its members are numbered from `start` in the whole run."""

    def __init__(self, table: Table, start: int, job: Job, members: Members) -> None:
        self.table, self.start, self.job, self.members = table, start, job, members
        self.count = len(table.member_rows)
        rows = table.sheet.rows
        self._rows: list[list[Cell]] = [rows[n - 1] if n <= len(rows) else [] for n in table.member_rows]
        self.decimal, self.mixed = _decimal_sign(table, job)
        self.inches = _speaks_inches(table) and job.reading.thousands != "apostrophe"
        self.strokes = strokes.of(table)
        self._dates_said: set[str] = set()
        self._dittos_said: set[str] = set()
        self._faults: dict[str, set[int]] = {}
        #: cells that hold more than one number can tell: member -> two sides, a disc's diameter (its field, its size), a gauge
        self.two_sides: dict[int, tuple[float, float, str]] = {}
        self.rounds: dict[int, tuple[str, float, str]] = {}
        self.gauges: dict[int, str] = {}
        self._fill_merged()

    # --- cells -------------------------------------------------------------------------------------------------------

    def cells(self, field: str) -> list[Cell]:
        """The cells of a field, member by member; None throughout where the list has no such column."""
        column = self.table.columns.get(field)
        if column is None:
            return [None] * self.count
        return self._cells_at(column.number)

    def _cells_at(self, number: int) -> list[Cell]:
        at = number - 1
        cells = [row[at] if at < len(row) else None for row in self._rows]
        merged = self.merged.get(number)
        return [merged.get(n, cell) for n, cell in zip(self.table.member_rows, cells, strict=True)] if merged else cells

    def say(self, level: Level, kind: str, message: str, members: Iterable[int], field: str | None, *,
            read: str | None = None, right: str | None = None) -> None:
        """A finding of members of this table (numbered from 0); one that is assumed marks the field of each."""
        numbers = [self.start + i for i in members]
        self.members.log.add(Finding(level, kind, message, read=read, right=right), numbers, field)
        if level == "assumed":
            for number in numbers:
                self.members.assumed.setdefault(number, set()).add(field or "quantity")

    def bar(self, members: Iterable[int], field: str, reason: str) -> None:
        """These members' cells of a field could not be read; for what names or counts a piece that bars the whole row."""
        for i in members:
            number = self.start + i
            self.members.unread.setdefault(number, {}).setdefault(field, reason)
            if field in ("section", "material", "quantity"):
                self.members.refused.setdefault(number, reason)

    def refuse(self, kind: str, message: str, members: Iterable[int], field: str, *, read: str | None = None,
               right: str | None = None) -> None:
        """Say why these cells are refused, and bar them."""
        listed = list(members)
        self.say("refused", kind, message, listed, field, read=read, right=right)
        self.bar(listed, field, message)

    def _fill_merged(self) -> None:
        """Merged text cells count for every row of the merge; column -> {row: text}. Merged numbers are refused."""
        self.merged: dict[int, dict[int, Cell]] = {}
        self.merged_numbers: dict[str, list[int]] = {}
        fields = {c.number: name for name, c in self.table.columns.items()}
        place = {row: i for i, row in enumerate(self.table.member_rows)}
        for top, left, bottom, right in self.table.sheet.merges:
            if bottom == top or left != right or left not in fields:
                continue
            rows = [n for n in range(top, min(bottom, max(place, default=0)) + 1) if n in place]
            if fields[left] in TEXT_FIELDS and fields[left] != "quantity_and_length":
                row = self.table.sheet.rows[top - 1] if top <= len(self.table.sheet.rows) else []
                value = row[left - 1] if left <= len(row) else None
                self.merged.setdefault(left, {}).update(dict.fromkeys(rows, value))
            elif len(rows) > 1:
                self.merged_numbers.setdefault(fields[left], []).extend(place[n] for n in rows)

    def faults(self, field: str) -> set[int]:
        """Members whose cell of this field is an error, an unsaved formula, a merged or disguised number, or struck out: said once."""
        if field not in self._faults:
            self._faults[field] = self._find_faults(field) | self._disguised(field) | self._struck(field)
        return self._faults[field]

    def _disguised(self, field: str) -> set[int]:
        """Members whose cell shows another number than it holds: said and barred."""
        column, disguised = self.table.columns.get(field), self.table.sheet.disguised
        if column is None or not disguised or (field in TEXT_FIELDS and field not in _NEEDED_TEXTS):
            return set()
        found: dict[tuple[str, str], list[int]] = {}
        for i, row in enumerate(self.table.member_rows):
            seen = disguised.get((row, column.number))
            if seen is not None:
                found.setdefault((seen.held, seen.shown), []).append(i)
        for (held, shown), where in found.items():
            message = f"the {_words(field)} cell holds {held} and shows {shown or 'nothing'}: which of them is meant is not known"
            self.refuse("number-format", message, where, field, read=shown or None, right="a number format that shows what the cell holds")
        return {i for where in found.values() for i in where}

    def _struck(self, field: str) -> set[int]:
        """Members of which this needed cell alone, or a part of its text, is struck out: said and barred."""
        if field not in self.strokes.needed:
            return set()
        cells, parts = self.strokes.cells.get(field, []), self.strokes.parts.get(field, [])
        right = "what takes its place"
        if cells:
            self.refuse("struck-out", f"the {_words(field)} cell is struck out, and the rest of its row is not", cells, field, right=right)
        if parts:
            message = f"a part of the {_words(field)} text is struck out: what of it counts is not known"
            self.refuse("struck-out", message, parts, field, right=right)
        return {*cells, *parts}

    def say_strokes(self) -> None:
        """Say which rows are struck out, and which of their cells that no piece needs."""
        message = "the row is struck out in the sheet; it was counted"
        self.say("assumed", "struck-out", message, self.strokes.rows, None,
                 right="the row deleted, or named in [reading] skip of the job file; if it is built, no longer struck out")
        for name in sorted({*self.strokes.cells, *self.strokes.parts} - self.strokes.needed):
            where = sorted({*self.strokes.cells.get(name, []), *self.strokes.parts.get(name, [])})
            message = f"the {_words(name)} cell is struck out, wholly or in part; it was read all the same"
            self.say("note", "struck-out", message, where, name)

    def _find_faults(self, field: str) -> set[int]:
        merged = self.merged_numbers.get(field, [])
        if merged:
            message = "one number is merged over several rows: whose is it?"
            self.refuse("merged-number", message, merged, field, right="a number in each row")
        column, sheet = self.table.columns.get(field), self.table.sheet
        if column is None or not (sheet.errors or sheet.unsaved):
            return set(merged)
        errors: dict[str, list[int]] = {}
        unsaved: list[int] = []
        for i, row in enumerate(self.table.member_rows):
            if (row, column.number) in sheet.errors:
                errors.setdefault(sheet.errors[row, column.number], []).append(i)
            elif (row, column.number) in sheet.unsaved:
                unsaved.append(i)
        for read, where in errors.items():
            self.refuse("cell-error", f"the {_words(field)} cell holds a spreadsheet error", where, field, read=read, right="a value")
        if unsaved:
            self.refuse("formula-without-result", f"the {_words(field)} cell holds a formula without a stored result", unsaved, field,
                        right="open and save it once in a spreadsheet program")
        return {*merged, *unsaved, *(i for where in errors.values() for i in where)}

    # --- texts -------------------------------------------------------------------------------------------------------

    def texts(self, field: str) -> list[str | None]:
        """A text field, blank as None; a second column that claims the field fills blanks, and bars rows where it differs."""
        faults = self.faults(field)
        cells = self.cells(field)
        if field in _DATES_SAID and field in self.table.columns:
            faults = faults | self._dated(field, cells)
        found = [None if i in faults or is_blank(cell) else as_text(cell) for i, cell in enumerate(cells)]
        for rival in self.table.rivals.get(field, []):
            others = [None if is_blank(cell) else as_text(cell) for cell in self._cells_at(rival.number)]
            if field in ("section", "material"):
                apart = [i for i, (a, b) in enumerate(zip(found, others, strict=True)) if a and b and a.casefold() != b.casefold()]
                self.refuse("heading-twice", f"two columns give a {field}, and they differ", apart, field, right="one of them")
            found = [a or b for a, b in zip(found, others, strict=True)]
        if field in _DITTO_FIELDS and field in self.table.columns:
            self._fill_dittos(field, found)
        return found

    def texts_at(self, number: int) -> list[str | None]:
        """The texts of a column by its number on the sheet, as they stand."""
        return [None if is_blank(cell) else as_text(cell) for cell in self._cells_at(number)]

    def _fill_dittos(self, field: str, found: list[str | None]) -> None:
        """Put the text above in place of ditto marks; one with nothing above it is refused."""
        if not any(map(ditto.is_ditto, {text for text in found if text})):
            return
        filled, alone = ditto.fill(found)
        if field not in self._dittos_said:
            self._dittos_said.add(field)
            self.say("note", "ditto", f"a ditto mark: the {_words(field)} of the row above", filled, field)
            if field in _NEEDED_TEXTS:
                message = f"a ditto mark, and no {_words(field)} in the row above"
                self.refuse("ditto", message, alone, field, right=f"the {_words(field)} itself")
        for i in alone:
            found[i] = None

    def _dated(self, field: str, cells: list[Cell]) -> set[int]:
        """Members whose cell of this field is a date or a time, which typed text such as 5-5 becomes; those that it bars."""
        dated = [i for i, cell in enumerate(cells) if isinstance(cell, (date, time, timedelta))]
        if not dated or field in self._dates_said:
            return set(dated) if field in _NEEDED_TEXTS else set()
        self._dates_said.add(field)
        needed = field in _NEEDED_TEXTS
        for read in dict.fromkeys(as_text(cells[i]) for i in dated):
            where = [i for i in dated if as_text(cells[i]) == read]
            message = f"the {_words(field)} cell holds a date or a time: a spreadsheet program makes one of texts such as 5-5 or MAY5"
            right = "the text itself, typed into a cell formatted as text"
            (self.refuse if needed else partial(self.say, "note"))("date-in-cell", message, where, field, read=read, right=right)
        return set(dated) if needed else set()

    # --- numbers -----------------------------------------------------------------------------------------------------

    def measures(self, field: str) -> list[float]:
        """Numbers in the field's inside unit; NaN where blank or unreadable. What could not be read bars that field."""
        if field not in self.table.columns:
            return [math.nan] * self.count
        faults = self.faults(field)
        dimension = MEASURES[field]
        unit, unit_from = unit_of_column(self.table, field, self.job)
        numbers, bad = self._numbers(field, faults, dimension)
        for read, where in bad.items():
            if self._set_aside(field, read, where, EVERYDAY[unit][1]):
                continue
            settled = self._settle_by_size(field, read, EVERYDAY[unit][1])
            for i in where if settled else ():
                numbers[i] = settled
            if settled is None:
                self._refuse_unreadable(field, read, where, dimension)
        unit, unit_from = self._unit_from_neighbours(field, numbers, unit, unit_from)
        factor = EVERYDAY[unit][1]
        values = [math.nan if n is None else n.value if n.unit else n.value * factor for n in numbers]
        self._say_of_cells(field, numbers, unit, unit_from)
        bare = [i for i, n in enumerate(numbers) if n is not None and n.unit is None and not math.isnan(values[i])]
        if bare and unit_from in ("assumed", "job"):
            self._say_unit(field, bare, values, unit, unit_from)
        if dimension == "length" and field in PLAUSIBLE_MM:
            self._refuse_implausible(field, values)
        for rival in self.table.rivals.get(field, []):
            self._compare_rival(field, rival.number, values)
        return values

    def _set_aside(self, field: str, read: str, where: list[int], factor: float) -> bool:
        """Keep a cell for `plainpieces` that only a flat piece can hold: two sides, a disc's diameter, a gauge. True where it is kept."""
        gauge = _GAUGE.fullmatch(read) if field == "thickness" else None
        if gauge:
            self.gauges.update(dict.fromkeys(where, gauge.group(1)))
            return True
        if field not in ("length", "width"):
            return False
        found = _ROUND.fullmatch(read)
        if found:
            size = self._side(found.group(1) or found.group(2), factor)
            if size is not None:
                self.rounds.update(dict.fromkeys(where, (field, size, read)))
                return True
        sides = _TWO_SIDES.fullmatch(read) if field == "length" else None
        one, two = (self._side(part, factor) for part in sides.groups()) if sides else (None, None)
        if one is None or two is None:
            return False
        self.two_sides.update(dict.fromkeys(where, (max(one, two), min(one, two), read)))
        return True

    def _side(self, text: str, factor: float) -> float | None:
        found = self._plain(tidy(text).strip(), "length")
        size = math.nan if found is None else found.value if found.unit else found.value * factor
        return size if PLAUSIBLE_MM["width"][0] <= size <= PLAUSIBLE_MM["width"][1] else None

    def put_back(self, field: str, read: str, where: list[int]) -> None:
        """Refuse a cell that was set aside, and that no flat piece took."""
        self._refuse_unreadable(field, read, where, "length")

    def _compare_rival(self, field: str, number: int, values: list[float]) -> None:
        heading = next(c.heading for c in self.table.all_columns if c.number == number)
        unit = heading.unit if heading and heading.unit else unit_of_column(self.table, field, self.job)[0]
        apart = []
        for i, cell in enumerate(self._cells_at(number)):
            found = self.read(cell, MEASURES[field])
            if found is None:
                continue
            value = found.value if found.unit else found.value * EVERYDAY[unit][1]
            if math.isnan(values[i]):
                values[i] = value
            elif abs(value - values[i]) > _SAME_SHARE * abs(values[i]):
                apart.append(i)
        if apart:
            self.refuse("heading-twice", f"two columns give a {_words(field)}, and they differ", apart, field,
                        right="one of them named in [reading.columns]")
            for i in apart:
                values[i] = math.nan

    def _numbers(self, field: str, faults: set[int], dimension: str) -> tuple[list[Number | None], dict[str, list[int]]]:
        """Each member's number, and what could not be read (text -> members)."""
        known: dict[str, Number | None] = {}
        # A bare fraction (``4 1/2``) is a number only where the column is in inches.
        in_inches = dimension == "length" and unit_of_column(self.table, field, self.job)[0] == "in"
        by_gauge = field == "thickness" and _GAUGE_HEADING.match(self.table.columns[field].text.strip()) is not None
        numbers: list[Number | None] = []
        bad: dict[str, list[int]] = {}
        for i, cell in enumerate(self.cells(field)):
            if by_gauge and i not in faults and cell is not None and not is_blank(cell):
                numbers.append(self._of_gauges(i, as_text(cell), bad))
                continue
            if type(cell) is float or type(cell) is int:
                numbers.append(Number(cell, None) if math.isfinite(cell) and not (faults and i in faults) else None)
                continue
            if i in faults or cell is None or is_blank(cell):
                numbers.append(None)
                continue
            text = as_text(cell)
            if text not in known:
                known[text] = self.read(cell, dimension, field)
                if known[text] is None and in_inches and "/" in text:
                    known[text] = self.read(f'{text}"', dimension)
            found = known[text]
            numbers.append(found)
            if found is None and text not in DASHES:
                bad.setdefault(text, []).append(i)
        return numbers, bad

    def _of_gauges(self, i: int, text: str, bad: dict[str, list[int]]) -> Number | None:
        """A cell below a heading of gauges: a whole number is a gauge, a fraction or a decimal is inches."""
        if re.fullmatch(r"#?\s?\d{1,2}(?:\.0)?", text):
            self.gauges[i] = text.strip("# ").removesuffix(".0")
            return None
        found = self.read(text, "length")
        if found is not None and found.unit is None:
            found = self.read(f'{text}"', "length")
        if found is None and re.fullmatch(r"[\d ]*\d/\d{1,2}", text):
            found = self.read(f'{text}"', "length")
        if found is None and text not in DASHES:
            bad.setdefault(text, []).append(i)
        return found

    def read(self, cell: Cell, dimension: str, field: str = "length") -> Number | None:
        """One cell as a number of this dimension, with what there is to say about it; None where it is none."""
        if type(cell) is float or type(cell) is int:
            return Number(cell, None)
        if not isinstance(cell, str):
            return None
        text = tidy(cell)
        named = _NAMED[field].match(text) if dimension == "length" and field in _NAMED else None
        text = text[named.end():] if named else text
        if re.match(r"[.,]\d", text):  # .125 is 0.125
            text = f"0{text}"
        plain = self._plain(text, dimension)
        if plain is not None:
            if self.mixed and plain.sign is not None:
                message = "decimal commas and points stand in one column; each was read as it must be"
                return Number(plain.value, plain.unit, "note", "mixed-decimal-signs", message)
            return Number(plain.value, plain.unit)
        about = _ABOUT.match(text)
        if about:
            rest = self._plain(text[about.end():], dimension)
            message = "an approximate figure is taken as it stands"
            return None if rest is None else Number(rest.value, rest.unit, "assumed", "approximate", message)
        bare = text.strip(_STRAY + " ")
        if bare != text:
            rest = self._plain(bare, dimension)
            message = "signs around the number were passed over"
            return None if rest is None else Number(rest.value, rest.unit, "note", "stray-signs", message)
        two = _TWO_UNITS.fullmatch(text)
        if two:
            first, second = (self._plain(part, dimension) for part in two.groups())
            if first is not None and second is not None and first.unit and second.unit and _agree(first.value, second.value):
                return Number(first.value, first.unit)
        return None

    def _plain(self, text: str, dimension: str) -> Measure | None:
        """A number with or without a unit, if it has one reading under the file's decimal sign."""
        if self.inches and re.fullmatch(r"\d{1,3}'\d{3}", text):
            return None
        found = [m for m in measure_readings(text) if m.unit is None or EVERYDAY[m.unit][0] == dimension]
        if len(found) > 1 and self.decimal is not None:
            found = [m for m in found if m.sign in (self.decimal, None)]
        return found[0] if len(found) == 1 else None

    def _settle_by_size(self, field: str, read: str, factor: float) -> Number | None:
        """A length whose comma or point nothing settles is tried both ways; where one alone is a usual size, it is that one."""
        if MEASURES[field] != "length" or self.decimal is not None:
            return None
        low, high = _USUAL_MM
        readings = [m for m in measure_readings(read) if m.unit is None or EVERYDAY[m.unit][0] == "length"]
        sizes = [m.value if m.unit else m.value * factor for m in readings]
        usual = [size for size in sizes if low <= size <= high]
        if len(sizes) < 2 or len(usual) != 1:
            return None
        return Number(usual[0], "mm", "assumed", "decimal-assumed", f"{read} read as {usual[0]:g} mm: the other reading is no usual size")

    def _refuse_unreadable(self, field: str, read: str, where: list[int], dimension: str) -> None:
        words = _words(field)
        open_readings = [m for m in measure_readings(read) if m.unit is None or EVERYDAY[m.unit][0] == dimension]
        if len(open_readings) > 1:
            self.refuse("unreadable-size", f"the {words} can be read two ways: is the comma or point a decimal sign?", where, field,
                        read=read, right="[reading] decimal in the job file")
            return
        self.refuse("unreadable-size", f"the {words} is no number with a unit of {dimension}", where, field, read=read,
                    right="a number, with its unit where the heading has none")

    def _unit_from_neighbours(self, field: str, numbers: list[Number | None], unit: str, unit_from: str) -> tuple[str, str]:
        """Where nothing names the unit of bare numbers, the one unit that cells of the column do name; several bar them."""
        if unit_from != "assumed":
            return unit, unit_from
        typed = {n.unit for n in numbers if n is not None and n.unit}
        bare = [i for i, n in enumerate(numbers) if n is not None and n.unit is None]
        if not typed or not bare:
            return unit, unit_from
        if len(typed) == 1:
            return next(iter(u for u in typed if u)), unit_from
        self.refuse("unit-assumed", "a bare number among several units", bare, field, right="its unit in the cell")
        for i in bare:
            numbers[i] = None
        return unit, unit_from

    def _say_of_cells(self, field: str, numbers: list[Number | None], unit: str, unit_from: str) -> None:
        said: dict[tuple[Level, str, str], list[int]] = {}
        other: dict[str, list[int]] = {}
        for i, n in enumerate(numbers):
            if n is None:
                continue
            if n.level is not None:
                said.setdefault((n.level, n.kind, n.message), []).append(i)
            if n.unit and n.unit != unit and unit_from == "heading" and {n.unit, unit} != {"ft", "in"}:
                other.setdefault(n.unit, []).append(i)
        for (level, kind, message), where in said.items():
            self.say(level, kind, message, where, field)
        for typed, where in other.items():
            self.say("note", "unit-in-cell", f"the cell's own unit ({typed}) goes before the heading's ({unit})", where, field)

    def _say_unit(self, field: str, bare: list[int], values: list[float], unit: str, unit_from: str) -> None:
        if field == "length" and unit == "mm" and unit_from == "assumed":
            middle = sorted(values[i] for i in bare)[len(bare) // 2]
            if middle < _SMALLEST_USUAL_LENGTH_MM:
                self.refuse("implausible-size", "lengths without a unit are too small for mm: their unit is not known", bare, field,
                            right="the unit in the heading, such as Length (m), or [reading] length_unit in the job file")
                for i in bare:
                    values[i] = math.nan
                return
        if unit_from == "job":
            self.say("note", "unit-from-job", f"bare numbers taken in {unit}, as the job file says", bare, field)
            return
        right = f"the unit in the heading, such as {self.table.columns[field].text} ({unit})"
        if MEASURES[field] == "length":
            self.say("assumed", "unit-assumed", f"bare numbers taken in {unit}: nothing names their unit", bare, field, right=right)
            return
        # A mass that is only compared with ours makes no row assumed; weighing says so where it uses it.
        self.say("note", "mass-unit-assumed", f"bare numbers read in {unit}: nothing names their unit", bare, field, right=right)
        for i in bare:
            self.members.assumed.setdefault(self.start + i, set()).add(field)

    def _refuse_implausible(self, field: str, values: list[float]) -> None:
        low, high = PLAUSIBLE_MM[field]
        where: dict[float, list[int]] = {}
        for i, value in enumerate(values):
            if not (low <= value <= high) and not math.isnan(value):
                where.setdefault(value, []).append(i)
        for value, rows in where.items():
            self.refuse("implausible-size", f"a {_words(field)} of {value:,.6g} mm is not plausible", rows, field, read=f"{value:g} mm",
                        right=f"between {low:g} and {high:,.0f} mm; check the unit")
            for i in rows:
                values[i] = math.nan


def unit_of_column(table: Table, field: str, job: Job) -> tuple[str, str]:
    """The unit of a column's bare numbers, and where it is from: heading, unit row, title block, job or assumed."""
    column = table.columns[field]
    dimension = MEASURES[field]
    below = table.units_below.get(column.number)
    if column.heading is not None and column.heading.unit is not None:
        return column.heading.unit, "heading"
    if below is not None and EVERYDAY[below][0] == dimension:
        return below, "unit row"
    if dimension == "length":
        if table.unit_note:
            return table.unit_note, "title block"
        return (job.reading.length_unit, "job") if job.reading.length_unit else ("mm", "assumed")
    si, us = _BARE_UNITS[dimension]
    return us if in_feet(table) else si, "assumed"


def _decimal_sign(table: Table, job: Job) -> tuple[DecimalSign | None, bool]:
    """The list's decimal sign, and whether both stand in it.

    Told by the job file, else the sign of every text that settles it; None where both or neither do. What stays open is
    tried both ways: if only one reading is a plausible size, the column reader takes that one.
    """
    if job.reading.decimal != "auto":
        return job.reading.decimal, False
    if job.reading.thousands in ("comma", "point"):
        return ("point" if job.reading.thousands == "comma" else "comma"), False
    votes: Counter[DecimalSign] = Counter()
    telling = {*MEASURES, "quantity", "quantity_per", "quantity_total", "quantity_and_length", "section", "size"}
    columns = [c.number for name, c in table.columns.items() if name in telling]
    seen: set[str] = set()
    for n in table.member_rows:
        row = table.sheet.rows[n - 1] if n <= len(table.sheet.rows) else []
        for number in columns:
            cell = row[number - 1] if number <= len(row) else None
            if type(cell) is not str or cell in seen:
                continue
            seen.add(cell)
            signs = {m.sign for m in measure_readings(cell)}
            if len(signs) == 1 and (sign := signs.pop()) is not None:
                votes[sign] += 1
    return (next(iter(votes)), False) if len(votes) == 1 else (None, len(votes) == 2)


def _speaks_inches(table: Table) -> bool:
    """Whether feet or inches stand anywhere in the list: then ``12'450`` may start feet and inches."""
    if table.unit_note in ("in", "ft") or any(c.heading and c.heading.unit in ("in", "ft") for c in table.all_columns):
        return True
    numbers = [c.number for name, c in table.columns.items() if MEASURES.get(name) == "length"]
    return any(
        type(cell) is str and ('"' in cell or "”" in cell or "″" in cell)
        for n in table.member_rows if n <= len(table.sheet.rows)
        for number in numbers if number <= len(table.sheet.rows[n - 1])
        for cell in (table.sheet.rows[n - 1][number - 1],)
    )


def in_feet(table: Table) -> bool:
    """Whether a list is in feet and inches: by its title, headings or unit row, or by most of the lengths typed in it."""
    if table.in_feet is None:
        units = [table.unit_note, *table.units_below.values(), *(c.heading.unit for c in table.all_columns if c.heading)]
        column = table.columns.get("length")
        texts = [c for n in table.member_rows[:_ENOUGH_ROWS] if column is not None and not is_blank(c := table.cell(n, "length"))]
        typed = sum(type(c) is str and any(m.unit in ("in", "ft") for m in measure_readings(c)) for c in texts)
        table.in_feet = "inches" in table.columns or any(unit in ("in", "ft") for unit in units) or (typed > 0 and typed * 2 >= len(texts))
    return table.in_feet


def _agree(one: float, other: float) -> bool:
    return abs(one - other) <= max(_SAME_SHARE * abs(one), 0.5)


def _words(field: str) -> str:
    return field.replace("_", " ")


def as_text(cell: Cell) -> str:
    """A cell as the text a person sees: 7.0 is 7, a date its ISO form, bold marks of a text format off."""
    if isinstance(cell, str):
        text = cell.strip()
        return text[2:-2].strip() if text.startswith("**") and text.endswith("**") and len(text) > 4 else text
    if isinstance(cell, bool):
        return "TRUE" if cell else "FALSE"
    if isinstance(cell, float) and cell.is_integer() and abs(cell) < 1e15:
        return str(int(cell))
    if isinstance(cell, (datetime, date, time)):
        return cell.isoformat()
    if isinstance(cell, timedelta):
        return str(cell)
    return str(cell)
