"""Picks drawn in the workbook: charts that refer to a table of coordinates equal to the JSON's, at one scale both ways."""

from __future__ import annotations

import json
import re
import shutil
import zipfile
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any
from xml.etree import ElementTree

import openpyxl
import pytest
from conftest import SAMPLES
from openpyxl.worksheet.worksheet import Worksheet

from takeoff import pipeline
from takeoff.reports.rounding import MM_PER_IN
from takeoff.reports.workbook import write_workbook
from takeoff.reports.workbook.pickdrawings import MOST_DRAWN, _scale

Run = Callable[..., "CompletedProcess[str]"]
C = "{http://schemas.openxmlformats.org/drawingml/2006/chart}"
EMU_PER_PIXEL = 9525
WORDS = ["axes of members", "outline", "where it may lie", "slings", "lifting points", "hook", "centre of gravity"]


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    for name in ("span_lift.csv", "span_lift.toml", "crane_chart.csv"):
        shutil.copy(SAMPLES / "weir_footbridge" / name, tmp_path / name)
    return tmp_path


def result_of(folder: Path) -> pipeline.Result:
    return pipeline.schedule([folder / "span_lift.csv"], job_path=folder / "span_lift.toml")


def charts_of(path: Path) -> list[ElementTree.Element]:
    """The scatter charts over the sheet of drawings, in order; the loads have theirs."""
    with zipfile.ZipFile(path) as archive:
        names = sorted(
            (n for n in archive.namelist() if re.fullmatch(r"xl/charts/chart\d+\.xml", n)), key=lambda n: int(re.sub(r"\D", "", n))
        )
        found = [ElementTree.fromstring(archive.read(n)) for n in names]
    scattered = [chart for chart in found if chart.find(f".//{C}scatterChart") is not None]
    return [chart for chart in scattered if any((r.text or "").startswith("Drawings!") for r in chart.iter(f"{C}f"))]


def referred(sheet: Worksheet, reference: str) -> list[Any]:
    """The values a chart's reference stands for."""
    name, _, cells = reference.rpartition("!")
    assert name.strip("'") == sheet.title
    block = sheet[cells.replace("$", "")]
    return [block.value] if not isinstance(block, tuple) else [line[0].value for line in block]


def drawn_series(path: Path) -> list[dict[str, list[tuple[Any, Any]]]]:
    """For each chart the places its series refer to, by the series' word."""
    sheet = openpyxl.load_workbook(path, data_only=True)["Drawings"]
    found = []
    for chart in charts_of(path):
        one = {}
        for series in chart.iter(f"{C}ser"):
            word = series.findtext(f"{C}tx//{C}v") or ""
            across, up = (referred(sheet, series.findtext(f"{C}{part}//{C}f") or "") for part in ("xVal", "yVal"))
            one[word] = list(zip(across, up, strict=True))
        found.append(one)
    return found


def assert_equal_scale(path: Path) -> int:
    """A unit is as many pixels across as up in every chart, and all that is drawn lies within; returns how many charts."""
    charts = charts_of(path)
    for chart, places in zip(charts, drawn_series(path), strict=True):
        x_axis, y_axis = chart.findall(f".//{C}valAx")
        ends = [
            [float(axis.find(f"{C}scaling/{C}{end}").attrib["val"]) for end in ("min", "max")]  # type: ignore[union-attr]
            for axis in (x_axis, y_axis)
        ]
        layout = chart.find(f".//{C}plotArea/{C}layout/{C}manualLayout")
        assert layout is not None
        assert layout.find(f"{C}layoutTarget").attrib["val"] == "inner"  # type: ignore[union-attr]
        share = [float(layout.find(f"{C}{side}").attrib["val"]) for side in ("w", "h")]  # type: ignore[union-attr]
        sizes = sizes_of(path)[charts.index(chart)]
        per_unit = [size * part / (most - least) for size, part, (least, most) in zip(sizes, share, ends, strict=True)]
        assert per_unit[0] == pytest.approx(per_unit[1], rel=0.003)
        steps = {axis.find(f"{C}majorUnit").attrib["val"] for axis in (x_axis, y_axis)}  # type: ignore[union-attr]
        assert len(steps) == 1
        for x, y in (p for series in places.values() for p in series if p[0] is not None):
            assert ends[0][0] < x < ends[0][1]
            assert ends[1][0] < y < ends[1][1]
    return len(charts)


