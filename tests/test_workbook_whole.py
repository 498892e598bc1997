"""The workbook of a job with everything in it: charts, loads, a sheet for each list; every formula recalculates."""

from __future__ import annotations

import re
import zipfile
from pathlib import Path

import openpyxl
import pytest
import whole_job
from conftest import ROOT
from made_result import SOME_ROWS, make, row
from openpyxl.worksheet.worksheet import Worksheet
from test_workbook import assert_recalculates, cells, sheet_of

from takeoff import pipeline
from takeoff.pipeline import InputFile, Result
from takeoff.reports.rounding import KG_PER_LB
from takeoff.reports.workbook import write_workbook
from takeoff.reports.workbook.sheet import SHEETS


@pytest.fixture(params=["si", "us"])
def whole(request: pytest.FixtureRequest, tmp_path: Path) -> Result:
    result = pipeline.schedule([whole_job.write(tmp_path)])
    job = result.job.job.model_copy(update={"units": request.param})
    result.job = result.job.model_copy(update={"job": job})
    return result


def test_every_formula_of_a_whole_job_recalculates(whole: Result, tmp_path: Path) -> None:
    """Loads, temperatures, picks with points and crane, charts: LibreOffice finds each stored result again."""
    path = tmp_path / "w.xlsx"
    write_workbook(whole, path)
    names = openpyxl.load_workbook(path).sheetnames
    assert {"Loads", "Temperatures", "Charts"} <= set(names)
    assert assert_recalculates(path, tmp_path) > 100


def test_charts_show_masses_cranes_and_axles(whole: Result, tmp_path: Path) -> None:
    """Four charts, each with a title row, its figures live under it, a limit of its own name and a word beside each bar."""
    path = tmp_path / "w.xlsx"
    write_workbook(whole, path)
    with zipfile.ZipFile(path) as archive:
        charts = [archive.read(n).decode() for n in archive.namelist() if re.fullmatch(r"xl/charts/chart\d+\.xml", n)]
    # Picks drawn to scale, plan and elevation each, lie on a sheet of their own; loads' views lie with their lists.
    charts = [chart for chart in charts if "Loads!" not in chart]
    drawn = [chart for chart in charts if "<c:scatterChart>" in chart]
    assert len(drawn) == 2 * sum(pick.centre is not None for pick in whole.picks) > 0
    assert len(charts) - len(drawn) == 4
    assert sum("<c:lineChart>" in chart for chart in charts) == 2
    shown = {str(v) for (name, _), v in cells(path, values=True).items() if name == "Charts"}
    assert {"within", "Planning limit, at rest (%)", "Rating (%)", "Limit (%)"} <= shown
    sheet = sheet_of(path, "Charts")
    unit = "kg" if whole.job.job.units == "si" else "lb"
    start = next(r[0].row for r in sheet.iter_rows() if r[0].value == f"Mass by assembly ({unit})")
    lines = {r[0].value: [c.value for c in r[1:7]] for r in sheet.iter_rows(min_row=start) if isinstance(r[1].value, float)}
    group = next(g for g in whole.totals.groups["assembly"] if g.name == "F1")
    factor = 1 if unit == "kg" else KG_PER_LB
    light, nominal, heavy, *steps = lines["F1"]
    assert (light, nominal, heavy) == pytest.approx([v / factor for v in (group.mass_kg.light, group.mass_kg.nominal, group.mass_kg.heavy)])
    assert sum(steps) == pytest.approx(heavy)


def test_utilisations_are_rounded_up_and_limits_down(whole: Result, tmp_path: Path) -> None:
    """A share of a limit is never shown smaller than it is."""
    path = tmp_path / "w.xlsx"
    write_workbook(whole, path)
    sheet = sheet_of(path, "Charts")
    [line] = [[c.value for c in r[:6]] for r in sheet.iter_rows() if r[0].value == "F1: Crane 1"]
    check = whole.picks[0].cranes[0]
    assert check.utilisation is not None
    assert 0 <= line[2] - 100 * check.utilisation < 0.1
    assert line[3:] == [75, 100, check.verdict]


def several() -> Result:
    rows = [
        row("C1", file="stone.csv", sheet=None, row=2, quantity=3),
        row("C2", file="stone.csv", sheet=None, row=3, status="not weighed"),
        row("D1", file="a/[x]'*?.xlsx", sheet="Steel", row=2),
    ]
    result = make([*SOME_ROWS, *rows], {})
    result.inputs += [InputFile("stone.csv", "1" * 64, ()), InputFile("a/[x]'*?.xlsx", "2" * 64, ("Steel",))]
    return result


