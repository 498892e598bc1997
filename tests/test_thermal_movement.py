"""Lengths at temperature, movement, gaps, the tape and fits: laws as properties, cases worked by hand, published examples."""

from __future__ import annotations

import csv
from dataclasses import replace

import pandas as pd
import pytest
from conftest import ROOT
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff import materials
from takeoff.errors import InputError, TakeoffError
from takeoff.job import job_from
from takeoff.lists.log import FindingLog
from takeoff.materials.stretch import stretch
from takeoff.thermal import fits, lengths
from takeoff.thermal.movement import Movement, movement, steps
from takeoff.thermal.spread import alpha_spread, modulus
from takeoff.weighing import filled
from takeoff.weighing.measured import Measured

PUBLISHED = ROOT / "tests" / "published"
STEEL, ALUMINIUM, OAK = (materials.by_key(key) for key in ("steel-structural", "aluminium-structural", "oak-european"))
STAINLESS, GLASS, CONCRETE = (materials.lookup(name).material for name in ("1.4301", "glass", "concrete"))
assert STAINLESS is not None
assert GLASS is not None
assert CONCRETE is not None
MATERIALS = [STEEL, ALUMINIUM, OAK, STAINLESS, GLASS, CONCRETE]

some_material = st.sampled_from(MATERIALS)
warmth = st.floats(-190, 480)
size_mm = st.floats(1, 200_000)


def rows(name: str) -> list[dict[str, str]]:
    with (PUBLISHED / name).open(encoding="utf-8", newline="") as handle:
        return list(csv.DictReader(handle))


def kinds(found: Movement | fits.Fit) -> list[str]:
    return [f.kind for f in found.findings]


# -- laws --------------------------------------------------------------------------------------------------------------


@given(some_material, size_mm, warmth, warmth)
def test_there_and_back_is_identity(material: materials.Material, length: float, a: float, b: float) -> None:
    """A length taken from one temperature to another and back is itself."""
    there = lengths.length_at(material, length, b, length_at_C=a).length_mm
    assert there is not None
    assert lengths.length_at(material, there, a, length_at_C=b).length_mm == pytest.approx(length, rel=1e-12)


@given(some_material, size_mm, warmth, warmth, warmth)
def test_movement_adds_up_over_temperatures(material: materials.Material, length: float, a: float, b: float, c: float) -> None:
    """From a to c is from a to b and on to c, whatever lies between: one law a row."""
    direct = movement(material, length, a, c).movement_mm
    by_way = [movement(material, length, *pair).movement_mm for pair in ((a, b), (b, c))]
    assert direct == pytest.approx(sum(m for m in by_way if m is not None), abs=1e-9 * length)


@given(some_material, size_mm, size_mm, warmth, warmth)
def test_movement_adds_up_over_lengths(material: materials.Material, one: float, other: float, a: float, b: float) -> None:
    """Two lengths end to end move as the one length they make."""
    parts = [movement(material, size, a, b).movement_mm for size in (one, other)]
    assert movement(material, one + other, a, b).movement_mm == pytest.approx(sum(m for m in parts if m is not None), abs=1e-9)


@given(some_material, some_material, size_mm, warmth, warmth)
def test_differential_movement_is_antisymmetric(
    one: materials.Material, other: materials.Material, length: float, a: float, b: float
) -> None:
    """What one material moves more than another, the other moves less."""
    ours, theirs = movement(one, length, a, b, against=other).against, movement(other, length, a, b, against=one).against
    assert ours is not None
    assert theirs is not None
    assert ours.difference_mm is not None
    assert theirs.difference_mm is not None
    assert ours.difference_mm == pytest.approx(-theirs.difference_mm, abs=1e-9)


@given(some_material, size_mm, warmth, warmth)
def test_bounds_hold_the_movement(material: materials.Material, length: float, a: float, b: float) -> None:
    """The low and high coefficient stand on both sides of the movement, in the order of numbers."""
    found = movement(material, length, a, b)
    assert found.movement_low_mm is not None
    assert found.movement_mm is not None
    assert found.movement_high_mm is not None
    assert found.movement_low_mm <= found.movement_mm <= found.movement_high_mm


