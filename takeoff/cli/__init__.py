"""The command line: one file a command, each parses, calls and prints. Rank 10.

Exit status: 0 done; 1 a look-up found nothing sure; 2 wrong usage or unreadable input, nothing written; 3 written, but
some rows were not weighed or a piece is on no vehicle; 4 our own account did not close, nothing written; 130 interrupted.
"""

from __future__ import annotations

import gc
import signal
import sys
from types import FrameType

import typer

from takeoff.cli import console
from takeoff.cli.check import check
from takeoff.cli.fit import fit
from takeoff.cli.lift import lift
from takeoff.cli.loads import loads
from takeoff.cli.material import material
from takeoff.cli.movement import movement
from takeoff.cli.schedule import schedule
from takeoff.cli.section import section
from takeoff.cli.start import start
from takeoff.cli.weigh import weigh
from takeoff.errors import TakeoffError

app = typer.Typer(
    name="takeoff",
    help="From a member list to a weight schedule: what every piece weighs, between what bounds, and on what source.",
    no_args_is_help=True, rich_markup_mode=None, pretty_exceptions_enable=False, add_completion=True,
    context_settings={"help_option_names": ["--help", "-h"]},
)
for command in (schedule, check, material, section, weigh, movement, fit, lift, loads, start):
    app.command()(command)


class Interrupted(BaseException):
    """Ctrl-C. Not KeyboardInterrupt, which the command library would turn into another status."""


def _version(wanted: bool) -> None:
    if wanted:
        from takeoff import __version__

        console.out(f"takeoff {__version__}")
        raise typer.Exit


@app.callback()
def options(version: bool = typer.Option(False, "--version", callback=_version, is_eager=True, help="Print the version and stop.")) -> None:
    """From a member list to a weight schedule: what every piece weighs, between what bounds, and on what source."""


def _interrupt(_number: int, _frame: FrameType | None) -> None:
    raise Interrupted


def main() -> None:
    """The console command. Every error we raise on purpose is one message and a status."""
    console.prepare_streams()
    signal.signal(signal.SIGINT, _interrupt)
    try:
        try:
            app()
        finally:
            # The interpreter looks for garbage as it ends, among all that is loaded: part of a look-up's time, for nothing.
            gc.freeze()
    except TakeoffError as error:
        console.err(f"takeoff: {error}")
        sys.exit(error.status)
    except Interrupted:
        console.err("takeoff: interrupted; nothing was left behind")
        sys.exit(130)
    except BrokenPipeError:
        console.silence(sys.stdout)
        sys.exit(0)
    except OSError as error:
        console.silence(sys.stdout)
        console.err(f"takeoff: {error.strerror or error}")
        sys.exit(2)
