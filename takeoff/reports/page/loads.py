"""The page's loads: each vehicle in plan and from its side, axles against limits, lashings, and what is on no vehicle. Rank 9."""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.reports import drawings, rounding
from takeoff.reports.loadsheet import anchor_words, finding_words, more_needed, spoken
from takeoff.reports.page.parts import Block, Cell, Column, Figure, Row, Table, text
from takeoff.reports.rounding import NO_BREAK, NO_FIGURE, Units
from takeoff.reports.wording import counted, shown
from takeoff.transport.planning import FULL

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.transport.load import Load

#: what a limit that is not given leaves open
_OPEN = "unknown: no limit is given"


def words(result: Result, units: Units) -> list[str]:
    """How many vehicles, how many at least, and whether that is proven."""
    plan = result.loads
    if plan is None:
        return []
    several = counted(len(plan.loads), "vehicle")
    open_question = f"whether fewer would do is not proven; none can do with fewer than {plan.bound}"
    proven = "no plan can do with fewer" if plan.proven else open_question
    if any(n.reason == FULL for n in plan.not_loaded):
        proven = f"full, and not everything is on them{more_needed(plan)}"
    said = [f"{several}: {proven}." if plan.loads else "Nothing is on a vehicle."]
    if plan.not_loaded:
        said.append(f"NOT LOADED: {counted(len(plan.not_loaded), 'entry', 'entries')}, on no vehicle and in no figure below.")
    said += [f"{f.level.capitalize()}: {finding_words(f, units)}" for f in plan.findings]
    return said


def not_loaded_table(result: Result, units: Units) -> Table | None:
    """What is on no vehicle, and why."""
    plan = result.loads
    if plan is None or not plan.not_loaded:
        return None
    table = Table("not-loaded", "On no vehicle", [Column("Piece"), Column(f"Heavy ({rounding.mass_unit(units)})", True), Column("Why")])
    for piece in plan.not_loaded:
        table.rows.append(
            Row(
                [
                    Cell(shown(piece.name)),
                    Cell(rounding.mass(piece.kg, "up", units, gap=NO_BREAK), piece.kg),
                    Cell(spoken(piece.reason, units)),
                ]
            )
        )
    return table


def blocks(result: Result, units: Units) -> list[Block]:
    """Each load in full, in the plan's order."""
    plan = result.loads
    return [] if plan is None else [_block(number, load, units) for number, load in enumerate(plan.loads)]


def _block(number: int, load: Load, units: Units) -> Block:
    unit = rounding.mass_unit(units)
    block = Block(f"load-{number}", f"{shown(load.name)}: {counted(len(load.pieces), 'piece')}")
    limit = load.vehicle.payload_kg
    payload = rounding.mass_with_unit(load.payload_kg, "up", units, gap=NO_BREAK)
    of = f"of {rounding.mass_with_unit(limit, 'down', units, gap=NO_BREAK)} that it may carry" if limit else "payload limit: not given"
    gear = rounding.mass_with_unit(load.dunnage_kg, "up", units, gap=NO_BREAK)
    with_gear = f"dunnage and gear of {gear} are in it" if load.dunnage_kg else "no dunnage and gear are in it"
    block.words.append(f"Payload {payload} at the heavy masses, {of}; {with_gear}.")
    if any(p.unit.not_weighed for p in load.pieces):
        block.words.append("INCOMPLETE: pieces of this load could not be weighed. It is heavier than shown.")
    figure = _deck(load, units)
    if figure is not None:
        block.figures.append(figure)
    side = _side(load, units)
    if side is not None:
        block.figures.append(side)
    curve = _curve(load, units)
    if curve is not None:
        block.figures.append(curve)
    if load.axles:
        block.tables.append(_axles(number, load, units))
    pieces = Table(
        f"pieces-{number}",
        f"On {shown(load.name)}, in the order of loading",
        [
            Column("No.", True),
            Column("Piece"),
            Column(f"Heavy ({unit})", True),
            Column(f"From the front ({_unit(units)})", True),
            Column(f"From the left ({_unit(units)})", True),
            Column("Layer", True),
            Column(f"Length ({_unit(units)})", True),
            Column(f"Width ({_unit(units)})", True),
            Column(f"Height ({_unit(units)})", True),
            Column("Phase"),
        ],
    )
    for at, p in enumerate(load.pieces, 1):
        sizes = p.unit.on_deck(p.turned) if p.unit.size else (None, None, None)
        pieces.rows.append(
            Row(
                [
                    Cell(str(at), at),
                    Cell(shown(p.unit.name)),
                    Cell(rounding.mass(p.unit.mass.heavy, "up", units, gap=NO_BREAK), p.unit.mass.heavy, strong=True),
                    *(_size(v, units) for v in (p.x, p.y)),
                    Cell(str(p.layer), p.layer),
                    *(_size(v, units) for v in sizes),
                    Cell(text(p.unit.phase)),
                ]
            )
        )
    block.tables.append(pieces)
    if load.lashings:
        block.tables.append(_lashings(number, load, units))
    for over in load.over_size:
        value, most = _over(over.value, over.kind, "up", units), _over(over.limit, over.kind, "down", units)
        block.facts.append((f"OVER-SIZE, {over.kind}", f"{shown(over.name)}: {value}, over {most} ({shown(over.rule)})"))
    for f in load.findings:
        block.facts.append((f.level.capitalize(), finding_words(f, units, read=True)))
    return block


