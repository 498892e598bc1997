"""Lists at named temperatures: measured sizes brought back, lengths and tape readings, runs, outputs, bad input."""

from __future__ import annotations

import csv
import json
from collections.abc import Callable, Sequence
from pathlib import Path
from subprocess import CompletedProcess
from typing import Any

import openpyxl
import pytest
from conftest import ROOT, WriteList
from hypothesis import given
from hypothesis import strategies as st

from takeoff import materials, pipeline
from takeoff.errors import JobError
from takeoff.job import Job, job_from
from takeoff.pipeline import Result
from takeoff.reports import records, terminal
from takeoff.reports.workbook import write_workbook
from takeoff.thermal.runs import RunMovement, RunPart, RunRule, RunTemperatures, run_movement

Run = Callable[..., "CompletedProcess[str]"]
HEADINGS = ["Mark", "Quantity", "Section", "Material", "Length (mm)", "Width (mm)", "Thickness (mm)", "Height (mm)", "Run", "Measured at"]
STEEL, ALUMINIUM, STAINLESS = (materials.by_key(key) for key in ("steel-structural", "aluminium-structural", "1.4301"))
NAMED = {"reference": 20.0, "erect": 5.0, "coldest": -20.0, "warmest": 45.0}


def schedule(write_list: WriteList, rows: Sequence[Sequence[Any]], job: dict[str, Any] | None = None) -> Result:
    path = write_list(rows, name="list.csv", headings=HEADINGS)
    return pipeline.schedule([path], job_from(job) if job else Job())


def member(result: Result, number: int = 0) -> dict[str, Any]:
    found: dict[str, Any] = json.loads(records.to_json(result))["members"][number]
    return found


def kinds(result: Result, number: int = 0) -> list[str]:
    return [f.kind for f in result.row_findings.get(number, ())]


# -- measured sizes ------------------------------------------------------------------------------------------------------


def test_a_plate_measured_warm_is_brought_back_in_all_three_directions(write_list: WriteList) -> None:
    """Aluminium at 60 °C: each size over 1.00092, the volume over its cube, and the mass with it."""
    row = ["P1", 1, "Plate", "aluminium", 2000, 1000, 10, None, None]
    warm = member(schedule(write_list, [[*row, 60]]))
    cold = member(schedule(write_list, [[*row, None]]))
    assert warm["volume_m3"] == pytest.approx(cold["volume_m3"] / 1.00092**3, rel=1e-12)
    assert warm["mass_each_kg"]["nominal"] == pytest.approx(cold["mass_each_kg"]["nominal"] / 1.00092**3, rel=1e-12)
    assert warm["surface_m2"] == pytest.approx(cold["surface_m2"] / 1.00092**2, rel=1e-12)
    assert warm["lengths_mm"] == pytest.approx({"reference": 2000 / 1.00092, "measured": 2000})
    assert warm["sizes_mm"]["reference"] == pytest.approx({"length": 2000 / 1.00092, "width": 1000 / 1.00092, "thickness": 10 / 1.00092})
    assert warm["length_mm"] == pytest.approx(2000 / 1.00092)
    assert cold["lengths_mm"] == {}


def test_a_tabulated_section_keeps_its_cross_section(write_list: WriteList) -> None:
    """Only the length of a named section was measured: 6000 at 45 °C is 6000 / 1.0003 at 20."""
    row = ["B1", 1, "UB 203x133x25", "S355", 6000, None, None, None, None, None]
    result, plain = schedule(write_list, [row], {"temperatures": {"measured": 45}}), schedule(write_list, [row])
    assert member(result)["volume_m3"] == pytest.approx(member(plain)["volume_m3"] / 1.0003, rel=1e-12)
    assert "brought-back" in kinds(result)
    assert member(result)["status"] == "weighed"


