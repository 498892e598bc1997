"""Laws of elongation: one a row, zero at 20 °C, without a jump, honest about where they end."""

from __future__ import annotations

from itertools import pairwise

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff.errors import TakeoffError
from takeoff.materials import all_materials, by_key, density_at, elongation, law_of
from takeoff.materials.curves import curves
from takeoff.materials.means import mean_points

GROWING = [m for m in all_materials() if m.alpha_per_K is not None]


def test_every_law_is_zero_at_20_degrees_and_meets_itself() -> None:
    """Pieces follow one another without a gap and meet without a jump; the reference is 20 °C."""
    for material in GROWING:
        pieces = law_of(material).pieces
        assert [p.to_C for p in pieces[:-1]] == [p.from_C for p in pieces[1:]], material.key
        assert all(p.from_C < p.to_C for p in pieces), material.key
        assert material.key == "ice" or elongation(material, 20).value == pytest.approx(0, abs=1e-15)
        for joint in [p.to_C for p in pieces[:-1]]:
            below, above = elongation(material, joint - 1e-6).value, elongation(material, joint + 1e-6).value
            if below is not None and above is not None:
                assert below == pytest.approx(above, abs=1e-9), material.key


@pytest.mark.parametrize("key", ["steel-structural", "1.4301", "6082", "concrete", "cu-etp", "rebar-b500", "alloy-600"])
def test_laws_rise_steadily(key: str) -> None:
    """No law falls with temperature, and none jumps within a curve (the plateau of steel is level)."""
    material = by_key(key)
    pieces = law_of(material).pieces
    low, high = int(pieces[0].from_C) + 1, int(min(pieces[-1].to_C, material.melting_C or 2000)) - 1
    values = [elongation(material, t).value for t in range(low, high)]
    steps = [b - a for a, b in pairwise(values)]
    assert min(steps) >= -5e-9  # the fit for stainless steel dips by 3e-9 near 30 K
    assert max(steps) < 60e-6


@pytest.mark.parametrize(
    ("key", "t", "value"),
    [
        ("steel-structural", -50, -70 * 12e-6), ("steel-structural", 60, 40 * 12e-6), ("steel-structural", 100, 80 * 12e-6),
        # EN 1993-1-2 gives 0.0067584 at 500 °C and 0.0009984 at 100 °C; the law gives 0.00096 there.
        ("steel-structural", 500, 0.0067584 - (0.0009984 - 0.00096)),
        ("1.4301", 100, 80 * 16e-6),
        ("1.4301", 400, 0.00673251 - (0.001317328 - 0.00128)),
        ("6082", 300, 0.0072 - (0.0019 - 80 * 23.4e-6)),
        ("oak-european", 60, 40 * 5e-6),
    ],
)  # fmt: skip
def test_laws_are_constant_about_room_temperature_and_shifted_curves_beyond(key: str, t: float, value: float) -> None:
    """The constant coefficient from -50 to +100 °C, then the published curve moved to meet it."""
    grown = elongation(by_key(key), t)
    assert grown.value == pytest.approx(value, abs=2e-9)
    assert grown.within_validity
    assert grown.reason == ""


def test_a_published_curve_alone_is_as_printed() -> None:
    """`--law ec3-carbon`: the curve of EN 1993-1-2 unshifted, with its own range."""
    steel = by_key("s355")
    assert elongation(steel, 500, law="ec3-carbon").value == pytest.approx(0.0067584, abs=1e-9)
    assert elongation(steel, 800, law="ec3-carbon").value == pytest.approx(0.011, abs=1e-12)
    assert not elongation(steel, -30, law="ec3-carbon").within_validity
    assert elongation(steel, 100, law="ec9-aluminium").value == pytest.approx(0.0019, abs=1e-9)
    assert elongation(steel, 60, law="constant").value == pytest.approx(40 * 12e-6)
    assert law_of(steel, "ec3-carbon").name == "ec3-carbon"


def test_an_unknown_law_says_which_there_are() -> None:
    """A wrong name is one message with the right ones."""
    with pytest.raises(TakeoffError, match="no law of this name") as caught:
        elongation(by_key("s355"), 60, law="no-such-law")
    assert "ec3-carbon" in str(caught.value)
    with pytest.raises(TakeoffError, match="no law of this name"):
        elongation(by_key("oak-european"), 60, law="means")


def test_beyond_its_ends_the_last_slope_is_held_and_said() -> None:
    """Outside validity the figure goes on along a straight line, flagged in words."""
    steel = by_key("steel-structural")
    one, two = elongation(steel, 1300), elongation(steel, 1400)
    assert not one.within_validity
    assert "above 1200 °C" in one.reason
    assert two.value - one.value == pytest.approx(100 * 2e-5, rel=1e-6)
    cold = elongation(by_key("granite"), -80)
    assert not cold.within_validity
    assert cold.value == pytest.approx(-100 * 7.9e-6)


def test_above_the_melting_point_there_is_no_answer() -> None:
    """Null and flagged, for length and density."""
    lead = by_key("lead")
    assert elongation(lead, 328).value is None
    assert not elongation(lead, 328).within_validity
    assert "melting point" in elongation(lead, 328).reason
    assert density_at(lead, 328).density is None
    assert elongation(lead, 327).value is not None


def test_below_absolute_zero_is_refused() -> None:
    """No temperature is below absolute zero."""
    with pytest.raises(ValueError, match="absolute zero"):
        elongation(by_key("s355"), -274)


