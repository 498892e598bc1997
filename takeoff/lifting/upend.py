"""Upending a long piece with two hooks on upright falls: what head and tail carry at each angle. Rank 6.

In the body's own axes from the head point, u toward the tail (level at the start), v up: at a rotation t from level
R_tail = W (u_G cos t + v_G sin t) / (L cos t + v_B sin t), R_head = W − R_tail. Statics; 0027/ND prints the same form.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from takeoff.lifting.statics import Vector


@dataclass(frozen=True, slots=True)
class Step:
    """At `angle_deg` from level: kN on the head's hook and on the tail's, as moments have it; below 0 a hook would have to push."""

    angle_deg: float
    head_kN: float
    tail_kN: float

    @property
    def carried_kN(self) -> tuple[float, float]:
        """What head and tail carry in truth: a hook that would have to push is slack, and the other carries all."""
        whole = self.head_kN + self.tail_kN
        return min(max(self.head_kN, 0.0), whole), min(max(self.tail_kN, 0.0), whole)


def tail_share(span: float, u_g: float, v_g: float, v_b: float, angle_deg: float) -> float:
    """The tail's share of the weight. Upright with both points on one line with the centre, the head takes all at once: 0."""
    t = math.radians(angle_deg)
    under = span * math.cos(t) + v_b * math.sin(t)
    if abs(under) < 1e-9 * max(span, abs(v_b)):
        return 0.0
    return (u_g * math.cos(t) + v_g * math.sin(t)) / under


def table(head: Vector, tail: Vector, centre: Vector, weight_kN: float, step_deg: float) -> list[Step]:
    """From level to upright in steps, the last at 90 degrees. A share below 0 or above 1 is left as it is: the piece would swing."""
    along = (tail[0] - head[0], tail[1] - head[1])
    span = math.hypot(*along)
    u_g = ((centre[0] - head[0]) * along[0] + (centre[1] - head[1]) * along[1]) / span
    steps = max(1, math.ceil(90.0 / step_deg - 1e-9))
    found = []
    for k in range(steps + 1):
        angle = min(90.0, k * step_deg)
        tail_part = tail_share(span, u_g, centre[2] - head[2], tail[2] - head[2], angle)
        found.append(Step(angle, weight_kN * (1 - tail_part), weight_kN * tail_part))
    return found


def greatest(steps: Sequence[Step], which: int) -> tuple[float, float]:
    """The most that the head (0) or the tail (1) carries on the way, kN, and the first angle at which it does."""
    most = max(s.carried_kN[which] for s in steps)
    return most, next(s.angle_deg for s in steps if s.carried_kN[which] >= most * (1 - 1e-9))


def slack_from_deg(head: Vector, tail: Vector, centre: Vector) -> float | None:
    """The angle from level at which the tail's hook goes slack short of upright, the centre then under the head; None where it does not."""
    span = math.hypot(tail[0] - head[0], tail[1] - head[1])
    u_g = ((centre[0] - head[0]) * (tail[0] - head[0]) + (centre[1] - head[1]) * (tail[1] - head[1])) / span
    v_g = centre[2] - head[2]
    return math.degrees(math.atan2(u_g, -v_g)) if u_g > 0 and v_g < 0 else None


def two_hook_shares(
    apart: float, c: float, a: float, b: float, x: float = 0.0, z: float = 0.0, tilt_deg: float = 3.0
) -> tuple[float, float]:
    """Largest share of each of two hooks with the piece out of level, the printed form of 0027/ND, appendix B.1, as quoted.

    `apart` between the points, `c` from the first to the centre, `a` and `b` the centre's depth below the first and second
    points, `x`, `z` half sizes of the centre's box. Each is the worse of tilting one way and the other.
    """
    d, t = apart - c, math.radians(tilt_deg)
    sin, cos = math.sin(t), math.cos(t)
    first = max(((b + s * z) * s * sin + (d + x) * cos) / (apart * cos + s * (b - a) * sin) for s in (1, -1))
    second = max(((a + s * z) * s * sin + (c + x) * cos) / (apart * cos - s * (b - a) * sin) for s in (1, -1))
    return first, second
