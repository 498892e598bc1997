"""What a page is made of before it is markup: tables of cells, blocks, links. Everything here is text; the template escapes it. Rank 9."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from takeoff.reports.wording import shown


@dataclass(frozen=True, slots=True)
class Column:
    """A heading; `figures` sets the column right and sorts it by number; `screen` leaves it out of print."""

    label: str
    figures: bool = False
    screen: bool = False


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell: its text, the figure it sorts by, where it leads in the page (an id of ours), or a drawing of ours."""

    text: str = ""
    sort: float | None = None
    to: str | None = None
    strong: bool = False
    svg: str = ""


@dataclass(frozen=True, slots=True)
class Row:
    cells: Sequence[Cell]
    id: str = ""
    state: str = ""


@dataclass(slots=True)
class Table:
    """A table. `states` are the words a reader may narrow it to; `tools` gives it sorting and a filter."""

    id: str
    caption: str
    columns: Sequence[Column]
    rows: list[Row] = field(default_factory=list)
    states: Sequence[str] = ()
    tools: bool = True
    note: str = ""
    #: the last row is a sum, and stays last
    foot: Row | None = None


@dataclass(frozen=True, slots=True)
class Figure:
    """A drawing of ours with its caption."""

    svg: str
    caption: str
    wide: bool = False


@dataclass(frozen=True, slots=True)
class Link:
    to: str
    text: str


@dataclass(frozen=True, slots=True)
class Said:
    """One entry of the findings panel: level, what was said, what was read, what would settle it, and the rows it is about."""

    level: str
    message: str
    read: str
    right: str
    count: int
    links: Sequence[Link]
    more: int
    place: str


@dataclass(slots=True)
class Block:
    """A pick, a load or a run: heading, words, drawings, tables and what was found about it."""

    id: str
    title: str
    verdict: str = ""
    words: list[str] = field(default_factory=list)
    figures: list[Figure] = field(default_factory=list)
    tables: list[Table] = field(default_factory=list)
    facts: list[tuple[str, str]] = field(default_factory=list)


def text(value: object, blank: str = "") -> str:
    """A text of the list as it may be shown; `blank` where there is none."""
    return shown(value) if isinstance(value, str) and value else blank


def cells(*values: object) -> list[Cell]:
    """Plain cells of texts."""
    return [value if isinstance(value, Cell) else Cell(text(value)) for value in values]
