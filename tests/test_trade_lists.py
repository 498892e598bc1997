"""Invented lists of several trades, typed before they were read here, row by row against masses worked out by hand.

The lists stand in `tests/trade_lists/`; `tests/published/trade_lists.csv` has each member's state, its mass and how that was
worked out: pieces × metres × kg/m of the section tables of handbooks (recalled; lb/ft × 0.45359 in the American list), or
pieces × sizes × density (steel 7.85, EN AW-5083 2.66, in kg per m² and mm; C24 and GL24h 420 kg/m³; 0.2836 lb/in³).
The state ``read`` is weighed or assumed.
"""

from __future__ import annotations

from pathlib import Path

import pytest

from takeoff import pipeline
from takeoff.datafiles import read_table

HERE = Path(__file__).parent
EXPECTED = [row for _, row in read_table(HERE / "published" / "trade_lists.csv")]
LISTS = sorted({row["list"] for row in EXPECTED})


@pytest.mark.parametrize("name", LISTS)
def test_a_list_of_a_trade_row_by_row(name: str) -> None:
    """Every member has its state and its mass, no other row is a member, and the account closes."""
    expected = {int(row["row"]): row for row in EXPECTED if row["list"] == name}
    result = pipeline.schedule([HERE / "trade_lists" / name])
    members = result.members
    assert members["row"].tolist() == sorted(expected)
    for row, status, kg in zip(members["row"], members["status"], members["total_nominal_kg"], strict=True):
        wanted = expected[row]
        assert status == wanted["state"] or (wanted["state"] == "read" and status in ("weighed", "assumed")), row
        if wanted["total_kg"]:
            assert kg == pytest.approx(float(wanted["total_kg"]), rel=0.002), row
    account = result.account.as_record()
    assert account["rows"] == sum(count for part, count in account.items() if part != "rows")
    assert account["rows"] == len((HERE / "trade_lists" / name).read_text(encoding="utf-8").splitlines())


def test_every_list_of_a_trade_is_expected() -> None:
    """No list stands in the folder without its figures."""
    assert sorted(path.name for path in (HERE / "trade_lists").iterdir()) == LISTS
