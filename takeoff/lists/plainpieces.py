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
_BARE = re.compile(r"(?<![\w./])(\d+(?:\.\d+)?)(?![\w./\"'])")
#: a smallest size above this is in mm even in a list in feet
_THICKEST_IN = 4.0
#: texts longer than this name no section here
_LONGEST = 60
#: kinds of material that are not made into hollow things of these outside sizes
_SOLID_KINDS = ("stone", "concrete", "masonry")
#: what the sections answer for a text in which they know no word at all
_NO_SECTION = "names no section in the tables"


def settle(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Fill the section texts that the row's other columns tell."""
    _order_of_the_heading(reader, part)
    _kind_from_the_name(reader, part)
    _sections_in_the_material(reader, part)
    _sizes_in_columns(reader, part)
    _sizes_of_timber(reader, part)
    _bare_inches(reader, part)
    _pieces_by_sizes(reader, part)


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
            read[name, text] = joined if wanted else None
        found = read[name, text]
        if found is not None:
            texts[i] = found
            where.append(i)
    reader.say("note", "section-from-name", "the section cell holds sizes only: their kind is read from the name", where, "name")


def _sizes_in_columns(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A kind of section whose sizes stand in columns of their own: ``Pipe`` | OD 114.3 | wall 5; ``RHS`` | 120 | 60 | 4."""
    if "thickness" not in reader.table.columns or not {"diameter", "height"} & set(reader.table.columns):
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
    numbers = [float(n) for n in _BARE.findall(text)]
    if not numbers or min(numbers) > _THICKEST_IN or re.search(r"[/\"'½¼¾⅛⅜⅝⅞]|\d\s*(?:mm|cm|m|in|ft)\b", text, re.IGNORECASE):
        return None
    found = sections.read(text).section
    if found is None or found.published_kg_per_m is not None or found.form not in ("prismatic", "sheet"):
        return None
    marked = _BARE.sub(r'\1"', text)
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
    if board and text and _SIZES_ONLY.fullmatch(text):
        name = (board["front"] + " " + board["behind"]).strip()
        if materials.lookup(name).match in ("exact", "alias") and len(re.split(r"[x×*]", text)) == 2:
            return f"Panel {board['mm']} x {text}", name
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
    return found.section is None and (found.reason == _NO_SECTION or text.strip().isdecimal())
