"""What goes to the terminal, and how: the only printing in the project. No stream, however odd, gives a traceback."""

from __future__ import annotations

import contextlib
import json
import os
import shutil
import sys
from typing import Any, TextIO


def prepare_streams() -> None:
    """A stream that is not UTF-8 shows what it can and replaces the rest, rather than failing."""
    for stream in (sys.stdout, sys.stderr):
        with contextlib.suppress(AttributeError, ValueError, OSError):
            stream.reconfigure(errors="replace")  # type: ignore[union-attr]


def width() -> int:
    """The terminal's width, at least 40; 100 where it is no terminal."""
    return max(40, shutil.get_terminal_size((100, 24)).columns)


def out(text: str) -> None:
    """To standard output, flushed, so that a closed or full stream is met here."""
    print(text, flush=True)


def out_json(value: Any) -> None:
    """A record as JSON alone, UTF-8, readable and stable."""
    out(json.dumps(value, ensure_ascii=False, indent=1, allow_nan=False))


def err(text: str) -> None:
    """To standard error; where even that is closed there is nobody to tell."""
    with contextlib.suppress(OSError, ValueError):
        print(text, file=sys.stderr, flush=True)


def err_line(text: str) -> None:
    """To standard error as it stands, without a line feed: for a line that is renewed in place."""
    with contextlib.suppress(OSError, ValueError):
        print(text, end="", file=sys.stderr, flush=True)


def silence(stream: TextIO) -> None:
    """Point a broken stream at nothing, so that the interpreter's own flush at exit stays quiet."""
    with contextlib.suppress(OSError, ValueError, AttributeError):
        os.dup2(os.open(os.devnull, os.O_WRONLY), stream.fileno())
