"""What people type in many countries, against the masses that handbooks print for it."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from takeoff.provenance import EVIDENCE
from takeoff.sections import columns, formed, goods, read, rows

HERE = Path(__file__).parent / "published"

with (HERE / "section_masses.csv").open(encoding="utf-8", newline="") as handle:
    MASSES = list(csv.DictReader(handle))


def test_typed_designations_weigh_what_handbooks_print() -> None:
    """Each text is read plainly within its margin, or as one of several readings whose bounds hold the printed figure."""
    wrong = []
    for row in MASSES:
        match, figure, margin = read(row["text"], material_kind="metal"), float(row["figure"]), float(row["within_percent"]) / 100
        section = match.section
        if section is None:
            wrong.append((row["text"], match.reason))
            continue
        if row["unit"] == "kg/m":
            bounds = section.kg_per_m()
            found = None if bounds is None else bounds.nominal
            plain = match.match in ("exact", "alias")
            if bounds is None or not (bounds.light <= figure * (1 + margin) and bounds.heavy >= figure * (1 - margin)):
                wrong.append((row["text"], figure, bounds))
                continue
            if not plain:
                continue
        else:
            found = section.kg_each if row["unit"] == "kg each" else section.thickness_mm
        if found is None or abs(found - figure) > margin * figure:
            wrong.append((row["text"], figure, found))
    assert not wrong


def test_every_printed_mass_says_where_it_stands() -> None:
    """Source and evidence of each row; the closed list of evidence words."""
    for row in MASSES:
        assert row["source"]
        assert row["evidence"] in EVIDENCE
        assert row["unit"] in ("kg/m", "kg each", "mm")


@pytest.mark.parametrize(("text", "figure"), [
    ("ronde buis 60,3x3,2", 4.51), ("rura kwadratowa 100x100x5", 14.7), ("vierkante buis 100x100x5", 14.7), ("KKR 100x100x5", 14.4),
])
def test_a_word_of_shape_never_makes_another_body(text: str, figure: float) -> None:
    """A round or square tube in another language is a tube, not a disc or a round one."""
    section = read(text).section
    assert section is not None
    bounds = section.kg_per_m()
    assert bounds is not None
    assert bounds.nominal == pytest.approx(figure, rel=0.02)


@pytest.mark.parametrize("text", [
    "tôle larmée 5/7", "chapa lagrimada 5", "lamiera striata 5+2", "blacha ryflowana 5", "chapa xadrez 5", "durbar plate 5",
    "tranenplaat 5/7", "durkplåt 5/7", "Warzenblech 5",
])
def test_tread_plate_is_heavier_than_plain_plate(text: str) -> None:
    """Tread plate by its name in nine languages carries its pattern; plain plate of 5 mm would be too light."""
    section = read(text, material_kind="metal").section
    assert section is not None
    assert section.family == "Tread plate"
    assert section.thickness_mm is not None
    assert section.thickness_mm > 5.15


def test_swedish_plate_is_no_french_flat() -> None:
    """Plåt is plate; plat is a flat bar."""
    plate, flat = read("plåt 10").section, read("plat 100x10").section
    assert plate is not None
    assert flat is not None
    assert (plate.designation, flat.designation) == ("PL 10", "FL 100x10")


@pytest.mark.parametrize(("text", "one"), [("2 UPN 160", "UPN 160"), ("2xL50x50x5", "L 50x50x5"), ("2 x UPN160", "UPN 160")])
def test_a_loose_two_may_be_a_pair_or_a_quantity(text: str, one: str) -> None:
    """The pair is nominal and heavy, one piece is light, and the row is assumed."""
    match, single = read(text), read(one).section
    assert match.section is not None
    assert single is not None
    assert match.match == "ambiguous"
    pair, alone = match.section.kg_per_m(), single.kg_per_m()
    assert pair is not None
    assert alone is not None
    assert pair.light == pytest.approx(alone.light)
    assert pair.heavy == pytest.approx(2 * alone.heavy)
    assert pair.nominal == pytest.approx(2 * alone.nominal)


def test_half_a_beam_is_half_its_mass_and_more_than_half_its_surface() -> None:
    """A tee cut from an I: half the area, half the depth, and the cut edge of the web added to half the surface."""
    whole, half = read("HEA 300").section, read("1/2 HE 300 A").section
    assert whole is not None
    assert half is not None
    assert half.area_mm2 == pytest.approx(whole.area_mm2 / 2)  # type: ignore[operator]
    assert half.dimensions_mm["h"] == whole.dimensions_mm["h"] / 2
    assert half.surface_m2_per_m == pytest.approx(whole.surface_m2_per_m / 2 + whole.dimensions_mm["tw"] / 1000)  # type: ignore[operator]
    assert read("½ IPE 300").section == read("1/2 IPE 300").section


@pytest.mark.parametrize(("text", "sharp_mm2", "sides"), [
    ("C 200x75x20x2.0", 2 * (200 + 150 + 40 - 8), 4), ("U 100x50x3", 3 * (100 + 100 - 6), 2),
    ("Z 200x75x20x2.0", 2 * (200 + 150 + 40 - 8), 4),
    ("cold formed L 90x60x7", 7 * (90 + 60 - 7), 1), ("Z 200x80x72x20x2.5", 2.5 * (200 + 152 + 40 - 10), 4),
])
def test_strip_is_as_long_as_its_middle_line(text: str, sharp_mm2: float, sides: int) -> None:
    """Sharp corners are the greatest area a formed section may have; heavy covers it, light the roundest corners and thin strip."""
    section = read(text).section
    assert section is not None
    assert section.area_mm2 is not None
    t = section.dimensions_mm["tf"]
    corner = (2 - 3.141592653589793 / 2) * t * t
    assert section.area_mm2 == pytest.approx(sharp_mm2 - sides * 1.5 * corner)
    assert section.factor.heavy * section.area_mm2 > sharp_mm2
    assert section.factor.light * section.area_mm2 < sharp_mm2 - sides * 3.5 * corner
    assert section.note


def test_a_formed_channel_has_its_centroid_where_its_sides_put_it() -> None:
    """Of strip 2 mm thick: web and two flanges by hand, to a hundredth of a millimetre."""
    section = read("U 100x50x2").section
    assert section is not None
    assert section.centroid_mm is not None
    x = (100 * 2 * 1 + 2 * 48 * 2 * 26) / (200 + 192)
    assert section.centroid_mm == pytest.approx((x, 50), abs=0.01)


def test_strip_too_thick_to_form_is_refused() -> None:
    """Sides shorter than twice the sheet cannot be bent."""
    assert read("C 200x75x5x3").section is None
    assert read("Z 200x4x20x3").section is None


def test_a_welded_h_is_three_plates() -> None:
    """Two flanges and the web between them; heavy at the plates' greatest thickness."""
    section = read("BH 400x200x9x12").section
    assert section is not None
    assert section.area_mm2 == pytest.approx(2 * 200 * 12 + 376 * 9)
    assert section.factor.heavy > 1.05
    assert "welds are not in it" in section.note


