"""Weighed masses: what was put on a scale takes the place of what was calculated, and both are shown. Rank 4."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from takeoff.findings import Finding
from takeoff.provenance import Source
from takeoff.weighing.basis import Basis
from takeoff.weighing.work import WORDS, Work

if TYPE_CHECKING:
    from takeoff.weighing.work import Floats

_TOTAL = re.compile(r"\b(?:total|sum|all|gesamt\w*|summe|totale?|totaal|lacznie|razem)\b", re.IGNORECASE)


def take(work: Work) -> None:
    """Use the weighed mass column: of one piece, or of the row where its heading says total.

    A weighing is of the piece as it hung, additions and all: its row has none beside it. A weighing outside our bounds is
    said. Refused rows stay refused where their quantity is not known.
    """
    import numpy as np

    if "weighed_kg" not in work.frame:
        return
    weighed = _each(work, work.frame["weighed_kg"].to_numpy(dtype=float))
    use = weighed > 0
    bad = ~np.isnan(weighed) & ~use
    work.say(Finding("note", "weighing-not-used", "a weighed mass of zero or less is not used", right="the mass on the scale"),
             np.flatnonzero(bad), "weighed_mass")
    if not use.any():
        return
    accuracy = work.job.masses.weighing_accuracy_percent / 100
    calculated = (work.each("light"), work.each("nominal"), work.each("heavy"))
    calculated = tuple(np.where(use, c, np.nan) for c in calculated)  # type: ignore[assignment]
    slack = 1e-9 * weighed
    with np.errstate(invalid="ignore"):
        outside = use & ((weighed * (1 + accuracy) < calculated[0] - slack) | (weighed * (1 - accuracy) > calculated[2] + slack))
    for i in np.flatnonzero(outside).tolist():
        light, heavy = calculated[0][i], calculated[2][i]
        read, right = f"{weighed[i]:.6g} kg", f"{light:.6g} to {heavy:.6g} kg"
        message = f"weighed at {read}, outside the calculated {right}: one of the two is wrong"
        work.say(Finding("note", "weighed-outside-bounds", message, read=read, right=right), [i], "weighed_mass")
    work.weighed_kg[use] = weighed[use]
    work.calculated = calculated
    work.on_scale = use
    for word, factor in zip(WORDS, (1 - accuracy, 1.0, 1 + accuracy), strict=True):
        getattr(work, word)[use] = weighed[use] * factor
        for addition in work.additions.values():
            getattr(addition, word)[use] = 0.0
    for addition in work.additions.values():
        addition.basis[use] = -1
    work.additions = {kind: addition for kind, addition in work.additions.items() if (addition.basis >= 0).any()}
    work.finish_open[use] = False
    work.contents_open[use] = False
    within = f"±{accuracy * 100:g} % (accuracy in the job file)" if accuracy else "no bounds: the job file names no accuracy"
    source = Source("the member list's weighed masses", "weighed mass column", "read")
    work.basis_of[use] = work.basis_id(Basis("weighed", source, within, source, weighed=True))


def _each(work: Work, typed: Floats) -> Floats:
    """The weighed mass of one piece: a total is shared out over the row's pieces."""
    import numpy as np

    columns = [table.columns.get("weighed_mass") for table in work.members.log.tables]
    totals = [column is not None and _TOTAL.search(column.text) is not None for column in columns]
    if not any(totals):
        return typed
    of_all = np.array(totals, dtype=bool)[np.asarray(work.members.log.table_of, dtype=np.int64)]
    shared: Floats = np.where(of_all, typed / work.quantity, typed)
    return shared
