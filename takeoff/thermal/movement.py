"""How far a length moves between two temperatures, alone and against another material, and the gap to set. Rank 5.

Movement is L(to) - L(from), growth positive; the mean coefficient belongs to the length at 20 °C. The gap to set at a
temperature is the least that never falls below its least size as the piece lengthens: gap(T) = least + L(longest) - L(T).
Where only a greatest size is given, it is the widest that never exceeds it: gap(T) = greatest - (L(T) - L(shortest)).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.materials import Elongation, Law, Material, law_of
from takeoff.thermal import notes
from takeoff.thermal.lengths import REFERENCE_C, Length, factor, grown, length_at, ratio
from takeoff.thermal.spread import AlphaSpread, alpha_spread

#: steps of the table of gaps, and its greatest number of steps: a wider range takes a multiple
STEP_C, MOST_STEPS = 5.0, 400


@dataclass(frozen=True, slots=True)
class Step:
    """The gap to set where the piece has this temperature; `against_mm` where the other side moves too."""

    temperature_C: float
    gap_mm: float | None
    against_mm: float | None


@dataclass(frozen=True, slots=True)
class Change:
    """How much longer than at `Movement.changes_from_C` the piece is at a temperature, mm; below zero where it is shorter.

    low_mm, high_mm : with the row's low and high coefficient. other_mm : the other material's change, where there is one.
    """

    temperature_C: float
    change_mm: float
    low_mm: float
    high_mm: float
    other_mm: float | None


@dataclass(frozen=True, slots=True)
class Against:
    """The same length of another material beside it: its movement, and ours less its."""

    material: Material
    law: Law
    movement_mm: float | None
    difference_mm: float | None
    closing_mm: float | None
    opening_mm: float | None
    gap_to_set_mm: float | None


@dataclass(frozen=True, slots=True)
class Movement:
    """A length between two temperatures. Lengths and movements in mm; None where the material gives no answer.

    movement_low_mm, movement_high_mm : with the row's low and high coefficient, in the order of numbers.
    lengths : at 20 °C, the temperature the length was given at, from, to, and setting, each with a steel tape's reading.
    closing_mm, opening_mm : how far a gap set at `set_at_C` closes to the longest and opens to the shortest state between
        the temperatures; never below zero. `gap_to_set_mm` is the gap at setting.
    by_direction_mm : movement of the same size across, where the material grows differently across.
    changes : length over the whole range in the steps of `table`, the setting with them, coldest first, against the length at
        setting, or at `from_C` where nothing is set; empty where the material gives no answer.
    """

    material: Material
    length_mm: float
    length_at_C: float
    from_C: float
    to_C: float
    law: Law
    spread: AlphaSpread
    movement_mm: float | None
    movement_low_mm: float | None
    movement_high_mm: float | None
    mean_alpha_per_K: float | None
    by_direction_mm: dict[str, float]
    lengths: tuple[Length, ...]
    set_at_C: float | None
    closing_mm: float | None
    opening_mm: float | None
    gap_min_mm: float | None
    gap_max_mm: float | None
    gap_to_set_mm: float | None
    table: tuple[Step, ...]
    against: Against | None
    findings: tuple[Finding, ...]
    changes: tuple[Change, ...] = ()

    @property
    def changes_from_C(self) -> float:
        """The temperature at which `changes` are zero."""
        return self.from_C if self.set_at_C is None else self.set_at_C

    @property
    def closing_high_mm(self) -> float | None:
        """The closing with the row's high coefficient: what a cautious gap allows for."""
        return None if self.closing_mm is None else self.closing_mm * self.spread.high

    @property
    def opening_high_mm(self) -> float | None:
        """The opening with the row's high coefficient."""
        return None if self.opening_mm is None else self.opening_mm * self.spread.high

    @property
    def answered(self) -> bool:
        """Whether everything that was asked has an answer."""
        return not any(f.level == "refused" for f in self.findings)


