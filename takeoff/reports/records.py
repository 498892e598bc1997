"""The schedule for programs: JSON and CSV, unrounded, in SI whatever is printed elsewhere. Rank 9.

The JSON has one member a line, so that two runs compare line by line. Nothing in it depends on the clock or the machine.
Columns become plain lists once; a list of 100,000 members is written without touching a frame cell by cell.
"""

from __future__ import annotations

import itertools
import json
import math
import re
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Any

from takeoff.reports import added
from takeoff.thermal.lengths import TAPE_KEY

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.pipeline import Result
    from takeoff.reports.compare import Comparison

# ASCII only: the text then passes through any stream, and no invisible sign of a list's text acts on a terminal.
_JSON = json.JSONEncoder(ensure_ascii=True, allow_nan=False, separators=(", ", ": "))

_WORDS = ("light", "nominal", "heavy")
#: what the list states for one piece, and what a scale says, in kg: output's name -> members column
_OTHER_MASSES = {"stated_each_kg": "claimed_each_kg", "weighed_each_kg": "weighed_each_kg"}


def to_json(result: Result, changes: Comparison | None = None) -> str:
    """The whole result as JSON text ending in a line feed; absent figures are null, figures unrounded, SI.

    `changes` against an earlier run stand under ``against``, which is only there where there are any.

    Raises ValueError on an infinite figure, which no list can bring about.
    """
    return "".join(_pieces(result, changes))


def write_json(path: Path, result: Result, changes: Comparison | None = None) -> None:
    """What `to_json` gives, to a file piece by piece: the text of a long list is never held whole."""
    with path.open("w", encoding="ascii", newline="") as handle:
        handle.writelines(_pieces(result, changes))


def _pieces(result: Result, changes: Comparison | None) -> Iterator[str]:
    from takeoff import __version__

    job = result.job.job
    parts: dict[str, Any] = {
        "tool": {"name": "takeoff", "version": __version__},
        "job": {
            "title": job.title, "reference": job.reference, "revision": job.revision, "date": job.date,
            "prepared_by": job.prepared_by, "checked_by": job.checked_by, "approved_by": job.approved_by,
            "units": job.units,
        },
        "inputs": [
            {"file": i.file, "sha256": i.sha256, "sheets": list(i.sheets), "job_file": result.job_file}
            for i in result.inputs
        ],
        "account": _account(result.account),
        "account_by_sheet": [
            {"file": s.file, "sheet": s.sheet, **_account(s.account)} for s in result.sheet_accounts
        ],
        "complete": bool(result.complete),
        "members": _Lines(_members(result)),
        "totals": result.totals.as_record(),
        "picks": _Lines([_JSON.encode(_no_nan(pick.as_record())) for pick in result.picks]),
        "vehicles": _Lines([_JSON.encode(_no_nan(load.as_record())) for load in result.vehicles]),
        "not_loaded": [n.as_record() for n in result.not_loaded],
        "vehicle_count_bound": result.vehicle_count_bound, "proven": result.proven,
        "temperatures": _temperatures(result), "movements": _Lines([_JSON.encode(_no_nan(m.as_record())) for m in result.movements]),
        "findings": _Lines([_JSON.encode(f.as_record()) for f in result.findings]),
        "cautions": list(result.cautions),
    }
    if changes is not None:
        parts["against"] = changes.as_record()
    before = "{\n"
    for key, value in parts.items():
        yield f'{before}"{key}": '
        if isinstance(value, _Lines):
            yield from value.pieces()
        else:
            yield _JSON.encode(_no_nan(value))
        before = ",\n"
    yield "\n}\n"


class _Lines:
    """A JSON array whose entries are encoded already and stand on lines of their own."""

    def __init__(self, entries: Iterable[str]) -> None:
        self.entries = iter(entries)

    def pieces(self) -> Iterator[str]:
        """The array's text; entries are taken as they are needed, many at a time."""
        before = "[\n"
        while some := list(itertools.islice(self.entries, 1000)):
            yield before + ",\n".join(some)
            before = ",\n"
        yield "[]" if before == "[\n" else "\n]"


def _account(account: Any) -> dict[str, int]:
    names = ("rows", "weighed", "assumed", "not_weighed", "heading", "total", "blank", "other")
    return {name: int(getattr(account, name)) for name in names}


