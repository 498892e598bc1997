"""The tables of published sections, read family by family, each row turned into a Section once. Rank 2.

One CSV a standard. A file is read when a family in it is first asked for, so that one look-up parses only what it needs.
A row without a known source does not load. Designations are found by key: family, variant letters and the exact numbers.
"""

from __future__ import annotations

import math
import re
from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from functools import cache
from pathlib import Path

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table, refuse_odd_file
from takeoff.errors import DataError
from takeoff.provenance import Source
from takeoff.sections import made, shapes, tolerances
from takeoff.sections.section import STEEL_DENSITY, Section, Tolerance

#: family, variant letters, numbers as canonical text
Key = tuple[str, str, tuple[str, ...]]

#: family code -> (what it is, files that hold it). The order is the order in which families are named and preferred.
FAMILIES: dict[str, tuple[str, tuple[str, ...]]] = {
    "UB": ("universal beams", ("en_10365", "as_nzs_3679_1")),
    "UC": ("universal columns", ("en_10365", "as_nzs_3679_1")),
    "UBP": ("universal bearing piles", ("en_10365",)),
    "PFC": ("parallel flange channels", ("en_10365", "as_nzs_3679_1")),
    "IPE": ("European I beams", ("en_10365",)),
    "IPN": ("European tapered I beams", ("en_10365",)),
    "HE": ("European wide flange beams", ("en_10365",)),
    "HL": ("European long flange beams", ("en_10365",)),
    "HD": ("European wide flange columns", ("en_10365",)),
    "HP": ("wide flange bearing piles", ("en_10365", "csa_g40", "astm_a6")),
    "UPE": ("European parallel flange channels", ("en_10365",)),
    "UPN": ("European tapered channels", ("en_10365",)),
    "RSJ": ("British tapered joists", ("bs_4",)),
    "UAP": ("French parallel flange channels", ("nf_a45_255",)),
    "L": ("angles", ("en_10056_1", "csa_g40", "astm_a6", "din_1028", "jis_g_3192", "gb_t_706", "is_808")),
    "T": ("rolled tees", ("en_10055",)),
    "SHS": ("square hollow sections", ("en_10210_2", "en_10219_2", "as_nzs_1163", "jis_g_3466")),
    "RHS": ("rectangular hollow sections", ("en_10210_2", "en_10219_2", "as_nzs_1163", "jis_g_3466")),
    "CHS": ("circular hollow sections", ("en_10210_2", "en_10219_2", "as_nzs_1163")),
    "W": ("US and Canadian wide flange shapes", ("csa_g40", "astm_a6")),
    "M": ("US and Canadian miscellaneous I shapes", ("csa_g40", "astm_a6")),
    "S": ("US and Canadian tapered I shapes", ("csa_g40", "astm_a6")),
    "C": ("US and Canadian channels", ("csa_g40", "astm_a6")),
    "MC": ("US and Canadian miscellaneous channels", ("csa_g40", "astm_a6")),
    "WT": ("US and Canadian tees split from W", ("csa_g40", "astm_a6")),
    "MT": ("US tees split from M", ("astm_a6",)),
    "ST": ("US tees split from S", ("astm_a6",)),
    "HSS": ("US and Canadian hollow sections", ("csa_g40_hss", "astm_a500_metric", "astm_a500")),
    "WWF": ("Canadian welded wide flange shapes", ("csa_g40",)),
    "WWT": ("Canadian welded tees", ("csa_g40",)),
    "WRF": ("Canadian welded girders with two flange widths", ("csa_g40",)),
    "PIPE": ("pipe by nominal size and schedule", ("asme_b36", "astm_a53")),
    "PIPE EN 10255": ("threadable tubes, light, medium and heavy", ("en_10255",)),
    "I": ("Japanese and Chinese tapered I beams", ("jis_g_3192", "gb_t_706")),
    "CH": ("Japanese and Chinese tapered channels", ("jis_g_3192", "gb_t_706")),
    "H": ("Japanese H shapes", ("jis_g_3192",)),
    "HW": ("Chinese wide H shapes", ("gb_t_11263",)),
    "HM": ("Chinese medium H shapes", ("gb_t_11263",)),
    "HN": ("Chinese narrow H shapes", ("gb_t_11263",)),
    "HT": ("Chinese thin-walled H shapes", ("gb_t_11263",)),
    "ISMB": ("Indian medium beams", ("is_808",)),
    "ISLB": ("Indian light beams", ("is_808",)),
    "ISJB": ("Indian junior beams", ("is_808",)),
    "ISWB": ("Indian wide flange beams", ("is_808",)),
    "ISHB": ("Indian heavy beams", ("is_808",)),
    "ISSC": ("Indian column sections", ("is_808",)),
    "ISMC": ("Indian medium channels", ("is_808",)),
    "ISMPC": ("Indian medium parallel channels", ("is_808",)),
    "ISLC": ("Indian light channels", ("is_808",)),
    "ISJC": ("Indian junior channels", ("is_808",)),
    "TUBE": ("steel tubes by diameter and wall", ("en_10220",)),
    "REBAR": ("reinforcing bars", ("en_10080", "astm_a615", "csa_g30_18", "as_nzs_4671", "jis_g_3112")),
    "MESH": ("reinforcing fabrics", ("meshes",)),
    "LUMBER": ("US dressed lumber by nominal size", ("ps_20",)),
    "FL": ("flat bars", ("en_10058",)),
    "SQ": ("square bars", ("en_10059",)),
    "RD": ("round bars", ("en_10060",)),
    "HEX": ("hexagon bars", ("en_10061",)),
}