def test_threaded_rod_is_never_heavier_than_its_plain_bar() -> None:
    """Nominal rests on the pitch diameter, heavy on a plain bar of the nominal diameter; a fine thread lies between."""
    for size in ("M8", "M20", "M64"):
        section = read(f"Threaded rod {size}").section
        plain = read(f"RD {size[1:]}").section
        assert section is not None
        assert plain is not None
        assert section.area_mm2 is not None
        assert plain.area_mm2 is not None
        assert 0.8 < section.area_mm2 / plain.area_mm2 < 0.95
        assert section.area_mm2 * section.factor.heavy == pytest.approx(plain.area_mm2)
    fine, coarse = formed.threaded_rod("metric", "20", 1.5), formed.threaded_rod("metric", "20")
    assert fine is not None
    assert coarse is not None
    assert fine.area_mm2 > coarse.area_mm2  # type: ignore[operator]


def test_threaded_rod_takes_its_length() -> None:
    """The number behind the thread, or behind its pitch, is the piece's length."""
    lengths = {"M20x1000 threaded rod": 1000, "DIN 976 M20x100": 100, "M20x1.5x500 threaded rod": 500, "threaded rod M20": None}
    for text, length in lengths.items():
        match = read(text)
        assert match.section is not None, match.reason
        assert match.length_mm == length


