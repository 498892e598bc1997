"""Volume, mass (light / nominal / heavy) and surface of every member, worked on columns.

Nominal of a tabulated section is its published kg/m for the material that table rests on; another material in that
shape is area × its density. Light and heavy come from the product standard's tolerance where one exists, else from the
dimension tolerance together with the material's density spread. What cannot be computed is taken as the list states it,
else it is not weighed, with the reason.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding
from takeoff.job import Job
from takeoff.lists.members import Members
from takeoff.lists.recognise import Recognition
from takeoff.provenance import Source
from takeoff.weighing import stated
from takeoff.weighing.basis import Basis
from takeoff.weighing.rule import basis_of_mass, rule_for
from takeoff.weighing.wood import THICK_MM, WoodSpread, says_wet, wood_spread

if TYPE_CHECKING:
    import numpy as np
    import pandas as pd

    from takeoff.materials import Material
    from takeoff.sections import Section

    Floats = np.ndarray[Any, np.dtype[np.float64]]

#: piece sizes a member row may give, in the order `pieces.columns` takes them
SIZES = ("length", "width", "thickness", "height", "diameter")
#: a size typed twice may differ by this much before the two are two sizes
SAME_SIZE_MM, SAME_SIZE_SHARE = 0.5, 0.005


@dataclass(slots=True)
class Weighed:
    """Members with their masses. `frame` has, beside what `Members.frame` has: section, material (canonical names),
    section_match, material_match, section_id, material_id, basis_id, status, reason, volume_m3 and surface_m2 of one
    piece, bare_light_kg .. bare_heavy_kg and each_light_kg .. each_heavy_kg of one piece, total_light_kg .. total_heavy_kg.
    """

    frame: pd.DataFrame
    sections: list[Section]
    materials: list[Material]
    bases: list[Basis]


def weigh(members: Members, recognised: Sequence[Recognition], codes: Sequence[int], job: Job) -> Weighed:
    """Weigh every member. `recognised[codes[i]]` is what member i is."""
    work = _Work(members, recognised, codes, job)
    work.compute()
    work.take_stated()
    return work.finish()


class _Work:
    """One weighing: the arrays being filled, one entry a member."""

    def __init__(self, members: Members, recognised: Sequence[Recognition], codes: Sequence[int], job: Job) -> None:
        import numpy as np

        self.members, self.recognised, self.job = members, recognised, job
        self.frame = members.frame
        self.codes = np.asarray(codes, dtype=np.int64)
        count = len(self.frame)
        self.volume_mm3 = np.full(count, np.nan)
        self.surface_mm2 = np.full(count, np.nan)
        self.light, self.nominal, self.heavy = (np.full(count, np.nan) for _ in range(3))
        self.basis_of = np.full(count, -1, dtype=np.int64)
        self.section_of = np.full(count, -1, dtype=np.int64)
        self.material_of = np.full(count, -1, dtype=np.int64)
        self.reasons: dict[int, str] = {}
        self.used_fields: dict[str, np.ndarray[Any, Any]] = {}
        self.bases: list[Basis] = []
        self.sections: list[Section] = []
        self.materials: list[Material] = []
        self._basis_ids: dict[Basis, int] = {}
        self.sizes: dict[str, Floats] = {name: self.frame[f"{name}_mm"].to_numpy(dtype=float, copy=True) for name in SIZES}
        self.stated_used = np.zeros(count, dtype=bool)

    # --- computed masses ---------------------------------------------------------------------------------------------

    def compute(self) -> None:
        import numpy as np

        order = np.argsort(self.codes, kind="stable")
        starts = np.searchsorted(self.codes[order], np.arange(len(self.recognised) + 1))
        section_ids: dict[Section, int] = {}
        material_ids: dict[str, int] = {}
        for code, found in enumerate(self.recognised):
            rows = order[starts[code]:starts[code + 1]]
            for finding, field in found.notes:
                self.members.log.add(finding, rows.tolist(), field)
            if found.section is not None:
                number = section_ids.setdefault(found.section, len(section_ids))
                if number == len(self.sections):
                    self.sections.append(found.section)
                self.section_of[rows] = number
            if found.material is not None:
                number = material_ids.setdefault(found.material.key, len(material_ids))
                if number == len(self.materials):
                    self.materials.append(found.material)
                self.material_of[rows] = number
            if found.section is not None:
                self._compute_group(rows, found, found.section)

    def _compute_group(self, rows: np.ndarray[Any, Any], found: Recognition, section: Section) -> None:
        import numpy as np

        from takeoff.sections import pieces

        self._take_text_length(rows, found, section)
        rows = self._without_contradictions(rows, section)
        if not len(rows):
            return
        material = found.material
        sizes = {f"{name}_mm": self.sizes[name][rows] for name in SIZES}
        piece = pieces.columns(section, len(rows), **sizes, material_kind=material.kind if material else None)
        volume = piece["volume_mm3"]
        self.volume_mm3[rows] = volume
        self.surface_mm2[rows] = piece["surface_mm2"]
        missing = np.asarray(piece["missing"], dtype=object)
        for name in sorted({m for m in missing.tolist() if m}):
            for i in rows[missing == name].tolist():
                self.reasons.setdefault(i, f"the {name} is missing")
        if section.form in ("each", "length mass", "area mass"):
            mass = piece["mass_kg"]
            self._set(rows, mass * piece["light_factor"], mass, mass * piece["heavy_factor"], basis_of_mass(section))
            return
        if material is None or material.density.nominal is None:
            return
        for part, wood in self._by_wetness(rows, section, material):
            rule = rule_for(section, material, wood)
            chosen = rows[part]
            mass = volume[part] * rule.kg_per_mm3
            light, heavy = piece["light_factor"][part] * rule.low_share, piece["heavy_factor"][part] * rule.high_share
            self._set(chosen, mass * light, mass, mass * heavy, rule.basis)
            if wood is not None and self.job.masses.moisture_percent is None:
                self.members.log.add(Finding("note", "moisture-unknown", wood.why, right="[masses] moisture_percent in the job file"),
                                     chosen[~np.isnan(mass)].tolist(), "material")

    def _by_wetness(
        self, rows: np.ndarray[Any, Any], section: Section, material: Material
    ) -> list[tuple[np.ndarray[Any, Any], WoodSpread | None]]:
        """The rows of a group, parted by how wet their wood may be; one part for anything that is no wood."""
        import numpy as np

        everything = np.ones(len(rows), dtype=bool)
        if not material.is_wood:
            return [(everything, None)]
        across = [section.dimensions_mm.get(name) for name in ("thickness", "width")]
        sizes = [np.full(len(rows), typed) if typed else self.sizes[name][rows]
                 for name, typed in zip(("thickness", "width"), across, strict=True)]
        thick = np.nan_to_num(np.fmin(*sizes), nan=0.0) > THICK_MM
        texts = zip(*(self.frame[f"{name}_text"].to_numpy(dtype=object)[rows] for name in ("material", "section")), strict=True)
        wet = np.array([says_wet(*pair) for pair in texts], dtype=bool)
        parts = []
        for is_thick in (False, True):
            for is_wet in (False, True):
                part = (thick == is_thick) & (wet == is_wet)
                if part.any():
                    moisture = self.job.masses.moisture_percent
                    parts.append((part, wood_spread(material, wet_text=is_wet, thick=is_thick, moisture_percent=moisture)))
        return parts

    def _set(self, rows: np.ndarray[Any, Any], light: Floats, nominal: Floats, heavy: Floats, basis: Basis) -> None:
        import numpy as np

        self.light[rows], self.nominal[rows], self.heavy[rows] = light, nominal, heavy
        known = rows[~np.isnan(nominal)]
        self.basis_of[known] = self._basis_id(basis)

    def _basis_id(self, basis: Basis) -> int:
        number = self._basis_ids.setdefault(basis, len(self._basis_ids))
        if number == len(self.bases):
            self.bases.append(basis)
        return number

    def _take_text_length(self, rows: np.ndarray[Any, Any], found: Recognition, section: Section) -> None:
        """A length that the section text carries serves where the row has none; where the row repeats a size, it is used once."""
        import numpy as np

        if found.text_length_mm is None:
            return
        typed = self.sizes["length"][rows]
        blank = np.isnan(typed)
        self.sizes["length"][rows[blank]] = found.text_length_mm
        given = rows[blank].tolist()
        self.members.log.add(Finding("assumed", "size-given-twice", "the length is taken from the section text",
                                     read=f"{found.text_length_mm:g} mm"), given, "section")
        for i in given:
            self.members.assumed.setdefault(i, set()).add("length")
        across = [v for k, v in section.dimensions_mm.items() if k in ("width", "thickness")]
        repeats = np.zeros(len(rows), dtype=bool)
        for size in across:
            repeats |= _same(typed, np.full(len(rows), size))
        repeats &= ~_same(typed, np.full(len(rows), found.text_length_mm))
        self.sizes["length"][rows[repeats]] = found.text_length_mm
        clash = ~blank & ~repeats & ~_same(typed, np.full(len(rows), found.text_length_mm))
        self._refuse_clash(rows[clash], "length", f"{found.text_length_mm:g} mm")

    def _without_contradictions(self, rows: np.ndarray[Any, Any], section: Section) -> np.ndarray[Any, Any]:
        """Rows whose size columns do not contradict the sizes of a made-to-size section; the others are refused."""
        import numpy as np

        if section.published_kg_per_m is not None:
            # A tabulated section is named whole; a width column beside it may hold anything of it.
            clashes = np.array([i in self.reasons for i in rows.tolist()], dtype=bool)
            kept: np.ndarray[Any, Any] = rows[~clashes]
            return kept
        known = [v for v in section.dimensions_mm.values() if v]
        if section.thickness_mm:
            known.append(section.thickness_mm)
        for name in ("width", "thickness", "height", "diameter"):
            if name in section.needs or not known:
                continue
            typed = self.sizes[name][rows]
            fits = np.isnan(typed)
            for size in known:
                fits |= _same(typed, np.full(len(rows), size))
            self._refuse_clash(rows[~fits], name, section.designation)
        clear: np.ndarray[Any, Any] = rows[np.array([i not in self.reasons for i in rows.tolist()], dtype=bool)]
        return clear

    def _refuse_clash(self, rows: np.ndarray[Any, Any], field: str, read: str) -> None:
        if not len(rows):
            return
        message = f"the {field} in its column and the size in the section text differ"
        self.members.log.add(Finding("refused", "size-given-twice", message, read=read, right="one of the two"), rows.tolist(), field)
        for i in rows.tolist():
            self.reasons.setdefault(i, message)

    # --- stated masses -----------------------------------------------------------------------------------------------

    def take_stated(self) -> None:
        """Use the list's own masses where nothing could be computed, and compare them where something could."""
        import numpy as np

        claim = stated.claims(self.frame, self.sizes)
        use = np.isnan(self.nominal) & ~np.isnan(claim.each_kg)
        # A contradiction or an error in the row is not healed by a mass: only what could not be computed is.
        minus, plus = self.job.masses.stated_minus_percent, self.job.masses.stated_plus_percent
        self.light[use] = claim.each_kg[use] * (1 - minus / 100)
        self.nominal[use] = claim.each_kg[use]
        self.heavy[use] = claim.each_kg[use] * (1 + plus / 100)
        self.stated_used = use
        for field, rule in stated.RULES.items():
            rows = np.flatnonzero(use & (claim.field == field))
            if not len(rows):
                continue
            basis = Basis(
                rule, Source("the member list's own statement", stated.HEADINGS[field], "read"),
                f"stated mass: -{minus:g} % / +{plus:g} % (planning figures)",
                Source("planning figures for masses only stated", "", "common practice"), stated=True,
            )
            self.basis_of[rows] = self._basis_id(basis)
            self.members.log.add(Finding("note", "stated-mass", "the mass is the list's own statement"), rows.tolist(), field)
            assumed = [i for i in rows.tolist() if field in self.members.assumed.get(i, ())]
            self.members.log.add(Finding("assumed", "mass-unit-assumed", "a mass without a unit is used"), assumed, field)
        both = ~np.isnan(self.nominal) & ~use & ~np.isnan(claim.each_kg)
        self._compare(np.flatnonzero(both), claim)

    def _compare(self, rows: np.ndarray[Any, Any], claim: stated.Claims) -> None:
        """A stated mass that differs from ours is named, and the heavier of the two sets the heavy mass."""
        import numpy as np

        if not len(rows):
            return
        quantity = self.frame["quantity"].to_numpy(dtype=float)[rows]
        ours, theirs = self.nominal[rows], claim.each_kg[rows]
        apart = stated.differs(ours, theirs, quantity)
        for i, mine, given in zip(rows[apart].tolist(), ours[apart].tolist(), theirs[apart].tolist(), strict=True):
            self.members.log.add(
                Finding("note", "stated-mass-differs", f"the list states {given:.6g} kg each, ours is {mine:.6g} kg: "
                        f"the larger sets the heavy mass", read=f"{given:.6g} kg each", right=f"{mine:.6g} kg each"),
                [i], str(claim.field[i]),
            )
        self.heavy[rows[apart]] = np.maximum(self.heavy[rows[apart]], theirs[apart])

    # --- states and sums ---------------------------------------------------------------------------------------------

    def finish(self) -> Weighed:
        import numpy as np
        import pandas as pd

        count = len(self.frame)
        quantity = self.frame["quantity"].to_numpy(dtype=float)
        self._name_reasons()
        refused = np.isnan(self.nominal) | np.isnan(quantity)
        refused[list(self.members.refused)] = True
        refused[[i for i in self.reasons if np.isnan(self.nominal[i])]] = True
        status = np.full(count, "weighed", dtype=object)
        status[self._assumed()] = "assumed"
        status[refused] = "not weighed"
        reasons = np.full(count, None, dtype=object)
        for i in np.flatnonzero(refused).tolist():
            reasons[i] = self.members.refused.get(i) or self.reasons.get(i) or "no mass follows from what the row says"
        for array in (self.light, self.nominal, self.heavy):
            array[refused] = np.nan
        self.basis_of[refused] = -1
        columns = {
            "section": self._names(self.section_of, [s.designation for s in self.sections], "section_text"),
            "material": self._names(self.material_of, [m.name for m in self.materials], "material_text"),
            "section_match": self._matches("section_match"), "material_match": self._matches("material_match"),
            "section_id": self.section_of, "material_id": self.material_of, "basis_id": self.basis_of,
            "status": status, "reason": reasons,
            "volume_m3": self.volume_mm3 * 1e-9, "surface_m2": self.surface_mm2 * 1e-6,
        }
        stated_volume = self.frame["stated_volume_m3"].to_numpy(dtype=float)
        columns["volume_m3"] = np.where(np.isnan(columns["volume_m3"]), stated_volume, columns["volume_m3"])
        for word, each in (("light", self.light), ("nominal", self.nominal), ("heavy", self.heavy)):
            columns[f"bare_{word}_kg"] = each
            columns[f"each_{word}_kg"] = each
            columns[f"total_{word}_kg"] = each * quantity
        for name in SIZES:
            columns[f"{name}_mm"] = self.sizes[name]
        frame = self.frame.assign(**{name: pd.Series(values, index=self.frame.index) for name, values in columns.items()})
        self._soften(set(np.flatnonzero(~refused).tolist()))
        return Weighed(frame, self.sections, self.materials, self.bases)

    def _assumed(self) -> list[int]:
        """Members of which something that their mass rests on was inferred."""
        import numpy as np

        by_texts = np.array([r.assumed for r in self.recognised] or [False], dtype=bool)
        texts = by_texts[self.codes] & ~self.stated_used if len(self.codes) else np.zeros(0, dtype=bool)
        listed = set(np.flatnonzero(texts).tolist())
        for i, fields in self.members.assumed.items():
            relevant = fields & ({"quantity", *stated.RULES} if self.stated_used[i] else {"quantity", *SIZES})
            if relevant:
                listed.add(i)
        return sorted(listed)

    def _name_reasons(self) -> None:
        """For every member without a mass, the first reason, and the finding that says it with its cell."""
        import numpy as np

        missing: dict[tuple[str, str], list[int]] = {}
        for i in np.flatnonzero(np.isnan(self.nominal)).tolist():
            found = self.recognised[self.codes[i]]
            unread = self.members.unread.get(i, {})
            refusal, field = (found.section_refusal, "section") if found.section_refusal else (found.material_refusal, "material")
            if i in self.members.refused:
                continue
            if refusal is not None and field not in unread:
                self.members.log.add(refusal, [i], field)
                self.reasons[i] = refusal.message + (f" ({refusal.read})" if refusal.read else "")
            elif i in self.reasons:
                name = self.reasons[i].removeprefix("the ").removesuffix(" is missing")
                if name in SIZES and name not in unread:
                    missing.setdefault((name, self.reasons[i]), []).append(i)
                elif name in unread:
                    self.reasons[i] = unread[name]
            elif unread:
                self.reasons[i] = next(iter(unread.values()))
        for (name, message), rows in missing.items():
            self.members.log.add(Finding("refused", "missing-size", message, right=f"a {name}"), rows, name)

    def _soften(self, weighed: set[int]) -> None:
        """A refusal of one cell is only a note where the row was weighed all the same."""
        from dataclasses import replace

        entries = []
        for entry in self.members.log.entries:
            if entry.finding.level != "refused" or not weighed.intersection(entry.members):
                entries.append(entry)
                continue
            kept = [i for i in entry.members if i not in weighed]
            if kept:
                entries.append(replace(entry, members=kept))
            entries.append(replace(entry, finding=replace(entry.finding, level="note"),
                                   members=[i for i in entry.members if i in weighed]))
        self.members.log.entries[:] = entries

    def _names(self, ids: np.ndarray[Any, Any], names: list[str], text_column: str) -> np.ndarray[Any, Any]:
        """Canonical names where recognised, else the list's own text."""
        import numpy as np

        known = np.array([*names, None], dtype=object)[ids]
        chosen: np.ndarray[Any, Any] = np.where(ids >= 0, known, self.frame[text_column].to_numpy(dtype=object))
        return chosen

    def _matches(self, attribute: str) -> np.ndarray[Any, Any]:
        import numpy as np

        if not self.recognised:
            return np.zeros(0, dtype=object)
        values: np.ndarray[Any, Any] = np.array([getattr(r, attribute) for r in self.recognised], dtype=object)[self.codes]
        return values


def _same(typed: Floats, size: Floats) -> np.ndarray[Any, Any]:
    import numpy as np

    with np.errstate(invalid="ignore"):
        return np.abs(typed - size) <= np.maximum(SAME_SIZE_MM, SAME_SIZE_SHARE * size)