def _members(result: Result) -> Iterator[str]:
    """Each member as one line of JSON, in reading order. Columns are put into JSON one by one, then laid side by side."""
    frame = result.members
    keys = [_JSON.encode(m.key) for m in result.materials]
    designations = [_JSON.encode(s.designation) for s in result.sections]
    bases = [_JSON.encode(_no_nan(b.as_record())) for b in result.bases]
    sections = _json_texts(frame, "section")
    fields: dict[str, list[str] | dict[str, list[str]]] = {name: _json_texts(frame, name) for name in ("file", "sheet")}
    fields["row"] = [str(int(r)) for r in frame["row"].tolist()]
    fields |= {name: _json_texts(frame, name) for name in ("mark", "assembly", "pick", "phase", "run", "bundle")}
    fields["quantity"] = _json_figures(frame, "quantity", whole=True)
    fields["section"] = {
        "text": _json_texts(frame, "section_text"),
        "designation": [designations[i] if i >= 0 else text for i, text in zip(frame["section_id"].tolist(), sections, strict=True)],
        "match": _json_texts(frame, "section_match"),
    }
    fields["material"] = {
        "text": _json_texts(frame, "material_text"),
        "key": [keys[i] if i >= 0 else "null" for i in frame["material_id"].tolist()],
        "match": _json_texts(frame, "material_match"),
    }
    fields |= {name: _json_figures(frame, name) for name in ("length_mm", "width_mm", "thickness_mm", "height_mm", "diameter_mm")}
    fields |= {name: _json_texts(frame, name) for name in ("finish", "contents", "remarks")}
    fields |= {name: _json_texts(frame, name) if name in frame else ["null"] * len(frame) for name in ("insulation", "holes")}
    fields |= {name: _json_figures(frame, name) for name in ("volume_m3", "surface_m2")}
    for name, part in (("bare_each_kg", "bare"), ("mass_each_kg", "each"), ("mass_total_kg", "total")):
        fields[name] = {word: _json_figures(frame, f"{part}_{word}_kg") for word in _WORDS}
    fields["additions"] = added.json_arrays(result)
    nothing = ["null"] * len(frame)
    for name, column in _OTHER_MASSES.items():
        fields[name] = _json_figures(frame, column) if column in frame else nothing
    calculated = {word: f"calculated_{word}_kg" for word in _WORDS}
    fields["calculated_each_kg"] = {w: _json_figures(frame, c) if c in frame else nothing for w, c in calculated.items()}
    fields["handling"] = _json_texts(frame, "handling") if "handling" in frame else nothing
    fields["basis"] = [bases[i] if i >= 0 else "null" for i in frame["basis_id"].tolist()]
    fields |= {name: _json_texts(frame, name) for name in ("status", "reason")}
    fields |= _temperature_fields(result)
    findings = result.row_findings
    fields["findings"] = [
        _JSON.encode([f.as_record() for f in findings[i]]) if i in findings else "[]" for i in range(len(frame))
    ]
    fields["position_mm"] = _positions(result)
    template, columns = _template(fields)
    return (template % values for values in zip(*columns, strict=True))


def _positions(result: Result) -> list[str]:
    """Each member's centre of gravity in the list's coordinates; null where no position is known."""
    if not result.places:
        return ["null"] * len(result.members)
    places = [result.places.get(i) for i in range(len(result.members))]
    return ["null" if place is None or isinstance(place, str) else _JSON.encode(list(place.centre)) for place in places]


def _temperature_fields(result: Result) -> dict[str, Any]:
    """Each member's true lengths, tape readings and sizes by name of temperature; nothing where nobody names any."""
    at = result.temperatures
    if at is None:
        return {"lengths_mm": {}, "tape_readings_mm": {}, "sizes_mm": {}}
    # A name is the job file's own text, and the record it stands in is a template of %s.
    keys = {name: _JSON.encode(name)[1:-1].replace("%", "%%") for name in at.names}
    sizes = {name: {size: _figures(values) for size, values in at.sizes_mm[name].items()} for name in at.names}
    return {
        "lengths_mm": {keys[name]: sizes[name]["length"] for name in at.names},
        "tape_readings_mm": {keys[name]: _figures(at.readings_mm[name]) for name in at.names},
        "sizes_mm": {keys[name]: sizes[name] for name in at.names},
    }


