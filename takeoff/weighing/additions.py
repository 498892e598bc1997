"""What is added to the bare piece: finish, welds, bolts, contents, insulation, water soaked up. Rank 4.

Each kind is its own column with its own bounds and basis; bare + additions = each. A cell that is not understood is
said, and its row is marked as one whose finish or contents are open; it is never taken as zero unseen.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from takeoff.bounds import Bounds
from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.provenance import EVIDENCE, Source
from takeoff.weighing import contents, filled, finishes, insulation
from takeoff.weighing.basis import Basis
from takeoff.weighing.shape import Shape, thickness_mm
from takeoff.weighing.soaking import says_soaked, soaking
from takeoff.weighing.work import Work

if TYPE_CHECKING:
    from takeoff.materials import Material
    from takeoff.weighing.filled import Filled
    from takeoff.weighing.finishes import Coat, Finish
    from takeoff.weighing.work import Floats, Ints

#: every kind of addition, in the order outputs show them, with what it is called
KINDS = {
    "finish": "finish", "weld": "welds", "bolt": "bolts", "contents": "contents", "insulation": "insulation", "soaked": "water soaked up",
}
_FERROUS = ("carbon steel", "cast iron")


def add_all(work: Work) -> None:
    """Fill `work.additions`. Raises JobError where the job's default finish is not understood."""
    shape = Shape(work)
    _finishes(work, shape)
    _percents(work)
    _contents(work, shape)
    _insulation(work, shape)


def _add_times(work: Work, kind: str, rows: Ints, amount: Floats, factors: Bounds, basis: Basis) -> None:
    """Add an amount (m³, m², m or kg a piece) times its light, nominal and heavy factor."""
    work.add(kind, rows, (amount * factors.light, amount * factors.nominal, amount * factors.heavy), basis)


# --- finish ----------------------------------------------------------------------------------------------------------

def _finishes(work: Work, shape: Shape) -> None:
    import numpy as np

    stated = (work.job.masses.stated_minus_percent, work.job.masses.stated_plus_percent)
    known = ~np.isnan(work.nominal)
    typed = np.zeros(work.count, dtype=bool)
    wanted: list[tuple[str, Ints, Finish]] = []
    for text, rows in work.texts("finish"):
        typed[rows] = True
        wanted.append((text, rows[known[rows]], finishes.read(text, stated)))
    default = work.job.masses.finish
    if default is not None:
        found = finishes.read(default, stated)
        if found.unknown:
            raise JobError("masses.finish is not understood", file=work.job.path, read=found.unknown[0][0], right=found.unknown[0][1])
        # The job's finish is for the steel that names none; no one galvanizes an oak board or a bought-out winch.
        ferrous = work.of_material([m.family in _FERROUS for m in work.materials])
        wanted.append((default, np.flatnonzero(known & ~typed & ferrous & ~shape.by_mass), found))
    if not any(len(rows) and found.coats for _, rows, found in wanted):
        _say_finishes(work, wanted)
        return
    bore = shape.bore_m2() if any(c.bore_too for _, _, f in wanted for c in f.coats) else np.zeros(work.count)
    zinc: dict[str, tuple[Floats, Floats]] = {}
    for standard in {c.zinc for _, _, f in wanted for c in f.coats if c.zinc}:
        thin, thick = thickness_mm(work)
        castings = work.of_material([m.family == "cast iron" for m in work.materials])
        tubes = work.of_section([1.0 if s.inner_area_mm2 else 0.0 for s in work.sections]) == 1.0
        zinc[standard] = tuple(  # type: ignore[assignment]
            finishes.zinc_kg_m2(standard, t, castings=castings, tubes=tubes) for t in (thin, thick)
        )
    for _text, rows, found in wanted:
        if len(rows) and found.coats:
            _add_finish(work, shape, rows, found, bore, zinc)
    _say_finishes(work, wanted)


