"""The sheet of vehicle loads: each vehicle's loading list and views to scale, its axles and lashings, and what is on no vehicle. Rank 9.

Payloads and axle loads are live: the sum of the rows above them, and of mass times the share that statics gives its place.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.loadsheet import anchor_words, finding_words, spoken, vehicles_words
from takeoff.reports.wording import counted, shown
from takeoff.reports.workbook import loaddrawings
from takeoff.reports.workbook.sheet import LOADS, Book, Sheet, letters
from takeoff.transport import CAUTIONS

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.transport.load import Load, Plan

_WIDTHS = (7, 38, 14, 13, 13, 8, 13, 13, 13, 13, 13, 12)
_KG, _CENTRE = 2, 9


def write(book: Book, result: Result) -> None:
    """Write the sheet of `result.loads`."""
    plan = result.loads
    assert plan is not None
    sheet = book.sheets[LOADS]
    sheet.widths([*_WIDTHS, 3, *[11] * loaddrawings.COLUMNS])
    sheet.height(0, 24)
    sheet.text(0, 0, f"{LOADS}: {book.title}", "title")
    sheet.text(1, 0, book.subtitle or None, "subtitle")
    row = 2
    said = [
        vehicles_words(plan)[0].upper() + vehicles_words(plan)[1:] + ".",
        *(spoken(f.message, book.units) for f in plan.findings),
        *map(shown, CAUTIONS),
    ]
    for text in said:
        sheet.long_text(row, (0, len(_WIDTHS) - 1), text, "quiet wrap")
        row += 1
    row = _not_loaded(sheet, plan, row + 1)
    pictured = [number for number, load in enumerate(plan.loads) if loaddrawings.drawn(load)]
    more = len(pictured) - loaddrawings.MOST_VEHICLES
    if more > 0:
        text = f"Plan and side view are drawn for the first {loaddrawings.MOST_VEHICLES} vehicles; {counted(more, 'vehicle')} more without."
        sheet.long_text(row, (0, len(_WIDTHS) - 1), text, "quiet wrap")
        row += 2
    starts = []
    for number, load in enumerate(plan.loads):
        starts.append(row)
        row = _load(sheet, load, row, starts, drawn=number in pictured[: loaddrawings.MOST_VEHICLES]) + 1
    sheet.raw.print_area(0, 0, row, len(_WIDTHS) - 1)
    sheet.paginate(len(_WIDTHS), starts, row)


def _not_loaded(sheet: Sheet, plan: Plan, row: int) -> int:
    if not plan.not_loaded:
        return row
    sheet.heading(row, f"On no vehicle: {counted(len(plan.not_loaded), 'entry', 'entries')}", len(_WIDTHS))
    row += 1
    sheet.texts(row, 0, (None, "Name"), "head")
    sheet.text(row, _KG, f"Heavy ({sheet.book.mass_unit})", "head right")
    sheet.texts(row, 3, ("Why", *[None] * (len(_WIDTHS) - 4)), "head")
    for n in plan.not_loaded:
        row += 1
        sheet.texts(row, 0, (None, n.name), "cell wrap")
        sheet.number(row, _KG, None if n.kg is None else rounding.in_mass_unit(n.kg, sheet.book.units), "mass heavy")
        sheet.long_text(row, (3, len(_WIDTHS) - 1), spoken(n.reason, sheet.book.units))
    return row + 2


def _load(sheet: Sheet, load: Load, row: int, starts: list[int], *, drawn: bool) -> int:
    units, unit = sheet.book.units, sheet.book.mass_unit
    size = "mm" if units == "si" else "in"

    def kg(value: float) -> float:
        return rounding.in_mass_unit(value, units)

    def to_size(value: float) -> float:
        return value / rounding.MM_PER_IN if units == "us" else value

    def mm(value: float | None) -> float | None:
        return None if value is None else to_size(value)

    length_style = "size us" if units == "us" else "size"
    sheet.heading(row, f"{shown(load.name)}: {counted(len(load.pieces), 'unit')}", len(_WIDTHS))
    row += 1
    heads = (
        "Order",
        "Unit",
        f"Heavy ({unit})",
        f"From front ({size})",
        f"From left ({size})",
        "Layer",
        f"Length ({size})",
        f"Width ({size})",
        f"Height ({size})",
        f"Centre from front ({size})",
        f"Light ({unit})",
        "Phase",
    )
    for column, text in enumerate(heads):
        sheet.text(row, column, text, "head" if column in (1, 11) else "head right")
    pictured = dict(loaddrawings.drawn(load)) if drawn else {}
    if pictured:
        loaddrawings.heads(sheet, row, size)
    first = row + 1
    for number, p in enumerate(load.pieces, 1):
        row += 1
        sheet.number(row, 0, number, "whole")
        sheet.text(row, 1, p.unit.name, "cell wrap")
        sheet.number(row, _KG, kg(p.unit.mass.heavy), "mass heavy")
        sheet.number(row, 3, mm(p.x), length_style)
        sheet.number(row, 4, mm(p.y), length_style)
        sheet.number(row, 5, p.layer, "whole")
        for column, side in enumerate(p.unit.on_deck(p.turned) if p.unit.size else (None, None, None), 6):
            sheet.number(row, column, mm(side), length_style)
        sheet.number(row, _CENTRE, mm(p.centre[0]) if p.centre else None, length_style)
        sheet.number(row, 10, kg(p.unit.mass.light), "mass")
        sheet.text(row, 11, p.unit.phase, "cell")
        if number in pictured:
            loaddrawings.corners(sheet, row, number, p, to_size, length_style)
    row += 1
    sheet.texts(row, 0, (None, "dunnage and lashing gear"), "cell")
    sheet.number(row, _KG, kg(load.dunnage_kg), "mass")
    dunnage = row
    if pictured:
        loaddrawings.frame(sheet, row, load, to_size, length_style)
    row += 1
    masses = f"{letters(_KG)}{first + 1}:{letters(_KG)}{dunnage}"
    sheet.texts(row, 0, (None, f"payload (limit {rounding.mass_with_unit(load.vehicle.payload_kg, 'down', units)})"), "total")
    sheet.formula(row, _KG, f"=SUM({letters(_KG)}{first + 1}:{letters(_KG)}{dunnage + 1})", kg(load.payload_kg), "total mass")
    row += 1
    if load.axles and load.vehicle.statics is not None and load.vehicle.deck is not None:
        row = _axles(sheet, load, row, masses, f"{letters(_CENTRE)}{first + 1}:{letters(_CENTRE)}{dunnage}", f"{letters(_KG)}{dunnage + 1}")
    if pictured:
        undrawn = loaddrawings.left_out(load)
        if undrawn:
            _line(sheet, row, "Drawn below", f"the first {len(pictured)} pieces with a place; {counted(undrawn, 'piece')} more not drawn")
            row += 1
        text = "to scale; numbers as in the list, where there is room; a heavier outline lies on another piece"
        _line(sheet, row, "Plan and side view", text)
        row, views = loaddrawings.views(sheet, load, row + 1, first, dunnage, to_size, size)
        starts += [*views, row]
        row += 1
    for x in load.lashings:
        angle = "" if x.angle_deg is None else f" at {x.angle_deg:g}°"
        spots = (
            "; at " + ", ".join(rounding.length_with_unit(round(s), units) for s in x.positions_mm[:24]) + " from the front"
            if x.positions_mm and not x.anchors_mm
            else ""
        )
        _line(
            sheet,
            row,
            "Securing",
            f"{shown(x.piece)}: {x.number} {x.method}{angle}, {x.direction}{spots}{anchor_words(x, units)}. {spoken(x.rule, units)}",
        )
        row += 1
    for over in load.over_size:
        value, limit = (
            (rounding.mass_with_unit(over.value, "up", units), rounding.mass_with_unit(over.limit, "down", units))
            if over.kind == "gross"
            else (rounding.length_with_unit(over.value, units), rounding.length_with_unit(over.limit, units))
        )
        _line(sheet, row, f"OVER-SIZE, {over.kind}", f"{shown(over.name)}: {value}, over {limit} ({shown(over.rule)})")
        row += 1
    for finding in load.findings:
        _line(
            sheet,
            row,
            finding.level.capitalize(),
            finding_words(finding, units, "; "),
        )
        row += 1
    return row


def _line(sheet: Sheet, row: int, label: str, text: str) -> None:
    sheet.text(row, 0, None, "text")
    sheet.text(row, 1, label, "quiet")
    sheet.long_text(row, (2, len(_WIDTHS) - 1), text)


def _axles(sheet: Sheet, load: Load, row: int, masses: str, centres: str, dunnage: str) -> int:
    """Heavy axle loads as live formulas: empty + sum of mass x share at its place; shares are straight lines in the place."""
    units, unit = sheet.book.units, sheet.book.mass_unit
    statics, deck = load.vehicle.statics, load.vehicle.deck
    assert statics is not None
    assert deck is not None
    heads = (
        "",
        "Axle or group",
        f"Heavy ({unit})",
        f"Empty ({unit})",
        f"Light ({unit})",
        "",
        f"Worst ({unit})",
        f"Limit ({unit})",
        "Worst of limit",
        "Share at the front edge",
        "Share a length more",
        "",
    )
    for column, text in enumerate(heads):
        sheet.text(row, column, text, "head" if column == 1 else "head right")
    per = rounding.MM_PER_IN if units == "us" else 1.0
    for axle in load.axles:
        row += 1
        support = next(s for s in statics.supports if s.name == axle.name)
        sheet.texts(row, 0, (None, axle.name), "cell")
        front, more = f"{letters(9)}{row + 1}", f"{letters(10)}{row + 1}"
        formula = f"={letters(3)}{row + 1}+SUMPRODUCT({masses},{front}+{more}*{centres})+{dunnage}*({front}+{more}*{deck[0] / 2 / per!r})"
        sheet.formula(row, _KG, formula, rounding.in_mass_unit(axle.kg, units), "mass heavy")
        sheet.number(row, 3, rounding.in_mass_unit(support.empty_kg, units), "mass")
        sheet.number(row, 4, rounding.in_mass_unit(axle.light_kg, units), "mass")
        sheet.text(row, 5, None, "cell")
        sheet.number(row, 6, rounding.in_mass_unit(axle.worst_kg, units), "mass heavy")
        sheet.number(row, 7, None if axle.limit_kg is None else rounding.in_mass_unit(axle.limit_kg, units), "mass")
        sheet.number(row, 8, None if not axle.limit_kg else axle.worst_kg / axle.limit_kg, "factor")
        sheet.number(row, 9, support.at_front, "share")
        sheet.number(row, 10, support.per_mm * per, "share")
    return row + 2
