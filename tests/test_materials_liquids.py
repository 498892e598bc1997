"""Liquids away from their tabulated temperature: published densities in between, no answer outside them."""

from __future__ import annotations

from itertools import pairwise
from math import exp
from pathlib import Path

import pytest

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials import all_materials, by_key, density_at, load_own, lookup
from takeoff.materials.liquids import liquid_points, read_points
from takeoff.materials.table import source_titles
from takeoff.provenance import EVIDENCE
from takeoff.weighing import filled

CHECKS = [row for _, row in read_table(Path(__file__).parent / "published" / "liquid_density_checks.csv")]
HEADING = "key,temperature_C,density_kg_m3,source,clause,evidence\n"


@pytest.mark.parametrize("row", CHECKS, ids=lambda row: f"{row['key']} {row['temperature_C']}")
def test_densities_meet_published_figures(row: dict[str, str]) -> None:
    """The ratio of densities at two temperatures is that of an independent figure, within what the check says."""
    material = by_key(row["key"])
    here, there = (density_at(material, float(row[column])).density for column in ("from_C", "temperature_C"))
    assert here is not None
    assert there is not None
    assert there.nominal / here.nominal == pytest.approx(float(row["ratio"]), abs=float(row["within"]))


@pytest.mark.parametrize(
    ("key", "k0", "k1"),
    [
        ("petrol", 346.42278, 0.43884), ("kerosene", 594.5418, 0.0), ("diesel", 594.5418, 0.0), ("heavy-fuel-oil", 186.9696, 0.48618),
        ("crude-oil", 613.97226, 0.0), ("lube-oil", 0.0, 0.6278), ("hydraulic-oil", 0.0, 0.6278), ("transformer-oil", 0.0, 0.6278),
    ],
)  # fmt: skip
def test_petroleum_follows_the_volume_correction_of_astm_d1250(key: str, k0: float, k1: float) -> None:
    """Between the tabulated points too, density is that at 15 °C times exp(-a t (1 + 0.8 a t)) with a = (K0 + K1 d) / d²."""
    material = by_key(key)
    fifteen = density_at(material, 15).density
    assert fifteen is not None
    assert fifteen.nominal is not None
    alpha = (k0 + k1 * fifteen.nominal) / fifteen.nominal**2
    for t in (-40, -33, -10, 0, 7.5, 20, 38, 60):
        found = density_at(material, t).density
        assert found is not None
        step = alpha * (t - 15)
        assert found.nominal == pytest.approx(fifteen.nominal * exp(-step * (1 + 0.8 * step)), rel=5e-4)


def test_a_fuel_is_heavier_in_the_cold_by_hand() -> None:
    """Petrol of 750 kg/m³ at 15 °C: 1.201e-3 per K, so 781 at -20 °C; its bounds move with it."""
    found = density_at(by_key("petrol"), -20)
    assert found.within_validity
    assert found.density is not None
    assert found.density.nominal == pytest.approx(781.5, abs=1.0)
    assert found.density.high / found.density.nominal == pytest.approx(775 / 750)


def test_the_tabulated_density_stands_at_its_own_temperature() -> None:
    """At the temperature its row states a liquid has the row's density."""
    for key in liquid_points():
        material = by_key(key)
        stated = 15.0 if material.density_condition.startswith("15 °C") else 20.0
        found = density_at(material, stated).density
        assert found is not None, key
        assert found.nominal == pytest.approx(material.density.nominal), key


def test_no_answer_outside_the_published_range() -> None:
    """A liquid is not followed past its points: it may freeze or boil there."""
    found = density_at(by_key("ethanol"), 90)
    assert found.density is None
    assert not found.within_validity
    assert "-40 to 60 °C" in found.reason
    assert density_at(by_key("glycol-ethylene-20"), -30).density is None


def test_every_common_liquid_of_vessels_has_an_answer_at_five_degrees() -> None:
    """What people fill vessels with: fuels, oils, alcohols, glycols, sea water, mercury."""
    texts = "petrol, diesel, heating oil, hydraulic oil, ethanol, MEG 30 %, sea water, mercury, lubricating oil, LPG, biodiesel, MPG 40 %"
    for text in texts.split(", "):
        material = lookup(text).material
        assert material is not None, text
        assert density_at(material, 5).density is not None, text


def test_points_fall_with_temperature_and_are_sourced() -> None:
    """Every row of points is of a material, has a source, and each liquid thins as it warms, by 0.1 to 3.5 per mille a degree."""
    keys = {m.key for m in all_materials()}
    for _, row in read_table(data_folder() / "liquid_densities.csv"):
        assert row["source"] in source_titles(), row
        assert row["evidence"] in EVIDENCE, row
    for key, points in liquid_points().items():
        assert key in keys
        for (t0, d0), (t1, d1) in pairwise(points):
            assert 1e-4 < (d0 - d1) / d0 / (t1 - t0) < 3.5e-3, (key, t0, t1)


@pytest.mark.parametrize(
    ("rows", "says"),
    [
        ("water-fresh,20,heavy,crc,,read\n", "this is no number"),
        ("petrol,20,745,crc,,read\npetrol,10,753,crc,,read\n", "out of order"),
        ("petrol,20,745,crc,,read\n", "a single temperature"),
    ],
)
def test_faulty_points_do_not_load(tmp_path: Path, rows: str, says: str) -> None:
    """A table of points that cannot be followed is refused with its line."""
    path = tmp_path / "liquid_densities.csv"
    path.write_text(HEADING + rows, encoding="utf-8")
    with pytest.raises(DataError, match=says):
        read_points(path)


def test_a_tank_of_fuel_in_winter_is_weighed_heavy_at_its_coldest() -> None:
    """From -20 to 40 °C a steel tank holds the more diesel the colder it is: 3.0 % more at -20 °C than at 15 °C."""
    diesel, steel = by_key("diesel"), by_key("steel-structural")
    found = filled.over(steel, (diesel,), (-20.0, 40.0))
    assert found.heaviest_C == -20
    assert found.lightest_C == 40
    assert found.heavy == pytest.approx(845 * 1.030 * (1 - 12e-6 * 40) ** 3, rel=2e-3)
    assert found.reason == ""


def test_an_own_row_is_not_moved_by_our_points(tmp_path: Path) -> None:
    """A user's diesel of their own has the density they state, at 20 °C and nowhere else."""
    table = tmp_path / "own.csv"
    heading = "key,name,family,density_kg_m3,density_source,density_evidence\n"
    table.write_text(heading + "diesel,Winter diesel,liquid,830,delivery note,read\n", encoding="utf-8")
    mine = load_own(table).materials["diesel"]
    assert density_at(mine, 20).density is not None
    assert density_at(mine, -20).density is None
