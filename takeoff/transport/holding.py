"""What holds each stack on the deck: lashings over the top, direct lashings, blocks; against sliding and tilting.

A stack is what stands on one another; a body is a piece with what rests on it, which may tilt over the piece's own edges; a
row is stacks side by side, which one lashing goes over. What cannot be decided from the figures is a finding, never a guess.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass

from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.transport import direct, securing
from takeoff.transport.load import Lashing, Placed
from takeoff.transport.rules import Friction, rule
from takeoff.transport.securing import Row
from takeoff.transport.vehicles import Vehicle
from takeoff.transport.words import Said, down, up

_STANDARD = "EN 12195-1"
_MANY_LASHINGS = 12
#: tops of rows that differ by no more than this part of their height count as level
_LEVEL = 0.05
#: rows overlap along the deck by at least this part of the shorter
_BESIDE = 0.5
Rect = tuple[float, float, float, float]
_MOTIONS: dict[str, tuple[tuple[float, float], ...]] = {
    "forward": ((-1.0, 0.0),),
    "sideways": ((0.0, -1.0), (0.0, 1.0)),
    "rearward": ((1.0, 0.0),),
}


@dataclass(frozen=True, slots=True)
class _Body:
    """What tilts as one: its mass and centre, the rectangle it stands on and at what height, and its highest piece's rectangle."""

    name: str
    mass_kg: float
    centre: tuple[float, float, float]
    base: Rect
    level: float
    top: Rect
    height: float

    def row(self, motion: tuple[float, float]) -> Row:
        """How it would tilt that way."""
        k = 0 if motion[0] else 1
        low, high = self.base[k], self.base[k + 2]
        across, far, near = (
            (self.centre[k] - low, self.top[k + 2] - low, self.top[k] - low)
            if motion[k] < 0
            else (high - self.centre[k], high - self.top[k], high - self.top[k + 2])
        )
        return Row(self.mass_kg, across, self.centre[2] - self.level, far, near)


@dataclass(frozen=True, slots=True)
class _Figures:
    """The job's lashings and the standard's coefficients, forces in kN."""

    stf: float
    lc: float
    angle_deg: float
    mu: float
    c: dict[str, float]
    alone: dict[str, float]
    held: dict[str, float]
    factor: dict[str, float]

    def tilts(self, body: _Body, direction: str) -> bool:
        rows = [body.row(motion) for motion in _MOTIONS[direction]]
        return not all(securing.stands(self.alone[direction], r.across_mm, r.up_mm) for r in rows)

    def against_tilting(self, rows: Sequence[Row], height: float, direction: str) -> float:
        """The worse of the tension as tightened with its coefficient, and half of LC with that of standing alone."""
        f = self.factor[direction]
        return max(
            securing.top_over_rows(rows, height, self.held[direction], self.stf, self.angle_deg, f),
            securing.top_over_rows(rows, height, self.alone[direction], self.lc / 2, self.angle_deg, f),
        )


def tension_dan(job: Job) -> float:
    """The tension reckoned with, daN: as given, but at most half of LC. Raises JobError where a lashing is weaker than it."""
    lashing = job.transport.lashing
    if lashing.stf_dan > lashing.lc_dan:
        raise JobError(
            "transport.lashing: its tension stf_dan is above its strength lc_dan",
            file=job.path,
            read=f"{lashing.stf_dan:g} and {lashing.lc_dan:g}",
            right="a tension of at most half the strength",
        )
    return min(lashing.stf_dan, lashing.lc_dan * rule("tension of capacity", _STANDARD, "any").value)


def lashings_of(pieces: Sequence[Placed], vehicle: Vehicle, job: Job, friction: Friction, findings: list[Finding]) -> list[Lashing]:
    """What holds each stack on the deck, by the rule the job file chooses. Pieces without a place are held one by one."""
    stacks = _stacks(pieces)
    if job.transport.securing == "49 CFR 393":
        return [made for stack in stacks for made in _by_half_weight([pieces[i] for i in stack], job, findings)]
    figures = _figures(job, friction)
    bodies = [_bodies(pieces, stack) for stack in stacks]
    side_by_side = _rows([b[0] if b else None for b in bodies])
    made: list[Lashing] = []
    rowed: set[int] = set()
    for row in side_by_side:
        wholes = [bodies[k][0] for k in row]
        if not any(figures.tilts(body, "sideways") for body in wholes):
            continue
        entry = _row_lashing(wholes, figures, findings)
        if entry is not None:
            made.append(entry)
            rowed.update(row)
    found: list[Lashing] = []
    for number, stack in enumerate(stacks):
        found += _by_standard([pieces[i] for i in stack], bodies[number], vehicle, job, friction, figures, findings, rowed=number in rowed)
    return found + made


