"""Hollow sections and tubes: by the standard named or assumed, by listed size or by any size that can be. Rank 2."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

from takeoff.sections import catalogue, made, nearest, tolerances
from takeoff.sections.answers import LEAST_LENGTH_MM, Answer, Given, Refused, key_texts, length_left, one_chain
from takeoff.sections.bysize import inch_like
from takeoff.sections.parse import Parsed
from takeoff.sections.rolled import covering, look_up, table_rows, why_impossible
from takeoff.sections.section import Candidate, Section

#: Without a unit a smaller one is more likely told in inches (``tube 2x2x0.25``).
LEAST_ROUND_MM, LEAST_BOX_MM = 3.0, 9.0


def read_hollow(families: tuple[str, ...], p: Parsed, given: Given, *, listed_only: bool = True, also: tuple[str, ...] = ()) -> Answer:
    """SHS, RHS, CHS by the standard named, or by `hollow`; a general word (tube) may also be of any size."""
    chain = one_chain(p, families[0])
    numbers = list(chain.numbers)
    values = [t.mm for t in numbers]
    keys = list(key_texts(chain))
    wall = p.labels.pop("wall", None) or (p.labels.pop("thickness", None))
    outside = p.labels.pop("outer diameter", None) or p.labels.pop("diameter", None)
    bore = p.labels.pop("inner diameter", None)
    length = None
    if outside is not None and wall is None and bore is None and len(numbers) in (1, 2) and numbers[0].mm < outside.mm / 2:
        wall = numbers.pop(0)  # 60.3 OD x 3.2: the size behind a labelled diameter is the wall
    if outside is not None and numbers:
        length = length_left(numbers)  # the diameters are labelled: what is left can only be the length
        numbers, values, keys = [], [], []
    if outside is not None and not numbers:
        keys, values = [catalogue.canonical(f"{outside.mm:.4f}")], [outside.mm]
        families, also = ("CHS",), ()
    if bore is not None and len(values) == 1:
        thick = (values[0] - bore.mm) / 2
        if thick <= 0:
            raise Refused("the inner diameter is no less than the outer one", "impossible-geometry")
        keys.append(catalogue.canonical(f"{thick:.4f}"))
        values.append(thick)
        families, also = ("CHS",), ()
    elif bore is not None:
        raise Refused("an inner diameter beside more than one size", "ambiguous-section")
    if wall is not None:
        keys.append(catalogue.canonical(f"{wall.mm:.4f}"))
        values.append(wall.mm)
    if not values:
        sizes = [given.diameter] if families == ("CHS",) and given.diameter else [given.height or given.width, given.width or given.height]
        values = [s for s in [*sizes, given.thickness] if s is not None]
        keys = [catalogue.canonical(f"{v:.4f}") for v in values]
        if not values:
            raise Refused(
                f"{' or '.join(families)} names a family, not a size", "unknown-section", nearest.in_families(families[:1], "", ())
            )
    most = 2 if families == ("CHS",) else 3
    if len(values) == most + 1 or (len(values) == 3 and "SHS" in families and values[0] != values[1] and values[2] >= LEAST_LENGTH_MM):
        if values[-1] < LEAST_LENGTH_MM or values[-1] <= 2 * max(values[:-1]):
            raise Refused("one size too many for a hollow section", "impossible-geometry", nearest.in_families(families, "", values[:most]))
        length = values.pop()
        keys.pop()
    if len(values) > most:
        raise Refused("too many sizes for a hollow section", "impossible-geometry", nearest.in_families(families, "", values[:most]))
    near = nearest_hollow(families, values)
    if numbers and wall is None and bore is None:
        inch_like(chain, LEAST_ROUND_MM if len(values) == 2 else LEAST_BOX_MM, "hollow section")
    if len(values) < 2:
        raise Refused("the wall is missing", "impossible-geometry", near())
    why = why_impossible(families, values)
    if why:
        raise Refused(why, "impossible-geometry", near())
    if any(t.unit == "in" for t in numbers) and bore is None and outside is None and wall is None:
        in_inches = look_up(("HSS",), "", numbers[: len(values)], given.own)
        if in_inches and in_inches[0].inches:
            return Answer(in_inches[0].section, "alias", length)
    chosen = families
    if len(values) == 3:
        equal = keys[0] == keys[1]
        if families == ("SHS",) and not equal:
            raise Refused("a square hollow section cannot have two different sides", "impossible-geometry", near())
        chosen = ("SHS",) if equal else ("RHS",)
    elif families == ("RHS",):
        raise Refused("a rectangular hollow section has two sides and a wall: a size is missing", "impossible-geometry", near())
    found = _hollow_rows(chosen, tuple(keys), p, given)
    if found is not None:
        if also and len(values) == 2 and (other := _hollow_rows(also, tuple(keys), p, given)) is not None:
            return Answer(covering([found, other]), "ambiguous", length)
        return Answer(found, "exact", length)
    if not listed_only and chosen == ("CHS",) and len(keys) == 2:
        tubes = catalogue.find("TUBE", "", (keys[0], keys[1]))
        if tubes:
            section = tubes[0].section
            if also:
                square = _hollow_rows(also, tuple(keys), p, given) or made.tube((values[0], values[0]), values[1])
                return Answer(covering([section, square]), "ambiguous", length)
            return Answer(section, "exact", length)
    if listed_only and chosen == ("CHS",) and (tubes := catalogue.find("TUBE", "", tuple(keys))) and _standard(p) is None:
        # A size of the tube standard, called by the structural name.
        return Answer(replace(tubes[0].section, designation=f"CHS {'x'.join(keys)}", note="a tube size of EN 10220"), "exact", length)
    if listed_only:
        # A size that no table has may be a slip; whoever means it writes Tube, which is computed from its sizes.
        shown = "x".join(made.number(v) for v in (values if chosen == ("CHS",) else [values[0], values[-2], values[-1]]))
        meant = Candidate(f"Tube {'Ø' if chosen == ('CHS',) else ''}{shown}", 30.0)
        raise Refused(f"no {chosen[0]} of that size in the tables" + _standard_named(p), "unknown-section", (*near(), meant))
    outer = values[0] if len(values) == 2 and chosen == ("CHS",) else (values[0], values[-2])
    section = made.tube(outer, values[-1], note="not a listed size: computed from its sizes")
    if chosen == ("CHS",) and (nominal := _nominal_outside(keys[0], p)) is not None and numbers and not also:
        # pipe 100x6.3: 100 may be the nominal size, of 114.3 outside.
        return Answer(covering([section, made.tube(nominal, values[-1])]), "ambiguous", length)
    if also and len(values) == 2:
        section = covering([section, made.tube((values[0], values[0]), values[1])])
        return Answer(section, "ambiguous", length)
    return Answer(section, "alias", length)


def _nominal_outside(size: str, p: Parsed) -> float | None:
    """The outside diameter, mm, of the pipe whose DN is this bare number; None where no pipe is named, or none has it."""
    if not {"pipe", "round tube"} & set(p.kinds) or any(t.unit for c in p.chains for t in c.numbers):
        return None
    rows = catalogue.find("PIPE", "", (f"DN{size}",))
    return max((float(row.cells["h_mm"]) for row in rows), default=None)


def nearest_hollow(families: tuple[str, ...], values: list[float]) -> Callable[[], tuple[Candidate, ...]]:
    def near() -> tuple[Candidate, ...]:
        wanted = families
        if len(values) >= 2 and families[0] in ("SHS", "RHS"):
            wanted = ("SHS", "RHS") if values[0] == values[1] or families == ("SHS",) else ("RHS", "SHS")
        return nearest.in_families(wanted, "", values)

    return near


def _standard_named(p: Parsed) -> str:
    said = _standard(p)
    return f" of {said}" if said else ""


def _standard(p: Parsed) -> str | None:
    """The hollow section standard that the text names, by number or by hot and cold."""
    numbers = " ".join(p.standards)
    hot, cold = "10210" in numbers or "hot" in p.properties, "10219" in numbers or "cold" in p.properties
    if hot and cold:
        raise Refused("both hot finished and cold formed are named", "ambiguous-section")
    return "EN 10210-2" if hot or "seamless" in p.properties else "EN 10219-2" if cold else None


def _hollow_rows(families: tuple[str, ...], keys: tuple[str, ...], p: Parsed, given: Given) -> Section | None:
    rows = table_rows(families, "", keys, given.own)
    if not rows:
        return None
    said = _standard(p)
    by_standard = {row.standard: row.section for row in rows}
    numbers = " ".join(p.standards)
    if said is None and families == ("CHS",) and ("10216" in numbers or "10217" in numbers or "10220" in numbers):
        # A pressure tube of the size of a hollow section: its own standard limits the wall, not the mass.
        tube = rows[0].section
        factor, tolerance = catalogue.tube_rule(tube.dimensions_mm, welded="10217" in numbers)
        return replace(tube, factor=factor, tolerance=tolerance, standard=tolerance.rule.replace("en", "EN ").partition("-")[0])
    hot, cold = by_standard.get("EN 10210-2"), by_standard.get("EN 10219-2")
    if said is not None:
        section = by_standard.get(said)
        if section is not None and "seamless" in p.properties:
            factor, tolerance = tolerances.mass_factor("en10210-2-seamless")
            section = replace(section, factor=factor, tolerance=tolerance)
        return section
    if hot is None and cold is None:
        return rows[0].section
    first = (cold or hot) if given.hollow == "cold" else (hot or cold)
    if first is None:
        return None
    if given.hollow == "cold" and cold is not None:
        return cold
    # Hot finished is the heavier: light reaches down to cold formed, and a size listed only as cold formed may yet be
    # bought hot finished, so heavy reaches up to it.
    other = cold if first is hot else hot
    factor, note = first.factor, first.note
    if other is not None and other.published_kg_per_m and first.published_kg_per_m:
        ratio = other.published_kg_per_m / first.published_kg_per_m
    else:
        ratio = _other_corner(first)
        note = f"listed in {first.standard} only"
    factor = type(factor)(factor.light * min(1.0, ratio), 1.0, factor.heavy * max(1.0, ratio))
    return replace(first, factor=factor, hollow_standard_assumed=True, note=note)


def _other_corner(section: Section) -> float:
    """Area with the other standard's corner radii over this one's."""
    if section.shape != "box hollow" or section.area_mm2 is None:
        return 1.0
    t = section.dimensions_mm["tf"]
    hot, cold = 1.25, 3.0 if t <= 6 else 4.0 if t <= 10 else 5.0
    change = 0.8584 * (cold - hot) * t * t
    return (section.area_mm2 + (change if section.standard == "EN 10219-2" else -change)) / section.area_mm2
