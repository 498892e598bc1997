"""Which standard size of sling, shackle and eyebolt is enough: by the leg's own tension, and by the uniform-load rule. Rank 6.

Trigonometric method: a leg's tension over the hitch factor (and the bend's) against the rating of one leg. Uniform-load
method: the whole load against the rating of the multi-leg sling for its band of angles; it presumes legs alike. Eyebolts
are taken one by one at their angle, never added up. Ratings: `materials/lifting_tackle.csv`. The tag on the gear decides.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cache
from typing import Any, Literal

from takeoff.datafiles import data_folder, read_table
from takeoff.findings import Finding
from takeoff.lifting.factors import factor
from takeoff.lifting.figures import up_to
from takeoff.provenance import Source

Sling = Literal["chain", "wire rope", "round sling", "webbing"]
SLINGS: tuple[Sling, ...] = ("chain", "wire rope", "round sling", "webbing")
#: an eyebolt's pull counts as straight up to this angle
_STRAIGHT_DEG = 0.5


@dataclass(frozen=True, slots=True)
class Rating:
    """One cell of the table of ratings: what, size, mode, working load limit in t."""

    tackle: str
    size: str
    mode: str
    wll_t: float
    source: Source


@dataclass(frozen=True, slots=True)
class Choice:
    """A piece of tackle that is enough for one point (or for the whole pick): None for a load beyond the table."""

    tackle: str
    size: str | None
    wll_t: float | None
    needed_t: float
    method: str
    source: Source

    def as_record(self) -> dict[str, Any]:
        return {
            "tackle": self.tackle,
            "size": self.size,
            "wll_t": self.wll_t,
            "needed_t": self.needed_t,
            "method": self.method,
            "source": self.source.as_record(),
        }


@cache
def ratings(tackle: str, mode: str) -> tuple[Rating, ...]:
    """All sizes of one kind in one mode, the smallest rating first."""
    found = [
        Rating(r["tackle"], r["size"], r["mode"], float(r["wll_t"]), Source(r["title"], r["clause"], r["evidence"]))
        for _, r in read_table(data_folder() / "lifting_tackle.csv")
        if r["tackle"] == tackle and r["mode"] == mode
    ]
    return tuple(sorted(found, key=lambda r: r.wll_t))


def enough(tackle: str, mode: str, needed_t: float, method: str) -> Choice:
    """The smallest standard size rated for `needed_t`; its size is None where the table's largest is too small."""
    sizes = ratings(tackle, mode)
    # A hair of tolerance: a load of exactly a rating is carried by it, whatever the last bit of the product says.
    fit = next((r for r in sizes if r.wll_t >= needed_t * (1 - 1e-12)), None)
    if fit is None:
        return Choice(tackle, None, None, needed_t, method, sizes[-1].source)
    return Choice(tackle, fit.size, fit.wll_t, needed_t, method, fit.source)


def bend_factor(bend_ratio: float) -> float:
    """What is left of a wire rope bent round D/d: 1 − 0.5/√(D/d) (0027/ND as quoted). Raises ValueError under D/d = 1."""
    if bend_ratio < 1:
        raise ValueError("a wire rope is never bent round less than its own diameter")
    return 1 - 0.5 / math.sqrt(bend_ratio)


def for_leg(
    tension_t: float, angle_deg: float, sling: Sling | None, hitch: str, bend_ratio: float | None
) -> tuple[list[Choice], list[Finding]]:
    """Sling (of the kind named, else of every kind), shackle and eyebolt for one leg by its own tension in t."""
    findings: list[Finding] = []
    choices: list[Choice] = []
    hitch_factor = factor("hitch", hitch).value
    for kind in SLINGS if sling is None else (sling,):
        reduced, method = tension_t / hitch_factor, "trigonometric" + (f", {hitch} × {hitch_factor:g}" if hitch != "direct" else "")
        if bend_ratio is not None and kind == "wire rope":
            if bend_ratio < 1:
                findings.append(
                    Finding(
                        "note",
                        "no-standard-size",
                        "a wire rope is never bent round less than its own diameter: no size is named",
                        read=f"bend_ratio {bend_ratio:g}",
                        right="1 and more; 2 and more for an eye",
                    )
                )
                continue
            reduced /= bend_factor(bend_ratio)
            method += f", bent round {bend_ratio:g} diameters × {bend_factor(bend_ratio):.3f}"
        elif bend_ratio is not None and sling is not None:
            findings.append(
                Finding("note", "bend-not-reduced", f"no published reduction for a bent {kind} is known: its maker's least radius decides")
            )
        choices.append(enough(kind, "one_leg", reduced, method))
    choices.append(enough("shackle", "in line", tension_t, "in line with the leg"))
    if angle_deg > _STRAIGHT_DEG:
        side = factor("shackle side load", "45").value
        choices.append(enough("shackle", "in line", tension_t / side, f"loaded sideways up to 45° × {side:g}"))
    mode = "axial" if angle_deg <= _STRAIGHT_DEG else "to 45" if angle_deg <= 45 + 1e-9 else "to 90"
    choices.append(enough("eyebolt", mode, tension_t, f"one upright eyebolt, pulled {'straight' if mode == 'axial' else mode + '°'}"))
    findings += [
        Finding("note", "no-standard-size", f"no {c.tackle} of the tables carries {up_to(c.needed_t, 2)} t")
        for c in choices
        if c.size is None
    ]
    return choices, findings


def uniform(load_t: float, angles_deg: Sequence[float], sling: Sling | None, hitch: str) -> list[Choice]:
    """The whole sling by the uniform-load method, `load_t` in t; none for more than four legs or an angle past 60°."""
    legs, steepest = len(angles_deg), max(angles_deg)
    if legs > 4 or steepest > 60 + 1e-9:
        return []
    band = "0_45" if steepest <= 45 + 1e-9 else "45_60"
    mode = "one_leg" if legs == 1 else f"{'two' if legs == 2 else 'three_four'}_leg_{band}"
    if legs == 1 and steepest > _STRAIGHT_DEG:
        return []
    hitch_factor = factor("hitch", hitch).value
    words = f"uniform load, {legs} leg{'s' if legs > 1 else ''} up to {'45' if band == '0_45' else '60'}°, legs alike"
    words += f", {hitch} × {hitch_factor:g}" if hitch != "direct" else ""
    return [enough(kind, mode, load_t / hitch_factor, words) for kind in (SLINGS if sling is None else (sling,))]
