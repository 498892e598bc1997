"""The page's temperatures: how each material grows, what each run moves, with charts, and lengths row by row. Rank 9."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from takeoff.reports import drawings, rounding
from takeoff.reports.drawings import Mark, Series
from takeoff.reports.page.masses import row_id
from takeoff.reports.page.parts import Block, Cell, Column, Figure, Row, Table, text
from takeoff.reports.rounding import NO_BREAK, Units
from takeoff.reports.thermal import coefficient_text, degrees, law_text, size, unit, with_unit
from takeoff.reports.wording import counted, shown

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.thermal.runs import RunMovement

MOST_JOINTS, MOST_LINES = 6, 6


def blocks(result: Result, units: Units) -> list[Block]:
    """Each run in full."""
    return [_run(number, run, result, units) for number, run in enumerate(result.movements)]


def growth_chart(result: Result, units: Units) -> Figure | None:
    """How much 10 m of each material grow over the temperature of the metal; None where no material has an answer."""
    at = result.temperatures
    if at is None:
        return None
    per, of = (10_000.0, "mm in 10 m") if units == "si" else (1200.0, "in in 100 ft")
    series = [
        Series(shown(found.material.name), tuple((warmth(t, units), growth * per) for t, growth in found.line))
        for found in at.materials if found.line
    ]
    if not series:
        return None
    left = len(series) - MOST_LINES
    if left > 0:  # those that grow most tell most; the table below holds every one
        series = sorted(series, key=lambda s: max(abs(y) for _, y in s.points), reverse=True)[:MOST_LINES]
    length = "10 m" if units == "si" else "100 ft"
    title = f"Growth of {length} of each material over the temperature of the metal"
    marks = [Mark(warmth(t, units), f"{shown(name)} {degrees(t, units)}") for name, t in at.named.items()]
    svg = drawings.chart(series, (degree_axis(units), of), title, uprights=marks)
    more = f" The {MOST_LINES} that grow most; {left} more in the table." if left > 0 else ""
    reference = degrees(at.named.get("reference", 20.0), units)
    return Figure(svg, f"{title}, zero at {reference}; dashed uprights: the temperatures of the job.{more}")


def warmth(celsius: float, units: Units) -> float:
    """A temperature as a place on a chart: °C, or °F."""
    return celsius if units == "si" else celsius * 1.8 + 32


def degree_axis(units: Units) -> str:
    return f"{'°C' if units == 'si' else '°F'} of the metal"


def _run(number: int, run: RunMovement, result: Result, units: Units) -> Block:
    block = Block(f"run-{number}", f"Run {shown(run.run)}: {counted(run.pieces, 'piece')}, fixed at the {shown(run.fixed_at)}")
    named = result.temperatures.named if result.temperatures is not None else {}
    if run.movement_mm is not None:
        block.facts += [
            (f"Length at {degrees(named.get('reference', 20.0), units)}", with_unit(run.length_mm, units)),
            (
                f"Movement, {degrees(run.from_C, units)} to {degrees(run.to_C, units)}",
                f"{with_unit(run.movement_mm, units)} (low {size(run.movement_low_mm, units)}, high {size(run.movement_high_mm, units)})",
            ),
            (
                f"After setting at {degrees(run.set_at_C, units)}",
                f"closes by {with_unit(run.closing_mm, units)}, opens by {with_unit(run.opening_mm, units)}",
            ),
        ]
        figure = _chart(run, named, units)
        if figure is not None:
            block.figures.append(figure)
    for f in run.findings:
        read = f" (read: {shown(f.read)})" if f.read else ""
        block.facts.append((f.level.capitalize(), shown(f.message) + read + (f". Right would be: {shown(f.right)}" if f.right else "")))
    if run.joints:
        block.tables.append(_joints(number, run, named, units))
    return block


def _chart(run: RunMovement, named: dict[str, float], units: Units) -> Figure | None:
    """Gaps by temperature where they are known, else where each joint lies against its place at setting."""
    order = sorted(named, key=lambda name: named[name])
    factor = 1.0 if units == "si" else 1 / rounding.MM_PER_IN

    series = []
    gaps = any(g is not None for joint in run.joints for g in joint.gap_mm.values())
    for joint in run.joints:
        found = joint.gap_mm if gaps else joint.position_mm
        known = [(warmth(named[n], units), v) for n in order if (v := found.get(n)) is not None]
        if len(known) < 2:
            continue
        start = 0.0 if gaps else known[0][1]
        series.append(Series(shown(joint.after or "the start"), tuple((t, (v - start) * factor) for t, v in known)))
    if not series:
        return None
    what = "Gap after each piece" if gaps else "How far the end of each piece moves from its coldest place"
    left = len(series) - MOST_JOINTS
    if left > 0:  # the joints that move most tell the story; the table below holds every one
        series = sorted(series, key=lambda s: abs(s.points[-1][1] - s.points[0][1]), reverse=True)[:MOST_JOINTS]
    title = f"Run {shown(run.run)}: {what[0].lower()}{what[1:]} over the temperature of the metal"
    svg = drawings.chart(series, (degree_axis(units), unit(units)), title, uprights=[Mark(warmth(run.set_at_C, units), "set")])
    more = f" The {MOST_JOINTS} that change most; {left} more in the table." if left > 0 else ""
    return Figure(svg, f"{what} over the temperature of the metal; dashed upright: setting at {degrees(run.set_at_C, units)}.{more}")


def _joints(number: int, run: RunMovement, named: dict[str, float], units: Units) -> Table:
    names = list(named)
    columns = [
        Column("Joint", True),
        Column("After"),
        Column("Before"),
        *(Column(f"Position, {shown(n)} {degrees(named[n], units)} ({unit(units)})", True) for n in names),
        *(Column(f"Gap, {shown(n)} ({unit(units)})", True) for n in names),
        Column(f"Gap to set ({unit(units)})", True),
    ]
    table = Table(f"joints-{number}", f"Joints of run {shown(run.run)}", columns)
    for at, joint in enumerate(run.joints, 1):
        figures = [joint.position_mm.get(n) for n in names] + [joint.gap_mm.get(n) for n in names] + [joint.gap_to_set_mm]
        table.rows.append(
            Row(
                [
                    Cell(str(at), at),
                    Cell(text(joint.after, "(start of the line)")),
                    Cell(text(joint.before, "(end of the line)")),
                    *(Cell(size(v, units), v, strong=k == len(figures) - 1) for k, v in enumerate(figures)),
                ]
            )
        )
    return table


def lengths_table(result: Result, units: Units, rows: Sequence[int]) -> Table | None:
    """True length and tape reading of each member shown, at each named temperature."""
    at = result.temperatures
    if at is None:
        return None
    columns = [Column("Row", True), Column("Mark"), Column("Material")]
    for name in at.names:
        of = f"{shown(name)} {degrees(at.named[name], units)}" if name in at.named else shown(name)
        columns += [Column(f"{of}: true ({unit(units)})", True), Column(f"{of}: tape reads", True)]
    table = Table("lengths", f"Length of one piece at each temperature of the metal ({unit(units)})", columns)
    frame = result.members
    marks, materials, numbers = (frame[key].tolist() for key in ("mark", "material", "row"))
    lengths = {n: at.sizes_mm[n]["length"].tolist() for n in at.names}
    readings = {n: at.readings_mm[n].tolist() for n in at.names}
    for i in rows:
        figures = [v for n in at.names for v in (lengths[n][i], readings[n][i])]
        if all(v != v for v in figures):  # noqa: PLR0124  (NaN is the only value that differs from itself)
            continue
        known = [None if v != v else float(v) for v in figures]  # noqa: PLR0124
        table.rows.append(
            Row(
                [
                    Cell(str(int(numbers[i])), numbers[i], to=row_id(i)),
                    Cell(text(marks[i])),
                    Cell(text(materials[i])),
                    *(Cell(size(v, units), v) for v in known),
                ]
            )
        )
    return table


def materials_table(result: Result, units: Units) -> Table | None:
    """Each material's coefficient, law and bounds, with its growth at each named temperature."""
    at = result.temperatures
    if at is None:
        return None
    names = [f"{shown(n)} {degrees(t, units)}" for n, t in at.named.items()]
    columns = [
        Column("Material"),
        *(Column(f"Growth from 20{NO_BREAK}°C, {n} (millionths)", True) for n in names),
        Column("Coefficient and source"),
        Column("Law"),
        Column("Bounds"),
    ]
    table = Table("growth", "Growth of each material", columns, tools=False)
    for found in at.materials:
        growth = [None if e.value is None else e.value * 1e6 for e, _ in found.at.values()]
        table.rows.append(
            Row(
                [
                    Cell(shown(found.material.name)),
                    *(Cell(rounding.number(v, 2, gap=NO_BREAK), v) for v in growth),
                    Cell(coefficient_text(found.material, units)),
                    Cell(law_text(found.law, units)),
                    Cell(f"coefficient × {found.spread.low:.3f} to × {found.spread.high:.3f} ({found.spread.source})"),
                ]
            )
        )
    return table
