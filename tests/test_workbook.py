"""The workbook: text stays text, formulas carry their results and recalculate to them, nothing missing is hidden."""

from __future__ import annotations

import math
import re
import subprocess
import tempfile
from datetime import datetime
from pathlib import Path
from typing import Any

import openpyxl
import pytest
from conftest import need_program
from made_result import SOME_ROWS, make, row
from openpyxl.worksheet.worksheet import Worksheet

from takeoff.findings import Finding
from takeoff.pipeline import InputFile, Result
from takeoff.reports import workbook
from takeoff.reports.rounding import KG_PER_LB
from takeoff.reports.workbook import write_workbook
from takeoff.reports.workbook.sheet import MOST_CHARACTERS, SHEETS, cell_text

JOB = {"job": {"title": "Weir & sluice", "reference": "R-1", "revision": "B", "date": "2026-02-03", "prepared_by": "The estimator"}}

#: names a spreadsheet program would take for a formula, a number, a date, a comparison, a pattern or another name
TRAPS = [
    "=1+1", "@x", "-2+3", "+1", "101", "0101", "1E2", "<5", ">0", "B*", "B?1", "~", "Deck", "DECK", "Mar 12", "1/2", "true", "12:30",
    "UB 1", 'say "so"', "a" * 260, "{=1}", "5%", "é", "e",
]


def written(result: Result, path: Path) -> Path:
    write_workbook(result, path)
    return path


def cells(path: Path, *, values: bool) -> dict[tuple[str, str], Any]:
    """Every cell that holds something: formulas as text, or their stored results."""
    book = openpyxl.load_workbook(path, data_only=values)
    found = {(sheet.title, c.coordinate): c.value for sheet in book for r in sheet.iter_rows() for c in r if c.value is not None}
    book.close()
    return found


def sheet_of(path: Path, name: str, *, values: bool = True) -> Worksheet:
    return openpyxl.load_workbook(path, data_only=values)[name]


def column(sheet: Worksheet, heading: str) -> int:
    """The number of a schedule column."""
    return next(c.column for c in sheet[6] if c.value == heading)


def formulas(path: Path) -> dict[tuple[str, str], str]:
    book = openpyxl.load_workbook(path)
    return {(s.title, c.coordinate): c.value for s in book for r in s.iter_rows() for c in r if c.data_type == "f"}


def recalculated(path: Path, folder: Path) -> Path:
    """The workbook as LibreOffice has it after working out every formula anew."""
    soffice = need_program("soffice")
    profile = folder / "profile"
    (profile / "user").mkdir(parents=True)
    # Stored results are trusted on load unless this setting says always.
    (profile / "user" / "registrymodifications.xcu").write_text(
        '<?xml version="1.0" encoding="UTF-8"?>\n<oor:items xmlns:oor="http://openoffice.org/2001/registry">'
        '<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse"><value>0</value></prop>'
        "</item></oor:items>\n", encoding="utf-8",
    )
    out = folder / "recalculated"
    subprocess.run(
        [soffice, f"-env:UserInstallation={profile.as_uri()}", "--headless", "--convert-to", "xlsx", "--outdir", str(out), str(path)],
        check=True, capture_output=True, timeout=300,
    )
    return out / path.name


def assert_recalculates(path: Path, folder: Path) -> int:
    """Every formula cell gives its stored result again; returns how many there are."""
    stored, again = cells(path, values=True), cells(recalculated(path, folder), values=True)
    wanted = formulas(path)
    for place, formula in wanted.items():
        before, after = stored[place], again.get(place)
        assert isinstance(after, int | float), (place, formula, after)
        assert math.isclose(before, after, rel_tol=1e-9, abs_tol=1e-9), (place, formula, before, after)
    return len(wanted)


def trap_result() -> Result:
    """Each trap as mark, assembly, section and material, with masses that tell the sums apart."""
    rows = [
        row(name, assembly=name, section=name, section_text=name, material=name, material_text=name, quantity=1 + i % 3,
            each=(1.0 + i, 1.5 + i * 1.1, 2.0 + i * 1.3), row=i + 5)
        for i, name in enumerate(TRAPS)
    ]
    return make([*rows, *SOME_ROWS], {})


def test_every_formula_carries_its_result(tmp_path: Path) -> None:
    """A viewer that never recalculates still shows each figure."""
    path = written(make(job=JOB), tmp_path / "w.xlsx")
    stored = cells(path, values=True)
    wanted = formulas(path)
    assert len(wanted) > 50
    assert [place for place in wanted if not isinstance(stored.get(place), int | float)] == []
    assert {sheet for sheet, _ in wanted} == {"Summary", "Charts", "Weight schedule", "Picks", "Basis and sources"}


