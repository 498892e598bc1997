"""Three or four legs below a spreader or lifting beam, by pairs: two from one end of the bar, two (or one) from the other. Rank 6.

Each end hangs plumb over the line of its two points, and both ends and the centre of gravity stand in one upright plane:
that settles what every leg carries. Along the bar the ends share by moments; within a pair the leg nearer the plumb line
carries more. No leg can take over from another as under one hook, so there is no stiff case. Statics; skew as in
`takeoff.lifting.legs`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from takeoff.findings import Finding
from takeoff.lifting import legs, statics
from takeoff.lifting.figures import up_to
from takeoff.lifting.gravity import Centre
from takeoff.lifting.legs import Legs, PointLoad, Rig
from takeoff.lifting.statics import Hang, Vector

#: both ends of the bar are at one height while their legs agree within this share of its length
SAME_HEIGHT = 0.005
#: forces in a pair's plane close within this share of its load
_CLOSES = 1e-3

Groups = tuple[tuple[int, ...], tuple[int, ...]]


@dataclass(frozen=True, slots=True)
class Ends:
    """How a bar stands over its points, the piece level. `feet` lie under its ends on the lines of the points, mm, list axes.

    `shares` are of the weight, one a point; `along_mm` is from the first foot to the centre, `span_mm` from foot to foot.
    `tops` are the ends themselves, where slings of known length settle them.
    """

    groups: Groups
    toward: tuple[float, float]
    feet: tuple[Vector, Vector]
    shares: tuple[float, ...]
    along_mm: float
    span_mm: float
    tops: tuple[Vector, Vector] | None = None


def ends_over(points: Sequence[Vector], centre: Vector, length_mm: float) -> Ends | None:
    """The pairing whose ends are most nearly as far apart as the bar is long; None where no pairing has the centre between them."""
    found = []
    for groups in _groupings(points):
        one, other = (_middle([points[i] for i in group]) for group in groups)
        if len(groups[1]) == 1:  # three points: the bar stands over the one and the centre
            one = (centre[0], centre[1], 0.0) if math.dist(centre[:2], other[:2]) > 1e-6 else one
        apart = math.dist(one[:2], other[:2])
        if apart < 1e-6:
            continue
        toward = ((other[0] - one[0]) / apart, (other[1] - one[1]) / apart)
        ends = _ends(points, groups, toward, centre)
        if ends is not None and all(s >= -1e-9 for s in ends.shares):
            found.append(ends)
    return min(found, key=lambda e: abs(e.span_mm - length_mm), default=None)


def along(ends: Ends, centre: Vector) -> float:
    """mm from the first foot to where this centre stands along the bar."""
    return ends.toward[0] * (centre[0] - ends.feet[0][0]) + ends.toward[1] * (centre[1] - ends.feet[0][1])


def hold(rig: Rig, centre: Centre, length_mm: float, rest_kN: float, heavy_kN: float) -> tuple[Legs, Ends | None]:
    """Share, tension and case of every point below the bar; None for the ends where pairs do not settle it. kN as in `legs.hold`."""
    out = Legs()
    names, points = [n for n, _ in rig.points], [p for _, p in rig.points]
    if not legs.say_inside(out, points, centre):
        out.open = True
        return out, None
    ends = ends_over(points, centre.centre, length_mm)
    if ends is None:
        out.open = True
        return out, None
    pull: list[float | None] = [None] * len(points)
    angles: list[float | None] = [None] * len(points)
    lengths: list[float | None] = [None] * len(points)
    level: list[float | None] = [None] * len(points)
    shares, up, stable = list(ends.shares), (0.0, 0.0, 1.0), True
    if rig.slings_mm:
        slings = rig.slings_mm if len(rig.slings_mm) == len(points) else rig.slings_mm * len(points)
        hung = _on_slings(points, ends, centre.centre, slings)
        if hung is None:
            out.open = True
            out.findings.append(
                Finding(
                    "note",
                    "slings-do-not-meet",
                    "on slings of these lengths the bar does not hang level over its points, or a leg is slack: not worked out",
                    right="the two legs of an end alike, and both ends at one height",
                )
            )
        else:
            ends, up, tensions, shares, stable = hung
            assert ends.tops is not None
            lengths = list(slings)
            for i, (t, s) in enumerate(zip(tensions, shares, strict=True)):
                pull[i] = t / s if s > 1e-12 else None
                angles[i] = math.degrees(math.acos(min(1.0, s / t))) if t > 1e-12 else None
            for group, foot, top in zip(ends.groups, ends.feet, ends.tops, strict=True):
                above = (foot[0], foot[1], top[2])
                for i in group:
                    level[i] = math.dist(above, points[i])
    else:
        out.open = True
        out.findings.append(
            Finding(
                "note",
                "spreader-not-worked-out",
                "the slings below the bar are not given: how far they lean, and their tensions, are not known",
                right="slings_mm of the pick",
            )
        )
    for i, (share, case) in enumerate(_governing(rig, names, points, centre, ends, shares)):
        ratio = pull[i]
        tension = None if ratio is None else share * ratio * heavy_kN
        out.points.append(
            PointLoad(names[i], points[i], shares[i] * rest_kN, share * heavy_kN, case, lengths[i], level[i], angles[i], tension)
        )
    tilt = math.degrees(math.atan2(math.hypot(up[0], up[1]), up[2]))
    blank = (None,) * len(points)
    out.hang = Hang(None, up, tilt, tuple(shares), tuple(shares), blank, tuple(angles), (), stable)
    _say_angles(out, names, angles)
    legs.say_tilt(out, out.hang)
    legs.say_stability(out, rig, points, centre.centre, out.hang)
    return out, ends


def _groupings(points: Sequence[Vector]) -> list[Groups]:
    order = legs.around(points)
    if len(points) == 3:
        return [(_pair(order[i], order[(i + 1) % 3]), (order[(i + 2) % 3],)) for i in range(3)]
    a, b, c, d = order
    # The end of the first point comes first.
    one, other = sorted((_pair(a, b), _pair(c, d))), sorted((_pair(b, c), _pair(d, a)))
    return [(one[0], one[1]), (other[0], other[1])]


def _pair(a: int, b: int) -> tuple[int, ...]:
    return (a, b) if a < b else (b, a)


def _middle(points: Sequence[Vector]) -> Vector:
    x, y, z = (math.fsum(p[k] for p in points) / len(points) for k in range(3))
    return x, y, z


def _ends(points: Sequence[Vector], groups: Groups, toward: tuple[float, float], centre: Vector) -> Ends | None:
    """The ends where the upright plane through the centre, along `toward`, meets each pair's line."""
    shares = [0.0] * len(points)
    feet: list[Vector] = []
    parts: list[dict[int, float]] = []
    for group in groups:
        if len(group) == 1:
            feet.append(points[group[0]])
            parts.append({group[0]: 1.0})
            continue
        a, b = (points[i] for i in group)
        # Distances of both points to either side of the plane.
        left, right = (toward[0] * (p[1] - centre[1]) - toward[1] * (p[0] - centre[0]) for p in (a, b))
        if abs(left - right) < 1e-6:
            return None
        f = left / (left - right)
        feet.append((a[0] + f * (b[0] - a[0]), a[1] + f * (b[1] - a[1]), a[2] + f * (b[2] - a[2])))
        parts.append({group[0]: 1 - f, group[1]: f})
    along, span = (
        toward[0] * (p[0] - feet[0][0]) + toward[1] * (p[1] - feet[0][1]) for p in (centre, feet[1])
    )
    if span < 1e-6:
        return None
    for part, share in zip(parts, (1 - along / span, along / span), strict=True):
        for i, of_end in part.items():
            shares[i] = share * of_end
    return Ends(groups, toward, (feet[0], feet[1]), tuple(shares), along, span)