@given(size_mm, warmth)
def test_a_steel_tape_reads_the_nominal_along_steel(length: float, t: float) -> None:
    """Tape and piece shrink alike: at every temperature the tape shows the length at 20 °C; along aluminium it does not."""
    found = lengths.length_at(STEEL, length, t)
    assert found.tape_reading_mm == pytest.approx(length, rel=1e-12)
    other = lengths.length_at(ALUMINIUM, length, t)
    assert other.tape_reading_mm is not None
    if abs(t - 20) > 1:
        assert abs(other.tape_reading_mm - length) > 1e-6 * length


@given(some_material, size_mm, warmth, warmth)
def test_tape_there_and_back(material: materials.Material, length: float, tape_C: float, member_C: float) -> None:
    """A piece laid out at a temperature, read with a tape at its own, comes back to its length at 20 °C."""
    true = lengths.length_at(material, length, member_C).length_mm
    reading = lengths.tape_reading(true, tape_C)
    assert reading is not None
    assert reading * back(material, tape_C, member_C) == pytest.approx(length, rel=1e-12)


@given(some_material, st.floats(1e-6, 100), warmth)
def test_mass_does_not_depend_on_temperature(material: materials.Material, volume: float, t: float) -> None:
    """Volume at a temperature times density there is the mass at 20 °C."""
    density, cold = materials.density_at(material, t).density, material.density.nominal
    times = filled.volume_factor(material, t)
    assert density is not None
    assert density.nominal is not None
    assert times is not None
    assert cold is not None
    assert volume * times * density.nominal == pytest.approx(volume * cold, rel=1e-12)


@settings(max_examples=60)
@given(some_material, size_mm, st.floats(-60, 90), st.floats(1, 100), st.floats(0, 20), st.floats(0, 1))
def test_a_gap_never_closes_nor_gapes(
    material: materials.Material, length: float, low: float, span: float, least: float, share: float
) -> None:
    """A gap set by the table keeps its least size at every temperature of the range, and reaches it at the warmest."""
    high = low + span
    set_at = low + share * span
    found = movement(material, length, low, high, set_at_C=set_at, gap_min_mm=least)
    at_set = lengths.length_at(material, length, set_at).length_mm
    assert found.gap_to_set_mm is not None
    assert at_set is not None
    for step in found.table:
        size = lengths.length_at(material, length, step.temperature_C).length_mm
        assert size is not None
        assert found.gap_to_set_mm - (size - at_set) >= least - 1e-6
    assert found.closing_mm is not None
    assert found.opening_mm is not None
    assert found.movement_mm is not None
    assert found.closing_mm + found.opening_mm == pytest.approx(found.movement_mm, abs=1e-6)


@settings(max_examples=40)
@given(st.sampled_from(MATERIALS[:4]), st.sampled_from(MATERIALS[:4]), st.floats(20, 500), st.floats(-0.001, 0.001), st.floats(0, 0.0005))
def test_the_temperature_found_gives_the_clearance(
    ring: materials.Material, shaft: materials.Material, size: float, over: float, share: float
) -> None:
    """Whatever temperature is found, the fit at it has the clearance that was wanted."""
    pin = size * (1 + over)
    found = fits.fit(ring, size, shaft, pin, clearance_mm=size * share)
    if found.heat_bore_to_C is not None:
        again = fits.fit(ring, size, shaft, pin, bore_C=found.heat_bore_to_C, pin_C=20.0)
        assert again.clearance_mm == pytest.approx(size * share, abs=1e-6)
    if found.cool_pin_to_C is not None:
        again = fits.fit(ring, size, shaft, pin, bore_C=20.0, pin_C=found.cool_pin_to_C)
        assert again.clearance_mm == pytest.approx(size * share, abs=1e-6)
    if found.both_at_C is not None:
        again = fits.fit(ring, size, shaft, pin, bore_C=found.both_at_C, pin_C=found.both_at_C)
        assert again.clearance_mm == pytest.approx(size * share, abs=1e-6)


