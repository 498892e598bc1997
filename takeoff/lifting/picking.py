"""Each pick worked through, from the masses of its pieces to its verdict. Rank 6."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING, Any

from takeoff.bounds import Bounds
from takeoff.findings import Finding
from takeoff.job import CranePart, Job, LiftKeys, PickCranePart, PickPart
from takeoff.lifting import crane as cranes
from takeoff.lifting import falls, gravity, hook, legs, own_weight, sharing, spreader, tackle, upend
from takeoff.lifting.chart import Chart, read_chart
from takeoff.lifting.crane import CraneCheck
from takeoff.lifting.factors import Factor, chosen
from takeoff.lifting.figures import down_to, up_to
from takeoff.lifting.gravity import Centre, Place, Vector
from takeoff.lifting.hook import STANDARD_GRAVITY, BuildUp
from takeoff.lifting.pick import Line, Pick, Point, Verdict
from takeoff.lifting.plans import Plan, check_names, plans
from takeoff.weighing.basis import Basis
from takeoff.weighing.counted import EVERYTHING, with_open_rows

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.materials import Material
    from takeoff.sections import Section

#: words in a material's family -> what its pieces are called where they bend
_BRITTLE = {"stone": "stone", "masonry": "masonry", "concrete": "concrete", "glass": "glass", "ceramic": "ceramic"}


@dataclass(slots=True)
class _List:
    """The weighed list as plain columns, with what every pick of it shares; `frame` says which rows leave a finish or contents open."""

    frame: pd.DataFrame
    sections: Sequence[Section]
    materials: Sequence[Material]
    bases: Sequence[Basis]
    job: Job
    not_counted: tuple[str, ...]
    columns: dict[str, list[Any]] = field(default_factory=dict)
    places: dict[int, Place | str] = field(default_factory=dict)
    charts: dict[int, Chart] = field(default_factory=dict)

    def chart(self, crane: CranePart) -> Chart | None:
        """The crane's chart, read once. Raises InputError where it cannot be read."""
        if crane.chart is None:
            return None
        known = self.charts.get(id(crane))
        if known is None:
            known = self.charts[id(crane)] = read_chart(self.job.beside(crane.chart), crane, self.job.guards)
        return known


def picks_of(
    members: pd.DataFrame,
    bases: Sequence[Basis],
    job: Job,
    not_counted: tuple[str, ...] = EVERYTHING,
    sections: Sequence[Section] = (),
    materials: Sequence[Material] = (),
    places: dict[int, Place | str] | None = None,
) -> list[Pick]:
    """Every pick of a weighed frame. Rows that no pick, assembly or bundle claims belong to none.

    `places` are those of `takeoff.lifting.gravity.places_of`, where they are known already.

    Raises JobError where the job file's picks and cranes do not fit the list or each other, InputError on a chart that
    cannot be read.
    """
    check_names(job)
    places = gravity.places_of(members, sections) if places is None else places
    # Of the frame itself only these columns are asked for again, pick by pick.
    open_rows = members[[name for name in ("finish_open", "contents_open") if name in members]]
    data = _List(open_rows, sections, materials, bases, job, not_counted, places=places)
    names = ("status", "quantity", "basis_id", "section_id", "material_id", "length_mm", "width_mm", "thickness_mm", "height_mm",
             "diameter_mm", *(f"{a}_{w}_kg" for a in ("each", "total") for w in ("light", "nominal", "heavy")))  # fmt: skip
    data.columns = {name: members[name].tolist() for name in names}
    return [_Pick(data, plan).worked() for plan in plans(members, job)]


# --- one pick --------------------------------------------------------------------------------------------------------


