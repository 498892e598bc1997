"""Section text -> Section: designations in every spelling, published tables, shapes made to size, solids. Rank 2.

`read` answers a text; `columns` turns one section and many rows' sizes into volumes; `catalogue.FAMILIES` names the
tables. A section family is added in one place: a CSV in materials/sections, and its line in `catalogue.FAMILIES`.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from takeoff.sections.answers import IN_CM, NO_SECTION
from takeoff.sections.catalogue import FAMILIES, Table, all_families, load, rows
from takeoff.sections.grammar import read
from takeoff.sections.section import STEEL_DENSITY, Candidate, Section, SectionMatch, Tolerance

if TYPE_CHECKING:
    from takeoff.sections.pieces import columns

__all__ = [
    "FAMILIES",
    "IN_CM",
    "NO_SECTION",
    "STEEL_DENSITY",
    "Candidate",
    "Section",
    "SectionMatch",
    "Table",
    "Tolerance",
    "all_families",
    "columns",
    "load",
    "read",
    "rows",
]


def __getattr__(name: str) -> Any:
    """`columns` is for whole lists: a look-up does not import it."""
    if name == "columns":
        from takeoff.sections.pieces import columns as found

        return found
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
