"""Securing: tilting of pieces, stacks and rows under lashings, direct lashings anchor by anchor, each against statics done anew."""

from __future__ import annotations

import math
from itertools import pairwise
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from test_transport_loads import ARTIC, FLAT, job_of, planned, unit

from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.transport import direct, securing
from takeoff.transport.holding import lashings_of
from takeoff.transport.load import Lashing, Load, Placed
from takeoff.transport.rules import friction_of
from takeoff.transport.vehicles import vehicles_of

LASHING = {"lc_dan": 2000, "stf_dan": 500, "angle_deg": 90}
CRATE = (3000.0, 1000.0, 2400.0)


def load_of(units: list[Any], vehicle: dict[str, Any] | None = None, **transport: Any) -> Load:
    """The only load of these units on one vehicle with room above its deck."""
    (load,) = planned(units, job_of((vehicle or FLAT) | {"load_height_mm": 3000}, **({"friction": 0.45} | transport))).loads
    return load


def said(load: Load, kind: str) -> str:
    return "; ".join(f.message for f in load.findings if f.kind == kind)


def numbers(load: Load) -> dict[str, tuple[int, str]]:
    return {x.piece: (x.number, x.direction) for x in load.lashings}


# --- over the top -----------------------------------------------------------------------------------------------------


def test_a_tall_piece_alone() -> None:
    """2 t, 1 m wide, centre at 1.2 m: sideways 0.432 with the tension, 0.475 with half of LC (by hand); forward and rearward it stands."""
    load = load_of([unit("crate", 2000, CRATE)], lashing=LASHING)
    assert numbers(load) == {"crate": (2, "forward")}  # 1.25 x (0.8 - 0.45) x 19.62 / (2 x 0.45 x 5) = 1.91
    assert "1 lashing over it holds it upright" in said(load, "tilting")
    assert "sideways" in said(load, "tilting")
    assert "forward" not in said(load, "tilting")


def test_a_post_on_end_is_held_forward_too() -> None:
    """0.4 m by 0.4 m, 2.4 m high, 2 t: forward 1.25 x 19.62 x (0.8 x 1.2 - 0.2) / (0.4 x 5) = 9.3, so ten go over it."""
    load = load_of([unit("post", 2000, (400.0, 400.0, 2400.0))], lashing=LASHING)
    assert numbers(load) == {"post": (10, "forward, tilting")}
    (lashing,) = load.lashings
    (post,) = load.pieces
    assert post.x is not None
    assert all(post.x < at < post.x + 400 for at in lashing.positions_mm)


def test_a_block_ahead_spares_nothing_against_tilting_and_says_how_high_it_must_be() -> None:
    """A block holds a foot, not a head: the lashings against tilting forward stay, and the height that spares them is named."""
    load = load_of([unit("post", 2000, (400.0, 400.0, 2400.0))], lashing=LASHING, blocked_forward=True)
    assert [(x.method, x.number, x.direction) for x in load.lashings] == [("top-over", 10, "forward, tilting"), ("blocking", 1, "forward")]
    assert "a block that reaches 1200 mm up" in said(load, "tilting")


def test_a_crate_on_a_plate_tilts_over_its_own_edge() -> None:
    """The whole stack stands, the crate on it does not: the lashings are those of the crate on its own width."""
    units = [unit("plate", 4000, (5500.0, 2400.0, 100.0)), unit("crate", 2000, CRATE)]
    load = load_of(units, lashing=LASHING | {"stf_dan": 100})
    assert {p.unit.name: p.layer for p in load.pieces} == {"plate": 1, "crate": 2}
    assert "from crate up" in said(load, "tilting")


def test_three_in_a_row() -> None:
    """Three such crates touching: all lean over their own edges, 3 x 0.475 with half of LC (by hand), so two lashings for the row."""
    load = load_of([unit(f"crate {k}", 2000, (3000.0, 800.0, 1920.0)) for k in "ABC"], lashing=LASHING)
    row = [x for x in load.lashings if x.piece.startswith("row of")]
    # m g (c d - b) = 3 x 19.62 x (0.6 x 0.96 - 0.4) = 10.36 kNm; 1.1 x 10.36 / (0.8 x 10) = 1.42
    # with the tension: 3 x 19.62 x (0.5 x 0.96 - 0.4) = 4.71; 1.1 x 4.71 / (0.8 x 5) = 1.29
    assert [(x.number, x.direction) for x in row] == [(2, "sideways, tilting")]
    assert {x.piece for x in load.lashings} == {"row of " + row[0].piece[7:], *row[0].piece[7:].split(" + ")}
    assert len({x.piece for x in load.lashings}) == 4
    assert "go over the whole row" in said(load, "tilting")
    # Half of a weaker LC is as little as the tension, and goes with the larger coefficient: 1.1 x 10.36 / (0.8 x 5) = 2.85.
    load = load_of([unit(f"crate {k}", 2000, (3000.0, 800.0, 1920.0)) for k in "ABC"], lashing=LASHING | {"lc_dan": 1000})
    assert [x.number for x in load.lashings if x.piece.startswith("row of")] == [3]


