"""One weighing in progress: the arrays being filled, one entry a member, and what every step of it shares. Rank 4.

The steps (`computed`, `holes`, `stated`, `additions`, `scale`) each fill or change some of these arrays; `states` makes
a frame of them in the end.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lists.members import Members
from takeoff.lists.recognise import Recognition
from takeoff.weighing.basis import Basis
from takeoff.weighing.measured import Measured

if TYPE_CHECKING:
    import numpy as np

    from takeoff.lists.tables import Table
    from takeoff.materials import Material
    from takeoff.sections import Section

    Floats = np.ndarray[Any, np.dtype[np.float64]]
    Ints = np.ndarray[Any, np.dtype[np.int64]]
    Flags = np.ndarray[Any, np.dtype[np.bool_]]

#: piece sizes a member row may give, in the order `pieces.columns` takes them
SIZES = ("length", "width", "thickness", "height", "diameter")
WORDS = ("light", "nominal", "heavy")


@dataclass(slots=True)
class Addition:
    """What is added to the bare pieces under one kind, kg a piece, and on which basis (index, -1 where nothing)."""

    light: Floats
    nominal: Floats
    heavy: Floats
    basis: Ints


class Work:
    """The arrays of one weighing. Masses are of one piece, kg; NaN where not known."""

    def __init__(self, members: Members, recognised: Sequence[Recognition], codes: Sequence[int], job: Job) -> None:
        import numpy as np

        self.members, self.recognised, self.job = members, recognised, job
        self.frame = members.frame
        self.codes = np.asarray(codes, dtype=np.int64)
        count = len(self.frame)
        self.count = count
        self.quantity: Floats = self.frame["quantity"].to_numpy(dtype=float)
        self.volume_mm3: Floats = np.full(count, np.nan)
        self.surface_mm2: Floats = np.full(count, np.nan)
        self.light, self.nominal, self.heavy = (np.full(count, np.nan) for _ in range(3))
        self.basis_of: Ints = np.full(count, -1, dtype=np.int64)
        self.section_of: Ints = np.full(count, -1, dtype=np.int64)
        self.material_of: Ints = np.full(count, -1, dtype=np.int64)
        self.reasons: dict[int, str] = {}
        self.bases: list[Basis] = []
        self.sections: list[Section] = []
        self.materials: list[Material] = []
        self._basis_ids: dict[Basis, int] = {}
        self.sizes: dict[str, Floats] = {name: self.frame[f"{name}_mm"].to_numpy(dtype=float, copy=True) for name in SIZES}
        self.measured = Measured(self.frame, job, members.log)
        #: rows whose mass is the list's own statement, and rows that were put on a scale
        self.stated_used: Flags = np.zeros(count, dtype=bool)
        self.on_scale: Flags = np.zeros(count, dtype=bool)
        #: part of the volume that bevelled ends take away
        self.cut_share: Floats = np.zeros(count)
        #: part of the volume that openings and round holes take away
        self.round_share: Floats = np.zeros(count)
        self.opening_share: Floats = np.zeros(count)
        #: kind -> what it adds; `added_bases` are their bases
        self.additions: dict[str, Addition] = {}
        self.added_bases: list[Basis] = []
        #: rows that name a finish, or contents, which could not be added
        self.finish_open: Flags = np.zeros(count, dtype=bool)
        self.contents_open: Flags = np.zeros(count, dtype=bool)
        #: the list's own mass of one piece, the weighed one, and ours where the weighed one replaced it
        self.claimed_kg: Floats = np.full(count, np.nan)
        self.weighed_kg: Floats = np.full(count, np.nan)
        self.calculated: tuple[Floats, Floats, Floats] | None = None
        #: rows whose stated mass may be of one piece or of all
        self.mass_open: Flags = np.zeros(count, dtype=bool)
        #: (list, field) -> decimals that its column of numbers is written with
        self.usual_decimals: dict[tuple[int, str], int] = {}
        #: rows of which an addition was inferred
        self.assumed_rows: set[int] = set()

    def basis_id(self, basis: Basis) -> int:
        number = self._basis_ids.setdefault(basis, len(self._basis_ids))
        if number == len(self.bases):
            self.bases.append(basis)
        return number

    def set_mass(self, rows: Ints, masses: tuple[Floats, Floats, Floats], basis: Basis) -> None:
        """Light, nominal and heavy of these rows, and the basis of those that got one."""
        import numpy as np

        self.light[rows], self.nominal[rows], self.heavy[rows] = masses
        known = rows[~np.isnan(masses[1])]
        self.basis_of[known] = self.basis_id(basis)

    def added_basis_id(self, basis: Basis) -> int:
        if basis not in self.added_bases:
            self.added_bases.append(basis)
        return self.added_bases.index(basis)

    def add(self, kind: str, rows: Ints, masses: tuple[Floats, Floats, Floats], basis: Basis) -> None:
        """Add kg a piece to these rows under a kind, in order light <= nominal <= heavy."""
        import numpy as np

        known = ~(np.isnan(masses[0]) | np.isnan(masses[1]) | np.isnan(masses[2]))
        if not known.any():
            return
        found = self.additions.get(kind)
        if found is None:
            light, nominal, heavy = (np.zeros(self.count) for _ in range(3))
            found = self.additions[kind] = Addition(light, nominal, heavy, np.full(self.count, -1, dtype=np.int64))
        rows = rows[known]
        light, nominal, heavy = (m[known] for m in masses)
        nominal = np.maximum(light, nominal)
        found.light[rows] += light
        found.nominal[rows] += nominal
        found.heavy[rows] += np.maximum(nominal, heavy)
        found.basis[rows] = self.added_basis_id(basis)

    def each(self, word: str) -> Floats:
        """Bare mass and additions of one piece, for ``light``, ``nominal`` or ``heavy``."""
        total: Floats = getattr(self, word).copy()
        for addition in self.additions.values():
            total += getattr(addition, word)
        return total

    def say(self, finding: Finding, rows: Iterable[int], field: str | None) -> None:
        listed = rows.tolist() if hasattr(rows, "tolist") else list(rows)
        self.members.log.add(finding, listed, field)

    def texts(self, field: str) -> list[tuple[str, Ints]]:
        """Each distinct text of a text column, with the rows that hold it, in order of first appearance."""
        import numpy as np
        import pandas as pd

        if field not in self.frame:
            return []
        codes, names = pd.factorize(self.frame[field])
        if not len(names):
            return []
        filled = np.flatnonzero(codes >= 0)
        order = filled[np.argsort(codes[filled], kind="stable")]
        starts = np.searchsorted(codes[order], np.arange(len(names) + 1))
        return [(str(name), order[starts[i]:starts[i + 1]]) for i, name in enumerate(names) if str(name).strip()]

    def text(self, row: int, column: str) -> str | None:
        """One text of one member; None where it is blank."""
        value = self.frame[column].iat[row]
        return value if isinstance(value, str) else None

    def of_section(self, values: Sequence[float]) -> Floats:
        """A figure of each section, laid out over the members; NaN where a member has no section."""
        import numpy as np

        laid: Floats = np.array([*values, np.nan], dtype=float)[self.section_of]
        return laid

    def of_material(self, values: Sequence[bool]) -> Flags:
        import numpy as np

        laid: Flags = np.array([*values, False], dtype=bool)[self.material_of]
        return laid

    def table_of(self, row: int) -> Table | None:
        """The list a member stands in; None where members were made without one."""
        log = self.members.log
        return log.tables[log.table_of[row]] if log.tables else None
