"""Help as people read it: no names of types behind an argument, each command in one short line. Rank 10."""

from __future__ import annotations

import re
from typing import Any

from typer.core import TyperCommand

#: what the command library says of an argument's type: of use to those who write programs, not to those who run them
_TYPE = re.compile(r" <[a-zA-Z\[\] ]+>")

#: what `takeoff --help` says of each command: one line, whole, in 80 columns
SHORT = {
    "schedule": "Weigh member lists and write the schedule: the main job.",
    "check": "Show how a list would be read, before relying on it.",
    "material": "What a material weighs and how it grows, with sources.",
    "section": "Sizes, area, surface and kg/m of a section, with sources.",
    "weigh": "Weigh one section, between its bounds.",
    "movement": "How far a length moves with temperature; the gap to set.",
    "fit": "A pin in a bore: clearance, and how hot or cold to fit it.",
    "lift": "What each pick weighs, and what hangs on the hook.",
    "loads": "What goes on which vehicle, where, and on which axles.",
    "start": "Write an empty member list and job file to fill in.",
}


class PlainCommand(TyperCommand):
    """A command whose help leaves types out, blank for blank, so that columns stay in line."""

    def format_help(self, ctx: Any, formatter: Any) -> None:
        super().format_help(ctx, formatter)
        formatter.buffer = [_TYPE.sub(lambda found: " " * len(found.group()), part) for part in formatter.buffer]
