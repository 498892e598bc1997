"""Reads a section text: what it names, or why it names nothing sure. Rank 2.

A text with one reading means the same whatever surrounds it. Where it leaves several, the material's kind and the
heading may settle it; digits are exact and never rounded to a neighbour; a number nobody asked for refuses the text.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Literal

from takeoff.errors import DataError
from takeoff.names import has_hidden_marks, has_lookalikes, normal_name, squeezed
from takeoff.provenance import Source
from takeoff.sections import catalogue, made, nearest, shapes, solids, tokens, tolerances
from takeoff.sections.catalogue import Row, Table
from takeoff.sections.parse import Chain, Parsed, parse, words_only
from takeoff.sections.section import Candidate, Form, Match, Section, SectionMatch
from takeoff.sections.words import VARIANTS

Hollow = Literal["hot", "cold"]

I_FAMILIES = ("UB", "UC", "UBP", "IPE", "IPN", "HE", "HL", "HD", "HP")
COLUMN_FAMILIES = ("UC", "UB", "UBP", "HE", "HD", "HP", "HL", "IPE", "IPN")
CHANNEL_FAMILIES = ("PFC", "UPE", "UPN")
HOLLOW_FAMILIES = ("SHS", "RHS", "CHS")

#: From this length on, and beyond twice the section's largest size, one number more is the piece's length.
LEAST_LENGTH_MM = 500.0

#: Kinds in the order in which they win over one another when a text holds several ("cap plate", "square bar").
KIND_ORDER = (
    "arch",
    "wedge",
    "square tube",
    "rectangular tube",
    "round tube",
    "tube",
    "box",
    "angle",
    "channel",
    "tee",
    "flat",
    "plate",
    "sheet",
    "panel",
    "hexagon",
    "square bar",
    "rod",
    "beam",
    "column",
    "bar",
    "block",
    "board",
    "pane",
)


class Refused(Exception):
    """The text is refused: reason, kind of finding, candidates."""

    def __init__(self, reason: str, kind: str = "unknown-section", candidates: tuple[Candidate, ...] = ()) -> None:
        super().__init__(reason)
        self.reason, self.kind, self.candidates = reason, kind, candidates


@dataclass(slots=True)
class Given:
    """Sizes from the list's own columns, mm, and the settings of the reading."""

    thickness: float | None
    width: float | None
    height: float | None
    diameter: float | None
    length: float | None
    hollow: Hollow
    material: str | None
    own: Table | None


@dataclass(slots=True)
class Answer:
    section: Section
    match: Match = "exact"
    length_mm: float | None = None
    notes: tuple[str, ...] = ()


def read(
    text: str,
    *,
    thickness_mm: float | None = None,
    width_mm: float | None = None,
    height_mm: float | None = None,
    diameter_mm: float | None = None,
    length_mm: float | None = None,
    hollow: Hollow = "hot",
    material_kind: str | None = None,
    heading: str | None = None,
    own: Table | None = None,
) -> SectionMatch:
    """Read one section text.

    The sizes are those of the list's own columns, in mm, and fill what the text leaves open. `hollow` says which
    standard a hollow section without one is taken to; `material_kind` (``metal``, ``wood``, or another such as
    ``glass``, ``stone``) and `heading` settle a text with several readings; `own` is the user's own table, looked in
    first. Never raises on a text: a refusal is an answer.
    """
    given = Given(thickness_mm, width_mm, height_mm, diameter_mm, length_mm, hollow, material_kind, own)
    try:
        answer = _read(text, given, heading)
    except Refused as refused:
        return SectionMatch(
            text,
            "ambiguous" if refused.kind == "ambiguous-section" else "none",
            reason=refused.reason,
            kind=refused.kind,
            candidates=refused.candidates,
        )
    except DataError as error:
        if error.file is not None:  # a fault of a table, not of the text
            raise
        return SectionMatch(text, "none", reason=error.what, kind="impossible-geometry")
    match, notes = answer.match, answer.notes
    kind = ""
    if has_hidden_marks(text) or has_lookalikes(text):
        match, kind = "similar", "similar-section"
        notes = (*notes, "hidden or look-alike characters were read through")
    elif match == "ambiguous":
        kind = "ambiguous-section"
    candidates: tuple[Candidate, ...] = ()
    if match == "similar":
        candidates = (Candidate(answer.section.designation, 100.0),)
    if match == "ambiguous":
        candidates = tuple(Candidate(r, 100.0) for r in answer.section.readings)
    return SectionMatch(text, match, answer.section, answer.length_mm, kind=kind, candidates=candidates, notes=notes)


