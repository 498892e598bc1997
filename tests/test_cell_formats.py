"""What a person sees in a cell and the file does not hold: number formats, strokes, comments, hidden columns, errors, dates.

Every case goes the way of the command: a workbook is written, read and weighed. The lists are invented.
"""

from __future__ import annotations

import datetime
import json
import subprocess
import sys
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import openpyxl
import pytest
import xlsxwriter
from conftest import need_program
from openpyxl.comments import Comment
from openpyxl.formatting.rule import FormulaRule
from openpyxl.styles import Font
from test_formats import _record, _wide

from takeoff import pipeline
from takeoff.findings import Finding
from takeoff.lists import cellformats, cellstyles
from takeoff.lists.cellformats import Disguise, Shown

W, A, N = "weighed", "assumed", "not weighed"
BEAM = "UB 203x133x25"
HEADINGS = ("Mark", "Qty", "Section", "Material", "Length (mm)", "Total mass (kg)", "Remarks")
PLAIN = ("A1", 1, BEAM, "S355", 2500, None, None)

SHOWN: list[tuple[str, Any, Any]] = [
    # letters, with all digits that are held
    ('0" mm"', 2500.4, "2500.4 mm"), ('0.00\\ "kg"', 12.5, "12.5 kg"), ('#,##0.0 "m"', 12500.25, "12500.25 m"), ('0"\'"', 8, "8'"),
    ('"Ø"0', 20, "Ø20"), ('0 "pcs"', 4, "4 pcs"), ('"M"000', 7, "M007"), ('[$-407]0.0" m"', 2.5, "2.5 m"), ('[$-407]0,0" m"', 2.5, "2.5 m"),
    ('0\\ \\m', 3, "3 m"), ('General" m"', 2.4, "2.4 m"), ('[Red]0" mm"', 3, "3 mm"), ('# ?/?"""', 12.5, '12.5"'), ('0\\"', 3, '3"'),
    ('00\\-000', 12345, "12-345"), ('00\\-000', 7, "00-007"), ("000", 7, "007"), ('0" mm"', -250, "-250 mm"),
    ('0" mm";-0" mm"', -250, "-250 mm"),
    ('[>=1000]0.0," t";0" kg"', 12500, "12.5 t"), ('[>=1000]0.0," t";0" kg"', 800, "800 kg"), ('@" mm"', "6000", "6000 mm"),
    ('"ca. "0', 5, "ca. 5"),
    ("0.0,\" kg\"", 62750, "62.75 kg"), ('[$€-407] 0.00', 3, "€ 3"),
    # three decimals would be open to the other decimal sign
    ('0.000" m"', 2.512, "2.5120 m"),
    # a binary fraction is no more exact than what a spreadsheet program shows
    ('0.0" m"', 0.1 + 0.2, "0.3 m"),
    # zero as a dash, or as nothing
    ('0;-0;"-"', 0, "-"), ('_-* #,##0.00_-;-* #,##0.00_-;_-* "-"??_-;_-@_-', 0, "-"), ("0;-0;;@", 0, None), ("#,###", 0, None),
    (";;;", 0, None),
    # plain
    ("0.00", 1.5, 1.5), ("#,##0", 12500, 12500), ("0.00E+00", 12500, 12500), ("#,##0.00_);[Red](#,##0.00)", -5, -5), ("@", "a", "a"),
    ('0;-0;"-"', 3, 3), ("d-mmm", 5, 5), ("[h]:mm", 0.3, 0.3), ("# ?/?", 2.5, 2.5), ("0_-", 4, 4),
    # another number, or none
    ("0.0,", 12500, Disguise("12500", "12.5", "shows another number than it holds")),
    ("0.0,,", 12500, Disguise("12500", "0.0", "shows another number than it holds")),
    ("0%", 0.125, Disguise("0.125", "13%", "shows another number than it holds")),
    (";;;", 6, Disguise("6", "", "shows nothing")),
    ('"yes";"no"', 1, Disguise("1", "yes", "shows words in place of the number")),
    (";;;", "text", Disguise("text", "", "hides the text")),
]