#: Above this share the table's mass and area × density disagree beyond the rounding of a printed three-figure mass,
#: and the bounds are widened to cover both.
ROUNDING_SHARE = 0.005

#: Families whose tables stand side by side; of the others the first table that has the size is taken.
SIDE_BY_SIDE = frozenset(("SHS", "RHS", "CHS", "HSS"))

_SIZES = ("h", "b", "b2", "tw", "tf", "tf2", "r1", "r2", "r3")
#: column -> (size, mm of its unit)
_COLUMNS = {f"{name}_{unit}": (name, mm) for name in _SIZES for unit, mm in (("mm", 1.0), ("in", 25.4))}
LB_PER_FT = 0.45359237 / 0.3048
_NEEDED = ("designation", "family", "shape", "source", "evidence")


@dataclass(slots=True)
class Row:
    """One catalogue row, its Section made when first asked for."""

    cells: dict[str, str]
    file: Path
    line: int
    source: Source
    family: str
    _key: Key | None = field(default=None, repr=False)
    _section: Section | None = field(default=None, repr=False)

    @property
    def designation(self) -> str:
        return self.cells["designation"]

    @property
    def standard(self) -> str:
        return self.cells.get("standard", "")

    @property
    def inches(self) -> bool:
        """True where the table's sizes, and so the numbers of its designations, are inches."""
        return "h_in" in self.cells

    @property
    def key(self) -> Key:
        if self._key is None:
            self._key = key_of(self.designation, self.family)
        return self._key

    @property
    def section(self) -> Section:
        if self._section is None:
            self._section = _section(self)
        return self._section


@dataclass(slots=True)
class Table:
    """Rows of one file, in their order by family; the keys of a family are made when one of it is first looked up."""

    families: dict[str, list[Row]] = field(default_factory=dict)
    _keys: dict[str, dict[Key, list[Row]]] = field(default_factory=dict, repr=False)

    def find(self, family: str, variant: str, numbers: tuple[str, ...]) -> list[Row]:
        if family not in self._keys:
            self._keys[family] = _index(self.families.get(family, []))
        return self._keys[family].get((family, variant, numbers), [])


def _index(rows: list[Row]) -> dict[Key, list[Row]]:
    """Rows by every key they answer to."""
    keys: dict[Key, list[Row]] = {}
    for row in rows:
        keys.setdefault(row.key, []).append(row)
        if "series" in row.cells and "nps" in row.cells:
            others: list[Key] = [(row.family, row.cells["series"], (size,)) for size in (f"DN{row.cells['dn']}", f"NPS{row.cells['nps']}")]
        elif "nps" in row.cells:
            others = _pipe_keys(row.cells)
        else:
            others = [(row.family, row.key[1], numbers) for numbers in _other_numbers(row) if numbers != row.key[2]]
        for key in others:
            keys.setdefault(key, []).append(row)
    return keys


def canonical(text: str) -> str:
    """A plain decimal number's one form: ``93.0`` and ``93`` meet, ``6.3`` and ``6.30`` too; nothing is rounded."""
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return text.lstrip("0") or "0" if not text.startswith("0.") else text


_DESIGNATION = re.compile(r"[A-Za-z]+|\d+(?:\.\d+)?")


_FRACTION = re.compile(r"(?:(\d+)-)?(\d+)/(\d+)")