def _read(text: str, given: Given, heading: str | None) -> Answer:
    if len(text) > 40 * tokens.LONGEST:
        raise Refused("the text is far too long for a section name")
    cleaned = tokens.clean(text)
    if not cleaned:
        raise Refused("the section is blank")
    if len(cleaned) > tokens.LONGEST:
        raise Refused("the text is too long for a section name")
    if given.own is not None:
        asked = squeezed(normal_name(cleaned))
        for rows in given.own.families.values():
            for row in rows:
                if squeezed(normal_name(row.designation)) == asked:
                    return Answer(row.section)
    cut = tokens.cut(cleaned)
    if cut is None:
        raise Refused("a number in it makes no sense")
    parsed = parse(cut)
    if parsed.problem:
        if not parsed.chains:
            parsed.chains.append(Chain([t for t in cut if t.kind == "num" and not t.unit]))
        raise Refused(parsed.problem, "impossible-geometry", _near(parsed, cleaned))
    for token in [t for c in parsed.chains for t in c.numbers] + list(parsed.labels.values()):
        if token.value <= 0:
            raise Refused(f"a size cannot be {token.raw}", "impossible-geometry", _near(parsed, cleaned))
    return _resolve(parsed, cleaned, given, heading)


def _near(parsed: Parsed, text: str) -> tuple[Candidate, ...]:
    """Candidates for a refused text, from its family or from anywhere."""
    numbers = [t.value for c in parsed.chains[:1] for t in c.numbers]
    if any(f == "PL" for f, _ in parsed.families) or "plate" in parsed.kinds:
        wanted = numbers[-1] if numbers and numbers[-1] <= 100 else 10
        usual = (3, 4, 5, 6, 8, 10, 12, 15, 20, 25, 30, 40, 50, 60, 80, 100)
        near = sorted(usual, key=lambda t: abs(t - wanted))[:3]
        return tuple(Candidate(f"PL {t}", 50.0) for t in near)
    families = [f for f, _ in parsed.families if f in catalogue.FAMILIES]
    if families:
        return nearest.in_families(families, parsed.families[0][1], [n for n in numbers if n > 0])
    return nearest.anywhere(text, parsed.chains[0].texts if parsed.chains else ())


def _resolve(p: Parsed, text: str, given: Given, heading: str | None) -> Answer:
    if p.mass is not None and not any(f for f, _ in p.families):
        return _stated(p, text)
    changed = [w for w in p.changed if w.casefold() not in ("laminated", "tapered") or p.families]
    if p.bought and not p.families:
        raise Refused(f"{p.bought[0]!r} is told by its own mass, not by a section: give a unit mass")
    if changed:
        raise Refused(f"{changed[0]!r} changes the section, so its table mass would be wrong")
    families = list(dict.fromkeys(f for f, _ in p.families))
    if len(families) > 1:
        raise Refused("several sections are named: " + ", ".join(families), "ambiguous-section")
    notes: list[str] = []
    if p.others:
        notes.append("not read as part of the section: " + " ".join(p.others[:6]))
    if families:
        answer = _family(families[0], p, given)
    else:
        kind = _kind(p, given)
        if kind is None and heading:
            said = words_only([t for t in tokens.cut(tokens.clean(heading[: tokens.LONGEST])) or [] if t.kind == "word"])
            named = [f for f, _ in said.families if len(f) > 1]
            if len(set(named)) == 1 and p.chains:
                answer = _family(named[0], p, given)
                answer.notes = (*answer.notes, "the heading names the section's kind")
                return _finish(answer, p, notes)
            p.properties |= said.properties
            p.kinds += said.kinds
            kind = _kind(p, given)
            if kind is not None:
                notes.append("the heading names the section's kind")
        answer = _made(kind, p, given) if kind is not None else _bare(p, text, given)
    return _finish(answer, p, notes)


def _finish(answer: Answer, p: Parsed, notes: list[str]) -> Answer:
    """Numbers in labels that the section did not use, and words left over."""
    if p.labels:
        length = p.labels.pop("length", None)
        if length is not None and answer.length_mm is None and answer.section.form == "prismatic":
            answer.length_mm = length.mm
        elif length is not None and answer.section.form == "prismatic" and length.mm != answer.length_mm:
            raise Refused("two lengths are given", "ambiguous-section")
    if p.labels:
        name, token = next(iter(p.labels.items()))
        raise Refused(
            f"the {name} {token.raw} does not belong to {answer.section.designation}",
            "unknown-section",
            (Candidate(answer.section.designation, 60.0),),
        )
    match = "alias" if answer.match == "exact" and notes and any(n.startswith("not read") for n in notes) else answer.match
    return replace_answer(answer, match, (*answer.notes, *notes))


def replace_answer(answer: Answer, match: Match, notes: tuple[str, ...]) -> Answer:
    return Answer(answer.section, match, answer.length_mm, notes)


def _kind(p: Parsed, given: Given) -> str | None:
    """The one kind its words name, the first in `KIND_ORDER`; None where none is named."""
    found = [k for k in KIND_ORDER if k in p.kinds]
    if not found:
        return None
    kind = found[0]
    if kind in ("beam", "column") and (p.wood or given.material == "wood"):
        return "board"
    if kind == "beam" and "H" not in p.letters and "block" in found:
        return "block"
    if kind in ("bar",) and "round" in p.properties:
        return "rod"
    if kind in ("bar",) and "square" in p.properties:
        return "square bar"
    if kind in ("flat",) and "round" in p.properties and "plate" in found:
        return "plate"
    if kind == "flat" and found[1:2] == ["plate"]:
        return "plate"
    if kind in ("tube", "box"):
        for name in ("square", "rectangular", "round"):
            if name in p.properties:
                return f"{name} tube"
    if kind == "pane" and not p.glass and "panel" in found:
        return "panel"
    if kind == "panel" and p.glass:
        return "pane"
    return kind


