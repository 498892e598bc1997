"""What is loaded as one: picks kept whole, bundles, and single pieces, each with size, mass bounds and centre.

A pick's size is known where its members have positions, or where it is one piece; else it is loaded by mass only, and said.
Sizes are those of the enclosing box as the piece lies: length along, the section as it is drawn.
"""

from __future__ import annotations

import math
import re
from collections import Counter
from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING, Any

from takeoff.bounds import Bounds
from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lifting.gravity import Place, centre_of, face_of, places_of
from takeoff.lifting.plans import Plan as PickPlan
from takeoff.lifting.plans import plans
from takeoff.transport.load import LoadUnit, NotLoaded

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.sections import Section

Size = tuple[float, float, float]
#: more single pieces than this are not placed one by one
MOST_UNITS = 20_000
_SIZES = ("length_mm", "width_mm", "thickness_mm", "height_mm", "diameter_mm")
#: pieces whose top is no flat place
_ROUND = frozenset(("round bar", "round hollow", "sphere", "cone"))
_NOT_FLAT = frozenset(("ring sector", "wedge", "round bar", "round hollow", "sphere", "cone"))


class _List:
    """The weighed frame as plain columns, with each row's box and place."""

    def __init__(self, members: pd.DataFrame, sections: Sequence[Section], places: dict[int, Place | str]) -> None:
        names = ("mark", "phase", "bundle", "status", "reason", "row", "quantity", "section_id", *_SIZES)
        self.columns: dict[str, list[Any]] = {name: members[name].tolist() for name in names}
        self.mass = [
            None if math.isnan(a) else Bounds(a, b, c)
            for a, b, c in zip(*(members[f"each_{word}_kg"].tolist() for word in ("light", "nominal", "heavy")), strict=True)
        ]
        self.sections = sections
        self.places = places

    def weighed(self, i: int) -> bool:
        return self.columns["status"][i] != "not weighed" and self.mass[i] is not None

    def name(self, i: int) -> str:
        return str(self.columns["mark"][i] or f"row {self.columns['row'][i]}")

    def section(self, i: int) -> Section | None:
        number = self.columns["section_id"][i]
        return self.sections[number] if number >= 0 else None

    def box(self, i: int) -> Size | None:
        """Length, width and height of one piece of the row, None where a side is not known."""
        row = {name: self.columns[name][i] for name in _SIZES}
        section = self.section(i)
        length = row["length_mm"]
        if not length > 0 and section is not None:
            # A stone of an arch lies with its width along the barrel as its length.
            name = "width" if section.shape == "ring sector" else "length"
            length = section.dimensions_mm.get(name, math.nan)
        face = face_of(section, row) if section is not None else None
        if face is not None:
            sides: tuple[float, float] = (face.width, face.height)
        else:
            width = next((row[n] for n in ("width_mm", "diameter_mm", "height_mm") if row[n] > 0), math.nan)
            height = next((row[n] for n in ("height_mm", "diameter_mm", "thickness_mm") if row[n] > 0), math.nan)
            sides = (width, height)
        if not (length > 0 and sides[0] > 0 and sides[1] > 0):
            return None
        return max(length, sides[0]), min(length, sides[0]), sides[1]

    def rolls(self, i: int) -> bool:
        section = self.section(i)
        return section is not None and section.shape in _ROUND

    def flat(self, i: int) -> bool:
        section = self.section(i)
        return section is None or section.shape not in _NOT_FLAT


