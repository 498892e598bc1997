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
