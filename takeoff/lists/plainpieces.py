"""Pieces that their columns tell, where no section text does: the kind in one column and the sizes in another, three sizes
with a material, a diameter with a length. Rank 3.

A name such as ``Cover`` names no section; with a thickness, a width and a length it is a flat piece, which is assumed and
said. Nothing is taken where a thing may be hollow or bent: a name that a section table knows, a pattern of sizes in the
name, outside sizes of metal.
"""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING, Any

from takeoff import materials, sections
from takeoff.lists import rowwords, sizeunits

if TYPE_CHECKING:
    from takeoff.lists.columns import ColumnReader

_BOARD = re.compile(r"(?P<front>[^\d]{0,40}?)\s*(?P<mm>\d{1,3}(?:[.,]\d)?)\s*mm\b\s*(?P<behind>[^\d]{0,40})", re.IGNORECASE)
_NAMED_SIZES = re.compile(r"([^\d]{0,40})(\d[\d.,/\"'\sx×*m]{0,58})")
#: kinds of material that are not made into hollow things of these outside sizes
_SOLID_KINDS = ("stone", "concrete", "masonry")
#: and for a ring without sizes: with a thickness, a width and a length it is the plate that the ring is rolled from
_RING = ("a ring is told as outer / inner diameter x height", "a ring needs its outer and inner diameter and its height")
_MASS_IN_NAME = re.compile(r"\d\s?kg\b", re.IGNORECASE)
#: a text that ends in its sizes, and the families whose last size is a wall or the thickness of a leg
_OPEN_SIZES = re.compile(r"\d(?:mm)?$")
_WALLED = frozenset(("RHS", "SHS", "CHS", "L", "Tube", "T"))


