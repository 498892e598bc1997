"""A finding is one thing to say about a row, a heading, a sheet or a whole list.

All `kind` words stand in `KINDS`, each with what it means, so that a reader of the JSON can look one up. Rank 0.
"""

from __future__ import annotations

from dataclasses import asdict, dataclass, replace
from typing import Any, Literal

Level = Literal["refused", "assumed", "note"]

#: Every kind of finding, and what it says. The level depends on the case; the usual one is named.
KINDS: dict[str, str] = {
    # sections
    "unknown-section": "the section text names nothing in the tables (refused)",
    "similar-section": "the section was taken for a similar name (assumed)",
    "ambiguous-section": "the section text has several readings (refused, or assumed where context settles it)",
    "impossible-geometry": "the sizes cannot be a real section or piece (refused)",
    "section-from-name": "the section was read from the description, there being no section column (note)",
    "section-note": "how a part of the section text was read, or passed over (note)",
    "hollow-standard-assumed": "a hollow section without a standard was taken as hot finished (note)",
    # materials
    "unknown-material": "the material text names nothing in the table (refused)",
    "similar-material": "the material was taken for a similar name (assumed)",
    "ambiguous-material": "the material text names several materials (refused)",
    "material-absent": "no material is named (assumed carbon steel for a steel standard's section, else refused)",
    "material-from-caption": "the material stands in the title block or caption, not in the row (note)",
    "no-density": "the table gives no nominal density for this material: give one (refused)",
    "moisture-unknown": "wood without a stated moisture: the heavy mass allows for wet wood (note)",
    "own-material": "the material comes from the user's own table (note)",
    # sizes, units, quantities
    "missing-size": "a size that the piece needs is blank (refused)",
    "unreadable-size": "a size cell holds no number with a length unit (refused)",
    "unit-assumed": "a bare number's unit was taken from context (assumed)",
    "unit-from-job": "a bare number's unit is the job file's (note)",
    "implausible-size": "a size is far outside what can be made or carried (refused)",
    "size-given-twice": "a size stands both in the section text and in a column (note, or refused where they differ)",
    "missing-quantity": "the quantity is blank, zero or not a whole count (refused)",
    "quantity-assumed": "there is no quantity column: one each (assumed)",
    "cell-error": "the cell holds a spreadsheet error (refused)",
    "formula-without-result": "the cell holds a formula without a stored result (refused)",
    # masses
    "stated-mass": "the mass is the list's own statement, not computed (note)",
    "stated-mass-differs": "the list's stated mass and ours disagree (note)",
    "mass-unit-assumed": "a mass column without a unit was taken in kg or lb (assumed)",
    "holes-not-deducted": "the holes column is not deducted from the mass in this version (note)",
    "not-added": "a column's contents (finish, contents, insulation) are not added to the mass (note)",
    # sheets and rows
    "hidden-rows": "hidden rows or sheets were read like the others (note)",
    "sheet-without-list": "a sheet holds no member list (note)",
    "heading-not-used": "a column was left alone (note)",
    "heading-twice": "two columns claim one field (note)",
    "broken-row": "the row's fields do not fit the headings (refused)",
    "row-skipped": "the row was skipped because the job file says so (note)",
    "text-repaired": "the file's text encoding or stray characters had to be repaired (note)",
    # picks
    "pick-incomplete": "the pick holds pieces that could not be weighed (note)",
    "weighed-fell-back": "'weighed' was asked for, but not every member is weighed: calculated is used (note)",
    "estimated-weight": "the weight is only estimated: no verdict (note)",
}


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing to say: its level, what was read, what would be right, and where.

    `count` and `cells` gather the same finding on many rows; `cells` then holds every cell, `cell` the first.
    Raises ValueError on a kind that is not in `KINDS`.
    """

    level: Level
    kind: str
    message: str
    file: str | None = None
    sheet: str | None = None
    cell: str | None = None
    read: str | None = None
    right: str | None = None
    count: int = 1
    cells: tuple[str, ...] = ()

    def __post_init__(self) -> None:
        if self.kind not in KINDS:
            raise ValueError(f"{self.kind!r} is no kind of finding; add it to KINDS")

    def at(self, file: str | None, sheet: str | None, cell: str | None) -> Finding:
        """The same finding, said of a place."""
        return replace(self, file=file, sheet=sheet, cell=cell, cells=(cell,) if cell else ())

    def as_record(self) -> dict[str, Any]:
        """For the JSON: level, kind, message, file, sheet, cell, read, right, count, cells."""
        record = asdict(self)
        record["cells"] = list(self.cells)
        return record
