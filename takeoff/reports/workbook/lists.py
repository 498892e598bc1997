"""What is missing from the totals, and what was assumed on the way to them: one sheet each. Rank 9."""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.findings import KINDS
from takeoff.reports.wording import cells_text, refusals, shown
from takeoff.reports.workbook.sheet import ASSUMPTIONS, NOT_WEIGHED, Book, Sheet

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.pipeline import Result

_MOST_CELLS = 200


def write_not_weighed(book: Book, result: Result) -> None:
    """One line for each reason of each row that is in no total, then what was not read at all."""
    sheet = book.sheets[NOT_WEIGHED]
    sheet.widths([26, 9, 12, 16, 8, 28, 46, 48])
    count = result.totals.not_weighed
    row = _top(
        sheet, NOT_WEIGHED, "Every row was weighed." if not count else
        f"{count} row{'s are' if count != 1 else ' is'} in no total. Mend the cell named, or weigh the piece; then run again.",
    )
    sheet.texts(row, 0, ("Row of the list", "Cell", "Mark", "Assembly"), "head")
    sheet.text(row, 4, "Pieces", "head right")
    sheet.texts(row, 5, ("What was read", "Why it is not weighed", "What would be right"), "head")
    first = row
    marks, assemblies = ([_text(v) for v in result.members[key].tolist()] for key in ("mark", "assembly"))
    pieces = result.members["quantity"].astype(float).tolist()
    for refusal in refusals(result, name_file=len(result.inputs) > 1):
        row += 1
        sheet.texts(row, 0, (refusal.place, refusal.cell, marks[refusal.index], assemblies[refusal.index]), "cell wrap")
        sheet.number(row, 4, pieces[refusal.index], "whole")
        sheet.texts(row, 5, (refusal.read, refusal.reason, refusal.right), "cell wrap")
    for finding in result.findings:
        if finding.level == "refused":
            row += 1
            sheet.texts(row, 0, (_place(finding, result), finding.cell, None, None, None), "cell wrap")
            sheet.texts(row, 5, (finding.read, finding.message, finding.right), "cell wrap")
    if row == first:
        row += 1
        sheet.texts(row, 0, ("(none)", *[None] * 7), "cell")
    _finish(sheet, first, row, 7)


def write_assumptions(book: Book, result: Result) -> None:
    """Everything that was assumed, then everything worth a note; the same thing on many rows stands once, with its cells."""
    sheet = book.sheets[ASSUMPTIONS]
    sheet.widths([11, 54, 24, 36, 8, 22, 44])
    row = _top(
        sheet, ASSUMPTIONS, "“assumed” is counted in the totals, but rests on something inferred: confirm it. “note” was "
        "read plainly and is said because a checker may want to know.",
    )
    sheet.texts(row, 0, ("Level", "What was assumed or noticed", "What was read", "What would settle it"), "head")
    sheet.text(row, 4, "Times", "head right")
    sheet.texts(row, 5, ("Where", "Cells"), "head")
    first = row
    findings = [f for f in result.all_findings() if f.level in {"assumed", "note"}]
    for level in ("assumed", "note"):
        for finding in findings:
            if finding.level != level:
                continue
            row += 1
            sheet.text(row, 0, level, "cell bold" if level == "assumed" else "cell")
            sheet.texts(row, 1, (finding.message, finding.read, finding.right), "cell wrap")
            sheet.number(row, 4, finding.count, "whole")
            sheet.texts(row, 5, (_place(finding, result), cells_text(finding, _MOST_CELLS)), "cell wrap")
    if row == first:
        row += 1
        sheet.texts(row, 0, ("(none)", *[None] * 6), "cell")
    _finish(sheet, first, row, 6)
    kinds = sorted({f.kind for f in findings})
    if kinds:
        row += 2
        sheet.heading(row, "Kinds of findings above, as the JSON names them", 2)
        for kind in kinds:
            row += 1
            sheet.text(row, 0, None, "text")
            sheet.long_text(row, (1, 6), f"{kind}: {KINDS[kind]}", "quiet wrap")


def _top(sheet: Sheet, name: str, about: str) -> int:
    sheet.height(0, 24)
    sheet.text(0, 0, f"{name}: {sheet.book.title}", "title")
    sheet.text(1, 0, about, "quiet")
    return 3


def _finish(sheet: Sheet, heading: int, last: int, last_column: int) -> None:
    sheet.raw.freeze_panes(heading + 1, 1)
    sheet.raw.repeat_rows(heading)
    sheet.raw.autofilter(heading, 0, last, last_column)


def _place(finding: Finding, result: Result) -> str:
    """The sheet; with its file where there are several."""
    file = finding.file if len(result.inputs) > 1 or not finding.sheet else None
    return " / ".join(shown(p) for p in (file, finding.sheet) if p)


def _text(value: object) -> str | None:
    return value if isinstance(value, str) else None
