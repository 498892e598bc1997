"""Drawings as SVG text: bars between bounds, scales with a limit, picks in plan and elevation, decks, movement. Rank 9.

Made by hand, since a plotting library would cost a second and a megabyte a page. Sizes and places only: what a figure says
stands beside the drawing as text. Colours are classes of the page, so that light, dark and print share one drawing; every
distinction is a shape, a dash or a word as well. All text is escaped here.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from html import escape

from takeoff.reports.wording import shown

#: width of a drawing with text in it: a narrow screen shows it nearly at full size
WIDTH = 460.0
_LETTER = 6.6  # about the width of a letter of the drawings' 12-point text
Flat = tuple[float, float]


def _number(value: float) -> str:
    return f"{value:.1f}".rstrip("0").rstrip(".")


class Drawing:
    """Shapes gathered in order; `svg` gives the whole. `title` is what a screen reader says in its place."""

    def __init__(self, width: float, height: float, title: str, *, stretch: bool = False) -> None:
        self.width, self.height, self.title, self.stretch = width, height, title, stretch
        self.parts: list[str] = []

    def rect(self, x: float, y: float, width: float, height: float, kind: str) -> None:
        size = f'width="{_number(max(width, 0.0))}" height="{_number(max(height, 0.0))}"'
        self.parts.append(f'<rect x="{_number(x)}" y="{_number(y)}" {size} class="{kind}"/>')

    def line(self, points: Sequence[Flat], kind: str) -> None:
        joined = " ".join(f"{_number(x)},{_number(y)}" for x, y in points)
        self.parts.append(f'<polyline points="{joined}" class="{kind}"/>')

    def shape(self, points: Sequence[Flat], kind: str) -> None:
        joined = " ".join(f"{_number(x)},{_number(y)}" for x, y in points)
        self.parts.append(f'<polygon points="{joined}" class="{kind}"/>')

    def dot(self, x: float, y: float, radius: float, kind: str) -> None:
        self.parts.append(f'<circle cx="{_number(x)}" cy="{_number(y)}" r="{_number(radius)}" class="{kind}"/>')

    def text(self, x: float, y: float, text: object, anchor: str = "start", kind: str = "t") -> None:
        self.parts.append(f'<text x="{_number(x)}" y="{_number(y)}" text-anchor="{anchor}" class="{kind}">{escape(shown(text))}</text>')

    def svg(self) -> str:
        label = escape(shown(self.title), quote=True)
        stretch = ' preserveAspectRatio="none"' if self.stretch else ""
        kind = "bar" if self.stretch else "drawing"
        return (
            f'<svg class="{kind}" viewBox="0 0 {_number(self.width)} {_number(self.height)}"{stretch} role="img" '
            f'aria-label="{label}">{"".join(self.parts)}</svg>'
        )


def bounds_bar(light: float, nominal: float, heavy: float, most: float, title: str) -> str:
    """One bar: full to light, pale to nominal, open to heavy. `most` is the figure at the right edge; stretches to its box."""
    drawing = Drawing(1000, 20, title, stretch=True)
    if most > 0 and heavy > 0:
        at = [1000 * min(max(value / most, 0.0), 1.0) for value in (light, nominal, heavy)]
        drawing.rect(0, 3, at[0], 14, "full")
        drawing.rect(at[0], 3, at[1] - at[0], 14, "pale")
        drawing.rect(0, 3, at[2], 14, "open")
        drawing.line([(at[1], 0), (at[1], 20)], "tick")
    return drawing.svg()


def limit_bar(light: float, heavy: float, limit: float | None, most: float, title: str) -> str:
    """A load full to light and pale to heavy, and its limit as a tall stroke where there is one. Stretches to its box."""
    drawing = Drawing(1000, 20, title, stretch=True)
    if most > 0:
        at = [1000 * min(max(value / most, 0.0), 1.0) for value in (light, heavy)]
        drawing.rect(0, 5, at[0], 10, "full")
        drawing.rect(at[0], 5, at[1] - at[0], 10, "pale")
        drawing.rect(0, 5, at[1], 10, "open")
        if limit is not None:
            x = 1000 * min(limit / most, 1.0)
            drawing.line([(x, 0), (x, 20)], "limit")
    return drawing.svg()


def step_bar(start: float, end: float, most: float, title: str, *, total: bool = False) -> str:
    """One step of a build-up: from where the steps before it ended to where it ends. Stretches to its box."""
    drawing = Drawing(1000, 20, title, stretch=True)
    if most > 0:
        low, high = (1000 * min(max(value / most, 0.0), 1.0) for value in (min(start, end), max(start, end)))
        if low > 0:
            drawing.line([(0, 10), (low, 10)], "lead")
        drawing.rect(low, 3, max(high - low, 2), 14, "full" if total else "pale")
        drawing.rect(low, 3, max(high - low, 2), 14, "open")
    return drawing.svg()


@dataclass(frozen=True, slots=True)
class Mark:
    """A value to mark on a scale, with what stands beside it."""

    value: float
    label: str


def scale(value: float, marks: Sequence[Mark], title: str, said: str, *, light: float | None = None) -> str:
    """A scale from 0 with `value` as a pointer above it, and limits as long strokes below; `light` opens a range before it."""
    top = max([value, *(m.value for m in marks)]) * 1.08 or 1.0
    left, right, y = 8.0, WIDTH - 8.0, 40.0
    drawing = Drawing(WIDTH, 44 + 17 * max(len(marks), 1), title)

    def at(figure: float) -> float:
        return left + (right - left) * figure / top

    drawing.line([(left, y), (right, y)], "tick")
    drawing.line([(left, y - 5), (left, y + 5)], "tick")
    x = at(value)
    drawing.rect(left, y - 6, x - left, 6, "pale")
    if light is not None:
        drawing.line([(at(light), y - 9), (at(light), y)], "tick")
    drawing.shape([(x, y - 1), (x - 6, y - 13), (x + 6, y - 13)], "full")
    drawing.text(min(max(x, left + _LETTER * len(said) / 2), right - _LETTER * len(said) / 2), y - 18, said, "middle", "t strong")
    for number, mark in enumerate(sorted(marks, key=lambda m: m.value)):
        x = at(mark.value)
        base = y + 14 + 17 * number
        drawing.line([(x, y - 14), (x, base)], "limit")
        before = x - left > _LETTER * len(mark.label) + 8
        drawing.text(x - 5 if before else x + 5, base, mark.label, "end" if before else "start")
    return drawing.svg()


# --- picks -----------------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class View:
    """A pick as one sees it from above or from the side: flat places in mm, `up` of the page positive.

    pieces : outlines of its pieces, where their positions are known; box : the least and greatest place of the centre.
    slings : each from its foot to its top, where they do not all run from a point to the hook; bar : a spreader's or beam's ends.
    """

    low: Flat
    high: Flat
    centre: Flat
    box: tuple[Flat, Flat]
    pieces: tuple[tuple[Flat, ...], ...] = ()
    points: tuple[tuple[str, Flat], ...] = ()
    hook: Flat | None = None
    at_least: bool = False
    slings: tuple[tuple[Flat, Flat], ...] = ()
    bar: tuple[Flat, Flat] | None = None


def hull(points: Iterable[Flat]) -> tuple[Flat, ...]:
    """The outline around flat points, counter-clockwise (monotone chain); two points give their line."""
    unique = sorted(set(points))
    if len(unique) < 3:
        return tuple(unique)

    def half(ordered: Iterable[Flat]) -> list[Flat]:
        chain: list[Flat] = []
        for p in ordered:
            while len(chain) > 1 and _turn(chain[-2], chain[-1], p) <= 0:
                chain.pop()
            chain.append(p)
        return chain[:-1]

    return tuple(half(unique) + half(reversed(unique)))


def _turn(a: Flat, b: Flat, c: Flat) -> float:
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


def pick_view(view: View, axes: tuple[str, str], sizes: tuple[str, str], title: str) -> str:
    """A pick to scale: outline with its sizes, pieces, lifting points with their names, slings to the hook, centre of gravity.

    axes : what lies across and up the page, such as x and y; sizes : the overall sizes as text.
    """
    places = [view.low, view.high, view.centre, *view.box, *(p for _, p in view.points), *(view.bar or ())]
    places += [view.hook] if view.hook else []
    least = tuple(min(p[k] for p in places) for k in range(2))
    most = tuple(max(p[k] for p in places) for k in range(2))
    margin_x, margin_top, margin_low = 56.0, 24.0, 46.0
    room = WIDTH - 2 * margin_x
    across, up = max(most[0] - least[0], 1e-6), max(most[1] - least[1], 1e-6)
    per_mm = min(room / across, 300.0 / up)
    height = max(up * per_mm, 6.0)
    drawing = Drawing(WIDTH, height + margin_top + margin_low, title)
    start = margin_x + (room - across * per_mm) / 2

    def at(p: Flat) -> Flat:
        return start + (p[0] - least[0]) * per_mm, margin_top + height - (p[1] - least[1]) * per_mm

    (left, bottom), (right, top) = at(view.low), at(view.high)
    for piece in view.pieces:
        outline = [at(p) for p in piece]
        if len(outline) > 2:
            drawing.shape(outline, "piece")
        elif outline:
            drawing.line(outline, "pieceline")
    drawing.rect(left, top, right - left, bottom - top, "outline")
    if view.hook is not None:
        hook = at(view.hook)
        for foot, head in view.slings or [(p, view.hook) for _, p in view.points]:
            drawing.line([at(foot), at(head)], "sling")
        if view.bar is not None:
            drawing.line([at(end) for end in view.bar], "pieceline")
        drawing.dot(*hook, 6, "hook")
        drawing.text(hook[0] + 12, hook[1] - 8, "hook")
    (box_left, box_low), (box_right, box_high) = at(view.box[0]), at(view.box[1])
    drawing.rect(box_left, box_high, max(box_right - box_left, 2), max(box_low - box_high, 2), "box")
    x, y = at(view.centre)
    drawing.line([(x - 9, y), (x + 9, y)], "centre")
    drawing.line([(x, y - 9), (x, y + 9)], "centre")
    drawing.dot(x, y, 5, "centre")
    # From the side one point may hide another: their names then stand together.
    named: dict[Flat, list[str]] = {}
    for name, p in view.points:
        named.setdefault((round(at(p)[0], 0), round(at(p)[1], 0)), []).append(name[:12])
    for (x, y), names in named.items():
        drawing.shape([(x, y - 6), (x + 6, y), (x, y + 6), (x - 6, y)], "point")
        left_half = x < WIDTH / 2
        drawing.text(x - 9 if left_half else x + 9, y - 7, ", ".join(names), "end" if left_half else "start", "t strong")
    below = margin_top + height + 18
    drawing.line([(left, below), (right, below)], "tick")
    drawing.line([(left, below - 4), (left, below + 4)], "tick")
    drawing.line([(right, below - 4), (right, below + 4)], "tick")
    least_word = "at least " if view.at_least else ""
    drawing.text((left + right) / 2, below + 16, f"{axes[0]} {least_word}{sizes[0]}", "middle")
    side, said = right + 14, f"{axes[1]} {least_word}{sizes[1]}"
    drawing.line([(side, bottom), (side, top)], "tick")
    drawing.line([(side - 4, bottom), (side + 4, bottom)], "tick")
    drawing.line([(side - 4, top), (side + 4, top)], "tick")
    if side + 8 + _LETTER * len(said) < WIDTH:
        drawing.text(side + 8, (top + bottom) / 2 + 4, said)
    else:
        drawing.text(WIDTH - 2, below + 16, said, "end")
    return drawing.svg()


# --- decks -----------------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Placed:
    """A piece on a deck, mm: its corner nearest the deck's front left, as placed; `number` ties it to the table beside."""

    number: int
    x: float
    y: float
    length: float
    width: float
    layer: int


