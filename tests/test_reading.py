"""Reading a list: where it stands, what each row is, units, and an account that closes."""

from __future__ import annotations

from pathlib import Path

import openpyxl
import pytest
from conftest import WriteList
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff import pipeline
from takeoff.errors import AccountError, InputError, JobError
from takeoff.job import Job, job_from
from takeoff.lists.account import Account
from takeoff.lists.headings import read_heading, spellings
from takeoff.lists.sheets import Sheet
from takeoff.lists.tables import read_sheet

BEAM = ["A1", "F1", 2, "UB 203x133x25", "S355", 6000]
BEAM_KG = 25.1 * 6.0


def states(result: pipeline.Result) -> list[str]:
    return result.members["status"].tolist()


@pytest.mark.parametrize(
    ("text", "field", "unit"),
    [
        ("Length (mm)", "length", "mm"),
        ("LENGTH [m]", "length", "m"),
        ("length_mm", "length", "mm"),
        ("Length\n(mm)", "length", "mm"),
        ("Length, m", "length", "m"),
        ("Length mm", "length", "mm"),
        ("Qty.", "quantity", None),
        ("Unit mass (kg)", "unit_mass", "kg"),
        ("kg/m", "mass_per_length", "kg/m"),
        ("Total Mass (t)", "total_mass", "t"),
        ("X1 (mm)", "x1", "mm"),
        ("Mass (kg/m)", "mass_per_length", "kg/m"),
        ("Unit weight (kg/m)", "mass_per_length", "kg/m"),
        ("Volume (m3)", "volume", "m3"),
        ("Mark", "mark", None),
        ("Price", "not_used", None),
        ("Thickness (mm)", "thickness", "mm"),
        ("Length (kg)", None, None),
        ("Steel Grade", "material", None),
        ("Nonsense", None, None),
    ],
)
def test_headings(text: str, field: str | None, unit: str | None) -> None:
    """A heading gives its field and unit; one that names neither gives nothing."""
    found = read_heading(text)
    assert (found.field if found else None, found.unit if found else None) == (field, unit)


def test_the_headings_of_the_house_all_read() -> None:
    """The spellings that must always read do."""
    names = (
        "Mark, Assembly, Pick, Quantity, Section, Material, Length (mm), Width (mm), Thickness (mm), X (mm), Y (mm), Z (mm), X1 (mm), "
        "Y1 (mm), "
        "Z1 (mm), X2 (mm), Y2 (mm), Z2 (mm), Finish, Contents, Unit mass (kg), Total mass (kg), Phase, Run"
    ).split(", ")
    for name in names:
        found = read_heading(name)
        assert found is not None, name
        assert found.field == name.partition(" (")[0].casefold().replace(" ", "_")
    assert len(spellings()) > 200


def test_title_rows_totals_blanks_and_notes_are_told_apart(write_list: WriteList) -> None:
    """Every row of a list with a title block, subtotals, a repeated heading and notes has its kind."""
    rows = [
        BEAM,
        ["A2", "F1", 1, "SHS 100x100x5", "S355", 3000],
        ["Subtotal frame", None, None, None, None, None],
        [None] * 6,
        ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)"],
        ["A3", "F2", 1, "PL 10x200", "S275", 400],
        ["All welds by others."],
        ["TOTAL", None, 4, None, None, None],
    ]
    path = write_list(rows, above=[["Gantry, invented"], [], ["Units: mm unless stated"]])
    result = pipeline.schedule([path])
    assert result.account == Account(rows=12, weighed=3, heading=2, total=2, blank=2, other=3)
    assert result.members["row"].tolist() == [5, 6, 10]
    assert result.complete


def test_a_bare_length_takes_the_title_blocks_unit(write_list: WriteList) -> None:
    """``Units: m`` above the table makes bare lengths metres, without an assumption."""
    headings = ["Mark", "Qty", "Section", "Material", "Length"]
    path = write_list([["A", 1, "UB 203x133x25", "S355", 6]], headings=headings, above=[["Units: m"]])
    result = pipeline.schedule([path])
    assert states(result) == ["weighed"]
    assert result.totals.mass_kg.nominal == pytest.approx(BEAM_KG)


