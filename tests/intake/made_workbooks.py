"""Workbooks made by hand, part by part, for what no library would write."""

import io
import struct
import zipfile
from collections.abc import Mapping
from pathlib import Path

from meanlab.intake.grid import Sheet
from meanlab.intake.workbooks import sheets_of

FILES = Path(__file__).parent / "files"
MAIN = 'xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"'
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006"


def zipped(parts: Mapping[str, bytes | str], compression: int = zipfile.ZIP_DEFLATED) -> bytes:
    """A zip file of these parts."""
    target = io.BytesIO()
    with zipfile.ZipFile(target, "w", compression) as archive:
        for name, content in parts.items():
            archive.writestr(name, content)
    return target.getvalue()


def xlsx_parts(*sheets: str, workbook: str = "", more_relations: str = "") -> dict[str, bytes | str]:
    """The parts of a workbook whose sheets have these contents of their <worksheet> element."""
    listed = "".join(f'<sheet name="S{n}" sheetId="{n}" r:id="rId{n}"/>' for n in range(1, len(sheets) + 1))
    pointed = "".join(
        f'<Relationship Id="rId{n}" Type="{RELATIONS}/worksheet" Target="worksheets/sheet{n}.xml"/>'
        for n in range(1, len(sheets) + 1)
    )
    parts: dict[str, bytes | str] = {
        "[Content_Types].xml": f'<Types xmlns="{PACKAGE}/content-types"/>',
        "_rels/.rels": f'<Relationships xmlns="{PACKAGE}/relationships"><Relationship Id="a" '
        f'Type="{RELATIONS}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
        "xl/workbook.xml": workbook or f'<workbook {MAIN} xmlns:r="{RELATIONS}"><sheets>{listed}</sheets></workbook>',
        "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}/relationships">{pointed}{more_relations}'
        "</Relationships>",
    }
    for number, content in enumerate(sheets, 1):
        parts[f"xl/worksheets/sheet{number}.xml"] = f"<worksheet {MAIN}>{content}</worksheet>"
    return parts


def xlsx(*sheets: str) -> bytes:
    """A workbook whose sheets have these contents of their <worksheet> element."""
    return zipped(xlsx_parts(*sheets))


def with_part(name: str, content: bytes | str, relation: str = "") -> bytes:
    """A workbook with one reading and one part more, or another in its place."""
    parts = xlsx_parts(rows("<c><v>5.02</v></c>"), more_relations=relation)
    parts[name] = content
    return zipped(parts)


def rows(*contents: str) -> str:
    """The <sheetData> of rows with these cells."""
    return "<sheetData>" + "".join(f"<row>{content}</row>" for content in contents) + "</sheetData>"


SHARED_TEXTS = f'<Relationship Id="t" Type="{RELATIONS}/sharedStrings" Target="sharedStrings.xml"/>'
STYLES = f'<Relationship Id="s" Type="{RELATIONS}/styles" Target="styles.xml"/>'

ODS = (
    'xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0" '
    'xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" '
    'xmlns:style="urn:oasis:names:tc:opendocument:xmlns:style:1.0" '
    'xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0"'
)


def ods_content(tables: str, styles: str = "") -> str:
    """The content part of an OpenDocument workbook with these tables."""
    return (
        f"<office:document-content {ODS}><office:automatic-styles>{styles}</office:automatic-styles>"
        f"<office:body><office:spreadsheet>{tables}</office:spreadsheet></office:body></office:document-content>"
    )


def ods(tables: str, styles: str = "") -> bytes:
    """An OpenDocument workbook with these tables."""
    return zipped(
        {
            "mimetype": "application/vnd.oasis.opendocument.spreadsheet",
            "META-INF/manifest.xml": "<manifest/>",
            "content.xml": ods_content(tables, styles),
        }
    )