def test_the_cell_wins_over_the_job(write_list: WriteList) -> None:
    """A row that says how warm it was overrules the job's `measured`; Fahrenheit reads too."""
    rows = [["A", 1, "Plate", "aluminium", 2000, 1000, 10, None, None, cell] for cell in (None, 35, "95 F", "35 °C", 20)]
    result = schedule(write_list, rows, {"temperatures": {"measured": 60}})
    found = [member(result, i)["lengths_mm"]["reference"] for i in range(5)]
    assert found == pytest.approx([2000 / 1.00092, *[2000 / (1 + 23e-6 * 15)] * 3, 2000])
    assert [member(result, i)["lengths_mm"]["measured"] for i in range(5)] == pytest.approx([2000] * 5)


def test_wood_is_brought_back_along_and_across(write_list: WriteList) -> None:
    """Oak at 60 °C: length over 1.0002, width and thickness over 1.002."""
    row = ["W1", 1, "Board", "oak", 3000, 200, 50, None, None]
    warm, cold = (member(schedule(write_list, [[*row, t]])) for t in (60, None))
    assert warm["volume_m3"] == pytest.approx(cold["volume_m3"] / (1.0002 * 1.002**2), rel=1e-12)


def test_the_tape_takes_the_place_of_the_measured_correction(write_list: WriteList) -> None:
    """Read with a steel tape at 35 °C: reading x 1.00018 / (1 + e); the job's `measured` is not applied on top of it."""
    rows = [["A", 1, "Plate", "aluminium", 2000, 1000, 10, None, None, None], ["S", 1, "Plate", "S355", 2000, 1000, 10, None, None, None]]
    job = {"temperatures": {"measured": 60}, "reading": {"tape": {"material": "steel", "temperature_C": 35}}}
    result = schedule(write_list, rows, job)
    assert member(result)["lengths_mm"]["reference"] == pytest.approx(2000 * 1.00018 / 1.000345)
    assert member(result, 1)["lengths_mm"]["reference"] == pytest.approx(2000, rel=1e-12)
    assert member(result)["tape_readings_mm"]["measured"] == pytest.approx(2000)
    assert member(result)["volume_m3"] == pytest.approx(0.02 * (1.00018 / 1.000345) ** 3)


def test_a_cell_that_is_no_temperature_is_assumed(write_list: WriteList) -> None:
    """Sizes are taken as they stand, the row is assumed, and the cell is named."""
    for cell in ("warm", "-300 C", True):
        result = schedule(write_list, [["A", 1, "Plate", "aluminium", 2000, 1000, 10, None, None, cell]])
        assert member(result)["status"] == "assumed"
        assert "temperature-unread" in kinds(result)
        assert member(result)["volume_m3"] == pytest.approx(0.02)


def test_measured_above_the_melting_point(write_list: WriteList) -> None:
    """It cannot be: the sizes stand as listed, and that is said; the mass stands."""
    result = schedule(write_list, [["A", 1, "Plate", "aluminium", 2000, 1000, 10, None, None, 900]])
    assert member(result)["volume_m3"] == pytest.approx(0.02)
    assert "above-melting" in kinds(result)


@given(st.sampled_from(["aluminium", "S355", "oak", "1.4301"]), st.floats(-100, 400).map(lambda t: round(t, 2)))
def test_measured_to_reference_and_back(material: str, t: float) -> None:
    """The length a row gives at its temperature is the length it has there, whatever the reference."""
    import tempfile

    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "list.csv"
        headings = "Mark,Quantity,Section,Material,Length (mm),Width (mm),Thickness (mm),Measured at"
        path.write_text(f"{headings}\nA,1,Plate,{material},2000,900,12,{t}\n")
        result = pipeline.schedule([path], job_from({"temperatures": {"reference": 10}}))
    assert result.temperatures is not None
    sizes = {name: float(values[0]) for name, values in result.temperatures.sizes_mm["measured"].items()}
    assert sizes == pytest.approx({"length": 2000, "width": 900, "thickness": 12}, rel=1e-12)


# -- named temperatures ----------------------------------------------------------------------------------------------------


