"""How many bins a set of sizes needs at the least: bounds that hold whatever packing is chosen.

Sizes and capacities are whole numbers of any unit, one for each constraint (mass, deck length). Methods: the sum bound
L1 and the bound L2 of Martello and Toth (Knapsack Problems, 1990, chapter 8; recalled), constraint by constraint; for
boxes, dual feasible functions on each side and the volume they leave (Fekete and Schepers; recalled).
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import product

#: a box: its possible (length, width) on the deck, and its height
Box = tuple[Sequence[tuple[int, int]], int]


def l1(sizes: Iterable[int], capacity: int) -> int:
    """The sum of the sizes over the capacity, rounded up."""
    return -(-sum(sizes) // capacity)


def l2(sizes: Iterable[int], capacity: int) -> int:
    """The bound L2: sizes too large to share a bin are counted, what they leave is filled with the smaller ones."""
    ordered = sorted((s for s in sizes if s > 0), reverse=True)
    if not ordered:
        return 0
    best = 0
    for k in (0, *sorted({s for s in ordered if 2 * s <= capacity})):
        alone = sum(1 for s in ordered if s > capacity - k)
        halves = [s for s in ordered if capacity - k >= s and 2 * s > capacity]
        small = sum(s for s in ordered if 2 * s <= capacity and s >= k)
        left = small - (len(halves) * capacity - sum(halves))
        best = max(best, alone + len(halves) + max(0, -(-left // capacity)))
    return best


def bins_needed(sizes: Sequence[Sequence[int]], capacity: Sequence[int]) -> int:
    """The largest L2 over the constraints; `sizes` has one row an item, one column a constraint."""
    if not sizes:
        return 0
    return max(1, *(l2([item[d] for item in sizes], capacity[d]) for d in range(len(capacity))))


def box_shares(boxes: Sequence[Box], room: tuple[int, int, int]) -> list[list[float]]:
    """For each choice of dual feasible functions, the share of one bin that each box takes up at the least.

    What stands in one bin sums to at most one; a box that may be turned counts at the smaller of its volumes, so that holds for
    every way to turn.
    """
    of_sides = [functions(side) for side in room]
    tables: list[list[dict[int, float]]] = []
    for axis in range(3):
        values = {ways[axis] for faces, _ in boxes for ways in faces} if axis < 2 else {height for _, height in boxes}
        tables.append([{value: f(value) for value in values} for f in of_sides[axis]])
    return [[min(along[a] * across[b] for a, b in faces) * up[height] for faces, height in boxes] for along, across, up in product(*tables)]


def functions(side: int) -> list[_Dual]:
    """The usual dual feasible functions of one side: plain shares, large sizes counted whole, steps."""
    return [_Dual(side, "share", 0), *(_Dual(side, "large", k) for k in range(4)), *(_Dual(side, "step", k) for k in (1, 2, 3))]


class _Dual:
    """A dual feasible function on one side: shares that fit side by side sum to at most one after it too."""

    def __init__(self, side: int, kind: str, k: int) -> None:
        self.side, self.kind, self.k = side, kind, k

    def __call__(self, value: int) -> float:
        side, k = self.side, self.k
        if self.kind == "large":
            # Above (side - e) counts whole, below e nothing.
            e = side * (k + 1) // 8
            return 1.0 if value > side - e else 0.0 if value < e else value / side
        if self.kind == "step":
            scaled = (k + 1) * value
            return value / side if scaled % side == 0 else (scaled // side) / k
        return value / side