def _add_finish(work: Work, shape: Shape, rows: Ints, found: Finish, bore: Floats, zinc: dict[str, tuple[Floats, Floats]]) -> None:
    import numpy as np

    outside = shape.outside_m2[rows]
    light, nominal, heavy = (np.zeros(len(rows)) for _ in range(3))
    share = finishes.zinc_share()
    for coat in found.coats:
        surface = outside + bore[rows] if coat.bore_too else outside
        if coat.zinc:
            thin, thick = (z[rows] for z in zinc[coat.zinc])
            low, high = np.minimum(thin, thick), np.maximum(thin, thick)
            light += surface * low * share.light
            nominal += surface * high * share.nominal
            heavy += surface * high * share.heavy
        elif coat.kg_m2:
            light += surface * coat.kg_m2.light
            nominal += surface * coat.kg_m2.nominal
            heavy += surface * coat.kg_m2.heavy
    work.add("finish", rows, (light, nominal, heavy), _coats_basis(found.coats))
    blind = np.isnan(outside)
    if not blind.any():
        return
    unsurfaced = rows[blind]
    if any(c.bore_too for c in found.coats):
        percent, source = finishes.on_a_mass()
        mass = work.nominal[unsurfaced] / 100
        rule = f"zinc on a piece known by its mass: {percent.light:g} to {percent.heavy:g} % of it"
        _add_times(work, "finish", unsurfaced, mass, percent, Basis(rule, source, rule, source))
        work.say(Finding("note", "not-added", "the surface of a piece known by its mass is not: the mass is taken as with its zinc, "
                         f"and heavy allows {percent.heavy:g} % more", right="the piece's mass with its zinc"), unsurfaced, "finish")
    if any(not c.bore_too for c in found.coats):
        work.finish_open[unsurfaced] = True
        work.say(Finding("note", "not-added", "the surface of a piece known by its mass is not: its paint or fire protection is not added",
                         right="the piece's mass with its finish"), unsurfaced, "finish")


def _say_finishes(work: Work, wanted: list[tuple[str, Ints, Finish]]) -> None:
    for text, rows, found in wanted:
        if found.unknown:
            work.finish_open[rows] = True
            parts = " and ".join(repr(part) for part, _ in found.unknown)
            named = f"of the finish, {parts}" if found.coats else "the finish"
            message = f"{named} is not understood and not added"
            work.say(Finding("note", "finish-not-understood", message, read=text, right=found.unknown[0][1]), rows, "finish")
        if found.worked:
            message = "the surface is worked, not coated: no mass is added"
            work.say(Finding("note", "finish-adds-nothing", message, read=text), rows, "finish")


def _coats_basis(coats: tuple[Coat, ...]) -> Basis:
    sources = list(dict.fromkeys(c.source for c in coats))
    rule = " + ".join(c.rule for c in coats)
    nominal = sources[0] if len(sources) == 1 else Source(
        "; ".join(s.title for s in sources), "; ".join(s.clause for s in sources if s.clause),
        max((s.evidence for s in sources), key=EVIDENCE.index),
    )
    planning = Source("Planning figures for coatings", "", "common practice")
    return Basis(rule, nominal, "bounds as the rule says", planning)


# --- welds and bolts -------------------------------------------------------------------------------------------------

def _percents(work: Work) -> None:
    """Welds and bolts in percent of the bare metal that was computed; what is bought out by its mass has none."""
    import numpy as np

    masses = work.job.masses
    for kind, percent in (("weld", masses.weld_percent), ("bolt", masses.bolt_percent)):
        if not percent:
            continue
        metal = work.of_material([m.kind == "metal" for m in work.materials])
        bought = np.isin(np.array([*(s.form for s in work.sections), ""], dtype=object), ("each",))[work.section_of]
        rows = np.flatnonzero(metal & ~bought & ~work.stated_used & ~np.isnan(work.nominal))
        share = percent / 100
        source = Source("the job file", f"[masses] {kind}_percent", "read")
        rule = f"{percent:g} % of the bare mass"
        basis = Basis(rule, source, rule, source)
        work.add(kind, rows, (work.light[rows] * share, work.nominal[rows] * share, work.heavy[rows] * share), basis)