def test_rows_of_unlike_height_are_not_decided() -> None:
    """A low crate outside a tall one: a lashing does not lie flat over both, so it is said and not reckoned."""
    units = [unit("tall", 2000, (3000.0, 800.0, 2400.0)), unit("low", 2100, (3000.0, 800.0, 1000.0))]
    load = load_of(units, lashing=LASHING)
    assert "not level" in said(load, "tilting-undecided")
    assert not any(x.piece.startswith("row of") for x in load.lashings)
    assert numbers(load)["tall"][0] >= 2


def by_hand(*crates: tuple[float, float, float], **lashing: float) -> tuple[list[Lashing], list[Finding]]:
    """Crates of 2 t, 3 m long and 1.92 m high, as (from the deck's front, from its left, width), on an empty deck."""
    job = job_of(FLAT, friction=0.45, lashing=LASHING | lashing)
    (vehicle,) = vehicles_of(job)
    placed = [Placed(unit(f"C{k}", 2000, (3000.0, w, 1920.0)), x, y, 0.0, 1, False) for k, (x, y, w) in enumerate(crates)]
    findings: list[Finding] = []
    return lashings_of(placed, vehicle, job, friction_of(0.45), findings), findings


def rows_in(made: list[Lashing]) -> list[int]:
    return [x.number for x in made if x.piece.startswith("row of")]


def test_up_to_150_mm_apart_pieces_are_a_row() -> None:
    """A gap of 150 mm still counts as standing together, one of 160 mm does not; nor do pieces that hardly overlap."""
    assert rows_in(by_hand((0, 0, 800), (0, 950, 800))[0]) == [2]
    assert rows_in(by_hand((0, 0, 800), (0, 960, 800))[0]) == []
    assert rows_in(by_hand((0, 0, 800), (2000, 800, 800))[0]) == []


def test_unlike_rows_tilt_to_either_side() -> None:
    """0.9 m and 0.7 m wide: the first leg draws at the row that lifts, so tilting towards the wide one the narrow one's width counts.

    Centres 0.96 m up. Moments with 0.6: 19.62 x (0.576 - 0.45) = 2.472 and 19.62 x (0.576 - 0.35) = 4.434 kNm, 6.906 in all.
    With half of LC, 4 kN: 1.1 x 6.906 / (0.9 x 4) = 2.11 and 1.1 x 6.906 / (0.7 x 4) = 2.71, so three; of 0.9 m alone it were three
    too, so the tension of 3.5 kN with LC 700 tells them apart: 1.1 x 6.906 / (0.7 x 3.5) = 3.10, four.
    """
    assert rows_in(by_hand((0, 0, 900), (0, 900, 700), lc_dan=800, stf_dan=400)[0]) == [3]
    assert rows_in(by_hand((0, 0, 900), (0, 900, 700), lc_dan=700, stf_dan=350)[0]) == [4]
    assert rows_in(by_hand((0, 0, 700), (0, 700, 900), lc_dan=700, stf_dan=350)[0]) == [4]


def test_a_block_of_pieces_that_is_no_row_is_said() -> None:
    """Two short ones beside a long one: no one lashing goes over all, so each is reckoned alone and that is said."""
    made, findings = by_hand((0, 0, 800), (0, 800, 800), (2950, 800, 800))
    assert rows_in(made) == [2]
    made, findings = by_hand((0, 0, 800), (1400, 800, 800), (2900, 0, 800))
    assert rows_in(made) == []
    assert "do not stand in one row" in "; ".join(f.message for f in findings)


def test_pieces_far_apart_are_no_row() -> None:
    """With more than 150 mm between them they do not lean on each other."""
    load = load_of([unit(f"C{k}", 2000, (5800.0, 700.0, 1600.0)) for k in range(2)], lashing=LASHING)
    ys = sorted((p.y or 0.0) for p in load.pieces)
    gap = ys[1] - ys[0] - 700
    rows = [x for x in load.lashings if x.piece.startswith("row of")]
    assert bool(rows) == (gap <= 150)


rows_of = st.lists(st.tuples(st.floats(100, 5000), st.floats(200, 1500), st.floats(0.2, 0.8)), min_size=1, max_size=5)


