"""The page: everything of the schedule in one file that loads nothing, whatever the list's texts are."""

from __future__ import annotations

import re
from collections.abc import Callable
from html.parser import HTMLParser
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import pytest
import whole_job
from made_result import SOME_ROWS, make, row

from takeoff import pipeline
from takeoff.findings import Finding
from takeoff.pipeline import Result
from takeoff.reports import drawings, page
from takeoff.reports.page import masses, to_page

Run = Callable[..., "CompletedProcess[str]"]

HOSTILE = [
    "<script>alert(1)</script>",
    '"><img src=x onerror=alert(1)>',
    "</style><script>alert(2)</script>",
    "{{ 7*7 }}{% raw %}",
    "javascript:alert(3)",
    "' onmouseover='alert(4)",
    "<!-- ",
    "]]>",
    "&lt;b&gt;",
    "\u202eevil\u202c",
    "a\x00b\x1b[31m",
    "</script>",
    "<svg onload=alert(5)>",
    "-->",
    "`${alert(6)}`",
]


class Seen(HTMLParser):
    """Tags with their attributes, ids, links and text."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.open: list[str] = []
        self.text: list[str] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))
        self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        if tag in self.open:
            while self.open.pop() != tag:
                pass

    def handle_data(self, data: str) -> None:
        if not {"script", "style"} & set(self.open):
            self.text.append(data)


def seen(html: str) -> Seen:
    parser = Seen()
    parser.feed(html)
    parser.close()
    return parser


def everything(folder: Path) -> Result:
    return pipeline.schedule([whole_job.write(folder)])


def hostile_result() -> Result:
    rows = [
        row(
            text,
            assembly=text,
            section=text,
            section_text=text,
            material=text,
            material_text=text,
            remarks=text,
            finish=text,
            sheet=text,
            phase=text,
            run=text,
            row=5 + i,
        )
        for i, text in enumerate(HOSTILE)
    ]
    rows.append(row("x", status="not weighed", reason=HOSTILE[0], section_text=HOSTILE[1]))
    said = {i: (Finding("assumed", "similar-section", text, read=text, right=text).at(text, text, text),) for i, text in enumerate(HOSTILE)}
    about = [Finding("refused", "cell-error", text, read=text, right=text, file=text, sheet=text, cell=text) for text in HOSTILE]
    names = ("title", "reference", "revision", "date", "prepared_by", "checked_by", "approved_by")
    return make([*SOME_ROWS, *rows], said, job={"job": {name: HOSTILE[i] for i, name in enumerate(names)}}, sheet_findings=about)


def test_no_text_of_a_list_becomes_markup() -> None:
    """A page over hostile texts has the very tags and attributes of a page over harmless ones, and shows the texts as they are."""
    hostile = seen(to_page(hostile_result()))
    assert [t for t, _ in hostile.tags].count("script") == 1
    assert not [a for _, attrs in hostile.tags for a in attrs if a.startswith("on")]
    assert not [tag for tag, _ in hostile.tags if tag in {"img", "iframe", "object", "embed", "form", "base"}]
    shown = "".join(hostile.text)
    for text in ("<script>alert(1)</script>", '"><img src=x onerror=alert(1)>', "{{ 7*7 }}{% raw %}", "&lt;b&gt;", "<svg onload=alert(5)>"):
        assert text in shown
    assert not set(shown) & set("\u202e\u202c\x00\x1b")


def test_ids_and_links_are_ours_alone() -> None:
    """Every id is one of ours, stands once, and every link leads to one; no link leads out of the page."""
    tags = seen(to_page(hostile_result())).tags
    ids = [attrs["id"] for _, attrs in tags if "id" in attrs]
    assert len(ids) == len(set(ids))
    assert all(re.fullmatch(r"[a-z]+(?:-[a-z0-9]+)*", str(i)) for i in ids)
    links = [str(attrs["href"]) for tag, attrs in tags if tag == "a"]
    assert len(links) > 20
    assert {link[1:] for link in links if link.startswith("#")} <= set(ids)
    assert all(link.startswith("#") for link in links)


def test_the_page_loads_nothing_and_says_so() -> None:
    """No address in it but its own fragments, and a policy that lets nothing be loaded."""
    html = to_page(make())
    tags = seen(html).tags
    assert not [attrs for _, attrs in tags if {"src", "srcset", "data", "action", "poster"} & set(attrs)]
    assert not re.search(r"url\(|@import|https?://|fetch\(|XMLHttp|WebSocket", html)
    [policy] = [str(attrs["content"]) for tag, attrs in tags if attrs.get("http-equiv") == "Content-Security-Policy"]
    assert policy.startswith("default-src 'none'")
    assert "unsafe" not in policy
    assert not [attrs for _, attrs in tags if "style" in attrs]


def test_figures_are_those_of_the_result_and_never_flatter(tmp_path: Path) -> None:
    """Total, hook load and each row's heavy mass stand on the page, rounded up."""
    result = everything(tmp_path)
    text = " ".join("".join(seen(to_page(result)).text).replace("\u00a0", "").split())
    heavy = result.totals.mass_kg.heavy
    assert f"{-int(-heavy // 1)}" in text
    for pick in result.picks:
        assert f"{-int(-pick.hook_load_kg // 1)}" in text or pick.hook_load_kg < 1000
    for caution in result.cautions:
        assert caution in " ".join("".join(seen(to_page(result)).text).split())
    assert "INCOMPLETE" in text
    assert "1 row could not be weighed" in text


