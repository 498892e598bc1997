"""Laws of the hanging body: forces and moments close, shares add up, nothing depends on where the origin is or on the order."""

from __future__ import annotations

import math
import random
from collections.abc import Sequence

import numpy as np
import pytest

from takeoff.lifting import gravity, legs, statics
from takeoff.lifting.statics import Hang, Vector


def closes(points: Sequence[Vector], centre: Vector, hang: Hang) -> float:
    """The largest of the force and moment residuals, over the weight and the size of the body: an independent sum in the body's axes."""
    assert hang.hook is not None
    up, hook = np.array(hang.up), np.array(hang.hook)
    force, moment = -up, np.zeros(3)  # the weight, whose arm about the centre is nothing
    size = max(1.0, *(float(np.linalg.norm(np.array(p) - centre)) for p in points), float(np.linalg.norm(hook - centre)))
    for p, t in zip(points, hang.tensions, strict=True):
        pull = t * (hook - np.array(p)) / np.linalg.norm(hook - np.array(p))
        force = force + pull
        moment = moment + np.cross(np.array(p) - np.array(centre), pull) / size
    return float(max(np.abs(force).max(), np.abs(moment).max()))


def random_pick(rng: random.Random) -> tuple[list[Vector], Vector, float, int]:
    n = rng.randint(1, 6)
    points = [(rng.uniform(-8e3, 8e3), rng.uniform(-8e3, 8e3), rng.uniform(0, 1500)) for _ in range(n)]
    weights = [rng.random() + 0.05 for _ in points]
    x, y = (sum(w * p[k] for w, p in zip(weights, points, strict=True)) / sum(weights) for k in range(2))
    return points, (x, y, rng.uniform(-3e3, -10)), rng.uniform(500, 20e3), n


def test_forces_and_moments_close_over_ten_thousand_picks() -> None:
    """Hooks over the centre, one to six points of different heights: every residual is below 1e-9 of the weight."""
    rng = random.Random(8)
    solved = 0
    for _ in range(10_000):
        points, centre, height, n = random_pick(rng)
        hang = statics.hang_level(points, centre, height)
        assert hang is not None, (points, centre, height)
        assert closes(points, centre, hang) < 1e-9, (points, centre, height)
        assert math.fsum(hang.shares) == pytest.approx(1.0, abs=1e-9)
        assert min(hang.tensions) >= 0
        assert n <= 2 or hang.tilt_deg == pytest.approx(0.0, abs=1e-9)
        solved += 1
    assert solved == 10_000


def test_slings_as_they_are_close_too_and_are_no_longer_than_they_are() -> None:
    """Real slings of random lengths: the body turns, forces and moments close, no sling is overlong, a slack one carries nothing."""
    rng = random.Random(9)
    hung = 0
    for _ in range(1500):
        points, centre, height, _ = random_pick(rng)
        over = (centre[0], centre[1], 1500 + height)
        slings = [math.dist(over, p) * rng.uniform(0.97, 1.03) for p in points]
        hang = statics.hang_on_slings(points, centre, slings)
        if hang is None:
            continue
        hung += 1
        assert closes(points, centre, hang) < 1e-9
        assert hang.hook is not None
        for p, length, t in zip(points, slings, hang.tensions, strict=True):
            assert math.dist(hang.hook, p) <= length * (1 + statics.TAUT) + 0.011
            if math.dist(hang.hook, p) < length * (1 - statics.TAUT) - 0.011:
                assert t == 0
        # Hung so, the centre is under the hook.
        down = np.array(hang.hook) - np.array(centre)
        assert np.allclose(down / np.linalg.norm(down), hang.up, atol=1e-9)
    assert hung > 1200


def test_the_body_sinks_as_far_as_its_slings_let_it() -> None:
    """No hook position that the slings allow has the centre further below it: tried at random round the answer."""
    points: list[Vector] = [(-3000, -1000, 0), (3000, -1000, 0), (3000, 1000, 0), (-3000, 1000, 0)]
    slings = [4200.0, 4000.0, 4000.0, 4000.0]
    centre: Vector = (250.0, 100.0, -700.0)
    hang = statics.hang_on_slings(points, centre, slings)
    assert hang is not None
    assert hang.hook is not None
    reach = math.dist(hang.hook, centre)
    rng = random.Random(3)
    for _ in range(20_000):
        near = tuple(c + rng.gauss(0, 30) for c in hang.hook)
        if all(math.dist(near, p) <= length for p, length in zip(points, slings, strict=True)):
            assert math.dist(near, centre) <= reach * (1 + 1e-6)
    assert hang.slack


