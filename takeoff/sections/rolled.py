"""Sections of the tables by their numbers: rolled shapes, pairs of them, and the bounds over several readings. Rank 2."""

from __future__ import annotations

from dataclasses import replace

from takeoff.sections import catalogue, nearest, shapes, tokens
from takeoff.sections.answers import LEAST_LENGTH_MM, Answer, Given, Refused, key_texts, one_chain
from takeoff.sections.catalogue import Row, Table
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.section import Candidate, Section
from takeoff.sections.words import VARIANTS

I_FAMILIES = ("UB", "UC", "UBP", "IPE", "IPN", "HE", "HL", "HD", "HP")


COLUMN_FAMILIES = ("UC", "UB", "UBP", "HE", "HD", "HP", "HL", "IPE", "IPN")


CHANNEL_FAMILIES = ("PFC", "UPE", "UPN")


HOLLOW_FAMILIES = ("SHS", "RHS", "CHS")


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


def read_rolled(family: str, p: Parsed, given: Given) -> Answer:
    """A rolled family by its word, variant letters and numbers."""
    variant = _variant(family, next((v for f, v in p.families if f == family), ""), p)
    if family in ("UB", "UC") and [len(c.numbers) for c in p.chains] == [1, 1]:
        # 610UB125: the Australian form has the word between depth and mass.
        p.chains = [Chain([*p.chains[0].numbers, *p.chains[1].numbers], [""])]
    chain = one_chain(p, family)
    answer = by_numbers((family,), variant, chain, given)
    if p.mass is not None:
        answer = _by_mass(answer, family, variant, chain, p.mass[1], given)
    if family == "HSS" and "A500" in "".join([*p.grades, *p.standards]).upper().replace(" ", ""):
        rows = [row for row in look_up((family,), "", chain.numbers, given.own) if row.standard == "ASTM A500"]
        if rows:
            answer.section = rows[0].section
    return _double(answer) if p.double else answer


def _by_mass(answer: Answer, family: str, variant: str, chain: Chain, mass: float, given: Given) -> Answer:
    """A kg/m beside the designation picks among rows of one name, and must be that of the row otherwise."""
    rows = table_rows((family,), variant, key_texts(chain), given.own)
    fitting = [row.section for row in rows if (m := row.section.kg_per_m()) is not None and abs(m.nominal - mass) <= 0.02 * mass]
    if len(fitting) == 1:
        return Answer(fitting[0], "exact", answer.length_mm)
    if not fitting:
        offered = tuple(Candidate(row.designation, 80.0) for row in rows)
        raise Refused(f"{mass:g} kg/m is not the mass of {answer.section.designation}", "ambiguous-section", offered)
    return answer


def _double(answer: Answer) -> Answer:
    """Two sections side by side (``2L``): area, mass and surface of both; where they stand apart is not told."""
    one = answer.section

    def twice(value: float | None) -> float | None:
        return None if value is None else 2 * value

    answer.section = replace(
        one,
        designation=f"2{one.designation}",
        shape=f"pair of {one.shape}",
        area_mm2=twice(one.area_mm2),
        surface_m2_per_m=twice(one.surface_m2_per_m),
        published_kg_per_m=twice(one.published_kg_per_m),
        centroid_mm=None,
        note="; ".join(filter(None, (one.note, "two pieces, area and surface of both"))),
    )
    return answer


def by_numbers(families: tuple[str, ...], variant: str, chain: Chain, given: Given) -> Answer:
    """A row of the rolled families by its numbers, or with the piece's length as one number more."""
    numbers, length = key_texts(chain), None
    name = " or ".join(families[:3])
    if not numbers and families == ("L",):
        sizes = [given.height or given.width, given.width or given.height, given.thickness]
        numbers = tuple(catalogue.canonical(f"{s:.4f}") for s in sizes if s is not None)
    if not numbers:
        raise Refused(f"{name} names a family, not a size", "unknown-section", nearest.in_families(families[:1], variant, ()))
    typed = chain.numbers or [tokens.Token("num", n, n, float(n)) for n in numbers]
    found = look_up(families, variant, typed, given.own)
    if not found and len(typed) > 1:
        last = typed[-1].mm
        if last >= LEAST_LENGTH_MM and last > 2 * max(t.mm for t in typed[:-1]):
            found, length = look_up(families, variant, typed[:-1], given.own), last
    if not found:
        values = [t.value for t in typed]
        near = nearest.in_families(families, variant, values)
        why = why_impossible(families, values)
        if why:
            raise Refused(why, "impossible-geometry", near)
        raise Refused(f"no {name} of that size in the tables", "unknown-section", near)
    return pick(found, length)


