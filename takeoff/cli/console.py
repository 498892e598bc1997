"""What goes to the terminal, and how: the only printing in the project. No stream, however odd, gives a traceback."""

from __future__ import annotations

import contextlib
import json
import os
import re
import shutil
import sys
from typing import Any, TextIO

#: all that acts on a terminal or is not seen at all, but the line feed; half a surrogate pair has no bytes
_ACTING = re.compile("[\x00-\x09\x0b-\x1f\x7f-\x9f\u00ad\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb\ud800-\udfff]")


def prepare_streams() -> None:
    """A stream that is not UTF-8 shows what it can and replaces the rest, rather than failing."""
    for stream in (sys.stdout, sys.stderr):
        with contextlib.suppress(AttributeError, ValueError, OSError):
            stream.reconfigure(errors="replace")  # type: ignore[union-attr]


def width() -> int:
    """The terminal's width, at least 40; 100 where it is no terminal."""
    return max(40, shutil.get_terminal_size((100, 24)).columns)


def plain(text: str) -> str:
    """Text that acts on no terminal: control, direction and zero-width signs stand as ``\\x1b`` and the like."""
    return _ACTING.sub(lambda found: ascii(found.group())[1:-1], text)


def out(text: str) -> None:
    """To standard output, flushed, so that a closed or full stream is met here."""
    print(plain(text), flush=True)


def out_json(value: Any) -> None:
    """A record as JSON alone, UTF-8, readable and stable; signs that act on a terminal are escaped as JSON has it."""
    text = json.dumps(value, ensure_ascii=False, indent=1, allow_nan=False)
    print(_ACTING.sub(lambda found: f"\\u{ord(found.group()):04x}", text), flush=True)


def err(text: str) -> None:
    """To standard error; where even that is closed there is nobody to tell."""
    with contextlib.suppress(OSError, ValueError):
        print(plain(text), file=sys.stderr, flush=True)


def err_line(text: str) -> None:
    """To standard error as it stands, without a line feed: for a line that is renewed in place."""
    with contextlib.suppress(OSError, ValueError):
        print(text, end="", file=sys.stderr, flush=True)


def silence(stream: TextIO) -> None:
    """Point a broken stream at nothing, so that the interpreter's own flush at exit stays quiet."""
    with contextlib.suppress(OSError, ValueError, AttributeError):
        os.dup2(os.open(os.devnull, os.O_WRONLY), stream.fileno())
