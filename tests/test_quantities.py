"""Text with units: the everyday table against pint, and the spellings people use."""

from __future__ import annotations

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from takeoff import quantities as q
from takeoff.errors import UnitError

REGISTRY = pint.UnitRegistry()


@pytest.mark.parametrize("spelling", sorted(q.EVERYDAY))
def test_everyday_units_agree_with_pint(spelling: str) -> None:
    """Each entry of the everyday table has pint's factor to the inside unit, to twelve figures."""
    dimension, factor, name = q.EVERYDAY[spelling]
    if name == "kilopound_mass":
        theirs = 1000 * REGISTRY.Quantity(1, "pound").to("kilogram").magnitude
    else:
        theirs = REGISTRY.Quantity(1, name).to(q.INSIDE[dimension][1]).magnitude
    assert factor == pytest.approx(theirs, rel=1e-12)


def test_every_spelling_leads_to_an_everyday_unit() -> None:
    """No other way to write a unit leads nowhere, and none shadows an everyday unit."""
    assert set(q.SPELLINGS.values()) <= set(q.EVERYDAY)
    assert not set(q.SPELLINGS) & set(q.EVERYDAY)


@pytest.mark.parametrize(("text", "mm"), [
    ("14.2 m", 14200), ("650mm", 650), ("2,40 m", 2400), ("1 200 mm", 1200), ("1\u00a0200 mm", 1200), ("12\u202f450 mm", 12450),
    ("5'-8 1/2\"", 68.5 * 25.4), ("7'-3/4\"", 84.75 * 25.4), ("12' 6\"", 150 * 25.4), ("8 ft", 8 * 304.8), ("8'", 8 * 304.8),
    ("¾\"", 19.05), ("1 ½\"", 38.1), ("1-1/4\"", 31.75), ("6.5\"", 165.1), ("3 1/8 in", 79.375), ("2.5 Inch", 63.5),
    ("12′-6″", 150 * 25.4), ("1,250.5 mm", 1250.5), ("1.250,5 mm", 1250.5),
])  # fmt: skip
def test_lengths_people_type(text: str, mm: float) -> None:
    """A length with its unit, in the spellings of real lists, has one reading."""
    readings = q.measure_readings(text)
    assert len(readings) == 1
    assert readings[0].unit is not None
    assert readings[0].value == pytest.approx(mm, rel=1e-12)


@pytest.mark.parametrize("text", ["", "abc", "5-8", "1/0\"", "--5", "0x10", "1e5 mm", "9" * 200, "TBD", "2-3 m", "5'14\"", "²", "1 2 mm"])
def test_texts_that_are_no_length(text: str) -> None:
    """What is not plainly one number and one unit has no reading at all."""
    assert q.measure_readings(text) == []


def test_a_lone_thousand_is_open() -> None:
    """1,500 is 1500 or 1.5 until the file's decimal sign settles it."""
    readings = q.number_readings("1,500")
    assert {(r.value, r.sign) for r in readings} == {(1500.0, "point"), (1.5, "comma")}
    assert q.choose(readings, None) is None
    assert q.choose(readings, "comma") == q.Reading(1.5, "comma")
    assert q.choose(readings, "point") == q.Reading(1500.0, "point")


@given(st.floats(min_value=0.001, max_value=99999, allow_nan=False), st.sampled_from(["mm", "cm", "m", "in", "ft", "kg", "lb"]))
def test_a_number_with_its_unit_reads_back(value: float, unit: str) -> None:
    """Whatever is printed plainly with a decimal point and a unit reads as just that."""
    text = f"{value:.4f} {unit}"
    readings = [m for m in q.measure_readings(text) if m.sign in ("point", None)]
    assert [m.value for m in readings] == pytest.approx([float(f"{value:.4f}") * q.EVERYDAY[unit][1]])


@given(st.text(max_size=200))
def test_no_text_breaks_the_reader(text: str) -> None:
    """Any text at all is read or is not; it never raises."""
    q.measure_readings(text)
    q.number_readings(text)
    q.unit_of(text)


@pytest.mark.parametrize(("text", "celsius"), [
    ("60", 60), ("60C", 60), ("140F", 60), ("-196 °C", -196), ("77K", -196.15), ("0 K", -273.15),
])
def test_temperatures(text: str, celsius: float) -> None:
    """Celsius, Fahrenheit and kelvin."""
    assert q.temperature_C(text) == pytest.approx(celsius)


def test_below_absolute_zero_is_refused() -> None:
    """There is nothing below 0 K."""
    with pytest.raises(UnitError, match="below absolute zero"):
        q.temperature_C("-300C")


def test_other_units_go_through_pint() -> None:
    """A unit outside the everyday table is read by the field's registry; an expression is not."""
    assert q.convert(2, "furlong", "length") == pytest.approx(402_336, rel=1e-5)
    assert q.convert(1, "lb/ft", "mass per length") == pytest.approx(1.48816, rel=1e-5)
    with pytest.raises(UnitError, match="no unit of length"):
        q.convert(1, "__import__('os')", "length")
    with pytest.raises(UnitError, match="no unit of length"):
        q.convert(1, "kg", "length")
