"""The page: the same schedule as one file that opens in any browser, loads nothing, and prints. Rank 9.

What it says is gathered here and in the modules of its parts; `render` makes it markup, and says what keeps it safe. `single` is
the page of one `takeoff movement`, without a list.
"""

from __future__ import annotations

from collections.abc import Collection
from typing import TYPE_CHECKING, Any

from takeoff.reports import added, rounding
from takeoff.reports.page import lifts, loads, masses, movements, sources
from takeoff.reports.page.render import render
from takeoff.reports.rounding import NO_BREAK, Units
from takeoff.reports.wording import LIKELY_IS_FOR, counted, shown

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.reports.compare import Comparison

#: what a page may hold; `lift` and `loads` write theirs with one of them
PARTS = ("masses", "picks", "loads", "temperatures")


def to_page(result: Result, *, parts: Collection[str] = PARTS, pick: str | None = None, changes: Comparison | None = None) -> str:
    """The page as HTML text, in the units of the result's job.

    parts : which of `PARTS` it holds; cautions, what is not counted and the inputs are always there. pick : this pick only.
    changes : against an earlier run, to be shown with it.
    """
    job, units = result.job.job, result.job.job.units
    rows = masses.shown_rows(result)
    picks = [p for p in result.picks if pick is None or p.name == pick]
    whole = "masses" in parts
    view: dict[str, Any] = {
        "title": shown(job.title) if job.title else "Weight schedule",
        "kind": "weight schedule",
        "about": [
            (label, shown(value))
            for label, value in (
                ("Reference", job.reference),
                ("Revision", job.revision),
                ("Date", job.date),
                ("Prepared by", job.prepared_by),
                ("Checked by", job.checked_by),
                ("Approved by", job.approved_by),
            )
            if value
        ],
        "lists": "; ".join(shown(i.file) + (f" ({', '.join(shown(s) for s in i.sheets)})" if i.sheets else "") for i in result.inputs),
        "job_file": shown(result.job_file) if result.job_file else "",
        "units": units,
        "mass_unit": rounding.mass_unit(units),
        "complete": result.complete,
        "lacking": counted(result.totals.not_weighed, "row"),
        "totals": masses.totals_table(result, units) if whole else None,
        "heaviest": _heaviest(result, units) if whole else "",
        "likely": masses.likely(result, units),
        "likely_is_for": LIKELY_IS_FOR,
        "rows": _rows(result),
        "account": result.account.as_record(),
        "not_counted": added.not_counted(result),
        "cautions": [shown(c) for c in _cautions(result, parts)],
        "groups": [t for key in _group_keys(result) if (t := masses.groups_table(result, key, units)) is not None] if whole else [],
        "changes": changes.table(units) if changes is not None else None,
        "changes_said": [changes.sentence(units), *changes.notes(units)] if changes is not None else [],
        "findings": masses.findings(result, rows) if whole else [],
        "picks": lifts.picks_table(result, units, picks) if "picks" in parts and picks else None,
        "pick_blocks": lifts.blocks(result, units, picks) if "picks" in parts else [],
        "load_blocks": loads.blocks(result, units) if "loads" in parts else [],
        "load_words": loads.words(result, units) if "loads" in parts else [],
        "not_loaded": loads.not_loaded_table(result, units) if "loads" in parts else None,
        "run_blocks": movements.blocks(result, units) if "temperatures" in parts else [],
        "growth": movements.materials_table(result, units) if "temperatures" in parts else None,
        "growth_chart": movements.growth_chart(result, units) if "temperatures" in parts else None,
        "lengths": movements.lengths_table(result, units, rows) if "temperatures" in parts else None,
        "schedule": masses.schedule_table(result, units, rows) if whole else None,
        "missing": masses.not_weighed_table(result, rows) if whole and not result.complete else None,
        "sources": sources.tables(result) if whole else [sources.inputs(result)],
    }
    return render("page.html", view)


def _group_keys(result: Result) -> list[str]:
    named = [key for key in ("pick", "phase") if result.members[key].notna().any()]
    return ["material", "assembly", *named]


def _rows(result: Result) -> str:
    """How many pieces, and in rows of which state."""
    account, pieces = result.account, rounding.number(result.totals.quantity, 0, gap=NO_BREAK)
    return (
        f"{pieces} {'piece' if result.totals.quantity == 1 else 'pieces'} weighed: {counted(account.weighed, 'row')} as they stand, "
        f"{counted(account.assumed, 'row')} assumed. {counted(account.not_weighed, 'row')} not weighed."
    )


def _heaviest(result: Result, units: Units) -> str:
    """The heaviest pick in one sentence."""
    if not result.picks:
        return ""
    pick = max(result.picks, key=lambda p: p.hook_load_kg)
    lacks = f", INCOMPLETE: lacks {counted(pick.not_weighed, 'row')}" if pick.not_weighed else ""
    hook = rounding.mass_with_unit(pick.hook_load_kg, "up", units, gap=NO_BREAK)
    return f"{shown(pick.name)}: hook load {hook} ({rounding.force_with_unit(pick.hook_load_kN, 'up', units, NO_BREAK)}){lacks}"


def _cautions(result: Result, parts: Collection[str]) -> list[str]:
    from takeoff.lifting.hook import CAUTIONS

    return list(dict.fromkeys([*result.cautions, *(CAUTIONS[1:] if "picks" in parts and result.picks else ())]))