def test_a_bare_length_without_any_unit_is_assumed_mm(write_list: WriteList) -> None:
    """Nothing names the unit: mm, assumed and said; stated by the job file: weighed."""
    headings = ["Mark", "Qty", "Section", "Material", "Length"]
    path = write_list([["A", 1, "UB 203x133x25", "S355", 6000]], headings=headings)
    assert states(pipeline.schedule([path])) == ["assumed"]
    told = job_from({"reading": {"length_unit": "mm"}})
    assert states(pipeline.schedule([path], told)) == ["weighed"]


def test_lengths_too_small_for_mm_are_refused(write_list: WriteList) -> None:
    """Bare 6.0 and 4.5 are metres or feet, not millimetres: refused, never corrected silently."""
    headings = ["Mark", "Qty", "Section", "Material", "Length"]
    path = write_list([["A", 1, "UB 203x133x25", "S355", 6.0], ["B", 1, "UB 203x133x25", "S355", 4.5]], headings=headings)
    result = pipeline.schedule([path])
    assert states(result) == ["not weighed"] * 2
    assert "length" in result.members["reason"][0]


def test_a_cells_own_unit_wins(write_list: WriteList) -> None:
    """``6 m`` in a column of millimetres is six metres."""
    result = pipeline.schedule([write_list([["A", "F", 1, "UB 203x133x25", "S355", "6 m"], BEAM])])
    assert result.members["length_mm"].tolist() == [6000, 6000]


@pytest.mark.parametrize(
    ("cell", "reason"),
    [
        (None, "blank"),
        (0, "whole count"),
        (-2, "whole count"),
        (2.5, "whole count"),
        (True, "whole count"),
        ("2-3", "whole count"),
        ("1 set", "whole count"),
        (10**9, "whole count"),
        ("²", "whole count"),
        ("0x10", "whole count"),
        ("two", "whole count"),
    ],
)
def test_quantities_that_are_no_count(write_list: WriteList, cell: object, reason: str) -> None:
    """A quantity that is not a whole count of 1 or more is not weighed, with its cell."""
    result = pipeline.schedule([write_list([["A", "F", cell, "UB 203x133x25", "S355", 6000], BEAM])])
    assert states(result) == ["not weighed", "weighed"]
    assert reason in result.members["reason"][0]
    refused = [f for f in result.row_findings[0] if f.level == "refused"]
    assert [f.cell for f in refused] == ["C2"]


@pytest.mark.parametrize("cell", [4, 4.0, "4", "4 off", "4x", "4 no.", "4 Stk", "4 szt"])
def test_quantities_people_type(write_list: WriteList, cell: object) -> None:
    """Four pieces, however typed."""
    result = pipeline.schedule([write_list([["A", "F", cell, "UB 203x133x25", "S355", 6000]])])
    assert result.totals.quantity == 4
    assert result.totals.mass_kg.nominal == pytest.approx(4 * BEAM_KG)


def test_no_quantity_column_is_one_each_assumed(write_list: WriteList) -> None:
    """Without a column of quantities each row is one piece, and says so."""
    path = write_list([["A", "UB 203x133x25", "S355", 6000]], headings=["Mark", "Section", "Material", "Length (mm)"])
    assert states(pipeline.schedule([path])) == ["assumed"]


