"""The chart of length over temperature: on the page of a schedule without runs, and on the page of `takeoff movement`."""

from __future__ import annotations

import re
from collections.abc import Callable
from html import unescape
from pathlib import Path
from subprocess import CompletedProcess

import pytest
from conftest import WriteList

from takeoff import materials, pipeline
from takeoff.job import job_from
from takeoff.reports.page import to_page
from takeoff.reports.page.single import movement_page
from takeoff.thermal.movement import movement

Run = Callable[..., "CompletedProcess[str]"]
STEEL, ALUMINIUM = (materials.by_key(key) for key in ("steel-structural", "aluminium-structural"))


def charts(page: str) -> list[str]:
    """The labels that the page's charts give a screen reader."""
    return [unescape(found) for found in re.findall(r'<svg class="drawing"[^>]*aria-label="([^"]*)"', page)]


def test_changes_by_hand() -> None:
    """60 m of steel set at 5 °C: 28.8 mm longer at 45 °C, 18 shorter at −20 °C, 12e-6 x 60 000 x 40 and x 25; aluminium 23e-6."""
    found = movement(STEEL, 60_000, -20, 45, set_at_C=5, against=ALUMINIUM)
    changes = {c.temperature_C: c for c in found.changes}
    assert found.changes_from_C == 5
    assert changes[45].change_mm == pytest.approx(28.8)
    assert changes[-20].change_mm == pytest.approx(-18)
    assert changes[45].high_mm == pytest.approx(28.8 * found.spread.high)
    assert changes[-20].low_mm == pytest.approx(-18 * found.spread.low)
    assert changes[45].other_mm == pytest.approx(60_000 * 23e-6 * 40)
    assert changes[5].change_mm == changes[5].high_mm == changes[5].other_mm == 0
    assert sorted(changes) == list(range(-20, 50, 5))


def test_changes_start_at_from_and_reach_a_setting_outside() -> None:
    """Without a setting the change counts from FROM; a setting outside the range is drawn too."""
    plain = movement(STEEL, 1000, 45, -20)
    assert (plain.changes_from_C, plain.changes[0].temperature_C, plain.changes[-1].change_mm) == (45, -20, 0)
    assert movement(STEEL, 1000, 0, 20, set_at_C=60).changes[-1].temperature_C == 60
    assert movement(materials.by_key("water-fresh"), 1000, 0, 20).changes == ()


def test_a_schedule_without_runs_shows_growth_over_temperature(write_list: WriteList) -> None:
    """Each material that has lengths is a line, each named temperature an upright; without temperatures there is no chart."""
    path = write_list([["A1", 2, "UB 203x133x25", "S355", 6000], ["A2", 1, "FL 100x10", "6082-T6", 3000]], name="list.csv",
                      headings=["Mark", "Quantity", "Section", "Material", "Length (mm)"])
    result = pipeline.schedule([path], job_from({"temperatures": {"coldest": -20.0, "erect": 5.0, "warmest": 45.0}}))
    page = to_page(result)
    [chart] = [c for c in charts(page) if "10 m" in c]
    assert "temperature of the metal" in chart
    svg = page[page.index(chart.split(" over")[0]):]
    svg = svg[: svg.index("</svg>")]
    assert svg.count('class="limit"') == 4
    assert "coldest" in svg
    assert svg.count("<polyline") > 4
    assert "1 runs" not in page
    assert not any("10 m" in c for c in charts(to_page(pipeline.schedule([path]))))


@pytest.mark.parametrize("units", ["si", "us"])
def test_the_movement_page(units: str) -> None:
    """Two charts, the lengths, the gaps of the table, findings, sources and cautions; nothing that loads anything."""
    found = movement(STEEL, 60_000, -20, 45, set_at_C=5, gap_min_mm=5, gap_max_mm=80, against=ALUMINIUM)
    page = movement_page(found, units)  # type: ignore[arg-type]
    change, gaps = charts(page)
    assert "Length change" in change
    assert "Gap" in gaps
    words = unescape(re.sub(r"<[^>]+>", " ", page))
    assert "+46.80" in words if units == "si" else "+1.843" in words
    assert "It is the metal's own temperature" in words
    assert ALUMINIUM.name in words
    assert "http" not in page.replace("http-equiv", "")
    assert len(re.findall(r"<h1", page)) == 1


def test_a_movement_without_an_answer_has_no_chart() -> None:
    """Above the melting point nothing is drawn, and the page says why."""
    found = movement(ALUMINIUM, 1000, 20, 900)
    page = movement_page(found, "si")
    assert charts(page) == []
    assert "melting" in page


def test_wood_says_what_it_does_across_the_grain() -> None:
    """The chart is of the length along the grain; the page tells the movement of the same size across it."""
    page = movement_page(movement(materials.by_key("oak-european"), 1000, -20, 45), "si")
    assert "across the grain" in page or "tangential the grain" in page


def test_the_command_writes_the_page(run: Run, tmp_path: Path) -> None:
    """`--page` writes it beside what is printed, replaces only when told, and the terminal keeps its table."""
    words = ("movement", "S355", "60 m", "--from", "-20", "--to", "45", "--set-at", "5", "--page", str(tmp_path / "m.html"))
    done = run(*words)
    assert done.returncode == 0, done.stderr
    assert "Gap to set by the metal's temperature" in done.stdout
    assert "Length change" in (tmp_path / "m.html").read_text(encoding="utf-8")
    assert "m.html" in done.stderr
    again = run(*words)
    assert again.returncode == 2
    assert "--replace" in again.stderr
    assert run(*words, "--replace", "--quiet").returncode == 0
