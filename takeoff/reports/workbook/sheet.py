"""One workbook and its sheets: styles, page set-up, and writing cells so that text stays text. Rank 9."""

from __future__ import annotations

import contextlib
import re
import tempfile
import textwrap
from collections.abc import Iterable, Mapping, Sequence
from datetime import UTC, date, datetime
from pathlib import Path
from types import TracebackType
from typing import TYPE_CHECKING, Any, Self

from takeoff.reports.rounding import Units
from takeoff.reports.wording import shown
from takeoff.reports.workbook.block import Block

if TYPE_CHECKING:
    from takeoff.pipeline import Result

#: the sheets by name, in the order they lie
SUMMARY, CHARTS, SCHEDULE, PICKS = "Summary", "Charts", "Weight schedule", "Picks"
NOT_WEIGHED, ASSUMPTIONS, BASIS = "Not weighed", "Assumptions", "Basis and sources"
#: sheets that are there where there is something for them
LOADS, CHANGES, DRAWINGS = "Loads", "Changes", "Drawings"
SHEETS = (SUMMARY, CHARTS, SCHEDULE, PICKS, NOT_WEIGHED, ASSUMPTIONS, BASIS)

#: what a spreadsheet cell can hold
MOST_CHARACTERS = 32_767
#: the program writes no more links than a sheet may have
MOST_LINKS = 65_000

INK, QUIET, RULE, HEAD = "#1F2A30", "#5B666C", "#A9B2B0", "#E9ECE6"
FONT = "Arial"

#: kg or lb: more decimals where a figure is small, so that showing never hides a part in a thousand; `_n` keeps a figure
#: clear of the text in the next column
MASS = "[<0.0005]0_n;[<10]0.000_n;#,##0.0_n"
WHOLE = "#,##0_n"
SIZE = "#,##0.##_n"

_STYLES: dict[str, dict[str, Any]] = {
    "text": {}, "wrap": {"text_wrap": True}, "bold": {"bold": True}, "quiet": {"font_color": QUIET},
    "quiet wrap": {"font_color": QUIET, "text_wrap": True},
    "bold wrap": {"bold": True, "text_wrap": True},
    "title": {"bold": True, "font_size": 17}, "subtitle": {"font_size": 11, "font_color": QUIET},
    "block": {"bold": True, "font_size": 12, "bottom": 2, "bottom_color": INK},
    "block link": {"indent": 1, "bottom": 2, "bottom_color": INK, "underline": 1, "align": "left"},
    "head": {
        "bold": True, "text_wrap": True, "bg_color": HEAD, "bottom": 1, "bottom_color": INK, "valign": "bottom",
        "align": "left", "indent": 1,
    },
    "head right": {
        "bold": True, "text_wrap": True, "bg_color": HEAD, "bottom": 1, "bottom_color": INK, "valign": "bottom",
        "align": "right", "indent": 1,
    },
    "cell": {"indent": 1, "bottom": 7, "bottom_color": RULE},
    "cell wrap": {"indent": 1, "bottom": 7, "bottom_color": RULE, "text_wrap": True},
    "cell bold": {"indent": 1, "bottom": 7, "bottom_color": RULE, "bold": True},
    "cell bold wrap": {"indent": 1, "bottom": 7, "bottom_color": RULE, "bold": True, "text_wrap": True},
    "cell italic": {"indent": 1, "bottom": 7, "bottom_color": RULE, "italic": True},
    "cell quiet": {"indent": 1, "bottom": 7, "bottom_color": RULE, "font_color": QUIET},
    "cell right": {"bottom": 7, "bottom_color": RULE, "align": "right", "indent": 1},
    "mass": {"bottom": 7, "bottom_color": RULE, "num_format": MASS},
    "mass heavy": {"bottom": 7, "bottom_color": RULE, "num_format": MASS, "bold": True},
    "whole": {"bottom": 7, "bottom_color": RULE, "num_format": WHOLE},
    **{
        f"rounded {places}{heavy}": {"bottom": 7, "bottom_color": RULE, "num_format": f"{form}_n", "bold": bool(heavy)}
        for places, form in enumerate(("#,##0", "#,##0.0", "#,##0.00", "#,##0.000")) for heavy in ("", " heavy")
    },
    "size us": {"bottom": 7, "bottom_color": RULE, "num_format": "#,##0.000_n"},
    "size": {"bottom": 7, "bottom_color": RULE, "num_format": SIZE},
    "share": {"bottom": 7, "bottom_color": RULE, "num_format": "0.000000_n"},
    "factor": {"bottom": 7, "bottom_color": RULE, "num_format": "0.00##_n"},
    "link": {"indent": 1, "bottom": 7, "bottom_color": RULE, "underline": 1, "align": "left"},
    "link wrap": {"indent": 1, "bottom": 7, "bottom_color": RULE, "underline": 1, "text_wrap": True},
    "total": {"indent": 1, "bold": True, "top": 1, "bottom": 1, "bottom_color": INK, "top_color": INK},
    "total mass": {"bold": True, "top": 1, "bottom": 1, "num_format": MASS},
    "total whole": {"bold": True, "top": 1, "bottom": 1, "num_format": WHOLE},
    "total wrap": {"indent": 1, "bold": True, "top": 1, "bottom": 1, "text_wrap": True},
    "shown": {"indent": 1, "italic": True, "font_color": QUIET}, "shown mass": {"italic": True, "font_color": QUIET, "num_format": MASS},
    "shown whole": {"italic": True, "font_color": QUIET, "num_format": WHOLE},
    "figure": {"bold": True, "font_size": 15, "num_format": WHOLE, "bottom": 7, "bottom_color": RULE},
    "figure 1": {"bold": True, "font_size": 15, "num_format": "#,##0.0_n", "bottom": 7, "bottom_color": RULE},
    "figure 2": {"bold": True, "font_size": 15, "num_format": "#,##0.00_n", "bottom": 7, "bottom_color": RULE},
    "figure 3": {"bold": True, "font_size": 15, "num_format": "#,##0.000_n", "bottom": 7, "bottom_color": RULE},
    "signed": {"bottom": 7, "bottom_color": RULE, "num_format": "+#,##0.0##_n;-#,##0.0##_n;0_n"},
    "force": {"bottom": 7, "bottom_color": RULE, "num_format": "#,##0.0#_n"},
}

