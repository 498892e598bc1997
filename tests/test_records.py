"""JSON and CSV: the keys programs rely on, nulls for what is absent, the same bytes at every run, text defused."""

from __future__ import annotations

import csv
import io
import json
import math
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st
from made_result import SOME_ROWS, make, row

from takeoff.findings import Finding
from takeoff.reports.records import csv_cell, to_csv, to_json

JOB = {"job": {"title": "Weir", "revision": "B"}}

TOP = {
    "tool", "job", "inputs", "account", "complete", "members", "totals", "picks", "vehicles", "not_loaded", "vehicle_count_bound",
    "proven", "movements", "findings", "cautions",
}
MEMBER = {
    "file", "sheet", "row", "mark", "assembly", "pick", "phase", "run", "bundle", "quantity", "section", "material", "length_mm",
    "width_mm", "thickness_mm", "finish", "contents", "volume_m3", "surface_m2", "bare_each_kg", "additions", "mass_each_kg",
    "mass_total_kg", "basis", "status", "lengths_mm", "tape_readings_mm", "sizes_mm", "position_mm", "findings",
}
TOTALS = {
    "quantity", "mass_kg", "likely_kg", "volume_m3", "surface_m2", "not_weighed", "not_counted", "by_material", "by_section",
    "by_assembly", "by_phase", "by_finish", "by_pick", "bare_kg", "additions",
}


def record(**more: Any) -> dict[str, Any]:
    """The JSON of a made result, read back; a NaN in it is a failure, since JSON has none."""

    def refuse(word: str) -> None:
        raise AssertionError(f"{word} is no JSON")

    read = json.loads(to_json(make(**more)), parse_constant=refuse)
    assert isinstance(read, dict)
    return read


def lines(text: str) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(text, newline="")))


def test_json_has_the_keys_programs_rely_on() -> None:
    """Each key of the published form is there, at the top, in members, in totals and in picks."""
    read = record(job=JOB)
    assert set(read) >= TOP
    assert set(read["tool"]) == {"name", "version"}
    assert set(read["inputs"][0]) == {"file", "sha256", "sheets", "job_file"}
    assert set(read["account"]) == {"rows", "weighed", "assumed", "not_weighed", "heading", "total", "blank", "other"}
    assert all(set(m) >= MEMBER for m in read["members"])
    assert set(read["members"][0]["section"]) == {"text", "designation", "match"}
    assert set(read["members"][0]["material"]) == {"text", "key", "match"}
    assert set(read["members"][0]["basis"]) >= {"rule", "title", "clause", "evidence"}
    assert set(read["totals"]) == TOTALS
    assert set(read["totals"]["by_material"][0]) == {"name", "quantity", "mass_kg", "not_weighed"}
    assert set(read["picks"][0]) >= {"name", "members", "mass_kg", "build_up", "hook_load_kg", "hook_load_kN", "verdict", "not_counted"}


def test_json_members_are_the_rows_unrounded() -> None:
    """One entry a row, in the list's order, with every digit of its figures."""
    read = record()
    assert [m["mark"] for m in read["members"]] == [r["mark"] for r in SOME_ROWS]
    first = read["members"][0]
    assert first["mass_each_kg"] == {"light": 137.0 / 3, "nominal": 143.01, "heavy": 150.0 / 0.98}
    assert first["mass_total_kg"]["heavy"] == 4 * (150.0 / 0.98)
    assert first["quantity"] == 4
    assert isinstance(first["quantity"], int)
    assert first["material"] == {"text": "steel", "key": "madeup_steel", "match": "alias"}
    assert math.fsum(m["mass_total_kg"]["nominal"] or 0 for m in read["members"]) == pytest.approx(
        read["totals"]["mass_kg"]["nominal"], rel=1e-12)


def test_json_says_null_for_what_is_not_known() -> None:
    """A row not weighed has no masses, no volume and no basis, a status in words and its finding."""
    read = record()
    assert read["complete"] is False
    missing = read["members"][3]
    assert missing["status"] == "not weighed"
    assert missing["mass_each_kg"] == missing["mass_total_kg"] == {"light": None, "nominal": None, "heavy": None}
    assert [missing[k] for k in ("volume_m3", "surface_m2", "basis", "width_mm", "phase", "position_mm")] == [None] * 6
    finding = missing["findings"][0]
    assert set(finding) == {"level", "kind", "message", "file", "sheet", "cell", "read", "right", "count", "cells"}
    assert (finding["level"], finding["kind"], finding["cell"], finding["cells"]) == ("refused", "unknown-section", "D8", ["D8"])
    assert read["members"][4]["material"] == {"text": None, "key": None, "match": "alias"}