def test_recalculation_is_really_done(tmp_path: Path) -> None:
    """The comparison below can fail: a formula stored with a wrong result comes back with the right one."""
    import xlsxwriter

    path = tmp_path / "lie.xlsx"
    with xlsxwriter.Workbook(str(path)) as book:
        book.add_worksheet("S").write_formula(0, 0, "=1+1", None, 3)
    assert cells(path, values=True) == {("S", "A1"): 3}
    assert cells(recalculated(path, tmp_path), values=True) == {("S", "A1"): 2}


@pytest.mark.parametrize("units", ["si", "us"])
def test_recalculates_to_the_same_figures(tmp_path: Path, units: str) -> None:
    """Another program, working out every formula anew, finds the figures we stored."""
    job = {"job": {**JOB["job"], "units": units}, "lift": {"rigging_kg": 120.5, "hook_block_kg": 300.0}}
    path = written(make(job=job), tmp_path / "w.xlsx")
    assert assert_recalculates(path, tmp_path) > 50


def test_names_that_spreadsheets_misread_sum_to_the_same_figures(tmp_path: Path) -> None:
    """Group sums stay right where a name looks like a formula, number, date, comparison or pattern, or differs by case."""
    result = trap_result()
    path = written(result, tmp_path / "w.xlsx")
    assert assert_recalculates(path, tmp_path) > 300
    sheet = sheet_of(path, "Summary")
    heavy = {r[0].value: r[4].value for r in sheet.iter_rows() if r[0].value in TRAPS}
    for group in result.totals.groups["section"]:
        if group.name in TRAPS and group.name != "UB 1":
            assert heavy[group.name] == pytest.approx(group.mass_kg.heavy, rel=1e-12)


@pytest.mark.parametrize("many", [0, 10**6])
def test_text_from_the_list_stays_text(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, many: int) -> None:
    """No text of a list becomes a formula, a link or a number, in either way of writing."""
    monkeypatch.setattr(workbook, "MANY_ROWS", many)
    names = [*TRAPS, "http://example.org", "file:///x", "<r><t>x</t></r>", "_x0041_", "&<>\"'", "007"]
    path = written(make([row(n, section=n, section_text=n, material_text=n, remarks=n) for n in names], {}), tmp_path / "w.xlsx")
    sheet = sheet_of(path, "Weight schedule", values=False)
    for heading in ("Mark", "Section", "Section in the list", "Material in the list", "Remarks"):
        at = column(sheet, heading)
        shown = [sheet.cell(7 + i, at) for i in range(len(names))]
        assert [c.data_type for c in shown] == ["s"] * len(names)
        # A trailing blank keeps text in <r> marks from being written as markup; the test's reader leaves the format's own
        # escape (_x005F_ for an underscore that could start one) in place where texts are written row by row.
        assert [str(c.value).rstrip().replace("_x005F_", "_") for c in shown] == names
        assert all(c.hyperlink is None for c in shown)


def test_signs_that_cells_cannot_hold_are_left_out(tmp_path: Path) -> None:
    """Control and direction signs go, what is too long is cut and says so."""
    assert cell_text("a\x00b\x1b[31mc\u202ed\ufffee\ud800f") == "ab[31mcdef"
    long = cell_text("x" * 40_000)
    assert len(long) == MOST_CHARACTERS
    assert long.endswith("holds no more)")
    path = written(make([row("m\x0b\x1bk", remarks="x" * 40_000)], {}), tmp_path / "w.xlsx")
    sheet = sheet_of(path, "Weight schedule")
    assert sheet.cell(7, column(sheet, "Mark")).value == "mk"


def test_total_row_is_the_sum_of_unrounded_rows(tmp_path: Path) -> None:
    """Quantity times each is each row's total, their sum is the total, and both equal the result's own."""
    result = make(job=JOB)
    path = written(result, tmp_path / "w.xlsx")
    sheet, live = sheet_of(path, "Weight schedule"), sheet_of(path, "Weight schedule", values=False)
    pieces = column(sheet, "Pieces")
    for word in ("light", "nominal", "heavy"):
        each, total = column(sheet, f"One piece, {word} (kg)"), column(sheet, f"All pieces, {word} (kg)")
        sums = 0.0
        for number in range(7, 7 + len(result.members)):
            if sheet.cell(number, total).value is not None:
                assert re.fullmatch(rf"=[A-Z]+{number}\*[A-Z]+{number}", str(live.cell(number, total).value))
                product = sheet.cell(number, pieces).value * sheet.cell(number, each).value
                assert sheet.cell(number, total).value == pytest.approx(product, rel=1e-12)
                sums += sheet.cell(number, total).value
        assert str(live.cell(4, total).value).startswith("=SUM(")
        assert sheet.cell(4, total).value == pytest.approx(sums, rel=1e-12)
        assert sums == pytest.approx(getattr(result.totals.mass_kg, word), rel=1e-12)


