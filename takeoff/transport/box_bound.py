"""How many decks boxes need at the least: the best conservative scale for the very boxes at hand, found by linear programming.

A scale gives each size along one side a value such that whatever sizes fit one after another sum to at most one; with a scale
on each side the scaled volumes of what stands in one bin sum to at most one (Fekete and Schepers 2004; recalled). The usual
families of such scales know nothing of the boxes. Here two sides are held and the third side's scale is made the best one for
them, side after side, starting from the best of the usual families. Sizes that fit together are found by an exact knapsack over
whole mm, and the scale is brought within its limit by that same knapsack, so rounding in the programme never lifts a bound.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import product
from typing import Any

from takeoff.transport.lower_bounds import Box, functions

Scale = dict[int, float]
#: how many of the usual families' best choices are bettered, and how often round the sides
_STARTS, _ROUNDS = 4, 2
#: fittings found for one scale; more distinct sizes than this are left to the usual families
_CUTS, _MOST_SIZES = 60, 40
#: steps of all knapsacks together; once they are spent the best bound so far stands
_STEPS = 1_000_000
_HAIR = 1e-6


def boxes_need(boxes: Sequence[Box], room: tuple[int, int, int]) -> int:
    """Bins that boxes need by their size alone, however they are turned; never below what the usual families say of them.

    A box is its possible (length, width) on the deck, and its height, in whole mm no larger than the room.
    """
    if not boxes:
        return 0
    number: dict[tuple[tuple[tuple[int, int], ...], int], int] = {}
    for faces, height in boxes:
        key = (tuple(faces), height)
        number[key] = number.get(key, 0) + 1
    kinds = list(number.items())
    starts = _starts(kinds, room)
    best = max(total for total, _ in starts)
    left = _Left(_STEPS)
    for _, scales in starts[:_STARTS]:
        best = max(best, _bettered(kinds, room, list(scales), left))
    return max(1, _ceil(best - _HAIR))


class _Left:
    """Steps of work that are left: counted, so that the same boxes give the same bound."""

    def __init__(self, steps: int) -> None:
        self.steps = steps


Kinds = Sequence[tuple[tuple[tuple[tuple[int, int], ...], int], int]]


def _starts(kinds: Kinds, room: tuple[int, int, int]) -> list[tuple[float, tuple[Scale, ...]]]:
    """The usual families' choices, best first."""
    scales = [[{size: f(size) for size in _sizes(kinds, axis)} for f in functions(room[axis])] for axis in range(3)]
    found = []
    for chosen in product(*scales):
        found.append((_total(kinds, chosen), chosen))
    found.sort(key=lambda pair: -pair[0])
    return found


def _sizes(kinds: Kinds, axis: int) -> list[int]:
    """The distinct sizes along one side, in any way a box may lie."""
    return sorted({way[axis] for (faces, _), _ in kinds for way in faces} if axis < 2 else {height for (_, height), _ in kinds})


def _total(kinds: Kinds, scales: Sequence[Scale]) -> float:
    along, across, up = scales
    return sum(times * up[height] * min(along[a] * across[b] for a, b in faces) for (faces, height), times in kinds)


def _bettered(kinds: Kinds, room: tuple[int, int, int], scales: list[Scale], left: _Left) -> float:
    best = _total(kinds, scales)
    for _ in range(_ROUNDS):
        before = best
        for axis in (0, 2, 1):
            made = _best_scale(kinds, room[axis], axis, scales, left)
            if made is None:
                continue
            tried = [*scales[:axis], made, *scales[axis + 1 :]]
            total = _total(kinds, tried)
            if total > best + _HAIR:
                best, scales = total, tried
        if best < before + _HAIR:
            break
    return best


