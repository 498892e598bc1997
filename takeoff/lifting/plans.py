"""Which pieces make which pick. Rank 6.

Picks come from the job file, else from the list's pick column, else from its assemblies; what the job file leaves of a
listed pick stays a pick of its own, so that no piece is lost. Loose pieces are bundled where the job file sets a limit.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff import bundles
from takeoff.errors import JobError
from takeoff.job import Job, PickPart
from takeoff.names import first_twice

if TYPE_CHECKING:
    import pandas as pd


@dataclass(frozen=True, slots=True)
class Plan:
    """What one pick is to hold: rows (positions in the frame) with how many pieces of each, None for all of a row."""

    name: str
    rows: tuple[tuple[int, int | None], ...]
    asked: PickPart | None = None
    listed: str | None = None


def plans(members: pd.DataFrame, job: Job) -> list[Plan]:
    """The picks of a weighed frame, in order. Raises JobError where the job file's picks do not fit the list."""
    column = "pick" if members["pick"].notna().any() else "assembly"
    listed: dict[str, list[int]] = {}
    for i, name in enumerate(members[column].tolist()):
        if isinstance(name, str):
            listed.setdefault(name, []).append(i)
    asked = {p.name: p for p in job.lift.picks}
    taken: set[int] = set()
    found: list[Plan] = []
    for part in job.lift.picks:
        if part.marks or part.assemblies:
            rows = _named_rows(members, part, job)
            found.append(Plan(part.name, tuple((i, None) for i in rows), part))
            taken.update(rows)
        elif part.name not in listed:
            raise JobError(
                f"lift.picks: the list has no {column} of this name",
                file=job.path,
                read=part.name,
                right="marks or assemblies of the pick, or one of " + ", ".join(list(listed)[:20]),
            )
    for name, rows in listed.items():
        left = [i for i in rows if i not in taken]
        part_of = asked.get(name)
        if not left or (part_of is not None and (part_of.marks or part_of.assemblies)):
            continue
        whole = len(left) == len(rows)
        found.append(
            Plan(name if whole else f"{name} (rest)", tuple((i, None) for i in left), part_of if whole else None, name if whole else None)
        )
    return found + _bundles(members, job, {i for plan in found for i, _ in plan.rows})


def _named_rows(members: pd.DataFrame, part: PickPart, job: Job) -> list[int]:
    """The rows of a pick's marks and assemblies, in the list's order."""
    found: set[int] = set()
    for column, names in (("mark", part.marks), ("assembly", part.assemblies)):
        texts = members[column].tolist()
        for name in names:
            rows = [i for i, text in enumerate(texts) if text == name]
            if not rows:
                raise JobError(f"lift.picks: pick {part.name!r} names {'an assembly' if names is part.assemblies else 'a mark'} not there",
                               file=job.path, read=name)  # fmt: skip
            found.update(rows)
    return sorted(found)


def _bundles(members: pd.DataFrame, job: Job, taken: set[int]) -> list[Plan]:
    limit = job.transport.max_bundle_kg
    if not limit:
        return []
    section, length, quantity, heavy, status = (
        members[name].tolist() for name in ("section", "length_mm", "quantity", "each_heavy_kg", "status")
    )
    loose = [
        bundles.Loose(i, str(section[i] or "pieces"), float(length[i]), int(quantity[i]), float(heavy[i]))
        for i in range(len(members))
        if i not in taken and status[i] != "not weighed"
    ]
    return [Plan(b.name, tuple((i, None if n == int(quantity[i]) else n) for i, n in b.pieces)) for b in bundles.bundle_up(loose, limit)]


def check_names(job: Job) -> None:
    """Names in the job file that must be each once, and names that must be there. Raises JobError."""
    for key, names in (("lift.picks", [p.name for p in job.lift.picks]), ("crane", [c.name for c in job.crane])):
        twice = first_twice(names)
        if twice is not None:
            raise JobError(f"{key}: two have one name", file=job.path, read=names[twice], right="each name once")
    known = [c.name for c in job.crane]
    for part in job.lift.picks:
        points = [p.name for p in part.points]
        if len(set(points)) < len(points):
            raise JobError(f"lift.picks: two points of pick {part.name!r} have one name", file=job.path, right="each name once")
        if part.slings_mm and len(part.slings_mm) not in (1, len(points)):
            raise JobError(
                f"lift.picks: pick {part.name!r} has {len(points)} points and {len(part.slings_mm)} sling lengths",
                file=job.path,
                right="one length for all, or one a point",
            )
        wanted = [name for c in part.cranes for name in c.points] + ([part.upend.head, part.upend.tail] if part.upend else [])
        for name in wanted:
            if name not in points:
                raise JobError(
                    f"lift.picks: pick {part.name!r} has no point of this name",
                    file=job.path,
                    read=name,
                    right="one of " + (", ".join(points) or "the points, of which there are none"),
                )
        carried = [name for c in part.cranes for name in c.points]
        if len(set(carried)) < len(carried):
            raise JobError(f"lift.picks: a point of pick {part.name!r} hangs on two cranes", file=job.path, right="each point on one crane")
        for c in part.cranes:
            if c.crane not in known:
                raise JobError(
                    f"lift.picks: pick {part.name!r} names a crane that is not there",
                    file=job.path,
                    read=c.crane,
                    right="one of " + (", ".join(str(k) for k in known) or "[[crane]] with a name"),
                )
