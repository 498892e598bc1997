"""A finish text, as people type it, to what it adds on each m². Each distinct text is read once. Rank 4.

Zinc from the bath lies on the whole surface, ends and bore of open hollow sections included: light is the standard's
minimum mean coating for the thinnest part of the piece, nominal and heavy are multiples of it for the thickest. A stated
zinc thickness is taken as that minimum. Paint and fire protection lie outside. Figures: `materials/finishes.csv`, words:
`materials/finish_words.csv`. A text that is not understood is a finding, not zero.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from functools import cache
from typing import TYPE_CHECKING, Any

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.names import NormalName, normal_name
from takeoff.provenance import EVIDENCE, Source
from takeoff.weighing import amounts

if TYPE_CHECKING:
    import numpy as np

    Floats = np.ndarray[Any, np.dtype[np.float64]]
    Flags = np.ndarray[Any, np.dtype[np.bool_]]

EN, A123 = "zinc EN ISO 1461", "zinc ASTM A123"
STATED = Source("the member list's own statement", "finish column", "read")
_PARTS = re.compile(r"\s*(?:\+|&|;|,(?!\d)|\s/\s|\b(?:and|then|plus|und|et|con|y|och|oraz)\b)\s*", re.IGNORECASE)
_A123 = re.compile(r"\bastm\b|\ba ?123\b", re.IGNORECASE)
_STANDARD = re.compile(
    r"\b(?:(?:bs|din|pn|nf|uni|ss)\s+)?(?:en\s+)?(?:en|iso|astm|bs|din)(?:\s*/?\s*(?:iso|en))?\s*a?\s*\d[\d\-:/]*(?:m\b)?|"
    r"\ba\s?123m?\b", re.IGNORECASE,
)
_FILLERS = re.compile(
    r"\b(?:to|acc|according|per|as|system|scheme|finish|coats?|coating of|total|dft|ndft|min|minimum|mean|avg|thickness|at|of|in|"
    r"\d+ coats?|ral \d{4}|c[1-5]x?|nach|selon|segun|secondo|volgens)\b"
)


@dataclass(frozen=True, slots=True)
class Band:
    """Minimum mean coating for steel of a thickness in mm."""

    over_mm: float
    upto_mm: float
    includes: str
    um: float
    g_m2: float


@dataclass(frozen=True, slots=True)
class Coat:
    """One coat: kg on a m², fixed or by the steel's thickness, and where it lies."""

    rule: str
    source: Source
    kg_m2: Bounds | None = None
    zinc: str | None = None
    bore_too: bool = False


@dataclass(frozen=True, slots=True)
class Finish:
    """A finish text read. `unknown` holds the parts that were not understood, each with what would be right."""

    coats: tuple[Coat, ...] = ()
    unknown: tuple[tuple[str, str], ...] = ()
    worked: tuple[str, ...] = field(default=())


@dataclass(frozen=True, slots=True)
class _Figures:
    bands: dict[str, list[Band]]
    values: dict[str, Bounds]
    sources: dict[str, Source]


@cache
def _figures() -> _Figures:
    found = _Figures({}, {}, {})
    for line, row in read_table(data_folder() / "finishes.csv"):
        coat = row["coat"]
        found.sources[coat] = Source(row["title"], row["clause"], row["evidence"])
        try:
            if row["g_m2"]:
                band = Band(float(row["over_mm"]), float(row["upto_mm"] or "inf"), row["includes"], float(row["um"]), float(row["g_m2"]))
                found.bands.setdefault(coat, []).append(band)
            else:
                found.values[coat] = Bounds(float(row["low"]), float(row["nominal"]), float(row["high"]))
        except ValueError as error:
            file = data_folder() / "finishes.csv"
            raise DataError(f"line {line}: {error}", file=file, right="numbers, low <= nominal <= high") from error
    return found


@cache
def words() -> dict[NormalName, str]:
    """Every known finish word, normalised, to its coat. Raises DataError where one word stands for two."""
    path = data_folder() / "finish_words.csv"
    known: dict[NormalName, str] = {}
    for line, row in read_table(path):
        if row["evidence"] not in EVIDENCE:
            raise DataError(f"line {line}: unknown evidence word", file=path, read=row["evidence"])
        if known.setdefault(normal_name(row["spelling"]), row["coat"]) != row["coat"]:
            raise DataError(f"line {line}: one word for two coats", file=path, read=row["spelling"])
    return known


def read(text: str, stated_percent: tuple[float, float]) -> Finish:
    """What a finish text names. `stated_percent`: minus and plus of a figure that is only stated (kg/m²)."""
    known = words()
    a123 = _A123.search(text) is not None
    bare = _STANDARD.sub(" ", text)
    if known.get(normal_name(bare)) == "none" or not normal_name(bare):
        return Finish()
    coats: list[Coat] = []
    unknown: list[tuple[str, str]] = []
    worked: list[str] = []
    # A name may hold a word that also parts names, so the whole is tried before its parts.
    whole = _coat(bare, a123, stated_percent)
    parts = [bare] if isinstance(whole, (Coat, str)) else [p for p in _PARTS.split(bare) if p and p.strip()]
    for part in parts:
        found = _coat(part, a123, stated_percent)
        if isinstance(found, Coat):
            coats.append(found)
        elif isinstance(found, str):
            worked += [part.strip()] if found == "worked" else []
        else:
            unknown.append((part.strip(), found[0]))
    return Finish(tuple(coats), tuple(unknown), tuple(worked))


