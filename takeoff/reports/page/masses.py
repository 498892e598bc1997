"""The page's masses: the answer, bars by group, the schedule row by row, what is not weighed, and the findings panel. Rank 9."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

from takeoff.reports import added, drawings, rounding
from takeoff.reports.page.parts import Cell, Column, Link, Row, Said, Table, text
from takeoff.reports.rounding import NO_BREAK, NO_FIGURE, Units
from takeoff.reports.wording import cells_text, counted, refusals, row_place, shown, where

if TYPE_CHECKING:
    from takeoff.bounds import Bounds
    from takeoff.findings import Finding
    from takeoff.pipeline import Result

WORDS = ("light", "nominal", "heavy")
#: a browser grows slow beyond this; rows that need a look are shown all the same, and the page says what it leaves out
MOST_ROWS = 3000
MOST_GROUPS = 24
#: links to rows beside one finding
MOST_LINKS = 24
_SIZES = {"length_mm": "Length", "width_mm": "Width", "thickness_mm": "Thickness", "height_mm": "Height", "diameter_mm": "Diameter"}
_TEXTS = {
    "pick": "Pick",
    "phase": "Phase",
    "run": "Run",
    "bundle": "Bundle",
    "finish": "Finish",
    "contents": "Contents",
    "insulation": "Insulation",
    "holes": "Holes",
    "handling": "Handling",
    "remarks": "Remarks",
}


def row_id(number: int) -> str:
    """The page's id of a member's row."""
    return f"row-{number}"


def three(mass: Bounds, units: Units) -> list[Cell]:
    """Light, nominal and heavy as cells."""
    figures = rounding.bounds(mass, units, NO_BREAK) if mass.heavy else ("0", "0", "0")
    return [Cell(figure, getattr(mass, word), strong=word == "heavy") for figure, word in zip(figures, WORDS, strict=True)]


# --- the answer ------------------------------------------------------------------------------------------------------


def totals_table(result: Result, units: Units) -> Table:
    """Bare pieces, each kind of addition, and the total."""
    unit = rounding.mass_unit(units)
    totals = result.totals
    table = Table("totals", f"Mass in {unit}", [Column(""), *(Column(word.capitalize(), True) for word in WORDS)], tools=False)
    if totals.additions:
        parts = {"Bare pieces": totals.bare_kg, **{f"+ {added.called(kind)}": mass for kind, mass in totals.additions.items()}}
        table.rows = [Row([Cell(name), *three(mass, units)]) for name, mass in parts.items()]
    name = "Total" if result.complete else f"Total, INCOMPLETE: lacks {counted(totals.not_weighed, 'row')}"
    table.foot = Row([Cell(name), *three(totals.mass_kg, units)])
    return table


def likely(result: Result, units: Units) -> str:
    """The likely range as text, rounded outward."""
    decimals = rounding.decimals_for(rounding.in_mass_unit(result.totals.mass_kg.heavy, units))
    low = rounding.mass(result.totals.likely_kg[0], "down", units, decimals, NO_BREAK)
    high = rounding.mass(result.totals.likely_kg[1], "up", units, decimals, NO_BREAK)
    return f"{low} to {high}{NO_BREAK}{rounding.mass_unit(units)}"


def groups_table(result: Result, key: str, units: Units) -> Table | None:
    """One bar between bounds for each group, heaviest first; what is beyond the last bar stands in one line."""
    groups = result.totals.groups.get(key, [])
    if not groups:
        return None
    ordered = sorted(groups, key=lambda g: (-g.mass_kg.heavy, -g.not_weighed))
    most = ordered[0].mass_kg.heavy
    unit = rounding.mass_unit(units)
    columns = [
        Column(key.capitalize()),
        Column("Light to heavy"),
        *(Column(f"{w.capitalize()} ({unit})", True) for w in WORDS),
        Column("Pieces", True),
        Column("Rows not weighed", True),
    ]
    table = Table(f"by-{key}", f"Mass by {key}", columns)
    for group in ordered[:MOST_GROUPS]:
        mass = group.mass_kg
        title = f"{group.name}: {' / '.join(rounding.bounds(mass, units, NO_BREAK))} {unit}, light / nominal / heavy"
        table.rows.append(
            Row(
                [
                    Cell(shown(group.name)),
                    Cell(sort=mass.heavy, svg=drawings.bounds_bar(mass.light, mass.nominal, mass.heavy, most, title)),
                    *three(mass, units),
                    Cell(rounding.number(group.quantity, 0, gap=NO_BREAK), group.quantity),
                    Cell(str(group.not_weighed) if group.not_weighed else "0", group.not_weighed, strong=bool(group.not_weighed)),
                ]
            )
        )
    rest = ordered[MOST_GROUPS:]
    if rest:
        table.note = f"{counted(len(rest), 'other')}, each lighter than these, are in the workbook and the JSON; the total holds them."
    return table


# --- the schedule ----------------------------------------------------------------------------------------------------


def shown_rows(result: Result) -> list[int]:
    """The members the page shows: all, or where there are too many the first ones and every row that needs a look."""
    frame = result.members
    if len(frame) <= MOST_ROWS:
        return list(range(len(frame)))
    needs = [i for i, status in enumerate(frame["status"].tolist()) if status != "weighed"][:MOST_ROWS]
    first = range(max(MOST_ROWS - len(needs), 0))
    return sorted({*first, *needs})


def schedule_table(result: Result, units: Units, rows: Sequence[int]) -> Table:
    """One row a member with its masses, state, basis and place in the list."""
    frame, unit = result.members, rounding.mass_unit(units)
    sizes = [key for key in _SIZES if key == "length_mm" or frame[key].notna().any()]
    texts = {key: label for key, label in _TEXTS.items() if key in frame and frame[key].notna().any()}
    kinds = added.kinds(frame)
    several = len(result.inputs) > 1
    columns = [Column("Row", True), Column("Mark"), Column("Assembly"), Column("Pieces", True), Column("Section"), Column("Material")]
    columns += [Column(f"{_SIZES[key]} ({_size_unit(key, units)})", True) for key in sizes]
    columns += [Column(f"+ {added.called(kind)}, heavy ({unit})", True) for kind in kinds]
    columns += [Column(f"{part}, {word} ({unit})", True) for part in ("One piece", "All pieces") for word in WORDS]
    columns += [
        Column("State"),
        Column("Basis no.", True),
        Column("What to know"),
        *(Column(label, screen=True) for label in ("Place in the list", "Section in the list", "Material in the list", *texts.values())),
    ]
    table = Table("schedule", "Weight schedule: one row a member", columns, states=("weighed", "assumed", "not weighed"))
    needed = [
        "file",
        "sheet",
        "row",
        "mark",
        "assembly",
        "quantity",
        "section",
        "material",
        "status",
        "basis_id",
        "section_text",
        "material_text",
        *sizes,
        *texts,
        *(f"add_{kind}_heavy_kg" for kind in kinds),
        *(f"{part}_{word}_kg" for part in ("each", "total") for word in WORDS),
    ]
    data = {key: frame[key].tolist() for key in needed}
    for i in rows:
        of = {key: values[i] for key, values in data.items()}
        table.rows.append(_member(result, i, of, units, (sizes, kinds, list(texts)), several=several))
    left = len(frame) - len(rows)
    if left:
        table.note = (
            f"This page shows {counted(len(rows), 'row')}; {counted(left, 'row')} more, none of them left out of any total, "
            "are in the workbook, the CSV and the JSON. Every row that is not plainly weighed comes first in that choice."
        )
    return table


def _member(
    result: Result, i: int, of: dict[str, Any], units: Units, what: tuple[list[str], list[str], list[str]], *, several: bool
) -> Row:
    sizes, kinds, texts = what
    weighed = of["status"] != "not weighed"
    row = [
        Cell(str(int(of["row"])), of["row"]),
        Cell(text(of["mark"])),
        Cell(text(of["assembly"], "(no assembly)")),
        _figure(of["quantity"], 0),
        Cell(text(of["section"], "(no section)")),
        Cell(text(of["material"], "(no material)")),
    ]
    row += [_size(of[key], key, units) for key in sizes]
    for kind in kinds:
        kg = of[f"add_{kind}_heavy_kg"]
        row.append(Cell("0" if kg == 0 else rounding.mass(kg, "up", units, gap=NO_BREAK), _known(kg)))
    for part in ("each", "total"):
        heavy = of[f"{part}_heavy_kg"] if weighed else math.nan
        decimals = rounding.decimals_for(rounding.in_mass_unit(heavy, units))
        for word, way in (("light", "down"), ("nominal", "nearest"), ("heavy", "up")):
            kg = of[f"{part}_{word}_kg"] if weighed else math.nan
            row.append(Cell(rounding.mass(kg, way, units, decimals, NO_BREAK), _known(kg), strong=word == "heavy"))  # type: ignore[arg-type]
    basis = int(of["basis_id"])
    said = [shown(f.message) for f in result.row_findings.get(i, ()) if f.level in {"refused", "assumed"}]
    row += [
        Cell(shown(of["status"]), strong=not weighed),
        Cell(str(basis + 1), basis + 1, to=f"basis-{basis}") if basis >= 0 else Cell(),
        Cell("; ".join(said)),
        Cell(row_place(of["file"] if several else None, of["sheet"], int(of["row"]))),
        Cell(text(of["section_text"])),
        Cell(text(of["material_text"])),
        *(Cell(text(of[key])) for key in texts),
    ]
    return Row(row, row_id(i), shown(of["status"]))


def _known(value: float) -> float | None:
    return None if value is None or math.isnan(value) else float(value)


def _figure(value: float, decimals: int) -> Cell:
    return Cell(rounding.number(value, decimals, gap=NO_BREAK), _known(value))


def _size_unit(key: str, units: Units) -> str:
    return "mm" if units == "si" else "ft-in" if key == "length_mm" else "in"


def _size(value: float, key: str, units: Units) -> Cell:
    known = _known(value)
    if known is None:
        return Cell(NO_FIGURE)
    if units == "us":
        figure = rounding.feet_inches(known) if key == "length_mm" else rounding.number(known / rounding.MM_PER_IN, 3, gap=NO_BREAK)
        return Cell(figure, known)
    return Cell(rounding.number(known, 0 if known.is_integer() else 1, gap=NO_BREAK), known)


def not_weighed_table(result: Result, rows: Sequence[int]) -> Table:
    """One line for each reason of each row in no total."""
    columns = [
        Column("Row of the list"),
        Column("Cell"),
        Column("Mark"),
        Column("Assembly"),
        Column("Pieces", True),
        Column("What was read"),
        Column("Why it is not weighed"),
        Column("What would be right"),
    ]
    table = Table("not-weighed", "Rows in no total, with cell, reason and mend", columns)
    frame, there = result.members, set(rows)
    marks, assemblies, pieces = (frame[key].tolist() for key in ("mark", "assembly", "quantity"))
    found = list(refusals(result, name_file=len(result.inputs) > 1))
    for refusal in found[:MOST_ROWS]:
        i = refusal.index
        table.rows.append(
            Row(
                [
                    Cell(refusal.place, to=row_id(i) if i in there else None),
                    Cell(text(refusal.cell)),
                    Cell(text(marks[i])),
                    Cell(text(assemblies[i])),
                    _figure(pieces[i], 0),
                    Cell(text(refusal.read)),
                    Cell(shown(refusal.reason)),
                    Cell(text(refusal.right)),
                ]
            )
        )
    if len(found) > MOST_ROWS:
        table.note = f"{counted(len(found) - MOST_ROWS, 'reason')} more are in the workbook and the JSON."
    return table


# --- the findings panel ----------------------------------------------------------------------------------------------


def findings(result: Result, rows: Sequence[int]) -> list[Said]:
    """Everything there is to say, refused first; the same thing on many rows once, with links to those rows."""
    there = set(rows)
    gathered: dict[tuple[Any, ...], tuple[Finding, list[tuple[int, str]]]] = {}
    for i, several in result.row_findings.items():
        for f in several:
            key = (f.level, f.kind, f.message, f.read, f.right, f.file, f.sheet)
            gathered.setdefault(key, (f, []))[1].append((i, f.cell or ""))
    said = []
    for f, at in gathered.values():
        links = [Link(row_id(i), shown(cell) or "row") for i, cell in at if i in there][:MOST_LINKS]
        place = shown(" / ".join(p for p in (f.file if len(result.inputs) > 1 else None, f.sheet) if p))
        said.append(Said(f.level, shown(f.message), text(f.read), text(f.right), len(at), links, len(at) - len(links), place))
    for f in result.findings:
        said.append(Said(f.level, shown(f.message), text(f.read), text(f.right), f.count, [], 0, where(f, 8) or cells_text(f, 8)))
    order = {"refused": 0, "assumed": 1, "note": 2}
    return sorted(said, key=lambda s: order[s.level])