def look_up(families: tuple[str, ...], variant: str, numbers: list[tokens.Token], own: Table | None) -> list[Row]:
    """Rows under these numbers. A table in inches is not meant by millimetres, nor one in millimetres by inches."""
    units = {t.unit for t in numbers}
    typed = tuple(t.text for t in numbers)
    if units & {"in", "ft"}:
        in_inches = [row for row in table_rows(families, variant, typed, own) if row.inches]
        if in_inches:
            return in_inches
    metric = tuple(t.text if t.unit in ("", "mm") else catalogue.canonical(f"{t.mm:.4f}") for t in numbers)
    rows = table_rows(families, variant, metric, own)
    rows = [row for row in rows if row.key[2] == metric] or rows
    by_table = [row for row in rows if not row.inches]
    if by_table:
        return by_table  # a metric table's own name goes before the soft-metric name of a table in inches
    if units <= {""}:
        return rows
    return [row for row in rows if not (row.inches and row.key[2] == metric)]


def why_impossible(families: tuple[str, ...], numbers: list[float]) -> str:
    """Why three numbers cannot be an angle or a hollow section, where that is the reason."""
    if families == ("L",) and len(numbers) in (2, 3):
        legs, t = numbers[:-1], numbers[-1]
        return shapes.impossible("angle", {"h": max(legs), "b": min(legs), "tf": t})
    if families[0] in (*HOLLOW_FAMILIES, "HSS") and len(numbers) in (2, 3):
        outer, t = numbers[:-1], numbers[-1]
        if families == ("CHS",) or (families == ("HSS",) and len(numbers) == 2):
            return (
                shapes.impossible("round hollow", {"h": outer[0], "tf": t})
                if len(numbers) == 2
                else "a round tube has a diameter and a wall, no third size"
            )
        return shapes.impossible("box hollow", {"h": max(outer), "b": min(outer), "tf": t})
    return ""


def table_rows(families: tuple[str, ...], variant: str, numbers: tuple[str, ...], own: Table | None) -> list[Row]:
    found: list[Row] = []
    for family in families:
        if own is not None:
            found += own.find(family, variant, numbers)
        found += catalogue.find(family, variant, numbers)
    return found


def pick(found: list[Row], length: float | None) -> Answer:
    """One row, or several: the first is nominal and the bounds cover all."""
    sections = [row.section for row in found]
    if len({s.designation for s in sections}) == 1 and len({s.published_kg_per_m for s in sections}) == 1:
        return Answer(sections[0], "exact", length)  # one size in two standards of one mass
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


def read_letter(p: Parsed, given: Given) -> Answer:
    """``H 200``, ``I 200``, ``U 100``, ``C``: a letter shared by several families; they are read only where one fits."""
    letter = p.letters[0]
    families = {"U": ("UPN", "UPE"), "I": ("IPN", "IPE"), "H": ("HE", "HD", "HP"), "C": ("UPN", "UPE")}.get(letter, ())
    chain = one_chain(p, letter)
    rows = table_rows(families, "", key_texts(chain), given.own)
    if rows:
        names = tuple(Candidate(r.designation, 90.0) for r in rows)
        raise Refused(f"{letter} is shared by several families", "ambiguous-section", names)
    raise Refused(
        f"{letter} names no family with that size", "unknown-section", nearest.in_families(families, "", chain.mm) if families else ()
    )
