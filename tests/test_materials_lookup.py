"""The look-up: what people type is found, and what is not settled is shown, never decided."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff.datafiles import read_table
from takeoff.materials import all_materials, lookup
from takeoff.materials.table import table

SPELLINGS = [row for _, row in read_table(Path(__file__).parent / "published" / "material_spellings.csv")]


@pytest.mark.parametrize("row", SPELLINGS, ids=lambda row: row["text"])
def test_what_people_type_is_found(row: dict[str, str]) -> None:
    """Trade spellings, in several languages, with conditions and standards around them, read plainly."""
    found = lookup(row["text"], hint=row["hint"] or None)
    assert found.match in ("exact", "alias"), found
    assert found.material is not None
    assert found.material.key == row["key"]
    assert found.score == 100


def test_every_name_of_the_table_finds_its_row_or_its_clash() -> None:
    """Keys, names, designations and aliases all lead home."""
    for material in all_materials():
        for name in (material.key, material.name, *material.designations, *material.aliases):
            found = lookup(name)
            if found.match == "ambiguous":
                assert material.key in [c.key for c in found.candidates], name
            else:
                assert found.material is not None, name
                assert found.material.key == material.key, name


@pytest.mark.parametrize(
    ("text", "keys"),
    [
        ("C35", ["steel-c35", "timber-c35", "concrete"]),
        ("c 35", ["steel-c35", "timber-c35", "concrete"]),
        ("C45", ["c45", "timber-c45"]),
        ("A2", ["1.4301", "tool-steel-a2"]),
        ("wood", ["softwood", "hardwood"]),
        ("redwood", ["pine-scots", "redwood"]),
        ("sable", ["sand-dry", "sand-moist", "sand-saturated"]),
        ("Kies", ["gravel-loose", "gravel-wet"]),
        ("jord", ["earth-dry-loose", "earth-moist", "earth-wet"]),
        ("PVC or aluminum tube", ["pvc-u", "aluminium-structural"]),
        ("spruce/cedar/ply", ["spruce-norway", "western-red-cedar", "plywood-generic"]),
        ("42CrMo4 (or C45)", ["42crmo4", "c45", "timber-c45"]),
    ],
)
def test_a_clash_is_shown_with_its_candidates(text: str, keys: list[str]) -> None:
    """Several owners: ambiguous, no material, all candidates."""
    found = lookup(text)
    assert found.match == "ambiguous"
    assert found.material is None
    assert [c.key for c in found.candidates] == keys


@pytest.mark.parametrize(
    ("text", "hint", "key"),
    [
        ("C35", "metal", "steel-c35"), ("C35", "wood", "timber-c35"), ("C35", "concrete", "concrete"), ("C45", "metal", "c45"),
        ("A2", "stainless", "1.4301"), ("redwood", "wood", None), ("C35", "glass", None), ("C24", "metal", "timber-c24"),
        ("C35 steel", None, "steel-c35"), ("timber C35", None, "timber-c35"), ("concrete C35", None, "concrete"),
    ],
)  # fmt: skip
def test_a_hint_settles_a_clash_and_overrules_nothing_else(text: str, hint: str | None, key: str | None) -> None:
    """The kind a section asks for, or the text's own words, leave one; a plain name stands whatever the hint."""
    found = lookup(text, hint=hint)
    assert (found.material.key if found.material else None) == key
    assert found.match == ("ambiguous" if key is None else found.match)


@pytest.mark.parametrize("text", ["S335", "S355J3", "S365", "1.4302", "C16/21", "6083-T6", "GL25h", "EN-GJL-255", "A37"])
def test_digits_must_match_exactly(text: str) -> None:
    """A number that no row has is no near miss of one that some row has."""
    found = lookup(text)
    assert found.match == "none"
    assert found.material is None


def test_c16_and_c16_20_differ() -> None:
    """A timber class and a concrete class."""
    timber, concrete = lookup("C16").material, lookup("C16/20").material
    assert timber is not None
    assert concrete is not None
    assert (timber.key, concrete.key) == ("timber-c16", "concrete")


@pytest.mark.parametrize("text", ["steel", "mild steel", "Stahl", "acier", "acero", "acciaio", "staal", "steels", "carbon steel"])
def test_steel_never_becomes_stainless_steel(text: str) -> None:
    """Plain steel in any language is carbon steel."""
    found = lookup(text).material
    assert found is not None
    assert found.is_carbon_steel


