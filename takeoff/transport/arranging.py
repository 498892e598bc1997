"""Where along and across the deck a placed load must stand so that every axle holds, full and after each delivery.

A placed load falls into segments between cuts across the whole deck. Segments keep their inside and are put in another order,
turned end for end, and the whole is shifted towards the tail. Every axle load is a straight line in the shift, so for one
order the shifts that hold all axles at all stages form an interval; the smallest is taken.
"""

from __future__ import annotations

import math
import random
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import permutations

from takeoff.transport.axles import Statics, Support, extreme_load_kg
from takeoff.transport.load import Placed
from takeoff.transport.placing import BEARER, HAIR, Deck
from takeoff.transport.vehicles import Vehicle

#: an order of unloading that is not from the rear, and shares below the least, are put up with only where nothing else holds
_ORDERS = 240
#: times an interval of shifts is cut down
_CUTS = 12
_LINE_STEP = 1e-3


@dataclass(frozen=True, slots=True)
class Arranged:
    """Pieces in their final places, and what of the wishes is not met: shares, unloading from the rear, balance in mm."""

    pieces: list[Placed]
    short_share: bool
    out_of_order: bool
    beside_mm: float

    @property
    def rank(self) -> tuple[int, float]:
        return (self.short_share + self.out_of_order, round(self.beside_mm, 3))


@dataclass(slots=True)
class _Segment:
    pieces: list[int]
    start: float
    length: float
    mass: float
    drop: float


def arrange(pieces: Sequence[Placed], vehicle: Vehicle, deck: Deck, dunnage_kg: float, *, quick: bool = False) -> Arranged | None:
    """The pieces moved so that limits hold, the first way found where it must be `quick`.

    None where no order tried does it, or the deck's line load is exceeded.
    """
    if not line_load_holds(pieces, vehicle):
        return None
    segments = _segments(pieces)
    best: Arranged | None = None
    for order, flipped in _orders(segments):
        moved = _laid(pieces, segments, order, flipped)
        free = _free_shift(moved, deck)
        if free < -1e-3:
            continue
        found = _shift(moved, vehicle, dunnage_kg, max(0.0, free))
        if found is None:
            continue
        shift, short = found
        shifted = [p.moved(shift, 0.0) for p in moved]
        if not holds(shifted, vehicle, dunnage_kg):
            continue
        out = not _from_the_rear(shifted)
        if best is None or (short + out) < best.rank[0]:
            best = _made(shifted, segments, deck, short, out)
        if quick or best.rank[0] == 0:
            break
    return best


def _made(pieces: list[Placed], segments: Sequence[_Segment], deck: Deck, short: bool, out: bool) -> Arranged:
    balanced = _balanced(pieces, segments, deck)
    mass = sum(p.unit.mass.heavy for p in balanced)
    beside = sum(p.unit.mass.heavy * (_centre(p)[1] - deck.width / 2) for p in balanced) / mass if mass else 0.0
    return Arranged(balanced, short, out, abs(beside))


def _centre(piece: Placed) -> tuple[float, float, float]:
    centre = piece.centre
    assert centre is not None
    return centre


def _extent(piece: Placed) -> tuple[float, float, float, float]:
    assert piece.x is not None
    assert piece.y is not None
    length, width, _ = piece.unit.on_deck(piece.turned)
    return piece.x, piece.y, piece.x + length, piece.y + width


def _segments(pieces: Sequence[Placed]) -> list[_Segment]:
    """Runs of floor pieces that overlap along the deck, each with what stands on them."""
    floor = sorted((i for i, p in enumerate(pieces) if not p.on), key=lambda i: (_extent(pieces[i])[0], i))
    runs: list[tuple[list[int], float, float]] = []
    for i in floor:
        a, _, c, _ = _extent(pieces[i])
        if runs and a < runs[-1][2] - HAIR:
            runs[-1] = (runs[-1][0] + [i], runs[-1][1], max(runs[-1][2], c))
        else:
            runs.append(([i], a, c))
    home = {i: number for number, (members, _, _) in enumerate(runs) for i in members}
    parent = list(range(len(runs)))

    def root(number: int) -> int:
        while parent[number] != number:
            number = parent[number]
        return number

    # A piece on several others ties the runs below it together.
    for i in sorted(range(len(pieces)), key=lambda i: pieces[i].layer):
        if pieces[i].on:
            roots = sorted(root(home[k]) for k in pieces[i].on)
            for other in roots[1:]:
                parent[other] = roots[0]
            home[i] = roots[0]
    made = []
    for number in range(len(runs)):
        if root(number) != number:
            continue
        start = min(run[1] for k, run in enumerate(runs) if root(k) == number)
        end = max(run[2] for k, run in enumerate(runs) if root(k) == number)
        members = [i for i in range(len(pieces)) if root(home[i]) == number]
        mass = sum(pieces[i].unit.mass.heavy for i in members)
        drop = sum(pieces[i].unit.mass.heavy * pieces[i].unit.drop for i in members) / mass if mass else 0.0
        made.append(_Segment(members, start, end - start, mass, drop))
    return _joined(made)


