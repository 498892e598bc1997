"""Hostile texts: in files that are no proper CSV, and in the cells of files that are. Text from a list acts nowhere."""

from __future__ import annotations

import csv
import io
import json
import re
import time
import zipfile
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import pytest

from takeoff import materials, pipeline, sections
from takeoff.errors import InputError, TakeoffError
from takeoff.job import job_from
from takeoff.lists import captions, cellformats, cellstyles, counts, ditto, plainpieces, rowwords
from takeoff.lists.headings import read_heading, size_order
from takeoff.quantities import length_mm, measure_readings, number_readings, temperature_C
from takeoff.reports import records, terminal, workbook
from takeoff.reports.page import to_page
from takeoff.weighing import contents, cuts, finishes, holes, insulation

Run = Callable[..., "CompletedProcess[str]"]

HEAD, BEAM = "Mark,Quantity,Section,Material,Length (mm)\n", "M1,2,UB 203x133x25,S355,6000\n"
BEAM_KG = 2 * 6 * 25.1


def written(path: Path, text: str | bytes) -> Path:
    path.write_bytes(text.encode() if isinstance(text, str) else text)
    return path


# --- files -----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(("data", "says"), [
    ((HEAD + BEAM).encode() + b"M\0,2,UB 203x133x25,S355,6000\n", "is no text file"),
    ((HEAD + BEAM * 1000).encode() + b"M\0,2,UB 203x133x25,S355,6000\n", "holds zero bytes"),
    ((HEAD + BEAM + "A" * 20_000_000).encode(), r"a line of 20,000,000 characters.*\[guards\] megabytes"),
    ((HEAD + BEAM + '"' + "A" * 20_000_000).encode(), r"a line of 20,000,001 characters"),
    ((HEAD + BEAM + "<!--" * 2_000_000).encode(), "a line of 8,000,000 characters"),
    ((HEAD + BEAM).encode("utf-16")[:-1], "no proper utf-16"), ((HEAD + BEAM).encode("cp037"), "no member list"),
    (b"PK\x03\x04" + bytes(range(256)) * 4, "is no text file"), ((HEAD + BEAM).encode() + bytes(4096), "holds zero bytes"),
])
def test_files_that_are_no_list(tmp_path: Path, data: bytes, says: str) -> None:
    """Zero bytes, absurd lines, half a character, another alphabet's bytes, another kind of file."""
    with pytest.raises(InputError, match=says):
        pipeline.read([written(tmp_path / "list.csv", data)])


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-32", "cp1252"])
def test_encodings(tmp_path: Path, encoding: str) -> None:
    """Every encoding a spreadsheet program saves in reads the same."""
    result = pipeline.schedule([written(tmp_path / "list.csv", (HEAD + BEAM.replace("M1", "Mä1")).encode(encoding))])
    assert result.members["mark"].tolist() == ["Mä1"]
    assert result.totals.mass_kg.nominal == pytest.approx(BEAM_KG)


def test_a_damaged_byte_does_not_spoil_the_letters_of_the_others(tmp_path: Path) -> None:
    """A file of UTF-8 with one byte that is none: the rest reads as it was written, and the byte is said; another alphabet's is not UTF-8."""
    german = "Pos.;Menge;Profil;Werkstoff;Länge (mm)\nTräger;2;UB 203x133x25;S355;6000\nBühne ½ ⌀;2;UB 203x133x25;S355;6000\n"
    result = pipeline.schedule([written(tmp_path / "list.csv", german.encode() + b"M\xff2;2;UB 203x133x25;S355;6000\n")])
    assert result.members["mark"].tolist() == ["Träger", "Bühne ½ ⌀", "M\ufffd2"]
    assert result.account.weighed == 3
    assert [f.message for f in result.findings if f.kind == "text-repaired"] == ["bytes of the file that are no UTF-8 (1) stand as \ufffd"]
    other = pipeline.schedule([written(tmp_path / "list.csv", (HEAD + BEAM.replace("M1", "柱鉄骨")).encode("shift-jis"))])
    assert [f.message for f in other.findings if f.kind == "text-repaired"] == ["the file is not UTF-8; it was read as Windows-1252"]
    assert other.totals.mass_kg.nominal == pytest.approx(BEAM_KG)


