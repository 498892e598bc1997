"""Rows that look like a plain section and are more than it: read as the section alone they would be silently too light.

Each text once was, or nearly was, weighed below its truth. A row may be refused or assumed; what it may not be is weighed light.
"""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

import takeoff
from takeoff import materials, sections

#: Several pieces, fillings, linings and parts fixed on, told beside a designation.
MORE_THAN_THE_SECTION = (
    "Zwillings-HEA 200", "Doppel-UPN 200", "doppio UPN 200", "doble IPE 300", "two HEA 200", "zwei UPN 200", "deux IPE 300", "dos HEA 200",
    "dwa UPN 200", "två HEA 200", "triple HEA 200", "L4x4x1/2 in coppia", "HEA 200 doubled", "UPN 200 boxed", "box UPN 200",
    "RHS 100x50x5 back to back", "][ RHS 100x50x5", "CHS 114.3x5 Rücken an Rücken", "HEA 200 bundle", "HEA 200 pack", "HEA 200 kit",
    "HEA 200 stiffened", "HEA 200 compound", "HEA 200 cover plated", "HEA 200 assembly",
    "HEA 200 concrete encased", "HEA 200 mit Beton gefüllt", "HEA 200 rempli de béton", "CHS 323.9x10 concrete filled",
    "CHS 323.9x10 / concrete", "RHS 200x200x8 infill concrete", "pipe 323.9x10 full of water", "pipe 323.9x10 cement lined",
    "pipe 323.9x10 rubber lined", "jacketed pipe 114.3x6.3", "finned tube 25x2",
    "HEA 200 with rail", "HEA 200 + stiffeners", "HEA 200 with end plates", "HEA 200 and bolts", "HEA 200 w/ plate", "HEA 200 c/w brackets",
    "UPN 200 mit Kopfplatte", "UPN 200 avec platine",
    "HEA/HEB 200", "HEA 200?", "glass 6+6x1000",
    "RD 20 two layers", "T16 pair", "threaded rod M20 twin", "pipe DN100 SCH 40/pipe DN100 SCH 40", "DN 100 x 6.3 (2)", '2/4" SCH 40',
    "2 Ø20", "4 no Ø16", "Ø20 x2", "Tube 50x5 x2", "tee CHS 114.3x5", "pipe 114.3x6.3 coupling", "pipe 114.3x6.3 insulation",
)  # fmt: skip

#: Sizes that are not what the first reading makes of them.
OTHER_SIZES = (
    'CHS 4" x 6.3', 'pipe 4" x 6.3', "Rohr 4in 6.3 wt", 'pipe 2"x0.154"', "pipe inside dia 101.7 x 6.3", "pipe bore 101.7 x 6.3",
    "Rohr Innen 101.7 x 6.3", "plate b200 t10", "b200 t10", "tube 2x2x0.25", "PL 0.375x24x48", "PL .375x24x48", "PL 1.5x12x24",
    "VSG 2x6x1000", 'PL 600x1200x3/8"', "pipe 4 x 0.237", "tube 2 OD x .120", "tube 12x12x.5", "disc 20x0.375", "Rohr 11,43x0,63",
    "PL 0.5x48x96", "PL 2x36x60", "PL 4x12x12", "plate 4x8x3/8", "PL 10x200x1,5", "PL 10x200x6", "PL 10x200 6.0", "PL 200x10x1.5",
    "Ronde Ø500 t10", "HEA 200 L=6", "counterweight 2x1x1", "decking 60x0.9", "roof sheet 0.7x1000",
)  # fmt: skip

#: Remarks that change no mass.
REMARKS = (
    "HEA 200 with holes", "HEA 200 mit Bohrungen", "column HEA 200 primed", "HEA 200 zinc plated", "HEA 200 S355J2+N",
    "HEA 200 drilled and painted", "UPN 200 avec trous",
)  # fmt: skip


@pytest.mark.parametrize("text", MORE_THAN_THE_SECTION)
@pytest.mark.parametrize("kind", [None, "metal", "glass"])
def test_more_than_the_section_is_never_read_as_the_section(text: str, kind: str | None) -> None:
    """Several pieces, a filling or parts fixed on refuse the text, with the word that tells."""
    match = sections.read(text, material_kind=kind)
    assert match.section is None
    assert match.reason


