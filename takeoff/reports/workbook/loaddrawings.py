"""The views of a vehicle's load in the workbook: plan and side to scale, as charts over corners beside the loading list. Rank 9.

The corners are live: they follow the places and sizes in the list. A scale is equal in both directions because the axes' spans
and the plot's pixels are chosen together.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from takeoff.reports import rounding
from takeoff.reports.wording import shown
from takeoff.reports.workbook.sheet import INK, LOADS, QUIET, Sheet, letters

if TYPE_CHECKING:
    from collections.abc import Callable

    from takeoff.transport.load import Load, Placed

#: vehicles drawn in one workbook, and pieces drawn on one: a chart holds few more series
MOST_VEHICLES, MOST_PIECES = 12, 240
#: first column of the corners, right of the printed columns: name, underside, then five of x, y and z, then the middle's three
FIRST = 13
_X, _Y, _Z, _MIDDLE = FIRST + 2, FIRST + 7, FIRST + 12, FIRST + 17
COLUMNS = 20
#: which side of the piece each corner takes, in order round: along (x), and across or up (y, z)
_ALONG, _UP = (0, 1, 1, 0, 0), (0, 0, 1, 1, 0)
_WIDEST, _HIGHEST, _LEFT, _TOP, _RIGHT, _BOTTOM = 1000, 330, 80, 34, 130, 50
_ROW_PIXELS, _LETTER = 20, 6.0


def drawn(load: Load) -> list[tuple[int, Placed]]:
    """The pieces with a place and a size, with their numbers in the loading list; none where the deck is not known."""
    if load.vehicle.deck is None:
        return []
    return [(n, p) for n, p in enumerate(load.pieces, 1) if p.x is not None and p.y is not None and p.unit.size is not None][:MOST_PIECES]


def left_out(load: Load) -> int:
    """How many placed pieces are beyond what a chart holds."""
    placed = sum(p.x is not None and p.y is not None and p.unit.size is not None for p in load.pieces)
    return placed - len(drawn(load)) if load.vehicle.deck is not None else 0


def heads(sheet: Sheet, row: int, unit: str) -> None:
    """The corners' headings, in the row of the loading list's."""
    sheet.text(row, FIRST, "Drawn", "head")
    turns = (f"{axis}{k} ({unit})" for axis in "xyz" for k in range(1, 6))
    words = [f"Underside ({unit})", *turns, *(f"Middle {axis} ({unit})" for axis in "xyz")]
    sheet.texts(row, FIRST + 1, words, "head right")


def corners(sheet: Sheet, row: int, number: int, p: Placed, mm: Callable[[float], float], style: str) -> None:
    """The corners of a piece, in its row of the loading list."""
    assert p.x is not None
    assert p.y is not None
    length, width, height = p.unit.on_deck(p.turned)
    line = row + 1
    sheet.text(row, FIRST, f"piece {number}", "cell")
    sheet.number(row, FIRST + 1, mm(p.z), style)
    under = f"{letters(FIRST + 1)}{line}"
    for start, turn, low, low_cell, size, size_cell in (
        (_X, _ALONG, p.x, f"D{line}", length, f"G{line}"),
        (_Y, _UP, p.y, f"E{line}", width, f"H{line}"),
        (_Z, _UP, p.z, under, height, f"I{line}"),
    ):
        for k, far in enumerate(turn):
            formula = f"={low_cell}+{size_cell}" if far else f"={low_cell}"
            sheet.formula(row, start + k, formula, mm(low) + far * mm(size), style)
        axis = (start - _X) // 5
        sheet.formula(row, _MIDDLE + axis, f"={low_cell}+{size_cell}/2", mm(low) + mm(size) / 2, style)


def frame(sheet: Sheet, row: int, load: Load, mm: Callable[[float], float], style: str) -> None:
    """The outline of the deck, and of the room above it up to the load height limit."""
    assert load.vehicle.deck is not None
    sheet.text(row, FIRST, "deck, room", "cell")
    sheet.number(row, FIRST + 1, 0.0, style)
    for start, turn, size in zip((_X, _Y, _Z), (_ALONG, _UP, _UP), load.vehicle.deck, strict=True):
        for k, far in enumerate(turn):
            sheet.number(row, start + k, far * mm(size), style)


def views(sheet: Sheet, load: Load, row: int, first: int, at: int, mm: Callable[[float], float], unit: str) -> tuple[int, list[int]]:
    """Plan and side view from `row` down: pieces' corners from row `first`, the deck's in row `at`.

    Returns the row after them and the rows where each starts.
    """
    deck = load.vehicle.deck
    assert deck is not None
    pieces = drawn(load)
    reach = max(deck[0], *(_ends(p)[0] for _, p in pieces))
    limit = rounding.length_with_unit(deck[2], sheet.book.units)
    beyond = max(_ends(p)[0] for _, p in pieces) - deck[0]
    rear = f"; rear overhang {rounding.length_with_unit(round(beyond, 1), sheet.book.units)}" if beyond > 0.5 else ""
    name = shown(load.name)[:60]
    said = (
        (1, f"Plan of {name}, from above, front to the left, to scale", "deck", f"from left ({unit})"),
        (2, f"Side view of {name}, from its left, front to the left, load height limit {limit}, to scale{rear}",
         "load height limit", f"above deck ({unit})"),
    )
    starts = []
    for axis, title, bound, upright in said:
        starts.append(row)
        far = max(deck[axis], *(_ends(p)[axis] for _, p in pieces))
        base_mm = rounding.MM_PER_FT if sheet.book.units == "us" else 1.0
        step = base_mm * _step(reach / 10 / base_mm)
        spans = [math.ceil(v * 1.0001 / step) * step for v in (reach, far)]
        per = min(_WIDEST / spans[0], _HIGHEST / spans[1])
        wide, high = spans[0] * per, spans[1] * per
        full = (round(wide) + _LEFT + _RIGHT, round(high) + _TOP + _BOTTOM)
        chart = sheet.book.chart({"type": "scatter", "subtype": "straight"})
        start = (_X, _Y, _Z)[axis]
        line: dict[str, Any] = {"color": INK, "width": 1.5, "dash_type": "dash"}
        label = {"value": True, "position": "right", "font": {"color": INK, "size": 9}, "fill": {"color": "#FFFFFF"},
                 "custom": [{"delete": True}, {"delete": True}, {"value": bound}, {"delete": True}, {"delete": True}]}
        chart.add_series({"name": f"deck and {bound}", "categories": [LOADS, at, _X, at, _X + 4],
                          "values": [LOADS, at, start, at, start + 4], "line": line, "marker": {"type": "none"}, "data_labels": label})
        if axis == 2:
            chart.add_series({"name": "deck line", "categories": [LOADS, at, _X, at, _X + 1], "values": [LOADS, at, _Z, at, _Z + 1],
                              "line": {"color": INK, "width": 3}, "marker": {"type": "none"},
                              "data_labels": label | {"custom": [{"delete": True}, {"value": "deck"}]}})
        for n, p in pieces:
            here = first + n - 1
            chart.add_series({
                "name": f"piece {n}, layer {p.layer}", "categories": [LOADS, here, _X, here, _X + 4],
                "values": [LOADS, here, start, here, start + 4],
                "line": {"color": INK, "width": 1 if p.layer == 1 else 2}, "marker": {"type": "none"},
            })
        last = first + pieces[-1][0] - 1
        chart.add_series({
            "name": "numbers", "categories": [LOADS, first, _MIDDLE, last, _MIDDLE],
            "values": [LOADS, first, _MIDDLE + axis, last, _MIDDLE + axis], "line": {"none": True}, "marker": {"type": "none"},
            "data_labels": {"value": True, "position": "center", "font": {"color": INK, "size": 9, "bold": True},
                            "custom": _numbers(pieces, axis, per, axis == 2)},
        })
        font = {"color": INK, "size": 9}
        base = {"min": 0, "num_font": font, "name_font": font, "line": {"color": QUIET}, "num_format": "#,##0",
                "major_gridlines": {"visible": False}, "major_unit": mm(step)}
        across = {"max": mm(spans[0]), "name": f"from front ({unit})"}
        # Seen from above the deck's left edge lies at the top, as on the page.
        chart.set_x_axis(base | across | ({"label_position": "high"} if axis == 1 else {}))
        chart.set_y_axis(base | {"max": mm(spans[1]), "name": upright, "reverse": axis == 1})
        chart.set_legend({"none": True})
        chart.set_title({"name": title, "overlay": True, "name_font": {"size": 10, "color": INK}, "layout": {"x": 0.01, "y": 6 / full[1]}})
        chart.set_plotarea({"layout": {"x": _LEFT / full[0], "y": _TOP / full[1], "width": wide / full[0], "height": high / full[1]}})
        chart.set_chartarea({"border": {"none": True}})
        chart.set_size({"width": full[0], "height": full[1]})
        sheet.raw.insert_chart(row, 0, chart, {
            "object_position": 1, "x_offset": 2, "y_offset": 4,
            "description": f"{title}. Numbers as in the loading list; a heavier outline lies on another piece.",
        })
        for _ in range(math.ceil((full[1] + 8) / _ROW_PIXELS)):
            # A chart is held between cells, and not every program keeps to the height of rows that say none.
            sheet.height(row, _ROW_PIXELS * 0.75)
            row += 1
    return row, starts


def _ends(p: Placed) -> tuple[float, float, float]:
    length, width, height = p.unit.on_deck(p.turned)
    return (p.x or 0.0) + length, (p.y or 0.0) + width, p.z + height


def _step(about: float) -> float:
    power = 10.0 ** math.floor(math.log10(max(about, 1.0)))
    return next(power * k for k in (1, 2, 5, 10) if power * k >= about * 0.999)


def _numbers(pieces: list[tuple[int, Placed]], axis: int, per: float, layers: bool) -> list[dict[str, Any]]:
    """A label for each row of the list: pieces that hide each other share one, and none is written over another."""
    same: dict[tuple[int, ...], list[tuple[int, Placed]]] = {}
    for n, p in pieces:
        low, high = (p.x or 0.0, p.y or 0.0, p.z), _ends(p)
        same.setdefault((round(low[0]), round(low[axis]), round(high[0]), round(high[axis])), []).append((n, p))
    labels: list[dict[str, Any]] = [{"delete": True} for _ in range(pieces[-1][0])]
    taken: list[tuple[float, float, float]] = []
    # The largest first: what is left without a number is what is too small to bear one.
    for (x1, v1, x2, v2), several in sorted(same.items(), key=lambda one: -(one[0][2] - one[0][0]) * (one[0][3] - one[0][1])):
        numbers = ", ".join(str(n) for n, _ in several[:6]) + (f" and {len(several) - 6} more" if len(several) > 6 else "")
        x, v = (x1 + x2) / 2 * per, (v1 + v2) / 2 * per
        for text in (f"{numbers} (layer {several[0][1].layer})", numbers) if layers else (numbers,):
            half = _LETTER * len(text) / 2
            room = 2 * half < max((x2 - x1) * per, 22) and (v2 - v1) * per > 5
            # A blank between neighbours: two numbers must not read as one.
            if room and all(abs(x - a) > half + b + _LETTER or abs(v - c) > 12 for a, b, c in taken):
                labels[several[0][0] - 1] = {"value": text}
                taken.append((x, half, v))
                break
    return labels
