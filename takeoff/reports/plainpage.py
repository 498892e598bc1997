"""Plain text laid out for a terminal: paragraphs, labels and tables no wider than it. Rank 9; light, for look-ups use it."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence

from takeoff.reports.rounding import NO_BREAK, plain_blanks

_LEAST_WIDTH = 24
_MOST_WIDTH = 120


class Page:
    """Lines no wider than the terminal; a blank line stands before each heading."""

    def __init__(self, width: int) -> None:
        self.width = max(_LEAST_WIDTH, min(width, _MOST_WIDTH))
        self.lines: list[str] = []

    def blank(self) -> None:
        if self.lines and self.lines[-1]:
            self.lines.append("")

    def heading(self, text: str) -> None:
        self.blank()
        self.say(text)

    def say(self, text: str, indent: int = 0, hang: int | None = None) -> None:
        """A paragraph; lines after the first stand `hang` columns in (as `indent` unless said)."""
        hang = indent if hang is None else hang
        if self.width < 48:
            indent, hang = min(indent, 2), min(hang, 4)
        self.lines += textwrap.wrap(
            text, self.width, initial_indent=" " * indent, subsequent_indent=" " * hang, break_on_hyphens=False,
        ) or [""]

    def labelled(self, label: str, text: str) -> None:
        """``Read      list.xlsx``, the text hanging under its own start; below the label where there is no room."""
        if self.width < 48:
            self.say(label)
            self.say(text, indent=2)
        else:
            self.say(f"{label:<10}".replace(" ", NO_BREAK) + text, hang=10)

    def table(self, headings: Sequence[str], rows: Sequence[Sequence[str]], indent: int = 2) -> None:
        """First column text, the others figures set right; as a list of pairs where the columns do not fit."""
        columns = list(zip(headings, *rows, strict=True))
        widths = [max(map(len, column)) for column in columns]
        room = self.width - indent - sum(w + 2 for w in widths[1:])
        if room < min(widths[0], 14):
            self.say(headings[0], indent)
            indent += 2
            for name, *figures in rows:
                self.say(name, indent, indent + 2)
                for heading, figure in zip(headings[1:], figures, strict=True):
                    if figure:
                        self.say(f"{heading}: {figure}", indent + 2, indent + 4)
            return
        first = min(widths[0], room)
        for name, *figures in [headings, *rows]:
            *above, last = textwrap.wrap(name, first, break_on_hyphens=False) or [""]
            self.lines += [" " * indent + line for line in above]
            cells = "".join(f"  {figure:>{w}}" for figure, w in zip(figures, widths[1:], strict=True))
            self.lines.append((" " * indent + f"{last:<{first}}" + cells).rstrip())

    def text(self) -> str:
        return plain_blanks("\n".join(self.lines))
