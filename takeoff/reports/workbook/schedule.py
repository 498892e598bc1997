"""The sheet with one row a member: what it is, what one piece and all of them weigh, and on what basis. Rank 9."""

from __future__ import annotations

import os
import re
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from takeoff.reports import added, rounding
from takeoff.reports.wording import ROUNDED, row_place, shown
from takeoff.reports.workbook.block import Block
from takeoff.reports.workbook.sheet import BASIS, SCHEDULE, Book, Sheet, cell_text, letters, place

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.pipeline import Result

WORDS = ("light", "nominal", "heavy")

_TITLE, _SUBTITLE, _NOTE, TOTAL, _SHOWN, _HEADINGS, FIRST = range(7)

#: names that stand in the schedule where the list has a blank, so that the summary's sums can find those rows
BLANKS = {
    "material": "(no material)", "section": "(no section)", "assembly": "(no assembly)", "pick": "(no pick)", "phase": "(no phase)",
    "finish": "(no finish named)",
}

_STATUS_STYLE = {"weighed": "cell", "assumed": "cell italic", "not weighed": "cell bold"}
#: notes that a reader of a row's mass must see
_ABOUT_MASS = {
    "stated-mass-differs", "weighed-outside-bounds", "weighing-not-used", "finish-not-understood", "contents-not-understood",
    "insulation-not-understood", "holes-not-understood", "not-added",
}
#: columns of masses that are neither the piece's nor the row's sum
_PART_KEYS = ("bare_", "add_", "weighed_", "calculated_", "claimed_")
_SIZES = {
    "length_mm": "Length", "width_mm": "Width", "thickness_mm": "Thickness", "height_mm": "Height",
    "diameter_mm": "Diameter",
}


@dataclass(frozen=True, slots=True)
class Column:
    """One column: the key others refer to it by, its heading, width in characters, and whether figures stand in it."""

    key: str
    heading: str
    width: float
    figures: bool = False


class Names:
    """The names in one column of the schedule, with how often each comes once cells have cleaned it, and once case is gone."""

    def __init__(self, key: str, names: Iterable[str]) -> None:
        self.key = key
        names = list(names)
        self.cleaned = Counter(map(cell_text, names))
        self.folded = Counter(name.casefold() for name in names)


@dataclass(frozen=True, slots=True)
class Plan:
    """Where things lie on the schedule sheet, for those who refer to it."""

    columns: tuple[Column, ...]
    last: int
    headings: int = _HEADINGS

    def index(self, key: str) -> int:
        return next(i for i, column in enumerate(self.columns) if column.key == key)

    def span(self, key: str, *, here: bool = False) -> str:
        """All rows of a column, ``'Weight schedule'!$H$7:$H$75``."""
        letter = letters(self.index(key))
        sheet = "" if here else f"'{SCHEDULE}'!"
        return f"{sheet}${letter}${FIRST + 1}:${letter}${self.last + 1}"

    def total(self, key: str) -> str:
        return place(SCHEDULE, TOTAL, self.index(key))

    def one_of(self, names: Names, name: str, name_cell: str, what: str) -> str | None:
        """A formula over the rows where the column of `names` holds `name`: the sum of column `what`.

        `what` may also be ``pieces`` (of rows weighed) or ``not weighed`` (rows). None where no formula could tell this
        name from another, or where it would be too slow to be live.
        """
        if names.cleaned[cell_text(name)] != 1:
            return None
        span, status, pieces = self.span(names.key), self.span("status"), self.span("quantity")
        if names.folded[name.casefold()] == 1 and _plain_criterion(name):
            if what == "not weighed":
                return f'=COUNTIFS({span},{name_cell},{status},"not weighed")'
            if what == "pieces":
                return f'=SUMIFS({pieces},{span},{name_cell},{status},"<>not weighed")'
            return f"=SUMIF({span},{name_cell},{self.span(what)})"
        # SUMIF would read this name as a number, a date, a comparison or a pattern; EXACT takes it letter by letter.
        if self.last - FIRST > _MOST_EXACT:
            return None
        if what == "not weighed":
            return f'=SUMPRODUCT(EXACT({span},{name_cell})*({status}="not weighed"))'
        if what == "pieces":
            return f'=SUMPRODUCT(EXACT({span},{name_cell})*({status}<>"not weighed"),{pieces})'
        return f"=SUMPRODUCT(--EXACT({span},{name_cell}),{self.span(what)})"