class _Pick:
    """One pick on its way from rows to verdict."""

    def __init__(self, data: _List, plan: Plan) -> None:
        self.data, self.plan, self.job = data, plan, data.job
        # Not validated: a list's pick may bear a name that no job file would.
        self.asked = plan.asked or PickPart.model_construct(name=plan.name)
        self.lift = _resolved(data.job.lift, self.asked)
        self.findings: list[Finding] = []
        status = data.columns["status"]
        self.weighed = [(i, n) for i, n in plan.rows if status[i] != "not weighed"]
        self.lacking = len(plan.rows) - len(self.weighed)
        self.over = self.open = False

    def worked(self) -> Pick:
        """The whole sheet of this pick."""
        mass = self._mass()
        uncertain, on_scale = self._how_known()
        weighing = self.asked.weighed_kg
        weight, said, estimated = hook.weight_factor(
            self.lift, uncertain=uncertain and weighing is None, on_scale=on_scale or weighing is not None
        )
        self.findings += said
        heavy, what = self._heavy(mass)
        bar = self.asked.spreader
        bars = [Line("spreader" if bar.kind == "spreader" else "lifting beam", bar.mass_kg)] if bar else []
        built = hook.build_up(what, heavy, weight, self.lift, bars, max(1, len(self.asked.cranes)))
        if self.lacking:
            rows = f"{self.lacking} row{'s' if self.lacking > 1 else ''}"
            self._say("pick-incomplete", f"{rows} of this pick could not be weighed: it is heavier than shown", right="every row weighed")
        centre, unknown = self._centre(mass)
        steps = self._upended(centre, built)
        held = self._held(centre, mass, built, steps)
        bending = self._bending(held, built)
        checks = self._cranes(centre, mass, built, held, steps, estimated=estimated)
        return Pick(
            name=self.plan.name,
            pieces=sum(self._count(i, n) for i, n in self.weighed),
            mass_kg=mass,
            not_weighed=self.lacking,
            contingency=weight,
            dynamic=built.dynamic,
            design_mass_kg=built.design_kg,
            static_hook_load_kg=built.static_kg,
            hook_load_kg=built.hook_load_kg,
            hook_load_kN=built.hook_load_kg * STANDARD_GRAVITY / 1000.0,
            build_up=built.lines,
            verdict=self._verdict(checks, estimated=estimated),
            not_counted=self._not_counted(),
            findings=tuple(dict.fromkeys(self.findings)),
            listed=self.plan.listed,
            weighed_kg=self.asked.weighed_kg,
            centre=centre,
            centre_unknown=unknown,
            points=held.points,
            hook_mm=held.hook,
            tilt_deg=held.tilt_deg,
            skew=held.skew,
            uniform=held.uniform,
            spreader=held.bar,
            bar_tackle=held.bar_tackle,
            cranes=tuple(checks),
            upend=tuple(steps),
            own_weight=bending,
        )

    def _say(self, kind: str, message: str, *, read: str | None = None, right: str | None = None) -> None:
        self.findings.append(Finding("note", kind, message, read=read, right=right))

    def _count(self, i: int, n: int | None) -> int:
        return int(self.data.columns["quantity"][i]) if n is None else n

    # --- masses ------------------------------------------------------------------------------------------------------

    def _mass(self) -> Bounds:
        return Bounds.total(self._row_mass(i, n) for i, n in self.weighed)

    def _row_mass(self, i: int, n: int | None) -> Bounds:
        columns = self.data.columns
        if n is None:
            return Bounds(*(columns[f"total_{w}_kg"][i] for w in ("light", "nominal", "heavy")))
        return Bounds(*(columns[f"each_{w}_kg"][i] * n for w in ("light", "nominal", "heavy")))

    def _how_known(self) -> tuple[bool, bool]:
        """Whether a member is assumed or only stated, and whether every member was on a scale."""
        columns, bases = self.data.columns, self.data.bases
        of = [bases[columns["basis_id"][i]] for i, _ in self.weighed if columns["basis_id"][i] >= 0]
        assumed = any(columns["status"][i] == "assumed" for i, _ in self.weighed)
        on_scale = not self.lacking and len(of) == len(self.weighed) > 0 and all(b.weighed for b in of)
        return assumed or any(b.stated for b in of), on_scale

    def _heavy(self, mass: Bounds) -> tuple[float, str]:
        """The heavy mass and what it is: the pick's own weighing goes before the members' sum."""
        weighing = self.asked.weighed_kg
        if weighing is None:
            return mass.heavy, "heavy mass of the members"
        if not mass.light * (1 - 1e-9) <= weighing <= mass.heavy * (1 + 1e-9):
            self._say(
                "weighed-outside-bounds",
                f"weighed at {weighing:g} kg, the members come to {down_to(mass.light, 1)} to {up_to(mass.heavy, 1)} kg",
                read=f"{weighing:g} kg",
                right="the same: is a member missing, or something else on the scale?",
            )
        if (self.lift.weight_known_by or "calculated") != "weighed":
            return max(weighing, mass.heavy), "heavier of weighing and members"
        accuracy = getattr(self.job.masses, "weighing_accuracy_percent", 0.0) or 0.0
        return weighing * (1 + accuracy / 100), "weighed mass" + (f" + {accuracy:g} %" if accuracy else "")

    def _not_counted(self) -> tuple[str, ...]:
        rows = self.data.frame.iloc[[i for i, _ in self.plan.rows]]
        with_other = self.lift.other_kg is not None
        items = [item for item in with_open_rows(self.data.not_counted, rows) if not (item == "temporary steel" and with_other)]
        return (*items, *(label for key, label in hook.UNSET.items() if getattr(self.lift, key) is None))

    # --- centre and points -------------------------------------------------------------------------------------------

    def _centre(self, mass: Bounds) -> tuple[Centre | None, str]:
        """The centre, or why it is not known."""
        places = [(i, n, self.data.places.get(i)) for i, n in self.weighed]
        wanted = bool(self.asked.points)
        unknown: dict[str, int] = {}
        for _, n, place in places:
            if not isinstance(place, Place):
                why = place or "it has no position"
            elif n is not None:
                why = "its row is split over several picks"
            else:
                continue
            unknown[why] = unknown.get(why, 0) + 1
        if self.lacking:
            unknown["it is not weighed"] = self.lacking
        if not places or mass.nominal <= 0:
            return None, "nothing of it is weighed"
        if not unknown:
            return gravity.centre_of([p for _, _, p in places if isinstance(p, Place)], [self._row_mass(i, n) for i, n, _ in places]), ""
        number = sum(unknown.values())
        text = f"{number} of {len(self.plan.rows)} rows: " + "; ".join(unknown)
        if wanted or number < len(self.plan.rows) or set(unknown) - {"it has no position"}:
            self._say("centre-unknown", f"the centre of gravity is unknown: {text}", right="a position for every piece")
        self.open |= wanted
        return None, text

    def _held(self, centre: Centre | None, mass: Bounds, built: BuildUp, steps: Sequence[upend.Step]) -> _Held:
        points = tuple((p.name, p.position) for p in self.asked.points)
        if not points or centre is None:
            return _Held()
        skew = None
        if len(points) >= 4 or self.lift.skew_factor is not None:
            skew = chosen("skew", "four or more points", self.lift.skew_factor)
        rig = legs.Rig(
            points,
            self.asked.hook_height_mm,
            self.asked.hook,
            self.asked.slings_mm,
            upright=self._upright(),
            skew=skew.value if skew else 1.0,
            upended=self.asked.upend is not None,
        )
        rest = mass.nominal * STANDARD_GRAVITY / 1000.0
        heavy = built.design_kg * built.dynamic.value * STANDARD_GRAVITY / 1000.0
        if self.asked.hook is not None and self.asked.slings_mm and self.asked.spreader is None:
            self._say("hook-not-used", "sling lengths and a place of the hook are both given: the hook is where the slings put it")
        several = [c for c in self.asked.cranes if c.points]
        bar = self.asked.spreader
        if len(several) > 1 and bar is not None:
            self._say("crane-share-unknown", "a spreader under several cranes is not worked out")
            self.open = True
        ends = None
        if len(several) > 1:
            found = sharing.hold_on_several(rig, centre, rest, heavy, several)
        elif bar is not None and len(points) in (3, 4):
            found, ends = falls.hold(rig, centre, bar.length_mm, rest, heavy)
        else:
            found = legs.hold(rig, centre, rest, heavy)
        if steps:
            _raise_for_upending(found.points, steps, self.asked)
        self.findings += found.findings
        self.over |= found.over
        self.open |= found.open
        held = _Held(skew=skew, legs=found, ends=ends)
        if found.hang is not None:
            held.tilt_deg, held.hook = found.hang.tilt_deg, found.hang.hook
        self._choose(held, found, built, rig, several=len(several) > 1)
        if bar is not None:
            self._bar(held, centre, built)
        return held

    def _upright(self) -> bool:
        """On falls that hang plumb: from a bar, or from two hooks where nothing says how one hook would hold the piece."""
        one_hook = self.asked.hook_height_mm is not None or bool(self.asked.slings_mm)
        return self.asked.spreader is not None or (self.asked.upend is not None and not one_hook and len(self.asked.points) <= 2)

    def _choose(self, held: _Held, found: legs.Legs, built: BuildUp, rig: legs.Rig, *, several: bool) -> None:
        """Tackle that is enough for each leg, and for the whole sling."""
        out = []
        for p in found.points:
            needed = None if p.tension_kN is None else p.tension_kN / STANDARD_GRAVITY
            choices: list[tackle.Choice] = []
            if needed is not None:
                # A lug that is upended is pulled along the piece at one end of the way, square to it at the other.
                turned = self.asked.upend is not None and p.name in (self.asked.upend.head, self.asked.upend.tail)
                angle = 90.0 if turned else p.angle_deg if p.angle_deg is not None else 0.0
                choices, said = tackle.for_leg(needed, angle, self.lift.sling, self.asked.hitch, self.asked.bend_ratio)
                self.findings += said
            out.append(
                Point(
                    p.name,
                    p.position_mm,
                    p.share_kN,
                    p.share_heavy_kN,
                    p.case,
                    p.sling_length_mm,
                    p.level_length_mm,
                    p.angle_deg,
                    p.tension_kN,
                    needed,
                    tuple(choices),
                )
            )
        held.points = tuple(out)
        angles = [p.angle_deg for p in found.points if p.angle_deg is not None]
        if angles and len(angles) == len(found.points) and not rig.upright and not several:
            load = built.design_kg * built.dynamic.value / 1000.0
            held.uniform = tuple(tackle.uniform(load, angles, self.lift.sling, self.asked.hitch))

    def _bar(self, held: _Held, centre: Centre, built: BuildUp) -> None:
        """The spreader or beam: end loads from the centre's place along it, wherever in its box; its own mass counted."""
        part = self.asked.spreader
        assert part is not None
        positions = [p.position for p in self.asked.points]
        if len(positions) < 2:
            self._not_worked_out("a spreader needs two points or more below it")
            return
        if self.asked.hook is not None:
            self._not_worked_out("a bar whose hook is not over the centre of gravity is not worked out", right="no hook of the pick")
        k = built.dynamic.value * STANDARD_GRAVITY / 1000.0
        weight, bar = built.design_kg * k, part.mass_kg * k
        if held.ends is not None:
            aside, span = (part.length_mm - held.ends.span_mm) / 2, held.ends.span_mm
            places = [falls.along(held.ends, at) + aside for at in (centre.centre, *legs.corners(centre))]
            tops = held.ends.tops
            held.drop_mm = None if tops is None else max(t[2] for t in tops) - max(p[2] for p in positions)
        else:
            if len(positions) > 2:
                why = "the centre is not between pairs of points" if len(positions) < 5 else "more than four points under one bar"
                self._not_worked_out(f"{why}: what each leg below the bar carries is not worked out")
            found = [spreader.along_points(positions, at, part.length_mm) for at in (centre.centre, *legs.corners(centre))]
            places, span = [along for along, _ in found], found[0][1]
            tops = self._plumb_tops(positions)
            held.drop_mm = None if tops is None else max(t[2] for t in tops) - max(p[2] for p in positions)
        if abs(span - part.length_mm) > 0.01 * part.length_mm:
            self._not_worked_out(
                "the points are not as far apart as the bar is long: its falls lean, which is not worked out",
                read=f"{span:.0f} mm",
                right=f"{part.length_mm:.0f} mm",
            )
        if not all(0 < first < part.length_mm for first in places):
            self._say("centre-outside-points", "the centre of gravity is not under the bar")
            self.over = True
            return
        names = [p.name for p in self.asked.points]
        over: Any = ((), ())
        if held.ends is not None:
            over = tuple(tuple(names[i] for i in group) for group in held.ends.groups)
        elif len(names) == 2:
            over = ((names[0],), (names[1],))
        height = self.asked.hook_height_mm
        if part.kind == "beam":
            bars = [spreader.beam(weight, bar, part.length_mm, first) for first in places]
            hook_at = None if tops is None or height is None else spreader.hook_over(tops, places[0] / part.length_mm, height)
            held.bar = replace(spreader.worst(bars), over=over, ends_mm=tops, hook_mm=hook_at)
            return
        if height is None:
            self.open = True
            self._say("hook-height-missing", "the height of the hook above the spreader is not given", right="hook_height_mm of the pick")
            return
        # The hook stands over piece and bar together.
        at = (weight * places[0] + bar * part.length_mm / 2) / (weight + bar) / part.length_mm
        hook_at = None if tops is None else spreader.hook_over(tops, at, height)
        bars = [spreader.spreader(weight, bar, part.length_mm, first, height) for first in places]
        held.bar = replace(spreader.worst(bars), over=over, ends_mm=tops, hook_mm=hook_at)
        tensions, angles = held.bar.top_tensions_kN or (0.0, 0.0), held.bar.top_angles_deg or (0.0, 0.0)
        if max(angles) > legs.STEEPEST_DEG:
            self.over = True
            self._say(
                "leg-angle-over-60",
                "a leg above the spreader leans more than 60° from the vertical",
                read=f"{up_to(max(angles), 1)}°",
                right="a higher hook or a shorter spreader",
            )
        elif max(angles) > legs.NOTED_DEG:
            self._say("leg-angle-over-45", "a leg above the spreader leans more than 45° from the vertical")
        choices, said = tackle.for_leg(max(tensions) / STANDARD_GRAVITY, max(angles), self.lift.sling, "direct", self.asked.bend_ratio)
        self.findings += said
        held.bar_tackle = tuple(c for c in choices if c.tackle != "eyebolt")

    def _plumb_tops(self, positions: Sequence[Vector]) -> tuple[Vector, Vector] | None:
        """Where the bar's ends are over two points on plumb falls; None where their slings are not given."""
        slings = self.asked.slings_mm
        if not slings or len(positions) != 2:
            return None
        first, second = ((p[0], p[1], p[2] + slings[k % len(slings)]) for k, p in enumerate(positions))
        if abs(first[2] - second[2]) > falls.SAME_HEIGHT * math.dist(positions[0][:2], positions[1][:2]):
            self._not_worked_out(
                "on falls of these lengths the piece does not hang level under the bar: not worked out", right="both ends at one height"
            )
        return first, second

    def _not_worked_out(self, message: str, *, read: str | None = None, right: str | None = None) -> None:
        self.open = True
        self._say("spreader-not-worked-out", message, read=read, right=right)

    # --- upending and bending ----------------------------------------------------------------------------------------

    def _upended(self, centre: Centre | None, built: BuildUp) -> list[upend.Step]:
        part = self.asked.upend
        if part is None:
            return []
        if centre is None:
            self.open = True
            return []
        at = {p.name: p.position for p in self.asked.points}
        head, tail = at[part.head], at[part.tail]
        if math.dist(head[:2], tail[:2]) < 1e-6:
            self.open = True
            self._say("upend-swings", "head and tail stand over each other: the piece cannot be upended so")
            return []
        steps = upend.table(head, tail, centre.centre, built.design_kg * built.dynamic.value * STANDARD_GRAVITY / 1000.0, part.step_deg)
        bad = [s for s in steps if s.tail_kN < -1e-9 or s.head_kN < -1e-9]
        slack = upend.slack_from_deg(head, tail, centre.centre)
        if bad and all(s.head_kN >= 0 for s in bad) and slack is not None:
            self.open = True
            self._say(
                "upend-swings",
                f"at {down_to(slack, 1)}° the tail's hook goes slack: the piece hangs from the head alone and turns no further by itself",
                right="a tail point on the other side of the piece, or a lift to upright by other means",
            )
        elif bad:
            self.over = True
            self._say(
                "upend-swings",
                f"from {bad[0].angle_deg:g}° a hook would have to push: the piece swings over",
                right="head and tail on either side of the centre",
            )
        return steps

    def _bending(self, held: _Held, built: BuildUp) -> own_weight.Bending | None:
        part = self.asked.own_weight
        alone = len(self.weighed) == 1 and not self.lacking and self._count(*self.weighed[0]) == 1
        two = len(self.asked.points) == 2
        if not alone:
            if part is not None:
                self._say("own-weight-not-checked", "bending under its own weight is worked out for one uniform piece alone")
                self.open = True
            return None
        if part is None and not (two and held.points):
            return None
        i = self.weighed[0][0]
        row = {name: values[i] for name, values in self.data.columns.items()}
        place = self.data.places.get(i)
        section = self.data.sections[row["section_id"]] if row["section_id"] >= 0 else None
        length = place.length_mm if isinstance(place, Place) and place.length_mm else row["length_mm"]
        if section is not None and not length > 0:
            length = section.dimensions_mm.get("length", math.nan)
        if section is None or not length > 0:
            if part is not None:
                self._say("own-weight-not-checked", "the piece's section or length is not known")
                self.open = True
            return None
        at, off, lean = [own_weight.BEST * length, (1 - own_weight.BEST) * length], [0.0, 0.0], [0.0, 0.0]
        if two and held.points and isinstance(place, Place) and place.axis is not None:
            at, off = zip(*(_on_axis(p.position_mm, place, length) for p in held.points), strict=True)  # type: ignore[assignment]
            lean = [p.angle_from_vertical_deg or 0.0 for p in held.points]
        elif part is not None:
            self._say(
                "own-weight-not-checked", "no two points on the piece's axis are known: the figures are for the best points on upright legs"
            )
        face = gravity.face_of(section, row)
        modulus = own_weight.moduli(section, face) if face is not None else None
        weight = built.design_kg * built.dynamic.value * STANDARD_GRAVITY / 1000.0
        bending = own_weight.bend(length, weight, at, lean, off, modulus, part.axis if part else None)
        self._say_bending(bending, part.strength_mpa if part else None, row["material_id"])
        return bending

    def _say_bending(self, bending: own_weight.Bending, strength: float | None, material_id: int) -> None:
        family = self.data.materials[material_id].family.casefold() if material_id >= 0 else ""
        brittle = next((name for word, name in _BRITTLE.items() if word in family), None)
        if brittle:
            self._say(
                "little-tension",
                f"{brittle} carries little tension: lift it near its best points, and check it against a strength you know",
            )
        if brittle == "concrete":
            self._say("mould-adhesion", "a first lift from the mould adds adhesion, which is not in these figures")
        if strength is None:
            return
        if bending.stress_mpa is None:
            self.open = True
            self._say("own-weight-not-checked", "the section's modulus is not known: its tension is not checked")
        elif bending.stress_mpa > strength:
            self.over = True
            self._say(
                "own-weight-over",
                "the tension under its own weight exceeds the strength given",
                read=f"{up_to(bending.stress_mpa, 2)} MPa",
                right=f"{strength:g} MPa",
            )

    # --- cranes and verdict ------------------------------------------------------------------------------------------

    def _cranes(
        self, centre: Centre | None, mass: Bounds, built: BuildUp, held: _Held, steps: Sequence[upend.Step], *, estimated: bool
    ) -> list[CraneCheck]:
        named = {c.name: c for c in self.job.crane}
        parts = list(self.asked.cranes)
        if not parts and len(self.job.crane) > 1:
            self.open = True
            self._say(
                "crane-rating-unknown", "the job has several cranes and the pick names none", right="cranes = [{crane = ...}] of the pick"
            )
            return []
        if not parts:
            parts = [PickCranePart(crane=c.name or "crane") for c in self.job.crane]
            named = {c.name or "crane": c for c in self.job.crane}
        limit = chosen("planning limit", "critical lift", self.lift.planning_limit)
        piece = self._piece(centre, mass, held)
        shares = self._crane_shares(centre, built, steps, parts)
        if len(parts) > 1:
            self._say("more-than-one-crane", "more than one crane: 29 CFR 1926.751, as quoted, has such a lift planned as critical")
        checks = []
        for part, share in zip(parts, shares, strict=True):
            found = named[part.crane]
            k = self._share_factor(found, len(parts))
            static = load = None
            if share is not None:
                above = (built.static_kg - built.below_kg) / len(parts)
                static = (built.below_kg * share + above) * (k.value if k else 1.0)
                load = static * built.dynamic.value
            asked = cranes.Asked(
                static,
                load,
                part.radius_m or self.asked.radius_m,
                part.radius_set_down_m or self.asked.radius_set_down_m,
                part.boom_m or self.asked.boom_m,
                limit,
                not self.lacking and not estimated and bool(self.weighed),
                self.lift.hook_block_kg or 0.0,
                piece,
                share if len(parts) > 1 else None,
                k,
                part.points,
            )
            check, said = cranes.check(found, self.data.chart(found), asked)
            checks.append(check)
            self.findings += said
        return checks

    def _share_factor(self, crane: CranePart, number: int) -> Factor | None:
        if number < 2:
            return None
        return chosen("crane share", f"{number} cranes" if number < 4 else "4 cranes or more", crane.share_factor)

    def _crane_shares(
        self, centre: Centre | None, built: BuildUp, steps: Sequence[upend.Step], parts: Sequence[PickCranePart]
    ) -> list[float | None]:
        if len(parts) <= 1:
            return [1.0] * len(parts)
        if centre is None or any(not p.points for p in parts):
            self.open = True
            self._say(
                "crane-share-unknown",
                "how the cranes share the load is not known",
                right="positions of every piece, and points for each crane",
            )
            return [None] * len(parts)
        found = sharing.shares_of(tuple((p.name, p.position) for p in self.asked.points), centre, parts)
        if found is None:
            self.over = True
            return [None] * len(parts)
        shares = [worst for _, worst in found]
        if steps and self.asked.upend is not None:
            whole = built.design_kg * built.dynamic.value * STANDARD_GRAVITY / 1000.0
            for at, part in enumerate(parts):
                for name, most in (
                    (self.asked.upend.head, upend.greatest(steps, 0)[0]),
                    (self.asked.upend.tail, upend.greatest(steps, 1)[0]),
                ):
                    if name in part.points:
                        shares[at] = max(shares[at], most / whole)
        return list(shares)

    def _piece(self, centre: Centre | None, mass: Bounds, held: _Held) -> cranes.Piece:
        above = None
        if centre is not None and held.hook is not None:
            above = held.hook[2] - centre.low[2]
        elif centre is not None and self.asked.points and self.asked.hook_height_mm is not None:
            # Under a bar the hook's height is above the bar; where its legs are not known, the room is less than reckoned.
            above = max(p.position[2] for p in self.asked.points) + (held.drop_mm or 0.0) + self.asked.hook_height_mm - centre.low[2]
        at_least = centre is None or centre.at_least or (self.asked.spreader is not None and held.drop_mm is None)
        light = min(mass.light, self.asked.weighed_kg or math.inf)
        return cranes.Piece(light, centre.size if centre else None, above, at_least, self.asked.set_down_mm)

    def _verdict(self, checks: Sequence[CraneCheck], *, estimated: bool) -> Verdict:
        """Within only where all of it is known and nothing exceeds; what is not fully weighed is never more than unknown."""
        if self.lacking or estimated or not self.weighed:
            return "unknown"
        if self.over or any(c.verdict.startswith("over") for c in checks):
            return "over"
        asked = bool(self.job.crane or self.asked.cranes)
        if self.open or (asked and not checks) or any(c.verdict != "within" for c in checks):
            return "unknown"
        return "within" if checks or self.asked.points else "unknown"


