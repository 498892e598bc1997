"""Outputs under adverse conditions: killed, interrupted, full, shut off, two at once. Whole files or none; one message."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
import time
from collections.abc import Callable, Iterator
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path
from subprocess import CompletedProcess

import hostile as h
import openpyxl
import pytest

Run = Callable[..., "CompletedProcess[str]"]

COMMAND = [str(Path(sys.executable).with_name("takeoff"))]


@pytest.fixture(scope="module")
def long_list(tmp_path_factory: pytest.TempPathFactory) -> bytes:
    """A list that takes a second or two, so that there is something to interrupt."""
    rows = "".join(h.row(n) for n in range(2, 6000))
    return h.write(tmp_path_factory.mktemp("long") / "list.xlsx", h.sheet(h.heading() + rows)).read_bytes()


@pytest.fixture
def folder(tmp_path: Path, long_list: bytes) -> Path:
    (tmp_path / "list.xlsx").write_bytes(long_list)
    return tmp_path


def start(folder: Path, *more: str) -> subprocess.Popen[str]:
    command = [*COMMAND, "schedule", str(folder / "list.xlsx"), "--json", str(folder / "out.json"), "--csv", str(folder / "out.csv"), *more]
    return subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True)


def whole(folder: Path) -> None:
    """The three outputs stand there in full, of one run."""
    members = json.loads((folder / "out.json").read_text())["members"]
    assert len(members) == 5998
    assert len((folder / "out.csv").read_text().splitlines()) == 5999
    book = openpyxl.load_workbook(folder / "list.schedule.xlsx", read_only=True)
    assert "Weight schedule" in book.sheetnames
    book.close()


def test_killed_at_any_moment_there_are_whole_files_or_none(folder: Path) -> None:
    """Kills spread over the run: an earlier output stays as it was until a whole new one takes its place; then a run succeeds."""
    started = time.perf_counter()
    first = start(folder)
    first.communicate(timeout=120)
    took = time.perf_counter() - started
    assert first.returncode == 0
    earlier = {name: (folder / name).read_bytes() for name in ("out.json", "out.csv", "list.schedule.xlsx")}
    for part in (0.3, 0.6, 0.8, 0.9, 0.95, 1.0):
        child = start(folder, "--replace")
        time.sleep(took * part)
        child.kill()
        child.communicate()
        for name, data in earlier.items():
            # The run is deterministic: what stands there is the earlier file, or the same one anew; never half of one.
            assert (folder / name).stat().st_size == len(data)
        whole(folder)
    last = start(folder, "--replace")
    last.communicate(timeout=120)
    assert last.returncode == 0
    whole(folder)


def test_an_interrupt_while_a_module_is_loaded_waits_until_it_is(tmp_path: Path) -> None:
    """Some libraries end noisily where an exception meets them half loaded: the end is asked for again when the module stands."""
    module = "import signal\nsignal.raise_signal(signal.SIGTERM)\nWHOLE = True\n"
    (tmp_path / "slow_to_load.py").write_text(module, encoding="utf-8")
    program = (
        "import signal, sys, time\n"
        "from takeoff.cli import interrupts\n"
        "interrupts.listen()\n"
        "try:\n"
        "    import slow_to_load\n"
        "    print(slow_to_load.WHOLE, flush=True)\n"
        "    signal.raise_signal(signal.SIGINT)\n"
        "    time.sleep(30)\n"
        "except interrupts.Interrupted:\n"
        "    sys.exit(interrupts.status())\n"
    )
    done = subprocess.run([sys.executable, "-c", program], cwd=tmp_path, capture_output=True, text=True, timeout=60, check=False)
    # The Ctrl-C that follows at once ends it; the status names the signal that came first.
    assert (done.returncode, done.stdout, done.stderr) == (143, "True\n", "")


@pytest.mark.parametrize("after", [0.12, 0.2, 0.3, 0.5, 0.9, 1.4])
def test_an_interrupt_ends_with_130_and_leaves_nothing(folder: Path, after: float) -> None:
    """Ctrl-C, at several moments, while the program is still loading too: status 130, one line, no output, no helper file."""
    child = start(folder)
    time.sleep(after)
    child.send_signal(signal.SIGINT)
    _, said = child.communicate(timeout=60)
    if child.returncode == 0:
        whole(folder)
        return
    assert said == "takeoff: interrupted; nothing was left behind\n"
    assert child.returncode == 130
    assert [p.name for p in folder.iterdir()] == ["list.xlsx"]


def test_another_signal_and_a_hasty_second_one(folder: Path) -> None:
    """A kill in order, followed at once by Ctrl-C, does not disturb the tidying up; the status names the first."""
    child = start(folder)
    time.sleep(0.7)
    child.send_signal(signal.SIGTERM)
    time.sleep(0.02)
    child.send_signal(signal.SIGINT)
    _, said = child.communicate(timeout=60)
    assert "Traceback" not in said
    assert child.returncode in (143, 0)
    if child.returncode:
        assert [p.name for p in folder.iterdir()] == ["list.xlsx"]


#: runs a stage of the command's life in which an interrupt arrives: what is loaded first, what is lost in a clean-up, the last step
STAGES = {
    "while loading": ("import os, signal, sys\nclass Late:\n def find_spec(self, name, *_):\n  if name == 'typer': os.kill(os.getpid(), signal.SIGINT)\n"
                      "sys.meta_path.insert(0, Late())\nfrom takeoff.__main__ import main\nmain()", 130),
    "lost in a clean-up": ("import os, signal\nfrom takeoff.reports import workbook\nwas = workbook.write_workbook\nclass Lost:\n def __del__(self): os.kill(os.getpid(), signal.SIGINT)\n"
                           "def write(*a):\n Lost()\n was(*a)\nworkbook.write_workbook = write\nfrom takeoff.__main__ import main\nmain()", 130),
    "turned into another error": ("import os, signal\nfrom takeoff.reports import workbook\ndef write(*a):\n try: os.kill(os.getpid(), signal.SIGINT)\n except BaseException: raise ImportError('half loaded')\n"
                                  "workbook.write_workbook = write\nfrom takeoff.__main__ import main\nmain()", 130),
    "once the outputs take their places": ("import os, signal\nfrom takeoff.reports import files\nwas = files._put_in_place\ndef put(*a):\n os.kill(os.getpid(), signal.SIGINT)\n was(*a)\n os.kill(os.getpid(), signal.SIGINT)\n"
                                           "files._put_in_place = put\nfrom takeoff.__main__ import main\nmain()", 0),
}


@pytest.mark.parametrize("stage", STAGES)
def test_an_interrupt_at_each_stage(tmp_path: Path, stage: str) -> None:
    """Either the run is given up and says that nothing was left behind, which is so; or it is done, and says that."""
    h.write(tmp_path / "list.xlsx", h.sheet(h.PLAIN))
    code, status = STAGES[stage]
    done = subprocess.run(
        [sys.executable, "-c", code, "schedule", str(tmp_path / "list.xlsx")], capture_output=True, text=True, check=False, timeout=120,
    )
    assert done.returncode == status, done.stderr
    assert sorted(p.name for p in tmp_path.iterdir()) == (["list.xlsx"] if status else ["list.schedule.xlsx", "list.xlsx"])
    assert done.stderr == ("takeoff: interrupted; nothing was left behind\n" if status else "")


def test_two_runs_at_once_do_not_mix(folder: Path) -> None:
    """Both write the same names; each output is whole, and nothing else is left."""
    with ThreadPoolExecutor(2) as pool:
        ends = list(pool.map(lambda _: start(folder, "--replace").communicate(timeout=120), range(2)))
    assert all("Traceback" not in said for _, said in ends)
    whole(folder)
    assert sorted(p.name for p in folder.iterdir()) == ["list.schedule.xlsx", "list.xlsx", "out.csv", "out.json"]


@pytest.fixture
def small_disk(tmp_path: Path) -> Iterator[Path]:
    """A disk of 200 kB, where this machine lets one be made; else None is given and a limit on file sizes serves."""
    disk = tmp_path / "disk"
    disk.mkdir()
    made = subprocess.run(["mount", "-t", "tmpfs", "-o", "size=200k", "tmpfs", str(disk)], capture_output=True, check=False)
    yield disk
    if made.returncode == 0:
        subprocess.run(["umount", str(disk)], check=True)


@pytest.mark.parametrize("limit", ["disk", "file size"])
def test_a_full_disk_is_one_message_and_leaves_nothing(folder: Path, small_disk: Path, limit: str) -> None:
    """No room for the outputs: status 2, and the disk is as it was."""
    import resource

    full = limit == "disk" and os.path.ismount(small_disk)

    def cap() -> None:
        signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
        resource.setrlimit(resource.RLIMIT_FSIZE, (100_000, 100_000))

    done = subprocess.run(
        [*COMMAND, "schedule", str(folder / "list.xlsx"), "--out", str(small_disk / "a.xlsx"), "--json", str(small_disk / "a.json")],
        capture_output=True, text=True, check=False, preexec_fn=None if full else cap, timeout=120,
    )
    assert done.returncode == 2, done.stderr
    assert done.stdout == ""
    assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    assert "cannot be written" in done.stderr
    assert list(small_disk.iterdir()) == []


#: all is loaded by a first run elsewhere, since what the superuser has installed may be closed to others; then the rights are given up
AS_ANYONE = """
import os, shutil, sys, tempfile
from takeoff.__main__ import main
place, arguments = sys.argv[1], sys.argv[2:]
def run(folder):
    os.chdir(folder)
    sys.argv = ["takeoff", *arguments]
    try:
        main()
    except SystemExit as stop:
        return stop.code or 0