@pytest.mark.parametrize(("code", "held", "shown"), SHOWN, ids=lambda v: repr(v)[:30])
def test_what_a_format_shows(code: str, held: Any, shown: Any) -> None:
    """The cell as its format shows it; a code is told plain only where it changes nothing."""
    found = cellformats.as_shown(held, code)
    assert found == shown
    if isinstance(shown, str) and shown != held:
        assert type(found) is Shown
    if found != held:
        assert not cellformats.is_plain(code)


@pytest.mark.parametrize("code", ["General", "0", "0.00", "#,##0", "#,##0.00", "0.00E+00", "@", "d-mmm", "h:mm", "0_-",
                                  "#,##0.00_);(#,##0.00)", "# ?/?"])
def test_plain_formats_ask_for_nothing(code: str) -> None:
    """The formats of an ordinary list need no second look."""
    assert cellformats.is_plain(code)


BESIDE: list[tuple[float, str, Any]] = [
    (2.5, "2,5 m", "2.5 m"), (12500.0, "12.500,0 m", "12500 m"), (12500.0, "12,500", 12500.0), (7.0, "M007", "M007"),
    (2.512, "3 mm", "2.5120 mm"),
    (-250.0, "-250 mm", "-250 mm"), (12500.0, "1.25E+04", 12500.0), (12.5, '12 1/2"', '12.5"'), (0.0, "-", "-"), (0.0, "", None),
    (12500.0, "12.5 t", "12.5 t"), (12500.0, "12.5", Disguise("12500", "12.5", "shows another number than it holds")),
    (0.125, "13%", Disguise("0.125", "13%", "shows another number than it holds")), (6.0, "", Disguise("6", "", "shows nothing")),
    (0.0, "0%", Disguise("0", "0%", "shows another number than it holds")),
    (1.0, "yes", Disguise("1", "yes", "shows words in place of the number")),
]


@pytest.mark.parametrize(("held", "shown", "seen"), BESIDE, ids=lambda v: repr(v)[:30])
def test_a_text_beside_its_number(held: float, shown: str, seen: Any) -> None:
    """Where the file keeps the text that is shown, in whatever country's signs, the same comes of it."""
    assert cellformats.as_text_shows(held, shown) == seen


# --- through the command's path --------------------------------------------------------------------------------------


def write(path: Path, rows: list[tuple[Any, ...]], formats: dict[str, str] | None = None,
          change: Callable[[Any], None] | None = None) -> Path:
    book = openpyxl.Workbook()
    sheet: Any = book.active
    sheet.title = "List"
    sheet.append(HEADINGS)
    for row in rows:
        sheet.append(row)
    for cell, code in (formats or {}).items():
        sheet[cell].number_format = code
    if change is not None:
        change(sheet)
    book.save(path)
    return path


def said(result: pipeline.Result, kind: str) -> list[Finding]:
    return [finding for finding in result.all_findings() if finding.kind == kind]


#: cell, what it holds, its format; then the status, a column of the frame and its value (None: not looked at)
CASES: list[tuple[str, Any, str, str, str | None, Any]] = [
    ("E2", 2.5, '0.0" m"', W, "length_mm", 2500.0),
    ("E2", 2.4996, '0.0" m"', W, "length_mm", 2499.6),
    ("E2", 8.5, "0.0\"'\"", W, "length_mm", 8.5 * 304.8),
    ("E2", 2.512, '[$-407]0.000" m"', W, "length_mm", 2512.0),
    ("E2", 2500, '0.00," m"', W, "length_mm", 2500.0),
    ("B2", 4, '0 "pcs"', W, "quantity", 4.0),
    ("A2", 7, '"M"000', W, "mark", "M007"),
    ("C2", 20, '"Ø"0', W, "section_text", "Ø20"),
    ("F2", 0.06275, '0.000\\ "t"', W, "stated_total_kg", 62.75),
    ("F2", 0, '_-* #,##0_-;-* #,##0_-;_-* "-"??_-;_-@_-', W, "stated_total_kg", None),
    ("E2", 0, "0;-0;", N, None, None),
    ("E2", 2500, "0.0,", N, None, None),
    ("E2", 2500000, "0.0,,", N, None, None),
    ("B2", 0.5, "0%", N, None, None),
    ("B2", 1, "0%", N, None, None),
    ("E2", 2500, ";;;", N, None, None),
    ("B2", 2, '"yes";"no"', N, None, None),
    ("E2", 2500, '0 "EUR"', N, None, None),
    ("G2", 0.5, "0%", W, "remarks", "50%"),
]


