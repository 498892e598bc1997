"""`takeoff section`: the card, the comparison, the family's sizes, the JSON, and the exit status."""

from __future__ import annotations

import json
import subprocess
import sys

import pytest
import typer
from typer.testing import CliRunner

from takeoff.cli.section import section

app = typer.Typer(rich_markup_mode=None, pretty_exceptions_enable=False)
app.command()(section)
KEYS = {
    "query",
    "match",
    "designation",
    "family",
    "standard",
    "shape",
    "dimensions_mm",
    "area_mm2",
    "inner_area_mm2",
    "surface_m2_per_m",
    "centroid_mm",
    "kg_per_m",
    "kg_per_m2",
    "kg_each",
    "volume_m3",
    "published_kg_per_m",
    "material",
    "source",
    "candidates",
}


def ask(*arguments: str, columns: int = 80) -> tuple[int, str]:
    result = CliRunner().invoke(app, list(arguments), env={"COLUMNS": str(columns)})
    assert not (result.exception and not isinstance(result.exception, SystemExit)), result.exception
    return result.exit_code, result.stdout


def test_a_card_names_mass_bounds_rule_and_source() -> None:
    """One name: sizes, kg/m with its bounds, the tolerance's source, the table's source, a drawing, the caution."""
    status, text = ask("UB 457x191x67")
    assert status == 0
    flat = " ".join(text.split())
    for part in (
        "h 453.4",
        "light 64.4, nominal 67.1, heavy 69.8 kg/m",
        "EN 10034",
        "(read2)",
        "8 551 mm²",
        "EN 10365",
        "9.9 % of the solid bar",
        "Caution",
    ):
        assert part in flat
    assert "#########" in text


@pytest.mark.parametrize(
    "name", ["UB 457x191x67", "SHS 100x5", "Board 45x195", "PL 12", "Arch stone R3500 D450 A6 W600", "Grating 34 kg/m2"]
)
def test_a_narrow_terminal_is_wide_enough(name: str) -> None:
    """At 40 columns no line is longer than 40."""
    _, text = ask(name, columns=40)
    assert max(len(line) for line in text.splitlines()) <= 40


def test_json_has_the_agreed_fields() -> None:
    """One object a query, SI, absent figures null; the nominal is the published kg/m for carbon steel."""
    status, text = ask("UB 457x191x67", "PL 12", "--json")
    assert status == 0
    beam, plate = json.loads(text)
    assert set(beam) >= KEYS
    assert beam["kg_per_m"] == {"light": pytest.approx(67.1 * 0.96), "nominal": 67.1, "heavy": pytest.approx(67.1 * 1.04)}
    assert beam["centroid_mm"] == pytest.approx([189.9 / 2, 453.4 / 2])
    assert set(beam["source"]) == {"title", "clause", "evidence"}
    assert plate["kg_per_m"] is None


def test_another_material_is_area_times_density() -> None:
    """Stainless steel in a carbon steel table's shape: its own density, and its spread in the bounds."""
    _, text = ask("UPN 200", "--material", "1.4401", "--json")
    record = json.loads(text)[0]
    density = record["kg_per_m"]["nominal"] / record["area_mm2"] * 1e6
    assert 7900 <= density <= 8000
    assert record["kg_per_m"]["light"] < record["kg_per_m"]["nominal"] < record["kg_per_m"]["heavy"]


def test_several_names_are_compared_and_one_unknown_changes_the_status() -> None:
    """A comparison shows all, the unknown with its nearest; status 1."""
    status, text = ask("IPE 300", "HEA 200", "IPE 305")
    assert status == 1
    assert "IPE 300" in text
    assert "HE 200 A" in text
    assert "IPE O 300" in text


def test_a_family_lists_its_sizes() -> None:
    """A family's name lists every size with its mass; no name at all lists the families."""
    status, text = ask("UB")
    assert status == 0
    assert "UB 457x191x67" in text
    assert text.count("UB ") > 100
    status, text = ask()
    assert status == 0
    assert "universal beams" in text


@pytest.mark.parametrize(
    ("family", "size"),
    [("HEB", "HE 200 B"), ("FL", "FL 100x10"), ("pipe", "Pipe DN100 SCH 40"), ("W", "W12X50"), ("Rebar", "Rebar 16"), ("ISMB", "ISMB 300")],
)
def test_every_family_can_be_listed(family: str, size: str) -> None:
    """Families answer to their word or code, in capitals or not."""
    status, text = ask(family)
    assert status == 0
    assert size in text


@pytest.mark.parametrize("name", ["IPE 305", "50x50x5", "foo", "RHS 100x50x60"])
def test_what_is_not_sure_is_status_1(name: str) -> None:
    """Refused and ambiguous names end with status 1, say why, and offer something real."""
    status, text = ask(name)
    assert status == 1
    assert "Perhaps" in text or name == "foo"
    status, text = ask(name, "--json")
    assert status == 1
    assert json.loads(text)[0]["designation"] is None


def test_an_unknown_material_is_not_guessed() -> None:
    """A material that is not sure ends the look-up with status 1."""
    status, _ = ask("UB 457x191x67", "--material", "unobtainium")
    assert status == 1


def test_us_units() -> None:
    """lb/ft and inches for print."""
    _, text = ask("UB 457x191x67", "--units", "us")
    assert "lb/ft" in text
    assert "17.85 in" in text


def test_the_usual_steel_is_the_table_s() -> None:
    """The name and density kept in the command are those of the materials table."""
    from takeoff import materials
    from takeoff.cli.section import STEEL, USUAL_STEEL

    steel = materials.by_key("steel-structural")
    assert steel.name == USUAL_STEEL
    assert steel.density.nominal == STEEL


def test_a_plain_look_up_loads_nothing_heavy() -> None:
    """Neither pandas, numpy, openpyxl, pint nor the materials table is loaded for a card."""
    code = (
        "import sys; from takeoff.cli.section import section; section(['UB 457x191x67']); "
        "heavy = {'pandas', 'numpy', 'openpyxl', 'pint', 'rapidfuzz', 'takeoff.materials'} & set(sys.modules); "
        "sys.exit(', '.join(sorted(heavy)) or 0)"
    )
    result = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert result.returncode == 0, result.stderr
