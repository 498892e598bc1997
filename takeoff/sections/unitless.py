"""Sizes without a unit that are no likely millimetres: taken as such the piece would be a thousand times too light. Rank 2.

Bare numbers are mm. Where the piece that they make in mm is one that nobody makes, and the same numbers are usual in inches,
centimetres or metres, the text is refused and asks for its unit.
"""

from __future__ import annotations

from takeoff.sections import catalogue, goods
from takeoff.sections.answers import IN_CM
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.words import TIMBER_IN_CM

#: Beyond this nobody gives a section or a plate in inches.
MOST_INCHES = 240.0
#: A pipe or a box so small beside a wall of a plain fraction is one of inches (12x12x.5).
MOST_INCH_TUBE, INCH_WALLS = 24.0, frozenset((0.125, 0.25, 0.375, 0.5))
#: A block of stone or concrete whose sizes all stay below the first, or a thin one below the others, is told in cm or m.
LEAST_STONE_MM, LEAST_STONE_WIDTH_MM, LEAST_STONE_LENGTH_MM = 151.0, 61.0, 401.0
#: No block of another material is so small.
LEAST_BLOCK_MM = 10.0
#: No box made to size has so small a side beside a count.
LEAST_SIDE_MM = 15.0
#: Timber of two sizes below this that no size standard lists is told in cm.
LEAST_TIMBER_MM, LEAST_GLULAM_MM = 37.0, 60.0
#: A third size so small may be a thickness in mm, or a length in metres.
MOST_METRES = 13.0
#: A first size so small beside it is the thickness.
MOST_THICKNESS_MM = 40.0
#: Plates of US lists: plan sizes in whole feet or half feet, a thin thickness, or all sizes small.
FOOT, THIN_IN, SMALL_IN = 12.0, 3.0, 25.0
SHEETS_FT = frozenset(((4.0, 8.0), (4.0, 10.0), (5.0, 10.0), (4.0, 12.0)))

_STONY = frozenset(("stone", "concrete", "masonry", "ceramic"))
_SOLID = frozenset(("block", "plate", "sheet", "panel", "board", "column", "beam"))
_TUBES = frozenset(("tube", "pipe", "round tube", "square tube", "rectangular tube", "box"))
#: Words of thin timber, which is small in mm, in the nine languages.
_SLATS = frozenset(
    (
        "batten battens slat slats laths leiste leisten holzleiste holzleisten latte latten liteau liteaux tasseau tasseaux "
        "liston listones rastrel rastreles listello listelli lat panlat tengel lata laty listwa listwy ripa ripas sarrafo sarrafos lakt"
    ).split()
)


def why_other_unit(p: Parsed, families: list[str], kind: str | None, material: str | None) -> str:
    """Why the sizes are hardly mm; empty where they may be. `material` is its kind, `kind` the shape's word."""
    material = material or ("stone" if p.stone else "wood" if p.wood else "metal" if p.metal else None)
    for chain in p.chains:
        units = {t.unit for t in chain.numbers}
        if material in _STONY and units == {"", "ft"}:
            return "one size is in feet and others have no unit: write each unit"
        if (kind in ("plate", "sheet") or "PL" in families) and units == {"in"} and _is_sheet_of_feet(chain):
            return f"{'x'.join(t.raw for t in chain.numbers)} may be feet or inches: write each unit"
        if chain.numbers and not any(t.unit for t in chain.numbers):
            reason = _why(chain, p, families, kind, material)
            if reason:
                shown = "x".join(t.raw for t in chain.numbers)
                return f"{shown} in mm cannot be sure: {reason}; write the unit"
    return ""


