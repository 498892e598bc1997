"""The job file: every setting, its unit, its default and its limits, in one place. Rank 2.

TOML, every key optional. An unknown key is an error that names the nearest one, since a misspelt setting that is
silently ignored is a setting the user believes in. A key of a later version is refused too, for the same reason.
"""

from __future__ import annotations

import tomllib
from pathlib import Path
from typing import Annotated, Any, Literal

from pydantic import BaseModel, ConfigDict, Field, ValidationError

from takeoff.errors import JobError

Factor = Annotated[float, Field(gt=0, le=10, allow_inf_nan=False, strict=True)]
Kilograms = Annotated[float, Field(ge=0, le=1e7, allow_inf_nan=False, strict=True)]
Percent = Annotated[float, Field(ge=0, le=100, allow_inf_nan=False, strict=True)]
Text = Annotated[str, Field(max_length=1000)]
LengthUnit = Literal["mm", "cm", "m", "in", "ft"]


class _Part(BaseModel):
    model_config = ConfigDict(extra="forbid", frozen=True)


class JobPart(_Part):
    """What the title block of every output says."""

    title: Text | None = None
    reference: Text | None = None
    revision: Text | None = None
    date: Text | None = None
    prepared_by: Text | None = None
    checked_by: Text | None = None
    approved_by: Text | None = None
    units: Literal["si", "us"] = "si"


class ReadingPart(_Part):
    """How the list is to be read where it leaves a question open."""

    sheets: tuple[Text, ...] = ()
    skip: tuple[Text, ...] = ()
    length_unit: LengthUnit | None = None
    decimal: Literal["auto", "point", "comma"] = "auto"
    material: Text | None = None
    columns: dict[str, Text] = Field(default_factory=dict)


class NamesPart(_Part):
    """What the list's own words stand for."""

    hollow: Literal["hot", "cold"] = "hot"
    materials: dict[str, Text] = Field(default_factory=dict)
    sections: dict[str, Text] = Field(default_factory=dict)


class OwnPart(_Part):
    """The user's own tables, beside the job file."""

    materials: Text | None = None
    sections: Text | None = None


class MassesPart(_Part):
    """Planning figures of the masses."""

    moisture_percent: Annotated[float, Field(ge=0, le=200, allow_inf_nan=False, strict=True)] | None = None
    stated_minus_percent: Percent = 5.0
    stated_plus_percent: Percent = 10.0


class LiftPart(_Part):
    """From masses to the hook."""

    weight_known_by: Literal["weighed", "calculated", "estimated"] = "calculated"
    contingency: Factor | None = None
    dynamic_factor: Factor | None = None
    rigging_kg: Kilograms | None = None
    hook_block_kg: Kilograms | None = None
    rope_kg: Kilograms | None = None
    other_kg: Kilograms | None = None


class GuardsPart(_Part):
    """Limits of what the program will take in."""

    rows: Annotated[int, Field(gt=0, le=1_048_576, strict=True)] = 300_000
    cells: Annotated[int, Field(gt=0, le=100_000_000, strict=True)] = 20_000_000
    megabytes: Annotated[float, Field(gt=0, le=4096, strict=True)] = 200.0


class Job(_Part):
    """A whole job file. `path` is where it was read, None for the defaults."""

    job: JobPart = JobPart()
    reading: ReadingPart = ReadingPart()
    names: NamesPart = NamesPart()
    own: OwnPart = OwnPart()
    masses: MassesPart = MassesPart()
    lift: LiftPart = LiftPart()
    guards: GuardsPart = GuardsPart()
    path: Path | None = None

    def beside(self, name: str) -> Path:
        """A file named in the job file, relative to it."""
        folder = self.path.parent if self.path else Path()
        return folder / name


#: settings that a later version acts on; naming one is an error, so that nobody relies on it
LATER = {
    "reading.tables", "reading.thousands", "reading.group_titles", "reading.tape",
    "masses.weld_percent", "masses.bolt_percent", "masses.finish",
    "masses.weighing_accuracy_percent", "masses.hand_kg", "temperatures", "runs", "lift.picks", "lift.skew_factor",
    "lift.planning_limit", "lift.sling", "crane", "transport", "vehicles", "limits", "guards.seconds",
}


def read_job(path: Path) -> Job:
    """The job file at `path`. Raises JobError with the key at fault, or where the file cannot be read."""
    try:
        raw = tomllib.loads(path.read_bytes().decode("utf-8-sig"))
    except OSError as error:
        raise JobError(f"the job file cannot be read ({error.strerror})", file=path) from error
    except UnicodeDecodeError as error:
        raise JobError("the job file is not UTF-8 text", file=path, right="save it as UTF-8") from error
    except (tomllib.TOMLDecodeError, RecursionError) as error:
        raise JobError(f"the job file is not proper TOML: {error}", file=path) from error
    return job_from(raw, path)


def job_from(raw: dict[str, Any], path: Path | None = None) -> Job:
    """A Job from the parsed TOML. Raises JobError naming the key."""
    if "path" in raw:
        raise JobError("unknown key 'path'", file=path)
    _refuse_unknown(raw, Job, "", path)
    try:
        return Job(**raw, path=path)
    except ValidationError as error:
        first = error.errors()[0]
        key = ".".join(str(part) for part in first["loc"])
        raise JobError(f"{key}: {_plain(first['msg'])}", file=path, read=str(first.get("input"))[:80]) from None


def _refuse_unknown(raw: dict[str, Any], model: type[BaseModel], prefix: str, path: Path | None) -> None:
    known = [name for name in model.model_fields if name != "path"]
    for key, value in raw.items():
        full = prefix + key
        if full in LATER:
            raise JobError(
                f"the key {full!r} is not acted on by this version", file=path,
                right="leave it out, so that nobody relies on it",
            )
        if key not in known:
            raise JobError(f"unknown key {full!r}", file=path, right=_nearest(full, prefix, known))
        part = model.model_fields[key].annotation
        if isinstance(part, type) and issubclass(part, BaseModel):
            if not isinstance(value, dict):
                raise JobError(f"{full} is a section, not a value", file=path, right=f"[{full}] and keys under it")
            _refuse_unknown(value, part, full + ".", path)


def _nearest(full: str, prefix: str, known: list[str]) -> str:
    from takeoff.names import NormalName, suggest

    choices = [NormalName(prefix + name) for name in known]
    choices += [NormalName(name) for name in LATER if name.startswith(prefix)]
    near = suggest(NormalName(full), choices, floor=60, limit=1)
    return f"{near[0].name}" if near else "one of " + ", ".join(known)


def _plain(message: str) -> str:
    return message[0].lower() + message[1:]


def find_job(lists: list[Path], named: Path | None) -> Job:
    """The job for these lists: the one named, else the job.toml beside the first list, else the defaults.

    Raises JobError where a later list lies beside another job.toml.
    """
    if named is not None:
        return read_job(named)
    beside = [p.parent / "job.toml" for p in lists]
    for other in beside[1:]:
        if other.is_file() and not (beside[0].is_file() and other.samefile(beside[0])):
            raise JobError("another job.toml lies beside a later list", file=other, right="name the one to use with --job")
    return read_job(beside[0]) if beside and beside[0].is_file() else Job()