@pytest.mark.parametrize(("cell", "held", "code", "status", "column", "value"), CASES, ids=lambda v: repr(v)[:25])
def test_a_formatted_cell(tmp_path: Path, cell: str, held: Any, code: str, status: str, column: str | None, value: Any) -> None:
    """The row is read by what its cell shows, or refused with what the cell holds and shows."""
    path = write(tmp_path / "list.xlsx", [PLAIN, ("A2", *PLAIN[1:])], {cell: code}, lambda sheet: sheet.__setitem__(cell, held))
    result = pipeline.schedule([path])
    assert result.members["status"].tolist() == [status, W], [f.message for f in result.all_findings()]
    if column is not None and value is not None:
        assert result.members[column][0] == (pytest.approx(value) if isinstance(value, float) else value)
    if code in ("0.0,", "0.0,,", "0%", ";;;", '"yes";"no"') and status == N:
        assert [(f.level, f.cell) for f in said(result, "number-format")] == [("refused", cell)]
        reason = result.members["reason"][0]
        assert f"holds {held}" in reason
        assert "shows" in reason


def test_a_unit_in_the_format_goes_before_the_heading(tmp_path: Path) -> None:
    """As for typed text, and with the same finding."""
    path = write(tmp_path / "list.xlsx", [(*PLAIN[:4], 2.5, None, None)], {"E2": '0.0" m"'})
    assert [(f.cell, f.level) for f in said(pipeline.schedule([path]), "unit-in-cell")] == [("E2", "note")]


def test_formats_among_decimal_commas(tmp_path: Path) -> None:
    """A stored number has no decimal sign: it neither settles nor disturbs the list's own."""
    rows = [(*PLAIN[:4], "2500,5", None, None), (*PLAIN[:4], 2.512, None, None)]
    result = pipeline.schedule([write(tmp_path / "list.xlsx", rows, {"E3": '0.0" m"'})])
    assert result.members["length_mm"].tolist() == pytest.approx([2500.5, 2512.0])
    assert not said(result, "mixed-decimal-signs")


def test_a_sum_with_a_unit_is_still_a_sum(tmp_path: Path) -> None:
    """A row that holds nothing but a formatted mass is the list's total, and is compared."""
    rows = [PLAIN, (None, None, None, None, None, 500, None)]
    result = pipeline.schedule([write(tmp_path / "list.xlsx", rows, {"F3": '0.0 "kg"'})])
    assert result.account.as_record()["total"] == 1
    assert [f.cell for f in said(result, "total-differs")] == ["F3"]


def test_text_hidden_by_its_format(tmp_path: Path) -> None:
    """A hidden text is read like the others, and said."""
    result = pipeline.schedule([write(tmp_path / "list.xlsx", [PLAIN], {"C2": ";;;"})])
    assert result.members["status"].tolist() == [W]
    assert [(f.level, f.cell) for f in said(result, "number-format")] == [("note", "C2")]


# --- strokes ---------------------------------------------------------------------------------------------------------


def _strike(*cells: str) -> Callable[[Any], None]:
    def change(sheet: Any) -> None:
        for cell in cells:
            sheet[cell].font = Font(strike=True)
    return change


@pytest.mark.parametrize(
    ("cells", "status", "level", "where"),
    [
        ([f"{c}2" for c in "ABCDEFG"], A, "assumed", "A2"),
        ([f"{c}2" for c in "BCDE"], A, "assumed", "A2"),
        (["A2"], A, "assumed", "A2"),
        (["E2"], N, "refused", "E2"),
        (["C2", "D2"], N, "refused", "C2"),
        (["G2"], W, "note", "G2"),
    ],
    ids=["all", "all that weighs", "the mark", "the length", "section and material", "a remark"],
)
def test_struck_out(tmp_path: Path, cells: list[str], status: str, level: str, where: str) -> None:
    """A struck-out row is counted and assumed; a single size is refused; a remark is a note. Once a row, at its cell."""
    rows = [(*PLAIN[:6], "primed"), ("A2", *PLAIN[1:])]
    result = pipeline.schedule([write(tmp_path / "list.xlsx", rows, change=_strike(*cells))])
    assert result.members["status"].tolist() == [status, W]
    found = said(result, "struck-out")
    assert [(f.level, f.cell) for f in found][:1] == [(level, where)]
    assert len(found) == (2 if cells == ["C2", "D2"] else 1)
    if status == A:
        assert result.members["total_nominal_kg"][0] > 60


