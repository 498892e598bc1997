"""What bevelled ends take away: cut angles in degrees from square, in the web's plane, the length over the long points. Rank 4.

A cut of angle a across a depth h shortens the line of the centroid by h/2 × tan a. Some lists count from the axis instead
(90 is square): heavy takes the smaller of the two readings, which for cuts up to 45° is the same.
"""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

from takeoff.findings import Finding
from takeoff.quantities import choose, number_readings, tidy
from takeoff.sections.pieces import cut_depths_mm
from takeoff.weighing.work import Work

if TYPE_CHECKING:
    from takeoff.weighing.work import Floats

FIELDS = ("cut_angle_1", "cut_angle_2")
STEEPEST_DEG = 85.0
_DEGREES = re.compile(r"\s*(?:°|º|deg\.?|degrees?|grad)\s*$", re.IGNORECASE)
_SQUARE = re.compile(r"|-|–|none|no|square|straight", re.IGNORECASE)


def read(text: str) -> float | None:
    """Degrees from square, 0 to 85; 90 counts as square. None where the text is no such angle."""
    plain = _DEGREES.sub("", tidy(text)[:40])
    if _SQUARE.fullmatch(plain):
        return 0.0
    found = choose(number_readings(plain), "point")
    angle = abs(found.value) if found else math.nan
    if angle == 90.0:
        return 0.0
    return angle if angle <= STEEPEST_DEG else None


def deduct(work: Work) -> None:
    """Take the bevels off the bare masses, and say of every cell that was not acted on why."""
    import numpy as np

    texts = {name: work.texts(name) for name in FIELDS}
    if not any(texts.values()):
        return
    full, least = (np.zeros(work.count) for _ in range(2))
    known = ~np.isnan(work.nominal)
    unread = np.zeros(work.count, dtype=bool)
    for name in FIELDS:
        for text, every in texts[name]:
            rows = every[known[every]]
            angle = read(text)
            if angle is None:
                unread[rows] = True
                message = "the cut angle is not understood: nothing is deducted, which errs on the heavy side"
                work.say(Finding("note", "cuts-not-deducted", message, read=text, right="degrees from square, such as 45"), rows, name)
                continue
            full[rows] += math.tan(math.radians(angle))
            least[rows] += math.tan(math.radians(min(angle, 90.0 - angle)))
    cut = np.flatnonzero((full > 0) & ~unread)
    if not len(cut):
        return
    half, near = _depths(work)
    with np.errstate(invalid="ignore", divide="ignore"):
        shares = half * full / work.sizes["length"], near * least / work.sizes["length"]
    fits = np.zeros(work.count, dtype=bool)
    fits[cut] = shares[0][cut] < 1
    message = "the end cuts are not deducted, which errs on the heavy side: their depth is not known, or they are longer than the piece"
    work.say(Finding("note", "cuts-not-deducted", message), cut[~fits[cut]], "cut_angle_1")
    work.cut_share = np.where(fits, shares[0], 0.0)
    work.light *= 1 - work.cut_share
    work.nominal *= 1 - work.cut_share
    work.heavy *= 1 - np.where(fits, shares[1], 0.0)


def _depths(work: Work) -> tuple[Floats, Floats]:
    """Half the depth the cut runs across, and the lesser distance from an edge to the centroid, mm; NaN where not known."""
    import numpy as np

    pairs = [cut_depths_mm(s) for s in work.sections]
    half, near = (work.of_section([p[k] for p in pairs]) for k in (0, 1))
    sheet = np.array([*(s.form == "sheet" or s.shape in ("flat", "board") for s in work.sections), False], dtype=bool)[work.section_of]
    by_row = np.where(sheet, work.sizes["width"] / 2, np.nan)
    return np.where(np.isnan(half), by_row, half), np.where(np.isnan(near), by_row, near)