def _joined(segments: list[_Segment]) -> list[_Segment]:
    """Segments whose spans overlap, a tied one reaching over another, become one."""
    made: list[_Segment] = []
    for s in sorted(segments, key=lambda s: (s.start, s.pieces)):
        if made and s.start < made[-1].start + made[-1].length - HAIR:
            last = made[-1]
            end = max(last.start + last.length, s.start + s.length)
            mass = last.mass + s.mass
            drop = (last.drop * last.mass + s.drop * s.mass) / mass if mass else 0.0
            made[-1] = _Segment(sorted(last.pieces + s.pieces), last.start, end - last.start, mass, drop)
        else:
            made.append(s)
    return made


def _orders(segments: Sequence[_Segment]) -> Iterator[tuple[Sequence[int], Sequence[bool]]]:
    """Orders of segments from the front, last delivery first; then all others, or many shaken ones; ends kept, then turned."""
    n = len(segments)
    plain, turned = [False] * n, [True] * n
    by_drop = sorted(range(n), key=lambda s: (-segments[s].drop, s))
    several = len({s.drop for s in segments}) > 1
    density = [s.mass / s.length if s.length else 0.0 for s in segments]
    firsts = [by_drop]
    firsts += [sorted(range(n), key=lambda s: (-segments[s].drop, sign * density[s], s)) for sign in (-1, 1)]
    middle = sorted(range(n), key=lambda s: -density[s])
    firsts.append(sorted(range(n), key=lambda s: (-segments[s].drop, [*middle[1::2], *reversed(middle[::2])].index(s))))
    if not several:
        firsts.insert(0, list(range(n)))
    seen = set()
    for order in firsts:
        for flips in (plain, turned):
            key = (tuple(order), flips[0] if flips else False)
            if key not in seen:
                seen.add(key)
                yield order, flips
    if n <= 5:
        for perm in permutations(range(n)):
            yield perm, plain
            yield perm, turned
        return
    shake = random.Random(5)
    for k in range(_ORDERS):
        order = sorted(range(n), key=lambda s: (-segments[s].drop if k % 2 == 0 else 0.0, shake.random()))
        yield order, [shake.random() < 0.5 for _ in range(n)]


def _laid(pieces: Sequence[Placed], segments: Sequence[_Segment], order: Sequence[int], flipped: Sequence[bool]) -> list[Placed]:
    moved = list(pieces)
    at = 0.0
    for number in order:
        s = segments[number]
        for i in s.pieces:
            p = pieces[i]
            if flipped[number]:
                x1, _, x2, _ = _extent(p)
                new = at + (s.start + s.length - x2)
                moved[i] = p.moved(new - x1, 0.0)
            else:
                moved[i] = p.moved(at - s.start, 0.0)
        at += s.length
    return moved


def _free_shift(pieces: Sequence[Placed], deck: Deck) -> float:
    """How far the load may move towards the tail: within the overhang, and the last bearer of each floor piece on the deck."""
    free = math.inf
    for p in pieces:
        a, _, c, _ = _extent(p)
        free = min(free, deck.length + deck.overhang - c)
        if not p.on:
            free = min(free, deck.length - (a + (c - a) * (1 - BEARER)))
    return free if free < math.inf else 0.0


def stages(pieces: Sequence[Placed]) -> list[tuple[str, list[Placed]]]:
    """What stands on the deck full, and after each delivery but the last, first drop first."""
    drops = sorted({p.unit.drop for p in pieces})
    made = [("full", list(pieces))]
    for k, drop in enumerate(drops[:-1]):
        phase = next(p.unit.phase for p in pieces if p.unit.drop == drop)
        made.append((f"after phase {phase}" if phase else f"after delivery {k + 1}", [p for p in pieces if p.unit.drop > drop]))
    return made