@pytest.mark.parametrize("odd", [
    'M2,2,"UB 203x133x25,S355,6000\n', '"' * 99_999 + "\n", 'M2,"' + '""' * 5000 + "\n", "<!--" * 5000 + "\n", '"a""' * 3000 + '",\n"\n',
    'M2,2,"UB\n203x133x25",S355,6000\n',
])
def test_odd_quotes_and_remarks_swallow_no_row(tmp_path: Path, odd: str) -> None:
    """Whatever a broken line is taken for, the rows behind it are weighed, and all are accounted for."""
    result = pipeline.schedule([written(tmp_path / "list.csv", HEAD + BEAM + odd + BEAM * 30)])
    assert result.account.weighed >= 31
    assert result.account.rows == sum(v for k, v in result.account.as_record().items() if k != "rows")


def test_remarks_without_end_are_quick(tmp_path: Path) -> None:
    """A hundred thousand openings of a remark that never closes cost no more than their bytes."""
    path = written(tmp_path / "list.csv", HEAD + BEAM + ("<!--" * 20 + "\n") * 20_000)
    started = time.process_time()
    pipeline.read([path])
    assert time.process_time() - started < 20


# --- regular expressions ---------------------------------------------------------------------------------------------

READERS: dict[str, Callable[[str], object]] = {
    "section": sections.read, "material": materials.lookup, "heading": read_heading, "count": counts.read_count,
    "count and length": lambda text: counts.read_count_and_length(text, 1.0), "measure": measure_readings, "number": number_readings,
    "length": length_mm, "temperature": temperature_C, "contents": contents.read, "finish": lambda text: finishes.read(text, (5.0, 10.0)),
    "insulation": lambda text: insulation.read(text, (5.0, 10.0)), "holes": holes.read, "cut": cuts.read, "row words": rowwords.heard,
    "caption": lambda text: captions.read_caption(captions.Caption(), [text]), "warning": lambda text: captions.warns([text]),
    "number format": lambda text: (cellformats.is_plain(text), cellformats.as_shown(5.5, text), cellformats.as_shown("a", text)),
    "ditto": ditto.is_ditto, "order of sizes": size_order, "plain piece": lambda text: plainpieces.looks(text, text),
    "shown text": lambda text: cellformats.as_text_shows(5.5, text), "comment": cellstyles.plain_text,
}
REPEATED = (
    "a", "1", " ", "-", ".", ",", "x", "1x", "1 ", "a ", "1,", "1.", "(", '"', "'", "<", "1/", "+", "1-", "a-", "ab ", "m ", "10 x ", "(a", "a)",
    "[", "1'", "1/2 ", "°", "×", "total ", "A1", "kg", "=", "#", "%", "_", ":", ";", "&amp;", "|", "\t", "00", "é", "Ø", "1 x 2", "steel ",
    "UB 1x", "L 50x50x5 + ", "- - ", "M12 ", "zinc 85 um + ", "4x22 + ", "1 (a) ", "\u200b", "Ａ", "½", "1½", "\u0301", "~ ", "ca ", "`", "60 % ",
    "mm", "or ", "included in ", "material: ", "units ", "all dimensions ",
)