# -- masses the text states -------------------------------------------------------------------------------------------
def _stated(p: Parsed, text: str) -> Answer:
    """``Grating 34 kg/m2``, ``cable tray 4.2 kg/m``, ``bolt set 0.42 kg``: the mass itself is the section."""
    form, value = p.mass or ("each", 0.0)
    if value <= 0:
        raise Refused("the stated mass is not above zero", "impossible-geometry")
    factor, tolerance = tolerances.mass_factor("stated")
    forms: dict[str, tuple[Form, tuple[str, ...]]] = {
        "area mass": ("area mass", ("width", "length")),
        "length mass": ("length mass", ("length",)),
        "each": ("each", ()),
    }
    chosen, needs = forms[form]
    section = Section(
        designation=text[:60],
        family="Stated mass",
        shape="stated mass",
        form=chosen,
        source=Source("The list's own statement", "section text", "common practice"),
        dimensions_mm={},
        needs=needs,
        published_kg_per_m=value if form == "length mass" else None,
        kg_per_m2=value if form == "area mass" else None,
        kg_each=value if form == "each" else None,
        factor=factor,
        tolerance=tolerance,
    )
    p.labels.clear()
    return Answer(section, "exact")


# -- catalogue families -----------------------------------------------------------------------------------------------
def _one_chain(p: Parsed, what: str) -> Chain:
    """The only row of sizes; more than one leaves numbers unexplained."""
    if len(p.chains) > 1:
        spare = ", ".join("x".join(t.raw for t in c.numbers) for c in p.chains[1:])
        raise Refused(f"numbers are left over beside {what}: {spare}")
    return p.chains[0] if p.chains else Chain()


def _texts(chain: Chain) -> tuple[str, ...]:
    """Numbers as catalogue keys, in mm."""
    return tuple(t.text if t.unit in ("", "mm") else catalogue.canonical(f"{t.mm:.4f}") for t in chain.numbers)


def _variant(family: str, variant: str, p: Parsed) -> str:
    """The variant letters, whether written into the family's word or apart from it."""
    known = VARIANTS.get(family, frozenset())
    apart = [w for w in p.letters if w in known]
    strange = [w for w in p.letters if w not in known and w not in ("H", "I", "U", "C")]
    if strange:
        numbers = [t.value for c in p.chains[:1] for t in c.numbers]
        raise Refused(f"{family} has no variant {strange[0]}", "unknown-section", nearest.in_families((family,), "", numbers))
    if not apart:
        return variant
    if len(set(apart)) > 1 or (variant and variant != apart[0]):
        raise Refused(f"two variants are named: {' '.join([variant, *apart]).strip()}", "ambiguous-section")
    return apart[0]


def _family(family: str, p: Parsed, given: Given) -> Answer:
    if family in HOLLOW_FAMILIES:
        return _hollow((family,), p, given)
    if family in MADE_FAMILIES:
        return MADE_FAMILIES[family](p, given)
    if family == "PL":
        return _sheet("plate", p, given)
    variant = _variant(family, next(v for f, v in p.families if f == family) if p.families else "", p)
    chain = _one_chain(p, family)
    return _catalogue((family,), variant, chain, given)


def _catalogue(families: tuple[str, ...], variant: str, chain: Chain, given: Given) -> Answer:
    """A row of the rolled families by its numbers, or with the piece's length as one number more."""
    numbers, length = _texts(chain), None
    name = " or ".join(families[:3])
    if not numbers and families == ("L",):
        sizes = [given.height or given.width, given.width or given.height, given.thickness]
        numbers = tuple(catalogue.canonical(f"{s:.4f}") for s in sizes if s is not None)
    if not numbers:
        raise Refused(f"{name} names a family, not a size", "unknown-section", nearest.in_families(families[:1], variant, ()))
    found = _rows(families, variant, numbers, given.own)
    if not found and len(numbers) > 1:
        last = chain.numbers[-1].mm if chain.numbers else 0.0
        if last >= LEAST_LENGTH_MM and last > 2 * max((t.mm for t in chain.numbers[:-1]), default=0.0):
            found, length = _rows(families, variant, numbers[:-1], given.own), last
    if not found:
        near = nearest.in_families(families, variant, [float(n) for n in numbers])
        why = _impossible(families, [float(n) for n in numbers])
        if why:
            raise Refused(why, "impossible-geometry", near)
        raise Refused(f"no {name} of that size in the tables", "unknown-section", near)
    return _pick(found, length)


