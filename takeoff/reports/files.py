"""Outputs on disk: all of them whole, or none at all. Rank 9.

Everything that can be known beforehand is checked for every output before any is written. Each is then written in full
beside its place under a name of its own, and only when all are written do they take their places. What was there
before is put back if the last step fails half way, so an interrupt or a full disk leaves the folder as it was.
"""

from __future__ import annotations

import contextlib
import os
import secrets
import stat
from collections.abc import Callable, Iterable, Sequence
from pathlib import Path

from takeoff.errors import OutputError

#: one output: where it goes, and what writes it in full to the path it is given
Output = tuple[str | Path, Callable[[Path], None]]


def write_all(
    outputs: Sequence[Output], *, inputs: Iterable[str | Path] = (), replace: bool = False, settled: Callable[[], None] | None = None
) -> list[Path]:
    """Write every output, or none; returns where they are, links followed.

    settled : called once all are written, before the first takes its place: from then on nobody should give the run up.

    Raises OutputError, with the path, on a folder that is missing or cannot be written, an output that is an input (by
    any spelling or link), two outputs in one place, an existing file (unless `replace`), or a write that fails.
    """
    places = check_outputs([path for path, _ in outputs], inputs=inputs, replace=replace)
    waiting: list[Path] = []
    try:
        for place in places:
            waiting.append(_beside(place, "new"))
            _create(waiting[-1], place)
        for place, temporary, (_, write) in zip(places, waiting, outputs, strict=True):
            try:
                write(temporary)
                _to_disk(temporary)
            except OSError as error:
                raise OutputError(f"cannot be written ({_why(error)})", file=place) from error
        if settled is not None:
            settled()
        _put_in_place(places, waiting, replace)
    finally:
        for temporary in waiting:
            _remove(temporary)
    return places


def check_outputs(
    paths: Sequence[str | Path], *, inputs: Iterable[str | Path] = (), replace: bool = False
) -> list[Path]:
    """Whether all these outputs could be written, writing nothing; returns their places, links followed.

    Raises OutputError as `write_all` does.
    """
    sources = [Path(p) for p in inputs]
    places: list[Path] = []
    for path in map(Path, paths):
        there = _status(path)
        place = Path(os.path.realpath(path))
        if there is not None and stat.S_ISDIR(there.st_mode):
            raise OutputError("is a folder", file=path, right="the name of a file in it")
        if there is not None and not stat.S_ISREG(there.st_mode):
            raise OutputError("is no ordinary file", file=path, right="the name of a new file")
        for source in sources:
            if _same(place, source):
                raise OutputError(
                    f"is an input ({source}); nothing is written over an input", file=path, right="another name"
                )
        for other in places:
            if place == other or _same(place, other):
                raise OutputError("is named for two outputs", file=path, right="a name for each")
        if there is not None and not replace:
            raise OutputError("exists already and is kept", file=path, right="another name, or add --replace")
        folder = place.parent
        if not folder.is_dir():
            raise OutputError("its folder does not exist", file=path, right=f"make the folder {folder.name or folder} first")
        if not os.access(folder, os.W_OK | os.X_OK):
            raise OutputError("its folder may not be written to", file=path, right="a folder you may write to")
        if there is not None and not (os.access(place, os.W_OK) and _may_be_replaced(there, folder)):
            raise OutputError("is protected against writing", file=path, right="another name")
        places.append(place)
    return places


def _status(path: Path) -> os.stat_result | None:
    """What is at `path` now, links followed; None where nothing is."""
    if not path.name:
        raise OutputError("is no name of a file", file=path, right="the name of a file")
    try:
        return path.stat()
    except (FileNotFoundError, NotADirectoryError):
        return None
    except (OSError, ValueError) as error:
        raise OutputError(f"cannot be written ({_why(error)})", file=str(path)[:200]) from error


def _may_be_replaced(there: os.stat_result, folder: Path) -> bool:
    """Whether a file may be renamed over: in a folder that many may write to, often only by who owns one of the two."""
    if not hasattr(os, "geteuid"):
        return True
    shared = folder.stat()
    return not shared.st_mode & stat.S_ISVTX or os.geteuid() in (0, there.st_uid, shared.st_uid)


def _same(one: Path, other: Path) -> bool:
    try:
        return one.samefile(other)
    except (OSError, ValueError):
        return False


def _beside(place: Path, what: str) -> Path:
    # The name stays short whatever the output's own length, and is unguessable, so leftovers of a kill never collide.
    return place.parent / f".takeoff-{secrets.token_hex(8)}.{what}"


def _create(temporary: Path, place: Path) -> None:
    # Ordinary rights under the user's mask, as if the program had opened the output itself.
    try:
        os.close(os.open(temporary, os.O_CREAT | os.O_EXCL | os.O_WRONLY, 0o666))
    except OSError as error:
        raise OutputError(f"cannot be written ({_why(error)})", file=place) from error


def _to_disk(path: Path) -> None:
    handle = os.open(path, os.O_RDWR)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)


def _put_in_place(places: list[Path], waiting: list[Path], replace: bool) -> None:
    """The last step. On any failure, an interrupt included, earlier files are put back and new ones taken away."""
    kept: list[tuple[Path, Path]] = []
    moved: list[Path] = []
    done = False
    try:
        for place, temporary in zip(places, waiting, strict=True):
            try:
                if place.exists():
                    if not replace:
                        raise OutputError("exists already and is kept", file=place, right="another name, or add --replace")
                    kept.append((place, _beside(place, "old")))
                    _keep(*kept[-1])
                moved.append(place)
                temporary.replace(place)
            except OSError as error:
                raise OutputError(f"cannot be written ({_why(error)})", file=place) from error
        done = True
    finally:
        if not done:
            for place, temporary in zip(places, waiting, strict=True):
                # A place is ours only when its new file has left where it waited.
                if place in moved and not temporary.exists():
                    _remove(place)
            for place, old in kept:
                if old.exists():
                    old.replace(place)  # does nothing where both are still one file
        for _, old in kept:
            _remove(old)
    for folder in {place.parent for place in places}:
        _folder_to_disk(folder)


def _keep(place: Path, old: Path) -> None:
    """A second name for what stands at `place`, so that it is never missing, not even for a moment."""
    try:
        os.link(place, old)
    except OSError:  # a file system without second names
        place.replace(old)


def _folder_to_disk(folder: Path) -> None:
    # Not every system lets a folder be opened; the files themselves are on disk already.
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)


def _remove(path: Path) -> None:
    with contextlib.suppress(OSError):
        path.unlink()


def _why(error: OSError | ValueError) -> str:
    return getattr(error, "strerror", None) or str(error)
