"""What `takeoff check` shows: how a list was read, before anyone relies on a mass. Rank 9."""

from __future__ import annotations

from collections import Counter
from typing import TYPE_CHECKING, Any

from takeoff.jobwriter import JobLine
from takeoff.jobwriter import shown as shown_lines
from takeoff.lists.columns import unit_of_column
from takeoff.lists.headings import MEASURES
from takeoff.lists.tables import Column, Table
from takeoff.reports.plainpage import Page
from takeoff.reports.wording import counted, listed, shown

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.pipeline import Reading, Result

#: kind of finding -> the one setting that settles it
_SETTLED_BY = {
    "unit-assumed": JobLine("reading", "length_unit", "mm", "if that is what bare lengths mean"),
    "implausible-size": JobLine("reading", "length_unit", "m", "if that is what bare lengths mean"),
    "decimal-assumed": JobLine("reading", "decimal", "point", 'or "comma"'),
    "hollow-standard-assumed": JobLine("names", "hollow", "hot", 'or "cold": what hollow sections without a standard are'),
    "moisture-unknown": JobLine("masses", "moisture_percent", 20.0, "of the wood, percent of its dry mass"),
}
#: kind of finding -> the table that gives a text its meaning
_NAMED = {
    **dict.fromkeys(("similar-section", "unknown-section", "ambiguous-section"), ("names.sections", "the section it stands for")),
    **dict.fromkeys(("similar-material", "unknown-material", "ambiguous-material"), ("names.materials", "the material it stands for")),
}
_SURE = ("exact", "alias")
_MOST_SHOWN = 12


def check_record(reading: Reading, result: Result) -> dict[str, Any]:
    """inputs, tables, sections, materials, findings and job_lines, as in the JSON of `check`."""
    accounts = {(a.file, a.sheet): a.account for a in result.sheet_accounts}
    return {
        "inputs": [{"file": f.file, "sha256": f.sha256, "sheets": list(f.sheets), "job_file": result.job_file} for f in result.inputs],
        "tables": [
            {
                "file": t.sheet.file, "sheet": t.sheet.name, "range": t.range, "heading_rows": t.heading_rows,
                "columns": [_column(c, t, reading) for c in t.all_columns], "rows": len(t.member_rows),
                "account": accounts[t.sheet.file, t.sheet.name].as_record(),
            }
            for t in reading.tables
        ],
        "account": result.account.as_record(),
        "sections": _named(reading, "section"),
        "materials": _named(reading, "material"),
        "not_weighed": [
            {"file": row.file, "sheet": row.sheet, "row": row.row, "mark": row.mark, "reason": row.reason}
            for row in result.members[result.members["status"] == "not weighed"].itertuples()
        ],
        "not_counted": list(result.totals.not_counted),
        "findings": [f.as_record() for f in result.all_findings()],
        "job_lines": shown_lines(job_lines(result.all_findings())),
    }


def _column(column: Column, table: Table, reading: Reading) -> dict[str, Any]:
    heading = column.heading
    used = heading is not None and table.columns.get(heading.field) is column
    field = heading.field if heading and used else None
    unit, unit_from = unit_of_column(table, field, reading.job) if field in MEASURES and field else (None, None)
    why = heading.why if heading else "not a heading we know"
    if heading and not used:
        why = "another column has this field already"
    return {"letter": column.letter, "heading": column.text, "field": field, "why": why, "unit": unit, "unit_from": unit_from}


def _named(reading: Reading, what: str) -> list[dict[str, Any]]:
    """Each distinct text of the section or material column: what it was taken for, how sure, on how many rows."""
    rows = Counter(reading.codes)
    merged: dict[tuple[str | None, str | None, str | None], int] = {}
    texts = reading.members.frame[f"{what}_text"].tolist()
    text_of = dict(zip(reading.codes, texts, strict=True))
    for code, found in enumerate(reading.recognised):
        thing = found.section if what == "section" else found.material
        name = None if thing is None else getattr(thing, "designation" if what == "section" else "key")
        key = (text_of.get(code), name, found.section_match if what == "section" else found.material_match)
        merged[key] = merged.get(key, 0) + rows[code]
    label = "designation" if what == "section" else "key"
    return [{"text": t, label: n, "match": m, "rows": count} for (t, n, m), count in merged.items() if t is not None or n is not None]


