"""Two runs side by side: what was added, removed and changed since an earlier record, and by how many kg. Rank 9.

A row of the new list is the same as one of the old where mark and assembly agree; a row without a mark where what it
describes agrees. Several rows of one mark are matched by what they hold first, then in order. A mark that stands once in
each run is followed to another assembly; what is left and alike in all but the mark has a new mark. What is matched so is
compared field by field. Picks and vehicles are compared by their names.
"""

from __future__ import annotations

import hashlib
import json
import math
from collections import defaultdict
from collections.abc import Callable, Hashable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import TYPE_CHECKING, Any, Literal

from takeoff.datafiles import refuse_odd_file
from takeoff.errors import InputError
from takeoff.reports import rounding
from takeoff.reports.page.parts import Cell, Column, Row, Table
from takeoff.reports.rounding import NO_BREAK, Units
from takeoff.reports.wording import counted, shown

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.reports.plainpage import Page

WORDS = ("light", "nominal", "heavy")
UNITS: tuple[Units, Units] = ("si", "us")
Kind = Literal["added", "removed", "changed"]
#: what is compared, and what it is called: field of a line -> word
_FIELDS = {
    "assembly": "assembly",
    "pick": "pick",
    "quantity": "pieces",
    "section": "section",
    "material": "material",
    "length_mm": "length",
    "width_mm": "width",
    "thickness_mm": "thickness",
    "finish": "finish",
    "contents": "contents",
    "status": "state",
}
#: of these, what is a size in mm
_LENGTHS = ("length_mm", "width_mm", "thickness_mm")
_FIRST_SHOWN = 20


@dataclass(frozen=True, slots=True)
class Line:
    """One member of a run, as far as it is compared. Masses are of all pieces, kg; None where it was not weighed.

    `typed` is the material as the list has it: what is compared is the row of the table it stands for.
    """

    mark: str | None
    fields: dict[str, Any]
    total_kg: tuple[float, float, float] | None
    place: str
    number: int
    typed: str | None

    @property
    def signature(self) -> Hashable:
        return (self.mark, *self.fields.values(), self.total_kg)


@dataclass(frozen=True, slots=True)
class Change:
    """One member that was added, removed or changed; `kg` is new minus old, a row not weighed counting as nothing.

    `number` is the member's in the new run, None where it was removed. `unknown` where one side was not weighed. `what` is
    in mm, `what_us` in feet and inches.
    """

    kind: Kind
    mark: str | None
    assembly: str | None
    what: str
    what_us: str
    kg: tuple[float, float, float]
    unknown: bool
    place: str
    number: int | None

    def said(self, units: Units) -> str:
        """What changed, in the units of print."""
        return self.what if units == "si" else self.what_us

    def as_record(self) -> dict[str, Any]:
        return {
            "kind": self.kind,
            "mark": self.mark,
            "assembly": self.assembly,
            "what": self.what,
            "mass_kg": dict(zip(WORDS, self.kg, strict=True)),
            "not_weighed": self.unknown,
            "place": self.place,
        }