def masses_of(pieces: Sequence[Placed], vehicle: Vehicle, dunnage_kg: float) -> list[tuple[float, float, float]]:
    """(light, heavy, x) of the pieces, and of the dunnage and gear, which stay aboard and count at the middle of the deck."""
    found = [(p.unit.mass.light, p.unit.mass.heavy, _centre(p)[0]) for p in pieces]
    if dunnage_kg and vehicle.deck:
        found.append((dunnage_kg, dunnage_kg, vehicle.deck[0] / 2))
    return found


def worst_kg(support: Support, masses: Sequence[tuple[float, float, float]]) -> float:
    """The most a support may have to carry: every mass as heavy or as light as makes it worst."""
    return extreme_load_kg(support, masses, most=True)


def _shift(pieces: Sequence[Placed], vehicle: Vehicle, dunnage_kg: float, free: float) -> tuple[float, bool] | None:
    """The smallest shift that holds every axle at every stage, and whether a least share is then short; None where none does."""
    statics = vehicle.statics
    if statics is None:
        return 0.0, False
    states = [masses_of(on_deck, vehicle, dunnage_kg) for _, on_deck in stages(pieces)]
    hard = _interval(statics, states, dunnage_kg, free, shares=False)
    if hard is None:
        return None
    wished = _interval(statics, states, dunnage_kg, free, shares=True)
    shift = hard[0] if wished is None else wished[0]
    # To the whole mm where that holds too: nobody sets a load to a fraction.
    low, high = hard if wished is None else wished
    whole = math.ceil(shift - HAIR)
    return (float(whole) if low - HAIR <= whole <= high + HAIR else shift), wished is None


def _interval(
    statics: Statics,
    states: Sequence[Sequence[tuple[float, float, float]]],
    fixed_kg: float,
    free: float,
    *,
    shares: bool,
) -> tuple[float, float] | None:
    """Shifts in [0, free] where every support holds, whatever the masses within their bounds; `fixed_kg`, the last mass, stays.

    For one choice of masses each condition is a line in the shift; the worst choice changes with the shift, which makes the
    shifts that hold an interval still. Lines taken at its ends cut it down until it no longer changes.
    """
    low, high = 0.0, free
    tried: set[float] = set()
    for _ in range(_CUTS):
        fresh = [at for at in dict.fromkeys((low, high)) if at not in tried]
        if not fresh:
            break
        for at in fresh:
            tried.add(at)
            for room, per_mm in _lines(statics, states, bool(fixed_kg), at, shares=shares):
                # room + per_mm*shift >= 0
                if abs(per_mm) < 1e-15:
                    if room < -1e-6:
                        return None
                elif per_mm < 0:
                    high = min(high, room / -per_mm)
                else:
                    low = max(low, room / -per_mm)
        if low > high + 1e-9:
            return None
    return low, high


def _lines(
    statics: Statics, states: Sequence[Sequence[tuple[float, float, float]]], last_stays: bool, at: float, *, shares: bool
) -> Iterator[tuple[float, float]]:
    """Each condition's worst choice of masses at one shift, as (what is left at no shift, what a mm more adds to it)."""
    for masses in states:
        for s in statics.supports:
            conditions = [(s.empty_kg, 1.0, 0.0)]
            if s.limit_kg is not None:
                conditions.append((s.limit_kg - s.empty_kg, -1.0, 0.0))
            if shares and s.least_share:
                conditions.append((s.empty_kg - s.least_share * statics.empty_kg, 1.0, s.least_share))
            for start, sign, least in conditions:
                room, per_mm = start, 0.0
                for k, (light, heavy, x) in enumerate(masses):
                    stays = last_stays and k == len(masses) - 1
                    part = sign * s.share_of(x) - least
                    worst = heavy if part + (0.0 if stays else sign * s.per_mm * at) < 0 else light
                    room += worst * part
                    if not stays:
                        per_mm += worst * sign * s.per_mm
                yield room, per_mm


def holds(pieces: Sequence[Placed], vehicle: Vehicle, dunnage_kg: float) -> bool:
    """Whether every axle limit holds at every stage as the pieces stand, at the worst of every mass."""
    if vehicle.statics is None:
        return True
    for _, on_deck in stages(pieces):
        masses = masses_of(on_deck, vehicle, dunnage_kg)
        for s in vehicle.statics.supports:
            if s.limit_kg is not None and worst_kg(s, masses) > s.limit_kg * (1 + 1e-9) + 1e-6:
                return False
            if extreme_load_kg(s, masses, most=False) < -1e-6:
                return False
    return True


