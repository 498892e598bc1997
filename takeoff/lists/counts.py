"""Quantities as people type them: ``4``, ``4 off``, ``4 Stk``, ``ca 13``, ``2.1 m``, ``4 (2 L + 2 R)``, ``4 x 504``."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

from takeoff.findings import Level
from takeoff.lists.sheets import Cell
from takeoff.names import normal_name
from takeoff.quantities import EVERYDAY, Measure, measure_readings, number_readings, tidy

MOST_PIECES = 1_000_000

PIECE_WORDS = (
    "x|×|off|no|nos|pcs|pc|pce|pces|piece|pieces|ea|each|plate|plates|bar|bars|stk|stck|st|stuck|stueck|szt|sztuk|sztuki|ud|uds|un|unid|"
    "unidades|pz|pza|pzas|pezzi|pezzo|barre|stuks|stuk|pieza|piezas|piece s|p|kus|antal|pecas|peca"
)
_COUNT = re.compile(rf"(\d{{1,7}})\s*(?:{PIECE_WORDS})?\.?", re.IGNORECASE)
#: a count in brackets, or behind its sign
_DRESSED = re.compile(r"\(\s*(\d{1,7})\s*\)|[x×]\s*(\d{1,7})", re.IGNORECASE)
_REMARKED = re.compile(rf"(\d{{1,7}})\s*(?:{PIECE_WORDS})?\.?\s*\(([^()]{{1,60}})\)", re.IGNORECASE)
#: words and signs before a figure that is only approximate
ABOUT = r"(?:~|≈|ca\.?|circa|about|approx\.?|approximately|etwa|rund|ungefähr|env\.?|environ|ok\.?|aprox\.?|cirka)"
_ABOUT = re.compile(rf"{ABOUT}\s*(\d{{1,7}})", re.IGNORECASE)
_PAIR = re.compile(r"(\d{1,6})\s*[x×*@]\s*([^x×*+@]{1,40})", re.IGNORECASE)
_STRAY = "`´'*★☆▲●•"


@dataclass(frozen=True, slots=True)
class Count:
    """A quantity as read. `pieces` is NaN where the cell is no count; `length_mm` where the cell gave a length as well.

    `level`, `kind`, `message`: what there is to say about it, if anything.
    """

    pieces: float
    length_mm: float | None = None
    level: Level | None = None
    kind: str = ""
    message: str = ""


NO_COUNT = Count(math.nan)


def read_count(cell: Cell) -> Count:
    """The quantity in a cell: a whole count of 1 and more, or a length of bar where the cell is one."""
    if isinstance(cell, bool) or cell is None:
        return NO_COUNT
    if isinstance(cell, (int, float)):
        return Count(float(cell)) if math.isfinite(cell) and cell == int(cell) and 1 <= cell <= MOST_PIECES else NO_COUNT
    if not isinstance(cell, str):
        return NO_COUNT
    text = tidy(cell)
    bare = text.strip(_STRAY + " ")
    if bare != text and bare and not text.endswith("'"):
        found = read_count(bare)
        if found.level is None and not math.isnan(found.pieces):
            return Count(found.pieces, None, "note", "stray-signs", "signs around the number were passed over")
        return found
    if not normal_name(text).isascii() or any(ch.isdigit() and not ch.isascii() for ch in cell):
        return NO_COUNT
    plain = _COUNT.fullmatch(text)
    if plain:
        return read_count(int(plain.group(1)))
    readings = [r.value for r in number_readings(text) if not math.isnan(read_count(r.value).pieces)]
    if len(readings) == 1 and len(number_readings(text)) == 1:
        return Count(readings[0])
    return _worded(text)


def _worded(text: str) -> Count:
    dressed = _DRESSED.fullmatch(text)
    if dressed:
        return read_count(int(dressed.group(1) or dressed.group(2)))
    remarked = _REMARKED.fullmatch(text)
    if remarked:
        pieces = read_count(int(remarked.group(1))).pieces
        return Count(pieces, None, "note", "quantity-remark", f"the first number is the quantity ({text})")
    about = _ABOUT.fullmatch(text)
    if about:
        pieces = read_count(int(about.group(1))).pieces
        return Count(pieces, None, "assumed", "approximate", f"an approximate quantity is taken as it stands ({text})")
    lengths = [m for m in measure_readings(text) if m.unit is not None and EVERYDAY[m.unit][0] == "length" and m.value > 0]
    if len(lengths) == 1 and not text.endswith(("'", '"')):
        message = f"the quantity is a length of bar, taken as one piece ({text})"
        return Count(1.0, lengths[0].value, "assumed", "length-in-quantity", message)
    return NO_COUNT


def read_count_and_length(cell: Cell, factor: float) -> Count:
    """A cell of quantity × length (``4 x 504``, ``5 x 100 + 10 x 115``); a bare length is times `factor` mm.

    Several pairs become their pieces with the mean length, which keeps the row's mass.
    """
    if not isinstance(cell, str):
        return NO_COUNT
    pieces, run = 0.0, 0.0
    parts = tidy(cell).split("+")
    for part in parts:
        pair = _PAIR.fullmatch(part.strip())
        if not pair:
            return NO_COUNT
        count = read_count(int(pair.group(1))).pieces
        lengths: list[Measure] = measure_readings(pair.group(2))
        if len(lengths) != 1 or (lengths[0].unit is not None and EVERYDAY[lengths[0].unit][0] != "length"):
            return NO_COUNT
        length = lengths[0].value if lengths[0].unit else lengths[0].value * factor
        pieces, run = pieces + count, run + count * length
    if math.isnan(pieces) or pieces > MOST_PIECES:
        return NO_COUNT
    if len(parts) == 1:
        return Count(pieces, run / pieces)
    message = "several lengths in one cell: taken at their mean length, which keeps the mass"
    return Count(pieces, run / pieces, "assumed", "pairs-in-one-cell", message)
