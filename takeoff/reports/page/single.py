"""The page of one `takeoff movement`: the answer, length and gap over temperature as charts, the tables behind them. Rank 9."""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.reports import drawings, rounding
from takeoff.reports.drawings import Mark, Series
from takeoff.reports.page.movements import degree_axis, warmth
from takeoff.reports.page.parts import Cell, Column, Figure, Row, Table
from takeoff.reports.page.render import render
from takeoff.reports.thermal import (
    bounds_text,
    coefficient_text,
    degrees,
    direction_texts,
    gap_limits,
    law_text,
    mean_text,
    movement_text,
    movement_title,
    setting_texts,
    size,
    unit,
    with_unit,
)
from takeoff.reports.wording import shown
from takeoff.thermal import CAUTIONS

if TYPE_CHECKING:
    from takeoff.reports.rounding import Units
    from takeoff.thermal.movement import Movement


def movement_page(found: Movement, units: Units) -> str:
    """The page as HTML text: lengths in mm or inches, temperatures in °C or °F."""
    return render("single.html", {
        "title": movement_title(found, units),
        "kind": "movement",
        "facts": _facts(found, units),
        "findings": [(f.level.capitalize(), shown(f.message), shown(f.read or ""), shown(f.right or "")) for f in found.findings],
        "figures": [figure for figure in (_changes(found, units), _gaps(found, units)) if figure is not None],
        "lengths": _lengths(found, units),
        "gaps": _gap_table(found, units),
        "sources": _sources(found, units),
        "cautions": list(CAUTIONS),
    })  # fmt: skip


def _facts(found: Movement, units: Units) -> list[tuple[str, str]]:
    facts = [("Movement", movement_text(found, units))]
    if found.mean_alpha_per_K is not None:
        facts.append(("Mean coefficient", mean_text(found, units)))
    facts += direction_texts(found, units)
    beside = found.against
    if beside is not None and beside.difference_mm is not None:
        facts.append(("Against", f"{shown(beside.material.name)} moves {with_unit(beside.movement_mm, units, signed=True)}"))
        facts.append(("Difference", with_unit(beside.difference_mm, units, signed=True)))
    return [*facts, *(("At setting", text) for text in setting_texts(found, units))]


def _scaled(mm: float, units: Units) -> float:
    return mm if units == "si" else mm / rounding.MM_PER_IN


def _changes(found: Movement, units: Units) -> Figure | None:
    """Length over temperature against the length at setting, with the row's low and high coefficient, and the other material."""
    if not found.changes:
        return None
    ways = [(shown(found.material.name), "change_mm")]
    if found.spread.high > 1 or found.spread.low < 1:
        ways += [("the same, high coefficient", "high_mm"), ("the same, low coefficient", "low_mm")]
    if found.against is not None:
        ways.append((shown(found.against.material.name), "other_mm"))
    series = []
    for label, name in ways:
        known = [(c.temperature_C, getattr(c, name)) for c in found.changes]
        points = tuple((warmth(t, units), _scaled(mm, units)) for t, mm in known if mm is not None)
        series += [Series(label, points)] if len(points) > 1 else []
    if not series:
        return None
    zero = degrees(found.changes_from_C, units)
    title = f"Length change of {with_unit(found.length_mm, units)} over the temperature of the metal"
    marks = [Mark(warmth(found.changes_from_C, units), "set" if found.set_at_C is not None else "from")]
    svg = drawings.chart(series, (degree_axis(units), unit(units)), title, uprights=marks)
    return Figure(svg, f"{title}, zero at {zero}.")


def _gaps(found: Movement, units: Units) -> Figure | None:
    """The gap to set by the day's temperature."""
    against = found.against is not None and found.against.difference_mm is not None
    ways = [("to set against the other material", "against_mm")] if against else []
    ways.append(("to set, the other side still" if against else "to set", "gap_mm"))
    series = []
    for label, name in ways:
        known = [(s.temperature_C, getattr(s, name)) for s in found.table]
        points = tuple((warmth(t, units), _scaled(mm, units)) for t, mm in known if mm is not None)
        series += [Series(label, points)] if len(points) > 1 else []
    if not series:
        return None
    title = "Gap to set over the temperature of the metal that day"
    marks = [] if found.set_at_C is None else [Mark(warmth(found.set_at_C, units), "set")]
    svg = drawings.chart(series, (degree_axis(units), unit(units)), title, uprights=marks)
    return Figure(svg, f"{title}, {gap_limits(found, units)}.")


def _lengths(found: Movement, units: Units) -> Table:
    columns = [Column("Metal at", True), Column(f"True length ({unit(units)})", True), Column(f"Steel tape reads ({unit(units)})", True)]
    table = Table("lengths", "Length, and what a steel tape at the same temperature reads", columns, tools=False)
    for x in found.lengths:
        figures = [Cell(size(mm, units), mm) for mm in (x.length_mm, x.tape_reading_mm)]
        table.rows.append(Row([Cell(degrees(x.temperature_C, units), x.temperature_C), *figures]))
    return table


def _gap_table(found: Movement, units: Units) -> Table | None:
    if found.movement_mm is None:
        return None
    against = found.against is not None and found.against.difference_mm is not None
    last = f"Gap{', the other side still' if against else ''} ({unit(units)})"
    columns = [Column("Metal at", True), *([Column(f"Gap against the other ({unit(units)})", True)] if against else []), Column(last, True)]
    table = Table("gaps", f"Gap to set by the metal's temperature that day, {gap_limits(found, units)}", columns, tools=False)
    for step in found.table:
        figures = [*([step.against_mm] if against else []), step.gap_mm]
        cells = [Cell(size(mm, units), mm) for mm in figures]
        table.rows.append(Row([Cell(degrees(step.temperature_C, units), step.temperature_C), *cells]))
    return table


def _sources(found: Movement, units: Units) -> list[tuple[str, str]]:
    lines = [
        ("Expansion", coefficient_text(found.material, units)),
        ("Law", law_text(found.law, units)),
        ("Bounds", bounds_text(found.spread)),
    ]
    if found.against is not None:
        lines.append((f"Expansion, {shown(found.against.material.name)}", coefficient_text(found.against.material, units)))
        lines.append((f"Law, {shown(found.against.material.name)}", law_text(found.against.law, units)))
    return lines