def _figures(values: Any) -> list[str]:
    return ["null" if v != v else repr(v) for v in values.tolist()]  # noqa: PLR0124


def _temperatures(result: Result) -> dict[str, Any] | None:
    """The named temperatures, and each material there with its law, coefficient, bounds and sources."""
    at = result.temperatures
    if at is None:
        return None
    return {
        "named_C": at.named,
        "tape": TAPE_KEY if at.tape is None else at.tape.key,
        "materials": [
            {
                "key": m.material.key, "alpha_per_K": m.material.alpha_per_K,
                "alpha_interval_C": None if m.material.alpha_interval_C is None else list(m.material.alpha_interval_C),
                "alpha_source": None if m.material.alpha_source is None else m.material.alpha_source.as_record(),
                "low_share": m.spread.low, "high_share": m.spread.high, "bounds_source": m.spread.source.as_record(),
                "law": {
                    "name": m.law.name,
                    "pieces": [
                        {"from_C": p.from_C, "to_C": p.to_C, "curve": p.curve, "source": p.source.as_record()} for p in m.law.pieces
                    ],
                },
                "at": [
                    {
                        "name": name, "temperature_C": at.named[name], "elongation": grown.value,
                        "elongation_by_direction": grown.by_direction,
                        "density_kg_m3": None if density.density is None else density.density.as_record(),
                        "within_validity": grown.within_validity, "reason": grown.reason or density.reason or None,
                    }
                    for name, (grown, density) in m.at.items()
                ],
            }
            for m in at.materials
        ],
    }


def _template(fields: dict[str, Any]) -> tuple[str, list[list[str]]]:
    """A record with a place for each value, and the columns that fill the places, in order."""
    parts: list[str] = []
    columns: list[list[str]] = []
    for name, column in fields.items():
        if isinstance(column, dict):
            inner, more = _template(column)
            parts.append(f'"{name}": {inner}')
            columns += more
        else:
            parts.append(f'"{name}": %s')
            columns.append(column)
    return "{" + ", ".join(parts) + "}", columns


def _json_texts(frame: pd.DataFrame, name: str) -> list[str]:
    """A text column as JSON; the same text is worked on once."""
    known: dict[Any, str] = {}
    values = frame[name].tolist()
    for value in values:
        if isinstance(value, str) and value not in known:
            known[value] = _JSON.encode(value)
    return [known[v] if isinstance(v, str) else "null" for v in values]


def _json_figures(frame: pd.DataFrame, name: str, *, whole: bool = False) -> list[str]:
    """A column of figures as JSON, NaN as null; a whole count without a point. Raises ValueError on an infinite one."""
    values = frame[name].astype(float).tolist()
    if math.inf in values or -math.inf in values:
        raise ValueError(f"{name} holds an infinite figure, which JSON cannot carry")
    # NaN is the only value that differs from itself.
    if whole:
        return ["null" if v != v else str(int(v)) if v.is_integer() else repr(v) for v in values]  # noqa: PLR0124
    return ["null" if v != v else repr(v) for v in values]  # noqa: PLR0124


def _no_nan(value: Any) -> Any:
    """The same with null for NaN, at any depth."""
    if isinstance(value, float):
        return None if math.isnan(value) else float(value)
    if isinstance(value, dict):
        return {k: _no_nan(v) for k, v in value.items()}
    if isinstance(value, list | tuple):
        return [_no_nan(v) for v in value]
    return value


# --- CSV -------------------------------------------------------------------------------------------------------------

_PLAIN_NUMBER = re.compile(r"[+-]?\d+(?:[.,]\d+)?")
#: A spreadsheet program takes a cell that starts so for a formula; the wide forms count in some of its settings.
_ACTIVE = ("=", "+", "-", "@", "\t", "\r", "\n", "＝", "＋", "－", "＠")
#: a null ends the text for many readers, and half a surrogate pair has no bytes
_NOT_IN_FILES = re.compile("[\0\ud800-\udfff]")
_NEEDS_QUOTES = re.compile('[",\r\n]')

