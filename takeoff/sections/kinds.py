"""What no family word names: goods by code, shapes by a general word, and texts of numbers alone. Rank 2.

Kept apart from `grammar`, and imported by it only when a text asks for it: a look-up of a plain designation stays light.
"""

from __future__ import annotations

from collections.abc import Callable

from takeoff.sections import catalogue, goods, made, nearest
from takeoff.sections.answers import LEAST_LENGTH_MM, NO_SECTION, Answer, Given, Refused, key_texts, one_chain
from takeoff.sections.bysize import (
    LEAST_BAR_MM,
    LEAST_FLAT_MM,
    MADE_FAMILIES,
    lumber_row,
    read_block,
    read_board,
    read_flat,
    read_gauge,
    read_glulam,
    read_plain_bar,
    read_sheet,
    read_tread,
)
from takeoff.sections.codes import PARTS_BY_NUMBER, read_code, read_fastener, read_rebar, read_welded_wire
from takeoff.sections.hollow import read_hollow
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.pipes import read_pipe_by_size
from takeoff.sections.rolled import (
    CHANNEL_FAMILIES,
    COLUMN_FAMILIES,
    HOLLOW_FAMILIES,
    I_FAMILIES,
    by_numbers,
    look_up,
    pick,
    read_letter,
    table_rows,
)
from takeoff.sections.section import Candidate
from takeoff.sections.tokens import Token
from takeoff.sections.words import INNER_WORDS, LETTERED, LUMBER_WORDS


def read_special(p: Parsed, text: str, families: list[str], given: Given) -> Answer | None:
    """Reinforcement, gauges and fasteners; None where the text is none of them. Codes nobody knows become remarks."""
    if "6x6" in text or "4x4" in text:
        mesh = read_welded_wire(text)
        if mesh is not None:
            p.labels.clear()
            return mesh
    if "rebar" in p.kinds and families == ["T"] and len(p.chains) == 1 and len(p.chains[0].numbers) == 1:
        p.codes.append(("T", p.chains.pop().texts[0], ""))
        families = []
    if p.codes and not families:
        answer = read_code(p)
        if answer is not None:
            return answer
    if [c[0] for c in p.codes] == ["C"] and not p.chains and given.material == "metal" and p.kinds in ([], ["channel"]):
        size = p.codes.pop()[1]  # C160: a channel in Poland, and no fabric of that number
        p.chains.append(Chain([Token("num", size, size, float(size))]))
        p.letters.insert(0, "C")
        return read_letter(p, given)
    series = [v for v in ((p.codes[0][2] if len(p.codes) == 1 else ""), *p.letters) if v in ("A", "AA", "B", "M")]
    if [c[0] for c in p.codes] == ["H"] and len(series) == 1 and not p.chains and not p.kinds:
        size = p.codes.pop()[1]  # H200B
        return by_numbers(("HE",), series[0], Chain([Token("num", size, size, float(size))]), given)
    p.others += [f"{letters}{number}{tail}" for letters, number, tail in p.codes]
    if p.gauge:
        return read_gauge(p, given)
    if _is_threaded(p):
        from takeoff.sections.formed import read_threaded_rod

        p.changed = [w for w in p.changed if w.casefold() != "threaded"]
        return read_threaded_rod(p)
    by_number = "M" in p.letters and bool(PARTS_BY_NUMBER & {part for s in p.standards for part in s.split()})
    threaded = (
        "fastener" in p.kinds
        or by_number
        or (families == ["M"] and bool(p.chains) and not look_up(("M",), "", p.chains[0].numbers, given.own))
    )
    return read_fastener(p, given) if threaded else None


def _is_threaded(p: Parsed) -> bool:
    """Whether the text names threaded rod: by its own word, by threaded beside rod, bar or stud, or by DIN 975 and 976."""
    said = any(w.casefold() == "threaded" for w in p.changed) and bool({"rod", "bar", "board"} & set(p.kinds))
    return said or "threaded" in p.kinds or any(s.startswith(("din 975", "din 976")) for s in p.standards)


