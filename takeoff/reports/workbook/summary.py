"""The first sheet: what it weighs, between what bounds, what is missing, and where to look. Rank 9."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from takeoff.reports import added, rounding
from takeoff.reports.wording import LIKELY_IS_FOR, counted, pick_word, shown
from takeoff.reports.workbook.charts import GroupRows
from takeoff.reports.workbook.picks import PickCells, figure, round_up, rounded_style
from takeoff.reports.workbook.schedule import WORDS, Names, Plan
from takeoff.reports.workbook.sheet import ASSUMPTIONS, BASIS, NOT_WEIGHED, PICKS, SCHEDULE, SUMMARY, Book, Sheet

if TYPE_CHECKING:
    from takeoff.bounds import Bounds
    from takeoff.pipeline import Result
    from takeoff.weighing.totals import GroupTotal

_COLUMNS = 7
_NAME, _PIECES, _LIGHT, _NOMINAL, _HEAVY, _LACKS, _REMARK = range(_COLUMNS)
#: a longer table is cut to its heaviest groups, the rest in one line: its sums stay quick to recalculate
MOST_GROUPS = 36


def write(book: Book, result: Result, plan: Plan, pick_cells: Sequence[PickCells]) -> dict[str, GroupRows]:
    """Write the sheet, which refers to the schedule's rows and to the picks; returns where each table of sums stands."""
    sheet = book.sheets[SUMMARY]
    sheet.widths([46, 11, 14, 14, 14, 14, 46])
    row = _title(sheet, result)
    row = _total(sheet, result, plan, row)
    row = _state(sheet, result, plan, row)
    row = _heaviest(sheet, result, pick_cells, row)
    row = _cautions(sheet, result, row)
    tables = []
    groups: dict[str, GroupRows] = {}
    named = [key for key in ("pick", "phase", "finish") if any(column.key == key for column in plan.columns)]
    for key in ("material", "assembly", "section", *named):
        tables.append(row)
        groups[key] = GroupRows(row + 2, min(len(result.totals.groups.get(key, [])), MOST_GROUPS), _LIGHT)
        row = _groups(sheet, result, plan, key, row)
    sheet.paginate(_COLUMNS, tables, row, new_page=tables[:1])  # one page for the answer, the tables after it
    sheet.raw.activate()
    return groups


def _title(sheet: Sheet, result: Result) -> int:
    job = result.job.job
    sheet.height(0, 26)
    sheet.text(0, 0, sheet.book.title, "title")
    sheet.text(1, 0, "Weight schedule: what every piece weighs, between what bounds, and on what source", "subtitle")
    row = 3
    pairs = [
        ("Reference", job.reference), ("Revision", job.revision), ("Date", job.date), ("Prepared by", job.prepared_by),
        ("Checked by", job.checked_by), ("Approved by", job.approved_by),
    ]
    # Two to a row: the left ones take the name column, the right ones the figures.
    for number in range(3):
        left, right = pairs[number], pairs[number + 3]
        sheet.text(row, _NAME, f"{left[0]}: {shown(left[1]) if left[1] else '–'}", "text")
        sheet.text(row, _PIECES, f"{right[0]}: {shown(right[1]) if right[1] else '–'}", "text")
        row += 1
    lists = "; ".join(
        shown(i.file) + (f" ({', '.join(shown(s) for s in i.sheets)})" if i.sheets else "") for i in result.inputs
    )
    sheet.long_text(row, (_NAME, _REMARK), f"List: {lists}" + (f"; job file: {shown(result.job_file)}" if result.job_file else ""))
    return row + 2