def xlsb(numbers: list[float], first_row: int = 0, column: int = 0) -> bytes:
    """A binary workbook with one sheet and one column of numbers ([MS-XLSB] §2.1.4 records, §2.5.168 strings)."""

    def record(kind: int, content: bytes = b"") -> bytes:
        coded = bytes([kind]) if kind < 128 else bytes([kind & 0x7F | 0x80, kind >> 7])
        return coded + bytes([len(content)]) + content

    def wide(text: str) -> bytes:
        return struct.pack("<I", len(text)) + text.encode("utf-16-le")

    book = b"".join(
        [
            record(131), record(143), record(156, struct.pack("<II", 0, 1) + wide("rId1") + wide("R")),
            record(144), record(132),
        ]
    )  # fmt: skip
    last = first_row + len(numbers) - 1
    sheet = record(129) + record(148, struct.pack("<4I", 0, last, 0, column)) + record(145)
    sheet += record(0, struct.pack("<IIHBBBI", 0, 0, 300, 0, 0, 0, 0)) + record(5, struct.pack("<IId", 0, 0, 0.5))
    for row, number in enumerate(numbers, first_row):
        sheet += record(0, struct.pack("<IIHBBBI", row, 0, 300, 0, 0, 0, 0))
        sheet += record(5, struct.pack("<IId", column, 0, number))
    sheet += record(146) + record(130)
    parts = xlsx_parts()
    del parts["xl/workbook.xml"], parts["xl/_rels/workbook.xml.rels"]
    return zipped(
        {
            **parts,
            "_rels/.rels": str(parts["_rels/.rels"]).replace("workbook.xml", "workbook.bin"),
            "xl/workbook.bin": book,
            "xl/_rels/workbook.bin.rels": f'<Relationships xmlns="{PACKAGE}/relationships"><Relationship Id="rId1" '
            f'Type="{RELATIONS}/worksheet" Target="worksheets/sheet1.bin"/></Relationships>',
            "xl/worksheets/sheet1.bin": sheet,
        }
    )


def compound(streams: Mapping[str, bytes]) -> bytes:
    """A compound file with these streams ([MS-CFB] §2.2 to §2.6), each padded to full sectors of 512 bytes."""
    contents = [content.ljust(max(4096, -(-len(content) // 512) * 512), b"\0") for content in streams.values()]
    count = sum(len(content) // 512 for content in contents)
    table, entries, first = [], [], 0
    for name, content in zip(streams, contents, strict=True):
        length = len(content) // 512
        table += [*range(first + 1, first + length), 0xFFFFFFFE]
        entries.append(_entry(name, 2, first, len(content)))
        first += length
    directory = (_entry("Root Entry", 5, 0xFFFFFFFE, 0) + b"".join(entries)).ljust(512, b"\0")
    sectors = -(-(count + 2) // 127)
    table += [0xFFFFFFFE] + [0xFFFFFFFD] * sectors
    table += [0xFFFFFFFF] * (sectors * 128 - len(table))
    where = [count + 1 + n for n in range(sectors)]
    header = struct.pack("<8s16xHHHHH6xIIIIIIIII", b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1", 0x3E, 3, 0xFFFE, 9, 6, 0,
                         sectors, count, 0, 4096, 0xFFFFFFFE, 0, 0xFFFFFFFE, 0)  # fmt: skip
    header += struct.pack("<109I", *where, *[0xFFFFFFFF] * (109 - sectors))
    return header + b"".join(contents) + directory + struct.pack(f"<{len(table)}I", *table)


def _entry(name: str, kind: int, first: int, size: int) -> bytes:
    coded = (name + "\0").encode("utf-16-le")
    return struct.pack("<64sHBB3I36xIQ", coded, len(coded), kind, 1, *[0xFFFFFFFF] * 3, first, size)


def xls_stream(sheet_records: bytes, before: bytes = b"", version: int = 0x600) -> bytes:
    """The stream "Workbook" with one sheet of these records ([MS-XLS] §2.4)."""
    begin = biff(0x809, struct.pack("<HH", version, 5) + b"\0" * 12)
    sheet = biff(0x809, struct.pack("<HH", version, 16) + b"\0" * 12) + sheet_records + biff(0x0A)

    def globals_with(place: int) -> bytes:
        return begin + before + biff(0x85, struct.pack("<IBBB", place, 0, 0, 1) + b"\0R") + biff(0x0A)

    return globals_with(len(globals_with(0))) + sheet


def biff(kind: int, content: bytes = b"") -> bytes:
    """One record."""
    return struct.pack("<HH", kind, len(content)) + content


def texts(sheet: Sheet) -> list[list[str]]:
    """The texts of all cells, row by row."""
    return [[cell.text for cell in row] for row in sheet.rows]


def column(sheet: Sheet, place: int) -> list[str]:
    """The texts of one column, "" where a row is shorter."""
    return [row[place].text if place < len(row) else "" for row in sheet.rows]


def kinds(sheet: Sheet, place: int) -> list[str]:
    """The kinds of the cells of one column."""
    return [row[place].kind if place < len(row) else "text" for row in sheet.rows]


def file(name: str) -> tuple[Sheet, ...]:
    """The sheets of one of the files kept beside the tests."""
    return sheets_of((FILES / name).read_bytes(), name)
