"""Finish, welds, bolts, contents, insulation and water soaked up: each its own column, with bounds, or a finding."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from weighing_rows import BEAM, PLATE, TUBE, Rows

from takeoff.errors import JobError
from takeoff.weighing import amounts, contents, finishes, insulation

UB_SURFACE, UB_AREA = 0.9147522083345648, 3196.821608328656e-6


def near(found: tuple[float, ...], *wanted: float) -> None:
    assert found == pytest.approx(wanted, rel=1e-6)


# --- zinc ------------------------------------------------------------------------------------------------------------

#: EN ISO 1461:2009 table 3, minimum mean coating, as quoted in two texts: thickness mm -> g/m²
EN_1461 = [(1.0, 325), (1.5, 395), (3.0, 395), (3.1, 505), (6.0, 505), (6.1, 610), (40.0, 610)]
#: ASTM A123 tables 1 and 2, shapes and plate, as quoted in two texts
A123 = [(1.5, 320), (1.6, 460), (3.2, 530), (4.8, 600), (6.4, 705), (25.0, 705)]


@pytest.mark.parametrize(("thickness", "g_m2"), EN_1461)
def test_zinc_by_en_iso_1461(thickness: float, g_m2: int) -> None:
    """Light is the minimum mean coating on the whole surface of a plate, nominal 1.2 and heavy 1.7 times it."""
    rows = Rows([{**PLATE, "Section": "PL", "Thickness (mm)": thickness, "Finish": "galvanized"}])
    surface = 2 * (1.0 * 0.5 + thickness / 1000 * 1.5)
    near(rows.mass("add_finish"), surface * g_m2 / 1000, surface * g_m2 / 1000 * 1.2, surface * g_m2 / 1000 * 1.7)


@pytest.mark.parametrize(("thickness", "g_m2"), A123)
def test_zinc_by_astm_a123(thickness: float, g_m2: int) -> None:
    """A finish that names A123 takes its table."""
    rows = Rows([{**PLATE, "Section": "PL", "Thickness (mm)": thickness, "Finish": "hot dip galvanized to ASTM A123"}])
    surface = 2 * (1.0 * 0.5 + thickness / 1000 * 1.5)
    assert rows.mass("add_finish")[0] == pytest.approx(surface * g_m2 / 1000, rel=1e-6)


def test_zinc_lies_inside_hollow_sections_too() -> None:
    """A 100 x 100 x 5 tube of 6 m: outside, bore and both ends, at 505 g/m² for a 5 mm wall."""
    rows = Rows([{**TUBE, "Finish": "hot dip"}])
    section = rows.weighed.sections[0]
    assert section.surface_m2_per_m is not None
    assert section.inner_surface_m2_per_m is not None
    assert section.area_mm2 is not None
    surface = 6 * (section.surface_m2_per_m + section.inner_surface_m2_per_m) + 2 * section.area_mm2 * 1e-6
    near(rows.mass("add_finish"), *(surface * 0.505 * k for k in (1.0, 1.2, 1.7)))


def test_zinc_of_two_thicknesses_is_light_by_the_thin_and_heavy_by_the_thick() -> None:
    """A beam with a 5.7 mm web and 7.8 mm flanges: 505 g/m² for light, 610 for nominal and heavy."""
    surface = 6 * UB_SURFACE + 2 * UB_AREA
    near(Rows([{**BEAM, "Finish": "HDG"}]).mass("add_finish"), surface * 0.505, surface * 0.61 * 1.2, surface * 0.61 * 1.7)


def test_castings_have_their_own_coating() -> None:
    """Cast iron of 6 mm and over: 575 g/m²."""
    rows = Rows([{**PLATE, "Material": "EN-GJL-250", "Section": "PL 10", "Finish": "galvanised"}])
    assert rows.mass("add_finish")[0] == pytest.approx(2 * (0.5 + 0.015) * 0.575, rel=1e-6)


def test_a_stated_zinc_thickness_is_the_minimum_mean() -> None:
    """`zinc 85 um` on steel over 6 mm is what galvanizing gives there, but for the rounding of 612 to 610 g/m²."""
    surface = 2 * (0.5 + 0.015)
    near(Rows([{**PLATE, "Finish": "zinc 85 um"}]).mass("add_finish"), *(surface * 0.085 * 7.2 * k for k in (1.0, 1.2, 1.7)))


def test_zinc_on_a_bought_out_piece_widens_heavy_only() -> None:
    """Its stated mass may hold the zinc already: light and nominal take it so, heavy allows 8 %, and it is said."""
    rows = Rows([{"Mark": "W", "Quantity": 1, "Section": "Winch frame", "Unit mass (kg)": 250, "Finish": "galvanized"}])
    assert rows.mass("add_finish") == (0.0, 0.0, 20.0)
    assert "not-added" in rows.kinds()


# --- paint, fire protection, words -----------------------------------------------------------------------------------

def test_paint_lies_outside_only() -> None:
    """240 µm of ordinary paint: 1.2 / 1.5 / 2.3 g/cm³, heavy on 1.5 times the film."""
    rows = Rows([{**TUBE, "Finish": "paint 240 um"}])
    section = rows.weighed.sections[0]
    assert section.surface_m2_per_m is not None
    assert section.area_mm2 is not None
    surface = 6 * section.surface_m2_per_m + 2 * section.area_mm2 * 1e-6
    near(rows.mass("add_finish"), surface * 0.24 * 1.2, surface * 0.24 * 1.5, surface * 0.24 * 1.5 * 2.3)


def test_fire_protection_by_the_square_metre() -> None:
    """3.5 kg/m² as stated, -5 % +10 %."""
    surface = 6 * UB_SURFACE + 2 * UB_AREA
    near(Rows([{**BEAM, "Finish": "fire protection 3.5 kg/m2"}]).mass("add_finish"), *(surface * 3.5 * k for k in (0.95, 1.0, 1.1)))


def test_two_coats_add_up() -> None:
    """Zinc and paint over it."""
    texts = ("galvanized + paint 120 um", "galvanized", "paint 120 um")
    both, zinc, paint = (Rows([{**BEAM, "Finish": text}]).mass("add_finish") for text in texts)
    near(both, *(a + b for a, b in zip(zinc, paint, strict=True)))


@pytest.mark.parametrize("text", ["none", "None", "-", "self colour", "mill finish", "ohne", "N/A"])
def test_none_adds_nothing_and_says_nothing(text: str) -> None:
    """`none` is an answer."""
    rows = Rows([{**BEAM, "Finish": text}])
    assert rows.mass("add_finish") == (0, 0, 0)
    assert not rows.kinds() & {"finish-not-understood", "finish-adds-nothing"}
    assert not rows.frame["finish_open"].any()


@pytest.mark.parametrize("text", [
    "blue", "Paint system", "paint", "zinc", "duplex 7", "240 um", "chrome plated", "paint 1,500 um", "=2+3", "paint 240 um 3 mm",
    "<script>", "fire protection", "galvanized, chrome",
])
def test_a_finish_not_understood_is_a_finding(text: str) -> None:
    """It names the cell, what was read and what would be right; and the row is marked as open."""
    rows = Rows([{**BEAM, "Finish": text}])
    [finding] = [f for f in rows.findings() if f.kind == "finish-not-understood"]
    assert finding.read == text
    assert finding.right
    assert finding.cell == "F2"
    assert rows.frame["finish_open"].all()


@pytest.mark.parametrize(("text", "kg_m2"), [
    ("hot-dip galvanised to EN ISO 1461", None), ("Feuerverzinkt", None), ("galvanisé à chaud", None), ("HDG", None),
    ("varmförzinkad", None),
    ("zinc 85 µm", 0.612), ("zinc 610 g/m2", 0.61), ("Paint 240µm", 0.36), ("240 um paint", 0.36), ("paint system 240 um DFT", 0.36),
    ("paint 9.45 mils", 0.360045), ("epoxy zinc 3", False), ("zinc rich primer 75 um", 0.255), ("Anstrich 0,24 mm", 0.36),
])  # fmt: skip
def test_finish_texts(text: str, kg_m2: float | bool | None) -> None:
    """Spellings, languages and units; None: zinc by the table, False: not understood."""
    found = finishes.read(text, (5.0, 10.0))
    if kg_m2 is False:
        assert found.unknown
        return
    [coat] = found.coats
    assert not found.unknown
    if kg_m2 is None:
        assert coat.zinc == finishes.EN
    else:
        assert coat.kg_m2 is not None
        share = finishes.zinc_share() if coat.bore_too else None
        assert coat.kg_m2.nominal == pytest.approx(kg_m2 * (share.nominal if share else 1.0), rel=1e-9)


@given(st.text(max_size=60))
def test_no_text_breaks_a_reader(text: str) -> None:
    """Any text is read or refused, never an error."""
    finishes.read(text, (5.0, 10.0))
    contents.read(text)
    insulation.read(text, (5.0, 10.0))
    amounts.read(text)


def test_worked_surfaces_are_said_to_add_nothing() -> None:
    """Bead blasting is understood, and no coat."""
    rows = Rows([{**PLATE, "Material": "1.4301", "Finish": "bead blasted"}])
    assert rows.mass("add_finish") == (0, 0, 0)
    assert "finish-adds-nothing" in rows.kinds()


def test_the_jobs_finish_is_for_steel_that_names_none() -> None:
    """Not for oak, stainless or a bought-out winch, nor for a row that says none."""
    rows = Rows([
        BEAM, {**BEAM, "Finish": "none"}, {**PLATE, "Material": "1.4301"},
        {"Mark": "O", "Quantity": 1, "Section": "Board 45x145", "Material": "oak", "Length (mm)": 1800},
        {"Mark": "W", "Quantity": 1, "Section": "Winch", "Unit mass (kg)": 250},
    ], {"masses": {"finish": "galvanized"}})  # fmt: skip
    assert [rows.mass("add_finish", i)[1] > 0 for i in range(5)] == [True, False, False, False, False]
    assert "finish" not in rows.weighed.not_counted


def test_a_jobs_finish_no_one_understands_is_refused() -> None:
    """The key is named."""
    with pytest.raises(JobError, match=r"masses\.finish is not understood"):
        Rows([BEAM], {"masses": {"finish": "sparkling"}})


# --- welds and bolts -------------------------------------------------------------------------------------------------

def test_welds_and_bolts_are_percent_of_the_bare_steel() -> None:
    """Each its own column; stone and bolt sets get none."""
    rows = Rows([
        BEAM, {"Mark": "S", "Quantity": 1, "Section": "Block 600x400x300", "Material": "granite"},
        {"Mark": "B", "Quantity": 4, "Section": "Bolt set M20x60", "Material": "steel", "Unit mass (kg)": 0.42},
    ], {"masses": {"weld_percent": 1.5, "bolt_percent": 2.0}})
    bare = rows.mass("bare")
    near(rows.mass("add_weld"), *(b * 0.015 for b in bare))
    near(rows.mass("add_bolt"), *(b * 0.02 for b in bare))
    assert rows.mass("add_weld", 1) == rows.mass("add_weld", 2) == (0, 0, 0)
    near(rows.mass("each"), *(b * 1.035 for b in bare))


# --- what is not counted ---------------------------------------------------------------------------------------------

@pytest.mark.parametrize(("job", "row", "items"), [
    ({}, {}, ("welds", "bolts", "finish", "contents", "temporary steel")),
    ({"weld_percent": 0.0}, {}, ("bolts", "finish", "contents", "temporary steel")),
    ({"weld_percent": 1.5, "bolt_percent": 0.0, "finish": "none"}, {}, ("contents", "temporary steel")),
    ({}, {"Contents": "water"}, ("welds", "bolts", "finish", "temporary steel")),
    ({}, {"Finish": "galvanized"}, ("welds", "bolts", "finish", "contents", "temporary steel")),
])
def test_what_is_not_counted(job: dict[str, object], row: dict[str, str], items: tuple[str, ...]) -> None:
    """Welds, bolts and finish until their key is set (0 and none count), contents until there is a column, temporary steel always."""
    assert Rows([{**TUBE, **row}], {"masses": job}).weighed.not_counted == items


# --- contents --------------------------------------------------------------------------------------------------------

def bore(rows: Rows) -> float:
    area = rows.weighed.sections[0].inner_area_mm2
    assert area is not None
    return area * 1e-6 * 6.0


def test_water_fills_the_bore() -> None:
    """998.2 kg/m³ on the inside volume; the density's spread and 4 % on the bore for its bounds."""
    rows = Rows([{**TUBE, "Contents": "water"}])
    near(rows.mass("add_contents"), bore(rows) * 958.4 * 0.96, bore(rows) * 998.2, bore(rows) * 1000 * 1.04)


