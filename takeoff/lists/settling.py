"""Headings that do not say alone what their column is: told by the cells below them and by the columns beside them. Rank 3.

Each rule looks at the first rows of a list. What the job file tells of a column is never changed.
"""

from __future__ import annotations

import itertools
import math
import re
from collections.abc import Callable, Sequence
from typing import TYPE_CHECKING

from takeoff import sections
from takeoff.lists.counts import PIECE_WORDS, read_count
from takeoff.lists.headings import MEASURES, TOLD, Heading
from takeoff.lists.sheets import Cell
from takeoff.names import normal_name
from takeoff.quantities import EVERYDAY, number_readings, unit_of

if TYPE_CHECKING:
    from takeoff.lists.tables import Column

_COUNTS = frozenset(("quantity", "quantity_per", "quantity_total", "quantity_and_length"))
_SIZES = frozenset(MEASURES) | {"size"}
_SIZE_WORDS = re.compile(
    r"^(?:size|dim|abm|ma(?:sz|ss)|zuschn|cote|taille|medid|misur|maat|afmet|wymiar|matt|tamanho|storlek|"
    r"debit|decoup|corte|taglio|zaag|ciecie|kap)")
#: bare numbers from here on, in mm, are lengths rather than nominal sizes
_SMALLEST_SIZE_AS_LENGTH = 100.0
#: the name of a standard, which is no section: ``EN 10210``, ``DIN 1026-1``; ``ASTM A36`` is a material
_STANDARD = re.compile(r"(?:DIN|EN|ISO|BS|NF|UNI|PN|UNE|SS|SIS|NEN|JIS)(?:[ -]?(?:EN|ISO))*[ -]?\d{3,6}(?:[-:/]\d{1,4})*", re.IGNORECASE)
_CODE = re.compile(r"[A-Za-z]{0,4}[-. /]?\d{1,5}[A-Za-z]?(?:[-./]\d{1,4}[A-Za-z]?)?")
_LETTER = re.compile(r"[A-Za-z]{1,2}")
_UNIT_WORD = re.compile(rf"{PIECE_WORDS}|ml|rm|lfm|pa|lot|set|kpl", re.IGNORECASE)
#: sums, repeated headings and notes stand among a column's cells: so many of them must fit
_MOST = 0.75
_FEW = 3

#: a sheet or plate is no thicker, in mm
_THICKEST_SHEET = 150.0

Below = dict[int, list[Cell]]


def settle(columns: list[Column], below: Below) -> None:
    """Give each column that is open or misleading its field. `below`: column number -> its filled cells in the first rows."""
    _open_headings(columns, below)
    ours = [column for column in columns if column.heading is not None and column.heading.why != TOLD]
    _units(ours, below)
    _marks_among_counts(columns, ours, below)
    _sheet_thicknesses(columns, ours, below)
    _lower_case_widths(columns, ours)
    _names(columns, ours, below)
    _sections(ours, below)
    _lengths(columns, ours, below)
    _walls(columns, ours)


def _fields(columns: list[Column]) -> set[str]:
    return {column.heading.field for column in columns if column.heading}


def _become(column: Column, field: str, why: str, unit: str | None = None) -> None:
    column.heading = Heading(column.text, field, unit, why)


def _texts(column: Column, below: Below) -> list[str]:
    return [str(cell).strip() for cell in below.get(column.number, [])]


def _mostly(cells: Sequence[str], fits: Callable[[str], object]) -> bool:
    return len(cells) > 0 and sum(bool(fits(cell)) for cell in cells) >= _MOST * len(cells)


def _open_headings(columns: list[Column], below: Below) -> None:
    """Headings that people use for either of two fields take the first that is free and that their cells fit."""
    taken = {c.heading.field for c in columns if c.heading and not c.heading.otherwise}
    for column in columns:
        heading = column.heading
        if heading is None or not heading.otherwise:
            continue
        cells = below.get(column.number, [])
        order = (heading.field, *heading.otherwise)
        if set(order) == {"mark", "quantity"} and _counts_rather(cells) and not taken & {"quantity", "quantity_total"}:
            order = ("quantity", "mark")
        fitting = [name for name in order if name not in taken and _fits(name, cells)]
        field_name = fitting[0] if fitting else "not_used"
        _become(column, field_name, "a heading used for several things, told by its cells", heading.unit)
        taken.add(field_name)


