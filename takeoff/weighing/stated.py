"""The list's own masses: what a row states for one piece, and where that and ours disagree."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    import numpy as np
    import pandas as pd

    Floats = np.ndarray[Any, np.dtype[np.float64]]

#: a stated figure -> how one piece's mass follows; in the order they are tried
RULES = {
    "unit_mass": "stated mass each", "mass_per_length": "stated kg/m × length", "mass_per_area": "stated kg/m² × area",
    "total_mass": "stated total mass / quantity",
}
HEADINGS = {
    "unit_mass": "unit mass column", "mass_per_length": "mass per length column", "mass_per_area": "mass per area column",
    "total_mass": "total mass column",
}
#: stated and computed differ when all of these are passed, on the row's total
DIFFERS_SHARE, DIFFERS_KG = 0.02, 0.5


@dataclass(slots=True)
class Claims:
    """What the rows state for one piece, in kg (NaN where nothing), and by which field."""

    each_kg: Floats
    field: np.ndarray[Any, Any]


def claims(frame: pd.DataFrame, sizes: dict[str, Floats]) -> Claims:
    """The mass of one piece as stated: each, else by length, else by area, else a share of the row's total.

    An area is the row's own (m², each), else length × width.
    """
    import numpy as np

    area = frame["stated_area_m2"].to_numpy(dtype=float)
    area = np.where(np.isnan(area), sizes["length"] * sizes["width"] * 1e-6, area)
    found = {
        "unit_mass": frame["stated_each_kg"].to_numpy(dtype=float),
        "mass_per_length": frame["stated_kg_per_m"].to_numpy(dtype=float) * sizes["length"] / 1000.0,
        "mass_per_area": frame["stated_kg_per_m2"].to_numpy(dtype=float) * area,
        "total_mass": frame["stated_total_kg"].to_numpy(dtype=float) / frame["quantity"].to_numpy(dtype=float),
    }
    each = np.full(len(frame), np.nan)
    field = np.full(len(frame), None, dtype=object)
    for name, values in found.items():
        take = np.isnan(each) & (values > 0) & np.isfinite(values)
        each[take] = values[take]
        field[take] = name
    return Claims(each, field)


def differs(ours_kg: Floats, stated_kg: Floats, quantity: Floats) -> np.ndarray[Any, Any]:
    """Rows whose stated mass each is apart from ours: over 2 % and over 0.5 kg on the row's total."""
    import numpy as np

    gap = np.abs(stated_kg - ours_kg)
    with np.errstate(invalid="ignore"):
        return (gap > DIFFERS_SHARE * ours_kg) & (gap * quantity > DIFFERS_KG)
