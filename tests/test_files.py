"""Outputs on disk: whole or absent, never over an input, an earlier one kept unless told otherwise."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import textwrap
import time
from collections.abc import Callable
from pathlib import Path

import pytest

from takeoff.errors import OutputError
from takeoff.reports.files import check_outputs, write_all


def writes(text: str) -> Callable[[Path], None]:
    return lambda path: path.write_text(text, encoding="utf-8") and None


def fails(error: BaseException) -> Callable[[Path], None]:
    def write(path: Path) -> None:
        path.write_text("half", encoding="utf-8")
        raise error

    return write


def names(folder: Path) -> list[str]:
    return sorted(p.name for p in folder.iterdir())


def test_all_outputs_are_written_and_nothing_else(tmp_path: Path) -> None:
    """Both files stand in their places with ordinary rights, and no helper file is left."""
    places = write_all([(tmp_path / "a.json", writes("A")), (tmp_path / "b.csv", writes("B"))])
    assert [p.read_text() for p in places] == ["A", "B"]
    assert names(tmp_path) == ["a.json", "b.csv"]
    mask = os.umask(0)
    os.umask(mask)
    assert places[0].stat().st_mode & 0o777 == 0o666 & ~mask


@pytest.mark.parametrize(("error", "wanted", "says"), [
    (OSError(28, "No space left on device"), OutputError, r"b\.csv: cannot be written \(No space left on device\)"),
    (KeyboardInterrupt("stop"), KeyboardInterrupt, "stop"), (RuntimeError("a fault"), RuntimeError, "a fault"),
])
def test_a_failing_output_leaves_the_folder_as_it_was(tmp_path: Path, error: BaseException, wanted: type[BaseException], says: str) -> None:
    """Whatever stops the second output, the first is not there and the earlier ones are untouched."""
    (tmp_path / "b.csv").write_text("old")
    with pytest.raises(wanted, match=says):
        write_all([(tmp_path / "a.json", writes("A")), (tmp_path / "b.csv", fails(error))], replace=True)
    assert names(tmp_path) == ["b.csv"]
    assert (tmp_path / "b.csv").read_text() == "old"


def test_a_failure_while_files_take_their_places_is_undone(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Where the second file cannot take its place, the first goes back to what it was."""
    (tmp_path / "a").write_text("old a")
    (tmp_path / "c").write_text("old c")
    plain = Path.replace

    def replace(self: Path, target: Path) -> Path:
        if Path(target).name == "c" and self.suffix == ".new":
            raise OSError(5, "Input/output error")
        return plain(self, target)

    monkeypatch.setattr(Path, "replace", replace)
    with pytest.raises(OutputError, match=r"c: cannot be written \(Input/output error\)"):
        write_all([(tmp_path / n, writes(f"new {n}")) for n in "abc"], replace=True)
    assert names(tmp_path) == ["a", "c"]
    assert [(tmp_path / n).read_text() for n in "ac"] == ["old a", "old c"]


def test_an_existing_output_is_kept_unless_replace_is_said(tmp_path: Path) -> None:
    """The message names the file and what to add; nothing else is written either."""
    (tmp_path / "b.csv").write_text("old")
    outputs = [(tmp_path / "a.json", writes("A")), (tmp_path / "b.csv", writes("B"))]
    with pytest.raises(OutputError, match=r"b\.csv: exists already and is kept\. Right would be: another name, or add --replace\."):
        write_all(outputs)
    assert names(tmp_path) == ["b.csv"]
    write_all(outputs, replace=True)
    assert [(tmp_path / n).read_text() for n in names(tmp_path)] == ["A", "B"]


@pytest.mark.parametrize("spelling", ["same", "dots", "soft link", "hard link", "link in between"])
def test_an_output_is_never_an_input(tmp_path: Path, spelling: str) -> None:
    """By no spelling and no link is a list written over."""
    source = tmp_path / "list.csv"
    source.write_text("the list")
    folder = tmp_path / "sub"
    folder.mkdir()
    output = {
        "same": source, "dots": folder / ".." / "list.csv", "soft link": tmp_path / "soft.csv", "hard link": tmp_path / "hard.csv",
        "link in between": tmp_path / "way" / "list.csv",
    }[spelling]
    if spelling == "soft link":
        output.symlink_to(source)
    elif spelling == "hard link":
        output.hardlink_to(source)
    elif spelling == "link in between":
        (tmp_path / "way").symlink_to(tmp_path)
    with pytest.raises(OutputError, match="is an input"):
        write_all([(output, writes("over"))], inputs=[source], replace=True)
    assert source.read_text() == "the list"