@pytest.mark.parametrize(("text", "kg"), [
    ("60 % water", 0.6 * 998.2), ("water 60%", 0.6 * 998.2), ("full of water", 998.2), ("diesel", 832.0), ("Wasser", 998.2),
    ("filled with milk", 1030.0),
    ("slurry at 1200 kg/m3", 1200.0), ("25 % dry sand", 0.25 * 1581),
])  # fmt: skip
def test_contents_texts(text: str, kg: float) -> None:
    """A liquid or bulk solid by name, the part that is filled, or its density; nominal kg for each m³ inside."""
    rows = Rows([{**TUBE, "Contents": text}])
    assert rows.mass("add_contents")[1] == pytest.approx(bore(rows) * kg, rel=1e-6)


def test_contents_by_their_own_volume_or_mass() -> None:
    """500 l of water in a beam with a trough; 40 kg of something."""
    assert Rows([{**BEAM, "Contents": "500 l water"}]).mass("add_contents")[1] == pytest.approx(0.5 * 998.2)
    near(Rows([{**BEAM, "Contents": "40 kg tools"}]).mass("add_contents"), 38, 40, 44)


def test_a_tank_holds_its_volume() -> None:
    """A bought-out piece with a volume column: that is what it holds."""
    rows = Rows([{"Mark": "TK", "Quantity": 1, "Section": "Water tank", "Unit mass (kg)": 350, "Volume (m3)": 2, "Contents": "water"}])
    assert rows.mass("add_contents")[1] == pytest.approx(2 * 998.2)
    assert rows.mass("each")[1] == pytest.approx(350 + 2 * 998.2)


