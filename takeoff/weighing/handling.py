"""How a piece is to be handled, by its heavy mass: a mark for planning, never a promise. Rank 4."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING, Any

from takeoff.datafiles import data_folder, read_table
from takeoff.provenance import Source

if TYPE_CHECKING:
    import numpy as np


@dataclass(frozen=True, slots=True)
class Mark:
    """One row of handling.csv: what is said of a piece over this mass in kg."""

    over_kg: float
    text: str
    source: Source


@cache
def table() -> tuple[Mark, ...]:
    """The marks, lightest first: by hand, over the reference mass, lifting aid."""
    rows = [row for _, row in read_table(data_folder() / "handling.csv")]
    return tuple(Mark(float(r["over_kg"]), r["mark"], Source(r["title"], r["clause"], r["evidence"])) for r in rows)


def marks(heavy_kg: np.ndarray[Any, Any], hand_kg: float) -> np.ndarray[Any, Any]:
    """The mark of each piece by its heavy mass; None where the mass is not known. `hand_kg` is the job's reference mass."""
    import numpy as np

    hand, two, aid = table()
    texts = np.full(len(heavy_kg), None, dtype=object)
    with np.errstate(invalid="ignore"):
        texts[heavy_kg <= hand_kg] = hand.text
        texts[heavy_kg > hand_kg] = two.text
        texts[heavy_kg > aid.over_kg] = aid.text
    return texts
