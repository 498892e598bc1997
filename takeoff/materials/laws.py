"""The laws of thermal elongation by name: which published curve serves over which temperatures. Rank 2.

Only the chain is named here; `expansion` joins the pieces. Kept apart so that a card can name a law without the curves.
"""

from __future__ import annotations

from functools import cache

from takeoff.datafiles import data_folder, read_table

#: Where a source states no interval, a constant coefficient serves over this range (structural practice, EN 1991-1-5).
PRACTICE_C = (-50.0, 100.0)


@cache
def laws() -> dict[str, tuple[tuple[float, float | None, str], ...]]:
    """The laws of laws.csv: name -> (from °C, to °C or None for the end of the curve, curve), coldest first.

    The curve `row` is the row's own coefficient, `means` its printed mean coefficients, else a name of curves.csv.
    """
    found: dict[str, list[tuple[float, float | None, str]]] = {}
    for _, row in read_table(data_folder() / "laws.csv"):
        end = float(row["to_C"]) if row["to_C"] else None
        found.setdefault(row["law"], []).append((float(row["from_C"]), end, row["curve"]))
    return {name: tuple(stretches) for name, stretches in found.items()}


def row_range(law: str, from_C: float, to_C: float, interval_C: tuple[float, float] | None) -> tuple[float, float]:
    """Where the row's own coefficient serves: with nothing else in the law, the source's own interval counts too."""
    if len(laws()[law]) == 1 and interval_C:
        return min(from_C, interval_C[0]), max(to_C, interval_C[1])
    return from_C, to_C
