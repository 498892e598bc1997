"""Files become grids of cells: the only module that opens a workbook or a text table. Rank 3.

A fast reader gives the cell values. It drops what matters to us (errors, formulas without a stored result, hidden rows,
merged cells), so an .xlsx is also looked over by `openxml`, which refuses what no reader takes in safely; and some files
end the reader's whole process, so it runs apart (`apart`).
"""

from __future__ import annotations

import hashlib
import stat
from dataclasses import dataclass, field
from datetime import date, datetime, time, timedelta
from pathlib import Path

from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.job import GuardsPart
from takeoff.lists import apart, openxml
from takeoff.lists.openxml import letters
from takeoff.lists.ownoutputs import refuse_ours
from takeoff.lists.textfile import read_text

Cell = str | float | int | bool | date | datetime | time | timedelta | None

#: workbooks whose XML is looked over before a reader opens them, and those that a reader opens alone
OPEN_WORKBOOKS = {".xlsx", ".xlsm"}
OTHER_WORKBOOKS = {".xls", ".xlsb", ".ods"}
TEXTS = {".csv", ".tsv", ".txt", ".md"}
KINDS_READ = ".xlsx, .xlsm, .xls, .xlsb, .ods, .csv, .tsv or .txt"


@dataclass(slots=True)
class Sheet:
    """One sheet, or one text file (then `name` is None). `rows[0]` is the sheet's row 1; a cell is a plain Python value.

    errors : (row, column) -> what the cell shows (``#DIV/0!``), both from 1.
    unsaved : cells with a formula but no stored result.
    broken : row -> (kind of finding, why its fields cannot be told apart), in a text file.
    merges : (first row, first column, last row, last column) of merged ranges, from 1.
    """

    file: str
    name: str | None
    rows: list[list[Cell]]
    hidden: bool = False
    hidden_rows: frozenset[int] = frozenset()
    errors: dict[tuple[int, int], str] = field(default_factory=dict)
    unsaved: frozenset[tuple[int, int]] = frozenset()
    merges: tuple[tuple[int, int, int, int], ...] = ()
    broken: dict[int, tuple[str, str]] = field(default_factory=dict)
    findings: list[Finding] = field(default_factory=list)


@dataclass(slots=True)
class SourceFile:
    """One file as it was read: its name as given, the checksum of its bytes, its sheets."""

    file: str
    sha256: str
    sheets: list[Sheet]


def cell_name(row: int, column: int) -> str:
    return f"{letters(column)}{row}"


def read_file(path: Path, guards: GuardsPart) -> SourceFile:
    """Every sheet of a workbook, or a text file as one sheet. The file is only read.

    Raises InputError where there is no such file, it is a folder, empty, of another kind, damaged or over the guards.
    """
    name = str(path)
    if path.is_dir():
        raise InputError("is a folder, not a member list", file=name, right=f"the name of a file: {KINDS_READ}")
    try:
        status = path.stat()
        if not stat.S_ISREG(status.st_mode):
            # A pipe or a device may never end.
            raise InputError("is no ordinary file", file=name, right=f"the name of a file: {KINDS_READ}")
        size = status.st_size
        data = b"" if size > guards.megabytes * 1e6 else path.read_bytes()
    except FileNotFoundError as error:
        raise InputError("there is no such file", file=name, right=f"the name of a file that exists: {KINDS_READ}") from error
    except (OSError, ValueError) as error:
        raise InputError(f"cannot be read ({getattr(error, 'strerror', None) or error})", file=name) from error
    if size > guards.megabytes * 1e6:
        raise InputError(
            f"is {size / 1e6:,.0f} MB, over the limit of {guards.megabytes:,.0f} MB", file=name,
            right="a smaller file, or a higher [guards] megabytes in the job file",
        )
    if not data.strip():
        raise InputError("the file is empty", file=name, right="a member list with headings and rows")
    refuse_ours(name, data)
    kind = path.suffix.lower()
    if kind in OPEN_WORKBOOKS or kind in OTHER_WORKBOOKS:
        sheets = _read_workbook(name, data, guards)
    elif kind in TEXTS:
        text = read_text(name, data, guards)
        sheets = [Sheet(name, None, list(map(list, text.rows)), broken=text.broken, findings=text.findings)]
    else:
        raise InputError("this kind of file is not read", file=name, read=path.suffix, right=KINDS_READ)
    return SourceFile(name, hashlib.sha256(data).hexdigest(), sheets)


# --- workbooks -------------------------------------------------------------------------------------------------------


def _read_workbook(name: str, data: bytes, guards: GuardsPart) -> list[Sheet]:
    """The sheets of a workbook of whatever kind its content is; its name's ending may lie."""
    kind = openxml.kind_of(data)
    if kind == "xls" and Path(name).suffix.lower() not in (".xls", ".xla"):
        raise InputError(
            "is not a plain .xlsx workbook: it is encrypted, or an older kind under a new name", file=name,
            right="a workbook saved as .xlsx without a password",
        )
    if kind != "xls":
        openxml.refuse_bomb(name, data, guards)
        if not kind:
            raise InputError("is no workbook of the usual kind", file=name, right="a workbook saved as .xlsx")
    with apart.Reading(name, data, guards) as reading:
        looks = openxml.look_over(name, data, guards) if kind == "xlsx" else {}
        sheets = []
        for title, hidden, rows in reading.sheets():
            if looks and title not in looks:
                raise InputError("the sheets of the workbook cannot be told apart", file=name, sheet=title,
                                 right="a workbook opened and saved once in a spreadsheet program")
            look = looks.get(title, openxml.Look())
            if len(rows) > guards.rows:
                raise InputError(
                    f"the sheet has {len(rows):,} rows, more than is read", file=name, sheet=title,
                    right=f"at most {guards.rows:,} rows, or higher [guards] rows in the job file",
                )
            sheets.append(
                Sheet(
                    name, title, rows, hidden=hidden, hidden_rows=look.hidden_rows, merges=look.merges, errors=look.errors,
                    unsaved=look.unsaved,
                )
            )
    return sheets
