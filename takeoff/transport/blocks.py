"""Many like pieces are dealt out as blocks: so many side by side and so many up, which then stand apart again in the plan.

Placing a thousand pieces one by one takes minutes and gives no better a plan than placing a hundred blocks. Every piece of a
block rests on one of its own size, so what holds for the block holds for its pieces.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from takeoff.bounds import Bounds
from takeoff.transport.load import LoadUnit, Placed

#: with more units than this, like ones are put together until about so many are left
MANY = 160
#: a block takes no more than this part of the deck's width, the load height, and the payload
_PART = 0.34
_HAIR = 1e-6


def gathered(units: Sequence[LoadUnit], room: tuple[float, float, float], payload_kg: float, dunnage_mm: float) -> list[LoadUnit]:
    """The units with like ones in blocks where there are many; `room` is deck length, width and load height in mm."""
    if len(units) <= MANY:
        return list(units)
    wanted = -(-len(units) // MANY)
    kinds: dict[object, list[LoadUnit]] = {}
    for u in units:
        alone = u.size is None or not u.carries or u.centre is not None or u.findings
        kinds.setdefault(id(u) if alone else (u.size, u.mass, u.drop, u.phase, u.kind), []).append(u)
    made: list[LoadUnit] = []
    for members in kinds.values():
        made += _blocks(members, room, payload_kg, dunnage_mm, wanted)
    return made


def _blocks(members: list[LoadUnit], room: tuple[float, float, float], payload_kg: float, dunnage: float, wanted: int) -> list[LoadUnit]:
    size = members[0].size
    if size is None or len(members) == 1:
        return list(members)
    _, width, height = size
    most = max(1, int(_PART * payload_kg / members[0].mass.heavy)) if members[0].mass.heavy > 0 else wanted
    across = max(1, min(wanted, most, int(_PART * room[1] / width)))
    up = max(1, min(-(-wanted // across), most // across, int(_PART * room[2] / (height + dunnage))))
    made = []
    left = list(members)
    while left:
        rows = min(up, len(left) // across)
        grid = (across, rows) if rows else (len(left), 1)
        parts, left = left[: grid[0] * grid[1]], left[grid[0] * grid[1] :]
        made.append(_block(parts, grid, dunnage))
    return made


def _block(parts: Sequence[LoadUnit], grid: tuple[int, int], dunnage: float) -> LoadUnit:
    first = parts[0]
    if len(parts) == 1:
        return first
    assert first.size is not None
    length, width, height = first.size
    size = (length, grid[0] * width, grid[1] * (height + dunnage) - dunnage)
    return replace(first, mass=Bounds.total(p.mass for p in parts), size=size, parts=tuple(parts), grid=grid)


def apart(placed: Sequence[Placed], dunnage: float) -> list[Placed]:
    """The same load with every block as its pieces; `on` renumbered."""
    made: list[Placed] = []
    tops: list[list[int]] = []
    for p in placed:
        below = [k for j in p.on for k in tops[j]]
        if not p.unit.parts:
            tops.append([len(made)])
            made.append(replace(p, on=_met(p, below, made)))
            continue
        across, up = p.unit.grid
        size = p.unit.parts[0].size
        assert size is not None
        assert p.x is not None
        assert p.y is not None
        first = len(made)
        for k, part in enumerate(p.unit.parts):
            row, column = divmod(k, across)
            x, y = (p.x + column * size[1], p.y) if p.turned else (p.x, p.y + column * size[1])
            piece = Placed(part, x, y, p.z + row * (size[2] + dunnage), p.layer + row, p.turned)
            made.append(replace(piece, on=(len(made) - across,) if row else _met(piece, below, made)))
        tops.append(list(range(first + across * (up - 1), len(made))))
    return _layers(made)


def _met(piece: Placed, below: Sequence[int], made: Sequence[Placed]) -> tuple[int, ...]:
    """Which of the pieces below it a piece lies over."""
    if piece.x is None or piece.y is None:
        return ()
    length, width, _ = piece.unit.on_deck(piece.turned)
    found = []
    for k in below:
        other = made[k]
        if other.x is None or other.y is None:
            continue
        along, across, _ = other.unit.on_deck(other.turned)
        if (
            min(piece.x + length, other.x + along) - max(piece.x, other.x) > _HAIR
            and min(piece.y + width, other.y + across) - max(piece.y, other.y) > _HAIR
        ):
            found.append(k)
    return tuple(found)


def _layers(placed: Sequence[Placed]) -> list[Placed]:
    """Layers counted from what carries each piece."""
    made: list[Placed] = []
    for p in placed:
        made.append(replace(p, layer=1 + max((made[k].layer for k in p.on), default=0)))
    return made
