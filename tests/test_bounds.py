"""Light / nominal / heavy arithmetic and the likely range."""

from __future__ import annotations

import math
import random

import pytest
from hypothesis import given
from hypothesis import strategies as st

from takeoff.bounds import Bounds, likely_range

bounds = st.tuples(st.floats(0, 1e6), st.floats(0, 1e6), st.floats(0, 1e6)).map(lambda t: Bounds(*sorted(t)))


@given(bounds, bounds)
def test_sums_keep_the_order(a: Bounds, b: Bounds) -> None:
    """Light <= nominal <= heavy survives sums, products and scaling."""
    for c in (a + b, a.times(b), a * 3.5):
        assert c.light <= c.nominal * (1 + 1e-12) <= c.heavy * (1 + 2e-12) or c.heavy == 0


def test_bounds_out_of_order_are_refused() -> None:
    """A light mass above the nominal one is a fault, not a mass."""
    with pytest.raises(ValueError, match="out of order"):
        Bounds(2, 1, 3)


@given(st.lists(bounds, min_size=1, max_size=20))
def test_the_likely_range_lies_inside_the_bounds(groups: list[Bounds]) -> None:
    """It is cut off at the bounds, and one group alone spans nearly all of them."""
    low, high = likely_range(groups)
    assert math.fsum(g.light for g in groups) <= low + 1e-6
    assert high <= math.fsum(g.heavy for g in groups) + 1e-6
    assert low <= high + 1e-9


def test_the_likely_range_against_a_monte_carlo() -> None:
    """Twice the standard deviation of 40,000 drawn totals agrees with the formula (JCGM 100) within 1.5 %."""
    groups = [Bounds(90, 100, 115), Bounds(480, 500, 520), Bounds(20, 22, 30), Bounds(960, 1000, 1040)]
    draw = random.Random(7)
    totals = [math.fsum(draw.uniform(g.light, g.heavy) for g in groups) for _ in range(40_000)]
    mean = math.fsum(totals) / len(totals)
    deviation = math.sqrt(math.fsum((t - mean) ** 2 for t in totals) / len(totals))
    low, high = likely_range(groups)
    assert (high - low) / 2 == pytest.approx(2 * deviation, rel=0.015)
    assert sum(low <= t <= high for t in totals) >= 0.95 * len(totals)