with tempfile.TemporaryDirectory() as other:
    shutil.copytree(place, other, dirs_exist_ok=True)
    [os.chmod(os.path.join(other, name), 0o777) for name in os.listdir(other)]
    os.chmod(other, 0o777)
    sys.stdout.flush()
    kept = os.dup(1), os.dup(2)
    nowhere = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nowhere, 1), os.dup2(nowhere, 2)
    run(other)
    sys.stdout.flush()
    os.dup2(kept[0], 1), os.dup2(kept[1], 2)
os.setgroups([])
os.setgid(65534)
os.setuid(65534)
sys.exit(run(place))
"""


def as_anyone(*command: object, cwd: Path) -> CompletedProcess[str]:
    """The command, run by a user without special rights, whoever runs the tests."""
    if os.geteuid() != 0:
        call, place = COMMAND, cwd
    else:
        call, place = [sys.executable, "-c", AS_ANYONE, str(cwd)], Path("/")
    return subprocess.run([*call, *map(str, command)], cwd=place, capture_output=True, text=True, check=False, timeout=120)


@pytest.fixture
def shared_place() -> Iterator[Path]:
    """A folder that anybody may reach, with a list in it."""
    import tempfile

    with tempfile.TemporaryDirectory() as name:
        place = Path(name)
        place.chmod(0o755)
        (place / "list.csv").write_text("Mark,Quantity,Section,Material,Length (mm)\nM1,2,UB 203x133x25,S355,6000\n")
        yield place
        for path in (place, *place.iterdir()):
            path.chmod(0o755)


@pytest.mark.parametrize(("command", "says"), [
    (["schedule", "list.csv"], "its folder may not be written to"), (["lift", "list.csv", "--page", "p.html"], "its folder may not be written to"),
    (["check", "list.csv", "--write-job"], "its folder may not be written to"), (["start", "new"], "cannot be made"),
])
def test_a_folder_that_may_not_be_written_to(shared_place: Path, command: list[str], says: str) -> None:
    """One message, before the work, and nothing is left."""
    shared_place.chmod(0o555)
    done = as_anyone(*command, cwd=shared_place)
    assert done.returncode == 2
    assert says in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    assert [p.name for p in shared_place.iterdir()] == ["list.csv"]


@pytest.mark.parametrize("closed", ["list.csv", "job.toml", "own.csv"])
def test_a_file_that_may_not_be_read_is_named(shared_place: Path, closed: str) -> None:
    """The list, the job file, a table of one's own."""
    (shared_place / "job.toml").write_text('[own]\nmaterials = "own.csv"\n')
    (shared_place / "own.csv").write_text("key\n")
    (shared_place / closed).chmod(0)
    done = as_anyone("check", "list.csv", cwd=shared_place)
    assert done.returncode == 2
    assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    assert closed in done.stderr
    assert "cannot be read (Permission denied)" in done.stderr or "this table cannot be read" in done.stderr


