"""Random and half-right input of every kind: no traceback, the account closes, the input is unchanged.

The quick profile runs with the suite. A long one: `TAKEOFF_FUZZ=20 python -m pytest tests/test_fuzz.py`, twenty times the
examples, other ones at each run. What once failed is kept in `fuzz_cases/` and run every time.
"""

from __future__ import annotations

import contextlib
import csv
import io
import json
import math
import os
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import hostile as h
import pytest
from hypothesis import HealthCheck, Phase, given, settings
from hypothesis import strategies as st

from takeoff import materials, pipeline, sections
from takeoff.errors import TakeoffError
from takeoff.job import Job, job_from, read_job
from takeoff.lists import columns, counts
from takeoff.lists.headings import read_heading
from takeoff.quantities import length_mm, mass_kg, measure_readings, number_readings, temperature_C
from takeoff.reports import compare, plainpage, records, terminal, workbook
from takeoff.weighing import contents, cuts, finishes, holes, insulation

CASES = Path(__file__).parent / "fuzz_cases"
TIMES = float(os.environ.get("TAKEOFF_FUZZ", "1"))


def examples(count: int) -> Callable[[Any], Any]:
    """So many examples in the quick profile; the long one is random, the quick one always the same."""
    return settings(
        max_examples=max(1, int(count * TIMES)), deadline=None, derandomize=TIMES <= 1, database=None,
        phases=(Phase.explicit, Phase.generate, Phase.shrink), suppress_health_check=list(HealthCheck),
    )


# --- what people type, and what nobody would -------------------------------------------------------------------------

WORDS = st.sampled_from((
    "UB 203x133x25", "UC 152x152x23", "HEA 200", "IPE 300", "SHS 80x80x5", "RHS 100x50x5", "CHS 114.3x5", "L 60x60x6", "PFC 200x75x23",
    "FL 50x10", "PL10x200", "PL 10", "Ø20", "M16x60", "HSS6X4X1/4", "W12x26", "2x6", "Block 600x300x200", "Rebar 16", "A193", "DN 50 SCH 40",
    "S355", "S275JR", "1.4301", "316L", "oak", "C24", "granite", "EN AW-6082", "C30/37", "steel", "stainless steel", "Stahl", "acier",
    "6000", "6 m", "12'-6 1/2\"", "1.500,5", "1,500", "1 200", "2.5 t", "-5", "0", "1e9", "4 off", "ca 13", "4 (2 L + 2 R)", "4 x 504",
    "galvanized", "paint 240 um", "zinc 85 um + paint 120 um", "60 % water", "500 l diesel", "50 mm at 100 kg/m3", "4x22", "2x 300x200",
    "45°", "35 °C", "95 F", "ditto", "\"", "do.", "-", "n/a", "Total", "Summe", "Subtotal", "example", "or: UB 254", "optional", "see row 5",
    "pack of 25", "Frame F1", "TRUE", "²", "0x10", "#REF!", "=1+1", "@SUM(A1)", "½", "1½\"", "50x50x5", "x", "×", "3/0", "1/0",
))
UGLY = st.text(st.characters(codec="utf-8", exclude_characters="\x00"), max_size=12)
PIECES = st.lists(st.one_of(WORDS, st.sampled_from(" x/.,-+*()'\"°%;|&<>"), st.integers(-9, 10**6).map(str), UGLY), max_size=5).map("".join)
TEXT = st.one_of(WORDS, WORDS, PIECES, UGLY)
LONG = st.tuples(TEXT, st.integers(1, 3000)).map(lambda pair: (pair[0] * pair[1])[:20_000])
NUMBER = st.one_of(st.integers(-10, 20_000), st.floats(allow_nan=False, allow_infinity=False), st.integers())
HEADINGS = (
    "Mark", "Assembly", "Pick", "Phase", "Run", "Bundle", "Quantity", "Qty per frame", "Section", "Material", "Length (mm)", "Length (ft)", "Length",
    "Width (mm)", "Thickness (mm)", "Height", "Diameter (mm)", "Unit mass (kg)", "Total mass (kg)", "Mass", "kg/m", "Finish", "Contents",
    "Insulation", "Holes", "Cut angle 1", "Measured at", "X (mm)", "Y (mm)", "Z (mm)", "X1 (mm)", "X2 (mm)", "Axis", "Roll", "Remarks", "Unit",
    "Weighed mass (kg)", "Volume (m3)", "Area (m2)", "Description", "Size", "Pos.", "Menge", "Werkstoff", "Price", "Nonsense", "",
)


