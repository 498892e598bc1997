"""Broken and hostile workbooks: one message and status 2, whatever the reader would have made of them; or read right."""

from __future__ import annotations

import shutil
import warnings
import zipfile
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import hostile as h
import pytest

from takeoff import pipeline
from takeoff.errors import InputError
from takeoff.job import job_from
from takeoff.lists import apart

Run = Callable[..., "CompletedProcess[str]"]

def _twice(path: Path) -> Path:
    h.write(path, h.sheet(h.PLAIN))
    with warnings.catch_warnings(), zipfile.ZipFile(path, "a") as archive:
        warnings.simplefilter("ignore")
        archive.writestr(h.SHEET_PART, h.sheet(h.PLAIN + h.FAR))
    return path


def _open_row(*texts: str) -> str:
    cells = "".join(f'<table:table-cell office:value-type="string"><text:p>{text}</text:p></table:table-cell>' for text in texts)
    return f"<table:table-row>{cells}</table:table-row>"


def _locked(path: Path) -> Path:
    """The mark of encryption set on every part, as a zip program with a password would."""
    data = bytearray(h.write(path, h.sheet(h.PLAIN)).read_bytes())
    for mark, flags in ((b"PK\x03\x04", 6), (b"PK\x01\x02", 8)):
        at = data.find(mark)
        while at >= 0:
            data[at + flags] |= 1
            at = data.find(mark, at + 4)
    path.write_bytes(bytes(data))
    return path


def _archive(path: Path) -> Path:
    with zipfile.ZipFile(path, "w") as archive:
        archive.writestr("holiday.txt", "sun")
    return path


def _flipped(path: Path) -> Path:
    h.write(path, h.sheet(h.PLAIN))
    data = bytearray(path.read_bytes())
    start = data.rindex(b"sheet1.xml", 0, data.rindex(b"PK\x01\x02")) + 30
    data[start:start + 4] = b"\xff\xff\xff\xff"
    path.write_bytes(bytes(data))
    return path


def _cut(path: Path, end: int) -> Path:
    data = h.write(path, h.sheet(h.PLAIN)).read_bytes()
    path.write_bytes(data[:end])
    return path


def _with_bytes(path: Path, data: bytes) -> Path:
    path.write_bytes(data)
    return path


def _book(**parts: str | bytes) -> dict[str, str | bytes]:
    return {"xl/workbook.xml": parts["book"]}


#: workbooks that end the reader's whole process, or send it for hours: each in a way of its own
ABORTING: dict[str, Callable[[Path], Path]] = {
    "a cell in the last corner, in single quotes": lambda p: h.write(p, h.sheet(h.PLAIN + h.FAR)),
    "a cell in the last corner, spaced": lambda p: h.write(p, h.sheet(h.PLAIN + h.FAR.replace("r='", "r = '"))),
    "a cell that names an absurd row": lambda p: h.write(p, h.sheet(h.heading() + '<row r="2"><c r="B999999999"><v>1</v></c></row>')),
    "a cell far outside its row": lambda p: h.write(p, h.sheet(h.heading() + '<row r="2"><c r="ZZ999999"><v>1</v></c></row>')),
    "an absurd column": lambda p: h.write(p, h.sheet(h.heading() + '<row r="2"><c r="ZZZZZZZZZZ2"><v>1</v></c></row>')),
    "an absurd row number": lambda p: h.write(p, h.sheet(h.PLAIN + f'<row r="{9 ** 20}"><c r="A{9 ** 20}"><v>1</v></c></row>')),
    "a second sheet part that differs in case": lambda p: h.write(p, h.sheet(h.PLAIN), {
        "xl/worksheets/SHEET1.xml": h.sheet(h.PLAIN + h.FAR)}),
    "the same part twice": _twice,
    "a spreadsheet that repeats a row a thousand million times": lambda p: h.open_document(
        p.with_suffix(".ods"), _open_row("Mark", "Section") + _open_row("x").replace("<table:table-row", '<table:table-row table:number-rows-repeated="999999999"')),
    "a spreadsheet that repeats every cell": lambda p: h.open_document(
        p.with_suffix(".ods"), '<table:table-row table:number-rows-repeated="1048570">'
        '<table:table-cell table:number-columns-repeated="16384" office:value-type="string"><text:p>x</text:p></table:table-cell></table:table-row>'),
}


