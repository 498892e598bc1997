"""Broken and hostile workbooks, made part by part, for the tests: no program would write them."""

from __future__ import annotations

import struct
import zipfile
from pathlib import Path

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
LINKS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
STRICT = {MAIN: "http://purl.oclc.org/ooxml/spreadsheetml/main", LINKS: "http://purl.oclc.org/ooxml/officeDocument/relationships"}
HEADINGS = ("Mark", "Quantity", "Section", "Material", "Length (mm)")

WORKBOOK = f'<?xml version="1.0"?><workbook xmlns="{MAIN}" xmlns:r="{LINKS}"><sheets><sheet name="List" sheetId="1" r:id="rId1"/></sheets></workbook>'  # noqa: E501
RELATIONS = (
    '<?xml version="1.0"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
    f'<Relationship Id="rId1" Type="{LINKS}/worksheet" Target="worksheets/sheet1.xml"/></Relationships>'
)
ROOT = (
    '<?xml version="1.0"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
    f'<Relationship Id="rId1" Type="{LINKS}/officeDocument" Target="xl/workbook.xml"/></Relationships>'
)
TYPES = (
    '<?xml version="1.0"?><Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types">'
    '<Default Extension="xml" ContentType="application/xml"/></Types>'
)
SHEET_PART = "xl/worksheets/sheet1.xml"
#: each stands for ten of the one before it: a few hundred bytes that unfold to a thousand million
BOMB = (
    '<!DOCTYPE x [<!ENTITY a "aaaaaaaaaa">' + "".join(f'<!ENTITY {chr(98 + i)} "' + f"&{chr(97 + i)};" * 10 + '">' for i in range(9)) + "]>"
)


def cell(name: str, text: str) -> str:
    return f'<c r="{name}" t="inlineStr"><is><t>{text}</t></is></c>'


def heading() -> str:
    return '<row r="1">' + "".join(cell(f"{letter}1", text) for letter, text in zip("ABCDE", HEADINGS, strict=True)) + "</row>"


def row(number: int, mark: str | None = None) -> str:
    """A member row: two beams of 6 m."""
    n = number
    return (
        f'<row r="{n}">{cell(f"A{n}", mark or f"M{n}")}<c r="B{n}"><v>2</v></c>{cell(f"C{n}", "UB 203x133x25")}'
        f'{cell(f"D{n}", "S355")}<c r="E{n}"><v>6000</v></c></row>'
    )


def sheet(body: str, *, before: str = "", after: str = "") -> str:
    return f'<?xml version="1.0"?>{before}<worksheet xmlns="{MAIN}"><sheetData>{body}</sheetData>{after}</worksheet>'


PLAIN = heading() + row(2)
FAR = "<row r='1048577'><c r='XFD1048577' t='inlineStr'><is><t>x</t></is></c></row>"


def strict(text: str) -> str:
    for plain, other in STRICT.items():
        text = text.replace(plain, other)
    return text


def write(path: Path, body: str | bytes, parts: dict[str, str | bytes] | None = None, *, without: str | None = None) -> Path:
    """A workbook with this XML as its one sheet; `parts` replace or add to its others."""
    all_parts: dict[str, str | bytes] = {
        "[Content_Types].xml": TYPES,
        "_rels/.rels": ROOT,
        "xl/workbook.xml": WORKBOOK,
        "xl/_rels/workbook.xml.rels": RELATIONS,
        SHEET_PART: body,
    }
    all_parts |= parts or {}
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, text in all_parts.items():
            if name != without:
                archive.writestr(name, text)
    return path


def two_sheets(second: str) -> dict[str, str | bytes]:
    """Parts of a workbook whose two sheets bear these names."""
    link = f'<Relationship Id="rId2" Type="{LINKS}/worksheet" Target="worksheets/sheet2.xml"/></Relationships>'
    return {
        "xl/workbook.xml": WORKBOOK.replace("</sheets>", f'<sheet name="{second}" sheetId="2" r:id="rId2"/></sheets>'),
        "xl/_rels/workbook.xml.rels": RELATIONS.replace("</Relationships>", link),
        "xl/worksheets/sheet2.xml": sheet(heading() + row(2, "N1") + row(3, "N2")),
    }


