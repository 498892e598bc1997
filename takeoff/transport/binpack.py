"""Fewest bins for items of one or several sizes each: bounds, quick fillings, search, and exact models. Whole numbers only.

No single model does it (measured on published sets): best fit finds few optima, a search with a fixed number of bins finds
most, sets whose bins must be full are solved by exact cover over the full patterns, and the rest by an arc-flow model or by
branch and bound over patterns. Everything is counted in steps, so the same input gives the same packing; the clock is only
a safety stop, and the answer says when it stopped.
"""

from __future__ import annotations

import math
import random
import time
from collections.abc import Sequence
from dataclasses import dataclass

from takeoff.transport import exact
from takeoff.transport.lower_bounds import bins_needed

Size = tuple[int, ...]
#: moves of one search for a packing in so many bins
_MOVES = 60_000
_ROUNDS = 4


@dataclass(frozen=True, slots=True)
class Packing:
    """Bins as tuples of item numbers, the bound, whether bins and bound meet, and whether the clock stopped the search."""

    bins: tuple[tuple[int, ...], ...]
    bound: int
    proven: bool
    stopped_by_clock: bool = False


class Clock:
    """The safety stop: `over()` once the seconds are up, and it remembers that it was."""

    def __init__(self, seconds: float) -> None:
        self.end = time.monotonic() + seconds
        self.rang = False

    def over(self) -> bool:
        if time.monotonic() > self.end:
            self.rang = True
        return self.rang

    def left(self) -> float:
        return max(0.0, self.end - time.monotonic())


def pack(sizes: Sequence[Size], capacity: Size, *, seconds: float = 10.0, effort: float = 1.0) -> Packing:
    """The fewest bins found for items that each fit an empty bin, and the proven bound.

    Raises ValueError on an item that fits no empty bin, or on negative sizes.
    """
    if any(s < 0 or s > c for item in sizes for s, c in zip(item, capacity, strict=True)):
        raise ValueError("an item is larger than a bin, or negative")
    if not sizes:
        return Packing((), 0, True)
    sizes, capacity = _smallest_terms([tuple(s) for s in sizes], tuple(capacity))
    clock = Clock(seconds)
    bound = bins_needed(sizes, capacity)
    best = _first(sizes, capacity)
    target = bound
    while target < len(best):
        found = search(sizes, capacity, target, clock, moves=int(_MOVES * effort)) if len(sizes) <= 400 else None
        if found is None:
            outcome = exact.in_bins(sizes, capacity, target, clock.left() * 0.8)
            if outcome.impossible:
                bound = target = target + 1
                continue
            found = outcome.bins
        if found is None and not clock.over():
            for round_ in range(1, _ROUNDS):
                found = search(sizes, capacity, target, clock, moves=int(10 * _MOVES * effort), seed=round_)
                if found is not None or clock.over():
                    break
        if found is not None:
            best = found
            break
        target += 1
    bins = tuple(sorted(tuple(sorted(b)) for b in best if b))
    return Packing(bins, bound, len(bins) == bound, clock.rang)


