"""Which field a heading names, and in what unit. The spellings stand in one table, `materials/headings.csv`."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.names import NormalName, normal_name
from takeoff.quantities import EVERYDAY, tidy, unit_of

#: fields whose cells are text
TEXT_FIELDS = (
    "mark", "name", "assembly", "pick", "bundle", "phase", "run", "section", "material", "finish", "contents", "holes",
    "insulation", "remarks", "axis", "measured_at",
)
#: fields whose cells are numbers with a unit -> the dimension
MEASURES = {
    "length": "length", "width": "length", "thickness": "length", "height": "length", "diameter": "length",
    "unit_mass": "mass", "total_mass": "mass", "weighed_mass": "mass", "mass_per_length": "mass per length",
    "mass_per_area": "mass per area", "volume": "volume", "area": "area",
    "x": "length", "y": "length", "z": "length", "x1": "length", "y1": "length", "z1": "length",
    "x2": "length", "y2": "length", "z2": "length",
}
OTHER_FIELDS = ("quantity", "cut_angle_1", "cut_angle_2", "roll", "stock_length", "not_used")
FIELDS = frozenset((*TEXT_FIELDS, *MEASURES, *OTHER_FIELDS))
#: fields of the design that this version reads past; a list that fills them is told so
NOT_ACTED_ON = {
    "holes": "holes are not deducted, which errs on the heavy side",
    "cut_angle_1": "end cuts are not deducted, which errs on the heavy side",
    "cut_angle_2": "end cuts are not deducted, which errs on the heavy side",
    "finish": "the finish is not added to the mass", "contents": "the contents are not added to the mass",
    "insulation": "the insulation is not added to the mass",
    "weighed_mass": "weighed masses are shown, not yet used in place of ours",
    "measured_at": "sizes are taken as they stand, at 20 °C", "run": "runs are not yet laid out",
    **dict.fromkeys(("x", "y", "z", "x1", "y1", "z1", "x2", "y2", "z2", "axis", "roll"), "positions are not yet used"),
}

_UNIT_AT_END = re.compile(r"^(.*?)\s*(?:[(\[]\s*(?:in\s+)?([^()\[\]]{1,14})\s*[)\]]|,\s*([^,\s]{1,8})|_(mm|cm|m|in|ft|kg|lb|t))\s*$")
_LAST_WORD = re.compile(r"^(.*\S)\s+(mm|cm|m|in|ft|kg|lb|t|m2|m3|m²|m³|kg/m|kg/m2|kg/m²|lb/ft)\s*$", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Heading:
    """What one heading cell was taken for: the field, the unit it names (an everyday spelling) and why."""

    text: str
    field: str
    unit: str | None
    why: str


@cache
def spellings() -> dict[NormalName, str]:
    """Every known spelling, normalised, to its field. Raises DataError where one spelling stands for two fields."""
    path = data_folder() / "headings.csv"
    known: dict[NormalName, str] = {}
    for line, row in read_table(path):
        key, field = heading_key(row["spelling"]), row["field"]
        if field not in FIELDS:
            raise DataError(f"line {line}: no such field", file=path, read=field)
        if known.setdefault(key, field) != field:
            raise DataError(f"line {line}: one heading for two fields", file=path, read=row["spelling"])
    return known


def heading_key(text: str) -> NormalName:
    return NormalName(normal_name(text.replace("#", " # ")).rstrip(".,: "))


def read_heading(text: str) -> Heading | None:
    """The field a heading names, or None. The whole text is tried first, so that ``kg/m`` is a heading of its own."""
    known = spellings()
    plain = tidy(" ".join(text.split()))
    if not plain or len(plain) > 60:
        return None
    field = known.get(heading_key(plain))
    if field:
        return Heading(text, field, _own_unit(plain, field), "known heading")
    split = _UNIT_AT_END.match(plain) or _LAST_WORD.match(plain)
    if not split:
        return None
    base, unit_text = split.group(1), next(g for g in split.groups()[1:] if g)
    field = known.get(heading_key(base))
    if not field:
        return None
    unit = unit_of(unit_text)
    if unit is None:
        return Heading(text, field, None, f"known heading; ({unit_text}) is no unit")
    dimension = MEASURES.get(field)
    if dimension and EVERYDAY[unit][0] != dimension:
        # A mass column in kg/m is a mass per length, whatever its words say.
        fitting = {"mass per length": "mass_per_length", "mass per area": "mass_per_area"}.get(EVERYDAY[unit][0])
        if fitting and "mass" in field:
            return Heading(text, fitting, unit, f"known heading; its unit makes it {fitting}")
        return None
    return Heading(text, field, unit, "known heading with its unit")


def _own_unit(plain: str, field: str) -> str | None:
    """The unit of a heading that is a unit (``kg/m``) or holds one as its last word (``kg each``)."""
    unit = unit_of(plain)
    if unit and MEASURES.get(field) == EVERYDAY[unit][0]:
        return unit
    first = unit_of(plain.partition(" ")[0])
    return first if first and first in ("kg", "lb", "t") and MEASURES.get(field) == "mass" else None
