"""`takeoff section`: a card of one section, a comparison of several, the sizes of a family."""

from __future__ import annotations

import textwrap
from typing import TYPE_CHECKING, Annotated, Any, NamedTuple

import typer

from takeoff.cli import console
from takeoff.cli.options import JsonOption, MaterialOption, QuietOption, UnitsOption

if TYPE_CHECKING:
    from takeoff.bounds import Bounds
    from takeoff.sections import Section, SectionMatch

Names = Annotated[list[str] | None, typer.Argument(metavar="NAME", help="Sections, such as 'UB 457x191x67', or a family, such as UB.")]
#: What a section of a steel standard is made of where nobody says: the name the materials table gives to it. Kept here so
#: that a plain look-up need not load that table; a test holds the two together.
USUAL_STEEL = "Structural carbon steel (design value)"
CAUTION = (
    "Caution: light and heavy are what the product standard lets a mill deliver. Weld, bolts, coatings and contents are not "
    "in these figures. Lift by the heavy figure, and have the lift planned by a competent person."
)
MM_PER_IN, M_PER_FT = 25.4, 0.3048
#: kg/m³ of structural steel (EN 1991-1-1 and the section tables)
STEEL = 7850.0
KG_PER_M_PER_LB_PER_FT, KG_PER_M2_PER_LB_PER_FT2 = 0.45359237 / M_PER_FT, 0.45359237 / M_PER_FT**2
#: the longest words of a card's left column, and a blank
LEFT = 10


class Stuff(NamedTuple):
    """What a section is weighed in: name, kind, density kg/m³ low, nominal, high, and whether section tables rest on it."""

    name: str
    kind: str
    low: float
    nominal: float
    high: float
    is_carbon_steel: bool


def section(
    names: Names = None,
    material: MaterialOption = None,
    json: JsonOption = False,
    units: UnitsOption = None,
    quiet: QuietOption = False,
) -> None:
    """Look up sections: sizes, area, surface, kg/m with its bounds, and where the figures come from.

    Example: takeoff section "UB 457x191x67"

    Example: takeoff section "SHS 100x5" "RHS 100x50x5" --material 1.4401

    Example: takeoff section HEB
    """
    from takeoff import sections

    if not names:
        if json:
            families = sections.all_families().items()
            console.out_json([{"family": code, "name": what, "sizes": len(sections.rows(code))} for code, what in families])
        elif not quiet:
            console.out(_families())
        return
    chosen = _material(material)
    answers: list[tuple[SectionMatch, Stuff | None]] = []
    for name in names:
        for match in _asked(name, chosen):
            answers.append((match, chosen or _usual(match)))
    if json:
        console.out_json([_record(match, use) for match, use in answers])
    elif not quiet:
        us = units == "us"
        if len(names) == 1 and len(answers) == 1:
            console.out(_card(*answers[0], us) if answers[0][0].section is not None else _refusal(answers[0][0]))
        else:
            console.out(_comparison(answers, us))
    if any(match.section is None or match.match not in ("exact", "alias") for match, _ in answers):
        raise typer.Exit(1)


def _material(text: str | None) -> Stuff | None:
    """The material asked for. One that is not sure ends the look-up."""
    if text is None:
        return None
    from takeoff import materials

    found = materials.lookup(text)
    if found.match not in ("exact", "alias") or found.material is None:
        offered = ", ".join(c.name for c in found.candidates[:5])
        console.err(f"The material {text!r} is not sure: {found.reason or found.match}." + (f" Perhaps: {offered}." if offered else ""))
        raise typer.Exit(1)
    density = found.material.density
    if density.nominal is None:
        console.err(f"The table gives no nominal density for {found.material.name}.")
        raise typer.Exit(1)
    return Stuff(found.material.name, found.material.kind, density.low, density.nominal, density.high, found.material.is_carbon_steel)


def _usual(match: SectionMatch) -> Stuff | None:
    """Carbon steel for a section whose standard is itself a steel standard."""
    if match.section is None or not match.section.is_steel_standard:
        return None
    return Stuff(USUAL_STEEL, "metal", STEEL, STEEL, STEEL, True)


def _asked(name: str, material: Stuff | None) -> list[SectionMatch]:
    """The answer to one name, or every size of the family it names."""
    from takeoff import sections
    from takeoff.sections.words import FAMILY_WORDS

    word = name.strip()
    family, variant = FAMILY_WORDS.get(word.casefold(), (word.upper(), ""))
    if family in sections.FAMILIES:
        rows = [row for row in sections.rows(family) if not variant or row.key[1] == variant]
        seen = dict.fromkeys(row.designation for row in rows)
        return [sections.read(designation) for designation in seen]
    return [sections.read(name, material_kind=material.kind if material else None)]


