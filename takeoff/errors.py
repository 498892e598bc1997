"""What can go wrong, as one small tree: every leaf keeps its parts, and `str()` composes the sentence.

Rank 0: imports nothing of ours. The command line turns any `TakeoffError` into one message and an exit status.
"""

from __future__ import annotations

from pathlib import Path

#: characters of what was read, and of what we say of it, that a message shows: a cell or a key may hold millions
_MOST_READ, _MOST_SAID = 160, 600


class TakeoffError(Exception):
    """Base of every error this package raises on purpose.

    Parameters
    ----------
    what : what is wrong, one clause, no full stop.
    file, sheet, cell : where, as far as it is known. `cell` is what a spreadsheet program would show, such as ``D14``.
    read : the text that was found there.
    right : what would be right, one clause.
    """

    status = 2

    def __init__(
        self,
        what: str,
        *,
        file: str | Path | None = None,
        sheet: str | None = None,
        cell: str | None = None,
        read: str | None = None,
        right: str | None = None,
    ) -> None:
        super().__init__(what)
        self.what = what
        self.file = None if file is None else str(file)
        self.sheet = sheet
        self.cell = cell
        self.read = read
        self.right = right

    def __str__(self) -> str:
        where = place(self.file, self.sheet, self.cell)
        what = shortened(self.what, _MOST_SAID)
        text = f"{where}: {what}" if where else what
        if self.read is not None:
            text += f" (read: {shortened(self.read, _MOST_READ)!r})"
        if self.right:
            text += f". Right would be: {shortened(self.right, _MOST_SAID)}"
        return text + "."


class InputError(TakeoffError):
    """A list, or another file the user named, cannot be read or holds no member list."""


class JobError(TakeoffError):
    """The job file has an unknown key, a wrong type or a value that cannot be."""


class DataError(TakeoffError):
    """A table (ours or the user's own) has a row that may not load, such as one without a source."""


class UnitError(TakeoffError, ValueError):
    """A text that should hold a number with a unit does not."""


class OutputError(TakeoffError):
    """An output cannot be written, or would replace something it must not."""


class AccountError(TakeoffError):
    """Rows read are not rows accounted for: a fault of this program. Nothing is written."""

    status = 4


def shortened(text: str, most: int) -> str:
    """A text of at most so many characters, or its beginning and how long it is."""
    return text if len(text) <= most else f"{text[:most]}… ({len(text):,} characters)"


def place(file: str | None, sheet: str | None, cell: str | None) -> str:
    """Where something stands, the way people say it: ``list.xlsx, sheet Steel, cell D14``."""
    parts = [str(file)] if file else []
    if sheet:
        parts.append(f"sheet {sheet}")
    if cell:
        parts.append(f"cell {cell}")
    return ", ".join(parts)
