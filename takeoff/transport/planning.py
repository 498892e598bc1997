"""Which vehicle carries what: fewest vehicles, then least payload capacity, then even loads, with a proven least number.

No single model does it. The least number comes from bounds that hold whatever the plan (masses by exact packing, boxes by
the best scales for them, payload as the axles leave it). For a fleet of so many vehicles, units go one by one to the vehicle
that suits, each time with a real placement and its axles; while something is left over, two vehicles are dealt out anew.
Where mass alone, or mass and the length of one lane, decide, the exact packing is the plan itself. Work is counted, the seed
fixed, ties go by name; the clock is only a safety stop, and the plan says when it rang.
"""

from __future__ import annotations

import math
import random
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import combinations_with_replacement, product

from takeoff import progress
from takeoff.transport import blocks
from takeoff.transport.arranging import Arranged
from takeoff.transport.binpack import Clock, pack
from takeoff.transport.blocks import gathered
from takeoff.transport.box_bound import boxes_need
from takeoff.transport.load import LoadUnit, NotLoaded
from takeoff.transport.loader import ALL_TRIES, MANY_TRIES, TRIES, Loader, boxes_of
from takeoff.transport.placing import HAIR
from takeoff.transport.vehicles import Vehicle
from takeoff.transport.words import Said, down, up

#: work (tens of pieces handled) for one fleet, and for levelling the loads
_FLEET_WORK, _LEVEL_WORK = 25_000, 3_000
#: mixes of kinds of vehicles looked at for one number of vehicles
_MOST_MIXES = 24
#: above this many units each goes to the first vehicle that takes it, without dealing out anew
_MANY_UNITS = 600
#: with so few left over, each vehicle is asked with care
_FEW_LEFT = 2
#: why a unit that would fit stands on no vehicle
FULL = "every vehicle of the job is full"
_GRAM = 1000.0


@dataclass(slots=True)
class Filled:
    """One vehicle of the plan and what stands on it; the pieces are placed where the deck is known."""

    vehicle: Vehicle
    units: list[LoadUnit]
    arranged: Arranged | None


@dataclass(slots=True)
class Outcome:
    """What planning gives: filled vehicles, units on none with why, the bound, whether the clock stopped it."""

    filled: list[Filled]
    left: list[NotLoaded]
    bound: int
    stopped_by_clock: bool


def plan(
    units: Sequence[LoadUnit], vehicles: Sequence[Vehicle], *, dunnage_mm: float, dunnage_kg: float, apart: bool, seconds: float
) -> Outcome:
    """All units to vehicles. `apart` keeps phases on vehicles of their own."""
    clock = Clock(seconds)
    loader = Loader(dunnage_mm, dunnage_kg, clock)
    left: list[NotLoaded] = []
    loadable: list[LoadUnit] = []
    for unit in units:
        if any(loader.fits([unit], v, MANY_TRIES) for v in vehicles):
            loadable.append(unit)
        else:
            left.append(NotLoaded(unit.name, unit.mass.heavy, why_not(unit, vehicles, loader)))
    groups = [[u for u in loadable if u.drop == drop] for drop in sorted({u.drop for u in loadable})] if apart else [loadable]
    used: Counter[str] = Counter()
    filled: list[Filled] = []
    bound = 0
    for number, group in enumerate(groups):
        if not group:
            continue
        share = clock.left() / (len(groups) - number)
        available = [v if v.count is None else replace(v, count=v.count - used[v.name]) for v in vehicles]
        dealt_out = gathered(group, _least_room(vehicles), min(loader.room_kg(v) for v in vehicles), dunnage_mm)
        loader.prepare(dealt_out, vehicles)
        made, least = _group(dealt_out, group, [v for v in available if v.count != 0], loader, Clock(share), vehicles)
        bound += least
        made = [_set_apart(f, dunnage_mm) for f in made]
        filled += made
        used.update(f.vehicle.name for f in made)
        loaded = {id(u) for f in made for u in f.units}
        left += [NotLoaded(u.name, u.mass.heavy, FULL) for u in group if id(u) not in loaded]
    return Outcome(filled, left, bound, clock.rang or loader.clock.rang)


