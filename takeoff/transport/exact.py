"""Exact models for packing into a given number of bins: cover by full patterns, and arc flow; HiGHS solves both.

A packing in `count` bins leaves a total slack that is known beforehand, and no single bin may leave more than that. Where
the slack is small only few patterns (sets of sizes that fill a bin) qualify, and choosing among them is exact. Where it is
large, an arc-flow model (Valério de Carvalho 1999; recalled) runs over the fill of one bin, one constraint only.
"""

from __future__ import annotations

import itertools
import time
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

Size = tuple[int, ...]
_MOST_PATTERNS = 20_000
#: with one constraint the arc-flow model is quicker than a cover by more patterns than this
_FEW_PATTERNS = 4_000
_MOST_STEPS = 150_000
_MOST_ARCS = 60_000


@dataclass(frozen=True, slots=True)
class Outcome:
    """Bins (item numbers) where found; `impossible` where it is proven that so few bins do not do."""

    bins: list[list[int]] | None
    impossible: bool


def in_bins(sizes: Sequence[Size], capacity: Size, count: int, seconds: float) -> Outcome:
    """Items into `count` bins, exactly: found, proven impossible, or neither within the work allowed."""
    end = time.monotonic() + seconds
    slack = tuple(count * c - sum(item[d] for item in sizes) for d, c in enumerate(capacity))
    if any(s < 0 for s in slack):
        return Outcome(None, True)
    kinds = Counter(sizes)
    # Heaviest first: the first kind of a pattern is the one that leaves least choice.
    names = sorted(kinds, key=lambda item: (-max(s / c if c else 0.0 for s, c in zip(item, capacity, strict=True)), item))
    demand = [kinds[name] for name in names]
    patterns = _patterns(names, demand, capacity, slack)
    if patterns is not None and (len(capacity) > 1 or len(patterns) <= _FEW_PATTERNS):
        chosen = _cover(patterns, demand, count, max(0.5, (end - time.monotonic())))
        if chosen == "impossible":
            return Outcome(None, True)
        if isinstance(chosen, list):
            return Outcome(_as_bins(chosen, names, sizes), False)
    if len(capacity) == 1 and time.monotonic() < end:
        flow = _arc_flow(names, demand, capacity[0], count, max(0.5, end - time.monotonic()))
        if flow == "impossible":
            return Outcome(None, True)
        if isinstance(flow, list):
            return Outcome(_as_bins(flow, names, sizes), False)
    return Outcome(None, False)


def _patterns(names: Sequence[Size], demand: Sequence[int], capacity: Size, slack: Size) -> list[dict[int, int]] | None:
    """Every set of kinds that fits a bin and leaves no more than the whole slack; None where there are too many."""
    dims = range(len(capacity))
    n = len(names)
    least = [c - s for c, s in zip(capacity, slack, strict=True)]
    # The sums that the kinds from k on can still add, as bits, in the constraint with least room: dead branches are cut at once.
    tight = min(dims, key=lambda d: slack[d] / capacity[d] if capacity[d] else 1.0)
    full = (1 << (capacity[tight] + 1)) - 1
    sums = [1] * (n + 1)
    for k in range(n - 1, -1, -1):
        bits = sums[k + 1]
        for _ in range(demand[k]):
            bits |= (bits << names[k][tight]) & full
        sums[k] = bits
    rest = [[0] * len(capacity) for _ in range(n + 1)]
    for k in range(n - 1, -1, -1):
        rest[k] = [rest[k + 1][d] + names[k][d] * demand[k] for d in dims]
    found: list[dict[int, int]] = []
    chosen: dict[int, int] = {}
    steps = 0

    def hopeless(k: int, load: Sequence[int]) -> bool:
        if any(load[d] + rest[k][d] < least[d] for d in dims):
            return True
        low, high = max(0, least[tight] - load[tight]), capacity[tight] - load[tight]
        return not (sums[k] >> low) & ((1 << (high - low + 1)) - 1)

    def grow(k: int, load: list[int]) -> bool:
        nonlocal steps
        steps += 1
        if steps > _MOST_STEPS or len(found) > _MOST_PATTERNS:
            return False
        if chosen and all(load[d] >= least[d] for d in dims):
            found.append(dict(chosen))
        for i in range(k, n):
            if hopeless(i, load):
                break
            item = names[i]
            current = load
            for times in range(1, demand[i] + 1):
                current = [current[d] + item[d] for d in dims]
                if any(current[d] > capacity[d] for d in dims):
                    break
                if hopeless(i + 1, current):
                    continue
                chosen[i] = times
                if not grow(i + 1, current):
                    return False
            chosen.pop(i, None)
        return True

    return found if grow(0, [0] * len(capacity)) else None