# -- worked by hand ----------------------------------------------------------------------------------------------------


def test_a_bridge_by_hand() -> None:
    """60 m of steel, -20 to 45 °C, set at 5: 60000 x 12e-6 = 0.72 mm for each K."""
    found = movement(STEEL, 60_000, -20, 45, set_at_C=5, gap_min_mm=5, gap_max_mm=60)
    assert found.movement_mm == pytest.approx(0.72 * 65)  # 46.8
    assert found.mean_alpha_per_K == pytest.approx(12e-6)
    assert found.closing_mm == pytest.approx(0.72 * 40)  # 28.8: from 5 to 45
    assert found.opening_mm == pytest.approx(0.72 * 25)  # 18.0: from 5 to -20
    assert found.gap_to_set_mm == pytest.approx(5 + 28.8)  # 33.8
    assert [s.temperature_C for s in found.table] == list(range(-20, 46, 5))
    assert found.table[0].gap_mm == pytest.approx(5 + 46.8)  # at the coldest, under 60
    assert found.table[-1].gap_mm == pytest.approx(5)
    assert found.movement_low_mm == pytest.approx(46.8 * 0.925)  # 11.1e-6
    assert found.movement_high_mm == pytest.approx(46.8 * 1.042)  # 12.5e-6
    assert found.answered


def test_a_pane_in_a_frame_by_hand() -> None:
    """2 m of glass against aluminium, -20 to 60 °C: 2000 x 80 x (9 - 23)e-6 = -2.24 mm; the frame closes in the cold."""
    found = movement(GLASS, 2000, -20, 60, set_at_C=15, gap_min_mm=5, against=ALUMINIUM)
    assert found.against is not None
    assert found.against.movement_mm == pytest.approx(3.68)
    assert found.against.difference_mm == pytest.approx(-2.24)
    assert found.against.closing_mm == pytest.approx(2000 * 35 * 14e-6)  # 0.98, from 15 to -20
    assert found.against.opening_mm == pytest.approx(2000 * 45 * 14e-6)  # 1.26, from 15 to 60
    assert found.against.gap_to_set_mm == pytest.approx(5.98)
    assert found.table[0].against_mm == pytest.approx(5)


def test_a_length_given_hot_by_hand() -> None:
    """6000 mm of aluminium measured at 60 °C is 6000 / (1 + 23e-6 x 40) = 5994.485 at 20, and 5988.970 at -20."""
    found = movement(ALUMINIUM, 6000, -20, 60, length_at_C=60)
    cold, reference, hot = (x.length_mm for x in found.lengths)
    assert hot == pytest.approx(6000)
    assert reference == pytest.approx(5994.48507, abs=1e-4)
    assert cold == pytest.approx(5994.48507 * (1 - 23e-6 * 40), abs=1e-4)
    assert found.movement_mm == pytest.approx(5994.48507 * 23e-6 * 80, abs=1e-6)


def test_a_cut_mark_by_hand() -> None:
    """Cut at 30 °C: aluminium 4000 is 4000.92 true; a steel tape at 30 reads 4000.92 / 1.00012 = 4000.440."""
    found = lengths.length_at(ALUMINIUM, 4000, 30)
    assert found.length_mm == pytest.approx(4000 * (1 + 23e-6 * 10))  # 4000.92
    assert found.tape_reading_mm == pytest.approx(4000.92 / 1.00012)  # 4000.43995
    assert lengths.length_at(STEEL, 4000, 30).tape_reading_mm == pytest.approx(4000)


def test_a_taped_list_by_hand() -> None:
    """Aluminium read as 4000 with a steel tape, both at 35: 4000 x 1.00018 / 1.000345 = 3999.340 at 20 °C."""
    assert back(ALUMINIUM, 35, 35) == pytest.approx(1.00018 / 1.000345)
    assert back(STEEL, 35, 35) == pytest.approx(1)
    assert back(ALUMINIUM, 20, 35) == pytest.approx(1 / 1.000345)


