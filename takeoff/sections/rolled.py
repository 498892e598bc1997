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


CHANNEL_FAMILIES = ("PFC", "UPN", "UPE")


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
    if family in ("UB", "UC") and [len(c.numbers) for c in p.chains] in ([1, 1], [2, 1]):
        # 610UB125, 305x165UB40: the word stands between the size and the mass.
        p.chains = [Chain([*p.chains[0].numbers, *p.chains[1].numbers], [*p.chains[0].joins, ""])]
    _take_length(p)
    chain = one_chain(p, family)
    if family == "T" and len(chain.numbers) == 3 and (cut := _cut_tee(chain)) is not None:
        return cut
    spaced = p.double and family == "L" and len(chain.numbers) == 4 and chain.numbers[3].mm <= 40
    if spaced and look_up(("L",), "", chain.numbers[:3], None):
        chain = Chain(chain.numbers[:3], chain.joins[:2])  # 2L4X3X1/4X3/8: the fourth is the gap between them
    answer = by_numbers((family,), variant, chain, given)
    if p.mass is not None:
        answer = _by_mass(answer, family, variant, chain, p.mass[1], given)
    if family == "HSS" and "A500" in "".join([*p.grades, *p.standards]).upper().replace(" ", ""):
        rows = [row for row in look_up((family,), "", chain.numbers, given.own) if row.standard == "ASTM A500"]
        if rows:
            answer.section = rows[0].section
    if p.half:
        return _halve(answer)
    return _double(answer, loose=p.double_loose) if p.double else answer


def read_indian_parallel(p: Parsed, families: tuple[str, ...]) -> Answer:
    """``NPB 300x150x42.24``, ``WPB 200x200x42.26`` (IS 12778): European beams by depth, width and mass."""
    chain = one_chain(p, "the beam")
    if len(chain.numbers) not in (3, 4):
        raise Refused("such a beam is told by its depth, width and kg/m", "unknown-section", nearest.in_families(families, "", chain.mm))
    h, b, mass = (t.value for t in chain.numbers[:3])
    found = []
    for row in (row for family in families for row in catalogue.rows(family)):
        published = float(row.cells["published_kg_per_m"])
        if float(row.cells["b_mm"]) == b and abs(float(row.cells["h_mm"]) - h) <= 12 and abs(published - mass) <= 0.006 * mass:
            found.append(row)
    if len(found) != 1:
        raise Refused("no single European beam has this depth, width and mass", "unknown-section", nearest.in_families(families, "", [h]))
    answer = pick(found, chain.mm[3] if len(chain.numbers) == 4 and chain.mm[3] >= LEAST_LENGTH_MM else None)
    answer.match, answer.notes = "alias", ("by its depth, width and mass",)
    return answer


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


def _times(count: float, value: float | None) -> float | None:
    return None if value is None else count * value


def _double(answer: Answer, *, loose: bool) -> Answer:
    """Two sections side by side (``2L``): area, mass and surface of both; where they stand apart is not told.

    A loose figure (``2 x UPN 160``) may be a pair or a quantity: the pair is nominal, and light reaches down to one piece.
    """
    one = answer.section
    answer.section = replace(
        one,
        designation=f"2{one.designation}",
        shape=f"pair of {one.shape}",
        area_mm2=_times(2, one.area_mm2),
        surface_m2_per_m=_times(2, one.surface_m2_per_m),
        published_kg_per_m=_times(2, one.published_kg_per_m),
        centroid_mm=None,
        note="; ".join(filter(None, (one.note, "two pieces, area and surface of both"))),
    )
    if loose:
        factor = one.factor
        answer.section = replace(
            answer.section, factor=type(factor)(factor.light / 2, 1.0, factor.heavy), readings=(f"2{one.designation}", one.designation)
        )
        answer.match = "ambiguous"
    return answer


