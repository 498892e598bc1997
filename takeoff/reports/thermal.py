"""The cards that `takeoff movement` and `takeoff fit` print: lengths in mm or inches, temperatures in °C or °F. Rank 9."""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.plainpage import Page
from takeoff.reports.rounding import NO_BREAK
from takeoff.reports.wording import shown
from takeoff.thermal import CAUTIONS, FIT_CAUTION

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.materials import Law, Material
    from takeoff.pipeline import Result
    from takeoff.reports.rounding import Units
    from takeoff.thermal.fits import Fit
    from takeoff.thermal.movement import Movement
    from takeoff.thermal.spread import AlphaSpread

_MOST_LINES, _MOST_RUNS = 27, 10
_NO = rounding.NO_FIGURE


def degrees(celsius: float, units: Units = "si") -> str:
    """``−20 °C``, or ``−4 °F``."""
    value = celsius * 1.8 + 32 if units == "us" else celsius
    return f"{value:.6g}".replace("-", "−") + NO_BREAK + ("°F" if units == "us" else "°C")


def size(mm: float | None, units: Units = "si", *, signed: bool = False, decimals: int = 2) -> str:
    """A length or movement without its unit, finer than anyone marks, so that it can be checked: hundredths of a mm."""
    if mm is None:
        return _NO
    value = mm / rounding.MM_PER_IN if units == "us" else mm
    text = rounding.number(value, decimals + 1 if units == "us" else decimals, gap=NO_BREAK)
    return f"+{text}" if signed and value > 0 else text


def unit(units: Units) -> str:
    return "in" if units == "us" else "mm"


def with_unit(mm: float | None, units: Units, *, signed: bool = False, decimals: int = 2) -> str:
    return size(mm, units, signed=signed, decimals=decimals) + NO_BREAK + unit(units)


def law_text(law: Law, units: Units = "si") -> str:
    """``structural steel: −50 °C to 100 °C constant coefficient; ...``"""
    words = {"row": "constant coefficient", "means": "printed mean coefficients"}
    pieces = (
        f"{degrees(p.from_C, units)} to {degrees(p.to_C, units)} {words.get(p.curve, p.curve)} ({p.source.evidence})" for p in law.pieces
    )
    return f"{law.name}: " + "; ".join(pieces) if law.pieces else "none: no coefficient is known"


def coefficient_text(material: Material, units: Units = "si") -> str:
    """The row's coefficient with its interval and source."""
    if material.alpha_per_K is None:
        return "not known"
    value = material.alpha_per_K * 1e6 / (1.8 if units == "us" else 1.0)
    text = f"{value:.3g} x 10^-6 per {'°F' if units == 'us' else 'K'}"
    if material.alpha_interval_C:
        low, high = material.alpha_interval_C
        text += f", {degrees(low, units)} to {degrees(high, units)}" if low != high else f", at {degrees(low, units)}"
    if material.alpha_direction not in ("", "isotropic"):
        text += f", {material.alpha_direction}"
    return f"{text}: {material.alpha_source}"


def movement_title(found: Movement, units: Units) -> str:
    """``structural steel, 60 000.00 mm: −20 °C to 45 °C``"""
    at = "" if found.length_at_C == 20.0 else f" at {degrees(found.length_at_C, units)}"
    return (
        f"{shown(found.material.name)}, {with_unit(found.length_mm, units)}{at}: {degrees(found.from_C, units)} to "
        f"{degrees(found.to_C, units)}"
    )


def movement_text(found: Movement, units: Units) -> str:
    """The movement between its bounds."""
    if found.movement_mm is None:
        return "none can be given"
    low, high = (size(mm, units, signed=True) for mm in (found.movement_low_mm, found.movement_high_mm))
    return f"{with_unit(found.movement_mm, units, signed=True)} (low {low}, high {high})"


def mean_text(found: Movement, units: Units) -> str:
    """The mean coefficient over the range."""
    mean = (found.mean_alpha_per_K or 0.0) * 1e6 / (1.8 if units == "us" else 1.0)
    return f"{mean:.4g} x 10^-6 per {'°F' if units == 'us' else 'K'} of the length at {degrees(20.0, units)}"