def _decimal(fraction: re.Match[str]) -> str:
    whole, over, under = fraction.groups()
    return canonical(f"{int(whole or 0) + int(over) / int(under):.6f}")


def key_of(designation: str, family: str) -> Key:
    """The key of a catalogue designation: its letters beside the family code are the variant, fractions are decimals."""
    if "/" in designation:
        designation = _FRACTION.sub(_decimal, designation)
    parts = _DESIGNATION.findall(designation)
    numbers = tuple(canonical(p) for p in parts if p[0].isdigit())
    words = [p.upper() for p in parts if p[0].isalpha() and p not in ("x", "X", "kg", "m", "Lumber", "Rebar", "Mesh", "Tube")]
    return family, ("#" if "#" in designation else "") + "".join(w for w in words if w != family), numbers


def _other_numbers(row: Row) -> list[tuple[str, ...]]:
    """Further ways people number this row: the short form, the swapped form, the published mass, the width."""
    family, _, numbers = row.key
    cells = row.cells
    found: list[tuple[str, ...]] = []
    if family in ("UB", "UC", "UBP", "PFC", "HD", "HP", "RSJ") and cells.get("published_kg_per_m"):
        found.append((*numbers[:-1], canonical(cells["published_kg_per_m"])))
    if family in ("PFC", "RSJ"):
        found.append(numbers[:2])
    if family in ("I", "CH"):
        found.append(tuple(canonical(cells[f"{name}_mm"]) for name in ("h", "b", "tw")))
        found.append(tuple(canonical(cells[f"{name}_mm"]) for name in ("h", "b")))
    if family in ("UPN", "UPE", "IPN", "IPE", "T") and len(numbers) == 1:
        found.append((numbers[0], canonical(cells["b_mm"])))
    if family in ("L", "RHS", "SHS") and len(numbers) == 3:
        if numbers[0] == numbers[1]:
            found.append((numbers[0], numbers[2]))
        else:
            found.append((numbers[1], numbers[0], numbers[2]))
    if family == "T":
        found += [(numbers[0], canonical(cells["tf_mm"])), (numbers[0], numbers[0], canonical(cells["tf_mm"]))]
    if family == "FL":
        found.append((numbers[1], numbers[0]))
    if family in ("H", "HW", "HM", "HN", "HT"):
        web, flange = (canonical(cells[c]) for c in ("tw_mm", "tf_mm"))
        found += [numbers[:2], (*numbers[:2], web, flange)]
    if family.startswith("IS") and len(numbers) == 2:
        found.append(numbers[:1])
    if family.startswith("IS") and len(numbers) == 1:
        found.append((numbers[0], canonical(cells["b_mm"])))
    if family == "HSS" and len(numbers) == 3 and numbers[0] != numbers[1]:
        found.append((numbers[1], numbers[0], numbers[2]))
    if cells.get("metric_designation"):
        found.append(key_of(cells["metric_designation"], family)[2])
    return found


def _pipe_keys(cells: dict[str, str]) -> list[Key]:
    """A pipe by DN and schedule, by NPS and schedule, and by outside diameter and wall."""
    found: list[Key] = [("PIPE", "", (canonical(cells["h_mm"]), canonical(cells["tf_mm"])))]
    if cells["schedule"]:
        found += [("PIPE", cells["schedule"], (size,)) for size in (f"DN{cells['dn']}", f"NPS{cells['nps']}") if size not in ("DN", "NPS")]
    found += [("PIPE", "", (size,)) for size in (f"DN{cells['dn']}", f"NPS{cells['nps']}") if size not in ("DN", "NPS")]
    return found


@cache
def _sources() -> dict[str, tuple[str, str]]:
    return {row["id"]: (row["title"], row["clause"]) for _, row in read_table(data_folder() / "sections" / "sources.csv")}


def source_of(name: str) -> tuple[str, str]:
    """Title and clause of one of our sources by its id; blank where there is none."""
    return _sources().get(name, ("", ""))


