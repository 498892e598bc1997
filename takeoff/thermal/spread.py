"""How far a coefficient of expansion may be from the row's, and the stiffness that turns held movement into stress. Rank 5.

Both stand in one small table each (`alpha_spreads.csv`, `moduli.csv`), by family, some rows for one printed coefficient.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials.table import source_titles
from takeoff.provenance import Source

if TYPE_CHECKING:
    from takeoff.materials import Material

_PLANNING = "planning spread of the family's coefficients"


@dataclass(frozen=True, slots=True)
class AlphaSpread:
    """The low and high coefficient over the row's own, such as 0.925 and 1.042, and on what that rests."""

    low: float
    high: float
    source: Source


@dataclass(frozen=True, slots=True)
class Modulus:
    """Modulus of elasticity in N/mm², with its source."""

    value: float
    source: Source


def alpha_spread(material: Material) -> AlphaSpread:
    """The spread of the row's coefficient: of its printed figure where the table has one, else of its family.

    Raises DataError where the family has none.
    """
    known = _spreads()
    printed = "" if material.alpha_per_K is None else f"{material.alpha_per_K * 1e6:g}"
    found = known.get((material.family, printed)) or known.get((material.family, ""))
    if found is None:
        raise DataError("no spread of coefficients", file=data_folder() / "alpha_spreads.csv", read=material.family, right="a row")
    return found


def modulus(material: Material) -> Modulus | None:
    """The modulus of the material's family; None where one figure does not serve (concrete, wood, plastics)."""
    return _moduli().get(material.family)


@cache
def _spreads() -> dict[tuple[str, str], AlphaSpread]:
    found: dict[tuple[str, str], AlphaSpread] = {}
    path = data_folder() / "alpha_spreads.csv"
    for line, row in read_table(path):
        title = _PLANNING if row["evidence"] == "common practice" and not row["source"] else source_titles().get(row["source"], "")
        if not title:
            raise DataError(f"line {line}: a figure without a source does not load", file=path, read=row["source"])
        low, high = float(row["low_percent"]), float(row["high_percent"])
        if not (0 <= low < 100 and 0 <= high < 100):
            raise DataError(f"line {line}: no spread", file=path, read=f"{low}, {high}", right="percent from 0 to 100")
        spread = AlphaSpread(1 - low / 100, 1 + high / 100, Source(title, row["clause"], row["evidence"]))
        found[row["family"], row["alpha_1e-6_per_K"]] = spread
    return found


@cache
def _moduli() -> dict[str, Modulus]:
    found: dict[str, Modulus] = {}
    path = data_folder() / "moduli.csv"
    for line, row in read_table(path):
        title = source_titles().get(row["source"], "")
        if not title:
            raise DataError(f"line {line}: a figure without a source does not load", file=path, read=row["source"])
        found[row["family"]] = Modulus(float(row["modulus_N_per_mm2"]), Source(title, row["clause"], row["evidence"]))
    return found
