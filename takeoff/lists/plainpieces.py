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
from takeoff.lists import rowwords
from takeoff.lists.columns import in_feet
from takeoff.lists.headings import size_order

if TYPE_CHECKING:
    from takeoff.lists.columns import ColumnReader

#: numbers, crosses, diameter signs and mm, and nothing else; one class of characters, so that no text makes it slow
_SIZES_ONLY = re.compile(r"[Øø∅⌀]?\s?\d[\d.,/\"'\sx×*mØø∅⌀-]{0,58}", re.IGNORECASE)
_CROSSED = re.compile(r"\d\s*(?:mm)?\s*[x×*]\s*\d|\d[/]\d+[/]\d", re.IGNORECASE)
_BOARD = re.compile(r"(?P<front>[^\d]{0,40}?)\s*(?P<mm>\d{1,3}(?:[.,]\d)?)\s*mm\b\s*(?P<behind>[^\d]{0,40})", re.IGNORECASE)
_NAMED_SIZES = re.compile(r"([^\d]{0,40})(\d[\d.,/\"'\sx×*m]{0,58})")
_BARE = re.compile(r"(?<![\w./])(\d+(?:\.\d+)?)(?![\w./\"'])")
#: the same glued to the letters of a plate or a bar (``PL1X14``); sizes of timber (``2x6``) are nominal and left alone
_GLUED = re.compile(r"(?:(?<=^PL)|(?<=^FB)|(?<=^FL)|(?<=^RB)|(?<=^RD)|(?<=\d[xX]))(\d+(?:\.\d+)?)(?![\d./\"']|[A-WYZa-wyz])")
#: a smallest size above this is in mm even in a list in feet
_THICKEST_IN = 4.0
#: texts longer than this name no section here
_LONGEST = 60
#: kinds of material that are not made into hollow things of these outside sizes
_SOLID_KINDS = ("stone", "concrete", "masonry")
#: and for a ring without sizes: with a thickness, a width and a length it is the plate that the ring is rolled from
_RING = ("a ring is told as outer / inner diameter x height", "a ring needs its outer and inner diameter and its height")
#: two sizes of timber and nothing else
_BARE_SIZES = re.compile(r"\d{1,4}(?:[.,]\d{1,2})?(?:\s?[x×*/]\s?\d{1,4}(?:[.,]\d{1,2})?){1,2}", re.IGNORECASE)
#: how the sections answer sizes of timber that are too small for mm, and the largest such size in cm
_IN_CM = "such sizes are usual in cm"
_LARGEST_CM = 60.0
_INCH_SHEET = re.compile(
    r"(?:(?P<ga>\d{1,2})\s?(?:ga|gauge)\.?|(?P<t>0?\.\d{2,4}))\s*[x×]\s*(?P<a>\d{1,3}(?:\.\d+)?)\"?\s*[x×]\s*(?P<b>\d{1,3}(?:\.\d+)?)\"?"
    r"\s*(?:sheet|sht|plate|pl)?", re.IGNORECASE)
_MASS_IN_NAME = re.compile(r"\d\s?kg\b", re.IGNORECASE)
#: a text that ends in its sizes, and the families whose last size is a wall or the thickness of a leg
_OPEN_SIZES = re.compile(r"\d(?:mm)?$")
_WALLED = frozenset(("RHS", "SHS", "CHS", "L", "Tube", "T"))
_ZINC = re.compile(r"galv|zinc|\bGI\b|DX5", re.IGNORECASE)
#: what the sections answer for a text in which they know no word at all
_NO_SECTION = "names no section in the tables"