def load(path: Path, own: bool = False) -> Table:
    """Read one sections file. An own file writes its source's title in the `source` column, ours the id of a source.

    Raises DataError on a missing column, a row without a source, an unknown shape or family twice named.
    """
    if own:
        refuse_odd_file(path, "the table of sections", "table")
    table = Table()
    seen: dict[str, int] = {}
    known: dict[tuple[str, str, str], Source] = {}
    for line, cells in read_table(path):
        for column in _NEEDED:
            if not cells.get(column):
                raise DataError(
                    f"line {line}: {column} is blank",
                    file=path,
                    read=cells.get("designation"),
                    right="every section carries a designation, family, shape, source and evidence",
                )
        told = (cells["source"], cells.get("clause", ""), cells["evidence"])
        if told not in known:
            title, clause = told[:2] if own else source_of(cells["source"])
            if not title:
                raise DataError(f"line {line}: unknown source", file=path, read=cells["source"], right="an id of sources.csv")
            known[told] = Source(title, clause, cells["evidence"])
        if cells["shape"] not in shapes.SHAPES:
            raise DataError(f"line {line}: unknown shape", file=path, read=cells["shape"], right="one of " + ", ".join(shapes.SHAPES))
        first = seen.setdefault(cells["designation"], line)
        if first != line:
            raise DataError(
                f"line {line}: the designation stands twice, first in line {first}",
                file=path,
                read=cells["designation"],
                right="each designation once",
            )
        family = cells["family"].upper() if own else cells["family"]
        row = Row(cells, path, line, known[told], family)
        table.families.setdefault(family, []).append(row)
        if own:
            row.section  # noqa: B018 (an own table's mistakes are told when it is read, not when a member first needs the row)
    return table


@cache
def table(file: str) -> Table:
    """One of our tables by its file name without the ending."""
    return load(data_folder() / "sections" / f"{file}.csv")


def tables(family: str) -> list[Table]:
    return [table(f) for f in FAMILIES[family][1]]


def find(family: str, variant: str, numbers: tuple[str, ...]) -> list[Row]:
    """Rows of one family under this key: of all its tables, or of the first that has it (see `SIDE_BY_SIDE`)."""
    found: list[Row] = []
    for file in FAMILIES[family][1]:
        found += table(file).find(family, variant, numbers)
        if found and family not in SIDE_BY_SIDE:
            break
    return found


def rows(family: str) -> list[Row]:
    """All rows of a family, file by file. Raises DataError on an unknown family."""
    if family not in FAMILIES:
        raise DataError("unknown section family", read=family, right="one of " + ", ".join(FAMILIES))
    return [row for t in tables(family) for row in t.families.get(family, [])]


#: mm, kg/m and the like beyond which no section's figure lies, nor below but for nought
_MOST, _LEAST = 1e6, 1e-4


def _figure(row: Row, column: str, least: float | None = None) -> float | None:
    """The number in a column of a row, None where it is blank. Raises DataError on any other text, and on one of `least` or below."""
    text = row.cells.get(column, "")
    if not text:
        return None
    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not abs(value) <= _MOST or 0 < abs(value) < _LEAST or (least is not None and value <= least):
        what = "a plain number" if least is None else f"a number above {least:g}"
        raise DataError(f"line {row.line}: {column} is no number that can be", file=row.file, read=text, right=what)
    return value


def _needed(row: Row, column: str) -> float:
    """The same of a column that must be filled, above zero. Raises KeyError where it is not."""
    value = _figure(row, column, 0)
    if value is None:
        raise KeyError(column)
    return value


def sizes(row: Row) -> dict[str, float]:
    """The sizes of a row in mm. Raises DataError on a text that is no number."""
    found: dict[str, float] = {}
    for column, (name, mm) in _COLUMNS.items():
        value = _figure(row, column)
        if value is not None:
            found[name] = value * mm
    web, flange = _figure(row, "web_slope_percent"), _figure(row, "flange_slope_percent")
    if web is not None:
        found["web_slope"] = web / 100
    if flange is not None:
        found["slope"] = flange / 100
        found["from_toe"] = shapes.from_toe(row.cells.get("tf_measured_at", ""), found["b"], found.get("tw", 0.0))
    return found


#: Standards whose mass tolerance is the same for every shape.
_MASS_RULES = {
    "EN 10210-2": "en10210-2",
    "EN 10219-2": "en10219-2",
    "AS/NZS 1163": "as1163",
    "JIS G 3466": "jis3466",
    "EN 10255": "en10255",
    "ASTM A53": "a53",
    "ASME B36.10M": "a53",
    "ASME B36.19M": "a312",
}