def job_lines(findings: list[Finding]) -> list[JobLine]:
    """Settings for job.toml that would settle what was assumed, or refused for want of a word."""
    lines: list[JobLine] = []
    for f in findings:
        if f.kind in _SETTLED_BY:
            lines.append(_SETTLED_BY[f.kind])
        elif f.kind == "unreadable-size" and f.right and "decimal" in f.right:
            lines.append(JobLine("reading", "decimal", "point", 'or "comma"'))
        elif f.kind == "material-absent" and f.level == "assumed":
            lines.append(JobLine("reading", "material", "S235", "what rows without a material are made of"))
        elif f.read and f.right and f.right.startswith("one of ") and f.kind in _NAMED:
            table, remark = _NAMED[f.kind]
            lines.append(JobLine(table, f.read, f.right.removeprefix("one of ").split(", ")[0], remark))
    return list(dict.fromkeys(lines))


def check_text(record: dict[str, Any], width: int) -> str:
    """The record for a terminal: tables and their columns, unsure names, what is refused, findings, the account."""
    page = Page(width)
    page.say(f"Not counted: {listed(shown(w) for w in record['not_counted'])}.", 0, 2)
    for table in record["tables"]:
        place = shown(table["file"]) + (f", sheet {shown(table['sheet'])}" if table["sheet"] else "")
        page.heading(f"{place}: list at {table['range']}, {counted(table['rows'], 'member row')}")
        for column in table["columns"]:
            unit = f", {column['unit']} ({column['unit_from']})" if column["unit"] else ""
            taken = (column["field"] or "left alone").replace("_", " ")
            why = f" [{column['why'].partition('; ')[2]}]" if "; " in column["why"] else ""
            page.say(f"{column['letter']:<3} {shown(column['heading'])} -> {taken}{unit}{why}", 2, 6)
    for what, label in (("section", "designation"), ("material", "key")):
        found = record[f"{what}s"]
        sure = [n for n in found if n["match"] in _SURE]
        unsure = [n for n in found if n["match"] not in _SURE]
        page.heading(f"{what.capitalize()}s: {len(sure)} of {len(found)} names recognised")
        for name in unsure[:_MOST_SHOWN]:
            taken = f" -> {shown(name[label])}" if name[label] else ""
            page.say(f"{name['match'] or 'none'}: {shown(name['text'] or '(blank)')}{taken} ({counted(name['rows'], 'row')})", 2, 4)
        if len(unsure) > _MOST_SHOWN:
            page.say(f"and {len(unsure) - _MOST_SHOWN} more (see --json)", 2, 4)
    lacking = record["not_weighed"]
    page.heading(f"Would not be weighed: {counted(len(lacking), 'row')}")
    for row in lacking[:_MOST_SHOWN]:
        place = (f"{shown(row['sheet'])}, " if row["sheet"] else "") + f"row {row['row']}"
        page.say(f"{place}, {shown(row['mark'] or '(no mark)')}: {shown(row['reason'])}", 2, 4)
    if len(lacking) > _MOST_SHOWN:
        page.say(f"and {len(lacking) - _MOST_SHOWN} more (see --json)", 2, 4)
    for level, title in (("refused", "Refused"), ("assumed", "Assumed"), ("note", "Noted")):
        findings = [f for f in record["findings"] if f["level"] == level]
        if not findings:
            continue
        page.heading(title)
        for f in findings[:_MOST_SHOWN]:
            read = f" (read: {shown(f['read'])})" if f["read"] else ""
            right = f"; right would be {shown(f['right'])}" if f["right"] and level != "note" else ""
            cells = f", {f['count']} rows" if f["count"] > 1 else ""
            page.say(f"{f['cell'] or shown(f['sheet'] or f['file'] or '')}{cells}: {shown(f['message'])}{read}{right}", 2, 4)
        if len(findings) > _MOST_SHOWN:
            page.say(f"and {len(findings) - _MOST_SHOWN} more (see --json)", 2, 4)
    account = record["account"]
    parts = [f"{number} {part.replace('_', ' ')}" for part, number in account.items() if part != "rows"]
    page.heading(f"Account: {account['rows']} rows read = " + " + ".join(parts))
    if record["job_lines"]:
        page.heading("Lines for job.toml that would settle this")
        for line in record["job_lines"]:
            page.say(line, 2, 4)
    return page.text()
