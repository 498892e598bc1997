"""The page's picks: how each hook load builds up, plan and elevation, legs, the crane's scale with its limit. Rank 9."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from takeoff.reports import drawings, picksheet, rounding
from takeoff.reports.drawings import Flat, Mark, View
from takeoff.reports.page.parts import Block, Cell, Column, Figure, Row, Table
from takeoff.reports.rounding import NO_BREAK, NO_FIGURE, Units
from takeoff.reports.wording import counted, listed, pick_word, shown

if TYPE_CHECKING:
    from takeoff.lifting.crane import CraneCheck
    from takeoff.lifting.pick import Pick
    from takeoff.pipeline import Result

#: picks shown in full, heaviest first; the table above names every one
MOST_PICKS = 60
MOST_OUTLINES = 400


def picks_table(result: Result, units: Units, picks: list[Pick]) -> Table:
    """Every pick in one line."""
    unit, force = rounding.mass_unit(units), "kN" if units == "si" else "kip"
    columns = [
        Column(pick_word(result).capitalize()),
        Column("Pieces", True),
        *(Column(f"{w} ({unit})", True) for w in ("Light", "Nominal", "Heavy")),
        Column(f"Hook load ({unit})", True),
        Column(f"Hook load ({force})", True),
        Column("Rows not weighed", True),
        Column("Verdict"),
    ]
    table = Table("picks-table", "Picks, heaviest first", columns)
    order = _heaviest(picks)
    for place, i in enumerate(order):
        pick = picks[i]
        light, nominal, heavy = rounding.bounds(pick.mass_kg, units, NO_BREAK)
        table.rows.append(
            Row(
                [
                    Cell(shown(pick.name), to=f"pick-{i}" if place < MOST_PICKS else None),
                    Cell(str(pick.pieces), pick.pieces),
                    Cell(light, pick.mass_kg.light),
                    Cell(nominal, pick.mass_kg.nominal),
                    Cell(heavy, pick.mass_kg.heavy),
                    Cell(rounding.mass(pick.hook_load_kg, "up", units, gap=NO_BREAK), pick.hook_load_kg, strong=True),
                    Cell(rounding.force_with_unit(pick.hook_load_kN, "up", units, NO_BREAK).rpartition(NO_BREAK)[0], pick.hook_load_kN),
                    Cell(str(pick.not_weighed), pick.not_weighed, strong=bool(pick.not_weighed)),
                    Cell(_word(pick)),
                ]
            )
        )
    if len(order) > MOST_PICKS:
        table.note = f"The {MOST_PICKS} heaviest are shown in full below; the build-up of every one is in the workbook and the JSON."
    return table


def _heaviest(picks: list[Pick]) -> list[int]:
    return sorted(range(len(picks)), key=lambda i: -picks[i].hook_load_kg)


def _word(pick: Pick) -> str:
    return "INCOMPLETE: heavier than shown" if pick.not_weighed else picksheet.verdict(pick)


def blocks(result: Result, units: Units, picks: list[Pick]) -> list[Block]:
    """Each pick in full, heaviest first."""
    return [_block(result, i, picks[i], units) for i in _heaviest(picks)[:MOST_PICKS]]


def _block(result: Result, number: int, pick: Pick, units: Units) -> Block:
    block = Block(f"pick-{number}", f"{shown(pick.name)}: {counted(pick.pieces, 'piece')}", picksheet.verdict(pick))
    if pick.not_weighed:
        block.words.append(
            f"INCOMPLETE: {counted(pick.not_weighed, 'row')} of this pick could not be weighed. Every figure is of the rest only."
        )
    moving = rounding.mass_with_unit(pick.hook_load_kg, "up", units, gap=NO_BREAK)
    at_rest = rounding.mass_with_unit(pick.static_hook_load_kg, "up", units, gap=NO_BREAK)
    force = rounding.force_with_unit(pick.hook_load_kN, "up", units, NO_BREAK)
    block.words.append(f"Hook load {moving} ({force}); at rest {at_rest}. Rounded up.")
    block.tables.append(_build_up(number, pick, units))
    block.figures += _views(result, pick, units)
    for check in pick.cranes:
        figure = _crane(check)
        if figure is not None:
            block.figures.append(figure)
    if pick.points:
        block.tables.append(_points(number, pick, units))
    if pick.upend:
        block.figures.append(_upending(pick, units))
    points = {f"Point {shown(p.name)}" for p in pick.points}
    block.facts = [(label, value) for label, value in picksheet.facts(pick, units) if label not in points]
    block.facts += [(f.name.capitalize() + f" {f.value:g}", f"{shown(f.why)}; {shown(f.source)}") for f in pick.factors]
    block.facts.append(("Not counted", listed(shown(w) for w in pick.not_counted)))
    for f in pick.findings:
        read = f" (read: {shown(f.read)})" if f.read else ""
        block.facts.append((f.level.capitalize(), shown(f.message) + read + (f". Right would be: {shown(f.right)}" if f.right else "")))
    return block


def _build_up(number: int, pick: Pick, units: Units) -> Table:
    """Line by line from the heavy mass to the hook, each as a step."""
    unit = rounding.mass_unit(units)
    decimals = rounding.decimals_for(rounding.in_mass_unit(pick.hook_load_kg, units))
    table = Table(
        f"build-{number}",
        f"How the hook load of {shown(pick.name)} builds up ({unit})",
        [Column("Line"), Column("Step"), Column(unit, True)],
        tools=False,
    )
    most, before = pick.hook_load_kg, 0.0
    lines = [(line.item, line.kg) for line in pick.build_up]
    for item, kg in lines:
        if item is lines[-1][0] and math.isclose(before, pick.static_hook_load_kg):
            table.rows.append(_step("= hook load at rest", 0.0, before, most, units, decimals, total=True))
        table.rows.append(_step(shown(item), before, before + kg, most, units, decimals))
        before += kg
    table.foot = _step("= hook load", 0.0, pick.hook_load_kg, most, units, decimals, total=True)
    return table


def _step(item: str, start: float, end: float, most: float, units: Units, decimals: int, *, total: bool = False) -> Row:
    figure = rounding.mass(end - start, "up", units, decimals, NO_BREAK)
    svg = drawings.step_bar(start, end, most, f"{item}: {figure} {rounding.mass_unit(units)}", total=total)
    return Row([Cell(item, strong=total), Cell(svg=svg), Cell(figure, strong=total)])


def _points(number: int, pick: Pick, units: Units) -> Table:
    columns = [
        Column("Point"),
        Column("Share at rest", True),
        Column("Governing share", True),
        Column("Case"),
        Column("Sling", True),
        Column("Angle from the vertical", True),
        Column("Tension", True),
        Column("Needs (working load limit)", True),
        Column("Enough would be"),
    ]
    table = Table(
        f"points-{number}",
        f"Lifting points of {shown(pick.name)}",
        columns,
        tools=False,
        note="Share at rest: of the nominal mass. Governing: of design mass × dynamic factor. The tag on the gear decides.",
    )
    for p in pick.points:
        angle = NO_FIGURE if p.angle_from_vertical_deg is None else f"{rounding.number(p.angle_from_vertical_deg, 1, 'up')}°"
        sizes = "; ".join(f"{shown(c.tackle)} {shown(c.size or 'none')} ({shown(c.method)})" for c in p.chosen)
        table.rows.append(
            Row(
                [
                    Cell(shown(p.name), strong=True),
                    Cell(_force(p.share_kN, units)),
                    Cell(_force(p.share_heavy_kN, units), strong=True),
                    Cell(shown(p.case)),
                    Cell(_length(p.sling_length_mm, units)),
                    Cell(angle),
                    Cell(_force(p.tension_kN, units), strong=True),
                    Cell(picksheet.tonnes(p.required_wll_t, "up", units)),
                    Cell(sizes or NO_FIGURE),
                ]
            )
        )
    return table


def _force(kN: float | None, units: Units) -> str:
    return rounding.force_with_unit(kN, "up", units, NO_BREAK)


def _length(mm: float | None, units: Units) -> str:
    return rounding.length_with_unit(None if mm is None else round(mm, 1), units, NO_BREAK)


# --- drawings --------------------------------------------------------------------------------------------------------


def _views(result: Result, pick: Pick, units: Units) -> list[Figure]:
    """Plan, and the two elevations, of a pick whose centre is known."""
    centre = pick.centre
    if centre is None:
        return []
    outlines = _outlines(result, pick)
    size = [_length(v, units) for v in centre.size]
    figures: list[Figure] = []
    hook, ends = picksheet.hook_of(pick), pick.spreader.ends_mm if pick.spreader else None
    for name, first, second in (("Plan, from above", 0, 1), ("Elevation along y", 0, 2), ("Elevation along x", 1, 2)):

        def flat(p: tuple[float, float, float], a: int = first, b: int = second) -> Flat:
            return p[a], p[b]

        view = View(
            flat(centre.low),
            flat(centre.high),
            flat(centre.centre),
            (flat(centre.box[0]), flat(centre.box[1])),
            tuple(drawings.hull([flat(c) for c in corners]) for corners in outlines),
            tuple((shown(p.name), flat(p.position_mm)) for p in pick.points),
            flat(hook) if hook else None,
            centre.at_least,
            tuple((flat(foot), flat(top)) for _, foot, top in picksheet.slings(pick)),
            (flat(ends[0]), flat(ends[1])) if ends and hook else None,
        )
        axes = ("xyz"[first], "xyz"[second])
        said = f"{name} of {shown(pick.name)}: {axes[0]} {size[first]}, {axes[1]} {size[second]}, with centre of gravity, points"
        legend = (
            ""
            if figures
            else (
                " Cross: centre of gravity, in the box where it may lie within the bounds"
                + (("; diamonds: lifting points; dashes: slings" if pick.points else "")
                + (f"; full line: the {shown(pick.spreader.kind)}." if pick.spreader and ends and hook else "."))
            )
        )
        caption = f"{name}, to scale: {axes[0]} to the right, {axes[1]} up.{legend}"
        figures.append(Figure(drawings.pick_view(view, axes, (size[first], size[second]), said), caption))
    return figures


def _outlines(result: Result, pick: Pick) -> list[tuple[tuple[float, float, float], ...]]:
    """Corners of the pick's pieces, where the list itself says which rows make it."""
    from takeoff.lifting.gravity import Place

    if pick.listed is None:
        return []
    names = result.members[pick_word(result)].tolist()
    rows = [i for i, name in enumerate(names) if name == pick.listed and isinstance(result.places.get(i), Place)]
    return [place.corners for i in rows[:MOST_OUTLINES] if isinstance(place := result.places[i], Place)]


