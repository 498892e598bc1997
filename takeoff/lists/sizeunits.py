"""What the bare numbers of a section text are in, where its heading, its list or its neighbours tell: inches, cm, a gauge, an
order of sizes. The text is then written out with its unit, so that the sections read it as any other. Rank 3.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from takeoff import materials, sections
from takeoff.lists import rowwords
from takeoff.lists.columns import in_feet
from takeoff.lists.headings import size_order

if TYPE_CHECKING:
    from takeoff.lists.columns import ColumnReader

#: numbers, crosses, diameter signs and mm, and nothing else; one class of characters, so that no text makes it slow
SIZES_ONLY = re.compile(r"[Øø∅⌀]?\s?\d[\d.,/\"'\sx×*mØø∅⌀-]{0,58}", re.IGNORECASE)
CROSSED = re.compile(r"\d\s*(?:mm)?\s*[x×*]\s*\d|\d[/]\d+[/]\d", re.IGNORECASE)
_BARE = re.compile(r"(?<![\w./])(\d+(?:\.\d+)?)(?![\w./\"'])")
#: the same glued to the letters of a plate or a bar (``PL1X14``); sizes of timber (``2x6``) are nominal and left alone
_GLUED = re.compile(r"(?:(?<=^PL)|(?<=^FB)|(?<=^FL)|(?<=^RB)|(?<=^RD)|(?<=\d[xX]))(\d+(?:\.\d+)?)(?![\d./\"']|[A-WYZa-wyz])")
#: a smallest size above this is in mm even in a list in feet
_THICKEST_IN = 4.0
#: texts longer than this name no section here
LONGEST = 60
#: two sizes of timber and nothing else
_BARE_SIZES = re.compile(r"\d{1,4}(?:[.,]\d{1,2})?(?:\s?[x×*/]\s?\d{1,4}(?:[.,]\d{1,2})?){1,2}", re.IGNORECASE)
#: the largest size of timber in cm
_LARGEST_CM = 60.0
_INCH_SHEET = re.compile(
    r"(?:(?P<ga>\d{1,2})\s?(?:ga|gauge)\.?|(?P<t>0?\.\d{2,4}))\s*[x×]\s*(?P<a>\d{1,3}(?:\.\d+)?)\"?\s*[x×]\s*(?P<b>\d{1,3}(?:\.\d+)?)\"?"
    r"\s*(?:sheet|sht|plate|pl)?", re.IGNORECASE)
_ZINC = re.compile(r"galv|zinc|\bGI\b|DX5", re.IGNORECASE)


def _rewritten(texts: list[str | None], written_out: Callable[[str], str | None]) -> list[int]:
    """Put what `written_out` makes of each text in its place, each distinct text once; the rows where it made something."""
    made = {text: written_out(text) for text in dict.fromkeys(texts) if text and len(text) <= LONGEST}
    where = [i for i, text in enumerate(texts) if text and made.get(text) is not None]
    for i in where:
        texts[i] = made[texts[i] or ""]
    return where


def unit_of_the_heading(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Bare sizes below a heading with a unit (``Cross-section [cm]``) are in that unit; without it ``8x18`` would be inches."""
    columns = reader.table.columns
    column = columns.get("section") or columns.get("size")
    unit = column.heading.unit if column is not None and column.heading is not None else None
    if column is None or unit not in ("mm", "cm", "in"):
        return
    where = _rewritten(part["section_text"], lambda text: f"{text} {unit}" if _BARE_SIZES.fullmatch(text) and _two_numbers(text) else None)
    message = f"the sizes are in {unit}, as their heading says"
    reader.say("note", "section-note", message, where, "section" if "section" in columns else "size")


def _two_numbers(text: str) -> bool:
    return len(re.split(r"[x×*/]", text)) == 2


