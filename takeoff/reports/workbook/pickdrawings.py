"""The sheet of picks drawn to scale: plan and elevation as charts of the workbook itself, their coordinates beside them. Rank 9.

One way through space gives both views (plan takes its x and y, elevation its x and z), so that each place stands in the table
once. Scale is kept by reckoning the plot's pixels from the axes: a step of the grid is a square. A pick that is upended has its
curve below. What a mark is, its shape and a word say; colour says nothing.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from takeoff.reports import picksheet, rounding
from takeoff.reports.wording import counted, pick_word, shown
from takeoff.reports.workbook import pickcurves
from takeoff.reports.workbook.sheet import DRAWINGS, INK, PICKS, QUIET, Book, Sheet, cell_text, place

if TYPE_CHECKING:
    from takeoff.lifting.pick import Pick
    from takeoff.pipeline import Result

#: picks that are drawn, in the order they stand, and members of one pick whose axes are
MOST_DRAWN, MOST_AXES = 20, 60
_COLUMNS = 5
_WHAT, _X, _Y, _Z, _CHART = range(_COLUMNS)
#: the plot at most and at least, and the room around it for figures and the words beside it, in pixels
_WIDEST, _HIGHEST, _NARROWEST, _LOWEST = 500, 300, 260, 110
_LEFT, _RIGHT, _TOP, _BOTTOM = 78, 200, 36, 46
#: a step of the grid at least, in pixels
_LEAST_STEP = 42
#: the height of a row, in points: not the usual one, which the file would leave unsaid
_ROW = 15.75
_LABEL = 20
_GRID = {"color": "#D5D9D6", "width": 0.5}

Vector = tuple[float, float, float]


@dataclass(frozen=True, slots=True)
class Series:
    """What the charts draw in one look: its word in the legend, its places in mm with their names (None: the pen is lifted)."""

    word: str
    places: tuple[tuple[str, Vector] | None, ...]
    look: str
    note: str


@dataclass(frozen=True, slots=True)
class Scale:
    """Both axes of one view, in the table's unit: ends on whole steps, and the pixels of a step in either direction."""

    across: tuple[float, float]
    up: tuple[float, float]
    step: float
    step_pixels: int

    @property
    def pixels(self) -> tuple[int, int]:
        """Width and height of the plot."""
        wide, high = (round((most - least) / self.step) * self.step_pixels for least, most in (self.across, self.up))
        return wide, high


_LOOKS: dict[str, dict[str, Any]] = {
    "axes": {"line": {"color": QUIET, "width": 0.75}, "marker": {"type": "none"}},
    "outline": {"line": {"color": INK, "width": 1.75}, "marker": {"type": "none"}},
    "slings": {"line": {"color": INK, "width": 1, "dash_type": "dash"}, "marker": {"type": "none"}},
    "bar": {"line": {"color": INK, "width": 3}, "marker": {"type": "none"}},
    "box": {"line": {"color": INK, "width": 1, "dash_type": "round_dot"}, "marker": {"type": "none"}},
    "points": {"line": {"none": True}, "marker": {"type": "diamond", "size": 9, "border": {"color": INK}, "fill": {"color": INK}}},
    "centre": {"line": {"none": True}, "marker": {"type": "x", "size": 10, "border": {"color": INK, "width": 1.5}}},
    "hook": {
        "line": {"none": True},
        "marker": {"type": "circle", "size": 10, "border": {"color": INK, "width": 1.5}, "fill": {"color": "#8FA3A0"}},
    },
}


#: where the name of a mark stands, in plan and in elevation: hook and centre of gravity lie over each other in plan
_BESIDE = {"points": ("above", "below"), "centre": ("below", "below"), "hook": ("above", "above")}


def drawn(result: Result) -> list[int]:
    """Which of `result.picks` are drawn: the first of those whose centre of gravity is known."""
    return _known(result)[:MOST_DRAWN]


def _known(result: Result) -> list[int]:
    return [i for i, pick in enumerate(result.picks) if pick.centre is not None]


