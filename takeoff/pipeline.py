"""The path, in order: lists in, a `Result` out. Rank 8: knows every room below, computes nothing itself."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import TYPE_CHECKING

from takeoff import materials, progress, sections
from takeoff.errors import InputError, TakeoffError
from takeoff.findings import Finding
from takeoff.job import Job, find_job
from takeoff.lifting import gravity, hook, picking
from takeoff.lifting.gravity import Place
from takeoff.lifting.pick import Pick
from takeoff.lists import members as lists_members
from takeoff.lists.account import Account, SheetAccount, account_of
from takeoff.lists.doubles import leave_out_doubles, repeated_rows
from takeoff.lists.headings import MEASURES
from takeoff.lists.log import FindingLog
from takeoff.lists.recognise import Recogniser, Recognition
from takeoff.lists.sheets import Sheet, SourceFile, read_file
from takeoff.lists.tables import SheetReading, Table, check_told, not_met, read_sheet
from takeoff.thermal import CAUTIONS as THERMAL_CAUTIONS
from takeoff.thermal.members import Temperatures, of_list
from takeoff.thermal.runs import RunMovement
from takeoff.transport import CAUTIONS as TRANSPORT_CAUTIONS
from takeoff.transport import Plan, load_up
from takeoff.transport.load import Load, NotLoaded
from takeoff.weighing import list_totals
from takeoff.weighing.basis import Basis
from takeoff.weighing.masses import weigh
from takeoff.weighing.totals import Totals, total_up

if TYPE_CHECKING:
    import pandas as pd

    from takeoff.materials import Material
    from takeoff.sections import Section

CAUTIONS = (
    "An estimate for planning, not a lift plan: weigh before lifting, carrying or loading where doubt remains.",
    "Plan on the heavy masses. The likely range is for ordering and freight, never for lifting.",
    "Local codes decide, and a competent, licensed person.",
)


@dataclass(frozen=True, slots=True)
class InputFile:
    """One list that was read: its name as given, the checksum of its bytes, the sheets on it that hold a list."""

    file: str
    sha256: str
    sheets: tuple[str, ...]


@dataclass(slots=True)
class Reading:
    """Lists as they were read, before anything is weighed: what `check` shows."""

    job: Job
    files: list[SourceFile]
    sheets: list[SheetReading]
    members: lists_members.Members
    recognised: list[Recognition]
    codes: list[int]

    @property
    def tables(self) -> list[Table]:
        return [table for sheet in self.sheets for table in sheet.tables]


@dataclass(slots=True)
class Result:
    """A weighed list, with everything an output needs. Frames and figures are SI (mm, m², m³, kg).

    members : one row a member (see `takeoff.weighing.masses.Weighed` and `takeoff.lists.members.Members`).
    findings : about sheets and headings; `row_findings` about members.
    added_bases : how each addition was found; `add_KIND_id` of a member points into it.
    temperatures, movements : members at the job's named temperatures, and the runs they form; None and empty without any.
    loads : what goes on which vehicle, None where the job file names no vehicles; its parts stand in `vehicles`, `not_loaded`,
        `vehicle_count_bound` and `proven` too.
    places : member -> where its centre of gravity lies, or why that is not known; members without a position are not in it.
    """

    job: Job
    inputs: list[InputFile]
    account: Account
    sheet_accounts: list[SheetAccount]
    members: pd.DataFrame
    sections: list[Section]
    materials: list[Material]
    bases: list[Basis]
    log: FindingLog
    findings: list[Finding]
    totals: Totals
    picks: list[Pick]
    cautions: tuple[str, ...] = CAUTIONS
    temperatures: Temperatures | None = None
    movements: list[RunMovement] = field(default_factory=list)
    added_bases: list[Basis] = field(default_factory=list)
    places: dict[int, Place | str] = field(default_factory=dict)
    loads: Plan | None = None
    _rows: dict[int, tuple[Finding, ...]] | None = field(default=None, repr=False)

    @property
    def job_file(self) -> str | None:
        return None if self.job.path is None else str(self.job.path)

    @property
    def vehicles(self) -> tuple[Load, ...]:
        return self.loads.loads if self.loads else ()

    @property
    def not_loaded(self) -> tuple[NotLoaded, ...]:
        return self.loads.not_loaded if self.loads else ()

    @property
    def vehicle_count_bound(self) -> int | None:
        return self.loads.bound if self.loads else None

    @property
    def proven(self) -> bool | None:
        return self.loads.proven if self.loads else None

    @property
    def complete(self) -> bool:
        """No row is missing from the totals."""
        return self.account.not_weighed == 0

    @property
    def row_findings(self) -> dict[int, tuple[Finding, ...]]:
        """Member number -> its findings, each with its cell."""
        if self._rows is None:
            self._rows = self.log.by_member()
        return self._rows

    def all_findings(self) -> list[Finding]:
        """The members' findings gathered (the same one on many rows once), then those of sheets and headings."""
        return [*self.log.gathered(), *self.findings]

    def frame(self) -> pd.DataFrame:
        """A copy of the members, for a notebook."""
        return self.members.copy()


