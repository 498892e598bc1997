"""`takeoff material`: a card of one material, a comparison of several, the rows of a family, the families."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Annotated, Any

import typer

from takeoff.cli import console
from takeoff.cli.options import JsonOption, QuietOption, UnitsOption
from takeoff.errors import TakeoffError

if TYPE_CHECKING:
    from takeoff.bounds import Spread
    from takeoff.materials import DensityAt, Elongation, Law, Material, MaterialMatch
    from takeoff.reports.plainpage import Page
    from takeoff.reports.rounding import Way

CAUTION = (
    "Caution: the high density is for lifting and axle loads; moisture, coatings and contents are not in these figures. Have "
    "lifts planned by a competent person."
)
KG_M3_PER_LB_FT3 = 0.45359237 / 0.3048**3
_INCHES_PER_100_FT = 1200.0
_NAMES_SHOWN = 24
_NO_BREAK = "\u00a0"


@dataclass(frozen=True, slots=True)
class Answer:
    """One query, answered: the match, and what was asked about the material it found."""

    match: MaterialMatch
    material: Material | None
    law: Law | None
    at: tuple[tuple[float, Elongation, DensityAt], ...]
    moisture: str

    @property
    def sure(self) -> bool:
        """Whether the name was plain and every temperature has an answer."""
        found = all(grown.value is not None or density.density is not None for _, grown, density in self.at)
        return self.match.match in ("exact", "alias") and found


def material(
    names: Annotated[
        list[str] | None,
        typer.Argument(metavar="NAME", help="Materials: designations, trade words, in several languages."),
    ] = None,
    at: Annotated[
        list[str] | None, typer.Option(metavar="TEMP", help="A temperature: 60, 60C, 140F or 77K. May be repeated.")
    ] = None,
    law: Annotated[
        str | None, typer.Option(metavar="CURVE", help="One published curve alone, by name, in place of the material's own law.")
    ] = None,
    moisture: Annotated[
        float | None, typer.Option(metavar="PCT", help="Wood's moisture, percent of the oven-dry mass, 0 to 200.")
    ] = None,
    family: Annotated[str | None, typer.Option(metavar="NAME", help="List the materials of a family.")] = None,
    json: JsonOption = False,
    units: UnitsOption = None,
    quiet: QuietOption = False,
) -> None:
    """Look up materials: density with its spread, expansion, both at a temperature, and where the figures come from.

    Example: takeoff material 1.4301 --at -196C --at 400C

    Example: takeoff material oak Eiche "chêne" --moisture 25
    """
    temperatures = _temperatures(at or [])
    us = units == "us"
    if not names:
        if temperatures or law or moisture is not None:
            raise TakeoffError("no material is named", right="a name, such as: takeoff material 1.4301 --at 60C")
        if family is None:
            _show(_families_record() if json else None, None if json or quiet else _families())
        else:
            _show(_family_record(family) if json else None, None if json or quiet else _family(family, us))
        return
    if family is not None:
        raise TakeoffError("a name and --family were both given", right="one of the two")
    answers = [_answer(name, temperatures, law, moisture, json) for name in names]
    if moisture is not None and not any(a.moisture for a in answers) and any(a.material for a in answers):
        raise TakeoffError("moisture applies to wood only", read=", ".join(names)[:80], right="a wood, or no --moisture")
    if json:
        console.out_json([_record(answer) for answer in answers])
    elif not quiet:
        console.out(_card(answers[0], us) if len(answers) == 1 else _comparison(answers, us))
    if not all(answer.sure for answer in answers):
        raise typer.Exit(1)


def _temperatures(texts: list[str]) -> list[float]:
    """Temperatures in °C. Raises UnitError on other text and below absolute zero."""
    if not texts:
        return []
    from takeoff.quantities import temperature_C

    return [temperature_C(text) for text in texts]


def _show(record: Any, text: str | None) -> None:
    if record is not None:
        console.out_json(record)
    elif text is not None:
        console.out(text)


def _answer(name: str, temperatures: list[float], law: str | None, moisture: float | None, full: bool) -> Answer:
    """Look one name up, and work out what was asked of it; `full` with the law's sources in any case.

    Raises TakeoffError on an unknown law or impossible moisture.
    """
    from takeoff import materials

    match = materials.lookup(name)
    found = match.material
    if found is None:
        return Answer(match, None, None, (), "")
    wet = ""
    if moisture is not None and found.is_wood:
        known = materials.wood_density(found, moisture)
        wet = f"{moisture:g} % moisture: {known.limits}" + ("; every pore full of water" if known.saturated else "")
        found = replace(
            found, density=known.density, density_source=known.source, density_condition=f"{moisture:g} % moisture content"
        )
    # Without a temperature the law's name and reach are enough: the curves themselves stay unread.
    chain = materials.law_of(found, law) if law or (found.law and (temperatures or full)) else None
    at = tuple(
        (t, materials.elongation(found, t, law=law), materials.density_at(found, t, law=law)) for t in temperatures
    )
    return Answer(match, found, chain, at, wet)


# -- JSON --------------------------------------------------------------------------------------------------------------


def _record(answer: Answer) -> dict[str, Any]:
    """One query's object: SI, unrounded, what is absent null."""
    match, found = answer.match, answer.material
    return {
        "query": match.query,
        "match": match.match,
        "score": match.score,
        "reason": match.reason,
        "candidates": [{"key": c.key, "name": c.name, "score": c.score} for c in match.candidates],
        "material": None if found is None else _material_record(answer, found),
    }


