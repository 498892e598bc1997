"""Packing: published and planted sets to their proven optima, bounds that hold, and laws of every packing."""

from __future__ import annotations

import csv
import math
import random
import time
from itertools import product
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff.transport import exact, lower_bounds
from takeoff.transport.binpack import Packing, pack
from takeoff.transport.box_bound import boxes_need

PUBLISHED = Path(__file__).parent / "published"
Instance = tuple[str, tuple[int, ...], int, list[tuple[int, ...]]]
#: every set, and the share of its instances that must be proven within ten seconds each
SETS = {"falkenauer_u120": 1.0, "falkenauer_t60": 1.0, "schwerin1": 0.95, "vector2_planted": 0.95}
#: a dozen for every run: easy and hard ones of each set
EVERY_RUN = [
    ("falkenauer_u120", 0),
    ("falkenauer_u120", 8),
    ("falkenauer_u120", 19),
    ("falkenauer_t60", 0),
    ("falkenauer_t60", 7),
    ("falkenauer_t60", 19),
    ("schwerin1", 0),
    ("schwerin1", 41),
    ("schwerin1", 99),
    ("vector2_planted", 0),
    ("vector2_planted", 4),
    ("vector2_planted", 25),
]


def instances(name: str) -> list[Instance]:
    with (PUBLISHED / f"packing_{name}.csv").open(encoding="utf-8", newline="") as handle:
        rows = list(csv.reader(handle))[1:]
    if name.startswith("vector"):
        return [(r[0], (int(r[1]), int(r[2])), int(r[3]), [tuple(map(int, cell.split("|"))) for cell in r[5:] if cell]) for r in rows]
    return [(r[0], (int(r[1]),), int(r[2]), [(int(cell),) for cell in r[3:] if cell]) for r in rows]


def is_packing(packing: Packing, sizes: list[tuple[int, ...]], capacity: tuple[int, ...]) -> bool:
    once = sorted(i for b in packing.bins for i in b) == list(range(len(sizes)))
    return once and all(sum(sizes[i][d] for i in b) <= capacity[d] for b in packing.bins for d in range(len(capacity)))


@pytest.mark.parametrize(("name", "number"), EVERY_RUN)
def test_a_published_instance_is_proven(name: str, number: int) -> None:
    """The proven optimum, and our bound meets it."""
    _, capacity, best, sizes = instances(name)[number]
    packing = pack(sizes, capacity, seconds=30)
    assert is_packing(packing, sizes, capacity)
    assert (len(packing.bins), packing.bound, packing.proven) == (best, best, True)


@pytest.mark.long
@pytest.mark.parametrize("name", SETS)
def test_whole_sets_are_proven(name: str) -> None:
    """Every instance is packed; the share of it proven within ten seconds each is written beside the sets."""
    proven, slowest = 0, 0.0
    every = instances(name)
    for _, capacity, best, sizes in every:
        start = time.monotonic()
        packing = pack(sizes, capacity, seconds=10)
        slowest = max(slowest, time.monotonic() - start)
        assert is_packing(packing, sizes, capacity)
        assert packing.bound <= best <= len(packing.bins)
        proven += packing.proven
    assert proven >= SETS[name] * len(every)
    with (PUBLISHED / "packing_results.csv").open(encoding="utf-8", newline="") as handle:
        written = {r["set"]: r for r in csv.DictReader(handle)}
    assert proven >= int(written[name]["proven"])


def fewest(sizes: list[tuple[int, ...]], capacity: tuple[int, ...]) -> int:
    """The optimum by trying everything."""
    n = len(sizes)
    for count in range(1, n + 1):
        for where in product(range(count), repeat=n):
            if all(
                sum(s[d] for s, w in zip(sizes, where, strict=True) if w == b) <= capacity[d]
                for b in range(count)
                for d in range(len(capacity))
            ):
                return count
    return 0


@settings(deadline=None, max_examples=40)
@given(st.lists(st.tuples(st.integers(0, 20), st.integers(1, 15)), min_size=1, max_size=6))
def test_a_packing_is_one_and_the_bound_holds(sizes: list[tuple[int, int]]) -> None:
    """Nothing lost, nothing over, bound at most the optimum, and a proven packing is the optimum."""
    packing = pack(sizes, (20, 15), seconds=20)
    best = fewest(sizes, (20, 15))
    assert is_packing(packing, list(sizes), (20, 15))
    assert packing.bound <= best <= len(packing.bins)
    assert not packing.proven or len(packing.bins) == best
    assert pack(sizes, (20, 15), seconds=20) == packing


def test_exact_models_prove_what_cannot_be() -> None:
    """Three of 60 in two bins of 110 cannot be; by cover, and by arc flow where the slack leaves many patterns."""
    assert exact.in_bins([(60,)] * 3, (110,), 2, 10).impossible
    found = exact.in_bins([(5,), (4,), (3,), (3,), (3,)], (9,), 2, 10)
    assert sorted(map(len, found.bins or [])) == [2, 3]


def test_an_item_larger_than_a_bin_is_refused() -> None:
    """Nothing is packed that cannot be."""
    with pytest.raises(ValueError, match="larger than a bin"):
        pack([(11,)], (10,))


@settings(deadline=None, max_examples=60)
@given(st.lists(st.tuples(st.integers(1, 60), st.integers(1, 24), st.integers(1, 26)), min_size=1, max_size=6))
def test_boxes_that_stand_in_one_bin_need_one(boxes: list[tuple[int, int, int]]) -> None:
    """Boxes laid end to end in a room made for them never need more than one by any way of counting."""
    room = (sum(b[0] for b in boxes), 24, 26)
    assert boxes_need([([(a, b), (b, a)] if a <= 24 else [(a, b)], c) for a, b, c in boxes], room) == 1


@settings(deadline=None, max_examples=40)
@given(st.integers(0, 10**9), st.integers(1, 4))
def test_rooms_sawn_into_boxes_never_need_more_rooms(seed: int, rooms: int) -> None:
    """Boxes sawn from so many rooms, some turned, fit in so many: no bound says more."""
    shake = random.Random(seed)
    room = (136, 24, 26)
    boxes = []
    for _ in range(rooms):
        whole = [room]
        for _ in range(shake.randrange(1, 14)):
            sides = list(whole.pop(shake.randrange(len(whole))))
            k = shake.randrange(3)
            if sides[k] < 2:
                whole.append((sides[0], sides[1], sides[2]))
                continue
            at = shake.randrange(1, sides[k])
            for part in (at, sides[k] - at):
                sides[k] = part
                whole.append((sides[0], sides[1], sides[2]))
        for a, b, c in whole:
            if shake.random() < 0.9:
                boxes.append(([(a, b), (b, a)] if a <= room[1] and b != a else [(a, b)], c))
    assert boxes_need(boxes, room) <= rooms


def test_the_bound_sees_what_the_usual_families_do_not() -> None:
    """Sixteen boxes of 23 on decks of 136, as wide and high as they: five a deck, so four decks; the usual families say three."""
    boxes = [([(23, 24)], 26)] * 16
    assert math.ceil(max(map(sum, lower_bounds.box_shares(boxes, (136, 24, 26)))) - 1e-6) == 3
    assert boxes_need(boxes, (136, 24, 26)) == 4


def test_tall_and_wide_boxes_are_counted_one_a_bin() -> None:
    """Boxes over half of every side need a bin each, though their volume would fit in fewer."""
    assert boxes_need([([(60, 60)], 60)] * 4, (100, 100, 100)) == 4