def movement(
    material: Material, length_mm: float, from_C: float, to_C: float, *, length_at_C: float = REFERENCE_C, set_at_C: float | None = None,
    gap_min_mm: float | None = None, gap_max_mm: float | None = None, against: Material | None = None, law: str | None = None,
) -> Movement:
    """The movement of a length that is `length_mm` at `length_at_C`, between two temperatures of the metal.

    `law` names one published curve in place of the row's own law (of `material`; the other keeps its own). Raises
    InputError on a length or gap below zero, a least gap above the greatest, or a temperature below absolute zero;
    TakeoffError on an unknown law.
    """
    _check(length_mm, gap_min_mm, gap_max_mm)
    chain = law_of(material, law)
    asked = tuple(dict.fromkeys(t for t in (REFERENCE_C, length_at_C, from_C, to_C, set_at_C) if t is not None))
    lengths = tuple(length_at(material, length_mm, t, length_at_C=length_at_C, law=law) for t in sorted(asked))
    spread = alpha_spread(material)
    findings = notes.about_temperatures(material, (t for t in (length_at_C, from_C, to_C, set_at_C) if t is not None), law)
    refused = any(f.level == "refused" for f in findings)
    findings += [] if refused else notes.about_material(material)

    def at(t: float) -> float | None:
        times = ratio(material, length_at_C, t, law)
        return None if times is None else length_mm * times

    nominal = None if refused else factor(material, length_at_C, law)
    change = moved = None
    if nominal is not None:
        change = _strain(grown(material, from_C, law), grown(material, to_C, law))
        moved = None if change is None else length_mm / nominal * change
    low_high = sorted((moved * spread.low, moved * spread.high)) if moved is not None else (None, None)
    plan = _Gaps(from_C, to_C, set_at_C, gap_min_mm, gap_max_mm)
    alone = plan.of(at if moved is not None else None)
    beside, against_gaps = None, None
    if against is not None:
        beside, against_gaps, more = _against(against, material, length_mm, (from_C, to_C, length_at_C), moved, at, plan)
        findings += more
    if moved is not None and change is not None:
        first, last = (next(x for x in lengths if x.temperature_C == t) for t in (from_C, to_C))
        findings += notes.about_range(material, first, last, moved, change)
    findings += plan.findings(against_gaps or alone, None if beside is None else beside.material)
    gaps = against_gaps.gaps if against_gaps else [None] * len(plan.temperatures)
    return Movement(
        material, length_mm, length_at_C, from_C, to_C, chain, spread, moved, low_high[0], low_high[1],
        None if change is None or from_C == to_C else change / (to_C - from_C),
        {} if nominal is None else _by_direction(material, length_mm / nominal, from_C, to_C, law), lengths, set_at_C,
        alone.closing, alone.opening, gap_min_mm, gap_max_mm, alone.to_set,
        tuple(Step(t, g, h) for t, g, h in zip(plan.temperatures, alone.gaps, gaps, strict=True)), beside,
        tuple(dict.fromkeys(findings)),
        () if moved is None else _changes(at, _of(against, length_mm, length_at_C), spread, plan),
    )


def _of(material: Material | None, length_mm: float, length_at_C: float) -> Callable[[float], float | None]:
    """Length of the other piece by temperature, by its own law; None everywhere where there is no other."""

    def size(t: float) -> float | None:
        times = None if material is None else ratio(material, length_at_C, t)
        return None if times is None else length_mm * times

    return size


def _changes(
    at: Callable[[float], float | None], other: Callable[[float], float | None], spread: AlphaSpread, plan: _Gaps
) -> tuple[Change, ...]:
    zero_C = plan.from_C if plan.set_at_C is None else plan.set_at_C
    zero, beside = at(zero_C), other(zero_C)
    found = []
    for t in sorted({*plan.temperatures, zero_C}):
        here, there = at(t), other(t)
        if zero is None or here is None:
            return ()
        change = here - zero
        found.append(Change(t, change, change * spread.low, change * spread.high,
                            None if there is None or beside is None else there - beside))
    return tuple(found)


def _check(length_mm: float, gap_min_mm: float | None, gap_max_mm: float | None) -> None:
    if not 0 < length_mm < math.inf:
        raise InputError("this is no length", read=f"{length_mm:g} mm", right="a length above zero")
    for name, gap in (("least", gap_min_mm), ("greatest", gap_max_mm)):
        if gap is not None and not 0 <= gap < math.inf:
            raise InputError(f"the {name} gap is no size", read=f"{gap:g} mm", right="zero or more")
    if gap_min_mm is not None and gap_max_mm is not None and gap_min_mm > gap_max_mm:
        raise InputError(
            "the least gap is larger than the greatest", read=f"{gap_min_mm:g} mm and {gap_max_mm:g} mm", right="the smaller one first"
        )


def _strain(start: Elongation, end: Elongation) -> float | None:
    """Change of the elongation; exact where the law is a straight line, since no large lengths are taken from each other."""
    return None if start.value is None or end.value is None else end.value - start.value


def _by_direction(material: Material, length_mm: float, from_C: float, to_C: float, law: str | None) -> dict[str, float]:
    start, end = (grown(material, t, law).by_direction for t in (from_C, to_C))
    return {way: length_mm * (end[way] - start[way]) for way in start if way in end}