@pytest.mark.parametrize("units", ["si", "us"])
def test_every_part_is_there(tmp_path: Path, units: str) -> None:
    """Masses, picks with plan and elevations, the crane's scale, decks, axles, movement: each with words that say it too."""
    result = everything(tmp_path)
    result.job = result.job.model_copy(update={"job": result.job.job.model_copy(update={"units": units})})
    html = to_page(result)
    for words in (
        "Plan, from above",
        "Elevation along y",
        "planning limit 75.0",
        "rating 100",
        "Run LINE",
        "Weight schedule: one row a member",
        "Deck of ",
        "Axle loads of ",
        "Gap after each piece",
        "Rows in no total",
        "Bases: how each mass was found",
        "SHA-256",
    ):
        assert words in html, words
    drawn = [attrs for tag, attrs in seen(html).tags if tag == "svg"]
    assert len(drawn) > 20
    assert all(attrs.get("role") == "img" and attrs.get("aria-label") for attrs in drawn)
    shown = "".join(seen(html).text).replace("\u00a0", " ")
    assert not re.search(
        r"\d (?:kg|kN)\b" if units == "us" else r"\d (?:lb|kip)\b", shown.split("Bases: how each")[0].split("Growth of each material")[0]
    )


def test_parts_can_be_had_alone(tmp_path: Path) -> None:
    """`lift --page` holds picks and no member table; its cautions and inputs are there all the same."""
    html = to_page(everything(tmp_path), parts=("picks",), pick="F1")
    assert "Lifting points of F1" in html
    assert 'id="schedule"' not in html
    assert "Cautions" in html
    assert "SHA-256" in html
    assert "1 row could not be weighed" in html


def test_a_long_list_is_cut_and_says_so(monkeypatch: pytest.MonkeyPatch) -> None:
    """Beyond what a browser bears, the page shows every row that needs a look, says how many it leaves out, and where they are."""
    monkeypatch.setattr(masses, "MOST_ROWS", 6)
    rows = [row(f"M{i}", row=5 + i, status="not weighed" if i == 40 else "weighed") for i in range(50)]
    html = to_page(make(rows, {}))
    assert html.count('<tr id="row-') == 6
    assert 'id="row-40"' in html
    assert "44 rows more, none of them left out of any total" in html


def test_the_same_run_gives_the_same_page(tmp_path: Path) -> None:
    """No clock and no chance in it."""
    assert to_page(everything(tmp_path)) == to_page(pipeline.schedule([tmp_path / "list.csv"]))


