"""The hook load of a pick, built up line by line from its heavy mass.

    design mass        = heavy mass × contingency (by how the weight is known)
    static hook load   = design mass + rigging + hook block + hoist rope + other
    hook load          = static hook load × dynamic factor (by mass band)

Method: 0027/ND (guidelines for marine lifting), as quoted; the factors stand in `materials/lift_factors.csv`, each with
its source. A factor from the job file replaces ours and says so.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from takeoff.findings import Finding
from takeoff.job import LiftKeys
from takeoff.lifting.factors import FROM_JOB, Factor, factor, rows
from takeoff.lifting.pick import Line

STANDARD_GRAVITY = 9.80665
#: rigging lines of the build-up: job key -> what the line is called
_RIGGING = {"rigging_kg": "rigging", "hook_block_kg": "hook block", "rope_kg": "hoist rope", "other_kg": "other"}
#: of these each crane of a lift has its own
_EACH_CRANE = ("hook_block_kg", "rope_kg")
UNSET = {"rigging_kg": "rigging", "hook_block_kg": "hook block", "rope_kg": "hoist rope"}

CAUTIONS = (
    "An estimate for planning, not a lift plan. Weigh before lifting where doubt remains.",
    "The crane's chart and configuration, the tag on the gear, the ground, the wind and local codes decide;"
    " a competent, licensed person plans and signs the lift.",
)


@dataclass(frozen=True, slots=True)
class BuildUp:
    """From the heavy mass to the hook, kg; the lines add up to `hook_load_kg`. `below_kg` hangs under the hook, block and rope not."""

    design_kg: float
    static_kg: float
    hook_load_kg: float
    below_kg: float
    dynamic: Factor
    lines: tuple[Line, ...]


def contingency(case: str) -> Factor:
    """The weight contingency factor for ``weighed``, ``calculated``, ``assumed or stated`` or ``estimated``."""
    return factor("contingency", case)


def dynamic(mass_kg: float) -> Factor:
    """The dynamic factor for an onshore lift of this design mass; a band's upper end belongs to it."""
    mass_t = mass_kg / 1000.0
    for row, source in rows("dynamic"):
        if mass_t <= float(row["upto_t"] or math.inf):
            upto = f"up to {float(row['upto_t']):,.0f} t" if row["upto_t"] else f"over {float(row['over_t']):,.0f} t"
            return Factor("dynamic", float(row["value"]), f"onshore, one crane, {upto}", source)
    raise AssertionError("the dynamic factors do not cover every mass")


def build_up(what: str, heavy_kg: float, weight: Factor, lift: LiftKeys, bars: Sequence[Line] = (), cranes: int = 1) -> BuildUp:
    """Line by line from the heavy mass; `bars` are spreaders and beams, `cranes` counts those that lift together."""
    design = heavy_kg * weight.value
    k_dynamic = dynamic(design) if lift.dynamic_factor is None else Factor("dynamic", lift.dynamic_factor, "set in the job file", FROM_JOB)
    lines = [Line(what, heavy_kg), Line(f"weight contingency x {weight.value:g}", design - heavy_kg)]
    lines += bars
    below = [design, *(bar.kg for bar in bars)]
    above: list[float] = []
    for key, label in _RIGGING.items():
        kg = getattr(lift, key)
        if not kg:
            continue
        times = cranes if key in _EACH_CRANE else 1
        lines.append(Line(label + (f" x {times}" if times > 1 else ""), float(kg) * times))
        (above if key in _EACH_CRANE else below).append(float(kg) * times)
    static = math.fsum([*below, *above])
    hook = static * k_dynamic.value
    lines.append(Line(f"dynamic factor x {k_dynamic.value:g}", hook - static))
    return BuildUp(design, static, hook, math.fsum(below), k_dynamic, tuple(lines))


def weight_factor(lift: LiftKeys, *, uncertain: bool, on_scale: bool) -> tuple[Factor, list[Finding], bool]:
    """The weight factor, what there is to say of it, and whether the weight is only estimated.

    `on_scale` where the pick or every member of it has a weighed mass, so that ``weighed`` takes effect; `uncertain` where a
    member is assumed or its mass only stated.
    """
    known_by = lift.weight_known_by or "calculated"
    findings: list[Finding] = []
    if known_by == "weighed" and not on_scale:
        findings.append(
            Finding(
                "note",
                "weighed-fell-back",
                "the job says the weight is weighed, but not every member has a weighed mass: taken as calculated",
                right="a weighing of the whole pick, or of every member",
            )
        )
        known_by = "calculated"
    estimated = known_by == "estimated"
    if estimated:
        findings.append(Finding("note", "estimated-weight", "the weight is only estimated: weigh it before lifting"))
    for name in ("contingency", "dynamic_factor"):
        own = getattr(lift, name)
        if own is not None and own < 1:
            findings.append(
                Finding(
                    "note",
                    "factor-below-one",
                    f"{name} is below 1: the load shown is less than the mass",
                    read=f"{own:g}",
                    right="1 and more",
                )
            )
    if lift.contingency is not None:
        return Factor("contingency", lift.contingency, "set in the job file", FROM_JOB), findings, estimated
    if known_by == "weighed" and not uncertain:
        return contingency("weighed"), findings, estimated
    return contingency("estimated" if estimated else "assumed or stated" if uncertain else "calculated"), findings, estimated