def _figures(job: Job, friction: Friction) -> _Figures:
    c = {d: rule("coefficient", _STANDARD, d).value for d in securing.DIRECTIONS}
    alone = {d: rule("tilting coefficient", _STANDARD, d).value for d in securing.DIRECTIONS}
    return _Figures(
        stf=tension_dan(job) / 100.0,
        lc=job.transport.lashing.lc_dan / 100.0,
        angle_deg=job.transport.lashing.angle_deg,
        mu=friction.factor,
        c=c,
        alone=alone,
        held={**c, "sideways": rule("lashing coefficient", _STANDARD, "sideways").value},
        factor={d: rule("safety factor", _STANDARD, d).value for d in securing.DIRECTIONS},
    )


# --- stacks, bodies, rows -----------------------------------------------------------------------------------------------


def _stacks(pieces: Sequence[Placed]) -> list[list[int]]:
    """What one piece stands on together is one stack; pieces come after those that carry them."""
    base = list(range(len(pieces)))
    for k, p in enumerate(pieces):
        ties = {base[j] for j in p.on} | ({k} if not p.on else set())
        first = min(ties)
        base = [first if b in ties or j == k else b for j, b in enumerate(base)]
    return [[i for i, b in enumerate(base) if b == k] for k in sorted(set(base))]


def _rect(p: Placed) -> Rect:
    assert p.x is not None
    assert p.y is not None
    length, width, _ = p.unit.on_deck(p.turned)
    return p.x, p.y, p.x + length, p.y + width


def _around(rects: Sequence[Rect]) -> Rect:
    return min(r[0] for r in rects), min(r[1] for r in rects), max(r[2] for r in rects), max(r[3] for r in rects)


def _common(one: Rect, two: Rect) -> Rect:
    return max(one[0], two[0]), max(one[1], two[1]), min(one[2], two[2]), min(one[3], two[3])


def _bodies(pieces: Sequence[Placed], stack: Sequence[int]) -> list[_Body]:
    """The whole stack first, then each upper piece with what rests on it; none where a place is not known."""
    if any(pieces[i].x is None or pieces[i].unit.size is None for i in stack):
        return []
    floor = [i for i in stack if not pieces[i].on]
    title = _title([pieces[i] for i in stack])
    made = [_body(pieces, stack, _around([_rect(pieces[i]) for i in floor]), pieces[floor[0]], title)]
    for i in stack:
        if pieces[i].on:
            members = [i]
            for j in stack:
                if j not in members and any(k in members for k in pieces[j].on):
                    members.append(j)
            below = _around([_common(_rect(pieces[i]), _rect(pieces[k])) for k in pieces[i].on])
            made.append(_body(pieces, members, below, pieces[i]))
    if len(floor) > 1:
        made += [_body(pieces, [i], _rect(pieces[i]), pieces[i]) for i in floor]
    return made


def _title(stack: Sequence[Placed]) -> str:
    """A stack by what stands on the deck."""
    return " + ".join(p.unit.name for p in stack if not p.on)


def _body(pieces: Sequence[Placed], members: Sequence[int], base: Rect, lowest: Placed, title: str = "") -> _Body:
    ours = [pieces[i] for i in members]
    mass = math.fsum(p.unit.mass.heavy for p in ours)
    x, y, z = (math.fsum(p.unit.mass.heavy * p.centre[k] for p in ours if p.centre) / mass for k in range(3))
    tops = [p.z + p.unit.on_deck(p.turned)[2] for p in ours]
    highest = _around([_rect(p) for p, top in zip(ours, tops, strict=True) if top >= max(tops) - 1.0])
    return _Body(title or lowest.unit.name, mass, (x, y, z), base, lowest.z, highest, max(tops) - lowest.z)


