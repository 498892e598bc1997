"""The job file: every setting, its unit, its default and its limits, in one place. Rank 2.

TOML, every key optional. An unknown key is an error that names the nearest one, since a misspelt setting that is
silently ignored is a setting the user believes in. A key of a later version is refused too, for the same reason.
"""

from __future__ import annotations

import re
import tomllib
from pathlib import Path
from typing import Annotated, Any, Literal, get_args, get_origin

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, StrictBool, ValidationError, field_validator
from pydantic_core import PydanticCustomError

from takeoff.datafiles import refuse_odd_file
from takeoff.errors import JobError, UnitError, shortened
from takeoff.names import first_twice
from takeoff.quantities import ABSOLUTE_ZERO_C, temperature_C

#: characters of a key that a message shows; parts that a dotted key may have
_MOST_KEY, _MOST_PARTS = 80, 50
#: kinds of vehicle; the search for a plan tries each against each
_MOST_VEHICLES = 1_000
#: what a TOML text is made of, as far as its keys go: longer texts, parts of a key with the dot behind them, what ends a key
_QUOTED = r"""(?:"(?:[^"\\\n]|\\.)*+"|'[^'\n]*+')"""
_TOKEN = re.compile(
    r"""(?P<text>"{3}(?:[^"\\]|\\.|"(?!""))*+"{3}|'{3}(?:[^']|'(?!''))*+'{3}|\#[^\n]*+)"""
    rf"""|(?P<part>(?:[\w-]++|{_QUOTED})[ \t]*+\.)|(?P<other>[\w-]++|{_QUOTED})|(?P<open>["'])|(?P<sign>[^\w\s])|\s++""",
    re.DOTALL,
)

Factor = Annotated[float, Field(gt=0, le=10, allow_inf_nan=False, strict=True)]
Share = Annotated[float, Field(gt=0, le=1, allow_inf_nan=False, strict=True)]
Size = Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False, strict=True)]
Coordinate = Annotated[float, Field(ge=-1e7, le=1e7, allow_inf_nan=False, strict=True)]
Metres = Annotated[float, Field(gt=0, le=1000, allow_inf_nan=False, strict=True)]
Kilograms = Annotated[float, Field(ge=0, le=1e7, allow_inf_nan=False, strict=True)]
Percent = Annotated[float, Field(ge=0, le=100, allow_inf_nan=False, strict=True)]
Text = Annotated[str, Field(max_length=1000)]
LengthUnit = Literal["mm", "cm", "m", "in", "ft"]
Force = Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False, strict=True)]
Millimetres = Annotated[float, Field(ge=0, le=1e6, allow_inf_nan=False, strict=True)]


def _celsius(value: object) -> float:
    """A temperature of the job file: a number is °C, a text may name its unit (``"95 F"``)."""
    if isinstance(value, str):
        try:
            return temperature_C(value)
        except UnitError as error:
            raise PydanticCustomError("temperature", f"{error.what}: right would be {error.right}") from None
    if isinstance(value, bool) or not isinstance(value, int | float) or not abs(value) <= 1e4:
        raise PydanticCustomError("temperature", "this is no temperature: right would be a number of °C, such as 35")
    if value < ABSOLUTE_ZERO_C:
        raise PydanticCustomError("temperature", "below absolute zero: right would be -273.15 °C or above")
    return float(value)


Temperature = Annotated[float, BeforeValidator(_celsius)]


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


class TapePart(_Part):
    """The tape that measured the list: what it is made of, and how warm it was."""

    material: Text = "steel"
    temperature_C: Temperature


class ReadingPart(_Part):
    """How the list is to be read where it leaves a question open."""

    sheets: tuple[Text, ...] = ()
    skip: tuple[Text, ...] = ()
    tables: tuple[Text, ...] = ()
    group_titles: Literal["assembly", "ignore"] = "assembly"
    length_unit: LengthUnit | None = None
    decimal: Literal["auto", "point", "comma"] = "auto"
    thousands: Literal["auto", "comma", "point", "space", "apostrophe"] = "auto"
    material: Text | None = None
    columns: dict[str, Text] = Field(default_factory=dict)
    tape: TapePart | None = None


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
    #: None: not set, so not counted, and every total says so; 0 counts
    weld_percent: Percent | None = None
    bolt_percent: Percent | None = None
    finish: Text | None = None
    weighing_accuracy_percent: Percent = 0.0
    hand_kg: Annotated[float, Field(gt=0, le=50, allow_inf_nan=False, strict=True)] = 25.0