def _why(chain: Chain, p: Parsed, families: list[str], kind: str | None, material: str | None) -> str:
    values = [t.value for t in chain.numbers]
    round_or_box = bool({"CHS", "SHS", "RHS"} & set(families)) or kind in _TUBES or chain.after_diameter
    thousandths = any(len(t.raw.partition(".")[2]) >= 3 and t.value < 1.5 for t in chain.numbers)
    if thousandths and max(values) <= MOST_INCHES:
        return "thousandths are usual in inches"
    if round_or_box and len(values) > 1:
        wall, outer = values[-1], values[:-1]
        if not families and _counted(chain):
            return "the last number may be a count"
        if wall in INCH_WALLS and all(v <= MOST_INCH_TUBE and (2 * v).is_integer() for v in outer):
            return "such a wall is usual in inches"
        if wall < 1 and any(len(t.raw.replace(",", ".").partition(".")[2]) == 2 for t in chain.numbers[:-1]) and max(outer) < 100:
            return IN_CM
    if material in _STONY and (kind in _SOLID or kind is None) and not families and len(values) == 3:
        return _stone(sorted(values))
    if kind == "block" and len(values) == 3 and max(values) < LEAST_BLOCK_MM:
        return "such sizes are usual in m"
    if material == "wood" and not families and kind in (None, "board", "beam", "column", "glulam") and len(values) in (2, 3):
        return _timber(values, p, LEAST_GLULAM_MM if kind == "glulam" else LEAST_TIMBER_MM)
    if "PL" in families or kind == "plate":
        return _plate(values)
    return ""


def _is_sheet_of_feet(chain: Chain) -> bool:
    """``plate 4x8x3/8``: a plate of 4 by 8 inches, or a whole sheet of 4 by 8 feet; with its thickness in front it is a plate."""
    values = [t.value for t in chain.numbers]
    return len(values) == 3 and values[0] != min(values) and tuple(sorted(values)[1:]) in SHEETS_FT


def _counted(chain: Chain) -> bool:
    """``Tube 50x5 x2``, ``Ø20 x2``: the last number stands apart, and may be a count."""
    last = chain.numbers[-1]
    if not chain.spaced or not chain.spaced[-1] or not last.value.is_integer() or last.value > MOST_METRES:
        return False
    return (last.glued and len(chain.numbers) == 2) or (
        len(chain.numbers) == 3 and not chain.spaced[0] and chain.numbers[1].value < LEAST_SIDE_MM
    )


def _stone(values: list[float]) -> str:
    _, middle, most = values
    if most < LEAST_BLOCK_MM:
        return "such sizes are usual in m"
    if most < LEAST_STONE_MM or (middle < LEAST_STONE_WIDTH_MM and most < LEAST_STONE_LENGTH_MM):
        return IN_CM
    return ""


def _timber(values: list[float], p: Parsed, least_mm: float) -> str:
    sizes = values[:2]
    if len(values) == 3 and values[2] < MOST_METRES and min(sizes) >= MOST_METRES:
        return "the last may be a length in m"
    named = bool(p.named & (_SLATS | TIMBER_IN_CM))
    if max(values) < least_mm and not named and not goods.is_timber_size(*sizes) and not _is_lumber(values):
        return IN_CM
    return ""


def _is_lumber(values: list[float]) -> bool:
    """Nominal inches of lumber are read by their own table."""
    names = tuple(catalogue.canonical(f"{v:.4f}") for v in values[:2])
    return bool(catalogue.find("LUMBER", "", names) or catalogue.find("LUMBER", "", names[::-1]))


def _plate(values: list[float]) -> str:
    if len(values) != 3:
        return ""
    least, middle, most = sorted(values)
    if values[2] == least < MOST_METRES and values[2] < values[0] <= MOST_THICKNESS_MM < values[1]:
        return "the last may be a length in m"
    if values[2] == least < MOST_METRES and values[1] < MOST_THICKNESS_MM < values[0] and middle == values[1]:
        return "the last may be a length in m"
    feet = least <= THIN_IN and middle % FOOT == 0 and most % FOOT == 0 and most <= MOST_INCHES
    if feet or most < SMALL_IN:
        return "such sizes are usual in inches"
    return ""