def _impossible(families: tuple[str, ...], numbers: list[float]) -> str:
    """Why three numbers cannot be an angle or a hollow section, where that is the reason."""
    if families == ("L",) and len(numbers) in (2, 3):
        legs, t = numbers[:-1], numbers[-1]
        return shapes.impossible("angle", {"h": max(legs), "b": min(legs), "tf": t})
    if families[0] in HOLLOW_FAMILIES and len(numbers) in (2, 3):
        outer, t = numbers[:-1], numbers[-1]
        if families == ("CHS",):
            return (
                shapes.impossible("round hollow", {"h": outer[0], "tf": t})
                if len(numbers) == 2
                else "a round tube has a diameter and a wall, no third size"
            )
        return shapes.impossible("box hollow", {"h": max(outer), "b": min(outer), "tf": t})
    return ""


def _rows(families: tuple[str, ...], variant: str, numbers: tuple[str, ...], own: Table | None) -> list[Row]:
    found: list[Row] = []
    for family in families:
        if own is not None:
            found += own.find(family, variant, numbers)
        found += catalogue.find(family, variant, numbers)
    return found


def _pick(found: list[Row], length: float | None) -> Answer:
    """One row, or several: the first is nominal and the bounds cover all."""
    if len(found) == 1:
        return Answer(found[0].section, "exact", length)
    return Answer(covering([row.section for row in found]), "ambiguous", length)


def covering(sections: list[Section]) -> Section:
    """The first section, its factor widened to the lightest and heaviest of all of them."""
    first = sections[0]
    base = first.kg_per_m()
    masses = [m for s in sections if (m := s.kg_per_m()) is not None]
    if base is None:
        return first
    factor = type(first.factor)(min(m.light for m in masses) / base.nominal, 1.0, max(m.heavy for m in masses) / base.nominal)
    return replace(first, factor=factor, readings=tuple(dict.fromkeys(s.designation for s in sections)))


# -- hollow sections --------------------------------------------------------------------------------------------------
def _hollow(families: tuple[str, ...], p: Parsed, given: Given, *, listed_only: bool = True, also: tuple[str, ...] = ()) -> Answer:
    """SHS, RHS, CHS by the standard named, or by `hollow`; a general word (tube) may also be of any size."""
    chain = _one_chain(p, families[0])
    numbers = list(chain.numbers)
    values = [t.mm for t in numbers]
    keys = list(_texts(chain))
    wall = p.labels.pop("wall", None) or (p.labels.pop("thickness", None))
    outside = p.labels.pop("outer diameter", None) or p.labels.pop("diameter", None)
    bore = p.labels.pop("inner diameter", None)
    if outside is not None and not numbers:
        keys, values = [catalogue.canonical(f"{outside.mm:.4f}")], [outside.mm]
        families, also = ("CHS",), ()
    if bore is not None and len(values) == 1:
        thick = (values[0] - bore.mm) / 2
        if thick <= 0:
            raise Refused("the inner diameter is no less than the outer one", "impossible-geometry")
        keys.append(catalogue.canonical(f"{thick:.4f}"))
        values.append(thick)
        families, also = ("CHS",), ()
    elif bore is not None:
        raise Refused("an inner diameter beside more than one size", "ambiguous-section")
    if wall is not None:
        keys.append(catalogue.canonical(f"{wall.mm:.4f}"))
        values.append(wall.mm)
    if not values:
        sizes = [given.diameter] if families == ("CHS",) and given.diameter else [given.height or given.width, given.width or given.height]
        values = [s for s in [*sizes, given.thickness] if s is not None]
        keys = [catalogue.canonical(f"{v:.4f}") for v in values]
        if not values:
            raise Refused(
                f"{' or '.join(families)} names a family, not a size", "unknown-section", nearest.in_families(families[:1], "", ())
            )
    length = None
    most = 2 if families == ("CHS",) else 3
    if len(values) == most + 1 or (len(values) == 3 and "SHS" in families and values[0] != values[1] and values[2] >= LEAST_LENGTH_MM):
        if values[-1] < LEAST_LENGTH_MM or values[-1] <= 2 * max(values[:-1]):
            raise Refused("one size too many for a hollow section", "impossible-geometry", nearest.in_families(families, "", values[:most]))
        length = values.pop()
        keys.pop()
    if len(values) > most:
        raise Refused("too many sizes for a hollow section", "impossible-geometry", nearest.in_families(families, "", values[:most]))
    near = nearest_hollow(families, values)
    if len(values) < 2:
        raise Refused("the wall is missing", "impossible-geometry", near())
    why = _impossible(families, values)
    if why:
        raise Refused(why, "impossible-geometry", near())
    chosen = families
    if len(values) == 3:
        equal = keys[0] == keys[1]
        if families == ("SHS",) and not equal:
            raise Refused("a square hollow section cannot have two different sides", "impossible-geometry", near())
        chosen = ("SHS",) if equal else ("RHS",)
    elif families == ("RHS",):
        raise Refused("a rectangular hollow section has two sides and a wall: a size is missing", "impossible-geometry", near())
    found = _hollow_rows(chosen, tuple(keys), p, given)
    if found is not None:
        if also and len(values) == 2 and (other := _hollow_rows(also, tuple(keys), p, given)) is not None:
            return Answer(covering([found, other]), "ambiguous", length)
        return Answer(found, "exact", length)
    if listed_only:
        raise Refused(f"no {chosen[0]} of that size in the tables" + _standard_named(p), "unknown-section", near())
    outer = values[0] if len(values) == 2 and chosen == ("CHS",) else (values[0], values[-2])
    section = made.tube(outer, values[-1], note="not a listed size: computed from its sizes")
    if also and len(values) == 2:
        section = covering([section, made.tube((values[0], values[0]), values[1])])
        return Answer(section, "ambiguous", length)
    return Answer(section, "alias", length)