#: what fits a column, so that most rows are nearly right
FITTING = {
    "Mark": ("M1", "M2", "B-7"), "Assembly": ("F1", "F2", ""), "Pick": ("P1", "P2", ""), "Phase": ("1", "2"), "Run": ("R1", "R1", "R2"),
    "Quantity": (1, 2, "4 off", "3"), "Qty per frame": (2, 3), "Menge": (1, 4),
    "Section": ("UB 203x133x25", "PL 10", "PL10x200", "SHS 80x80x5", "CHS 114.3x5", "FL 50x10", "M16x60", "HSS6X4X1/4", "2x6", "Ø20"),
    "Description": ("Plate", "beam UB 203x133x25"), "Size": ("50x10", "203x133x25"),
    "Material": ("S355", "316L", "oak", "C24", "granite", "EN AW-6082", "steel"), "Werkstoff": ("S235", "1.4301"),
    "Length (mm)": (6000, 1200.5, "2.5 m", "900"), "Length (ft)": (12, "12'-6\""), "Length": (3000, "3 m"), "Width (mm)": (200, 90),
    "Thickness (mm)": (10, 12.5), "Height": (300, 600), "Diameter (mm)": (20, 48.3), "Unit mass (kg)": (150, 12.5), "Total mass (kg)": (300, 25),
    "Mass": (150, "150 kg"), "kg/m": (25.1, 7.85), "Finish": ("galvanized", "paint 240 um", "none"), "Contents": ("water", "60 % water", ""),
    "Insulation": ("50 mm at 100 kg/m3", ""), "Holes": ("4x22", "2x 300x200", ""), "Cut angle 1": (45, 0, "30°"), "Measured at": (35, "95 F"),
    "X (mm)": (0, 1000), "Y (mm)": (0, -500.5), "Z (mm)": (0, 250), "X1 (mm)": (0, 100), "X2 (mm)": (6000, 0), "Axis": ("heel", "top", ""),
    "Roll": (0, 90), "Remarks": ("see drawing", "pack of 25", "optional"), "Unit": ("pcs", "m", "set"), "Weighed mass (kg)": (151, 0),
    "Volume (m3)": (0.1, 1), "Area (m2)": (1.2, 4),
}


def _with_wrong(parts: tuple[list[Any], list[tuple[int, Any]]]) -> list[Any]:
    row, wrong = parts
    for column, value in wrong:
        row[column:column + 1] = [value]
    return row


@st.composite
def grids(draw: st.DrawFn, cell: st.SearchStrategy[Any]) -> list[list[Any]]:
    """A list with a heading row; its rows fit but for a cell or two, and rows of anything stand above and between."""
    headings = draw(st.lists(st.sampled_from(HEADINGS), max_size=7, unique=draw(st.integers(0, 3)) > 0))
    if draw(st.integers(0, 4)):
        known = ["Mark", "Quantity", "Section", "Material", "Length (mm)"]
        headings = [*known, *(heading for heading in headings if heading not in known)]
    right = st.tuples(*(st.sampled_from(FITTING.get(heading, ("x",))) for heading in headings)).map(list)
    wrong = st.lists(st.tuples(st.integers(0, max(len(headings) - 1, 0)), st.one_of(st.none(), cell)), max_size=2)
    row = st.tuples(right, st.one_of(st.just([]), wrong)).map(_with_wrong)
    rows: list[list[Any]] = draw(st.lists(st.lists(cell, max_size=4), max_size=2))
    rows.append(list(headings))
    rows += draw(st.lists(row, min_size=1, max_size=8))
    if draw(st.booleans()):
        rows.insert(draw(st.integers(0, len(rows))), draw(st.lists(st.one_of(st.none(), cell), max_size=len(headings) + 1)))
    return rows


def weigh_everything(path: Path, job: Job | None = None, *, book: bool = False) -> pipeline.Result | None:
    """The whole path over one file, with every output; None where the file is refused. What must hold is asserted."""
    before = path.read_bytes()
    result, refusal = None, None
    try:
        result = pipeline.schedule([path], job or Job())
    except TakeoffError as error:
        refusal = error
    assert path.read_bytes() == before
    if result is None:
        assert refusal is not None
        assert refusal.status == 2, refusal
        return None
    account = result.account
    assert account.rows == account.members + account.heading + account.total + account.blank + account.other
    assert len(result.members) == account.members
    record = json.loads(records.to_json(result))
    assert [m["row"] for m in record["members"]] == result.members["row"].tolist()
    weighed = [m for m in record["members"] if m["status"] != "not weighed"]
    for member in weighed:
        mass = member["mass_total_kg"]
        assert 0 <= mass["light"] <= mass["nominal"] <= mass["heavy"] < math.inf
    assert record["totals"]["mass_kg"]["heavy"] == pytest.approx(math.fsum(m["mass_total_kg"]["heavy"] for m in weighed))
    assert len(list(csv.reader(io.StringIO(records.to_csv(result), newline="")))) == account.members + 1
    assert terminal.summary(result, 40)
    if book:
        out = path.with_name("out.xlsx")
        workbook.write_workbook(result, out)
        out.unlink()
    return result