def test_a_socket_screw_is_not_a_hexagon_bolt() -> None:
    """A socket head is told by its own word or standard, and is alone: no nut in its heavy mass."""
    socket, bolt = read("DIN 912 M12x40").section, read("M12x40").section
    assert socket is not None
    assert bolt is not None
    assert socket.standard == "DIN 912"
    assert socket.kg_each != bolt.kg_each
    assert socket.factor.heavy < 1.1 < bolt.factor.heavy


def test_longer_socket_screws_add_their_shank() -> None:
    """Rows beyond the printed table follow from its last one, and say computed."""
    last, longer = goods.fastener("12", "80", high_strength=False, complete=False, socket=True), read("M12x120 socket screw").section
    assert last is not None
    assert longer is not None
    assert longer.source.evidence == "computed"
    assert longer.kg_each - last.kg_each == pytest.approx(40 * 3.14159 / 4 * 144 * 7.85e-6, rel=0.01)  # type: ignore[operator]


@pytest.mark.parametrize(("text", "designation"), [("DIN 934 M20", "Nut M20"), ("ISO 4032 M20", "Nut M20"), ("DIN 125 M20", "Washer M20")])
def test_a_standard_names_nut_and_washer(text: str, designation: str) -> None:
    """Nuts and washers by their standard's number alone."""
    section = read(text).section
    assert section is not None
    assert section.designation == designation


def test_a_stud_of_metal_is_no_piece_of_timber() -> None:
    """A stud 19 by 100 of steel is headed and told by the piece; of timber it is a board."""
    steel, timber = read("stud 19x100", material_kind="metal").section, read("stud 45x95", material_kind="wood").section
    assert steel is not None
    assert timber is not None
    assert (steel.form, timber.designation) == ("each", "Board 45x95")


def test_every_joist_and_asian_shape_closes_by_its_slope() -> None:
    """The slopes of BS 4, JIS and GB shapes were settled by their masses: area x 7850 meets each within 0.6 %."""
    for family in ("RSJ", "I", "CH", "UAP"):
        for row in rows(family):
            section = row.section
            assert section.published_kg_per_m is not None
            assert section.area_mm2 is not None
            assert section.published_kg_per_m == pytest.approx(section.area_mm2 * 7.85e-3, rel=6e-3), row.designation


def test_an_australian_hollow_section_covers_its_thicker_wall() -> None:
    """A size listed to AS/NZS 1163 only is bounded by that standard; a size both list stays European."""
    own, both = read("89x89x3.5 SHS").section, read("100x100x5 SHS").section
    assert own is not None
    assert both is not None
    assert (own.standard, both.standard) == ("AS/NZS 1163", "EN 10210-2")
    assert own.factor.heavy == pytest.approx(1.10)


@pytest.mark.parametrize("text", ["SM-05 gasket plate", "SM-01 side panel"])
def test_a_code_before_a_name_is_no_thickness(text: str) -> None:
    """The number of a mark in front of words is no size; behind a section's own word it is."""
    section, plate = read(text).section, read("PL-12 base plate").section
    assert section is not None
    assert plate is not None
    assert (section.thickness_mm, plate.thickness_mm) == (None, 12)


def test_a_letter_of_two_families_is_read_only_for_metal() -> None:
    """U 160 alone is refused; of metal it is a tapered or a parallel channel, the heavier nominal, and assumed."""
    alone, metal = read("U 160"), read("U 160", material_kind="metal")
    assert alone.section is None
    assert metal.match == "ambiguous"
    assert metal.section is not None
    assert metal.section.readings == ("UPN 160", "UPE 160")


@pytest.mark.parametrize("heading", ["Profil", "Tube", "Section"])
def test_a_heading_does_not_explain_an_unknown_letter(heading: str) -> None:
    """A letter in front of sizes that no family has is refused under any heading."""
    assert read("J 200x2", heading=heading).section is None
    assert read("Z 200x2,0", heading=heading).section is None