@pytest.mark.parametrize("text", OTHER_SIZES)
def test_sizes_that_may_be_others_are_refused(text: str) -> None:
    """Inches without their mark, inner diameters, nominal sizes and lettered sizes are no outside mm."""
    match = sections.read(text, material_kind="glass" if text.startswith("VSG") else "metal")
    assert match.section is None
    assert match.kind in ("implausible-size", "ambiguous-section", "impossible-geometry", "unknown-section")


@pytest.mark.parametrize("text", REMARKS)
def test_remarks_that_weigh_nothing_stay_remarks(text: str) -> None:
    """Holes, paint, grades and where it goes leave the section read."""
    match = sections.read(text, material_kind="metal")
    assert match.section is not None
    assert match.match in ("exact", "alias")


#: Blocks, slabs and timber in cm or m, by their material's kind.
CENTIMETRES = (
    ("Block 60x40x15", "stone"), ("60x40x15", "stone"), ("step 120x35x15", "stone"), ("slab 60x60x5", "concrete"),
    ("Platte 50x50x5", "concrete"), ("block 2x1x1", "concrete"), ("1.20x0.60x0.20", "stone"), ("block 120x60x20", "stone"),
    ("stone 4x2x1 ft", "stone"),
    ("10/20", "wood"),
    ("beam 20x20", "wood"), ("solive 7x20", "wood"), ("madrier 8x23", "wood"), ("20x30", "wood"), ("45x195x6", "wood"),
)  # fmt: skip
MILLIMETRES = (
    ("Block 600x300x200", "stone"), ("brick 215x102.5x65", "masonry"), ("slab 600x600x50", "concrete"), ("25x38", "wood"),
    ("45x195", "wood"),
    ("2x6", "wood"), ("KVH 6/24", "wood"), ("latte 24x48", "wood"), ("listello 20x30", "wood"), ("listón 25x25", "wood"),
    ("łata 25x30", "wood"), ("lat 22x32", "wood"), ("sarrafo 20x30", "wood"), ("läkt 25x36", "wood"), ("tasseau 27x27", "wood"),
    ("block 20x20x20", "metal"), ("PL 10x200x300", "metal"),
    ("PL 200x300x6", "metal"), ("Tube 12x1", "metal"), ("pipe 15x0.7", "metal"), ("PL 3x100x100", "metal"),
)  # fmt: skip


@pytest.mark.parametrize(("text", "kind"), CENTIMETRES)
def test_sizes_in_centimetres_or_metres_ask_for_their_unit(text: str, kind: str) -> None:
    """A counterweight of 2x1x1 is no crumb of 2 mm: what nobody makes in mm is refused, and says what to write."""
    match = sections.read(text, material_kind=kind)
    assert match.section is None
    assert "unit" in match.reason


@pytest.mark.parametrize(("text", "kind"), MILLIMETRES)
def test_usual_sizes_in_millimetres_are_still_read(text: str, kind: str) -> None:
    """Sizes that people make stay sizes in mm."""
    assert sections.read(text, material_kind=kind).section is not None


def test_a_bare_nominal_size_of_pipe_is_covered() -> None:
    """`pipe 100x6.3` may be DN 100, of 114.3 outside: heavy covers it, and the row is assumed."""
    match = sections.read("pipe 100x6.3", material_kind="metal")
    assert match.match == "ambiguous"
    assert match.section is not None
    mass = match.section.kg_per_m()
    assert mass is not None
    assert mass.heavy >= 16.78


@pytest.mark.parametrize(
    ("text", "least"),
    [("titanium zinc new", 7000), ("glin A", 2600), ("steel fibre reinforced concrete", 2350), ("nichrome", 8000), ("stal saturated", 7000),
     ("Alu black", 2600), ("PTFE bronze, painted", 3000), ("lead rubber sheet", 3000), ("toughened glass steel", 7000),
     ("aluminium steel", 7000), ("olive wood steel", 7000), ("plasterboard steel", 7000)],
)  # fmt: skip
def test_a_text_that_names_something_heavier_is_never_the_lighter(text: str, least: float) -> None:
    """Refused, or no lighter than what its words say."""
    found = materials.lookup(text).material
    assert found is None or found.density.high >= least