def test_rows_not_weighed_are_in_no_total_and_on_their_own_sheet(tmp_path: Path) -> None:
    """A row that could not be weighed shows no mass, says so in words, and stands with cell, reason and mend."""
    path = written(make(job=JOB), tmp_path / "w.xlsx")
    schedule = sheet_of(path, "Weight schedule")
    at = next(n for n in range(7, 20) if schedule.cell(n, column(schedule, "Mark")).value == "B3")
    assert schedule.cell(at, column(schedule, "State")).value == "not weighed"
    assert schedule.cell(at, column(schedule, "All pieces, heavy (kg)")).value is None
    missing = [[c.value for c in r] for r in sheet_of(path, "Not weighed").iter_rows(min_row=5, max_row=5)]
    assert missing == [[
        "Steel row 8", "D8", "B3", "A2", 3, "UB 99x", "the section text names nothing in the tables", "a size of the table",
    ]]
    texts = [str(v) for (name, _), v in cells(path, values=True).items() if name == "Summary"]
    assert any("INCOMPLETE" in t for t in texts)
    assert any("for ordering and freight, never for lifting" in t for t in texts)


def test_row_refused_without_a_finding_still_gives_its_reason(tmp_path: Path) -> None:
    """Nothing leaves the totals without a reason on the sheet, and a sheet that was not read stands there too."""
    unread = Finding("refused", "formula-without-result", "the sheet cannot be read", sheet="Stone", right="save it again")
    result = make([row("Q", status="not weighed", reason="the width is missing")], {}, sheet_findings=[unread])
    sheet = sheet_of(written(result, tmp_path / "w.xlsx"), "Not weighed")
    assert [r[6].value for r in sheet.iter_rows(min_row=5, max_row=6)] == ["the width is missing", "the sheet cannot be read"]


def test_assumptions_name_what_was_read_and_where(tmp_path: Path) -> None:
    """Each assumption stands with what was read, what would settle it and its cells; many cells are counted."""
    many = Finding("note", "unit-from-job", "the unit is the job file's", file="list.xlsx", cell="F1", count=500,
                   cells=tuple(f"F{n}" for n in range(1, 501)))
    sheet = sheet_of(written(make(sheet_findings=[many]), tmp_path / "w.xlsx"), "Assumptions")
    first, second = ([c.value for c in r] for r in sheet.iter_rows(min_row=5, max_row=6))
    assert first == ["assumed", "the section was taken for a similar name", "UB1", "UB 1", 1, "Steel", "D6"]
    assert second[0] == "note"
    assert second[4] == 500
    assert second[6].startswith("F1, F2,")
    assert second[6].endswith("F200 and 300 more")


def test_links_lead_from_a_row_to_its_basis(tmp_path: Path) -> None:
    """The basis number of a row leads to the line with that number, rule, source and evidence."""
    path = written(make(job=JOB), tmp_path / "w.xlsx")
    sheet, basis = sheet_of(path, "Weight schedule"), sheet_of(path, "Basis and sources")
    at = column(sheet, "Basis no.")
    linked = [sheet.cell(n, at) for n in range(7, 12) if sheet.cell(n, at).value]
    assert [c.value for c in linked] == [1, 1, 2, 2]
    for cell in linked:
        there = re.fullmatch(r"'Basis and sources'!A(\d+)", cell.hyperlink.location)
        assert there
        line = [c.value for c in basis[int(there.group(1))]]
        assert line[0] == cell.value
        assert line[1:5] == {1: ["57.1 kg/m × length", "An invented standard", "table 1", "read2"],
                             2: ["stated in the list (stated in the list)", "the list", "unit mass", "read"]}[cell.value]
    assert [r[9].value for r in basis.iter_rows() if r[1].value == "57.1 kg/m × length"] == [2]


