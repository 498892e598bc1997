"""Putting markup, looks and script into one file. Rank 9.

The markup stands in `*.html` beside this module (`frame.html` around every page, `macros.html` for tables and drawings), its
looks in `page.css`, its sorting, filtering and jumping in `page.js`. Text of a list reaches a page only through the template's
escaping, never through ids, styles or script; and a policy in the page's head lets nothing run or load but what was put in.
"""

from __future__ import annotations

import base64
import hashlib
from functools import cache
from importlib.resources import files
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from jinja2 import Environment


def render(template: str, view: dict[str, Any]) -> str:
    """The page as HTML text. A name that a template needs and `view` does not give is an error."""
    style, script = _text("page.css"), _text("page.js")
    own = {"style": style, "script": script, "style_hash": _hash(style), "script_hash": _hash(script)}
    return _environment().get_template(template).render({**view, **own})


def _text(name: str) -> str:
    return (files(__package__) / name).read_text(encoding="utf-8")


def _hash(content: str) -> str:
    """What the page's policy knows this text by."""
    return "sha256-" + base64.b64encode(hashlib.sha256(content.encode("utf-8")).digest()).decode("ascii")


@cache
def _environment() -> Environment:
    from jinja2 import Environment, FunctionLoader, StrictUndefined

    # No file name decides here: escaping is on for everything, and a name that is not given is an error.
    return Environment(autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True, loader=FunctionLoader(_text))