@pytest.mark.parametrize("text", ["staniless steel", "stainles steel", "stainless stel"])
def test_a_misspelt_stainless_is_similar_to_stainless(text: str) -> None:
    """A slip of the pen gives a suggestion to confirm, and not the plain steel inside it."""
    found = lookup(text)
    assert found.match == "similar"
    assert found.material is not None
    assert found.material.family == "stainless"


@pytest.mark.parametrize(
    "text",
    ["silicon steel", "gold anodised aluminium", "mild steel & unobtainium", "non-ferrous", "not steel", "wonderglass steel"],
)
def test_a_known_word_among_others_is_not_taken_for_the_whole(text: str) -> None:
    """What an unknown word may turn into something else is left open."""
    assert lookup(text).match == "none"


@pytest.mark.parametrize(
    "text", ["", " ", "???", "—", "\x00\x1b[31m", "x" * 5000, "9" * 3000, "\u202e\u200b", "'; DROP TABLE", "=1+1", "\ud800"]
)
def test_hostile_text_finds_nothing_and_breaks_nothing(text: str) -> None:
    """Empty, huge and control texts: none."""
    found = lookup(text)
    assert found.match == "none"
    assert found.material is None


@pytest.mark.parametrize("text", ["S3\u200b55", "st\u0435el", "\u0421355", "S355\u202e"])
def test_hidden_marks_and_lookalike_letters_are_never_plain(text: str) -> None:
    """What the eye does not read must not be decided unseen."""
    assert lookup(text).match not in ("exact", "alias")


@pytest.mark.parametrize(("steel", "nominal"), [(0, 2400.0), (100, 2469.4), (144, 2500.0), (200, 2538.9), (300, 2608.3)])
def test_reinforced_concrete_by_its_steel(steel: int, nominal: float) -> None:
    """`reinforced concrete 150 kg/m3` carries its own density: plain + steel (1 - plain / 7850)."""
    found = lookup(f"reinforced concrete, {steel} kg/m³").material
    assert found is not None
    assert found.key == "concrete-reinforced"
    assert found.density.nominal == pytest.approx(nominal, abs=0.1)
    assert found.density_source.evidence == "computed"


@settings(max_examples=150, deadline=None)
@given(st.text(max_size=60))
def test_any_text_has_an_answer(text: str) -> None:
    """Never an exception; a material exactly where the match says there is one."""
    found = lookup(text)
    assert (found.material is not None) == (found.match in ("exact", "alias", "similar"))
    assert 0 <= found.score <= 100
    assert all(c.key in table().rows for c in found.candidates)


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(sorted(table().rows)), st.sampled_from([str.upper, str.title, lambda t: f"  {t} ", lambda t: t.replace("-", " ")]))
def test_case_blanks_and_hyphens_do_not_matter(key: str, change) -> None:  # type: ignore[no-untyped-def]
    """A key is found however it is cased and spaced."""
    found = lookup(change(key))
    assert key in ([found.material.key] if found.material else [c.key for c in found.candidates])


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("1.0114 S235J0", "s235"), ("1.4301 X5CrNi18-10", "1.4301"), ("1.4305 (303)", "1.4305"), ("X5CrNi18-10 (1.4301)", "1.4301"),
        ("duplex 2205 1.4462", "1.4462"), ("Edelstahl 1.4301 AISI 304", "1.4301"), ("EN AW-5754 [AlMg3]", "5754"),
        ("EN AW-6082 AlSi1MgMn T6", "6082"), ("5.1301 (EN-JL1040)", "gjl-250"), ("S355J2+N 1.0577", "s355"), ("St 52-3 (S355J2)", "s355"),
        ("lamellé-collé GL24h", "glulam-gl24h"), ("BSH GL28h", "glulam-gl28h"), ("CW614N CuZn39Pb3", "cw614n"), ("C45 1.0503", "c45"),
        ("1.7225 42CrMo4+QT", "42crmo4"), ("acier inox 316L 1.4404", "1.4404"),
    ],
)  # fmt: skip
def test_several_names_of_one_material_name_it(text: str, key: str) -> None:
    """A number and a short name of the same grade, side by side or in brackets, are one material; the clash of one is settled."""
    found = lookup(text)
    assert found.match == "alias", found
    assert found.material is not None
    assert found.material.key == key


