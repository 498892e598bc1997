"""`takeoff material`: cards, comparisons, JSON, temperatures, moisture, exit status, odd terminals."""

from __future__ import annotations

import json
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
import typer
from typer.testing import CliRunner, Result

from takeoff.cli.material import material
from takeoff.errors import TakeoffError

app = typer.Typer(rich_markup_mode=None, pretty_exceptions_enable=False)
app.command()(material)
app.command("other")(lambda: None)
RUNNER = CliRunner()


def _run(*arguments: str, width: int = 80) -> Result:
    return RUNNER.invoke(app, ["material", *arguments], env={"COLUMNS": str(width)})


def _json(*arguments: str, status: int = 0) -> list[dict[str, Any]]:
    result = _run(*arguments, "--json")
    assert result.exit_code == status, result.output
    found = json.loads(result.output)
    assert isinstance(found, list)
    return found


def test_a_card_says_what_a_checker_needs() -> None:
    """Density with spread, coefficient with interval, lines at temperatures, sources with evidence, other names, caution."""
    text = _run("1.4301", "--at", "-196C", "--at", "400C").output
    for piece in ("X5CrNi18-10", "7 900 kg/m³", "low 7 900", "high 8 030", "EN 10088-1", "(read)", "16 x 10^-6 per K", "20 °C to 100 °C",
                  "nist-304", "ec3-stainless", "−196 °C", "−2.863 mm/m", "400 °C", "+6.695 mm/m", "UNS S30400", "Caution"):  # fmt: skip
        assert piece in text.replace("\u00a0", " ").replace("\n          ", " "), piece


@pytest.mark.parametrize("width", [40, 80, 120])
@pytest.mark.parametrize("arguments", [["s355", "--at", "60"], ["gold", "water", "lead", "--at", "4"], ["C35"], [], ["--family", "stone"]])
def test_lines_fit_the_terminal(width: int, arguments: list[str]) -> None:
    """At 40 columns and at 80 no line is longer than the terminal."""
    result = _run(*arguments, width=width)
    assert max(map(len, result.output.splitlines())) <= max(width, 40)


def test_gold_and_water() -> None:
    """Gold 19.3 g/cm³ and water 1 g/cm³ at 4 °C."""
    gold, water = _json("gold", "water", "--at", "4")
    assert gold["material"]["density_kg_m3"]["nominal"] == 19300
    assert round(gold["material"]["at"][0]["density_kg_m3"] / 1000, 1) == 19.3
    assert round(water["material"]["at"][0]["density_kg_m3"] / 1000, 4) == 1.0
    assert water["material"]["at"][0]["elongation"] is None
    assert water["material"]["at"][0]["within_validity"] is True


def test_json_has_the_promised_keys() -> None:
    """The shape that other programs rely on."""
    (found,) = _json("oak", "--at", "60")
    assert set(found) >= {"query", "match", "score", "candidates", "material"}
    assert set(found["material"]) >= {
        "key", "name", "family", "designations", "density_kg_m3", "density_condition", "density_source", "alpha_per_K",
        "alpha_interval_C", "alpha_direction", "alpha_source", "law", "at",
    }  # fmt: skip
    assert set(found["material"]["density_kg_m3"]) == {"low", "nominal", "high"}
    assert set(found["material"]["density_source"]) == {"title", "clause", "evidence"}
    assert set(found["material"]["law"]) == {"name", "pieces"}
    assert set(found["material"]["law"]["pieces"][0]) == {"from_C", "to_C", "source"}
    at = found["material"]["at"][0]
    assert set(at) >= {"temperature_C", "elongation", "elongation_by_direction", "density_kg_m3", "within_validity"}
    assert at["temperature_C"] == 60
    assert at["elongation"] == at["elongation_by_direction"]["along"] == pytest.approx(40 * 5e-6)


def test_a_clash_exits_1_with_its_candidates() -> None:
    """`C35`: ambiguous, status 1, three candidates, in text and in JSON."""
    (found,) = _json("C35", status=1)
    assert found["match"] == "ambiguous"
    assert found["material"] is None
    assert [c["key"] for c in found["candidates"]] == ["steel-c35", "timber-c35", "concrete"]
    result = _run("C35")
    assert result.exit_code == 1
    assert "timber-c35" in result.output


def test_one_unsure_query_among_several_exits_1() -> None:
    """The sure ones are answered all the same."""
    result = _run("gold", "unobtainium")
    assert result.exit_code == 1
    assert "19 300" in result.output.replace("\u00a0", " ")
    assert "unobtainium: not found" in result.output


@pytest.mark.parametrize(("text", "celsius"), [("60", 60), ("60C", 60), ("140F", 60), ("-196C", -196), ("77K", -196.15), ("60 °C", 60)])
def test_temperatures_read_as_people_write_them(text: str, celsius: float) -> None:
    """Celsius unless it says otherwise."""
    (found,) = _json("s355", "--at", text)
    assert found["material"]["at"][0]["temperature_C"] == pytest.approx(celsius)


@pytest.mark.parametrize(
    ("arguments", "says"),
    [
        (["s355", "--at", "-300C"], "below absolute zero"),
        (["s355", "--at", "-1K"], "below absolute zero"),
        (["s355", "--at", "hot"], "no temperature"),
        (["s355", "--at", "9" * 3000], "no temperature"),
        (["oak", "--moisture", "201"], "moisture content cannot be"),
        (["oak", "--moisture", "-1"], "moisture content cannot be"),
        (["oak", "--moisture", "nan"], "moisture content cannot be"),
        (["s355", "--moisture", "12"], "moisture applies to wood only"),
        (["s355", "--at", "60", "--law", "wishful"], "no law of this name"),
        (["--at", "60"], "no material is named"),
        (["--family", "cheese"], "no such family"),
        (["s355", "--family", "stone"], "both given"),
    ],
)
def test_bad_input_is_one_clear_message_of_status_2(arguments: list[str], says: str) -> None:
    """Wrong options raise our own error, which the command turns into status 2."""
    result = _run(*arguments)
    assert isinstance(result.exception, TakeoffError)
    assert result.exception.status == 2
    assert says in str(result.exception)
    assert len(str(result.exception)) < 2500


