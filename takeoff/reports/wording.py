"""Words that several outputs share: text made safe to show, places, evidence explained, what was refused. Rank 9."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from takeoff.findings import Finding
    from takeoff.pipeline import Result

LIKELY_IS_FOR = "for ordering and freight, never for lifting"
ROUNDED = "Figures shown are rounded to the nearest; totals are sums of unrounded figures."

#: evidence word -> what it promises, in the order of trust
EVIDENCE_MEANS = {
    "read2": "two independent texts agree on the figure",
    "read": "the figure was read in one text, often one that quotes the standard named",
    "recalled": "the figure is recalled from the source named and was not seen in print again: confirm it before relying on it",
    "computed": "worked out by this program from figures named in the row",
    "common practice": "no published source: the trade does it so",
}

STATUS_MEANS = {
    "weighed": "read plainly and weighed",
    "assumed": "weighed, but a name, unit or size was inferred: see Assumptions",
    "not weighed": "not in any total: see Not weighed",
}


def shown(text: object) -> str:
    """Text from a list as it may be shown on one line: no control signs, no direction or zero-width signs.

    Line breaks and tabs become blanks; other control signs, halves of signs and unassigned ones become a replacement sign,
    so that something is seen where they were.
    """
    text = str(text)
    if text.isprintable():  # nothing to be taken out, as nearly always
        return text.strip()
    out: list[str] = []
    for char in text:
        kind = unicodedata.category(char)
        if char in "\n\r\t\v\f\x85" or kind in {"Zl", "Zp"}:
            out.append(" ")
        elif kind in {"Cc", "Cs", "Co", "Cn"}:
            out.append("\ufffd")
        elif kind != "Cf":
            out.append(char)
    return " ".join("".join(out).split(" ")).strip()


def row_place(file: object, sheet: object, row: int) -> str:
    """Where a row stands: ``list.xlsx / Steel row 14``; a text file has no sheet, and `file` may be None where it is plain."""
    where = " / ".join(shown(part) for part in (file, sheet) if isinstance(part, str))
    return f"{where} row {row}".strip()


def pick_word(result: Result) -> str:
    """What this list's picks are: its own picks where it names any, else its assemblies."""
    return "pick" if result.members["pick"].notna().any() else "assembly"


@dataclass(frozen=True, slots=True)
class Refusal:
    """One reason why a row is not weighed. `read` and `right` may be absent."""

    index: int
    place: str
    cell: str | None
    read: str | None
    reason: str
    right: str | None


def refusals(result: Result, *, name_file: bool = True) -> Iterator[Refusal]:
    """Every reason of every row not weighed, in reading order; a row without a finding gives its own reason."""
    frame = result.members[result.members["status"].eq("not weighed")]
    columns = [frame[name].tolist() for name in ("file", "sheet", "row", "reason")]
    for index, file, sheet, row, reason in zip(frame.index.tolist(), *columns, strict=True):
        place = row_place(file if name_file else None, sheet, int(row))
        refused = [f for f in result.row_findings.get(index, ()) if f.level == "refused"]
        for finding in refused:
            yield Refusal(index, place, finding.cell, finding.read, finding.message, finding.right)
        if not refused:
            yield Refusal(index, place, None, None, reason if isinstance(reason, str) else "no reason was given", None)


def cells_text(finding: Finding, most: int) -> str:
    """The cells a finding stands on: the first `most`, and how many more."""
    cells = finding.cells or ((finding.cell,) if finding.cell else ())
    text = ", ".join(shown(c) for c in cells[:most])
    return f"{text} and {len(cells) - most} more" if len(cells) > most else text


def where(finding: Finding, most: int) -> str:
    """File, sheet and cells of a finding, as far as they are known."""
    parts = [shown(p) for p in (finding.file, finding.sheet) if p]
    cells = cells_text(finding, most)
    if cells:
        parts.append(cells)
    return " / ".join(parts)


def counted(number: int, one: str, many: str | None = None) -> str:
    """``1 row``, ``3 rows``."""
    return f"{number} {one if number == 1 else many or one + 's'}"


def listed(words: Iterable[str]) -> str:
    """``welds, bolts and contents``."""
    *most, last = list(words) or ["nothing"]
    return f"{', '.join(most)} and {last}" if most else last
