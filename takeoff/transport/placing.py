"""Boxes onto one deck: no overlap, turned by 90° where that helps, in layers, nothing on a lighter piece or on a later drop.

A piece stands on the deck or wholly on one piece of the layer below. Every flat top is a surface like the deck, kept as its
largest free rectangles; a piece takes a corner of one. A fixed list of orders and rules is tried, then orders shaken with a
fixed seed: counted work, so the same units give the same places.
"""

from __future__ import annotations

import random
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

from takeoff.transport.load import LoadUnit, Placed

Rect = tuple[float, float, float, float]
#: lengths that differ by less are the same, mm
HAIR = 1e-6
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
            length <= self.length + self.overhang + HAIR and width <= self.width + HAIR and height + self.dunnage <= self.height + HAIR
            and length * (1 - BEARER) <= self.length + HAIR
        )


class _Surface:
    """A flat place: the deck, or the top of a placed unit."""

    __slots__ = ("drop", "free", "layer", "level", "mass", "on")

    def __init__(self, free: list[Rect], level: float, layer: int, mass: float, drop: int, on: int | None) -> None:
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
            rect for k, rect in enumerate(cut)
            if not any(_within(rect, other) for other in kept)
            and not any(_within(rect, other) and (j < k or not _within(other, rect)) for j, other in enumerate(cut) if j != k)
        ]
        self.free = kept


def _within(inner: Rect, outer: Rect) -> bool:
    return outer[0] <= inner[0] + HAIR and outer[1] <= inner[1] + HAIR and outer[2] >= inner[2] - HAIR and outer[3] >= inner[3] - HAIR


def place(units: Sequence[LoadUnit], deck: Deck, tries: int) -> list[list[Placed]]:
    """Ways to place all units: none, or one or two; at most `tries` attempts are made. Units have sizes."""
    found: list[list[Placed]] = []
    for number, (order, low_first) in enumerate(_orders(units)):
        if number >= tries or len(found) >= 2:
            break
        placed = _attempt(order, deck, low_first)
        if placed is not None:
            found.append(placed)
    return found


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
        yield sorted(units, key=lambda u: (-weight[id(u)], u.name)), k % 2 == 0  # noqa: B023 - used at once


def _attempt(order: Sequence[LoadUnit], deck: Deck, low_first: bool) -> list[Placed] | None:
    surfaces = [_Surface([(0.0, 0.0, deck.length + deck.overhang, deck.width)], 0.0, 1, float("inf"), 1 << 30, None)]
    placed: list[Placed] = []
    for unit in order:
        best: tuple[tuple[float, ...], _Surface, float, float, bool] | None = None
        ways = [(turned, *unit.on_deck(turned)) for turned in (False, True)]
        if ways[0][1] == ways[0][2]:
            ways = ways[:1]
        for number, surface in enumerate(surfaces):
            bottom = surface.level + deck.dunnage
            if bottom + ways[0][3] > deck.height + HAIR or unit.mass.heavy > surface.mass + HAIR or unit.drop > surface.drop:
                continue
            for a, b, c, d in surface.free:
                for turned, length, width, _ in ways:
                    if length > c - a + HAIR or width > d - b + HAIR:
                        continue
                    if surface.on is None and a + length * (1 - BEARER) > deck.length + HAIR:
                        continue
                    rest = min(c - a - length, d - b - width)
                    rank = (
                        (surface.level, a + length if surface.on is None else rest, b, number) if low_first
                        else (0.0 if surface.on is not None else 1.0, a + length if surface.on is None else rest, b, number)
                    )
                    if best is None or rank < best[0]:
                        best = (rank, surface, a, b, turned)
        if best is None:
            return None
        _, surface, x, y, turned = best
        length, width, height = unit.on_deck(turned)
        surface.take(x, y, length, width)
        bottom = surface.level + deck.dunnage
        if deck.layers and unit.carries:
            surfaces.append(_Surface(
                [(x, y, x + length, y + width)], bottom + height, surface.layer + 1, unit.mass.heavy, unit.drop, len(placed),
            ))
        placed.append(Placed(unit, x, y, bottom, surface.layer, turned, surface.on))
    return placed
