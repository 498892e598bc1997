"""`takeoff schedule`: the main job, from lists to a workbook, a page, JSON and CSV."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from takeoff.cli import console, interrupts, progress
from takeoff.cli.options import JobOption, Lists, PageOption, QuietOption, ReplaceOption, StrictOption, UnitsOption, with_units
from takeoff.cli.pages import inputs_of, save_text
from takeoff.errors import OutputError


def schedule(
    lists: Lists,
    job: JobOption = None,
    out: Annotated[Path | None, typer.Option(metavar="FILE", help="The workbook to write; else LIST.schedule.xlsx beside it.")] = None,
    page: PageOption = None,
    json: Annotated[str | None, typer.Option(metavar="FILE", help="Write every figure to this file, for programs (- prints it).")] = None,
    csv: Annotated[Path | None, typer.Option(metavar="FILE", help="Write a text table, one line a member.")] = None,
    units: UnitsOption = None,
    against: Annotated[
        Path | None, typer.Option(metavar="OLD.json", help="An earlier run's --json: say what changed, and by how much.")
    ] = None,
    strict: StrictOption = False,
    replace: ReplaceOption = False,
    quiet: QuietOption = False,
) -> None:
    """Weigh member lists and write the weight schedule.

    Example: takeoff schedule list.xlsx --page list.html
    """
    from takeoff import pipeline
    from takeoff.job import find_job
    from takeoff.reports import compare, files, plainpage, records, terminal, workbook

    target = out or lists[0].with_name(lists[0].stem + ".schedule.xlsx")
    to_stream = json == "-"
    named = [target, *([page] if page else []), *([Path(json)] if json and not to_stream else []), *([csv] if csv else [])]
    the_job = find_job(lists, job)
    inputs = [*inputs_of(lists, the_job), *([against] if against else [])]
    # Asked before the work, so that a long list is not weighed for an output that cannot be written.
    readable = [path for path in lists if path.is_file()]
    if len(readable) == len(lists):
        files.check_outputs(named, inputs=inputs, replace=replace)
        if target.suffix.lower() != ".xlsx":
            raise OutputError("is no name for a workbook: no program would open it", file=target, right="a name that ends in .xlsx")
    earlier = compare.read_earlier(against) if against else None
    with progress.shown(quiet, the_job):
        result = pipeline.schedule(lists, with_units(the_job, units), strict=strict)
        changes = compare.compare(result, earlier) if earlier else None
        record = records.to_json(result, changes) if to_stream else ""
        outputs: list[files.Output] = [(target, lambda path: workbook.write_workbook(result, path, changes))]
        if page:
            from takeoff.reports.page import to_page

            outputs.append((page, lambda path: save_text(path, to_page(result, changes=changes))))
        if json and not to_stream:
            outputs.append((Path(json), lambda path: records.write_json(path, result, changes)))
        if csv:
            outputs.append((csv, lambda path: save_text(path, records.to_csv(result))))
        files.write_all(outputs, inputs=inputs, replace=replace, settled=interrupts.settled)
    if to_stream:
        console.out(record)
    say = console.err if to_stream else console.out
    if not quiet and not to_stream:
        say(terminal.summary(result, console.width()))
        if changes is not None:
            changed = plainpage.Page(console.width())
            changes.say(changed, result.job.job.units)
            say("\n" + changed.text())
    if not quiet:
        say("\n".join(f"Written: {path}" for path in named))
    if not result.complete or result.not_loaded:
        raise typer.Exit(3)