def back(material: materials.Material, tape_C: float, member_C: float) -> float:
    """Length at 20 °C over the reading, as a list that was measured with the job's steel tape is brought back."""
    job = job_from({"reading": {"tape": {"material": "steel", "temperature_C": tape_C}}})
    return Measured(pd.DataFrame({"measured_at_C": [member_C]}), job, FindingLog([], [], [])).back(material, member_C).factors["length"]


def test_a_shrink_fit_by_hand() -> None:
    """Pin 100, bore 99.92, 0.004 wanted: 0.084 / (99.92 x 12e-6) = 70.06 K above 20 °C, within the constant coefficient."""
    found = fits.fit(STEEL, 99.92, STEEL, 100, clearance_mm=0.004)
    assert found.clearance_mm == pytest.approx(-0.08)
    assert found.temperature_for_clearance_C == pytest.approx(20 + 0.084 / (99.92 * 12e-6), abs=1e-6)
    assert found.cool_pin_to_C == pytest.approx(20 - 0.084 / (100 * 12e-6), abs=1e-6)  # -50.0, the end of the constant piece
    assert found.both_at_C is None  # the same material: the interference stays
    warm = fits.fit(STEEL, 99.92, STEEL, 100, bore_C=95, pin_C=-30)
    assert warm.bore_mm == pytest.approx(99.92 * (1 + 12e-6 * 75))  # 100.009928
    assert warm.pin_mm == pytest.approx(100 * (1 - 12e-6 * 50))  # 99.94
    assert warm.clearance_mm == pytest.approx(0.069928)


def test_the_part_that_is_brought_to_temperature() -> None:
    """The bore's temperature is looked for; the pin's only where the bore's is the one given."""
    heated = fits.fit(STEEL, 50, STEEL, 50.02, pin_C=-20, clearance_mm=0.01)
    assert (heated.part, heated.temperature_for_clearance_C) == ("bore", heated.heat_bore_to_C)
    cooled = fits.fit(STEEL, 50, STEEL, 50.02, bore_C=40, clearance_mm=0.01)
    assert (cooled.part, cooled.temperature_for_clearance_C) == ("pin", cooled.cool_pin_to_C)


def test_a_hot_casting_by_hand() -> None:
    """Sizes taken hot times a cold density overstate: at 60 °C aluminium is (1 + 23e-6 x 40)³ = 1.00276 times its volume."""
    assert filled.volume_factor(ALUMINIUM, 60) == pytest.approx(1.00092**3)


def test_wood_moves_more_across_than_along() -> None:
    """A board's length goes along the grain, its width and thickness across it."""
    warm = materials.elongation(OAK, 40)
    assert stretch(warm, "length") == pytest.approx(1 + 5e-6 * 20)
    assert stretch(warm, "width") == pytest.approx(1 + 50e-6 * 20)
    assert stretch(warm, "thickness") == stretch(warm, "width") == stretch(warm, "diameter") == stretch(warm, "height")
    found = movement(OAK, 4000, 20, 40)
    assert found.by_direction_mm == pytest.approx({"along": 0.4, "across": 4.0})
    fir = materials.elongation(materials.by_key("douglas-fir"), 30)
    ways = fir.by_direction
    assert stretch(fir, "width") == 1 + ways["tangential"]
    assert stretch(fir, "thickness") == 1 + ways["radial"]
    assert stretch(fir, "diameter") == pytest.approx(1 + (ways["radial"] + ways["tangential"]) / 2)


# -- published ---------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("row", rows("thermal_worked_examples.csv"), ids=lambda r: r["case"])
def test_published_examples(row: dict[str, str]) -> None:
    """Movements printed in texts, with the coefficient the text takes, to the last figure it prints."""
    material = replace(STEEL, alpha_per_K=float(row["alpha_1e-6_per_K"]) * 1e-6, law="constant", alpha_interval_C=None)
    found = movement(material, float(row["length_mm"]), float(row["from_C"]), float(row["to_C"]))
    assert found.movement_mm == pytest.approx(float(row["published_mm"]), abs=0.5001 * float(row["printed_to_mm"]))