def units_of(
    members: pd.DataFrame,
    sections: Sequence[Section],
    job: Job,
    places: dict[int, Place | str] | None = None,
) -> tuple[list[LoadUnit], list[NotLoaded]]:
    """Units in the list's order, and what cannot be loaded because it was not weighed. `members` is a weighed frame.

    Raises JobError where the job file's picks do not fit the list.
    """
    data = _List(members, sections, places_of(members, sections) if places is None else places)
    drops = _drops(data.columns["phase"])
    made: list[tuple[int, LoadUnit]] = []
    lost: list[NotLoaded] = []
    taken: set[int] = set()
    for plan in plans(members, job):
        rows = [i for i, _ in plan.rows]
        taken.update(rows)
        unit = _pick(plan, data, drops)
        if unit is None:
            lost.append(NotLoaded(plan.name, None, "nothing of it is weighed"))
        else:
            made.append((rows[0], unit))
    rest = [i for i in range(len(data.mass)) if i not in taken]
    strapped: dict[str, list[int]] = {}
    for i in rest:
        if isinstance(data.columns["bundle"][i], str):
            strapped.setdefault(data.columns["bundle"][i], []).append(i)
    for name, rows in strapped.items():
        rows_weighed = [i for i in rows if data.weighed(i)]
        lost += [_lost(data, i) for i in rows if not data.weighed(i)]
        if rows_weighed:
            counted = [(i, int(data.columns["quantity"][i])) for i in rows_weighed]
            made.append((rows[0], _bundle(name, counted, data, drops, missing=len(rows) - len(rows_weighed))))
    seen: Counter[str] = Counter()
    for i in rest:
        if isinstance(data.columns["bundle"][i], str):
            continue
        if not data.weighed(i):
            lost.append(_lost(data, i))
            continue
        made += [(i, unit) for unit in _singles(i, data, drops, seen)]
    made.sort(key=lambda pair: pair[0])
    return _own_names([unit for _, unit in made]), lost


def _lost(data: _List, i: int) -> NotLoaded:
    quantity = data.columns["quantity"][i]
    times = f"{quantity:g} x " if quantity > 1 else ""
    return NotLoaded(times + data.name(i), None, f"not weighed: {data.columns['reason'][i] or 'see its row'}")


def _own_names(units: list[LoadUnit]) -> list[LoadUnit]:
    """Every unit under a name of its own: a second one of a name gets a number."""
    from dataclasses import replace

    seen: Counter[str] = Counter()
    named = {u.name for u in units}
    found = []
    for u in units:
        seen[u.name] += 1
        name, number = u.name, seen[u.name]
        if number > 1:
            while f"{u.name} #{number}" in named:
                number += 1
            seen[u.name] = number
            name = f"{u.name} #{number}"
            named.add(name)
        found.append(u if name == u.name else replace(u, name=name))
    return found


def _drops(phases: Iterable[Any]) -> dict[str | None, int]:
    """Phase -> its delivery, in natural order; what has no phase is unloaded last."""
    names = sorted({p for p in phases if isinstance(p, str)}, key=natural)
    return {**{name: k for k, name in enumerate(names)}, None: len(names)}


def natural(text: str) -> list[tuple[int, int, str]]:
    """A key that puts ``phase 2`` before ``phase 10``."""
    return [(0, int(part), "") if part.isdigit() else (1, 0, part.casefold()) for part in re.findall(r"[0-9]{1,15}|[^0-9]+", text)]


def _phase(rows: Iterable[int], data: _List, drops: dict[str | None, int], findings: list[Finding]) -> tuple[str | None, int]:
    phases = {data.columns["phase"][i] if isinstance(data.columns["phase"][i], str) else None for i in rows}
    first = min(phases, key=lambda p: drops[p])
    if len(phases) > 1:
        findings.append(Finding("note", "phases-mixed", f"its pieces are of several phases: loaded with the first, {first}"))
    return first, drops[first]


def _singles(i: int, data: _List, drops: dict[str | None, int], seen: Counter[str]) -> list[LoadUnit]:
    mass, size, name = data.mass[i], data.box(i), data.name(i)
    assert mass is not None
    findings: list[Finding] = [] if size is not None else [_sizeless(name)]
    if data.rolls(i):
        findings.append(
            Finding(
                "note",
                "may-roll",
                f"{name} is round: keep it from rolling; the lashings are reckoned against sliding and tilting only",
                right="wedges, a cradle, or a bundle",
            )
        )
    phase, drop = _phase([i], data, drops, findings)
    quantity = int(data.columns["quantity"][i])
    made = []
    for _ in range(quantity):
        seen[name] += 1
        own = name if seen[name] == 1 else f"{name} #{seen[name]}"
        made.append(LoadUnit(own, "piece", mass, size, None, phase, drop, carries=data.flat(i), findings=tuple(findings)))
        if len(made) > MOST_UNITS:
            from takeoff.errors import InputError

            raise InputError(
                f"{name} alone is {quantity} pieces to load one by one", right="[transport] max_bundle_kg, so that loose pieces are bundled"
            )
    return made


