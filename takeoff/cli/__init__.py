"""The command line: one file a command, each parses, calls and prints. Rank 10.

Exit status: 0 done; 1 a look-up found nothing sure; 2 wrong usage or unreadable input, nothing written; 3 written, but
some rows were not weighed or a piece is on no vehicle; 4 our own account did not close, nothing written; 130 interrupted
(128 and its number for another signal that asks for the end).
"""

from __future__ import annotations

import gc
import sys

import typer

from takeoff.cli import console, interrupts
from takeoff.cli.check import check
from takeoff.cli.fit import fit
from takeoff.cli.lift import lift
from takeoff.cli.loads import loads
from takeoff.cli.material import material
from takeoff.cli.movement import movement
from takeoff.cli.plainhelp import SHORT, PlainCommand
from takeoff.cli.schedule import schedule
from takeoff.cli.section import section
from takeoff.cli.start import start
from takeoff.cli.weigh import weigh
from takeoff.errors import TakeoffError

app = typer.Typer(
    name="takeoff",
    help="From a member list to a weight schedule: what every piece weighs, between what bounds, and on what source.",
    epilog="Example: takeoff schedule list.xlsx (its options: takeoff schedule --help)",
    no_args_is_help=True, rich_markup_mode=None, pretty_exceptions_enable=False, add_completion=True,
    context_settings={"help_option_names": ["--help", "-h"]},
)
for command in (schedule, check, material, section, weigh, movement, fit, lift, loads, start):
    app.command(cls=PlainCommand, short_help=SHORT[command.__name__])(command)


def _version(wanted: bool) -> None:
    if wanted:
        from takeoff import __version__

        console.out(f"takeoff {__version__}")
        raise typer.Exit


@app.callback()
def options(version: bool = typer.Option(False, "--version", callback=_version, is_eager=True, help="Print the version and stop.")) -> None:
    """From a member list to a weight schedule: what every piece weighs, between what bounds, and on what source."""


def main() -> None:
    """Parse and do one command. Every error we raise on purpose is one message and a status."""
    console.prepare_streams()
    interrupts.listen()
    try:
        try:
            app()
        finally:
            interrupts.settled()
            # The interpreter looks for garbage as it ends, among all that is loaded, for nothing.
            gc.freeze()
    except BaseException as error:  # noqa: BLE001 - an interrupt comes up as whatever a library made of it; all else is raised again
        interrupts.shut()
        asked = interrupts.status()
        if asked is not None:
            # Whatever came up while the interrupt made its way (a library may turn it into an error of its own) is its doing.
            console.silence(sys.stdout)
            console.err("takeoff: interrupted; nothing was left behind")
            sys.exit(asked)
        _end_with(error)


def _end_with(error: BaseException) -> None:
    """What went wrong as one message and a status; an exit passes, and so does what is a fault of ours."""
    if isinstance(error, TakeoffError):
        console.err(f"takeoff: {error}")
        sys.exit(error.status)
    if isinstance(error, BrokenPipeError):
        console.silence(sys.stdout)
        sys.exit(0)
    if isinstance(error, OSError):
        console.silence(sys.stdout)
        where = f"{error.filename}: " if error.filename else ""
        console.err(f"takeoff: {where}{error.strerror or error}")
        sys.exit(2)
    raise error