def test_equal_slings_on_a_body_whose_centre_is_off_tilt_it_under_the_hook() -> None:
    """Four equal slings on a rectangle: the hook stays over the middle, and the tilt is the centre's offset over its depth."""
    points: list[Vector] = [(2000, 1000, 0), (-2000, 1000, 0), (-2000, -1000, 0), (2000, -1000, 0)]
    hang = statics.hang_on_slings(points, (200.0, 0.0, -500.0), [3000.0] * 4)
    assert hang is not None
    height = math.sqrt(3000**2 - 2000**2 - 1000**2)
    assert hang.hook == pytest.approx((0.0, 0.0, height))
    assert hang.tilt_deg == pytest.approx(math.degrees(math.atan2(200, height + 500)))


@pytest.mark.parametrize("n", [2, 3, 4, 5])
def test_neither_origin_nor_order_matters(n: int) -> None:
    """The same body elsewhere, its points named in another order, carries the same."""
    rng = random.Random(n)
    for _ in range(50):
        points = [(rng.uniform(-5e3, 5e3), rng.uniform(-5e3, 5e3), rng.uniform(0, 500)) for _ in range(n)]
        centre = (sum(p[0] for p in points) / n, sum(p[1] for p in points) / n, -400.0)
        one = statics.hang_level(points, centre, 4000.0)
        moved = [(x + 12e3, y - 7e3, z + 900) for x, y, z in reversed(points)]
        other = statics.hang_level(moved, (centre[0] + 12e3, centre[1] - 7e3, centre[2] + 900), 4000.0)
        assert one is not None
        assert other is not None
        assert one.tensions == pytest.approx(tuple(reversed(other.tensions)), rel=1e-7, abs=1e-9)


def test_three_points_carry_in_proportion_to_the_triangles_opposite_them() -> None:
    """Statics at the hook for three level points is the rule of areas, whatever the hook's height."""
    points: list[Vector] = [(0, 0, 0), (6000, 0, 0), (2000, 5000, 0)]
    for height in (500.0, 3000.0, 40_000.0):
        hang = statics.hang_level(points, (2500.0, 1500.0, -100.0), height)
        assert hang is not None
        assert hang.shares == pytest.approx((0.383333, 0.316667, 0.3), abs=1e-5)


def at(x: float, y: float, z: float = -500.0, box: float = 0.0) -> gravity.Centre:
    low, high = (x - box, y - box, z - box), (x + box, y + box, z + box)
    return gravity.Centre((x, y, z), (low, high), (-1e3, -1e3, -1e3), (1e3, 1e3, 0.0), False)


SQUARE = (("A", (1000.0, 1000.0, 0.0)), ("B", (-1000.0, 1000.0, 0.0)), ("C", (-1000.0, -1000.0, 0.0)), ("D", (1000.0, -1000.0, 0.0)))


@pytest.mark.parametrize(("x", "y"), [(0.0, 0.0), (100.0, -50.0), (400.0, 300.0), (-900.0, 0.0)])
def test_the_governing_share_is_the_largest_case_never_a_product(x: float, y: float) -> None:
    """Of equal stiffness, the skew factor and the stiff rule, the largest; each worked out here by itself."""
    rig = legs.Rig(SQUARE, hook_height_mm=1e7, skew=1.25)
    found = legs.hold(rig, at(x, y), 10.0, 12.0)
    even = [p.share_kN / 10.0 for p in found.points]
    for i, p in enumerate(found.points):
        beside = min(even[(i - 1) % 4], even[(i + 1) % 4])
        assert p.share_heavy_kN == pytest.approx(12.0 * max(even[i], 1.25 * even[i], even[i] + beside), rel=1e-6)
        assert ("skew" in p.case) == (0.25 * even[i] > beside)


def test_the_box_of_the_centre_is_looked_at_in_all_its_corners() -> None:
    """Three points: the share governing a point is that of the corner nearest to it."""
    points = (("A", (0.0, 0.0, 0.0)), ("B", (4000.0, 0.0, 0.0)), ("C", (0.0, 3000.0, 0.0)))
    found = legs.hold(legs.Rig(points), at(1000.0, 900.0, box=100.0), 1.0, 1.0)
    corner = {"A": 1 - 900 / 4000 - 800 / 3000, "B": 1100 / 4000, "C": 1000 / 3000}
    assert {p.name: p.share_heavy_kN for p in found.points} == pytest.approx(corner)
    assert all("edge of its box" in p.case for p in found.points)


def kinds(found: legs.Legs) -> set[str]:
    return {f.kind for f in found.findings}


