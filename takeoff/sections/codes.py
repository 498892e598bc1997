"""Reinforcement and fasteners: goods named by a code (`T16`, `A393`, `M20x60`). Rank 2."""

from __future__ import annotations

import re
from dataclasses import replace

from takeoff.sections import catalogue, goods, made, nearest, tokens
from takeoff.sections.answers import Answer, Given, Refused, length_left, one_chain
from takeoff.sections.catalogue import Row
from takeoff.sections.parse import Parsed
from takeoff.sections.pipes import nominal_inches
from takeoff.sections.rolled import covering
from takeoff.sections.section import Candidate, Match

_WELDED_WIRE = re.compile(r"(?:^|\s)(\d{1,2})\s?x\s?(\d{1,2})\s?-?\s?([WD]\d{1,2}\.\d)\s?x\s?([WD]\d{1,2}\.\d)", re.IGNORECASE)


def read_welded_wire(text: str) -> Answer | None:
    """US welded wire by pitch in inches and wire size: ``6x6-W2.9xW2.9``."""
    found = _WELDED_WIRE.search(text)
    if found is None:
        return None
    wanted = f"Mesh {found[1]}x{found[2]}-{found[3].upper()}x{found[4].upper()}"
    for row in catalogue.rows("MESH"):
        if row.designation == wanted:
            return Answer(row.section)
    raise Refused(
        "no welded wire fabric of that size in the tables",
        "unknown-section",
        tuple(
            Candidate(row.designation, 60.0) for row in catalogue.rows("MESH") if row.designation.startswith(f"Mesh {found[1]}x{found[2]}-")
        ),
    )


def read_code(p: Parsed) -> Answer | None:
    """``T16``, ``#5``, ``15M``, ``N16``, ``A393``, ``Q257A``; None where no table has the code."""
    found: list[tuple[str, Row]] = []
    for letters, number, tail in p.codes:
        if letters in ("T", "H", "B", "Y", "R", "#", "M", "N", "D") and not tail:
            variant = "" if letters in ("T", "H", "B", "Y", "R") else letters
            found += [(letters, row) for row in catalogue.find("REBAR", variant, (number,))]
        found += [(letters, row) for row in catalogue.find("MESH", letters + tail, (number,))]
    if not found and [c[0] for c in p.codes] == ["T"] and not p.codes[0][2]:
        tees = catalogue.find("T", "", (p.codes[0][1],))  # T80: no bar has that size
        if tees:
            p.codes.clear()
            return Answer(tees[0].section, "exact", length_left([t for c in p.chains for t in c.numbers]))
    if not found:
        return None
    if len(found) > 1:
        raise Refused("several bars or fabrics are named", "ambiguous-section", tuple(Candidate(row.designation, 90.0) for _, row in found))
    letters, row = found[0]
    strange = [f"{c[0]}{c[1]}" for c in p.codes if c[0] != letters and float(c[1]) < _LEAST_STRENGTH]
    strange += [t.raw for name, t in p.labels.items() if name in ("diameter", "width", "height")]  # Ø500 t10
    strange += ["Ø" for c in p.chains if c.after_diameter]
    if strange or {"plate", "flat", "sheet"} & set(p.kinds):
        beside = strange[0] if strange else "plate, flat or sheet"  # b200 t10, plate t10: sizes behind their letters
        raise Refused(f"it may be a bar or a fabric, or sizes beside {beside}", "ambiguous-section", (Candidate(row.designation, 80.0),))
    if letters == "T" and "rebar" not in p.kinds:
        tees = catalogue.find("T", "", (row.key[2][0],))
        if tees:
            names = (Candidate(row.designation, 90.0), Candidate(tees[0].designation, 90.0))
            raise Refused("it may be a reinforcing bar or a tee", "ambiguous-section", names)
    section, length = row.section, None
    match: Match = "exact"
    if letters == "D" and section.family == "REBAR" and "rebar" not in p.kinds and not p.grades:
        # D16 is a Japanese bar, or a diameter of 16: their masses lie within 4 % of each other.
        round_bar = made.bar("round bar", {"diameter": float(row.key[2][0])}, "metal")
        section, match = covering([section, round_bar]), "ambiguous"
    numbers = [t for c in p.chains for t in c.numbers]
    if section.form == "area mass" and len(numbers) == 2:
        width, length_mm = sorted(t.mm for t in numbers)
        section = replace(section, dimensions_mm={**section.dimensions_mm, "width": width, "length": length_mm}, needs=())
    elif numbers:
        length = length_left(numbers)
    p.codes = [c for c in p.codes if c[0] != letters]
    return Answer(section, match, length)