def sizes_of(path: Path) -> list[tuple[float, float]]:
    """Width and height in pixels of the charts on the sheet of drawings, from the cells they are anchored to."""
    sheet = openpyxl.load_workbook(path)["Drawings"]

    def left(column: int) -> float:
        # One entry may stand for several columns.
        entries = [d for d in sheet.column_dimensions.values() for _ in range(d.min, d.max + 1)]
        return sum(int(entries[k].width * 7 + 0.5) for k in range(column))

    def top(row: int) -> float:
        return sum(int(4 / 3 * (sheet.row_dimensions[k + 1].height or 15)) for k in range(row))

    # Within one column, so that a program that draws columns wider keeps the scale.
    assert all(chart.anchor.to.col == chart.anchor._from.col for chart in sheet._charts)
    return [
        (
            left(a.to.col) + a.to.colOff / EMU_PER_PIXEL - left(a._from.col) - a._from.colOff / EMU_PER_PIXEL,
            top(a.to.row) + a.to.rowOff / EMU_PER_PIXEL - top(a._from.row) - a._from.rowOff / EMU_PER_PIXEL,
        )
        for a in (chart.anchor for chart in sheet._charts)
    ]


def test_plan_and_elevation_draw_what_the_json_says(run: Run, folder: Path) -> None:
    """Points, hook, centre of gravity, its bounds and the size in both views are those of the JSON, through the table."""
    done = run("schedule", "span_lift.csv", "--job", "span_lift.toml", "--json", "out.json", cwd=folder)
    assert done.returncode == 0, done.stderr
    pick = json.loads((folder / "out.json").read_text(encoding="utf-8"))["picks"][0]
    path = folder / "span_lift.schedule.xlsx"
    views = drawn_series(path)
    assert [list(view) for view in views] == [WORDS, WORDS]
    for view, axis in zip(views, (1, 2), strict=True):

        def flat(p: list[float], axis: int = axis) -> tuple[float, float]:
            return p[0], p[axis]

        assert view["lifting points"] == [flat(p["position_mm"]) for p in pick["points"]]
        assert view["hook"][0] == pytest.approx(flat(pick["hook_mm"]), rel=1e-14)
        assert view["centre of gravity"][0] == pytest.approx(flat(pick["centre_of_gravity_mm"]), rel=1e-14)
        low, high = map(flat, pick["centre_of_gravity_box_mm"])
        corners = [low, (high[0], low[1]), high, (low[0], high[1]), low]
        # A cell holds 16 figures of a number.
        assert [v for p in view["where it may lie"] for v in p] == pytest.approx([v for p in corners for v in p], rel=1e-14)
        outline = view["outline"]
        assert [max(p[k] for p in outline) - min(p[k] for p in outline) for k in range(2)] == pytest.approx(flat(pick["size_mm"]))
        assert view["slings"][0::3] == view["lifting points"]
        assert set(view["slings"][1::3]) == set(view["hook"])
        assert set(view["slings"][2::3]) == {(None, None)}


def test_scale_is_equal_both_ways(folder: Path) -> None:
    """Two charts a pick, a unit the same length across and up."""
    path = folder / "w.xlsx"
    write_workbook(result_of(folder), path)
    assert assert_equal_scale(path) == 2


@pytest.mark.parametrize(
    "places", [[(0.0, 0.0)], [(0.0, 0.0), (0.0, 30000.0)], [(-5.0, 7.0), (90000.0, 7.0)], [(1e6, 1e6), (1e6 + 3.0, 1e6 + 2.0)]]
)
def test_a_scale_holds_every_place_and_stays_in_its_frame(places: list[tuple[float, float]]) -> None:
    """Upright, flat, single and far-away places: whole steps around them, a plot that fits its frame."""
    scale = _scale(places)
    assert 260 <= scale.pixels[0] <= 500
    assert 110 <= scale.pixels[1] <= 300
    for x, y in places:
        assert scale.across[0] < x < scale.across[1]
        assert scale.up[0] < y < scale.up[1]