# --- cells -----------------------------------------------------------------------------------------------------------

ONE_TEXT: dict[str, Callable[[str], object]] = {
    "section": sections.read, "material": materials.lookup, "heading": read_heading, "count": counts.read_count,
    "count and length": lambda text: counts.read_count_and_length(text, 1.0), "measure": measure_readings, "number": number_readings,
    "length": length_mm, "mass": mass_kg, "temperature": temperature_C, "contents": contents.read, "finish": lambda text: finishes.read(text, (5.0, 10.0)), "cut": cuts.read,
    "insulation": lambda text: insulation.read(text, (5.0, 10.0)), "holes": holes.read, "cell": columns.as_text,
}


@pytest.mark.parametrize("reader", ONE_TEXT)
@examples(120)
@given(text=st.one_of(TEXT, LONG))
def test_one_text(reader: str, text: str) -> None:
    """Whatever stands in a cell or an option is read, or refused in one sentence."""
    with contextlib.suppress(TakeoffError):
        ONE_TEXT[reader](text)


# --- lists -----------------------------------------------------------------------------------------------------------


@examples(150)
@given(grid=grids(st.one_of(TEXT, NUMBER.map(str))), separator=st.sampled_from(",;\t|"), book=st.integers(0, 9))
def test_text_lists(tmp_path_factory: pytest.TempPathFactory, grid: list[list[Any]], separator: str, book: int) -> None:
    """Lists of any cells, as a text file."""
    path = tmp_path_factory.mktemp("fuzz") / "list.csv"
    with path.open("w", encoding="utf-8", newline="", errors="replace") as handle:
        csv.writer(handle, delimiter=separator, lineterminator="\n").writerows(grid)
    weigh_everything(path, book=book == 0)


@examples(100)
@given(data=st.one_of(
    st.binary(max_size=400),
    st.tuples(st.sampled_from((b"Mark,Quantity,Section,Material,Length (mm)\nM0,2,PL10x200,S355,900\n", b"Mark;Quantity;Section\n", b"\xef\xbb\xbfPos;Menge;Profil\n")),
              st.lists(st.one_of(st.binary(max_size=30), TEXT.map(lambda t: t.encode("utf-8", "replace")),
                                 st.sampled_from((b"\n", b",", b";", b'"', b'""', b"\r", b"<!--", b"-->", b"M1,2,UB 203x133x25,S355,6000\n"))), max_size=20),
              ).map(lambda pair: pair[0] + b"".join(pair[1])),
))
def test_text_files_of_any_bytes(tmp_path_factory: pytest.TempPathFactory, data: bytes) -> None:
    """Bytes that are, or nearly are, a text list."""
    path = tmp_path_factory.mktemp("fuzz") / "list.csv"
    path.write_bytes(data)
    weigh_everything(path)


@examples(30)
@given(grid=grids(st.one_of(TEXT, NUMBER, st.booleans(), st.datetimes(), st.dates(), st.times(), st.timedeltas())))
def test_workbooks(tmp_path_factory: pytest.TempPathFactory, grid: list[list[Any]]) -> None:
    """Lists of cells of every type, as a workbook."""
    import xlsxwriter

    path = tmp_path_factory.mktemp("fuzz") / "list.xlsx"
    plain = {"strings_to_formulas": False, "strings_to_urls": False, "remove_timezone": True, "default_date_format": "yyyy-mm-dd"}
    with xlsxwriter.Workbook(str(path), plain) as book:
        sheet = book.add_worksheet("List")
        for number, row in enumerate(grid):
            for column, value in enumerate(row):
                with contextlib.suppress(TypeError, ValueError):
                    sheet.write(number, column, str(value) if isinstance(value, int) and abs(value) > 1e300 else value)
    weigh_everything(path)