def test_json_findings_at_the_top_are_those_of_sheets() -> None:
    """What concerns a sheet stands at the top, what concerns a row stands in the row."""
    sheet = Finding("note", "hidden-rows", "rows 4 to 6 are hidden and were read", sheet="Steel")
    assert [f["kind"] for f in record(sheet_findings=[sheet])["findings"]] == ["hidden-rows"]


def test_json_is_the_same_text_at_every_run_and_plain_ascii() -> None:
    """No clock, no chance, and no sign that a terminal could act on."""
    text = to_json(make([row("ä\u202e\x1b[31m%s%d", material_text="100 %")], {}, job=JOB))
    assert text == to_json(make([row("ä\u202e\x1b[31m%s%d", material_text="100 %")], {}, job=JOB))
    assert text.isascii()
    assert text.endswith("}\n")
    assert json.loads(text)["members"][0]["mark"] == "ä\u202e\x1b[31m%s%d"


def test_json_has_one_member_a_line() -> None:
    """Two runs can be compared line by line."""
    text = to_json(make())
    assert sum(line.startswith('{"file"') for line in text.splitlines()) == len(SOME_ROWS)


def test_infinite_figure_is_refused() -> None:
    """JSON cannot carry it, so it is an error rather than a file nobody can read."""
    result = make()
    result.members.loc[0, "each_heavy_kg"] = math.inf
    with pytest.raises(ValueError, match="each_heavy_kg holds an infinite figure"):
        to_json(result)


def test_csv_has_a_line_a_member_with_units_in_the_headings() -> None:
    """Figures unrounded, absent ones empty, every column of figures says its unit."""
    read = lines(to_csv(make()))
    assert [r["mark"] for r in read] == [r["mark"] for r in SOME_ROWS]
    assert float(read[0]["mass_each_heavy_kg"]) == 150.0 / 0.98
    assert (read[0]["quantity"], read[0]["length_mm"], read[0]["width_mm"]) == ("4", "6000", "")
    assert (read[3]["status"], read[3]["mass_total_heavy_kg"], read[3]["basis"]) == ("not weighed", "", "")
    assert read[3]["reason"] == "the length is missing"
    assert read[0]["basis_source"] == "An invented standard, table 1"
    figures = [h for h in read[0] if h.startswith(("mass", "volume", "surface", "length", "width"))]
    assert all(h.endswith(("_kg", "_m3", "_m2", "_mm")) for h in figures)


@pytest.mark.parametrize(("text", "cell"), [
    ("=1+1", "'=1+1"), ("@x", "'@x"), ("-2+3", "'-2+3"), ("+1", "+1"), ("-2", "-2"), ("-2,5", '"-2,5"'),
    ("+cmd|' /C calc'!A0", "'+cmd|' /C calc'!A0"),
    ("\tx", "'\tx"), ("\rx", '"\'\rx"'), ("\nx", '"\'\nx"'), ("＝1", "'＝1"), ("B1", "B1"), ('12" pipe', '"12"" pipe"'), ("a,b", '"a,b"'),
    ("-", "'-"), ("--", "'--"), ("a=b", "a=b"), ("", ""), ("\0=1+1", "'=1+1"), ("\0\0-1+1", "'-1+1"),
])
def test_csv_cells_are_defused(text: str, cell: str) -> None:
    """What a spreadsheet program could act on gets an apostrophe, plain numbers do not."""
    assert csv_cell(text) == cell


@given(st.lists(st.text(st.characters(blacklist_categories=["Cs"], blacklist_characters="\0"), min_size=1), min_size=1, max_size=5))
def test_csv_reads_back_as_it_was(marks: list[str]) -> None:
    """Any text comes back from the CSV as it was, but for the apostrophe; no text makes or breaks a line."""
    read = list(csv.reader(io.StringIO("\n".join(",".join(map(csv_cell, [m, "end"])) for m in marks) + "\n", newline="")))
    assert [line[0].removeprefix("'") for line in read] == [m.removeprefix("'") for m in marks]
    assert all(line[1:] == ["end"] for line in read)
    assert not [line[0] for line in read if line[0][:1] in set("=@\t\r\n")]


def test_csv_can_be_written_whatever_the_list_held() -> None:
    """Half a sign, which no file can hold, does not stop the others from being written."""
    text = to_csv(make([row("M\ud800\0x")], {}))
    assert lines(text)[0]["mark"] == "M\ufffdx"
    text.encode("utf-8")