def test_a_part_of_a_text_struck_out(tmp_path: Path) -> None:
    """``254x146x31`` struck out before ``203x133x25`` in one cell: the reader gives both, so the row is refused."""
    struck = "<r><rPr><strike/></rPr><t>{}</t></r>"
    both, whole = f"{struck.format('UB 254x146x31 ')}<r><t>{BEAM}</t></r>", struck.format("see drawing ") + struck.format("4")
    path = write(tmp_path / "list.xlsx", [(*PLAIN[:2], "BOTH", *PLAIN[3:]), (*PLAIN[:6], "WHOLE"), PLAIN])
    _rewrite(path, "xl/worksheets/sheet1.xml",
             lambda text: text.replace("<is><t>BOTH</t></is>", f"<is>{both}</is>").replace("<is><t>WHOLE</t></is>", f"<is>{whole}</is>"))
    result = pipeline.schedule([path])
    assert result.members["status"].tolist() == [N, W, W]
    assert [(f.level, f.cell) for f in said(result, "struck-out")] == [("refused", "C2"), ("note", "G3")]
    assert "a part of the section" in result.members["reason"][0]


def test_parts_struck_out_among_shared_texts(tmp_path: Path) -> None:
    """The same where texts stand in a part of their own, as most programs keep them."""
    path = tmp_path / "list.xlsx"
    with xlsxwriter.Workbook(str(path)) as book:
        sheet, struck = book.add_worksheet("List"), book.add_format({"font_strikeout": True})
        for number, row in enumerate([HEADINGS, PLAIN, PLAIN]):
            sheet.write_row(number, 0, row)
        sheet.write_rich_string("C2", struck, "UB 254x146x31 ", BEAM)
    result = pipeline.schedule([path])
    assert result.members["section_text"].tolist() == [None, BEAM]
    assert result.members["status"].tolist() == [N, W]
    assert [(f.level, f.cell) for f in said(result, "struck-out")] == [("refused", "C2")]


def _rewrite(path: Path, part: str, change: Callable[[str], str], **more: str) -> None:
    """Change a part of a workbook, and add others."""
    with zipfile.ZipFile(path) as archive:
        parts = {name: archive.read(name) for name in archive.namelist()}
    before = parts[part]
    parts[part] = change(before.decode()).encode()
    assert parts[part] != before or more
    with zipfile.ZipFile(path, "w") as archive:
        for name, data in (parts | {name: text.encode() for name, text in more.items()}).items():
            archive.writestr(name, data)


# --- comments, hidden columns, dates ---------------------------------------------------------------------------------


def test_comments_are_passed_on(tmp_path: Path, run: Callable[..., subprocess.CompletedProcess[str]]) -> None:
    """Each comment is a note at its cell, as one line without control signs; `check` shows it too."""
    def change(sheet: Any) -> None:
        sheet["A2"].comment = Comment("weigh\nfirst\u202e " + "x" * 400, "who")
    path = write(tmp_path / "list.xlsx", [PLAIN], change=change)
    found = said(pipeline.schedule([path]), "cell-comment")
    assert [(f.level, f.cell) for f in found] == [("note", "A2")]
    assert found[0].read is not None
    assert found[0].read.startswith("weigh first xxx")
    assert len(found[0].read) <= cellstyles.MOST_LETTERS + 2
    done = run("check", path)
    assert "A2: a comment stands at this cell" in done.stdout
    assert "weigh first" in " ".join(done.stdout.split())


