"""Reads a section text: what it names, or why it names nothing sure. Rank 2.

A text with one reading means the same whatever surrounds it. Where it leaves several, the material's kind and the
heading may settle it; digits are exact and never rounded to a neighbour; a number nobody asked for refuses the text.
"""

from __future__ import annotations

from takeoff.errors import DataError
from takeoff.names import has_hidden_marks, has_lookalikes, normal_name, squeezed
from takeoff.sections import catalogue, nearest, surplus, tokens
from takeoff.sections.answers import Answer, Given, Hollow, Refused, stated_mass
from takeoff.sections.catalogue import Table
from takeoff.sections.parse import Chain, Parsed, parse, words_only
from takeoff.sections.rolled import HOLLOW_FAMILIES, read_indian_parallel, read_rolled
from takeoff.sections.section import Candidate, Match, SectionMatch
from takeoff.sections.words import BEFORE_SIZES, INNER_WORDS, PROFILED

#: Families of bars and plates, which may have any size.
MADE_TO_SIZE = frozenset(("FL", "PL", "RD", "SQ", "HEX"))

_TUBE_FAMILIES = frozenset((*HOLLOW_FAMILIES, "HSS"))
#: Nominal pipe sizes whose outside diameter is larger (ASME B36.10M).
_NOMINAL_INCHES = frozenset((0.125, 0.25, 0.375, 0.5, 0.75, 1, 1.25, 1.5, 2, 2.5, 3, 3.5, 4, 5, 6, 8, 10, 12))
_SIZED = MADE_TO_SIZE | frozenset(HOLLOW_FAMILIES)
_TUBE_KINDS = frozenset(("pipe", "round tube", "tube", "box", "square tube", "rectangular tube"))

