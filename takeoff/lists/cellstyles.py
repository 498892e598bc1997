"""What an .xlsx workbook says beside its cells: number formats, struck-out fonts, comments. The only user of openpyxl. Rank 3.

openpyxl is handed single parts that were looked over before, stripped to what is asked of them, and never a sheet. It is loaded
only where a cheap look says that something is there to be read.
"""

from __future__ import annotations

import html
import io
import re
import xml.etree.ElementTree as ET
from dataclasses import dataclass, field
from typing import Any

from takeoff.lists.cellformats import is_plain

#: as many cell styles as the file format allows (recalled)
MOST_STYLES = 65_490
#: comments of a sheet that are passed on one by one, and how much of each
MOST_COMMENTS, MOST_LETTERS = 40, 300
#: a longer part of comments is not read
MOST_BYTES = 5_000_000

_CODE = re.compile(rb"""\bformatCode\s*=\s*(?:"([^"]*)"|'([^']*)')""")
_STRIKE = re.compile(rb"<(?:\w+:)?strike[\s/>]")
#: formats that need no code in the file: percent, currency, and accounts, which show zero as a dash
_BUILT_IN = re.compile(rb"""\bnumFmtId\s*=\s*["'](?:[5-8]|9|10|4[1-4])["']""")
_KEPT = ("numFmts", "fonts", "cellXfs")
_REF = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})")
#: a comment in a thread also stands as a plain one, under this author
_THREAD = "tc="


@dataclass(slots=True)
class Styles:
    """Cell styles by number: `codes` where the number format is not plain, `struck` where the font is struck through.

    conditional : whether some style that only conditional formatting uses strikes out or has a number format.
    """

    codes: dict[int, str] = field(default_factory=dict)
    struck: frozenset[int] = frozenset()
    conditional: bool = False

    @property
    def telling(self) -> frozenset[int]:
        """The styles whose cells must be known."""
        return frozenset(self.codes) | self.struck


def styles_of(xml: bytes) -> Styles | None:
    """The telling styles of a styles part, which holds no document type; None where openpyxl cannot read it."""
    codes = (html.unescape((one or other).decode("utf-8", "replace")) for one, other in _CODE.findall(xml))
    used = xml[max(xml.find(b"cellXfs"), 0):]
    _, _, conditions = xml.partition(b"dxfs")
    conditional = bool(_STRIKE.search(conditions)) or b"numFmt " in conditions
    if not _STRIKE.search(xml) and not _BUILT_IN.search(used) and all(map(is_plain, codes)):
        return Styles(conditional=conditional)
    from openpyxl.styles.numbers import BUILTIN_FORMATS
    from openpyxl.styles.stylesheet import Stylesheet

    try:
        root = ET.fromstring(xml)
        for child in list(root):
            if _local(child.tag) not in _KEPT:
                root.remove(child)
            elif len(child) > MOST_STYLES:
                return None
            elif _local(child.tag) == "fonts":
                for font in child:
                    # Only the stroke is asked for; an odd family or colour must not stop the reading.
                    for part in [part for part in font if _local(part.tag) != "strike"]:
                        font.remove(part)
        tree: Any = root
        sheet: Any = Stylesheet.from_tree(tree)
        formats: dict[int, str] = BUILTIN_FORMATS | sheet.custom_formats
        fonts = list(sheet.fonts)
        styles = list(sheet.cellXfs.xf)
        found = {n: str(formats.get(style.numFmtId) or "General") for n, style in enumerate(styles)}
        struck = frozenset(n for n, style in enumerate(styles) if (style.fontId or 0) < len(fonts) and fonts[style.fontId or 0].strike)
    except Exception:  # noqa: BLE001 - openpyxl raises whatever a broken part makes it stumble over
        return None
    return Styles({n: code for n, code in found.items() if not is_plain(code)}, struck, conditional)


def struck_texts(xml: bytes) -> dict[int, bool]:
    """Shared texts of which a part is struck out -> whether all of it is. Cheap where none is."""
    if not _STRIKE.search(xml):
        return {}
    found: dict[int, bool] = {}
    number = 0
    for _, item in ET.iterparse(io.BytesIO(xml)):
        if _local(item.tag) != "si":
            continue
        whole = struck_out(item)
        if whole is not None:
            found[number] = whole
        number += 1
        item.clear()
    return found


def struck_out(item: ET.Element) -> bool | None:
    """Whether all (True) or a part (False) of a text's runs are struck out; None where no run is."""
    all_struck, some = True, False
    for run in item.iter():
        if _local(run.tag) != "r":
            continue
        text = "".join(part.text or "" for part in run if _local(part.tag) == "t").strip()
        marks = [part for props in run if _local(props.tag) == "rPr" for part in props if _local(part.tag) == "strike"]
        struck = any(mark.get("val", "1") not in ("0", "false") for mark in marks)
        if text:
            some, all_struck = some or struck, all_struck and struck
    return all_struck if some else None


def comments_of(xml: bytes) -> list[tuple[int, int, str]] | None:
    """(row, column, text) of a part of plain comments, or of comments in threads; None where they cannot be read."""
    if len(xml) > MOST_BYTES:
        return None
    try:
        root = ET.fromstring(xml)
        if _local(root.tag).casefold() == "threadedcomments":
            texts = [(node.get("ref", ""), "".join(node.itertext())) for node in root]
        else:
            from openpyxl.comments.comment_sheet import CommentSheet

            tree: Any = root
            sheet: Any = CommentSheet.from_tree(tree)
            texts = [(ref, comment.content) for ref, comment in sheet.comments if not str(comment.author or "").startswith(_THREAD)]
    except Exception:  # noqa: BLE001 - as above
        return None
    found = []
    for ref, text in texts:
        place = _REF.fullmatch(ref)
        if place and text and text.strip():
            column = 0
            for char in place.group(1).upper():
                column = column * 26 + ord(char) - 64
            found.append((int(place.group(2)), column, plain_text(text)))
    return sorted(found)


def plain_text(text: str) -> str:
    """A comment as one line that a report can print: no control signs, not endless."""
    line = " ".join("".join(ch if ch.isprintable() else " " for ch in text).split())
    return line if len(line) <= MOST_LETTERS else line[:MOST_LETTERS].rstrip() + " …"


def _local(tag: object) -> str:
    return str(tag).rpartition("}")[2]