def test_above_melting_is_null_and_status_1() -> None:
    """No length, no density, flagged, status 1."""
    (found,) = _json("lead", "--at", "400", status=1)
    at = found["material"]["at"][0]
    assert (at["elongation"], at["density_kg_m3"], at["within_validity"]) == (None, None, False)
    assert "melting" in at["reason"]


def test_outside_validity_is_flagged_and_answered() -> None:
    """The slope is held, and the words say so; the look-up itself is sure."""
    (found,) = _json("granite", "--at", "300")
    at = found["material"]["at"][0]
    assert at["within_validity"] is False
    assert at["elongation"] == pytest.approx(280 * 7.9e-6)
    assert "the last slope is held" in _run("granite", "--at", "300").output.replace("\n          ", " ")


def test_moisture_changes_wood_alone() -> None:
    """Oak at 25 %, in three languages; steel beside it is left as it is."""
    oak, eiche, chene, steel = _json("oak", "Eiche", "chêne", "s355", "--moisture", "25")
    assert oak["material"]["density_kg_m3"] == eiche["material"]["density_kg_m3"] == chene["material"]["density_kg_m3"]
    assert 710 < oak["material"]["density_kg_m3"]["nominal"] < 800
    assert steel["material"]["density_kg_m3"]["nominal"] == 7850
    assert "25 % moisture" in _run("oak", "--moisture", "25").output


def test_us_units_are_for_print_only() -> None:
    """490 lb/ft³ on the card, SI in the JSON."""
    text = _run("steel", "--units", "us", "--at", "140F").output.replace("\u00a0", " ")
    assert "490.1 lb/ft³" in text
    assert "140 °F" in text
    assert "in per 100 ft" in text
    assert _json("steel", "--units", "us") == _json("steel")


def test_printed_bounds_never_round_toward_danger() -> None:
    """Low is printed rounded down, high rounded up."""
    text = _run("oak", "--moisture", "25").output.replace("\u00a0", " ")
    (found,) = _json("oak", "--moisture", "25")
    bounds = found["material"]["density_kg_m3"]
    low = float(text.partition("low ")[2].partition(",")[0])
    high = float(text.partition("high ")[2].partition(")")[0])
    assert low <= bounds["low"]
    assert high >= bounds["high"]


def test_the_families_and_one_of_them() -> None:
    """No name lists the families; --family lists the rows, by family or by kind."""
    assert "timber hardwood" in _run().output
    assert "granite: Granite" in _run("--family", "stone").output
    assert len(_json("--family", "wood")) > len(_json("--family", "timber softwood")) > 20
    assert sum(entry["materials"] for entry in _json()) >= 620


@pytest.mark.parametrize("text", ["\x1b[31mred\x07", "a\u202eb", "x" * 10_000, "\x00"])
def test_hostile_text_is_shown_harmless(text: str) -> None:
    """No control sign or direction mark of a query reaches the terminal."""
    result = _run(text)
    assert result.exit_code == 1
    assert not set(result.output) & {"\x1b", "\x07", "\x00", "\u202e"}
    assert len(result.output) < 2000


def test_quiet_prints_nothing_but_json() -> None:
    """`--quiet` leaves the status."""
    assert _run("s355", "--quiet").output == ""
    assert _run("C35", "--quiet").exit_code == 1
    assert _json("s355", "--quiet")[0]["material"]["key"] == "s355"


def test_a_law_by_name() -> None:
    """One published curve alone."""
    (found,) = _json("s355", "--at", "500", "--law", "ec3-carbon")
    assert found["material"]["at"][0]["elongation"] == pytest.approx(0.0067584)
    assert found["material"]["law"]["name"] == "ec3-carbon"


def test_the_installed_command(run: Callable[..., subprocess.CompletedProcess[str]], tmp_path: Path) -> None:
    """From an empty folder: the card, the status, one message on standard error, no traceback."""
    done = run("material", "1.4301", "--at", "60C", cwd=tmp_path)
    assert done.returncode == 0
    assert "7 900" in done.stdout.replace("\u00a0", " ")
    wrong = run("material", "s355", "--at", "-300", cwd=tmp_path)
    assert wrong.returncode == 2
    assert wrong.stdout == ""
    assert "absolute zero" in wrong.stderr
    assert "Traceback" not in wrong.stderr
    narrow = run("material", "C35", "--json", cwd=tmp_path, env={"PYTHONIOENCODING": "ascii", "COLUMNS": "40"})
    assert narrow.returncode == 1
    assert json.loads(narrow.stdout)[0]["match"] == "ambiguous"


def test_a_card_loads_nothing_heavy(tmp_path: Path) -> None:
    """Neither pandas, numpy, openpyxl nor pint; rapidfuzz only where a suggestion is asked for."""
    code = (
        "import sys; sys.argv = ['takeoff', 'material', '1.4301', '--at', '60']\n"
        "from takeoff.cli import main\n"
        "try: main()\n"
        "except SystemExit: pass\n"
        "print(sorted(m for m in ('pandas', 'numpy', 'openpyxl', 'pint', 'rapidfuzz', 'xlsxwriter') if m in sys.modules))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, cwd=tmp_path, check=True)
    assert done.stdout.splitlines()[-1] == "[]"
