"""`takeoff weigh`: one section, one length, one mass."""

from __future__ import annotations

from typing import Annotated

import typer

from takeoff.cli import console
from takeoff.cli.options import JsonOption, MaterialOption, QuietOption, UnitsOption


def weigh(
    section: Annotated[
        str, typer.Argument(metavar="SECTION", help="A section or shape, such as 'UB 457x191x67', 'PL 10x200', 'Block 600x300x200'.")
    ],
    length: Annotated[
        str | None, typer.Argument(metavar="LENGTH", help="Its length: 6000, '6 m', '12 ft 6 in'. Bare numbers are mm.")
    ] = None,
    material: MaterialOption = None,
    quantity: Annotated[int, typer.Option(metavar="N", min=1, max=1_000_000, help="How many.")] = 1,
    units: UnitsOption = None,
    json: JsonOption = False,
    quiet: QuietOption = False,
) -> None:
    """Weigh one section, between its bounds: the bare piece, nothing fixed to it or in it.

    Example: takeoff weigh "UB 457x191x67" "7.2 m" --quantity 4
    """
    from takeoff.quantities import length_mm
    from takeoff.weighing.single import weigh_one

    found = weigh_one(section, None if length is None else length_mm(length), material, quantity)
    if json:
        console.out_json({
            "section": found.section.designation, "material": found.material.key if found.material else None,
            "quantity": found.quantity, "length_mm": found.length_mm, "volume_m3": found.volume_m3, "surface_m2": found.surface_m2,
            "bare_each_kg": found.each_kg.as_record(), "mass_each_kg": found.each_kg.as_record(),
            "mass_total_kg": found.total_kg.as_record(), "basis": found.basis.as_record(),
            "not_counted": list(NOT_COUNTED), "findings": [f.as_record() for f in found.findings], "cautions": list(CAUTIONS),
        })
    elif not quiet:
        from takeoff.reports.card import weighing_card

        console.out(weighing_card(found, units or "si", console.width(), NOT_COUNTED, CAUTIONS))


#: what a list may add to a piece, and a look-up never does: the mass is the bare piece's
NOT_COUNTED = ("welds", "bolts", "finish", "insulation", "contents", "water soaked up", "temporary steel", "rigging")

CAUTIONS = (
    "An estimate, not a lift plan: weigh before lifting or carrying where doubt remains. Plan on the heavy mass.",
    "Local codes and a competent, licensed person decide.",
)
