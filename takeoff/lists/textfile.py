"""Text tables (CSV, semicolons, tabs, pipes) become rows of cells, one record a row, nothing shifted and nothing swallowed."""

from __future__ import annotations

import csv
import html
import re
from collections import Counter
from dataclasses import dataclass, field

from takeoff.errors import InputError
from takeoff.findings import Finding
from takeoff.job import GuardsPart

SEPARATORS = ";\t,|"
#: a quoted cell may run over this many lines; a quote still open then was never meant as one
_MOST_QUOTED_LINES = 20
#: characters a line may have, for each megabyte that [guards] lets a file have
_LINE_A_MEGABYTE = 5_000
_MARKS = ((b"\xff\xfe\0\0", "utf-32"), (b"\0\0\xfe\xff", "utf-32"), (b"\xef\xbb\xbf", "utf-8-sig"), (b"\xff\xfe", "utf-16"),
          (b"\xfe\xff", "utf-16"))
#: what UTF-8 letters look like once they were read as Windows-1252 and saved again
_MISREAD = re.compile(r"Ã[\u0080-\u00bf¤¶¼Ÿ–œ©¨±³¢ª§¡\u00ad²‰]|Â[°²³½¼¾\u00a0]|â€")
_LONGEST_COMMENT = 5_000
#: letters beyond ASCII for each damaged byte, from which on a file is taken for damaged UTF-8 and not for another encoding
_MOSTLY_RIGHT = 4
#: from inside a quoted field to behind the quote that closes it; two quotes are one sign of the text
_CLOSING = re.compile(r'[^"]*+(?:""[^"]*+)*+"')
_BREAK = re.compile(r"<br\s*/?>", re.IGNORECASE)


@dataclass(slots=True)
class TextTable:
    """The records of a text file. `broken`: record number (from 1) -> (kind of finding, why its fields cannot be told apart)."""

    rows: list[list[str | None]]
    broken: dict[int, tuple[str, str]] = field(default_factory=dict)
    findings: list[Finding] = field(default_factory=list)


def read_text(name: str, data: bytes, guards: GuardsPart) -> TextTable:
    """The records of a text file of any of the usual encodings and separators.

    Raises InputError where it is no text, or has longer lines, more rows or more cells than the guards allow.
    """
    table = TextTable([])
    text = _decode(name, data, table.findings)
    text = text.replace("\r\r\n", "\n").replace("\r\n", "\n").replace("\r", "\n")
    if "<!--" in text:
        text = _without_comments(text)
    lines = text.split("\n")
    while lines and not lines[-1].strip():
        lines.pop()
    longest = max(map(len, lines), default=0)
    most_line = int(guards.megabytes * _LINE_A_MEGABYTE)
    if longest > most_line:
        raise InputError(f"has a line of {longest:,} characters", file=name,
                         right=f"lines of at most {most_line:,} characters, or a higher [guards] megabytes in the job file")
    separator = _separator(lines)
    number = cells = 0
    while number < len(lines):
        fields, used, why = _record(lines, number, separator)
        number += used
        if separator == "|":
            fields = _without_edges(fields)
        table.rows.append([_clean(cell) for cell in fields])
        if why is not None:
            table.broken[len(table.rows)] = why
        cells += len(fields)
        if len(table.rows) > guards.rows:
            raise InputError(f"has more than {guards.rows:,} rows", file=name, right="fewer rows, or a higher [guards] rows")
        if cells > guards.cells:
            raise InputError(f"has more than {guards.cells:,} cells", file=name, right="fewer cells, or a higher [guards] cells")
    return table


def _decode(name: str, data: bytes, findings: list[Finding]) -> str:
    for mark, encoding in _MARKS:
        if data.startswith(mark):
            try:
                return _repaired(name, data.decode(encoding), findings)
            except UnicodeDecodeError as error:
                raise InputError(f"is no proper {encoding} text", file=name) from error
    sample = data[:4000]
    if b"\x00" in sample.rstrip(b"\x00"):
        # UTF-16 without a mark has a zero in every second byte of plain text.
        for encoding, zeros in (("utf-16-le", sample[1::2]), ("utf-16-be", sample[0::2])):
            if zeros.count(0) > 0.4 * len(zeros):
                findings.append(Finding("note", "text-repaired", f"the file was read as {encoding}: it bears no mark", file=name))
                return data.decode(encoding, errors="replace")
        raise InputError("is no text file: it holds zero bytes", file=name, right="a CSV file of text")
    if b"\x00" in data:
        raise InputError("holds zero bytes, so it is no text file", file=name, right="a CSV file of text")
    try:
        return _repaired(name, data.decode("utf-8"), findings)
    except UnicodeDecodeError:
        mended = data.decode("utf-8", errors="replace")
        bad = mended.count("\ufffd")
        if sum(sign > "\x7f" for sign in mended) > _MOSTLY_RIGHT * bad:
            # Letters of two and more bytes that are right so often are no accident: a few bytes are damaged, the rest is UTF-8.
            said = f"bytes of the file that are no UTF-8 ({bad}) stand as \ufffd"
            findings.append(Finding("note", "text-repaired", said, file=name, right="UTF-8"))
            return mended
        findings.append(Finding("note", "text-repaired", "the file is not UTF-8; it was read as Windows-1252", file=name, right="UTF-8"))
        return data.decode("cp1252", errors="replace")


