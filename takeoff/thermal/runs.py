"""Members in one line, fixed at one point: where each joint stands at each temperature, and the gap to set in it. Rank 5.

Positions are measured along the line, from where its start stands at the reference temperature; the fixed point does not
move, and pieces push each other outward from it: position = fixed point + sum of the lengths between, each by its own law.
Gaps are not in these positions, but in `set_out_mm`, which is where each piece ends when it is set with its gaps.

With a joint at each piece, a joint takes up the movement of the one piece between it and the last joint on the side of the
fixed point. With joints at the ends only, the pieces are joined solid and the whole movement arrives at the free ends.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from takeoff.findings import Finding
from takeoff.materials import Material
from takeoff.thermal import notes
from takeoff.thermal.lengths import REFERENCE_C, ratio
from takeoff.thermal.spread import alpha_spread

#: a run of more pieces is given in total, not joint by joint
MOST_PIECES = 2_000


@dataclass(frozen=True, slots=True)
class RunPart:
    """Members of one row within a run: `quantity` pieces of `length_mm` at reference, and why not where something is missing."""

    mark: str
    quantity: int
    length_mm: float | None
    material: Material | None
    row: int = 0


@dataclass(frozen=True, slots=True)
class RunRule:
    """How a run is held. `fixed` is start, end or a mark; `assumed` where nobody said. Gaps in mm, None where not limited."""

    name: str
    fixed: str = "start"
    order: tuple[str, ...] = ()
    joint_min_mm: float | None = None
    joint_max_mm: float | None = None
    joints: str = "each"
    assumed: bool = False


@dataclass(frozen=True, slots=True)
class RunTemperatures:
    """The named temperatures of the job; movement is from the coldest to the warmest, gaps are set at `set_at_C`."""

    named: Mapping[str, float]
    reference_C: float = REFERENCE_C

    @property
    def from_C(self) -> float:
        return self.named.get("coldest", min(self.named.values()))

    @property
    def to_C(self) -> float:
        return self.named.get("warmest", max(self.named.values()))

    @property
    def set_at_C(self) -> float:
        return self.named.get("erect", self.reference_C)


@dataclass(frozen=True, slots=True)
class Joint:
    """The end of a piece, and the gap there. `before` is the next piece, None at the line's end; mm by name of temperature."""

    after: str | None
    before: str | None
    position_mm: dict[str, float | None]
    gap_mm: dict[str, float | None]
    gap_to_set_mm: float | None
    set_out_mm: float | None

    def as_record(self) -> dict[str, Any]:
        return {
            "after": self.after, "before": self.before, "position_mm": self.position_mm, "gap_mm": self.gap_mm,
            "gap_to_set_mm": self.gap_to_set_mm, "set_out_mm": self.set_out_mm,
        }


@dataclass(frozen=True, slots=True)
class RunMovement:
    """A line of members. None throughout where the run could not be laid out; `findings` say why.

    movement_at_start_mm, movement_at_end_mm : how far each end of the line moves from the coldest to the warmest, away from
        the fixed point counted positive, if the pieces push on each other.
    closing_mm, opening_mm : of the whole line, from setting to its longest and to its shortest.
    """

    run: str
    fixed_at: str
    joints_rule: str
    pieces: int
    length_mm: float | None
    from_C: float
    to_C: float
    movement_mm: float | None
    movement_low_mm: float | None
    movement_high_mm: float | None
    movement_at_start_mm: float | None
    movement_at_end_mm: float | None
    set_at_C: float
    closing_mm: float | None
    opening_mm: float | None
    joints: tuple[Joint, ...] = ()
    materials: tuple[str, ...] = ()
    findings: tuple[Finding, ...] = field(default=())

    def as_record(self) -> dict[str, Any]:
        """For the JSON: mm and °C, what is not known null."""
        return {
            "run": self.run, "fixed_at": self.fixed_at, "joints_rule": self.joints_rule, "pieces": self.pieces,
            "length_mm": self.length_mm, "from_C": self.from_C, "to_C": self.to_C, "movement_mm": self.movement_mm,
            "movement_low_mm": self.movement_low_mm, "movement_high_mm": self.movement_high_mm,
            "movement_at_start_mm": self.movement_at_start_mm, "movement_at_end_mm": self.movement_at_end_mm,
            "set_at_C": self.set_at_C, "closing_mm": self.closing_mm, "opening_mm": self.opening_mm,
            "joints": [joint.as_record() for joint in self.joints], "materials": list(self.materials),
            "findings": [f.as_record() for f in self.findings],
        }