_MOST_EXACT = 20_000
#: above this many rows the place in the list is text alone
_MOST_LINKED = 20_000
_TWO_LETTERS = re.compile(r"[^\W\d_]{2}")
_DATE_WORDS = re.compile(r"jan|feb|m[aä]r|apr|ma[iy]|jun|jul|aug|sep|o[ck]t|nov|de[cz]|true|false|\b[ap]m\b", re.IGNORECASE)
_PATTERN = re.compile(r"^[=<>]|[*?~]")


def _plain_criterion(name: str) -> bool:
    """True where a spreadsheet's SUMIF takes this name for this text and nothing else.

    SUMIF reads ``=<>`` in front as a comparison, ``*?~`` as a pattern, and text like a number, date, time or truth value as
    one; a name of more than 255 characters it refuses. It folds case too: see `Names.folded`.
    """
    if len(name) > 250 or _PATTERN.search(name) or name != name.strip():
        return False
    if not _TWO_LETTERS.search(name):
        return False
    if _DATE_WORDS.search(name) and any(c.isdigit() for c in name):
        return False
    return name.casefold() not in {"true", "false"}


def columns_for(result: Result) -> tuple[Column, ...]:
    """The columns this list needs: those always there, and those it has something for."""
    frame, us = result.members, result.job.job.units == "us"
    unit = rounding.mass_unit(result.job.job.units)
    columns: list[Column] = []
    if len(result.inputs) > 1:
        columns.append(Column("file", "List", _fit(frame, "file", 10, 26)))
    if result.members["sheet"].nunique() > 1:
        columns.append(Column("sheet", "Sheet", _fit(frame, "sheet", 7, 18)))
    columns += [
        Column("row", "Row", 6, figures=True), Column("mark", "Mark", _fit(frame, "mark", 7, 16)),
        Column("assembly", "Assembly", _fit(frame, "assembly", 10, 16)),
        Column("quantity", "Pieces", 7.5, figures=True), Column("section", "Section", _fit(frame, "section", 13, 21)),
        Column("material", "Material", _fit(frame, "material", 13, 23)),
    ]
    for key, heading in _SIZES.items():
        if key == "length_mm" or frame[key].notna().any():
            length = us and key == "length_mm"
            size_unit = "ft-in" if length else "in" if us else "mm"
            columns.append(Column(key, f"{heading} ({size_unit})", 14.5 if length else 10.5 if key == "thickness_mm" else 9, figures=True))
    for part, heading in (("each", "One piece"), ("total", "All pieces")):
        columns += [
            Column(f"{part}_{word}_kg", f"{heading}, {word} ({unit})", _fit_mass(frame, f"{part}_{word}_kg", result), figures=True)
            for word in WORDS
        ]
    for key, heading in {"weighed_each_kg": "Weighed, one piece", "calculated_nominal_kg": "Calculated, nominal"}.items():
        if key in frame and frame[key].notna().any():
            columns.append(Column(key, f"{heading} ({unit})", 10.5, figures=True))
    columns += [Column("status", "State", 11), Column("basis", "Basis no.", 6.5), Column("note", "What to know", 26)]
    # From here on columns are for the screen: on paper they would make all the others too small to read.
    if added.kinds(frame):
        columns.append(Column("of_which", f"Of one piece heavy, added ({unit})", 10.5, figures=True))
    if "handling" in frame:
        columns.append(Column("handling", "Handling", 25))
    columns += _parts_columns(frame, unit)
    columns += [
        Column("where", "Place in the list", 34),
        Column("section_text", "Section in the list", _fit(frame, "section_text", 16, 34)),
        Column("material_text", "Material in the list", _fit(frame, "material_text", 16, 30)),
    ]
    for key, heading in {
        "pick": "Pick", "phase": "Phase", "run": "Run", "bundle": "Bundle", "finish": "Finish", "contents": "Contents",
        "insulation": "Insulation", "holes": "Holes", "remarks": "Remarks",
    }.items():
        if key in frame and frame[key].notna().any():
            columns.append(Column(key, heading, _fit(frame, key, 9, 30)))
    return tuple(columns)