def deck(pieces: Sequence[Placed], length_mm: float, width_mm: float, title: str) -> str:
    """A deck from above, its front to the left: each piece to scale with its number, upper layers drawn over lower ones."""
    length, width = max(length_mm, 1.0), max(width_mm, 1.0)
    reach = max([length, *(p.x + p.length for p in pieces)])
    wide = max([width, *(p.y + p.width for p in pieces)])
    least = min([0.0, *(p.y for p in pieces)])
    across = 760.0
    per_mm = across / reach
    drawing = Drawing(across + 60, max((wide - least) * per_mm, 30) + 30, title)
    top = 8 - least * per_mm
    drawing.rect(44, top, length * per_mm, width * per_mm, "outline")
    drawing.text(4, top + width * per_mm / 2 + 4, "front")
    for p in sorted(pieces, key=lambda p: p.layer):
        x, y = 44 + p.x * per_mm, top + p.y * per_mm
        drawing.rect(x, y, p.length * per_mm, p.width * per_mm, "piece" if p.layer == 1 else "piece upper")
    for p in sorted(pieces, key=lambda p: p.layer):
        x, y = 44 + p.x * per_mm, top + p.y * per_mm
        label = str(p.number)
        if p.length * per_mm > _LETTER * len(label) and p.width * per_mm > 9:
            # Upper layers step aside, so that a piece on another leaves both numbers to be read.
            drawing.text(x + 4 + 18 * ((p.layer - 1) % 5), y + p.width * per_mm / 2 + 4, label)
    return drawing.svg()