def _least_room(vehicles: Sequence[Vehicle]) -> tuple[float, float, float]:
    """The smallest deck length, width and load height of the vehicles whose decks are known."""
    decks = [v.deck for v in vehicles if v.deck is not None]
    if not decks:
        return 0.0, 0.0, 0.0
    length, width, height = (min(d[k] for d in decks) for k in range(3))
    return length, width, height if any(v.layers for v in vehicles) else 0.0


def _set_apart(filled: Filled, dunnage_mm: float) -> Filled:
    """The same with every block as its pieces."""
    units = [part for u in filled.units for part in (u.parts or (u,))]
    arranged = filled.arranged and replace(filled.arranged, pieces=blocks.apart(filled.arranged.pieces, dunnage_mm))
    return Filled(filled.vehicle, units, arranged)


def why_not(unit: LoadUnit, vehicles: Sequence[Vehicle], loader: Loader) -> str:
    """Why a unit fits no vehicle: what is wrong with the one that comes nearest to it in mass."""
    able = [v for v in vehicles if unit.mass.heavy <= loader.room_kg(v)]
    if not able:
        most = max(vehicles, key=lambda v: (loader.room_kg(v), v.name))
        carried = down(max(0.0, loader.room_kg(most)))
        return Said("heavier than any vehicle may carry: ", up(unit.mass.heavy), " against ", carried, f" on {most.name}")
    sized = [v for v in able if v.deck is not None and unit.size is not None]
    if sized and not any(loader.deck(v).takes(unit, turned) for v in sized for turned in (False, True)):
        most = max(sized, key=lambda v: (v.deck or (0.0, 0.0, 0.0), v.name))
        assert most.deck is not None
        assert unit.size is not None
        size = [part for side in unit.size for part in (up(side, "mm"), " x ")][:-1]
        room = [part for side in most.deck if side < 1e6 for part in (down(side, "mm"), " x ")][:-1]
        return Said("larger than any deck that may carry it: ", *size, " against ", *room, f" on {most.name}")
    return f"an axle, or the deck's line load, of {able[0].name} would be over its limit wherever it stands"


def _group(
    units: list[LoadUnit],
    single: list[LoadUnit],
    vehicles: Sequence[Vehicle],
    loader: Loader,
    clock: Clock,
    fleet: Sequence[Vehicle],
) -> tuple[list[Filled], int]:
    """The plan of units that may share vehicles, and the least number of vehicles that any plan of them needs.

    `single` are the same units with no blocks: the bound is reckoned with them.
    """
    loader.clock = clock
    progress.tell(f"placing {len(units)} units on vehicles")
    least, dealt = _least(single, fleet, loader, clock)
    if not vehicles:
        return [], least
    there = sum(math.inf if v.count is None else v.count for v in vehicles)
    best: list[Filled] | None = None
    if dealt is not None and len(dealt) <= there and len(vehicles) == 1:
        best = _as_filled(dealt, single, vehicles[0], loader)
    # A first plan without a fixed number, so that there is one whatever happens; then one vehicle less, as long as that is found.
    greedy = _one_by_one(units, vehicles, loader)
    if best is None:
        best = greedy
        start = len(greedy) - 1 if _complete(greedy, units) else int(min(there, len(greedy)))
        for count in range(start, least - 1, -1):
            progress.tell(f"placing on vehicles: {least} at least, {len(best)} at best, trying {count}")
            found = _with_count(units, vehicles, count, loader, clock)
            if found is None:
                break
            best = found
    if _complete(greedy, units) and len(greedy) < len(best):
        best = greedy
    progress.tell(f"placing on vehicles: {least} at least, {len(best)} at best, evening the loads")
    best = _cheaper(best, units, vehicles, loader, clock)
    _level(best, loader, clock)
    return best, least


def _complete(filled: Sequence[Filled], units: Sequence[LoadUnit]) -> bool:
    return sum(len(f.units) for f in filled) == len(units)


# --- the least number --------------------------------------------------------------------------------------------------