def run_movement(rule: RunRule, parts: Sequence[RunPart], temperatures: RunTemperatures) -> RunMovement:
    """Lay a run out. What prevents it (an order with gaps, a member without length or coefficient) is a finding, never an error."""
    line, problem = _ordered(rule, parts)
    fixed_index, fixed_at = _fixed(rule, line)
    if problem is None and fixed_index is None:
        problem = Finding("refused", "run-order", f"run {rule.name}: no member of this mark stands in it", read=rule.fixed,
                          right="fixed = \"start\", \"end\" or the mark of a member of the run")
    problem = problem or _incomplete(rule, line)
    kinds = tuple(dict.fromkeys(p.material for p in line if p.material is not None))
    if problem is None:
        refused = [f for f in _said(kinds, needed(temperatures)) if f.level == "refused"]
        if refused:
            return _not_laid_out(rule, parts, fixed_at, temperatures, refused)
        found = _said(kinds, (*needed(temperatures), *temperatures.named.values()))
        found += [f for m in kinds for f in notes.about_material(m)]
        return _lay_out(rule, line, fixed_index or 0, fixed_at, temperatures, found)
    return _not_laid_out(rule, parts, fixed_at, temperatures, [problem])


def needed(temperatures: RunTemperatures) -> tuple[float, ...]:
    """The temperatures without which there is no movement; at another named one a position may be missing."""
    return tuple(dict.fromkeys((temperatures.reference_C, temperatures.from_C, temperatures.to_C, temperatures.set_at_C)))


def _said(kinds: Sequence[Material], temperatures_C: Sequence[float]) -> list[Finding]:
    """What is said of the materials of a line at these temperatures, each thing once."""
    return list(dict.fromkeys(f for m in kinds for f in notes.about_temperatures(m, temperatures_C)))


def _ordered(rule: RunRule, parts: Sequence[RunPart]) -> tuple[list[RunPart], Finding | None]:
    """The parts in the order asked for. A mark named as often as it has pieces is laid piece by piece."""
    if not parts:
        return [], Finding("refused", "run-order", f"run {rule.name}: no member of the list names this run",
                           right="its name in the list's run column")
    if not rule.order:
        return list(parts), None
    waiting: dict[str, list[RunPart]] = {}
    for part in parts:
        waiting.setdefault(part.mark, []).append(part)
    named: dict[str, int] = {}
    for mark in rule.order:
        named[mark] = named.get(mark, 0) + 1
    line: list[RunPart] = []
    for mark in rule.order:
        rows = waiting.get(mark, [])
        pieces = sum(p.quantity for p in parts if p.mark == mark)
        if named[mark] == 1:
            line += rows
            waiting[mark] = []
        elif named[mark] == pieces and rows:
            first = rows[0]
            line.append(RunPart(first.mark, 1, first.length_mm, first.material, first.row))
            rest = RunPart(first.mark, first.quantity - 1, first.length_mm, first.material, first.row)
            waiting[mark] = [rest, *rows[1:]] if rest.quantity else rows[1:]
        elif rows:
            line.append(rows.pop(0))
        if not pieces or (not rows and named[mark] > 1 and named[mark] != pieces):
            return line, Finding("refused", "run-order", f"run {rule.name}: its order names a piece that is not there", read=mark,
                                 right="the marks of the members that name this run, each as often as it is used")
    left = [part.mark for rows in waiting.values() for part in rows]
    if left:
        return line, Finding("refused", "run-order", f"run {rule.name}: its order has gaps: members of it are not in the order",
                             read=", ".join(dict.fromkeys(left))[:80], right="every mark of the run in its order")
    return line, None


def _fixed(rule: RunRule, line: Sequence[RunPart]) -> tuple[int | None, str]:
    """The number of pieces before the fixed point, and where it is in words."""
    total = sum(part.quantity for part in line)
    if rule.fixed == "start":
        return 0, "start of the line" + (" (assumed)" if rule.assumed else "")
    if rule.fixed == "end":
        return total, "end of the line"
    before = 0
    for part in line:
        if part.mark == rule.fixed:
            return before, f"start of {part.mark}" + (f" (the first of {part.quantity})" if part.quantity > 1 else "")
        before += part.quantity
    return None, rule.fixed


def _incomplete(rule: RunRule, line: Sequence[RunPart]) -> Finding | None:
    lacking = {
        "quantity": [p for p in line if p.quantity < 1], "material": [p for p in line if p.material is None],
        "length": [p for p in line if p.length_mm is None],
    }
    for what, those in lacking.items():
        missing = [part.mark or f"row {part.row}" for part in those]
        if missing:
            return Finding("refused", "run-incomplete", f"run {rule.name}: nothing is computed, since a member has no known {what}",
                           read=", ".join(dict.fromkeys(missing))[:80], right=f"a {what} for each member of the run")
    return None


