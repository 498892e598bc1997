"""Sizes measured at another temperature, brought back to the reference temperature before volume and mass.

A row's cell says how warm the piece was when it was measured, else the job's `measured`. With the job's tape the listed sizes
are readings of a tape that is true at 20 °C: true size = reading x (1 + e_tape); the piece has the tape's temperature unless
its row says otherwise. A section of a table keeps its cross-section: its name is no measurement.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Any

from takeoff import materials
from takeoff.errors import JobError
from takeoff.findings import Finding
from takeoff.materials.stretch import stretch

if TYPE_CHECKING:
    import numpy as np
    import pandas as pd

    from takeoff.job import Job
    from takeoff.lists.log import FindingLog
    from takeoff.materials import Material
    from takeoff.sections import Section

    Floats = np.ndarray[Any, np.dtype[np.float64]]

REFERENCE_C = 20.0
#: the three ways a volume takes its directions
_THREE = ("length", "width", "thickness")


def tape_of(job: Job) -> Material | None:
    """The material of the tape that measured the list; None where the job names no tape. Raises JobError on an unknown one."""
    tape = job.reading.tape
    if tape is None:
        return None
    own = materials.load_own(job.beside(job.own.materials)) if job.own.materials else None
    match = materials.lookup(tape.material, hint="metal", own=own)
    if match.material is None or match.match == "similar" or match.material.alpha_per_K is None:
        raise JobError("reading.tape.material: no material with a known coefficient is surely meant", file=job.path, read=tape.material,
                       right="such as \"steel\"")
    return match.material


def measuring_temperatures(frame: pd.DataFrame, job: Job) -> Floats:
    """How warm each member was when it was measured, °C: its row's cell, else the tape's or the job's; NaN where nobody says."""
    import numpy as np

    of_job = job.reading.tape.temperature_C if job.reading.tape else job.temperatures.get("measured", float("nan"))
    if "measured_at_C" not in frame:
        return np.full(len(frame), of_job)
    cells = frame["measured_at_C"].to_numpy(dtype=float)
    return np.where(np.isnan(cells), of_job, cells)


@dataclass(slots=True)
class Back:
    """Reference size over listed size, by size; None where the material gives no answer."""

    factors: dict[str, float]
    finding: Finding | None
    known: bool = True


class Measured:
    """The correction of one list. Says of each row what was done, in the log."""

    def __init__(self, frame: pd.DataFrame, job: Job, log: FindingLog) -> None:
        import numpy as np

        self.job, self.log = job, log
        self.member_C = measuring_temperatures(frame, job)
        self.any = bool((~np.isnan(self.member_C)).any())

    @cached_property
    def tape_factor(self) -> float:
        """The length of the tape's metre at its temperature; 1 where no tape is named."""
        tape = tape_of(self.job)
        if tape is None or self.job.reading.tape is None:
            return 1.0
        longer = stretch(materials.elongation(tape, self.job.reading.tape.temperature_C), "length")
        if longer is None:
            raise JobError("reading.tape: the tape has no length at this temperature", file=self.job.path, read=tape.name)
        return longer

    def bring_back(
        self, rows: np.ndarray[Any, Any], section: Section, material: Material | None, sizes: dict[str, Floats], piece: dict[str, Any]
    ) -> None:
        """Scale the rows' `sizes` (whole columns, mm) and the `piece` computed from them to the reference temperature, in place."""
        import numpy as np

        if not self.any or material is None or section.form == "each":
            return
        at = self.member_C[rows]
        for temperature in np.unique(at[~np.isnan(at)]).tolist():
            part = at == temperature
            chosen = rows[part]
            back = self.back(material, temperature)
            if back.finding is not None:
                self.log.add(back.finding, chosen.tolist(), "measured_at")
            if not back.known:
                continue
            for name, column in sizes.items():
                column[chosen] *= back.factors[name]
            along, across, through = (back.factors[name] for name in _THREE)
            made = section.published_kg_per_m is None
            piece["volume_mm3"][part] *= along * across * through if made else along
            piece["surface_mm2"][part] *= along * across if made else along
            piece["mass_kg"][part] *= along * across if section.form == "area mass" else along

    def back(self, material: Material, temperature_C: float) -> Back:
        """Reference size over listed size of a piece of this material measured at a temperature, the tape's own growth in it."""
        reference = self.job.temperatures.get("reference", REFERENCE_C)
        there, home = (materials.elongation(material, t) for t in (temperature_C, reference))
        factors: dict[str, float] = {}
        for name in ("length", "width", "thickness", "height", "diameter"):
            now, then = stretch(there, name), stretch(home, name)
            if now is None or then is None:
                reason = there.reason or home.reason
                return Back({}, Finding(
                    "note", "above-melting" if material.alpha_per_K is not None else "no-coefficient",
                    f"sizes measured at {temperature_C:g} °C are taken as they stand: {reason}", read=f"{temperature_C:g} °C",
                ), known=False)
            factors[name] = self.tape_factor * then / now
        if temperature_C == reference and self.tape_factor == 1.0:
            return Back(factors, None)
        with_what = "with a tape " if self.job.reading.tape else ""
        said = f"sizes measured {with_what}at {temperature_C:g} °C are brought back to {reference:g} °C"
        return Back(factors, Finding("note", "brought-back", said + (f" ({there.reason})" if there.reason else "")))
