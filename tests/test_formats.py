"""One list in every kind of file gives one answer."""

from __future__ import annotations

import struct
import subprocess
import zipfile
from pathlib import Path

import openpyxl
import pytest
from conftest import HEADINGS, WriteList, need_program

from takeoff import pipeline
from takeoff.errors import InputError

ROWS = [
    ["A1", "F1", 2, "UB 203x133x25", "S355", 6000],
    ["A2", "F1", 4, "SHS 100x100x5", "S355", 3210.5],
    ["A3", "F2", 1, "PL 10x200", "S275", 400],
    ["Träger", "F2", 3, "Ø20", "S235", "1.25 m"],
]


@pytest.fixture
def reference(write_list: WriteList) -> pipeline.Result:
    return pipeline.schedule([write_list(ROWS, "reference.xlsx")])


def same(result: pipeline.Result, reference: pipeline.Result) -> None:
    assert result.account.as_record() == reference.account.as_record()
    assert result.totals.mass_kg == reference.totals.mass_kg
    assert result.members["mark"].tolist() == reference.members["mark"].tolist()


@pytest.mark.parametrize("kind", ["xls", "ods"])
def test_other_workbooks(write_list: WriteList, reference: pipeline.Result, kind: str) -> None:
    """Workbooks of other programs, made by one."""
    program = need_program("soffice")
    path = write_list(ROWS, "list.xlsx")
    home = path.parent / "home"
    subprocess.run(
        [program, f"-env:UserInstallation=file://{home}", "--headless", "--convert-to", kind, "--outdir", str(path.parent), str(path)],
        check=True,
        capture_output=True,
        timeout=120,
    )
    same(pipeline.schedule([path.with_suffix(f".{kind}")]), reference)


def _record(kind: int, data: bytes = b"") -> bytes:
    """One record of a binary workbook: number and size in groups of seven bits, then the data."""
    head = bytes([kind]) if kind < 128 else bytes([kind & 0x7F | 0x80, kind >> 7])
    size = len(data)
    return head + (bytes([size]) if size < 128 else bytes([size & 0x7F | 0x80, size >> 7])) + data


def _wide(text: str) -> bytes:
    return struct.pack("<I", len(text)) + text.encode("utf-16-le")


def test_a_binary_workbook(tmp_path: Path, reference: pipeline.Result) -> None:
    """The binary kind (MS-XLSB), written here record by record, since no free program writes it."""
    cells = b""
    for number, row in enumerate([HEADINGS, *ROWS]):
        cells += _record(0, struct.pack("<IIHBBB", number, 0, 300, 0, 0, 0) + struct.pack("<I", 0))
        for column, value in enumerate(row):
            place = struct.pack("<II", column, 0)
            cells += _record(6, place + _wide(value)) if isinstance(value, str) else _record(5, place + struct.pack("<d", value))
    sheet = (
        _record(129)
        + _record(148, struct.pack("<IIII", 0, len(ROWS), 0, len(HEADINGS) - 1))
        + _record(145)
        + cells
        + _record(146)
        + _record(130)
    )
    book = (
        _record(131) + _record(143) + _record(156, struct.pack("<II", 0, 1) + _wide("rId1") + _wide("List")) + _record(144) + _record(132)
    )
    kind = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
    links = (
        '<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
        '<Relationship Id="rId1" Type="{}" Target="{}"/></Relationships>'
    )
    with zipfile.ZipFile(tmp_path / "list.xlsb", "w") as archive:
        archive.writestr("[Content_Types].xml", '<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"/>')
        archive.writestr("_rels/.rels", links.format(f"{kind}/officeDocument", "xl/workbook.bin"))
        archive.writestr("xl/workbook.bin", book)
        archive.writestr("xl/_rels/workbook.bin.rels", links.format(f"{kind}/worksheet", "worksheets/sheet1.bin"))
        archive.writestr("xl/worksheets/sheet1.bin", sheet)
    same(pipeline.schedule([tmp_path / "list.xlsb"]), reference)


def test_a_workbook_with_macros_by_name(write_list: WriteList, reference: pipeline.Result) -> None:
    """The kind with macros reads like the plain one; nothing in it is run."""
    path = write_list(ROWS, "list.xlsx")
    path.rename(path.with_suffix(".xlsm"))
    same(pipeline.schedule([path.with_suffix(".xlsm")]), reference)


def _text(separator: str, decimal: str = ".") -> str:
    return (
        "\n".join(
            separator.join(str(c).replace(".", decimal) if isinstance(c, float) else str(c) for c in row) for row in [HEADINGS, *ROWS]
        )
        + "\n"
    )