def test_what_is_wrong_with_a_hang_is_said() -> None:
    """Each fault by itself: outside, near the edge, too steep, points below, tilt, no hook height."""
    level = {"hook_height_mm": 4000.0}
    assert not legs.hold(legs.Rig(SQUARE, **level), at(0, 0), 1, 1).findings
    outside = legs.hold(legs.Rig(SQUARE, **level), at(1100, 0), 1, 1)
    assert outside.over
    assert kinds(outside) == {"centre-outside-points"}
    edge = legs.hold(legs.Rig(SQUARE, **level), at(950, 0, box=100), 1, 1)
    assert edge.open
    assert not edge.over
    assert "centre-near-edge" in kinds(edge)
    low = legs.hold(legs.Rig(SQUARE, hook_height_mm=500.0), at(0, 0), 1, 1)
    assert low.over
    [steep] = [f for f in low.findings if f.kind == "leg-angle-over-60"]
    # 1414 mm aside at 60 degrees: 816.5 mm.
    assert steep.right == "the hook at least 817 mm above the highest point"
    assert kinds(legs.hold(legs.Rig(SQUARE, hook_height_mm=1000.0), at(0, 0), 1, 1)) == {"leg-angle-over-45"}
    nothing = legs.hold(legs.Rig(SQUARE), at(0, 0), 1, 1)
    assert nothing.open
    assert nothing.points[0].tension_kN is None
    tilted = legs.hold(legs.Rig(SQUARE, slings_mm=(3000.0,)), at(300, 0), 1, 1)
    assert "tilt" in kinds(tilted)
    assert not tilted.over


def test_points_below_the_centre_are_held_against_the_stability_rule() -> None:
    """Four points 1000 mm off the lines between them: a depth of 577 mm meets 1.73 times, 578 mm does not."""
    for depth, over in ((577.0, False), (578.0, True)):
        found = legs.hold(legs.Rig(SQUARE, hook_height_mm=6000.0), at(0, 0, z=depth), 1, 1)
        assert "points-below-centre" in kinds(found)
        assert found.over is over


def test_two_points_below_the_centre_turn_over() -> None:
    """A piece held by two points below its centre is over, however well it is balanced."""
    found = legs.hold(legs.Rig(SQUARE[:2], hook_height_mm=4000.0), at(0, 1000, z=100), 1, 1)
    assert found.over
    assert "points-below-centre" in kinds(found)


def test_two_points_beside_the_centre_roll_the_piece_under_them() -> None:
    """Two points 20 mm to the side of a centre 1000 mm down: it hangs 1.15° out of level, and half on each."""
    found = legs.hold(legs.Rig(SQUARE[:2], hook_height_mm=4000.0), at(0, 1020, z=-1000), 2.0, 2.0)
    assert found.hang is not None
    assert found.hang.tilt_deg == pytest.approx(math.degrees(math.atan2(20, 1000)))
    assert [p.share_kN for p in found.points] == pytest.approx([1.0, 1.0])
    assert not found.over


def test_a_slack_leg_is_named() -> None:
    """One sling too long by 200 mm carries nothing, and is said to."""
    length = math.hypot(4000, 1414.2135623731)
    rig = legs.Rig(SQUARE, slings_mm=(length, length, length, length + 200))
    found = legs.hold(rig, at(-30, 30), 1, 1)
    [said] = [f for f in found.findings if f.kind == "legs-slack"]
    assert said.message.startswith("slack: D")
    assert found.points[3].share_kN == 0
    assert found.points[3].share_heavy_kN > 0


def test_points_that_cannot_be_give_no_figures_and_no_fault() -> None:
    """Points in one place, in a line, far away, the centre among them: an answer or none, never a fault or an infinite figure."""
    places: list[Vector] = [
        (0, 0, 0), (0, 0, 0), (0, 0, 500), (1000, 0, 0), (2000, 0, 0), (3000, 0, 0),
        (1000, 1000, 0), (0, 1000, -300), (1e7, 0, 0), (0, 1e-9, 0),
    ]  # fmt: skip
    rng = random.Random(5)
    for _ in range(3000):
        points = tuple((f"P{i}", rng.choice(places)) for i in range(rng.randint(1, 6)))
        centre = at(rng.choice([0, 1, 500, -700, 1e6]), rng.choice([0, 500]), rng.choice([-1000, -10, 0, 500]), rng.choice([0.0, 50.0]))
        rig = rng.choice([
            legs.Rig(points, hook_height_mm=rng.choice([1.0, 500.0, 1e6])), legs.Rig(points, slings_mm=(rng.choice([1.0, 900.0, 3000.0]),)),
            legs.Rig(points, hook_height_mm=500.0, hook=(300.0, -200.0)), legs.Rig(points, upright=True), legs.Rig(points, skew=1.25),
        ])  # fmt: skip
        found = legs.hold(rig, centre, 1.0, 1.1)
        assert all(math.isfinite(p.share_heavy_kN) and (p.tension_kN is None or math.isfinite(p.tension_kN)) for p in found.points)
        assert found.points or found.over or found.open
