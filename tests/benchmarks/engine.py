"""The engine alone: recognise, weigh, bound. `python tests/benchmarks/engine.py`.

Limits: 500,000 members a second on 1,000,000 members in under 3 GB; ten times the members in at most eleven times the
time; on 100,000 members at least 20 times as fast as a row loop with a pint quantity a row, which is what a user would
write for the same step. Reading and writing are left out on both sides.
"""

from __future__ import annotations

import resource
import statistics
import sys
import time
from pathlib import Path

from weigh_members import members

from takeoff.job import Job
from takeoff.lists.recognise import Recogniser
from takeoff.weighing.masses import weigh

LEAST_A_SECOND, MOST_MB, MOST_GROWTH, LEAST_TIMES = 500_000, 3000, 11.0, 20.0
ROUNDS = 3


def ours(count: int) -> float:
    """Seconds to recognise, weigh and bound so many members."""
    made, job = members(count, additions=False), Job()
    started = time.perf_counter()
    texts = [made.frame[name].tolist() for name in ("section_text", "material_text", "section_heading")]
    recognised, codes = Recogniser(job).all(*texts)
    weigh(made, recognised, codes, job)
    return time.perf_counter() - started


def with_pint(count: int) -> float:
    """Seconds of a loop that makes a pint quantity of each row, with the figures already looked up for it."""
    import pint

    unit = pint.UnitRegistry()
    made = members(count, additions=False)
    per_metre = dict(zip(sorted(set(made.frame["section_text"])), (25.1, 7.85, 11.3, 3.9, 3.3, 648.0), strict=True))
    started = time.perf_counter()
    masses = []
    for section, length, quantity in zip(made.frame["section_text"], made.frame["length_mm"], made.frame["quantity"], strict=True):
        mass = (length * unit.mm).to("m") * (per_metre[section] * unit.kg / unit.m) * quantity
        masses.append((0.96 * mass, mass, 1.04 * mass))
    return time.perf_counter() - started


def main() -> bool:
    ours(1000)
    small = statistics.median(ours(100_000) for _ in range(ROUNDS))
    large = statistics.median(ours(1_000_000) for _ in range(ROUNDS))
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1000
    loop = with_pint(100_000)
    print(f"1,000,000 members: {large:.2f} s, {1e6 / large:,.0f} a second (at least {LEAST_A_SECOND:,})")
    print(
        f"  memory {memory:,.0f} MB (limit {MOST_MB:,}); ten times the members take {large / small:.1f} times the time (limit {MOST_GROWTH})"  # noqa: E501
    )
    print(
        f"100,000 members: {small:.3f} s, with a pint quantity a row {loop:.2f} s: {loop / small:.0f} times as fast (at least {LEAST_TIMES:g})"  # noqa: E501
    )
    return 1e6 / large >= LEAST_A_SECOND and memory <= MOST_MB and large / small <= MOST_GROWTH and loop / small >= LEAST_TIMES


if __name__ == "__main__":
    sys.path.insert(0, str(Path(__file__).parent))
    sys.exit(not main())