def nearest_hollow(families: tuple[str, ...], values: list[float]) -> Callable[[], tuple[Candidate, ...]]:
    def near() -> tuple[Candidate, ...]:
        wanted = families
        if len(values) >= 2 and families[0] in ("SHS", "RHS"):
            wanted = ("SHS", "RHS") if values[0] == values[1] or families == ("SHS",) else ("RHS", "SHS")
        return nearest.in_families(wanted, "", values)

    return near


def _standard_named(p: Parsed) -> str:
    said = _standard(p)
    return f" of {said}" if said else ""


def _standard(p: Parsed) -> str | None:
    """The hollow section standard that the text names, by number or by hot and cold."""
    numbers = " ".join(p.standards)
    hot, cold = "10210" in numbers or "hot" in p.properties, "10219" in numbers or "cold" in p.properties
    if hot and cold:
        raise Refused("both hot finished and cold formed are named", "ambiguous-section")
    return "EN 10210-2" if hot or "seamless" in p.properties else "EN 10219-2" if cold else None


def _hollow_rows(families: tuple[str, ...], keys: tuple[str, ...], p: Parsed, given: Given) -> Section | None:
    rows = _rows(families, "", keys, given.own)
    if not rows:
        return None
    said = _standard(p)
    by_standard = {row.standard: row.section for row in rows}
    hot, cold = by_standard.get("EN 10210-2"), by_standard.get("EN 10219-2")
    if said is not None:
        section = by_standard.get(said)
        if section is not None and "seamless" in p.properties:
            factor, tolerance = tolerances.mass_factor("en10210-2-seamless")
            section = replace(section, factor=factor, tolerance=tolerance)
        return section
    if hot is None and cold is None:
        return rows[0].section
    first = (cold or hot) if given.hollow == "cold" else (hot or cold)
    if first is None:
        return None
    if given.hollow == "cold" and cold is not None:
        return cold
    # Hot finished is the heavier: light reaches down to cold formed, and a size listed only as cold formed may yet be
    # bought hot finished, so heavy reaches up to it.
    other = cold if first is hot else hot
    factor, note = first.factor, first.note
    if other is not None and other.published_kg_per_m and first.published_kg_per_m:
        ratio = other.published_kg_per_m / first.published_kg_per_m
    else:
        ratio = _other_corner(first)
        note = f"listed in {first.standard} only"
    factor = type(factor)(factor.light * min(1.0, ratio), 1.0, factor.heavy * max(1.0, ratio))
    return replace(first, factor=factor, hollow_standard_assumed=True, note=note)


def _other_corner(section: Section) -> float:
    """Area with the other standard's corner radii over this one's."""
    if section.shape != "box hollow" or section.area_mm2 is None:
        return 1.0
    t = section.dimensions_mm["tf"]
    hot, cold = 1.25, 3.0 if t <= 6 else 4.0 if t <= 10 else 5.0
    change = 0.8584 * (cold - hot) * t * t
    return (section.area_mm2 + (change if section.standard == "EN 10219-2" else -change)) / section.area_mm2


# -- made to size -----------------------------------------------------------------------------------------------------
def _take(p: Parsed, *names: str) -> float | None:
    """A labelled size under any of these names, mm."""
    for name in names:
        if name in p.labels:
            return p.labels.pop(name).mm
    return None


def _decided(p: Parsed, given: Given) -> str | None:
    """The kind of material that decides tolerances: the row's, or the text's own word."""
    if given.material is not None:
        return given.material
    return "glass" if p.glass else "wood" if p.wood else "metal" if p.metal else None


def _no_open(p: Parsed) -> None:
    token = p.open_number
    if token is not None:
        plain = token.raw.replace(",", "").replace(".", "")
        raise Refused(f"{token.raw} may mean {token.text} or {plain}", "ambiguous-section")


def _values(chain: Chain, most: int, what: str) -> list[float]:
    if len(chain.numbers) > most:
        raise Refused(f"too many sizes for a {what}", "impossible-geometry")
    return chain.mm


def _flat(p: Parsed, given: Given) -> Answer:
    _no_open(p)
    values = _values(_one_chain(p, "flat"), 3, "flat")
    length = values.pop() if len(values) == 3 else None
    if length is not None and length < max(values):
        raise Refused("the third size of a flat should be its length, the longest", "ambiguous-section")
    thickness, width = _take(p, "thickness", "wall"), _take(p, "width")
    if len(values) == 2:
        thickness, width = min(values), max(values)
    elif len(values) == 1:
        if thickness is not None:
            width = values[0]
        elif width is not None:
            thickness = values[0]
        else:
            # One size of a flat is its width, unless the row gives the width.
            width, thickness = (given.width, values[0]) if given.width is not None and given.thickness is None else (values[0], None)
    width = given.width if width is None else width
    thickness = given.thickness if thickness is None else thickness
    return Answer(_listed_bar("flat", {"width": width, "thickness": thickness}, p, given), "exact", length)