def test_sand_covers_all_its_readings() -> None:
    """Dry, moist or saturated is not said: light by the lightest, heavy by the heaviest, and the row is assumed."""
    rows = Rows([{**TUBE, "Contents": "sand"}])
    light, _, heavy = rows.mass("add_contents")
    assert light == pytest.approx(bore(rows) * 1530 * 0.96, rel=0.01)
    assert heavy == pytest.approx(bore(rows) * 2160 * 1.04, rel=0.01)
    assert rows.frame["status"].tolist() == ["assumed"]


@pytest.mark.parametrize("text", ["gravy", "half full", "grain", "120 % water", "1,500 l water"])
def test_contents_not_understood_are_a_finding(text: str) -> None:
    """Nothing is added, and it is said; the row is marked as open."""
    rows = Rows([{**TUBE, "Contents": text}])
    [finding] = [f for f in rows.findings() if f.kind == "contents-not-understood"]
    assert (finding.read, bool(finding.right)) == (text, True)
    assert rows.frame["contents_open"].all()


def test_contents_without_an_inside_are_a_finding() -> None:
    """Water in a beam: nobody knows how much."""
    rows = Rows([{**BEAM, "Contents": "water"}])
    assert "not-added" in rows.kinds()
    assert rows.frame["contents_open"].all()