@pytest.mark.parametrize("case", ABORTING)
def test_what_ends_the_reader_does_not_end_the_command(run: Run, tmp_path: Path, case: str) -> None:
    """The installed command says one thing, ends with status 2 and leaves nothing."""
    path = ABORTING[case](tmp_path / "list.xlsx")
    before = path.read_bytes()
    done = run("schedule", path)
    assert done.returncode == 2, done.stderr
    assert done.stdout == ""
    assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    assert path.name in done.stderr
    assert [p.name for p in tmp_path.iterdir()] == [path.name]
    assert path.read_bytes() == before


def test_a_count_of_texts_that_no_memory_holds(run: Run, tmp_path: Path) -> None:
    """Some versions of the reader believe the count, and abort; others pass over it. Neither ends the command."""
    texts = f'<sst xmlns="{h.MAIN}" count="4000000000" uniqueCount="4000000000"><si><t>a</t></si></sst>'
    done = run("schedule", h.write(tmp_path / "list.xlsx", h.sheet(h.PLAIN), {"xl/sharedStrings.xml": texts}))
    assert (done.returncode, "the reader stopped" in done.stderr) in ((0, False), (2, True)), done.stderr


@pytest.mark.parametrize("ending", ["raise SystemExit(3)", "import os; os.abort()", "import os, signal; os.kill(os.getpid(), signal.SIGKILL)"])
def test_a_reader_that_ends_in_any_way_is_one_message(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, ending: str) -> None:
    """Whatever ends the reader's process ends that process alone."""
    broken = tmp_path / "reader.py"
    broken.write_text(ending)
    monkeypatch.setattr(apart.reader, "__file__", str(broken))
    path = h.write(tmp_path / "list.xlsx", h.sheet(h.PLAIN))
    with pytest.raises(InputError, match="the reader stopped"):
        pipeline.read([path])