def _repaired(name: str, text: str, findings: list[Finding]) -> str:
    """Text whose letters were once read in the wrong encoding, put right where it can be."""
    if not _MISREAD.search(text):
        return text
    try:
        repaired = text.encode("cp1252").decode("utf-8")
    except (UnicodeEncodeError, UnicodeDecodeError):
        return text
    findings.append(
        Finding("note", "text-repaired", "letters such as Ã¤ were put right: the file was saved in the wrong encoding", file=name)
    )
    return repaired


def _separator(lines: list[str]) -> str:
    """The sign that splits the most lines into the same number of fields; lines that start with a pipe are a pipe table."""
    sample = [line for line in lines[:400] if line.strip()][:200]
    piped = sum(line.lstrip().startswith("|") for line in sample)
    if piped > 0 and piped * 2 >= len([line for line in sample if "|" in line]) and piped >= 2:
        return "|"
    best, best_score = ",", 0.0
    for sign in SEPARATORS:
        counts = [len(fields) for line in sample if (fields := _fields(line, sign)) and len(fields) > 1]
        if not counts:
            continue
        usual, times = Counter(counts).most_common(1)[0]
        score = times + usual / 1000
        if score > best_score:
            best, best_score = sign, score
    return best


def _record(lines: list[str], start: int, separator: str) -> tuple[list[str], int, tuple[str, str] | None]:
    """The fields of the record that starts at a line, how many lines it takes, and why it is broken, if it is."""
    line = lines[start]
    if '"' not in line or not _left_open(line, separator):
        return _fields(line, separator), 1, None
    joined, still_open = [line], True
    for following in lines[start + 1:start + _MOST_QUOTED_LINES]:
        joined.append(following)
        still_open = _left_open(following, separator, quoted=True)
        if not still_open:
            fields = _fields("\n".join(joined), separator)
            # A cell that swallowed whole lines of other records is no cell.
            if not any(cell.count("\n") and cell.count(separator) > 1 for cell in fields):
                return fields, len(joined), None
            break
    fields = line.replace('"', "").split(separator)
    return fields, 1, ("unclosed-quote", "a quote in this line is never closed: its fields cannot be told apart")


def _left_open(line: str, separator: str, *, quoted: bool = False) -> bool:
    """Whether a quote that opens a field is still open at the end; a bare inch mark inside a field opens nothing.

    `quoted`: the line begins inside a quoted field.
    """
    position, end = 0, len(line)
    while position <= end:
        if quoted or (position < end and line[position] == '"'):
            position += 0 if quoted else 1
            quoted = False
            closed = _CLOSING.match(line, position)
            if closed is None:
                return True
            position = closed.end()
        following = line.find(separator, position)
        if following < 0:
            return False
        position = following + 1
    return False


def _fields(line: str, separator: str) -> list[str]:
    if '"' not in line:
        return line.split(separator)
    csv.field_size_limit(max(csv.field_size_limit(), len(line) + 1))
    return next(csv.reader([line], delimiter=separator), [])


def _without_comments(text: str) -> str:
    """Comments of a page taken out, their line ends kept, so that rows keep their numbers."""
    parts: list[str] = []
    done = 0
    while (start := text.find("<!--", done)) >= 0:
        end = text.find("-->", start + 4)
        if end < 0:
            break
        if end - start > _LONGEST_COMMENT:
            # Too long for a comment: what stands before its end is looked at anew, but never twice.
            start = text.rfind("<!--", start, end)
        if end - start > _LONGEST_COMMENT:
            parts.append(text[done:end])
            done = end
            continue
        parts += text[done:start], "\n" * text.count("\n", start, end)
        done = end + 3
    return "".join([*parts, text[done:]])


def _without_edges(fields: list[str]) -> list[str]:
    """A pipe table's row without the empty fields outside its first and last pipe."""
    if fields and not fields[0].strip():
        fields = fields[1:]
    if fields and not fields[-1].strip():
        fields = fields[:-1]
    return fields


def _clean(cell: str) -> str | None:
    """A cell's text, escapes of the source format (``\\*``, ``<br>``, ``&nbsp;``) undone; None where nothing is left."""
    if "\\" in cell:
        cell = re.sub(r"\\([*_|#~\\\[\]()<>-])", r"\1", cell)
    if "<" in cell:
        cell = _BREAK.sub(" ", cell)
    if "&" in cell:
        cell = html.unescape(cell)
    return cell.strip() or None