def _unit(units: Units) -> str:
    return "mm" if units == "si" else "ft-in"


def _size(mm: float | None, units: Units) -> Cell:
    if mm is None:
        return Cell(NO_FIGURE)
    return Cell(rounding.feet_inches(mm) if units == "us" else rounding.number(mm, 0, gap=NO_BREAK), mm)


def _long(mm: float, units: Units) -> str:
    return rounding.length_with_unit(round(mm, 1), units, NO_BREAK)


def _over(value: float, kind: str, way: rounding.Way, units: Units) -> str:
    return rounding.mass_with_unit(value, way, units, gap=NO_BREAK) if kind == "gross" else _long(value, units)


def _deck(load: Load, units: Units) -> Figure | None:
    """The deck from above, where the deck and the places on it are known."""
    deck = load.vehicle.deck
    placed = []
    for number, p in enumerate(load.pieces, 1):
        if p.x is not None and p.y is not None and p.unit.size is not None:
            length, width, _ = p.unit.on_deck(p.turned)
            placed.append(drawings.Placed(number, p.x, p.y, length, width, p.layer))
    if deck is None or not placed:
        return None
    title = f"Deck of {shown(load.name)} from above, {_long(deck[0], units)} by {_long(deck[1], units)}, front to the left"
    return Figure(
        drawings.deck(placed, deck[0], deck[1], title),
        f"{title}, to scale. Numbers as in the table; a heavier outline lies on another piece.",
        wide=True,
    )


def _side(load: Load, units: Units) -> Figure | None:
    """The deck from its left side, where the deck and the places on it are known."""
    deck = load.vehicle.deck
    standing = []
    for number, p in enumerate(load.pieces, 1):
        if p.x is not None and p.y is not None and p.unit.size is not None:
            length, _, height = p.unit.on_deck(p.turned)
            standing.append(drawings.Standing(number, p.x, p.y, p.z, length, height, p.layer))
    if deck is None or not standing:
        return None
    beyond = max(p.x + p.length for p in standing) - deck[0]
    rear = f"rear overhang {_long(beyond, units)}" if beyond > 0.5 else ""
    title = f"Load of {shown(load.name)} from its left side, load height limit {_long(deck[2], units)} above the deck, front to the left"
    if rear:
        title += f", {rear}"
    return Figure(
        drawings.deck_side(standing, deck[0], deck[2], title, (f"load height limit {_long(deck[2], units)}", rear)),
        f"{title}, to scale. Numbers as in the table, where there is room; a heavier outline lies on another piece.",
        wide=True,
    )


