"""Which field a heading names, and in what unit. The spellings stand in one table, `materials/headings.csv`."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache, lru_cache

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.names import NormalName, normal_name
from takeoff.quantities import EVERYDAY, tidy, unit_of

#: fields whose cells are text
TEXT_FIELDS = (
    "mark", "name", "assembly", "pick", "bundle", "phase", "run", "section", "material", "finish", "contents", "holes",
    "insulation", "remarks", "axis", "measured_at", "size", "unit", "quantity_and_length",
)
#: fields whose cells are numbers with a unit -> the dimension
MEASURES = {
    "length": "length", "total_length": "length", "width": "length", "thickness": "length", "height": "length", "diameter": "length",
    "unit_mass": "mass", "total_mass": "mass", "mass": "mass", "weighed_mass": "mass", "mass_per_length": "mass per length",
    "mass_per_area": "mass per area", "volume": "volume", "area": "area",
    "x": "length", "y": "length", "z": "length", "x1": "length", "y1": "length", "z1": "length",
    "x2": "length", "y2": "length", "z2": "length",
}
OTHER_FIELDS = ("quantity", "quantity_per", "quantity_total", "cut_angle_1", "cut_angle_2", "roll", "stock_length", "not_used")
FIELDS = frozenset((*TEXT_FIELDS, *MEASURES, *OTHER_FIELDS))

_UNIT_AT_END = re.compile(r"^(.*?)\s*(?:[(\[]\s*(?:in\s+)?([^()\[\]]{1,14})\s*[)\]]|,\s*([^,\s]{1,8})|_(mm|cm|m|in|ft|kg|lb|t))\s*$")
_LAST_WORD = re.compile(
    r"^(.*?\S)(?:\s+(?:in|en|em|w|i))?\s+(mm|cm|m|in|ft|kg|lb|t|m2|m3|m²|m³|kg/m|kg/m2|kg/m²|lb/ft)\s*$", re.IGNORECASE
)
_PER = {"mass per length": {"kg": "kg/m", "lb": "lb/ft"}, "mass per area": {"kg": "kg/m2", "lb": "lb/ft2"}}
#: between the fields of a heading that people use for either: the list's contents decide (see `tables`)
EITHER = " or "


@dataclass(frozen=True, slots=True)
class Heading:
    """What one heading cell was taken for: the field, the unit it names (an everyday spelling) and why.

    `otherwise` holds further fields that people use this heading for; the list's contents decide between them.
    """

    text: str
    field: str
    unit: str | None
    why: str
    otherwise: tuple[str, ...] = ()


@cache
def spellings() -> dict[NormalName, str]:
    """Every known spelling, normalised, to its field. Raises DataError where one spelling stands for two fields."""
    path = data_folder() / "headings.csv"
    known: dict[NormalName, str] = {}
    for line, row in read_table(path):
        key, field = heading_key(row["spelling"]), row["field"]
        if not FIELDS.issuperset(field.split(EITHER)):
            raise DataError(f"line {line}: no such field", file=path, read=field)
        if known.setdefault(key, field) != field:
            raise DataError(f"line {line}: one heading for two fields", file=path, read=row["spelling"])
    return known


def heading_key(text: str) -> NormalName:
    # ß is not folded to ss here: Maße (sizes) and Masse (mass) are two headings.
    text = text.replace("#", " # ").replace("ß", "sz").replace("∅", "Ø").replace("⌀", "Ø")
    return NormalName(normal_name(text).rstrip(".,: "))


@lru_cache(maxsize=4096)
def read_heading(text: str) -> Heading | None:
    """The field a heading names, or None. The whole text is tried first, so that ``kg/m`` is a heading of its own."""
    known = spellings()
    plain = tidy(" ".join(text.split()))
    if not plain or len(plain) > 60:
        return None
    entry = known.get(heading_key(plain))
    if entry:
        field, *otherwise = entry.split(EITHER)
        return Heading(text, field, _own_unit(plain, field), "known heading", tuple(otherwise))
    split = _UNIT_AT_END.match(plain) or _LAST_WORD.match(plain)
    if not split:
        return None
    base, unit_text = split.group(1), next(g for g in split.groups()[1:] if g)
    entry = known.get(heading_key(base))
    if not entry:
        return None
    fields = entry.split(EITHER)
    unit = unit_of(unit_text)
    if unit is None:
        return Heading(text, fields[0], None, f"known heading; ({unit_text}) is no unit", tuple(fields[1:]))
    # A unit tells between fields that share a word: a surface in m² is an area, a mass in kg/m a mass per length.
    fitting = [field for field in fields if MEASURES.get(field, EVERYDAY[unit][0]) == EVERYDAY[unit][0]]
    field = fitting[0] if fitting else fields[0]
    dimension = MEASURES.get(field)
    if dimension and EVERYDAY[unit][0] != dimension:
        other = {"mass per length": "mass_per_length", "mass per area": "mass_per_area"}.get(EVERYDAY[unit][0])
        return Heading(text, other, unit, f"known heading; its unit makes it {other}") if other and "mass" in field else None
    if field == "finish" and EVERYDAY[unit][0] == "area":
        return Heading(text, "area", unit, "known heading; its unit makes it an area")
    return Heading(text, field, unit, "known heading with its unit", tuple(f for f in fitting if f != field))


def _own_unit(plain: str, field: str) -> str | None:
    """The unit that a known heading holds: ``kg/m``, ``kg each``, ``kg/Stk``, ``kg/mb``, ``Total (kg)``."""
    dimension = MEASURES.get(field)
    tail = _UNIT_AT_END.match(plain) or _LAST_WORD.match(plain)
    texts = [plain, *(g for g in (tail.groups()[1:] if tail else ()) if g)]
    for unit in map(unit_of, texts):
        if unit and EVERYDAY[unit][0] == dimension:
            return unit
    first = unit_of(re.split(r"[\s/]", plain, maxsplit=1)[0])
    if first and EVERYDAY[first][0] == "mass":
        return first if dimension == "mass" else _PER.get(dimension or "", {}).get(first)
    return None