class RunPart(_Part):
    """A line of members fixed at one point. `fixed` is "start", "end" or a mark; `order` else the list's; gaps mm."""

    name: Text
    fixed: Text = "start"
    order: tuple[Text, ...] = ()
    joint_min_mm: Millimetres | None = None
    joint_max_mm: Millimetres | None = None
    joints: Literal["each", "ends"] = "each"


class LiftKeys(_Part):
    """Settings of a lift that [lift] gives for every pick and a pick may give for itself."""

    weight_known_by: Literal["weighed", "calculated", "estimated"] | None = None
    contingency: Factor | None = None
    dynamic_factor: Factor | None = None
    skew_factor: Factor | None = None
    rigging_kg: Kilograms | None = None
    hook_block_kg: Kilograms | None = None
    rope_kg: Kilograms | None = None
    other_kg: Kilograms | None = None
    planning_limit: Share | None = None
    sling: Literal["chain", "wire rope", "round sling", "webbing"] | None = None


class PointPart(_Part):
    """A lifting point of a pick, in the list's coordinates."""

    name: Text
    position: tuple[Coordinate, Coordinate, Coordinate]


class SpreaderPart(_Part):
    """A spreader (two legs above it, held apart) or a lifting beam (one eye above it)."""

    kind: Literal["spreader", "beam"]
    length_mm: Size
    mass_kg: Kilograms


class PickCranePart(_Part):
    """Which crane takes which points of a pick; radius and boom where they differ from the pick's own."""

    crane: Text
    points: tuple[Text, ...] = ()
    radius_m: Metres | None = None
    radius_set_down_m: Metres | None = None
    boom_m: Metres | None = None


class UpendPart(_Part):
    """Upending with two hooks: the point that rises and the one that follows."""

    head: Text
    tail: Text
    step_deg: Annotated[float, Field(ge=0.1, le=90, allow_inf_nan=False, strict=True)] = 5.0


class OwnWeightPart(_Part):
    """Bending under its own weight: the axis it bends about (else the weaker) and a tensile strength to check against."""

    axis: Literal["strong", "weak"] | None = None
    strength_mpa: Annotated[float, Field(gt=0, le=5000, allow_inf_nan=False, strict=True)] | None = None


class PickPart(LiftKeys):
    """One pick: what it holds, where it is held, and by what."""

    name: Text
    marks: tuple[Text, ...] = ()
    assemblies: tuple[Text, ...] = ()
    weighed_kg: Annotated[float, Field(gt=0, le=1e7, allow_inf_nan=False, strict=True)] | None = None
    radius_m: Metres | None = None
    radius_set_down_m: Metres | None = None
    set_down_mm: Annotated[float, Field(ge=-1e6, le=1e6, allow_inf_nan=False, strict=True)] = 0.0
    boom_m: Metres | None = None
    hook: tuple[Coordinate, Coordinate] | None = None
    hook_height_mm: Size | None = None
    points: tuple[PointPart, ...] = ()
    slings_mm: tuple[Size, ...] = ()
    hitch: Literal["direct", "choke", "basket"] = "direct"
    bend_ratio: Annotated[float, Field(gt=0, le=1000, allow_inf_nan=False, strict=True)] | None = None
    spreader: SpreaderPart | None = None
    cranes: tuple[PickCranePart, ...] = ()
    upend: UpendPart | None = None
    own_weight: OwnWeightPart | None = None

    @field_validator("slings_mm", mode="before")
    @classmethod
    def _one_length(cls, value: Any) -> Any:
        return [value] if isinstance(value, (int, float)) and not isinstance(value, bool) else value


class LiftPart(LiftKeys):
    """From masses to the hook."""

    picks: tuple[PickPart, ...] = ()


class OutriggersPart(_Part):
    """The crane's stand: outrigger spread, its own mass, and the pressure the ground may take."""

    spread_x_mm: Size
    spread_y_mm: Size
    crane_kg: Kilograms
    allowable_kpa: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False, strict=True)]


