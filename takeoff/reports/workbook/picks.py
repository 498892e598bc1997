"""The sheet that builds each hook load up, line by line, from the heavy mass of the rows. Rank 9."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff.reports import picksheet, rounding
from takeoff.reports.wording import counted, listed, shown
from takeoff.reports.workbook.schedule import Names, Plan
from takeoff.reports.workbook.sheet import PICKS, Book, Sheet, cell_text, place

if TYPE_CHECKING:
    from takeoff.lifting.factors import Factor
    from takeoff.lifting.pick import Pick
    from takeoff.pipeline import Result

_COLUMNS = 6
_ITEM, _FACTOR, _MASS, _HOW, _SOURCE, _EVIDENCE = range(_COLUMNS)


@dataclass(frozen=True, slots=True)
class PickCells:
    """Where the figures of one pick stand, as references."""

    name: str
    heavy: str
    hook_load: str
    force: str


#: a formula holds no longer text
_LONGEST_LITERAL = 250


def write(book: Book, result: Result, plan: Plan, drawn: Mapping[int, str] | None = None) -> list[PickCells]:
    """Write the sheet; returns where each pick's figures stand, in the order of `result.picks`.

    `drawn` says by a pick's number where its drawings are, such as ``'Drawings'!A8``.
    """
    sheet = book.sheets[PICKS]
    sheet.widths([40, 9, 14, 52, 44, 16])
    sheet.height(0, 24)
    sheet.text(0, 0, f"Picks: {book.title}", "title")
    sheet.text(1, 0, book.subtitle or None, "subtitle")
    sheet.long_text(
        2, (0, _COLUMNS - 1), "Each pick is taken at its heavy mass. Plan on the lines marked “rounded up”. A verdict is given "
        "only where lifting points or a crane are named; else it stays unknown.", "quiet wrap",
    )
    row = 4
    if not result.picks:
        sheet.text(row, 0, "No picks: the list names no assembly.", "text")
    cells, names = [], _names(result, plan)
    starts = []
    for number, pick in enumerate(result.picks):
        starts.append(row)
        row, found = _pick(sheet, names, pick, plan, row, (drawn or {}).get(number))
        cells.append(found)
    sheet.paginate(_COLUMNS, starts, row)
    return cells


def _pick(sheet: Sheet, names: Names, pick: Pick, plan: Plan, row: int, drawn: str | None) -> tuple[int, PickCells]:
    units, unit = sheet.book.units, sheet.book.mass_unit

    def kg(value: float) -> float:
        return rounding.in_mass_unit(value, units)

    sheet.heading(row, f"{shown(pick.name)}: {counted(pick.pieces, 'piece')}", _COLUMNS)
    if drawn is not None:
        sheet.link(row, _SOURCE, drawn, "Plan and elevation, drawn to scale", "block link")
    row += 1
    if pick.not_weighed:
        sheet.text(
            row, 0, f"INCOMPLETE: {counted(pick.not_weighed, 'row')} of this pick could not be weighed; every figure is of the rest only.",
            "bold",
        )
        row += 1
    for column, text in enumerate(("Line", "Factor", f"Mass ({unit})", "How it follows", "Source", "Evidence")):
        sheet.text(row, column, text, "head right" if column in (_FACTOR, _MASS) else "head")
    row += 1
    from_rows = "sum of the rows of this pick in the weight schedule"
    for word in ("light", "nominal"):
        _line(sheet, row, f"{word} mass of the members", from_rows)
        _mass(sheet, row, _sum_of_rows(names, pick, plan, word), kg(getattr(pick.mass_kg, word)))
        row += 1

    if pick.build_up[0].kg != pick.mass_kg.heavy:
        # A weighing took the members' place: their own heavy mass still stands for the summary.
        _line(sheet, row, "heavy mass of the members", from_rows)
        _mass(sheet, row, _sum_of_rows(names, pick, plan, "heavy"), kg(pick.mass_kg.heavy))
        row += 1
        from_rows = "weighing of the whole pick, as given in the job file"
    first, heavy_row, static_row = row, row if pick.build_up[0].kg == pick.mass_kg.heavy else row - 1, None
    running: list[float] = []
    for number, line in enumerate(pick.build_up):
        factor, formula, how = None, None, "as set in the job file"
        value = kg(line.kg)
        if number == 0:
            formula, how = _sum_of_rows(names, pick, plan, "heavy") if first == heavy_row else None, from_rows
        elif number == 1:
            factor, how = pick.contingency, f"heavy mass × (factor − 1): {pick.contingency.why}"
            formula = f"=C{first + 1}*(B{row + 1}-1)"
        elif static_row is not None:
            factor, how = pick.dynamic, f"hook load at rest × (factor − 1): {pick.dynamic.why}"
            formula = f"=C{static_row + 1}*(B{row + 1}-1)"
        if factor is not None and not _agrees(factor, line.kg, running):
            # The line follows from something else than this sheet knows: its figure stands as it is.
            factor, formula, how = None, None, "as computed"
        _line(sheet, row, shown(line.item), how, factor=factor)
        _mass(sheet, row, formula, value)
        running.append(line.kg)
        row += 1
        if static_row is None and number >= 1 and _close(math.fsum(running), pick.static_hook_load_kg) and not _more_gear(pick, number):
            _line(sheet, row, "hook load at rest (static)", "sum of the lines above", style="total")
            sheet.formula(row, _MASS, f"=SUM(C{first + 1}:C{row})", kg(pick.static_hook_load_kg), "total mass")
            static_row = row
            row += 1
    hook_row = row
    start = first if static_row is None else static_row
    _line(sheet, row, "hook load", "sum of the lines above" if static_row is None else "hook load at rest + dynamic line", style="total")
    sheet.formula(row, _MASS, f"=SUM(C{start + 1}:C{row})", kg(pick.hook_load_kg), "total mass")
    row += 1
    printed = kg(pick.hook_load_kg)
    decimals = rounding.decimals_for(printed)
    sheet.height(row, 22)
    sheet.text(row, _ITEM, f"HOOK LOAD, rounded up ({unit})", "cell bold")
    sheet.text(row, _FACTOR, None, "cell")
    sheet.formula(row, _MASS, round_up(f"C{hook_row + 1}", decimals), float(rounding.rounded(printed, decimals, "up")), figure(decimals))
    sheet.texts(row, _HOW, ("the mass the hook feels: plan on this figure", None, None), "cell")
    row += 1
    per_kg, force_unit = (9.80665 / 1000.0, "kN") if units == "si" else (1 / 1000.0, "kip")
    force = printed * per_kg
    sheet.text(row, _ITEM, f"hook load as a force, rounded up ({force_unit})", "cell")
    sheet.text(row, _FACTOR, None, "cell")
    sheet.formula(row, _MASS, round_up(f"C{hook_row + 1}*{per_kg!r}", 1), float(rounding.rounded(force, 1, "up")), "force")
    how = "× standard gravity 9.80665 m/s² / 1000" if units == "si" else "1 kip is 1,000 pounds-force"
    sheet.texts(row, _HOW, (how, None, None), "cell")
    row += 1
    for label, text in (
        *picksheet.facts(pick, units),
        ("Verdict", picksheet.verdict(pick)),
        ("Not counted", listed(shown(w) for w in pick.not_counted)),
        *((f.level.capitalize(), shown(f.message) + (f"; right would be: {shown(f.right)}" if f.right else "")) for f in pick.findings),
    ):
        sheet.text(row, _ITEM, label, "quiet")
        sheet.long_text(row, (_FACTOR, _EVIDENCE), text)
        row += 1
    cells = PickCells(pick.name, place(PICKS, heavy_row, _MASS), place(PICKS, hook_row, _MASS), place(PICKS, hook_row + 2, _MASS))
    return row + 1, cells


def _line(sheet: Sheet, row: int, item: str, how: str, *, factor: Factor | None = None, style: str = "cell") -> None:
    """The texts of one line of the build-up; its mass is written after."""
    wrap = f"{style} wrap"
    sheet.text(row, _ITEM, item, wrap)
    if factor is None:
        sheet.text(row, _FACTOR, None, style)
    else:
        sheet.number(row, _FACTOR, factor.value, "factor")
    sheet.text(row, _MASS, None, style)
    sheet.text(row, _HOW, how, wrap)
    source = factor.source if factor else None
    sheet.text(row, _SOURCE, ", ".join(p for p in (source.title, source.clause) if p) if source else None, wrap)
    sheet.text(row, _EVIDENCE, source.evidence if source else None, style)


def _mass(sheet: Sheet, row: int, formula: str | None, value: float) -> None:
    if formula is None:
        sheet.number(row, _MASS, value, "mass")
    else:
        sheet.formula(row, _MASS, formula, value, "mass")


def _names(result: Result, plan: Plan) -> Names:
    """The column that picks are made from, with its names."""
    if any(column.key == "pick" for column in plan.columns):
        return Names("pick", map(str, result.members["pick"].dropna().unique()))
    return Names("assembly", (g.name for g in result.totals.groups.get("assembly", [])))


def _sum_of_rows(names: Names, pick: Pick, plan: Plan, word: str) -> str | None:
    """A live sum over the pick's rows; None where no formula can tell its name from another."""
    # The name stands in the formula itself: the block's heading holds more than the name.
    if pick.listed is None:
        return None
    if len(pick.name) > _LONGEST_LITERAL:
        return None
    literal = '"' + cell_text(pick.name).replace('"', '""') + '"'
    return plan.one_of(names, pick.name, literal, f"total_{word}_kg")


def _agrees(factor: Factor, kg: float, before: Sequence[float]) -> bool:
    return _close(math.fsum(before) * (factor.value - 1), kg)


def _more_gear(pick: Pick, number: int) -> bool:
    """Whether lines of no mass follow that still belong to the load at rest."""
    after = pick.build_up[number + 1:]
    return len(after) > 1


def _close(one: float, other: float) -> bool:
    return math.isclose(one, other, rel_tol=1e-9, abs_tol=1e-9)


def round_up(expression: str, decimals: int) -> str:
    """A formula that rounds up, blind to the noise in the last digits of a sum."""
    return f"=ROUNDUP(ROUND({expression},{decimals + 6}),{decimals})"


def rounded_style(decimals: int) -> str:
    """The style of a figure that is rounded already, to so many decimals."""
    return f"rounded {decimals}"


def figure(decimals: int) -> str:
    """The style of a figure to plan on, with so many decimals."""
    return "figure" if decimals == 0 else f"figure {decimals}"