def _total(sheet: Sheet, result: Result, plan: Plan, row: int) -> int:
    units, unit, totals = sheet.book.units, sheet.book.mass_unit, result.totals
    sheet.heading(row, "Total mass", _COLUMNS)
    row += 1
    _table_head(sheet, row, ("", "Pieces", f"Light ({unit})", f"Nominal ({unit})", f"Heavy ({unit})", "Rows not weighed", ""))
    row += 1
    values = {word: rounding.in_mass_unit(getattr(totals.mass_kg, word), units) for word in WORDS}
    decimals = rounding.decimals_for(values["heavy"])
    sheet.height(row, 22)
    sheet.text(row, _NAME, "All rows weighed" if result.complete else "Of the rows weighed: INCOMPLETE, see below", "cell bold")
    sheet.formula(row, _PIECES, f"={plan.total('quantity')}", totals.quantity, "figure")
    for column, word, way in ((_LIGHT, "light", "down"), (_NOMINAL, "nominal", "nearest"), (_HEAVY, "heavy", "up")):
        cell = plan.total(f"total_{word}_kg")
        formula = {
            "down": f"=ROUNDDOWN(ROUND({cell},{decimals + 6}),{decimals})", "nearest": f"=ROUND({cell},{decimals})",
            "up": round_up(cell, decimals),
        }[way]
        sheet.formula(row, column, formula, float(rounding.rounded(values[word], decimals, way)), figure(decimals))  # type: ignore[arg-type]
    sheet.formula(row, _LACKS, f'=COUNTIF({plan.span("status")},"not weighed")', totals.not_weighed, "figure")
    sheet.text(row, _REMARK, "light rounded down, nominal to the nearest, heavy up", "cell quiet")
    row += 1
    _unrounded(sheet, row, "the same, unrounded sums", totals.mass_kg, plan)
    row += 1
    low, high = (rounding.in_mass_unit(v, units) for v in totals.likely_kg)
    sheet.text(row, _NAME, "Likely range, about 95 in 100", "cell")
    sheet.text(row, _PIECES, None, "cell")
    sheet.number(row, _LIGHT, float(rounding.rounded(low, decimals, "down")), rounded_style(decimals))
    sheet.text(row, _NOMINAL, "to", "cell right")
    sheet.number(row, _HEAVY, float(rounding.rounded(high, decimals, "up")), rounded_style(decimals))
    sheet.text(row, _LACKS, None, "cell")
    sheet.text(row, _REMARK, LIKELY_IS_FOR, "cell bold")
    return row + 2


def _unrounded(sheet: Sheet, row: int, name: str, mass: Bounds, plan: Plan) -> None:
    sheet.text(row, _NAME, name, "cell quiet")
    sheet.text(row, _PIECES, None, "cell")
    for column, word in ((_LIGHT, "light"), (_NOMINAL, "nominal"), (_HEAVY, "heavy")):
        value = rounding.in_mass_unit(getattr(mass, word), sheet.book.units)
        sheet.formula(row, column, f"={plan.total(f'total_{word}_kg')}", value, "mass")
    sheet.text(row, _LACKS, None, "cell")
    sheet.text(row, _REMARK, "lifting and axle checks use heavy", "cell quiet")


def _state(sheet: Sheet, result: Result, plan: Plan, row: int) -> int:
    """What is missing and what was assumed, with the way there."""
    account = result.account
    sheet.heading(row, "What is missing, what was assumed", _COLUMNS)
    row += 1
    for label, status, count, to, remark in (
        ("Rows weighed as they stand", "weighed", account.weighed, SCHEDULE, "read plainly and weighed"),
        ("Rows assumed", "assumed", account.assumed, ASSUMPTIONS, "in the totals; something was inferred: confirm it"),
        ("Rows not weighed", "not weighed", account.not_weighed, NOT_WEIGHED, "in no total; each with its cell and reason"),
    ):
        sheet.text(row, _NAME, label, "cell")
        sheet.formula(row, _PIECES, f'=COUNTIF({plan.span("status")},"{status}")', count, "whole")
        sheet.link(row, _LIGHT, f"'{to}'!A1", f"see {to}")
        sheet.texts(row, _NOMINAL, (None, None, None), "cell")
        sheet.text(row, _REMARK, remark, "cell quiet")
        row += 1
    sheet.text(row, _NAME, "Rows of the list accounted for", "cell")
    sheet.number(row, _PIECES, account.rows, "whole")
    sheet.link(row, _LIGHT, f"'{BASIS}'!A1", f"see {BASIS}")
    sheet.texts(row, _NOMINAL, (None, None, None), "cell")
    sheet.text(row, _REMARK, "headings, totals, blanks and notes included", "cell quiet")
    row += 1
    missing = added.not_counted(result)
    sheet.long_text(row, (_NAME, _REMARK), f"Not counted in any figure: {missing}.", "bold wrap")
    return row + 2


