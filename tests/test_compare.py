"""Two runs compared: what was added, removed and changed, and by how many kg; and our own outputs refused as lists."""

from __future__ import annotations

import json
import subprocess
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import openpyxl
import pytest
from conftest import WriteList, need_program
from hypothesis import given, settings
from hypothesis import strategies as st
from made_result import SOME_ROWS, make, row

from takeoff.errors import InputError
from takeoff.reports.compare import Comparison, compare, read_earlier, signed
from takeoff.reports.page import to_page
from takeoff.reports.records import to_json
from takeoff.reports.workbook import write_workbook

Run = Callable[..., "CompletedProcess[str]"]
Rows = list[dict[str, Any]]


def against(old: Rows, new: Rows, folder: Path) -> Comparison:
    path = folder / "old.json"
    path.write_text(to_json(make(old, {})), encoding="utf-8")
    return compare(make(new, {}), read_earlier(path))


def kinds(found: Comparison) -> list[tuple[str, str | None, str]]:
    return [(c.kind, c.mark, c.what) for c in found.changes]


def test_added_removed_changed_and_by_how_much(tmp_path: Path) -> None:
    """One of each, with the mass it brings; the parts add up to the change of the total."""
    old = [row("B1", quantity=2), row("B2", quantity=1, row=6), row("B3", quantity=1, row=7)]
    new = [row("B1", quantity=5), row("B3", quantity=1, row=6), row("N1", quantity=3, each=(9.0, 10.0, 11.0), row=7)]
    found = against(old, new, tmp_path)
    assert kinds(found) == [("added", "N1", "3 x UB 1, 6000 mm"), ("removed", "B2", "1 x UB 1, 6000 mm"), ("changed", "B1", "pieces 2 → 5")]
    assert [c.kg[2] for c in found.changes] == pytest.approx([33, -104, 312])
    assert found.same == 1
    for k in range(3):
        assert sum(c.kg[k] for c in found.changes) == pytest.approx(found.total_kg[k])
    assert found.sentence("si").startswith(
        f"Against {tmp_path / 'old.json'}: 1 row added (+33.0 kg heavy), 1 row removed (−104.0 kg heavy), "
        "1 row changed (+312.0 kg heavy); 1 row unchanged. Total ".replace(" kg", "\u00a0kg")
    )


def test_what_changed_is_named(tmp_path: Path) -> None:
    """Section, material, length, assembly and state are told apart; a mass that moved alone says so."""
    old = [row(m, row=5 + i) for i, m in enumerate("ABCDE")]
    new = [
        row("A", section="UB 2", row=5),
        row("B", length_mm=6100.0, row=6),
        row("C", assembly="A9", row=7),
        row("D", status="not weighed", row=8),
        row("E", each=(97.0, 101.0, 105.0), row=9),
    ]
    found = against(old, new, tmp_path)
    assert kinds(found) == [
        ("changed", "A", "section UB 1 → UB 2"),
        ("changed", "B", "length 6000 → 6100 mm"),
        ("changed", "C", "assembly A1 → A9"),
        ("changed", "D", "state weighed → not weighed"),
        ("changed", "E", "mass alone (another basis or setting)"),
    ]
    assert [c.unknown for c in found.changes] == [False, False, False, True, False]
    assert found.changes[3].kg[2] == pytest.approx(-104)
    assert "count as nothing" in found.sentence("si")


def test_a_new_mark_on_the_same_piece_is_a_change_of_mark(tmp_path: Path) -> None:
    """B2 gone and BX2 come, alike in all but the mark: one row changed, by nothing; a piece that differs stays added and removed."""
    old = [row("B1"), row("B2", quantity=3, row=6), row("B3", length_mm=900.0, row=7)]
    new = [row("B1"), row("BX2", quantity=3, row=6), row("B4", length_mm=901.0, row=7)]
    found = against(old, new, tmp_path)
    assert kinds(found) == [("added", "B4", "1 x UB 1, 901 mm"), ("removed", "B3", "1 x UB 1, 900 mm"), ("changed", "BX2", "mark B2 → BX2")]
    assert found.changes[2].kg == (0.0, 0.0, 0.0)


def test_what_is_said_is_in_the_units_of_print(tmp_path: Path) -> None:
    """A length that changed is told with its unit: mm, or feet and inches; the JSON keeps mm. A material is told as it was typed."""
    old, new = [row("B1", length_mm=3048.0)], [row("B1", length_mm=6096.0, material_text="S275", material_id=-1)]
    [change] = against(old, new, tmp_path).changes
    assert change.said("si") == "material steel → S275; length 3048 → 6096 mm"
    assert change.said("us") == "material steel → S275; length 10'-0\" → 20'-0\""
    assert change.as_record()["what"] == change.said("si")