def write(book: Book, result: Result) -> dict[int, str]:
    """Write the sheet, where the book has it; returns for each pick that is drawn (its number) where its drawings start."""
    if DRAWINGS not in book.sheets:
        return {}
    sheet = book.sheets[DRAWINGS]
    # A chart lies within one column, since programs differ in how wide they draw one.
    sheet.widths([32, 12, 12, 12, 112])
    sheet.height(0, 24)
    sheet.text(0, 0, f"{DRAWINGS} of picks: {book.title}", "title")
    sheet.text(1, 0, book.subtitle or None, "subtitle")
    sheet.long_text(
        2, (0, _COLUMNS - 1), "Each view is to scale: a square of its grid is as long across as up. Scale differs from view to view; the "
        "coordinates beside the views are the list's own, and the views follow them. For reading the plan of the lift, not for measuring: "
        "slings are drawn straight from point to hook, without shackles or crane.", "quiet wrap",
    )
    row = 3
    more = len(_known(result)) - MOST_DRAWN
    if more > 0:
        text = f"Only the first {MOST_DRAWN} picks with a known centre of gravity are drawn; {counted(more, 'more pick')} left out."
        sheet.long_text(row, (0, _COLUMNS - 1), text, "bold wrap")
        row += 1
    unknown = len(result.picks) - len(_known(result))
    if unknown:
        text = f"Not drawn, since the centre of gravity is unknown: {counted(unknown, 'pick')}. The sheet {PICKS} says why."
        sheet.long_text(row, (0, _COLUMNS - 1), text, "wrap")
        row += 1
    if result.cautions:
        sheet.long_text(row, (0, _COLUMNS - 1), " ".join(shown(c) for c in result.cautions), "wrap")
        row += 1
    row += 1
    found: dict[int, str] = {}
    blocks: list[int] = []
    pages: list[int] = []
    for number in drawn(result):
        found[number] = place(DRAWINGS, row, 0, fixed=False)
        if blocks:
            pages.append(row)
        row = _pick(sheet, result, result.picks[number], row, blocks)
    sheet.paginate(_COLUMNS, blocks, row, new_page=pages)
    return found


def _pick(sheet: Sheet, result: Result, pick: Pick, row: int, blocks: list[int]) -> int:
    """Both views of a pick and the table they draw; returns the row after it."""
    assert pick.centre is not None
    unit, per = ("mm", 1.0) if sheet.book.units == "si" else ("in", rounding.MM_PER_IN)
    blocks.append(row)
    sheet.heading(row, f"{shown(pick.name)}: {counted(pick.pieces, 'piece')}", _COLUMNS)
    row += 1
    if pick.not_weighed:
        text = (
            f"INCOMPLETE: {counted(pick.not_weighed, 'row')} of this pick could not be weighed; centre and outline are of the rest only."
        )
        sheet.long_text(row, (0, _COLUMNS - 1), text, "bold wrap")
        row += 1
    series = list(_series(result, pick))
    views = [("Plan", 1), ("Elevation along x", 2)]
    scales = [_scale([(p[1][0] / per, p[1][axis] / per) for s in series for p in s.places if p]) for _, axis in views]
    start = row
    for column, text in enumerate(("What is drawn", f"x ({unit})", f"y ({unit})", f"z ({unit})")):
        sheet.text(row, column, text, "head right" if column else "head")
    sheet.height(row, _ROW)
    row += 1
    firsts = []
    for one in series:
        sheet.height(row, _ROW)
        sheet.long_text(row, (_WHAT, _Z), f"{one.word}: {one.note}", "bold wrap")
        row += 1
        firsts.append(row)
        for at in one.places:
            # A chart is held between cells, and not every program keeps to the height of rows that say none.
            sheet.height(row, _ROW if at else 5)
            if at is not None:
                sheet.text(row, _WHAT, at[0], "cell wrap")
                for column, value in zip((_X, _Y, _Z), at[1], strict=True):
                    sheet.number(row, column, value / per, "rounded 1")
            row += 1
    tops, top = [], start
    for scale in scales:
        tops.append(top)
        needed = (scale.pixels[1] + _TOP + _BOTTOM + 10) * 0.75
        below = top
        while sheet.tall(top, below) < needed:
            if below >= row:
                sheet.height(below, _ROW)
            below += 1
        top = below
        blocks.append(top)
    row = max(row, top)
    if blocks[-1] == row:
        blocks.pop()
    for (name, axis), scale, top in zip(views, scales, tops, strict=True):
        chart = _chart(sheet.book, series, firsts, axis, scale)
        chart.set_title({
            "name": f"{name} of {shown(pick.name)[:40]}, to scale",
            "name_font": {"size": 11, "color": INK}, "overlay": True, "layout": {"x": 0.01, "y": 8 / (scale.pixels[1] + _TOP + _BOTTOM)},
        })
        _dress(chart, scale, (f"x ({unit})", f"{'xyz'[axis]} ({unit})"))
        sheet.raw.insert_chart(top, _CHART, chart, {
            "object_position": 1, "x_offset": 10, "y_offset": 6,
            "description": f"{name} of {shown(pick.name)[:60]}: outline, lifting points, slings, hook and centre of gravity",
        })
    return pickcurves.write(sheet, pick, row + (1 if pick.upend else 0), blocks) + 1