def timber_in_cm(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
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
    refused = any(sections.IN_CM in (sections.read(text, material_kind="wood").reason or "") for text in bare)
    if not bare or not refused or max(largest) > _LARGEST_CM:
        return
    where = sorted(i for rows in bare.values() for i in rows)
    for i in where:
        texts[i] = f"{texts[i]} cm"
        reader.members.assumed.setdefault(reader.start + i, set()).add("length")
    reader.say("assumed", "unit-assumed", "the sizes of the timber are too small for mm: taken in cm", where,
               "section" if "section" in reader.table.columns else None, right="the unit in the heading, such as Section (cm)")


def order_of_the_heading(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Under a heading such as ``t x b x L`` three bare sizes are a plate."""
    column = reader.table.columns.get("size")
    order = size_order(column.text) if column is not None else ()
    if "t" not in order:
        return
    texts: list[str | None] = part["section_text"]
    sizes = reader.texts("size")
    where = []
    for i, size in enumerate(sizes):
        if size and SIZES_ONLY.fullmatch(size) and len(re.split(r"[x×*]", size)) == len(order) and not known(texts[i]):
            texts[i] = f"PL {size}"
            where.append(i)
    reader.say("note", "section-note", f"the heading {column.text!r} makes it a plate" if column else "", where, "size")


def bare_inches(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """In a list in feet and inches the bare sizes of a made-to-size section are inches (``ROUND BAR 1 dia``)."""
    if not in_feet(reader.table):
        return
    where = _rewritten(part["section_text"], in_inches)
    reader.say("assumed", "unit-assumed", "the list is in feet and inches: the bare sizes of the section are taken in inches", where,
               "section" if "section" in reader.table.columns else "name", right='the unit in the text, such as RD 1"')
    for i in where:
        reader.members.assumed.setdefault(reader.start + i, set()).add("diameter")


def in_inches(text: str) -> str | None:
    """A made-to-size section's text with inch marks on its bare numbers; None where it says its unit, or inches would be absurd."""
    if len(text) > LONGEST:
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


def sheets_in_inches(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """``14GA x 48 x 96 sheet`` and ``.125 x 48 x 120`` are sheets in inches: gauges and thousandths are of those lists alone."""
    texts: list[str | None] = part["section_text"]
    where = []
    for i, text in enumerate(texts):
        found = _INCH_SHEET.fullmatch(text) if text and len(text) <= LONGEST else None
        if not found or known(text):
            continue
        gauge, thick, one, two = found.group("ga", "t", "a", "b")
        metal = _metal_of_gauge(part["material_text"][i] or "", part["finish"][i]) if gauge else ""
        joined = f"{metal}Sheet {gauge} ga {one} in x {two} in" if gauge else f'PL {thick}" x {one}" x {two}"'
        if known(joined):
            texts[i] = joined
            where.append(i)
    reader.say("assumed", "unit-assumed", "a gauge or thousandths: the sizes of the sheet are taken in inches", where,
               "section" if "section" in reader.table.columns else "name", right="the unit in the text")
    for i in where:
        reader.members.assumed.setdefault(reader.start + i, set()).add("length")


def gauges(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A gauge beside a width and a length is sheet; the gauge goes by the metal."""
    where, left = [], []
    for i, gauge in reader.gauges.items():
        text, material = part["section_text"][i], part["material_text"][i]
        flat = part["width_mm"][i] > 0 and (part["length_mm"][i] > 0 or part["height_mm"][i] > 0)
        if not flat or not material or (text and (CROSSED.search(text) or rowwords.NOT_FLAT.search(rowwords.label(text)))):
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


def _metal_of_gauge(material: str, finish: str | None) -> str:
    """The word that tells which gauge system a metal's sheet goes by; blank is uncoated steel."""
    found = materials.lookup(material, hint="metal").material if material else None
    words = (found.family if found is not None else "").replace("_", " ")
    if "stainless" in words:
        return "stainless "
    return "aluminium " if "alumin" in words else "galvanized " if _ZINC.search(f"{material} {finish or ''}") else ""


def known(text: str | None) -> bool:
    return bool(text) and sections.read(str(text)).section is not None