def _not_laid_out(
    rule: RunRule, parts: Sequence[RunPart], fixed_at: str, temperatures: RunTemperatures, findings: Sequence[Finding]
) -> RunMovement:
    return RunMovement(
        rule.name, fixed_at, rule.joints, sum(p.quantity for p in parts), None, temperatures.from_C, temperatures.to_C, None, None, None,
        None, None, temperatures.set_at_C, None, None, (), (), tuple(findings),
    )


def _length(part: RunPart, temperature_C: float, temperatures: RunTemperatures) -> float:
    """One piece's length at a temperature; everything was seen to be known before."""
    assert part.material is not None
    assert part.length_mm is not None
    times = ratio(part.material, temperatures.reference_C, temperature_C)
    assert times is not None
    return part.length_mm * times


def _lay_out(
    rule: RunRule, line: Sequence[RunPart], fixed: int, fixed_at: str, temperatures: RunTemperatures, findings: list[Finding]
) -> RunMovement:
    pieces = sum(part.quantity for part in line)
    at = {t: [_length(part, t, temperatures) for part in line] for t in _all(temperatures) if _known(line, t, temperatures)}

    def whole(t: float, first: int = 0, last: int | None = None) -> float:
        """Length of the pieces numbered from `first` to before `last`."""
        last = pieces if last is None else last
        parts, start = [], 0
        for part, length in zip(line, at[t], strict=True):
            count = min(last, start + part.quantity) - max(first, start)
            if count > 0:
                parts.append(length * count)
            start += part.quantity
        return math.fsum(parts)

    from_C, to_C, set_C = temperatures.from_C, temperatures.to_C, temperatures.set_at_C
    states = {t: whole(t) for t in (from_C, to_C, set_C)}
    moved = states[to_C] - states[from_C]
    low, high = _bounds(line, at, from_C, to_C)
    joints: tuple[Joint, ...] = ()
    if pieces <= MOST_PIECES:
        joints, more = _joints(rule, line, fixed, temperatures, at)
        findings = [*findings, *more]
    else:
        total = f"run {rule.name}: {pieces} pieces are given in total, not joint by joint"
        findings = [*findings, Finding("note", "run-not-laid-out", total)]
    if rule.assumed:
        findings = [Finding("assumed", "run-fixed-assumed", f"run {rule.name}: taken as fixed at its first member's start, with a joint at "
                            "each piece", right=f"[[runs]] name = \"{rule.name}\" and fixed in the job file"), *findings]
    return RunMovement(
        rule.name, fixed_at, rule.joints, pieces, whole(temperatures.reference_C), from_C, to_C, moved, low, high,
        whole(to_C, 0, fixed) - whole(from_C, 0, fixed), whole(to_C, fixed) - whole(from_C, fixed), set_C,
        max(states.values()) - states[set_C], states[set_C] - min(states.values()), joints,
        tuple(dict.fromkeys(part.material.name for part in line if part.material is not None)), tuple(dict.fromkeys(findings)),
    )


def _known(line: Sequence[RunPart], temperature_C: float, temperatures: RunTemperatures) -> bool:
    """Whether every piece has a length at a temperature."""
    kinds = {part.material for part in line if part.material is not None}
    return all(ratio(m, temperatures.reference_C, temperature_C) is not None for m in kinds)


def _all(temperatures: RunTemperatures) -> list[float]:
    wanted = (*temperatures.named.values(), temperatures.from_C, temperatures.to_C, temperatures.set_at_C, temperatures.reference_C)
    return list(dict.fromkeys(wanted))


def _bounds(line: Sequence[RunPart], at: Mapping[float, list[float]], from_C: float, to_C: float) -> tuple[float, float]:
    """The movement with every member's low, and with every member's high coefficient."""
    low: list[float] = []
    high: list[float] = []
    for part, start, end in zip(line, at[from_C], at[to_C], strict=True):
        assert part.material is not None
        spread, moved = alpha_spread(part.material), (end - start) * part.quantity
        least, most = sorted((moved * spread.low, moved * spread.high))
        low.append(least)
        high.append(most)
    return math.fsum(low), math.fsum(high)


