"""Sections formed from strip or set together of plates, by the sizes given: U, C, Z, angles, welded H; threaded rod. Rank 2.

Imported only when a text names one. A formed section's strip is as long as its sides along the middle of the sheet; how
round the corners are is not told, so nominal has an inside radius of the thickness, light three times that, heavy none.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from functools import cache

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.provenance import Source
from takeoff.sections import catalogue, made, shapes, tolerances
from takeoff.sections.answers import LEAST_LENGTH_MM, Answer, Given, Refused, length_left, one_chain
from takeoff.sections.catalogue import Row
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.pipes import nominal_inches
from takeoff.sections.section import Candidate, Section

#: Inside corner radius over thickness: nominal, and the roundest that light allows for.
USUAL_RADIUS, ROUNDEST = 1.0, 3.0
#: What a right-angled corner takes off the strip, over the radius of its middle line.
_CORNER = 2 - math.pi / 2
#: Strip that is formed cold is no thicker than this.
THICKEST_STRIP_MM = 12.0

_ROLLED_CHANNELS = ("UPN", "UPE", "PFC", "UAP", "CH", "ISMC", "ISMPC", "ISLC", "ISJC")


def strip_area(sides: Sequence[float], thickness: float, radius_share: float | None) -> float:
    """Area mm² of strip bent at right angles between its sides, outside sizes in mm; `radius_share` None for sharp corners."""
    corners = len(sides) - 1
    length = sum(sides) - corners * thickness
    if radius_share is not None:
        length -= corners * _CORNER * (radius_share + 0.5) * thickness
    return length * thickness


def strip(name: str, shape: str, sides: Sequence[float], thickness: float, centroid: tuple[float, float] | None) -> Section:
    """A section of strip by its sides in order, mm. Raises DataError on sizes that cannot be."""
    if not 0 < thickness <= THICKEST_STRIP_MM or min(sides) <= 2 * thickness - 1e-9:
        raise DataError(f"strip of {made.number(thickness)} mm cannot be formed to sides of {made.number(min(sides))} mm")
    limits, tolerance = tolerances.size_limits("cold-formed", thickness, "cold-formed")
    area = strip_area(sides, thickness, USUAL_RADIUS)
    light = strip_area(sides, limits.light, ROUNDEST * thickness / limits.light)
    heavy = strip_area(sides, limits.heavy, None)
    return Section(
        designation=name,
        family="Formed",
        shape=shape,
        form="prismatic",
        source=made.computed("Geometry of a section formed from strip"),
        dimensions_mm={"h": max(sides), "tf": thickness},
        needs=("length",),
        area_mm2=area,
        surface_m2_per_m=2 * area / thickness / 1000,
        centroid_mm=centroid,
        factor=Bounds(light / area, 1.0, heavy / area),
        tolerance=tolerance,
        material_hint="metal",
        note="computed from its sizes; how round its corners are is not told",
    )


def _centroid(parts: Sequence[tuple[float, float, float]]) -> tuple[float, float]:
    """Centroid of parts told by area and their own centroid."""
    area = sum(a for a, _, _ in parts)
    return sum(a * x for a, x, _ in parts) / area, sum(a * y for a, _, y in parts) / area


def channel(h: float, b: float, lip: float, t: float, prefix: str) -> Section:
    """A U (`lip` 0) or a lipped C, height × width (× lip) × thickness in mm."""
    parts = [(h * t, t / 2, h / 2), *[((b - t) * t, (b + t) / 2, y) for y in (t / 2, h - t / 2)]]
    if lip:
        parts += [((lip - t) * t, b - t / 2, y) for y in ((lip + t) / 2, h - (lip + t) / 2)]
    sides = [lip, b, h, b, lip] if lip else [b, h, b]
    shown = "x".join(made.number(v) for v in (h, b, lip, t) if v)
    return strip(f"{prefix} {shown}", "formed channel", sides, t, _centroid(parts))


def zed(h: float, wide: float, narrow: float, lip: float, t: float) -> Section:
    """A Z with or without lips: height × one or two widths (× lip) × thickness in mm."""
    sides = [lip, wide, h, narrow, lip] if lip else [wide, h, narrow]
    shown = "x".join(made.number(v) for v in (h, wide, *((narrow,) if narrow != wide else ()), lip, t) if v)
    return strip(f"Z {shown}", "formed zed", sides, t, (wide - t / 2, h / 2) if wide == narrow else None)


def angle(h: float, b: float, t: float) -> Section:
    """An angle bent from strip, leg × leg × thickness in mm."""
    long, short = max(h, b), min(h, b)
    shown = "x".join(made.number(v) for v in (long, short, t))
    middle = _centroid([(long * t, t / 2, long / 2), ((short - t) * t, (short + t) / 2, t / 2)])
    return strip(f"Cold formed L {shown}", "formed angle", [long, short], t, middle)


def welded_h(h: float, b: float, tw: float, tf: float) -> Section:
    """An H welded of three plates: depth × width × web × flange in mm; the welds are not in it."""
    d = {"h": h, "b": b, "tw": tw, "tf": tf}
    why = shapes.impossible("I parallel", d)
    if why:
        raise DataError(why)
    g = shapes.geometry("I parallel", d)
    limits = [tolerances.size_limits("plate", t, "plate") for t in (tw, tf)]
    (web, _), (flange, tolerance) = limits
    light, heavy = (2 * b * f + (h - 2 * tf) * w for w, f in ((web.light, flange.light), (web.heavy, flange.heavy)))
    return Section(
        designation="BH " + "x".join(made.number(v) for v in (h, b, tw, tf)),
        family="BH",
        shape="I parallel",
        form="prismatic",
        source=made.computed("Geometry of an H of three plates"),
        dimensions_mm=d,
        needs=("length",),
        area_mm2=g.area,
        surface_m2_per_m=g.surface,
        centroid_mm=g.centroid,
        factor=Bounds(light / g.area, 1.0, heavy / g.area),
        tolerance=tolerance,
        material_hint="metal",
        note="three plates, computed from its sizes; the welds are not in it",
    )


def _split_length(chain: Chain, least: int) -> tuple[list[float], float | None]:
    """The sizes, and one number more that can only be the piece's length."""
    sizes = chain.mm
    if len(sizes) > least and sizes[-1] >= LEAST_LENGTH_MM and sizes[-1] > 2 * max(sizes[:-1]):
        return sizes[:-1], sizes[-1]
    return sizes, None