def _least(units: Sequence[LoadUnit], fleet: Sequence[Vehicle], loader: Loader, clock: Clock) -> tuple[int, list[list[int]] | None]:
    """A number of vehicles that no plan can do without; and, for one kind that masses and lanes decide, the exact packing."""
    rooms = sorted((math.floor(loader.room_kg(v) * _GRAM + 1e-3) for v in fleet for _ in range(v.count or 1)), reverse=True)
    masses = [math.ceil(u.mass.heavy * _GRAM - 1e-3) for u in units]
    largest = max(math.floor(loader.room_kg(v) * _GRAM + 1e-3) for v in fleet)
    least = _by_sum(sum(masses), [largest] * len(units) if any(v.count is None for v in fleet) else rooms)
    decked = [v for v in fleet if v.deck is not None]
    boxed = [u for u in units if u.size is not None]
    if boxed and len(decked) == len(fleet):
        most = tuple(
            max(math.ceil(side - HAIR) for side in sides)
            for sides in zip(*((v.deck[0] + v.rear_overhang_mm, v.deck[1], v.deck[2]) for v in decked if v.deck), strict=True)
        )
        least = max(least, _by_boxes(boxed, decked, (most[0], most[1], most[2]), loader))
    sizes: list[tuple[int, ...]] = [(m,) for m in masses]
    capacity: tuple[int, ...] = (largest,)
    lane = _one_lane(units, decked, loader) if len(decked) == len(fleet) else None
    if lane is not None:
        sizes = [(m, s) for m, s in zip(masses, lane[0], strict=True)]
        capacity = (largest, lane[1])
    if len(units) > _MANY_UNITS:
        return least, None
    # Half of the time at most: the rest belongs to placing.
    decides = lane is not None or not boxed or not decked
    packed = pack(sizes, capacity, seconds=clock.left() * (0.6 if decides else 0.2))
    least = max(least, packed.bound)
    return least, [list(b) for b in packed.bins] if decides or len(packed.bins) == least else None


def _by_sum(total: int, rooms: Sequence[int]) -> int:
    number = 0
    for room in rooms:
        if total <= 0:
            break
        total -= room
        number += 1
    # More than the whole fleet can carry: the fleet is the bound, and the rest is named.
    return max(1, number)


def _by_boxes(units: Sequence[LoadUnit], fleet: Sequence[Vehicle], room: tuple[int, int, int], loader: Loader) -> int:
    # Where no unit carries another, or no vehicle takes layers, each counts in its full column.
    flat = room[2] >= 10**6 or not any(v.layers for v in fleet) or not any(u.carries for u in units)
    return boxes_need(boxes_of(units, room, loader.dunnage_mm, flat=flat), room)


def _one_lane(units: Sequence[LoadUnit], fleet: Sequence[Vehicle], loader: Loader) -> tuple[list[int], int] | None:
    """Deck lengths in mm and the deck's own, where no two units can stand side by side or on each other; else None."""
    if len(fleet) != 1 or any(u.size is None for u in units) or fleet[0].rear_overhang_mm:
        return None
    deck = loader.deck(fleet[0])
    sides = [u.on_deck(False) for u in units]
    narrow = sorted(min(a, b) for a, b, _ in sides)
    low = sorted(h + deck.dunnage for _, _, h in sides)
    if len(units) > 1 and (sum(narrow[:2]) <= deck.width + HAIR or (deck.layers and sum(low[:2]) <= deck.height + HAIR)):
        return None
    taken = [min(a for a, b in ((x, y), (y, x)) if b <= deck.width + HAIR and a <= deck.length + HAIR) for x, y, _ in sides]
    # In thousandths of a mm, rounded so that what is said to fit does.
    return [math.ceil(t * 1000 - 1e-3) for t in taken], math.floor(deck.length * 1000 + 1e-3)


# --- a plan ------------------------------------------------------------------------------------------------------------


def _as_filled(dealt: Sequence[Sequence[int]], units: Sequence[LoadUnit], vehicle: Vehicle, loader: Loader) -> list[Filled] | None:
    """The exact packing as a plan, where every vehicle of it can be placed and holds its axles."""
    if vehicle.count is not None and len(dealt) > vehicle.count:
        return None
    filled = []
    for members in dealt:
        chosen = [units[i] for i in members]
        arranged = loader.arranged(chosen, vehicle, MANY_TRIES)
        if arranged is None:
            return None
        filled.append(Filled(vehicle, chosen, arranged))
    return filled