@settings(max_examples=80)
@given(rows_of, st.floats(20, 90), st.floats(1.0, 3.0))
def test_rows_hold_against_every_way_of_leaning(given_rows: list[tuple[float, float, float]], angle: float, tall: float) -> None:
    """Virtual work done anew: with the number given no leaning of the rows, each at least as far as the one behind it, gains work;
    with hardly fewer one of them does.
    """
    height = tall * 1000
    rows = [securing.Row(kg, part * width, 0.5 * height, width) for kg, width, part in given_rows]
    number = securing.top_over_rows(rows, height, 0.6, 5.0, angle, 1.1)
    a = math.radians(angle)

    def gained(lean: list[float], lashings: float) -> float:
        turned = sum(9.81 * r.mass_kg / 1000 * (0.6 * r.up_mm - r.across_mm) * t for r, t in zip(rows, lean, strict=True))
        first, last = lean[0], lean[-1]
        # The first corner rises by its width and moves in by the height; the last one moves out by the height.
        lashed = -5.0 * math.sin(a) * rows[0].far_mm * first + 5.0 * (1 - math.cos(a)) * height * (first - last)
        return 1.1 * turned + lashings * lashed

    steps = [[0.0] * (len(rows) - k) + [1.0] * k for k in range(1, len(rows) + 1)]
    mixed = [
        [sum(s[i] * w for s, w in zip(steps, weights, strict=True)) for i in range(len(rows))]
        for weights in ([1.0] * len(rows), list(range(len(rows))), list(range(len(rows), 0, -1)))
    ]
    assert all(later >= earlier for lean in mixed for earlier, later in pairwise(lean))
    scale = sum(r.mass_kg * r.up_mm for r in rows)
    assert all(gained(lean, number) <= 1e-9 * scale for lean in steps + mixed)
    if number > 0:
        assert max(gained(lean, number * 0.999) for lean in steps) > 0


def test_no_lashing_over_the_top_holds_what_leans_out_beyond_its_foot() -> None:
    """Where both corners lie beyond the edge the answer is not a number."""
    assert securing.top_over_rows([securing.Row(1000, 100, 2000, 50, -200)], 2000, 0.5, 5, 90, 1.1) == math.inf
    assert securing.top_over_rows([securing.Row(1000, 900, 1000, 1800)], 2000, 0.5, 5, 90, 1.1) == 0


# --- direct lashings --------------------------------------------------------------------------------------------------


def cross(a: tuple[float, ...], b: tuple[float, ...]) -> tuple[float, float, float]:
    return a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]


@pytest.mark.parametrize(("foot", "friction"), [((2000.0, 1200.0), 0.45), ((900.0, 900.0), 0.45), ((3000.0, 700.0), 0.9)])
@pytest.mark.parametrize("anchors", [(), (300.0, 1900.0, 2600.0)])
def test_four_diagonals_hold_by_vectors_done_anew(anchors: tuple[float, ...], foot: tuple[float, float], friction: float) -> None:
    """Forces and moments of the four lashings, by cross products about each edge: the force named holds every direction."""
    vehicle = ARTIC | {"anchors_mm": list(anchors)}
    load = load_of([unit("press", 6000, (*foot, 2400.0))], vehicle, friction=friction, lashing={"method": "direct", "lc_dan": 10_000})
    (lashing,) = load.lashings
    (piece,) = load.pieces
    assert (lashing.method, lashing.number) == ("direct", 4)
    assert lashing.needed_dan is not None
    assert piece.x is not None
    assert piece.y is not None
    mu, weight = 0.75 * friction, 6000 * 9.81 / 1000
    length, width, _ = piece.unit.on_deck(piece.turned)
    corners = [(piece.x + i * length, piece.y + j * width, 2400.0) for i in (0, 1) for j in (0, 1)]
    centre = (piece.x + length / 2, piece.y + width / 2, 1200.0)
    asked = []
    for motion, c, tilt_c in (((-1, 0, 0), 0.8, 0.8), ((1, 0, 0), 0.5, 0.5), ((0, -1, 0), 0.5, 0.6), ((0, 1, 0), 0.5, 0.6)):
        edge = (centre[0] + motion[0] * length / 2, centre[1] + motion[1] * width / 2, 0.0)
        axis = cross((0, 0, 1), motion)
        slid = turned = 0.0
        acting = []
        for corner, (x, y) in zip(corners, lashing.anchors_mm, strict=True):
            along = tuple(b - a for a, b in zip(corner, (x, y, 0.0), strict=True))
            long = math.dist(corner, (x, y, 0.0))
            t = tuple(v / long for v in along)
            if sum(a * b for a, b in zip(t, motion, strict=True)) < -1e-9:
                acting.append((corner, t, long))
        shortest = min(long for *_, long in acting)
        for corner, t, long in acting:
            part = shortest / long
            slid += part * (-sum(a * b for a, b in zip(t, motion, strict=True)) + mu * -t[2])
            arm = tuple(a - b for a, b in zip(corner, edge, strict=True))
            turned -= part * sum(a * b for a, b in zip(cross(arm, t), axis, strict=True))
        asked.append(weight * max(0.0, c - mu) / slid)
        across = length / 2 if motion[0] else width / 2
        asked.append(weight * max(0.0, tilt_c * 1200 - across) / turned)
    assert lashing.needed_dan == math.ceil(100 * max(asked) - 1e-6)
    assert all(0 <= x <= 13_600 and y in (0, 2480) for x, y in lashing.anchors_mm)


