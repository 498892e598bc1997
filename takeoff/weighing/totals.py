"""Sums over weighed members: in all and by material, section, assembly, pick, phase and finish; every sum says what it lacks.

Sums are of unrounded figures. The likely range follows `takeoff.bounds.likely_range` over (section, material) groups.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

from takeoff.bounds import Bounds, likely_range
from takeoff.weighing.additions import KINDS
from takeoff.weighing.counted import EVERYTHING, with_open_rows

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.weighing.work import Ints

#: members column -> the name that stands for a blank there
GROUPINGS = {
    "material": "(no material)", "section": "(no section)", "assembly": "(no assembly)", "pick": "(no pick)",
    "phase": "(no phase)", "finish": "(no finish named)",
}


@dataclass(frozen=True, slots=True)
class GroupTotal:
    """One group's sum: pieces weighed, mass bounds in kg, and how many rows it lacks."""

    name: str
    quantity: int
    mass_kg: Bounds
    not_weighed: int

    def as_record(self) -> dict[str, Any]:
        return {
            "name": self.name, "quantity": self.quantity, "mass_kg": self.mass_kg.as_record(),
            "not_weighed": self.not_weighed,
        }


@dataclass(frozen=True, slots=True)
class Totals:
    """The whole list's sums. `quantity` counts weighed pieces; volume (m³) and surface (m²) are sums over those known.

    `bare_kg` and `additions` (by kind) add up to `mass_kg`.
    """

    quantity: int
    mass_kg: Bounds
    likely_kg: tuple[float, float]
    volume_m3: float
    surface_m2: float
    not_weighed: int
    not_counted: tuple[str, ...]
    bare_kg: Bounds
    additions: dict[str, Bounds]
    groups: dict[str, list[GroupTotal]] = field(default_factory=dict)

    def as_record(self) -> dict[str, Any]:
        record: dict[str, Any] = {
            "quantity": self.quantity, "mass_kg": self.mass_kg.as_record(),
            "likely_kg": {"low": self.likely_kg[0], "high": self.likely_kg[1]}, "volume_m3": self.volume_m3,
            "surface_m2": self.surface_m2, "not_weighed": self.not_weighed, "not_counted": list(self.not_counted),
            "bare_kg": self.bare_kg.as_record(),
            "additions": [{"kind": kind, "mass_kg": mass.as_record()} for kind, mass in self.additions.items()],
        }
        for name in GROUPINGS:
            record[f"by_{name}"] = [g.as_record() for g in self.groups.get(name, [])]
        return record


def total_up(members: pd.DataFrame, not_counted: tuple[str, ...] = EVERYTHING) -> Totals:
    """Totals of a weighed members frame (see `takeoff.weighing.masses.Weighed` for its columns); `not_counted` of its run."""
    weighed = members["status"].ne("not weighed")
    counted = members[weighed]
    pieces = counted["quantity"]
    return Totals(
        quantity=int(pieces.sum()),
        mass_kg=_bounds(counted),
        likely_kg=likely_range(likely_groups(counted)),
        volume_m3=_sum(counted["volume_m3"] * pieces),
        surface_m2=_sum(counted["surface_m2"] * pieces),
        not_weighed=int((~weighed).sum()),
        not_counted=with_open_rows(not_counted, members),
        bare_kg=_of_pieces(counted, "bare"),
        additions={kind: _of_pieces(counted, f"add_{kind}") for kind in KINDS if f"add_{kind}_id" in counted},
        groups={name: by(members, name, blank) for name, blank in GROUPINGS.items()},
    )


def by(members: pd.DataFrame, column: str, blank: str) -> list[GroupTotal]:
    """One GroupTotal for each distinct text of `column`, in the order of first appearance; blanks under `blank`."""
    if members.empty:
        return []
    names = members[column].fillna("").where(members[column].fillna("").ne(""), blank)
    weighed = members["status"].ne("not weighed")
    import pandas as pd

    codes, found = pd.factorize(names)
    frame = members.loc[:, ["quantity", *_MASSES]].where(weighed, 0.0)
    frame["lacking"] = (~weighed).astype(float)
    sums = _sums(frame.fillna(0.0), codes, len(found))
    return [
        GroupTotal(str(name), int(quantity), Bounds(light, nominal, heavy), int(lacking))
        for name, (quantity, light, nominal, heavy, lacking) in zip(found, sums, strict=True)
    ]


_MASSES = [f"total_{word}_kg" for word in ("light", "nominal", "heavy")]


def _sum(column: pd.Series[float]) -> float:
    """The exact sum, rounded once: the same in whatever order, on whatever machine, with whatever version of a library."""
    return math.fsum(column.dropna().tolist())


def _sums(frame: pd.DataFrame, codes: Ints, count: int) -> list[tuple[float, ...]]:
    """For each of `count` groups the exact sums of the frame's columns; `codes` gives each row's group."""
    import numpy as np

    order = np.argsort(codes, kind="stable")
    starts = np.searchsorted(codes[order], np.arange(count + 1)).tolist()
    columns = [frame[name].to_numpy(dtype=float)[order].tolist() for name in frame.columns]
    return [tuple(math.fsum(column[start:end]) for column in columns) for start, end in itertools.pairwise(starts)]


def _bounds(counted: pd.DataFrame) -> Bounds:
    light, nominal, heavy = (_sum(counted[name]) for name in _MASSES)
    return Bounds(light, nominal, heavy)


def _of_pieces(counted: pd.DataFrame, part: str) -> Bounds:
    """A part of each piece's mass, over all pieces."""
    light, nominal, heavy = (_sum(counted[f"{part}_{word}_kg"] * counted["quantity"]) for word in ("light", "nominal", "heavy"))
    return Bounds(light, nominal, heavy)


def likely_groups(counted: pd.DataFrame) -> list[Bounds]:
    """The summed bounds of each (section, material) group of weighed members: what errs together."""
    if counted.empty:
        return []
    # Rows without a section of ours (stated masses) have nothing that ties them together but their text.
    codes: Ints = counted.groupby(["section", "material"], sort=False, dropna=False).ngroup().to_numpy().astype("int64")
    return [Bounds(light, nominal, heavy) for light, nominal, heavy in _sums(counted[_MASSES], codes, int(codes.max()) + 1)]
