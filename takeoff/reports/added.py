"""What a run adds to the bare pieces, as outputs show it: which kinds, their figures, their bases. Rank 9."""

from __future__ import annotations

import json
from typing import TYPE_CHECKING, Any

from takeoff.reports.wording import listed, shown
from takeoff.weighing.additions import KINDS

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.pipeline import Result

WORDS = ("light", "nominal", "heavy")


def kinds(frame: pd.DataFrame) -> list[str]:
    """The kinds of addition this list has, in the order they are shown."""
    return [kind for kind in KINDS if f"add_{kind}_id" in frame]


def called(kind: str) -> str:
    """What an addition is called: finish, welds, bolts, contents ..."""
    return KINDS[kind]


def not_counted(result: Result) -> str:
    """What no figure counts, in words; where the list names some finishes itself, which finish is meant."""
    words = list(result.totals.not_counted)
    if "finish" in words and "finish" in result.totals.additions:
        words[words.index("finish")] = "finish other than that added"
    return listed(shown(word) for word in words)


def json_arrays(result: Result) -> list[str]:
    """The `additions` of each member as a JSON array: kind, mass_kg, rule, title, clause, evidence, bounds_rule."""
    frame = result.members
    arrays: list[list[str]] | None = None
    for kind in kinds(frame):
        if arrays is None:
            arrays = [[] for _ in range(len(frame))]
        bases = [_basis(result, number) for number in range(len(result.added_bases))]
        ids = frame[f"add_{kind}_id"].tolist()
        columns = [frame[f"add_{kind}_{word}_kg"].tolist() for word in WORDS]
        for entries, number, light, nominal, heavy in zip(arrays, ids, *columns, strict=True):
            if number >= 0:
                mass = f'{{"light": {light!r}, "nominal": {nominal!r}, "heavy": {heavy!r}}}'
                entries.append(f'{{"kind": "{kind}", "mass_kg": {mass}, {bases[number]}}}')
    if arrays is None:
        return ["[]"] * len(frame)
    return [f"[{', '.join(entries)}]" for entries in arrays]


def _basis(result: Result, number: int) -> str:
    basis = result.added_bases[number]
    record: dict[str, Any] = {"rule": basis.rule, **basis.nominal.as_record(), "bounds_rule": basis.bounds_rule}
    return json.dumps(record, ensure_ascii=True, separators=(", ", ": "))[1:-1]


def basis_numbers(result: Result) -> list[str | None]:
    """For each member the numbers of its additions' bases, ``A1, A3``; None where it has none."""
    frame = result.members
    found: list[list[str]] = [[] for _ in range(len(frame))]
    for kind in kinds(frame):
        for entries, number in zip(found, frame[f"add_{kind}_id"].tolist(), strict=True):
            if number >= 0:
                entries.append(f"A{number + 1}")
    return [", ".join(entries) or None for entries in found]


def uses(result: Result) -> list[int]:
    """How many members rest on each of the additions' bases."""
    counts = [0] * len(result.added_bases)
    for kind in kinds(result.members):
        for number in result.members[f"add_{kind}_id"].tolist():
            if number >= 0:
                counts[number] += 1
    return counts
