"""The sheet of charts: mass by material and by assembly between bounds, cranes and axles against their limits. Rank 9.

The figures behind each chart stand under it, live from the summary and the other sheets. A limit is a stroke with its
name, and each bar has its word beside it in the table: colour alone says nothing.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from takeoff.reports import rounding
from takeoff.reports.wording import shown
from takeoff.reports.workbook.schedule import WORDS
from takeoff.reports.workbook.sheet import CHARTS, INK, QUIET, SUMMARY, Book, Sheet, place

if TYPE_CHECKING:
    from takeoff.pipeline import Result

_COLUMNS = 7
_NAME, _FIRST = 0, 1
#: bars of one chart
MOST_BARS = 16
#: rows of the sheet a chart covers, and the height of such a row in pixels
_ROW_PIXELS = 20
_CRANE_HEADS = (
    "Pick and crane", "At rest (% of capacity)", "Moving (% of capacity)", "Planning limit, at rest (%)", "Rating (%)", "Verdict",
)
_AXLE_HEADS = ("Vehicle and axle", "Loaded (% of limit)", "Worst while unloading (% of limit)", "Limit (%)", "Word")
_FULL, _PALE, _OPEN = "#4F6B6A", "#B9C9C5", "#FFFFFF"


@dataclass(frozen=True, slots=True)
class GroupRows:
    """Where a table of sums stands on the summary: its first row, how many lines, and the column of light (then nominal, heavy)."""

    first: int
    count: int
    light: int


def write(book: Book, result: Result, groups: dict[str, GroupRows]) -> None:
    """Write the sheet; `groups` is what the summary's writing gave."""
    sheet = book.sheets[CHARTS]
    sheet.widths([38, *[15.0] * (_COLUMNS - 1)])
    sheet.height(0, 24)
    sheet.text(0, 0, f"{CHARTS}: {book.title}", "title")
    sheet.text(1, 0, book.subtitle or None, "subtitle")
    row, blocks = 3, []
    for key in ("material", "assembly"):
        if key in groups and groups[key].count:
            blocks.append(row)
            row = _masses(sheet, result, key, groups[key], row)
    checks = [(shown(p.name), c) for p in result.picks for c in p.cranes if c.utilisation is not None]
    if checks:
        blocks.append(row)
        lines: list[tuple[str, float, float, float, str]] = [
            (f"{name}: {shown(c.name)}", 100 * (c.utilisation_static or 0.0), 100 * (c.utilisation or 0.0), 100 * c.limit.value, c.verdict)
            for name, c in checks[:MOST_BARS]
        ]
        row = _limits(sheet, "Crane utilisation, with the planning limit and the rating", _CRANE_HEADS, lines, row, rating=True)
    plan = result.loads
    axles = [(load, a) for load in (plan.loads if plan else ()) for a in load.axles if a.limit_kg]
    if axles:
        blocks.append(row)
        lines = [
            (
                f"{shown(load.name)}: {shown(a.name)}",
                100 * a.kg / a.limit_kg,
                100 * max(a.kg, a.worst_kg) / a.limit_kg,
                100.0,
                "OVER" if max(a.kg, a.worst_kg) > a.limit_kg * (1 + 1e-9) else "within",
            )
            for load, a in axles[:MOST_BARS]
            if a.limit_kg
        ]
        row = _limits(sheet, "Axle loads, with their limits", _AXLE_HEADS, lines, row, rating=False)
    sheet.paginate(_COLUMNS, blocks, row)


def _chart_rows(bars: int) -> int:
    return max(9, 2 * bars + 5)


def _heads(sheet: Sheet, row: int, texts: Sequence[str]) -> None:
    for column, text in enumerate(texts):
        sheet.text(row, column, text, "head" if column == _NAME or text in ("Verdict", "Word") else "head right")