@examples(40)
@given(flips=st.lists(st.tuples(st.floats(0, 1), st.integers(0, 255)), min_size=1, max_size=4), cut=st.one_of(st.none(), st.floats(0, 1)))
def test_damaged_workbooks(tmp_path_factory: pytest.TempPathFactory, flips: list[tuple[float, int]], cut: float | None) -> None:
    """Bytes of a packed workbook changed or cut off."""
    path = h.write(tmp_path_factory.mktemp("fuzz") / "list.xlsx", h.sheet(h.PLAIN))
    data = bytearray(path.read_bytes())
    for where, byte in flips:
        data[min(int(where * len(data)), len(data) - 1)] = byte
    path.write_bytes(bytes(data if cut is None else data[: int(cut * len(data))]))
    weigh_everything(path)


TAGS = st.sampled_from((
    '<row r="3">', "</row>", '<row r="3"/>', '<row hidden="1">', "<row>", '<c r="A3" t="s"><v>0</v></c>', '<c><v>5</v></c>', '<c r="B3" t="e"><v>#N/A</v></c>',
    '<c r="C3"><f>A1</f></c>', '<c r="XFD3"/>', '<c r="A1048577"/>', "<c r='D3' t='b'><v>1</v></c>", '<c r="E3" t="d"><v>2024-13-40</v></c>',
    '<c r="E3" t="zzz"><v>x</v></c>', '<c r="A3" s="77"><v>1e999</v></c>', '<c r="F3" t="inlineStr"><is><t>x</t></is></c>', "<!-- x -->",
    "<![CDATA[<row r='9'/>]]>", "&amp;", "&#0;", "<v>", "</c>", '<mergeCell ref="A1:B9"/>', "</sheetData>", h.row(3), h.row(4), h.row(3),
))


@examples(60)
@given(body=st.lists(TAGS, max_size=8).map("".join))
def test_workbooks_of_odd_xml(tmp_path_factory: pytest.TempPathFactory, body: str) -> None:
    """Tags of a sheet in any order."""
    weigh_everything(h.write(tmp_path_factory.mktemp("fuzz") / "list.xlsx", h.sheet(h.PLAIN + body)))


# --- job files -------------------------------------------------------------------------------------------------------

KEYS = {
    "job": ("title", "units", "date", "zzz"), "reading": ("sheets", "tables", "skip", "length_unit", "decimal", "material", "columns", "tape"),
    "names": ("hollow", "materials", "sections"), "masses": ("weld_percent", "finish", "moisture_percent", "hand_kg"),
    "temperatures": ("reference", "coldest", "warmest", "erect"), "lift": ("contingency", "planning_limit", "picks", "sling"),
    "transport": ("max_bundle_kg", "friction", "lashing"), "guards": ("rows", "cells", "megabytes", "seconds"), "limits": ("width_mm",),
    "own": ("materials",), "runs": ("name", "order"), "crane": ("name", "chart"), "vehicles": ("name", "kind"), "path": ("x",),
}
VALUES = st.recursive(
    st.one_of(st.none(), st.booleans(), st.integers(), st.floats(), st.sampled_from(("si", "us", "mm", "cold", "Sheet!A1:B2", "14", "S355", "")), UGLY),
    lambda inner: st.one_of(st.lists(inner, max_size=3), st.dictionaries(st.sampled_from(("name", "marks", "S355", "C", "zzz")), inner, max_size=3)),
    max_leaves=4,
)
TABLES = st.sampled_from(sorted(KEYS)).flatmap(
    lambda part: st.tuples(st.just(part), st.one_of(VALUES, st.dictionaries(st.sampled_from(KEYS[part]), VALUES, max_size=3)))
)
SMALL_LIST = "Mark,Assembly,Quantity,Section,Material,Length\nM1,A1,2,UB 203x133x25,S355,6000\nM2,A1,1,PL10x200,oak,900\nM3,A2,1,x,,\n"


