"""Progress at the terminal: one line on standard error once a run takes over half a second, gone when it ends.

Silent where standard error is no terminal, or where the terminal cannot go back in a line. No colour, no escape codes.
"""

from __future__ import annotations

import contextlib
import gc
import os
import sys
import threading
import time
from collections.abc import Iterator
from contextlib import contextmanager
from typing import TYPE_CHECKING

from takeoff import progress
from takeoff.cli import clock, console

if TYPE_CHECKING:
    from takeoff.job import Job

#: a run shorter than this says nothing; then the line is renewed at most this often
PATIENCE_S, EVERY_S = 0.5, 0.2


class _Line:
    """The line, written by a thread of its own so that it moves on while one step takes long."""

    def __init__(self) -> None:
        self.what, self.width, self.started = "", 0, time.monotonic()
        self.ended = threading.Event()
        self.thread = threading.Thread(target=self._write, daemon=True)

    def tell(self, what: str) -> None:
        self.what = what

    def _write(self) -> None:
        wait = PATIENCE_S
        while not self.ended.wait(wait):
            wait = EVERY_S
            self._show(f"{self.what} ({time.monotonic() - self.started:.0f} s)" if self.what else "")

    def _show(self, text: str) -> None:
        text = text[: console.width() - 1]
        console.err_line("\r" + text.ljust(self.width) + ("\r" if not text else ""))
        self.width = len(text)

    def close(self) -> None:
        self.ended.set()
        self.thread.join()
        if self.width:
            self._show("")


@contextmanager
def shown(quiet: bool = False, job: Job | None = None) -> Iterator[None]:
    """Show what the work inside tells, where there is a terminal to show it on; stop it at the job's [guards] seconds.

    Work that is worth showing makes garbage too: from here on it is looked for, which the start of the program puts off.
    """
    gc.enable()
    with clock.within(job.guards.seconds) if job else contextlib.nullcontext(), _shown(quiet):
        yield


@contextmanager
def _shown(quiet: bool) -> Iterator[None]:
    try:
        seen = sys.stderr.isatty() and os.environ.get("TERM") != "dumb"
    except (AttributeError, ValueError):
        seen = False
    if quiet or not seen:
        yield
        return
    line = _Line()
    line.thread.start()
    try:
        with progress.listening(line.tell):
            yield
    finally:
        line.close()