def test_lengths_and_tape_readings_at_named_temperatures(write_list: WriteList) -> None:
    """Aluminium 4000 cut at 30: 4000.92 true, 4000.44 on the tape; steel: the nominal."""
    rows = [["A", 2, "Plate", "aluminium", 4000, 200, 10, None, None, None],
            ["B", 1, "UB 203x133x25", "S355", 6000, None, None, None, None, None]]
    result = schedule(write_list, rows, {"temperatures": {"cut": 30, "coldest": -20, "warmest": 45, "oven": 80}})
    one = member(result)
    assert list(one["lengths_mm"]) == ["reference", "cut", "coldest", "warmest", "oven"]
    assert one["lengths_mm"] == pytest.approx({"reference": 4000, "cut": 4000.92, "coldest": 3996.32, "warmest": 4002.3, "oven": 4005.52})
    assert one["tape_readings_mm"]["cut"] == pytest.approx(4000.92 / 1.00012)
    assert one["sizes_mm"]["cut"] == pytest.approx({"length": 4000.92, "width": 200.046, "thickness": 10.0023})
    other = member(result, 1)
    assert other["tape_readings_mm"] == pytest.approx(dict.fromkeys(other["lengths_mm"], 6000.0))
    assert other["sizes_mm"]["cut"]["width"] is None


def test_above_melting_the_length_is_null_and_the_mass_stands(write_list: WriteList) -> None:
    """A finding of level refused; the state of the row and its mass are as without."""
    row = ["A", 1, "Plate", "aluminium", 4000, 200, 10, None, None, None]
    result = schedule(write_list, [row], {"temperatures": {"fire": 900}})
    found, plain = member(result), member(schedule(write_list, [row]))
    assert found["lengths_mm"] == {"reference": 4000, "fire": None}
    assert [f["level"] for f in found["findings"] if f["kind"] == "above-melting"] == ["refused"]
    assert (found["status"], found["mass_each_kg"]) == ("weighed", plain["mass_each_kg"])


def test_without_a_coefficient_nothing_is_computed(write_list: WriteList) -> None:
    """The material is named; the reference length is the list's own."""
    material = next(m for m in materials.all_materials() if m.alpha_per_K is None and m.kind == "board")
    result = schedule(write_list, [["A", 1, "Plate", material.key, 2000, 1000, 10, None, None, None]], {"temperatures": {"warmest": 45}})
    assert member(result)["lengths_mm"] == {"reference": 2000, "warmest": None}
    refused = [f for f in result.row_findings[0] if f.kind == "no-coefficient"]
    assert material.name in refused[0].message


def test_each_output_carries_the_cautions(write_list: WriteList, tmp_path: Path) -> None:
    """The metal's temperature counts, not the air's; on the JSON, the terminal and the sheet."""
    result = schedule(write_list, [["A", 1, "Plate", "aluminium", 4000, 200, 10, None, "R", None]] * 2, {"temperatures": {"warmest": 45}})
    write_workbook(result, tmp_path / "out.xlsx")
    sheet = openpyxl.load_workbook(tmp_path / "out.xlsx")["Temperatures"]
    text = " ".join(str(c.value) for line in sheet for c in line if c.value is not None)
    for words in (records.to_json(result), " ".join(terminal.summary(result).split()), text):
        assert "not the air" in words


def test_the_sheet_is_live_and_agrees_with_the_json(write_list: WriteList, tmp_path: Path) -> None:
    """Every length on the sheet is a formula with its stored result, the figure of the JSON."""
    rows = [["A", 2, "Plate", "aluminium", 4000, 200, 10, None, "R", None],
            ["B", 1, "UB 203x133x25", "S355", 6000, None, None, None, "R", None]]
    result = schedule(write_list, rows, {"temperatures": {"cut": 30, "warmest": 45, "coldest": -20}})
    write_workbook(result, tmp_path / "out.xlsx")
    formulas = openpyxl.load_workbook(tmp_path / "out.xlsx")["Temperatures"]
    values = openpyxl.load_workbook(tmp_path / "out.xlsx", data_only=True)["Temperatures"]
    [row] = [r[0].row for r in values if r[1].value == "A" and r[2].value == 2]
    cells = [values.cell(row, column).value for column in range(5, 13)]
    one = member(result)
    expected = [figure for name in one["lengths_mm"] for figure in (one["lengths_mm"][name], one["tape_readings_mm"][name])]
    assert cells == pytest.approx(expected)
    assert str(formulas.cell(row, 7).value).startswith("=")
    assert values.cell(row, 5).value == 4000
    found = json.loads(records.to_json(result))["movements"][0]
    moved = [r[4].value for r in values if str(r[3].value).startswith("Movement from")]
    assert moved == pytest.approx([found["movement_mm"]])


