"""Hostile job files, and files of the user's own that a job names: acted on, or one short message that names key or file."""

from __future__ import annotations

import os
import time
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import pytest

from takeoff import pipeline
from takeoff.errors import InputError, JobError, TakeoffError
from takeoff.job import find_job, job_from, read_job
from takeoff.reports import compare

Run = Callable[..., "CompletedProcess[str]"]

LIST = "Mark,Assembly,Quantity,Section,Material,Length (mm)\nM1,A1,2,UB 203x133x25,S355,6000\nM2,A1,1,PL10x200,S355,900\n"
PICK = '[[lift.picks]]\nname = "P"\nassemblies = ["A1"]\nradius_m = 5\n'


def written(folder: Path, job: str | bytes) -> Path:
    (folder / "list.csv").write_text(LIST, encoding="utf-8")
    path = folder / "job.toml"
    path.write_bytes(job.encode() if isinstance(job, str) else job)
    return path


REFUSED: dict[str, tuple[str | bytes, str]] = {
    "lists in lists": ("x = " + "[" * 50_000 + "]" * 50_000, "nests lists or tables without end"),
    "tables in tables": ("x = " + "{a = " * 20_000 + "1" + "}" * 20_000, "nests lists or tables without end"),
    "a key of 50,000 parts": (".".join(["a"] * 50_000) + " = 1", "a key of the job file has more than 50 parts"),
    "a heading of 50,000 parts": ("[" + " . ".join(['"a"'] * 50_000) + "]\nx = 1", "a key of the job file has more than 50 parts"),
    "a key of parts in single quotes": ("x = { " + ".".join(["'a'"] * 50_000) + " = 1 }", "a key of the job file has more than 50 parts"),
    "a number of 5,000 digits": ("[masses]\nweld_percent = " + "9" * 5000, "a number of thousands of digits"),
    "a number of 400 digits": ("[guards]\nmegabytes = " + "9" * 400, r"guards\.megabytes: a number of 1329 bits"),
    "a hexadecimal number without end": ("[guards]\nrows = 0x" + "f" * 100_000, r"guards\.rows: a number of 400000 bits"),
    "a key of a million letters": ("[job]\n" + "k" * 1_000_000 + " = 1", r"unknown key 'job\.k+… \(1,000,004 characters\)'"),
    "a key that acts": ('"\\u001b[31m" = 1', "unknown key"),
    "a text too long": ('[job]\ntitle = "' + "x" * 2000 + '"', r"job\.title"),
    "a file of 10 MB": ('[job]\ntitle = "' + "x" * 10_000_000 + '"', r"the job file is 10\.0 MB, more than is read"),
    "thousands of kinds of vehicle": ("".join(f'[[vehicles]]\nname = "v{i}"\n' for i in range(1001)), "1,001 kinds of vehicle"),
    "no time at all": ("[guards]\nseconds = 1e-300", r"guards\.seconds"),
    "no number": ("[guards]\nmegabytes = nan", r"guards\.megabytes"),
    "true for a number": ("[guards]\nrows = true", r"guards\.rows"),
    "one key twice": ('[job]\ntitle = "a"\ntitle = "b"', "not proper TOML"),
    "half a sign": ('[job]\ntitle = "\\ud800"', "not proper TOML"),
    "zero bytes": (b'[job]\ntitle = "a\x00b"', "not proper TOML"),
    "UTF-16": ('[job]\ntitle = "a"'.encode("utf-16"), "not UTF-8 text"),
    "another alphabet": (b'[job]\ntitle = "\xe4"', "not UTF-8 text"),
    "a field that there is not": ('[reading.columns]\nMark = "assambly"', "'Mark' is given a field that there is not.*assembly"),
    "a row that is none": ('[reading]\nskip = ["-1"]', r"reading\.skip: this is no row"),
    "a row beyond any sheet": ('[reading]\nskip = ["99999999999999999999"]', r"reading\.skip: this is no row"),
}


@pytest.mark.parametrize("case", REFUSED)
def test_a_hostile_job_file_is_one_short_message(tmp_path: Path, case: str) -> None:
    """Quickly, with the key or the fault, and never the whole of what was read."""
    text, says = REFUSED[case]
    path = written(tmp_path, text)
    started = time.process_time()
    with pytest.raises(JobError, match=says) as caught:
        pipeline.read([tmp_path / "list.csv"], read_job(path))
    assert len(str(caught.value)) < 1500
    assert time.process_time() - started < 10