#: settings of the right kind, with values at and beyond their limits
NEAR = st.sampled_from((
    ("job", {"units": "us"}), ("reading", {"length_unit": "m"}), ("reading", {"decimal": "comma"}), ("reading", {"material": "oak"}),
    ("reading", {"tape": {"material": "steel", "temperature_C": 40}}), ("reading", {"columns": {"Mark": "assembly"}}),
    ("reading", {"columns": {"F": "mark"}}), ("reading", {"skip": ["2"]}), ("reading", {"tables": ["A1:F2"]}), ("reading", {"sheets": ["x"]}),
    ("names", {"hollow": "cold"}), ("names", {"materials": {"x": "S355"}, "sections": {"x": "UB 203x133x25"}}),
    ("masses", {"weld_percent": 100}), ("masses", {"finish": "galvanized"}), ("masses", {"moisture_percent": 1e-9}), ("masses", {"hand_kg": 0}),
    ("temperatures", {"coldest": -273.15, "warmest": 4000}), ("temperatures", {"erect": 1e4}), ("temperatures", {"x%s": 20, "measured": -40}),
    ("lift", {"contingency": 1e-9}), ("lift", {"dynamic_factor": 1e9}), ("lift", {"planning_limit": 1}), ("lift", {"rigging_kg": 1e7}),
    ("lift", {"picks": [{"name": "p", "assemblies": ["A1"], "radius_m": 8, "points": [{"name": "a", "position": [0, 0, 0]}]}]}),
    ("lift", {"picks": [{"name": "p", "marks": ["nobody"]}, {"name": "p", "marks": ["M1"]}]}), ("runs", [{"name": "A1", "fixed": "M2"}]),
    ("runs", [{"name": "R", "order": ["M1", "M1"]}]), ("transport", {"max_bundle_kg": 1, "time_limit_s": 0.5}), ("crane", {"name": "c", "hook_rating_kg": 1}),
    ("vehicles", [{"name": "v", "payload_kg": 100}]), ("vehicles", [{"name": "v", "payload_kg": 24000, "deck_length_mm": 13000, "deck_width_mm": 2400}]),
    ("guards", {"rows": 4}), ("guards", {"cells": 24}), ("limits", {"length_mm": 1}),
))


@examples(250)
@given(raw=st.lists(st.one_of(NEAR, NEAR, NEAR, TABLES), max_size=4).map(dict))
def test_job_settings(tmp_path_factory: pytest.TempPathFactory, raw: dict[str, Any]) -> None:
    """Any settings: acted on, or refused with the key."""
    job = None
    with contextlib.suppress(TakeoffError):
        job = job_from(raw)
    if job is None:
        return
    path = tmp_path_factory.mktemp("fuzz") / "list.csv"
    path.write_text(SMALL_LIST)
    weigh_everything(path, job)


@examples(60)
@given(data=st.one_of(st.binary(max_size=80), st.lists(st.one_of(
    st.sampled_from(("[job]\n", "[[runs]]\n", "[guards]\n", "title = ", "rows = ", '"x"\n', "1\n", "true\n", "[", "]", "=", "\n", "1e400\n", "nan\n", "[lift.picks]\n")),
    UGLY), max_size=8).map(lambda parts: "".join(parts).encode("utf-8", "replace"))))
def test_job_files_of_any_bytes(tmp_path_factory: pytest.TempPathFactory, data: bytes) -> None:
    """Bytes that are, or nearly are, TOML."""
    path = tmp_path_factory.mktemp("fuzz") / "job.toml"
    path.write_bytes(data)
    with contextlib.suppress(TakeoffError):
        read_job(path)


# --- the user's own tables, charts and earlier records -----------------------------------------------------------------

OWN_LIST = "Mark,Assembly,Quantity,Section,Material,Length (mm),Contents\nM1,A1,2,X 1,mix 7,6000,\nM2,A1,1,PL10x200,mix 7,900,\nM3,A2,1,X 1,S355,1000,mix 7\n"
OWN_MATERIALS = {
    "key": ("mix-7", "mix-7b"), "name": ("Mix 7", "steel"), "family": ("concrete", "carbon steel", "wood", "liquid", "stone"), "aliases": ("mix; x", "", "S355"),
    "designations": ("mix 7", ""), "density_low_kg_m3": ("", "2400"), "density_kg_m3": ("2450", "7850", "1"), "density_high_kg_m3": ("", "2600"),
    "density_condition": ("20 °C", ""), "density_source": ("mill sheet",), "density_clause": ("",), "density_evidence": ("read", "recalled"), "alpha_1e-6_per_K": ("", "12"),
    "alpha_low_C": ("", "-50"), "alpha_high_C": ("", "100"), "alpha_direction": ("", "isotropic"), "alpha_source": ("", "a book"), "alpha_clause": ("",),
    "alpha_evidence": ("", "read"), "law": ("", "constant"), "melting_C": ("", "1500"), "note": ("",),
}
OWN_SECTIONS = {
    "designation": ("X 1", "X 2"), "family": ("X", "UB"), "shape": ("I parallel", "box hollow", "solid rectangle", "round hollow"), "standard": ("", "own"),
    "h_mm": ("100", "50"), "b_mm": ("50", "100"), "tw_mm": ("5", ""), "tf_mm": ("8", "5"), "r1_mm": ("", "3"), "published_kg_per_m": ("", "10"),
    "source": ("Drawing 7",), "clause": ("",), "evidence": ("read",), "note": ("",),
}
OWN_CELL = st.one_of(TEXT, NUMBER.map(str), st.sampled_from(("", "nan", "inf", "-1", "1e308", "0", "mix-7", "read")))


