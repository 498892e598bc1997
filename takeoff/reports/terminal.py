"""What the person at the keyboard sees after a run: plain text, no more than it must be. Rank 9.

Fits 80 columns and uses more when there is more; at 40 columns tables turn into lists. Text from a list is shown
literally: no control or direction signs get through.
"""

from __future__ import annotations

import math
import textwrap
from collections.abc import Iterable, Sequence
from itertools import islice
from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.rounding import NO_BREAK, Units
from takeoff.reports.wording import LIKELY_IS_FOR, cells_text, counted, listed, pick_word, refusals, shown

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.lifting.pick import Factor, Pick
    from takeoff.pipeline import Result

_LEAST_WIDTH = 24
_MOST_WIDTH = 120
_FIRST_REFUSED = 10
_FIRST_FINDINGS = 10
_FIRST_CELLS = 8


def summary(result: Result, width: int = 80, units: Units | None = None) -> str:
    """What a run found, as text without a final line feed: read, account, total, heaviest, missing, assumed, cautions."""
    units = units or result.job.job.units
    page = Page(width)
    _title(page, result)
    _what_was_read(page, result)
    _total(page, result, units)
    _heaviest(page, result, units)
    _not_weighed(page, result)
    findings = result.all_findings()
    assumed = [f for f in findings if f.level == "assumed"]
    _findings(page, "Assumed (in the totals)", assumed)
    # What is refused in a row stands above; what is refused about a sheet has no row.
    refused = [f for f in result.findings if f.level == "refused"]
    _findings(page, "Not read", refused)
    notes = [f for f in findings if f.level == "note"]
    _findings(page, "Notes", notes)
    page.heading("Not counted")
    page.say(listed(shown(w) for w in result.totals.not_counted) + ".", indent=2)
    _cautions(page, result.cautions)
    return page.text()


def pick_sheet(
    picks: Sequence[Pick], width: int = 80, *, units: Units = "si", cautions: Iterable[str] = (), title: str | None = None
) -> str:
    """Each pick's weight and how its hook load builds up, as text without a final line feed."""
    page = Page(width)
    if title:
        page.say(shown(title))
    if not picks:
        page.say("No picks: the list names no assembly.")
    for pick in picks:
        _pick(page, pick, units)
    if picks:
        page.blank()
        page.say("Each figure is rounded up by itself, so the lines shown may add up to slightly more than the load shown.")
    _cautions(page, cautions)
    return page.text()


class Page:
    """Lines no wider than the terminal; a blank line stands before each heading."""

    def __init__(self, width: int) -> None:
        self.width = max(_LEAST_WIDTH, min(width, _MOST_WIDTH))
        self.lines: list[str] = []

    def blank(self) -> None:
        if self.lines and self.lines[-1]:
            self.lines.append("")

    def heading(self, text: str) -> None:
        self.blank()
        self.say(text)

    def say(self, text: str, indent: int = 0, hang: int | None = None) -> None:
        """A paragraph; lines after the first stand `hang` columns in (as `indent` unless said)."""
        hang = indent if hang is None else hang
        if self.width < 48:
            indent, hang = min(indent, 2), min(hang, 4)
        self.lines += textwrap.wrap(
            text, self.width, initial_indent=" " * indent, subsequent_indent=" " * hang, break_on_hyphens=False,
        ) or [""]

    def labelled(self, label: str, text: str) -> None:
        """``Read      list.xlsx``, the text hanging under its own start; below the label where there is no room."""
        if self.width < 48:
            self.say(label)
            self.say(text, indent=2)
        else:
            self.say(f"{label:<10}".replace(" ", NO_BREAK) + text, hang=10)

    def table(self, headings: Sequence[str], rows: Sequence[Sequence[str]], indent: int = 2) -> None:
        """First column text, the others figures set right; as a list of pairs where the columns do not fit."""
        columns = list(zip(headings, *rows, strict=True))
        widths = [max(map(len, column)) for column in columns]
        room = self.width - indent - sum(w + 2 for w in widths[1:])
        if room < min(widths[0], 14):
            self.say(headings[0], indent)
            indent += 2
            for name, *figures in rows:
                self.say(name, indent, indent + 2)
                for heading, figure in zip(headings[1:], figures, strict=True):
                    if figure:
                        self.say(f"{heading}: {figure}", indent + 2, indent + 4)
            return
        first = min(widths[0], room)
        for name, *figures in [headings, *rows]:
            *above, last = textwrap.wrap(name, first, break_on_hyphens=False) or [""]
            self.lines += [" " * indent + line for line in above]
            cells = "".join(f"  {figure:>{w}}" for figure, w in zip(figures, widths[1:], strict=True))
            self.lines.append((" " * indent + f"{last:<{first}}" + cells).rstrip())

    def text(self) -> str:
        return rounding.plain_blanks("\n".join(self.lines))


