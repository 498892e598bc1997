"""Loads drawn to scale: the page's side view and the workbook's charts stand where the records say."""

from __future__ import annotations

import re
import zipfile
from dataclasses import replace
from pathlib import Path

import pytest
import whole_job

from takeoff import pipeline
from takeoff.bounds import Bounds
from takeoff.pipeline import Result
from takeoff.reports import drawings
from takeoff.reports.page import to_page
from takeoff.reports.workbook import loaddrawings, write_workbook
from takeoff.transport.load import LoadUnit, Placed

RECT = re.compile(r'<rect x="([\d.]+)" y="([\d.]+)" width="([\d.]+)" height="([\d.]+)" class="piece')


@pytest.fixture(scope="module")
def result(tmp_path_factory: pytest.TempPathFactory) -> Result:
    return pipeline.schedule([whole_job.write(tmp_path_factory.mktemp("job"))])


def charts(result: Result, path: Path) -> tuple[list[str], str]:
    """The texts of the charts of the sheet of loads, and of all cells' strings."""
    write_workbook(result, path)
    with zipfile.ZipFile(path) as book:
        found = [book.read(name).decode() for name in book.namelist() if re.fullmatch(r"xl/charts/chart\d+\.xml", name)]
        names = [n for n in book.namelist() if n == "xl/sharedStrings.xml"]
        return [text for text in found if "Loads!" in text], book.read(names[0]).decode()


def test_the_side_view_stands_where_the_records_say(result: Result) -> None:
    """Each rectangle on the page is a piece's place, underside and size at one scale, over the deck's line."""
    assert result.loads is not None
    views = re.findall(r'<svg[^>]*aria-label="Load of [^"]* from its left side.*?</svg>', to_page(result))
    assert len(views) == len(result.loads.loads)
    for load, svg in zip(result.loads.loads, views, strict=True):
        records = [p.as_record() for p in load.pieces]
        deck = load.vehicle.deck
        assert deck is not None
        per_mm = 760 / max(deck[0], *(r["x_mm"] + r["length_mm"] for r in records))
        high = max(deck[2], *(r["bottom_mm"] + r["height_mm"] for r in records))
        expected = sorted(
            (
                44 + r["x_mm"] * per_mm,
                24 + (high - r["bottom_mm"] - r["height_mm"]) * per_mm,
                r["length_mm"] * per_mm,
                r["height_mm"] * per_mm,
            )
            for r in records
        )
        drawn = sorted(tuple(map(float, found)) for found in RECT.findall(svg))
        assert len(drawn) == len(expected)
        for one, other in zip(drawn, expected, strict=True):
            assert one == pytest.approx(other, abs=0.06)
        for words in ("load height limit", ">deck</text>", ">front</text>"):
            assert words in svg


def test_what_reaches_beyond_the_deck_and_lies_on_another_is_said() -> None:
    """A rear overhang is a dimension with its words, an upper layer a heavier outline with its word, and hidden pieces share a label."""
    pieces = [
        drawings.Standing(1, 0, 0, 0, 8000, 1000, 1),
        drawings.Standing(2, 0, 1200, 0, 8000, 1000, 1),
        drawings.Standing(3, 0, 0, 1000, 10000, 500, 2),
    ]
    svg = drawings.deck_side(pieces, 9000, 2400, "Load", ("limit here", "rear overhang 1 m"))
    assert "rear overhang 1 m" in svg
    assert ">1, 2 (layer 1)<" in svg
    assert ">3 (layer 2)<" in svg
    assert svg.count('class="piece upper"') == 1
    flush = drawings.deck_side(pieces[:2], 9000, 2400, "Load", ("limit here", "rear overhang 1 m"))
    assert "rear overhang" not in flush


def test_the_workbook_draws_plan_and_side_at_one_scale(result: Result, tmp_path: Path) -> None:
    """Two scatter charts a vehicle, a closed line for each piece, and as many millimetres to a pixel across as up."""
    assert result.loads is not None
    found, _ = charts(result, tmp_path / "w.xlsx")
    assert len(found) == 2 * len(result.loads.loads)
    assert sum("Side view of" in text for text in found) == sum("Plan of" in text for text in found) == len(result.loads.loads)
    for text in found:
        assert "<c:scatterChart>" in text
        assert all(int(b) - int(a) == 4 for a, b in _corner_columns(text))
        across, up = (float(m) for m in re.findall(r'<c:max val="([\d.]+)"/>', text))
        wide, high = (float(re.findall(rf'<c:{side} val="([\d.]+)"/>', _plot(text))[0]) for side in ("w", "h"))
        left, top = (float(re.findall(rf'<c:{side} val="([\d.]+)"/>', _plot(text))[0]) for side in ("x", "y"))
        # The margins are 80 pixels left and 34 above, which gives the chart's size in pixels.
        assert wide * 80 / left / across == pytest.approx(high * 34 / top / up, rel=1e-6)


def _plot(text: str) -> str:
    return text.split("<c:plotArea>", maxsplit=1)[1].split("</c:layout>", maxsplit=1)[0]


def _corner_columns(text: str) -> list[tuple[int, int]]:
    """First and last column of each piece's corners along the deck."""
    from openpyxl.utils import column_index_from_string

    found = []
    for series in re.findall(r"<c:ser>.*?</c:ser>", text):
        if "<c:v>piece " in series:
            [(a, b)] = re.findall(r"<c:xVal><c:numRef><c:f>Loads!\$([A-Z]+)\$\d+:\$([A-Z]+)\$\d+", series)
            found.append((column_index_from_string(a), column_index_from_string(b)))
    assert found
    return found


def test_two_numbers_never_read_as_one() -> None:
    """Pieces 4 and 5, one behind the other and 100 mm apart: one number is written and not "45"; 400 mm apart both are."""
    per = 0.065
    for apart, wanted in ((100, 1), (400, 2)):
        pieces = [
            (n, Placed(LoadUnit(f"P{n}", "piece", Bounds.exact(1.0), (800.0, 800.0, 900.0)), 5000.0 + apart * k, 900.0 * k, 0.0, 1, False))
            for k, n in enumerate((4, 5))
        ]
        labels = loaddrawings._numbers(pieces, 2, per, True)
        assert len([x for x in labels if "value" in x]) == wanted


def test_vehicles_beyond_the_first_twelve_are_said_to_be_left_out(result: Result, tmp_path: Path) -> None:
    """Thirteen or more vehicles: twelve are drawn and the sheet says how many are not."""
    plan = result.loads
    assert plan is not None
    many = replace(plan, loads=tuple(replace(plan.loads[0], name=f"Lorry {n}") for n in range(14)))
    whole = replace(result, loads=many)
    found, strings = charts(whole, tmp_path / "w.xlsx")
    assert len(found) == 24
    assert "Plan and side view are drawn for the first 12 vehicles; 2 vehicles more without." in strings
