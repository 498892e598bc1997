"""Files become grids of cells: the only module that opens a workbook or a text table. Rank 3.

A fast reader gives the cell values. It drops what matters to us (errors, formulas without a stored result, hidden rows,
merged cells, number formats, struck-out cells, comments), so an .xlsx is also looked over by `openxml`, which refuses what no
reader takes in safely, and an .ods by `opendoc`; a cell then counts as a person sees it (`cellformats`). Some files end the
reader's whole process, so it runs apart (`apart`).
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
from takeoff.lists import apart, cellformats, cellstyles, opendoc, openxml
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
    disguised : cells whose number format shows another number than they hold, or none.
    struck, partly_struck : cells struck out, and those with a part of their text struck out.
    hidden_columns : (first, last) of hidden ranges of columns. blind : the kind of file whose looks and errors cannot be seen.
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
    disguised: dict[tuple[int, int], cellformats.Disguise] = field(default_factory=dict)
    struck: frozenset[tuple[int, int]] = frozenset()
    partly_struck: frozenset[tuple[int, int]] = frozenset()
    hidden_columns: tuple[tuple[int, int], ...] = ()
    blind: str = ""


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
    try:
        status = path.stat()
        if stat.S_ISDIR(status.st_mode):
            raise InputError("is a folder, not a file", file=name, right=f"the name of a file: {KINDS_READ}")
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
        looks: dict[str, openxml.Look] = {}
        if kind in ("xlsx", "ods"):
            looks = (openxml if kind == "xlsx" else opendoc).look_over(name, data, guards)
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
            sheet = Sheet(
                name, title, rows, hidden=hidden, hidden_rows=look.hidden_rows, merges=look.merges, errors=look.errors,
                unsaved=look.unsaved, struck=look.struck, partly_struck=look.partly_struck, hidden_columns=look.hidden_columns,
                blind=f".{kind}" if kind in ("xls", "xlsb") else "",
            )
            _as_seen(sheet, look)
            _say_what_stands_beside(sheet, look)
            sheets.append(sheet)
    return sheets


def _as_seen(sheet: Sheet, look: openxml.Look) -> None:
    """Put into the sheet's cells what they show, where a number format prints letters; note those that show something else."""
    known: dict[tuple[str, Cell], Cell | cellformats.Disguise] = {}
    hidden_texts: list[str] = []
    for (row, column), told in (look.codes or look.shown).items():
        cells = sheet.rows[row - 1] if row <= len(sheet.rows) else []
        cell = cells[column - 1] if column <= len(cells) else None
        if isinstance(cell, bool) or not isinstance(cell, int | float | str):
            continue
        if (told, cell) not in known:
            known[told, cell] = cellformats.as_shown(cell, told) if look.codes else cellformats.as_text_shows(cell, told)
        seen = known[told, cell]
        if not isinstance(seen, cellformats.Disguise):
            cells[column - 1] = seen
        elif isinstance(cell, str):
            hidden_texts.append(cell_name(row, column))
        else:
            sheet.disguised[row, column] = seen
            if seen.shown:
                cells[column - 1] = cellformats.Shown(seen.shown)
    if hidden_texts:
        message = "the cell's number format hides its text; it was read all the same"
        sheet.findings.append(Finding("note", "number-format", message, sheet.file, sheet.name, hidden_texts[0], count=len(hidden_texts),
                                      cells=tuple(hidden_texts)))


def _say_what_stands_beside(sheet: Sheet, look: openxml.Look) -> None:
    """The sheet's comments, and what of it could not be looked at."""
    for row, column, text in look.comments[:cellstyles.MOST_COMMENTS]:
        finding = Finding("note", "cell-comment", "a comment stands at this cell; it is passed on, not read", read=text)
        sheet.findings.append(finding.at(sheet.file, sheet.name, cell_name(row, column)))
    more = [cell_name(row, column) for row, column, _ in look.comments[cellstyles.MOST_COMMENTS:]]
    if more:
        message = f"{len(more)} more comments stand in the sheet"
        sheet.findings.append(Finding("note", "cell-comment", message, sheet.file, sheet.name, more[0], count=len(more), cells=tuple(more)))
    for message in look.unknown:
        sheet.findings.append(Finding("note", "not-looked-at", message, sheet.file, sheet.name, right="a look at the sheet itself"))