def _masses(found: Section, material: Stuff | None) -> Bounds | None:
    """kg/m, light nominal heavy, in this material."""
    if found.form == "length mass":
        return found.kg_per_m()
    if material is None:
        return None
    nominal = material.nominal
    if material.is_carbon_steel:
        return found.kg_per_m(found.published_density_kg_m3 or nominal)
    plain = found.kg_per_m(nominal)
    if plain is None:
        return None
    return type(plain)(plain.light * material.low / nominal, plain.nominal, plain.heavy * material.high / nominal)


def _record(match: SectionMatch, material: Stuff | None) -> dict[str, Any]:
    """One query's object, SI."""
    found = match.section
    record: dict[str, Any] = {
        "query": match.query,
        "match": match.match,
        "designation": None,
        "family": None,
        "standard": None,
        "shape": None,
        "dimensions_mm": {},
        "area_mm2": None,
        "inner_area_mm2": None,
        "surface_m2_per_m": None,
        "centroid_mm": None,
        "kg_per_m": None,
        "kg_per_m2": None,
        "kg_each": None,
        "volume_m3": None,
        "published_kg_per_m": None,
        "material": None if material is None else material.name,
        "source": None,
        "candidates": [{"designation": c.designation, "score": c.score} for c in match.candidates],
    }
    if found is None:
        return {**record, "reason": match.reason}
    known = found.as_record()
    masses = _masses(found, material)
    density = None if material is None else material.nominal
    kg_each, kg_per_m2 = found.kg_each, found.kg_per_m2
    if density is not None and found.form == "solid" and found.volume_m3 is not None:
        kg_each = found.volume_m3 * density
    if density is not None and found.thickness_mm is not None:
        kg_per_m2 = found.thickness_mm * density / 1000
    for key in (
        "designation",
        "family",
        "standard",
        "shape",
        "dimensions_mm",
        "area_mm2",
        "inner_area_mm2",
        "surface_m2_per_m",
        "centroid_mm",
        "volume_m3",
        "published_kg_per_m",
        "source",
        "tolerance",
        "note",
    ):
        record[key] = known[key]
    record.update(kg_per_m=None if masses is None else masses.as_record(), kg_per_m2=kg_per_m2, kg_each=kg_each, notes=list(match.notes))
    return record


# -- text -------------------------------------------------------------------------------------------------------------
def _families() -> str:
    from takeoff import sections

    lines = [*textwrap.wrap("Section families (takeoff section CODE lists the sizes)", console.width()), ""]
    for code, what in sections.all_families().items():
        lines += textwrap.wrap(what, console.width(), initial_indent=f"  {code:<6} ", subsequent_indent=" " * 9)
    return "\n".join(lines)


def _wrapped(left: str, text: str) -> list[str]:
    """One line of a card, broken to the terminal's width under its own left edge."""
    wide = min(console.width(), 100)
    parts = textwrap.wrap(text, max(20, wide - LEFT - 2)) or [""]
    return [f"  {left:<{LEFT}}{parts[0]}", *(" " * (LEFT + 2) + part for part in parts[1:])]


def _figures(masses: Bounds, us: bool) -> str:
    from takeoff.reports import rounding

    scale = 1 / KG_PER_M_PER_LB_PER_FT if us else 1.0
    light, nominal, heavy = masses.light * scale, masses.nominal * scale, masses.heavy * scale
    places = rounding.decimals_for(heavy)
    return (
        f"light {rounding.number(light, places, 'down')}, nominal {rounding.number(nominal, places)}, "
        f"heavy {rounding.number(heavy, places, 'up')} {'lb/ft' if us else 'kg/m'}"
    )


def _size(value: float, us: bool) -> str:
    return f"{value / MM_PER_IN:.4g} in" if us else f"{value:.6g}"


def _sizes(found: Section, us: bool) -> str:
    parts = []
    for name, value in found.dimensions_mm.items():
        plain = name.endswith(("_deg", "_percent"))
        parts.append(f"{name.replace('_', ' ')} {f'{value:.6g}' if plain else _size(value, us)}")
    return ", ".join(parts) + ("" if us else " (mm)")