def direction_texts(found: Movement, units: Units) -> list[tuple[str, str]]:
    """What the same size moves across the grain or through the plies; none where a material grows alike every way."""
    return [
        (way.capitalize(), f"{with_unit(moved, units, signed=True)} for the same size {way} the grain or plies")
        for way, moved in found.by_direction_mm.items() if way not in ("along", "in plane")
    ]


def bounds_text(spread: AlphaSpread) -> str:
    return f"coefficient x {spread.low:.3f} to x {spread.high:.3f}: {spread.source}"


def movement_card(found: Movement, units: Units, width: int) -> str:
    """Lengths and tape readings, movement between bounds, against the other material, gaps, sources, cautions."""
    page = Page(min(width, 100))
    page.say(movement_title(found, units))
    page.blank()
    page.labelled("Movement", movement_text(found, units))
    if found.mean_alpha_per_K is not None:
        page.labelled("Mean", mean_text(found, units))
    for label, text in direction_texts(found, units):
        page.labelled(label, text)
    _beside(page, found, units)
    page.blank()
    page.table(
        [f"Length, {unit(units)}", "true", "steel tape reads"],
        [[degrees(x.temperature_C, units), size(x.length_mm, units), size(x.tape_reading_mm, units)] for x in found.lengths],
        indent=0,
    )
    _gap_table(page, found, units)
    page.blank()
    page.labelled("Expansion", coefficient_text(found.material, units))
    page.labelled("Law", law_text(found.law, units))
    page.labelled("Bounds", bounds_text(found.spread))
    if found.against is not None:
        page.labelled("Against", coefficient_text(found.against.material, units))
        page.labelled("Its law", law_text(found.against.law, units))
    _end(page, found.findings, CAUTIONS)
    return page.text()


def _beside(page: Page, found: Movement, units: Units) -> None:
    if found.against is None:
        return
    name = shown(found.against.material.name)
    page.labelled(
        "Against",
        f"{name} moves {with_unit(found.against.movement_mm, units, signed=True)}: difference "
        f"{with_unit(found.against.difference_mm, units, signed=True)}",
    )


