"""The tables of published sections, read family by family, each row turned into a Section once. Rank 2.

One CSV a standard. A file is read when a family in it is first asked for, so that one look-up parses only what it needs.
A row without a known source does not load. Designations are found by key: family, variant letters and the exact numbers.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field, replace
from functools import cache
from pathlib import Path

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.provenance import Source
from takeoff.sections import made, shapes, tolerances
from takeoff.sections.section import STEEL_DENSITY, Section, Tolerance

#: family, variant letters, numbers as canonical text
Key = tuple[str, str, tuple[str, ...]]

#: family code -> (what it is, files that hold it). The order is the order in which families are named and preferred.
FAMILIES: dict[str, tuple[str, tuple[str, ...]]] = {
    "UB": ("universal beams", ("en_10365",)),
    "UC": ("universal columns", ("en_10365",)),
    "UBP": ("universal bearing piles", ("en_10365",)),
    "PFC": ("parallel flange channels", ("en_10365",)),
    "IPE": ("European I beams", ("en_10365",)),
    "IPN": ("European tapered I beams", ("en_10365",)),
    "HE": ("European wide flange beams", ("en_10365",)),
    "HL": ("European long flange beams", ("en_10365",)),
    "HD": ("European wide flange columns", ("en_10365",)),
    "HP": ("European wide flange bearing piles", ("en_10365",)),
    "UPE": ("European parallel flange channels", ("en_10365",)),
    "UPN": ("European tapered channels", ("en_10365",)),
    "L": ("angles", ("en_10056_1",)),
    "T": ("rolled tees", ("en_10055",)),
    "SHS": ("square hollow sections", ("en_10210_2", "en_10219_2")),
    "RHS": ("rectangular hollow sections", ("en_10210_2", "en_10219_2")),
    "CHS": ("circular hollow sections", ("en_10210_2", "en_10219_2")),
    "FL": ("flat bars", ("en_10058",)),
    "SQ": ("square bars", ("en_10059",)),
    "RD": ("round bars", ("en_10060",)),
    "HEX": ("hexagon bars", ("en_10061",)),
}

#: Above this share the table's mass and area × density disagree beyond the rounding of a printed three-figure mass,
#: and the bounds are widened to cover both.
ROUNDING_SHARE = 0.005

_COLUMNS = {"h_mm": "h", "b_mm": "b", "tw_mm": "tw", "tf_mm": "tf", "r1_mm": "r1", "r2_mm": "r2", "r3_mm": "r3"}
_NEEDED = ("designation", "family", "shape", "source", "evidence")


@dataclass(slots=True)
class Row:
    """One catalogue row, its Section made when first asked for."""

    cells: dict[str, str]
    file: Path
    line: int
    source: Source
    key: Key
    _section: Section | None = field(default=None, repr=False)

    @property
    def designation(self) -> str:
        return self.cells["designation"]

    @property
    def standard(self) -> str:
        return self.cells.get("standard", "")

    @property
    def section(self) -> Section:
        if self._section is None:
            self._section = _section(self)
        return self._section


@dataclass(slots=True)
class Table:
    """Rows of one file: by key, and in their order by family."""

    keys: dict[Key, list[Row]] = field(default_factory=dict)
    families: dict[str, list[Row]] = field(default_factory=dict)

    def find(self, family: str, variant: str, numbers: tuple[str, ...]) -> list[Row]:
        return self.keys.get((family, variant, numbers), [])


def canonical(text: str) -> str:
    """A plain decimal number's one form: ``93.0`` and ``93`` meet, ``6.3`` and ``6.30`` too; nothing is rounded."""
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return text.lstrip("0") or "0" if not text.startswith("0.") else text


_DESIGNATION = re.compile(r"[A-Za-z]+|\d+(?:\.\d+)?")


