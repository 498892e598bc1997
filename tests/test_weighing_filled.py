"""What fills a vessel at the job's temperatures: heaviest where it is densest, said, and never lighter than at 20 °C."""

from __future__ import annotations

import pytest
from hypothesis import example, given
from hypothesis import strategies as st
from weighing_rows import BEAM, TUBE, Rows

from takeoff import materials
from takeoff.materials.water import sea_water_density, water_density
from takeoff.weighing import filled

STEEL = materials.by_key("steel-structural")
WATER, SEA = materials.by_key("water-fresh"), materials.by_key("water-sea")
JOB = {"temperatures": {"coldest": 2.0, "erect": 10.0, "warmest": 45.0}}


def test_a_hydrotest_by_hand() -> None:
    """A m³ of steel vessel at 60 °C is (1 + 12e-6 x 40)³ = 1.00144 m³, filled with water at 983.2 kg/m³ (Kell)."""
    found = filled.fill_kg_m3(STEEL, WATER, 60)
    assert found is not None
    assert found.nominal == pytest.approx(1.00048**3 * 983.196, rel=2e-5)
    assert filled.fill_kg_m3(STEEL, WATER, 120) is None


@given(st.floats(-60, 90), st.floats(-60, 90))
@example(20.0, 20.0)
def test_heaviest_is_at_least_every_temperature_between(a: float, b: float) -> None:
    """Whatever the coldest and warmest are, no temperature between them has denser or lighter water than what is covered."""
    low, high = sorted((a, b))
    found = filled.over(STEEL, (WATER,), (low, high))
    for t in (low, (low + high) / 2, high, 20.0, 4.0):
        if 0 <= t <= 100 and min(low, 20) <= t <= max(high, 20):
            assert found.light * (1 - 1e-6) <= filled.volume_factor(STEEL, t) * water_density(t) <= found.heavy * (1 + 1e-6)


def test_water_in_winter_is_heaviest_a_little_over_four_degrees() -> None:
    """From 2 to 45 °C a steel vessel holds most where water thins by the 36e-6 per K that its inside grows: near 6.5 °C."""
    found = filled.over(STEEL, (WATER,), (2.0, 45.0))
    assert found.heaviest_C == pytest.approx(6.5, abs=0.5)
    assert found.heavy == pytest.approx(999.925 * (1 - 12e-6 * 13.5) ** 3, rel=1e-6)
    assert filled.over(None, (WATER,), (2.0, 45.0)).heaviest_C == 4.0


def test_sea_water_is_weighed_heavy_at_its_coldest() -> None:
    """A list whose job is colder than 20 °C carries sea water at the density of the cold, and says so."""
    plain, cold = (Rows([{**TUBE, "Contents": "sea water"}], job) for job in ({}, {"temperatures": {"coldest": -1.0}}))
    grown = sea_water_density(-1.0) / sea_water_density(20.0) * (1 - 12e-6 * 21) ** 3
    heavy = plain.mass("add_contents")[1] * 1.04 * grown
    assert cold.mass("add_contents")[2] == pytest.approx(max(heavy, plain.mass("add_contents")[2]), rel=1e-4)
    assert cold.mass("add_contents")[1] == plain.mass("add_contents")[1]
    [finding] = [f for f in cold.findings() if f.kind == "contents-at-temperature"]
    assert "−1 °C" in finding.message
    assert "contents-at-temperature" not in plain.kinds()


def test_diesel_is_heavier_in_winter_by_hand() -> None:
    """From 20 to −10 °C the table's density at −10 °C, in a bore smaller by (1 - 12e-6 x 30)³; nominal stays."""
    diesel = materials.density_at(materials.by_key("diesel"), -10.0).density
    assert diesel is not None
    plain, cold = (Rows([{**TUBE, "Contents": "diesel"}], job) for job in ({}, {"temperatures": {"coldest": -10.0}}))
    section = cold.weighed.sections[0]
    assert section.inner_area_mm2 is not None
    bore_m3 = section.inner_area_mm2 * 6000 * 1e-9
    assert cold.mass("add_contents")[2] == pytest.approx(bore_m3 * 1.04 * diesel.high * (1 - 12e-6 * 30) ** 3)
    assert cold.mass("add_contents")[2] > plain.mass("add_contents")[2]
    assert cold.mass("add_contents")[1] == plain.mass("add_contents")[1]
    assert cold.mass("add_contents")[0] == pytest.approx(plain.mass("add_contents")[0], rel=0.005)  # the table's is of 15 °C
    assert "−10 °C" in " ".join(basis.bounds_rule for basis in cold.weighed.added_bases)


def test_freezing_is_said() -> None:
    """Below 0 °C the liquid's density is not given: what is covered ends there, in words."""
    rows = Rows([{**TUBE, "Contents": "water"}], {"temperatures": {"coldest": -20.0}})
    [finding] = [f for f in rows.findings() if f.kind == "contents-at-temperature"]
    assert "freezes" in finding.message


def test_a_liquid_without_a_law_is_not_covered_and_says_so() -> None:
    """Where nobody knows how a liquid's density changes, its mass stays that of 20 °C, with a finding."""
    unknown = next(m for m in materials.all_materials() if m.kind == "liquid" and materials.density_at(m, 5.0).density is None
                   and m.density.nominal is not None and materials.lookup(m.name, hint="liquid").match in ("exact", "alias"))
    rows = Rows([{**TUBE, "Contents": unknown.name}], JOB)
    assert rows.mass("add_contents") == Rows([{**TUBE, "Contents": unknown.name}]).mass("add_contents")
    [finding] = [f for f in rows.findings() if f.kind == "contents-at-temperature"]
    assert "20 °C only" in finding.message
    assert "a weighed mass" in str(finding.right)


def test_stated_masses_and_temperatures_of_the_list_change_nothing() -> None:
    """Contents told by their mass, and jobs that only say how the list was measured or cut, are weighed as before."""
    assert "contents-at-temperature" not in Rows([{**BEAM, "Contents": "40 kg tools"}], JOB).kinds()
    cut = {"temperatures": {"cut": 5.0, "measured": 30.0}}
    assert "contents-at-temperature" not in Rows([{**TUBE, "Contents": "water"}], cut).kinds()
