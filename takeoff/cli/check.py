"""`takeoff check`: how each sheet, heading, unit, section and material would be read, and what would be refused."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from takeoff.cli import console, interrupts, progress
from takeoff.cli.options import JobOption, JsonOption, Lists, QuietOption, StrictOption, UnitsOption, with_units

if TYPE_CHECKING:
    from takeoff.jobwriter import JobLine


def check(
    lists: Lists, job: JobOption = None, json: JsonOption = False, units: UnitsOption = None, strict: StrictOption = False,
    write_job: Annotated[bool, typer.Option("--write-job", help="Add the lines that would settle this to the job file.")] = False,
    quiet: QuietOption = False,
) -> None:
    """Show how a list would be read, and what would be refused; write nothing unless asked.

    Example: takeoff check cutting_list.xlsx
    """
    from takeoff import pipeline
    from takeoff.job import find_job
    from takeoff.reports import checking

    the_job = with_units(find_job(lists, job), units)
    with progress.shown(quiet, the_job):
        reading = pipeline.read(lists, the_job, strict=strict)
        result = pipeline.weigh_reading(reading)
    record = checking.check_record(reading, result)
    if json:
        console.out_json(record)
    elif not quiet:
        console.out(checking.check_text(record, console.width()))
    if write_job:
        target = the_job.path or job or lists[0].with_name("job.toml")
        _write(target, checking.job_lines(result.all_findings()), quiet or json)
    if not result.complete:
        raise typer.Exit(3)


def _write(target: Path, lines: list[JobLine], quiet: bool) -> None:
    """Add the lines to the job file; its own keys and comments stay as they are."""
    from takeoff.jobwriter import with_lines
    from takeoff.reports.files import write_all

    existing = target.read_text(encoding="utf-8-sig") if target.is_file() else ""
    text, kept = with_lines(existing, lines)
    write_all([(target, lambda path: _save(path, text))], replace=True, settled=interrupts.settled)
    if not quiet:
        already = f" ({', '.join(kept)} stood there and were kept)" if kept else ""
        console.out(f"Written: {target}, {len(lines) - len(kept)} lines added{already}. Look them over before relying on them.")


def _save(path: Path, text: str) -> None:
    path.write_text(text, encoding="utf-8", newline="")
