"""Ctrl-C and the signals that ask a program to end: the run ends with one line and leaves nothing. Rank 10.

Until the outputs take their places a run can be given up at any moment; from then on it is done, and says so.
"""

from __future__ import annotations

import contextlib
import signal
import sys
import threading
import time
from types import FrameType

#: what asks for the end, where the system has it: Ctrl-C, kill, a terminal that is closed
_ASKING = [getattr(signal, name) for name in ("SIGINT", "SIGTERM", "SIGHUP") if hasattr(signal, name)]
#: a second Ctrl-C within this time comes from a hasty finger, and would only disturb the tidying up after the first
_HASTE_S = 2.0
#: while a module is being loaded the end is asked for again after so long
_AGAIN_S = 0.02
#: signals that came while a module was being loaded, and wait
_waiting: list[int] = []
#: (signal, when) of every time the end was asked for
_asked: list[tuple[int, float]] = []


class Interrupted(BaseException):
    """The end was asked for. Not KeyboardInterrupt, which the command library would turn into another status."""


def _loading(frame: FrameType | None) -> bool:
    """Whether a module is being loaded: an exception there may be lost, or end a library's own code in a noisy way."""
    while frame is not None:
        if frame.f_code.co_filename.startswith("<frozen importlib"):
            return True
        frame = frame.f_back
    return False


def _stop(number: int, frame: FrameType | None) -> None:
    if _loading(frame):
        _waiting.append(number)
        again = threading.Timer(_AGAIN_S, signal.raise_signal, (number,))
        again.daemon = True
        again.start()
        return
    now = time.monotonic()
    hasty = bool(_asked) and now - _asked[-1][1] < _HASTE_S
    # The status names what asked first.
    _asked.append((_waiting[0] if _waiting else number, now))
    # Where the exception comes up in a clean-up of the interpreter it is lost, and printed; `settled` raises it again.
    sys.unraisablehook = lambda _: None
    if not hasty:
        raise Interrupted


def listen() -> None:
    """End the run in order from now on. A signal that whoever started us has shut off stays so, but for Ctrl-C."""
    for number in _ASKING:
        if number == signal.SIGINT or signal.getsignal(number) is not signal.SIG_IGN:
            signal.signal(number, _stop)


def shut() -> None:
    """Listen no more, to the clock neither: Ctrl-C does nothing from now on, another signal ends the program as it stands."""
    if signal.getsignal(signal.SIGINT) is not _stop:
        return
    with contextlib.suppress(AttributeError):
        signal.setitimer(signal.ITIMER_REAL, 0)
    for number in _ASKING:
        if signal.getsignal(number) is _stop:
            signal.signal(number, signal.SIG_IGN if number == signal.SIGINT else signal.SIG_DFL)


def settled() -> None:
    """The run has nothing left to do but to put its outputs in place and print: it will not be given up any more.

    Raises Interrupted where that was asked for, and the exception was lost on its way.
    """
    shut()
    if _asked:
        raise Interrupted


def status() -> int | None:
    """The exit status of a run whose end was asked for: 128 and the signal's number; None where nobody asked."""
    return 128 + _asked[0][0] if _asked else None
