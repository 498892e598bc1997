"""Many pieces of one section at once: volumes, bounds, what is missing; and solids against plain sums."""

from __future__ import annotations

import itertools
import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from takeoff.sections import columns, pieces, read, tolerances
from takeoff.sections.section import Section

NAN = math.nan


def _section(text: str, **settings: object) -> Section:
    match = read(text, **settings)  # type: ignore[arg-type]
    assert match.section is not None, (text, match.reason)
    return match.section


def test_a_beam_needs_only_its_length() -> None:
    """Volume is area × length; a row without a length says so."""
    section = _section("UB 457x191x67")
    found = columns(section, 3, np.array([1000.0, NAN, -5.0]))
    assert found["volume_mm3"][0] == pytest.approx(section.area_mm2 * 1000)  # type: ignore[operator]
    assert np.isnan(found["volume_mm3"][1:]).all()
    assert found["missing"].tolist() == ["", "length", "length"]
    assert found["heavy_factor"].tolist() == [1.04] * 3


def test_a_plate_takes_its_thickness_limits_band_by_band() -> None:
    """EN 10029 class A for each row's own thickness; sheet under 3 mm by its own rule."""
    found = columns(_section("PL"), 4, np.full(4, 1000.0), np.full(4, 200.0), np.array([2.0, 3.0, 12.0, 40.0]))
    assert found["volume_mm3"] == pytest.approx(np.array([2, 3, 12, 40]) * 200_000)
    assert found["heavy_factor"] == pytest.approx(np.array([2.25 / 2, 3.7 / 3, 12.9 / 12, 41.7 / 40]))
    assert found["light_factor"] == pytest.approx(np.array([1.75 / 2, 2.7 / 3, 11.5 / 12, 39.1 / 40]))


def test_a_plate_named_whole_agrees_with_its_columns() -> None:
    """`PL 12x200x450` in one text and `Plate` with three columns give one volume and the same bounds."""
    whole, parts = _section("PL 12x200x450"), _section("Plate")
    one = columns(whole, 1)
    other = columns(parts, 1, np.array([450.0]), np.array([200.0]), np.array([12.0]))
    for key in ("volume_mm3", "surface_mm2", "light_factor", "heavy_factor"):
        assert one[key] == pytest.approx(other[key])
    assert one["volume_mm3"][0] == pytest.approx(whole.volume_m3 * 1e9)  # type: ignore[operator]


@pytest.mark.parametrize(
    ("whole", "parts", "sizes"),
    [
        ("FL 100x10", "Flat", {"width_mm": 100.0, "thickness_mm": 10.0, "length_mm": 2000.0}),
        ("RD 20", "Round bar", {"diameter_mm": 20.0, "length_mm": 2000.0}),
        ("SQ 25", "Square bar", {"width_mm": 25.0, "length_mm": 2000.0}),
        ("HEX 24", "Hexagon", {"width_mm": 24.0, "length_mm": 2000.0}),
        ("Board 45x195", "Board", {"thickness_mm": 45.0, "width_mm": 195.0, "length_mm": 2000.0}),
        ("Block 1200x600x150", "Block", {"length_mm": 1200.0, "width_mm": 600.0, "height_mm": 150.0}),
        ("Block 1200x600x150", "Block", {"length_mm": 1200.0, "width_mm": 600.0, "thickness_mm": 150.0}),
        ("Arch stone R3500 D450 A6 W600", "Arch stone R3500 D450 A6", {"width_mm": 600.0}),
        ("Wedge 600x300/240x400", "Wedge 600x300/240", {"width_mm": 400.0}),
    ],
)
def test_text_and_columns_agree(whole: str, parts: str, sizes: dict[str, float]) -> None:
    """A size may stand in the text or in a column: the volume, the surface and the bounds are the same."""
    one = columns(_section(whole), 1, np.array([sizes.get("length_mm", NAN)]))
    other = columns(_section(parts), 1, **{k: np.array([v]) for k, v in sizes.items()})
    for key in ("volume_mm3", "surface_mm2", "light_factor", "heavy_factor"):
        assert one[key] == pytest.approx(other[key]), key


@pytest.mark.parametrize(
    ("text", "missing"),
    [("Flat", "thickness"), ("Round bar", "diameter"), ("Block", "length"), ("PL", "thickness"), ("SQ", "width"), ("Board", "thickness")],
)
def test_a_missing_size_is_named(text: str, missing: str) -> None:
    """With no sizes at all the first one needed is named and nothing is computed."""
    found = columns(_section(text), 2)
    assert found["missing"].tolist() == [missing, missing]
    assert np.isnan(found["volume_mm3"]).all()


def test_masses_told_by_the_text() -> None:
    """kg/m² × area, kg/m × length and kg each come out as masses, not volumes."""
    grating = columns(_section("Grating 34 kg/m2"), 1, np.array([2000.0]), np.array([500.0]))
    tray = columns(_section("cable tray 4.2 kg/m"), 1, np.array([3000.0]))
    bolts = columns(_section("M20x60 bolt set 0.42 kg"), 2)
    assert grating["mass_kg"][0] == pytest.approx(34.0)
    assert tray["mass_kg"][0] == pytest.approx(12.6)
    assert bolts["mass_kg"].tolist() == [0.42, 0.42]
    assert (bolts["light_factor"][0], bolts["heavy_factor"][0]) == (0.95, 1.1)


@given(st.floats(3.0, 399.0), st.floats(50, 3000), st.floats(50, 12000))
def test_light_nominal_heavy_are_in_order(thickness: float, width: float, length: float) -> None:
    """Every plate's light ≤ nominal ≤ heavy, alone and in columns."""
    section = _section("PL", thickness_mm=thickness, width_mm=width, length_mm=length)
    found = columns(section, 1)
    assert found["light_factor"][0] <= 1 <= found["heavy_factor"][0]
    limits = section.thickness_bounds_mm
    assert limits is not None
    assert found["heavy_factor"][0] == pytest.approx(limits.heavy / limits.nominal)