def _smallest_terms(sizes: list[Size], capacity: Size) -> tuple[list[Size], Size]:
    """Sizes divided by what they have in common: small numbers keep the exact models small. The capacity is cut down to it."""
    divisors = [math.gcd(*(item[d] for item in sizes)) or 1 for d in range(len(capacity))]
    return [tuple(s // g for s, g in zip(item, divisors, strict=True)) for item in sizes], tuple(
        c // g for c, g in zip(capacity, divisors, strict=True)
    )


def _first(sizes: Sequence[Size], capacity: Size) -> list[list[int]]:
    """The best of several best-fit fillings, largest first by sum and by largest share; ties by number."""
    found: list[list[list[int]]] = []
    for measure in (sum, max):
        weights = [measure(s / c if c else 0.0 for s, c in zip(item, capacity, strict=True)) for item in sizes]
        order = sorted(range(len(sizes)), key=lambda i: (-weights[i], i))
        for best_fit in (True, False):
            found.append(_fill(sizes, capacity, order, best_fit))
    return min(found, key=len)


def _fill(sizes: Sequence[Size], capacity: Size, order: Sequence[int], best_fit: bool) -> list[list[int]]:
    bins: list[list[int]] = []
    room: list[list[int]] = []
    for i in order:
        fitting = [b for b, free in enumerate(room) if all(s <= f for s, f in zip(sizes[i], free, strict=True))]
        if not fitting:
            bins.append([])
            room.append(list(capacity))
            fitting = [len(bins) - 1]
        chosen = (
            min(fitting, key=lambda b: (sum(f / c if c else 0 for f, c in zip(room[b], capacity, strict=True)), b))
            if best_fit
            else fitting[0]
        )
        bins[chosen].append(i)
        for d, s in enumerate(sizes[i]):
            room[chosen][d] -= s
    return bins


def search(sizes: Sequence[Size], capacity: Size, count: int, clock: Clock, *, moves: int, seed: int = 0) -> list[list[int]] | None:
    """Items into `count` bins by annealing on what is over the capacity; None where the moves or the clock run out.

    Moves shift one item or exchange two between bins. Fixed seed: the same sizes give the same packing.
    """
    random_ = random.Random(seed)
    dims = len(capacity)
    scale = [1.0 / c if c else 0.0 for c in capacity]
    n = len(sizes)
    loads = [[0] * dims for _ in range(count)]
    home = [0] * n
    order = sorted(range(n), key=lambda i: (-max(s * k for s, k in zip(sizes[i], scale, strict=True)), random_.random() if seed else i))
    for i in order:
        b = min(range(count), key=lambda b: (max((load + s) * k for load, s, k in zip(loads[b], sizes[i], scale, strict=True)), b))
        home[i] = b
        for d in range(dims):
            loads[b][d] += sizes[i][d]

    def over(load: Sequence[int]) -> float:
        total = 0.0
        for value, cap, k in zip(load, capacity, scale, strict=True):
            if value > cap:
                # Quadratic beside linear: many small excesses are easier to mend than one large one.
                excess = (value - cap) * k
                total += excess + 4 * excess * excess
        return total

    cost = [over(load) for load in loads]
    total = math.fsum(cost)
    heat = 0.02
    cooling = (1e-4 / heat) ** (1.0 / max(1, moves))
    for step in range(moves):
        if total <= 1e-12:
            bins: list[list[int]] = [[] for _ in range(count)]
            for i, b in enumerate(home):
                bins[b].append(i)
            return bins
        if step % 2048 == 0 and clock.over():
            return None
        heat *= cooling
        i = int(random_.random() * n)
        a = home[i]
        if random_.random() < 0.7:
            j = int(random_.random() * n)
            b = home[j]
            if a == b or (not cost[a] and not cost[b] and random_.random() < 0.7):
                continue
            one, two = sizes[i], sizes[j]
            load_a = [x - p + q for x, p, q in zip(loads[a], one, two, strict=True)]
            load_b = [x + p - q for x, p, q in zip(loads[b], one, two, strict=True)]
        else:
            j = -1
            b = int(random_.random() * count)
            if a == b:
                continue
            one = sizes[i]
            load_a = [x - p for x, p in zip(loads[a], one, strict=True)]
            load_b = [x + p for x, p in zip(loads[b], one, strict=True)]
        cost_a, cost_b = over(load_a), over(load_b)
        change = cost_a + cost_b - cost[a] - cost[b]
        if change <= 0 or random_.random() < math.exp(-change / heat):
            loads[a], loads[b], cost[a], cost[b] = load_a, load_b, cost_a, cost_b
            total += change
            home[i] = b
            if j >= 0:
                home[j] = a
            if step % 64 == 0 or total < 1e-9:
                total = math.fsum(cost)
    return None
