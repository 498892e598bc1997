"""Where several lists make one schedule: a sheet for each list, its rows live from the schedule, its own total. Rank 9."""

from __future__ import annotations

import re
from pathlib import PurePath
from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.wording import counted, shown
from takeoff.reports.workbook.schedule import BLANKS, FIRST, WORDS, Plan
from takeoff.reports.workbook.sheet import SCHEDULE, Book, Sheet, place

if TYPE_CHECKING:
    from takeoff.pipeline import InputFile, Result

_COLUMNS = 11
_HEADINGS = 5
#: signs that a sheet's name may not hold
_FORBIDDEN = re.compile(r"[\[\]:*?/\\'\x00-\x1f]")


def names(result: Result) -> list[str]:
    """A sheet's name for each list, in their order; none where there is one list only."""
    if len(result.inputs) < 2:
        return []
    return [f"List {number} {_FORBIDDEN.sub(' ', shown(PurePath(i.file).stem))[:20]}".strip() for number, i in enumerate(result.inputs, 1)]


def write(book: Book, result: Result, plan: Plan, *, live: bool) -> None:
    """Write a sheet for each list; without `live` the figures stand as they are."""
    files = result.members["file"].tolist()
    for name, source in zip(names(result), result.inputs, strict=False):
        rows = [i for i, file in enumerate(files) if file == source.file]
        _list(book.sheets[name], result, plan, (source, rows), live=live)


def _list(sheet: Sheet, result: Result, plan: Plan, of: tuple[InputFile, list[int]], *, live: bool) -> None:
    source, rows = of
    frame, units, unit = result.members, sheet.book.units, sheet.book.mass_unit
    sheet.widths([8, 14, 16, 9, 26, 26, 14, 14, 14, 14, 14])
    sheet.height(0, 24)
    sheet.text(0, 0, f"{shown(source.file)}: {sheet.book.title}", "title")
    lacking = sum(1 for i in rows if frame.at[i, "status"] == "not weighed")
    said = f"{counted(len(rows), 'row')} of this list" + (f", INCOMPLETE: {counted(lacking, 'row')} not weighed" if lacking else "")
    sheet.text(1, 0, f"{said}. Checksum (SHA-256) {source.sha256}", "quiet")
    sums = 3
    sheet.text(sums, 0, "Total of this list, of the rows weighed", "total")
    sheet.texts(sums, 1, [None] * 6, "total")
    masses = {word: [rounding.in_mass_unit(v, units) for v in frame.loc[rows, f"total_{word}_kg"].tolist()] for word in WORDS}
    last = _HEADINGS + max(len(rows), 1)
    for offset, word in enumerate(WORDS):
        letter = "HIJ"[offset]
        total = float(frame.loc[rows, f"total_{word}_kg"].sum())
        sheet.formula(
            sums, 7 + offset, f"=SUM({letter}{_HEADINGS + 2}:{letter}{last + 1})", rounding.in_mass_unit(total, units), "total mass"
        )
    sheet.text(sums, 10, None, "total")
    sheet.height(_HEADINGS, 30)
    for column, text in enumerate(
        (
            "Row",
            "Mark",
            "Assembly",
            "Pieces",
            "Section",
            "Material",
            f"One piece, heavy ({unit})",
            *(f"All pieces, {word} ({unit})" for word in WORDS),
            "State",
        )
    ):
        sheet.text(_HEADINGS, column, text, "head right" if column in (0, 3, 6, 7, 8, 9) else "head")
    texts = {key: frame[key].tolist() for key in ("mark", "assembly", "section", "material", "status")}
    figures = {key: frame[key].astype(float).tolist() for key in ("row", "quantity", "each_heavy_kg")}
    for number, i in enumerate(rows):
        row, there = _HEADINGS + 1 + number, FIRST + i
        sheet.link(row, 0, place(SCHEDULE, there, plan.index("mark"), fixed=False), figures["row"][i])
        for column, key in ((1, "mark"), (2, "assembly"), (4, "section"), (5, "material")):
            sheet.text(row, column, texts[key][i] or BLANKS.get(key), "cell wrap")
        sheet.number(row, 3, figures["quantity"][i], "whole")
        weighed = texts["status"][i] != "not weighed"
        values = [("each_heavy_kg", rounding.in_mass_unit(figures["each_heavy_kg"][i], units))]
        values += [(f"total_{word}_kg", masses[word][number]) for word in WORDS]
        for offset, (key, value) in enumerate(values):
            style = "mass heavy" if key == "total_heavy_kg" else "mass"
            if not weighed or value != value:  # noqa: PLR0124  (NaN is the only value that differs from itself)
                sheet.text(row, 6 + offset, None, style)
            elif live:
                sheet.formula(row, 6 + offset, f"={place(SCHEDULE, there, plan.index(key))}", value, style)
            else:
                sheet.number(row, 6 + offset, value, style)
        sheet.text(row, 10, texts["status"][i], "cell" if weighed else "cell bold")
    if not rows:
        sheet.texts(_HEADINGS + 1, 0, ("(none)", *[None] * 10), "cell")
    sheet.raw.freeze_panes(_HEADINGS + 1, 2)
    sheet.raw.repeat_rows(_HEADINGS)
    sheet.raw.autofilter(_HEADINGS, 0, last, _COLUMNS - 1)
