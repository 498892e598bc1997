"""From members to masses, step by step: computed, cuts, holes, stated, additions, the list's figures compared, the scale. Rank 4.

What cannot be computed is taken as the list states it, else it is not weighed, with the reason. Additions (finish, welds,
bolts, contents, insulation, water) stand in columns of their own; a weighed mass takes the place of all of it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from takeoff.job import Job
from takeoff.lists.members import Members
from takeoff.lists.recognise import Recognition
from takeoff.weighing import additions, computed, counted, cuts, holes, scale, stated, states
from takeoff.weighing.basis import Basis
from takeoff.weighing.work import Work

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.materials import Material
    from takeoff.sections import Section


@dataclass(slots=True)
class Weighed:
    """Members with their masses. `frame` has, beside what `Members.frame` has: section, material (canonical names),
    section_match, material_match, section_id, material_id, basis_id, status, reason, volume_m3 and surface_m2 of one
    piece; bare_light_kg .. bare_heavy_kg, for each kind of addition in the list add_KIND_light_kg .. add_KIND_heavy_kg and
    add_KIND_id (index into `added_bases`, -1 where nothing), each_light_kg .. each_heavy_kg (bare and additions) of one
    piece, total_light_kg .. total_heavy_kg of all; claimed_each_kg (as the list states it), weighed_each_kg (on a scale),
    calculated_light_kg .. calculated_heavy_kg (ours, where something was weighed); handling; finish_open and
    contents_open (named, but not added).
    """

    frame: pd.DataFrame
    sections: list[Section]
    materials: list[Material]
    bases: list[Basis]
    added_bases: list[Basis]
    not_counted: tuple[str, ...]


def weigh(members: Members, recognised: Sequence[Recognition], codes: Sequence[int], job: Job) -> Weighed:
    """Weigh every member. `recognised[codes[i]]` is what member i is. Raises JobError on a finish no one understands."""
    work = Work(members, recognised, codes, job)
    computed.compute(work)
    cuts.deduct(work)
    holes.deduct(work)
    claims = stated.claims_of(work)
    stated.use(work, claims)
    additions.add_all(work)
    stated.compare(work, claims)
    scale.take(work)
    frame = states.frame_of(work)
    return Weighed(frame, work.sections, work.materials, work.bases, work.added_bases, counted.not_counted(job, members.tables))