#: Kinds in the order in which they win over one another when a text holds several ("cap plate", "square bar").
KIND_ORDER = (
    "rebar",
    "glulam",
    "tread",
    "arch",
    "wedge",
    "cable",
    "head",
    "cylinder",
    "ring",
    "disc",
    "cone",
    "pyramid",
    "sphere",
    "cap",
    "triangle",
    "square tube",
    "rectangular tube",
    "pipe",
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
    return _resolve(parsed, cut, cleaned, given, heading)


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


def _resolve(p: Parsed, cut: list[tokens.Token], text: str, given: Given, heading: str | None) -> Answer:
    if "prism" in p.kinds or "m3" in text.casefold():
        from takeoff.sections.solidtext import read_plain_volume

        plain = read_plain_volume(text, p, given)
        if plain is not None:
            p.labels.clear()
            return plain
    if "cable" in p.kinds:
        from takeoff.sections.solidtext import read_cable

        return _finish(read_cable(p, given), p, [])
    if p.mass is not None and (p.bought or not p.families):
        return stated_mass(p, text)
    families = list(dict.fromkeys(f for f, _ in p.families))
    tube = bool(_TUBE_FAMILIES & set(families) or (not families and _TUBE_KINDS & set(p.kinds)))
    coded = _is_coded(p, families, text)
    alone = coded and not set(families) - {"M", "T", "HEX"}
    several = len(families) > 1 and not alone
    if not several and _kind(p, given) != "tread" and (reason := surplus.why_more(cut, tube=tube, designated=bool(families), coded=alone)):
        raise Refused(reason, "unknown-section", _near(p, text))
    if coded:
        from takeoff.sections import kinds

        special = kinds.read_special(p, text, families, given)
        if special is not None:
            return _finish(special, p, [])
    if families in ([], ["C"]) and (answer := _lipped(p, given)) is not None:
        return _finish(answer, p, [])
    changed = [w for w in p.changed if w.casefold() not in ("laminated", "tapered") or p.families]
    if _kind(p, given) == "tread":
        changed = [w for w in changed if w.casefold() != "tread"]
    if p.bought and not [f for f, _ in p.families if f not in BEFORE_SIZES]:
        raise Refused(f"{p.bought[0]!r} is told by its own mass, not by a section: give a unit mass")
    if changed:
        raise Refused(f"{changed[0]!r} changes the section, so its table mass would be wrong")
    if families in (["SQ"], ["RD"]) and {"tube", "box", "pipe"} & set(p.kinds):
        p.families, p.properties, families = [], p.properties | {"square" if families == ["SQ"] else "round"}, []
    if not families and {"tube", "box"} & set(p.kinds) and (strange := [w for w in p.others if len(w) == 1]):
        raise Refused(f"{strange[0]} names no family known here", "unknown-section", _near(p, text))  # Z-Profil 100x50x3 is no tube
    if len(families) > 1:
        raise Refused("several sections are named: " + ", ".join(families), "ambiguous-section")
    variants = {variant for _, variant in p.families if variant}
    if len(variants) > 1:
        raise Refused("several sections are named: " + ", ".join(f"{f} {v}" for f, v in p.families), "ambiguous-section")
    metal = given.material == "metal" or (given.material is None and p.metal)
    if metal and not families and _kind(p, given) in ("board", "sheet", "plate", "panel") and {t.text for t in cut} & PROFILED:
        raise Refused("profiled sheet is told by its own mass, not by a flat sheet's sizes: give a unit mass", "unknown-section")
    if tube and not {"inner diameter", "outer diameter"} & p.labels.keys() and p.nominal is None:
        _outside_only(p, cut, families)
    if set(families) <= _SIZED:
        from takeoff.sections import unitless

        if why := unitless.why_other_unit(p, families, _kind(p, given), given.material):
            raise Refused(why, "implausible-size", _near(p, text))
    rolled = bool(families) and not tube and not MADE_TO_SIZE & set(families)
    if rolled and "box" in p.kinds:
        raise Refused("a box of rolled sections is more than one of them: give each its row", "unknown-section", _near(p, text))
    beside = [w.casefold() for w in p.others]
    if not families and "sheet" in p.kinds and {"pile", "piles", "piling", "code"} & set(beside):
        raise Refused("sheet piles and lead by its code are told by their own tables: give a unit mass", "unknown-section")
    if surplus.back_to_back(cut):
        p.double = p.double_loose = True  # UPN 160 back to back
    if p.double and not rolled:
        raise Refused("two pieces side by side are told: give the one, and how many", "unknown-section", _near(p, text))
    notes: list[str] = []
    if p.others:
        notes.append("not read as part of the section: " + " ".join(p.others[:6]))
    if (p.nominal is not None or p.schedule or p.series) and set(families) <= {"CHS"} and set(p.kinds) <= {"pipe", "round tube", "tube"}:
        from takeoff.sections.pipes import read_pipe

        answer = read_pipe(p, given)
    elif families:
        answer = _family(families[0], p, given)
    else:
        kind = _kind(p, given)
        if kind is None and heading:
            said = words_only([t for t in tokens.cut(tokens.clean(heading[: tokens.LONGEST])) or [] if t.kind == "word"])
            strange = [w for w in p.others if len(w) == 1]
            if strange:
                # Z 200x2 under a heading "Profile": a letter nobody knows is no remark.
                raise Refused(f"{strange[0]} names no family known here", "unknown-section", _near(p, text))
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
        from takeoff.sections import kinds

        answer = kinds.read_made(kind, p, given) if kind is not None else kinds.read_bare(p, text, given)
        if kind == "plate" and "triangle" in p.kinds:
            notes.append("a gusset plate: taken as the full rectangle")
    if p.bent:
        from takeoff.sections.solidtext import bend

        answer = bend(answer, p)
    return _finish(answer, p, notes)


def _outside_only(p: Parsed, cut: list[tokens.Token], families: list[str]) -> None:
    """Refuse a tube told by its bore, or by inches that are a pipe's nominal size: read as the outside, either is too light."""
    if {t.text for t in cut if t.kind == "word"} & INNER_WORDS:
        raise Refused("the diameter told is an inner one: give the outer diameter and the wall", "impossible-geometry")
    first = p.chains[0].numbers[0] if p.chains else None
    if first is None or first.unit != "in" or len(p.chains[0].numbers) > 2 or p.schedule or p.series:
        return
    rest = [t for c in p.chains for t in c.numbers][1:] + [p.labels[name] for name in ("wall", "thickness") if name in p.labels]
    # A wall in inches beside tube or HSS goes by the outside; pipe and Rohr, and any wall in mm, by the nominal size.
    by_outside = bool(rest) and rest[0].unit == "in" and not {"pipe", "round tube"} & set(p.kinds)
    square = {"square", "rectangular"} & p.properties or {"square tube", "rectangular tube", "box"} & set(p.kinds)
    if rest and not by_outside and not square and families in ([], ["CHS"]) and first.value in _NOMINAL_INCHES:
        raise Refused(f"{first.raw} in may be a pipe's nominal size, which is no outside diameter: give that in mm", "ambiguous-section")


def _is_coded(p: Parsed, families: list[str], text: str) -> bool:
    """Whether the text may name reinforcement, a gauge or a fastener."""
    if p.codes or p.gauge or families in (["M"], ["T"]) or "6x6" in text or "4x4" in text:
        return True
    if "M" in p.letters and p.standards:
        return True  # DIN 934 M20
    return bool({"fastener", "rebar", "threaded"} & set(p.kinds)) or any(w.casefold() == "threaded" for w in p.changed)


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


def _lipped(p: Parsed, given: Given) -> Answer | None:
    """A formed channel or Z told by words: ``lipped channel 150x65x20x2.5``, ``Z purlin 200x75x20x2``."""
    said = {w.casefold() for w in (*p.changed, *p.others)}
    purlin = {"purlin", "purlins"} & p.named
    if [len(c.numbers) for c in p.chains] not in ([4], [5]) or not (said & {"lipped", "lip", "lips"} or purlin):
        return None
    from takeoff.sections import formed

    if "z" in said or "zed" in said or "Z" in p.letters:
        answer: Answer | None = formed.read_zed(p, given)
    else:
        answer = formed.read_channel(p, given, "C")
    if answer is not None:
        p.changed = [w for w in p.changed if w.casefold() not in ("lipped", "lip", "lips")]
        if p.changed:
            return None
    return answer


def replace_answer(answer: Answer, match: Match, notes: tuple[str, ...]) -> Answer:
    return Answer(answer.section, match, answer.length_mm, notes)


def _kind(p: Parsed, given: Given) -> str | None:
    """The one kind its words name, the first in `KIND_ORDER`; None where none is named."""
    found = [k for k in KIND_ORDER if k in p.kinds]
    if not found:
        return None
    kind = found[0]
    if kind in ("plate", "sheet") and "panel" in found:
        return "panel"
    if kind == "triangle" and "plate" in found:
        return "plate"
    if kind == "cylinder" and "tube" in found:
        return "ring"
    if kind in ("round tube", "pipe") and not p.schedule:
        for name in ("square", "rectangular"):
            if name in p.properties:
                return f"{name} tube"  # vierkante buis, rura kwadratowa
    if kind in ("plate", "sheet") and any(w.casefold() == "tread" for w in p.changed):
        return "tread"
    if kind in ("beam", "column") and (p.wood or given.material == "wood"):
        return "board"
    if kind == "beam" and "H" not in p.letters and "block" in found:
        return "block"
    single = [len(c.numbers) for c in p.chains] == [1]
    if kind in ("beam", "tube") and (p.letters[:1] == ["U"] or (p.letters[:1] == ["H"] and single)) and "round" not in p.properties:
        return "letter"  # U-Profil, U-balk, H-Träger: the letter tells more than the word
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
    if kind == "pane" and "wool" in (w.casefold() for w in p.others):
        return "panel"  # glass wool is no glass
    if kind == "pane" and not p.glass and "panel" in found:
        return "panel"
    if kind == "panel" and p.glass:
        return "pane"
    return kind


def _family(family: str, p: Parsed, given: Given) -> Answer:
    """A section by its family's own word. What a plain rolled section does not need is imported where it is met."""
    if family in HOLLOW_FAMILIES:
        from takeoff.sections.hollow import read_hollow

        return read_hollow((family,), p, given)
    if family in MADE_TO_SIZE:
        from takeoff.sections.bysize import MADE_FAMILIES, read_sheet

        return read_sheet("plate", p, given) if family == "PL" else MADE_FAMILIES[family](p, given)
    if family in ("Z", "BH") or (family == "L" and "cold" in p.properties):
        from takeoff.sections import formed

        return {"Z": formed.read_zed, "BH": formed.read_welded_h, "L": formed.read_angle}[family](p, given)
    if family in ("NPB", "WPB"):
        return read_indian_parallel(p, ("IPE",) if family == "NPB" else ("HE",))
    if family == "C":
        return _c_section(p, given)
    return read_rolled(family, p, given)


def _c_section(p: Parsed, given: Given) -> Answer:
    """A C of the US and Canadian tables, of the Japanese one by its four sizes, or formed from strip by its sizes."""
    try:
        return read_rolled("C", p, given)
    except Refused as refused:
        sizes = [t.value for c in p.chains for t in c.numbers]
        if len(p.chains) != 1 or len(sizes) < 3:
            raise
        from takeoff.sections import formed
        from takeoff.sections.rolled import table_rows

        if len(sizes) in (3, 4) and table_rows(("CH",), "", p.chains[0].texts, given.own):
            return read_rolled("CH", p, given)
        answer = formed.read_channel(p, given, "C")
        if answer is None:
            raise refused from None
        return answer
