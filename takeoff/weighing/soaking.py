"""What water adds to a member that the list calls soaked, in a column of its own. Rank 4.

Solid and glued wood: light at fibre saturation, nominal green, heavy with every pore full (Wood Handbook, chapter 4).
Boards, clay brick, foams and a few more by the planning figures of `materials/soaking.csv`. The bare mass stays the dry one.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING

from takeoff import materials
from takeoff.bounds import Spread
from takeoff.datafiles import data_folder, read_table
from takeoff.names import normal_name
from takeoff.provenance import Source
from takeoff.weighing.wood import WoodSpread

if TYPE_CHECKING:
    from takeoff.materials import Material

_SOAKED = re.compile(
    r"(?:water ?)?(?:soaked|saturated|logged)(?: (?:with|in) water)?|waterlogged|durchnasst|wassergesattigt|detrempe|imbibe d eau|"
    r"empapad[oa]|inzuppat[oa]|doorweekt|nasiaknie\w*|encharcad[oa]|genomblot"
)
FIBRE_SATURATION_PERCENT = 30.0
FULL_PERCENT = 200.0


@dataclass(frozen=True, slots=True)
class Soaking:
    """Density in kg/m³ that water adds, low / nominal / high, with the rule in words and its source."""

    added: Spread
    rule: str
    source: Source


def says_soaked(text: str) -> bool:
    """Whether a contents cell says that the member itself is soaked through."""
    return _SOAKED.fullmatch(normal_name(text)) is not None


def dry_spread(material: Material) -> WoodSpread:
    """The wood's spread without water, for a member whose water is added apart."""
    return WoodSpread(material.density, "at 12 % moisture; the water of the soaked wood is added apart", moisture_open=False)


def soaking(material: Material) -> Soaking | None:
    """What soaking adds to a material; None where no figure is known."""
    dry = material.density
    if dry.nominal is None:
        return None
    for row in _figures():
        if material.key == row["of"] if row["which"] == "key" else material.key.startswith(row["of"]):
            figures = tuple(float(row[word]) for word in ("low", "nominal", "high"))
            source = Source(row["title"], row["clause"], row["evidence"])
            if row["unit"] == "kg/m3":
                return Soaking(Spread(*figures), f"+{figures[1]:g} kg/m³ of water ({figures[0]:g} to {figures[2]:g})", source)
            shares = [percent / 100 for percent in figures]
            added = Spread(dry.low * shares[0], dry.nominal * shares[1], dry.high * shares[2])
            return Soaking(added, f"+{figures[1]:g} % of the dry mass ({figures[0]:g} to {figures[2]:g} %)", source)
    if not material.is_wood:
        return None
    damp = materials.wood_density(material, FIBRE_SATURATION_PERCENT).density
    full = materials.wood_density(material, FULL_PERCENT)
    green = materials.green_density(material)
    middle = green.density.nominal if green else None
    if middle is None:
        middle = materials.wood_density(material, 80.0).density.nominal or dry.nominal
    low = max(0.0, damp.low - dry.low)
    nominal = max(low, middle - dry.nominal)
    added = Spread(low, nominal, max(nominal, full.density.high - dry.high))
    return Soaking(added, "light at fibre saturation, nominal as green wood, heavy with every pore full of water",
                   Source(full.source.title, full.source.clause, "computed"))


@cache
def _figures() -> tuple[dict[str, str], ...]:
    rows = tuple(row for _, row in read_table(data_folder() / "soaking.csv"))
    for row in rows:
        Source(row["title"], row["clause"], row["evidence"])
    return rows