def open_document(path: Path, rows: str) -> Path:
    """An OpenDocument spreadsheet of these table rows."""
    names = "urn:oasis:names:tc:opendocument:xmlns:"
    content = (
        f'<?xml version="1.0"?><office:document-content xmlns:office="{names}office:1.0" xmlns:table="{names}table:1.0" '
        f'xmlns:text="{names}text:1.0"><office:body><office:spreadsheet><table:table table:name="List">{rows}</table:table>'
        "</office:spreadsheet></office:body></office:document-content>"
    )
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("mimetype", "application/vnd.oasis.opendocument.spreadsheet")
        archive.writestr("content.xml", content)
        archive.writestr("META-INF/manifest.xml", f'<?xml version="1.0"?><manifest:manifest xmlns:manifest="{names}manifest:1.0"/>')
    return path


def open_table() -> str:
    """Table rows of an OpenDocument spreadsheet: headings, and a member row of two beams of 6 m."""
    def text(value: str) -> str:
        return f'<table:table-cell office:value-type="string"><text:p>{value}</text:p></table:table-cell>'

    def number(value: int) -> str:
        return f'<table:table-cell office:value-type="float" office:value="{value}"><text:p>{value}</text:p></table:table-cell>'

    cells = (text("M2"), number(2), text("UB 203x133x25"), text("S355"), number(6000))
    return f"<table:table-row>{''.join(map(text, HEADINGS))}</table:table-row><table:table-row>{''.join(cells)}</table:table-row>"


def _record(kind: int, data: bytes = b"") -> bytes:
    """One record of a binary workbook: its kind and length, seven bits a byte."""
    out = b""
    for number in (kind, len(data)):
        left = number
        while left > 0x7F:
            out += bytes([left & 0x7F | 0x80])
            left >>= 7
        out += bytes([left])
    return out + data


def _wide(text: str) -> bytes:
    return struct.pack("<I", len(text)) + text.encode("utf-16-le")


def binary_sheet() -> bytes:
    """The sheet of an .xlsb: headings, and a member row of two beams of 6 m."""
    out = _record(129) + _record(148, struct.pack("<IIII", 0, 1, 0, 4)) + _record(145)
    for number, values in enumerate((HEADINGS, ("M2", 2.0, "UB 203x133x25", "S355", 6000.0))):
        out += _record(0, struct.pack("<IIHBBB", number, 0, 300, 0, 0, 0) + struct.pack("<I", 0))
        for column, value in enumerate(values):
            place = struct.pack("<II", column, 0)
            out += _record(6, place + _wide(value)) if isinstance(value, str) else _record(5, place + struct.pack("<d", value))
    return out + _record(146) + _record(130)


def binary_workbook(path: Path, sheet_data: bytes) -> Path:
    """An .xlsb with these records as its one sheet."""
    entry = _record(156, struct.pack("<II", 0, 1) + _wide("rId1") + _wide("List"))
    book = _record(131) + _record(143) + entry + _record(144) + _record(132)
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("[Content_Types].xml", TYPES)
        archive.writestr("_rels/.rels", ROOT.replace("workbook.xml", "workbook.bin"))
        archive.writestr("xl/workbook.bin", book)
        archive.writestr("xl/_rels/workbook.bin.rels", RELATIONS.replace("sheet1.xml", "sheet1.bin"))
        archive.writestr("xl/worksheets/sheet1.bin", sheet_data)
    return path


#: an .xls that a spreadsheet program saved, with the same row
OLD_WORKBOOK = Path(__file__).parent / "fuzz_cases" / "an_older_workbook.xls"
