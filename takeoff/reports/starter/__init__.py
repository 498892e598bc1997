"""The first five minutes: an empty member list with drop-downs and notes, a commented job file, a short how-to. Rank 9.

The job file and the how-to lie beside this module as they are written; a test holds the job file's defaults against the
code's. The example row says of itself that it does not count, and the reader of lists knows it by that.
"""

from __future__ import annotations

from functools import partial
from importlib.resources import files
from pathlib import Path
from typing import TYPE_CHECKING, Any

from takeoff.lists.rowwords import EXAMPLE_MARK

if TYPE_CHECKING:
    from takeoff.reports.files import Output
    from takeoff.reports.rounding import Units

MEMBERS, CHOICES = "Members", "Choices"
#: rows that have the drop-downs
_ROWS = 2000
_INK, _HEAD, _QUIET = "#1F2A30", "#E9ECE6", "#5B666C"

#: heading (with the unit of each system of units), width, an example, the note in the heading
_COLUMNS: tuple[tuple[str, float, Any, str], ...] = (
    ("Mark", 22, EXAMPLE_MARK, "The piece's mark, as on the drawing. Any text."),
    ("Assembly", 14, "A1",
     "What it is fabricated into: pieces of one assembly are lifted as one, unless the job file says otherwise. Blank: as above."),
    ("Quantity", 10, 4, "How many, a whole number. A blank or 0 is refused, not guessed."),
    ("Section", 24, {"si": "UB 457x191x67", "us": "W18x40"},
     "A designation in any usual spelling (UB 457x191x67, HEA 200, SHS 100x5, L 70x7, W18x40), or PL, FL, RD and the like with "
     "the sizes in their columns. The drop-down offers the tables; anything else may be typed."),
    ("Material", 26, {"si": "S355JR / J0 / J2 / K2", "us": "ASTM A992"},
     "A designation or a trade word (S355, 1.4404, A36, C30/37, oak). The drop-down offers the tables; other words may be typed."),
    ("Length ({size})", 13, {"si": 7200, "us": 288}, "Over the long points. A cell may name its own unit: 7.2 m, 23'-7 1/2\"."),
    ("Width ({size})", 12, None, "For plates, boards and blocks."),
    ("Thickness ({size})", 15, None, "For plates and boards; the height of a block."),
    ("Unit mass ({mass})", 15, None, "Mass of ONE piece, where you know it: needed for bought-out parts that have no section."),
    ("Finish", 20, None, "Paint with its thickness (paint 240 um), hot dip galvanized; blank: none is counted."),
    ("Remarks", 34, "this row shows how; it is in no total", "Anything; not used in any figure."),
)  # fmt: skip


def columns(units: Units) -> list[tuple[str, float, Any, str]]:
    """Heading, width, example and note of each column of the list."""
    size, mass = ("mm", "kg") if units == "si" else ("in", "lb")
    return [
        (heading.format(size=size, mass=mass), width, shown[units] if isinstance(shown, dict) else shown, note)
        for heading, width, shown, note in _COLUMNS
    ]


def outputs(folder: Path, units: Units = "si") -> list[Output]:
    """What `takeoff start` writes into `folder`: each file with what writes it."""
    return [
        (folder / "member_list.xlsx", partial(write_list, units=units)),
        (folder / "job.toml", partial(_write_text, "job.toml", units=units)),
        (folder / "HOWTO.txt", partial(_write_text, "HOWTO.txt")),
    ]


def _write_text(name: str, path: Path, units: Units = "si") -> None:
    path.write_text(text(name).replace('\nunits = "si" ', f'\nunits = "{units}" '), encoding="utf-8", newline="")


def text(name: str) -> str:
    """The text of a file beside this module."""
    return (files(__package__) / name).read_text(encoding="utf-8")


def sections_offered() -> list[str]:
    """What the drop-down of sections offers: shapes made to size, then the tables, family by family."""
    from takeoff import sections

    made = ["PL", "FL", "RD", "SQ"]
    listed = [row.cells["designation"] for family in sections.FAMILIES for row in sections.rows(family)]
    return list(dict.fromkeys([*made, *(name for name in listed if name)]))


def materials_offered() -> list[str]:
    """What the drop-down of materials offers: every material's name, in the tables' order."""
    from takeoff import materials

    return [material.name for material in materials.all_materials()]


def write_list(path: Path, units: Units = "si") -> None:
    """The empty member list. Raises OSError where it cannot be written."""
    import xlsxwriter
    from xlsxwriter.exceptions import FileCreateError

    options = {
        "strings_to_formulas": False,
        "strings_to_urls": False,
        "strings_to_numbers": False,
        "default_format_properties": {"font_name": "Arial", "font_size": 10},
    }
    book = xlsxwriter.Workbook(str(path), options)
    base = {"font_name": "Arial", "font_size": 10, "font_color": _INK, "valign": "vcenter"}
    head = book.add_format(base | {"bold": True, "bg_color": _HEAD, "bottom": 1, "text_wrap": True})
    example = book.add_format(base | {"italic": True, "font_color": _QUIET, "bottom": 4})
    plain = book.add_format(base)
    sheet, choices = book.add_worksheet(MEMBERS), book.add_worksheet(CHOICES)
    sheet.set_landscape()
    sheet.set_paper(9)
    sheet.repeat_rows(0)
    sheet.set_footer("&CMember list&RPage &P of &N")
    sheet.freeze_panes(1, 1)
    sheet.set_row(0, 22)
    listed = columns(units)
    for column, (heading, width, shown, note) in enumerate(listed):
        sheet.set_column(column, column, width, plain)
        sheet.write_string(0, column, heading, head)
        sheet.write_comment(0, column, note, {"x_scale": 2.0, "y_scale": 0.9, "author": "takeoff"})
        if shown is None:
            sheet.write_blank(1, column, None, example)
        else:
            sheet.write(1, column, shown, example)
    offered = {"Section": sections_offered(), "Material": materials_offered()}
    for column, (heading, names) in enumerate(offered.items()):
        choices.set_column(column, column, 34, plain)
        choices.write_string(0, column, f"Drop-down of {heading.lower()} cells", head)
        for row, name in enumerate(names, 1):
            choices.write_string(row, column, name, plain)
        at = next(n for n, c in enumerate(listed) if c[0] == heading)
        letter = "AB"[column]
        # What is not in the tables may be typed all the same: the list says what it is, not the program.
        sheet.data_validation(
            1, at, _ROWS, at, {"validate": "list", "source": f"={CHOICES}!${letter}$2:${letter}${len(names) + 1}", "show_error": False}
        )
    at = next(n for n, c in enumerate(listed) if c[0] == "Quantity")
    sheet.data_validation(
        1,
        at,
        _ROWS,
        at,
        {
            "validate": "integer",
            "criteria": ">=",
            "value": 1,
            "error_type": "warning",
            "error_title": "Quantity",
            "error_message": "A whole number from 1 is read; anything else is refused, with its cell.",
        },
    )
    try:
        book.close()
    except FileCreateError as problem:
        cause = problem.args[0] if problem.args else None
        raise cause if isinstance(cause, OSError) else OSError(str(problem)) from problem
