"""Frames for a notebook: picks, lifting points, loads and sums, one row a thing, SI, with the unit in each column's name. Rank 9."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.bounds import Bounds
    from takeoff.pipeline import Result

_WORDS = ("light", "nominal", "heavy")


@dataclass(frozen=True, slots=True)
class Plan:
    """What `takeoff.plan` gives: frames, each with one row a thing; empty where there is nothing of it.

    picks : pick, pieces, not_weighed, light_kg, nominal_kg, heavy_kg, design_mass_kg, static_hook_load_kg, hook_load_kg,
        hook_load_kN, x_mm, y_mm, z_mm (centre of gravity), crane, utilisation, verdict.
    points : pick, point, x_mm, y_mm, z_mm, share_kN, share_heavy_kN, tension_kN, sling_length_mm, angle_deg, required_wll_t.
    loads : vehicle, piece, heavy_kg, x_mm, y_mm, layer.
    axles : vehicle, axle, light_kg, heavy_kg, limit_kg, share.
    not_loaded : piece, heavy_kg, reason.
    cautions : what goes with every one of these figures.
    """

    picks: pd.DataFrame
    points: pd.DataFrame
    loads: pd.DataFrame
    axles: pd.DataFrame
    not_loaded: pd.DataFrame
    cautions: tuple[str, ...]


def plan(result: Result) -> Plan:
    """The picks and loads of a weighed result as frames."""
    picks = [
        (
            p.name,
            p.pieces,
            p.not_weighed,
            *_three(p.mass_kg),
            p.design_mass_kg,
            p.static_hook_load_kg,
            p.hook_load_kg,
            p.hook_load_kN,
            *(p.centre.centre if p.centre else (None,) * 3),
            p.crane.name if p.crane else None,
            p.crane.utilisation if p.crane else None,
            p.verdict,
        )
        for p in result.picks
    ]
    points = [
        (
            p.name,
            q.name,
            *q.position_mm,
            q.share_kN,
            q.share_heavy_kN,
            q.tension_kN,
            q.sling_length_mm,
            q.angle_from_vertical_deg,
            q.required_wll_t,
        )
        for p in result.picks
        for q in p.points
    ]
    found = result.loads
    placed = found.loads if found else ()
    pieces = [(load.name, p.unit.name, p.unit.mass.heavy, p.x, p.y, p.layer) for load in placed for p in load.pieces]
    axles = [(load.name, a.name, a.light_kg, a.kg, a.limit_kg, a.share) for load in placed for a in load.axles]
    left = [(n.name, n.kg, n.reason) for n in (found.not_loaded if found else ())]
    return Plan(
        _frame(
            picks,
            (
                "pick",
                "pieces",
                "not_weighed",
                "light_kg",
                "nominal_kg",
                "heavy_kg",
                "design_mass_kg",
                "static_hook_load_kg",
                "hook_load_kg",
                "hook_load_kN",
                "x_mm",
                "y_mm",
                "z_mm",
                "crane",
                "utilisation",
                "verdict",
            ),
        ),
        _frame(
            points,
            (
                "pick",
                "point",
                "x_mm",
                "y_mm",
                "z_mm",
                "share_kN",
                "share_heavy_kN",
                "tension_kN",
                "sling_length_mm",
                "angle_deg",
                "required_wll_t",
            ),
        ),
        _frame(pieces, ("vehicle", "piece", "heavy_kg", "x_mm", "y_mm", "layer")),
        _frame(axles, ("vehicle", "axle", "light_kg", "heavy_kg", "limit_kg", "share")),
        _frame(left, ("piece", "heavy_kg", "reason")),
        result.cautions,
    )


def sums(result: Result, by: str) -> pd.DataFrame:
    """The sums by material, section, assembly, pick, phase or finish: name, pieces, light_kg, nominal_kg, heavy_kg, not_weighed.

    Raises KeyError on another grouping.
    """
    groups = result.totals.groups[by]
    return _frame(
        [(g.name, g.quantity, *_three(g.mass_kg), g.not_weighed) for g in groups],
        (by, "pieces", "light_kg", "nominal_kg", "heavy_kg", "not_weighed"),
    )


def _three(mass: Bounds) -> tuple[float, float, float]:
    return mass.light, mass.nominal, mass.heavy


def _frame(rows: Iterable[Sequence[Any]], columns: Sequence[str]) -> pd.DataFrame:
    import pandas as pd

    return pd.DataFrame([tuple(row) for row in rows], columns=list(columns))
