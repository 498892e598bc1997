"""A first look at the XML of an .ods workbook: what the fast reader drops. Rank 3.

The file keeps beside each number the text that its cell shows, so number formats need not be read. A formula that ended in an
error stands as a text of its own. As with .xlsx, a part that declares a document type is refused.
"""

from __future__ import annotations

import io
import re
import xml.etree.ElementTree as ET
import zipfile
import zlib
from functools import lru_cache

from takeoff.errors import InputError
from takeoff.job import GuardsPart
from takeoff.lists.cellstyles import plain_text
from takeoff.lists.openxml import MAX_COLUMN, Look, part_of

_ERROR = re.compile(r"#(?:DIV/0|REF|NAME|VALUE|NUM|NULL)[!?]|#N/A|#NAME\?|Err:\d{3}")
_RIGHT = "a workbook opened and saved once in a spreadsheet program"
#: the types of value that a number format is printed for
_NUMBERS = ("float", "percentage", "currency")
_GONE = ("collapse", "filter")
#: attributes of a cell that is more than its text or number
_TELLING = frozenset(("formula", "string-value", "number-rows-spanned", "number-columns-spanned"))

Style = tuple[str | None, bool | None]


def look_over(name: str, data: bytes, guards: GuardsPart) -> dict[str, Look]:
    """Sheet name -> what its XML shows. Raises InputError on damage, and on two sheets with one name."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            styles: dict[str, Style] = {}
            if "styles.xml" in archive.namelist():
                part = part_of(name, archive, "styles.xml")
                if b"line-through" in part:
                    _learn(styles, part)
            content = part_of(name, archive, "content.xml")
            if b"line-through" in content:
                _learn(styles, content)
            return _Walk(name, guards, _struck(styles)).over(content)
    except (
        zipfile.BadZipFile, zlib.error, ET.ParseError, KeyError, EOFError, NotImplementedError, RuntimeError, OSError, ValueError,
    ) as error:
        raise InputError(f"the workbook is damaged or no workbook ({error})", file=name, right="a workbook saved as .ods") from error


def _learn(styles: dict[str, Style], part: bytes) -> None:
    """Add a part's styles: name -> (parent, whether it strikes its text out, None where it does not say)."""
    for _, node in ET.iterparse(io.BytesIO(part)):
        tag = _local(node.tag)
        if tag == "style":
            struck: bool | None = None
            for props in node:
                stroke = _get(props, "text-line-through-style") or _get(props, "text-line-through-type")
                if _local(props.tag) == "text-properties" and stroke:
                    struck = stroke != "none"
            styles[_get(node, "name")] = (_get(node, "parent-style-name") or None, struck)
            node.clear()
        elif tag == "table":
            node.clear()


def _struck(styles: dict[str, Style]) -> frozenset[str]:
    """The names of styles that strike out, by themselves or by their parents."""
    found = set()
    for name in styles:
        at: str | None = name
        for _ in range(20):
            parent, struck = styles.get(at or "", (None, None))
            if struck is not None or parent is None:
                if struck:
                    found.add(name)
                break
            at = parent
    return frozenset(found)


