"""How wet wood may be, and what that makes of its density.

Nominal is the table's 12 % unless the job file gives a moisture. Where none is stated the heavy bound allows for wet
wood: 20 % for softwood and what is glued from it; the fresh (green) density for any hardwood, for any text that says green, fresh,
treated or sawn, and for any piece more than 100 mm thick, which does not dry in the yard.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff import materials
from takeoff.bounds import Spread
from takeoff.names import normal_name

if TYPE_CHECKING:
    from takeoff.materials import Material

#: softwood of the yard, graded or planed and kept under a roof, percent of the oven-dry mass
YARD_MOISTURE = 20.0
#: a piece thicker than this is taken as never having dried
THICK_MM = 100.0
_SOLID_LIKE = ("timber softwood", "timber hardwood")
_GLUED = ("glulam", "clt", "lvl")

#: words for wet wood as people write them, accents off
_WET = re.compile(
    r"\b(?:green|fresh|unseasoned|wet|treated|pt|tanalised|impregnated|sawn|rough|frisch|nass|sagerau|kesseldruck\w*|impragniert|"
    r"vert|frais|traite|scie|verde|fresco|tratad[oa]|aserrad[oa]|trattato|segato|vers|nat|geimpregneerd|gezaagd|swiez\w*|mokr\w*|"
    r"impregnowan\w*|verde|serrad[oa]|fars?k|impregnerad|sagat)\b"
)


@dataclass(frozen=True, slots=True)
class WoodSpread:
    """The density spread to weigh a wood by, and in words why; `moisture_open` where nobody said how wet it is."""

    spread: Spread
    why: str
    moisture_open: bool = True


def says_wet(*texts: str | None) -> bool:
    """Whether a row's texts call the wood green, fresh, treated or sawn."""
    return any(_WET.search(normal_name(text)) is not None for text in texts if text)


def wood_spread(material: Material, *, wet_text: bool, thick: bool, moisture_percent: float | None) -> WoodSpread | None:
    """The spread of a wood under these conditions; None where the table's own stands (boards, plywood and the like)."""
    if not material.is_wood or material.density.nominal is None:
        return None
    if moisture_percent is not None:
        found = materials.wood_density(material, moisture_percent)
        return WoodSpread(found.density, f"at {moisture_percent:g} % moisture, as the job file says", moisture_open=False)
    dry = material.density
    if material.family not in _SOLID_LIKE:
        if not material.key.startswith(_GLUED):
            return None
        wet = materials.wood_density(material, YARD_MOISTURE).density
        return WoodSpread(Spread(dry.low, dry.nominal, max(dry.high, wet.high)), f"moisture not stated: heavy at {YARD_MOISTURE:g} %")
    because = [
        word for word, holds in (("a hardwood", material.family == "timber hardwood"), ("its text says so", wet_text),
                                 (f"over {THICK_MM:g} mm thick", thick)) if holds
    ]
    green = materials.green_density(material) if because else None
    if green is not None:
        high = max(dry.high, green.density.high)
        return WoodSpread(Spread(dry.low, dry.nominal, high), f"moisture not stated: heavy as green wood ({', '.join(because)})")
    wet = materials.wood_density(material, YARD_MOISTURE).density
    return WoodSpread(Spread(dry.low, dry.nominal, max(dry.high, wet.high)), f"moisture not stated: heavy at {YARD_MOISTURE:g} %")
