"""Progress at the terminal: only where one is there to see it, only on what takes long, and gone afterwards."""

from __future__ import annotations

import gc
import os
import pty
import select
import subprocess
import sys
import time
from pathlib import Path

import pytest

from takeoff import progress
from takeoff.cli import progress as line

PROGRAM = """
import sys, time
from takeoff import progress
from takeoff.cli import progress as line
from takeoff.job import Job
with line.shown({quiet}, Job()):
    progress.tell("12 000 rows read")
    time.sleep({seconds})
"""


def at_a_terminal(seconds: float, *, quiet: bool = False, term: str = "xterm", code: str | None = None) -> str:
    """What a program writes to standard error where that is a terminal."""
    ours, theirs = pty.openpty()
    text = code or PROGRAM.format(quiet=quiet, seconds=seconds)
    with subprocess.Popen(
        [sys.executable, "-c", text], stderr=theirs, stdout=subprocess.DEVNULL, env={**os.environ, "TERM": term}
    ) as process:
        os.close(theirs)
        seen, until = b"", time.monotonic() + 60
        while time.monotonic() < until:
            if select.select([ours], [], [], 0.1)[0]:
                try:
                    more = os.read(ours, 4096)
                except OSError:  # the other end is closed
                    break
                if not more:
                    break
                seen += more
            elif process.poll() is not None:
                break
        assert process.wait(30) == 0
    os.close(ours)
    return seen.decode()


def test_a_long_run_says_what_it_does_and_cleans_up() -> None:
    """After half a second one line tells it; at the end the line is blank again, and no escape code was used."""
    seen = at_a_terminal(1.3)
    assert "12 000 rows read (" in seen
    assert seen.endswith("\r")
    assert seen.rsplit("\r", 2)[1].strip() == ""
    assert "\n" not in seen
    assert "\x1b" not in seen


@pytest.mark.parametrize(("seconds", "quiet", "term"), [(0.1, False, "xterm"), (0.9, True, "xterm"), (0.9, False, "dumb")])
def test_short_quiet_and_dumb_say_nothing(seconds: float, quiet: bool, term: str) -> None:
    """Under half a second, with --quiet, or on a terminal that cannot go back, nothing is written."""
    assert at_a_terminal(seconds, quiet=quiet, term=term) == ""


def test_work_that_is_shown_looks_for_garbage() -> None:
    """The start of the program puts that off; a long run may not."""
    gc.disable()
    try:
        with line.shown(quiet=True):
            assert gc.isenabled()
    finally:
        gc.enable()


def test_no_terminal_no_progress() -> None:
    """Piped into a file, standard error stays empty however long it takes."""
    done = subprocess.run(
        [sys.executable, "-c", PROGRAM.format(quiet=False, seconds=0.9)], capture_output=True, text=True, check=True, timeout=60
    )
    assert done.stderr == ""


def test_a_run_tells_its_steps(tmp_path: Path) -> None:
    """Reading, recognising and weighing are told in this order, with how many rows."""
    from takeoff import pipeline

    path = tmp_path / "list.csv"
    path.write_text("Mark,Quantity,Section,Material,Length (mm)\nB,1,UB 203x133x25,S355,1000\n", encoding="utf-8")
    told: list[str] = []
    with progress.listening(told.append):
        pipeline.schedule([path])
    assert told[0] == "reading list.csv"
    assert told[1] == "1 rows read; recognising names"
    assert told[2].endswith("weighing 1 rows")
    before = len(told)
    progress.tell("nobody listens any more")
    assert len(told) == before


def test_an_error_leaves_no_line_behind() -> None:
    """What fails in the middle still gives the terminal back clean."""
    code = PROGRAM.format(quiet=False, seconds=0.9).replace("    time.sleep(0.9)", "    time.sleep(0.9)\n    1 / 0")
    code = "import sys\nsys.excepthook = lambda *a: sys.exit(0)\n" + code.replace("1 / 0", "raise SystemExit(0)")
    seen = at_a_terminal(0, code=code)
    assert seen.rsplit("\r", 2)[1].strip() == ""


def test_nothing_is_ever_coloured(tmp_path: Path) -> None:
    """With a terminal for output, with NO_COLOR and without, no escape code is written: colour is not used at all."""
    for extra in ({}, {"NO_COLOR": "1"}):
        ours, theirs = pty.openpty()
        with subprocess.Popen(
            [str(Path(sys.executable).with_name("takeoff")), "material", "S355"],
            stdout=theirs,
            stderr=theirs,
            env={**os.environ, "TERM": "xterm", **extra},
            cwd=tmp_path,
        ) as process:
            os.close(theirs)
            seen = b""
            try:
                while more := os.read(ours, 4096):
                    seen += more
            except OSError:
                pass
            process.wait(30)
        os.close(ours)
        assert b"7" in seen
        assert b"\x1b" not in seen


def test_the_optimiser_tells_its_bound_and_best(tmp_path: Path) -> None:
    """While vehicles are filled, the least number that any plan needs and the best so far are told."""
    import whole_job

    from takeoff import pipeline

    told: list[str] = []
    with progress.listening(told.append):
        pipeline.schedule([whole_job.write(tmp_path)])
    assert any(text.startswith("placing on vehicles: 1 at least, 2 at best") for text in told)