def test_anchors_that_are_given_are_used() -> None:
    """Only the places named, and a weaker anchor or lashing is said; so is what the anchors hold where nobody said it."""
    places = [500.0, 2000.0, 4000.0, 5500.0]
    heavy = unit("press", 6000, (1500.0, 1200.0, 1000.0))
    load = load_of([heavy], FLAT | {"anchors_mm": places, "anchor_dan": 1000}, lashing={"method": "direct"})
    (lashing,) = load.lashings
    assert {x for x, _ in lashing.anchors_mm} <= set(places)
    assert "an anchor holds 1000 daN: it is NOT secured" in said(load, "direct-lashing-weak")
    load = load_of([heavy], lashing={"method": "direct"})
    assert said(load, "anchors-unknown")
    with pytest.raises(JobError, match="an anchor lies beyond its deck"):
        vehicles_of(job_of(FLAT | {"anchors_mm": [7000.0]}))


def test_where_direct_lashings_cannot_be_laid_out_lashings_go_over_the_top() -> None:
    """A stack, a piece without size, and a piece as large as the deck: said each, and held over the top."""
    stack = [unit("plate", 4000, (3000.0, 2400.0, 100.0)), unit("crate", 2000, (3000.0, 2400.0, 1000.0))]
    for units in (stack, [unit("odd", 100, None)], [unit("slab", 5000, (6000.0, 2400.0, 300.0))]):
        load = load_of(units, lashing={"method": "direct"})
        assert {x.method for x in load.lashings} == {"top-over"}
        assert said(load, "direct-lashing-undecided")


def test_a_block_ahead_is_not_added_to_direct_lashings() -> None:
    """The two are not covered together: the block is not counted, and that is said."""
    piece = [unit("press", 3000, (1500.0, 1200.0, 1000.0))]
    with_block, without = (load_of(piece, lashing={"method": "direct"}, blocked_forward=b) for b in (True, False))
    assert with_block.lashings == without.lashings
    assert said(with_block, "headboard-not-counted")


def test_many_lashings_name_what_direct_ones_would_hold() -> None:
    """What is proposed is what the direct method gives."""
    piece = [unit("press", 9000, (1500.0, 1200.0, 1000.0))]
    over = load_of(piece, lashing={"stf_dan": 200})
    assert over.lashings[0].number > 12
    (laid,) = load_of(piece, lashing={"method": "direct"}).lashings
    assert f"LC {laid.needed_dan:g} daN" in said(over, "many-lashings")


def test_direct_tiedowns_of_the_us_rule_count_by_half() -> None:
    """49 CFR 393.106(d): 9,000 kg ask for 4,500 kg; 2,549 kg each count in full over the top, by half to the piece itself."""
    piece = [unit("press", 9000, (1500.0, 1200.0, 1000.0))]
    over, to_it = (load_of(piece, securing="49 CFR 393", lashing={"method": m}).lashings[0].number for m in ("top-over", "direct"))
    assert (over, to_it) == (2, 4)


def test_a_longer_lashing_counts_less() -> None:
    """Two lashings of unlike length: the longer, softer one takes the smaller part."""
    even = securing.direct_sliding_kN(1000, 0.8, 0.2, [(1.0, 0.8, 0.6), (1.0, 0.8, 0.6)])
    unlike = securing.direct_sliding_kN(1000, 0.8, 0.2, [(1.0, 0.8, 0.6), (0.5, 0.8, 0.6)])
    assert unlike == pytest.approx(even * 2 / 1.5)
    assert direct.Box(0, 0, 0, 2, 1, 1).from_edge((2, 0, 1), (-1.0, 0.0)) == 2


@pytest.mark.parametrize("rule", ["EN 12195-1", "49 CFR 393"])
def test_a_stack_on_several_pieces_names_them_all(rule: str) -> None:
    """A crate on eight beams: what holds it names every beam on the deck, so that none seems to be held by nothing."""
    units = [unit(f"B{k}", 900, (6000.0, 300.0, 300.0)) for k in range(8)] + [unit("crate", 600, (3000.0, 2000.0, 1000.0))]
    load = load_of(units, securing=rule)
    held = {name for x in load.lashings for name in x.piece.split(" + ")}
    assert {p.unit.name for p in load.pieces if not p.on} <= held