def test_very_many_comments_are_counted(tmp_path: Path) -> None:
    """Beyond a limit the rest is one finding with its number and cells."""
    def change(sheet: Any) -> None:
        for number in range(1, 101):
            sheet.cell(number, 1).comment = Comment(f"note {number}", "who")
    result = pipeline.schedule([write(tmp_path / "list.xlsx", [PLAIN] * 99, change=change)])
    found = said(result, "cell-comment")
    assert len(found) == cellstyles.MOST_COMMENTS + 1
    assert (found[-1].count, found[-1].cell) == (100 - cellstyles.MOST_COMMENTS, f"A{cellstyles.MOST_COMMENTS + 1}")


THREADS = (
    '<ThreadedComments xmlns="http://schemas.microsoft.com/office/spreadsheetml/2018/threadedcomments">'
    '<threadedComment ref="B2" dT="2026-01-01T00:00:00" personId="{1}" id="{2}">'
    '<text>existing plate 12 kg not included</text></threadedComment>'
    '<threadedComment ref="B2" dT="2026-01-02T00:00:00" personId="{1}" id="{3}" parentId="{2}"><text>agreed</text></threadedComment>'
    "</ThreadedComments>"
)


def test_comments_in_threads(tmp_path: Path) -> None:
    """A thread's comments are passed on, and not the plain one that stands in for programs without threads."""
    def change(sheet: Any) -> None:
        sheet["B2"].comment = Comment("[Threaded comment] your program is old", "tc={2}")
    path = write(tmp_path / "list.xlsx", [PLAIN], change=change)
    kind = "http://schemas.microsoft.com/office/2017/10/relationships/threadedComment"
    link = f'<Relationship Id="rId9" Type="{kind}" Target="../threads/one.xml"/>'
    _rewrite(path, "xl/worksheets/_rels/sheet1.xml.rels", lambda text: text.replace("</Relationships>", link + "</Relationships>"),
             **{"xl/threads/one.xml": THREADS})
    found = said(pipeline.schedule([path]), "cell-comment")
    assert [(f.cell, f.read) for f in found] == [("B2", "agreed"), ("B2", "existing plate 12 kg not included")]


def test_broken_parts_beside_the_cells_are_said(tmp_path: Path) -> None:
    """Styles or comments that cannot be read are no ground to refuse the list, but they are said."""
    def change(sheet: Any) -> None:
        sheet["A2"].comment = Comment("x", "who")
    path = write(tmp_path / "list.xlsx", [PLAIN], {"E2": '0" mm"'}, change)
    _rewrite(path, "xl/comments/comment1.xml", lambda text: text.replace("<comments", "<comment"))
    _rewrite(path, "xl/styles.xml", lambda text: text.replace('numFmtId="164" fontId="0"', 'numFmtId="none" fontId="0"'))
    result = pipeline.schedule([path])
    assert result.members["status"].tolist() == [W]
    what = sorted(f.message.split(" cannot")[0] for f in said(result, "not-looked-at"))
    assert what == ["number formats and struck-out cells", "some comments"]


def test_conditional_strokes_are_said(tmp_path: Path) -> None:
    """What conditional formatting strikes out is not worked out; a rule that colours cells is no matter."""
    def rule(**font: Any) -> Callable[[Any], None]:
        def change(sheet: Any) -> None:
            sheet.conditional_formatting.add("A2:G9", FormulaRule(formula=['$G2="done"'], font=Font(**font)))
        return change
    for name, font, count in (("plain", {"color": "FF0000"}, 0), ("struck", {"strike": True}, 1)):
        result = pipeline.schedule([write(tmp_path / f"{name}.xlsx", [PLAIN], change=rule(**font))])
        assert [f.message[:22] for f in said(result, "not-looked-at")] == ["conditional formatting"] * count
        assert result.members["status"].tolist() == [W]


def test_a_document_type_in_the_styles_is_refused(tmp_path: Path) -> None:
    """openpyxl is handed nothing that declares a document type."""
    path = write(tmp_path / "list.xlsx", [PLAIN], {"E2": '0" mm"'})
    _rewrite(path, "xl/styles.xml", lambda text: '<!DOCTYPE x [<!ENTITY a "b">]>' + text)
    with pytest.raises(pipeline.TakeoffError, match="document type"):
        pipeline.schedule([path])