@st.composite
def own_tables(draw: st.DrawFn, fitting: dict[str, tuple[str, ...]]) -> bytes:
    """A table of the user's own that is right but for a cell, a heading or a byte."""
    headings = list(fitting)
    rows = [[draw(st.sampled_from(fitting[heading])) for heading in headings] for _ in range(draw(st.integers(1, 3)))]
    if draw(st.booleans()):
        draw(st.sampled_from(rows))[draw(st.integers(0, len(headings) - 1))] = draw(OWN_CELL)
    kept = [i for i, heading in enumerate(headings) if not heading.endswith("note") or draw(st.booleans())]
    out = io.StringIO()
    csv.writer(out, lineterminator="\n").writerows([[line[i] for i in kept] for line in [headings, *rows]])
    data = bytearray(out.getvalue().encode("utf-8", "replace"))
    for where, byte in draw(st.lists(st.tuples(st.floats(0, 1), st.integers(0, 255)), max_size=1)) if draw(st.integers(0, 4)) == 0 else []:
        data[min(int(where * len(data)), len(data) - 1)] = byte
    return bytes(data)


@examples(60)
@given(table=own_tables(OWN_MATERIALS))
def test_own_materials(tmp_path_factory: pytest.TempPathFactory, table: bytes) -> None:
    """Own materials: weighed with, or refused with the line."""
    _with_own(tmp_path_factory.mktemp("fuzz"), "materials", table)


@examples(60)
@given(table=own_tables(OWN_SECTIONS))
def test_own_sections(tmp_path_factory: pytest.TempPathFactory, table: bytes) -> None:
    """Own sections: weighed with, or refused with the line."""
    _with_own(tmp_path_factory.mktemp("fuzz"), "sections", table)


def _with_own(folder: Path, kind: str, table: bytes) -> None:
    (folder / "own.csv").write_bytes(table)
    (folder / "list.csv").write_text(OWN_LIST)
    weigh_everything(folder / "list.csv", job_from({"own": {kind: "own.csv"}}, folder / "job.toml"))
    assert (folder / "own.csv").read_bytes() == table


PLACED = (
    "Mark,Assembly,Phase,Quantity,Section,Material,Length (mm),X1 (mm),Y1 (mm),Z1 (mm),X2 (mm),Y2 (mm),Z2 (mm)\nM1,A1,1,1,UB 203x133x25,S355,6000,0,0,0,6000,0,0\n"
    "M2,A1,1,1,UB 203x133x25,S355,6000,0,1500,0,6000,1500,0\nM3,A2,2,3,PL10x200,oak,900,,,,,,\n"
)
CHART_CELL = st.one_of(st.sampled_from(("", "-", "20 m", "30.5", "radius (ft)", "12 000", "9.5", "1,200", "x")), st.integers(-1, 90_000).map(str), TEXT)


@examples(80)
@given(
    grid=st.lists(st.lists(CHART_CELL, min_size=1, max_size=4), max_size=5), wrong=st.lists(st.tuples(st.integers(0, 3), st.integers(0, 3), CHART_CELL), max_size=2),
    right=st.integers(0, 4), crane=st.fixed_dictionaries({}, optional={
        "rating_unit": st.sampled_from(("kg", "t", "lb")), "radius_unit": st.sampled_from(("m", "ft")), "deductions_kg": st.floats(0, 1e6),
        "hook_rating_kg": st.floats(1, 1e6), "boom_foot_m": st.floats(0, 50), "block_m": st.floats(0, 20),
        "outriggers": st.just({"spread_x_mm": 6000.0, "spread_y_mm": 6000.0, "crane_kg": 36000.0, "allowable_kpa": 100.0})}),
    radius=st.floats(0.1, 100), boom=st.one_of(st.none(), st.floats(1, 60)),
)
def test_crane_charts(
    tmp_path_factory: pytest.TempPathFactory, grid: list[list[str]], wrong: list[tuple[int, int, str]], right: int, crane: dict[str, Any], radius: float, boom: float | None,
) -> None:
    """Charts of any cells, and nearly right ones: a verdict, or none; never one from a cell that is no number."""
    folder = tmp_path_factory.mktemp("fuzz")
    if right:
        grid = [["Radius (m)", "20", "30"], ["3", "20000", "18000"], ["6", "12000", "11000"], ["9", "8000", ""]]
        for row, column, cell in wrong:
            grid[row][column:column + 1] = [cell]
    with (folder / "chart.csv").open("w", encoding="utf-8", newline="", errors="replace") as handle:
        csv.writer(handle, lineterminator="\n").writerows(grid)
    (folder / "list.csv").write_text(PLACED)
    pick = {"name": "P", "assemblies": ["A1"], "radius_m": radius, **({} if boom is None else {"boom_m": boom})}
    result = weigh_everything(folder / "list.csv", job_from({"crane": {"name": "C", "chart": "chart.csv", **crane}, "lift": {"picks": [pick]}}, folder / "job.toml"))
    for part in (p.as_record() for p in result.picks) if result else []:
        assert part["verdict"] in ("within", "over", "unknown")
        if part["crane"] and part["crane"]["verdict"] == "within":
            assert 0 < part["crane"]["capacity_kg"] < math.inf
            assert part["hook_load_kg"] <= part["crane"]["capacity_kg"]


