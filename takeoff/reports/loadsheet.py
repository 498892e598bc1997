"""The loads at the terminal: each vehicle's loading list in loading order, its axles, lashings, and what is on none. Rank 9.

Rounding: masses, axle loads and lashings go up; payloads and limits go down.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.plainpage import Page
from takeoff.reports.rounding import NO_BREAK, NO_FIGURE, Units
from takeoff.reports.wording import counted, shown

if TYPE_CHECKING:
    from takeoff.transport.load import Load, Plan

_MOST_PIECES = 60
_SKETCH = 60


def load_sheet(plan: Plan, width: int = 80, *, units: Units = "si", cautions: Iterable[str] = (), title: str | None = None) -> str:
    """Every load, as text without a final line feed."""
    page = Page(width)
    if title:
        page.say(shown(title))
    say_short(page, plan, units)
    for load in plan.loads:
        _load(page, load, units)
    page.heading("Cautions")
    for caution in cautions:
        page.say("- " + shown(caution), indent=2, hang=4)
    return page.text()


def say_short(page: Page, plan: Plan, units: Units) -> None:
    """How many vehicles, whether that is proven, and what is on none."""
    page.heading(f"Loads: {vehicles_words(plan)}.")
    for finding in plan.findings:
        page.say(f"{finding.level.capitalize()}: {shown(finding.message)}", indent=2, hang=4)
    if plan.not_loaded:
        page.heading(f"On no vehicle ({counted(len(plan.not_loaded), 'entry', 'entries')})")
        for n in plan.not_loaded[:_MOST_PIECES]:
            mass = "" if n.kg is None else f" ({rounding.mass_with_unit(n.kg, 'up', units, gap=NO_BREAK)})"
            page.say(f"{shown(n.name)}{mass}: {shown(n.reason)}", indent=2, hang=4)
        if len(plan.not_loaded) > _MOST_PIECES:
            page.say(f"and {len(plan.not_loaded) - _MOST_PIECES} more", indent=2)


def vehicles_words(plan: Plan) -> str:
    """``3 vehicles, and no plan does with fewer``."""
    number = counted(len(plan.loads), "vehicle")
    if not plan.loads:
        return "nothing is on a vehicle"
    if plan.proven:
        return f"{number}, and no plan does with fewer" if plan.bound else number
    return f"{number}; at least {plan.bound} are needed, whether so few would do is not known"


def _load(page: Page, load: Load, units: Units) -> None:
    unit = rounding.mass_unit(units)
    payload = rounding.mass_with_unit(load.payload_kg, "up", units, gap=NO_BREAK)
    limit = rounding.mass_with_unit(load.vehicle.payload_kg, "down", units, gap=NO_BREAK)
    page.heading(
        f"{shown(load.name)}: {counted(len(load.pieces), 'unit')}, payload {payload} of {limit} (dunnage and gear "
        f"{rounding.mass_with_unit(load.dunnage_kg, 'up', units, gap=NO_BREAK)} in it)"
    )
    if any(p.unit.not_weighed for p in load.pieces):
        page.say("INCOMPLETE: pieces of this load could not be weighed. It is heavier than shown.", indent=2)
    _sketch(page, load)
    size = "mm" if units == "si" else "ft-in"
    page.table(
        ["In loading order", f"heavy {unit}", f"front {size}", f"left {size}", "layer", f"length {size}", f"width {size}"],
        [
            [
                f"{number}. {shown(p.unit.name)}" + (f" (phase {shown(p.unit.phase)})" if p.unit.phase else ""),
                rounding.mass(p.unit.mass.heavy, "up", units, gap=NO_BREAK),
                _mm(p.x, units),
                _mm(p.y, units),
                str(p.layer),
                *(_mm(v, units) for v in (p.unit.on_deck(p.turned)[:2] if p.unit.size else (None, None))),
            ]
            for number, p in enumerate(load.pieces[:_MOST_PIECES], 1)
        ],
    )
    if len(load.pieces) > _MOST_PIECES:
        page.say(f"and {len(load.pieces) - _MOST_PIECES} more; the workbook and the JSON list every one", indent=2)
    if load.axles:
        page.table(
            [f"Axles, {unit}", "light", "heavy", "worst", "limit", "of limit"],
            [
                [
                    a.name,
                    rounding.mass(a.light_kg, "down", units, gap=NO_BREAK),
                    rounding.mass(a.kg, "up", units, gap=NO_BREAK),
                    rounding.mass(a.worst_kg, "up", units, gap=NO_BREAK),
                    rounding.mass(a.limit_kg, "down", units, gap=NO_BREAK),
                    NO_FIGURE if not a.limit_kg else f"{rounding.number(100 * a.worst_kg / a.limit_kg, 1, 'up')}{NO_BREAK}%",
                ]
                for a in load.axles
            ],
        )
        page.say("Worst: over the masses' bounds and every stage of unloading.", indent=2)
    for x in load.lashings:
        angle = "" if x.angle_deg is None else f" at {x.angle_deg:g}°"
        friction = "" if x.friction is None else f", friction {x.friction:g}"
        page.say(
            f"Hold {shown(x.piece)}: {x.number} {shown(x.method)}{angle} ({shown(x.direction)} governs{friction})"
            if x.method != "blocking"
            else f"Hold {shown(x.piece)}: {shown(x.rule)}",
            indent=2,
            hang=4,
        )
    for over in load.over_size:
        value, most = (
            (rounding.mass_with_unit(over.value, "up", units), rounding.mass_with_unit(over.limit, "down", units))
            if over.kind == "gross"
            else (rounding.length_with_unit(over.value, units), rounding.length_with_unit(over.limit, units))
        )
        page.say(f"OVER-SIZE, {over.kind}: {shown(over.name)} {value}, over {most} ({shown(over.rule)})", indent=2, hang=4)
    for finding in load.findings:
        right = f" Right would be: {shown(finding.right)}." if finding.right else ""
        page.say(f"{finding.level.capitalize()}: {shown(finding.message)}.{right}", indent=2, hang=4)


def _mm(value: float | None, units: Units) -> str:
    if value is None:
        return NO_FIGURE
    return rounding.feet_inches(value) if units == "us" else rounding.number(value, 0, gap=NO_BREAK)


def _sketch(page: Page, load: Load) -> None:
    """The deck from above in letters, front to the left, as long as it is wide of the screen; only what stands on the deck."""
    deck = load.vehicle.deck
    columns = min(_SKETCH, page.width - 6)
    if deck is None or columns < 30 or all(p.x is None for p in load.pieces):
        return
    # A letter is about twice as high as wide.
    rows = max(2, min(12, round(columns * deck[1] / deck[0] / 2)))
    grid = [[" "] * columns for _ in range(rows)]
    length = deck[0] + load.vehicle.rear_overhang_mm
    for number, p in enumerate(load.pieces):
        if p.on or p.x is None or p.y is None:
            continue
        along, across, _ = p.unit.on_deck(p.turned)
        sign = "abcdefghijklmnopqrstuvwxyz"[number % 26]
        for r in range(rows):
            for c in range(columns):
                x, y = (c + 0.5) * length / columns, (r + 0.5) * deck[1] / rows
                if p.x <= x < p.x + along and p.y <= y < p.y + across:
                    grid[r][c] = sign
    page.lines.append("  +" + "-" * columns + "+")
    page.lines += ["  |" + "".join(line) + "|" for line in grid]
    page.lines.append("  +" + "-" * columns + "+")
    page.say("Deck from above, front to the left; a is 1, b is 2 and so on; upper layers are not drawn.", indent=2)
