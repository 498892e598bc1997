"""`takeoff start`: an empty member list, a commented job file and a short how-to, ready to fill in."""

from __future__ import annotations

import contextlib
from pathlib import Path
from typing import Annotated

import typer

from takeoff.cli import console, interrupts
from takeoff.cli.options import QuietOption, UnitsOption
from takeoff.errors import OutputError


def start(
    folder: Annotated[Path, typer.Argument(metavar="FOLDER", help="Where to put them; made where it is not there yet.")],
    units: UnitsOption = None,
    quiet: QuietOption = False,
) -> None:
    """Write an empty member list with drop-downs, a commented job.toml and instructions. Nothing that exists is replaced.

    Example: takeoff start footbridge
    """
    from takeoff.reports import files, starter

    made = not folder.exists()
    if made:
        try:
            folder.mkdir()
        except OSError as error:
            raise OutputError(f"cannot be made ({error.strerror or error})", file=folder, right="a folder in one that exists") from error
    elif not folder.is_dir():
        raise OutputError("is a file", file=folder, right="the name of a folder")
    try:
        outputs = starter.outputs(folder, units or "si")
        for path, _ in outputs:
            if Path(path).exists():
                raise OutputError("exists already and is kept; nothing was written", file=path, right="a new folder, or one without it")
        written = files.write_all(outputs, settled=interrupts.settled)
    except BaseException:
        if made:
            with contextlib.suppress(OSError):
                folder.rmdir()
        raise
    if not quiet:
        console.out("\n".join(f"Written: {folder / path.name}" for path in written))
        console.out(f"Next: fill in member_list.xlsx, then takeoff schedule {folder / 'member_list.xlsx'}")
