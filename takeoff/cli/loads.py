"""`takeoff loads`: what goes on which vehicle, where on the deck, on which axles, held by what."""

from __future__ import annotations

import typer

from takeoff.cli import console
from takeoff.cli.options import JobOption, JsonOption, OneList, PageOption, QuietOption, ReplaceOption, StrictOption, UnitsOption
from takeoff.cli.pages import weighed_for_page, write_page


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

    The vehicles stand in the job file, one [[vehicles]] a kind.

    Example: takeoff loads cutting_list.xlsx --page loads.html
    """
    from takeoff.reports import loadsheet
    from takeoff.transport import CAUTIONS
    from takeoff.transport.vehicles import vehicles_of

    result = weighed_for_page(
        member_list, job, page, units=units, replace=replace, strict=strict, quiet=quiet, needs=vehicles_of
    )
    plan, asked = result.loads, result.job.job
    assert plan is not None
    write_page(page, result, [member_list], ("loads",), replace=replace, quiet=quiet)
    if json:
        console.out_json(plan.as_record(CAUTIONS))
    elif not quiet:
        console.out(loadsheet.load_sheet(plan, console.width(), units=asked.units, cautions=CAUTIONS, title=asked.title))
    if plan.not_loaded:
        raise typer.Exit(3)
