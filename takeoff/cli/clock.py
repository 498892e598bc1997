"""The safety stop of a run: `[guards] seconds` of the job file, by the clock on the wall. Rank 10.

Nothing a run finds depends on it: a run that meets it ends with one message, and nothing written.
"""

from __future__ import annotations

import signal
import threading
from collections.abc import Iterator
from contextlib import contextmanager
from types import FrameType

from takeoff.errors import InputError


class TimeUp(BaseException):
    """The time is over. Not an Exception, so that no handler on the way takes it for something it can mend."""


def message(seconds: float) -> InputError:
    return InputError(
        f"the run took over {seconds:g} s and was stopped; nothing was written",
        right="a smaller list, or a higher [guards] seconds in the job file",
    )


@contextmanager
def within(seconds: float) -> Iterator[None]:
    """Raises InputError where the work inside takes longer. Systems without an alarm have no such stop."""
    if not hasattr(signal, "setitimer") or threading.current_thread() is not threading.main_thread():
        yield
        return

    def stop(_number: int, _frame: FrameType | None) -> None:
        raise TimeUp

    before = signal.getsignal(signal.SIGALRM)
    try:
        try:
            signal.signal(signal.SIGALRM, stop)
            # Again every second: an exception that comes up in a clean-up of the interpreter is lost.
            signal.setitimer(signal.ITIMER_REAL, seconds, 1.0)
            yield
        finally:
            signal.setitimer(signal.ITIMER_REAL, 0)
    except TimeUp:
        signal.setitimer(signal.ITIMER_REAL, 0)
        raise message(seconds) from None
    finally:
        signal.signal(signal.SIGALRM, before)