def test_error_cells_and_unsaved_formulas_are_named(tmp_path: Path) -> None:
    """What a fast reader gives back as blank is refused with its cell."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["Mark", "Quantity", "Section", "Material", "Length (mm)"])
    sheet.append(["A", 1, "UB 203x133x25", "S355", "=3000*2"])
    sheet.append(["B", 1, "UB 203x133x25", "S355", "#DIV/0!"])
    sheet["E3"].data_type = "e"
    sheet.append(["C", 1, "UB 203x133x25", "S355", 6000])
    book.save(tmp_path / "list.xlsx")
    result = pipeline.schedule([tmp_path / "list.xlsx"])
    assert states(result) == ["not weighed", "not weighed", "weighed"]
    assert [(f.kind, f.cell) for f in result.row_findings[0] if f.level == "refused"] == [("formula-without-result", "E2")]
    assert [(f.kind, f.cell) for f in result.row_findings[1] if f.level == "refused"] == [("cell-error", "E3")]


def test_a_merged_material_serves_its_rows(tmp_path: Path) -> None:
    """A material merged over three rows is every row's material; the first reader to drop it would make them carbon steel."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["Mark", "Quantity", "Section", "Material", "Length (mm)"])
    for mark in "ABC":
        sheet.append([mark, 1, "CHS 48.3x3.2", None, 1000])
    sheet["D2"] = "1.4404"
    sheet.merge_cells("D2:D4")
    book.save(tmp_path / "list.xlsx")
    result = pipeline.schedule([tmp_path / "list.xlsx"])
    assert len(set(result.members["material"])) == 1
    assert result.members["total_nominal_kg"].nunique() == 1
    assert states(result) == ["weighed"] * 3


def test_a_csv_and_a_workbook_of_one_list_agree(write_list: WriteList) -> None:
    """The kind of file changes no total."""
    rows = [BEAM, ["A2", "F1", 3, "SHS 100x100x5", "S355", 3210.5], ["A3", "F2", 1, "PL 10x200", "S275", 400]]
    book, text = write_list(rows, "a.xlsx"), write_list(rows, "b.csv")
    one, two = pipeline.schedule([book]), pipeline.schedule([text])
    assert one.totals.mass_kg == two.totals.mass_kg
    assert one.account == two.account


@pytest.mark.parametrize(("separator", "encoding", "decimal"), [(";", "cp1252", ","), ("\t", "utf-16", "."), (",", "utf-8-sig", ".")])
def test_separators_encodings_and_decimal_commas(tmp_path: Path, separator: str, encoding: str, decimal: str) -> None:
    """Semicolons with decimal commas, tabs, marked UTF-16: one reading."""
    lines = [["Mark", "Qty", "Section", "Material", "Length (m)", "Finish"], ["Träger", "2", "UB 203x133x25", "S355", f"6{decimal}05", ""]]
    path = tmp_path / "list.csv"
    path.write_bytes("\r\n".join(separator.join(line) for line in lines).encode(encoding))
    result = pipeline.schedule([path])
    assert result.members["length_mm"].tolist() == [6050]
    assert result.members["mark"].tolist() == ["Träger"]


def test_an_open_thousand_is_settled_by_the_file_or_by_size(tmp_path: Path) -> None:
    """1,500 beside 2,5 is a decimal comma; alone it is what a piece can be; where both can be, it is refused."""

    def read(unit: str, *lengths: str) -> list[tuple[str, float]]:
        path = tmp_path / "list.csv"
        path.write_text(f"Mark;Qty;Section;Material;Length ({unit})\n" + "".join(f"A;1;UB 203x133x25;S355;{x}\n" for x in lengths))
        frame = pipeline.schedule([path]).members
        return list(zip(frame["status"], frame["length_mm"], strict=True))

    assert read("m", "1,500", "2,5") == [("weighed", 1500), ("weighed", 2500)]
    assert read("m", "1,500") == [("assumed", 1500)]
    assert read("mm", "1,500") == [("assumed", 1500)]
    assert [status for status, _ in read("cm", "2,500")] == ["not weighed"]
    told = job_from({"reading": {"thousands": "comma"}})
    assert pipeline.schedule([tmp_path / "list.csv"], told).members["length_mm"].tolist() == [25_000]


def test_a_row_with_a_stray_separator_is_refused(tmp_path: Path) -> None:
    """One field too many: no column is shifted, the row is refused."""
    path = tmp_path / "list.csv"
    path.write_text("Mark,Qty,Section,Material,Length (mm)\nA,1,UB 203x133x25, painted,S355,6000\nB,1,UB 203x133x25,S355,6000\n")
    result = pipeline.schedule([path])
    assert states(result) == ["not weighed", "weighed"]
    assert "broken-row" in [f.kind for f in result.row_findings[0] if f.level == "refused"]


