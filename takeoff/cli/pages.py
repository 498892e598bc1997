"""Writing a page beside what a command prints: for `lift` and `loads`."""

from __future__ import annotations

from collections.abc import Collection
from pathlib import Path
from typing import TYPE_CHECKING

from takeoff.cli import console

if TYPE_CHECKING:
    from takeoff.job import Job
    from takeoff.pipeline import Result


def inputs_of(lists: list[Path], job: Job) -> list[Path]:
    """Every file a run reads, so that no output takes the place of one."""
    own = [job.beside(name) for name in (job.own.materials, job.own.sections) if name]
    charts = [job.beside(crane.chart) for crane in job.crane if crane.chart]
    return [*lists, *([job.path] if job.path else []), *own, *charts]


def check_page(page: Path | None, lists: list[Path], job: Job, *, replace: bool) -> None:
    """Before the work: whether the page could be written. Raises OutputError."""
    if page is not None:
        from takeoff.reports import files

        files.check_outputs([page], inputs=inputs_of(lists, job), replace=replace)


def write_page(
    page: Path | None, result: Result, lists: list[Path], parts: Collection[str], *, pick: str | None = None, replace: bool, quiet: bool
) -> None:
    """Write these parts of the result as a page, and say where; nothing without a page to write."""
    if page is None:
        return
    from takeoff.reports import files
    from takeoff.reports.page import to_page

    text = to_page(result, parts=parts, pick=pick)
    files.write_all([(page, lambda path: save_text(path, text))], inputs=inputs_of(lists, result.job), replace=replace)
    if not quiet:
        console.err(f"Written: {page}")


def save_text(path: Path, text: str) -> None:
    path.write_text(text, encoding="utf-8", newline="")