@pytest.mark.parametrize(
    ("name", "separator", "encoding"),
    [
        ("list.csv", ",", "utf-8"),
        ("list.csv", ",", "utf-8-sig"),
        ("list.csv", ";", "cp1252"),
        ("list.tsv", "\t", "utf-16"),
        ("list.txt", "\t", "utf-8"),
        ("list.txt", ";", "utf-16-le"),
    ],
)
def test_text_files(tmp_path: Path, reference: pipeline.Result, name: str, separator: str, encoding: str) -> None:
    """Commas, semicolons and tabs, in the usual encodings, with or without a mark."""
    (tmp_path / name).write_bytes(_text(separator).encode(encoding))
    same(pipeline.schedule([tmp_path / name]), reference)


def test_a_pipe_table_in_a_text_file(tmp_path: Path, reference: pipeline.Result) -> None:
    """A table drawn with pipes, its rule below the headings counted among the other rows."""
    lines = _text(" | ").splitlines()
    table = [f"| {line} |" for line in lines]
    table.insert(1, "|" + "---|" * len(HEADINGS))
    (tmp_path / "list.txt").write_text("\n".join(table) + "\n", encoding="utf-8")
    result = pipeline.schedule([tmp_path / "list.txt"])
    assert result.totals.mass_kg == reference.totals.mass_kg
    assert result.account.other == 1


def test_several_files_and_sheets_in_one_run(tmp_path: Path) -> None:
    """Lists of two files and two sheets add up, each with its own account."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    for row in [HEADINGS, ROWS[0]]:
        sheet.append(row)
    second = book.create_sheet("Second")
    for row in [["Frame two"], HEADINGS, ROWS[1]]:
        second.append(row)
    book.create_sheet("Empty")
    book.save(tmp_path / "a.xlsx")
    (tmp_path / "b.csv").write_text(",".join(HEADINGS) + "\nB1,F9,1,UB 203x133x25,S355,1000\n")
    result = pipeline.schedule([tmp_path / "a.xlsx", tmp_path / "b.csv"])
    assert result.totals.quantity == 2 + 4 + 1
    assert [(a.sheet, a.account.rows) for a in result.sheet_accounts] == [("Sheet", 2), ("Second", 3), ("Empty", 0), (None, 2)]
    assert result.account.rows == 7


def test_the_same_list_in_two_places_counts_once(tmp_path: Path) -> None:
    """A copy on another sheet, or the CSV beside the workbook, is not read again, and says so; the job file may choose."""
    book = openpyxl.Workbook()
    book.remove(book.worksheets[0])
    for name in ("current", "redesign"):
        sheet = book.create_sheet(name)
        for row in [HEADINGS, *ROWS]:
            sheet.append(row)
    book.save(tmp_path / "a.xlsx")
    (tmp_path / "a.csv").write_text(_text(";"), encoding="utf-8")
    one = pipeline.schedule([tmp_path / "a.xlsx"])
    assert one.totals.quantity == 10
    assert [f.sheet for f in one.findings if f.kind == "list-twice"] == ["redesign"]
    with pytest.raises(InputError, match="repeats the one on sheet current"):
        pipeline.schedule([tmp_path / "a.xlsx", tmp_path / "a.csv"])
    from takeoff.job import job_from

    both = pipeline.schedule([tmp_path / "a.xlsx"], job_from({"reading": {"sheets": ["current", "redesign"]}}))
    assert both.totals.quantity == 20


def test_a_chosen_range(tmp_path: Path) -> None:
    """Side by side lists are refused until [reading] tables names one."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append([*HEADINGS, None, *HEADINGS])
    sheet.append([*ROWS[0], None, *ROWS[1]])
    book.save(tmp_path / "a.xlsx")
    with pytest.raises(InputError, match="side by side"):
        pipeline.schedule([tmp_path / "a.xlsx"])
    from takeoff.job import job_from

    chosen = pipeline.schedule([tmp_path / "a.xlsx"], job_from({"reading": {"tables": ["Sheet!H1:M9"]}}))
    assert chosen.members["mark"].tolist() == ["A2"]


def test_two_line_headings(tmp_path: Path) -> None:
    """A heading broken over two rows is read as one."""
    (tmp_path / "a.csv").write_text("Mark,Qty,Section,Steel,Cut\n,,,grade,length (mm)\nA1,2,UB 203x133x25,S355,6000\n")
    result = pipeline.schedule([tmp_path / "a.csv"])
    assert result.members["length_mm"].tolist() == [6000]
    assert result.account.heading == 2