def test_the_command_writes_the_page_whole_or_not_at_all(run: Run, tmp_path: Path) -> None:
    """`schedule --page` writes it beside the workbook, keeps one that is there, and never writes over an input."""
    path = whole_job.write(tmp_path)
    done = run("schedule", path, "--page", tmp_path / "list.html")
    assert done.returncode == 3, done.stderr
    assert (tmp_path / "list.html").read_text(encoding="utf-8").startswith("<!DOCTYPE html>")
    again = run("schedule", path, "--page", tmp_path / "list.html", "--out", tmp_path / "other.xlsx")
    assert (again.returncode, (tmp_path / "other.xlsx").exists()) == (2, False)
    assert "exists already" in again.stderr
    over = run("lift", path, "--page", tmp_path / "chart.csv", "--replace")
    assert over.returncode == 2
    assert "is an input" in over.stderr
    lifted = run("lift", path, "--page", tmp_path / "lift.html", "--json")
    assert lifted.stdout.lstrip().startswith("{")
    assert "Lifting points of F1" in (tmp_path / "lift.html").read_text(encoding="utf-8")


def test_drawings_escape_what_they_are_given() -> None:
    """Names in drawings are text, in titles too."""
    view = drawings.View((0, 0), (10, 10), (5, 5), ((4, 4), (6, 6)), points=(('<b>&"', (1.0, 1.0)),), hook=(5, 20))
    svg = drawings.pick_view(view, ("x", "y"), ("<1>", "2"), 'a"b<c>')
    assert "<b>" not in svg
    assert 'aria-label="a&quot;b&lt;c&gt;"' in svg
    assert "&lt;1&gt;" in svg


def test_bars_are_to_scale() -> None:
    """Light, nominal and heavy end where they must, and a limit stands at its share."""
    bar = drawings.bounds_bar(20, 30, 50, 100, "t")
    widths = [float(w) for w in re.findall(r'<rect x="[\d.]+" y="3" width="([\d.]+)"', bar)]
    assert widths == [200, 100, 500]
    limit = drawings.limit_bar(10, 20, 80, 100, "t")
    assert 'points="800,0 800,20"' in limit
    assert "limit" not in drawings.limit_bar(10, 20, None, 100, "t")


@pytest.mark.parametrize(
    ("low", "high", "wanted"),
    [
        (0, 100, [0, 20, 40, 60, 80, 100]),
        (-20, 45, [-20, 0, 20, 40, 60]),
        (5, 5, [4, 4.5, 5, 5.5, 6]),
        (0.001, 0.0034, [0.001, 0.0015, 0.002, 0.0025, 0.003, 0.0035]),
    ],
)
def test_ticks_are_round_and_enclose(low: float, high: float, wanted: list[float]) -> None:
    """A chart's grid stands at round figures around its data."""
    assert drawings.ticks(low, high, 5) == pytest.approx(wanted)


def test_outline_of_points() -> None:
    """The hull of flat points holds the corners only."""
    assert set(drawings.hull([(0, 0), (4, 0), (4, 3), (0, 3), (2, 1), (4, 0)])) == {(0, 0), (4, 0), (4, 3), (0, 3)}
    assert drawings.hull([(1, 1), (3, 1), (1, 1)]) == ((1, 1), (3, 1))


def test_page_parts_are_those_the_commands_use() -> None:
    """The names of parts are a closed list."""
    assert page.PARTS == ("masses", "picks", "loads", "temperatures")


def test_empty_and_odd_results_have_a_page() -> None:
    """Nothing weighed, no assembly, or zero masses: still a page, without a division by nothing."""
    one: list[dict[str, Any]] = [row("A", assembly=None, status="not weighed", section=None, section_text=None)]
    assert "INCOMPLETE" in to_page(make(one, {}))
    assert "Total" in to_page(make([row("Z", each=(0.0, 0.0, 0.0))], {}))
