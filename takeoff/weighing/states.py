"""Every member's state (weighed, assumed, not weighed) with its reason, and the frame that holds the outcome. Rank 4."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding
from takeoff.weighing import handling, stated
from takeoff.weighing.work import SIZES, WORDS, Work

if TYPE_CHECKING:
    import numpy as np
    import pandas as pd


def frame_of(work: Work) -> pd.DataFrame:
    """The members' frame with all that weighing found (columns: see `takeoff.weighing.masses.Weighed`)."""
    import numpy as np
    import pandas as pd

    _name_reasons(work)
    refused = np.isnan(work.nominal) | np.isnan(work.quantity)
    refused[list(work.members.refused)] = True
    unhealed = np.array([i for i in work.reasons if np.isnan(work.nominal[i])], dtype=np.int64)
    refused[unhealed] = True
    status = np.full(work.count, "weighed", dtype=object)
    status[_assumed(work)] = "assumed"
    status[refused] = "not weighed"
    reasons = np.full(work.count, None, dtype=object)
    for i in np.flatnonzero(refused).tolist():
        reasons[i] = work.members.refused.get(i) or work.reasons.get(i) or "no mass follows from what the row says"
    for array in (work.light, work.nominal, work.heavy):
        array[refused] = np.nan
    work.basis_of[refused] = -1
    volume = work.volume_mm3 * 1e-9 * (1.0 - work.round_share - work.opening_share) * (1.0 - work.cut_share)
    columns: dict[str, Any] = {
        "section": _names(work, work.section_of, [s.designation for s in work.sections], "section_text"),
        "material": _names(work, work.material_of, [m.name for m in work.materials], "material_text"),
        "section_match": _matches(work, "section_match"), "material_match": _matches(work, "material_match"),
        "section_id": work.section_of, "material_id": work.material_of, "basis_id": work.basis_of,
        "status": status, "reason": reasons,
        "volume_m3": np.where(np.isnan(volume), work.frame["stated_volume_m3"].to_numpy(dtype=float), volume),
        "surface_m2": work.surface_mm2 * 1e-6,
        "claimed_each_kg": work.claimed_kg, "weighed_each_kg": work.weighed_kg,
        "finish_open": work.finish_open & ~refused, "contents_open": work.contents_open & ~refused,
    }
    for word in WORDS:
        each = work.each(word)
        columns[f"bare_{word}_kg"] = getattr(work, word)
        columns[f"each_{word}_kg"] = each
        columns[f"total_{word}_kg"] = each * work.quantity
        for kind, addition in work.additions.items():
            columns[f"add_{kind}_{word}_kg"] = np.where(refused, np.nan, getattr(addition, word))
    for kind, addition in work.additions.items():
        columns[f"add_{kind}_id"] = np.where(refused, -1, addition.basis)
    if work.calculated is not None:
        columns |= {f"calculated_{word}_kg": values for word, values in zip(WORDS, work.calculated, strict=True)}
    columns["handling"] = handling.marks(columns["each_heavy_kg"], work.job.masses.hand_kg)
    columns |= {f"{name}_mm": work.sizes[name] for name in SIZES}
    # Texts stay plain objects (a million of them are then shared, not copied), and the members' own columns are not copied.
    index = work.frame.index
    made = {name: pd.Series(v, index, object if v.dtype == object else None, copy=False) for name, v in columns.items()}
    given = {str(name): work.frame[name] for name in work.frame.columns}
    frame = pd.DataFrame({**given, **made}, copy=False)
    _soften(work, refused)
    return frame


def _assumed(work: Work) -> list[int]:
    """Members of which something that their mass rests on was inferred."""
    import numpy as np

    by_texts = np.array([r.assumed for r in work.recognised] or [False], dtype=bool)
    texts = by_texts[work.codes] & ~work.stated_used & ~work.on_scale if work.count else np.zeros(0, dtype=bool)
    listed = set(np.flatnonzero(texts).tolist()) | {i for i in work.assumed_rows if not work.on_scale[i]}
    from_list, from_scale, from_sizes = {"quantity", *stated.RULES}, {"quantity", "weighed_mass"}, {"quantity", *SIZES}
    for i, fields in work.members.assumed.items():
        if fields & (from_scale if work.on_scale[i] else from_list if work.stated_used[i] else from_sizes):
            listed.add(i)
    return sorted(listed)


def _name_reasons(work: Work) -> None:
    """For every member without a mass, the first reason, and the finding that says it with its cell."""
    import numpy as np

    missing: dict[tuple[str, str], list[int]] = {}
    for i in np.flatnonzero(np.isnan(work.nominal)).tolist():
        found = work.recognised[work.codes[i]]
        unread = work.members.unread.get(i, {})
        refusal, field = (found.section_refusal, "section") if found.section_refusal else (found.material_refusal, "material")
        if i in work.members.refused:
            continue
        if refusal is not None and field not in unread:
            work.members.log.add(refusal, [i], field)
            work.reasons[i] = refusal.message + (f" ({refusal.read})" if refusal.read else "")
        elif i in work.reasons:
            name = work.reasons[i].removeprefix("the ").removesuffix(" is missing")
            if name in SIZES and name not in unread:
                missing.setdefault((name, work.reasons[i]), []).append(i)
            elif name in unread:
                work.reasons[i] = unread[name]
        elif unread:
            work.reasons[i] = next(iter(unread.values()))
    for (name, message), rows in missing.items():
        work.members.log.add(Finding("refused", "missing-size", message, right=f"a {name}"), rows, name)


def _soften(work: Work, refused: np.ndarray[Any, Any]) -> None:
    """A refusal of one cell is only a note where the row was weighed all the same."""
    entries = []
    for entry in work.members.log.entries:
        weighed = [] if entry.finding.level != "refused" else [i for i in entry.members if not refused[i]]
        if not weighed:
            entries.append(entry)
            continue
        kept = [i for i in entry.members if refused[i]]
        if kept:
            entries.append(replace(entry, members=kept))
        entries.append(replace(entry, finding=replace(entry.finding, level="note"), members=weighed))
    work.members.log.entries[:] = entries


def _names(work: Work, ids: np.ndarray[Any, Any], names: list[str], text_column: str) -> np.ndarray[Any, Any]:
    """Canonical names where recognised, else the list's own text."""
    import numpy as np

    known = np.array([*names, None], dtype=object)[ids]
    chosen: np.ndarray[Any, Any] = np.where(ids >= 0, known, work.frame[text_column].to_numpy(dtype=object))
    return chosen


def _matches(work: Work, attribute: str) -> np.ndarray[Any, Any]:
    import numpy as np

    if not work.recognised:
        return np.zeros(0, dtype=object)
    values: np.ndarray[Any, Any] = np.array([getattr(r, attribute) for r in work.recognised], dtype=object)[work.codes]
    return values
