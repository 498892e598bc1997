"""Bars, plates, boards and blocks read from their sizes: which number is which. Rank 2."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

from takeoff.sections import catalogue, goods, made
from takeoff.sections.answers import LEAST_LENGTH_MM, Answer, Given, Refused, material_of, no_open, one_chain, sizes_of, take_size
from takeoff.sections.catalogue import Row
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.section import Candidate, Section
from takeoff.sections.words import TIMBER_IN_CM

#: Beyond this thickness a text that says sheet, pane or panel has a size or a unit wrong (cross-laminated timber panels reach it).
THICKEST_SHEET_MM = 120.0


#: Widths and sizes below these, in mm and without a unit, are more likely inches.
LEAST_FLAT_MM, LEAST_BAR_MM, LEAST_PLATE_MM, LEAST_THIN_PLATE_MM = 7.0, 3.0, 9.0, 12.5


#: A plate told whole whose sizes all stay below this, and no thicker than the second, is as likely in inches (1.5x12x24).
LEAST_PLAN_MM, THIN_MM = 49.0, 3.0
#: A size up to this in front of another may be the thickness itself.
MOST_THICKNESS_MM = 40.0
#: No pane is so narrow; VSG 2x6x1000 is two panes of 6 mm.
LEAST_PANE_MM = 25.0
#: Beyond this nobody gives a plate's size in inches.
MOST_INCHES = 240.0


def inch_like(chain: Chain, least_mm: float, what: str) -> None:
    """Refuse sizes without a unit that are too small for millimetres and would be usual in inches (``PL0.5X6``, ``SB 1``)."""
    bare = [t for t in chain.numbers if not t.unit]
    # 0.375 and 0.1875 are fractions of an inch; no thickness in mm is told to a thousandth.
    fraction = any(len(t.text.partition(".")[2]) >= 3 and (t.value * 16).is_integer() for t in bare)
    fractions = fraction and len(bare) == len(chain.numbers) and max(t.value for t in bare) <= MOST_INCHES
    numbers = [t for t in chain.numbers if t.mm < LEAST_LENGTH_MM]
    least = 1 if "bar" in what or what == "hexagon" else 2  # PL 8x1800x6200 has one small size, its thickness
    if fractions or (len(numbers) >= least and all(not t.unit for t in numbers) and max(t.value for t in numbers) < least_mm):
        shown = "x".join(t.raw for t in numbers)
        raise Refused(f"a {what} of {shown} mm is implausible: if the sizes are inches, write the unit", "implausible-size")


def read_flat(p: Parsed, given: Given) -> Answer:
    no_open(p)
    values = sizes_of(one_chain(p, "flat"), 3, "flat")
    if len(values) >= 2:
        inch_like(p.chains[0], LEAST_FLAT_MM, "flat")
    length = values.pop() if len(values) == 3 else None
    if length is not None and length < max(values):
        raise Refused("the third size of a flat should be its length, the longest", "ambiguous-section")
    thickness, width = take_size(p, "thickness", "wall"), take_size(p, "width")
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
    kind = material_of(p, given)
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
        no_open(p)
        values = sizes_of(one_chain(p, shape), 3, shape)
        if values:
            inch_like(p.chains[0], LEAST_BAR_MM, shape)
        size = take_size(p, *labels)
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


def read_sheet(kind: str, p: Parsed, given: Given) -> Answer:
    """Plate, sheet, pane, panel. The thickness is the smallest size; when it stands first, width and length follow as typed."""
    no_open(p)
    prefix = {"plate": "PL", "sheet": "Sheet", "pane": "Pane", "panel": "Panel"}[kind]
    material = material_of(p, given)
    if kind == "pane" and material is None:
        material = "glass"
    if kind == "plate" and material is None:
        material = "metal" if p.metal else None
    chains = list(p.chains)
    thickness, width, length = take_size(p, "thickness", "wall"), take_size(p, "width"), take_size(p, "length")
    if len(chains) == 2 and {len(c.numbers) for c in chains} == {1, 2} and thickness is None:
        # "Sheet 1.5 mm | 2x1 m", "12 mm plate 200x450": the lone number is the thickness.
        lone, pair = sorted(chains, key=lambda c: len(c.numbers))
        if pair is chains[0] and min(pair.mm) <= MOST_THICKNESS_MM and not lone.numbers[0].unit and min(pair.mm) > lone.mm[0]:
            raise Refused(f"{lone.texts[0]} may be a thickness or a length: write its unit", "ambiguous-section")  # PL 10x200 6.0
        values = [lone.mm[0], *pair.mm]
        if lone.numbers[0].unit == "in" and pair.mm[0] == 4 and pair.mm[1] in (8, 9, 10) and kind == "panel":
            values[1:] = [n * 304.8 for n in pair.mm]  # a US sheet of 4 by 8 feet
        if values[0] > min(values[1:]):
            raise Refused("which of the sizes is the thickness cannot be told", "ambiguous-section")
    else:
        values = list(sizes_of(one_chain(p, kind), 3, kind))
        if len(values) >= 2 and kind == "plate":
            small = LEAST_THIN_PLATE_MM if min(values) < THIN_MM else LEAST_PLATE_MM
            inch_like(p.chains[0], LEAST_PLAN_MM if len(values) == 3 and min(values) <= THIN_MM else small, "plate")
        if kind == "pane" and len(values) == 3 and sorted(values)[1] < LEAST_PANE_MM:
            raise Refused("a pane so narrow is implausible: two panes in one need each its row", "implausible-size")
    if thickness is not None and len(values) == 3:
        if thickness not in values:
            raise Refused("the thickness is given twice, and differently", "ambiguous-section")
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
    if kind in ("sheet", "pane", "panel") and thickness is not None and thickness > THICKEST_SHEET_MM:
        raise Refused(f"a {kind} {made.number(thickness)} mm thick is implausible: a size or its unit is wrong", "implausible-size")
    section = made.sheet(thickness, width, length, material, prefix=prefix)
    p.labels.pop("height", None)
    return Answer(section, "exact", length if length is not None and length != given.length else None)


def read_block(p: Parsed, given: Given) -> Answer:
    no_open(p)
    values = sizes_of(one_chain(p, "block"), 3, "block")
    length, width, height = take_size(p, "length"), take_size(p, "width"), take_size(p, "height", "thickness")
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
    return Answer(made.block(length, width, height, material_of(p, given)), "exact")


def lumber_row(chain: Chain) -> Row | None:
    """Dressed US lumber by its nominal size in inches (``2x6``, ``5/4x6``), the only thing such small sizes can be."""
    numbers = list(chain.numbers[:2])
    texts = [t.text for t in numbers]
    if len(chain.numbers) == 3 and chain.joins[0] == "/" and chain.texts[:2] in (("5", "4"), ("6", "4")):
        texts = [catalogue.canonical(f"{numbers[0].value / numbers[1].value:.4f}"), chain.texts[2]]
        numbers = [chain.numbers[0], chain.numbers[2]]
    if len(texts) != 2 or any(t.unit not in ("", "in") for t in numbers):
        return None
    if len(chain.numbers) == 3 and chain.joins[0] != "/" and chain.numbers[2].unit == "in":
        return None
    found = catalogue.find("LUMBER", "", (texts[0], texts[1])) or catalogue.find("LUMBER", "", (texts[1], texts[0]))
    return found[0] if found else None


def read_board(p: Parsed, given: Given) -> Answer:
    no_open(p)
    chain = one_chain(p, "board")
    if given.material != "metal" and _in_centimetres(p, chain):
        return _of_centimetres(p, given, chain, read_board)
    row = lumber_row(chain) if len(chain.numbers) >= 2 and given.material != "metal" else None
    if row is not None:
        spare = chain.numbers[3:] if chain.joins[0] == "/" else chain.numbers[2:]
        if any(t.unit not in ("ft", "m", "mm", "cm") for t in spare):
            raise Refused(
                "the length beside a nominal lumber size needs its unit", "ambiguous-section", (Candidate(row.designation, 80.0),)
            )
        length = spare[0].mm if spare else None
        if any(w.casefold() == "rough" for w in p.others):
            # Rough-sawn lumber has about its nominal size.
            thick, wide = (float(n) * 25.4 for n in row.key[2])
            rough = made.bar("board", {"thickness": thick, "width": wide}, "wood", note=f"rough: {row.designation} at its nominal size")
            return Answer(rough, "alias", length)
        return Answer(row.section, "exact", length)
    values = sizes_of(chain, 3, "board")
    length = None
    if len(values) == 3:
        length = max(values)
        values.remove(length)
        if length < 2 * max(values):
            raise Refused("which of the sizes is the length cannot be told", "ambiguous-section")
    thickness, width = take_size(p, "thickness"), take_size(p, "width", "height")
    if len(values) == 2:
        thickness, width = min(values), max(values)
    elif len(values) == 1:
        if thickness is None:
            thickness = values[0]
        else:
            width = values[0]
    thickness = thickness if thickness is not None else given.thickness
    width = width if width is not None else given.width if given.width is not None else given.height
    return Answer(made.bar("board", {"thickness": thickness, "width": width}, material_of(p, given)), "exact", length)


def _in_centimetres(p: Parsed, chain: Chain) -> bool:
    """``KVH 6/24``, ``BSH 16/48``: structural timber whose bare sizes are too small for mm, and usual in cm."""
    sizes = chain.numbers[:2]
    return (
        bool(p.named & TIMBER_IN_CM)
        and len(sizes) == 2
        and all(not t.unit for t in sizes)
        and max(t.value for t in sizes) < (100 if "glulam" in p.kinds else 45)
        and min(t.value for t in sizes) >= 4
    )


def _of_centimetres(p: Parsed, given: Given, chain: Chain, build: Callable[[Parsed, Given], Answer]) -> Answer:
    """The same text with its two sizes in cm: assumed, since the unit is inferred."""
    p.chains = [Chain([*(t._replace(unit="cm") for t in chain.numbers[:2]), *chain.numbers[2:]], chain.joins)]
    answer = build(p, given)
    answer.match = "ambiguous"
    answer.section = replace(answer.section, readings=(answer.section.designation,))
    answer.notes = (*answer.notes, "sizes taken as centimetres")
    return answer


def read_glulam(p: Parsed, given: Given) -> Answer:
    """``GL 90x315``: width × depth."""
    no_open(p)
    if _in_centimetres(p, chain := one_chain(p, "glulam")):
        return _of_centimetres(p, given, chain, read_glulam)
    values = sizes_of(chain, 3, "glulam")
    length = values.pop() if len(values) == 3 else None
    if length is not None and length < 2 * max(values):
        raise Refused("which of the sizes is the length cannot be told", "ambiguous-section")
    if len(values) != 2:
        values = [v for v in (given.width, given.height or given.thickness) if v is not None]
    if len(values) != 2:
        raise Refused("a glulam beam needs its width and depth", "impossible-geometry")
    return Answer(made.glulam(min(values), max(values)), "exact", length)


def read_tread(p: Parsed, given: Given) -> Answer:
    """Tread plate on the plain thickness; ``5/7`` is plain over pattern."""
    pattern = "tear" if any(w.casefold() in ("tear", "tranen", "tranenblech") for w in p.others) or "tear" in p.properties else "stud"
    if [len(c.numbers) for c in p.chains] == [1, 1] and p.chains[1].mm[0] <= 3 < p.chains[0].mm[0]:
        p.chains.pop()  # 5+2: plain thickness and height of the pattern
    plan: list[float] = []
    if len(p.chains) == 2 and len(p.chains[1].numbers) == 2 and min(p.chains[1].mm) > max(p.chains[0].mm):
        plan = p.chains.pop().mm  # tread plate 5/7 1500x1000
    chain = one_chain(p, "tread plate")
    values = sizes_of(chain, 3, "tread plate")
    if len(values) >= 2 and chain.joins[0] == "/":
        values.pop(1)
    values += plan
    thickness = take_size(p, "thickness")
    if thickness is None and values:
        thickness = min(values)
        values.remove(thickness)
    if any(t.unit == "in" for t in chain.numbers):
        pattern = "raised"
    width, length = values if len(values) == 2 else (values[0] if values else given.width, given.length)
    section = goods.tread_plate(thickness if thickness is not None else given.thickness, pattern, width, length)
    return Answer(section, "exact", length if len(values) == 2 else None)


def read_gauge(p: Parsed, given: Given) -> Answer:
    """Sheet by gauge: the system goes by the metal that the text names, else uncoated steel."""
    said = " ".join([*p.others, *p.properties]).casefold()
    words = set(said.split()) | p.metals
    system = "steel"
    for name, marks in (
        ("stainless", ("stainless", "inox", "edelstahl")),
        ("aluminium", ("aluminium", "aluminum", "alu")),
        ("galvanized", ("galvanised", "galvanized", "galv", "verzinkt")),
    ):
        if words & set(marks):
            system = name
    values = sizes_of(one_chain(p, "sheet"), 2, "sheet")
    width, length = values if len(values) == 2 else (given.width, given.length)
    if p.gauge.endswith(" swg"):
        p.gauge, system = p.gauge.removesuffix(" swg"), "swg"
    if p.gauge.endswith(" g"):
        raise Refused(f"{p.gauge.replace(' ', '')} may be a gauge or a mass in grams", "ambiguous-section")
    section = goods.gauge_sheet(p.gauge, system, width, length)
    if section is None:
        raise Refused(
            f"no {system} gauge {p.gauge} in the tables",
            "unknown-section",
            tuple(
                Candidate(f"Sheet {g} swg" if system == "swg" else f"Sheet {g} ga {system}", 50.0)
                for g in ("10", "12", "14", "16", "18", "20")
                if goods.gauge_thickness_mm(g, system)
            ),
        )
    return Answer(section, "exact", length if len(values) == 2 else None)


MADE_FAMILIES: dict[str, Callable[[Parsed, Given], Answer]] = {
    "FL": read_flat,
    "RD": _single("round bar", "diameter", "diameter", "outer diameter"),
    "SQ": _single("square bar", "width", "width", "thickness"),
    "HEX": _single("hexagon", "width", "width", "diameter"),
}


def read_plain_bar(p: Parsed, given: Given) -> Answer:
    """``Bar 50x10`` is a flat, ``bar 25x25`` a square; ``bar 20`` may be round or square."""
    values = one_chain(p, "bar").mm
    if len(values) >= 2:
        return MADE_FAMILIES["SQ"](p, given) if values[0] == values[1] else read_flat(p, given)
    if "diameter" in p.labels or given.diameter is not None:
        return MADE_FAMILIES["RD"](p, given)
    if len(values) == 1 and not p.labels:
        size = made.number(values[0])
        raise Refused(
            "a bar of one size may be round or square", "ambiguous-section", (Candidate(f"RD {size}", 90.0), Candidate(f"SQ {size}", 90.0))
        )
    return read_flat(p, given)
