"""What the person at the keyboard sees after a run: plain text, no more than it must be. Rank 9.

Fits 80 columns and uses more when there is more; at 40 columns tables turn into lists. Text from a list is shown
literally: no control or direction signs get through.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from itertools import islice
from typing import TYPE_CHECKING

from takeoff.reports import added, loadsheet, picksheet, rounding
from takeoff.reports.plainpage import Page
from takeoff.reports.rounding import NO_BREAK, Units
from takeoff.reports.wording import LIKELY_IS_FOR, cells_text, counted, listed, pick_word, refusals, shown

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.lifting.factors import Factor
    from takeoff.lifting.pick import Pick
    from takeoff.pipeline import Result

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
    if result.loads is not None:
        loadsheet.say_short(page, result.loads, units)
    _not_weighed(page, result)
    if result.temperatures is not None:
        from takeoff.reports.thermal import schedule_part

        schedule_part(page, result, units)
    findings = result.all_findings()
    assumed = [f for f in findings if f.level == "assumed"]
    _findings(page, "Assumed (in the totals)", assumed)
    # What is refused in a row stands above; what is refused about a sheet has no row.
    refused = [f for f in result.findings if f.level == "refused"]
    _findings(page, "Not read", refused)
    notes = [f for f in findings if f.level == "note"]
    _findings(page, "Notes", notes)
    page.heading("Not counted")
    page.say(added.not_counted(result) + ".", indent=2)
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
    parts = {"bare pieces": totals.bare_kg} if totals.additions else {}
    parts |= {added.called(kind): mass for kind, mass in totals.additions.items()}
    page.table(
        [f"Mass, {unit}", "light", "nominal", "heavy"],
        [[name, *rounding.bounds(mass, units, NO_BREAK)] for name, mass in {**parts, "total": totals.mass_kg}.items()], indent=0,
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
    for factor in pick.factors:
        _factor(page, factor)
    at_rest = rounding.mass_with_unit(pick.static_hook_load_kg, "up", units, gap=NO_BREAK)
    moving = rounding.mass_with_unit(pick.hook_load_kg, "up", units, gap=NO_BREAK)
    force = rounding.force_with_unit(pick.hook_load_kN, "up", units, NO_BREAK)
    page.say(f"Hook load at rest {at_rest}; HOOK LOAD {moving} ({force}).", indent=2, hang=4)
    picksheet.say(page, pick, units)
    page.say(f"Verdict: {picksheet.verdict(pick)}.", indent=2)
    page.say(f"Not counted: {listed(shown(w) for w in pick.not_counted)}.", indent=2, hang=4)
    for finding in pick.findings:
        read = f" (read: {shown(finding.read)})" if finding.read else ""
        right = f" Right would be: {shown(finding.right)}." if finding.right else ""
        page.say(f"{finding.level.capitalize()}: {shown(finding.message)}{read}.{right}", indent=2, hang=4)


def _factor(page: Page, factor: Factor) -> None:
    clause = f", {shown(factor.source.clause)}" if factor.source.clause else ""
    page.say(
        f"{shown(factor.name).capitalize()} {factor.value:g}: {shown(factor.why)}; "
        f"{shown(factor.source.title)}{clause} ({factor.source.evidence}).", indent=2, hang=4,
    )