@pytest.mark.parametrize("text", ["empty", "none", "-"])
def test_empty_is_an_answer(text: str) -> None:
    """It adds nothing and says nothing."""
    rows = Rows([{**TUBE, "Contents": text}])
    assert rows.mass("add_contents") == (0, 0, 0)
    assert "contents-not-understood" not in rows.kinds()


def test_soaked_timber_has_the_water_in_its_own_column() -> None:
    """Bare stays dry; with the water the heavy mass is that of full pores, 1000 + 351 x basic gravity kg/m³ (Wood Handbook)."""
    rows = Rows([{"Mark": "K", "Quantity": 1, "Section": "Board 50x150", "Material": "C24", "Length (mm)": 4000, "Contents": "soaked"}])
    volume = 0.05 * 0.15 * 4
    bare, added = rows.mass("bare"), rows.mass("add_soaked")
    assert bare[1] == pytest.approx(volume * 420, rel=1e-6)
    assert volume * 700 < bare[1] + added[1] < volume * 1000
    assert bare[2] + added[2] > volume * 1120
    assert "moisture-unknown" not in rows.kinds()


def test_soaked_steel_is_a_finding() -> None:
    """No figure is known for it."""
    assert "not-added" in Rows([{**BEAM, "Contents": "soaked"}]).kinds()


# --- insulation ------------------------------------------------------------------------------------------------------

def test_insulation_round_a_pipe() -> None:
    """50 mm at 100 kg/m³ round 114.3 mm: an annulus, exactly."""
    pipe = {"Mark": "I", "Quantity": 1, "Section": "CHS 114.3x5", "Material": "S355", "Length (mm)": 6000}
    rows = Rows([{**pipe, "Insulation": "50 mm at 100 kg/m3"}])
    volume = math.pi * (0.1143 + 0.05) * 0.05 * 6
    near(rows.mass("add_insulation"), volume * 95, volume * 100, volume * 110)


def test_insulation_by_area_length_and_name() -> None:
    """kg/m², kg/m, or a material of the table."""
    assert Rows([{**BEAM, "Insulation": "6 kg/m2"}]).mass("add_insulation")[1] == pytest.approx(6 * 6 * UB_SURFACE, rel=1e-6)
    assert Rows([{**BEAM, "Insulation": "2.5 kg/m"}]).mass("add_insulation")[1] == pytest.approx(15.0)
    assert Rows([{**BEAM, "Insulation": "50 mm mineral wool"}]).mass("add_insulation")[1] > 0


@pytest.mark.parametrize("text", ["50 mm", "thick", "50 mm wonder wool"])
def test_insulation_not_understood_is_a_finding(text: str) -> None:
    """It names what would be right."""
    rows = Rows([{**BEAM, "Insulation": text}])
    assert "insulation-not-understood" in rows.kinds()