class _Walk:
    """One walk through all sheets."""

    def __init__(self, name: str, guards: GuardsPart, struck: frozenset[str]) -> None:
        self.name, self.guards, self.struck = name, guards, struck
        self.entries = 0

    def over(self, content: bytes) -> dict[str, Look]:
        looks: dict[str, Look] = {}
        depth = 0
        for event, node in ET.iterparse(io.BytesIO(content), ("start", "end")):
            tag = _local(node.tag)
            if event == "start":
                if tag == "table":
                    depth += 1
                    if depth == 1:
                        self._start()
                elif tag == "table-row" and depth == 1:
                    self.column = 1
                    self.row_style = _get(node, "default-cell-style-name")
                    self.repeat = min(max(_count(node, "number-rows-repeated"), 1), self.guards.rows + 1)
                    self.row_gone = _get(node, "visibility") in _GONE
                    self.row_filled = False
                continue
            if tag == "p":
                continue
            if tag == "table":
                depth -= 1
                if depth == 0:
                    title = _get(node, "name")
                    if title in looks:
                        raise InputError("two sheets have one name", file=self.name, sheet=title, right="a name for each sheet")
                    looks[title] = self._end()
                node.clear()
            elif depth != 1:
                continue
            elif tag == "table-column":
                self._column(node)
            elif tag in ("table-cell", "covered-table-cell"):
                self._cell(node, tag)
                node.clear()
            elif tag == "table-row":
                if self.row_gone and self.row_filled:
                    self.hidden.update(range(self.row, self.row + self._entries(self.repeat)))
                self.row += self.repeat
                node.clear()
        return looks

    def _start(self) -> None:
        self.row, self.columns = 1, 1
        # A cell outside any row is damage; it is taken as one of the first row.
        self.column, self.repeat, self.row_gone, self.row_filled = 1, 1, False, False
        self.hidden: set[int] = set()
        self.merges: list[tuple[int, int, int, int]] = []
        self.column_styles: list[tuple[int, int, str]] = []
        self.gone: list[tuple[int, int]] = []
        self.errors: dict[tuple[int, int], str] = {}
        self.unsaved: set[tuple[int, int]] = set()
        self.shown: dict[tuple[int, int], str] = {}
        self.strokes: set[tuple[int, int]] = set()
        self.parts: set[tuple[int, int]] = set()
        self.comments: list[tuple[int, int, str]] = []

    def _end(self) -> Look:
        return Look(
            frozenset(self.hidden), tuple(self.merges), self.errors, frozenset(self.unsaved), tuple(self.gone), {}, self.shown,
            frozenset(self.strokes), frozenset(self.parts), self.comments,
        )

    def _column(self, node: ET.Element) -> None:
        last = self.columns + max(_count(node, "number-columns-repeated"), 1) - 1
        style = _get(node, "default-cell-style-name")
        if style in self.struck:
            self.column_styles.append((self.columns, last, style))
        if _get(node, "visibility") in _GONE:
            self.gone.append((self.columns, last))
        self.columns = last + 1

    def _entries(self, count: int) -> int:
        """Count what is kept of a sheet: repeated cells may stand for any number."""
        self.entries += count
        if self.entries > self.guards.cells:
            raise InputError("cells are repeated more often than is read", file=self.name, right=_RIGHT)
        return count

    def _cell(self, node: ET.Element, tag: str) -> None:
        first, wide = self.column, min(max(_count(node, "number-columns-repeated"), 1), MAX_COLUMN)
        self.column += wide
        kind, formula = _get(node, "value-type"), _get(node, "formula")
        if not len(node) and not kind and not formula:
            return
        self.row_filled = True
        if (
            not self.struck and len(node) == 1 and _local(node[0].tag) == "p" and _TELLING.isdisjoint(map(_local, node.attrib))
            and (kind == "string" or (kind == "float" and node[0].text == _get(node, "value")))
        ):
            return  # a plain text or number, as nearly all are
        texts = [part for part in node if _local(part.tag) == "p"]
        text = "\n".join(map(_text, texts))
        notes = [part for child in node if _local(child.tag) == "annotation" for part in child.iter() if _local(part.tag) == "p"]
        note = " ".join(map(_text, notes))
        if note.strip():
            self.comments.append((self.row, first, plain_text(note)))
        over, down = _count(node, "number-columns-spanned"), _count(node, "number-rows-spanned")
        if tag == "table-cell" and (down > 1 or over > 1):
            self.merges.append((self.row, first, self.row + max(down, 1) - 1, first + max(over, 1) - 1))
        error = formula and (_get(node, "value-type", "calcext") == "error" or _ERROR.fullmatch(text))
        unsaved = formula and not kind and not text and not error
        shown = not error and ((kind in _NUMBERS and text != _get(node, "value")) or (kind == "string" and _other_text(node, text)))
        struck = bool(text.strip()) and bool(self.struck) and self._is_struck(node, first)
        partly = bool(self.struck) and not struck and _struck_runs(texts, self.struck)
        if not (error or unsaved or shown or struck or partly):
            return
        self._entries(self.repeat * wide)
        for row in range(self.row, self.row + self.repeat):
            for column in range(first, first + wide):
                if error:
                    self.errors[row, column] = text or "#ERROR"
                elif unsaved:
                    self.unsaved.add((row, column))
                elif shown:
                    self.shown[row, column] = text
                if struck:
                    self.strokes.add((row, column))
                elif partly:
                    self.parts.add((row, column))

    def _is_struck(self, node: ET.Element, column: int) -> bool:
        style = _get(node, "style-name") or self.row_style
        if style:
            return style in self.struck
        return any(first <= column <= last for first, last, _ in self.column_styles)


def _other_text(node: ET.Element, text: str) -> bool:
    """Whether a cell shows another text than it holds."""
    held = _get(node, "string-value")
    return bool(held.strip()) and held.split() != text.split()


def _struck_runs(texts: list[ET.Element], struck: frozenset[str]) -> bool:
    """Whether some span of a cell's text is struck out."""
    spans = [span for text in texts for span in text.iter() if _local(span.tag) == "span"]
    return any(_get(span, "style-name") in struck and _text(span).strip() for span in spans)


def _text(node: ET.Element) -> str:
    """A paragraph's text, with its blanks; comments inside it left out."""
    parts = [node.text or ""]
    for child in node:
        tag = _local(child.tag)
        if tag == "s":
            parts.append(" " * min(max(_count(child, "c"), 1), 100))
        elif tag in ("tab", "line-break"):
            parts.append(" ")
        elif tag != "annotation":
            parts.append(_text(child))
        parts.append(child.tail or "")
    return "".join(parts)


def _get(node: ET.Element, name: str, space: str = "") -> str:
    """An attribute by its name without the namespace; the one of `space`, where two bear one name."""
    for key, value in node.attrib.items():
        if _local(key) == name and ("calcext" in key) == (space == "calcext"):
            return value
    return ""


def _count(node: ET.Element, name: str) -> int:
    text = _get(node, name)
    return int(text) if text.isascii() and text.isdigit() and len(text) <= 9 else 0


@lru_cache(maxsize=1024)
def _local(tag: str) -> str:
    return tag.rpartition("}")[2]