def test_every_link_leads_to_a_sheet_that_is_there_or_to_the_list(tmp_path: Path) -> None:
    """No link of the workbook leads nowhere; out of it only the place of a row leads, to that row of the list."""
    book = openpyxl.load_workbook(written(make(job=JOB), tmp_path / "w.xlsx"))
    links = [c.hyperlink for s in book for r in s.iter_rows() for c in r if c.hyperlink]
    assert len(links) > 8
    to_list = 0
    for link in links:
        if link.target is None:
            assert link.location.rpartition("!")[0].strip("'") in book.sheetnames
        else:
            to_list += 1
            assert link.target.replace("\\", "/").endswith("/list.xlsx")
            assert re.fullmatch(r"'Steel'!A[5-9]", link.location)
    assert to_list == len(SOME_ROWS)


def test_account_closes_in_the_workbook(tmp_path: Path) -> None:
    """Rows read, the sum of their parts and what is left over stand side by side."""
    sheet = sheet_of(written(make(job=JOB), tmp_path / "w.xlsx"), "Basis and sources")
    line = next([c.value for c in r] for r in sheet.iter_rows() if r[1].value == "All")
    assert line[:4] == [7, "All", 7, 0]
    assert str(line[4]).startswith("3 weighed, 1 assumed, 1 not weighed, 1 heading, 1 total.")


def test_pick_lines_add_up_to_the_hook_load(tmp_path: Path) -> None:
    """The build-up's live lines sum to the pick's own hook load, and the printed one is not below it."""
    result = make(job={"lift": {"rigging_kg": 100.0, "rope_kg": 12.5}})
    sheet = sheet_of(written(result, tmp_path / "w.xlsx"), "Picks")
    column_c = {(r[0].value, n): r[2].value for n, r in enumerate(sheet.iter_rows(), 1) if r[2].value is not None}
    loads = [v for (item, _), v in column_c.items() if item == "hook load"]
    printed = [v for (item, _), v in column_c.items() if str(item).startswith("HOOK LOAD")]
    assert loads == pytest.approx([p.hook_load_kg for p in result.picks], rel=1e-12)
    assert all(shown >= load for shown, load in zip(printed, loads, strict=True))
    live = sheet_of(tmp_path / "w.xlsx", "Picks", values=False)
    dynamic = [r[2].value for r in live.iter_rows() if str(r[0].value).startswith("dynamic factor")]
    assert all(re.fullmatch(r"=C\d+\*\(B\d+-1\)", str(f)) for f in dynamic)
    assert len(dynamic) == len(result.picks)


def test_two_runs_are_equal_byte_by_byte(tmp_path: Path) -> None:
    """Nothing in the file depends on the clock."""
    one, two = written(make(job=JOB), tmp_path / "1.xlsx"), written(make(job=JOB), tmp_path / "2.xlsx")
    assert one.read_bytes() == two.read_bytes()
    assert openpyxl.load_workbook(one).properties.created == datetime(2026, 2, 3)  # noqa: DTZ001  (openpyxl gives it bare)