def _best_scale(kinds: Kinds, side: int, axis: int, scales: Sequence[Scale], left: _Left) -> Scale | None:
    """The scale of one side that makes the scaled volumes largest while the other two are held; None where that is too much work."""
    sizes = _sizes(kinds, axis)
    if len(sizes) > _MOST_SIZES:
        return None
    place = {size: k for k, size in enumerate(sizes)}
    most = _most_of_each(kinds, axis)
    # One variable a size, and one a kind of box: the smallest of its scaled volumes over the ways it may lie.
    rows: list[list[tuple[int, float]]] = []
    limits: list[float] = []
    n = len(sizes)
    for number, ((faces, height), _) in enumerate(kinds):
        for a, b in faces:
            own = (a, b, height)[axis]
            held = 1.0
            for other, size in enumerate((a, b, height)):
                if other != axis:
                    held *= scales[other][size]
            rows.append([(n + number, 1.0), (place[own], -held)])
            limits.append(0.0)
    weights = [0.0] * n + [float(times) for _, times in kinds]
    # At the least: as many of one size as fit.
    for size in sizes:
        rows.append([(place[size], float(max(1, min(most[size], side // size if size else most[size]))))])
        limits.append(1.0)
    values = dict(scales[axis])
    for _ in range(_CUTS):
        found = _linear(weights, rows, limits)
        if found is None:
            return None
        values = {size: found[place[size]] for size in sizes}
        worth, fitting = _fullest(sizes, values, most, side, left)
        if left.steps < 0:
            return None
        if worth <= 1 + 1e-7:
            break
        rows.append([(place[size], float(times)) for size, times in fitting.items()])
        limits.append(1.0)
    worth, _ = _fullest(sizes, values, most, side, left)
    if left.steps < 0:
        return None
    # What rounding, or a programme that was cut short, leaves above one is taken off all values.
    return {size: value / max(1.0, worth * (1 + 1e-12)) for size, value in values.items()}


def _most_of_each(kinds: Kinds, axis: int) -> dict[int, int]:
    """How many boxes there are that can show a size along one side."""
    most: dict[int, int] = {}
    for (faces, height), times in kinds:
        for size in {way[axis] for way in faces} if axis < 2 else {height}:
            most[size] = most.get(size, 0) + times
    return most


def _fullest(sizes: Sequence[int], values: Scale, most: dict[int, int], side: int, left: _Left) -> tuple[float, dict[int, int]]:
    """The largest sum of values of sizes that fit one after another, and those sizes: an exact knapsack over the fills in use.

    What it gives counts only while there are steps left.
    """
    fills: dict[int, tuple[float, tuple[tuple[int, int], ...]]] = {0: (0.0, ())}
    for size in sorted(sizes, reverse=True):
        value = values[size]
        if value <= 0:
            continue
        new = dict(fills)
        if left.steps < 0:
            break
        for at, (worth, chosen) in fills.items():
            left.steps -= 1 + min(most[size], (side - at) // size if size else most[size])
            for times in range(1, min(most[size], (side - at) // size if size else most[size]) + 1):
                end, sum_ = at + times * size, worth + times * value
                if end not in new or new[end][0] < sum_:
                    new[end] = (sum_, (*chosen, (size, times)))
        # A fill that is no emptier and worth no more than another is not needed.
        fills, kept = {}, -1.0
        for at in sorted(new):
            if new[at][0] > kept:
                kept = new[at][0]
                fills[at] = new[at]
    worth, chosen = max(fills.values(), key=lambda pair: pair[0])
    return worth, dict(chosen)


def _linear(weights: Sequence[float], rows: Sequence[Sequence[tuple[int, float]]], limits: Sequence[float]) -> list[float] | None:
    """The x in [0, 1] that makes weights * x largest while every row * x stays within its limit; one thread, so it repeats."""
    import highspy
    import numpy as np

    solver: Any = highspy.Highs.__base__
    model = solver()
    for name, value in {"output_flag": False, "threads": 1, "random_seed": 7}.items():
        model.setOptionValue(name, value)
    lp: Any = highspy.HighsLp()
    lp.num_col_, lp.num_row_ = len(weights), len(rows)
    lp.col_cost_ = -np.array(weights)
    lp.col_lower_, lp.col_upper_ = np.zeros(len(weights)), np.ones(len(weights))
    lp.row_lower_, lp.row_upper_ = np.full(len(rows), -highspy.kHighsInf), np.array(limits, dtype=float)
    lp.a_matrix_.format_ = highspy.MatrixFormat.kRowwise
    lp.a_matrix_.start_ = np.cumsum([0, *map(len, rows)])
    lp.a_matrix_.index_ = np.array([c for row in rows for c, _ in row], dtype=np.int32)
    lp.a_matrix_.value_ = np.array([v for row in rows for _, v in row], dtype=float)
    model.passModel(lp)
    model.run()
    if model.getModelStatus() != highspy.HighsModelStatus.kOptimal:
        return None
    return [min(1.0, max(0.0, float(v))) for v in model.getSolution().col_value]


def _ceil(value: float) -> int:
    whole = int(value)
    return whole if whole >= value else whole + 1