def read_made(kind: str, p: Parsed, given: Given) -> Answer:
    """A kind named by a general word."""
    if kind in ("plate", "sheet", "pane", "panel"):
        return read_sheet(kind, p, given)
    simple: dict[str, Callable[[Parsed, Given], Answer]] = {
        "flat": read_flat,
        "rod": MADE_FAMILIES["RD"],
        "square bar": MADE_FAMILIES["SQ"],
        "hexagon": MADE_FAMILIES["HEX"],
        "block": read_block,
        "board": read_board,
        "rebar": read_rebar,
        "glulam": read_glulam,
        "tread": read_tread,
    }
    wooden = p.wood or given.material == "wood" or "board" in p.kinds
    if kind == "block" and wooden and [len(c.numbers) for c in p.chains] == [2]:
        return read_board(p, given)
    if kind in LETTERED:
        from takeoff.sections.solidtext import SOLIDS

        return SOLIDS[kind](p, given)
    if kind == "board" and p.named & {"stud", "studs"}:
        headed = {w.casefold() for w in p.others} & {"shear", "headed", "weld", "welded"}
        if headed or given.material == "metal" or p.metal:
            from takeoff.sections.formed import read_stud

            if headed or [len(c.numbers) for c in p.chains] == [2]:
                return read_stud(p)
    if kind in simple:
        return simple[kind](p, given)
    if kind in ("angle", "channel") and "cold" in p.properties:
        from takeoff.sections import formed

        made_of_strip = formed.read_angle(p, given) if kind == "angle" else formed.read_channel(p, given, "U")
        if made_of_strip is not None:
            return made_of_strip
    if kind == "angle":
        return by_numbers(("L",), "", one_chain(p, "angle"), given)
    if kind == "letter":
        return read_letter(p, given)
    if kind == "tee":
        return by_numbers(("T",), "", one_chain(p, "tee"), given)
    if kind == "channel":
        return by_numbers(CHANNEL_FAMILIES, "", one_chain(p, "channel"), given)
    if kind == "beam":
        return by_numbers(I_FAMILIES, "", one_chain(p, "beam"), given)
    if kind == "column":
        return by_numbers(COLUMN_FAMILIES, "", one_chain(p, "column"), given)
    if kind == "bar":
        return read_plain_bar(p, given)
    return _tube(kind, p, given)


def _tube(kind: str, p: Parsed, given: Given) -> Answer:
    """Tube, pipe, hollow section by general words: listed sizes first, then any size that can be."""
    listed = any(w.casefold() in ("section", "sections") for w in p.others)
    sizes = len(p.chains[0].numbers) if p.chains else 0
    if kind == "square tube":
        return read_hollow(("SHS",), p, given, listed_only=listed)
    if kind == "rectangular tube":
        return read_hollow(("RHS",), p, given, listed_only=listed)
    if kind == "pipe":
        return read_pipe_by_size(p, given)
    if kind == "round tube":
        return read_hollow(("CHS",), p, given, listed_only=listed)
    if sizes >= 3 and not (sizes == 3 and p.chains[0].mm[2] >= LEAST_LENGTH_MM):
        return read_hollow(("SHS", "RHS"), p, given, listed_only=listed)
    if kind == "box":
        return read_hollow(("SHS",), p, given, listed_only=listed)
    if "outer diameter" in p.labels or "inner diameter" in p.labels or (p.chains and p.chains[0].after_diameter):
        return read_hollow(("CHS",), p, given, listed_only=listed)
    if not sizes:
        raise Refused("a tube without sizes: square, rectangular or round, with its wall", "unknown-section")
    return read_hollow(("CHS",), p, given, listed_only=listed, also=("SHS",))