def key_of(designation: str, family: str) -> Key:
    """The key of a catalogue designation: its letters after the family code are the variant."""
    parts = _DESIGNATION.findall(designation)
    numbers = tuple(canonical(p) for p in parts if p[0].isdigit())
    words = [p.upper() for p in parts if p[0].isalpha() and p not in ("x", "X")]
    return family, "".join(w for w in words if w != family), numbers


def _other_numbers(row: Row) -> list[tuple[str, ...]]:
    """Further ways people number this row: the short form, the swapped form, the published mass, the width."""
    family, _, numbers = row.key
    cells = row.cells
    found: list[tuple[str, ...]] = []
    if family in ("UB", "UC", "UBP", "PFC", "HD", "HP") and cells.get("published_kg_per_m"):
        found.append((*numbers[:-1], canonical(cells["published_kg_per_m"])))
    if family == "PFC":
        found.append(numbers[:2])
    if family in ("UPN", "UPE", "IPN", "IPE", "T") and len(numbers) == 1:
        found.append((numbers[0], canonical(cells["b_mm"])))
    if family in ("L", "RHS", "SHS") and len(numbers) == 3:
        if numbers[0] == numbers[1]:
            found.append((numbers[0], numbers[2]))
        else:
            found.append((numbers[1], numbers[0], numbers[2]))
    if family == "FL":
        found.append((numbers[1], numbers[0]))
    return found


@cache
def _sources() -> dict[str, tuple[str, str]]:
    return {row["id"]: (row["title"], row["clause"]) for _, row in read_table(data_folder() / "sections" / "sources.csv")}


def load(path: Path, own: bool = False) -> Table:
    """Read one sections file. An own file writes its source's title in the `source` column, ours the id of a source.

    Raises DataError on a missing column, a row without a source, an unknown shape or family twice named.
    """
    table = Table()
    seen: dict[str, int] = {}
    for line, cells in read_table(path):
        missing = [c for c in _NEEDED if not cells.get(c)]
        if missing:
            raise DataError(
                f"line {line}: {', '.join(missing)} is blank",
                file=path,
                read=cells.get("designation"),
                right="every section carries a designation, family, shape, source and evidence",
            )
        title, clause = (cells["source"], cells.get("clause", "")) if own else _sources().get(cells["source"], ("", ""))
        if not title:
            raise DataError(f"line {line}: unknown source", file=path, read=cells["source"], right="an id of sources.csv")
        if cells["shape"] not in shapes.SHAPES:
            raise DataError(f"line {line}: unknown shape", file=path, read=cells["shape"], right="one of " + ", ".join(shapes.SHAPES))
        if cells["designation"] in seen:
            raise DataError(
                f"line {line}: the designation stands twice, first in line {seen[cells['designation']]}",
                file=path,
                read=cells["designation"],
                right="each designation once",
            )
        seen[cells["designation"]] = line
        family = cells["family"].upper() if own else cells["family"]
        row = Row(cells, path, line, Source(title, clause, cells["evidence"]), key_of(cells["designation"], family))
        table.families.setdefault(family, []).append(row)
        table.keys.setdefault(row.key, []).append(row)
        for numbers in _other_numbers(row):
            if numbers != row.key[2]:
                table.keys.setdefault((family, row.key[1], numbers), []).append(row)
        if own:
            sizes(row)  # an own table's mistakes are told when it is read, not when a member first needs the row
            row.section  # noqa: B018
    return table


@cache
def table(file: str) -> Table:
    """One of our tables by its file name without the ending."""
    return load(data_folder() / "sections" / f"{file}.csv")


def tables(family: str) -> list[Table]:
    return [table(f) for f in FAMILIES[family][1]]


def find(family: str, variant: str, numbers: tuple[str, ...]) -> list[Row]:
    """All rows of one family under this key, in the order of the family's files."""
    return [row for t in tables(family) for row in t.find(family, variant, numbers)]


def rows(family: str) -> list[Row]:
    """All rows of a family, file by file. Raises DataError on an unknown family."""
    if family not in FAMILIES:
        raise DataError("unknown section family", read=family, right="one of " + ", ".join(FAMILIES))
    return [row for t in tables(family) for row in t.families.get(family, [])]


