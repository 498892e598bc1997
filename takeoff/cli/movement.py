"""`takeoff movement`: how far a length moves between two temperatures, and the gap to set."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from takeoff.cli import console
from takeoff.cli.options import JsonOption, PageOption, QuietOption, ReplaceOption, UnitsOption
from takeoff.quantities import length_mm, temperature_C

if TYPE_CHECKING:
    from takeoff.materials import Law, Material, MaterialMatch
    from takeoff.thermal.movement import Movement


def movement(
    material: Annotated[str, typer.Argument(metavar="MATERIAL", help="A material: a designation or a trade word.")],
    length: Annotated[str, typer.Argument(metavar="LENGTH", help="A length: 6000, '60 m', \"40 ft\". Bare numbers are mm.")],
    from_: Annotated[str, typer.Option("--from", metavar="TEMP", help="The metal's first temperature: -20, -20C, 5F.")],
    to: Annotated[str, typer.Option(metavar="TEMP", help="Its second temperature. Growth counts positive.")],
    length_at: Annotated[str, typer.Option(metavar="TEMP", help="The temperature at which LENGTH is true.")] = "20C",
    set_at: Annotated[str | None, typer.Option(metavar="TEMP", help="The metal's temperature when the gap is set.")] = None,
    gap_min: Annotated[str | None, typer.Option(metavar="MM", help="The least the gap may close to; else it just closes.")] = None,
    gap_max: Annotated[str | None, typer.Option(metavar="MM", help="The most the gap may open to.")] = None,
    against: Annotated[str | None, typer.Option(metavar="MATERIAL", help="The same length of another material beside it.")] = None,
    law: Annotated[
        str | None, typer.Option(metavar="CURVE", help="One published curve alone, by name, in place of the material's own law.")
    ] = None,
    page: PageOption = None,
    replace: ReplaceOption = False,
    units: UnitsOption = None,
    json: JsonOption = False,
    quiet: QuietOption = False,
) -> None:
    """Movement of a length between two temperatures of the metal, alone or against another, and the gap to set.

    Example: takeoff movement S355 "60 m" --from -20 --to 45 --set-at 5
    """
    from takeoff.cli.pages import check_output, write_text
    from takeoff.thermal import movement as thermal

    check_output(page, [], replace=replace)
    size = length_mm(length)
    range_C = [temperature_C(text) for text in (from_, to, length_at)]
    setting = None if set_at is None else temperature_C(set_at)
    gaps = [None if text is None else length_mm(text) for text in (gap_min, gap_max)]
    ours, theirs = sure_materials(material, against)
    found = thermal.movement(
        ours, size, range_C[0], range_C[1], length_at_C=range_C[2], set_at_C=setting, gap_min_mm=gaps[0], gap_max_mm=gaps[1],
        against=theirs, law=law,
    )
    if page is not None:
        from takeoff.reports.page.single import movement_page

        write_text(page, movement_page(found, units or "si"), [], replace=replace, quiet=quiet)
    if json:
        console.out_json(_record(found))
    elif not quiet:
        from takeoff.reports.thermal import movement_card

        console.out(movement_card(found, units or "si", console.width()))
    if not found.answered:
        raise typer.Exit(1)


def sure_materials(name: str, other: str | None) -> tuple[Material, Material | None]:
    """The materials two texts surely name. What is not sure is said on standard error, and ends the command with status 1."""
    found = [None if text is None else _look_up(text) for text in (name, other)]
    if any(match is not None and (match.material is None or match.match == "similar") for match in found):
        for match in found:
            if match is not None and (match.material is None or match.match == "similar"):
                console.err(f"takeoff: {_unsure(match)}")
        raise typer.Exit(1)
    first, second = (None if match is None else match.material for match in found)
    assert first is not None
    return first, second


def _look_up(text: str) -> MaterialMatch:
    from takeoff import materials

    return materials.lookup(text)


def _unsure(match: MaterialMatch) -> str:
    from takeoff.reports.wording import shown

    names = [f"{c.key} ({c.name})" for c in match.candidates[:5]]
    if match.material is not None:
        names = [f"{match.material.key} ({match.material.name})"]
    why = {"ambiguous": "several materials answer to this name", "similar": "no material has quite this name"}
    said = why.get(match.match, match.reason or "no material of this name is known")
    perhaps = f" Perhaps: {', '.join(names)}." if names else " takeoff material lists the families."
    return f"{said} (read: {shown(match.query)[:80]!r}).{perhaps}"


# -- JSON --------------------------------------------------------------------------------------------------------------


def law_record(law: Law) -> dict[str, Any]:
    """A law with its pieces, each with its range, curve and source."""
    return {
        "name": law.name,
        "pieces": [{"from_C": p.from_C, "to_C": p.to_C, "curve": p.curve, "source": p.source.as_record()} for p in law.pieces],
    }


def coefficient_record(material: Material) -> dict[str, Any]:
    """The row's own coefficient, its interval, direction and source."""
    return {
        "alpha_per_K": material.alpha_per_K,
        "alpha_interval_C": None if material.alpha_interval_C is None else list(material.alpha_interval_C),
        "alpha_direction": material.alpha_direction or None,
        "alpha_source": None if material.alpha_source is None else material.alpha_source.as_record(),
    }


def _record(found: Movement) -> dict[str, Any]:
    """The look-up's object: SI, unrounded, what is absent null."""
    from takeoff.thermal import CAUTIONS

    beside = found.against
    return {
        "material": found.material.key, "name": found.material.name, "length_mm": found.length_mm, "length_at_C": found.length_at_C,
        "from_C": found.from_C, "to_C": found.to_C, "movement_mm": found.movement_mm, "movement_low_mm": found.movement_low_mm,
        "movement_high_mm": found.movement_high_mm, "mean_alpha_per_K": found.mean_alpha_per_K,
        "movement_by_direction_mm": found.by_direction_mm,
        "bounds": {"low_share": found.spread.low, "high_share": found.spread.high, "source": found.spread.source.as_record()},
        "lengths": [
            {"temperature_C": x.temperature_C, "length_mm": x.length_mm, "tape_reading_mm": x.tape_reading_mm,
             "within_validity": x.within_validity, "reason": x.reason or None}
            for x in found.lengths
        ],
        "set_at_C": found.set_at_C, "closing_mm": found.closing_mm, "opening_mm": found.opening_mm,
        "closing_high_mm": found.closing_high_mm, "opening_high_mm": found.opening_high_mm, "gap_min_mm": found.gap_min_mm,
        "gap_max_mm": found.gap_max_mm, "gap_to_set_mm": found.gap_to_set_mm,
        "table": [{"temperature_C": s.temperature_C, "gap_mm": s.gap_mm, "gap_against_mm": s.against_mm} for s in found.table],
        **coefficient_record(found.material), "law": law_record(found.law),
        "against": None if beside is None else {
            "material": beside.material.key, "name": beside.material.name, "movement_mm": beside.movement_mm,
            "difference_mm": beside.difference_mm, "closing_mm": beside.closing_mm, "opening_mm": beside.opening_mm,
            "gap_to_set_mm": beside.gap_to_set_mm, **coefficient_record(beside.material), "law": law_record(beside.law),
        },
        "findings": [f.as_record() for f in found.findings], "cautions": list(CAUTIONS),
    }