def _refusal(match: SectionMatch) -> str:
    said = f"{match.query}: {match.match}. {match.reason}." if match.reason else f"{match.query}: {match.match}."
    lines = textwrap.wrap(said, min(console.width(), 100))
    if match.candidates:
        lines += ["Perhaps:", *(f"  {c.designation}" for c in match.candidates)]
    return "\n".join(lines)


def _card(match: SectionMatch, material: Stuff | None, us: bool) -> str:
    """One section on a card."""
    from takeoff.reports import rounding
    from takeoff.sections import all_families

    found = match.section
    if found is None:
        return _refusal(match)
    what = all_families().get(found.family, found.shape)
    lines = [found.designation, f"{what}, {found.standard}" if found.standard else what, ""]
    if match.match == "similar":
        lines += _wrapped("match", "similar: read through hidden or look-alike characters")
    if match.match == "ambiguous":
        lines += _wrapped("readings", ", ".join(found.readings) + ": the first is nominal, light and heavy cover all")
    if found.dimensions_mm:
        lines += _wrapped("sizes", _sizes(found, us))
    masses = _masses(found, material)
    if masses is not None:
        of = material.name if material is not None and found.form != "length mass" else "as stated"
        lines += _wrapped("mass", f"{_figures(masses, us)} ({of})")
    if material is not None:
        if found.thickness_mm is not None:
            per_area = found.thickness_mm * material.nominal / 1000
            figure = f"{per_area / KG_PER_M2_PER_LB_PER_FT2:.4g} lb/ft²" if us else f"{per_area:.5g} kg/m²"
            lines += _wrapped("mass", f"{figure} ({material.name})")
        if found.volume_m3 is not None:
            figure = rounding.mass_with_unit(found.volume_m3 * material.nominal, "nearest", "us" if us else "si")
            lines += _wrapped("mass", f"{figure} each ({material.name})")
    elif found.form in ("prismatic", "sheet", "solid") and material is None:
        lines += _wrapped("mass", "name a material with --material")
    if found.tolerance is not None:
        lines += _wrapped("bounds", f"{found.tolerance.text}; {found.tolerance.title} ({found.tolerance.evidence})")
    lines += _geometry_lines(found, us)
    if found.published_kg_per_m is not None and found.form == "prismatic":
        lines += _wrapped("published", f"{found.published_kg_per_m:g} kg/m at {found.published_density_kg_m3:g} kg/m³")
    lines += _wrapped("source", str(found.source))
    if found.hollow_standard_assumed:
        lines += _wrapped("note", "no standard was named: nominal is hot finished where listed, light and heavy reach to the other")
    for note in filter(None, (found.note, *match.notes)):
        lines += _wrapped("note", note)
    picture = drawing(found)
    if picture:
        lines += ["", *picture]
    lines += ["", *textwrap.wrap(CAUTION, min(console.width(), 100))]
    return "\n".join(lines)


def _area(mm2: float, us: bool) -> str:
    return f"{mm2 / MM_PER_IN**2:.4g} in²" if us else f"{mm2:,.0f} mm²".replace(",", " ")


def _geometry_lines(found: Section, us: bool) -> list[str]:
    lines: list[str] = []
    if found.area_mm2 is not None:
        lines += _wrapped("area", _area(found.area_mm2, us))
    if found.design_area_mm2 is not None:
        lines += _wrapped("design", f"{_area(found.design_area_mm2, us)} by the published design wall; the mass rests on the nominal wall")
    if found.inner_area_mm2 is not None:
        lines += _wrapped("bore", _area(found.inner_area_mm2, us))
    if found.surface_m2_per_m is not None:
        lines += _wrapped("surface", f"{found.surface_m2_per_m / M_PER_FT:.4g} ft²/ft" if us else f"{found.surface_m2_per_m:.4g} m²/m")
    if found.volume_m3 is not None:
        lines += _wrapped("volume", f"{found.volume_m3 / M_PER_FT**3:.5g} ft³" if us else f"{found.volume_m3:.5g} m³")
    if found.centroid_mm is not None:
        at = ", ".join(_size(c, us) for c in found.centroid_mm) + ("" if us else " mm")
        lines += _wrapped("centroid", f"{at} from the left and the bottom")
    box = _box(found)
    if found.area_mm2 is not None and box is not None:
        share = 100 * found.area_mm2 / (box[0] * box[1])
        lines += _wrapped("share", f"{share:.1f} % of the solid bar that encloses it ({_size(box[0], us)} x {_size(box[1], us)})")
    return lines