@dataclass(frozen=True, slots=True)
class Comparison:
    """New against old. `total_kg` is the new total minus the old, light / nominal / heavy.

    picks : hook loads that changed, kg, and verdicts: name, then, now; vehicles : payloads that changed, kg; None where it was not
    there. unloaded : rows on no vehicle, then and now.
    """

    file: str
    sha256: str
    changes: tuple[Change, ...]
    same: int
    total_kg: tuple[float, float, float]
    picks: tuple[tuple[str, float | None, float | None], ...]
    verdicts: tuple[tuple[str, str, str], ...]
    vehicles: tuple[tuple[str, float | None, float | None], ...]
    unloaded: tuple[int, int]

    def of(self, kind: Kind) -> list[Change]:
        return [c for c in self.changes if c.kind == kind]

    def as_record(self) -> dict[str, Any]:
        """For the JSON: masses are differences, new minus old, kg."""
        return {
            "file": self.file,
            "sha256": self.sha256,
            "unchanged": self.same,
            "mass_kg": dict(zip(WORDS, self.total_kg, strict=True)),
            "changes": [c.as_record() for c in self.changes],
            "picks": [{"name": name, "hook_load_before_kg": old, "hook_load_kg": new} for name, old, new in self.picks],
            "verdicts": [{"name": name, "before": old, "now": new} for name, old, new in self.verdicts],
            "vehicles": [{"name": name, "payload_before_kg": old, "payload_kg": new} for name, old, new in self.vehicles],
            "not_loaded": {"before": self.unloaded[0], "now": self.unloaded[1]},
        }

    def sentence(self, units: Units) -> str:
        """How much of each, and what it does to the total."""
        parts = []
        for kind in ("added", "removed", "changed"):
            those = self.of(kind)
            kg = math.fsum(c.kg[2] for c in those)
            parts.append(f"{counted(len(those), 'row')} {kind}" + (f" ({signed(kg, units)} heavy)" if those else ""))
        total = " / ".join(signed(kg, units, unit=False) for kg in self.total_kg)
        text = f"Against {shown(self.file)}: {', '.join(parts)}; {counted(self.same, 'row')} unchanged. "
        text += f"Total {total} {rounding.mass_unit(units)}, light / nominal / heavy."
        if any(c.unknown for c in self.changes):
            text += " Rows not weighed in either run count as nothing in these differences."
        return text

    def notes(self, units: Units) -> list[str]:
        """What became of picks and vehicles, a sentence each."""
        found = [_became("Pick", name, ("hook load", "its hook load was"), old, new, units) for name, old, new in self.picks]
        found += [f"Pick {shown(name)}: verdict {shown(old)} before, {shown(new)} now." for name, old, new in self.verdicts]
        found += [_became("Vehicle", name, ("payload", "it carried"), old, new, units) for name, old, new in self.vehicles]
        if self.unloaded[0] != self.unloaded[1]:
            found.append(f"On no vehicle: {self.unloaded[0]} before, {self.unloaded[1]} now.")
        return found

    def table(self, units: Units) -> Table:
        """Every change as a line."""
        unit = rounding.mass_unit(units)
        columns = [
            Column("Change"),
            Column("Mark"),
            Column("Assembly"),
            Column("What"),
            *(Column(f"{w.capitalize()} ({unit})", True) for w in WORDS),
            Column("Place in the list"),
        ]
        table = Table(
            "changes", "Rows added, removed and changed; masses are new minus old", columns, states=("added", "removed", "changed")
        )
        for c in self.changes:
            what = c.said(units) + ("; not weighed in one of the runs" if c.unknown else "")
            table.rows.append(
                Row(
                    [
                        Cell(c.kind, strong=True),
                        Cell(shown(c.mark or "")),
                        Cell(shown(c.assembly or "")),
                        Cell(what),
                        *(Cell(signed(kg, units, unit=False), kg) for kg in c.kg),
                        Cell(c.place, to=None if c.number is None else f"row-{c.number}"),
                    ],
                    state=c.kind,
                )
            )
        return table

    def say(self, page: Page, units: Units) -> None:
        """In the terminal's summary: the sentence, then the first changes, heaviest first."""
        page.heading("Changes")
        page.say(self.sentence(units), 2)
        ordered = sorted(self.changes, key=lambda c: -abs(c.kg[2]))
        for c in ordered[:_FIRST_SHOWN]:
            unknown = ", not weighed in one of the runs" if c.unknown else ""
            page.say(f"{c.kind} {shown(c.mark or '(no mark)')}: {c.said(units)}; {signed(c.kg[2], units)} heavy{unknown}; {c.place}", 2, 4)
        if len(ordered) > _FIRST_SHOWN:
            page.say(f"and {len(ordered) - _FIRST_SHOWN} more; the schedule lists every one", 2)
        notes = self.notes(units)
        for note in notes[:_FIRST_SHOWN]:
            page.say(note, 2, 4)
        if len(notes) > _FIRST_SHOWN:
            page.say(f"and {len(notes) - _FIRST_SHOWN} more; the schedule lists every one", 2)


def _became(kind: str, name: str, words: tuple[str, str], old: float | None, new: float | None, units: Units) -> str:
    """What became of the mass of a pick or vehicle, as a sentence; `words` are what the mass is called, and was."""

    def mass(kg: float) -> str:
        return rounding.mass_with_unit(kg, "up", units, gap=NO_BREAK)

    if old is None and new is not None:
        return f"{kind} {shown(name)} is new: {words[0]} {mass(new)}."
    if new is None and old is not None:
        return f"{kind} {shown(name)} is gone: {words[1]} {mass(old)}."
    assert old is not None
    assert new is not None
    return f"{kind} {shown(name)}: {words[0]} {mass(old)} before, {mass(new)} now."


def signed(kg: float, units: Units, *, unit: bool = True) -> str:
    """A difference with its sign, rounded up so that a gain is never shown smaller than it is."""
    value = rounding.in_mass_unit(kg, units)
    text = rounding.number(value, rounding.decimals_for(value) if value else 0, "up", NO_BREAK)
    text = f"+{text}" if value > 0 else text
    return f"{text}{NO_BREAK}{rounding.mass_unit(units)}" if unit else text


# --- the earlier run -------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Earlier:
    """An earlier run's record, as far as it is compared."""

    file: str
    sha256: str
    lines: tuple[Line, ...]
    total_kg: tuple[float, float, float]
    hook_loads: dict[str, float]
    verdicts: dict[str, str]
    payloads: dict[str, float]
    unloaded: int