@pytest.mark.parametrize(
    "text", ["1.4301 1.4404", "S235JR S355J2", "1.4301 X5CrNiMo17-12-2", "oak beech", "1.0114 S235J9", "C35 C45", "copper aluminium"]
)
def test_names_of_different_materials_name_none(text: str) -> None:
    """Two grades in one text, or a grade beside something unknown, are not taken for the one that is known."""
    found = lookup(text)
    assert found.match in ("none", "ambiguous")
    assert found.material is None


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("6082T6", "6082"), ("6082T651", "6082"), ("6061T6", "6061"), ("AA6061", "6061"), ("AA 6061-T6", "6061"), ("AA7075-T651", "7075"),
        ("5083H111", "5083"), ("5083-O", "5083"), ("5083 O", "5083"), ("5754 H22", "5754"), ("AlMgSi0.5 F22", "6060"),
        ("AlMgSi1 F31", "6082"),
        ("AlMg3 W19", "5754"), ("AlMgSi0,5 F25", "6060"), ("1050A-H14", "1050a"), ("6060 T66", "6060"), ("EN AW 6060T66", "6060"),
    ],
)  # fmt: skip
def test_tempers_of_aluminium_change_nothing(text: str, key: str) -> None:
    """A temper, written on or beside the alloy, new or old, leaves the alloy."""
    found = lookup(text).material
    assert found is not None
    assert found.key == key


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("LC25/28 D1.6", "concrete-lightweight-16"), ("LC 30/33 D1,8", "concrete-lightweight-18"),
        ("lightweight concrete D1.4", "concrete-lightweight-14"),
        ("Leichtbeton LC20/22 D 1,6", "concrete-lightweight-16"), ("LC25/28", None),
    ],
)  # fmt: skip
def test_the_density_class_of_lightweight_concrete_decides(text: str, key: str | None) -> None:
    """EN 206 density classes are rows of the table; a strength class alone leaves them open."""
    found = lookup(text)
    assert (found.material.key if found.material else None) == key
    assert found.match == ("alias" if key else "ambiguous")


@pytest.mark.parametrize("text", ["bruc", "titel", "tyle", "stel", "fhir", "oks"])
def test_short_words_are_no_near_misses(text: str) -> None:
    """One letter in a short word is too much: `tile` is no utile."""
    assert lookup(text).match in ("none", "ambiguous")


@pytest.mark.parametrize(
    "text",
    [
        "tile", "benzene", "silicon carbide", "silicon nitride", "gear oil", "glycol", "arenito", "phenolic", "Fe 410",
    ],
)  # fmt: skip
def test_words_that_once_were_taken_for_something_lighter(text: str) -> None:
    """Words that a similar name used to catch, now names of their own or open."""
    found = lookup(text)
    assert found.match in ("exact", "alias", "ambiguous")
    lighter = ("utile", "petrol", "silicon", "glycerol", "silver", "spruce-norway", "1.4006")
    assert found.material is None or found.material.key not in lighter


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("S235JR, galvanized", "s235"), ("steel S275, painted", "s275"), ("Steel, galvanised", "steel-structural"),
        ("steel, mild", "steel-structural"),
        ("granite, flamed", "granite"), ("oak, European", "oak-european"), ("European oak, sawn", "oak-european"),
        ("steel (galv.)", "steel-structural"),
        ("SS 304L 2B finish", "1.4307"), ("1.4301 K240", "1.4301"), ("A53-B ERW", "astm-a106"), ("A53 GR B SMLS", "astm-a106"),
        ("ASTM A36/A36M", "astm-a36"), ("SA-240 304L", "1.4307"), ("ALUM 6061", "6061"), ("Cu-DHP R250", "cu-dhp"), ("DX51D Z275", "dx51d"),
        ("C30/37 XC4", "concrete"), ("Beton C25/30 XC2 XF1", "concrete"), ("HA-25", "concrete-reinforced"),
        ("hormigón HA-25", "concrete-reinforced"),
        ("Rck 30", "concrete"), ("HDPE SDR11", "pe-hd"), ("PE100 SDR 17,6", "pe-hd"), ("PVC-U PN10", "pvc-u"),
        ("VSG 66.2", "glass-laminated"),
        ("VSG 2x8", "glass-laminated"), ("laminated glass 44.2", "glass-laminated"), ("lead sheet code 5", "lead"), ("code 4 lead", "lead"),
        ("SPF #2", "spruce-pine-fir"), ("DF-L #2", "douglas-fir"), ("SYP #2 PT", "southern-pine"), ("Hem-Fir No. 2", "hemlock-western"),
        ("zinc titanium", "zinc-sheet"), ("titanium zinc", "zinc-sheet"), ("ali", "aluminium-structural"),
        ("alum.", "aluminium-structural"),
        ("AH36", "s355"), ("clear polycarbonate", "pc"), ("Portland limestone", "limestone-generic"), ("Carrara marble", "marble"),
        ("bright bar", "steel-structural"), ("St.St. 316", "1.4401"), ("water 20°C", "water-fresh"), ("A913 Gr 65", "astm-a992"),
    ],
)  # fmt: skip
def test_marks_of_grade_product_and_finish_are_set_aside(text: str, key: str) -> None:
    """What lists write behind a material: finishes after a comma, product standards, grades of wood, exposure classes, sizes."""
    found = lookup(text)
    assert found.match in ("exact", "alias"), found
    assert found.material is not None
    assert found.material.key == key


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("spruce C24", "spruce-norway"), ("Fichte C24", "spruce-norway"), ("C24 Fichte", "spruce-norway"),
        ("KVH Fichte C24", "spruce-norway"),
        ("Fichte S10", "spruce-norway"), ("larch C24", "larch-european"), ("oak D30", "oak-european"), ("vuren C18", "spruce-norway"),
        ("BSH Fichte GL32h", "glulam-gl32h"), ("Douglas fir C24", "douglas-fir"), ("pine C50", "pine-scots"),
    ],
)  # fmt: skip
def test_a_species_with_a_strength_class_is_the_heavier_of_the_two(text: str, key: str) -> None:
    """Both are true of the piece; a class's mean can be far below its species (larch C24: 420 against 600)."""
    found = lookup(text)
    assert found.match == "alias", found
    assert found.material is not None
    assert found.material.key == key
    assert "heavier" in found.reason