def read_rebar(p: Parsed, given: Given) -> Answer:
    """``Rebar 16``, ``rebar Ø16``: EN 10080 sizes."""
    size = p.labels.pop("diameter", None)
    numbers = list(one_chain(p, "rebar").numbers)
    if size is None:
        if not numbers:
            if given.diameter is None:
                raise Refused("a reinforcing bar without its diameter", "unknown-section", nearest.in_families(("REBAR",), "", (16,)))
            text = made.number(given.diameter)
            size = tokens.Token("num", text, text, given.diameter)
        else:
            size = numbers.pop(0)
    rows = [row for row in catalogue.find("REBAR", "", (size.text,)) if row.standard == "EN 10080"]
    if not rows:
        raise Refused(
            "no reinforcing bar of that diameter in the tables", "unknown-section", nearest.in_families(("REBAR",), "", (size.value,))
        )
    return Answer(rows[0].section, "exact", length_left(numbers))


#: From here on a code beside a bar's own is its strength (H16 B500).
_LEAST_STRENGTH = 400.0

_CLASSES = frozenset(("4.6", "4.8", "5.6", "5.8", "6.8", "8.8", "10.9", "12.9"))


#: standard -> what it is where no word says so
_NUTS, _WASHERS, _SOCKETS = frozenset(("934", "4032", "6915")), frozenset(("125", "7089", "6916")), frozenset(("912", "4762"))
PARTS_BY_NUMBER = _NUTS | _WASHERS
_FASTENER_STANDARDS = ("912", "4762", "931", "933", "934", "125", "6914", "6915", "6916", "4014", "4017", "4032", "7089", "14399")


def read_fastener(p: Parsed, given: Given) -> Answer | None:  # noqa: ARG001 (one signature for all goods)
    """``M20x60``, ``bolt M20x60 8.8``, ``M20x60 bolt set``, ``M20 nut``, ``3/4" x 2-1/2" A325 bolt``."""
    said = {w.casefold() for w in (*p.bought, *p.others)}
    if said & {
        "anchor",
        "anchors",
        "rivet",
        "rivets",
        "screwed",
        "lag",
        "coach",
        "self-drilling",
        "countersunk",
        "stud",
        "studbolt",
        "eyebolt",
        "u-bolt",
    }:
        return None
    for standard in p.standards:
        if standard.startswith(("din", "iso", "en")) and not any(part in _FASTENER_STANDARDS for part in standard.split()):
            raise Refused(f"no masses of fasteners to {standard.upper()} in the tables", "unknown-section")
    chains = [c for c in p.chains if not (len(c.numbers) == 1 and c.texts[0] in _CLASSES)]
    if len(chains) != 1:
        return None
    numbers = chains[0].numbers
    numbered = {part for s in p.standards for part in s.split()}
    socket = bool(said & {"socket", "shcs", "allen", "inbus", "innensechskant"} or numbered & _SOCKETS)
    if socket and said & {"button", "set", "grub", "flat", "low", "shoulder", "countersunk"}:
        return None
    strong = "hv" in said or any("6914" in s or "14399" in s for s in p.standards)
    complete = bool(said & {"bolt", "bolts"}) and bool(said & {"nut", "nuts"})
    metric = ("M", "") in p.families or "M" in p.letters
    p.families = [f for f in p.families if f[0] not in ("M", "HEX")]
    if p.families:
        return None
    if len(numbers) == 1 and metric:
        for word, item in (("nut", "nut"), ("nuts", "nut"), ("mutter", "nut"), ("washer", "washer"), ("washers", "washer")):
            by_number = numbered & (_NUTS if item == "nut" else _WASHERS)
            if (word in said or by_number) and not said & {"bolt", "bolts"}:
                section = goods.small_part(item, numbers[0].text, high_strength=strong)
                return Answer(section) if section is not None else None
        raise Refused("a bolt without its length", "impossible-geometry")
    if len(numbers) != 2:
        return None
    if said & {"set", "sets", "assembly", "assemblies", "kit", "schraubensatz", "schraubensatze", "garnitur"}:
        whole = "x".join(t.text for t in numbers)
        raise Refused(
            "what belongs to a set is not told: give its unit mass, or name bolt, nut and washer",
            "unknown-section",
            (Candidate(f"Bolt M{whole} with nut and washer", 70.0),) if metric else (),
        )
    if metric:
        size, length, table = numbers[0].text, numbers[1].text, "fasteners_metric"
    elif numbers[1].unit == "in":
        size, length, table = nominal_inches(numbers[0]), catalogue.canonical(f"{numbers[1].value:.4f}"), "fasteners_us"
    else:
        return None
    section = goods.fastener(size, length, high_strength=strong, complete=complete, socket=socket, table=table)
    if section is None:
        near = sorted(goods.fastener_lengths(size, table, socket), key=lambda value: abs(value - numbers[1].value))[:3]
        word = "Socket screw" if socket else "Bolt"
        shown = [f"{word} M{size}x{made.number(n)}" if metric else f"Bolt {size} in x {made.number(n)} in" for n in near]
        raise Refused("no bolt of that size in the tables", "unknown-section", tuple(Candidate(n, 60.0) for n in shown))
    return Answer(section)
