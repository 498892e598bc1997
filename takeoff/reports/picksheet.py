"""The part of the pick sheet that needs positions, points or a crane: centre, legs, tackle, crane, and a coarse sketch. Rank 9.

Rounding: tensions, utilisations and what is needed go up; ratings, capacities, head room and the largest radius go down; a box goes
outward.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.rounding import NO_BREAK, NO_FIGURE, Units
from takeoff.reports.wording import listed, shown

if TYPE_CHECKING:
    from takeoff.lifting.crane import CraneCheck
    from takeoff.lifting.gravity import Centre, Vector
    from takeoff.lifting.pick import Pick, Point
    from takeoff.lifting.tackle import Choice
    from takeoff.lifting.upend import Step
    from takeoff.reports.plainpage import Page

_SKETCH = (46, 13)
_TITLES = {"within": "within", "over": "OVER", "unknown": "unknown"}


def say(page: Page, pick: Pick, units: Units) -> None:
    """Everything beyond the build-up, as far as it is known."""
    _centre(page, pick, units)
    if pick.points:
        _points(page, pick, units)
        _tackle(page, pick, units)
    _bar(page, pick, units)
    for check in pick.cranes:
        _crane(page, check, units)
    _upending(page, pick, units)
    _bending(page, pick, units)


def verdict(pick: Pick) -> str:
    """The verdict with what it is of."""
    looked_at = [word for word, there in (("crane", pick.cranes), ("lifting points", pick.points)) if there]
    of = f" ({' and '.join(looked_at)})" if looked_at else ": no crane and no lifting points are given"
    return f"{_TITLES[pick.verdict]}{of}"


def facts(pick: Pick, units: Units) -> list[tuple[str, str]]:
    """The same as label and text, for an output that is no running text."""
    found: list[tuple[str, str]] = []
    centre = pick.centre
    if centre is None:
        found.append(("Centre of gravity", f"unknown ({shown(pick.centre_unknown)})"))
    else:
        found += [
            ("Centre of gravity x, y, z", _three(centre.centre, units)),
            ("It may lie between", f"{_three(centre.box[0], units, 'down')} and {_three(centre.box[1], units, 'up')}"),
            ("Size, at least" if centre.at_least else "Size", _three(centre.size, units, _way_of_size(pick))),
        ]
    for p in pick.points:
        angle = (
            NO_FIGURE if p.angle_from_vertical_deg is None else f"{rounding.number(p.angle_from_vertical_deg, 1, 'up')}° from the vertical"
        )
        sizes = "; ".join(f"{shown(c.tackle)} {shown(c.size or 'none')} ({shown(c.method)})" for c in p.chosen)
        found.append(
            (
                f"Point {shown(p.name)}",
                f"at {_three(p.position_mm, units)}: {_force(p.share_kN, units)} of the nominal mass at rest; governing "
                f"{_force(p.share_heavy_kN, units)} ({shown(p.case)}); sling {_length(p.sling_length_mm, units)}, {angle}, "
                f"tension {_force(p.tension_kN, units)}, needs "
                f"{tonnes(p.required_wll_t, 'up', units)}" + (f". Enough: {sizes}. The tag on the gear decides." if sizes else ""),
            )
        )
    if pick.tilt_deg is not None:
        found.append(("Tilt", f"{rounding.number(pick.tilt_deg, 1, 'up')}°"))
    if pick.uniform:
        sizes = "; ".join(f"{shown(c.tackle)} {shown(c.size or 'none')}" for c in pick.uniform)
        found.append(("Whole sling", f"{shown(pick.uniform[0].method)}: {sizes}"))
    found += [(text.partition(": ")[0], text.partition(": ")[2]) for text in _bar_texts(pick, units)]
    for check in pick.cranes:
        found.append(
            (
                f"Crane {shown(check.name)}",
                "; ".join([shown(check.verdict), *(f"{name}: {value}" for name, value in _crane_rows(check, units))]),
            )
        )
    if pick.upend:
        steps = "; ".join(f"{s.angle_deg:g}° {' / '.join(_carried(s, units))}" for s in pick.upend)
        found.append(("Upending, head / tail", steps))
    return found + [(text.partition(": ")[0], text.partition(": ")[2]) for text in _bending_texts(pick, units)]


def slings(pick: Pick) -> list[tuple[str, Vector, Vector]]:
    """Each sling as it is drawn: its name, its foot and its top. Under a bar from the points to its ends, and from there to the hook."""
    bar, at = pick.spreader, {p.name: p.position_mm for p in pick.points}
    if bar is None:
        return [] if pick.hook_mm is None else [(f"sling from {shown(n)}", p, pick.hook_mm) for n, p in at.items()]
    if bar.ends_mm is None or bar.hook_mm is None:
        return []
    below = [(f"sling from {shown(n)}", at[n], end) for names, end in zip(bar.over, bar.ends_mm, strict=True) for n in names]
    if bar.kind == "spreader":
        return below + [("leg above the spreader", end, bar.hook_mm) for end in bar.ends_mm]
    x, y, _ = bar.hook_mm
    return [*below, ("from the eye", (x, y, bar.ends_mm[0][2]), bar.hook_mm)]


def hook_of(pick: Pick) -> Vector | None:
    """Where the hook is drawn."""
    return pick.spreader.hook_mm if pick.spreader else pick.hook_mm


def _three(values: Iterable[float], units: Units, way: rounding.Way = "nearest") -> str:
    return ", ".join(_length(v, units, way) for v in values)


def _length(mm: float | None, units: Units, way: rounding.Way = "nearest") -> str:
    if mm is not None and units == "si":
        mm = float(rounding.rounded(mm, 1, way))
    return rounding.length_with_unit(mm, units, NO_BREAK, way)


def _way_of_size(pick: Pick) -> rounding.Way:
    """A size goes up; one that is only surely reached goes down."""
    return "down" if pick.centre is not None and pick.centre.at_least else "up"


def _metres(m: float | None, units: Units, way: rounding.Way) -> str:
    return rounding.metres_with_unit(m, way, units, NO_BREAK)


def _force(kN: float | None, units: Units) -> str:
    return rounding.force_with_unit(kN, "up", units, NO_BREAK)


def tonnes(t: float | None, way: rounding.Way, units: Units) -> str:
    """A working load in t, or in lb."""
    if t is None:
        return NO_FIGURE
    return rounding.mass_with_unit(t * 1000, way, units, gap=NO_BREAK) if units == "us" else f"{rounding.number(t, 2, way)}{NO_BREAK}t"


def percent(share: float | None, way: rounding.Way = "up") -> str:
    return NO_FIGURE if share is None else f"{rounding.number(share * 100, 1, way)}{NO_BREAK}%"


def _centre(page: Page, pick: Pick, units: Units) -> None:
    centre = pick.centre
    if centre is None:
        page.say(f"Centre of gravity: unknown ({shown(pick.centre_unknown)}).", indent=2, hang=4)
        return
    rows = [
        [name, *(_length(v, units, way) for v in values)]
        for name, values, way in _where(pick, centre)
    ]
    page.table(["Where", "x", "y", "z"], rows)


def _where(pick: Pick, centre: Centre) -> tuple[tuple[str, Vector, rounding.Way], ...]:
    return (
        ("centre of gravity", centre.centre, "nearest"),
        ("at the least", centre.box[0], "down"),
        ("at the most", centre.box[1], "up"),
        ("size, at least" if centre.at_least else "size", centre.size, _way_of_size(pick)),
    )


def _points(page: Page, pick: Pick, units: Units) -> None:
    rows = [
        [
            shown(p.name),
            _force(p.share_kN, units),
            _force(p.share_heavy_kN, units),
            _length(p.sling_length_mm, units),
            NO_FIGURE if p.angle_from_vertical_deg is None else f"{rounding.number(p.angle_from_vertical_deg, 1, 'up')}°",
            _force(p.tension_kN, units),
            tonnes(p.required_wll_t, "up", units),
        ]
        for p in pick.points
    ]
    page.table(["Point", "share", "governing", "sling", "angle", "tension", "needs"], rows)
    for case, names in _by_case(pick.points):
        page.say(f"Governing at {listed(names)}: {shown(case)}.", indent=2, hang=4)
    page.say("Share: of the nominal mass at rest. Governing: of design mass × dynamic factor. Angle: from the vertical.", indent=2, hang=4)
    if any(
        p.level_length_mm is not None and p.sling_length_mm is not None and abs(p.level_length_mm - p.sling_length_mm) > 0.5
        for p in pick.points
    ):
        level = ", ".join(f"{shown(p.name)} {_length(p.level_length_mm, units)}" for p in pick.points)
        page.say(f"To hang level the slings would be: {level}.", indent=2, hang=4)
    if pick.tilt_deg is not None:
        page.say(f"Tilt {rounding.number(pick.tilt_deg, 1, 'up')}° from level.", indent=2)
    sketch = plan_sketch(pick, *_SKETCH)
    if sketch and page.width >= 52:
        page.say(
            "Sketch in plan (x to the right, y up): + centre of gravity; capital letters are points, dots the outline.", indent=2, hang=4
        )
        page.lines += ["    " + line for line in sketch]


def _by_case(points: Iterable[Point]) -> list[tuple[str, list[str]]]:
    found: dict[str, list[str]] = {}
    for p in points:
        found.setdefault(p.case, []).append(shown(p.name))
    return list(found.items())


def plan_sketch(pick: Pick, width: int, height: int) -> list[str]:
    """A picture of signs: the outline in dots, each point by a letter, the centre as +; empty where there is nothing to show."""
    if pick.centre is None or not pick.points:
        return []
    centre = pick.centre
    xs = [centre.low[0], centre.high[0], *(p.position_mm[0] for p in pick.points)]
    ys = [centre.low[1], centre.high[1], *(p.position_mm[1] for p in pick.points)]
    # A sign is about twice as high as it is wide, so one scale serves both ways.
    mm = max((max(xs) - min(xs)) / (width - 1), (max(ys) - min(ys)) / (2 * (height - 1)), 1e-6)
    columns, rows = round((max(xs) - min(xs)) / mm) + 1, round((max(ys) - min(ys)) / (2 * mm)) + 1
    grid = [[" "] * columns for _ in range(rows)]

    def at(x: float, y: float) -> tuple[int, int]:
        return min(rows - 1, round((max(ys) - y) / (2 * mm))), min(columns - 1, round((x - min(xs)) / mm))

    (top, left), (bottom, right) = at(centre.low[0], centre.high[1]), at(centre.high[0], centre.low[1])
    for r in range(top, bottom + 1):
        for c in range(left, right + 1):
            if r in (top, bottom) or c in (left, right):
                grid[r][c] = "."
    for number, p in enumerate(pick.points):
        r, c = at(p.position_mm[0], p.position_mm[1])
        name = shown(p.name)
        grid[r][c] = name.upper() if len(name) == 1 and name.isascii() and name.isalnum() else chr(ord("A") + number % 26)
    r, c = at(centre.centre[0], centre.centre[1])
    grid[r][c] = "+"
    return ["".join(line).rstrip() for line in grid]


def _tackle(page: Page, pick: Pick, units: Units) -> None:
    if all(not p.chosen for p in pick.points):
        return
    worst: dict[tuple[str, str], tuple[Choice, str]] = {}
    for p in pick.points:
        for c in p.chosen:
            key = (c.tackle, c.method)
            if key not in worst or c.needed_t > worst[key][0].needed_t:
                worst[key] = (c, p.name)
    rows = [
        [f"{shown(c.tackle)}: {shown(c.method)}", tonnes(c.needed_t, "up", units), shown(c.size or "none"), tonnes(c.wll_t, "down", units)]
        for c in [*(c for c, _ in worst.values()), *pick.uniform]
    ]
    page.table(["Enough for the heaviest leg", "needs", "size", "rated"], rows)
    sources = {str(c.source) for c, _ in worst.values()} | {str(c.source) for c in pick.uniform}
    page.say(f"Ratings: {'; '.join(shown(s) for s in sorted(sources))}.", indent=2, hang=4)
    page.say("Where two methods differ, take the larger size. The tag on the gear decides.", indent=2, hang=4)


def _bar(page: Page, pick: Pick, units: Units) -> None:
    for text in _bar_texts(pick, units):
        page.say(text + ".", indent=2, hang=4)


def _bar_texts(pick: Pick, units: Units) -> list[str]:
    bar = pick.spreader
    if bar is None:
        return []
    ends = [f" over {listed(shown(n) for n in names)}" if names else "" for names in bar.over]
    below = " and ".join(f"{_force(load, units)}{end}" for load, end in zip(bar.end_loads_kN, ends, strict=True))
    if bar.kind == "spreader":
        tensions = " and ".join(f"{_force(t, units)}{end}" for t, end in zip(bar.top_tensions_kN or (), ends, strict=False))
        leans = " and ".join(f"{rounding.number(a, 1, 'up')}°" for a in bar.top_angles_deg or ())
        lengths = " and ".join(_length(v, units) for v in bar.top_lengths_mm or ())
        sizes = "; ".join(f"{shown(c.tackle)} {shown(c.size or 'none')} ({shown(c.method)})" for c in pick.bar_tackle)
        own = rounding.moment_with_unit(bar.self_moment_kNm, "up", units, NO_BREAK)
        return [
            f"Spreader: compression {_force(bar.compression_kN, units)}, moment {own} from its own mass; it carries {below}",
            f"Legs above the spreader: {tensions}, its own mass counted; {leans} from the vertical, lengths {lengths}; enough: {sizes}. "
            "The tag on the gear decides",
        ]
    moment = rounding.moment_with_unit(bar.moment_kNm, "up", units, NO_BREAK)
    own = rounding.moment_with_unit(bar.self_moment_kNm, "up", units, NO_BREAK)
    return [f"Lifting beam: moment {moment} from the load and {own} from its own mass; it carries {below}"]


def _crane(page: Page, check: CraneCheck, units: Units) -> None:
    page.say(f"Crane {shown(check.name)}: {shown(check.verdict)}", indent=2)
    for name, value in _crane_rows(check, units):
        page.say(f"{name}: {value}", indent=4, hang=6)


def _crane_rows(check: CraneCheck, units: Units) -> list[tuple[str, str]]:
    rows = [
        ("configuration of the chart", shown(check.configuration or "not named")),
        ("radius (the larger)", _metres(check.radius_m, units, "up")),
        ("read at the chart's radius", _metres(check.chart_radius_m, units, "down")),
        ("rating (chart or hook)", rounding.mass_with_unit(check.rating_kg, "down", units, gap=NO_BREAK)),
        ("capacity, deductions off", rounding.mass_with_unit(check.capacity_kg, "down", units, gap=NO_BREAK)),
        ("load at rest", rounding.mass_with_unit(check.static_kg, "up", units, gap=NO_BREAK)),
        ("utilisation at rest", percent(check.utilisation_static)),
        ("utilisation moving", percent(check.utilisation)),
        (f"planning limit ({shown(check.limit.source.title)})", percent(check.limit.value, "down")),
        ("largest radius that serves", _metres(check.largest_radius_m, units, "down")),
        ("head room", _metres(check.head_room_m, units, "down")),
    ]
    if check.wind is not None:
        least = " or more" if check.wind.at_least else ""
        speed = rounding.speed_with_unit(check.wind.speed_m_s, "down", units, NO_BREAK)
        rows.append(("wind, at most", f"{speed}; it then pushes on the piece with {_force(check.wind.force_kN, units)}{least}"))
    if check.share is not None:
        factor = f" × {check.share_factor.value:g}" if check.share_factor else ""
        rows.insert(1, (f"share of the load{factor}", percent(check.share)))
    for stand in check.stands:
        side = _metres(stand.side_m, units, "up")
        load = rounding.mass_with_unit(stand.load_kg, "up", units, gap=NO_BREAK)
        rows.append((f"outrigger: {shown(stand.method)}", f"{load}, pad {side}{NO_BREAK}×{NO_BREAK}{side}"))
    return rows


def _upending(page: Page, pick: Pick, units: Units) -> None:
    if not pick.upend:
        return
    page.table(["Upending, from level", "head", "tail"], [[f"{s.angle_deg:g}°", *_carried(s, units)] for s in pick.upend])
    page.say(" ".join(upending_words(pick)), indent=2, hang=4)


def _carried(step: Step, units: Units) -> list[str]:
    """What head and tail carry; a hook that carries nothing is slack."""
    return [_force(kN, units) if kN > 0 else "slack" for kN in step.carried_kN]


def upending_words(pick: Pick) -> list[str]:
    """Where head and tail carry most."""
    found = []
    for which, name in enumerate(("Head", "Tail")):
        most = max(s.carried_kN[which] for s in pick.upend)
        angle = next(s.angle_deg for s in pick.upend if s.carried_kN[which] >= most * (1 - 1e-9))
        found.append(f"{name} greatest at {angle:g}°.")
    return [*found, "The head takes all once the piece is upright."]


def _bending(page: Page, pick: Pick, units: Units) -> None:
    for text in _bending_texts(pick, units):
        page.say(text + ".", indent=2, hang=4)


def _bending_texts(pick: Pick, units: Units) -> list[str]:
    b = pick.own_weight
    if b is None:
        return []
    best = " and ".join(_length(v, units) for v in b.best_points_mm)
    tension = rounding.stress_with_unit(b.stress_mpa, "up", units, NO_BREAK)
    stress = f", tension {tension} about its {b.axis} axis" if b.stress_mpa is not None else ""
    moment = rounding.moment_with_unit(b.moment_kNm, "up", units, NO_BREAK)
    return [f"Under its own weight: best points {best} from its start; moment {moment}{stress}"]
