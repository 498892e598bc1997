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
from takeoff.transport.planning import FULL
from takeoff.transport.words import Figure, Said

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.transport.load import Lashing, Load, Plan

_MOST_PIECES = 60
_SKETCH = 60
#: from so many on, notes of one kind are said together
_FEW = 4


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
        page.say(f"{finding.level.capitalize()}: {spoken(finding.message, units)}", indent=2, hang=4)
    if plan.not_loaded:
        page.heading(f"On no vehicle ({counted(len(plan.not_loaded), 'entry', 'entries')})")
        for n in plan.not_loaded[:_MOST_PIECES]:
            mass = "" if n.kg is None else f" ({rounding.mass_with_unit(n.kg, 'up', units, gap=NO_BREAK)})"
            page.say(f"{shown(n.name)}{mass}: {spoken(n.reason, units)}", indent=2, hang=4)
        if len(plan.not_loaded) > _MOST_PIECES:
            page.say(f"and {len(plan.not_loaded) - _MOST_PIECES} more", indent=2)


def spoken(text: str | None, units: Units) -> str:
    """A sentence about loads with its figures in the units asked for; forces in pounds-force where they are US."""
    if units == "si" or not isinstance(text, Said):
        return shown(text)
    return shown("".join(_figure(part) if isinstance(part, Figure) else part for part in text.parts))


def _figure(part: Figure) -> str:
    if part.unit == "kg":
        return rounding.mass_with_unit(part.value, part.way, "us", gap=NO_BREAK)
    if part.unit == "mm":
        return rounding.feet_inches(part.value).replace(" ", NO_BREAK)
    if part.unit == "kN":
        return rounding.force_with_unit(part.value, part.way, "us", NO_BREAK)
    return force_of(part.value, "us", part.way)


def force_of(dan: float, units: Units, way: rounding.Way = "up") -> str:
    """A lashing's force, whole: daN, or pounds-force in US print."""
    if units == "si":
        return f"{rounding.number(dan, 0, way, NO_BREAK)}{NO_BREAK}daN"
    return f"{rounding.number(dan / 100 / rounding.KN_PER_KIP * 1000, 0, way, NO_BREAK)}{NO_BREAK}lbf"


def finding_words(finding: Finding, units: Units, before: str = ". ", *, read: bool = False) -> str:
    """What a finding of a load says, what was read where that is wanted, and what would be right."""
    right = f"{before}{'Right' if before == '. ' else 'right'} would be: {spoken(finding.right, units)}" if finding.right else ""
    was = f" (read: {spoken(finding.read, units)})" if read and finding.read else ""
    return spoken(finding.message, units) + was + right


def anchor_words(x: Lashing, units: Units) -> str:
    """What each direct lashing must hold and where its anchors are, two for each end of the piece; nothing for others."""
    if x.needed_dan is None:
        return ""
    front, rear = (rounding.length_with_unit(round(x.anchors_mm[k][0]), units, NO_BREAK).replace(" ", NO_BREAK) for k in (0, 2))
    crossed = [word for word, k in (("front", 0), ("rear", 2)) if x.anchors_mm[k][1] > x.anchors_mm[k + 1][1]]
    across = f", the {' and the '.join(crossed)} pair crossed" if crossed else ""
    return (
        f"; each must hold {force_of(x.needed_dan, units)}; anchors on both sides, {front} from the deck's front for the front corners "
        f"and {rear} for the rear ones{across}"
    )


def more_needed(plan: Plan) -> str:
    """How many vehicles everything would need at the least, where there are fewer."""
    return f"; at least {plan.bound} would be needed" if plan.bound > len(plan.loads) else ""


def vehicles_words(plan: Plan) -> str:
    """``3 vehicles, and no plan does with fewer``."""
    number = counted(len(plan.loads), "vehicle")
    if not plan.loads:
        return "nothing is on a vehicle"
    if any(n.reason == FULL for n in plan.not_loaded):
        return f"{number}, full, and not everything is on them{more_needed(plan)}"
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
    alike: dict[str, list[str]] = {}
    for x in load.lashings:
        alike.setdefault(_holding(x, units), []).append(shown(x.piece))
    for how, held in alike.items():
        page.say(f"Hold {'each of ' if len(held) > 1 else ''}{'; '.join(held)}: {how}", indent=2, hang=4)
    for over in load.over_size:
        value, most = (
            (rounding.mass_with_unit(over.value, "up", units), rounding.mass_with_unit(over.limit, "down", units))
            if over.kind == "gross"
            else (rounding.length_with_unit(over.value, units), rounding.length_with_unit(over.limit, units))
        )
        page.say(f"OVER-SIZE, {over.kind}: {shown(over.name)} {value}, over {most} ({shown(over.rule)})", indent=2, hang=4)
    tilting = [f for f in load.findings if f.kind == "tilting"]
    for finding in load.findings:
        if finding.kind != "tilting" or len(tilting) < _FEW:
            page.say(f"{finding.level.capitalize()}: {finding_words(finding, units)}.", indent=2, hang=4)
    if len(tilting) >= _FEW:
        page.say(
            f"Note: {len(tilting)} stacks or rows can tilt; the lashings above hold them upright too. The page, the workbook and the "
            "JSON name each, with how many it takes.",
            indent=2,
            hang=4,
        )


def _holding(x: Lashing, units: Units) -> str:
    """How one piece or stack is held: number and kind of lashings, their angle, what governs, anchors; or what blocks it."""
    if x.method == "blocking":
        return spoken(x.rule, units)
    angle = "" if x.angle_deg is None else f" at {x.angle_deg:g}°"
    governs = "in all directions" if x.direction == "all" else f"{shown(x.direction)} governs"
    friction = "" if x.friction is None else f", friction {x.friction:g}"
    return f"{x.number} {shown(x.method)}{angle} ({governs}{friction})" + anchor_words(x, units)


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
