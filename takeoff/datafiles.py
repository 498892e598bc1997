"""Finds and reads the CSV tables of `materials/`. Rank 1.

The wheel carries them inside the package (`takeoff/data`); a checkout keeps them at its top. An editable install does
not map them, so both places are looked in, the package first.
"""

from __future__ import annotations

import csv
import stat
from collections.abc import Iterator
from functools import cache
from pathlib import Path

from takeoff.errors import DataError, InputError, TakeoffError

#: a job file, a table of one's own or an earlier record of the run is not larger than this
MOST_MEGABYTES = {"job": 4, "table": 20, "record": 2_000}


@cache
def data_folder() -> Path:
    """The folder with our tables. Raises DataError where neither the package nor the checkout has one."""
    package = Path(__file__).resolve().parent
    for folder in (package / "data", package.parent / "materials"):
        if (folder / "sources.csv").is_file():
            return folder
    raise DataError("the tables are missing from this installation", file=package / "data", right="install the package again")


def refuse_odd_file(path: Path, what: str, kind: str, error: type[TakeoffError] = InputError) -> None:
    """Before a file that the user named is opened: whether there is one, an ordinary one, of a size that is read.

    what : how a message calls it, such as ``the job file``; kind : a key of MOST_MEGABYTES. A pipe or device may never end.
    Raises `error` (InputError) saying so.
    """
    try:
        status = path.stat()
    except (OSError, ValueError) as failed:
        why = "there is no such file" if isinstance(failed, FileNotFoundError) else getattr(failed, "strerror", None) or str(failed)
        raise error(f"{what} cannot be read ({why})", file=path) from failed
    if not stat.S_ISREG(status.st_mode):
        raise error(f"{what} is no ordinary file", file=path, right="the name of a file")
    if status.st_size > MOST_MEGABYTES[kind] * 1e6:
        raise error(f"{what} is {status.st_size / 1e6:,.1f} MB, more than is read", file=path, right=f"at most {MOST_MEGABYTES[kind]:,} MB")


def read_table(path: Path) -> Iterator[tuple[int, dict[str, str]]]:
    """Rows of one CSV with their line numbers, every cell stripped text; UTF-8 with or without a mark.

    Raises DataError on a row with more or fewer cells than the heading, or a file that is not UTF-8.
    """
    with path.open(encoding="utf-8-sig", newline="") as handle:
        reader = csv.reader(handle, strict=True)
        try:
            heading = next(reader, None)
            if heading is None:
                raise DataError("the table is empty", file=path)
            for cells in reader:
                if not cells:
                    continue
                if len(cells) != len(heading):
                    raise DataError(
                        f"line {reader.line_num} has {len(cells)} cells, the heading {len(heading)}",
                        file=path, read=",".join(cells)[:80], right="as many cells as headings; quote a cell that holds a comma",
                    )
                yield reader.line_num, dict(zip(heading, map(str.strip, cells), strict=True))
        except UnicodeDecodeError as error:
            raise DataError("the table is not UTF-8 text", file=path, right="save it as UTF-8") from error
        except csv.Error as error:
            raise DataError(f"line {reader.line_num} is not proper CSV ({error})", file=path) from error
