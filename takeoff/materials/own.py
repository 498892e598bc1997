"""A user's own materials: a CSV beside the job, with our columns and our checks. Rank 2.

An own row is asked before ours. One that answers to a name of ours takes its place, and is flagged so that every output
which rests on it can say so. A density off a mill certificate, or a weighed one, is just such a row.
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from takeoff.datafiles import read_table, refuse_odd_file
from takeoff.errors import DataError, InputError
from takeoff.materials.laws import laws
from takeoff.materials.material import COLUMNS, REQUIRED, Material, material_from_row
from takeoff.materials.nameindex import NameIndex, fold
from takeoff.materials.table import families, source_titles, table
from takeoff.names import normal_name


@dataclass(frozen=True, slots=True)
class OwnTable:
    """The user's materials by key, the index of their names, and the file they come from."""

    path: Path
    materials: dict[str, Material]
    index: NameIndex


def load_own(path: str | Path) -> OwnTable:
    """Read a user's own table.

    Raises InputError where the file cannot be read, DataError where a column is missing or unknown, a row fails a
    check, or two rows answer to one name.
    """
    path = Path(path)
    refuse_odd_file(path, "the table of materials", "table")
    rows = list(_rows(path))
    materials: dict[str, Material] = {}
    names: dict[str, list[str]] = {}
    index = NameIndex(names.__getitem__)
    owner: dict[str, tuple[str, int]] = {}
    for line, row in rows:
        first = material_from_row(row, file=path, line=line, titles=source_titles(), families=families(), own=True)
        _check_law(path, line, first)
        spelled = [first.key, first.name, *first.designations, *first.aliases]
        overrides = any(table().index.find(normal_name(name)) for name in spelled)
        material = material_from_row(
            row, file=path, line=line, titles=source_titles(), families=families(), own=True, overrides=overrides
        )
        if material.key in materials:
            raise DataError(f"line {line}: this key is taken", file=path, read=material.key, right="a key of its own")
        materials[material.key] = material
        names[material.key] = spelled
        for position, name in enumerate(spelled):
            taken = owner.get(fold(name))
            if taken and taken[0] != material.key:
                raise DataError(
                    f"line {line}: this name is taken by line {taken[1]}", file=path, read=name, right="one row a name"
                )
            owner[fold(name)] = (material.key, line)
            index.add(name, material.key, position < 2 + len(material.designations))
    return OwnTable(path, materials, index)


def _check_law(path: Path, line: int, material: Material) -> None:
    """An own row may name a law of ours, but not one that needs our printed mean coefficients."""
    usable = [name for name, stretches in laws().items() if all(curve != "means" for _, _, curve in stretches)]
    if material.law and material.law not in usable:
        raise DataError(
            f"line {line}, column law: no such law", file=path, read=material.law[:80], right="one of " + ", ".join(usable)
        )


def _rows(path: Path) -> list[tuple[int, dict[str, str]]]:
    try:
        rows = list(read_table(path))
    except OSError as error:
        raise InputError("this table cannot be read", file=path, right="a CSV file that may be read") from error
    if not rows:
        raise DataError("the table of materials has no rows", file=path, right="a heading and a row a material")
    heading = rows[0][1]
    missing = [column for column in REQUIRED if column not in heading]
    if missing:
        raise DataError("a column is missing", file=path, read=", ".join(heading)[:80], right=", ".join(missing))
    unknown = [column for column in heading if column not in COLUMNS]
    if unknown:
        raise DataError("unknown column", file=path, read=unknown[0][:80], right="one of " + ", ".join(COLUMNS))
    return rows