#: CSV column -> members column
_CSV_TEXTS = {
    "mark": "mark", "assembly": "assembly", "pick": "pick", "phase": "phase", "run": "run", "bundle": "bundle",
    "section": "section", "section_text": "section_text", "section_match": "section_match", "material": "material",
    "material_text": "material_text", "material_match": "material_match",
}
_CSV_SIZES = ("length_mm", "width_mm", "thickness_mm", "height_mm", "diameter_mm")
_CSV_MASSES = {
    f"mass_{part}_{word}_kg": f"{part}_{word}_kg" for part in ("each", "total") for word in _WORDS
}
_CSV_BARE = {f"mass_bare_each_{word}_kg": f"bare_{word}_kg" for word in _WORDS}


def to_csv(result: Result) -> str:
    """One line a member, units in the headings, unrounded; absent figures are empty cells. Lines end in a line feed.

    Text that a spreadsheet program could take for a formula gets an apostrophe in front.
    """
    frame = result.members
    rows = [str(r) for r in frame["row"].tolist()]
    columns: dict[str, list[str]] = {
        "file": _csv_texts(frame["file"].tolist()), "sheet": _csv_texts(frame["sheet"].tolist()), "row": rows,
    }
    for name, source in _CSV_TEXTS.items():
        columns[name] = _csv_texts(frame[source].tolist())
    columns["quantity"] = _csv_figures(frame, "quantity")
    for name in _CSV_SIZES:
        columns[name] = _csv_figures(frame, name)
    columns["finish"] = _csv_texts(frame["finish"].tolist())
    columns["contents"] = _csv_texts(frame["contents"].tolist())
    columns["volume_each_m3"] = _csv_figures(frame, "volume_m3")
    columns["surface_each_m2"] = _csv_figures(frame, "surface_m2")
    kinds = added.kinds(frame)
    parts = {f"mass_{kind}_each_{word}_kg": f"add_{kind}_{word}_kg" for kind in kinds for word in _WORDS}
    for name, source in {**_CSV_BARE, **parts, **_CSV_MASSES, **_OTHER_MASSES}.items():
        if source in frame:
            columns[name] = _csv_figures(frame, source)
    if "handling" in frame:
        columns["handling"] = _csv_texts(frame["handling"].tolist())
    columns["status"] = _csv_texts(frame["status"].tolist())
    columns["reason"] = _csv_texts(frame["reason"].tolist())
    for name, text in {
        "basis": [b.rule for b in result.bases],
        "basis_source": [", ".join(p for p in (b.nominal.title, b.nominal.clause) if p) for b in result.bases],
        "basis_evidence": [b.nominal.evidence for b in result.bases],
    }.items():
        cells = _csv_texts(text)
        columns[name] = [cells[i] if i >= 0 else "" for i in frame["basis_id"].tolist()]
    columns["remarks"] = _csv_texts(frame["remarks"].tolist())
    lines = [",".join(columns)]
    lines += map(",".join, zip(*columns.values(), strict=True))
    return "\n".join(lines) + "\n"


def csv_cell(text: str) -> str:
    """One text as a CSV cell: defused where a spreadsheet program could act on it, quoted where it must be."""
    # First what no file holds, or a formula behind it would come to stand in front.
    text = _NOT_IN_FILES.sub(lambda found: "" if found.group() == "\0" else "\ufffd", text)
    if text.startswith(_ACTIVE) and not _PLAIN_NUMBER.fullmatch(text):
        text = "'" + text
    return '"' + text.replace('"', '""') + '"' if _NEEDS_QUOTES.search(text) else text


def _csv_texts(values: Iterable[Any]) -> list[str]:
    """Cells of a text column; the same text is worked on once."""
    known: dict[str, str] = {}
    cells: list[str] = []
    for value in values:
        if not isinstance(value, str):
            cells.append("")
            continue
        cell = known.get(value)
        if cell is None:
            cell = known[value] = csv_cell(value)
        cells.append(cell)
    return cells


def _csv_figures(frame: pd.DataFrame, name: str) -> list[str]:
    values = frame[name].astype(float).tolist()
    return ["" if v != v else str(int(v)) if v.is_integer() else repr(v) for v in values]  # noqa: PLR0124
