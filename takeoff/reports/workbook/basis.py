"""The sheet a checker ends on: inputs, the account, cautions, evidence, materials, and every basis with its source. Rank 9."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

from takeoff.reports import added
from takeoff.reports.wording import EVIDENCE_MEANS, STATUS_MEANS, shown
from takeoff.reports.workbook.sheet import BASIS, SCHEDULE, Book, Sheet, letters

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.provenance import Source
    from takeoff.reports.workbook.schedule import Plan
    from takeoff.weighing.basis import Basis

_COLUMNS = 10
_PARTS = ("weighed", "assumed", "not_weighed", "heading", "total", "blank", "other")

#: writes one row of the sheet, given its number
Line = Callable[[int], None]


@dataclass(slots=True)
class Layout:
    """The rows of the sheet, top to bottom, before they are written: so others can refer to the bases beforehand."""

    lines: list[Line] = field(default_factory=list)
    basis_rows: list[int] = field(default_factory=list)

    def write(self) -> None:
        for row, line in enumerate(self.lines):
            line(row)


def lay_out(book: Book, result: Result, plan: Plan) -> Layout:
    """Decide what stands in which row; nothing is written yet."""
    sheet = book.sheets[BASIS]
    layout = Layout()
    lines = layout.lines
    lines += [_title(sheet), _words(sheet, [(
        "Every figure follows from an input cell, a rule and a source. Sources are named, with how well each is known.",
    )], "quiet"), _nothing]
    for block in (_inputs(sheet, result), _account(sheet, result), _cautions(sheet, result), _evidence(sheet), _materials(sheet, result)):
        lines += block
        lines.append(_nothing)
    lines += _bases_top(sheet, result)
    uses = result.members["basis_id"].value_counts().to_dict()
    for number, basis in enumerate(result.bases):
        layout.basis_rows.append(len(lines))
        lines.append(_basis(sheet, plan, (number, basis), uses.get(number, 0)))
    if result.added_bases:
        lines += [_nothing, *_additions(sheet, result)]
    return layout


def _additions(sheet: Sheet, result: Result) -> list[Line]:
    """How each addition was found, numbered as in the schedule."""

    def head(row: int) -> None:
        sheet.text(row, 0, "Basis no.", "head")
        sheet.texts(row, 1, ("Rule of what is added to one piece", "Source", "Clause or table", "Evidence"), "head")
        sheet.texts(row, 5, ("Rule of light and heavy", "Source", "Clause or table", "Evidence"), "head")
        sheet.text(row, 9, "Rows", "head right")

    lines = [_heading(sheet, "Additions: finish, welds, bolts, contents and the like, numbered as in the weight schedule"), head]
    for number, (basis, rows) in enumerate(zip(result.added_bases, added.uses(result), strict=True)):
        lines.append(_addition(sheet, number, basis, rows))
    return lines


def _addition(sheet: Sheet, number: int, basis: Basis, rows: int) -> Line:
    def line(row: int) -> None:
        sheet.text(row, 0, f"A{number + 1}", "cell")
        sheet.texts(row, 1, (basis.rule, *_source(basis.nominal), basis.bounds_rule, *_source(basis.bounds)), "cell wrap")
        sheet.number(row, 9, rows, "whole")

    return line


def _nothing(row: int) -> None:
    """An empty row between blocks."""


def _title(sheet: Sheet) -> Line:
    def line(row: int) -> None:
        sheet.widths([10.5, 34, 26, 18, 12.5, 34, 26, 18, 12.5, 8])
        sheet.height(row, 24)
        sheet.text(row, 0, f"{BASIS}: {sheet.book.title}", "title")

    return line


def _heading(sheet: Sheet, text: str) -> Line:
    return lambda row: sheet.heading(row, text, _COLUMNS)


def _words(sheet: Sheet, cells: list[tuple[object, ...]], style: str) -> Line:
    """One row of texts, given as runs that follow each other from the first column."""
    flat = [text for run in cells for text in run]
    return lambda row: sheet.texts(row, 0, flat, style)


def _paragraph(sheet: Sheet, text: str) -> Line:
    return lambda row: sheet.long_text(row, (0, _COLUMNS - 1), text)


def _inputs(sheet: Sheet, result: Result) -> list[Line]:
    lines = [
        _heading(sheet, "Inputs"),
        _words(sheet, [("", "File", "Sheets with a list", "", "", "Checksum (SHA-256)", "", "", "", "")], "head"),
    ]
    for file in result.inputs:
        sheets = ", ".join(shown(s) for s in file.sheets) or "(text file: no sheets)"
        lines.append(_input(sheet, "list", (file.file, sheets), file.sha256))
    if result.job_file:
        lines.append(_input(sheet, "job file", (result.job_file, None), None))
    return lines


def _input(sheet: Sheet, kind: str, names: tuple[str, str | None], checksum: str | None) -> Line:
    def line(row: int) -> None:
        sheet.text(row, 0, kind, "cell")
        sheet.texts(row, 1, names, "cell wrap")
        # A checksum has no place to break: it runs over the empty cells beside it.
        sheet.texts(row, 3, (None, None, checksum, *[None] * 4), "cell")

    return line


def _account(sheet: Sheet, result: Result) -> list[Line]:
    """Rows read = rows accounted for, sheet by sheet, as live sums."""

    def account_head(row: int) -> None:
        sheet.text(row, 0, "Rows read", "head right")
        sheet.text(row, 1, "Sheet", "head")
        sheet.texts(row, 2, ("Parts add up to", "Left over"), "head right")
        sheet.text(row, 4, "Parts", "head")
        sheet.texts(row, 5, [""] * 5, "head")

    lines = [
        _heading(sheet, "Account of rows: every row from the first with content to the last"),
        account_head,
    ]
    count = len(result.sheet_accounts)
    for part in result.sheet_accounts:
        file = part.file if len(result.inputs) > 1 or not part.sheet else None
        lines.append(_account_row(sheet, " / ".join(shown(p) for p in (file, part.sheet) if p), part.account))

    def all_rows(row: int) -> None:
        rows = int(result.account.rows)
        sheet.formula(row, 0, f"=SUM(A{row - count + 1}:A{row})", rows, "total whole")
        sheet.text(row, 1, "All", "total")
        sheet.formula(row, 2, f"=SUM(C{row - count + 1}:C{row})", rows, "total whole")
        sheet.formula(row, 3, f"=A{row + 1}-C{row + 1}", 0, "total whole")
        sheet.texts(row, 4, (f"{_parts(result.account)}. Left over must be 0: no row is lost.", *[None] * 5), "total")

    if count:
        lines.append(all_rows)
    return lines


def _account_row(sheet: Sheet, name: str, account: Any) -> Line:
    numbers = [int(getattr(account, part)) for part in _PARTS]

    def line(row: int) -> None:
        sheet.number(row, 0, int(account.rows), "whole")
        sheet.text(row, 1, name, "cell wrap")
        sheet.formula(row, 2, "=" + "+".join(map(str, numbers)), sum(numbers), "whole")
        sheet.formula(row, 3, f"=A{row + 1}-C{row + 1}", int(account.rows) - sum(numbers), "whole")
        sheet.texts(row, 4, (_parts(account), *[None] * 5), "cell")

    return line


def _parts(account: Any) -> str:
    return ", ".join(f"{int(getattr(account, p))} {p.replace('_', ' ')}" for p in _PARTS if getattr(account, p)) or "no rows"


def _cautions(sheet: Sheet, result: Result) -> list[Line]:
    missing = f"Not counted in any figure: {added.not_counted(result)}."
    return [_heading(sheet, "Cautions"), *(_paragraph(sheet, shown(c)) for c in result.cautions), _paragraph(sheet, missing)]


def _evidence(sheet: Sheet) -> list[Line]:
    lines = [_heading(sheet, "What the words mean")]
    for kind, words in (("evidence", EVIDENCE_MEANS), ("state", STATUS_MEANS)):
        lines += [_words(sheet, [(kind, word, meaning, *[None] * 7)], "cell") for word, meaning in words.items()]
    return lines


def _materials(sheet: Sheet, result: Result) -> list[Line]:
    lines = [
        _heading(sheet, "Densities of the materials named in the list"),
        _words(sheet, [(
            "", "Material", "Low / nominal / high (kg/m³)", "Condition", "Evidence", "Source", "Clause or table", "", "", "",
        )], "head"),
    ]
    for material in result.materials:
        density, source = material.density, material.density_source
        figures = " / ".join("–" if v is None else f"{v:,.0f}".replace(",", " ") for v in (density.low, density.nominal, density.high))
        own = "own table" if material.own else None
        texts = (own, material.name, figures, material.density_condition, source.evidence, source.title)
        lines.append(_material(sheet, texts, source.clause))
    return lines


def _material(sheet: Sheet, texts: tuple[str | None, ...], clause: str) -> Line:
    def line(row: int) -> None:
        sheet.texts(row, 0, texts, "cell wrap")
        sheet.long_text(row, (len(texts), _COLUMNS - 1), clause, "cell wrap")

    return line


def _bases_top(sheet: Sheet, result: Result) -> list[Line]:

    def head(row: int) -> None:
        sheet.text(row, 0, "Basis no.", "head")
        sheet.texts(row, 1, ("Rule of the nominal mass", "Source", "Clause or table", "Evidence"), "head")
        sheet.texts(row, 5, ("Rule of light and heavy", "Source", "Clause or table", "Evidence"), "head")
        sheet.text(row, 9, "Rows", "head right")

    return [
        _heading(sheet, "Bases: how each mass was found, numbered as in the weight schedule"),
        head,
        *([] if result.bases else [_words(sheet, [("(none: nothing was weighed)",)], "text")]),
    ]


def _basis(sheet: Sheet, plan: Plan, numbered: tuple[int, Basis], rows: int) -> Line:
    number, basis = numbered
    marks = [m for m, is_so in (("stated in the list", basis.stated), ("own table", basis.own), ("weighed", basis.weighed)) if is_so]
    rule = basis.rule + (f" ({', '.join(marks)})" if marks else "")

    def line(row: int) -> None:
        # Back to the column of basis numbers, where the filter shows the rows that rest on this one.
        sheet.link(row, 0, f"'{SCHEDULE}'!{letters(plan.index('basis'))}{plan.headings + 1}", number + 1)
        sheet.texts(row, 1, (rule, *_source(basis.nominal), basis.bounds_rule, *_source(basis.bounds)), "cell wrap")
        sheet.formula(row, 9, f"=COUNTIF({plan.span('basis')},A{row + 1})", rows, "whole")

    return line


def _source(source: Source) -> tuple[str, str, str]:
    return source.title, source.clause, source.evidence
