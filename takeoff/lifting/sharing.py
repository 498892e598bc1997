"""A pick on several cranes: where each hook stands, what share it takes with the piece out of level, what its points carry. Rank 6.

Two cranes share by the centre's place between their hooks, tilt included (0027/ND, appendix B.1, as quoted); more than two
by equal stiffness. Hooks hang plumb; what each crane must be rated for beyond its share is in `takeoff.lifting.picking`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from takeoff.findings import Finding
from takeoff.job import PickCranePart
from takeoff.lifting import legs, spreader, upend
from takeoff.lifting.factors import factor
from takeoff.lifting.gravity import Centre, Vector

Points = tuple[tuple[str, Vector], ...]


def hooks(points: Points, centre: Centre, several: Sequence[PickCranePart]) -> list[Vector]:
    """Where each crane's load line stands: over the middle of its points, moved sideways so that the line of two hooks passes
    over the centre where a crane has points to either side."""
    at = dict(points)
    groups = [[at[n] for n in c.points] for c in several]
    middles = [_mean(group) for group in groups]
    if len(several) != 2 or any(len(g) < 2 for g in groups):
        return middles
    (x0, y0, _), (x1, y1, _) = middles
    span = math.hypot(x1 - x0, y1 - y0)
    if span < 1e-6:
        return middles
    aside = ((centre.centre[1] - y0) * (x1 - x0) - (centre.centre[0] - x0) * (y1 - y0)) / span
    shift = (-(y1 - y0) / span * aside, (x1 - x0) / span * aside)
    return [(m[0] + shift[0], m[1] + shift[1], m[2]) for m in middles]


def shares_of(points: Points, centre: Centre, several: Sequence[PickCranePart]) -> list[tuple[float, float]] | None:
    """Share of each crane at rest and with the piece out of level; None where the hooks do not hold the centre."""
    at = hooks(points, centre, several)
    even = spreader.fall_shares(at, centre.centre)
    if even is None or min(even) <= 0:
        return None
    if len(several) != 2:
        return [(s, s) for s in even]
    (x0, y0, z0), (x1, y1, z1) = at
    apart = math.hypot(x1 - x0, y1 - y0)
    low, high = centre.box
    half = [(b - a) / 2 for a, b in zip(low, high, strict=True)]
    along = abs(x1 - x0) / apart * half[0] + abs(y1 - y0) / apart * half[1]
    tilt = factor("hook tilt", "two cranes").value
    worst = upend.two_hook_shares(apart, even[1] * apart, z0 - centre.centre[2], z1 - centre.centre[2], along, half[2], tilt)
    return [(s, max(s, w)) for s, w in zip(even, worst, strict=True)]


def hold_on_several(rig: legs.Rig, centre: Centre, rest: float, heavy: float, several: Sequence[PickCranePart]) -> legs.Legs:
    """Points that hang on several cranes: each crane's share, held by its own points under its own hook."""
    whole = legs.Legs()
    shares = shares_of(rig.points, centre, several)
    if shares is None:
        whole.over = True
        whole.findings.append(Finding("note", "centre-outside-points", "the centre of gravity does not lie between the cranes' hooks"))
        return whole
    at = dict(rig.points)
    loads: dict[str, legs.PointLoad] = {}
    for part, hook_at, (share, worst) in zip(several, hooks(rig.points, centre, several), shares, strict=True):
        under = (hook_at[0], hook_at[1], centre.centre[2])
        own = Centre(under, (under, under), centre.low, centre.high, centre.at_least)
        names = tuple((n, at[n]) for n in part.points)
        # One point under its own hook hangs plumb, however high the hook.
        plumb = len(names) == 1 and rig.hook_height_mm is None
        skew = rig.skew if len(names) >= 4 else 1.0
        under_hook = legs.Rig(names, rig.hook_height_mm, upright=plumb, skew=skew, upended=rig.upended)
        found = legs.hold(under_hook, own, rest * share, heavy * worst)
        whole.findings += found.findings
        whole.over |= found.over
        whole.open |= found.open
        loads.update({p.name: p for p in found.points})
    missing = [n for n, _ in rig.points if n not in {name for part in several for name in part.points}]
    if missing:
        whole.open = True
        whole.findings.append(
            Finding("note", "crane-share-unknown", f"no crane takes point {', '.join(missing)}", right="each point on a crane")
        )
    whole.points = [loads[n] for n, _ in rig.points if n in loads]
    return whole


def _mean(points: Sequence[Vector]) -> Vector:
    x, y, z = (math.fsum(p[k] for p in points) / len(points) for k in range(3))
    return x, y, z
