"""Ditto marks: ``"``, ``-"-``, ``do.``, ``idem``, ``wie vor``. They stand for the text of the cell above. Rank 3.

A ditto mark is the list's own statement of a text; of a number it is refused, as numbers are never repeated unseen.
"""

from __future__ import annotations

import re

from takeoff.names import normal_name
from takeoff.quantities import tidy

#: two strokes, low or high, alone or between dashes, dots and blanks
_STROKES = re.compile(r"[-–—_.\s]*(?:(?:\"|,,|//|''|〃|„|“|”|»)[-–—_.\s]*){1,3}")
_WORDS = frozenset((
    # English, German, French, Dutch, Spanish, Italian, Polish, Portuguese, Swedish; accents off, as `normal_name` leaves them
    "do", "ditto", "as above", "same as above", "same", "dito", "dto", "wie vor", "wie oben", "w o", "w v", "idem", "id", "ci dessus",
    "comme ci dessus", "zie boven", "als boven", "igual", "igual que arriba", "como arriba", "como antes", "come sopra", "c s", "j w",
    "jw", "jak wyzej", "como acima", "igual acima", "som ovan", "d o", "lika", "samma",
))
_SEPARATORS = re.compile(r"[\s.:/_-]+")


def is_ditto(text: str) -> bool:
    """Whether a cell's text says nothing but "as above"."""
    if len(text) > 24:
        return False
    plain = tidy(text)
    if _STROKES.fullmatch(plain) or plain == "´´":
        return True
    return _SEPARATORS.sub(" ", normal_name(plain)).strip() in _WORDS


def fill(found: list[str | None]) -> tuple[list[int], list[int]]:
    """Put the text above in place of each ditto mark; the members filled, and those above whom nothing stands."""
    known: dict[str, bool] = {}
    filled, open_ones = [], []
    above: str | None = None
    for i, text in enumerate(found):
        if text is None:
            above = None
            continue
        if text not in known:
            known[text] = is_ditto(text)
        if not known[text]:
            above = text
        elif above is None:
            open_ones.append(i)
        else:
            found[i] = above
            filled.append(i)
    return filled, open_ones
