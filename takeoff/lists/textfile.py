"""Text tables (CSV, semicolons, tabs, pipes) become rows of cells, one record a row, nothing shifted and nothing swallowed."""

from __future__ import annotations

import csv
import html
import re
from collections import Counter
from dataclasses import dataclass, field

from takeoff.errors import InputError
from takeoff.findings import Finding

SEPARATORS = ";\t,|"
#: a quoted cell may run over this many lines; a quote still open then was never meant as one
_MOST_QUOTED_LINES = 20
_MOST_LINE = 1_000_000
_MARKS = ((b"\xef\xbb\xbf", "utf-8-sig"), (b"\xff\xfe", "utf-16"), (b"\xfe\xff", "utf-16"))
#: what UTF-8 letters look like once they were read as Windows-1252 and saved again
_MISREAD = re.compile(r"Ã[\u0080-\u00bf¤¶¼Ÿ–œ©¨±³¢ª§¡\u00ad²‰]|Â[°²³½¼¾\u00a0]|â€")
_COMMENT = re.compile(r"<!--.{0,5000}?-->", re.DOTALL)
_BREAK = re.compile(r"<br\s*/?>", re.IGNORECASE)


@dataclass(slots=True)
class TextTable:
    """The records of a text file. `broken`: record number (from 1) -> (kind of finding, why its fields cannot be told apart)."""

    rows: list[list[str | None]]
    broken: dict[int, tuple[str, str]] = field(default_factory=dict)
    findings: list[Finding] = field(default_factory=list)


def read_text(name: str, data: bytes, most_rows: int) -> TextTable:
    """The records of a text file of any of the usual encodings and separators.

    Raises InputError where it is no text, has a line of more than a million characters, or more rows than `most_rows`.
    """
    table = TextTable([])
    text = _decode(name, data, table.findings)
    text = text.replace("\r\r\n", "\n").replace("\r\n", "\n").replace("\r", "\n")
    if "<!--" in text:
        # A comment keeps its line ends, so that rows keep their numbers.
        text = _COMMENT.sub(lambda found: "\n" * found.group(0).count("\n"), text)
    lines = text.split("\n")
    while lines and not lines[-1].strip():
        lines.pop()
    longest = max(map(len, lines), default=0)
    if longest > _MOST_LINE:
        raise InputError(f"has a line of {longest:,} characters", file=name, right=f"lines of at most {_MOST_LINE:,} characters")
    separator = _separator(lines)
    number = 0
    while number < len(lines):
        fields, used, why = _record(lines, number, separator)
        number += used
        if separator == "|":
            fields = _without_edges(fields)
        table.rows.append([_clean(cell) for cell in fields])
        if why is not None:
            table.broken[len(table.rows)] = why
        if len(table.rows) > most_rows:
            raise InputError(f"has more than {most_rows:,} rows", file=name, right="fewer rows, or a higher [guards] rows")
    return table


def _decode(name: str, data: bytes, findings: list[Finding]) -> str:
    for mark, encoding in _MARKS:
        if data.startswith(mark):
            try:
                return _repaired(name, data.decode(encoding), findings)
            except UnicodeDecodeError as error:
                raise InputError(f"is no proper {encoding} text", file=name) from error
    sample = data[:4000]
    if b"\x00" in sample:
        # UTF-16 without a mark has a zero in every second byte of plain text.
        for encoding, zeros in (("utf-16-le", sample[1::2]), ("utf-16-be", sample[0::2])):
            if zeros.count(0) > 0.4 * len(zeros):
                findings.append(Finding("note", "text-repaired", f"the file was read as {encoding}: it bears no mark", file=name))
                return data.decode(encoding, errors="replace")
        raise InputError("is no text file", file=name, right="a CSV file of text")
    if b"\x00" in data:
        raise InputError("holds zero bytes, so it is no text file", file=name, right="a CSV file of text")
    try:
        return _repaired(name, data.decode("utf-8"), findings)
    except UnicodeDecodeError:
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
    joined = line
    for extra in range(1, min(_MOST_QUOTED_LINES, len(lines) - start)):
        joined += "\n" + lines[start + extra]
        if '"' in lines[start + extra] and not _left_open(joined, separator):
            fields = next(csv.reader([joined], delimiter=separator))
            # A cell that swallowed whole lines of other records is no cell.
            if not any(cell.count("\n") and cell.count(separator) > 1 for cell in fields):
                return fields, extra + 1, None
            break
    fields = line.replace('"', "").split(separator)
    return fields, 1, ("unclosed-quote", "a quote in this line is never closed: its fields cannot be told apart")


def _left_open(line: str, separator: str) -> bool:
    """Whether a quote that opens a field is still open at the end; a bare inch mark inside a field opens nothing."""
    position, end = 0, len(line)
    while position <= end:
        if position < end and line[position] == '"':
            position += 1
            while True:
                close = line.find('"', position)
                if close < 0:
                    return True
                if line[close + 1 : close + 2] == '"':
                    position = close + 2
                    continue
                position = close + 1
                break
        following = line.find(separator, position)
        if following < 0:
            return False
        position = following + 1
    return False


def _fields(line: str, separator: str) -> list[str]:
    if '"' not in line:
        return line.split(separator)
    csv.field_size_limit(_MOST_LINE * 2)
    return next(csv.reader([line], delimiter=separator), [])


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
