"""Equilibrium of a hanging body: what each sling carries, and how the body hangs. Rank 6, no units but mm and kN.

All is worked in the body's own axes. The hook H pulls up along the line from the centre of gravity G to H, each leg i
along the line from H to its point; forces at the hook close, and since the body's weight acts through H so do the
moments. With up to three legs that settles them; with more, equal legs share by equal axial stiffness (the least sum of
squared tensions), a leg that would push is slack. Published rules: see `takeoff.lifting.legs`.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    import numpy as np

    Floats = np.ndarray[Any, np.dtype[np.float64]]

Vector = tuple[float, float, float]

#: legs whose tension is less than this share of the load carry nothing
NOTHING = 1e-12
#: a leg slack by less than this share of its length is taut: a sling stretches by more
TAUT = 5e-4
#: the centre may lie this far off the line of two points, or off one point, and still count as under it, mm
ON_LINE_MM = 1e-6


@dataclass(frozen=True, slots=True)
class Hang:
    """A body at rest under its hook. `hook` in the body's axes (None: hook height unknown, legs taken as upright).

    `up` is the vertical in the body's axes, `tilt_deg` its angle to the body's own z. `tensions` are per unit of weight;
    `shares` are their vertical parts, which add up to 1. `slack` names the legs that carry nothing. `falls` are the heights
    of the hook above each point along the vertical. `stable` is False for a body that would turn over.
    """

    hook: Vector | None
    up: Vector
    tilt_deg: float
    tensions: tuple[float, ...]
    shares: tuple[float, ...]
    lengths: tuple[float | None, ...]
    angles_deg: tuple[float | None, ...]
    slack: tuple[int, ...]
    stable: bool = True


def equal_stiffness(units: Floats, force: Floats) -> Floats | None:
    """Tensions T >= 0 with sum(T u) = force and the least sum of squares; None where no pulling legs can balance it.

    `units` is 3 x n (directions of pull), `force` 3. The hook's displacement d gives T = max(0, u.d): the set of taut legs
    is found by taking out legs that would push and taking back those that would be stretched.
    """
    import numpy as np

    n = units.shape[1]
    scale = float(np.linalg.norm(force)) or 1.0
    taut = np.ones(n, dtype=bool)
    seen: set[bytes] = set()
    for _ in range(4 * n + 8):
        d = np.linalg.lstsq(units[:, taut] @ units[:, taut].T, force, rcond=1e-13)[0]
        stretch = units.T @ d
        wanted = stretch > NOTHING * scale
        if (wanted == taut).all() or wanted.tobytes() in seen:
            break
        seen.add(wanted.tobytes())
        taut = wanted
        if not taut.any():
            return _least_of_subsets(units, force)
    tensions = np.where(taut, np.maximum(stretch, 0.0), 0.0)
    if (wanted == taut).all() and _closes(units, tensions, force):
        return _polished(units, tensions, force)
    return _least_of_subsets(units, force)


def _least_of_subsets(units: Floats, force: Floats) -> Floats | None:
    """The same by trying every set of taut legs, for the rare case where the search runs in circles."""
    import numpy as np

    best: Floats | None = None
    n = units.shape[1]
    if n > 12:
        return None
    for size in range(1, n + 1):
        for legs in itertools.combinations(range(n), size):
            part = units[:, legs]
            t = np.linalg.lstsq(part, force, rcond=None)[0]
            full = np.zeros(n)
            full[list(legs)] = t
            if (t >= -1e-9 * np.linalg.norm(force)).all() and _closes(units, full, force):
                full = np.maximum(full, 0.0)
                if best is None or full @ full < best @ best:
                    best = full
    return best if best is None else _polished(units, best, force)


def _closes(units: Floats, tensions: Floats, force: Floats) -> bool:
    import numpy as np

    return bool(np.linalg.norm(units @ tensions - force) <= 1e-8 * np.linalg.norm(force))


def _polished(units: Floats, tensions: Floats, force: Floats) -> Floats:
    """One step of correction within the taut legs, which closes the forces to the last figures."""
    import numpy as np

    taut = tensions > 0
    fixed = tensions.copy()
    fixed[taut] += np.linalg.lstsq(units[:, taut], force - units @ tensions, rcond=None)[0]
    polished: Floats = np.maximum(fixed, 0.0)
    return polished


def stiffest(units: Floats, force: Floats) -> list[tuple[float, tuple[int, ...]]]:
    """For each leg the greatest tension that equilibrium allows when any legs may go slack, and the legs that then pull.

    The extremes are reached with three legs or fewer pulling, so every such set is solved directly. Where the four legs
    of a rectangle are meant this is the rule: a leg's share and the smaller of its two neighbours'.
    """
    import numpy as np

    n = units.shape[1]
    found: list[tuple[float, tuple[int, ...]]] = [(0.0, ())] * n
    for size in (1, 2, 3):
        for legs in itertools.combinations(range(n), size):
            part = units[:, legs]
            t, _, rank, _ = np.linalg.lstsq(part, force, rcond=1e-10)
            if rank < size or (t < -1e-9 * np.linalg.norm(force)).any() or np.linalg.norm(part @ t - force) > 1e-8 * np.linalg.norm(force):
                continue
            for leg, value in zip(legs, t.tolist(), strict=True):
                if value > found[leg][0]:
                    found[leg] = (value, legs)
    return found


def hang_from(points: Sequence[Vector], centre: Vector, hook: Vector) -> Hang | None:
    """How a body hangs whose slings meet at `hook` (body axes, slings of just that length); None where no legs can hold it."""
    import numpy as np

    p, g, h = np.array(points, dtype=float), np.array(centre, dtype=float), np.array(hook, dtype=float)
    reach = float(np.linalg.norm(h - g))
    legs = p - h
    lengths = np.linalg.norm(legs, axis=1)
    if reach < 1e-9 or (lengths < 1e-9).any():
        return None
    up = (h - g) / reach
    units = (legs / lengths[:, None]).T
    tensions = equal_stiffness(units, -up)
    if tensions is None:
        return None
    cosines = -(up @ units)
    shares = tensions * cosines
    slack = tuple(i for i, t in enumerate(tensions.tolist()) if t <= 1e-9)
    angles = tuple(math.degrees(math.acos(max(-1.0, min(1.0, c)))) for c in cosines.tolist())
    tilt = math.degrees(math.atan2(math.hypot(up[0], up[1]), up[2]))
    return Hang(_tuple(h), _tuple(up), tilt, tuple(tensions.tolist()), tuple(shares.tolist()), tuple(lengths.tolist()), angles, slack)


def hang_level(points: Sequence[Vector], centre: Vector, hook_height_mm: float) -> Hang | None:
    """The hook over the centre, so high above the highest point, on slings cut to suit. With one or two points the body turns
    until its centre is under them; `stable` is False where it would turn over instead.
    """
    top = max(p[2] for p in points)
    over = (centre[0], centre[1], top + hook_height_mm)
    if len(points) > 2:
        return hang_from(points, centre, over)
    return _turned(points, centre, hook_height_mm)


def upright_shares(points: Sequence[Vector], centre: Vector) -> Hang | None:
    """Shares of legs that hang upright (hook very high, or a spreader above): moments in plan, equal stiffness."""
    import numpy as np

    def solve(p: Sequence[Vector], g: Vector) -> list[float] | None:
        at = np.array(p, dtype=float)[:, :2] - np.array(g[:2])
        span = float(np.abs(at).max()) or 1.0
        rows = np.vstack([np.ones(len(p)), at.T / span])
        t = equal_stiffness(rows, np.array([1.0, 0.0, 0.0]))
        return None if t is None else t.tolist()

    up: Vector = (0.0, 0.0, 1.0)
    stable = True
    shares = solve(points, centre)
    if len(points) <= 2:
        rolled = _roll(points, centre)
        if rolled is None:
            return None
        up, stable, along = rolled
        shares = [1.0] if len(points) == 1 else [1 - along, along] if -1e-12 <= along <= 1 + 1e-12 else None
    if shares is None:
        return None
    slack = tuple(i for i, s in enumerate(shares) if s <= 1e-9)
    tilt = math.degrees(math.atan2(math.hypot(up[0], up[1]), up[2]))
    none = (None,) * len(points)
    return Hang(None, up, tilt, tuple(shares), tuple(shares), none, none, slack, stable)


def hang_on_slings(points: Sequence[Vector], centre: Vector, slings_mm: Sequence[float]) -> Hang | None:
    """How the body hangs on slings that are what they are: it sinks until its centre is as far below the hook as they allow.

    With the hook in the body's axes at most one sling length from each point, the distance from hook to centre is greatest:
    tried with every set of one, two or three taut slings, the others no longer than they are. None where the slings do not meet.
    """
    import numpy as np

    p, g = np.array(points, dtype=float), np.array(centre, dtype=float)
    lengths = np.array(slings_mm, dtype=float)
    slack_allowed = np.maximum(TAUT * lengths, 0.01)
    best: tuple[float, Any] | None = None
    for size in (1, 2, 3):
        for legs in itertools.combinations(range(len(p)), size):
            for h in _meeting(p[list(legs)], lengths[list(legs)], g):
                far = np.linalg.norm(p - h, axis=1)
                if (far > lengths + slack_allowed).any() or h[2] <= g[2]:
                    continue
                reach = float(np.linalg.norm(h - g))
                if not _pulled(p[list(legs)], h, g):
                    continue
                if best is None or reach > best[0] + 1e-9:
                    best = (reach, h)
    if best is None:
        return None
    h = best[1]
    far = np.linalg.norm(p - h, axis=1)
    taut = [i for i in range(len(p)) if far[i] >= lengths[i] - slack_allowed[i]]
    part = hang_from([points[i] for i in taut], centre, _tuple(h))
    if part is None:
        return None
    tensions, shares = [0.0] * len(p), [0.0] * len(p)
    angles: list[float | None] = [None] * len(p)
    for i, t, s, a in zip(taut, part.tensions, part.shares, part.angles_deg, strict=True):
        tensions[i], shares[i], angles[i] = t, s, a
    slack = tuple(i for i, t in enumerate(tensions) if t <= 1e-9)
    stable = len(taut) > 2 or _stands(points, taut, centre)
    return Hang(part.hook, part.up, part.tilt_deg, tuple(tensions), tuple(shares), tuple(lengths.tolist()), tuple(angles), slack, stable)


def _pulled(p: Floats, h: Floats, g: Floats) -> bool:
    """Whether these legs, taut, hold the weight by pulling: then, and only then, the centre has sunk as far as they let it."""
    import numpy as np

    t, *_ = np.linalg.lstsq((p - h).T, g - h, rcond=None)
    return bool((t >= -1e-9).all() and np.linalg.norm((p - h).T @ t - (g - h)) <= 1e-6 * np.linalg.norm(g - h))


def _meeting(p: Floats, lengths: Floats, g: Floats) -> list[Floats]:
    """Where a hook can be with these one to three slings taut and the centre under it, body axes."""
    import numpy as np

    if len(p) == 1:
        down = p[0] - g
        size = np.linalg.norm(down)
        return [] if size < 1e-9 else [p[0] + lengths[0] * down / size]
    ex = (p[1] - p[0]) / np.linalg.norm(p[1] - p[0]) if np.linalg.norm(p[1] - p[0]) > 1e-9 else None
    if ex is None:
        return []
    d = float(np.linalg.norm(p[1] - p[0]))
    x = (lengths[0] ** 2 - lengths[1] ** 2 + d * d) / (2 * d)
    if len(p) == 2:
        # The hook turns about the line of the two points until it, the line and the centre lie in one plane.
        off = (g - p[0]) - ((g - p[0]) @ ex) * ex
        far = float(np.linalg.norm(off))
        y2 = lengths[0] ** 2 - x * x
        if y2 < 0:
            return []
        away = -off / far if far > 1e-9 else None
        if away is None:
            away = np.array([0.0, 0.0, 1.0]) - ex[2] * ex
            if np.linalg.norm(away) < 1e-9:
                return []
            away /= np.linalg.norm(away)
        return [p[0] + x * ex + math.sqrt(y2) * away, p[0] + x * ex - math.sqrt(y2) * away]
    across = (p[2] - p[0]) - ((p[2] - p[0]) @ ex) * ex
    if np.linalg.norm(across) < max(1e-3, 1e-9 * float(np.linalg.norm(p[2] - p[0]))):
        return []  # three points in a line do not settle where the hook is
    ey = across / np.linalg.norm(across)
    i, j = float(ex @ (p[2] - p[0])), float(ey @ (p[2] - p[0]))
    y = (lengths[0] ** 2 - lengths[2] ** 2 + i * i + j * j) / (2 * j) - i / j * x
    z2 = lengths[0] ** 2 - x * x - y * y
    if z2 < 0:
        return []
    ez = np.cross(ex, ey)
    return [p[0] + x * ex + y * ey + sign * math.sqrt(z2) * ez for sign in (1, -1)]


def _turned(points: Sequence[Vector], centre: Vector, hook_height_mm: float) -> Hang | None:
    """One or two points: turn the body until its centre is under them, find the hook there, and turn back."""
    rolled = _roll(points, centre)
    if rolled is None:
        return None
    up, stable, along = rolled
    if len(points) == 1:
        length = hook_height_mm
        h = tuple(points[0][k] + length * up[k] for k in range(3))
        tilt = math.degrees(math.atan2(math.hypot(up[0], up[1]), up[2]))
        return Hang((h[0], h[1], h[2]), up, tilt, (1.0,), (1.0,), (length,), (0.0,), (), stable)
    # Upright plane through the two points: horizontal distances and heights along `up`.
    heights = [sum(a * b for a, b in zip(q, up, strict=True)) for q in points]
    top = max(heights)
    foot = tuple(points[0][k] + along * (points[1][k] - points[0][k]) for k in range(3))
    # The hook stands on the vertical through the point of the line under which the centre hangs.
    lift = top + hook_height_mm - sum(a * b for a, b in zip(foot, up, strict=True))
    h = tuple(foot[k] + lift * up[k] for k in range(3))
    legs = [tuple(q[k] - h[k] for k in range(3)) for q in points]
    lengths = [math.hypot(*leg) for leg in legs]
    if min(lengths) < 1e-9 or not -1e-12 <= along <= 1 + 1e-12:
        return None
    import numpy as np

    units = np.array([[c / size for c in leg] for leg, size in zip(legs, lengths, strict=True)]).T
    tensions = equal_stiffness(units, -np.array(up))
    if tensions is None:
        return None
    cosines = -(np.array(up) @ units)
    angles = tuple(math.degrees(math.acos(max(-1.0, min(1.0, c)))) for c in cosines.tolist())
    tilt = math.degrees(math.atan2(math.hypot(up[0], up[1]), up[2]))
    slack = tuple(i for i, t in enumerate(tensions.tolist()) if t <= 1e-9)
    shares = tuple((tensions * cosines).tolist())
    return Hang((h[0], h[1], h[2]), up, tilt, tuple(tensions.tolist()), shares, tuple(lengths), angles, slack, stable)


def _roll(points: Sequence[Vector], centre: Vector) -> tuple[Vector, bool, float] | None:
    """The vertical (body axes) once the centre hangs under one or two points; whether it stays so; where along the two."""
    import numpy as np

    p, g = np.array(points, dtype=float), np.array(centre, dtype=float)
    if len(p) == 1:
        away = p[0] - g
        if np.linalg.norm(away[:2]) <= ON_LINE_MM:
            return (0.0, 0.0, 1.0), bool(away[2] > 0), 0.0
        return (_tuple(away / np.linalg.norm(away)), True, 0.0) if away[2] > 0 else ((0.0, 0.0, 1.0), False, 0.0)
    line = p[1] - p[0]
    plan = float(np.linalg.norm(line[:2]))
    if plan < 1e-6:
        return None
    along = float((g - p[0])[:2] @ line[:2]) / plan**2
    foot = p[0] + along * line
    away = foot - g
    across = np.array([-line[1], line[0], 0.0]) / plan
    e = float(away @ across)
    # Plumb line of the upright plane through the points: the body rolls about the line's horizontal direction.
    if abs(e) <= ON_LINE_MM:
        return (0.0, 0.0, 1.0), bool(away[2] > 0), along
    if away[2] <= 0:
        return (0.0, 0.0, 1.0), False, along
    ahead = line / np.linalg.norm(line)
    away = (p[0] - g) - ((p[0] - g) @ ahead) * ahead
    # `away` is square to the line and points from the centre to it; the hook's vertical lies in their plane, and keeps
    # the slope that the line had.
    away /= np.linalg.norm(away)
    slope = float(line[2]) / float(np.linalg.norm(line))
    up = math.sqrt(max(0.0, 1 - slope * slope)) * away + slope * ahead
    along = float(((g - p[0]) @ up * up - (g - p[0])) @ (up * (line @ up) - line)) / float(np.linalg.norm(line - up * (line @ up)) ** 2)
    return _tuple(up / np.linalg.norm(up)), True, along


def _stands(points: Sequence[Vector], taut: Sequence[int], centre: Vector) -> bool:
    rolled = _roll([points[i] for i in taut], centre)
    return rolled is not None and rolled[1]


def _tuple(v: Any) -> Vector:
    return float(v[0]), float(v[1]), float(v[2])