def _listed_bar(shape: str, sizes: dict[str, float | None], p: Parsed, given: Given) -> Section:
    """A bar by its sizes; a listed one of metal carries its table's mass and source."""
    kind = _decided(p, given)
    if kind in ("metal", None) and all(v is not None for v in sizes.values()):
        family = made.BARS[shape][0]
        keys = tuple(catalogue.canonical(f"{v:.4f}") for v in sizes.values() if v is not None)
        rows = catalogue.find(family, "", keys)
        if rows:
            return replace(rows[0].section, material_hint="metal" if kind == "metal" else None)
    return made.bar(shape, sizes, kind)


def _single(shape: str, field: str, *labels: str) -> Callable[[Parsed, Given], Answer]:
    """A bar told by one size, perhaps with its length behind it."""

    def build(p: Parsed, given: Given) -> Answer:
        _no_open(p)
        values = _values(_one_chain(p, shape), 3, shape)
        size = _take(p, *labels)
        length = None
        if shape == "square bar" and len(values) >= 2 and values[0] == values[1]:
            values = values[1:]
        if len(values) == 2 and size is None:
            size, length = values
            if length < 2 * size:
                raise Refused(f"two sizes for a {shape}: {made.number(size)} and {made.number(length)} mm", "ambiguous-section")
        elif len(values) == 1 and size is None:
            size = values[0]
        elif values and size is not None:
            length = values[0] if len(values) == 1 and values[0] >= 2 * size else None
            if length is None:
                raise Refused(f"two sizes for a {shape}", "ambiguous-section")
        elif len(values) > 1:
            raise Refused(f"too many sizes for a {shape}", "impossible-geometry")
        if size is None:
            size = given.diameter if given.diameter is not None else given.width if field == "width" or given.diameter is None else None
            if size is None and field == "diameter":
                size = given.thickness
        return Answer(_listed_bar(shape, {field: size}, p, given), "exact", length)

    return build


def _sheet(kind: str, p: Parsed, given: Given) -> Answer:
    """Plate, sheet, pane, panel. The thickness is the smallest size; when it stands first, width and length follow as typed."""
    _no_open(p)
    prefix = {"plate": "PL", "sheet": "Sheet", "pane": "Pane", "panel": "Panel"}[kind]
    material = _decided(p, given)
    if kind == "pane" and material is None:
        material = "glass"
    if kind == "plate" and material is None:
        material = "metal" if p.metal else None
    chains = list(p.chains)
    thickness, width, length = _take(p, "thickness", "wall"), _take(p, "width"), _take(p, "length")
    if len(chains) == 2 and {len(c.numbers) for c in chains} == {1, 2} and thickness is None:
        # "Sheet 1.5 mm | 2x1 m", "12 mm plate 200x450": the lone number is the thickness.
        lone, pair = sorted(chains, key=lambda c: len(c.numbers))
        values = [lone.mm[0], *pair.mm]
        if values[0] > min(values[1:]):
            raise Refused("which of the sizes is the thickness cannot be told", "ambiguous-section")
    else:
        values = list(_values(_one_chain(p, kind), 3, kind))
    if thickness is not None and len(values) in (2, 3) and thickness in values and len(values) == 3:
        values.remove(thickness)
    if thickness is None and values:
        if len(values) == 3 and values[0] != min(values):
            thickness = min(values)
            values.remove(thickness)
            values.sort()
        else:
            thickness = min(values)
            values.remove(thickness)
        if len(values) == 1 and thickness > 0 and given.thickness is not None and given.thickness != thickness and given.width is None:
            # The text gives the plan sizes and the row the thickness.
            values, thickness = [thickness, values[0]], given.thickness
    if len(values) == 2:
        width, length = values
    elif len(values) == 1:
        width = values[0] if width is None else width
    thickness = thickness if thickness is not None else given.thickness
    width = width if width is not None else given.width
    length = length if length is not None else given.length
    section = made.sheet(thickness, width, length, material, prefix=prefix)
    p.labels.pop("height", None)
    return Answer(section, "exact", length if length is not None and length != given.length else None)


def _block(p: Parsed, given: Given) -> Answer:
    _no_open(p)
    values = _values(_one_chain(p, "block"), 3, "block")
    length, width, height = _take(p, "length"), _take(p, "width"), _take(p, "height", "thickness")
    if len(values) == 1 and height is None:
        height = values[0]
    elif len(values) == 2 and length is None and width is None:
        length, width = values
    elif len(values) == 3:
        length, width, height = values
    elif values:
        raise Refused("the sizes of the block are not told apart", "ambiguous-section")
    length = length if length is not None else given.length
    width = width if width is not None else given.width
    if height is None:
        height = given.height if given.height is not None else given.thickness
    return Answer(made.block(length, width, height, _decided(p, given)), "exact")