def test_long_lists_hold_the_same_cells(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Written row by row to disk, a list gives the same cells as written at once."""
    at_once = written(trap_result(), tmp_path / "1.xlsx")
    monkeypatch.setattr(workbook, "MANY_ROWS", 0)
    by_row = written(trap_result(), tmp_path / "2.xlsx")
    assert by_row.read_bytes() != at_once.read_bytes()
    for values in (True, False):
        assert cells(by_row, values=values) == cells(at_once, values=values)


def test_us_print_is_in_pounds_and_feet_inches(tmp_path: Path) -> None:
    """US units change headings and figures together, and no sheet says ton or kg in a heading."""
    result = make(job={"job": {"units": "us"}})
    path = written(result, tmp_path / "w.xlsx")
    sheet = sheet_of(path, "Weight schedule")
    assert sheet.cell(7, column(sheet, "Length (ft-in)")).value == "19'-8 1/4\""
    assert sheet.cell(4, column(sheet, "All pieces, heavy (lb)")).value == pytest.approx(result.totals.mass_kg.heavy / KG_PER_LB, rel=1e-12)
    headings = [str(v) for (name, _), v in cells(path, values=True).items() if name != "Basis and sources" and isinstance(v, str)]
    assert not [h for h in headings if re.search(r"\((kg|t|kN|mm)\)", h)]
    assert not [h for h in headings if re.search(r"\btons?\b", h)]


def test_sheets_are_set_up_for_screen_and_print(tmp_path: Path) -> None:
    """Landscape, headings repeated and frozen, a filter, page numbers and the job in the footer."""
    book = openpyxl.load_workbook(written(make(job=JOB), tmp_path / "w.xlsx"))
    assert tuple(book.sheetnames) == SHEETS
    for sheet in book:
        assert sheet.page_setup.orientation == "landscape"
        assert "Weir && sluice" in sheet.oddFooter.left.text or "Weir & sluice" in sheet.oddFooter.left.text
        assert "&P" in f"{sheet.oddFooter.right.text}" or "Page" in f"{sheet.oddFooter.right.text}"
    schedule = book["Weight schedule"]
    assert schedule.print_title_rows == "$6:$6"
    assert schedule.freeze_panes == "C7"
    assert schedule.auto_filter.ref.startswith("A6:")
    assert schedule.page_setup.fitToWidth in (None, 1)


def test_many_groups_are_cut_and_the_rest_still_counts(tmp_path: Path) -> None:
    """A table of many sections lists the heaviest, one line holds the rest, and together they are the total."""
    rows = [row(f"M{i}", section=f"UB {i}x", each=(1.0 + i, 2.0 + i, 3.0 + i), row=i + 5) for i in range(70)]
    result = make(rows, {})
    path = written(result, tmp_path / "w.xlsx")
    sheet = sheet_of(path, "Summary")
    start = next(c.row for r in sheet.iter_rows() for c in r if c.value == "By section") + 2
    lines = [[c.value for c in r[:5]] for r in sheet.iter_rows(min_row=start) if r[0].value]
    assert len(lines) == 37
    assert lines[-1][0].startswith("34 others")
    assert sum(line[4] for line in lines) == pytest.approx(result.totals.mass_kg.heavy, rel=1e-12)
    assert sum(line[1] for line in lines) == 70


def test_several_lists_name_the_file_of_each_row(tmp_path: Path) -> None:
    """With more than one list every row says which it is from, on the schedule and where it is missing."""
    result = make([*SOME_ROWS, row("C1", file="stone.csv", sheet=None, row=2, status="not weighed")], {}, job=JOB)
    result.inputs.append(InputFile("stone.csv", "1" * 64, ()))
    path = written(result, tmp_path / "w.xlsx")
    sheet = sheet_of(path, "Weight schedule")
    lists, places = column(sheet, "List"), column(sheet, "Place in the list")
    assert [(sheet.cell(n, lists).value, sheet.cell(n, places).value) for n in (7, 12)] == [
        ("list.xlsx", "list.xlsx / Steel row 5"), ("stone.csv", "stone.csv row 2")]
    missing = sheet_of(path, "Not weighed")
    assert [missing.cell(n, 1).value for n in (5, 6)] == ["list.xlsx / Steel row 8", "stone.csv row 2"]


def test_picks_of_the_list_are_summed_over_its_pick_column(tmp_path: Path) -> None:
    """Where the list names picks, each pick's mass is a live sum over that column, and it recalculates."""
    result = make([row("B1", pick="lift one"), row("B2", pick="lift one", assembly="A9"), row("B3", pick="lift two")], {})
    path = written(result, tmp_path / "w.xlsx")
    live = sheet_of(path, "Picks", values=False)
    sums = [c.value for r in live.iter_rows() for c in r if c.data_type == "f" and "SUMIF" in c.value]
    assert len(sums) == 6
    assert sum('"lift one"' in formula for formula in sums) == 3
    assert any("Heaviest picks" in str(v) for v in cells(path, values=True).values())
    assert assert_recalculates(path, tmp_path) > 20


@pytest.mark.parametrize("many", [0, 10**6])
def test_a_workbook_that_fails_leaves_no_scratch_files(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, many: int) -> None:
    """Whatever stops the writing, at the start, half way or at the end, nothing is left in the system's scratch folder."""
    scratch = tmp_path / "scratch"
    scratch.mkdir()
    monkeypatch.setattr(tempfile, "tempdir", str(scratch))
    monkeypatch.setattr(workbook, "MANY_ROWS", many)
    with pytest.raises(OSError, match="No such file"):
        write_workbook(make(), tmp_path / "absent" / "w.xlsx")

    def stop(*_: object) -> None:
        raise RuntimeError("stopped")

    monkeypatch.setattr(workbook.summary, "write", stop)
    with pytest.raises(RuntimeError, match="stopped"):
        write_workbook(make(), tmp_path / "w.xlsx")
    assert [p.name for p in tmp_path.iterdir()] == ["scratch"]
    assert list(scratch.iterdir()) == []