def mass_rule(shape: str, standard: str, family: str, d: dict[str, float]) -> tuple[Bounds, Tolerance]:
    """The mass tolerance of a rolled or hollow section by its standard and shape."""
    if standard in ("JIS G 3192", "GB/T 11263", "GB/T 706", "AS/NZS 3679.1", "IS 808"):
        return tolerances.mass_factor("rolled-other")
    if standard == "EN 10220":
        return tube_rule(d)
    if standard in _MASS_RULES:
        return tolerances.mass_factor(_MASS_RULES[standard], d["h"])
    if standard == "ASTM A500":
        return _wall_rule(shape, d)
    if standard == "CSA G40.20":
        if family in ("WWF", "WWT", "WRF"):
            return tolerances.mass_factor("welded")
        return tolerances.mass_factor("g40-hss" if "hollow" in shape else "g40-shapes")
    if standard == "ASTM A6":
        if family == "L" and d["h"] < 76:
            return tolerances.mass_factor("a6-small")
        return tolerances.mass_factor("a6-w" if family in ("W", "HP") else "a6-other")
    if shape == "I tapered":
        return tolerances.mass_factor("en10024")
    if shape.startswith("channel"):
        return tolerances.mass_factor("en10279", d["h"])
    if shape == "angle":
        return tolerances.mass_factor("en10056-2", d["tf"])
    if shape == "tee":
        return tolerances.mass_factor("en10055")
    return tolerances.mass_factor("en10034")


def with_wall(shape: str, d: dict[str, float], wall: float) -> float:
    """Area mm² of a hollow section with another wall, its corners by the same rule (2 t outside, t inside)."""
    changed = {**d, "tf": wall}
    if shape == "box hollow":
        changed.update(r1=d["r1"] * wall / d["tf"], r2=d["r2"] * wall / d["tf"])
    return shapes.geometry(shape, changed).area


def tube_rule(d: Mapping[str, float], welded: bool = False) -> tuple[Bounds, Tolerance]:
    """EN 10216-1 limits the wall of a seamless tube, above 219.1 mm by wall over diameter; EN 10217 that of a welded one."""
    rule = "en10217-wall" if welded else "en10216-wall" if d["h"] <= 219.1 else "en10216-wall-large"
    found = tolerances.band(rule, d["tf"] / d["h"])
    if found is None:
        raise DataError("the tolerance rule has no band for this tube", read=rule)
    d = dict(d)
    nominal = shapes.geometry("round hollow", d).area
    light = with_wall("round hollow", d, d["tf"] * (1 - found.minus / 100))
    heavy = with_wall("round hollow", d, min(d["tf"] * (1 + found.plus / 100), d["h"] / 2 - 1e-9))
    return Bounds(light / nominal, 1.0, heavy / nominal), found.tolerance


def _wall_rule(shape: str, d: dict[str, float]) -> tuple[Bounds, Tolerance]:
    """ASTM A500 limits the wall, not the mass: area at the least and greatest wall."""
    limits, tolerance = tolerances.size_limits("a500", d["tf"], "a500")
    nominal = shapes.geometry(shape, d).area
    return Bounds(with_wall(shape, d, limits.light) / nominal, 1.0, with_wall(shape, d, limits.heavy) / nominal), tolerance


def _surface(standard: str, shape: str, d: dict[str, float], exact_m2_per_m: float) -> float:
    """Painting surface m²/m as the standard's tables print it.

    US and Canadian tables leave fillets and the flanges' taper out, which errs on the heavy side of a coating: 573
    published figures are met within 2 % so. The European ones take the true outline.
    """
    if standard not in ("ASTM A6", "CSA G40.20") or "hollow" in shape:
        return exact_m2_per_m
    h, b, tw = d["h"], d["b"], d.get("tw", 0.0)
    if shape == "I unequal":
        return (2 * b + 2 * d["b2"] + 2 * h - 2 * tw) / 1000
    if shape.startswith(("I ", "channel")):
        return (4 * b + 2 * h - 2 * tw) / 1000
    return 2 * (b + h) / 1000


def _section(row: Row) -> Section:
    try:
        return _section_of(row)
    except KeyError as missing:
        raise DataError(
            f"line {row.line}: a size or column that its family or shape needs is not given", file=row.file, read=row.designation,
            right=f"also {missing.args[0]}",
        ) from missing