def _board(p: Parsed, given: Given) -> Answer:
    _no_open(p)
    values = _values(_one_chain(p, "board"), 3, "board")
    length = None
    if len(values) == 3:
        length = max(values)
        values.remove(length)
        if length < 2 * max(values):
            raise Refused("which of the sizes is the length cannot be told", "ambiguous-section")
    thickness, width = _take(p, "thickness"), _take(p, "width", "height")
    if len(values) == 2:
        thickness, width = min(values), max(values)
    elif len(values) == 1:
        if thickness is None:
            thickness = values[0]
        else:
            width = values[0]
    thickness = thickness if thickness is not None else given.thickness
    width = width if width is not None else given.width if given.width is not None else given.height
    return Answer(made.bar("board", {"thickness": thickness, "width": width}, _decided(p, given)), "exact", length)


def _arch(p: Parsed, given: Given) -> Answer:
    _no_open(p)
    if p.chains:
        _one_chain(p, "arch stone")
        raise Refused("an arch stone is told by R (inner radius), D (depth), A (angle) or C (chord), W (width)", "unknown-section")
    radius, depth = _take(p, "radius"), _take(p, "depth", "height", "thickness")
    angle = p.labels.pop("angle").value if "angle" in p.labels else None
    chord, width = _take(p, "chord"), _take(p, "width", "length")
    if radius is None or depth is None or (angle is None and chord is None):
        raise Refused("an arch stone needs R (inner radius), D (depth) and A (angle) or C (chord)", "impossible-geometry")
    if angle is not None and chord is not None:
        raise Refused("an arch stone takes its angle or its chord, not both", "ambiguous-section")
    return Answer(solids.arch_stone(radius, depth, angle_deg=angle, chord=chord, width=width if width is not None else given.width))


def _wedge(p: Parsed, given: Given) -> Answer:
    _no_open(p)
    chain = _one_chain(p, "wedge")
    if len(chain.numbers) not in (3, 4) or chain.joins[1] != "/" or "/" in (chain.joins[0], *chain.joins[2:]):
        raise Refused("a wedge is told as length x thick end / thin end x width", "unknown-section")
    width = chain.mm[3] if len(chain.numbers) == 4 else given.width
    length, thick, thin = chain.mm[:3]
    return Answer(solids.wedge(length, thick, thin, width))


MADE_FAMILIES: dict[str, Callable[[Parsed, Given], Answer]] = {
    "FL": _flat,
    "RD": _single("round bar", "diameter", "diameter", "outer diameter"),
    "SQ": _single("square bar", "width", "width", "thickness"),
    "HEX": _single("hexagon", "width", "width", "diameter"),
}


def _made(kind: str, p: Parsed, given: Given) -> Answer:
    """A kind named by a general word."""
    if kind in ("plate", "sheet", "pane", "panel"):
        return _sheet(kind, p, given)
    simple: dict[str, Callable[[Parsed, Given], Answer]] = {
        "flat": _flat,
        "rod": MADE_FAMILIES["RD"],
        "square bar": MADE_FAMILIES["SQ"],
        "hexagon": MADE_FAMILIES["HEX"],
        "block": _block,
        "board": _board,
        "arch": _arch,
        "wedge": _wedge,
    }
    wooden = p.wood or given.material == "wood" or "board" in p.kinds
    if kind == "block" and wooden and [len(c.numbers) for c in p.chains] == [2]:
        return _board(p, given)
    if kind in simple:
        return simple[kind](p, given)
    if kind == "angle":
        return _catalogue(("L",), "", _one_chain(p, "angle"), given)
    if kind == "tee":
        return _catalogue(("T",), "", _one_chain(p, "tee"), given)
    if kind == "channel":
        return _catalogue(CHANNEL_FAMILIES, "", _one_chain(p, "channel"), given)
    if kind == "beam":
        return _catalogue(I_FAMILIES, "", _one_chain(p, "beam"), given)
    if kind == "column":
        return _catalogue(COLUMN_FAMILIES, "", _one_chain(p, "column"), given)
    if kind == "bar":
        return _plain_bar(p, given)
    return _tube(kind, p, given)


def _plain_bar(p: Parsed, given: Given) -> Answer:
    """``Bar 50x10`` is a flat, ``bar 25x25`` a square; ``bar 20`` may be round or square."""
    values = _one_chain(p, "bar").mm
    if len(values) >= 2:
        return MADE_FAMILIES["SQ"](p, given) if values[0] == values[1] else _flat(p, given)
    if "diameter" in p.labels or given.diameter is not None:
        return MADE_FAMILIES["RD"](p, given)
    if len(values) == 1 and not p.labels:
        size = made.number(values[0])
        raise Refused(
            "a bar of one size may be round or square", "ambiguous-section", (Candidate(f"RD {size}", 90.0), Candidate(f"SQ {size}", 90.0))
        )
    return _flat(p, given)


