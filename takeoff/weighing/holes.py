"""What holes take away: ``4x22``, ``4 Ø22``, ``2x 300x200``. Rank 4.

Round holes in plates, flats and sheet come off light and nominal, not off heavy, since a hole may be left undrilled.
Openings given as a × b come off all three. Holes in rolled and hollow sections, boards and blocks are not deducted, which
errs on the heavy side, and are said. Holes in remarks are ignored.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff.findings import Finding
from takeoff.names import normal_name
from takeoff.quantities import EVERYDAY, measure_readings, tidy
from takeoff.weighing.shape import has_form, thickness_mm
from takeoff.weighing.work import Work

if TYPE_CHECKING:
    from takeoff.weighing.work import Flags, Floats, Ints

_NONE = re.compile(r"|none|no|nil|n/a|0|without|ohne|keine|sans|sin|senza|geen|brak|sem|utan")
_SIZE = r"\d+(?:[.,]\d+)?(?:\s*(?:mm|cm|in|\"))?"
_BY = r"\s*[x×*]\s*"
_COUNT = r"(?:(?P<count>\d{1,4})\s*(?:(?:no|nos|off|pcs|holes?)\.?\s*)?(?:[x×*\-]|\bof\b)?\s*)"
_ROUND = re.compile(rf"{_COUNT}?(?:[øØ⌀∅]|dia\.?|diam\.?|d)\s*(?P<size>{_SIZE})(?:\s*holes?)?", re.IGNORECASE)
_ROUND_AFTER = re.compile(rf"{_COUNT}?(?<!\d)(?P<size>{_SIZE})\s*(?:[øØ⌀∅]|dia\.?|diam\.?|diameter)(?:\s*holes?)?", re.IGNORECASE)
_OPENING = re.compile(rf"(?P<count>\d{{1,4}})\s*(?:no\.?|nos\.?|off)?{_BY}(?P<a>{_SIZE}){_BY}(?P<b>{_SIZE})", re.IGNORECASE)
_OPENING_OFF = re.compile(rf"(?P<count>\d{{1,4}})\s*(?:no\.?|nos\.?|off)\s*(?P<a>{_SIZE}){_BY}(?P<b>{_SIZE})", re.IGNORECASE)
_PLAIN = re.compile(rf"(?P<count>\d{{1,4}}){_BY}(?P<size>{_SIZE})", re.IGNORECASE)
_PARTS = re.compile(r"\s*(?:\+|;|&|,(?!\d)|\band\b)\s*", re.IGNORECASE)
#: a cell that takes more than this of the piece was read wrong
MOST_OF_THE_PIECE = 0.9


@dataclass(frozen=True, slots=True)
class Holes:
    """A holes cell read: areas in mm² that round holes and openings take; None where the text is not understood."""

    round_mm2: float
    opening_mm2: float


def read(text: str, bare_unit: str = "mm") -> Holes | None:
    """The areas of a holes cell; sizes without a unit are in `bare_unit`."""
    if _NONE.fullmatch(normal_name(text)):
        return Holes(0.0, 0.0)
    round_mm2 = opening_mm2 = 0.0
    for part in _PARTS.split(tidy(text)[:200]):
        opening = _OPENING.fullmatch(part) or _OPENING_OFF.fullmatch(part)
        if opening:
            a, b = (_size(opening.group(name), bare_unit) for name in ("a", "b"))
            if a is None or b is None:
                return None
            opening_mm2 += int(opening.group("count")) * a * b
            continue
        found = _ROUND.fullmatch(part) or _ROUND_AFTER.fullmatch(part) or _PLAIN.fullmatch(part)
        size = _size(found.group("size"), bare_unit) if found else None
        if found is None or size is None:
            return None
        round_mm2 += int(found.group("count") or 1) * math.pi / 4 * size**2
    return Holes(round_mm2, opening_mm2)


def _size(text: str, bare_unit: str) -> float | None:
    found = [m for m in measure_readings(text) if m.unit is None or EVERYDAY[m.unit][0] == "length"]
    if len(found) != 1:
        return None
    value = found[0].value if found[0].unit else found[0].value * EVERYDAY[bare_unit][1]
    return value if value > 0 else None


def deduct(work: Work) -> None:
    """Take the holes off the bare masses, and say of every filled cell that was not deducted why."""
    import numpy as np

    texts = work.texts("holes")
    if not texts:
        return
    flat = np.array([*(s.form == "sheet" or s.shape == "flat" for s in work.sections), False], dtype=bool)[work.section_of]
    grid = has_form(work, "area mass")
    thickness, _ = thickness_mm(work)
    with np.errstate(invalid="ignore", divide="ignore"):
        plan = np.where(grid, work.sizes["width"] * work.sizes["length"], work.volume_mm3 / thickness)
    known = ~np.isnan(work.nominal)
    for text, every in texts:
        for bare_unit, rows in _by_unit(work, every[known[every]]):
            _deduct_text(work, text, rows, (read(text, bare_unit), flat | grid, plan))
    left = 1.0 - work.round_share - work.opening_share
    work.light *= left
    work.nominal *= left
    work.heavy *= 1.0 - work.opening_share


def _deduct_text(work: Work, text: str, rows: Ints, how: tuple[Holes | None, Flags, Floats]) -> None:
    import numpy as np

    found, flat, plan = how
    if found is None:
        work.say(Finding("note", "holes-not-understood", "the holes are not understood and not deducted, which errs on the heavy side",
                         read=text, right="such as 4x22, 4 Ø22 or 2x 300x200"), rows, "holes")
        return
    if found.round_mm2 + found.opening_mm2 == 0:
        return
    solid = rows[~flat[rows]]
    work.say(Finding("note", "holes-not-deducted", "holes are deducted from plates, flats and sheet only: these are not, which errs on the "
                     "heavy side", read=text), solid, "holes")
    rows = rows[flat[rows]]
    with np.errstate(invalid="ignore", divide="ignore"):
        round_share, opening_share = found.round_mm2 / plan[rows], found.opening_mm2 / plan[rows]
    fits = round_share + opening_share <= MOST_OF_THE_PIECE
    work.say(Finding("note", "holes-not-deducted", "the holes are larger than the piece allows: they are not deducted, which errs on the "
                     "heavy side", read=text, right="such as 4x22 (four of 22) or 1x 300x200 (one opening)"), rows[~fits], "holes")
    work.round_share[rows[fits]] = round_share[fits]
    work.opening_share[rows[fits]] = opening_share[fits]


def _by_unit(work: Work, rows: Ints) -> list[tuple[str, Ints]]:
    """The rows, parted by the unit of a bare hole size: inches in a list measured in inches or feet."""
    import numpy as np

    if not len(rows):
        return []
    tables = work.members.log.tables
    imperial = [
        t.unit_note in ("in", "ft") or any(c.heading and c.heading.unit in ("in", "ft") for c in t.all_columns) for t in tables
    ]
    if not any(imperial):
        return [("mm", rows)]
    in_inches = np.array([imperial[work.members.log.table_of[i]] for i in rows.tolist()], dtype=bool)
    return [(unit, part) for unit, part in (("in", rows[in_inches]), ("mm", rows[~in_inches])) if len(part)]