def _section_of(row: Row) -> Section:
    d = sizes(row)
    shape, family = row.cells["shape"], row.cells["family"]
    published = _figure(row, "published_kg_per_m", 0)
    per_foot = _figure(row, "published_lb_per_ft", 0)
    if per_foot is not None:
        published = per_foot * LB_PER_FT
    note = row.cells.get("note", "")
    if family in _SPECIAL:
        return _SPECIAL[family](row, d, published)
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
    if not g.area > 0:
        raise DataError(f"line {row.line}: its radii leave nothing of the shape", file=row.file, read=row.designation)
    factor, tolerance = mass_rule(shape, row.standard, family, d)
    if published:
        factor = cover(factor, g.area * STEEL_DENSITY * 1e-6 / published)
    design_wall = (_figure(row, "design_t_in", 0) or 0.0) * 25.4 or _figure(row, "design_t_mm", 0)
    dimensions = {k: round(v, 6) for k, v in d.items() if k not in ("slope", "web_slope", "from_toe")}
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
        design_area_mm2=with_wall(shape, d, design_wall) if design_wall else None,
        inner_area_mm2=g.inner_area,
        surface_m2_per_m=_surface(row.standard, shape, d, g.surface),
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


def _rebar(row: Row, d: dict[str, float], published: float | None) -> Section:
    """A bar by its nominal diameter; where the standard rounds the area, that area is the mass's."""
    g = shapes.geometry("round bar", d)
    area = _figure(row, "area_by_standard_mm2", 0) or g.area
    factor, tolerance = tolerances.mass_factor("en10080" if row.standard == "EN 10080" else "rebar-other", d["b"])
    return Section(
        designation=row.designation,
        family="REBAR",
        shape="round bar",
        form="prismatic",
        source=row.source,
        dimensions_mm={"diameter": d["b"]},
        standard=row.standard,
        needs=("length",),
        area_mm2=area,
        surface_m2_per_m=g.surface,
        centroid_mm=g.centroid,
        published_kg_per_m=published,
        published_density_kg_m3=STEEL_DENSITY,
        factor=factor,
        tolerance=tolerance,
        is_steel_standard=True,
        material_hint="metal",
        note=row.cells.get("note", ""),
    )


def _mesh(row: Row, d: dict[str, float], published: float | None) -> Section:  # noqa: ARG001 (one signature for all special families)
    """A welded fabric: kg/m² by its table."""
    factor, tolerance = tolerances.mass_factor("mesh")
    wires = {name: wire for name in ("wire1", "pitch1", "wire2", "pitch2") if (wire := _figure(row, f"{name}_mm", 0)) is not None}
    return Section(
        designation=row.designation,
        family="MESH",
        shape="mesh",
        form="area mass",
        source=row.source,
        dimensions_mm=wires,
        standard=row.standard,
        needs=("width", "length"),
        kg_per_m2=_needed(row, "kg_per_m2"),
        factor=factor,
        tolerance=tolerance,
        is_steel_standard=True,
        material_hint="metal",
        note=row.cells.get("note", ""),
    )


def _lumber(row: Row, d: dict[str, float], published: float | None) -> Section:  # noqa: ARG001 (one signature for all special families)
    """Lumber by its nominal size: the dressed dry section, heavy at the green one."""
    area = d["b"] * d["tf"]
    green = _needed(row, "green_b_in") * _needed(row, "green_tf_in") * 25.4**2
    found, tolerance = tolerances.mass_factor("ps20")
    return Section(
        designation=row.designation,
        family="LUMBER",
        shape="board",
        form="prismatic",
        source=row.source,
        dimensions_mm={"thickness": round(d["tf"], 6), "width": round(d["b"], 6)},
        standard="PS 20",
        needs=("length",),
        area_mm2=area,
        surface_m2_per_m=2 * (d["b"] + d["tf"]) / 1000,
        centroid_mm=(d["b"] / 2, d["tf"] / 2),
        factor=Bounds(found.light, 1.0, max(1.0, green / area)),
        tolerance=tolerance,
        material_hint="wood",
        note=row.cells.get("note", ""),
    )


_SPECIAL = {"REBAR": _rebar, "MESH": _mesh, "LUMBER": _lumber}


def cover(factor: Bounds, ratio: float) -> Bounds:
    """Widen a factor to hold another nominal, `ratio` times ours, with the same tolerance, unless it is print rounding."""
    if abs(ratio - 1) <= ROUNDING_SHARE:
        return factor
    return Bounds(factor.light * min(1.0, ratio), 1.0, factor.heavy * max(1.0, ratio))


def all_families() -> dict[str, str]:
    """Family codes and what they are."""
    return {code: what for code, (what, _) in FAMILIES.items()}


__all__ = ["FAMILIES", "Row", "Table", "all_families", "canonical", "cover", "find", "key_of", "load", "rows", "table"]