def _rolled_like(h: float, b: float, t: float) -> list[Row]:
    """Rolled channels of this depth and width whose web is about this thick: they are meant as likely."""
    found = []
    for family in _ROLLED_CHANNELS:
        for row in catalogue.rows(family):
            d = row.cells
            if (float(d["h_mm"]), float(d["b_mm"])) == (h, b) and abs(float(d["tw_mm"]) - t) <= 0.15 * t + 0.3:
                found.append(row)
    return found


def read_channel(p: Parsed, given: Given, prefix: str) -> Answer | None:  # noqa: ARG001 (one signature for all shapes)
    """``C 200x75x20x2.0``, ``U 100x50x3``; None where the sizes are not those of strip.

    Of four sizes the third is the lip where it is thicker than the fourth, the sheet; a rolled channel has its web there.
    """
    sizes, length = _split_length(one_chain(p, "channel"), 3)
    if len(sizes) == 4 and sizes[3] < sizes[2] < sizes[1] / 1.2 and sizes[3] <= THICKEST_STRIP_MM:
        h, b, lip, t = sizes
        return Answer(channel(h, b, lip, t, "C"), "alias", length)
    if len(sizes) == 3 and sizes[2] <= THICKEST_STRIP_MM and sizes[0] >= 20 and 4 * sizes[2] <= sizes[1] <= 2 * sizes[0]:
        h, b, t = sizes
        like = _rolled_like(h, b, t)
        if like and "cold" not in p.properties:
            offered = [Candidate(row.designation, 80.0) for row in like]
            raise Refused("a rolled channel has these sizes too: name it, or write cold formed", "ambiguous-section", tuple(offered[:5]))
        if "cold" not in p.properties and t > 6:
            return None
        return Answer(channel(h, b, 0.0, t, prefix), "alias", length)
    return None