def test_without_temperatures_nothing_changes(write_list: WriteList, tmp_path: Path) -> None:
    """No sheet, no lengths; a run without temperatures is said."""
    result = schedule(write_list, [["A", 2, "Plate", "aluminium", 4000, 200, 10, None, "R", None]])
    write_workbook(result, tmp_path / "out.xlsx")
    assert "Temperatures" not in openpyxl.load_workbook(tmp_path / "out.xlsx").sheetnames
    record = json.loads(records.to_json(result))
    assert record["movements"] == []
    assert record["temperatures"] is None
    assert "run-not-laid-out" in kinds(result)


def test_odd_names_of_temperatures_stay_names(write_list: WriteList, tmp_path: Path) -> None:
    """A name is the user's own text: quotes and percent signs pass through."""
    name = '50 % "sun" =1+1'
    result = schedule(write_list, [["A", 2, "Plate", "aluminium", 4000, 200, 10, None, "R", None]], {"temperatures": {name: 60}})
    assert member(result)["lengths_mm"][name] == pytest.approx(4003.68)
    write_workbook(result, tmp_path / "out.xlsx")


# -- runs ------------------------------------------------------------------------------------------------------------------


def line(*parts: tuple[str, int, float | None, materials.Material | None], **rule: Any) -> RunMovement:
    return run_movement(RunRule("R", **rule), [RunPart(*part) for part in parts], RunTemperatures(NAMED))


MIXED = (("B", 2, 6000.0, STEEL), ("A", 1, 4000.0, ALUMINIUM), ("S", 1, 2500.0, STAINLESS))


def test_a_mixed_run_against_the_hand_calculation() -> None:
    """Positions line by line, as written out in tests/published."""
    found = line(*MIXED, joints="ends")
    with (ROOT / "tests" / "published" / "thermal_run_hand_check.csv").open(encoding="utf-8", newline="") as handle:
        for row in csv.DictReader(handle):
            joint = found.joints[int(row["joint"]) - 1]
            assert joint.position_mm[row["temperature"]] == pytest.approx(float(row["position_mm"]), abs=5e-6), row
    assert found.movement_mm == pytest.approx(18506.9 - 18488.96)  # 17.94
    assert (found.movement_at_start_mm, found.movement_at_end_mm) == (0, pytest.approx(17.94))
    assert found.closing_mm == pytest.approx(18506.9 - 18495.86)  # 11.04
    assert found.opening_mm == pytest.approx(18495.86 - 18488.96)  # 6.90


def test_gaps_at_each_piece_by_hand() -> None:
    """Each joint takes the piece before it: steel 6000 x 12e-6 x 40 = 2.88 and 4.68 in all, aluminium 4000 x 23e-6 x 40 = 3.68."""
    found = line(*MIXED, joint_min_mm=2.0, joint_max_mm=8.0)
    assert [(j.after, j.before) for j in found.joints] == [("B", "B #2"), ("B #2", "A"), ("A", "S")]
    assert [j.gap_to_set_mm for j in found.joints] == pytest.approx([2 + 2.88, 2 + 2.88, 2 + 3.68])
    assert [j.gap_mm["warmest"] for j in found.joints] == pytest.approx([2, 2, 2])
    assert [j.gap_mm["coldest"] for j in found.joints] == pytest.approx([2 + 4.68, 2 + 4.68, 2 + 5.98])
    # Setting out: 5998.92; then with the gap before it 11997.84 + 4.88; then 15996.46 + 2 x 4.88.
    assert [j.set_out_mm for j in found.joints] == pytest.approx([5998.92, 12002.72, 16006.22])
    refused = line(*MIXED, joint_min_mm=2.0, joint_max_mm=7.0)
    assert [f.kind for f in refused.findings if f.level == "refused"] == ["gap-impossible"]
    assert "7.98" in refused.findings[-1].message