def test_a_metre_belongs_to_the_length_only() -> None:
    """`10x200x1m` is a plate 10 mm thick and 1 m long, not one of 10 m by 200 m."""
    match = sections.read("PL 10x200x1m", material_kind="metal")
    assert match.section is not None
    assert match.section.dimensions_mm == sections.read("PL 10x200x1000", material_kind="metal").section.dimensions_mm  # type: ignore[union-attr]


def test_a_small_a_is_no_variant_letter() -> None:
    """`dos à dos` and `a 45 gradi` do not make the light IPE A of an IPE."""
    assert sections.read("IPE 300 a").section != sections.read("IPE 300").section
    for text in ("IPE 300 a inglete", "IPE 300 à souder"):
        match = sections.read(text)
        assert match.section is None or match.section == sections.read("IPE 300").section


@pytest.mark.parametrize(
    "text",
    [
        "chrome plated", "zinc plated", "gold anodised", "silver grey", "oak effect", "PVC coated", "rubber coated", "copper finish",
        "oak faced",
    ],
)  # fmt: skip
def test_a_finish_alone_is_no_material(text: str) -> None:
    """What is under the finish is not told."""
    assert materials.lookup(text).material is None


@pytest.mark.parametrize("text", ["aluminium anodised", "steel galvanised", "steel coated", "zinc plated steel", "stainless finish 2B"])
def test_a_finish_beside_its_material_leaves_it(text: str) -> None:
    """A metal with its finish is that metal, or is refused; it never becomes the finish."""
    found = materials.lookup(text).material
    assert found is None or found.family in ("aluminium", "carbon steel", "stainless")


@pytest.mark.parametrize("text", ["betongefüllt S355", "S355 grouted", "S355 clad", "lead lined plywood"])
def test_a_material_with_more_in_or_on_it_is_refused(text: str) -> None:
    """A filling or lining weighs as well."""
    assert materials.lookup(text).material is None


def test_tin_plate_is_steel() -> None:
    """Tin plate is thin steel under a film of tin: as tin it would be light."""
    found = materials.lookup("tin plate").material
    assert found is not None
    assert found.family == "carbon steel"


#: Section text, material text: the two contradict each other.
CONTRADICTIONS = (
    ("PL 10x200 lead", "S355"), ("PL10x200 S355", "aluminium"), ("HEA 200 S355", "aluminium"), ("steel HEA 200", "oak"), ("HEA 200", "oak"),
    ("UPN 200", "concrete"), ("steel plate 10x200", "plywood"),
)  # fmt: skip
AGREEMENTS = (
    ("PL10x200 S355", "S275"), ("HEA 200 S355", "steel"), ("copper pipe 54x2", "brass"), ("aluminium RHS 100x50x5", "6082"),
    ("UPN 200", "GRP"),
    ("PL 10x200 aluminium", "S355"), ("L 50x50x5", "oak"), ("T16 rebar", "B500B"),
)  # fmt: skip


def test_a_section_text_that_names_a_heavier_metal_than_the_material_is_refused(tmp_path: Path) -> None:
    """Which of the two is right is not known, so the row is not weighed; agreeing or lighter words change nothing."""
    rows = [*CONTRADICTIONS, *AGREEMENTS]
    path = tmp_path / "list.csv"
    with path.open("w", encoding="utf-8", newline="") as handle:
        writer = csv.writer(handle)
        writer.writerow(["Mark", "Quantity", "Section", "Material", "Length (mm)"])
        writer.writerows([f"M{i}", 1, section, material, 1000] for i, (section, material) in enumerate(rows))
    frame = takeoff.weigh(path).frame()
    weighed = {(row.section_text, row.material_text) for row in frame.itertuples() if row.status != "not weighed"}
    assert weighed == set(AGREEMENTS)