def _material_record(answer: Answer, found: Material) -> dict[str, Any]:
    law = answer.law
    return {
        "key": found.key,
        "name": found.name,
        "family": found.family,
        "kind": found.kind,
        "designations": list(found.designations),
        "aliases": list(found.aliases),
        "density_kg_m3": found.density.as_record(),
        "density_condition": found.density_condition,
        "density_source": found.density_source.as_record(),
        "density_bounds_filled": list(found.filled),
        "alpha_per_K": found.alpha_per_K,
        "alpha_interval_C": None if found.alpha_interval_C is None else list(found.alpha_interval_C),
        "alpha_direction": found.alpha_direction or None,
        "alpha_source": None if found.alpha_source is None else found.alpha_source.as_record(),
        "law": None if law is None else {
            "name": law.name,
            "pieces": [{"from_C": p.from_C, "to_C": p.to_C, "source": p.source.as_record()} for p in law.pieces],
        },
        "melting_C": found.melting_C,
        "note": found.note,
        "own": found.own,
        "at": [
            {
                "temperature_C": t,
                "elongation": grown.value,
                "elongation_by_direction": {way.replace(" ", "_"): value for way, value in grown.by_direction.items()},
                "density_kg_m3": None if density.density is None else density.density.nominal,
                "within_validity": grown.within_validity if grown.value is not None else density.within_validity,
                "reason": (grown.reason if grown.value is not None else density.reason or grown.reason) or None,
            }
            for t, grown, density in answer.at
        ],
        "cautions": [CAUTION],
    }  # fmt: skip


def _families_record() -> list[dict[str, Any]]:
    return [{"family": name, "kind": kind, "materials": count} for name, kind, count in _family_counts()]


def _family_counts() -> list[tuple[str, str, int]]:
    from takeoff import materials

    counts: dict[str, int] = {}
    for found in materials.all_materials():
        counts[found.family] = counts.get(found.family, 0) + 1
    return [(name, spread.kind, counts.get(name, 0)) for name, spread in materials.families().items()]


def _of_family(family: str) -> list[Material]:
    """The materials of a family or a kind. Raises TakeoffError where there is no such family."""
    from takeoff import materials

    wanted = " ".join(family.casefold().split())
    found = [m for m in materials.all_materials() if wanted in (m.family, m.kind)]
    if not found:
        raise TakeoffError("no such family", read=family[:80], right="one of " + ", ".join(materials.families()))
    return found


def _family_record(family: str) -> list[dict[str, Any]]:
    return [
        {"key": m.key, "name": m.name, "family": m.family, "density_kg_m3": m.density.as_record(), "alpha_per_K": m.alpha_per_K}
        for m in _of_family(family)
    ]


# -- text --------------------------------------------------------------------------------------------------------------


def _density(value: float | None, us: bool, way: Way = "nearest") -> str:
    """A density as a figure: low rounds down, high rounds up."""
    from takeoff.reports import rounding

    if value is None:
        return "give one"
    shown = value / KG_M3_PER_LB_FT3 if us else value
    decimals = 1 if us or (shown < 2000 and abs(shown - round(shown)) > 1e-6) else 0
    return rounding.number(shown, decimals, way, gap=rounding.NO_BREAK)


