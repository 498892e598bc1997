"""The curve of a pick that is upended: what head and tail carry at each angle, as a table and a chart over it. Rank 9.

Loads are rounded up in the table, and the chart draws the table. What a line is, its marks and its dashes say; colour
says nothing.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from takeoff.reports import rounding
from takeoff.reports.wording import shown
from takeoff.reports.workbook.sheet import DRAWINGS, INK, QUIET, Sheet

if TYPE_CHECKING:
    from takeoff.lifting.pick import Pick

_ANGLE, _HEAD, _TAIL, _WORD, _CHART = range(5)
#: the chart, in pixels, and the height of a row in points
_WIDE, _HIGH, _ROW = 700, 330, 15.75
#: marks on the lines up to so many steps; more would run together
_MOST_MARKS = 40
_BORDER = {"color": INK}
_LINES: tuple[tuple[str, dict[str, Any]], ...] = (
    (
        "head",
        {
            "line": {"color": INK, "width": 1.75},
            "marker": {"type": "diamond", "size": 6, "border": _BORDER, "fill": {"color": INK}},
        },
    ),
    (
        "tail",
        {
            "line": {"color": INK, "width": 1.25, "dash_type": "dash"},
            "marker": {"type": "circle", "size": 6, "border": _BORDER, "fill": {"color": "#FFFFFF"}},
        },
    ),
)


def write(sheet: Sheet, pick: Pick, row: int, blocks: list[int]) -> int:
    """The table and its chart from `row` on; returns the row after them. Nothing for a pick that is not upended."""
    if not pick.upend:
        return row
    units = sheet.book.units
    unit, per = ("kN", 1.0) if units == "si" else ("kip", rounding.KN_PER_KIP)
    blocks.append(row)
    sheet.height(row, _ROW)
    name = shown(pick.name)
    sheet.long_text(
        row,
        (_ANGLE, _WORD),
        f"Upending {name} from level to upright: design mass × dynamic factor on hooks that hang plumb, rounded up.",
        "bold wrap",
    )
    row += 1
    for column, text in enumerate(("Degrees from level", f"Head ({unit})", f"Tail ({unit})", "Remark")):
        sheet.text(row, column, text, "head right" if column in (_HEAD, _TAIL) else "head")
    sheet.height(row, _ROW)
    first = row + 1
    most = [max(s.carried_kN[which] for s in pick.upend) for which in (0, 1)]
    said: set[str] = set()
    for step in pick.upend:
        row += 1
        sheet.height(row, _ROW)
        sheet.number(row, _ANGLE, float(rounding.rounded(step.angle_deg, 1, "nearest")), "rounded 1")
        words: list[str] = []
        for column, kN, greatest, word in zip((_HEAD, _TAIL), step.carried_kN, most, ("head", "tail"), strict=True):
            sheet.number(row, column, float(rounding.rounded(kN / per, 2, "up")), "rounded 2")
            if kN <= 0:
                words = [f"{word} slack"]
            elif kN >= greatest * (1 - 1e-9) and word not in said and not words:
                words = [f"{word} most"]
            said |= {word} if kN >= greatest * (1 - 1e-9) else set()
        sheet.text(row, _WORD, next(iter(words), None), "cell")
    last = row
    chart = sheet.book.chart({"type": "scatter", "subtype": "straight_with_markers"})
    for column, (word, look) in zip((_HEAD, _TAIL), _LINES, strict=True):
        marked = look if len(pick.upend) <= _MOST_MARKS else look | {"marker": {"type": "none"}}
        chart.add_series(
            {
                "name": word,
                "categories": [DRAWINGS, first, _ANGLE, last, _ANGLE],
                "values": [DRAWINGS, first, column, last, column],
                **marked,
            }
        )
    font, grid = {"color": INK, "size": 9}, {"visible": True, "line": {"color": "#D5D9D6", "width": 0.5}}
    axis: dict[str, Any] = {"name_font": font | {"bold": False}, "num_font": font, "line": {"color": QUIET}, "major_gridlines": grid}
    axis["label_position"] = "low"
    chart.set_x_axis({"name": "degrees from level", "min": 0, "max": 90, "major_unit": 15, "num_format": "0", **axis})
    chart.set_y_axis({"name": unit, "min": 0, "num_format": "#,##0.0##", **axis})
    chart.set_title({"name": f"Upending {name[:40]}: load at head and tail", "name_font": {"size": 11, "color": INK}, "overlay": False})
    chart.set_legend({"position": "right", "font": font})
    chart.set_chartarea({"border": {"none": True}})
    chart.set_size({"width": _WIDE, "height": _HIGH})
    row += 1
    while sheet.tall(first - 2, row) < (_HIGH + 16) * 0.75:
        sheet.height(row, _ROW)
        row += 1
    sheet.raw.insert_chart(
        first - 2,
        _CHART,
        chart,
        {
            "object_position": 1,
            "x_offset": 10,
            "y_offset": 6,
            "description": f"Upending {name[:60]}: load at head and tail against the angle",
        },
    )
    return row