def _halve(answer: Answer) -> Answer:
    """A tee cut from an I at mid-depth: half its area and mass, the saw's cut not taken off; the web's cut edge is surface."""
    whole = answer.section
    surface = _times(0.5, whole.surface_m2_per_m)
    d = dict(whole.dimensions_mm)
    if surface is not None:
        surface += d.get("tw", 0.0) / 1000
    d["h"] = d.get("h", 0.0) / 2
    answer.section = replace(
        whole,
        designation=f"1/2 {whole.designation}",
        shape=f"half of {whole.shape}",
        dimensions_mm=d,
        area_mm2=_times(0.5, whole.area_mm2),
        surface_m2_per_m=surface,
        published_kg_per_m=_times(0.5, whole.published_kg_per_m),
        centroid_mm=None,
        note="; ".join(filter(None, (whole.note, "cut in two at mid-depth, the width of the cut not taken off"))),
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
    if not found and families in (("UB",), ("UC",)) and len(typed) == 2:
        found = [row for row in catalogue.rows(families[0]) if _without_width(row) == numbers]
    if not found and families[0] in ("HW", "HM", "HN", "HT") and len(typed) == 2:
        found = _by_series(families[0], *(t.mm for t in typed))
    if not found and not variant and families[0] in ("I", "CH"):
        lettered = [row for v in ("A", "B", "C") for row in table_rows(families, v, tuple(t.text for t in typed), given.own)]
        if lettered:
            return Answer(covering([row.section for row in lettered]), "ambiguous", length)  # [20 without its letter
    if not found:
        values = [t.value for t in typed]
        near = nearest.in_families(families, variant, values)
        why = why_impossible(families, values)
        if why:
            raise Refused(why, "impossible-geometry", near)
        raise Refused(f"no {name} of that size in the tables", "unknown-section", near)
    return pick(found, length)


def _by_series(family: str, h: float, b: float) -> list[Row]:
    """Chinese H shapes by the series they belong to: HM 300x200 is the one 294 deep and 200 wide. Only round sizes name one."""
    if h % 50 or b % 25:
        return []
    rows = [row for row in catalogue.rows(family) if float(row.cells["b_mm"]) == b]
    return [row for row in rows if 0 < h - float(row.cells["h_mm"]) <= 18]


def _take_length(p: Parsed) -> None:
    """``HEB 200 6000mm``: a lone number behind the size, of a metre and more, can only be the piece's length."""
    if len(p.chains) == 2 and len(p.chains[1].numbers) == 1 and not p.chains[1].bracketed and p.chains[0].numbers:
        last = p.chains[1].numbers[0]
        if last.mm >= 2 * LEAST_LENGTH_MM and last.mm > 2 * max(p.chains[0].mm):
            p.chains = [Chain([*p.chains[0].numbers, last], [*p.chains[0].joins, "x"])]


def _cut_tee(chain: Chain) -> Answer | None:
    """``152x229x34 UKT``: a tee by width, depth and mass is half of the UK beam or column of twice that depth and mass."""
    b, h, mass = (t.value for t in chain.numbers)
    found = []
    for row in (row for family in ("UB", "UC") for row in catalogue.rows(family)):
        numbers = row.key[2]
        if row.standard != "EN 10365" or len(numbers) != 3:
            continue
        published = float(row.cells["published_kg_per_m"])
        for width, depth in ((b, h), (h, b)):
            if float(numbers[1]) == width and abs(float(numbers[0]) / 2 - depth) <= 0.5 and abs(published / 2 - mass) <= 0.55:
                found.append(row)
    if len({row.designation for row in found}) != 1:
        return None
    return _halve(Answer(found[0].section, "alias"))


def _without_width(row: Row) -> tuple[str, ...]:
    """The numbers of a UK beam or column with its width left out (``203UC46``); none of a row named otherwise."""
    numbers = row.key[2]
    return (numbers[0], numbers[2]) if len(numbers) == 3 and row.standard == "EN 10365" else ()


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


def _by_standard(letter: str, standards: list[str]) -> str:
    """The family that a letter means under the standard beside it: DIN 1026 (-1 tapered, -2 parallel), DIN 1025."""
    for standard in standards:
        parts = standard.split()
        if parts[:2] == ["din", "1026"] and letter == "U":
            return "UPE" if parts[2:] == ["2"] else "UPN"
        if parts[:3] in (["din", "1025", "1"], ["din", "1025", "5"]) and letter == "I":
            return "IPN" if parts[2] == "1" else "IPE"
    return ""


def read_letter(p: Parsed, given: Given) -> Answer:
    """``H 200``, ``I 200``, ``U 100``, ``C``: a letter shared by several families; they are read only where one fits."""
    letter = p.letters[0]
    named = _by_standard(letter, p.standards)
    if named:
        return by_numbers((named,), "", one_chain(p, letter), given)
    families = {"U": ("UPN", "UPE"), "I": ("IPN", "IPE"), "H": ("HE", "HD", "HP"), "C": ("UPN", "UPE")}.get(letter, ())
    chain = one_chain(p, letter)
    rows = table_rows(families, "", key_texts(chain), given.own)
    variant = next((v for v in p.letters[1:] if v in VARIANTS["HE"]), "")
    if letter == "H" and variant and len(chain.numbers) in (1, 2):
        return by_numbers(("HE",), variant, chain, given)  # H 200 B
    if letter == "U" and not rows and len(chain.numbers) >= 3:
        from takeoff.sections import formed

        answer = formed.read_channel(p, given, "U")
        if answer is not None:
            return answer
    if letter == "I" and not rows:
        return by_numbers(("I",), next((v for v in p.letters if v in ("A", "B", "C")), ""), chain, given)
    if len(chain.numbers) > 1 and len({r.designation for r in rows}) == 1:
        return Answer(rows[0].section, "alias")  # U 120/55: only one has that width
    if rows and given.material == "metal" and letter in ("U", "I", "C"):
        # The row's material leaves two readings: the tapered one, which is the heavier, is nominal, and the bounds hold both.
        return Answer(covering([row.section for row in rows]), "ambiguous")
    if rows:
        names = tuple(Candidate(r.designation, 90.0) for r in rows)
        raise Refused(f"{letter} is shared by several families", "ambiguous-section", names)
    raise Refused(
        f"{letter} names no family with that size", "unknown-section", nearest.in_families(families, "", chain.mm) if families else ()
    )