def settle(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Fill the section texts that the row's other columns tell."""
    _unit_of_the_heading(reader, part)
    _timber_in_cm(reader, part)
    _order_of_the_heading(reader, part)
    _gussets(reader, part)
    _kind_from_the_name(reader, part)
    _sections_in_the_material(reader, part)
    _sizes_in_columns(reader, part)
    _sizes_of_timber(reader, part)
    _bare_inches(reader, part)
    _sheets_in_inches(reader, part)
    _masses_in_names(reader, part)
    _gauges(reader, part)
    _discs(reader, part)
    _two_sides(reader, part)
    _pieces_by_sizes(reader, part)


def _unit_of_the_heading(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Bare sizes below a heading with a unit (``Cross-section [cm]``) are in that unit; without it ``8x18`` would be inches."""
    columns = reader.table.columns
    column = columns.get("section") or columns.get("size")
    unit = column.heading.unit if column is not None and column.heading is not None else None
    if column is None or unit not in ("mm", "cm", "in"):
        return
    texts: list[str | None] = part["section_text"]
    read: dict[str, str | None] = {}
    where = []
    for i, text in enumerate(texts):
        if not text or len(text) > _LONGEST:
            continue
        if text not in read:
            read[text] = f"{text} {unit}" if _BARE_SIZES.fullmatch(text) and _two_numbers(text) else None
        found = read[text]
        if found is not None:
            texts[i] = found
            where.append(i)
    message = f"the sizes are in {unit}, as their heading says"
    reader.say("note", "section-note", message, where, "section" if "section" in columns else "size")


def _two_numbers(text: str) -> bool:
    return len(re.split(r"[x×*/]", text)) == 2


def _timber_in_cm(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Timber whose bare sizes are too small for mm, all through a list, is in cm (``8/20``), as carpenters write it."""
    texts: list[str | None] = part["section_text"]
    kinds: dict[str, str | None] = {}
    bare: dict[str, list[int]] = {}
    for i, (text, material) in enumerate(zip(texts, part["material_text"], strict=True)):
        if not text or not material or not _BARE_SIZES.fullmatch(text) or not _two_numbers(text):
            continue
        if material not in kinds:
            kinds[material] = getattr(materials.lookup(material, hint="wood").material, "kind", None)
        if kinds[material] == "wood":
            bare.setdefault(text, []).append(i)
    largest = [max(float(n.replace(",", ".")) for n in re.findall(r"\d+(?:[.,]\d+)?", text)) for text in bare]
    refused = any(_IN_CM in (sections.read(text, material_kind="wood").reason or "") for text in bare)
    if not bare or not refused or max(largest) > _LARGEST_CM:
        return
    where = sorted(i for rows in bare.values() for i in rows)
    for i in where:
        texts[i] = f"{texts[i]} cm"
        reader.members.assumed.setdefault(reader.start + i, set()).add("length")
    reader.say("assumed", "unit-assumed", "the sizes of the timber are too small for mm: taken in cm", where,
               "section" if "section" in reader.table.columns else None, right="the unit in the heading, such as Section (cm)")


def _sheets_in_inches(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """``14GA x 48 x 96 sheet`` and ``.125 x 48 x 120`` are sheets in inches: gauges and thousandths are of those lists alone."""
    texts: list[str | None] = part["section_text"]
    where = []
    for i, text in enumerate(texts):
        found = _INCH_SHEET.fullmatch(text) if text and len(text) <= _LONGEST else None
        if not found or _known(text):
            continue
        gauge, thick, one, two = found.group("ga", "t", "a", "b")
        metal = _metal_of_gauge(part["material_text"][i] or "", part["finish"][i]) if gauge else ""
        joined = f"{metal}Sheet {gauge} ga {one} in x {two} in" if gauge else f'PL {thick}" x {one}" x {two}"'
        if _known(joined):
            texts[i] = joined
            where.append(i)
    reader.say("assumed", "unit-assumed", "a gauge or thousandths: the sizes of the sheet are taken in inches", where,
               "section" if "section" in reader.table.columns else "name", right="the unit in the text")
    for i in where:
        reader.members.assumed.setdefault(reader.start + i, set()).add("length")


def _masses_in_names(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """What lifts is named by what it lifts: beside a mass in a column, ``Chain hoist 500 kg`` does not weigh 500 kg."""
    where = []
    for i, text in enumerate(part["section_text"]):
        if not text or not (part["stated_each_kg"][i] > 0 or part["stated_total_kg"][i] > 0 or part["stated_mass_kg"][i] > 0):
            continue
        found = sections.read(text).section if len(text) <= _LONGEST and _MASS_IN_NAME.search(text) else None
        if found is not None and found.family == "Stated mass":
            part["section_text"][i] = None
            where.append(i)
    message = "the name holds a mass, and a column states one: the column's is used"
    reader.say("note", "section-note", message, where, "name" if "name" in reader.table.columns else None)


def _metal_of_gauge(material: str, finish: str | None) -> str:
    """The word that tells which gauge system a metal's sheet goes by; blank is uncoated steel."""
    found = materials.lookup(material, hint="metal").material if material else None
    words = (found.family if found is not None else "").replace("_", " ")
    if "stainless" in words:
        return "stainless "
    return "aluminium " if "alumin" in words else "galvanized " if _ZINC.search(f"{material} {finish or ''}") else ""


def _gauges(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A gauge beside a width and a length is sheet; the gauge goes by the metal."""
    where, left = [], []
    for i, gauge in reader.gauges.items():
        text, material = part["section_text"][i], part["material_text"][i]
        flat = part["width_mm"][i] > 0 and (part["length_mm"][i] > 0 or part["height_mm"][i] > 0)
        if not flat or not material or (text and (_CROSSED.search(text) or rowwords.NOT_FLAT.search(rowwords.label(text)))):
            left.append(i)
            continue
        metal = _metal_of_gauge(material, part["finish"][i])
        part["section_text"][i] = f"{metal}Sheet {gauge} ga"
        where.append(i)
    reader.say("assumed", "plain-piece", "no section is named: taken as flat sheet of that gauge, width × length", where, "thickness",
               right="the section in the row, such as Sheet 16 ga or a profile")
    message = "a gauge, and no width and length of a flat piece of a known material beside it"
    for i in left:
        reader.refuse("unreadable-size", message, [i], "thickness", read=f"{reader.gauges[i]} ga", right="the thickness in mm or inches")


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
    found = sections.read(text).section if text and len(text) <= _LONGEST and not any(ch.isdigit() for ch in text) else None
    return found is not None and (found.form == "sheet" or found.family == "Block")


def _order_of_the_heading(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Under a heading such as ``t x b x L`` three bare sizes are a plate."""
    column = reader.table.columns.get("size")
    order = size_order(column.text) if column is not None else ()
    if "t" not in order:
        return
    texts: list[str | None] = part["section_text"]
    sizes = reader.texts("size")
    where = []
    for i, size in enumerate(sizes):
        if size and _SIZES_ONLY.fullmatch(size) and len(re.split(r"[x×*]", size)) == len(order) and not _known(texts[i]):
            texts[i] = f"PL {size}"
            where.append(i)
    reader.say("note", "section-note", f"the heading {column.text!r} makes it a plate" if column else "", where, "size")


def _gussets(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A gusset whose sizes stand in a column is the whole rectangle that is cut, whatever becomes of it."""
    if "size" not in reader.table.columns or "section" in reader.table.columns:
        return
    texts: list[str | None] = part["section_text"]
    triangles: dict[str, bool] = {}
    where = []
    for i, (text, size) in enumerate(zip(texts, reader.texts("size"), strict=True)):
        if not text or not size or text == size or len(text) > _LONGEST or not _SIZES_ONLY.fullmatch(size):
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
            wanted = len(joined) <= 80 and _SIZES_ONLY.fullmatch(text) and not _known(text) and _known(joined)
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
            read[joined] = not _known(text) and found is not None and "length" in found.needs
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
            read[joined] = (len(joined) <= _LONGEST and alone is None and found is not None and tuple(found.needs) == ("length",)
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
                not any(ch.isdigit() for ch in text[:-len(size)]) and sections.read(text).reason == _NO_SECTION
                and getattr(materials.lookup(material).material, "kind", None) == "wood"
                and sections.read(size, material_kind="wood").section is not None)
        if wood[text, material]:
            texts[i] = size
            where.append(i)
    reader.say("note", "section-note", "the name in front of the sizes says no shape: timber of these sizes", where, "size")


def _bare_inches(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """In a list in feet and inches the bare sizes of a made-to-size section are inches (``ROUND BAR 1 dia``)."""
    if not in_feet(reader.table):
        return
    texts: list[str | None] = part["section_text"]
    read: dict[str, str | None] = {}
    where = []
    for i, text in enumerate(texts):
        if not text:
            continue
        if text not in read:
            read[text] = _in_inches(text)
        found = read[text]
        if found is not None:
            texts[i] = found
            where.append(i)
    reader.say("assumed", "unit-assumed", "the list is in feet and inches: the bare sizes of the section are taken in inches", where,
               "section" if "section" in reader.table.columns else "name", right='the unit in the text, such as RD 1"')
    for i in where:
        reader.members.assumed.setdefault(reader.start + i, set()).add("diameter")


def _in_inches(text: str) -> str | None:
    """A made-to-size section's text with inch marks on its bare numbers; None where it says its unit, or inches would be absurd."""
    if len(text) > _LONGEST:
        return None
    bare = _GLUED if re.match(r"(?:PL|FB|FL|RB|RD)\d", text) else _BARE
    numbers = [float(n) for n in bare.findall(text)]
    if not numbers or min(numbers) > _THICKEST_IN or re.search(r"[/\"'½¼¾⅛⅜⅝⅞]|\d\s*(?:mm|cm|m|in|ft)\b", text, re.IGNORECASE):
        return None
    found = sections.read(text).section
    if found is None or found.published_kg_per_m is not None or found.form not in ("prismatic", "sheet"):
        return None
    marked = bare.sub(r'\1"', text)
    return marked if sections.read(marked).section is not None else None


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
    if len(material) > _LONGEST or len(text or "") > _LONGEST or _known(text):
        return None
    board = _BOARD.fullmatch(material)
    sized = _NAMED_SIZES.fullmatch(text) if board and text else None
    if board and sized and (_SIZES_ONLY.fullmatch(str(text)) or _says_no_shape(sized[1]) or _is_plate(sized[1])):
        name = (board["front"] + " " + board["behind"]).strip()
        if materials.lookup(name).match in ("exact", "alias") and len(re.split(r"[x×*]", sized[2])) == 2:
            return f"Panel {board['mm']} x {sized[2]}", name
    if materials.lookup(material).match in ("exact", "alias"):
        return None
    if not _CROSSED.search(material) or _CROSSED.search(text or ""):
        return None
    if _known(material):
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
    return _SIZES_ONLY.fullmatch(text) is not None, _says_no_shape(text), _from_material(text, material), _in_inches(text)


def _known(text: str | None) -> bool:
    return bool(text) and sections.read(str(text)).section is not None


def _says_no_shape(text: str | None) -> bool:
    """Whether a text names nothing that the section tables know."""
    if not text or len(text) > 80:
        return not text
    if _CROSSED.search(text):
        return False
    found = sections.read(text)
    return found.section is None and (found.reason in (_NO_SECTION, *_RING) or text.strip().isdecimal())