def _coat(part: str, a123: bool, stated_percent: tuple[float, float]) -> Coat | str | tuple[str]:
    """A coat; ``none`` or ``worked`` where it adds nothing; else, in a tuple, what would be right."""
    cell = amounts.read(part)
    kind = words().get(cell.words) or words().get(amounts.without(cell.words, _FILLERS))
    figures = _figures()
    if kind is None or not cell.clear:
        return ("galvanized, zinc 85 um, paint 240 um, fire protection 3.5 kg/m2 or none",)
    if kind in ("none", "worked"):
        return kind
    thickness, areal = cell.amounts.get("length"), cell.amounts.get("mass per area")
    minus, plus = stated_percent
    if kind in ("galvanized", "zinc"):
        share, zinc = figures.values["zinc share"], figures.values["zinc density"].nominal
        multiples = f"nominal {share.nominal:g} ×, heavy {share.heavy:g} × the minimum mean coating"
        if thickness is not None or areal is not None:
            kg_m2 = areal if areal is not None else (thickness or 0.0) * zinc
            named = f"{kg_m2 * 1000:.4g} g/m²" if areal is not None else f"{(thickness or 0) * 1000:g} µm × {zinc:g} g/cm³"
            return Coat(f"zinc {named} taken as the minimum mean coating, whole surface; {multiples}", figures.sources["zinc density"],
                        kg_m2=share * kg_m2, bore_too=True)
        if kind == "zinc":
            return ("its thickness, such as zinc 85 um; or galvanized",)
        standard = A123 if a123 else EN
        return Coat(f"hot-dip zinc by {standard.removeprefix('zinc ')}, minimum mean coating by the steel's thickness, whole surface; "
                    f"{multiples}", figures.sources[standard], zinc=standard, bore_too=True)
    if areal is not None:
        spread = Bounds(areal * (1 - minus / 100), areal, areal * (1 + plus / 100))
        called = "paint" if kind.startswith("paint") else kind
        return Coat(f"{called} {areal:g} kg/m² as stated, outside; −{minus:g} % +{plus:g} %", STATED, kg_m2=spread)
    if kind == "fire protection":
        density = cell.amounts.get("density")
        if thickness is None or density is None:
            return ("its mass on a m², such as fire protection 3.5 kg/m2",)
        areal = thickness * density / 1000
        spread = Bounds(areal * (1 - minus / 100), areal, areal * (1 + plus / 100))
        return Coat(f"fire protection {thickness:g} mm × {density:g} kg/m³ as stated, outside; −{minus:g} % +{plus:g} %",
                    STATED, kg_m2=spread)
    if thickness is None:
        return ("its dry film thickness, such as paint 240 um",)
    density_g = figures.values[kind]
    share = figures.values["paint share"]
    return Coat(
        f"{kind}: {thickness * 1000:g} µm dry film × {density_g.nominal:g} g/cm³ ({density_g.light:g} to {density_g.heavy:g}), "
        f"outside; heavy {share.heavy:g} × the film", figures.sources[kind], kg_m2=density_g.times(share) * thickness,
    )


def on_a_mass() -> tuple[Bounds, Source]:
    """Percent of its mass that zinc adds to a piece whose surface is not known."""
    figures = _figures()
    return figures.values["zinc on a piece known by its mass"], figures.sources["zinc on a piece known by its mass"]


def zinc_kg_m2(standard: str, thickness_mm: Floats, *, castings: Flags | None = None, tubes: Flags | None = None) -> Floats:
    """The minimum mean coating in kg/m² for each thickness; flags mark castings (EN ISO 1461) and tubes (ASTM A123)."""
    import numpy as np

    found = _by_thickness(standard, thickness_mm)
    special, flags = (f"{standard} castings", castings) if standard == EN else (f"{standard} tube", tubes)
    if flags is not None and flags.any():
        found = np.where(flags, _by_thickness(special, thickness_mm), found)
    return found


def _by_thickness(coat: str, thickness_mm: Floats) -> Floats:
    import numpy as np

    found = np.full(len(thickness_mm), np.nan)
    for band in _figures().bands[coat]:
        above = thickness_mm >= band.over_mm if band.includes in ("lower", "both") else thickness_mm > band.over_mm
        below = thickness_mm < band.upto_mm if band.includes == "lower" else thickness_mm <= band.upto_mm
        found[above & below] = band.g_m2 / 1000
    return found


def zinc_share() -> Bounds:
    """Light, nominal and heavy as multiples of the minimum mean coating."""
    return _figures().values["zinc share"]
