"""takeoff: from a member list to a weight schedule that a competent person can check.

The functions a notebook needs; each loads what it needs when it is called::

    import takeoff

    reading = takeoff.read("cutting_list.xlsx")
    result = takeoff.weigh(reading)
    plan = takeoff.plan(result)
    takeoff.write(result, "cutting_list.schedule.xlsx", "cutting_list.html")

Masses kg, sizes mm, forces kN, temperatures °C of the metal; `takeoff.with_units` gives quantities with their units.
What comes out is an estimate for planning, not a lift plan: `result.cautions` goes with every figure.
"""

from __future__ import annotations

from functools import partial

# A command cannot answer Ctrl-C before this module is loaded, so even paths are loaded by the function that needs them.
TYPE_CHECKING = False
if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path
    from typing import Any

    import pandas as pd

    from takeoff.materials import MaterialMatch
    from takeoff.pipeline import Reading, Result
    from takeoff.reports.frames import Plan
    from takeoff.sections import SectionMatch

__version__ = "0.1.0"
__all__ = ["compare", "material", "plan", "read", "section", "sums", "weigh", "with_units", "write"]


def read(*lists: str | Path, job: str | Path | None = None, strict: bool = False) -> Reading:
    """Read member lists and recognise what they name; nothing is weighed yet.

    lists : .xlsx or .csv files, as the command takes them. job : the job file; else the job.toml beside the first list.
    strict : refuse similar names instead of assuming them.

    Raises takeoff.errors.InputError where a list cannot be read or holds no member list, JobError on the job file.
    """
    from pathlib import Path

    from takeoff import pipeline

    return pipeline.read(lists, job_path=None if job is None else Path(job), strict=strict)


def weigh(reading: Reading | str | Path) -> Result:
    """Weigh what was read (or the list of that name), between light, nominal and heavy.

    The result's `frame()` has one row a member: quantity, length_mm and the other sizes, each_ and total_ light_kg,
    nominal_kg, heavy_kg, status (weighed, assumed, not weighed) and reason. `totals.mass_kg` is the sum, `complete` whether
    no row is missing from it, `all_findings()` what there is to say.

    Raises as `read` does, and takeoff.errors.AccountError where rows would be lost.
    """
    from pathlib import Path

    from takeoff import pipeline

    return pipeline.weigh_reading(read(reading) if isinstance(reading, str | Path) else reading)


def plan(result: Result) -> Plan:
    """Picks, lifting points, loads and axles as frames (see `takeoff.reports.frames.Plan` for their columns).

    What is planned stands in the job file: `[lift]`, `[[lift.picks]]`, `[crane]`, `[[vehicles]]`; each assembly is a pick
    where it names none. Methods and sources: `takeoff.lifting.hook`, `takeoff.lifting.legs`, `takeoff.transport`.
    """
    from takeoff.reports import frames

    return frames.plan(result)


def sums(result: Result, by: str = "material") -> pd.DataFrame:
    """Sums by material, section, assembly, pick, phase or finish: pieces, light_kg, nominal_kg, heavy_kg, not_weighed.

    Raises KeyError on another grouping.
    """
    from takeoff.reports import frames

    return frames.sums(result, by)


def write(result: Result, *paths: str | Path, replace: bool = False) -> list[Path]:
    """Write the schedule to each path, all of them or none: .xlsx workbook, .html page, .json record, .csv members.

    Raises takeoff.errors.OutputError on a path of another kind, one that exists (unless `replace`), or one that is an input.
    """
    from pathlib import Path

    from takeoff.errors import OutputError
    from takeoff.reports import files

    outputs: list[files.Output] = []
    for path in map(Path, paths):
        kind = path.suffix.lower()
        if kind not in _WRITERS:
            raise OutputError("no such kind of output", file=path, right="a name that ends in " + ", ".join(_WRITERS))
        outputs.append((path, partial(_WRITERS[kind], result)))
    inputs = [*(i.file for i in result.inputs), *([result.job_file] if result.job_file else [])]
    return files.write_all(outputs, inputs=inputs, replace=replace)


def compare(result: Result, earlier: str | Path) -> pd.DataFrame:
    """What changed since an earlier run's JSON: change, mark, assembly, what, light_kg, nominal_kg, heavy_kg (new minus old).

    Raises takeoff.errors.InputError where `earlier` is no such record.
    """
    from pathlib import Path

    import pandas as pd

    from takeoff.reports import compare as comparing

    found = comparing.compare(result, comparing.read_earlier(Path(earlier)))
    columns = ["change", "mark", "assembly", "what", "light_kg", "nominal_kg", "heavy_kg", "place"]
    return pd.DataFrame([(c.kind, c.mark, c.assembly, c.what, *c.kg, c.place) for c in found.changes], columns=columns)


def material(name: str) -> MaterialMatch:
    """What a material text stands for: `match`, `material` with densities (kg/m³), expansion and sources, `candidates`."""
    from takeoff import materials

    return materials.lookup(name)


def section(name: str) -> SectionMatch:
    """What a section text stands for: `match`, `section` with sizes (mm), area (mm²) and sources, `candidates`."""
    from takeoff import sections

    return sections.read(name)


def with_units(frame: pd.DataFrame, columns: Sequence[str] | None = None) -> dict[str, Any]:
    """Columns as pint quantities, by name without the unit: ``with_units(frame)["length"].to("ft")``.

    Takes every column whose name ends in a unit (mm, kg, m2, m3, kN, t, deg), or those named. NaN stays NaN.
    Raises KeyError on a column that is not there.
    """
    from takeoff.quantities import named_by_unit, quantity

    found: dict[str, Any] = {}
    for name in frame.columns if columns is None else columns:
        values, named = frame[name], named_by_unit(str(name))
        if named is not None:
            found[named[0]] = quantity(values.astype(float).to_numpy(), named[1])
    return found


def _workbook(result: Result, path: Path) -> None:
    from takeoff.reports.workbook import write_workbook

    write_workbook(result, path)


def _page(result: Result, path: Path) -> None:
    from takeoff.reports.page import to_page

    path.write_text(to_page(result), encoding="utf-8", newline="")


def _json(result: Result, path: Path) -> None:
    from takeoff.reports.records import to_json

    path.write_text(to_json(result), encoding="utf-8", newline="")


def _csv(result: Result, path: Path) -> None:
    from takeoff.reports.records import to_csv

    path.write_text(to_csv(result), encoding="utf-8", newline="")


_WRITERS = {".xlsx": _workbook, ".html": _page, ".json": _json, ".csv": _csv}