def read_earlier(path: Path) -> Earlier:
    """The record that an earlier `takeoff schedule --json` wrote. Raises InputError where it is none."""
    right = "a file that an earlier run wrote with --json"
    refuse_odd_file(path, "the earlier record", "record")
    try:
        data = path.read_bytes()
        record = json.loads(data)
    except OSError as error:
        raise InputError(f"cannot be read ({error.strerror or error})", file=path, right=right) from error
    except (ValueError, RecursionError) as error:
        raise InputError("is no JSON", file=path, right=right) from error
    try:
        if record["tool"]["name"] != "takeoff":
            raise KeyError("tool")
        found = _of_record(record, str(path), hashlib.sha256(data).hexdigest())
    except (KeyError, IndexError, TypeError, ValueError, AttributeError, OverflowError) as error:
        raise InputError("is no weight schedule's record", file=path, right=right) from error
    if found is None:
        raise InputError("its total is no mass", file=path, right=right)
    return found


def _of_record(record: dict[str, Any], file: str, sha256: str) -> Earlier | None:
    """What is compared of a run's record; None where its total is no mass."""
    total = _three(record["totals"]["mass_kg"])
    if total is None:
        return None
    picks = {str(p["name"]): p for p in record["picks"]}
    return Earlier(
        file,
        sha256,
        tuple(_line(member, number) for number, member in enumerate(record["members"])),
        total,
        {name: float(p["hook_load_kg"]) for name, p in picks.items()},
        {name: str(p["verdict"]) for name, p in picks.items()},
        {str(v["name"]): float(v["payload_kg"]) for v in record["vehicles"]},
        len(record["not_loaded"]),
    )


@lru_cache(maxsize=1000)
def _sheet_place(file: str | None, sheet: str | None) -> str:
    return " / ".join(shown(p) for p in (file, sheet) if p)


def _three(mass: dict[str, Any]) -> tuple[float, float, float] | None:
    values = [mass[word] for word in WORDS]
    if any(v is None for v in values):
        return None
    light, nominal, heavy = (float(v) for v in values)
    if not all(math.isfinite(v) for v in (light, nominal, heavy)):
        raise ValueError("an infinite mass")
    return light, nominal, heavy


def _line(member: dict[str, Any], number: int) -> Line:
    fields = {
        "assembly": member["assembly"],
        "pick": member["pick"],
        "quantity": member["quantity"],
        "section": member["section"]["designation"],
        "material": member["material"]["key"],
        **{key: member[key] for key in ("length_mm", "width_mm", "thickness_mm", "finish", "contents", "status")},
    }
    if any(isinstance(v, dict | list) for v in fields.values()):
        raise TypeError("a field is no plain value")
    place = _sheet_place(member["file"], member["sheet"])
    mark = None if member["mark"] is None else str(member["mark"])
    typed = None if member["material"]["text"] is None else str(member["material"]["text"])
    return Line(mark, fields, _three(member["mass_total_kg"]), f"{place} row {int(member['row'])}", number, typed)


# --- matching --------------------------------------------------------------------------------------------------------


def compare(result: Result, earlier: Earlier) -> Comparison:
    """The result against an earlier run."""
    from takeoff.reports.records import to_json

    # The new run as its own record would hold it, so that the two are of one kind.
    now = _of_record(json.loads(to_json(result)), "", "")
    assert now is not None
    pairs: list[tuple[Line, Line]] = []
    old_left, new_left = list(earlier.lines), list(now.lines)
    for key in (lambda x: x.signature, _same_row, _same_mark, _same_piece):
        old_left, new_left, found = _matched(old_left, new_left, key, only_single=key is _same_mark)
        pairs += found
    changes = [_change(old, line) for old, line in pairs]
    found_changes = [
        *(_alone("added", line) for line in new_left),
        *(_alone("removed", line) for line in old_left),
        *(c for c in changes if c is not None),
    ]
    order = {"added": 0, "removed": 1, "changed": 2}
    found_changes.sort(key=lambda c: (order[c.kind], -1 if c.number is None else c.number))
    differences = tuple(b - a for a, b in zip(earlier.total_kg, now.total_kg, strict=True))
    return Comparison(
        earlier.file,
        earlier.sha256,
        tuple(found_changes),
        sum(1 for c in changes if c is None),
        (differences[0], differences[1], differences[2]),
        _by_name(earlier.hook_loads, now.hook_loads),
        tuple((name, was, now.verdicts[name]) for name, was in earlier.verdicts.items() if now.verdicts.get(name, was) != was),
        _by_name(earlier.payloads, now.payloads),
        (earlier.unloaded, now.unloaded),
    )


