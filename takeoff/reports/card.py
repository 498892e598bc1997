"""The card that `takeoff weigh` prints. Rank 9."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.plainpage import Page
from takeoff.reports.wording import listed, shown

if TYPE_CHECKING:
    from takeoff.reports.rounding import Units
    from takeoff.weighing.single import Weighing


def weighing_card(found: Weighing, units: Units, width: int, not_counted: Sequence[str], cautions: Iterable[str]) -> str:
    """What the pieces are, their bare mass between bounds, what is not in it, on what it rests, what was assumed, the cautions."""
    page = Page(width)
    length = f", {rounding.length_with_unit(found.length_mm, units)}" if found.length_mm is not None else ""
    material = f", {found.material.name}" if found.material else ""
    page.say(shown(f"{found.quantity} x {found.section.designation}{length}{material}"))
    page.blank()
    unit = rounding.mass_unit(units)
    rows = [["each", *rounding.bounds(found.each_kg, units)]]
    if found.quantity > 1:
        rows.append(["in all", *rounding.bounds(found.total_kg, units)])
    page.table([f"Bare mass, {unit}", "light", "nominal", "heavy"], rows, indent=0)
    page.say(f"Not counted: {listed(not_counted)}. What hangs on a hook is heavier.", hang=2)
    page.blank()
    page.labelled("Nominal", f"{found.basis.rule}: {found.basis.nominal}")
    page.labelled("Bounds", f"{found.basis.bounds_rule}: {found.basis.bounds}")
    for finding in found.findings:
        page.labelled(finding.level.capitalize(), shown(finding.message))
    page.blank()
    for caution in cautions:
        page.say(caution)
    return page.text()
