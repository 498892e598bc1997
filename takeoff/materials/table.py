"""Our own table of materials: finds its CSV files, indexes the names, and hands out checked rows. Rank 2.

A file in `materials/` is a material table when its heading starts like one, so a new family needs no entry
anywhere else. Rows are checked when they are first asked for: a look-up touches one row of six hundred, and the tests touch them all.
"""

from __future__ import annotations

import gc
from collections.abc import Iterator
from contextlib import contextmanager
from functools import cache, cached_property
from pathlib import Path

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials.material import FamilySpread, Material, material_from_row, split_names
from takeoff.materials.nameindex import NameIndex, fold

_HEADING = b"key,name,family,designations,"


@contextmanager
def _no_collecting() -> Iterator[None]:
    """Thousands of small objects that all live on: looking for garbage among them would double the time."""
    collecting = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if collecting:
            gc.enable()


class Table:
    """Rows by key; and, where a name is asked for, the index of their names and the names that several own."""

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.rows: dict[str, tuple[Path, int, dict[str, str]]] = {}
        for path in sorted(folder.glob("*.csv")):
            with path.open("rb") as handle:
                if handle.read(len(_HEADING)) != _HEADING:
                    continue
            for line, row in read_table(path):
                self._add(path, line, row)

    @cached_property
    def index(self) -> NameIndex:
        """The index of all names. Raises DataError where several materials answer to one name that clashes.csv does not hold."""
        index = NameIndex(self.names_of)
        with _no_collecting():
            for key, (_, _, row) in self.rows.items():
                index.add(f"{key};{row['name']};{row['designations']}", key, True)
                if row["name"].endswith(")"):
                    index.add(row["name"].partition("(")[0], key, True)
                index.add(row["aliases"], key, False)
        for folded, keys in index.shared():
            if folded not in self.clashes:
                raise DataError(
                    "several materials answer to one name",
                    file=self.folder, read=f"{folded}: {', '.join(keys)}", right="one owner, or a row in clashes.csv",
                )  # fmt: skip
        return index

    @cached_property
    def clashes(self) -> dict[str, tuple[str, tuple[str, ...]]]:
        """Folded name -> (the name as written, the materials that it may mean)."""
        found = {}
        for line, row in read_table(self.folder / "clashes.csv"):
            keys = split_names(row["keys"])
            unknown = [key for key in keys if key not in self.rows]
            if unknown:
                raise DataError(f"line {line}: no such material", file=self.folder / "clashes.csv", read=unknown[0])
            found[fold(row["name"])] = (row["name"], keys)
        return found

    def _add(self, path: Path, line: int, row: dict[str, str]) -> None:
        key = row["key"]
        if key in self.rows:
            raise DataError(f"line {line}: this key is taken", file=path, read=key, right="a key that no other row has")
        if not row["density_source"]:
            raise DataError(f"line {line}: a density without a source does not load", file=path, read=key)
        self.rows[key] = (path, line, row)

    def names_of(self, key: str) -> tuple[str, ...]:
        """Every name of a material as it was written."""
        row = self.rows[key][2]
        short = row["name"].partition("(")[0]
        return (key, row["name"], short, *split_names(row["designations"]), *split_names(row["aliases"]))


@cache
def table() -> Table:
    """Our table, read once. Raises DataError on a row that may not load."""
    with _no_collecting():
        return Table(data_folder())


@cache
def source_titles() -> dict[str, str]:
    """Titles of sources by id, from sources.csv."""
    return {row["id"]: row["title"] for _, row in read_table(data_folder() / "sources.csv")}


@cache
def families() -> dict[str, FamilySpread]:
    """Every family with its kind and usual spread, in the order of family_spreads.csv."""
    return {
        row["family"]: FamilySpread(row["family"], row["kind"], float(row["low_percent"]), float(row["high_percent"]))
        for _, row in read_table(data_folder() / "family_spreads.csv")
    }


@cache
def by_key(key: str) -> Material:
    """The material with this key. Raises KeyError where there is none, DataError where its row may not load."""
    file, line, row = table().rows[key]
    return material_from_row(row, file=file, line=line, titles=source_titles(), families=families())


def name_of(key: str) -> str:
    """The name of the material with this key."""
    return table().rows[key][2]["name"]


def family_of(key: str) -> str:
    """The family of the material with this key."""
    return table().rows[key][2]["family"]


def kind_of(key: str) -> str:
    """The kind of the material with this key: metal, wood, stone, concrete ..."""
    return families()[family_of(key)].kind


def all_materials() -> tuple[Material, ...]:
    """Every material of the table, file by file."""
    return tuple(by_key(key) for key in table().rows)
