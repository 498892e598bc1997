"""A first look at the XML of an .xlsx workbook: what the fast reader drops or gets wrong, and what would make it run wild.

It drops errors, formulas without a stored result, hidden rows, merged ranges, number formats and comments; of two rows with one
number it keeps one; a cell in the far corner makes it ask for more memory than there is. Nothing is taken from a document type
declaration: a workbook that has one is refused. Rank 3.
"""

from __future__ import annotations

import io
import operator
import posixpath
import re
import zipfile
import zlib
from collections.abc import Collection, Iterable, Iterator
from dataclasses import dataclass, field

from takeoff.errors import InputError
from takeoff.job import GuardsPart
from takeoff.lists import cellstyles

MAX_ROW, MAX_COLUMN = 1_048_576, 16_384
#: a workbook may unpack to so many times [guards] megabytes
UNPACKED_TIMES = 10

_RIGHT = "a workbook opened and saved once in a spreadsheet program"
_LETTERS = b"ABCDEFGHIJKLMNOPQRSTUVWXYZ"

# Tags as nearly every program writes them: then the look is a search; other spellings are walked through one by one.
_PLAIN_REF = re.compile(rb'<(?:row|c) r="([A-Z]{0,3}[0-9]{1,7})"')
_TAG = re.compile(rb"<(?:row|c)[\s/>]")
_PREFIXED = re.compile(rb"<\w+:(?:row|c|mergeCell)\b")
_ODD_ATTRIBUTE = re.compile(rb"\s(?:hidden|t|s)(?:\s+=|=\s|=')")
_ROW_HIDDEN = re.compile(rb'<row r="(\d+)"[^>]*?\shidden="(?:1|true)"')
_MERGE = re.compile(r"\$?([A-Za-z]{1,3})\$?(\d{1,7}):\$?([A-Za-z]{1,3})\$?(\d{1,7})")
_MERGE_TAG = re.compile(rb'<mergeCell ref="([^"]*)"')
_REF = re.compile(r"([A-Z]{1,3})([0-9]{1,7})")
_STYLED = rb'<c r="([A-Z]{1,3})([0-9]{1,7})"[^<>]{0,200}?\ss="(%s)"'
_SHARED = rb'<c r="([A-Z]{1,3})([0-9]{1,7})"[^<>]{0,200}?\st="s"[^<>]{0,200}>\s*<v>(%s)</v>'
_COLUMN_TAG = re.compile(rb"<col\s[^<>]*>")
_ATTRIBUTE = re.compile(rb'\s(hidden|min|max)="([^"]*)"')
#: more numbers than this are not spelt out in a pattern
_MOST_SPELT = 60

#: parts of a workbook that the reader takes in beside the sheets
_OTHER_PARTS = ("xl/sharedstrings.xml", "xl/styles.xml", "xl/workbook.xml", "xl/_rels/workbook.xml.rels")


@dataclass(slots=True)
class Look:
    """What the XML of one sheet tells. Rows and columns count from 1.

    merges : (first row, first column, last row, last column). errors : (row, column) -> what the cell shows.
    unsaved : cells with a formula but no stored result. hidden_columns : (first, last) of hidden ranges of columns.
    codes : cell -> its number format's code, where that is not plain. shown : cell -> the text it shows, where the file keeps it.
    struck, partly_struck : cells struck out, and those with a part of their text struck out.
    comments : (row, column, text). unknown : what of this could not be looked at.
    """

    hidden_rows: frozenset[int] = frozenset()
    merges: tuple[tuple[int, int, int, int], ...] = ()
    errors: dict[tuple[int, int], str] = field(default_factory=dict)
    unsaved: frozenset[tuple[int, int]] = frozenset()
    hidden_columns: tuple[tuple[int, int], ...] = ()
    codes: dict[tuple[int, int], str] = field(default_factory=dict)
    shown: dict[tuple[int, int], str] = field(default_factory=dict)
    struck: frozenset[tuple[int, int]] = frozenset()
    partly_struck: frozenset[tuple[int, int]] = frozenset()
    comments: list[tuple[int, int, str]] = field(default_factory=list)
    unknown: tuple[str, ...] = ()


