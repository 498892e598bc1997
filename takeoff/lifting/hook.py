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
from functools import cache
from typing import TYPE_CHECKING

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table
from takeoff.findings import Finding
from takeoff.job import LiftPart
from takeoff.lifting.pick import Factor, Line, Pick
from takeoff.provenance import Source
from takeoff.weighing.basis import Basis
from takeoff.weighing.totals import NOT_COUNTED

if TYPE_CHECKING:
    import pandas as pd

STANDARD_GRAVITY = 9.80665
#: rigging lines of the build-up: job key -> what the line is called
_RIGGING = {"rigging_kg": "rigging", "hook_block_kg": "hook block", "rope_kg": "hoist rope", "other_kg": "other"}
_UNSET = {"rigging_kg": "rigging", "hook_block_kg": "hook block", "rope_kg": "hoist rope"}
FROM_JOB = Source("the job file", "[lift]", "read")

CAUTIONS = (
    "An estimate for planning, not a lift plan. Weigh before lifting where doubt remains.",
    "The crane's chart and configuration, the tag on the gear, the ground, the wind and local codes decide;"
    " a competent, licensed person plans and signs the lift.",
)


@cache
def _factors() -> list[tuple[dict[str, str], Source]]:
    rows = [row for _, row in read_table(data_folder() / "lift_factors.csv")]
    return [(row, Source(row["title"], row["clause"], row["evidence"])) for row in rows]


def contingency(case: str) -> Factor:
    """The weight contingency factor for ``weighed``, ``calculated``, ``assumed or stated`` or ``estimated``."""
    row, source = next((r, s) for r, s in _factors() if r["factor"] == "contingency" and r["case"] == case)
    return Factor("contingency", float(row["value"]), f"{case}: {row['note']}", source)


def dynamic(mass_kg: float) -> Factor:
    """The dynamic factor for an onshore lift of this design mass; a band's upper end belongs to it."""
    mass_t = mass_kg / 1000.0
    for row, source in _factors():
        if row["factor"] == "dynamic" and mass_t <= float(row["upto_t"] or math.inf):
            upto = f"up to {float(row['upto_t']):,.0f} t" if row["upto_t"] else f"over {float(row['over_t']):,.0f} t"
            return Factor("dynamic", float(row["value"]), f"onshore, one crane, {upto}", source)
    raise AssertionError("the dynamic factors do not cover every mass")


def picks_of(members: pd.DataFrame, bases: Sequence[Basis], lift: LiftPart) -> list[Pick]:
    """A pick for each name in the pick column where the list has one, else for each assembly; in the list's order.

    `members` is a weighed frame. Rows without a name belong to no pick.
    """
    column = "pick" if members["pick"].notna().any() else "assembly"
    names = list(dict.fromkeys(members[column].dropna()))
    stated = [i for i, basis in enumerate(bases) if basis.stated]
    groups = members.groupby(column, sort=False)
    return [_pick(str(name), groups.get_group(name), stated, lift) for name in names]


def _pick(name: str, rows: pd.DataFrame, stated: list[int], lift: LiftPart) -> Pick:
    weighed = rows[rows["status"] != "not weighed"]
    lacking = len(rows) - len(weighed)
    mass = Bounds(*(float(weighed[f"total_{word}_kg"].sum()) for word in ("light", "nominal", "heavy")))
    findings: list[Finding] = []
    uncertain = bool((weighed["status"] == "assumed").any() or weighed["basis_id"].isin(stated).any())
    k_weight = _contingency(lift, uncertain, findings)
    design = mass.heavy * k_weight.value
    k_dynamic = dynamic(design) if lift.dynamic_factor is None else Factor(
        "dynamic", lift.dynamic_factor, "set in the job file", FROM_JOB
    )
    lines = [Line("heavy mass of the members", mass.heavy), Line(f"weight contingency x {k_weight.value:g}", design - mass.heavy)]
    added = {key: getattr(lift, key) for key in _RIGGING}
    lines += [Line(label, float(added[key])) for key, label in _RIGGING.items() if added[key]]
    static = design + math.fsum(float(v) for v in added.values() if v)
    hook = static * k_dynamic.value
    lines.append(Line(f"dynamic factor x {k_dynamic.value:g}", hook - static))
    if lacking:
        findings.append(Finding("note", "pick-incomplete", f"{lacking} row{'s' if lacking > 1 else ''} of this pick could not be "
                                "weighed: it is heavier than shown", right="every row weighed"))
    not_counted = [item for item in NOT_COUNTED if not (item == "temporary steel" and lift.other_kg is not None)]
    not_counted += [label for key, label in _UNSET.items() if added[key] is None]
    return Pick(
        name=name, pieces=int(weighed["quantity"].sum()), mass_kg=mass, not_weighed=lacking, contingency=k_weight,
        dynamic=k_dynamic, design_mass_kg=design, static_hook_load_kg=static, hook_load_kg=hook,
        hook_load_kN=hook * STANDARD_GRAVITY / 1000.0, build_up=tuple(lines),
        # Nothing yet says what the crane, the points or the gear can carry, so there is nothing to be within.
        verdict="unknown", not_counted=tuple(not_counted), findings=tuple(findings),
    )


def _contingency(lift: LiftPart, uncertain: bool, findings: list[Finding]) -> Factor:
    known_by = lift.weight_known_by
    if known_by == "weighed":
        findings.append(Finding("note", "weighed-fell-back", "the job says the weight is weighed, but no weighing is given: "
                                "taken as calculated", right="a weighing of the whole pick"))
        known_by = "calculated"
    if known_by == "estimated":
        findings.append(Finding("note", "estimated-weight", "the weight is only estimated: weigh it before lifting"))
    if lift.contingency is not None:
        return Factor("contingency", lift.contingency, "set in the job file", FROM_JOB)
    if known_by == "estimated":
        return contingency("estimated")
    return contingency("assumed or stated" if uncertain else "calculated")