def _spread(spread: Spread, us: bool) -> str:
    unit = "lb/ft³" if us else "kg/m³"
    low, high = _density(spread.low, us, "down"), _density(spread.high, us, "up")
    if spread.nominal is None:
        return f"no nominal: give one ({low} to {high} {unit})"
    return f"{_density(spread.nominal, us)}{_NO_BREAK}{unit} (low {low}, high {high})"


def _degrees(celsius: float, us: bool) -> str:
    value = celsius * 1.8 + 32 if us else celsius
    return f"{value:.6g}".replace("-", "−") + _NO_BREAK + ("°F" if us else "°C")


def _alpha(found: Material, us: bool) -> str:
    if found.alpha_per_K is None:
        return "none given: a liquid, see its density at a temperature" if found.kind == "liquid" else "not known"
    value = found.alpha_per_K * 1e6 / (1.8 if us else 1.0)
    text = f"{value:.3g} x 10^-6 per {'°F' if us else 'K'}"
    if found.alpha_interval_C:
        low, high = found.alpha_interval_C
        text += f", {_degrees(low, us)} to {_degrees(high, us)}" if low != high else f", at {_degrees(low, us)}"
    if found.alpha_direction not in ("", "isotropic"):
        text += f", {found.alpha_direction}"
    return text


def _growth(value: float | None, us: bool) -> str:
    if value is None:
        return "no length"
    return f"{value * _INCHES_PER_100_FT:+.3f} in per 100 ft" if us else f"{value * 1000:+.3f} mm/m"


def _at_line(grown: Elongation, density: DensityAt, us: bool) -> str:
    """What one temperature does: length, other directions, density, and a word where the law does not reach."""
    parts = [] if grown.value is None and density.density is not None else [_growth(grown.value, us).replace("-", "−")]
    parts += [f"{way} {_growth(v, us)}".replace("-", "−") for way, v in grown.by_direction.items() if v != grown.value]
    if density.density is not None:
        parts.append(_spread(density.density, us) if density.density.low != density.density.high else
                     f"{_density(density.density.nominal, us)} {'lb/ft³' if us else 'kg/m³'}")  # fmt: skip
    reason = grown.reason if grown.value is not None else density.reason or grown.reason
    return "; ".join(parts) + (f" [{reason}]" if reason else "")


def _page() -> Page:
    from takeoff.reports.plainpage import Page

    return Page(min(console.width(), 100))


def _shown(text: str) -> str:
    from takeoff.reports.wording import shown

    return shown(text)[:120]


def _unsure(page: Page, match: MaterialMatch) -> None:
    """A query without a sure answer: what it may mean, or that nothing is like it."""
    said = {"similar": "similar, to be confirmed", "ambiguous": "ambiguous", "none": "not found"}[match.match]
    page.say(f"{_shown(match.query)}: {said}" + (f" ({match.reason})" if match.reason else ""), hang=2)
    if match.material is not None:
        return
    if match.candidates:
        page.say("Perhaps:")
        for candidate in match.candidates:
            page.say(f"{candidate.key}: {candidate.name}", 2, 4)
    else:
        page.say("Nothing in the table is like it. takeoff material lists the families.", 2)