def _gap_table(page: Page, found: Movement, units: Units) -> None:
    """The gap to set by temperature, every so many steps where all would be too long."""
    if found.movement_mm is None:
        return
    against = found.against is not None and found.against.difference_mm is not None
    page.blank()
    for text in setting_texts(found, units):
        page.say(text, hang=2)
    page.say(f"Gap to set by the metal's temperature that day, {gap_limits(found, units)}:", hang=2)
    every = -(-len(found.table) // _MOST_LINES)
    steps = [s for i, s in enumerate(found.table) if i % every == 0 or i == len(found.table) - 1]
    headings = [f"Gap, {unit(units)}", *(["against the other"] if against else []), "other side still" if against else "to set"]
    page.table(
        headings,
        [[degrees(s.temperature_C, units), *([size(s.against_mm, units)] if against else []), size(s.gap_mm, units)] for s in steps],
        indent=0,
    )
    if every > 1:
        page.say(f"Every {every}th step; all in the JSON.")


def setting_texts(found: Movement, units: Units) -> list[str]:
    """What the gap does after setting: one sentence, and one more with the high coefficient; none where nothing is set."""
    if found.set_at_C is None or found.movement_mm is None:
        return []
    gaps = found if found.against is None or found.against.difference_mm is None else found.against
    texts = [
        f"Set at {degrees(found.set_at_C, units)}: gap {with_unit(gaps.gap_to_set_mm, units)}; it closes by "
        f"{with_unit(gaps.closing_mm, units)} and opens by {with_unit(gaps.opening_mm, units)}"
        + ("." if gaps is found else " against the other material.")
    ]
    if found.spread.high > 1 and gaps is found:
        texts.append(
            f"With the high coefficient it closes by {with_unit(found.closing_high_mm, units)} and opens by "
            f"{with_unit(found.opening_high_mm, units)}: allow for that."
        )
    return texts


def gap_limits(found: Movement, units: Units) -> str:
    """``never under 5.00 mm and never over 80.00 mm``"""
    limits = []
    if found.gap_min_mm is not None or found.gap_max_mm is None:
        limits.append(f"never under {with_unit(found.gap_min_mm or 0.0, units)}")
    limits += [f"never over {with_unit(found.gap_max_mm, units)}"] if found.gap_max_mm is not None else []
    return " and ".join(limits)


def fit_card(found: Fit, units: Units, width: int) -> str:
    """Diameters at their temperatures, clearance or interference, the temperatures for a wanted clearance, sources, cautions."""
    page = Page(min(width, 100))
    page.say(
        f"Bore of {with_unit(found.bore_nominal_mm, units, decimals=3)} in {shown(found.bore_material.name)}, pin of "
        f"{with_unit(found.pin_nominal_mm, units, decimals=3)} in {shown(found.pin_material.name)}, both at {degrees(20.0, units)}"
    )
    page.blank()
    page.table(
        [f"Diameter, {unit(units)}", "at", "is"],
        [
            ["bore", degrees(found.bore_C, units), size(found.bore_mm, units, decimals=3)],
            ["pin", degrees(found.pin_C, units), size(found.pin_mm, units, decimals=3)],
        ],
        indent=0,
    )
    gap = found.clearance_mm
    if gap is not None:
        page.say(f"{'Clearance' if gap >= 0 else 'Interference'} {with_unit(abs(gap), units, decimals=3)} on the diameter.")
    if found.wanted_mm is not None:
        page.blank()
        page.say(f"For a clearance of {with_unit(found.wanted_mm, units, decimals=3)}:")
        for text, at in (
            (f"bring the bore to {{}}, the pin at {degrees(found.pin_C, units)}", found.heat_bore_to_C),
            (f"bring the pin to {{}}, the bore at {degrees(found.bore_C, units)}", found.cool_pin_to_C),
            ("bring both to {}", found.both_at_C),
        ):
            page.say(text.format("no temperature within its law" if at is None else degrees(round(at, 1), units)), 2)
    page.blank()
    for label, material, law in (("Bore", found.bore_material, found.bore_law), ("Pin", found.pin_material, found.pin_law)):
        page.labelled(label, coefficient_text(material, units))
        page.labelled("Its law", law_text(law, units))
    _end(page, found.findings, (*CAUTIONS, FIT_CAUTION))
    return page.text()


def schedule_part(page: Page, result: Result, units: Units) -> None:
    """In the summary of a run: where lengths at temperature stand, each line's movement, and what has no length."""
    at = result.temperatures
    if at is None:
        return
    page.heading("Temperatures")
    known = sum(1 for v in at.sizes_mm["reference"]["length"].tolist() if v == v)  # noqa: PLR0124
    names = ", ".join(f"{shown(name)} {degrees(t, units)}" for name, t in at.named.items())
    page.say(f"{known} rows have lengths at {names}; see the sheet Temperatures.", 2, 4)
    for run in result.movements[:_MOST_RUNS]:
        if run.movement_mm is not None:
            wide = [j.gap_to_set_mm for j in run.joints if j.gap_to_set_mm is not None]
            gaps = ""
            if wide:
                gaps = f"; gaps to set {size(min(wide), units)} to {with_unit(max(wide), units)} at {degrees(run.set_at_C, units)}"
            page.say(
                f"Run {shown(run.run)}, {with_unit(run.length_mm, units)}, fixed at the {shown(run.fixed_at)}: moves "
                f"{with_unit(run.movement_mm, units)} from {degrees(run.from_C, units)} to {degrees(run.to_C, units)}{gaps}.",
                2,
                4,
            )
        for finding in run.findings:
            if finding.level != "note":
                read = f" (read: {shown(finding.read)!r})" if finding.read else ""
                page.say(f"{finding.level.capitalize()}: {shown(finding.message)}{read}.", 4, 6)
    if len(result.movements) > _MOST_RUNS:
        page.say(f"and {len(result.movements) - _MOST_RUNS} more runs; the schedule lists every one", 2)
    for finding in result.log.gathered():
        if finding.level == "refused" and finding.kind in ("above-melting", "no-coefficient"):
            page.say(f"No length: {shown(finding.message)}; {shown(', '.join(finding.cells[:8]))}. The mass stands.", 2, 4)


def _end(page: Page, findings: tuple[Finding, ...], cautions: tuple[str, ...]) -> None:
    if findings:
        page.blank()
    for finding in findings:
        page.labelled(finding.level.capitalize(), shown(finding.message))
    page.blank()
    for caution in cautions:
        page.say(caution)