def _tube(kind: str, p: Parsed, given: Given) -> Answer:
    """Tube, pipe, hollow section by general words: listed sizes first, then any size that can be."""
    listed = any(w.casefold() in ("section", "sections") for w in p.others)
    sizes = len(p.chains[0].numbers) if p.chains else 0
    if kind == "square tube":
        return _hollow(("SHS",), p, given, listed_only=listed)
    if kind == "rectangular tube":
        return _hollow(("RHS",), p, given, listed_only=listed)
    if kind == "round tube":
        return _hollow(("CHS",), p, given, listed_only=listed)
    if sizes >= 3 and not (sizes == 3 and p.chains[0].mm[2] >= LEAST_LENGTH_MM):
        return _hollow(("SHS", "RHS"), p, given, listed_only=listed)
    if kind == "box":
        return _hollow(("SHS",), p, given, listed_only=listed)
    if "outer diameter" in p.labels or "inner diameter" in p.labels or (p.chains and p.chains[0].after_diameter):
        return _hollow(("CHS",), p, given, listed_only=listed)
    if not sizes:
        raise Refused("a tube without sizes: square, rectangular or round, with its wall", "unknown-section")
    return _hollow(("CHS",), p, given, listed_only=listed, also=("SHS",))


# -- no word names the kind -------------------------------------------------------------------------------------------
def _bare(p: Parsed, text: str, given: Given) -> Answer:
    """Only numbers and signs: read where one reading is left, else refused with the readings offered."""
    chain = p.chains[0] if p.chains else Chain()
    count = len(chain.numbers)
    round_sign = "round" in p.properties or chain.after_diameter or "outer diameter" in p.labels or "inner diameter" in p.labels
    if round_sign and (count or p.labels):
        if count >= 2 or "inner diameter" in p.labels or "wall" in p.labels or "thickness" in p.labels:
            return _hollow(("CHS",), p, given, listed_only=False)
        return MADE_FAMILIES["RD"](p, given)
    if "square" in p.properties and count == 1:
        return MADE_FAMILIES["SQ"](p, given)
    if "square" in p.properties and count == 2 and chain.mm[1] < chain.mm[0] / 2:
        return _hollow(("SHS",), p, given, listed_only=False)
    if ("square" in p.properties or "rectangular" in p.properties) and count >= 3:
        return _hollow(("SHS", "RHS"), p, given, listed_only=False)
    if not count and "thickness" in p.labels:
        return _sheet("plate", p, given)
    wooden = given.material == "wood" or p.wood
    if wooden and len(p.chains) == 1 and count in (2, 3):
        return _board(p, given)
    if not p.others and "legs" in p.properties and count >= 2:
        return _catalogue(("L",), "", _one_chain(p, "angle"), given)
    if "letter" in p.properties and count:
        return _letter(p, given)
    other_kind = given.material is not None and given.material not in ("metal", "wood")
    if other_kind and len(p.chains) == 1 and count == 3:
        answer = _block(p, given)
        answer.match = "alias"
        return answer
    if len(p.chains) == 1 and count == 3 and (given.material == "metal" or not p.others) and not other_kind:
        keys = _texts(chain)
        beams = _rows((*I_FAMILIES, "PFC"), "", keys, given.own)
        rest = _rows(("L", *HOLLOW_FAMILIES), "", keys, None)
        if len(beams) == 1 and not rest:
            answer = _pick(beams, None)
            answer.match = "alias"
            return answer
    _refuse_bare(p, text, chain)
    raise AssertionError("unreachable")  # pragma: no cover


def _letter(p: Parsed, given: Given) -> Answer:
    """``H 200``, ``I 200``, ``U 100``, ``C``: a letter shared by several families; they are read only where one fits."""
    letter = p.letters[0]
    families = {"U": ("UPN", "UPE"), "I": ("IPN", "IPE"), "H": ("HE", "HD", "HP"), "C": ("UPN", "UPE")}.get(letter, ())
    chain = _one_chain(p, letter)
    rows = _rows(families, "", _texts(chain), given.own)
    if rows:
        names = tuple(Candidate(r.designation, 90.0) for r in rows)
        raise Refused(f"{letter} is shared by several families", "ambiguous-section", names)
    raise Refused(
        f"{letter} names no family with that size", "unknown-section", nearest.in_families(families, "", chain.mm) if families else ()
    )


def _refuse_bare(p: Parsed, text: str, chain: Chain) -> None:
    """Say which readings a text without a kind has, or that it has none."""
    numbers = chain.texts
    if numbers and not p.others:
        readings: list[Candidate] = []
        keys = _texts(chain)
        for family in ("L", "SHS", "RHS", "CHS", *I_FAMILIES, "PFC"):
            readings += [Candidate(r.designation, 90.0) for r in catalogue.find(family, "", keys)]
        shown = "x".join(made.number(v) for v in chain.mm)
        if len(numbers) == 2:
            readings += [Candidate(f"FL {shown}", 80.0), Candidate(f"Board {shown}", 70.0)]
        elif len(numbers) == 3:
            readings.append(Candidate(f"Block {shown}", 60.0))
        elif len(numbers) == 1:
            readings += [Candidate(f"{f} {shown}", 50.0) for f in ("RD", "SQ", "PL")]
        raise Refused("nothing names the kind of section", "ambiguous-section", nearest.unique(readings, 8))
    raise Refused("names no section in the tables", "unknown-section", nearest.anywhere(text, numbers))
