"""`takeoff schedule`: the main job, from lists to a workbook, JSON and CSV."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from takeoff.cli import console
from takeoff.cli.options import JobOption, Lists, QuietOption, StrictOption, UnitsOption, with_units


def schedule(
    lists: Lists,
    job: JobOption = None,
    out: Annotated[Path | None, typer.Option(help="The workbook to write; else NAME.schedule.xlsx beside the list.")] = None,
    json: Annotated[str | None, typer.Option(help="Write the machine-readable record to this file, or - for standard output.")] = None,
    csv: Annotated[Path | None, typer.Option(help="Write one line a member to this file.")] = None,
    units: UnitsOption = None,
    strict: StrictOption = False,
    replace: Annotated[bool, typer.Option("--replace", help="Replace outputs that exist already.")] = False,
    quiet: QuietOption = False,
) -> None:
    """Weigh member lists and write the weight schedule.

    Example: takeoff schedule cutting_list.xlsx --json cutting_list.json
    """
    from takeoff import pipeline
    from takeoff.job import find_job
    from takeoff.reports import files, records, terminal, workbook

    target = out or lists[0].with_name(lists[0].stem + ".schedule.xlsx")
    to_stream = json == "-"
    named = [target, *([Path(json)] if json and not to_stream else []), *([csv] if csv else [])]
    the_job = find_job(lists, job)
    own = the_job.own.materials
    inputs = [*lists, *([the_job.path] if the_job.path else []), *([the_job.beside(own)] if own else [])]
    # Asked before the work, so that a long list is not weighed for an output that cannot be written.
    readable = [path for path in lists if path.is_file()]
    if len(readable) == len(lists):
        files.check_outputs(named, inputs=inputs, replace=replace)
    result = pipeline.schedule(lists, with_units(the_job, units), strict=strict)
    record = records.to_json(result) if json else ""
    outputs: list[files.Output] = [(target, lambda path: workbook.write_workbook(result, path))]
    if json and not to_stream:
        outputs.append((Path(json), lambda path: _write_text(path, record)))
    if csv:
        outputs.append((csv, lambda path: _write_text(path, records.to_csv(result))))
    files.write_all(outputs, inputs=inputs, replace=replace)
    if to_stream:
        console.out(record)
    say = console.err if to_stream else console.out
    if not quiet and not to_stream:
        say(terminal.summary(result, console.width()))
    if not quiet:
        say("\n".join(f"Written: {path}" for path in named))
    if not result.complete:
        raise typer.Exit(3)


def _write_text(path: Path, text: str) -> None:
    path.write_text(text, encoding="utf-8", newline="")