COORDINATE = st.one_of(st.sampled_from((0.0, 750.0, 1500.0, 3000.0, 6000.0)), st.floats(-1e7, 1e7))


@examples(60)
@given(
    points=st.lists(st.tuples(COORDINATE, COORDINATE, COORDINATE), max_size=6), keys=st.fixed_dictionaries({}, optional={
        "hook": st.tuples(COORDINATE, COORDINATE), "hook_height_mm": st.floats(1e-3, 1e6), "hitch": st.sampled_from(("direct", "choke", "basket")),
        "slings_mm": st.floats(1e-3, 1e6), "bend_ratio": st.floats(0.01, 100), "sling": st.sampled_from(("chain", "wire rope", "round sling", "webbing")),
        "weighed_kg": st.floats(1e-3, 1e7), "skew_factor": st.floats(0.01, 10), "spreader": st.just({"kind": "spreader", "length_mm": 3000.0, "mass_kg": 50.0}),
        "own_weight": st.just({"axis": "weak"}), "upend": st.just({"head": "p0", "tail": "p1"})}),
    deck=st.floats(1, 20_000), payload=st.floats(0, 1e5), count=st.one_of(st.none(), st.integers(0, 1000)),
)
def test_lifts_and_loads(
    tmp_path_factory: pytest.TempPathFactory, points: list[tuple[float, float, float]], keys: dict[str, Any], deck: float, payload: float, count: int | None,
) -> None:
    """Points, slings and vehicles of any figures: shares that are numbers, every piece on one vehicle or named."""
    folder = tmp_path_factory.mktemp("fuzz")
    (folder / "list.csv").write_text(PLACED)
    pick = {"name": "P", "assemblies": ["A1"], "points": [{"name": f"p{i}", "position": list(p)} for i, p in enumerate(points)], **keys}
    vehicle = {"name": "v", "payload_kg": payload, "deck_length_mm": deck, "deck_width_mm": 2400.0, **({} if count is None else {"count": count})}
    job = None
    with contextlib.suppress(TakeoffError):
        job = job_from({"lift": {"picks": [pick]}, "vehicles": [vehicle], "transport": {"time_limit_s": 2.0}})
    result = weigh_everything(folder / "list.csv", job) if job else None
    if result is not None and result.loads is not None:
        record = json.loads(records.to_json(result))
        carried = [piece["name"] for load in record["vehicles"] for piece in load["pieces"]] + [left["name"] for left in record["not_loaded"]]
        assert len(carried) == len(set(carried))


@examples(80)
@given(edits=st.lists(st.tuples(st.lists(st.integers(0, 40), min_size=1, max_size=6), st.recursive(
    st.one_of(st.none(), st.booleans(), st.integers(), st.floats(), TEXT), lambda inner: st.lists(inner, max_size=2), max_leaves=3)), min_size=1, max_size=3),
    cut=st.one_of(st.none(), st.none(), st.floats(0, 1)))
def test_earlier_records(tmp_path_factory: pytest.TempPathFactory, edits: list[tuple[list[int], Any]], cut: float | None) -> None:
    """An earlier run's record with values of any kind in it: compared, or refused."""
    folder = tmp_path_factory.mktemp("fuzz")
    path = folder / "list.csv"
    path.write_text(SMALL_LIST)
    result = pipeline.schedule([path], Job())
    record = json.loads(records.to_json(result))
    for way, value in edits:
        place: Any = record
        for number, step in enumerate(way):
            keys = list(place) if isinstance(place, dict) else list(range(len(place))) if isinstance(place, list) else []
            if not keys:
                break
            key = keys[step % len(keys)]
            if number == len(way) - 1 or not isinstance(place[key], dict | list):
                place[key] = value
                break
            place = place[key]
    old = folder / "old.json"
    text = json.dumps(record)
    old.write_text(text if cut is None else text[: int(cut * len(text))])
    with contextlib.suppress(TakeoffError):
        changes = compare.compare(result, compare.read_earlier(old))
        page = plainpage.Page(60)
        changes.say(page, "si")
        assert page.text()
        json.loads(records.to_json(result, changes))


