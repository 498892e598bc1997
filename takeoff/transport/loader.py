"""Whether a set of units goes on a vehicle: masses and boxes told quickly, then a real placement with its axles, remembered."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

from takeoff.transport.arranging import Arranged, arrange
from takeoff.transport.binpack import Clock
from takeoff.transport.load import LoadUnit, Placed
from takeoff.transport.lower_bounds import box_shares
from takeoff.transport.placing import HAIR, Deck, place
from takeoff.transport.vehicles import Vehicle

#: orders tried for one set of units on one deck: while units are dealt out, and for a single unit or a last try
TRIES, MANY_TRIES = 6, 30
#: orders tried where one vehicle is to take everything that is left
ALL_TRIES = 300
#: ways of counting boxes that are asked before a placement is tried
_WAYS = 24


class Loader:
    """Tries sets of units on vehicles, and remembers the answers: like units on like vehicles need one try."""

    def __init__(self, dunnage_mm: float, dunnage_kg: float, clock: Clock) -> None:
        self.dunnage_mm, self.dunnage_kg, self.clock = dunnage_mm, dunnage_kg, clock
        self.work = 0
        self._shares: dict[str, dict[int, tuple[float, ...]]] = {}
        self._known: dict[tuple[str, tuple[int, ...]], tuple[bool, int]] = {}
        self._kinds: dict[object, int] = {}
        self._kind_of: dict[int, int] = {}
        self._asked = 0

    def prepare(self, units: Sequence[LoadUnit], vehicles: Sequence[Vehicle]) -> None:
        """Remember what share of each deck every unit takes at the least, in the ways of counting that bind most."""
        for v in vehicles:
            if v.deck is None:
                continue
            sized = [
                u
                for u in units
                if u.size is not None and v.deck is not None and any(self.deck(v).takes(u, turned) for turned in (False, True))
            ]
            room = (math.ceil(v.deck[0] + v.rear_overhang_mm - HAIR), math.ceil(v.deck[1] - HAIR), math.ceil(v.deck[2] - HAIR))
            flat = room[2] >= 10**6 or not v.layers or not any(u.carries for u in sized)
            ways = box_shares(boxes_of(sized, room, self.dunnage_mm, flat=flat), room) if sized else []
            ways.sort(key=lambda values: -sum(values))
            self._shares[v.name] = (
                {id(u): tuple(values) for u, values in zip(sized, zip(*ways[:_WAYS], strict=True), strict=True)} if ways else {}
            )

    def deck(self, vehicle: Vehicle) -> Deck:
        assert vehicle.deck is not None
        length, width, height = vehicle.deck
        return Deck(length, width, height, vehicle.rear_overhang_mm, self.dunnage_mm, vehicle.layers)

    def room_kg(self, vehicle: Vehicle) -> float:
        return vehicle.most_kg - self.dunnage_kg

    def fits(self, units: Sequence[LoadUnit], vehicle: Vehicle, tries: int = TRIES) -> bool:
        """Whether these units are known to go on the vehicle together."""
        if not self._may(units, vehicle):
            return False
        self._asked += 1
        self.work += self._asked % 16 == 0
        key = (vehicle.name, tuple(sorted(self._kind(u) for u in units)))
        known, tried = self._known.get(key, (False, 0))
        if not known and tries > tried:
            known = self.arranged(units, vehicle, tries, quick=True) is not None
            self._known[key] = known, tries
        return known

    def _kind(self, unit: LoadUnit) -> int:
        """A number that like units share; they live as long as the plan is made."""
        known = self._kind_of.get(id(unit))
        if known is None:
            kind = (unit.size, unit.mass, unit.drop, unit.carries, unit.centre)
            known = self._kind_of[id(unit)] = self._kinds.setdefault(kind, len(self._kinds))
        return known

    def _may(self, units: Sequence[LoadUnit], vehicle: Vehicle) -> bool:
        """Masses and volumes leave room: what is quickly told."""
        mass = math.fsum(u.mass.heavy for u in units)
        if mass > self.room_kg(vehicle) * (1 + 1e-9) + 1e-6:
            return False
        if vehicle.deck is None:
            return True
        shares = self._shares.get(vehicle.name, {})
        known = [shares[id(u)] for u in units if id(u) in shares]
        return all(sum(column) <= 1 + 1e-6 for column in zip(*known, strict=True))

    def arranged(self, units: Sequence[LoadUnit], vehicle: Vehicle, tries: int = TRIES, *, quick: bool = False) -> Arranged | None:
        """The best arrangement found, None where none is; the first that holds where it must be `quick`.

        Units without size are loaded by mass only. The axles hold with them at either end of the deck where that is to be had,
        else with them in the middle.
        """
        if not self._may(units, vehicle):
            return None
        sized = [u for u in units if u.size is not None]
        bare = [u for u in units if u.size is None]
        without = [Placed(u, None, None, 0.0, 1, False) for u in bare]
        if vehicle.deck is None or not sized:
            return Arranged([Placed(u, None, None, 0.0, 1, False) for u in sized] + without, False, False, 0.0)
        deck = self.deck(vehicle)
        # What has no place counts in the middle of the deck, as dunnage does: a bag of bolts must not lift the axles' limits.
        fixed_kg = self.dunnage_kg + math.fsum(u.mass.heavy for u in bare)
        ways, attempts = place(sized, deck, tries)
        best = None
        if bare:
            best = self._best(ways, vehicle.with_loose(math.fsum(u.mass.heavy for u in bare)), deck, fixed_kg, quick=quick)
        if best is None:
            best = self._best(ways, vehicle, deck, fixed_kg, quick=quick)
        # One for every ten pieces handled, so that the limits mean much the same work for few pieces and for many.
        self.work += 1 + attempts * len(sized) // 10
        return None if best is None else replace(best, pieces=[*best.pieces, *without])

    @staticmethod
    def _best(ways: Sequence[Sequence[Placed]], vehicle: Vehicle, deck: Deck, fixed_kg: float, *, quick: bool) -> Arranged | None:
        best: Arranged | None = None
        for placed in ways:
            found = arrange(placed, vehicle, deck, fixed_kg, quick=quick)
            if found is not None and (best is None or found.rank < best.rank):
                best = found
            if best is not None and (quick or best.rank[0] == 0):
                break
        return best


def boxes_of(
    units: Sequence[LoadUnit], room: tuple[int, int, int], dunnage_mm: float, *, flat: bool
) -> list[tuple[list[tuple[int, int]], int]]:
    """Units as boxes of whole mm, rounded down so that a bound stays one; where nothing may be put on anything, of full height."""
    boxes = []
    for u in units:
        length, width, height = (math.floor(side + HAIR) for side in u.on_deck(False))
        ways = [(a, b) for a, b in ((length, width), (width, length)) if a <= room[0] and b <= room[1]] or [
            (min(length, room[0]), min(width, room[1]))
        ]
        boxes.append((ways, room[2] if flat else min(room[2], height + math.floor(dunnage_mm))))
    return boxes