def _parts_columns(frame: pd.DataFrame, unit: str) -> list[Column]:
    """What one piece's mass is made of, and what the list says of it: for a checker, right of the printed columns."""
    columns: list[Column] = []
    if added.kinds(frame):
        parts = {"bare": "Bare piece", **{f"add_{kind}": f"+ {added.called(kind)}" for kind in added.kinds(frame)}}
        for part, heading in parts.items():
            columns += [Column(f"{part}_{word}_kg", f"{heading}, {word} ({unit})", 10, figures=True) for word in WORDS]
        columns.append(Column("added", "Additions, basis no.", 12))
    if "claimed_each_kg" in frame and frame["claimed_each_kg"].notna().any():
        columns.append(Column("claimed_each_kg", f"Stated in the list, one piece ({unit})", 11, figures=True))
        columns.append(Column("apart", "Stated against bare (%)", 10, figures=True))
    return columns


def _fit(frame: pd.DataFrame, key: str, least: float, most: float) -> float:
    lengths = [len(v) for v in frame[key].dropna().unique() if isinstance(v, str)]
    if key in BLANKS and frame[key].isna().any():
        lengths.append(len(BLANKS[key]))
    return min(most, max(least, max(lengths, default=0) * 1.06 + 2.5))


def _fit_mass(frame: pd.DataFrame, key: str, result: Result) -> float:
    """Room for the widest mass of a column, which is its total where it is one of all pieces; at least for its heading."""
    most = max(frame[key].max(skipna=True), getattr(result.totals.mass_kg, key.split("_")[1]) if key.startswith("total_") else 0.0, 0.0)
    shown_most = rounding.in_mass_unit(float(most), result.job.job.units) if most == most else 0.0  # noqa: PLR0124 - not NaN
    return max(9.8, len(f"{shown_most:,.1f}") * 1.06 + 2.0)  # totals stand in bold, which is wider


def plan_for(result: Result) -> Plan:
    """Where things will lie on the sheet of this result."""
    return Plan(columns_for(result), FIRST + max(len(result.members), 1) - 1)


def write(book: Book, result: Result, plan: Plan, basis_rows: Sequence[int]) -> None:
    """Write the sheet; `basis_rows` are the rows where the bases stand on their sheet."""
    sheet, columns = book.sheets[SCHEDULE], plan.columns
    sheet.widths([column.width for column in columns])
    _top(sheet, book, result, plan)
    _rows(sheet, result, plan, basis_rows)
    last_printed = plan.index("note")
    sheet.raw.freeze_panes(FIRST, plan.index("mark") + 1)
    sheet.raw.autofilter(_HEADINGS, 0, plan.last, len(columns) - 1)
    sheet.raw.repeat_rows(_HEADINGS)
    sheet.raw.print_area(0, 0, plan.last, last_printed)


def _top(sheet: Sheet, book: Book, result: Result, plan: Plan) -> None:
    files = ", ".join(" / ".join(shown(p) for p in (i.file, *i.sheets)) for i in result.inputs)
    sheet.height(_TITLE, 24)
    sheet.text(_TITLE, 0, f"Weight schedule: {book.title}" if book.title != SCHEDULE else SCHEDULE, "title")
    sheet.text(_SUBTITLE, 0, "; ".join(p for p in (book.subtitle, f"list: {files}") if p), "subtitle")
    sheet.text(
        _NOTE, 0, f"{ROUNDED} Lifting and axle checks use heavy. Row is the row of the list. "
        "Columns right of “What to know” help a checker on screen and are not printed.", "quiet",
    )
    units = book.units
    for row, label, function, style in (
        (TOTAL, "Total of the rows weighed", "SUM(", "total"), (_SHOWN, "Of the rows the filter shows", "SUBTOTAL(109,", "shown"),
    ):
        for index, column in enumerate(plan.columns):
            if column.key == "quantity" and row == TOTAL:
                # Pieces of rows that are not weighed are no part of the total.
                states, pieces = plan.span("status", here=True), plan.span("quantity", here=True)
                sheet.formula(row, index, f'=SUMIF({states},"<>not weighed",{pieces})', result.totals.quantity, f"{style} whole")
            elif column.key.startswith("total_"):
                word = column.key.split("_")[1]
                value = rounding.in_mass_unit(getattr(result.totals.mass_kg, word), units)
                sheet.formula(row, index, f"={function}{plan.span(column.key, here=True)})", value, f"{style} mass")
            else:
                sheet.text(row, index, label if index == 0 else None, style)
    sheet.height(_HEADINGS, 42)
    for index, column in enumerate(plan.columns):
        sheet.text(_HEADINGS, index, column.heading, "head right" if column.figures else "head")