def column_number(text: str) -> int:
    """A -> 1, AA -> 27."""
    number = 0
    for char in text:
        number = number * 26 + ord(char.upper()) - 64
    return number


def letters(column: int) -> str:
    """1 -> A, 27 -> AA."""
    text = ""
    while column:
        column, rest = divmod(column - 1, 26)
        text = chr(65 + rest) + text
    return text


def kind_of(data: bytes) -> str:
    """What a workbook is by its content: ``xlsx``, ``xlsb``, ``ods``, ``xls`` (or encrypted), or "" for none of them."""
    if data[:4] == b"\xd0\xcf\x11\xe0":
        return "xls"
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            names = {name.casefold() for name in archive.namelist()}
    except (zipfile.BadZipFile, EOFError, OSError, ValueError, NotImplementedError):
        return ""
    for part, kind in (("xl/workbook.xml", "xlsx"), ("xl/workbook.bin", "xlsb"), ("content.xml", "ods")):
        if part in names:
            return kind
    return ""


def refuse_bomb(name: str, data: bytes, guards: GuardsPart) -> None:
    """Raises InputError on a packed workbook that is damaged, encrypted, or unpacks beyond the guards."""
    limit = guards.megabytes * 1e6 * UNPACKED_TIMES
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            parts = archive.infolist()
    except (zipfile.BadZipFile, EOFError, OSError, ValueError, NotImplementedError) as error:
        raise InputError(f"the workbook is damaged or no workbook ({error})", file=name, right="a workbook of its kind") from error
    if sum(part.file_size for part in parts) > limit:
        raise InputError(
            f"unpacks to more than {limit / 1e6:,.0f} MB", file=name,
            right="a smaller workbook, or a higher [guards] megabytes in the job file",
        )
    if any(part.flag_bits & 1 for part in parts):
        raise InputError("the workbook is encrypted", file=name, right="a workbook saved without a password")
    if len({part.filename.casefold() for part in parts}) < len(parts):
        raise InputError("the workbook holds one part twice: which of them counts?", file=name, right=_RIGHT)


def look_over(name: str, data: bytes, guards: GuardsPart) -> dict[str, Look]:
    """Sheet name -> what its XML shows. Raises InputError on damage, and on what no reader could take in safely."""
    import xml.etree.ElementTree as ET

    refuse_bomb(name, data, guards)
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            parts = {info.filename: info for info in archive.infolist()}
            if "xl/workbook.xml" not in parts:
                raise InputError("is no workbook of the usual kind", file=name, right="a workbook saved as .xlsx")
            if "_rels/.rels" in parts:
                main = [link.get("Target", "") for link in ET.fromstring(part_of(name, archive, "_rels/.rels"))
                        if link.get("Type", "").endswith("/officeDocument")]
                if main and main[0].lstrip("/") != "xl/workbook.xml":
                    raise InputError("the workbook keeps its sheets in an unusual place", file=name, right=_RIGHT)
            # Unpacked in full, each part's checksum and true size are checked before the reader sees it.
            book, links = (ET.fromstring(part_of(name, archive, part)) for part in ("xl/workbook.xml", "xl/_rels/workbook.xml.rels"))
            beside = {part.casefold(): part_of(name, archive, part) for part in parts if part.casefold() in _OTHER_PARTS}
            styles = cellstyles.styles_of(beside.get("xl/styles.xml", b""))
            struck_texts = cellstyles.struck_texts(beside.get("xl/sharedstrings.xml", b""))
            targets = {link.get("Id"): link.get("Target", "") for link in links}
            looks: dict[str, Look] = {}
            titles: set[str] = set()
            for node in book.iter():
                if not node.tag.endswith("}sheet") and node.tag != "sheet":
                    continue
                link = next((v for k, v in node.attrib.items() if k.endswith("}id")), None)
                target = targets.get(link, "")
                part = target.lstrip("/") if target.startswith("/") else "xl/" + target
                title = node.get("name", "")
                if title.casefold() in titles:
                    raise InputError("two sheets have one name", file=name, sheet=title, right="a name for each sheet")
                titles.add(title.casefold())
                if part not in parts:
                    raise InputError("a sheet's part is missing from the workbook", file=name, sheet=title, right=_RIGHT)
                if "chartsheet" not in part and "dialogsheet" not in part:
                    xml = part_of(name, archive, part)
                    look = _Look(name, title, guards, styles or cellstyles.Styles(), struck_texts).at(xml)
                    look.comments, unread = _comments(archive, parts, part)
                    told = {
                        "number formats and struck-out cells cannot be read from this workbook": styles is None,
                        "some comments cannot be read from this workbook": unread,
                        "conditional formatting here may strike cells out or change their numbers: it is not looked at":
                            styles is not None and styles.conditional and b"<cfRule" in xml,
                    }
                    look.unknown = tuple(what for what, is_so in told.items() if is_so)
                    looks[title] = look
            return looks
    except (
        zipfile.BadZipFile, zlib.error, ET.ParseError, KeyError, EOFError, NotImplementedError, RuntimeError, OSError, ValueError,
    ) as error:
        raise InputError(f"the workbook is damaged or no workbook ({error})", file=name, right="a workbook saved as .xlsx") from error