def _title(page: Page, result: Result) -> None:
    job = result.job.job
    parts = [shown(p) for p in (job.reference, f"revision {job.revision}" if job.revision else None, job.date) if p]
    title = shown(job.title) if job.title else "Weight schedule"
    page.say(title + (f" ({', '.join(parts)})" if parts else ""))


def _what_was_read(page: Page, result: Result) -> None:
    for file in result.inputs:
        sheets = f": {counted(len(file.sheets), 'sheet')} ({', '.join(shown(s) for s in file.sheets)})" if file.sheets else ""
        page.labelled("Read", shown(file.file) + sheets)
    if result.job_file:
        page.labelled("Job file", shown(result.job_file))
    account = result.account
    parts = [
        (account.weighed, "weighed"), (account.assumed, "assumed"), (account.not_weighed, "not weighed"),
        (account.heading, "heading"), (account.total, "total"), (account.blank, "blank"), (account.other, "other"),
    ]
    page.labelled(
        "Rows", f"{account.rows} = " + " + ".join(f"{n}{NO_BREAK}{word.replace(' ', NO_BREAK)}" for n, word in parts if n)
    )
    page.labelled("Pieces", _count(result.totals.quantity) + " weighed")


def _count(pieces: float) -> str:
    return rounding.number(pieces, 0, gap=NO_BREAK)


def _total(page: Page, result: Result, units: Units) -> None:
    totals, unit = result.totals, rounding.mass_unit(units)
    page.blank()
    page.table(
        [f"Mass, {unit}", "light", "nominal", "heavy"],
        [["total", *rounding.bounds(totals.mass_kg, units, NO_BREAK)]], indent=0,
    )
    if not result.complete:
        page.say(f"These totals lack {counted(totals.not_weighed, 'row')} not weighed.")
    decimals = rounding.decimals_for(rounding.in_mass_unit(totals.mass_kg.heavy, units))
    low = rounding.mass(totals.likely_kg[0], "down", units, decimals, NO_BREAK)
    high = rounding.mass(totals.likely_kg[1], "up", units, decimals, NO_BREAK)
    page.say(f"Likely between {low} and {high}{NO_BREAK}{unit}: {LIKELY_IS_FOR}.")


def _heaviest(page: Page, result: Result, units: Units) -> None:
    if not result.picks:
        return
    unit = rounding.mass_unit(units)
    kind = {"pick": "picks", "assembly": "assemblies"}[pick_word(result)]
    heaviest = sorted(result.picks, key=lambda p: -p.hook_load_kg)[:3]
    page.blank()
    page.table(
        [f"Heaviest {kind}", f"heavy {unit}", f"hook load {unit}", "hook load"],
        [
            [
                shown(p.name) + (f" (lacks {counted(p.not_weighed, 'row')})" if p.not_weighed else ""),
                rounding.mass(p.mass_kg.heavy, "up", units, gap=NO_BREAK),
                rounding.mass(p.hook_load_kg, "up", units, gap=NO_BREAK),
                rounding.force_with_unit(p.hook_load_kN, "up", units, NO_BREAK),
            ]
            for p in heaviest
        ],
        indent=0,
    )


