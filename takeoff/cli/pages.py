"""Writing a page beside what a command prints: for `lift`, `loads` and `movement`."""

from __future__ import annotations

from collections.abc import Callable, Collection
from pathlib import Path
from typing import TYPE_CHECKING

from takeoff.cli import console, interrupts, progress
from takeoff.cli.options import Units, with_units

if TYPE_CHECKING:
    from takeoff.job import Job
    from takeoff.pipeline import Result


def inputs_of(lists: list[Path], job: Job) -> list[Path]:
    """Every file a run reads, so that no output takes the place of one."""
    own = [job.beside(name) for name in (job.own.materials, job.own.sections) if name]
    charts = [job.beside(crane.chart) for crane in job.crane if crane.chart]
    return [*lists, *([job.path] if job.path else []), *own, *charts]


def weighed_for_page(
    member_list: Path, job: Path | None, page: Path | None, *, units: Units | None, replace: bool, strict: bool, quiet: bool,
    needs: Callable[[Job], object] | None = None,
) -> Result:
    """The list weighed by its job file. First it is asked whether the page could be written, and whether the job has what it `needs`.

    Raises OutputError where the page cannot be written, and what `needs` raises.
    """
    from takeoff import pipeline
    from takeoff.job import find_job

    the_job = with_units(find_job([member_list], job), units)
    if needs is not None:
        needs(the_job)
    check_output(page, inputs_of([member_list], the_job), replace=replace)
    with progress.shown(quiet, the_job):
        return pipeline.schedule([member_list], the_job, strict=strict)


def write_page(
    page: Path | None, result: Result, lists: list[Path], parts: Collection[str], *, pick: str | None = None, replace: bool, quiet: bool
) -> None:
    """Write these parts of the result as a page, and say where; nothing without a page to write."""
    if page is not None:
        from takeoff.reports.page import to_page

        write_text(page, to_page(result, parts=parts, pick=pick), inputs_of(lists, result.job), replace=replace, quiet=quiet)


def check_output(page: Path | None, inputs: list[Path], *, replace: bool) -> None:
    """Before the work: whether the page could be written. Raises OutputError."""
    if page is not None:
        from takeoff.reports import files

        files.check_outputs([page], inputs=inputs, replace=replace)


def write_text(page: Path, text: str, inputs: list[Path], *, replace: bool, quiet: bool) -> None:
    """Write a page whole, and say where on standard error, since what a command prints may be JSON."""
    from takeoff.reports import files

    files.write_all([(page, lambda path: save_text(path, text))], inputs=inputs, replace=replace, settled=interrupts.settled)
    if not quiet:
        console.err(f"Written: {page}")


def save_text(path: Path, text: str) -> None:
    path.write_text(text, encoding="utf-8", newline="")
