"""Files become grids of cells: the only module that opens a workbook or a text table.

A fast reader gives the cell values; it drops what matters to us (errors, formulas without a stored result, hidden rows,
merged cells) and trusts what it is told about a sheet's size. So the sheet's XML is looked over first, which also keeps
out the sheets that make a reader run wild, and where it shows errors or unsaved formulas a second reader names the cells.
"""

from __future__ import annotations

import hashlib
import io
import re
import zipfile
from dataclasses import dataclass, field
from datetime import date, datetime, time, timedelta
from pathlib import Path
from typing import Any

from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.job import GuardsPart
from takeoff.lists.ownoutputs import refuse_ours
from takeoff.lists.textfile import read_text

Cell = str | float | int | bool | date | datetime | time | timedelta | None

#: workbooks whose XML is looked over before a reader opens them, and those that a reader opens alone
OPEN_WORKBOOKS = {".xlsx", ".xlsm"}
OTHER_WORKBOOKS = {".xls", ".xlsb", ".ods"}
TEXTS = {".csv", ".tsv", ".txt", ".md"}
KINDS_READ = ".xlsx, .xlsm, .xls, .xlsb, .ods, .csv, .tsv or .txt"
MAX_ROW, MAX_COLUMN = 1_048_576, 16_384


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


def letters(column: int) -> str:
    """1 -> A, 27 -> AA."""
    text = ""
    while column:
        column, rest = divmod(column - 1, 26)
        text = chr(65 + rest) + text
    return text


def column_number(text: str) -> int:
    """A -> 1, AA -> 27."""
    number = 0
    for char in text:
        number = number * 26 + ord(char.upper()) - 64
    return number


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
        size = path.stat().st_size
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
        sheets = _read_workbook(path, data, guards, kind in OPEN_WORKBOOKS)
    elif kind in TEXTS:
        text = read_text(name, data, guards.rows)
        sheets = [Sheet(name, None, list(map(list, text.rows)), broken=text.broken, findings=text.findings)]
    else:
        raise InputError("this kind of file is not read", file=name, read=path.suffix, right=KINDS_READ)
    return SourceFile(name, hashlib.sha256(data).hexdigest(), sheets)


# --- workbooks -------------------------------------------------------------------------------------------------------

_ROW_HIDDEN = re.compile(rb'<(?:\w+:)?row\b[^>]*?\bhidden="(?:1|true)"[^>]*>')
_ROW_NUMBER = re.compile(rb'<(?:\w+:)?row\b[^>]*?\br="(\d+)"')
_WIDE_CELL = re.compile(rb'\br="([A-Za-z]{3,})\d')
_LAST_CELL = re.compile(rb'<(?:\w+:)?c\b[^>]*?\br="([A-Za-z]+)(\d+)"')
_MERGE = re.compile(rb'<(?:\w+:)?mergeCell\b[^>]*?\bref="([A-Za-z]+)(\d+):([A-Za-z]+)(\d+)"')
_ERROR_CELL = re.compile(rb'\bt="e"')
_UNSAVED = re.compile(rb"(?:</(?:\w+:)?f>|<(?:\w+:)?f\b[^>]*/>)\s*(?:<(?:\w+:)?v\s*/>|<(?:\w+:)?v>\s*</(?:\w+:)?v>)?\s*</(?:\w+:)?c>")


_COMPOUND_FILE = b"\xd0\xcf\x11\xe0"


@dataclass(slots=True)
class _Look:
    """What a first look at a sheet's XML tells."""

    last_row: int = 0
    last_column: int = 0
    hidden_rows: frozenset[int] = frozenset()
    merges: tuple[tuple[int, int, int, int], ...] = ()
    troubled: bool = False


def _read_workbook(path: Path, data: bytes, guards: GuardsPart, is_open: bool) -> list[Sheet]:
    name = str(path)
    if is_open and data[:4] == _COMPOUND_FILE:
        raise InputError(
            "is not a plain .xlsx workbook: it is encrypted, or an older kind under a new name", file=name,
            right="a workbook saved as .xlsx without a password",
        )
    if not is_open and path.suffix.lower() != ".xls":
        _refuse_bomb(name, data, guards)
    looks = _look_over(name, data, guards) if is_open else {}
    import python_calamine as calamine

    try:
        book = calamine.CalamineWorkbook.from_path(str(path))
        sheets = []
        for meta in book.sheets_metadata:
            if meta.typ != calamine.SheetTypeEnum.WorkSheet:
                continue
            look = looks.get(meta.name, _Look())
            rows: list[list[Any]] = book.get_sheet_by_name(meta.name).to_python(skip_empty_area=False)
            sheets.append(
                Sheet(
                    name, meta.name, [[None if cell == "" else cell for cell in row] for row in rows],
                    hidden=meta.visible != calamine.SheetVisibleEnum.Visible, hidden_rows=look.hidden_rows,
                    merges=look.merges,
                )
            )
    except (calamine.CalamineError, ValueError, OSError, MemoryError) as error:
        raise InputError(f"the workbook cannot be read ({error})", file=name, right="a workbook saved as .xlsx") from error
    for sheet in sheets:
        size = len(sheet.rows) * max(map(len, sheet.rows), default=0)
        if len(sheet.rows) > guards.rows or size > guards.cells:
            raise InputError(f"the sheet has {len(sheet.rows):,} rows and {size:,} cells, more than is read", file=name, sheet=sheet.name,
                             right=f"at most {guards.rows:,} rows and {guards.cells:,} cells, or higher [guards] in the job file")
    troubled = [sheet for sheet in sheets if looks.get(sheet.name or "", _Look()).troubled]
    if troubled:
        _name_troubled_cells(path, troubled)
    return sheets


