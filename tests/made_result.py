"""A small weighed result made by hand from the real dataclasses, so that reports are tested without reading a list."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Any

import pandas as pd

from takeoff.bounds import Spread
from takeoff.findings import Finding
from takeoff.job import Job, job_from
from takeoff.lifting.picking import picks_of
from takeoff.lists.account import Account, SheetAccount
from takeoff.materials.material import Material
from takeoff.pipeline import InputFile, Result
from takeoff.provenance import Source
from takeoff.weighing.basis import Basis
from takeoff.weighing.totals import total_up

TEXTS = (
    "mark", "assembly", "pick", "phase", "run", "bundle", "section_text", "material_text", "finish", "contents", "remarks",
    "section", "material", "section_match", "material_match", "reason",
)
SIZES = ("length_mm", "width_mm", "thickness_mm", "height_mm", "diameter_mm")

BASES = [
    Basis("57.1 kg/m × length", Source("An invented standard", "table 1", "read2"), "±4 %", Source("Another one", "clause 5", "read")),
    Basis(
        "stated in the list", Source("the list", "unit mass", "read"), "−5 % / +10 %", Source("planning figures", "", "common practice"),
        stated=True,
    ),
]
STEEL = Material(
    "madeup_steel", "made-up steel", "carbon steel", "metal", (), (), Spread(7800.0, 7850.0, 7900.0), "20 °C",
    Source("An invented table", "row 7", "recalled"), None, None, "", None, "", None, "",
)


@dataclass
class Log:
    """Stands in for the log of a reading: findings by member number."""

    findings: dict[int, tuple[Finding, ...]] = field(default_factory=dict)

    def by_member(self) -> dict[int, tuple[Finding, ...]]:
        return self.findings

    def gathered(self) -> list[Finding]:
        return [f for several in self.findings.values() for f in several]


def row(mark: str, *, quantity: float = 1, each: tuple[float, float, float] = (96.0, 100.0, 104.0), **more: Any) -> dict[str, Any]:
    """One member row; `each` None makes a row that is not weighed."""
    made: dict[str, Any] = dict.fromkeys(TEXTS)
    made |= dict.fromkeys(SIZES, float("nan"))
    made |= {
        "file": "list.xlsx", "sheet": "Steel", "row": 5, "mark": mark, "quantity": float(quantity), "status": "weighed",
        "assembly": "A1", "section_text": "UB 1", "section": "UB 1", "section_match": "exact", "material_text": "steel",
        "material": STEEL.name, "material_match": "alias", "section_id": -1, "material_id": 0, "basis_id": 0,
        "length_mm": 6000.0, "volume_m3": 0.0128, "surface_m2": 3.1,
    }
    made |= more
    if made["status"] == "not weighed":
        each = (float("nan"),) * 3
        made |= {"basis_id": -1, "volume_m3": float("nan"), "surface_m2": float("nan")}
        made["reason"] = made["reason"] or "the length is missing"
    for word, kg in zip(("light", "nominal", "heavy"), each, strict=True):
        made |= {f"bare_{word}_kg": kg, f"each_{word}_kg": kg, f"total_{word}_kg": kg * quantity}
    return made


SOME_ROWS = [
    row("B1", quantity=4, each=(137.0 / 3, 143.01, 150.0 / 0.98), phase="1"),
    row("B2", quantity=2, assembly="A2", status="assumed", row=6),
    row("P1", quantity=7, each=(0.0123, 0.0345678, 0.05), section="PL 10", section_text="10 plate", row=7, basis_id=1),
    row("B3", quantity=3, assembly="A2", status="not weighed", row=8, section_text="UB 99x", section="UB 99x"),
    row("X1", assembly=None, material=None, material_text=None, material_id=-1, section=None, section_text=None, row=9, basis_id=1),
]
SIMILAR = Finding("assumed", "similar-section", "the section was taken for a similar name", read="UB1", right="UB 1")
UNKNOWN = Finding("refused", "unknown-section", "the section text names nothing in the tables", read="UB 99x", right="a size of the table")
SOME_FINDINGS = {1: (SIMILAR.at("list.xlsx", "Steel", "D6"),), 3: (UNKNOWN.at("list.xlsx", "Steel", "D8"),)}


def make(
    rows: Sequence[dict[str, Any]] = SOME_ROWS, findings: dict[int, tuple[Finding, ...]] | None = None, *,
    job: dict[str, Any] | None = None, sheet_findings: Sequence[Finding] = (),
) -> Result:
    """A Result of these rows, totalled, picked and accounted for by the real code."""
    frame = pd.DataFrame(list(rows))
    frame[list(TEXTS)] = frame[list(TEXTS)].astype(object).where(frame[list(TEXTS)].notna(), None)
    states = frame["status"].value_counts().to_dict()
    count = {state: int(states.get(state, 0)) for state in ("weighed", "assumed", "not weighed")}
    account = Account(len(frame) + 2, count["weighed"], count["assumed"], count["not weighed"], 1, 1, 0, 0)
    account.check("a made result")
    settings: Job = job_from(job) if job else Job()
    return Result(
        job=settings, inputs=[InputFile("list.xlsx", "0" * 64, ("Steel",))], account=account,
        sheet_accounts=[SheetAccount("list.xlsx", "Steel", account)], members=frame, sections=[], materials=[STEEL], bases=BASES,
        log=Log(SOME_FINDINGS if findings is None else findings),  # type: ignore[arg-type]
        findings=list(sheet_findings), totals=total_up(frame), picks=picks_of(frame, BASES, settings),
    )