def test_a_file_of_someone_elses_is_not_half_replaced(shared_place: Path) -> None:
    """In a folder that many write to, only its owner may rename over a file: said before anything is written."""
    if os.geteuid() != 0:
        pytest.skip("another owner needs the superuser")
    shared_place.chmod(0o1777)
    (shared_place / "o.xlsx").write_text("old")
    (shared_place / "o.xlsx").chmod(0o666)
    done = as_anyone("schedule", "list.csv", "--out", "o.xlsx", "--json", "o.json", "--replace", cwd=shared_place)
    assert done.returncode == 2
    assert "is protected against writing" in done.stderr
    assert sorted(p.name for p in shared_place.iterdir()) == ["list.csv", "o.xlsx"]
    assert (shared_place / "o.xlsx").read_text() == "old"


@pytest.mark.parametrize("command", [["schedule", "--replace"], ["check"], ["check", "--json"], ["lift", "--json"], ["schedule", "--replace", "--json", "-"]])
def test_a_reader_that_stops_early_gives_no_traceback(folder: Path, command: list[str]) -> None:
    """Standard output is shut after one line."""
    child = subprocess.Popen(
        [*COMMAND, command[0], str(folder / "list.xlsx"), *command[1:]], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True,
    )
    assert child.stdout is not None
    assert child.stderr is not None
    child.stdout.readline()
    child.stdout.close()
    said = child.stderr.read()
    child.stderr.close()
    child.wait(timeout=60)
    assert "Traceback" not in said
    assert "Exception ignored" not in said


