"""Our own outputs given as a list: recognised and refused, or every mass would be counted again from its copy. Rank 3."""

from __future__ import annotations

import io
import zipfile
import zlib

from takeoff.errors import InputError

#: where each kind of workbook keeps the mark that ours bears, and the mark as it stands there
_MARKED = {"docProps/custom.xml": (b'name="takeoff"', b"weight schedule"), "meta.xml": (b'meta:name="takeoff"', b"weight schedule")}
#: an older workbook is one block of bytes; ours keeps its remark in it
_OLD_WORKBOOK = b"\xd0\xcf\x11\xe0"
_REMARK = "Weight schedule written by takeoff"
_MOST_BYTES = 1_000_000
#: how our CSV starts, and two headings of our schedule that stand together nowhere else
_CSV_STARTS = b"file,sheet,row,mark,assembly,pick,phase,run,bundle,section,"
_HEADINGS = (b"Basis no.", b"What to know")
#: as far down as a saved-out schedule has its headings
_TOP_BYTES = 8_000


def refuse_ours(file: str, data: bytes) -> None:
    """Raises InputError where `data` is a weight schedule that this program wrote, whatever it was saved as since."""
    if _is_ours(data):
        raise InputError(
            "is a weight schedule that this program wrote, not a member list", file=file, right="the member list it was made from"
        )


def _is_ours(data: bytes) -> bool:
    if data[:4] == _OLD_WORKBOOK:
        return any(_REMARK.encode(encoding) in data for encoding in ("latin-1", "utf-16-le"))
    if data[:2] != b"PK":
        top = data[:_TOP_BYTES]
        return top.removeprefix(b"\xef\xbb\xbf").startswith(_CSV_STARTS) or all(heading in top for heading in _HEADINGS)
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            for part, marks in _MARKED.items():
                if part in archive.namelist() and archive.getinfo(part).file_size < _MOST_BYTES:
                    text = archive.read(part)
                    if all(mark in text for mark in marks):
                        return True
    except (zipfile.BadZipFile, EOFError, OSError, NotImplementedError, RuntimeError, ValueError, zlib.error):
        return False  # what is wrong with it is said where it is read
    return False
