"""A material as the table gives it: every figure with its bounds, its condition, its source and its evidence.

Here a row of a CSV becomes a `Material`, or is refused: our rows and a user's own pass the same checks. Rank 2.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from takeoff.bounds import Spread
from takeoff.errors import DataError
from takeoff.provenance import Source

#: The columns of a material table, ours and a user's own.
COLUMNS = (
    "key", "name", "family", "designations", "aliases",
    "density_low_kg_m3", "density_kg_m3", "density_high_kg_m3", "density_condition",
    "density_source", "density_clause", "density_evidence",
    "alpha_1e-6_per_K", "alpha_low_C", "alpha_high_C", "alpha_direction",
    "alpha_source", "alpha_clause", "alpha_evidence", "law", "melting_C", "note",
)  # fmt: skip

#: What a user's own row cannot do without.
REQUIRED = ("key", "name", "family", "density_kg_m3", "density_source", "density_evidence")

#: Densities outside this range are a slip of unit, not a material: aerogels to osmium, kg/m³.
DENSITY_LIMITS = (1.0, 23_000.0)


@dataclass(frozen=True, slots=True)
class FamilySpread:
    """What is true of a whole family: its kind, and the usual distance of the bounds from nominal, percent."""

    family: str
    kind: str
    low_percent: float
    high_percent: float


@dataclass(frozen=True, slots=True)
class Material:
    """One row of the table. Densities kg/m³, coefficient per K, temperatures °C.

    `density.nominal` is None where the texts give no more than a limit: such a material must be given a density.
    `filled` says which density bounds no text gives, and how they were filled. `alpha_interval_C` is None where the
    source states no interval. `own` marks a row of the user's own table, `overrides` one that takes the place of ours.
    """

    key: str
    name: str
    family: str
    kind: str
    designations: tuple[str, ...]
    aliases: tuple[str, ...]
    density: Spread
    density_condition: str
    density_source: Source
    alpha_per_K: float | None
    alpha_interval_C: tuple[float, float] | None
    alpha_direction: str
    alpha_source: Source | None
    law: str
    melting_C: float | None
    note: str
    filled: tuple[str, ...] = ()
    own: bool = False
    overrides: bool = False

    @property
    def is_carbon_steel(self) -> bool:
        """Whether masses that standards tabulate for steel (at 7850 kg/m³) apply as they stand."""
        return self.family == "carbon steel" and not self.own and self.density.nominal == 7850.0

    @property
    def is_wood(self) -> bool:
        """Whether moisture decides its density."""
        return self.kind == "wood"

    @property
    def density_bounds_filled(self) -> bool:
        """Whether a density bound comes from the family's spread or from symmetry, not from a text."""
        return bool(self.filled)


def split_names(cell: str) -> tuple[str, ...]:
    """The names of a cell, parted by semicolons."""
    return tuple(name for part in cell.split(";") if (name := part.strip()))


def material_from_row(
    row: dict[str, str], *, file: Path, line: int, titles: dict[str, str], families: dict[str, FamilySpread],
    own: bool = False, overrides: bool = False,
) -> Material:  # fmt: skip
    """A checked material from one CSV row.

    `titles` maps source ids to titles (a user's own table may also state a title outright). Raises DataError naming
    file, line and column where a figure is missing, no number, out of order, or without a source.
    """

    def fail(column: str, what: str, right: str) -> DataError:
        return DataError(f"line {line}, column {column}: {what}", file=file, read=row.get(column, "")[:80], right=right)

    def number(column: str) -> float | None:
        text = row.get(column, "")
        if not text:
            return None
        try:
            value = float(text)
        except ValueError:
            raise fail(column, "this is no number", "a plain number with a decimal point, without a unit") from None
        if not math.isfinite(value):
            raise fail(column, "this is no finite number", "a plain number")
        return value

    def source(kind: str) -> Source:
        stated = row.get(f"{kind}_source", "")
        if not stated:
            raise fail(f"{kind}_source", "a figure without a source does not load", "the title or id of its source")
        title = titles.get(stated) or (stated if own else "")
        if not title:
            raise fail(f"{kind}_source", "no such source", "an id that stands in sources.csv")
        try:
            return Source(title, row.get(f"{kind}_clause", ""), row.get(f"{kind}_evidence", ""))
        except DataError as error:
            raise fail(f"{kind}_evidence", error.what, error.right or "") from error

    for column in ("key", "name"):
        if not row.get(column):
            raise fail(column, "this is blank", "a short name that no other row has")
    family = families.get(row.get("family", ""))
    if family is None:
        raise fail("family", "no such family", "one of " + ", ".join(sorted(families)))
    density, filled = _density(number, fail, family)
    alpha = number("alpha_1e-6_per_K")
    if alpha is not None and not -20 <= alpha <= 500:
        raise fail("alpha_1e-6_per_K", "no solid grows like that", "millionths per K, such as 12 for steel")
    low, high = number("alpha_low_C"), number("alpha_high_C")
    if (low is None) != (high is None) or (low is not None and high is not None and not -273.15 <= low <= high):
        raise fail("alpha_low_C", "half an interval, or one out of order", "both ends, the lower first, or neither")
    return Material(
        key=row["key"],
        name=row["name"],
        family=family.family,
        kind=family.kind,
        designations=split_names(row.get("designations", "")),
        aliases=split_names(row.get("aliases", "")),
        density=density,
        density_condition=row.get("density_condition", ""),
        density_source=source("density"),
        alpha_per_K=None if alpha is None else alpha * 1e-6,
        alpha_interval_C=None if low is None or high is None else (low, high),
        alpha_direction="" if alpha is None else row.get("alpha_direction", "") or "isotropic",
        alpha_source=None if alpha is None else source("alpha"),
        law="" if alpha is None else row.get("law", "") or "constant",
        melting_C=number("melting_C"),
        note=row.get("note", ""),
        filled=filled,
        own=own,
        overrides=overrides,
    )


def _density(
    number: Callable[[str], float | None], fail: Callable[[str, str, str], DataError], family: FamilySpread
) -> tuple[Spread, tuple[str, ...]]:
    """The three densities, blank bounds filled from symmetry (wood) or the family's spread."""
    low, nominal, high = (number(f"density_{part}kg_m3") for part in ("low_", "", "high_"))
    for part, value in (("low_", low), ("", nominal), ("high_", high)):
        if value is not None and not DENSITY_LIMITS[0] <= value <= DENSITY_LIMITS[1]:
            raise fail(f"density_{part}kg_m3", "no material has this density", "kg/m³, such as 7850 for steel")
    filled: list[str] = []
    if nominal is None and (low is None or high is None):
        raise fail("density_kg_m3", "there is neither a density nor both its bounds", "a density in kg/m³")
    if high is None and nominal is not None:
        if low is not None and family.kind == "wood":
            high = 2 * nominal - low
            filled.append("high: mean + (mean - characteristic value)")
        else:
            high = nominal * (1 + family.high_percent / 100)
            filled.append(f"high: spread of the family, +{family.high_percent:g} % (common practice)")
    if low is None and nominal is not None:
        low = nominal * (1 - family.low_percent / 100)
        filled.append(f"low: spread of the family, -{family.low_percent:g} % (common practice)")
    assert low is not None
    assert high is not None
    if not low <= (high if nominal is None else nominal) <= high:
        raise fail("density_kg_m3", "low, nominal and high are out of order", "low <= nominal <= high")
    return Spread(low, nominal, high), tuple(filled)