def _sizeless(name: str) -> Finding:
    return Finding(
        "note",
        "unit-size-unknown",
        f"{name} has no known size: it is loaded by mass only",
        right="its sizes, or the positions of its members",
    )


def _pick(plan: PickPlan, data: _List, drops: dict[str | None, int]) -> LoadUnit | None:
    weighed = [(i, int(data.columns["quantity"][i]) if n is None else n) for i, n in plan.rows if data.weighed(i)]
    missing = len(plan.rows) - len(weighed)
    if not weighed:
        return None
    if plan.asked is None and plan.listed is None and not plan.name.endswith(" (rest)"):
        return _bundle(plan.name, weighed, data, drops, missing=missing)
    findings: list[Finding] = []
    if missing:
        findings.append(
            Finding("note", "pick-incomplete", f"{plan.name} lacks {missing} rows that were not weighed: it is heavier than shown")
        )
    mass = _sum(weighed, data)
    if plan.asked is not None and plan.asked.weighed_kg is not None:
        mass = Bounds(mass.light, min(mass.nominal, max(mass.heavy, plan.asked.weighed_kg)), max(mass.heavy, plan.asked.weighed_kg))
    phase, drop = _phase([i for i, _ in weighed], data, drops, findings)
    size: Size | None = None
    centre: Size | None = None
    places = [data.places.get(i) for i, _ in weighed]
    if len(weighed) == 1 and weighed[0][1] == 1 and not missing:
        size = data.box(weighed[0][0])
    elif not missing and all(isinstance(p, Place) for p in places):
        found = centre_of([p for p in places if isinstance(p, Place)], [_sum([pair], data) for pair in weighed])
        x, y, z = found.size
        offset = [c - low for c, low in zip(found.centre, found.low, strict=True)]
        if min(x, y, z) > 0:
            size, centre = (x, y, z), (offset[0], offset[1], offset[2])
            if y > x:
                size, centre = (y, x, z), (offset[1], offset[0], offset[2])
            if found.at_least:
                findings.append(
                    Finding(
                        "note", "unit-size-at-least", f"the size of {plan.name} is the least it can be: some piece's reach is not known"
                    )
                )
    if size is None:
        findings.append(_sizeless(plan.name))
    return LoadUnit(plan.name, "pick", mass, size, centre, phase, drop, carries=False, not_weighed=missing, findings=tuple(findings))


def _sum(rows: Sequence[tuple[int, int]], data: _List) -> Bounds:
    parts = [(data.mass[i], n) for i, n in rows]
    return Bounds.total(m * float(n) for m, n in parts if m is not None)


def _bundle(name: str, rows: Sequence[tuple[int, int]], data: _List, drops: dict[str | None, int], *, missing: int) -> LoadUnit:
    findings: list[Finding] = []
    if missing:
        findings.append(Finding("note", "pick-incomplete", f"{name} lacks {missing} rows that were not weighed: it is heavier than shown"))
    phase, drop = _phase([i for i, _ in rows], data, drops, findings)
    boxes = [(data.box(i), n) for i, n in rows]
    known = [(box, n) for box, n in boxes if box is not None]
    size = strapped([(b, n) for b, n in known]) if len(known) == len(boxes) else None
    if size is None:
        findings.append(_sizeless(name))
    flat = all(data.flat(i) for i, _ in rows)
    return LoadUnit(name, "bundle", _sum(rows, data), size, None, phase, drop, carries=flat, not_weighed=missing, findings=tuple(findings))


def strapped(boxes: Sequence[tuple[Size, int]]) -> Size:
    """The size of pieces strapped together, in mm: as long as the longest, rows as near to square as whole pieces allow.

    Unlike pieces count at the largest width and height among them, which errs on the large side.
    """
    number = sum(n for _, n in boxes)
    length, width, height = (max(box[k] for box, _ in boxes) for k in range(3))
    across = max(1, min(number, round(math.sqrt(number * height / width))))
    return length, across * width, -(-number // across) * height