def _against(
    other: Material, material: Material, length_mm: float, range_C: tuple[float, float, float], moved: float | None,
    at: Callable[[float], float | None], plan: _Gaps,
) -> tuple[Against, _GapAnswer, list[Finding]]:
    """The other material: the same length at the same temperature, by its own law."""
    from_C, to_C, length_at_C = range_C
    findings = notes.about_temperatures(other, (from_C, to_C))
    if not any(f.level == "refused" for f in findings):
        findings += notes.about_material(other)
    nominal, change = factor(other, length_at_C), _strain(grown(other, from_C), grown(other, to_C))
    theirs = None if nominal is None or change is None else length_mm / nominal * change
    difference = None if moved is None or theirs is None else moved - theirs

    theirs_at = _of(other, length_mm, length_at_C)

    def apart(t: float) -> float | None:
        ours, beside = at(t), theirs_at(t)
        return None if ours is None or beside is None else ours - beside

    gaps = plan.of(apart if difference is not None else None)
    if material.key == other.key:
        findings.append(Finding("note", "same-material", "both are the same material: they move alike"))
    answer = Against(other, law_of(other), theirs, difference, gaps.closing, gaps.opening, gaps.to_set)
    return answer, gaps, findings


@dataclass(frozen=True, slots=True)
class _GapAnswer:
    gaps: list[float | None]
    closing: float | None
    opening: float | None
    to_set: float | None
    whole: float | None


class _Gaps:
    """The gap to set at each temperature of the table, for any function of temperature that closes the gap as it grows."""

    def __init__(self, from_C: float, to_C: float, set_at_C: float | None, least: float | None, greatest: float | None) -> None:
        self.from_C, self.to_C, self.set_at_C, self.least, self.greatest = from_C, to_C, set_at_C, least, greatest
        self.temperatures = steps(min(from_C, to_C), max(from_C, to_C))

    def of(self, size: Callable[[float], float | None] | None) -> _GapAnswer:
        nothing = _GapAnswer([None] * len(self.temperatures), None, None, None, None)
        if size is None:
            return nothing
        known = [size(t) for t in self.temperatures]
        sizes = [s for s in known if s is not None]
        setting = None if self.set_at_C is None else size(self.set_at_C)
        if len(sizes) < len(known) or (self.set_at_C is not None and setting is None):
            return nothing
        # A gap set outside the range must stand that state too.
        states = sizes if setting is None else [*sizes, setting]
        longest, shortest = max(states), min(states)

        def gap(s: float) -> float:
            if self.least is None and self.greatest is not None:
                return self.greatest - (s - shortest)
            return (self.least or 0.0) + (longest - s)

        return _GapAnswer(
            [gap(s) for s in sizes], None if setting is None else longest - setting, None if setting is None else setting - shortest,
            None if setting is None else gap(setting), longest - shortest,
        )

    def findings(self, answer: _GapAnswer, other: Material | None) -> list[Finding]:
        """Whether a gap can serve at all, and whether it is set within the range."""
        found: list[Finding] = []
        if answer.whole is not None and self.greatest is not None:
            needs = (self.least or 0.0) + answer.whole
            if needs > self.greatest * (1 + 1e-12):
                beside = f" against {other.name}" if other else ""
                found.append(Finding(
                    "refused", "gap-impossible", f"no gap serves: the movement{beside} of {answer.whole:.2f} mm and the least gap of "
                    f"{self.least or 0.0:g} mm need {needs:.2f} mm at the widest", read=f"greatest gap {self.greatest:g} mm",
                    right=f"a joint that takes {needs:.2f} mm, a shorter piece, or a smaller range",
                ))
        if self.set_at_C is not None and not min(self.from_C, self.to_C) <= self.set_at_C <= max(self.from_C, self.to_C):
            found.append(Finding("note", "set-outside-range", "the temperature at setting lies outside the range: it counts as part of it",
                                 read=f"{self.set_at_C:g} °C"))
        return found


def steps(low_C: float, high_C: float) -> list[float]:
    """Both ends, and the multiples of 5 °C between them (of 10, 15 ... where the range would take too many)."""
    step = STEP_C * max(1, math.ceil((high_C - low_C) / STEP_C / MOST_STEPS))
    first, last = math.floor(low_C / step) + 1, math.ceil(high_C / step)
    return [low_C, *(n * step for n in range(first, last)), *([high_C] if high_C > low_C else [])]