def test_joints_at_the_ends_only() -> None:
    """Fixed at the aluminium piece: two steels to its left arrive at the start, aluminium and stainless at the end."""
    found = line(*MIXED, fixed="A", joints="ends", joint_min_mm=5.0)
    assert found.fixed_at == "start of A"
    assert found.movement_at_start_mm == pytest.approx(12000 * 12e-6 * 65)  # 9.36
    assert found.movement_at_end_mm == pytest.approx(4000 * 23e-6 * 65 + 2500 * 16e-6 * 65)  # 5.98 + 2.6
    first, *inner, last = found.joints
    assert (first.after, last.before) == (None, None)
    assert [j.gap_to_set_mm for j in inner] == [None, None, None]
    assert first.gap_to_set_mm == pytest.approx(5 + 12000 * 12e-6 * 40)  # 10.76
    assert last.gap_to_set_mm == pytest.approx(5 + 4000 * 23e-6 * 40 + 2500 * 16e-6 * 40)  # 10.28
    assert first.position_mm["warmest"] == pytest.approx(-12000 * 12e-6 * 25)  # the start moves out by 3.6
    assert inner[1].position_mm["warmest"] == pytest.approx(12000)  # the fixed point stays


def test_sixty_metres_fixed_at_the_end() -> None:
    """10 x 6 m: 60 m, 46.8 mm; fixed at the end the start moves, and the positions are counted from the line's start at 20 °C."""
    found = line(("B", 10, 6000.0, STEEL), fixed="end")
    assert found.length_mm == pytest.approx(60_000)
    assert found.movement_mm == pytest.approx(46.8)
    assert (found.movement_at_start_mm, found.movement_at_end_mm) == (pytest.approx(46.8), 0)
    assert len(found.joints) == 9
    assert found.joints[0].position_mm["warmest"] == pytest.approx(60_000 - 9 * 6001.8)
    assert found.joints[8].gap_to_set_mm == pytest.approx(2.88)


@given(
    st.lists(st.tuples(st.integers(1, 4), st.floats(100, 12_000), st.sampled_from([STEEL, ALUMINIUM, STAINLESS])), min_size=1, max_size=6),
    st.data(),
)
def test_a_run_moves_as_its_members_do(parts: list[tuple[int, float, materials.Material]], data: st.DataObject) -> None:
    """Wherever it is fixed, the ends' movements add up to the sum over the members, and no gap falls below its least."""
    members = [RunPart(f"M{i}", q, size, m) for i, (q, size, m) in enumerate(parts)]
    fixed = data.draw(st.sampled_from(["start", "end", *[m.mark for m in members]]))
    joints = data.draw(st.sampled_from(["each", "ends"]))
    found = run_movement(RunRule("R", fixed, joint_min_mm=3.0, joints=joints), members, RunTemperatures(NAMED))
    alone = sum(q * size * (m.alpha_per_K or 0) * 65 for q, size, m in parts)
    assert found.movement_mm == pytest.approx(alone, rel=1e-9)
    assert found.movement_at_start_mm is not None
    assert found.movement_at_end_mm is not None
    assert found.movement_at_start_mm + found.movement_at_end_mm == pytest.approx(alone, rel=1e-9)
    for joint in found.joints:
        assert all(gap is not None and gap >= 3 - 1e-6 for gap in joint.gap_mm.values())


def test_an_order_places_the_members() -> None:
    """The job's order, piece by piece where a mark comes as often as it has pieces."""
    found = line(*MIXED, order=("S", "B", "A"), joints="ends")
    assert [j.after for j in found.joints] == ["S", "B", "B #2", "A"]
    parted = line(*MIXED, order=("B", "A", "B", "S"))
    assert [(j.after, j.before) for j in parted.joints] == [("B", "A"), ("A", "B #2"), ("B #2", "S")]