def _curve(load: Load, units: Units) -> Figure | None:
    """What the vehicle may carry by where the load's centre lies, with this load marked."""
    if not load.curve or load.centre_mm is None:
        return None
    far, heavy = (1 / 1000.0, 1 / 1000.0) if units == "si" else (1 / rounding.MM_PER_FT, 1 / rounding.KG_PER_LB / 1000.0)
    series = [
        drawings.Series("what the vehicle may carry there", tuple((x * far, kg * heavy) for x, kg, _ in load.curve)),
        drawings.Series("this load", ((load.centre_mm[0] * far, load.payload_kg * heavy),)),
    ]
    axes = (
        ("m from the deck's front to the load's centre", "t")
        if units == "si"
        else ("ft from the deck's front to the load's centre", "1000 lb")
    )
    title = f"Payload of {shown(load.vehicle.name)} by the place of the load's centre, and this load"
    return Figure(drawings.chart(series, axes, title), title + ". Above line A a limit is exceeded.")


def _axles(number: int, load: Load, units: Units) -> Table:
    unit = rounding.mass_unit(units)
    columns = [
        Column("Axle or group"),
        Column("Load, limit marked"),
        Column(f"Light ({unit})", True),
        Column(f"Heavy ({unit})", True),
        Column(f"Worst while unloading ({unit})", True),
        Column(f"Limit ({unit})", True),
        Column("Of the limit", True),
        Column("Word"),
    ]
    table = Table(f"axles-{number}", f"Axle loads of {shown(load.name)}", columns, tools=False)
    most = max(max(a.kg, a.worst_kg, a.limit_kg or 0.0) for a in load.axles) * 1.05
    for a in load.axles:
        used = None if not a.limit_kg else max(a.worst_kg, a.kg) / a.limit_kg
        word = _axle_word(used)
        heavy = rounding.mass(a.kg, "up", units, gap=NO_BREAK)
        title = f"{a.name}: {heavy} {unit}, {word}"
        table.rows.append(
            Row(
                [
                    Cell(shown(a.name)),
                    Cell(svg=drawings.limit_bar(a.light_kg, a.kg, a.limit_kg, most, title)),
                    Cell(rounding.mass(a.light_kg, "down", units, gap=NO_BREAK), a.light_kg),
                    Cell(heavy, a.kg, strong=True),
                    Cell(rounding.mass(a.worst_kg, "up", units, gap=NO_BREAK), a.worst_kg),
                    Cell(rounding.mass(a.limit_kg, "down", units, gap=NO_BREAK)),
                    Cell(NO_FIGURE if used is None else f"{rounding.number(used * 100, 1, 'up')}{NO_BREAK}%", used),
                    Cell(word, strong=word == "OVER"),
                ]
            )
        )
    return table


def _axle_word(used: float | None) -> str:
    return _OPEN if used is None else "OVER" if used > 1 + 1e-9 else "within"


def _lashings(number: int, load: Load, units: Units) -> Table:
    rules = [spoken(x.rule, units) + anchor_words(x, units) for x in load.lashings]
    alike = len(rules) > 1 and len(set(rules)) == 1
    note = "Numbers are a planning figure, not a securing plan: the gear's tag, the deck's fittings and local rules decide."
    table = Table(
        f"lashings-{number}",
        f"Securing of {shown(load.name)}",
        [
            Column("Piece"),
            Column("Method"),
            Column("Direction"),
            Column("Number", True),
            Column("Friction", True),
            Column("Angle", True),
            *([] if alike else [Column("Rule")]),
        ],
        note=f"Rule of every row: {rules[0]}. {note}" if alike else note,
    )
    for x, rule in zip(load.lashings, rules, strict=True):
        table.rows.append(
            Row(
                [
                    Cell(shown(x.piece)),
                    Cell(shown(x.method)),
                    Cell(shown(x.direction)),
                    Cell(str(x.number), x.number, strong=True),
                    Cell(NO_FIGURE if x.friction is None else f"{x.friction:g}", x.friction),
                    Cell(NO_FIGURE if x.angle_deg is None else f"{x.angle_deg:g}°", x.angle_deg),
                    *([] if alike else [Cell(rule)]),
                ]
            )
        )
    return table