@pytest.mark.parametrize("entry", ["[[runs]]", "[[crane]]", "[[lift.picks]]", "[names.materials]", "[reading.columns]"])
def test_ten_thousands_of_entries_are_quick_to_check(tmp_path: Path, entry: str) -> None:
    """None is compared with each of the others; a name that stands twice is found all the same."""
    many = (entry + "\n" if entry[1] != "[" else "") + "".join(
        f'{entry}\nname = "n{i}"\n' if entry[1] == "[" else f'"n{i}" = "{"S355" if "names" in entry else "mark"}"\n' for i in range(20_000))
    path = written(tmp_path, many)
    started = time.process_time()
    job = read_job(path)
    assert time.process_time() - started < 10
    if entry[1] == "[":
        from takeoff.lifting.plans import check_names

        check_names(job)
        assert time.process_time() - started < 10
        path.write_text(many + f'{entry}\nname = "n7"\n')
        with pytest.raises(JobError, match="have one name"):
            check_names(read_job(path))


@pytest.mark.parametrize("special", ["/dev/zero", "pipe", "folder", "nowhere"])
def test_a_job_file_is_an_ordinary_file(tmp_path: Path, special: str) -> None:
    """A device or a pipe that never ends, a folder, a link that leads nowhere: said, not waited for and not passed over."""
    path = written(tmp_path, "")
    path.unlink()
    if special == "pipe":
        os.mkfifo(path)
    elif special == "folder":
        path.mkdir()
    else:
        path.symlink_to(special)
    with pytest.raises(JobError, match=r"job\.toml.*(is no ordinary file|there is no such file)"):
        find_job([tmp_path / "list.csv"], None)
    if special == "nowhere":
        path.unlink()
        path.symlink_to(path.name)  # round and round
        with pytest.raises(JobError, match="cannot be read"):
            find_job([tmp_path / "list.csv"], None)


@pytest.mark.parametrize("own", ['[own]\nmaterials = "NAME"', '[own]\nsections = "NAME"', PICK + '[crane]\nname = "C"\nchart = "NAME"'])
@pytest.mark.parametrize("name", ["/dev/zero", ".", "nowhere.csv", "n" * 900 + ".csv", "a\\u0000b"])
def test_a_file_of_ones_own_is_an_ordinary_file(tmp_path: Path, own: str, name: str) -> None:
    """Own tables and charts that are devices, folders, absent, or named as no file can be: the message names the file."""
    path = written(tmp_path, own.replace("NAME", name))
    with pytest.raises(InputError, match=r"no ordinary file|folder|no such file|too long|null byte") as caught:
        pipeline.schedule([tmp_path / "list.csv"], read_job(path))
    assert caught.value.file is not None


def test_an_earlier_record_is_an_ordinary_file() -> None:
    """`--against` a device that never ends."""
    with pytest.raises(InputError, match="no ordinary file"):
        compare.read_earlier(Path("/dev/zero"))


def test_the_command_says_it_in_one_line(run: Run, tmp_path: Path) -> None:
    """No traceback and no leftovers, whichever command meets the job file."""
    written(tmp_path, REFUSED["a hexadecimal number without end"][0])
    for command in ("schedule", "check", "lift", "loads"):
        done = run(command, tmp_path / "list.csv")
        assert done.returncode == 2
        assert done.stdout == ""
        assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    assert sorted(p.name for p in tmp_path.iterdir()) == ["job.toml", "list.csv"]


def test_the_shortest_time_is_a_message(run: Run, tmp_path: Path) -> None:
    """The clock may strike before the work has begun: that is the same message."""
    written(tmp_path, "[guards]\nseconds = 0.001\n")
    for command in (["schedule"], ["check"], ["lift"]):
        done = run(*command, tmp_path / "list.csv")
        assert done.returncode == 2, done.stderr
        assert "[guards] seconds" in done.stderr
        assert len(done.stderr.strip().splitlines()) == 1, done.stderr


def test_long_words_are_shortened_in_a_message() -> None:
    """A cell or a key may hold millions of characters; a message does not."""
    error = TakeoffError("w" * 5000, read="r" * 5000, right="x" * 5000)
    assert len(str(error)) < 1600
    assert "r… (5,000 characters)" in str(error)


def test_settings_beyond_toml_are_refused_from_a_program_too() -> None:
    """The same where the settings come from a caller's own code."""
    with pytest.raises(JobError, match="a number of"):
        job_from({"lift": {"picks": [{"name": "P", "slings_mm": [10**400]}]}})
