"""The sheet of what changed since an earlier run. Rank 9."""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.workbook.sheet import CHANGES, Book

if TYPE_CHECKING:
    from takeoff.reports.compare import Comparison

_COLUMNS = 8


def write(book: Book, changes: Comparison) -> None:
    """One line a row added, removed or changed; picks and vehicles that changed below."""
    from takeoff.reports.compare import WORDS

    sheet, units, unit = book.sheets[CHANGES], book.units, book.mass_unit
    sheet.widths([11, 14, 18, 58, 13, 13, 13, 36])
    sheet.height(0, 24)
    sheet.text(0, 0, f"{CHANGES}: {book.title}", "title")
    sheet.long_text(
        1, (0, _COLUMNS - 1), f"{changes.sentence(units)} Checksum of the earlier record (SHA-256): {changes.sha256}.", "quiet wrap"
    )
    first = row = 3
    sheet.texts(row, 0, ("Change", "Mark", "Assembly", "What"), "head")
    for offset, word in enumerate(WORDS):
        sheet.text(row, 4 + offset, f"{word.capitalize()}, new − old ({unit})", "head right")
    sheet.text(row, 7, "Place in the list", "head")
    for change in changes.changes:
        row += 1
        sheet.text(row, 0, change.kind, "cell bold")
        what = change.said(units) + ("; not weighed in one of the runs" if change.unknown else "")
        sheet.texts(row, 1, (change.mark, change.assembly, what), "cell wrap")
        for offset, kg in enumerate(change.kg):
            sheet.number(row, 4 + offset, rounding.in_mass_unit(kg, units), "signed")
        sheet.text(row, 7, change.place, "cell wrap")
    if row == first:
        row += 1
        sheet.texts(row, 0, ("(none)", *[None] * 7), "cell")
    sheet.raw.freeze_panes(first + 1, 2)
    sheet.raw.repeat_rows(first)
    sheet.raw.autofilter(first, 0, row, _COLUMNS - 1)
    for note in changes.notes(units):
        row += 1
        sheet.long_text(row + 1, (0, _COLUMNS - 1), note)