def test_implausible_lengths_are_refused(write_list: WriteList) -> None:
    """6000 m is a slip, not a beam."""
    result = pipeline.schedule([write_list([["A", "F", 1, "UB 203x133x25", "S355", "6000 m"]])])
    assert states(result) == ["not weighed"]
    assert "not plausible" in result.members["reason"][0]


def test_the_account_fails_loudly() -> None:
    """An account whose parts do not add up stops the run with status 4."""
    with pytest.raises(AccountError, match="does not close: 5 rows read, 4 accounted for") as caught:
        Account(rows=5, weighed=3, heading=1).check("list.xlsx")
    assert caught.value.status == 4


def test_a_lost_row_is_noticed(write_list: WriteList, monkeypatch: pytest.MonkeyPatch) -> None:
    """If a member went missing between reading and weighing, the run would fail: the check can fail."""
    from takeoff.lists import members

    original = members.build

    def losing(*args: object) -> members.Members:
        built = original(*args)  # type: ignore[arg-type]
        built.frame = built.frame.iloc[:-1].reset_index(drop=True)
        return built

    monkeypatch.setattr(members, "build", losing)
    with pytest.raises(AccountError, match="does not close"):
        pipeline.schedule([write_list([BEAM, BEAM])])


cells = st.one_of(
    st.none(),
    st.text(max_size=12),
    st.integers(-5, 9999),
    st.floats(allow_nan=False, allow_infinity=False),
    st.booleans(),
    st.sampled_from(["Mark", "Quantity", "Section", "Length (mm)", "Total", "UB 203x133x25", "S355", "4", "mm"]),
)


@settings(max_examples=150, deadline=None)
@given(st.lists(st.lists(cells, max_size=7), max_size=25))
def test_any_sheet_has_one_kind_for_every_row(rows: list[list[object]]) -> None:
    """Whatever stands on a sheet, every row from the first with content to the last has exactly one kind."""
    reading = read_sheet(Sheet("x.xlsx", "S", rows), Job())  # type: ignore[arg-type]
    if reading.kinds:
        assert sorted(reading.kinds) == list(range(min(reading.kinds), max(reading.kinds) + 1))
    in_tables = sorted(n for t in reading.tables for n in t.member_rows)
    assert in_tables == sorted(n for n, kind in reading.kinds.items() if kind == "member")


def test_a_sheet_that_reaches_too_far_is_refused(tmp_path: Path) -> None:
    """A lone cell in the far corner would make a reader run wild: it is refused before one is started."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["Mark", "Quantity", "Section"])
    sheet["XFD1048576"] = "x"
    book.save(tmp_path / "far.xlsx")
    with pytest.raises(InputError, match="more than is read"):
        pipeline.schedule([tmp_path / "far.xlsx"])


def test_what_the_job_file_names_and_no_list_has(write_list: WriteList) -> None:
    """A column or a row of the job file that is met nowhere is said by its name; one that is met is not."""
    path = write_list([BEAM, BEAM])
    job = job_from({"reading": {"columns": {"Profilo": "section", "Mark": "mark", "ZZ": "width"}, "skip": ["3", "77", "Sheet9!2"],
                                "tables": ["Sheet9!A1:F9"]}})
    said = [f for f in pipeline.schedule([path], job).all_findings() if f.kind == "job-not-met"]
    assert [f.read for f in said] == ["Profilo", "ZZ", "Sheet9!A1:F9", "77", "Sheet9!2"]
    assert {f.level for f in said} == {"note"}
    assert "'Profilo'" in said[0].message
    assert "row 77" in said[3].message


@pytest.mark.parametrize(("entry", "right"), [("A9:F1", "A1:F9"), ("F1:A9", "A1:F9"), ("Sheet!F9:A1", "Sheet!A1:F9")])
def test_a_range_of_the_job_file_that_ends_before_it_begins(write_list: WriteList, entry: str, right: str) -> None:
    """A reversed range is refused with what is wrong, and with the range the right way round."""
    with pytest.raises(JobError, match="ends before it begins") as caught:
        pipeline.schedule([write_list([BEAM])], job_from({"reading": {"tables": [entry]}}))
    assert right in str(caught.value)