def _series(result: Result, pick: Pick) -> Iterator[Series]:
    centre = pick.centre
    assert centre is not None
    axes, left = _axes(result, pick)
    if axes:
        more = f"; {counted(left, 'more member')} not drawn" if left else ""
        yield Series("axes of members", axes, "axes", f"through the centre of each, where its direction is known{more}")
    least = ", at least" if centre.at_least else ""
    yield Series(f"outline{least}", _rectangle("outline", centre.low, centre.high), "outline", f"the box around the pick{least}")
    box = _rectangle("centre may lie", *centre.box)
    yield Series("where it may lie", box, "box", "the centre of gravity, while every mass moves within its bounds")
    points = tuple((f"point {shown(p.name)}", p.position_mm) for p in pick.points)
    slings, hook = picksheet.slings(pick), picksheet.hook_of(pick)
    if slings:
        legs: list[tuple[str, Vector] | None] = []
        for name, foot, top in slings:
            legs += [(name, foot), ("to the hook" if top == hook else "to the bar", top), None]
        yield Series("slings", tuple(legs[:-1]), "slings", "straight lines from point to hook" if not pick.spreader else "straight lines")
    if pick.spreader and pick.spreader.ends_mm and hook:
        first, second = pick.spreader.ends_mm
        yield Series(pick.spreader.kind, (("end", first), ("other end", second)), "bar", "as a line, the piece level")
    if points:
        yield Series("lifting points", points, "points", "as given in the job file")
    if hook is not None:
        over = "above piece and spreader together" if pick.spreader else "above the centre of gravity"
        yield Series("hook", (("hook", hook),), "hook", over)
    # From above the hook hides nothing: the cross is drawn over it.
    yield Series("centre of gravity", (("centre of gravity", centre.centre),), "centre", "at nominal masses")


def _rectangle(word: str, low: Sequence[float], high: Sequence[float]) -> tuple[tuple[str, Vector], ...]:
    """A way around a box that is its outline from above and from the side: y and z turn together."""
    (x1, y1, z1), (x2, y2, z2) = low, high
    corners = ((x1, y1, z1), (x2, y1, z1), (x2, y2, z2), (x1, y2, z2), (x1, y1, z1))
    return tuple((f"{word}, corner {n % 4 + 1}", c) for n, c in enumerate(corners))


def _axes(result: Result, pick: Pick) -> tuple[tuple[tuple[str, Vector] | None, ...], int]:
    """Start and end of the pick's members, a lifted pen between two, where the list itself says which rows make it; how many are left."""
    from takeoff.lifting.gravity import Place

    if pick.listed is None:
        return (), 0
    marks = result.members["mark"].tolist() if "mark" in result.members else [None] * len(result.members)
    found: list[tuple[str, Vector] | None] = []
    count = 0
    for i, name in enumerate(result.members[pick_word(result)].tolist()):
        at = result.places.get(i) if name == pick.listed else None
        if not isinstance(at, Place) or at.axis is None or not at.length_mm:
            continue
        count += 1
        if count > MOST_AXES:
            continue
        mark = shown(marks[i]) if isinstance(marks[i], str) else f"row {i + 1}"
        half = at.length_mm / 2
        if found:
            found.append(None)
        for sign, end in ((-1, "start"), (1, "end")):
            x, y, z = (c + sign * half * a for c, a in zip(at.centre, at.axis, strict=True))
            found.append((f"{mark}, {end}", (x, y, z)))
    return tuple(found), max(0, count - MOST_AXES)