def _crane(check: CraneCheck) -> Figure | None:
    """Utilisation on a scale with the planning limit and the rating marked, and the verdict in words."""
    if check.utilisation is None:
        return None
    at_rest = check.utilisation_static
    said = f"{picksheet.percent(check.utilisation)} moving"
    marks = [Mark(check.limit.value, f"planning limit {picksheet.percent(check.limit.value, 'down')} (at rest)"), Mark(1.0, "rating 100 %")]
    words = f"{shown(check.name)}: {shown(check.verdict)}. {picksheet.percent(at_rest)} of its capacity at rest, {said}."
    return Figure(drawings.scale(check.utilisation, marks, words, said, light=at_rest), words + " The short stroke is the load at rest.")


def _upending(pick: Pick, units: Units) -> Figure:
    factor, unit = (1.0, "kN") if units == "si" else (1 / rounding.KN_PER_KIP, "kip")
    series = [
        drawings.Series("head", tuple((s.angle_deg, s.carried_kN[0] * factor) for s in pick.upend)),
        drawings.Series("tail", tuple((s.angle_deg, s.carried_kN[1] * factor) for s in pick.upend)),
    ]
    title = f"Upending {shown(pick.name)}: load at head and tail from level to upright"
    words = " ".join(picksheet.upending_words(pick))
    return Figure(drawings.chart(series, ("degrees from level", unit), title), f"{title}. {words}")