def part_of(name: str, archive: zipfile.ZipFile, part: str) -> bytes:
    """A part unpacked in full. Raises InputError where it is not UTF-8 or declares a document type."""
    data = archive.read(part)
    if data[:2] in (b"\xff\xfe", b"\xfe\xff") or b"\x00" in data[:200]:
        raise InputError("a part of the workbook is not written in UTF-8", file=name, right=_RIGHT)
    if b"<!DOCTYPE" in data or b"<!ENTITY" in data:
        raise InputError("the workbook declares its own document type", file=name, right="a workbook saved as .xlsx")
    return data


def _comments(archive: zipfile.ZipFile, parts: Iterable[str], part: str) -> tuple[list[tuple[int, int, str]], bool]:
    """The comments of a sheet's part, and whether some cannot be read: they are no ground to refuse a list."""
    import xml.etree.ElementTree as ET

    folder, _, file = part.rpartition("/")
    links = f"{folder}/_rels/{file}.rels"
    if links not in parts:
        return [], False
    found: list[tuple[int, int, str]] = []
    unread = False
    try:
        for link in ET.fromstring(part_of("", archive, links)):
            if not link.get("Type", "").endswith(("/comments", "/threadedComment")):
                continue
            target = link.get("Target", "")
            target = target.lstrip("/") if target.startswith("/") else posixpath.normpath(posixpath.join(folder, target))
            read = cellstyles.comments_of(part_of("", archive, target)) if target in parts else None
            unread = unread or read is None
            found += read or []
    except (InputError, ET.ParseError, zipfile.BadZipFile, zlib.error, EOFError, NotImplementedError, RuntimeError, OSError, ValueError):
        return sorted(found), True
    return sorted(found), unread