@pytest.mark.parametrize("row", rows("thermal_expansion_per_100_ft.csv"), ids=lambda r: f"{r['curve']} {r['temperature_F']}")
def test_published_expansion_tables(row: dict[str, str]) -> None:
    """`--law NAME` moves 100 ft from 70 °F by what the table of that name prints, within its printed rounding."""
    to_C = (float(row["temperature_F"]) - 32) / 1.8
    found = movement(materials.by_key(row["material_key"]), 30_480, 21 + 1 / 9, to_C, law=row["curve"])
    assert found.movement_mm is not None
    assert found.law.name == row["curve"]
    # Half the last printed figure of the expansion, and of the coefficients that some of the tables print beside it.
    slack = 0.51 * float(row["printed_to"]) + 0.05e-6 * 1200 * abs(float(row["temperature_F"]) - 70)
    assert found.movement_mm / 25.4 == pytest.approx(float(row["inches_per_100_ft"]), abs=slack)


def test_published_tape_line() -> None:
    """Physics textbook (recalled): 35.794 m read at 35 °C on a steel tape true at 20 °C, 12 millionths per K, is 35.800 m."""
    assert lengths.tape_reading(35_800, 35) == pytest.approx(35_794, abs=0.6)


def test_published_tape_correction() -> None:
    """Surveying exercise (read): 318 m with a tape of 11.6 millionths per K corrects to 318.103 m at 47.92 °C."""
    tape = replace(STEEL, alpha_per_K=11.6e-6)
    longer = lengths.tape_factor(47.92, tape)
    assert longer is not None
    assert 318_000 * longer == pytest.approx(318_103, abs=0.5)


def test_published_rail_gap() -> None:
    """Materials textbook exercise (read): rails of 11.9 m laid at 4 °C with 5.4 mm between them touch at 41.5 °C (12.1e-6)."""
    rail = replace(STEEL, alpha_per_K=12.1e-6)
    found = movement(rail, 11_900, 4, 41.5, length_at_C=4, set_at_C=4)
    assert found.gap_to_set_mm == pytest.approx(5.4, abs=0.005)


def test_published_ring_on_a_rod() -> None:
    """Physics textbook (recalled): an iron ring of 6.420 cm slips over a rod of 6.445 cm with 0.008 cm to spare at 450 °C."""
    iron = replace(STEEL, law="constant", alpha_interval_C=(20.0, 600.0))
    found = fits.fit(iron, 64.20, iron, 64.45, clearance_mm=0.08)
    assert found.temperature_for_clearance_C == pytest.approx(450, abs=5)


# -- what is said, and refused -------------------------------------------------------------------------------------------


def test_no_gap_serves() -> None:
    """A limit that the movement alone exceeds is refused, with what is needed."""
    found = movement(STEEL, 60_000, -20, 45, gap_min_mm=5, gap_max_mm=50)
    assert "gap-impossible" in kinds(found)
    assert not found.answered
    assert movement(STEEL, 60_000, -20, 45, gap_min_mm=5, gap_max_mm=51.8).answered


def test_only_a_greatest_gap() -> None:
    """Where only the widest is limited, the table gives the widest gap: reached at the coldest."""
    found = movement(STEEL, 60_000, -20, 45, set_at_C=5, gap_max_mm=60)
    assert found.table[0].gap_mm == pytest.approx(60)
    assert found.gap_to_set_mm == pytest.approx(60 - 18)


def test_setting_outside_the_range_counts_in_it() -> None:
    """A gap set warmer than the warmest must be open then too."""
    found = movement(STEEL, 10_000, -20, 30, set_at_C=40, gap_min_mm=2)
    assert "set-outside-range" in kinds(found)
    assert found.closing_mm == 0
    assert found.opening_mm == pytest.approx(10_000 * 12e-6 * 60)
    assert found.gap_to_set_mm == pytest.approx(2)