def _counts_rather(cells: list[Cell]) -> bool:
    """Whether numbers are counts rather than marks: whole, and one stands twice or they do not rise; numbers that start again at 1
    with each group are marks."""
    numbers = [r[0].value for cell in cells if (r := number_readings(str(cell).strip()))]
    whole = len(numbers) * 2 > len(cells) and all(n == int(n) for n in numbers)
    if all(two in (1, one + 1) for one, two in itertools.pairwise(numbers)):
        return False
    return whole and (len(set(numbers)) < len(numbers) or numbers != sorted(numbers))


def _fits(field_name: str, cells: list[Cell]) -> bool:
    """Whether a column's cells can be this field: counts that are no mere numbering, numbers, or sections with digits in them."""
    texts = [str(cell).strip() for cell in cells]
    numbers = [r[0].value for text in texts if (r := number_readings(text))]
    if field_name in _COUNTS:
        counted = [c.pieces for cell in cells if not math.isnan((c := read_count(cell)).pieces)]
        numbers = numbers if len(numbers) > len(counted) else counted
        numbered = numbers == [numbers[0] + i for i in range(len(numbers))] and len(numbers) > 2 if numbers else False
        return bool(numbers) and len(numbers) * 2 >= len(texts) and not numbered
    if field_name in MEASURES:
        return not texts or sum(any(ch.isdigit() for ch in text) for text in texts) * 2 >= len(texts)
    if field_name == "section":
        return sum(any(ch.isdigit() for ch in text) for text in texts) * 2 > len(texts)
    if field_name == "name":
        return len(numbers) * 2 < max(len(texts), 1)
    return True


def _units(columns: list[Column], below: Below) -> None:
    """A quantity column that holds only units (``ud``, ``m2``) beside another quantity is the unit column."""
    counted = [c for c in columns if c.heading and c.heading.field == "quantity"]
    for column in counted if len(counted) > 1 else ():
        if _mostly(_texts(column, below), _is_unit):
            _become(column, "unit", "its cells are units")


def _marks_among_counts(columns: list[Column], ours: list[Column], below: Below) -> None:
    """Of two quantity columns, one that holds no counts but codes (``PZA.`` | A1, A2 beside ``CANT.``) is the marks."""
    counted = [c for c in ours if c.heading and c.heading.field == "quantity"]
    for column in counted if len(counted) > 1 else ():
        cells = _texts(column, below)
        if cells and not any(number_readings(cell) or not math.isnan(read_count(cell).pieces) for cell in cells):
            _become(column, "not_used" if "mark" in _fields(columns) else "mark", "its cells code the rows and count nothing")


def _sheet_thicknesses(columns: list[Column], ours: list[Column], below: Below) -> None:
    """Small numbers alone under a word of sections (``Chapa (mm)``), beside a width and a length, are the sheet's thickness."""
    fields = _fields(columns)
    if not {"width", "length"} <= fields or fields & {"thickness", "height", "diameter"}:
        return
    claims = [c for c in ours if c.heading and c.heading.field == "section"]
    numbers = [r[0].value if (r := number_readings(cell)) else math.inf for cell in _texts(claims[0], below)] if len(claims) == 1 else []
    if numbers and max(numbers) <= _THICKEST_SHEET:
        heading = claims[0].heading
        _become(claims[0], "thickness", "numbers alone beside a width and a length", heading.unit if heading else None)


def _lower_case_widths(columns: list[Column], ours: list[Column]) -> None:
    """``L`` and ``l`` side by side are length and width, as French lists write them."""
    if "width" in _fields(columns):
        return
    letters = {re.split(r"[\s(\[]", column.text.strip())[0].strip("."): column for column in ours
               if column.heading and column.heading.field == "length"}
    if {"L", "l"} <= set(letters):
        heading = letters["l"].heading
        _become(letters["l"], "width", "a small l beside a large one", heading.unit if heading else None)