# --- contents --------------------------------------------------------------------------------------------------------

def _contents(work: Work, shape: Shape) -> None:
    import numpy as np

    texts = work.texts("contents")
    if not texts:
        return
    stated = work.frame["stated_volume_m3"].to_numpy(dtype=float)
    bore = work.of_section([s.inner_area_mm2 or math.nan for s in work.sections]) * 1e-6 * shape.length_m
    # A volume in the row is what a tank holds only where the piece itself was not made from a volume.
    inside = np.where(np.isnan(bore) & np.isnan(work.volume_mm3), stated, bore)
    known = ~np.isnan(work.nominal)
    for text, every in texts:
        rows = every[known[every]]
        if says_soaked(text):
            _soak(work, rows, text)
            continue
        found = contents.read(text)
        if found.empty or not len(rows):
            continue
        if found.problem is not None:
            _leave_open(work, rows, text, found.problem, found.right)
            continue
        if found.assumed:
            work.say(Finding("assumed", "contents-assumed", found.assumed, read=text), rows, "contents")
            work.assumed_rows.update(rows.tolist())
        assert found.source is not None
        if found.mass_kg is not None:
            minus, plus = work.job.masses.stated_minus_percent, work.job.masses.stated_plus_percent
            rule = f"{found.mass_kg:g} kg of {found.name} as stated; −{minus:g} % +{plus:g} %"
            share = Bounds(1 - minus / 100, 1.0, 1 + plus / 100)
            _add_times(work, "contents", rows, np.full(len(rows), found.mass_kg), share, Basis(rule, found.source, rule, found.source))
            continue
        assert found.density is not None
        if found.volume_m3 is not None:
            volume, share, where = np.full(len(rows), found.volume_m3), Bounds.exact(found.share), f"{found.volume_m3:g} m³"
        else:
            volume = inside[rows]
            from_bore = ~np.isnan(bore[rows]).all()
            share = (contents.BORE_SHARE if from_bore else Bounds.exact(1.0)) * found.share
            where = "inside volume" if from_bore else "stated volume"
        if found.share < 1:
            where = f"{found.share * 100:g} % of the {where}"
        density = found.density
        rule = f"{where} × {density.nominal:.5g} kg/m³ ({found.name}; {density.light:.5g} to {density.heavy:.5g})"
        bounds_rule = "density's spread" + (", bore ±4 %" if share.light < share.nominal else "")
        range_C = filled.range_of(work.job.temperatures)
        for part, at in _by_temperature(work, rows[~np.isnan(volume)], found.liquids, text, range_C):
            wider, also = density, ""
            if at is not None and at.light is not None and at.heavy is not None:
                wider = Bounds(min(density.light, at.light), density.nominal, max(density.heavy, at.heavy))
                also = f", {_degrees(at.heaviest_C)} to {_degrees(at.lightest_C)}"
            chosen = volume[np.isin(rows, part)]
            _add_times(work, "contents", part, chosen, wider.times(share), Basis(rule, found.source, bounds_rule + also, found.source))
        blind = rows[np.isnan(volume)]
        if len(blind):
            _leave_open(work, blind, text, "the contents are not added: the inside volume is not known",
                        "a volume, in its own column or as 500 l water")