def read_bare(p: Parsed, text: str, given: Given) -> Answer:
    """Only numbers and signs: read where one reading is left, else refused with the readings offered."""
    chain = p.chains[0] if p.chains else Chain()
    count = len(chain.numbers)
    round_sign = "round" in p.properties or chain.after_diameter or "outer diameter" in p.labels or "inner diameter" in p.labels
    if round_sign and {w.casefold() for w in p.others} & INNER_WORDS:
        raise Refused("only the inner diameter is given: the wall is missing", "impossible-geometry")
    if round_sign and (count or p.labels):
        label = p.labels.get("diameter") or p.labels.get("outer diameter")
        walled = label is not None and count == 1 and chain.mm[0] < label.mm / 2  # 219.1Ø x 6.3
        if walled and p.counted:
            raise Refused(f"{chain.texts[0]} may be a count or a wall", "ambiguous-section")
        if count >= 2 or walled or "inner diameter" in p.labels or "wall" in p.labels or "thickness" in p.labels:
            return read_hollow(("CHS",), p, given, listed_only=False)
        return MADE_FAMILIES["RD"](p, given)
    if "square" in p.properties and count == 1:
        return MADE_FAMILIES["SQ"](p, given)
    if "square" in p.properties and count == 2 and chain.mm[1] < chain.mm[0] / 2:
        return read_hollow(("SHS",), p, given, listed_only=False)
    if ("square" in p.properties or "rectangular" in p.properties) and count >= 3:
        return read_hollow(("SHS", "RHS"), p, given, listed_only=False)
    if not count and "thickness" in p.labels:
        return read_sheet("plate", p, given)
    wooden = given.material == "wood" or p.wood
    plain_lumber = wooden or {w.casefold() for w in p.others} <= LUMBER_WORDS
    if (
        given.material in (None, "wood")
        and not p.metal
        and plain_lumber
        and len(p.chains) == 1
        and count in (2, 3)
        and lumber_row(chain) is not None
    ):
        return read_board(p, given)
    if wooden and len(p.chains) == 1 and count in (2, 3):
        return read_board(p, given)
    if not p.others and "legs" in p.properties and count >= 2:
        return by_numbers(("L",), "", one_chain(p, "angle"), given)
    if "letter" in p.properties and p.letters and count:  # a heading's letters (b/h) are no letters of the text
        return read_letter(p, given)
    if given.material is None and not p.metal and plain_lumber and count == 2 and len(p.chains) == 1 and goods.is_timber_size(*chain.mm):
        flats = catalogue.find("FL", "", (catalogue.canonical(f"{max(chain.mm):.4f}"), catalogue.canonical(f"{min(chain.mm):.4f}")))
        if not flats:
            answer = read_board(p, given)
            answer.match = "alias"
            return answer
    if given.material is None and p.stone and not p.wood and not p.metal and len(p.chains) == 1 and count == 3:
        return read_block(p, given)
    if len(p.chains) == 1 and ((given.material in ("board", "glass") and count in (1, 3)) or (given.material == "wood" and count == 1)):
        return read_sheet("pane" if given.material == "glass" else "panel", p, given)
    other_kind = given.material is not None and given.material not in ("metal", "wood")
    if other_kind and len(p.chains) == 1 and count == 3:
        answer = read_block(p, given)
        answer.match = "alias"
        return answer
    if len(p.chains) == 1 and count == 3 and (given.material == "metal" or not p.others) and not other_kind:
        keys = key_texts(chain)
        beams = table_rows((*I_FAMILIES, "PFC"), "", keys, given.own)
        rest = table_rows(("L", *HOLLOW_FAMILIES), "", keys, None)
        if len(beams) == 1 and not rest:
            answer = pick(beams, None)
            answer.match = "alias"
            return answer
    _refuse_bare(p, text, chain)
    raise AssertionError("unreachable")  # pragma: no cover


def _refuse_bare(p: Parsed, text: str, chain: Chain) -> None:
    """Say which readings a text without a kind has, or that it has none."""
    numbers = chain.texts
    if numbers and not p.others:
        readings: list[Candidate] = []
        keys = key_texts(chain)
        for family in ("L", "SHS", "RHS", "CHS", *I_FAMILIES, "PFC"):
            readings += [Candidate(r.designation, 90.0) for r in catalogue.find(family, "", keys)]
        shown = "x".join(made.number(v) for v in chain.mm)
        if len(numbers) == 2:
            flat = [Candidate(f"FL {shown}", 80.0)] if max(chain.mm) >= LEAST_FLAT_MM else []
            readings += [*flat, Candidate(f"Board {shown}", 70.0)]
        elif len(numbers) == 3:
            readings.append(Candidate(f"Block {shown}", 60.0))
        elif len(numbers) == 1:
            readings += [Candidate(f"{f} {shown}", 50.0) for f in (("RD", "SQ", "PL") if chain.mm[0] >= LEAST_BAR_MM else ("PL",))]
        raise Refused("nothing names the kind of section", "ambiguous-section", nearest.unique(readings, 8))
    raise Refused(NO_SECTION, "unknown-section", nearest.anywhere(text, numbers))