def read_zed(p: Parsed, given: Given) -> Answer:  # noqa: ARG001 (one signature for all shapes)
    """``Z 200x75x20x2.0``, ``Z 200x75x68x20x2``, ``Z 60x40x3``."""
    sizes, length = _split_length(one_chain(p, "Z"), 3)
    t = sizes[-1] if sizes else 0.0
    if len(sizes) == 5:
        h, wide, narrow, lip, t = sizes
    elif len(sizes) == 4 and sizes[2] < sizes[1] / 2:
        h, wide, lip, t = sizes
        narrow = wide
    elif len(sizes) == 3:
        h, wide, t = sizes
        narrow, lip = wide, 0.0
    else:
        raise Refused("a Z is told as height x width x lip x thickness", "unknown-section")
    return Answer(zed(h, wide, narrow, lip, t), "alias", length)


def read_angle(p: Parsed, given: Given) -> Answer:  # noqa: ARG001 (one signature for all shapes)
    """``cold formed L 90x60x7``."""
    sizes, length = _split_length(one_chain(p, "angle"), 2)
    if len(sizes) == 2:
        sizes = [sizes[0], sizes[0], sizes[1]]
    if len(sizes) != 3:
        raise Refused("an angle is told as leg x leg x thickness", "unknown-section")
    return Answer(angle(*sizes), "alias", length)


def read_welded_h(p: Parsed, given: Given) -> Answer:  # noqa: ARG001 (one signature for all shapes)
    """``BH 400x200x9x12``."""
    sizes, length = _split_length(one_chain(p, "BH"), 4)
    if len(sizes) != 4:
        raise Refused("a welded H is told as depth x width x web x flange", "unknown-section")
    return Answer(welded_h(*sizes), "alias", length)


#: Shank of a headed stud -> its head's diameter and height, mm (ISO 13918, recalled).
_STUD_HEADS = {10: (19, 7), 13: (25, 8), 16: (32, 8), 19: (32, 10), 22: (35, 10), 25: (41, 12)}


def headed_stud(diameter: float, length: float) -> Section:
    """A headed shear stud, shank diameter × length over all in mm, before welding."""
    if diameter not in _STUD_HEADS:
        near = sorted(_STUD_HEADS, key=lambda d: abs(d - diameter))[:3]
        offered = tuple(Candidate(f"Shear stud {d}x{made.number(length)}", 60.0) for d in near)
        raise Refused(f"no headed stud of {made.number(diameter)} mm in the tables", "unknown-section", offered)
    wide, high = _STUD_HEADS[int(diameter)]
    if length <= 2 * high:
        raise DataError(f"a headed stud of {made.number(length)} mm has no shank")
    volume = math.pi / 4 * (diameter**2 * (length - high) + wide**2 * high)
    factor, tolerance = tolerances.mass_factor("fastener")
    return Section(
        designation=f"Shear stud {made.number(diameter)}x{made.number(length)}",
        family="STUD",
        shape="fastener",
        form="each",
        source=Source("ISO 13918 heads, shank and head as cylinders", "dimensions", "recalled"),
        dimensions_mm={"diameter": diameter, "length": length},
        standard="ISO 13918",
        kg_each=volume * 7850e-9,
        factor=factor,
        tolerance=tolerance,
        is_steel_standard=True,
        material_hint="metal",
    )


def read_stud(p: Parsed) -> Answer:
    """``Shear stud 19x100``, ``stud Ø19x100`` of metal."""
    sizes = one_chain(p, "stud").mm
    label = p.labels.pop("diameter", None)
    if label is not None:
        sizes = [label.mm, *sizes]
    if len(sizes) != 2:
        raise Refused("a headed stud is told by its diameter and length", "unknown-section")
    return Answer(headed_stud(*sizes), "exact")


# -- threaded rod -----------------------------------------------------------------------------------------------------
#: Height of the triangle a thread is cut from, over its pitch, and what of it lies outside the pitch diameter (ISO 68-1).
_PITCH_DIAMETER = 2 * 3 / 8 * math.sqrt(3) / 2