@pytest.mark.parametrize(("text", "thickness", "plan"), [
    ("chequer plate 4.5mm 1200x600", 4.5, (1200, 600)), ("Tôle larmée 5/7 1500x1000", 5, (1500, 1000)),
    ("tread plate 6 2000x1000", 6, (2000, 1000)),
])
def test_tread_plate_takes_its_plan_size(text: str, thickness: float, plan: tuple[float, float]) -> None:
    """Thickness first, width and length behind it."""
    section = read(text).section
    assert section is not None
    assert section.designation == f"Tread plate {thickness:g}"
    assert (section.dimensions_mm["width"], section.dimensions_mm["length"]) == plan


def test_a_us_sheet_of_four_by_eight_is_in_feet() -> None:
    """A thickness in inches beside 4x8 of a wood-based panel: 1219 by 2438 mm."""
    section = read('7/16" OSB 4x8').section
    assert section is not None
    assert section.dimensions_mm["width"] == pytest.approx(1219.2)
    assert section.dimensions_mm["length"] == pytest.approx(2438.4)


def test_the_class_of_a_board_is_no_thickness() -> None:
    """OSB/3 is a class; OSB 3 mm is a thickness."""
    board, thin = read("OSB/3 11mm 2440x1220").section, read("OSB 3 mm").section
    assert board is not None
    assert thin is not None
    assert (board.thickness_mm, thin.thickness_mm) == (11, 3)


@pytest.mark.parametrize(("text", "designation"), [
    ("KVH 6/24", "Board 60x240"), ("Sparren 8/20", "Board 80x200"), ("BSH 16/48", "GL 160x480"), ("Kantholz 10/10", "Board 100x100"),
    ("Balken 12/24", "Board 120x240"),
])
def test_german_timber_is_sized_in_centimetres(text: str, designation: str) -> None:
    """A rafter of 8 by 20 is no piece of 8 by 20 mm: read in cm, and assumed."""
    match = read(text, material_kind="wood")
    assert match.section is not None
    assert match.section.designation == designation
    assert match.match == "ambiguous"
    plain = read(text.replace("6/24", "60/240").replace("16/48", "160/480"), material_kind="wood")
    assert plain.match == ("exact" if text in ("KVH 6/24", "BSH 16/48") else "ambiguous")


@pytest.mark.parametrize("text", [
    "sheet pile AZ 18", "oval tube 60x30x2", "triangular tube 50x3", "lead sheet code 5", "Z-Profil 100x3", "hat section 50x50x2",
])
def test_what_only_looks_like_a_section_is_refused(text: str) -> None:
    """Piles, ovals, code sheets and folded profiles are none of the shapes their other words name."""
    assert read(text, material_kind="metal").section is None


def test_timber_by_width_and_height_needs_no_thickness() -> None:
    """A rafter's columns are width and height; with one of them alone its thickness is still missing."""
    import numpy as np

    board = read("Sparren", material_kind="wood").section
    assert board is not None
    width, height = np.array([80.0, np.nan, 200.0]), np.array([200.0, 200.0, np.nan])
    found = columns(board, 3, length_mm=np.array([5850.0] * 3), width_mm=width, height_mm=height, material_kind="wood")
    assert found["volume_mm3"][0] == pytest.approx(5850 * 80 * 200)
    assert np.isnan(found["volume_mm3"][1:]).all()


def test_back_to_back_is_two() -> None:
    """Two channels back to back are not weighed as one."""
    match = read("UPN 160 back to back")
    assert match.section is not None
    assert match.section.readings == ("2UPN 160", "UPN 160")


@pytest.mark.parametrize("text", [
    "Kopfplatte 20x200x300", "Steife 20x200x300", "platine 20x200x300", "raidisseur 20x200x300", "piastra 20x200x300",
    "voetplaat 20x200x300", "fotplåt 20x200x300", "enrijecedor 20x200x300", "rigidizador 20x200x300", "Stiffener 20x200x300",
])
def test_fittings_named_by_their_use_are_plates(text: str) -> None:
    """End plates, stiffeners and base plates in nine languages, told by three sizes."""
    match = read(text, material_kind="metal")
    assert match.section is not None
    assert match.section.designation == "PL 20x200x300"


def test_thick_plate_of_eight_millimetres_is_no_inch_size() -> None:
    """One small size is a thickness; only a whole cross-section too small for mm is refused."""
    for text in ("PL 8 x 1800 x 6200", "PL 6x1500", "FL 10x3", "PL 12"):
        assert read(text).section is not None, text