def _heaviest(sheet: Sheet, result: Result, cells: Sequence[PickCells], row: int) -> int:
    unit, units = sheet.book.mass_unit, sheet.book.units
    kind = pick_word(result)
    sheet.heading(row, {"pick": "Heaviest picks", "assembly": "Heaviest assemblies"}[kind], _COLUMNS)
    row += 1
    if not result.picks:
        sheet.text(row, _NAME, "The list names no assembly.", "text")
        return row + 2
    force_unit = "kN" if units == "si" else "kip"
    figures = (f"Heavy ({unit})", f"Hook load ({unit})", f"Hook load ({force_unit})")
    _table_head(sheet, row, (kind.capitalize(), "Pieces", *figures, "Rows not weighed", ""))
    row += 1
    order = sorted(range(len(result.picks)), key=lambda i: -result.picks[i].hook_load_kg)[:3]
    for index in order:
        pick, at = result.picks[index], cells[index]
        heavy, hook = (rounding.in_mass_unit(v, units) for v in (pick.mass_kg.heavy, pick.hook_load_kg))
        force = pick.hook_load_kN if units == "si" else hook / 1000.0
        decimals = rounding.decimals_for(hook)
        sheet.link(row, _NAME, at.heavy, shown(pick.name), "link wrap")
        sheet.number(row, _PIECES, pick.pieces, "whole")
        for column, cell, value, places, style in (
            (_LIGHT, at.heavy, heavy, decimals, rounded_style(decimals)),
            (_NOMINAL, at.hook_load, hook, decimals, f"{rounded_style(decimals)} heavy"),
            (_HEAVY, at.force, force, 1, "force"),
        ):
            sheet.formula(row, column, round_up(cell, places), float(rounding.rounded(value, places, "up")), style)
        sheet.number(row, _LACKS, pick.not_weighed, "whole")
        sheet.text(row, _REMARK, "INCOMPLETE: heavier than shown" if pick.not_weighed else None, "cell bold")
        row += 1
    sheet.text(row, _NAME, f"Rounded up. How each builds up: see {PICKS}.", "quiet")
    return row + 2


def _cautions(sheet: Sheet, result: Result, row: int) -> int:
    sheet.heading(row, "Cautions", _COLUMNS)
    row += 1
    for caution in result.cautions:
        sheet.long_text(row, (_NAME, _REMARK), shown(caution))
        row += 1
    return row + 1


def _table_head(sheet: Sheet, row: int, texts: Sequence[str]) -> None:
    for column, text in enumerate(texts):
        sheet.text(row, column, text, "head" if column in (_NAME, _REMARK) else "head right")


def _groups(sheet: Sheet, result: Result, plan: Plan, key: str, row: int) -> int:
    """One table of sums, heaviest first, each a live sum over the schedule's rows."""
    unit, units = sheet.book.mass_unit, sheet.book.units
    groups = result.totals.groups.get(key, [])
    names = Names(key, [g.name for g in groups])
    ordered = sorted(groups, key=lambda g: (-g.mass_kg.heavy, -g.not_weighed))
    listed_groups, rest = ordered[:MOST_GROUPS], ordered[MOST_GROUPS:]
    sheet.heading(row, f"By {key}", _COLUMNS)
    row += 1
    _table_head(sheet, row, (key.capitalize(), "Pieces", f"Light ({unit})", f"Nominal ({unit})", f"Heavy ({unit})", "Rows not weighed", ""))
    row += 1
    first = row
    for group in listed_groups:
        sheet.text(row, _NAME, group.name, "cell wrap")
        cell = f"$A{row + 1}"
        masses = [rounding.in_mass_unit(getattr(group.mass_kg, word), units) for word in WORDS]
        for column, what, value, style in (
            (_PIECES, "pieces", float(group.quantity), "whole"), (_LIGHT, "total_light_kg", masses[0], "mass"),
            (_NOMINAL, "total_nominal_kg", masses[1], "mass"), (_HEAVY, "total_heavy_kg", masses[2], "mass heavy"),
            (_LACKS, "not weighed", float(group.not_weighed), "whole"),
        ):
            formula = plan.one_of(names, group.name, cell, what)
            if formula is None:
                sheet.number(row, column, value, style)
            else:
                sheet.formula(row, column, formula, value, style)
        sheet.text(row, _REMARK, "INCOMPLETE" if group.not_weighed else None, "cell")
        row += 1
    if rest:
        row = _rest(sheet, rest, plan, first, row)
    return row + 1


def _rest(sheet: Sheet, rest: Sequence[GroupTotal], plan: Plan, first: int, row: int) -> int:
    """What the listed groups leave over, in one line."""
    units = sheet.book.units
    sheet.text(row, _NAME, f"{counted(len(rest), 'other')}, each lighter; all in the JSON", "cell italic")
    sheet.number(row, _PIECES, sum(g.quantity for g in rest), "whole")
    for column, word, letter in ((_LIGHT, "light", "C"), (_NOMINAL, "nominal", "D"), (_HEAVY, "heavy", "E")):
        value = sum(rounding.in_mass_unit(getattr(g.mass_kg, word), units) for g in rest)
        sheet.formula(row, column, f"={plan.total(f'total_{word}_kg')}-SUM({letter}{first + 1}:{letter}{row})", value, "mass")
    sheet.number(row, _LACKS, sum(g.not_weighed for g in rest), "whole")
    sheet.text(row, _REMARK, None, "cell")
    return row + 1

