"""Where the command starts: Ctrl-C is answered before anything else is loaded. Rank 11, above all rooms.

Loading the command line takes a tenth of a second; an interrupt in that time is one line and status 130 too, not the
interpreter's own answer. `python -m takeoff` starts here as well.
"""

from __future__ import annotations

import gc
import os
import signal
import sys
from types import FrameType


def _at_once(number: int, _frame: FrameType | None) -> None:
    # Nothing has been opened or started yet, so there is nothing to put in order; an exception could be lost in a half-loaded module.
    if sys.stderr is not None:
        os.write(2, b"takeoff: interrupted; nothing was left behind\n")
    os._exit(128 + number)


def main() -> None:
    """The console command."""
    signal.signal(signal.SIGINT, _at_once)
    if signal.getsignal(signal.SIGTERM) is signal.SIG_DFL:
        signal.signal(signal.SIGTERM, _at_once)
    # A look-up makes little garbage, and what it loads stays: searching that takes a tenth of its time. `cli/progress.py` searches again.
    gc.disable()
    from takeoff.cli import main as command

    command()


if __name__ == "__main__":
    main()
