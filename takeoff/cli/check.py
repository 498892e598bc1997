"""`takeoff check`: how each sheet, heading, unit, section and material would be read, and what would be refused."""

from __future__ import annotations

import typer

from takeoff.cli import console
from takeoff.cli.options import JobOption, JsonOption, Lists, QuietOption, StrictOption, UnitsOption, with_units


def check(
    lists: Lists, job: JobOption = None, json: JsonOption = False, units: UnitsOption = None, strict: StrictOption = False,
    quiet: QuietOption = False,
) -> None:
    """Show how a list would be read, and what would be refused; write nothing.

    Example: takeoff check cutting_list.xlsx
    """
    from takeoff import pipeline
    from takeoff.job import find_job
    from takeoff.reports import checking

    the_job = with_units(find_job(lists, job), units)
    reading = pipeline.read(lists, the_job, strict=strict)
    result = pipeline.weigh_reading(reading)
    record = checking.check_record(reading, result)
    if json:
        console.out_json(record)
    elif not quiet:
        console.out(checking.check_text(record, console.width()))
    if not result.complete:
        raise typer.Exit(3)
