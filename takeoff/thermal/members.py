"""Every member at every named temperature of the job: true sizes, what a steel tape reads, and the runs they form. Rank 5.

The sizes that come in are those at the reference temperature. `measured` is a name of its own: each row's measuring temperature.
Columns are numpy arrays, worked material by material.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding
from takeoff.materials import DensityAt, Elongation, Law, Material, density_at, law_of
from takeoff.thermal import notes
from takeoff.thermal.lengths import REFERENCE_C, grown, ratio, tape_factor
from takeoff.thermal.movement import steps
from takeoff.thermal.runs import RunMovement, RunPart, RunRule, RunTemperatures, run_movement
from takeoff.thermal.spread import AlphaSpread, alpha_spread
from takeoff.weighing.measured import measuring_temperatures, tape_of

if TYPE_CHECKING:
    import numpy as np

    from takeoff.job import Job
    from takeoff.lists.log import FindingLog
    from takeoff.sections import Section

    Floats = np.ndarray[Any, np.dtype[np.float64]]
    Ints = np.ndarray[Any, np.dtype[np.int64]]

REFERENCE, MEASURED = "reference", "measured"
SIZES = ("length", "width", "thickness")

#: says a finding of these members, at the column of a field
Say = Callable[[Finding, Iterable[int], str | None], None]


@dataclass(frozen=True, slots=True)
class MaterialAt:
    """One material of the list at each named temperature: name -> (elongation from 20 °C, density).

    line : (°C, growth from the reference temperature, per unit of length at reference) in steps over the whole range, for a chart;
        empty where a temperature of it gives no answer, or where the job names one temperature only.
    """

    material: Material
    law: Law
    spread: AlphaSpread
    at: dict[str, tuple[Elongation, DensityAt]]
    line: tuple[tuple[float, float], ...] = ()


@dataclass(slots=True)
class Temperatures:
    """Members at named temperatures.

    named : name -> °C, `reference` first; without `measured`, which is each row's own (`measured_C`, NaN where unsaid).
    sizes_mm : name of temperature -> size (length, width, thickness) -> one figure a member, NaN where there is none.
    readings_mm : name -> what a steel tape reads along the length at that temperature.
    material_of : index into `materials`; -1 where a member's material is not known.
    """

    named: dict[str, float]
    measured_C: Floats
    sizes_mm: dict[str, dict[str, Floats]]
    readings_mm: dict[str, Floats]
    materials: list[MaterialAt]
    material_of: Ints
    tape: Material | None

    @property
    def names(self) -> list[str]:
        """Every name that has lengths, `reference` first."""
        return list(self.sizes_mm)


def of_list(
    frame: Any, sections: Sequence[Section], materials: Sequence[Material], log: FindingLog, job: Job
) -> tuple[Temperatures | None, list[RunMovement]]:
    """A weighed list at its job's temperatures, and its runs; findings go to its log. None and no runs where nobody names any.

    `frame` is that of `takeoff.weighing.masses.Weighed`, its sizes at the reference temperature.
    """
    import numpy as np

    measured_C = measuring_temperatures(frame, job)
    runs = [run.strip() if isinstance(run, str) and run.strip() else None for run in frame["run"].tolist()]
    if not (job.temperatures or job.reading.tape or (~np.isnan(measured_C)).any()):
        in_runs = [i for i, run in enumerate(runs) if run]
        log.add(Finding("note", "run-not-laid-out", "the job file names no temperatures: runs are not laid out",
                        right="[temperatures] with coldest, erect and warmest"), in_runs, "run")
        return None, []
    material_of = frame["material_id"].to_numpy(dtype=int)
    lengths = frame["length_mm"].to_numpy(dtype=float)
    tape = tape_of(job)
    found = at_temperatures(
        _sizes(frame, sections, materials, measured_C, job, tape), material_of, materials, measured_C, job,
        tape=tape, say=log.add,
    )
    kinds = [materials[i] if i >= 0 else None for i in material_of.tolist()]
    lines = movements(runs, frame["mark"].tolist(), frame["quantity"].tolist(), lengths.tolist(), kinds, frame["row"].tolist(), job)
    return found, lines


def _sizes(
    frame: Any, sections: Sequence[Section], materials: Sequence[Material], measured_C: Floats, job: Job, tape: Material | None
) -> dict[str, Floats]:
    """Length, width and thickness at reference: of their columns, else those in the text of a section that is made to size."""
    import numpy as np

    section_of, material_of = (frame[f"{kind}_id"].to_numpy(dtype=int) for kind in ("section", "material"))
    reference_C = job.temperatures.get(REFERENCE, REFERENCE_C)
    longer = 1.0 if job.reading.tape is None else tape_factor(job.reading.tape.temperature_C, tape) or 1.0
    sizes: dict[str, Floats] = {}
    for name in SIZES:
        column = frame[f"{name}_mm"].to_numpy(dtype=float, copy=True)
        for i in np.flatnonzero(np.isnan(column)).tolist():
            section = sections[section_of[i]] if section_of[i] >= 0 else None
            if section is None or section.published_kg_per_m is not None:
                continue
            typed = section.dimensions_mm.get(name) or (section.thickness_mm if name == "thickness" else None)
            if not typed or material_of[i] < 0:
                continue
            at = float(measured_C[i])
            back = ratio(materials[material_of[i]], at, reference_C, size=name) if at == at else 1.0  # noqa: PLR0124
            column[i] = typed * (1.0 if back is None or at != at else back * longer)  # noqa: PLR0124
        sizes[name] = column
    return sizes


def named_temperatures(job: Job) -> dict[str, float]:
    """The job's named temperatures, the reference (20 °C unless named) first."""
    return {REFERENCE: job.temperatures.get(REFERENCE, REFERENCE_C), **job.temperatures}


