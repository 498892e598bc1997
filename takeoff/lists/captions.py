"""What stands above a list and holds for all of it: the unit of lengths, the material, a board's thickness, a warning."""

from __future__ import annotations

import re
from dataclasses import dataclass

from takeoff import materials, sections
from takeoff.lists import rowwords
from takeoff.lists.sheets import Cell
from takeoff.quantities import EVERYDAY, unit_of

_UNITS_NOTE = re.compile(
    r"\b(?:units?|all (?:dimensions|sizes|lengths)|dimensions|sizes|maße|masse|alle maße|abmessungen|cotes|"
    r"dimensiones|medidas|misure|quote|maten|wymiary|matt|mått)\b"
    r"[^:=]{0,30}?(?:[:=]|\bin\b|\bare\b|\ben\b|\bw\b|\bi\b|\bem\b)\s*([A-Za-z]{1,12}|\")",
    re.IGNORECASE,
)
_UNITS_ALONE = re.compile(
    r"\s*(?:units?|einheit(?:en)?|unités?|unidad(?:es)?|unità|eenheid|jednostk[ai]|enhet(?:er)?)\s*[:=]?\s*", re.IGNORECASE)
_MATERIAL_NOTE = re.compile(
    r"\b(?:material|materials|steel grade|grade|werkstoff|stahlsorte|güte|matière|matériau|nuance|calidad|"
    r"materiale|acciaio|materiaal|kwaliteit|materiał|gatunek|qualidade|aço|stålsort)"
    r"\s*(?:[:=]|\bis\b|unless stated:?)\s*([^;,()]{2,60})",
    re.IGNORECASE,
)
_MATERIAL_ALONE = re.compile(
    r"(?:material|materials|werkstoff|grade|steel grade|matière|nuance|calidad|materiale|materiaal|materiał|gatunek|aço)\s*[:=]?",
    re.IGNORECASE,
)
_BRACKETED = re.compile(r"\(([^()]{2,60})\)")


@dataclass(slots=True)
class Caption:
    """What the title rows above a list say of all its rows: `unit` of bare lengths, `material` and `section` as typed."""

    unit: str | None = None
    material: str | None = None
    section: str | None = None


def read_caption(caption: Caption, cells: list[Cell]) -> None:
    """Take in one title row; a later row's word replaces an earlier one's."""
    texts = [cell.strip() for cell in cells if isinstance(cell, str) and cell.strip() and len(cell) <= 300]
    for position, text in enumerate(texts):
        caption.unit = _unit(text, texts[position + 1:]) or caption.unit
        told = _MATERIAL_NOTE.search(text)
        following = texts[position + 1] if position + 1 < len(texts) else ""
        candidates = [told.group(1)] if told else []
        if _MATERIAL_ALONE.fullmatch(text):
            candidates.append(following)
        candidates += _BRACKETED.findall(text)
        for candidate in candidates:
            _take(caption, candidate.strip(" .:"))


def _take(caption: Caption, text: str) -> None:
    """A candidate is a board if both its thickness and its material are surely known, else a material if the table knows it."""
    if len(text) < 2:
        return
    named = re.sub(r"\d+(?:[.,/]\d+)?\s*(?:mm|cm|in|\"|')?", " ", text).strip()
    if named and named != text and _surely(named):
        board = sections.read(text, material_kind=materials.lookup(named).material.kind)  # type: ignore[union-attr]
        if board.section is not None and board.section.form == "sheet" and board.section.thickness_mm:
            caption.section, caption.material = text, named
            return
    if _surely(text):
        caption.material = text


def _surely(text: str) -> bool:
    found = materials.lookup(text)
    return found.material is not None and found.match in ("exact", "alias")


def _unit(text: str, following: list[str]) -> str | None:
    """The unit of lengths that a title states: ``Units: mm unless stated``, ``All dimensions in mm``."""
    found = _UNITS_NOTE.search(text)
    unit = unit_of(found.group(1)) if found else None
    if unit is None and _UNITS_ALONE.fullmatch(text) and following:
        unit = unit_of(following[0].split()[0])
    return unit if unit and EVERYDAY[unit][0] == "length" else None


def warns(cells: list[Cell]) -> str | None:
    """The text of a row that warns of the whole list (provisional, do not cut), or None."""
    for cell in cells:
        if isinstance(cell, str) and len(cell) <= 300 and rowwords.WARNING.search(rowwords.label(cell)):
            return cell.strip()
    return None
