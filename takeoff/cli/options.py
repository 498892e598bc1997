"""Arguments and options that several commands share."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Literal

import typer

if TYPE_CHECKING:
    from takeoff.job import Job

Units = Literal["si", "us"]

# readable=False: that a file cannot be read is said by who reads it, in the same words as every other fault of a file.
Lists = Annotated[
    list[Path], typer.Argument(metavar="LIST", readable=False, help="Member lists: workbooks (.xlsx, .ods ...) or text tables (.csv ...).")
]
OneList = Annotated[
    Path, typer.Argument(metavar="LIST", readable=False, help="A member list: a workbook (.xlsx, .ods ...) or a text table (.csv ...).")
]
JobOption = Annotated[
    Path | None, typer.Option(metavar="FILE", readable=False, help="The job file; else the job.toml beside the list, if there is one.")
]
UnitsOption = Annotated[
    Units | None, typer.Option(metavar="si|us", help="Units for print: kg and mm, or lb, inches and feet. JSON is always SI.")
]
QuietOption = Annotated[bool, typer.Option("--quiet", help="Print no report and no progress; errors still.")]
StrictOption = Annotated[bool, typer.Option("--strict", help="Refuse similar names instead of assuming them.")]
JsonOption = Annotated[bool, typer.Option("--json", help="Print JSON alone, SI units.")]
PageOption = Annotated[Path | None, typer.Option(metavar="FILE", help="Write the page to this file: one .html that opens in any browser.")]
ReplaceOption = Annotated[bool, typer.Option("--replace", help="Replace outputs that exist already.")]
MaterialOption = Annotated[
    str | None, typer.Option(metavar="MATERIAL", help="The material; else carbon steel, where the section is of a steel standard.")
]


def with_units(job: Job, units: Units | None) -> Job:
    """The job with the print units an option asks for."""
    if units is None:
        return job
    return job.model_copy(update={"job": job.job.model_copy(update={"units": units})})
