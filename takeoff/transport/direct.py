"""Four direct lashings of one piece, anchor by anchor: where they go, and what the hardest pulled of them must hold.

Each runs from an upper corner of the piece to an anchor on the deck's side edge: straight (away from the piece), inward (back
along it) or crossed (in front of its face to the other side). Every direction asks for a force against sliding and, where the
piece can tilt, against tilting; only lashings that draw against the motion count, and a longer one counts less, as it is
softer. The layout that asks least of the lashings is taken. Forms: `securing`; the share by length is ours (computed), on the
insurers' handbook's advice not to count unlike lashings in full (3.5.1, read).
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product

from takeoff.transport import securing

#: steps of a lashing's reach along the deck where the anchors' places are not given, mm
_STEP = 250.0
#: longest and shortest of the lashings may differ by no more than this
_UNLIKE = 1.5
_LEAST_PULL = 1e-9
Vector = tuple[float, float, float]


@dataclass(frozen=True, slots=True)
class Demand:
    """What one direction asks: its name, the way the piece would move along and across the deck, c against sliding, and the
    moment that tilts it over its edge on that side, kNmm, not above zero where it stands by itself.
    """

    direction: str
    motion: tuple[float, float]
    c: float
    moment_kNmm: float


@dataclass(frozen=True, slots=True)
class Layout:
    """Anchors as (from the deck's front, from its left), mm, for the front left, front right, rear left and rear right corner;
    how the front and rear pairs run; the force in the hardest pulled lashing, and the direction that asks for it; the flattest
    and steepest angle to the deck.
    """

    anchors_mm: tuple[tuple[float, float], ...]
    runs: tuple[str, str]
    needed_kN: float
    governs: str
    angles_deg: tuple[float, float]


@dataclass(frozen=True, slots=True)
class Box:
    """A placed piece: its front left lower corner in mm from the deck's front, left and top, and its size."""

    x: float
    y: float
    z: float
    length: float
    width: float
    height: float

    def corners(self) -> tuple[Vector, ...]:
        top = self.z + self.height
        return tuple((self.x + i * self.length, self.y + j * self.width, top) for i in (0, 1) for j in (0, 1))

    def from_edge(self, corner: Vector, motion: tuple[float, float]) -> float:
        """How far a corner lies behind the edge that the piece would tilt over."""
        x, y, _ = corner
        if motion[0]:
            return x - self.x if motion[0] < 0 else self.x + self.length - x
        return y - self.y if motion[1] < 0 else self.y + self.width - y


def lay_out(
    box: Box, mass_kg: float, mu: float, demands: Sequence[Demand], deck: tuple[float, float], anchors_mm: Sequence[float], share: float
) -> Layout | None:
    """The layout of least force, None where no arrangement of four holds every direction.

    `deck` is (length, width) in mm; `anchors_mm` the places along both sides, none for anywhere.
    """
    best: Layout | None = None
    for runs, places in _candidates(box, deck[0], anchors_mm):
        anchors = _anchors(runs, places, deck[1])
        pulls = [_pull(corner, anchor) for corner, anchor in zip(box.corners(), anchors, strict=True)]
        lengths = [length for _, length in pulls]
        if max(lengths) > _UNLIKE * min(lengths):
            continue
        needed, governs = 0.0, demands[0].direction
        for demand in demands:
            force = _needed(box, pulls, mass_kg, mu, demand, share)
            if force > needed:
                needed, governs = force, demand.direction
        if math.isfinite(needed) and (best is None or needed < best.needed_kN * (1 - 1e-9)):
            angles = sorted(math.degrees(math.asin(-t[2])) for t, _ in pulls)
            best = Layout(anchors, runs, needed, governs, (angles[0], angles[-1]))
    return best


def _candidates(box: Box, deck_length: float, anchors_mm: Sequence[float]) -> Iterator[tuple[tuple[str, str], tuple[float, float]]]:
    """How the front and the rear pair run, and where along the deck their anchors are."""
    ends = (box.x, box.x + box.length)
    if anchors_mm:
        ways: list[list[tuple[str, float]]] = []
        for end, outward in zip(ends, (-1, 1), strict=True):
            here = [("straight" if (at - end) * outward >= 0 else "inward", at) for at in anchors_mm]
            ways.append(here + [("crossed", at) for run, at in here if run == "straight"])
        for (front_run, front_at), (rear_run, rear_at) in product(*ways):
            yield (front_run, rear_run), (front_at, rear_at)
        return
    for run, outward in (("straight", 1), ("crossed", 1), ("inward", -1)):
        for k in range(int(deck_length / _STEP) + 1):
            front, rear = ends[0] - outward * k * _STEP, ends[1] + outward * k * _STEP
            if 0 <= front <= deck_length and 0 <= rear <= deck_length and (run != "inward" or k * _STEP <= box.length):
                yield (run, run), (front, rear)


def _anchors(runs: tuple[str, str], places: tuple[float, float], width: float) -> tuple[tuple[float, float], ...]:
    made = []
    for run, at in zip(runs, places, strict=True):
        sides = (width, 0.0) if run == "crossed" else (0.0, width)
        made += [(at, side) for side in sides]
    return tuple(made)


def _pull(corner: Vector, anchor: tuple[float, float]) -> tuple[Vector, float]:
    """The direction a lashing draws its corner, as parts of 1, and its length."""
    x, y, z = anchor[0] - corner[0], anchor[1] - corner[1], -corner[2]
    length = math.sqrt(x * x + y * y + z * z)
    return (x / length, y / length, z / length), length


def _needed(box: Box, pulls: Sequence[tuple[Vector, float]], mass_kg: float, mu: float, demand: Demand, share: float) -> float:
    """The force in the hardest pulled lashing that one direction asks for, kN."""
    acting = []
    for corner, (t, length) in zip(box.corners(), pulls, strict=True):
        against = -(t[0] * demand.motion[0] + t[1] * demand.motion[1])
        if against > _LEAST_PULL:
            acting.append((corner, against, -t[2], length))
    shortest = min((length for *_, length in acting), default=1.0)
    legs = [(shortest / length, against, down) for _, against, down, length in acting]
    levers = [
        (shortest / length, down * box.from_edge(corner, demand.motion) + against * box.height) for corner, against, down, length in acting
    ]
    return max(securing.direct_sliding_kN(mass_kg, demand.c, mu, legs, share), securing.direct_tilting_kN(demand.moment_kNmm, levers))
