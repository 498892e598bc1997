"""Section text -> Section: designations in every spelling, published tables, shapes made to size, solids. Rank 2.

`read` answers a text; `columns` turns one section and many rows' sizes into volumes; `catalogue.FAMILIES` names the
tables. A section family is added in one place: a CSV in materials/sections, and its line in `catalogue.FAMILIES`.
"""

from takeoff.sections.catalogue import FAMILIES, Table, all_families, load, rows
from takeoff.sections.grammar import read
from takeoff.sections.pieces import columns
from takeoff.sections.section import STEEL_DENSITY, Candidate, Section, SectionMatch, Tolerance

__all__ = [
    "FAMILIES",
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