def test_picks_and_vehicles_that_changed_are_told(tmp_path: Path) -> None:
    """Hook loads, verdicts, payloads, vehicles come and gone, and pieces left behind, on terminal, sheet and page alike."""
    path = tmp_path / "old.json"
    record = json.loads(to_json(make([row("B1")], {})))
    pick = record["picks"][0]
    record["picks"] = [pick | {"hook_load_kg": 1.0, "verdict": "within"}, pick | {"name": "Z9"}]
    record["vehicles"] = [{"name": "Lorry 1", "payload_kg": 500.0}]
    path.write_text(json.dumps(record), encoding="utf-8")
    found = compare(make([row("B1")], {}), read_earlier(path))
    notes = " ".join(found.notes("si"))
    name = pick["name"]
    for part in (f"Pick {name}: hook load", "Pick Z9 is gone", f"Pick {name}: verdict within before, unknown now.",
                 "Vehicle Lorry 1 is gone: it carried 500"):
        assert part in notes.replace("\u00a0", " "), notes
    assert found.as_record()["vehicles"] == [{"name": "Lorry 1", "payload_before_kg": 500.0, "payload_kg": None}]
    page = to_page(make([row("B1")], {}), changes=found)
    write_workbook(make([row("B1")], {}), tmp_path / "w.xlsx", found)
    cells = [str(c.value) for r in openpyxl.load_workbook(tmp_path / "w.xlsx")["Changes"].iter_rows() for c in r if c.value]
    for note in found.notes("si"):
        assert note in page
        assert note in cells


def test_rows_of_one_mark_are_matched_by_what_they_hold_first(tmp_path: Path) -> None:
    """Three rows of one mark in another order are unchanged; one of them gone is one removed, not three changed."""
    old = [row("B", quantity=n, row=4 + n) for n in (1, 2, 3)]
    assert against(old, [old[2], old[0], old[1]], tmp_path).changes == ()
    assert kinds(against(old, [old[2], old[1]], tmp_path)) == [("removed", "B", "1 x UB 1, 6000 mm")]


def test_rows_without_a_mark_are_matched_by_what_they_describe(tmp_path: Path) -> None:
    """A blank mark is no name: such rows are the same where section, material and sizes are."""
    old = [row("x") | {"mark": None, "length_mm": 1000.0}, row("x") | {"mark": None, "length_mm": 2000.0, "row": 6}]
    new = [row("x", quantity=2) | {"mark": None, "length_mm": 2000.0}]
    assert kinds(against(old, new, tmp_path)) == [("removed", None, "1 x UB 1, 1000 mm"), ("changed", None, "pieces 1 → 2")]


@settings(deadline=None, max_examples=40)
@given(
    st.lists(st.tuples(st.sampled_from(["A", "B", "C", ""]), st.integers(1, 3), st.sampled_from(["A1", "A2"])), min_size=1, max_size=7),
    st.lists(st.tuples(st.sampled_from(["A", "B", "C", ""]), st.integers(1, 3), st.sampled_from(["A1", "A2"])), min_size=1, max_size=7),
)
def test_every_row_is_accounted_for(tmp_path_factory: pytest.TempPathFactory, old: list[Any], new: list[Any]) -> None:
    """Whatever the two runs, old rows = same + removed + changed, new rows = same + added + changed, and masses add up."""
    made = [
        [row(mark, quantity=n, assembly=a, row=5 + i) | ({} if mark else {"mark": None}) for i, (mark, n, a) in enumerate(rows)]
        for rows in (old, new)
    ]
    found = against(made[0], made[1], tmp_path_factory.mktemp("c"))
    count = {kind: len(found.of(kind)) for kind in ("added", "removed", "changed")}  # type: ignore[arg-type]
    assert len(old) == found.same + count["removed"] + count["changed"]
    assert len(new) == found.same + count["added"] + count["changed"]
    assert sum(c.kg[2] for c in found.changes) == pytest.approx(found.total_kg[2], abs=1e-6)
    assert against(made[0], made[0], tmp_path_factory.mktemp("s")).changes == ()


def test_differences_never_flatter() -> None:
    """A gain is rounded up and a loss toward nothing."""
    assert signed(10.001, "si", unit=False) == "+10.1"
    assert signed(-10.09, "si", unit=False) == "−10.0"
    assert signed(0.0, "si", unit=False) == "0"


def test_the_command_says_it_everywhere(run: Run, write_list: WriteList, tmp_path: Path) -> None:
    """Terminal, workbook, page and JSON of `--against` agree, hook loads included; without it nothing of the kind is there."""
    rows = [["B1", "A1", 2, "UB 203x133x25", "S355", 3000], ["B2", "A1", 1, "UC 152x152x30", "S355", 2000]]
    path = write_list(rows)
    assert run("schedule", path, "--json", tmp_path / "old.json").returncode == 0
    assert "against" not in json.loads((tmp_path / "old.json").read_text(encoding="utf-8"))
    rows[0][2] = 3
    write_list([*rows, ["B9", "A2", 1, "UC 152x152x30", "S355", 1000]])
    done = run(
        "schedule", path, "--against", tmp_path / "old.json", "--json", tmp_path / "new.json", "--page", tmp_path / "new.html", "--replace"
    )
    assert done.returncode == 0, done.stderr
    text = " ".join(done.stdout.split())
    assert "1 row added" in text
    assert "changed B1: pieces 2 → 3" in text
    assert "Pick A2 is new" in text
    record = json.loads((tmp_path / "new.json").read_text(encoding="utf-8"))
    assert [(c["kind"], c["mark"]) for c in record["against"]["changes"]] == [("added", "B9"), ("changed", "B1")]
    old = json.loads((tmp_path / "old.json").read_text(encoding="utf-8"))
    difference = record["totals"]["mass_kg"]["heavy"] - old["totals"]["mass_kg"]["heavy"]
    assert record["against"]["mass_kg"]["heavy"] == pytest.approx(difference)
    sheet = openpyxl.load_workbook(tmp_path / "list.schedule.xlsx")["Changes"]
    lines = [[c.value for c in r[:7]] for r in sheet.iter_rows(min_row=5, max_row=6)]
    assert [line[:2] for line in lines] == [["added", "B9"], ["changed", "B1"]]
    assert sum(line[6] for line in lines) == pytest.approx(difference)
    assert "pieces 2 → 3" in (tmp_path / "new.html").read_text(encoding="utf-8")


