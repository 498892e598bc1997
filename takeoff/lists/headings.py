"""Which field a heading names, and in what unit. The spellings stand in one table, `materials/headings.csv`."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import cache, lru_cache

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.names import NormalName, normal_name
from takeoff.quantities import EVERYDAY, tidy, unit_of

#: fields whose cells are text
TEXT_FIELDS = (
    "mark", "name", "assembly", "pick", "bundle", "phase", "run", "section", "material", "finish", "contents", "holes",
    "insulation", "remarks", "axis", "measured_at", "size", "unit", "quantity_and_length", "schedule",
)
#: fields whose cells are numbers with a unit -> the dimension
MEASURES = {
    "length": "length", "inches": "length", "total_length": "length", "width": "length",
    "thickness": "length", "height": "length", "diameter": "length",
    "unit_mass": "mass", "total_mass": "mass", "mass": "mass", "weighed_mass": "mass", "mass_per_length": "mass per length",
    "mass_per_area": "mass per area", "volume": "volume", "area": "area",
    "x": "length", "y": "length", "z": "length", "x1": "length", "y1": "length", "z1": "length",
    "x2": "length", "y2": "length", "z2": "length",
}
OTHER_FIELDS = ("quantity", "quantity_per", "quantity_of", "quantity_total", "cut_angle_1", "cut_angle_2", "roll", "stock_length",
                "not_used")
FIELDS = frozenset((*TEXT_FIELDS, *MEASURES, *OTHER_FIELDS))

#: a longer text is no heading
_LONGEST = 60
_UNIT_AT_END = re.compile(r"^(.*?)\s*(?:[(\[]\s*(?:in\s+)?([^()\[\]]{1,14})\s*[)\]]|,\s*([^,\s]{1,8})|_(mm|cm|m|in|ft|kg|lb|t))\s*$")
_LAST_WORD = re.compile(
    r"^(.*?\S)(?:\s+(?:in|en|em|w|i))?\s+(mm|cm|m|in|ft|kg|lb|t|m2|m3|m²|m³|kg/m|kg/m2|kg/m²|lb/ft)\s*$", re.IGNORECASE
)
#: ``t x b x L``: the order of the sizes in a column's cells, each letter or short word with the size it stands for
_ORDER_WORDS = {
    "t": "t", "thk": "t", "th": "t", "s": "t", "e": "t", "ep": "t", "g": "t", "gr": "t", "d": "t", "b": "b", "w": "b", "br": "b", "la": "b",
    "sz": "b", "a": "b", "h": "h", "l": "l", "lg": "l", "dl": "l",
}
_BESIDE_ORDER = re.compile(r"[(\[].*?[)\]]|\b(?:in )?(?:mm|cm|m|inch)\b|^(?:dim\w*|sizes?|abm\w*|ma(?:ß|ss)e?)\b")
_ORDER = re.compile(r"[a-z]{1,3}(?:\s*[x×*/]\s*[a-z]{1,3}){1,2}")
_PER = {"mass per length": {"kg": "kg/m", "lb": "lb/ft"}, "mass per area": {"kg": "kg/m2", "lb": "lb/ft2"}}
#: words of which headings of masses, lengths and counts are made, in nine languages, accents off
_ROLES: dict[str, str] = {word: role for role, words in {
    "mass": "weight weights wt wgt mass gewicht gew masse poids peso massa masa waga ciezar vikt",
    "length": "length len lg lgth lnth laenge lange longueur long longitud largo lunghezza lungh lengte dlugosc dl comprimento compr langd",
    "quantity": "qty qnty quantity pcs pieces anzahl menge stuckzahl qte quantite nbre cant cantidad qta aantal ilosc liczba qtd "
                "quantidade antal",
    "each": "each ea per unit pc pce piece one st stk stuck je pro p stuk stuks szt ud un u cad unitaire unitario unitaria "
            "jedn jednostkowa einzel unid",
    "total": "total tot totals all ges gesamt totaal totale totalt calk calkowita razem sum summe suma ext extended complete",
    "unit": "kg kgs lb lbs t ton tons tonne tonnes mm cm m ft in",
    "number": "n no nr nb num number numero anz liczba",
    "things": "bars ferri barre barras barres stabe varoes pretow staven stanger pezzi piezas pieces teile pecas pozycji tubes tubi rods "
              "ferros aceros elementos elementi elements elemente elementow delar onderdelen stukken",
    "filler": "de di des der del av van cut of the reqd required req off approx ca net overall o a oa finished fertig zuschnitt finish",
}.items() for word in words.split()}
#: what a base word makes of a heading: alone (or of each and of all), of each, of all
_COMPOSED = {
    "mass": ("mass", "unit_mass", "total_mass"), "length": ("length", "length", "total_length"),
    "quantity": ("quantity", "quantity", "quantity_total"),
}
_BETWEEN = re.compile(r"[\s./()\[\]_,:;'-]+")
#: letters of sizes behind a heading (``Querschnitt b/h``)
_LETTERS_BEHIND = re.compile(r"(.{3,}?)[ ,]*[(\[]?\s?\b[bhwdt]\s?[x×*/]\s?[bhwdt]\b\s?[)\]]?\s*(.*)", re.IGNORECASE)
_BY_LENGTH = re.compile(r"(?:/|\bper |\bpro |\bpar |\bpor |\bje )\s*(?:m|ft|foot|metre|meter|metro|metr|lfm|ml|mb|lm|m2|m²|sqm|m3|m³)\b")
#: why a heading has its field where `[reading.columns]` gives it
TOLD = "told by the job file"
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
def size_order(text: str) -> tuple[str, ...]:
    """The order of sizes that a heading spells (``t x b x L`` is t, b, l); empty where it spells none."""
    if len(text) > _LONGEST:
        return ()
    plain = _BESIDE_ORDER.sub(" ", tidy(text).casefold()).strip(" .,:")
    if not _ORDER.fullmatch(plain):
        return ()
    words = [_ORDER_WORDS.get(word, "") for word in re.split(r"\s*[x×*/]\s*", plain)]
    return tuple(words) if all(words) and len(set(words)) == len(words) and "l" in words else ()


def is_cross_section(text: str) -> bool:
    """Whether a heading is two sizes of a cross-section and nothing else: ``b x h``, ``dxb``, ``da x s``."""
    plain = _BESIDE_ORDER.sub(" ", tidy(text).casefold()).strip(" .,:")
    if re.fullmatch(r"(?:da|od|d|ø|dext)\s*[x×*/]\s*(?:s|t|wt|e)", plain):
        return True
    return re.fullmatch(r"[bhwdt]\s*[x×*/]\s*[bhwdt]", plain) is not None and plain[0] != plain[-1]


@lru_cache(maxsize=4096)
def read_heading(text: str) -> Heading | None:
    """The field a heading names, or None. The whole text is tried first, so that ``kg/m`` is a heading of its own."""
    known = spellings()
    plain = tidy(" ".join(text.split()))
    if not plain or len(plain) > _LONGEST:
        return None
    entry = known.get(heading_key(plain))
    if entry:
        field, *otherwise = entry.split(EITHER)
        return Heading(text, field, _own_unit(plain, field), "known heading", tuple(otherwise))
    split = _UNIT_AT_END.match(plain) or _LAST_WORD.match(plain)
    if size_order(plain):
        unit = unit_of(next(g for g in split.groups()[1:] if g)) if split else None
        return Heading(text, "size", unit, "an order of sizes")
    if is_cross_section(plain):
        unit = unit_of(next(g for g in split.groups()[1:] if g)) if split else None
        return Heading(text, "size", unit, "an order of two sizes")
    counted = _counts_things(plain)
    if counted:
        return Heading(text, counted, None, "known words of a heading", ("mark",) if counted == "quantity" else ())
    composed = _composed(plain)
    if composed is not None:
        return Heading(text, composed[0], composed[1], "known words of a heading")
    if not split:
        behind = _LETTERS_BEHIND.fullmatch(plain)
        found = read_heading(f"{behind.group(1)} {behind.group(2)}".strip()) if behind else None
        return replace(found, text=text) if found is not None and found.field in ("section", "size") else None
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
    if EVERYDAY[unit][0] == "mass" and unit in _PER.get(dimension or "", {}):
        return Heading(text, field, _PER[dimension or ""][unit], "known heading with its unit")  # Masa 1 m [kg]
    if dimension and EVERYDAY[unit][0] != dimension:
        other = {"mass per length": "mass_per_length", "mass per area": "mass_per_area"}.get(EVERYDAY[unit][0])
        return Heading(text, other, unit, f"known heading; its unit makes it {other}") if other and "mass" in field else None
    if field == "finish" and EVERYDAY[unit][0] == "area":
        return Heading(text, "area", unit, "known heading; its unit makes it an area")
    return Heading(text, field, unit, "known heading with its unit", tuple(f for f in fitting if f != field))


def _composed(plain: str) -> tuple[str, str | None] | None:
    """A heading whose every word is known though the whole is not: ``Wt. per pc (kgs)``, ``Cut len.``; field and unit, or None."""
    if _BY_LENGTH.search(plain.casefold()):
        return None
    words = [word for word in _BETWEEN.split(normal_name(plain)) if word]
    roles = [_ROLES.get(word) for word in words]
    if not words or None in roles:
        return None
    units = {unit for word, role in zip(words, roles, strict=True) if role == "unit" and (unit := unit_of(word))}
    bases = {role for role in roles if role in _COMPOSED} or {"mass" for unit in units if EVERYDAY[unit][0] == "mass"}
    if len(bases) != 1 or len(units) > 1:
        return None
    base, unit = next(iter(bases)), next(iter(units), None)
    if unit is not None and EVERYDAY[unit][0] != base:
        return None
    each, total = "each" in roles, "total" in roles
    plainly, one, all_of_them = _COMPOSED[base]
    return (plainly if each == total else all_of_them if total else one), unit


def _counts_things(plain: str) -> str:
    """The field where a heading is a word for a number and one for pieces (``N° ferri``, ``Nb de barres``), else blank."""
    words = [word.strip("°º") for word in _BETWEEN.split(normal_name(plain)) if word]
    roles = {_ROLES.get(word) for word in words}
    if {"number", "things"} <= roles <= {"number", "things", "filler"}:
        return "quantity"
    return "quantity_total" if {"number", "things", "total"} <= roles <= {"number", "things", "filler", "total"} else ""


def _own_unit(plain: str, field: str) -> str | None:
    """The unit that a known heading holds: ``kg/m``, ``kg each``, ``kg/Stk``, ``kg/mb``, ``Total (kg)``."""
    dimension = MEASURES.get(field)
    tail = _UNIT_AT_END.match(plain) or (None if plain.endswith(" T") else _LAST_WORD.match(plain))  # Poids T is the total
    texts = [plain, *(g for g in (tail.groups()[1:] if tail else ()) if g)]
    for unit in map(unit_of, texts):
        if unit and EVERYDAY[unit][0] == dimension:
            return unit
    first = unit_of(re.split(r"[\s/]", plain, maxsplit=1)[0])
    if first and EVERYDAY[first][0] == "mass":
        return first if dimension == "mass" else _PER.get(dimension or "", {}).get(first)
    return None