@pytest.mark.parametrize("reader", READERS)
def test_no_pattern_backtracks_without_end(reader: str) -> None:
    """Every reader of a cell's text over long repetitions of what its patterns look for, each with a misfit at the end."""
    slowest = 0.0
    for part in REPEATED:
        for start in ("", "FL 10x", "1"):
            text = start + part * (8000 // len(part)) + "!"
            started = time.process_time()
            try:
                READERS[reader](text)
            except TakeoffError as error:
                assert len(str(error)) < 1000  # noqa: PT017 - long text is not thrown back whole
            slowest = max(slowest, time.process_time() - started)
    assert slowest < 2.0


# --- cells that would act --------------------------------------------------------------------------------------------

ACTIVE = ("=1+1", "+1+1", "-1+1", "@SUM(A1)", "\t=1+1", "\r=1+1", "=cmd|' /C calc'!A0", '=HYPERLINK("http://example.invalid")', "{=1+1}", "＝1+1")
TERMINAL = "\x1b[31mred\x1b]0;title\x07\x9b5m\x08\u202e\u200b\u2066[bold]x[/bold]"
SCRIPT = "<script>alert(1)</script><img src=x onerror=alert(1)>&lt;"


@pytest.fixture(scope="module")
def hostile_result(tmp_path_factory: pytest.TempPathFactory) -> pipeline.Result:
    """A list in whose every text field something would act, if it were let."""
    path = tmp_path_factory.mktemp("hostile") / "list.csv"
    with path.open("w", encoding="utf-8", newline="") as handle:
        writer = csv.writer(handle)
        writer.writerow(["Mark", "Assembly", "Phase", "Quantity", "Section", "Material", "Length (mm)", "Finish", "Remarks"])
        for text in (*ACTIVE, TERMINAL, SCRIPT):
            writer.writerow([text, text, text, 2, "UB 203x133x25", "S355", 6000, text, text])
            writer.writerow([text, text, text, 2, text, text, 6000, text, text])
    job = {"title": "=1+1" + TERMINAL + SCRIPT, "reference": "@x&A", "revision": "-1+1", "prepared_by": SCRIPT, "date": "=TODAY()"}
    return pipeline.schedule([path], job_from({"job": job}))


@pytest.mark.parametrize("many", [0, 10**6])
def test_no_text_of_the_list_is_a_formula_or_link_of_the_workbook(
    hostile_result: pipeline.Result, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, many: int,
) -> None:
    """Formulas hold only what the program writes itself; links lead within the workbook or to the list."""
    monkeypatch.setattr(workbook, "MANY_ROWS", many)
    path = tmp_path / "out.xlsx"
    workbook.write_workbook(hostile_result, path)
    with zipfile.ZipFile(path) as archive:
        sheets = [archive.read(n).decode() for n in archive.namelist() if n.startswith("xl/worksheets/sheet")]
        relations = "".join(archive.read(n).decode() for n in archive.namelist() if "worksheets/_rels" in n)
        everything = "".join(archive.read(n).decode("utf-8", "replace") for n in archive.namelist() if n.endswith(".xml"))
    # A name may stand in a formula as a text in quotes, there to be compared; it acts no more than in a cell.
    formulas = {re.sub(r'"(?:[^"]|"")*"', "", f) for sheet in sheets for f in re.findall(r"<f>(.*?)</f>", sheet)}
    assert formulas
    acting = [f for f in formulas if any(word in f for word in ("cmd", "HYPERLINK", "TODAY", "@")) or re.search(r"(?<![A-Z\d])1\+1", f)]
    assert acting == []
    assert "example.invalid" not in relations
    assert not re.search("[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\u202a-\u202e\u2066-\u2069]", everything)


def test_no_cell_of_the_csv_is_a_formula(hostile_result: pipeline.Result) -> None:
    """A cell that a spreadsheet program would act on starts with an apostrophe."""
    rows = list(csv.reader(io.StringIO(records.to_csv(hostile_result), newline="")))
    cells = {cell for row in rows[1:] for cell in row}
    assert "'=1+1" in cells
    active = [c for c in cells if c.startswith(("=", "+", "-", "@", "\t", "\r", "\n", "＝")) and not re.fullmatch(r"[+-]?\d+(\.\d+)?", c)]
    assert active == []


def test_nothing_acts_on_the_terminal_or_the_page(hostile_result: pipeline.Result) -> None:
    """No escape, direction or zero-width sign gets through; the page holds no tag that is not ours."""
    for text in (terminal.summary(hostile_result, 80), to_page(hostile_result)):
        assert not re.search("[\x00-\x08\x0b-\x1f\x7f-\x9f\u200b\u202a-\u202e\u2066-\u2069]", text)
    assert "<script>alert" not in to_page(hostile_result)
    assert "<img src=x" not in to_page(hostile_result)


def test_names_of_files_and_sheets_do_not_act(run: Run, tmp_path: Path) -> None:
    """A message names a file with the signs of its name spelt out; the JSON of a check escapes them."""
    done = run("check", tmp_path / "a\x1b[31mb\u202e.csv")
    assert done.returncode == 2
    assert "\x1b" not in done.stderr
    assert "\\x1b[31mb\\u202e" in done.stderr
    path = written(tmp_path / "a\x9bb.csv", HEAD + BEAM.replace("M1", "M\x9b\u202e1"))
    done = run("check", path, "--json")
    assert done.returncode == 0
    assert not re.search("[\x7f-\x9f\u202e]", done.stdout)
    assert json.loads(done.stdout)["inputs"][0]["file"] == str(path)


def test_a_pick_of_any_name_is_a_pick(tmp_path: Path) -> None:
    """A name longer than a job file would take."""
    rows = "Mark,Pick,Quantity,Section,Material,Length (mm)\nM1," + "p" * 5000 + ",2,UB 203x133x25,S355,6000\n"
    result = pipeline.schedule([written(tmp_path / "list.csv", rows)])
    assert [len(pick.name) for pick in result.picks] == [5000]