def _rows(wholes: Sequence[_Body | None]) -> list[list[int]]:
    """Stacks that stand side by side, two or more, from the left: they overlap along the deck with hardly a gap between them."""
    gap = rule("gap", "CTU Code", "any").value
    known = [(k, body) for k, body in enumerate(wholes) if body is not None]
    group = {k: k for k, _ in known}
    for at, (k, one) in enumerate(known):
        for j, two in known[at + 1 :]:
            a, b = one.base, two.base
            along = min(a[2], b[2]) - max(a[0], b[0])
            between = max(a[1], b[1]) - min(a[3], b[3])
            if along >= _BESIDE * min(a[2] - a[0], b[2] - b[0]) and -1.0 <= between <= gap:
                old, new = group[j], group[k]
                group = {n: new if g == old else g for n, g in group.items()}
    found = []
    for g in dict.fromkeys(group.values()):
        members = [k for k, _ in known if group[k] == g]
        if len(members) > 1:
            found.append(sorted(members, key=lambda k: _base(wholes[k])[1]))
    return found


def _base(body: _Body | None) -> Rect:
    assert body is not None
    return body.base


def _row_lashing(wholes: Sequence[_Body], figures: _Figures, findings: list[Finding]) -> Lashing | None:
    """Lashings over a row of stacks of which one can tilt sideways; None, and a finding, where that is not decided."""
    names = " + ".join(body.name for body in wholes)
    # A sentence has no room for a long row.
    told = names if len(wholes) <= 3 else f"{wholes[0].name} to {wholes[-1].name}, {len(wholes)} from left to right,"
    outer = min(wholes[0].height, wholes[-1].height)
    highest = max(body.height for body in wholes)
    span = max(b.base[0] for b in wholes), min(b.base[2] for b in wholes)
    apart = all(a.base[3] <= b.base[1] + 1.0 for a, b in itertools.pairwise(wholes))
    if highest > outer * (1 + _LEVEL) or not apart or span[1] - span[0] < _BESIDE * min(b.base[2] - b.base[0] for b in wholes):
        why = "their tops are not level" if apart and highest > outer * (1 + _LEVEL) else "they do not stand in one row"
        findings.append(
            Finding(
                "note",
                "tilting-undecided",
                f"{told} stand side by side and one can tilt sideways; {why}: the lashings are reckoned for each alone, with room "
                "for the legs between them",
                right="stakes, a block at the side, or a look of someone competent",
            )
        )
        return None
    exact = max(
        figures.against_tilting(rows, outer, "sideways")
        for rows in ([b.row((0.0, 1.0)) for b in wholes], [b.row((0.0, -1.0)) for b in reversed(wholes)])
    )
    if not math.isfinite(exact):
        findings.append(_no_lashing_holds(names, "sideways"))
        return None
    number = max(2, securing.whole(exact))
    findings.append(
        Finding("note", "tilting", f"{told} stand side by side and can tilt sideways: {number} lashings go over the whole row to hold it")
    )
    return Lashing(
        f"row of {names}",
        "top-over",
        "sideways, tilting",
        number,
        None,
        figures.angle_deg,
        _evenly(span[0], span[1], number),
        "moments of rows that lean together, no friction between them (computed; EN 12195-1:2010 has 5.4.3.2 for it)",
    )


def _no_lashing_holds(name: str, direction: str) -> Finding:
    return Finding(
        "note",
        "tilting-undecided",
        f"{name} can tilt {direction}, and a lashing over its top does not hold it",
        right="direct lashings, a block as high as its centre, or lay it flat",
    )


def _evenly(start: float, end: float, number: int) -> tuple[float, ...]:
    return tuple(start + (end - start) * (k + 0.5) / number for k in range(number))


# --- EN 12195-1 ---------------------------------------------------------------------------------------------------------