# --- workbooks of every kind, damaged inside ---------------------------------------------------------------------------


def _full_workbook(path: Path) -> dict[str, bytes]:
    """The parts of a workbook as a spreadsheet program writes it: shared texts, styles, merged cells, a remark, formulas, a hidden row."""
    import xlsxwriter

    with xlsxwriter.Workbook(str(path)) as book:
        sheet = book.add_worksheet("List")
        struck, dated = book.add_format({"font_strikeout": True, "num_format": '0.00 "kg"'}), book.add_format({"num_format": "yyyy-mm-dd"})
        sheet.write_row(0, 0, h.HEADINGS)
        for number in range(1, 6):
            sheet.write_row(number, 0, [f"M{number}", 2, "UB 203x133x25", "S355", 6000])
        sheet.write_formula(3, 4, "=E3*2", None, 12000)
        sheet.write_number(4, 1, 3, struck)
        sheet.write_number(5, 5, 45000, dated)
        sheet.write_comment(2, 0, "revised")
        sheet.merge_range(7, 0, 8, 1, "end of list")
        sheet.set_row(4, None, None, {"hidden": True})
    with zipfile.ZipFile(path) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


@examples(60)
@given(part=st.integers(0, 30), edits=st.lists(st.tuples(st.floats(0, 1), st.one_of(
    st.binary(min_size=1, max_size=3), st.sampled_from((b"", b"<", b">", b"/>", b'"', b"99999999", b"-1", b"A1", b"&#0;", b"&amp;", b"1e999", b"<c/>", b"</row>", b"t=\"s\"", b"xmlns=''")))),
    min_size=1, max_size=3), drop=st.integers(0, 12))
def test_workbooks_with_a_changed_part(tmp_path_factory: pytest.TempPathFactory, part: int, edits: list[tuple[float, bytes]], drop: int) -> None:
    """Any part of a whole workbook with its XML changed, the packing sound; or a part left out."""
    path = tmp_path_factory.mktemp("fuzz") / "list.xlsx"
    parts = _full_workbook(path)
    name = sorted(parts)[part % len(parts)]
    for where, text in edits:
        at = int(where * len(parts[name]))
        parts[name] = parts[name][:at] + text + parts[name][at + len(text):]
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        for other, data in parts.items():
            if drop or other != name:
                archive.writestr(other, data)
    weigh_everything(path)


@examples(40)
@given(kind=st.sampled_from(("xls", "xlsb", "ods")), flips=st.lists(st.tuples(st.floats(0, 1), st.integers(0, 255)), max_size=4), cut=st.one_of(st.none(), st.none(), st.floats(0, 1)))
def test_damaged_workbooks_of_other_kinds(tmp_path_factory: pytest.TempPathFactory, kind: str, flips: list[tuple[float, int]], cut: float | None) -> None:
    """Bytes of an .xls, of the binary sheet of an .xlsb, of the XML of an .ods changed or cut off; unchanged, they are read right."""
    path = tmp_path_factory.mktemp("fuzz") / f"list.{kind}"
    data = bytearray(h.OLD_WORKBOOK.read_bytes() if kind == "xls" else h.binary_sheet() if kind == "xlsb" else h.open_table().encode())
    for where, byte in flips:
        data[min(int(where * len(data)), len(data) - 1)] = byte
    data = data if cut is None else data[: int(cut * len(data))]
    if kind == "xls":
        path.write_bytes(data)
    elif kind == "xlsb":
        h.binary_workbook(path, bytes(data))
    else:
        h.open_document(path, data.decode("utf-8", "replace"))
    result = weigh_everything(path)
    if not flips and cut is None:
        assert result is not None
        assert result.account.weighed == 1
        assert result.totals.mass_kg.nominal == pytest.approx(2 * 6 * 25.1)


# --- what once failed ------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("case", sorted(p.name for p in CASES.iterdir() if p.suffix != ".toml"))
def test_kept_cases(tmp_path: Path, case: str) -> None:
    """Files that once gave a traceback, with every output; a TOML of the same name is their job file."""
    path = tmp_path / case
    path.write_bytes((CASES / case).read_bytes())
    job = (CASES / case).with_suffix(".toml")
    weigh_everything(path, read_job(job) if job.exists() else None, book=True)