def _is_unit(cell: str) -> bool:
    return unit_of(cell) is not None or _UNIT_WORD.fullmatch(cell.rstrip(".")) is not None


def _names(columns: list[Column], ours: list[Column], below: Below) -> None:
    """Of several columns of names, one that numbers or codes its rows is their mark; beside a mark it is left alone.

    One that names groups of rows is their assembly. A single column of codes is the marks of a list that has sizes.
    """
    names = [c for c in ours if c.heading and c.heading.field == "name"]
    for column in list(names):
        cells, fields = _texts(column, below), _fields(columns)
        alone = len(names) == 1
        if not cells or (alone and ("mark" in fields or len(cells) < _FEW or not fields & _SIZES)):
            continue
        codes = [cell for cell in cells if _CODE.fullmatch(cell) or _LETTER.fullmatch(cell)]
        # Marks differ from row to row; beside a mark, numbers may start again with each group.
        coded = len(codes) >= _MOST * len(cells) and ("mark" in fields or len(set(codes)) == len(codes))
        others = [_texts(other, below) for other in names if other is not column]
        if coded and 2 * sum(sections.read(cell).section is not None for cell in codes[:20]) < len(codes[:20]):
            _become(column, "not_used" if "mark" in fields else "mark", "its cells number or code the rows")
        elif not alone and "assembly" not in fields and _repeats(cells) and not any(map(_repeats, others)):
            _become(column, "assembly", "its cells name groups of rows")
        else:
            continue
        names.remove(column)


def _repeats(cells: list[str]) -> bool:
    """Whether texts are names of groups: fewer than the rows, and each in one block."""
    blocks = [cell for i, cell in enumerate(cells) if i == 0 or cell != cells[i - 1]]
    return len(cells) >= _FEW and len(set(cells)) * 3 <= len(cells) * 2 and len(set(blocks)) == len(blocks)


def _sections(columns: list[Column], below: Below) -> None:
    """Of two section columns, one of words (``Flat``) and one of sizes (``65x10``) give the section together."""
    claims = [c for c in columns if c.heading and c.heading.field == "section"]
    for column in list(claims):
        if _mostly(_texts(column, below), _STANDARD.fullmatch):
            _become(column, "not_used", "its cells name standards")
            claims.remove(column)
    if len(claims) != 2 or "size" in _fields(columns):
        return
    for sizes, words in (claims, claims[::-1]):
        numbered = sum(any(ch.isdigit() for ch in cell) for cell in _texts(words, below))
        if _SIZE_WORDS.match(normal_name(sizes.text)) and numbered * 2 < len(_texts(words, below)):
            _become(sizes, "size", "the sizes of the section beside it", sizes.heading.unit if sizes.heading else None)
            return


def _lengths(columns: list[Column], ours: list[Column], below: Below) -> None:
    """In a list without lengths, a column called size that holds bare numbers is the length; inches alone are one too."""
    if _fields(columns) & {"length", "total_length", "quantity_and_length"}:
        return
    for column in ours:
        heading = column.heading
        if heading is None or heading.field not in ("inches", "size", "section"):
            continue
        sized = _SIZE_WORDS.match(normal_name(column.text)) and _mostly(
            _texts(column, below), lambda cell: (r := number_readings(cell)) and r[0].value >= _SMALLEST_SIZE_AS_LENGTH)
        if heading.field == "inches" or sized:
            _become(column, "length", "the list has no other lengths, told by its cells", heading.unit)
            return


def _walls(columns: list[Column], ours: list[Column]) -> None:
    """``WT`` beside an outside diameter is the wall, no mass; ``D`` beside length and breadth is the thickness, no diameter."""
    fields = _fields(columns)
    for column in ours:
        heading, name = column.heading, normal_name(re.split(r"[(\[]", column.text)[0]).strip(" .")
        wall = name in ("wt", "w t") and "diameter" in fields
        depth = name == "d" and {"length", "width"} <= fields and not fields & {"height", "section", "thickness"}
        if heading is not None and (wall or depth):
            unit = heading.unit if heading.unit and EVERYDAY[heading.unit][0] == "length" else None
            _become(column, "thickness", "told by the columns beside it", unit)
            return