def test_hidden_columns_are_said(tmp_path: Path) -> None:
    """A hidden column that the list is read by is named; one that is left alone is not."""
    def change(sheet: Any) -> None:
        sheet.column_dimensions["D"].hidden = True
        sheet.column_dimensions["K"].hidden = True
    result = pipeline.schedule([write(tmp_path / "list.xlsx", [PLAIN], change=change)])
    assert [(f.cell, f.message) for f in said(result, "hidden-rows")] == [("D1", "the hidden column 'Material' was read like the others")]


def test_a_hidden_sheet_is_said(tmp_path: Path) -> None:
    """A list on a hidden sheet is read and said."""
    def change(sheet: Any) -> None:
        hidden = sheet.parent.copy_worksheet(sheet)
        hidden["A2"], hidden["E2"], hidden.sheet_state = "B9", 900, "veryHidden"
    result = pipeline.schedule([write(tmp_path / "list.xlsx", [PLAIN], change=change)])
    assert len(result.members) == 2
    assert [f.message for f in said(result, "hidden-rows")] == ["the sheet is hidden; it was read all the same"]


def test_marks_and_sections_turned_into_dates(tmp_path: Path) -> None:
    """A date in the mark column is said; in the section column it bars the row. In remarks it is a date."""
    day = datetime.date(2026, 5, 5)
    rows = [(day, *PLAIN[1:]), (*PLAIN[:2], day, *PLAIN[3:]), (*PLAIN[:6], day)]
    result = pipeline.schedule([write(tmp_path / "list.xlsx", rows, {"A2": "d-mmm", "C3": "d-mmm"})])
    assert result.members["status"].tolist() == [W, N, W]
    found = [(f.level, f.cell, f.read) for f in said(result, "date-in-cell")]
    assert found == [("refused", "C3", "2026-05-05"), ("note", "A2", "2026-05-05")]


# --- other kinds of workbook -----------------------------------------------------------------------------------------