@pytest.mark.parametrize(
    ("rule", "kind", "words"),
    [
        ({"order": ("B", "A")}, "run-order", "gaps"), ({"order": ("B", "A", "S", "Q")}, "run-order", "not there"),
        ({"order": ("B", "A", "A", "S")}, "run-order", "not there"), ({"fixed": "Q"}, "run-order", "no member of this mark"),
    ],
)
def test_a_run_with_gaps_in_its_order_is_refused(rule: dict[str, Any], kind: str, words: str) -> None:
    """Nothing of it is computed, and what is wrong is said."""
    found = line(*MIXED, **rule)
    assert (found.movement_mm, found.joints) == (None, ())
    [finding] = found.findings
    assert (finding.level, finding.kind) == ("refused", kind)
    assert words in finding.message


def test_a_run_with_a_member_that_lacks_something_is_refused() -> None:
    """A member without length, material, coefficient or quantity: its name is said."""
    for part in (("Q", 1, None, STEEL), ("Q", 1, 500.0, None), ("Q", 0, 500.0, STEEL)):
        [finding] = line(*MIXED, part).findings
        assert (finding.kind, finding.read) == ("run-incomplete", "Q")
    bare = next(m for m in materials.all_materials() if m.alpha_per_K is None)
    assert {f.kind for f in line(*MIXED, ("Q", 1, 500.0, bare)).findings} == {"no-coefficient"}
    assert run_movement(RunRule("R"), [], RunTemperatures(NAMED)).findings[0].kind == "run-order"


def test_a_very_long_run_is_given_in_total() -> None:
    """A million pieces are summed, not listed joint by joint."""
    found = line(("B", 1_000_000, 6000.0, STEEL))
    assert found.movement_mm == pytest.approx(6e9 * 12e-6 * 65)
    assert found.joints == ()


def test_runs_of_a_list(write_list: WriteList) -> None:
    """Members that share a run form one line; without [[runs]] it is fixed at its first member's start, assumed."""
    rows = [["B", 10, "UB 203x133x25", "S355", 6000, None, None, None, "North", None],
            ["A", 2, "Plate", "aluminium", 4000, 200, 10, None, "South", None]]
    job = {"temperatures": {"coldest": -20, "warmest": 45, "erect": 5}, "runs": [{"name": "South", "fixed": "end"}, {"name": "West"}]}
    result = schedule(write_list, rows, job)
    found = json.loads(records.to_json(result))["movements"]
    assert [m["run"] for m in found] == ["North", "South", "West"]
    assert found[0]["movement_mm"] == pytest.approx(46.8)
    assert "assumed" in found[0]["fixed_at"]
    assert [f["kind"] for f in found[0]["findings"]] == ["run-fixed-assumed"]
    assert found[1]["fixed_at"] == "end of the line"
    assert found[2]["movement_mm"] is None
    assert "Run North" in terminal.summary(result)


# -- job file and commands ---------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("job", "message"),
    [
        ({"temperatures": {"cut": -300}}, "temperatures.cut: below absolute zero"), ({"temperatures": {"cut": True}}, "no temperature"),
        ({"temperatures": {"coldest": 30, "warmest": 20}}, "coldest is above"), ({"runs": [{"nam": "R"}]}, "unknown key 'runs.0.nam'"),
        ({"runs": [{"name": "R", "joint_min_mm": 9, "joint_max_mm": 5}]}, "joint_min_mm is above"),
        ({"runs": [{"name": "R"}, {"name": "R"}]}, "two runs have one name"), ({"runs": [{"name": "R", "joints": "all"}]}, "runs.0.joints"),
        ({"reading": {"tape": {"material": "steel"}}}, "reading.tape.temperature_C"),
    ],
)
def test_bad_job_files(job: dict[str, Any], message: str) -> None:
    """One message that names the key."""
    with pytest.raises(JobError, match=message):
        job_from(job)