def _one_by_one(units: Sequence[LoadUnit], vehicles: Sequence[Vehicle], loader: Loader) -> list[Filled]:
    """Hardest first, each to the fullest open vehicle that takes it, else to a new one: the one of most payload left."""
    filled: list[Filled] = []
    used: Counter[str] = Counter()
    hard = _hardness(units, vehicles, loader)[0]
    for unit in sorted(units, key=lambda u: (-hard[id(u)], u.name)):
        order = sorted(
            range(len(filled)), key=lambda k: (-math.fsum(u.mass.heavy for u in filled[k].units) / filled[k].vehicle.payload_kg, k)
        )
        if loader.clock.over():
            # The safety stop: from here on only the newest vehicle is asked.
            order = [len(filled) - 1] if filled else []
        home = next((k for k in order if loader.fits([*filled[k].units, unit], filled[k].vehicle, 2)), None)
        if home is not None:
            filled[home].units.append(unit)
            continue
        for v in sorted(vehicles, key=lambda v: (-v.payload_kg, v.name)):
            if (v.count is None or used[v.name] < v.count) and loader.fits([unit], v, MANY_TRIES):
                used[v.name] += 1
                filled.append(Filled(v, [unit], None))
                break
    return _finished(filled, loader)


def _finished(filled: list[Filled], loader: Loader) -> list[Filled]:
    """The same with every load arranged with care."""
    for f in filled:
        if f.arranged is None:
            f.arranged = (
                loader.arranged(f.units, f.vehicle, MANY_TRIES)
                or loader.arranged(f.units, f.vehicle, TRIES)
                or loader.arranged(f.units, f.vehicle, 2)
            )
            assert f.arranged is not None
    return filled


def _mixes(vehicles: Sequence[Vehicle], count: int, mass: float, loader: Loader) -> list[tuple[Vehicle, ...]]:
    """Fleets of so many vehicles that may carry the mass, least payload capacity first; the largest is always among them."""
    ordered = sorted(vehicles, key=lambda v: (v.payload_kg, v.name))
    # Few kinds or few vehicles, else only the largest: the number of mixes grows fast.
    if math.comb(count + len(ordered) - 1, len(ordered) - 1) > 5000:
        ordered = ordered[-1:] if ordered[-1].count is None else ordered[-2:]
    found = []
    for mix in combinations_with_replacement(ordered, count):
        number = Counter(v.name for v in mix)
        if any(v.count is not None and number[v.name] > v.count for v in ordered):
            continue
        if math.fsum(loader.room_kg(v) for v in mix) >= mass * (1 - 1e-9) - 1e-6:
            found.append(mix)
    found.sort(key=lambda mix: (math.fsum(v.payload_kg for v in mix), [v.name for v in mix]))
    return found


def _with_count(units: Sequence[LoadUnit], vehicles: Sequence[Vehicle], count: int, loader: Loader, clock: Clock) -> list[Filled] | None:
    """All units on `count` vehicles: the largest fleet first, since whether so many do is the question."""
    mixes = _mixes(vehicles, count, math.fsum(u.mass.heavy for u in units), loader)
    for mix in list(reversed(mixes))[:3]:
        found = _deal(units, mix, loader, clock, _FLEET_WORK)
        if found is not None:
            return found
        if clock.over():
            break
    return None