@dataclass(slots=True)
class _Held:
    """How a pick is held: points with their tackle, where the hook is, the bar between."""

    points: tuple[Point, ...] = ()
    legs: legs.Legs | None = None
    hook: Vector | None = None
    tilt_deg: float | None = None
    skew: Factor | None = None
    uniform: tuple[tackle.Choice, ...] = ()
    ends: falls.Ends | None = None
    drop_mm: float | None = None
    bar: spreader.Bar | None = None
    bar_tackle: tuple[tackle.Choice, ...] = ()


def _resolved(general: LiftKeys, own: PickPart) -> LiftKeys:
    """The pick's own settings before the general ones; a pick with a weighing of its own is weighed unless it says otherwise."""
    values = {name: getattr(own, name) if getattr(own, name) is not None else getattr(general, name) for name in LiftKeys.model_fields}
    if own.weighed_kg is not None and own.weight_known_by is None:
        values["weight_known_by"] = "weighed"
    return LiftKeys(**values)


def _raise_for_upending(points: list[legs.PointLoad], steps: Sequence[upend.Step], asked: PickPart) -> None:
    """Head and tail must carry the most that comes on them on the way from level to upright, on falls that hang plumb."""
    assert asked.upend is not None
    for at, p in enumerate(points):
        if p.name == asked.upend.head:
            most, angle = upend.greatest(steps, 0)
        elif p.name == asked.upend.tail:
            most, angle = upend.greatest(steps, 1)
        else:
            continue
        tension = None if p.tension_kN is None else max(p.tension_kN, most)
        if most > p.share_heavy_kN * (1 + 1e-9):
            points[at] = replace(p, share_heavy_kN=most, case=f"upending, at {angle:g}°", tension_kN=tension)


def _on_axis(point: Vector, place: Place, length: float) -> tuple[float, float]:
    """A point's place along the piece from its start, and its height above the piece's axis, mm."""
    assert place.axis is not None
    away = [point[k] - place.centre[k] for k in range(3)]
    along = math.fsum(a * u for a, u in zip(away, place.axis, strict=True))
    return min(max(along + length / 2, 0.0), length), away[2] - along * place.axis[2]
