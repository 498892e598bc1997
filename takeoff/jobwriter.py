"""Lines added to a job file, its comments and order kept; a key that stands already is never changed. Rank 2."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from takeoff.errors import JobError


@dataclass(frozen=True, slots=True)
class JobLine:
    """One setting to offer: the dotted table (``names.materials``), the key, its value, and a remark for its reader."""

    table: str
    key: str
    value: str | float
    remark: str

    def __str__(self) -> str:
        import tomlkit

        return f"{tomlkit.key(self.key).as_string()} = {tomlkit.item(self.value).as_string()}  # {self.remark}"


def shown(lines: Sequence[JobLine]) -> list[str]:
    """The lines as they would stand in the file, each table's heading above its keys."""
    text: list[str] = []
    for table in dict.fromkeys(line.table for line in lines):
        text.append(f"[{table}]")
        text += dict.fromkeys(str(line) for line in lines if line.table == table)
    return text


def with_lines(existing: str, lines: Sequence[JobLine]) -> tuple[str, list[str]]:
    """The job file's text with these lines added, and the keys that stood there already and were kept.

    Raises JobError where the existing text is no TOML, or a table's name is taken by a value.
    """
    import tomlkit
    from tomlkit.exceptions import TOMLKitError
    from tomlkit.items import Table

    try:
        document = tomlkit.parse(existing)
    except TOMLKitError as error:
        raise JobError(f"the job file is not proper TOML: {error}") from error
    kept = []
    for line in lines:
        place = document
        for part in line.table.split("."):
            if part not in place:
                place[part] = tomlkit.table()
            inner = place[part]
            if not isinstance(inner, Table):
                raise JobError(f"{line.table!r} is a value in the job file, not a table", right=f"[{line.table}]")
            place = inner  # type: ignore[assignment]
        if line.key in place:
            kept.append(f"{line.table}.{line.key}")
            continue
        place[line.key] = tomlkit.item(line.value).comment(line.remark)
    return tomlkit.dumps(document), kept