class CranePart(_Part):
    """A crane as the user's own chart rates it."""

    name: Text | None = None
    chart: Text | None = None
    deductions_kg: Kilograms = 0.0
    configuration: Text | None = None
    rating_unit: Literal["kg", "t", "lb"] | None = None
    radius_unit: Literal["m", "ft"] = "m"
    hook_rating_kg: Annotated[float, Field(gt=0, le=1e7, allow_inf_nan=False, strict=True)] | None = None
    boom_foot_m: Annotated[float, Field(ge=0, le=100, allow_inf_nan=False, strict=True)] | None = None
    block_m: Annotated[float, Field(ge=0, le=50, allow_inf_nan=False, strict=True)] | None = None
    wind_area_factor: Factor | None = None
    wind_m_s: Annotated[float, Field(gt=0, le=50, allow_inf_nan=False, strict=True)] | None = None
    outriggers: OutriggersPart | None = None
    share_factor: Annotated[float, Field(ge=1, le=10, allow_inf_nan=False, strict=True)] | None = None


class LashingPart(_Part):
    """The lashings at hand: what one holds in the straight pull, its tension when tightened, its angle to the deck.

    `direct` lays four from each piece's upper corners to the deck's sides; the angle is then the layout's own.
    """

    method: Literal["top-over", "direct"] = "top-over"
    lc_dan: Force = 2500.0
    stf_dan: Force = 300.0
    angle_deg: Annotated[float, Field(gt=0, le=90, allow_inf_nan=False, strict=True)] = 60.0


class TransportPart(_Part):
    """From picks and loose pieces to vehicles. `friction` is a factor, or a pair of surfaces of the table."""

    max_bundle_kg: Kilograms = 0.0
    separate: Literal["phase", "none"] = "none"
    time_limit_s: Annotated[float, Field(gt=0, le=3600, allow_inf_nan=False, strict=True)] = 60.0
    friction: Annotated[float, Field(gt=0, le=1.5, allow_inf_nan=False, strict=True)] | Text | None = None
    lashing: LashingPart = LashingPart()
    envelope: Literal["96/53/EC", "23 CFR 658", "own"] = "96/53/EC"
    securing: Literal["EN 12195-1", "49 CFR 393"] = "EN 12195-1"
    blocked_forward: StrictBool = False
    dunnage_mm: Millimetres = 0.0
    dunnage_kg: Kilograms = 0.0


class AxlePart(_Part):
    """One axle: its place behind the first axle of the vehicle or combination, its group, its own limit."""

    at_mm: Annotated[float, Field(ge=0, le=1e5, allow_inf_nan=False, strict=True)]
    group: Literal["front", "rear", "steer", "drive", "trailer"]
    limit_kg: Kilograms | None = None


class TractorPart(_Part):
    """The tractor of a semitrailer; `fifth_wheel_ahead_mm` is ahead of its drive axle (of the group's middle)."""

    wheelbase_mm: Size
    fifth_wheel_ahead_mm: Annotated[float, Field(ge=-5e3, le=1e4, allow_inf_nan=False, strict=True)] = 0.0
    front_empty_kg: Kilograms
    drive_empty_kg: Kilograms
    front_limit_kg: Kilograms | None = None
    drive_limit_kg: Kilograms | None = None


class VehiclePart(_Part):
    """A kind of vehicle and how many there are; absent figures leave unknown what rests on them."""

    name: Annotated[str, Field(min_length=1, max_length=200)]
    kind: Literal["rigid", "semitrailer"] = "rigid"
    count: Annotated[int, Field(ge=0, le=1000, strict=True)] | None = None
    payload_kg: Kilograms | None = None
    gross_limit_kg: Kilograms | None = None
    deck_length_mm: Size | None = None
    deck_width_mm: Size | None = None
    load_height_mm: Size | None = None
    deck_height_mm: Size | None = None
    rear_overhang_mm: Millimetres = 0.0
    deck_line_load_kg_per_m: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False, strict=True)] | None = None
    anchors_mm: tuple[Millimetres, ...] = ()
    anchor_dan: Force | None = None
    front_overhang_mm: Millimetres | None = None
    axles: tuple[AxlePart, ...] = ()
    wheelbase_mm: Size | None = None
    deck_front_mm: Coordinate | None = None
    front_empty_kg: Kilograms | None = None
    rear_empty_kg: Kilograms | None = None
    front_limit_kg: Kilograms | None = None
    rear_limit_kg: Kilograms | None = None
    kingpin_to_axles_mm: Size | None = None
    deck_ahead_of_kingpin_mm: Coordinate | None = None
    kingpin_empty_kg: Kilograms | None = None
    axles_empty_kg: Kilograms | None = None
    kingpin_limit_kg: Kilograms | None = None
    axles_limit_kg: Kilograms | None = None
    tractor: TractorPart | None = None