@cache
def _threads() -> dict[tuple[str, str], tuple[float, float, Source]]:
    """(system, size) -> nominal diameter mm, coarse pitch mm, source."""
    path = data_folder() / "sections" / "threads.csv"
    found = {}
    for line, row in read_table(path):
        title, clause = catalogue.source_of(row["source"])
        if not title:
            raise DataError(f"line {line}: unknown source", file=path, read=row["source"], right="an id of sources.csv")
        pitch = 25.4 / float(row["threads_per_inch"]) if row["threads_per_inch"] else float(row["pitch_mm"])
        found[row["system"], row["size"]] = (float(row["diameter_mm"]), pitch, Source(title, clause, row["evidence"]))
    return found


def threaded_rod(system: str, size: str, pitch_mm: float | None = None) -> Section | None:
    """Threaded rod by its thread; None where the table has no such size.

    Area is that of the pitch diameter, d - 0.6495 P, which the masses printed for DIN 976 rest on (16 of them within
    0.6 %); heavy is a plain bar of the nominal diameter, as some lists reckon.
    """
    row = _threads().get((system, size))
    if row is None:
        return None
    d, coarse, source = row
    pitch = coarse if pitch_mm is None else pitch_mm
    if not 0 < pitch <= coarse:
        raise DataError(f"a pitch of {made.number(pitch)} mm is coarser than that of the thread")
    inner = d - _PITCH_DIAMETER * pitch
    area = math.pi / 4 * inner**2
    factor, tolerance = tolerances.mass_factor("thread-bar")
    name = f"M{size}" if system == "metric" else f"{size} in"
    if pitch != coarse:
        name += f"x{made.number(pitch)}"
    return Section(
        designation=f"Threaded rod {name}",
        family="THREAD",
        shape="threaded rod",
        form="prismatic",
        source=source,
        dimensions_mm={"diameter": d, "pitch": pitch},
        needs=("length",),
        area_mm2=area,
        surface_m2_per_m=math.pi * d / 1000,
        centroid_mm=(d / 2, d / 2),
        factor=Bounds(factor.light, 1.0, (d / inner) ** 2),
        tolerance=tolerance,
        material_hint="metal",
        note="area of the pitch diameter",
    )


def read_threaded_rod(p: Parsed) -> Answer:
    """``Threaded rod M20``, ``M20x1000 studding``, ``all-thread 3/4"``."""
    chain = one_chain(p, "threaded rod")
    numbers = list(chain.numbers)
    label = p.labels.pop("diameter", None)
    if label is not None:
        numbers.insert(0, label)
    if not numbers:
        raise Refused("a threaded rod without its size", "unknown-section", (Candidate("Threaded rod M20", 50.0),))
    size = numbers.pop(0)
    metric = ("M", "") in p.families or "M" in p.letters
    pitch = numbers.pop(0).mm if metric and numbers and numbers[0].mm < 10 else None
    if metric:
        section = threaded_rod("metric", size.text, pitch)
    elif size.unit == "in":
        section = threaded_rod("unc", nominal_inches(size))
    else:
        offered = (Candidate(f"Threaded rod M{size.text}", 70.0),)
        raise Refused("a threaded rod is told by its thread: M20, or inches", "unknown-section", offered)
    if section is None:
        near = sorted((d, name) for (system, name), (d, _, _) in _threads().items() if system == ("metric" if metric else "unc"))
        near.sort(key=lambda item: abs(item[0] - size.mm))
        shown = [f"Threaded rod M{name}" if metric else f"Threaded rod {name} in" for _, name in near[:3]]
        raise Refused("no thread of that size in the tables", "unknown-section", tuple(Candidate(n, 60.0) for n in shown))
    p.families = [f for f in p.families if f[0] != "M"]
    short = numbers.pop(0).mm if len(numbers) == 1 and size.mm < numbers[0].mm < LEAST_LENGTH_MM else None
    return Answer(section, "exact", short if short is not None else length_left(numbers))