def _by_standard(
    stack: Sequence[Placed],
    bodies: Sequence[_Body],
    vehicle: Vehicle,
    job: Job,
    friction: Friction,
    figures: _Figures,
    findings: list[Finding],
    *,
    rowed: bool,
) -> list[Lashing]:
    transport, below, title = job.transport, stack[0], _title(stack)
    said = f"friction {friction.factor:g}: {friction.pair} ({friction.source})"
    if transport.lashing.method == "direct":
        laid = _directly(stack, bodies, vehicle, job, figures, findings, said)
        if laid is not None:
            return [laid]
    mass = math.fsum(p.unit.mass.heavy for p in stack)
    blocked = transport.blocked_forward
    number, governs, spots = 2, "all", (below.x, below.x + below.unit.on_deck(below.turned)[0]) if bodies and below.x is not None else None
    for d in securing.DIRECTIONS:
        if d == "forward" and blocked:
            continue
        asked = securing.whole(securing.top_over(mass, figures.c[d], figures.mu, figures.stf, figures.angle_deg, figures.factor[d]))
        if asked > number or (asked == number and governs == "all"):
            number, governs = asked, d
    tilting = _over_against_tilting(bodies, figures, findings, blocked=blocked, rowed=rowed, several=sum(not p.on for p in stack) > 1)
    if tilting is not None and tilting[0] > number:
        number, governs, spots = tilting
    made = [
        Lashing(
            title,
            "top-over",
            governs,
            number,
            friction.factor,
            figures.angle_deg,
            _evenly(*spots, number) if spots else (),
            f"EN 12195-1:2010, {'5.4.3.1' if 'tilting' in governs else '5.4.2'}; {said}",
        )
    ]
    if blocked:
        force = securing.blocking_kN(mass, figures.c["forward"], friction.factor)
        if force > 0:
            holds = Said("a block or headboard that holds ", up(force, "kN"), " (balance of 5.4.2)")
            made.append(Lashing(title, "blocking", "forward", 1, friction.factor, None, (), holds))
    if number > _MANY_LASHINGS:
        layout = _layout(stack, bodies, vehicle, figures)
        instead = () if layout is None else (", or lash it directly by four diagonals of LC ", up(layout.needed_kN * 100, "daN"), " each")
        findings.append(
            Finding(
                "note",
                "many-lashings",
                Said(f"{title} would need {number} lashings over the top: raise the friction, block it", *instead),
                right=None if layout is None else 'lashing = {method = "direct"} in [transport]',
            )
        )
    return made


def _over_against_tilting(
    bodies: Sequence[_Body], figures: _Figures, findings: list[Finding], *, blocked: bool, rowed: bool, several: bool
) -> tuple[int, str, tuple[float, float]] | None:
    """Lashings over the top against tilting of a stack's bodies: number, the direction that governs, between which places.

    None where nothing tilts. `rowed` leaves sideways tilting of the whole stack to its row; the floor pieces of a stack on
    `several` are looked at, but no lashing over what stands on them can be said to hold them.
    """
    best: tuple[int, str, tuple[float, float]] | None = None
    ways: list[str] = []
    for at, body in enumerate(bodies):
        under = several and at and body.level == bodies[0].level
        for d in securing.DIRECTIONS:
            if (rowed and d == "sideways" and at == 0) or not figures.tilts(body, d):
                continue
            if under:
                findings.append(
                    Finding(
                        "note",
                        "tilting-undecided",
                        f"{body.name} can tilt {d} under what it carries with others: no number of lashings is given for that",
                        right="a block beside it, or lay it flat",
                    )
                )
                continue
            exact = max(figures.against_tilting([body.row(motion)], body.height, d) for motion in _MOTIONS[d])
            if not math.isfinite(exact):
                findings.append(_no_lashing_holds(body.name, d))
                continue
            ways.append(d if at == 0 else f"{d} (from {body.name} up)")
            if best is None or securing.whole(exact) > best[0]:
                best = (securing.whole(exact), f"{d}, tilting", (body.top[0], body.top[2]))
    if best is not None:
        high = up(max(b.centre[2] - b.level for b in bodies), "mm")
        block = ("; a block that reaches ", high, " up would spare those against forward") if blocked and "forward" in ways else ()
        several_words = "lashing over it holds" if best[0] == 1 else "lashings over it hold"
        findings.append(
            Finding(
                "note",
                "tilting",
                Said(
                    f"{bodies[0].name}{' with what stands on it' if len(bodies) > 1 else ''} can tilt {', '.join(ways)}: "
                    f"{best[0]} {several_words} it upright",
                    *block,
                ),
            )
        )
    return best


# --- direct lashings ----------------------------------------------------------------------------------------------------


def _layout(stack: Sequence[Placed], bodies: Sequence[_Body], vehicle: Vehicle, figures: _Figures) -> direct.Layout | None:
    """Four direct lashings of a single placed piece, None where they cannot be laid out."""
    piece = stack[0]
    if len(stack) > 1 or not bodies or vehicle.deck is None or piece.x is None or piece.y is None:
        return None
    body = bodies[0]
    demands = [
        direct.Demand(d, motion, figures.c[d], body.row(motion).moment_kNmm(figures.alone[d]) if figures.tilts(body, d) else 0.0)
        for d in securing.DIRECTIONS
        for motion in _MOTIONS[d]
    ]
    box = direct.Box(piece.x, piece.y, piece.z, *piece.unit.on_deck(piece.turned))
    share = rule("direct lashing friction", _STANDARD, "any").value
    return direct.lay_out(box, body.mass_kg, figures.mu, demands, vehicle.deck[:2], vehicle.part.anchors_mm, share)