def _by_temperature(
    work: Work, rows: Ints, liquids: Sequence[Material], text: str, range_C: tuple[float, float] | None
) -> Iterator[tuple[Ints, Filled | None]]:
    """Rows vessel material by vessel material, with their liquid's bounds over the job's temperatures, and say so of them."""
    import numpy as np

    if range_C is None or not liquids or not len(rows):
        yield rows, None
        return
    names = " or ".join(m.name for m in liquids)
    for number in np.unique(work.material_of[rows]).tolist():
        part = rows[work.material_of[rows] == number]
        found = filled.over(work.materials[number] if number >= 0 else None, liquids, range_C)
        right = None
        if found.light is None:
            message = f"the contents are weighed by the table's figure, of about 20 °C only, and are heavier when colder: {found.reason}"
            right = "their density in the cell, such as 500 l at 1250 kg/m3, or a weighed mass"
        else:
            known = f", as far as their density is known ({found.reason})" if found.reason else ""
            heavy, light = _degrees(found.heaviest_C), _degrees(found.lightest_C)
            message = (
                f"{names}: nominal is the table's; heavy is at {heavy}, light at {light}, to cover the job's temperatures{known}"
            )
        work.say(Finding("note", "contents-at-temperature", message, read=text, right=right), part, "contents")
        yield part, found


def _degrees(celsius: float) -> str:
    return f"{celsius:.4g} °C".replace("-", "−")


def _leave_open(work: Work, rows: Ints, text: str, problem: str, right: str | None) -> None:
    work.contents_open[rows] = True
    kind = "not-added" if "not added" in problem else "contents-not-understood"
    message = problem if kind == "not-added" else f"{problem}: nothing is added"
    work.say(Finding("note", kind, message, read=text, right=right), rows, "contents")


def _soak(work: Work, rows: Ints, text: str) -> None:
    """The water that soaked pieces hold, material by material."""
    import numpy as np

    for number in np.unique(work.material_of[rows]).tolist():
        chosen = rows[work.material_of[rows] == number]
        material = work.materials[number] if number >= 0 else None
        found = soaking(material) if material is not None else None
        chosen_computed = chosen[~work.stated_used[chosen]]
        if material is None or found is None or not len(chosen_computed):
            _leave_open(work, chosen, text, "the water is not added: no figure is known for this material when soaked", "a weighed mass")
            continue
        density = material.density
        assert density.nominal is not None
        assert found.added.nominal is not None
        added = (found.added.low / density.low, found.added.nominal / density.nominal, found.added.high / density.high)
        light, nominal, heavy = (getattr(work, w)[chosen_computed] * a for w, a in zip(("light", "nominal", "heavy"), added, strict=True))
        basis = Basis(f"{material.name} soaked: {found.rule}", found.source, found.rule, found.source)
        work.add("soaked", chosen_computed, (light, nominal, heavy), basis)


# --- insulation ------------------------------------------------------------------------------------------------------

def _insulation(work: Work, shape: Shape) -> None:
    import numpy as np

    stated = (work.job.masses.stated_minus_percent, work.job.masses.stated_plus_percent)
    known = ~np.isnan(work.nominal)
    for text, every in work.texts("insulation"):
        rows = every[known[every]]
        found = insulation.read(text, stated)
        if found.none or not len(rows):
            continue
        if found.problem is not None:
            work.say(Finding("note", "insulation-not-understood", f"{found.problem}: nothing is added", read=text, right=found.right),
                     rows, "insulation")
            continue
        assert found.source is not None
        surface, length = work.surface_mm2[rows] * 1e-6, shape.length_m[rows]
        surface = np.where(shape.by_mass[rows], np.nan, surface)
        if found.kg_m is not None:
            amount, factors = length, found.kg_m
        elif found.kg_m2 is not None:
            amount, factors = surface, found.kg_m2
        else:
            assert found.density is not None
            thick = found.thickness_mm / 1000
            # Around a round pipe exactly; around any outline without hollows too, its corners rounded.
            corners = np.where(shape.prismatic[rows], math.pi * thick**2 * length, 0.0)
            amount, factors = surface * thick + corners, found.density
        _add_times(work, "insulation", rows, amount, factors, Basis(found.rule, found.source, found.rule, found.source))
        blind = rows[np.isnan(amount)]
        if len(blind):
            work.say(Finding("note", "not-added", "the insulation is not added: the piece's surface or length is not known", read=text),
                     blind, "insulation")