@pytest.mark.parametrize("second", ["a.json", "./a.json", "link.json"])
def test_two_outputs_may_not_share_a_place(tmp_path: Path, second: str) -> None:
    """One of two outputs would be lost, so neither is written."""
    (tmp_path / "link.json").symlink_to(tmp_path / "a.json")
    with pytest.raises(OutputError, match="is named for two outputs"):
        write_all([(tmp_path / "a.json", writes("A")), (f"{tmp_path}/{second}", writes("B"))])
    assert names(tmp_path) == ["link.json"]


def test_places_that_cannot_hold_a_file_are_told_apart(tmp_path: Path) -> None:
    """A missing folder, a folder, a name too long, a device: each with its own message, before anything is written."""
    (tmp_path / "folder").mkdir()
    os.mkfifo(tmp_path / "pipe")
    for path, what in (
        (tmp_path / "absent" / "a.json", "its folder does not exist"), (tmp_path / "folder", "is a folder"),
        (tmp_path / ("n" * 300), "File name too long"), (tmp_path / "pipe", "is no ordinary file"), ("", "is no name of a file"),
        (tmp_path / "a\0b", "null"), (tmp_path / "pipe" / "a", "its folder does not exist"),
    ):
        with pytest.raises(OutputError, match=what):
            write_all([(tmp_path / "first.json", writes("A")), (path, writes("B"))])
    assert names(tmp_path) == ["folder", "pipe"]


def test_a_folder_that_may_not_be_written_to_is_said(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The system's answer is asked for beforehand (the superuser may write anywhere, so it is made here)."""
    monkeypatch.setattr(os, "access", lambda path, _mode: Path(path) != tmp_path)
    with pytest.raises(OutputError, match="its folder may not be written to"):
        check_outputs([tmp_path / "a.json"])


def test_a_link_to_an_output_stays_a_link(tmp_path: Path) -> None:
    """What is written goes to where the link leads."""
    (tmp_path / "real").mkdir()
    (tmp_path / "link.json").symlink_to(tmp_path / "real" / "a.json")
    assert write_all([(tmp_path / "link.json", writes("A"))]) == [tmp_path / "real" / "a.json"]
    assert (tmp_path / "link.json").is_symlink()
    assert (tmp_path / "real" / "a.json").read_text() == "A"


def test_names_as_long_as_the_system_takes_are_written(tmp_path: Path) -> None:
    """The helper file's name is short whatever the output's own length."""
    write_all([(tmp_path / ("n" * 255), writes("A"))])
    assert names(tmp_path) == ["n" * 255]


def test_leftovers_of_a_killed_run_do_not_stop_the_next(tmp_path: Path) -> None:
    """A run that was killed half way leaves no output; the next one succeeds beside what it left."""
    program = textwrap.dedent("""
        import sys, time
        from pathlib import Path
        from takeoff.reports.files import write_all
        def slow(path):
            path.write_text("half")
            print("writing", flush=True)
            time.sleep(60)
        write_all([(Path(sys.argv[1]) / "a.json", lambda p: p.write_text("A")), (Path(sys.argv[1]) / "b.json", slow)])
    """)
    for way, left in ((signal.SIGINT, 0), (signal.SIGKILL, 2)):
        child = subprocess.Popen([sys.executable, "-c", program, str(tmp_path)], stdout=subprocess.PIPE, stderr=subprocess.DEVNULL)
        assert child.stdout is not None
        assert child.stdout.readline() == b"writing\n"
        child.send_signal(way)
        child.wait(timeout=20)
        child.stdout.close()
        time.sleep(0.05)
        assert len(names(tmp_path)) == left
        assert not any((tmp_path / n).exists() for n in ("a.json", "b.json"))
    write_all([(tmp_path / "a.json", writes("A"))])
    assert (tmp_path / "a.json").read_text() == "A"
