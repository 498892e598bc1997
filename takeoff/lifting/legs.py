"""What each lifting point and its sling must carry: shares at rest, the governing case, and what is wrong with the hang. Rank 6.

Governing is the largest of, never a product: statics (three points or fewer) or equal stiffness with the centre anywhere
in its box; the skew factor on each diagonal in turn; the stiff case, in which legs go slack. Methods: 0027/ND (guidelines
for marine lifting), as quoted, for skew; statics for the rest. The rule for points below the centre is MIL-STD-209K's, as
quoted. Angles are from the vertical.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass, field

from takeoff.findings import Finding
from takeoff.lifting import statics
from takeoff.lifting.figures import up_to
from takeoff.lifting.gravity import Centre
from takeoff.lifting.statics import Hang, Vector

STEEPEST_DEG, NOTED_DEG = 60.0, 45.0
TILT_DEG, TILT_NOTED_DEG = 5.0, 2.0
#: tan 60: points a height h below the centre must stand so many h outside it (cone of 120 degrees)
CONE = math.sqrt(3.0)
#: points this near to the height of the centre are level with it, mm
LEVEL_MM = 1e-3


@dataclass(frozen=True, slots=True)
class Rig:
    """How a pick is held. `points` by name; `hook` in plan where it is not over the centre; lengths in mm.

    `upright`: on falls that hang plumb, from a bar or from two cranes; `upended`: from level to upright by two hooks.
    """

    points: tuple[tuple[str, Vector], ...]
    hook_height_mm: float | None = None
    hook: tuple[float, float] | None = None
    slings_mm: tuple[float, ...] = ()
    upright: bool = False
    skew: float = 1.0
    upended: bool = False


@dataclass(frozen=True, slots=True)
class PointLoad:
    """One lifting point: its share of the nominal mass at rest and the governing share with its case, kN; its sling."""

    name: str
    position_mm: Vector
    share_kN: float
    share_heavy_kN: float
    case: str
    sling_length_mm: float | None
    level_length_mm: float | None
    angle_deg: float | None
    tension_kN: float | None


@dataclass(slots=True)
class Legs:
    """All points of a pick. `over` and `open` say what keeps the pick from being within."""

    points: list[PointLoad] = field(default_factory=list)
    hang: Hang | None = None
    findings: list[Finding] = field(default_factory=list)
    over: bool = False
    open: bool = False


def hold(rig: Rig, centre: Centre, rest_kN: float, heavy_kN: float) -> Legs:
    """Share, tension and case of every point. `rest_kN` is the nominal mass at rest, `heavy_kN` design mass × dynamic factor."""
    legs = Legs()
    names, points = [n for n, _ in rig.points], [p for _, p in rig.points]
    inside = say_inside(legs, points, centre)
    hang = _hang(rig, points, centre.centre)
    if hang is None:
        if inside and rig.slings_mm:
            legs.findings.append(
                Finding("note", "slings-do-not-meet", "on slings of these lengths the piece cannot hang from all its points")
            )
        elif inside:
            legs.findings.append(Finding("note", "centre-outside-points", "these points cannot hold the piece with legs that only pull"))
        legs.open = True
        return legs
    legs.hang = hang
    level = _level_lengths(rig, points, centre.centre, hang)
    for i, (share, tension, case) in enumerate(_governing(rig, names, points, centre, hang)):
        legs.points.append(
            PointLoad(
                names[i],
                points[i],
                hang.shares[i] * rest_kN,
                share * heavy_kN,
                case,
                hang.lengths[i],
                level[i],
                0.0 if _plumb(rig) else hang.angles_deg[i],
                None if tension is None else tension * heavy_kN,
            )
        )
    _say_hang(legs, rig, points, centre, hang)
    return legs


def _hang(rig: Rig, points: Sequence[Vector], centre: Vector) -> Hang | None:
    if rig.upright:
        return statics.upright_shares(points, centre)
    if rig.slings_mm:
        lengths = rig.slings_mm if len(rig.slings_mm) == len(points) else rig.slings_mm * len(points)
        return statics.hang_on_slings(points, centre, lengths)
    if rig.hook_height_mm is None:
        return statics.upright_shares(points, centre)
    if rig.hook is not None:
        hook = (*rig.hook, max(p[2] for p in points) + rig.hook_height_mm)
        return statics.hang_on_slings(points, centre, [math.dist(hook, p) for p in points])
    return statics.hang_level(points, centre, rig.hook_height_mm)


def _plumb(rig: Rig) -> bool:
    """One or two points under a bar hang on falls that are upright, so their tension is their share."""
    return rig.upright and len(rig.points) <= 2


def _level_lengths(rig: Rig, points: Sequence[Vector], centre: Vector, hang: Hang) -> list[float | None]:
    """The sling lengths that hang the piece level: hook over the centre at the height asked for, else at the height it has."""
    if rig.upright or hang.hook is None:
        return [None] * len(points)
    top = max(p[2] for p in points)
    height = top + rig.hook_height_mm if rig.hook_height_mm is not None else hang.hook[2]
    over = (centre[0], centre[1], height)
    return [math.dist(over, p) for p in points]


def _governing(
    rig: Rig, names: Sequence[str], points: Sequence[Vector], centre: Centre, hang: Hang
) -> list[tuple[float, float | None, str]]:
    """For each point the largest vertical share, its tension (None where the hook height is not known) and the case."""
    n = len(points)
    even = "statics" if n <= 3 else "equal stiffness"
    known = hang.hook is not None or _plumb(rig)

    def leg(share: float, tension: float, case: str) -> tuple[float, float | None, str]:
        return share, tension if known else None, case

    best = [leg(hang.shares[i], hang.tensions[i], even) for i in range(n)]

    def offer(i: int, share: float, tension: float, case: str) -> None:
        # A hair more is the same case: the plainer name stands.
        if share > best[i][0] * (1 + 1e-9) + 1e-12:
            best[i] = leg(share, tension, case)

    for corner in corners(centre):
        moved = _moved(rig, points, corner, hang)
        if moved is not None:
            for i in range(n):
                offer(i, moved.shares[i], moved.tensions[i], f"{even}, centre at the edge of its box")
    order = around(points) if n == 4 else list(range(n))
    if rig.skew != 1.0:
        for at, i in enumerate(order):
            with_whom = f" on diagonal {names[i]}–{names[order[(at + 2) % 4]]}" if n == 4 else ""
            offer(i, hang.shares[i] * rig.skew, hang.tensions[i] * rig.skew, f"skew {rig.skew:g}{with_whom}")
    if n >= 4:
        for i, (share, tension, slack) in enumerate(_stiff(points, centre, hang, order)):
            offer(i, share, tension, f"stiff, {' and '.join(names[k] for k in slack)} slack" if slack else "stiff")
    return best


def corners(centre: Centre) -> list[Vector]:
    low, high = centre.box
    if math.dist(low, high) < 1e-9:
        return []
    return [(x, y, z) for x, y, z in itertools.product(*zip(low, high, strict=True))]


def _moved(rig: Rig, points: Sequence[Vector], centre: Vector, hang: Hang) -> Hang | None:
    """The same slings with the centre of gravity elsewhere."""
    if hang.hook is None:
        return statics.upright_shares(points, centre)
    if len(points) <= 2 or hang.slack or rig.slings_mm:
        lengths = [length for length in hang.lengths if length is not None]
        return statics.hang_on_slings(points, centre, lengths)
    return statics.hang_from(points, centre, hang.hook)


def _stiff(points: Sequence[Vector], centre: Centre, hang: Hang, order: Sequence[int]) -> list[tuple[float, float, tuple[int, ...]]]:
    """Share, tension and slack legs of each point when any legs may go slack.

    Solved over every set of three legs that can hold the piece; for four points not less than the rule of the two neighbours
    (a point's share and the smaller of its neighbours'), which is the same thing on a rectangle.
    """
    import numpy as np

    if hang.hook is None:
        at = np.array(points, dtype=float)[:, :2] - np.array(centre.centre[:2])
        units = np.vstack([np.ones(len(points)), at.T / (float(np.abs(at).max()) or 1.0)])
        force, cosines = np.array([1.0, 0.0, 0.0]), np.ones(len(points))
    else:
        away = np.array(points, dtype=float) - np.array(hang.hook)
        units = (away / np.linalg.norm(away, axis=1)[:, None]).T
        force = -np.array(hang.up)
        cosines = force @ units
    found = []
    for i, (greatest, legs) in enumerate(statics.stiffest(units, force)):
        share, tension = greatest * float(cosines[i]), greatest
        slack = tuple(k for k in range(len(points)) if k not in legs) if legs else ()
        if len(points) == 4:
            at_place = list(order).index(i)
            beside = [order[(at_place - 1) % 4], order[(at_place + 1) % 4]]
            lesser = min(beside, key=lambda k: hang.shares[k])
            ruled = hang.shares[i] + hang.shares[lesser]
            if ruled > share * (1 + 1e-9):
                share, tension, slack = ruled, ruled / float(cosines[i]), (lesser,)
        found.append((share, tension, slack))
    return found


def around(points: Sequence[Vector]) -> list[int]:
    """Indices of the points in their order round their middle, in plan."""
    mx, my = (math.fsum(p[k] for p in points) / len(points) for k in range(2))
    return sorted(range(len(points)), key=lambda i: math.atan2(points[i][1] - my, points[i][0] - mx))


def inside_points(points: Sequence[Vector], centre: Vector) -> bool:
    """Whether the centre lies in plan within three points or more, edges not counted."""
    hull = _hull([(p[0], p[1]) for p in points])
    if len(hull) < 3:
        return False
    span = max(math.dist(hull[0], corner) for corner in hull[1:])
    for (ax, ay), (bx, by) in zip(hull, hull[1:] + hull[:1], strict=True):
        if (bx - ax) * (centre[1] - ay) - (by - ay) * (centre[0] - ax) <= 1e-9 * span * span:
            return False
    return True


def _hull(points: Sequence[tuple[float, float]]) -> list[tuple[float, float]]:
    """Convex hull, counter-clockwise (monotone chain)."""
    ordered = sorted(set(points))
    if len(ordered) < 3:
        return ordered
    chains: list[list[tuple[float, float]]] = []
    for run in (ordered, ordered[::-1]):
        chain: list[tuple[float, float]] = []
        for p in run:
            while len(chain) > 1 and _turn(chain[-2], chain[-1], p) <= 0:
                chain.pop()
            chain.append(p)
        chains.append(chain[:-1])
    return chains[0] + chains[1]


def _turn(a: tuple[float, float], b: tuple[float, float], c: tuple[float, float]) -> float:
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


# --- what is wrong with it -------------------------------------------------------------------------------------------


def say_inside(legs: Legs, points: Sequence[Vector], centre: Centre) -> bool:
    """Whether the points hold the centre between them; a box that reaches outside leaves it open."""
    if _between(points, centre.centre):
        if not all(_between(points, corner) for corner in corners(centre)):
            legs.open = True
            legs.findings.append(
                Finding(
                    "note",
                    "centre-near-edge",
                    "within the bounds of the masses the centre of gravity may lie outside the lifting points",
                    right="points further out",
                )
            )
        return True
    legs.over = True
    x, y, z = (f"{c:.0f}" for c in centre.centre)
    legs.findings.append(
        Finding(
            "note",
            "centre-outside-points",
            "the centre of gravity does not lie between the lifting points: the piece turns over until it does",
            read=f"centre at {x}, {y}, {z} mm",
            right="points on all sides of the centre",
        )
    )
    return False


def _between(points: Sequence[Vector], centre: Vector) -> bool:
    if len(points) > 2 and len(_hull([(p[0], p[1]) for p in points])) > 2:
        return inside_points(points, centre)
    ends = points if len(points) <= 2 else _ends(points)
    found = statics.upright_shares(ends, centre)
    return found is not None and found.tilt_deg <= TILT_DEG and _beside_deg(ends, centre) <= TILT_DEG


def _ends(points: Sequence[Vector]) -> list[Vector]:
    return list(max(itertools.combinations(points, 2), key=lambda pair: math.dist(*pair)))


def _beside_deg(points: Sequence[Vector], centre: Vector) -> float:
    """How far the piece would turn for its centre to hang under one point or the line of two, in degrees."""
    found = statics.upright_shares(points, centre)
    if found is None:
        return 180.0
    if found.stable:
        return found.tilt_deg
    # At or above the points: only a centre right over or on the line does not start to turn.
    foot = points[0] if len(points) == 1 else _foot(points, centre)
    return 0.0 if math.dist(foot[:2], centre[:2]) <= statics.ON_LINE_MM else 180.0


def _foot(points: Sequence[Vector], centre: Vector) -> Vector:
    a, b = points[0], points[1]
    plan = (b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2
    if plan < 1e-12:
        return a
    along = ((centre[0] - a[0]) * (b[0] - a[0]) + (centre[1] - a[1]) * (b[1] - a[1])) / plan
    return a[0] + along * (b[0] - a[0]), a[1] + along * (b[1] - a[1]), a[2] + along * (b[2] - a[2])


def _say_hang(legs: Legs, rig: Rig, points: Sequence[Vector], centre: Centre, hang: Hang) -> None:
    say = legs.findings.append
    if hang.hook is None and not rig.upright:
        legs.open = True
        say(
            Finding(
                "note",
                "hook-height-missing",
                "the height of the hook is not given: shares are of upright legs, angles and tensions are not known",
                right="hook_height_mm or slings_mm of the pick",
            )
        )
    if hang.slack:
        names = ", ".join(rig.points[i][0] for i in hang.slack)
        say(Finding("note", "legs-slack", f"slack: {names}; the other legs carry all", right="sling lengths that hang it level"))
    _say_angles(legs, rig, points, centre, hang)
    say_tilt(legs, hang)
    say_stability(legs, rig, points, centre.centre, hang)


def say_tilt(legs: Legs, hang: Hang) -> None:
    """A tilt that slingers note, or re-rig for."""
    if hang.tilt_deg > TILT_NOTED_DEG:
        word = "re-rig it" if hang.tilt_deg > TILT_DEG else "noted"
        legs.findings.append(
            Finding(
                "note",
                "tilt",
                f"the piece hangs {up_to(hang.tilt_deg, 1)}° out of level: {word}",
                right=f"no more than {TILT_NOTED_DEG:g}°",
            )
        )


def _say_angles(legs: Legs, rig: Rig, points: Sequence[Vector], centre: Centre, hang: Hang) -> None:
    angles = [(a, name) for a, (name, _) in zip(hang.angles_deg, rig.points, strict=True) if a is not None]
    steep = [name for a, name in angles if a > STEEPEST_DEG * (1 + 1e-12)]
    if steep:
        legs.over = True
        top = max(p[2] for p in points)
        need = max(math.dist(p[:2], centre.centre[:2]) / CONE - (top - p[2]) for p in points)
        short = "the hook is too low, " if rig.hook_height_mm is not None and not rig.slings_mm else ""
        legs.findings.append(
            Finding(
                "note",
                "leg-angle-over-60",
                f"{short}leg {', '.join(steep)} leans more than 60° from the vertical",
                read=f"{up_to(max(angles)[0], 1)}°",
                right=f"the hook at least {math.ceil(need)} mm above the highest point",
            )
        )
    noted = [name for a, name in angles if NOTED_DEG * (1 + 1e-12) < a <= STEEPEST_DEG * (1 + 1e-12)]
    if noted:
        legs.findings.append(Finding("note", "leg-angle-over-45", f"leg {', '.join(noted)} leans more than 45° from the vertical"))


def _level_with(points: Sequence[Vector], centre: Vector) -> bool:
    """Whether one point, or the line of two, passes through the centre itself: it neither rights itself nor turns over."""
    foot = points[0] if len(points) == 1 else _foot(points, centre)
    return math.dist(foot, centre) <= LEVEL_MM


def say_stability(legs: Legs, rig: Rig, points: Sequence[Vector], centre: Vector, hang: Hang) -> None:
    """What is to say where points lie level with the centre or below it; while a piece is upended, lugs on its axis are usual."""
    def above(p: Vector) -> float:
        return math.fsum((p[k] - centre[k]) * hang.up[k] for k in range(3))

    below = [p for p in points if above(p) < -1e-6]
    # One point or two: what counts is where the point, or the line of the two over the centre, stands.
    if hang.stable and (not below or len(points) <= 2):
        return
    if len(points) <= 2 and _level_with(points, centre):
        legs.open |= not rig.upended
        legs.findings.append(
            Finding(
                "note",
                "points-below-centre",
                "the lifting points are level with the centre of gravity: nothing keeps the piece from rolling",
                right="points above the centre",
            )
        )
        return
    hull = _hull([(p[0], p[1]) for p in points])
    if len(hull) <= 2 or not hang.stable:
        legs.over = True
        legs.findings.append(
            Finding(
                "note",
                "points-below-centre",
                "the lifting points are not above the centre of gravity: the piece turns over",
                right="points above the centre, or more of them round it",
            )
        )
        return
    depth = {(p[0], p[1]): max(0.0, -above(p)) for p in points}
    short = False
    for a, b in zip(hull, hull[1:] + hull[:1], strict=True):
        h = max(depth[a], depth[b])
        away = _turn(a, b, (centre[0], centre[1])) / math.dist(a, b)
        short |= away < CONE * h * (1 - 1e-12)
    legs.over |= short
    rule = "not met: it may turn over" if short else "met"
    legs.findings.append(
        Finding(
            "note",
            "points-below-centre",
            f"lifting points lie below the centre of gravity; the stability rule (each line between neighbouring points at "
            f"least 1.73 times their depth outside the centre, MIL-STD-209K as quoted) is {rule}",
            right="points above the centre",
        )
    )