def test_a_material_without_a_coefficient_says_so() -> None:
    """No invented growth: null at any temperature but the reference."""
    board = by_key("plasterboard-fire")
    assert elongation(board, 60).value is None
    assert not elongation(board, 60).within_validity
    assert elongation(board, 20).value == 0.0
    assert density_at(board, 20).density == board.density
    assert density_at(board, 60).density is None


@settings(max_examples=200, deadline=None)
@given(st.sampled_from([m for m in GROWING if m.melting_C is None or m.melting_C > 20]), st.floats(-200, 300))
def test_mass_is_conserved(material, t: float) -> None:  # type: ignore[no-untyped-def]
    """Density times volume stays: by the cube, or by the product of the three directions."""
    grown, density = elongation(material, t), density_at(material, t).density
    if grown.value is None:
        assert density is None
        return
    assert density is not None
    ways = grown.by_direction
    volume = 1 + grown.value
    if "radial" in ways:
        volume *= (1 + ways["radial"]) * (1 + ways["tangential"])
    elif "across" in ways:
        volume *= (1 + ways["across"]) ** 2
    elif "through" in ways:
        volume *= (1 + grown.value) * (1 + ways["through"])
    else:
        volume *= (1 + grown.value) ** 2
    assert density.high * volume == pytest.approx(material.density.high, rel=1e-12)


@settings(max_examples=100, deadline=None)
@given(st.sampled_from(GROWING), st.floats(-100, 200), st.floats(-100, 200), st.floats(-100, 200))
def test_movements_are_additive(material, a: float, b: float, c: float) -> None:  # type: ignore[no-untyped-def]
    """From a to b and on to c is from a to c: the law is the row's, never the call's."""
    ea, eb, ec = (elongation(material, t).value for t in (a, b, c))
    if None not in (ea, eb, ec):
        assert (eb - ea) + (ec - eb) == pytest.approx(ec - ea, abs=1e-12)


def test_wood_grows_differently_across_the_grain() -> None:
    """Along, radial and tangential, or along and across."""
    douglas = elongation(by_key("douglas-fir"), 70)
    assert set(douglas.by_direction) == {"along", "radial", "tangential"}
    assert douglas.by_direction["tangential"] > douglas.by_direction["radial"] > douglas.value > 0
    assert set(elongation(by_key("timber-c24"), 70).by_direction) == {"along", "across"}
    assert elongation(by_key("s355"), 70).by_direction == {}


def test_ice_is_weighed_at_its_own_temperature() -> None:
    """917 kg/m³ at 0 °C, a little more when colder, nothing above melting."""
    ice = by_key("ice")
    assert density_at(ice, 0).density.nominal == pytest.approx(917, abs=0.01)
    assert 917.5 < density_at(ice, -10).density.nominal < 919
    assert density_at(ice, 1).density is None


def test_curves_are_refused_outside_their_range() -> None:
    """A curve by itself knows where it was published."""
    with pytest.raises(ValueError, match="is published from 20 to 1200"):
        curves()["ec3-carbon"].elongation(0)


def test_the_printed_means_of_a_row_are_continuous() -> None:
    """Between printed temperatures the mean coefficient is linear, so length never jumps."""
    found = mean_points(by_key("1.4301"))
    assert found is not None
    assert found.elongation(300) == pytest.approx(280 * 17.0e-6)
    assert found.elongation(250) == pytest.approx(230 * 16.75e-6)


def test_a_row_with_printed_means_goes_by_them_above_100_degrees() -> None:
    """Ferritic 1.4512 (mean 12.0 to 400 °C), duplex 1.4162 (14.0 to 300 °C), heat-resisting 1.4845 (15.5 to 200, 18.0 to 800 °C)."""
    printed = [("1.4512", 400, 12.0), ("1.4162", 300, 14.0), ("1.4057", 400, 10.5), ("1.4845", 200, 15.5), ("1.4845", 800, 18.0)]
    for key, to_C, mean in printed:
        found = elongation(by_key(key), to_C)
        assert found.value == pytest.approx(mean * 1e-6 * (to_C - 20), rel=0.01), key
        assert found.within_validity
    assert elongation(by_key("1.4845"), -196).within_validity


def test_low_alloy_steels_go_on_above_100_degrees() -> None:
    """Quenched and case-hardening steels have the group means of older tables, 12.1 to 200 and 14.1 to 600 °C, within 4 %."""
    for key in ("16mncr5", "51crv4", "30crnimo8"):
        for to_C, mean in ((200, 12.1), (300, 12.9), (500, 13.9), (600, 14.1)):
            found = elongation(by_key(key), to_C)
            assert found.within_validity
            assert found.value == pytest.approx(mean * 1e-6 * (to_C - 20), rel=0.04), (key, to_C)


@pytest.mark.parametrize("key", ["3103", "5005", "5754", "6005a", "6060", "6063", "6082", "7020", "8011a", "5083"])
def test_wrought_alloys_of_the_structural_code_follow_its_curve(key: str) -> None:
    """EN 1999-1-2: 0.1e-7 T² + 22.5e-6 T - 4.5e-4, from 100 to 300 °C 4.5e-3 + 0.8e-3 more; the row's own coefficient to 100 °C."""
    here, there = elongation(by_key(key), 300), elongation(by_key(key), 100)
    assert here.within_validity
    assert here.value is not None
    assert here.value - there.value == pytest.approx(22.5e-6 * 200 + 1e-8 * (300**2 - 100**2), rel=1e-6)
