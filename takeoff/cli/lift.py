"""`takeoff lift`: what each pick weighs and what hangs on the hook."""

from __future__ import annotations

import typer

from takeoff.cli import console
from takeoff.cli.options import JobOption, JsonOption, OneList, PageOption, QuietOption, ReplaceOption, StrictOption, UnitsOption
from takeoff.cli.pages import weighed_for_page, write_page
from takeoff.errors import InputError


def lift(
    member_list: OneList,
    job: JobOption = None,
    pick: str | None = typer.Option(None, metavar="NAME", help="This pick only."),
    page: PageOption = None,
    replace: ReplaceOption = False,
    units: UnitsOption = None,
    strict: StrictOption = False,
    json: JsonOption = False,
    quiet: QuietOption = False,
) -> None:
    """Print the pick sheet: each pick's mass and its hook load, line by line.

    Example: takeoff lift cutting_list.xlsx --pick MS1
    """
    from takeoff.lifting.hook import CAUTIONS
    from takeoff.reports import terminal

    result = weighed_for_page(member_list, job, page, units=units, replace=replace, strict=strict, quiet=quiet)
    asked = result.job.job
    picks = [p for p in result.picks if pick is None or p.name == pick]
    if not picks:
        names = ", ".join(p.name for p in result.picks)
        raise InputError(
            "there is no such pick" if pick else "the list names no assembly and no pick", file=member_list, read=pick,
            right=f"one of {names}" if names else "a column Assembly or Pick",
        )
    write_page(page, result, [member_list], ("picks",), pick=pick, replace=replace, quiet=quiet)
    if json:
        console.out_json({"picks": [p.as_record() for p in picks], "cautions": list(CAUTIONS)})
    elif not quiet:
        console.out(terminal.pick_sheet(picks, console.width(), units=asked.units, cautions=CAUTIONS, title=asked.title))
    if any(p.not_weighed for p in picks) or (strict and any(p.verdict != "within" for p in picks)):
        raise typer.Exit(3)