def _joints(
    rule: RunRule, line: Sequence[RunPart], fixed: int, temperatures: RunTemperatures, at: Mapping[float, list[float]]
) -> tuple[tuple[Joint, ...], list[Finding]]:
    """Every joint from the start of the line to its end."""
    part_of = [i for i, part in enumerate(line) for _ in range(part.quantity)]
    count, reference, set_C = len(part_of), temperatures.reference_C, temperatures.set_at_C
    names = _names(line)
    #: ends[t][k]: where piece k starts (and piece k - 1 ends) at t, gaps not counted
    ends: dict[float, list[float]] = {}
    datum = math.fsum(at[reference][i] for i in part_of[:fixed])
    for t, lengths in at.items():
        outward = [0.0] * (count + 1)
        for k in range(fixed, count):
            outward[k + 1] = outward[k] + lengths[part_of[k]]
        for k in range(fixed - 1, -1, -1):
            outward[k] = outward[k + 1] - lengths[part_of[k]]
        ends[t] = [datum + x for x in outward]
    gaps, problem = _gaps(rule, part_of, fixed, temperatures, at)
    shift = _shifts(gaps, fixed, count)
    joints = []
    for k in range(count + 1):
        inner = 0 < k < count
        if not inner and (k not in gaps):
            continue
        closed = gaps.get(k)
        joints.append(Joint(
            names[k - 1] if k else None, names[k] if k < count else None,
            {name: ends[t][k] if t in ends else None for name, t in temperatures.named.items()},
            {} if closed is None else {name: closed.get(t) for name, t in temperatures.named.items()},
            None if closed is None else closed[set_C], ends[set_C][k] + shift[k],
        ))
    return tuple(joints), problem


def _names(line: Sequence[RunPart]) -> list[str]:
    """A name for each piece: its mark, and `MARK #2` for further pieces of one mark."""
    met: dict[str, int] = {}
    names = []
    for part in line:
        mark = part.mark or f"row {part.row}"
        for _ in range(part.quantity):
            met[mark] = met.get(mark, 0) + 1
            names.append(mark if met[mark] == 1 else f"{mark} #{met[mark]}")
    return names


def _shifts(gaps: Mapping[int, Mapping[float, float]], fixed: int, count: int) -> list[float]:
    """How far the gaps set on the way from the fixed point move each piece's end outward; before the gap at that end itself."""
    shift = [0.0] * (count + 1)
    widths = {k: next(iter(closed.values())) for k, closed in gaps.items()}
    for k in range(fixed + 1, count + 1):
        shift[k] = shift[k - 1] + widths.get(k - 1, 0.0) * (k - 1 > fixed)
    for k in range(fixed - 1, -1, -1):
        shift[k] = shift[k + 1] - widths.get(k + 1, 0.0) * (k + 1 < fixed)
    return shift


def _gaps(
    rule: RunRule, part_of: Sequence[int], fixed: int, temperatures: RunTemperatures, at: Mapping[float, list[float]]
) -> tuple[dict[int, dict[float, float]], list[Finding]]:
    """Joint number -> its gap at each temperature, the one at setting first; and the first joint that no gap can serve."""
    count, set_C = len(part_of), temperatures.set_at_C
    states = dict.fromkeys((set_C, temperatures.from_C, temperatures.to_C))
    gaps: dict[int, dict[float, float]] = {}
    problems: list[tuple[int, float]] = []
    for k in range(count + 1):
        if rule.joints == "ends":
            pieces = range(fixed) if k == 0 else range(fixed, count) if k == count else None
        else:
            pieces = None if k in (0, count) else range(k - 1, k) if k > fixed else range(k, k + 1) if k < fixed else range(0)
        if pieces is None or (rule.joints == "ends" and not len(pieces)):
            continue
        lengths = {t: math.fsum(at[t][part_of[i]] for i in pieces) for t in at}
        longest, shortest = max(lengths[t] for t in states), min(lengths[t] for t in states)
        least = rule.joint_min_mm or 0.0
        if rule.joint_min_mm is None and rule.joint_max_mm is not None:
            least = rule.joint_max_mm - (longest - shortest)
        gaps[k] = {t: least + longest - lengths[t] for t in dict.fromkeys((set_C, *at))}
        widest = least + longest - shortest
        if least < 0 or (rule.joint_max_mm is not None and widest > rule.joint_max_mm * (1 + 1e-12)):
            problems.append((k, (rule.joint_min_mm or 0.0) + longest - shortest))
    if not problems:
        return gaps, []
    needs = max(widest for _, widest in problems)
    return gaps, [Finding(
        "refused", "gap-impossible", f"run {rule.name}: no gap serves {len(problems)} of its joints: the widest needs {needs:.2f} mm",
        read=f"joint_max_mm {rule.joint_max_mm:g}", right=f"a joint that takes {needs:.2f} mm, or more joints",
    )]