def at_temperatures(
    sizes_mm: Mapping[str, Floats], material_of: Ints, materials: Sequence[Material], measured_C: Floats, job: Job, *,
    tape: Material | None, say: Say,
) -> Temperatures:
    """Sizes of every member (`sizes_mm` at reference: length, width, thickness) at every named temperature."""
    import numpy as np

    named = {name: t for name, t in named_temperatures(job).items() if name != MEASURED}
    count = len(material_of)
    measured = bool((~np.isnan(measured_C)).any())
    names = [*named, *([MEASURED] if measured else [])]
    out = {name: {size: np.full(count, np.nan) for size in SIZES} for name in names}
    readings = {name: np.full(count, np.nan) for name in names}
    found = []
    for number, material in enumerate(materials):
        rows = np.flatnonzero(material_of == number)
        with_length = rows[~np.isnan(sizes_mm["length"][rows])]
        for name, t in named.items():
            _fill(out[name], readings[name], rows, sizes_mm, material, (named[REFERENCE], t), tape)
        _say_all(say, material, with_length, named)
        for t in np.unique(measured_C[rows][~np.isnan(measured_C[rows])]).tolist() if measured else ():
            part = rows[measured_C[rows] == t]
            _fill(out[MEASURED], readings[MEASURED], part, sizes_mm, material, (named[REFERENCE], t), tape)
        at = {name: (grown(material, t), density_at(material, t)) for name, t in named.items()}
        found.append(MaterialAt(material, law_of(material), alpha_spread(material), at, _line(material, named)))
    return Temperatures(named, measured_C, out, readings, found, material_of, tape)


def _line(material: Material, named: Mapping[str, float]) -> tuple[tuple[float, float], ...]:
    """Growth from the reference temperature over the range of the named ones, in steps of 5 °C."""
    low, high, reference_C = min(named.values()), max(named.values()), named[REFERENCE]
    if low == high:
        return ()
    line = []
    for t in sorted({*steps(low, high), reference_C}):
        times = ratio(material, reference_C, t)
        if times is None:
            return ()
        line.append((t, times - 1.0))
    return tuple(line)


def _fill(
    out: dict[str, Floats], readings: Floats, rows: Ints, sizes_mm: Mapping[str, Floats], material: Material,
    range_C: tuple[float, float], tape: Material | None,
) -> None:
    reference_C, t = range_C
    for size in SIZES:
        times = ratio(material, reference_C, t, size=size)
        if times is not None:
            out[size][rows] = sizes_mm[size][rows] * times
    longer = tape_factor(t, tape)
    if longer is not None:
        readings[rows] = out["length"][rows] / longer


def _say_all(say: Say, material: Material, rows: Ints, named: Mapping[str, float]) -> None:
    """What is to be said of a material at these temperatures, of the rows that have a length."""
    members = rows.tolist()
    if not members:
        return
    # At the reference temperature a size is what the list says, whatever the material.
    others = [t for name, t in named.items() if name != REFERENCE and t != named[REFERENCE]]
    found = notes.about_temperatures(material, others)
    for finding in found:
        say(finding, members, "length" if finding.kind == "above-melting" else "material")
    if others and not any(f.kind == "no-coefficient" for f in found):
        for finding in notes.about_material(material):
            say(finding, members, "material")


def movements(
    runs: Sequence[str | None], marks: Sequence[str | None], quantities: Sequence[float], lengths_mm: Sequence[float],
    materials: Sequence[Material | None], rows: Sequence[int], job: Job,
) -> list[RunMovement]:
    """Every run of the list in the order it is met, then those of the job file that no member names."""
    parts: dict[str, list[RunPart]] = {}
    for run, mark, quantity, length, material, row in zip(runs, marks, quantities, lengths_mm, materials, rows, strict=True):
        if isinstance(run, str) and run.strip():
            whole = int(quantity) if quantity == quantity else 0  # noqa: PLR0124  (NaN is the only value that differs from itself)
            known = length if length == length else None  # noqa: PLR0124
            parts.setdefault(run.strip(), []).append(RunPart(mark or "", whole, known, material, row))
    rules = {
        run.name: RunRule(run.name, run.fixed, run.order, run.joint_min_mm, run.joint_max_mm, run.joints) for run in job.runs
    }
    named = {name: t for name, t in named_temperatures(job).items() if name != MEASURED}
    temperatures = RunTemperatures(named, named[REFERENCE])
    return [
        run_movement(rules.get(name) or RunRule(name, assumed=True), parts.get(name, []), temperatures)
        for name in dict.fromkeys((*parts, *rules))
    ]
