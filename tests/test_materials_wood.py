"""Wood by moisture, green wood, reinforced concrete."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff.bounds import Spread
from takeoff.errors import TakeoffError
from takeoff.materials import all_materials, by_key, green_density, reinforced_density, wood_density
from takeoff.materials.wood import basic_gravity

WOODS = [m for m in all_materials() if m.is_wood]


@pytest.mark.parametrize(
    ("key", "moisture", "nominal", "within"),
    [
        ("timber-c24", 20, 438, 1),  # Wood Handbook relation, G_b 0.354
        ("douglas-fir", 12, 538, 0.5),
        ("oak-white", 12, 762, 0.5),
        ("teak", 12, 675, 0.5),
    ],
)
def test_density_at_a_moisture(key: str, moisture: float, nominal: float, within: float) -> None:
    """Check values of the Wood Handbook's relation."""
    assert wood_density(by_key(key), moisture).density.nominal == pytest.approx(nominal, abs=within)


def test_basic_gravity_and_back() -> None:
    """G_b 0.60 gives 1080 kg/m³ at 80 %: mass alone grows above fibre saturation."""
    gravity_12 = 0.60 / (1 - 0.159 * 0.60)
    assert basic_gravity(gravity_12 * 1120) == pytest.approx(0.60)
    assert 1000 * basic_gravity(gravity_12 * 1120) * 1.8 == pytest.approx(1080)


@settings(max_examples=150, deadline=None)
@given(st.sampled_from(WOODS), st.floats(0, 200), st.floats(0, 200))
def test_more_moisture_never_weighs_less(material, a: float, b: float) -> None:  # type: ignore[no-untyped-def]
    """Density rises with moisture, bounds stay in order, and never passes the waterlogged ceiling."""
    dry, wet = (wood_density(material, m).density for m in sorted((a, b)))
    assert dry.low <= dry.nominal <= dry.high
    assert dry.nominal <= wet.nominal + 1e-9
    assert dry.high <= wet.high + 1e-9
    if material.family != "engineered wood":
        assert wet.high < 1500


@pytest.mark.parametrize("moisture", [-1, -0.001, 200.1, 1e9])
def test_impossible_moisture_is_refused(moisture: float) -> None:
    """0 to 200 percent of the oven-dry mass."""
    with pytest.raises(TakeoffError, match="this moisture content cannot be"):
        wood_density(by_key("oak-european"), moisture)


def test_moisture_of_steel_is_refused() -> None:
    """Moisture is wood's."""
    with pytest.raises(TakeoffError, match="moisture applies to wood only"):
        wood_density(by_key("s355"), 12)


def test_a_dense_wood_fills_up() -> None:
    """Azobe can hold no 100 % of water: the answer is waterlogged, and says so."""
    full = wood_density(by_key("azobe"), 100)
    assert full.saturated
    assert full.density.nominal == pytest.approx(wood_density(by_key("azobe"), 200).density.nominal)
    assert not wood_density(by_key("timber-c24"), 100).saturated


def test_every_sawn_wood_has_a_green_density() -> None:
    """From the species table or computed; never under the dry bound, and boards have none."""
    for material in WOODS:
        green = green_density(material)
        if material.family == "engineered wood":
            assert green is None
            continue
        assert green is not None, material.key
        assert green.density.low <= green.density.nominal <= green.density.high
        assert green.density.high >= material.density.high
        assert green.source.title
    assert green_density(by_key("oak-european")).density == Spread(930, 1120, 1280)
    assert green_density(by_key("hardwood")).source.evidence == "computed"


@pytest.mark.parametrize(("steel", "plain", "nominal"), [(0, 2400, 2400), (78.5, 2400, 2454.5), (144, 2400, 2500), (144, 2350, 2450.9)])
def test_reinforced_concrete_by_steel(steel: float, plain: float, nominal: float) -> None:
    """The steel takes the place of concrete."""
    assert reinforced_density(steel, Spread(plain, plain, plain)).nominal == pytest.approx(nominal, abs=0.1)


@pytest.mark.parametrize("steel", [-1, 601])
def test_impossible_steel_is_refused(steel: float) -> None:
    """No concrete holds that much steel."""
    with pytest.raises(TakeoffError, match="no concrete is reinforced like that"):
        reinforced_density(steel)


def test_loose_and_solid_densities_are_kept_apart() -> None:
    """Bulk rows say that they are loose; the solid has a row of its own and is heavier."""
    pairs = {"cement-bulk": "cement-solid", "coal": "coal-solid", "salt-bulk": "salt-solid", "sand-dry": "quartz-solid"}
    for loose, solid in pairs.items():
        assert by_key(loose).kind == "bulk"
        assert by_key(solid).kind == "other"
        assert by_key(loose).density.high < by_key(solid).density.low
