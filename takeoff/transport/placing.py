"""Boxes onto one deck: no overlap, turned by 90° where that helps, in layers, nothing on a lighter piece or on a later drop.

A piece stands on the deck, wholly on one piece, or on several whose tops are level, side by side or end to end. Every flat top
is a surface like the deck, kept as its largest free rectangles; a piece takes a corner of one. A fixed list of orders and
rules is tried, then orders shaken with a fixed seed: counted work, so the same units give the same places.
"""

from __future__ import annotations

import random
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

from takeoff.transport.load import LoadUnit, Placed

Rect = tuple[float, float, float, float]
#: lengths that differ by less are the same, mm
HAIR = 1e-6
#: tops are level that differ by no more, mm; neighbours with level tops carry together across a gap of so much
LEVEL, GAP = 1.0, 300.0
#: least part of a piece, and of each quarter of it, that must have pieces below where several carry it
COVER, QUARTER = 0.6, 0.4
#: bearers stand at this share of a piece's length from its ends
BEARER = 0.2


@dataclass(frozen=True, slots=True)
class Deck:
    """The room of one vehicle, mm: how long, how wide, how high; how far beyond the tail a piece may reach; dunnage under each
    piece; whether pieces may be put on pieces.
    """

    length: float
    width: float
    height: float
    overhang: float = 0.0
    dunnage: float = 0.0
    layers: bool = True

    def takes(self, unit: LoadUnit, turned: bool) -> bool:
        """Whether the unit fits the empty deck this way round."""
        length, width, height = unit.on_deck(turned)
        return (
            length <= self.length + self.overhang + HAIR
            and width <= self.width + HAIR
            and height + self.dunnage <= self.height + HAIR
            and length * (1 - BEARER) <= self.length + HAIR
        )


class _Surface:
    """A flat place: the deck, the top of a placed unit, or several level tops together."""

    __slots__ = ("drop", "free", "layer", "level", "mass", "on")

    def __init__(self, free: list[Rect], level: float, layer: int, mass: float, drop: int, on: tuple[int, ...]) -> None:
        self.free, self.level, self.layer, self.mass, self.drop, self.on = free, level, layer, mass, drop, on

    def take(self, x: float, y: float, length: float, width: float) -> None:
        """Cut a rectangle out of the free ones and keep the largest that remain."""
        x2, y2 = x + length, y + width
        kept: list[Rect] = []
        cut: list[Rect] = []
        for rect in self.free:
            a, b, c, d = rect
            if x >= c - HAIR or x2 <= a + HAIR or y >= d - HAIR or y2 <= b + HAIR:
                kept.append(rect)
                continue
            if x > a + HAIR:
                cut.append((a, b, x, d))
            if x2 < c - HAIR:
                cut.append((x2, b, c, d))
            if y > b + HAIR:
                cut.append((a, b, c, y))
            if y2 < d - HAIR:
                cut.append((a, y2, c, d))
        kept += [
            rect
            for k, rect in enumerate(cut)
            if not any(_within(rect, other) for other in kept)
            and not any(_within(rect, other) and (j < k or not _within(other, rect)) for j, other in enumerate(cut) if j != k)
        ]
        self.free = kept


def _within(inner: Rect, outer: Rect) -> bool:
    return outer[0] <= inner[0] + HAIR and outer[1] <= inner[1] + HAIR and outer[2] >= inner[2] - HAIR and outer[3] >= inner[3] - HAIR


def place(units: Sequence[LoadUnit], deck: Deck, tries: int) -> tuple[list[list[Placed]], int]:
    """Ways to place all units: none, or one or two; and how many attempts that took, at most `tries`. Units have sizes."""
    found: list[list[Placed]] = []
    made = 0
    for order, low_first in _orders(units):
        if made >= tries or len(found) >= 2:
            break
        made += 1
        placed = _attempt(order, deck, low_first)
        if placed is not None:
            found.append(placed)
    return found, made


def _orders(units: Sequence[LoadUnit]) -> Iterator[tuple[list[LoadUnit], bool]]:
    """Orders to try: by footprint, by length, by mass, by volume; on the lowest place, then on the fullest; then shaken."""
    sizes = {id(u): u.on_deck(False) for u in units}
    keys: tuple[Callable[[LoadUnit], tuple[object, ...]], ...] = (
        lambda u: (-u.drop, -sizes[id(u)][0] * sizes[id(u)][1], -u.mass.heavy, u.name),
        lambda u: (-sizes[id(u)][0] * sizes[id(u)][1], -u.mass.heavy, u.name),
        lambda u: (-sizes[id(u)][0], -sizes[id(u)][1], -u.mass.heavy, u.name),
        lambda u: (-u.mass.heavy, -sizes[id(u)][0], u.name),
        lambda u: (-sizes[id(u)][0] * sizes[id(u)][1] * sizes[id(u)][2], -u.mass.heavy, u.name),
    )
    for low_first in (True, False):
        for key in keys:
            yield sorted(units, key=key), low_first
    shake = random.Random(11)
    for k in range(10_000):
        weight = {id(u): sizes[id(u)][0] * sizes[id(u)][1] * (0.6 + 0.8 * shake.random()) for u in units}
        yield sorted(units, key=lambda u: (-weight[id(u)], u.name)), k % 2 == 0