def _not_weighed(page: Page, result: Result) -> None:
    if result.complete:
        return
    page.heading(f"Not weighed ({counted(result.totals.not_weighed, 'row')}, in no total)")
    first = list(islice(refusals(result, name_file=len(result.inputs) > 1), _FIRST_REFUSED))
    for refusal in first:
        cell = f", cell {shown(refusal.cell)}" if refusal.cell else ""
        read = f" (read: {shown(refusal.read)!r})" if refusal.read else ""
        right = f" Right would be: {shown(refusal.right)}." if refusal.right else ""
        page.say(f"{refusal.place}{cell}: {shown(refusal.reason)}{read}.{right}", indent=2, hang=4)
    more = result.totals.not_weighed - len({refusal.index for refusal in first})
    if more > 0:
        page.say(f"and {counted(more, 'row')} more; the schedule lists every one", indent=2)


def _findings(page: Page, heading: str, findings: Sequence[Finding]) -> None:
    if not findings:
        return
    page.heading(heading)
    for finding in findings[:_FIRST_FINDINGS]:
        times = f"{finding.count} times: " if finding.count > 1 else ""
        read = f" (read: {shown(finding.read)!r})" if finding.read else ""
        cells = cells_text(finding, _FIRST_CELLS)
        place = " ".join(p for p in (f"sheet {shown(finding.sheet)}" if finding.sheet else "", cells) if p)
        page.say(f"{times}{shown(finding.message)}{read}{f'; {place}' if place else ''}", indent=2, hang=4)
    if len(findings) > _FIRST_FINDINGS:
        page.say(f"and {len(findings) - _FIRST_FINDINGS} more; the schedule lists every one", indent=2)


def _cautions(page: Page, cautions: Iterable[str]) -> None:
    cautions = list(cautions)
    if not cautions:
        return
    page.heading("Cautions")
    for caution in cautions:
        page.say("- " + shown(caution), indent=2, hang=4)


def _pick(page: Page, pick: Pick, units: Units) -> None:
    unit = rounding.mass_unit(units)
    decimals = rounding.decimals_for(rounding.in_mass_unit(pick.hook_load_kg, units))
    page.heading(f"Pick {shown(pick.name)}: {counted(pick.pieces, 'piece')}")
    if pick.not_weighed:
        page.say(
            f"INCOMPLETE: lacks {counted(pick.not_weighed, 'row')} not weighed. Every figure below is of the rest only.", 2
        )
    page.table([f"Mass, {unit}", "light", "nominal", "heavy"], [["all pieces", *rounding.bounds(pick.mass_kg, units, NO_BREAK)]])
    lines = [(shown(line.item), line.kg) for line in pick.build_up]
    if lines and math.isclose(math.fsum(kg for _, kg in lines[:-1]), pick.static_hook_load_kg):
        lines.insert(-1, ("= hook load at rest", pick.static_hook_load_kg))
    lines.append(("= hook load", pick.hook_load_kg))
    rows = [[item, rounding.mass(kg, "up", units, decimals, NO_BREAK)] for item, kg in lines]
    page.table(["Build-up", unit], rows)
    for factor in (pick.contingency, pick.dynamic):
        _factor(page, factor)
    at_rest = rounding.mass_with_unit(pick.static_hook_load_kg, "up", units, gap=NO_BREAK)
    moving = rounding.mass_with_unit(pick.hook_load_kg, "up", units, gap=NO_BREAK)
    force = rounding.force_with_unit(pick.hook_load_kN, "up", units, NO_BREAK)
    page.say(f"Hook load at rest {at_rest}; HOOK LOAD {moving} ({force}).", indent=2, hang=4)
    page.say(f"Verdict: {pick.verdict}.", indent=2)
    page.say(f"Not counted: {listed(shown(w) for w in pick.not_counted)}.", indent=2, hang=4)
    for finding in pick.findings:
        page.say(f"{finding.level.capitalize()}: {shown(finding.message)}", indent=2, hang=4)


def _factor(page: Page, factor: Factor) -> None:
    clause = f", {shown(factor.source.clause)}" if factor.source.clause else ""
    page.say(
        f"{shown(factor.name).capitalize()} {factor.value:g}: {shown(factor.why)}; "
        f"{shown(factor.source.title)}{clause} ({factor.source.evidence}).", indent=2, hang=4,
    )