def sizes(row: Row) -> dict[str, float]:
    """The sizes of a row in mm. Raises DataError on a text that is no number."""
    found: dict[str, float] = {}
    try:
        for column, name in _COLUMNS.items():
            if row.cells.get(column):
                found[name] = float(row.cells[column])
        if row.cells.get("flange_slope_percent"):
            found["slope"] = float(row.cells["flange_slope_percent"]) / 100
            found["from_toe"] = shapes.from_toe(row.cells.get("tf_measured_at", ""), found["b"], found.get("tw", 0.0))
    except ValueError as error:
        raise DataError(f"line {row.line}: a size is no number ({error})", file=row.file, read=row.designation) from error
    return found


def mass_rule(shape: str, standard: str, d: dict[str, float]) -> tuple[Bounds, Tolerance]:
    """The mass tolerance of a rolled or hollow section by its standard and shape."""
    if standard == "EN 10210-2":
        return tolerances.mass_factor("en10210-2")
    if standard == "EN 10219-2":
        return tolerances.mass_factor("en10219-2")
    if shape == "I tapered":
        return tolerances.mass_factor("en10024")
    if shape.startswith("channel"):
        return tolerances.mass_factor("en10279", d["h"])
    if shape == "angle":
        return tolerances.mass_factor("en10056-2", d["tf"])
    if shape == "tee":
        return tolerances.mass_factor("en10055")
    return tolerances.mass_factor("en10034")


def _section(row: Row) -> Section:
    d = sizes(row)
    shape, family = row.cells["shape"], row.cells["family"]
    published_text = row.cells.get("published_kg_per_m", "")
    published = float(published_text) if published_text else None
    note = row.cells.get("note", "")
    if shape in made.BARS:
        terms = {"flat": {"width": d.get("b"), "thickness": d.get("tf")}, "round bar": {"diameter": d.get("b")}}.get(
            shape, {"width": d.get("b")}
        )
        made_to_size = made.bar(shape, terms, "metal", name=row.designation, published=published, source=row.source, note=note)
        return replace(made_to_size, material_hint=None)
    why = shapes.impossible(shape, d)
    if why:
        raise DataError(f"line {row.line}: {why}", file=row.file, read=row.designation)
    g = shapes.geometry(shape, d)
    factor, tolerance = mass_rule(shape, row.standard, d)
    if published:
        factor = cover(factor, g.area * STEEL_DENSITY * 1e-6 / published)
    dimensions = {k: v for k, v in d.items() if k not in ("slope", "from_toe")}
    if "slope" in d:
        dimensions["flange_slope_percent"] = d["slope"] * 100
    return Section(
        designation=row.designation,
        family=family,
        shape=shape,
        form="prismatic",
        source=row.source,
        dimensions_mm=dimensions,
        standard=row.standard or None,
        needs=("length",),
        area_mm2=g.area,
        inner_area_mm2=g.inner_area,
        surface_m2_per_m=g.surface,
        inner_surface_m2_per_m=g.inner_surface,
        centroid_mm=g.centroid,
        published_kg_per_m=published,
        published_density_kg_m3=STEEL_DENSITY if published else None,
        factor=factor,
        tolerance=tolerance,
        is_steel_standard=bool(row.standard),
        material_hint="metal",
        note=note,
    )


def cover(factor: Bounds, ratio: float) -> Bounds:
    """Widen a factor to hold another nominal, `ratio` times ours, with the same tolerance, unless it is print rounding."""
    if abs(ratio - 1) <= ROUNDING_SHARE:
        return factor
    return Bounds(factor.light * min(1.0, ratio), 1.0, factor.heavy * max(1.0, ratio))


def all_families() -> dict[str, str]:
    """Family codes and what they are."""
    return {code: what for code, (what, _) in FAMILIES.items()}


__all__ = ["FAMILIES", "Row", "Table", "all_families", "canonical", "cover", "find", "key_of", "load", "rows", "table"]