def _cheaper(best: list[Filled], units: Sequence[LoadUnit], vehicles: Sequence[Vehicle], loader: Loader, clock: Clock) -> list[Filled]:
    """The same number of vehicles with less payload capacity, where a plan for such a fleet is found."""
    if len(vehicles) == 1 or not _complete(best, units) or len(units) > _MANY_UNITS:
        return best
    now = math.fsum(f.vehicle.payload_kg for f in best)
    for mix in _mixes(vehicles, len(best), math.fsum(u.mass.heavy for u in units), loader)[:_MOST_MIXES]:
        if math.fsum(v.payload_kg for v in mix) >= now - 1e-6 or clock.over():
            break
        found = _deal(units, mix, loader, clock, _FLEET_WORK // 4)
        if found is not None:
            return found
    return best


def _deal(units: Sequence[LoadUnit], mix: Sequence[Vehicle], loader: Loader, clock: Clock, work: int) -> list[Filled] | None:
    """All units on exactly these vehicles; None where the work runs out first.

    Hardest first to begin with; then, while something is left over, two vehicles are emptied in part and what came off them is
    dealt out again with what was left, in an order shaken with a fixed seed. What leaves no more behind is kept.
    """
    limit = loader.work + work
    shake = random.Random(3)
    hard = _hardness(units, mix, loader)
    loads: list[list[LoadUnit]] = []
    waiting: list[LoadUnit] = list(units)
    several = len({u.drop for u in units}) > 1
    for measure, even in product(range(len(hard)), (True, False)):
        started: list[list[LoadUnit]] = [[] for _ in mix]
        left = _insert(_ordered(units, hard[measure], False), started, mix, loader, even=even)
        if not loads or _leftover(left, hard) < _leftover(waiting, hard):
            loads, waiting = started, left
        if not left:
            return _finished([Filled(v, load, None) for v, load in zip(mix, loads, strict=True) if load], loader)
        if clock.over() or len(units) > _MANY_UNITS:
            return None
    if len(mix) == 1:
        if len(units) <= _MANY_UNITS and loader.fits(units, mix[0], ALL_TRIES):
            return [Filled(mix[0], list(units), loader.arranged(units, mix[0], ALL_TRIES))]
        return None
    while waiting and loader.work < limit and not clock.over():
        one, two = shake.sample(range(len(mix)), 2)
        part = shake.choice((0.3, 0.6, 1.0))
        tried = [list(load) for load in loads]
        out = list(waiting)
        for k in (one, two):
            off = [u for u in tried[k] if shake.random() < part]
            tried[k] = [u for u in tried[k] if not any(u is o for o in off)]
            out += off
        measure = shake.randrange(len(hard))
        weight = {id(u): hard[measure][id(u)] * (0.75 + 0.5 * shake.random()) for u in out}
        out = _ordered(out, weight, several and shake.random() < 0.3)
        left = _insert(out, tried, mix, loader, even=shake.random() < 0.5, first=(one, two))
        if 0 < len(left) <= _FEW_LEFT:
            left = _insert(left, tried, mix, loader, even=False, tries=MANY_TRIES)
        if _leftover(left, hard) <= _leftover(waiting, hard) * 1.02 + 1e-9:
            loads, waiting = tried, left
    if waiting:
        return None
    return _finished([Filled(v, load, None) for v, load in zip(mix, loads, strict=True) if load], loader)


def _ordered(units: Sequence[LoadUnit], hard: dict[int, float], by_drop: bool) -> list[LoadUnit]:
    """Hardest first; `by_drop` the last delivery before all others, since nothing may stand on what leaves earlier."""
    return sorted(units, key=lambda u: (-u.drop if by_drop else 0, -hard[id(u)], u.name))


def _hardness(units: Sequence[LoadUnit], mix: Sequence[Vehicle], loader: Loader) -> list[dict[int, float]]:
    """How hard a unit is to place, measured in several ways: the larger share of mass and area, the volume, length, mass."""
    room = max(loader.room_kg(v) for v in mix)
    decks = [v.deck for v in mix if v.deck is not None]
    mass = {id(u): u.mass.heavy / room if room else 0.0 for u in units}
    if not decks:
        return [mass]
    length, width, height = (max(d[k] for d in decks) for k in range(3))
    sides = {id(u): u.size or (0.0, 0.0, 0.0) for u in units}
    area = {i: a * b / (length * width) for i, (a, b, _) in sides.items()}
    volume = {i: area[i] * (c + loader.dunnage_mm) / height for i, (_, _, c) in sides.items()}
    return [
        {i: max(area[i], mass[i]) for i in mass},
        {i: max(volume[i], mass[i]) for i in mass},
        {i: sides[i][0] / length + area[i] for i in mass},
        mass,
    ]


def _leftover(units: Sequence[LoadUnit], hard: Sequence[dict[int, float]]) -> float:
    return math.fsum(hard[0][id(u)] + hard[min(1, len(hard) - 1)][id(u)] for u in units)


def _insert(
    order: Sequence[LoadUnit],
    loads: list[list[LoadUnit]],
    mix: Sequence[Vehicle],
    loader: Loader,
    *,
    even: bool,
    first: Sequence[int] = (),
    tries: int = 4,
) -> list[LoadUnit]:
    """Put units on vehicles one by one, in place; returns those that found no place. Like units fail only once."""
    left: list[LoadUnit] = []
    mass = [math.fsum(u.mass.heavy for u in load) for load in loads]
    failed: set[object] = set()
    for unit in order:
        kind = (unit.size, unit.mass.heavy, unit.drop, unit.carries, unit.centre)
        home = None
        if kind not in failed:
            fill = [m / v.payload_kg for m, v in zip(mass, mix, strict=True)]
            places = sorted(range(len(mix)), key=lambda k: (k not in first, fill[k] if even else -fill[k], k))
            home = next((k for k in places if loader.fits([*loads[k], unit], mix[k], tries)), None)
        if home is None:
            failed.add(kind)
            left.append(unit)
        else:
            loads[home].append(unit)
            mass[home] += unit.mass.heavy
    return left


def _level(filled: list[Filled], loader: Loader, clock: Clock) -> None:
    """Even the loads: a unit of the fullest vehicle goes to the emptiest, or changes places with a lighter one there."""
    limit = loader.work + _LEVEL_WORK
    if len(filled) < 2:
        return
    stuck: set[tuple[int, int]] = set()
    while not clock.over() and loader.work < limit:
        share = [math.fsum(u.mass.heavy for u in f.units) / f.vehicle.payload_kg for f in filled]
        pairs = [
            (a, b)
            for a in sorted(range(len(filled)), key=lambda k: -share[k])
            for b in sorted(range(len(filled)), key=lambda k: share[k])
            if share[a] - share[b] > 0.01 and (a, b) not in stuck
        ]
        if not pairs:
            return
        a, b = pairs[0]
        if not _even_out(filled[a], filled[b], share[a] - share[b], loader, limit):
            stuck.add((a, b))
        else:
            stuck = {pair for pair in stuck if a not in pair and b not in pair}


def _even_out(full: Filled, light: Filled, gap: float, loader: Loader, limit: int) -> bool:
    wanted = gap / (1 / full.vehicle.payload_kg + 1 / light.vehicle.payload_kg)
    options: list[tuple[float, LoadUnit, LoadUnit | None]] = []
    for u in full.units:
        for w in (None, *light.units):
            moved = u.mass.heavy - (w.mass.heavy if w else 0.0)
            if 0 < moved < 2 * wanted * 0.95:
                options.append((abs(moved - wanted), u, w))
    options.sort(key=lambda o: (round(o[0], 6), o[1].name, o[2].name if o[2] else ""))
    for _, u, w in options[:12]:
        if loader.work >= limit:
            return False
        one = [x for x in full.units if x is not u] + ([w] if w else [])
        two = [x for x in light.units if x is not w] + [u]
        if not one:
            continue
        first = loader.arranged(one, full.vehicle)
        second = loader.arranged(two, light.vehicle) if first is not None else None
        if (
            first is None
            or second is None
            or (full.arranged and light.arranged and first.rank[0] + second.rank[0] > full.arranged.rank[0] + light.arranged.rank[0])
        ):
            continue
        full.units, full.arranged, light.units, light.arranged = one, first, two, second
        return True
    return False


def names_in_order(filled: Sequence[Filled]) -> Iterator[tuple[str, Filled]]:
    """Each vehicle with a name of its own, by the earliest delivery it carries, then by kind."""
    order = sorted(
        filled,
        key=lambda f: (
            min(u.drop for u in f.units),
            f.vehicle.name,
            -math.fsum(u.mass.heavy for u in f.units),
            min(u.name for u in f.units),
        ),
    )
    total = Counter(f.vehicle.name for f in order)
    seen: Counter[str] = Counter()
    for f in order:
        seen[f.vehicle.name] += 1
        yield (f"{f.vehicle.name} {seen[f.vehicle.name]}" if total[f.vehicle.name] > 1 else f.vehicle.name), f
