"""The page in a real browser: no error, tables sort and filter, links land, nothing overflows, the keyboard gets everywhere."""

from __future__ import annotations

import subprocess
from collections.abc import Iterator
from itertools import pairwise
from pathlib import Path

import pytest
import whole_job
from browser import Browser, browser
from conftest import need_program
from test_page import hostile_result

from takeoff import pipeline
from takeoff.reports.page import to_page

OVERFLOW = """(() => {
  const wide = document.documentElement.clientWidth;
  const out = [...document.querySelectorAll('body *')].filter(e => {
    if (e.closest('.scroll, .fit, svg, .skip, .said')) return false;
    const box = e.getBoundingClientRect();
    return box.width > 0 && (box.right > wide + 1 || box.left < -1);
  }).map(e => e.tagName + '.' + e.className + '#' + e.id);
  return [document.scrollingElement.scrollWidth - wide, out.slice(0, 5)];
})()"""


@pytest.fixture(scope="module")
def tab(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Browser]:
    with browser(need_program("chromium"), tmp_path_factory.mktemp("profile")) as opened:
        yield opened


@pytest.fixture(scope="module")
def page(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("page")
    path = folder / "list.html"
    path.write_text(to_page(pipeline.schedule([whole_job.write(folder)])), encoding="utf-8")
    return path


@pytest.fixture(autouse=True)
def no_complaint(tab: Browser) -> Iterator[None]:
    """Whatever a test does, the page never complains and never loads anything but itself."""
    tab.errors.clear()
    tab.requests.clear()
    yield
    tab.run("1")
    assert tab.errors == []
    assert all(url.startswith(("file:///", "data:,", "about:")) for url in tab.requests)
    assert len({url.split("#")[0] for url in tab.requests if url.startswith("file:")}) <= 1


@pytest.mark.parametrize("width", [380, 800, 1400])
@pytest.mark.parametrize("dark", [False, True])
def test_nothing_overflows(tab: Browser, page: Path, width: int, dark: bool) -> None:
    """At three widths, light and dark, nothing stands beyond the window but what scrolls in its own box."""
    tab.dark(dark)
    tab.open(page, width=width)
    assert tab.run(OVERFLOW) == [0, []]


def test_hostile_texts_do_nothing(tab: Browser, tmp_path: Path) -> None:
    """A page over hostile texts runs nothing of theirs, complains of nothing and does not overflow."""
    path = tmp_path / "hostile.html"
    path.write_text(to_page(hostile_result()), encoding="utf-8")
    tab.open(path, width=380)
    assert tab.run("document.querySelectorAll('script').length") == 1
    assert tab.run("document.images.length + document.forms.length") == 0
    assert tab.run("document.getElementById('schedule').textContent.includes('<script>alert(1)</script>')")
    assert tab.run(OVERFLOW) == [0, []]


def test_the_policy_really_stops_what_is_foreign(tab: Browser, page: Path) -> None:
    """An inline handler put in afterwards does not run: the policy is in force, not just written there."""
    tab.open(page)
    tab.run(
        "document.body.insertAdjacentHTML('beforeend', '<b id=bait onclick=\"window.caught = 1\">x</b>');"
        "document.getElementById('bait').click()"
    )
    assert tab.run("window.caught === undefined")
    assert any("Content Security Policy" in error for error in tab.errors)
    tab.errors.clear()


def test_columns_sort_both_ways_and_back(tab: Browser, page: Path) -> None:
    """A heading sorts by figure, then the other way, then as in the list; an absent figure stays last; it is said aloud."""
    tab.open(page)
    column = "[...document.querySelectorAll('#schedule tbody tr')].map(r => r.cells[%d].dataset.v ?? null)"
    at = tab.run("[...document.querySelectorAll('#schedule th')].findIndex(h => h.textContent.startsWith('All pieces, heavy'))")
    before = tab.run(column % at)
    button = f"document.querySelectorAll('#schedule th')[{at}].querySelector('button').click()"
    tab.run(button)
    up = tab.run(column % at)
    known = [float(v) for v in up if v is not None]
    assert known == sorted(known)
    assert up.index(None) == len(known)
    assert tab.run(f"document.querySelectorAll('#schedule th')[{at}].getAttribute('aria-sort')") == "ascending"
    assert "ascending" in tab.run("document.querySelector('.said').textContent")
    tab.run(button)
    down = tab.run(column % at)
    assert [float(v) for v in down if v is not None] == known[::-1]
    assert down[-1] is None
    tab.run(button)
    assert tab.run(column % at) == before
    assert tab.run("document.querySelectorAll('#schedule th[aria-sort]').length") == 0


def test_text_columns_sort_as_people_count(tab: Browser, page: Path) -> None:
    """Marks sort by their numbers, blanks last."""
    tab.open(page)
    tab.run("document.querySelectorAll('#schedule th')[1].click()")
    marks = tab.run("[...document.querySelectorAll('#schedule tbody tr')].map(r => r.cells[1].textContent)")
    assert marks == ["B1", "B2", "C1", "C2", "C3", "D1", "D2", "P1", "Q1", "R1", "R2"]


def test_rows_can_be_narrowed_by_text_and_state(tab: Browser, page: Path) -> None:
    """The filter hides what does not fit, says how many rows are left, and that totals are of all."""
    tab.open(page)
    tab.run(
        """(() => { const i = document.querySelector('#schedule input'); i.value = 'uc 152'; i.dispatchEvent(new Event('input')); })()"""
    )
    shown = "[...document.querySelectorAll('#schedule tbody tr')].filter(r => r.offsetParent).map(r => r.cells[1].textContent)"
    assert tab.run(shown) == ["C1", "C2"]
    assert tab.run("document.querySelector('#schedule .count').textContent") == "2 of 11 rows; totals are of all rows"
    tab.run("""(() => { const i = document.querySelector('#schedule input'); i.value = ''; i.dispatchEvent(new Event('input'));
      const s = document.querySelector('#schedule select'); s.value = 'not weighed'; s.dispatchEvent(new Event('change')); })()""")
    assert tab.run(shown) == ["Q1"]


def test_a_finding_leads_to_its_row_even_where_a_filter_hides_it(tab: Browser, page: Path) -> None:
    """A click in the findings panel lands on the row, shows it, and the keyboard goes on from there."""
    tab.open(page)
    tab.run("""(() => { const i = document.querySelector('#schedule input'); i.value = 'zzz'; i.dispatchEvent(new Event('input')); })()""")
    tab.run("document.querySelector('#findings li.refused a').click()")
    tab.wait("document.activeElement.tagName === 'TR'")
    assert tab.run("document.activeElement.cells[1].textContent") == "Q1"
    assert tab.run(
        "(() => { const b = document.activeElement.getBoundingClientRect();"
        "return b.top >= 0 && b.bottom <= innerHeight && b.height > 0; })()"
    )
    # The same link a second time lands again, after one has scrolled away.
    tab.run("scrollTo(0, 0); document.activeElement.blur(); document.querySelector('#findings li.refused a').click()")
    tab.wait("document.activeElement.tagName === 'TR'")


def test_every_link_lands(tab: Browser, page: Path) -> None:
    """Each link of the page leads to an element that can be seen."""
    tab.open(page)
    lost = tab.run("""[...document.querySelectorAll('a')].map(a => a.getAttribute('href')).filter(h => {
      const e = document.getElementById(h.slice(1)); return !e || e.getBoundingClientRect().height === 0; })""")
    assert lost == []


def test_the_keyboard_reaches_the_answer_and_sorts(tab: Browser, page: Path) -> None:
    """The first stop skips to the answer; a sort button works by Enter; every stop shows where it is."""
    tab.open(page)
    tab.key("Tab")
    assert tab.run("document.activeElement.className") == "skip"
    assert tab.run("document.activeElement.getBoundingClientRect().left >= 0")
    tab.run("document.querySelector('#schedule th button').focus()")
    tab.key("Enter")
    assert tab.run("document.querySelector('#schedule th').getAttribute('aria-sort')") == "ascending"
    tab.run("document.querySelector('#schedule .scroll').focus()")
    tab.key("Tab")
    assert tab.run("getComputedStyle(document.activeElement).outlineStyle") == "solid"


def test_a_screen_reader_finds_its_way(tab: Browser, page: Path) -> None:
    """One heading of the first rank, none skipped, landmarks, named tables, fields, buttons, regions and drawings."""
    tab.open(page)
    ranks = tab.run("[...document.querySelectorAll('h1,h2,h3,h4')].map(h => +h.tagName[1])")
    assert ranks.count(1) == 1
    assert all(b - a <= 1 for a, b in pairwise(ranks))
    assert tab.run("document.documentElement.lang") == "en"
    assert tab.run("['header', 'main', 'nav', 'aside', 'footer'].every(t => document.querySelector(t))")
    assert tab.run("[...document.querySelectorAll('table')].every(t => t.caption && t.caption.textContent.trim())")
    assert tab.run("[...document.querySelectorAll('th')].every(t => t.scope === 'col')")
    assert tab.run("[...document.querySelectorAll('input, select')].every(i => i.labels.length)")
    nameless = tab.run("""(() => { const all = [...document.querySelectorAll('button, [role=region], svg')];
      return all.filter(e => !(e.getAttribute('aria-label') || e.textContent).trim()).length; })()""")
    assert nameless == 0


@pytest.mark.parametrize("dark", [False, True])
def test_words_stand_out_enough(tab: Browser, page: Path, dark: bool) -> None:
    """Text has a contrast of 4.5 and more against its ground (WCAG 2.2, 1.4.3), light and dark."""
    tab.dark(dark)
    tab.open(page)
    least = tab.run("""(() => {
      const parse = c => c.match(/[\\d.]+/g).map(Number);
      const light = c => { const [r, g, b] = parse(c).map(v => v / 255).map(v => v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4);
        return 0.2126 * r + 0.7152 * g + 0.0722 * b; };
      const ground = e => { for (; e; e = e.parentElement) {
        const c = parse(getComputedStyle(e).backgroundColor); if (c.length < 4 || c[3] > 0)
        return getComputedStyle(e).backgroundColor; } return 'rgb(255,255,255)'; };
      let least = 99;
      for (const e of document.querySelectorAll('p, td, th, li, dt, dd, h1, h2, h3, caption, figcaption, a, button, summary, .count')) {
        if (!e.textContent.trim() || !e.getBoundingClientRect().height) continue;
        const a = light(getComputedStyle(e).color), b = light(ground(e));
        least = Math.min(least, (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05));
      }
      return least; })()""")
    assert least >= 4.5


def test_it_prints(tab: Browser, page: Path, tmp_path: Path) -> None:
    """On paper: landscape, page numbers, headings of the long table repeated, notes opened, nothing of the screen's tools."""
    pdftotext = need_program("pdftotext")
    tab.open(page)
    tab.print_to(tmp_path / "page.pdf")
    done = subprocess.run([pdftotext, "-layout", str(tmp_path / "page.pdf"), "-"], capture_output=True, text=True, check=True, timeout=60)
    pages = done.stdout.split("\f")[:-1]
    assert f"Page 1 of {len(pages)}" in pages[0]
    assert "an estimate for planning, not a lift plan" in pages[-1]
    assert "Show rows with" not in done.stdout
    assert "On this page" not in done.stdout
    schedule = [text for text in pages if "R1" in text and "Assembly" in text]
    assert schedule
    assert "Material" in schedule[-1]


def test_it_reads_without_script(tab: Browser, page: Path) -> None:
    """Where script is off everything is there, and no tool that would not work is shown."""
    tab.call("Emulation.setScriptExecutionDisabled", value=True)
    try:
        tab.open(page)
    finally:
        tab.call("Emulation.setScriptExecutionDisabled", value=False)
    assert tab.run("document.querySelectorAll('#schedule tbody tr').length") == 11
    assert tab.run("[...document.querySelectorAll('.filter, th button')].every(e => !e.getBoundingClientRect().height)")
