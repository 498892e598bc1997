"""The page's end: on what each mass rests, the materials' densities, what the words mean, inputs and the account of rows. Rank 9."""

from __future__ import annotations

from typing import TYPE_CHECKING

from takeoff.reports import added, rounding
from takeoff.reports.page.parts import Cell, Column, Row, Table, cells
from takeoff.reports.rounding import NO_BREAK
from takeoff.reports.wording import EVIDENCE_MEANS, STATUS_MEANS, shown

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.provenance import Source

_PARTS = ("weighed", "assumed", "not_weighed", "heading", "total", "blank", "other")


def tables(result: Result) -> list[Table]:
    """Every table of the last section, in reading order."""
    return [
        bases(result),
        *([additions(result)] if result.added_bases else []),
        densities(result),
        words(),
        inputs(result),
        account(result),
    ]


def _source(source: Source) -> list[str]:
    return [shown(source.title), shown(source.clause), source.evidence]


_SOURCE = [Column("Source"), Column("Clause or table"), Column("Evidence")]


def bases(result: Result) -> Table:
    """How each mass was found, numbered as in the schedule."""
    columns = [
        Column("Basis no.", True),
        Column("Rule of the nominal mass"),
        *_SOURCE,
        Column("Rule of light and heavy"),
        *_SOURCE,
        Column("Rows", True),
    ]
    table = Table("bases", "Bases: how each mass was found, numbered as in the schedule", columns)
    uses = result.members["basis_id"].value_counts().to_dict()
    for number, basis in enumerate(result.bases):
        marks = [m for m, so in (("stated in the list", basis.stated), ("own table", basis.own), ("weighed", basis.weighed)) if so]
        rule = shown(basis.rule) + (f" ({', '.join(marks)})" if marks else "")
        rows = uses.get(number, 0)
        table.rows.append(
            Row(
                [
                    Cell(str(number + 1), number + 1),
                    *cells(rule, *_source(basis.nominal), shown(basis.bounds_rule), *_source(basis.bounds)),
                    Cell(str(rows), rows),
                ],
                f"basis-{number}",
            )
        )
    return table


def additions(result: Result) -> Table:
    """How each addition was found."""
    columns = [
        Column("Basis no."),
        Column("Rule of what is added to one piece"),
        *_SOURCE,
        Column("Rule of light and heavy"),
        *_SOURCE,
        Column("Rows", True),
    ]
    table = Table("additions", "Additions: finish, welds, bolts, contents and the like", columns)
    for number, (basis, rows) in enumerate(zip(result.added_bases, added.uses(result), strict=True)):
        table.rows.append(
            Row(
                [
                    *cells(f"A{number + 1}", shown(basis.rule), *_source(basis.nominal), shown(basis.bounds_rule), *_source(basis.bounds)),
                    Cell(str(rows), rows),
                ]
            )
        )
    return table


def densities(result: Result) -> Table:
    """Densities of the materials the list names."""
    columns = [Column("Material"), *(Column(f"{w} (kg/m³)", True) for w in ("Low", "Nominal", "High")), Column("Condition"), *_SOURCE]
    table = Table("densities", "Densities of the materials named in the list", columns)
    for m in result.materials:
        figures = [Cell(rounding.number(v, 0, gap=NO_BREAK), v) for v in (m.density.low, m.density.nominal, m.density.high)]
        own = " (own table)" if m.own else ""
        table.rows.append(Row([Cell(shown(m.name) + own), *figures, *cells(shown(m.density_condition), *_source(m.density_source))]))
    return table


def words() -> Table:
    """What the words of evidence and state promise."""
    table = Table("words", "What the words mean", [Column("Kind"), Column("Word"), Column("Meaning")], tools=False)
    for kind, meanings in (("evidence", EVIDENCE_MEANS), ("state", STATUS_MEANS)):
        table.rows += [Row(cells(kind, word, meaning)) for word, meaning in meanings.items()]
    return table


def inputs(result: Result) -> Table:
    """Every list with its checksum, and the job file."""
    table = Table(
        "inputs", "Inputs", [Column("Kind"), Column("File"), Column("Sheets with a list"), Column("Checksum (SHA-256)")], tools=False
    )
    table.rows = [
        Row(cells("list", shown(i.file), ", ".join(shown(s) for s in i.sheets) or "(text file: no sheets)", i.sha256))
        for i in result.inputs
    ]
    if result.job_file:
        table.rows.append(Row(cells("job file", shown(result.job_file), "", "")))
    return table


def account(result: Result) -> Table:
    """Rows read = rows accounted for."""
    columns = [Column("Sheet"), Column("Rows read", True), *(Column(part.replace("_", " ").capitalize(), True) for part in _PARTS)]
    table = Table("account", "Account of rows: every row from the first with content to the last", columns, tools=False)
    parts = (
        [("All", result.account)]
        if not result.sheet_accounts
        else [(" / ".join(shown(p) for p in (a.file, a.sheet) if p), a.account) for a in result.sheet_accounts]
    )
    for name, of in parts:
        table.rows.append(Row([Cell(name), Cell(str(of.rows), of.rows), *(Cell(str(getattr(of, p)), getattr(of, p)) for p in _PARTS)]))
    of = result.account
    table.foot = Row([Cell("All"), Cell(str(of.rows), of.rows), *(Cell(str(getattr(of, p)), getattr(of, p)) for p in _PARTS)])
    return table