@pytest.mark.parametrize(
    "text",
    [
        "not oak, steel", "oak, steel", "spruce C24 steel", "C24 oak beech", "glass 66.2 steel", "titanium, zinc plated lead",
    ],
)  # fmt: skip
def test_a_comma_or_a_class_joins_no_strangers(text: str) -> None:
    """Two materials are two, with a comma or a class beside them."""
    found = lookup(text)
    assert found.material is None, found


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("Grauguss GG20", "gjl-200"), ("Sphäroguss GGG40", "gjs-400-15"), ("VA 1.4301", "1.4301"), ("Alublech AlMg3", "5754"),
        ("Edelstahlblech 1.4571", "1.4571"), ("Messingblech CuZn37", "c27200"), ("madera de pino", "pine-scots"),
        ("legno di abete", "spruce-norway"),
        ("Eiche massiv", "oak-european"), ("chêne massif", "oak-european"), ("Sperrholz Birke", "plywood-birch"),
        ("Kantholz C24", "timber-c24"),
        ("drewno świerk", "spruce-norway"), ("Rotguss Rg7", "c93200"), ("rostfri plåt 1.4404", "1.4404"), ("chapa de aço S275", "s275"),
    ],
)  # fmt: skip
def test_a_general_word_beside_a_grade_gives_way(text: str, key: str) -> None:
    """A general name and a grade of the same group: the grade."""
    found = lookup(text)
    assert found.match == "alias", found
    assert found.material is not None
    assert found.material.key == key


@pytest.mark.parametrize("text", ["Grauguss AlMg3", "Messing S235", "madera S235", "stainless oak", "glass C24"])
def test_a_general_word_of_another_group_does_not(text: str) -> None:
    """Brass S235 is nothing."""
    assert lookup(text).material is None


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("1.4301/304", "1.4301"), ("304/1.4301", "1.4301"), ("X5CrNi18-10/1.4301", "1.4301"), ("S235JR/1.0038", "s235"),
        ("1.4301 / AISI 304", "1.4301"), ("316L / 1.4404", "1.4404"), ("1.4301/1.4404", None), ("316/304", None), ("S355 / 6082", None),
    ],
)  # fmt: skip
def test_a_slash_between_names_of_one_material(text: str, key: str | None) -> None:
    """A number counts as a name beside a slash: one material, or several and then none of them."""
    found = lookup(text)
    assert (found.material.key if found.material else None) == key
    assert found.match == ("alias" if key else "ambiguous")


@pytest.mark.parametrize("text", ["316 kg", "304 mm", "12 off 304", "as per spec", "see drawing", "m2", "ladder", "ground", "si", "no. 2"])
def test_remarks_units_and_things_name_no_material(text: str) -> None:
    """What stands in a material column without being one is not taken for one, not even for a similar one."""
    assert lookup(text).material is None