class _Look:
    """The look at one sheet. `struck_texts` : number of a shared text -> whether all of it is struck out, or a part."""

    def __init__(
        self, file: str, sheet: str, guards: GuardsPart, styles: cellstyles.Styles | None = None,
        struck_texts: dict[int, bool] | None = None,
    ) -> None:
        self.file, self.sheet, self.guards = file, sheet, guards
        self.styles, self.telling = styles or cellstyles.Styles(), (styles or cellstyles.Styles()).telling
        self.struck_texts = struck_texts or {}

    def at(self, xml: bytes) -> Look:
        """Raises InputError where rows or cells bear no proper place, a place twice, or one beyond the guards."""
        if b"<!--" in xml or b"<![CDATA[" in xml or b"sheetData" not in xml:
            return self._walk(xml)
        refs = _PLAIN_REF.findall(xml)
        if len(refs) != len(_TAG.findall(xml)) or _PREFIXED.search(xml) or _ODD_ATTRIBUTE.search(xml):
            return self._walk(xml)
        if b"<strike" in xml:
            return self._walk(xml)  # texts that stand in their cells
        if b"<mergeCell" in xml and len(_MERGE_TAG.findall(xml)) != xml.count(b"<mergeCell "):
            return self._walk(xml)
        self._check(refs)
        hidden = frozenset(map(int, _ROW_HIDDEN.findall(xml))) if b"hidden=" in xml else frozenset()
        merges = self._merges(ref.decode("ascii", "replace") for ref in _MERGE_TAG.findall(xml)) if b"<mergeCell" in xml else ()
        # Only where errors or formulas stand anywhere is each cell looked at.
        if b' t="e"' in xml or (b"<f" in xml and _unsaved_somewhere(xml)):
            return self._walk(xml)
        look = Look(hidden, merges, hidden_columns=_hidden_columns(xml))
        self._dress(look, _numbered(_STYLED, self.telling, xml), _numbered(_SHARED, self.struck_texts, xml), {})
        return look

    def _dress(self, look: Look, styled: dict[tuple[int, int], int], shared: dict[tuple[int, int], int],
               inline: dict[tuple[int, int], bool]) -> None:
        """Say of a look what its cells' styles and struck-out texts tell."""
        look.codes = {place: self.styles.codes[n] for place, n in styled.items() if n in self.styles.codes}
        struck = {place: self.struck_texts[n] for place, n in shared.items() if n in self.struck_texts} | inline
        look.struck = frozenset(at for at, n in styled.items() if n in self.styles.struck) | {at for at, whole in struck.items() if whole}
        look.partly_struck = frozenset(at for at, whole in struck.items() if not whole) - look.struck

    def _refuse(self, what: str, right: str = _RIGHT) -> InputError:
        return InputError(what, file=self.file, sheet=self.sheet, right=right)

    def _check(self, refs: list[bytes]) -> None:
        """Rows and cells in the order of the sheet: rows in order, none twice, all within the guards."""
        if not refs:
            return
        rows = list(map(int, map(bytes.lstrip, refs, [_LETTERS] * len(refs))))
        if len(set(refs)) < len(refs):
            seen: set[bytes] = set()
            twice = next(ref for ref in refs if ref in seen or seen.add(ref)).decode()  # type: ignore[func-returns-value]
            raise self._refuse(f"{'two rows bear the number' if twice.isdigit() else 'two cells bear the name'} {twice}")
        if not all(map(operator.le, rows, rows[1:])) or rows[0] < 1:
            raise self._refuse("the rows of the sheet are out of order, or a cell stands in another cell's row")
        columns = set(map(bytes.rstrip, refs, [b"0123456789"] * len(refs)))
        self._check_reach(rows[-1], max(column_number(c.decode()) for c in columns))

    def _check_reach(self, last_row: int, last_column: int) -> None:
        guards = self.guards
        if last_row >= MAX_ROW or last_column >= MAX_COLUMN or last_row * max(last_column, 1) > guards.cells or last_row > guards.rows:
            raise self._refuse(
                f"the sheet reaches to row {last_row:,} and column {letters(min(last_column, 10**6)) or 'A'}, more than is read",
                f"at most {guards.rows:,} rows and {guards.cells:,} cells, or higher [guards] in the job file",
            )

    def _merges(self, refs: Iterator[str]) -> tuple[tuple[int, int, int, int], ...]:
        """Merged ranges. Raises InputError on one that is none, and on ranges that overlap."""
        merges: list[tuple[int, int, int, int]] = []
        for ref in refs:
            found = _MERGE.fullmatch(ref)
            if found is None:
                if _REF.fullmatch(ref):
                    continue  # a cell merged with itself
                raise self._refuse(f"a merged range is no range of cells ({ref[:40]})")
            left, top, right, bottom = found.groups()
            merges.append((int(top), column_number(left), int(bottom), column_number(right)))
        lasts: dict[int, int] = {}
        for top, left, bottom, right in sorted(merges):
            if left != right or top == bottom:
                continue  # only ranges down one column tell something of rows
            if lasts.get(left, 0) >= top:
                raise self._refuse("merged ranges overlap")
            lasts[left] = bottom
        return tuple(merges)

    def _walk(self, xml: bytes) -> Look:
        """Each row and cell in turn, whatever way they are written."""
        import xml.etree.ElementTree as ET

        hidden: set[int] = set()
        errors: dict[tuple[int, int], str] = {}
        unsaved: set[tuple[int, int]] = set()
        merged: list[str] = []
        columns: list[tuple[int, int]] = []
        styled: dict[tuple[int, int], int] = {}
        shared: dict[tuple[int, int], int] = {}
        inline: dict[tuple[int, int], bool] = {}
        row = column = last_column = 0
        places: set[tuple[int, int]] = set()
        formula = result = False
        shown = ""
        for event, node in ET.iterparse(io.BytesIO(xml), ("start", "end")):
            tag = node.tag.rpartition("}")[2]
            if event == "start":
                if tag == "row":
                    row, column = self._row(node.get("r"), row), 0
                    if (node.get("hidden") or "").strip() in ("1", "true"):
                        hidden.add(row)
                elif tag == "c":
                    column = self._column(node.get("r"), row, column)
                    last_column = max(last_column, column)
                    if (row, column) in places:
                        raise self._refuse(f"two cells bear the name {letters(column)}{row}")
                    places.add((row, column))
                    self._check_reach(row, last_column)
                    formula = result = False
                    shown = ""
                    style = _whole(node.get("s"))
                    if style in self.telling:
                        styled[row, column] = style
                elif tag == "col" and (node.get("hidden") or "").strip() in ("1", "true"):
                    columns.append((_whole(node.get("min")), _whole(node.get("max"))))
                elif tag == "mergeCell":
                    merged.append(node.get("ref") or "")
                continue
            if tag == "f":
                formula = True
            elif tag == "v":
                # A formula of text may well have an empty text as its result.
                result, shown = True, node.text or ""
            elif tag == "c":
                kind = node.get("t")
                if kind == "e":
                    errors[row, column] = shown
                elif formula and (not result or (shown == "" and kind != "str")):
                    unsaved.add((row, column))
                elif kind == "s" and self.struck_texts:
                    shared[row, column] = _whole(shown)
                elif kind == "inlineStr" and (all_struck := cellstyles.struck_out(node)) is not None:
                    inline[row, column] = all_struck
                node.clear()
            elif tag == "row":
                node.clear()
        look = Look(frozenset(hidden), self._merges(iter(merged)), errors, frozenset(unsaved), tuple(columns))
        self._dress(look, styled, shared, inline)
        return look

    def _row(self, text: str | None, before: int) -> int:
        """A row's number; one without stands below the row before it."""
        if text is None:
            return before + 1
        number = int(text) if text.isascii() and text.isdigit() and len(text) <= 7 else -1
        if number <= before:
            raise self._refuse(f"a row bears the number {text[:20]}, after row {before}")
        self._check_reach(number, 1)
        return number

    def _column(self, text: str | None, row: int, before: int) -> int:
        """A cell's column; one without a name stands right of the cell before it."""
        if text is None:
            return before + 1
        found = _REF.fullmatch(text.upper())
        if found is None or int(found.group(2)) != row:
            raise self._refuse(f"a cell in row {row} bears the name {text[:20]}")
        return column_number(found.group(1))