def read(paths: Sequence[str | Path], job: Job | None = None, *, job_path: Path | None = None, strict: bool = False) -> Reading:
    """Read member lists and recognise what they name.

    Raises InputError where a list cannot be read or holds no member list, JobError on the job file.
    """
    files_named = [Path(p) for p in paths]
    _refuse_twice(files_named)
    if job is None:
        job = find_job(files_named, job_path)
    check_told(job)
    progress.tell("reading " + ", ".join(path.name for path in files_named[:3]))
    files = [read_file(path, job.guards) for path in files_named]
    sheets = [read_sheet(sheet, job) for file in files for sheet in _wanted(file, job)]
    leave_out_doubles(sheets, job)
    for file in files:
        _refuse_without_list(file, [s for s in sheets if s.sheet.file == file.file])
    if sheets:
        sheets[-1].findings.extend(not_met(sheets, job))
    members = lists_members.build(sheets, job)
    for number, earlier in repeated_rows(members.tables):
        where = f"sheet {earlier.sheet.name}" if earlier.sheet.name else earlier.sheet.file
        members.log.add(Finding("note", "row-twice", f"the same piece and quantity stand in the list of {where} too"), [number])
    own = materials.load_own(job.beside(job.own.materials)) if job.own.materials else None
    own_sections = sections.load(job.beside(job.own.sections), own=True) if job.own.sections else None
    progress.tell(f"{len(members.frame)} rows read; recognising names")
    recogniser = Recogniser(job, own, own_sections, strict)
    frame = members.frame
    recognised, codes = recogniser.all(frame["section_text"].tolist(), frame["material_text"].tolist(), frame["section_heading"].tolist())
    return Reading(job, files, sheets, members, recognised, codes)


def weigh_reading(reading: Reading) -> Result:
    """Weigh what was read, total it, and close the account. Raises AccountError where rows are lost: a fault of ours."""
    progress.tell(f"{len(reading.recognised)} kinds of piece recognised; weighing {len(reading.members.frame)} rows")
    weighed = weigh(reading.members, reading.recognised, reading.codes, reading.job)
    accounts = _accounts(reading, weighed.frame)
    account = sum((a.account for a in accounts), Account())
    account.check("the run")
    temperatures, movements = of_list(weighed.frame, weighed.sections, weighed.materials, reading.members.log, reading.job)
    places = gravity.places_of(weighed.frame, weighed.sections)
    loads = None
    if reading.job.vehicles:
        progress.tell("loading vehicles")
        loads = load_up(weighed.frame, weighed.sections, reading.job, places)
    return Result(
        job=reading.job,
        inputs=[
            InputFile(f.file, f.sha256, tuple(s.sheet.name for s in reading.sheets if s.tables and s.sheet.file == f.file and s.sheet.name))
            for f in reading.files
        ],
        account=account,
        sheet_accounts=accounts,
        members=weighed.frame,
        sections=weighed.sections,
        materials=weighed.materials,
        bases=weighed.bases,
        log=reading.members.log,
        findings=[
            *(finding for sheet in reading.sheets for finding in sheet.findings),
            *list_totals.compare(weighed.frame, reading.tables, reading.job),
        ],
        totals=total_up(weighed.frame, weighed.not_counted),
        added_bases=weighed.added_bases,
        picks=picking.picks_of(
            weighed.frame,
            weighed.bases,
            reading.job,
            weighed.not_counted,
            weighed.sections,
            weighed.materials,
            places,
        ),
        places=places,
        cautions=(
            *CAUTIONS,
            *(hook.CAUTIONS[1:] if reading.job.lift.picks or reading.job.crane else ()),
            *(TRANSPORT_CAUTIONS[1:] if loads else ()),
            *(THERMAL_CAUTIONS if temperatures else ()),
        ),
        loads=loads,
        temperatures=temperatures,
        movements=movements,
    )


