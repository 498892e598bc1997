"""Loose pieces strapped for handling: one section and length to a bundle, up to a limit of mass. Rank 5.

Pieces alike lie flat on each other and come off the crane together; the limit is compared with the heavy mass. Bundles
of one kind are made as even as whole pieces allow, so that none is a leftover of two.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Loose:
    """One row of loose pieces: its member number, what they are, their length in mm (NaN: none), how many, heavy kg each."""

    member: int
    section: str
    length_mm: float
    quantity: int
    heavy_kg: float


@dataclass(frozen=True, slots=True)
class Bundle:
    """A bundle: its name, and how many pieces of which members."""

    name: str
    pieces: tuple[tuple[int, int], ...]
    heavy_kg: float
    over_limit: bool


def bundle_up(rows: Iterable[Loose], max_kg: float) -> list[Bundle]:
    """Bundles of at most `max_kg`, in the rows' order; a piece heavier than the limit stands alone and is marked.

    Raises ValueError on a limit that is not above zero.
    """
    if not max_kg > 0:
        raise ValueError("a bundle needs a limit above 0 kg")
    groups: dict[tuple[str, float], list[Loose]] = {}
    for row in rows:
        length = -1.0 if math.isnan(row.length_mm) else round(row.length_mm, 1)
        groups.setdefault((row.section, length), []).append(row)
    made: list[Bundle] = []
    for (section, length), members in groups.items():
        pieces = [(row.member, row.heavy_kg) for row in members for _ in range(row.quantity)]
        title = section + (f", {length:g} mm" if length >= 0 else "")
        parts = _even(pieces, max_kg)
        for number, part in enumerate(parts, 1):
            name = f"Bundle {title}" + (f", {number} of {len(parts)}" if len(parts) > 1 else "")
            counts: dict[int, int] = {}
            for member, _ in part:
                counts[member] = counts.get(member, 0) + 1
            mass = math.fsum(kg for _, kg in part)
            made.append(Bundle(name, tuple(counts.items()), mass, mass > max_kg * (1 + 1e-9)))
    return made


def _even(pieces: list[tuple[int, float]], max_kg: float) -> list[list[tuple[int, float]]]:
    """Fill bundles one after another to the fewest, then level them out where every piece weighs the same."""
    parts: list[list[tuple[int, float]]] = [[]]
    mass = 0.0
    for piece in pieces:
        if parts[-1] and mass + piece[1] > max_kg * (1 + 1e-9):
            parts.append([])
            mass = 0.0
        parts[-1].append(piece)
        mass += piece[1]
    if not parts[0] or max(kg for _, kg in pieces) != min(kg for _, kg in pieces):
        return [part for part in parts if part]
    least, more = divmod(len(pieces), len(parts))
    sizes = [least + (k < more) for k in range(len(parts))]
    starts = [sum(sizes[:k]) for k in range(len(sizes))]
    return [pieces[start : start + size] for start, size in zip(starts, sizes, strict=True)]