def _scale(places: Sequence[tuple[float, float]]) -> Scale:
    """Axes around the places that give a step of the grid the same length across and up."""
    lows, highs = ([pick(p[k] for p in places) for k in range(2)] for pick in (min, max))
    reach = max(highs[0] - lows[0], highs[1] - lows[1], 1.0)
    power = 10.0 ** math.floor(math.log10(reach / 8))
    for step in (power * k for k in (1, 2, 5, 10, 20, 50, 100)):
        # Marks and their names need room within the plot, and the figures along it room beside each other.
        first = [math.floor(low / step - 0.2) for low in lows]
        last = [math.ceil(high / step + 0.2) for high in highs]
        pixels = int(min(_WIDEST / (last[0] - first[0]), _HIGHEST / (last[1] - first[1])))
        if pixels >= _LEAST_STEP:
            break
    for k, least in enumerate((_NARROWEST, _LOWEST)):
        while (last[k] - first[k]) * pixels < least:
            # A thin pick lies in the middle of its view.
            if last[k] - highs[k] / step <= lows[k] / step - first[k]:
                last[k] += 1
            else:
                first[k] -= 1
    return Scale((first[0] * step, last[0] * step), (first[1] * step, last[1] * step), step, pixels)


def _chart(book: Book, series: Sequence[Series], firsts: Sequence[int], axis: int, scale: Scale) -> Any:
    """The series over the table's cells; places that hide each other share one label."""
    chart = book.chart({"type": "scatter", "subtype": "straight_with_markers"})
    for one, first in zip(series, firsts, strict=True):
        last = first + len(one.places) - 1
        options: dict[str, Any] = {
            "name": one.word,
            "categories": [DRAWINGS, first, _X, last, _X],
            "values": [DRAWINGS, first, _X + axis, last, _X + axis],
            **_LOOKS[one.look],
        }
        if one.look in ("points", "centre", "hook"):
            options["data_labels"] = {
                "value": True,
                "position": _BESIDE[one.look][axis == 2],
                "fill": {"color": "#FFFFFF"},
                "font": {"color": INK, "size": 9, "bold": one.look == "points"},
                "custom": _labels(one, axis, scale),
            }
        chart.add_series(options)
    chart.show_blanks_as("gap")
    return chart


def _labels(one: Series, axis: int, scale: Scale) -> list[dict[str, Any]]:
    together: dict[tuple[float, float], list[int]] = {}
    at = [p for p in one.places if p]
    for n, (_, p) in enumerate(at):
        key = (round(p[0] / scale.step * scale.step_pixels / 6), round(p[axis] / scale.step * scale.step_pixels / 6))
        together.setdefault(key, []).append(n)
    labels: list[dict[str, Any]] = [{"delete": True} for _ in at]
    for numbers in together.values():
        text = ", ".join(at[n][0].removeprefix("point ")[:_LABEL] for n in numbers)
        # A text that starts so would be taken for a formula.
        labels[numbers[0]] = {"value": cell_text(f" {text}" if text.startswith("=") else text)[:120]}
    return labels


def _dress(chart: Any, scale: Scale, names: tuple[str, str]) -> None:
    font = {"color": INK, "size": 9}
    wide, high = scale.pixels
    width, height = wide + _LEFT + _RIGHT, high + _TOP + _BOTTOM
    for put, name, (least, most) in ((chart.set_x_axis, names[0], scale.across), (chart.set_y_axis, names[1], scale.up)):
        put({
            "name": name, "name_font": font | {"bold": False}, "num_font": font, "num_format": "#,##0.###" if scale.step < 1 else "#,##0",
            "min": least, "max": most, "major_unit": scale.step, "crossing": "min", "label_position": "low", "line": {"color": QUIET},
            "major_gridlines": {"visible": True, "line": _GRID},
        })
    chart.set_size({"width": width, "height": height})
    chart.set_plotarea({"layout": {"x": _LEFT / width, "y": _TOP / height, "width": wide / width, "height": high / height}})
    chart.set_legend({"position": "right", "font": font})
    chart.set_chartarea({"border": {"none": True}})