@dataclass(frozen=True, slots=True)
class Standing:
    """A piece as seen from the deck's left side, mm: its end nearest the front, its place from the left, its underside above the deck."""

    number: int
    x: float
    y: float
    bottom: float
    length: float
    height: float
    layer: int


def deck_side(pieces: Sequence[Standing], length_mm: float, limit_mm: float, title: str, said: tuple[str, str]) -> str:
    """A deck from its left side, its front to the left, at the scale of `deck`: nearer pieces are drawn over farther ones.

    `said` are the words at the limit of the load's height and at what reaches beyond the deck's rear.
    """
    length = max(length_mm, 1.0)
    reach = max([length, *(p.x + p.length for p in pieces)])
    high = max([limit_mm, 1.0, *(p.bottom + p.height for p in pieces)])
    across, left, top = 760.0, 44.0, 24.0
    per_mm = across / reach
    floor = top + high * per_mm
    drawing = Drawing(across + 60, floor + 40, title)
    for p in sorted(pieces, key=lambda p: -p.y):
        y = floor - (p.bottom + p.height) * per_mm
        kind = "piece" if p.layer == 1 else "piece upper"
        drawing.rect(left + p.x * per_mm, y, p.length * per_mm, p.height * per_mm, kind)
    drawing.line([(left, floor), (left + length * per_mm, floor)], "tick")
    drawing.line([(left, floor + 3), (left + length * per_mm, floor + 3)], "tick")
    drawing.text(4, floor - 4, "front")
    drawing.text(left, floor + 18, "deck")
    line = floor - limit_mm * per_mm
    drawing.line([(left, line), (left + reach * per_mm, line)], "limit")
    drawing.text(left, line - 6, said[0])
    if reach > length + 0.5:
        rear, end = left + length * per_mm, left + reach * per_mm
        drawing.line([(rear, floor - 8), (rear, floor + 12)], "tick")
        drawing.line([(rear, floor + 8), (end, floor + 8)], "tick")
        drawing.line([(end, floor + 4), (end, floor + 12)], "tick")
        drawing.text(end, floor + 24, said[1], "end")
    same: dict[tuple[float, ...], list[Standing]] = {}
    for p in pieces:
        same.setdefault((round(p.x), round(p.bottom), round(p.length), round(p.height), p.layer), []).append(p)
    taken: list[tuple[float, float, float]] = []
    for several in same.values():
        p = several[0]
        x, y = left + p.x * per_mm + 4, floor - (p.bottom + p.height / 2) * per_mm + 4
        numbers = ", ".join(str(q.number) for q in several[:6]) + (f" and {len(several) - 6} more" if len(several) > 6 else "")
        for label in (f"{numbers} (layer {p.layer})", numbers):
            wide = _LETTER * len(label)
            if p.height * per_mm < 9 or wide + 8 > p.length * per_mm:
                continue
            # Pieces behind each other share room: a number goes where none stands yet.
            places = [x + 12 * k for k in range(int((p.length * per_mm - wide - 8) / 12) + 1)]
            free = [at for at in places if all(abs(y - b) > 11 or at > d or at + wide < a for a, d, b in taken)]
            if free:
                drawing.text(free[0], y, label)
                taken.append((free[0], free[0] + wide, y))
                break
    return drawing.svg()


