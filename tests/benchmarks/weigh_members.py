"""How many members a second are weighed, plain and with additions: `python tests/benchmarks/weigh_members.py [COUNT]`."""

from __future__ import annotations

import sys
import time

import numpy as np
import pandas as pd

from takeoff.job import job_from
from takeoff.lists.log import FindingLog
from takeoff.lists.members import NUMBER_COLUMNS, Members
from takeoff.lists.recognise import Recogniser
from takeoff.weighing.masses import weigh

THINGS = [
    ("UB 203x133x25", "S355"), ("PL 10", "S275"), ("SHS 80x80x5", "S355"), ("FL 50x10", "S275"), ("Board 45x145", "C24"),
    ("Block 600x400x300", "granite"),
]
TEXTS = ("file", "sheet", "mark", "assembly", "pick", "phase", "run", "bundle", "finish", "contents", "remarks", "holes", "insulation")


def members(count: int, *, additions: bool) -> Members:
    """Invented members of few distinct combinations, plates 200 wide, lengths at random."""
    kind = np.arange(count) % len(THINGS)
    blank = pd.Series([None] * count, dtype=object)
    columns: dict[str, object] = dict.fromkeys(TEXTS, blank) | dict.fromkeys(NUMBER_COLUMNS.values(), np.full(count, np.nan))
    for name, texts in (("section_text", [s for s, _ in THINGS]), ("material_text", [m for _, m in THINGS])):
        columns[name] = pd.Series(np.array(texts, dtype=object)[kind], dtype=object)
    columns["section_heading"] = pd.Series(["Section"] * count, dtype=object)
    columns |= {"row": np.arange(count), "quantity": np.full(count, 2.0)}
    columns["length_mm"] = np.random.default_rng(1).uniform(500, 12_000, count)
    columns["width_mm"] = np.where(kind == 1, 200.0, np.nan)
    if additions:
        finishes = np.array(["galvanized", "paint 240 um", "none", "zinc 85 um + paint 120 um"], dtype=object)
        columns["finish"] = pd.Series(finishes[np.arange(count) % 4], dtype=object)
        columns["contents"] = pd.Series(np.where(kind == 2, "60 % water", None), dtype=object)
        columns["holes"] = pd.Series(np.where(kind == 1, "4x22", None), dtype=object)
    return Members(pd.DataFrame(columns), [], FindingLog([], [0] * count, list(range(count))), {}, {}, {})


def main(count: int) -> None:
    for additions in (False, True):
        job = job_from({"masses": {"weld_percent": 2.0}} if additions else {})
        made = members(count, additions=additions)
        texts = [made.frame[name].tolist() for name in ("section_text", "material_text", "section_heading")]
        recognised, codes = Recogniser(job).all(*texts)
        start = time.perf_counter()
        weigh(made, recognised, codes, job)
        seconds = time.perf_counter() - start
        what = "with finish, contents, holes and welds" if additions else "plain"
        sys.stdout.write(f"{count:,} members, {what}: {seconds:.2f} s, {count / seconds:,.0f} a second\n")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 1_000_000)
