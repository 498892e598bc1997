"""Where a figure comes from, and how well we know it. A figure without a source does not load. Rank 1."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal, get_args

from takeoff.errors import DataError

#: read2 two independent texts agree; read one text; recalled from memory of the named source; computed by us from named
#: inputs; common practice: no source, the trade does it so.
Evidence = Literal["read2", "read", "recalled", "computed", "common practice"]
EVIDENCE: tuple[str, ...] = get_args(Evidence)


@dataclass(frozen=True, slots=True)
class Source:
    """Title (standard, handbook, open data), clause or table, and evidence grade.

    Raises DataError on a blank title or an evidence word outside the closed list.
    """

    title: str
    clause: str
    evidence: str

    def __post_init__(self) -> None:
        if not self.title.strip():
            raise DataError("a figure without a source does not load", right="the title of a standard, handbook or data set")
        if self.evidence not in EVIDENCE:
            raise DataError("unknown evidence word", read=self.evidence, right="one of " + ", ".join(EVIDENCE))

    def as_record(self) -> dict[str, str]:
        return {"title": self.title, "clause": self.clause, "evidence": self.evidence}

    def __str__(self) -> str:
        clause = f", {self.clause}" if self.clause else ""
        return f"{self.title}{clause} ({self.evidence})"