def test_a_reader_that_takes_too_long_is_stopped(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The time of [guards] seconds holds for it too."""
    slow = tmp_path / "reader.py"
    slow.write_text("import time; time.sleep(60)")
    monkeypatch.setattr(apart.reader, "__file__", str(slow))
    path = h.write(tmp_path / "list.xlsx", h.sheet(h.PLAIN))
    with pytest.raises(InputError, match=r"reading took over 0\.5 s.*higher \[guards\] seconds"):
        pipeline.read([path], job_from({"guards": {"seconds": 0.5}}))


BROKEN: dict[str, tuple[Callable[[Path], Path], str]] = {
    "two rows with one number": (lambda p: h.write(p, h.sheet(h.heading() + h.row(2) + h.row(2))), "two rows bear the number 2"),
    "two cells with one name": (
        lambda p: h.write(p, h.sheet(h.PLAIN.replace('"B2"><v>', '"A2"><v>'))), "two cells bear the name A2"),
    "two cells with one name, oddly written": (
        lambda p: h.write(p, h.sheet(h.PLAIN.replace('r="B2"', "r='A2'"))), "two cells bear the name A2"),
    "rows out of order": (lambda p: h.write(p, h.sheet(h.heading() + h.row(5) + h.row(3))), "out of order"),
    "a cell in another row": (
        lambda p: h.write(p, h.sheet(h.PLAIN + '<row r="3"><c r="F2"><v>5</v></c></row>')), "out of order, or a cell stands in"),
    "a row of no number": (lambda p: h.write(p, h.sheet(h.PLAIN + '<row r="-3"><c r="A-3"/></row>')), "a row bears the number -3"),
    "a cell of no name": (lambda p: h.write(p, h.sheet(h.PLAIN + '<row r="3"><c r="AB"/></row>')), "a cell in row 3 bears the name AB"),
    "row nought": (lambda p: h.write(p, h.sheet('<row r="0"><c r="A0"/></row>' + h.PLAIN)), "out of order"),
    "two sheets with one name": (lambda p: h.write(p, h.sheet(h.PLAIN), h.two_sheets("List")), "two sheets have one name"),
    "two sheets with one name but for case": (lambda p: h.write(p, h.sheet(h.PLAIN), h.two_sheets("LIST")), "two sheets have one name"),
    "a missing sheet part": (lambda p: h.write(p, "", without=h.SHEET_PART), "a sheet's part is missing"),
    "no list of parts": (lambda p: h.write(p, "", without="xl/_rels/workbook.xml.rels"), "damaged or no workbook"),
    "no sheets": (
        lambda p: h.write(p, "", _book(book=h.WORKBOOK.replace('<sheet name="List" sheetId="1" r:id="rId1"/>', ""))), "no member list"),
    "a bomb of entities in the workbook": (
        lambda p: h.write(p, h.sheet(h.PLAIN), _book(book=h.WORKBOOK.replace("<workbook", h.BOMB + "<workbook").replace('"List"', '"&j;"'))),
        "declares its own document type"),
    "a bomb of entities in the sheet": (
        lambda p: h.write(p, h.sheet(h.PLAIN.replace("M2", "&j;"), before=h.BOMB)), "declares its own document type"),
    "a bomb of entities in UTF-16": (
        lambda p: h.write(p, h.sheet(h.PLAIN), _book(book=(
            '<?xml version="1.0" encoding="UTF-16"?>' + h.BOMB + h.WORKBOOK.partition("?>")[2].replace('"List"', '"&j;"')).encode("utf-16"))),
        "not written in UTF-8"),
    "an outer entity": (
        lambda p: h.write(p, h.sheet(h.PLAIN.replace("M2", "&x;"), before='<!DOCTYPE x [<!ENTITY x SYSTEM "file:///etc/hostname">]>')),
        "declares its own document type"),
    "a sheet in UTF-16": (lambda p: h.write(p, h.sheet(h.PLAIN).encode("utf-16")), "not written in UTF-8"),
    "cut-off XML": (lambda p: h.write(p, h.sheet(h.PLAIN)[:-70]), "cannot be read|damaged"),
    "a merged range of no cells": (
        lambda p: h.write(p, h.sheet(h.PLAIN, after='<mergeCells><mergeCell ref="A2:A99999999999999"/></mergeCells>')),
        "a merged range is no range of cells"),
    "merged ranges over each other": (
        lambda p: h.write(p, h.sheet(h.PLAIN, after='<mergeCells><mergeCell ref="A2:A9000"/><mergeCell ref="A3:A9001"/></mergeCells>')),
        "merged ranges overlap"),
    "a text that is not there": (lambda p: h.write(p, h.sheet(h.PLAIN + '<row r="3"><c r="A3" t="s"><v>99</v></c></row>')), "cannot be read"),
    "half a file": (lambda p: _cut(p, 700), "damaged or no workbook"),
    "a file without its end": (lambda p: _cut(p, -30), "damaged or no workbook"),
    "damaged packing": (_flipped, "damaged or no workbook"),
    "nothing but zero bytes": (lambda p: _with_bytes(p, b"\0" * 5000), "damaged or no workbook|the file is empty"),
    "a picture": (lambda p: _with_bytes(p, b"\x89PNG\r\n\x1a\n" + b"x" * 500), "damaged or no workbook"),
    "a text": (lambda p: _with_bytes(p, b"Mark,Quantity\n"), "damaged or no workbook"),
    "an encrypted workbook": (lambda p: _with_bytes(p, b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 4000), "encrypted, or an older kind"),
    "an older workbook of rubbish": (
        lambda p: _with_bytes(p.with_suffix(".xls"), b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\xff" * 4000), "cannot be read"),
    "a part behind a password": (_locked, "the workbook is encrypted"),
    "an archive of something else": (_archive, "no workbook of the usual kind"),
}


@pytest.mark.parametrize("case", BROKEN)
def test_a_broken_workbook_is_one_message(tmp_path: Path, case: str) -> None:
    """Each kind of damage is said, and never half read."""
    make, says = BROKEN[case]
    with pytest.raises(InputError, match=says):
        pipeline.read([make(tmp_path / "list.xlsx")])


READ: dict[str, Callable[[Path], Path]] = {
    "as most programs write it": lambda p: h.write(p, h.sheet(h.PLAIN)),
    "the strict namespace": lambda p: h.write(
        p, h.strict(h.sheet(h.PLAIN)), {"xl/workbook.xml": h.strict(h.WORKBOOK), "xl/_rels/workbook.xml.rels": h.strict(h.RELATIONS)}),
    "a prefix on every tag": lambda p: h.write(
        p, h.sheet(h.PLAIN).replace("<", "<x:").replace("<x:/", "</x:").replace("<x:?", "<?").replace("xmlns=", "xmlns:x=")),
    "single quotes": lambda p: h.write(p, h.sheet(h.PLAIN).replace('"', "'")),
    "places left out": lambda p: h.write(p, h.sheet(h.PLAIN.replace(' r="1"', "").replace(' r="2"', ""))),
    "a remark between rows": lambda p: h.write(p, h.sheet(h.PLAIN + '<!-- <row r="2"/> -->')),
    "a wrong declared size": lambda p: h.write(p, h.sheet(h.PLAIN).replace("<sheetData>", '<dimension ref="A1"/><sheetData>')),
    "an absurd declared size": lambda p: h.write(
        p, h.sheet(h.PLAIN).replace("<sheetData>", '<dimension ref="A1:XFD1048576"/><sheetData>')),
    "a merged range as large as the sheet": lambda p: h.write(
        p, h.sheet(h.PLAIN, after='<mergeCells><mergeCell ref="G1:XFD1048576"/></mergeCells>')),
    "the name of an older kind": lambda p: Path(shutil.move(h.write(p, h.sheet(h.PLAIN)), p.with_suffix(".xls"))),
    "the name of another kind": lambda p: Path(shutil.move(h.write(p, h.sheet(h.PLAIN)), p.with_suffix(".ods"))),
}


@pytest.mark.parametrize("case", READ)
def test_an_odd_but_whole_workbook_is_read_right(tmp_path: Path, case: str) -> None:
    """The same one row of two beams, whatever way it is written."""
    result = pipeline.schedule([READ[case](tmp_path / "list.xlsx")])
    assert result.account.as_record() | {"assumed": 0} == {
        "rows": 2, "weighed": 1, "assumed": 0, "not_weighed": 0, "heading": 1, "total": 0, "blank": 0, "other": 0,
    }
    assert result.totals.mass_kg.nominal == pytest.approx(2 * 6 * 25.1)


def test_errors_and_unsaved_formulas_are_named_in_every_spelling(tmp_path: Path) -> None:
    """In the strict namespace too, where other readers see no rows at all; a formula whose result is an empty text is blank."""
    troubled = ('<row r="3">' + h.cell("A3", "M3") + '<c r="B3" t="e"><v>#DIV/0!</v></c>' + h.cell("C3", "UB 203x133x25") + "</row>"
                '<row r="4"><c r="A4" t="str"><f>""</f><v></v></c><c r="B4"><f>1+1</f></c>' + h.cell("C4", "UB 203x133x25") + "</row>")
    parts: dict[str, str | bytes] = {"xl/workbook.xml": h.strict(h.WORKBOOK), "xl/_rels/workbook.xml.rels": h.strict(h.RELATIONS)}
    path = h.write(tmp_path / "list.xlsx", h.strict(h.sheet(h.PLAIN + troubled)), parts)
    result = pipeline.schedule([path])
    found = {(f.kind, f.cell, f.read) for f in result.log.gathered() if f.kind in ("cell-error", "formula-without-result")}
    assert found == {("cell-error", "B3", "#DIV/0!"), ("formula-without-result", "B4", None)}
    assert result.account.not_weighed == 2


def test_a_great_many_blank_rows_are_quick(tmp_path: Path) -> None:
    """Formatted empty rows to the guards' limit count for nothing."""
    blank = "".join(f'<row r="{n}"><c r="A{n}" s="0"/></row>' for n in range(3, 299_000))
    result = pipeline.schedule([h.write(tmp_path / "list.xlsx", h.sheet(h.PLAIN + blank))])
    assert result.account.rows == 2


GUARDED: dict[str, tuple[Callable[[Path], Path], dict[str, float], dict[str, float], str]] = {
    "rows": (lambda p: h.write(p, h.sheet(h.PLAIN + h.row(3))), {"rows": 2}, {"rows": 3}, "row 3.*at most 2 rows"),
    "cells": (lambda p: h.write(p, h.sheet(h.PLAIN)), {"cells": 9}, {"cells": 10}, "at most 300,000 rows and 9 cells"),
    "megabytes": (lambda p: h.write(p, h.sheet(h.PLAIN)), {"megabytes": 0.0005}, {"megabytes": 0.1}, "over the limit of"),
    "unpacked": (lambda p: h.write(p, h.sheet(h.PLAIN + " " * 600_000)), {"megabytes": 0.05}, {"megabytes": 0.1}, "unpacks to more than"),
    "rows of an open document": (lambda p: h.open_document(p.with_suffix(".ods"), h.open_table()), {"rows": 1}, {"rows": 2}, ".guards. rows"),
    "cells of an open document": (lambda p: h.open_document(p.with_suffix(".ods"), h.open_table()), {"cells": 9}, {"cells": 10}, ".guards. cells"),
    "rows of a binary workbook": (lambda p: h.binary_workbook(p.with_suffix(".xlsb"), h.binary_sheet()), {"rows": 1}, {"rows": 2}, ".guards. rows"),
    "cells of an older workbook": (lambda p: Path(shutil.copy(h.OLD_WORKBOOK, p.with_suffix(".xls"))), {"cells": 9}, {"cells": 10}, ".guards. cells"),
    "rows of a text": (lambda p: _with_bytes(p.with_suffix(".csv"), b"Mark,Section,Length\nA,UB 203x133x25,3000\n"),
                       {"rows": 1}, {"rows": 2}, "more than 1 rows.*higher .guards. rows"),
    "cells of a text": (lambda p: _with_bytes(p.with_suffix(".csv"), b"Mark,Section,Length\nA,UB 203x133x25,3000\n"),
                        {"cells": 5}, {"cells": 6}, "more than 5 cells.*higher .guards. cells"),
    "a line of a text": (lambda p: _with_bytes(p.with_suffix(".csv"), b"Mark,Section,Length\nA,UB 203x133x25,3000\n" + b"x" * 5500),
                         {"megabytes": 1.0}, {"megabytes": 1.2}, "a line of 5,500 characters.*higher .guards. megabytes"),
}


@pytest.mark.parametrize("case", GUARDED)
def test_each_limit_is_said_and_can_be_raised(tmp_path: Path, case: str) -> None:
    """Met, a limit names itself and the key that raises it; raised, the same file reads."""
    make, low, high, says = GUARDED[case]
    path = make(tmp_path / "list.xlsx")
    with pytest.raises(InputError, match=says):
        pipeline.read([path], job_from({"guards": low}))
    assert len(pipeline.read([path], job_from({"guards": high})).members.frame) >= 1


def test_the_safety_stop_leaves_nothing(run: Run, tmp_path: Path) -> None:
    """A run over [guards] seconds is one message and status 2."""
    rows = "".join(h.row(n) for n in range(2, 20_000))
    path = h.write(tmp_path / "list.xlsx", h.sheet(h.heading() + rows))
    (tmp_path / "job.toml").write_text("[guards]\nseconds = 0.3\n")
    done = run("schedule", path)
    assert done.returncode == 2, done.stderr
    assert "0.3 s" in done.stderr
    assert "[guards] seconds" in done.stderr
    assert sorted(p.name for p in tmp_path.iterdir()) == ["job.toml", "list.xlsx"]


@pytest.mark.parametrize("special", ["/dev/zero", "pipe"])
def test_what_never_ends_is_not_read(tmp_path: Path, special: str) -> None:
    """A device or a pipe with the name of a list."""
    import os

    path = tmp_path / "list.csv"
    if special == "pipe":
        os.mkfifo(path)
    else:
        path.symlink_to(special)
    with pytest.raises(InputError, match="is no ordinary file"):
        pipeline.read([path])