@pytest.mark.parametrize(
    "text",
    [
        "",
        "{",
        "[]",
        "{}",
        '{"tool": {"name": "x"}}',
        '{"tool": {"name": "takeoff"}, "members": 3}',
        "[" * 100_000,
        '{"tool": {"name": "takeoff"}, "members": [{"mark": []}], "totals": {}, "picks": []}',
        "\x00",
        "null",
    ],
)
def test_what_is_no_record_is_refused(run: Run, write_list: WriteList, tmp_path: Path, text: str) -> None:
    """Anything but an earlier run's JSON: one message, status 2, nothing written."""
    old = tmp_path / "old.json"
    old.write_text(text, encoding="utf-8")
    with pytest.raises(InputError, match=r"is no JSON|no weight schedule's record"):
        read_earlier(old)
    done = run("schedule", write_list([["B1", "A1", 2, "UB 203x133x25", "S355", 3000]]), "--against", old)
    assert done.returncode == 2
    assert done.stderr.count("\n") == 1
    assert sorted(p.name for p in tmp_path.iterdir()) == ["list.xlsx", "old.json"]


def test_the_earlier_record_is_never_written_over(run: Run, write_list: WriteList, tmp_path: Path) -> None:
    """`--json` may not take the place of what `--against` reads."""
    path = write_list([["B1", "A1", 2, "UB 203x133x25", "S355", 3000]])
    run("schedule", path, "--json", tmp_path / "run.json")
    done = run("schedule", path, "--against", tmp_path / "run.json", "--json", tmp_path / "run.json", "--replace")
    assert done.returncode == 2
    assert "is an input" in done.stderr


def test_hostile_texts_of_an_earlier_run_stay_text(tmp_path: Path) -> None:
    """Marks of the old record reach the page and the terminal as harmless as those of the list."""
    found = against([row("<script>1</script>\x1b[31m\u202e")], [row("B1")], tmp_path)
    html = to_page(make([row("B1")], {}), changes=found)
    assert "<script>1" not in html
    assert "&lt;script&gt;1" in html
    assert not set(html) & set("\x1b\u202e")


# --- our own outputs given as a list ---------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", ["xlsx", "csv", "libreoffice xlsx", "libreoffice ods", "libreoffice xls", "libreoffice csv"])
def test_a_schedule_of_ours_is_no_list(run: Run, tmp_path: Path, kind: str) -> None:
    """Our workbook and CSV are refused by name, also where another program saved them anew, before anything is weighed twice."""
    program, _, suffix = kind.rpartition(" ")
    path = tmp_path / f"schedule.{suffix if not program else 'xlsx'}"
    if suffix == "csv" and not program:
        from takeoff.reports.records import to_csv

        path.write_text(to_csv(make()), encoding="utf-8")
    else:
        write_workbook(make(), path)
    if program:
        soffice = need_program("soffice")
        to = "csv:Text - txt - csv (StarCalc):44,34,76,1,,0,false,true,false,false,false,3" if suffix == "csv" else suffix
        subprocess.run(
            [
                soffice,
                f"-env:UserInstallation={(tmp_path / 'p').as_uri()}",
                "--headless",
                "--convert-to",
                to,
                "--outdir",
                str(tmp_path / "again"),
                str(path),
            ],
            check=True,
            capture_output=True,
            timeout=300,
        )
        [path] = (tmp_path / "again").iterdir()
    for command in ("schedule", "check", "lift"):
        done = run(command, path)
        assert done.returncode == 2, done.stdout
        assert "is a weight schedule that this program wrote" in done.stderr
        assert "the member list it was made from" in done.stderr


def test_a_list_that_only_speaks_of_us_is_read(run: Run, write_list: WriteList) -> None:
    """The words of the mark in a cell or a title do not make a list ours."""
    path = write_list([["takeoff", "weight schedule", 2, "UB 203x133x25", "S355", 3000]], above=[["Weight schedule written by takeoff"]])
    assert run("schedule", path).returncode == 0


def test_the_made_rows_are_what_these_tests_think() -> None:
    """The rows shared with other tests hold each state, so that the comparison meets them all."""
    assert {r["status"] for r in SOME_ROWS} == {"weighed", "assumed", "not weighed"}