class LimitsPart(_Part):
    """Over-size thresholds in place of the envelope's own; planning figures, to be confirmed locally."""

    width_mm: Size | None = None
    height_mm: Size | None = None
    length_mm: Size | None = None
    gross_kg: Kilograms | None = None


class GuardsPart(_Part):
    """Limits of what the program will take in."""

    rows: Annotated[int, Field(gt=0, le=1_048_576, strict=True)] = 300_000
    cells: Annotated[int, Field(gt=0, le=100_000_000, strict=True)] = 20_000_000
    megabytes: Annotated[float, Field(gt=0, le=4096, strict=True)] = 200.0
    seconds: Annotated[float, Field(ge=0.001, le=86_400, strict=True)] = 900.0


#: name -> °C: reference (20 unless named), measured, cut, erect, coldest, warmest, and any other name
Temperatures = Annotated[dict[Annotated[str, Field(min_length=1, max_length=40)], Temperature], Field(max_length=40)]


class Job(_Part):
    """A whole job file. `path` is where it was read, None for the defaults."""

    job: JobPart = JobPart()
    reading: ReadingPart = ReadingPart()
    names: NamesPart = NamesPart()
    own: OwnPart = OwnPart()
    masses: MassesPart = MassesPart()
    temperatures: Temperatures = Field(default_factory=dict)
    runs: tuple[RunPart, ...] = ()
    lift: LiftPart = LiftPart()
    crane: tuple[CranePart, ...] = ()
    transport: TransportPart = TransportPart()
    vehicles: tuple[VehiclePart, ...] = ()
    limits: LimitsPart = LimitsPart()
    guards: GuardsPart = GuardsPart()
    path: Path | None = None

    @field_validator("crane", mode="before")
    @classmethod
    def _one_crane(cls, value: Any) -> Any:
        return [value] if isinstance(value, dict) else value

    def beside(self, name: str) -> Path:
        """A file named in the job file, relative to it."""
        folder = self.path.parent if self.path else Path()
        return folder / name


def read_job(path: Path) -> Job:
    """The job file at `path`. Raises JobError with the key at fault, or where the file cannot be read."""
    refuse_odd_file(path, "the job file", "job", JobError)
    try:
        text = path.read_bytes().decode("utf-8-sig")
        if _has_endless_key(text):
            raise JobError(f"a key of the job file has more than {_MOST_PARTS} parts", file=path, right="keys of two or three parts")
        raw = tomllib.loads(text)
    except OSError as error:
        raise JobError(f"the job file cannot be read ({error.strerror})", file=path) from error
    except UnicodeDecodeError as error:
        raise JobError("the job file is not UTF-8 text", file=path, right="save it as UTF-8") from error
    except RecursionError as error:
        raise JobError("the job file nests lists or tables without end", file=path, right="a list in a table at most") from error
    except tomllib.TOMLDecodeError as error:
        raise JobError(f"the job file is not proper TOML: {error}", file=path) from error
    except ValueError as error:  # none of the TOML reader's own: the interpreter refuses to convert it
        raise JobError("the job file holds a number of thousands of digits", file=path) from error
    return job_from(raw, path)


def _has_endless_key(text: str) -> bool:
    """Whether a dotted key has so many parts that the TOML reader, which takes their number squared, would not end."""
    parts = 0
    for found in _TOKEN.finditer(text):
        kind = found.lastgroup
        if kind == "part":
            parts += 1
            if parts > _MOST_PARTS:
                return True
        elif kind == "open":
            break  # a quote that never closes: the TOML reader stops there too
        elif kind is not None:
            parts = 0
    return False