@pytest.mark.parametrize("shut", ["stdout", "stderr", "both"])
def test_streams_that_are_shut_from_the_start(folder: Path, shut: str) -> None:
    """A command started without a standard output or error still does its work."""
    redirect = {"stdout": ">&-", "stderr": "2>&-", "both": ">&- 2>&-"}[shut]
    done = subprocess.run(
        f"{COMMAND[0]} schedule {folder / 'list.xlsx'} --replace {redirect}", shell=True, capture_output=True, text=True, check=False, timeout=120,
    )
    assert "Traceback" not in done.stderr
    assert done.returncode == 0
    assert (folder / "list.schedule.xlsx").exists()


@pytest.mark.parametrize("environment", [
    {"PYTHONIOENCODING": "ascii"}, {"PYTHONIOENCODING": "cp1252"}, {"PYTHONUTF8": "0", "LC_ALL": "C"}, {"COLUMNS": "40"}, {"COLUMNS": "1"},
    {"TERM": "dumb", "COLUMNS": "x"},
])
def test_odd_streams_and_terminals(tmp_path: Path, environment: dict[str, str]) -> None:
    """A stream of another alphabet, a terminal of 40 columns: what can be shown is shown."""
    path = tmp_path / "list.csv"
    path.write_text("Mark,Quantity,Section,Material,Length (mm)\nπλάκα–1,2,UB 203x133x25,S355,6000\n漢,2,nonsense,S355,6000\n", encoding="utf-8")
    for command in (["schedule", path, "--replace"], ["check", path], ["material", "oak"], ["section", "UB 203x133x25"], ["material", "zzzz"]):
        done = subprocess.run(
            [*COMMAND, *map(str, command)], capture_output=True, env={**os.environ, **environment}, check=False, timeout=120,
        )
        assert done.returncode in (0, 1, 3), done.stderr
        assert b"Traceback" not in done.stderr


def test_a_full_standard_output_is_said(folder: Path) -> None:
    """Output to a device that is always full: status 2 and a message, no traceback."""
    with Path("/dev/full").open("w") as full:
        done = subprocess.run(
            [*COMMAND, "check", str(folder / "list.xlsx")], stdout=full, stderr=subprocess.PIPE, text=True, check=False, timeout=120,
        )
    assert done.returncode == 2
    assert "Traceback" not in done.stderr


def test_the_input_is_opened_for_reading_only(folder: Path, run: Run) -> None:
    """Its bytes, times and rights stay as they were, whatever is asked for."""
    path = folder / "list.xlsx"
    path.chmod(0o444)
    before = (path.read_bytes(), path.stat().st_mtime_ns, path.stat().st_mode)
    for command in (["schedule", path, "--replace"], ["check", path], ["lift", path]):
        run(*command)
    assert (path.read_bytes(), path.stat().st_mtime_ns, path.stat().st_mode) == before
    done = run("schedule", path, "--out", path, "--replace")
    assert done.returncode == 2
    assert (path.read_bytes(), path.stat().st_mtime_ns, path.stat().st_mode) == before


# --- the same input, the same output ---------------------------------------------------------------------------------


def _cells(path: Path) -> dict[tuple[str, str], object]:
    book = openpyxl.load_workbook(path)
    return {(s.title, c.coordinate): c.value for s in book.worksheets for row in s.iter_rows() for c in row if c.value is not None}


def test_two_runs_are_equal(run: Run, tmp_path: Path) -> None:
    """JSON and CSV byte by byte, the workbook cell by cell; whatever the hash seed, the time zone and the day."""
    from conftest import SAMPLES

    outputs = []
    for number, environment in enumerate(({"PYTHONHASHSEED": "1", "TZ": "UTC"}, {"PYTHONHASHSEED": "77", "TZ": "Asia/Tokyo"})):
        place = tmp_path / str(number)
        place.mkdir()
        for source in (SAMPLES / "weir_footbridge").iterdir():
            if source.is_file() and "schedule" not in source.name:
                (place / source.name).write_bytes(source.read_bytes())
        with (place / "job.toml").open("a", encoding="utf-8") as job:
            job.write("\n".join(f'\n[[vehicles]]\nname = "{n}"\npayload_kg = {kg}\ndeck_length_mm = 9000\ndeck_width_mm = 2400' for n, kg in (("v", 6000), ("w", 9000))))
        done = run("schedule", "cutting_list.xlsx", "--json", "a.json", "--csv", "a.csv", "--page", "a.html", cwd=place, env=environment)
        assert done.returncode == 3, done.stderr
        assert json.loads((place / "a.json").read_text())["vehicles"]
        outputs.append(place)
    one, other = outputs
    for name in ("a.json", "a.csv", "a.html"):
        assert (one / name).read_bytes() == (other / name).read_bytes(), name
    assert _cells(one / "cutting_list.schedule.xlsx") == _cells(other / "cutting_list.schedule.xlsx")