# --- movement --------------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Series:
    """One line of a chart: its label and (x, y) places, x rising."""

    label: str
    points: tuple[Flat, ...]


def chart(series: Sequence[Series], axes: tuple[str, str], title: str, *, uprights: Sequence[Mark] = ()) -> str:
    """Lines over a plain grid, each with its own dash and a letter that ties it to its label below; `uprights` mark places on x."""
    series = _together(series)
    xs = [x for s in series for x, _ in s.points] + ([mark.value for mark in uprights])
    ys = [y for s in series for _, y in s.points]
    if not xs or not ys:
        return ""
    x_ticks, y_ticks = ticks(min(xs), max(xs), 5), ticks(min([0.0, *ys]), max([0.0, *ys]), 4)
    left, right, top, bottom = 48.0, WIDTH - 24, 22.0, 236.0
    drawing = Drawing(WIDTH, bottom + 54 + 17 * len(series), title)

    def at(p: Flat) -> Flat:
        return (
            left + (right - left) * (p[0] - x_ticks[0]) / (x_ticks[-1] - x_ticks[0]),
            bottom - (bottom - top) * (p[1] - y_ticks[0]) / (y_ticks[-1] - y_ticks[0]),
        )

    for tick in x_ticks:
        x, _ = at((tick, y_ticks[0]))
        drawing.line([(x, top), (x, bottom)], "grid")
        drawing.text(x, bottom + 15, _plain(tick), "middle")
    for tick in y_ticks:
        _, y = at((x_ticks[0], tick))
        drawing.line([(left, y), (right, y)], "tick" if tick == 0 else "grid")
        drawing.text(left - 5, y + 4, _plain(tick), "end")
    drawing.text(right, bottom + 32, axes[0], "end")
    drawing.text(4, 12, axes[1])
    for mark in uprights:
        x, _ = at((mark.value, 0))
        drawing.line([(x, top), (x, bottom)], "limit")
    places: list[Flat] = []
    for number, line in enumerate(series):
        kind = f"series s{number % 6}"
        drawing.line([at(p) for p in line.points], kind)
        for p in line.points:
            drawing.dot(*at(p), 2.5 if len(line.points) > 1 else 5, "full")
        x, y = at(line.points[-1])
        # Beside the end of its line, past the letters of lines that end there too.
        x, y = x + 6, y - 4
        while any(abs(x - a) < 11 and abs(y - b) < 12 for a, b in places):
            x += 11
        places.append((x, y))
        base = bottom + 54 + 17 * number
        if len(line.points) > 1:
            drawing.line([(left, base - 4), (left + 30, base - 4)], kind)
        else:
            drawing.dot(left + 15, base - 4, 5, "full")
        drawing.text(left + 36, base, f"{_letter(number)}  {line.label}"[:62])
    for number, place in enumerate(places):
        drawing.text(*place, _letter(number), "start", "t strong over")
    ends: list[float] = []  # where the last label of each line of labels ends: one that would run into it goes a line lower
    for mark in sorted(uprights, key=lambda m: m.value):
        x, _ = at((mark.value, 0))
        wide = _LETTER * len(mark.label) + 5
        near_edge = x + wide > right
        start = x - wide if near_edge else x
        level = next((n for n, end in enumerate(ends) if start >= end), len(ends))
        ends[level : level + 1] = [start + wide + 4]
        drawing.text(x - 5 if near_edge else x + 5, top + 10 + 13 * level, mark.label, "end" if near_edge else "start", "t over")
    return drawing.svg()


def _letter(number: int) -> str:
    return chr(ord("A") + number % 26)


def _together(series: Sequence[Series]) -> list[Series]:
    """Lines that lie on each other as one, under all their labels."""
    found: dict[tuple[Flat, ...], list[str]] = {}
    for line in series:
        found.setdefault(tuple((round(x, 6), round(y, 6)) for x, y in line.points), []).append(line.label)
    return [
        Series(", ".join(labels) if len(labels) < 4 else f"{labels[0]} and {len(labels) - 1} more alike", points)
        for points, labels in found.items()
    ]


def ticks(low: float, high: float, about: int) -> list[float]:
    """Round figures from at or below `low` to at or above `high`, at least two of them."""
    if not high > low:
        low, high = low - 1.0, high + 1.0
    raw = (high - low) / about
    power = 10.0 ** math.floor(math.log10(raw))
    step = next(power * k for k in (1, 2, 5, 10) if power * k >= raw * 0.999)
    first, last = math.floor(low / step + 1e-9), math.ceil(high / step - 1e-9)
    return [round(k * step, 10) for k in range(first, max(last, first + 1) + 1)]


def _plain(value: float) -> str:
    text = f"{value:g}"
    return "−" + text[1:] if text.startswith("-") else text