def _governing(
    rig: Rig, names: Sequence[str], points: Sequence[Vector], centre: Centre, ends: Ends, shares: Sequence[float]
) -> list[tuple[float, str]]:
    """For each point the largest share and its case. A centre that strays to one side is taken to keep the piece from rolling after
    it, which puts no less on the nearer legs than they get."""
    best = [(s, "pairs") for s in shares]

    def offer(i: int, share: float, case: str) -> None:
        if share > best[i][0] * (1 + 1e-9) + 1e-12:
            best[i] = (share, case)

    for corner in legs.corners(centre):
        moved = _ends(points, ends.groups, ends.toward, corner)
        if moved is not None:
            for i, (now, then) in enumerate(zip(moved.shares, ends.shares, strict=True)):
                offer(i, shares[i] + now - then, "pairs, centre at the edge of its box")
    if rig.skew != 1.0:
        order = legs.around(points)
        for at, i in enumerate(order):
            whom = f" on diagonal {names[i]}–{names[order[(at + 2) % 4]]}" if len(points) == 4 else ""
            offer(i, shares[i] * rig.skew, f"skew {rig.skew:g}{whom}")
    return best


def _on_slings(
    points: Sequence[Vector], ends: Ends, centre: Vector, slings: Sequence[float]
) -> tuple[Ends, Vector, list[float], list[float], bool] | None:
    """Ends, vertical, tensions and shares (of the weight) on these slings: the piece rolls until its centre is under the bar.

    None where a pair does not meet, the bar would not be level, or a leg would have to push.
    """
    import numpy as np

    tops: list[Vector] = []
    for group, foot in zip(ends.groups, ends.feet, strict=True):
        a = np.array(points[group[0]])
        if len(group) == 1:
            tops.append((foot[0], foot[1], foot[2] + slings[group[0]]))
            continue
        line = np.array(points[group[1]]) - a
        apart = float(np.linalg.norm(line))
        line /= apart
        first, second = slings[group[0]], slings[group[1]]
        along = (first**2 - second**2 + apart**2) / (2 * apart)
        high = first**2 - along**2
        rise = np.array([0.0, 0.0, 1.0]) - line[2] * line
        if not high > 0 or np.linalg.norm(rise) < 1e-9:
            return None
        x, y, z = (a + along * line + math.sqrt(high) * rise / np.linalg.norm(rise)).tolist()
        tops.append((x, y, z))
    if abs(tops[0][2] - tops[1][2]) > SAME_HEIGHT * ends.span_mm:
        return None
    hang = statics.upright_shares(tops, centre)
    if hang is None or min(hang.shares) < 0:
        return None
    up = np.array(hang.up)
    tensions, shares = [0.0] * len(points), [0.0] * len(points)
    for group, top, load in zip(ends.groups, tops, hang.shares, strict=True):
        pulls = np.array([np.array(top) - np.array(points[i]) for i in group]).T
        units = pulls / np.linalg.norm(pulls, axis=0)
        if len(group) == 1:
            units = up[:, None]
        t = np.linalg.lstsq(units, load * up, rcond=None)[0]
        if (t < -1e-12).any() or np.linalg.norm(units @ t - load * up) > _CLOSES * max(load, 1e-12):
            return None
        for i, tension, unit in zip(group, t.tolist(), units.T, strict=True):
            tensions[i], shares[i] = tension, tension * float(unit @ up)
    return (
        Ends(ends.groups, ends.toward, ends.feet, ends.shares, ends.along_mm, ends.span_mm, (tops[0], tops[1])),
        hang.up,
        tensions,
        shares,
        hang.stable,
    )


def _say_angles(out: Legs, names: Sequence[str], angles: Sequence[float | None]) -> None:
    known = [(a, n) for a, n in zip(angles, names, strict=True) if a is not None]
    steep = [n for a, n in known if a > legs.STEEPEST_DEG * (1 + 1e-12)]
    noted = [n for a, n in known if legs.NOTED_DEG * (1 + 1e-12) < a <= legs.STEEPEST_DEG * (1 + 1e-12)]
    if steep:
        out.over = True
        out.findings.append(
            Finding(
                "note",
                "leg-angle-over-60",
                f"below the bar, leg {', '.join(steep)} leans more than 60° from the vertical",
                read=f"{up_to(max(known)[0], 1)}°",
                right="longer slings below the bar",
            )
        )
    if noted:
        out.findings.append(
            Finding("note", "leg-angle-over-45", f"below the bar, leg {', '.join(noted)} leans more than 45° from the vertical")
        )