def _box(found: Section) -> tuple[float, float] | None:
    """Depth and width of the box around a prismatic section."""
    rings = _rings(found)
    if not rings:
        return None
    xs, ys = [x for x, _ in rings[0]], [y for _, y in rings[0]]
    return max(ys) - min(ys), max(xs) - min(xs)


def _rings(found: Section) -> list[list[tuple[float, float]]]:
    from takeoff.sections import shapes

    if found.form != "prismatic" or found.area_mm2 is None:
        return []
    d = dict(found.dimensions_mm)
    if "flange_slope_percent" in d:
        d["slope"] = d.pop("flange_slope_percent") / 100
    for name, short in (("width", "b"), ("thickness", "tf"), ("diameter", "b")):
        if name in d:
            d[short] = d.pop(name)
    return shapes.rings(found.shape, d)


def drawing(found: Section, rows: int = 11) -> list[str]:
    """The cross-section filled with signs every terminal has; empty where there is nothing to draw."""
    rings = _rings(found)
    box = _box(found)
    if not rings or box is None:
        return []
    high, wide = box
    columns = max(1, round(wide / high * rows * 2))
    if columns > 34:
        rows = max(1, round(rows * 34 / columns))
        columns = 34
    lines = []
    for row in range(rows):
        line = ""
        for column in range(columns):
            at = [
                (wide * (column + (i + 0.5) / 3) / columns, high * (rows - row - (j + 0.5) / 3) / rows) for i in range(3) for j in range(3)
            ]
            line += "#" if any(_inside(rings, x, y) for x, y in at) else " "
        lines.append(("  " + line).rstrip())
    return lines


def _inside(rings: list[list[tuple[float, float]]], x: float, y: float) -> bool:
    """Even-odd rule over all rings."""
    odd = False
    for ring in rings:
        for (x0, y0), (x1, y1) in zip(ring, ring[1:] + ring[:1], strict=True):
            if (y0 > y) != (y1 > y) and x < (x1 - x0) * (y - y0) / (y1 - y0) + x0:
                odd = not odd
    return odd


def _comparison(answers: list[tuple[SectionMatch, Stuff | None]], us: bool) -> str:
    """Several sections, a line each; on a narrow terminal two."""
    from takeoff.reports import rounding

    unit = "lb/ft" if us else "kg/m"
    narrow = console.width() < 70
    lines = [] if narrow else [f"{'section':<24}{'light':>9}{'nominal':>9}{'heavy':>9} {unit:<6}{'area':>11}{'surface':>9}"]
    scale = 1 / KG_PER_M_PER_LB_PER_FT if us else 1.0
    for match, material in answers:
        found = match.section
        if found is None:
            offered = ", ".join(c.designation for c in match.candidates[:3])
            lines.append(f"{match.query}: {match.match}")
            lines += textwrap.wrap(
                match.reason + (f"; perhaps: {offered}" if offered else ""),
                min(console.width(), 100) - 2,
                initial_indent="  ",
                subsequent_indent="  ",
            )
            continue
        masses = _masses(found, material)
        if narrow:
            said = _figures(masses, us) if masses is not None else "no kg/m without a material"
            lines += [found.designation, *textwrap.wrap(said, console.width(), initial_indent="  ", subsequent_indent="  ")]
            continue
        if masses is None:
            three = [f"{rounding.NO_FIGURE:>9}"] * 3
        else:
            ways: tuple[tuple[float, rounding.Way], ...] = ((masses.light, "down"), (masses.nominal, "nearest"), (masses.heavy, "up"))
            three = [f"{rounding.number(value * scale, 2, way):>9}" for value, way in ways]
        area = rounding.NO_FIGURE if found.area_mm2 is None else _area(found.area_mm2, us)
        surface = rounding.NO_FIGURE
        if found.surface_m2_per_m is not None:
            surface = f"{found.surface_m2_per_m / M_PER_FT:.3g} ft" if us else f"{found.surface_m2_per_m:.3g} m"
        lines.append(f"{found.designation:<24}{''.join(three)} {'':<6}{area:>11}{surface:>9}")
    named = {material.name for match, material in answers if material is not None and match.section is not None}
    if named:
        lines += ["", *textwrap.wrap("in " + ", ".join(sorted(named)), console.width())]
    return "\n".join([*lines, "", *textwrap.wrap(CAUTION, min(console.width(), 100))])
