"""What a file is, judged by its content and never by its name.

Sources of the first bytes: ISO 32000 (PDF), ISO/IEC 15948 (PNG), ISO/IEC 10918-5 (JPEG), RFC 1952 (gzip), APPNOTE 6.3
(zip), [MS-CFB] §2.2 (the compound file of .xls), the others common practice.
"""

from typing import Literal

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.compound import Compound
from meanlab.intake.page_tables import is_page
from meanlab.intake.parts import DAMAGED, LOCKED, Parts
from meanlab.intake.xls import is_readable
from meanlab.intake.xml_workbooks import is_xml_workbook

Workbook = Literal["xlsx", "xlsb", "ods", "xls", "early xls", "xml", "page"]

_ZIP = b"PK\x03\x04"
_EMPTY_ZIP = b"PK\x05\x06"
_COMPOUND = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
_BARE_SHEETS = (b"\x09\x08\x10\x00", b"\x09\x08\x08\x00", b"\x09\x04\x06\x00", b"\x09\x02\x06\x00", b"\x09\x00\x04\x00")
_OTHERS = (
    (b"%PDF", "a PDF document"),
    (b"\x89PNG", "a picture (PNG)"),
    (b"\xff\xd8\xff", "a picture (JPEG)"),
    (b"GIF8", "a picture (GIF)"),
    (b"BM", "a picture (BMP)"),
    (b"II*\x00", "a picture (TIFF)"),
    (b"MM\x00*", "a picture (TIFF)"),
    (b"RIFF", "a picture, sound or film"),
    (b"MZ", "a program"),
    (b"\x7fELF", "a program"),
    (b"\x1f\x8b", "a compressed file (gzip)"),
    (b"7z\xbc\xaf", "a compressed archive (7z)"),
    (b"Rar!", "a compressed archive (rar)"),
    (b"BZh", "a compressed file (bzip2)"),
    (b"\xfd7zXZ", "a compressed file (xz)"),
    (b"{\\rtf", "a formatted text document (RTF)"),
    (b"SQLite format 3\x00", "a database"),
    (b"\x89HDF", "a scientific data file (HDF5)"),
    (b"CDF\x01", "a scientific data file (netCDF)"),
    (b"CDF\x02", "a scientific data file (netCDF)"),
    (b"PAR1", "a table in Parquet form"),
)
_TEXT_LIKE_STARTS = (b"BM", b"MZ", b"GIF8", b"RIFF", b"BZh", b"PAR1", b"Rar!")
_SAVE_AS = "Save the readings as .xlsx or .csv and choose that file."


def is_plain_text(data: bytes) -> bool:
    """False for a workbook, for a web page or XML text that holds one, and for what sheets_of tells by its name.

    >>> is_plain_text(b"5.02"), is_plain_text(b"%PDF-1.7 ..."), is_plain_text(b"<html><table>")
    (True, False, False)
    """
    if data.startswith((_ZIP, _EMPTY_ZIP, _COMPOUND)) or _bare_sheet(data) or other_kind(data):
        return False
    return not (is_page(data) or is_xml_workbook(data))


def other_kind(data: bytes) -> str:
    """The kind of a file that is neither text nor workbook, in words, or ``""``.

    >>> other_kind(b"%PDF-1.7 ..."), other_kind(b"BM;5.02")
    ('a PDF document', '')
    """
    start = data[:1024].lstrip(b"\xef\xbb\xbf \r\n\t")
    for first, kind in _OTHERS:
        if start.startswith(first) and (first not in _TEXT_LIKE_STARTS or _holds_control_bytes(data)):
            return kind
    return "no text and no workbook" if _is_noise(data) else ""


def workbook_kind(data: bytes, filename: str = "") -> tuple[Workbook, Parts | None]:
    """Which workbook a file is, with its parts where it is zipped; raises IntakeComplaint when it is none."""
    if not data:
        raise IntakeComplaint("The file is empty: it holds 0 bytes. Choose the file that holds the readings.")
    if data.startswith((_ZIP, _EMPTY_ZIP)):
        parts = Parts(data)
        return _zipped_kind(parts), parts
    if data.startswith(_COMPOUND):
        return _compound_kind(data), None
    if is_xml_workbook(data):
        return "xml", None
    if is_page(data):
        return "page", None
    if _bare_sheet(data):
        raise IntakeComplaint(f"The file is a workbook of a very old kind that cannot be read. {_SAVE_AS}")
    kind = other_kind(data) or "a text"
    named = f" although its name ends in .{_suffix(filename)}" if _suffix(filename) in _SUFFIXES else ""
    raise IntakeComplaint(f"The file is {kind}{named}, and cannot be read as a workbook. {_SAVE_AS}")


_SUFFIXES = ("xlsx", "xlsm", "xls", "xlsb", "ods", "csv", "tsv", "txt")


def _suffix(filename: str) -> str:
    return filename.rpartition(".")[2].lower() if "." in filename else ""


def _zipped_kind(parts: Parts) -> Workbook:
    if "mimetype" in parts:
        return _open_document_kind(parts)
    if "[Content_Types].xml" in parts or "xl/workbook.xml" in parts:
        for folder, kind in (("word/", "a text document"), ("ppt/", "a set of slides")):
            if any(name.startswith(folder) for name in parts.names()):
                raise IntakeComplaint(f"The file is {kind}, no workbook. {_SAVE_AS}")
        if "xl/workbook.bin" in parts:
            return "xlsb"
        return "xlsx"
    if "content.xml" in parts and "META-INF/manifest.xml" in parts:
        return "ods"
    raise IntakeComplaint(
        "The file is a zip archive, no workbook. Unpack it and choose the .xlsx, .ods or .csv file inside."
    )


def _open_document_kind(parts: Parts) -> Workbook:
    kind = parts.start("mimetype", 100).decode("ascii", "replace").strip()
    if not kind.startswith("application/vnd.oasis.opendocument.spreadsheet"):
        what = "a text document" if "opendocument.text" in kind else "a document of another kind"
        raise IntakeComplaint(f"The file is {what}, no workbook. {_SAVE_AS}")
    if "content.xml" not in parts:
        raise IntakeComplaint(DAMAGED)
    return "ods"


def _compound_kind(data: bytes) -> Workbook:
    book = Compound(data)
    names = book.names()
    if "EncryptedPackage" in names:
        raise IntakeComplaint(LOCKED)
    if "WordDocument" in names:
        raise IntakeComplaint(f"The file is a text document, no workbook. {_SAVE_AS}")
    if "Workbook" in names or "Book" in names:
        return "xls" if "Workbook" in names and is_readable(book.stream("Workbook")) else "early xls"
    raise IntakeComplaint(f"The file is an office file of another kind; no workbook is in it. {_SAVE_AS}")


def _bare_sheet(data: bytes) -> bool:
    return data.startswith(_BARE_SHEETS)


def _holds_control_bytes(data: bytes) -> bool:
    return any(byte < 9 for byte in data[:1024])


def _is_noise(data: bytes) -> bool:
    """Bytes that no text in any usual encoding holds; UTF-16 and UTF-32 hold zero bytes, but in step."""
    start = data[:4096]
    if start.startswith((b"\xff\xfe", b"\xfe\xff")):
        return False
    controls = sum(byte < 9 or 14 <= byte < 27 for byte in start.replace(b"\0", b""))
    return controls > len(start) * 0.02
