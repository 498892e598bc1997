"""Sheet by gauge, tread plate, timber sizes and fasteners: goods told by a number that is no size of their own. Rank 2."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

from takeoff.bounds import Bounds
from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.provenance import Source
from takeoff.sections import made, tolerances
from takeoff.sections.catalogue import canonical, source_of
from takeoff.sections.section import STEEL_DENSITY, Section


@cache
def _rows(name: str) -> tuple[dict[str, str], ...]:
    """The rows of one of our small tables, each with a known source and a plain evidence word."""
    path = data_folder() / "sections" / f"{name}.csv"
    found = []
    for line, row in read_table(path):
        title, clause = source_of(row["source"])
        if not title:
            raise DataError(f"line {line}: unknown source", file=path, read=row["source"], right="an id of sources.csv")
        Source(title, clause, row["evidence"])
        found.append(row)
    return tuple(found)


def _source(row: dict[str, str]) -> Source:
    title, clause = source_of(row["source"])
    return Source(title, clause, row["evidence"])


def gauge_thickness_mm(gauge: str, system: str) -> tuple[float, Source] | None:
    """Thickness of a sheet gauge in one of the systems steel, stainless, aluminium, galvanized, swg; None where there is none."""
    for row in _rows("sheet_gauges"):
        if row["system"] == system and row["gauge"] == gauge:
            return float(row["thickness_in"]) * 25.4, _source(row)
    return None


def gauge_sheet(gauge: str, system: str, width: float | None, length: float | None) -> Section | None:
    """A sheet by its gauge."""
    found = gauge_thickness_mm(gauge, system)
    if found is None:
        return None
    thickness, source = found
    section = made.sheet(round(thickness, 4), width, length, "metal", prefix="Sheet", note=f"{gauge} gauge, {system}")
    return replace(section, designation=f"Sheet {gauge} swg" if system == "swg" else f"Sheet {gauge} ga {system}", source=source)


def tread_plate(thickness: float | None, pattern: str, width: float | None, length: float | None) -> Section:
    """Tread plate on the plain thickness: the pattern's mass is carried as thickness, so that any metal's density serves."""
    row = next(r for r in _rows("tread_plates") if r["pattern"] == pattern)
    if thickness is None:
        raise DataError("the thickness of the tread plate is missing")
    extra, heavy = (float(row[f"extra{w}_kg_per_m2"]) / STEEL_DENSITY * 1000 for w in ("", "_heavy"))
    section = made.sheet(round(thickness + extra, 4), width, length, "metal", prefix="PL")
    return replace(
        section,
        designation=f"Tread plate {made.number(thickness)}",
        family="Tread plate",
        standard=None,
        source=_source(row),
        factor=Bounds(1.0, 1.0, (thickness + heavy) / (thickness + extra)),
        note=f"{pattern} pattern carried as {extra:.3f} mm more thickness; {row['note']}",
    )


@cache
def _timber() -> frozenset[tuple[float, float]]:
    return frozenset((float(row["thickness_mm"]), float(row["width_mm"])) for row in _rows("timber_sizes"))


def is_timber_size(thickness: float, width: float) -> bool:
    """True for a preferred size of sawn, planed or regularised softwood, in mm, in either order."""
    return (min(thickness, width), max(thickness, width)) in _timber()


# -- fasteners --------------------------------------------------------------------------------------------------------
@cache
def _fasteners(table: str) -> dict[tuple[str, str, str], dict[str, str]]:
    size, length = ("size", "length_mm") if table == "fasteners_metric" else ("size_in", "length_in")
    return {
        (row["item"], row[size].removeprefix("M"), canonical(row.get(length) or "") if row.get(length) else ""): row for row in _rows(table)
    }


def fastener_lengths(size: str, table: str = "fasteners_metric", socket: bool = False) -> list[float]:
    """The lengths listed for one thread size, of bolts or of socket screws."""
    return sorted({float(length) for item, s, length in _fasteners(table) if s == size and length and (item == "socket screw") == socket})


def fastener(
    size: str, length: str, *, high_strength: bool, complete: bool, socket: bool = False, table: str = "fasteners_metric"
) -> Section | None:
    """A bolt by thread and length: alone, or complete with nut and washer. None where the size is not listed.

    A socket screw is told alone: no nut comes with it unless it is complete.

    Nominal of a bolt alone is the bolt; its heavy covers nut and two washers, since lists say `M20x60` for both. A
    complete one is nominal with nut and one washer, heavy with two.
    """
    items = _fasteners(table)
    kinds = ("hv bolt", "hv nut", "hv washer") if high_strength else ("bolt", "nut", "washer")
    bolt = items.get((kinds[0], size, length)) or (items.get(("screw", size, length)) if not high_strength else None)
    if socket:
        bolt = items.get(("socket screw", size, length))
    if bolt is None:
        return None
    nut, washer = items.get((kinds[1], size, "")), items.get((kinds[2], size, ""))
    alone = float(bolt["kg_per_1000"]) / 1000
    nut_kg, washer_kg = (float(row["kg_per_1000"]) / 1000 if row is not None else 0.0 for row in (nut, washer))
    nominal = alone + nut_kg + washer_kg if complete else alone
    most = alone if socket and not complete else alone + nut_kg + 2 * washer_kg
    factor, tolerance = tolerances.mass_factor("fastener")
    name = f"M{size}x{length}" if table == "fasteners_metric" else f"{size} in x {length} in"
    what = "Socket screw" if socket else "Bolt"
    return Section(
        designation=f"{what} {name}" + (" HV" if high_strength else "") + (" with nut and washer" if complete else ""),
        family="BOLT",
        shape="fastener",
        form="each",
        source=_source(bolt),
        dimensions_mm={},
        standard=bolt["standard"],
        kg_each=nominal,
        factor=Bounds(factor.light, 1.0, factor.heavy * most / nominal),
        tolerance=tolerance,
        is_steel_standard=True,
        material_hint="metal",
        note=(
            "with nut and one washer; heavy with two"
            if complete
            else "the screw alone"
            if socket
            else "the bolt alone; heavy with nut and two washers"
        )
        + (f"; {bolt['note']}" if bolt["note"] else ""),
    )


def small_part(item: str, size: str, *, high_strength: bool) -> Section | None:
    """A nut or a washer by its thread size."""
    row = _fasteners("fasteners_metric").get((f"hv {item}" if high_strength else item, size, ""))
    if row is None:
        return None
    factor, tolerance = tolerances.mass_factor("fastener")
    return Section(
        designation=f"{item.capitalize()} M{size}" + (" HV" if high_strength else ""),
        family="BOLT",
        shape="fastener",
        form="each",
        source=_source(row),
        dimensions_mm={},
        standard=row["standard"],
        kg_each=float(row["kg_per_1000"]) / 1000,
        factor=factor,
        tolerance=tolerance,
        is_steel_standard=True,
        material_hint="metal",
        note=row["note"],
    )