def _card(answer: Answer, us: bool) -> str:
    page = _page()
    found, match = answer.material, answer.match
    if found is None:
        _unsure(page, match)
        return page.text()
    page.say(f"{found.name}" + (f"  [{found.key}]" if found.key != found.name.casefold() else ""))
    page.say(f"{found.family}; {_asked(match)}")
    page.blank()
    if match.match == "similar":
        page.labelled("Match", f"similar ({match.score:g} %), to be confirmed: {match.reason}")
    if found.own:
        page.labelled("Own", "from your own table" + (", in place of ours" if found.overrides else ""))
    page.labelled("Density", _spread(found.density, us) + (f", {found.density_condition}" if found.density_condition else ""))
    page.say(f"{found.density_source}", 10)
    for filled in found.filled:
        page.say(f"filled: {filled}", 10)
    if answer.moisture:
        page.labelled("Moisture", answer.moisture)
    page.labelled("Expansion", _alpha(found, us))
    if found.alpha_source is not None:
        page.say(f"{found.alpha_source}", 10)
    if answer.law is not None and answer.law.pieces:
        stretches = [
            f"{_degrees(p.from_C, us)} to {_degrees(p.to_C, us)} {_piece_name(p.curve)}" for p in answer.law.pieces
        ]
        page.labelled("Law", f"{answer.law.name}: " + "; ".join(stretches))
    elif found.law:
        page.labelled("Law", _law_outline(found, us))
    for t, grown, density in answer.at:
        page.labelled(_degrees(t, us), _at_line(grown, density, us))
    if found.melting_C is not None:
        page.labelled("Melts", f"from {_degrees(found.melting_C, us)}")
    others = [n for n in (*found.designations, *found.aliases) if n.casefold() != match.query.casefold()]
    if others:
        more = len(others) - _NAMES_SHOWN
        page.labelled("Names", ", ".join(others[:_NAMES_SHOWN]) + (f", and {more} more (--json)" if more > 0 else ""))
    if found.note:
        page.labelled("Note", found.note)
    page.blank()
    page.say(CAUTION)
    return page.text()


def _asked(match: MaterialMatch) -> str:
    words = {"exact": "its designation", "alias": "a name of it", "similar": "a similar name"}
    return f"asked for as {_shown(match.query)}, {words.get(match.match, match.match)}"


def _law_outline(found: Material, us: bool) -> str:
    from takeoff.materials.laws import laws, row_range

    parts = []
    for from_C, to_C, curve in laws()[found.law]:
        low, high = (from_C, to_C) if curve != "row" or to_C is None else row_range(found.law, from_C, to_C, found.alpha_interval_C)
        reach = f"{_degrees(low, us)} to {_degrees(high, us)}" if high is not None else f"from {_degrees(low, us)}"
        parts.append(f"{reach} {_piece_name(curve)}")
    return f"{found.law}: " + "; ".join(parts)


def _piece_name(curve: str) -> str:
    return {"row": "constant coefficient", "means": "printed mean coefficients"}.get(curve, curve)


def _comparison(answers: list[Answer], us: bool) -> str:
    """One line a query, then temperatures, then the sources, then what is not sure."""
    page = _page()
    known = [(a, a.material) for a in answers if a.material is not None]
    if known:
        unit = "lb/ft³" if us else "kg/m³"
        rows = [
            [
                f"{_shown(a.match.query)}: {m.name}", _density(m.density.nominal, us), _density(m.density.low, us, "down"),
                _density(m.density.high, us, "up"),
                "-" if m.alpha_per_K is None else f"{m.alpha_per_K * 1e6 / (1.8 if us else 1):.3g}",
                m.density_source.evidence,
            ]
            for a, m in known
        ]  # fmt: skip
        page.table([f"Density, {unit}", "nominal", "low", "high", f"10^-6/{'°F' if us else 'K'}", "evidence"], rows, indent=0)
        for a, m in known:
            for t, grown, density in a.at:
                page.say(f"{m.name} at {_degrees(t, us)}: {_at_line(grown, density, us)}", 2, 4)
        page.heading("Sources")
        sources = [f"{m.name}{', ' + m.density_condition if m.density_condition else ''}: {m.density_source}" for _, m in known]
        for source in dict.fromkeys(sources):
            page.say(source, 2, 4)
        for text in dict.fromkeys(a.moisture for a, _ in known if a.moisture):
            page.say(text)
    for a in answers:
        if a.match.match not in ("exact", "alias"):
            page.blank()
            _unsure(page, a.match)
    page.blank()
    page.say(CAUTION)
    return page.text()


def _families() -> str:
    page = _page()
    page.table(["Family", "kind", "materials"], [[name, kind, str(count)] for name, kind, count in _family_counts()], indent=0)
    page.blank()
    page.say("takeoff material --family F lists one; takeoff material NAME shows one material.")
    return page.text()


def _family(family: str, us: bool) -> str:
    page = _page()
    rows = [
        [f"{m.key}: {m.name}", _density(m.density.nominal, us), _density(m.density.low, us, "down"), _density(m.density.high, us, "up")]
        for m in _of_family(family)
    ]
    page.table([f"Density, {'lb/ft³' if us else 'kg/m³'}", "nominal", "low", "high"], rows, indent=0)
    return page.text()