#: rows that are laid out together: enough to be quick, few enough to be small
_ROWS_AT_ONCE = 5_000


def _rows(sheet: Sheet, result: Result, plan: Plan, basis_rows: Sequence[int]) -> None:
    frame = result.members
    columns = _Columns(sheet.book, result, plan, basis_rows)
    for start in range(0, len(frame), _ROWS_AT_ONCE):
        part = slice(start, min(start + _ROWS_AT_ONCE, len(frame)))
        with sheet.block(FIRST + start, part.stop - start) as block:
            for index, column in enumerate(plan.columns):
                columns.write(block, column.key, index, part)


class _Columns:
    """The cells of the schedule's rows, by column and part of the list."""

    def __init__(self, book: Book, result: Result, plan: Plan, basis_rows: Sequence[int]) -> None:
        self.book, self.frame = book, result.members
        self.us = book.units == "us"
        self.notes = _notes(result)
        self.at = {column.key: index for index, column in enumerate(plan.columns)}
        # A text that wraps makes its row taller, so those beyond the printed columns stay on one line.
        self.printed = self.at["note"]
        kinds = added.kinds(self.frame)
        self.parts = {
            word: [letters(self.at[key]) for key in (f"bare_{word}_kg", *(f"add_{kind}_{word}_kg" for kind in kinds)) if key in self.at]
            for word in WORDS
        }
        self.addition_numbers = added.basis_numbers(result) if "added" in self.at else []
        self.linked = len(self.frame) <= _MOST_LINKED
        self.basis_links = [(place(BASIS, row, 0, fixed=False), number + 1) for number, row in enumerate(basis_rows)]
        self._weighed = self.frame["status"].ne("not weighed").to_numpy()

    def _letter(self, key: str) -> str:
        return letters(self.at[key])

    def _masses(self, key: str, part: slice) -> list[float]:
        """A column of masses in the unit they are printed in."""
        units = self.book.units
        masses: list[float] = self.frame[key].to_numpy(dtype=float)[part].tolist()
        return masses if units == "si" else [rounding.in_mass_unit(mass, units) for mass in masses]

    def _masses_weighed(self, key: str, part: slice) -> list[float | None]:
        return [m if w else None for m, w in zip(self._masses(key, part), self._weighed[part].tolist(), strict=True)]

    def write(self, block: Block, key: str, index: int, part: slice) -> None:
        """The cells of one column."""
        frame = self.frame
        word = key.split("_")[1] if key.startswith(("each_", "total_")) else ""
        style = "mass heavy" if word == "heavy" else "mass"
        if key == "basis":
            block.links([self.basis_links[i] if i >= 0 else None for i in frame["basis_id"].to_numpy()[part].tolist()])
        elif key == "note":
            block.texts([self.notes.get(number) for number in range(part.start, part.stop)], "cell wrap")
        elif key == "where":
            self._where(block, part)
        elif key == "status":
            statuses = frame["status"].to_numpy()[part].tolist()
            block.texts(statuses, [_STATUS_STYLE[status] for status in statuses])
        elif key in {"row", "quantity"}:
            block.numbers(frame[key].to_numpy()[part].tolist(), "whole")
        elif key.startswith("each_"):
            values = self._masses_weighed(key, part)
            if self.parts[word]:
                block.formulas("=" + "+".join(f"{letter}#" for letter in self.parts[word]), values, style)
            else:
                block.numbers(values, style)
        elif key.startswith(_PART_KEYS):
            block.numbers(self._masses(key, part), "mass")
        elif key == "apart":
            self._apart(block, part)
        elif key == "of_which":
            each, bare = (self._masses_weighed(name, part) for name in ("each_heavy_kg", "bare_heavy_kg"))
            more = [None if e is None or b is None else e - b for e, b in zip(each, bare, strict=True)]
            block.formulas(f"={self._letter('each_heavy_kg')}#-{self.parts['heavy'][0]}#", more, "mass")
        elif key == "added":
            block.texts(self.addition_numbers[part], "cell")
        elif key.startswith("total_"):
            formula = f"={self._letter('quantity')}#*{self._letter(f'each_{word}_kg')}#"
            block.formulas(formula, self._masses_weighed(key, part), style)
        elif key in _SIZES:
            sizes: list[float] = frame[key].to_numpy(dtype=float)[part].tolist()
            if self.us and key == "length_mm":
                block.texts([rounding.feet_inches(v) if v == v else None for v in sizes], "cell right")  # noqa: PLR0124 - not NaN
            else:
                block.numbers([v / rounding.MM_PER_IN for v in sizes] if self.us else sizes, "size us" if self.us else "size")
        else:
            blank = BLANKS.get(key)
            texts = [v if isinstance(v, str) and v else blank for v in frame[key].to_numpy(dtype=object)[part].tolist()]
            block.texts(texts, "cell wrap" if index < self.printed else "cell")

    def _where(self, block: Block, part: slice) -> None:
        rows_at = [self.frame[key].to_numpy(dtype=object)[part].tolist() for key in ("file", "sheet", "row")]
        files = {file: row_place(file, None, 0).removesuffix("row 0") for file in dict.fromkeys(rows_at[0])}
        places = [
            f"{files[file]}row {row}" if not isinstance(sheet, str) else row_place(file, sheet, row)
            for file, sheet, row in zip(*rows_at, strict=True)
        ]
        if not self.linked or block.quick:
            block.texts(places, "cell")
            return

        def write(number: int, row: int, column: int) -> None:
            to = input_link(self.book, *(values[number] for values in rows_at))
            if to is None:
                block.sheet.text(row, column, places[number], "cell")
            else:
                block.sheet.link_out(row, column, to, places[number])

        block.by_cell(write)

    def _apart(self, block: Block, part: slice) -> None:
        """How far the list's own mass of a piece is from ours, percent; live where the bare mass has a column."""
        stated, ours = (self.frame[key].to_numpy(dtype=float)[part].tolist() for key in ("claimed_each_kg", "bare_nominal_kg"))
        here = letters(self.at.get("bare_nominal_kg", self.at["each_nominal_kg"]))
        apart = [100 * (s / o - 1) if s > 0 and o > 0 else None for s, o in zip(stated, ours, strict=True)]
        block.formulas(f"=100*({self._letter('claimed_each_kg')}#/{here}#-1)", apart, "size")


def input_link(book: Book, file: object, sheet: object, row: int) -> str | None:
    """From the workbook's own folder to the row in the list, so that both may move together; None where no path leads there."""
    try:
        to = Path(os.path.relpath(Path(str(file)).resolve(), book.folder)).as_posix().replace("%", "%25").replace("#", "%23")
    except (OSError, ValueError):
        return None
    if not isinstance(sheet, str):
        return to
    name = sheet.replace("'", "''")
    return f"{to}#'{name}'!A{int(row)}"


def _notes(result: Result) -> dict[int, str]:
    """What was refused or assumed in each row, or bears on its mass, in one line."""
    notes: dict[int, str] = {}
    for index, findings in result.row_findings.items():
        said = [f.message for f in findings if f.level in {"refused", "assumed"} or f.kind in _ABOUT_MASS]
        if said:
            notes[index] = shown("; ".join(said))
    frame = result.members
    for index in frame.index[frame["status"].eq("not weighed")]:
        reason = frame.at[index, "reason"]
        if isinstance(reason, str) and int(index) not in notes:
            notes[int(index)] = shown(reason)
    return notes