_WRAPPED = {name for name, style in _STYLES.items() if style.get("text_wrap")}
_BOLD = {name for name, style in _STYLES.items() if style.get("bold")}
#: height of a line of text in points, and the tallest row a sheet may have
_LINE, _TALLEST = 12.75, 400.0
#: height of a row that nothing is said about
_ROW = 15.0

# What XML cannot carry, and what has no look of its own; line feed and tab may stand in a cell.
_UNSHOWABLE = re.compile(
    "[\x00-\x08\x0b\x0c\x0d\x0e-\x1f\x7f-\x9f\u00ad\u200b-\u200f\u202a-\u202e\u2060-\u2064\u2066-\u2069\ufeff\ufffe\uffff\ud800-\udfff]"
)


def cell_text(text: object) -> str:
    """Text as a cell can hold it: no control, direction or zero-width signs, no more characters than a cell takes."""
    clean = _UNSHOWABLE.sub("", str(text))
    if len(clean) > MOST_CHARACTERS:
        end = " … (cut: a cell holds no more)"
        clean = clean[: MOST_CHARACTERS - len(end)] + end
    # The writer takes text in these marks for its own rich text and would write it as raw markup.
    if clean.startswith("<r>") and clean.endswith("</r>"):
        clean += " "
    return clean


def lines_of(text: str, width: float) -> int:
    """How many lines a text takes in a column of this width (characters), broken at blanks."""
    if len(text) <= width and "\n" not in text:
        return 1
    return sum(len(textwrap.wrap(line, max(1, int(width)), break_on_hyphens=False)) or 1 for line in text.split("\n"))


def _fill(style: str) -> float:
    """Characters of running text to a unit of column width, which is that of a digit."""
    return 1.0 if style in _BOLD else 1.1


