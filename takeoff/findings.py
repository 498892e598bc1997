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
    "plain-piece": "no section is named: taken as the plain solid piece that its sizes give (assumed)",
    "ditto": "a ditto mark stands for the cell above it (note), or for nothing (refused)",
    "assembly-row": "an assembly's own row beside those of its parts: it is no piece (note)",
    "section-note": "how a part of the section text was read, or passed over (note)",
    "hollow-standard-assumed": "a hollow section without a standard was taken as hot finished (note)",
    # materials
    "unknown-material": "the material text names nothing in the table (refused)",
    "similar-material": "the material was taken for a similar name (assumed)",
    "ambiguous-material": "the material text names several materials (refused)",
    "material-absent": "no material is named (assumed carbon steel for a steel standard's section, else refused)",
    "material-from-caption": "the material stands in the title block or caption, not in the row (note)",
    "material-from-section": "the material stands in the section text (note)",
    "heading-misleads": "a column's cells are not what its heading says, and were read for what they are (note)",
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
    "approximate": "an approximate figure (~, ca, about) is taken as it stands (assumed)",
    "length-in-quantity": "the quantity is a length of bar, taken as one piece (assumed)",
    "quantity-remark": "a remark behind the quantity was passed over (note)",
    "quantity-per-and-total": "of a quantity per piece and a total, which one is used (note)",
    "pairs-in-one-cell": "several lengths in one cell were taken at their mean (assumed)",
    "packs": "the quantity counts packs of pieces (assumed for hardware, else refused)",
    "unit-column": "a unit column decided what the quantity is (note, or refused)",
    "unit-in-cell": "a cell's own unit went before the heading's (note)",
    "stray-signs": "signs around a number were passed over (note)",
    "mixed-decimal-signs": "decimal commas and points stand in one list (note)",
    "decimal-assumed": "a comma or point that nothing settles was read the only way that gives a usual size (assumed)",
    "total-length": "a column of total lengths was used, or disagrees (note)",
    "height-as-length": "a list without lengths: the height is taken as the length (assumed)",
    "merged-number": "one number is merged over several rows (refused)",
    "cell-error": "the cell holds a spreadsheet error (refused)",
    "formula-without-result": "the cell holds a formula without a stored result (refused)",
    # masses
    "stated-mass": "the mass is the list's own statement, not computed (note)",
    "stated-mass-differs": "the list's stated mass and ours disagree (note)",
    "mass-unit-assumed": "a mass column without a unit was taken in kg or lb (assumed)",
    "mass-each-assumed": "a mass column does not say whether it is of one piece or of all (assumed)",
    "holes-not-deducted": "holes that were read are not deducted, which errs on the heavy side (note)",
    "cuts-not-deducted": "end cuts are not deducted, which errs on the heavy side (note)",
    "holes-not-understood": "the holes cell is not understood, and nothing is deducted (note)",
    "finish-not-understood": "the finish, or a part of it, is not understood and not added (note)",
    "finish-adds-nothing": "the surface is worked, not coated (note)",
    "contents-not-understood": "the contents are not understood and not added (note)",
    "contents-assumed": "the name of the contents has several readings (assumed)",
    "contents-at-temperature": "light and heavy of a liquid cover the job's temperatures, or why they do not (note)",
    "insulation-not-understood": "the insulation is not understood and not added (note)",
    "not-added": "a finish, contents or insulation that was read could not be added, a size being unknown (note)",
    "weighed-outside-bounds": "a weighed mass lies outside our bounds (note)",
    "weighing-not-used": "a weighed mass that can be none is not used (note)",
    # sheets and rows
    "hidden-rows": "hidden rows, columns or sheets were read like the others (note)",
    "number-format": "a cell shows another number than it holds, or none (refused), or its text is hidden (note)",
    "struck-out": "a row struck out in the sheet was counted (assumed); a single cell struck out (refused where needed, else note)",
    "date-in-cell": "a mark or a section is a date: a spreadsheet program made it one (refused where needed, else note)",
    "cell-comment": "a comment in the sheet is passed on (note)",
    "not-looked-at": "something that this kind of file cannot show, or a part of it that cannot be read (note)",
    "blank-or-error": "a blank cell of a kind of file that cannot show its errors (note)",
    "sheet-without-list": "a sheet holds no member list (note)",
    "heading-not-used": "a column was left alone (note)",
    "heading-twice": "two columns claim one field (note)",
    "unclosed-quote": "a quote in a text file is never closed (refused)",
    "group-title": "a title, or the first row of a group, gives the assembly of the rows below (note)",
    "example-block": "an example below the list was not read (note)",
    "row-of-money": "a row of money or work is no part (note)",
    "row-elsewhere": "the row says it is contained in another (refused)",
    "alternative-row": "the row is an alternative to another (refused)",
    "optional-row": "the row says it is optional (note)",
    "multiplier-above": "a row above counts an assembly: per assembly or in all? (refused)",
    "may-count-twice": "an assembly with a mass of its own beside its parts (note)",
    "list-warning": "the list bears a warning of its own (note)",
    "side-by-side": "lists stand side by side: one must be chosen (refused)",
    "list-twice": "the same list stands in two places: the second is not read (refused)",
    "row-twice": "the same piece stands in two lists (note)",
    "total-differs": "the list's own total differs from ours (note)",
    "broken-row": "the row's fields do not fit the headings (refused)",
    "job-not-met": "the job file names a column or a row that no list has (note)",
    "row-skipped": "the row was skipped because the job file says so (note)",
    "text-repaired": "the file's text encoding or stray characters had to be repaired (note)",
    # temperatures
    "moisture-outweighs": "moisture moves wood more than temperature does, and is not in its movement (note)",
    "shrinkage-not-included": "shrinkage, creep and moisture of concrete or masonry are not in its movement (note)",
    "outside-validity": "a temperature beyond the range of the law: its last slope is held (note)",
    "above-melting": "a temperature above the melting point: there is no length there, the mass stands (refused)",
    "no-coefficient": "no coefficient of expansion is known for this material: no length is computed (refused)",
    "movement-small": "a movement smaller than anyone can mark or read on a tape (note)",
    "movement-restrained": "what the movement becomes where both ends are held: a stress (note)",
    "same-material": "a material is compared with itself (note)",
    "gap-impossible": "no gap neither closes nor exceeds its limit over the range of temperatures (refused)",
    "set-outside-range": "the temperature at setting lies outside the range, and counts as part of it (note)",
    "not-reached": "no temperature gives the wanted clearance (refused)",
    "run-fixed-assumed": "nobody said where a run is fixed: its first member's start (assumed)",
    "run-order": "the order of a run has gaps, or names what is not there (refused)",
    "run-incomplete": "a member of a run has no known length or material: nothing of the run is computed (refused)",
    "run-not-laid-out": "a run is given in total only, or the job file names no temperatures for it (note)",
    "brought-back": "sizes measured at another temperature were brought back to the reference temperature (note)",
    "temperature-unread": "a cell holds no temperature, or one that cannot be: its sizes are taken as they stand (assumed)",
    # picks
    "pick-incomplete": "the pick holds pieces that could not be weighed (note)",
    "weighed-fell-back": "'weighed' was asked for, but not every member is weighed: calculated is used (note)",
    "estimated-weight": "the weight is only estimated: no verdict (note)",
    "position-unread": "a position, axis or roll cell cannot be used (note)",
    "factor-below-one": "a factor of the job file takes load away (note)",
    "centre-unknown": "a piece without a usable position leaves the centre of gravity unknown (note)",
    "centre-outside-points": "the centre of gravity does not lie between the lifting points (note)",
    "centre-near-edge": "the centre of gravity may lie outside the lifting points within its bounds (note)",
    "points-below-centre": "lifting points lie below the centre of gravity, with the stability rule (note)",
    "leg-angle-over-60": "a leg leans more than 60° from the vertical: the hook is too low (note)",
    "leg-angle-over-45": "a leg leans more than 45° from the vertical (note)",
    "hook-height-missing": "the hook's height is not given: angles and tensions are not known (note)",
    "legs-slack": "a leg carries nothing on the slings given (note)",
    "slings-do-not-meet": "the slings given cannot hold the piece from all its points (note)",
    "hook-not-used": "where the slings given put the hook goes before the place the job file names (note)",
    "tilt": "the piece hangs out of level (note)",
    "no-standard-size": "no size of the tables carries the leg (note)",
    "bend-not-reduced": "no published reduction for a bent sling of this kind is known (note)",
    "spreader-not-worked-out": "something of the spreader or beam is not worked out (note)",
    "chart-text": "the crane chart holds text where a number belongs (note)",
    "chart-unsorted": "the crane chart is out of order (note)",
    "chart-gap": "the crane chart has a hole (note)",
    "chart-unit-unknown": "the unit of the crane chart is not known (note)",
    "chart-configuration-missing": "the crane configuration that the chart is for is not named (note)",
    "crane-rating-unknown": "the chart gives no rating for this pick (note)",
    "crane-exceeded": "what is known of an incomplete pick already exceeds the crane (note)",
    "crane-share-unknown": "how several cranes share the load is not known (note)",
    "more-than-one-crane": "a lift with several cranes is planned as critical (note)",
    "block-not-counted": "no hook block is counted: right only where the chart is net of it (note)",
    "block-counted-twice": "a hook block and chart deductions are both given (note)",
    "no-head-room": "the piece does not go under the boom tip (note)",
    "head-room-at-most": "the piece's height is not fully known, so the head room is at most the figure given (note)",
    "sail-area": "the piece is a large sail for its mass (note)",
    "upend-swings": "the piece swings over while it is upended (note)",
    "own-weight-not-checked": "bending under the piece's own weight is not worked out (note)",
    "own-weight-over": "tension under the piece's own weight exceeds the strength given (note)",
    "little-tension": "stone, glass and concrete carry little tension (note)",
    "mould-adhesion": "a first lift from a mould adds adhesion (note)",
    # loads
    "vehicle-limits": "which of a vehicle's figures governs, or one that is not looked at (note)",
    "deck-unknown": "a vehicle without the size of its deck is loaded by mass only (note)",
    "axles-loose": "a unit without a place is on a vehicle: how its axle loads count it (note)",
    "axles-unknown": "axle loads, or limits, that are not known for want of figures (note)",
    "unit-size-unknown": "a unit without a known size is loaded by mass only (note)",
    "unit-size-at-least": "the size of a unit to load is the least it can be (note)",
    "phases-mixed": "a unit holds pieces of several phases and goes with the first (note)",
    "axle-share-low": "an axle carries less than the least share asked of it (note)",
    "envelope-axle": "an axle or group is over the planning limit of the envelope chosen (note)",
    "unloading-order": "a load cannot be unloaded from the rear in the order of its phases (note)",
    "lateral-balance": "a load lies farther beside the middle of the deck than it should (note)",
    "rear-overhang": "a piece reaches beyond the deck's tail and must be marked (note)",
    "tilting": "a stack or a row can tilt by itself, and how many lashings hold it (note)",
    "tilting-undecided": "something can tilt, and no number of lashings is given for it (note)",
    "may-roll": "a round piece must be kept from rolling (note)",
    "direct-lashing-undecided": "direct lashings were asked for and cannot be laid out (note)",
    "direct-lashing-weak": "a direct lashing or its anchor is weaker than what it must hold (note)",
    "anchors-unknown": "what a vehicle's anchors hold is not known (note)",
    "headboard-not-counted": "a block ahead is not counted beside direct lashings (note)",
    "many-lashings": "so many lashings over the top that another way of securing is better (note)",
    "lashing-tension": "the tension of a lashing is more than half of its strength (note)",
    "flat-lashing": "a lashing over the top at a flat angle presses little (note)",
    "dunnage-not-counted": "no mass of dunnage and gear is set (note)",
    "stopped-early": "the search for a plan was stopped by its time limit (note)",
    "not-proven": "the number of vehicles is not proven to be the least (note)",
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