def test_an_unknown_tape_is_refused(write_list: WriteList) -> None:
    """A tape of something with no known coefficient measures nothing."""
    with pytest.raises(JobError, match=r"reading\.tape\.material"):
        schedule(write_list, [["A", 1, "Plate", "aluminium", 4000, 200, 10, None, None, None]],
                 {"reading": {"tape": {"material": "unobtainium", "temperature_C": 30}}})


def test_the_movement_command(run: Run) -> None:
    """JSON alone, SI, with law, sources, table, findings and cautions; the card says the same."""
    asked = ("movement", "S355", "60 m", "--from", "-20", "--to", "45", "--set-at", "5", "--gap-min", "5")
    done = run(*asked, "--against", "aluminium", "--json")
    assert (done.returncode, done.stderr) == (0, "")
    record = json.loads(done.stdout)
    assert record["movement_mm"] == pytest.approx(46.8)
    assert record["against"]["difference_mm"] == pytest.approx(60_000 * 65 * (12 - 23) * 1e-6)
    assert [entry["temperature_C"] for entry in record["lengths"]] == [-20, 5, 20, 45]
    assert record["law"]["pieces"][0]["source"]["evidence"]
    assert record["cautions"]
    card = run(*asked).stdout
    for words in ("+46.80", "gap 33.80", "steel tape reads", "EN 1993-1-1", "not the air's"):
        assert words in card.replace("\u00a0", " ")
    us = run("movement", "S355", "200 ft", "--from", "0F", "--to", "100F", "--units", "us").stdout
    assert "+1.600 in" in us  # 2400 in x 100 x 6.667e-6


@pytest.mark.parametrize(
    ("arguments", "status", "words"),
    [
        (["S355", "6 m", "--from", "-300", "--to", "20"], 2, "absolute zero"),
        (["S355", "6 kg", "--from", "0", "--to", "20"], 2, "no length"),
        (["S355", "6 m", "--from", "0", "--to", "20", "--gap-min", "5", "--gap-max", "4"], 2, "least gap is larger"),
        (["S355", "0", "--from", "0", "--to", "20"], 2, "no length"),
        (["S355", "6 m", "--from", "0", "--to", "20", "--law", "x"], 2, "no law"),
        (["unobtainium", "6 m", "--from", "0", "--to", "20"], 1, "unobtainium"),
        (["S355", "6 m", "--from", "0", "--to", "20", "--against", "unobtainium"], 1, "unobtainium"),
        (["aluminium", "6 m", "--from", "0", "--to", "900"], 1, "melting"),
        (["S355", "60 m", "--from", "-20", "--to", "45", "--gap-max", "10"], 1, "no gap serves"),
    ],
)
def test_what_movement_refuses(run: Run, arguments: list[str], status: int, words: str) -> None:
    """One message and a status, never a traceback."""
    done = run("movement", *arguments)
    assert done.returncode == status
    assert words in done.stdout + done.stderr
    assert "Traceback" not in done.stderr


def test_the_fit_command(run: Run) -> None:
    """Diameters at their temperatures, interference, and the temperature for a wanted clearance."""
    done = run("fit", "S355", "99.92", "S355", "100", "--clearance", "0.004", "--json")
    record = json.loads(done.stdout)
    assert record["clearance_mm"] == pytest.approx(-0.08)
    assert record["temperature_for_clearance_C"] == pytest.approx(20 + 0.084 / (99.92 * 12e-6), abs=1e-5)
    assert record["temperatures_C"] == {"bore": 20.0, "pin": 20.0}
    card = run("fit", "S355", "99.92", "S355", "100", "--clearance", "0.004").stdout.replace("\u00a0", " ")
    assert "Interference 0.080 mm" in card
    assert "bring the bore to 90.1 °C" in card
    assert run("fit", "S355", "50", "S355", "60", "--clearance", "1").returncode == 1
    assert run("fit", "S355", "0", "S355", "60").returncode == 2
    assert run("fit", "nothing like it", "50", "S355", "60").returncode == 1