def _cover(patterns: Sequence[dict[int, int]], demand: Sequence[int], count: int, seconds: float) -> list[dict[int, int]] | str | None:
    """Patterns, `count` in all, that use every kind exactly as often as there are items of it."""
    if not patterns:
        return "impossible"
    columns = [[(kind, float(times)) for kind, times in pattern.items()] + [(len(demand), 1.0)] for pattern in patterns]
    uppers = [min(demand[k] // t for k, t in pattern.items()) for pattern in patterns]
    values = solve(columns, [*map(float, demand), float(count)], uppers, seconds)
    if isinstance(values, list):
        return [patterns[p] for p, times in enumerate(values) for _ in range(times)]
    return values


def _arc_flow(names: Sequence[Size], demand: Sequence[int], capacity: int, count: int, seconds: float) -> list[dict[int, int]] | str | None:
    """Paths from empty to full through the fills a bin can have; kinds in order of falling size, so paths repeat less."""
    order = sorted(range(len(names)), key=lambda k: -names[k][0])
    reachable = {0}
    arcs: dict[tuple[int, int, int], None] = {}
    for k in order:
        size = names[k][0]
        starts = set(reachable)
        for _ in range(demand[k]):
            ends = set()
            for at in starts:
                if at + size <= capacity:
                    arcs[(at, at + size, k)] = None
                    ends.add(at + size)
            starts = ends - reachable if size else set()
            reachable |= ends
            if not starts or len(arcs) > _MOST_ARCS:
                break
        if len(arcs) > _MOST_ARCS:
            return None
    nodes = sorted(reachable | {capacity})
    row = {node: number for number, node in enumerate(nodes)}
    base = len(nodes)
    arc_list = list(arcs)
    columns: list[list[tuple[int, float]]] = []
    uppers: list[int] = []
    for start, end, k in arc_list:
        columns.append([(row[start], -1.0), (row[end], 1.0), (base + k, 1.0)])
        uppers.append(min(demand[k], count))
    ends_here = [(a, b) for a, b in itertools.pairwise(nodes)]
    for start, end in ends_here:  # what is left of a bin runs empty to its end
        columns.append([(row[start], -1.0), (row[end], 1.0)])
        uppers.append(count)
    right = [0.0] * base + [float(d) for d in demand]
    right[row[0]] = -float(count)
    right[row[capacity]] = float(count)
    values = solve(columns, right, uppers, seconds)
    if not isinstance(values, list):
        return values
    flow = Counter({arc: v for arc, v in zip(arc_list, values, strict=False) if v})
    empty = Counter({arc: v for arc, v in zip(ends_here, values[len(arc_list) :], strict=True) if v})
    chosen = []
    for _ in range(count):
        at, pattern = 0, Counter[int]()
        while at < capacity:
            arc = next((a for a in flow if a[0] == at and flow[a] > 0), None)
            if arc is not None:
                flow[arc] -= 1
                pattern[arc[2]] += 1
                at = arc[1]
                continue
            step = next(e for e in empty if e[0] == at and empty[e] > 0)
            empty[step] -= 1
            at = step[1]
        if pattern:
            chosen.append(dict(pattern))
    return chosen


def _as_bins(patterns: Sequence[dict[int, int]], names: Sequence[Size], sizes: Sequence[Size]) -> list[list[int]]:
    waiting: dict[Size, list[int]] = {}
    for i in range(len(sizes) - 1, -1, -1):
        waiting.setdefault(tuple(sizes[i]), []).append(i)
    return [[waiting[names[k]].pop() for k, times in pattern.items() for _ in range(times)] for pattern in patterns]


def solve(
    columns: Sequence[Sequence[tuple[int, float]]], right: Sequence[float], uppers: Sequence[int], seconds: float
) -> list[int] | str | None:
    """Whole numbers x with 0 <= x <= upper and sum(column * x) = right; "impossible" where proven, None where not found.

    One thread, a fixed seed and a limit of nodes make it repeatable; the seconds are the safety stop.
    """
    import highspy
    import numpy as np

    # The plain solver below the package's own class, which greets on standard output as soon as it is made.
    solver: Any = highspy.Highs.__base__
    model = solver()
    for name, value in {
        "output_flag": False,
        "threads": 1,
        "random_seed": 7,
        "time_limit": float(seconds),
        "mip_max_nodes": 20_000,
        "mip_rel_gap": 0.0,
    }.items():
        model.setOptionValue(name, value)
    lp: Any = highspy.HighsLp()
    lp.num_col_, lp.num_row_ = len(columns), len(right)
    lp.col_cost_ = np.zeros(len(columns))
    lp.col_lower_ = np.zeros(len(columns))
    lp.col_upper_ = np.array(uppers, dtype=float)
    lp.row_lower_ = lp.row_upper_ = np.array(right, dtype=float)
    lp.a_matrix_.format_ = highspy.MatrixFormat.kColwise
    lp.a_matrix_.start_ = np.cumsum([0, *map(len, columns)])
    lp.a_matrix_.index_ = np.array([r for column in columns for r, _ in column], dtype=np.int32)
    lp.a_matrix_.value_ = np.array([v for column in columns for _, v in column], dtype=float)
    lp.integrality_ = [highspy.HighsVarType.kInteger] * len(columns)
    model.passModel(lp)
    model.run()
    status = model.getModelStatus()
    if status == highspy.HighsModelStatus.kInfeasible:
        return "impossible"
    solution = model.getSolution()
    if status == highspy.HighsModelStatus.kOptimal or (solution.value_valid and model.getInfo().primal_solution_status == 2):
        return [round(v) for v in solution.col_value]
    return None