class Book:
    """An open workbook. As a context it is closed (written) at the end, or dropped where something failed."""

    def __init__(self, path: str | Path, result: Result, *, many: bool) -> None:
        import xlsxwriter

        job = result.job.job
        self.folder = Path(path).resolve().parent
        self.units: Units = job.units
        self.mass_unit = "kg" if job.units == "si" else "lb"
        self.title = shown(job.title) if job.title else "Weight schedule"
        said = (job.reference, f"revision {job.revision}" if job.revision else None, job.date)
        self.subtitle = ", ".join(shown(p) for p in said if p)
        # The writer's own scratch files lie in one folder, so that none is left behind where writing fails.
        self._scratch = tempfile.TemporaryDirectory(prefix="takeoff-")
        self._book = xlsxwriter.Workbook(str(path), {
            "tmpdir": self._scratch.name, "strings_to_formulas": False, "strings_to_urls": False, "strings_to_numbers": False,
            "constant_memory": many, "default_format_properties": {"font_name": FONT, "font_size": 10},
        })
        self._book.set_properties({
            "title": f"Weight schedule: {self.title}"[:250], "author": shown(job.prepared_by or "")[:250],
            "comments": "Weight schedule written by takeoff", "created": _created(job.date),
        })
        self._book.set_custom_property("takeoff", "weight schedule")
        base = {"font_name": FONT, "font_size": 10, "font_color": INK, "valign": "vcenter"}
        self.styles = {name: self._book.add_format(base | extra) for name, extra in _STYLES.items()}
        self.sheets: dict[str, Sheet] = {}

    def add(self, name: str) -> None:
        sheet = self._book.add_worksheet(name)
        self.sheets[name] = Sheet(self, sheet, name)

    def chart(self, options: dict[str, str]) -> Any:
        """A chart to be filled and then placed with `Sheet.chart`, or combined with another."""
        return self._book.add_chart(options)

    def __enter__(self) -> Self:
        return self

    def __exit__(self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None) -> None:
        from xlsxwriter.exceptions import FileCreateError, FileSizeError

        try:
            if error is None:
                self._book.close()
        except FileCreateError as problem:
            cause = problem.args[0] if problem.args else None
            raise cause if isinstance(cause, OSError) else OSError(str(problem)) from problem
        except FileSizeError as problem:
            raise OSError("the workbook is larger than its format allows") from problem
        finally:
            self._book.fileclosed = True  # keeps the writer from writing half a file when it is collected
            for sheet in self._book.worksheets():
                if sheet.row_data_fh is not None:
                    sheet.row_data_fh.close()
            self._scratch.cleanup()