def job_from(raw: dict[str, Any], path: Path | None = None) -> Job:
    """A Job from the parsed TOML. Raises JobError naming the key."""
    if "path" in raw:
        raise JobError("unknown key 'path'", file=path)
    _refuse_unknown(raw, Job, "", path)
    _refuse_long_numbers(raw, path)
    try:
        return _consistent(Job(**raw, path=path))
    except ValidationError as error:
        first = error.errors()[0]
        # A choice of types adds the name of the type tried to the key.
        key = ".".join(str(part) for part in first["loc"] if part not in ("constrained-float", "constrained-str"))
        raise JobError(f"{shortened(key, _MOST_KEY)}: {_plain(first['msg'])}", file=path, read=str(first.get("input"))[:80]) from None


def _consistent(job: Job) -> Job:
    """The job, unless two of its keys contradict each other. Raises JobError naming the key."""
    coldest, warmest = job.temperatures.get("coldest"), job.temperatures.get("warmest")
    if coldest is not None and warmest is not None and coldest > warmest:
        raise JobError("temperatures.coldest is above temperatures.warmest", file=job.path, read=f"{coldest:g} and {warmest:g}")
    for number, run in enumerate(job.runs):
        if run.joint_min_mm is not None and run.joint_max_mm is not None and run.joint_min_mm > run.joint_max_mm:
            gaps = f"{run.joint_min_mm:g} and {run.joint_max_mm:g}"
            raise JobError(f"runs.{number}.joint_min_mm is above joint_max_mm", file=job.path, read=gaps)
    if len(job.vehicles) > _MOST_VEHICLES:
        raise JobError(f"vehicles: {len(job.vehicles):,} kinds of vehicle, more than are compared", file=job.path,
                       right=f"at most {_MOST_VEHICLES:,}; count says how many there are of a kind")
    twice = first_twice([run.name for run in job.runs])
    if twice is not None:
        raise JobError(f"runs.{twice}.name: two runs have one name", file=job.path, read=job.runs[twice].name, right="each run once")
    return job


def _refuse_long_numbers(raw: dict[str, Any], path: Path | None) -> None:
    """Raises JobError on a whole number that TOML's 64 bits do not hold: nothing of a job is, and it cannot even be shown."""
    waiting: list[tuple[str, Any]] = list(raw.items())
    while waiting:
        key, value = waiting.pop()
        if isinstance(value, dict):
            waiting += [(f"{key}.{inner}" if len(key) < _MOST_KEY else key, entry) for inner, entry in value.items()]
        elif isinstance(value, list):
            waiting += [(key, entry) for entry in value]
        elif isinstance(value, int) and value.bit_length() > 63:
            raise JobError(f"{shortened(key, _MOST_KEY)}: a number of {value.bit_length()} bits", file=path, right="a number of a job")


def _refuse_unknown(raw: dict[str, Any], model: type[BaseModel], prefix: str, path: Path | None) -> None:
    known = [name for name in model.model_fields if name != "path"]
    for key, value in raw.items():
        full = prefix + key
        if key not in known:
            raise JobError(f"unknown key {shortened(full, _MOST_KEY)!r}", file=path, right=_nearest(full[:_MOST_KEY], prefix, known))
        part, several = _part_of(model.model_fields[key].annotation)
        if part is None:
            continue
        values = value if several and isinstance(value, list) else [value]
        for number, entry in enumerate(values):
            if not isinstance(entry, dict):
                raise JobError(f"{full} is a section, not a value", file=path, right=f"[{full}] and keys under it")
            _refuse_unknown(entry, part, f"{full}.{number}." if several and isinstance(value, list) else f"{full}.", path)


def _part_of(annotation: Any) -> tuple[type[BaseModel] | None, bool]:
    """The part of the job file that a field holds, if it holds one, and whether there may be several of it."""
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        return annotation, False
    inner = next((arg for arg in get_args(annotation) if isinstance(arg, type) and issubclass(arg, BaseModel)), None)
    return inner, get_origin(annotation) is tuple


def _nearest(full: str, prefix: str, known: list[str]) -> str:
    from takeoff.names import NormalName, suggest

    choices = [NormalName(prefix + name) for name in known]
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
        if other.exists() and not (beside[0].exists() and other.samefile(beside[0])):
            raise JobError("another job.toml lies beside a later list", file=other, right="name the one to use with --job")
    # Whatever bears the name is meant as the job file: a link that leads nowhere is said, not passed over.
    return read_job(beside[0]) if beside and (beside[0].exists() or beside[0].is_symlink()) else Job()


