"""The factors, limits and planning figures of a lift, each a row of `materials/lift_factors.csv` with its source. Rank 6."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import Any

from takeoff.datafiles import data_folder, read_table
from takeoff.provenance import Source

FROM_JOB = Source("the job file", "[lift]", "read")


@dataclass(frozen=True, slots=True)
class Factor:
    """A multiplier or limit, with why it has this value and where that comes from."""

    name: str
    value: float
    why: str
    source: Source

    def as_record(self) -> dict[str, Any]:
        return {"name": self.name, "value": self.value, "why": self.why, "source": self.source.as_record()}


@cache
def rows(factor: str) -> tuple[tuple[dict[str, str], Source], ...]:
    """All rows of one factor, in their order in the table."""
    found = [row for _, row in read_table(data_folder() / "lift_factors.csv") if row["factor"] == factor]
    return tuple((row, Source(row["title"], row["clause"], row["evidence"])) for row in found)


def factor(name: str, case: str = "") -> Factor:
    """One factor by name and case. Raises KeyError on one that the table does not have: a fault of ours."""
    for row, source in rows(name):
        if row["case"] == case:
            return Factor(name, float(row["value"]), ": ".join(p for p in (case, row["note"]) if p), source)
    raise KeyError(f"no factor {name} {case}")


def chosen(name: str, case: str, own: float | None) -> Factor:
    """The job file's own value where it gives one, else the table's."""
    return factor(name, case) if own is None else Factor(name, own, "set in the job file", FROM_JOB)