def settle(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Fill the section texts that the row's other columns tell."""
    sizeunits.unit_of_the_heading(reader, part)
    sizeunits.timber_in_cm(reader, part)
    sizeunits.order_of_the_heading(reader, part)
    _gussets(reader, part)
    _kind_from_the_name(reader, part)
    _sections_in_the_material(reader, part)
    _sizes_in_columns(reader, part)
    _sizes_of_timber(reader, part)
    sizeunits.bare_inches(reader, part)
    sizeunits.sheets_in_inches(reader, part)
    _masses_in_names(reader, part)
    sizeunits.gauges(reader, part)
    _discs(reader, part)
    _two_sides(reader, part)
    _pieces_by_sizes(reader, part)


def _masses_in_names(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """What lifts is named by what it lifts: beside a mass in a column, ``Chain hoist 500 kg`` does not weigh 500 kg."""
    where = []
    for i, text in enumerate(part["section_text"]):
        if not text or not (part["stated_each_kg"][i] > 0 or part["stated_total_kg"][i] > 0 or part["stated_mass_kg"][i] > 0):
            continue
        found = sections.read(text).section if len(text) <= sizeunits.LONGEST and _MASS_IN_NAME.search(text) else None
        if found is not None and found.family == "Stated mass":
            part["section_text"][i] = None
            where.append(i)
    message = "the name holds a mass, and a column states one: the column's is used"
    reader.say("note", "section-note", message, where, "name" if "name" in reader.table.columns else None)


def _discs(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A diameter in the cell of a width or a length, beside a thickness, is a disc."""
    where = []
    for i, (field, size, read) in reader.rounds.items():
        text, thickness = part["section_text"][i], part["thickness_mm"][i]
        other = part["length_mm" if field == "width" else "width_mm"][i]
        if thickness > 0 and not other > 0 and (_says_no_shape(text) or _is_plate(text)) and part["material_text"][i]:
            part["section_text"][i] = f"Disc {size:g}x{thickness:g}"
            part["thickness_mm"][i] = math.nan
            where.append(i)
        else:
            reader.put_back(field, read, [i])
    reader.say("assumed", "plain-piece", "a diameter and a thickness: taken as a full disc", where, "thickness",
               right="the section in the row, such as Disc 300x25")


def _two_sides(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Two sides in the cell of the length are the length and the width of a sheet (``OSB 18`` | ``2500 x 1250``)."""
    where = []
    for i, (length, width, read) in reader.two_sides.items():
        text, material = part["section_text"][i], part["material_text"][i]
        hint = getattr(materials.lookup(material).material, "kind", None) if material else None
        found = sections.read(text, material_kind=hint).section if text else None
        thick = part["thickness_mm"][i] > 0
        flat = (found is not None and found.form in ("sheet", "area mass") and (thick or found.thickness_mm or found.kg_per_m2)) or (
            found is None and thick and _says_no_shape(text))
        if flat and not part["width_mm"][i] > 0:
            part["length_mm"][i], part["width_mm"][i] = length, width
            where.append(i)
        else:
            reader.put_back("length", read, [i])
    reader.say("note", "section-note", "the length cell holds two sides: length and width of the sheet", where, "length")


def _is_plate(text: str | None) -> bool:
    found = sections.read(text).section if text and len(text) <= sizeunits.LONGEST and not any(ch.isdigit() for ch in text) else None
    return found is not None and (found.form == "sheet" or found.family == "Block")


def _gussets(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A gusset whose sizes stand in a column is the whole rectangle that is cut, whatever becomes of it."""
    if "size" not in reader.table.columns or "section" in reader.table.columns:
        return
    texts: list[str | None] = part["section_text"]
    triangles: dict[str, bool] = {}
    where = []
    for i, (text, size) in enumerate(zip(texts, reader.texts("size"), strict=True)):
        if not text or not size or text == size or len(text) > sizeunits.LONGEST or not sizeunits.SIZES_ONLY.fullmatch(size):
            continue
        if text not in triangles:
            triangles[text] = len(re.split(r"[x×*]", size)) == 3 and getattr(sections.read(text).section, "family", "") == "Triangle"
        if triangles[text]:
            texts[i] = f"PL {size}"
            where.append(i)
    reader.say("note", "section-note", "a gusset plate: taken as the full rectangle", where, "size")


def _kind_from_the_name(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Sizes without a word of their kind take it from the name beside them (``Rohr`` | ``168,3 x 4,5``)."""
    if not {"name", "section"} <= set(reader.table.columns):
        return
    texts: list[str | None] = part["section_text"]
    read: dict[tuple[str, str], str | None] = {}
    where = []
    for i, (name, text) in enumerate(zip(reader.texts("name"), texts, strict=True)):
        if not name or not text or name == text or len(text) > 40:
            continue
        if (name, text) not in read:
            joined = f"{name} {text}"
            wanted = len(joined) <= 80 and sizeunits.SIZES_ONLY.fullmatch(text) and not sizeunits.known(text) and sizeunits.known(joined)
            triangle = wanted and getattr(sections.read(joined).section, "family", "") == "Triangle"
            # Sizes in a column are what is cut: the whole rectangle, whatever becomes of it.
            read[name, text] = f"PL {text}" if triangle else joined if wanted else None
        found = read[name, text]
        if found is not None:
            texts[i] = found
            where.append(i)
    reader.say("note", "section-from-name", "the section cell holds sizes only: their kind is read from the name", where, "name")


def _sizes_in_columns(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A kind of section whose sizes stand in columns of their own: ``Pipe`` | OD 114.3 | wall 5; ``RHS`` | 120 | 60 | 4."""
    if "thickness" not in reader.table.columns:
        return
    _walls_in_a_column(reader, part)
    if not {"diameter", "height"} & set(reader.table.columns):
        return
    texts: list[str | None] = part["section_text"]
    read: dict[str, bool] = {}
    where = []
    for i, text in enumerate(texts):
        if not text or len(text) > 40 or any(ch.isdigit() for ch in text):
            continue
        thickness, width, height, diameter = (part[f"{name}_mm"][i] for name in ("thickness", "width", "height", "diameter"))
        if diameter > 0 and thickness > 0 and not (width > 0 or height > 0):
            joined = f"{text} {diameter:g}x{thickness:g}"
        elif width > 0 and height > 0 and thickness > 0:
            joined = f"{text} {height:g}x{width:g}x{thickness:g}"
        else:
            continue
        if joined not in read:
            found = sections.read(joined).section
            read[joined] = not sizeunits.known(text) and found is not None and "length" in found.needs
        if read[joined]:
            texts[i] = joined
            where.append(i)
    message = "the section's kind and its sizes stand in several columns, and were read together"
    reader.say("note", "section-from-name", message, where, "thickness")


def _walls_in_a_column(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Sides or legs in the section's text, the wall in a column of its own: ``RHS 150x100`` | 6."""
    texts: list[str | None] = part["section_text"]
    read: dict[str, bool] = {}
    where = []
    heading = reader.table.columns["section"].text if "section" in reader.table.columns else None
    for i, text in enumerate(texts):
        thickness = part["thickness_mm"][i]
        if not text or not thickness > 0 or part["width_mm"][i] > 0 or part["height_mm"][i] > 0 or not _OPEN_SIZES.search(text):
            continue
        joined = f"{text}x{thickness:g}"
        if joined not in read:
            found = sections.read(joined, heading=heading).section
            alone = sections.read(text, heading=heading).section
            read[joined] = (len(joined) <= sizeunits.LONGEST and alone is None and found is not None and tuple(found.needs) == ("length",)
                            and found.family in _WALLED)
        if read[joined]:
            texts[i] = joined
            part["thickness_mm"][i] = math.nan
            where.append(i)
    reader.say("note", "section-note", "the wall stands in a column of its own, and was read with the section", where, "thickness")


def _sizes_of_timber(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Timber by its sizes, with a name in front that is no word of a section (``Stolpe`` | ``95x95`` | ``Furu``)."""
    if "size" not in reader.table.columns or "section" in reader.table.columns:
        return
    texts: list[str | None] = part["section_text"]
    wood: dict[tuple[str, str], bool] = {}
    where = []
    for i, (text, size, material) in enumerate(zip(texts, reader.texts("size"), part["material_text"], strict=True)):
        if not text or not size or not material or text == size or len(text) > 80:
            continue
        if (text, material) not in wood:
            wood[text, material] = (
                not any(ch.isdigit() for ch in text[:-len(size)]) and sections.read(text).reason == sections.NO_SECTION
                and getattr(materials.lookup(material).material, "kind", None) == "wood"
                and sections.read(size, material_kind="wood").section is not None)
        if wood[text, material]:
            texts[i] = size
            where.append(i)
    reader.say("note", "section-note", "the name in front of the sizes says no shape: timber of these sizes", where, "size")


def _sections_in_the_material(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A row whose material cell is plainly a section or a board (``Rohr 48,3x3,2 Stahl``, ``Granite 30 mm`` beside 2400x620)."""
    texts, told = part["section_text"], part["material_text"]
    read: dict[tuple[str | None, str], tuple[str, str | None] | None] = {}
    where = []
    for i, (text, material) in enumerate(zip(texts, told, strict=True)):
        if not material or not any(ch.isdigit() for ch in material):
            continue
        if (text, material) not in read:
            read[text, material] = _from_material(text, material)
        found = read[text, material]
        if found is not None:
            texts[i], told[i] = found
            where.append(i)
    reader.say("note", "heading-misleads", "the material cell holds the section as well", where, "material")


def _from_material(text: str | None, material: str) -> tuple[str, str | None] | None:
    """The section and the material that a row's section text and material cell give together; None where they give none."""
    if len(material) > sizeunits.LONGEST or len(text or "") > sizeunits.LONGEST or sizeunits.known(text):
        return None
    board = _BOARD.fullmatch(material)
    sized = _NAMED_SIZES.fullmatch(text) if board and text else None
    if board and sized and (sizeunits.SIZES_ONLY.fullmatch(str(text)) or _says_no_shape(sized[1]) or _is_plate(sized[1])):
        name = (board["front"] + " " + board["behind"]).strip()
        if materials.lookup(name).match in ("exact", "alias") and len(re.split(r"[x×*]", sized[2])) == 2:
            return f"Panel {board['mm']} x {sized[2]}", name
    if materials.lookup(material).match in ("exact", "alias"):
        return None
    if not sizeunits.CROSSED.search(material) or sizeunits.CROSSED.search(text or ""):
        return None
    if sizeunits.known(material):
        return material, None
    word = " ".join(part for part in material.split() if not any(ch.isdigit() for ch in part))
    named = materials.lookup(word) if word else None
    if named is None or named.material is None or named.match not in ("exact", "alias"):
        return None
    return (material, word) if sections.read(material, material_kind=named.material.kind).section is not None else None


def _pieces_by_sizes(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    columns = set(reader.table.columns)
    if not ({"thickness", "width"} <= columns or {"width", "height", "length"} <= columns or columns & {"diameter", "area"}):
        return
    texts: list[str | None] = part["section_text"]
    plain: dict[str | None, bool] = {None: True}
    kinds: dict[str, str | None] = {}
    flat, blocks, boards, bars = [], [], [], []
    for i, text in enumerate(texts):
        thickness, width, height, length, diameter = (
            part[f"{name}_mm"][i] > 0 for name in ("thickness", "width", "height", "length", "diameter"))
        area = part["stated_area_m2"][i] > 0 and not (width or length or height)
        if not (thickness + width + height + length >= 3 or (diameter and length) or (thickness and area)):
            continue
        if text not in plain:
            plain[text] = _says_no_shape(text)
        material = part["material_text"][i]
        if not plain[text] or not material or (text and _names_a_size(text, part, i)):
            continue
        if text and thickness and rowwords.NOT_FLAT.search(rowwords.label(text)):
            continue
        if thickness and (area or (width and (length or height))) and not diameter:
            if not (length or area):
                part["length_mm"][i], part["height_mm"][i] = part["height_mm"][i], math.nan
            elif height:
                continue
            texts[i] = "Plate"
            flat.append(i)
        elif diameter and length and not (thickness or width or height):
            texts[i] = "Round bar"
            bars.append(i)
        elif width and height and length and not (thickness or diameter):
            if material not in kinds:
                kinds[material] = getattr(materials.lookup(material).material, "kind", None)
            if kinds[material] == "wood":
                part["thickness_mm"][i], part["height_mm"][i] = part["height_mm"][i], math.nan
                texts[i] = "Board"
                boards.append(i)
            elif kinds[material] in _SOLID_KINDS:
                texts[i] = "Block"
                blocks.append(i)
    for where, field, message in (
        (flat, "thickness", "no section is named: taken as a flat piece, its thickness over its width × length or area"),
        (bars, "diameter", "no section is named: taken as a solid round bar of the diameter"),
        (boards, "width", "no section is named: taken as solid timber, width × height × length"),
        (blocks, "width", "no section is named: taken as a solid block, length × width × height"),
    ):
        reader.say("assumed", "plain-piece", message, where, field, right="the section in the row, such as PL, FL, RD or a profile")


def _names_a_size(text: str, part: dict[str, list[Any]], i: int) -> bool:
    """Whether a text repeats one of its row's sizes (``Z 200`` with a width of 200): it may then name a section."""
    numbers = {float(number) for number in re.findall(r"\d{1,6}", text)}
    return bool(numbers & {part[f"{name}_mm"][i] for name in ("thickness", "width", "height", "length", "diameter")})


def looks(text: str, material: str) -> tuple[bool, bool, tuple[str, str | None] | None, str | None]:
    """What the patterns here make of one row's texts: sizes only, no shape, a section in the material, bare inches."""
    return sizeunits.SIZES_ONLY.fullmatch(text) is not None, _says_no_shape(text), _from_material(text, material), sizeunits.in_inches(text)


def _says_no_shape(text: str | None) -> bool:
    """Whether a text names nothing that the section tables know."""
    if not text or len(text) > 80:
        return not text
    if sizeunits.CROSSED.search(text):
        return False
    found = sections.read(text)
    return found.section is None and (found.reason in (sections.NO_SECTION, *_RING) or text.strip().isdecimal())