class Sheet:
    """One sheet. Cells must be written row by row, downward: a long list keeps only the current row."""

    def __init__(self, book: Book, sheet: Any, name: str) -> None:
        self.book, self.raw, self.name = book, sheet, name
        self.styles = book.styles
        self.links = 0
        self.column_widths: list[float] = []
        self._heights: dict[int, float] = {}
        sheet.set_landscape()
        sheet.set_paper(9 if book.units == "si" else 1)
        sheet.set_margins(left=0.5, right=0.5, top=0.55, bottom=0.75)
        sheet.fit_to_pages(1, 0)
        sheet.hide_gridlines(2)
        about = " ".join(p for p in (book.title, f"({book.subtitle})" if book.subtitle else "") if p)[:140]
        sheet.set_footer(f"&L&8{about.replace('&', '&&')}&C&8{name}&R&8Page &P of &N")

    def widths(self, widths: Sequence[float]) -> None:
        self.column_widths = list(widths)
        for column, width in enumerate(widths):
            self.raw.set_column(column, column, width)

    def text(self, row: int, column: int, text: object, style: str = "text") -> None:
        if text is None or text == "":
            self.raw.write_blank(row, column, None, self.styles[style])
            return
        clean = cell_text(text)
        self.raw.write_string(row, column, clean, self.styles[style])
        if style in _WRAPPED:
            self._grow(row, self.lines(clean, column, style))

    def block(self, first: int, count: int) -> Block:
        """Rows to be written column by column; after them, rows below may be written cell by cell again."""
        return Block(self, first, count)

    def wraps(self, style: str) -> bool:
        return style in _WRAPPED

    def lines(self, text: str, column: int, style: str) -> int:
        """How many lines a text takes in a column in this style."""
        return lines_of(text, (self.column_widths[column] - 1.5) * _fill(style))

    def points(self, lines: int) -> float:
        """The height of a row of so many lines."""
        return min(_LINE * lines + 2.5, _TALLEST)

    def note_heights(self, heights: Mapping[int, float]) -> None:
        """Keep in mind the heights of rows that were written at once."""
        self._heights.update(heights)

    def _grow(self, row: int, lines: int) -> None:
        """Make a row tall enough for its wrapped texts: not every program does so by itself when it opens a file."""
        points = self.points(lines)
        if lines > 1 and points > self._heights.get(row, 0.0):
            self.height(row, points)

    def texts(self, row: int, column: int, texts: Iterable[object], style: str = "text") -> None:
        for offset, text in enumerate(texts):
            self.text(row, column + offset, text, style)

    def number(self, row: int, column: int, value: float | None, style: str) -> None:
        if value is None or value != value:  # noqa: PLR0124  (NaN is the only value that differs from itself)
            self.raw.write_blank(row, column, None, self.styles[style])
        else:
            self.raw.write_number(row, column, value, self.styles[style])

    def formula(self, row: int, column: int, formula: str, value: float, style: str) -> None:
        """A live formula with its computed result."""
        self.raw.write_formula(row, column, formula, self.styles[style], value)

    def link(self, row: int, column: int, to: str, text: str | float, style: str = "link") -> None:
        """A cell that leads to another place of the workbook, such as ``'Picks'!A4``; plain where links run out."""
        if self.links < MOST_LINKS:
            self.links += 1
            self.raw.write_url(row, column, f"internal:{to}", self.styles[style], "x")
        if isinstance(text, str):
            self.text(row, column, text, style)
        else:
            self.number(row, column, text, style)

    def link_out(self, row: int, column: int, to: str, text: str, style: str = "link") -> None:
        """A cell that leads to another file, such as ``list.xlsx#'Steel'!A14``; plain where links run out or it is too long."""
        if self.links < MOST_LINKS and len(to) < 1000:
            self.links += 1
            self.raw.write_url(row, column, f"external:{to}", self.styles[style], "x")
        else:
            style = "cell"
        self.text(row, column, text, style)

    def chart(self, row: int, chart: Any, pixels: int) -> None:
        """Place a chart over the sheet's whole width, its top at `row`, `pixels` high; the rows below must be left for it."""
        wide = int(sum(7 * width + 5 for width in self.column_widths))
        chart.set_size({"width": wide, "height": pixels - 8})
        self.raw.insert_chart(row, 0, chart, {"object_position": 1})

    def long_text(self, row: int, columns: tuple[int, int], text: str, style: str = "wrap") -> None:
        """A paragraph over several columns."""
        width = sum(self.column_widths[columns[0]:columns[1] + 1]) * _fill(style)
        clean = cell_text(text)
        self._grow(row, lines_of(clean, width))
        self.raw.merge_range(row, columns[0], row, columns[1], "", self.styles[style])
        self.raw.write_string(row, columns[0], clean, self.styles[style])

    def paginate(self, columns: int, blocks: Sequence[int], end: int, *, new_page: Sequence[int] = ()) -> None:
        """Print `columns` to the page's width, and start a page rather than break a block that a page can hold.

        `blocks` are the rows where blocks start, `end` the row after the last; those in `new_page` start one anyway. The
        scale is reckoned from the widths: "fit to width" makes a spreadsheet program pass over page breaks.
        """
        wide, high = (11.69, 8.27) if self.book.units == "si" else (11.0, 8.5)
        # A column is 7 pixels a character and 5 more, at 96 pixels to the inch; the rest is for programs that draw wider.
        inches = sum(7 * width + 5 for width in self.column_widths[:columns]) / 96
        scale = max(0.1, min(1.0, 0.92 * (wide - 1.0) / inches))
        room = 0.97 * (high - 1.3) * 72 / scale
        breaks, used = [], self._height(0, blocks[0]) if blocks else 0.0
        for start, stop in zip(blocks, [*blocks[1:], end][: len(blocks)], strict=True):
            height = self._height(start, stop)
            if start in new_page or (used + height > room and used > 0 and start != blocks[0]):
                breaks.append(start)
                used = 0.0
            used = (used + height) % room
        self.raw.set_print_scale(int(100 * scale))
        self.raw.set_h_pagebreaks(breaks[:1000])  # the format takes few more

    def tall(self, start: int, stop: int) -> float:
        """How tall the rows from `start` to before `stop` are, in points."""
        return self._height(start, stop)

    def _height(self, start: int, stop: int) -> float:
        return sum(self._heights.get(row, _ROW) for row in range(start, stop))

    def height(self, row: int, points: float) -> None:
        """Set a row's height. Must come before the next row is written."""
        self._heights[row] = points
        self.raw.set_row(row, points)

    def heading(self, row: int, text: str, columns: int) -> None:
        """A block's heading with a rule across its columns."""
        self.height(row, 19)
        self.text(row, 0, text, "block")
        for column in range(1, columns):
            self.text(row, column, None, "block")


def _created(text: str | None) -> datetime:
    """The job's date where it is one, else a fixed day: the clock has no part in the file."""
    day = date(2000, 1, 1)
    with contextlib.suppress(ValueError):
        day = date.fromisoformat((text or "").strip())
    # The format cannot date a file before 1980 in its archive, nor does a plausible job lie there.
    return datetime(max(day.year, 1980), day.month, day.day if day.year >= 1980 else 1, tzinfo=UTC)


def place(sheet: str, row: int, column: int, *, fixed: bool = True) -> str:
    """A reference such as ``'Weight schedule'!$P$4``; rows and columns count from 0."""
    sign = "$" if fixed else ""
    return f"'{sheet}'!{sign}{letters(column)}{sign}{row + 1}"


def letters(column: int) -> str:
    """0 -> A, 26 -> AA."""
    text = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        text = chr(65 + rest) + text
    return text
