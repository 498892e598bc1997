"""What holes take off a plate, and off which of the three masses."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from weighing_rows import BEAM, PLATE, Rows

from takeoff.weighing import holes

HOLE_22 = math.pi / 4 * 22**2


@pytest.mark.parametrize(("text", "round_mm2", "opening_mm2"), [
    ("4x22", 4 * HOLE_22, 0), ("4 Ø22", 4 * HOLE_22, 0), ("4 x Ø22", 4 * HOLE_22, 0), ("4-ø22", 4 * HOLE_22, 0),
    ("4 no. 22 dia", 4 * HOLE_22, 0),
    ("Ø22", HOLE_22, 0), ("4 x 22 mm", 4 * HOLE_22, 0), ("2x 300x200", 0, 120_000), ("2 x 300 x 200", 0, 120_000),
    ("1x300×200", 0, 60_000),
    ("2 no 300x200", 0, 120_000), ("4x22 + 1x 100x50", 4 * HOLE_22, 5_000), ("4x22; 2x18", 4 * HOLE_22 + 2 * math.pi / 4 * 18**2, 0),
    ("4x22,5", 4 * math.pi / 4 * 22.5**2, 0), ("none", 0, 0), ("-", 0, 0), ('4 x 7/8"', None, None),
])  # fmt: skip
def test_hole_texts(text: str, round_mm2: float | None, opening_mm2: float) -> None:
    """Counts and sizes as people write them."""
    found = holes.read(text)
    if round_mm2 is None:
        assert found is None
        return
    assert found is not None
    assert (found.round_mm2, found.opening_mm2) == pytest.approx((round_mm2, opening_mm2))


@pytest.mark.parametrize("text", ["see drawing", "4xM20", "22x", "a few", "4 x 22 x 30 x 5", "0xØ", "-4x22", "4x-22", "1,234 x 5"])
def test_holes_not_understood_are_a_finding(text: str) -> None:
    """Nothing is deducted, and the cell is named."""
    rows = Rows([{**PLATE, "Holes": text}])
    [finding] = [f for f in rows.findings() if f.kind == "holes-not-understood"]
    assert (finding.read, finding.cell) == (text, "G2")
    assert rows.mass("bare")[1] == pytest.approx(39.25)


def test_round_holes_come_off_light_and_nominal_only() -> None:
    """Four of 22 in a 10 mm plate of 1000 x 500; the heavy mass keeps them."""
    plain, drilled = Rows([PLATE]), Rows([{**PLATE, "Holes": "4x22"}])
    share = 4 * HOLE_22 / 500_000
    light, nominal, heavy = plain.mass("bare")
    assert drilled.mass("bare") == pytest.approx((light * (1 - share), nominal * (1 - share), heavy))
    assert float(drilled.frame["volume_m3"].iat[0]) == pytest.approx(0.005 * (1 - share))


def test_openings_come_off_all_three() -> None:
    """Two of 300 x 200."""
    plain, cut = Rows([PLATE]), Rows([{**PLATE, "Holes": "2x 300x200"}])
    assert cut.mass("bare") == pytest.approx([m * (1 - 120_000 / 500_000) for m in plain.mass("bare")])


def test_holes_in_rolled_sections_are_not_deducted() -> None:
    """With a note."""
    rows = Rows([{**BEAM, "Holes": "4x22"}])
    assert rows.mass("bare") == Rows([BEAM]).mass("bare")
    assert "holes-not-deducted" in rows.kinds()


def test_holes_larger_than_the_piece_are_not_deducted() -> None:
    """`300x200` reads as 300 holes of 200: more than the plate, so it is said and left."""
    rows = Rows([{**PLATE, "Holes": "300x200"}])
    assert rows.mass("bare") == Rows([PLATE]).mass("bare")
    assert "holes-not-deducted" in rows.kinds()


def test_bare_holes_of_a_list_in_inches_are_in_inches() -> None:
    """4 holes of 0.875 in a plate measured in inches."""
    headings = ["Mark", "Quantity", "Section", "Material", "Length (in)", "Width (in)", "Holes"]
    row = {"Mark": "P", "Quantity": 1, "Section": "PL 3/8\"", "Material": "A36", "Length (in)": 40, "Width (in)": 20, "Holes": "4x0.875"}
    drilled, plain = Rows([row], headings=headings), Rows([{**row, "Holes": None}], headings=headings)
    assert drilled.mass("bare")[1] / plain.mass("bare")[1] == pytest.approx(1 - 4 * math.pi / 4 * 0.875**2 / 800, rel=1e-9)


@given(st.text(max_size=40))
def test_no_text_breaks_the_reader(text: str) -> None:
    """Any text is read or refused; areas are never negative."""
    found = holes.read(text)
    assert found is None or (found.round_mm2 >= 0 and found.opening_mm2 >= 0)


# --- bevelled ends ---------------------------------------------------------------------------------------------------

SQUARE = {"Mark": "S", "Quantity": 1, "Section": "SHS 100x100x5 EN 10219", "Material": "S355", "Length (mm)": 1000}


@pytest.mark.parametrize(("angles", "taken_mm"), [
    ((45, None), 50.0), ((45, 45), 100.0), (("45°", "-45"), 100.0),
    ((30, None), 50 * math.tan(math.radians(30))), ((0, 0), 0.0), ((90, 90), 0.0), (("square", "none"), 0.0),
])
def test_bevels_come_off(angles: tuple[object, object], taken_mm: float) -> None:
    """A cut of 45° across 100 mm shortens the line of the centroid by 50 mm; up to 45° in all three masses."""
    cut, plain = Rows([{**SQUARE, "Cut angle 1": angles[0], "Cut angle 2": angles[1]}]), Rows([SQUARE])
    assert cut.mass("bare") == pytest.approx([m * (1 - taken_mm / 1000) for m in plain.mass("bare")], rel=1e-9)
    assert float(cut.frame["volume_m3"].iat[0]) == pytest.approx(float(plain.frame["volume_m3"].iat[0]) * (1 - taken_mm / 1000), rel=1e-9)


def test_a_steep_cut_may_be_counted_from_the_axis() -> None:
    """60° from square or from the axis: nominal by the first, heavy by the lesser cut."""
    cut, plain = Rows([{**SQUARE, "Cut angle 1": 60}]), Rows([SQUARE])
    share = [1 - 0.05 * math.tan(math.radians(a)) for a in (60, 60, 30)]
    assert cut.mass("bare") == pytest.approx([m * s for m, s in zip(plain.mass("bare"), share, strict=True)], rel=1e-9)


@pytest.mark.parametrize("angle", ["see drawing", "87", "1,500", "45/30"])
def test_cuts_not_understood_are_a_finding(angle: str) -> None:
    """Nothing is deducted."""
    cut = Rows([{**SQUARE, "Cut angle 1": angle, "Cut angle 2": 45}])
    assert cut.mass("bare") == Rows([SQUARE]).mass("bare")
    assert "cuts-not-deducted" in cut.kinds()


def test_cuts_longer_than_the_piece_are_a_finding() -> None:
    """A stub of 60 mm cannot lose 100."""
    cut = Rows([{**SQUARE, "Length (mm)": 60, "Cut angle 1": 45, "Cut angle 2": 45}])
    assert "cuts-not-deducted" in cut.kinds()
