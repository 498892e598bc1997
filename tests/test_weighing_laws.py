"""Laws that hold for any list: order of bounds, splitting, order of rows; and the likely range against a Monte Carlo."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
from conftest import SAMPLES
from hypothesis import given, settings
from hypothesis import strategies as st
from weighing_rows import Rows

from takeoff import pipeline
from takeoff.bounds import Bounds, likely_range, standard_uncertainty
from takeoff.weighing.totals import likely_groups, total_up

WORDS = ("light", "nominal", "heavy")
_THINGS: list[dict[str, Any]] = [
    {"Section": "UB 203x133x25", "Material": "S355"}, {"Section": "CHS 114.3x5", "Material": "S355", "Contents": "water"},
    {"Section": "SHS 80x80x5", "Material": "1.4301"}, {"Section": "PL 10", "Material": "S275", "Width (mm)": 300, "Holes": "4x22"},
    {"Section": "FL 50x10", "Material": "S235"}, {"Section": "Board 50x150", "Material": "C24"},
    {"Section": "Board 60x160", "Material": "oak"},
    {"Section": "Block 600x400x300", "Material": "granite"}, {"Section": "Winch", "Unit mass (kg)": 180},
    {"Section": "UC 152x152x30", "Material": "S355", "Unit mass (kg)": 95},
    {"Section": "L 70x70x7", "Material": "S275", "Weighed mass (kg)": 21},
    {"Section": "CHS 60.3x4", "Material": "S355", "Contents": "sand", "Insulation": "30 mm at 90 kg/m3"},
    {"Section": "Board 50x150", "Material": "C24", "Contents": "soaked"},
]
_JOB = {"masses": {"weld_percent": 1.5, "bolt_percent": 2.0, "finish": "galvanized", "weighing_accuracy_percent": 1.0}}
_row = st.fixed_dictionaries({
    "thing": st.sampled_from(_THINGS), "Quantity": st.integers(1, 40), "Length (mm)": st.integers(200, 12_000),
    "Finish": st.sampled_from([None, "paint 240 um", "galvanized", "zinc 85 um + paint 120 um", "fire protection 3 kg/m2", "blue", "none"]),
})
rows_of_lists = st.lists(_row.map(lambda r: {**r.pop("thing"), **r}), min_size=1, max_size=8)


def weighed(rows: list[dict[str, Any]]) -> Rows:
    return Rows([{"Mark": f"M{i}", **row} for i, row in enumerate(rows)], _JOB)


@settings(max_examples=25, deadline=None)
@given(rows_of_lists)
def test_bounds_are_in_order_and_add_up(rows: list[dict[str, Any]]) -> None:
    """Light <= nominal <= heavy for bare, each addition, each and all; bare + additions = each; quantity x each = all."""
    frame = weighed(rows).frame
    kinds = [c.removeprefix("add_").removesuffix("_id") for c in frame if str(c).startswith("add_") and str(c).endswith("_id")]
    for part in ("bare", "each", "total", *(f"add_{kind}" for kind in kinds)):
        light, nominal, heavy = (frame[f"{part}_{word}_kg"] for word in WORDS)
        assert (light <= nominal + 1e-9).all()
        assert (nominal <= heavy + 1e-9).all()
        assert (light >= 0).all()
    for word in WORDS:
        parts = frame[f"bare_{word}_kg"] + sum(frame[f"add_{kind}_{word}_kg"] for kind in kinds)
        assert np.allclose(parts, frame[f"each_{word}_kg"], rtol=1e-12)
        assert np.allclose(frame["quantity"] * frame[f"each_{word}_kg"], frame[f"total_{word}_kg"], rtol=1e-12)
    totals = total_up(frame)
    for word in WORDS:
        whole = getattr(totals.bare_kg, word) + sum(getattr(mass, word) for mass in totals.additions.values())
        assert whole == pytest.approx(getattr(totals.mass_kg, word), rel=1e-9)


@settings(max_examples=15, deadline=None)
@given(rows_of_lists, st.data())
def test_splitting_a_quantity_changes_nothing(rows: list[dict[str, Any]], data: st.DataObject) -> None:
    """Two rows of 3 and 4 weigh what one row of 7 does, in every bound, and so does the likely range."""
    at = data.draw(st.integers(0, len(rows) - 1))
    # A stated mass is judged on the row's total, so what is flagged may change with the row; of all others nothing does.
    rows = [{k: v for k, v in row.items() if k != "Unit mass (kg)" or row["Section"] == "Winch"} for row in rows]
    count = rows[at]["Quantity"] + 1
    first = data.draw(st.integers(1, count - 1))
    whole = [{**row, "Quantity": count} if i == at else row for i, row in enumerate(rows)]
    split = [*whole[:at], {**whole[at], "Quantity": first}, {**whole[at], "Quantity": count - first}, *whole[at + 1:]]
    one, two = (total_up(weighed(r).frame) for r in (whole, split))
    assert one.mass_kg.as_record() == pytest.approx(two.mass_kg.as_record(), rel=1e-12)
    assert one.likely_kg == pytest.approx(two.likely_kg, rel=1e-12)
    assert one.quantity == two.quantity


@settings(max_examples=15, deadline=None)
@given(rows_of_lists, st.randoms(use_true_random=False))
def test_the_order_of_rows_changes_nothing(rows: list[dict[str, Any]], chance: Any) -> None:
    """Totals of a shuffled list are the same but for the last digits."""
    shuffled = list(rows)
    chance.shuffle(shuffled)
    one, two = (total_up(weighed(r).frame) for r in (rows, shuffled))
    assert one.mass_kg.as_record() == pytest.approx(two.mass_kg.as_record(), rel=1e-12)
    assert one.likely_kg == pytest.approx(two.likely_kg, rel=1e-12)


# --- the likely range ------------------------------------------------------------------------------------------------

PROJECTS = sorted(p.parent for p in SAMPLES.glob("*/job.toml"))


def list_of(project: Path) -> Path:
    return next(p for p in sorted(project.iterdir()) if p.suffix in (".csv", ".xlsx") and "list" in p.stem and "schedule" not in p.name)


def test_there_are_three_projects() -> None:
    """The claim below is made of three at least."""
    assert len(PROJECTS) >= 3


@pytest.mark.parametrize("project", PROJECTS, ids=lambda p: p.name)
def test_the_likely_range_against_a_monte_carlo(project: Path) -> None:
    """200,000 draws, each group between its bounds: standard deviation within 1 %, mean within 0.1 %, 95 in 100 inside."""
    frame = pipeline.schedule([list_of(project)]).members
    groups: list[Bounds] = likely_groups(frame[frame["status"].ne("not weighed")])
    draws = np.zeros(200_000)
    generator = np.random.default_rng(20260312)
    for group in groups:
        draws += generator.uniform(group.light, group.heavy, len(draws))
    middle = sum((g.light + g.heavy) / 2 for g in groups)
    assert float(draws.std()) == pytest.approx(standard_uncertainty(groups), rel=0.01)
    assert float(draws.mean()) == pytest.approx(middle, rel=0.001)
    low, high = likely_range(groups)
    assert float(((draws >= low) & (draws <= high)).mean()) >= 0.95
    assert sum(g.light for g in groups) <= low <= middle <= high <= sum(g.heavy for g in groups)