def test_each_kind_says_what_is_not_in_it() -> None:
    """Concrete says shrinkage, wood moisture, masonry both; a tiny movement that none can mark it; steel what holding it means."""
    assert "shrinkage-not-included" in kinds(movement(CONCRETE, 5000, 0, 30))
    assert "moisture-outweighs" in kinds(movement(OAK, 5000, 0, 30))
    masonry = materials.lookup("brick-clay-solid").material
    assert masonry is not None
    assert "moisture" in next(f.message for f in movement(masonry, 5000, 0, 30).findings if f.kind == "shrinkage-not-included")
    assert "movement-small" in kinds(movement(STEEL, 400, 20, 40))  # 0.096 mm
    assert "movement-small" not in kinds(movement(STEEL, 500, 20, 40))  # 0.12 mm
    held = next(f for f in movement(STEEL, 1000, 20, 60).findings if f.kind == "movement-restrained")
    assert "101 N/mm²" in held.message  # 210000 x 12e-6 x 40 = 100.8


def test_above_the_melting_point() -> None:
    """There is no length: null, refused, and said."""
    found = movement(ALUMINIUM, 1000, 20, 900)
    assert found.movement_mm is None
    assert "above-melting" in kinds(found)
    assert [s.gap_mm for s in found.table] == [None] * len(found.table)
    assert fits.fit(ALUMINIUM, 50, STEEL, 50, bore_C=900).clearance_mm is None


def test_outside_the_law() -> None:
    """The last slope is held, and said."""
    found = movement(GLASS, 1000, 20, 400)
    assert "outside-validity" in kinds(found)
    assert found.movement_mm == pytest.approx(1000 * 9e-6 * 380)
    assert not found.lengths[-1].within_validity


def test_no_coefficient() -> None:
    """Nothing is computed, and the material is named."""
    material = next(m for m in materials.all_materials() if m.alpha_per_K is None)
    found = movement(material, 1000, 20, 40)
    assert found.movement_mm is None
    refused = [f for f in found.findings if f.level == "refused"]
    assert [f.kind for f in refused] == ["no-coefficient"]
    assert material.name in refused[0].message


def test_a_clearance_out_of_reach() -> None:
    """No temperature within the law gives it: refused, not guessed."""
    found = fits.fit(STEEL, 50, STEEL, 60, clearance_mm=1)
    assert found.temperature_for_clearance_C is None
    assert kinds(found)[-1] == "not-reached"


@pytest.mark.parametrize(
    ("more", "message"),
    [
        ({"gap_min_mm": 5, "gap_max_mm": 4}, "least gap is larger"), ({"gap_min_mm": -1}, "least gap is no size"),
        ({"length_at_C": -300}, "absolute zero"), ({"set_at_C": float("nan")}, "absolute zero"),
    ],
)
def test_bad_input_is_refused(more: dict[str, float], message: str) -> None:
    """A least gap over the greatest, a gap below nothing, a temperature that cannot be."""
    with pytest.raises(InputError, match=message):
        movement(STEEL, 1000, 20, 40, **more)  # type: ignore[arg-type]


def test_no_length_is_refused() -> None:
    """A length or diameter of nothing moves nowhere."""
    with pytest.raises(InputError, match="no length"):
        movement(STEEL, 0, 20, 40)
    with pytest.raises(InputError, match="no diameter"):
        fits.fit(STEEL, 0, STEEL, 10)


def test_an_unknown_law_is_refused() -> None:
    """A curve that nobody published is no law."""
    with pytest.raises(TakeoffError, match="no law of this name"):
        movement(STEEL, 1000, 20, 40, law="ec3-carbom")


def test_steps_of_the_table() -> None:
    """Both ends and the multiples of 5 between; a range too wide takes larger steps."""
    assert steps(-18, 13) == [-18, -15, -10, -5, 0, 5, 10, 13]
    assert steps(20, 20) == [20]
    assert steps(20, 25) == [20, 25]
    wide = steps(-273, 1e5)
    assert len(wide) < 500
    assert wide == sorted(set(wide))


def test_every_family_has_a_spread_of_coefficients() -> None:
    """Each material with a coefficient has its low and high, with a source; a modulus only where one figure serves."""
    for material in materials.all_materials():
        spread = alpha_spread(material)
        assert spread.low <= 1 <= spread.high
        assert spread.source.title
    assert modulus(STEEL) is not None
    assert modulus(OAK) is None