def _directly(
    stack: Sequence[Placed],
    bodies: Sequence[_Body],
    vehicle: Vehicle,
    job: Job,
    figures: _Figures,
    findings: list[Finding],
    said: str,
) -> Lashing | None:
    """Four direct lashings where they can be laid out; else None, and a finding that says why lashings go over the top."""
    name = _title(stack)
    layout = _layout(stack, bodies, vehicle, figures)
    if layout is None:
        why = (
            "several pieces stand on each other"
            if len(stack) > 1
            else "its place or size is not known"
            if not bodies
            else "no four anchors beside the deck hold it in every direction"
        )
        findings.append(
            Finding("note", "direct-lashing-undecided", f"{name} is not lashed directly, as {why}: lashings over the top are reckoned")
        )
        return None
    needed = math.ceil(layout.needed_kN * 100 - 1e-6)
    anchor = vehicle.part.anchor_dan
    for what, holds in (("the lashings' LC is", job.transport.lashing.lc_dan), ("an anchor holds", anchor)):
        if holds is not None and needed > holds:
            findings.append(
                Finding(
                    "note",
                    "direct-lashing-weak",
                    Said(
                        f"{name}: each direct lashing must hold ",
                        up(needed, "daN"),
                        f", {what} ",
                        down(holds, "daN"),
                        ": it is NOT secured",
                    ),
                    read=Said(down(holds, "daN")),
                    right=Said("at least ", up(needed, "daN"), ", or more friction"),
                )
            )
    if anchor is None:
        findings.append(
            Finding("note", "anchors-unknown", f"{vehicle.name}: what its anchors hold is not given and not looked at", right="anchor_dan")
        )
    if job.transport.blocked_forward:
        findings.append(
            Finding(
                "note",
                "headboard-not-counted",
                f"{name}: the block ahead is not counted beside direct lashings, since the standard does not cover both together",
            )
        )
    front, rear = layout.runs
    way = f"all {front}" if front == rear else f"front {front}, rear {rear}"
    tilts = any(figures.tilts(bodies[0], d) for d in securing.DIRECTIONS)
    return Lashing(
        name,
        "direct",
        layout.governs,
        4,
        figures.mu,
        round(layout.angles_deg[0], 1),
        tuple(sorted(x for x, _ in layout.anchors_mm)),
        f"EN 12195-1:2010, 5.5.3.1{' and 5.5.3.2' if tilts else ''}, {way}, from its upper corners to the deck's sides; three quarters "
        f"of {said}",
        anchors_mm=layout.anchors_mm,
        needed_dan=float(needed),
    )


# --- 49 CFR 393 ---------------------------------------------------------------------------------------------------------


def _by_half_weight(stack: Sequence[Placed], job: Job, findings: list[Finding]) -> list[Lashing]:
    """49 CFR 393.106(d) and 393.110. Lashings over to the other side count in full, those to the piece itself by half."""
    below, title = stack[0], _title(stack)
    mass = math.fsum(p.unit.mass.heavy for p in stack)
    over = job.transport.lashing.method == "top-over"
    limit_kg = job.transport.lashing.lc_dan * 10 / 9.80665 * (1.0 if over else 0.5)
    number = securing.tiedowns_by_strength(mass, limit_kg)
    if below.unit.size is not None:
        number = max(number, securing.tiedowns_by_length(below.unit.on_deck(below.turned)[0], mass, blocked=job.transport.blocked_forward))
    if number > _MANY_LASHINGS:
        way = "over the top" if over else "to its corners"
        findings.append(Finding("note", "many-lashings", f"{title} would need {number} lashings {way}: use stronger ones"))
    where: tuple[float, ...] = ()
    if over and below.x is not None and below.unit.size is not None:
        where = _evenly(below.x, below.x + below.unit.on_deck(below.turned)[0], number)
    return [
        Lashing(
            title,
            "over the top" if over else "direct",
            "all",
            number,
            None,
            None,
            where,
            "49 CFR 393.106(d), 393.110: half the weight, number by length"
            + ("" if over else "; each counted by half of its working load limit"),
        )
    ]
