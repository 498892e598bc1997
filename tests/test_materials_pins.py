"""Released figures are pinned: a change must be declared in `materials/changes.csv`, with its reason."""

from __future__ import annotations

from pathlib import Path

from takeoff.datafiles import data_folder, read_table
from takeoff.materials import all_materials, by_key
from takeoff.materials.table import table

PINS = Path(__file__).parent / "published" / "material_pins.csv"
COLUMNS = ("density_low_kg_m3", "density_kg_m3", "density_high_kg_m3", "alpha_1e-6_per_K", "law")


def _differences(pins: list[dict[str, str]], now: dict[str, dict[str, str]], declared: set[tuple[str, ...]]) -> list[str]:
    """Pinned figures that changed without a word in the list of declared changes (key, column, was, now)."""
    found = []
    for pin in pins:
        row = now.get(pin["key"])
        for column in COLUMNS:
            current = "removed" if row is None else row[column]
            if current != pin[column] and (pin["key"], column, pin[column], current) not in declared:
                found.append(f"{pin['key']}, {column}: was {pin[column]!r}, now {current!r}")
    return found


def _declared() -> set[tuple[str, ...]]:
    rows = [row for _, row in read_table(data_folder() / "changes.csv")]
    assert all(row["why"] for row in rows), "a change without a reason"
    return {(row["key"], row["column"], row["was"], row["now"]) for row in rows}


def test_no_released_figure_changed_unsaid() -> None:
    """Every pinned row still holds its figures, or the change is declared in changes.csv."""
    now = {key: row for key, (_, _, row) in table().rows.items()}
    pins = [row for _, row in read_table(PINS)]
    assert _differences(pins, now, _declared()) == []


def test_every_released_row_is_pinned() -> None:
    """The pins cover the whole table of this release; a new row is added to them when it is released."""
    pinned = {row["key"] for _, row in read_table(PINS)}
    missing = [m.key for m in all_materials() if m.key not in pinned]
    assert len(missing) < 0.1 * len(pinned), "pin the rows that were released: " + ", ".join(missing[:10])


def test_a_changed_figure_would_be_caught() -> None:
    """The check itself fails on a changed or removed row, and passes once the change is declared."""
    pin = {"key": "gold", **dict.fromkeys(COLUMNS, ""), "density_kg_m3": "19300"}
    changed = {"gold": {**dict.fromkeys(COLUMNS, ""), "density_kg_m3": "19320"}}
    assert _differences([pin], changed, set()) == ["gold, density_kg_m3: was '19300', now '19320'"]
    assert _differences([pin], changed, {("gold", "density_kg_m3", "19300", "19320")}) == []
    assert len(_differences([pin], {}, set())) == len(COLUMNS)
    assert by_key("gold").density.nominal == 19300
