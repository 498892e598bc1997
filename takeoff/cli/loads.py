"""`takeoff loads`: what goes on which vehicle, where on the deck, on which axles, held by what."""

from __future__ import annotations

import typer

from takeoff.cli import console, progress
from takeoff.cli.options import (
    JobOption,
    JsonOption,
    OneList,
    PageOption,
    QuietOption,
    ReplaceOption,
    StrictOption,
    UnitsOption,
    with_units,
)
from takeoff.cli.pages import check_page, write_page


def loads(
    member_list: OneList,
    job: JobOption = None,
    page: PageOption = None,
    replace: ReplaceOption = False,
    units: UnitsOption = None,
    strict: StrictOption = False,
    json: JsonOption = False,
    quiet: QuietOption = False,
) -> None:
    """Print the vehicle loads: fewest vehicles, places on the deck, axle loads, lashings, over-size.

    The vehicles stand in the job file, one [[vehicles]] a kind. Example: takeoff loads cutting_list.xlsx --json
    """
    from takeoff import pipeline
    from takeoff.job import find_job
    from takeoff.reports import loadsheet
    from takeoff.transport import CAUTIONS
    from takeoff.transport.vehicles import vehicles_of

    the_job = with_units(find_job([member_list], job), units)
    vehicles_of(the_job)
    check_page(page, [member_list], the_job, replace=replace)
    with progress.shown(quiet, the_job):
        result = pipeline.schedule([member_list], the_job, strict=strict)
    plan = result.loads
    assert plan is not None
    write_page(page, result, [member_list], ("loads",), replace=replace, quiet=quiet)
    if json:
        console.out_json(plan.as_record(CAUTIONS))
    elif not quiet:
        console.out(loadsheet.load_sheet(plan, console.width(), units=the_job.job.units, cautions=CAUTIONS, title=the_job.job.title))
    if plan.not_loaded:
        raise typer.Exit(3)