def test_a_sheet_for_each_list(tmp_path: Path) -> None:
    """Several lists: one combined schedule, and each list's rows with its own total, live; the totals add up to the whole."""
    result, path = several(), tmp_path / "w.xlsx"
    write_workbook(result, path)
    book = openpyxl.load_workbook(path, data_only=True)
    own = [name for name in book.sheetnames if name.startswith("List ")]
    assert own == ["List 1 list", "List 2 stone", "List 3  x"]
    assert book.sheetnames.index(own[0]) == book.sheetnames.index("Weight schedule") + 1
    assert sum(book[name]["J4"].value for name in own) == pytest.approx(result.totals.mass_kg.heavy)
    stone = book[own[1]]
    assert [[c.value for c in r[:2]] for r in stone.iter_rows(min_row=7, max_row=8)] == [[2, "C1"], [3, "C2"]]
    assert "INCOMPLETE: 1 row not weighed" in stone["A2"].value
    assert "1" * 64 in stone["A2"].value
    assert assert_recalculates(path, tmp_path) > 60


def test_one_list_has_no_sheet_of_its_own(tmp_path: Path) -> None:
    """With one list the schedule is its sheet."""
    path = tmp_path / "w.xlsx"
    write_workbook(make(), path)
    assert tuple(openpyxl.load_workbook(path).sheetnames) == SHEETS


def test_links_to_the_list_go_from_where_the_schedule_lies(tmp_path: Path) -> None:
    """The link of a row is relative to the schedule's folder, with the sheet's name quoted as a spreadsheet wants it."""
    from takeoff.reports.workbook.schedule import input_link
    from takeoff.reports.workbook.sheet import Book

    (tmp_path / "out").mkdir()
    with Book(tmp_path / "out" / "x.xlsx", make(), many=False) as book:
        assert input_link(book, tmp_path / "in" / "a#b.xlsx", "Bob's list", 14) == "../in/a%23b.xlsx#'Bob''s list'!A14"
        assert input_link(book, tmp_path / "out" / "l.csv", None, 3) == "l.csv"


#: what a printed point of type is of 10 on screen at the least, and the printable width of the page in inches
LEGIBLE, PRINTABLE_IN = 0.64, 11.69 - 1.0


@pytest.mark.parametrize("sample", ["weir_footbridge/cutting_list.xlsx", "plant_skid/stueckliste.csv", "stage_set/cut_list.csv", None])
def test_every_sheet_prints_legibly(sample: str | None, tmp_path: Path) -> None:
    """Fitted to the page's width, the columns that print keep type of 6.4 points or more; on screen no column is lost."""
    result = pipeline.schedule([ROOT / "sample_projects" / sample if sample else whole_job.write(tmp_path)])
    path = tmp_path / "w.xlsx"
    write_workbook(result, path)
    for sheet in openpyxl.load_workbook(path):
        area = str(sheet.print_area).rsplit("!", 1)[-1].replace("$", "") if sheet.print_area else sheet.dimensions
        last = openpyxl.utils.cell.range_boundaries(area)[2]
        # The file counts a column's margin in its width.
        inches = sum(7 * width for column, width in widths_of(sheet).items() if column <= last) / 96
        assert PRINTABLE_IN / inches >= LEGIBLE, (sheet.title, inches)
    headings = [c.value for c in sheet_of(path, "Weight schedule")[6]]
    assert {"Handling", "What to know", "Place in the list", "State"} <= set(headings)
    assert headings.index("What to know") < headings.index("Handling")


def test_wide_figures_have_room(tmp_path: Path) -> None:
    """A mass of millions of kg is never shown as a row of hashes: its column is as wide as its figures."""
    result = make([row("B1", each=(123_456_789.0, 123_456_789.0, 123_456_789.0))])
    write_workbook(result, tmp_path / "w.xlsx")
    sheet = sheet_of(tmp_path / "w.xlsx", "Weight schedule")
    at = next(c.column for c in sheet[6] if str(c.value).startswith("All pieces, heavy"))
    assert widths_of(sheet)[at] >= len("123,456,789.0") + 2


def widths_of(sheet: Worksheet) -> dict[int, float]:
    """The width of every column: neighbours of one width stand in the file as one entry."""
    return {number: d.width for d in sheet.column_dimensions.values() for number in range(d.min, d.max + 1)}
