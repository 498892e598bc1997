"""Many rows of one sheet at once, column by column. Rank 9.

A long list is millions of cells, and the writer's own way takes each through a dozen calls. Where the workbook goes to
disk row by row, the cells of a block are put into XML here, a column at a time, each distinct text once, and the rows are
handed to the writer's file as they are. Elsewhere the same calls go cell by cell to `Sheet`, and give the same cells.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from itertools import repeat
from types import TracebackType
from typing import TYPE_CHECKING, Self

if TYPE_CHECKING:
    from takeoff.reports.workbook.sheet import Sheet

Styles = str | Sequence[str]

#: what a spreadsheet program would take for an escaped sign, in text that means it literally
_ESCAPE_LIKE = re.compile(r"(_x[0-9a-fA-F]{4}_)")


class Block:
    """Rows `first` to `first + count - 1` (from 0) of a sheet; columns are given left to right, none left out.

    In every column the values are one a row. None, NaN and the empty text are blank cells.
    """

    def __init__(self, sheet: Sheet, first: int, count: int) -> None:
        self.sheet, self.first, self.count = sheet, first, count
        self.quick = sheet.raw.constant_memory and sheet.raw.row_data_fh is not None
        self.rows = range(first, first + count)
        self.columns: list[list[str]] = []
        self.numbers_of_rows = [str(row + 1) for row in self.rows] if self.quick else []
        self.heights: dict[int, float] = {}

    def __enter__(self) -> Self:
        return self

    def __exit__(self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None) -> None:
        if self.quick and error is None and self.count:
            self._write()

    def _place(self) -> tuple[int, str]:
        """The next column, and its letters."""
        from takeoff.reports.workbook.sheet import letters

        return len(self.columns), letters(len(self.columns))

    def _styles(self, styles: Styles) -> Sequence[str]:
        """Each row's format as the file numbers it."""
        if isinstance(styles, str):
            return list(repeat(str(self.sheet.styles[styles]._get_xf_index()), self.count))
        known = {style: str(self.sheet.styles[style]._get_xf_index()) for style in dict.fromkeys(styles)}
        return [known[style] for style in styles]

    def texts(self, values: Sequence[str | None], styles: Styles) -> None:
        column, letter = self._place()
        if not self.quick:
            for row, value, style in zip(self.rows, values, self._names(styles), strict=True):
                self.sheet.text(row, column, value, style)
            self.columns.append([])
            return
        known: dict[str | None, str] = {None: "/>", "": "/>"}
        lines: dict[str, int] = {}
        wraps = isinstance(styles, str) and self.sheet.wraps(styles)
        cells: list[str] = []
        for row, number, value, style in zip(self.rows, self.numbers_of_rows, values, self._styles(styles), strict=True):
            inside = known.get(value)
            if inside is None:
                assert value is not None
                inside, lines[value] = self._inside(value, column, str(styles) if wraps else None)
                known[value] = inside
            if wraps and value and lines[value] > 1:
                self.heights[row] = max(self.heights.get(row, 0.0), self.sheet.points(lines[value]))
            cells.append(f'<c r="{letter}{number}" s="{style}"{inside}')
        self.columns.append(cells)

    def _inside(self, value: str, column: int, wrapped: str | None) -> tuple[str, int]:
        """A text as the rest of its cell, and the lines it takes."""
        from takeoff.reports.workbook.sheet import cell_text

        clean = cell_text(value)
        lines = self.sheet.lines(clean, column, wrapped) if wrapped else 1
        text = _ESCAPE_LIKE.sub(r"_x005F\1", clean).replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")
        kept = ' xml:space="preserve"' if clean[:1].isspace() or clean[-1:].isspace() or "\n" in clean else ""
        return f' t="inlineStr"><is><t{kept}>{text}</t></is></c>', lines

    def numbers(self, values: Sequence[float | None], styles: Styles) -> None:
        column, letter = self._place()
        if not self.quick:
            for row, value, style in zip(self.rows, values, self._names(styles), strict=True):
                self.sheet.number(row, column, value, style)
            self.columns.append([])
            return
        self.columns.append([
            f'<c r="{letter}{number}" s="{style}"/>' if value is None or value != value  # noqa: PLR0124 - NaN alone differs from itself
            else f'<c r="{letter}{number}" s="{style}"><v>{value:.16G}</v></c>'
            for number, value, style in zip(self.numbers_of_rows, values, self._styles(styles), strict=True)
        ])

    def formulas(self, formula: str, values: Sequence[float | None], styles: Styles) -> None:
        """Live formulas with their results; ``#`` in `formula` stands for the number of the row, as ``=B#*C#``."""
        column, letter = self._place()
        parts = formula.split("#")
        if not self.quick:
            for row, value, style in zip(self.rows, values, self._names(styles), strict=True):
                if value is None or value != value:  # noqa: PLR0124
                    self.sheet.text(row, column, None, style)
                else:
                    self.sheet.formula(row, column, str(row + 1).join(parts), value, style)
            self.columns.append([])
            return
        parts = [part.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;") for part in parts]
        parts[0] = parts[0].removeprefix("=")
        self.columns.append([
            f'<c r="{letter}{number}" s="{style}"/>' if value is None or value != value  # noqa: PLR0124
            else f'<c r="{letter}{number}" s="{style}"><f>{number.join(parts)}</f><v>{value!r}</v></c>'
            for number, value, style in zip(self.numbers_of_rows, values, self._styles(styles), strict=True)
        ])

    def links(self, targets: Sequence[tuple[str, int] | None], style: str = "link", blank: str = "cell") -> None:
        """Numbers that lead to another place of the workbook, ``("'Basis'!A4", 3)``; None is a blank cell.

        In a long list they are numbers alone: a sheet may have only so many links.
        """
        column, letter = self._place()
        if not self.quick:
            for row, target in zip(self.rows, targets, strict=True):
                if target is None:
                    self.sheet.text(row, column, None, blank)
                else:
                    self.sheet.link(row, column, *target, style)
            self.columns.append([])
            return
        shown, empty = (str(self.sheet.styles[name]._get_xf_index()) for name in ("whole", blank))
        self.columns.append([
            f'<c r="{letter}{number}" s="{empty}"/>' if target is None else f'<c r="{letter}{number}" s="{shown}"><v>{target[1]}</v></c>'
            for number, target in zip(self.numbers_of_rows, targets, strict=True)
        ])

    def by_cell(self, write: Callable[[int, int, int], None]) -> None:
        """A column that is written cell by cell, by number in the block, row and column. Not in a quick block."""
        column, _ = self._place()
        for number, row in enumerate(self.rows):
            write(number, row, column)
        self.columns.append([])

    def _names(self, styles: Styles) -> Sequence[str]:
        return list(repeat(styles, self.count)) if isinstance(styles, str) else styles

    def _write(self) -> None:
        raw = self.sheet.raw
        # What the writer still holds of the row above goes first; then it is told how far the sheet reaches now.
        raw._write_single_row(self.first)
        for row in (self.first, self.rows[-1]):
            raw._check_dimensions(row, len(self.columns) - 1)
        heights = self.heights
        self.sheet.note_heights(heights)
        rows = [
            f'<row r="{number}"' + (f' ht="{heights[row]:.16g}" customHeight="1">' if row in heights else ">") + "".join(cells) + "</row>"
            for row, number, cells in zip(self.rows, self.numbers_of_rows, zip(*self.columns, strict=True), strict=True)
        ]
        raw.row_data_fh.write("".join(rows))
        raw.previous_row = self.rows[-1]