def _from_the_rear(pieces: Sequence[Placed]) -> bool:
    """Whether earlier deliveries stand nearer the tail than later ones (by their floor pieces' rear ends)."""
    fronts: dict[int, float] = {}
    rears: dict[int, float] = {}
    for p in pieces:
        if not p.on:
            a, _, c, _ = _extent(p)
            fronts[p.unit.drop] = min(fronts.get(p.unit.drop, math.inf), a)
            rears[p.unit.drop] = max(rears.get(p.unit.drop, -math.inf), c)
    drops = sorted(fronts)
    return all(fronts[early] >= rears[late] - 1.0 for k, early in enumerate(drops) for late in drops[k + 1 :])


def _balanced(pieces: list[Placed], segments: Sequence[_Segment], deck: Deck) -> list[Placed]:
    """Each segment moved and, where it helps, mirrored across the deck, so that the centre comes to the middle line."""
    moved = list(pieces)
    residue = 0.0
    for s in sorted(segments, key=lambda s: -s.mass):
        low = min(_extent(pieces[i])[1] for i in s.pieces)
        high = max(_extent(pieces[i])[3] for i in s.pieces)
        options = []
        for mirrored in (False, True):
            spots = {}
            for i in s.pieces:
                _, a, _, c = _extent(pieces[i])
                spots[i] = low + high - c if mirrored else a
            moment = sum(
                pieces[i].unit.mass.heavy * (_centre(pieces[i])[1] - _extent(pieces[i])[1] + spots[i] - deck.width / 2) for i in s.pieces
            )
            shift = -(residue + moment) / s.mass if s.mass else 0.0
            shift = max(-low, min(deck.width - high, shift))
            options.append((abs(residue + moment + s.mass * shift), mirrored, shift, moment, spots))
        _, _, shift, moment, spots = min(options, key=lambda o: (round(o[0], 6), o[1]))
        residue += moment + s.mass * shift
        for i in s.pieces:
            _, a, _, _ = _extent(pieces[i])
            moved[i] = pieces[i].moved(0.0, spots[i] + shift - a)
    return moved


def line_load_holds(pieces: Sequence[Placed], vehicle: Vehicle) -> bool:
    """Whether no cross-section of the deck bears more per metre than it may: each stack spread along its floor piece."""
    limit = vehicle.line_load_kg_per_m
    if limit is None:
        return True
    return most_line_load(pieces) <= limit * (1 + 1e-9)


def shares_below(pieces: Sequence[Placed]) -> list[dict[int, float]]:
    """For each piece, its floor pieces with the part of its mass that comes down on each, by the area it has on them."""
    found: list[dict[int, float]] = [{} for _ in pieces]
    for i in sorted(range(len(pieces)), key=lambda i: pieces[i].layer):
        if not pieces[i].on:
            found[i] = {i: 1.0}
            continue
        a, b, c, d = _extent(pieces[i])
        areas = {}
        for k in pieces[i].on:
            p, q, r, s = _extent(pieces[k])
            areas[k] = max(0.0, min(c, r) - max(a, p)) * max(0.0, min(d, s) - max(b, q))
        whole = math.fsum(areas.values())
        for k, area in areas.items():
            for floor, part in found[k].items():
                found[i][floor] = found[i].get(floor, 0.0) + part * area / whole
    return found


def most_line_load(pieces: Sequence[Placed]) -> float:
    """The largest load of the deck in kg a metre of its length."""
    stack: dict[int, float] = {}
    for p, parts in zip(pieces, shares_below(pieces), strict=True):
        for floor, part in parts.items():
            stack[floor] = stack.get(floor, 0.0) + p.unit.mass.heavy * part
    spans = [(_extent(pieces[i])[0], _extent(pieces[i])[2], kg) for i, kg in stack.items()]
    return max(
        (sum(kg / (c - a) * 1000.0 for a, c, kg in spans if a - HAIR <= x < c - _LINE_STEP) for x, _, _ in spans),
        default=0.0,
    )


def numbered(pieces: Sequence[Placed]) -> list[Placed]:
    """In loading order: last delivery first, each on what carries it, from the front; `on` renumbered."""
    order = sorted(
        range(len(pieces)),
        key=lambda i: (
            -pieces[i].unit.drop,
            pieces[i].layer,
            pieces[i].x if pieces[i].x is not None else 0.0,
            pieces[i].y or 0.0,
            pieces[i].unit.name,
        ),
    )
    place = {old: new for new, old in enumerate(order)}
    return [replace(pieces[i], on=tuple(sorted(place[k] for k in pieces[i].on))) for i in order]