def _whole(text: str | None) -> int:
    """A plain whole number; 0 for anything else."""
    return int(text) if text and text.isascii() and text.isdigit() and len(text) <= 9 else 0


def _numbered(pattern: bytes, numbers: Collection[int], xml: bytes) -> dict[tuple[int, int], int]:
    """The cells whose style or text bears one of these numbers, as `pattern` finds them."""
    if not numbers:
        return {}
    spelt = b"|".join(b"%d" % n for n in numbers) if len(numbers) <= _MOST_SPELT else rb"\d{1,9}"
    found = ((int(row), column_number(column.decode("ascii")), int(n)) for column, row, n in re.findall(pattern % spelt, xml))
    return {(row, column): n for row, column, n in found if n in numbers}


def _hidden_columns(xml: bytes) -> tuple[tuple[int, int], ...]:
    found = []
    for tag in _COLUMN_TAG.findall(xml, 0, max(xml.find(b"<sheetData"), 0)):
        told = {key: value.decode("ascii", "replace") for key, value in _ATTRIBUTE.findall(tag)}
        if told.get(b"hidden", "") in ("1", "true"):
            found.append((_whole(told.get(b"min")), _whole(told.get(b"max"))))
    return tuple(found)


_FORMULA_END = re.compile(rb"</f>|<f\b[^>]*/>")
_STORED = re.compile(rb"\s*<v>[^<]")


def _unsaved_somewhere(xml: bytes) -> bool:
    """Whether some formula has no stored result right behind it."""
    return any(not _STORED.match(xml, found.end()) for found in _FORMULA_END.finditer(xml))
