"""On what a mass rests: one `Basis` for each distinct way a mass was found, shared by all rows it serves."""

from __future__ import annotations

from dataclasses import dataclass

from takeoff.provenance import Source


@dataclass(frozen=True, slots=True)
class Basis:
    """What a checker needs to redo a mass with a pencil.

    rule : how the nominal mass follows (``57.1 kg/m x length``), with its figures.
    nominal : where the nominal figure comes from.
    bounds_rule : how light and heavy follow, with their figures.
    bounds : where those come from.
    stated : the mass is the list's own statement. own : a figure is from the user's own table. weighed : from a scale.
    """

    rule: str
    nominal: Source
    bounds_rule: str
    bounds: Source
    stated: bool = False
    own: bool = False
    weighed: bool = False

    def as_record(self) -> dict[str, str | bool]:
        return {
            "rule": self.rule, **self.nominal.as_record(), "bounds_rule": self.bounds_rule,
            "bounds_title": self.bounds.title, "bounds_clause": self.bounds.clause,
            "bounds_evidence": self.bounds.evidence, "stated": self.stated, "own_table": self.own,
            "weighed": self.weighed,
        }