def schedule(paths: Sequence[str | Path], job: Job | None = None, *, job_path: Path | None = None, strict: bool = False) -> Result:
    """The main job: member lists in, a weighed Result out. Errors as of `read` and `weigh_reading`."""
    return weigh_reading(read(paths, job, job_path=job_path, strict=strict))


def _refuse_twice(paths: list[Path]) -> None:
    for number, path in enumerate(paths):
        for other in paths[:number]:
            if path.exists() and other.exists() and path.samefile(other):
                raise InputError("the same list is named twice", file=path, right="each list once, or its masses count twice")


def _wanted(file: SourceFile, job: Job) -> list[Sheet]:
    if not job.reading.sheets:
        return file.sheets
    missing = [name for name in job.reading.sheets if not any(s.name == name for s in file.sheets)]
    if missing and file.sheets and file.sheets[0].name is not None:
        raise InputError(
            "the job file names a sheet that is not there",
            file=file.file,
            read=missing[0],
            right="one of " + ", ".join(str(s.name) for s in file.sheets),
        )
    return [s for s in file.sheets if s.name is None or s.name in job.reading.sheets]


def _refuse_without_list(file: SourceFile, sheets: list[SheetReading]) -> None:
    refusal = next((f for sheet in sheets for f in sheet.refusals), None)
    if refusal is not None and not any(sheet.tables for sheet in sheets):
        raise InputError(refusal.message, file=file.file, sheet=refusal.sheet, cell=refusal.cell, right=refusal.right)
    if not any(sheet.tables for sheet in sheets):
        near = next((s for s in sheets if s.kinds), None)
        raise InputError(
            "no member list was found",
            file=file.file,
            sheet=near.sheet.name if near else None,
            right="a row of headings such as Mark, Quantity, Section, Material, Length (mm), and rows below it",
        )
    tables = [t for sheet in sheets for t in sheet.tables]
    if not any(t.member_rows for t in tables):
        table = tables[0]
        raise InputError(
            "the list has headings but no rows",
            file=file.file,
            sheet=table.sheet.name,
            cell=f"A{table.heading_rows[0]}",
            right="member rows below the headings",
        )
    usable = {"section", "name", "size", *MEASURES}
    if not any(usable & set(t.columns) for t in tables):
        table = tables[0]
        raise InputError(
            "the list has neither sizes nor masses",
            file=file.file,
            sheet=table.sheet.name,
            cell=f"A{table.heading_rows[0]}",
            right="a column such as Section, Length (mm) or Unit mass (kg)",
        )


def _accounts(reading: Reading, frame: pd.DataFrame) -> list[SheetAccount]:
    """One account a sheet. The row span is counted from the sheet, the members' states from the weighed frame."""
    accounts = []
    statuses = frame.groupby([frame["file"], frame["sheet"].fillna("")], sort=False)["status"]
    by_sheet = {key: group.tolist() for key, group in statuses}
    for sheet in reading.sheets:
        rows = max(sheet.kinds) - min(sheet.kinds) + 1 if sheet.kinds else 0
        kinds = [kind for kind in sheet.kinds.values() if kind != "member"]
        account = account_of(rows, kinds, by_sheet.get((sheet.sheet.file, sheet.sheet.name or ""), []))
        account.check(f"{sheet.sheet.file}" + (f", sheet {sheet.sheet.name}" if sheet.sheet.name else ""))
        accounts.append(SheetAccount(sheet.sheet.file, sheet.sheet.name, account))
    return accounts


__all__ = ["CAUTIONS", "InputFile", "Reading", "Result", "TakeoffError", "read", "schedule", "weigh_reading"]