@given(st.floats(500, 20_000), st.floats(100, 1500), st.floats(1, 90), st.floats(100, 1000))
def test_arch_stones_close(radius: float, depth: float, angle: float, width: float) -> None:
    """Stones that fill a half circle make a half ring, whatever their angle."""
    section = _section(f"Arch stone R{radius:.4f} D{depth:.4f} A{angle:.4f} W{width:.4f}")
    r, d, a, w = round(radius, 4), round(depth, 4), round(angle, 4), round(width, 4)
    assert section.volume_m3 == pytest.approx(math.pi * ((r + d) ** 2 - r**2) * w * 1e-9 * a / 360, rel=1e-9)


def test_arch_stone_by_chord_and_by_angle_agree() -> None:
    """The chord of the inner face is 2 R sin(angle / 2)."""
    chord = 2 * 3500 * math.sin(math.radians(3))
    by_angle, by_chord = _section("Arch stone R3500 D450 A6 W600"), _section(f"Arch stone R3500 D450 C{chord:.5f} W600")
    assert by_chord.volume_m3 == pytest.approx(by_angle.volume_m3, rel=1e-6)


def test_solids_against_fine_slices() -> None:
    """Volume and centroid of the arch stone and the wedge by summing thin slices."""
    stone = _section("Arch stone R3500 D450 A40 W600")
    half = math.radians(20)
    angles, step = np.linspace(-half, half, 4001)[:-1] + half / 4000, 2 * half / 4000
    radii = np.linspace(3500, 3950, 451)[:-1] + 0.5
    weight = np.outer(radii, np.full(len(angles), step))
    height = (np.outer(radii, np.cos(angles)) * weight).sum() / weight.sum()
    assert stone.volume_m3 == pytest.approx(weight.sum() * 600e-9, rel=1e-6)
    assert stone.centroid_mm is not None
    assert stone.centroid_mm == pytest.approx((3950 * math.sin(half), height - 3500 * math.cos(half), 300), rel=1e-4)
    wedge = _section("Wedge 600x300/240x400")
    x = np.linspace(0, 600, 60001)[:-1] + 0.005
    tall = 300 - x * 60 / 600
    assert wedge.volume_m3 == pytest.approx(tall.mean() * 600 * 400e-9, rel=1e-6)
    assert wedge.centroid_mm == pytest.approx(((x * tall).sum() / tall.sum(), (tall**2 / 2).sum() / tall.sum(), 200), rel=1e-6)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("Arch stone R3500 D450 W600", "needs R"),
        ("Arch stone R3500 D450 A200 W600", "cannot span"),
        ("Arch stone R100 D450 C900 W600", "does not fit"),
        ("Wedge 600x300x240x400", "thick end / thin end"),
        ("Block 100x0x50", "cannot be 0"),
        ("Arch stone 3500x450", "is told by R"),
    ],
)
def test_impossible_solids_are_refused(text: str, message: str) -> None:
    """Sizes that make no solid are refused with the reason."""
    match = read(text)
    assert match.section is None
    assert message in match.reason


def test_every_rule_is_known_and_in_order() -> None:
    """Tolerance bands of one rule do not overlap, and every limit is a loss and a gain."""
    for name, bands in tolerances.rules().items():
        for before, after in itertools.pairwise(bands):
            assert before.upto == after.over, name
        assert all(b.minus >= 0 and b.plus >= 0 for b in bands), name


def test_plate_limits_close() -> None:
    """EN 10029: the whole band of class A equals the standard's band for its thickness (a check on the figures)."""
    bands = [round(b.minus + b.plus, 6) for b in tolerances.rules()["plate"] if b.unit == "mm" and b.over >= 3]
    assert bands == [1.0, 1.2, 1.4, 1.6, 2.0, 2.6, 3.2, 3.6, 4.8]


def test_an_end_cut_takes_off_what_a_clipped_prism_lacks() -> None:
    """Volume with two bevelled ends, from the loss on the axis, against the section's own outline clipped strip by strip."""
    section = _section("L 150x75x10")
    area, height = section.area_mm2, section.dimensions_mm["h"]
    assert area is not None
    half, near = pieces.cut_depths_mm(section)
    strips = np.linspace(0, height, 30_001)
    middle = (strips[1:] + strips[:-1]) / 2
    d = {k: section.dimensions_mm[k] for k in ("h", "b", "tf")}
    width = np.where(middle < d["tf"], d["b"], d["tf"])  # the sharp-cornered angle: fillets move its centroid by little
    volume = (width * middle).sum() / width.sum()  # lost on the axis over the tangent of the angle, the heel the short face
    assert near == pytest.approx(volume, rel=0.02)
    assert half == height / 2


@pytest.mark.parametrize(
    ("text", "expected"), [("UB 203x133x25", 203.2 / 2), ("FL 100x10", 50), ("RD 20", 10), ("SHS 100x5", 50), ("Board 45x195", 97.5)]
)
def test_a_45_degree_cut_takes_half_the_depth(text: str, expected: float) -> None:
    """A symmetrical section loses half its depth on the axis at 45 degrees, whichever face is long."""
    assert pieces.cut_depths_mm(_section(text)) == pytest.approx((expected, expected))


def test_solids_have_no_end_cut() -> None:
    """A block has no depth to cut across: nothing is known, so nothing is deducted."""
    assert all(math.isnan(depth) for depth in pieces.cut_depths_mm(_section("Block 600x300x80")))