def _refuse_bomb(name: str, data: bytes, guards: GuardsPart) -> None:
    """Raises InputError on a packed workbook that is damaged or unpacks beyond the guards."""
    limit = guards.megabytes * 1e6 * 10
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            unpacked = sum(info.file_size for info in archive.infolist())
    except (zipfile.BadZipFile, EOFError, OSError) as error:
        raise InputError(f"the workbook is damaged or no workbook ({error})", file=name, right="a workbook of its kind") from error
    if unpacked > limit:
        raise InputError(
            f"unpacks to more than {limit / 1e6:,.0f} MB", file=name,
            right="a smaller workbook, or a higher [guards] megabytes in the job file",
        )


def _look_over(name: str, data: bytes, guards: GuardsPart) -> dict[str, _Look]:
    """Sheet name -> what its XML shows. Raises InputError on sheets that would make a reader run wild, and damage."""
    import xml.etree.ElementTree as ET

    _refuse_bomb(name, data, guards)
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            parts = {info.filename: info for info in archive.infolist()}
            if "xl/workbook.xml" not in parts:
                raise InputError("is no workbook of the usual kind", file=name, right="a workbook saved as .xlsx")
            for part in ("xl/workbook.xml", "xl/_rels/workbook.xml.rels"):
                if part in parts and b"<!DOCTYPE" in archive.read(part):
                    raise InputError("the workbook declares its own document type", file=name, right="a workbook saved as .xlsx")
            book = ET.fromstring(archive.read("xl/workbook.xml"))
            links = ET.fromstring(archive.read("xl/_rels/workbook.xml.rels"))
            targets = {link.get("Id"): link.get("Target", "") for link in links}
            looks: dict[str, _Look] = {}
            for node in book.iter():
                if not node.tag.endswith("}sheet") and node.tag != "sheet":
                    continue
                link = next((v for k, v in node.attrib.items() if k.endswith("}id")), None)
                target = targets.get(link, "")
                part = target.lstrip("/") if target.startswith("/") else "xl/" + target
                title = node.get("name", "")
                if title in looks:
                    raise InputError("two sheets have one name", file=name, sheet=title, right="a name for each sheet")
                if part not in parts:
                    raise InputError("a sheet's part is missing from the workbook", file=name, sheet=title)
                looks[title] = _look_at(name, title, archive.read(part), guards)
            return looks
    except (zipfile.BadZipFile, ET.ParseError, KeyError, EOFError, NotImplementedError, RuntimeError, OSError) as error:
        raise InputError(f"the workbook is damaged or no workbook ({error})", file=name, right="a workbook saved as .xlsx") from error


def _look_at(file: str, sheet: str, xml: bytes, guards: GuardsPart) -> _Look:
    rows = [int(number) for number in _ROW_NUMBER.findall(xml)]
    last_row = max(rows, default=0)
    last_column = 0
    if xml.rfind(b'<c ') >= 0 or b":c " in xml:
        wide = {column_number(m.decode()) for m in set(_WIDE_CELL.findall(xml))}
        last_column = max(wide, default=0) or 702  # no cell beyond ZZ
        if last_column == 702:
            ends = _LAST_CELL.findall(xml, 0, min(len(xml), 2_000_000))
            last_column = max((column_number(c.decode()) for c, _ in ends), default=0)
    if last_row >= MAX_ROW or last_column >= MAX_COLUMN or last_row * max(last_column, 1) > guards.cells or last_row > guards.rows:
        raise InputError(
            f"the sheet reaches to row {last_row:,} and column {letters(min(last_column, 10**6)) or 'A'}, more than is read",
            file=file, sheet=sheet,
            right=f"at most {guards.rows:,} rows and {guards.cells:,} cells, or higher [guards] in the job file",
        )
    # The plain search before each pattern spares a long sheet that has none of it.
    hidden = frozenset(
        int(found.group(1)) for tag in (_ROW_HIDDEN.findall(xml) if b"hidden=" in xml else ()) if (found := re.search(rb'\br="(\d+)"', tag))
    )
    merges = tuple(
        (int(r1), column_number(c1.decode()), int(r2), column_number(c2.decode()))
        for c1, r1, c2, r2 in (_MERGE.findall(xml) if b"mergeCell" in xml else ())
    )
    troubled = bool(_ERROR_CELL.search(xml) or ((b"<f" in xml or b":f" in xml) and _UNSAVED.search(xml)))
    return _Look(last_row, last_column, hidden, merges, troubled)


def _name_troubled_cells(path: Path, sheets: list[Sheet]) -> None:
    """Fill `errors` and `unsaved` of sheets whose XML shows either, by a reader that keeps them."""
    import warnings

    import openpyxl

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        formulas = openpyxl.load_workbook(path, data_only=False)
        results = openpyxl.load_workbook(path, data_only=True)
    for sheet in sheets:
        with_formulas, with_results = formulas[sheet.name or ""], results[sheet.name or ""]
        unsaved: set[tuple[int, int]] = set()
        for number, row in enumerate(with_formulas.iter_rows(), 1):
            for column, cell in enumerate(row, 1):
                place = (number, column)
                shown = with_results.cell(*place)
                if shown.data_type == "e":
                    sheet.errors[place] = str(shown.value)
                elif cell.data_type == "f" and shown.value is None:
                    unsaved.add(place)
        sheet.unsaved = frozenset(unsaved)
