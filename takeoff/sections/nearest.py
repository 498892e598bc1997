"""The nearest real designations to a text that names none: offered, never taken. Rank 2.

Within a family nearness is by the numbers, since spelling is blind to them; without a family, by the same numbers in
any family and by spelling with the same digits.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from functools import cache

from takeoff.names import NormalName, digits_of, normal_name, squeezed, suggest
from takeoff.sections import catalogue
from takeoff.sections.section import Candidate

LIMIT = 5


def in_families(families: Sequence[str], variant: str, numbers: Sequence[float], limit: int = LIMIT) -> tuple[Candidate, ...]:
    """The rows of these families whose numbers are nearest, best first."""
    found: dict[str, float] = {}
    for family in families:
        for designation, own_variant, own in _numbers(family):
            away = _distance(numbers, own) + (0.05 if own_variant != variant else 0.0)
            if designation not in found or away < found[designation]:
                found[designation] = away
    # A number left out leaves many rows equally near: more of them are worth showing.
    limit = limit if len(numbers) >= 3 or not numbers else 2 * limit
    best = sorted(found.items(), key=lambda item: item[1])[:limit]
    return tuple(Candidate(name, round(100 * math.exp(-away), 1)) for name, away in best)


@cache
def _numbers(family: str) -> tuple[tuple[str, str, tuple[float, ...]], ...]:
    """Designation, variant and numbers of every row of a family."""
    return tuple((row.designation, row.key[1], tuple(float(n) for n in row.key[2])) for row in catalogue.rows(family))


@cache
def _by_digits() -> dict[tuple[str, ...], dict[NormalName, str]]:
    """Every designation under the digits of its name, since only the same digits may be suggested."""
    found: dict[tuple[str, ...], dict[NormalName, str]] = {}
    for family in catalogue.FAMILIES:
        for row in catalogue.rows(family):
            name = normal_name(squeezed(normal_name(row.designation)))
            found.setdefault(digits_of(name), {}).setdefault(name, row.designation)
    return found


@cache
def _with_numbers() -> dict[tuple[str, ...], list[str]]:
    """Designations of every family under their numbers."""
    found: dict[tuple[str, ...], list[str]] = {}
    for family in catalogue.FAMILIES:
        for row in catalogue.rows(family):
            found.setdefault(row.key[2], []).append(row.designation)
    return found


def _distance(asked: Sequence[float], own: Sequence[float]) -> float:
    """How far the numbers are apart: by ratio, an equal number counting for much, a missing one against."""
    if not asked:
        return 1.0
    if len(asked) == 2 and len(own) == 3:
        # 50x5 stands for 50x50x5, and 50x50 for 50x50 with its thickness left out.
        short = _apart(asked, (own[0], own[2])) if own[0] == own[1] else 9.0
        return min(short, _apart(asked, own[:2]) + 0.5)
    count = min(len(asked), len(own))
    return _apart(asked[:count], own[:count]) + 0.15 * abs(len(asked) - len(own))


def _apart(asked: Sequence[float], own: Sequence[float]) -> float:
    ratios = [abs(math.log(max(a, 1e-6) / b)) for a, b in zip(asked, own, strict=True)]
    return sum(min(r, 1.0) + 0.1 * r + (0.2 if r > 1e-9 else 0.0) for r in ratios)


def anywhere(text: str, numbers: tuple[str, ...], limit: int = LIMIT) -> tuple[Candidate, ...]:
    """Rows of any family with exactly these numbers, then rows spelt alike with the same digits."""
    found: dict[str, float] = dict.fromkeys(_with_numbers().get(numbers, []), 80.0) if numbers else {}
    query = normal_name(squeezed(normal_name(text))[:80])
    names = _by_digits().get(digits_of(query), {})
    for suggestion in suggest(query, list(names), floor=60, limit=limit):
        name = names[suggestion.name]
        found[name] = max(found.get(name, 0.0), suggestion.score)
    best = sorted(found.items(), key=lambda item: -item[1])[:limit]
    return tuple(Candidate(name, score) for name, score in best)


def unique(candidates: Iterable[Candidate], limit: int = LIMIT) -> tuple[Candidate, ...]:
    seen: dict[str, Candidate] = {}
    for c in candidates:
        seen.setdefault(c.designation, c)
    return tuple(list(seen.values())[:limit])
