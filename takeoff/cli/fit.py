"""`takeoff fit`: a pin in a bore at two temperatures."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from takeoff.cli import console
from takeoff.cli.movement import coefficient_record, law_record, sure_materials
from takeoff.cli.options import JsonOption, QuietOption, UnitsOption
from takeoff.quantities import length_mm, temperature_C

if TYPE_CHECKING:
    from takeoff.thermal.fits import Fit


def fit(
    bore_material: Annotated[str, typer.Argument(metavar="BORE_MATERIAL", help="What the ring or hub is made of.")],
    bore: Annotated[str, typer.Argument(metavar="BORE", help="Its bore at 20 °C: 99.95, '99.95 mm', '4 in'. Bare numbers are mm.")],
    pin_material: Annotated[str, typer.Argument(metavar="PIN_MATERIAL", help="What the pin or shaft is made of.")],
    pin: Annotated[str, typer.Argument(metavar="PIN", help="Its diameter at 20 °C.")],
    bore_at: Annotated[str | None, typer.Option(metavar="TEMP", help="The temperature of the bore; else 20 °C.")] = None,
    pin_at: Annotated[str | None, typer.Option(metavar="TEMP", help="The temperature of the pin; else 20 °C.")] = None,
    clearance: Annotated[
        str | None, typer.Option(metavar="MM", help="The clearance wanted: the temperature that gives it (of the bore, or of the pin "
                                                    "where only --bore-at is given).")
    ] = None,
    units: UnitsOption = None,
    json: JsonOption = False,
    quiet: QuietOption = False,
) -> None:
    """Clearance or interference of a pin in a bore, each at its temperature, and the temperature for a wanted clearance.

    Example: takeoff fit S355 99.92 S355 100 --clearance 0.1
    """
    from takeoff.thermal import fits

    sizes = [length_mm(text) for text in (bore, pin)]
    at = [None if text is None else temperature_C(text) for text in (bore_at, pin_at)]
    wanted = None if clearance is None else length_mm(clearance)
    ring, shaft = sure_materials(bore_material, pin_material)
    assert shaft is not None
    found = fits.fit(ring, sizes[0], shaft, sizes[1], bore_C=at[0], pin_C=at[1], clearance_mm=wanted)
    if json:
        console.out_json(_record(found))
    elif not quiet:
        from takeoff.reports.thermal import fit_card

        console.out(fit_card(found, units or "si", console.width()))
    if not found.answered:
        raise typer.Exit(1)


def _record(found: Fit) -> dict[str, Any]:
    """The look-up's object: SI, unrounded, what is absent null."""
    from takeoff.thermal import CAUTIONS, FIT_CAUTION

    return {
        "bore_material": found.bore_material.key, "pin_material": found.pin_material.key,
        "bore_at_20C_mm": found.bore_nominal_mm, "pin_at_20C_mm": found.pin_nominal_mm,
        "bore_mm": found.bore_mm, "pin_mm": found.pin_mm, "clearance_mm": found.clearance_mm,
        "temperatures_C": {"bore": found.bore_C, "pin": found.pin_C},
        "clearance_wanted_mm": found.wanted_mm, "temperature_of": found.part if found.wanted_mm is not None else None,
        "temperature_for_clearance_C": found.temperature_for_clearance_C, "heat_bore_to_C": found.heat_bore_to_C,
        "cool_pin_to_C": found.cool_pin_to_C, "both_at_C": found.both_at_C,
        "bore": {**coefficient_record(found.bore_material), "law": law_record(found.bore_law)},
        "pin": {**coefficient_record(found.pin_material), "law": law_record(found.pin_law)},
        "findings": [f.as_record() for f in found.findings], "cautions": [*CAUTIONS, FIT_CAUTION],
    }