def _by_name(old: dict[str, float], new: dict[str, float]) -> tuple[tuple[str, float | None, float | None], ...]:
    """What differs, under the names of the new run first."""
    names = dict.fromkeys([*new, *old])
    return tuple((name, old.get(name), new.get(name)) for name in names if not _close(old.get(name), new.get(name)))


def _same_row(line: Line) -> Hashable:
    if line.mark:
        return ("mark", line.mark, line.fields["assembly"])
    return ("text", *(line.fields[key] for key in ("assembly", "section", "material", "length_mm", "width_mm", "thickness_mm")))


def _same_mark(line: Line) -> Hashable:
    return line.mark


def _same_piece(line: Line) -> Hashable:
    """All but the mark: a piece of the same kind that was given another."""
    return (*line.fields.values(), line.total_kg) if line.mark else None


def _matched(
    old: Sequence[Line], new: Sequence[Line], key: Callable[[Line], Hashable], *, only_single: bool
) -> tuple[list[Line], list[Line], list[tuple[Line, Line]]]:
    """Pairs of one key in order; with `only_single` where it stands once in each. Then what is left of both."""
    waiting: dict[Hashable, list[Line]] = defaultdict(list)
    for line in old:
        waiting[key(line)].append(line)
    times: dict[Hashable, int] = defaultdict(int)
    for line in new:
        times[key(line)] += 1
    pairs, left = [], []
    for line in new:
        of = key(line)
        there = waiting.get(of)
        if there and of is not None and (not only_single or (len(there) == 1 and times[of] == 1)):
            pairs.append((there.pop(0), line))
        else:
            left.append(line)
    taken = {id(before) for before, _ in pairs}
    return [line for line in old if id(line) not in taken], left, pairs


def _kg(line: Line) -> tuple[float, float, float]:
    return line.total_kg or (0.0, 0.0, 0.0)


def _alone(kind: Kind, line: Line) -> Change:
    sign = 1.0 if kind == "added" else -1.0
    light, nominal, heavy = (sign * v for v in _kg(line))
    pieces, section, length = (line.fields[key] for key in ("quantity", "section", "length_mm"))
    named = f"{pieces} x {shown(section or 'piece')}" if pieces is not None else shown(section or "piece")
    what, what_us = (", ".join([named, _length(length, units)]) if isinstance(length, int | float) else named for units in UNITS)
    return Change(
        kind,
        line.mark,
        line.fields["assembly"],
        what,
        what_us,
        (light, nominal, heavy),
        line.total_kg is None,
        line.place,
        line.number if kind == "added" else None,
    )


def _change(old: Line, new: Line) -> Change | None:
    """What differs between a row then and now; None where nothing does."""
    differing = [key for key in _FIELDS if not _close(old.fields[key], new.fields[key])]
    said = [[f"mark {shown(old.mark)} → {shown(new.mark)}"] if old.mark and new.mark and old.mark != new.mark else [] for _ in UNITS]
    for units, parts in zip(UNITS, said, strict=True):
        parts += [_differs(key, old, new, units) for key in differing]
    before, now = _kg(old), _kg(new)
    light, nominal, heavy = (b - a for a, b in zip(before, now, strict=True))
    moved = any(not _close(a, b) for a, b in zip(before, now, strict=True))
    if not said[0] and not moved:
        return None
    what, what_us = ("; ".join(parts) or "mass alone (another basis or setting)" for parts in said)
    return Change(
        "changed",
        new.mark,
        new.fields["assembly"],
        what,
        what_us,
        (light, nominal, heavy),
        old.total_kg is None or new.total_kg is None,
        new.place,
        new.number,
    )


def _differs(key: str, old: Line, new: Line, units: Units) -> str:
    """``length 6000 → 6100 mm``: one field then and now."""
    before, now = old.fields[key], new.fields[key]
    if key in _LENGTHS and isinstance(before, int | float) and isinstance(now, int | float):
        first = f"{before:g}" if units == "si" else _length(before, units)
        return f"{_FIELDS[key]} {first} → {_length(now, units)}"
    if key in _LENGTHS:
        return f"{_FIELDS[key]} " + " → ".join(_length(v, units) if isinstance(v, int | float) else "(none)" for v in (before, now))
    if key == "material" and old.typed and new.typed and old.typed != new.typed:
        before, now = old.typed, new.typed
    return f"{_FIELDS[key]} {_shown(before)} → {_shown(now)}"


def _length(mm: float, units: Units) -> str:
    return f"{mm:g} mm" if units == "si" else rounding.feet_inches(mm)


def _close(a: Any, b: Any) -> bool:
    if isinstance(a, int | float) and isinstance(b, int | float):
        return math.isclose(a, b, rel_tol=1e-9, abs_tol=1e-9)
    return bool(a == b)


def _shown(value: Any) -> str:
    if value is None:
        return "(none)"
    return f"{value:g}" if isinstance(value, int | float) else shown(value)