def _masses(sheet: Sheet, result: Result, key: str, at: GroupRows, row: int) -> int:
    """Bars between bounds: full to light, pale to nominal, open to heavy."""
    unit, units = sheet.book.mass_unit, sheet.book.units
    count = min(at.count, MOST_BARS)
    rows = _chart_rows(count)
    title = f"Mass by {key} ({unit})" + (f", the {count} heaviest" if count < len(result.totals.groups[key]) else "")
    sheet.heading(row, title, _COLUMNS)
    first = row + 1 + rows + 1  # the first line of figures, below chart and headings
    chart = sheet.book.chart({"type": "bar", "subtype": "stacked"})
    names = [CHARTS, first, _NAME, first + count - 1, _NAME]
    for offset, (word, colour) in enumerate((("light", _FULL), ("light to nominal", _PALE), ("nominal to heavy", _OPEN)), 4):
        chart.add_series(
            {
                "name": word,
                "categories": names,
                "values": [CHARTS, first, offset, first + count - 1, offset],
                "gap": 45,
                "fill": {"color": colour},
                "border": {"color": INK, "width": 0.75},
            }
        )
    _dress(chart, f"mass in {unit}")
    sheet.chart(row + 1, chart, rows * _ROW_PIXELS)
    _heads(
        sheet,
        first - 1,
        (key.capitalize(), f"Light ({unit})", f"Nominal ({unit})", f"Heavy ({unit})", "to light", "on to nominal", "on to heavy"),
    )
    ordered = sorted(result.totals.groups[key], key=lambda g: (-g.mass_kg.heavy, -g.not_weighed))[:count]
    for number, group in enumerate(ordered):
        line = first + number
        sheet.text(line, _NAME, group.name, "cell wrap")
        masses = [rounding.in_mass_unit(getattr(group.mass_kg, word), units) for word in WORDS]
        for offset, mass in enumerate(masses):
            sheet.formula(line, _FIRST + offset, f"={place(SUMMARY, at.first + number, at.light + offset)}", mass, "mass")
        steps = (masses[0], masses[1] - masses[0], masses[2] - masses[1])
        for offset, formula in enumerate((f"=B{line + 1}", f"=C{line + 1}-B{line + 1}", f"=D{line + 1}-C{line + 1}")):
            sheet.formula(line, _FIRST + 3 + offset, formula, steps[offset], "mass")
    return first + count + 1


def _limits(
    sheet: Sheet, title: str, heads: Sequence[str], lines: Sequence[tuple[str, float, float, float, str]], row: int, *, rating: bool
) -> int:
    """Columns against limits drawn as strokes across them."""
    sheet.heading(row, title, _COLUMNS)
    rows, count = 16, len(lines)
    first = row + 1 + rows + 1
    chart = sheet.book.chart({"type": "column"})
    names = [CHARTS, first, _NAME, first + count - 1, _NAME]
    for offset, colour in ((_FIRST, _FULL), (_FIRST + 1, _PALE)):
        chart.add_series(
            {
                "name": heads[offset],
                "categories": names,
                "values": [CHARTS, first, offset, first + count - 1, offset],
                "gap": 90,
                "fill": {"color": colour},
                "border": {"color": INK, "width": 0.75},
            }
        )
    strokes = sheet.book.chart({"type": "line"})
    for offset, width in ((_FIRST + 2, 14), (_FIRST + 3, 14))[: 2 if rating else 1]:
        strokes.add_series(
            {
                "name": heads[offset],
                "categories": names,
                "values": [CHARTS, first, offset, first + count - 1, offset],
                "line": {"color": INK, "width": 1.25, "dash_type": "dash" if offset == _FIRST + 2 else "solid"},
                "marker": {"type": "long_dash", "size": width, "border": {"color": INK}, "fill": {"color": INK}},
            }
        )
    chart.combine(strokes)
    _dress(chart, None)
    chart.set_y_axis(
        {"name": "%", "min": 0, "num_font": {"color": INK}, "major_gridlines": {"visible": True, "line": {"color": "#D5D9D6"}}}
    )
    sheet.chart(row + 1, chart, rows * _ROW_PIXELS)
    _heads(sheet, first - 1, heads)
    for number, (name, low, high, limit, word) in enumerate(lines):
        line = first + number
        sheet.text(line, _NAME, name, "cell wrap")
        figures = [low, high, limit, *([100.0] if rating else [])]
        for offset, value in enumerate(figures):
            # Shares round up, limits down, to a tenth of a percent.
            way: rounding.Way = "up" if offset < 2 else "down"
            sheet.number(line, _FIRST + offset, float(rounding.rounded(value, 1, way)), "rounded 1")
        sheet.text(line, _FIRST + len(figures), word, "cell bold")
    return first + count + 1


def _dress(chart: Any, along: str | None) -> None:
    font = {"color": INK, "size": 9}
    chart.set_legend({"position": "top", "font": font})
    chart.set_x_axis(
        {
            "name": along or "",
            "name_font": font,
            "num_font": font,
            "line": {"color": QUIET},
            "num_format": "#,##0",
            **({"min": 0} if along is not None else {}),
            "label_position": "high" if along is not None else "low",
            "major_gridlines": {"visible": along is not None, "line": {"color": "#D5D9D6"}},
        }
    )
    chart.set_y_axis({"reverse": along is not None, "num_font": font, "line": {"color": QUIET}, "major_gridlines": {"visible": False}})
    chart.set_chartarea({"border": {"none": True}})