def _attempt(order: Sequence[LoadUnit], deck: Deck, low_first: bool) -> list[Placed] | None:
    surfaces = [_Surface([(0.0, 0.0, deck.length + deck.overhang, deck.width)], 0.0, 1, float("inf"), 1 << 30, ())]
    placed: list[Placed] = []
    boxes: list[Rect] = []
    tops: list[float] = []
    for unit in order:
        best: tuple[tuple[float, ...], _Surface, float, float, bool] | None = None
        ways = [(turned, *unit.on_deck(turned)) for turned in (False, True)]
        if ways[0][1] == ways[0][2]:
            ways = ways[:1]
        for number, surface in enumerate(surfaces):
            bottom = surface.level + deck.dunnage
            if bottom + ways[0][3] > deck.height + HAIR or unit.each_kg > surface.mass + HAIR or unit.drop > surface.drop:
                continue
            # Each piece of a block needs its own rest, which several level tops do not promise.
            if unit.parts and len(surface.on) > 1:
                continue
            floor = not surface.on
            for a, b, c, d in surface.free:
                for turned, length, width, _ in ways:
                    if length > c - a + HAIR or width > d - b + HAIR:
                        continue
                    if floor and a + length * (1 - BEARER) > deck.length + HAIR:
                        continue
                    rest = min(c - a - length, d - b - width)
                    rank = (
                        (surface.level, a + length if floor else rest, b, number)
                        if low_first
                        else (1.0 if floor else 0.0, a + length if floor else rest, b, number)
                    )
                    if best is not None and rank >= best[0]:
                        continue
                    if len(surface.on) > 1 and not _borne((a, b, a + length, b + width), [boxes[k] for k in surface.on]):
                        continue
                    best = (rank, surface, a, b, turned)
        if best is None:
            return None
        _, surface, x, y, turned = best
        length, width, height = unit.on_deck(turned)
        box = (x, y, x + length, y + width)
        bottom = surface.level + deck.dunnage
        top = bottom + height
        on = tuple(k for k in surface.on if _overlap(box, boxes[k]) > HAIR)
        # Nothing more goes below the piece, nor where it stands.
        for other in surfaces:
            if other.level < top - HAIR:
                other.take(x, y, length, width)
        placed.append(Placed(unit, x, y, bottom, 1 + max((placed[k].layer for k in on), default=0), turned, on))
        boxes.append(box)
        tops.append(top)
        if deck.layers and unit.carries:
            surfaces.append(_Surface([box], top, surface.layer + 1, unit.each_kg, unit.drop, (len(placed) - 1,)))
            for across in (True, False):
                made = _platform(placed, boxes, tops, across)
                if made is not None:
                    surfaces.append(made)
    return placed


def _overlap(one: Rect, two: Rect) -> float:
    """The area two rectangles share, mm²."""
    return max(0.0, min(one[2], two[2]) - max(one[0], two[0])) * max(0.0, min(one[3], two[3]) - max(one[1], two[1]))


def _borne(box: Rect, below: Sequence[Rect]) -> bool:
    """Whether the pieces below that a box meets carry it: one wholly, several enough of it."""
    met = [other for other in below if _overlap(box, other) > HAIR]
    return _within(box, met[0]) if len(met) == 1 else len(met) > 1 and covered(box, met)


def covered(box: Rect, below: Sequence[Rect]) -> bool:
    """Whether a piece on several others has enough of them under it, in all and under each quarter. `below` do not overlap."""
    a, b, c, d = box
    if sum(_overlap(box, other) for other in below) < COVER * (c - a) * (d - b) - HAIR:
        return False
    x, y = (a + c) / 2, (b + d) / 2
    return all(
        sum(_overlap(quarter, other) for other in below) >= QUARTER * (c - a) * (d - b) / 4 - HAIR
        for quarter in ((a, b, x, y), (x, b, c, y), (a, y, x, d), (x, y, c, d))
    )


def _platform(placed: Sequence[Placed], boxes: Sequence[Rect], tops: Sequence[float], across: bool) -> _Surface | None:
    """The level top that the newest piece forms with its neighbours, side by side (`across`) or end to end; None for none."""
    new = len(placed) - 1
    # Side by side: along x they overlap, along y they follow each other; end to end the other way round.
    lie, follow = (0, 1) if across else (1, 0)
    chain = [new]
    low, high = boxes[new][lie], boxes[new][lie + 2]
    start, end = boxes[new][follow], boxes[new][follow + 2]
    left = [k for k in range(new) if placed[k].unit.carries and abs(tops[k] - tops[new]) <= LEVEL]
    grown = True
    while grown:
        grown = False
        for k in left:
            common = min(high, boxes[k][lie + 2]) - max(low, boxes[k][lie])
            least = 0.5 * min(high - low, boxes[k][lie + 2] - boxes[k][lie])
            if common < least or boxes[k][follow] > end + GAP or boxes[k][follow + 2] < start - GAP:
                continue
            low, high = max(low, boxes[k][lie]), min(high, boxes[k][lie + 2])
            start, end = min(start, boxes[k][follow]), max(end, boxes[k][follow + 2])
            chain.append(k)
            left.remove(k)
            grown = True
            break
    if len(chain) < 2:
        return None
    rect = (low, start, high, end) if across else (start, low, end, high)
    level = max(tops[k] for k in chain)
    surface = _Surface(
        [rect],
        level,
        1 + max(placed[k].layer for k in chain),
        min(placed[k].unit.each_kg for k in chain),
        min(placed[k].unit.drop for k in chain),
        tuple(sorted(chain)),
    )
    for k, box in enumerate(boxes):
        if tops[k] > level + HAIR:
            surface.take(box[0], box[1], box[2] - box[0], box[3] - box[1])
    return surface