@pytest.fixture(scope="module")
def converted(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """One list with all of this, as .xlsx, .ods and .xls by another program."""
    program, folder = need_program("soffice"), tmp_path_factory.mktemp("converted")

    def change(sheet: Any) -> None:
        _strike(*[f"{c}7" for c in "ABCDEFG"], "E8")(sheet)
        sheet["A2"].comment = Comment("weigh first", "who")
        sheet.column_dimensions["D"].hidden = True
        sheet.row_dimensions[3].hidden = True
        sheet["E9"], sheet["E10"] = "=1/0", "=SQRT(-1)"
    rows = [("A1", 1, BEAM, "S355", 2.5, None, None), (7, 4, BEAM, "S355", 2500, None, None), ("A3", 1, BEAM, "S355", 2500, None, None),
            ("A4", 0.5, BEAM, "S355", 2500, None, None), ("A5", 1, 20, "S355", 2500, None, None), *[PLAIN] * 4]
    formats = {"E2": '0.0" m"', "A3": '"M"000', "B3": '0 "pcs"', "E4": "0.0,", "B5": "0%", "C6": '"Ø"0'}
    path = write(folder / "list.xlsx", rows, formats, change)
    for kind in ("ods", "xls"):
        home = f"-env:UserInstallation={(folder / 'home').as_uri()}"
        subprocess.run([program, home, "--headless", "--convert-to", kind, "--outdir", str(folder), str(path)], check=True,
                       capture_output=True, timeout=120)
    return folder


def test_an_ods_shows_the_same(converted: Path) -> None:
    """From .ods comes what comes from .xlsx: units, marks, disguises, strokes, hidden things, comments; and its errors by name."""
    result = pipeline.schedule([converted / "list.ods"])
    assert result.members["status"].tolist() == [W, W, N, N, W, A, N, N, N]
    assert result.members["length_mm"][0] == pytest.approx(2500)
    assert (result.members["mark"][1], result.members["quantity"][1], result.members["section_text"][4]) == ("M007", 4, "Ø20")
    assert [f.read for f in said(result, "cell-error")] == ["#DIV/0!", "Err:502"]
    assert {(f.level, f.cell) for f in said(result, "number-format")} == {("refused", "E4"), ("refused", "B5")}
    assert {(f.level, f.cell) for f in said(result, "struck-out")} == {("assumed", "A7"), ("refused", "E8")}
    assert [(f.cell, f.read) for f in said(result, "cell-comment")] == [("A2", "weigh first")]
    assert [f.cell for f in said(result, "hidden-rows")] == ["D1", "A3"]
    assert not said(result, "not-looked-at")


_ODS = (
    '<office:document-content xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0" '
    'xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0" '
    'xmlns:style="urn:oasis:names:tc:opendocument:xmlns:style:1.0">'
    '<office:automatic-styles><style:style style:name="gone" style:family="table-cell"><style:text-properties '
    'style:text-line-through-style="solid"/></style:style><style:style style:name="child" style:family="table-cell" '
    'style:parent-style-name="gone"/></office:automatic-styles>'
    '<office:body><office:spreadsheet><table:table table:name="List">{}</table:table></office:spreadsheet></office:body>'
    "</office:document-content>"
)


def _ods(path: Path, rows: list[str], before: str = "") -> Path:
    with zipfile.ZipFile(path, "w") as archive:
        archive.writestr("mimetype", "application/vnd.oasis.opendocument.spreadsheet")
        archive.writestr("META-INF/manifest.xml", '<manifest xmlns="urn:oasis:names:tc:opendocument:xmlns:manifest:1.0"/>')
        head = _ods_row(*map(_ods_text, HEADINGS[:5]))
        archive.writestr("content.xml", _ODS.format(before + head + "".join(rows)))
    return path


def _ods_row(*cells: str, more: str = "") -> str:
    return f"<table:table-row{more}>{''.join(cells)}</table:table-row>"


def _ods_text(text: str, inside: str = "") -> str:
    return f'<table:table-cell office:value-type="string"><text:p>{text}{inside}</text:p></table:table-cell>'


def _ods_number(value: float, shown: str, more: str = "") -> str:
    return f'<table:table-cell office:value-type="float" office:value="{value}"{more}><text:p>{shown}</text:p></table:table-cell>'


def test_an_ods_of_other_programs(tmp_path: Path) -> None:
    """Errors that stand as a number 0, rows that are repeated, styles from a column or a parent, spans struck out."""
    formula = ' table:formula="of:=[.X1]"'
    start = [_ods_text("A1"), _ods_number(1, "1"), _ods_text(BEAM), _ods_text("S355")]
    struck = [cell.replace("<table:table-cell", '<table:table-cell table:style-name="child"') for cell in start]
    struck += [_ods_number(2500, "2500", ' table:style-name="gone"')]
    path = _ods(tmp_path / "list.ods", [
        _ods_row(*start, _ods_number(0, "Err:522", formula)),
        _ods_row(*start, f"<table:table-cell{formula}/>"),
        _ods_row(*start, _ods_number(2.5, "2,50 m"), more=' table:number-rows-repeated="2"'),
        _ods_row(*struck),
        _ods_row(*start[:2], _ods_text("", f'<text:span text:style-name="gone">UB 254x146x31</text:span> {BEAM}'), start[3],
                 _ods_number(9, "9")),
        _ods_row(*start, _ods_number(2500, "2500"), more=' table:visibility="filter"'),
    ])
    result = pipeline.schedule([path])
    assert result.members["status"].tolist() == [N, N, W, W, A, N, W]
    assert result.members["length_mm"].tolist()[2:5] == [2500.0] * 3
    assert [(f.cell, f.read) for f in said(result, "cell-error")] == [("E2", "Err:522")]
    assert [f.cell for f in said(result, "formula-without-result")] == ["E3"]
    assert {(f.level, f.cell) for f in said(result, "struck-out")} == {("assumed", "A6"), ("refused", "C7")}
    assert [f.cell for f in said(result, "hidden-rows")] == ["A8"]


def test_a_struck_column_of_an_ods(tmp_path: Path) -> None:
    """Cells without a style of their own take their column's."""
    columns = '<table:table-column table:number-columns-repeated="4"/><table:table-column table:default-cell-style-name="gone"/>'
    row = _ods_row(_ods_text("A1"), _ods_number(1, "1"), _ods_text(BEAM), _ods_text("S355"), _ods_number(2500, "2500"))
    result = pipeline.schedule([_ods(tmp_path / "list.ods", [row], columns)])
    assert [(f.level, f.cell) for f in said(result, "struck-out")] == [("refused", "E2")]


def test_endless_repetition_in_an_ods_is_refused(tmp_path: Path) -> None:
    """A cell that says it stands for a thousand million others ends in one message."""
    row = _ods_row(_ods_number(2.5, "2.5 m", ' table:number-columns-repeated="999999999"'), more=' table:number-rows-repeated="999999999"')
    with pytest.raises(pipeline.TakeoffError, match=r"more than is read|more often than is read"):
        pipeline.schedule([_ods(tmp_path / "list.ods", [row])])


def test_a_document_type_in_an_ods_is_refused(tmp_path: Path) -> None:
    """As in an .xlsx: nothing is unfolded."""
    path = _ods(tmp_path / "list.ods", [])
    _rewrite(path, "content.xml", lambda text: '<!DOCTYPE x [<!ENTITY a "b">]>' + text)
    with pytest.raises(pipeline.TakeoffError, match="document type"):
        pipeline.schedule([path])


def test_an_xls_says_what_it_cannot_show(converted: Path) -> None:
    """The older kind shows none of this: that is said, and a blank length there may be an error."""
    result = pipeline.schedule([converted / "list.xls"])
    assert [f.level for f in said(result, "not-looked-at")] == ["note"]
    assert [f.cells for f in said(result, "blank-or-error")] == [("E9", "E10")]


def test_a_binary_workbook_says_what_it_cannot_show(tmp_path: Path) -> None:
    """The same for .xlsb; without blank cells nothing is said of errors."""
    cells = b""
    for number, row in enumerate([HEADINGS[:5], PLAIN[:5]]):
        cells += _record(0, number.to_bytes(4, "little") + bytes(13))
        for column, value in enumerate(row):
            place = column.to_bytes(4, "little") + bytes(4)
            cells += _record(6, place + _wide(str(value)))
    sheet = _record(129) + _record(148, bytes(4) + (1).to_bytes(4, "little") + bytes(4) + (4).to_bytes(4, "little")) + _record(145) + cells
    book = _record(131) + _record(143) + _record(156, bytes(4) + (1).to_bytes(4, "little") + _wide("rId1") + _wide("List")) + _record(144)
    kind = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
    link = ('<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
            f'<Relationship Id="rId1" Type="{kind}/worksheet" Target="worksheets/sheet1.bin"/></Relationships>')
    with zipfile.ZipFile(tmp_path / "list.xlsb", "w") as archive:
        archive.writestr("xl/workbook.bin", book + _record(132))
        archive.writestr("xl/_rels/workbook.bin.rels", link)
        archive.writestr("xl/worksheets/sheet1.bin", sheet + _record(146) + _record(130))
    result = pipeline.schedule([tmp_path / "list.xlsb"])
    assert [f.message[:16] for f in said(result, "not-looked-at")] == ["in an .xlsb file"]
    assert not said(result, "blank-or-error")


# --- the command, and what is loaded ---------------------------------------------------------------------------------


def test_check_shows_what_cells_show(tmp_path: Path, run: Callable[..., subprocess.CompletedProcess[str]]) -> None:
    """The findings stand in the JSON of `check`, and a row that is refused sets its status."""
    path = write(tmp_path / "list.xlsx", [(*PLAIN[:4], 2500, None, None), PLAIN], {"E2": "0.0,"}, _strike(*[f"{c}3" for c in "ABCDE"]))
    done = run("check", path, "--json")
    assert done.returncode == 3
    kinds = {finding["kind"] for finding in json.loads(done.stdout)["findings"]}
    assert {"number-format", "struck-out"} <= kinds


def test_a_plain_list_does_not_load_openpyxl(tmp_path: Path) -> None:
    """Only a workbook with a telling style or a comment is worth loading it."""
    program = "import sys; from takeoff import pipeline; pipeline.schedule([sys.argv[1]]); print('openpyxl' in sys.modules)"
    loaded = []
    for name, formats in (("plain.xlsx", {"E2": "#,##0.00"}), ("dressed.xlsx", {"E2": '0" mm"'})):
        path = write(tmp_path / name, [PLAIN], formats)
        done = subprocess.run([sys.executable, "-c", program, str(path)], capture_output=True, text=True, check=True, timeout=60)
        loaded.append(done.stdout.strip())
    assert loaded == ["False", "True"]