def test_us_units_draw_inches(folder: Path) -> None:
    """In US units the table and its charts are in inches, still to one scale."""
    result = result_of(folder)
    job = result.job.job.model_copy(update={"units": "us"})
    result.job = result.job.model_copy(update={"job": job})
    path = folder / "w.xlsx"
    write_workbook(result, path)
    assert assert_equal_scale(path) == 2
    x = [p.position_mm[0] / MM_PER_IN for p in result.picks[0].points]
    assert [p[0] for p in drawn_series(path)[0]["lifting points"]] == pytest.approx(x)
    heads = {c.value for line in openpyxl.load_workbook(path)["Drawings"].iter_rows() for c in line}
    assert {"x (in)", "y (in)", "z (in)"} <= heads


def test_picks_lead_to_their_drawings_and_cautions_stand_there(folder: Path) -> None:
    """The heading of a pick links to its drawings; the sheet carries the run's cautions."""
    result = result_of(folder)
    path = folder / "w.xlsx"
    write_workbook(result, path)
    book = openpyxl.load_workbook(path)
    links = [c.hyperlink.location for line in book["Picks"].iter_rows() for c in line if c.hyperlink]
    assert len(links) == 1
    assert links[0].startswith("'Drawings'!")
    assert book["Drawings"][links[0].rpartition("!")[2]].value == "Span frame: 7 pieces"
    texts = [str(c.value) for line in book["Drawings"].iter_rows() for c in line]
    assert result.cautions
    assert any(all(caution in text for caution in result.cautions) for text in texts)


def test_picks_beyond_the_first_are_left_out_in_words(folder: Path) -> None:
    """Of 23 picks 20 are drawn, two charts each, and the sheet says that 3 are not."""
    result = result_of(folder)
    result.picks = [replace(result.picks[0], name=f"Frame {n}") for n in range(MOST_DRAWN + 3)]
    path = folder / "w.xlsx"
    write_workbook(result, path)
    assert len(charts_of(path)) == 2 * MOST_DRAWN
    texts = [str(c.value) for line in openpyxl.load_workbook(path)["Drawings"].iter_rows() for c in line if c.value]
    assert any("3 more picks left out" in text for text in texts)


def test_an_unknown_centre_is_not_drawn(folder: Path) -> None:
    """Without positions there is nothing to draw: no sheet, no link."""
    result = result_of(folder)
    result.picks = [replace(result.picks[0], centre=None, centre_unknown="no positions")]
    path = folder / "w.xlsx"
    write_workbook(result, path)
    assert "Drawings" not in openpyxl.load_workbook(path).sheetnames
    assert charts_of(path) == []


def test_an_incomplete_pick_and_names_like_formulas_stay_what_they_are(folder: Path) -> None:
    """Rows not weighed are said above the drawing; a point named like a formula is a label."""
    result = result_of(folder)
    pick = result.picks[0]
    points = tuple(replace(p, name=f"={p.name}1") for p in pick.points)
    result.picks = [replace(pick, name="=Frame", points=points, not_weighed=2)]
    path = folder / "w.xlsx"
    write_workbook(result, path)
    texts = [str(c.value) for line in openpyxl.load_workbook(path)["Drawings"].iter_rows() for c in line if c.value]
    assert any(text.startswith("INCOMPLETE: 2 rows") for text in texts)
    assert "point =A1" in texts
    labels = ["".join(label.itertext()).strip() for label in charts_of(path)[0].iter(f"{C}dLbl")]
    assert any("=A1" in label for label in labels)
    assert all(reference.text and reference.text.startswith("Drawings!") for c in charts_of(path) for reference in c.iter(f"{C}f"))
