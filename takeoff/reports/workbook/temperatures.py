"""The sheet of lengths at the job's named temperatures: materials there, each member's length and tape reading, and runs. Rank 9.

Lengths are live: the length at reference times the growth of the member's material, which stands above with its source.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from takeoff.reports import rounding
from takeoff.reports.thermal import coefficient_text, degrees, law_text, unit
from takeoff.reports.wording import counted, shown
from takeoff.reports.workbook.sheet import Book, letters

if TYPE_CHECKING:
    from takeoff.pipeline import Result
    from takeoff.thermal.members import Temperatures
    from takeoff.thermal.runs import Joint, RunMovement

TEMPERATURES = "Temperatures"

#: columns before the figures of each named temperature
_ROW, _MARK, _PIECES, _MATERIAL, _FIRST = range(5)
#: above this many members, figures stand without formulas
_MOST_LIVE = 20_000


class _Writer:
    """The sheet being written, downward; `elongations` are the rows where each material's growth stands."""

    def __init__(self, book: Book, result: Result, at: Temperatures) -> None:
        self.sheet, self.result, self.at = book.sheets[TEMPERATURES], result, at
        self.units = book.units
        self.names = at.names
        self.figure = "rounded 3" if self.units == "us" else "rounded 2"
        self.row = 0
        self.elongations: dict[int, int] = {}
        self.tape_row = 0
        self.width = _FIRST + max(2 * len(self.names), 2 * len(at.named) + 2, 7)

    def mm(self, value: float | None) -> float | None:
        return None if value is None or value != value else value / rounding.MM_PER_IN if self.units == "us" else value  # noqa: PLR0124

    def of(self, name: str) -> str:
        """A name of temperature with its degrees."""
        return f"{shown(name)} {degrees(self.at.named[name], self.units)}" if name in self.at.named else shown(name)

    # -- blocks --------------------------------------------------------------------------------------------------------

    def top(self) -> None:
        sheet = self.sheet
        sheet.widths([7, 14, 7.5, 24, *[11.5] * (self.width - _FIRST)])
        sheet.height(0, 24)
        sheet.text(0, 0, f"{TEMPERATURES}: {sheet.book.title}", "title")
        sheet.text(1, 0, sheet.book.subtitle or None, "subtitle")
        tape = "a steel tape" if self.at.tape is None else f"a tape of {shown(self.at.tape.name)}"
        self.row = 2
        self.paragraph(f"True lengths at the metal's own temperature, and what {tape} that is true at {degrees(20.0, self.units)} reads. "
                       f"Mark “cut” lengths with the tape at the same temperature as the piece.")
        for caution in self.result.cautions[-2:]:
            self.paragraph(shown(caution))
        self.row += 1

    def paragraph(self, text: str, style: str = "quiet wrap") -> None:
        self.sheet.long_text(self.row, (0, min(self.width, 12) - 1), text, style)
        self.row += 1

    def materials(self) -> None:
        """Two lines a material: millionths of growth from 20 °C, and density; its coefficient, law and bounds below."""
        sheet = self.sheet
        sheet.heading(self.row, "Materials: growth from 20 °C in millionths, and density, at each temperature", self.width)
        self.row += 1
        self.heads(("", "", "", "Material", *(self.of(name) for name in self.at.named)), _FIRST)
        for number, found in enumerate(self.at.materials):
            self.elongations[number] = self.row
            growth = [None if e.value is None else e.value * 1e6 for e, _ in found.at.values()]
            self.line(f"{shown(found.material.name)}: growth", growth, "rounded 2")
            density = [d.density.nominal if d.density else None for _, d in found.at.values()]
            us = self.units == "us"
            factor = 0.45359237 / 0.3048**3 if us else 1.0
            self.line(f"density, {'lb/ft³' if us else 'kg/m³'}", [None if d is None else d / factor for d in density], "rounded 1")
            bounds = f"coefficient x {found.spread.low:.3f} to x {found.spread.high:.3f} ({found.spread.source})"
            for text in (f"{coefficient_text(found.material, self.units)}", f"Law: {law_text(found.law, self.units)}", f"Bounds: {bounds}"):
                sheet.text(self.row, 0, None, "text")
                sheet.long_text(self.row, (_MATERIAL, min(self.width, 12) - 1), text, "quiet wrap")
                self.row += 1
        self.tape_row = self.row
        from takeoff.thermal.lengths import tape_factor

        longer = [tape_factor(t, self.at.tape) for t in self.at.named.values()]
        self.line("The tape: growth", [None if f is None else (f - 1) * 1e6 for f in longer], "rounded 2")
        self.row += 1

    def line(self, text: str, values: Sequence[float | None], style: str) -> None:
        self.sheet.texts(self.row, 0, ("", "", ""), "cell")
        self.sheet.text(self.row, _MATERIAL, text, "cell wrap")
        for offset, value in enumerate(values):
            self.sheet.number(self.row, _FIRST + offset, value, style)
        self.row += 1

    def heads(self, texts: Sequence[str], first_figure: int) -> None:
        self.sheet.height(self.row, 42)
        for column, text in enumerate(texts):
            self.sheet.text(self.row, column, text, "head right" if column >= first_figure or column in (_ROW, _PIECES) else "head")
        self.row += 1

    def members(self) -> None:
        sheet, at, frame = self.sheet, self.at, self.result.members
        sheet.heading(self.row, f"Members: length of one piece ({unit(self.units)})", self.width)
        self.row += 1
        figures = (f"{self.of(n)}: {what}" for n in self.names for what in ("true", "tape reads"))
        self.heads(("Row", "Mark", "Pieces", "Material", *figures), _FIRST)
        columns = [frame[key].tolist() for key in ("row", "mark", "quantity", "material")]
        lengths = {name: at.sizes_mm[name]["length"].tolist() for name in self.names}
        readings = {name: at.readings_mm[name].tolist() for name in self.names}
        kinds, live = at.material_of.tolist(), len(frame) <= _MOST_LIVE
        for i, (row, mark, pieces, material) in enumerate(zip(*columns, strict=True)):
            if all(lengths[name][i] != lengths[name][i] for name in self.names):
                continue
            sheet.number(self.row, _ROW, row, "whole")
            sheet.text(self.row, _MARK, mark, "cell")
            sheet.number(self.row, _PIECES, pieces, "whole")
            sheet.text(self.row, _MATERIAL, material, "cell")
            for n, name in enumerate(self.names):
                column = _FIRST + 2 * n
                self.length(column, name, self.mm(lengths[name][i]), kinds[i] if live else -1)
                reading = self.mm(readings[name][i])
                if live and name in at.named and reading is not None:
                    growth = f"{letters(_FIRST + n)}${self.tape_row + 1}"
                    sheet.formula(self.row, column + 1, f"={letters(column)}{self.row + 1}/(1+{growth}/1000000)", reading, self.figure)
                else:
                    sheet.number(self.row, column + 1, reading, self.figure)
            self.row += 1
        self.row += 1

    def length(self, column: int, name: str, value: float | None, kind: int) -> None:
        """A length as the length at reference times the growth of its material; the reference itself as a figure."""
        names = list(self.at.named)
        if kind < 0 or value is None or name not in self.at.named or name == names[0]:
            self.sheet.number(self.row, column, value, self.figure)
            return
        there, home = (f"{letters(_FIRST + names.index(n))}${self.elongations[kind] + 1}" for n in (name, names[0]))
        formula = f"={letters(_FIRST)}{self.row + 1}*(1+{there}/1000000)/(1+{home}/1000000)"
        self.sheet.formula(self.row, column, formula, value, self.figure)

    def refusals(self) -> None:
        """What has no length at some temperature, and why: its mass stands all the same."""
        kinds = {"above-melting", "no-coefficient"}
        for finding in self.result.log.gathered():
            if finding.level == "refused" and finding.kind in kinds:
                cells = ", ".join(finding.cells[:20])
                self.paragraph(f"No length: {shown(finding.message)} ({shown(cells)}). The mass stands.", "bold wrap")

    def runs(self) -> None:
        sheet = self.sheet
        sheet.heading(self.row, f"Movements: runs of members fixed at one point ({unit(self.units)})", self.width)
        self.row += 1
        for run in self.result.movements:
            self.run(run)

    def run(self, run: RunMovement) -> None:
        units = self.units
        sheet = self.sheet
        sheet.height(self.row, 18)
        sheet.text(self.row, 0, f"Run {shown(run.run)}: {counted(run.pieces, 'piece')}, fixed at the {shown(run.fixed_at)}", "bold")
        self.row += 1
        if run.movement_mm is not None:
            for label, value in (
                (f"Length at {degrees(self.at.named['reference'], units)}", run.length_mm),
                (f"Movement from {degrees(run.from_C, units)} to {degrees(run.to_C, units)}", run.movement_mm),
                ("with the low coefficient", run.movement_low_mm), ("with the high coefficient", run.movement_high_mm),
                ("at the line's start, outward", run.movement_at_start_mm), ("at the line's end, outward", run.movement_at_end_mm),
                (f"Closing after setting at {degrees(run.set_at_C, units)}", run.closing_mm),
                (f"Opening after setting at {degrees(run.set_at_C, units)}", run.opening_mm),
            ):
                sheet.texts(self.row, 0, ("", "", ""), "cell")
                sheet.text(self.row, _MATERIAL, label, "cell wrap")
                sheet.number(self.row, _FIRST, self.mm(value), self.figure)
                self.row += 1
        for finding in run.findings:
            right = f" Right would be: {shown(finding.right)}." if finding.right else ""
            read = f" (read: {shown(finding.read)})" if finding.read else ""
            style = "bold wrap" if finding.level == "refused" else "wrap"
            self.paragraph(f"{finding.level.capitalize()}: {shown(finding.message)}{read}.{right}", style)
        if run.joints:
            names = list(self.at.named)
            self.heads(
                ("Joint", "After", "", "Before", *(f"Position, {self.of(n)}" for n in names), *(f"Gap, {self.of(n)}" for n in names),
                 "Gap to set", "Piece ends at, when set"), _FIRST,
            )
            for number, joint in enumerate(run.joints):
                self.joint(number + 1, joint, names)
        self.row += 1

    def joint(self, number: int, joint: Joint, names: Sequence[str]) -> None:
        sheet = self.sheet
        sheet.number(self.row, 0, number, "whole")
        sheet.text(self.row, 1, joint.after or "(start of the line)", "cell wrap")
        sheet.text(self.row, 2, None, "cell")
        sheet.text(self.row, 3, joint.before or "(end of the line)", "cell wrap")
        values = [joint.position_mm.get(n) for n in names] + [joint.gap_mm.get(n) for n in names] + [joint.gap_to_set_mm, joint.set_out_mm]
        for offset, value in enumerate(values):
            sheet.number(self.row, _FIRST + offset, self.mm(value), self.figure)
        self.row += 1


def write(book: Book, result: Result) -> None:
    """Write the sheet of a result that has temperatures."""
    assert result.temperatures is not None
    writer = _Writer(book, result, result.temperatures)
    writer.top()
    writer.materials()
    writer.refusals()
    writer.members()
    if result.movements:
        writer.runs()
