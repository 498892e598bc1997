"""Printed figures: never toward danger, in both systems of units."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from takeoff.bounds import Bounds
from takeoff.reports import rounding

KG = st.floats(min_value=0, max_value=1e9, allow_nan=False)
UNITS = st.sampled_from(["si", "us"])


def read_back(text: str) -> float:
    """The figure a reader takes from the print."""
    return float(text.replace(" ", "").replace("−", "-"))


@given(KG, UNITS)
def test_up_is_never_below_and_down_never_above(kg: float, units: rounding.Units) -> None:
    """What is printed up covers the figure, what is printed down stays under it, in kg and in lb."""
    value = rounding.in_mass_unit(kg, units)
    assert read_back(rounding.mass(kg, "up", units)) >= value * (1 - 1e-9)
    assert read_back(rounding.mass(kg, "down", units)) <= value * (1 + 1e-9)


@given(KG, UNITS)
def test_rounding_moves_a_figure_by_less_than_one_step(kg: float, units: rounding.Units) -> None:
    """No way of rounding moves a figure by a whole last digit, and nearest by no more than half of one."""
    value = rounding.in_mass_unit(kg, units)
    step = 10.0 ** -rounding.decimals_for(value)
    for way, most in (("up", step), ("down", step), ("nearest", step / 2)):
        shown = read_back(rounding.mass(kg, way, units))  # type: ignore[arg-type]
        assert abs(shown - value) <= most * (1 + 1e-6) + value * 1e-9


@given(st.tuples(KG, KG, KG).map(sorted), UNITS)
def test_printed_bounds_stay_in_order_and_share_their_decimals(masses: list[float], units: rounding.Units) -> None:
    """Light, nominal and heavy of one thing keep their order in print and line up at the decimal point."""
    texts = rounding.bounds(Bounds(*masses), units)
    light, nominal, heavy = map(read_back, texts)
    assert light <= nominal <= heavy
    assert len({len(t.partition(".")[2]) for t in texts}) == 1


@given(st.integers(min_value=1, max_value=10**9), st.integers(min_value=0, max_value=3))
def test_a_figure_that_needs_no_rounding_is_left_alone(parts: int, decimals: int) -> None:
    """The noise of a sum of floats never turns into another last digit."""
    exact = parts / 10**decimals
    noisy = math.nextafter(exact, math.inf)
    for way in ("up", "down", "nearest"):
        assert rounding.rounded(noisy, decimals, way) == rounding.rounded(exact, decimals, "nearest")  # type: ignore[arg-type]


def test_sum_with_float_noise_prints_as_the_pencil_has_it() -> None:
    """Three pieces of 0.1 kg are 0.3 kg, not 0.301."""
    assert rounding.mass(0.1 * 3, "up", decimals=3) == "0.300"


@pytest.mark.parametrize(("kg", "way", "text"), [
    (0.0342, "up", "0.035"), (0.0342, "down", "0.034"), (9.871, "up", "9.88"), (57.11, "up", "57.2"), (57.11, "down", "57.1"),
    (999.94, "nearest", "999.9"), (12345.2, "up", "12 346"), (12345.8, "down", "12 345"), (1234567.1, "up", "1 234 568"),
    (0.0, "up", "0.000"),
])
def test_digits_suit_the_size_of_the_mass(kg: float, way: rounding.Way, text: str) -> None:
    """Three decimals below a kilogram, two below ten, one below a thousand, none above; thousands by blanks."""
    assert rounding.mass(kg, way) == text


def test_absent_figures_are_a_dash() -> None:
    """What is not known prints as a dash, never as zero or nan."""
    nan = float("nan")
    assert [rounding.mass(None, "up"), rounding.mass_with_unit(nan, "up"), rounding.force_with_unit(nan, "up")] == ["–"] * 3
    assert [rounding.feet_inches(None), rounding.length_with_unit(nan), rounding.number(None, 1)] == ["–"] * 3


def test_infinite_figure_is_refused() -> None:
    """A figure without end is a fault, not a print."""
    with pytest.raises(ValueError, match="cannot be printed"):
        rounding.number(math.inf, 1)


def test_us_print_is_pounds_kips_and_feet_inches() -> None:
    """No print in US units says ton."""
    assert rounding.mass_with_unit(1000.0, "up", "us") == "2 205 lb"
    assert rounding.mass_with_unit(1000.0, "down", "us") == "2 204 lb"
    # 1000 kg x 9.80665 m/s² = 9.80665 kN = 2.2046 kip
    assert rounding.force_with_unit(9.80665, "up", "us") == "2.21 kip"
    assert rounding.force_with_unit(9.80665, "up") == "9.81 kN"
    assert rounding.length_with_unit(3822.7, "us") == "12'-6 1/2\""
    assert rounding.length_with_unit(6000.0) == "6 000 mm"
    assert rounding.length_with_unit(6000.5) == "6 000.5 mm"


@pytest.mark.parametrize(("mm", "text"), [
    (0.0, "0'-0\""), (9.525, "0'-0 3/8\""), (304.8, "1'-0\""), (304.7, "1'-0\""), (6000.0, "19'-8 1/4\""), (-25.4, "−0'-1\""),
])
def test_feet_and_inches_to_the_sixteenth(mm: float, text: str) -> None:
    """Inches carry over into feet, and a length just short of a foot is that foot."""
    assert rounding.feet_inches(mm) == text


@given(st.floats(min_value=0, max_value=1e7, allow_nan=False))
def test_feet_and_inches_are_within_half_a_sixteenth(mm: float) -> None:
    """Reading the print back gives the length within a thirty-second of an inch."""
    feet, _, rest = rounding.feet_inches(mm).rstrip('"').partition("'-")
    inches = sum((Fraction(part) for part in rest.split()), Fraction(0))
    back = float((int(feet) * 12 + inches) * Fraction(254, 10))
    assert abs(back - mm) <= 25.4 / 32 + 1e-6
